"""Conditions and bands as printed. Readings by hand; the forms are those of a survey of real sheets."""

from __future__ import annotations

import pytest

from extract.band import HIGHEST_MHZ, LOWEST_MHZ, joined, read_band, read_when
from extract.model import When

BANDS = [
    ("12.001 - 20.000", None, (12.001, 20)),
    ("8 ~ 11.2892MHz", None, (8, 11.2892)),
    ("3.2MHz - <4.0MHz", None, (3.2, 4)),
    ("16.0 MHz ≤ f_nom < 18.0 MHz", None, (16, 18)),
    ("3.5MHz≦f0<4.0MHz", None, (3.5, 4)),
    ("5.000MHz < F < 6.000MHz", None, (5, 6)),
    ("13560 to 15999kHz", None, (13.56, 15.999)),
    ("13560 to 15999", "kHz", (13.56, 15.999)),
    ("13560 to 15999", None, (13.56, 15.999)),
    ("12.000", None, (12, 12)),
    ("12.000", "MHz", (12, 12)),
    ("3,5 – 4,0 MHz", None, (3.5, 4)),
    ("8.000 bis 9.999", "MHz", (8, 9.999)),
    ("8.000 ～ 9.999", "MHz", (8, 9.999)),
    ("40 MHz ≤ f", None, (40, HIGHEST_MHZ)),
    ("F ≥ 20 MHz", None, (20, HIGHEST_MHZ)),
    ("below 16 MHz", None, (LOWEST_MHZ, 16)),
    ("f < 10 MHz", None, (LOWEST_MHZ, 10)),
    ("24.01-31.999 (3rd O/T)", "MHz", (24.01, 31.999)),
]


@pytest.mark.parametrize(("printed", "unit", "band"), BANDS)
def test_a_band_reads_in_mhz(printed, unit, band):
    assert read_band(printed, unit) == pytest.approx(band)


@pytest.mark.parametrize("printed", ["Fundamental", "-", "", "-40 to +85 °C", "60 Ω", "QX16"])
def test_what_is_no_band_is_none(printed):
    assert read_band(printed) is None


CONDITIONS = [
    ("-20 to +70 °C", When(temperature_c=(-20, 70))),
    ("16.000-50.000 MHz (Fund.)", When(frequency_mhz=(16, 50), mode="fundamental")),
    ("3rd OT", When(mode="third overtone")),
    ("CL = 12.5 pF", When(load_capacitance_pf=(12.5, 12.5))),
    ("at 7 pF", When(load_capacitance_pf=(7, 7))),
    ("first year", When(years=1)),
    ("after 10 years", When(years=10)),
    ("10年", When(years=10)),
    ("im ersten Jahr", When(years=1)),
    ("@25±3 °C", When()),
    ("at +25 °C", When()),
    ("DC 100 V ±15 V", When()),
    ("measured at 1 MHz", When()),
    ("Reference +25 °C", When()),
    ("DL = 100 µW", When()),
]


@pytest.mark.parametrize(("printed", "when"), CONDITIONS)
def test_a_condition_says_where_the_value_holds_and_a_measurement_says_nothing(printed, when):
    assert read_when(printed) == when


def test_the_later_of_two_conditions_of_one_kind_counts():
    assert joined(When(years=1, mode="fundamental"), When(years=10)) == When(years=10, mode="fundamental")


def test_a_frequency_below_zero_is_no_band():
    assert read_when("-20 to 18 MHz").frequency_mhz is None
