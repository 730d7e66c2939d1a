from collections import Counter

from building import document, line, table

from extract import blocks, streams
from extract.blocks import BEHIND_LABEL, FIRST_OF_LONG_TEXT, read_blocks
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


def test_of_a_very_long_text_only_lines_with_labels_are_read_and_a_warning_says_so(monkeypatch):
    monkeypatch.setattr(blocks, "LONG_TEXT", 300)
    filling = [line(f"lorem ipsum {number} dolor", number=number) for number in range(1, 400)]
    found = read_blocks(document(*filling[:-50], line("Load capacitance: 9 pF", number=99), *filling[-50:]))
    assert [item.label.text for item in found.items if isinstance(item, Entry)] == ["Load capacitance"]
    (warning,) = found.warnings
    left_out = len(filling) + 1 - FIRST_OF_LONG_TEXT - 1 - BEHIND_LABEL
    assert warning.level == "warning"
    assert f"{left_out} of {len(filling) + 1} lines" in warning.message


def test_the_lines_of_a_run_are_looked_at_once_each_and_not_once_for_each_line_above(monkeypatch):
    looked_at = Counter()
    real = streams._is_broken
    monkeypatch.setattr(streams, "_is_broken", lambda at, below: looked_at.update([at.where.line]) or real(at, below))
    read_blocks(document(*(line(f"lorem {number} ipsum", number=number) for number in range(1, 200))))
    assert set(looked_at.values()) == {1}
