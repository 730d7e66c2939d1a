"""Footnote marks beside amounts, in the forms that sheets print; the readings are by hand."""

from __future__ import annotations

from typing import Any

import pytest

from extract.amount import read_values

ESR, DRIVE, LOAD, TOL, C0 = (
    "esr_ohm",
    "drive_level_uw",
    "load_capacitance_pf",
    "frequency_tolerance_ppm",
    "shunt_capacitance_pf",
)

MARKED = [
    *[
        (f"60 Ω max{mark}", ESR, {"max": 60.0})
        for mark in (" (2)", ". 1)", " *1", " (*1)", " ⁽¹⁾", "¹⁾", " ¹", " ①", " [1]", " ※1", " 注1", " (Note 1)")
    ],
    ("60 (2)", ESR, {"typ": 60.0}),
    ("10 µW typ., 200 µW max. (1)", DRIVE, {"typ": 10.0, "max": 200.0}),
    ("±20 ppm 2)", TOL, {"min": -20.0, "max": 20.0}),
    ("±20 ppm, ±30 ppm (2)", TOL, {"options": (20.0, 30.0)}),
    ("7, 9, 12.5 pF ③", LOAD, {"options": (7.0, 9.0, 12.5)}),
    ("1) ±10 ppm", TOL, {"min": -10.0, "max": 10.0}),
]

NO_MARKS = [
    ("10 (100 max.) µW", DRIVE, {"typ": 10.0, "max": 100.0}),
    ("2 (3 max) pF", C0, {"typ": 2.0, "max": 3.0}),
    ("100 µW max (5 µW typ)", DRIVE, {"typ": 5.0, "max": 100.0}),
    ("12.5 pF (7)", LOAD, {"options": (12.5, 7.0)}),
    ("12.5 pF (9, 7)", LOAD, {"options": (12.5, 9.0, 7.0)}),
]


@pytest.mark.parametrize(("text", "field", "expected"), [*MARKED, *NO_MARKS])
def test_a_footnote_mark_is_no_number_of_the_value_and_a_bracketed_value_is_no_mark(
    text: str, field: str, expected: dict[str, Any]
) -> None:
    (value,) = read_values(text, field)
    stated = {name: getattr(value, name) for name in ("min", "typ", "max", "options")}
    assert {name: each for name, each in stated.items() if each not in (None, ())} == expected
