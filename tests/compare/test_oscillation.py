"""The closed loop against its characteristic polynomial and its state matrix; what always holds; what has no number."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
import scipy.linalg
import scipy.optimize
from hypothesis import given
from hypothesis import strategies as st
from reference_loops import CASES, Loop, circuit_of, crystal_of, swing_of

from compare.circuit import Circuit
from compare.oscillation import Crystal, amplifier_swing_v, analyse

MEGAHERTZ = Crystal(16.0, 9.0, 1.2, 3.6, 50.0)
MEGAHERTZ_CIRCUIT = Circuit(15.0, 15.0, 0.5, 0.0, 8.0, 0.0, 1000.0, np.inf)
FORK = crystal_of(CASES["T03"]["crystal"])
FORK_CIRCUIT = circuit_of(CASES["T03"]["bench"]["circuit"])


def quartz(frequency_mhz: float, load_pf: float, c0_pf: float, ratio: float, esr_ohm: float) -> Crystal:
    return Crystal(frequency_mhz, load_pf, c0_pf, 1e3 * c0_pf / ratio, esr_ohm)


PARTS = st.builds(
    quartz,
    st.sampled_from([4.0, 12.0, 16.0, 26.0, 48.0]),
    st.sampled_from([6.0, 9.0, 12.0, 20.0, np.inf]),
    st.floats(0.5, 5),
    st.floats(158, 800),
    st.floats(10, 150),
)
CIRCUITS = st.builds(
    Circuit,
    st.floats(8, 50),
    st.floats(8, 50),
    st.floats(0.1, 3),
    st.sampled_from([0.0, 3.0]),
    st.floats(0.5, 40),
    st.sampled_from([0.0, 100.0, 1000.0]),
    st.sampled_from([100.0, 1e3, 1e4, np.inf]),
    st.sampled_from([1.0, 5.0, 50.0, np.inf]),
)


FORKS = st.builds(
    quartz,
    st.just(0.032768),
    st.sampled_from([6.0, 7.0, 9.0, 12.5]),
    st.floats(0.7, 2),
    st.floats(220, 800),
    st.floats(20e3, 100e3),
)
FORK_CIRCUITS = st.builds(
    Circuit,
    st.floats(8, 30),
    st.floats(8, 30),
    st.floats(0.2, 2),
    st.sampled_from([0.0, 3.0]),
    st.floats(0.001, 0.05),
    st.sampled_from([0.0, 100e3, 470e3]),
    st.one_of(st.floats(1e3, 3e3), st.sampled_from([5e3, 10e3, 22e3, np.inf])),
    st.sampled_from([300.0, 1e3, 3e3, 10e3, np.inf]),
)
LOOPS = st.one_of(st.tuples(CIRCUITS, PARTS), st.tuples(FORK_CIRCUITS, FORKS))
"""Also circuits that hardly oscillate or do not: one in twenty of the forks'."""


def scalar(found: dict, key: str) -> float:
    return float(found[key])


@given(LOOPS)
def test_startup_is_that_of_the_characteristic_polynomials_pole(loop: tuple[Circuit, Crystal]) -> None:
    circuit, crystal = loop
    pole = Loop.of(circuit, crystal).pole(float(np.asarray(circuit.transconductance_ms)) * 1e-3)
    startup = scalar(analyse(circuit, crystal), "startup_ms")
    rate = 0.0 if np.isnan(startup) else 1e3 * np.log(1e5) / startup
    # The judge works in doubles: its pole is good to some 1e-12 of the frequency.
    assert rate == pytest.approx(max(pole.real, 0.0), rel=1e-6, abs=1e-11 * abs(pole.imag))


@given(LOOPS)
def test_transconductance_limits_are_the_roots_on_the_axis(loop: tuple[Circuit, Crystal]) -> None:
    roots = Loop.of(*loop).transconductance_limits()
    found = analyse(*loop)
    critical = scalar(found, "critical_transconductance_ms")
    if len(roots) < 2:
        # One root alone is a pair that the 1 % window or rounding has cut: no judge.
        assert roots or np.isnan(critical)
        return
    near = roots[1][0] < 2 * roots[0][0]
    assert critical == pytest.approx(1e3 * roots[0][0], rel=1e-3 if near else 1e-5)
    assert scalar(found, "greatest_transconductance_ms") == pytest.approx(1e3 * roots[1][0], rel=1e-3)


@given(LOOPS)
def test_it_starts_exactly_between_the_limits(loop: tuple[Circuit, Crystal]) -> None:
    circuit, crystal = loop
    limits = analyse(circuit, crystal)
    critical, greatest = (scalar(limits, f"{name}_transconductance_ms") for name in ("critical", "greatest"))
    if np.isnan(critical):
        assert np.isnan(scalar(limits, "startup_ms"))
        return
    tried = np.array([0.99 * critical, 1.01 * critical, 0.99 * greatest, 1.01 * greatest])
    starts = ~np.isnan(analyse(replace(circuit, transconductance_ms=tried), crystal)["startup_ms"])
    if greatest > 1.05 * critical:
        assert starts.tolist() == [False, True, True, False]


@given(LOOPS)
def test_headroom_above_one_is_what_starts(loop: tuple[Circuit, Crystal]) -> None:
    found = analyse(*loop)
    headroom = scalar(found, "resistance_headroom")
    if abs(headroom - 1) > 0.01:
        assert (headroom > 1) == (not np.isnan(scalar(found, "startup_ms")))


def state_matrix_growth(circuit: Circuit, crystal: Crystal) -> float:
    """Growth rate from the circuit's differential equations: the generalised eigenvalues of E dx/dt = A x (scipy)."""
    c_in, c_out, c_across, c_amp, gm, rd, rf, ro = (float(x) for x in circuit)
    frequency, load, c0, c1, r1 = (float(x) for x in crystal)
    omega = 2e6 * np.pi * frequency
    inductance = (1 + c1 * 1e-3 / (c0 + load)) / (omega**2 * c1 * 1e-15)
    farad, siemens = 1e-11, omega * 1e-11
    across = (c_across + c0) * 1e-12 / farad
    gf, go, gd = 1e-3 / rf / siemens, 1e-3 / ro / siemens, 1 / rd / siemens
    gm = gm * 1e-3 / siemens
    ohm = 1 / siemens
    capacitive = np.diag([c_in * 1e-12 / farad, c_out * 1e-12 / farad, c_amp * 1e-12 / farad, 0, 0])
    capacitive[:2, :2] += across * np.array([[1, -1], [-1, 1]])
    capacitive[3, 3] = inductance * omega / ohm
    capacitive[4, 4] = c1 * 1e-15 / farad
    # Unknowns: v(a), v(b), v(o), current b to a through the arm, voltage of C1.
    conductive = np.array(
        [
            [-gf, 0, gf, 1, 0],
            [0, -gd, gd, -1, 0],
            [gf - gm, gd, -gf - go - gd, 0, 0],
            [-1, 1, 0, -r1 / ohm, -1],
            [0, 0, 0, 1, 0],
        ]
    )
    values = scipy.linalg.eigvals(conductive, capacitive)
    values = values[np.isfinite(values)]
    return float(min(values, key=lambda value: abs(value - 1j)).real * omega)


@pytest.mark.parametrize("name", ["T04", "T06", "M03", "M07", "M16"])
def test_startup_is_that_of_the_state_matrix(name: str) -> None:
    case = CASES[name]
    circuit, crystal = circuit_of(case["bench"]["circuit"]), crystal_of(case["crystal"])
    growth = state_matrix_growth(circuit, crystal)
    assert scalar(analyse(circuit, crystal), "startup_ms") == pytest.approx(1e3 * np.log(1e5) / growth, rel=1e-7)


def test_critical_transconductance_is_where_the_state_matrix_stops_growing() -> None:
    case = CASES["T04"]
    circuit, crystal = circuit_of(case["bench"]["circuit"]), crystal_of(case["crystal"])

    def growth(gm_ms: float) -> float:
        return state_matrix_growth(replace(circuit, transconductance_ms=gm_ms), crystal)

    found = analyse(circuit, crystal)
    assert scalar(found, "critical_transconductance_ms") == pytest.approx(
        scipy.optimize.brentq(growth, 1e-3, 0.05), rel=1e-6
    )
    assert scalar(found, "greatest_transconductance_ms") == pytest.approx(
        scipy.optimize.brentq(growth, 0.05, 0.5), rel=1e-6
    )


def test_greatest_esr_is_where_the_growth_vanishes() -> None:
    found = analyse(FORK_CIRCUIT, FORK)
    limit = scalar(found, "greatest_esr_ohm")
    poles = [
        Loop.of(FORK_CIRCUIT, replace(FORK, esr_ohm=limit * f))
        .pole(float(FORK_CIRCUIT.transconductance_ms) * 1e-3)
        .real
        for f in (0.9999, 1.0001)
    ]
    assert poles[0] > 0 > poles[1]


def feedback_where_the_limits_meet(crystal: Crystal) -> float:
    """kΩ below which the polynomial of the fork's circuit has no steady state, by bisection."""
    low, high = 500.0, 3000.0
    while high / low > 1 + 1e-9:
        middle = (low * high) ** 0.5
        roots = Loop.of(replace(FORK_CIRCUIT, feedback_resistor_kohm=middle), crystal).transconductance_limits()
        low, high = (low, middle) if len(roots) > 1 else (middle, high)
    return high


@pytest.mark.parametrize("distance", [1e-5, 1e-4, 1e-3, 1e-2])
def test_limits_that_nearly_meet_are_told_apart(distance: float) -> None:
    meet = feedback_where_the_limits_meet(FORK)
    beyond = replace(FORK_CIRCUIT, feedback_resistor_kohm=meet * (1 + distance))
    (critical, _), (greatest, _) = Loop.of(beyond, FORK).transconductance_limits()
    found = analyse(beyond, FORK)
    assert scalar(found, "critical_transconductance_ms") == pytest.approx(1e3 * critical, rel=1e-4)
    assert scalar(found, "greatest_transconductance_ms") == pytest.approx(1e3 * greatest, rel=1e-3)
    short = analyse(replace(FORK_CIRCUIT, feedback_resistor_kohm=meet * (1 - distance)), FORK)
    assert np.isnan(scalar(short, "critical_transconductance_ms"))
    assert np.isnan(scalar(short, "greatest_transconductance_ms"))


def test_what_cannot_oscillate_has_only_what_does_not_oscillate() -> None:
    case = CASES["T05"]
    found = analyse(circuit_of(case["bench"]["circuit"]), crystal_of(case["crystal"]), 0.2)
    none = {key for key, value in found.items() if np.isnan(value)}
    assert none == {
        "gain_ratio",
        "greatest_esr_ohm",
        "critical_transconductance_ms",
        "greatest_transconductance_ms",
        "load_error_ppm",
        "drive_level_uw",
        "startup_ms",
    }


def test_an_unknown_transconductance_leaves_what_does_not_need_it() -> None:
    known = analyse(MEGAHERTZ_CIRCUIT, MEGAHERTZ, 0.4)
    found = analyse(replace(MEGAHERTZ_CIRCUIT, transconductance_ms=np.nan), MEGAHERTZ, 0.4)
    for key in (
        "critical_transconductance_ms",
        "circuit_load_pf",
        "load_error_ppm",
        "drive_level_uw",
        "trim_ppm_per_pf",
    ):
        assert scalar(found, key) == scalar(known, key)
    for key in ("margin", "gain_ratio", "resistance_headroom", "startup_ms", "greatest_esr_ohm"):
        assert np.isnan(scalar(found, key))


def test_an_unknown_rated_load_leaves_margin_and_drive() -> None:
    known = analyse(MEGAHERTZ_CIRCUIT, MEGAHERTZ, 0.4)
    found = analyse(MEGAHERTZ_CIRCUIT, replace(MEGAHERTZ, load_capacitance_pf=np.nan), 0.4)
    for key in ("margin", "gain_ratio", "resistance_headroom", "drive_level_uw", "startup_ms"):
        assert scalar(found, key) == pytest.approx(scalar(known, key), rel=2e-3)
    assert np.isnan(scalar(found, "load_error_ppm"))


def test_one_part_without_esr_stops_no_other() -> None:
    found = analyse(MEGAHERTZ_CIRCUIT, replace(MEGAHERTZ, esr_ohm=np.array([50.0, np.nan])), 0.4)
    assert scalar({"m": found["margin"][0]}, "m") == scalar(analyse(MEGAHERTZ_CIRCUIT, MEGAHERTZ, 0.4), "margin")
    assert np.isnan(found["margin"][1])
    assert np.isnan(found["circuit_load_pf"][1])
    assert found["negative_resistance_ohm"][1] == found["negative_resistance_ohm"][0]


def test_nothing_across_the_crystal_leaves_no_greatest_transconductance() -> None:
    found = analyse(Circuit(15, 15, 0.0, 0.0, 8.0), replace(MEGAHERTZ, shunt_capacitance_pf=0.0))
    assert scalar(found, "greatest_transconductance_ms") == np.inf
    # gm_crit = w² R1 Cin Cout with nothing across: by hand, the lossless form of the reference notes, section 2.
    omega = 2e6 * np.pi * 16
    assert scalar(found, "critical_transconductance_ms") == pytest.approx(1e3 * omega**2 * 50 * (15e-12) ** 2, rel=1e-3)


@given(PARTS, st.floats(8, 50), st.floats(8, 50), st.floats(0.1, 3), st.floats(1, 30))
def test_without_losses_the_textbook_limits_hold(
    crystal: Crystal, c_in: float, c_out: float, c_across: float, gm: float
) -> None:
    """Vittoz, Degrauwe, Bitz (1988), as in the reference notes, section 2; first order in R1."""
    frequency, _, c0, _, r1 = (float(x) for x in crystal)
    omega, c3 = 2e6 * np.pi * frequency, (c0 + c_across) * 1e-12
    a, b = c_in * 1e-12, c_out * 1e-12
    cs = a * b / (a + b)
    critical = omega**2 * r1 * (a + b) ** 2 / (a * b) * (cs + c3) ** 2
    greatest = a * b / (r1 * c3**2)
    found = analyse(Circuit(c_in, c_out, c_across, 0.0, gm), crystal)
    if greatest > 100 * critical:
        assert scalar(found, "critical_transconductance_ms") == pytest.approx(1e3 * critical, rel=0.02)
        assert scalar(found, "greatest_transconductance_ms") == pytest.approx(1e3 * greatest, rel=0.02)


@given(CIRCUITS, PARTS)
def test_margin_and_headroom_fall_as_the_esr_rises(circuit: Circuit, crystal: Crystal) -> None:
    esr = float(np.asarray(crystal.esr_ohm)) * np.array([1.0, 1.5, 2.0, 3.0])
    found = analyse(circuit, replace(crystal, esr_ohm=esr))
    # Where it cannot oscillate the load is another by definition.
    can = (found["negative_resistance_ohm"] < 0) & ~np.isnan(found["critical_transconductance_ms"])
    for key in ("margin", "resistance_headroom", "gain_ratio"):
        values = found[key][can & (found["resistance_headroom"] > 0)]
        assert np.all(np.diff(values) < 0), key


@given(CIRCUITS, PARTS)
def test_resistance_at_load_is_never_below_the_motional_one(circuit: Circuit, crystal: Crystal) -> None:
    found = analyse(circuit, crystal)
    assert scalar(found, "load_resonance_resistance_ohm") >= float(np.asarray(crystal.esr_ohm))


@given(CIRCUITS, PARTS)
def test_a_clipping_output_leaves_less_load_and_more_frequency(circuit: Circuit, crystal: Crystal) -> None:
    """Reference notes, section 3.4: with the output limited the load falls and the frequency rises."""
    steady, clipped = (analyse(circuit, crystal, 0.4, "input", limiter) for limiter in ("transconductance", "output"))
    if scalar(steady, "resistance_headroom") > 1.05 and float(circuit.series_resistor_ohm) == 0:
        assert scalar(clipped, "circuit_load_pf") <= scalar(steady, "circuit_load_pf") * (1 + 1e-9)
        assert scalar(clipped, "load_error_ppm") >= scalar(steady, "load_error_ppm") - 1e-6


def test_where_it_does_not_start_either_limiter_gives_the_state_at_the_critical_transconductance() -> None:
    weak = replace(MEGAHERTZ_CIRCUIT, transconductance_ms=0.01)
    one, other = (analyse(weak, MEGAHERTZ, 0.4, "input", limiter) for limiter in ("transconductance", "output"))
    for key, value in one.items():
        assert scalar(other, key) == pytest.approx(float(value), nan_ok=True), key


def test_swing_at_either_end_says_the_same() -> None:
    case = CASES["M07"]
    circuit, crystal = circuit_of(case["bench"]["circuit"]), crystal_of(case["crystal"])
    at_input = scalar(analyse(circuit, crystal, 0.4, "input"), "drive_level_uw")
    ratio = case["more"]["output_over_input"]
    assert scalar(analyse(circuit, crystal, 0.4 * ratio, "output"), "drive_level_uw") == pytest.approx(
        at_input, rel=1e-8
    )
    amplifier = amplifier_swing_v(circuit, crystal, 0.4, "input")
    assert scalar(analyse(circuit, crystal, amplifier, "amplifier"), "drive_level_uw") == pytest.approx(
        at_input, rel=1e-12
    )


def test_a_probe_counts_for_the_drive_alone() -> None:
    """As published: P = RL (w Ctot V)²/2, Ctot with the probe (case drive-from-swing)."""
    bare = analyse(MEGAHERTZ_CIRCUIT, MEGAHERTZ, 0.4)
    probed = analyse(MEGAHERTZ_CIRCUIT, MEGAHERTZ, 0.4, "input", "transconductance", 5.0)
    heavier = analyse(replace(MEGAHERTZ_CIRCUIT, input_pf=20.0), MEGAHERTZ, 0.4)
    for key, value in bare.items():
        expected = heavier[key] if key == "drive_level_uw" else value
        assert scalar(probed, key) == pytest.approx(float(expected), rel=1e-12), key
    assert scalar(probed, "drive_level_uw") > scalar(bare, "drive_level_uw")


def test_drive_goes_with_the_square_of_the_swing() -> None:
    one, two = (scalar(analyse(MEGAHERTZ_CIRCUIT, MEGAHERTZ, v), "drive_level_uw") for v in (0.2, 0.4))
    assert two == pytest.approx(4 * one, rel=1e-12)


def test_swing_of_the_reference_comes_back_at_the_amplifier() -> None:
    """With no series resistor the amplifier's output is the crystal's output end."""
    case = CASES["M09"]
    circuit, crystal = circuit_of(case["bench"]["circuit"]), crystal_of(case["crystal"])
    peak, end = swing_of(case["bench"]["circuit"])
    assert end == "input"
    expected = peak * case["more"]["output_over_input"]
    assert float(amplifier_swing_v(circuit, crystal, peak, "input")) == pytest.approx(expected, rel=1e-8)


def test_parts_along_one_axis_and_corners_along_another() -> None:
    parts = replace(MEGAHERTZ, esr_ohm=np.linspace(20, 80, 700)[:, None])
    corners = replace(MEGAHERTZ_CIRCUIT, input_pf=np.linspace(14, 16, 20)[None, :])
    found = analyse(corners, parts, 0.4)
    assert all(values.shape == (700, 20) for values in found.values())
    one = analyse(replace(MEGAHERTZ_CIRCUIT, input_pf=16.0), replace(MEGAHERTZ, esr_ohm=80.0), 0.4)
    for key, values in found.items():
        assert values[-1, -1] == pytest.approx(float(one[key]), rel=1e-12), key
