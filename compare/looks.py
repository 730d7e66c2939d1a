"""The queue of readings that a person must look at: why, what else is likely meant, and what hangs on it."""

from __future__ import annotations

import re
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from itertools import islice
from typing import Any

from compare.corrections import Correction, lines, of_part, settled
from compare.entered import field_name, fork_of
from compare.figures import exact, number
from compare.shown import NAMES, part_name, value_text
from compare.work import Work
from extract.fields import field_of
from extract.model import Part, Reading, SpecSheet
from extract.partlist import doubted
from extract.plausible import central

# A share of certainty tells a person nothing that the picture beside it does not.
CONFIDENCE = re.compile(r"\s*with a confidence of \d+\s*%")
AT_LOAD = re.compile(r"\bRL\b|\bload\b", re.IGNORECASE)
SLIPS = (1e-3, 1e3, 1e-6, 1e6)
# What is told to change, in order of what decides most; name, and what it is called in a sentence.
TOLD = {"margin": "the margin", "total_ppm": "ppm in all", "drive_level_uw": "the drive", "startup_ms": "the start-up"}
MOST = 500
"""Parts of one sheet; nobody goes through more of them one by one."""
TELLING = 0.02
"""A change below this share is none."""


@dataclass(frozen=True)
class Other:
    """Another meaning of a reading: the button that takes it, the reading then, why it would be so.

    `words` begin the sentence about what it would change. `likely`: what was read cannot be, this is probably meant.
    """

    button: str
    reading: Reading
    why: str
    words: str
    likely: bool = True


@dataclass(frozen=True)
class Look:
    """One reading that waits: places as in a correction, the sheet and part as they count now."""

    sheet: str
    part: int
    reading: int
    file: str
    name: str
    now: Reading
    other: Other | None = None

    @property
    def place(self) -> tuple[str, int, int]:
        return self.sheet, self.part, self.reading

    @property
    def reason(self) -> str:
        """Why it waits, as a sentence."""
        text = CONFIDENCE.sub(", and not sharply", self.now.check or "").strip().rstrip(".")
        return f"{text[:1].upper()}{text[1:]}."

    @property
    def asks(self) -> str:
        """`which resistance is this?` where two are meant, else `ESR of ABX-26`."""
        if self.now.field == "esr_ohm" and self.other is not None and self.other.button == "Take as RL":
            return f"which resistance is this, of {self.name}?"
        return f"{NAMES[self.now.field]} of {self.name}"

    @property
    def keep(self) -> str:
        """The button that takes it as read."""
        if self.other is not None and self.other.button == "Take as RL":
            return "Keep as R1"
        return f"Keep {value_text(self.now)}" if len(value_text(self.now)) <= 16 else "Keep as read"

    @property
    def can_keep(self) -> bool:
        """Bounds out of order cannot count as they stand."""
        return settled(self.now).check is None


def queue(work: Work) -> list[Look]:
    """Every reading that waits for a look, in the order of the sheets."""
    found = []
    for one, sheet in zip(work.sheets, work.corrected, strict=True):
        for at in islice(doubted(sheet.parts), MOST):
            own = of_part(work.corrections, one.key, at)
            found += _of_part(one.key, sheet, at, one.sheet.parts[at], own)
    return found


def _of_part(key: str, sheet: SpecSheet, at: int, read: Part, corrections: Sequence[Correction]) -> list[Look]:
    part = sheet.parts[at]
    return [
        Look(key, at, line.number, sheet.file, part_name(part, at + 1), line.now, other(line.now, part))
        for line in lines(read, corrections)
        if line.now is not None and line.now.check is not None
    ]


def other(reading: Reading, part: Part) -> Other | None:
    """What the reading may mean instead; None where nothing offers itself."""
    return _as_rl(reading, part) or _swapped(reading) or _slipped(reading, part)


def _as_rl(reading: Reading, part: Part) -> Other | None:
    """An ESR at load: R1 = RL / (1 + C0/CL)² (IEC 60444), C0 and the rated load as stated."""
    if reading.field != "esr_ohm" or not AT_LOAD.search(reading.check or ""):
        return None
    load, shunt = (_central(part, name) for name in ("load_capacitance_pf", "shunt_capacitance_pf"))
    if not load or not shunt:
        return None
    ratio = (1 + shunt / load) ** 2
    why = f"RL at the rated load {exact(load)} pF: R1 = RL/(1 + {exact(shunt)} pF/{exact(load)} pF)²"
    return Other("Take as RL", _scaled(reading, 1 / ratio, digits=4), why, "Taken as RL", likely=False)


def _central(part: Part, field: str) -> float | None:
    """The field's one value, typical before a limit; None where it is doubtful itself, banded or a choice."""
    own = [reading for reading in part.readings if reading.field == field and reading.check is None]
    return central(own[0]) if len(own) == 1 and not own[0].options else None


def _swapped(reading: Reading) -> Other | None:
    stated = [value for value in (reading.min, reading.typ, reading.max) if value is not None]
    if stated == sorted(stated) or reading.min is None or reading.max is None or reading.typ is not None:
        return None
    turned = _entered(reading, min=reading.max, max=reading.min)
    return Other("Swap the ends", turned, "least and greatest were read the wrong way round", "With its ends swapped")


def _slipped(reading: Reading, part: Part) -> Other | None:
    """The same a thousand times more or less, where that is plausible and what was read is not."""
    known, fork = field_of(field_name(reading.field)), fork_of(part)
    values = [value for value in (reading.min, reading.typ, reading.max, *reading.options) if value]
    if all(known.plausible(value, tuning_fork=fork) for value in values):
        return None
    for slip in SLIPS:
        if all(known.plausible(value * slip, tuning_fork=fork) for value in values):
            meant = _scaled(reading, slip, digits=9)
            why, value = "a prefix of the unit was misprinted or misread", value_text(meant)
            return Other(f"Take {value}", meant, why, f"With {value}")
    return None


def _scaled(reading: Reading, factor: float, *, digits: int) -> Reading:
    def times(value: float | None) -> float | None:
        return None if value is None else float(f"{value * factor:.{digits}g}")

    return _entered(
        reading,
        min=times(reading.min),
        typ=times(reading.typ),
        max=times(reading.max),
        options=tuple(float(f"{value * factor:.{digits}g}") for value in reading.options),
    )


def _entered(reading: Reading, **values: Any) -> Reading:
    return reading.model_copy(update={"status": "entered", "check": None, "bare": None, **values})


def consequence(before: Mapping[str, Any], after: Mapping[str, Any], other_words: str) -> str:
    """What `other_words` ("Taken as RL") would change: a row of `review` now, and with it; "" where nothing does."""
    if before["verdict"] != after["verdict"]:
        return f"{other_words}, the verdict would be “{after['verdict']}” in place of “{before['verdict']}”."
    changes = [(abs(share), text) for share, text in (_change(before, after, name) for name in TOLD) if text]
    greatest = max(changes, default=(0.0, ""))
    return f"{other_words}, {greatest[1]}." if greatest[0] >= TELLING else f"{other_words}, nothing asked would change."


def _change(before: Mapping[str, Any], after: Mapping[str, Any], name: str) -> tuple[float, str]:
    end = "low" if name == "margin" else "high"
    old, new = before[name][end], after[name][end]
    if old is None or new is None:
        return (
            (0.0, "")
            if old == new
            else (1.0, f"{TOLD[name]} {'would be known' if old is None else 'could not be told'}")
        )
    if old == 0 or number(old) == number(new):
        return 0.0, ""
    verb = "rise" if abs(new) > abs(old) else "fall"
    return new / old - 1, f"{TOLD[name]} would {verb} from {number(old)} to {number(new)}"
