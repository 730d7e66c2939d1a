"""The queue of doubtful readings: reason, the other meaning, and what hangs on it."""

import hand_made
import pytest

from compare.corrections import Correction
from compare.looks import consequence, other, queue
from compare.work import OpenSheet, Work


def part(*readings, **changed):
    return hand_made.PART.model_copy(update={"readings": readings, **changed})


def work(*parts):
    sheet = hand_made.SHEET.model_copy(update={"parts": parts})
    return Work(sheets=(OpenSheet(sheet),))


FREQUENCY = hand_made.READINGS[0]
LOAD = hand_made.reading("load_capacitance_pf", "CL 8 pF", typ=8.0)
SHUNT = hand_made.reading("shunt_capacitance_pf", "C0 2 pF", max=2.0)


def esr(check="the footnote says “with rated load in series”", **bounds):
    return hand_made.reading("esr_ohm", "Rr 50 Ω", 8, check=check, **(bounds or {"max": 50.0}))


def test_the_queue_holds_what_waits_in_the_order_of_the_sheets():
    looks = queue(work(part(FREQUENCY, esr()), part(FREQUENCY), part(esr(), SHUNT)))
    assert [(look.part, look.reading) for look in looks] == [(0, 1), (2, 0)]


def test_what_is_settled_waits_no_more():
    open_ = work(part(esr()))
    one = Correction(sheet=open_.sheets[0].key, part=0, reading=0, what="as read")
    assert queue(Work(sheets=open_.sheets, corrections=(one,))) == []


def test_an_esr_at_load_is_offered_as_r1():
    # R1 = RL / (1 + C0/CL)² = 50 / 1.25² = 32 Ω, IEC 60444.
    meant = other(esr(), part(FREQUENCY, LOAD, SHUNT))
    assert (meant.button, meant.reading.max, meant.reading.status, meant.reading.check) == (
        "Take as RL",
        pytest.approx(32.0),
        "entered",
        None,
    )
    (look,) = queue(work(part(FREQUENCY, LOAD, SHUNT, esr())))
    assert (look.asks, look.keep) == ("which resistance is this, of MRB25-260-08H?", "Keep as R1")


def test_without_load_or_c0_no_r1_is_offered():
    assert other(esr(), part(FREQUENCY, SHUNT)) is None
    assert other(esr(), part(FREQUENCY, LOAD)) is None
    assert other(esr("read from a picture"), part(FREQUENCY, LOAD, SHUNT)) is None


def test_a_lost_prefix_is_offered():
    slipped = esr("25000 Ω is implausible", typ=25_000.0, max=45_000.0)
    meant = other(slipped, part(FREQUENCY, slipped))
    assert (meant.button, meant.reading.typ, meant.reading.max) == ("Take 25, at most 45 Ω", 25.0, 45.0)


def test_bounds_the_wrong_way_round_are_offered_swapped_and_cannot_be_kept():
    turned = hand_made.reading("operating_temperature_c", "85; -40", min=85.0, max=-40.0, check="out of order")
    meant = other(turned, part(turned))
    assert (meant.button, meant.reading.min, meant.reading.max) == ("Swap the ends", -40.0, 85.0)
    (look,) = queue(work(part(turned)))
    assert look.can_keep is False


def test_a_plain_doubt_offers_nothing_and_its_reason_is_a_sentence_without_a_confidence():
    doubtful = hand_made.reading(
        "drive_level_uw", "100 µW", max=100.0, check="read from a picture with a confidence of 71%"
    )
    (look,) = queue(work(part(doubtful)))
    assert (look.other, look.reason, look.asks) == (
        None,
        "Read from a picture, and not sharply.",
        "Drive level of MRB25-260-08H",
    )
    assert look.keep == "Keep at most 100 µW"


def row(verdict="meets", **lows):
    figures = {name: hand_made.FIGURES[name] for name in ("margin", "total_ppm", "drive_level_uw", "startup_ms")}
    return {"verdict": verdict, **figures, **lows}


def test_the_consequence_says_what_changes_most():
    after = row(margin=hand_made.figure(10.5, 30.0, 40.0), startup_ms=hand_made.figure(0.1, 0.2, 0.7))
    assert consequence(row(), after, "Taken as RL") == "Taken as RL, the margin would rise from 6.7 to 10.5."


def test_a_verdict_that_would_change_goes_before_any_number():
    after = row("cannot tell", margin=hand_made.figure(None, None, None))
    assert (
        consequence(row(), after, "Without it") == "Without it, the verdict would be “cannot tell” in place of “meets”."
    )


def test_a_number_that_could_not_be_told_any_more_is_said():
    after = row(drive_level_uw=hand_made.figure(None, None, None))
    assert consequence(row(), after, "Without it") == "Without it, the drive could not be told."


def test_where_nothing_changes_that_is_said():
    assert consequence(row(), row(), "Without it") == "Without it, nothing asked would change."
