"""How numbers were reached: the line with the values put in is worked out again here, by hand or with plain Python."""

import re

import made_sheets
import pytest
from reviewed_parts import dossier_of, part, radio, watch

from compare.answers import FIGURES
from compare.bench import read_bench
from compare.explain import HOW
from compare.working import words, working

UNITS = {"kΩ": 1e3, "Ω": 1, "mS": 1e-3, "µS": 1e-6, "pF": 1e-12, "ppm": 1, "µW": 1e-6}


def value(text):
    """The value of a line such as `−(−1006 Ω) / 43.33 Ω`."""
    plain = text.replace("−", "-").replace("²", "**2")
    for unit, factor in UNITS.items():
        plain = re.sub(rf"([\d.]+) {unit}", rf"(\1*{factor})", plain)
    plain = re.sub(r"(\)) \(1", r"\1*(1", plain)
    return eval(plain, {"__builtins__": {}})  # noqa: S307


def test_every_number_of_the_review_has_its_words():
    assert set(words()) == set(HOW)
    for key, row in words().items():
        assert row["formula"], key
        assert row["assumes"].endswith("."), key


@pytest.mark.parametrize("dossier", [radio, watch])
@pytest.mark.parametrize("key", ["margin", "gain_ratio", "resistance_headroom", "allowed_esr_ohm"])
def test_the_values_put_in_give_the_result(dossier, key):
    left, _, right = working(dossier(), key).put_in.partition(" = ")
    assert value(left) == pytest.approx(value(right), rel=2e-3)
    assert value(right) == pytest.approx(dossier().review[key]["mid"] * 1.0, rel=2e-3)


def test_the_resistance_at_the_load_comes_out_of_its_line():
    left, _, right = working(radio(), "load_resonance_resistance_ohm").put_in.partition(" = ")
    assert value(left) == pytest.approx(value(right), rel=2e-3)


def test_each_value_has_its_place_on_the_sheet():
    rows = {one.name: one for one in working(radio(), "margin").inputs}
    assert (rows["ESR R1"].value, rows["ESR R1"].source) == ("28…50 Ω", "stated p.1")
    assert rows["Capacitance A–0"].value == "12 + 2.6 pF"
    assert rows["Capacitance A–0"].source == "circuit: fitted ±1 %, stray ±15 %"


def test_every_condition_with_its_own_gain_is_shown():
    rows = [one for one in working(radio(), "gain_ratio").inputs if one.name == "Transconductance"]
    assert [(one.value, one.source) for one in rows] == [
        ("4.6…9 mS", "circuit"),
        ("3.6 mS", "circuit, frost, weak battery"),
    ]


def test_the_budget_is_shown_cause_by_cause_and_adds_up():
    rows = {one.name: one for one in working(radio(), "total_ppm").inputs}
    assert rows["Make"].value == "±10 ppm"
    assert rows["Temperature"].value == "±12 ppm"
    assert "by the linear rule 10" in rows["Ageing"].source


def test_an_estimate_is_called_one_and_says_what_it_rests_on():
    silent = dossier_of(part(without=("motional_capacitance_ff", "shunt_capacitance_pf")))
    rows = {one.name: one for one in working(silent, "load_error_ppm").inputs}
    assert rows["Motional C1"].source.startswith("∴ estimated: ")
    assert rows["Shunt C0"].source.startswith("∴ estimated: ")


def test_a_value_worked_out_from_another_names_both():
    ratio = dossier_of(part(made_sheets.reading("capacitance_ratio", 350.0), without=("motional_capacitance_ff",)))
    (row,) = [one for one in working(ratio, "motional_capacitance_ff").inputs if one.name == "Motional C1"]
    assert row.source.startswith("∴ from C0/C1 350")


def test_which_input_would_turn_the_verdict_is_said():
    said = working(radio(), "margin").turns
    assert said.startswith("The verdict would turn if the ESR rose above ")
    assert " or the IC’s gm fell below " in said
    assert working(radio(), "series_resonance_mhz").turns == ""


def test_a_number_that_cannot_be_had_says_so_and_why():
    bare = dossier_of(part(), read_bench("[requirement]\nfrequency_mhz = 26.0\n", "bare.toml"))
    told = working(bare, "margin")
    assert told.result == "there is none"
    assert told.put_in == ""
    assert told.how.startswith("cannot be had")


def test_what_is_shown_has_a_name():
    assert all(working(radio(), key).name == FIGURES[key].name for key in words())
