"""What Review says, from results by hand in the data contract's shape."""

import hand_made

from compare import review_shown
from compare.bench import read_bench

BENCH = read_bench(hand_made.BENCH_TEXT, "bench.toml")
WATCH = read_bench("[requirement]\nfrequency_mhz = 0.032768\ntotal_ppm = 200.0\n", "watch.toml")
MEETS = hand_made.row(1, "MRB25-260-08H")


def test_every_reason_is_judged_in_its_own_row_with_a_true_minus():
    review = hand_made.review()
    review["reasons"][3]["message"] = "-26.8 to +45.3 ppm against -50/+50 ppm"
    rows = review_shown.judged(review, BENCH)
    assert len(rows) == len(review["reasons"])
    assert rows[3].requirement == "Frequency, all causes"
    assert rows[3].times_over == "1.10 times"
    assert rows[3].why == "−26.8 to +45.3 ppm against −50/+50 ppm"
    assert (rows[6].requirement, rows[6].worst, rows[6].times_over) == ("Temperature range", "", "")
    assert all(row.meets for row in rows)


def test_every_number_has_three_values_a_unit_and_how():
    rows = {one.name: one for _, one in review_shown.keyed_numbers(hand_made.review(), BENCH)}
    load = rows["Load that the circuit presents"]
    assert (load.low, load.mid, load.high, load.unit) == ("7.38", "7.698", "8.01", "pF")
    assert load.how == "A–0 14.6 pF in series with B–0 14.6 pF, and 0.4 pF"
    assert rows["Load error"].low == "−0.4"
    assert rows["Load error"].high == "+18.9"
    assert len(rows) == len(hand_made.FIGURES)


def test_an_estimate_is_marked_and_a_missing_end_is_a_dash():
    changed = hand_made.review(motional_capacitance_ff=hand_made.figure(1.0, 2.0, None, "estimated", "estimated"))
    c1 = next(one for _, one in review_shown.keyed_numbers(changed, BENCH) if one.name == "Motional capacitance C1")
    assert (c1.basis, c1.high) == ("∴ estimated", "—")


def test_what_adds_to_a_worst_case_is_named_and_measured_against_the_greatest():
    review = hand_made.review()
    review["contributors"]["total_ppm"] = [
        {"input": "frequency_stability_ppm", "adds": 12.0},
        {"input": "circuit.input_stray_pf", "adds": 6.0},
        {"input": "condition frost", "adds": 3.0},
        {"input": "circuit.swing_v", "adds": 0.1},
    ]
    assert [(one.name, one.adds, one.share) for one in review_shown.shares(review, "total_ppm")] == [
        ("Drift over temperature", "12 ppm", 1.0),
        ("Stray, A–0", "6 ppm", 0.5),
        ("Corner: frost", "3 ppm", 0.25),
    ]
    assert review_shown.shares(review, "drive_level_uw") == []


def test_what_is_open_is_listed_before_it_is_signed():
    review = hand_made.review(missing=["esr_ohm"], remarks=[{"about": "x", "message": "a load of 8 pF taken of 8, 10"}])
    assert review_shown.open_lines(review) == [
        "A load of 8 pF taken of 8, 10.",
        "☞ ESR: the reading waits for a look on Sheets.",
        "◇ ESR: not known.",
    ]


def test_a_clocks_error_is_said_in_seconds_a_day_too():
    # 100 ppm of 86 400 s are 8.64 s.
    review = hand_made.review(total_ppm=hand_made.figure(-100.0, 0.0, 50.0))
    day = next(one for _, one in review_shown.keyed_numbers(review, WATCH) if one.name == "The same for a clock")
    assert (day.low, day.high, day.unit) == ("−8.64", "+4.32", "s a day")
    assert all(one.name != "The same for a clock" for _, one in review_shown.keyed_numbers(review, BENCH))


def test_a_small_transconductance_is_said_in_microsiemens():
    review = hand_made.review(critical_transconductance_ms=hand_made.figure(0.001, 0.0012, 0.0023))
    critical = next(
        one for _, one in review_shown.keyed_numbers(review, WATCH) if one.name == "Critical transconductance"
    )
    assert (critical.low, critical.mid, critical.high, critical.unit) == ("1", "1.2", "2.3", "µS")


def test_a_forks_kilohms_and_henries_are_said_as_such():
    review = hand_made.review(
        negative_resistance_ohm=hand_made.figure(-461564.0, -422555.0, -352727.0),
        motional_inductance_mh=hand_made.figure(4.7e6, 8.58e6, 17.2e6),
    )
    rows = {one.name: one for _, one in review_shown.keyed_numbers(review, WATCH)}
    assert (rows["Negative resistance"].low, rows["Negative resistance"].unit) == ("−461.6", "kΩ")
    assert (rows["Motional inductance L1"].mid, rows["Motional inductance L1"].unit) == ("8580", "H")
