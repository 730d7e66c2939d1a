"""The lean loop of many boards against the reference circuits, which were reckoned outside this project."""

import numpy as np
import pytest
from reference_loops import CASES, circuit_of, crystal_of, swing_of

from compare.boards import Boards, every_board, load_errors_ppm, steady_state
from compare.circuit import Circuit
from compare.oscillation import Crystal, analyse

KEYS = ("margin", "gain_ratio", "resistance_headroom", "greatest_transconductance_ms", "startup_ms", "drive_level_uw")
STARTING = [name for name, case in CASES.items() if case["more"]["oscillates"]]


def lean(circuit, crystal, swing_v=0.4, swing_at="input"):
    boards = Boards.of(circuit, float(np.ravel(crystal.frequency_mhz)[0]))
    found = every_board(boards, crystal, swing_v, swing_at, steady_state(boards, crystal))
    return found | {"load_error_ppm": load_errors_ppm(boards, crystal)}


@pytest.mark.parametrize("name", STARTING)
def test_every_number_of_the_reference_is_met_within_two_thousandths(name):
    case = CASES[name]
    found = lean(circuit_of(case["bench"]["circuit"]), crystal_of(case["crystal"]), *swing_of(case["bench"]["circuit"]))
    for key in KEYS:
        expected = case["expected"][key]
        if expected is not None:
            assert float(found[key]) == pytest.approx(expected, rel=2e-3), key


@pytest.mark.parametrize("name", STARTING)
def test_the_load_error_of_the_reference_is_met_within_a_quarter_of_a_ppm(name):
    case = CASES[name]
    found = lean(circuit_of(case["bench"]["circuit"]), crystal_of(case["crystal"]))
    assert float(found["load_error_ppm"]) == pytest.approx(case["expected"]["load_error_ppm"], abs=0.25)


def test_a_circuit_that_cannot_oscillate_has_no_critical_gain():
    case = CASES["T05"]
    found = lean(circuit_of(case["bench"]["circuit"]), crystal_of(case["crystal"]))
    assert np.isnan(found["gain_ratio"])
    assert np.isnan(found["startup_ms"])
    assert found["resistance_headroom"] < 1


def test_parts_and_boards_cross_like_one_at_a_time():
    rng = np.random.default_rng(5)
    circuit = Circuit(
        12 + rng.random((1, 6)), 14 + rng.random((1, 6)), 0.5, 1.0, 3 + 5 * rng.random((1, 6)), 100.0, 1e3, 20.0
    )
    crystal = Crystal(20.0, 8.0, 1 + rng.random((4, 1)), 3 + rng.random((4, 6)), 30 + 40 * rng.random((4, 6)))
    found, exact = lean(circuit, crystal), analyse(circuit, crystal, 0.4)
    for key in KEYS:
        assert found[key] == pytest.approx(exact[key], rel=2e-3), key


def test_without_a_rated_load_all_but_the_load_error_is_known():
    found = lean(Circuit(14.0, 14.0, 0.5, 0.0, 6.0, 0.0, 1e3), Crystal(20.0, np.nan, 1.2, 4.0, 50.0))
    assert np.isnan(found["load_error_ppm"])
    assert np.isfinite([float(found[key]) for key in KEYS]).all()
