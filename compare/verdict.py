"""Each requirement against its number in the worst case: meets, falls short or cannot tell, for all parts at once."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field

import numpy as np

from compare.bench import Bench
from compare.circuit import Array
from compare.columns import MID, Columns, Flags
from compare.corners import SHUNT_FLOOR, Reckoned, rated_gm
from compare.lot import Whole, spans, together
from compare.offer import Band, covers
from compare.stated import Taken
from compare.terms import Total, total_ppm

MEETS, CANNOT_TELL, FALLS_SHORT = 2, 1, 0
WORDS = {MEETS: "meets", CANNOT_TELL: "cannot tell", FALLS_SHORT: "falls short"}
MOST_SLACK = 999.0
GAINS = ("margin", "gain_ratio", "resistance_headroom")
CAPACITORS = ("input_capacitor_pf", "output_capacitor_pf")


@dataclass
class Judged:
    """One requirement over all parts.

    Attributes
    ----------
    asked : (n,) bool
        Whether this part is held to it.
    verdict : (n,) int
        MEETS, CANNOT_TELL or FALLS_SHORT.
    slack : (n,)
        Times over that it is met in the worst case; NaN where it cannot be told or has none.
    worst : (n,)
        The same with every estimate at its worst, also where that does not settle the verdict.
    missing, estimated : mapping of field or bench key to (n,) bool
        What a verdict wanted and the sheet or bench lacks; estimates that it rests on.
    typical_only : (n,) bool
        Rests on an ESR that is printed as typical.
    """

    about: str
    asked: Flags
    verdict: Whole
    slack: Array
    worst: Array
    missing: Mapping[str, Flags] = field(default_factory=dict)
    estimated: Mapping[str, Flags] = field(default_factory=dict)
    typical_only: Flags = field(default_factory=lambda: np.zeros(0, dtype=bool))


@dataclass(frozen=True)
class Silence:
    """What is not known: of the bench for all parts, of the sheet for each."""

    bench_keys: Mapping[str, bool]
    esr: Flags
    load: Flags
    drive: Flags
    esr_typical_only: Flags
    motional_estimated: Flags
    shunt_missing: Flags
    shunt_loose: Flags


def silence(columns: Columns, bench: Bench) -> Silence:
    """Everything that may keep a requirement from being judged."""
    settings = [setting.circuit for setting in bench.settings]
    keys = {f"circuit.{key}": any(getattr(s, key) is None for s in settings) for key in CAPACITORS}
    keys["circuit.swing_v"] = any(s.swing_v is None for s in settings)
    return Silence(
        bench_keys=keys,
        esr=np.logical_or.reduce(np.isnan(columns.esr_ohm[:, MID]), axis=0),
        load=np.isnan(columns.load_pf),
        drive=columns.offers.column("drive").array(lambda taken: not taken.stated, bool),
        esr_typical_only=np.logical_or.reduce(
            [
                columns.offers.at(s, "esr").array(lambda taken: taken.typical_only and taken.stated, bool)
                for s in range(len(settings))
            ]
        ),
        motional_estimated=columns.motional_estimated,
        shunt_missing=columns.shunt_missing,
        shunt_loose=columns.shunt_loose,
    )


def judge(columns: Columns, bench: Bench, reckoned: Reckoned) -> tuple[dict[str, Judged], Total]:
    """Every requirement that the bench asks or a part calls for, in the order in which they are told."""
    known = silence(columns, bench)
    total = total_ppm(columns, bench, reckoned)
    judged = {key: _gain(key, columns, bench, reckoned, known) for key in GAINS}
    judged["resistance_headroom"] = _with_greatest_gain(judged["resistance_headroom"], reckoned, known)
    if bench.requirement.limits_ppm is not None:
        judged["total_ppm"] = _total(columns, bench, total, known)
    if "drive_headroom" in bench.requirement.given or any(s.circuit.swing_v is not None for s in bench.settings):
        judged["drive_level_uw"] = _drive(columns, bench, reckoned, known)
    if bench.requirement.startup_ms is not None:
        judged["startup_ms"] = _startup(columns, bench, reckoned, known)
    if bench.requirement.temperature_c is not None:
        judged["operating_temperature_c"] = _range(columns, bench)
    return judged, total


def transconductance_missing(columns: Columns, bench: Bench) -> dict[str, Flags]:
    """The bench keys without which no transconductance is known."""
    n = len(columns)
    missing: dict[str, Flags] = {}
    for setting in bench.settings:
        keys = setting.circuit
        if keys.transconductance_ms is not None:
            continue
        if keys.rating is None or keys.rating.kind is None:
            missing["circuit.transconductance_ms"] = np.ones(n, dtype=bool)
        elif isinstance(keys.rating.esr_max_ohm, tuple):
            if np.isnan(rated_gm(keys, bench, np.zeros(()))):
                missing["circuit.rating.esr_max_ohm"] = np.ones(n, dtype=bool)
        elif keys.rating.kind != "critical_transconductance_max_ms" and keys.rating.load_pf is None:
            missing["circuit.rating.load_pf"] = np.ones(n, dtype=bool)
    return missing


def decide(slack: Array, by_shunt: Flags, by_motional: Flags, best: Array | None = None) -> tuple[Array, Array]:
    """Worst and best slack over the estimates: (n, C0 ends, C1 ends) to (n,) each.

    Ends that are stated are always taken at their worst; ends that are estimated give the interval between the two.
    `best` is the slack with further estimates (those of the budget) at their best.
    """
    good = slack if best is None else best
    worst: Array = slack.min(axis=(1, 2))
    choices = (
        (by_shunt & by_motional, good.max(axis=(1, 2))),
        (by_shunt, good.min(axis=2).max(axis=1)),
        (by_motional, good.min(axis=1).max(axis=1)),
    )
    highest = np.select([c for c, _ in choices], [v for _, v in choices], good.min(axis=(1, 2)))
    return worst, highest


def _judged(
    about: str,
    slacks: tuple[Array, Array],
    missing: Mapping[str, Flags],
    estimated: Mapping[str, Flags],
    typical_only: Flags | None = None,
) -> Judged:
    worst, best = slacks
    n = len(worst)
    short_of = {key: flags for key, flags in missing.items() if flags.any()}
    lacking = np.logical_or.reduce(list(short_of.values())) if short_of else np.zeros(n, dtype=bool)
    unknown = lacking | np.isnan(worst)
    typical = np.zeros(n, dtype=bool) if typical_only is None else typical_only
    with np.errstate(invalid="ignore"):
        falls = ~unknown & (best < 1)
        meets = ~unknown & (worst >= 1) & ~typical
    verdict = np.where(meets, MEETS, np.where(falls, FALLS_SHORT, CANNOT_TELL))
    # A limit that is missed with every estimate at its best is missed by at least that much.
    slack = np.where(meets | falls, worst, np.nan)
    used = {name: flags & ~lacking for name, flags in estimated.items() if (flags & ~lacking).any()}
    return Judged(
        about, np.ones(n, dtype=bool), verdict, slack, np.where(lacking, np.nan, worst), short_of, used, typical
    )


def times_over(have: Array | float, need: Array | float) -> Array:
    """How many times over: never below 0, 999 at most."""
    with np.errstate(all="ignore"):
        over: Array = np.clip(np.asarray(have) / need, 0.0, MOST_SLACK)
    return over


def _sheet_and_bench(known: Silence, n: int, esr: bool = True) -> dict[str, Flags]:
    missing = {key: np.full(n, lacking) for key, lacking in known.bench_keys.items() if key != "circuit.swing_v"}
    return missing | ({"esr_ohm": known.esr} if esr else {})


def _gain(key: str, columns: Columns, bench: Bench, reckoned: Reckoned, known: Silence) -> Judged:
    over = reckoned.over[key]
    slack = times_over(over.low[:, :SHUNT_FLOOR], bench.requirement.margin)
    if key == "gain_ratio":  # a corner that cannot oscillate at any gain
        slack = np.where(over.some_without[:, :SHUNT_FLOOR], 0.0, slack)
    slacks = decide(slack, known.shunt_missing, np.zeros_like(known.shunt_missing))
    missing = _sheet_and_bench(known, len(columns)) | transconductance_missing(columns, bench)
    estimated = {"shunt_capacitance_pf": known.shunt_missing}
    return _judged(key, slacks, missing, estimated, known.esr_typical_only)


def _with_greatest_gain(judged: Judged, reckoned: Reckoned, known: Silence) -> Judged:
    """At or above the transconductance where oscillation stops again, in any corner: falls short.

    Where only some of the C0 that is estimated would bring it there it cannot be told.
    """
    most = reckoned.too_much_gain.max(axis=1)
    least = np.where(known.shunt_missing, reckoned.too_much_gain.min(axis=1), most)
    told = ~np.isnan(judged.worst)
    too_much, perhaps = (most >= 1) & told, (least < 1) & (judged.verdict != FALLS_SHORT)
    over = np.minimum(judged.worst, 1 / np.where(too_much, most, 1.0))
    judged.verdict = np.where(too_much, np.where(perhaps, CANNOT_TELL, FALLS_SHORT), judged.verdict)
    judged.slack = np.where(too_much, np.where(perhaps, np.nan, over), judged.slack)
    judged.worst = np.where(too_much, over, judged.worst)
    return judged


def ppm_slack(low: Array, high: Array, limits: tuple[float, float]) -> Array:
    """The lesser of upper limit / high (if above 0) and lower limit / low (if below 0)."""
    with np.errstate(all="ignore"):
        above = np.where(high > 0, limits[1] / high, MOST_SLACK)
        below = np.where(low < 0, limits[0] / low, MOST_SLACK)
        slack: Array = np.clip(np.minimum(above, below), 0.0, MOST_SLACK)
    return np.where(np.isnan(low) | np.isnan(high), np.nan, slack)


def _total(columns: Columns, bench: Bench, total: Total, known: Silence) -> Judged:
    limits = bench.requirement.limits_ppm
    assert limits is not None  # noqa: S101
    by_shunt = known.shunt_missing | known.shunt_loose
    slacks = decide(
        ppm_slack(total.low, total.high, limits),
        by_shunt,
        known.motional_estimated,
        ppm_slack(total.best_low, total.best_high, limits),
    )
    missing = _sheet_and_bench(known, len(columns), esr=False) | {
        "load_capacitance_pf": known.load,
        "esr_ohm": known.esr,
    }
    estimated = {"shunt_capacitance_pf": by_shunt, "motional_capacitance_ff": known.motional_estimated}
    for term in total.terms.values():
        missing |= term.missing
        estimated |= term.estimated
    return _judged("total_ppm", slacks, missing, estimated)


def _drive(columns: Columns, bench: Bench, reckoned: Reckoned, known: Silence) -> Judged:
    rated = spans(columns.offers.column("drive"))[MID][:, None, None]
    over = reckoned.over["drive_level_uw"]
    slack = times_over(rated, over.high[:, :SHUNT_FLOOR] * bench.requirement.drive_headroom)
    slacks = decide(slack, known.shunt_missing, np.zeros_like(known.shunt_missing))
    missing = _sheet_and_bench(known, len(columns)) | {"drive_level_uw": known.drive}
    missing["circuit.swing_v"] = np.full(len(columns), known.bench_keys["circuit.swing_v"])
    estimated = {"shunt_capacitance_pf": known.shunt_missing}
    return _judged("drive_level_uw", slacks, missing, estimated, known.esr_typical_only)


def _startup(columns: Columns, bench: Bench, reckoned: Reckoned, known: Silence) -> Judged:
    over = reckoned.over["startup_ms"]
    slack = times_over(bench.requirement.startup_ms or np.nan, over.high[:, :SHUNT_FLOOR])
    slack = np.where(over.some_without[:, :SHUNT_FLOOR], 0.0, slack)
    slacks = decide(slack, known.shunt_missing, known.motional_estimated)
    missing = _sheet_and_bench(known, len(columns)) | transconductance_missing(columns, bench)
    estimated = {"shunt_capacitance_pf": known.shunt_missing, "motional_capacitance_ff": known.motional_estimated}
    return _judged("startup_ms", slacks, missing, estimated, known.esr_typical_only)


def _range(columns: Columns, bench: Bench) -> Judged:
    """The part's range, and that of its stability, must hold the product's."""
    product = bench.requirement.temperature_c
    assert product is not None  # noqa: S101
    lot = columns.offers
    verdict = together(
        lambda band, operating: _range_verdict(band, operating, product),
        lot.column("stability_band"),
        lot.column("operating_range"),
    ).array(int, int)
    none = np.full(len(columns), np.nan)
    missing = {"operating_temperature_c": verdict == CANNOT_TELL}
    missing = {name: flags for name, flags in missing.items() if flags.any()}
    return Judged("operating_temperature_c", np.ones(len(columns), dtype=bool), verdict, none, none.copy(), missing)


def _range_verdict(band: Band | None, operating: Taken, product: Band) -> int:
    if band is not None and not covers(band, product):
        return FALLS_SHORT
    if not operating.stated:
        return CANNOT_TELL
    span = operating.span
    return MEETS if covers((span.low, span.high), product) else FALLS_SHORT


def of_part(judged: Mapping[str, Judged], n: int) -> Whole:
    """The part falls short if any requirement does, else cannot be told if any cannot, else meets."""
    verdict = np.full(n, MEETS)
    for one in judged.values():
        verdict = np.where(one.asked, np.minimum(verdict, one.verdict), verdict)
    return verdict
