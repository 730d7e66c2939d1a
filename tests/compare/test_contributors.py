"""What the worst case hangs on: one input at a time, the greatest first."""

import pytest
from made_sheets import bench, exactly, reading, sheet, usual

from compare.review import review


def contributors(one, changes=None):
    return review([sheet(one)], bench(changes))["reviews"][0]["contributors"]


def test_inputs_are_in_order_of_what_they_add():
    for listed in contributors(usual()).values():
        adds = [one["adds"] for one in listed]
        assert adds == sorted(adds, reverse=True)
        assert all(value > 0 for value in adds)


def test_the_terms_of_the_budget_are_told_by_their_own_size():
    listed = {one["input"]: one["adds"] for one in contributors(usual())["total_ppm"]}
    assert listed["frequency_stability_ppm"] == 15.0
    assert listed["frequency_tolerance_ppm"] == 10.0
    assert listed["ageing_ppm"] == pytest.approx(2.358, abs=0.001)


def test_what_has_no_spread_is_not_among_them():
    exact = usual(exactly("shunt_capacitance_pf", 1.5), exactly("motional_capacitance_ff", 4.5))
    names = {one["input"] for one in contributors(exact)["margin"]}
    assert "shunt_capacitance_pf" not in names
    assert "circuit.transconductance_ms" not in names
    assert "circuit.across_stray_pf" in names


def test_a_wide_transconductance_leads_the_margins_list():
    first = contributors(usual(), {"circuit": {"transconductance_ms": [4.0, 16.0]}})["margin"][0]
    assert first["input"] == "circuit.transconductance_ms"
    assert first["message"].startswith("circuit.transconductance_ms takes ")


def test_a_condition_is_told_by_its_name():
    cold = {"circuit": {"condition": [{"name": "cold", "transconductance_ms": 2.0}]}}
    assert contributors(usual(), cold)["margin"][0]["input"] == "condition cold"


def test_an_esr_above_its_typical_value_takes_margin():
    listed = contributors(usual(reading("esr_ohm", 30.0, max=60.0)))["margin"]
    assert listed[0]["input"] == "esr_ohm"
