"""The ranking as a table, read back by other libraries than those that wrote it."""

import csv
import io

import hand_made
import python_calamine

from compare.export import as_csv, as_tabs, as_xlsx, rank_table, sources_table

ROWS = [hand_made.row(1, "MRB25-260-08H"), hand_made.row(2, "=1+1", "cannot tell", {"margin": None, "total_ppm": 1.12})]


def test_numbers_are_numbers_and_units_stand_in_the_headings():
    headings, rows = rank_table(ROWS)
    at = headings.index("Drive level, high (µW)")
    assert rows[0][at] == 16.7
    assert "Margin, low" in headings
    assert "ppm in all, times over" in headings


def test_the_workbook_reads_back_the_same():
    table = rank_table(ROWS)
    book = python_calamine.CalamineWorkbook.from_filelike(io.BytesIO(as_xlsx({"ranking": table, "sources": table})))
    read = book.get_sheet_by_name("ranking").to_python(skip_empty_area=False)
    headings, rows = table
    assert read[0] == headings
    at = headings.index("Load error, high (ppm)")
    assert read[1][at] == rows[0][at] == 18.9
    assert read[2][headings.index("Margin, times over")] == ""
    assert book.sheet_names == ["ranking", "sources"]


def test_text_that_looks_like_a_formula_stays_text():
    table = rank_table(ROWS)
    at = table[0].index("Part number")
    book = python_calamine.CalamineWorkbook.from_filelike(io.BytesIO(as_xlsx({"ranking": table})))
    assert book.get_sheet_by_index(0).to_python()[2][at] == "=1+1"
    assert list(csv.reader(io.StringIO(as_csv(table).decode("utf-8-sig"))))[2][at] == "'=1+1"


def test_a_spreadsheet_keeps_the_signs_of_a_csv():
    data = as_csv(rank_table(ROWS))
    assert data.startswith(b"\xef\xbb\xbf")
    assert "Ω" in data.decode("utf-8-sig")


def test_what_is_copied_has_headings_and_one_line_a_part():
    lines = as_tabs(rank_table(ROWS)).splitlines()
    assert len(lines) == 3
    assert lines[0].startswith("Place\tPart number\tMaker")
    assert len({line.count("\t") for line in lines}) == 1


def test_characters_that_a_workbook_cannot_hold_do_not_refuse_it():
    rows = [hand_made.row(1, "AB\x0bC")]
    book = python_calamine.CalamineWorkbook.from_filelike(io.BytesIO(as_xlsx({"ranking": rank_table(rows)})))
    assert book.get_sheet_by_index(0).to_python()[1][1] == "ABC"


def test_the_sources_say_how_each_number_was_reached():
    headings, rows = sources_table(ROWS[:1])
    assert headings == ["Part number", "Number", "Unit", "How we have it", "How it was reached"]
    assert ["MRB25-260-08H", "Motional capacitance C1", "fF", "stated", "stated"] in rows


def test_a_copy_may_hold_fewer_numbers():
    headings, rows = rank_table(ROWS, ["margin"])
    assert [name for name in headings if name.endswith(", mid")] == ["Margin, mid"]
    assert len(rows[0]) == len(headings)
