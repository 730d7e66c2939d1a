"""Unit spellings as printed, and what they are in the unit of a field (`units.toml`)."""

from __future__ import annotations

import re
import tomllib
from dataclasses import dataclass, field
from functools import cache, lru_cache
from importlib import resources
from typing import Any

from extract.fold import fold

_TIMES = str.maketrans("×·*", "xxx")
_DROPPED = re.compile(r"[\s.()\[\]{}']")
# What may follow a unit without a space: a bound word ("200µWMax."), or anything that is no letter and no digit.
_END = r"(?:(?![a-zα-ωéäöüß\d])|(?=max|min|typ|nom|std|per\b|over|at\b|to\b|dc\b|ac\b|or\b|and\b))"


@dataclass(frozen=True, slots=True)
class Unit:
    """One spelling: its kind of quantity, its factor to the kind's base unit, and whether something is missing in it."""

    kind: str
    to_base: float
    guessed: bool


@dataclass(frozen=True)
class Kind:
    """One kind of quantity: its spellings, and what a base unit is in each field of that kind."""

    name: str
    fields: dict[str, float]
    pint: str
    exact: dict[str, Unit] = field(repr=False)
    caseless: dict[str, Unit] = field(repr=False)
    pattern: re.Pattern[str] = field(repr=False)

    def unit(self, printed: str) -> Unit | None:
        spelling = _spelling(printed)
        return self.exact.get(spelling) or self.caseless.get(spelling.casefold())


def _spelling(printed: str) -> str:
    return _DROPPED.sub("", fold(printed)).translate(_TIMES)


def _pattern_of(spelling: str) -> str:
    between = r"[\s().]{0,3}" if "/" in spelling or "^" in spelling else " ?"
    body = between.join("[x×*·]" if c == "x" else re.escape(c) for c in spelling)
    if spelling.startswith("x10"):
        body = "(?:" + body + ")"
    return body


def _kind(name: str, table: dict[str, Any]) -> Kind:
    exact: dict[str, Unit] = {}
    caseless: dict[str, Unit] = {}
    for guessed, sizes in ((False, table["sizes"]), (True, table.get("guessed", {}))):
        for size, spellings in sizes.items():
            for printed in spellings:
                spelling, unit = _spelling(printed), Unit(name, float(size), guessed)
                if exact.setdefault(spelling, unit).to_base != unit.to_base:
                    raise ValueError(f"units.toml: {printed!r} has two sizes in [{name}]")
                caseless.setdefault(spelling.casefold(), unit)
    longest_first = sorted(exact, key=len, reverse=True)
    pattern = re.compile("(?:" + "|".join(map(_pattern_of, longest_first)) + ")" + _END, re.IGNORECASE)
    return Kind(name, {k: float(v) for k, v in table["fields"].items()}, table["pint"], exact, caseless, pattern)


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


@lru_cache(maxsize=4096)
def factor(printed_unit: str, field: str) -> float | None:
    """What one `printed_unit` is in the unit of `field` ("kΩ" for `esr_ohm`: 1000.0); None where it is no unit of it."""
    kind = kind_of(field)
    unit = kind.unit(printed_unit)
    return None if unit is None else _rounded(unit.to_base * kind.fields[field])


def guessed(printed_unit: str, field: str) -> bool:
    """Whether `printed_unit` lacks something that the field had to supply ("K" for kΩ, "ppm" for ppm/pF)."""
    unit = kind_of(field).unit(printed_unit)
    return unit is not None and unit.guessed


def unit_at(text: str, field: str, start: int = 0) -> tuple[str, float, int] | None:
    """The unit of `field` printed in folded `text` at `start` (spaces skipped): (unit text, factor, end), else None."""
    kind = kind_of(field)
    found = _match(kind, text, start)
    if found is None:
        return None
    unit = kind.unit(found[0])
    assert unit is not None, found[0]  # noqa: S101 - the pattern is made from the same spellings
    return found[0], _rounded(unit.to_base * kind.fields[field]), found.end()


def other_unit_at(text: str, field: str, start: int = 0) -> tuple[str, float, int] | None:
    """A unit of another kind than that of `field`: (kind's name, factor to the kind's base unit, end), else None."""
    own = kind_of(field)
    best: tuple[str, float, int] | None = None
    for kind in kinds().values():
        if kind is own or kind.name in ("number", "pulling", "parabola"):
            continue
        found = _match(kind, text, start)
        if found is not None and (best is None or found.end() > best[2]):
            unit = kind.unit(found[0])
            if unit is not None and not (unit.guessed and len(found[0]) == 1):
                best = (kind.name, unit.to_base, found.end())
    return best


def _match(kind: Kind, text: str, start: int) -> re.Match[str] | None:
    while start < len(text) and text[start] == " ":
        start += 1
    return kind.pattern.match(text, start)


def _rounded(value: float) -> float:
    """1e-12 * 1e12 is not 1 in binary; factors are powers of ten, so twelve digits say it exactly."""
    return float(f"{value:.12g}")
