import pytest
from building import bounds, document, only_part, table

from extract.blocks import read_blocks
from extract.heads import interpret
from extract.parts import parts_of
from extract.samples import heads_samples, of_samples, with_measured

LIMITS = (("Nominal frequency", "8 MHz"), ("Load capacitance", "16 pF"), ("Series resistance", "80 Ω max"))


def read(*blocks):
    return parts_of(read_blocks(document(*blocks)))


def heads(*levels):
    return [interpret((level,) if isinstance(level, str) else level) for level in levels]


@pytest.mark.parametrize("word", ["Sample 1", "Muster 3", "Measured (avg of 10)", "实测值", "測定値", "Muestra"])
def test_words_of_inspection_reports_are_known(word):
    assert heads_samples(word)


def test_a_table_of_samples_states_nothing_of_the_part():
    samples = table(("Sample", "RR (Ω)", "C0 (pF)"), ("1", "31.5", "4.1"), ("2", "28.9", "4.2"), ("3", "33.0", "4.1"))
    part = only_part(read(table(*LIMITS), samples))
    assert bounds(part, "esr_ohm") == [(None, None, 80.0)]
    assert bounds(part, "shunt_capacitance_pf") == []


def test_samples_counted_behind_the_limits_are_measured_and_so_is_what_stands_behind_them():
    found = with_measured(heads("Item", "Spec", "Unit", "1", "2", "3", "Max", "Judgement"))
    assert [head.role for head in found] == ["parameter", "value", "unit", *["measured"] * 5]


def test_columns_of_min_typ_and_max_are_no_samples():
    found = with_measured(heads("Parameter", "Min", "Typ", "Max", "Unit"))
    assert "measured" not in [head.role for head in found]


def test_what_a_buyer_requires_is_no_value_of_the_parts_beside_it():
    found = with_measured(heads("Parameter", "Requirement", "AB-3225-16M", "CD-2520-16M"))
    assert [head.role == "measured" for head in found] == [False, True, False, False]


def test_a_list_of_parts_is_no_table_of_samples():
    assert not of_samples(heads("Part number", "Frequency (MHz)", "ESR (Ω)"), [], "Measured parts")


def test_the_mean_beside_a_spread_is_of_a_lot_and_no_typical_value():
    found = with_measured(heads("Characteristic", "Unit", "LSL", "USL", "Mean", "Std dev", "Cpk"))
    assert [head.role for head in found] == ["parameter", "unit", "min", "max", "measured", "measured", "measured"]
