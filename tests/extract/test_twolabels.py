"""Rows that state two properties, one behind the other."""

from extract.candidates import entry_candidates
from extract.entries import Entry, Piece, Value
from extract.model import Where

HERE = Where(line=1)


def bounds(label, value):
    entry = Entry(Piece(label, HERE), (Value(Piece(value, HERE)),))
    return [(each.field, each.min, each.max) for each in entry_candidates(entry)]


def test_two_labels_and_two_values_parted_by_strokes_are_each_others():
    assert bounds("Frequency tolerance @ 25 °C / Frequency stability", "±30 / ±50 ppm") == [
        ("frequency_tolerance_ppm", -30.0, 30.0),
        ("frequency_stability_ppm", -50.0, 50.0),
    ]


def test_a_choice_under_one_label_stays_a_choice():
    entry = Entry(Piece("Frequency tolerance", HERE), (Value(Piece("±30 / ±50 ppm", HERE)),))
    (choice,) = entry_candidates(entry)
    assert choice.options == (30.0, 50.0)


def test_two_ends_of_a_range_are_not_parted():
    assert ("storage_temperature_c", 85.0, 85.0) not in bounds("Operating / storage temperature", "-40 / +85 °C")
