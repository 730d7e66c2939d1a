"""What the sign and the kind of a field make of a number. The data contract's section 1 and facts of the trade."""

from __future__ import annotations

from extract.amount import read_values
from extract.bounds import Value


def test_a_value_without_bounds_is_empty_and_series_is_not():
    assert Value().empty
    assert not Value(series=True).empty
    assert not Value(options=(8.0,)).empty


def test_only_resistance_shunt_and_drive_are_bare():
    assert read_values("60 Ω", "esr_ohm")[0].bare
    assert read_values("3 pF", "shunt_capacitance_pf")[0].bare
    assert read_values("100 µW", "drive_level_uw")[0].bare
    assert not read_values("8 pF", "load_capacitance_pf")[0].bare


def test_a_bound_in_the_heading_takes_the_mark_away():
    assert not read_values("60 Ω", "esr_ohm", bound="max")[0].bare


def test_a_limit_on_the_size_of_a_negative_coefficient_is_its_min_beside_a_typical_too():
    (value,) = read_values("-0.034 typ, -0.04 max ppm/°C²", "parabolic_coefficient_ppm_per_c2")
    assert (value.min, value.typ, value.max) == (-0.04, -0.034, None)


def test_two_limits_for_one_case_stay_two_values():
    values = read_values("60 Ω max\n80 Ω max", "esr_ohm")
    assert [value.max for value in values] == [60, 80]


def test_a_percentage_around_a_value_is_worked_out_to_the_fields_digits():
    (value,) = read_values("2.1 fF ±15 %", "motional_capacitance_ff")
    assert (value.min, value.typ, value.max) == (1.785, 2.1, 2.415)
