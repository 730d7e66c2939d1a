"""What was read on the bench, beside what is computed."""

import pytest
from made_sheets import bench, exactly, reading, sheet, usual

from compare.review import review

EXACT = (
    exactly("load_capacitance_pf", 8.0),
    exactly("esr_ohm", 60.0),
    exactly("shunt_capacitance_pf", 1.5),
    exactly("motional_capacitance_ff", 4.5),
)


def reviewed(measured, *readings, **circuit):
    part = usual(*(readings or EXACT))
    return review([sheet(part)], bench({"measured": measured, "circuit": circuit}))["reviews"][0]


def test_without_a_measured_table_there_are_no_measured_keys():
    found = review([sheet(usual())], bench())["reviews"][0]
    assert [key for key in found if key.startswith("measured")] == []


def test_a_frequency_at_the_rated_load_is_that_load_and_its_spread_that_of_the_make_tolerance():
    """At 16 MHz the load is 8 pF; 10 ppm is 10/24.9 = 0.4 pF either way (trim -24.9 ppm/pF at 8 pF)."""
    found = reviewed({"frequency_mhz": 16.0})
    load = found["measured_load_pf"]
    assert load["mid"] == pytest.approx(8.0, abs=1e-3)
    assert (load["high"] - load["low"]) / 2 == pytest.approx(0.4, rel=0.03)


def test_the_stray_is_what_the_load_has_more_than_the_capacitors():
    """8 pF less 12/2 pF fitted: 2 pF, as one equivalent across the crystal."""
    found = reviewed({"frequency_mhz": 16.0})
    assert found["measured_stray_pf"]["mid"] == pytest.approx(2.0, abs=1e-3)


def test_a_probe_counts_as_meant_to_be_there():
    """12 pF at the input, 12 + 4 at the output: 8 - 12 · 16/28 = 1.14 pF."""
    found = reviewed({"frequency_mhz": 16.0, "probe_pf": 4.0})
    assert found["measured_stray_pf"]["mid"] == pytest.approx(8.0 - 12 * 16 / 28, abs=1e-3)


def test_a_frequency_that_no_load_explains_is_said_so():
    found = reviewed({"frequency_mhz": 16.1})
    assert found["measured_message"].startswith("No load can explain the measured 16.1 MHz")
    assert found["measured_load_pf"]["mid"] is None


def test_pairs_give_stray_and_c1():
    """Errors made by the formula fs √(1 + C1/(C0 + C/2 + s)) with C1 4.5 fF and s 2 pF; by hand."""

    def error(c):
        return ((1 + 4.5e-3 / (1.5 + c / 2 + 2.0)) / (1 + 4.5e-3 / 9.5)) ** 0.5 - 1

    found = reviewed({"pairs": [[10.0, error(10.0)], [15.0, error(15.0)]]})
    assert found["measured_stray_pf"]["mid"] == pytest.approx(2.0, rel=1e-6)
    assert found["measured_motional_capacitance_ff"]["mid"] == pytest.approx(4.5, rel=1e-6)


def test_a_stopping_resistor_gives_negative_resistance_and_margin():
    """-(R + RL) and (R + RL)/RL."""
    found = reviewed({"stopping_resistor_ohm": 470.0})
    rl = found["load_resonance_resistance_ohm"]
    assert found["measured_negative_resistance_ohm"]["mid"] == pytest.approx(-(470.0 + rl["mid"]))
    assert found["measured_margin"]["low"] == pytest.approx((470.0 + rl["high"]) / rl["high"])


def test_what_was_not_read_is_null_with_the_reason():
    found = reviewed({"startup_ms": 1.4})
    assert found["measured_load_pf"]["mid"] is None
    assert found["measured_load_pf"]["how"] == "cannot be had: measured.frequency_mhz not given"
    assert found["measured_margin"]["how"] == "cannot be had: measured.stopping_resistor_ohm not given"
    assert found["measured_startup_ms"]["mid"] == 1.4


def test_without_a_rated_load_the_frequency_says_nothing():
    part = usual(reading("esr_ohm", max=60.0), without=("load_capacitance_pf",))
    found = review([sheet(part)], bench({"measured": {"frequency_mhz": 16.0}}))["reviews"][0]
    assert found["measured_load_pf"]["how"] == "cannot be had: the sheet states no rated load"
