"""The crystal alone: the four-element circuit solved whole (scipy), ways to C1 there and back, estimates."""

from __future__ import annotations

import numpy as np
import pytest
import scipy.optimize
from hypothesis import given
from hypothesis import strategies as st

from compare import motional

FREQUENCY = st.sampled_from([0.032768, 4.0, 16.0, 48.0])
C0, LOAD, RATIO = st.floats(0.5, 7), st.floats(5, 30), st.floats(158, 900)


def crystal_impedance(w: float, ws: float, c1: float, c0: float, r1: float) -> complex:
    """R1-L1-C1 across C0, SI units; L1 by resonance at ws."""
    arm = r1 + 1j * (w / (ws**2 * c1) - 1 / (w * c1))
    return 1 / (1 / arm + 1j * w * c0)


def phase_zero(ws: float, c1: float, c0: float, r1: float, load: float) -> float:
    """ω at which crystal and load in series are in phase, by scipy, near where the lossless fL lies."""
    lossless = ws * np.sqrt(1 + c1 / (c0 + load))
    span = lossless - ws

    def reactance(w: float) -> float:
        return crystal_impedance(w, ws, c1, c0, r1).imag - 1 / (w * load)

    return float(scipy.optimize.brentq(reactance, lossless - 0.1 * span, lossless + 0.1 * span, xtol=1e-9, rtol=1e-15))


SOLVED_WHOLE = [
    # MHz, C1 fF, C0 pF, R1, CL pF
    (0.032768, 3.5, 1.2, 65e3, 9.0),
    (8.0, 27.0, 5.57, 8.0, 10.0),
    (16.0, 4.2, 1.5, 80.0, 8.0),
    (48.0, 3.0, 1.0, 40.0, 8.0),
    (48.0, 0.6, 4.0, 60.0, 10.0),
]


@pytest.mark.parametrize(("mhz", "c1", "c0", "r1", "load"), SOLVED_WHOLE)
def test_load_resonance_is_that_of_the_whole_circuit(mhz: float, c1: float, c0: float, r1: float, load: float) -> None:
    ws = 2e6 * np.pi * mhz
    exact = phase_zero(ws, c1 * 1e-15, c0 * 1e-12, 0.0, load * 1e-12) / (2e6 * np.pi)
    assert motional.load_resonance_mhz(mhz, c0, c1, load) == pytest.approx(exact, rel=1e-10)


@pytest.mark.parametrize(("mhz", "c1", "c0", "r1", "load"), SOLVED_WHOLE)
def test_trim_is_the_slope_of_the_whole_circuits_resonance(
    mhz: float, c1: float, c0: float, r1: float, load: float
) -> None:
    ws, step = 2e6 * np.pi * mhz, 1e-3
    above, below = (phase_zero(ws, c1 * 1e-15, c0 * 1e-12, r1, (load + d) * 1e-12) for d in (step, -step))
    slope = 1e6 * (above - below) / (2 * step) / ((above + below) / 2)
    assert motional.trim_ppm_per_pf(mhz, c0, c1, load, r1) == pytest.approx(slope, rel=1e-4)


@pytest.mark.parametrize(("mhz", "c1", "c0", "r1", "load"), SOLVED_WHOLE)
def test_resistance_at_load_resonance_is_that_of_the_whole_circuit(
    mhz: float, c1: float, c0: float, r1: float, load: float
) -> None:
    ws = 2e6 * np.pi * mhz
    w = phase_zero(ws, c1 * 1e-15, c0 * 1e-12, r1, load * 1e-12)
    exact = crystal_impedance(w, ws, c1 * 1e-15, c0 * 1e-12, r1).real
    neglected = (w * c0 * 1e-12 * r1 * (1 + c0 / load)) ** 2
    assert motional.load_resonance_resistance_ohm(r1, c0, load) == pytest.approx(exact, rel=1.5 * neglected + 1e-4)


@given(FREQUENCY, C0, RATIO, LOAD)
def test_every_way_to_c1_leads_back_to_it(mhz: float, c0: float, ratio: float, load: float) -> None:
    c1, r1 = 1e3 * c0 / ratio, 1.0
    fs = motional.series_resonance_mhz(mhz, c0, c1, load)
    inductance = motional.motional_inductance_mh(fs, c1)
    quality = motional.quality_factor(fs, c1, r1)
    pulling = -motional.trim_ppm_per_pf(fs, c0, c1, load, 0.0)
    assert motional.motional_capacitance_from_inductance_ff(inductance, mhz, c0, load) == pytest.approx(c1, rel=1e-9)
    assert motional.motional_capacitance_from_quality_ff(quality, r1, mhz, c0, load) == pytest.approx(c1, rel=1e-9)
    assert motional.motional_capacitance_from_pulling_ff(pulling, c0, load) == pytest.approx(c1, rel=1e-9)
    assert motional.motional_capacitance_from_ratio_ff(ratio, c0) == pytest.approx(c1, rel=1e-12)


def test_a_series_part_needs_no_load() -> None:
    c1 = motional.motional_capacitance_from_inductance_ff(motional.motional_inductance_mh(16.0, 5.0), 16.0, 1.0, np.inf)
    assert c1 == pytest.approx(5.0, rel=1e-12)
    assert motional.motional_resistance_ohm(40.0, 3.0, np.inf) == 40.0
    assert motional.series_resonance_mhz(16.0, 3.0, 5.0, np.inf) == 16.0


@given(C0, LOAD, st.floats(5, 500))
def test_resistance_at_load_is_never_below_the_motional_one(c0: float, load: float, r1: float) -> None:
    at_load = motional.load_resonance_resistance_ohm(r1, c0, load)
    assert at_load >= r1
    assert motional.motional_resistance_ohm(at_load, c0, load) == pytest.approx(r1)


@given(FREQUENCY, C0, RATIO, LOAD)
def test_load_resonance_lies_between_series_and_parallel(mhz: float, c0: float, ratio: float, load: float) -> None:
    c1 = 1e3 * c0 / ratio
    assert mhz < motional.load_resonance_mhz(mhz, c0, c1, load) < motional.parallel_resonance_mhz(mhz, c0, c1)


def test_a_crystal_without_phase_zero_has_no_trim() -> None:
    assert np.isnan(motional.load_reactance_ohm(48.0, 7.0, 8.0, 2000.0)[0])


PACKAGES = [
    ("3225", 3.2),
    ("SMD 3.2 x 2.5 mm", 3.2),
    ("2.0×1.6", 2.0),
    ("5,0 x 3,2 mm", 5.0),
    ("HC-49/S", 11.0),
    ("SMD7050-4P", 7.0),
    ("2 x 6 mm", 6.0),
    ("ceramic, 4 pads", None),
    (None, None),
]


@pytest.mark.parametrize(("text", "length"), PACKAGES)
def test_package_length(text: str | None, length: float | None) -> None:
    assert motional.package_length_mm(text) == length


# Crystals of which C1 is published, with C0: the estimate from C0 alone is to hold nine in ten.
PUBLISHED_C1 = [
    # cut, MHz, C0 pF, C1 fF, source
    ("tuning fork", 0.032768, 2.05, 3.14, "Texas Instruments SLAA423A, crystal 1a"),
    ("tuning fork", 0.032768, 2.004, 2.626, "Texas Instruments SLAA423A, crystal 1b"),
    ("tuning fork", 0.032768, 1.689, 2.451, "Texas Instruments SLAA423A, crystal 2"),
    ("tuning fork", 0.032768, 1.416, 2.774, "Texas Instruments SLAA423A, crystal 3a"),
    ("tuning fork", 0.032768, 1.061, 2.181, "Texas Instruments SLAA423A, crystal 3b"),
    ("tuning fork", 0.032768, 1.2, 2.1, "NXP UM10301"),
    ("AT", 8.0, 5.57, 27.0, "ST AN2867, section 1"),
    ("AT", 9.99649, 6.37, 27.1, "Circuit Cellar EQ #72"),
    ("AT", 2.015, 4.0, 12.0, "Sedra and Smith, Microelectronic Circuits"),
]


@pytest.mark.parametrize(("cut", "mhz", "c0", "c1", "source"), PUBLISHED_C1)
def test_estimate_from_c0_holds_published_crystals(cut: str, mhz: float, c0: float, c1: float, source: str) -> None:
    found = motional.estimate_motional_capacitance_ff(cut, 1, mhz, shunt_capacitance_pf=(c0, c0, c0))
    assert found.low <= c1 <= found.high


def test_a_loose_limit_on_c0_does_not_raise_c1() -> None:
    usual = motional.estimate_motional_capacitance_ff("AT", 1, 16.0, "3225")
    loose = motional.estimate_motional_capacitance_ff("AT", 1, 16.0, "3225", limit_pf=7.0)
    tight = motional.estimate_motional_capacitance_ff("AT", 1, 16.0, "3225", limit_pf=0.8)
    assert loose[:3] == usual[:3]
    assert tight.high == pytest.approx(800 / 158)
    assert tight.low <= tight.mid <= tight.high


@pytest.mark.parametrize("cut", ["AT", "BT", "SC", "tuning fork", None, "unheard-of"])
@pytest.mark.parametrize("overtone", [1, 3, 5])
@pytest.mark.parametrize("package", [None, "1612", "2016", "2520", "3225", "5032", "7050", "HC-49U"])
@pytest.mark.parametrize("limit", [0.5, 3.0, np.inf])
def test_estimates_are_in_order(cut: str | None, overtone: int, package: str | None, limit: float) -> None:
    c1 = motional.estimate_motional_capacitance_ff(cut, overtone, 16.0, package, limit_pf=limit)
    c0 = motional.estimate_shunt_capacitance_pf(cut, 16.0, package, limit)
    assert 0 < c1.low <= c1.mid <= c1.high
    assert 0 < c0.low <= c0.mid <= c0.high <= limit


def test_what_goes_without_saying_below_the_plates_is_a_fork() -> None:
    assert motional.cut_at(None, 0.032768) == "tuning fork"
    assert motional.cut_at(None, 16.0) == "AT"


def test_an_estimate_says_what_it_rests_on() -> None:
    c1 = motional.estimate_motional_capacitance_ff("AT", 3, 48.0, shunt_capacitance_pf=(3.0, 3.0, 3.0))
    assert c1.basis.startswith("from C0 and a C0/C1 of 1800 to 4500 for an AT overtone 3: ")
    assert "NDK" in c1.basis
    ageing = motional.estimate_first_year_ageing_ppm()
    assert (float(ageing.low), float(ageing.high)) == (-5.0, 5.0)
    assert "common practice, no source" in ageing.basis


def test_a_tuning_forks_coefficients_are_the_published_ones() -> None:
    """Maxim MAX6902 data sheet (2004) p. 14; Epson RTC-9701JE manual (2004) section 15: -0.035 ±0.005, 25 ±5 °C."""
    k, t0 = motional.estimate_parabolic_coefficient_ppm_per_c2(), motional.estimate_turnover_temperature_c()
    assert [float(x) for x in k[:3]] == [-0.04, -0.035, -0.03]
    assert [float(x) for x in t0[:3]] == [20.0, 25.0, 30.0]


def test_estimates_of_an_overtone_fall_with_its_square() -> None:
    """ST AN2867 (2025), section 3.9: C1 of the third overtone is a ninth."""
    one, three = (motional.estimate_motional_capacitance_ff("AT", n, 48.0, "5032") for n in (1, 3))
    assert float(one.mid / three.mid) == pytest.approx(9.0)


def test_quality_factor_estimate_is_the_published_range() -> None:
    """Microchip AN2648 (2022), section 1.5: 10 000 to 100 000."""
    quality = motional.estimate_quality_factor()
    assert (float(quality.low), float(quality.high)) == (1e4, 1e5)
