"""PDF bytes -> Document. Pages are drawn by reportlab or written by hand; pypdf turns, crops and locks them."""

import io
import sys

import pdfplumber
import pypdf
import pypdfium2
import pytest
from pypdf.generic import RectangleObject
from reportlab.pdfgen import canvas

import extract.documents
from extract.documents import pdf
from extract.documents.model import DocumentError, Line, Table
from extract.documents.symbols import translated

WIDTH, HEIGHT = 500, 400


def drawn(*pages, size=(WIDTH, HEIGHT)):
    """A PDF of pages, each drawn by a function of the canvas."""
    buffer = io.BytesIO()
    paper = canvas.Canvas(buffer, pagesize=size)
    for page in pages:
        paper.setFont("Helvetica", 10)
        page(paper)
        paper.showPage()
    paper.save()
    return buffer.getvalue()


def changed(data, change):
    """The PDF after a change by pypdf."""
    writer = pypdf.PdfWriter(clone_from=pypdf.PdfReader(io.BytesIO(data)))
    change(writer)
    buffer = io.BytesIO()
    writer.write(buffer)
    return buffer.getvalue()


def by_hand(content, fonts):
    """A PDF of one page from its content stream and font objects, for what reportlab cannot draw."""
    resources = " ".join(f"/F{index + 1} {index + 5} 0 R" for index in range(len(fonts)))
    streams = [font for font in fonts if isinstance(font, tuple)]
    objects = [
        "<< /Type /Catalog /Pages 2 0 R >>",
        f"<< /Type /Pages /Kids [3 0 R] /Count 1 /MediaBox [0 0 {WIDTH} {HEIGHT}] >>",
        f"<< /Type /Page /Parent 2 0 R /Contents 4 0 R /Resources << /Font << {resources} >> >> >>",
        f"<< /Length {len(content)} >>\nstream\n{content}\nendstream",
    ]
    extra = []
    for font in fonts:
        if isinstance(font, tuple):
            number = 5 + len(fonts) + len(extra)
            objects.append(font[0].replace("MAP", f"{number} 0 R"))
            extra.append(f"<< /Length {len(font[1])} >>\nstream\n{font[1]}\nendstream")
        else:
            objects.append(font)
    assert len(extra) == len(streams)
    body, places = "%PDF-1.7\n", []
    for number, text in enumerate(objects + extra, start=1):
        places.append(len(body))
        body += f"{number} 0 obj\n{text}\nendobj\n"
    table = "".join(f"{place:010d} 00000 n \n" for place in places)
    start = len(body)
    body += f"xref\n0 {len(places) + 1}\n0000000000 65535 f \n{table}"
    body += f"trailer\n<< /Size {len(places) + 1} /Root 1 0 R >>\nstartxref\n{start}\n%%EOF\n"
    return body.encode("latin-1")


def text_of(document):
    return [block.text if isinstance(block, Line) else grid_of(block) for block in document.blocks]


def grid_of(table):
    return [[cell and cell.text for cell in row] for row in table.grid()]


def tables_of(document):
    return [block for block in document.blocks if isinstance(block, Table)]


ROWS = [["Parameter", "Value", "Remarks"], ["Load capacitance", "8 pF", "typical"], ["ESR", "60 Ohm max.", "at 25 C"]]
COLUMNS, TOP, PITCH = (60, 190, 290, 400), 330, 22


def ruled(paper, rows=ROWS):
    """A ruled table; the cell in row 1 and column 1 is filled with red."""
    for row, texts in enumerate(rows):
        y = TOP - PITCH * (row + 1)
        for column, text in enumerate(texts):
            left, right = COLUMNS[column], COLUMNS[column + 1]
            if (row, column) == (1, 1):
                paper.setFillColorRGB(1, 0, 0)
                paper.rect(left, y, right - left, PITCH, fill=1)
                paper.setFillColorRGB(0, 0, 0)
            paper.rect(left, y, right - left, PITCH)
            paper.drawString(left + 4, y + 7, text)


# --- where things stand


def unruled(paper, level_lines=False):
    """The same table without lines, or with level lines only, and one text on two lines."""
    for row, texts in enumerate(ROWS):
        y = TOP - PITCH * (row + 1)
        if level_lines:
            paper.line(COLUMNS[0], y, COLUMNS[-1], y)
        for column, text in enumerate(texts):
            paper.drawString(COLUMNS[column] + 4, y + 9, text)
    paper.drawString(COLUMNS[2] + 4, y + 1, "and 10 uW")
    if level_lines:
        paper.line(COLUMNS[0], TOP, COLUMNS[-1], TOP)


@pytest.mark.parametrize("page", [ruled, unruled, lambda paper: unruled(paper, level_lines=True)])
def test_pdfplumber_finds_each_cells_text_under_its_box(page):
    data = drawn(page)
    (table,) = tables_of(pdf.read(data))
    assert [row[:2] for row in grid_of(table)] == [row[:2] for row in ROWS]
    with pdfplumber.open(io.BytesIO(data)) as file:
        for cell in table.cells:
            assert file.pages[0].crop(cell.where.box).extract_text() == cell.text


@pytest.mark.parametrize("rotation", [0, 90, 180, 270])
@pytest.mark.parametrize("crop", [None, (40, 200, 480, 390)])
def test_a_box_is_where_pdfium_draws_the_cell(rotation, crop):
    def change(writer):
        page = writer.pages[0]
        if rotation:
            page.rotate(rotation)
        if crop:
            page.cropbox = RectangleObject(crop)

    data = changed(drawn(ruled), change)
    (table,) = tables_of(pdf.read(data))
    assert grid_of(table) == ROWS
    red = next(cell for cell in table.cells if cell.text == "8 pF")
    picture = pypdfium2.PdfDocument(data)[0].render(scale=4).to_pil().convert("RGB")
    x0, top, x1, bottom = (round(4 * value) for value in red.where.box)
    inner = picture.crop((x0 + 6, top + 6, x1 - 6, bottom - 6))
    assert inner.getpixel((1, 1)) == inner.getpixel((inner.width - 2, inner.height - 2)) == (255, 0, 0)
    around = [picture.getpixel(place) for place in ((x0 - 8, top - 8), (x1 + 8, bottom + 8))]
    assert (255, 0, 0) not in around


def test_pages_count_from_one_and_keep_their_order():
    document = pdf.read(drawn(lambda paper: paper.drawString(60, 200, "first 1"), ruled))
    assert [block.where.page for block in document.blocks] == [1, 2]


def test_a_table_over_a_page_break_stays_two_tables_in_order():
    document = pdf.read(drawn(ruled, lambda paper: ruled(paper, [["C0", "2 pF", ""], ["Drive", "100 uW", ""]])))
    assert [table.where.page for table in tables_of(document)] == [1, 2]
    assert [table.columns for table in tables_of(document)] == [3, 3]


# --- words


def rising(*parts):
    """A page with one line of text whose parts are (text, size, rise, horizontal move before)."""

    def page(paper):
        line = paper.beginText(60, 300)
        for text, size, rise in parts:
            line.setFont("Helvetica", size)
            line.setRise(rise)
            line.textOut(text)
        paper.drawText(line)

    return page


@pytest.mark.parametrize(
    ("parts", "read"),
    [
        ([("C", 10, 0), ("0", 6.5, -2)], "C0"),
        ([("T", 10, 0), ("stg", 6.5, -2)], "Tstg"),
        ([("±20 × 10", 10, 0), ("-6", 6.5, 4)], "±20 × 10⁻⁶"),
        ([("-0.034 ppm/°C", 10, 0), ("2", 6.5, 4)], "-0.034 ppm/°C²"),
        ([("60", 10, 0), ("2", 6.5, 4)], "60 ⁽²⁾"),
        ([("60", 10, 0), ("*2", 6.5, 4), (" max", 10, 0)], "60 *2 max"),
        ([("3", 10, 0), ("rd", 6.5, 4), (" overtone", 10, 0)], "3rd overtone"),
        ([("2)", 6.5, 4), (" 80 Ohm for 8 MHz", 10, 0)], "⁽²⁾ 80 Ohm for 8 MHz"),
    ],
)
def test_lowered_and_raised_type_is_told_from_its_place(parts, read):
    assert text_of(pdf.read(drawn(rising(*parts)))) == [read]


def test_an_upright_line_parts_words_that_nearly_touch():
    def page(paper):
        for x in (60, 100, 140):
            paper.line(x, 250, x, 310)
        for y in (250, 270, 290, 310):
            paper.line(60, y, 140, y)
        for row, (left, right) in enumerate((("CL", "ESR"), ("12 pF", "80 Ohm"), ("8 pF", "60 Ohm"))):
            paper.drawRightString(99.5, 297 - 20 * row, left)
            paper.drawString(100.5, 297 - 20 * row, right)

    (table,) = tables_of(pdf.read(drawn(page)))
    assert grid_of(table) == [["CL", "ESR"], ["12 pF", "80 Ohm"], ["8 pF", "60 Ohm"]]


def test_text_struck_twice_is_read_once():
    def page(paper):
        for shift in (0, 0.3, 0.6):
            paper.drawString(60 + shift, 300, "ESR 60 Ohm")

    assert text_of(pdf.read(drawn(page))) == ["ESR 60 Ohm"]


def test_twin_letters_stay_two():
    assert text_of(pdf.read(drawn(lambda paper: paper.drawString(60, 300, "pulling 11.1 ppm")))) == ["pulling 11.1 ppm"]


def test_letters_set_apart_are_words():
    assert text_of(pdf.read(drawn(lambda paper: paper.drawString(60, 300, "LOAD 12 pF", charSpace=2.5)))) == [
        "LOAD 12 pF"
    ]


def test_single_letters_with_spaces_between_are_a_word():
    assert text_of(pdf.read(drawn(lambda paper: paper.drawString(60, 300, "F E A T U R E S")))) == ["FEATURES"]


def test_lines_printed_over_one_another_stay_apart():
    def page(paper):
        paper.drawString(60, 300, "Load capacitance")
        paper.drawString(90, 294, "(nominal value)")

    assert text_of(pdf.read(drawn(page))) == ["Load capacitance", "(nominal value)"]


def test_a_slanted_stamp_is_a_line_of_its_own():
    def page(paper):
        paper.drawString(60, 300, "ESR 60 Ohm")
        paper.saveState()
        paper.translate(200, 200)
        paper.rotate(30)
        paper.drawString(0, 0, "SAMPLE 7")
        paper.restoreState()

    assert text_of(pdf.read(drawn(page))) == ["ESR 60 Ohm", "SAMPLE 7"]


def test_turned_text_is_read_along_its_own_line():
    def page(paper):
        paper.drawString(60, 350, "upright text stays where it is")
        paper.translate(300, 100)
        paper.rotate(90)
        paper.drawString(0, 0, "Load capacitance / pF")

    assert text_of(pdf.read(drawn(page))) == ["upright text stays where it is", "Load capacitance / pF"]


def test_a_sign_with_a_line_under_it_allows_equality():
    def page(paper):
        paper.drawString(60, 300, "8 MHz < f < 12 MHz")
        x = 60 + paper.stringWidth("8 MHz ", "Helvetica", 10)
        paper.line(x, 299, x + paper.stringWidth("<", "Helvetica", 10), 299)

    assert text_of(pdf.read(drawn(page))) == ["8 MHz ≤ f < 12 MHz"]


# PDF 32000-1:2008, annex D.5 (Symbol), from memory: m is mu, W is Omega, 0xB1 is plusminus, 0xA3 is lessequal.
SYMBOL_EXAMPLES = [
    ("m", "Symbol", "µ"),
    ("W", "ABCDEF+SymbolMT", "Ω"),
    ("m", "Helvetica", "m"),
    ("m", "SegoeUISymbol", "m"),
    ("–", "Symbol", "±"),
    ("·", "Symbol", "×"),
    ("£", "Symbol", "≤"),
    ("n", "ZapfDingbats", "•"),
    ("n", "Helvetica", "n"),
    ("\uf06d", "Wingding", "µ"),
    ("\uf057", "X", "Ω"),
    ("\uf0b1", "X", "±"),
    ("\uf0b4", "X", "×"),
    ("\uf0b0", "X", "°"),
    ("\uf0a3", "X", "≤"),
    ("\uf0b3", "X", "≥"),
    ("\uf0a5", "X", "∞"),
    ("\uf02d", "X", "−"),
    ("\uf0b7", "X", "•"),
    ("\uf035", "X", "5"),
]


@pytest.mark.parametrize(("glyph", "font", "read"), SYMBOL_EXAMPLES)
def test_symbol_characters_are_what_the_page_shows(glyph, font, read):
    assert translated(glyph, font) == read


HELVETICA = "<< /Type /Font /Subtype /Type1 /BaseFont /Helvetica /Encoding /WinAnsiEncoding >>"


def test_a_micro_sign_from_the_symbol_font_is_no_m():
    symbol = "<< /Type /Font /Subtype /Type1 /BaseFont /Symbol >>"
    data = by_hand("BT /F1 10 Tf 60 300 Td (Drive 100 ) Tj /F2 10 Tf (m) Tj /F1 10 Tf (W) Tj ET", [HELVETICA, symbol])
    assert text_of(pdf.read(data)) == ["Drive 100 µW"]


LYING_MAP = """/CIDInit /ProcSet findresource begin 12 dict begin begincmap
/CMapName /Lying def /CMapType 2 def
1 begincodespacerange <00> <FF> endcodespacerange
1 beginbfchar <34> <00780034005100390071> endbfchar
4 beginbfchar <30> <0030> <35> <0035> <20> <0020> <4F> <004F> endbfchar
endcmap end end"""


def test_text_from_a_broken_glyph_map_stays_visible_and_is_warned_of():
    font = ("<< /Type /Font /Subtype /Type1 /BaseFont /Helvetica /ToUnicode MAP >>", LYING_MAP)
    document = pdf.read(by_hand("BT /F1 10 Tf 60 300 Td (40 O 50) Tj ET", [font]))
    assert text_of(document) == ["x4Q9q0 O 50"]
    (note,) = document.notes
    assert note.level == "warning"
    assert note.where.page == 1
    assert "'x4Q9q'" in note.message


def test_a_sound_page_has_no_notes():
    assert pdf.read(drawn(ruled)).notes == ()


def test_a_media_box_given_for_all_pages_alike_is_found():
    data = by_hand("BT /F1 10 Tf 60 300 Td (ESR 60) Tj ET", [HELVETICA])
    (line,) = pdf.read(data).blocks
    assert line.where.box[0] == pytest.approx(60, abs=1)
    assert line.where.box[3] == pytest.approx(HEIGHT - 300 + 2.2, abs=1)


# --- running heads and catalogues


def test_running_feet_are_kept_apart_from_the_text():
    def page(number):
        def draw(paper):
            paper.drawString(60, 200, f"Text of page {number}")
            paper.drawString(60, 15, f"Maker of crystals, page {number}")

        return draw

    document = pdf.read(drawn(page(1), page(2), page(3)))
    assert text_of(document) == ["Text of page 1", "Text of page 2", "Text of page 3"]
    assert [line.text for line in document.page_headers] == ["Maker of crystals, page 1"]


def test_part_names_at_the_top_of_pages_are_no_running_heads():
    def page(name):
        return lambda paper: (paper.drawString(60, 380, name), paper.drawString(60, 200, f"about {name}"))

    document = pdf.read(drawn(page("QX-20"), page("QX-25")))
    assert text_of(document) == ["QX-20", "about QX-20", "QX-25", "about QX-25"]


def test_a_catalogue_page_without_numbers_keeps_its_text_but_no_boxes():
    def words(paper):
        paper.drawString(60, 200, "Terms and conditions of sale apply to all deliveries")

    document = pdf.read(drawn(words, ruled, ruled, ruled, ruled))
    first = document.blocks[0]
    assert first.text == "Terms and conditions of sale apply to all deliveries"
    assert (first.where.page, first.where.box) == (1, None)
    assert len(tables_of(document)) == 4


def test_a_caller_can_say_which_pages_of_a_catalogue_it_wants():
    data = drawn(
        *(lambda paper, n=n: paper.drawString(60, 200, f"This page is about part number {n}") for n in range(13))
    )
    document = pdf.read(data, wanted=lambda text: "number 3" in text)
    assert [block.where.page for block in document.blocks if block.where.box] == [1, 4]
    assert [note.message for note in document.notes] == [
        "11 of 13 pages speak of no crystal and were not looked at closely: 2 to 3, 5 to 13."
    ]


# --- pictures


def picture_page(paper):
    from PIL import Image, ImageDraw, ImageFont
    from reportlab.lib.utils import ImageReader

    picture = Image.new("RGB", (1400, 1120), "white")
    pen = ImageDraw.Draw(picture)
    pen.text((120, 200), "Load capacitance 12 pF", fill="black", font=ImageFont.load_default(52))
    pen.text((120, 320), "Frequency 24.000 MHz", fill="black", font=ImageFont.load_default(52))
    paper.drawImage(ImageReader(picture), 0, 0, WIDTH, HEIGHT)


def test_a_picture_without_the_extra_is_told_of_with_what_to_install(monkeypatch):
    without_extra(monkeypatch)
    document = pdf.read(drawn(ruled, picture_page))
    assert [(note.level, note.message, note.where.page) for note in document.notes] == [
        (
            "warning",
            "Page 2 is a picture and was not read: install the reading of pictures with "
            'pip install "quartzfolio[ocr]".',
            2,
        )
    ]
    assert len(tables_of(document)) == 1
    assert not document.scan


def without_extra(monkeypatch):
    # As when the extra's own packages are missing: the module that needs them cannot be imported.
    monkeypatch.setitem(sys.modules, "extract.documents.recognise", None)
    monkeypatch.delattr(extract.documents, "recognise", raising=False)


def test_a_large_picture_beside_a_little_text_is_told_of(monkeypatch):
    without_extra(monkeypatch)

    def page(paper):
        picture_page(paper)
        paper.drawString(60, 380, "Crystal unit QX-20, 3.2 x 2.5 mm, for radio modules")

    document = pdf.read(drawn(page))
    assert [line.text for line in document.blocks] == ["Crystal unit QX-20, 3.2 x 2.5 mm, for radio modules"]
    assert [note.message for note in document.notes] == [
        "Page 1 holds a large picture that was not read: look at it, or install the reading of pictures with "
        'pip install "quartzfolio[ocr]".'
    ]


def test_a_scans_hidden_text_is_read_where_the_picture_cannot_be(monkeypatch):
    without_extra(monkeypatch)

    def page(paper):
        picture_page(paper)
        line = paper.beginText(60, 300)
        line.setTextRenderMode(3)
        line.textLine("Load capacitance 12 pF and a frequency of 24.000 MHz")
        paper.drawText(line)

    document = pdf.read(drawn(page))
    assert [line.text for line in document.blocks] == ["Load capacitance 12 pF and a frequency of 24.000 MHz"]
    assert [note.message for note in document.notes] == [
        "Page 1 is a picture; its text was recognised by the program that made the file: compare every number with "
        "the page."
    ]


@pytest.mark.ocr
def test_a_page_that_is_a_picture_is_read_with_boxes_in_points():
    pytest.importorskip("rapidocr")
    document = pdf.read(drawn(picture_page))
    assert document.scan
    line = next(block for block in document.blocks if "MHz" in block.text)
    assert "24.000" in line.text
    # The line is drawn 320 to 372 of 1120 pixels down the page, which is 400 points high.
    assert line.where.box[1] == pytest.approx(320 / 1120 * HEIGHT, abs=10)
    assert line.where.box[0] == pytest.approx(120 / 1400 * WIDTH, abs=8)


# --- faults


def test_an_empty_user_password_opens_the_file():
    data = changed(drawn(ruled), lambda writer: writer.encrypt("", "owner", algorithm="AES-128"))
    assert grid_of(tables_of(pdf.read(data))[0]) == ROWS


def test_a_file_that_needs_a_password_says_so():
    data = changed(drawn(ruled), lambda writer: writer.encrypt("secret", "owner", algorithm="AES-128"))
    with pytest.raises(DocumentError) as fault:
        pdf.read(data)
    assert str(fault.value) == "The PDF is locked with a password. Save a copy without one and read that."


@pytest.mark.parametrize("data", [b"%PDF-1.7\nnothing", drawn(ruled)[:300]])
def test_a_file_cut_short_says_so(data):
    with pytest.raises(DocumentError) as fault:
        pdf.read(data)
    assert str(fault.value) == "The PDF is damaged or cut short and cannot be opened. Fetch it again."


def test_stray_bytes_ahead_of_the_file_do_no_harm():
    assert grid_of(tables_of(pdf.read(b"\r\n\r\nContent-Type: x\r\n" + drawn(ruled)))[0]) == ROWS


def test_an_empty_page_gives_nothing_and_no_note():
    document = pdf.read(drawn(lambda paper: None, ruled))
    assert [block.where.page for block in document.blocks] == [2]
    assert document.notes == ()


def test_a_file_of_empty_pages_is_told_of():
    document = pdf.read(drawn(lambda paper: None))
    assert document.blocks == ()
    assert [note.message for note in document.notes] == ["The PDF holds no text and no picture of text."]


def test_a_damaged_page_is_told_of_and_the_others_are_read():
    def change(writer):
        writer.root_object["/Pages"]["/Kids"][0] = pypdf.generic.NumberObject(7)

    document = pdf.read(changed(drawn(ruled, ruled), change))
    # pdfplumber gives the whole file up; the lines of the table are pdfium's.
    assert [(table.where.page, grid_of(table)) for table in tables_of(document)] == [(2, ROWS)]
    assert [note.message for note in document.notes] == ["Page 1 is damaged and was not read: fetch the file again."]
