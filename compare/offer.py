"""Which parts offer the bench's frequency, and each as one offer: options chosen, readings taken."""

from __future__ import annotations

import math
import re
from collections.abc import Collection, Mapping, Sequence
from dataclasses import dataclass, replace

from compare.bench import Bench
from compare.stated import (
    NOTHING,
    Case,
    Facts,
    Span,
    Taken,
    bound,
    holds,
    narrowest,
    printed,
    rated_drive,
    readings_for,
    span_of,
    take,
    union,
)
from extract.model import Part, Reading, SpecSheet

SAME_PPM, ROUNDED_PPM, NEAR_PPM = 1.0, 50.0, 500.0
OVERTONES = {"fundamental": 1, "third": 3, "fifth": 5, "seventh": 7, "ninth": 9}
MODE_UNKNOWN_ABOVE_MHZ = 20.0  # common practice, no source: third overtones are sold from there up
FORK_BELOW_MHZ = 0.2  # common practice, no source: what is neither called a fork nor an AT strip down here is a fork
C1_ROUTES = (
    "motional_capacitance_ff",
    "motional_inductance_mh",
    "capacitance_ratio",
    "pulling_sensitivity_ppm_per_pf",
    "quality_factor",
)
FORK_FIELDS = ("turnover_temperature_c", "parabolic_coefficient_ppm_per_c2")
Band = tuple[float, float]


@dataclass(frozen=True)
class AtSetting:
    """The readings that a condition of the circuit takes: those stated for its temperature, else those for room."""

    esr: Taken
    shunt_capacitance: Taken
    motional: Mapping[str, Taken]
    """Whatever is stated of C1, L1, C0/C1, pulling and Q."""
    room_only: bool
    fundamental_esr: Taken = NOTHING
    """Of an overtone part: what the sheet states for its fundamental, at f/n."""


@dataclass(frozen=True)
class Offer:
    """One part as it would be ordered for this bench."""

    sheet: SpecSheet
    part: Part
    frequency: Taken
    case: Case
    mode: str | None
    overtone: int | None
    fork: bool
    series: bool
    load: Taken
    """Rated load in pF, inf for a series-resonant part."""
    load_options: tuple[float, ...]
    load_range: Band | None
    at: tuple[AtSetting, ...]
    """One for each setting of the bench."""
    tolerance: Taken
    stability: Taken
    loosest: Mapping[str, Taken]
    """Tolerance and stability at their loosest option, where there is a choice."""
    ageing: Taken
    ageing_years: float
    operating_range: Taken
    stability_band: Band | None
    turnover: Taken
    parabolic: Taken
    drive: Taken
    chosen: Mapping[str, object]
    said: tuple[tuple[str, str], ...] = ()
    """(what it is about, sentence) for each rule that was used in taking the readings."""

    @property
    def frequency_mhz(self) -> float:
        return self.case.frequencies_mhz[0]

    @property
    def mode_known(self) -> bool:
        return self.overtone is not None

    def taken(self) -> dict[str, Taken]:
        """What is taken of each field, at the circuit itself."""
        room = self.at[0]
        by_field = {
            "esr_ohm": room.esr,
            "shunt_capacitance_pf": room.shunt_capacitance,
            **room.motional,
            "load_capacitance_pf": self.load,
            "frequency_tolerance_ppm": self.tolerance,
            "frequency_stability_ppm": self.stability,
            "ageing_ppm": self.ageing,
            "operating_temperature_c": self.operating_range,
            "turnover_temperature_c": self.turnover,
            "parabolic_coefficient_ppm_per_c2": self.parabolic,
            "drive_level_uw": self.drive,
        }
        return {name: taken for name, taken in by_field.items() if taken.readings}


@dataclass(frozen=True)
class Match:
    """How a part stands to the bench's frequency: `printed_mhz` where it offers it, else the reason in `said`."""

    printed_mhz: float | None
    said: str = ""
    reading: Reading | None = None


def named(sheet: SpecSheet, part: Part) -> str:
    return called(sheet, part.part_number)


def called(sheet: SpecSheet, part_number: str | None) -> str:
    return f"{sheet.file}, {part_number}" if part_number else sheet.file


def match_frequency(part: Part, asked_mhz: float) -> Match:
    """Whether the part offers the frequency, and how."""
    return match_readings([r for r in part.readings if r.field == "frequency_mhz"], asked_mhz)


def match_readings(readings: Sequence[Reading], asked_mhz: float) -> Match:
    """The same of a part's frequency readings."""
    if not readings:
        return Match(None, "states no frequency")
    named_ones = [(value, r) for r in readings for value in _named_frequencies(r)]
    for value, reading in named_ones:
        if _ppm(value, asked_mhz) <= SAME_PPM:
            return Match(value, reading=reading)
    for value, reading in named_ones:
        decimals = decimals_printed(reading.raw, value)
        if _ppm(value, asked_mhz) <= ROUNDED_PPM and math.isclose(round(asked_mhz, decimals), value, rel_tol=1e-9):
            apart = f"{asked_mhz:.10g} MHz rounded to what is printed ({_ppm(value, asked_mhz):.1f} ppm apart)"
            return Match(value, f"the sheet's {value:.10g} MHz is taken as the bench's {apart}", reading)
    for reading in readings:
        if _in_range(reading, asked_mhz):
            return Match(asked_mhz, reading=reading)
    return Match(None, _why_not(named_ones, readings, asked_mhz))


def _named_frequencies(reading: Reading) -> list[float]:
    return [value for value in (reading.typ, *reading.options) if value is not None]


def _in_range(reading: Reading, asked_mhz: float) -> bool:
    if reading.min is None or reading.max is None:
        return False
    slack = asked_mhz * SAME_PPM * 1e-6
    return reading.min - slack <= asked_mhz <= reading.max + slack


def _ppm(value: float, asked: float) -> float:
    return abs(value / asked - 1) * 1e6


def decimals_printed(raw: str, value_mhz: float) -> int:
    """Decimals, counted in MHz, of the number in `raw` that stands for the value; 12 where it cannot be found there."""
    for number in re.findall(r"\d+(?:[.,]\d+)*", raw):
        for text in (number.replace(",", "."), number.replace(",", "")):
            if text.count(".") > 1:
                continue
            for shift in (0, 3, 6):
                if math.isclose(float(text) / 10**shift, value_mhz, rel_tol=1e-12):
                    return len(text.partition(".")[2]) + shift
    return len(f"{value_mhz:.12g}".partition(".")[2])


def _why_not(named_ones: Sequence[tuple[float, Reading]], readings: Sequence[Reading], asked: float) -> str:
    if named_ones:
        nearest = min((value for value, _ in named_ones), key=lambda value: _ppm(value, asked))
        if _ppm(nearest, asked) <= NEAR_PPM:
            return f"near, but not {asked:.10g} MHz: {nearest:.10g} MHz is {_ppm(nearest, asked):.3g} ppm off"
    ends = [f"{r.min:.10g} to {r.max:.10g} MHz" for r in readings if r.min is not None and r.max is not None]
    values = [f"{value:.10g} MHz" for value, _ in named_ones]
    listed = ", ".join([*values[:5], *(["..."] if len(values) > 5 else []), *ends[:3]])
    return f"does not offer {asked:.10g} MHz" + (f" (states {listed})" if listed else "")


@dataclass(frozen=True)
class Settled:
    """What decides which readings hold: the case, how the part vibrates, and the load."""

    case: Case
    mode: str | None
    fork: bool
    series: bool
    load: Taken
    load_options: tuple[float, ...]
    load_range: Band | None
    chosen: Mapping[str, object]
    said: tuple[tuple[str, str], ...]


def settle(facts: Facts, match: Match, bench: Bench, load_pf: float | None = None) -> Settled:
    """The case that a part's readings are taken in, from its identity, its frequency and its load."""
    said: list[tuple[str, str]] = [("frequency_mhz", match.said)] if match.said else []
    chosen: dict[str, object] = {}
    asked_mhz = bench.requirement.frequency_mhz
    case = Case(tuple(dict.fromkeys((asked_mhz, match.printed_mhz or asked_mhz))), package=facts.package)
    fork = is_fork(facts, case)
    mode = _settle_mode(facts, case, fork=fork, trap=bench.circuit.overtone_trap, chosen=chosen, said=said)
    case = replace(case, mode=mode)
    series = facts.resonance == "series"
    options, load_range = ((), None) if series else _load_choice(facts, case)
    load = _load(facts, case, series=series, load_pf=load_pf, open_choice=bool(options or load_range))
    case = replace(case, load_pf=load.span.mid if load.stated else None)
    if load_pf is not None:
        chosen["load_capacitance_pf"] = load_pf
    return Settled(case, mode, fork, series, load, options, load_range, chosen, tuple(said))


def make_offer(sheet: SpecSheet, part: Part, match: Match, bench: Bench, load_pf: float | None = None) -> Offer:
    """The part as it would be ordered. `load_pf` settles the load where the sheet leaves a choice."""
    facts, asked = Facts.of(part), bench.requirement
    settled = settle(facts, match, bench, load_pf)
    case, chosen, said = settled.case, dict(settled.chosen), list(settled.said)
    operating = settle_range(facts, case, asked.temperature_c, chosen, said)
    stability, band = stability_over_range(facts, case, asked.temperature_c, operating, settled.fork)
    tolerance, loose_tolerance = tightest(take(facts, "frequency_tolerance_ppm", case), chosen)
    stability, loose_stability = tightest(stability, chosen)
    loosest = {"frequency_tolerance_ppm": loose_tolerance, "frequency_stability_ppm": loose_stability}
    ageing, years = ageing_for(facts, case, asked.years)
    return Offer(
        sheet=sheet,
        part=part,
        frequency=Taken(Span.at(asked.frequency_mhz), (match.reading,) if match.reading else ()),
        case=case,
        mode=settled.mode,
        overtone=overtone_of(settled.mode),
        fork=settled.fork,
        series=settled.series,
        load=settled.load,
        load_options=settled.load_options,
        load_range=settled.load_range,
        at=tuple(at_setting(facts, case, setting.temperature_c) for setting in bench.settings),
        tolerance=tolerance,
        stability=stability,
        loosest={name: taken for name, taken in loosest.items() if taken is not None},
        ageing=ageing,
        ageing_years=years,
        operating_range=operating,
        stability_band=band,
        turnover=take(facts, "turnover_temperature_c", case),
        parabolic=take(facts, "parabolic_coefficient_ppm_per_c2", case),
        drive=rated_drive(facts, case),
        chosen=chosen,
        said=tuple(said),
    )


def with_load(offer: Offer, load_pf: float, bench: Bench, why: str = "") -> Offer:
    """The same part ordered with the load given, and why."""
    match = match_frequency(offer.part, bench.requirement.frequency_mhz)
    made = make_offer(offer.sheet, offer.part, match, bench, load_pf)
    said = (*made.said, ("load_capacitance_pf", why)) if why else made.said
    return replace(made, load_options=offer.load_options, load_range=offer.load_range, said=said)


def is_fork(facts: Facts, case: Case) -> bool:
    """A tuning fork by its cut, by its coefficients, or by a frequency at which nothing else is sold."""
    if facts.cut is not None:
        return facts.cut == "tuning fork"
    if any(field in facts for field in FORK_FIELDS):
        return True
    return case.frequencies_mhz[0] < FORK_BELOW_MHZ and "frequency_stability_ppm" not in facts


def overtone_of(mode: str | None) -> int | None:
    """1 for "fundamental", 3 for "third overtone"; None where the words name none."""
    if mode is None:
        return None
    words = mode.casefold()
    for word, order in OVERTONES.items():
        if word in words:
            return order
    digits = re.match(r"\s*(\d+)", words)
    return int(digits[1]) if digits and int(digits[1]) % 2 else None


def _settle_mode(
    facts: Facts, case: Case, *, fork: bool, trap: bool, chosen: dict[str, object], said: list[tuple[str, str]]
) -> str | None:
    if facts.mode is not None:
        return facts.mode
    modes = _modes_offered(facts, case)
    if len(modes) > 1:
        overtones = [mode for mode in modes if overtone_of(mode) != 1]
        mode = min(overtones if trap and overtones else modes, key=lambda mode: overtone_of(mode) or 99)
        why = "for the circuit has an overtone trap" if trap and overtones else "for the circuit has no overtone trap"
        chosen["mode"] = mode
        said.append(("mode", f"offered as {' and '.join(sorted(modes))}: {mode} taken, {why}"))
        return mode
    if modes:
        return modes.pop()
    frequency = case.frequencies_mhz[0]
    if fork or frequency <= MODE_UNKNOWN_ABOVE_MHZ:
        why = "a tuning fork" if fork else f"not above {MODE_UNKNOWN_ABOVE_MHZ:g} MHz"
        said.append(("mode", f"mode not stated: taken as fundamental, as {why} (common practice, no source)"))
        return "fundamental"
    return None


def _modes_offered(facts: Facts, case: Case) -> set[str]:
    """Modes that frequency readings name for this frequency, else those that any reading names for it."""
    frequency = case.frequencies_mhz[0]
    offering = [
        r
        for r in facts["frequency_mhz"]
        if _in_range(r, frequency) or any(v in case.frequencies_mhz for v in _named_frequencies(r))
    ]
    modes = {r.when.mode for r in offering if r.when.mode and holds(r.when, case)}
    every = (r for readings in facts.by_field.values() for r in readings)
    return modes or {r.when.mode for r in every if r.when.mode and holds(r.when, case)}


def _load_choice(facts: Facts, case: Case) -> tuple[tuple[float, ...], Band | None]:
    """The loads that may be ordered: a list, or a range; neither where the sheet fixes one or states none."""
    found = readings_for(facts, "load_capacitance_pf", replace(case, load_pf=None))
    fixed = sorted({typ for r in found if not r.options and (typ := bound(r, "typ")) is not None})
    if not found or fixed:
        return (tuple(fixed), None) if len(fixed) > 1 else ((), None)
    options = sorted({value for r in found for value in r.options if value > 0})
    if options:
        return (tuple(options), None) if len(options) > 1 else ((), None)
    ranges = [(r.min, r.max) for r in found if r.min is not None and r.max is not None]
    return (), (min(low for low, _ in ranges), max(high for _, high in ranges)) if ranges else None


def _load(facts: Facts, case: Case, *, series: bool, load_pf: float | None, open_choice: bool) -> Taken:
    found = tuple(readings_for(facts, "load_capacitance_pf", case))
    if series:
        return Taken(Span.at(math.inf))
    if load_pf is not None:
        return Taken(Span.at(load_pf), found)
    if open_choice or not found:
        return Taken(readings=found)
    values = [v for name in ("typ", "max", "min") for r in found if (v := bound(r, name)) is not None]
    return Taken(Span.at(values[0] if values else max(printed(found[0]))), found)


def covers(band: Band, product: Band) -> bool:
    return band[0] <= product[0] and product[1] <= band[1]


def band_of(reading: Reading) -> Band | None:
    return (reading.min, reading.max) if reading.min is not None and reading.max is not None else None


def settle_range(
    facts: Facts, case: Case, product: Band | None, chosen: dict[str, object], said: list[tuple[str, str]]
) -> Taken:
    """Of several ranges the narrowest that covers the product's, else the widest."""
    readings = readings_for(facts, "operating_temperature_c", replace(case, temperature_c=None))
    ranges = [(band, r) for r in readings if (band := band_of(r)) is not None]
    if not ranges:
        return Taken(readings=tuple(readings))
    covering = [pair for pair in ranges if product and covers(pair[0], product)]
    width = {id(r): band[1] - band[0] for band, r in ranges}
    if covering:
        (low, high), reading = min(covering, key=lambda pair: width[id(pair[1])])
    else:
        (low, high), reading = max(ranges, key=lambda pair: width[id(pair[1])])
    if len({band for band, _ in ranges}) > 1:
        chosen["operating_temperature_c"] = [low, high]
        why = "the narrowest that covers the product's" if covering else "the widest"
        said.append(("operating_temperature_c", f"range {low:g} to {high:g} °C taken, {why} of {len(ranges)} offered"))
    return Taken(Span(low, (low + high) / 2, high), (reading,))


def stability_over_range(
    facts: Facts, case: Case, product: Band | None, operating: Taken, fork: bool
) -> tuple[Taken, Band | None]:
    """Stability for the range that is asked, and the band of temperature it is stated for (None: the part's range)."""
    if fork:
        return NOTHING, None
    anywhere = replace(case, temperature_c=None)
    found = [r for r in facts["frequency_stability_ppm"] if holds(r.when, anywhere)]
    own = (operating.span.low, operating.span.high) if operating.stated else None
    for need in (product, own):
        covering = [r for r in found if need and r.when.temperature_c and covers(r.when.temperature_c, need)]
        if covering:
            return _stability_of(narrowest(covering))
    plain = [r for r in found if r.when.temperature_c is None]
    if plain:
        return _stability_of(narrowest(plain))
    return _stability_of(sorted(found, key=_band_width)[-1:])


def _band_width(reading: Reading) -> float:
    low, high = reading.when.temperature_c or (0.0, 0.0)
    return high - low


def _stability_of(readings: Sequence[Reading]) -> tuple[Taken, Band | None]:
    if not readings:
        return NOTHING, None
    several = f"{len(readings)} readings of frequency_stability_ppm hold; the worse counts for each requirement"
    taken = Taken(union([span_of(r) for r in readings]), tuple(readings), said=(several,) if len(readings) > 1 else ())
    return taken, readings[0].when.temperature_c


def tightest(taken: Taken, chosen: dict[str, object]) -> tuple[Taken, Taken | None]:
    """The tightest option, and the same at the loosest one; a single value is no choice."""
    if not taken.readings or not all(r.options for r in taken.readings):
        return taken, None
    options = sorted({abs(value) for r in taken.readings for value in r.options})
    if len(options) > 1:
        chosen[taken.readings[0].field] = options[0]
    tight, loose = (replace(taken, span=Span(-size, 0.0, size)) for size in (options[0], options[-1]))
    return tight, loose if len(options) > 1 else None


def ageing_for(facts: Facts, case: Case, years: float) -> tuple[Taken, float]:
    """The reading that answers for the years asked: one stated for as long or longer, else the longest stated."""
    found = [r for r in facts["ageing_ppm"] if holds(r.when, case)]
    if not found:
        return NOTHING, 1.0
    spans = sorted({r.when.years or 1.0 for r in found})
    stated_years = next((y for y in spans if y >= years), spans[-1])
    counting = narrowest(r for r in found if (r.when.years or 1.0) == stated_years)
    return Taken(union([span_of(r) for r in counting]), tuple(counting)), stated_years


def at_setting(facts: Facts, case: Case, temperature_c: float | None) -> AtSetting:
    warm = case if temperature_c is None else replace(case, temperature_c=temperature_c)
    esr = take_at(facts, "esr_ohm", case, temperature_c)
    routes = {name: take_at(facts, name, case, temperature_c) for name in C1_ROUTES if name in facts}
    motional = {name: taken for name, taken in routes.items() if taken.readings}
    shunt = take_at(facts, "shunt_capacitance_pf", case, temperature_c)
    room = room_only(esr, case, temperature_c)
    return AtSetting(esr, shunt, motional, room, fundamental_esr(facts, warm))


def room_only(esr: Taken, case: Case, temperature_c: float | None) -> bool:
    """Whether a temperature is asked for which no ESR is stated, so that one for room is taken."""
    if temperature_c is None or not esr.readings:
        return False
    warm = replace(case, temperature_c=temperature_c)
    return not any(r.when.temperature_c and holds(r.when, warm) for r in esr.readings)


def take_at(facts: Facts, name: str, case: Case, temperature_c: float | None) -> Taken:
    """A field at one temperature; where none is stated for it what holds at room is used, and the message says so."""
    warm = case if temperature_c is None else replace(case, temperature_c=temperature_c)
    taken = take(facts, name, warm)
    return taken if taken.readings else take(facts, name, case)


def fundamental_esr(facts: Facts, case: Case) -> Taken:
    order = overtone_of(case.mode)
    if order is None or order == 1:
        return NOTHING
    below = replace(case, mode="fundamental", frequencies_mhz=tuple(f / order for f in case.frequencies_mhz))
    return take(facts, "esr_ohm", below, only=lambda reading: reading.when.mode == "fundamental")


def fields_to_check(offer: Offer, asked: Collection[str]) -> list[str]:
    """Fields whose reading, as used, asks for a look; `asked` are the requirements that the part is held to."""
    used = [taken for name, taken in offer.taken().items() if _is_used(name, offer, asked)]
    used += [offer.frequency, *(one for at in offer.at for one in (at.esr, at.shunt_capacitance))]
    return sorted({r.field for taken in used for r in taken.readings if r.check})


def _is_used(name: str, offer: Offer, asked: Collection[str]) -> bool:
    """Some readings count for one requirement or one kind of part alone."""
    if name in ("turnover_temperature_c", "parabolic_coefficient_ppm_per_c2"):
        return offer.fork
    if name == "operating_temperature_c":
        return offer.fork or name in asked
    return name != "drive_level_uw" or name in asked
