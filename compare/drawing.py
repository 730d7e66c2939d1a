"""SVG pictures: the circuit with every capacitance named by its two nodes, and the slack strips of a ranked row.

Plain text in, SVG text out; everything that could come from a sheet or a file is escaped here.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass
from html import escape
from typing import Literal

from compare.palette import Palette
from compare.picture import Pen, Picture, as_address, svg

__all__ = ["CircuitFigures", "Mark", "as_address", "circuit_picture", "circuit_svg", "slack_strip_svg"]

State = Literal["given", "taken", "none", "unknown"]


@dataclass(frozen=True, slots=True)
class Mark:
    """One figure of the drawing: its text with unit, how we have it, and the key of the field that sets it."""

    text: str
    state: State = "given"
    key: str = ""


@dataclass(frozen=True, slots=True)
class CircuitFigures:
    """What the drawing shows, as text. Nodes: A amplifier input, B crystal's output end, O amplifier output, 0 ground.

    `series_resistor` is None where none is fitted; then O and B are one node and `output_pin` is not drawn.
    """

    crystal: str
    transconductance: Mark
    feedback: Mark
    across_stray: Mark
    input_fitted: Mark
    input_stray: Mark
    input_inside: Mark
    output_fitted: Mark
    output_stray: Mark
    output_inside: Mark
    series_resistor: Mark | None = None
    output_pin: Mark | None = None


WIDTH, HEIGHT = 800, 380
LEFT, RIGHT, WIRE = 200, 600, 214
AMPLIFIER_Y, FEEDBACK_Y = 96, 26


def circuit_svg(figures: CircuitFigures, palette: Palette) -> str:
    """The circuit as drawn on the page, 800 by 380 pixels."""
    return svg(circuit_picture(figures, palette))


def circuit_picture(figures: CircuitFigures, palette: Palette) -> Picture:
    """The circuit as page and report have it."""
    pen = _Pen(palette)
    _amplifier(pen, figures)
    _crystal(pen, figures)
    right = [("fitted", figures.output_fitted), ("stray", figures.output_stray)]
    if figures.series_resistor is None:
        right.append(("inside IC", figures.output_inside))
    else:
        _ahead_of_resistor(pen, figures)
    _bank(pen, "B", RIGHT, (0, 68, 142)[: len(right)], right)
    left = (("inside IC", figures.input_inside), ("stray", figures.input_stray), ("fitted", figures.input_fitted))
    _bank(pen, "A", LEFT, (-142, -68, 0), left)
    _node(pen, "A", LEFT, ("amplifier", "input"), -1)
    beside = ("crystal’s", "output end") if figures.series_resistor else ("amplifier output,", "no series resistor")
    _node(pen, "B", RIGHT, beside, 1)
    return Picture(WIDTH, HEIGHT, tuple(pen.marks), _told(figures))


def _told(figures: CircuitFigures) -> str:
    banks = (
        ("A–0 fitted", figures.input_fitted),
        ("A–0 stray", figures.input_stray),
        ("A–0 inside IC", figures.input_inside),
        ("B–0 fitted", figures.output_fitted),
        ("B–0 stray", figures.output_stray),
        ("O–0 inside IC" if figures.series_resistor else "B–0 inside IC", figures.output_inside),
        ("A–B stray", figures.across_stray),
    )
    return "Pierce oscillator, " + figures.crystal + ": " + ", ".join(f"{name} {mark.text}" for name, mark in banks)


class _Pen(Pen):
    """The pen of the circuit: it knows the colours, and how a figure is written."""

    def __init__(self, palette: Palette) -> None:
        super().__init__(palette.ink)
        self.palette = palette

    def part(self, x: float, y: float, width: float, height: float, fill: str) -> None:
        self.box(x, y, width, height, fill, edge=self.palette.ink)

    def figure(self, x: float, y: float, mark: Mark, *, left: bool = False, size: float = 13) -> None:
        plain = mark.state in ("none", "unknown")
        colour = self.palette.soft if plain else self.palette.ink
        self.write(
            x, y, mark.text, "start" if left else "middle", colour=colour, size=size, bold=not plain, key=mark.key
        )


def _amplifier(pen: _Pen, figures: CircuitFigures) -> None:
    y = AMPLIFIER_Y
    resistor = figures.series_resistor is not None
    output = 500 if resistor else RIGHT  # the node O, ahead of a series resistor
    pen.line(f"M{LEFT},{WIRE}V{FEEDBACK_Y}H340M460,{FEEDBACK_Y}H{output}V{y}")
    pen.line(f"M{LEFT},{y}H352M447.5,{y}H{output}" + ("" if resistor else f"M{RIGHT},{WIRE}V{y}"))
    pen.part(340, FEEDBACK_Y - 12, 120, 24, pen.palette.page)
    node = "O" if resistor else "B"
    feedback = figures.feedback
    pen.figure(400, FEEDBACK_Y + 4.5, Mark(f"A–{node} {feedback.text}", feedback.state, feedback.key), size=12)
    pen.area(((352, y - 34), (352, y + 34), (436, y)), pen.palette.leaf, edge=pen.palette.ink)
    pen.dot(441.8, y, 5.5, pen.palette.page, edge=pen.palette.ink)
    pen.write(357, y + 4, "gm", "start", bold=True)
    pen.figure(394, y + 50, figures.transconductance, size=12)
    for x in (LEFT, output):
        pen.dot(x, y, 3.5, pen.palette.ink)


def _ahead_of_resistor(pen: _Pen, figures: CircuitFigures) -> None:
    """The node O with the series resistor to B, and what lies from O to ground: pin and pad, and inside the IC."""
    assert figures.series_resistor is not None  # noqa: S101
    y = AMPLIFIER_Y
    pen.line(f"M500,{y}H530M590,{y}H{RIGHT}V{WIRE}")
    pen.part(530, y - 9, 60, 18, pen.palette.page)
    pen.figure(566, y - 16, figures.series_resistor, size=12)
    pen.line(f"M500,{y}V{y + 20}")
    pen.dot(500, y, 10, pen.palette.accent)
    pen.write(500, y + 4, "O", bold=True, colour=pen.palette.page)
    # O's capacitors are written out at the right of the drawing: there is no room for their symbols beside the crystal.
    pen.line(f"M492,{y + 20}H508M492,{y + 27}H508M500,{y + 27}V{y + 38}M490,{y + 38}H510M494,{y + 43}H506")
    pen.write(514, y + 30, "O–0", "start", colour=pen.palette.soft)
    x = 640
    pen.write(x, y - 36, "Ahead of the series resistor:", "start", colour=pen.palette.soft)
    for line, (cause, mark) in enumerate((("pin", figures.output_pin), ("inside IC", figures.output_inside))):
        if mark is not None:
            pen.write(x, y - 16 + 18 * line, f"O–0 {cause}", "start", colour=pen.palette.soft)
            pen.figure(x + 84, y - 16 + 18 * line, mark, left=True, size=12)


def _crystal(pen: _Pen, figures: CircuitFigures) -> None:
    y, middle = WIRE, 400
    pen.line(f"M{LEFT},{y}H376M424,{y}H{RIGHT}M376,{y - 22}V{y + 22}M424,{y - 22}V{y + 22}")
    pen.part(384, y - 22, 32, 44, pen.palette.wash)
    pen.write(middle, y - 32, figures.crystal, bold=True, size=13)
    pen.write(middle, y + 39, "its own C0 does not belong here", colour=pen.palette.soft)
    mark = figures.across_stray
    colour, dash = _stroke(pen.palette, mark)
    pen.line(f"M290,{y}V{y + 68}H394M406,{y + 68}H510V{y}", colour=colour, dash=dash)
    pen.line(f"M394,{y + 57}V{y + 79}M406,{y + 57}V{y + 79}", colour=colour)
    pen.write(middle, y + 98, "A–B stray", colour=pen.palette.soft)
    pen.figure(middle, y + 115, mark)


def _stroke(palette: Palette, mark: Mark) -> tuple[str, tuple[float, ...]]:
    return (palette.edge if mark.state in ("none", "unknown") else palette.ink), (
        3,
        3,
    ) if mark.state == "unknown" else ()


def _bank(pen: _Pen, node: str, x: float, at: Sequence[float], marks: Sequence[tuple[str, Mark]]) -> None:
    """The capacitors from one node to ground, side by side, each with its cause and figure under it."""
    y = WIRE + 72
    places = [x + shift for shift in at]
    pen.line(f"M{x},{WIRE + 12}V{y - 30}M{min(places)},{y - 30}H{max(places)}")
    for place, (cause, mark) in zip(places, marks, strict=True):
        colour, dash = _stroke(pen.palette, mark)
        pen.line(f"M{place},{y - 30}V{y - 4}M{place},{y + 4}V{y + 22}", colour=colour, dash=dash)
        pen.line(f"M{place - 12},{y - 4}H{place + 12}M{place - 12},{y + 4}H{place + 12}", colour=colour, dash=dash)
        pen.write(place, y + 58, f"{node}–0 {cause}", colour=pen.palette.soft)
        pen.figure(place, y + 76, mark)
    low, high = min(places) - 12, max(places) + 12
    pen.line(f"M{low},{y + 22}H{high}", width=2.4)
    middle = (low + high) / 2
    pen.line(f"M{middle - 14},{y + 29}h28M{middle - 8},{y + 35}h16")
    pen.write(high + 12 if node == "B" else low - 12, y + 27, "0", bold=True, size=13)


def _node(pen: _Pen, name: str, x: float, beside: Iterable[str], side: int) -> None:
    pen.dot(x, WIRE, 12, pen.palette.accent)
    pen.write(x, WIRE + 4.5, name, bold=True, colour=pen.palette.page, size=13)
    for line, text in enumerate(beside):
        pen.write(x + side * 20, WIRE - 12 + 14 * line, text, "end" if side < 0 else "start", colour=pen.palette.soft)


STRIP_WIDTH, STRIP_HEIGHT, STRIP_ROW, STRIP_ENDS = 200, 40, 6, (0.33, 30.0)


def slack_strip_svg(slack: Mapping[str, float | None], palette: Palette) -> str:
    """Thin strips, one a requirement in the order of `slack` (name to times over), all from the line at 1.

    Heavy: the tightest, or short (then to the left of the line, in rust). Dotted: not known. Beyond the ends (0.33
    and 30 times) a strip stops at the edge.
    """
    # Of one height whatever is asked, since a grid scales its pictures to the row; more than six go closer together.
    height, row_height = STRIP_HEIGHT, min(STRIP_ROW, STRIP_HEIGHT / max(len(slack), 1))
    top = (height - row_height * (len(slack) - 1)) / 2
    known = [times for times in slack.values() if times is not None]
    least = min(known, default=None)
    line = _strip_x(1.0)
    drawn = [
        f'<defs><pattern id="h" width="6" height="6" patternUnits="userSpaceOnUse" patternTransform="rotate(45)">'
        f'<line x1="0" y1="0" x2="0" y2="6" stroke="{palette.hatch}"/></pattern></defs>',
        f'<rect x="0" y="0" width="{line:.1f}" height="{height}" fill="url(#h)"/>',
    ]
    for row, times in enumerate(slack.values()):
        drawn.append(_strip(times, top + row * row_height, times is not None and times == least, palette))
    drawn.append(
        f'<line x1="{line:.1f}" x2="{line:.1f}" y1="0" y2="{height}" stroke="{palette.ink}" stroke-width="1.5"/>'
    )
    told = ", ".join(f"{name} {'not known' if times is None else f'{times:.3g}'}" for name, times in slack.items())
    return _svg(STRIP_WIDTH, height, "".join(drawn), f"times over: {told}")


def _strip(times: float | None, y: float, tightest: bool, palette: Palette) -> str:
    if times is None:
        return (
            f'<line x1="{_strip_x(0.5):.1f}" x2="{_strip_x(20):.1f}" y1="{y}" y2="{y}" '
            f'stroke="{palette.edge}" stroke-dasharray="1 4"/>'
        )
    short = times < 1
    colour = palette.short if short else palette.accent if tightest else palette.edge
    heavy = tightest or short
    start, end = _strip_x(1.0), _strip_x(times)
    width = 4 if heavy else 2
    return (
        f'<line x1="{start:.1f}" x2="{end:.1f}" y1="{y}" y2="{y}" stroke="{colour}" stroke-width="{width}"/>'
        f'<circle cx="{end:.1f}" cy="{y}" r="{2.6 if heavy else 1.8}" fill="{colour}"/>'
    )


def _strip_x(times: float) -> float:
    low, high = STRIP_ENDS
    inside = min(max(times, low), high)
    return 2 + math.log(inside / low) / math.log(high / low) * (STRIP_WIDTH - 6)


def name_svg(palette: Palette) -> str:
    """The program's name with the symbol of a crystal, for the top of the page."""
    pen = _Pen(palette)
    _symbol(pen)
    pen.write(34, 17, "quartzfolio", "start", size=15, bold=True)
    return svg(Picture(126, 24, tuple(pen.marks), "quartzfolio"))


def icon_svg(palette: Palette) -> str:
    """The symbol alone, for the browser's tab."""
    pen = _Pen(palette)
    _symbol(pen)
    return svg(Picture(26, 24, tuple(pen.marks), "quartzfolio"))


def _symbol(pen: _Pen) -> None:
    pen.line("M1,12H6M20,12H25M6,4V20M20,4V20", colour=pen.palette.accent, width=2)
    pen.box(9.5, 4, 7, 16, pen.palette.accent)


def _svg(width: float, height: float, body: str, told: str) -> str:
    return (
        f'<svg xmlns="http://www.w3.org/2000/svg" role="img" aria-label="{escape(told, quote=True)}" '
        f'width="{width}" height="{height}" viewBox="0 0 {width} {height}" font-family="var(--st-font, sans-serif)">'
        f"{body}</svg>"
    )
