"""The parts that offer the frequency, best first, with what each one's place rests on."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

import numpy as np

from compare.bench import Bench
from compare.offer import Offers
from compare.reckoning import Reckoning, bare_result, part_result, reckon_sheets
from extract.model import SpecSheet

SCHEMA = "quartzfolio/rank/1"


def rank(sheets: Sequence[SpecSheet], bench: Bench, *, shown: int | None = None) -> dict[str, Any]:
    """Rank every part that offers the bench's frequency; JSON-ready.

    `shown`: for a list of thousands, how many rows carry their sentences (`how`, reasons, questions, remarks); the rows
    after them have places, numbers, verdicts and slack alone. None, the rule: all of them.
    """
    reckoning = reckon_sheets(sheets, bench)
    if isinstance(reckoning, Offers):
        return {"schema": SCHEMA, "rows": [], "notes": list(reckoning.notes)}
    rows = [
        {"place": place, **(part_result if shown is None or place <= shown else bare_result)(reckoning, at)}
        for place, at in enumerate(order(reckoning), start=1)
    ]
    return {"schema": SCHEMA, "rows": rows, "notes": list(reckoning.notes)}


def order(reckoning: Reckoning) -> list[int]:
    """Indices, best first: by verdict, then by least known slack (none last), then as given."""
    slacks = [np.where(one.asked, one.slack, np.nan) for one in reckoning.judged.values()]
    least = np.fmin.reduce(slacks)
    known = ~np.isnan(least)
    return [int(at) for at in np.lexsort((-np.where(known, least, 0.0), ~known, -reckoning.verdict))]
