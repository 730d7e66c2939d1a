"""The frequency budget: sums of the ends, the fork's parabola, ageing, trim, limits; by hand."""

import math

import pytest
from made_sheets import bench, exactly, reading, sheet, usual

from compare.bench import uses
from compare.review import review


def reviewed(one, changes=None):
    return review([sheet(one)], bench(changes))["reviews"][0]


def reason(found, about="total_ppm"):
    (one,) = [r for r in found["reasons"] if r["about"] == about]
    return one


FORK_BENCH = {
    "requirement": {"frequency_mhz": 0.032768, "total_ppm": 300.0, "startup_ms": None},
    "circuit": {"transconductance_ms": 0.006, "input_capacitor_pf": 10.0, "output_capacitor_pf": 10.0, "swing_v": 0.3}
    | {"feedback_resistor_kohm": 10000.0},
}


def fork(*changed, without=(), **identity):
    stated = {
        r.field: r
        for r in (
            exactly("frequency_mhz", 0.032768),
            exactly("load_capacitance_pf", 7.0),
            exactly("shunt_capacitance_pf", 1.2),
            exactly("motional_capacitance_ff", 3.2),
            reading("esr_ohm", max=60000.0),
            reading("drive_level_uw", max=0.5),
            reading("turnover_temperature_c", 25.0, min=20.0, max=30.0),
            reading("parabolic_coefficient_ppm_per_c2", -0.034, min=-0.04, max=-0.028),
        )
    }
    readings = [r for name, r in (stated | {r.field: r for r in changed}).items() if name not in without]
    return usual(*readings, without=("frequency_stability_ppm", *without), cut="tuning fork", **identity)


def terms_of(found):
    """make, temperature, ageing and load error as `how` gives them."""
    return found["total_ppm"]["how"]


def test_the_total_is_the_sum_of_the_ends():
    """Make ±10, stability ±15, ageing ±1 times ln(37.5)/ln(4.65), and the load error; by hand."""
    found = reviewed(usual())
    ageing = math.log(0.01 * 3650 + 1) / math.log(0.01 * 365 + 1)
    for end, sign in (("low", -1), ("high", 1)):
        assert found["total_ppm"][end] == pytest.approx(sign * (25.0 + ageing) + found["load_error_ppm"][end])


def test_a_lopsided_tolerance_stays_lopsided():
    found = reviewed(usual(reading("frequency_tolerance_ppm", min=-5.0, max=15.0)))
    even = reviewed(usual())
    assert found["total_ppm"]["low"] == pytest.approx(even["total_ppm"]["low"] + 5.0)
    assert found["total_ppm"]["high"] == pytest.approx(even["total_ppm"]["high"] + 5.0)


def test_how_gives_ageing_by_both_rules():
    """2.36 for 1 to 10 years by the steepest of the published set; 10 in a straight line."""
    how = reviewed(usual())["total_ppm"]["how"]
    assert "times 2.36 for 10 years by the logarithm rule (by the linear rule 10)" in how


def test_ageing_by_the_linear_rule():
    straight = reviewed(usual(), {"requirement": {"ageing_rule": "linear"}})
    steep = reviewed(usual())
    assert straight["total_ppm"]["high"] - steep["total_ppm"]["high"] == pytest.approx(10.0 - 2.358, abs=0.001)


def test_ageing_stated_for_longer_than_asked_is_unchanged():
    found = reviewed(usual(reading("ageing_ppm", min=-3.0, max=3.0, years=10.0)), {"requirement": {"years": 5.0}})
    assert found["total_ppm"]["high"] == pytest.approx(28.0 + found["load_error_ppm"]["high"])


def test_ageing_without_years_is_for_the_first():
    plain = reviewed(usual(reading("ageing_ppm", min=-1.0, max=1.0)))
    assert plain["total_ppm"]["high"] == pytest.approx(reviewed(usual())["total_ppm"]["high"])


def test_ageing_not_stated_is_an_estimate_of_five_in_the_first_year():
    found = reviewed(usual(without=("ageing_ppm",)))
    stated = reviewed(usual(reading("ageing_ppm", min=-5.0, max=5.0, years=1.0)))
    assert found["total_ppm"]["high"] == pytest.approx(stated["total_ppm"]["high"])
    assert reason(found)["estimated"] == ["ageing_ppm"]
    assert found["total_ppm"]["basis"] == "estimated"


def test_ageing_not_stated_leaves_the_ppm_open_where_it_would_decide():
    without = usual(without=("ageing_ppm",))
    nothing = reviewed(usual(reading("ageing_ppm", min=0.0, max=0.0, years=1.0)))["total_ppm"]["high"]
    found = reviewed(without, {"requirement": {"total_ppm": nothing + 1.0}})
    assert reason(found)["verdict"] == "cannot tell"
    assert "ageing_ppm" in found["missing"]
    short = reviewed(without, {"requirement": {"total_ppm": nothing - 1.0}})
    assert reason(short)["verdict"] == "falls short"


def test_a_forks_temperature_term_is_its_parabola_with_the_spread_of_both_coefficients():
    """-40 to 85 °C: -0.04 (30 + 40)² = -196 ppm at the least, 0 at the most; by hand."""
    found = reviewed(fork(), FORK_BENCH)
    assert "temperature -196/+0" in terms_of(found)


def test_a_fork_is_reckoned_over_the_products_range_so_far_as_its_own_goes():
    """Product -40 to 85, part -10 to 60: -0.04 (60 - 20)² = -64 ppm; by hand."""
    found = reviewed(fork(reading("operating_temperature_c", min=-10.0, max=60.0)), FORK_BENCH)
    assert "temperature -64/+0" in terms_of(found)
    assert reason(found, "operating_temperature_c")["verdict"] == "falls short"


def test_a_product_far_from_the_turnover_never_reaches_zero():
    """40 to 60 °C with T0 20 to 30: from -0.04 · 40² = -64 to -0.028 · 10² = -2.8 ppm; by hand."""
    found = reviewed(fork(), FORK_BENCH | {"requirement": FORK_BENCH["requirement"] | {"temperature_c": [40.0, 60.0]}})
    assert "temperature -64/-2.8" in terms_of(found)


def test_a_forks_coefficients_not_stated_are_estimates():
    """-0.04 (30 + 40)² = -196 with the published -0.035 ± 0.005 and 25 ± 5."""
    bare = fork(without=("turnover_temperature_c", "parabolic_coefficient_ppm_per_c2"))
    found = reviewed(bare, FORK_BENCH)
    assert "temperature -196/+0" in terms_of(found)
    assert reason(found)["estimated"] == ["parabolic_coefficient_ppm_per_c2", "turnover_temperature_c"]


def test_a_forks_estimated_coefficients_leave_open_what_only_they_would_decide():
    """At best -0.03 (85 - 25)² ~ -118 ppm (T0 22.5): a limit of ±170 may or may not do, ±100 cannot."""
    bare = fork(without=("turnover_temperature_c", "parabolic_coefficient_ppm_per_c2"))
    asked = FORK_BENCH["requirement"]
    at170 = reviewed(bare, FORK_BENCH | {"requirement": asked | {"total_ppm": 170.0}})
    assert reason(at170)["verdict"] == "cannot tell"
    at100 = reviewed(bare, FORK_BENCH | {"requirement": asked | {"total_ppm": 100.0}})
    assert reason(at100)["verdict"] == "falls short"


def test_with_a_trim_the_make_tolerance_and_the_nominal_load_error_give_way():
    off = usual(reading("load_capacitance_pf", 9.0), reading("frequency_tolerance_ppm", min=-30.0, max=30.0))
    plain, trimmed = reviewed(off), reviewed(off, {"requirement": {"trim_step_ppm": 1.0}})
    nominal = plain["load_error_ppm"]["mid"]
    assert nominal > 20.0
    assert trimmed["total_ppm"]["high"] == pytest.approx(plain["total_ppm"]["high"] - 30.0 + 1.0 - nominal)
    assert trimmed["total_ppm"]["mid"] == pytest.approx(0.0, abs=1e-9)


def test_with_a_trim_the_make_tolerance_is_not_missed():
    found = reviewed(usual(without=("frequency_tolerance_ppm",)), {"requirement": {"trim_step_ppm": 1.0}})
    assert reason(found)["verdict"] == "meets"
    assert found["missing"] == []


def test_the_load_error_of_a_series_part_is_against_fs():
    """A series part in a circuit of 8 pF runs high by about C1/(2 (C0 + CL)) = 4.5/(2 · 9.5) · 1000 = 237 ppm."""
    found = reviewed(usual(without=("load_capacitance_pf",), resonance="series"), {"requirement": {"total_ppm": 900.0}})
    assert found["load_error_ppm"]["mid"] == pytest.approx(237.0, rel=0.01)
    assert found["series_resonance_mhz"]["mid"] == 16.0
    assert "load_capacitance_pf" not in found["missing"]


def test_total_ppm_and_use_together_take_the_tighter_end_and_name_both():
    found = reviewed(usual(), {"requirement": {"total_ppm": 100.0, "use": "ble-active"}})
    assert found["slack"]["total_ppm"] == pytest.approx(50.0 / found["total_ppm"]["high"])
    assert "total_ppm ±100 and use ble-active -50 to +50" in reason(found)["message"]


def test_a_use_alone_sets_the_limit():
    """IEEE 802.15.4 at 2.4 GHz: ±40 ppm (an IC data sheet quoting the standard, in the table of uses)."""
    found = reviewed(usual(), {"requirement": {"total_ppm": None, "use": "802154-2g4"}})
    assert found["slack"]["total_ppm"] == pytest.approx(40.0 / found["total_ppm"]["high"])


def test_a_use_without_a_limit_needs_total_ppm_and_says_so():
    assert uses()["canfd"].high_ppm is None
    result = review([sheet(usual())], bench({"requirement": {"total_ppm": None, "use": "canfd"}}))
    assert "total_ppm" not in result["reviews"][0]["slack"]
    assert [note["message"] for note in result["notes"]] == [
        "requirement.use canfd sets no single limit and total_ppm is not given: ppm is not judged"
    ]


def test_a_use_without_evidence_is_said_to_have_none():
    found = reviewed(usual(), {"requirement": {"use": "usb3"}})
    assert "no source yet: check the standard" in reason(found)["message"]


def test_a_clocks_error_is_told_in_seconds_a_day_as_well():
    """100 ppm of 86 400 s are 8.64 s."""
    found = reviewed(fork(), FORK_BENCH)
    low = found["total_ppm"]["low"] * 0.0864
    assert f"({low:+.3g} to " in reason(found)["message"]
    assert "s a day" not in reason(reviewed(usual()))["message"]
