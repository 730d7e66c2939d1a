"""Unit spellings: every factor against pint's own arithmetic, and the spellings that real sheets print."""

from __future__ import annotations

import re
import warnings

import pytest

from extract.fields import fields
from extract.units import factor, guessed, kind_of, kinds, other_unit_at, unit_at
from extract.vocabulary import vocabulary

# What the printed spelling of each size is called in pint's language; sizes without a prefix need none.
PREFIXES = {
    1e-18: "a",
    1e-15: "f",
    1e-12: "p",
    1e-9: "n",
    1e-6: "u",
    1e-3: "m",
    1e3: "k",
    1e6: "M",
    1e9: "G",
    1e12: "T",
}
# The contract's unit of each field, in pint's language.
FIELD_UNITS = {
    "frequency_mhz": "megahertz",
    "frequency_tolerance_ppm": "1e-6 * dimensionless",
    "frequency_stability_ppm": "1e-6 * dimensionless",
    "ageing_ppm": "1e-6 * dimensionless",
    "operating_temperature_c": "delta_degree_Celsius",
    "storage_temperature_c": "delta_degree_Celsius",
    "turnover_temperature_c": "delta_degree_Celsius",
    "load_capacitance_pf": "picofarad",
    "shunt_capacitance_pf": "picofarad",
    "motional_capacitance_ff": "femtofarad",
    "motional_inductance_mh": "millihenry",
    "esr_ohm": "ohm",
    "insulation_resistance_megohm": "megaohm",
    "drive_level_uw": "microwatt",
    "quality_factor": "dimensionless",
    "capacitance_ratio": "dimensionless",
    "pulling_sensitivity_ppm_per_pf": "1e-6 / picofarad",
    "parabolic_coefficient_ppm_per_c2": "1e-6 / delta_degree_Celsius ** 2",
}


@pytest.fixture(scope="module")
def pint_units():
    with warnings.catch_warnings():
        warnings.simplefilter("ignore")
        import pint

        return pint.UnitRegistry(cache_folder=None)


@pytest.mark.parametrize("field", FIELD_UNITS)
def test_one_base_unit_in_the_fields_unit_is_what_pint_makes_of_it(field, pint_units):
    kind = kind_of(field)
    base = pint_units.parse_expression(kind.pint)
    base = base if hasattr(base, "units") else pint_units.Quantity(base, "dimensionless")
    unit = pint_units.parse_expression(FIELD_UNITS[field])
    assert (1 * base / unit).to_base_units().magnitude == pytest.approx(kind.fields[field], rel=1e-12)


def spelt(kind_name: str, letters: str) -> list[tuple[str, str]]:
    """(as printed, as pint calls it) for every plain spelling of a prefix and `letters`."""
    pattern = re.compile(rf"([afpnumkMGTμ]?){letters}")
    matches = [pattern.fullmatch(spelling) for spelling in kinds()[kind_name].exact]
    return [(match[0], match[1].replace("μ", "u")) for match in matches if match]


@pytest.mark.parametrize(
    ("kind", "letters", "pint_name", "field"),
    [
        ("resistance", "Ω", "ohm", "esr_ohm"),
        ("resistance", "ohm", "ohm", "insulation_resistance_megohm"),
        ("capacitance", "F", "farad", "motional_capacitance_ff"),
        ("frequency", "Hz", "hertz", "frequency_mhz"),
        ("power", "W", "watt", "drive_level_uw"),
        ("inductance", "H", "henry", "motional_inductance_mh"),
    ],
)
def test_every_prefix_is_the_size_that_pint_gives_it(kind, letters, pint_name, field, pint_units):
    spellings = spelt(kind, letters)
    assert len(spellings) >= 3
    for printed, prefix in spellings:
        if guessed(printed, field):
            continue
        quantity = pint_units.parse_expression(f"{prefix}{pint_name}")
        expected = quantity.to(FIELD_UNITS[field]).magnitude
        assert factor(printed, field) == pytest.approx(expected, rel=1e-12), printed


def test_every_field_has_a_kind_and_every_kind_only_fields():
    assert {field for kind in kinds().values() for field in kind.fields} == set(fields())


# As printed on real sheets.
SPELLINGS = [
    ("Ω", "esr_ohm", 1),
    ("Ω", "esr_ohm", 1),
    ("KΩ", "esr_ohm", 1e3),
    ("K ohm", "esr_ohm", 1e3),
    ("k Ohms", "esr_ohm", 1e3),
    ("㏀", "esr_ohm", 1e3),
    ("OHMS", "esr_ohm", 1),
    ("K", "esr_ohm", 1e3),
    ("M Ohm", "insulation_resistance_megohm", 1),
    ("㏁", "insulation_resistance_megohm", 1),
    ("GΩ", "insulation_resistance_megohm", 1e3),
    ("M", "insulation_resistance_megohm", 1),
    ("pf", "load_capacitance_pf", 1),
    ("pF", "motional_capacitance_ff", 1e3),
    ("fF", "motional_capacitance_ff", 1),
    ("Mhz", "frequency_mhz", 1),
    ("KHZ", "frequency_mhz", 1e-3),
    ("MHZ", "frequency_mhz", 1),
    ("PPM", "frequency_tolerance_ppm", 1),
    ("×10⁻⁶", "ageing_ppm", 1),
    ("x 10-6", "ageing_ppm", 1),
    ("%", "ageing_ppm", 1e4),
    ("℃", "operating_temperature_c", 1),
    ("º C", "operating_temperature_c", 1),
    ("degC", "turnover_temperature_c", 1),
    ("µW", "drive_level_uw", 1),
    ("μW", "drive_level_uw", 1),
    ("uw", "drive_level_uw", 1),
    ("mW", "drive_level_uw", 1e3),
    ("ppm/°C²", "parabolic_coefficient_ppm_per_c2", 1),
    ("PPM/ (∆°C)2", "parabolic_coefficient_ppm_per_c2", 1),
    ("ppm/T²", "parabolic_coefficient_ppm_per_c2", 1),
    ("/°C²", "parabolic_coefficient_ppm_per_c2", 1),
    ("×10⁻⁸/℃²", "parabolic_coefficient_ppm_per_c2", 1e-2),
    ("ppm/pF", "pulling_sensitivity_ppm_per_pf", 1),
]


@pytest.mark.parametrize(("printed", "field", "size"), SPELLINGS)
def test_a_spelling_of_real_sheets_has_its_size(printed, field, size):
    assert factor(printed, field) == size


def test_a_unit_of_another_quantity_is_none():
    assert factor("pF", "esr_ohm") is None
    assert factor("MHz", "load_capacitance_pf") is None


def test_one_letter_means_what_its_field_makes_of_it():
    assert factor("K", "esr_ohm") == 1e3
    assert factor("K", "frequency_mhz") == 1e-3
    assert factor("K", "operating_temperature_c") is None


def test_a_unit_is_found_where_it_stands_with_a_bound_word_glued_to_it():
    assert unit_at("200μWMax.", "drive_level_uw", 3) == ("μW", 1.0, 5)
    assert unit_at("500M Ohm min", "insulation_resistance_megohm", 3) == ("M Ohm", 1.0, 8)


def test_the_first_letters_of_a_word_are_no_unit():
    assert unit_at("8 pieces", "load_capacitance_pf", 1) is None
    assert unit_at("60 Runs", "esr_ohm", 2) is None


def test_ppm_of_something_per_something_is_no_ppm():
    assert unit_at("-0.04 ppm/°C^2", "frequency_stability_ppm", 5) is None
    assert other_unit_at("-0.04 ppm/°C^2", "frequency_stability_ppm", 5) == ("parabola", 1e-6, 14)


def test_a_spelling_that_lacks_something_is_marked():
    assert guessed("ppm", "pulling_sensitivity_ppm_per_pf")
    assert guessed("MW", "drive_level_uw")
    assert not guessed("K", "esr_ohm")


def test_no_bound_word_is_a_unit():
    units = {spelling for kind in kinds().values() for spelling in kind.caseless}
    assert not units & set(vocabulary().bounds)
