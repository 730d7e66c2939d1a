"""The parts that offer the frequency, best first, with what each one's place rests on."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from functools import cached_property
from typing import Any

import numpy as np

from compare.bench import Bench
from compare.offer import Offers
from compare.reckoning import Reckoning, bare_result, part_result, reckon_sheets
from compare.verdict import WORDS
from extract.model import SpecSheet

SCHEMA = "quartzfolio/rank/1"


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
        """The row of section 5 at a place, from 1; with its sentences where it is wanted `whole`."""
        assert self.reckoning is not None  # noqa: S101
        make = part_result if whole else bare_result
        return {"place": place, **make(self.reckoning, self.ordered[place - 1])}

    def result(self, shown: int | None = None) -> dict[str, Any]:
        """All rows, JSON-ready; those behind the first `shown` without their sentences."""
        rows = [self.row(at, whole=shown is None or at <= shown) for at in range(1, len(self) + 1)]
        return {"schema": SCHEMA, "rows": rows, "notes": list(self.notes)}


def rank_sheets(sheets: Sequence[SpecSheet], bench: Bench) -> Ranked:
    """Every part that offers the bench's frequency, in order."""
    reckoning = reckon_sheets(sheets, bench)
    if isinstance(reckoning, Offers):
        return Ranked(None, [], tuple(reckoning.notes))
    return Ranked(reckoning, order(reckoning), tuple(reckoning.notes))


def rank(sheets: Sequence[SpecSheet], bench: Bench, *, shown: int | None = None) -> dict[str, Any]:
    """Rank every part that offers the bench's frequency; JSON-ready.

    `shown`: for a list of thousands, how many rows carry their sentences (`how`, reasons, questions, remarks); the rows
    after them have places, numbers, verdicts and slack alone. None, the rule: all of them.
    """
    return rank_sheets(sheets, bench).result(shown)


def order(reckoning: Reckoning) -> list[int]:
    """Indices, best first: by verdict, then by least known slack (none last), then as given."""
    slacks = [np.where(one.asked, one.slack, np.nan) for one in reckoning.judged.values()]
    least = np.fmin.reduce(slacks)
    known = ~np.isnan(least)
    return [int(at) for at in np.lexsort((-np.where(known, least, 0.0), ~known, -reckoning.verdict))]
