"""Substitute's HTML: bars by share of the room, text of a sheet escaped, numbers that copy themselves bare."""

import math
from dataclasses import replace

from lxml import html

from compare.levers import Lever
from compare.palette import LIGHT
from compare.swap_pieces import MIDDLE, REACH, both_html, lever_svg, lever_words, lines_html, said_html, same_html
from compare.swap_shown import BothHave, SwapLine

LINE = SwapLine(
    field="esr_ohm",
    name="ESR",
    unit="Ω",
    incumbent="40 max",
    candidate="50 max",
    difference="+10 (+25 %)",
    relation="looser",
    matters=True,
    does="margin 6.2 becomes 5.5, needs 5",
    lever=Lever("margin", 0.5, "margin 6.2 becomes 5.5, needs 5"),
    bare_incumbent="40",
    bare_candidate="50",
)
HOSTILE = '<img src=x onerror="alert(1)">'


def test_a_bar_is_as_long_as_the_share_of_the_room_used():
    assert f"H{MIDDLE - REACH / 2:.1f}" in lever_svg(LINE, LIGHT)
    won = lever_svg(replace(LINE, lever=Lever("margin", -0.25, "")), LIGHT)
    assert f"H{MIDDLE + REACH / 4:.1f}" in won
    assert LIGHT.accent in won


def test_past_the_room_there_is_an_arrow_and_no_longer_bar():
    past = lever_svg(replace(LINE, lever=Lever("margin", 7.0, "")), LIGHT)
    assert past == lever_svg(replace(LINE, lever=Lever("margin", math.inf, "")), LIGHT)
    assert LIGHT.short in past
    assert "Z" in past


def test_what_cannot_be_told_is_dotted():
    assert "stroke-dasharray" in lever_svg(replace(LINE, lever=Lever("margin", math.nan, "")), LIGHT)
    assert "stroke-dasharray" in lever_svg(replace(LINE, relation="unknown", lever=None), LIGHT)


def test_each_bar_is_said_in_words():
    assert lever_words(Lever("margin", 0.44, "")) == "uses 44 % of the room"
    assert lever_words(Lever("margin", -0.1, "")) == "wins 10 % of the room"
    assert lever_words(Lever("margin", 1.2, "")) == "past the room that there was"
    assert lever_words(Lever("", 0.0, "")) == "uses no room"


def test_a_number_copies_without_its_unit_and_words():
    row = html.fromstring(lines_html([LINE], LIGHT, levers=True))
    assert [button.get("data-copy") for button in row.iter("button")] == ["40", "50"]
    assert [button.text for button in row.iter("button")] == ["40 max", "50 max"]


def test_text_of_a_sheet_never_becomes_html():
    line = replace(LINE, name=HOSTILE, incumbent=HOSTILE, candidate=HOSTILE, does=HOSTILE, place_candidate=HOSTILE)
    line = replace(line, unit=HOSTILE, bare_candidate=HOSTILE, difference=HOSTILE)
    both = BothHave(HOSTILE, HOSTILE, HOSTILE, HOSTILE, HOSTILE, HOSTILE)
    for made in (
        lines_html([line], LIGHT, levers=True),
        same_html([line]),
        both_html([both], HOSTILE),
        said_html(HOSTILE),
    ):
        assert not list(html.fromstring(made).iter("img"))
        assert HOSTILE in html.fromstring(made).text_content()


def test_without_a_circuit_there_is_no_column_of_bars():
    table = lines_html([LINE], LIGHT, levers=False)
    assert "<svg" not in table
    assert "room used" not in table
    assert "<svg" in lines_html([LINE], LIGHT, levers=True)


def test_what_matters_is_said_by_a_word():
    assert "<small>matters</small>" in lines_html([LINE], LIGHT, levers=True)
    assert "matters" not in lines_html([replace(LINE, matters=False)], LIGHT, levers=True)
