"""Every number of the review as columns: low, mid, high, what it rests on, and why it is missing where it is."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field

import numpy as np

from compare import motional
from compare.bench import Bench
from compare.circuit import Array
from compare.columns import HIGH, LOW, MID, Columns, Flags
from compare.corners import BY_SHUNT_FLOOR, Reckoned
from compare.lot import C1_FROM, spans
from compare.terms import Total
from compare.verdict import Silence, transconductance_missing

CIRCUIT = ("circuit.input_capacitor_pf", "circuit.output_capacitor_pf")
GAIN = (*CIRCUIT, "transconductance", "esr_ohm")
NEEDS: dict[str, tuple[str, ...]] = {
    "motional_capacitance_ff": (),
    "motional_inductance_mh": (),
    "quality_factor": (),
    "series_resonance_mhz": ("load_capacitance_pf",),
    "parallel_resonance_mhz": ("load_capacitance_pf",),
    "circuit_load_pf": (*CIRCUIT, "esr_ohm"),
    "load_resonance_resistance_ohm": (*CIRCUIT, "esr_ohm"),
    "negative_resistance_ohm": (*CIRCUIT, "transconductance"),
    "margin": GAIN,
    "gain_ratio": GAIN,
    "resistance_headroom": GAIN,
    "greatest_esr_ohm": (*CIRCUIT, "transconductance"),
    "allowed_esr_ohm": (*CIRCUIT, "transconductance"),
    "critical_transconductance_ms": (*CIRCUIT, "esr_ohm"),
    "greatest_transconductance_ms": (*CIRCUIT, "esr_ohm"),
    "load_error_ppm": (*CIRCUIT, "esr_ohm", "load_capacitance_pf"),
    "trim_ppm_per_pf": (*CIRCUIT, "esr_ohm", "load_capacitance_pf"),
    "drive_level_uw": (*CIRCUIT, "esr_ohm", "circuit.swing_v"),
    "startup_ms": GAIN,
    "total_ppm": (*CIRCUIT, "esr_ohm", "load_capacitance_pf"),
}
"""For each number what it cannot be had without. C0 and C1 are not among them: they are estimated at need."""
RESTS_ON_C1 = (*BY_SHUNT_FLOOR, "motional_capacitance_ff", "startup_ms", "total_ppm")
OPEN_END = {
    "startup_ms": HIGH,
    "critical_transconductance_ms": HIGH,
    "greatest_transconductance_ms": LOW,
    "gain_ratio": LOW,
    "greatest_esr_ohm": LOW,
    "allowed_esr_ohm": LOW,
}
"""The end that is without bound where some corner has no such number: it does not start, or cannot oscillate."""
LIMITED_BY_OUTPUT = ("circuit_load_pf", "load_resonance_resistance_ohm", "margin", "load_error_ppm", "total_ppm")


@dataclass
class Number:
    """One key over all parts: (3, n) low, mid, high; NaN where there is none or no bound."""

    ends: Array
    estimated: Flags
    stated: Flags
    lacking: Mapping[str, Flags] = field(default_factory=dict)


def numbers(columns: Columns, bench: Bench, reckoned: Reckoned, total: Total, known: Silence) -> dict[str, Number]:
    """All numbers, in the order in which they are told."""
    lacking = _lacking(columns, bench, known)
    found = {}
    for key, needs in NEEDS.items():
        wanted = {name: flags for need in needs for name, flags in lacking[need].items()}
        if key == "total_ppm":
            wanted |= {name: flags for term in total.terms.values() for name, flags in term.missing.items()}
        short_of = {name: flags for name, flags in wanted.items() if flags.any()}
        ends = _ends(key, columns, bench, reckoned, total)
        gone = np.logical_or.reduce(list(short_of.values())) if short_of else np.zeros(len(columns), dtype=bool)
        ends = np.where(gone, np.nan, ends)
        none = np.zeros(len(columns), dtype=bool)
        found[key] = Number(np.where(np.isinf(ends), np.nan, ends), _estimated(key, columns, total), none, short_of)
    _fill_arm(found, columns)
    for key in ("motional_inductance_mh", "quality_factor"):
        _put_stated(found[key], spans(columns.offers.at(0, C1_FROM[key])))
    found["motional_capacitance_ff"].stated = columns.route == 0
    return found


def _lacking(columns: Columns, bench: Bench, known: Silence) -> dict[str, dict[str, Flags]]:
    n = len(columns)
    lacking: dict[str, dict[str, Flags]] = {key: {key: np.full(n, gone)} for key, gone in known.bench_keys.items()}
    lacking["esr_ohm"] = {"esr_ohm": known.esr}
    lacking["load_capacitance_pf"] = {"load_capacitance_pf": known.load}
    lacking["transconductance"] = transconductance_missing(columns, bench)
    return lacking


def _ends(key: str, columns: Columns, bench: Bench, reckoned: Reckoned, total: Total) -> Array:
    if key == "motional_capacitance_ff":
        span = columns.motional_ff
        return np.stack([span[:, LOW].min(axis=0), span[0, MID], span[:, HIGH].max(axis=0)])
    if key == "total_ppm":
        return _ordered(np.fmin.reduce(total.low, axis=(1, 2)), total.mid, np.fmax.reduce(total.high, axis=(1, 2)))
    source = "greatest_esr_ohm" if key == "allowed_esr_ohm" else key
    ends = _ordered(reckoned.low(source), reckoned.nominal[source], reckoned.high(source))
    if key == "allowed_esr_ohm":
        ends = ends / bench.requirement.margin
    if key in OPEN_END:
        ends[OPEN_END[key]] = np.where(reckoned.some_without(source), np.nan, ends[OPEN_END[key]])
    return ends


def _ordered(low: Array, mid: Array, high: Array) -> Array:
    return np.stack([np.fmin(low, mid), mid, np.fmax(high, mid)])


def _estimated(key: str, columns: Columns, total: Total) -> Flags:
    rests = (
        columns.shunt_missing.copy()
        if key not in ("motional_capacitance_ff", "quality_factor")
        else columns.shunt_missing & False
    )
    if key in (*BY_SHUNT_FLOOR, "total_ppm") and key not in ("motional_inductance_mh", "quality_factor"):
        rests |= columns.shunt_loose
    if key in RESTS_ON_C1:
        rests |= columns.motional_estimated
    if key == "total_ppm":
        for term in total.terms.values():
            for flags in term.estimated.values():
                rests |= flags
    if key == "series_resonance_mhz":
        rests &= ~np.isinf(columns.load_pf)  # of a series part it is the frequency stated
    return rests


def _fill_arm(found: dict[str, Number], columns: Columns) -> None:
    """L1 and Q without a rated load (fs taken as the nominal frequency), and an estimate of Q without an ESR."""
    c1, frequency = found["motional_capacitance_ff"].ends[::-1], columns.frequency_mhz
    no_load = np.isnan(columns.load_pf)
    esr = np.stack([columns.esr_ohm[:, HIGH].max(axis=0), columns.esr_ohm[0, MID], columns.esr_ohm[:, LOW].min(axis=0)])
    inductance, quality = found["motional_inductance_mh"], found["quality_factor"]
    # C1 and R1 are above zero wherever they are known.
    inductance.ends = np.where(no_load, motional.motional_inductance_mh(frequency, c1), inductance.ends)
    quality.ends = np.where(no_load, motional.quality_factor(frequency, c1, esr), quality.ends)
    guess = motional.estimate_quality_factor()
    silent = np.isnan(quality.ends[MID])
    quality.ends = np.where(silent, np.array([[guess.low], [guess.mid], [guess.high]], dtype=float), quality.ends)
    quality.estimated = quality.estimated | silent


def _put_stated(number: Number, span: Array) -> None:
    """A stated value is shown as stated, whatever is derived beside it."""
    stated = ~np.isnan(span[MID])
    number.ends = np.where(stated, span, number.ends)
    number.stated = stated
    number.estimated = number.estimated & ~stated
