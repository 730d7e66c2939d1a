"""How numbers are written for a person. Expected texts are by hand, after the page's rules of writing."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from compare.figures import (
    count_word,
    counted,
    exact,
    frequency_text,
    number,
    ordinal,
    scale,
    signed,
    spread,
    with_minus,
)


@pytest.mark.parametrize(
    ("value", "written"),
    [
        (0.5397, "0.54"),
        (1234.0, "1234"),
        (-445.2, "−445"),
        (12.0, "12"),
        (0.0, "0"),
        (None, "not known"),
        (float("nan"), "not known"),
        (float("inf"), "∞"),
        (0.00001234, "0.0000123"),
        (9.996, "10"),
    ],
)
def test_a_number_is_written_to_three_digits_with_a_true_minus(value, written):
    assert number(value) == written


def test_the_digits_that_a_file_gave_are_all_kept():
    assert exact(26.000015) == "26.000015"
    assert exact(-0.034) == "−0.034"


@given(st.floats(min_value=1e-3, max_value=1e6))
def test_three_digits_are_never_further_off_than_half_of_the_third(value):
    assert float(number(value)) == pytest.approx(value, rel=5.1e-3)


@pytest.mark.parametrize(
    ("low", "high", "written"),
    [
        (7.38, 8.01, "7.38…8.01 pF"),
        (-12.0, 12.0, "±12 pF"),
        (8.0, 8.0, "8 pF"),
        (None, 8.0, "at most 8 pF"),
        (8.0, None, "at least 8 pF"),
        (None, None, "not known"),
        (-0.4, 18.9, "−0.4…18.9 pF"),
    ],
)
def test_a_range_says_its_ends_and_its_unit(low, high, written):
    assert spread(low, high, "pF") == written


def test_shifts_carry_their_sign():
    assert [signed(value) for value in (18.9, -0.4, 0.0)] == ["+18.9", "−0.4", "0"]


def test_counts_are_words_up_to_twelve_and_capital_only_at_the_start():
    assert [count_word(2, begins=True), count_word(9), count_word(12), count_word(13)] == [
        "Two",
        "nine",
        "twelve",
        "13",
    ]
    assert counted(1, "part") == "1 part"
    assert counted(0, "part") == "0 parts"


def test_places_end_as_they_are_spoken():
    assert [ordinal(place) for place in (1, 2, 3, 4, 11, 12, 21, 113)] == [
        "1st", "2nd", "3rd", "4th", "11th", "12th", "21st", "113th"
    ]  # fmt: skip


def test_a_watch_crystal_is_said_in_khz():
    assert frequency_text(0.032768) == "32.768 kHz"
    assert frequency_text(26.0) == "26 MHz"


@pytest.mark.parametrize(
    ("unit", "values", "scaled"),
    [
        ("mS", (0.0105, 0.0115), (1e3, "µS")),
        ("mS", (0.05, 3.0), (1.0, "mS")),
        ("Ω", (-461564.0, -352727.0), (1e-3, "kΩ")),
        ("Ω", (900.0, 20000.0), (1.0, "Ω")),
        ("mH", (4.7e6, None), (1e-3, "H")),
        ("pF", (1e6,), (1.0, "pF")),
        ("mS", (None, None), (1.0, "mS")),
    ],
)
def test_all_values_of_a_line_go_over_to_the_unit_of_their_size_together(unit, values, scaled):
    assert scale(unit, *values) == scaled


def test_a_hyphen_before_a_number_becomes_a_minus_and_others_stay():
    assert with_minus("-27.1 to +45.6 ppm against -50/+50; MRB25-260-08H, 1e-5") == (
        "−27.1 to +45.6 ppm against −50/+50; MRB25-260-08H, 1e-5"
    )
