"""Which of a part's readings hold in a case, and what span their printed bounds stand for."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable, Mapping, Sequence
from dataclasses import dataclass

from extract.model import Part, Reading, When

ROOM_C = 25.0
END_SLACK = 1e-6  # a band end printed with few decimals still belongs to the band
MID_AT_LIMIT = ("esr_ohm", "shunt_capacitance_pf", "drive_level_uw")
ABOVE_ZERO = (
    *MID_AT_LIMIT,
    "load_capacitance_pf",
    "motional_capacitance_ff",
    "motional_inductance_mh",
    "quality_factor",
    "capacitance_ratio",
)
ONE_SIDED_AS_BOTH = ("frequency_tolerance_ppm", "frequency_stability_ppm", "ageing_ppm")


@dataclass(frozen=True)
class Span:
    """Low, mid and high as numbers; NaN where there is none."""

    low: float
    mid: float
    high: float

    @classmethod
    def at(cls, value: float) -> Span:
        return cls(value, value, value)

    @property
    def known(self) -> bool:
        return not math.isnan(self.mid)


UNKNOWN = Span.at(math.nan)


@dataclass(frozen=True)
class Case:
    """The case that a reading must hold in. None: not settled, so that any band may hold."""

    frequencies_mhz: tuple[float, ...]
    mode: str | None = None
    load_pf: float | None = None
    package: str | None = None
    temperature_c: float | None = ROOM_C


@dataclass(frozen=True, slots=True)
class Facts:
    """What a sheet says of one part, its readings by field: sorted once, asked for many times."""

    package: str | None
    mode: str | None
    cut: str | None
    resonance: str | None
    by_field: Mapping[str, Sequence[Reading]]

    @classmethod
    def of(cls, part: Part) -> Facts:
        by_field: dict[str, list[Reading]] = {}
        for reading in part.readings:
            by_field.setdefault(reading.field, []).append(reading)
        return cls(part.package, part.mode, part.cut, part.resonance, by_field)

    def __getitem__(self, field: str) -> Sequence[Reading]:
        return self.by_field.get(field, ())

    def __contains__(self, field: str) -> bool:
        return bool(self.by_field.get(field))


@dataclass(frozen=True)
class Taken:
    """A field as it is taken: its span, the readings it comes from, and what kind of promise they are.

    `limit_alone`: a greatest value and nothing else. `typical_only`: printed as typical, with no limit.
    `at_temperature`: the readings are stated for a band of temperature.
    """

    span: Span = UNKNOWN
    readings: tuple[Reading, ...] = ()
    limit_alone: bool = False
    typical_only: bool = False
    at_temperature: bool = False
    said: tuple[str, ...] = ()

    @property
    def stated(self) -> bool:
        return self.span.known


NOTHING = Taken()


def _in_band(value: float, band: tuple[float, float]) -> bool:
    slack = END_SLACK * max(abs(band[0]), abs(band[1]))
    return band[0] - slack <= value <= band[1] + slack


def holds(when: When, case: Case) -> bool:
    """True where `when` does not speak against the case."""
    if when.frequency_mhz and not any(_in_band(f, when.frequency_mhz) for f in case.frequencies_mhz):
        return False
    if when.load_capacitance_pf and case.load_pf is not None and not _in_band(case.load_pf, when.load_capacitance_pf):
        return False
    temperature = case.temperature_c
    if when.temperature_c and temperature is not None and not _in_band(temperature, when.temperature_c):
        return False
    if when.mode and case.mode and when.mode != case.mode:
        return False
    return not (when.package and case.package and when.package.casefold() != case.package.casefold())


def _as_bands(when: When) -> tuple[tuple[float, float] | str | None, ...]:
    return when.frequency_mhz, when.load_capacitance_pf, when.temperature_c, when.mode, when.package


def narrower(one: When, other: When) -> bool:
    """True where `one` lies inside `other` and is not the same."""
    ones, others = _as_bands(one), _as_bands(other)
    return ones != others and all(_inside(a, b) for a, b in zip(ones, others, strict=True))


def _inside(a: tuple[float, float] | str | None, b: tuple[float, float] | str | None) -> bool:
    if b is None or a == b:
        return True
    if isinstance(a, tuple) and isinstance(b, tuple):
        return b[0] <= a[0] and a[1] <= b[1]
    return False


def narrowest(readings: Iterable[Reading]) -> list[Reading]:
    """Those that no other one lies inside of: a narrower `when` goes before a wider."""
    listed = list(readings)
    if len(listed) < 2:
        return listed
    return [one for one in listed if not any(narrower(other.when, one.when) for other in listed)]


def readings_for(facts: Facts, field: str, case: Case) -> list[Reading]:
    """The readings of a field that count in the case; empty where no band holds it.

    A capacitance or resistance of zero or below is none (sheets print 0 where they state nothing).
    """
    stated = (r for r in facts[field] if holds(r.when, case))
    return narrowest(r for r in stated if printed(r))


def bound(reading: Reading, name: str) -> float | None:
    """One bound as it counts: a resistance or capacitance of zero or below is none at all."""
    value: float | None = getattr(reading, name)
    return None if value is not None and value <= 0 and reading.field in ABOVE_ZERO else value


def printed(reading: Reading) -> list[float]:
    """Every number of a reading that counts."""
    bounds = [bound(reading, name) for name in ("min", "typ", "max")]
    options = [value for value in reading.options if value > 0 or reading.field not in ABOVE_ZERO]
    return [value for value in (*bounds, *options) if value is not None]


def span_of(reading: Reading) -> Span:
    """Bounds as a span: an end that is open is taken at the nearest stated value; mid is typical, else the limit."""
    if reading.field in ONE_SIDED_AS_BOTH and reading.min is None:
        return _both_ways(reading)
    values = printed(reading)
    low, high = min(values), max(values)
    typical = bound(reading, "typ")
    if typical is not None:
        return Span(low, typical, high)
    if reading.field in ONE_SIDED_AS_BOTH:
        return Span(low, min(max(0.0, low), high), high)
    return Span(low, high if reading.field in MID_AT_LIMIT else (low + high) / 2, high)


def _both_ways(reading: Reading) -> Span:
    """One number alone for a ppm error is its size, to either side."""
    size = max(abs(value) for value in printed(reading))
    return Span(-size, 0.0, size)


def union(spans: Sequence[Span]) -> Span:
    """Of several readings that hold, the worse for each requirement: the span over all of them."""
    if not spans:
        return UNKNOWN
    greatest = max(spans, key=lambda span: span.high)
    return Span(min(s.low for s in spans), greatest.mid, greatest.high)


def take(facts: Facts, field: str, case: Case, only: Callable[[Reading], bool] | None = None) -> Taken:
    """A field as the case takes it."""
    found = [r for r in readings_for(facts, field, case) if only is None or only(r)]
    if not found:
        return NOTHING
    said = (f"{len(found)} readings of {field} hold; the worse counts for each requirement",) if len(found) > 1 else ()
    return Taken(
        span=union([span_of(r) for r in found]),
        readings=tuple(found),
        limit_alone=all(_is_limit_alone(r) for r in found),
        typical_only=all(_is_typical_only(r) for r in found),
        at_temperature=any(r.when.temperature_c is not None for r in found),
        said=said,
    )


def _is_limit_alone(reading: Reading) -> bool:
    if reading.options or bound(reading, "min") is not None:
        return False
    if bound(reading, "typ") is not None:
        return reading.bare is True and reading.max is None
    return reading.max is not None


def _is_typical_only(reading: Reading) -> bool:
    """No greatest value is promised: typical (and not bare), or a least one alone."""
    return reading.max is None and not reading.options and reading.bare is not True


def rated_drive(facts: Facts, case: Case) -> Taken:
    """The rated drive: max, else a bare value, else typ; of several readings the least."""
    found = readings_for(facts, "drive_level_uw", case)
    if not found:
        return NOTHING
    limits = [r for r in found if r.max is not None] or [r for r in found if r.bare and r.typ is not None] or found
    rated = min(_rating(r) for r in limits)
    return Taken(Span.at(rated), tuple(r for r in limits if _rating(r) == rated))


def _rating(reading: Reading) -> float:
    return next(
        (value for name in ("max", "typ") if (value := bound(reading, name)) is not None), max(printed(reading))
    )
