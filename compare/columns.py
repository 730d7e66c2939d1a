"""Offers as columns: for each root quantity an array over parts, its estimate where the sheet is silent.

Axes are (setting, end, part); the ends are low, mid and high.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from functools import lru_cache
from typing import Any

import numpy as np
from numpy.typing import NDArray

from compare import motional
from compare.bench import Bench
from compare.circuit import Array
from compare.lot import C1_FROM, Coded, Lot, Separate, Whole, distinct, spans, together
from compare.offer import C1_ROUTES, Offer
from compare.prefix import FEMTO, PICO
from compare.stated import Taken

SHUNT_FROM = ("motional_capacitance_ff", "capacitance_ratio")
Flags = NDArray[np.bool_]
LOW, MID, HIGH = 0, 1, 2
ESTIMATED = len(C1_ROUTES)
"""Index of the route "no reading leads to C1"."""
DISAGREES = 0.1


@dataclass(frozen=True)
class Columns:
    """What is known of each part's crystal.

    Attributes
    ----------
    frequency_mhz, load_pf, overtone : (n,)
        `load_pf` inf for a series part, NaN where none is stated; `overtone` NaN where the mode is not known.
    esr_ohm, shunt_pf, motional_ff : (settings, 3, n)
        R1 or ESR as stated, C0, C1; low, mid, high.
    shunt_floor_pf : (n,)
        Low end of C0 for what is reckoned of frequency: an estimate where only a limit is stated, else C0's own.
    shunt_missing, shunt_derived, shunt_loose, motional_estimated : (n,) bool
        C0 is estimated throughout, had from C1 and C0/C1, or stated as a limit alone; C1 is estimated.
    route : (n,) int
        Index into C1_ROUTES of the reading that C1 comes from; ESTIMATED where none leads to it.
    other_routes_ff : (routes, n)
        C1 by every other stated value, for the check.
    """

    offers: Lot
    frequency_mhz: Array
    load_pf: Array
    overtone: Array
    esr_ohm: Array
    shunt_pf: Array
    shunt_floor_pf: Array
    shunt_missing: Flags
    shunt_derived: Flags
    shunt_loose: Flags
    motional_ff: Array
    motional_estimated: Flags
    route: Whole
    other_routes_ff: Array
    shunt_basis: Coded[str]
    motional_basis: Coded[str]

    def __len__(self) -> int:
        return len(self.offers)

    def take(self, which: Sequence[int] | Whole) -> Columns:
        """The columns of some of the parts, by index."""
        index = np.asarray(which, dtype=int)
        picked: dict[str, Any] = {
            name: value[..., index] if isinstance(value, np.ndarray) else value.take(index)
            for name, value in vars(self).items()
        }
        return Columns(**picked)


def make_columns(offers: Sequence[Offer], bench: Bench) -> Columns:
    """Columns of the offers, estimates filled in."""
    lot, settings = Separate.of(offers), range(len(bench.settings))
    n = len(lot)
    frequency = np.full(n, bench.requirement.frequency_mhz)
    load = spans(lot.column("load"))[MID]
    esr = np.stack([spans(lot.at(s, "esr")) for s in settings])
    shunt = np.stack([spans(lot.at(s, "shunt")) for s in settings])
    guess, shunt_basis = _shunt_estimates(lot, bench)
    from_ratio = np.stack([_shunt_from_ratio(lot, s) for s in settings])
    shunt_derived = np.isnan(shunt[0, MID]) & ~np.isnan(from_ratio[0, MID])
    shunt = np.where(np.isnan(shunt), from_ratio, shunt)
    missing = np.isnan(shunt[0, MID])
    loose = lot.at(0, "shunt").array(lambda taken: taken.limit_alone, bool)
    shunt = np.where(np.isnan(shunt), guess, shunt)
    floor = np.where(loose, np.minimum(guess[LOW], shunt[0, LOW]), shunt[:, LOW].min(axis=0))
    routes = [_by_every_route(lot, s, (frequency, load), (esr[s], shunt[s], floor)) for s in settings]
    route = _first_known(routes[0][:, MID])
    known_shunt = ~(missing | loose)
    c1 = np.stack([_along(route, by_route, routes[0]) for by_route in routes])
    silent = np.logical_or.reduce(np.isnan(c1), axis=(0, 1))
    c1_guess, motional_basis = _motional_estimates(lot, bench, shunt[0], known_shunt, silent)
    by_shunt = np.isin(route, [C1_ROUTES.index("capacitance_ratio"), C1_ROUTES.index("pulling_sensitivity_ppm_per_pf")])
    return Columns(
        offers=lot,
        frequency_mhz=frequency,
        load_pf=load,
        overtone=lot.column("overtone").array(lambda order: order or np.nan),
        esr_ohm=esr,
        shunt_pf=shunt,
        shunt_floor_pf=floor,
        shunt_missing=missing,
        shunt_derived=shunt_derived,
        shunt_loose=loose & ~missing,
        motional_ff=np.where(np.isnan(c1), c1_guess, c1),
        motional_estimated=(route == ESTIMATED) | (by_shunt & ~known_shunt),
        route=route,
        other_routes_ff=routes[0][:, MID].reshape(len(C1_ROUTES), n),
        shunt_basis=shunt_basis,
        motional_basis=motional_basis,
    )


Ends = tuple[float, float, float]


def _shunt_estimates(lot: Lot, bench: Bench) -> tuple[Array, Coded[str]]:
    """(3, n) C0 as it is likely to be, nothing above a limit that is stated, and what each rests on."""
    frequency = bench.requirement.frequency_mhz

    def of(cut: str | None, package: str | None, shunt: Taken) -> tuple[Ends, str]:
        return _shunt_estimate(cut, frequency, package, _limit(shunt))

    found = together(of, lot.column("cut"), lot.column("package"), lot.at(0, "shunt"))
    return found.array(lambda one: one[0]).reshape(3, -1), Coded([basis for _, basis in found.values], found.codes)


def _limit(shunt: Taken) -> float:
    return shunt.span.high if shunt.limit_alone else np.inf


@lru_cache(maxsize=4096)
def _shunt_estimate(cut: str | None, frequency_mhz: float, package: str | None, limit_pf: float) -> tuple[Ends, str]:
    guess = motional.estimate_shunt_capacitance_pf(cut, frequency_mhz, package, limit_pf)
    return (float(guess.low), float(guess.mid), float(guess.high)), guess.basis


def _motional_estimates(lot: Lot, bench: Bench, shunt: Array, known: Flags, wanted: Flags) -> tuple[Array, Coded[str]]:
    """(3, n) C1 as it is likely to be, and what each rests on; NaN and nothing for parts of which it is not wanted.

    A mode that is not known may be either of two.
    """
    guess, codes, said = np.full((3, len(lot)), np.nan), np.zeros(len(lot), dtype=int), [""]
    which = np.flatnonzero(wanted)
    if not which.size:
        return guess, Coded(said, codes)
    own = lot.take(which)
    cuts, packages, overtones = (own.column(name) for name in ("cut", "package", "overtone"))
    limits = own.at(0, "shunt").array(_limit)
    by_limit = np.unique(np.where(known[which], np.inf, limits), return_inverse=True)[1]
    first, group = distinct(cuts.codes, packages.codes, overtones.codes, known[which].astype(int), by_limit)
    for number, members in enumerate(_groups(group, len(first))):
        at = int(first[number])
        rows = which[members]
        c0 = (shunt[LOW, rows], shunt[MID, rows], shunt[HIGH, rows]) if known[which[at]] else None
        of_part = (cuts[at], bench.requirement.frequency_mhz, packages[at])
        orders = (overtones[at],) if overtones[at] else (1, 3)
        guesses = [_motional_estimate(order, of_part, float(limits[at]), c0) for order in orders]
        guess[LOW, rows] = np.minimum.reduce([one.low for one in guesses])
        guess[MID, rows] = guesses[0].mid
        guess[HIGH, rows] = np.maximum.reduce([one.high for one in guesses])
        codes[rows] = len(said)
        said.append("; or ".join(one.basis for one in guesses))
    return guess, Coded(said, codes)


def _groups(codes: Whole, count: int) -> list[Whole]:
    """The places of each code, in order."""
    order = np.argsort(codes, kind="stable")
    return np.split(order, np.cumsum(np.bincount(codes, minlength=count))[:-1])


def _motional_estimate(
    overtone: int,
    of_part: tuple[str | None, float, str | None],
    limit_pf: float,
    shunt_pf: tuple[Array, Array, Array] | None,
) -> motional.Estimate:
    cut, frequency_mhz, package = of_part
    return motional.estimate_motional_capacitance_ff(
        cut, overtone, frequency_mhz, package, shunt_capacitance_pf=shunt_pf, limit_pf=limit_pf
    )


def _shunt_from_ratio(lot: Lot, setting: int) -> Array:
    """(3, n) C0 = C1 (C0/C1), where both are stated."""
    stated = [spans(lot.at(setting, C1_FROM[name])) for name in SHUNT_FROM]
    shunt: Array = stated[0] * stated[1] * FEMTO / PICO
    return shunt


def _first_known(by_route: Array) -> Whole:
    """Index of the first route that leads to a value; ESTIMATED where none does."""
    known = np.isfinite(by_route)
    return np.where(known.any(axis=0), known.argmax(axis=0), ESTIMATED)


def _along(route: Whole, here: Array, at_room: Array) -> Array:
    """(3, n) of the chosen route; where this setting has no value for it, the one at room."""
    none = np.full((1, *here.shape[1:]), np.nan)
    parts = np.arange(here.shape[-1])
    own = np.concatenate([here, none])[route, :, parts].T
    room = np.concatenate([at_room, none])[route, :, parts].T
    return np.where(np.isnan(own), room, own)


def _by_every_route(
    lot: Lot, setting: int, of_part: tuple[Array, Array], at_setting: tuple[Array, Array, Array]
) -> Array:
    """C1 in fF by each route, (routes, 3, n); NaN where the route is not stated or lacks what it needs.

    The ends go with those of what each route divides by, so that the low end is the least that the readings allow.
    """
    frequency, load = of_part
    esr, shunt, floor = at_setting
    low_shunt = np.stack([floor, shunt[MID], shunt[HIGH]])
    no_load = np.where(np.isnan(load), np.inf, load)  # a part in ten thousand of what L1 comes to
    stated = {name: spans(lot.at(setting, key)) for name, key in C1_FROM.items()}
    pulling = np.abs(stated["pulling_sensitivity_ppm_per_pf"])
    with np.errstate(all="ignore"):
        routes = [
            stated["motional_capacitance_ff"],
            motional.motional_capacitance_from_inductance_ff(
                stated["motional_inductance_mh"][::-1], frequency, low_shunt, no_load
            ),
            motional.motional_capacitance_from_ratio_ff(stated["capacitance_ratio"][::-1], low_shunt),
            motional.motional_capacitance_from_pulling_ff(np.sort(pulling, axis=0), low_shunt, load),
            motional.motional_capacitance_from_quality_ff(
                stated["quality_factor"][::-1], esr[::-1], frequency, low_shunt, no_load
            ),
        ]
        found = np.stack(routes)
        found = np.where(np.isfinite(found) & (found > 0), found, np.nan)
    # C0 counts the other way than L1, if a thousand times less: an exact L1 has the ends of C0 turned round.
    return np.stack([found.min(axis=1), found[:, MID], found.max(axis=1)], axis=1)
