"""What a number does when one thing moves: plain columns with their units, for the page's charts and the reports.

Each curve runs through the review's own numbers: `marks` are points of it that the review prints, and `limits` are what
is asked. Nothing is drawn here.
"""

from __future__ import annotations

import itertools
from collections.abc import Mapping
from dataclasses import dataclass, field, replace

import numpy as np

from compare import budget, motional
from compare.bench import Bench
from compare.circuit import Array, Circuit, array, turning_transconductance_ms
from compare.columns import HIGH, LOW, MID, Columns
from compare.corners import (
    Nodes,
    as_reckoned,
    limiters_of,
    lossless_load_pf,
    make_circuit,
    nominal_transconductance_ms,
)
from compare.oscillation import Arm, Crystal, analyse
from compare.prefix import PPM
from compare.reckoning import Reckoning
from compare.roots import CRYSTAL, SHUNT, crystal_at_values, crystal_roots
from compare.terms import fork_spans, reckoned_ranges_c

POINTS = 201
SHAPE_NOT_STATED = "how far it drifts over the range is stated, not on what curve: the shape is not stated"


@dataclass(frozen=True)
class Curve:
    """Columns of equal length, each with its unit ("" for a ratio), and what to mark.

    Attributes
    ----------
    columns : name -> (points,)
        The first is what moves.
    units : name -> unit
    marks : name -> {column: value}
        Points of the curve that the review gives.
    limits : name -> value
        What is asked, in the unit of the second column.
    said : sentences
        What holds for the curve and does not show in it.
    """

    columns: Mapping[str, Array]
    units: Mapping[str, str]
    marks: Mapping[str, Mapping[str, float]] = field(default_factory=dict)
    limits: Mapping[str, float] = field(default_factory=dict)
    said: tuple[str, ...] = ()

    def __post_init__(self) -> None:
        lengths = {name: len(values) for name, values in self.columns.items()}
        if len(set(lengths.values())) > 1 or set(lengths) != set(self.units):
            raise ValueError(f"columns {lengths} and units {dict(self.units)} do not go together")


def _part(reckoning: Reckoning, at: int) -> tuple[Columns, Bench]:
    return reckoning.columns.take([at]), reckoning.bench


def _ends(reckoning: Reckoning, key: str, at: int) -> tuple[float, float, float]:
    low, mid, high = (float(value) for value in reckoning.numbers[key].ends[:, at])
    return low, mid, high


def crystal_mid(columns: Columns, bench: Bench) -> Crystal:
    """The crystal at its mid readings, (1, 1) each."""
    values = {name: ends[MID][:, None] for name, ends in crystal_roots(columns, 0).items()}
    return crystal_at_values(values, columns, bench, 0)


def _crystal_corners(columns: Columns, bench: Bench, setting: int = 0, *, of_frequency: bool = False) -> Crystal:
    """The crystal at every combination of its ends, (1, corners) each."""
    ends = crystal_roots(columns, setting)
    if of_frequency:
        floor = np.minimum(columns.shunt_floor_pf, ends[SHUNT][LOW])
        ends = ends | {SHUNT: np.stack([floor, ends[SHUNT][MID], ends[SHUNT][HIGH]])}
    combinations = itertools.product(*((ends[name][LOW, 0], ends[name][HIGH, 0]) for name in CRYSTAL))
    values = dict(zip(CRYSTAL, np.array(list(combinations)).T[:, None, :], strict=True))
    return crystal_at_values(values, columns, bench, setting)


def _circuit(bench: Bench, gain_ms: Array, *, corners: bool, setting: int = 0) -> Circuit:
    """The bench's circuit at nominal capacitances, or at every corner of them on the last axis."""
    keys = as_reckoned(bench.settings[setting].circuit, bench)
    spans = vars(Nodes.of(keys)).values()
    if not corners:
        return make_circuit(keys, bench, [span[MID] for span in spans], gain_ms)
    combinations = np.array(list(itertools.product(*((span[LOW], span[HIGH]) for span in spans))))
    return make_circuit(keys, bench, list(combinations.T), gain_ms[..., None])


def shift_ppm(crystal: Crystal, load_pf: Array) -> Array:
    """(fL(CL) - f rated)/f rated on the true curve: the phase-zero resonance with CL in series, R1 counted.

    `motional.load_reactance_ohm` at both loads; a series-resonant part counts from fs. NaN where R1 is so great that
    the phase never passes zero.
    """
    frequency, rated_load, c0, _, r1 = crystal
    arm = Arm.of(crystal)

    def pull_with(load: Array, at_pull: Array) -> Array:
        at_mhz = frequency * (1 + at_pull) / (1 + arm.rated_pull)
        reactance, _ = motional.load_reactance_ohm(at_mhz, c0, load, r1)
        return arm.pull_of(np.where(np.isinf(load), 0.0, reactance))

    rated = pull_with(rated_load, arm.rated_pull)
    # The reactance of a load is that at the frequency it makes: one more step settles it to 1e-4 ppm.
    there = pull_with(load_pf, pull_with(load_pf, arm.rated_pull))
    shift: Array = (there - rated) / (1 + rated) / PPM
    return shift


def ppm_against_load(reckoning: Reckoning, at: int, points: int = POINTS) -> Curve:
    """The shift from the rated frequency against the load, nominal and over what the sheet leaves open of the crystal.

    Marks: `rated` (none for a series-resonant part), `circuit`, `circuit_low`, `circuit_high`. Limits: what the other
    causes of the budget leave for the load, where the bench limits the total.
    """
    one, bench = _part(reckoning, at)
    low, mid, high = _ends(reckoning, "circuit_load_pf", at)
    rated = float(one.load_pf[0])
    known = [value for value in (low, mid, high, rated) if np.isfinite(value)] or [
        lossless_load_pf(bench.settings[0].circuit)
    ]
    load = np.linspace(0.6 * min(known), 1.5 * max(known), points)
    crystal, corners = crystal_mid(one, bench), _crystal_corners(one, bench, of_frequency=True)
    with np.errstate(invalid="ignore"):
        over = shift_ppm(corners, load[:, None])
        columns = {
            "load_pf": load,
            "shift_ppm": shift_ppm(crystal, load)[0],
            "shift_low_ppm": np.fmin.reduce(over, axis=-1),
            "shift_high_ppm": np.fmax.reduce(over, axis=-1),
        }
        marks = {"rated": {"load_pf": rated, "shift_ppm": 0.0}} if np.isfinite(rated) else {}
        for name, value in (("circuit", mid), ("circuit_low", low), ("circuit_high", high)):
            if np.isfinite(value):
                marks[name] = {"load_pf": value, "shift_ppm": float(shift_ppm(crystal, array(value))[0, 0])}
    units = {"load_pf": "pF", "shift_ppm": "ppm", "shift_low_ppm": "ppm", "shift_high_ppm": "ppm"}
    return Curve(columns, units, marks, _room_for_load(reckoning, at))


def _room_for_load(reckoning: Reckoning, at: int) -> dict[str, float]:
    limits, terms = reckoning.bench.requirement.limits_ppm, reckoning.total.terms.values()
    if limits is None:
        return {}
    low, high = (float(sum(getattr(term, end)[at] for term in terms)) for end in ("low", "high"))
    return {"room_low_ppm": limits[0] - low, "room_high_ppm": limits[1] - high} if np.isfinite(low + high) else {}


def headroom_against_gain(reckoning: Reckoning, at: int, points: int = POINTS) -> Curve:
    """Resistance headroom against transconductance, nominal and in the worst corner of everything but the gain.

    Marks: `critical` and `greatest`, where the nominal headroom passes 1; `optimum`, where it is greatest; `ic`, the
    IC's nominal, with `ic_low` and `ic_high` where it has a range. Limits: the headroom asked.
    """
    one, bench = _part(reckoning, at)
    crystal = crystal_mid(one, bench)
    frequency = bench.requirement.frequency_mhz
    critical, greatest = (_ends(reckoning, f"{name}_transconductance_ms", at)[MID] for name in ("critical", "greatest"))
    bare = _circuit(bench, np.full(1, np.nan), corners=False)
    optimum = float(np.ravel(turning_transconductance_ms(bare, frequency, crystal.shunt_capacitance_pf))[0])
    keys = as_reckoned(bench.settings[0].circuit, bench)
    stated = (
        keys.transconductance_range_ms
        or (float(nominal_transconductance_ms(keys, bench, one.shunt_pf[0, MID])[0]),) * 3
    )
    known = [g for g in (critical, greatest, optimum, *stated) if np.isfinite(g)]
    gain = np.geomspace(0.3 * min(known), 2 * max(known), points)

    def headroom(gains: Array) -> Array:
        found: Array = analyse(_circuit(bench, gains, corners=False), crystal)["resistance_headroom"][0]
        return found

    worst = _worst_headroom(one, bench, gain)
    named = {"critical": critical, "greatest": greatest, "optimum": optimum, "ic": stated[MID]}
    if stated[LOW] != stated[HIGH]:
        named |= {"ic_low": stated[LOW], "ic_high": stated[HIGH]}
    marks = {
        name: {"transconductance_ms": g, "headroom": float(headroom(np.array([g]))[0])}
        for name, g in named.items()
        if np.isfinite(g)
    }
    columns = {"transconductance_ms": gain, "headroom": headroom(gain), "headroom_worst": worst}
    units = {"transconductance_ms": "mS", "headroom": "", "headroom_worst": ""}
    return Curve(columns, units, marks, {"asked": bench.requirement.margin}, _gain_said(bench))


def _gain_said(bench: Bench) -> tuple[str, ...]:
    if len(bench.settings) == 1:
        return ()
    return ("the worst corner holds at every condition of the bench, each at the transconductance shown",)


def _worst_headroom(one: Columns, bench: Bench, gain: Array) -> Array:
    """(points,) least headroom over capacitances, crystal and conditions, the gain held."""
    worst = np.full(len(gain), np.inf)
    for number in range(len(bench.settings)):
        crystal = Crystal(*(values.reshape(1, -1, 1) for values in _crystal_corners(one, bench, number)))
        circuit = _circuit(bench, gain[:, None], corners=True, setting=number)
        found = analyse(circuit, crystal)["resistance_headroom"]
        worst = np.fmin(worst, np.fmin.reduce(found.reshape(len(gain), -1), axis=1))
    return worst


def margin_against_esr(reckoning: Reckoning, at: int, points: int = POINTS) -> Curve:
    """Margin against the motional resistance R1, nominal and in the worst corner of everything but R1.

    The nominal curve ends where no gain would sustain oscillation: there is no steady load beyond, and no margin.
    Marks: `nominal`, and `worst` at the greatest R1 of the part. Limits: the margin asked.
    """
    one, bench = _part(reckoning, at)
    crystal = crystal_mid(one, bench)
    _, mid, high = (float(np.ravel(r)[0]) for r in _esr_ends(one, bench))
    greatest = _ends(reckoning, "greatest_esr_ohm", at)[HIGH]
    top = 1.2 * max(value for value in (greatest, 1.5 * high) if np.isfinite(value))
    esr = np.linspace(top / points, top, points)

    def nominal(values: Array) -> Array:
        gain = nominal_transconductance_ms(as_reckoned(bench.settings[0].circuit, bench), bench, one.shunt_pf[0, MID])
        at_esr = replace(crystal, esr_ohm=values[:, None])
        found = analyse(_circuit(bench, gain[:, None], corners=False), at_esr)
        return np.where(np.isnan(found["critical_transconductance_ms"]), np.nan, found["margin"])[:, 0]

    marks = {
        "nominal": {"esr_ohm": mid, "margin": float(nominal(np.array([mid]))[0])},
        "worst": {"esr_ohm": high, "margin": float(_worst_margin(one, bench, np.array([high]))[0])},
    }
    columns = {"esr_ohm": esr, "margin": nominal(esr), "margin_worst": _worst_margin(one, bench, esr)}
    units = {"esr_ohm": "Ω", "margin": "", "margin_worst": ""}
    return Curve(columns, units, marks, {"asked": bench.requirement.margin})


def _esr_ends(one: Columns, bench: Bench) -> tuple[Array, Array, Array]:
    """Least, mid and greatest R1 over the settings, by the bench's rules."""
    mid = crystal_mid(one, bench).esr_ohm
    every = [np.ravel(_crystal_corners(one, bench, number).esr_ohm) for number in range(len(bench.settings))]
    return np.min(np.concatenate(every)), array(mid), np.max(np.concatenate(every))


def _worst_margin(one: Columns, bench: Bench, esr_ohm: Array) -> Array:
    """(points,) least margin over capacitances, C0, gain and conditions, R1 held."""
    worst = np.full(len(esr_ohm), np.inf)
    for number, setting in enumerate(bench.settings):
        corners = _crystal_corners(one, bench, number)
        crystal = replace(Crystal(*(values.reshape(1, -1, 1) for values in corners)), esr_ohm=esr_ohm[:, None, None])
        keys = as_reckoned(setting.circuit, bench)
        stated = keys.transconductance_range_ms
        shunt = array(crystal.shunt_capacitance_pf)
        gains = (
            [nominal_transconductance_ms(keys, bench, shunt)]
            if stated is None
            else [np.full_like(shunt, end) for end in (stated[LOW], stated[HIGH])]
        )
        for gain in gains:
            for limiter in limiters_of(keys):
                circuit = _circuit(bench, gain[..., 0], corners=True, setting=number)
                found = analyse(circuit, crystal, limiter=limiter)["margin"]
                worst = np.fmin(worst, np.fmin.reduce(found.reshape(len(esr_ohm), -1), axis=1))
    return worst


def ppm_over_temperature(reckoning: Reckoning, at: int, points: int = POINTS) -> Curve:
    """The shift over the temperatures reckoned over: the product's, so far as the part's own range goes.

    A tuning fork's parabola with its spread; for any other cut the band of the stability as stated, since its shape is
    not. Below 1 MHz seconds a day stand beside it. Marks: `coldest` and `hottest`, at the low end.
    """
    one, bench = _part(reckoning, at)
    offer = one.offers[0]
    low_c, high_c = (float(end) for end in reckoned_ranges_c(one.offers, bench)[:, 0])
    temperature = np.linspace(low_c, high_c, points)
    if offer.fork:
        k, centre = (ends[:, 0] for ends in fork_spans(one.offers))
        low, high = budget.parabola_ppm_range(
            (temperature, temperature), (k[LOW], k[HIGH]), (centre[LOW], centre[HIGH])
        )
        columns = {"ppm": budget.parabola_ppm(temperature, k[MID], centre[MID]), "low_ppm": low, "high_ppm": high}
        said: tuple[str, ...] = ()
    else:
        term = reckoning.total.terms["temperature"]
        columns = {
            "low_ppm": np.full(points, float(term.low[at])),
            "high_ppm": np.full(points, float(term.high[at])),
        }
        said = (SHAPE_NOT_STATED,)
    units = dict.fromkeys(columns, "ppm")
    marks = {
        name: {"temperature_c": float(temperature[index]), "low_ppm": float(columns["low_ppm"][index])}
        for name, index in (("coldest", 0), ("hottest", -1))
    }
    if offer.frequency_mhz < 1:
        columns |= {f"{name.removesuffix('ppm')}s_per_day": budget.seconds_per_day(v) for name, v in columns.items()}
        units |= {name: "s/day" for name in columns if name.endswith("s_per_day")}
    return Curve({"temperature_c": temperature} | columns, {"temperature_c": "°C"} | units, marks, {}, said)


@dataclass(frozen=True)
class Stack:
    """The frequency budget cause by cause, ppm: (causes,) each; the running sums end at the review's total.

    `left_low_ppm` and `left_high_ppm`: what is left to the limits, below zero where passed; None without a limit.
    """

    causes: tuple[str, ...]
    low_ppm: Array
    high_ppm: Array
    sum_low_ppm: Array
    sum_high_ppm: Array
    left_low_ppm: float | None
    left_high_ppm: float | None


def budget_stack(reckoning: Reckoning, at: int) -> Stack:
    """Make, temperature, ageing and load error in that order; with a trim the first is what the trim leaves."""
    total, asked = reckoning.total, reckoning.bench.requirement
    names = ["trim" if name == "make" and asked.trim_step_ppm is not None else name for name in total.terms]
    low = np.array(
        [float(term.low[at]) for term in total.terms.values()] + [np.fmin.reduce(total.load_low[at], axis=None)]
    )
    high = np.array(
        [float(term.high[at]) for term in total.terms.values()] + [np.fmax.reduce(total.load_high[at], axis=None)]
    )
    limits = asked.limits_ppm
    return Stack(
        (*names, "load error"),
        low,
        high,
        np.cumsum(low),
        np.cumsum(high),
        None if limits is None else float(low.sum() - limits[0]),
        None if limits is None else float(limits[1] - high.sum()),
    )
