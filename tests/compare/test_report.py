"""The readable forms: width, marks, sources, cautions."""

import pytest
from made_sheets import bench, part, reading, sheet, usual

from compare.ranking import rank
from compare.report import display_width, extract_text, fitted, rank_text, review_text, wrapped
from compare.review import review

WIDE = usual(maker="株式会社試作水晶デバイス製作所", number="試作品番-0001")
LOUD = {"circuit": {"swing_v": 3.0}}
PARTS = [
    WIDE,
    usual(number="P2", without=("esr_ohm",)),
    usual(reading("shunt_capacitance_pf", max=3.0), number="P3" * 40, without=("motional_capacitance_ff",)),
    usual(
        reading("load_capacitance_pf", options=(6.0, 8.0)),
        reading("esr_ohm", max=60.0, check="unit guessed"),
        number="P4",
    ),
]


def test_a_wide_character_takes_two_columns():
    assert display_width("水晶 16") == 7


@pytest.mark.parametrize("text", ["水晶振動子メーカー", "a long name that is cut", "ab"])
def test_a_cell_fills_its_width_exactly(text):
    assert display_width(fitted(text, 10)) == 10


def test_a_word_that_no_line_holds_is_broken():
    assert all(display_width(line) <= 100 for line in wrapped("水" * 300, "  - "))


@pytest.mark.parametrize("changes", [{}, LOUD, {"circuit": {"transconductance_ms": None, "swing_v": None}}])
def test_no_line_is_wider_than_100_columns(changes):
    at = bench(changes)
    text = "\n".join(
        [rank_text(rank([sheet(*PARTS)], at)), review_text(review([sheet(*PARTS)], at)), extract_text([sheet(*PARTS)])]
    )
    assert max(display_width(line) for line in text.splitlines()) <= 100


def test_the_ranking_says_what_it_comes_to_and_why():
    text = rank_text(rank([sheet(usual(number="P1"), usual(number="P2", without=("esr_ohm",)))], bench()))
    lines = text.splitlines()
    assert lines[0] == "2 parts offer the frequency: ▲ 1 meets, ◇ 1 cannot tell"
    assert lines[3].split() == ["1", "▲", "meets", "P1", "-", "ppm,", "all", "causes", "1.69", "times"]
    assert "ESR not stated by the sheet" in text
    assert "page 1" in text


def test_a_verdict_has_its_mark_and_its_word():
    text = review_text(review([sheet(usual())], bench(LOUD)))
    assert "▼ falls short" in text
    assert "▼ drive level: 329 µW" in text.replace("\n", " ")


def test_an_estimate_is_marked_with_its_interval():
    one = usual(without=("motional_capacitance_ff",))
    number = review([sheet(one)], bench())["reviews"][0]["motional_capacitance_ff"]
    line = next(line for line in review_text(review([sheet(one)], bench())).splitlines() if line.startswith("  C1, fF"))
    assert line.split()[-1] == "estimated"
    assert [float(x) for x in line.split()[2:5]] == pytest.approx(
        [number[end] for end in ("low", "mid", "high")], rel=1e-3
    )


def test_cautions_stand_under_every_verdict():
    for text in (rank_text(rank([sheet(usual())], bench())), review_text(review([sheet(usual())], bench()))):
        assert "An estimate is no measurement" in text
        assert "prove it on the real board, over temperature and supply" in " ".join(text.split())


def test_no_part_is_said_in_a_sentence_with_the_notes():
    other = sheet(usual(reading("frequency_mhz", 25.0)))
    text = rank_text(rank([other], bench()))
    assert text.splitlines()[0] == "No part offers the frequency asked."
    assert "does not offer 16 MHz (states 25 MHz)" in text


def test_questions_and_readings_to_look_at_are_told():
    text = review_text(review([sheet(*PARTS)], bench()))
    assert "Look at these readings first" in text
    assert "What is the greatest equivalent series resistance of P2 at 16 MHz" in text


def test_advice_gives_pairs_with_what_they_come_to():
    text = review_text(review([sheet(usual())], bench()))
    assert "load capacitors" in text
    assert "in the worst case" in text


def test_a_sheets_readings_are_told_with_bounds_band_and_place():
    banded = part(reading("esr_ohm", max=60.0, frequency_mhz=(12.0, 16.0), check="unit guessed", status="inferred"))
    lines = extract_text([sheet(banded)]).splitlines()
    assert lines[0] == "made.csv (csv): 1 part"
    assert [line.split() for line in lines[4:]] == [
        ["ESR", "60", "Ω", "inferred,", "page", "1"],
        ["12", "to", "16", "MHz"],
        ["look:", "unit", "guessed"],
    ]


def test_rows_that_are_not_shown_are_counted_by_verdict():
    parts = [usual(number=f"P{number}") for number in range(4)] + [usual(number="P4", without=("esr_ohm",))]
    text = rank_text(rank([sheet(*parts)], bench(), shown=2))
    assert text.startswith("5 parts offer the frequency: ▲ 4 meets, ◇ 1 cannot tell")
    assert "... and 3 more; --all shows and --json gives all of them" in text
    assert "P1" in text
    assert "P2" not in text


def test_of_thousands_of_notes_the_first_are_told_and_the_rest_counted():
    far = [usual(reading("frequency_mhz", 12.0), number=f"N{number}") for number in range(150)]
    text = rank_text(rank([sheet(usual(), *far)], bench()))
    assert "N99:" in text
    assert "N100:" not in text
    assert "... and 50 more; --json gives all of them" in text
