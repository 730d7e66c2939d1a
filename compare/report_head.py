"""Who and what a report is about: what no sheet and no bench holds; what is not given stays blank, to be written in."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field, fields
from typing import Any

BLANK = "____________________"
CONFIDENTIAL = "Confidential. For the project team and those who review it; not to be passed on without consent."


@dataclass(frozen=True)
class ReportHead:
    """The fields of the report's head, as text; "" for what is not known."""

    title: str = ""
    number: str = ""
    revision: str = ""
    date: str = ""
    project: str = ""
    board: str = ""
    designator: str = ""
    ic: str = ""
    ic_sheet: str = ""
    dielectric: str = ""
    strays: str = ""
    prepared: str = ""
    checked: str = ""
    approved: str = ""
    confidentiality: str = CONFIDENTIAL
    revisions: tuple[tuple[str, str, str, str], ...] = ()
    """Revision, date, by whom, what changed."""
    alternates: Sequence[Mapping[str, Any]] = field(default_factory=tuple)
    """Decisions on parts in this one's place, or of this one in another's: the keys of `approval.TABLE`."""

    @classmethod
    def of(cls, given: Mapping[str, Any]) -> ReportHead:
        """From text by field; HeadError where a field is not known or is no text."""
        known = {one.name for one in fields(cls)} - {"revisions", "alternates"}
        wrong = sorted(set(given) - known)
        if wrong:
            raise HeadError(f"{wrong[0]}: not a field of the report's head; those are {', '.join(sorted(known))}")
        no_text = [name for name, value in given.items() if not isinstance(value, str)]
        if no_text:
            raise HeadError(f"{no_text[0]}: must be text in quotes, got {given[no_text[0]]!r}")
        return cls(**given)

    def shown(self, name: str) -> str:
        """The field's text, or a blank to write in."""
        return str(getattr(self, name)) or BLANK


class HeadError(ValueError):
    """What was given for the head cannot be used; the message says what and why."""


def alternates_of(slot: Mapping[str, Any], key: str) -> list[Mapping[str, Any]]:
    """All decisions that the work holds on the part of this `work.part_key`, in either role, oldest first."""
    found: list[Mapping[str, Any]] = []
    for pair, kept in slot.items():
        if key in pair.split(" > ") and isinstance(kept, Mapping):
            found += [one for one in kept.get("decisions", ()) if isinstance(one, Mapping)]
    return sorted(found, key=lambda one: str(one.get("when", "")))
