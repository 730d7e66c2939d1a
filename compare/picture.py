"""A picture as plain marks in pixels, and its SVG text: one drawing for page, report and saved file.

Everything that could come from a sheet or a file is escaped here. picture_pdf.py draws the same marks into PDF or PNG.
"""

from __future__ import annotations

import base64
import math
import re
from collections.abc import Sequence
from dataclasses import dataclass, field
from html import escape
from typing import Literal

Anchor = Literal["start", "middle", "end"]
Point = tuple[float, float]
STROKE = 1.6
# The page's own typeface where the picture stands in the page; a saved one takes what the machine has.
PAGE_FONT = "var(--st-font, sans-serif)"
FILE_FONT = "Source Sans 3, Source Sans Pro, Helvetica, Arial, sans-serif"
# Mean width of a character over the size of the type; figures are 0.497 wide, capitals wider, small letters less.
LETTER = 0.47


@dataclass(frozen=True, slots=True)
class Line:
    """Open lines of one look, each a row of points; `fill` closes and fills them."""

    paths: tuple[tuple[Point, ...], ...]
    colour: str = ""
    width: float = STROKE
    dash: tuple[float, ...] = ()
    fill: str = ""


@dataclass(frozen=True, slots=True)
class Box:
    x: float
    y: float
    width: float
    height: float
    fill: str
    edge: str = ""
    stroke: float = STROKE


@dataclass(frozen=True, slots=True)
class Dot:
    x: float
    y: float
    radius: float
    fill: str
    edge: str = ""
    stroke: float = STROKE


@dataclass(frozen=True, slots=True)
class Words:
    """Text on its base line; `key` names the field that a press leads to, `halo` is a colour kept free round it."""

    x: float
    y: float
    text: str
    colour: str
    anchor: Anchor = "middle"
    size: float = 12
    bold: bool = False
    key: str = ""
    halo: str = ""


Mark = Line | Box | Dot | Words


@dataclass(frozen=True, slots=True)
class Picture:
    """Marks from back to front; `told` is what a screen reader says."""

    width: float
    height: float
    marks: tuple[Mark, ...]
    told: str


@dataclass(slots=True)
class Pen:
    """Gathers marks; `ink` is the colour of what names none."""

    ink: str
    marks: list[Mark] = field(default_factory=list)

    def line(self, path: str, *, colour: str = "", width: float = STROKE, dash: Sequence[float] = ()) -> None:
        """A path in the letters M, H, V, h, L and Z of SVG."""
        self.marks.append(Line(_points(path), colour or self.ink, width, tuple(dash)))

    def through(
        self, points: Sequence[Point], *, colour: str = "", width: float = STROKE, dash: Sequence[float] = ()
    ) -> None:
        if len(points) > 1:
            self.marks.append(Line((tuple(points),), colour or self.ink, width, tuple(dash)))

    def area(self, points: Sequence[Point], fill: str, *, edge: str = "") -> None:
        self.marks.append(Line((tuple(points),), edge, STROKE, (), fill))

    def box(self, x: float, y: float, width: float, height: float, fill: str, *, edge: str = "") -> None:
        self.marks.append(Box(x, y, width, height, fill, edge))

    def dot(self, x: float, y: float, radius: float, fill: str, *, edge: str = "", stroke: float = STROKE) -> None:
        self.marks.append(Dot(x, y, radius, fill, edge, stroke))

    def hatch(self, x: float, y: float, width: float, height: float, colour: str) -> None:
        """Strokes at 45 degrees, 7 px apart, over a box."""
        strokes = []
        for start in range(-math.ceil(height / 7) * 7, math.ceil(width), 7):
            first, last = max(start, 0.0), min(start + height, width)
            if first < last:
                foot = y + height
                strokes.append(((x + first, foot - (first - start)), (x + last, foot - (last - start))))
        if strokes:
            self.marks.append(Line(tuple(strokes), colour, 1))

    def write(  # noqa: PLR0917
        self,
        x: float,
        y: float,
        text: str,
        anchor: Anchor = "middle",
        *,
        colour: str = "",
        size: float = 12,
        bold: bool = False,
        key: str = "",
        halo: str = "",
    ) -> None:
        self.marks.append(Words(x, y, text, colour or self.ink, anchor, size, bold, key, halo))


STEP = re.compile(r"([MLHVhZ])([^MLHVhZ]*)")


def _points(path: str) -> tuple[tuple[Point, ...], ...]:
    lines: list[list[Point]] = []
    for letter, told in STEP.findall(path):
        numbers = [float(number) for number in re.findall(r"-?[\d.]+", told)]
        if letter == "M":
            lines.append([(numbers[0], numbers[1])])
        elif letter == "Z":
            lines[-1].append(lines[-1][0])
        else:
            x, y = lines[-1][-1]
            steps = {"L": numbers, "H": [*numbers, y], "V": [x, *numbers], "h": [x + sum(numbers), y]}
            lines[-1].append((steps[letter][0], steps[letter][1]))
    return tuple(tuple(line) for line in lines)


def text_width(text: str, size: float = 12) -> float:
    """About how wide a text is drawn, pixels; a little too much rather than too little."""
    return LETTER * size * len(text) * 1.03


def svg(picture: Picture, *, background: str = "", font: str = PAGE_FONT) -> str:
    """The picture as SVG text; with a `background` it can stand alone."""
    width, height = _number(picture.width), _number(picture.height)
    back = f'<rect width="{width}" height="{height}" fill="{background}"/>' if background else ""
    return (
        f'<svg xmlns="http://www.w3.org/2000/svg" role="img" aria-label="{escape(picture.told, quote=True)}" '
        f'width="{width}" height="{height}" viewBox="0 0 {width} {height}" font-family="{escape(font, quote=True)}">'
        f"{back}{''.join(map(_mark, picture.marks))}</svg>"
    )


def svg_file(picture: Picture, background: str) -> bytes:
    """The picture as a file of its own."""
    return svg(picture, background=background, font=FILE_FONT).encode()


def as_address(text: str) -> str:
    """An SVG as a `data:` address that an image or a grid cell can show."""
    return "data:image/svg+xml;base64," + base64.b64encode(text.encode()).decode()


def _mark(mark: Mark) -> str:
    if isinstance(mark, Line):
        return _line(mark)
    if isinstance(mark, Box):
        size = f'width="{_number(mark.width)}" height="{_number(mark.height)}"'
        return f'<rect x="{_number(mark.x)}" y="{_number(mark.y)}" {size} fill="{mark.fill}"{_edge(mark)}/>'
    if isinstance(mark, Dot):
        at = f'cx="{_number(mark.x)}" cy="{_number(mark.y)}" r="{_number(mark.radius)}"'
        return f'<circle {at} fill="{mark.fill}"{_edge(mark)}/>'
    weight = ' font-weight="600"' if mark.bold else ""
    pressed = (
        f' data-field="{escape(mark.key, quote=True)}" style="cursor:pointer" tabindex="0" role="button"'
        if mark.key
        else ""
    )
    halo = f' stroke="{mark.halo}" stroke-width="3" stroke-linejoin="round" paint-order="stroke"' if mark.halo else ""
    return (
        f'<text x="{_number(mark.x)}" y="{_number(mark.y)}" text-anchor="{mark.anchor}" '
        f'font-size="{_number(mark.size)}" fill="{mark.colour}"{halo}{weight}{pressed}>{escape(mark.text)}</text>'
    )


def _line(mark: Line) -> str:
    closed = "Z" if mark.fill else ""
    drawn = "".join("M" + "L".join(f"{_number(x)},{_number(y)}" for x, y in path) + closed for path in mark.paths)
    stroke = f' stroke="{mark.colour}" stroke-width="{_number(mark.width)}"' if mark.colour else ""
    dash = f' stroke-dasharray="{" ".join(map(_number, mark.dash))}"' if mark.dash else ""
    return f'<path d="{drawn}" fill="{mark.fill or "none"}"{stroke}{dash}/>'


def _edge(mark: Box | Dot) -> str:
    return f' stroke="{mark.edge}" stroke-width="{_number(mark.stroke)}"' if mark.edge else ""


def _number(value: float) -> str:
    return f"{value:.2f}".rstrip("0").rstrip(".")
