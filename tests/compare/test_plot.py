"""The frame of plots: scales, ticks, pieces of curves, words that keep clear."""

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from compare.palette import LIGHT
from compare.picture import Line, Words
from compare.plot import Plot, Scale, plain, signed

X, Y = Scale(0.0, 10.0, 50.0, 350.0), Scale(-20.0, 20.0, 200.0, 20.0)


def plot(x=X, y=Y):
    return Plot(LIGHT, x, y, 360, 240)


def lines(of, colour=LIGHT.accent):
    return [mark for mark in of.pen.marks if isinstance(mark, Line) and mark.colour == colour]


def test_a_scale_puts_its_ends_at_their_pixels():
    assert (X(0.0), X(10.0), X(5.0)) == (50.0, 350.0, 200.0)
    log = Scale(0.1, 1000.0, 0.0, 400.0, log=True)
    # By hand: four decades over 400 px.
    assert [round(log(value), 6) for value in (0.1, 1.0, 10.0, 100.0)] == [0.0, 100.0, 200.0, 300.0]


@given(st.floats(-1e6, 1e6), st.floats(1e-3, 1e6))
def test_ticks_are_round_few_and_inside(low, span):
    scale = Scale(low, low + span, 0.0, 400.0)
    ticks = scale.ticks(6)
    assert 1 <= len(ticks) <= 14
    assert all(low - 1e-6 * span <= tick <= low + span * (1 + 1e-6) for tick in ticks)


def test_logarithmic_ticks_go_by_1_2_5_and_over_many_decades_by_tens():
    assert Scale(0.5, 30.0, 0.0, 1.0, log=True).ticks() == [0.5, 1.0, 2.0, 5.0, 10.0, 20.0]
    assert Scale(0.2, 2000.0, 0.0, 1.0, log=True).ticks() == [1.0, 10.0, 100.0, 1000.0]


def test_a_curve_is_cut_where_it_leaves_the_frame_and_broken_where_it_has_no_value():
    one = plot()
    one.curve([0.0, 10.0], [-40.0, 40.0])
    (line,) = lines(one)
    # By hand: it passes -20 at a quarter and +20 at three quarters of the way.
    assert line.paths[0] == ((pytest.approx(125.0), pytest.approx(200.0)), (pytest.approx(275.0), pytest.approx(20.0)))
    gap = plot()
    gap.curve([0.0, 1.0, 2.0, 3.0, 4.0, 5.0], [0.0, 1.0, math.nan, 3.0, 4.0, 5.0])
    assert [len(line.paths[0]) for line in lines(gap)] == [2, 3]


def test_a_curve_outside_draws_nothing():
    one = plot()
    one.curve([0.0, 5.0, 10.0], [50.0, 60.0, 70.0])
    one.curve([20.0, 30.0], [0.0, 0.0])
    assert lines(one) == []


def test_a_limit_is_hatched_on_its_wrong_side_only():
    for wrong, upper in ((1, True), (-1, False)):
        one = plot()
        one.limit(10.0, wrong=wrong)
        (hatch,) = lines(one, LIGHT.hatch)
        at = Y(10.0)
        for path in hatch.paths:
            for _, y in path:
                assert (y <= at + 0.01) if upper else (y >= at - 0.01)
    outside = plot()
    outside.limit(50.0, wrong=1)
    assert outside.pen.marks == []


def test_words_take_another_side_where_something_lies():
    one = plot()
    one.say("here", (200.0, 100.0), "ur ul")
    one.say("there", (200.0, 100.0), "ur ul")
    first, second = (mark for mark in one.pen.marks if isinstance(mark, Words))
    assert (first.anchor, second.anchor) == ("start", "end")


def test_words_at_the_edge_are_pushed_inside():
    one = plot()
    one.say("a rather long remark at the right edge", (355.0, 100.0), "ur")
    (word,) = one.pen.marks
    assert word.x < 200


def test_words_on_a_line_keep_clear_of_the_curve():
    one = plot()
    one.curve([7.0, 10.0], [10.0, 12.0])
    one.say_on("needed 10", 10.0)
    (word,) = (mark for mark in one.pen.marks if isinstance(mark, Words))
    assert word.anchor == "start"


def test_figures_have_a_true_minus():
    assert (plain(-2.5), signed(2.5), signed(0.0), signed(-3)) == ("−2.5", "+2.5", "0", "−3")
