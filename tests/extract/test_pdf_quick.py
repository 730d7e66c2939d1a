"""The quick way through a page gives what pdfplumber gives, or says that it is in doubt. pdfplumber is the judge."""

import io
from collections import Counter
from pathlib import Path

import pdfplumber
import pypdf
import pypdfium2
import pytest
from pypdf.generic import RectangleObject
from test_pdf import by_hand, changed, drawn, ruled, unruled

from extract.documents.glyphs import with_underlined_signs, words_of
from extract.documents.pdf_page import pdfium_frame, plumbed
from extract.documents.pdf_quick import quick_content

ROOT = Path(__file__).parents[2]
SHEETS = sorted([*(ROOT / "sample_specs").glob("*.pdf"), *(ROOT / "tests/corpus/sheets").glob("*.pdf")])
HELVETICA = "<< /Type /Font /Subtype /Type1 /BaseFont /Helvetica /Encoding /WinAnsiEncoding >>"
TIMES = "<< /Type /Font /Subtype /Type1 /BaseFont /Times-Bold /Encoding /WinAnsiEncoding >>"
SYMBOL = "<< /Type /Font /Subtype /Type1 /BaseFont /Symbol >>"
SQUARES = (
    "<< /Type /Font /Subtype /Type3 /FontBBox [0 0 750 750] /FontMatrix [0.001 0 0 0.001 0 0] /CharProcs << >>"
    " /Encoding << /Type /Encoding /Differences [97 /square] >> /FirstChar 97 /LastChar 97 /Widths [1000] >>"
)
# Points by which the two may differ: pdfium rounds the widths of letters.
ALIKE = 1.0


def both_ways(data):
    """For each page of a PDF what the quick way gives, or None, and what pdfplumber gives."""
    quick, slow = pypdfium2.PdfDocument(data), pdfplumber.open(io.BytesIO(data))
    for index in range(len(quick)):
        page = quick[index]
        frame, text_page = pdfium_frame(page), page.get_textpage()
        yield frame.size, quick_content(page, frame, text_page), plumbed(slow.pages[index], frame)
        text_page.close()
        page.close()
    slow.close()
    quick.close()


def assert_alike(size, quick, slow):
    words, judged = (words_of(with_underlined_signs(*content), *size, content[1]) for content in (quick, slow))
    assert "".join(word.text for word in words) == "".join(word.text for word in judged)
    # A gap right at the width of a space may part a word in one of the two ways: at most one word in a hundred.
    texts, others = (Counter(word.text for word in each) for each in (words, judged))
    assert (texts - others).total() <= 0.01 * len(judged)
    for word, other in zip(words, judged, strict=True) if texts == others else ():
        assert word.box == pytest.approx(other.box, abs=ALIKE)
        assert word.line_y == pytest.approx(other.line_y, abs=0.1)
        assert (word.size, word.bold) == (pytest.approx(other.size, abs=0.01), other.bold)
    assert long_lines(quick[1]) == long_lines(slow[1])


def long_lines(rulings):
    """Lines that can be seen, to the next half point."""
    seen = [line for line in rulings if max(line.x1 - line.x0, line.bottom - line.top) > 1]
    places = [[round(2 * value + 0.017) for value in line] for line in seen]
    return Counter(tuple(place) for place in places)


@pytest.mark.parametrize("sheet", SHEETS, ids=lambda sheet: sheet.name)
def test_words_and_lines_of_a_sheet_are_those_of_pdfplumber(sheet):
    for size, quick, slow in both_ways(sheet.read_bytes()):
        if quick is not None:
            assert_alike(size, quick, slow)


def test_most_sheets_are_read_the_quick_way():
    pages = [quick for sheet in SHEETS for _, quick, _ in both_ways(sheet.read_bytes())]
    assert sum(quick is not None for quick in pages) > 2 / 3 * len(pages)


def page_of(content, *fonts):
    return next(both_ways(by_hand(content, list(fonts) or [HELVETICA])))


PLAIN = "BT /F1 10 Tf 50 300 Td (Load capacitance and more words, for pages that have spaces) Tj ET "


@pytest.mark.parametrize(
    "content",
    [
        "BT /F1 10 Tf 50 280 Td [(load) -400 ( cap) 20 (acity ) -300 (8)] TJ ET",
        "BT /F1 10 Tf 50 280 Td (load) Tj ( cap) Tj 0 -20 Td (load ) Tj (cap) Tj 0 -20 Td (load) Tj ( ) Tj (cap) Tj ET",
        "BT /F1 10 Tf 1 0 0 1 50 280 Tm (load) Tj 1 0 0 1 68 280 Tm ( cap) Tj 1 0 0 1 90 280 Tm (   pF) Tj ET",
        "BT /F1 10 Tf 3 Tc 50 280 Td (loose type) Tj 0 Tc 5 Tw 0 -20 Td (wide words) Tj"
        " 0 Tw 80 Tz 0 -20 Td (12 pF) Tj ET",
        "BT /F1 10 Tf 50 280 Td (C) Tj -2 Ts /F1 7 Tf (0) Tj 0 Ts /F1 10 Tf ( 60) Tj 4 Ts /F1 6 Tf (2) Tj ET",
        "BT /F1 10 Tf 1 0 0 1 50 280 Tm (1) Tj 1 0 0 1 55.56 280 Tm (1) Tj 1 0 0 1 70 280 Tm (l) Tj"
        " 1 0 0 1 72.22 280 Tm (l) Tj 1 0 0 1 90 280 Tm (11) Tj 1 0 0 1 101.12 280 Tm (1) Tj ET",
        "BT /F1 10 Tf 1 0 0 1 50 280 Tm (well-) Tj 1 0 0 1 50 268 Tm (known) Tj 1 0 0 1 50 250 Tm (ESR) Tj"
        " 1 0 0 1 150 250 Tm (-) Tj 1 0 0 1 250 250 Tm (-) Tj 1 0 0 1 50 238 Tm (C0 -) Tj ET",
        "BT /F1 10 Tf 1 0 0 1 150 280 Tm (second) Tj 1 0 0 1 50 280 Tm (first) Tj 1 0 0 1 60 281 Tm (over) Tj ET",
        "q 1 0 0 -1 0 400 cm BT /F1 10 Tf 1 0 0 -1 50 150 Tm (flipped twice 60) Tj ET 50 160 100 20 re S Q",
        "BT /F1 10 Tf 50 280 Td (plain ) Tj /F2 14 Tf (and bold) Tj ET",
        "50 200 m 250 200 l S 50 180 200 15 re S q 2 0 0 2 10 10 cm 50 40 m 100 40 l 100 50 l 50 50 l h S Q",
        "0.9 g 50 150 100 15 re f 150 150 100 15 re f 1 g 50 130 100 15 re f 0 0 0 0 k 50 110 100 15 re f",
        "q 0 1 -1 0 400 20 cm 10 10 100 20 re S Q 300 100 m 350 100 360 150 380 150 c 380 120 l S",
        "50 90 m 50 60 l 80 60 l S 100 60 m 130 60 l h S 140 60 m 150 60 l 150 70 l 140 70 l s 160 60 m 170 60 l"
        " 170 70 l 160 70 l 160 60 l f 200 60 30 30 re n 0 0 500 400 re f",
    ],
)
def test_type_and_lines_drawn_in_odd_ways_are_those_of_pdfplumber(content):
    size, quick, slow = page_of(PLAIN + content, HELVETICA, TIMES)
    assert_alike(size, quick, slow)


@pytest.mark.parametrize("crop", [None, (20, 30, 480, 390), (55, 200, 300, 345)])
@pytest.mark.parametrize("drawing", [ruled, unruled])
def test_a_cropped_page_is_counted_from_its_crop_box(drawing, crop):
    def cut(writer):
        if crop:
            writer.pages[0].cropbox = RectangleObject(crop)

    ((size, quick, slow),) = both_ways(changed(drawn(drawing), cut))
    assert quick[0]
    assert_alike(size, quick, slow)


def test_a_form_is_read_where_its_matrix_puts_it():
    def page(paper):
        paper.beginForm("table")
        ruled(paper)
        paper.endForm()
        paper.beginForm("outer")
        paper.translate(10, -40)
        paper.scale(0.8, 0.8)
        paper.doForm("table")
        paper.endForm()
        paper.doForm("outer")
        paper.translate(100, -200)
        paper.doForm("outer")
        paper.drawString(20, 20, "below")

    ((size, quick, slow),) = both_ways(drawn(page))
    assert len([glyph for glyph in quick[0] if glyph.text == "8"]) == 2
    assert_alike(size, quick, slow)


@pytest.mark.parametrize(
    ("content", "fonts"),
    [
        ("BT /F1 -10 Tf 1 0 0 -1 50 280 Tm (upside) Tj ET", [HELVETICA]),
        ("BT /F1 10 Tf 0 1 -1 0 50 200 Tm (sideways) Tj ET", [HELVETICA]),
        ("BT /F1 10 Tf 0.9 0.2 -0.2 0.9 50 200 Tm (slanted) Tj ET", [HELVETICA]),
        ("BT /F1 10 Tf 1 0 0.3 1 50 200 Tm (leaning) Tj ET", [HELVETICA]),
        ("BT /F2 10 Tf 50 280 Td (a) Tj ET", [HELVETICA, SQUARES]),
        ("BT /F2 10 Tf 50 280 Td (10 m) Tj ET", [HELVETICA, SYMBOL]),
        ("BT /F1 10 Tf 50 280 Td (60 Ohm) Tj 0.3 0 Td (60 Ohm) Tj ET", [HELVETICA]),
        ("/Span << /ActualText (60) >> BDC BT /F1 10 Tf 50 280 Td (80) Tj ET EMC", [HELVETICA]),
        ("BT /F1 10 Tf 50 280 Td (60 \\001) Tj ET", [HELVETICA]),
    ],
    ids=["upside", "sideways", "slanted", "leaning", "type 3", "symbol", "twice", "actual text", "control"],
)
def test_a_page_in_doubt_is_left_to_pdfplumber(content, fonts):
    assert page_of(PLAIN + content, *fonts)[1] is None


def test_a_turned_page_is_left_to_pdfplumber():
    def turn(writer: pypdf.PdfWriter):
        writer.pages[0].rotate(90)

    ((_, quick, _),) = both_ways(changed(drawn(ruled), turn))
    assert quick is None
