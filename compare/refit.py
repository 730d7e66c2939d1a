"""What would make a candidate fit: load capacitors or a series resistor from the E24 series, each tried whole."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping, Sequence
from typing import Any

import numpy as np

from compare.advice import e24_pairs
from compare.bench import Bench
from compare.reckoning import Reckoning, reckon_offers
from compare.trial import Trial
from compare.verdict import FALLS_SHORT, GAINS, MEETS, Judged

BY_PARTS = (*GAINS, "total_ppm", "drive_level_uw", "startup_ms", "rating")
"""Requirements that other capacitors or a series resistor can move."""
NOT_ASKED = 1e-12
Change = dict[str, Any]
Accepts = Callable[[Reckoning, Sequence[str]], bool]


def changes_for(reckoning: Reckoning, at: int, open_ones: Sequence[str], excuses: Sequence[str]) -> list[Change]:
    """The least changes with which every requirement in `open_ones` is met; empty where none are found.

    Whatever is found has been reckoned whole, with all corners and conditions: the short list only proposes.
    """
    bench, judged = reckoning.bench, reckoning.judged
    keys = bench.settings[0].circuit
    if not open_ones or any(name not in BY_PARTS for name in open_ones) or _wants_a_reading(judged, at, open_ones):
        return []
    if keys.input_capacitor_pf is None or keys.output_capacitor_pf is None:
        return []
    for changes, tried, settled in _proposals(reckoning, at, excuses):
        found = reckon_offers([reckoning.columns.offers[at]], tried)
        if _meets(found.judged, judged, at, [*excuses, *settled]):
            return changes
    return []


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


def _proposals(
    reckoning: Reckoning, at: int, excuses: Sequence[str]
) -> Iterator[tuple[list[Change], Bench, tuple[str, ...]]]:
    """Changes to try, the bench with them made, and what the proposal itself settles: capacitors, resistor, both."""
    bench = reckoning.bench
    trial_bench = relaxed(bench, excuses)
    yield from (([change], tried, ()) for change, tried in _pairs(reckoning, at, bench, trial_bench))
    drive = reckoning.judged.get("drive_level_uw")
    if drive is None or drive.verdict[at] != FALLS_SHORT or bench.crystal.series_resistor_rule != "circuit":
        return
    trial = Trial(reckoning.columns.take([at]), bench, reckoning.total, at)
    resistor, _ = trial.series_resistor()
    if resistor is None:
        return
    before = bench.settings[0].circuit.series_resistor_ohm
    change = {"what": "series resistor", "from": before, "to": resistor.series_resistor_ohm}
    fitted = with_circuit(bench, series_resistor_ohm=resistor.series_resistor_ohm)
    # The bench's swing was read without the resistor: held at the amplifier's output it is what brings the drive down.
    yield [change], fitted, ("drive_level_uw",)


def _pairs(reckoning: Reckoning, at: int, bench: Bench, trial_bench: Bench) -> Iterator[tuple[Change, Bench]]:
    trial = Trial(reckoning.columns.take([at]), trial_bench, reckoning.total, at)
    pairs, _ = e24_pairs(trial.nominal_pairs, trial.worst_pairs)
    keys = bench.settings[0].circuit
    before = [keys.input_capacitor_pf, keys.output_capacitor_pf]
    for pair in pairs:
        change = {"what": "load capacitors", "from": before, "to": [pair.input_pf, pair.output_pf]}
        yield change, with_circuit(bench, input_capacitor_pf=pair.input_pf, output_capacitor_pf=pair.output_pf)


def with_circuit(bench: Bench, **keys: float) -> Bench:
    """The bench with other values fitted; conditions that name the same keys get them too."""
    conditions = tuple(
        one.model_copy(update={key: value for key, value in keys.items() if key in one.given})
        for one in bench.circuit.condition
    )
    circuit = bench.circuit.model_copy(update={**keys, "condition": conditions})
    return bench.model_copy(update={"circuit": circuit})


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
