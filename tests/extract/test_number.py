"""Printed numbers: which mark is the decimal one, decided by form, field and sheet. Readings by hand."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from extract.fields import field_of
from extract.number import decide, number, numbers

PLAIN = [
    ("12", 12),
    ("12.5", 12.5),
    ("12,5", 12.5),
    (".5", 0.5),
    (",5", 0.5),
    ("0,0036", 0.0036),
    ("16.000000", 16),
    ("7,372800", 7.3728),
    ("1,000,000", 1e6),
    ("1.000.000", 1e6),
    ("1,234.5", 1234.5),
    ("1.234,5", 1234.5),
    ("1 000", 1000),
    ("1'000", 1000),
    ("0.500", 0.5),
]


@pytest.mark.parametrize(("printed", "value"), PLAIN)
def test_a_number_whose_form_settles_it_has_one_reading(printed, value):
    read = number(printed)
    assert read is not None
    assert (read.plain, read.grouped) == (value, None)


@pytest.mark.parametrize(
    ("printed", "plain", "grouped"), [("1.000", 1, 1000), ("32,768", 32.768, 32768), ("999.999", 999.999, 999999)]
)
def test_three_digits_behind_one_mark_may_be_thousands(printed, plain, grouped):
    read = number(printed)
    assert read is not None
    assert (read.plain, read.grouped) == (plain, grouped)


@pytest.mark.parametrize("printed", ["19.12.2011", "1.2.3", "1,00,0"])
def test_marks_that_make_no_number_are_refused(printed):
    assert number(printed) is None


def test_a_list_without_spaces_comes_apart():
    assert [one.plain for one in numbers("8,10,12.5")] == [8, 10, 12.5]
    assert numbers("19.12.2011") == []


DECIDED = [
    # printed, factor, field, value in printed units, whether it is doubtful
    ("32,768", 1e-3, "frequency_mhz", 32.768, False),
    ("16,000", 1, "frequency_mhz", 16, False),
    ("16.000", 1, "frequency_mhz", 16, False),
    ("38,400", 1e-3, "frequency_mhz", 38_400, True),
    ("1,000", 1, "insulation_resistance_megohm", 1000, False),
    ("60.000", 1, "quality_factor", 60_000, False),
    ("70,000", 1, "esr_ohm", 70_000, True),
    ("1.250", 1, "shunt_capacitance_pf", 1.25, False),
]


@pytest.mark.parametrize(("printed", "factor", "field", "value", "doubtful"), DECIDED)
def test_what_the_field_bears_decides_and_a_toss_up_is_said(printed, factor, field, value, doubtful):
    read = number(printed)
    assert read is not None
    meant, doubt = decide(read, factor, field_of(field))
    assert (meant, doubt is not None) == (value, doubtful)


def test_the_sheets_own_mark_decides_without_doubt():
    read = number("70,000")
    assert read is not None
    assert decide(read, 1, field_of("esr_ohm"), decimal=",") == (70, None)
    assert decide(read, 1, field_of("esr_ohm"), decimal=".") == (70_000, None)


@given(st.integers(0, 10**9))
def test_thousands_read_back_in_every_dress(value):
    for mark in (",", ".", " ", "'"):
        read = number(f"{value:,}".replace(",", mark))
        assert read is not None
        assert value in (read.plain, read.grouped)
