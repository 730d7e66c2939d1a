"""Ageing, the parabola of a fork, sums of ends."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from compare import budget

AGEING = [
    # rule, from, to, factor, where from
    ("logarithm", 1, 10, 2.36, "MIL-PRF-55310E with B = 0.01 a day"),
    ("logarithm", 5, 5, 1.0, "by hand"),
    ("logarithm", 10, 1, 1.0, "what holds for ten years holds for one"),
    ("linear", 1, 10, 10.0, "by hand"),
    ("linear", 5, 2, 1.0, "what holds for five years holds for two"),
]


@pytest.mark.parametrize(("rule", "years", "wanted", "factor", "source"), AGEING)
def test_ageing_factor(rule: budget.AgeingRule, years: float, wanted: float, factor: float, source: str) -> None:
    assert float(budget.ageing_factor(rule, years, wanted)) == pytest.approx(factor, rel=2e-3)


def test_ageing_of_no_time_is_refused() -> None:
    with pytest.raises(ValueError, match="from_years must be above 0, got 0"):
        budget.ageing_factor("logarithm", np.array([1.0, 0.0]), 10)


@given(st.floats(0.1, 20), st.floats(0.1, 20), st.floats(0.1, 20))
def test_ageing_in_two_steps_is_ageing_in_one(a: float, b: float, c: float) -> None:
    first, second, third = sorted((a, b, c))
    for rule in ("logarithm", "linear"):
        both = budget.ageing_factor(rule, first, second) * budget.ageing_factor(rule, second, third)
        assert float(both) == pytest.approx(float(budget.ageing_factor(rule, first, third)))


def test_ageing_of_a_column() -> None:
    assert budget.ageing_factor("linear", np.array([1.0, 2.0, 20.0]), 10).tolist() == [10.0, 5.0, 1.0]


RANGE = st.tuples(st.floats(-60, 120), st.floats(-60, 120)).map(sorted)
TURNOVER = st.tuples(st.floats(10, 40), st.floats(10, 40)).map(sorted)
COEFFICIENT = st.tuples(st.floats(-0.05, -0.02), st.floats(-0.05, -0.02)).map(sorted)
PART = st.floats(0, 1)


@given(RANGE, COEFFICIENT, TURNOVER, st.tuples(PART, PART, PART))
def test_no_point_of_the_parabola_lies_outside(
    t: list[float], k: list[float], t0: list[float], parts: tuple[float, float, float]
) -> None:
    low, high = budget.parabola_ppm_range(tuple(t), tuple(k), tuple(t0))
    inside = [a + (b - a) * part for (a, b), part in zip((t, k, t0), parts, strict=True)]
    assert float(low) - 1e-9 <= float(budget.parabola_ppm(*inside)) <= float(high) + 1e-9


@given(RANGE, COEFFICIENT, TURNOVER)
def test_the_ends_of_the_parabola_are_reached(t: list[float], k: list[float], t0: list[float]) -> None:
    low, high = budget.parabola_ppm_range(tuple(t), tuple(k), tuple(t0))
    points = [np.linspace(a, b, 121) for a, b in (t, t0)]
    grid = [budget.parabola_ppm(points[0][:, None], end, points[1][None, :]) for end in k]
    assert float(low) == pytest.approx(min(g.min() for g in grid), abs=1e-9)
    assert max(g.max() for g in grid) <= float(high) + 1e-9
    assert float(high) - max(g.max() for g in grid) < 0.05 * (1 + (t[1] - t[0]) ** 2 / 100)


def test_a_fork_over_its_range() -> None:
    """By hand: -0.04 (85 - 20)² = -169 ppm, and zero at the turnover."""
    low, high = budget.parabola_ppm_range((-10, 85), (-0.04, -0.03), (20, 30))
    assert (float(low), float(high)) == (pytest.approx(-169.0), pytest.approx(0.0))


def test_a_range_short_of_the_turnover_never_touches_zero() -> None:
    """By hand: at best -0.03 (20 - 10)² = -3 ppm."""
    low, high = budget.parabola_ppm_range((0, 10), (-0.04, -0.03), (20, 30))
    assert (float(low), float(high)) == (pytest.approx(-36.0), pytest.approx(-3.0))
