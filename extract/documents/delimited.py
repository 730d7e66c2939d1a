"""Lists with a delimiter between the cells: CSV and its kin with semicolon, tab or pipe."""

from __future__ import annotations

import csv
from collections import Counter
from collections.abc import Iterable, Iterator
from itertools import islice
from typing import Literal

from extract.documents.decoding import decode
from extract.documents.grid import address, column_letters, placed_cells
from extract.documents.model import Document, DocumentError, Table
from extract.model import Note, Where, place

# Where two part the lines equally well, the one further left: a comma may be a decimal one.
_DELIMITERS = "\t;|,"
_SAMPLE_RECORDS = 200
_LONGEST_CELL = 200  # lines; more than that is a quote that nobody closed


class _Records:
    """Records of a text and the line on which each starts."""

    def __init__(self, lines: list[str], delimiter: str, *, quoted: bool = True) -> None:
        self.texts: list[list[str]] = []
        self.first_lines: list[int] = []
        quoting: Literal[0, 3] = csv.QUOTE_MINIMAL if quoted else csv.QUOTE_NONE
        reader = csv.reader(lines, delimiter=delimiter, quoting=quoting, skipinitialspace=delimiter != "\t")
        line = 1
        for texts in reader:
            self.texts.append(texts)
            self.first_lines.append(line)
            line = reader.line_num + 1
        self.longest = max(
            (after - before for before, after in zip(self.first_lines, self.first_lines[1:] + [line], strict=False)),
            default=0,
        )


def read(data: bytes) -> Document:
    """One table of all records; `where` is the line on which a cell starts and its address in a spreadsheet."""
    text, notes = decode(data)
    lines = _lines(text)
    skipped = 0
    if lines and lines[0].lower().startswith("sep=") and len(lines[0].rstrip("\n")) == 5:
        delimiter, skipped = lines[0][4], 1
    else:
        delimiter = sniff(text) or ","
    records, more = _records(lines[skipped:], delimiter)
    if not any(any(texts) for texts in records.texts):
        raise DocumentError("The list is empty: no cell in it holds anything. Export it again.")
    return Document("csv", (_table(records, skipped),), notes=notes + more)


def sniff(text: str) -> str | None:
    """The delimiter that parts most lines into the same number of cells, or None where none does.

    Two columns parted by commas are enough only where every line has them: a comma in prose parts a line as well.
    """
    lines = _lines(text, limit=4 * _SAMPLE_RECORDS)
    best: tuple[float, int, int] | None = None
    for rank, delimiter in enumerate(_DELIMITERS):
        counted = _widths(lines, delimiter)
        if not counted:
            continue
        width, count = max(Counter(counted).items(), key=lambda item: (item[1] * (item[0] > 1), item[0]))
        share = count / len(counted)
        needed = 0.6 if width > 3 else 0.8 if width == 3 or delimiter != "," else 1.0
        if width < 2 or count < 2 or share < needed:
            continue
        found = (round(share, 1), -rank, width)
        best = max(best, found) if best else found
    return _DELIMITERS[-best[1]] if best else None


def _widths(lines: Iterable[str], delimiter: str) -> list[int]:
    """Numbers of cells of the first records, empty ones left out."""
    reader = csv.reader(lines, delimiter=delimiter, skipinitialspace=delimiter != "\t")
    try:
        return [len(texts) for texts in islice(reader, _SAMPLE_RECORDS) if any(texts)]
    except csv.Error:
        return []


def _lines(text: str, limit: int | None = None) -> list[str]:
    """Lines with their ends, as the csv module wants them; other separators of Unicode part no lines."""
    ends = text.replace("\r\n", "\n").replace("\r", "\n").replace("\0", "")
    found = ends.split("\n", limit) if limit else ends.split("\n")
    lines = [line + "\n" for line in found[:limit]]
    return lines[:-1] if lines and lines[-1] == "\n" else lines


def _records(lines: list[str], delimiter: str) -> tuple[_Records, tuple[Note, ...]]:
    try:
        records = _Records(lines, delimiter)
        if records.longest <= _LONGEST_CELL:
            return records, ()
    except csv.Error:  # a cell longer than the module allows: the same fault, an open quote
        pass
    note = Note(
        level="warning",
        message='A quotation mark (") is not closed; all quotation marks were read as plain signs. Look at the cells.',
    )
    try:
        return _Records(lines, delimiter, quoted=False), (note,)
    except csv.Error as fault:
        raise DocumentError(f"The list cannot be parted into cells ({fault}). Export it again as CSV.") from fault


def _table(records: _Records, skipped: int) -> Table:
    texts = records.texts
    width = max(map(len, texts))
    cells = placed_cells(texts, width, _LinePlaces(records, skipped))
    return Table(cells, len(texts), width, Where(line=1 + skipped, cell="A1"))


class _LinePlaces:
    """Places in a list: the line on which a cell starts, and its address in a spreadsheet."""

    def __init__(self, records: _Records, skipped: int) -> None:
        self._first_lines = [line + skipped for line in records.first_lines]
        following = [*records.first_lines[1:], records.first_lines[-1] + records.longest]
        self._broken = {
            row: records.texts[row]
            for row, (first, after) in enumerate(zip(records.first_lines, following, strict=True))
            if after - first > 1 and any("\n" in text for text in records.texts[row])
        }

    def __call__(self, row: int, column: int) -> Where:
        line = self._first_lines[row]
        if row in self._broken:
            line += sum(text.count("\n") for text in islice(self._broken[row], column))
        return place(line=line, cell=address(row, column))

    def json_before(self, column: int) -> str:
        return f'{{"cell": "{column_letters(column)}'

    def json_of_row(self, row: int) -> str | None:
        return None if row in self._broken else f'{row + 1}", "line": {self._first_lines[row]}'


def looks_delimited(text: str) -> bool:
    """Whether a text without a telling name is a list: three columns or more, all the way down."""
    delimiter = sniff(text)
    if delimiter is None:
        return False
    lines = _lines(text, limit=4 * _SAMPLE_RECORDS)
    widths = _widths(lines, delimiter)
    return len(widths) >= 3 and _steady(widths)


def _steady(widths: Iterator[int] | list[int]) -> bool:
    width, count = Counter(widths).most_common(1)[0]
    return width >= 3 and count * 10 >= sum(Counter(widths).values()) * 9
