"""Each cure is put into a bench or a part by hand and reviewed anew: at its value it meets, a hundredth beyond not."""

import json

import pytest
from made_sheets import bench, exactly, reading, sheet, usual

from compare.cures import cures, gain_window_ms, gain_window_words
from compare.reckoning import reckon_sheets
from compare.review import review

WEAK = {"circuit": {"transconductance_ms": [1.0, 2.0]}}
WIDE = usual(reading("frequency_tolerance_ppm", min=-30.0, max=30.0), reading("esr_ohm", max=60.0))
TIGHT = {"requirement": {"total_ppm": 70.0}}
DRIVEN = {"circuit": {"swing_v": 4.0}}


def told(part, changes):
    return {cure.what: cure for cure in cures(reckon_sheets([sheet(part)], bench(changes)), 0)}


def verdicts(part, changes):
    found = review([sheet(part)], bench(changes))["reviews"][0]
    return {reason["about"]: reason["verdict"] for reason in found["reasons"]}


def both_sides(value, further):
    """The cure's own value, a thousandth on the good side, and a hundredth on the bad one."""
    return value * (1 + 0.001 * further), value * (1 - 0.01 * further)


def test_a_part_that_meets_needs_no_cure():
    assert cures(reckon_sheets([sheet(usual())], bench()), 0) == []


def test_the_transconductance_named_is_the_least_that_meets():
    cure = told(usual(), WEAK)["transconductance"]
    assert (cure.high, cure.unit) == (None, "mS")
    assert set(cure.turns) <= {"margin", "gain_ratio", "resistance_headroom", "startup_ms"}
    for nominal, verdict in zip(both_sides(cure.low, 1), ("meets", "falls short"), strict=True):
        ends = [nominal / 2**0.5, nominal * 2**0.5]
        found = verdicts(usual(), {"circuit": {"transconductance_ms": ends}})
        assert {found[name] for name in ("margin", "gain_ratio", "resistance_headroom")} >= {verdict}
        assert (verdict == "meets") == all(found[name] == "meets" for name in cure.turns)


def test_conditions_move_with_the_transconductance():
    """The cold corner has half the gain: what it needs stands twice as high in the sentence's own value."""
    plain = told(usual(), {"circuit": {"transconductance_ms": 1.0}})["transconductance"]
    cold = {"name": "cold", "transconductance_ms": 0.5}
    with_cold = told(usual(), {"circuit": {"transconductance_ms": 1.0, "condition": [cold]}})["transconductance"]
    assert with_cold.low == pytest.approx(2 * plain.low, rel=2e-3)


def test_too_much_gain_is_cured_by_less():
    """C0 7 pF and 60 Ω: greatest gain 139 times the critical (reference circuits, section 5)."""
    heavy = usual(
        exactly("esr_ohm", 60.0), exactly("shunt_capacitance_pf", 7.0), exactly("motional_capacitance_ff", 4.5)
    )
    changes = {"requirement": {"margin": 3.0}, "circuit": {"transconductance_ms": [30.0, 90.0], "swing_v": None}}
    cure = told(heavy, changes)["transconductance"]
    assert cure.low is None
    assert "at most" in cure.message
    for nominal, verdict in zip(both_sides(cure.high, -1), ("meets", "falls short"), strict=True):
        ends = [nominal / 3**0.5, nominal * 3**0.5]
        found = verdicts(heavy, changes | {"circuit": changes["circuit"] | {"transconductance_ms": ends}})
        assert found["resistance_headroom"] == verdict


def test_the_esr_named_is_the_greatest_that_meets():
    cure = told(usual(), WEAK)["ESR"]
    for ohm, verdict in zip(both_sides(cure.high, -1), ("meets", "falls short"), strict=True):
        found = verdicts(usual(reading("esr_ohm", max=ohm)), WEAK)
        assert (verdict == "meets") == all(found[name] == "meets" for name in cure.turns)


def test_the_make_tolerance_named_is_the_widest_that_meets():
    cure = told(WIDE, TIGHT)["make tolerance"]
    assert cure.low == -cure.high
    for size, verdict in zip(both_sides(cure.high, -1), ("meets", "falls short"), strict=True):
        tighter = usual(reading("frequency_tolerance_ppm", min=-size, max=size))
        assert verdicts(tighter, TIGHT)["total_ppm"] == verdict


def test_the_trim_named_is_the_widest_that_meets():
    cure = told(WIDE, TIGHT)["trim"]
    for step, verdict in zip(both_sides(cure.high, -1), ("meets", "falls short"), strict=True):
        assert verdicts(WIDE, {"requirement": TIGHT["requirement"] | {"trim_step_ppm": step}})["total_ppm"] == verdict


def test_a_part_rated_for_the_circuits_load_is_named_where_that_is_enough():
    """Rated for 12 pF in a circuit of 8 pF: some 130 ppm high; rated for what the circuit presents it meets."""
    part = usual(reading("load_capacitance_pf", 12.0))
    cure = told(part, {})["rated load"]
    assert cure.low == cure.high == pytest.approx(8.0, abs=0.01)
    assert verdicts(usual(reading("load_capacitance_pf", cure.low)), {})["total_ppm"] == "meets"


def test_the_swing_named_is_the_greatest_that_meets():
    cure = told(usual(), DRIVEN)["swing"]
    assert "peak to peak at the input end" in cure.message
    for volts, verdict in zip(both_sides(cure.high, -1), ("meets", "falls short"), strict=True):
        assert verdicts(usual(), {"circuit": {"swing_v": volts}})["drive_level_uw"] == verdict


def test_tighter_capacitors_are_named_where_they_are_enough():
    loose = {"circuit": {"capacitor_tolerance_percent": 20.0}, "requirement": {"total_ppm": 62.0}}
    assert verdicts(usual(), loose)["total_ppm"] == "falls short"
    cure = told(usual(), loose)["capacitor tolerance"]
    tighter = loose | {"circuit": {"capacitor_tolerance_percent": cure.high}}
    assert verdicts(usual(), tighter)["total_ppm"] == "meets"


def test_a_cure_says_whether_the_part_then_meets_all_that_is_asked():
    alone = told(usual(), DRIVEN)["swing"]
    assert alone.meets_all
    assert alone.message.endswith("and all that is asked")
    with_more = told(WIDE, DRIVEN | TIGHT)["swing"]
    assert not with_more.meets_all


def test_where_no_change_will_do_nothing_is_named():
    """A limit below the stability and the ageing alone: no load, trim or tolerance meets it."""
    assert told(usual(), {"requirement": {"total_ppm": 16.0}}) == {}


def test_every_cure_can_be_written_as_json():
    found = cures(reckon_sheets([sheet(WIDE)], bench(WEAK | TIGHT)), 0)
    json.dumps([cure.as_dict() for cure in found], allow_nan=False)
    assert len(found) >= 3


def test_the_window_of_gain_holds_what_meets_and_no_more():
    low, high = gain_window_ms(reckon_sheets([sheet(usual())], bench()), 0)
    assert low < 8.0 < high
    for value, verdict in zip(both_sides(low, 1), ("meets", "falls short"), strict=True):
        found = verdicts(usual(), {"circuit": {"transconductance_ms": value}})
        gains = [found[name] for name in ("margin", "gain_ratio", "resistance_headroom", "startup_ms")]
        assert (verdict == "meets") == all(one == "meets" for one in gains)


def test_without_a_transconductance_there_is_no_window():
    rating = {"critical_transconductance_max_ms": 0.4, "factor_inside": 5.0}
    asked = bench({"circuit": {"transconductance_ms": None, "rating": rating}})
    assert gain_window_ms(reckon_sheets([sheet(usual())], asked), 0) is None


def test_the_window_is_told_with_the_benchs_own_transconductance():
    said = gain_window_words(reckon_sheets([sheet(usual())], bench()), 0)
    assert said.startswith(
        "margin, gain ratio, resistance headroom and start-up time are met with a nominal transconductance"
    )
    assert said.endswith("(the bench gives 8 mS)")
    hopeless = usual(exactly("esr_ohm", 5e4))
    assert "no transconductance" in gain_window_words(reckon_sheets([sheet(hopeless)], bench()), 0)
