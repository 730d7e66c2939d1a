"""Where a value holds, as printed: bands of frequency and load, temperature ranges, years, a mode."""

from __future__ import annotations

from functools import lru_cache

from extract.fields import field_of
from extract.fold import fold
from extract.groups import Group, read_items
from extract.model import When
from extract.number import Number, decide
from extract.tokens import Token, tokens
from extract.units import kind_of

# A band open at one end gets an end no crystal reaches, since the contract writes a band as a pair of numbers.
LOWEST_MHZ, HIGHEST_MHZ = 0.0, 1000.0
# Of a pF figure in a condition only these fields depend; beside C0 or C1 it is how they were measured.
_DEPENDS_ON_LOAD = frozenset(
    {"esr_ohm", "pulling_sensitivity_ppm_per_pf", "frequency_tolerance_ppm", "drive_level_uw", "frequency_mhz", ""}
)
# A single frequency behind "at" is a band of resistance, and of nothing else: C0 is measured "at 1 MHz".
_DEPENDS_ON_FREQUENCY = frozenset({"esr_ohm", "drive_level_uw", "frequency_tolerance_ppm", "frequency_stability_ppm"})
_KINDS = {"frequency": "frequency_mhz", "temperature": "operating_temperature_c", "capacitance": "load_capacitance_pf"}


def joined(one: When, other: When) -> When:
    """Both conditions together; where both speak of the same, `other`'s word."""
    if other == When():
        return one
    if one == When():
        return other
    return When(**{**one.model_dump(), **other.model_dump()})


@lru_cache(maxsize=16384)
def read_when(text: str) -> When:
    """Where the value beside `text` holds: "-20 to +70 °C", "12 ≤ f < 16 MHz", "CL = 12.5 pF", "10 years", "3rd OT".

    Reference and measuring conditions ("25 °C ±3 °C", "at 1 MHz", "100 V DC") restrict nothing and give an empty When.
    """
    return when_of(fold(text))


def when_of(folded: str) -> When:
    """As `read_when`, for text that is folded already."""
    found = When()
    for item in read_items(tokens(folded, "frequency_mhz"), ""):
        if item.group is not None:
            found = joined(found, condition(item.group, "", own="frequency"))
        elif item.word is not None and item.word.kind == "years":
            found = joined(found, When(years=item.word.value))
        elif item.word is not None and item.word.kind == "mode":
            found = joined(found, When(mode=item.word.meaning))
    return found


def condition(group: Group, field: str, *, own: str = "") -> When:
    """What a number that is no value of `field` says of where the value holds; an empty When where it says nothing.

    `own` is the kind of quantity that the group's own units are of, where the text was read for conditions alone.
    """
    kind = group.foreign or (own if group.low_unit or group.high_unit else "")
    if not kind and group.before == "symbol load_capacitance_pf" and field in _DEPENDS_ON_LOAD:
        load = _size(group.low, None, "load_capacitance_pf")
        return When(load_capacitance_pf=(load, load))
    ends = _ends(group, _KINDS[kind], kind) if kind in _KINDS and not group.low.glued else None
    if ends is None or not _limits(group, kind, field):
        return When()
    return When(**{_KEYS[kind]: ends})


_KEYS = {"frequency": "frequency_mhz", "temperature": "temperature_c", "capacitance": "load_capacitance_pf"}


def _limits(group: Group, kind: str, field: str) -> bool:
    """Whether the quantity restricts the value, or only says how it was measured or what it refers to."""
    if kind == "temperature":
        return group.shape == "range"
    if group.shape not in ("range", "single"):
        return False
    if kind == "capacitance":
        other_symbol = group.before.startswith("symbol") and group.before != "symbol load_capacitance_pf"
        return field in _DEPENDS_ON_LOAD and not other_symbol
    measured_at = group.shape == "single" and group.bound is None and group.before == "at"
    return not measured_at or field in _DEPENDS_ON_FREQUENCY


def _ends(group: Group, field: str, kind: str) -> tuple[float, float] | None:
    low = _size(group.low, group.low_unit or group.high_unit, field)
    if kind == "frequency" and low < 0:
        return None
    if group.shape == "range" and group.high is not None:
        high = _size(group.high, group.high_unit or group.low_unit, field)
        return (low, high) if low <= high else (high, low)
    if kind == "frequency" and group.bound == "max":
        return (LOWEST_MHZ, low)
    if kind == "frequency" and group.bound == "min":
        return (low, HIGHEST_MHZ)
    if group.bound is not None and kind == "temperature":
        return None
    return (low, low)


def _size(number: Token, unit: Token | None, field: str) -> float:
    """A number in the unit of `field`; own units carry the factor to it, others the factor to their base unit."""
    scale = 1.0
    if unit is not None:
        scale = unit.value if unit.kind == "unit" else unit.value * kind_of(field).fields[field]
    value, _ = decide(number.number or Number("", 0.0), scale, field_of(field))
    return float(f"{(-value if number.meaning == '-' else value) * scale:.12g}")


@lru_cache(maxsize=16384)
def read_band(text: str, unit: str | None = None) -> tuple[float, float] | None:
    """A frequency band as printed, in MHz; None where `text` is none.

    "12.001 - 20.000", "8 ~ 11.2892MHz", "16.0 MHz ≤ f < 18.0 MHz", "13560 to 15999kHz", "below 10 MHz", "12.000" alone.
    `unit` is the head's ("MHz", "kHz"). Without any unit a number too great for MHz is kHz.
    """
    when = when_of(fold(text) if unit is None else _with_unit(fold(text), unit))
    if when.frequency_mhz is not None:
        return when.frequency_mhz
    if unit is not None:
        return None
    items = [item for item in read_items(tokens(fold(text), "frequency_mhz"), "") if item.group is not None]
    if len(items) != 1 or items[0].group is None or items[0].group.foreign or items[0].group.low.glued:
        return None
    group = items[0].group
    ends = _ends(group, "frequency_mhz", "frequency") if group.shape in ("range", "single") else None
    if ends is not None and ends[1] > HIGHEST_MHZ and group.bound is None:
        ends = (ends[0] / 1000, ends[1] / 1000)
    return ends if ends is not None and group.low.meaning != "-" else None


def _with_unit(folded: str, unit: str) -> str:
    """The head's unit behind every number that has none."""
    pieces = tokens(folded, "frequency_mhz")
    out, end = "", 0
    for index, piece in enumerate(pieces):
        has_unit = index + 1 < len(pieces) and pieces[index + 1].kind in ("unit", "other")
        if piece.kind == "number" and not has_unit:
            out += folded[end : piece.end] + " " + fold(unit) + " "
            end = piece.end
    return out + folded[end:]
