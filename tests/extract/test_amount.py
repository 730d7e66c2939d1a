"""Printed amounts against the data contract's own examples and against forms seen on real sheets, read by hand."""

from __future__ import annotations

from typing import Any

import pytest
from hypothesis import given
from hypothesis import strategies as st

from extract.amount import Value, as_plus_minus, decimal_mark, field_for, read_values
from extract.model import When

TOL, STAB, AGE = "frequency_tolerance_ppm", "frequency_stability_ppm", "ageing_ppm"
FREQ, LOAD, ESR, C0, C1 = (
    "frequency_mhz",
    "load_capacitance_pf",
    "esr_ohm",
    "shunt_capacitance_pf",
    "motional_capacitance_ff",
)
OPER, TURN, PARA = "operating_temperature_c", "turnover_temperature_c", "parabolic_coefficient_ppm_per_c2"
DRIVE, INS, Q, PULL = (
    "drive_level_uw",
    "insulation_resistance_megohm",
    "quality_factor",
    "pulling_sensitivity_ppm_per_pf",
)


def said(value: Value) -> dict[str, Any]:
    """What a value states, without its doubts and its text."""
    names = ("min", "typ", "max", "options", "bare", "series")
    stated = {
        name: getattr(value, name)
        for name in names
        if getattr(value, name) not in (None, ()) and getattr(value, name) is not False
    }
    return stated | {name: condition for name, condition in value.when if condition is not None}


# The contract's section 1, word for word.
CONTRACT = [
    ("±10 ppm", TOL, [{"min": -10, "max": 10}]),
    ("-5/+15 ppm", TOL, [{"min": -5, "max": 15}]),
    ("25 ±5 °C", TURN, [{"min": 20, "typ": 25, "max": 30}]),
    ("60 Ω max", ESR, [{"max": 60}]),
    ("≤ 60 Ω", ESR, [{"max": 60}]),
    ("8, 10, 12.5 pF", LOAD, [{"options": (8, 10, 12.5)}]),
    ("8 to 32 pF", LOAD, [{"min": 8, "max": 32}]),
    ("18 pF standard, others on request", LOAD, [{"typ": 18}]),
    ("±10, ±20 or ±30 ppm", TOL, [{"options": (10, 20, 30)}]),
    ("-20...+70 or -40...+85 °C", OPER, [{"min": -20, "max": 70}, {"min": -40, "max": 85}]),
    ("-0.04 ppm/°C² max", PARA, [{"min": -0.04}]),
]

# Forms met on real sheets (a survey of 47 documents); the readings are by hand.
FORMS = [
    # a comma that follows no digit parts two amounts
    ("10 μW 典型，200 μW 最大", DRIVE, [{"typ": 10, "max": 200}]),
    ("10 µW typ,200 µW max", DRIVE, [{"typ": 10, "max": 200}]),
    # bounds: words before and after, glued, in two cells' worth of text
    ("max. 60Ω", ESR, [{"max": 60}]),
    ("<60 kΩ", ESR, [{"max": 60_000}]),
    ("80k Ohm", ESR, [{"typ": 80_000, "bare": True}]),
    ("200µWMax.", DRIVE, [{"max": 200}]),
    ("10 (100 max.) µW", DRIVE, [{"typ": 10, "max": 100}]),
    ("100µW max., 10µW Typical", DRIVE, [{"typ": 10, "max": 100}]),
    ("1,0 µW max. (0,1 typ)", DRIVE, [{"typ": 0.1, "max": 1}]),
    ("1 mW max, 100 µW typical", DRIVE, [{"typ": 100, "max": 1000}]),
    ("1~200µW Max. (100uW typical)", DRIVE, [{"min": 1, "typ": 100, "max": 200}]),
    ("40 kΩ typ / 70 kΩ max", ESR, [{"typ": 40_000, "max": 70_000}]),
    ("min -40°C, max 85°C", OPER, [{"min": -40, "max": 85}]),
    ("must not exceed 100 uW", DRIVE, [{"max": 100}]),
    ("——7pF", C0, [{"typ": 7, "bare": True}]),
    ("500 Min. (DC 100 V)", INS, [{"min": 500}]),
    ("0.4 min. pF", C0, [{"min": 0.4}]),
    # ± in all its spellings
    ("+/-20 ppm", TOL, [{"min": -20, "max": 20}]),
    ("± 20×10⁻⁶", TOL, [{"min": -20, "max": 20}]),
    ("±20x10-6", TOL, [{"min": -20, "max": 20}]),
    ("±20 10-6 -6", TOL, [{"min": -20, "max": 20}]),
    ("±5010-6", TOL, [{"min": -50, "max": 50}]),
    ("10-6 / year", AGE, []),
    ("±0.002 %", TOL, [{"min": -20, "max": 20}]),
    ("< ±5 ppm", AGE, [{"min": -5, "max": 5}]),
    ("+15/-5 ppm", TOL, [{"min": -5, "max": 15}]),
    ("–10 ppm … +10 ppm", TOL, [{"min": -10, "max": 10}]),
    ("0.60 pF ±20%", C0, [{"min": 0.48, "typ": 0.6, "max": 0.72}]),
    ("±20.00ppm", TOL, [{"min": -20, "max": 20}]),
    ("±3 typ, ±5 max ppm", AGE, [{"min": -5, "typ": 3, "max": 5}]),
    # ranges
    ("−40°C～+85°C", OPER, [{"min": -40, "max": 85}]),
    ("-40 to 85", OPER, [{"min": -40, "max": 85}]),
    ("-40…+85 °C", OPER, [{"min": -40, "max": 85}]),
    ("-40°C+85°C", OPER, [{"min": -40, "max": 85}]),
    ("-40/85C", OPER, [{"min": -40, "max": 85}]),
    ("-40-85 °C", OPER, [{"min": -40, "max": 85}]),
    ("0 ~ +70 oC", OPER, [{"min": 0, "max": 70}]),
    ("minus 40 to plus 85", OPER, [{"min": -40, "max": 85}]),
    ("-20~+70℃，-40~+85℃", OPER, [{"min": -20, "max": 70}, {"min": -40, "max": 85}]),
    ("-20 to 70°C (standard), -40 to +85 °C (option)", OPER, [{"min": -20, "max": 70}]),
    ("+20 °C ~ +30 °C", TURN, [{"min": 20, "max": 30}]),
    ("3.579 to 70.000 MHz", FREQ, [{"min": 3.579, "max": 70}]),
    # lists and series
    ("8pF or 12pF", LOAD, [{"options": (8, 12)}]),
    ("8,10,12.5pF", LOAD, [{"options": (8, 10, 12.5)}]),
    ("12.5pF (Standard), 7.0pF, 9.0pF", LOAD, [{"options": (12.5, 7, 9)}]),
    ("12,0 pF standard (8,0 ~ 32,0 pF)", LOAD, [{"min": 8, "typ": 12, "max": 32}]),
    ("Series", LOAD, [{"series": True}]),
    ("series or 10-32 pF", LOAD, [{"min": 10, "max": 32}, {"series": True}]),
    ("10 … 32 pF oder Serienresonanz", LOAD, [{"min": 10, "max": 32}, {"series": True}]),
    ("±20 ppm (±10 ppm on request)", TOL, [{"min": -20, "max": 20}]),
    # number forms
    ("0,0036 pF", C1, [{"typ": 3.6}]),
    ("32,768 kHz", FREQ, [{"typ": 0.032768}]),
    ("32.768k", FREQ, [{"typ": 0.032768}]),
    ("16.000000 MHz", FREQ, [{"typ": 16}]),
    ("12000 kHz", FREQ, [{"typ": 12}]),
    ("24.576 MHz ±20 ppm", FREQ, [{"typ": 24.576}]),
    ("24.576 MHz ±20 ppm", STAB, [{"min": -20, "max": 20, "frequency_mhz": (24.576, 24.576)}]),
    ("1,000 MΩ", INS, [{"typ": 1000}]),
    ("1.000 MΩ", INS, [{"typ": 1000}]),
    ("1 000 MΩ", INS, [{"typ": 1000}]),
    ("5×10⁸ Ω", INS, [{"typ": 500}]),
    ("90 000 typ", Q, [{"typ": 90_000}]),
    ("60.000 typ.", Q, [{"typ": 60_000}]),
    ("5.13 kH", "motional_inductance_mh", [{"typ": 5_130_000}]),
    ("-14.3 ppm/pF", PULL, [{"typ": 14.3}]),
    # a fork's parabola
    ("-0.034 ±0.006 ppm/°C²", PARA, [{"min": -0.04, "typ": -0.034, "max": -0.028}]),
    ("-0.035×10⁻⁶/°C²", PARA, [{"typ": -0.035}]),
    ("(−3.5 ± 0.5) × 10⁻⁸/°C²", PARA, [{"min": -0.04, "typ": -0.035, "max": -0.03}]),
    ("-0.035±0.005 PPM/ (∆°C)2", PARA, [{"min": -0.04, "typ": -0.035, "max": -0.03}]),
    # conditions are no values
    ("500M Ohm min @ 100VDC", INS, [{"min": 500}]),
    ("500 MΩ/100 V DC", INS, [{"typ": 500}]),
    ("DC 100V ±15V", INS, []),
    ("50 kΩ max @ 25 °C", ESR, [{"max": 50_000}]),
    ("1.5 pF max. measured at 1 MHz", C0, [{"max": 1.5}]),
    ("±20ppm @25°C ±3°C", TOL, [{"min": -20, "max": 20}]),
    ("3.2 x 2.5 mm", LOAD, []),
    ("See table 1", ESR, []),
    ("N/A", ESR, []),
    ("-----", ESR, []),
    # where a value holds
    ("60 Ω max (12 ~ 16 MHz)", ESR, [{"max": 60, "frequency_mhz": (12, 16)}]),
    ("180 Ω max. for 3.579MHz ≤ F < 5.000MHz", ESR, [{"max": 180, "frequency_mhz": (3.579, 5)}]),
    ("300 µW Max. below 16 MHz.", DRIVE, [{"max": 300, "frequency_mhz": (0, 16)}]),
    (
        "100 Ω max (8-10 MHz), 80 Ω max (10-12 MHz)",
        ESR,
        [{"max": 100, "frequency_mhz": (8, 10)}, {"max": 80, "frequency_mhz": (10, 12)}],
    ),
    (
        "8-10 MHz: 100 Ω max\n10-12 MHz: 80 Ω max",
        ESR,
        [{"max": 100, "frequency_mhz": (8, 10)}, {"max": 80, "frequency_mhz": (10, 12)}],
    ),
    ("-20°C to +70°C: ±30ppm", STAB, [{"min": -30, "max": 30, "temperature_c": (-20, 70)}]),
    ("±30×10⁻⁶/-20 °C to +70 °C", STAB, [{"min": -30, "max": 30, "temperature_c": (-20, 70)}]),
    (
        "40 Ω max (Fund.), 100 Ω max (3rd OT)",
        ESR,
        [{"max": 40, "mode": "fundamental"}, {"max": 100, "mode": "third overtone"}],
    ),
    ("±5 ppm max first year", AGE, [{"min": -5, "max": 5, "years": 1}]),
    ("±3 × 10^-6 / year", AGE, [{"min": -3, "max": 3, "years": 1}]),
    ("±1 ppm/year typ., ±3 ppm max.", AGE, [{"min": -3, "typ": 1, "max": 3, "years": 1}]),
    (
        "±3 ppm first year, ±10 ppm over 10 years",
        AGE,
        [{"min": -3, "max": 3, "years": 1}, {"min": -10, "max": 10, "years": 10}],
    ),
    ("±15ppm -20~+70°C", STAB, [{"min": -15, "max": 15, "temperature_c": (-20, 70)}]),
    (
        "Fundamental: 60 Ω max; 3rd overtone: 100 Ω max",
        ESR,
        [{"max": 60, "mode": "fundamental"}, {"max": 100, "mode": "third overtone"}],
    ),
    ("60Ω max. ; C0 = 3 pF", ESR, [{"max": 60}]),
    ("8pF (other on request)", LOAD, [{"typ": 8}]),
    ("-(0.035±0.005) ppm/°C²", PARA, [{"min": -0.04, "typ": -0.035, "max": -0.03}]),
    ("(-40) to 125 °C", OPER, [{"min": -40, "max": 125}]),
    ("-40 85", OPER, [{"min": -40, "max": 85}]),
    # other languages
    ("höchstens 60 Ω", ESR, [{"max": 60}]),
    ("von -40 bis +85 °C", OPER, [{"min": -40, "max": 85}]),
    ("±5 ppm im ersten Jahr", AGE, [{"min": -5, "max": 5, "years": 1}]),
    ("80 Ω以下", ESR, [{"max": 80}]),
    ("1.1 fF（標準）", C1, [{"typ": 1.1}]),
    ("典型10μＷ，最大100μＷ", DRIVE, [{"typ": 10, "max": 100}]),
    ("±３ｐｐｍ／年", AGE, [{"min": -3, "max": 3, "years": 1}]),
    ("70 kohm massima (42 kohm tipica)", ESR, [{"typ": 42_000, "max": 70_000}]),
    ("da -40 °C a +85 °C", OPER, [{"min": -40, "max": 85}]),
    ("entre -20 °C et +70 °C", OPER, [{"min": -20, "max": 70}]),
    ("100 µW en usage normal, 500 µW au plus", DRIVE, [{"typ": 100, "max": 500}]),
]  # fmt: skip


@pytest.mark.parametrize(("printed", "field", "read"), CONTRACT)
def test_an_example_of_the_contract_reads_as_the_contract_says(printed, field, read):
    assert [said(value) for value in read_values(printed, field)] == read


@pytest.mark.parametrize(("printed", "field", "read"), FORMS)
def test_a_printed_form_reads_as_a_person_reads_it(printed, field, read):
    assert [said(value) for value in read_values(printed, field)] == read


@pytest.mark.parametrize(("printed", "field"), [(printed, field) for printed, field, read in CONTRACT if read])
def test_a_plain_form_raises_no_doubt(printed, field):
    # "-20...+70" and "±10" carry their unit; nothing is left to guess.
    assert all(value.doubts == () for value in read_values(printed, field))


DOUBTS = [
    ("±10", TOL, "unit not printed, taken as ppm"),
    ("60", ESR, "unit not printed, taken as Ω"),
    ("16000 to 52000", FREQ, "unit not printed, taken as kHz"),
    ("20 ppm", TOL, "printed without ±, taken as ±"),
    ("0.04 ppm/°C² max", PARA, "printed without a minus sign, taken as negative"),
    ("from ±5 ppm", STAB, "printed as the best that may be ordered, not as a bound"),
    ("+25°C to ±5°C", TURN, "a range sign stands before ±; read as centre and tolerance"),
    ("40, 60 Ω", ESR, "several values stand side by side and nothing says which holds"),
    ("-7 pF", C0, "a minus sign before a quantity that is never negative"),
    ("14 ppm", PULL, "unit printed as 'ppm', taken as ppm/pF"),
    ("70,000 Ω", ESR, "'70,000' may be 70 or 70000 Ω; taken as 70000"),
    ("12,000 kHz", FREQ, "'12,000' may be 12 or 12000 kHz; taken as 12000"),
    ("2pF to 4pF typical, 5pF maximum", C0, "typical is printed as a range, 2 to 4 pF"),
    ("±10 to ±50 ppm", STAB, "a span of grades to order from"),
    ("1.0 µW\n0.1µW typ", DRIVE, "the greater of two numbers, the other called typical; taken as the limit"),
    (
        "65 kΩ to 25 kΩ",
        ESR,
        "runs from 65000 Ω at the low end of the frequency range to 25000 Ω at the high end",
    ),
]


@pytest.mark.parametrize(("printed", "field", "doubt"), DOUBTS)
def test_a_guess_is_said(printed, field, doubt):
    (value,) = read_values(printed, field)
    assert value.doubts == (doubt,)
    assert not value.empty


REFUSED = [
    ("5S ppm", AGE, "letters touch the number '5'; left out"),
    ("±Sppm", AGE, "no number stands behind ±; left out"),
    ("19.12.2011", LOAD, "'19.12.2011' is no number; left out"),
    ("60 mA", ESR, "no unit called mA for equivalent series resistance (Ω); left out"),
    ("-0.04 ppm/°C² max", STAB, "no unit called ppm/°C^2 for frequency stability over temperature (ppm); left out"),
    ("±60 Ω", ESR, "±60 Ω says no equivalent series resistance"),
]


@pytest.mark.parametrize(("printed", "field", "doubt"), REFUSED)
def test_what_is_no_amount_of_the_field_is_refused_with_a_reason(printed, field, doubt):
    (value,) = read_values(printed, field)
    assert value.empty
    assert value.doubts == (doubt,)


def test_a_resistance_that_falls_over_the_band_keeps_the_worse_end():
    (value,) = read_values("65 kΩ to 25 kΩ over the range", ESR)
    assert (value.min, value.max) == (None, 65_000)


def test_the_heading_gives_unit_bound_and_sign_where_the_cell_has_none():
    (value,) = read_values("60", ESR, unit="kΩ", bound="max")
    assert (value.max, value.bare, value.doubts) == (60_000, False, ())
    (value,) = read_values("20", TOL, unit="±ppm")
    assert (value.min, value.max, value.doubts) == (-20, 20, ())
    (value,) = read_values("3", AGE, unit="×10⁻⁶/year", plus_minus=True)
    assert (value.min, value.max, value.when) == (-3, 3, When(years=1))


def test_what_the_cell_prints_goes_before_the_heading():
    (value,) = read_values("0.5 mW typ", DRIVE, unit="µW", bound="max")
    assert (value.typ, value.max) == (500, None)


def test_an_unbounded_number_beside_a_typical_takes_the_headings_bound():
    (value,) = read_values("0.7µW\n0.1µWtyp", DRIVE, bound="max")
    assert (value.typ, value.max, value.doubts) == (0.1, 0.7, ())


def test_two_bounds_in_a_heading_go_to_two_numbers_in_turn():
    (value,) = read_values("10 / 100", DRIVE, unit="µW", bound="typ/max")
    assert (value.typ, value.max) == (10, 100)


def test_a_heading_unit_of_another_quantity_is_said():
    (value,) = read_values("10", ESR, unit="MHz")
    assert value.doubts == ("'MHz' is no unit of equivalent series resistance; taken as Ω",)


def test_a_magnitude_under_a_max_heading_is_that_end_alone_until_the_caller_knows_better():
    (value,) = read_values("20", TOL, unit="ppm", bound="max")
    assert (value.min, value.max) == (None, 20)
    both = as_plus_minus(value)
    assert (both.min, both.max) == (-20, 20)


def test_the_sheets_decimal_mark_settles_a_number_that_may_be_two():
    assert read_values("70,000 Ω max", ESR, decimal=",")[0].max == 70
    assert read_values("70.000 Ω max", ESR, decimal=",")[0].max == 70_000


def test_a_sheet_shows_its_decimal_mark():
    assert decimal_mark("CL 12,5 pF, C0 1,8 pF, 11,0592 MHz, 1.250 Stück") == ","
    assert decimal_mark("CL 12.5 pF, C0 1.8 pF, 3,000 pieces") == "."
    assert decimal_mark("CL 18 pF") is None


def test_a_stability_in_ppm_per_square_degree_is_the_parabola():
    assert field_for("-0.034±0.006/°C²", STAB) == PARA
    assert field_for("±30 ppm", STAB) == STAB


def test_zero_of_a_quantity_that_is_never_zero_is_not_stated():
    assert read_values("0", LOAD, unit="pF") == []
    (value,) = read_values("0 | 5", C0, unit="pF")
    assert (value.min, value.max) == (None, 5)


def test_an_unknown_field_is_a_key_error():
    with pytest.raises(KeyError):
        read_values("60", "colour")


# --- a value written in any printed form reads back exactly

TENTHS = st.integers(1, 4000).map(lambda tenths: tenths / 10)
MARKS = st.sampled_from([".", ","])
OHMS = st.sampled_from([("Ω", 1), ("Ω", 1), (" ohm", 1), (" Ohms", 1), ("kΩ", 1000), (" K ohm", 1000), ("k Ω", 1000)])


def written(number: float, mark: str) -> str:
    """With one decimal, so that no thousand can be meant."""
    return f"{number:.1f}".replace(".", mark)


@given(
    number=TENTHS,
    mark=MARKS,
    unit=OHMS,
    form=st.sampled_from(["{} max.", "max. {}", "≤ {}", "<{}", "{}以下", "höchstens {}"]),
)
def test_a_greatest_resistance_reads_back(number, mark, unit, form):
    (value,) = read_values(form.format(written(number, mark) + unit[0]), ESR)
    assert value.max == pytest.approx(number * unit[1], rel=1e-12)
    assert (value.min, value.typ, value.doubts) == (None, None, ())


@given(
    number=TENTHS,
    mark=MARKS,
    sign=st.sampled_from(["±", "+/-", "± ", "+ / - ", "±"]),
    unit=st.sampled_from(["ppm", " PPM", "×10⁻⁶", " x 10-6"]),
)
def test_a_plus_minus_value_reads_back(number, mark, sign, unit):
    (value,) = read_values(sign + written(number, mark) + unit, TOL)
    assert (value.min, value.max, value.doubts) == (-number, number, ())


@given(
    low=st.integers(-60, 20),
    width=st.integers(1, 150),
    between=st.sampled_from([" to ", "~", " … ", "～", " ~ +", " bis ", "°C to ", "...", "℃～"]),
    unit=st.sampled_from(["°C", " ℃", " °C", "C", " degC"]),
    minus=st.sampled_from(["-", "−", "–", "‐"]),
)
def test_a_temperature_range_reads_back(low, width, between, unit, minus):
    high = low + width
    if "+" in between and high < 0:
        between = between.replace("+", "")
    printed = f"{low}{between}{high}{unit}".replace("-", minus)
    (value,) = read_values(printed, OPER)
    assert (value.min, value.max) == (low, high)


@given(
    numbers=st.lists(TENTHS.filter(lambda n: n < 100), min_size=2, max_size=6, unique=True),
    between=st.sampled_from([", ", " / ", " or ", "; ", "、"]),
)
def test_a_list_to_choose_from_reads_back(numbers, between):
    (value,) = read_values(between.join(f"{n:.1f}" for n in numbers) + " pF", LOAD)
    assert value.options == tuple(numbers)


@given(middle=TENTHS, half=TENTHS, mark=MARKS)
def test_a_centre_with_its_tolerance_reads_back(middle, half, mark):
    (value,) = read_values(f"{written(middle, mark)} ±{written(half, mark)} fF", C1)
    assert value.typ == middle
    assert (value.min, value.max) == (pytest.approx(middle - half), pytest.approx(middle + half))


@given(typ=TENTHS, limit=TENTHS, first=st.booleans())
def test_typical_and_limit_read_back_in_either_order(typ, limit, first):
    typ, limit = sorted((typ, limit))
    pieces = [f"{typ:.1f} µW typ.", f"{limit:.1f} µW max."]
    (value,) = read_values(", ".join(pieces if first else pieces[::-1]), DRIVE)
    assert (value.typ, value.max) == (typ, limit)


@given(st.text(max_size=60), st.sampled_from([TOL, OPER, LOAD, ESR, PARA, DRIVE, Q, FREQ]))
def test_no_text_breaks_the_reader_and_no_bounds_come_out_of_order_unsaid(text, field):
    for value in read_values(text, field):
        stated = [bound for bound in (value.min, value.typ, value.max) if bound is not None]
        assert stated == sorted(stated) or value.doubts


TWO_TOLERANCES = [
    ("+25 +5/-5 °C", TURN, {"min": 20, "typ": 25, "max": 30}),
    ("25 °C +5 -5", TURN, {"min": 20, "typ": 25, "max": 30}),
    ("25 (-10/+5) °C", TURN, {"min": 15, "typ": 25, "max": 30}),
    ("12 pF +0.5/-0.2", LOAD, {"min": 11.8, "typ": 12, "max": 12.5}),
    ("-5/+15 ppm", TOL, {"min": -5, "max": 15}),
    ("0 +70 °C", OPER, {"min": 0, "max": 70}),
]


@pytest.mark.parametrize(("text", "field", "expected"), TWO_TOLERANCES)
def test_two_signed_numbers_behind_a_centre_are_its_tolerances(text: str, field: str, expected: dict[str, Any]) -> None:
    assert [said(value) for value in read_values(text, field)] == [expected]


def test_two_ranges_without_range_signs_stay_two() -> None:
    found = [said(value) for value in read_values("-20 +70 -40 +85 °C", OPER)]
    assert found == [{"min": -20, "max": 70}, {"min": -40, "max": 85}]


@pytest.mark.parametrize(
    ("text", "load"),
    [
        ("S or 10 to 30 pF", {"min": 10, "max": 30}),
        ("series, 10, 12 pF", {"options": (10, 12)}),
        ("8~32pF, S", {"min": 8, "max": 32}),
        ("S / 12 pF / 18 pF", {"options": (12, 18)}),
    ],
)
def test_series_beside_loads_is_offered_and_is_no_load(text: str, load: dict[str, Any]) -> None:
    assert [said(value) for value in read_values(text, LOAD)] == [load, {"series": True}]


def test_series_on_request_leaves_the_load_standing() -> None:
    assert [said(value) for value in read_values("18 pF standard, series on request", LOAD)] == [{"typ": 18}]


def test_a_condition_that_is_excluded_is_none() -> None:
    assert [said(value) for value in read_values("±10 ppm not with 18 pF", TOL)] == [{"min": -10, "max": 10}]


@pytest.mark.parametrize("text", ["±1 ppm from 1 µW to 100 µW", "max. ±1 ppm, 1 to 100 µW"])
def test_what_changes_over_a_span_of_drive_states_no_drive_level(text: str) -> None:
    assert read_values(text, DRIVE) == []


def test_the_reference_of_a_stability_is_no_operating_temperature() -> None:
    assert read_values("±30 ppm max ref. to 25 °C", OPER) == []


def test_another_symbol_before_a_colon_begins_another_value() -> None:
    assert [said(value) for value in read_values("7 pF max. - C1: 3 fF", C0)] == [{"max": 7}]


ONE_SIDED = [
    ("0/-20 ppm", {"min": -20, "max": 0}),
    ("+10/-0 ppm", {"min": 0, "max": 10}),
    ("0/+20 ppm", {"min": 0, "max": 20}),
]


@pytest.mark.parametrize(("text", "expected"), ONE_SIDED)
def test_a_one_sided_tolerance_has_zero_as_its_other_end(text: str, expected: dict[str, Any]) -> None:
    assert [said(value) for value in read_values(text, TOL)] == [expected]


@pytest.mark.parametrize("text", ["max. 100 µW/0.1 mW", "0.1 mW (100 µW) max"])
def test_one_limit_in_two_units_is_one_limit(text: str) -> None:
    assert [said(value) for value in read_values(text, DRIVE)] == [{"max": 100}]


@pytest.mark.parametrize(
    ("text", "load"),
    [
        ("12.5 pF (standard), 6 pF / 7 pF / 9 pF optional", {"typ": 12.5}),
        ("8, 10 pF standard, 12 pF on request", {"options": (8, 10)}),
    ],
)
def test_what_follows_the_standard_up_to_on_request_is_on_request(text: str, load: dict[str, Any]) -> None:
    assert [said(value) for value in read_values(text, LOAD)] == [load]


def test_loads_up_to_series_begin_at_the_number() -> None:
    assert [said(value) for value in read_values("10 pF to series", LOAD)] == [{"min": 10}, {"series": True}]


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("45 / 70 Ω (typ/max)", {"typ": 45, "max": 70}),
        ("45/70 typ./max.", {"typ": 45, "max": 70}),
        ("70, 45 Ω (max/typ)", {"typ": 45, "max": 70}),
    ],
)
def test_bounds_named_together_behind_the_numbers_go_to_them_in_turn(text: str, expected: dict[str, Any]) -> None:
    assert [said(value) for value in read_values(text, ESR)] == [expected]


RECOMMENDED = [
    "200 µW max. / 100 µW test",
    "200 µW max., 10 µW recommended",
    "10 µW empfohlen, 200 µW max.",
    "200 µW max., 10 µW consigliati",
    "recommended: 10 µW, max. 200 µW",
    "最大200μW（推奨10μW）",
    "200 µW max. (recommended: 10 to 100 µW)",
]


@pytest.mark.parametrize("text", RECOMMENDED)
def test_what_is_recommended_beside_a_limit_is_no_reading(text: str) -> None:
    assert [said(value) for value in read_values(text, DRIVE)] == [{"max": 200}]


def test_what_is_recommended_alone_is_the_usual_value() -> None:
    assert [said(value) for value in read_values("10 µW recommended", DRIVE)] == [{"typ": 10}]


MEASURED_AT_VOLTS = [
    "500 MΩ min (100 Vcc)",
    "min. 500 MΩ (100 V c.c.)",
    "500 MΩ min 100Vdc",
    "DC 100 V 500 MΩ min",
    "min. 500 MΩ à 100 Vcc ±15 V",
]


@pytest.mark.parametrize("text", MEASURED_AT_VOLTS)
def test_the_measuring_voltage_is_no_value_and_takes_no_bound(text: str) -> None:
    assert [said(value) for value in read_values(text, INS)] == [{"min": 500}]


@pytest.mark.parametrize("text", ["40 Ω máx.", "máx. 40 Ω", "40 Ω máximo"])
def test_spanish_bounds_may_be_abbreviated(text: str) -> None:
    assert [said(value) for value in read_values(text, ESR)] == [{"max": 40}]


@pytest.mark.parametrize("text", ["100 µW -40~85 °C", "100uW -40~85°C", "100 µW -40 °C", "100 µW, -40 to +85 °C"])
def test_a_temperature_behind_an_amount_is_no_end_of_its_range(text):
    (value,) = read_values(text, "drive_level_uw")
    assert (value.min, value.typ, value.max) == (None, 100.0, None)


@pytest.mark.parametrize("text", ["1e400", "1e-400", "1E999"])
def test_an_absurd_power_of_ten_is_refused_and_its_digits_are_no_choice(text):
    (value,) = read_values(text, "frequency_mhz")
    assert value.empty
    assert text in value.doubts[0]


def test_a_coefficient_in_its_formula_is_the_parabola():
    text = "-0.035 x (T-T0)² ±10%"
    assert field_for(text, "frequency_stability_ppm") == "parabolic_coefficient_ppm_per_c2"
    (value,) = read_values(text, "parabolic_coefficient_ppm_per_c2", unit="ppm")
    assert (value.min, value.typ, value.max) == (-0.0385, -0.035, -0.0315)


def test_a_word_for_more_than_before_an_insulation_is_its_least():
    (value,) = read_values("Over 500 MΩ", "insulation_resistance_megohm")
    assert (value.min, value.typ) == (500, None)


def test_ageing_in_hours_holds_for_so_many():
    (value,) = read_values("±5 ppm/1000 h at 150 °C", "ageing_ppm")
    assert (value.min, value.max, value.when.years) == (-5, 5, pytest.approx(1000 / 8766, abs=1e-4))


def test_a_date_in_place_of_a_load_is_taken_for_the_number_it_was_and_must_be_looked_at():
    (value,) = read_values("2026-05-12", "load_capacitance_pf", unit="pF")
    assert (value.typ, value.min, value.max) == (12.5, None, None)
    assert value.doubts == ("a date stands here; a spreadsheet makes one of 12.5, which is taken",)


def test_a_word_for_at_and_to_before_another_unit_is_no_range():
    (value,) = read_values("±20 ppm a 25 °C", "frequency_tolerance_ppm")
    assert (value.min, value.max, value.doubts) == (-20.0, 20.0, ())


def test_two_limits_in_one_text_must_be_looked_at():
    found = read_values("100 µW max., 500 µW absolute max.", "drive_level_uw")
    assert [(each.max, bool(each.doubts)) for each in found] == [(100.0, True), (500.0, True)]
