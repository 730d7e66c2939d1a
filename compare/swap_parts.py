"""Which parts can be set against each other on Substitute, and each of them alone on its sheet."""

from __future__ import annotations

from collections.abc import Callable, Collection, Sequence
from dataclasses import dataclass, field
from functools import partial
from typing import Any

from compare.answers import Identity, identities, part_numbers
from compare.choosing import package_text
from compare.ranking import Ranked
from compare.shown import part_name, short_name
from extract.model import SpecSheet

MOST_LISTED = 500
"""So many parts can be picked from a list; a part beyond them comes from Choose."""


@dataclass(frozen=True)
class Choice:
    """A part that can be chosen: what it is known by, how it is called, and its sheet with this part alone."""

    identity: Identity
    label: str
    package: str
    alone: Callable[[], SpecSheet] = field(compare=False, repr=False)


def choices(sheets: Sequence[SpecSheet], contest: Ranked | None, wanted: Collection[Identity] = ()) -> list[Choice]:
    """Parts that offer the bench's frequency, best first; without a bench every part as it was read.

    Of a long list the first ones, and those `wanted`.
    """
    return _ranked(contest, wanted) if contest is not None else _as_read(sheets, wanted)


def _label(name: str, maker: str | None) -> str:
    return f"{name}, {maker}" if maker else name


def default_candidate(incumbent: Choice, places: Sequence[Choice]) -> Choice:
    """The best other part of the same package, else the best other part."""
    others = [one for one in places if one is not incumbent]
    return next((one for one in others if one.package and one.package == incumbent.package), others[0])


def as_row(sheet: SpecSheet) -> dict[str, Any]:
    """What supply is looked up by: the identity of the sheet's one part, and what the sheet itself says of it."""
    part = sheet.parts[0]
    stated = {name: getattr(part.attributes, name) for name in ("price", "lead_time", "status")}
    return {"file": sheet.file, "part_number": part.part_number, "maker": part.maker, "attributes": stated}


def _ranked(contest: Ranked, wanted: Collection[Identity]) -> list[Choice]:
    found = []
    for place, row in zip(identities(contest.briefs), contest.briefs, strict=True):
        if row["place"] <= MOST_LISTED or place in wanted:
            name = _label(row["part_number"] or short_name(row["file"]), row["maker"])
            found.append(Choice(place, name, package_text(row["package"]), partial(contest.sheet_of, row["place"])))
    return found


def _as_read(sheets: Sequence[SpecSheet], wanted: Collection[Identity]) -> list[Choice]:
    rows = [(sheet, at) for sheet in sheets for at in range(len(sheet.parts))]
    numbers = [{"file": sheet.file, "part_number": number} for sheet in sheets for number in part_numbers(sheet)]
    found = []
    for count, (place, (sheet, at)) in enumerate(zip(identities(numbers), rows, strict=True)):
        if count < MOST_LISTED or place in wanted:
            part = sheet.parts[at]
            name = _label(part_name(part, at + 1), part.maker)
            found.append(Choice(place, name, package_text(part.package), partial(_alone, sheet, at)))
    return found


def _alone(sheet: SpecSheet, at: int) -> SpecSheet:
    return sheet.model_copy(update={"parts": (sheet.parts[at],)})
