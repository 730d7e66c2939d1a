"""Texts set in the middle of several columns of a table without lines: one value that those columns share.

Where the texts of a column begin at one edge, or stand round one middle, a text that does neither but stands in the
middle of some columns that its row leaves empty is a merged cell whose lines were not drawn.
"""

from __future__ import annotations

from collections import Counter
from collections.abc import Collection, Sequence
from dataclasses import replace
from itertools import pairwise
from statistics import median

from extract.documents.columns import Span, span_of
from extract.documents.piece import Piece

# Text sizes by which the beginnings of a column's texts may differ, and by which a merged one differs at least.
ALIGNED, ASIDE = 0.35, 1.0
# Share of a column's texts that begin at its edge, or stand round its middle.
LEAST_ALIGNED = 0.6
# Share of the columns' distance by which a merged text may miss their middle.
OFF_MIDDLE = 0.2
LEAST_ROWS = 4
# Rows that fill all columns, at least; and of the fullest column's texts what share a usual one has.
LEAST_FULL, USUAL = 3, 0.4


def shared_out(pieces: Sequence[Piece]) -> list[Piece]:
    """Pieces of a table without lines, those in the middle of empty columns spread over them."""
    rows: dict[int, list[Piece]] = {}
    for piece in pieces:
        rows.setdefault(piece.cell.row, []).append(piece)
    usual = _usual_columns(pieces)
    if len(usual) < 3 or len(rows) < LEAST_ROWS or any(piece.cell.row_span > 1 for piece in pieces):
        return list(pieces)
    grid = _Grid(rows.values(), usual)
    if not (grid.at_left or grid.in_middle):
        return list(pieces)
    return [_spread(piece, rows[piece.cell.row], grid) for piece in pieces]


def _usual_columns(pieces: Sequence[Piece]) -> list[int]:
    """The columns in which many rows have a text; a text in the middle of two may stand in a column of its own."""
    counts = Counter(piece.cell.column for piece in pieces)
    most = max((count for column, count in counts.items() if column), default=0)
    return sorted(column for column, count in counts.items() if count >= USUAL * most)


class _Grid:
    """Where the usual columns after the first begin, where their middles are, by the rows that fill all of them."""

    def __init__(self, rows: Collection[Sequence[Piece]], columns: Sequence[int]) -> None:
        self.columns = list(columns)
        own: list[list[Span]] = [[] for _ in columns]
        for row in rows:
            if [piece.cell.column for piece in row] == self.columns and all(len(piece.lines) == 1 for piece in row):
                for spans, piece in zip(own, row, strict=True):
                    spans.append(span_of(piece.lines[0]))
        known = len(own[0]) >= LEAST_FULL
        self.size = median(word.size for row in rows for piece in row for word in piece.words)
        self.lefts = [median(span[0] for span in spans) for spans in own] if known else []
        self.middles = [median(sum(span) / 2 for span in spans) for spans in own] if known else []
        self.at_left = known and self._aligned([[span[0] for span in spans] for spans in own], self.lefts)
        self.in_middle = known and self._aligned([[sum(span) / 2 for span in spans] for spans in own], self.middles)
        self.anchors = self.lefts if self.at_left else self.middles
        self.right = max(span_of(line)[1] for row in rows for piece in row for line in piece.lines)

    def _aligned(self, values: Sequence[Sequence[float]], anchors: Sequence[float]) -> bool:
        shares = [
            sum(abs(value - anchor) <= ALIGNED * self.size for value in column) / len(column)
            for column, anchor in zip(values[1:], anchors[1:], strict=True)
        ]
        return min(shares) >= LEAST_ALIGNED

    def middle(self, first: int, last: int) -> float:
        """The middle of the usual columns from `first` to `last`, by their places among them."""
        if not self.at_left:
            return (self.anchors[first] + self.anchors[last]) / 2
        after = self.anchors[last + 1 : last + 2] or [max(self.right, self.anchors[last] + self.pitch)]
        return (self.anchors[first] + after[0]) / 2

    @property
    def pitch(self) -> float:
        """The usual distance from one column to the next."""
        return median(after - before for before, after in pairwise(self.anchors[1:]))


def _spread(piece: Piece, row: Sequence[Piece], grid: _Grid) -> Piece:
    cell = piece.cell
    if cell.column == 0 or cell.column_span > 1 or len(piece.lines) != 1:
        return piece
    left, right = span_of(piece.lines[0])
    if cell.column in grid.columns:
        stands = left if grid.at_left else (left + right) / 2
        if abs(stands - grid.anchors[grid.columns.index(cell.column)]) < ASIDE * grid.size:
            return piece
    taken = {k for other in row if other is not piece for k in range(other.cell.column, _end(other))}
    ranges = [
        (abs(grid.middle(first, last) - (left + right) / 2), first, last)
        for first in range(1, len(grid.columns))
        for last in range(first, len(grid.columns))
        if not taken & set(grid.columns[first : last + 1])
    ]
    off, first, last = min(ranges, default=(float("inf"), 1, 1))
    if last == first or off > OFF_MIDDLE * grid.pitch:
        return piece
    begin, end = grid.columns[first], grid.columns[last]
    return replace(piece, cell=replace(cell, column=begin, column_span=end - begin + 1))


def _end(piece: Piece) -> int:
    return piece.cell.column + piece.cell.column_span
