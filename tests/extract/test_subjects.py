"""Values under the names of several models."""

from building import bounds, document, table

from extract.blocks import read_blocks
from extract.parts import parts_of
from extract.subjects import package_beside


def test_each_model_has_the_size_that_stands_behind_its_name():
    lines = ["AB-1 / AB-2  3.2 x 2.5 mm", "The AB-3 (2.0 x 1.6 mm) and AB-30 (1.6 x 1.2 mm) are small."]
    names = ("AB-1", "AB-2", "AB-3", "AB-30")
    assert [package_beside(name, names, lines) for name in names] == [
        "3.2 x 2.5 mm",
        "3.2 x 2.5 mm",
        "2.0 x 1.6 mm",
        "1.6 x 1.2 mm",
    ]


def test_a_size_further_on_in_the_sentence_is_not_the_models():
    assert package_beside("AB-1", ("AB-1",), ["AB-1 is sold on reels of a diameter of 18.0 x 8.0 mm"]) is None


def test_models_without_a_digit_are_told_apart_by_their_heads():
    rows = [("Model", "TBX-A", "TBX-B"), ("ESR max", "60 Ω", "80 Ω"), ("Load capacitance", "10 pF", "8 pF")]
    rows += [("Nominal frequency", "8 MHz", "12 MHz")]
    found = parts_of(read_blocks(document(table(*rows)))).parts
    assert [(part.part_number, bounds(part, "esr_ohm")) for part in found] == [
        ("TBX-A", [(None, None, 60.0)]),
        ("TBX-B", [(None, None, 80.0)]),
    ]
