"""What would make a candidate fit: load capacitors or a series resistor from the E24 series, each tried whole."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from typing import Any

import numpy as np

from compare.advice import Pair, e24_pairs
from compare.bench import Bench
from compare.reckoning import Reckoning, reckon_offers
from compare.trial import Trial
from compare.verdict import FALLS_SHORT, GAINS, MEETS, Judged

BY_PARTS = (*GAINS, "total_ppm", "drive_level_uw", "startup_ms", "rating")
"""Requirements that other capacitors or a series resistor can move."""
NOT_ASKED = 1e-12
MOST_PAIRS = 48
Change = dict[str, Any]


@dataclass(frozen=True)
class Refit:
    """Changes with which the candidate meets the bench, none where there are none, and what is to be said of them."""

    changes: list[Change] = field(default_factory=list)
    said: str = ""


NO_REFIT = Refit()
SWING = "the swing is taken as unchanged: measure the drive again with them fitted"
SWING_AHEAD = (
    "the swing at the amplifier's output, ahead of the resistor, is taken as unchanged: measure the drive again "
    "with it fitted"
)


def changes_for(reckoning: Reckoning, at: int, open_ones: Sequence[str], excuses: Sequence[str]) -> Refit:
    """The changes with which every requirement in `open_ones` is met.

    Whatever is found has been reckoned whole, with all corners and conditions: the short list only proposes. Where the
    drive alone is too great a series resistor is tried first, else load capacitors.
    """
    bench, judged = reckoning.bench, reckoning.judged
    keys = bench.settings[0].circuit
    if not open_ones or any(name not in BY_PARTS for name in open_ones) or _wants_a_reading(judged, at, open_ones):
        return Refit()
    if keys.input_capacitor_pf is None or keys.output_capacitor_pf is None:
        return Refit()
    pairs, sentence = _pairs(reckoning, at, bench, excuses)
    resistors = _resistors(reckoning, at)
    first = [*resistors, *pairs] if list(open_ones) == ["drive_level_uw"] else [*pairs, *resistors]
    for change, tried, settled in first:
        found = reckon_offers([reckoning.columns.offers[at]], tried)
        if _meets(found.judged, judged, at, [*excuses, *settled]):
            swing = SWING_AHEAD if change["what"] == "series resistor" else SWING
            return Refit([change], swing if "drive_level_uw" in open_ones else "")
    return Refit(said=sentence)


def _wants_a_reading(judged: Mapping[str, Judged], at: int, open_ones: Sequence[str]) -> bool:
    """True where no part on the board can settle it: a reading or bench key is missing, or an ESR promises nothing."""
    for name in open_ones:
        one = judged[name]
        if any(flags[at] for flags in one.missing.values()):
            return True
        if one.verdict[at] != FALLS_SHORT and len(one.typical_only) and one.typical_only[at]:
            return True
    return False


def _meets(found: Mapping[str, Judged], before: Mapping[str, Judged], at: int, excuses: Sequence[str]) -> bool:
    """Every requirement met; one that is excused must not come out below the incumbent's on the board as it is."""
    for one in found.values():
        if not one.asked[0] or one.verdict[0] == MEETS:
            continue
        if one.about not in excuses:
            return False
        own, now = before[one.about].worst[0], one.worst[0]
        if np.isfinite(own) and np.isfinite(now) and now < own * (1 - 1e-9) and one.about != "drive_level_uw":
            return False
    return True


Proposal = tuple[Change, Bench, tuple[str, ...]]
"""A change, the bench with it made, and the requirements that the proposal itself settles."""


def _resistors(reckoning: Reckoning, at: int) -> list[Proposal]:
    bench = reckoning.bench
    drive = reckoning.judged.get("drive_level_uw")
    if drive is None or drive.verdict[at] != FALLS_SHORT or bench.crystal.series_resistor_rule != "circuit":
        return []
    resistor, _ = Trial(reckoning.columns.take([at]), bench, reckoning.total, at).series_resistor()
    if resistor is None:
        return []
    before, after = bench.settings[0].circuit.series_resistor_ohm, resistor.series_resistor_ohm
    change = {"what": "series resistor", "from": before, "to": after}
    # The bench's swing was read without the resistor: held at the amplifier's output it is what brings the drive down.
    return [(change, with_circuit(bench, series_resistor_ohm=after), ("drive_level_uw",))]


def _pairs(reckoning: Reckoning, at: int, bench: Bench, excuses: Sequence[str]) -> tuple[list[Proposal], str]:
    """Pairs of load capacitors, best first, and a sentence where there are none."""
    trial = Trial(reckoning.columns.take([at]), relaxed(bench, excuses), reckoning.total, at)
    pairs, sentence = e24_pairs(trial.nominal_pairs, trial.worst_pairs, most=MOST_PAIRS)
    keys = bench.settings[0].circuit
    before = (keys.input_capacitor_pf or np.nan, keys.output_capacitor_pf or np.nan)
    pairs.sort(key=lambda pair: (_turned(pair, before), abs(pair.load_error_ppm)))
    proposals: list[Proposal] = []
    for pair in pairs:
        change = {"what": "load capacitors", "from": list(before), "to": [pair.input_pf, pair.output_pf]}
        fitted = with_circuit(bench, input_capacitor_pf=pair.input_pf, output_capacitor_pf=pair.output_pf)
        proposals.append((change, fitted, ()))
    return proposals, sentence


def _turned(pair: Pair, before: tuple[float, float]) -> float:
    """By how many pairs of steps of the series the ratio of the two differs from what is fitted."""
    ratio, present = pair.input_pf / pair.output_pf, before[0] / before[1]
    return float(np.round(abs(np.log(ratio / present)) * 24 / np.log(10) / 2)) if present > 0 else 0.0


def with_circuit(bench: Bench, **keys: float) -> Bench:
    """The bench with other values fitted; conditions that name the same keys get them too."""
    conditions = tuple(
        one.model_copy(update={key: value for key, value in keys.items() if key in one.given})
        for one in bench.circuit.condition
    )
    circuit = bench.circuit.model_copy(update={**keys, "condition": conditions})
    return bench.model_copy(update={"circuit": circuit})


def with_changes(bench: Bench, changes: Sequence[Mapping[str, Any]]) -> Bench:
    """The bench with the `changes` of a candidate (the data contract's section 6) made."""
    for change in changes:
        if change["what"] == "load capacitors":
            first, second = change["to"]
            bench = with_circuit(bench, input_capacitor_pf=first, output_capacitor_pf=second)
        else:
            bench = with_circuit(bench, series_resistor_ohm=change["to"])
    return bench


def relaxed(bench: Bench, excuses: Sequence[str]) -> Bench:
    """The bench without what is excused, so that the search for capacitors does not wait for it."""
    keys: dict[str, Any] = {}
    if "total_ppm" in excuses:
        keys |= {"total_ppm": None, "use": None}
    if "startup_ms" in excuses:
        keys |= {"startup_ms": None}
    if "drive_level_uw" in excuses:
        keys |= {"drive_headroom": NOT_ASKED}
    if any(name in excuses for name in GAINS):
        keys |= {"margin": NOT_ASKED}
    return bench.model_copy(update={"requirement": bench.requirement.model_copy(update=keys)})
