"""A plot's frame: scales, ticks, grid, axes with units, hatched sides, and words placed where nothing else lies.

Figures stand at their marks and never in a legend. What is drawn first lies at the back.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable, Sequence
from dataclasses import dataclass, field

import numpy as np

from compare.figures import MINUS
from compare.palette import Palette
from compare.picture import Anchor, Pen, Picture, Point, text_width

SIZE = 12.0
LOG_STEPS = (1, 2, 5)


@dataclass(frozen=True, slots=True)
class Scale:
    """From values to pixels: `low` lies at `start`, `high` at `end`."""

    low: float
    high: float
    start: float
    end: float
    log: bool = False

    def __call__(self, value: float) -> float:
        low, high, at = (
            (math.log(v) for v in (self.low, self.high, value)) if self.log else (self.low, self.high, value)
        )
        return self.start + (at - low) / (high - low) * (self.end - self.start)

    def inside(self, value: float) -> bool:
        return math.isfinite(value) and self.low <= value <= self.high

    def held(self, value: float) -> float:
        """The value, or the end of the scale that it lies beyond."""
        return min(max(value, self.low), self.high)

    def ticks(self, about: int = 6) -> list[float]:
        """Round values on the scale, some `about` of them."""
        return _log_ticks(self.low, self.high) if self.log else _round_ticks(self.low, self.high, about)


def _round_ticks(low: float, high: float, about: int) -> list[float]:
    rough = (high - low) / max(about, 1)
    power = 10.0 ** math.floor(math.log10(rough))
    step = next(power * factor for factor in (1, 2, 2.5, 5, 10) if power * factor >= rough * 0.999)
    first = math.ceil(low / step - 1e-9)
    return [round(number * step, 10) + 0.0 for number in range(first, math.floor(high / step + 1e-9) + 1)]


def _log_ticks(low: float, high: float) -> list[float]:
    decades = math.log10(high / low)
    steps = LOG_STEPS if decades <= 2.6 else (1,)
    powers = range(math.floor(math.log10(low)), math.ceil(math.log10(high)) + 1)
    found = [step * 10.0**power for power in powers for step in steps]
    inside = [round(value, 10) for value in found if low * 0.999 <= value <= high * 1.001]
    return inside[:: max(1, math.ceil(len(inside) / 7))]


def plain(value: float) -> str:
    return f"{MINUS if value < 0 else ''}{abs(value):g}"


def signed(value: float) -> str:
    return ("+" if value > 0 else "") + plain(value)


@dataclass
class Plot:
    """One plot in the making. Pixels count from the top left."""

    palette: Palette
    x: Scale
    y: Scale
    width: float
    height: float
    pen: Pen = field(init=False)
    taken: list[tuple[float, float, float, float]] = field(default_factory=list)
    """Boxes (left, top, right, bottom) that words must keep clear of."""

    def __post_init__(self) -> None:
        self.pen = Pen(self.palette.ink)

    def picture(self, told: str) -> Picture:
        return Picture(self.width, self.height, tuple(self.pen.marks), told)

    def x_axis(
        self,
        title: str,
        ticks: Sequence[float] | None = None,
        said: Callable[[float], str] = plain,
        *,
        domain: bool = True,
    ) -> None:
        foot = max(self.y.start, self.y.end)
        left, right = sorted((self.x.start, self.x.end))
        for value in self.x.ticks() if ticks is None else ticks:
            at = self.x(value)
            self.pen.through([(at, foot), (at, foot + 3)], colour=self.palette.edge, width=1)
            self.pen.write(at, foot + 15, said(value), colour=self.palette.soft)
        if domain:
            self.pen.through([(left, foot), (right, foot)], colour=self.palette.edge, width=1)
        self.pen.write((left + right) / 2, foot + 32, title, colour=self.palette.soft)

    def y_axis(
        self, title: str, ticks: Sequence[float] | None = None, said: Callable[[float], str] = plain, also: str = ""
    ) -> None:
        """Grid and figures at the left, `title` above them; `also` is a format for a second figure under each."""
        left, right = sorted((self.x.start, self.x.end))
        top = min(self.y.start, self.y.end)
        for value in self.y.ticks() if ticks is None else ticks:
            at = self.y(value)
            self.pen.through([(left, at), (right, at)], colour=self.palette.rule, width=1)
            self.pen.write(left - 6, at + 4, said(value), "end", colour=self.palette.soft)
        self.pen.write(0, top - 8, title, "start", colour=self.palette.soft)

    def band(self, low: float, high: float) -> None:
        """A tinted band over x: what circuit or IC may do."""
        a, b = self.x(self.x.held(low)), self.x(self.x.held(high))
        top, foot = sorted((self.y.start, self.y.end))
        self.pen.box(a, top, max(b - a, 1.5), foot - top, self.palette.wash)

    def spread(self, x: Iterable[float], low: Iterable[float], high: Iterable[float]) -> None:
        """A tinted band along x between two curves."""
        rows = [
            (self.x(a), self.y(self.y.held(b)), self.y(self.y.held(c))) for a, b, c in zip(x, low, high, strict=True)
        ]
        points = [(at, foot) for at, foot, _ in rows] + [(at, top) for at, _, top in reversed(rows)]
        if len(rows) > 1:
            self.pen.area(points, self.palette.wash)

    def limit(self, value: float, *, wrong: int, along: str = "y") -> None:
        """A solid line with hatching on its wrong side: 1 above (or right of) it, -1 below, 0 none."""
        scale = self.y if along == "y" else self.x
        if not scale.inside(value):
            return
        at, edge = scale(value), scale(scale.high if wrong > 0 else scale.low)
        (left, right), (top, foot) = sorted((self.x.start, self.x.end)), sorted((self.y.start, self.y.end))
        if along == "y":
            if wrong:
                self.pen.hatch(left, min(at, edge), right - left, abs(at - edge), self.palette.hatch)
            self.pen.through([(left, at), (right, at)], width=1.5)
        else:
            if wrong:
                self.pen.hatch(min(at, edge), top, abs(at - edge), foot - top, self.palette.hatch)
            self.pen.through([(at, top), (at, foot)], width=1.5)

    def level(self, value: float, dash: Sequence[float] = (2, 3), colour: str = "") -> None:
        """A dashed level that is no limit."""
        if self.y.inside(value):
            self.pen.through(
                [(self.x.start, self.y(value)), (self.x.end, self.y(value))], width=1, dash=dash, colour=colour
            )

    def upright(self, value: float, dash: Sequence[float] = (5, 3)) -> None:
        """A dashed line at one x: rated load, ends of the product's range."""
        if self.x.inside(value):
            at = self.x(value)
            self.pen.through([(at, self.y.start), (at, self.y.end)], width=1.3, dash=dash)
            self.taken.append((at - 1, self.y.end, at + 1, self.y.start))

    def curve(self, x: Iterable[float], y: Iterable[float], *, width: float = 2, dash: Sequence[float] = ()) -> None:
        """The curve so far as it lies inside the frame; it breaks where there is no value."""
        piece: list[Point] = []
        inside = [(a, b) for a, b in zip(x, y, strict=True) if self.x.inside(a)]
        for a, b in _clipped(self, inside):
            if math.isnan(b):
                self._through(piece, width, dash)
                piece = []
            else:
                piece.append((self.x(a), self.y(b)))
        self._through(piece, width, dash)

    def _through(self, piece: list[Point], width: float, dash: Sequence[float]) -> None:
        self.pen.through(piece, colour=self.palette.accent, width=width, dash=dash)
        for (x1, y1), (x2, y2) in zip(piece, piece[1:], strict=False):
            steps = max(1, round(math.hypot(x2 - x1, y2 - y1) / 5))
            at = [(x1 + (x2 - x1) * n / steps, y1 + (y2 - y1) * n / steps) for n in range(steps)]
            self.taken += [(px - 2, py - 2, px + 2, py + 2) for px, py in at]

    def ring(self, x: float, y: float, *, colour: str = "", radius: float = 4.5) -> None:
        """The nominal mark."""
        if self.x.inside(x) and self.y.inside(y):
            px, py = self.x(x), self.y(y)
            self.pen.dot(px, py, radius, self.palette.page, edge=colour or self.palette.accent, stroke=2)
            self.taken.append((px - 5, py - 5, px + 5, py + 5))

    def bar(self, x: float, y: float, *, colour: str = "", tall: float = 16) -> None:
        """The mark of the worst case."""
        if self.x.inside(x) and self.y.inside(y):
            px, py = self.x(x), self.y(y)
            self.pen.box(px - 2, py - tall / 2, 4, tall, colour or self.palette.accent)
            self.taken.append((px - 3, py - tall / 2, px + 3, py + tall / 2))

    def say(self, text: str, at: Point, sides: str = "", *, bold: bool = False, colour: str = "") -> None:
        """Words near a point (pixels), on the first free side of `sides`: r or l, with u (above) or d (below) first."""
        places = sides.split() or ["ur", "ul", "dr", "dl", "r", "l"]
        boxes = [self._box(text, at, place) for place in places]
        clear = next((n for n, one in enumerate(boxes) if self._fits(one[1]) and not self._meets(one[1])), None)
        fitting = next((n for n, one in enumerate(boxes) if self._fits(one[1])), 0)
        (x, y, anchor), box = boxes[fitting if clear is None else clear]
        if not self._fits(box):
            shift = min(0.0, self.width - 2 - box[2]) or max(0.0, 2 - box[0])
            x, box = x + shift, (box[0] + shift, box[1], box[2] + shift, box[3])
        self.taken.append(box)
        self.pen.write(x, y, text, anchor, colour=colour, bold=bold, halo=self.palette.page)

    def say_on(self, text: str, level: float) -> None:
        """Words on a horizontal line: above it where nothing is in the way, else below or elsewhere along it."""
        if not self.y.inside(level):
            return
        at = self.y(level)
        ends = [(self.x.end + 5, "ul"), (self.x.start - 5, "ur"), ((self.x.start + self.x.end) / 2, "u")]
        places = [(x, side) for x, side in ends] + [(x, side.replace("u", "d")) for x, side in ends]
        free = next((one for one in places if not self._meets(self._box(text, (one[0], at), one[1])[1])), places[0])
        self.say(text, (free[0], at), free[1])

    def _box(
        self, text: str, at: Point, place: str
    ) -> tuple[tuple[float, float, Anchor], tuple[float, float, float, float]]:
        wide, (x, y) = text_width(text, SIZE), at
        down = {"u": -7.0, "d": 15.0}.get(place[0], 4.0)
        side = place[-1]
        anchor: Anchor = "start" if side == "r" else "end" if side == "l" else "middle"
        x += {"r": 7.0, "l": -7.0}.get(side, 0.0)
        left = {"start": x, "end": x - wide, "middle": x - wide / 2}[anchor]
        return (x, y + down, anchor), (left, y + down - 10, left + wide, y + down + 3)

    def _fits(self, box: tuple[float, float, float, float]) -> bool:
        (left, right), (top, foot) = sorted((self.x.start, self.x.end)), sorted((self.y.start, self.y.end))
        return box[0] >= left + 1 and box[2] <= right + 1 and box[1] >= top - 1 and box[3] <= foot + 1

    def _meets(self, box: tuple[float, float, float, float]) -> bool:
        return any(a < box[2] and c > box[0] and b < box[3] and d > box[1] for a, b, c, d in self.taken)


def _clipped(plot: Plot, points: list[Point]) -> list[Point]:
    """Points inside the frame, with those where the curve crosses its edge; NaN parts what does not hang together."""
    nothing = (math.nan, math.nan)
    found: list[Point] = []
    for (x1, y1), (x2, y2) in zip(points, points[1:], strict=False):
        piece = _piece(plot.y, (x1, y1), (x2, y2))
        if piece is None:
            found.append(nothing)
            continue
        if not found or found[-1] != piece[0]:
            found += [nothing, piece[0]]
        found.append(piece[1])
    return found


def _piece(scale: Scale, start: Point, end: Point) -> tuple[Point, Point] | None:
    """The piece of a line that lies between the ends of the scale; None where none does."""
    put, back = (math.log, math.exp) if scale.log else (float, float)
    if not (math.isfinite(start[1]) and math.isfinite(end[1])) or (scale.log and min(start[1], end[1]) <= 0):
        return None
    a, b, low, high = put(start[1]), put(end[1]), put(scale.low), put(scale.high)
    shares = [0.0, 1.0] if a == b else sorted(float(np.clip((edge - a) / (b - a), 0, 1)) for edge in (low, high))
    if (a == b and not low <= a <= high) or (a != b and shares[0] == shares[1]):
        return None

    def at(share: float) -> Point:
        if share in (0.0, 1.0):
            return end if share else start
        return start[0] + share * (end[0] - start[0]), back(a + share * (b - a))

    return at(shares[0]), at(shares[1])
