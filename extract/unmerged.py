"""Cells that run over several rows with a line for each: rows whose dividing lines were not drawn, or not seen."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace

from extract.documents.model import Cell, GridCells, Table
from extract.meaning import meaning


def unmerged(table: Table) -> Table:
    """The table with them cut, one a row: labels always, values only where the lines of a picture may be faint."""
    if isinstance(table.cells, GridCells) or not any(cell.row_span > 1 for cell in table.cells):
        return table
    labels = {cell.row for cell in table.cells if cell.column == 0 and (cell.row_span == 1 or _stacks_labels(cell))}
    labels |= {cell.row + k for cell in table.cells if _stacks_labels(cell) for k in range(cell.row_span)}
    return replace(table, cells=tuple(part for cell in table.cells for part in _parts(cell, labels)))


def _parts(cell: Cell, labels: set[int]) -> Iterator[Cell]:
    own_rows = set(range(cell.row, cell.row + cell.row_span))
    if _stacks_labels(cell) or (_stacks_values(cell) and own_rows <= labels):
        for index, line in enumerate(_lines(cell)):
            yield replace(cell, text=line, row=cell.row + index, row_span=1)
    else:
        yield cell


def _lines(cell: Cell) -> list[str]:
    return [line.strip() for line in cell.text.split("\n") if line.strip()]


def _stacks_labels(cell: Cell) -> bool:
    lines = _lines(cell)
    if cell.column or cell.row_span < 2 or len(lines) != cell.row_span:
        return False
    return all(meaning(line).head is not None and not meaning(line).value for line in lines)


def _stacks_values(cell: Cell) -> bool:
    lines = _lines(cell)
    if not cell.column or cell.confidence >= 1.0 or cell.row_span < 2 or len(lines) != cell.row_span:
        return False
    return all(any(char.isdigit() for char in line) for line in lines)
