"""The bench file: what it takes, what it refuses, and how it says so."""

import math

import pytest

from compare.bench import Bench, BenchError, read_bench, uses

LEAST = "[requirement]\nfrequency_mhz = 16.0\n"

EVERY_KEY = """
[requirement]
frequency_mhz = 16.0
total_ppm = 40.0
use = "ble-active"
trim_step_ppm = 1.0
temperature_c = [-40.0, 85.0]
years = 10.0
ageing_rule = "linear"
margin = 4.0
margin_source = 'house "rule"'
drive_headroom = 1.5
startup_ms = 10.0

[circuit]
transconductance_ms = [6.0, 11.0]
input_capacitor_pf = 12.0
output_capacitor_pf = 12
capacitor_tolerance_percent = 5.0
input_stray_pf = 3.0
output_stray_pf = 3.0
across_stray_pf = 0.5
stray_tolerance_percent = 30.0
internal_pf = 2.0
internal_as = "as seen by the crystal"
internal_tolerance_percent = 10.0
series_resistor_ohm = 100.0
amplifier_output_pf = 1.0
feedback_resistor_kohm = 1000.0
output_resistance_kohm = inf
swing_v = 0.8
swing_at = "output"
swing_as = "rms"
probe_pf = 1.0
overtone_trap = true
limiter = "unknown"

[circuit.rating]
esr_max_ohm = [[10, 20, 9.0, 80.0], [20, 30, 9.0, 60.0]]
factor_inside = 5.0
esr_means = "at load"
shunt_capacitance_pf = 3.0
esr_min_ohm = 10.0

[[circuit.condition]]
name = "cold, low supply"
temperature_c = -40.0
transconductance_ms = 5.0
swing_v = 0.6

[[circuit.condition]]
temperature_c = 85

[crystal]
esr_means = "at load"
series_resistor_rule = "add to ESR"

[measured]
frequency_mhz = 16.00012
probe_pf = 8.0
probe_at = "input"
stopping_resistor_ohm = 470.0
startup_ms = 1.4
pairs = [[13.0, 13.0e-6], [15.0, -13.0e-6]]
"""


def fault_of(text: str) -> str:
    with pytest.raises(BenchError) as caught:
        read_bench(text, "bench.toml")
    return str(caught.value)


def test_the_frequency_alone_is_a_bench():
    bench = read_bench(LEAST, "bench.toml")
    assert bench.requirement.frequency_mhz == 16.0


def test_defaults_are_those_of_the_contract():
    """The contract's section 3, "Defaults", line by line."""
    bench = read_bench(LEAST, "bench.toml")
    asked, circuit = bench.requirement, bench.circuit
    assert (asked.margin, asked.margin_source, asked.drive_headroom) == (5.0, "default", 1.0)
    assert (asked.years, asked.ageing_rule) == (10.0, "logarithm")
    assert (asked.total_ppm, asked.use, asked.temperature_c, asked.startup_ms) == (None, None, None, None)
    assert (circuit.capacitor_tolerance_percent, circuit.stray_tolerance_percent) == (5.0, 30.0)
    assert (circuit.internal_pf, circuit.internal_as, circuit.internal_tolerance_percent) == (0.0, "per pin", 10.0)
    assert (circuit.series_resistor_ohm, circuit.amplifier_output_pf) == (0.0, 0.0)
    assert circuit.output_resistance_kohm == math.inf
    assert (circuit.swing_at, circuit.swing_as, circuit.probe_pf) == ("input", "peak to peak", 0.0)
    assert (circuit.overtone_trap, circuit.limiter) == (False, "transconductance")
    assert (bench.crystal.esr_means, bench.crystal.series_resistor_rule) == ("motional", "circuit")
    assert bench.measured is None


def test_what_has_no_safe_default_stays_not_known():
    circuit = read_bench(LEAST, "bench.toml").circuit
    assert circuit.transconductance_ms is None
    assert circuit.input_capacitor_pf is None
    assert circuit.output_capacitor_pf is None
    assert circuit.swing_v is None


@pytest.mark.parametrize(("frequency", "margin", "feedback"), [(1.0, 5.0, 1000.0), (0.032768, 3.0, 10000.0)])
def test_margin_and_feedback_resistor_are_taken_by_frequency(frequency, margin, feedback):
    bench = read_bench(f"[requirement]\nfrequency_mhz = {frequency}\n", "bench.toml")
    assert bench.requirement.margin == margin
    assert bench.circuit.feedback_kohm(frequency) == feedback


def test_what_is_taken_is_said_in_a_sentence_each():
    assert read_bench(LEAST, "bench.toml").taken == (
        "circuit.input_stray_pf: not given, 3 pF taken, ±50 %",
        "circuit.output_stray_pf: not given, 3 pF taken, ±50 %",
        "circuit.across_stray_pf: not given, 0.5 pF taken, ±50 %",
        "circuit.feedback_resistor_kohm: not given, 1000 kΩ taken, as from 1 MHz up",
    )


def test_a_stray_that_is_given_keeps_its_own_tolerance():
    circuit = read_bench(LEAST + "[circuit]\ninput_stray_pf = 3.0\n", "bench.toml").circuit
    assert circuit.stray_tolerance("input_stray_pf") == 30.0
    assert circuit.stray_tolerance("output_stray_pf") == 50.0


def test_a_wider_tolerance_holds_for_a_taken_stray_as_well():
    circuit = read_bench(LEAST + "[circuit]\nstray_tolerance_percent = 60\n", "bench.toml").circuit
    assert circuit.stray_tolerance("across_stray_pf") == 60.0


def test_a_rating_without_its_factor_is_said():
    bench = read_bench(LEAST + "[circuit.rating]\nesr_max_ohm = 100\nload_pf = 9\n", "bench.toml")
    assert bench.taken[-1] == "circuit.rating.factor_inside: not given, 1 taken: the figure includes no safety factor"


def test_internal_capacitors_as_seen_are_twice_the_figure_at_each_pin():
    """Two equal capacitors in series show half of one; reference circuits README, section 3.6."""
    text = LEAST + '[circuit]\ninternal_pf = 4.0\ninternal_as = "as seen by the crystal"\n'
    assert read_bench(text, "bench.toml").circuit.internal_at_each_pin_pf == 8.0


def test_a_range_of_transconductance_has_its_geometric_mean_as_nominal():
    circuit = read_bench(LEAST + "[circuit]\ntransconductance_ms = [4, 9]\n", "bench.toml").circuit
    assert circuit.transconductance_range_ms == (4.0, 6.0, 9.0)


@pytest.mark.parametrize(("word", "peak"), [("peak to peak", 0.5), ("peak", 1.0), ("rms", math.sqrt(2))])
def test_swing_is_turned_into_its_peak(word, peak):
    circuit = read_bench(LEAST + f'[circuit]\nswing_v = 1\nswing_as = "{word}"\n', "bench.toml").circuit
    assert circuit.swing_peak_v == pytest.approx(peak)


def test_a_condition_has_its_own_keys_and_the_circuits_others():
    first, second, third = read_bench(EVERY_KEY, "bench.toml").settings
    assert (first.name, second.name, third.name) == ("", "cold, low supply", "condition 2")
    assert (second.circuit.transconductance_ms, second.circuit.swing_v) == (5.0, 0.6)
    assert (second.circuit.output_capacitor_pf, second.circuit.swing_as) == (12.0, "rms")
    assert third.circuit.transconductance_ms == (6.0, 11.0)
    assert (second.temperature_c, third.temperature_c) == (-40.0, 85.0)


def test_a_stray_taken_in_the_circuit_is_taken_in_its_conditions():
    text = LEAST + "[[circuit.condition]]\ntemperature_c = 85\n"
    assert read_bench(text, "bench.toml").settings[1].circuit.stray_tolerance("input_stray_pf") == 50.0


@pytest.mark.parametrize("text", [LEAST, EVERY_KEY])
def test_a_bench_written_out_reads_back_equal(text):
    bench = read_bench(text, "bench.toml")
    again = read_bench(bench.to_toml(), "again.toml")
    assert again == bench
    assert again.taken == bench.taken


def test_a_byte_order_mark_is_no_fault():
    assert isinstance(read_bench("\ufeff" + LEAST, "bench.toml"), Bench)


FAULTS = [
    # written                                           said
    ("[circuit]\ninput_capacitor_pf = -12", "line 4: circuit.input_capacitor_pf: must not be below 0, got -12"),
    ("[circuit]\nseries_resistor_ohm = -1.5", "line 4: circuit.series_resistor_ohm: must not be below 0, got -1.5"),
    ("[circuit]\nstray_tolerance_percent = -5", "line 4: circuit.stray_tolerance_percent: must not be below 0, got -5"),
    ("[circuit]\nswing_v = nan", "line 4: circuit.swing_v: must be a finite number, got nan"),
    ("[circuit]\nswing_v = 0", "line 4: circuit.swing_v: must be above 0, got 0"),
    ('[circuit]\nswing_v = "0.8"', 'line 4: circuit.swing_v: must be a number, got "0.8"'),
    ("[circuit]\novertone_trap = 1", "line 4: circuit.overtone_trap: must be true or false, got 1"),
    ("[circuit]\nfeedback_resistor_kohm = 0", "line 4: circuit.feedback_resistor_kohm: must be above 0, got 0"),
    (
        "[circuit]\ntransconductance_ms = [11, 6]",
        "line 4: circuit.transconductance_ms: low must not be above high, got [11, 6]",
    ),
    ("[circuit]\ntransconductance_ms = 0", "line 4: circuit.transconductance_ms: must be above 0 and finite, got 0"),
    (
        '[circuit]\nswing_as = "pp"',
        "line 4: circuit.swing_as: must be 'peak to peak', 'peak' or 'rms', got \"pp\"",
    ),
    (
        "[circuit]\ninput_capacitor_pf = 0\ninput_stray_pf = 0",
        "line 4: circuit.input_capacitor_pf: no capacitance is left at this end once the tolerances are taken off",
    ),
    (
        "[circuit]\ninput_capasitor_pf = 12",
        "line 4: circuit.input_capasitor_pf: unknown key; did you mean circuit.input_capacitor_pf?",
    ),
    ("[circuit]\nmargin = 5", "line 4: circuit.margin: unknown key; margin belongs in [requirement]"),
    (
        "[[circuit.condition]]\n[[circuit.condition]]\nswing = 2",
        "line 5: circuit.condition[2].swing: unknown key; did you mean circuit.condition.swing_v?",
    ),
    ("[circuits]", "line 3: circuits: unknown key; did you mean circuit?"),
    (
        "[circuit.rating]\nesr_max_ohm = [[10, 20, 9, 80]]\nload_pf = 9",
        "line 5: circuit.rating.load_pf: not beside a list, whose rows hold the load",
    ),
    ("[circuit.rating]\nnegative_resistance_ohm = 0", "line 4: circuit.rating.negative_resistance_ohm: must not be 0"),
    ("[circuit.rating]\nfactor_inside = 0", "line 4: circuit.rating.factor_inside: must be above 0, got 0"),
    (
        "[measured]\npairs = [[13, 13]]",
        "line 4: measured.pairs: the error is relative: 13 ppm is 13e-6, got [[13, 13]]",
    ),
    ("[crystal\n", "line 3: not readable as TOML: Expected ']' at the end of a table declaration at column 9"),
]


@pytest.mark.parametrize(("written", "said"), FAULTS)
def test_a_fault_names_key_line_and_what_was_found(written, said):
    assert fault_of(LEAST + written + "\n") == f"bench.toml, {said}"


def test_two_ways_of_rating_are_one_too_many():
    text = LEAST + "[circuit.rating]\ncritical_transconductance_max_ms = 1\nnegative_resistance_ohm = -600\n"
    assert "line 5: circuit.rating.negative_resistance_ohm: only one of" in fault_of(text)


def test_a_bench_without_a_frequency_says_so():
    assert fault_of("") == "bench.toml: requirement: must be given, with its frequency_mhz"
    assert fault_of("[requirement]\nyears = 3\n") == "bench.toml, line 1: requirement.frequency_mhz: must be given"


def test_all_faults_are_told_at_once_in_the_order_of_the_file():
    text = "[requirement]\nfrequency_mhz = 0\nmargn = 3\n[circuit]\nswing_v = -1\n"
    assert fault_of(text).splitlines() == [
        "bench.toml, line 2: requirement.frequency_mhz: must be above 0, got 0",
        "bench.toml, line 3: requirement.margn: unknown key; did you mean requirement.margin?",
        "bench.toml, line 5: circuit.swing_v: must be above 0, got -1",
    ]


def test_a_use_that_is_not_in_the_table_is_refused_with_the_nearest():
    said = fault_of(LEAST + 'use = "usb-sh"\n')
    assert said.startswith('bench.toml, line 3: requirement.use: "usb-sh" is not in the list of uses')
    assert "usb-fs" in said


def test_a_use_without_a_source_is_no_evidence():
    """The table's own rule: entries whose list of sources is empty are not yet evidence."""
    assert uses()["ble-active"].evidence
    assert not uses()["usb3"].evidence
