"""Bench readings beside what is computed."""

import hand_made
import pytest
from reviewed_parts import dossier_of, part, radio

from compare.bench import read_bench
from compare.bench_lines import bench_lines

MEASURED = """
[measured]
frequency_mhz = 26.000190
stopping_resistor_ohm = 560.0
startup_ms = 0.8
"""


def by_key(dossier):
    return {one.key: one for one in bench_lines(dossier)}


def with_readings(text=MEASURED):
    return dossier_of(part(), read_bench(hand_made.BENCH_TEXT + text, "bench.toml"))


def test_nothing_measured_yet_has_the_value_to_reach():
    rows = by_key(radio())
    rl = radio().review["load_resonance_resistance_ohm"]["high"]
    reach = rows["measured.stopping_resistor_ohm"].to_reach
    assert float(reach.split()[0]) == pytest.approx(4 * rl, rel=5e-3)
    assert rows["measured.startup_ms"].to_reach == "within 2 ms"
    assert rows["measured.frequency_mhz"].to_reach == "±50 ppm of 26 MHz"
    assert all(one.cells[3] == "not yet" for key, one in rows.items() if key.startswith("measured."))


def test_what_was_measured_stands_with_what_it_says():
    one = with_readings()
    rows = by_key(one)
    assert rows["measured.stopping_resistor_ohm"].measured == "560 Ω"
    margin = one.review["measured_margin"]["mid"]
    assert f"nominal {margin:.3g}" in rows["measured.stopping_resistor_ohm"].says
    # By hand: 190 Hz of 26 MHz are 7.31 ppm.
    assert rows["measured.frequency_mhz"].says.startswith("+7.3 ppm; load ")
    # By hand: 2 ms asked, 0.8 ms measured.
    assert rows["measured.startup_ms"].says == "2.5 times over"


def test_a_frequency_that_no_load_explains_says_that():
    far = with_readings("[measured]\nfrequency_mhz = 25.9\n")
    assert by_key(far)["measured.frequency_mhz"].says.startswith("No load can explain the measured 25.9 MHz")


def test_pairs_of_frequencies_say_stray_and_c1():
    one = with_readings("[measured]\npairs = [[12.0, 10e-6], [15.0, -16e-6]]\n")
    assert "C1" in by_key(one)["measured.pairs"].says
