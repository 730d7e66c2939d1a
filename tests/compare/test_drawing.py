"""The SVG pictures: well formed, every figure in them, nothing of a file unescaped."""

import base64
import re
from dataclasses import fields, replace

import hand_made
import pytest
from lxml import etree

from compare.bench import read_bench
from compare.circuit_text import circuit_figures
from compare.drawing import STRIP_WIDTH, CircuitFigures, Mark, as_address, circuit_svg, slack_strip_svg
from compare.palette import DARK, LIGHT

FIGURES = circuit_figures(read_bench(hand_made.BENCH_TEXT, "bench.toml"))
SVG = "{http://www.w3.org/2000/svg}"


def texts(svg):
    return [node.text for node in etree.fromstring(svg.encode()).iter(f"{SVG}text")]


@pytest.mark.parametrize("palette", [LIGHT, DARK], ids=["light", "dark"])
def test_every_capacitance_stands_in_the_drawing_under_its_two_nodes(palette):
    said = texts(circuit_svg(FIGURES, palette))
    for name in ("A–0 fitted", "A–0 stray", "A–0 inside IC", "B–0 fitted", "B–0 stray", "B–0 inside IC", "A–B stray"):
        assert name in said
    assert said.count("12 pF") == 2
    assert said.count("2.6 pF") == 2
    assert "0.4 pF" in said
    assert "its own C0 does not belong here" in said


def test_with_a_series_resistor_the_node_o_and_what_lies_there_are_drawn():
    figures = replace(FIGURES, series_resistor=Mark("470 Ω"), output_pin=Mark("1.5 pF"))
    said = texts(circuit_svg(figures, LIGHT))
    assert {"O", "470 Ω", "O–0 pin", "1.5 pF", "O–0 inside IC", "A–O 1000 kΩ"} <= set(said)
    assert "B–0 inside IC" not in said
    assert "O" not in texts(circuit_svg(FIGURES, LIGHT))


def test_what_is_not_known_is_dashed_and_what_is_none_is_pale():
    def strokes(**changed):
        svg = etree.fromstring(circuit_svg(replace(FIGURES, **changed), LIGHT).encode())
        return [(node.get("stroke"), node.get("stroke-dasharray")) for node in svg.iter(f"{SVG}path")]

    assert "3 3" not in [dash for _, dash in strokes()]
    assert (LIGHT.edge, "3 3") in strokes(input_fitted=Mark("not known", "unknown"))
    before = strokes().count((LIGHT.edge, None))
    assert strokes(across_stray=Mark("none", "none")).count((LIGHT.edge, None)) > before


def test_every_figure_that_has_a_field_can_be_pressed():
    svg = circuit_svg(FIGURES, LIGHT)
    pressed = set(re.findall(r'data-field="([^"]+)"', svg))
    marks = [getattr(FIGURES, one.name) for one in fields(CircuitFigures)]
    assert pressed == {mark.key for mark in marks if isinstance(mark, Mark)}


def test_text_is_escaped():
    svg = circuit_svg(replace(FIGURES, crystal='<script>"&'), LIGHT)
    etree.fromstring(svg.encode())
    assert "<script>" not in svg


def test_the_drawing_is_told_to_those_who_cannot_see_it():
    label = etree.fromstring(circuit_svg(FIGURES, LIGHT).encode()).get("aria-label")
    assert "A–0 fitted 12 pF" in label
    assert "A–B stray 0.4 pF" in label


def bars(slack, palette=LIGHT):
    svg = etree.fromstring(slack_strip_svg(slack, palette).encode())
    lines = [node for node in svg.iter(f"{SVG}line") if node.getparent().tag != f"{SVG}pattern"]
    return lines[:-1], lines[-1]


def test_a_strip_goes_right_of_the_line_when_met_and_left_in_rust_when_not():
    (met, short), line = bars({"Margin": 2.0, "Drive": 0.5})
    at = float(line.get("x1"))
    assert float(met.get("x2")) > at
    assert float(short.get("x2")) < at
    assert short.get("stroke") == LIGHT.short
    assert met.get("stroke") == LIGHT.edge


def test_the_tightest_strip_is_heavy_and_an_unknown_one_dotted():
    (loose, tight, unknown), _ = bars({"Margin": 9.0, "Gain": 1.2, "Drive": None})
    assert tight.get("stroke-width") == "4"
    assert tight.get("stroke") == LIGHT.accent
    assert loose.get("stroke-width") == "2"
    assert unknown.get("stroke-dasharray") == "1 4"


def test_no_strip_leaves_its_picture():
    (most, least), _ = bars({"Margin": 999.0, "Drive": 0.0})
    assert 0 <= float(least.get("x2")) <= float(most.get("x2")) <= STRIP_WIDTH


def test_an_address_holds_the_picture_itself():
    svg = slack_strip_svg({"Margin": 2.0}, LIGHT)
    head, _, body = as_address(svg).partition(",")
    assert head == "data:image/svg+xml;base64"
    assert base64.b64decode(body).decode() == svg


def test_strips_are_of_one_height_whatever_is_asked():
    pictures = [slack_strip_svg(dict.fromkeys(names, 2.0), LIGHT) for names in ("a", "abc", "abcdef", "abcdefgh")]
    assert len({etree.fromstring(picture.encode()).get("height") for picture in pictures}) == 1
    for names in ("a", "abcdefgh"):
        lines, _ = bars(dict.fromkeys(names, 2.0))
        assert all(2 <= float(line.get("y1")) <= 38 for line in lines)
