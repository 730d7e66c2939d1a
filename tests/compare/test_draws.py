import numpy as np
import pytest
from made_sheets import CASES, bench, case_bench, case_sheet, exactly, fork, reading, sheet, usual
from scipy import stats

from compare.columns import make_columns
from compare.draws import draw, share_interval, unit_draws
from compare.find import find_offers

STILL = {"capacitor_tolerance_percent": 0.0, "stray_tolerance_percent": 0.0}
EXACT = usual(exactly("esr_ohm", 60.0), exactly("shunt_capacitance_pf", 1.5), exactly("motional_capacitance_ff", 4.5))


def columns_of(asked, *parts):
    return make_columns(find_offers([sheet(*parts)], asked).offers, asked)


def drawn(part, asked, **keys):
    return draw(columns_of(asked, part), asked, **keys)


def circuit(**changes):
    return bench({"circuit": changes})


def test_the_same_seed_gives_the_same_boards_and_another_seed_others():
    asked = circuit(transconductance_ms=[0.5, 8.0])
    shares = [float(drawn(EXACT, asked, seed=seed).share("margin")[0]) for seed in (3, 3, 4)]
    assert shares[0] == shares[1] != shares[2]


def test_a_part_falls_short_as_often_alone_as_in_a_list():
    asked = circuit(transconductance_ms=[0.5, 8.0])
    others = [usual(exactly("esr_ohm", ohm), number=f"P{ohm}") for ohm in range(20, 120)]
    alone = drawn(EXACT, asked, boards=500).short["margin"][0]
    assert draw(columns_of(asked, *others, EXACT), asked, boards=500).short["margin"][-1] == alone


def test_the_share_with_only_the_gain_moving_is_the_one_of_its_logarithm():
    """Case M10 (reckoned outside): gm/critical is known, so the share below the margin asked follows by hand."""
    case = CASES["M10"]
    critical, asked_ratio = case["expected"]["critical_transconductance_ms"], 5.0
    low, high = 2 * critical, 20 * critical
    one = case_bench(case, transconductance_ms=[low, high], **STILL)
    assert one.requirement.margin == asked_ratio
    found = draw(make_columns(find_offers([case_sheet(case)], one).offers, one), one, boards=20_000)
    by_hand = np.log(asked_ratio * critical / low) / np.log(high / low)
    low_end, high_end = found.interval("gain_ratio")
    assert low_end[0] < by_hand < high_end[0]
    assert high_end[0] - low_end[0] < 0.02


def test_with_nothing_moving_all_boards_are_alike():
    found = drawn(EXACT, circuit(**STILL), boards=50)
    assert {int(found.short[name][0]) for name in ("margin", "gain_ratio", "startup_ms", "drive_level_uw")} == {0}
    harder = drawn(EXACT, bench({"circuit": STILL, "requirement": {"margin": 900.0}}), boards=50)
    assert harder.short["margin"][0] == harder.short["any"][0] == 50
    assert harder.short["starts"][0] == 0


@pytest.mark.parametrize(("shape", "deviation"), [("uniform", 12**-0.5), ("triangular", 24**-0.5), ("normal", 1 / 6)])
def test_draws_lie_within_the_tolerance_and_spread_as_said(shape, deviation):
    """Standard deviations of the unit interval's distributions: uniform 1/√12, triangular 1/√24, three to each side."""
    units = np.concatenate(list(unit_draws(20_000, 1, shape).values()))
    assert units.min() >= 0
    assert units.max() <= 1
    assert units.mean() == pytest.approx(0.5, abs=0.002)
    assert units.std() == pytest.approx(deviation, rel=0.02)


@pytest.mark.parametrize(("count", "of"), [(0, 1000), (1, 1000), (37, 1000), (500, 1000), (1000, 1000)])
def test_the_interval_of_a_share_is_wilsons(count, of):
    """As scipy reckons the same interval."""
    low, high = (float(end) for end in share_interval(np.array(count), of))
    judge = stats.binomtest(count, of).proportion_ci(0.95, method="wilson")
    assert (low, high) == pytest.approx((judge.low, judge.high), abs=1e-9)


def test_the_whole_analysis_and_the_lean_one_count_the_same_boards():
    """A probe of no size calls for the whole analysis."""
    keys = {"transconductance_ms": [0.5, 8.0], "series_resistor_ohm": 100.0, "output_resistance_kohm": 5.0}
    part = usual(reading("esr_ohm", 40.0, min=20.0, max=80.0))
    asked = {"startup_ms": 0.8, "total_ppm": 20.0}
    ours = drawn(part, bench({"circuit": keys, "requirement": asked}), boards=2000)
    whole = drawn(part, bench({"circuit": keys | {"probe_pf": 1e-12}, "requirement": asked}), boards=2000)
    for name in ours.short:
        assert abs(int(ours.short[name][0]) - int(whole.short[name][0])) <= 2, name
    assert 0 < ours.short["margin"][0] < 2000
    assert 0 < ours.short["total_ppm"][0] < 2000


def test_a_condition_adds_boards_that_fall_short():
    keys = {"transconductance_ms": [0.8, 8.0]}
    cold = {"name": "cold", "temperature_c": -40.0, "transconductance_ms": [0.5, 4.0]}
    plain = drawn(EXACT, circuit(**keys))
    with_cold = drawn(EXACT, circuit(**keys, condition=[cold]))
    assert with_cold.short["margin"][0] > plain.short["margin"][0]


def test_a_loose_limit_on_c0_is_the_limit_for_the_margin_and_open_for_the_frequency():
    asked = circuit(transconductance_ms=[0.5, 8.0])
    loose = usual(
        exactly("esr_ohm", 60.0), reading("shunt_capacitance_pf", max=7.0), exactly("motional_capacitance_ff", 4.5)
    )
    tight = usual(
        exactly("esr_ohm", 60.0), exactly("shunt_capacitance_pf", 7.0), exactly("motional_capacitance_ff", 4.5)
    )
    narrow = bench({"circuit": {"transconductance_ms": [0.5, 8.0]}, "requirement": {"total_ppm": 25.0}})
    assert drawn(loose, asked).short["margin"][0] == drawn(tight, asked).short["margin"][0]
    assert drawn(loose, narrow).short["total_ppm"][0] > drawn(tight, narrow).short["total_ppm"][0]


def test_a_gain_beyond_the_greatest_counts_as_too_little_headroom():
    """Reference circuits, section 5: at 16 MHz, 60 Ω, C0 7 pF the greatest gain is 4 M0² = 139 times the critical."""
    part = usual(
        exactly("esr_ohm", 60.0), exactly("shunt_capacitance_pf", 7.0), exactly("motional_capacitance_ff", 4.5)
    )
    asked = bench({"circuit": {"transconductance_ms": [8.0, 800.0]}, "requirement": {"margin": 1.0}})
    found = drawn(part, asked)
    assert 0 < found.short["resistance_headroom"][0] < 1000


def test_a_rating_of_the_ic_stands_for_the_gain():
    rating = {"critical_transconductance_max_ms": 0.4, "factor_inside": 5.0}
    by_rating = drawn(EXACT, circuit(transconductance_ms=None, rating=rating))
    by_gain = drawn(EXACT, circuit(transconductance_ms=2.0))
    assert {n: int(v[0]) for n, v in by_rating.short.items()} == {n: int(v[0]) for n, v in by_gain.short.items()}


def test_what_is_not_known_has_no_share():
    found = drawn(usual(without=("esr_ohm",)), circuit())
    assert np.isnan(found.share("margin")).all()
    assert np.isnan(found.share("any")).all()
    no_swing = drawn(EXACT, circuit(swing_v=None))
    assert "drive_level_uw" not in no_swing.short


def test_a_fork_is_held_to_its_parabola_over_the_range():
    """-0.034 (25 - (-40))² = -143.65 ppm and more at the cold end: all boards short of ±100 ppm, none of ±300 ppm."""
    part = fork(exactly("parabolic_coefficient_ppm_per_c2", -0.034), exactly("turnover_temperature_c", 25.0))
    keys = {"transconductance_ms": 0.02, "feedback_resistor_kohm": 10_000.0, "swing_v": 0.2}
    short = [
        drawn(part, bench({"circuit": keys, "requirement": {"frequency_mhz": 0.032768, "total_ppm": ppm}})).share(
            "total_ppm"
        )[0]
        for ppm in (100.0, 300.0)
    ]
    assert short == [1.0, 0.0]


def test_no_boards_or_an_unknown_shape_is_an_error():
    with pytest.raises(ValueError, match="boards must be 1 or more"):
        drawn(EXACT, circuit(), boards=0)
    with pytest.raises(ValueError, match="shape must be one of uniform, triangular, normal"):
        drawn(EXACT, circuit(), shape="flat")
