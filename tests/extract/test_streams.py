"""Wrapped paragraphs read as one text, each value in its own line's place."""

from building import line

from extract.streams import stream_entries


def test_a_value_is_not_placed_by_a_digit_of_another_number():
    run = [
        line("Tolerance ±30 ppm, temperature range -10 to +60 °C, ESR 120 Ω max., C0 7 pF"),
        line("max., drive level 1 mW max.", number=2),
    ]
    placed = {entry.label.text.casefold(): entry.where.line for entry in stream_entries(run, "prose")}
    assert placed["drive level"] == 2
    assert placed["esr"] == 1
