"""Worst case: the whole chain run at each corner of its roots, so an input that counts twice moves in both at once.

Roots are the capacitance at each node, the transconductance, and the crystal's own spans. What is fitted, stray and
inside the IC at one node only ever counts as its sum, so the corners of the sums are those of each moving by itself.
Every condition of the bench is a set of corners of its own. Where a range of transconductance spans a turning point of
the negative resistance that point is one more corner.
"""

from __future__ import annotations

import itertools
from collections.abc import Collection, Sequence
from dataclasses import dataclass, field, replace
from typing import Any

import numpy as np
from numpy.typing import NDArray

from compare.bench import Bench, CircuitKeys
from compare.circuit import Array, Circuit, Complex, terminal_impedance_ohm, turning_transconductance_ms
from compare.columns import HIGH, LOW, MID, Columns, Flags
from compare.lot import Whole, distinct
from compare.oscillation import Crystal, End, Limiter, Swing, analyse, analyse_block, blocks
from compare.rating import from_critical_ms, from_esr_ms, from_negative_resistance_ms, list_row
from compare.turning import hardest_capacitances

BY_SHUNT_FLOOR = (
    "motional_inductance_mh",
    "quality_factor",
    "series_resonance_mhz",
    "parallel_resonance_mhz",
    "load_error_ppm",
    "trim_ppm_per_pf",
)
"""Numbers of frequency: where C0 is a loose limit their low end of C0 is an estimate. All others use the limit."""
MOSTLY = 0.8
"""Share of parts that differ above which looking for alike ones saves nothing."""
SHUNT_FLOOR = 2
"""Index on the C0 axis of the estimated low end; 0 and 1 are the stated ends."""


@dataclass(frozen=True)
class Nodes:
    """Capacitance at each node as (low, nominal, high), pF."""

    input_pf: tuple[float, float, float]
    output_pf: tuple[float, float, float]
    across_pf: tuple[float, float, float]
    amplifier_output_pf: tuple[float, float, float]

    @classmethod
    def of(cls, keys: CircuitKeys) -> Nodes:
        """Sums of all that stands at each node; NaN where the fitted capacitor is not known."""
        inside = _toleranced(keys.internal_at_each_pin_pf, keys.internal_tolerance_percent)
        amplifier = _toleranced(keys.amplifier_output_pf, keys.stray_tolerance_percent)
        after_resistor = keys.series_resistor_ohm == 0
        stray = {
            end: _toleranced(getattr(keys, f"{end}_stray_pf"), keys.stray_tolerance(f"{end}_stray_pf"))
            for end in ("input", "output", "across")
        }
        fitted = {end: _fitted(keys, end) for end in ("input", "output")}
        zero = (0.0, 0.0, 0.0)
        return cls(
            input_pf=_sum(fitted["input"], stray["input"], inside),
            output_pf=_sum(fitted["output"], stray["output"], inside if after_resistor else zero),
            across_pf=stray["across"],
            amplifier_output_pf=_sum(amplifier, zero if after_resistor else inside),
        )


def _toleranced(value: float, percent: float) -> tuple[float, float, float]:
    return value * (1 - percent / 100), value, value * (1 + percent / 100)


def _fitted(keys: CircuitKeys, end: str) -> tuple[float, float, float]:
    value = keys.input_capacitor_pf if end == "input" else keys.output_capacitor_pf
    return _toleranced(np.nan if value is None else value, keys.capacitor_tolerance_percent)


def _sum(*ends: tuple[float, float, float]) -> tuple[float, float, float]:
    low, mid, high = (sum(values) for values in zip(*ends, strict=True))
    return low, mid, high


@dataclass
class Envelope:
    """One key over its corners. Arrays are (n, C0 ends, C1 ends): the estimates' axes stay open for the verdict.

    The last C0 end is the estimated low one, NaN for keys that do not count it where it is one of its own.

    `low` and `high` pass over corners where there is no such number; `some_without` tells that there were any.
    """

    low: Array
    high: Array
    some_without: Flags


@dataclass
class Reckoned:
    """What the corners gave: for each key its envelope, and `nominal` (n,) from nominal circuit values."""

    nominal: dict[str, Array] = field(default_factory=dict)
    over: dict[str, Envelope] = field(default_factory=dict)
    too_much_gain: Array = field(default_factory=lambda: np.empty((0, SHUNT_FLOOR)))
    """(n, C0 ends) the IC's greatest transconductance over the one where oscillation stops again, worst corner."""

    def take(self, which: Whole) -> Reckoned:
        """Of some of the parts, by index."""
        nominal = {key: values[which] for key, values in self.nominal.items()}
        over = {key: Envelope(*(values[which] for values in vars(one).values())) for key, one in self.over.items()}
        return Reckoned(nominal, over, self.too_much_gain[which])

    def low(self, key: str) -> Array:
        """(n,) low end over every corner that counts for the key."""
        counting = self._counting(key, self.over[key].low)
        return _ignoring_nan(np.fmin, counting)

    def high(self, key: str) -> Array:
        """(n,) high end over every corner that counts for the key."""
        counting = self._counting(key, self.over[key].high)
        return _ignoring_nan(np.fmax, counting)

    def some_without(self, key: str) -> Flags:
        """(n,) true where some corner has no such number."""
        found: Flags = np.logical_or.reduce(self._counting(key, self.over[key].some_without), axis=(1, 2))
        return found

    def _counting(self, key: str, values: NDArray[Any]) -> NDArray[Any]:
        return values if key in BY_SHUNT_FLOOR else values[:, :SHUNT_FLOOR]


def _ignoring_nan(reduce: np.ufunc, values: Array) -> Array:
    reduced: Array = reduce.reduce(reduce.reduce(values, axis=2), axis=1)
    return reduced


def reckon(columns: Columns, bench: Bench, *, wanted: Collection[str] | None = None) -> Reckoned:
    """Every number of every part, nominal and over the corners; parts that are alike to a circuit only once.

    `wanted`: the keys whose ends over the corners are asked for, all of them where it is not given. What lies between
    the corners where the circuit drives hardest, which no verdict hangs on, is then not looked for.
    """
    first, which = alike(columns)
    if len(first) > MOSTLY * len(columns):
        return _reckon_distinct(columns, bench, wanted)
    return _reckon_distinct(columns.take(first), bench, wanted).take(which)


def alike(columns: Columns) -> tuple[Whole, Whole]:
    """Where each part that differs from all before it stands, and which of these each part is like."""
    ends = [columns.shunt_pf, columns.motional_ff, columns.esr_ohm]
    values = [columns.load_pf, columns.shunt_floor_pf, *(row for end in ends for row in end.reshape(-1, len(columns)))]
    return distinct(*(np.unique(row, return_inverse=True)[1] for row in values))


def _reckon_distinct(columns: Columns, bench: Bench, wanted: Collection[str] | None) -> Reckoned:
    nominal = analyse_nominal(columns, bench, limiters_of(bench.settings[0].circuit)[0], wanted)
    reckoned = Reckoned(nominal, {}, np.full((len(columns), SHUNT_FLOOR), -np.inf))
    for corners in _corner_sets(columns, bench, favourable=wanted is None):
        _widen_all(reckoned, corners, wanted)
    return reckoned


def analyse_nominal(
    columns: Columns, bench: Bench, limiter: Limiter, wanted: Collection[str] | None = None
) -> dict[str, Array]:
    """Every key, or those wanted, at nominal circuit values and the sheets' mid readings, (n,)."""
    setting = as_reckoned(bench.settings[0].circuit, bench)
    nodes = Nodes.of(setting)
    esr = motional_resistance_ohm(columns, bench, columns.esr_ohm[0, MID], columns.shunt_pf[0, MID])
    esr = esr + added_resistance_ohm(bench, 0)
    crystal = _crystal(columns, columns.shunt_pf[0, MID], columns.motional_ff[0, MID], esr)
    capacitances = [getattr(nodes, name)[MID] for name in ("input_pf", "output_pf", "across_pf", "amplifier_output_pf")]
    gm = nominal_transconductance_ms(setting, bench, columns.shunt_pf[0, MID])
    circuit = make_circuit(setting, bench, capacitances, gm)
    return analyse(circuit, crystal, *swing_of(setting), limiter, setting.probe_pf, wanted=wanted)


def nominal_transconductance_ms(setting: CircuitKeys, bench: Bench, shunt_pf: Array) -> Array:
    """Transconductance of a setting at its nominal: stated, else from the IC's rating; NaN where not known."""
    stated = setting.transconductance_range_ms
    if stated is not None:
        return np.full(np.shape(shunt_pf), stated[MID])
    return rated_gm(setting, bench, shunt_pf)


def rated_gm(setting: CircuitKeys, bench: Bench, shunt_pf: Array) -> Array:
    """Least transconductance that the IC's rating stands for; NaN where there is no rating or it lacks something.

    `shunt_pf` is the part's C0, used where the rating names none of its own.
    """
    rating, frequency = setting.rating, bench.requirement.frequency_mhz
    if rating is None or rating.kind is None:
        return np.full(np.shape(shunt_pf), np.nan)
    c0 = shunt_pf if rating.shunt_capacitance_pf is None else np.full(np.shape(shunt_pf), rating.shunt_capacitance_pf)
    load, factor = rating.load_pf or np.nan, rating.factor_inside
    if rating.critical_transconductance_max_ms is not None:
        return from_critical_ms(rating.critical_transconductance_max_ms, factor) + 0 * c0
    if rating.negative_resistance_ohm is not None:
        return from_negative_resistance_ms(rating.negative_resistance_ohm, frequency, load, factor) + 0 * c0
    limit = rating.esr_max_ohm
    if isinstance(limit, tuple):
        row = list_row(limit, frequency, lossless_load_pf(setting))
        load, limit = (np.nan, np.nan) if row is None else row[2:]
    return from_esr_ms(limit or np.nan, frequency, load, c0, factor, esr_means=rating.esr_means) + 0 * c0


def lossless_load_pf(setting: CircuitKeys) -> float:
    """Cin Cout/(Cin + Cout) + Cx at nominal values; NaN where a capacitor is not known."""
    nodes = Nodes.of(setting)
    c_in, c_out = nodes.input_pf[MID], nodes.output_pf[MID]
    if setting.series_resistor_ohm == 0:
        c_out += nodes.amplifier_output_pf[MID]
    return c_in * c_out / (c_in + c_out) + nodes.across_pf[MID]


def motional_resistance_ohm(columns: Columns, bench: Bench, esr_ohm: Array, shunt_pf: Array) -> Array:
    """R1 by the way the sheets' ESR is to be read: itself, or ESR / (1 + C0/CL)² where it is stated at the load.

    With no rated load the ESR itself is taken: the safe side.
    """
    if bench.crystal.esr_means == "motional":
        return esr_ohm
    load = columns.load_pf.reshape((-1,) + (1,) * (max(np.ndim(esr_ohm), np.ndim(shunt_pf)) - 1))
    factor = np.where(np.isnan(load), 1.0, (1 + shunt_pf / load) ** 2)
    return esr_ohm / factor


def _crystal(columns: Columns, shunt: Array, motional: Array, esr: Array) -> Crystal:
    dimensions = max(np.ndim(shunt), np.ndim(motional), np.ndim(esr))
    shape = (-1,) + (1,) * (dimensions - 1)
    return Crystal(columns.frequency_mhz.reshape(shape), columns.load_pf.reshape(shape), shunt, motional, esr)


def as_reckoned(keys: CircuitKeys, bench: Bench) -> CircuitKeys:
    """The keys with the series resistor taken out where it is counted as so much more ESR."""
    if bench.crystal.series_resistor_rule != "add to ESR":
        return keys
    return keys.model_copy(update={"series_resistor_ohm": 0.0})


def make_circuit(keys: CircuitKeys, bench: Bench, capacitances: Sequence[Array | float], gm: Array) -> Circuit:
    """Circuit from `as_reckoned` keys, with capacitances at input, output, across and amplifier output."""
    c_in, c_out, across, amplifier = capacitances
    return Circuit(
        c_in,
        c_out,
        across,
        amplifier,
        transconductance_ms=gm,
        series_resistor_ohm=keys.series_resistor_ohm,
        feedback_resistor_kohm=keys.feedback_kohm(bench.requirement.frequency_mhz),
        output_resistance_kohm=keys.output_resistance_kohm,
    )


def swing_of(keys: CircuitKeys) -> tuple[float, End]:
    return np.nan if keys.swing_peak_v is None else keys.swing_peak_v, keys.swing_at


@dataclass(frozen=True)
class Corners:
    """All corners of one setting under one limiter, axes (part, C0, C1, ESR, node capacitances, transconductance).

    `peak_v` and the IC's greatest transconductance go along the last axis, for conditions that differ in nothing else
    are corners of one set. `shunt_index` tells which index on the C0 axis is low, high and estimated low.
    """

    circuit: Circuit
    crystal: Crystal
    keys: CircuitKeys
    limiter: Limiter
    peak_v: Array
    greatest_gm: Array
    shunt_index: Sequence[int]

    def joins(self, other: Corners) -> bool:
        """True where the two differ in transconductance and swing alone."""
        gain = ("transconductance_ms",)
        return (
            self.limiter == other.limiter
            and self.keys.swing_at == other.keys.swing_at
            and self.keys.probe_pf == other.keys.probe_pf
            and self.shunt_index == other.shunt_index
            and _same_fields(self.circuit, other.circuit, gain)
            and _same_fields(self.crystal, other.crystal)
        )

    def joined(self, other: Corners) -> Corners:
        gm = _side_by_side(np.asarray(self.circuit.transconductance_ms), np.asarray(other.circuit.transconductance_ms))
        return replace(
            self,
            circuit=replace(self.circuit, transconductance_ms=gm),
            peak_v=_side_by_side(self.peak_v, other.peak_v),
            greatest_gm=_side_by_side(self.greatest_gm, other.greatest_gm),
        )


def _same_fields(one: Circuit | Crystal, other: Circuit | Crystal, but: Collection[str] = ()) -> bool:
    names = [name for name in vars(one) if name not in but]
    return all(np.array_equal(getattr(one, name), getattr(other, name), equal_nan=True) for name in names)


def _side_by_side(*listed: Array) -> Array:
    shape = np.broadcast_shapes(*((*values.shape[:-1], 1) for values in listed))
    return np.concatenate([np.broadcast_to(x, (*shape[:-1], x.shape[-1])) for x in listed], axis=-1)


def _corner_sets(columns: Columns, bench: Bench, *, favourable: bool) -> list[Corners]:
    """The corners of every setting, for each limiter that may hold.

    `favourable`: and what lies between them where the circuit drives hardest.
    """
    sets: list[Corners] = []
    for number, setting in enumerate(bench.settings):
        keys = setting.circuit
        shunt, shunt_index = shunt_ends_and_floor(columns, number)
        crystal = crystal_at(columns, bench, number, shunt)
        inside = _hardest(bench, keys, crystal) if favourable else []
        for capacitances, limiter in itertools.product([None, *inside], limiters_of(keys)):
            circuit, greatest_gm = corner_circuit(bench, keys, shunt, capacitances)
            peak_v = np.full((1,) * 5 + np.shape(circuit.transconductance_ms)[-1:], swing_of(keys)[0])
            greatest_gm = np.broadcast_to(greatest_gm, peak_v.shape)
            one = Corners(circuit, crystal, keys, limiter, peak_v, greatest_gm, shunt_index)
            at = next((at for at, known in enumerate(sets) if known.joins(one)), None)
            if at is None:
                sets.append(one)
            else:
                sets[at] = sets[at].joined(one)
    return sets


def limiters_of(keys: CircuitKeys) -> tuple[Limiter, ...]:
    return ("transconductance", "output") if keys.limiter == "unknown" else (keys.limiter,)


def crystal_at(columns: Columns, bench: Bench, number: int, shunt: Array) -> Crystal:
    """The crystals at the ends of their spans in one setting: C1 on axis 2, R1 on axis 3."""
    motional = _two_ends(columns.motional_ff[number])[:, None, :, None, None, None]
    esr = _two_ends(columns.esr_ohm[number])[:, None, None, :, None, None]
    esr = motional_resistance_ohm(columns, bench, esr, shunt) + added_resistance_ohm(bench, number)
    return _crystal(columns, shunt, motional, esr)


def corner_circuit(
    bench: Bench, stated: CircuitKeys, shunt: Array, capacitances: Sequence[Array] | None = None
) -> tuple[Circuit, Array]:
    """The circuit at its corners: node capacitances on axis 4, transconductances on axis 5; and the IC's greatest.

    `capacitances` stands for corners of others than the bench's own.
    """
    keys = as_reckoned(stated, bench)
    capacitances = _capacitance_corners(Nodes.of(keys)) if capacitances is None else capacitances
    gm, greatest_gm = _transconductances(bench, keys, (capacitances, shunt))
    return make_circuit(keys, bench, capacitances, gm), greatest_gm


def shunt_ends(columns: Columns, number: int) -> Array:
    """C0 at its stated ends, on axis 1."""
    return _distinct_ends(columns, number, columns.shunt_pf[number, LOW])[0]


def shunt_ends_and_floor(columns: Columns, number: int) -> tuple[Array, list[int]]:
    """C0 low, high and estimated low on axis 1, each that differs once, and the index of each of the three."""
    return _distinct_ends(columns, number, np.minimum(columns.shunt_floor_pf, columns.shunt_pf[number, LOW]))


def _distinct_ends(columns: Columns, number: int, floor: Array) -> tuple[Array, list[int]]:
    low, high = columns.shunt_pf[number, LOW], columns.shunt_pf[number, HIGH]
    distinct, index = [low], [0]
    for values in (high, floor):
        same = next((at for at, known in enumerate(distinct) if np.array_equal(known, values)), None)
        if same is None:
            distinct.append(values)
        index.append(len(distinct) - 1 if same is None else same)
    return np.stack(distinct, axis=-1)[:, :, None, None, None, None], index


def nominal_r1_and_gm(columns: Columns, bench: Bench, at: int) -> tuple[float, float]:
    """One part's R1 in ohm and the transconductance in mS at their mid values, as `analyse_nominal` has them."""
    one = columns.take([at])
    shunt = one.shunt_pf[0, MID]
    esr = motional_resistance_ohm(one, bench, one.esr_ohm[0, MID], shunt) + added_resistance_ohm(bench, 0)
    gm = nominal_transconductance_ms(as_reckoned(bench.settings[0].circuit, bench), bench, shunt)
    return float(esr[0]), float(gm[0])


def added_resistance_ohm(bench: Bench, number: int) -> float:
    """The series resistor, where the bench counts it as so much more ESR."""
    if bench.crystal.series_resistor_rule != "add to ESR":
        return 0.0
    return bench.settings[number].circuit.series_resistor_ohm


def _two_ends(span: Array) -> Array:
    low, high = span[LOW], span[HIGH]
    same = np.array_equal(low, high, equal_nan=True)
    return low[:, None] if same else np.stack([low, high], axis=-1)


def _capacitance_corners(nodes: Nodes) -> list[Array]:
    """Input, output, across and amplifier output, each (1, 1, 1, 1, k, 1), over every combination of their ends."""
    ends = [sorted({span[LOW], span[HIGH]}) if span[LOW] == span[LOW] else [np.nan] for span in vars(nodes).values()]
    combinations = np.array(list(itertools.product(*ends)))
    return [combinations[:, column].reshape(1, 1, 1, 1, -1, 1) for column in range(combinations.shape[1])]


def _hardest(bench: Bench, stated: CircuitKeys, crystal: Crystal) -> list[list[Array]]:
    """Capacitances between the corners where the circuit drives hardest, as in `_capacitance_corners`, part by part.

    At the IC's gains and at the least critical one, for the least and the greatest C0 and R1 of each part. Empty where
    that is at a corner for all of them.
    """
    keys = as_reckoned(stated, bench)
    nodes = Nodes.of(keys)
    if np.isnan([span[MID] for span in vars(nodes).values()]).any():
        return []
    ends = [*_two_extremes(np.asarray(crystal.shunt_capacitance_pf)), *_two_extremes(np.asarray(crystal.esr_ohm))]
    first, which = distinct(*(np.unique(end, return_inverse=True)[1] for end in np.broadcast_arrays(*ends)))
    c0, r1 = (np.stack(np.broadcast_arrays(*two))[:, first] for two in (ends[:2], ends[2:]))
    gains, shunt = _targets(bench, keys, c0, r1)
    pairs, of_pair = np.unique(np.stack([gains.ravel(), shunt.ravel()]), axis=1, return_inverse=True)
    gm, at_c0 = pairs[..., None]

    def impedance(at: Array, of: Whole) -> Complex:
        circuit = make_circuit(keys, bench, list(np.moveaxis(at, -1, 0)), gm[of])
        return terminal_impedance_ohm(circuit, bench.requirement.frequency_mhz, at_c0[of])

    found = hardest_capacitances(list(vars(nodes).values()), impedance, len(gm))[of_pair.ravel()]
    points = found.reshape(*gains.shape, -1)
    points = points[~np.isnan(points).all(axis=(1, 2))]
    # A part that has no such point at a target counts one of its corners twice.
    points = np.where(np.isnan(points), [span[LOW] for span in vars(nodes).values()], points)[:, which]
    by_node = [one.T.reshape(one.shape[1], 1, 1, 1, -1, 1) for one in np.moveaxis(points, -1, 0)]
    return [by_node] if len(points) else []


def _two_extremes(values: Array) -> tuple[Array, Array]:
    """(n,) the least and the greatest of each part."""
    by_part = values.reshape(len(values), -1)
    return np.fmin.reduce(by_part, axis=1), np.fmax.reduce(by_part, axis=1)


def _critical_ms(circuit: Circuit, crystal: Crystal) -> Array:
    key = "critical_transconductance_ms"
    return analyse(circuit, crystal, wanted=(key,))[key]


def _targets(bench: Bench, keys: CircuitKeys, c0: Array, r1: Array) -> tuple[Array, Array]:
    """Transconductance and C0, (targets, n) each, that the hardest point is looked for at; ends of C0 and R1 (2, n)."""
    both_c0, both_r1 = np.repeat(c0, 2, axis=0), np.tile(r1, (2, 1))
    corners = [one.ravel() for one in _capacitance_corners(Nodes.of(keys))]
    at_corners = make_circuit(keys, bench, corners, np.full((1, 1, 1), np.nan))
    ends = Crystal(bench.requirement.frequency_mhz, np.inf, both_c0[..., None], 0.0, both_r1[..., None])
    critical = np.fmin.reduce(_critical_ms(at_corners, ends), axis=-1)
    range_ms = keys.transconductance_range_ms
    stated = [rated_gm(keys, bench, end) for end in c0] if range_ms is None else [range_ms[LOW], range_ms[HIGH]]
    gains = [np.broadcast_to(gain, c0.shape[1:]) for gain in stated]
    shunts = [*c0, np.zeros_like(c0[0])]
    gm = np.concatenate([np.repeat(gains, len(shunts), axis=0), critical])
    shunt = np.concatenate([np.tile(shunts, (len(gains), 1)), both_c0])
    known = ~(np.isnan(gm) | np.isnan(shunt))
    return np.where(known, gm, 0.0), np.where(known, shunt, 0.0)


def _transconductances(bench: Bench, keys: CircuitKeys, of: tuple[Sequence[Array], Array]) -> tuple[Array, Array]:
    """Transconductances to try, on the last axis, and the IC's greatest (NaN where it is not known)."""
    capacitances, shunt = of
    stated = keys.transconductance_range_ms
    if stated is None:
        return rated_gm(keys, bench, shunt), np.full((1,) * 6, np.nan)
    low, _, high = stated
    if low == high:
        return np.full((1,) * 6, low), np.full((1,) * 6, np.nan)
    circuit = make_circuit(keys, bench, capacitances, np.full((1,) * 6, low))
    frequency = bench.requirement.frequency_mhz
    turning = [np.clip(turning_transconductance_ms(circuit, frequency, c0), low, high) for c0 in (0.0, shunt)]
    ends = [np.full((1,) * 6, low), np.full((1,) * 6, high)]
    # A turning point that lies outside the range for all of them is an end once more.
    ends += [at for at in turning if not ((at == low).all() or (at == high).all())]
    return _side_by_side(*ends), np.full((1,) * 6, high)


CORNERS = (3, 4, 5)
"""Axes of ESR, node capacitances and transconductance: those over which only the ends are kept."""


def _widen_all(reckoned: Reckoned, corners: Corners, wanted: Collection[str] | None) -> None:
    """Every key at every corner; the estimated low end of C0 apart, for few keys count it."""
    low, high, floor = corners.shunt_index
    if floor in (low, high):
        _widen_at(reckoned, corners, wanted, slice(0, 3), [low, high, floor])
        return
    _widen_at(reckoned, corners, wanted, slice(0, SHUNT_FLOOR), [low, high])
    counting = {key for key in BY_SHUNT_FLOOR if wanted is None or key in wanted}
    _widen_at(reckoned, corners, counting, slice(SHUNT_FLOOR, 3), [floor])


def _widen_at(
    reckoned: Reckoned, corners: Corners, wanted: Collection[str] | None, slots: slice, shunt_index: Sequence[int]
) -> None:
    """Some keys at some C0, a few parts at a time, and only their ends kept: a list of thousands has millions."""
    keys, at = corners.keys, sorted(set(shunt_index))
    circuit = [_at_shunt(values, at) for values in corners.circuit]
    crystal = [_at_shunt(values, at) for values in corners.crystal]
    inputs = [*circuit, *crystal, corners.peak_v, np.asarray(keys.probe_pf, dtype=float)]
    # The greatest transconductance counts for no key of the estimated low end.
    too_much = slots.start == 0 and not np.isnan(corners.greatest_gm).all()
    asked = {*wanted, "greatest_transconductance_ms"} if wanted is not None and too_much else wanted
    place = [at.index(one) for one in shunt_index]
    for rows, block in blocks(inputs, np.broadcast_shapes(*(x.shape for x in inputs))):
        with np.errstate(all="ignore"):
            swing = Swing(block[-2], keys.swing_at, block[-1])
            circuits, crystals = Circuit(*block[: len(circuit)]), Crystal(*block[len(circuit) : -2])
            found = analyse_block(circuits, crystals, swing, corners.limiter, asked)
        for key, values in found.items():
            _widen(reckoned, key, _six(values), (rows[0], slots), place)
        if too_much:
            greatest = _six(found["greatest_transconductance_ms"])
            ratio = np.nan_to_num(corners.greatest_gm / greatest, nan=-np.inf).max(axis=(2, *CORNERS))
            ratio = ratio[:, place[:SHUNT_FLOOR] if ratio.shape[1] > 1 else [0] * SHUNT_FLOOR]
            reckoned.too_much_gain[rows[0]] = np.maximum(reckoned.too_much_gain[rows[0]], ratio)


def _at_shunt(values: Array, at: Sequence[int]) -> Array:
    """What goes along the C0 axis, at some of its ends."""
    return values[:, list(at)] if values.ndim == 6 and values.shape[1] > 1 else values


def _six(values: NDArray[Any]) -> NDArray[Any]:
    return values.reshape((1,) * (6 - values.ndim) + values.shape)


def _widen(reckoned: Reckoned, key: str, found: NDArray[Any], where: tuple[slice, slice], place: Sequence[int]) -> None:
    n = len(reckoned.too_much_gain)
    if key not in reckoned.over:
        none = np.full((n, SHUNT_FLOOR + 1, 2), np.nan)
        reckoned.over[key] = Envelope(none, none.copy(), np.zeros(none.shape, dtype=bool))
    known = reckoned.over[key]
    # Axes along which the key does not change are not there: what is not worked out twice is not compared twice.
    which = list(place) if found.shape[1] > 1 else [0] * len(place)
    low, high = (reduce.reduce(found, axis=CORNERS)[:, which] for reduce in (np.fmin, np.fmax))
    np.fmin(known.low[where], low, out=known.low[where])
    np.fmax(known.high[where], high, out=known.high[where])
    without = np.isnan(low)
    if not without.all():
        without = np.logical_or.reduce(np.isnan(found), axis=CORNERS)[:, which]
    known.some_without[where] |= without
