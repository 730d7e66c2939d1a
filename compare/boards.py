"""Thousands of boards for thousands of parts: the exact loop, lean enough for draws.

All parts of a list hang on the same boards, and Z is held at the nominal frequency. Then what depends on a board alone
is worked out once for each, and what C0, R1 and C1 do to it are polynomials. The map of `circuit.over_transconductance`
is, with y = ω C0, (a + g b)/(c + j y a + g (d + j y b)); its balance Re Z + R1 has the sign of p g² + q g + r, where

    p = Re b d* + R1 (|d|² + 2 y Im d b* + y² |b|²)
    q = Re a d* + Re b c* + 2 R1 (Re c d* + y (Im c b* + Im d a*) + y² Re a b*)
    r = Re a c* + R1 (|c|² + 2 y Im c a* + y² |a|²)

Beside `oscillation.analyse` this neglects how Z changes between the nominal frequency and the true one (some 1e-5 of Z)
and along the start-up pole (0.02 % of the time in most circuits). No corner is judged by it.
"""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import ArrayLike

from compare import motional
from compare.circuit import Array, Circuit, Complex, Network, angular, array, node_ratios, over_transconductance
from compare.oscillation import DECADES_OF_GROWTH, Crystal, End
from compare.prefix import FEMTO, MICRO, MILLI, PICO, PPM

Quadratic = tuple[Array, Array, Array]


@dataclass(frozen=True)
class Boards:
    """What each board comes to at one frequency: arrays (1, boards), SI units; quadratics as (k0, k1, k2).

    Attributes
    ----------
    by_r : quadratics in y = ω C0
        What R1 multiplies in r, q and p of the module docstring.
    conductance, susceptance, norm : quadratics in gm
        The circuit's admittance, C0 not in, is (conductance + j susceptance)/norm. The first is also r, q, p at R1 = 0.
    across, output : quadratics in gm
        |V(b) - V(a)|² and |V(b)|² over |V(a)|².
    """

    omega: float
    gm: Array
    by_r: tuple[Quadratic, Quadratic, Quadratic]
    conductance: Quadratic
    susceptance: Quadratic
    norm: Quadratic
    across: Quadratic
    output: Quadratic

    @classmethod
    def of(cls, circuit: Circuit, frequency_mhz: float) -> Boards:
        """Boards of a circuit whose fields are (1, boards), or numbers."""
        with np.errstate(all="ignore"):
            net, s = Network.of(circuit), np.asarray(1j * angular(frequency_mhz))
            z = over_transconductance(net, s, np.zeros(()))
            at_rest, _ = node_ratios(replace(net, gm=np.zeros(())), s)
            at_one, _ = node_ratios(replace(net, gm=np.ones(())), s)
        a, b, c, d = z.a, z.b, z.c, z.d
        ab, cd, ca, db, da, cb = (x * np.conj(w) for x, w in ((a, b), (c, d), (c, a), (d, b), (d, a), (c, b)))
        return cls(
            omega=float(angular(frequency_mhz)),
            gm=net.gm,
            by_r=(
                quadratic(squared(c), 2 * ca.imag, squared(a)),
                quadratic(2 * cd.real, 2 * (cb.imag + da.imag), 2 * ab.real),
                quadratic(squared(d), 2 * db.imag, squared(b)),
            ),
            conductance=quadratic(ca.real, da.real + cb.real, db.real),
            susceptance=quadratic(ca.imag, da.imag + cb.imag, db.imag),
            norm=quadratic(squared(a), 2 * ab.real, squared(b)),
            across=squared_line(at_rest - 1, at_one - at_rest),
            output=squared_line(at_rest, at_one - at_rest),
        )

    def same_but_gain(self, other: Boards) -> bool:
        """True where the boards differ in transconductance alone."""
        mine, theirs = ({name: value for name, value in vars(one).items() if name != "gm"} for one in (self, other))
        return all(np.array_equal(np.asarray(mine[name]), np.asarray(theirs[name]), equal_nan=True) for name in mine)


def quadratic(zero: ArrayLike, one: ArrayLike, two: ArrayLike) -> Quadratic:
    first, second, third = np.broadcast_arrays(array(zero), array(one), array(two))
    return first, second, third


def squared(x: Complex) -> Array:
    value: Array = x.real**2 + x.imag**2
    return value


def squared_line(x: Complex, slope: Complex) -> Quadratic:
    """|x + g slope|² as a quadratic in g."""
    return quadratic(squared(x), 2 * (x.real * slope.real + x.imag * slope.imag), squared(slope))


def at(x: Array, coefficients: Quadratic) -> Array:
    """k0 + k1 x + k2 x²."""
    zero, one, two = coefficients
    value: Array = two * x
    value += one
    value *= x
    value += zero
    return value


@dataclass(frozen=True)
class Steady:
    """The critical state of each part on each board: NaN where it cannot oscillate. SI units."""

    critical: Array
    greatest: Array
    conductance: Array
    susceptance: Array

    @classmethod
    def of(cls, boards: Boards, y: Array, r1: Array) -> Steady:
        r, q, p = (free + r1 * at(y, by_r) for free, by_r in zip(boards.conductance, boards.by_r, strict=True))
        # Where q is not below zero, or the root is of a number below zero, no gain sustains it.
        root = np.sqrt(q * q - 4 * p * r)
        above = np.where(q < 0, root - q, np.nan)
        critical = 2 * r / above
        norm = at(critical, boards.norm)
        return cls(
            critical, above / (2 * p), at(critical, boards.conductance) / norm, at(critical, boards.susceptance) / norm
        )

    @property
    def loading(self) -> Array:
        """ω CL = -1/Im Z of the circuit, C0 not in; S."""
        loading: Array = self.susceptance + self.conductance**2 / self.susceptance
        return loading


def every_board(
    boards: Boards, crystal: Crystal, swing_peak_v: float, swing_at: End, steady: Steady
) -> dict[str, Array]:
    """Gains and drive of each part on each board, (parts, boards), by the names of `oscillation.analyse`.

    `steady`: the critical state, which hangs on no transconductance and on no swing.
    """
    with np.errstate(all="ignore"):
        y = shunt_susceptance(boards, crystal)
        drive = drive_level_uw(boards, crystal, y, steady, (swing_peak_v, swing_at))
        return gains(boards, crystal, y, steady) | {"drive_level_uw": drive}


def shunt_susceptance(boards: Boards, crystal: Crystal) -> Array:
    """ω C0, S."""
    y: Array = boards.omega * PICO * np.asarray(crystal.shunt_capacitance_pf)
    return y


def steady_state(boards: Boards, crystal: Crystal) -> Steady:
    with np.errstate(all="ignore"):
        return Steady.of(boards, shunt_susceptance(boards, crystal), np.asarray(crystal.esr_ohm))


def load_errors_ppm(boards: Boards, crystal: Crystal, steady: Steady | None = None) -> Array:
    """The load error alone, (parts, boards); `steady`: the critical state of these crystals, where it is known."""
    with np.errstate(all="ignore"):
        steady = steady_state(boards, crystal) if steady is None else steady
        return load_error_ppm(boards, crystal, shunt_susceptance(boards, crystal), steady)


def gains(boards: Boards, crystal: Crystal, y: Array, steady: Steady) -> dict[str, Array]:
    _, rated_load, c0, c1, r1 = crystal
    norm = at(boards.gm, boards.norm)
    g, b = at(boards.gm, boards.conductance) / norm, at(boards.gm, boards.susceptance) / norm
    negative = g / (g * g + b * b)
    with_c0 = g / (g * g + (b + y) ** 2)
    rl = r1 * (1 + y / steady.loading) ** 2
    # Without a rated load the nominal frequency stands for fs, as in `oscillation.Arm`.
    known_load = np.where(np.isnan(rated_load), np.inf, rated_load)
    omega_s = boards.omega / np.sqrt(1 + c1 * (FEMTO / PICO) / (c0 + known_load))
    rate = -(r1 + with_c0) * (omega_s**2 * (FEMTO / 2) * c1)
    return {
        "margin": -negative / rl,
        "gain_ratio": boards.gm / steady.critical,
        "resistance_headroom": -with_c0 / r1,
        "greatest_transconductance_ms": steady.greatest / MILLI,
        "startup_ms": np.where(rate > 0, DECADES_OF_GROWTH / MILLI / rate, np.nan),
    }


def load_error_ppm(boards: Boards, crystal: Crystal, y: Array, steady: Steady) -> Array:
    frequency, rated_load, c0, c1, r1 = crystal
    half_slope = (boards.omega * FEMTO / 2) * c1 / np.sqrt(1 + c1 * (FEMTO / PICO) / (c0 + rated_load))
    at_rated, _ = motional.load_reactance_ohm(frequency, c0, rated_load, r1)
    # Where R1 is so great that the phase never passes zero the rated load is met with R1 = 0.
    at_rated = np.where(np.isnan(at_rated), 1 / (y + boards.omega * PICO * rated_load), at_rated)
    b = steady.susceptance + y
    half, half_rated = half_slope * (b / (steady.conductance**2 + b * b)), half_slope * at_rated
    pull, rated = half * (1 + half / 2), half_rated * (1 + half_rated / 2)
    error: Array = (pull - rated) / ((1 + rated) * PPM)
    return error


def drive_level_uw(boards: Boards, crystal: Crystal, y: Array, steady: Steady, swing: tuple[float, End]) -> Array:
    swing_peak_v, swing_at = swing
    squared_admittance = steady.conductance**2 + (steady.susceptance + y) ** 2
    half_power = np.asarray(crystal.esr_ohm) * (swing_peak_v**2 / 2 / MICRO)
    power: Array = at(steady.critical, boards.across) * squared_admittance * half_power
    return power / at(steady.critical, boards.output) if swing_at == "output" else power
