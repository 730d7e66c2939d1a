"""Numbers that belong together, and what stands by them. Read by hand."""

from __future__ import annotations

import pytest

from extract.fold import fold
from extract.groups import Group, read_items
from extract.tokens import tokens


def groups(printed: str, field: str) -> list[Group]:
    items = read_items(tokens(fold(printed), field), field, plain_pair=field.endswith("temperature_c"))
    return [item.group for item in items if item.group is not None]


SHAPES = [
    ("±20 ppm", "frequency_tolerance_ppm", ["pm"]),
    ("25 ±5 °C", "turnover_temperature_c", ["centre"]),
    ("-40 to +85 °C", "operating_temperature_c", ["range"]),
    ("-40/85", "operating_temperature_c", ["range"]),
    ("-5/+15 ppm", "frequency_tolerance_ppm", ["range"]),
    ("±10 to ±50 ppm", "frequency_stability_ppm", ["grades"]),
    ("8, 10 pF", "load_capacitance_pf", ["single", "single"]),
    ("3.5 MHz ≤ f < 4.0 MHz", "esr_ohm", ["range"]),
    ("between 8 and 10 MHz", "frequency_mhz", ["range"]),
    ("3.2 x 2.5 mm", "load_capacitance_pf", []),
    ("see table 1", "esr_ohm", []),
]


@pytest.mark.parametrize(("printed", "field", "shapes"), SHAPES)
def test_numbers_group_by_what_stands_between_them(printed, field, shapes):
    assert [group.shape for group in groups(printed, field)] == shapes


def test_a_tolerance_in_a_unit_of_its_own_is_a_group_of_its_own():
    frequency, tolerance = groups("32.768 kHz ±20 ppm", "frequency_tolerance_ppm")
    assert (frequency.foreign, tolerance.shape, tolerance.foreign) == ("frequency", "pm", None)


def test_a_comparison_bounds_its_number():
    assert [group.bound for group in groups("≤ 60 Ω", "esr_ohm")] == ["max"]
    assert [group.bound for group in groups("40 MHz ≤ f", "esr_ohm")] == ["min"]


def test_the_symbol_of_another_field_marks_the_number_behind_it():
    assert groups("60 Ω, CL = 8 pF", "esr_ohm")[1].before == "symbol load_capacitance_pf"
