"""Pictures in PDF and PNG: looked at with Pillow and read again with pdfium, not with what wrote them."""

import io

import pypdfium2
import pytest
from PIL import Image
from reportlab.pdfbase.pdfmetrics import stringWidth
from reviewed_parts import radio

from compare import picture_pdf
from compare.palette import LIGHT
from compare.picture import Pen, Picture, text_width

WHITE = "#FFFFFF"


def picture(draw, width=100, height=50):
    pen = Pen("#000000")
    draw(pen)
    return Picture(width, height, tuple(pen.marks), "told")


def pixels(of, sharpness=2.0):
    return Image.open(io.BytesIO(picture_pdf.png(of, WHITE, sharpness=sharpness))).convert("RGB")


def test_a_box_is_where_it_was_drawn():
    seen = pixels(picture(lambda pen: pen.box(10, 10, 20, 10, "#FF0000")))
    assert seen.size == (200, 100)
    assert seen.getpixel((40, 30)) == (255, 0, 0)
    assert seen.getpixel((40, 60)) == (255, 255, 255)
    assert seen.getpixel((100, 30)) == (255, 255, 255)


def test_lines_and_rings_are_drawn_in_their_colours():
    def draw(pen):
        pen.through([(0, 25), (100, 25)], colour="#0000FF", width=4)
        pen.dot(50, 25, 10, WHITE, edge="#00FF00", stroke=2)

    seen = pixels(picture(draw))
    assert seen.getpixel((10, 50)) == (0, 0, 255)
    assert seen.getpixel((100, 50)) == (255, 255, 255)
    assert seen.getpixel((100, 30)) == (0, 255, 0)


def test_every_sign_of_the_trade_can_be_read_out_of_the_pdf():
    said = "12 pF ±10 ppm −40…+85 °C 60 Ω 5 µW √ ω² ▲ ▼ ◇ △ ○ ▮ ∴ A–0"
    data = picture_pdf.pdf(picture(lambda pen: pen.write(0, 20, said, "start"), 600), WHITE)
    document = pypdfium2.PdfDocument(data)
    text = document[0].get_textpage().get_text_bounded()
    document.close()
    assert text.strip() == said


def test_text_of_the_east_is_kept_and_what_no_typeface_has_is_a_question_mark():
    fonts = {part: font for font, part in picture_pdf.runs("水晶 クリスタル 수정 ok \U0001f600")}
    assert fonts["水晶"] == "STSong-Light"
    assert fonts["クリスタル"] == "HeiseiKakuGo-W5"
    assert fonts["수정"] == "HYGothic-Medium"
    assert "?" in "".join(fonts)


def test_markup_in_a_text_stays_text():
    assert picture_pdf.marked_up("<b>&") == "&lt;b&gt;&amp;"


@pytest.mark.parametrize("text", ["circuit 7.70 pF, +8.3 ppm", "room left for load +23.3", "greatest 638", "needed 5"])
def test_words_are_no_wider_than_they_are_taken_to_be(text):
    picture_pdf.runs(text)
    assert 0.8 * text_width(text, 12) <= stringWidth(text, picture_pdf.REGULAR, 12) <= text_width(text, 12)


def test_a_chart_has_ink_of_every_kind_on_paper_and_in_grey():
    seen = pixels(radio().charts["ppm_against_load"].draw(LIGHT))
    colours = {colour for _, colour in seen.getcolors(1 << 20)}
    assert tuple(int(LIGHT.accent[at : at + 2], 16) for at in (1, 3, 5)) in colours
    grey = {shade for _, shade in seen.convert("L").getcolors()}
    assert min(grey) < 60
    assert max(grey) > 240


def test_the_same_picture_is_the_same_pdf():
    of = picture(lambda pen: pen.write(0, 20, "x"))
    assert picture_pdf.pdf(of, WHITE) == picture_pdf.pdf(of, WHITE)
