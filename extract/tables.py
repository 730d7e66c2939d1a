"""Tables of cells -> entries and listings, whichever way round the table stands.

Two families: *parameter tables* (a label at the head of each row), *listings* (a property at the head of each column).
Bands that run across the top are turned into a listing first.
"""

from __future__ import annotations

import re
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, field, replace
from itertools import pairwise

from extract import trace, wording
from extract.candidates import read
from extract.cards import rows_of_cards
from extract.documents.grid import TextRow
from extract.documents.model import Cell, Table
from extract.entries import Column, Item, Listing, Piece, Text
from extract.fold import fold, key
from extract.heads import Head, bound_and_unit, end_of_range, interpret, is_unit
from extract.identity import is_package
from extract.keys import read_key_table, take_code_rows
from extract.matrices import read_matrix
from extract.meaning import Meaning, is_part_token, meaning, part_tokens
from extract.padtables import read_pad_table
from extract.paramrows import parameter_entries
from extract.samples import heads_samples, of_samples, with_measured
from extract.shared_rows import shared_by_models
from extract.vocabulary import vocabulary

Row = Sequence[Cell | None]
# Above this many rows a table is a list: looking every row up in the vocabularies would cost more than reading it.
LONG = 40


def read_table(table: Table) -> list[Item]:
    """Everything that one table says, in reading order."""
    rows: list[Row] = [row for row in table.grid() if _holds_any(row)]
    if not rows:
        return []
    short = len(rows) <= LONG
    if short:
        rows = whole(rows)
    if short and (keys := read_key_table(rows, table.title)):
        return list(keys)
    if short and (pads := read_pad_table(rows)):
        return list(pads)
    if short and (offered := read_matrix(rows)):
        return list(offered)
    if short and (cards := rows_of_cards(rows)):
        return list(parameter_entries(cards, [], table.title))
    if _bands_across(rows):
        rows = [list(row) for row in zip(*rows, strict=True)]
    items: list[Item] = [Text(Piece(table.title, table.where), heading=True)] if table.title else []
    if short:
        keys, rows = take_code_rows(rows)
        items += keys
    for block in _blocks(rows, table.title):
        items.extend(_read_block(block, table))
    return items


def _holds_any(row: Row) -> bool:
    return any(row.texts) if isinstance(row, TextRow) else any(row)


def whole(rows: Sequence[Row]) -> list[Row]:
    """Rows with their cells made once: only a long listing leaves most of its cells unmade."""
    return [list(row) if isinstance(row, TextRow) else row for row in rows]


@dataclass(slots=True)
class _Block:
    """Heading rows and the rows that they govern; no heading rows where the table has none."""

    heads: list[Row]
    body: list[Row]
    title: str = ""
    above: str = ""
    known: frozenset[str] = field(init=False)
    """The heading's texts."""

    def __post_init__(self) -> None:
        self.known = frozenset(cell.text for head in self.heads for cell in head if cell is not None)


def distinct(row: Row) -> list[Cell]:
    """The cells of a row that hold text, a spanning one once, from left to right."""
    return list({id(cell): cell for cell in row if cell is not None and cell.text.strip()}.values())


def _blocks(rows: list[Row], title: str) -> Iterator[_Block]:
    block = _Block([], [], title)
    index = 0
    while index < len(rows):
        if len(rows) > LONG and block.heads and not _repeats(block.known, rows[index]):
            block.body.append(rows[index])
            index += 1
        elif count := _head_rows(rows, index):
            if _belongs_below(block, rows[index]):
                block = _Block([*block.heads, *rows[index : index + count]], block.body, title, block.above)
                index += count
                continue
            if block.body:
                yield block
            above = _title_before(block.body) if block.heads or block.body else ""
            block = _Block(rows[index : index + count], [], title, above)
            index += count
        else:
            block.body.append(rows[index])
            index += 1
    if block.body:
        yield block


def _belongs_below(block: _Block, head: Row) -> bool:
    """Whether rows above a row of models name their makers and sizes: "Maker | A | B" over "Type | A-12 | B-20"."""
    cells = distinct(head)
    if len(cells) < 3 or meaning(cells[0].text).identity != "part_number" or not 0 < len(block.body) <= MOST_ABOVE:
        return False
    models = sum(is_part_token(cell.text) for cell in cells[1:])
    labelled = all(meaning(row[0].text).identity in ("maker", "package") if row[0] else False for row in block.body)
    return models >= 2 and models == len(cells) - 1 and labelled


# Rows that may name makers and sizes above the models.
MOST_ABOVE = 3


def _repeats(known: frozenset[str], row: Row) -> bool:
    """Whether a row of a long list has a heading's text in it: its heading comes again, or another begins."""
    if isinstance(row, TextRow):
        return row.filled == 1 or not known.isdisjoint(row.texts)
    return len(distinct(row)) == 1 or any(cell is not None and cell.text in known for cell in row)


def _title_before(body: list[Row]) -> str:
    """A spanning row just above a heading is the new block's title."""
    if body and len(cells := distinct(body[-1])) == 1:
        text = cells[0].text
        return text if not meaning(text).value or is_part_token(text) else ""
    return ""


def _head_rows(rows: list[Row], start: int) -> int:
    """How many rows from `start` on are one heading; 0 where no heading begins there."""
    if not is_head(rows[start]):
        if start + 1 < len(rows) and _parent_of_roles(rows[start], rows[start + 1]):
            return 2
        return 0
    count = 1
    while start + count < len(rows) and count < 4 and _goes_on(rows, start, start + count):
        count += 1
    return count


def _parent_of_roles(row: Row, below: Row) -> bool:
    """A row of group names over a row of Min / Typ / Max, its label column empty or spanning both."""
    cells = distinct(row)
    roles = [meaning(cell.text).role for cell in distinct(below)]
    return (
        sum(role in ("min", "typ", "max") for role in roles) >= 2
        and bool(cells)
        and not any(meaning(cell.text).value and not is_part_token(cell.text) for cell in cells)
        and not any(meaning(cell.text).head for cell in cells[:1])
    )


def is_head(row: Row) -> bool:
    """Whether a row reads as the heading of what stands below it."""
    cells = distinct(row)
    if len(cells) < 2 or _is_series_load(cells):
        return False
    known = [meaning(cell.text) for cell in cells]
    roles = {each.role for each in known if each.role}
    names = [_column_name(cell.text) for cell in cells]
    heads = {name for name in names if name}
    values = sum(
        each.value and name is None and not is_unit(cell.text)
        for cell, each, name in zip(cells, known, names, strict=True)
    )
    if len(roles) >= 2 and values <= max(1, len(cells) // 2):
        return True
    if sum(heads_samples(cell.text) for cell in cells[1:]) > 1:
        return True
    if len(heads) >= 2 and values == 0:
        return len(heads) + len(roles) >= 0.4 * len(cells)
    if len(heads) >= 3 and values <= 0.34 * len(cells):
        return True
    blank = row[0] is None or not row[0].text.strip()
    models = len({cell.text for cell in cells if is_part_token(cell.text)})
    return (blank and models >= 2 and models + len(roles) == len(cells)) or _heads_models(
        cells, known, names, len(roles)
    )


def _heads_models(cells: Sequence[Cell], known: Sequence[Meaning], names: Sequence[str | None], roles: int) -> bool:
    """Whether one named head stands before models, packages or a bare unit: one column for each of them."""
    tokens = len({cell.text for cell in cells[1:] if is_part_token(cell.text)})
    if known[0].role == "parameter" or known[0].identity in ("part_number", "stock_number"):
        return tokens >= 2 and tokens + roles >= len(cells) - 2
    if names[0] in ("frequency_mhz", "load_capacitance_pf") and not known[0].value:
        return all(is_part_token(cell.text) or is_package(cell.text) for cell in cells[1:])
    return (
        len({name for name in names if name}) == 1
        and len(cells) == 2
        and is_unit(cells[1].text)
        and bool(known[0].head)
    )


def _is_series_load(cells: Sequence[Cell]) -> bool:
    """A load of "series resonance" is a value, though the words alone name a resistance."""
    label = meaning(cells[0].text).label
    if label is None or label.field != "load_capacitance_pf":
        return False
    beside = meaning(cells[1].text).label if len(cells) > 1 else None
    if beside is not None and (beside.unit or beside.bound):
        # "ESR max. (kΩ)" is a head, even where its word for a series resistance is also that for resonance.
        return False
    return any(value.series for cell in cells[1:2] for value in read(cell.text, label.field))


def _column_name(text: str) -> str | None:
    """What a column under this heading would hold; None for a text that begins like a value or is nearly a label."""
    if fold(text)[:1] in _VALUE_STARTS:
        return None
    head = interpret((text,))
    return None if head.label is not None and not head.label.exact and meaning(text).value else head.name


_VALUE_STARTS = frozenset("0123456789-+±≤≥<>~")


def _goes_on(rows: list[Row], start: int, index: int) -> bool:
    """Whether row `index` still belongs to the heading that begins at `start`."""
    row, above = rows[index], rows[index - 1]
    cells = distinct(row)
    spanning = [cell for cell in cells if any(cell is other for other in above)]
    own = [cell for cell in cells if cell not in spanning]
    if not own:
        return bool(spanning)
    if spanning and all(cell.row < start + (index - start) for cell in spanning):
        return all(not meaning(cell.text).value or is_part_token(cell.text) or _short(cell) for cell in own)
    units = sum(
        bool(meaning(cell.text).role or is_unit(cell.text) or bound_and_unit(cell.text) or end_of_range(cell.text))
        for cell in own
    )
    if units == len(own) or (units >= 0.6 * len(own) and not any(meaning(cell.text).value for cell in own)):
        return True
    if any(cell.column_span > 1 for cell in distinct(above)) and is_head(row):
        return True
    if _symbols_of(row, above):
        return True
    first_empty = row[0] is None or not row[0].text.strip()
    return first_empty and all(is_part_token(cell.text) or meaning(cell.text).role for cell in own)


def _symbols_of(row: Row, above: Row) -> bool:
    """Whether most cells of a row are the symbols of the labels right above them ("Load capacitance" over "CL")."""
    pairs = [
        (label, cell.text)
        for cell, over in zip(row, above, strict=False)
        if cell is not None and over is not None and cell.text.strip() and (label := meaning(over.text).label)
    ]
    own = sum(label.field in (wording.symbol_of(text), *wording.ambiguous_label(text)) for label, text in pairs)
    return own >= 2 and 2 * own >= len(distinct(row))


def _short(cell: Cell) -> bool:
    return len(cell.text) <= 24


def _bands_across(rows: list[Row]) -> bool:
    """Frequency bands or loads in the first row, resistance or a mode in the rows below: the table lies on its side."""
    if not 2 <= len(rows) <= 6 or len(rows[0]) < 3:
        return False
    labels = [distinct(row)[:1] for row in rows]
    if not all(labels) or len({id(cell) for row in labels for cell in row}) < 2:
        return False
    fields = [meaning(cells[0].text) for cells in labels]
    banded = fields[0].label is not None and fields[0].label.field in ("frequency_mhz", "load_capacitance_pf")
    others = any(each.label is not None and each.label.field == "esr_ohm" for each in fields[1:])
    values = [cell for cell in distinct(rows[0])[1:] if meaning(cell.text).value]
    return (
        banded
        and others
        and len(values) >= 2
        and all(meaning(cell.text).role in (None, "band") for cell in distinct(rows[0]))
    )


def _read_block(block: _Block, table: Table) -> Iterator[Item]:
    heads = _typ_beside_bounds([interpret(levels) for levels in _levels(block)]) if block.heads else []
    heads = with_measured(heads)
    if of_samples(heads, block.body, block.above or block.title):
        trace.passed(block.title or "a table", table.where, "measured on samples, no limit")
        return
    if not heads and (numbered := _rows_of_parts(block.body)) is not None:
        yield from _listings(replace(block, body=numbered), [interpret(("part number",)), *_DESCRIBED], table)
        return
    if heads and _is_listing(block, heads):
        yield from _listings(block, heads, table)
        return
    yield from parameter_entries(shared_by_models(whole(block.body), heads), heads, block.above or block.title)


_DESCRIBED = [interpret(("description",))]
_COUNT = re.compile(r"^\s*(?:\(?\d{1,2}[.)]|[-•*·])\s+")


def _rows_of_parts(body: list[Row]) -> list[Row] | None:
    """Rows of a table without headings that each begin with a part number and describe it beside; else None."""
    rows: list[Row] = []
    for row in body:
        cells = distinct(row)
        text = _COUNT.sub("", fold(cells[0].text)) if len(cells) == 2 else ""
        if not text or part_tokens(text) != (text,) or not any(c.isdigit() for c in cells[1].text):
            return None
        rows.append([replace(cells[0], text=text), cells[1]])
    names = {row[0].text for row in rows if row[0] is not None}
    described = all(row[1] is not None and len(row[1].text) >= LEAST_DESCRIPTION for row in rows)
    return rows if len(names) == len(rows) >= 2 and described else None


LEAST_DESCRIPTION = 16


def _typ_beside_bounds(heads: list[Head]) -> list[Head]:
    """Tell types from typicals: "Typ" is a type beside Maker and Package, and typical beside Min or Max."""
    if not any(head.bound in ("min", "max") or head.role in ("unit", "condition") for head in heads):
        return heads
    return [
        replace(head, role="typ", bound="typ", identity=None, extra=head.levels[:-1] if len(head.levels) > 1 else ())
        if head.bound is None and head.levels and vocabulary().bounds.get(key(head.levels[-1])) == "typ"
        else head
        for head in heads
    ]


def _levels(block: _Block) -> list[tuple[str, ...]]:
    columns: list[tuple[str, ...]] = []
    for index in range(len(block.heads[0])):
        texts: list[str] = []
        for row in block.heads:
            cell = row[index]
            text = " ".join(cell.text.split()) if cell is not None else ""
            if text and text not in texts:
                texts.append(text)
        columns.append(tuple(texts))
    return columns


def _is_listing(block: _Block, heads: list[Head]) -> bool:
    body = block.body[:LONG]
    named = {head.name for head in heads if head.name}
    subjects = sum(bool(head.levels) and is_part_token(head.levels[-1]) for head in heads)
    if heads[0].identity == "part_number" and subjects >= 2 and len(named) == 1:
        return False
    if heads[0].label is not None and heads[0].label.field == "frequency_mhz" and _bands_below(body):
        return len(heads) >= 2
    labelled = sum(_starts_with_label(row) for row in body)
    if labelled >= 0.5 * len(body):
        return False
    if any(head.role == "parameter" for head in heads) and len(named) < 3:
        return False
    return len(named) >= 2 or (len(named) == 1 and len(heads) >= 2 and bool(heads[0].name))


def _bands_below(body: list[Row]) -> bool:
    """Whether the first column is one of frequency bands."""
    cells = [row[0] for row in body if row[0] is not None]
    return bool(cells) and all(
        meaning(cell.text).head is None and any(c.isdigit() for c in cell.text) for cell in cells
    )


def _starts_with_label(row: Row) -> bool:
    cells = distinct(row)
    return bool(cells) and meaning(cells[0].text).head is not None and len(cells) > 1


def _listings(block: _Block, heads: list[Head], table: Table) -> Iterator[Item]:
    """The block as one listing, or as one for each group of columns where the headings repeat side by side."""
    sections, rows = _sectioned(block.body, block.above)
    for first, last in _folds(heads):
        columns = _of_one_model(heads[first:last])
        part = [row[first:last] for row in rows] if last - first < len(heads) else rows
        kept = [index for index, row in enumerate(part) if any(cell is not None for cell in row)]
        if kept:
            yield Listing(
                columns,
                [part[index] for index in kept],
                [sections[index] for index in kept],
                table.where,
                block.title,
            )


def _of_one_model(heads: Sequence[Head]) -> tuple[Column, ...]:
    """The columns of one group; the one model that some head of it names is that of the others, too."""
    models = {extra for head in heads for extra in head.extra if is_part_token(extra)}
    model = next(iter(models)) if len(models) == 1 else None
    own = [head.levels if model is None or model in head.levels else (*head.levels, model) for head in heads]
    alone = len(heads) > 2 or model is None or any(head.identity for head in heads)
    return tuple(Column(head.levels) for head in heads) if alone else tuple(map(Column, own))


def _sectioned(body: list[Row], section: str) -> tuple[list[str], list[Row]]:
    """Spanning rows are the section of the rows below them."""
    sections: list[str] = []
    rows: list[Row] = []
    for row in body:
        if isinstance(row, TextRow) and row.filled > 1:
            sections.append(section)
            rows.append(row)
            continue
        made = list(row)
        cells = distinct(made)
        if len(cells) == 1 and len(row) > 2 and (cells[0].column_span > 1 or made[0] is cells[0]):
            section = cells[0].text
        elif cells:
            sections.append(section)
            rows.append(row)
    return sections, rows


def _without_model(head: Head) -> Head:
    return replace(head, extra=tuple(extra for extra in head.extra if not is_part_token(extra)))


def _parted_by_gaps(heads: list[Head]) -> list[tuple[int, int]]:
    """Groups of columns between columns without a head, where each group has a column of part numbers."""
    gaps = [index for index, head in enumerate(heads) if not head.levels]
    bounds = list(zip([0, *(gap + 1 for gap in gaps)], [*gaps, len(heads)], strict=True))
    groups = [(first, last) for first, last in bounds if last > first]
    named = all(sum(head.identity == "part_number" for head in heads[first:last]) == 1 for first, last in groups)
    return groups if named else []


def _folds(heads: list[Head]) -> list[tuple[int, int]]:
    """Groups of columns: one, or several where the same sequence of headings repeats."""
    if len(abreast := _parted_by_gaps(heads)) > 1:
        return abreast
    names = [_without_model(head).name or head.role for head in heads]
    for width in range(2, len(names) // 2 + 1):
        if len(names) % width:
            continue
        groups = [names[start : start + width] for start in range(0, len(names), width)]
        if any(groups[0]) and all(left == right for left, right in pairwise(groups)) and len(set(groups[0])) == width:
            return [(start, start + width) for start in range(0, len(names), width)]
    return [(0, len(heads))]
