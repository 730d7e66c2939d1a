"""A part in its circuit from sheet to verdict, against reference circuits that were solved outside this project."""

import pytest
from made_sheets import CASES, REFERENCE, bench, case_bench, case_sheet, sheet, usual

from compare.review import review

CORNER_CASES = [name for name, case in CASES.items() if "corners" in case]
IN_CORNERS = (
    "load_error_ppm",
    "drive_level_uw",
    "circuit_load_pf",
    "load_resonance_resistance_ohm",
    "critical_transconductance_ms",
    "greatest_transconductance_ms",
    "negative_resistance_ohm",
    "margin",
    "resistance_headroom",
)


def reviewed(one, at_bench=None):
    found = review([sheet(one)], at_bench or bench())
    assert len(found["reviews"]) == 1
    return found["reviews"][0]


def tolerance(case, key, value):
    rule = REFERENCE["tolerance"][key] | case.get("tolerance", {}).get(key, {})
    return max(rule.get("abs", 0.0), rule.get("rel", 0.0) * abs(value))


@pytest.mark.parametrize("name", CASES)
def test_every_number_of_a_reference_circuit_is_met_through_bench_and_sheet(name):
    """`expected` is by exact analysis with 50 digits, confirmed with ngspice; made outside this project."""
    case = CASES[name]
    found = review([case_sheet(case)], case_bench(case))["reviews"][0]
    for key, value in case["expected"].items():
        if not case["more"]["oscillates"] and key in ("drive_level_uw", "load_error_ppm", "trim_ppm_per_pf"):
            continue
        mid = found[key]["mid"]
        if value is None:
            assert mid is None, key
        else:
            assert mid == pytest.approx(value, abs=tolerance(case, key, value)), key


@pytest.mark.parametrize("name", CORNER_CASES)
def test_the_worst_case_of_a_reference_circuit_is_its_range_over_all_tolerances(name):
    """`low_high` is the true range over capacitors, strays and transconductance, each independent."""
    case = CASES[name]
    at = case_bench(
        case,
        transconductance_ms=case["corners"]["transconductance_ms"],
        capacitor_tolerance_percent=case["corners"]["capacitor_tolerance_percent"],
        stray_tolerance_percent=case["corners"]["stray_tolerance_percent"],
    )
    found = review([case_sheet(case)], at)["reviews"][0]
    for key in IN_CORNERS:
        for end in ("low", "high"):
            value = case["corners"]["low_high"][key][end]
            assert found[key][end] == pytest.approx(value, abs=tolerance(case, key, value)), (key, end)


def test_a_part_with_all_readings_in_a_sound_circuit_meets():
    found = reviewed(usual())
    assert found["verdict"] == "meets"
    assert found["missing"] == []
    assert found["questions"] == []
    assert found["to_check"] == []


@pytest.mark.parametrize("field", ["frequency_tolerance_ppm", "frequency_stability_ppm"])
def test_a_total_that_lacks_a_term_says_which_reading_is_missing(field):
    (found,) = review([sheet(usual(without=(field,)))], bench())["reviews"]
    assert found["total_ppm"]["mid"] is None
    assert found["total_ppm"]["how"] == f"cannot be had: {field} not known"


def test_the_series_resonance_of_a_series_part_rests_on_no_estimate():
    """It is the frequency stated, whatever C1 and C0 are."""
    series = usual(resonance="series", without=("load_capacitance_pf", "motional_capacitance_ff"))
    found = review([sheet(series)], bench())["reviews"][0]
    assert found["series_resonance_mhz"]["basis"] == "derived"
    assert found["series_resonance_mhz"]["mid"] == 16.0
    assert found["load_error_ppm"]["basis"] == "estimated"
