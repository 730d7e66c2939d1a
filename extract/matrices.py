"""Matrices of what may be ordered: temperature ranges down the side, stabilities across the top, a mark where both go.

Each range becomes one entry whose value is the choice of stabilities that are marked for it.
"""

from __future__ import annotations

import re
from collections.abc import Sequence

from extract.amount import read_values
from extract.conditions import condition_of
from extract.documents.model import Cell
from extract.entries import Entry, Piece, Value
from extract.fold import fold
from extract.model import Where

Row = Sequence[Cell | None]
STABILITY = "frequency_stability_ppm"
_MARKS = re.compile(r"[O○●◎√✓✔Yy]|[Yy]es")
_NONE = re.compile(r"(?i)[x×✕✗✘\-–—]+|n\s?/?\s?a|no")
_SIZE = re.compile(r"±\s?\d")
_MARK_LENGTH = 4
LEAST = 2


def read_matrix(rows: Sequence[Row]) -> list[Entry]:
    """An entry for each temperature range of such a table, upright or lying; empty for any other table."""
    lying = [list(column) for column in zip(*rows, strict=True)]
    return _upright(rows) or _upright(lying)


def _upright(rows: Sequence[Row]) -> list[Entry]:
    if not any(_sizes_in(row) >= LEAST for row in rows):
        return []
    start = next((index for index, row in enumerate(rows) if len(_ranges_below(rows, index)) >= LEAST), 0)
    head = rows[start - 1] if start else ()
    sizes = {column: cell for column, cell in enumerate(head) if column and cell is not None and _is_size(cell)}
    body = [row for row in rows[start:] if _range_of(row) is not None]
    marks = [[row[column] for column in sizes] for row in body]
    if len(sizes) < LEAST or len(body) < LEAST or not _all_marks([cell for row in marks for cell in row]):
        return []
    marked = any(cell is not None and _MARKS.fullmatch(fold(cell.text)) for row in marks for cell in row)
    unit = "" if any("ppm" in fold(cell.text).casefold() for cell in sizes.values()) else "ppm"
    return [
        entry
        for row in body
        if (entry := _entry(row, {k: v for k, v in sizes.items() if _offered(row[k], marked=marked)}, unit)) is not None
    ]


def _sizes_in(row: Row) -> int:
    """How many cells beside the first begin as a size does."""
    return sum(cell is not None and _SIZE.match(fold(cell.text)) is not None for cell in row[1:])


def _ranges_below(rows: Sequence[Row], start: int) -> list[Row]:
    return [] if start == 0 or _range_of(rows[start]) is None else [row for row in rows[start:] if _range_of(row)]


def _range_of(row: Row) -> tuple[float, float] | None:
    cell = row[0] if row else None
    if cell is None:
        return None
    span = condition_of(cell.text).temperature_c
    return span or condition_of(f"{fold(cell.text)} °C").temperature_c


def _is_size(cell: Cell) -> bool:
    """Whether a head is one ± and no more."""
    if not _SIZE.match(fold(cell.text)):
        return False
    found = read_values(cell.text, STABILITY, unit="ppm")
    return len(found) == 1 and found[0].max is not None


def _all_marks(cells: Sequence[Cell | None]) -> bool:
    texts = [fold(cell.text) for cell in cells if cell is not None and cell.text.strip()]
    return bool(texts) and all(len(text) <= _MARK_LENGTH and not text.isdigit() for text in texts)


def _offered(cell: Cell | None, *, marked: bool) -> bool:
    """Whether a cell says that the two go together; an X is a code where no other marks stand in the table."""
    text = fold(cell.text) if cell is not None else ""
    refused = _NONE.fullmatch(text) is not None and (marked or not text.isalpha())
    return bool(text) and not refused


def _entry(row: Row, sizes: dict[int, Cell], unit: str) -> Entry | None:
    cell = row[0]
    if cell is None or not sizes:
        return None
    heads = list(sizes.values())
    choice = ", ".join(" ".join(head.text.split()) for head in heads)
    span = fold(cell.text) if "°" in fold(cell.text) else f"{fold(cell.text)} °C"
    value = Value(Piece(f"{choice} {unit}".strip(), _place(heads), min(head.confidence for head in heads)))
    return Entry(Piece(" ".join(cell.text.split()), cell.where), (value,), symbol="f_stab", conditions=(span,))


def _place(heads: Sequence[Cell]) -> Where:
    """The place of the heads that hold the sizes: the box around them, or the first one's cell."""
    boxes = [head.where.box for head in heads if head.where.box is not None]
    if not boxes:
        return heads[0].where
    left, top, right, bottom = zip(*boxes, strict=True)
    return heads[0].where.model_copy(update={"box": (min(left), min(top), max(right), max(bottom))})
