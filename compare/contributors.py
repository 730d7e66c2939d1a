"""Which inputs a worst case hangs on: each moved by itself from nominal to its bad end, in order of what that adds."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

import numpy as np

from compare.bench import Bench, CircuitKeys
from compare.circuit import Array
from compare.columns import HIGH, LOW, MID, Columns
from compare.corners import (
    as_reckoned,
    limiters_of,
    make_circuit,
    motional_resistance_ohm,
    nominal_transconductance_ms,
    swing_of,
)
from compare.explain import figure
from compare.oscillation import Crystal, analyse
from compare.terms import Total

MARGIN, TOTAL, DRIVE = "margin", "total_ppm", "drive_level_uw"
UNITS = {MARGIN: "", TOTAL: " ppm", DRIVE: " µW"}
NEGLIGIBLE = 1e-6
Roots = dict[str, float]


def contributors_of(columns: Columns, bench: Bench, total: Total, at: int) -> dict[str, list[dict[str, Any]]]:
    """For margin, total_ppm and drive_level_uw the inputs that add to the worst case, the greatest first."""
    one = columns.take([at])
    nominal = _roots(one, bench, bench.settings[0].circuit, 0)
    base = _outcome(one, bench, nominal, bench.settings[0].circuit)
    added: dict[str, dict[str, float]] = {MARGIN: {}, TOTAL: {}, DRIVE: {}}
    low_side = _tighter_side(bench, total, at) == LOW
    for name, ends in _ends(one, bench):
        moved = [_outcome(one, bench, nominal | {name: end}, bench.settings[0].circuit) for end in ends]
        _add(added, name, [_worse(base, one_moved, low_side) for one_moved in moved])
    for number, setting in list(enumerate(bench.settings))[1:]:
        moved_to = _outcome(one, bench, _roots(one, bench, setting.circuit, number), setting.circuit)
        _add(added, f"condition {setting.name}", [_worse(base, moved_to, low_side)])
    for limiter in limiters_of(bench.settings[0].circuit)[1:]:
        clipped = bench.settings[0].circuit.model_copy(update={"limiter": limiter})
        _add(added, "circuit.limiter", [_worse(base, _outcome(one, bench, nominal, clipped), low_side)])
    _add_terms(added[TOTAL], bench, (total, at), low_side=low_side, fork=one.offers[0].fork)
    return {key: _listed(key, by_input) for key, by_input in added.items()}


def _roots(one: Columns, bench: Bench, stated: CircuitKeys, number: int) -> Roots:
    """Every root input at its nominal value."""
    keys = as_reckoned(stated, bench)
    unknown = {end: getattr(keys, f"{end}_capacitor_pf") for end in ("input", "output")}
    gm = nominal_transconductance_ms(keys, bench, one.shunt_pf[number, MID])
    return {
        "circuit.input_capacitor_pf": np.nan if unknown["input"] is None else unknown["input"],
        "circuit.output_capacitor_pf": np.nan if unknown["output"] is None else unknown["output"],
        "circuit.input_stray_pf": keys.input_stray_pf,
        "circuit.output_stray_pf": keys.output_stray_pf,
        "circuit.across_stray_pf": keys.across_stray_pf,
        "circuit.internal_pf, input": keys.internal_at_each_pin_pf,
        "circuit.internal_pf, output": keys.internal_at_each_pin_pf,
        "circuit.amplifier_output_pf": keys.amplifier_output_pf,
        "circuit.transconductance_ms": float(gm[0]),
        "esr_ohm": float(one.esr_ohm[number, MID, 0]),
        "shunt_capacitance_pf": float(one.shunt_pf[number, MID, 0]),
        "motional_capacitance_ff": float(one.motional_ff[number, MID, 0]),
    }


def _ends(one: Columns, bench: Bench) -> list[tuple[str, tuple[float, float]]]:
    """Low and high end of each root input that has any."""
    keys = as_reckoned(bench.settings[0].circuit, bench)
    nominal = _roots(one, bench, bench.settings[0].circuit, 0)
    percents = {
        "circuit.input_capacitor_pf": keys.capacitor_tolerance_percent,
        "circuit.output_capacitor_pf": keys.capacitor_tolerance_percent,
        "circuit.internal_pf, input": keys.internal_tolerance_percent,
        "circuit.internal_pf, output": keys.internal_tolerance_percent,
        "circuit.amplifier_output_pf": keys.stray_tolerance_percent,
    }
    percents |= {
        f"circuit.{name}_stray_pf": keys.stray_tolerance(f"{name}_stray_pf") for name in ("input", "output", "across")
    }
    ends = {name: (nominal[name] * (1 - p / 100), nominal[name] * (1 + p / 100)) for name, p in percents.items()}
    gm = keys.transconductance_range_ms
    if gm is not None:
        ends["circuit.transconductance_ms"] = (gm[LOW], gm[HIGH])
    spans = {
        "esr_ohm": one.esr_ohm[0, :, 0],
        "shunt_capacitance_pf": one.shunt_pf[0, :, 0],
        "motional_capacitance_ff": one.motional_ff[0, :, 0],
    }
    ends |= {name: (float(span[LOW]), float(span[HIGH])) for name, span in spans.items()}
    if one.shunt_loose[0]:
        ends["shunt_capacitance_pf"] = (float(one.shunt_floor_pf[0]), ends["shunt_capacitance_pf"][1])
    return [(name, pair) for name, pair in ends.items() if pair[0] != pair[1]]


def _outcome(one: Columns, bench: Bench, roots: Roots, stated: CircuitKeys) -> Mapping[str, float]:
    keys = as_reckoned(stated, bench)
    inside_output = roots["circuit.internal_pf, output"]
    ahead = keys.series_resistor_ohm > 0
    capacitances: list[Array | float] = [
        roots["circuit.input_capacitor_pf"] + roots["circuit.input_stray_pf"] + roots["circuit.internal_pf, input"],
        roots["circuit.output_capacitor_pf"] + roots["circuit.output_stray_pf"] + (0.0 if ahead else inside_output),
        roots["circuit.across_stray_pf"],
        roots["circuit.amplifier_output_pf"] + (inside_output if ahead else 0.0),
    ]
    shunt = np.array([roots["shunt_capacitance_pf"]])
    esr = motional_resistance_ohm(one, bench, np.array([roots["esr_ohm"]]), shunt)
    if bench.crystal.series_resistor_rule == "add to ESR":
        esr = esr + stated.series_resistor_ohm
    circuit = make_circuit(keys, bench, capacitances, np.array([roots["circuit.transconductance_ms"]]))
    crystal = Crystal(one.frequency_mhz, one.load_pf, shunt, roots["motional_capacitance_ff"], esr)
    found = analyse(circuit, crystal, *swing_of(keys), limiters_of(keys)[0], keys.probe_pf)
    return {key: float(found[key][0]) for key in (MARGIN, "load_error_ppm", DRIVE)}


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
