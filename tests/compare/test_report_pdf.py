"""The PDF of reports, read again with pdfium and pypdf."""

import io
import re

import made_sheets
import pypdfium2
import pytest
from pypdf import PdfReader
from reviewed_parts import dossier_of, part, radio

from compare.blocks import Grid, Heading, Report, Text
from compare.margin_report import margin_report
from compare.report_head import ReportHead
from compare.report_pdf import report_pdf


@pytest.fixture(scope="module")
def made():
    return report_pdf(margin_report(radio(), ReportHead(number="MR-7", project="Frost node")))


def pages(data):
    document = pypdfium2.PdfDocument(data)
    found = [document[at].get_textpage().get_text_bounded() for at in range(len(document))]
    document.close()
    return found


def test_pages_are_numbered_and_carry_title_and_versions(made):
    texts = pages(made)
    assert len(texts) > 5
    for at, text in enumerate(texts, start=1):
        assert f"page {at} of {len(texts)}" in text
        assert "MR-7" in text
        assert "quartzfolio/review/1" in text
    assert all("Margin report: ABX-26, Frost node" in text for text in texts)


def test_the_text_can_be_selected_signs_included_and_once_only(made):
    text = "\n".join(pages(made))
    for sign in ("Ω", "µW", "°C", "±", "−", "√", "▲ meets", "A–0"):
        assert sign in text
    margin = radio().review["margin"]["low"]
    assert re.search(rf"Margin {margin:.6g}\b", text.replace("\r\n", " "))
    assert text.count("rated 8 pF") == 1


def test_sections_are_bookmarks(made):
    titles = [one.title for one in PdfReader(io.BytesIO(made)).outline if not isinstance(one, list)]
    assert titles[0] == "1 Head"
    assert titles[13] == "14 Signatures"
    assert len(titles) == 15


def test_pictures_are_lines_and_no_dots(made):
    assert not any(page.images for page in PdfReader(io.BytesIO(made)).pages)


def test_typefaces_are_inside(made):
    fonts = {
        font.get_object()["/BaseFont"]
        for page in PdfReader(io.BytesIO(made)).pages
        for font in page["/Resources"]["/Font"].values()
    }
    assert any("QuartzfolioSans" in name for name in fonts)


def test_markup_in_a_sheet_stays_text():
    hostile = "<b>bold</b> & <font size=99>"
    one = dossier_of(part(number=hostile, maker=hostile))
    text = "\n".join(pages(report_pdf(margin_report(one, ReportHead(board=hostile)))))
    assert hostile in text.replace("\r\n", " ")


def test_a_word_longer_than_its_column_stays_inside_the_page():
    long = "X" * 400
    report = Report("t", "f", (Heading("1"), Grid(("a", "b"), ((long, long),)), Text(long), Text(f"* {long}", "code")))
    document = pypdfium2.PdfDocument(report_pdf(report))
    page = document[0]
    words = page.get_textpage()
    right = max(words.get_charbox(at)[2] for at in range(words.count_chars()))
    wide = page.get_width()
    document.close()
    assert right <= wide - 16 * 72 / 25.4 + 1


def test_text_of_the_east_is_in_it():
    one = dossier_of(part(made_sheets.reading("drive_level_uw", max=200.0), maker="きりさか水晶"))
    fonts = {
        font.get_object()["/BaseFont"]
        for page in PdfReader(io.BytesIO(report_pdf(margin_report(one, ReportHead())))).pages
        for font in page["/Resources"]["/Font"].values()
    }
    assert any("HeiseiKakuGo" in name for name in fonts)
