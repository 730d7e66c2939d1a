import pytest
from building import line

from extract.entries import Entry, Piece, Value
from extract.footnotes import footnote_of, footnotes_in, marks_in, noted_candidates
from extract.model import When, Where

HERE = Where(line=1)


@pytest.mark.parametrize(
    ("text", "mark"),
    [
        ("*2 80 Ω for 10 MHz", "2"),
        ("(2) see table", "2"),
        ("† on request", "†"),
        ("Note 3: at 25 °C", "3"),
        ("⁽²⁾ 80 Ω", "2"),
    ],
)
def test_a_line_that_begins_with_a_mark_is_a_footnote(text, mark):
    found = footnote_of(text)
    assert found is not None
    assert found[0] == mark


@pytest.mark.parametrize("text", ["80 Ω max.", "25 °C ±5 °C", "3.2 x 2.5 mm", "-40 to +85 °C"])
def test_a_line_that_begins_with_a_value_is_none(text):
    assert footnote_of(text) is None


@pytest.mark.parametrize("text", ["50 Ω max. *2", "50 Ω max. (2)", "50 Ω ⁽²⁾"])
def test_marks_are_found_beside_a_value(text):
    assert marks_in([text]) == {"2"}


def entry(text):
    return Entry(Piece("ESR", HERE), (Value(Piece(text, HERE)),))


NOTE = Piece("80 Ω max. for 10 to 12 MHz", Where(line=30))


def test_a_footnote_with_a_band_gives_a_value_for_the_band_in_its_own_place():
    (found,) = noted_candidates(entry("50 Ω max. *2"), {"2": (NOTE.text, NOTE)})
    assert (found.max, found.when, found.where.line) == (80.0, When(frequency_mhz=(10.0, 12.0)), 30)


def test_a_footnote_that_nothing_points_to_changes_nothing():
    assert noted_candidates(entry("50 Ω max."), {"2": (NOTE.text, NOTE)}) == []


def test_a_footnote_about_something_else_changes_nothing():
    note = line("*2 Guaranteed at the time of delivery; ±3 ppm after reflow").segments[0]
    assert noted_candidates(entry("50 Ω max. *2"), {"2": (note.text, note)}) == []


def test_several_footnotes_on_one_line_are_parted_where_their_marks_count_up():
    assert footnotes_in("(1) not with 18 pF. (2) see (7) for ±15 ppm.") == [
        ("1", "not with 18 pF."),
        ("2", "see (7) for ±15 ppm."),
    ]


def test_a_footnote_that_restricts_one_option_is_no_reading():
    place = Piece("line", Where(line=9))
    entry = Entry(Piece("Frequency stability", Where(line=1)), (Value(Piece("±15, ±30, ±50 ppm (2)", Where(line=1))),))
    assert noted_candidates(entry, {"2": ("±15 ppm for -20 to +70 °C only", place)}) == []
