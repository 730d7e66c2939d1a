"""What of drawn shapes a reader of the page sees as straight lines."""

import pytest

from extract.documents.shapes import rulings_of, shape_of
from extract.documents.words import Ruling

SIZE = (500, 400)
SQUARE = [(10, 10), (110, 10), (110, 30), (10, 30)]


def lines(*shapes):
    return rulings_of(shapes, *SIZE)


def outline(points, *, closed=True, stroke=True, colour=None):
    return shape_of(points, closed=closed, stroke=stroke, colour=colour)


def test_a_stroke_between_two_points_is_a_line():
    assert lines(outline([(10, 20), (90, 20)], closed=False)) == [Ruling(10, 20, 90, 20)]


@pytest.mark.parametrize("points", [SQUARE, [*SQUARE, SQUARE[0]]])
def test_a_drawn_frame_is_its_four_sides(points):
    sides = [Ruling(10, 10, 110, 10), Ruling(10, 30, 110, 30), Ruling(10, 10, 10, 30), Ruling(110, 10, 110, 30)]
    assert sorted(lines(outline(points))) == sorted(sides)


def test_a_coloured_area_has_edges_and_a_white_one_has_none():
    assert len(lines(outline(SQUARE, stroke=False, colour="grey"))) == 4
    assert lines(outline(SQUARE, stroke=False, colour=None)) == []


def test_no_line_shows_between_areas_of_one_colour_side_by_side():
    right = [(x + 100, y) for x, y in SQUARE]
    found = lines(*(outline(points, stroke=False, colour="grey") for points in (SQUARE, right)))
    assert {line.x0 for line in found if not line.horizontal} == {10, 210}
    found = lines(outline(SQUARE, stroke=False, colour="grey"), outline(right, stroke=False, colour="blue"))
    assert {line.x0 for line in found if not line.horizontal} == {10, 110, 210}


def test_the_pages_background_has_no_edges():
    assert lines(outline([(0, 0), (500, 0), (500, 400), (0, 400)])) == []


def test_only_the_straight_edges_of_an_outline_count():
    assert lines(outline([(10, 10), (60, 10), (80, 30), (80, 90)], closed=False)) == [
        Ruling(10, 10, 60, 10),
        Ruling(80, 30, 80, 90),
    ]
