from building import document, line, table

from extract.blocks import read_blocks
from extract.entries import Entry, Listing, Text


def test_blocks_are_read_in_their_order():
    found = read_blocks(
        document(
            line("ABQ32 crystal", heading=True),
            table(("Nominal frequency", "12 MHz"), ("ESR", "60 Ω")),
            line("Load capacitance: 9 pF"),
        )
    )
    assert [item.label.text for item in found.items if isinstance(item, Entry)] == [
        "Nominal frequency",
        "ESR",
        "Load capacitance",
    ]


def test_footnotes_are_kept_by_their_mark():
    found = read_blocks(document(line("*2 80 Ω for 10 to 12 MHz", number=7)))
    assert found.notes["2"][0] == "80 Ω for 10 to 12 MHz"
    assert found.notes["2"][1].where.line == 7


def test_page_headers_stay_apart():
    found = read_blocks(document(line("text"), headers=(line("Able Crystals Ltd"),)))
    assert [text.piece.text for text in found.headers] == ["Able Crystals Ltd"]
    assert [item.piece.text for item in found.items if isinstance(item, Text)] == ["text"]


def test_a_list_of_parts_is_a_listing():
    found = read_blocks(document(table(("Part number", "Frequency"), ("ABQ32-12M", "12 MHz"))))
    assert [type(item) for item in found.items] == [Listing]
