"""What the readers of grids share: cell addresses, light cells for big lists, titles of tables."""

from __future__ import annotations

import gc
from collections.abc import Iterable, Iterator, Mapping, Sequence
from contextlib import contextmanager
from dataclasses import replace
from functools import cache
from typing import Protocol, overload

from extract.documents.model import Cell, GridCells, Line, Table
from extract.model import Where

Row = Sequence[Cell | None]


class Placer(Protocol):
    """From a cell's row and column in its table (from 0) to its place in the file.

    As JSON the place is `json_before(column) + json_of_row(row) + "}"`; None where the cells of a row have less than
    that in common.
    """

    def __call__(self, row: int, column: int) -> Where: ...
    def json_before(self, column: int) -> str: ...
    def json_of_row(self, row: int) -> str | None: ...


@cache
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


class TextRow(Sequence[Cell | None]):
    """A row of plain cells, made one by one when asked for; `texts` may be shorter than the row."""

    __slots__ = ("number", "placer", "texts", "width")

    def __init__(self, texts: Sequence[str], number: int, width: int, placer: Placer) -> None:
        self.texts = texts
        self.number = number
        self.width = width
        self.placer = placer

    def __len__(self) -> int:
        return self.width

    @property
    def filled(self) -> int:
        """How many of its cells hold text."""
        return len(self.texts) - self.texts.count("")

    @overload
    def __getitem__(self, index: int) -> Cell | None: ...
    @overload
    def __getitem__(self, index: slice) -> list[Cell | None]: ...
    def __getitem__(self, index: int | slice) -> Cell | None | list[Cell | None]:
        if isinstance(index, slice):
            return [self[column] for column in range(*index.indices(self.width))]
        column = range(self.width)[index]
        text = self.texts[column] if column < len(self.texts) else ""
        return PlacedCell(text, self.number, column, self.placer) if text else None


class RowCells(GridCells):
    """The cells of rows of texts, as light as the texts until somebody asks for a cell.

    `merged` holds the cells that cover more than one place, by the row and column where they begin.
    """

    def __init__(
        self, rows: list[list[str]], width: int, placer: Placer, merged: Mapping[tuple[int, int], Cell] | None = None
    ) -> None:
        self._rows = rows
        self._width = width
        self._placer = placer
        self._merged = dict(merged or {})
        self._made: tuple[Cell, ...] | None = None

    def _cells(self) -> tuple[Cell, ...]:
        if self._made is None:
            with garbage_left():
                self._made = tuple(cell for row in range(len(self._rows)) for cell in self._cells_of(row))
        return self._made

    def _cells_of(self, row: int) -> Iterator[Cell]:
        for column, text in enumerate(self._rows[row]):
            if text:
                yield self._merged.get((row, column)) or PlacedCell(text, row, column, self._placer)

    def __len__(self) -> int:
        return len(self._cells())

    @overload
    def __getitem__(self, index: int) -> Cell: ...
    @overload
    def __getitem__(self, index: slice) -> tuple[Cell, ...]: ...
    def __getitem__(self, index: int | slice) -> Cell | tuple[Cell, ...]:
        return self._cells()[index]

    def grid(self) -> list[Row]:
        """Every row; one that no merged cell reaches is a `TextRow`."""
        rows: list[Row] = [TextRow(texts, row, self._width, self._placer) for row, texts in enumerate(self._rows)]
        covered = sorted(
            {row for cell in self._merged.values() for row in range(cell.row, min(cell.row + cell.row_span, len(rows)))}
        )
        places: dict[int, list[Cell | None]] = {row: [None] * self._width for row in covered}
        for number in covered:
            for cell in self._cells_of(number):
                for row in range(cell.row, min(cell.row + cell.row_span, len(rows))):
                    for column in range(cell.column, min(cell.column + cell.column_span, self._width)):
                        places[row][column] = cell
        for row in covered:
            rows[row] = places[row]
        return rows


def placed_cells(
    rows: list[list[str]], width: int, placer: Placer, merged: Mapping[tuple[int, int], Cell] | None = None
) -> RowCells:
    """Cells of all texts that are not blank, without the space around them; a text that repeats is held once."""
    known = _Stripped()
    return RowCells([list(map(known.__getitem__, texts)) for texts in rows], width, placer, merged)


class _Stripped(dict[str, str]):
    """Texts without the space around them, each stripped once."""

    def __missing__(self, text: str) -> str:
        bare = text.strip()
        return self.setdefault(text, self.setdefault(bare, bare))


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
