"""A piece of work by hand: its slots, and the way back."""

from dataclasses import replace

import hand_made
import pytest

from compare.corrections import Correction
from compare.desk import Desk
from compare.work import Circuit, History, OpenSheet, Work, part_key, with_sheets

OPEN = OpenSheet(hand_made.SHEET)
LOCKED = OpenSheet(hand_made.LOCKED)
WORK = Work(sheets=(OPEN,))
GONE = Correction(sheet=OPEN.key, part=0, reading=6, what="not on the sheet", was=hand_made.READINGS[6])


def test_each_circuit_has_its_own_decisions_and_the_work_one_supply():
    two = replace(WORK, circuits=(Circuit("c1"), Circuit("c2")))
    first = two.with_slot("decisions", {"a": "tested"}).with_slot("supply", {"a": {"price": 1}})
    second = replace(first, at="c2")
    assert first.slot("decisions") == {"a": "tested"}
    assert second.slot("decisions") == {}
    assert second.slot("supply") == {"a": {"price": 1}}


def test_a_slot_that_nobody_knows_is_refused():
    with pytest.raises(KeyError, match="prices: not a slot of the work; those are supply"):
        WORK.with_slot("prices", {})


def test_an_empty_slot_is_no_slot():
    assert WORK.with_slot("notes", "x").with_slot("notes", None).slots == {}


def test_the_corrected_sheets_are_in_the_order_opened():
    work = Work(sheets=(LOCKED, OPEN), corrections=(GONE,))
    assert [sheet.file for sheet in work.corrected] == [hand_made.LOCKED.file, hand_made.SHEET.file]
    assert "esr_ohm" not in {reading.field for reading in work.corrected[1].parts[0].readings}


def test_the_key_of_a_sheet_tells_name_content_and_parts_apart():
    keys = {
        OpenSheet(hand_made.SHEET.model_copy(update=changed)).key
        for changed in ({}, {"file": "b.txt"}, {"sha256": "d" * 64}, {"parts": ()})
    }
    assert len(keys) == 4
    assert OpenSheet(hand_made.SHEET, b"bytes").key == OPEN.key


def test_a_part_has_one_key_however_it_is_spelled_and_whatever_issue_its_sheet_is():
    row = {"part_number": "MRB25-260-08H", "maker": "Merrowby", "file": "x/y.pdf"}
    assert part_key(row) == part_key(hand_made.PART, "other.pdf") == "merrowby|mrb25-260-08h"
    assert part_key({**row, "part_number": None}) == "merrowby|y.pdf"


def test_undo_takes_back_step_by_step_and_names_what_it_takes_back():
    desk = Desk({"circuit.input_capacitor_pf": "12 pF"})
    first = WORK.with_desk(desk)
    second = replace(first, corrections=(GONE,))
    history = History().after("capacitor set", WORK, first).after("ESR not on the sheet", first, second)
    assert history.said == "ESR not on the sheet"
    back, history = history.undone(second)
    assert (back, history.said) == (first, "capacitor set")
    back, history = history.undone(back)
    assert (back, history.said) == (WORK, "")
    assert history.undone(back) == (WORK, history)


def test_undo_brings_back_a_closed_sheet_and_leaves_one_opened_meanwhile():
    closed = replace(WORK, sheets=())
    history = History().after("sheet closed", WORK, closed)
    opened = replace(closed, sheets=(LOCKED,))
    assert history.undone(opened)[0].sheets == (OPEN, LOCKED)


def test_undo_of_a_decision_leaves_what_was_remembered_since():
    decided = WORK.with_slot("decisions", {"a": "proposed"})
    history = History().after("a proposed", WORK, decided)
    later = decided.with_slot("selection", {"review": "a"})
    back = history.undone(later)[0]
    assert (back.slot("decisions"), back.slot("selection")) == ({}, {"review": "a"})


def test_nothing_changed_is_no_step():
    assert History().after("nothing", WORK, replace(WORK)) == History()


def test_the_way_back_has_an_end():
    history, work = History(), WORK
    for number in range(130):
        new = replace(work, name=str(number))
        history, work = history.after(f"named {number}", work, new), new
    assert len(history.steps) == 100
    assert history.said == "named 129"


def test_the_same_sheet_twice_is_open_once():
    assert with_sheets((OPEN,), (LOCKED, OpenSheet(hand_made.SHEET))) == (OPEN, LOCKED)
