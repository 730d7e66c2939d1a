"""Long lists as candidates: which rows are worth judging whole, told by columns alone.

A part of another frequency or in another package fits no board, whatever else its row says; and of thousands that do
fit a buyer wants the best. So of a long list the judgement gets the rows that stand first by columns, as they are read,
with their places; how many were passed over, and why, is a note.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable, Sequence
from dataclasses import dataclass, field

import numpy as np
from numpy.typing import NDArray

from compare.bench import Bench
from compare.columns import Flags, make_columns
from compare.corners import reckon
from compare.footprint import same_package, size_mm
from compare.intake import Intake, read_sheets
from compare.listed import offering, rows_lot
from compare.lot import C1_FROM, Coded, Joined, Lot, Separate, Whole
from compare.offer import NEAR_PPM, make_offer, match_frequency
from compare.ranking import order
from compare.reckoning import JUDGED, choose_loads, judge_all
from compare.relations import relation
from compare.stated import Taken
from compare.swap import named_frequencies, the_incumbent
from compare.verdict import MEETS, of_part
from extract.model import Note, Part, Reading, SpecSheet
from extract.partlist import PartList

LONG_LIST = 2_000
"""Parts from which on a list is long: below that every one is judged."""
MOST_JUDGED = 200
MOST_ELSEWHERE = 20
"""Parts in another package, or near the frequency but not at it, that are judged all the same: what else there is."""
WORSE = ("looser", "different", "unknown")
COMPARED = {
    "frequency_tolerance_ppm": "tolerance",
    "frequency_stability_ppm": "stability",
    "ageing_ppm": "ageing",
    "operating_temperature_c": "operating_range",
    "load_capacitance_pf": "load",
    "drive_level_uw": "drive",
}
COMPARED_AT_ROOM = {
    "esr_ohm": "esr",
    "shunt_capacitance_pf": "shunt",
    "motional_capacitance_ff": C1_FROM["motional_capacitance_ff"],
}
Reader = Callable[[Sequence[str]], Intake]


@dataclass(frozen=True)
class Wanted:
    """The incumbent, and the circuit that candidates are held to; without a bench one that names but the frequency."""

    sheet: SpecSheet
    part: Part
    bench: Bench
    given: bool

    @classmethod
    def of(cls, sheets: Sequence[SpecSheet], bench: Bench | None) -> Wanted | None:
        """None where nothing names one frequency. SubstituteError: the incumbent is not exactly one part."""
        sheet, part = the_incumbent(sheets)
        named = named_frequencies(part)
        if bench is None and len(named) != 1:
            return None
        asked = bench or Bench.model_validate({"requirement": {"frequency_mhz": next(iter(named))}})
        offered = match_frequency(part, asked.requirement.frequency_mhz).printed_mhz is not None
        return cls(sheet, part, asked, bench is not None) if offered else None


@dataclass
class Sieved:
    """The rows that are judged, in the order of the list, and how many were passed over for what."""

    rows: Whole
    passed: dict[str, int] = field(default_factory=dict)

    @property
    def note(self) -> str:
        said = " and ".join(f"{count} {why}" for why, count in self.passed.items() if count)
        return f"a long list: {said} passed over; name one as FILE#PART_NUMBER to see it whole"


def read_candidates(
    names: Sequence[str], incumbents: Sequence[SpecSheet], bench: Bench | None, read_all: Reader = read_sheets
) -> Intake:
    """As `read_all` reads them; of long lists the rows that might stand in for the incumbent.

    Raises
    ------
    SubstituteError
        The incumbent is not exactly one part.
    """
    wanted, intake = Wanted.of(incumbents, bench), read_all(names)
    if wanted is None:
        return intake
    sheets, notes = [], list(intake.notes)
    for sheet in intake.sheets:
        if not isinstance(sheet.parts, PartList) or len(sheet.parts) < LONG_LIST:
            sheets.append(sheet)
            continue
        sieved = sieve(sheet, sheet.parts, wanted)
        sheets.append(sheet.model_copy(update={"parts": tuple(sheet.parts[at] for at in sieved.rows.tolist())}))
        if any(sieved.passed.values()):
            notes.append(Note(level="info", message=f"{sheet.file}: {sieved.note}"))
    return Intake(tuple(sheets), tuple(notes), intake.stopped)


def sieve(sheet: SpecSheet, parts: PartList, wanted: Wanted) -> Sieved:
    """The rows of a list that are worth judging."""
    near = _near(parts, wanted.bench.requirement.frequency_mhz)
    offered = offering(parts, wanted.bench) & near
    sits = _sits(parts, wanted.part.package)
    candidates = np.flatnonzero(offered & sits)
    best = candidates
    if len(candidates) > MOST_JUDGED:
        lot = rows_lot(sheet, parts, wanted.bench, candidates)
        own = Coded(parts.part_numbers, candidates).array(lambda number: number == wanted.part.part_number, bool)
        first = best_first(lot, wanted)[:MOST_JUDGED]
        best = np.union1d(candidates[first], candidates[own])
    elsewhere, beside = np.flatnonzero(offered & ~sits), np.flatnonzero(near & ~offered)
    some = (elsewhere[:MOST_ELSEWHERE], beside[:MOST_ELSEWHERE])
    passed = {
        "of another frequency": int((~near).sum()) + len(beside) - len(some[1]),
        "of another package": len(elsewhere) - len(some[0]),
        f"that stand behind the best {MOST_JUDGED} by what their rows say": len(candidates) - len(best),
    }
    return Sieved(np.sort(np.concatenate([best, *some])), passed)


def best_first(lot: Lot, wanted: Wanted) -> Whole:
    """The offers of a lot in the order in which they are likely to be judged, best first."""
    match = match_frequency(wanted.part, wanted.bench.requirement.frequency_mhz)
    whole = Joined([Separate([make_offer(wanted.sheet, wanted.part, match, wanted.bench)]), lot])
    return _by_circuit(whole, wanted.bench) if wanted.given else _by_readings(whole)


def _by_circuit(whole: Lot, bench: Bench) -> Whole:
    """By verdict and slack, as a ranking is; what the incumbent itself does not meet is not held against others."""
    columns = make_columns(choose_loads(whole, bench), bench)
    judged, _ = judge_all(columns, bench, reckon(columns, bench, wanted=JUDGED))
    counting = {key: one for key, one in judged.items() if not one.asked[0] or one.verdict[0] == MEETS} or judged
    ranked = order(counting, of_part(counting, len(columns)))
    return ranked[ranked > 0] - 1


def _by_readings(whole: Lot) -> Whole:
    """By how many readings are worse than the incumbent's, or not known to be as good."""
    columns = {name: whole.column(column) for name, column in COMPARED.items()}
    columns |= {name: whole.at(0, column) for name, column in COMPARED_AT_ROOM.items()}
    worse = sum((_worse(name, column) for name, column in columns.items()), np.zeros(len(whole), dtype=int))
    return np.argsort(worse[1:], kind="stable")


def _worse(name: str, column: Coded[Taken]) -> NDArray[np.int_]:
    own = column[0]
    return column.array(lambda taken: relation(name, own, taken) in WORSE, int)


def _near(parts: PartList, frequency_mhz: float) -> Flags:
    """Rows that state no frequency, or one no further off than "near"; a range holds all within it."""
    stated = parts.stated.get("frequency_mhz")
    if stated is None:
        return np.ones(len(parts), dtype=bool)
    near = np.array([_holds(readings, frequency_mhz) for readings in stated.templates], dtype=np.bool_)
    flags: Flags = near[np.asarray(stated.index)]
    return flags


def _holds(readings: Iterable[Reading], frequency_mhz: float) -> bool:
    listed = [[v for v in (r.min, r.typ, r.max, *r.options) if v is not None] for r in readings]
    apart = 2 * NEAR_PPM * 1e-6 * frequency_mhz
    return not listed or any(min(one) - apart <= frequency_mhz <= max(one) + apart for one in listed)


def _sits(parts: PartList, package: str | None) -> Flags:
    """False only where both give a size and they are not the same."""
    fits = np.array([_may_sit(one.package, package) for one in parts.identity.distinct], dtype=np.bool_)
    flags: Flags = fits[np.asarray(parts.identity.index)]
    return flags


def _may_sit(theirs: str | None, package: str | None) -> bool:
    if package is None or theirs is None or size_mm(package) is None or size_mm(theirs) is None:
        return True
    return same_package(package, theirs)
