"""A part's readings as rows, with what a person changed: both values, who and why; and all parts in one table."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING

from compare.corrections import Correction, Line, lines, of_part
from compare.figures import counted
from compare.shown import HOW, LOOK, NAMES, bound_text, how, options_text, part_name, unit_of, value_text, when_text
from compare.work import Work
from extract.model import Part, Reading, SpecSheet

if TYPE_CHECKING:
    import pandas as pd

ENTERED, GONE = "✎", "not on sheet"
FACTS = {
    "mode": "Mode",
    "cut": "Cut",
    "resonance": "Resonance",
    "package": "Package",
    "maker": "Maker",
    "part_number": "Part number",
}
ALWAYS = ("mode", "cut")
"""Rows that are always there: a verdict hangs on them. The others are rows once a person has set them."""
COLUMNS = ("Reading", "Min", "Typ", "Max", "Unit", "How we have it", "Sheet says", "Holds for")
# What a verdict rests on most; a part that does not state one of them says so.
WANTED = (
    "frequency_mhz",
    "load_capacitance_pf",
    "esr_ohm",
    "shunt_capacitance_pf",
    "frequency_tolerance_ppm",
    "frequency_stability_ppm",
    "operating_temperature_c",
    "drive_level_uw",
)
MOST_PARTS = 500


@dataclass(frozen=True)
class PartLines:
    """A part of an open sheet: as read, as it counts, and its readings in the order shown."""

    sheet: str
    at: int
    read: Part
    part: Part
    lines: tuple[Line, ...]
    corrections: tuple[Correction, ...]

    @property
    def changed_facts(self) -> dict[str, Correction]:
        """The part's words that a person set, with the correction of each."""
        return {one.fact: one for one in self.corrections if one.fact is not None}

    @property
    def rows(self) -> list[int | str]:
        """What stands in each row: a reading by its number, below them the part's words by name."""
        facts = [name for name in FACTS if name in ALWAYS or name in self.changed_facts]
        return [*(line.number for line in self.lines), *facts]

    def line(self, number: int | str | None) -> Line | None:
        """The line of a reading's number."""
        return next((line for line in self.lines if line.number == number), None)

    def row_of(self, place: int | str | None) -> int:
        """The row of what `rows` names; the first one where it is not there."""
        return self.rows.index(place) if place in self.rows else 0


def part_lines(work: Work, sheet: str, at: int) -> PartLines:
    """The part `at` of the open sheet with that key, readings to look at first."""
    place = next(number for number, one in enumerate(work.sheets) if one.key == sheet)
    read, part = work.sheets[place].sheet.parts[at], work.corrected[place].parts[at]
    own = of_part(work.corrections, sheet, at)
    every = sorted(lines(read, own), key=lambda line: line.now is None or line.now.check is None)
    return PartLines(sheet, at, read, part, tuple(every), tuple(own))


def lines_frame(shown: PartLines) -> pd.DataFrame:
    """One row a reading, then the part's words. A reading that was taken away stands there with its word."""
    import pandas as pd

    rows = [_row(line) for line in shown.lines] + [
        _fact_row(shown, name) for name in shown.rows if isinstance(name, str)
    ]
    frame = pd.DataFrame(rows, columns=list(COLUMNS))
    return frame.drop(columns=[name for name in ("Sheet says", "Holds for") if not frame[name].any()])


def _row(line: Line) -> tuple[str, ...]:
    reading = line.shown
    middle = options_text(reading) if reading.options else bound_text(reading, reading.typ)
    values = (bound_text(reading, reading.min), middle, bound_text(reading, reading.max), unit_of(reading))
    if line.now is None:
        values = ("", "", "", "")
    return NAMES[reading.field], *values, how_line(line), sheet_says(line), when_text(reading.when)


def how_line(line: Line) -> str:
    """`stated p.1`, `☞ look p.2`, `✎ entered`, `✎ not on sheet`, `stated p.1, seen`."""
    if line.now is None:
        return f"{ENTERED} {GONE}"
    if line.correction is None:
        return how(line.now)
    return how(line.now) + ", seen" if line.correction.what == "as read" else HOW["entered"]


def sheet_says(line: Line) -> str:
    """What the sheet gives where a person changed it; "not stated" for an added reading, "" for any other."""
    if line.correction is None or line.correction.what == "as read":
        return ""
    return "not stated" if line.read is None else value_text(line.read)


def _fact_row(shown: PartLines, name: str) -> tuple[str, ...]:
    now, read = (getattr(part, name) or "not stated" for part in (shown.part, shown.read))
    if name in shown.changed_facts:
        return FACTS[name], "", now, "", "", HOW["entered"], read, ""
    return FACTS[name], "", now, "", "", "" if now == "not stated" else HOW["stated"], "", ""


def not_stated(shown: PartLines) -> str:
    """`Not stated: drive level.`, of what a verdict rests on; "" where all is."""
    have = {reading.field for reading in shown.part.readings}
    lacking = [NAMES[name] for name in WANTED if name not in have]
    return f"Not stated: {', '.join(lacking)}." if lacking else ""


def history_lines(one: Correction | None) -> list[str]:
    """Both values, who, when and why, of a correction; nothing where there is none."""
    if one is None:
        return []
    who = ", ".join(filter(None, (one.by, one.at.replace("T", " ")[:16])))
    done = {
        "as read": "Looked at and kept as read",
        "not on the sheet": "Said not to be on the sheet",
        "added": "Added",
    }.get(one.what, "Corrected")
    said = [f"{done} by {who}." if who else f"{done}."]
    if one.was is not None and one.what in ("value", "not on the sheet"):
        said.append(f"The sheet says {value_text(one.was)}.")
    if one.why:
        said.append(f"Why: {one.why}")
    return said


@dataclass(frozen=True)
class PartPlace:
    """Where a part of the table of all parts lies."""

    sheet: str
    at: int


def parts_frame(work: Work, most: int = MOST_PARTS) -> tuple[pd.DataFrame, list[PartPlace]]:
    """All parts, one row each, each value with its mark; at most `most`, with where each lies."""
    import pandas as pd

    rows: list[dict[str, str]] = []
    places: list[PartPlace] = []
    for one, sheet in zip(work.sheets, work.corrected, strict=True):
        for at, part in enumerate(sheet.parts[: most - len(rows)]):
            rows.append(_part_row(sheet, part, at))
            places.append(PartPlace(one.key, at))
    return pd.DataFrame(rows), places


def _part_row(sheet: SpecSheet, part: Part, at: int) -> dict[str, str]:
    by_field: dict[str, list[Reading]] = {}
    for reading in part.readings:
        by_field.setdefault(reading.field, []).append(reading)
    waits = sum(reading.check is not None for reading in part.readings)
    row = {"Part": part_name(part, at + 1), "Look": f"{LOOK} {waits}" if waits else ""}
    row |= {NAMES[name]: _cell(by_field.get(name, ())) for name in WANTED}
    return row | {"Mode": part.mode or "not stated", "Maker": part.maker or "", "Sheet": sheet.file.rsplit("/", 1)[-1]}


def _cell(readings: Sequence[Reading]) -> str:
    """`50 Ω`, `∴ 8.52 mH`, `✎ 50 Ω`, `☞ 60 Ω`; of several bands how many there are."""
    if not readings:
        return "not stated"
    mark = LOOK if any(one.check is not None for one in readings) else ""
    marks = {"entered": ENTERED, "inferred": "∴"}
    mark = mark or next((marks[one.status] for one in readings if one.status in marks), "")
    text = value_text(readings[0]) if len(readings) == 1 else counted(len(readings), "value")
    return f"{mark} {text}".strip()


def as_tabbed(frame: pd.DataFrame) -> str:
    """A table as text with tabs, headings and units included, for a spreadsheet or a mail."""
    rows = [list(frame.columns), *frame.astype(str).to_numpy().tolist()]
    return "\n".join("\t".join(" ".join(str(cell).split()) for cell in row) for row in rows)


def corrections_table(work: Work) -> tuple[list[str], list[list[str]]]:
    """Every correction with both values, who, when and why: headings and rows, for a workbook."""
    headings = ["Part number", "Reading", "What was done", "Now", "Sheet says", "As typed", "By", "When", "Why", "File"]
    return headings, [row for one in work.corrections if (row := _correction_row(work, one)) is not None]


def _correction_row(work: Work, one: Correction) -> list[str] | None:
    sheet = work.of(one.sheet)
    if sheet is None or one.part >= len(sheet.sheet.parts):
        return None
    part = sheet.sheet.parts[one.part]
    reading = one.new or one.was
    if one.fact is not None:
        name, now, before = FACTS[one.fact], one.value or "not stated", getattr(part, one.fact) or "not stated"
    else:
        name = NAMES[reading.field] if reading is not None else ""
        before = "not stated" if one.was is None else value_text(one.was)
        now = {"not on the sheet": "not stated", "as read": before}.get(
            one.what, "" if one.new is None else value_text(one.new)
        )
    done = {"value": "corrected", "added": "added", "as read": "kept as read", "fact": "corrected"}
    return [
        part_name(part, one.part + 1),
        name,
        done.get(one.what, one.what),
        now,
        before,
        one.typed,
        one.by,
        one.at,
        one.why,
        sheet.sheet.file,
    ]
