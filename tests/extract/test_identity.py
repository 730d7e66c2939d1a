import pytest
from building import line

from extract.entries import Entry, Piece, Text, Value
from extract.identity import is_package, maker_of, makers_in, package_in, part_number_of
from extract.meaning import part_tokens
from extract.model import Where


@pytest.mark.parametrize(
    ("text", "tokens"),
    [
        ("ABQ32-16.000-9", ("ABQ32-16.000-9",)),
        ("Datenblatt Schwingquarz ABQ60-10.000-20-2-B", ("ABQ60-10.000-20-2-B",)),
        ("AB-Q3225 series", ("AB-Q3225",)),
    ],
)
def test_part_numbers_are_told(text, tokens):
    assert part_tokens(text) == tokens


@pytest.mark.parametrize(
    "text",
    [
        "HC-49/US",
        "ISO 9001",
        "24.000MHz",
        "3.2x2.5",
        "AT-cut",
        "MSL1",
        "SMD3225",
        "12.5pF",
        "C0",
        "AEC-Q200",
        "25°C",
        "3rd",
    ],
)
def test_other_words_with_digits_are_no_part_numbers(text):
    assert part_tokens(text) == ()


@pytest.mark.parametrize(
    ("text", "package"),
    [
        ("Holder: HC-49/US", "HC-49/US"),
        ("ceramic 3.2 × 2.5 mm case", "3.2 × 2.5 mm"),
        ("贴片3225", "3225"),
        ("SEAM 2.0*1.6", "2.0*1.6"),
    ],
)
def test_a_package_is_found(text, package):
    assert package_in(text) == package


@pytest.mark.parametrize("text", ["1 × 10-8 mbar", "no size at all", "100 x 200 mm tray"])
def test_other_products_of_numbers_are_no_package(text):
    assert package_in(text) is None


@pytest.mark.parametrize(
    ("text", "maker"),
    [
        ("Able Schwingquarze GmbH", "Able Schwingquarze GmbH"),
        ("by Able Timing", "Able Timing"),
        ("Able Quartz ABQ-2016-N", "Able Quartz"),
        ("朝日星水晶株式会社", "朝日星水晶株式会社"),
    ],
)
def test_a_maker_is_told_by_its_form(text, maker):
    assert [name for name, _ in makers_in(text)] == [maker]


@pytest.mark.parametrize(
    "text", ["Quartz Crystal", "Surface Mount Crystal", "SMD Crystal Unit", "Tuning Fork Crystal", "°C Frequency"]
)
def test_a_description_of_a_crystal_is_no_maker(text):
    assert makers_in(text) == ()


def texts(*lines):
    return [Text(Piece(each.text, each.where), each.heading, each.segments) for each in lines]


def test_a_number_alone_on_its_line_goes_before_one_in_passing():
    found = texts(line("Able — ABQ25-27.000-10 — product specification OS-0932"), line("ABQ25-27.000-10"))
    assert part_number_of(found, []) == "ABQ25-27.000-10"


def test_a_related_part_is_not_the_part():
    assert part_number_of(texts(line("Related: ABQ32-24.000-10I")), []) is None


def test_a_maker_may_stand_only_in_the_page_header():
    assert maker_of(texts(line("ABQ25-27.000-10")), texts(line("Able Crystals Ltd"))) == "Able Crystals Ltd"


def test_a_size_with_tolerances_is_the_package():
    assert package_in("Dimensions: 5.0 ±0.15 × 3.2 ±0.15 × 0.9 max. Pads 1.2 × 1.0 mm") == "5.0 × 3.2 × 0.9"


def test_a_model_with_its_size_is_no_package():
    assert not is_package("LE-32 (3.2×2.5 mm)")
    assert is_package("3.2×2.5 mm")


def test_a_row_called_series_under_resistance_names_no_part():
    value = Value(Piece("100", Where(line=2)))
    entry = Entry(Piece("series", Where(line=2)), (value,), section="Resistance")
    title = Text(Piece("SX-21 crystal", Where(line=1)), heading=True)
    assert part_number_of([title, entry], ()) == "SX-21"


def test_a_proper_word_before_the_part_number_at_the_top_is_the_maker():
    top = [Text(Piece("OAKMERE QRB3225 MHz Crystal - RoHS - MSL 1", Where(line=1)))]
    assert maker_of(top, ()) == "OAKMERE"


def test_words_of_approval_are_no_maker():
    top = [Text(Piece("RoHS - Preliminary - MSL 1", Where(line=1)))]
    assert maker_of(top, ()) is None


def test_an_example_of_an_order_code_does_not_replace_the_name_of_the_series():
    texts = [
        Text(Piece("Oakmere QRB3225 MHz Crystal", Where(line=1)), heading=True),
        Text(Piece("Example: QRB3225-26.000MHz-8-1-D", Where(line=2))),
    ]
    assert part_number_of(texts, ()) == "QRB3225"


def test_words_behind_a_holder_are_no_maker():
    top = [
        Text(Piece("HC-49/U & HC-49/US Microprocessor Crystals", Where(line=1))),
        Text(Piece("BELLCHAMBER CRYSTALS", Where(line=2))),
    ]
    assert maker_of(top, ()) == "BELLCHAMBER CRYSTALS"


def test_a_comma_behind_the_legal_form_is_no_part_of_the_name():
    assert makers_in("Lindenbrück Quarztechnik KG, Katalog 2025")[0][0] == "Lindenbrück Quarztechnik KG"
