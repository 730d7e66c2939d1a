"""What a person types as a reading: each bound with its unit and decimal comma, held back while it is unlikely."""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import dataclass
from dataclasses import field as dataclass_field
from functools import cached_property
from typing import Literal, get_args

from compare import typed
from compare.figures import exact, with_unit
from compare.shown import title
from extract.fields import field_of
from extract.model import FIELD_NAMES, FieldName, Part, Reading, When, Where
from extract.plausible import is_fork
from extract.units import factor

Bound = Literal["min", "typ", "max", "options"]
BOUNDS: tuple[Bound, ...] = get_args(Bound)
BOTH_SIDES = re.compile(r"\s*(?:±|\+\s*/\s*[-−–])")
SEPARATORS = re.compile(r"\s*(?:;|/|\bor\b|,\s+)\s*")


@dataclass(frozen=True)
class Draft:
    """A reading as typed: text by bound, of `options` several with ; between.

    `kept`: bounds that a person has said are so, however unlikely. `fork`: whether the part is a tuning fork.
    """

    field: str
    texts: Mapping[Bound, str] = dataclass_field(default_factory=dict)
    kept: frozenset[Bound] = frozenset()
    fork: bool | None = None

    @cached_property
    def understood(self) -> dict[Bound, typed.Typed]:
        """Each bound that is not blank, a choice by its first fault or its last value."""
        said: dict[Bound, typed.Typed] = {}
        for bound in BOUNDS:
            if self.texts.get(bound, "").strip():
                each = self._options if bound == "options" else [self._one(self.texts[bound], bound)]
                said[bound] = next((one for one in each if one.fault), each[-1])
        return said

    @property
    def faults(self) -> dict[Bound, str]:
        """A sentence for each bound that cannot be used as typed; nothing may be entered while there is one."""
        told = {bound: one.fault for bound, one in self.understood.items() if one.fault}
        if told:
            return told
        values = self.values
        if not values:
            return {"typ": "nothing is typed: give one value, or say that it is not on the sheet"}
        if "options" in values and len(values) > 1:
            return {"options": "a choice stands alone; leave least, typical and greatest blank"}
        ordered = [values[bound] for bound in ("min", "typ", "max") if bound in values]
        if ordered != sorted(ordered):
            return {"max": f"out of order: {', '.join(map(exact, ordered))}; least, typical and greatest rise"}
        return {}

    @property
    def values(self) -> dict[Bound, float]:
        """The bounds understood; a ± magnitude gives both ends. Of a choice the first value stands for all."""
        found = {bound: one.value for bound, one in self.understood.items() if one.value is not None}
        if field_of(self.field).sign != "symmetric" or "options" in found:
            return found
        signed = [bound for bound in found if BOTH_SIDES.match(self.texts[bound])]
        # A lone magnitude of a ± property is ±, as on a sheet.
        magnitude = signed[0] if signed else next(iter(found)) if list(found) in (["typ"], ["max"]) else None
        if magnitude is None or (not signed and found[magnitude] < 0):
            return found
        size = abs(found.pop(magnitude))
        return found | {"min": -size, "max": size}

    def reading(self, *, raw: str, where: Where, when: When | None = None) -> Reading:
        """The reading entered; ValueError where there is a fault."""
        if self.faults:
            raise ValueError("; ".join(self.faults.values()))
        values = self.values
        return Reading(
            field=field_name(self.field),
            min=values.get("min"),
            typ=values.get("typ"),
            max=values.get("max"),
            options=tuple(one.value for one in self._options if one.value is not None),
            when=When() if when is None else when,
            raw=raw,
            where=where,
            status="entered",
        )

    def said(self) -> str:
        """What was typed, in one line: `min 5 pF; max 7 pF`."""
        return "; ".join(
            f"{bound} {self.texts[bound].strip()}" for bound in BOUNDS if self.texts.get(bound, "").strip()
        )

    @cached_property
    def _options(self) -> list[typed.Typed]:
        texts = [text for text in SEPARATORS.split(self.texts.get("options", "").strip()) if text]
        # `8; 10; 12 pF`: the unit of the last one is that of all.
        unit = typed.AMOUNT.fullmatch(texts[-1].strip()) if texts else None
        of_all = (unit["unit"] or "").strip() if unit else ""
        return [self._one(text if re.search(r"\D$", text) else f"{text} {of_all}", "options") for text in texts]

    def _one(self, text: str, bound: Bound) -> typed.Typed:
        asked = asked_for(self.field, fork=self.fork)
        of_field = field_of(self.field).sign
        plain = BOTH_SIDES.sub("", text, count=1).strip()
        minus = plain[:1] in ("-", "−", "–") and of_field in ("symmetric", "negative", "magnitude")
        if minus:
            plain = plain[1:]
        # Plausible ranges are of magnitudes; a coefficient of a fork is negative whether its sign is typed or not.
        sign = -1.0 if of_field == "negative" or (minus and of_field == "symmetric") else 1.0
        said = typed.understand(
            plain, asked, kept=bound in self.kept, factor_of=lambda unit: factor(unit, self.field) if unit else None
        )
        return typed.Typed(_times(said.value, sign), said.fault, _times(said.instead, sign), said.doubtful)


def _times(value: float | None, sign: float) -> float | None:
    return None if value is None else value * sign


def field_name(name: str) -> FieldName:
    """The name of a field of the contract; KeyError where it is none."""
    if name not in FIELD_NAMES:
        raise KeyError(name)
    return name  # type: ignore[return-value]


def asked_for(name: str, *, fork: bool | None) -> typed.Field:
    """A reading's field as the typing rules want it: its unit, and what is plausible for this kind of part."""
    known = field_of(name)
    kinds = {True: (known.fork,), False: (known.mhz,), None: (known.fork, known.mhz)}[
        # The frequency is what tells the one from the other.
        None if name == "frequency_mhz" else fork
    ]
    plausible = min(low for low, _ in kinds), max(high for _, high in kinds)
    return typed.Field(name, "reading", title(name), unit=known.unit, plausible=plausible)


def draft_of(reading: Reading, part: Part) -> Draft:
    """The form filled with a reading as it stands."""
    texts: dict[Bound, str] = {}
    for bound in ("min", "typ", "max"):
        if (value := getattr(reading, bound)) is not None:
            texts[bound] = shown(value, reading.field)
    if reading.options:
        unit = field_of(reading.field).unit
        texts["options"] = with_unit("; ".join(map(exact, reading.options)), unit)
    return Draft(reading.field, texts, fork=fork_of(part))


def fork_of(part: Part) -> bool | None:
    """Whether the part is a tuning fork, which sets what is plausible."""
    return is_fork(part.readings, part.cut)


def shown(value: float, name: str) -> str:
    """A value as its field shows it back, in a unit that can be typed there."""
    return with_unit(exact(value), field_of(name).unit)
