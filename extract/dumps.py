"""Sheets copied column by column: a run of labels, then runs of symbols, conditions, values and units."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

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
    if (parted := _parted(lines, start + len(labels), labels)) is not None:
        return parted[0], parted[1] - start
    columns = _columns(lines, start + len(labels), len(labels))
    if columns is None:
        return [], 0
    values, units, end = columns
    entries = []
    for label, value, unit in zip(labels, values, units, strict=True):
        piece = Piece(label.text, label.where)
        entries.append(Entry(piece, _values(value), unit, source="pair"))
    return entries, end - start


_HEADS = ("parameter", "symbol", "condition", "remarks", "value", "min", "typ", "max", "unit")


@dataclass(slots=True)
class _Run:
    """Lines of one column, between headings or blank lines; `use` is a role of `_HEADS`, or open."""

    use: str
    lines: list[Line]


def _parted(lines: Sequence[Line], start: int, labels: Sequence[Line]) -> tuple[list[Entry], int] | None:
    """Entries of columns parted by their headings or by blank lines, each as long as the run of labels."""
    runs, end = _runs(lines, start, labels[-1], len(labels))
    if not runs or any(len(run.lines) != len(labels) for run in runs if run.use in ("", "value", "min", "typ", "max")):
        return None
    for run in runs:
        run.use = run.use or _use_of(run.lines)
    values = [run for run in runs if run.use in ("value", "min", "typ", "max")]
    if not values or len({run.use for run in values}) != len(values):
        return None
    return [_put_together(label, index, runs) for index, label in enumerate(labels)], end


def _runs(lines: Sequence[Line], start: int, above: Line, count: int) -> tuple[list[_Run], int]:
    """The runs behind the labels; a run ends at a heading, at a blank line, or when it is as long as the labels."""
    runs: list[_Run] = []
    index = start
    while index < len(lines) and not lines[index].heading:
        role = meaning(lines[index].text).role
        role = "typ" if role is None and lines[index].text.strip(". ").casefold() == "typ" else role
        if role in _HEADS:
            runs.append(_Run(role, []))
        elif not runs or (_gap(above, lines[index]) and runs[-1].lines):
            if not _gap(above, lines[index]):
                return [], start
            runs.append(_Run("", [lines[index]]))
        elif len(runs[-1].lines) == count:
            break
        else:
            runs[-1].lines.append(lines[index])
        above = lines[index]
        index += 1
    while runs and len(runs[-1].lines) != count and runs[-1].use == "":
        index -= len(runs.pop().lines)
    return runs, index


def _gap(above: Line, line: Line) -> bool:
    return above.where.line is not None and line.where.line is not None and line.where.line - above.where.line > 1


def _use_of(run: Sequence[Line]) -> str:
    units = sum(is_unit(line.text) or _is_yearly(line.text) or line.text.strip(" -—") == "" for line in run)
    if units >= 0.8 * len(run):
        return "unit"
    return "value" if sum(_is_value(line) for line in run) >= 0.7 * len(run) else "condition"


def _is_yearly(text: str) -> bool:
    """Whether a text is a unit with a year behind it ("ppm / year")."""
    return is_unit(text.split("/", maxsplit=1)[0]) and not any(character.isdigit() for character in text)


def _put_together(label: Line, index: int, runs: Sequence[_Run]) -> Entry:
    """The row that stands at `index` of every column."""
    values: list[Value] = []
    unit, symbol, conditions = "", "", []
    for run in runs:
        line = run.lines[index] if len(run.lines) > index else None
        if line is None or len(run.lines) <= index or line.text.strip(" -—–") == "":
            continue
        if run.use in BOUNDS:
            values.append(Value(Piece(line.text, line.where), bound=BOUNDS[run.use]))
        elif run.use == "value":
            values += _values(line)
        elif run.use == "unit":
            unit = line.text
        elif run.use == "symbol":
            symbol = line.text
        else:
            conditions.append(line.text)
    if _is_yearly(unit) and "/" in unit:
        unit, _, year = unit.partition("/")
        conditions.append(f"/{year}")
    return Entry(Piece(label.text, label.where), tuple(values), unit.strip(), symbol, tuple(conditions), source="pair")


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
    if len(words) == 3 and all(word == "-" or any(character.isdigit() for character in word) for word in words):
        return tuple(
            Value(Piece(word, where), bound=bound)
            for word, bound in zip(words, BOUNDS.values(), strict=True)
            if word != "-"
        )
    if len(words) == 2 and blank == 1:
        return tuple(Value(Piece(word, where)) for word in words if word != "-")
    return (Value(Piece(line.text, where)),)
