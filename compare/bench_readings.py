"""What was read on the bench beside what is computed: load, stray and C1 from frequencies, margin from a resistor."""

from __future__ import annotations

import itertools
import math
from collections.abc import Sequence
from typing import Any

import numpy as np

from compare import measured, motional
from compare.bench import Bench, CircuitKeys, Measured
from compare.circuit import Array
from compare.columns import HIGH, LOW, MID, Columns
from compare.corners import motional_resistance_ohm
from compare.explain import figure, reading_text
from compare.oscillation import Crystal

Ends = tuple[float, float, float]
NONE: Ends = (math.nan, math.nan, math.nan)


def measured_numbers(columns: Columns, bench: Bench, at: int, rl_ohm: Ends) -> dict[str, Any]:
    """The review's measured keys of one part: numbers as in the rest of it, and sentences on what does not fit.

    `rl_ohm`: load-resonance resistance as reckoned; low, mid, high.
    """
    read = bench.measured
    if read is None:
        return {}
    one = columns.take([at])
    load, stray, load_how = _from_frequency(one, bench, read)
    stray_pairs, c1, pairs_how = _from_pairs(one, read)
    rn, ratio, resistor_how = _from_resistor(read, rl_ohm)
    both = read.pairs and not math.isnan(stray_pairs[MID])
    found = {
        "measured_load_pf": _number(load, load_how),
        "measured_stray_pf": _number(stray_pairs, pairs_how) if both else _number(stray, load_how),
        "measured_motional_capacitance_ff": _number(c1, pairs_how),
        "measured_negative_resistance_ohm": _number(rn, resistor_how),
        "measured_margin": _number(ratio, resistor_how),
    }
    if read.startup_ms is not None:
        found["measured_startup_ms"] = _number(
            (read.startup_ms,) * 3, "as read on the bench (measured.startup_ms)", "stated"
        )
    sentence = _why_not(one, read)
    return found | ({"measured_message": sentence} if sentence else {})


def _number(ends: Ends, how: str, basis: str = "derived") -> dict[str, Any]:
    low, mid, high = (value if math.isfinite(value) else None for value in ends)
    return {"low": low, "mid": mid, "high": high, "how": how, "basis": basis}


def _make_ppm(one: Columns) -> tuple[float, float]:
    """By how much the part on the bench may lie off nominal; nothing is known where no tolerance is stated."""
    span = one.offers[0].tolerance.span
    return (span.low, span.high) if span.known else (0.0, 0.0)


def _crystals(one: Columns, bench: Bench) -> tuple[Crystal, Array]:
    """The part at mid and at every end of its spans and its make tolerance; (k,), the mid first."""
    ends = [
        one.esr_ohm[0, :, 0],
        one.shunt_pf[0, :, 0],
        one.motional_ff[0, :, 0],
        np.array([_make_ppm(one)[0], 0, _make_ppm(one)[1]]),
    ]
    if one.shunt_loose[0]:
        ends[1] = np.array([one.shunt_floor_pf[0], *ends[1][1:]])
    combinations = np.array([[span[MID] for span in ends], *itertools.product(*([s[LOW], s[HIGH]] for s in ends))])
    esr, shunt, c1, part_ppm = combinations.T
    esr = motional_resistance_ohm(one, bench, esr, shunt)
    return Crystal(one.frequency_mhz, one.load_pf, shunt, c1, esr), part_ppm


def _spread(values: Array) -> Ends:
    """Mid is the first; an end is without bound where a corner has no such number."""
    if math.isnan(values[0]):
        return NONE
    without = bool(np.isnan(values).any())
    return (
        math.nan if without else float(values.min()),
        float(values[0]),
        math.nan if without else float(values.max()),
    )


def _from_frequency(one: Columns, bench: Bench, read: Measured) -> tuple[Ends, Ends, str]:
    if read.frequency_mhz is None:
        return NONE, NONE, "cannot be had: measured.frequency_mhz not given"
    crystal, part_ppm = _crystals(one, bench)
    if math.isnan(one.load_pf[0]):
        return NONE, NONE, "cannot be had: the sheet states no rated load"
    loads = measured.load_from_frequency_pf(read.frequency_mhz, crystal, part_ppm)
    how = (
        f"load at which fs √(1 + C1/(C0 + CL)) is the measured {read.frequency_mhz:.10g} MHz, over "
        f"{reading_text('frequency_tolerance_ppm', one.offers[0].tolerance)} and the part's C0, C1 and R1"
    )
    keys = bench.settings[0].circuit
    if keys.input_capacitor_pf is None or keys.output_capacitor_pf is None:
        return _spread(loads), NONE, how
    mid = measured.stray_from_load_pf(loads, *_meant(keys, read, 1.0))
    ends = [measured.stray_from_load_pf(loads, *_meant(keys, read, sign)) for sign in _signs(keys)]
    low, _, high = _spread(np.concatenate([mid[:1], *ends]))
    return (
        _spread(loads),
        (low, float(mid[0]), high),
        f"{how}; stray: CL - Cin Cout/(Cin + Cout), fitted, inside and probe",
    )


def _signs(keys: CircuitKeys) -> Sequence[float]:
    part = keys.capacitor_tolerance_percent / 100
    return (1 - part, 1 + part)


def _meant(keys: CircuitKeys, read: Measured, fitted: float) -> tuple[float, float]:
    """Capacitance that is meant to be at each end: fitted (times a tolerance), inside the IC, the probe."""
    probe = {read.probe_at: read.probe_pf}
    inside = keys.internal_at_each_pin_pf
    c_in = (keys.input_capacitor_pf or 0.0) * fitted + inside + probe.get("input", 0.0)
    c_out = (keys.output_capacitor_pf or 0.0) * fitted + probe.get("output", 0.0)
    return c_in, c_out + (inside if keys.series_resistor_ohm == 0 else 0.0)


def _from_pairs(one: Columns, read: Measured) -> tuple[Ends, Ends, str]:
    if len({pair[0] for pair in read.pairs}) < 2:
        return NONE, NONE, "cannot be had: measured.pairs holds no two different capacitors"
    load = float(one.load_pf[0])
    if math.isnan(load):
        return NONE, NONE, "cannot be had: the sheet states no rated load"
    low_ppm, high_ppm = _make_ppm(one)
    shunt = one.shunt_pf[0, :, 0]
    low_shunt = float(one.shunt_floor_pf[0])
    cases = [(float(shunt[MID]), 0.0), *itertools.product((low_shunt, float(shunt[HIGH])), (low_ppm, high_ppm))]
    solved = np.array([_solved(read, c0, load, ppm) for c0, ppm in cases])
    shown = "; ".join(f"{figure(c)} pF {figure(error * 1e6)} ppm" for c, error in read.pairs)
    how = f"stray and C1 that put both frequencies right: f = fs √(1 + C1/(C0 + C/2 + stray)); {shown}"
    return _spread(solved[:, 0]), _spread(solved[:, 1]), how


def _solved(read: Measured, shunt_pf: float, load_pf: float, part_ppm: float) -> tuple[float, float]:
    """Stray and C1 for one part that may be; NaN where the pairs fit no crystal at all."""
    try:
        return measured.from_pairs(read.pairs, shunt_pf, load_pf, part_ppm)
    except ZeroDivisionError:  # frequencies that lie just at the rated load, whatever C1 is
        return math.nan, math.nan


def _from_resistor(read: Measured, rl_ohm: Ends) -> tuple[Ends, Ends, str]:
    resistor = read.stopping_resistor_ohm
    if resistor is None:
        return NONE, NONE, "cannot be had: measured.stopping_resistor_ohm not given"
    low, mid, high = (float(measured.negative_resistance_ohm(resistor, rl)) for rl in (rl_ohm[2], rl_ohm[1], rl_ohm[0]))
    ratios = [float(measured.margin(resistor, rl)) for rl in (rl_ohm[2], rl_ohm[1], rl_ohm[0])]
    how = f"-(R + RL) and (R + RL)/RL, R {figure(resistor)} Ω at which it stops, RL {figure(rl_ohm[1])} Ω as reckoned"
    return (low, mid, high), (ratios[0], ratios[1], ratios[2]), how


def _why_not(one: Columns, read: Measured) -> str | None:
    """A sentence where no load can explain the measured frequency, whatever the part is within its make tolerance."""
    if read.frequency_mhz is None or math.isnan(one.load_pf[0]):
        return None
    c1, shunt = one.motional_ff[0, MID], one.shunt_pf[0, MID]
    fs = motional.series_resonance_mhz(one.frequency_mhz, shunt, c1, one.load_pf)
    fp = motional.parallel_resonance_mhz(fs, shunt, c1)
    low_ppm, high_ppm = _make_ppm(one)
    return measured.why_no_load(
        read.frequency_mhz, float(fs[0]) * (1 + low_ppm * 1e-6), float(fp[0]) * (1 + high_ppm * 1e-6)
    )
