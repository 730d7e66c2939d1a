"""The root inputs of a reckoning, each by itself: every fitted, stray and inside capacitance, gain, and the crystal's.

The corners need only the sums at each node; whoever moves one input alone (what adds to a worst case, a sum of squares,
boards drawn at random) needs them apart.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass

import numpy as np

from compare.bench import Bench, CircuitKeys
from compare.circuit import Array, Circuit
from compare.columns import HIGH, LOW, MID, Columns
from compare.corners import added_resistance_ohm, as_reckoned, make_circuit, motional_resistance_ohm, rated_gm, swing_of
from compare.oscillation import Crystal, Limiter, analyse

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
    esr = motional_resistance_ohm(columns, bench, values[ESR], shunt) + added_resistance_ohm(bench, setting)
    return Crystal(columns.frequency_mhz[:, None], columns.load_pf[:, None], shunt, values[MOTIONAL], esr)


def moves(ends: Ends | Array) -> bool:
    """True where the low end is not the high one."""
    return bool(np.any(np.asarray(ends[LOW]) != np.asarray(ends[HIGH]))) and not bool(np.all(np.isnan(ends[MID])))


@dataclass(frozen=True)
class MovedAlone:
    """Every key with each root moved by itself: `found` (n, k), column 0 nominal; `ends_of`: the columns of each root.

    SHUNT_FLOOR is the estimated low end of a C0 that is only a limit; it counts for numbers of frequency alone.
    """

    found: Mapping[str, Array]
    ends_of: Sequence[tuple[str, tuple[int, int]]]


SHUNT_FLOOR = "shunt_capacitance_pf, estimated low end"


def moved_alone(columns: Columns, bench: Bench, number: int, limiter: Limiter) -> MovedAlone:
    """One setting of the bench at its nominal, and each root at its low and its high end with the others nominal."""
    keys = bench.settings[number].circuit
    roots: dict[str, Array] = {name: np.array(ends)[:, None] for name, ends in circuit_roots(keys, bench).items()}
    roots |= crystal_roots(columns, number)
    moving = [(name, name, ends) for name, ends in roots.items() if moves(ends)]
    if columns.shunt_loose.any():
        floor = np.where(columns.shunt_loose, columns.shunt_floor_pf, roots[SHUNT][MID])
        moving.append((SHUNT_FLOOR, SHUNT, np.stack([floor, roots[SHUNT][MID], floor])))
    ends_of = [(name, (1 + 2 * at, 2 + 2 * at)) for at, (name, _, _) in enumerate(moving)]
    values = {name: np.repeat(ends[MID][:, None], 1 + 2 * len(moving), axis=1) for name, ends in roots.items()}
    for (_, root, ends), (_, (low, high)) in zip(moving, ends_of, strict=True):
        values[root][:, low], values[root][:, high] = ends[LOW], ends[HIGH]
    crystal = crystal_at_values(values, columns, bench, number)
    circuit = circuit_at(values, keys, bench, np.asarray(crystal.shunt_capacitance_pf))
    return MovedAlone(analyse(circuit, crystal, *swing_of(keys), limiter, keys.probe_pf), ends_of)
