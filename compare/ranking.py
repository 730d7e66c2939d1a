"""The parts that offer the frequency, best first, with what each one's place rests on."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from functools import cached_property
from typing import Any

import numpy as np

from compare.bench import Bench
from compare.columns import make_columns
from compare.corners import reckon
from compare.find import Offers
from compare.lot import Whole
from compare.reckoning import JUDGED, Reckoning, bare_result, judge_all, part_result, reckon_offers, settled_offers
from compare.verdict import WORDS, Judged, of_part
from extract.model import SpecSheet

SCHEMA = "quartzfolio/rank/1"
MOST_KEPT = 2000


@dataclass(frozen=True)
class Ranked:
    """Every part that offers the frequency, in order; sentences and numbers of a part are made when it is asked for.

    Attributes
    ----------
    ordered : list of int
        The parts' columns in `reckoning`, best first; empty where none offers the frequency.
    """

    reckoning: Reckoning | None
    ordered: list[int]
    notes: tuple[Mapping[str, Any], ...]
    made: dict[int, dict[str, Any]] = field(default_factory=dict, repr=False, compare=False)

    def __len__(self) -> int:
        return len(self.ordered)

    @cached_property
    def briefs(self) -> list[dict[str, Any]]:
        """One row a part with its place, identity, verdict and slack, enough to filter and order thousands by."""
        if self.reckoning is None:
            return []
        judged = {key: (one.asked.tolist(), one.slack.tolist()) for key, one in self.reckoning.judged.items()}
        return [self._brief(place, at, judged) for place, at in enumerate(self.ordered, start=1)]

    def _brief(self, place: int, at: int, judged: Mapping[str, tuple[list[bool], list[float]]]) -> dict[str, Any]:
        assert self.reckoning is not None  # noqa: S101
        offer = self.reckoning.columns.offers[at]
        part, supply = offer.part, offer.part.attributes
        slack = {key: None if s[at] != s[at] else s[at] for key, (asked, s) in judged.items() if asked[at]}
        known = {key: value for key, value in slack.items() if value is not None}
        stated = {"price": supply.price, "lead_time": supply.lead_time, "status": supply.status}
        return {
            "place": place,
            "file": offer.sheet.file,
            "part_number": part.part_number,
            "maker": part.maker,
            "package": part.package,
            "mode": offer.mode,
            "verdict": WORDS[int(self.reckoning.verdict[at])],
            "slack": slack,
            "tightest": min(known, key=lambda key: known[key]) if known else None,
            "attributes": {key: value for key, value in stated.items() if value is not None},
        }

    def row(self, place: int, *, whole: bool = True) -> dict[str, Any]:
        """The row of section 5 at a place, from 1; with its sentences, and then kept, where it is wanted `whole`."""
        assert self.reckoning is not None  # noqa: S101
        if place in self.made:
            return self.made[place]
        make = part_result if whole else bare_result
        row = {"place": place, **make(self.reckoning, self.ordered[place - 1])}
        if whole and len(self.made) < MOST_KEPT:
            self.made[place] = row
        return row

    def result(self, shown: int | None = None) -> dict[str, Any]:
        """All rows, JSON-ready; those behind the first `shown` without their sentences."""
        rows = [self.row(at, whole=shown is None or at <= shown) for at in range(1, len(self) + 1)]
        return {"schema": SCHEMA, "rows": rows, "notes": list(self.notes)}


def rank_sheets(sheets: Sequence[SpecSheet], bench: Bench) -> Ranked:
    """Every part that offers the bench's frequency, in order."""
    return _ranked(settled_offers(sheets, bench), bench)


def _ranked(found: Offers, bench: Bench) -> Ranked:
    if not len(found.offers):
        return Ranked(None, [], tuple(found.notes))
    reckoning = reckon_offers(found.offers, bench, found.notes)
    return Ranked(reckoning, order(reckoning.judged, reckoning.verdict).tolist(), tuple(found.notes))


def rank(sheets: Sequence[SpecSheet], bench: Bench, *, shown: int | None = None) -> dict[str, Any]:
    """Rank every part that offers the bench's frequency; JSON-ready.

    `shown`: of a list of thousands, how many rows are wanted. Beside them `counts` tells how many parts there are of
    each verdict; what the rows after them would hold is not worked out. None, the rule: all of them.
    """
    found = settled_offers(sheets, bench)
    if shown is None or len(found.offers) <= shown:
        return _ranked(found, bench).result()
    columns = make_columns(found.offers, bench)
    judged, _ = judge_all(columns, bench, reckon(columns, bench, wanted=JUDGED))
    verdict = of_part(judged, len(columns))
    first = order(judged, verdict)[:shown]
    # The same numbers as beside all the others, at the cost of these few.
    reckoning = reckon_offers(found.offers.take(first), bench, found.notes, among=columns)
    counts = {words: int((verdict == code).sum()) for code, words in WORDS.items()}
    return Ranked(reckoning, list(range(len(first))), tuple(found.notes)).result() | {"counts": counts}


def order(judged: Mapping[str, Judged], verdict: Whole) -> Whole:
    """Indices, best first: by verdict, then by least known slack (none last), then as given."""
    least = np.fmin.reduce([np.where(one.asked, one.slack, np.nan) for one in judged.values()])
    known = ~np.isnan(least)
    return np.lexsort((-np.where(known, least, 0.0), ~known, -verdict))
