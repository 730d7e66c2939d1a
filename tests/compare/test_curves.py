import numpy as np
import pytest
from made_sheets import bench, exactly, fork, reading, sheet, usual

from compare.curves import (
    SHAPE_NOT_STATED,
    Curve,
    budget_stack,
    headroom_against_gain,
    margin_against_esr,
    ppm_against_load,
    ppm_over_temperature,
)
from compare.reckoning import part_result, reckon_sheets

FORK = fork(reading("esr_ohm", 40e3, max=70e3))
FORK_BENCH = {
    "requirement": {"frequency_mhz": 0.032768, "total_ppm": 300.0},
    "circuit": {
        "transconductance_ms": [0.006, 0.03],
        "feedback_resistor_kohm": 1e4,
        "across_stray_pf": 1.0,
        "input_capacitor_pf": 9.0,
        "output_capacitor_pf": 9.0,
        "swing_v": 0.2,
    },
}
PLAIN = usual(reading("esr_ohm", 40.0, min=30.0, max=60.0))
COLD = {"name": "cold", "transconductance_ms": 4.0}
CHOSEN = {
    "16 MHz": (PLAIN, {}),
    "16 MHz, range of gain, condition": (PLAIN, {"circuit": {"transconductance_ms": [5.0, 12.0], "condition": [COLD]}}),
    "16 MHz, series resistor": (PLAIN, {"circuit": {"series_resistor_ohm": 470.0, "output_resistance_kohm": 5.0}}),
    "series resonance": (usual(resonance="series"), {}),
    "fork": (FORK, FORK_BENCH),
}


def reckoned(name):
    part, changes = CHOSEN[name]
    found = reckon_sheets([sheet(part)], bench(changes))
    return found, part_result(found, 0)


every = pytest.mark.parametrize("name", CHOSEN)


@every
def test_the_load_curve_runs_through_the_reviews_load_errors(name):
    found, review = reckoned(name)
    curve = ppm_against_load(found, 0)
    here = curve.marks["circuit"]
    assert here["load_pf"] == review["circuit_load_pf"]["mid"]
    assert here["shift_ppm"] == pytest.approx(review["load_error_ppm"]["mid"], abs=0.02)
    assert np.interp(here["load_pf"], curve.columns["load_pf"], curve.columns["shift_ppm"]) == pytest.approx(
        here["shift_ppm"], abs=0.2
    )


@every
def test_the_load_curves_band_holds_the_curve_and_falls_with_the_load(name):
    columns = ppm_against_load(reckoned(name)[0], 0).columns
    assert (np.diff(columns["shift_ppm"]) < 0).all()
    assert (columns["shift_low_ppm"] <= columns["shift_ppm"] + 1e-9).all()
    assert (columns["shift_high_ppm"] >= columns["shift_ppm"] - 1e-9).all()


def test_the_load_curve_is_the_true_one_and_not_its_tangent():
    """By hand, R1 = 0: f = fs √(1 + C1/(C0 + CL)), C1 4.5 fF, C0 1.5 pF, rated 8 pF, at 5 pF: +109.04 ppm."""
    part = usual(
        exactly("esr_ohm", 1e-6), exactly("shunt_capacitance_pf", 1.5), exactly("motional_capacitance_ff", 4.5)
    )
    curve = ppm_against_load(reckon_sheets([sheet(part)], bench()), 0, points=401)
    at_5_pf = np.interp(5.0, curve.columns["load_pf"], curve.columns["shift_ppm"])
    exact = (((1 + 4.5e-3 / 6.5) / (1 + 4.5e-3 / 9.5)) ** 0.5 - 1) * 1e6
    assert at_5_pf == pytest.approx(exact, abs=0.02)


def test_what_the_other_causes_leave_for_the_load_stands_beside_the_curve():
    """±100 asked, make 10, stability 15, ageing 1 times 2.36: 72.6 ppm left to either side."""
    limits = ppm_against_load(reckoned("16 MHz")[0], 0).limits
    assert limits["room_high_ppm"] == pytest.approx(72.64, abs=0.01)
    assert limits["room_low_ppm"] == pytest.approx(-72.64, abs=0.01)


@every
def test_the_gain_curve_passes_one_at_the_reviews_two_limits(name):
    found, review = reckoned(name)
    marks = headroom_against_gain(found, 0).marks
    for which in ("critical", "greatest"):
        assert marks[which]["transconductance_ms"] == review[f"{which}_transconductance_ms"]["mid"]
        # Drawn at the nominal frequency; a fork near its greatest gain is pulled a thousandth away from it.
        assert marks[which]["headroom"] == pytest.approx(1.0, abs=2e-2 if "fork" in name else 2e-3)
    assert marks["ic"]["headroom"] == pytest.approx(review["resistance_headroom"]["mid"], rel=1e-9)


@every
def test_the_gain_curve_is_greatest_at_its_optimum(name):
    curve = headroom_against_gain(reckoned(name)[0], 0)
    best = curve.marks["optimum"]["headroom"]
    assert best >= curve.columns["headroom"].max()
    assert best == pytest.approx(curve.columns["headroom"].max(), rel=0.01)


@every
def test_the_worst_gain_curve_holds_the_reviews_least_headroom(name):
    found, review = reckoned(name)
    curve = headroom_against_gain(found, 0, points=2001)
    gains = [gain for setting in found.bench.settings for gain in setting.circuit.transconductance_range_ms]
    least = min(
        np.interp(gain, curve.columns["transconductance_ms"], curve.columns["headroom_worst"]) for gain in gains
    )
    assert least == pytest.approx(review["resistance_headroom"]["low"], rel=2e-3)


def test_the_optimum_without_losses_is_the_one_of_the_published_formula():
    """Vittoz, Degrauwe, Bitz (1988): gm = ω (Cin + Cout + Cin Cout/C3), there -Re Z = 1/(2 ω C3 (1 + C3/Cs)).

    Cin = Cout = 15 pF, C3 = C0 + Cx = 2 pF, R1 = 60 Ω, 16 MHz; from memory.
    """
    part = usual(
        exactly("esr_ohm", 60.0), exactly("shunt_capacitance_pf", 1.5), exactly("motional_capacitance_ff", 4.5)
    )
    found = reckon_sheets([sheet(part)], bench({"circuit": {"feedback_resistor_kohm": float("inf")}}))
    best = headroom_against_gain(found, 0).marks["optimum"]
    omega = 2e6 * np.pi * 16
    assert best["transconductance_ms"] == pytest.approx(omega * (30e-12 + 15e-12**2 / 2e-12) * 1e3, rel=1e-6)
    assert best["headroom"] == pytest.approx(1 / (2 * omega * 2e-12 * (1 + 2 / 7.5)) / 60, rel=1e-6)


@every
def test_the_margin_curve_runs_through_the_reviews_margins(name):
    found, review = reckoned(name)
    curve = margin_against_esr(found, 0)
    assert curve.marks["nominal"]["margin"] == pytest.approx(review["margin"]["mid"], rel=1e-9)
    assert curve.marks["worst"]["margin"] == pytest.approx(review["margin"]["low"], rel=1e-9)
    nominal = curve.columns["margin"]
    assert (np.diff(nominal[~np.isnan(nominal)]) < 0).all()
    assert np.isnan(nominal).argmax() > 20 or not np.isnan(nominal).any()


def test_a_forks_curve_ends_at_the_budgets_own_ends_with_seconds_a_day():
    """-0.040 (−40 − 30)² = -196 ppm at the cold end, 16.93 s a day; by hand."""
    found, _ = reckoned("fork")
    curve = ppm_over_temperature(found, 0)
    assert curve.columns["low_ppm"].min() == pytest.approx(float(found.total.terms["temperature"].low[0]))
    assert curve.marks["coldest"]["low_ppm"] == pytest.approx(-196.0)
    assert curve.columns["low_s_per_day"][0] == pytest.approx(-16.93, abs=0.01)
    assert np.interp(25.0, curve.columns["temperature_c"], curve.columns["ppm"]) == pytest.approx(0.0, abs=0.01)
    assert curve.units["s_per_day"] == "s/day"


def test_a_stability_gives_a_band_and_says_that_its_shape_is_not_stated():
    curve = ppm_over_temperature(reckoned("16 MHz")[0], 0)
    assert set(curve.columns) == {"temperature_c", "low_ppm", "high_ppm"}
    assert set(curve.columns["low_ppm"]) == {-15.0}
    assert curve.said == (SHAPE_NOT_STATED,)


@every
def test_the_stack_of_the_budget_ends_at_the_reviews_total(name):
    found, review = reckoned(name)
    stack = budget_stack(found, 0)
    assert stack.causes == ("make", "temperature", "ageing", "load error")
    assert stack.sum_low_ppm[-1] == pytest.approx(review["total_ppm"]["low"])
    assert stack.sum_high_ppm[-1] == pytest.approx(review["total_ppm"]["high"])
    assert stack.left_high_ppm == pytest.approx(found.bench.requirement.limits_ppm[1] - review["total_ppm"]["high"])


def test_columns_that_do_not_go_together_are_an_error():
    with pytest.raises(ValueError, match="do not go together"):
        Curve({"a": np.zeros(2), "b": np.zeros(3)}, {"a": "", "b": ""})
