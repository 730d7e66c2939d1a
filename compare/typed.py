"""What a person types into the bench's fields, read with unit and decimal comma and shown back as understood."""

from __future__ import annotations

import math
import re
import tomllib
from collections.abc import Callable, Mapping
from dataclasses import dataclass, field
from functools import cache
from pathlib import Path
from typing import Any

from compare.figures import exact, scale, with_unit

AMOUNT = re.compile(r"(?P<sign>[-+]?)\s*(?P<digits>\d[\d\s.,]*(?:[eE][-+]?\d+)?|[.,]\d+)\s*(?P<unit>\D.*)?")
THOUSANDS_OR_DECIMALS = re.compile(r"\d{1,3}[.,]\d{3}")
GROUPS = re.compile(r"\d{1,3}(?:[.,]\d{3})+")
WITHOUT_END = {"inf", "infinite", "∞", "without end", "none"}


@dataclass(frozen=True)
class Field:
    """One field of the bench: see typed.toml for what the keys mean."""

    key: str
    group: str
    label: str
    kind: str = "number"
    unit: str = ""
    plausible: tuple[float, float] = (float("-inf"), float("inf"))
    blank: str = ""
    help: str | None = None
    options: Mapping[str, str] = field(default_factory=dict)


@dataclass(frozen=True)
class Typed:
    """What was understood. `value` is None where nothing may be used; then `fault` says why, unless the field is blank.

    `instead` is a value that was probably meant, offered beside the fault; `doubtful` means that the value is only
    held back until a person says that it is so.
    """

    value: float | None = None
    fault: str = ""
    instead: float | None = None
    doubtful: bool = False


@cache
def fields() -> dict[str, Field]:
    """Every field by its key, in the order shown."""
    rows = _table()["field"]
    return {
        row["key"]: Field(**{**row, "plausible": tuple(row["plausible"])} if "plausible" in row else row)
        for row in rows
    }


def layout(group: str) -> list[list[tuple[Field | None, int]]]:
    """The form's rows of one group: each place a field, or None, with its width in places."""
    of = group.removesuffix("_rest")
    own = {one.key.partition(".")[2]: one for one in fields().values() if one.group == of}
    rows: list[list[tuple[Field | None, int]]] = []
    for row in _table()["layout"][group]:
        places = [place.partition("*") for place in row]
        rows.append([(own[name] if name else None, int(width or 1)) for name, _, width in places])
    return rows


@cache
def _table() -> dict[str, Any]:
    return tomllib.loads(Path(__file__).with_name("typed.toml").read_text(encoding="utf-8"))


@cache
def units(unit: str) -> Mapping[str, float]:
    """Spellings that may be typed in a field of this unit, with the factor to it; empty for a ratio."""
    known: Mapping[str, Mapping[str, float]] = _table()["unit"]
    return known.get(unit, {})


def understand(
    text: str, asked: Field, *, kept: bool = False, factor_of: Callable[[str], float | None] | None = None
) -> Typed:
    """Read `text` as the amount that `asked` wants; `kept`: a person has said that an unlikely value is so.

    `factor_of` gives the factor of a unit's spelling where the field is none of the bench's.
    """
    plain = _plain(text)
    if not plain:
        return Typed()
    if plain.casefold() in WITHOUT_END and asked.key.endswith("_kohm"):
        return Typed(value=float("inf"))
    found = AMOUNT.fullmatch(plain)
    if found is None:
        example = with_unit("12.5", asked.unit)
        return Typed(fault=f"“{text.strip()}” is no number; write it like {example}")
    spelling = (found["unit"] or "").strip()
    factor = _factor(spelling, asked.unit)
    if factor is None and factor_of is not None:
        factor = factor_of(spelling)
    if factor is None:
        known = ", ".join(
            dict.fromkeys(spelling for spelling in units(asked.unit) if len(spelling) > 1 or asked.unit in "V%")
        )
        wanted = f"{known or asked.unit} are" if known or asked.unit else "this is a plain number"
        return Typed(fault=f"“{found['unit'].strip()}”: unit not known; {wanted}")
    sign = -1 if found["sign"] == "-" else 1
    # Twelve digits are more than anybody types, and 0.0047 nF becomes 4.7 pF and not 4.700000000000001.
    values = [float(f"{sign * factor * value:.12g}") for value in _numbers(found["digits"])]
    return _weighed(values, asked, kept=kept)


def shown(value: float, asked: Field) -> str:
    """The value as the field shows it back: `12.5 pF`."""
    if math.isinf(value):
        return "without end"
    factor, unit = scale(asked.unit, value)
    # What is shown back must be one of the units that can be typed there.
    return with_unit(exact(value * factor), unit) if unit in units(asked.unit) else with_unit(exact(value), asked.unit)


def _plain(text: str) -> str:
    folded = text.replace("−", "-").replace("–", "-").replace("Ω", "Ω").replace("μ", "µ")
    return folded.strip().removeprefix("±").removeprefix("+/-").strip()


def _factor(spelling: str, unit: str) -> float | None:
    if not spelling:
        return 1.0
    known = units(unit)
    if spelling in known:
        return known[spelling]
    alike = {factor for name, factor in known.items() if name.casefold() == spelling.casefold()}
    return alike.pop() if len(alike) == 1 else None


def _numbers(digits: str) -> list[float]:
    """What the digits can mean, likeliest first: `12,5` is 12.5 alone, `12,500` is 12.5 or 12500."""
    tight = re.sub(r"\s+", "", digits).rstrip(".,")
    marks = [mark for mark in tight if mark in ".,"]
    if len(marks) > 1 and len(set(marks)) == 2:
        last = tight[max(tight.rfind("."), tight.rfind(","))]
        tight = tight.replace("," if last == "." else ".", "").replace(last, ".")
        return [float(tight)] if tight.count(".") <= 1 else []
    if len(marks) > 1:
        return [float(tight.replace(marks[0], ""))] if GROUPS.fullmatch(tight) else []
    decimal = float(tight.replace(",", "."))
    if "," in marks and THOUSANDS_OR_DECIMALS.fullmatch(tight):
        return [decimal, float(tight.replace(",", ""))]
    return [decimal]


def _weighed(values: list[float], asked: Field, *, kept: bool) -> Typed:
    low, high = asked.plausible
    likely = [value for value in values if value == 0 or low <= value <= high]
    if len(likely) > 1:
        first, second = (shown(value, asked) for value in likely)
        return Typed(fault=f"can be {first} or {second}; write it without the comma", instead=likely[0])
    if likely:
        return Typed(value=likely[0])
    if not values:
        return Typed(fault="several decimal marks in one number; write it with one")
    value = values[0]
    if value < 0 <= low:
        # No bench takes it, so there is nothing to keep.
        return Typed(fault=f"must not be below 0, got {shown(value, asked)}")
    if kept:
        return Typed(value=value)
    slips = (float(f"{value * slip:.12g}") for slip in (1e-3, 1e3, 1e-6, 1e6))
    meant = next((slip for slip in slips if low <= slip <= high), None)
    limits = f"plausible is {exact(low)} to {with_unit(exact(high), asked.unit)}"
    ask = f" Meant {shown(meant, asked)}?" if meant is not None else ""
    return Typed(fault=f"{shown(value, asked)}: {limits}.{ask} Not used until you say.", instead=meant, doubtful=True)
