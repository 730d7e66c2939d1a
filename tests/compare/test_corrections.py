"""Corrections beside a sheet by hand: what counts, and what the sheet itself keeps."""

import hand_made
import pytest
from pydantic import ValidationError

from compare.bench import read_bench
from compare.corrections import (
    Correction,
    corrected,
    corrected_part,
    lines,
    next_number,
    of_part,
    with_correction,
    without,
)
from compare.review import review

KEY = "k" * 20
ESR = 6
ENTERED = hand_made.reading("esr_ohm", "40 Ω", 8, max=40.0, status="entered")


def correction(what="value", reading=ESR, **more):
    return Correction(sheet=KEY, part=0, reading=reading, what=what, was=hand_made.READINGS[ESR], **more)


def readings_of(sheet, field="esr_ohm"):
    return [reading for reading in sheet.parts[0].readings if reading.field == field]


def test_a_corrected_value_counts_as_entered_and_waits_no_more():
    (now,) = readings_of(corrected(hand_made.SHEET, [correction(new=ENTERED)]))
    assert (now.max, now.status, now.check) == (40.0, "entered", None)
    assert readings_of(hand_made.SHEET)[0].max == 50.0


def test_a_sheet_without_corrections_is_the_very_same():
    assert corrected(hand_made.SHEET, []) is hand_made.SHEET


def test_a_reading_not_on_the_sheet_is_gone_and_the_others_stay():
    now = corrected(hand_made.SHEET, [correction("not on the sheet")])
    assert readings_of(now) == []
    assert len(now.parts[0].readings) == len(hand_made.READINGS) - 1


def test_kept_as_read_the_value_stays_stated_without_its_doubt():
    (now,) = readings_of(corrected(hand_made.SHEET, [correction("as read")]))
    assert (now.typ, now.max, now.status, now.check) == (28.0, 50.0, "stated", None)


def test_bounds_out_of_order_keep_their_doubt():
    turned = hand_made.reading("operating_temperature_c", "85 to -40", min=85.0, max=-40.0, check="out of order")
    part = hand_made.PART.model_copy(update={"readings": (turned,)})
    one = Correction(sheet=KEY, part=0, reading=0, what="as read", was=turned)
    assert corrected_part(part, [one]).readings[0].check == "out of order"


def test_an_added_reading_stands_behind_those_of_the_sheet_and_can_be_corrected_and_removed():
    number = next_number(hand_made.PART, [])
    q = hand_made.reading("quality_factor", "Q 50000", typ=50000.0, status="entered")
    add = Correction(sheet=KEY, part=0, reading=number, what="added", new=q)
    made = with_correction((), add)
    assert corrected_part(hand_made.PART, made).readings[-1] == q
    assert next_number(hand_made.PART, made) == number + 1
    again = with_correction(made, add.model_copy(update={"new": q.model_copy(update={"typ": 60000.0})}))
    assert [reading.typ for reading in corrected_part(hand_made.PART, again).readings[len(hand_made.READINGS) :]] == [
        6e4
    ]
    gone = with_correction(again, Correction(sheet=KEY, part=0, reading=number, what="not on the sheet"))
    assert gone == ()


def test_the_later_correction_of_a_reading_takes_the_place_of_the_earlier():
    made = with_correction(with_correction((), correction("not on the sheet")), correction(new=ENTERED))
    assert [one.what for one in made] == ["value"]


def test_the_sheets_value_comes_back_for_one_reading_or_for_the_whole_part():
    mode = Correction(sheet=KEY, part=0, what="fact", fact="mode", value="third overtone")
    other = correction(reading=1, what="not on the sheet").model_copy(update={"part": 1})
    made = (correction(new=ENTERED), mode, other)
    assert without(made, KEY, 0, ESR) == (mode, other)
    assert without(made, KEY, 0, "mode") == (made[0], other)
    assert without(made, KEY, 0) == (other,)


def test_a_corrected_mode_counts():
    one = Correction(sheet=KEY, part=0, what="fact", fact="mode", value=None)
    assert corrected(hand_made.SHEET, [one]).parts[0].mode is None


def test_the_lines_hold_both_values():
    line = lines(hand_made.PART, [correction(new=ENTERED)])[ESR]
    assert (line.read.max, line.now.max, line.correction.what) == (50.0, 40.0, "value")


def test_corrections_of_another_part_or_sheet_are_not_its_own():
    mine, other = correction(new=ENTERED), correction(new=ENTERED).model_copy(update={"part": 1})
    assert of_part([mine, other], KEY, 0) == [mine]
    assert of_part([mine, other], "x" * 20, 0) == []


@pytest.mark.parametrize(
    "keys",
    [
        {"what": "value", "reading": 1},
        {"what": "as read", "reading": 1, "new": ENTERED},
        {"what": "fact"},
        {"what": "value", "new": ENTERED},
        {"what": "fact", "fact": "resonance", "value": "both"},
        {"what": "fact", "fact": "mode", "reading": 1},
    ],
)
def test_a_correction_that_is_not_whole_is_refused(keys):
    with pytest.raises(ValidationError):
        Correction(sheet=KEY, part=0, **keys)


def test_a_review_of_the_corrected_sheet_reckons_with_the_entered_value_and_says_so():
    bench = read_bench(hand_made.BENCH_TEXT, "bench.toml")
    before, after = (
        review([sheet], bench)["reviews"][0]
        for sheet in (hand_made.SHEET, corrected(hand_made.SHEET, [correction(new=ENTERED)]))
    )
    # R1 of 40 Ω in place of 50 Ω: the margin over a resistance that R1 is a factor of grows by 50/40.
    assert after["margin"]["low"] / before["margin"]["low"] == pytest.approx(50 / 40, rel=1e-3)
    assert (before["to_check"], after["to_check"]) == (["esr_ohm"], [])
    assert "entered" in after["load_resonance_resistance_ohm"]["how"]


def doubtful_pair(c0_raw):
    """A part read with this C0; a thousandth of what it must be, the reader doubts it, and C1 beside it."""
    from extract import read_sheet

    return read_sheet(hand_made.MAIL.replace("C0 1.2 pF max", c0_raw).encode(), "offer.txt").parts[0]


def test_a_correction_clears_the_doubt_that_hung_on_it():
    part = doubtful_pair("C0 1.2 fF max")
    by_field = {reading.field: number for number, reading in enumerate(part.readings)}
    c0, c1 = by_field["shunt_capacitance_pf"], by_field["motional_capacitance_ff"]
    assert "C0/C1" in part.readings[c1].check
    new = hand_made.reading("shunt_capacitance_pf", "C0 1.2", max=1.2, status="entered")
    one = Correction(sheet=KEY, part=0, reading=c0, what="value", new=new, was=part.readings[c0])
    assert [reading.check for reading in corrected_part(part, [one]).readings] == [None] * len(part.readings)


def test_an_entered_value_that_contradicts_another_makes_that_one_wait():
    part = doubtful_pair("C0 1.2 pF max")
    by_field = {reading.field: number for number, reading in enumerate(part.readings)}
    c0, c1 = by_field["shunt_capacitance_pf"], by_field["motional_capacitance_ff"]
    # C0/C1 of 0.2 pF and 2.4 fF is 83; quartz of AT cut cannot go below 158 (coupling of 8.8 %).
    new = hand_made.reading("shunt_capacitance_pf", "C0 0.2", max=0.2, status="entered")
    now = corrected_part(part, [Correction(sheet=KEY, part=0, reading=c0, what="value", new=new)])
    assert "C0/C1 of 83" in now.readings[c1].check
    kept = Correction(sheet=KEY, part=0, reading=c1, what="as read", was=part.readings[c1])
    again = corrected_part(part, [Correction(sheet=KEY, part=0, reading=c0, what="value", new=new), kept])
    assert again.readings[c1].check is None


def test_a_doubt_of_another_cause_stays():
    part = hand_made.PART
    one = Correction(sheet=KEY, part=0, reading=9, what="not on the sheet", was=hand_made.READINGS[9])
    assert corrected_part(part, [one]).readings[ESR].check == hand_made.READINGS[ESR].check
