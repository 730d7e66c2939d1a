"""What would overturn a verdict: how far the one input that a requirement hangs on most may move, all else as it is.

Each value is found on the whole chain, worst case included: for a requirement that is met the value at which it would
fall short, for one that is not met the value at which it would be met.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Mapping
from dataclasses import dataclass, replace
from typing import Any

import numpy as np

from compare.bench import Bench
from compare.columns import HIGH, LOW, Columns
from compare.corners import reckon
from compare.cures import with_gain
from compare.curves import Curve
from compare.figures import number, scale, signed, with_unit
from compare.reckoning import Reckoning
from compare.verdict import GAINS, judge

STEPS = 6
CLOSE = 1e-3
FARTHEST = 1e3


@dataclass(frozen=True)
class Break:
    """One input and the value at which the verdict on `about` turns.

    `side` is "below" or "above": the side on which the requirement is not met. `now` is where the input stands.
    """

    about: str
    what: str
    value: float
    unit: str
    side: str
    now: float
    met: bool

    @property
    def words(self) -> str:
        """`the IC’s gm fell below 2.8 mS`, or where it is not met `the IC’s gm were at least 9.1 mS`."""
        factor, unit = scale(self.unit, self.value)
        digits = 4 if self.unit == "pF" else 3
        figure = (signed if self.unit == "ppm" else number)(self.value * factor, digits)
        if self.met:
            return f"{self.what} {'fell below' if self.side == 'below' else 'rose above'} {with_unit(figure, unit)}"
        return f"{self.what} were {'at least' if self.side == 'below' else 'at most'} {with_unit(figure, unit)}"


def breaks(reckoning: Reckoning, at: int, load_curve: Curve | None = None) -> list[Break]:
    """For every requirement with a slack that is known, the inputs that would turn it, the nearest first."""
    found = [*_of_gain(reckoning, at), *_of_ppm(reckoning, at, load_curve), *_of_drive(reckoning, at)]
    return sorted(found, key=lambda one: abs(math.log(max(one.value / one.now, 1e-9))) if one.now > 0 else math.inf)


NAMES = {
    "gains": "The margins",
    "total_ppm": "The ppm",
    "drive_level_uw": "The drive",
    "startup_ms": "The start-up time",
}


def overturning(found: list[Break], *, most: int = 2) -> str:
    """What would turn a verdict, in a sentence or more; "" where none is known.

    `It would fall short if the load fell below 7.25 pF or the IC’s gm fell below 2.8 mS.`
    """
    short = [one for one in found if not one.met]
    if not short:
        words = _first_of_each(found)[:most]
        return f"It would fall short if {' or '.join(words)}." if words else ""
    said = []
    for about, name in NAMES.items():
        if words := _first_of_each([one for one in short if one.about == about]):
            said.append(f"{name} would be met if {' or '.join(words)}.")
    return " ".join(said)


def _first_of_each(found: list[Break]) -> list[str]:
    picked: dict[str, Break] = {}
    for one in found:
        picked.setdefault(one.what, one)
    return [one.words for one in picked.values()]


def _of_gain(reckoning: Reckoning, at: int) -> list[Break]:
    """Transconductance and R1 at which margin, gain and R1 headroom, taken together, are just met."""
    one, bench = reckoning.columns.take([at]), reckoning.bench
    found = []
    stated = [s.circuit.transconductance_range_ms for s in bench.settings]
    least = [ends[LOW] for ends in stated if ends is not None]
    for about, keys in (("gains", GAINS), ("startup_ms", ("startup_ms",))):
        slack = _least_slack(reckoning.judged, at, keys)
        if slack is None or slack <= 0 or slack >= FARTHEST:
            continue

        def with_other_gain(by: float, keys: tuple[str, ...] = keys) -> float:
            return _slack_with(one, with_gain(bench, by), keys)

        if least and (factor := _factor(with_other_gain, slack, rising=True)) is not None:
            found.append(Break(about, "the IC’s gm", min(least) * factor, "mS", "below", min(least), slack >= 1))
        if about == "gains" and (esr := _of_esr(one, bench, slack)) is not None:
            found.append(esr)
    return found


def _of_esr(one: Columns, bench: Bench, slack: float) -> Break | None:
    greatest = float(np.max(one.esr_ohm[:, HIGH]))
    if not math.isfinite(greatest):
        return None

    def with_other_esr(by: float) -> float:
        return _slack_with(replace(one, esr_ohm=one.esr_ohm * by), bench, GAINS)

    factor = _factor(with_other_esr, slack, rising=False)
    return None if factor is None else Break("gains", "the ESR", greatest * factor, "Ω", "above", greatest, slack >= 1)


def _least_slack(judged: Mapping[str, Any], at: int, keys: tuple[str, ...]) -> float | None:
    known = [float(judged[key].worst[at]) for key in keys if key in judged and judged[key].asked[at]]
    return None if not known or any(math.isnan(value) for value in known) else min(known)


def _slack_with(columns: Columns, bench: Bench, keys: tuple[str, ...]) -> float:
    judged, _ = judge(columns, bench, reckon(columns, bench))
    return _least_slack(judged, 0, keys) or 0.0


def _factor(slack_at: Callable[[float], float], slack: float, *, rising: bool) -> float | None:
    """The factor on an input at which the slack is 1, by secants in logarithms; None where none is near.

    The slack goes about with the factor (`rising`) or against it, so the first guess is nearly right.
    """
    a, slack_a = 1.0, slack
    b = 1 / slack if rising else slack
    for _ in range(STEPS):
        slack_b = slack_at(b)
        if abs(slack_b - 1) < CLOSE:
            return b
        if slack_b <= 0 or slack_b == slack_a or not 1 / FARTHEST < b < FARTHEST:
            return None
        step = math.log(slack_b) * math.log(b / a) / math.log(slack_b / slack_a)
        a, slack_a, b = b, slack_b, b * math.exp(-step)
    return None


def _of_ppm(reckoning: Reckoning, at: int, curve: Curve | None) -> list[Break]:
    """The load at which the error of frequency passes its limit, on the outer curve that the other causes leave."""
    if curve is None or not {"room_low_ppm", "room_high_ppm"} <= set(curve.limits) or "circuit_low" not in curve.marks:
        return []
    load = curve.columns["load_pf"]
    ends = (
        ("below", "circuit_low", "shift_high_ppm", "room_high_ppm"),
        ("above", "circuit_high", "shift_low_ppm", "room_low_ppm"),
    )
    found = []
    for side, mark, column, room in ends:
        crossing = _crossing(load, curve.columns[column], curve.limits[room])
        now = curve.marks[mark]["load_pf"]
        if crossing is None:
            continue
        met = now >= crossing if side == "below" else now <= crossing
        found.append(Break("total_ppm", "the load", crossing, "pF", side, now, met))
    return found


def _crossing(x: Any, y: Any, level: float) -> float | None:
    """Where a falling curve passes a level."""
    above = np.asarray(y) >= level
    turns = np.nonzero(above[:-1] & ~above[1:])[0]
    if not len(turns):
        return None
    n = int(turns[0])
    share = (y[n] - level) / (y[n] - y[n + 1])
    return float(x[n] + share * (x[n + 1] - x[n]))


def _of_drive(reckoning: Reckoning, at: int) -> list[Break]:
    """The swing at which the drive is just what the part is rated for: it goes with the square of the swing."""
    judged = reckoning.judged.get("drive_level_uw")
    swings = [s.circuit.swing_v for s in reckoning.bench.settings if s.circuit.swing_v is not None]
    if judged is None or not judged.asked[at] or not swings:
        return []
    slack = float(judged.worst[at])
    if not math.isfinite(slack) or not 0 < slack < FARTHEST - 1:
        return []
    now = max(swings)
    return [Break("drive_level_uw", "the swing", now * math.sqrt(slack), "V", "above", now, slack >= 1)]
