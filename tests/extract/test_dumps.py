from building import line

from extract.candidates import entry_candidates
from extract.dumps import column_dump

LABELS = [
    "Nominal Frequency",
    "Mode of Vibration",
    "Frequency Tolerance",
    "Load Capacitance",
    "Level of Drive",
    "Motional Resistance",
]
SYMBOLS = ["f 0", "-", "Δ f/f 0", "C L", "DL", "R 1"]
VALUES = ["- 32.7680 -", "Flexural (Tuning Fork)", "- 20 -", "- 9.0 -", "- 0.1 0.8", "- 48 65"]
UNITS = ["kHz", "± ppm", "pF", "μW", "k Ohms"]


def dump(*runs):
    return [line(text, number=number) for number, text in enumerate([text for run in runs for text in run], 1)]


def test_labels_values_and_units_copied_column_by_column_are_put_together():
    entries, taken = column_dump(dump(LABELS, SYMBOLS, VALUES, UNITS), 0)
    held = {each.field: each.bounds[:3] for entry in entries for each in entry_candidates(entry)}
    assert taken == 23
    assert held == {
        "frequency_mhz": (None, 0.032768, None),
        "frequency_tolerance_ppm": (-20.0, None, 20.0),
        "load_capacitance_pf": (None, 9.0, None),
        "drive_level_uw": (None, 0.1, 0.8),
        "esr_ohm": (None, 48000.0, 65000.0),
    }


def test_values_that_are_fewer_than_the_labels_are_left_alone():
    assert column_dump(dump(LABELS, SYMBOLS, VALUES[:4], UNITS), 0) == ([], 0)


def test_lines_without_a_run_of_labels_are_no_dump():
    assert column_dump(dump(["Nominal Frequency", "12 MHz", "ESR", "60 Ω"]), 0) == ([], 0)


GERMAN = [
    ["Nennfrequenz", "Lastkapazität", "Abgleichtoleranz", "Arbeitstemperaturbereich", "Resonanzwiderstand"],
    ["Bedingung", "-", "-", "bei 25 °C", "-", "-"],
    ["Wert", "37,400", "9", "±10", "-30 bis +85", "max. 60"],
    ["Einheit", "MHz", "pF", "ppm", "°C", "Ω"],
]
READ = {
    "frequency_mhz": (None, 37.4, None),
    "load_capacitance_pf": (None, 9.0, None),
    "frequency_tolerance_ppm": (-10.0, None, 10.0),
    "operating_temperature_c": (-30.0, None, 85.0),
    "esr_ohm": (None, None, 60.0),
}


def test_columns_under_their_own_headings_are_put_together():
    entries, taken = column_dump(dump(*GERMAN), 0)
    assert taken == 23
    assert {each.field: each.bounds[:3] for entry in entries for each in entry_candidates(entry)} == READ


def test_columns_parted_by_blank_lines_are_put_together():
    lines = [
        line(text, number=10 * at + number)
        for at, run in enumerate([GERMAN[0], GERMAN[2][1:], GERMAN[3][1:]])
        for number, text in enumerate(run)
    ]
    entries, taken = column_dump(lines, 0)
    assert taken == 15
    assert {each.field: each.bounds[:3] for entry in entries for each in entry_candidates(entry)} == READ


def test_a_column_of_values_that_is_too_short_is_not_paired():
    assert column_dump(dump(*GERMAN[:2], GERMAN[2][:-1], GERMAN[3]), 0) == ([], 0)
