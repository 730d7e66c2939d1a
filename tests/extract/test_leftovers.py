"""What was not read is said."""

from building import document, line, table

from extract.blocks import read_blocks
from extract.leftovers import leftovers
from extract.parts import parts_of

KNOWN = (("Nominal frequency", "16 MHz"), ("ESR", "60 Ω max."), ("Load capacitance", "9 pF"))


def notes(*blocks):
    return [(note.level, note.message) for note in parts_of(read_blocks(document(*blocks))).notes]


def test_a_row_with_an_unknown_label_and_a_crystals_unit_is_told():
    ((level, message),) = notes(line("ABQ32-16M"), table(*KNOWN, ("Blorbsible", "±20 ppm")))
    assert level == "warning"
    assert message == "not understood, look whether it is a property of the crystal: Blorbsible ±20 ppm"


def test_it_is_no_warning_where_a_reading_with_that_unit_stands():
    ((level, _),) = notes(
        line("ABQ32-16M"), table(*KNOWN, ("Frequency tolerance", "±10 ppm"), ("Blorbsible", "±20 ppm"))
    )
    assert level == "info"


def test_known_rows_and_tests_leave_nothing_over():
    tests = table(("Drop test", "±5 ppm"), ("Spurious", "-3 dB"), ("Blorbsible", "±5 ppm"))
    assert notes(line("ABQ32-16M"), table(*KNOWN), line("Reliability", heading=True), tests) == []


def test_a_column_with_an_unknown_head_is_told():
    made = table(("Part number", "Frequency (MHz)", "Blorb"), ("AB-1", "16", "60 Ω"), ("AB-2", "20", "50 Ω"))
    ((level, message),) = notes(made)
    assert (level, message.endswith("Blorb 60 Ω")) == ("warning", True)


def test_labels_of_a_dump_without_their_values_are_told():
    labels = [line("Shunt capacitance"), line("Drive level"), line("Ageing")]
    found = leftovers(read_blocks(document(*labels)).items, ["frequency_mhz"])
    assert [note.message for note in found] == [
        "named, but which value is whose cannot be told: shunt capacitance C0, drive level, ageing"
    ]
