"""Strays from a maker's one figure and from two frequencies, put back into the formulas they come from."""

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from compare.converters import ConverterError, from_single_pf, from_two_frequencies

pf = st.floats(1.0, 60.0)


def load(c_in, c_out, across):
    return c_in * c_out / (c_in + c_out) + across


@given(pf, pf, st.floats(0.6, 15.0), st.floats(0.0, 0.5))
def test_the_load_stays_what_the_maker_means(c_in, c_out, single, across):
    found = from_single_pf(single, c_in, c_out, across)
    s = found.at_each_pin_pf
    assert s >= -1e-9
    assert load(c_in + s, c_out + s, found.across_pf) == pytest.approx(load(c_in, c_out, single), rel=1e-9)


def test_with_equal_capacitors_each_pin_has_twice_the_figure():
    # By hand: (18 + 10)/2 = 18/2 + 5.
    assert from_single_pf(5.0, 18.0, 18.0, 0.0).at_each_pin_pf == pytest.approx(10.0)


def test_what_cannot_be_shared_is_told():
    with pytest.raises(ConverterError, match=r"^0.3 pF is less than the stray across, 0.5 pF: give that one smaller$"):
        from_single_pf(0.3, 12.0, 12.0, 0.5)
    with pytest.raises(ConverterError, match="fitted capacitors are not given"):
        from_single_pf(5.0, 0.0, 0.0, 0.5)


@given(st.floats(0.7, 6.0), st.floats(1.5, 8.0), st.floats(0.8, 3.0), st.floats(6.0, 14.0))
def test_two_frequencies_give_back_the_stray_and_c1_that_made_them(stray, c1_ff, c0, rated):
    def error(fitted):
        # f = fs √(1 + C1/(C0 + C/2 + stray)), over the same at the rated load.
        def at(cl):
            return math.sqrt(1 + c1_ff * 1e-3 / (c0 + cl))

        return at(fitted / 2 + stray) / at(rated) - 1

    found = from_two_frequencies(((10.0, error(10.0)), (22.0, error(22.0))), (c0, rated), 0.4)
    assert found.c1_ff == pytest.approx(c1_ff, rel=1e-4)
    assert found.at_each_pin_pf / 2 + found.across_pf == pytest.approx(stray, rel=1e-4)
    assert found.across_pf == 0.4


def test_the_same_capacitor_twice_or_frequencies_the_wrong_way_round_are_told():
    with pytest.raises(ConverterError, match="it takes two different capacitors"):
        from_two_frequencies(((10.0, 1e-6), (10.0, 2e-6)), (1.2, 8.0), 0.4)
    with pytest.raises(ConverterError, match="no stray and no C1 explain both"):
        from_two_frequencies(((10.0, -20e-6), (22.0, 20e-6)), (1.2, 8.0), 0.4)
