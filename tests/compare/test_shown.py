"""What the Sheets view shows, for sheets by hand."""

import hand_made
import pytest

from compare import shown
from extract.model import Note, Part, SpecSheet, When, Where

NOTHING = Note(level="warning", message="no crystal found in this file")
WITHOUT = SpecSheet(file="x/notes.txt", sha256="c" * 64, kind="text", notes=(NOTHING,))


def test_each_sheet_has_one_line_with_its_outcome():
    frame = shown.sheets_frame([hand_made.SHEET, hand_made.LOCKED, WITHOUT])
    assert frame["Sheet"].tolist() == ["merrowby_mrb25.txt", "brackenhythe_old.pdf", "notes.txt"]
    assert frame["Outcome"].tolist() == ["1 part, ☞ 1", "▼ not read", "▼ no crystal"]


def test_a_long_name_keeps_its_start_and_its_end():
    name = shown.short_name("a/b/orchard_node_purchasing_list.xlsx")
    assert name == "orchard_node…list.xlsx"
    assert len(name) <= 22


def test_the_heading_counts_sheets_parts_and_what_waits():
    assert shown.heading([hand_made.SHEET, hand_made.LOCKED]) == "2 sheets, 1 part; ☞ 1 reading to look at"
    assert shown.heading([hand_made.LOCKED]) == "1 sheet, 0 parts"


def test_what_could_not_be_read_says_why():
    assert shown.unread([hand_made.SHEET, hand_made.LOCKED, WITHOUT]) == [
        "▼ brackenhythe_old.pdf: locked with a password; save it without one",
        "▼ notes.txt: no crystal found in this file",
    ]


def test_the_notes_of_a_sheet_that_was_read_are_shown_with_their_place():
    note = Note(level="warning", message="two values for ESR", where=Where(page=3))
    assert shown.notes_of(hand_made.SHEET.model_copy(update={"notes": (note,)})) == ["☞ two values for ESR (page 3)"]


@pytest.mark.parametrize(
    ("where", "said"),
    [
        (Where(page=2, box=(0, 0, 1, 1)), "p.2"),
        (Where(sheet="Liste", cell="B7"), "Liste B7"),
        (Where(table=2, cell="B7"), "table 2 B7"),
        (Where(line=12), "line 12"),
        (Where(line=12, cell="C12"), "C12"),
        (Where(page=2, line=5), "p.2"),
        (Where(), ""),
    ],
)
def test_a_place_is_said_shortly(where, said):
    assert shown.place(where) == said


@pytest.mark.parametrize(
    ("when", "said"),
    [
        (When(frequency_mhz=(12.0, 16.0), mode="third overtone"), "12…16 MHz; third overtone"),
        (When(load_capacitance_pf=(8.0, 8.0)), "load 8 pF"),
        (When(temperature_c=(-40.0, 85.0), years=10.0), "−40…+85 °C; 10 years"),
        (When(temperature_c=(25.0, 25.0)), "25 °C"),
        (When(), ""),
    ],
)
def test_where_a_reading_holds_is_said_in_words(when, said):
    assert shown.when_text(when) == said


def test_the_evidence_says_what_was_read_where_it_stands_and_what_is_printed():
    told = shown.evidence(hand_made.READINGS[6])
    assert told.read == "28, at most 50 Ω, stated"
    assert told.stands == "line 8"
    assert told.printed == "Resonance resistance * 28 50 Ω"


def test_a_part_is_named_and_described_by_what_is_stated():
    assert shown.part_name(hand_made.PART) == "MRB25-260-08H"
    assert shown.part_name(Part(maker="Quenby")) == "Quenby, no part number"
    assert shown.part_name(Part(), 3) == "Part 3, no part number"
    assert shown.part_facts(hand_made.PART) == "Merrowby · 2.5 × 2.0, 4 pads, crystal on 1 and 3 · AT cut · fundamental"
    assert (
        shown.part_facts(Part(cut="tuning fork", resonance="series"))
        == "tuning fork · mode not stated · series resonant"
    )
    assert shown.attributes_lines(hand_made.PART) == ["AEC-Q200: yes"]


def test_every_field_has_a_short_name():
    from extract.model import FIELD_NAMES

    assert set(shown.NAMES) == set(FIELD_NAMES)
