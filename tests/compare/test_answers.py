"""What Choose and Review say, from results by hand in the data contract's shape."""

import hand_made
import pytest

from compare import answers
from compare.bench import read_bench
from compare.palette import LIGHT

BENCH = read_bench(hand_made.BENCH_TEXT, "bench.toml")
MEETS = hand_made.row(1, "MRB25-260-08H")
SHORT = hand_made.row(2, "TW.2016.26", "falls short", {"margin": 1.09, "total_ppm": 0.98, "drive_level_uw": 4.86})
UNTOLD = hand_made.row(3, "QX26-8", "cannot tell", {"margin": None, "total_ppm": 1.12}, missing=["esr_ohm"])


@pytest.mark.parametrize(
    ("rows", "heading"),
    [
        ([MEETS, SHORT, UNTOLD], "One of three meets what is asked"),
        ([MEETS, MEETS, SHORT], "Two of three meet what is asked"),
        ([MEETS, MEETS], "All two meet what is asked"),
        ([SHORT, UNTOLD], "None of two meets what is asked. Nearest: TW.2016.26, ppm in all 0.98 times"),
        ([MEETS], "The one part that offers it: ▲ meets"),
        ([], "None of the parts read offers 26 MHz"),
    ],
)
def test_the_heading_is_the_answer(rows, heading):
    assert answers.choose_heading(hand_made.ranking(*rows), BENCH) == heading


def test_a_verdict_has_a_mark_and_a_word():
    words = ["meets", "falls short", "cannot tell", None]
    assert [answers.verdict(one) for one in words] == ["▲ meets", "▼ falls short", "◇ cannot tell", "◇ cannot tell"]


def test_the_ranked_rows_say_what_the_strips_show():
    frame = answers.rank_frame([MEETS, SHORT, UNTOLD], LIGHT)
    assert frame["Tightest"].tolist() == ["ppm in all 1.10 times", "ppm in all 0.98 times", "ESR not stated"]
    assert frame["Look"].tolist() == ["☞ 1", "☞ 1", "☞ 1"]
    assert all(address.startswith("data:image/svg+xml;base64,") for address in frame["Times over: 1 is the line"])


def test_a_part_that_falls_short_in_a_yes_or_no_names_that_and_not_its_least_slack():
    row = hand_made.row(1, "A", "falls short", {"margin": 2.0, "operating_temperature_c": None})
    row["reasons"] = [hand_made.reason("operating_temperature_c", "falls short", "-20 to 70 °C does not hold")]
    assert answers.tightest_text(row) == "Range"


def test_what_is_missing_of_the_bench_is_named_as_on_the_page():
    row = hand_made.row(1, "A", "cannot tell", {"margin": None}, missing=["circuit.transconductance_ms"])
    assert answers.tightest_text(row) == "gm, least not known"


def test_the_legend_names_only_the_strips_that_are_there():
    assert answers.strips_legend([SHORT]).startswith("Strips from the top: Margin, ppm in all, Drive. Heavy")


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


def test_every_reason_is_judged_in_its_own_row_with_a_true_minus():
    review = hand_made.review()
    review["reasons"][3]["message"] = "-26.8 to +45.3 ppm against -50/+50 ppm"
    rows = answers.judged(review, BENCH)
    assert len(rows) == len(review["reasons"])
    assert rows[3].requirement == "Frequency, all causes"
    assert rows[3].times_over == "1.10 times"
    assert rows[3].why == "−26.8 to +45.3 ppm against −50/+50 ppm"
    assert (rows[6].requirement, rows[6].worst, rows[6].times_over) == ("Temperature range", "", "")
    assert all(row.meets for row in rows)


def test_the_review_says_when_a_reading_still_waits():
    assert answers.review_heading(hand_made.review()) == "▲ MRB25-260-08H meets what is asked, as read so far"
    assert answers.review_heading(hand_made.review(to_check=[])) == "▲ MRB25-260-08H meets what is asked"
    assert (
        answers.review_heading(hand_made.review(verdict="cannot tell", to_check=[])) == "◇ MRB25-260-08H: cannot tell"
    )


def test_under_the_heading_stands_what_decides():
    assert answers.short_of(MEETS) == "Tightest: ppm in all 1.10 times."
    short = hand_made.review(verdict="falls short", reasons=[hand_made.reason("total_ppm", "falls short", "")])
    assert answers.short_of(short) == "Short: Frequency, all causes."


def test_every_number_has_three_values_a_unit_and_how():
    rows = {one.name: one for one in answers.numbers(hand_made.review(), BENCH)}
    load = rows["Load that the circuit presents"]
    assert (load.low, load.mid, load.high, load.unit) == ("7.38", "7.698", "8.01", "pF")
    assert load.how == "A–0 14.6 pF in series with B–0 14.6 pF, and 0.4 pF"
    assert rows["Load error"].low == "−0.4"
    assert rows["Load error"].high == "+18.9"
    assert len(rows) == len(hand_made.FIGURES)


def test_an_estimate_is_marked_and_a_missing_end_is_a_dash():
    changed = hand_made.review(motional_capacitance_ff=hand_made.figure(1.0, 2.0, None, "estimated", "estimated"))
    c1 = next(one for one in answers.numbers(changed, BENCH) if one.name == "Motional capacitance C1")
    assert (c1.basis, c1.high) == ("∴ estimated", "—")


def test_the_load_chart_gets_back_the_crystals_c0_and_what_is_left_for_the_load():
    pull = answers.load_pull(hand_made.review(), BENCH, 8.0, series=False)
    # fs 25.993715 MHz and fp 26.045646 MHz with C1 4.4 fF are C0 1.1 pF.
    assert pull.shunt_capacitance_pf == pytest.approx(1.1, rel=1e-3)
    # Other causes: 45.3 - 18.9 = 26.4 of the 50 ppm up, 26.8 - 0.4 = 26.4 down.
    assert pull.room_high_ppm == pytest.approx(23.6)
    assert pull.room_low_ppm == pytest.approx(-23.6)


def test_without_c1_or_rated_load_there_is_no_load_chart():
    unknown = hand_made.figure(None, None, None)
    assert answers.load_pull(hand_made.review(motional_capacitance_ff=unknown), BENCH, 8.0, series=False) is None
    assert answers.load_pull(hand_made.review(), BENCH, None, series=False) is None
    assert answers.load_pull(hand_made.review(), BENCH, None, series=True).rated_pf is None


def test_advice_is_a_sentence_with_what_it_does_at_worst():
    resistor = {"what": "series resistor", "series_resistor_ohm": 470.0, "drive_level_uw": 92.0, "margin": 3.1}
    pair = {"what": "load capacitors", "values_pf": [12.0, 13.0], "load_error_ppm": -11.3, "margin": 6.4}
    review = hand_made.review(advice=[pair, resistor], advice_messages=["No pair brings 7 pF."])
    assert answers.advice_lines(review) == [
        "**12 pF** from A and **13 pF** from B to ground: load error at most 11.3 ppm, margin 6.4.",
        "A series resistor of **470 Ω**: drive at most 92 µW, margin 3.1.",
        "No pair brings 7 pF.",
    ]


def test_what_adds_to_a_worst_case_is_named_and_measured_against_the_greatest():
    review = hand_made.review()
    review["contributors"]["total_ppm"] = [
        {"input": "frequency_stability_ppm", "adds": 12.0},
        {"input": "circuit.input_stray_pf", "adds": 6.0},
        {"input": "condition frost", "adds": 3.0},
        {"input": "circuit.swing_v", "adds": 0.1},
    ]
    assert [(one.name, one.adds, one.share) for one in answers.shares(review, "total_ppm")] == [
        ("Drift over temperature", "12 ppm", 1.0),
        ("Stray, A–0", "6 ppm", 0.5),
        ("Corner: frost", "3 ppm", 0.25),
    ]
    assert answers.shares(review, "drive_level_uw") == []


def test_what_is_open_is_listed_before_it_is_signed():
    review = hand_made.review(missing=["esr_ohm"], remarks=[{"about": "x", "message": "a load of 8 pF taken of 8, 10"}])
    assert answers.open_lines(review) == [
        "A load of 8 pF taken of 8, 10.",
        "☞ ESR: the reading waits for a look on Sheets.",
        "◇ ESR: not known.",
    ]


def test_notes_of_either_shape_are_read():
    notes = [{"level": "info", "message": "x.pdf: states no frequency", "where": None}, "plain"]
    assert answers.note_lines(hand_made.ranking(notes=notes)) == ["x.pdf: states no frequency", "plain"]


WATCH = read_bench("[requirement]\nfrequency_mhz = 0.032768\ntotal_ppm = 200.0\n", "watch.toml")


def test_a_clocks_error_is_said_in_seconds_a_day_too():
    # 100 ppm of 86 400 s are 8.64 s.
    review = hand_made.review(total_ppm=hand_made.figure(-100.0, 0.0, 50.0))
    day = next(one for one in answers.numbers(review, WATCH) if one.name == "The same for a clock")
    assert (day.low, day.high, day.unit) == ("−8.64", "+4.32", "s a day")
    assert all(one.name != "The same for a clock" for one in answers.numbers(review, BENCH))


def test_a_small_transconductance_is_said_in_microsiemens():
    review = hand_made.review(critical_transconductance_ms=hand_made.figure(0.001, 0.0012, 0.0023))
    critical = next(one for one in answers.numbers(review, WATCH) if one.name == "Critical transconductance")
    assert (critical.low, critical.mid, critical.high, critical.unit) == ("1", "1.2", "2.3", "µS")


def test_a_forks_kilohms_and_henries_are_said_as_such():
    review = hand_made.review(
        negative_resistance_ohm=hand_made.figure(-461564.0, -422555.0, -352727.0),
        motional_inductance_mh=hand_made.figure(4.7e6, 8.58e6, 17.2e6),
    )
    rows = {one.name: one for one in answers.numbers(review, WATCH)}
    assert (rows["Negative resistance"].low, rows["Negative resistance"].unit) == ("−461.6", "kΩ")
    assert (rows["Motional inductance L1"].mid, rows["Motional inductance L1"].unit) == ("8580", "H")


def test_bench_keys_in_messages_are_said_by_the_names_of_their_fields():
    message = "cannot be told: circuit.input_capacitor_pf not known; give circuit.condition[1].swing_v"
    assert answers.told(message) == "cannot be told: “Fitted, A–0” not known; give “Swing”"
    assert answers.told("measured.pairs: -5 ppm") == "measured.pairs: −5 ppm"


def test_parts_of_the_same_name_are_told_apart():
    rows = [hand_made.row(1, None), hand_made.row(2, None, slack={"margin": 1.5}), hand_made.row(3, "A")]
    file = hand_made.SHEET.file
    assert answers.identities(rows) == [(file, None, 1), (file, None, 2), (file, "A", 1)]
    reviews = [
        hand_made.review(part_number=None, verdict="falls short"),
        hand_made.review(part_number=None, slack={"margin": 1.5}),
    ]
    assert answers.review_for(rows[1], reviews) is reviews[1]
    assert answers.review_for(rows[2], reviews) is None


def test_only_the_rows_own_part_is_worked_out():
    other = hand_made.PART.model_copy(update={"part_number": "B"})
    catalogue = hand_made.SHEET.model_copy(update={"parts": (hand_made.PART, other)})
    (sheet,) = answers.sheets_of(MEETS, [catalogue, hand_made.LOCKED])
    assert [part.part_number for part in sheet.parts] == ["MRB25-260-08H"]


def test_rows_that_are_not_shown_are_said():
    assert answers.shown_of(20_000, 500) == "The first 500 of 20000 are shown; the saved tables hold all of them."
    assert answers.shown_of(9, 9) == ""
