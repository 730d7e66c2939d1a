"""Printed values cut into pieces: what each piece is, in the light of the field. Read by hand."""

from __future__ import annotations

import pytest

from extract.fold import fold
from extract.tokens import tokens

KINDS = [
    ("60 Ω max.", "esr_ohm", ["number", "unit", "bound"]),
    ("60 Ω max.", "load_capacitance_pf", ["number", "other", "bound"]),
    ("-40°C～+85°C", "operating_temperature_c", ["number", "unit", "to", "number", "unit"]),
    ("-40-85", "operating_temperature_c", ["number", "to", "number"]),
    ("(100 max.) µW", "drive_level_uw", ["open", "number", "bound", "close", "unit"]),
    ("±3 ppm/year", "ageing_ppm", ["pm", "number", "unit", "years"]),
    ("100 Ω (3rd OT)", "esr_ohm", ["number", "unit", "open", "mode", "close"]),
    ("8,10,12.5pF", "load_capacitance_pf", ["number", "sep", "number", "sep", "number", "unit"]),
    ("最大100μW", "drive_level_uw", ["bound", "number", "unit"]),
]


@pytest.mark.parametrize(("printed", "field", "kinds"), KINDS)
def test_a_printed_value_comes_apart(printed, field, kinds):
    assert [token.kind for token in tokens(fold(printed), field)] == kinds


def test_the_sign_of_a_number_and_the_dash_of_a_range_are_told_apart():
    signs = [token.meaning for token in tokens("-20--10", "operating_temperature_c") if token.kind == "number"]
    assert signs == ["-", "-"]


def test_a_number_that_touches_letters_is_marked():
    (number, *_) = tokens("5S", "ageing_ppm")
    assert number.glued


def test_a_power_of_ten_is_part_of_the_number_where_it_is_no_unit():
    (number, unit) = tokens("5×10^8 Ω", "esr_ohm")
    assert number.number is not None
    assert (number.number.plain, unit.kind) == (5e8, "unit")


def test_the_words_that_reach_a_position_cover_the_text_in_order():
    pieces = tokens(fold("max. 60 Ω for 12 MHz ≤ f < 16 MHz, ±5 ppm first year"), "esr_ohm")
    assert [piece.start for piece in pieces] == sorted(piece.start for piece in pieces)
    assert all(one.end <= other.start for one, other in zip(pieces, pieces[1:], strict=False))
