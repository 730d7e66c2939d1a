"""By how much the frequency moves when one crystal takes another's place and nothing else is touched.

The exact curve of both, at the same corner of the same circuit: what is alike in both parts moves together, so a part
in its own place moves nothing. Low, mid and high in ppm of the nominal frequency; positive: the board runs faster.
"""

from __future__ import annotations

import itertools
from collections.abc import Iterator, Sequence
from dataclasses import dataclass

import numpy as np

from compare import motional
from compare.bench import Bench, CircuitKeys
from compare.circuit import Array, Circuit, Network
from compare.columns import HIGH, LOW, MID, Columns, Flags
from compare.corners import Nodes, as_reckoned, crystal_at, limiters_of, make_circuit, rated_gm
from compare.oscillation import (
    Arm,
    Crystal,
    Limiter,
    Loop,
    critical_state,
    load_error_ppm,
    output_limited_state,
)
from compare.prefix import PPM

AT_ONCE = 256
"""Parts held over all corners at a time."""


@dataclass(frozen=True)
class Alike:
    """(n,) true where C0, C1 and ESR of a part are read as the incumbent's are, so that they move with them."""

    shunt: Flags
    motional: Flags
    esr: Flags
    all: Flags
    """The rated load too: the same curve."""


def alike(columns: Columns, silent_too: Flags) -> Alike:
    """Which readings are alike in each part and the first one.

    `silent_too`: parts of the incumbent's own number, of which even what no sheet states is alike. Of others two
    estimates are no reading, and what they stand for may lie anywhere in their intervals.
    """
    floor = columns.shunt_floor_pf
    shunt = _same(columns.shunt_pf) & ((floor == floor[0]) | (np.isnan(floor) & np.isnan(floor[0])))
    shunt &= silent_too | ~(columns.shunt_missing | columns.shunt_missing[0])
    arm = _same(columns.motional_ff)
    arm &= silent_too | ~(columns.motional_estimated | columns.motional_estimated[0])
    esr = _same(columns.esr_ohm)
    load, overtone = columns.load_pf, np.nan_to_num(columns.overtone, nan=0.0)
    same_load = (load == load[0]) | (silent_too & np.isnan(load) & np.isnan(load[0]))
    return Alike(shunt, arm, esr, shunt & arm & esr & same_load & (overtone == overtone[0]))


def _same(values: Array) -> Flags:
    first = values[..., :1]
    found: Flags = np.logical_and.reduce((values == first) | (np.isnan(values) & np.isnan(first)), axis=(0, 1))
    return found


def board_shift_ppm(columns: Columns, bench: Bench, nominal_error: Array, like: Alike) -> Array:
    """(3, n) shift of each part against the first one in the bench's circuit; NaN where it cannot be had.

    `nominal_error`: (n,) load error at nominal values.
    """
    n = len(columns)
    low, high = np.full(n, np.inf), np.full(n, -np.inf)
    for which in _pieces(n):
        piece = columns.take([0, *which])
        for own, others in _errors(piece, bench):
            for mask in sorted({_mask(like, at) for at in which}):
                rows = np.array([number for number, at in enumerate(which) if _mask(like, at) == mask])
                one_low, one_high = _apart(own, others[rows], mask)
                index = np.array(which)[rows]
                low[index], high[index] = np.fmin(low[index], one_low), np.fmax(high[index], one_high)
    mid = _relative(nominal_error, nominal_error[0])
    return _settled(np.stack([low, mid, high]), like)


def _pieces(n: int) -> Iterator[list[int]]:
    yield from ([*range(start, min(start + AT_ONCE, n))] for start in range(0, n, AT_ONCE))


def _mask(like: Alike, at: int) -> tuple[bool, bool, bool]:
    return bool(like.shunt[at]), bool(like.motional[at]), bool(like.esr[at])


def _relative(error: Array, reference: Array) -> Array:
    """(f' - f)/f from the two errors against the same nominal frequency, all in ppm."""
    apart: Array = (error - reference) / (1 + reference * PPM)
    return apart


def _settled(ends: Array, like: Alike) -> Array:
    """Ends in order; the same curve moves nothing, whatever of it is not known."""
    known = np.isfinite(ends).all(axis=0)
    ordered = np.stack([np.minimum(ends[LOW], ends[MID]), ends[MID], np.maximum(ends[HIGH], ends[MID])])
    return np.where(like.all, 0.0, np.where(known, ordered, np.nan))


def _errors(columns: Columns, bench: Bench) -> Iterator[tuple[Array, Array]]:
    """Load error of the first part, (C0, C1, ESR, circuit corners), and of the others, with their axis in front.

    Once for every setting of the bench and every limiter that may hold.
    """
    for number, setting in enumerate(bench.settings):
        keys = as_reckoned(setting.circuit, bench)
        shunt = _shunt_for_frequency(columns, number)
        crystal = crystal_at(columns, bench, number, shunt)
        circuit = _circuit_corners(keys, bench, shunt)
        for limiter in limiters_of(keys):
            found = steady_error_ppm(circuit, crystal, limiter)
            found = np.broadcast_to(found, (len(columns), 2, 2, 2, *found.shape[4:]))
            flat = found.reshape(len(columns), 2, 2, 2, -1)
            yield flat[0], flat[1:]


def _shunt_for_frequency(columns: Columns, number: int) -> Array:
    """C0 on axis 1; where it is stated as a loose limit its low end is an estimate."""
    low = np.minimum(columns.shunt_floor_pf, columns.shunt_pf[number, LOW])
    ends: Array = np.stack([low, columns.shunt_pf[number, HIGH]], axis=-1)[:, :, None, None, None, None]
    return ends


def _circuit_corners(keys: CircuitKeys, bench: Bench, shunt: Array) -> Circuit:
    nodes = Nodes.of(keys)
    ends = [sorted({span[LOW], span[HIGH]}) if span[LOW] == span[LOW] else [np.nan] for span in vars(nodes).values()]
    corners = np.array(list(itertools.product(*ends)))
    capacitances = [corners[:, column].reshape(1, 1, 1, 1, -1, 1) for column in range(corners.shape[1])]
    stated = keys.transconductance_range_ms
    ends_of_gm = None if stated is None else np.array([stated[LOW], stated[HIGH]]).reshape(1, 1, 1, 1, 1, 2)
    gm = rated_gm(keys, bench, shunt) if ends_of_gm is None else ends_of_gm
    return make_circuit(keys, bench, capacitances, gm)


def steady_error_ppm(circuit: Circuit, crystal: Crystal, limiter: Limiter) -> Array:
    """(f - fr)/fr in the steady state, fr the resonance with the rated load, as `oscillation.analyse` gives it."""
    with np.errstate(all="ignore"):
        exact = Crystal(*crystal)
        loop = Loop(Network.of(Circuit(*circuit)), Arm.of(exact))
        steady = critical_state(loop)
        if limiter == "output":
            steady = output_limited_state(loop, steady)
        return load_error_ppm(loop.arm, exact, steady.pull)


def _apart(own: Array, others: Array, mask: Sequence[bool]) -> tuple[Array, Array]:
    """Least and greatest shift of (n, C0, C1, ESR, corners) against (C0, C1, ESR, corners).

    Along an axis of which both are alike they go together; along the others each goes by itself.
    """
    free = tuple(axis for axis, together in enumerate(mask) if not together)
    free_others = tuple(axis + 1 for axis in free)
    least, most = np.fmin.reduce(own, axis=free, keepdims=True), np.fmax.reduce(own, axis=free, keepdims=True)
    low = _relative(np.fmin.reduce(others, axis=free_others, keepdims=True), most[None])
    high = _relative(np.fmax.reduce(others, axis=free_others, keepdims=True), least[None])
    every = tuple(range(1, low.ndim))
    return np.fmin.reduce(low, axis=every), np.fmax.reduce(high, axis=every)


def rated_shift_ppm(columns: Columns, like: Alike) -> Array:
    """(3, n) shift of each part against the first one where the circuit presents that one's rated load, inf its fs.

    The incumbent then runs at its nominal frequency. R1, which moves a part by a ppm or so, is left out where no sheet
    states it.
    """
    load = np.full(len(columns), columns.load_pf[0])
    shunt = np.stack([np.minimum(columns.shunt_floor_pf, columns.shunt_pf[0, LOW]), columns.shunt_pf[0, HIGH]])
    arm, esr = columns.motional_ff[0], np.nan_to_num(columns.esr_ohm[0], nan=0.0)
    ends = itertools.product(shunt, (arm[LOW], arm[HIGH]), (esr[LOW], esr[HIGH]))
    found = np.stack([_error_at_load(columns, load, *one) for one in ends])
    mid = _error_at_load(columns, load, columns.shunt_pf[0, MID], arm[MID], esr[MID])
    none = np.isnan(columns.load_pf) | np.isnan(load)
    shift = np.where(none, np.nan, np.stack([found.min(axis=0), mid, found.max(axis=0)]))
    # At the load that a part is rated for it runs at its nominal frequency, whatever its C0, C1 and R1 are.
    return _settled(np.where(columns.load_pf == load, 0.0, shift), like)


def overtone_shift_ppm(own: Array, overtone: Array, first: Array, falls: Flags, open_ones: Flags) -> Array:
    """(3, n) the shift, where an overtone part may run on its fundamental instead: at about 1/n of the nominal.

    `own`: shift on the overtone itself. `falls`: the fundamental takes over. `open_ones`: it may, so that the low end
    goes down to there. Only parts whose order is not the first one's are touched.
    """
    order = np.nan_to_num(overtone, nan=1.0)
    other = (order > 1) & (order != np.nan_to_num(first, nan=1.0))
    below = (1 / order - 1) / PPM
    low = np.where(other & (falls | open_ones), below, own[LOW])
    mid, high = np.where(other & falls, below, own[MID]), np.where(other & falls, below, own[HIGH])
    return np.stack([low, mid, high])


def _error_at_load(columns: Columns, load_pf: Array, shunt_pf: Array, motional_ff: Array, esr_ohm: Array) -> Array:
    crystal = Crystal(columns.frequency_mhz, columns.load_pf, shunt_pf, motional_ff, esr_ohm)
    with np.errstate(all="ignore"):
        arm = Arm.of(crystal)
        reactance, _ = motional.load_reactance_ohm(columns.frequency_mhz, shunt_pf, load_pf, esr_ohm)
        pull = np.where(np.isinf(load_pf), 0.0, arm.pull_of(reactance))
        return load_error_ppm(arm, crystal, pull)
