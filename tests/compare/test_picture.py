"""Pictures as marks, and their SVG."""

import base64

import pytest
from lxml import etree

from compare.picture import FILE_FONT, Line, Pen, Picture, as_address, svg, svg_file, text_width

SVG = "{http://www.w3.org/2000/svg}"


def drawn(pen, told="a picture"):
    return Picture(100, 50, tuple(pen.marks), told)


def test_marks_become_svg_in_their_order():
    pen = Pen("#111111")
    pen.box(1, 2, 3, 4, "#222222", edge="#333333")
    pen.dot(5, 6, 2, "#444444")
    pen.write(10, 20, "12 pF", "end", bold=True)
    root = etree.fromstring(svg(drawn(pen)).encode())
    assert [child.tag.removeprefix(SVG) for child in root] == ["rect", "circle", "text"]
    assert root[2].get("text-anchor") == "end"
    assert root.get("viewBox") == "0 0 100 50"


def test_a_path_of_letters_is_the_points_it_says():
    pen = Pen("#111111")
    pen.line("M10,20V30H15h5L1,2ZM0,0H3")
    (mark,) = pen.marks
    assert mark.paths == (
        ((10, 20), (10, 30), (15, 30), (20, 30), (1, 2), (10, 20)),
        ((0, 0), (3, 0)),
    )


def test_hostile_text_stays_text():
    pen = Pen("#111111")
    pen.write(0, 0, '</text><script>alert("x")</script>&', key='x" onload="y')
    root = etree.fromstring(svg(drawn(pen, '"<b>')).encode())
    assert len(root) == 1
    assert root[0].text == '</text><script>alert("x")</script>&'
    assert root[0].get("data-field") == 'x" onload="y'
    assert root.get("aria-label") == '"<b>'


def test_hatching_stays_in_its_box_and_runs_at_45_degrees():
    pen = Pen("#111111")
    pen.hatch(10, 20, 50, 30, "#CCCCCC")
    (mark,) = pen.marks
    for (x1, y1), (x2, y2) in mark.paths:
        assert 10 <= x1 <= x2 <= 60
        assert 20 <= y2 <= y1 <= 50
        assert x2 - x1 == pytest.approx(y1 - y2)


def test_a_saved_file_has_its_background_and_needs_nothing_from_a_page():
    pen = Pen("#111111")
    pen.write(0, 0, "Ω")
    text = svg_file(drawn(pen), "#FBFAF7").decode()
    assert text.index("#FBFAF7") < text.index("Ω")
    assert "var(" not in text
    assert FILE_FONT in text


def test_the_address_holds_the_whole_picture():
    text = svg(drawn(Pen("#111111")))
    head, _, body = as_address(text).partition(",")
    assert head == "data:image/svg+xml;base64"
    assert base64.b64decode(body).decode() == text


def test_a_line_of_one_point_is_none():
    pen = Pen("#111111")
    pen.through([(1, 1)])
    pen.through([(1, 1), (2, 2)], dash=(2, 3))
    assert [type(mark) for mark in pen.marks] == [Line]


def test_text_is_taken_a_little_too_wide():
    # Measured with the shipped typeface by reportlab: see test_picture_pdf.
    assert text_width("circuit 7.70 pF, +8.3 ppm", 12) > 100
