"""Which parts can be set against each other on Substitute, and each of them alone on its sheet."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any

from compare.answers import Identity, identities
from compare.choosing import package_text
from compare.ranking import Ranked
from compare.shown import part_name, short_name
from extract.model import SpecSheet

MOST_LISTED = 500
"""So many parts can be picked from a list; a part beyond them comes from Choose."""


@dataclass(frozen=True)
class Choice:
    """A part that can be chosen: what it is known by, and how it is called."""

    identity: Identity
    label: str
    package: str


def choices(sheets: Sequence[SpecSheet], contest: Ranked | None) -> list[Choice]:
    """Parts that offer the bench's frequency, best first; without a bench every part as it was read."""
    if contest is not None:
        rows = contest.briefs
        places = identities(rows)
        return [
            Choice(
                place, _label(row["part_number"] or short_name(row["file"]), row["maker"]), package_text(row["package"])
            )
            for place, row in zip(places[:MOST_LISTED], rows, strict=False)
        ]
    listed = [(sheet, at, part) for sheet in sheets for at, part in enumerate(sheet.parts, start=1)][:MOST_LISTED]
    places = identities([{"file": sheet.file, "part_number": part.part_number} for sheet, _, part in listed])
    return [
        Choice(place, _label(part_name(part, at), part.maker), package_text(part.package))
        for place, (_, at, part) in zip(places, listed, strict=True)
    ]


def _label(name: str, maker: str | None) -> str:
    return f"{name}, {maker}" if maker else name


def default_candidate(incumbent: Choice, places: Sequence[Choice]) -> Choice:
    """The best other part of the same package, else the best other part."""
    others = [one for one in places if one is not incumbent]
    return next((one for one in others if one.package and one.package == incumbent.package), others[0])


def alone(sheets: Sequence[SpecSheet], choice: Choice) -> SpecSheet:
    """The choice's sheet with its part alone."""
    file, number, count = choice.identity
    for sheet in sheets:
        if sheet.file == file:
            same = [part for part in sheet.parts if part.part_number == number]
            if len(same) >= count:
                return sheet.model_copy(update={"parts": (same[count - 1],)})
            count -= len(same)
    raise KeyError(f"{file}#{number}: not open")


def as_row(sheet: SpecSheet) -> dict[str, Any]:
    """What supply is looked up by: the identity of the sheet's one part, and what the sheet itself says of it."""
    part = sheet.parts[0]
    stated = {name: getattr(part.attributes, name) for name in ("price", "lead_time", "status")}
    return {"file": sheet.file, "part_number": part.part_number, "maker": part.maker, "attributes": stated}
