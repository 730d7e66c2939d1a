"""Advice: each pair and resistor is what the bench would say with it fitted."""

import pytest
from made_sheets import bench, reading, sheet, usual

from compare.review import review

E24 = {10, 11, 12, 13, 15, 16, 18, 20, 22, 24, 27, 30, 33, 36, 39, 43, 47, 51, 56, 62, 68, 75, 82, 91}  # IEC 60063


def reviewed(one, changes=None):
    return review([sheet(one)], bench(changes))["reviews"][0]


OFF = usual(reading("load_capacitance_pf", 9.0))
LOOSE = usual(reading("load_capacitance_pf", 9.0), reading("shunt_capacitance_pf", max=1.8))
LOUD = {"circuit": {"swing_v": 3.0}}


def capacitors(found):
    return [one for one in found["advice"] if one["what"] == "load capacitors"]


def test_pairs_are_of_the_e24_series_and_best_first():
    pairs = capacitors(reviewed(OFF))
    assert len(pairs) >= 3
    assert all(round(value * 10) in E24 or round(value) in E24 for pair in pairs for value in pair["values_pf"])
    errors = [abs(pair["load_error_ppm"]) for pair in pairs]
    assert errors == sorted(errors)


@pytest.mark.parametrize("one", [OFF, LOOSE], ids=["everything stated", "C0 only a limit, its low end an estimate"])
def test_a_pair_fitted_gives_the_numbers_that_the_advice_gave(one):
    pairs = capacitors(reviewed(one))[:3]
    assert pairs
    for pair in pairs:
        c_in, c_out = pair["values_pf"]
        fitted = reviewed(one, {"circuit": {"input_capacitor_pf": c_in, "output_capacitor_pf": c_out}})
        error = max(abs(fitted["load_error_ppm"]["low"]), abs(fitted["load_error_ppm"]["high"]))
        assert abs(pair["load_error_ppm"]) == pytest.approx(error, rel=1e-6)
        assert pair["margin"] == pytest.approx(fitted["margin"]["low"], rel=1e-6)
        assert fitted["verdict"] == "meets"


def test_the_best_pair_is_better_than_the_one_fitted():
    found = reviewed(OFF)
    fitted = max(abs(found["load_error_ppm"]["low"]), abs(found["load_error_ppm"]["high"]))
    assert abs(capacitors(found)[0]["load_error_ppm"]) < fitted


def test_unequal_pairs_are_among_them():
    assert any(pair["values_pf"][0] != pair["values_pf"][1] for pair in capacitors(reviewed(OFF)))


def test_capacitors_that_are_not_known_are_advised_all_the_same():
    found = reviewed(OFF, {"circuit": {"input_capacitor_pf": None, "output_capacitor_pf": None}})
    assert capacitors(found)


def test_where_no_pair_meets_the_list_is_empty_and_a_sentence_says_so():
    found = reviewed(OFF, {"requirement": {"total_ppm": 20.0}})
    assert capacitors(found) == []
    assert found["advice_messages"][0].startswith("No pair of E24 load capacitors meets the bench")


def test_a_drive_above_its_rating_gets_a_series_resistor_with_the_margin_it_leaves():
    found = reviewed(usual(), LOUD)
    (resistor,) = [one for one in found["advice"] if one["what"] == "series resistor"]
    assert resistor["drive_level_uw"] <= 100.0
    assert resistor["margin"] == pytest.approx(
        reviewed(usual(), {"circuit": {"series_resistor_ohm": resistor["series_resistor_ohm"]}})["margin"]["low"],
        rel=1e-6,
    )


def test_a_drive_within_its_rating_gets_no_series_resistor():
    assert [one for one in reviewed(usual())["advice"] if one["what"] == "series resistor"] == []


def test_without_an_esr_there_is_no_advice_and_a_sentence():
    found = reviewed(usual(without=("esr_ohm",)))
    assert found["advice"] == []
    assert found["advice_messages"] == ["No advice on capacitors: the sheet states no ESR."]
