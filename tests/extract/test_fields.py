"""The table of fields against the data contract's section 1."""

from __future__ import annotations

import pytest

from extract.fields import field_of, fields
from extract.model import FIELD_NAMES

# The contract's units column.
UNITS = {
    "mhz": "MHz",
    "ppm": "ppm",
    "c": "°C",
    "pf": "pF",
    "ohm": "Ω",
    "ff": "fF",
    "mh": "mH",
    "uw": "µW",
    "megohm": "MΩ",
}


def test_the_table_has_the_contracts_fields_in_its_order():
    assert tuple(fields()) == FIELD_NAMES


@pytest.mark.parametrize("name", FIELD_NAMES)
def test_a_field_is_in_the_unit_its_name_ends_in(name):
    unit = field_of(name).unit
    if name.endswith("per_pf"):
        assert unit == "ppm/pF"
    elif name.endswith("per_c2"):
        assert unit == "ppm/°C²"
    else:
        assert unit == UNITS.get(name.rsplit("_", 1)[1], "")


def test_bare_marks_the_three_fields_that_the_contract_names():
    assert [name for name in FIELD_NAMES if field_of(name).bare] == [
        "esr_ohm",
        "shunt_capacitance_pf",
        "drive_level_uw",
    ]


def test_an_unknown_field_is_a_key_error():
    with pytest.raises(KeyError):
        field_of("colour")


@pytest.mark.parametrize("name", FIELD_NAMES)
def test_a_plausible_range_has_its_ends_in_order(name):
    row = field_of(name)
    assert row.mhz[0] < row.mhz[1]
    assert row.fork[0] < row.fork[1]


# Typical parts; IEC 60122-3 outlines aside, these values are common practice, no source.
ORDINARY = [
    ("esr_ohm", 60.0, False),
    ("esr_ohm", 70_000.0, True),
    ("motional_capacitance_ff", 4.2, False),
    ("motional_inductance_mh", 7_900_000.0, True),
    ("drive_level_uw", 100.0, False),
    ("drive_level_uw", 0.5, True),
    ("parabolic_coefficient_ppm_per_c2", -0.034, True),
    ("frequency_mhz", 0.032768, True),
    ("frequency_tolerance_ppm", -20.0, False),
    ("quality_factor", 80_000.0, False),
    ("insulation_resistance_megohm", 500.0, True),
]


@pytest.mark.parametrize(("name", "value", "fork"), ORDINARY)
def test_an_ordinary_value_is_plausible(name, value, fork):
    assert field_of(name).plausible(value, tuning_fork=fork)
    assert field_of(name).plausible(value)


LOST_PREFIX = [
    ("esr_ohm", 70.0, True),
    ("esr_ohm", 50_000.0, False),
    ("drive_level_uw", 100_000.0, False),
    ("motional_capacitance_ff", 0.0042, False),
    ("shunt_capacitance_pf", 1500.0, False),
    ("frequency_mhz", 32.768, True),
    ("insulation_resistance_megohm", 0.0005, False),
]


@pytest.mark.parametrize(("name", "value", "fork"), LOST_PREFIX)
def test_a_value_a_thousand_times_off_is_not(name, value, fork):
    assert not field_of(name).plausible(value, tuning_fork=fork)
