"""Worst case: corners, conditions, limiters, turning points; and how the crystal's own readings are read."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from made_sheets import CASES, bench, case_sheet, exactly, reading, sheet, usual

from compare.corners import Nodes, lossless_load_pf
from compare.review import review

KEYS = (
    "margin",
    "gain_ratio",
    "resistance_headroom",
    "load_error_ppm",
    "drive_level_uw",
    "startup_ms",
    "circuit_load_pf",
)


def reviewed(one, changes=None):
    return review([sheet(one)], bench(changes))["reviews"][0]


EXACT = usual(
    exactly("load_capacitance_pf", 8.0),
    exactly("esr_ohm", 60.0),
    exactly("shunt_capacitance_pf", 1.5),
    exactly("motional_capacitance_ff", 4.5),
)


def circuit(**keys):
    return {"circuit": keys}


def test_nodes_are_the_sums_of_what_stands_there_each_at_its_own_tolerance():
    keys = bench(circuit(internal_pf=4.0)).settings[0].circuit
    nodes = Nodes.of(keys)
    assert nodes.input_pf == pytest.approx((12 * 0.95 + 3 * 0.7 + 4 * 0.9, 19.0, 12 * 1.05 + 3 * 1.3 + 4 * 1.1))
    assert nodes.across_pf == pytest.approx((0.35, 0.5, 0.65))


def test_with_a_series_resistor_the_output_capacitor_inside_lies_ahead_of_it():
    keys = bench(circuit(internal_pf=4.0, series_resistor_ohm=100.0)).settings[0].circuit
    nodes = Nodes.of(keys)
    assert (nodes.output_pf[1], nodes.amplifier_output_pf[1]) == (15.0, 4.0)
    assert lossless_load_pf(keys) == pytest.approx(19 * 15 / 34 + 0.5)


def test_without_tolerances_the_ends_meet():
    changes = circuit(capacitor_tolerance_percent=0.0, stray_tolerance_percent=0.0)
    found = reviewed(EXACT, changes)
    for key in KEYS:
        assert found[key]["low"] == pytest.approx(found[key]["mid"], rel=1e-9), key
        assert found[key]["high"] == pytest.approx(found[key]["mid"], rel=1e-9), key


def test_a_stray_that_was_taken_has_a_wider_spread_than_one_given():
    taken = reviewed(EXACT, circuit(input_stray_pf=None))
    given_ = reviewed(EXACT)
    assert taken["circuit_load_pf"]["high"] > given_["circuit_load_pf"]["high"] + 0.1


def test_a_condition_is_one_more_corner_with_the_other_keys_as_in_the_circuit():
    cold = {"condition": [{"name": "cold", "temperature_c": -40.0, "transconductance_ms": 5.0}]}
    found, plain = reviewed(EXACT, {"circuit": cold}), reviewed(EXACT)
    at5 = reviewed(EXACT, circuit(transconductance_ms=5.0))
    assert found["margin"]["low"] == pytest.approx(at5["margin"]["low"])
    assert found["margin"]["high"] == pytest.approx(plain["margin"]["high"])
    assert found["margin"]["mid"] == pytest.approx(plain["margin"]["mid"])


def test_a_condition_may_stand_for_another_swing():
    loud = {"condition": [{"name": "high supply", "swing_v": 1.6}]}
    found = reviewed(EXACT, {"circuit": loud})
    assert found["drive_level_uw"]["high"] == pytest.approx(4 * reviewed(EXACT)["drive_level_uw"]["high"])


def test_a_range_of_transconductance_has_its_geometric_mean_as_nominal():
    found = reviewed(EXACT, circuit(transconductance_ms=[4.0, 16.0]))
    assert found["gain_ratio"]["mid"] == pytest.approx(reviewed(EXACT)["gain_ratio"]["mid"])


def test_the_best_headroom_inside_a_range_of_transconductance_is_found():
    """M06: the best headroom, 32.63, lies at 14.24 mS (exact analysis, `more` of the case)."""
    case = CASES["M06"]
    none = {"capacitor_tolerance_percent": 0.0, "stray_tolerance_percent": 0.0}
    changes = {
        "circuit": case["bench"]["circuit"]
        | none
        | {"transconductance_ms": [5.0, 50.0], "output_resistance_kohm": None}
    }
    found = review([case_sheet(case)], bench(changes))["reviews"][0]
    assert found["resistance_headroom"]["high"] == pytest.approx(case["more"]["best_resistance_headroom"], rel=1e-4)


@pytest.mark.parametrize("name", ["M06", "T02", "M22"])
def test_where_the_output_limits_the_load_error_is_the_output_limited_one(name):
    """`output_limited` of the reference cases: load falls and frequency rises where the output clips."""
    case = CASES[name]
    keys = {k: v for k, v in case["bench"]["circuit"].items() if v != "inf"}
    asked = {"frequency_mhz": case["crystal"]["frequency_mhz"]}
    changes = {"requirement": asked, "circuit": keys | {"limiter": "output", "output_resistance_kohm": None}}
    found = review([case_sheet(case)], bench(changes))["reviews"][0]
    assert found["load_error_ppm"]["mid"] == pytest.approx(case["more"]["output_limited"]["load_error_ppm"], abs=1.0)


def test_an_unknown_limiter_spans_both():
    both = reviewed(EXACT, circuit(limiter="unknown"))
    gm, output = reviewed(EXACT), reviewed(EXACT, circuit(limiter="output"))
    assert both["load_error_ppm"]["low"] == pytest.approx(gm["load_error_ppm"]["low"])
    assert both["load_error_ppm"]["high"] == pytest.approx(output["load_error_ppm"]["high"])
    assert both["load_error_ppm"]["mid"] == pytest.approx(gm["load_error_ppm"]["mid"])


def test_a_probe_counts_for_the_drive_alone():
    probed, plain = reviewed(EXACT, circuit(probe_pf=8.0)), reviewed(EXACT)
    assert probed["drive_level_uw"]["mid"] > 1.5 * plain["drive_level_uw"]["mid"]
    assert probed["margin"] == plain["margin"]
    assert probed["load_error_ppm"] == plain["load_error_ppm"]


def test_a_corner_that_does_not_start_leaves_the_start_up_without_bound():
    found = reviewed(EXACT, circuit(transconductance_ms=[0.2, 8.0]))
    assert found["startup_ms"]["high"] is None
    assert found["startup_ms"]["low"] is not None
    assert found["slack"]["startup_ms"] == 0.0


def test_a_corner_that_cannot_oscillate_leaves_the_transconductance_limits_without_bound():
    """C0 7 pF and R1 1/(2 ω C0) = 710 Ω: no circuit of this kind drives more (README of published values)."""
    one = usual(exactly("shunt_capacitance_pf", 7.0), reading("esr_ohm", 200.0, max=900.0))
    found = reviewed(one)
    assert found["critical_transconductance_ms"]["mid"] is not None
    assert found["critical_transconductance_ms"]["high"] is None
    assert found["greatest_transconductance_ms"]["low"] is None
    assert found["gain_ratio"]["low"] is None
    assert found["slack"]["gain_ratio"] == 0.0


def test_an_esr_at_the_load_is_turned_into_the_motional_one():
    """R1 = 60/(1 + 1.5/8)² = 42.55 Ω; by hand."""
    at_load = reviewed(EXACT, {"crystal": {"esr_means": "at load"}})
    by_hand = usual(*[r for r in EXACT.readings if r.field != "esr_ohm"], exactly("esr_ohm", 60 / (1 + 1.5 / 8) ** 2))
    assert at_load["margin"]["mid"] == pytest.approx(reviewed(by_hand)["margin"]["mid"])
    assert 'crystal.esr_means "at load"' in at_load["margin"]["how"]


def test_a_series_resistor_added_to_the_esr_is_out_of_the_circuit():
    rule = {"crystal": {"series_resistor_rule": "add to ESR"}}
    added = reviewed(EXACT, rule | circuit(series_resistor_ohm=40.0))
    by_hand = usual(*[r for r in EXACT.readings if r.field != "esr_ohm"], exactly("esr_ohm", 100.0))
    assert added["margin"]["mid"] == pytest.approx(reviewed(by_hand)["margin"]["mid"])
    assert "plus the series resistor 40 Ω as ESR" in added["margin"]["how"]


@settings(max_examples=30, deadline=None)
@given(st.lists(st.floats(-1, 1), min_size=7, max_size=7), st.floats(6.0, 11.0))
def test_no_point_inside_the_tolerances_falls_outside_the_corners(signs, gm):
    from compare.circuit import Circuit
    from compare.oscillation import Crystal, analyse

    found = reviewed(usual(reading("esr_ohm", 40.0, min=30.0, max=60.0)), circuit(transconductance_ms=[6.0, 11.0]))
    at = [1 + s * part for s, part in zip(signs, (0.05, 0.05, 0.3, 0.3, 0.3, 0.2, 0.2), strict=True)]
    inside = Circuit(12 * at[0] + 3 * at[2], 12 * at[1] + 3 * at[3], 0.5 * at[4], 0.0, gm, 0.0, 1000.0, np.inf)
    got = analyse(inside, Crystal(16.0, 8.0, 1.5 * at[5], 4.5 * at[6], 45.0 + 15.0 * signs[0]), 0.4, "input")
    for key in KEYS:
        value, slip = float(got[key]), 1e-9 * abs(float(got[key]))
        assert found[key]["low"] - slip <= value <= found[key]["high"] + slip, key


def test_an_end_without_bound_says_why():
    found = reviewed(EXACT, circuit(transconductance_ms=[0.2, 8.0]))
    assert found["startup_ms"]["how"].endswith("one end without bound: some corner does not start")


def test_a_circuit_that_cannot_oscillate_says_so():
    """T09 and M23 of the reference circuits start at no nominal gain; here R1 is far past 1/(2 ω C0) = 3.3 kΩ."""
    found = reviewed(usual(exactly("esr_ohm", 20000.0)))
    assert found["critical_transconductance_ms"]["how"].startswith("there is none: the circuit cannot oscillate")
    assert found["startup_ms"]["how"].startswith("there is none: it does not start")
    assert [found["slack"][key] for key in ("gain_ratio", "startup_ms")] == [0.0, 0.0]
    assert found["verdict"] == "falls short"
