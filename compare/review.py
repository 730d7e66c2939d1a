"""One review for each part that offers the frequency: every number, verdict and reason."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from compare.bench import Bench
from compare.bench_readings import measured_numbers
from compare.contributors import contributors_of
from compare.cures import cures, gain_window_words
from compare.find import Offers
from compare.reckoning import Reckoning, part_result, reckon_sheets
from compare.trial import advice_for
from extract.model import SpecSheet

SCHEMA = "quartzfolio/review/1"


def review(sheets: Sequence[SpecSheet], bench: Bench, *, what_if: bool = False) -> dict[str, Any]:
    """Review every part that offers the bench's frequency, in the order read; JSON-ready.

    `what_if`: with every single change that would turn what falls short, and the transconductance that would do; it
    takes some hundred reckonings a part.
    """
    reckoning = reckon_sheets(sheets, bench)
    if isinstance(reckoning, Offers):
        return {"schema": SCHEMA, "reviews": [], "notes": list(reckoning.notes)}
    reviews = [reviewed(reckoning, at) | (_what_if(reckoning, at) if what_if else {}) for at in range(len(reckoning))]
    return {"schema": SCHEMA, "reviews": reviews, "notes": list(reckoning.notes)}


def reviewed(reckoning: Reckoning, at: int) -> dict[str, Any]:
    columns, bench = reckoning.columns, reckoning.bench
    advice, sentences = advice_for(columns, bench, reckoning.total, reckoning.judged, at)
    rl_ohm = reckoning.numbers["load_resonance_resistance_ohm"].ends[:, at]
    return {
        **part_result(reckoning, at),
        **measured_numbers(columns, bench, at, (float(rl_ohm[0]), float(rl_ohm[1]), float(rl_ohm[2]))),
        "contributors": contributors_of(columns, bench, reckoning.total, at),
        "advice": advice,
        "advice_messages": sentences,
    }


def _what_if(reckoning: Reckoning, at: int) -> dict[str, Any]:
    changes = [cure.as_dict() for cure in cures(reckoning, at)]
    return {"cures": changes, "gain_window": gain_window_words(reckoning, at)}
