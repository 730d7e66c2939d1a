"""The charts of page and report: each from plain figures, drawn for a palette, with its table beside it.

One grammar for all: a solid line is a limit, hatching lies on its wrong side, a tinted band is what circuit or IC may
do, a filled bar mark is the worst case, an open ring the nominal one. It holds in grey and on paper.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass

import numpy as np

from compare.circuit import Array
from compare.curves import Curve, Stack
from compare.figures import SECONDS_A_DAY_PER_PPM, number, scale
from compare.palette import Palette
from compare.picture import Picture
from compare.plot import Plot, Scale, plain, signed

Table = tuple[list[str], list[list[object]]]
WIDTH, HEIGHT = 372, 240
LEFT, TOP, RIGHT, FOOT = 44, 24, 10, 40
ROW = 25
NAMES = {
    "load_pf": "Load",
    "shift_ppm": "Shift",
    "shift_low_ppm": "Shift, low",
    "shift_high_ppm": "Shift, high",
    "transconductance_ms": "Transconductance",
    "headroom": "R1 headroom",
    "headroom_worst": "R1 headroom, worst corner",
    "esr_ohm": "R1",
    "margin": "Margin",
    "margin_worst": "Margin, worst corner",
    "temperature_c": "Temperature",
    "ppm": "Drift",
    "low_ppm": "Drift, low",
    "high_ppm": "Drift, high",
    "all_low_ppm": "All causes, low",
    "all_high_ppm": "All causes, high",
    "s_per_day": "Drift",
    "low_s_per_day": "Drift, low",
    "high_s_per_day": "Drift, high",
}


MARKS = {"ic": "IC, nominal", "ic_low": "IC, least", "ic_high": "IC, most", "optimum": "greatest headroom"}


@dataclass(frozen=True)
class Chart:
    """A chart that can be drawn for any palette: `table` is its twin, `data` all that it was drawn from.

    `name` is good for a file's name; `said` holds what does not show in the picture.
    """

    name: str
    title: str
    draw: Callable[[Palette], Picture]
    table: Table
    data: Table
    said: tuple[str, ...] = ()


def twin(curve: Curve, digits: Mapping[str, int], points: int = 9) -> Table:
    """The curve at a few evenly spaced places, with name and unit in the heading."""
    length = len(next(iter(curve.columns.values())))
    at = sorted({round(place) for place in np.linspace(0, length - 1, points)})
    rows = [[_rounded(float(values[row]), digits.get(name, 3)) for name, values in curve.columns.items()] for row in at]
    return headings(curve), rows


def every_point(curve: Curve) -> Table:
    """All points of the curve as numbers."""
    columns = list(curve.columns.values())
    rows = [[_rounded(float(values[row]), 9) for values in columns] for row in range(len(columns[0]))]
    return headings(curve), rows


def headings(curve: Curve) -> list[str]:
    return [f"{NAMES.get(name, name)}, {unit}" if unit else NAMES.get(name, name) for name, unit in curve.units.items()]


def _rounded(value: float, digits: int) -> object:
    return float(f"{value:.{digits}g}") if math.isfinite(value) else None


def _plot(palette: Palette, x: tuple[float, float, bool], y: tuple[float, float, bool], left: float = LEFT) -> Plot:
    x_scale = Scale(x[0], x[1], left, WIDTH - RIGHT, x[2])
    return Plot(palette, x_scale, Scale(y[0], y[1], HEIGHT - FOOT, TOP, y[2]), WIDTH, HEIGHT)


def load_chart(curve: Curve) -> Chart:
    """What a pF costs: the shift on its true curve, the circuit's load with its spread, what is left of the limits."""
    told = "Frequency shift in ppm against load in pF"

    def draw(palette: Palette) -> Picture:
        marks, limits = curve.marks, curve.limits
        plot = _plot(palette, (*load_ends(curve), False), (*_shift_ends(curve), False))
        if "circuit" in marks:
            ends = [marks[name]["load_pf"] for name in ("circuit_low", "circuit_high") if name in marks]
            plot.band(min(ends, default=math.nan), max(ends, default=math.nan)) if ends else None
        plot.y_axis("ppm", said=signed)
        for name, wrong in (("room_low_ppm", -1), ("room_high_ppm", 1)):
            plot.limit(limits.get(name, math.nan), wrong=wrong)
        x = curve.columns["load_pf"]
        for name in ("shift_low_ppm", "shift_high_ppm"):
            plot.curve(x, curve.columns[name], width=1, dash=(2, 2))
        plot.curve(x, curve.columns["shift_ppm"])
        plot.x_axis("load at the crystal, pF")
        _load_words(plot, curve)
        return plot.picture(told)

    digits = {"load_pf": 4, "shift_ppm": 4, "shift_low_ppm": 4, "shift_high_ppm": 4}
    said = ("Dotted: over what the sheet leaves open of C0, C1 and R1.", *_room_said(curve))
    return Chart("ppm_against_load", "ppm against load", draw, twin(curve, digits), every_point(curve), said)


def _room_said(curve: Curve) -> tuple[str, ...]:
    if not curve.limits:
        return ()
    return ("Lines: what make, temperature and ageing leave of the limit for the load.",)


def _load_words(plot: Plot, curve: Curve) -> None:
    marks, limits = curve.marks, curve.limits
    if "rated" in marks:
        at = marks["rated"]["load_pf"]
        plot.upright(at)
        plot.say(f"rated {plain(at)} pF", (plot.x(at), plot.y.start - 2), "ur ul")
    if "circuit" in marks:
        load, shift = marks["circuit"]["load_pf"], marks["circuit"]["shift_ppm"]
        plot.ring(load, shift)
        said = f"circuit {load:.2f} pF, {ppm_text(shift)} ppm"
        plot.say(said, (plot.x(load), plot.y(plot.y.held(shift))), "ur dl ul dr", bold=True, colour=plot.palette.accent)
    high, low = limits.get("room_high_ppm", math.nan), limits.get("room_low_ppm", math.nan)
    if plot.y.inside(high):
        plot.say(f"room left for load {ppm_text(high)}", (plot.x.end + 5, plot.y(high) + 2), "ul dl")
    if plot.y.inside(low):
        named = "" if plot.y.inside(high) else "room left for load "
        plot.say(f"{named}{ppm_text(low)}", (plot.x.start - 5, plot.y(low)), "dr ur")


def ppm_text(value: float) -> str:
    return signed(round(value, 1))


def load_ends(curve: Curve) -> tuple[float, float]:
    """The part of the curve that is worth a look: about the rated and the circuit's load."""
    points = [mark["load_pf"] for mark in curve.marks.values()]
    every = curve.columns["load_pf"]
    if not points:
        return float(every[0]), float(every[-1])
    low, high = min(points), max(points)
    beyond = max(0.45 * (high - low), 0.14 * high)
    return max(low - beyond, float(every[0])), min(high + 1.3 * beyond, float(every[-1]))


def _shift_ends(curve: Curve) -> tuple[float, float]:
    seen = [0.0, *(mark["shift_ppm"] for mark in curve.marks.values())]
    # A limit far outside what the load does would flatten the curve: then it is left out of the picture.
    reach = 8 * max(*map(abs, seen), 5)
    points = seen + [room for room in curve.limits.values() if abs(room) < reach]
    low, high = min(points), max(points)
    margin = max(0.35 * (high - low), 5)
    return low - margin, high + margin


def gain_chart(curve: Curve, band_ms: tuple[float, float] | None, least: float | None) -> Chart:
    """Too little and too much gain: the hump of R1 headroom, with the IC's band over all conditions and ▮ `least`.

    `least` is the review's worst headroom. Below 0.1 mS the scale goes by µS.
    """
    factor, unit = scale("mS", *(mark["transconductance_ms"] for name, mark in curve.marks.items() if "ic" in name))
    told = f"R1 headroom against transconductance in {unit}"

    def draw(palette: Palette) -> Picture:
        gain = curve.columns["transconductance_ms"] * factor
        plot = _plot(palette, (float(gain[0]), float(gain[-1]), True), (*_headroom_ends(curve), True))
        asked = curve.limits["asked"]
        if band_ms is not None:
            plot.band(band_ms[0] * factor, band_ms[1] * factor)
        plot.y_axis("R1 headroom")
        plot.limit(asked, wrong=-1)
        plot.level(1.0)
        plot.curve(gain, curve.columns["headroom"])
        plot.curve(gain, curve.columns["headroom_worst"], width=1.2, dash=(4, 2))
        plot.x_axis(f"transconductance, {unit}")
        for name, mark in curve.marks.items():
            if name in ("critical", "greatest"):
                at = mark["transconductance_ms"] * factor
                plot.ring(at, mark["headroom"], colour=palette.ink)
                sides = "dr dl" if name == "critical" else "dl dr"
                plot.say(f"{name} {number(at)}", (plot.x(at), plot.y(plot.y.held(mark["headroom"]))), sides)
        _gain_words(plot, (band_ms, least), factor)
        plot.say_on(f"needed {plain(asked)}", asked)
        return plot.picture(told)

    said = ("Dashed: the worst corner. IC: from its least to its most over all conditions.", *map(sentence, curve.said))
    title = "R1 headroom against transconductance"
    digits = {"transconductance_ms": 3}
    return Chart("headroom_against_gain", title, draw, _with_marks(curve, digits), every_point(curve), said)


def sentence(words: str) -> str:
    """Words as a sentence: a capital first, a point last."""
    return f"{words[:1].upper()}{words[1:].rstrip('.')}."


def _gain_words(plot: Plot, of: tuple[tuple[float, float] | None, float | None], factor: float) -> None:
    band, least = of
    if band is None:
        return
    middle = math.sqrt(band[0] * band[1]) * factor
    plot.say("IC", (plot.x(plot.x.held(middle)), plot.y.end + 10), "u")
    if least is not None and least > 0:
        at = band[0] * factor
        plot.bar(at, plot.y.held(least))
        where = (plot.x(plot.x.held(at)), plot.y(plot.y.held(least)))
        plot.say(f"least {number(least)}", where, "ul l dl ur", bold=True, colour=plot.palette.accent)


def _headroom_ends(curve: Curve) -> tuple[float, float]:
    top = float(np.nanmax(np.where(curve.columns["headroom"] > 0, curve.columns["headroom"], np.nan)))
    return 0.5, 2.2 * max(top if math.isfinite(top) else 1.0, curve.limits["asked"])


def _with_marks(curve: Curve, digits: Mapping[str, int]) -> Table:
    """The twin with one more column that names the marks, each in its place along the curve."""
    heads, rows = twin(curve, digits)
    named: list[list[object]] = [[*row, ""] for row in rows]
    for name, mark in curve.marks.items():
        values: list[object] = [
            _rounded(mark[column], digits.get(column, 3)) if column in mark else None for column in curve.columns
        ]
        named.append([*values, MARKS.get(name, name)])
    named.sort(key=lambda row: float(str(row[0])) if row[0] is not None else math.inf)
    return [*heads, "Mark"], named


def esr_chart(curve: Curve) -> Chart:
    """How much ESR the circuit bears: margin against R1, ▮ the part's greatest, ○ its typical one."""
    factor, unit = scale("Ω", *(mark["esr_ohm"] for mark in curve.marks.values()))
    told = f"Margin against motional resistance R1 in {unit}"

    def draw(palette: Palette) -> Picture:
        esr = curve.columns["esr_ohm"] * factor
        first = max(float(esr[0]), 0.25 * min((m["esr_ohm"] for m in curve.marks.values()), default=0) * factor)
        plot = _plot(palette, (first, float(esr[-1]), True), (*_margin_ends(curve, first / factor), True))
        asked = curve.limits["asked"]
        plot.y_axis("margin")
        plot.limit(asked, wrong=-1)
        plot.level(1.0)
        plot.curve(esr, curve.columns["margin"])
        plot.curve(esr, curve.columns["margin_worst"], width=1.2, dash=(4, 2))
        plot.x_axis(f"R1, {unit}")
        nominal, worst = (curve.marks.get(name, {}) for name in ("nominal", "worst"))
        plot.ring(nominal.get("esr_ohm", math.nan) * factor, nominal.get("margin", math.nan))
        at, margin = worst.get("esr_ohm", math.nan) * factor, worst.get("margin", math.nan)
        if plot.x.inside(at) and plot.y.inside(margin):
            plot.bar(at, margin)
            said = f"greatest {number(at)} {unit}: {number(margin)}"
            plot.say(said, (plot.x(at), plot.y(margin)), "ur dl ul dr", bold=True, colour=palette.accent)
        plot.say_on(f"needed {plain(asked)}", asked)
        return plot.picture(told)

    said = ("Dashed: the worst corner of everything but R1.", *map(sentence, curve.said))
    return Chart("margin_against_esr", "Margin against ESR", draw, _with_marks(curve, {}), every_point(curve), said)


def _margin_ends(curve: Curve, first_ohm: float) -> tuple[float, float]:
    seen = curve.columns["esr_ohm"] >= first_ohm
    every = np.concatenate([curve.columns[name][seen] for name in ("margin", "margin_worst")])
    every = every[np.isfinite(every) & (every > 0)]
    top = float(every.max()) if len(every) else 1.0
    return 0.5, 1.3 * max(top, curve.limits["asked"])


def temperature_chart(curve: Curve, rest: tuple[float, float], of: TemperatureLimits) -> Chart:
    """Frost and heat: the drift on its curve where one is stated, else its band; around it all causes together.

    `rest`: what make, ageing and load add at their low and high ends, ppm. Nothing is drawn beyond the part's range.
    """
    whole = _with_all_causes(curve, rest)
    told = "Frequency drift in ppm over temperature"
    daily = "low_s_per_day" in whole.columns

    def draw(palette: Palette) -> Picture:
        t = whole.columns["temperature_c"]
        plot = _plot(
            palette,
            (*_temperature_ends(t, of.product_c), False),
            (*_drift_ends(whole, of), False),
            74 if daily else LEFT,
        )
        plot.spread(t, whole.columns["all_low_ppm"], whole.columns["all_high_ppm"])
        _drift_axis(plot, daily=daily)
        if of.limits_ppm is not None:
            plot.limit(of.limits_ppm[0], wrong=-1)
            plot.limit(of.limits_ppm[1], wrong=1)
        if "ppm" in whole.columns:
            plot.curve(t, whole.columns["ppm"])
        for name in ("low_ppm", "high_ppm"):
            plot.curve(t, whole.columns[name], width=1.2, dash=(3, 2))
        plot.x_axis("temperature, °C", said=plain)
        _temperature_words(plot, whole, of)
        return plot.picture(told)

    said = ("Dashed: the drift alone. Tinted: with make, ageing and load.", *map(sentence, curve.said))
    digits = {"temperature_c": 3}
    return Chart("ppm_over_temperature", "ppm over temperature", draw, twin(whole, digits), every_point(whole), said)


@dataclass(frozen=True)
class TemperatureLimits:
    """What stands around the drift: the product's range and the limits on the total; None where not asked."""

    product_c: tuple[float, float] | None = None
    limits_ppm: tuple[float, float] | None = None


def _with_all_causes(curve: Curve, rest: tuple[float, float]) -> Curve:
    low, high = (curve.columns[f"{end}_ppm"] + more for end, more in zip(("low", "high"), rest, strict=True))
    columns = {**curve.columns, "all_low_ppm": low, "all_high_ppm": high}
    return Curve(columns, {**curve.units, "all_low_ppm": "ppm", "all_high_ppm": "ppm"}, curve.marks, {}, curve.said)


def _temperature_ends(t: Array, product: tuple[float, float] | None) -> tuple[float, float]:
    ends = [float(t[0]), float(t[-1]), *(product or ())]
    room = 0.06 * (max(ends) - min(ends)) or 5.0
    return min(ends) - room, max(ends) + room


def _drift_ends(curve: Curve, of: TemperatureLimits) -> tuple[float, float]:
    low, high = float(np.min(curve.columns["all_low_ppm"])), float(np.max(curve.columns["all_high_ppm"]))
    if of.limits_ppm is not None:
        reach = 3 * max(abs(low), abs(high), 10)
        low, high = min(low, max(of.limits_ppm[0], -reach)), max(high, min(of.limits_ppm[1], reach))
    room = max(0.14 * (high - low), 5)
    return low - room, high + room


def _drift_axis(plot: Plot, *, daily: bool) -> None:
    if not daily:
        plot.y_axis("ppm", said=signed)
        return

    def both(value: float) -> str:
        return f"{signed(value)} / {signed(round(value * SECONDS_A_DAY_PER_PPM, 1))}"

    plot.y_axis("ppm / s a day", said=both)


def _temperature_words(plot: Plot, curve: Curve, of: TemperatureLimits) -> None:
    foot = plot.y.start - 2
    for end, value in zip(("product ", ""), of.product_c or (), strict=False):
        plot.upright(value)
        plot.say(f"{end}{signed(value)}", (plot.x(value), foot), "ur ul" if end else "ul ur")
    t, top = curve.columns["temperature_c"], curve.columns["all_high_ppm"]
    at = len(t) // 2
    plot.say(
        "with all causes",
        (plot.x(float(t[at])), plot.y(float(top[at]))),
        "d u",
        bold=True,
        colour=plot.palette.accent,
    )
    if curve.said:
        middle = (float(curve.columns["low_ppm"][at]) + float(curve.columns["high_ppm"][at])) / 2
        plot.say("dashed: drift alone, shape not stated", (plot.x(float(t[at])), plot.y(middle)), "m d u")
    if of.limits_ppm is not None:
        low, high = of.limits_ppm
        if plot.y.inside(high):
            plot.say(f"limit {signed(high)}", ((plot.x.start + plot.x.end) / 2, plot.y(high)), "u d")
        if plot.y.inside(low):
            plot.say(f"limit {signed(low)}", ((plot.x.start + plot.x.end) / 2, plot.y(low)), "d u")


def budget_chart(stack: Stack, limits: tuple[float, float] | None) -> Chart:
    """Where the ppm go: each cause starts where the last one ended, on its own side, so a lopsided sum stays so."""
    told = "Frequency budget in ppm, cause by cause"
    names = [*stack.causes, "in all"]

    def draw(palette: Palette) -> Picture:
        return _budget_picture(stack, limits, palette, told)

    rows: list[list[object]] = [
        [name, _rounded(float(low), 4), _rounded(float(high), 4)]
        for name, low, high in zip(
            names,
            [*stack.low_ppm, stack.sum_low_ppm[-1]],
            [*stack.high_ppm, stack.sum_high_ppm[-1]],
            strict=True,
        )
    ]
    if stack.left_low_ppm is not None and stack.left_high_ppm is not None:
        rows.append(["left to the limits", _rounded(-stack.left_low_ppm, 4), _rounded(stack.left_high_ppm, 4)])
    table: Table = (["Cause", "Low, ppm", "High, ppm"], rows)
    return Chart("ppm_budget", "Where the ppm go", draw, table, table)


def _budget_picture(stack: Stack, limits: tuple[float, float] | None, palette: Palette, told: str) -> Picture:
    count = len(stack.causes)
    low, high = float(stack.sum_low_ppm[-1]), float(stack.sum_high_ppm[-1])
    ends = [value for value in (low, high, *(limits or ()), -1.0, 1.0) if math.isfinite(value)]
    reach = max(ends) - min(ends)
    left, right = 88, WIDTH - 92
    x = Scale(min(ends) - 0.12 * reach, max(ends) + 0.12 * reach, left, right)
    foot = TOP - 8 + ROW * (count + 1)
    plot = Plot(palette, x, Scale(count + 0.5, -0.5, foot, TOP - 8), WIDTH, foot + FOOT)
    for value in x.ticks(4):
        plot.pen.through([(x(value), TOP - 8), (x(value), foot)], colour=palette.rule, width=1)
    for limit, wrong in zip(limits or (), (-1, 1), strict=False):
        plot.limit(limit, wrong=wrong, along="x")
    for row in range(count):
        _budget_bars(plot, stack, row)
    at = plot.y(count)
    if math.isfinite(low + high):
        plot.pen.through([(x(low), at), (x(high), at)], width=2)
        plot.pen.box(x(low) - 2, at - 7, 4, 14, palette.ink)
        plot.pen.box(x(high) - 2, at - 7, 4, 14, palette.ink)
    for row, name in enumerate([*stack.causes, "in all"]):
        ends_of = (stack.low_ppm, stack.high_ppm) if row < count else (stack.sum_low_ppm, stack.sum_high_ppm)
        a, b = (float(values[min(row, count - 1)]) for values in ends_of)
        plot.pen.write(0, plot.y(row) + 4, name, "start", bold=row == count, size=13)
        plot.pen.write(WIDTH - 4, plot.y(row) + 4, both_ends(a, b), "end", bold=row == count)
    plot.x_axis("ppm", _budget_ticks(x, limits), signed, domain=False)
    return plot.picture(told)


def _budget_bars(plot: Plot, stack: Stack, row: int) -> None:
    """A row's two bars, each on its own side, with a hair line down to where the next one starts."""
    before = [float(sums[row - 1]) if row else 0.0 for sums in (stack.sum_low_ppm, stack.sum_high_ppm)]
    for start, end in zip(before, (float(stack.sum_low_ppm[row]), float(stack.sum_high_ppm[row])), strict=True):
        if not math.isfinite(start + end):
            continue
        a, b = sorted((plot.x(start), plot.x(end)))
        plot.pen.box(a, plot.y(row) - 7, max(b - a, 1), 14, plot.palette.accent)
        plot.pen.through(
            [(plot.x(end), plot.y(row) - 7), (plot.x(end), plot.y(row + 1) + 7)], colour=plot.palette.edge, width=1
        )


def _budget_ticks(x: Scale, limits: tuple[float, float] | None) -> list[float]:
    if limits is None:
        return x.ticks(4)
    return [tick for tick in x.ticks(4) if limits[0] * 0.85 < tick < limits[1] * 0.85] + list(limits)


def both_ends(low: float, high: float) -> str:
    """`±12`, `−0.4/+18.9`, for two ends of a cause in ppm."""
    if not math.isfinite(low + high):
        return "not known"
    if round(low, 1) == -round(high, 1):
        return f"±{plain(round(high, 1))}" if round(high, 1) else "0"
    return f"{ppm_text(low)}/{ppm_text(high)}"


@dataclass(frozen=True, slots=True)
class Slack:
    """One requirement: how many times over it is met at worst and nominally (None: not known), and that in words."""

    requirement: str
    worst: float | None
    nominal: float | None
    said: str


SLACK_ENDS = (0.4, 40.0)


def slack_chart(rows: Sequence[Slack]) -> Chart:
    """How many times over each requirement is met: ▮ worst, ○ nominal, the line at 1 just met, hatched below.

    What lies beyond 0.4 or 40 is drawn at the edge; the figures beside it are the true ones.
    """
    told = "How many times over each requirement is met: " + ", ".join(f"{r.requirement} {r.said}" for r in rows)

    def draw(palette: Palette) -> Picture:
        return _slack_picture(rows, palette, told)

    heads = ["Requirement", "Times over, worst", "Times over, nominal", "Worst case"]
    table: Table = (heads, [[r.requirement, _short(r.worst), _short(r.nominal), r.said] for r in rows])
    return Chart("times_over", "Times over", draw, table, table)


def _short(value: float | None) -> object:
    return None if value is None else _rounded(value, 3)


def _slack_picture(rows: Sequence[Slack], palette: Palette, told: str) -> Picture:
    foot = 8 + ROW * max(len(rows), 1)
    x = Scale(*SLACK_ENDS, 86, WIDTH - 126, log=True)
    plot = Plot(palette, x, Scale(len(rows) - 0.5, -0.5, foot, 8), WIDTH, foot + FOOT)
    least = min((row.worst for row in rows if row.worst is not None), default=None)
    ticks = [0.5, 1, 2, 5, 10, 20]
    for value in ticks:
        plot.pen.through([(x(value), 8), (x(value), foot)], colour=palette.rule, width=1)
    plot.limit(1.0, wrong=-1, along="x")
    for at, row in enumerate(rows):
        _slack_row(plot, at, row)
        colour = palette.ink if row.worst is not None and row.worst == least else palette.soft
        plot.pen.write(0, plot.y(at) + 4, row.requirement, "start", colour=colour, size=13)
        plot.pen.write(WIDTH, plot.y(at) + 4, row.said, "end", colour=colour)
    plot.x_axis("times over (1 is just met)", ticks, domain=False)
    return plot.picture(told)


def _slack_row(plot: Plot, at: int, row: Slack) -> None:
    y, palette = plot.y(at), plot.palette
    if row.worst is None:
        plot.pen.through([(plot.x(0.5), y), (plot.x(20), y)], colour=palette.edge, width=1.3, dash=(1, 4))
        return
    colour = palette.short if row.worst < 1 else palette.accent
    worst = plot.x(plot.x.held(row.worst))
    nominal = plot.x(min(plot.x.held(row.worst if row.nominal is None else row.nominal), 0.95 * SLACK_ENDS[1]))
    plot.pen.through([(worst, y), (nominal, y)], colour=colour, width=2)
    plot.pen.box(worst - 2, y - 7, 4, 14, colour)
    plot.pen.dot(nominal, y, 3.8, palette.page, edge=colour)
