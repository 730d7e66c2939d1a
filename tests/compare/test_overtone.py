"""Overtone parts are judged with their fundamental in the same circuit."""

import pytest
from made_sheets import CASES, bench, case_bench, case_sheet, exactly, reading, sheet, usual

from compare.review import review

O01 = CASES["O01"]
ASKED = {"requirement": {"frequency_mhz": 48.0, "startup_ms": None}}


def reason(found, about="mode"):
    (one,) = [r for r in found["reasons"] if r["about"] == about]
    return one


def third(*changed, **identity):
    stated = [
        exactly("frequency_mhz", 48.0),
        exactly("load_capacitance_pf", 10.0),
        exactly("shunt_capacitance_pf", 4.0),
        exactly("motional_capacitance_ff", 0.6),
        exactly("esr_ohm", 60.0),
    ]
    kept = {r.field: r for r in stated} | {r.field: r for r in changed}
    return usual(*kept.values(), **({"mode": "third overtone"} | identity))


def reviewed(one, **circuit):
    plain = {"transconductance_ms": 14.0, "input_stray_pf": 4.0, "output_stray_pf": 4.0, "across_stray_pf": 0.6}
    return review([sheet(one)], bench(ASKED | {"circuit": plain | circuit}))["reviews"][0]


def test_a_third_overtone_in_a_plain_circuit_falls_short():
    """Case O01: the fundamental at f/3 has a headroom of 20 against 3.2 and grows 4.5 times as fast."""
    found = review([case_sheet(O01)], case_bench(O01))["reviews"][0]
    told = reason(found)
    assert told["verdict"] == "falls short"
    assert "its fundamental grows faster" in told["message"]
    assert found["verdict"] == "falls short"


def test_a_feedback_resistor_of_a_few_kilohm_lets_the_overtone_run_alone():
    """README of the reference circuits, 6.9: with Rf 4.7k the fundamental is damped."""
    found = reviewed(third(), feedback_resistor_kohm=3.3)
    assert reason(found)["verdict"] == "meets"
    assert "cannot start" in reason(found)["message"]


def test_a_fundamental_that_can_start_but_grows_slower_is_cannot_tell():
    """Between the two: some feedback resistor damps the fundamental without stopping it."""
    verdicts = {
        reason(reviewed(third(), feedback_resistor_kohm=r))["verdict"] for r in (3.3, 4.3, 4.7, 5.1, 5.6, 6.8, 1000.0)
    }
    assert verdicts == {"meets", "cannot tell", "falls short"}


def test_with_a_trap_the_overtone_is_judged_by_its_own_numbers_with_a_warning():
    found = reviewed(third(), overtone_trap=True)
    assert reason(found)["verdict"] == "meets"
    assert "the trap is not in the model" in reason(found)["message"]


def test_a_fundamental_is_not_held_to_its_mode():
    found = review([sheet(usual())], bench())["reviews"][0]
    assert [r for r in found["reasons"] if r["about"] == "mode"] == []


def test_above_20_mhz_a_mode_not_stated_is_cannot_tell_with_its_question():
    found = review(
        [sheet(usual(reading("frequency_mhz", 26.0), mode=None))], bench({"requirement": {"frequency_mhz": 26.0}})
    )
    (one,) = found["reviews"]
    assert reason(one)["verdict"] == "cannot tell"
    assert "mode" in one["missing"]
    assert one["questions"] == ["Is P1 at 26 MHz a fundamental or an overtone crystal, and of which order?"]


def test_an_overtone_without_esr_cannot_be_told():
    one = third()
    bare = usual(*[r for r in one.readings if r.field != "esr_ohm"], without=("esr_ohm",), mode="third overtone")
    assert reason(reviewed(bare))["verdict"] == "cannot tell"


@pytest.mark.parametrize("mode", ["fifth overtone", "third overtone"])
def test_the_verdict_follows_the_order(mode):
    assert reason(reviewed(third(mode=mode)))["verdict"] == "falls short"


def test_a_resistance_stated_for_the_fundamental_is_put_in():
    """60 kΩ at f/3 is past what this circuit drives there: the fundamental cannot start."""
    stated = reading("esr_ohm", max=60000.0, mode="fundamental", frequency_mhz=(10.0, 20.0))
    own = reading("esr_ohm", 60.0, min=60.0, max=60.0, mode="third overtone")
    one = third()
    both = usual(*[r for r in one.readings if r.field != "esr_ohm"], own, stated, mode="third overtone")
    assert reason(reviewed(one))["verdict"] == "falls short"
    assert reason(reviewed(both))["verdict"] == "meets"


def at_c0(c0_pf):
    one = third(*([] if c0_pf is None else [exactly("shunt_capacitance_pf", c0_pf)]))
    kept = [r for r in one.readings if c0_pf is not None or r.field != "shunt_capacitance_pf"]
    return one.model_copy(update={"readings": tuple(kept)})


def test_an_estimate_of_c0_alone_does_not_let_the_fundamental_win():
    """With Rf 5.1k the fundamental wins at a C0 of 0.5 pF and not at 5 pF, the ends of the estimate."""
    told = {c0: reason(reviewed(at_c0(c0), feedback_resistor_kohm=5.1)) for c0 in (None, 0.5, 5.0)}
    assert [told[c0]["verdict"] for c0 in (0.5, 5.0, None)] == ["falls short", "cannot tell", "cannot tell"]
    assert told[None]["estimated"] == ["shunt_capacitance_pf"]
    assert reason(reviewed(at_c0(None), feedback_resistor_kohm=10.0))["verdict"] == "falls short"


def test_a_typical_esr_promises_nothing_of_the_mode_either():
    typical = third(reading("esr_ohm", 60.0))
    assert reason(reviewed(typical, feedback_resistor_kohm=3.3))["verdict"] == "cannot tell"
    assert reason(reviewed(typical, feedback_resistor_kohm=1000.0))["verdict"] == "falls short"
    assert reason(reviewed(typical, overtone_trap=True))["verdict"] == "meets"
