"""Unit spellings as printed, and what they are in the unit of a field (`units.toml`)."""

from __future__ import annotations

import re
import tomllib
from dataclasses import dataclass, field
from functools import cache, lru_cache
from importlib import resources
from typing import Any

from extract.fold import fold

_TIMES = str.maketrans("×·*X", "xxxx")
_DROPPED = frozenset(" .()[]{}'\n")
_LONGEST = 40
# What may follow a unit without a space: a bound word ("200µWMax."), or anything that is no letter and no digit.
_END = re.compile(
    r"(?![a-zα-ωéäöüß\d])|(?=max|min|typ|nom|std|mit|per\b|over|at\b|to\b|dc\b|ac\b|or\b|and\b|x\d)", re.IGNORECASE
)


@dataclass(frozen=True, slots=True)
class Unit:
    """One spelling: its kind of quantity, its factor to the base unit, its section (sizes, bare, guessed)."""

    kind: str
    to_base: float
    sort: str


@dataclass(frozen=True)
class Kind:
    """One kind of quantity: its spellings, and what a base unit is in each field of that kind."""

    name: str
    fields: dict[str, float]
    pint: str
    exact: dict[str, Unit] = field(repr=False)
    caseless: dict[str, Unit] = field(repr=False)

    def unit(self, printed: str) -> Unit | None:
        """The unit that `printed` is as a whole, in any case, with any spaces and brackets in it."""
        return self.look_up(spelling_of(printed))

    def look_up(self, spelling: str) -> Unit | None:
        return self.exact.get(spelling) or self.caseless.get(spelling.casefold())


def spelling_of(printed: str) -> str:
    """How a unit is looked up (`Kind.look_up`): folded, without spaces and brackets."""
    return "".join(char for char in fold(printed).translate(_TIMES) if char not in _DROPPED)


def _kind(name: str, table: dict[str, Any]) -> Kind:
    exact: dict[str, Unit] = {}
    caseless: dict[str, Unit] = {}
    for sort in ("sizes", "bare", "guessed"):
        for size, spellings in table.get(sort, {}).items():
            for printed in spellings:
                spelling, unit = spelling_of(printed), Unit(name, float(size), sort)
                if exact.setdefault(spelling, unit).to_base != unit.to_base:
                    raise ValueError(f"units.toml: {printed!r} has two sizes in [{name}]")
                caseless.setdefault(spelling.casefold(), unit)
    return Kind(name, {k: float(v) for k, v in table["fields"].items()}, table["pint"], exact, caseless)


@cache
def kinds() -> dict[str, Kind]:
    """Every kind of quantity by its name, those of fields first."""
    text = resources.files("extract").joinpath("units.toml").read_text(encoding="utf-8")
    return {name: _kind(name, table) for name, table in tomllib.loads(text).items()}


@cache
def kind_of(field_name: str) -> Kind:
    """The kind of quantity that a field is; KeyError where no kind lists the field."""
    for kind in kinds().values():
        if field_name in kind.fields:
            return kind
    raise KeyError(field_name)


@cache
def _of_fields() -> frozenset[str]:
    """The caseless spellings of all units that some field is read in."""
    return frozenset(spelling for kind in kinds().values() if kind.fields for spelling in kind.caseless)


def is_unit(text: str) -> bool:
    """Whether the whole text is a unit of some field, printed in any spelling."""
    return bool(text) and len(text) < _LONGEST and spelling_of(text).casefold() in _of_fields()


@lru_cache(maxsize=4096)
def factor(printed_unit: str, field: str) -> float | None:
    """What one `printed_unit` is in the unit of `field` ("kΩ" for `esr_ohm`: 1000.0); None where it is none of it."""
    kind = kind_of(field)
    unit = kind.unit(printed_unit)
    return None if unit is None else _rounded(unit.to_base * kind.fields[field])


def guessed(printed_unit: str, field: str) -> bool:
    """Whether `printed_unit` lacks something that the field had to supply ("ppm" for ppm/pF, "MW" for mW)."""
    unit = kind_of(field).unit(printed_unit)
    return unit is not None and unit.sort == "guessed"


def unit_at(text: str, field: str, start: int = 0) -> tuple[str, float, int] | None:
    """The unit of `field` printed in folded `text` at `start` (spaces skipped): (unit text, factor, end), else None."""
    kind = kind_of(field)
    foreign = _foreign(kind.name)
    for begin, end, spelling in _spellings_at(text, start):
        if unit := kind.look_up(spelling):
            return text[begin:end], _rounded(unit.to_base * kind.fields[field]), end
        if "/" in spelling and spelling.casefold() in foreign:
            # "ppm/°C²" is no ppm, and "ppm/pF" is none.
            return None
    return None


@cache
def _foreign(own: str) -> dict[str, Unit]:
    """The units of every other kind by caseless spelling, but for those that are one only beside their own field."""
    found: dict[str, Unit] = {}
    for kind in kinds().values():
        if kind.name not in (own, "number"):
            for spelling, unit in kind.caseless.items():
                if unit.sort == "sizes":
                    found.setdefault(spelling, unit)
    return found


def other_unit_at(text: str, field: str, start: int = 0) -> tuple[str, float, int] | None:
    """A unit of another kind than that of `field`: (kind's name, factor to the kind's base unit, end), else None."""
    table = _foreign(kind_of(field).name)
    for _, end, spelling in _spellings_at(text, start):
        if unit := table.get(spelling.casefold()):
            exact = kinds()[unit.kind].exact.get(spelling)
            if exact is None and len(spelling) == 1 and spelling.casefold() != "c":
                continue
            return unit.kind, (exact or unit).to_base, end
    return None


@lru_cache(maxsize=4096)
def _spellings_at(text: str, start: int) -> tuple[tuple[int, int, str], ...]:
    """What may be a unit at `start`: (begin, end, spelling without spaces and brackets), the longest first."""
    while start < len(text) and text[start] == " ":
        start += 1
    if start == len(text) or text[start] in _DROPPED or text[start].isdecimal() and not text.startswith("10", start):
        return () if not text.startswith("0C", start) else ((start, start + 2, "0C"),)
    spelling, found, gap = "", [], 0
    for at in range(start, min(start + _LONGEST, len(text))):
        char = text[at]
        if char in _DROPPED:
            gap += 1
            if gap > 3:
                break
            continue
        gap = 0
        spelling += char.translate(_TIMES)
        if _END.match(text, at + 1):
            found.append((start, at + 1, spelling))
    return tuple(found[::-1])


def _rounded(value: float) -> float:
    """1e-12 * 1e12 is not 1 in binary; factors are powers of ten, so twelve digits say it exactly."""
    return float(f"{value:.12g}")
