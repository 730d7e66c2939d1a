"""The root inputs of a reckoning, each by itself: every fitted, stray and inside capacitance, gain, and the crystal's.

The corners need only the sums at each node; whoever moves one input alone (what adds to a worst case, a sum of squares,
boards drawn at random) needs them apart.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence

import numpy as np

from compare import motional
from compare.bench import Bench, CircuitKeys
from compare.circuit import Array, Circuit
from compare.columns import HIGH, LOW, MID, Columns, spans
from compare.corners import as_reckoned, make_circuit, motional_resistance_ohm, rated_gm
from compare.offer import Offer
from compare.oscillation import Crystal

INPUT, OUTPUT = "circuit.input_capacitor_pf", "circuit.output_capacitor_pf"
INPUT_STRAY, OUTPUT_STRAY = "circuit.input_stray_pf", "circuit.output_stray_pf"
ACROSS = "circuit.across_stray_pf"
INPUT_INSIDE, OUTPUT_INSIDE = "circuit.internal_pf, input", "circuit.internal_pf, output"
AMPLIFIER = "circuit.amplifier_output_pf"
GAIN = "circuit.transconductance_ms"
CAPACITANCES = (INPUT, OUTPUT, INPUT_STRAY, OUTPUT_STRAY, ACROSS, INPUT_INSIDE, OUTPUT_INSIDE, AMPLIFIER)
ESR, SHUNT, MOTIONAL = "esr_ohm", "shunt_capacitance_pf", "motional_capacitance_ff"
CRYSTAL = (ESR, SHUNT, MOTIONAL)
Ends = tuple[float, float, float]


def circuit_roots(stated: CircuitKeys, bench: Bench) -> dict[str, Ends]:
    """Low, nominal and high of everything in a circuit that has a tolerance; NaN where it is not known.

    The transconductance is left out where the bench gives none: the IC's rating stands for it, part by part.
    """
    keys = as_reckoned(stated, bench)
    fitted, inside = keys.capacitor_tolerance_percent, keys.internal_tolerance_percent
    values = {
        INPUT: (keys.input_capacitor_pf, fitted),
        OUTPUT: (keys.output_capacitor_pf, fitted),
        INPUT_STRAY: (keys.input_stray_pf, keys.stray_tolerance("input_stray_pf")),
        OUTPUT_STRAY: (keys.output_stray_pf, keys.stray_tolerance("output_stray_pf")),
        ACROSS: (keys.across_stray_pf, keys.stray_tolerance("across_stray_pf")),
        INPUT_INSIDE: (keys.internal_at_each_pin_pf, inside),
        OUTPUT_INSIDE: (keys.internal_at_each_pin_pf, inside),
        AMPLIFIER: (keys.amplifier_output_pf, keys.stray_tolerance_percent),
    }
    roots = {name: _toleranced(value, percent) for name, (value, percent) in values.items()}
    gain = keys.transconductance_range_ms
    return roots if gain is None else roots | {GAIN: gain}


def _toleranced(value: float | None, percent: float) -> Ends:
    known = np.nan if value is None else value
    return known * (1 - percent / 100), known, known * (1 + percent / 100)


def crystal_roots(columns: Columns, setting: int) -> dict[str, Array]:
    """(3, n) low, mid and high of ESR as stated, C0 and C1, as one setting of the bench takes them."""
    return {
        ESR: columns.esr_ohm[setting],
        SHUNT: columns.shunt_pf[setting],
        MOTIONAL: columns.motional_ff[setting],
    }


def circuit_at(values: Mapping[str, Array], stated: CircuitKeys, bench: Bench, shunt_pf: Array) -> Circuit:
    """The circuit with each root at the value given. `shunt_pf` is C0, for a rating that takes the part's own."""
    keys = as_reckoned(stated, bench)
    ahead = keys.series_resistor_ohm > 0
    inside = values[OUTPUT_INSIDE]
    capacitances = (
        values[INPUT] + values[INPUT_STRAY] + values[INPUT_INSIDE],
        values[OUTPUT] + values[OUTPUT_STRAY] + (0.0 if ahead else inside),
        values[ACROSS],
        values[AMPLIFIER] + (inside if ahead else 0.0),
    )
    gain = values[GAIN] if GAIN in values else rated_gm(keys, bench, shunt_pf)
    return make_circuit(keys, bench, capacitances, gain)


def crystal_at_values(values: Mapping[str, Array], columns: Columns, bench: Bench, setting: int) -> Crystal:
    """The crystals with each root at the value given, (n, k) each: ESR turned into R1 by the bench's rules."""
    shunt = values[SHUNT]
    esr = motional_resistance_ohm(columns, bench, values[ESR], shunt) + added_esr_ohm(bench, setting)
    return Crystal(columns.frequency_mhz[:, None], columns.load_pf[:, None], shunt, values[MOTIONAL], esr)


def added_esr_ohm(bench: Bench, setting: int) -> float:
    """The series resistor, where the bench counts it as so much more ESR."""
    counted = bench.crystal.series_resistor_rule == "add to ESR"
    return bench.settings[setting].circuit.series_resistor_ohm if counted else 0.0


def moves(ends: Ends | Array) -> bool:
    """True where the low end is not the high one."""
    return bool(np.any(np.asarray(ends[LOW]) != np.asarray(ends[HIGH]))) and not bool(np.all(np.isnan(ends[MID])))


def fork_spans(offers: Sequence[Offer]) -> tuple[Array, Array]:
    """(3, n) parabolic coefficient, negative, and turnover temperature; estimated where the sheet is silent."""
    stated = -np.abs(spans([o.parabolic for o in offers]))
    coefficient = _or_estimate(stated, motional.estimate_parabolic_coefficient_ppm_per_c2())
    turnover = _or_estimate(spans([o.turnover for o in offers]), motional.estimate_turnover_temperature_c())
    return np.sort(coefficient, axis=0), turnover


def _or_estimate(stated: Array, guess: motional.Estimate) -> Array:
    return np.where(np.isnan(stated[MID]), np.array([[guess.low], [guess.mid], [guess.high]], dtype=float), stated)
