"""The parts that offer the frequency, best first, with what each one's place rests on."""

from __future__ import annotations

import json
import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from functools import cached_property
from typing import Any, TextIO

import numpy as np

from compare.bench import Bench
from compare.circuit import Array
from compare.columns import make_columns
from compare.corners import reckon
from compare.find import Offers
from compare.lot import Whole
from compare.reckoning import JUDGED, Reckoning, bare_result, judge_all, part_result, reckon_offers, settled_offers
from compare.verdict import WORDS, Judged, of_part
from extract.model import Attributes, SpecSheet

SCHEMA = "quartzfolio/rank/1"
MOST_KEPT = 2000
IDENTITY = ("file", "part_number", "maker", "package", "mode")


def _supply(attributes: Attributes) -> dict[str, str]:
    """What a sheet says of price, lead time and status."""
    stated = {"price": attributes.price, "lead_time": attributes.lead_time, "status": attributes.status}
    return {key: value for key, value in stated.items() if value is not None}


MOST_INDENTED = 100
"""Rows up to which a document is set for eyes rather than for programs."""


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
        offers, judged = self.reckoning.columns.offers, self.reckoning.judged.items()
        columns = [list(offers.column(name)) for name in IDENTITY]
        attributes = offers.column("attributes")
        supply = [_supply(one) for one in attributes.values]
        told, verdicts = attributes.codes.tolist(), self.reckoning.verdict.tolist()
        slacks = [(key, one.asked.tolist(), _known(one.slack)) for key, one in judged]
        tightest = _tightest(self.reckoning.judged)
        file, number, maker, package, mode = columns
        return [
            {
                "place": place,
                "file": file[at],
                "part_number": number[at],
                "maker": maker[at],
                "package": package[at],
                "mode": mode[at],
                "verdict": WORDS[verdicts[at]],
                "slack": {key: slack[at] for key, asked, slack in slacks if asked[at]},
                "tightest": tightest[at],
                "attributes": supply[told[at]],
            }
            for place, at in enumerate(self.ordered, start=1)
        ]

    @property
    def names(self) -> list[dict[str, Any]]:
        """File and part number of each, in order: what `briefs` begin with, without the rest."""
        if self.reckoning is None:
            return []
        columns = {name: list(self.reckoning.columns.offers.column(name)) for name in IDENTITY[:2]}
        return [{name: column[at] for name, column in columns.items()} for at in self.ordered]

    def sheet_of(self, place: int) -> SpecSheet:
        """The sheet of a row with the row's part alone."""
        assert self.reckoning is not None  # noqa: S101
        offer = self.reckoning.columns.offers[self.ordered[place - 1]]
        return offer.sheet.model_copy(update={"parts": (offer.part,)})

    def row(self, place: int, *, whole: bool = True, keep: bool = True) -> dict[str, Any]:
        """The row of section 5 at a place, from 1; with its sentences, and then kept, where it is wanted `whole`."""
        assert self.reckoning is not None  # noqa: S101
        if place in self.made:
            return self.made[place]
        make = part_result if whole else bare_result
        row = {"place": place, **make(self.reckoning, self.ordered[place - 1])}
        if whole and keep and len(self.made) < MOST_KEPT:
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
    reckoning = reckon_offers(found.offers.take(first), bench, found.notes)
    counts = {words: int((verdict == code).sum()) for code, words in WORDS.items()}
    return Ranked(reckoning, list(range(len(first))), tuple(found.notes)).result() | {"counts": counts}


def write_ranking(
    ranked: Ranked, notes: Sequence[Mapping[str, Any]], stream: TextIO, *, indented: bool = False
) -> None:
    """Write the JSON document of section 5, `notes` before its own.

    A line for each row, and none of them kept, unless it is to be `indented` for eyes.
    """
    if indented:
        whole = ranked.result() | {"notes": [*notes, *ranked.notes]}
        stream.write(json.dumps(whole, ensure_ascii=False, indent=1, allow_nan=False) + "\n")
        return
    stream.write(f'{{"schema": {json.dumps(SCHEMA)},\n"rows": [')
    for place in range(1, len(ranked) + 1):
        stream.write(("\n" if place == 1 else ",\n") + _text(ranked.row(place, keep=False)))
    stream.write(f'],\n"notes": {_text([*notes, *ranked.notes])}}}\n')


def _text(value: Any) -> str:
    return json.dumps(value, ensure_ascii=False, allow_nan=False)


def _known(slack: Array) -> list[float | None]:
    """The values as Python's, None where one is not known."""
    return [None if math.isnan(value) else value for value in slack.tolist()]


def _tightest(judged: Mapping[str, Judged]) -> list[str | None]:
    """Of each part the requirement asked with the least known slack, the first of equal ones; None where none is."""
    keys = list(judged)
    slack = np.array([np.where(one.asked, one.slack, np.nan) for one in judged.values()])
    none = np.isnan(slack).all(axis=0)
    first = np.nanargmin(np.where(none, 0.0, slack), axis=0)
    return [None if lacks else keys[at] for lacks, at in zip(none.tolist(), first.tolist(), strict=True)]


def order(judged: Mapping[str, Judged], verdict: Whole) -> Whole:
    """Indices, best first: by verdict, then by least known slack (none last), then as given."""
    least = np.fmin.reduce([np.where(one.asked, one.slack, np.nan) for one in judged.values()])
    known = ~np.isnan(least)
    return np.lexsort((-np.where(known, least, 0.0), ~known, -verdict))
