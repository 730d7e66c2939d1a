"""Mode: an overtone part is judged with its fundamental in the same circuit, which may be the one that grows."""

from __future__ import annotations

import numpy as np

from compare.bench import Bench, Setting
from compare.circuit import Array, Circuit
from compare.columns import HIGH, LOW, Columns, Flags
from compare.corners import alike, corner_circuit, crystal_at, shunt_ends
from compare.lot import Whole, distinct, spans
from compare.motional import series_resonance_mhz
from compare.oscillation import Crystal, analyse
from compare.verdict import CANNOT_TELL, FALLS_SHORT, MEETS, Judged, Silence, transconductance_missing

GREATEST_FUNDAMENTAL_ESR = 1.0
"""The fundamental's R1 lies between 1/n² of the stated one, as of one blank, and the stated one itself."""


def judge_mode(columns: Columns, bench: Bench, known: Silence) -> Judged | None:
    """Verdict on the mode of each part that is an overtone or may be one; None where there is no such part."""
    overtone = np.nan_to_num(columns.overtone, nan=0.0) > 1
    unknown = np.isnan(columns.overtone)
    n = len(columns)
    if not (overtone | unknown).any():
        return None
    trap, by_circuit = bench.circuit.overtone_trap, np.full(n, MEETS)
    which = np.flatnonzero(overtone)
    if which.size and not trap:
        by_circuit[which] = _by_circuit(columns.take(which), bench, known.shunt_missing[which])
    missing = {"mode": unknown} if unknown.any() else {}
    for key, flags in _lacking(columns, bench, known).items():
        if (flags & overtone).any() and not trap:
            missing[key] = flags & overtone
    lacking = np.logical_or.reduce([unknown, *missing.values()])
    reckoned = overtone & ~lacking & (not trap)
    typical_only = known.esr_typical_only & reckoned
    verdict = np.where(lacking | (typical_only & (by_circuit == MEETS)), CANNOT_TELL, by_circuit)
    none, estimated = np.full(n, np.nan), known.shunt_missing & reckoned
    by_estimate = {"shunt_capacitance_pf": estimated} if estimated.any() else {}
    return Judged("mode", overtone | unknown, verdict, none, none.copy(), missing, by_estimate, typical_only)


def _by_circuit(columns: Columns, bench: Bench, shunt_missing: Flags) -> Whole:
    """(n,) verdict at the worst C0; where C0 is estimated and its ends differ it cannot be told."""
    orders = np.unique(columns.overtone, return_inverse=True)[1]
    stated = [columns.offers.at(number, "fundamental_esr").codes for number in range(len(bench.settings))]
    first, which = distinct(alike(columns)[1], orders, *stated)
    faster, starts = fundamental_against(columns.take(first), bench)
    at_ends = np.where(faster, FALLS_SHORT, np.where(starts, CANNOT_TELL, MEETS))[which]
    worst = at_ends.min(axis=1)
    verdict: Whole = np.where(shunt_missing & (worst != at_ends.max(axis=1)), CANNOT_TELL, worst)
    return verdict


def _lacking(columns: Columns, bench: Bench, known: Silence) -> dict[str, Flags]:
    keys = {key: np.full(len(columns), gone) for key, gone in known.bench_keys.items() if key != "circuit.swing_v"}
    return keys | {"esr_ohm": known.esr} | transconductance_missing(columns, bench)


def fundamental_against(columns: Columns, bench: Bench) -> tuple[Flags, Flags]:
    """(n, C0 ends) whether the fundamental grows faster than the overtone at any corner, and whether it can start."""
    faster, starts = np.zeros((2, len(columns), 2), dtype=bool)
    for number, setting in enumerate(bench.settings):
        own, fundamental = np.broadcast_arrays(*_growths(columns, bench, number, setting))
        corners = tuple(range(2, own.ndim))
        faster |= (fundamental > own).any(axis=corners)
        starts |= (fundamental > 0).any(axis=corners)
    return faster, starts


def _growths(columns: Columns, bench: Bench, number: int, setting: Setting) -> tuple[Array, Array]:
    """Growth (1/ms, 0 where it does not start) of the overtone and of its fundamental at each corner.

    The fundamental: f/n, L1 the same, C1 n² times, C0 the same, R1 as stated for it, else 1/n² of the overtone's and
    once the overtone's.
    """
    shunt = shunt_ends(columns, number)
    crystal = crystal_at(columns, bench, number, shunt)
    circuit, _ = corner_circuit(bench, setting.circuit, shunt)
    order = columns.overtone.reshape(-1, 1, 1, 1, 1, 1)
    fs = series_resonance_mhz(*np.broadcast_arrays(*_with_known_load(crystal)))
    own = _growth(circuit, crystal)
    _, _, _, motional, esr = crystal
    stated = spans(columns.offers.at(number, "fundamental_esr"))[:, :, None, None, None, None, None]
    lower = [
        Crystal(fs / order, np.inf, shunt, motional * order**2, np.where(np.isnan(own_esr), esr * part, own_esr))
        for part, own_esr in ((1 / order**2, stated[LOW]), (GREATEST_FUNDAMENTAL_ESR, stated[HIGH]))
    ]
    grown = [_growth(circuit, one) for one in lower]
    return own, np.maximum(*np.broadcast_arrays(*grown))


def _with_known_load(crystal: Crystal) -> tuple[Array, Array, Array, Array]:
    frequency, load, shunt, motional, _ = crystal
    # Where no rated load is stated the nominal frequency stands for fs: some hundred ppm, which growth does not feel.
    return frequency, shunt, motional, np.where(np.isnan(load), np.inf, load)


def _growth(circuit: Circuit, crystal: Crystal) -> Array:
    return np.nan_to_num(1 / analyse(circuit, crystal, wanted=("startup_ms",))["startup_ms"], nan=0.0)
