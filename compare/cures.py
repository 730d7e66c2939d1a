"""What one change would turn "falls short" into "meets": of the circuit, or of what the sheet would have to state.

Each is tried through the whole chain, corners and verdicts included, and taken only where it does not break what was
met before. One change at a time: two small ones together may do as well, and nothing here is a proof.
"""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass, replace
from typing import Any

import numpy as np

from compare.bench import Bench, CircuitKeys
from compare.columns import HIGH, MID, Columns
from compare.corners import reckon
from compare.explain import figure, joined
from compare.lot import Separate
from compare.reckoning import Reckoning
from compare.verdict import FALLS_SHORT, GAINS, MEETS, Judged, judge

STEPS = 14
"""Halvings of a search: to a few ten-thousandths of its reach."""
REACH = 64.0
GAIN_NAMES = (*GAINS, "startup_ms")
NAMES = {
    "margin": "margin",
    "gain_ratio": "gain ratio",
    "resistance_headroom": "resistance headroom",
    "startup_ms": "start-up time",
    "total_ppm": "total ppm",
    "drive_level_uw": "drive level",
}


@dataclass(frozen=True)
class Cure:
    """One change, with the requirements that it turns.

    Attributes
    ----------
    what : "transconductance", "ESR", "swing", "make tolerance", "trim", "capacitor tolerance" or "rated load"
    low, high : number or None
        Where the value must lie, in `unit`; None: no bound on that side.
    turns : names of requirements
    meets_all : bool
        Whether the part then meets all that is asked.
    """

    what: str
    unit: str
    low: float | None
    high: float | None
    turns: tuple[str, ...]
    meets_all: bool
    message: str

    def as_dict(self) -> dict[str, Any]:
        """JSON-ready."""
        return {**vars(self), "turns": list(self.turns)}


class Changed:
    """One part in its circuit, with either to change."""

    def __init__(self, reckoning: Reckoning, at: int) -> None:
        self.one, self.bench = reckoning.columns.take([at]), reckoning.bench
        self.now = {key: int(judged.verdict[at]) for key, judged in reckoning.judged.items() if judged.asked[at]}
        self.short = tuple(key for key, verdict in self.now.items() if verdict == FALLS_SHORT)
        self.met = tuple(key for key, verdict in self.now.items() if verdict == MEETS)

    def judged(self, columns: Columns | None = None, bench: Bench | None = None) -> dict[str, Judged]:
        asked, one = bench or self.bench, columns or self.one
        return judge(one, asked, reckon(one, asked))[0]

    def turns(self, names: tuple[str, ...], columns: Columns | None = None, bench: Bench | None = None) -> bool:
        """Whether a change makes all of `names` meet and leaves what was met so."""
        found = self.judged(columns, bench)
        return all(int(found[key].verdict[0]) == MEETS for key in (*names, *self.met) if key in found)

    def cure(
        self, of: tuple[str, str], ends: tuple[float | None, float | None], names: tuple[str, ...], said: str
    ) -> Cure:
        what, unit = of
        rest = [key for key, verdict in self.now.items() if verdict != MEETS and key not in names]
        end = "" if rest else ", and all that is asked"
        message = f"{said} would meet {joined(NAMES.get(name, name) for name in names)}{end}"
        return Cure(what, unit, ends[0], ends[1], names, not rest, message)


def cures(reckoning: Reckoning, at: int) -> list[Cure]:
    """Every single change that turns what falls short, those that make the part meet all that is asked first.

    Empty where nothing falls short, or no one change will do.
    """
    trial = Changed(reckoning, at)
    if not trial.short:
        return []
    tried = (_gain, _esr, _load_capacitance, _tolerance, _trim, _capacitors, _swing)
    found = [cure for lever in tried for cure in lever(trial)]
    return sorted(found, key=lambda cure: not cure.meets_all)


def _edge(inside: float, outside: float, holds: Callable[[float], bool]) -> float:
    """The value nearest to `outside` at which it still holds, by halving; logarithmic."""
    good, bad = math.log(inside), math.log(outside)
    for _ in range(STEPS):
        middle = (good + bad) / 2
        good, bad = (middle, bad) if holds(math.exp(middle)) else (good, middle)
    return math.exp(good)


def gain_window_ms(reckoning: Reckoning, at: int) -> tuple[float, float] | None:
    """Least and greatest nominal transconductance, mS, with which margin, gain ratio, headroom and start-up are met.

    A range keeps its ratio of ends and conditions theirs to it; other requirements are left out. The upper end is at
    most 64 times the bench's. None where no transconductance will do, or none is given.
    """
    trial = Changed(reckoning, at)
    nominal = _nominal_gain_ms(trial.bench)
    if nominal is None:
        return None

    def holds(factor: float) -> bool:
        found = trial.judged(bench=with_gain(trial.bench, factor))
        return all(int(found[key].verdict[0]) == MEETS for key in GAIN_NAMES if key in found)

    inside = next((factor for factor in _outward() if holds(factor)), None)
    if inside is None:
        return None
    least, greatest = (end if holds(end) else _edge(inside, end, holds) for end in (1 / REACH, REACH))
    return nominal * least, nominal * greatest


def gain_window_words(reckoning: Reckoning, at: int) -> str:
    """Which transconductance setting of the IC to choose, in a sentence."""
    bench = reckoning.bench
    nominal, window = _nominal_gain_ms(bench), gain_window_ms(reckoning, at)
    asked = joined(
        NAMES[name] for name in GAIN_NAMES if name != "startup_ms" or bench.requirement.startup_ms is not None
    )
    if nominal is None:
        return "which transconductance to set cannot be told: the bench gives none"
    given = f"(the bench gives {figure(nominal)} mS)"
    if window is None:
        return (
            f"no transconductance from {figure(nominal / REACH)} to {figure(nominal * REACH)} mS meets {asked} {given}"
        )
    low, high = window
    top = "or more" if high >= nominal * REACH * (1 - 1e-9) else f"to {figure(high, 3)}"
    return f"{asked} are met with a nominal transconductance of {figure(low, 3)} {top} mS {given}"


def _outward() -> list[float]:
    """1, and factors further and further from it to both sides."""
    ladder = np.geomspace(1, REACH, 13)[1:]
    return [1.0, *(float(f) for up in ladder for f in (up, 1 / up))]


def _nominal_gain_ms(bench: Bench) -> float | None:
    stated = bench.settings[0].circuit.transconductance_range_ms
    return None if stated is None else stated[MID]


def with_gain(bench: Bench, factor: float) -> Bench:
    """The bench with every transconductance that it gives times `factor`."""
    return _with_circuit(bench, lambda keys: {"transconductance_ms": _scaled(keys.transconductance_ms, factor)})


def _scaled(value: float | tuple[float, float] | None, factor: float) -> float | tuple[float, float] | None:
    if isinstance(value, tuple):
        return value[0] * factor, value[1] * factor
    return None if value is None else value * factor


def _with_circuit(bench: Bench, change: Callable[[CircuitKeys], dict[str, Any]]) -> Bench:
    """The bench with keys of its circuit changed, and those conditions' keys that give them too."""

    def own(keys: CircuitKeys) -> dict[str, Any]:
        return {name: value for name, value in change(keys).items() if name in keys.given}

    conditions = tuple(one.model_copy(update=own(one)) for one in bench.circuit.condition)
    circuit = bench.circuit.model_copy(update={**change(bench.circuit), "condition": conditions})
    return bench.model_copy(update={"circuit": circuit})


def _short_of(trial: Changed, *affected: str) -> tuple[str, ...]:
    return tuple(name for name in trial.short if name in affected)


def _gain(trial: Changed) -> list[Cure]:
    """Another transconductance: more, or less where the IC has too much."""
    names, nominal = _short_of(trial, *GAIN_NAMES), _nominal_gain_ms(trial.bench)
    if not names or nominal is None:
        return []

    def holds(factor: float) -> bool:
        return trial.turns(names, bench=with_gain(trial.bench, factor))

    inside = next((factor for factor in _outward() if holds(factor)), None)
    if inside is None:
        return []
    factor = _edge(inside, 1.0, holds)
    value, more = nominal * factor, factor > 1
    ends = (value, None) if more else (None, value)
    bound = "at least" if more else "at most"
    said = f"a nominal transconductance of {bound} {figure(value, 3)} mS, {figure(factor, 3)} times the bench's,"
    return [trial.cure(("transconductance", "mS"), ends, names, said)]


def _esr(trial: Changed) -> list[Cure]:
    names = _short_of(trial, *GAIN_NAMES, "drive_level_uw")
    greatest = float(np.max(trial.one.esr_ohm[:, HIGH]))
    if not names or not math.isfinite(greatest):
        return []

    def holds(limit: float) -> bool:
        return trial.turns(names, replace(trial.one, esr_ohm=np.minimum(trial.one.esr_ohm, limit)))

    if not holds(greatest / REACH):
        return []
    limit = _edge(greatest / REACH, greatest, holds)
    said = f"an ESR of at most {figure(limit, 3)} Ω instead of {figure(greatest)} Ω"
    return [trial.cure(("ESR", "Ω"), (None, limit), names, said)]


def _load_capacitance(trial: Changed) -> list[Cure]:
    """The part ordered for the load that the circuit presents."""
    names = _short_of(trial, "total_ppm")
    if not names or not np.isfinite(trial.one.load_pf[0]):
        return []
    load = float(reckon(trial.one, trial.bench).nominal["circuit_load_pf"][0])
    if not math.isfinite(load) or not trial.turns(names, replace(trial.one, load_pf=np.array([load]))):
        return []
    said = f"a part rated for a load of {figure(load, 3)} pF, which the circuit presents,"
    return [trial.cure(("rated load", "pF"), (load, load), names, said)]


def _tolerance(trial: Changed) -> list[Cure]:
    """A tighter make tolerance, symmetric."""
    names, offer = _short_of(trial, "total_ppm"), trial.one.offers[0]
    if not names or not offer.tolerance.stated or trial.bench.requirement.trim_step_ppm is not None:
        return []
    stated = max(abs(offer.tolerance.span.low), abs(offer.tolerance.span.high))

    def holds(size: float) -> bool:
        span = replace(offer.tolerance.span, low=-size, mid=0.0, high=size)
        tighter = replace(offer, tolerance=replace(offer.tolerance, span=span))
        return trial.turns(names, replace(trial.one, offers=Separate([tighter])))

    if stated <= 0 or not holds(stated / REACH):
        return []
    size = _edge(stated / REACH, stated, holds)
    said = f"a make tolerance of ±{figure(size, 3)} ppm instead of ±{figure(stated)} ppm"
    return [trial.cure(("make tolerance", "ppm"), (-size, size), names, said)]


def _trim(trial: Changed) -> list[Cure]:
    """Production that trims each unit: to what it must come."""
    names, asked = _short_of(trial, "total_ppm"), trial.bench.requirement
    if not names or asked.limits_ppm is None:
        return []
    widest = asked.trim_step_ppm or max(map(abs, asked.limits_ppm))

    def holds(step: float) -> bool:
        trimmed = trial.bench.model_copy(update={"requirement": asked.model_copy(update={"trim_step_ppm": step})})
        return trial.turns(names, bench=trimmed)

    if widest <= 0 or not holds(widest / (REACH * REACH)):
        return []
    step = _edge(widest / (REACH * REACH), widest, holds)
    said = f"trimming each unit to within {figure(step, 3)} ppm"
    return [trial.cure(("trim", "ppm"), (0.0, step), names, said)]


def _capacitors(trial: Changed) -> list[Cure]:
    """Capacitors of a tighter tolerance that is sold (common practice: 5, 2 and 1 %)."""
    names, now = trial.short, trial.bench.circuit.capacitor_tolerance_percent
    for percent in (2.0, 1.0):
        if percent >= now:
            continue
        tighter = _with_circuit(trial.bench, lambda _, at=percent: {"capacitor_tolerance_percent": at})  # type: ignore[misc]
        turned = tuple(name for name in names if trial.turns((name,), bench=tighter))
        if turned:
            said = f"capacitors of ±{figure(percent)} % instead of ±{figure(now)} %"
            return [trial.cure(("capacitor tolerance", "%"), (None, percent), turned, said)]
    return []


def _swing(trial: Changed) -> list[Cure]:
    """A smaller swing: the drive goes with its square."""
    names, swing = _short_of(trial, "drive_level_uw"), trial.bench.circuit.swing_v
    if not names or swing is None:
        return []

    def holds(volts: float) -> bool:
        factor = volts / swing
        lower = _with_circuit(
            trial.bench, lambda keys: {"swing_v": None if keys.swing_v is None else keys.swing_v * factor}
        )
        return trial.turns(names, bench=lower)

    if not holds(swing / REACH):
        return []
    volts = _edge(swing / REACH, swing, holds)
    at = f"{trial.bench.circuit.swing_as} at the {trial.bench.circuit.swing_at} end"
    return [trial.cure(("swing", "V"), (None, volts), names, f"a swing of at most {figure(volts, 3)} V {at}")]
