"""Likely spread beside the worst case: a sum of squares about the nominal, and boards drawn at random.

Both are options that a person names; verdicts rest on the corners alone. Each says what it takes for granted.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Any, Literal

import numpy as np

from compare import budget
from compare.bench import Bench
from compare.circuit import Array
from compare.columns import HIGH, LOW, MID, Columns, Flags
from compare.corners import BY_SHUNT_FLOOR, analyse_nominal, limiters_of
from compare.draws import HELD, SHAPES, Draws, Shape, draw, drawn_numbers
from compare.find import Offers
from compare.reckoning import Reckoning, reckon_sheets
from compare.result import NEEDS, OPEN_END
from compare.roots import SHUNT_FLOOR, moved_alone
from compare.terms import Term, ageing_term, fork_spans, make_term, reckoned_ranges_c, temperature_term
from extract.model import SpecSheet

Method = Literal["rss", "draws"]
METHODS: dict[Method, str] = {"rss": "root-sum-square", "draws": "boards drawn at random"}
REVIEW_BOARDS = 10_000


@dataclass(frozen=True)
class Spread:
    """Low, mid and high of each key, (3, n); NaN where there is none or no bound. And what was taken for granted."""

    numbers: Mapping[str, Array]
    assumptions: tuple[str, ...]


@dataclass
class _Squares:
    """One key about its nominal: sums of the squares of what each root does below and above it, (n,) each."""

    mid: Array
    below: Array
    above: Array
    some_without: Flags

    @classmethod
    def of(cls, key: str, values: Array, ends_of: Sequence[tuple[str, tuple[int, int]]]) -> _Squares:
        """From (n, k) values: column 0 the nominal, the others as `ends_of` lists them for each root."""
        mid = values[:, 0]
        below, above = np.zeros_like(mid), np.zeros_like(mid)
        for name, columns in ends_of:
            if name == SHUNT_FLOOR and key not in BY_SHUNT_FLOOR:
                continue
            moved = values[:, list(columns)] - mid[:, None]
            below += np.fmin(np.fmin.reduce(moved, axis=1), 0.0) ** 2
            above += np.fmax(np.fmax.reduce(moved, axis=1), 0.0) ** 2
        without: Flags = np.logical_or.reduce(np.isnan(values), axis=1)
        return cls(mid, below, above, without)

    @property
    def ends(self) -> tuple[Array, Array]:
        return self.mid - np.sqrt(self.below), self.mid + np.sqrt(self.above)


def root_sum_square(columns: Columns, bench: Bench) -> Spread:
    """Each root input moved alone to both ends, the squares of what that does added below and above the nominal.

    Parameters
    ----------
    columns, bench
        n parts, and the circuit whose tolerances move.

    Returns
    -------
    Spread
        All keys of the review. Never wider than the corners save where two inputs undo one another. Each condition of
        the bench and each limiter that may hold has its own nominal and its own squares, and the widest ends count.
    """
    numbers: dict[str, Array] = {}
    budget_terms = _budget_squares(columns, bench)
    for number in range(len(bench.settings)):
        for limiter in limiters_of(bench.settings[number].circuit):
            moved = moved_alone(columns, bench, number, limiter)
            for key, values in moved.found.items():
                squares = _Squares.of(key, values, moved.ends_of)
                _widen(numbers, key, *squares.ends, squares)
                if key == "load_error_ppm":
                    _widen(numbers, "total_ppm", *budget_terms.around(squares), squares)
    mids = analyse_nominal(columns, bench, limiters_of(bench.settings[0].circuit)[0])
    for key, ends in numbers.items():
        ends[MID] = budget_terms.mid + mids["load_error_ppm"] if key == "total_ppm" else mids[key]
    numbers["allowed_esr_ohm"] = numbers["greatest_esr_ohm"] / bench.requirement.margin
    span = columns.motional_ff
    numbers["motional_capacitance_ff"] = np.stack([span[:, LOW].min(axis=0), span[0, MID], span[:, HIGH].max(axis=0)])
    return Spread(numbers, (*RSS_ASSUMPTIONS, *taken_for_granted(columns, bench)))


RSS_ASSUMPTIONS = (
    "root-sum-square: the inputs know nothing of one another, and each tolerance stands for the same number of "
    "standard deviations, so that the result holds as large a share of boards as the tolerances do",
    "each input is moved alone about the nominal: what two of them do together is not in it",
    "conditions of the bench and the limiter of the amplitude are no chance: the widest of them counts",
)


def _widen(numbers: dict[str, Array], key: str, low: Array, high: Array, squares: _Squares) -> None:
    ends = np.stack([low, squares.mid, high])
    if key in OPEN_END:
        ends[OPEN_END[key]] = np.where(squares.some_without, np.nan, ends[OPEN_END[key]])
    if key not in numbers:
        numbers[key] = ends
        return
    known = numbers[key]
    pick_low, pick_high = (np.minimum, np.maximum) if key in OPEN_END else (np.fmin, np.fmax)
    known[LOW], known[HIGH] = pick_low(known[LOW], ends[LOW]), pick_high(known[HIGH], ends[HIGH])


@dataclass(frozen=True)
class _BudgetSquares:
    """What the budget adds to the load error: a part that is certain, and squares. (n,) each."""

    mid: Array
    low: Array
    high: Array
    below: Array
    above: Array

    def around(self, load: _Squares) -> tuple[Array, Array]:
        """Low and high of the total with the squares of the load error added."""
        error = load.mid
        return (
            self.low + error - np.sqrt(self.below + load.below),
            self.high + error + np.sqrt(self.above + load.above),
        )


def _budget_squares(columns: Columns, bench: Bench) -> _BudgetSquares:
    """Make, ageing, a stability as stated: squares. A fork's parabola is certain, the spread of its values is not."""
    make, ageing, temperature = make_term(columns, bench), ageing_term(columns, bench), temperature_term(columns, bench)
    fork = columns.offers.column("fork").array(bool, bool)
    certain_low, certain_high, fork_below, fork_above = _parabola_squares(columns, bench)
    stated = [_squares_of(term) for term in (make, ageing)]
    below, above = _squares_of(temperature)
    offset = np.zeros(len(columns))
    if bench.requirement.trim_step_ppm is not None:
        offset = analyse_nominal(columns, bench, limiters_of(bench.settings[0].circuit)[0])["load_error_ppm"]
    centre = make.mid + ageing.mid - offset
    return _BudgetSquares(
        mid=centre + temperature.mid,
        low=centre + np.where(fork, certain_low, temperature.mid),
        high=centre + np.where(fork, certain_high, temperature.mid),
        below=np.where(fork, fork_below, below) + sum(squares for squares, _ in stated),
        above=np.where(fork, fork_above, above) + sum(squares for _, squares in stated),
    )


def _squares_of(term: Term) -> tuple[Array, Array]:
    return (term.mid - term.low) ** 2, (term.high - term.mid) ** 2


def _parabola_squares(columns: Columns, bench: Bench) -> tuple[Array, Array, Array, Array]:
    """Ends of the nominal parabola over the range, and squares of what each of its values does to them; (n,) each."""
    k, centre = fork_spans(columns.offers)
    range_c = reckoned_ranges_c(columns.offers, bench)

    def ends(coefficient: Array, turnover: Array) -> tuple[Array, Array]:
        return budget.parabola_ppm_range((range_c[0], range_c[1]), (coefficient, coefficient), (turnover, turnover))

    low, high = ends(k[MID], centre[MID])
    below, above = np.zeros_like(low), np.zeros_like(high)
    for moved in (((k[LOW], centre[MID]), (k[HIGH], centre[MID])), ((k[MID], centre[LOW]), (k[MID], centre[HIGH]))):
        found = [ends(*one) for one in moved]
        below += np.minimum(np.minimum.reduce([one for one, _ in found]) - low, 0.0) ** 2
        above += np.maximum(np.maximum.reduce([one for _, one in found]) - high, 0.0) ** 2
    return low, high, below, above


def taken_for_granted(columns: Columns, bench: Bench) -> tuple[str, ...]:
    """What a spread of these parts rests on beside its method."""
    said = []
    if any(not np.array_equal(columns.esr_ohm[0, end], columns.esr_ohm[0, HIGH], equal_nan=True) for end in (LOW, MID)):
        said.append("the ESR lies within what the sheet states of it")
    if (columns.esr_ohm[0, LOW] == columns.esr_ohm[0, HIGH]).any():
        said.append("where the sheet states only a greatest ESR every unit has it")
    if (columns.motional_estimated | columns.shunt_missing | columns.shunt_loose).any():
        said.append(
            "an interval that is an estimate is taken like a tolerance: what rests on it is no more than a guess"
        )
    if isinstance(bench.circuit.transconductance_ms, float):
        said.append("the transconductance is the one given, on every board")
    return tuple(said)


def add_spread(
    result: dict[str, Any],
    sheets: Sequence[SpecSheet],
    bench: Bench,
    method: Method,
    *,
    boards: int = REVIEW_BOARDS,
    seed: int = 1,
    shape: Shape = "uniform",
) -> dict[str, Any]:
    """The review with `"spread"` in each part's entry; `result` is what `review.review` gave for the same sheets.

    `"spread"` holds `method`, `numbers` (key -> low, mid, high) and `assumptions`; with draws also `boards`, `seed`,
    `shape` and `falls_short` (requirement -> boards that fall short, their share, and the 95 % interval of that share).
    Nothing in it decides a verdict.
    """
    reckoning = reckon_sheets(sheets, bench)
    if isinstance(reckoning, Offers):
        return result
    spreads = spreads_of(reckoning, method, boards=boards, seed=seed, shape=shape)
    reviews = [one | {"spread": spread} for one, spread in zip(result["reviews"], spreads, strict=True)]
    return result | {"reviews": reviews}


def spreads_of(
    reckoning: Reckoning, method: Method, *, boards: int = REVIEW_BOARDS, seed: int = 1, shape: Shape = "uniform"
) -> list[dict[str, Any]]:
    """One `"spread"` for each part of the reckoning, in its order; JSON-ready."""
    columns, bench = reckoning.columns, reckoning.bench
    if method == "rss":
        spread = root_sum_square(columns, bench)
        return [_entry(method, spread.numbers, spread.assumptions, reckoning, at) for at in range(len(columns))]
    drawn = draw(columns, bench, boards, seed, shape)
    numbers = drawn_numbers(columns, bench, boards, seed, shape)
    assumptions = (*draws_assumptions(drawn), *taken_for_granted(columns, bench))
    return [
        _entry(method, numbers, assumptions, reckoning, at)
        | {"boards": boards, "seed": seed, "shape": shape, "falls_short": _falls_short(drawn, at)}
        for at in range(len(columns))
    ]


def draws_assumptions(drawn: Draws) -> tuple[str, ...]:
    """What draws take for granted, in words."""
    return (
        f"{drawn.boards} boards drawn from seed {drawn.seed}: {SHAPES[drawn.shape]}; no input knows of another",
        "each part is put on the same boards; a board falls short if it does in any condition or for either limiter",
        f"low and high hold {HELD:.0%} of the boards, mid is the median",
        "what a real lot is like nobody has stated: the tolerances are limits, not distributions",
    )


def _entry(
    method: Method, numbers: Mapping[str, Array], assumptions: Sequence[str], reckoning: Reckoning, at: int
) -> dict[str, Any]:
    return {
        "method": METHODS[method],
        "numbers": {key: _shown(numbers[key][:, at], reckoning, key, at) for key in NEEDS if key in numbers},
        "assumptions": list(assumptions),
    }


def _shown(ends: Array, reckoning: Reckoning, key: str, at: int) -> dict[str, float | None]:
    """Nothing where the review itself has no such number, and no end beyond the worst case."""
    number = reckoning.numbers[key]
    gone = any(flags[at] for flags in number.lacking.values())
    worst_low, _, worst_high = number.ends[:, at]
    ends = np.where(np.isfinite(ends), np.fmin(np.fmax(ends, worst_low), worst_high), np.nan)
    return {
        name: None if gone or not np.isfinite(value) else float(value)
        for name, value in zip(("low", "mid", "high"), ends, strict=True)
    }


def _falls_short(drawn: Draws, at: int) -> dict[str, dict[str, float | int | None]]:
    found: dict[str, dict[str, float | int | None]] = {}
    for about in drawn.short:
        low, high = (float(end[at]) for end in drawn.interval(about))
        known = bool(drawn.known[about][at])
        found[about] = {
            "boards": int(drawn.short[about][at]) if known else None,
            "share": float(drawn.share(about)[at]) if known else None,
            "low": low if known else None,
            "high": high if known else None,
        }
    return found
