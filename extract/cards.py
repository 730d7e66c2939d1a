"""Tables of cards: a row of values and below each the small print that names it, as on a page of key facts."""

from __future__ import annotations

from collections.abc import Sequence

from extract.documents.model import Cell
from extract.meaning import meaning

Row = Sequence[Cell | None]


def rows_of_cards(rows: Sequence[Row]) -> list[Row]:
    """The cards as rows of label and value; empty for a table that is anything else.

    Every second row must name a property in each place where the row above it has a value, and nowhere else.
    """
    if len(rows) < 2 or len(rows) % 2 or len(rows[0]) < 2:
        return []
    cards: list[Row] = []
    for values, labels in zip(rows[::2], rows[1::2], strict=True):
        pairs = [
            (label, value)
            for label, value in zip(labels, values, strict=True)
            if label is not None or value is not None
        ]
        if not pairs or not all(_is_card(label, value) for label, value in pairs):
            return []
        cards += [list(pair) for pair in pairs]
    return cards


def _is_card(label: Cell | None, value: Cell | None) -> bool:
    if label is None or value is None or meaning(label.text).head is None:
        return False
    return meaning(value.text).head is None and any(char.isdigit() for char in value.text)
