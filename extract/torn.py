"""Tables copied out of a PDF with one cell a line: headings, then for each row its label, conditions, numbers and unit.

Empty cells leave no line, so that only the count of numbers and the field say under which heading they stood.
"""

from __future__ import annotations

import re
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, field

from extract.conditions import kinds_of
from extract.documents.model import Line
from extract.entries import EMPTY_CELLS_LOST, Bound, Entry, Piece, Value
from extract.fields import field_of
from extract.fold import fold
from extract.heads import BOUNDS, is_unit
from extract.meaning import meaning
from extract.vocabulary import vocabulary

_HEADS = ("parameter", "symbol", "condition", "remarks", "value", "min", "typ", "max", "unit")
_NUMBER = re.compile(r"[-+±≤≥<>~]?\s?\d+(?:[.,]\d+)*")
_EMPTY = re.compile(r"[-–—]+")
_RANGED = ("operating_temperature_c", "storage_temperature_c", "frequency_mhz", "turnover_temperature_c")
LEAST_ROWS = 3
LONGEST_HEADINGS = 80


@dataclass(slots=True)
class _Row:
    """One row under one label; a further band begins a row of its own."""

    label: Line
    conditions: list[Line] = field(default_factory=list)
    numbers: list[Line] = field(default_factory=list)
    unit: str = ""


def torn_rows(lines: Sequence[Line], start: int) -> tuple[list[Entry], int]:
    """Entries of such a table whose headings begin at `start`, and how many lines it takes; nothing where none does."""
    bounds, index = _headings(lines, start)
    if len(bounds) < 2:
        return [], 0
    rows: list[_Row] = []
    while index < len(lines) and _is_label(lines[index]):
        more, index = _rows_of(lines, index)
        rows += more
    told = [row for row in rows if row.numbers]
    if len(told) < LEAST_ROWS:
        return [], 0
    return [entry for row in rows for entry in _entry(row, bounds)], index - start


def spaced_rows(lines: Sequence[Line], start: int) -> tuple[list[Entry], int]:
    """Rows that single spaces hold together under a line of headings ("Parameter Min Typ Max Unit"): "ESR - - 80 Ω".

    Each row has as many numbers or dashes as there are bounds, and what stands behind them is the unit.
    """
    bounds = _bounds_on_one_line(lines[start])
    if len(bounds) < 2:
        return [], 0
    entries: list[Entry] = []
    index = start + 1
    while index < len(lines) and (entry := _spaced_row(lines[index], bounds)) is not None:
        entries.append(entry)
        index += 1
    return (entries, index - start) if len(entries) >= LEAST_ROWS else ([], 0)


def _bounds_on_one_line(line: Line) -> list[str]:
    if len(line.segments) != 1 or len(line.text) > LONGEST_HEADINGS or any(c.isdigit() for c in line.text):
        return []
    words = fold(line.text).split()
    roles = [meaning(word).role for word in words]
    bounds = [role for role in roles if role in BOUNDS]
    return bounds if words and all(role in _HEADS for role in roles) and len(set(bounds)) == len(bounds) else []


def _spaced_row(line: Line, bounds: Sequence[str]) -> Entry | None:
    words = fold(line.text).split() if len(line.segments) == 1 else []
    cells = [index for index, word in enumerate(words) if _NUMBER.fullmatch(word) or _EMPTY.fullmatch(word)]
    if len(cells) < len(bounds):
        return None
    first, last = cells[-len(bounds)], cells[-1]
    label, unit = " ".join(words[:first]), " ".join(words[last + 1 :])
    known = meaning(label)
    if last - first != len(bounds) - 1 or not (known.label or known.trap) or (unit and not _is_printed_unit(unit)):
        return None
    placed = zip(bounds, words[first : last + 1], strict=True)
    values = tuple(Value(Piece(w, line.where), bound=BOUNDS[b]) for b, w in placed if not _EMPTY.fullmatch(w))
    size, _, year = unit.partition("/")
    return Entry(Piece(label, line.where), values, size, "", (f"/{year}",) if year else (), source="pair")


def _is_printed_unit(text: str) -> bool:
    return is_unit(text) or is_unit(text.split("/", maxsplit=1)[0])


def _headings(lines: Sequence[Line], start: int) -> tuple[list[str], int]:
    """The bounds that the headings name, in order, and the first line behind the headings."""
    index, bounds = start, []
    while index < len(lines) and len(lines[index].segments) == 1:
        role = meaning(lines[index].text).role
        role = "typ" if role is None and fold(lines[index].text).strip(". ").casefold() == "typ" else role
        if role not in _HEADS:
            break
        if role in BOUNDS:
            bounds.append(role)
        index += 1
    return (bounds, index) if index - start > len(bounds) else ([], start)


def _is_label(line: Line) -> bool:
    known = meaning(line.text)
    return (
        len(line.segments) == 1
        and not line.heading
        and not is_unit(line.text)
        and not _NUMBER.fullmatch(fold(line.text))
        and fold(line.text).split(maxsplit=1)[0].casefold() not in vocabulary().at_words
        and (known.head is not None or known.trap is not None)
    )


def _rows_of(lines: Sequence[Line], start: int) -> tuple[list[_Row], int]:
    """The rows under the label at `start`, and the line behind them: the next label, or what is no cell."""
    label = lines[start]
    rows = [_Row(label)]
    index = start + 1
    while index < len(lines) and len(lines[index].segments) == 1 and not lines[index].heading:
        line, text = lines[index], fold(lines[index].text)
        if _NUMBER.fullmatch(text) or _EMPTY.fullmatch(text):
            if rows[-1].unit:
                break
            rows[-1].numbers.append(line)
        elif is_unit(text.split("/", maxsplit=1)[0]) and rows[-1].numbers and not rows[-1].unit:
            rows[-1].unit = text
        elif kinds_of(text) and rows[-1].numbers:
            rows.append(_Row(label, [line]))
        elif _is_label(line) or rows[-1].numbers or len(text) > 60:
            break
        else:
            rows[-1].conditions.append(line)
        index += 1
    return rows, index


def _entry(row: _Row, bounds: Sequence[str]) -> Iterator[Entry]:
    label = Piece(row.label.text.rstrip(" :："), row.label.where)
    known = meaning(row.label.text).label
    if not row.numbers:
        values: tuple[Value, ...] = tuple(Value(Piece(line.text, line.where)) for line in row.conditions)
        yield Entry(label, values, source="pair")
        return
    unit, _, year = row.unit.partition("/")
    conditions = [line.text for line in row.conditions] + ([f"/{year}"] if year else [])
    values = tuple(_placed(row.numbers, bounds, known.field if known else ""))
    yield Entry(label, values, unit.strip(), "", tuple(conditions), source="pair")


def _placed(numbers: Sequence[Line], bounds: Sequence[str], name: str) -> Iterator[Value]:
    """The numbers under the bounds that they can only have stood under, or most likely did; the latter say so."""
    wanted, sure = _bounds_for([fold(line.text) for line in numbers], bounds, name)
    for line, bound in zip(numbers, wanted, strict=True):
        if not _EMPTY.fullmatch(fold(line.text)):
            guess = "" if sure else EMPTY_CELLS_LOST
            yield Value(Piece(line.text, line.where), bound=bound, guessed=guess)


def _bounds_for(texts: Sequence[str], bounds: Sequence[str], name: str) -> tuple[list[Bound | None], bool]:
    if len(texts) == len(bounds):
        return [BOUNDS[bound] for bound in bounds], True
    if len(texts) > len(bounds) or not name:
        return [None] * len(texts), True
    limit = field_of(name).limit
    if len(texts) == 1:
        plain = limit is None or texts[0][0] in "±≤≥<>"
        return [None if plain else BOUNDS[limit or "max"]], plain
    opposite = texts[0].startswith("-") and not texts[1].startswith("-")
    if opposite or name in _RANGED:
        return [BOUNDS["min"], BOUNDS["max"]], True
    return [BOUNDS["min"], BOUNDS["typ"]] if limit == "min" else [BOUNDS["typ"], BOUNDS["max"]], False
