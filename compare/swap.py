"""All candidates beside the incumbent, reckoned together: columns, verdicts of the circuit, shift of the frequency."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass, replace

import numpy as np

from compare.bench import Bench
from compare.circuit import Array
from compare.columns import HIGH, LOW, MID, Columns, make_columns
from compare.offer import Match, Offer, make_offer, match_frequency, named, with_load
from compare.reckoning import Reckoning, bench_notes, choose_loads, reckon_offers
from compare.swap_lines import same_number
from compare.swap_shift import alike, board_shift_ppm, overtone_shift_ppm, rated_shift_ppm
from compare.verdict import CANNOT_TELL, FALLS_SHORT, MEETS
from extract.model import Part, SpecSheet


class SubstituteError(ValueError):
    """The question itself cannot be put; the message says why and what to do."""


@dataclass(frozen=True)
class Candidate:
    """One part that is looked at; `column` is its place in the columns, None where it does not offer the frequency."""

    sheet: SpecSheet
    part: Part
    column: int | None
    said: str = ""


@dataclass(frozen=True)
class Swap:
    """The incumbent (column 0) and every candidate that offers its frequency, in one circuit.

    Attributes
    ----------
    bench : Bench
        The board's; without one a bench that names nothing but the frequency, and `reckoning` is None.
    shift_ppm : (3, n)
        How far each part runs from the incumbent; NaN where it cannot be had.
    """

    bench: Bench
    columns: Columns
    reckoning: Reckoning | None
    shift_ppm: Array
    candidates: tuple[Candidate, ...]
    notes: tuple[str, ...]

    @property
    def incumbent(self) -> Offer:
        return self.columns.offers[0]

    def shift(self, at: int) -> tuple[float, float, float]:
        low, mid, high = (float(end) for end in self.shift_ppm[:, at])
        return low, mid, high


def make_swap(incumbents: Sequence[SpecSheet], candidates: Sequence[SpecSheet], bench: Bench | None) -> Swap:
    """Everything that the verdicts draw on; SubstituteError where the question cannot be put."""
    sheet, part = the_incumbent(incumbents)
    asked, notes = (bench, []) if bench is not None else implied_bench(sheet, part, candidates)
    match = match_frequency(part, asked.requirement.frequency_mhz)
    if match.printed_mhz is None:
        raise SubstituteError(
            f"{named(sheet, part)}: the incumbent {match.said}; give the bench of the board that it is on, or name "
            "another part"
        )
    offers, listed = _offers(candidates, asked, make_offer(sheet, part, match, asked))
    if bench is None:
        columns, reckoning = make_columns(_settle_loads(offers, asked), asked), None
    else:
        reckoning = reckon_offers(choose_loads(offers, bench), bench)
        columns = reckoning.columns
        notes += [str(note["message"]) for note in bench_notes(bench)]
    return Swap(asked, columns, reckoning, _shift(columns, asked, reckoning), tuple(listed), tuple(notes))


def the_incumbent(sheets: Sequence[SpecSheet]) -> tuple[SpecSheet, Part]:
    """The one part that all others are held against."""
    parts = [(sheet, part) for sheet in sheets for part in sheet.parts]
    if len(parts) == 1:
        return parts[0]
    names = ", ".join(dict.fromkeys(sheet.file for sheet in sheets)) or "nothing"
    if not parts:
        faults = [note.message for sheet in sheets for note in sheet.notes if note.level != "info"]
        why = f" ({faults[0]})" if faults else ""
        raise SubstituteError(f"{names}: the incumbent must be one part, and no crystal was found there{why}")
    numbers = [part.part_number or "one without a part number" for _, part in parts]
    more = f" and {len(numbers) - 8} more" if len(numbers) > 8 else ""
    raise SubstituteError(
        f"{names}: the incumbent must be one part, and there are {len(parts)}; name it as FILE#PART_NUMBER "
        f"({', '.join(numbers[:8])}{more})"
    )


def implied_bench(sheet: SpecSheet, part: Part, candidates: Sequence[SpecSheet]) -> tuple[Bench, list[str]]:
    """A bench that names the incumbent's frequency, or the one that all candidates state, and nothing else."""
    own = named_frequencies(part)
    if len(own) != 1:
        theirs = {f for one in candidates for p in one.parts for f in named_frequencies(p)}
        own = {f for f in theirs if match_frequency(part, f).printed_mhz is not None}
    if len(own) != 1:
        raise SubstituteError(
            f"{named(sheet, part)}: the incumbent's sheet names no single frequency; give a bench with the board's"
        )
    bench = Bench.model_validate({"requirement": {"frequency_mhz": next(iter(own))}})
    return bench, []


def named_frequencies(part: Part) -> set[float]:
    readings = [r for r in part.readings if r.field == "frequency_mhz"]
    return {value for r in readings for value in (r.typ, *r.options) if value is not None}


def _offers(sheets: Sequence[SpecSheet], bench: Bench, incumbent: Offer) -> tuple[list[Offer], list[Candidate]]:
    offers, listed = [incumbent], []
    for sheet in sheets:
        for part in sheet.parts:
            match: Match = match_frequency(part, bench.requirement.frequency_mhz)
            if match.printed_mhz is None:
                listed.append(Candidate(sheet, part, None, match.said))
                continue
            listed.append(Candidate(sheet, part, len(offers), match.said))
            offers.append(make_offer(sheet, part, match, bench))
    return offers, listed


def _settle_loads(offers: Sequence[Offer], bench: Bench) -> list[Offer]:
    """Without a bench a part with a choice of loads is ordered with the one nearest to the incumbent's."""
    wanted = offers[0].load.span.mid
    if math.isnan(wanted):
        return list(offers)
    return [_ordered_with(offer, wanted, bench) for offer in offers]


def _ordered_with(offer: Offer, wanted: float, bench: Bench) -> Offer:
    if offer.load_range is not None:
        load = min(max(wanted, offer.load_range[0]), offer.load_range[1])
    elif offer.load_options:
        load = min(offer.load_options, key=lambda option: abs(option - wanted))
    else:
        return offer
    chosen = with_load(offer, load, bench)
    why = f"a load of {load:g} pF taken, the nearest to the incumbent's {wanted:g} pF"
    return replace(chosen, said=(*chosen.said, ("load_capacitance_pf", why)))


def _shift(columns: Columns, bench: Bench, reckoning: Reckoning | None) -> Array:
    first = columns.offers[0].part
    itself = np.array([same_number(first, offer.part) for offer in columns.offers], dtype=bool)
    like = alike(columns, itself)
    order, none = columns.overtone, np.zeros(len(columns), dtype=bool)
    if reckoning is None:
        return overtone_shift_ppm(rated_shift_ppm(columns, like), order, order[0], none, ~none)
    # What the review says cannot be had (no ESR, no rated load, no capacitors) cannot be had here.
    nominal = reckoning.numbers["load_error_ppm"].ends[MID]
    mode = reckoning.judged.get("mode")
    verdict = np.full(len(columns), MEETS) if mode is None else np.where(mode.asked, mode.verdict, MEETS)
    own = board_shift_ppm(columns, bench, nominal, like)
    return overtone_shift_ppm(own, order, order[0], verdict == FALLS_SHORT, verdict == CANNOT_TELL)


def within(shift: tuple[float, float, float], window: tuple[float, float]) -> bool:
    return window[0] <= shift[LOW] and shift[HIGH] <= window[1]
