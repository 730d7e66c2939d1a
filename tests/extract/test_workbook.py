"""Workbooks. They are written by openpyxl, and the XLS file in data/ by xlwt: both know nothing of this reader."""

from __future__ import annotations

import datetime
import io
import zipfile
from pathlib import Path

import openpyxl
import pytest

from extract.documents.model import Document, DocumentError, Line, Table
from extract.documents.workbook import read, read_open
from extract.model import Where

HEADER = ["Part", "MHz", "pF", "Ohm"]


def saved(book: openpyxl.Workbook) -> bytes:
    target = io.BytesIO()
    book.save(target)
    return target.getvalue()


def sheet_with(rows: list[list[object]], name: str = "L") -> openpyxl.Workbook:
    book = openpyxl.Workbook()
    book.active.title = name
    for row in rows:
        book.active.append(row)
    return book


def tables(document: Document) -> list[list[list[str]]]:
    return [
        [[cell.text if cell else "" for cell in row] for row in block.grid()]
        for block in document.blocks
        if isinstance(block, Table)
    ]


def lines(document: Document) -> list[tuple[str, bool]]:
    return [(block.text, block.heading) for block in document.blocks if isinstance(block, Line)]


def test_numbers_are_shown_with_their_format() -> None:
    book = sheet_with([["Part", "CL", "f"], ["A1", 8, 16]])
    book.active["B2"].number_format = '0.0" pF"'
    book.active["C2"].number_format = "0.000000"
    assert tables(read(saved(book))) == [[["Part", "CL", "f"], ["A1", "8.0 pF", "16.000000"]]]


def test_whole_numbers_texts_dates_and_truths_read_as_a_person_sees_them() -> None:
    book = sheet_with([["a", "b", "c", "d"], [8, "0402", datetime.date(2024, 5, 20), True]])
    assert tables(read(saved(book)))[0][1] == ["8", "0402", "2024-05-20", "TRUE"]


def test_a_cell_has_its_address_in_the_sheet() -> None:
    book = openpyxl.Workbook()
    book.active.title = "Overview"
    book.active["B4"], book.active["C4"], book.active["B5"], book.active["C5"] = "Part", "ESR", "A1", 60
    (table,) = read(saved(book)).blocks
    assert isinstance(table, Table)
    assert [cell.where for cell in table.cells][-1] == Where(sheet="Overview", cell="C5")
    assert (table.cells[-1].row, table.cells[-1].column) == (1, 1)


def test_a_merged_cell_stands_once_with_its_spans() -> None:
    book = sheet_with([["Part", "ESR", None], [None, "typ", "max"], ["A1", 28, 50]])
    book.active.merge_cells("B1:C1")
    book.active.merge_cells("A1:A2")
    (table,) = read(saved(book)).blocks
    assert isinstance(table, Table)
    spans = {cell.text: (cell.row_span, cell.column_span) for cell in table.cells}
    assert (spans["ESR"], spans["Part"], spans["typ"]) == ((1, 2), (2, 1), (1, 1))


def test_titles_and_footnotes_are_lines_around_the_table() -> None:
    rows: list[list[object]] = [
        ["Approved parts"],
        [],
        HEADER,
        ["A1", 16, 8, 60],
        ["B2", 24, 9, 50],
        [],
        ["* at 25 °C"],
    ]
    document = read(saved(sheet_with(rows)))
    assert lines(document) == [("Approved parts", True), ("* at 25 °C", False)]
    assert len(tables(document)) == 1


def test_a_list_goes_on_after_an_empty_row() -> None:
    rows: list[list[object]] = [HEADER, ["A1", 16, 8, 60], ["B2", 24, 9, 50], [], ["C3", 26, 9, 45]]
    assert [len(table) for table in tables(read(saved(sheet_with(rows))))] == [5]


def test_a_second_header_after_an_empty_row_starts_another_table() -> None:
    rows: list[list[object]] = [
        HEADER,
        ["A1", 16, 8, 60],
        [],
        ["Lane", "Carrier", "Via", "Note"],
        ["North", "road", "-", "-"],
    ]
    assert [table[0] for table in tables(read(saved(sheet_with(rows))))] == [HEADER, ["Lane", "Carrier", "Via", "Note"]]


def test_tables_side_by_side_with_the_same_head_are_two() -> None:
    rows: list[list[object]] = [["MHz", "Ohm", None, "MHz", "Ohm"], [8, 90, None, 16, 60], [12, 80, None, 24, 50]]
    assert tables(read(saved(sheet_with(rows)))) == [
        [["MHz", "Ohm"], ["8", "90"], ["12", "80"]],
        [["MHz", "Ohm"], ["16", "60"], ["24", "50"]],
    ]


def test_an_empty_column_inside_a_table_does_not_part_it() -> None:
    rows: list[list[object]] = [["Part", "MHz", None, "pF", "Ohm"], ["A1", 16, None, 8, 60], ["B2", 24, None, 9, 50]]
    assert len(tables(read(saved(sheet_with(rows))))) == 1


def test_a_hidden_sheet_is_left_out_with_a_note() -> None:
    book = sheet_with([HEADER, ["A1", 16, 8, 60]])
    book.create_sheet("Costs").append(["secret", "value"])
    book["Costs"].sheet_state = "hidden"
    document = read(saved(book))
    assert len(tables(document)) == 1
    assert [note.message for note in document.notes] == ["Hidden sheet 'Costs' left out."]


def test_a_formula_that_was_never_calculated_is_told() -> None:
    document = read(saved(sheet_with([["Part", "MHz"], ["A1", "=8*2"]])))
    assert [(note.level, note.where) for note in document.notes] == [("warning", Where(sheet="L", cell="B2"))]


def test_a_sheet_name_beyond_ascii_is_kept() -> None:
    (table,) = read(saved(sheet_with([["型号", "频率"], ["A1", "16 MHz"]], name="规格表"))).blocks
    assert table.where.sheet == "规格表"


def test_an_old_workbook_is_read_and_its_lost_formats_are_told() -> None:
    document = read((Path(__file__).parent / "data" / "old_format.xls").read_bytes())
    assert tables(document) == [[["Part", "CL", "CL", ""], ["A1", "8", "12.5", "2024-05-20"]]]
    assert [note.level for note in document.notes] == ["info", "warning"]


CONTENT = """<?xml version="1.0"?><office:document-content
 xmlns:office="urn:oasis:names:tc:opendocument:xmlns:office:1.0"
 xmlns:table="urn:oasis:names:tc:opendocument:xmlns:table:1.0"
 xmlns:style="urn:oasis:names:tc:opendocument:xmlns:style:1.0"
 xmlns:text="urn:oasis:names:tc:opendocument:xmlns:text:1.0">
 <office:automatic-styles><style:style style:name="ta2"><style:table-properties table:display="false"/></style:style>
 </office:automatic-styles><office:body><office:spreadsheet>
 <table:table table:name="L"><table:table-header-rows><table:table-row>
  <table:table-cell><text:p>Part</text:p></table:table-cell>
  <table:table-cell table:number-columns-spanned="2"><text:p>C<text:span>L</text:span></text:p></table:table-cell>
  <table:covered-table-cell/></table:table-row></table:table-header-rows>
 <table:table-row><table:table-cell><text:p>A1</text:p></table:table-cell>
  <table:table-cell table:number-columns-repeated="2" office:value-type="float" office:value="8">
   <text:p>8,0<text:s/>pF</text:p></table:table-cell>
  <table:table-cell table:number-columns-repeated="1021"/></table:table-row>
 <table:table-row table:number-rows-repeated="1048574"><table:table-cell table:number-columns-repeated="1024"/>
 </table:table-row></table:table>
 <table:table table:name="Costs" table:style-name="ta2"><table:table-row><table:table-cell><text:p>x</text:p>
 </table:table-cell></table:table-row></table:table>
 </office:spreadsheet></office:body></office:document-content>"""


def open_document(manifest: str = "<manifest/>") -> bytes:
    target = io.BytesIO()
    with zipfile.ZipFile(target, "w") as archive:
        archive.writestr("mimetype", "application/vnd.oasis.opendocument.spreadsheet")
        archive.writestr("META-INF/manifest.xml", manifest)
        archive.writestr("content.xml", CONTENT)
    return target.getvalue()


def test_an_open_document_shows_what_its_cells_show() -> None:
    document = read_open(open_document())
    assert tables(document) == [[["Part", "CL", "CL"], ["A1", "8,0 pF", "8,0 pF"]]]
    assert [note.message for note in document.notes] == ["Hidden sheet 'Costs' left out."]


def test_a_locked_open_document_is_refused() -> None:
    with pytest.raises(DocumentError, match="^The workbook is locked with a password"):
        read_open(open_document("<manifest><encryption-data/></manifest>"))


def test_a_stray_cell_far_off_is_told_rather_than_held() -> None:
    book = sheet_with([HEADER, ["A1", 16, 8, 60]])
    book.active["XFD1048576"] = "x"
    with pytest.raises(DocumentError, match=r"^Sheet 'L' has a cell far off the rest \(XFD1048576\)"):
        read(saved(book))


def test_an_empty_workbook_is_refused() -> None:
    with pytest.raises(DocumentError, match="^No sheet that the workbook shows holds any text"):
        read(saved(openpyxl.Workbook()))
