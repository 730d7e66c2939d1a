"""Drawn lines -> grids: which cells there are, where, and how many rows and columns each covers."""

from __future__ import annotations

from bisect import bisect_left
from collections.abc import Iterable, Sequence
from dataclasses import dataclass, field
from itertools import pairwise

from extract.documents.words import Box, Ruling, union

# Lines closer than this are one: double lines, the two edges of a thin filled bar, cell borders drawn cell by cell.
SNAP = 1.5
# Lines this close at their ends touch.
REACH = 2.0
# Shorter lines are underlined signs, ticks and arrow heads.
SHORTEST = 5.0
# Shorter pieces with gaps of at most this between them are a dashed or dotted line.
DASH, DASH_GAP = 8.0, 5.0
# A page with more lines holds a drawing; a grid with more cells is hatching or paper ruled in squares.
MOST_LINES, MOST_UNITS = 1200, 6000


@dataclass(frozen=True, slots=True)
class GridCell:
    """A cell by its first row and column, its spans and its box."""

    row: int
    column: int
    row_span: int
    column_span: int
    box: Box


@dataclass(frozen=True, slots=True)
class Grid:
    """A grid of lines.

    `cells` are rectangles only; `xs` and `ys` are the positions of its lines; `closed` tells whether the left and right
    sides are drawn.
    """

    xs: tuple[float, ...]
    ys: tuple[float, ...]
    cells: tuple[GridCell, ...]
    closed: bool = False

    @property
    def box(self) -> Box:
        return (self.xs[0], self.ys[0], self.xs[-1], self.ys[-1])


@dataclass(slots=True)
class _Line:
    """A line on one position, with the stretches that are drawn."""

    at: float
    stretches: list[tuple[float, float]] = field(default_factory=list)

    def covers(self, start: float, end: float) -> bool:
        """Tell whether most of the way from start to end is drawn."""
        if any(a <= start and end <= b for a, b in self.stretches):
            return True
        drawn = sum(max(0.0, min(end, b) - max(start, a)) for a, b in self.stretches)
        return drawn >= 0.8 * (end - start)


def grids_of(rulings: Iterable[Ruling]) -> list[Grid]:
    """Grids that lines make by touching, from the top down.

    A side that is not drawn is taken as drawn: tables are often open left and right.
    """
    pieces = [piece for piece in _merged(list(rulings)) if _length(piece) >= SHORTEST]
    # Hatching and drawings: what is left must stay within the square of itself.
    for least in (15.0, 40.0, 100.0):
        if len(pieces) > MOST_LINES:
            pieces = [piece for piece in pieces if _length(piece) >= least]
    grids = []
    for group in _connected(pieces):
        if sum(piece.horizontal for piece in group) >= 2 or any(not piece.horizontal for piece in group):
            grid = grid_of(group)
            if grid is not None:
                grids.append(grid)
    return sorted(grids, key=lambda grid: (grid.ys[0], grid.xs[0]))


def stacks_of(
    rulings: Iterable[Ruling], tables: Sequence[Box], frames: Sequence[Box], boxes: Sequence[Box]
) -> list[list[Ruling]]:
    """Horizontal lines of the same width under one another, from the top down.

    Lines of the tables found so far and of frames round the page are left out. A line may be drawn column by column,
    with gaps; the sides of closed boxes that stand next to one another are not taken for one.
    """
    level = [ruling for ruling in rulings if ruling.horizontal]
    sides = [ruling for ruling in level if any(_on(ruling, box) for box in boxes)]
    others = [ruling for ruling in level if not any(_on(ruling, box) for box in boxes)]
    loose = [
        piece
        for piece in [*_merged(sides), *_merged(others, gap=14.0)]
        if piece.x1 - piece.x0 > 40
        and not any(_on(piece, box) for box in tables)
        and not any(_bounds(piece, box) for box in frames)
    ]
    stacks: list[list[Ruling]] = []
    for piece in sorted(loose, key=lambda piece: piece.top):
        for stack in stacks:
            if _same_width(stack[0], piece):
                stack.append(piece)
                break
        else:
            stacks.append([piece])
    return [stack for stack in stacks if len(stack) >= 2]


def _on(piece: Ruling, box: Box) -> bool:
    x0, top, x1, bottom = box
    return x0 - 2 <= piece.x0 and piece.x1 <= x1 + 2 and top - 2 <= piece.top <= bottom + 2


def _bounds(piece: Ruling, box: Box) -> bool:
    """Tell whether the line runs from side to side of the box."""
    return _on(piece, box) and abs(piece.x0 - box[0]) < 3 and abs(piece.x1 - box[2]) < 3


def _same_width(one: Ruling, other: Ruling) -> bool:
    slack = max(6.0, 0.03 * (one.x1 - one.x0))
    return abs(one.x0 - other.x0) < slack and abs(one.x1 - other.x1) < slack


def _merged(rulings: Sequence[Ruling], gap: float = REACH) -> list[Ruling]:
    """Lines with those on the same position joined where they touch."""
    merged = []
    for horizontal in (True, False):
        chosen = [_axis(ruling) for ruling in rulings if ruling.horizontal == horizontal]
        for position, stretches in _snapped(chosen):
            for start, end in _joined(stretches, gap):
                merged.append(
                    Ruling(start, position, end, position) if horizontal else Ruling(position, start, position, end)
                )
    return merged


def _length(ruling: Ruling) -> float:
    return max(ruling.x1 - ruling.x0, ruling.bottom - ruling.top)


def _axis(ruling: Ruling) -> tuple[float, float, float]:
    if ruling.horizontal:
        return ((ruling.top + ruling.bottom) / 2, ruling.x0, ruling.x1)
    return ((ruling.x0 + ruling.x1) / 2, ruling.top, ruling.bottom)


def _snapped(lines: list[tuple[float, float, float]]) -> list[tuple[float, list[tuple[float, float]]]]:
    groups: list[list[tuple[float, float, float]]] = []
    for line in sorted(lines):
        if groups and line[0] - groups[-1][-1][0] < SNAP and line[0] - groups[-1][0][0] < 2 * SNAP:
            groups[-1].append(line)
        else:
            groups.append([line])
    return [(sum(line[0] for line in group) / len(group), [line[1:] for line in group]) for group in groups]


def _joined(stretches: Iterable[tuple[float, float]], gap: float) -> list[tuple[float, float]]:
    joined: list[tuple[float, float]] = []
    pieces = sorted(stretches)
    dashes = [False, *(_dashes(one, other) for one, other in pairwise(pieces)), False]
    for index, (start, end) in enumerate(pieces):
        # Two tables whose corners are drawn apart are no dashed line; that has gap upon gap.
        dashed = dashes[index] and (dashes[index - 1] or dashes[index + 1])
        if joined and start - joined[-1][1] <= (max(gap, DASH_GAP) if dashed else gap):
            joined[-1] = (joined[-1][0], max(joined[-1][1], end))
        else:
            joined.append((start, end))
    return joined


def _dashes(one: tuple[float, float], other: tuple[float, float]) -> bool:
    """Whether two stretches are two dashes with their gap."""
    short = one[1] - one[0] < DASH and other[1] - other[0] < DASH
    return short and 0 < other[0] - one[1] <= DASH_GAP


def _connected(pieces: Sequence[Ruling]) -> list[list[Ruling]]:
    """Lines grouped by touching one another."""
    parent = list(range(len(pieces)))

    def root(index: int) -> int:
        while parent[index] != index:
            parent[index] = parent[parent[index]]
            index = parent[index]
        return index

    level = [index for index, piece in enumerate(pieces) if piece.horizontal]
    upright = [index for index, piece in enumerate(pieces) if not piece.horizontal]
    for h in level:
        row = pieces[h]
        for v in upright:
            column = pieces[v]
            meets = (
                row.x0 - REACH <= column.x0 <= row.x1 + REACH and column.top - REACH <= row.top <= column.bottom + REACH
            )
            if meets:
                parent[root(h)] = root(v)
    groups: dict[int, list[Ruling]] = {}
    for index, piece in enumerate(pieces):
        groups.setdefault(root(index), []).append(piece)
    return list(groups.values())


def grid_of(pieces: Sequence[Ruling]) -> Grid | None:
    """Grid that these lines make; None where it has no area."""
    x0, top, x1, bottom = union(pieces)
    rows = _positions([piece.top for piece in pieces if piece.horizontal] + [top, bottom])
    columns = _positions([piece.x0 for piece in pieces if not piece.horizontal] + [x0, x1])
    if len(rows) < 2 or len(columns) < 2 or len(rows) * len(columns) > MOST_UNITS:
        return None
    level, upright = _lines(pieces, rows, True), _lines(pieces, columns, False)
    closed = upright[0].covers(rows[0], rows[-1]) and upright[-1].covers(rows[0], rows[-1])
    return Grid(tuple(columns), tuple(rows), tuple(_cells(columns, rows, level, upright)), closed)


def _positions(values: Iterable[float]) -> list[float]:
    positions: list[float] = []
    for value in sorted(values):
        if not positions or value - positions[-1] >= SNAP:
            positions.append(value)
    return positions


def _lines(pieces: Sequence[Ruling], positions: Sequence[float], horizontal: bool) -> list[_Line]:
    lines = [_Line(position) for position in positions]
    for piece in pieces:
        if piece.horizontal != horizontal:
            continue
        at, start, end = _axis(piece)
        index = bisect_left(positions, at - SNAP)
        lines[min(index, len(lines) - 1)].stretches.append((start, end))
    return lines


def _cells(
    xs: Sequence[float], ys: Sequence[float], level: Sequence[_Line], upright: Sequence[_Line]
) -> list[GridCell]:
    """Unit cells joined where no line parts them; only rectangles are cells."""
    rows, columns = len(ys) - 1, len(xs) - 1
    parent = {(row, column): (row, column) for row in range(rows) for column in range(columns)}

    def root(unit: tuple[int, int]) -> tuple[int, int]:
        while parent[unit] != unit:
            parent[unit] = parent[parent[unit]]
            unit = parent[unit]
        return unit

    for row in range(rows):
        for column in range(columns):
            if column + 1 < columns and not upright[column + 1].covers(ys[row], ys[row + 1]):
                parent[root((row, column + 1))] = root((row, column))
            if row + 1 < rows and not level[row + 1].covers(xs[column], xs[column + 1]):
                parent[root((row + 1, column))] = root((row, column))
    members: dict[tuple[int, int], list[tuple[int, int]]] = {}
    for unit in parent:
        members.setdefault(root(unit), []).append(unit)
    cells = []
    for units in members.values():
        first_row, last_row = min(unit[0] for unit in units), max(unit[0] for unit in units)
        first, last = min(unit[1] for unit in units), max(unit[1] for unit in units)
        row_span, column_span = last_row - first_row + 1, last - first + 1
        if row_span * column_span == len(units):
            box = (xs[first], ys[first_row], xs[last + 1], ys[last_row + 1])
            cells.append(GridCell(first_row, first, row_span, column_span, box))
    return sorted(cells, key=lambda cell: (cell.row, cell.column))
