"""Sheets copied column by column: a run of labels, then runs of symbols, conditions, values and units."""

from __future__ import annotations

from collections.abc import Sequence

from extract.documents.model import Line
from extract.entries import Entry, Piece, Value
from extract.fold import fold
from extract.heads import BOUNDS, is_unit
from extract.meaning import meaning
from extract.wording import not_stated

LEAST_LABELS = 5


def column_dump(lines: Sequence[Line], start: int) -> tuple[list[Entry], int]:
    """Entries of a dump whose labels begin at `start`, and how many lines it takes; nothing where it is none."""
    labels = _labels(lines, start)
    if len(labels) < LEAST_LABELS:
        return [], 0
    columns = _columns(lines, start + len(labels), len(labels))
    if columns is None:
        return [], 0
    values, units, end = columns
    entries = []
    for label, value, unit in zip(labels, values, units, strict=True):
        piece = Piece(label.text, label.where)
        entries.append(Entry(piece, _values(value), unit, source="pair"))
    return entries, end - start


def _labels(lines: Sequence[Line], start: int) -> list[Line]:
    """The run of label lines; a line that no vocabulary knows may stand among them, not at the end."""
    run: list[Line] = []
    known = 0
    first = meaning(lines[start].text.strip(" *")).label
    if first is None or first.symbol:
        return []
    for line in lines[start:]:
        found = meaning(line.text.strip(" *"))
        symbol = found.label is not None and found.label.symbol
        if found.value or symbol or found.role in ("min", "typ", "max", "unit") or len(line.text) > 60:
            break
        if found.head is None and len(line.text.strip()) <= 4:
            break
        run.append(line)
        known = len(run) if found.head is not None else known
    return run[:known]


def _columns(lines: Sequence[Line], start: int, count: int) -> tuple[list[Line], list[str], int] | None:
    """The run of values and the run of units, each as long as the run of labels; values end where units begin."""
    for begin in range(start, min(len(lines) - count, start + 4 * count)):
        values = lines[begin : begin + count]
        if sum(_is_value(line) for line in values) < 0.85 * count or not _is_value(values[0]):
            continue
        after = lines[begin + count : begin + 2 * count]
        if not after or not is_unit(after[0].text):
            continue
        units = [line.text for line in after if is_unit(line.text)]
        unitless = sum(not _wants_unit(line) for line in values)
        if len(units) + unitless >= count and len(units) >= 3:
            return list(values), _dealt(values, units), begin + count + len(units)
    return None


def _is_value(line: Line) -> bool:
    text = fold(line.text)
    return not is_unit(text) and (any(character.isdigit() for character in text) or not_stated(text) or "(" in text)


def _wants_unit(line: Line) -> bool:
    return meaning(line.text).value or any(character.isdigit() for character in line.text)


def _dealt(values: Sequence[Line], units: Sequence[str]) -> list[str]:
    """Each value its unit, in order; a value without a number has none."""
    left = list(units)
    return [left.pop(0) if _wants_unit(line) and left else "" for line in values]


def _values(line: Line) -> tuple[Value, ...]:
    """A line of values: three cells, "-" for an empty one, are min, typ and max; anything else is one value."""
    words = fold(line.text).split()
    where = line.where
    blank = sum(not_stated(word) or word == "-" for word in words)
    if len(words) == 3:
        return tuple(
            Value(Piece(word, where), bound=bound)
            for word, bound in zip(words, BOUNDS.values(), strict=True)
            if word != "-"
        )
    if len(words) == 2 and blank == 1:
        return tuple(Value(Piece(word, where)) for word in words if word != "-")
    return (Value(Piece(line.text, where)),)
