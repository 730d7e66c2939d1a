"""What bench measurements say, against the analysis run forward."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from reference_loops import CASES, circuit_of, crystal_of

from compare import measured
from compare.oscillation import Crystal, analyse

OSCILLATING = [name for name, case in CASES.items() if case["expected"]["load_error_ppm"] is not None]


@pytest.mark.parametrize("name", OSCILLATING)
def test_the_measured_frequency_leads_back_to_the_load(name: str) -> None:
    """Frequency and load as the reference gives them; ten printed digits of frequency, so 1e-4 ppm."""
    case = CASES[name]
    crystal = crystal_of(case["crystal"])
    error = case["expected"]["load_error_ppm"]
    load = measured.load_from_frequency_pf(case["crystal"]["frequency_mhz"] * (1 + 1e-6 * error), crystal)
    loose = case.get("tolerance") is not None  # the quasi-linear case
    assert float(load) == pytest.approx(case["expected"]["circuit_load_pf"], rel=1e-3 if loose else 1e-5)


def test_a_part_above_nominal_needs_more_load_for_the_same_frequency() -> None:
    part = Crystal(16.0, 9.0, 1.2, 3.6, 50.0)
    loads = measured.load_from_frequency_pf(16.0001, part, np.array([-10.0, 0.0, 10.0]))
    assert np.all(np.diff(loads) > 0)
    assert float(measured.load_from_frequency_pf(16.00016, part, 10.0)) == pytest.approx(9.0, rel=1e-6)


def test_a_frequency_no_load_can_explain_has_no_load() -> None:
    part = Crystal(16.0, 9.0, 1.2, 3.6, 50.0)
    low, high = measured.load_from_frequency_pf(np.array([15.9, 16.1]), part)
    assert np.isnan(low)
    assert np.isnan(high)


def test_why_no_load() -> None:
    assert measured.why_no_load(16.0, 15.99, 16.02) is None
    assert measured.why_no_load(16.03, 15.99, 16.02) == (
        "No load can explain the measured 16.03 MHz: it lies above the part's parallel resonance fp, 16.02 MHz, "
        "where the crystal has no inductive reactance; check the frequency, the part and the C1 taken."
    )
    assert "below the part's series resonance fs, 15.99 MHz" in (measured.why_no_load(15.98, 15.99, 16.02) or "")


def test_stray_is_what_the_load_has_beyond_the_fitted() -> None:
    """By hand: 12 and 12 pF in series are 6; 3 pF more at each end make 7.5, and 0.5 across 8."""
    assert float(measured.stray_from_load_pf(8.0, 12.0, 12.0)) == pytest.approx(2.0)
    assert float(measured.stray_from_load_pf(5.0, 12.0, 12.0)) == pytest.approx(-1.0)


@given(
    st.floats(1, 20),
    st.floats(0.5, 6),
    st.floats(0.1, 6),
    st.sampled_from([6.0, 9.0, 12.5, np.inf]),
    st.floats(-30, 30),
)
def test_two_pairs_lead_back_to_stray_and_c1(c1: float, c0: float, stray: float, load: float, part: float) -> None:
    rated = 1.0 if np.isinf(load) else np.sqrt(1 + c1 * 1e-3 / (c0 + load))

    def error(fitted: float) -> float:
        return float(np.sqrt(1 + c1 * 1e-3 / (c0 + fitted / 2 + stray)) / rated * (1 + part * 1e-6) - 1)

    pairs = [(c, error(c)) for c in (10.0, 15.0)]
    if any(abs(e - part * 1e-6) < 1e-7 for _, e in pairs):
        return  # a load right at the rated one says nothing about C1
    found = measured.from_pairs(pairs, c0, load, part)
    candidates = [found.stray_pf, found.motional_capacitance_ff]
    reproduced = [
        np.sqrt(1 + found.motional_capacitance_ff * 1e-3 / (c0 + c / 2 + found.stray_pf))
        / (1.0 if np.isinf(load) else np.sqrt(1 + found.motional_capacitance_ff * 1e-3 / (c0 + load)))
        * (1 + part * 1e-6)
        - 1
        for c, _ in pairs
    ]
    assert np.all(np.isfinite(candidates))
    assert reproduced == pytest.approx([e for _, e in pairs], abs=1e-10)


def test_pairs_from_the_whole_circuit() -> None:
    """A circuit analysed twice with the losses in, which the pairs count with the stray: to 2 % that of the nodes."""
    case = CASES["M09"]
    circuit, crystal = circuit_of(case["bench"]["circuit"]), crystal_of(case["crystal"])
    keys = case["bench"]["circuit"]
    strays = keys["input_stray_pf"] / 2 + keys["across_stray_pf"]
    pairs = []
    for fitted in (10.0, 15.0):
        total = fitted + keys["input_stray_pf"]
        found = analyse(replace(circuit, input_pf=total, output_pf=total), crystal)
        pairs.append((fitted, float(found["load_error_ppm"]) * 1e-6))
    back = measured.from_pairs(pairs, case["crystal"]["shunt_capacitance_pf"], case["crystal"]["load_capacitance_pf"])
    assert back.stray_pf == pytest.approx(strays, rel=0.02)
    assert back.motional_capacitance_ff == pytest.approx(case["crystal"]["motional_capacitance_ff"], rel=0.01)


def test_pairs_that_fit_no_crystal_say_so() -> None:
    assert np.isnan(measured.from_pairs([(10.0, -1e-5), (15.0, 1e-5)], 1.2, 9.0).stray_pf)


def test_one_capacitor_twice_is_refused() -> None:
    with pytest.raises(ValueError, match="two different capacitors, got only 12 pF"):
        measured.from_pairs([(12.0, 1e-6), (12.0, 2e-6)], 1.2, 9.0)


def test_the_stopping_resistor_counts_with_the_resistance_at_load() -> None:
    """By hand: 470 ohm stops it on 80 ohm: -550 ohm, 6.875 times."""
    assert float(measured.negative_resistance_ohm(470.0, 80.0)) == -550.0
    assert float(measured.margin(470.0, 80.0)) == pytest.approx(6.875)


@pytest.mark.parametrize("name", ["M02", "M07", "M09", "T02", "T04"])
def test_the_added_resistor_of_the_reference_gives_its_margin(name: str) -> None:
    case = CASES[name]
    rl = case["expected"]["load_resonance_resistance_ohm"]
    found = float(measured.margin(case["more"]["added_resistor_ohm"], rl))
    assert found == pytest.approx(case["more"]["margin_by_added_resistor"], rel=1e-3)
