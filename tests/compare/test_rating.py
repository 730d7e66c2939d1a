"""The three ways of rating an IC, against the exact analysis and against one another."""

from __future__ import annotations

import numpy as np
import pytest
from reference_loops import CASES, circuit_of, crystal_of

from compare import rating
from compare.circuit import Circuit
from compare.oscillation import Crystal, analyse


def test_a_critical_transconductance_is_multiplied_by_the_factor_inside() -> None:
    """ST AN2867 (2025), Table 6: an IC of 7.5 mS allows a critical 1.5 mS at a factor of five."""
    assert float(rating.from_critical_ms(1.5, 5.0)) == pytest.approx(7.5)


def test_an_esr_limit_is_the_critical_transconductance_of_that_crystal() -> None:
    """Equal capacitors, no losses: the form is exact to first order in R1."""
    part = Crystal(16.0, 9.0, 3.0, 10.0, 100.0)
    exact = float(analyse(Circuit(18.0, 18.0), part)["critical_transconductance_ms"])
    assert float(rating.from_esr_ms(100.0, 16.0, 9.0, 3.0)) == pytest.approx(exact, rel=5e-3)
    assert float(rating.from_esr_ms(100.0, 16.0, 9.0, 3.0, 3.0)) == pytest.approx(3 * exact, rel=5e-3)


def test_an_esr_limit_at_load_leaves_c0_out() -> None:
    """R1 (1 + C0/CL)² w² CL² is R1 w² (CL + C0)²: the same crystal by either meaning."""
    r1, c0, load = 60.0, 3.0, 9.0
    at_load = rating.from_esr_ms(r1 * (1 + c0 / load) ** 2, 16.0, load, c0, esr_means="at load")
    assert float(at_load) == pytest.approx(float(rating.from_esr_ms(r1, 16.0, load, c0)))


def test_a_negative_resistance_is_that_of_the_bare_amplifier() -> None:
    resistance = float(
        analyse(Circuit(18.0, 18.0, 0.0, 0.0, 6.0), Crystal(16.0, 9.0, 1.0, 3.0, 50.0))["negative_resistance_ohm"]
    )
    assert float(rating.from_negative_resistance_ms(resistance, 16.0, 9.0)) == pytest.approx(6.0)
    assert float(rating.from_negative_resistance_ms(-resistance, 16.0, 9.0)) == pytest.approx(6.0)


NINE = ["M02", "M04", "M06", "M07", "M08", "M09", "M11", "M13", "M18"]


@pytest.mark.parametrize("name", NINE)
def test_from_a_circuits_own_negative_resistance_it_errs_to_the_safe_side(name: str) -> None:
    """The contract says 0.69 to 0.97 in nine of the reference circuits: here for equal capacitors at MHz."""
    case = CASES[name]
    circuit, crystal = circuit_of(case["bench"]["circuit"]), crystal_of(case["crystal"])
    found = analyse(circuit, crystal)
    reckoned = rating.from_negative_resistance_ms(
        found["negative_resistance_ohm"], case["crystal"]["frequency_mhz"], found["circuit_load_pf"]
    )
    assert 0.69 < float(reckoned) / float(np.asarray(circuit.transconductance_ms)) < 1.0


ROWS = [(8.0, 16.0, 9.0, 120.0), (8.0, 16.0, 12.0, 80.0), (16.0, 32.0, 9.0, 60.0)]
CHOICES = [
    (12.0, 8.0, (8.0, 16.0, 9.0, 120.0)),
    (12.0, 9.5, (8.0, 16.0, 12.0, 80.0)),
    (16.0, 9.0, (16.0, 32.0, 9.0, 60.0)),
    (12.0, 12.5, None),
    (40.0, 9.0, None),
]


@pytest.mark.parametrize(("frequency", "load", "row"), CHOICES)
def test_the_row_with_the_least_load_not_below_the_circuits(frequency: float, load: float, row: tuple | None) -> None:
    assert rating.list_row(ROWS, frequency, load) == row
