"""The page's charts. Each is a function of plain figures and a palette; `dressed` gives the look that all share.

One grammar for all: a solid line is a limit, hatching lies on its wrong side, a tinted band is what circuit or IC may
do, a filled bar mark is the worst case, an open ring the nominal one. It holds in grey. Vega has no hatch fill, so
`_hatched` draws strokes; names and figures lie inside the frame, since Streamlit shrinks what stands outside it.
"""

from __future__ import annotations

import json
import math
from collections.abc import Callable, Sequence
from dataclasses import dataclass
from functools import lru_cache
from typing import Any

import altair as alt
import pandas as pd

from compare.palette import Palette

WIDTH = 440
# Pixels: a letter of the charts' type at most, and the frame that the axis leaves of WIDTH.
LETTER, FRAME = 6, 390
# The name under which Streamlit serves its own copy of the typeface.
FONT = "Source Sans, sans-serif"
# Streamlit fits frame and axis together into the height that is given.
AXIS = 44
SIGNED = "(datum.value > 0 ? '+' : datum.value < 0 ? '−' : '') + format(abs(datum.value), '~g')"
Channel = Callable[[str], Any]


def dressed(chart: Any, palette: Palette, font: str = FONT) -> Any:
    """Put the page's colours, type and axes on a chart; the page shows it with `theme=None`."""
    return (
        chart.configure(background=palette.page, font=font, padding=4)
        .configure_view(stroke=None)
        .configure_axis(
            labelColor=palette.soft,
            titleColor=palette.soft,
            titleFontWeight="normal",
            labelFontSize=12,
            titleFontSize=12,
            gridColor=palette.rule,
            domainColor=palette.edge,
            tickColor=palette.edge,
            tickSize=3,
            labelFlush=False,
        )
        .configure_text(fontSize=12, color=palette.ink)
    )


@lru_cache(maxsize=128)
def _as_json(draw: Callable[[Any, Palette], Any], figures: Any, palette: Palette) -> str:
    text: str = dressed(draw(figures, palette), palette).to_json(indent=None)
    return text


def specification(draw: Callable[[Any, Palette], Any], figures: Any, palette: Palette) -> dict[str, Any]:
    """The finished chart as Vega-Lite, kept by its hashable `figures`: to build and check one costs half a second."""
    made: dict[str, Any] = json.loads(_as_json(draw, figures, palette))
    return made


@dataclass(frozen=True, slots=True)
class Slack:
    """One requirement: how many times over it is met at worst and nominally (None: not known), and that in words."""

    requirement: str
    worst: float | None
    nominal: float | None
    said: str


SLACK_ENDS = (0.4, 40.0)


def slack_chart(rows: Sequence[Slack], palette: Palette, width: int = WIDTH) -> Any:
    """How many times over each requirement is met: bar mark worst, ring nominal, the line at 1 just met, hatched below.

    What lies beyond 0.4 or 40 is drawn at the edge; the figures beside it are the true ones.
    """
    frame, left, right = _slack_frame(rows), 90, width - 118
    count = len(frame)
    height = 25 * max(count, 1)
    scale = alt.Scale(type="log", domain=list(SLACK_ENDS), range=[left, right])
    axis = alt.Axis(values=[0.5, 1, 2, 5, 10, 20], format="~g", domain=False)

    def x(field: str) -> Any:
        return alt.X(f"{field}:Q", scale=scale, axis=axis, title="times over (1 is just met)")

    def y(field: str) -> Any:
        return alt.Y(f"{field}:Q", scale=alt.Scale(domain=[count - 0.5, -0.5]), axis=None)

    known = alt.Chart(frame[frame["known"]])
    colour = alt.condition("datum.short", alt.value(palette.short), alt.value(palette.accent))
    share = math.log(1 / SLACK_ENDS[0]) / math.log(SLACK_ENDS[1] / SLACK_ENDS[0])
    zone = _hatched((SLACK_ENDS[0], 1), (count - 0.5, -0.5), palette, x, y, ((right - left) * share, height), logx=True)
    span = known.mark_rule(strokeWidth=2).encode(x=x("worst"), x2="nominal", y=y("place"), color=colour)
    worst = known.mark_tick(thickness=4, size=14, orient="vertical", opacity=1).encode(
        x=x("worst"), y=y("place"), color=colour
    )
    nominal = known.mark_point(size=45, fill=palette.page, opacity=1, strokeWidth=1.5).encode(
        x=x("nominal"), y=y("place"), stroke=colour
    )
    dotted = (
        alt.Chart(frame[~frame["known"]])
        .mark_rule(strokeDash=[1, 4], color=palette.edge)
        .encode(x=x("from"), x2="to", y=y("place"))
    )
    weight = alt.condition("datum.tightest", alt.value(palette.ink), alt.value(palette.soft))
    every = alt.Chart(frame)
    name = every.mark_text(align="left", fontSize=13).encode(
        x=alt.value(0), y=y("place"), text="requirement", color=weight
    )
    said = every.mark_text(align="right").encode(x=alt.value(width), y=y("place"), text="said", color=weight)
    line = _one(at=1).mark_rule(color=palette.ink, strokeWidth=1.5).encode(x=x("at"))
    return (zone + span + worst + nominal + dotted + name + said + line).properties(width=width, height=height + AXIS)


def _slack_frame(rows: Sequence[Slack]) -> pd.DataFrame:
    worsts = [row.worst for row in rows if row.worst is not None]
    least = min(worsts, default=None)
    low, high = SLACK_ENDS

    def inside(times: float | None, other: float | None) -> float:
        chosen = times if times is not None else other
        return 1.0 if chosen is None else min(max(chosen, low), high * 0.95)

    kinds = {"requirement": str, "said": str, "worst": float, "nominal": float, "known": bool, "short": bool}
    kinds |= {"tightest": bool, "place": int, "from": float, "to": float}
    return pd.DataFrame(
        [
            {
                "requirement": row.requirement,
                "said": row.said,
                "worst": inside(row.worst, None),
                "nominal": inside(row.nominal, row.worst),
                "known": row.worst is not None,
                "short": row.worst is not None and row.worst < 1,
                "tightest": row.worst is not None and row.worst == least,
                "place": place,
                "from": 0.5,
                "to": 20.0,
            }
            for place, row in enumerate(rows)
        ],
        columns=list(kinds),
    ).astype(kinds)


@dataclass(frozen=True, slots=True)
class LoadPull:
    """What the chart of ppm against load needs. `room_*_ppm`: what the other causes leave of the limit; None: no limit.

    `rated_pf` is None for a series-resonant part: the shift then counts from series resonance.
    """

    motional_capacitance_ff: float
    shunt_capacitance_pf: float
    rated_pf: float | None
    low_pf: float
    mid_pf: float
    high_pf: float
    room_low_ppm: float | None = None
    room_high_ppm: float | None = None

    def shift_ppm(self, load_pf: float) -> float:
        """Shift against the rated load: C1/2 (1/(C0+CL) - 1/(C0+CL rated)), for C1 << C0+CL."""
        rated = 0.0 if self.rated_pf is None else 1 / (self.shunt_capacitance_pf + self.rated_pf)
        return self.motional_capacitance_ff / 2 * (1 / (self.shunt_capacitance_pf + load_pf) - rated) * 1e3


def load_table(pull: LoadPull, loads: int = 9) -> pd.DataFrame:
    """The chart's twin: the shift at evenly spaced loads over the chart's width."""
    low, high = _load_ends(pull)
    at = [low + step * (high - low) / (loads - 1) for step in range(loads)]
    return pd.DataFrame(
        {"Load, pF": [round(load, 2) for load in at], "Shift, ppm": [round(pull.shift_ppm(load), 1) for load in at]}
    )


def load_chart(pull: LoadPull, palette: Palette, width: int = WIDTH, height: int = 210) -> Any:
    """The shift on its true curve; the circuit's load with its spread as a band; the room left as limit lines."""
    ends, (bottom, top) = _load_ends(pull), _shift_ends(pull)
    x_scale, y_scale = alt.Scale(domain=list(ends), nice=False), alt.Scale(domain=[bottom, top], nice=False)

    def x(field: str) -> Any:
        return alt.X(
            f"{field}:Q", scale=x_scale, title="load at the crystal, pF", axis=alt.Axis(grid=False, tickCount=6)
        )

    def y(field: str) -> Any:
        axis = alt.Axis(labelExpr=SIGNED, tickCount=6, titleAngle=0, titleAlign="right", titleY=8)
        return alt.Y(f"{field}:Q", scale=y_scale, title="ppm", axis=axis)

    step = (ends[1] - ends[0]) / 200
    curve = pd.DataFrame({"load": [ends[0] + step * point for point in range(201)]})
    curve["ppm"] = [pull.shift_ppm(load) for load in curve["load"]]
    shift = pull.shift_ppm(pull.mid_pf)
    layers = [
        _one(a=pull.low_pf, b=pull.high_pf, c=bottom, d=top)
        .mark_rect(color=palette.wash)
        .encode(x=x("a"), x2="b", y=y("c"), y2="d"),
        *_room(pull, palette, x, y, (width, height)),
        alt.Chart(curve).mark_line(color=palette.accent, strokeWidth=2, clip=True).encode(x=x("load"), y=y("ppm")),
        _one(load=pull.mid_pf, ppm=shift)
        .mark_point(size=80, fill=palette.page, stroke=palette.accent, strokeWidth=2, opacity=1)
        .encode(x=x("load"), y=y("ppm")),
    ]
    if pull.rated_pf is not None:
        rated = _one(at=pull.rated_pf).mark_rule(color=palette.ink, strokeDash=[5, 3]).encode(x=x("at"))
        layers.append(rated)
    layers.append(_load_words(pull, x, y))
    return alt.layer(*layers).properties(width=width, height=height)


def _room(pull: LoadPull, palette: Palette, x: Channel, y: Channel, size: tuple[float, float]) -> list[Any]:
    (left, right), (bottom, top) = _load_ends(pull), _shift_ends(pull)
    width, height = size
    layers = []
    for room, edge in ((pull.room_low_ppm, bottom), (pull.room_high_ppm, top)):
        if room is None or not _inside(room, bottom, top):
            continue
        low, high = min(room, edge), max(room, edge)
        share = height * (high - low) / (top - bottom)
        layers.append(_hatched((left, right), (low, high), palette, x, y, (width, share)))
        layers.append(_one(at=room).mark_rule(color=palette.ink, strokeWidth=1.5).encode(y=y("at")))
    return layers


def _load_words(pull: LoadPull, x: Channel, y: Channel) -> Any:
    """Figures at their marks. The curve falls to the right, so words stand above it there and below it at the left."""
    (left, right), (bottom, top) = _load_ends(pull), _shift_ends(pull)
    line, pad, shift = (top - bottom) / 210, (right - left) / 60, pull.shift_ppm(pull.mid_pf)
    here = f"circuit {pull.mid_pf:.2f} pF, {_signed(shift)} ppm"
    rated = pull.rated_pf
    wide = LETTER * len(here) / FRAME * (right - left)
    # Best clear of the dashed line at the rated load; where there is no room for that, across it.
    beyond = pull.mid_pf if rated is None or not pull.mid_pf < rated else rated
    if beyond + pad + wide <= right:
        words = [(beyond + pad, shift + 12 * line, here, True)]
    elif pull.mid_pf - pad - wide >= left:
        words = [(pull.mid_pf - pad, shift - 14 * line, here, False)]
    else:
        words = [(pull.mid_pf + pad, shift + 12 * line, here, True)]
    if rated is not None:
        at_right = rated < (left + right) / 2
        words.append((rated + (pad if at_right else -pad) / 2, bottom + 9 * line, f"rated {rated:g} pF", at_right))
    if _inside(pull.room_high_ppm, bottom, top):
        said = f"room left for load {_signed(pull.room_high_ppm or 0.0)} ppm"
        words.append((right - pad / 2, (pull.room_high_ppm or 0.0) + 8 * line, said, False))
    if _inside(pull.room_low_ppm, bottom, top):
        low = pull.room_low_ppm or 0.0
        named = "" if _inside(pull.room_high_ppm, bottom, top) else "room left for load "
        words.append((left + pad / 2, low - 9 * line, f"{named}{_signed(low)} ppm", True))
    frame = pd.DataFrame(words, columns=["x", "y", "t", "starts"])
    layers = [
        alt.Chart(frame[frame["starts"] == starts])
        .mark_text(align="left" if starts else "right")
        .encode(x=x("x"), y=y("y"), text="t")
        for starts in (True, False)
        if (frame["starts"] == starts).any()
    ]
    return alt.layer(*layers)


def _inside(room: float | None, bottom: float, top: float) -> bool:
    return room is not None and bottom < room < top


def _load_ends(pull: LoadPull) -> tuple[float, float]:
    points = [pull.low_pf, pull.high_pf, *([] if pull.rated_pf is None else [pull.rated_pf])]
    low, high = min(points), max(points)
    beyond = max(0.35 * (high - low), 0.15 * high)
    return max(low - beyond, 0.3 * low), high + 1.4 * beyond


def _shift_ends(pull: LoadPull) -> tuple[float, float]:
    seen = [pull.shift_ppm(load) for load in (pull.low_pf, pull.mid_pf, pull.high_pf)]
    rooms = [room for room in (pull.room_low_ppm, pull.room_high_ppm) if room is not None]
    # A limit far outside what the load does would flatten the curve: then it is left out of the picture.
    reach = 8 * max(*map(abs, seen), 5)
    points = [0.0, *seen, *(room for room in rooms if abs(room) < reach)]
    low, high = min(points), max(points)
    margin = max(0.35 * (high - low), 5)
    return low - margin, high + margin


def _signed(value: float) -> str:
    return f"{'−' if round(value, 1) < 0 else '+'}{abs(value):.1f}"


def _one(**fields: float) -> Any:
    return alt.Chart(pd.DataFrame([fields]))


def _hatched(  # noqa: PLR0917
    xs: tuple[float, float],
    ys: tuple[float, float],
    palette: Palette,
    x: Channel,
    y: Channel,
    size: tuple[float, float],
    *,
    logx: bool = False,
) -> Any:
    """Strokes at 45 degrees, 7 px apart, over the zone `xs` by `ys` that is drawn `size` pixels large."""
    put, back = (math.log, math.exp) if logx else (float, float)
    a, b = put(xs[0]), put(xs[1])
    (c, d), (wide, high) = ys, size
    across, up = (b - a) / wide, (d - c) / max(high, 1e-9)
    lines = []
    for start in range(-math.ceil(high / 7) * 7, math.ceil(wide), 7):
        first, last = max(start, 0), min(start + high, wide)
        if first < last:
            lines.append(
                (
                    back(a + first * across),
                    back(a + last * across),
                    c + (first - start) * up,
                    c + (last - start) * up,
                )
            )
    frame = pd.DataFrame(lines, columns=["x", "x2", "y", "y2"])
    return alt.Chart(frame).mark_rule(color=palette.hatch, strokeWidth=1).encode(x=x("x"), x2="x2", y=y("y"), y2="y2")
