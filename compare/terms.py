"""The terms of the frequency budget, part by part: make, temperature, ageing and load error, as columns.

Each term has the ends that stand for the worst case, and those that it would have if every estimate in it turned out at
its best: a verdict that would differ between the two cannot be given.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field

import numpy as np

from compare import budget, motional
from compare.bench import Bench
from compare.circuit import Array
from compare.columns import HIGH, LOW, MID, Columns, Flags
from compare.corners import Reckoned
from compare.lot import Coded, Lot, spans, together
from compare.stated import Taken


@dataclass(frozen=True)
class Term:
    """One cause of frequency error: (n,) ppm; NaN where the part does not state what it takes.

    `best_low` and `best_high` are the ends with every estimate at its best. `missing` and `estimated` give the fields,
    each with the parts that it holds for.
    """

    low: Array
    mid: Array
    high: Array
    best_low: Array
    best_high: Array
    missing: Mapping[str, Flags] = field(default_factory=dict)
    estimated: Mapping[str, Flags] = field(default_factory=dict)

    @classmethod
    def plain(cls, span: Array, missing: Mapping[str, Flags]) -> Term:
        return cls(span[LOW], span[MID], span[HIGH], span[LOW], span[HIGH], missing)


def make_term(columns: Columns, bench: Bench, *, loosest: bool = False) -> Term:
    """Make tolerance; where production trims each unit, what the trim leaves."""
    trim = bench.requirement.trim_step_ppm
    if trim is not None:
        return Term.plain(np.tile(np.array([[-trim], [0.0], [trim]]), len(columns)), {})
    span = spans(_at_option(columns.offers, "tolerance", loosest))
    return Term.plain(span, {"frequency_tolerance_ppm": np.isnan(span[MID])})


def _at_option(lot: Lot, name: str, loosest: bool) -> Coded[Taken]:
    taken: Coded[Taken] = lot.column(name)
    if not loosest:
        return taken
    return together(lambda own, loose: own if loose is None else loose, taken, lot.column(f"loosest_{name}"))


def reckoned_ranges_c(lot: Lot, bench: Bench) -> Array:
    """(2, n) the temperatures reckoned over: the product's so far as the part's own range goes; NaN where not known."""
    return lot.column("operating_range").array(lambda taken: _reckoned_range_c(taken, bench)).reshape(2, -1)


def _reckoned_range_c(operating: Taken, bench: Bench) -> tuple[float, float]:
    product = bench.requirement.temperature_c
    own = (operating.span.low, operating.span.high) if operating.stated else None
    if product is None:
        return own or (np.nan, np.nan)
    if own is None:
        return product
    low, high = max(product[0], own[0]), min(product[1], own[1])
    return (low, high) if low <= high else (np.nan, np.nan)


def temperature_term(columns: Columns, bench: Bench, *, loosest: bool = False) -> Term:
    """A tuning fork's parabola over the range; otherwise the stability as stated."""
    stability = spans(_at_option(columns.offers, "stability", loosest))
    fork = columns.offers.column("fork").array(bool, bool)
    parabola = _parabola_term(columns.offers, bench)

    def merged(of_fork: Array, of_cut: Array) -> Array:
        return np.where(fork, of_fork, of_cut)

    no_range = fork & np.isnan(parabola.low)
    missing = {"frequency_stability_ppm": ~fork & np.isnan(stability[MID]), "operating_temperature_c": no_range}
    return Term(
        low=merged(parabola.low, stability[LOW]),
        mid=merged(parabola.mid, stability[MID]),
        high=merged(parabola.high, stability[HIGH]),
        best_low=merged(parabola.best_low, stability[LOW]),
        best_high=merged(parabola.best_high, stability[HIGH]),
        missing=missing,
        estimated={name: fork & flags for name, flags in parabola.estimated.items()},
    )


def fork_spans(lot: Lot) -> tuple[Array, Array]:
    """(3, n) parabolic coefficient, negative, and turnover temperature; estimated where the sheet is silent."""
    turnover, _ = _stated_or_estimated(spans(lot.column("turnover")), motional.estimate_turnover_temperature_c())
    curve, _ = _stated_or_estimated(
        -np.abs(spans(lot.column("parabolic"))), motional.estimate_parabolic_coefficient_ppm_per_c2()
    )
    return np.sort(curve, axis=0), turnover


def _parabola_term(lot: Lot, bench: Bench) -> Term:
    low_c, high_c = reckoned_ranges_c(lot, bench)
    curve, turnover = fork_spans(lot)
    no_curve = np.isnan(spans(lot.column("parabolic"))[MID])
    no_turnover = np.isnan(spans(lot.column("turnover"))[MID])
    over = (low_c, high_c)
    low, high = budget.parabola_ppm_range(over, (curve[LOW], curve[HIGH]), (turnover[LOW], turnover[HIGH]))
    _, mid = budget.parabola_ppm_range(over, (curve[MID], curve[MID]), (turnover[MID], turnover[MID]))
    best = np.full_like(low, -np.inf)
    best_high = high.copy()
    middle = np.clip((low_c + high_c) / 2, turnover[LOW], turnover[HIGH])
    for centre in (turnover[LOW], turnover[HIGH], middle):
        at = [np.where(no_turnover, centre, turnover[end]) for end in (LOW, HIGH)]
        shallow = [np.where(no_curve, curve[HIGH], curve[end]) for end in (LOW, HIGH)]
        one_low, one_high = budget.parabola_ppm_range(over, (shallow[0], shallow[1]), (at[0], at[1]))
        better = one_low > best
        best, best_high = np.where(better, one_low, best), np.where(better, one_high, best_high)
    estimated = {"turnover_temperature_c": no_turnover, "parabolic_coefficient_ppm_per_c2": no_curve}
    return Term(low, mid, high, best, best_high, {}, estimated)


def _stated_or_estimated(stated: Array, guess: motional.Estimate) -> tuple[Array, Flags]:
    silent = np.isnan(stated[MID])
    ends = np.array([[guess.low], [guess.mid], [guess.high]], dtype=float)
    return np.where(silent, ends, stated), silent


def ageing_term(columns: Columns, bench: Bench) -> Term:
    """Ageing carried from the years stated to those asked; an estimate where none is stated, at its best nothing."""
    asked = bench.requirement
    stated, silent = _stated_or_estimated(
        spans(columns.offers.column("ageing")), motional.estimate_first_year_ageing_ppm()
    )
    years = columns.offers.column("ageing_years").array(float)
    span = stated * budget.ageing_factor(asked.ageing_rule, years, asked.years)
    best = np.where(silent, 0.0, span)
    return Term(span[LOW], span[MID], span[HIGH], best[LOW], best[HIGH], {}, {"ageing_ppm": silent})


@dataclass(frozen=True)
class Total:
    """All terms together, (n, C0 ends, C1 ends); `best_*` with the estimates in the terms at their best."""

    low: Array
    high: Array
    best_low: Array
    best_high: Array
    mid: Array
    terms: Mapping[str, Term]
    load_low: Array
    load_high: Array


def total_ppm(columns: Columns, bench: Bench, reckoned: Reckoned, *, loosest: bool = False) -> Total:
    """The sums of the ends. With a trim the nominal load error gives way to it and its spread remains."""
    terms = {
        "make": make_term(columns, bench, loosest=loosest),
        "temperature": temperature_term(columns, bench, loosest=loosest),
        "ageing": ageing_term(columns, bench),
    }
    load = reckoned.over["load_error_ppm"]
    nominal = reckoned.nominal["load_error_ppm"]
    trimmed = bench.requirement.trim_step_ppm is not None
    offset = nominal if trimmed else np.zeros_like(nominal)
    load_low, load_high = load.low - offset[:, None, None], load.high - offset[:, None, None]

    def summed(name: str) -> Array:
        total: Array = sum((getattr(term, name) for term in terms.values()), np.zeros(len(columns)))
        return total

    return Total(
        low=summed("low")[:, None, None] + load_low,
        high=summed("high")[:, None, None] + load_high,
        best_low=summed("best_low")[:, None, None] + load_low,
        best_high=summed("best_high")[:, None, None] + load_high,
        mid=summed("mid") + nominal - offset,
        terms=terms,
        load_low=load_low,
        load_high=load_high,
    )
