"""All reference circuits, every number, within a fifth of the stated tolerance; corner tables included."""

from __future__ import annotations

import numpy as np
import pytest
from reference_loops import CASES, REFERENCE, circuit_of, corners_of, crystal_of, swing_of

from compare.oscillation import analyse

SHARE = 0.2
"""Of the tolerance: what is left is for the printed digits."""
WITH_CORNERS = [name for name, case in CASES.items() if "corners" in case]
NOT_OF_THE_CONTRACT = {"margin_small_signal_load"}


def allowed(case: dict, key: str, expected: float) -> float:
    tolerance = {**REFERENCE["tolerance"], **case.get("tolerance", {})}[key]
    return SHARE * max(tolerance.get("abs", 0.0), tolerance.get("rel", 0.0) * abs(expected))


@pytest.mark.parametrize("name", CASES)
def test_case(name: str) -> None:
    case = CASES[name]
    keys = case["bench"]["circuit"]
    found = analyse(circuit_of(keys), crystal_of(case["crystal"]), *swing_of(keys))
    for key, expected in case["expected"].items():
        if expected is None:
            assert np.isnan(found[key]), key
        else:
            assert float(found[key]) == pytest.approx(expected, abs=allowed(case, key, expected)), key


SEVEN_DIGITS = (
    "motional_inductance_mh",
    "quality_factor",
    "circuit_load_pf",
    "load_resonance_resistance_ohm",
    "negative_resistance_ohm",
    "margin",
    "resistance_headroom",
    "gain_ratio",
    "critical_transconductance_ms",
    "drive_level_uw",
    "startup_ms",
)
"""The reference is good to 1e-6 and more, and two exact routes have no reason to differ."""


@pytest.mark.parametrize("name", CASES)
def test_exact_numbers_agree_to_seven_digits(name: str) -> None:
    case = CASES[name]
    keys = case["bench"]["circuit"]
    found = analyse(circuit_of(keys), crystal_of(case["crystal"]), *swing_of(keys))
    for key in SEVEN_DIGITS:
        if case["expected"][key] is not None:
            assert float(found[key]) == pytest.approx(case["expected"][key], rel=1e-7), key


@pytest.mark.parametrize("name", [name for name, case in CASES.items() if case["more"].get("output_limited")])
def test_case_with_an_output_that_clips(name: str) -> None:
    case = CASES[name]
    keys = case["bench"]["circuit"]
    found = analyse(circuit_of(keys), crystal_of(case["crystal"]), *swing_of(keys), "output")
    for key, expected in case["more"]["output_limited"].items():
        assert float(found[key]) == pytest.approx(expected, abs=allowed(case, key, expected)), key


@pytest.mark.parametrize("name", WITH_CORNERS)
def test_corner_table(name: str) -> None:
    case = CASES[name]
    circuit, transconductance = corners_of(case)
    swing = swing_of(case["bench"]["circuit"])
    found = analyse(circuit, crystal_of(case["crystal"]), *swing)
    assert transconductance.size == case["corners"]["corners_tried"]
    for key, span in case["corners"]["low_high"].items():
        if key in NOT_OF_THE_CONTRACT:
            continue
        for end, value in (("low", found[key].min()), ("high", found[key].max())):
            assert value == pytest.approx(span[end], abs=allowed(case, key, span[end])), (key, end)


def test_all_cases_at_once_are_the_cases_one_by_one() -> None:
    """Arrays of unlike circuits, 32 kHz and 48 MHz side by side, through the same call."""
    circuits = [circuit_of(case["bench"]["circuit"]) for case in CASES.values()]
    crystals = [crystal_of(case["crystal"]) for case in CASES.values()]
    swings = np.array([swing_of(case["bench"]["circuit"])[0] for case in CASES.values()])
    together = analyse(
        type(circuits[0])(*(np.array(column) for column in zip(*circuits, strict=True))),
        type(crystals[0])(*(np.array(column) for column in zip(*crystals, strict=True))),
        swings,
    )
    for index, (circuit, crystal) in enumerate(zip(circuits, crystals, strict=True)):
        alone = analyse(circuit, crystal, swings[index])
        for key, values in together.items():
            assert values[index] == pytest.approx(float(alone[key]), rel=1e-12, nan_ok=True), key
