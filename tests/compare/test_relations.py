"""How one reading stands to another, and how both are said."""

import pytest
from made_sheets import reading

from compare.changes import as_taken
from compare.footprint import same_package, size_mm
from compare.relations import reading_words, relation, rules
from compare.verdict import GAINS
from extract.model import FIELD_NAMES


def stated(field, bounds):
    return reading(field, bounds.get("typ"), **{name: value for name, value in bounds.items() if name != "typ"})


PAIRS = [
    ("esr_ohm", {"max": 60.0}, {"max": 50.0}, "tighter"),
    ("esr_ohm", {"max": 60.0}, {"max": 60.0, "typ": 30.0}, "same"),
    ("esr_ohm", {"max": 60.0}, {"typ": 30.0}, "unknown"),
    ("esr_ohm", {"max": 60.0}, {"typ": 70.0}, "looser"),
    ("esr_ohm", {"max": 60.0}, {"typ": 60.0, "bare": True}, "same"),
    ("esr_ohm", {"typ": 30.0}, {"typ": 40.0}, "looser"),
    ("frequency_tolerance_ppm", {"min": -10.0, "max": 10.0}, {"min": -5.0, "max": 10.0}, "tighter"),
    ("frequency_tolerance_ppm", {"min": -10.0, "max": 10.0}, {"min": -5.0, "max": 15.0}, "different"),
    ("operating_temperature_c", {"min": -40.0, "max": 85.0}, {"min": -20.0, "max": 70.0}, "looser"),
    ("operating_temperature_c", {"min": -40.0, "max": 85.0}, {"min": -20.0, "max": 105.0}, "different"),
    ("drive_level_uw", {"max": 100.0}, {"max": 200.0}, "tighter"),
    ("shunt_capacitance_pf", {"max": 3.0}, {"max": 2.0}, "tighter"),
    ("load_capacitance_pf", {"typ": 8.0}, {"typ": 9.0}, "different"),
    ("motional_capacitance_ff", {"min": 3.0, "max": 5.0}, {"min": 3.5, "max": 4.5}, "tighter"),
    ("motional_capacitance_ff", {"typ": 4.0}, {"min": 3.5, "max": 4.5}, "different"),
    ("parabolic_coefficient_ppm_per_c2", {"min": -0.04}, {"min": -0.036}, "tighter"),
    ("turnover_temperature_c", {"min": 20.0, "typ": 25.0, "max": 30.0}, {"typ": 25.0}, "different"),
]
MIRROR = {"tighter": "looser", "looser": "tighter"}


@pytest.mark.parametrize(("field", "old", "new", "expected"), PAIRS)
def test_the_relation_and_its_mirror(field, old, new, expected):
    first, second = (as_taken(stated(field, bounds)) for bounds in (old, new))
    assert relation(field, first, second) == expected
    assert relation(field, second, first) == MIRROR.get(expected, expected)


WORDS = [
    ("frequency_tolerance_ppm", {"min": -10.0, "max": 10.0}, "±10 ppm"),
    ("frequency_tolerance_ppm", {"options": (10.0, 20.0)}, "±10, ±20 ppm"),
    ("esr_ohm", {"max": 60.0}, "60 Ω max"),
    ("esr_ohm", {"typ": 30.0, "max": 60.0}, "30 Ω typ, 60 Ω max"),
    ("esr_ohm", {"typ": 60.0, "bare": True}, "60 Ω"),
    ("operating_temperature_c", {"min": -40.0, "max": 85.0}, "-40 to 85 °C"),
    ("turnover_temperature_c", {"min": 20.0, "typ": 25.0, "max": 30.0}, "25 (20 to 30) °C"),
    ("frequency_mhz", {"typ": 26.000015}, "26.000015 MHz"),
    ("capacitance_ratio", {"typ": 300.0}, "300"),
]


@pytest.mark.parametrize(("field", "bounds", "words"), WORDS)
def test_bounds_are_said_as_a_person_says_them(field, bounds, words):
    assert reading_words(stated(field, bounds)) == words


def test_every_field_of_the_contract_has_its_rule():
    assert set(rules()) == set(FIELD_NAMES)


def test_the_gains_rest_on_esr_and_c0_and_nothing_else():
    for gain in GAINS:
        assert {field for field, rule in rules().items() if gain in rule.rests} == {"esr_ohm", "shunt_capacitance_pf"}


@pytest.mark.parametrize(
    ("one", "other", "same"),
    [
        ("2.5 x 2.0 mm", "2,5 × 2,0 × 0,5 mm", True),
        ("2.5 x 2.0", "SMD 2520", True),
        ("2.0 x 2.5", "2.5 x 2.0", True),
        ("3.2 x 2.5", "2.5 x 2.0", False),
        ("3225", "3.2 x 2.5 mm, 4 pads", True),
        ("HC-49/US", "HC49US", True),
        ("HC-49/US", "HC-49/U", False),
        ("HC-49/US", "2.5 x 2.0", False),
    ],
)
def test_packages_are_the_same_by_size_else_by_name(one, other, same):
    assert same_package(one, other) is same
    assert same_package(other, one) is same


def test_the_trades_four_digits_are_a_size():
    """Common practice, no source: 2520 is 2.5 x 2.0 mm."""
    assert size_mm("SMD2520-4P") == (2.5, 2.0)
