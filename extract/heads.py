"""What the heading of one column says, level by level."""

from __future__ import annotations

import re
from dataclasses import dataclass, replace
from functools import lru_cache

from extract import units
from extract.conditions import condition_of
from extract.entries import Bound
from extract.fold import fold
from extract.meaning import Meaning, is_part_token, meaning, part_tokens
from extract.model import When
from extract.number import PLAIN_NUMBER
from extract.tokens import tokens
from extract.wording import Label

BOUNDS: dict[str, Bound] = {"min": "min", "typ": "typ", "max": "max"}
_TRIM = re.compile(r"^[\s(\[|/±]+|[\s)\]|]+$")


@dataclass(frozen=True, slots=True)
class Head:
    """One column's heading. `extra` holds the levels that no vocabulary knows: models, packages, loads, bands."""

    levels: tuple[str, ...]
    label: Label | None = None
    role: str | None = None
    bound: Bound | None = None
    identity: str | None = None
    attribute: str | None = None
    trap: str | None = None
    unit: str = ""
    extra: tuple[str, ...] = ()
    guessed: bool = False

    @property
    def name(self) -> str | None:
        """What the column holds: a field, an identity or an attribute."""
        if self.trap:
            return f"trap {self.trap}"
        beside = "".join(f" {extra}" for extra in self.extra)
        if self.label is not None:
            return self.label.field + beside
        if self.role in ("mode", "cut", "band", "model", "code"):
            return self.role
        if self.identity:
            return self.identity + beside
        return f"attribute {self.attribute}" if self.attribute else None


@lru_cache(maxsize=8192)
def is_unit(text: str) -> bool:
    """Whether the whole text is a unit of some quantity ("kΩ", "(± ppm)", "ppm/pF")."""
    bare = _TRIM.sub("", fold(text))
    if not bare or len(bare) > 16 or PLAIN_NUMBER.fullmatch(bare):
        return False
    spelling = units.spelling_of(bare)
    return any((unit := kind.look_up(spelling)) is not None and unit.sort == "sizes" for kind in units.kinds().values())


@lru_cache(maxsize=4096)
def end_of_range(text: str) -> Bound | None:
    """Which end of a range a column headed "from °C" or "to" holds; None for any other text."""
    said = tokens(text, "operating_temperature_c")
    if not said or any(each.kind not in ("unit", "open", "close") for each in said[1:]):
        return None
    return {"from": BOUNDS["min"], "at": BOUNDS["min"], "to": BOUNDS["max"]}.get(said[0].kind)


# A column headed by nothing but the unit of frequency holds frequencies.
_MEGAHERTZ = re.compile(r"[(\[]?\s*[MkK][Hh][zZ]\s*[)\]]?")
_CONDITION = re.compile(r"^(?P<name>[^\d±]*[^\d±\s(\[,@-])[\s(\[,@]+(?P<condition>[-+±]?\d.*)$", re.DOTALL)


def _parted(levels: tuple[str, ...]) -> tuple[str, ...]:
    """A level such as "Part number -20 to +70 °C" as two: the name, and where its column holds.

    So is "AB-2016 frequency range": the label, and the model that its column is of.
    """
    if len(levels) == 1 and len(tokens := part_tokens(levels[0])) == 1 and meaning(levels[0]).head is None:
        folded = fold(levels[0])
        rest = (folded[: folded.find(tokens[0])] + folded[folded.find(tokens[0]) + len(tokens[0]) :]).strip(" :-/()")
        if meaning(rest).label is not None and meaning(rest).head is not None:
            return rest, tokens[0]
    if len(levels) != 1 or (meaning(levels[0]).head is not None and meaning(levels[0]).label is not None):
        return levels
    match = _CONDITION.match(fold(levels[0]))
    if match is None or meaning(match["name"]).head is None or condition_of(match["condition"]) == When():
        return levels
    if meaning(match["name"]).role in BOUNDS:
        # "typ. 1,1 pF" is a value; only alone is "Typ" the name of a column of types.
        return levels
    return match["name"], match["condition"].rstrip(")]")


@lru_cache(maxsize=8192)
def bound_and_unit(text: str) -> tuple[str, ...]:
    """A level such as "max ppm" or "min. °C" as bound and unit; empty for any other."""
    words = fold(text).strip("()[] ").split()
    for bound, unit in ((words[0], " ".join(words[1:])), (words[-1], " ".join(words[:-1]))) if len(words) > 1 else ():
        if meaning(bound).role in BOUNDS and is_unit(unit):
            return bound, unit
    return ()


def _over_models(known: Meaning, below: tuple[str, ...]) -> Meaning:
    """The head "Type" over the numbers of models is no "typical"."""
    if known.role == "typ" and known.identity is not None and any(map(is_part_token, below)):
        return replace(known, role="value", identity=None)
    return known


@lru_cache(maxsize=4096)
def interpret(levels: tuple[str, ...]) -> Head:
    """Put the levels of one heading together: the label from one of them or from all, the bound and unit from any."""
    levels = ("frequency", *levels) if len(levels) == 1 and _MEGAHERTZ.fullmatch(levels[0].strip()) else _parted(levels)
    levels = tuple(part for level in levels for part in bound_and_unit(level) or (level,))
    known = [_over_models(each, levels[index + 1 :]) for index, each in enumerate(map(meaning, levels))]
    bound = next((BOUNDS[each.role] for each in reversed(known) if each.role in BOUNDS), None)
    unit = next((level for level in reversed(levels) if is_unit(level)), "")
    named = [index for index, each in enumerate(known) if each.head is not None]
    if len(named) > 1:
        whole = meaning(" ".join(levels))
        last, first = known[named[-1]].label, known[named[0]].label
        if last is not None and last.unit and first is not None and first.field != last.field:
            # A column of its own under a group's name: "Series resistance" over "Frequency (MHz)" and "max. (Ω)".
            return _head(levels, known[named[-1]], bound, unit, ())
        if whole.head is not None:
            return _head(levels, whole, bound, unit, ())
        named = named[-1:]
    if named:
        extra = tuple(
            level
            for index, (level, each) in enumerate(zip(levels, known, strict=True))
            if index != named[0] and each.role is None and not is_unit(level)
        )
        return _head(levels, known[named[0]], bound, unit, extra)
    return _unnamed(levels, known, bound, unit)


def _unnamed(levels: tuple[str, ...], known: list[Meaning], bound: Bound | None, unit: str) -> Head:
    whole = meaning(" ".join(levels)) if levels else None
    if whole is not None and (whole.head is not None or (whole.label is not None and whole.trap is None)):
        return _head(levels, whole, bound, unit, ())
    trap = next((each.trap for each in known if each.trap), None)
    role = next((each.role for each in reversed(known) if each.role), None)
    extra = tuple(level for level, each in zip(levels, known, strict=True) if each.role is None and not is_unit(level))
    return Head(levels, role=role, bound=bound, unit=unit, extra=extra, trap=trap)


def _head(levels: tuple[str, ...], base: Meaning, bound: Bound | None, unit: str, extra: tuple[str, ...]) -> Head:
    label = base.label
    return Head(
        levels,
        label=label,
        role=base.role,
        bound=bound or (BOUNDS.get(label.bound or "") if label else None),
        identity=None if label else base.identity,
        attribute=None if label else base.attribute,
        trap=base.trap,
        unit=unit,
        extra=extra,
    )
