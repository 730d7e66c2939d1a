"""Drawn shapes -> the straight lines that a reader of the page sees: lines, edges of frames and of coloured areas."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from typing import Literal, NamedTuple

from extract.documents.words import Ruling, union

# Points: fills this near to one another show no line between them.
ABUTTING = 0.6
# Points: ends that differ by less are level, or stand over one another.
STRAIGHT = 0.01
# Shares of the page: a shape that takes more is its background.
BACKGROUND_WIDTH, BACKGROUND_HEIGHT = 0.97, 0.9

Point = tuple[float, float]
Kind = Literal["line", "rect", "curve"]


class Shape(NamedTuple):
    """A drawn outline by its corners, in points from the top left of the page as shown.

    `colour` is what it is filled with, None where it is not filled or as white as the paper.
    """

    kind: Kind
    points: Sequence[Point]
    stroke: bool
    colour: str | None

    @property
    def box(self) -> Ruling:
        xs, ys = [x for x, _ in self.points], [y for _, y in self.points]
        return Ruling(min(xs), min(ys), max(xs), max(ys))


def rulings_of(shapes: Iterable[Shape], width: float, height: float) -> list[Ruling]:
    """Lines to be seen on a page of that size."""
    rulings: list[Ruling] = []
    fills: list[Shape] = []
    for shape in shapes:
        if shape.kind == "line":
            rulings.append(shape.box)
        elif shape.kind == "curve":
            if shape.stroke or shape.colour is not None:
                rulings += _straight_edges(shape.points)
        elif not _is_background(shape.box, width, height):
            if shape.stroke:
                rulings += _edges(shape.box)
            elif shape.colour is not None:
                fills.append(shape)
    for box in _abutting_joined(fills):
        rulings += _edges(box)
    return rulings


def _is_background(box: Ruling, width: float, height: float) -> bool:
    return box.x1 - box.x0 > BACKGROUND_WIDTH * width and box.bottom - box.top > BACKGROUND_HEIGHT * height


def _edges(box: Ruling) -> list[Ruling]:
    x0, top, x1, bottom = box
    return [
        Ruling(x0, top, x1, top),
        Ruling(x0, bottom, x1, bottom),
        Ruling(x0, top, x0, bottom),
        Ruling(x1, top, x1, bottom),
    ]


def _straight_edges(points: Sequence[Point]) -> list[Ruling]:
    return [
        Ruling(*union([(*start, *start), (*end, *end)]))
        for start, end in zip(points, points[1:], strict=False)
        if abs(start[0] - end[0]) < STRAIGHT or abs(start[1] - end[1]) < STRAIGHT
    ]


def _abutting_joined(fills: Iterable[Shape]) -> list[Ruling]:
    """Fills of one colour that stand edge to edge in a row as one: no line shows between them (striped tables)."""
    joined: list[tuple[str, Ruling]] = []
    placed = [(fill.colour or "", fill.box) for fill in fills]
    for colour, box in sorted(
        placed, key=lambda each: (each[0], round(each[1].top), round(each[1].bottom), each[1].x0)
    ):
        last = joined[-1][1] if joined and joined[-1][0] == colour else None
        if (
            last is not None
            and abs(last.top - box.top) < ABUTTING
            and abs(last.bottom - box.bottom) < ABUTTING
            and abs(last.x1 - box.x0) < ABUTTING
        ):
            joined[-1] = (colour, last._replace(x1=box.x1))
        else:
            joined.append((colour, box))
    return [box for _, box in joined]


def shape_of(points: Sequence[Point], *, closed: bool, stroke: bool, colour: str | None) -> Shape:
    """Shape of an outline drawn through these points, and back to the first where it is closed."""
    if closed and len(points) > 2 and not _same(points[0], points[-1]):
        points = [*points, points[0]]
    if len(points) == 2 or (len(points) == 3 and closed and _same(points[0], points[-1])):
        return Shape("line", points[:2], stroke, colour)
    if len(points) == 5 and _same(points[0], points[-1]) and _is_square(points):
        return Shape("rect", points, stroke, colour)
    return Shape("curve", points, stroke, colour)


def _same(one: Point, other: Point) -> bool:
    return abs(one[0] - other[0]) < STRAIGHT and abs(one[1] - other[1]) < STRAIGHT


def _is_square(points: Sequence[Point]) -> bool:
    """Tell whether four corners stand square to the page."""
    (x0, y0), (x1, y1), (x2, y2), (x3, y3) = points[:4]
    pairs = ((x0, x1), (y1, y2), (x2, x3), (y3, y0)), ((y0, y1), (x1, x2), (y2, y3), (x3, x0))
    return any(all(abs(a - b) < STRAIGHT for a, b in ends) for ends in pairs)
