"""Grids of drawn lines."""

from extract.documents.ruled import grids_of
from extract.documents.words import Ruling


def frame(top, bottom, *xs):
    """A row of closed cells whose corners are drawn as pieces of their own, as browsers print them."""
    rulings = [Ruling(xs[0], y, xs[-1], y) for y in (top, bottom)]
    for x in xs:
        rulings += [
            Ruling(x, top, x, top + 0.6),
            Ruling(x, top + 0.6, x, bottom - 0.6),
            Ruling(x, bottom - 0.6, x, bottom),
        ]
    return rulings


def test_two_tables_close_to_one_another_stay_two():
    assert len(grids_of([*frame(0, 14, 0, 60, 120), *frame(18, 32, 0, 90, 120)])) == 2


def test_dashes_are_one_line():
    dashed = [Ruling(60, y, 60, y + 3) for y in range(0, 30, 6)]
    (grid,) = grids_of([*frame(0, 27, 0, 120), *dashed])
    assert len(grid.cells) == 2
