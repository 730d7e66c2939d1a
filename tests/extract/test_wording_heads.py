"""Short heads of lists and keys of pasted lines, turned and shortened labels: what `wording` makes of them."""

from __future__ import annotations

import pytest

from extract.heads import interpret
from extract.wording import identity_label, read_label, role_of

TOL, STAB, AGE = "frequency_tolerance_ppm", "frequency_stability_ppm", "ageing_ppm"
OPER, STORE, LOAD, ESR = "operating_temperature_c", "storage_temperature_c", "load_capacitance_pf", "esr_ohm"
C0, C1, DRIVE = "shunt_capacitance_pf", "motional_capacitance_ff", "drive_level_uw"
PARA = "parabolic_coefficient_ppm_per_c2"
INS = "insulation_resistance_megohm"
PULL = "pulling_sensitivity_ppm_per_pf"

# Heads of lists and keys of pasted lines; the meaning of each is by hand.
SHORT_HEADS = [
    ("Parabolic coeff. (ppm/°C²)", PARA),
    ("PARABOLIC_COEFF", PARA),
    ("PARABOLIC", PARA),
    ("Parabel (ppm/°C²)", PARA),
    ("Parábola", PARA),
    ("AGE", AGE),
    ("STG", STORE),
    ("STOR", STORE),
    ("di magazzino", STORE),
    ("T_OP", OPER),
    ("T_STG", STORE),
    ("di esercizio", OPER),
    ("SHUNT", C0),
]


@pytest.mark.parametrize(("text", "field"), SHORT_HEADS)
def test_short_heads_and_keys_name_their_field(text: str, field: str) -> None:
    label = read_label(text)
    assert label is not None
    assert label.exact
    assert label.field == field


@pytest.mark.parametrize(("text", "bound"), [("T min", "min"), ("T max", "max"), ("T min (°C)", "min")])
def test_a_single_t_with_a_bound_is_an_end_of_the_operating_range(text: str, bound: str) -> None:
    label = read_label(text)
    assert label is not None
    assert (label.field, label.bound) == (OPER, bound)


@pytest.mark.parametrize(
    ("text", "field", "bound", "unit"),
    [
        ("並列容量 MAX(pF)", C0, "max", "pF"),
        ("励振レベル TYP(μW)", DRIVE, "typ", "μW"),
        ("ESR máx. (Ω)", ESR, "max", "Ω"),
    ],
)
def test_a_bound_before_the_bracketed_unit_belongs_to_the_head(text: str, field: str, bound: str, unit: str) -> None:
    label = read_label(text)
    assert label is not None
    assert (label.field, label.bound, label.unit) == (field, bound, unit)


@pytest.mark.parametrize(
    ("text", "bound"),
    [("Drive level recommended", "typ"), ("推奨ドライブレベル", "typ"), ("Recommended operating temperature", None)],
)
def test_a_label_of_what_is_recommended_bounds_a_limit_no_more_than_typical(text: str, bound: str | None) -> None:
    label = read_label(text)
    assert label is not None
    assert label.bound == bound


@pytest.mark.parametrize(
    ("text", "field"),
    [("Resistance series", ESR), ("Resistance insulation", INS), ("Frequency tolerance at turnover", TOL)],
)
def test_a_group_head_before_its_row_reads_as_the_wording_turned(text: str, field: str) -> None:
    label = read_label(text)
    assert label is not None
    assert label.exact
    assert label.field == field


# Heads of narrow columns; the full words are common trade usage in each language, the shortenings are by hand.
SHORTENED = [
    ("Cap. carga (pF)", LOAD),
    ("Temp. almac.", STORE),
    ("Envejec.", AGE),
    ("Toll. 25 °C", TOL),
    ("R serie max", ESR),
    ("Vieill.", AGE),
    ("Cap. charge", LOAD),
    ("Temp. fonct.", OPER),
    ("Abgl.-Tol.", TOL),
    ("Temp.-Gang", STAB),
    ("Arb.-Temp.", OPER),
    ("温特", STAB),
    ("负载", LOAD),
    ("Trim sens. (ppm/pF)", PULL),
    ("Motional C (fF)", C1),
    ("R_ESR", ESR),
]


@pytest.mark.parametrize(("text", "field"), SHORTENED)
def test_shortened_heads_name_their_field(text: str, field: str) -> None:
    label = read_label(text)
    assert label is not None
    assert label.field == field


def test_a_row_called_resonance_speaks_of_the_load() -> None:
    assert [label.field for text in ("Resonance", "Risonanza", "谐振方式") if (label := read_label(text))] == [LOAD] * 3


def test_what_follows_a_colon_is_no_name_of_a_head() -> None:
    assert role_of("Resonance: series") is None


@pytest.mark.parametrize("text", ["Codice articolo", "Manufacturer PN", "Mfr. Part #"])
def test_codes_that_a_maker_gives_are_the_part_number(text: str) -> None:
    assert identity_label(text) == "part_number"


def test_a_head_of_megahertz_alone_is_one_of_frequencies():
    head = interpret(("MHz",))
    assert head.label is not None
    assert (head.label.field, head.unit) == ("frequency_mhz", "MHz")


def test_type_over_models_is_no_typical():
    assert interpret(("Type", "AB-2016")).bound is None
