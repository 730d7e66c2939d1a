"""Word documents, put together by hand from ISO/IEC 29500-1, section 17 (WordprocessingML)."""

from __future__ import annotations

import io
import zipfile

import pytest

from extract.documents.model import Document, DocumentError, Line, Table
from extract.documents.worddoc import read
from extract.model import Where

NAMES = (
    'xmlns:w="http://schemas.openxmlformats.org/wordprocessingml/2006/main" '
    'xmlns:mc="http://schemas.openxmlformats.org/markup-compatibility/2006" '
    'xmlns:m="http://schemas.openxmlformats.org/officeDocument/2006/math"'
)


def part(root: str, content: str) -> str:
    return f'<?xml version="1.0"?><w:{root} {NAMES}>{content}</w:{root}>'


def document(body: str, **parts: str) -> Document:
    target = io.BytesIO()
    with zipfile.ZipFile(target, "w") as archive:
        archive.writestr("word/document.xml", part("document", f"<w:body>{body}</w:body>"))
        for name, content in parts.items():
            archive.writestr(f"word/{name}.xml", content)
    return read(target.getvalue())


def run(text: str, properties: str = "") -> str:
    return f'<w:r><w:rPr>{properties}</w:rPr><w:t xml:space="preserve">{text}</w:t></w:r>'


def paragraph(*runs: str, style: str = "") -> str:
    named = f'<w:pPr><w:pStyle w:val="{style}"/></w:pPr>' if style else ""
    return f"<w:p>{named}{''.join(one if one.startswith('<') else run(one) for one in runs)}</w:p>"


def cell(text: str, properties: str = "") -> str:
    return f"<w:tc><w:tcPr>{properties}</w:tcPr>{paragraph(text)}</w:tc>"


def table(*rows: str) -> str:
    return f"<w:tbl>{''.join(f'<w:tr>{row}</w:tr>' for row in rows)}</w:tbl>"


def lines(read_document: Document) -> list[str]:
    return [block.text for block in read_document.blocks if isinstance(block, Line)]


def grid(read_document: Document) -> list[list[str]]:
    (found,) = (block for block in read_document.blocks if isinstance(block, Table))
    return [[one.text if one else "" for one in row] for row in found.grid()]


RAISED = '<w:vertAlign w:val="superscript"/>'
LOWERED = '<w:vertAlign w:val="subscript"/>'


def test_merged_cells_cover_their_places() -> None:
    rows = (
        cell("Item", '<w:vMerge w:val="restart"/>') + cell("Value", '<w:gridSpan w:val="2"/>'),
        cell("", "<w:vMerge/>") + cell("min") + cell("max"),
        cell("ESR") + cell("") + cell("60"),
    )
    assert grid(document(table(*rows))) == [["Item", "Value", "Value"], ["Item", "min", "max"], ["ESR", "", "60"]]


def test_cells_and_lines_have_their_places() -> None:
    result = document(paragraph("Head") + table(cell("a") + cell("b"), cell("c") + cell("d")) + paragraph("Foot"))
    head, grid_, foot = result.blocks
    assert isinstance(grid_, Table)
    assert (head.where, grid_.cells[3].where, foot.where) == (Where(line=1), Where(table=1, cell="B2"), Where(line=2))


def test_raised_and_lowered_letters_stay_tellable() -> None:
    result = document(paragraph("C", run("0", LOWERED), " ±20 ×10", run("-6", RAISED), ", 60 Ω", run("1", RAISED)))
    assert lines(result) == ["C0 ±20 ×10⁻⁶, 60 Ω ⁽¹⁾"]


def test_page_headers_and_footers_are_kept_apart() -> None:
    result = document(
        paragraph("Body"),
        header1=part("hdr", paragraph("VEXLEY QUARTZ")),
        footer1=part("ftr", paragraph("Rev 2")),
    )
    assert [line.text for line in result.page_headers] == ["Rev 2", "VEXLEY QUARTZ"]
    assert lines(result) == ["Body"]


def test_footnotes_follow_at_the_end_with_their_marks() -> None:
    result = document(
        paragraph("ESR 60 Ω", '<w:r><w:footnoteReference w:id="3"/></w:r>'),
        footnotes=part("footnotes", f'<w:footnote w:id="3">{paragraph("80 Ω from 10 to 12 MHz")}</w:footnote>'),
    )
    assert lines(result) == ["ESR 60 Ω ⁽¹⁾", "⁽¹⁾ 80 Ω from 10 to 12 MHz"]


def test_a_text_box_is_read_once() -> None:
    box = f"<w:txbxContent>{paragraph('In the box')}</w:txbxContent>"
    drawing = f"<mc:AlternateContent><mc:Choice>{box}</mc:Choice><mc:Fallback>{box}</mc:Fallback></mc:AlternateContent>"
    assert lines(document(paragraph("Body", f"<w:r>{drawing}</w:r>"))) == ["Body", "In the box"]


def test_deleted_and_hidden_words_are_out_and_inserted_ones_in() -> None:
    changed = "<w:del><w:r><w:delText>70</w:delText></w:r></w:del><w:ins>" + run("60") + "</w:ins>"
    assert lines(document(paragraph("ESR ", changed, run(" secret", "<w:vanish/>")))) == ["ESR 60"]


def test_struck_out_words_go_with_a_note() -> None:
    result = document(paragraph("ESR ", run("70", "<w:strike/>"), "60"))
    assert lines(result) == ["ESR 60"]
    assert [note.message for note in result.notes] == ["Struck-out words left out: '70'."]


def test_headings_are_told_by_their_style_in_any_language() -> None:
    styles = part("styles", '<w:style w:styleId="berschrift1"><w:name w:val="heading 1"/></w:style>')
    result = document(paragraph("Daten", style="berschrift1") + paragraph("Text"), styles=styles)
    assert [(block.text, block.heading) for block in result.blocks if isinstance(block, Line)] == [
        ("Daten", True),
        ("Text", False),
    ]


def test_paragraphs_with_the_same_tabs_are_a_table() -> None:
    tab = "<w:r><w:tab/></w:r>"
    result = document(paragraph("R1", tab, tab, "50") + paragraph("CL", tab, "8", tab))
    assert grid(result) == [["R1", "", "50"], ["CL", "8", ""]]


def test_a_tab_parts_label_and_value() -> None:
    (line,) = document(paragraph("ESR", "<w:r><w:tab/></w:r>", "60 Ω")).blocks
    assert isinstance(line, Line)
    assert [segment.text for segment in line.segments] == ["ESR", "60 Ω"]


def test_a_table_in_a_cell_is_its_lines() -> None:
    inner = table(cell("8 MHz") + cell("90 Ω"), cell("12 MHz") + cell("60 Ω"))
    result = document(table(cell("ESR") + f"<w:tc>{inner}<w:p/></w:tc>", cell("CL") + cell("8")))
    assert grid(result)[0][1] == "8 MHz  90 Ω\n12 MHz  60 Ω"


def test_a_frame_round_text_is_no_table() -> None:
    assert lines(document(table(cell("Framed")))) == ["Framed"]


def test_a_document_of_pictures_only_is_refused() -> None:
    with pytest.raises(DocumentError, match="^The Word document holds no text"):
        document("<w:p/>")


def test_a_document_without_its_body_is_refused() -> None:
    target = io.BytesIO()
    with zipfile.ZipFile(target, "w") as archive:
        archive.writestr("word/styles.xml", part("styles", ""))
    with pytest.raises(DocumentError, match="^The Word document is damaged or cut short"):
        read(target.getvalue())
