"""Pictures of pages with the box drawn. The PDF is written by Pillow, one point a pixel."""

import hashlib
import io

import pytest
from PIL import Image

from compare.evidence import BOX_COLOUR, page_picture, sheet_bytes
from extract.model import SpecSheet, Where

POINTS = (300, 200)


def pdf():
    data = io.BytesIO()
    Image.new("RGB", POINTS, "white").save(data, "PDF", resolution=72)
    return data.getvalue()


def png(size=(600, 400)):
    data = io.BytesIO()
    Image.new("RGB", size, "white").save(data, "PNG")
    return data.getvalue()


def sheet(kind, data, name="x"):
    return SpecSheet(file=name, sha256=hashlib.sha256(data).hexdigest(), kind=kind)


def drawn(picture):
    """The box of everything that has the colour of the box, in pixels."""
    mask = picture.point(lambda value: value).convert("RGB")
    pixels = [
        (x, y)
        for x in range(mask.width)
        for y in range(mask.height)
        if all(abs(a - b) < 8 for a, b in zip(mask.getpixel((x, y)), BOX_COLOUR, strict=True))
    ]
    xs, ys = zip(*pixels, strict=True)
    return min(xs), min(ys), max(xs), max(ys)


def test_the_box_of_a_pdf_is_drawn_where_it_stands_in_points():
    data = pdf()
    pictured = page_picture(data, sheet("pdf", data), Where(page=1, box=(100, 50, 200, 80)))
    scale = pictured.page.width / POINTS[0]
    left, top, right, bottom = (end / scale for end in drawn(pictured.page))
    assert (left, top, right, bottom) == pytest.approx((100, 50, 200, 80), abs=5)


def test_the_box_of_a_picture_is_drawn_in_its_pixels():
    data = png()
    pictured = page_picture(data, sheet("image", data), Where(page=1, box=(100, 50, 200, 80)))
    assert pictured.page.size == (600, 400)
    assert drawn(pictured.page) == pytest.approx((100, 50, 200, 80), abs=5)


def test_the_close_up_holds_the_whole_box():
    data = png((1200, 1600))
    for box in ((0, 0, 80, 20), (1100, 1580, 1200, 1600), (10, 700, 1190, 760)):
        close = page_picture(data, sheet("image", data), Where(page=1, box=box)).close_up
        left, top, right, bottom = drawn(close)
        assert right - left == pytest.approx(box[2] - box[0], abs=12)
        assert bottom - top == pytest.approx(box[3] - box[1], abs=12)


def test_a_large_scan_is_drawn_smaller_with_its_box_in_place():
    data = png((3400, 400))
    pictured = page_picture(data, sheet("image", data), Where(page=1, box=(1700, 100, 2000, 160)))
    assert pictured.page.width == 1700
    assert drawn(pictured.page) == pytest.approx((850, 50, 1000, 80), abs=5)


def test_other_kinds_have_no_picture():
    assert page_picture(b"a;b", sheet("csv", b"a;b"), Where(line=1, cell="A1")) is None


def test_a_file_that_changed_since_it_was_read_is_not_shown_as_evidence(tmp_path):
    file = tmp_path / "a.png"
    file.write_bytes(png())
    read = sheet("image", png(), str(file))
    assert sheet_bytes(read) == png()
    file.write_bytes(png((10, 10)))
    assert sheet_bytes(read) is None
    file.unlink()
    assert sheet_bytes(read) is None
