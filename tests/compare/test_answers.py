"""What all views with results share, from results by hand in the data contract's shape."""

import hand_made
import pytest

from compare import answers
from compare.bench import read_bench

BENCH = read_bench(hand_made.BENCH_TEXT, "bench.toml")
MEETS = hand_made.row(1, "MRB25-260-08H")


def test_a_verdict_has_a_mark_and_a_word():
    words = ["meets", "falls short", "cannot tell", None]
    assert [answers.verdict(one) for one in words] == ["▲ meets", "▼ falls short", "◇ cannot tell", "◇ cannot tell"]


def test_a_part_that_falls_short_in_a_yes_or_no_names_that_and_not_its_least_slack():
    row = hand_made.row(1, "A", "falls short", {"margin": 2.0, "operating_temperature_c": None})
    row["reasons"] = [hand_made.reason("operating_temperature_c", "falls short", "-20 to 70 °C does not hold")]
    assert answers.tightest_text(row) == "Range"


def test_what_is_missing_of_the_bench_is_named_as_on_the_page():
    row = hand_made.row(1, "A", "cannot tell", {"margin": None}, missing=["circuit.transconductance_ms"])
    assert answers.tightest_text(row) == "gm, least not known"


def test_how_the_part_must_be_ordered_is_said():
    row = hand_made.row(
        1, "A", chosen={"load_capacitance_pf": 8.0, "frequency_tolerance_ppm": 10.0, "mode": "fundamental"}
    )
    assert answers.chosen_text(row) == "Ordered with rated load CL 8 pF, make tolerance ±10 ppm, mode fundamental."
    assert answers.chosen_text(hand_made.row(1, "A", chosen={})) == ""
    row = hand_made.row(1, "A", chosen={"operating_temperature_c": [-40.0, 85.0]})
    assert answers.chosen_text(row) == "Ordered with operating range −40…85 °C."


def test_the_slack_chart_has_the_figures_beside_the_limits():
    rows = {one.requirement: one for one in answers.slack_rows(hand_made.review(), BENCH)}
    assert rows["Margin"].said == "6.7, needs 5"
    assert rows["ppm in all"].said == "+45.3, limit ±50"
    assert rows["Drive"].said == "16.7 of 200 µW"
    assert rows["Start-up"].said == "0.71 of 2 ms"


def test_nominal_slack_is_reckoned_from_the_nominal_figure():
    rows = {one.requirement: one for one in answers.slack_rows(hand_made.review(), BENCH)}
    assert rows["Margin"].nominal == pytest.approx(23.2 / 5)
    assert rows["ppm in all"].nominal == pytest.approx(50 / 8.3)
    # 200 µW rated over 7.2 µW; the slack by hand is 11.95 and not 200/16.7 = 11.976.
    assert rows["Drive"].nominal == pytest.approx(200 / 7.2, rel=0.01)
    assert rows["Start-up"].nominal == pytest.approx(2 / 0.33, rel=0.01)


def test_the_worse_end_of_the_frequency_error_is_the_one_shown():
    lopsided = hand_made.review(total_ppm=hand_made.figure(-48.0, -3.0, 20.0))
    rows = {one.requirement: one for one in answers.slack_rows(lopsided, BENCH)}
    assert rows["ppm in all"].said == "−48, limit ±50"
    assert rows["ppm in all"].nominal == pytest.approx(50 / 3)


def test_what_is_not_known_stays_not_known():
    unknown = hand_made.figure(None, None, None, "the sheet states no ESR", None)
    silent = hand_made.review(margin=unknown, slack={"margin": None})
    (row,) = answers.slack_rows(silent, BENCH)
    assert (row.worst, row.nominal, row.said) == (None, None, "not known")


def test_a_corner_that_does_not_start_is_said():
    dead = hand_made.review(startup_ms=hand_made.figure(0.2, 0.3, None), slack={"startup_ms": 0.0})
    (row,) = answers.slack_rows(dead, BENCH)
    assert (row.worst, row.said) == (0.0, "does not start")


def test_advice_is_a_sentence_with_what_it_does_at_worst():
    resistor = {"what": "series resistor", "series_resistor_ohm": 470.0, "drive_level_uw": 92.0, "margin": 3.1}
    pair = {"what": "load capacitors", "values_pf": [12.0, 13.0], "load_error_ppm": -11.3, "margin": 6.4}
    review = hand_made.review(advice=[pair, resistor], advice_messages=["No pair brings 7 pF."])
    assert answers.advice_lines(review) == [
        "**12 pF** from A and **13 pF** from B to ground: load error at most 11.3 ppm, margin 6.4.",
        "A series resistor of **470 Ω**: drive at most 92 µW, margin 3.1.",
        "No pair brings 7 pF.",
    ]


def test_bench_keys_in_messages_are_said_by_the_names_of_their_fields():
    message = "cannot be told: circuit.input_capacitor_pf not known; give circuit.condition[1].swing_v"
    assert answers.told(message) == "cannot be told: “Fitted, A–0” not known; give “Swing”"
    assert answers.told("measured.pairs: -5 ppm") == "measured.pairs: −5 ppm"
    assert answers.told("against -50/+50 ppm (total_ppm ±50)") == "against −50/+50 ppm (ppm in all ±50)"
    assert answers.told("(use ble-active -50 to +50)") == "(Bluetooth LE, active clock −50 to +50)"
    assert answers.told("use smaller load capacitors") == "use smaller load capacitors"


def test_parts_of_the_same_name_are_told_apart():
    rows = [hand_made.row(1, None), hand_made.row(2, None, slack={"margin": 1.5}), hand_made.row(3, "A")]
    file = hand_made.SHEET.file
    assert answers.identities(rows) == [(file, None, 1), (file, None, 2), (file, "A", 1)]
