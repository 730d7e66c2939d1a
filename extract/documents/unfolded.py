"""A long table set in two or three columns of tables under one head -> one table, its parts under one another."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace

from extract.documents.piece import Piece
from extract.documents.words import text_of


def unfolded(pieces: Sequence[Piece], columns: int) -> tuple[list[Piece], int]:
    """Pieces and number of columns of a table, its parts stacked where its head says the same two or three times."""
    for parts in (3, 2):
        width = columns // parts
        if columns % parts == 0 and width >= 2 and _is_folded(pieces, parts, width):
            return _stacked(pieces, width), width
    return list(pieces), columns


def _is_folded(pieces: Sequence[Piece], parts: int, width: int) -> bool:
    """Tell whether the first row repeats, no cell lies across the parts, and all parts have the same rows."""
    head: dict[int, str] = {}
    for piece in pieces:
        cell = piece.cell
        if cell.column // width != (cell.column + cell.column_span - 1) // width:
            return False
        if cell.row == 0:
            if cell.row_span > 1 or cell.column_span > 1:
                return False
            head[cell.column] = " ".join(text_of(piece.words).lower().split())
    texts = [head.get(column, "") for column in range(parts * width)]
    return all(texts) and texts == texts[:width] * parts and len(set(texts[:width])) > 1


def _stacked(pieces: Sequence[Piece], width: int) -> list[Piece]:
    below = max(piece.cell.row + piece.cell.row_span for piece in pieces) - 1
    result = []
    for piece in pieces:
        cell = piece.cell
        part = cell.column // width
        if part and cell.row == 0:
            continue
        row = cell.row + part * below
        result.append(replace(piece, cell=replace(cell, row=row, column=cell.column - part * width)))
    return result
