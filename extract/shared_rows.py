"""Rows of a table of models with one value in the middle: that value is every model's, though no line says so."""

from __future__ import annotations

from collections.abc import Sequence

from extract.documents.model import Cell
from extract.heads import Head
from extract.meaning import is_part_token

Row = Sequence[Cell | None]


def shared_by_models(body: Sequence[Row], heads: Sequence[Head]) -> list[Row]:
    """The rows, those with the one value in the middle of the models' columns given it in each of them.

    Only where some row gives every model a value of its own: in a table that leaves cells empty at will, one value in
    the middle says nothing of its neighbours.
    """
    models = [index for index, head in enumerate(heads) if head.levels and is_part_token(head.levels[-1])]
    if len(models) < 3 or not any(all(row[index] is not None for index in models) for row in body):
        return list(body)
    middles = {models[(len(models) - 1) // 2], models[len(models) // 2]}
    return [_filled(row, models) if _stands_alone(row, models, middles) else row for row in body]


def _stands_alone(row: Row, models: Sequence[int], middles: set[int]) -> bool:
    filled = [index for index in models if row[index] is not None]
    return len(filled) == 1 and filled[0] in middles and any(row[index] for index in range(models[0]))


def _filled(row: Row, models: Sequence[int]) -> Row:
    (value,) = (row[index] for index in models if row[index] is not None)
    return [value if index in models else cell for index, cell in enumerate(row)]
