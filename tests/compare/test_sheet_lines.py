"""A part's readings as rows, before and after a person changed some of them."""

from dataclasses import replace

import hand_made
import pytest

from compare.corrections import Correction
from compare.sheet_lines import (
    as_tabbed,
    corrections_table,
    history_lines,
    lines_frame,
    not_stated,
    part_lines,
    parts_frame,
)
from compare.work import OpenSheet, Work

OPEN = OpenSheet(hand_made.SHEET)
WORK = Work(sheets=(OPEN,))
ESR, C1, DRIVE = 6, 8, 9


def correction(number, what="value", **more):
    was = hand_made.READINGS[number] if number is not None and number < len(hand_made.READINGS) else None
    return Correction(sheet=OPEN.key, part=0, reading=number, what=what, was=was, **more)


def frame(*corrections):
    return lines_frame(part_lines(replace(WORK, corrections=corrections), OPEN.key, 0)).set_index("Reading")


def entered(field="esr_ohm", **bounds):
    return hand_made.reading(field, "by hand", 1, status="entered", **bounds)


def test_doubtful_readings_come_first_and_are_marked():
    rows = lines_frame(part_lines(WORK, OPEN.key, 0))
    assert rows["Reading"].tolist()[:3] == ["ESR", "Frequency", "Make tolerance"]
    assert rows["How we have it"][0] == "☞ look line 8"


def test_how_we_have_a_value_is_a_word_and_a_place():
    assert frame()["How we have it"]["Frequency"] == "stated line 2"
    assert frame()["How we have it"]["Motional C1"] == "∴ inferred line 10"


def test_bounds_carry_signs_units_and_conditions():
    rows = frame()
    assert rows.loc["Make tolerance", ["Min", "Typ", "Max", "Unit"]].tolist() == ["−10", "", "+10", "ppm"]
    assert rows.loc["ESR", ["Min", "Typ", "Max", "Unit"]].tolist() == ["", "28", "50", "Ω"]
    assert rows["Typ"]["Rated load CL"] == "8, 10, 12"
    assert rows["Holds for"]["Ageing"] == "1 year"


def test_mode_and_cut_are_rows_too():
    assert frame()["Typ"]["Mode"] == "fundamental"
    assert frame()["Typ"]["Cut"] == "AT"


def test_a_corrected_reading_shows_both_values():
    rows = frame(correction(ESR, new=entered(max=40.0)))
    assert rows.loc["ESR", ["Typ", "Max", "How we have it", "Sheet says"]].tolist() == [
        "",
        "40",
        "✎ entered",
        "28, at most 50 Ω",
    ]


def test_a_reading_that_is_not_on_the_sheet_stays_in_its_row():
    assert frame(correction(ESR, "not on the sheet"))["How we have it"]["ESR"] == "✎ not on sheet"


def test_a_reading_kept_as_read_says_so():
    assert frame(correction(ESR, "as read"))["How we have it"]["ESR"] == "stated line 8, seen"


def test_an_added_reading_is_marked_and_was_not_stated():
    rows = frame(correction(10, "added", new=entered("insulation_resistance_megohm", min=500.0)))
    assert rows.loc["Insulation", ["Min", "How we have it", "Sheet says"]].tolist() == [
        "500",
        "✎ entered",
        "not stated",
    ]


def test_a_corrected_mode_shows_both_words():
    one = Correction(sheet=OPEN.key, part=0, what="fact", fact="mode", value="third overtone")
    rows = frame(one)
    assert rows.loc["Mode", ["Typ", "How we have it", "Sheet says"]].tolist() == [
        "third overtone",
        "✎ entered",
        "fundamental",
    ]


def test_the_history_of_a_correction_names_who_when_why_and_the_sheets_value():
    one = correction(ESR, new=entered(max=40.0), by="M. Quill", at="2031-04-02T14:32+02:00", why="mail from the maker")
    assert history_lines(one) == [
        "Corrected by M. Quill, 2031-04-02 14:32.",
        "The sheet says 28, at most 50 Ω.",
        "Why: mail from the maker",
    ]
    assert history_lines(None) == []


def test_what_a_verdict_wants_and_the_sheet_lacks_is_said():
    gone = replace(WORK, corrections=(correction(DRIVE, "not on the sheet"), correction(ESR, "not on the sheet")))
    assert not_stated(part_lines(WORK, OPEN.key, 0)) == ""
    assert not_stated(part_lines(gone, OPEN.key, 0)) == "Not stated: ESR, Drive level."


def test_the_table_of_all_parts_marks_each_value():
    work = replace(WORK, corrections=(correction(DRIVE, new=entered("drive_level_uw", max=100.0)),))
    table, places = parts_frame(work)
    row = table.iloc[0]
    assert row[["Part", "Look", "ESR", "Drive level", "Frequency"]].tolist() == [
        "MRB25-260-08H",
        "☞ 1",
        "☞ 28, at most 50 Ω",
        "✎ at most 100 µW",
        "26 MHz",
    ]
    assert (places[0].sheet, places[0].at) == (OPEN.key, 0)


@pytest.mark.parametrize("most", [1, 3])
def test_a_long_table_of_parts_is_cut(most):
    sheet = hand_made.SHEET.model_copy(update={"parts": (hand_made.PART,) * 5})
    assert len(parts_frame(Work(sheets=(OpenSheet(sheet),)), most)[0]) == most


def test_a_copied_table_has_headings_and_tabs_and_no_line_break_inside():
    lines = as_tabbed(frame().reset_index()).splitlines()
    assert lines[0].split("\t")[:3] == ["Reading", "Min", "Typ"]
    assert lines[1].split("\t")[0] == "ESR"
    assert {line.count("\t") for line in lines} == {lines[0].count("\t")}


def test_the_table_of_corrections_has_both_values_who_when_and_why():
    mode = Correction(sheet=OPEN.key, part=0, what="fact", fact="mode", value="third overtone", by="M. Quill")
    changes = (
        correction(ESR, new=entered(max=40.0), typed="max 40", by="M. Quill", at="2031-04-02T14:32+02:00", why="mail"),
        correction(DRIVE, "not on the sheet"),
        correction(C1, "as read"),
        mode,
    )
    headings, rows = corrections_table(replace(WORK, corrections=changes))
    name = hand_made.PART.part_number
    assert [dict(zip(headings, row, strict=True))["Now"] for row in rows] == [
        "at most 40 Ω",
        "not stated",
        "4.4 fF",
        "third overtone",
    ]
    assert rows[0] == [
        name,
        "ESR",
        "corrected",
        "at most 40 Ω",
        "28, at most 50 Ω",
        "max 40",
        "M. Quill",
        "2031-04-02T14:32+02:00",
        "mail",
        "merrowby_mrb25.txt",
    ]
    assert rows[3][1:5] == ["Mode", "corrected", "third overtone", "fundamental"]
    lone = Correction(sheet="x" * 20, part=0, reading=0, what="as read")
    assert corrections_table(replace(WORK, corrections=(lone,)))[1] == []
