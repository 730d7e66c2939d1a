"""The ranking as a table, read back by other libraries than those that wrote it."""

import csv
import io
import json

import hand_made
import pytest
import python_calamine

from compare.export import as_csv, as_json, as_tabs, as_xlsx, numbers_table, rank_table, sources_table, supply_table

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


def test_the_numbers_say_how_each_was_reached():
    headings, rows = numbers_table(ROWS[:1])
    assert headings == ["Part number", "Number", "Unit", "How we have it", "How it was reached"]
    assert ["MRB25-260-08H", "Motional capacitance C1", "fF", "stated", "stated"] in rows


def test_the_sources_say_file_fingerprint_place_status_and_printed_words():
    headings, rows = sources_table([hand_made.SHEET], [hand_made.row(1, hand_made.PART.part_number)])
    found = [dict(zip(headings, row, strict=True)) for row in rows]
    esr = next(row for row in found if row["Reading"] == "ESR")
    assert (esr["Typ"], esr["Max"], esr["Unit"], esr["How we have it"]) == (28.0, 50.0, "Ω", "stated")
    assert (esr["File"], esr["SHA-256"], esr["Line"]) == (hand_made.SHEET.file, "a" * 64, 8)
    assert esr["To look at"] == "R1 or RL? the footnote says RL"
    assert esr["As printed"] == "Resonance resistance * 28 50 Ω"
    assert sources_table([hand_made.SHEET], [hand_made.row(1, "another")])[1] == []


def kept(value):
    return {"value": value, "date": "2031-05-04", "from": "offers.csv", "by": ""}


def test_supply_and_approvals_travel_with_the_ranking():
    priced = {"price": kept({"amount": 0.21, "currency": "€"}), "stock": kept(3000.0), "packing": kept("reel")}
    said = ["approved in place of AB-1, Merrowby", ""]
    headings, rows = rank_table(ROWS, ["margin"], supplies=[priced, {}], approvals=said)
    first, second = (dict(zip(headings, row, strict=True)) for row in rows)
    assert (first["Price"], first["Currency"], first["Stock (pieces)"], first["Packing"]) == (0.21, "€", 3000.0, "reel")
    assert first["Supply from"].startswith("price ✎ from offers.csv, 2031-05-04; stock")
    assert (second["Price"], second["Stock (pieces)"], second["Approval"]) == (None, None, "")
    assert first["Approval"] == said[0]


def test_a_lead_time_that_is_no_number_stays_in_its_own_words():
    headings, rows = supply_table([{"lead_time": kept("on request")}])
    assert (headings, rows) == (
        ["Lead time (weeks)", "Supply from"],
        [["on request", "lead time ✎ from offers.csv, 2031-05-04"]],
    )


def test_a_decimal_comma_comes_with_the_semicolon():
    table = (["A", "B"], [[0.5, 3.0], [None, "x"]])
    assert as_csv(table, ";", ",").decode("utf-8-sig") == "A;B\r\n0,5;3\r\n;x\r\n"
    assert as_tabs(table, ",") == "A\tB\n0,5\t3\n\tx\n"
    with pytest.raises(ValueError, match="take the semicolon"):
        as_csv(table, ",", ",")


def test_numbers_are_written_with_all_their_digits():
    value = 26.045645999123456
    table = (["fp (MHz)"], [[value]])
    assert float(as_csv(table).decode("utf-8-sig").splitlines()[1]) == value
    book = python_calamine.CalamineWorkbook.from_filelike(io.BytesIO(as_xlsx({"one": table})))
    # A workbook is written with 16 digits, one less than a double can have.
    assert book.get_sheet_by_index(0).to_python()[1][0] == pytest.approx(value, rel=1e-15)


def test_the_json_keeps_signs_and_refuses_what_json_cannot_hold():
    assert json.loads(as_json({"unit": "Ω", "x": 0.1})) == {"unit": "Ω", "x": 0.1}
    assert "Ω" in as_json({"unit": "Ω"}).decode()
    with pytest.raises(ValueError, match="JSON"):
        as_json({"x": float("nan")})


def test_a_copy_may_hold_fewer_numbers():
    headings, rows = rank_table(ROWS, ["margin"])
    assert [name for name in headings if name.endswith(", mid")] == ["Margin, mid"]
    assert len(rows[0]) == len(headings)
