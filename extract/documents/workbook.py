"""Workbooks: XLSX, XLS and ODS, every sheet as tables with its titles and footnotes as lines."""

from __future__ import annotations

import datetime
import io
import json
import re
from collections.abc import Iterator, Mapping, Sequence
from typing import Any

from extract.documents import numberformat, opendocument
from extract.documents.grid import Placer, address, column_letters, placed_cells, titled
from extract.documents.model import Cell, Document, DocumentError, Line, Segment, Table
from extract.documents.opendocument import DAMAGED, LOCKED, ZIP_FAULTS
from extract.documents.spacing import pieces
from extract.documents.workbookparts import SheetStyles, sheet_styles
from extract.model import Note, Where, place

Grid = list[list[str]]
Span = tuple[int, int, int, int]
"""First row, first column, last row, last column; all from 0, the last ones included."""


def read(data: bytes) -> Document:
    """Tables and lines of all sheets that are not hidden; `where` is the sheet and the cell."""
    import python_calamine

    try:
        with python_calamine.CalamineWorkbook.from_filelike(io.BytesIO(data)) as book:
            return _document(book, data)
    except python_calamine.PasswordError as fault:
        raise DocumentError(LOCKED) from fault
    except (python_calamine.CalamineError, *ZIP_FAULTS) as fault:
        raise DocumentError(LOCKED if "password" in str(fault).lower() else DAMAGED) from fault


def read_open(data: bytes) -> Document:
    """The same for an ODS file, whose cells hold the text that they show."""
    blocks: list[Table | Line] = []
    notes: list[Note] = []
    for sheet in opendocument.read_sheets(data):
        if sheet.hidden:
            notes.append(_hidden_note(sheet.name))
        else:
            blocks.extend(_Sheet(sheet.name, sheet.grid, sheet.spans).blocks())
    return _whole(blocks, notes)


def _hidden_note(name: str) -> Note:
    return Note(level="info", message=f"Hidden sheet {name!r} left out.", where=Where(sheet=name))


def _whole(blocks: list[Table | Line], notes: list[Note]) -> Document:
    if not blocks:
        raise DocumentError("No sheet that the workbook shows holds any text. Look whether the right file was saved.")
    return Document("xlsx", titled(blocks), notes=tuple(notes))


def _document(book: Any, data: bytes) -> Document:
    from python_calamine import SheetTypeEnum, SheetVisibleEnum

    blocks: list[Table | Line] = []
    notes: list[Note] = []
    styles = sheet_styles(data)
    for sheet in book.sheets_metadata:
        if sheet.typ != SheetTypeEnum.WorkSheet:
            continue
        if sheet.visible != SheetVisibleEnum.Visible:
            notes.append(_hidden_note(sheet.name))
            continue
        content = book.get_sheet_by_name(sheet.name)
        style = styles.get(sheet.name, SheetStyles())
        rows = content.to_python(skip_empty_area=False)
        grid = _printed(rows, style)
        spans = [(*first, *last) for first, last in content.merged_cell_ranges or ()]
        blocks.extend(_Sheet(sheet.name, grid, spans).blocks())
        notes.extend(_formula_note(sheet.name, style))
    if _has_old_formats(data):
        notes.append(
            Note(
                level="warning",
                message="This old XLS file shows words by number formats, which only XLSX gives: save it as XLSX.",
            )
        )
    return _whole(blocks, notes)


def _has_old_formats(data: bytes) -> bool:
    """Whether an XLS file (not a ZIP archive) holds a number format with words in it."""
    if data.startswith(b"PK"):
        return False
    wide = rb'[0#?]\0(?:\\\0)?(?:[ _]\0)*"\0(?:[^"\0][\0-\xff]){1,20}"\0'
    return bool(re.search(rb'[0#?]\\?[ _]*"[^"\0-\x1f]{1,20}"', data) or re.search(wide, data))


def _formula_note(name: str, style: SheetStyles) -> Iterator[Note]:
    if style.uncalculated:
        first = style.uncalculated[0]
        yield Note(
            level="warning",
            message=f"{len(style.uncalculated)} formulas have no stored result, the first in cell {first}; they "
            "count as empty. Open the workbook in a spreadsheet program and save it again.",
            where=Where(sheet=name, cell=first),
        )


def _printed(rows: list[list[Any]], style: SheetStyles) -> Grid:
    """Every value as text, as a person sees it."""
    plain = _Plain()
    grid = [[plain[value] if type(value) is float else _text(value) for value in row] for row in rows]
    for (row, column), code in style.formats.items():
        if row < len(rows) and column < len(rows[row]):
            value = rows[row][column]
            if isinstance(value, int | float) and not isinstance(value, bool):
                grid[row][column] = numberformat.shown(value, code)
    return grid


class _Plain(dict[float, str]):
    """Numbers as text, each worked out once: lists repeat their values."""

    def __missing__(self, value: float) -> str:
        return self.setdefault(value, numberformat.general(value))


def _text(value: Any) -> str:
    if isinstance(value, str):
        return value.strip()
    if isinstance(value, bool):
        return "TRUE" if value else "FALSE"
    if isinstance(value, int | float):
        return numberformat.general(value)
    if isinstance(value, datetime.datetime):
        return value.date().isoformat() if value.time() == datetime.time() else value.isoformat(sep=" ")
    if isinstance(value, datetime.date | datetime.time):
        return value.isoformat()
    return str(value)


class _Sheet:
    """A sheet's grid, cut where separate things stand on it."""

    def __init__(self, name: str, grid: Grid, spans: Sequence[Span]) -> None:
        self.name = name
        self.grid = grid
        self.spans: Mapping[tuple[int, int], Span] = {(span[0], span[1]): span for span in spans}
        self.inner = {
            (row, column): (span[0], span[1])
            for span in spans
            for row in range(span[0], min(span[2], len(grid)) + 1)
            for column in range(span[1], span[3] + 1)
        }

    def blocks(self) -> Iterator[Table | Line]:
        """Titles, tables and footnotes from top to bottom."""
        for first, last in self._bands():
            yield from self._band(first, last, is_last=last == len(self.grid))

    def _filled(self, row: int) -> list[int]:
        return [column for column, text in enumerate(self.grid[row]) if text]

    def _bands(self) -> Iterator[tuple[int, int]]:
        """Runs of rows (last not included) between empty rows; a list goes on after an empty row under its header."""
        start: int | None = None
        bands: list[tuple[int, int]] = []
        for row, texts in enumerate(self.grid):
            if any(texts) or self._is_covered(row):
                start = row if start is None else start
            elif start is not None:
                bands.append((start, row))
                start = None
        if start is not None:
            bands.append((start, len(self.grid)))
        while bands:
            first, last = bands.pop(0)
            while bands and self._goes_on((first, last), bands[0]):
                last = bands.pop(0)[1]
            yield first, last

    def _is_covered(self, row: int) -> bool:
        return any(span[0] <= row <= span[2] and self.grid[span[0]][span[1]] for span in self.spans.values())

    def _goes_on(self, band: tuple[int, int], following: tuple[int, int]) -> bool:
        """Whether the rows after an empty row belong to the same list: as wide, and they start with data, no header."""
        above, below = self._filled(band[1] - 1), self._filled(following[0])
        if len(above) < 3 or len(below) < 3 or band[1] - band[0] < 2:
            return False
        same = len(set(above) & set(below)) * 4 >= 3 * max(len(above), len(below))
        numbers = [any(sign.isdigit() for sign in self.grid[following[0]][column]) for column in below]
        numbers_above = [any(sign.isdigit() for sign in self.grid[band[1] - 1][column]) for column in above]
        return same and sum(numbers) * 4 >= 3 * sum(numbers_above) > 0

    def _band(self, first: int, last: int, *, is_last: bool) -> Iterator[Table | Line]:
        above = first
        while first < last and self._is_prose(first):
            first += 1
        for row in range(above, first):
            yield self._line(row, heading=first < last or (last - above == 1 and not is_last))
        end = last
        while end > first and self._is_prose(end - 1):
            end -= 1
        if end > first:
            for left, right, top, bottom in self._side_by_side(first, end):
                yield self._table(left, right, top, bottom)
        for row in range(end, last):
            yield self._line(row, heading=False)

    def _is_prose(self, row: int) -> bool:
        """Whether a row holds a single text, merged or not, that is no number: a title or a footnote."""
        filled = self._filled(row)
        return len(filled) == 1 and not _is_number(self.grid[row][filled[0]]) and not self._is_tall(row, filled[0])

    def _is_tall(self, row: int, column: int) -> bool:
        span = self.spans.get((row, column))
        return span is not None and span[2] > span[0]

    def _line(self, row: int, *, heading: bool) -> Line:
        column = self._filled(row)[0]
        where = Where(sheet=self.name, cell=address(row, column))
        texts = [piece.text for line in self.grid[row][column].split("\n") for piece in pieces(line)]
        return Line(tuple(Segment(text, where) for text in texts), where, heading=heading)

    def _side_by_side(self, first: int, last: int) -> Iterator[tuple[int, int, int, int]]:
        """Blocks of a band (left, right, top, bottom; ends not included), parted where two tables stand."""
        width = max(len(self.grid[row]) for row in range(first, last))
        used = [
            any(column < len(self.grid[row]) and self.grid[row][column] for row in range(first, last))
            for column in range(width)
        ]
        for row, column in self.inner:
            if (
                first <= row < last
                and column < width
                and self.grid[self.inner[row, column][0]][self.inner[row, column][1]]
            ):
                used[column] = True
        groups: list[tuple[int, int]] = []
        start: int | None = None
        for column, filled in enumerate([*used, False]):
            if filled and start is None:
                start = column
            elif not filled and start is not None:
                groups.append((start, column))
                start = None
        merged = groups[:1]
        for group in groups[1:]:
            if self._is_separate(merged[-1], group, first, last):
                merged.append(group)
            else:
                merged[-1] = (merged[-1][0], group[1])
        for left, right in merged:
            top, bottom = self._extent(left, right, first, last)
            yield left, right, top, bottom

    def _extent(self, left: int, right: int, first: int, last: int) -> tuple[int, int]:
        rows = [row for row in range(first, last) if any(self.grid[row][left:right])]
        return rows[0], rows[-1] + 1

    def _is_separate(self, left: tuple[int, int], right: tuple[int, int], first: int, last: int) -> bool:
        """Whether two groups of columns are two tables: their heads repeat, or their heights differ clearly."""
        top, bottom = self._extent(*left, first, last)
        other_top, other_bottom = self._extent(*right, first, last)
        if min(left[1] - left[0], right[1] - right[0]) < 2:
            return False
        if top != other_top or abs(bottom - other_bottom) > max(2, (bottom - top) // 3):
            return True
        heads = {text for text in self.grid[top][left[0] : left[1]] if text}
        repeated = [text for text in self.grid[top][right[0] : right[1]] if text]
        return len(repeated) > 1 and sum(text in heads for text in repeated) * 2 >= len(repeated)

    def _table(self, left: int, right: int, top: int, bottom: int) -> Table:
        places = _SheetPlaces(self.name, top, left)
        texts = [texts[left:right] for texts in self.grid[top:bottom]]
        merged = self._merged(left, right, top, bottom, places) if self.spans else {}
        cells = placed_cells(texts, right - left, places, merged)
        return Table(cells, bottom - top, right - left, places(0, 0))

    def _merged(self, left: int, right: int, top: int, bottom: int, places: Placer) -> dict[tuple[int, int], Cell]:
        """The merged cells of a table that hold a text, by row and column in it."""
        found: dict[tuple[int, int], Cell] = {}
        for (row, column), span in self.spans.items():
            if not (top <= row < bottom and left <= column < min(right, len(self.grid[row]))):
                continue
            if text := self.grid[row][column]:
                height, width = min(span[2] + 1, bottom) - row, min(span[3] + 1, right) - column
                at = (row - top, column - left)
                found[at] = Cell(text, *at, places(*at), height, width)
        return found


class _SheetPlaces:
    """Places on a sheet, for a table whose first cell is at `top` and `left`."""

    def __init__(self, name: str, top: int, left: int) -> None:
        self._name = name
        self._top = top
        self._left = left

    def __call__(self, row: int, column: int) -> Where:
        return place(sheet=self._name, cell=address(self._top + row, self._left + column))

    def json_before(self, column: int) -> str:
        name = json.dumps(self._name, ensure_ascii=False)
        return f'{{"sheet": {name}, "cell": "{column_letters(self._left + column)}'

    def json_of_row(self, row: int) -> str | None:
        return f'{self._top + row + 1}"'


def _is_number(text: str) -> bool:
    return bool(re.fullmatch(r"[-+±]?\d[\d.,\s]*", text))
