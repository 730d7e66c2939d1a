"""Which inputs a worst case hangs on: each moved by itself from nominal to its bad end, in order of what that adds."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

import numpy as np

from compare.bench import Bench
from compare.columns import HIGH, LOW, Columns
from compare.corners import limiters_of
from compare.explain import figure
from compare.roots import SHUNT, SHUNT_FLOOR, MovedAlone, moved_alone
from compare.terms import Total

MARGIN, TOTAL, DRIVE = "margin", "total_ppm", "drive_level_uw"
UNITS = {MARGIN: "", TOTAL: " ppm", DRIVE: " µW"}
NEGLIGIBLE = 1e-6


def contributors_of(columns: Columns, bench: Bench, total: Total, at: int) -> dict[str, list[dict[str, Any]]]:
    """For margin, total_ppm and drive_level_uw the inputs that add to the worst case, the greatest first."""
    one = columns.take([at])
    limiter, *others = limiters_of(bench.settings[0].circuit)
    moved = moved_alone(one, bench, 0, limiter)
    base = _at(moved, 0)
    added: dict[str, dict[str, float]] = {MARGIN: {}, TOTAL: {}, DRIVE: {}}
    low_side = _tighter_side(bench, total, at) == LOW
    for name, ends in moved.ends_of:
        worse = [_worse(base, _at(moved, column), low_side) for column in ends]
        if name == SHUNT_FLOOR:
            added[TOTAL][SHUNT] = max(one_end[TOTAL] for one_end in worse)
        else:
            _add(added, name, worse)
    for number, setting in list(enumerate(bench.settings))[1:]:
        there = _at(moved_alone(one, bench, number, limiters_of(setting.circuit)[0]), 0)
        _add(added, f"condition {setting.name}", [_worse(base, there, low_side)])
    for other in others:
        _add(added, "circuit.limiter", [_worse(base, _at(moved_alone(one, bench, 0, other), 0), low_side)])
    _add_terms(added[TOTAL], bench, (total, at), low_side=low_side, fork=one.offers[0].fork)
    return {key: _listed(key, by_input) for key, by_input in added.items()}


def _at(moved: MovedAlone, column: int) -> Mapping[str, float]:
    return {key: float(moved.found[key][0, column]) for key in (MARGIN, "load_error_ppm", DRIVE)}


def _worse(base: Mapping[str, float], moved: Mapping[str, float], low_side: bool) -> dict[str, float]:
    shift = moved["load_error_ppm"] - base["load_error_ppm"]
    return {
        MARGIN: base[MARGIN] - moved[MARGIN],
        TOTAL: -shift if low_side else shift,
        DRIVE: moved[DRIVE] - base[DRIVE],
    }


def _add(added: dict[str, dict[str, float]], name: str, worse: list[dict[str, float]]) -> None:
    for key, by_input in added.items():
        by_input[name] = max(one[key] for one in worse)


def _tighter_side(bench: Bench, total: Total, at: int) -> int:
    """The side of the budget that lies nearer to its limit, or further out where there is no limit."""
    low = float(np.fmin.reduce(total.low[at], axis=None))
    high = float(np.fmax.reduce(total.high[at], axis=None))
    limits = bench.requirement.limits_ppm or (-1.0, 1.0)
    return LOW if low / limits[0] > high / limits[1] else HIGH


def _add_terms(by_input: dict[str, float], bench: Bench, of: tuple[Total, int], *, low_side: bool, fork: bool) -> None:
    total, at = of
    trimmed = bench.requirement.trim_step_ppm is not None
    names = {
        "make": "requirement.trim_step_ppm" if trimmed else "frequency_tolerance_ppm",
        "temperature": "parabola over temperature" if fork else "frequency_stability_ppm",
        "ageing": "ageing_ppm",
    }
    for name, term in total.terms.items():
        by_input[names[name]] = float(-term.low[at] if low_side else term.high[at])


def _listed(key: str, by_input: Mapping[str, float]) -> list[dict[str, Any]]:
    counting = [(name, value) for name, value in by_input.items() if value > NEGLIGIBLE]
    counting.sort(key=lambda pair: -pair[1])
    verb = "takes" if key == MARGIN else "adds"
    return [
        {"input": name, "adds": value, "message": f"{name} {verb} {figure(value, 3)}{UNITS[key]}"}
        for name, value in counting
    ]
