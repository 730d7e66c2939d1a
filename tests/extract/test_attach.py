"""Which number a word speaks of, seen from the values that come out. Read by hand."""

from __future__ import annotations

import pytest

from extract.amount import read_values

ORDERS = [
    ("30 typ 60 max Ω", 30, 60),
    ("typ 30 max 60 Ω", 30, 60),
    ("max 60 typ 30 Ω", 30, 60),
    ("60 max, 30 typ Ω", 30, 60),
    ("30 Ω (typ.) 60 Ω (max.)", 30, 60),
    ("30 (60 max.) Ω", 30, 60),
    ("60 Ω\nmax.", None, 60),
]


@pytest.mark.parametrize(("printed", "typ", "limit"), ORDERS)
def test_a_bound_word_speaks_of_the_number_it_was_printed_with(printed, typ, limit):
    (value,) = read_values(printed, "esr_ohm")
    assert (value.typ, value.max) == (typ, limit)


def test_a_band_at_the_head_of_a_line_governs_that_line_and_no_other():
    values = read_values("8-10 MHz: 30 typ, 100 max Ω\n10-12 MHz: 80 Ω max", "esr_ohm")
    assert [(value.typ, value.max, value.when.frequency_mhz) for value in values] == [
        (30, 100, (8, 10)),
        (None, 80, (10, 12)),
    ]


def test_a_mode_at_the_head_governs_all_until_the_next():
    values = read_values("Fundamental\n60 Ω max (8-12 MHz)\n40 Ω max (12-30 MHz)\n3rd overtone\n100 Ω max", "esr_ohm")
    assert [(value.max, value.when.mode) for value in values] == [
        (60, "fundamental"),
        (40, "fundamental"),
        (100, "third overtone"),
    ]


def test_a_number_apart_from_the_units_is_no_value():
    (value,) = read_values("60 Ω max, IEC 60444 network", "esr_ohm")
    assert value.max == 60


def test_a_bound_behind_another_propertys_amount_limits_nothing_before_it():
    (value,) = read_values("8 pF ±10 ppm 60 Ω max", "load_capacitance_pf")
    assert (value.typ, value.max) == (8.0, None)
