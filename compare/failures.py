"""What happens when a part of the oscillator fails: a table to start a failure-mode analysis from.

What can be reckoned is put through the whole chain, worst case included; the rest stands as common practice.
"""

from __future__ import annotations

import math
import tomllib
from collections.abc import Mapping
from dataclasses import dataclass, replace
from functools import cache
from pathlib import Path
from typing import Any

from compare.bench import Bench, CircuitKeys
from compare.columns import Columns
from compare.corners import reckon
from compare.figures import number, signed
from compare.reckoning import Reckoning

SMALL_PPM = 0.5


@dataclass(frozen=True)
class Failure:
    """One row. `headroom`: least R1 headroom left; `shift_ppm`: how the frequency moves; None where not reckoned."""

    what: str
    effect: str
    headroom: float | None
    shift_ppm: float | None
    shows: str

    @property
    def cells(self) -> list[str]:
        headroom = "" if self.headroom is None else number(self.headroom)
        shift = "" if self.shift_ppm is None else f"{signed(round(self.shift_ppm, 1))} ppm"
        return [self.what, self.effect, headroom, shift, self.shows]


HEADS = ("What fails", "Effect", "R1 headroom left", "Frequency moves", "How it shows")


@cache
def _table() -> list[dict[str, Any]]:
    listed: list[dict[str, Any]] = tomllib.loads(Path(__file__).with_name("failures.toml").read_text(encoding="utf-8"))[
        "failure"
    ]
    return listed


def failures(reckoning: Reckoning, at: int) -> list[Failure]:
    """Every row of failures.toml for one part in its circuit."""
    one, bench = reckoning.columns.take([at]), reckoning.bench
    base = float(reckoning.reckoned.nominal["load_error_ppm"][at])
    return [_failure(row, one, bench, base) for row in _table()]


def _failure(row: Mapping[str, Any], one: Columns, bench: Bench, base_ppm: float) -> Failure:
    if "effect" in row:
        return Failure(row["what"], row["effect"], None, None, row["shows"])
    columns = replace(one, esr_ohm=one.esr_ohm * row.get("esr", 1.0))
    changed = _changed(bench, row)
    if changed is None:
        return Failure(row["what"], "cannot be told", None, None, row["shows"])
    found = reckon(columns, changed)
    headroom = float(found.low("resistance_headroom")[0])
    shift = float(found.nominal["load_error_ppm"][0]) - base_ppm
    return Failure(
        row["what"],
        _effect(headroom, shift),
        headroom if math.isfinite(headroom) else None,
        shift if math.isfinite(shift) else None,
        row["shows"],
    )


def _effect(headroom: float, shift_ppm: float) -> str:
    """Stops where some corner has no headroom left; else slow or fast by the nominal shift."""
    if math.isnan(headroom):
        return "cannot be told"
    if headroom < 1:
        return "stops in some corner"
    if math.isnan(shift_ppm) or abs(shift_ppm) < SMALL_PPM:
        return "keeps going"
    return "slow" if shift_ppm < 0 else "fast"


def _changed(bench: Bench, row: Mapping[str, Any]) -> Bench | None:
    """The bench with the failure in it, in every condition; None where a node would be left without any capacitance."""
    frequency = bench.requirement.frequency_mhz

    def update(keys: CircuitKeys, *, own: bool) -> dict[str, Any]:
        found = dict(row.get("change", {}))
        for key, more in row.get("plus", {}).items():
            found[key] = (getattr(keys, key) or 0.0) + more
        for key, factor in row.get("times", {}).items():
            found[key] = _times(getattr(keys, key), factor)
        for key, other in row.get("beside", {}).items():
            present = keys.feedback_kohm(frequency)
            found[key] = present * other / (present + other) if math.isfinite(present) else other
        return {key: value for key, value in found.items() if not own or key in keys.given}

    conditions = tuple(one.model_copy(update=update(one, own=True)) for one in bench.circuit.condition)
    circuit = bench.circuit.model_copy(update={**update(bench.circuit, own=False), "condition": conditions})
    if any(circuit.node_has_no_capacitance(end) for end in ("input", "output")):
        return None
    return bench.model_copy(update={"circuit": circuit})


def _times(value: Any, factor: float) -> Any:
    if isinstance(value, tuple):
        return tuple(one * factor for one in value)
    return None if value is None else value * factor
