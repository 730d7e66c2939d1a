from building import line

from extract.candidates import entry_candidates
from extract.entries import EMPTY_CELLS_LOST
from extract.torn import spaced_rows, torn_rows

HEADS = ["Parameter", "Conditions", "Min.", "Typ.", "Max.", "Units"]
FREQUENCY = ["Nominal Frequency", "12.000", "MHz"]
TOLERANCE = ["Frequency Tolerance", "at +25 C", "-10", "+10", "ppm"]
LOAD = ["Load Capacitance", "9", "pF"]
ESR = ["Equivalent Series Resistance", "12 - 15 MHz", "80", "Ohms", "16 - 54 MHz", "60", "Ohms"]
DRIVE = ["Drive Level", "1", "10", "100", "uW"]


def torn(*rows):
    return [line(text, number=number) for number, text in enumerate([*HEADS, *(text for row in rows for text in row)])]


def candidates(*rows):
    return [each for entry in torn_rows(torn(*rows), 0)[0] for each in entry_candidates(entry)]


def test_a_negative_and_a_positive_number_are_the_two_ends():
    found = [each for each in candidates(FREQUENCY, TOLERANCE, LOAD) if each.field == "frequency_tolerance_ppm"]
    assert [(each.min, each.max, each.doubts) for each in found] == [(-10.0, 10.0, ())]


def test_one_number_of_a_limited_quantity_is_its_limit_and_must_be_looked_at():
    found = [each for each in candidates(FREQUENCY, LOAD, ESR) if each.field == "esr_ohm"]
    assert [(each.max, each.when.frequency_mhz, each.doubts) for each in found] == [
        (80.0, (12.0, 15.0), (EMPTY_CELLS_LOST,)),
        (60.0, (16.0, 54.0), (EMPTY_CELLS_LOST,)),
    ]


def test_as_many_numbers_as_headings_stand_under_them_in_order():
    found = [each for each in candidates(FREQUENCY, LOAD, DRIVE) if each.field == "drive_level_uw"]
    assert [(each.min, each.typ, each.max, each.doubts) for each in found] == [(1.0, 10.0, 100.0, ())]


def test_a_condition_that_begins_with_over_is_no_label():
    stability = ["Frequency Stability", "over operating temp", "-20", "+20", "ppm"]
    fields = {each.field for each in candidates(FREQUENCY, LOAD, stability)}
    assert fields == {"frequency_mhz", "load_capacitance_pf", "frequency_stability_ppm"}


def test_lines_without_headings_are_no_torn_table():
    lines = [line(text, number=number) for number, text in enumerate([*FREQUENCY, *LOAD, *DRIVE])]
    assert torn_rows(lines, 0) == ([], 0)


SPACED = [
    "Parametro Min Tip Max Unità",
    "Frequenza nominale 8 - 54 MHz",
    "Capacità di carico - 10 - pF",
    "ESR (8-12 MHz) - - 150 Ω",
    "Invecchiamento -3 - +3 ppm/anno",
]


def spaced(*texts):
    entries, taken = spaced_rows([line(text, number=number) for number, text in enumerate(texts)], 0)
    return {each.field: each for entry in entries for each in entry_candidates(entry)}, taken


def test_rows_held_by_single_spaces_have_a_number_or_a_dash_under_each_heading():
    found, taken = spaced(*SPACED)
    assert taken == 5
    assert found["frequency_mhz"].bounds[:3] == (8.0, None, 54.0)
    assert found["load_capacitance_pf"].bounds[:3] == (None, 10.0, None)
    assert (found["esr_ohm"].max, found["esr_ohm"].when.frequency_mhz) == (150.0, (8.0, 12.0))
    assert (found["ageing_ppm"].max, found["ageing_ppm"].when.years) == (3.0, 1.0)


def test_a_row_that_lacks_a_cell_ends_such_a_table():
    assert spaced(*SPACED[:3], "ESR 150 Ω", *SPACED[4:])[1] == 0
