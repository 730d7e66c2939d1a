"""Requirement against number: slack, estimates, limits that are not limits, what is missing and what to ask."""

import re

import numpy as np
import pytest
from made_sheets import bench, reading, sheet, usual

from compare.review import review
from compare.verdict import CANNOT_TELL, decide, ppm_slack, times_over


def reviewed(one, changes=None):
    return review([sheet(one)], bench(changes))["reviews"][0]


def reason(found, about):
    (one,) = [r for r in found["reasons"] if r["about"] == about]
    return one


@pytest.mark.parametrize("key", ["margin", "gain_ratio", "resistance_headroom"])
def test_the_slack_of_a_gain_is_its_low_end_over_the_margin_asked(key):
    found = reviewed(usual(), {"requirement": {"margin": 7.0}})
    assert found["slack"][key] == pytest.approx(found[key]["low"] / 7.0)


def test_the_slack_of_the_drive_is_rated_over_high_times_headroom():
    found = reviewed(usual(), {"requirement": {"drive_headroom": 2.0}})
    assert found["slack"]["drive_level_uw"] == pytest.approx(100.0 / (found["drive_level_uw"]["high"] * 2.0))


def test_the_slack_of_the_start_up_is_asked_over_high():
    found = reviewed(usual())
    assert found["slack"]["startup_ms"] == pytest.approx(10.0 / found["startup_ms"]["high"])


def test_the_slack_of_the_ppm_is_the_lesser_of_both_sides():
    found = reviewed(usual())
    low, high = found["total_ppm"]["low"], found["total_ppm"]["high"]
    assert found["slack"]["total_ppm"] == pytest.approx(min(100.0 / high, 100.0 / -low))


@pytest.mark.parametrize(
    ("low", "high", "slack"),
    [
        (-20.0, 40.0, 1.25),
        (-50.0, 10.0, 1.0),
        (5.0, 25.0, 2.0),  # no low side to speak of
        (-25.0, -5.0, 2.0),  # no high side
        (0.0, 0.0, 999.0),
        (-0.001, 0.001, 999.0),
    ],
)
def test_ppm_slack_by_hand(low, high, slack):
    """Limits of ±50 ppm."""
    assert ppm_slack(np.array(low), np.array(high), (-50.0, 50.0)) == pytest.approx(slack)


def test_slack_is_never_below_zero_and_999_at_most():
    assert list(times_over(np.array([-3.0, 1e9]), 5.0)) == [0.0, 999.0]


def test_a_requirement_that_is_not_asked_has_no_reason():
    changes = {
        "requirement": {"total_ppm": None, "startup_ms": None, "temperature_c": None},
        "circuit": {"swing_v": None},
    }
    found = reviewed(usual(), changes)
    assert [r["about"] for r in found["reasons"]] == ["margin", "gain_ratio", "resistance_headroom"]
    assert list(found["slack"]) == ["margin", "gain_ratio", "resistance_headroom"]


def test_the_drive_is_asked_when_its_headroom_is_given():
    found = reviewed(usual(), {"requirement": {"drive_headroom": 1.0}, "circuit": {"swing_v": None}})
    one = reason(found, "drive_level_uw")
    assert one["verdict"] == "cannot tell"
    assert one["message"] == "cannot be told: circuit.swing_v not known"
    assert found["missing"] == ["circuit.swing_v"]
    assert found["slack"]["drive_level_uw"] is None


def test_a_greater_margin_asked_makes_the_part_fall_short():
    found = reviewed(usual(), {"requirement": {"margin": 25.0}})
    assert reason(found, "resistance_headroom")["verdict"] == "falls short"
    assert reason(found, "margin")["verdict"] == "meets"
    assert found["verdict"] == "falls short"


def test_the_margins_source_is_printed_with_its_verdict():
    found = reviewed(usual(), {"requirement": {"margin": 4.0, "margin_source": "house rule"}})
    assert "4 asked (house rule)" in reason(found, "margin")["message"]


MISSING = [
    ("esr_ohm", "margin"),
    ("load_capacitance_pf", "total_ppm"),
    ("frequency_tolerance_ppm", "total_ppm"),
    ("frequency_stability_ppm", "total_ppm"),
    ("drive_level_uw", "drive_level_uw"),
    ("operating_temperature_c", "operating_temperature_c"),
]


@pytest.mark.parametrize(("field", "about"), MISSING)
def test_a_requirement_short_of_a_reading_is_cannot_tell_with_its_question(field, about):
    found = reviewed(usual(without=(field,)))
    assert reason(found, about)["verdict"] == "cannot tell"
    assert found["slack"][about] is None
    assert field in found["missing"]
    assert len(found["questions"]) == len(found["missing"])
    assert all(question.endswith("?") for question in found["questions"])
    assert found["verdict"] == "cannot tell"


@pytest.mark.parametrize("key", ["input_capacitor_pf", "output_capacitor_pf", "transconductance_ms"])
def test_a_bench_key_that_is_not_known_is_missing_and_asked_for(key):
    found = reviewed(usual(), {"circuit": {key: None}})
    assert f"circuit.{key}" in found["missing"]
    assert reason(found, "margin")["verdict"] == "cannot tell"
    assert found["margin"] == {
        "low": None,
        "mid": None,
        "high": None,
        "how": f"cannot be had: circuit.{key} not known",
        "basis": "derived",
    }


def test_without_a_transconductance_what_does_not_need_it_is_still_had():
    found = reviewed(usual(), {"circuit": {"transconductance_ms": None}})
    assert found["circuit_load_pf"]["mid"] == pytest.approx(8.0, abs=0.02)
    assert reason(found, "drive_level_uw")["verdict"] == "meets"
    assert reason(found, "total_ppm")["verdict"] == "meets"


def test_one_requirement_that_falls_short_settles_it_whatever_cannot_be_told():
    found = reviewed(usual(without=("drive_level_uw",)), {"requirement": {"total_ppm": 5.0}})
    assert found["verdict"] == "falls short"
    assert found["missing"] == ["drive_level_uw"]


def test_a_typical_esr_is_cannot_tell_where_it_would_do_and_falls_short_where_it_does_not():
    found = reviewed(usual(reading("esr_ohm", 60.0)))
    assert reason(found, "margin")["verdict"] == "cannot tell"
    assert "promises nothing" in reason(found, "margin")["message"]
    assert found["slack"]["margin"] is None
    assert "esr_ohm" in found["missing"]
    found = reviewed(usual(reading("esr_ohm", 600.0)))
    assert reason(found, "margin")["verdict"] == "falls short"


def test_a_typical_esr_does_not_touch_what_does_not_rest_on_it():
    found = reviewed(usual(reading("esr_ohm", 60.0)))
    assert reason(found, "total_ppm")["verdict"] == "meets"
    assert reason(found, "operating_temperature_c")["verdict"] == "meets"


def test_a_reading_with_a_check_is_used_and_listed():
    found = reviewed(usual(reading("esr_ohm", max=60.0, check="unit guessed", status="inferred")))
    assert found["to_check"] == ["esr_ohm"]
    assert found["verdict"] == "meets"
    assert "to be looked at" in found["margin"]["how"]


def test_an_estimate_that_settles_nothing_is_cannot_tell_with_its_question():
    """C1 of a part without one: start-up within the interval's reach of what is asked."""
    one = usual(without=("motional_capacitance_ff",))
    wide = reviewed(one)["startup_ms"]
    between = (wide["low"] + wide["high"]) / 2
    found = reviewed(one, {"requirement": {"startup_ms": between}})
    told = reason(found, "startup_ms")
    assert (told["verdict"], told["estimated"]) == ("cannot tell", ["motional_capacitance_ff"])
    assert found["slack"]["startup_ms"] is None
    assert "motional_capacitance_ff" in found["missing"]
    assert "What are the least, typical and greatest motional capacitance C1 of P1 at 16 MHz?" in found["questions"]


def test_an_estimate_decides_where_its_whole_interval_agrees():
    one = usual(without=("motional_capacitance_ff",))
    wide = reviewed(one)["startup_ms"]
    assert wide["basis"] == "estimated"
    enough = reviewed(one, {"requirement": {"startup_ms": wide["high"] * 1.1}})
    assert reason(enough, "startup_ms")["verdict"] == "meets"
    assert reason(enough, "startup_ms")["estimated"] == ["motional_capacitance_ff"]
    short = reviewed(one, {"requirement": {"startup_ms": wide["low"] / 1.1}})
    assert reason(short, "startup_ms")["verdict"] == "falls short"


def test_a_loose_limit_of_c0_is_used_for_margins_and_estimated_low_for_frequency():
    loose = reviewed(usual(reading("shunt_capacitance_pf", max=5.0)))
    exact = reviewed(usual(reading("shunt_capacitance_pf", 5.0, min=5.0, max=5.0)))
    assert loose["margin"]["low"] == exact["margin"]["low"]
    assert loose["drive_level_uw"]["high"] == exact["drive_level_uw"]["high"]
    assert loose["load_error_ppm"]["high"] > exact["load_error_ppm"]["high"] + 10.0
    assert reason(loose, "margin")["estimated"] == []
    assert reason(loose, "total_ppm")["estimated"] == ["shunt_capacitance_pf"]


def test_a_loose_limit_of_c0_leaves_ppm_open_where_only_the_limit_itself_would_do():
    one = usual(reading("shunt_capacitance_pf", max=5.0))
    at_limit = reviewed(usual(reading("shunt_capacitance_pf", 5.0, min=5.0, max=5.0)))["total_ppm"]["high"]
    found = reviewed(one, {"requirement": {"total_ppm": at_limit + 1.0}})
    assert reason(found, "total_ppm")["verdict"] == "cannot tell"
    assert "shunt_capacitance_pf" in found["missing"]


def test_c0_typical_alone_is_used_as_it_stands_and_said():
    found = reviewed(usual(reading("shunt_capacitance_pf", 1.5)))
    assert reason(found, "total_ppm")["estimated"] == []
    assert "typical alone, used as it stands" in found["margin"]["how"]


def test_without_c0_margins_rest_on_an_estimate():
    found = reviewed(usual(without=("shunt_capacitance_pf",)))
    assert reason(found, "margin")["estimated"] == ["shunt_capacitance_pf"]
    assert found["margin"]["basis"] == "estimated"


def test_a_range_that_does_not_hold_the_products_falls_short():
    found = reviewed(usual(reading("operating_temperature_c", min=-20.0, max=70.0)))
    told = reason(found, "operating_temperature_c")
    assert told["verdict"] == "falls short"
    assert told["message"] == "the part's range -20 to 70 °C does not hold the product's -40 to 85 °C"


def test_a_stability_stated_for_less_than_the_products_range_falls_short():
    found = reviewed(usual(reading("frequency_stability_ppm", min=-15.0, max=15.0, temperature_c=(-20.0, 70.0))))
    assert reason(found, "operating_temperature_c")["verdict"] == "falls short"


@pytest.mark.parametrize(
    ("esr", "verdict"),
    [
        ({"min": 20.0, "max": 60.0}, "meets"),
        ({"min": 5.0, "max": 60.0}, "falls short"),
        ({"max": 60.0}, "cannot tell"),
        ({"max": 8.0}, "falls short"),
    ],
)
def test_the_least_esr_that_the_ic_allows(esr, verdict):
    found = reviewed(usual(reading("esr_ohm", **esr)), {"circuit": {"rating": {"esr_min_ohm": 10.0}}})
    assert reason(found, "esr_ohm")["verdict"] == verdict
    if verdict == "cannot tell":
        assert found["missing"] == ["esr_ohm"]
        assert found["questions"] == ["What is the least equivalent series resistance of P1 at 16 MHz?"]


def test_a_greatest_gain_at_the_ics_greatest_transconductance_falls_short():
    """R1 600 Ω: oscillation stops again at Cin Cout/(R1 (C0 + Cx)²) ~ 75 mS, inside the IC's range."""
    one = usual(reading("esr_ohm", max=600.0))
    found = reviewed(one, {"circuit": {"transconductance_ms": [20.0, 200.0]}, "requirement": {"margin": 0.001}})
    told = reason(found, "resistance_headroom")
    assert told["verdict"] == "falls short"
    assert "oscillation stops again above" in told["message"]
    assert found["slack"]["resistance_headroom"] < 1


def test_with_one_transconductance_the_upper_end_is_not_judged_and_said_how_far_off():
    found = reviewed(usual())
    stop = found["greatest_transconductance_ms"]["low"]
    assert (
        f"upper end not judged, one transconductance given: oscillation stops again above {stop:.4g} mS"
        in (reason(found, "resistance_headroom")["message"])
    )


def test_a_series_resistor_without_output_resistance_is_a_finding_without_a_verdict():
    found = reviewed(usual(), {"circuit": {"series_resistor_ohm": 470.0}})
    (finding,) = [r for r in found["reasons"] if r["verdict"] is None]
    assert "its effect on margin cannot be told" in finding["message"]
    given = reviewed(usual(), {"circuit": {"series_resistor_ohm": 470.0, "output_resistance_kohm": 10.0}})
    assert [r for r in given["reasons"] if r["verdict"] is None] == []


def test_room_values_only_is_said_for_a_condition_without_readings_of_its_own():
    cold = {"circuit": {"condition": [{"name": "cold", "temperature_c": -40.0, "transconductance_ms": 5.0}]}}
    found = reviewed(usual(), cold)
    assert "room values only: the sheet states no ESR for cold" in reason(found, "margin")["message"]


def test_the_loosest_option_is_said_to_do_or_not():
    one = usual(reading("frequency_tolerance_ppm", options=(10.0, 30.0)))
    assert "would do too" in reason(reviewed(one), "total_ppm")["message"]
    assert "would not do" in reason(reviewed(one, {"requirement": {"total_ppm": 62.0}}), "total_ppm")["message"]


def test_the_tightest_requirement_is_the_one_with_the_least_slack():
    found = reviewed(usual())
    known = {key: value for key, value in found["slack"].items() if value is not None}
    assert found["tightest"] == min(known, key=known.get)


def test_estimated_ends_are_an_interval_and_stated_ends_the_worst():
    """(part, C0 ends, C1 ends): the slack 0.5 at one C1 and 2 at the other."""
    slack = np.array([[[0.5, 2.0], [0.6, 3.0]]])
    yes, no = np.array([True]), np.array([False])
    assert [float(x[0]) for x in decide(slack, no, no)] == [0.5, 0.5]
    assert [float(x[0]) for x in decide(slack, no, yes)] == [0.5, 2.0]
    assert [float(x[0]) for x in decide(slack, yes, no)] == [0.5, 0.6]
    assert [float(x[0]) for x in decide(slack, yes, yes)] == [0.5, 3.0]
    assert CANNOT_TELL == 1


def test_without_a_transconductance_the_bench_test_is_named_with_the_value_to_reach():
    """(margin - 1) RL: the series resistor with which it must still start."""
    found = reviewed(usual(), {"circuit": {"transconductance_ms": None}})
    resistor = 4.0 * found["load_resonance_resistance_ohm"]["high"]
    assert f"it must still start with {resistor:.3g} Ω put in series" in reason(found, "margin")["message"]


def test_only_readings_that_are_used_ask_for_a_look():
    doubtful = [
        reading("frequency_mhz", 16.0, check="a"),
        reading("drive_level_uw", max=100.0, check="b"),
        reading("turnover_temperature_c", 25.0, check="c"),
        reading("esr_ohm", max=90.0, frequency_mhz=(20.0, 30.0), check="d"),
        reading("esr_ohm", max=60.0),
    ]
    assert reviewed(usual(*doubtful))["to_check"] == ["drive_level_uw", "frequency_mhz"]
    assert reviewed(usual(*doubtful), {"circuit": {"swing_v": None}})["to_check"] == ["frequency_mhz"]


def test_a_reading_that_only_a_condition_takes_asks_for_a_look():
    cold = {"circuit": {"condition": [{"name": "cold", "temperature_c": -40.0}]}}
    frost = reading("esr_ohm", max=70.0, temperature_c=(-40.0, -20.0), check="unit guessed")
    assert reviewed(usual(reading("esr_ohm", max=60.0), frost), cold)["to_check"] == ["esr_ohm"]


HARD_DRIVEN = {"requirement": {"margin": 1.5}, "circuit": {"transconductance_ms": [20.0, 90.0]}}


def test_an_estimate_of_c0_alone_does_not_make_the_gain_too_much():
    """Greatest gm = Cin Cout/(R1 (C0 + Cx)²) without losses: 90 mS lies between its values at both ends of C0."""
    found = reviewed(usual(reading("esr_ohm", max=80.0), without=("shunt_capacitance_pf",)), HARD_DRIVEN)
    stops = found["greatest_transconductance_ms"]
    assert stops["low"] < 90.0 < stops["mid"]
    told = reason(found, "resistance_headroom")
    assert (told["verdict"], told["estimated"]) == ("cannot tell", ["shunt_capacitance_pf"])
    assert found["slack"]["resistance_headroom"] is None
    assert "shunt_capacitance_pf" in found["missing"]


def test_a_stated_c0_makes_the_gain_too_much():
    at_limit = usual(reading("esr_ohm", max=80.0), reading("shunt_capacitance_pf", max=5.0))
    found = reviewed(at_limit, HARD_DRIVEN)
    assert reason(found, "resistance_headroom")["verdict"] == "falls short"
    assert found["slack"]["resistance_headroom"] == pytest.approx(found["resistance_headroom"]["low"] / 1.5)


def test_great_and_small_numbers_are_spelt_out_in_sentences():
    found = reviewed(usual(), {"requirement": {"total_ppm": None, "use": "usb-ls"}, "circuit": {"swing_v": 0.001}})
    assert "against -15000/+15000 ppm (use usb-ls -15000 to +15000)" in reason(found, "total_ppm")["message"]
    assert "0.0000" in reason(found, "drive_level_uw")["message"]
    hows = [number["how"] for number in found.values() if isinstance(number, dict) and "how" in number]
    every = [told["message"] for told in found["reasons"]] + hows
    assert [text for text in every if re.search(r"\de[+-]?\d", text)] == []
