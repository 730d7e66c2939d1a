"""Which reading holds in a case, and what span its bounds stand for."""

import pytest
from made_sheets import part, reading

from compare.stated import Case, Facts, Span, rated_drive, span_of, take

CASE = Case((16.0,), mode="fundamental", load_pf=9.0, package="3225")


def esr_at(*readings, case=CASE):
    return take(Facts.of(part(*readings)), "esr_ohm", case)


def test_a_reading_without_a_band_holds_everywhere():
    assert esr_at(reading("esr_ohm", max=60.0)).span.high == 60.0


@pytest.mark.parametrize(
    ("when", "holds"),
    [
        ({"frequency_mhz": (12.0, 16.0)}, True),  # both ends belong to the band
        ({"frequency_mhz": (16.0, 20.0)}, True),
        ({"frequency_mhz": (16.1, 20.0)}, False),
        ({"load_capacitance_pf": (9.0, 9.0)}, True),
        ({"load_capacitance_pf": (10.0, 12.0)}, False),
        ({"mode": "fundamental"}, True),
        ({"mode": "third overtone"}, False),
        ({"package": "3225"}, True),
        ({"package": "2016"}, False),
        ({"temperature_c": (20.0, 30.0)}, True),  # the circuit itself is taken at room
        ({"temperature_c": (-40.0, -40.0)}, False),
    ],
)
def test_a_band_holds_or_does_not(when, holds):
    assert esr_at(reading("esr_ohm", max=60.0, **when)).stated is holds


def test_no_band_that_holds_is_not_stated():
    assert not esr_at(reading("esr_ohm", max=60.0, frequency_mhz=(8.0, 12.0))).stated


def test_a_narrower_band_goes_before_a_wider():
    wide = reading("esr_ohm", max=80.0, frequency_mhz=(8.0, 30.0))
    narrow = reading("esr_ohm", max=50.0, frequency_mhz=(12.0, 20.0))
    assert esr_at(wide, narrow).span.high == 50.0


def test_a_band_goes_before_no_band():
    assert esr_at(reading("esr_ohm", max=80.0), reading("esr_ohm", max=50.0, mode="fundamental")).span.high == 50.0


def test_of_two_bands_that_share_an_end_the_worse_counts():
    below = reading("esr_ohm", max=80.0, frequency_mhz=(12.0, 16.0))
    above = reading("esr_ohm", max=50.0, frequency_mhz=(16.0, 40.0))
    taken = esr_at(below, above)
    assert taken.span == Span(50.0, 80.0, 80.0)
    assert taken.said == ("2 readings of esr_ohm hold; the worse counts for each requirement",)


def test_a_package_that_is_not_known_may_be_any():
    small = reading("esr_ohm", max=80.0, package="2016")
    assert esr_at(small, case=Case((16.0,), package=None)).stated


SPANS = [
    # stated                                            taken                     rule
    (reading("esr_ohm", max=60.0), Span(60.0, 60.0, 60.0)),  # a limit alone is used for all three
    (reading("esr_ohm", 60.0, bare=True), Span(60.0, 60.0, 60.0)),  # and so is a bare value
    (reading("esr_ohm", 40.0, max=60.0), Span(40.0, 40.0, 60.0)),  # an open end at the nearest stated value
    (reading("esr_ohm", min=20.0, max=60.0), Span(20.0, 60.0, 60.0)),  # mid is typical, else the limit
    (reading("shunt_capacitance_pf", 1.5), Span(1.5, 1.5, 1.5)),
    (reading("shunt_capacitance_pf", min=1.0, max=2.0), Span(1.0, 2.0, 2.0)),
    (reading("frequency_tolerance_ppm", min=-5.0, max=15.0), Span(-5.0, 0.0, 15.0)),
    (reading("frequency_tolerance_ppm", min=0.0, max=50.0), Span(0.0, 0.0, 50.0)),
    (reading("frequency_tolerance_ppm", 10.0), Span(-10.0, 0.0, 10.0)),  # the ± lost on the sheet
    (reading("ageing_ppm", max=3.0), Span(-3.0, 0.0, 3.0)),
    (reading("turnover_temperature_c", 25.0, min=20.0, max=30.0), Span(20.0, 25.0, 30.0)),
    (reading("parabolic_coefficient_ppm_per_c2", min=-0.04), Span(-0.04, -0.04, -0.04)),
    (reading("motional_capacitance_ff", min=2.0, max=4.0), Span(2.0, 3.0, 4.0)),
]


@pytest.mark.parametrize(("stated", "taken"), SPANS)
def test_bounds_become_a_span(stated, taken):
    assert span_of(stated) == taken


def test_a_typical_esr_without_a_limit_promises_nothing():
    assert esr_at(reading("esr_ohm", 40.0)).typical_only
    assert not esr_at(reading("esr_ohm", 40.0, bare=True)).typical_only
    assert not esr_at(reading("esr_ohm", 40.0, max=60.0)).typical_only


def test_a_bare_value_and_a_maximum_are_reckoned_alike():
    """A reader may put a bare value under typ or under max."""
    under_typ = esr_at(reading("esr_ohm", 60.0, bare=True))
    under_max = esr_at(reading("esr_ohm", max=60.0, bare=True, status="inferred"))
    assert (under_typ.span, under_typ.limit_alone) == (under_max.span, under_max.limit_alone)


@pytest.mark.parametrize(
    ("readings", "rated"),
    [
        ([reading("drive_level_uw", 10.0, max=100.0)], 100.0),
        ([reading("drive_level_uw", 50.0, bare=True)], 50.0),
        ([reading("drive_level_uw", 10.0)], 10.0),
        ([reading("drive_level_uw", 50.0, bare=True), reading("drive_level_uw", max=80.0)], 80.0),
        ([reading("drive_level_uw", max=100.0), reading("drive_level_uw", max=80.0)], 80.0),
    ],
)
def test_the_rated_drive_is_the_maximum_else_a_bare_value_else_typical(readings, rated):
    assert rated_drive(Facts.of(part(*readings)), CASE).span.mid == rated


def test_zero_or_below_is_no_capacitance_and_no_resistance():
    """Sheets print 0 where they state nothing: "0 | 5" under Min and Max is a maximum of 5."""
    shunt = take(Facts.of(part(reading("shunt_capacitance_pf", min=0.0, max=5.0))), "shunt_capacitance_pf", CASE)
    assert (shunt.span, shunt.limit_alone) == (Span(5.0, 5.0, 5.0), True)
    assert not esr_at(reading("esr_ohm", max=0.0)).stated
