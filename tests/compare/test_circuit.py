"""The terminal impedance against the node equations solved by numpy, and the plain load against published examples."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from reference_loops import CASES, REFERENCE, circuit_of

from compare.circuit import Circuit, series_load_pf, terminal_impedance_ohm, turning_transconductance_ms

PICO = 1e-12


def by_node_equations(circuit: Circuit, frequency_mhz: float, c0_pf: float = 0.0) -> complex:
    """V(a) - V(b) for 1 A pulled out of b and put into a: Kirchhoff at a, b and o, solved as a matrix."""
    c_in, c_out, c_across, c_amp, gm, rd, rf, ro = (float(x) for x in circuit)
    s = 2e6j * np.pi * frequency_mhz
    rd = rd or 1e-9  # the matrix needs a resistor; a nanoohm is none
    y = np.zeros((3, 3), dtype=complex)

    def branch(i: int, j: int | None, admittance: complex) -> None:
        y[i, i] += admittance
        if j is not None:
            y[j, j] += admittance
            y[i, j] -= admittance
            y[j, i] -= admittance

    branch(0, None, s * c_in * PICO)
    branch(1, None, s * c_out * PICO)
    branch(2, None, s * c_amp * PICO + 1e-3 / ro)
    branch(0, 1, s * (c_across + c0_pf) * PICO)
    branch(0, 2, 1e-3 / rf)
    branch(1, 2, 1 / rd)
    y[2, 0] += gm * 1e-3
    voltage = np.linalg.solve(y, np.array([1, -1, 0], dtype=complex))
    return complex(voltage[0] - voltage[1])


CIRCUITS = st.builds(
    Circuit,
    st.floats(4, 60),
    st.floats(4, 60),
    st.floats(0, 3),
    st.sampled_from([0.0, 2.0, 5.0]),
    st.floats(0.5, 30),
    st.floats(10, 5000),
    st.sampled_from([100.0, 1e3, 1e4, np.inf]),
    st.sampled_from([1.0, 10.0, np.inf]),
)


@given(CIRCUITS, st.floats(2, 60), st.sampled_from([0.0, 1.0, 5.0]))
def test_impedance_is_that_of_the_node_equations(circuit: Circuit, frequency_mhz: float, c0_pf: float) -> None:
    expected = by_node_equations(circuit, frequency_mhz, c0_pf)
    assert complex(terminal_impedance_ohm(circuit, frequency_mhz, c0_pf)) == pytest.approx(expected, rel=1e-10)


@pytest.mark.parametrize("name", CASES)
def test_impedance_is_that_of_the_reference(name: str) -> None:
    case = CASES[name]
    impedance = terminal_impedance_ohm(circuit_of(case["bench"]["circuit"]), case["crystal"]["frequency_mhz"])
    real, imaginary = case["more"]["terminal_impedance_ohm"]
    assert complex(impedance) == pytest.approx(complex(real, imaginary), rel=1e-9)


@pytest.mark.parametrize("name", CASES)
def test_impedance_is_that_of_the_simulator(name: str) -> None:
    """Of ngspice 39, `.ac`, run when the reference was made."""
    case = CASES[name]
    impedance = terminal_impedance_ohm(circuit_of(case["bench"]["circuit"]), case["crystal"]["frequency_mhz"])
    real, imaginary = case["ngspice"]["terminal_impedance_ohm"]
    assert complex(impedance) == pytest.approx(complex(real, imaginary), rel=1e-8)


def test_without_series_resistor_the_amplifiers_capacitance_joins_the_output() -> None:
    apart = Circuit(15, 15, 0.5, 3.0, 8.0, 0.0, 1000.0, 20.0)
    joined = replace(apart, output_pf=18, amplifier_output_pf=0.0)
    assert terminal_impedance_ohm(apart, 16.0) == pytest.approx(terminal_impedance_ohm(joined, 16.0), rel=1e-13)
    assert series_load_pf(apart) == pytest.approx(float(series_load_pf(joined)), rel=1e-13)


def test_a_series_resistor_into_a_current_source_leaves_the_resistance() -> None:
    """Reference notes, section 5: into a current source the resistor does nothing."""
    without = Circuit(15, 15, 0.5, 0.0, 8.0)
    with_resistor = replace(without, series_resistor_ohm=1000.0)
    assert terminal_impedance_ohm(with_resistor, 16.0) == pytest.approx(
        terminal_impedance_ohm(without, 16.0), rel=1e-12
    )


def test_parts_and_corners_broadcast() -> None:
    corners = Circuit(np.array([[14.0, 16.0]]), 15, 0.5, 0.0, np.array([[5.0], [8.0], [9.0]]))
    impedance = terminal_impedance_ohm(corners, np.array([[16.0], [24.0], [32.0]]))
    assert impedance.shape == (3, 2)
    one = terminal_impedance_ohm(Circuit(16.0, 15, 0.5, 0.0, 8.0), 24.0)
    assert impedance[1, 1] == pytest.approx(complex(one), rel=1e-14)


def test_an_unknown_transconductance_leaves_the_impedance_unknown() -> None:
    assert np.isnan(terminal_impedance_ohm(Circuit(15, 15), 16.0))


@pytest.mark.parametrize("name", CASES)
def test_no_transconductance_drives_harder_than_the_turning_point(name: str) -> None:
    """The reference's optimum transconductance, found by its own search."""
    case = CASES[name]
    circuit, crystal = circuit_of(case["bench"]["circuit"]), case["crystal"]
    turning = float(turning_transconductance_ms(circuit, crystal["frequency_mhz"], crystal["shunt_capacitance_pf"]))
    optimum = case["more"].get("optimum_transconductance_ms")
    if optimum is not None:
        assert turning == pytest.approx(optimum, rel=1e-6)
    factors = np.array([0.5, 0.9, 0.99, 1.0, 1.01, 1.1, 2.0])
    around = replace(circuit, transconductance_ms=turning * factors)
    resistance = terminal_impedance_ohm(around, crystal["frequency_mhz"], crystal["shunt_capacitance_pf"]).real
    assert resistance.argmin() == 3


def test_nothing_across_the_crystal_leaves_the_gain_without_a_turning_point() -> None:
    assert turning_transconductance_ms(Circuit(15, 15), 16.0) == np.inf


def test_every_reference_case_is_here() -> None:
    assert len(CASES) == len(REFERENCE["cases"]) == 33
