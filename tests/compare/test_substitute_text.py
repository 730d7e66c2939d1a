"""Substitutes as text for a person: nothing cut off, plain digits, and the frequency of a part on another mode."""

import re

import pytest
from made_sheets import bench, reading, sheet, usual

from compare.substitute_text import substitute_text
from compare.substitution import substitute

BOARD = {"circuit": {"capacitor_tolerance_percent": 1.0, "stray_tolerance_percent": 10.0}}


def text_of(candidate, board=None):
    return substitute_text(substitute([sheet(usual())], [sheet(candidate)], board))


@pytest.mark.parametrize("board", [None, bench(BOARD)])
def test_an_overtone_is_told_by_the_frequency_it_runs_at_and_not_by_ppm(board):
    """16 MHz / 3 = 5.333 MHz."""
    text = " ".join(text_of(usual(mode="third overtone", number="P2"), board).split())
    assert "run on its fundamental, at about 5.333 MHz, a third of the nominal frequency" in text
    assert not re.search(r"\de[+-]?\d", text)


def test_a_cell_longer_than_its_column_goes_on_below():
    text = text_of(usual(number="P2"))
    assert "…" not in text
    assert "  stability over" in text


def test_many_candidates_are_told_with_what_decides_in_full():
    parts = [usual(reading("operating_temperature_c", min=-20.0, max=70.0), number=f"P{n}") for n in range(12)]
    text = substitute_text(substitute([sheet(usual())], [sheet(*parts)], None))
    assert "…" not in text
    assert max(map(len, text.splitlines())) <= 102
