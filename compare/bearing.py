"""How much ESR a circuit can bear at each rated load, and which gm setting of the IC to take, before a part is chosen.

For each rated load with the two E24 capacitors that present it; worst case over all tolerances and conditions.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from compare.advice import candidate_pairs
from compare.bench import Bench
from compare.circuit import Array
from compare.columns import HIGH, LOW, MID, Columns, Flags
from compare.corners import Nodes, as_reckoned, corner_circuit
from compare.figures import number
from compare.offer import Offer, with_load
from compare.oscillation import Crystal, analyse
from compare.reckoning import Reckoning, reckon_offers
from compare.stated import Taken
from compare.trial import pair_corners
from compare.verdict import MEETS

# What makers offer most; common practice, no source.
USUAL_LOADS_PF = {True: (6.0, 7.0, 9.0, 12.5), False: (6.0, 8.0, 10.0, 12.0, 18.0)}
CLOCKS_BELOW_MHZ = 1.0
MOST_LOADS = 7
ALIKE = 1.35
CLOSE_PF = 0.35
C0_STEP_PF = 0.1
ASSUMED_C0_PF = {True: 1.5, False: 2.0}
"""Where no part was read: more than most have, which is the safe side."""


@dataclass(frozen=True)
class Pair:
    """Fitted capacitors at A and B, and the load that they present, pF."""

    input_pf: float
    output_pf: float
    load_pf: float


@dataclass(frozen=True)
class Bearing:
    """One rated load: the pair for it (None: cannot be met), the ESR that the circuit bears then, and who stays below.

    `greatest_ohm` just oscillates, `allowed_ohm` has the margin asked; None where the gain is not known or nothing
    oscillates. `offering` counts the parts read that offer this load, `below` those of them whose ESR stays below.
    """

    load_pf: float
    pair: Pair | None
    greatest_ohm: float | None
    allowed_ohm: float | None
    offering: int
    below: int
    fitted: bool
    """True where the circuit as it is presents this load."""


def rated_loads(bench: Bench, reckoning: Reckoning | None) -> list[float]:
    """Loads that parts offer, and the usual ones, in order."""
    clock = bench.requirement.frequency_mhz < CLOCKS_BELOW_MHZ
    offered = set() if reckoning is None else {load for loads, _ in _by_loads(reckoning.columns) for load in loads}
    usual = [load for load in USUAL_LOADS_PF[clock] if all(abs(load - one) > CLOSE_PF for one in offered)]
    room = max(MOST_LOADS - len(usual), 3)
    return sorted([*sorted(offered)[:room], *usual])


def _by_loads(columns: Columns) -> list[tuple[tuple[float, ...], Flags]]:
    """For each choice of rated loads that occurs, which parts have it; looked up by column, for lists of thousands."""
    choice, rated = columns.offers.column("load_choice"), columns.offers.column("load")
    pairs, which = np.unique(np.stack([choice.codes, rated.codes]), axis=1, return_inverse=True)
    numbers: dict[tuple[float, ...], list[int]] = {}
    for at, (chosen, load) in enumerate(pairs.T.tolist()):
        options, _ = choice.values[chosen]
        numbers.setdefault(_loads(options, rated.values[load]), []).append(at)
    return [(loads, np.isin(which.ravel(), of)) for loads, of in numbers.items()]


def _loads(options: tuple[float, ...], rated: Taken) -> tuple[float, ...]:
    """The rated loads that a part can be ordered with; none for a series-resonant one."""
    if options:
        return options
    return (rated.span.mid,) if math.isfinite(rated.span.mid) else ()


def offering(columns: Columns, load_pf: float) -> Flags:
    """(n,) true for the parts that offer a rated load."""
    found: Flags = np.zeros(len(columns), dtype=bool)
    for loads, which in _by_loads(columns):
        if load_pf in loads:
            found |= which
    return found


def pair_for(bench: Bench, load_pf: float) -> Pair | None:
    """The E24 pair, as alike as may be, whose load with the strays lies nearest; None where none comes near."""
    keys = as_reckoned(bench.settings[0].circuit, bench)
    bare = Nodes.of(keys.model_copy(update={"input_capacitor_pf": 0.0, "output_capacitor_pf": 0.0}))
    c_in, c_out = candidate_pairs()
    alike = (c_in <= ALIKE * c_out) & (c_out <= ALIKE * c_in)
    c_in, c_out = c_in[alike], c_out[alike]
    a, b = c_in + bare.input_pf[MID], c_out + bare.output_pf[MID]
    load = a * b / (a + b) + bare.across_pf[MID]
    # Of pairs about as near the most alike, then the lesser at A.
    off = np.abs(load - load_pf)
    best = int(np.lexsort((c_in, np.round(np.abs(np.log(c_in / c_out)), 3), np.round(off / 0.05)))[0])
    if off[best] > CLOSE_PF:
        return None
    return Pair(float(c_in[best]), float(c_out[best]), float(load[best]))


def why_no_pair(bench: Bench, load_pf: float) -> str:
    """A sentence on a load that no pair brings."""
    keys = as_reckoned(bench.settings[0].circuit, bench)
    bare = Nodes.of(keys.model_copy(update={"input_capacitor_pf": 0.0, "output_capacitor_pf": 0.0}))
    a, b = bare.input_pf[MID], bare.output_pf[MID]
    strays = (a * b / (a + b) if a + b else 0.0) + bare.across_pf[MID]
    said = f"No pair from E24 brings {number(load_pf)} pF"
    if strays >= load_pf:
        return (
            f"{said}: the strays alone come to {number(strays)} pF. Choose a higher rated load, or shorten the tracks."
        )
    return f"{said} to within {number(CLOSE_PF)} pF."


def bearings(bench: Bench, reckoning: Reckoning | None) -> tuple[list[Bearing], float]:
    """One for each rated load, and the C0 in pF that its two resistances were reckoned with.

    Whether a part's ESR stays below is told with that part's own C0.
    """
    loads = rated_loads(bench, reckoning)
    pairs = [pair_for(bench, load) for load in loads]
    own = _own_c0_pf(reckoning)
    c0 = float(np.median(own)) if len(own) else ASSUMED_C0_PF[bench.requirement.frequency_mhz < CLOCKS_BELOW_MHZ]
    steps, step_of = np.unique(np.ceil(own / C0_STEP_PF) * C0_STEP_PF, return_inverse=True)
    known = [pair for pair in pairs if pair is not None]
    borne = iter(_greatest_esr(bench, known, np.array([c0, *steps])) if known else ())
    now = bench.settings[0].circuit
    found = []
    for load, pair in zip(loads, pairs, strict=True):
        bears = next(borne) if pair is not None else np.full(1 + len(steps), np.nan)
        allowed = bears / bench.requirement.margin
        offer, below = _below(reckoning, load, allowed[1:][step_of] if len(steps) else allowed[:0])
        fitted = pair is not None and (pair.input_pf, pair.output_pf) == (
            now.input_capacitor_pf,
            now.output_capacitor_pf,
        )
        found.append(Bearing(load, pair, _or_none(bears[0]), _or_none(allowed[0]), offer, below, fitted))
    return found, c0


def _own_c0_pf(reckoning: Reckoning | None) -> Array:
    """(n,) greatest C0 of each part read."""
    return np.empty(0) if reckoning is None else np.asarray(reckoning.columns.shunt_pf[:, HIGH].max(axis=0))


def _or_none(value: float) -> float | None:
    return float(value) if math.isfinite(value) and value > 0 else None


def _greatest_esr(bench: Bench, pairs: Sequence[Pair], c0_pf: Array) -> list[Array]:
    """The greatest R1 that each pair's circuit bears in its worst corner, for each C0; NaN where one drives none."""
    c_in, c_out = (np.array([getattr(pair, end) for pair in pairs]) for end in ("input_pf", "output_pf"))
    shunt = c0_pf.reshape(1, -1, 1, 1, 1, 1)
    worst = np.full((len(pairs), len(c0_pf)), np.inf)
    # Load, C1 and R1 do not count for the greatest R1; they must only be there.
    crystal = Crystal(bench.requirement.frequency_mhz, 10.0, shunt, 3.0, 1.0)
    for setting in bench.settings:
        keys = as_reckoned(setting.circuit, bench)
        circuit, _ = corner_circuit(bench, keys, shunt, pair_corners(keys, c_in, c_out))
        found = analyse(circuit, crystal)["greatest_esr_ohm"]
        found = np.where(np.isnan(found), -np.inf, found)
        worst = np.minimum(worst, found.min(axis=(2, 3, 4, 5)))
    return list(np.where(np.isfinite(worst), worst, np.nan))


def _below(reckoning: Reckoning | None, load_pf: float, allowed_ohm: Array) -> tuple[int, int]:
    if reckoning is None:
        return 0, 0
    esr: Array = reckoning.columns.esr_ohm[:, HIGH].max(axis=0)
    offers = offering(reckoning.columns, load_pf)
    return int(offers.sum()), int((offers & (esr <= allowed_ohm)).sum())


@dataclass(frozen=True)
class Setting:
    """One rated load at one gm: the part that does best there, its worst margin and its ppm; None where not known."""

    load_pf: float
    gm_ms: float
    pair: Pair
    part: str
    margin: float | None
    low_ppm: float | None
    high_ppm: float | None
    meets: bool


def gm_settings(bench: Bench, columns: Columns, settings_ms: Sequence[float]) -> list[list[Setting]]:
    """A row for each rated load that parts offer, a place in it for each gm, least first; each with its own capacitors.

    The conditions of the bench keep their ratio to the circuit's gm.
    """
    loads = sorted({load for loads, _ in _by_loads(columns) for load in loads})
    rows = []
    for load in loads:
        pair = pair_for(bench, load)
        if pair is not None:
            there = np.flatnonzero(offering(columns, load)).tolist()
            offers = [with_load(columns.offers[at], load, bench) for at in there]
            rows.append([_setting(bench, offers, (load, pair, gm)) for gm in sorted(settings_ms)])
    return rows


def _setting(bench: Bench, offers: Sequence[Offer], at: tuple[float, Pair, float]) -> Setting:
    load, pair, gm = at
    reckoning = reckon_offers(offers, with_setting(bench, pair, gm))
    slacks = np.fmin.reduce([np.where(one.asked, one.slack, np.nan) for one in reckoning.judged.values()])
    order = np.lexsort((-np.nan_to_num(slacks, nan=-1.0), -reckoning.verdict))
    best = int(order[0])
    margin = float(reckoning.numbers["margin"].ends[LOW, best])
    low, _, high = (float(value) for value in reckoning.numbers["total_ppm"].ends[:, best])
    part = reckoning.columns.offers[best].part
    return Setting(
        load,
        gm,
        pair,
        part.part_number or part.maker or "no part number",
        margin if math.isfinite(margin) else None,
        low if math.isfinite(low) else None,
        high if math.isfinite(high) else None,
        bool(reckoning.verdict[best] == MEETS),
    )


def with_setting(bench: Bench, pair: Pair, gm_ms: float) -> Bench:
    """The bench with other capacitors and another gm, that of the conditions in the same ratio to the circuit's."""
    stated = bench.settings[0].circuit.transconductance_range_ms
    factor = None if stated is None else gm_ms / stated[MID]
    fitted = {"input_capacitor_pf": pair.input_pf, "output_capacitor_pf": pair.output_pf}

    def moved(value: float | tuple[float, float] | None) -> float | tuple[float, float] | None:
        if value is None or factor is None:
            return None if value is None else gm_ms
        return (value[0] * factor, value[1] * factor) if isinstance(value, tuple) else value * factor

    conditions = tuple(
        one.model_copy(update={"transconductance_ms": moved(one.transconductance_ms)})
        if "transconductance_ms" in one.given
        else one
        for one in bench.circuit.condition
    )
    own = bench.circuit.transconductance_ms
    gain = gm_ms if own is None else moved(own)
    circuit = bench.circuit.model_copy(update={**fitted, "transconductance_ms": gain, "condition": conditions})
    return bench.model_copy(update={"circuit": circuit})


def advised(row: Sequence[Setting]) -> Setting | None:
    """The least gm of a row at which all that is asked is met: less current; None where none does."""
    return next((one for one in row if one.meets), None)
