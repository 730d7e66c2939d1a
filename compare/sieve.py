"""Long lists: which rows of a delimited list are worth reading whole, by their frequency and package cells alone.

A part of another frequency or in another package fits no board, whatever else its row says. So of a list of thousands
the reader gets the other rows, at their own line numbers; how many were passed over, and why, is a note. Where the head
names no one column for the frequency nothing is passed over.
"""

from __future__ import annotations

import csv
import io
from collections.abc import Callable, Iterable, Sequence
from dataclasses import dataclass
from hashlib import sha256
from pathlib import Path

from compare.bench import Bench
from compare.footprint import same_package, size_mm
from compare.intake import Intake, read_bytes, read_sheets
from compare.offer import NEAR_PPM
from compare.swap import named_frequencies, the_incumbent
from extract.candidates import read
from extract.meaning import meaning
from extract.model import Note, SpecSheet
from extract.wording import read_label

LONG_LIST_BYTES = 150_000
"""Some two thousand rows: below that everything is read."""
SUFFIXES = (".csv", ".tsv")
MOST_ELSEWHERE = 20
"""Rows in another package that are read all the same, so that the list shows what else there is."""
HEAD_WITHIN = 12


@dataclass(frozen=True)
class Wanted:
    """What is looked for: the frequency, and the package where it is known."""

    frequency_mhz: float
    package: str | None


@dataclass(frozen=True)
class Sieved:
    """The list with the lines that are worth reading, the others blank, and how many were passed over."""

    text: str
    other_frequency: int = 0
    other_package: int = 0

    @property
    def note(self) -> str:
        counts = {"another frequency": self.other_frequency, "another package": self.other_package}
        said = " and ".join(f"{count} of {what}" for what, count in counts.items() if count)
        return f"a long list: {said} passed over by that cell alone, they do not fit; name one to see it whole"


Reader = Callable[[Sequence[str]], Intake]


def read_candidates(
    names: Sequence[str], incumbents: Sequence[SpecSheet], bench: Bench | None, read_all: Reader = read_sheets
) -> Intake:
    """As `read_all` reads them; of long delimited lists the rows that might stand in for the incumbent.

    Raises
    ------
    SubstituteError
        The incumbent is not exactly one part.
    """
    _, incumbent = the_incumbent(incumbents)
    named = named_frequencies(incumbent) if bench is None else {bench.requirement.frequency_mhz}
    if len(named) != 1:
        return read_all(names)
    wanted = Wanted(next(iter(named)), incumbent.package)
    sheets: list[SpecSheet] = []
    notes: list[Note] = []
    for name in names:
        intake = _long_list(name, wanted) or read_all([name])
        sheets += intake.sheets
        notes += intake.notes
    return Intake(tuple(sheets), tuple(notes))


def _long_list(name: str, wanted: Wanted) -> Intake | None:
    path = Path(name)
    if path.suffix.lower() not in SUFFIXES or not path.is_file() or path.stat().st_size < LONG_LIST_BYTES:
        return None
    data = path.read_bytes()
    try:
        text = data.decode("utf-8-sig")
    except UnicodeDecodeError:
        return None
    sieved = sieve(text, wanted)
    if sieved is None:
        return None
    sheet = read_bytes(sieved.text.encode(), name)
    note = Note(level="info", message=f"{name}: {sieved.note}")
    return Intake((sheet.model_copy(update={"sha256": sha256(data).hexdigest()}),), (note,))


def sieve(text: str, wanted: Wanted) -> Sieved | None:
    """The list with only the rows worth reading; None where nothing can be told by cells alone."""
    lines = text.splitlines()
    if '"' in text and any(line.count('"') % 2 for line in lines):
        return None  # a cell with a line break in it: lines are no rows
    delimiter = _delimiter(lines)
    rows = list(csv.reader(io.StringIO("\n".join(lines)), delimiter=delimiter)) if delimiter else []
    head = _head(rows)
    if head is None or len(rows) != len(lines):
        return None
    at, frequency, package = head
    frequencies = _Cells(frequency, lambda cell: _may_offer(cell, rows[at][frequency], wanted.frequency_mhz))
    packages = _Cells(package, lambda cell: _may_sit(cell, wanted.package))
    kept = list(lines[: at + 1])
    other_frequency = other_package = elsewhere = 0
    for line, row in zip(lines[at + 1 :], rows[at + 1 :], strict=True):
        if not frequencies.keep(row):
            other_frequency += 1
            kept.append("")
        elif packages.keep(row) or elsewhere < MOST_ELSEWHERE:
            elsewhere += not packages.keep(row)
            kept.append(line)
        else:
            other_package += 1
            kept.append("")
    if not other_frequency and not other_package:
        return None
    return Sieved("\n".join(kept), other_frequency, other_package)


class _Cells:
    """A column's test, made once for each distinct text; a row without the cell is kept."""

    def __init__(self, index: int | None, test: Callable[[str], bool]) -> None:
        self.index = index
        self.test = test
        self.known: dict[str, bool] = {}

    def keep(self, row: Sequence[str]) -> bool:
        if self.index is None or self.index >= len(row):
            return True
        cell = row[self.index].strip()
        if cell not in self.known:
            self.known[cell] = not cell or self.test(cell)
        return self.known[cell]


def _delimiter(lines: Sequence[str]) -> str | None:
    """The mark that the first lines have most often, and all alike."""
    first = [line for line in lines[:40] if line.strip()][:20]
    counts = {mark: min((line.count(mark) for line in first[-5:]), default=0) for mark in "\t;,|"}
    mark = max(counts, key=lambda one: counts[one])
    return mark if counts[mark] >= 2 else None


def _head(rows: Sequence[Sequence[str]]) -> tuple[int, int, int | None] | None:
    """Line of the head, its one frequency column, and its one package column if it has one."""
    for at, row in enumerate(rows[:HEAD_WITHIN]):
        labels = [read_label(cell) if cell.strip() else None for cell in row]
        if sum(label is not None for label in labels) < 2:
            continue
        found = [index for index, label in enumerate(labels) if label is not None and label.field == "frequency_mhz"]
        packages = [index for index, cell in enumerate(row) if cell.strip() and meaning(cell).identity == "package"]
        return (at, found[0], packages[0] if len(packages) == 1 else None) if len(found) == 1 else None
    return None


def _may_offer(cell: str, head: str, frequency_mhz: float) -> bool:
    """False only where every value that the cell states lies further off than "near"; a range holds all within it."""
    label = read_label(head)
    unit = None if label is None else label.unit
    values = read(cell, "frequency_mhz", unit, None)
    return not values or any(
        _holds(_stated(value.min, value.typ, value.max, value.options), frequency_mhz) for value in values
    )


def _stated(*bounds: float | None | Iterable[float]) -> list[float]:
    flat: list[float] = []
    for bound in bounds:
        if isinstance(bound, int | float):
            flat.append(float(bound))
        elif bound is not None:
            flat += bound
    return flat


def _holds(stated: Sequence[float], frequency_mhz: float) -> bool:
    apart = 2 * NEAR_PPM * 1e-6 * frequency_mhz
    return bool(stated) and min(stated) - apart <= frequency_mhz <= max(stated) + apart


def _may_sit(cell: str, package: str | None) -> bool:
    """False only where both give a size and they are not the same."""
    if package is None or size_mm(package) is None or size_mm(cell) is None:
        return True
    return same_package(package, cell)
