"""Rows that begin with a label -> entries: which cell is the symbol, the unit, the condition, the value."""

from __future__ import annotations

import re
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, field, replace
from itertools import pairwise

from extract import wording
from extract.candidates import has_unit, read
from extract.conditions import condition_of, kinds_of
from extract.documents.model import Cell
from extract.entries import HEADING_UNREAD, Entry, Item, Key, Piece, Text, Value
from extract.fold import fold
from extract.heads import BOUNDS, Head, is_unit
from extract.keys import choices_in, key_label
from extract.meaning import Meaning, is_part_token, meaning
from extract.prose import pair_entries
from extract.runs import IDEOGRAPHS

Row = Sequence[Cell | None]
_VALUE_ROLES = ("value", "min", "typ", "max")
_CONDITION_ROLES = ("condition", "remarks")
_KEY_ROLES = ("mode", "cut", "band", "model")
_NUMBER = re.compile(r"\d")
_PLAIN_NUMBER = re.compile(r"[-+±]?\s?\d+(?:[.,]\d+)*|-+")
_SYMBOL = re.compile(r"[^\W\d]\w{0,2}[ _]?\w{0,8}(?:/[^\W\d]\w{0,3}[ _]?\w{0,6})?(?:\(\w\))?")


@dataclass(slots=True)
class _Row:
    """One row, its cells put to their uses. `maybe_symbol` is a short word in a column without a heading."""

    label: Cell | None = None
    label_text: str = ""
    values: list[Value] = field(default_factory=list)
    unit: str = ""
    symbol: str = ""
    conditions: list[str] = field(default_factory=list)
    section: str = ""
    maybe_symbol: Cell | None = None

    def kinds(self) -> frozenset[str]:
        texts = [*self.conditions, *(value.piece.text for value in self.values)]
        return frozenset().union(*(kinds_of(text) for text in texts)) - {"years"}


def parameter_entries(body: Sequence[Row], heads: Sequence[Head], title: str) -> Iterator[Item]:
    """Entries of a parameter table, or of pairs of label and value where `heads` is empty."""
    for first, last in _halves(body, heads):
        part = [row[first:last] for row in body]
        columns = _bounds_by_place(list(heads[first:last])) or _guessed_heads(part)
        rows = list(_rows(part, columns, title))
        _hand_down_labels(rows)
        for row in rows:
            for each in _unstacked(row):
                yield from _items(each)


def _halves(body: Sequence[Row], heads: Sequence[Head]) -> list[tuple[int, int]]:
    """Two label columns side by side are two tables; else the whole width."""
    width = max(len(row) for row in body)
    starts = [0]
    for column in range(2, width - 1):
        cells = [row[column] for row in body if column < len(row) and row[column] is not None]
        texts = {id(cell): cell.text for cell in cells if cell is not None and cell.column == column}
        labels = sum(_is_label(text) or _is_named_trap(text) for text in texts.values())
        own = sum(_is_label(text) for text in texts.values())
        if own >= 2 and labels >= 2 and labels >= 0.6 * len(texts) and not _mostly_symbols(list(texts.values())):
            starts.append(column)
    if heads and len(starts) > 1:
        starts = [start for start in starts if start == 0 or heads[start].role == "parameter"]
    return list(zip(starts, [*starts[1:], width], strict=True))


def _is_named_trap(text: str) -> bool:
    """Whether a text names what is no property ("Shock", "Reflow"), beside labels that are."""
    found = meaning(text)
    return found.trap is not None and not found.value and len(text) < 40


def _is_label(text: str) -> bool:
    found = meaning(text)
    return found.head is not None and not found.value


def _mostly_symbols(texts: list[str]) -> bool:
    return sum(len(text) <= 8 and not IDEOGRAPHS.search(text) for text in texts) >= 0.6 * len(texts)


def _bounds_by_place(heads: list[Head]) -> list[Head]:
    """Unreadable heads on both sides of a Typ column are Min and Max."""
    for index in range(1, len(heads) - 1):
        left, middle, right = heads[index - 1 : index + 2]
        if middle.bound == "typ" and any(_is_subject(side) for side in (left, right)):
            for at, bound in ((index - 1, BOUNDS["min"]), (index + 1, BOUNDS["max"])):
                if _is_subject(heads[at]):
                    heads[at] = Head(heads[at].levels, role=bound, bound=bound, guessed=True)
    return heads


def _numeric_columns(rows: Sequence[Row], heads: Sequence[Head]) -> list[int]:
    """Columns of plain numbers that no heading names."""
    found = []
    for column, head in enumerate(heads):
        texts = [cell.text for row in rows if column < len(row) and (cell := row[column]) is not None]
        numbers = sum(bool(_PLAIN_NUMBER.fullmatch(fold(text))) for text in texts)
        if head.role is None and numbers >= 2 and numbers >= 0.5 * len(texts):
            found.append(column)
    return found


def _guessed_heads(rows: Sequence[Row]) -> list[Head]:
    """Roles of columns without a heading, as far as all their cells agree."""
    width = max(len(row) for row in rows)
    heads = [Head((), role="parameter")]
    for column in range(1, width):
        texts = [row[column].text for row in rows if column < len(row) and row[column] is not None]  # type: ignore[union-attr]
        filled = [text for text in texts if text.strip()]
        if filled and all(is_unit(text) for text in filled):
            heads.append(Head((), role="unit"))
        elif filled and all(_looks_like_symbol(text) for text in filled) and width > 2 and len(filled) > 1:
            heads.append(Head((), role="symbol"))
        else:
            heads.append(Head(()))
    numeric = _numeric_columns(rows, heads)
    if len(numeric) == 3 and _ascending(rows, numeric):
        for column, bound in zip(numeric, ("min", "typ", "max"), strict=True):
            heads[column] = Head((), role=bound, bound=BOUNDS[bound], guessed=True)
    return heads


def _ascending(rows: Sequence[Row], columns: Sequence[int]) -> bool:
    """Whether no row's numbers fall from left to right or stay the same: else the columns are three parts."""
    for row in rows:
        texts = [fold(cell.text) for column in columns if column < len(row) and (cell := row[column]) is not None]
        numbers = [float(text.replace(",", ".")) for text in texts if re.fullmatch(r"[-+]?\d+(?:[.,]\d+)?", text)]
        if len(numbers) == len(columns) and (numbers != sorted(numbers) or numbers[0] == numbers[-1]):
            return False
    return True


def _looks_like_symbol(text: str) -> bool:
    stripped = text.strip(" -")
    return not stripped or (len(stripped) <= 10 and bool(_SYMBOL.fullmatch(stripped)) and not is_part_token(stripped))


def _parameter_column(rows: Sequence[Row], heads: Sequence[Head]) -> int:
    for index, head in enumerate(heads):
        if head.role == "parameter":
            return index
    counts = [
        sum(_is_label(cell.text) for row in rows if (cell := row[column]) is not None)
        for column in range(min(3, len(heads)))
    ]
    return counts.index(max(counts)) if counts else 0


def _rows(body: Sequence[Row], heads: Sequence[Head], title: str) -> Iterator[_Row]:
    at = _parameter_column(body, heads)
    governed = sum(head.role in _VALUE_ROLES or _is_subject(head) for head in heads) == 1
    section, trapped = title, False
    for row in body:
        cells = _distinct(row)
        if not cells:
            continue
        if len(cells) == 1 and len(row) > 1 and _is_section(cells[0]):
            section = cells[0].text
            trapped = meaning(section).trap is not None
            yield _Row(label=cells[0], label_text=section, section=section)
            continue
        found = _sorted_row(row, heads, at, governed=governed)
        found.section = section
        if found.label is not None and meaning(found.label_text).trap:
            trapped = not any(meaning(value.piece.text).value for value in found.values)
        elif trapped and found.label is not None and _is_sub_label(found.label_text):
            continue
        else:
            trapped = trapped and found.label is None
        yield found


def _is_sub_label(text: str) -> bool:
    """Rows below a heading such as "Drive level dependency:" begin small or indented."""
    first = text.lstrip("-–•· ")[:1]
    return first.islower()


def _distinct(row: Row) -> list[Cell]:
    seen: list[Cell] = []
    for cell in row:
        if cell is not None and cell.text.strip() and not any(cell is other for other in seen):
            seen.append(cell)
    return seen


def _is_section(cell: Cell) -> bool:
    label = meaning(cell.text).label
    if label is not None and any(value for value in read(cell.text, label.field)) and has_unit(cell.text, label.field):
        return False
    return not meaning(cell.text).value or cell.column_span > 1 or cell.header


def _is_subject(head: Head) -> bool:
    return head.role is None and head.name is None and bool(head.extra)


def _sorted_row(row: Row, heads: Sequence[Head], at: int, *, governed: bool) -> _Row:
    found = _Row()
    seen: list[Cell] = []
    for index, cell in enumerate(row):
        if cell is None or not cell.text.strip() or any(cell is other for other in seen):
            continue
        seen.append(cell)
        head = heads[index] if index < len(heads) else Head(())
        span = [heads[k] for k in range(index, len(row)) if k < len(heads) and row[k] is cell]
        if index == at or index < at and _is_label(cell.text) and found.label is None:
            found.label, found.label_text = cell, cell.text
        elif found.label is not None and _is_second_label(cell, head, found):
            found.label_text, beside = _both_labels(found.label_text, cell.text)
            found.conditions += beside
        elif index < at and head.role not in (*_VALUE_ROLES, *_CONDITION_ROLES, "unit", "symbol"):
            continue
        else:
            _place(found, cell, head, span, governed=governed)
    if found.maybe_symbol is not None and not found.values:
        found.values, found.symbol = [Value(found.maybe_symbol)], ""
    return found


def _is_second_label(cell: Cell, head: Head, found: _Row) -> bool:
    """A label in two columns: "Temperature range | Operating", the first often merged over its rows."""
    if found.values or found.symbol or found.label is None or _is_subject(head):
        return False
    if head.role == "parameter":
        return True
    if head.role is not None or found.label.row_span == 1:
        return False
    if meaning(cell.text).value:
        return kinds_of(cell.text) == {"years"} and not has_unit(cell.text, "ageing_ppm")
    known = meaning(cell.text).label
    own = known is not None and known.exact and not known.symbol
    return own or _decides(meaning(f"{found.label_text} {cell.text}"))


def _decides(known: Meaning) -> bool:
    return known.trap is not None or (known.label is not None and known.label.exact)


_BAND_IN_LABEL = re.compile(r"(?P<name>[^\d±]+?)[\s,;:(]+(?P<band>[-+]?\d.*|[<≤≥>].*)", re.DOTALL)


def _both_labels(first: str, second: str) -> tuple[str, list[str]]:
    """The label that two cells make together, and what of the second is a condition: a band, or a word beside it."""
    if _is_bare_band(second):
        return first, [second]
    for text in (f"{first} {second}", f"{second} {first}", second):
        if _decides(meaning(text)) or meaning(text).head is not None:
            return text, []
    match = _BAND_IN_LABEL.fullmatch(second.strip())
    if match is not None and _is_band(match["band"]):
        label, beside = _both_labels(first, match["name"])
        return label, [*beside, match["band"].rstrip(")")]
    return (first, [second]) if meaning(first).head is not None else (f"{first} {second}", [])


def _place(found: _Row, cell: Cell, head: Head, span: list[Head], *, governed: bool) -> None:
    roles = [each.role for each in span]
    if head.role == "measured":
        return
    if head.role == "unit" and len(set(roles)) == 1:
        found.unit = cell.text
    elif head.role == "symbol":
        found.symbol = cell.text
    elif head.role in _CONDITION_ROLES:
        found.conditions.append(cell.text)
    elif any(role in _VALUE_ROLES for role in roles) or _is_subject(head):
        found.values.extend(_values(cell, span, governed=governed))
    elif head.role in _KEY_ROLES or head.label is not None:
        found.conditions.append((wording.mode_of(cell.text) if head.role == "mode" else None) or cell.text)
    elif is_unit(cell.text) and not found.unit:
        found.unit = cell.text
    elif not found.values and not found.symbol and _looks_like_symbol(cell.text) and not meaning(cell.text).value:
        found.symbol, found.maybe_symbol = cell.text, cell
    else:
        found.values.append(Value(cell))


def _values(cell: Cell, span: list[Head], *, governed: bool) -> list[Value]:
    """One value a subject; its bound from the heading unless it is merged over several bounds."""
    subjects: dict[str, list[Head]] = {}
    for head in span:
        if head.role in _VALUE_ROLES or _is_subject(head):
            subjects.setdefault(" ".join(head.extra), []).append(head)
    values = []
    for subject, group in subjects.items():
        bounds = {head.bound for head in group if head.bound}
        values.append(
            Value(
                cell,
                bound=next(iter(bounds)) if len(bounds) == 1 else None,
                nominal=len(bounds) > 1,
                governed=governed,
                guessed=HEADING_UNREAD if any(head.guessed for head in group) else "",
                subject=subject,
            )
        )
    return values


def _hand_down_labels(rows: list[_Row]) -> None:
    """Give rows without a label that of the row above or below, whichever states the same kind of condition.

    A band in the label column of a table whose title names the property has the title for its label.
    """
    for row in rows[:1]:
        if row.label is not None and row.values and row.section and _is_bare_band(row.label_text):
            titled = meaning(row.section).label
            if titled is not None and titled.exact:
                row.conditions.append(row.label_text)
                row.label_text = row.section
    for previous, row in pairwise(rows):
        if row.label is not None and previous.label is not None and row.values and _is_bare_band(row.label_text):
            row.conditions.append(row.label_text)
            row.label, row.label_text = previous.label, _BAND_BEHIND.split(previous.label_text)[0]
    _join_wrapped_labels(rows)
    labelled = [row.label is not None for row in rows]
    for index, row in enumerate(rows):
        if labelled[index] or not row.values:
            continue
        above = next((rows[k] for k in range(index - 1, -1, -1) if labelled[k]), None)
        below = next((rows[k] for k in range(index + 1, len(rows)) if labelled[k]), None)
        source = _nearer(row, above, below)
        if source is None:
            continue
        row.label, row.label_text = source.label, source.label_text
        row.unit, row.symbol = row.unit or source.unit, row.symbol or source.symbol
    _share_units(rows)


def _join_wrapped_labels(rows: list[_Row]) -> None:
    """A label wrapped beside a stack of values is one label: "Series resistance" over "max.", a band beside each."""
    for above, row in pairwise(rows):
        if above.label is None or row.label is None or not above.values or not row.values:
            continue
        whole = f"{above.label_text} {row.label_text}"
        own, known = meaning(above.label_text).label, meaning(whole).label
        rest = meaning(row.label_text)
        bound = rest.role in BOUNDS and rest.identity is None and own is not None and own.exact
        torn = known is not None and known.exact and rest.head is None and (own is None or not own.exact)
        if bound or torn:
            above.label_text = row.label_text = whole
            row.label = above.label


def _share_units(rows: list[_Row]) -> None:
    """Rows under one label have one unit, though it is printed beside one of them only."""
    groups: dict[int, list[_Row]] = {}
    for row in rows:
        if row.label is not None and row.values:
            groups.setdefault(id(row.label), []).append(row)
    for group in groups.values():
        printed = {row.unit for row in group if row.unit}
        if len(printed) == 1:
            for row in group:
                row.unit = next(iter(printed))


_BAND_BEHIND = re.compile(r"\s+(?=[-+]?\d|[<≤≥>])")


def _is_bare_band(text: str) -> bool:
    """A band in the label column, with no label of its own."""
    known = meaning(text)
    names_mode = known.role == "mode" and condition_of(text).mode is not None
    return (known.head is None or names_mode) and known.label is None and known.trap is None and _is_band(text)


def _nearer(row: _Row, above: _Row | None, below: _Row | None) -> _Row | None:
    if above is None or below is None:
        return above or below
    kinds = row.kinds()
    if not above.values or (kinds & above.kinds()):
        return above
    if kinds and (kinds & below.kinds()):
        return below
    return above


def _unstacked(row: _Row) -> list[_Row]:
    """A row whose cells stack several lines that belong together: labels with values, or bands with values."""
    if row.label is None or not row.values:
        return [row]
    labels = _lines_of(row.label_text)
    columns = [_lines_of(value.piece.text) for value in row.values]
    if len(labels) > 2 and all(len(each) == len(labels) - 1 > 1 for each in columns):
        labels = [_both_labels(labels[0], label)[0] for label in labels[1:]]
    if (
        len(labels) > 1
        and all(_is_label(line) for line in labels)
        and all(len(each) == len(labels) for each in columns)
    ):
        return [_nth(row, index, columns, label) for index, label in enumerate(labels)]
    bands = [
        lines for lines in (*map(_lines_of, row.conditions), *columns) if len(lines) > 1 and all(map(_is_band, lines))
    ]
    count = len(bands[0]) if bands else 0
    stacked = [lines for lines in columns if len(lines) == count and lines not in bands]
    if count > 1 and stacked:
        return [_nth(row, index, columns, row.label_text) for index in range(count)]
    return [row]


def _lines_of(text: str) -> list[str]:
    return [line.strip() for line in text.split("\n") if line.strip()]


def _is_band(line: str) -> bool:
    return bool(kinds_of(line) & {"frequency_mhz", "temperature_c", "mode", "load_capacitance_pf"})


def _nth(row: _Row, index: int, columns: list[list[str]], label: str) -> _Row:
    """The row with line `index` of each stacked cell; a cell of one line holds for all."""
    count = max(len(lines) for lines in columns)
    values = [
        replace(value, piece=Piece(_line(value.piece.text, index, count), value.piece.where, value.piece.confidence))
        for value in row.values
    ]
    conditions = [_line(text, index, count) for text in row.conditions]
    symbol = _line(row.symbol, index, count) if label == row.label_text else ""
    unit = _line(row.unit, index, count)
    return replace(row, label_text=label, values=values, conditions=conditions, symbol=symbol, unit=unit)


def _line(text: str, index: int, count: int) -> str:
    lines = _lines_of(text)
    return lines[index] if len(lines) == count else text


def _choices(value: Value) -> list[tuple[str, Piece]]:
    """Codes and meanings of a cell that holds two or more of them and nothing else."""
    found = choices_in(value.piece.text)
    where, sure = value.piece.where, value.piece.confidence
    return [(code, Piece(text, where, sure)) for code, text in found] if len(found) >= 2 else []


def _items(row: _Row) -> Iterator[Item]:
    if row.label is None:
        for value in row.values:
            yield Text(value.piece)
            yield from pair_entries(value.piece)
        return
    if not row.values:
        yield Text(Piece(row.label_text, row.label.where, row.label.confidence), heading=True)
        if _NUMBER.search(row.label_text):
            yield from (replace(entry, source="pair") for entry in pair_entries(row.label))
        if row.conditions:
            yield Entry(row.label, (), row.unit, row.symbol, tuple(row.conditions), row.section)
        return
    label = Piece(row.label_text, row.label.where, row.label.confidence)
    known = meaning(row.label_text)
    if known.head is None and known.trap is None:
        yield Text(label)
        yield from (Text(value.piece) for value in row.values)
    if keys := [choice for value in row.values for choice in _choices(value)]:
        yield Key(Piece(key_label(label.text), label.where), tuple(keys))
        return
    yield Entry(label, tuple(row.values), row.unit, row.symbol, tuple(row.conditions), row.section)
