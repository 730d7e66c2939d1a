from extract.entries import Entry, Piece, Text, Value
from extract.model import Where
from extract.sections import sections

HERE = Where(line=1)


def heading(text):
    return Text(Piece(text, HERE), heading=True)


def values(count=4):
    labels = ("Load capacitance", "ESR", "Drive level", "Shunt capacitance")[:count]
    return [Entry(Piece(label, HERE), (Value(Piece("1", HERE)),)) for label in labels]


def names(items):
    return [section.name for section in sections(items)]


def test_headings_with_part_numbers_begin_a_section_each():
    items = [
        heading("Common"),
        *values(),
        heading("ABQ-16 (1.6 × 1.2 mm)"),
        *values(),
        heading("ABQ-25 (2.5 × 2.0 mm)"),
        *values(),
    ]
    assert names(items) == [None, "ABQ-16", "ABQ-25"]


def test_one_part_is_one_section():
    assert names([heading("ABQ-16"), *values(), heading("Ordering"), *values()]) == [None]


def test_a_part_that_is_only_named_begins_none():
    assert names([heading("ABQ-16"), *values(), heading("Related parts: ABQ-25"), Text(Piece("ABQ-53", HERE))]) == [
        None
    ]


def test_a_name_that_comes_again_on_the_next_page_goes_on():
    items = [heading("ABQ-16"), *values(), heading("ABQ-25"), *values(), heading("ABQ-16"), *values()]
    found = {section.name: section.weight for section in sections(items)}
    assert found["ABQ-16"] == 8
