"""What ordering keys offer."""

from extract.entries import Key, Piece
from extract.model import Where
from extract.orderable import key_candidates

HERE = Where(line=1)


def key(label, *choices):
    return Key(Piece(label, HERE), tuple((code, Piece(text, HERE)) for code, text in choices))


def test_codes_for_plus_minus_values_are_options():
    (found,) = key_candidates(key("Frequency tolerance", ("1", "±10 ppm"), ("2", "±20 ppm")))
    assert (found.options, found.source) == ((10.0, 20.0), "key")


def test_codes_for_ranges_are_a_candidate_each():
    found = list(key_candidates(key("Operating temperature", ("A", "-20 to +70 °C"), ("B", "-40 to +85 °C"))))
    assert [(each.min, each.max) for each in found] == [(-20.0, 70.0), (-40.0, 85.0)]
