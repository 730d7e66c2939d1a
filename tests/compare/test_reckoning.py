"""What review and ranking share: C1 and its routes, the IC's rating, sentences on how numbers were reached."""

import numpy as np
import pytest
from made_sheets import bench, exactly, sheet, usual

from compare.bench import read_bench
from compare.review import review


def reviewed(one, changes=None):
    return review([sheet(one)], bench(changes))["reviews"][0]


def reason(found, about):
    (one,) = [r for r in found["reasons"] if r["about"] == about]
    return one


BASE = (exactly("load_capacitance_pf", 8.0), exactly("shunt_capacitance_pf", 1.5), exactly("esr_ohm", 60.0))
OMEGA = 2 * np.pi * 16e6
L1_MH = (1 + 4.5e-3 / 9.5) / (OMEGA**2 * 4.5e-15) * 1e3

ROUTES = [
    # all of them by hand for C1 = 4.5 fF, C0 = 1.5 pF, CL = 8 pF
    ("motional_capacitance_ff", 4.5, "stated"),
    ("motional_inductance_mh", L1_MH, "derived"),
    ("capacitance_ratio", 1500 / 4.5, "derived"),
    ("pulling_sensitivity_ppm_per_pf", 4.5e-3 / (2 * 9.5**2) * 1e6 / (1 + 4.5e-3 / 9.5), "derived"),
    ("quality_factor", 1 / (OMEGA * 4.5e-15 * 60.0), "derived"),
]


@pytest.mark.parametrize(("field", "value", "basis"), ROUTES)
def test_every_route_leads_to_the_same_c1(field, value, basis):
    found = reviewed(usual(*BASE, exactly(field, value), without=("motional_capacitance_ff",)))
    assert found["motional_capacitance_ff"]["mid"] == pytest.approx(4.5, rel=3e-4)
    assert found["motional_capacitance_ff"]["basis"] == basis
    assert found["load_error_ppm"]["basis"] == "derived"


def test_the_first_route_counts_and_a_second_value_is_a_check():
    twice = usual(*BASE, exactly("motional_capacitance_ff", 4.5), exactly("capacitance_ratio", 200.0))
    found = reviewed(twice)
    assert found["motional_capacitance_ff"]["mid"] == 4.5
    (remark,) = [r for r in found["remarks"] if r["about"] == "capacitance_ratio"]
    assert remark["message"] == "C1 from capacitance_ratio would be 7.5 fF, 67% from the one used: look at the sheet"


def test_values_that_agree_are_not_remarked():
    twice = usual(*BASE, exactly("motional_capacitance_ff", 4.5), exactly("motional_inductance_mh", L1_MH))
    assert reviewed(twice)["remarks"] == []


def test_a_stated_inductance_is_shown_as_stated():
    found = reviewed(usual(*BASE, exactly("motional_inductance_mh", 22.0)))
    assert found["motional_inductance_mh"]["mid"] == 22.0
    assert found["motional_inductance_mh"]["basis"] == "stated"


def test_an_estimate_of_c1_says_what_it_rests_on():
    found = reviewed(usual(without=("motional_capacitance_ff",)))
    number = found["motional_capacitance_ff"]
    assert number["basis"] == "estimated"
    assert number["low"] < number["mid"] < number["high"]
    assert "estimated" in number["how"]


def test_how_names_formula_reading_place_and_value():
    how = reviewed(usual())["load_resonance_resistance_ohm"]["how"]
    assert how == (
        "RL = R1 (1 + C0/CL)²; R1 60 Ω at most, limit used for all ends (page 1), "
        "C0 1.2/1.5/1.8 pF (page 1), CL 7.996 pF"
    )


RATED = {"circuit": {"transconductance_ms": None}}


def with_rating(**rating):
    return {"circuit": {"transconductance_ms": None, "rating": rating}}


def test_a_critical_transconductance_is_a_transconductance_with_its_factor():
    found = reviewed(usual(), with_rating(critical_transconductance_max_ms=1.6, factor_inside=5.0))
    assert found["gain_ratio"]["mid"] == pytest.approx(reviewed(usual())["gain_ratio"]["mid"])
    assert "from the IC's rating, F gm_crit with F 5" in found["margin"]["how"]


def test_an_esr_limit_is_turned_by_the_lossless_form():
    """Gm = F 4 R ω² (CL + C0)²; by hand: 5 · 4 · 100 · ω² · (9 pF + 3 pF)²."""
    gm = 5 * 4 * 100 * OMEGA**2 * 12e-12**2 * 1e3
    asked = {"esr_max_ohm": 100.0, "load_pf": 9.0, "factor_inside": 5.0, "shunt_capacitance_pf": 3.0}
    found = reviewed(usual(), with_rating(**asked))
    assert found["gain_ratio"]["mid"] == pytest.approx(gm / found["critical_transconductance_ms"]["mid"])


def test_an_esr_limit_at_the_load_leaves_c0_out():
    gm = 5 * 4 * 100 * OMEGA**2 * 9e-12**2 * 1e3
    asked = {"esr_max_ohm": 100.0, "load_pf": 9.0, "factor_inside": 5.0, "esr_means": "at load"}
    found = reviewed(usual(), with_rating(**asked))
    assert found["gain_ratio"]["mid"] == pytest.approx(gm / found["critical_transconductance_ms"]["mid"])


def test_without_a_c0_of_its_own_the_rating_takes_the_parts():
    gm = 4 * 100 * OMEGA**2 * 10.5e-12**2 * 1e3
    found = reviewed(usual(), with_rating(esr_max_ohm=100.0, load_pf=9.0))
    assert found["gain_ratio"]["mid"] == pytest.approx(gm / found["critical_transconductance_ms"]["mid"])


def test_a_negative_resistance_is_turned_by_the_lossless_form():
    gm = 600 * OMEGA**2 * 18e-12**2 * 1e3
    found = reviewed(usual(), with_rating(negative_resistance_ohm=-600.0, load_pf=9.0))
    assert found["gain_ratio"]["mid"] == pytest.approx(gm / found["critical_transconductance_ms"]["mid"])


def test_of_a_list_the_row_with_the_least_load_not_below_the_circuits_counts():
    rows = [[10.0, 20.0, 7.0, 200.0], [10.0, 20.0, 9.0, 100.0], [10.0, 20.0, 12.0, 60.0], [20.5, 30.0, 9.0, 50.0]]
    listed = reviewed(usual(), with_rating(esr_max_ohm=rows))
    single = reviewed(usual(), with_rating(esr_max_ohm=100.0, load_pf=9.0))
    assert listed["gain_ratio"]["mid"] == pytest.approx(single["gain_ratio"]["mid"])


def test_a_list_without_a_row_for_this_case_leaves_the_transconductance_not_known():
    found = reviewed(usual(), with_rating(esr_max_ohm=[[10.0, 20.0, 7.0, 200.0]]))
    assert reason(found, "margin")["verdict"] == "cannot tell"
    assert found["missing"] == ["circuit.rating.esr_max_ohm"]


def test_a_rating_without_its_load_is_asked_for():
    found = reviewed(usual(), with_rating(esr_max_ohm=100.0))
    assert found["missing"] == ["circuit.rating.load_pf"]
    assert found["questions"] == [
        "To the IC's maker: at which load capacitance does the rating of the oscillator hold?"
    ]


def test_a_rating_beside_a_transconductance_is_one_more_reason_and_the_worse_counts():
    weak = {"critical_transconductance_max_ms": 0.5}
    found = reviewed(usual(), {"circuit": {"rating": weak}})
    assert reason(found, "rating")["verdict"] == "falls short"
    assert reason(found, "margin")["verdict"] == "meets"
    assert found["verdict"] == "falls short"
    alone = reviewed(usual(), with_rating(**weak))
    gains = ("margin", "gain_ratio", "resistance_headroom")
    assert found["slack"]["rating"] == pytest.approx(min(alone["slack"][key] for key in gains))


def test_the_greatest_transconductance_of_a_rating_is_said_not_to_be_known():
    found = reviewed(usual(), with_rating(critical_transconductance_max_ms=2.0))
    assert "the IC's greatest transconductance is not known" in reason(found, "resistance_headroom")["message"]


def test_defaults_taken_are_told_in_notes():
    at = read_bench("[requirement]\nfrequency_mhz = 16.0\n", "bench.toml")
    assert [note["message"] for note in review([sheet(usual())], at)["notes"]] == list(at.taken)


def test_c0_follows_from_c1_and_their_ratio_where_both_are_stated():
    both = (exactly("motional_capacitance_ff", 4.5), exactly("capacitance_ratio", 1500 / 4.5))
    found = reviewed(usual(*BASE[::2], *both, without=("shunt_capacitance_pf",)))
    assert found["margin"]["mid"] == pytest.approx(reviewed(usual(*BASE, both[0]))["margin"]["mid"])
    assert reason(found, "margin")["estimated"] == []
    assert "C0 1.5 pF = C1 (C0/C1)" in found["margin"]["how"]


def test_l1_is_had_without_a_rated_load():
    found = reviewed(usual(*BASE[1:], exactly("motional_capacitance_ff", 4.5), without=("load_capacitance_pf",)))
    assert found["motional_inductance_mh"]["mid"] == pytest.approx(1 / (OMEGA**2 * 4.5e-15) * 1e3)
    assert found["series_resonance_mhz"]["how"] == "cannot be had: load_capacitance_pf not known"


def test_q_is_an_estimate_without_an_esr():
    """10 000 to 100 000 for common units (a handbook's range)."""
    number = reviewed(usual(without=("esr_ohm",)))["quality_factor"]
    assert (number["low"], number["high"], number["basis"]) == (1e4, 1e5, "estimated")
