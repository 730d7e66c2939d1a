"""From sheets and bench to columns of numbers and verdicts; what review and ranking share."""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace
from functools import partial
from typing import Any

import numpy as np

from compare.bench import Bench
from compare.circuit import Array
from compare.columns import MID, Columns, make_columns
from compare.corners import Reckoned, lossless_load_pf, nominal_r1_and_gm, reckon
from compare.explain import BenchWords, Subject, bench_words, how
from compare.find import Offers, find_offers
from compare.lot import Lot, Separate, Whole, together
from compare.offer import Band, Offer, fields_to_check
from compare.overtone import judge_mode
from compare.questions import question
from compare.reasons import Standing, budget_words, reasons
from compare.result import Number, numbers
from compare.sources import ageing_words, c0_words, c1_words, remarks
from compare.stated import Taken
from compare.terms import Total, total_ppm
from compare.verdict import (
    CANNOT_TELL,
    FALLS_SHORT,
    GAINS,
    MEETS,
    WORDS,
    Judged,
    judge,
    of_part,
    ppm_slack,
    silence,
)
from extract.model import SpecSheet

JUDGED = (*GAINS, "load_error_ppm", "drive_level_uw", "startup_ms")
"""The numbers over the corners that verdicts are made of."""


@dataclass(frozen=True)
class Reckoning:
    """Everything that is known of all parts in the circuit, a column each."""

    bench: Bench
    columns: Columns
    reckoned: Reckoned
    total: Total
    numbers: Mapping[str, Number]
    judged: Mapping[str, Judged]
    verdict: Whole
    loosest_slack: Array
    greatest_gm: Array
    """(n,) least transconductance of all corners above which oscillation stops again; not finite where none."""
    words: BenchWords
    notes: tuple[dict[str, Any], ...]

    def __len__(self) -> int:
        return len(self.columns)


def reckon_sheets(sheets: Sequence[SpecSheet], bench: Bench) -> Reckoning | Offers:
    """All parts that offer the frequency, reckoned together; the offers alone where there is none."""
    found = settled_offers(sheets, bench)
    return reckon_offers(found.offers, bench, found.notes) if len(found.offers) else found


def settled_offers(sheets: Sequence[SpecSheet], bench: Bench) -> Offers:
    """All parts that offer the frequency, each with its load settled, and what is to be noted."""
    found = find_offers(sheets, bench)
    return Offers(choose_loads(found.offers, bench), [*found.notes, *bench_notes(bench)])


def reckon_offers(offers: Sequence[Offer], bench: Bench, notes: Sequence[dict[str, Any]] = ()) -> Reckoning:
    """Columns, corners, numbers and verdicts of offers whose options are settled."""
    columns = make_columns(offers, bench)
    reckoned = reckon(columns, bench)
    judged, total = judge_all(columns, bench, reckoned)
    known = silence(columns, bench)
    return Reckoning(
        bench=bench,
        columns=columns,
        reckoned=reckoned,
        total=total,
        numbers=numbers(columns, bench, reckoned, total, known),
        judged=judged,
        verdict=of_part(judged, len(columns)),
        loosest_slack=_loosest_slack(columns, bench, reckoned),
        greatest_gm=reckoned.low("greatest_transconductance_ms"),
        words=bench_words(bench),
        notes=tuple(notes),
    )


def judge_all(columns: Columns, bench: Bench, reckoned: Reckoned) -> tuple[dict[str, Judged], Total]:
    """Every requirement, those of mode, least ESR and rating among them, in the order in which they are told."""
    judged, total = judge(columns, bench, reckoned)
    more = {
        "mode": judge_mode(columns, bench, silence(columns, bench)),
        "esr_ohm": judge_least_esr(columns, bench),
        "rating": judge_rating(columns, bench),
    }
    return judged | {key: one for key, one in more.items() if one is not None}, total


def bench_notes(bench: Bench) -> list[dict[str, Any]]:
    """What the bench leaves open: defaults taken, ppm not judged."""
    said = list(bench.taken)
    asked = bench.requirement
    if asked.use is not None and asked.limits_ppm is None:
        said.append(f"requirement.use {asked.use} sets no single limit and total_ppm is not given: ppm is not judged")
    return [{"level": "info", "message": text, "where": None} for text in said]


Choice = tuple[tuple[float, ...], Band | None]
"""The loads that a part may be ordered with: a list, or a range."""


def choose_loads(offers: Sequence[Offer], bench: Bench) -> Lot:
    """Each offer with its load settled: the option with the least worst-case load error in this circuit."""
    lot = Separate.of(offers)
    choices = lot.column("load_choice")
    open_ones = np.flatnonzero(choices.array(lambda choice: choice != ((), None), bool))
    nominal = lossless_load_pf(bench.settings[0].circuit)
    if not open_ones.size or math.isnan(nominal):
        return lot
    guessed = lot.take(open_ones).ordered([(_nearest(choices[at], nominal), "") for at in open_ones.tolist()], bench)
    columns = make_columns(guessed, bench)
    reckoned = reckon(columns, bench, wanted=("circuit_load_pf",))
    ends = [reckoned.low("circuit_load_pf"), reckoned.nominal["circuit_load_pf"], reckoned.high("circuit_load_pf")]
    # No ESR, no steady state: the lossless load serves for choosing.
    circuit = np.where(np.isnan(ends[MID]), nominal, np.stack(ends)).T.tolist()
    loads: list[tuple[float, str] | None] = [None] * len(lot)
    for at, (low, mid, high), shunt_pf in zip(
        open_ones.tolist(), circuit, columns.shunt_pf[0, MID].tolist(), strict=True
    ):
        loads[at] = _best_load(choices[at], (low, mid, high), shunt_pf)
    return lot.ordered(loads, bench)


def _nearest(choice: Choice, load_pf: float) -> float:
    options, band = choice
    if band is not None:
        return min(max(load_pf, band[0]), band[1])
    return min(options, key=lambda option: abs(option - load_pf))


def _best_load(choice: Choice, circuit: tuple[float, float, float], shunt_pf: float) -> tuple[float, str]:
    """The rated load to order, and why. Whatever C1 is, it scales every option's error alike."""
    low, mid, high = circuit
    options, band = choice
    if band is not None:
        nearest = _nearest(choice, mid)
        inside = "the circuit's own nominal load" if nearest == mid else "the end of the range nearest to the circuit's"
        return nearest, f"a load of {nearest:.4g} pF taken of {band[0]:g} to {band[1]:g}, {inside}"

    def error(option: float) -> float:
        return max(abs(1 / (shunt_pf + end) - 1 / (shunt_pf + option)) for end in (low, high))

    best = min(options, key=error)
    listed = ", ".join(f"{option:g}" for option in options)
    return best, f"a load of {best:g} pF taken of {listed}: the least worst-case load error in this circuit"


def _loosest_slack(columns: Columns, bench: Bench, reckoned: Reckoned) -> Array:
    """Slack of total_ppm with every option at its loosest; NaN where the part leaves no choice."""
    limits = bench.requirement.limits_ppm
    loosest = (columns.offers.column("loosest_tolerance"), columns.offers.column("loosest_stability"))
    choice = together(lambda *options: any(one is not None for one in options), *loosest).array(bool, bool)
    if limits is None or not choice.any():
        return np.full(len(columns), np.nan)
    total = total_ppm(columns, bench, reckoned, loosest=True)
    slack: Array = ppm_slack(total.low, total.high, limits).min(axis=(1, 2))
    return np.where(choice, slack, np.nan)


def judge_least_esr(columns: Columns, bench: Bench) -> Judged | None:
    """The part's least ESR against the least that the IC allows; only a greatest one stated is "cannot tell"."""
    floors = [s.circuit.rating.esr_min_ohm for s in bench.settings if s.circuit.rating is not None]
    asked = [floor for floor in floors if floor is not None]
    if not asked:
        return None
    by_setting = [columns.offers.at(number, "esr") for number in range(len(bench.settings))]
    verdict = together(lambda *taken: _least_esr_verdict(taken, max(asked)), *by_setting).array(int, int)
    none = np.full(len(columns), np.nan)
    cannot = verdict == CANNOT_TELL
    missing = {"least_esr_ohm": cannot} if cannot.any() else {}
    return Judged("esr_ohm", np.ones(len(columns), dtype=bool), verdict, none, none.copy(), missing)


def _least_esr_verdict(taken: Sequence[Taken], floor: float) -> int:
    if not all(one.stated for one in taken):
        return CANNOT_TELL
    if min(one.span.high for one in taken) < floor or min(one.span.mid for one in taken) < floor:
        return FALLS_SHORT
    if all(r.min is not None for one in taken for r in one.readings):
        return MEETS if min(one.span.low for one in taken) >= floor else FALLS_SHORT
    return CANNOT_TELL


def judge_rating(columns: Columns, bench: Bench) -> Judged | None:
    """Beside a stated transconductance, the IC's rating as one more reason: the least of the three gains by it."""
    both = [s for s in bench.settings if s.circuit.transconductance_ms is not None and s.circuit.rating is not None]
    if not any(s.circuit.rating is not None and s.circuit.rating.kind is not None for s in both):
        return None
    by_rating = bench_by_rating(bench)
    judged, _ = judge(columns, by_rating, reckon(columns, by_rating, wanted=JUDGED))
    gains = [judged[key] for key in GAINS]
    slack = np.min([one.slack for one in gains], axis=0)
    missing: dict[str, Any] = {}
    estimated: dict[str, Any] = {}
    for one in gains:
        missing |= one.missing
        estimated |= one.estimated
    return Judged(
        about="rating",
        asked=np.ones(len(columns), dtype=bool),
        verdict=np.min([one.verdict for one in gains], axis=0),
        slack=slack,
        worst=np.min([one.worst for one in gains], axis=0),
        missing=missing,
        estimated=estimated,
        typical_only=gains[0].typical_only,
    )


def bench_by_rating(bench: Bench) -> Bench:
    """The bench as if the IC's sheet gave its rating alone."""
    none = {"transconductance_ms": None}
    conditions = tuple(condition.model_copy(update=none) for condition in bench.circuit.condition)
    circuit = bench.circuit.model_copy(update={**none, "condition": conditions})
    return bench.model_copy(update={"circuit": circuit})


def part_result(reckoning: Reckoning, at: int) -> dict[str, Any]:
    """One part's keys of the review, JSON-ready: identity, numbers, verdict, reasons, missing, questions, slack."""
    standing, columns = _standing(reckoning, at), reckoning.columns
    offer, bench = standing.subject.offer, reckoning.bench
    judged = {key: one for key, one in reckoning.judged.items() if one.asked[at]}
    load = standing.subject.ends["circuit_load_pf"][1]
    bare = bare_result(reckoning, at)
    for key in reckoning.numbers:
        bare[key]["how"] = how(key, standing.subject)
    return {
        **bare,
        "reasons": reasons(judged, standing),
        "questions": [question(name, offer, bench, load) for name in missing_of(judged, at)],
        "remarks": remarks(columns, at),
    }


def bare_result(reckoning: Reckoning, at: int) -> dict[str, Any]:
    """One part's identity, numbers, verdict and slack, without the sentences."""
    offer = reckoning.columns.offers[at]
    judged = {key: one for key, one in reckoning.judged.items() if one.asked[at]}
    slack = {key: _or_none(float(one.slack[at])) for key, one in judged.items()}
    known = {key: value for key, value in slack.items() if value is not None}
    return {
        "file": offer.sheet.file,
        "part_number": offer.part.part_number,
        "maker": offer.part.maker,
        "package": offer.part.package,
        "mode": offer.mode,
        **{key: _number(number, at) for key, number in reckoning.numbers.items()},
        "verdict": WORDS[int(reckoning.verdict[at])],
        "reasons": [],
        "missing": ["esr_ohm" if name == "least_esr_ohm" else name for name in missing_of(judged, at)],
        "questions": [],
        "chosen": dict(offer.chosen),
        "to_check": fields_to_check(offer, judged),
        "slack": slack,
        "tightest": min(known, key=lambda key: known[key]) if known else None,
        "remarks": [],
    }


def missing_of(judged: Mapping[str, Judged], at: int) -> list[str]:
    """What a verdict wanted: fields and keys not known, limits not stated, estimates that settle nothing."""
    found: dict[str, None] = {}
    for one in judged.values():
        found |= {name: None for name, flags in one.missing.items() if flags[at]}
        if one.verdict[at] == CANNOT_TELL:
            found |= {name: None for name, flags in one.estimated.items() if flags[at]}
            if len(one.typical_only) and one.typical_only[at]:
                found["esr_ohm"] = None
    if "esr_ohm" in found:
        found.pop("least_esr_ohm", None)
    return list(found)


def _or_none(value: float) -> float | None:
    return value if math.isfinite(value) else None


def _number(number: Number, at: int) -> dict[str, Any]:
    low, mid, high = (_or_none(value) for value in number.ends[:, at].tolist())
    basis = "stated" if number.stated[at] else "estimated" if number.estimated[at] else "derived"
    return {"low": low, "mid": mid, "high": high, "how": "", "basis": basis}


def _standing(reckoning: Reckoning, at: int) -> Standing:
    columns, bench = reckoning.columns, reckoning.bench
    offer = columns.offers[at]
    ends = {key: _ends(number, at) for key, number in reckoning.numbers.items()}
    lacking = {
        key: tuple(name for name, flags in number.lacking.items() if flags[at])
        for key, number in reckoning.numbers.items()
    }
    words = (c1_words(columns, at), c0_words(columns, at))
    subject = Subject(
        offer, bench, reckoning.words, ends, lacking, *words, partial(nominal_r1_and_gm, columns, bench, at)
    )
    stop = float(reckoning.greatest_gm[at])
    standing = Standing(
        at=at,
        subject=subject,
        numbers=reckoning.numbers,
        total=reckoning.total,
        loosest_slack=float(reckoning.loosest_slack[at]),
        greatest_gm=stop if math.isfinite(stop) else math.nan,
    )
    return replace(standing, subject=replace(subject, budget=_budget_how(standing)))


def _ends(number: Number, at: int) -> tuple[float, float, float]:
    low, mid, high = (float(value) for value in number.ends[:, at])
    return low, mid, high


def _budget_how(standing: Standing) -> str:
    offer, bench = standing.subject.offer, standing.bench
    subject = standing.subject
    return f"{budget_words(standing)}; {ageing_words(offer, bench)}; load error from {subject.c1}, {subject.c0}"
