"""What a person changed in the readings of a sheet: the sheet itself is never touched, each correction lies beside it.

A correction names its reading by the sheet's key and by places that count from 0: of the part on the sheet as read, and
of the reading in that part. Added readings follow on behind those of the sheet. The last correction of one counts.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, replace
from typing import Literal, Self

from pydantic import BaseModel, ConfigDict, model_validator

from extract.model import Part, Reading, SpecSheet
from extract.partlist import exchanged
from extract.plausible import doubts

What = Literal["value", "added", "not on the sheet", "as read", "fact"]
FACTS = ("part_number", "maker", "package", "mode", "cut", "resonance")
"""What else can be corrected of a part: not a reading, but a word that the reckoning goes by."""


class Correction(BaseModel):
    """One change by a person.

    `new` is the reading that counts from here on (status "entered"), `was` the one the sheet gives; both stay. "as
    read" settles a doubt: the sheet's value counts and nobody need look again. "fact" sets one of FACTS to `value`
    (None: not stated). `typed` is what was typed, `by`, `at` (ISO 8601 with offset) and `why` who, when and why.
    """

    model_config = ConfigDict(frozen=True, extra="forbid", allow_inf_nan=False)

    sheet: str
    part: int
    reading: int | None = None
    what: What
    new: Reading | None = None
    was: Reading | None = None
    fact: Literal["part_number", "maker", "package", "mode", "cut", "resonance"] | None = None
    value: str | None = None
    typed: str = ""
    by: str = ""
    at: str = ""
    why: str = ""

    @model_validator(mode="after")
    def _is_whole(self) -> Self:
        if (self.what == "fact") != (self.fact is not None) or (self.what == "fact") == (self.reading is not None):
            raise ValueError("a correction of a fact names the fact, any other the reading")
        if (self.what in ("value", "added")) != (self.new is not None):
            raise ValueError(f"a correction “{self.what}” {'lacks its value' if self.new is None else 'has no value'}")
        if self.fact == "resonance" and self.value not in ("load", "series", None):
            raise ValueError(f"resonance is load or series, not {self.value!r}")
        return self

    @property
    def place(self) -> tuple[str, int, int | str | None]:
        """What it is a correction of; a later one of the same place takes its stead."""
        return self.sheet, self.part, self.fact if self.reading is None else self.reading


@dataclass(frozen=True)
class Line:
    """One reading of a part with its history: `now` counts (None: not on the sheet), `read` is the sheet's own."""

    number: int
    now: Reading | None
    read: Reading | None
    correction: Correction | None = None

    @property
    def shown(self) -> Reading:
        """The reading that a row shows: the one that counts, else the one taken away."""
        reading = self.now or self.read
        if reading is None:
            raise ValueError("a line without a reading")
        return reading


def corrected(sheet: SpecSheet, corrections: Iterable[Correction]) -> SpecSheet:
    """The sheet with its own corrections put in; the very same sheet where there are none.

    A corrected or added reading has `status` "entered" and no `check`; one that is not on the sheet is gone.
    """
    by_part: dict[int, list[Correction]] = {}
    for one in corrections:
        by_part.setdefault(one.part, []).append(one)
    if not by_part:
        return sheet
    changed = {at: corrected_part(sheet.parts[at], own) for at, own in by_part.items() if at < len(sheet.parts)}
    return sheet.model_copy(update={"parts": exchanged(sheet.parts, changed)})


def corrected_part(part: Part, corrections: Sequence[Correction]) -> Part:
    """The part with these corrections, all of them its own."""
    readings = tuple(line.now for line in lines(part, corrections) if line.now is not None)
    return part.model_copy(update={**facts(corrections), "readings": readings})


def _doubted_anew(part: Part, every: list[Line], words: Mapping[str, str | None]) -> list[Line]:
    """The lines with what the readings say of one another looked at once more: a correction of C0 can clear C1's doubt.

    What a person entered or settled has no doubt; what the reader doubted for another cause keeps it.
    """
    counting = [line for line in every if line.now is not None]
    before = doubts(part.readings, part.cut, part.mode)
    now = [line.now for line in counting if line.now is not None]
    after = doubts(now, words.get("cut", part.cut), words.get("mode", part.mode))
    anew = {}
    for place, line in enumerate(counting):
        old, new = before.get(line.number), after.get(place)
        if line.correction is None and line.now is not None and old != new:
            others = (line.now.check or "").removesuffix(old or "").removesuffix("; ")
            check = "; ".join(filter(None, (others, new))) or None
            anew[line.number] = replace(line, now=line.now.model_copy(update={"check": check}))
    return [anew.get(line.number, line) for line in every]


def lines(part: Part, corrections: Sequence[Correction]) -> list[Line]:
    """Every reading of the part as read, and those added, each with what became of it; the part's own corrections."""
    last = {one.reading: one for one in corrections if one.reading is not None}
    as_read = [
        Line(number, _now(reading, last.get(number)), reading, last.get(number))
        for number, reading in enumerate(part.readings)
    ]
    added = [one for number, one in sorted(last.items()) if number >= len(part.readings) and one.new is not None]
    every = as_read + [Line(one.reading or 0, one.new, None, one) for one in added]
    return _doubted_anew(part, every, facts(corrections)) if corrections else every


def _now(read: Reading, last: Correction | None) -> Reading | None:
    if last is None:
        return read
    if last.what == "as read":
        return read if read.check is None else settled(read)
    return last.new


def settled(read: Reading) -> Reading:
    """A reading whose doubt a person has settled as read; bounds out of order keep theirs, for they cannot count so."""
    stated = [value for value in (read.min, read.typ, read.max) if value is not None]
    return read.model_copy(update={"check": None}) if stated == sorted(stated) else read


def facts(corrections: Iterable[Correction]) -> dict[str, str | None]:
    """The part's words that a person set, by name."""
    return {one.fact: one.value for one in corrections if one.fact is not None}


def of_part(corrections: Iterable[Correction], sheet: str, part: int) -> list[Correction]:
    """Those of one part, in the order made."""
    return [one for one in corrections if one.sheet == sheet and one.part == part]


def with_correction(corrections: tuple[Correction, ...], one: Correction) -> tuple[Correction, ...]:
    """With `one` in the stead of an earlier correction of the same place; its `was` stays the sheet's."""
    kept = tuple(other for other in corrections if other.place != one.place)
    added_and_gone = one.what == "not on the sheet" and one.was is None
    return kept if added_and_gone else (*kept, one)


def without(
    corrections: tuple[Correction, ...], sheet: str, part: int, number: int | str | None = None
) -> tuple[Correction, ...]:
    """The sheet's own value put back: of one reading or fact, or of the whole part where `number` is None."""

    def stays(one: Correction) -> bool:
        return (one.sheet, one.part) != (sheet, part) or (number is not None and one.place[2] != number)

    return tuple(filter(stays, corrections))


def next_number(part: Part, corrections: Iterable[Correction]) -> int:
    """The place of one more added reading; `corrections`: the part's own."""
    taken = [one.reading for one in corrections if one.reading is not None]
    return max([len(part.readings) - 1, *taken]) + 1
