"""How one part's reading stands to another's: same, tighter, looser, different or unknown; and as words and numbers."""

from __future__ import annotations

import math
import tomllib
from collections.abc import Callable, Mapping
from dataclasses import dataclass
from functools import cache
from pathlib import Path
from typing import Any, Literal

from compare.explain import figure
from compare.stated import MID_AT_LIMIT, ONE_SIDED_AS_BOTH, Span, Taken
from extract.model import Reading

Relation = Literal["same", "tighter", "looser", "different", "unknown"]
EQUAL = 1e-9
"""Relative; readings are decimals as printed, so that only the arithmetic of reading them can set them apart."""


@dataclass(frozen=True)
class Rule:
    """One row of `relations.toml`."""

    name: str
    unit: str
    better: str
    rests: tuple[str, ...]
    promise: bool = False
    asked: Literal["always", "stated"] | None = None


@cache
def rules() -> Mapping[str, Rule]:
    """The rule for each field, in the order of the lines."""
    tables = tomllib.loads((Path(__file__).parent / "relations.toml").read_text(encoding="utf-8"))
    return {field: Rule(**{**row, "rests": tuple(row["rests"])}) for field, row in tables.items()}


def relation(field: str, old: Taken, new: Taken) -> Relation:
    """How the new reading stands to the old one."""
    rule = rules()[field]
    if not old.stated or not new.stated:
        return "unknown"
    if rule.promise and old.typical_only != new.typical_only:
        return _typical_beside_limit(old, new)
    return ORDERS[rule.better](old.span, new.span)


def _typical_beside_limit(old: Taken, new: Taken) -> Relation:
    """A typical value promises nothing: above the other's limit it is the looser one, else nothing can be told."""
    typical, limit = (old, new) if old.typical_only else (new, old)
    if typical.span.mid <= limit.span.high:
        return "unknown"
    return "tighter" if typical is old else "looser"


def close(one: float, other: float) -> bool:
    return one == other or math.isclose(one, other, rel_tol=EQUAL)


def _by_size(old: float, new: float, tighter_if_less: bool) -> Relation:
    if close(old, new):
        return "same"
    return "tighter" if (new < old) == tighter_if_less else "looser"


def _low(old: Span, new: Span) -> Relation:
    return _by_size(old.high, new.high, tighter_if_less=True)


def _high(old: Span, new: Span) -> Relation:
    return _by_size(old.low, new.low, tighter_if_less=False)


def _small(old: Span, new: Span) -> Relation:
    before, after = (max(abs(span.low), abs(span.high)) for span in (old, new))
    return _by_size(before, after, tighter_if_less=True)


def _holds(outer: Span, inner: Span) -> bool:
    low = outer.low <= inner.low or close(outer.low, inner.low)
    return low and (inner.high <= outer.high or close(inner.high, outer.high))


def _inside(old: Span, new: Span) -> Relation:
    if _holds(old, new):
        return "same" if _holds(new, old) else "tighter"
    return "looser" if _holds(new, old) else "different"


def _outside(old: Span, new: Span) -> Relation:
    return _inside(new, old)


def _alike(old: Span, new: Span) -> Relation:
    same = close(old.low, new.low) and close(old.mid, new.mid) and close(old.high, new.high)
    return "same" if same else "different"


def _spread(old: Span, new: Span) -> Relation:
    """A value alone is no narrow band: only two bands can lie inside one another."""
    if old.low < old.high and new.low < new.high:
        return _inside(old, new)
    return _alike(old, new)


ORDERS: Mapping[str, Callable[[Span, Span], Relation]] = {
    "low": _low,
    "high": _high,
    "small": _small,
    "inside": _inside,
    "outside": _outside,
    "alike": _alike,
    "spread": _spread,
}


WORDS: Mapping[str, tuple[str, str]] = {
    "low": ("lower", "higher"),
    "high": ("higher", "lower"),
    "small": ("smaller", "greater"),
    "inside": ("narrower", "wider"),
    "outside": ("wider", "narrower"),
    "alike": ("tighter", "looser"),
    "spread": ("narrower", "wider"),
}
"""For each way of comparing, what a person calls the tighter and the looser one."""


def relation_words(field: str, found: Relation) -> str:
    """`higher, looser`, `the same`, `not the same`."""
    if found in ("same", "different"):
        return "the same" if found == "same" else "not the same"
    word = WORDS[rules()[field].better][found == "looser"]
    return word if word == found else f"{word}, {found}"


def reading_value(reading: Reading) -> dict[str, Any]:
    """A reading's bounds, and the same as text."""
    return {
        "min": reading.min,
        "typ": reading.typ,
        "max": reading.max,
        "options": list(reading.options),
        "text": reading_words(reading),
    }


def reading_words(reading: Reading) -> str:
    """`±10 ppm`, `60 Ω max`, `-40 to 85 °C`, `8 pF`: the bounds as a person says them."""
    unit = rules()[reading.field].unit
    if reading.options:
        sign = "±" if reading.field in ONE_SIDED_AS_BOTH else ""
        return f"{', '.join(sign + figure(value) for value in reading.options)} {unit}".rstrip()
    low, typ, high = reading.min, reading.typ, reading.max
    if low is not None and high is not None:
        band = f"±{figure(high)}" if low == -high else f"{figure(low)} to {figure(high)}"
        within = f"{exact(typ)} ({band})" if typ is not None and not low < typ == high else band
        return f"{within} {unit}".rstrip()
    said = []
    if low is not None:
        said.append(f"{figure(low)} {unit}".rstrip() + " min")
    if typ is not None:
        word = " typ" if reading.field in MID_AT_LIMIT and not reading.bare else ""
        said.append(f"{exact(typ)} {unit}".rstrip() + word)
    if high is not None:
        said.append(f"{figure(high)} {unit}".rstrip() + " max")
    return ", ".join(said)


def exact(value: float) -> str:
    """All the digits that a sheet gave."""
    return f"{value:.10g}"


def taken_value(field: str, taken: Taken) -> dict[str, Any] | None:
    """What is taken of a field: the bounds, text with its places, or None where nothing is stated."""
    if not taken.stated:
        return None
    unit = rules()[field].unit
    if math.isinf(taken.span.mid):
        return {"min": None, "typ": None, "max": None, "options": [], "text": "none (series resonance)"}
    if not taken.readings:
        low, mid, high = taken.span.low, taken.span.mid, taken.span.high
        text = f"{figure(mid)} {unit}".rstrip() + (
            f" ({figure(low)} to {figure(high)}, derived)" if low != high else ""
        )
        return {"min": low, "typ": mid, "max": high, "options": [], "text": text, "taken": _taken(taken.span)}
    value = reading_value(taken.readings[0])
    if len(taken.readings) > 1:
        value["text"] = "; ".join(dict.fromkeys(reading_words(r) for r in taken.readings[:3]))
    if value["options"]:
        value["text"] = f"{figure(taken.span.high)} {unit} of {value['text']}"
    places = "; ".join(dict.fromkeys(str(r.where) for r in taken.readings[:2]))
    return {**value, "text": f"{value['text']} ({places})", "taken": _taken(taken.span)}


def _taken(span: Span) -> dict[str, float | None]:
    """The ends that count, an open one as None: of options the one that was taken."""
    ends = {"low": span.low, "mid": span.mid, "high": span.high}
    return {name: value if math.isfinite(value) else None for name, value in ends.items()}
