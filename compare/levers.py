"""How much of the room that the present part had each reading of another part uses, put in its place alone.

For each reading that differs a part is made up: the present one with that reading of the candidate. All of them are
reckoned together, so that what a line does on the board is the exact chain's answer and no rule of thumb.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any

from compare.answers import FIGURES, SHORT_NAMES, worst_said
from compare.bench import Bench
from compare.circuit_text import temperatures
from compare.offer import make_offer, match_frequency
from compare.reckoning import Reckoning, bare_result, choose_loads, reckon_offers
from compare.verdict import CANNOT_TELL, FALLS_SHORT, MEETS
from extract.model import Part, SpecSheet

MOTIONAL = (
    "motional_capacitance_ff",
    "motional_inductance_mh",
    "capacitance_ratio",
    "pulling_sensitivity_ppm_per_pf",
    "quality_factor",
)
TOGETHER = dict.fromkeys(MOTIONAL, MOTIONAL) | {"resonance": ("load_capacitance_pf",)}
"""Readings that change hands together, since they are ways to say one thing."""
OF_THE_PART = ("mode", "resonance")
LESS_IS_BETTER = ("total_ppm", "startup_ms")
"""Requirements whose figure is a limit over the slack; of the others the figure grows with it."""
NOTHING = 0.005
"""A share of the room that is no change to a person."""


@dataclass(frozen=True)
class Lever:
    """What one reading does by itself.

    Attributes
    ----------
    about : str
        The requirement that it moves most; "" where it moves none.
    used : float
        Share of the room the present part had in it: 1 uses all, above 1 it falls short, inf where there was no room;
        below 0 room is won. NaN: cannot be told.
    says : str
        What becomes of that requirement, in words.
    """

    about: str
    used: float
    says: str

    @property
    def past(self) -> bool:
        """True where the requirement is no longer met."""
        return self.used > 1 + 1e-9


def levers(
    incumbent: tuple[SpecSheet, Part], candidate: tuple[SpecSheet, Part], fields: Sequence[str], bench: Bench
) -> dict[str, Lever]:
    """The lever of each of `fields`; those that belong to no requirement are left out."""
    (sheet, old), (_, new) = incumbent, candidate
    made = {field: swapped(old, new, field) for field in fields if field in OF_THE_PART or _is_reading(field)}
    offers, names = [], []
    for name, part in {"": old, **made}.items():
        match = match_frequency(part, bench.requirement.frequency_mhz)
        if match.printed_mhz is None:
            continue
        offers.append(make_offer(sheet, part, match, bench))
        names.append(name)
    if not names or names[0]:
        return {}
    reckoning = reckon_offers(choose_loads(offers, bench), bench)
    return {name: _lever(reckoning, at, bench, name) for at, name in enumerate(names) if name}


def _is_reading(field: str) -> bool:
    return field.rpartition("_")[2] in ("ppm", "c", "pf", "ohm", "ff", "mh", "factor", "ratio", "uw", "c2")


def swapped(old: Part, new: Part, field: str) -> Part:
    """The old part with one field (and what says the same in other words) as the new one has it."""
    names = TOGETHER.get(field, (field,))
    told: dict[str, Any] = {name: getattr(old, name) for name in Part.model_fields}
    if field in OF_THE_PART:
        told[field] = getattr(new, field)
    if field != "mode":
        kept = [reading for reading in old.readings if reading.field not in names]
        told["readings"] = (*kept, *(reading for reading in new.readings if reading.field in names))
    return Part.model_construct(**told)


def _lever(reckoning: Reckoning, at: int, bench: Bench, field: str) -> Lever:
    moves: list[tuple[float, str]] = []
    for about, one in reckoning.judged.items():
        if not one.asked[at] and not one.asked[0]:
            continue
        if about == "operating_temperature_c":
            share = _range_share(reckoning, at, bench, field)
        else:
            verdicts = int(one.verdict[0]), int(one.verdict[at])
            share = _share(about, (float(one.slack[0]), float(one.slack[at])), verdicts)
        moves.append((share, about))
    untold = [about for share, about in moves if math.isnan(share)]
    known = [move for move in moves if not math.isnan(move[0])]
    worst = max(known, default=(0.0, ""))
    if untold and worst[0] <= 1:
        says = f"{_becomes(reckoning, at, untold[0], bench)}: cannot be told" if untold[0] in FIGURES else ""
        return Lever(untold[0], math.nan, says)
    if worst[0] <= NOTHING:
        worst = min(known, default=(0.0, ""))
    if abs(worst[0]) <= NOTHING:
        return Lever("", 0.0, "")
    return Lever(worst[1], worst[0], _becomes(reckoning, at, worst[1], bench))


def _share(about: str, slack: tuple[float, float], verdict: tuple[int, int]) -> float:
    """Share of the room used, from the slacks before and after; of a yes or no none or all."""
    if verdict[1] == CANNOT_TELL != verdict[0]:
        return math.nan
    if about not in FIGURES or any(map(math.isnan, slack)):
        return 0.0 if verdict[0] == verdict[1] else math.inf if verdict[1] == FALLS_SHORT else -1.0
    before, after = (1 / max(one, 1e-9) if about in LESS_IS_BETTER else -one for one in slack)
    limit = 1.0 if about in LESS_IS_BETTER else -1.0
    if math.isclose(before, after, rel_tol=1e-9):
        return 0.0
    if before >= limit:
        return math.inf if after > before else -1.0
    return (after - before) / (limit - before)


def _range_share(reckoning: Reckoning, at: int, bench: Bench, field: str) -> float:
    """Of the operating range: the greater share of what stood over at one of the two ends."""
    asked = bench.requirement.temperature_c
    if field != "operating_temperature_c" or asked is None:
        return 0.0
    taken = [reckoning.columns.offers[place].operating_range for place in (0, at)]
    if not taken[1].stated:
        return math.nan
    if not taken[0].stated:
        return 0.0
    old, new = (one.span for one in taken)
    ends = ((asked[0] - old.low, new.low - old.low), (old.high - asked[1], old.high - new.high))
    return max(_of_room(room, used) for room, used in ends)


def _of_room(room: float, used: float) -> float:
    if used == 0:
        return 0.0
    if room <= 0:
        return math.inf if used > 0 else -1.0
    return used / room


def _called(about: str) -> str:
    if about == "total_ppm":
        return "sum"
    name = SHORT_NAMES.get(about, about)
    return name if name[1:2].isdigit() or name[1:2].isupper() or name.startswith("ppm") else name[:1].lower() + name[1:]


def _becomes(reckoning: Reckoning, at: int, about: str, bench: Bench) -> str:
    """`margin 6.2 becomes 5.5, needs 5`, `ppm in all +47.6 becomes +50.8, limit ±50`."""
    if about == "operating_temperature_c" and bench.requirement.temperature_c is not None:
        asked = temperatures(bench.requirement.temperature_c)
        meets = int(reckoning.judged[about].verdict[at]) == MEETS
        return f"covers {asked}" if meets else f"does not cover {asked}"
    if about not in FIGURES:
        words = {MEETS: "meets", FALLS_SHORT: "falls short"}
        return f"{_called(about)}: {words.get(int(reckoning.judged[about].verdict[at]), 'cannot tell')}"
    old, new = (worst_said(bare_result(reckoning, place), about, bench) for place in (0, at))
    head, _, tail = old.partition(", ")
    return f"{_called(about)} {head if tail and new.endswith(tail) else old} becomes {new}"
