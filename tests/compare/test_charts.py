"""The charts, drawn from reckoned curves and from figures by hand; and their tables."""

import math
import re

import numpy as np
import pytest
from lxml import etree
from reviewed_parts import dossier_of, part, radio, watch

from compare import charts
from compare.charts import Slack, both_ends, budget_chart, load_chart, slack_chart
from compare.curves import Curve, Stack
from compare.palette import DARK, LIGHT
from compare.picture import Box, Dot, Line, Words, svg, text_width

ROWS = [
    Slack("Margin", 1.34, 4.65, "6.7, needs 5"),
    Slack("ppm in all", 0.90, 1.44, "+55.3, limit ±50"),
    Slack("Drive", None, None, "not known"),
]


def words(chart, palette=LIGHT):
    return [mark for mark in chart.draw(palette).marks if isinstance(mark, Words)]


def said(chart):
    return {mark.text for mark in words(chart)}


@pytest.mark.parametrize("dossier", [radio, watch])
def test_every_chart_is_drawn_with_its_unit_and_stays_inside_its_picture(dossier):
    every = dossier().charts
    assert list(every) == [
        "headroom_against_gain",
        "ppm_against_load",
        "ppm_budget",
        "ppm_over_temperature",
        "margin_against_esr",
    ]
    for chart in every.values():
        picture = chart.draw(LIGHT)
        etree.fromstring(svg(picture).encode())
        texts = " ".join(mark.text for mark in picture.marks if isinstance(mark, Words))
        assert re.search(r"\b(ppm|pF|mS|µS|Ω|kΩ|°C)\b|°C", texts)
        for mark in picture.marks:
            if isinstance(mark, Line):
                assert all(-1 <= x <= picture.width + 1 and -1 <= y <= picture.height for p in mark.paths for x, y in p)
            if isinstance(mark, Words):
                shift = {"start": 0, "middle": 0.5, "end": 1}[mark.anchor] * text_width(mark.text, mark.size)
                assert mark.x - shift >= -6
                assert mark.x - shift + text_width(mark.text, mark.size) <= picture.width + 16


@pytest.mark.parametrize("dossier", [radio, watch])
def test_what_a_chart_marks_is_what_the_review_says(dossier):
    one = dossier()
    least = next(text for text in said(one.charts["headroom_against_gain"]) if text.startswith("least "))
    assert float(least.removeprefix("least ")) == pytest.approx(one.review["resistance_headroom"]["low"], rel=0.01)
    load = one.review["circuit_load_pf"]["mid"]
    assert any(text.startswith(f"circuit {load:.2f} pF") for text in said(one.charts["ppm_against_load"]))
    low, high = one.review["total_ppm"]["low"], one.review["total_ppm"]["high"]
    assert both_ends(low, high) in said(one.charts["ppm_budget"])
    margin = one.review["margin"]["low"]
    marked = next(text for text in said(one.charts["margin_against_esr"]) if text.startswith("greatest"))
    assert float(marked.rpartition(" ")[2]) == pytest.approx(margin, rel=0.01)


def test_a_clock_has_seconds_a_day_beside_ppm_and_a_radio_has_not():
    assert "ppm / s a day" in said(watch().charts["ppm_over_temperature"])
    assert "ppm" in said(radio().charts["ppm_over_temperature"])
    # 100 ppm are 8.64 s a day.
    figures = [text.split(" / ") for text in said(watch().charts["ppm_over_temperature"]) if " / " in text]
    pairs = [tuple(float(one.replace("−", "-")) for one in pair) for pair in figures if pair[0] != "ppm"]
    assert len(pairs) >= 3
    for ppm, daily in pairs:
        assert daily == pytest.approx(0.0864 * ppm, abs=0.051)


def test_a_drift_without_a_stated_shape_says_so_and_a_forks_parabola_does_not():
    assert any("shape not stated" in text for text in said(radio().charts["ppm_over_temperature"]))
    assert not any("shape not stated" in text for text in said(watch().charts["ppm_over_temperature"]))


def test_the_load_chart_shows_rated_load_and_what_is_left_for_it():
    texts = said(radio().charts["ppm_against_load"])
    assert "rated 8 pF" in texts
    # By hand: ±50 less ±10, ±12 and ±2 ln(3.65×10 + 1)/ln(3.65 + 1) = ±4.72 leaves ±23.3.
    assert {"room left for load +23.3", "−23.3"} <= texts


def test_words_do_not_lie_on_one_another():
    for one in (radio(), watch()):
        for chart in one.charts.values():
            boxes = [box_of(mark) for mark in words(chart)]
            for first, a in enumerate(boxes):
                for b in boxes[first + 1 :]:
                    assert a[2] <= b[0] + 4 or b[2] <= a[0] + 4 or a[3] <= b[1] + 4 or b[3] <= a[1] + 4


def box_of(mark):
    wide = 0.46 * mark.size * len(mark.text)
    left = mark.x - {"start": 0, "middle": 0.5, "end": 1}[mark.anchor] * wide
    return left, mark.y - 9, left + wide, mark.y + 2


def test_a_limit_far_away_does_not_flatten_the_curve():
    load = np.linspace(6.0, 10.0, 41)
    shift = 40.0 * (8.0 - load)
    marks = {"rated": {"load_pf": 8.0, "shift_ppm": 0.0}, "circuit": {"load_pf": 8.1, "shift_ppm": -4.0}}
    columns = {"load_pf": load, "shift_ppm": shift, "shift_low_ppm": shift, "shift_high_ppm": shift}
    curve = Curve(columns, dict.fromkeys(columns, "ppm"), marks, {"room_low_ppm": -4000.0, "room_high_ppm": 4000.0})
    assert not any("room left" in text for text in said(load_chart(curve)))


def test_the_budget_is_stacked_each_term_from_where_the_last_one_ended():
    low, high = np.array([-10.0, -12.0, -4.4, -0.4]), np.array([10.0, 12.0, 4.4, 18.9])
    causes = ("make", "temperature", "ageing", "load error")
    stack = Stack(causes, low, high, low.cumsum(), high.cumsum(), 23.2, 4.7)
    chart = budget_chart(stack, (-50.0, 50.0))
    bars = [mark for mark in chart.draw(LIGHT).marks if isinstance(mark, Box) and mark.fill == LIGHT.accent]
    upper = sorted((bar for bar in bars), key=lambda bar: (bar.y, bar.x))
    for above, below in zip(upper[1::2], upper[3::2], strict=False):
        assert above.x + above.width == pytest.approx(below.x, abs=0.01)
    # By hand: -10 - 12 - 4.4 - 0.4 and 10 + 12 + 4.4 + 18.9.
    assert {"±10", "±12", "±4.4", "−0.4/+18.9", "−26.8/+45.3"} <= said(chart)
    assert chart.table[1][-1] == ["left to the limits", -23.2, 4.7]


def test_a_lopsided_limit_stays_lopsided():
    low, high = np.array([-10.0]), np.array([20.0])
    chart = budget_chart(Stack(("make",), low, high, low, high, 15.0, 10.0), (-25.0, 30.0))
    assert {"−25", "+30"} <= said(chart)


def test_every_requirement_stands_in_the_slack_chart_with_its_figures():
    texts = said(slack_chart(ROWS))
    for row in ROWS:
        assert {row.requirement, row.said} <= texts


def test_what_is_not_known_is_dotted_and_has_no_mark():
    marks = slack_chart(ROWS[2:]).draw(LIGHT).marks
    assert any(isinstance(mark, Line) and mark.dash == (1, 4) for mark in marks)
    assert not any(isinstance(mark, Dot) for mark in marks)


def test_what_falls_short_lies_left_of_the_line_and_has_its_own_colour():
    marks = slack_chart(ROWS[:2]).draw(LIGHT).marks
    line = next(m for m in marks if isinstance(m, Line) and m.width == 1.5)
    worst = {mark.fill: mark.x for mark in marks if isinstance(mark, Box)}
    assert worst[LIGHT.short] < line.paths[0][0][0] < worst[LIGHT.accent]


def test_slack_beyond_the_axis_is_drawn_at_its_edge():
    chart = slack_chart([Slack("Drive", 999.0, 999.0, ""), Slack("Gain", 0.0, 0.0, "")])
    drawn = [mark.x for mark in chart.draw(LIGHT).marks if isinstance(mark, Box | Dot)]
    assert min(drawn) > 0
    assert max(drawn) < charts.WIDTH


@pytest.mark.parametrize("rows", [ROWS[:1], ROWS[2:], []])
def test_all_known_or_none_known_can_be_drawn(rows):
    assert slack_chart(rows).draw(DARK).marks


def test_both_themes_put_their_own_colours_in():
    for palette in (LIGHT, DARK):
        drawn = svg(radio().charts["ppm_against_load"].draw(palette))
        other = DARK if palette is LIGHT else LIGHT
        assert palette.accent in drawn
        assert other.accent not in drawn


def test_a_table_holds_the_curve_with_units_and_the_marks_in_their_places():
    heads, rows = radio().charts["headroom_against_gain"].table
    assert heads == ["Transconductance, mS", "R1 headroom", "R1 headroom, worst corner", "Mark"]
    assert [row[0] for row in rows] == sorted(row[0] for row in rows)
    critical = next(row for row in rows if row[3] == "critical")
    assert critical[1] == pytest.approx(1.0, abs=1e-3)
    assert critical[0] == pytest.approx(radio().review["critical_transconductance_ms"]["mid"], rel=5e-3)


def test_the_data_are_all_the_points_as_numbers():
    heads, rows = radio().charts["ppm_against_load"].data
    assert heads[:2] == ["Load, pF", "Shift, ppm"]
    assert len(rows) > 100
    assert all(isinstance(value, float) and math.isfinite(value) for row in rows for value in row)


def test_a_chart_without_its_inputs_is_told_and_not_drawn():
    silent = dossier_of(part(without=("esr_ohm",)))
    assert "margin_against_esr" not in silent.charts
    assert any(text.startswith("Margin against ESR: not drawn, for") for text in silent.not_drawn)
