"""Number formats. Expected texts follow ISO/IEC 29500-1, 18.8.31, save where no figure may be lost (see the module)."""

from __future__ import annotations

import pytest

from extract.documents.numberformat import adds_something, general, shown


@pytest.mark.parametrize(
    ("value", "code", "text"),
    [
        (8, '0.0" pF"', "8.0 pF"),
        (10, '"±"0" ppm"', "±10 ppm"),
        (10, "\\±0", "±10"),
        (60, '0\\ "Ω"', "60 Ω"),
        (12, "0.000000", "12.000000"),
        (0.005, "0.0%", "0.5%"),
        (-40, "0;-0", "-40"),
        (-40, "0;(0)", "(40)"),
        (-40, "0;[Red]0", "-40"),
        (0, '0;-0;"none"', "none"),
        (1250, "#,##0", "1250"),
        (1250, "#,##0.00", "1250.00"),
        (25000, '0.0,"k"', "25.0k"),
        (7, "000", "007"),
        (0.21, "[$€-407]\\ 0.00", "€ 0.21"),
        (32.768, 'General" kHz"', "32.768 kHz"),
        (0.0000125, "0.00E+00", "1.25E-05"),
        (5, "0_);(0)", "5"),
    ],
)
def test_a_number_is_shown_as_its_format_says(value: float, code: str, text: str) -> None:
    assert shown(value, code) == text


@pytest.mark.parametrize(("value", "code"), [(14.31818, "0.00"), (3.579545, "0.0"), (0.034, "0")])
def test_digits_that_a_format_would_round_away_are_kept(value: float, code: str) -> None:
    assert float(shown(value, code)) == value


@pytest.mark.parametrize(
    ("value", "text"), [(8.0, "8"), (0.1 + 0.2, "0.3"), (14.31818, "14.31818"), (-0.034, "-0.034"), (70000.0, "70000")]
)
def test_a_plain_number_has_no_noise_and_no_empty_decimals(value: float, text: str) -> None:
    assert general(value) == text


def test_formats_that_show_the_bare_number_are_passed_over() -> None:
    assert not any(adds_something(code) for code in ("General", "0", "@", "#,##0"))
