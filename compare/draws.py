"""Boards drawn at random beside the worst case: the share of them that falls short of each requirement.

Each board draws its capacitors, strays and amplifier once, each unit its crystal; every part is put on the same boards,
so that parts differ by what they are and one part's share does not hang on what else is in the list. A board falls
short if it does in any condition of the bench, for a limiter that may hold.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from concurrent.futures import ThreadPoolExecutor
from dataclasses import dataclass, replace
from typing import Literal

import numpy as np

from compare import budget
from compare.bench import Bench, CircuitKeys, Setting
from compare.boards import Boards, Steady, every_board, load_errors_ppm, steady_state
from compare.circuit import Array
from compare.columns import HIGH, LOW, MID, Columns, Flags
from compare.corners import BY_SHUNT_FLOOR, analyse_nominal, as_reckoned, limiters_of, rated_gm, swing_of
from compare.lot import Whole, spans
from compare.oscillation import Crystal, analyse
from compare.prefix import MILLI
from compare.result import OPEN_END
from compare.roots import (
    CAPACITANCES,
    CRYSTAL,
    GAIN,
    MOTIONAL,
    SHUNT,
    circuit_at,
    circuit_roots,
    crystal_at_values,
    crystal_roots,
)
from compare.terms import ageing_term, fork_spans, make_term, reckoned_ranges_c, temperature_term
from compare.verdict import GAINS, silence, transconductance_missing

Shape = Literal["uniform", "triangular", "normal"]
SHAPES: dict[Shape, str] = {
    "uniform": "every value within the tolerance is as likely as any other",
    "triangular": "values near the middle of the tolerance are the likelier, none lies outside",
    "normal": "the tolerance is three standard deviations to each side, none lies outside",
}
MAKE, TEMPERATURE, AGEING, CURVE, TURNOVER = "make", "temperature", "ageing", "coefficient", "turnover"
DRAWN = (*CAPACITANCES, GAIN, *CRYSTAL, MAKE, TEMPERATURE, AGEING, CURVE, TURNOVER)
STARTS, ANY = "starts", "any"
"""Beside the requirements: whether the board starts at all, and whether it meets everything that is asked."""
AT_ONCE = 1 << 15
"""Boards times parts in one piece: what the processor's cache holds."""
HELD = 0.99
"""Share of the boards that lies between low and high of a number."""
NORMAL_95 = 1.959963984540054


@dataclass(frozen=True)
class Draws:
    """How many of the boards drawn fall short.

    Attributes
    ----------
    boards, seed, shape
        What was drawn; the same three give the same boards.
    short : requirement -> (n,)
        Boards that fall short, of `boards`; to be read only where `known` says that nothing it takes is missing.
    """

    boards: int
    seed: int
    shape: Shape
    short: Mapping[str, Whole]
    known: Mapping[str, Flags]

    def share(self, about: str) -> Array:
        """(n,) share of the boards that falls short; NaN where it is not known."""
        return np.where(self.known[about], self.short[about] / self.boards, np.nan)

    def interval(self, about: str) -> tuple[Array, Array]:
        """(n,) low and high end of what the share may be, 95 in 100, for only so many boards were drawn."""
        low, high = share_interval(self.short[about], self.boards)
        return tuple(np.where(self.known[about], end, np.nan) for end in (low, high))  # type: ignore[return-value]


def share_interval(count: Whole, of: int) -> tuple[Array, Array]:
    """95 % interval of a share counted as `count` of `of`.

    E. B. Wilson, J. Am. Stat. Assoc. 22 (1927) 209, from memory. With none of n it still allows 3.84/(n + 3.84): that
    no board of a thousand fell short is no proof that none will.
    """
    share, z = count / of, NORMAL_95
    centre = (share + z**2 / (2 * of)) / (1 + z**2 / of)
    half = z / (1 + z**2 / of) * np.sqrt(share * (1 - share) / of + (z / (2 * of)) ** 2)
    low, high = np.where(count == 0, 0.0, centre - half), np.where(count == of, 1.0, centre + half)
    return low, high


def unit_draws(boards: int, seed: int, shape: Shape) -> dict[str, Array]:
    """(boards,) for each root, from 0 at the low end of its tolerance to 1 at the high end."""
    if boards < 1:
        raise ValueError(f"boards must be 1 or more, got {boards}")
    rng = np.random.default_rng(seed)
    size = (len(DRAWN), boards)
    if shape == "uniform":
        drawn = rng.random(size)
    elif shape == "triangular":
        drawn = (rng.random(size) + rng.random(size)) / 2
    elif shape == "normal":
        drawn = rng.standard_normal(size)
        while (outside := np.abs(drawn) > 3).any():
            drawn[outside] = rng.standard_normal(int(outside.sum()))
        drawn = drawn / 6 + 0.5
    else:
        raise ValueError(f"shape must be one of {', '.join(SHAPES)}, got {shape!r}")
    return dict(zip(DRAWN, drawn, strict=True))


def draw(columns: Columns, bench: Bench, boards: int = 1000, seed: int = 1, shape: Shape = "uniform") -> Draws:
    """The share of boards that falls short, for each requirement that the bench asks and each part.

    Parameters
    ----------
    columns, bench
        The parts, and what they are held to.
    boards, seed, shape
        How many boards, from which seed, and how values lie within their tolerances. A range of transconductance is
        drawn by its logarithm, since its nominal is the geometric mean.

    Raises
    ------
    ValueError
        Fewer boards than one, or a shape that there is none of.
    """
    units = unit_draws(boards, seed, shape)
    settings = _setting_draws(columns, bench, units)
    step = max(1, AT_ONCE // boards)
    pieces = [range(start, min(start + step, len(columns))) for start in range(0, len(columns), step)]

    causes, known = _Budget.of(columns, bench), known_requirements(columns, bench)

    def of_piece(piece: range) -> dict[str, Whole]:
        ends = causes.ends(slice(piece.start, piece.stop), units)
        return _short_of(columns.take(piece), bench, settings, units, ends)

    with ThreadPoolExecutor(2) as threads:
        found = list(threads.map(of_piece, pieces)) if len(pieces) > 2 else [of_piece(piece) for piece in pieces]
    short = {name: np.concatenate([piece[name] for piece in found]) for name in known} if found else {}
    return Draws(boards, seed, shape, short, known)


@dataclass(frozen=True)
class _SettingDraws:
    """One setting of the bench with its circuit drawn: (1, boards)."""

    number: int
    setting: Setting
    circuit: Mapping[str, Array]
    boards: Boards | None
    """None where the amplitude is limited otherwise than by the transconductance, or a probe counts: then the whole
    analysis is run."""
    like: int
    """Number of the first setting with the same crystals and circuit but for gain and swing; often its own."""

    @classmethod
    def of(cls, setting: Setting, number: int, bench: Bench, units: Mapping[str, Array]) -> _SettingDraws:
        values = drawn_circuit(setting.circuit, bench, units)
        lean = limiters_of(setting.circuit) == ("transconductance",) and not setting.circuit.probe_pf
        known = values if GAIN in values else values | {GAIN: np.full_like(units[GAIN], np.nan)[None, :]}
        circuit = circuit_at(known, setting.circuit, bench, np.zeros(()))
        boards = Boards.of(circuit, bench.requirement.frequency_mhz) if lean else None
        return cls(number, setting, values, boards, number)


def _setting_draws(columns: Columns, bench: Bench, units: Mapping[str, Array]) -> list[_SettingDraws]:
    """Every setting, and which of them have their critical state in common."""
    drawn: list[_SettingDraws] = []
    for number, setting in enumerate(bench.settings):
        own = _SettingDraws.of(setting, number, bench, units)
        like = next((one.number for one in drawn if _same_state(one, own, columns)), number)
        drawn.append(replace(own, like=like))
    return drawn


def _same_state(one: _SettingDraws, other: _SettingDraws, columns: Columns) -> bool:
    if one.boards is None or other.boards is None or not one.boards.same_but_gain(other.boards):
        return False
    ends = (columns.esr_ohm, columns.shunt_pf, columns.motional_ff)
    crystals = all(np.array_equal(of[one.number], of[other.number], equal_nan=True) for of in ends)
    return crystals and one.setting.circuit.series_resistor_ohm == other.setting.circuit.series_resistor_ohm


def drawn_circuit(keys: CircuitKeys, bench: Bench, units: Mapping[str, Array]) -> dict[str, Array]:
    """(1, boards) of each root of a circuit."""
    drawn = {}
    for name, (low, _, high) in circuit_roots(keys, bench).items():
        value = low * (high / low) ** units[name] if name == GAIN else low + (high - low) * units[name]
        drawn[name] = value[None, :]
    return drawn


def between(low: Array, high: Array, unit: Array) -> Array:
    """(n, boards) from (n,) ends and (boards,) places between them."""
    value: Array = low[:, None] + (high - low)[:, None] * unit
    return value


def crystal_values(
    columns: Columns, number: int, units: Mapping[str, Array], *, of_frequency: bool
) -> dict[str, Array]:
    """(n, boards) of each crystal root. A loose limit on C0 is taken as it is, save for numbers of frequency."""
    values = {}
    for name, ends in crystal_roots(columns, number).items():
        low, high = ends[LOW], ends[HIGH]
        if name == SHUNT and of_frequency:
            low = np.minimum(low, columns.shunt_floor_pf)
        still = np.array_equal(low, high, equal_nan=True)
        values[name] = low[:, None] if still else between(low, high, units[name])
    return values


Critical = dict[int, tuple[Steady, Array]]
"""Critical state and load error by the setting that they are of."""


def _evaluated(
    columns: Columns, bench: Bench, one: _SettingDraws, units: Mapping[str, Array], critical: Critical
) -> Iterator[dict[str, Array]]:
    """What each board comes to, (n, boards), for each limiter that may hold."""
    crystal = crystal_at_values(
        crystal_values(columns, one.number, units, of_frequency=False), columns, bench, one.number
    )
    of_frequency = crystal
    if columns.shunt_loose.any():
        values = crystal_values(columns, one.number, units, of_frequency=True)
        of_frequency = crystal_at_values(values, columns, bench, one.number)
    keys = one.setting.circuit
    if one.boards is not None:
        boards = one.boards if GAIN in one.circuit else replace(one.boards, gm=_rated_siemens(one, bench, crystal))
        if one.like not in critical:
            state = steady_state(boards, crystal)
            error = load_errors_ppm(boards, of_frequency, state if of_frequency is crystal else None)
            critical[one.like] = state, error
        steady, error = critical[one.like]
        yield every_board(boards, crystal, *swing_of(keys), steady) | {"load_error_ppm": error}
        return
    circuit = circuit_at(one.circuit, keys, bench, np.asarray(crystal.shunt_capacitance_pf))
    for limiter in limiters_of(keys):
        found = analyse(circuit, crystal, *swing_of(keys), limiter, keys.probe_pf)
        if of_frequency is not crystal:
            found["load_error_ppm"] = analyse(circuit, of_frequency, limiter=limiter)["load_error_ppm"]
        yield found


def _rated_siemens(one: _SettingDraws, bench: Bench, crystal: Crystal) -> Array:
    keys = as_reckoned(one.setting.circuit, bench)
    return rated_gm(keys, bench, np.asarray(crystal.shunt_capacitance_pf)) * MILLI


def _short_of(
    columns: Columns,
    bench: Bench,
    settings: list[_SettingDraws],
    units: Mapping[str, Array],
    budget_ends: tuple[Array, Array],
) -> dict[str, Whole]:
    """How many boards of each part fall short of each requirement that the bench asks."""
    short: dict[str, Flags] = {}
    rated = spans(columns.offers.column("drive"))[MID][:, None]
    critical: Critical = {}
    for one in settings:
        for found in _evaluated(columns, bench, one, units, critical):
            for name, flags in _falling_short(found, bench, one, budget_ends, rated):
                short[name] = short[name] | flags if name in short else flags
    short[ANY] = np.logical_or.reduce(np.broadcast_arrays(*(flags for name, flags in short.items() if name != STARTS)))
    size = (len(columns), len(units[GAIN]))
    return {name: np.broadcast_to(flags, size).sum(axis=1) for name, flags in short.items()}


def _falling_short(
    found: Mapping[str, Array], bench: Bench, one: _SettingDraws, budget_ends: tuple[Array, Array], rated_uw: Array
) -> Iterator[tuple[str, Flags]]:
    """(requirement, flags); a board that cannot oscillate has no gain, and no frequency or drive to judge."""
    asked = bench.requirement
    yield STARTS, ~(found["resistance_headroom"] >= 1)
    for name in GAINS:
        yield name, ~(found[name] >= asked.margin)
    if isinstance(one.setting.circuit.transconductance_ms, tuple):
        yield "resistance_headroom", one.circuit[GAIN] >= found["greatest_transconductance_ms"]
    if asked.startup_ms is not None:
        yield "startup_ms", ~(found["startup_ms"] <= asked.startup_ms)
    with np.errstate(invalid="ignore"):
        if asked.limits_ppm is not None:
            low, high = asked.limits_ppm
            error = found["load_error_ppm"]
            yield "total_ppm", (error + budget_ends[0] < low) | (error + budget_ends[1] > high)
        if judges_drive(bench):
            yield "drive_level_uw", found["drive_level_uw"] * asked.drive_headroom > rated_uw


def judges_drive(bench: Bench) -> bool:
    """Whether the bench asks about the drive level, as the verdict does."""
    swings = any(setting.circuit.swing_v is not None for setting in bench.settings)
    return swings or "drive_headroom" in bench.requirement.given


@dataclass(frozen=True)
class _Budget:
    """What make, temperature and ageing may come to, low and high of each: (n,); a fork's own values (3, n)."""

    make: tuple[Array, Array]
    ageing: tuple[Array, Array]
    stability: tuple[Array, Array]
    fork: Flags
    coefficient: Array
    turnover: Array
    range_c: Array
    offset: Array
    """The nominal load error, where a trim takes it up."""

    @classmethod
    def of(cls, columns: Columns, bench: Bench) -> _Budget:
        make, ageing = make_term(columns, bench), ageing_term(columns, bench)
        stability = temperature_term(columns, bench)
        offset = np.zeros(len(columns))
        if bench.requirement.trim_step_ppm is not None:
            limiter = limiters_of(bench.settings[0].circuit)[0]
            offset = analyse_nominal(columns, bench, limiter)["load_error_ppm"]
        return cls(
            (make.low, make.high),
            (ageing.low, ageing.high),
            (stability.low, stability.high),
            columns.offers.column("fork").array(bool, bool),
            *fork_spans(columns.offers),
            reckoned_ranges_c(columns.offers, bench),
            offset,
        )

    def ends(self, piece: slice, units: Mapping[str, Array]) -> tuple[Array, Array]:
        """(parts, boards) under and over the load error, at the worst temperature.

        A unit's make error and ageing are values; what it does over temperature is a stretch. A stability as stated is
        met with a stretch between nothing and all of it, to both sides; a fork's parabola with its own coefficients.
        """
        fixed = between(self.make[0][piece], self.make[1][piece], units[MAKE])
        fixed += between(self.ageing[0][piece], self.ageing[1][piece], units[AGEING])
        fixed -= self.offset[piece, None]
        low, high = (end[piece, None] * units[TEMPERATURE] for end in self.stability)
        fork = np.flatnonzero(self.fork[piece])
        if fork.size:
            k, centre = (
                between(of[LOW, piece][fork], of[HIGH, piece][fork], units[name])
                for of, name in ((self.coefficient, CURVE), (self.turnover, TURNOVER))
            )
            coldest, hottest = self.range_c[:, piece][:, fork, None]
            low[fork], high[fork] = budget.parabola_ppm_range((coldest, hottest), (k, k), (centre, centre))
        low += fixed
        high += fixed
        return low, high


def known_requirements(columns: Columns, bench: Bench) -> dict[str, Flags]:
    """For each requirement asked, which parts can be held to it: nothing that it takes is missing."""
    silent, asked, n = silence(columns, bench), bench.requirement, len(columns)
    capacitors = any(gone for key, gone in silent.bench_keys.items() if key != "circuit.swing_v")
    circuit = ~silent.esr & (not capacitors)
    gain = circuit & ~np.logical_or.reduce(
        [np.zeros(n, dtype=bool), *transconductance_missing(columns, bench).values()]
    )
    known = dict.fromkeys((STARTS, *GAINS), gain)
    if asked.startup_ms is not None:
        known["startup_ms"] = gain
    if asked.limits_ppm is not None:
        terms = (make_term(columns, bench), temperature_term(columns, bench), ageing_term(columns, bench))
        missing = [flags for term in terms for flags in term.missing.values()]
        known["total_ppm"] = circuit & ~silent.load & ~np.logical_or.reduce([np.zeros(n, dtype=bool), *missing])
    if judges_drive(bench):
        known["drive_level_uw"] = circuit & ~silent.drive & (not silent.bench_keys["circuit.swing_v"])
    return known | {ANY: np.logical_and.reduce(list(known.values()))}


def drawn_numbers(columns: Columns, bench: Bench, boards: int, seed: int, shape: Shape) -> dict[str, Array]:
    """(3, n) of each key: the median, and the ends that hold 99 boards in 100, each board at its worse condition.

    The whole analysis is run for it: meant for a few parts.
    """
    units = unit_draws(boards, seed, shape)
    lows: dict[str, Array] = {}
    highs: dict[str, Array] = {}
    mids: dict[str, Array] = {}
    for number, setting in enumerate(bench.settings):
        for found in _every_key(columns, bench, (number, setting), units):
            found["allowed_esr_ohm"] = found["greatest_esr_ohm"] / bench.requirement.margin
            under, over = _Budget.of(columns, bench).ends(slice(None), units)
            for low, high, key in _with_total(found, under, over):
                mids.setdefault(key, (low + high) / 2)
                lows[key] = _wider(np.fmin, lows.get(key), low, key, LOW)
                highs[key] = _wider(np.fmax, highs.get(key), high, key, HIGH)
    tail = (1 - HELD) / 2
    return {
        key: np.stack([_quantile(lows[key], tail), _quantile(mid, 0.5), _quantile(highs[key], 1 - tail)])
        for key, mid in mids.items()
    }


def _every_key(
    columns: Columns, bench: Bench, at: tuple[int, Setting], units: Mapping[str, Array]
) -> Iterator[dict[str, Array]]:
    """All keys of the analysis, (n, boards), for each limiter that may hold."""
    number, setting = at
    keys, values = setting.circuit, drawn_circuit(setting.circuit, bench, units)
    for limiter in limiters_of(keys):
        found: dict[str, Array] = {}
        for of_frequency in (False, True):
            roots = crystal_values(columns, number, units, of_frequency=of_frequency)
            crystal = crystal_at_values(roots, columns, bench, number)
            circuit = circuit_at(values, keys, bench, np.asarray(crystal.shunt_capacitance_pf))
            every = analyse(circuit, crystal, *swing_of(keys), limiter, keys.probe_pf)
            found |= {key: value for key, value in every.items() if (key in BY_SHUNT_FLOOR) == of_frequency}
            found["motional_capacitance_ff"] = np.broadcast_to(roots[MOTIONAL], every["margin"].shape)
        yield found


def _with_total(found: Mapping[str, Array], under: Array, over: Array) -> Iterator[tuple[Array, Array, str]]:
    for key, values in found.items():
        yield values, values, key
    error = found["load_error_ppm"]
    yield error + under, error + over, "total_ppm"


def _wider(pick: np.ufunc, known: Array | None, values: Array, key: str, end: int) -> Array:
    """The worse of the settings, board by board; a board without such a number stays one at an end without bound."""
    open_end = OPEN_END.get(key) == end
    here = np.where(np.isnan(values), -np.inf if end == LOW else np.inf, values) if open_end else values
    worse: Array = here if known is None else pick(known, here)
    return worse


def _quantile(values: Array, share: float) -> Array:
    """(n,) of (n, boards), boards without such a number left out; NaN where none has one."""
    found = np.full(len(values), np.nan)
    for at, row in enumerate(values):
        known = row[~np.isnan(row)]
        if known.size:
            found[at] = np.quantile(known, share, method="inverted_cdf")
    return found
