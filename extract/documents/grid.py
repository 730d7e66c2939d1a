"""What the readers of grids share: cell addresses, light cells for big lists, titles of tables."""

from __future__ import annotations

import gc
from collections.abc import Callable, Iterable, Iterator
from contextlib import contextmanager
from dataclasses import replace

from extract.documents.model import Cell, Line, Table
from extract.model import Where

Placer = Callable[[int, int], Where]
"""From a cell's row and column in its table (from 0) to its place in the file."""


def column_letters(column: int) -> str:
    """A spreadsheet's name for a column that is counted from 0: A, B ... Z, AA ..."""
    letters = ""
    column += 1
    while column:
        column, rest = divmod(column - 1, 26)
        letters = chr(ord("A") + rest) + letters
    return letters


def address(row: int, column: int) -> str:
    """A spreadsheet's name for a cell whose row and column count from 0: (6, 1) is B7."""
    return f"{column_letters(column)}{row + 1}"


class PlacedCell(Cell):
    """A plain cell of a list: one row, one column, its place worked out on demand.

    A list of 20,000 parts has 400,000 cells and a `Where` of its own for each would cost more memory than the list.
    """

    __slots__ = ("_placer",)

    _placer: Placer

    row_span = 1  # constants instead of slots: less to fill for each cell
    column_span = 1
    header = False
    confidence = 1.0

    def __init__(self, text: str, row: int, column: int, placer: Placer) -> None:
        _set_text(self, text)
        _set_row(self, row)
        _set_column(self, column)
        _set_placer(self, placer)

    @property
    def where(self) -> Where:
        """The cell's place in the file."""
        return self._placer(self.row, self.column)


# The slots' own setters go past the refusal to write that freezes the base class.
_set_text, _set_row, _set_column = (vars(Cell)[name].__set__ for name in ("text", "row", "column"))
_set_placer = vars(PlacedCell)["_placer"].__set__


def placed_cells(rows: list[list[str]], placer: Placer) -> tuple[Cell, ...]:
    """Cells of all texts that are not empty; a text that repeats is held once."""
    known: dict[str, str] = {}
    with garbage_left():
        return tuple(
            PlacedCell(known.setdefault(text, text), row, column, placer)
            for row, texts in enumerate(rows)
            for column, text in enumerate(texts)
            if text
        )


@contextmanager
def garbage_left() -> Iterator[None]:
    """No search for garbage meanwhile: among 400,000 objects that all stay it takes twice their own time."""
    was_on = gc.isenabled()
    gc.disable()
    try:
        yield
    finally:
        if was_on:
            gc.enable()


def titled(blocks: Iterable[Table | Line]) -> tuple[Table | Line, ...]:
    """Blocks in their order; a table without a title has the heading that stands right above it."""
    result: list[Table | Line] = []
    for block in blocks:
        above = result[-1] if result else None
        if isinstance(block, Table) and not block.title and isinstance(above, Line) and above.heading:
            result.append(replace(block, title=above.text))
        else:
            result.append(block)
    return tuple(result)
