"""One review for each part that offers the frequency: every number, verdict and reason."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from compare.bench import Bench
from compare.offer import Offers
from compare.reckoning import part_result, reckon_sheets
from extract.model import SpecSheet

SCHEMA = "quartzfolio/review/1"


def review(sheets: Sequence[SpecSheet], bench: Bench) -> dict[str, Any]:
    """Review every part that offers the bench's frequency, in the order read; JSON-ready."""
    reckoning = reckon_sheets(sheets, bench)
    if isinstance(reckoning, Offers):
        return {"schema": SCHEMA, "reviews": [], "notes": list(reckoning.notes)}
    reviews = [part_result(reckoning, at) for at in range(len(reckoning))]
    return {"schema": SCHEMA, "reviews": reviews, "notes": list(reckoning.notes)}
