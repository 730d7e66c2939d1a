"""The parts of all sheets that offer the bench's frequency, as one lot, and a note for each that does not."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field
from typing import Any

from compare.bench import Bench
from compare.listed import list_lot
from compare.lot import Joined, Lot, Separate
from compare.offer import called, make_offer, match_frequency
from extract.model import SpecSheet
from extract.partlist import PartList


@dataclass
class Offers:
    """The parts that offer the frequency, in the order read, and a note for each that does not."""

    offers: Lot
    notes: list[dict[str, Any]] = field(default_factory=list)


def find_offers(sheets: Sequence[SpecSheet], bench: Bench) -> Offers:
    """Every part that offers the bench's frequency; its load still open where the sheet leaves a choice."""
    lots: list[Lot] = []
    notes: list[dict[str, Any]] = []
    for sheet in sheets:
        lot, said = list_lot(sheet, sheet.parts, bench) if isinstance(sheet.parts, PartList) else _lot(sheet, bench)
        lots.append(lot)
        notes += [
            {"level": "info", "message": f"{called(sheet, number)}: {why}", "where": None} for number, why in said
        ]
    return Offers(Joined.of(lots), notes)


def _lot(sheet: SpecSheet, bench: Bench) -> tuple[Lot, list[tuple[str | None, str]]]:
    offers, said = [], []
    for part in sheet.parts:
        match = match_frequency(part, bench.requirement.frequency_mhz)
        if match.printed_mhz is None:
            said.append((part.part_number, match.said))
        else:
            offers.append(make_offer(sheet, part, match, bench))
    return Separate(offers), said
