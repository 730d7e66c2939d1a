import json
import math

import pytest
from made_sheets import bench, exactly, fork, reading, sheet, usual

from compare.result import NEEDS
from compare.review import review
from compare.spread import add_spread

STILL = {"capacitor_tolerance_percent": 0.0, "stray_tolerance_percent": 0.0}
EXACT = (exactly("esr_ohm", 60.0), exactly("shunt_capacitance_pf", 1.5), exactly("motional_capacitance_ff", 4.5))


def both(part, asked, method="rss", **keys):
    """The review of a part, and its spread."""
    sheets = [sheet(part)]
    one = add_spread(review(sheets, asked), sheets, asked, method, **keys)["reviews"][0]
    return one, one["spread"]


def circuit(**changes):
    return bench({"circuit": changes})


@pytest.mark.parametrize("method", ["rss", "draws"])
def test_every_number_of_the_review_has_a_spread_inside_its_worst_case(method):
    worst, spread = both(
        usual(reading("esr_ohm", 40.0, min=30.0, max=60.0)), circuit(transconductance_ms=[4.0, 9.0]), method
    )
    assert list(spread["numbers"]) == list(NEEDS)
    for key, ends in spread["numbers"].items():
        assert worst[key]["low"] - 1e-9 <= ends["low"] <= ends["mid"] <= ends["high"] <= worst[key]["high"] + 1e-9, key


def test_one_input_moving_alone_spreads_as_far_as_the_worst_case():
    part = usual(exactly("esr_ohm", 60.0), reading("shunt_capacitance_pf", 1.5, min=1.2, max=1.8), EXACT[2])
    worst, spread = both(part, circuit(**STILL))
    for key in ("margin", "resistance_headroom", "load_error_ppm", "startup_ms", "critical_transconductance_ms"):
        for end in ("low", "mid", "high"):
            assert spread["numbers"][key][end] == pytest.approx(worst[key][end], rel=1e-9, abs=1e-9), (key, end)


def test_two_inputs_add_by_their_squares():
    """R1 alone and the fitted capacitors alone, each by the review's own corners; together by Pythagoras."""
    esr = reading("esr_ohm", 60.0, min=55.0, max=60.0)
    only_esr, _ = both(usual(esr, *EXACT[1:]), circuit(**STILL))
    one_end = {
        "input_stray_pf": 0.0,
        "across_stray_pf": 0.0,
        "output_stray_pf": 3.0,
        "capacitor_tolerance_percent": 0.0,
    }
    only_stray, _ = both(usual(*EXACT), circuit(**one_end))
    still, _ = both(usual(*EXACT), circuit(**one_end, stray_tolerance_percent=0.0))
    esr_there, _ = both(usual(esr, *EXACT[1:]), circuit(**one_end, stray_tolerance_percent=0.0))
    _, together = both(usual(esr, *EXACT[1:]), circuit(**one_end))
    nominal = still["critical_transconductance_ms"]["mid"]
    parts = [nominal - one["critical_transconductance_ms"]["low"] for one in (only_stray, esr_there)]
    assert all(part > 0 for part in parts)
    assert nominal - together["numbers"]["critical_transconductance_ms"]["low"] == pytest.approx(
        math.hypot(*parts), rel=1e-9
    )
    assert only_esr["margin"]["high"] > only_esr["margin"]["mid"]


def test_the_terms_of_the_budget_add_by_their_squares():
    """Make ±10, stability ±15, ageing ±1 times 2.36 (logarithm, 1 to 10 years): √(10² + 15² + 2.36²) = 18.18 ppm."""
    _, spread = both(usual(*EXACT), circuit(**STILL))
    total, load = spread["numbers"]["total_ppm"], spread["numbers"]["load_error_ppm"]["mid"]
    assert total["high"] - load == pytest.approx(18.18, abs=0.01)
    assert load - total["low"] == pytest.approx(18.18, abs=0.01)


def test_a_forks_parabola_is_certain_and_only_its_spread_is_squared():
    """With k -0.034 ±0.006, T0 25 ±5 °C, -40 to 85 °C: -0.034 65² = -143.65; k alone -25.35, T0 -22.95 ppm."""
    part = fork(
        exactly("frequency_tolerance_ppm", 0.0),
        exactly("ageing_ppm", 0.0),
        exactly("esr_ohm", 50e3),
        exactly("shunt_capacitance_pf", 1.1),
        exactly("motional_capacitance_ff", 3.0),
    )
    keys = STILL | {"transconductance_ms": 0.02, "feedback_resistor_kohm": 1e4}
    _, spread = both(part, bench({"circuit": keys, "requirement": {"frequency_mhz": 0.032768}}))
    total, load = spread["numbers"]["total_ppm"], spread["numbers"]["load_error_ppm"]["mid"]
    assert total["low"] - load == pytest.approx(-143.65 - math.hypot(25.35, 22.95), abs=0.01)
    assert total["high"] == pytest.approx(load, abs=0.01)


def test_a_condition_is_no_chance_but_widens_the_ends():
    cold = {"name": "cold", "transconductance_ms": 4.0}
    _, plain = both(usual(*EXACT), circuit())
    _, with_cold = both(usual(*EXACT), circuit(condition=[cold]))
    assert with_cold["numbers"]["margin"]["low"] < 0.6 * plain["numbers"]["margin"]["low"]
    assert with_cold["numbers"]["margin"]["high"] == plain["numbers"]["margin"]["high"]


def test_an_input_end_that_does_not_start_leaves_the_start_up_without_bound():
    _, spread = both(usual(*EXACT), circuit(transconductance_ms=[0.1, 8.0]))
    assert spread["numbers"]["startup_ms"]["high"] is None
    assert spread["numbers"]["startup_ms"]["low"] is not None


def test_what_the_review_cannot_tell_the_spread_cannot_either():
    for method in ("rss", "draws"):
        worst, spread = both(usual(without=("esr_ohm",)), circuit(), method, boards=200)
        assert worst["margin"]["mid"] is None
        assert spread["numbers"]["margin"] == {"low": None, "mid": None, "high": None}


def test_draws_are_named_with_their_number_seed_and_interval():
    _, spread = both(usual(*EXACT), circuit(transconductance_ms=[0.5, 8.0]), "draws", boards=2000, seed=7)
    assert (spread["boards"], spread["seed"], spread["shape"]) == (2000, 7, "uniform")
    short = spread["falls_short"]["margin"]
    assert short["share"] == short["boards"] / 2000
    assert short["low"] < short["share"] < short["high"]
    assert any("2000 boards drawn from seed 7" in text for text in spread["assumptions"])
    json.dumps(spread, allow_nan=False)


def test_an_estimate_in_the_spread_is_named():
    _, spread = both(usual(without=("motional_capacitance_ff",)), circuit())
    assert any("estimate" in text for text in spread["assumptions"])
    _, spread = both(usual(*EXACT), circuit())
    assert not any("estimate" in text for text in spread["assumptions"])


def test_nothing_of_the_review_changes_but_the_added_key():
    sheets, asked = [sheet(usual(*EXACT))], circuit()
    plain = review(sheets, asked)
    with_spread = add_spread(plain, sheets, asked, "rss")
    assert "spread" not in plain["reviews"][0]
    assert {k: v for k, v in with_spread["reviews"][0].items() if k != "spread"} == plain["reviews"][0]


def test_without_a_part_on_offer_there_is_no_spread():
    sheets, asked = [sheet(usual(reading("frequency_mhz", 25.0)))], circuit()
    assert add_spread(review(sheets, asked), sheets, asked, "draws")["reviews"] == []
