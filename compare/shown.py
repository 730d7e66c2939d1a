"""What the Sheets view shows: one line a sheet, a part's readings with how we have each, and where a reading stands."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING

from compare.circuit_text import temperatures
from compare.figures import counted, exact, scale, spread
from extract.fields import field_of
from extract.model import Note, Part, Reading, SpecSheet, When, Where
from extract.partlist import doubted

if TYPE_CHECKING:
    import pandas as pd

LOOK, SHORT = "☞", "▼"
HOW = {"stated": "stated", "inferred": "∴ inferred", "entered": "✎ entered"}
HOW_LEGEND = (
    "stated: printed there · ∴ inferred: worked out from other readings · ✎ entered: typed by a person · "
    "☞ look: a person must decide"
)


# Short names for a row; `title` gives the trade's full ones.
NAMES = {
    "frequency_mhz": "Frequency",
    "frequency_tolerance_ppm": "Make tolerance",
    "frequency_stability_ppm": "Drift over temperature",
    "ageing_ppm": "Ageing",
    "operating_temperature_c": "Operating range",
    "storage_temperature_c": "Storage range",
    "load_capacitance_pf": "Rated load CL",
    "esr_ohm": "ESR",
    "shunt_capacitance_pf": "Shunt C0",
    "motional_capacitance_ff": "Motional C1",
    "motional_inductance_mh": "Motional L1",
    "quality_factor": "Quality factor Q",
    "capacitance_ratio": "C0/C1",
    "pulling_sensitivity_ppm_per_pf": "Pulling sensitivity",
    "drive_level_uw": "Drive level",
    "turnover_temperature_c": "Turnover",
    "parabolic_coefficient_ppm_per_c2": "Parabolic coefficient",
    "insulation_resistance_megohm": "Insulation",
}


def waiting(sheet: SpecSheet) -> int:
    """How many readings of a sheet a person must look at."""
    return sum(doubted(sheet.parts).values())


def sheets_frame(sheets: Sequence[SpecSheet]) -> pd.DataFrame:
    """One row a sheet, in the order opened: file and outcome."""
    import pandas as pd

    return pd.DataFrame([(short_name(sheet.file), _outcome(sheet)) for sheet in sheets], columns=["Sheet", "Outcome"])


def short_name(file: str, longest: int = 22) -> str:
    """A file's name without its folders; a long one loses its middle, for its end tells the kind."""
    name = file.rsplit("/", 1)[-1]
    return name if len(name) <= longest else f"{name[: longest - 10]}…{name[-9:]}"


def _outcome(sheet: SpecSheet) -> str:
    if not sheet.parts:
        return f"{SHORT} not read" if _errors(sheet) else f"{SHORT} no crystal"
    wait = waiting(sheet)
    return counted(len(sheet.parts), "part") + (f", {LOOK} {wait}" if wait else "")


def _errors(sheet: SpecSheet) -> list[Note]:
    return [note for note in sheet.notes if note.level == "error"]


def heading(sheets: Sequence[SpecSheet]) -> str:
    """`7 sheets, 11 parts; 3 readings to look at`."""
    parts = sum(len(sheet.parts) for sheet in sheets)
    wait = sum(map(waiting, sheets))
    looks = f"; {LOOK} {counted(wait, 'reading')} to look at" if wait else ""
    return f"{counted(len(sheets), 'sheet')}, {counted(parts, 'part')}{looks}"


def unread(sheets: Sequence[SpecSheet]) -> list[str]:
    """A sentence for each sheet that gave nothing, with the reason."""
    said = []
    for sheet in sheets:
        if not sheet.parts:
            reasons = [note.message for note in _errors(sheet) or sheet.notes] or ["no crystal found in it"]
            said.append(f"{SHORT} {sheet.file.rsplit('/', 1)[-1]}: {'; '.join(reasons)}")
    return said


def notes_of(sheet: SpecSheet) -> list[str]:
    """What the reader has to say about a sheet that it could read, with the place spoken of."""
    said = []
    for note in sheet.notes if sheet.parts else ():
        place = f" ({note.where})" if note.where is not None else ""
        said.append(f"{LOOK + ' ' if note.level != 'info' else ''}{note.message}{place}")
    return said


def part_name(part: Part, number: int = 1) -> str:
    """The part number, else the maker's or the count's name for it."""
    if part.part_number:
        return part.part_number
    return f"{part.maker}, no part number" if part.maker else f"Part {number}, no part number"


def part_facts(part: Part) -> str:
    """`Merrowby · 2.5 × 2.0, 4 pads, crystal on 1 and 3 · AT cut · fundamental`, of what is stated."""
    cut = part.cut if part.cut is None or part.cut[-1].islower() else f"{part.cut} cut"
    mode = part.mode or "mode not stated"
    resonance = "series resonant" if part.resonance == "series" else None
    facts = [part.maker, _package(part), cut, mode, resonance]
    return " · ".join(fact for fact in facts if fact)


def _package(part: Part) -> str | None:
    pads = part.attributes.pads
    said = [part.package] if part.package else []
    if pads is not None and pads.count:
        said.append(f"{pads.count} pads")
    if pads is not None and pads.crystal:
        said.append(f"crystal on {' and '.join(map(str, pads.crystal))}")
    return ", ".join(said) or None


def attributes_lines(part: Part) -> list[str]:
    """Grade, handling and supply, of what is stated."""
    stated = part.attributes
    lines = {
        "AEC-Q200": None if stated.aec_q200 is None else "yes" if stated.aec_q200 else "no",
        "Moisture level": stated.moisture_level,
        "Reflow peak": None if stated.reflow_peak_c is None else f"{exact(stated.reflow_peak_c)} °C",
        "Status": stated.status,
        "Price": stated.price,
        "Lead time": stated.lead_time,
    }
    return [f"{name}: {value}" for name, value in lines.items() if value is not None]


def title(field: str) -> str:
    """A field's name in the trade's words, as a row begins with it."""
    named = field_of(field).title
    return named[0].upper() + named[1:]


def unit_of(reading: Reading) -> str:
    """The unit that the trade says this reading in: kHz for a watch crystal, kΩ for its ESR."""
    unit = _in_trade(reading)[1]
    return "" if unit == "1" else unit


def _in_trade(reading: Reading) -> tuple[float, str]:
    return scale(field_of(reading.field).unit, reading.min, reading.typ, reading.max, *reading.options)


def bound_text(reading: Reading, value: float | None) -> str:
    """One bound in the reading's unit, with a plus where both signs are possible."""
    if value is None:
        return ""
    plus = "+" if value > 0 and field_of(reading.field).sign in ("symmetric", "either") else ""
    return plus + _figure(reading, value)


def _figure(reading: Reading, value: float) -> str:
    # Twelve digits are more than any sheet prints, and 0.032768 MHz is 32.768 kHz.
    return exact(float(f"{value * _in_trade(reading)[0]:.12g}"))


def options_text(reading: Reading) -> str:
    sign = "±" if field_of(reading.field).sign == "symmetric" else ""
    return ", ".join(sign + _figure(reading, value) for value in reading.options)


def how(reading: Reading) -> str:
    """`stated p.1`, `∴ inferred line 4`, `☞ look p.2`: a word always, a sign before all but the plain case."""
    return f"{LOOK + ' look' if reading.check is not None else HOW[reading.status]} {place(reading.where)}".rstrip()


def place(where: Where) -> str:
    """A short place: `p.1`, `Tabelle1 B7`, `table 2 B7`, `line 12`."""
    said = []
    if where.page is not None:
        said.append(f"p.{where.page}")
    if where.sheet is not None:
        said.append(where.sheet)
    if where.table is not None:
        said.append(f"table {where.table}")
    if where.cell is not None:
        said.append(where.cell)
    elif where.line is not None and where.page is None:
        said.append(f"line {where.line}")
    return " ".join(said)


def when_text(when: When) -> str:
    """Where a reading holds, in words; "" for everywhere."""
    said = []
    if when.frequency_mhz is not None:
        said.append(spread(*when.frequency_mhz, "MHz", digits=8))
    if when.load_capacitance_pf is not None:
        said.append(f"load {spread(*when.load_capacitance_pf, 'pF')}")
    if when.temperature_c is not None:
        low, high = when.temperature_c
        said.append(temperatures(when.temperature_c) if low != high else f"{exact(low)} °C")
    if when.years is not None:
        said.append(f"{exact(when.years)} {'year' if when.years == 1 else 'years'}")
    said += [words for words in (when.mode, when.package) if words is not None]
    return "; ".join(said)


def value_text(reading: Reading) -> str:
    """The whole reading in words: `28 typ, at most 50 Ω`."""
    unit, factor = unit_of(reading), _in_trade(reading)[0]
    if reading.options:
        return f"{options_text(reading)} {unit}, to choose from".strip()
    if reading.min is not None and reading.max is not None:
        around = "" if reading.typ is None else f", {_figure(reading, reading.typ)} typical"
        return spread(reading.min * factor, reading.max * factor, unit, digits=9) + around
    bounds = ((reading.typ, "{}"), (reading.min, "at least {}"), (reading.max, "at most {}"))
    said = [words.format(bound_text(reading, value)) for value, words in bounds if value is not None]
    return f"{', '.join(said)} {unit}".strip()


@dataclass(frozen=True)
class Evidence:
    """What stands beside the page's picture: what was read, where it stands, the words printed there."""

    read: str
    stands: str
    printed: str


def evidence(reading: Reading) -> Evidence:
    """The words that go with one reading."""
    status = {
        "stated": "stated",
        "inferred": "inferred: worked out from what is printed",
        "entered": "entered by a person",
    }[reading.status]
    holds = when_text(reading.when)
    read = f"{value_text(reading)}, {status}" + (f"; holds for {holds}" if holds else "")
    return Evidence(read, str(reading.where), reading.raw)
