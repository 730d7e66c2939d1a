"""What a crystal does in a circuit: margin, transconductance limits, steady load and frequency, drive level, start-up.

The loop oscillates at the complex frequency s where the motional arm and what it sees add up to nothing:

    R1 + s L1 + 1/(s C1) + Z(s) = 0,     Z with C0 taken into the circuit.

The arm is so stiff (its reactance runs through all values where Z hardly moves) that solving it for s with Z held gives
s to about C1/C0 of the pull; the secant through two such steps gives it to 1e-12, with no search and no polynomial to
root. On the axis (steady oscillation) Re Z = -R1 is, with frequency held, a quadratic in gm: its least positive root is
the critical transconductance and the other one the greatest. Each has its own frequency, found by the same steps.
"""

from __future__ import annotations

from collections.abc import Callable, Collection, Iterator
from dataclasses import dataclass, fields, replace
from functools import cache, cached_property
from typing import Any, Literal

import numpy as np
from numpy.typing import ArrayLike, NDArray

from compare import motional
from compare.circuit import (
    Array,
    Circuit,
    Complex,
    Mobius,
    Network,
    angular,
    array,
    node_ratios,
    over_output_conductance,
    over_transconductance,
    series_load_pf,
    terminal_impedance_ohm,
)
from compare.prefix import FEMTO, MICRO, MILLI, PICO, PPM

DECADES_OF_GROWTH = np.log(1e5)
CHUNK = 8192

Limiter = Literal["transconductance", "output"]
End = Literal["input", "output", "amplifier"]


@dataclass(frozen=True)
class Crystal:
    """A crystal, or many: each field a number or an array, broadcastable with one another and with the circuit.

    Attributes
    ----------
    frequency_mhz : MHz
        Nominal, that is at the rated load.
    load_capacitance_pf : pF
        Rated load; inf for a series-resonant part, whose nominal frequency is fs; NaN where it is not known.
    shunt_capacitance_pf, motional_capacitance_ff : pF, fF
        C0 and C1.
    esr_ohm : ohm
        R1, the motional resistance (not RL).
    """

    frequency_mhz: ArrayLike
    load_capacitance_pf: ArrayLike
    shunt_capacitance_pf: ArrayLike
    motional_capacitance_ff: ArrayLike
    esr_ohm: ArrayLike

    def __iter__(self) -> Iterator[Array]:
        for field in fields(self):
            yield array(getattr(self, field.name))


@dataclass(frozen=True)
class Arm:
    """The motional arm in ohm, rad/s and farad. A pull is (ω - ωs)/ωs, `rated_pull` that of the nominal frequency."""

    r: Array
    omega_s: Array
    c_motional: Array
    c_shunt: Array
    rated_pull: Array

    @classmethod
    def of(cls, crystal: Crystal) -> Arm:
        frequency, load, c_shunt, c_motional, r = crystal
        # Without C1 or rated load the frequency is held at the nominal one: the margin hardly needs them.
        known_c1 = np.nan_to_num(c_motional, nan=0.0) * FEMTO
        ratio = np.nan_to_num(known_c1 / ((c_shunt + load) * PICO), nan=0.0)
        rated_pull = ratio / (1 + np.sqrt(1 + ratio))
        return cls(r, angular(frequency) / (1 + rated_pull), known_c1, c_shunt * PICO, rated_pull)

    def pull_of(self, reactance: NDArray[np.floating[Any]]) -> Array:
        """Where the arm's reactance ω L1 - 1/(ω C1) is the one given."""
        half = reactance * (self.omega_s * self.c_motional / 2)
        squared = half * half
        pull: Array = half + squared / (1 + np.sqrt(1 + squared))
        return pull

    def pole_of(self, seen: Complex) -> Complex:
        """s/ωs of the upper pole when the arm sees the impedance given."""
        half = (self.r + seen) * (self.omega_s * self.c_motional / 2)
        pole: Complex = -half + 1j * np.sqrt(1 - half * half)
        return pole


@dataclass(frozen=True)
class Loop:
    """Circuit and motional arm together, with what they are at the nominal frequency."""

    net: Network
    arm: Arm

    def over_gm(self, omega: Array) -> Mobius:
        """What the arm sees, C0 in, as a function of gm."""
        return over_transconductance(self.net, 1j * omega, self.arm.c_shunt)

    def at_pull(self, pull: Array) -> Array:
        omega: Array = self.arm.omega_s * (1 + pull)
        return omega

    @cached_property
    def nominal(self) -> Mobius:
        return self.over_gm(self.at_pull(self.arm.rated_pull))

    @cached_property
    def seen(self) -> Complex:
        """What the arm sees at the circuit's own gm."""
        return self.nominal(self.net.gm)

    @cached_property
    def towards_pole(self) -> tuple[Complex, Complex, Complex]:
        """s/ωs of the steady state and of the first step from it to the pole, and what the arm sees there."""
        first, second = 1j * (1 + self.arm.rated_pull), self.arm.pole_of(self.seen)
        seen = over_transconductance(self.net, second * self.arm.omega_s, self.arm.c_shunt)(self.net.gm)
        return first, second, seen

    @property
    def pole(self) -> Complex:
        """s/ωs of the closed loop's crystal pole."""
        first, second, seen = self.towards_pole
        third = self.arm.pole_of(seen)
        step = third - second
        rate = np.nan_to_num(step / (second - first), nan=0.0, posinf=0.0, neginf=0.0)
        pole: Complex = third + step * rate / (1 - rate)
        return pole

    @property
    def slope(self) -> Complex:
        """dZ/d(s/ωs) near the pole."""
        first, second, seen = self.towards_pole
        slope: Complex = np.nan_to_num((seen - self.seen) / (second - first), nan=0.0, posinf=0.0, neginf=0.0)
        return slope


@dataclass(frozen=True)
class Steady:
    """The grown oscillation: the network as the amplitude leaves it, the pull, and what the arm sees there."""

    net: Network
    pull: Array
    seen: Complex


@dataclass(frozen=True)
class Swing:
    peak_v: Array
    at: End
    probe_pf: Array


def analyse(  # noqa: PLR0917
    circuit: Circuit,
    crystal: Crystal,
    swing_peak_v: ArrayLike = np.nan,
    swing_at: End = "input",
    limiter: Limiter = "transconductance",
    probe_pf: ArrayLike = 0.0,
    *,
    wanted: Collection[str] | None = None,
) -> dict[str, Array]:
    """All that circuit and crystal settle between them, one array for each of the contract's keys.

    Parameters
    ----------
    circuit, crystal : Circuit, Crystal
        Broadcastable with one another: parts along one axis, corners along another, for example (n, 1) and (1, k).
    swing_peak_v : V
        Peak of the fundamental at the end named; NaN where it is not known.
    swing_at : "input", "output" or "amplifier"
        Which end of the crystal, or the amplifier's output ahead of the series resistor.
    limiter : "transconductance" or "output"
        What limits the amplitude: a transconductance that falls to the critical one, or an output conductance that
        rises until it balances. A real amplifier lies between; where it is not known span both.
    probe_pf : pF
        On the end named while the swing was measured. It counts for the drive level alone.
    wanted : keys
        Those that are asked for; all of them where it is not given.

    Returns
    -------
    dict of arrays, each of the broadcast shape
        NaN where there is none: no transconductance limits where it cannot oscillate, no `startup_ms` where it does
        not start. `greatest_transconductance_ms` is inf where nothing bounds it. Where it cannot oscillate
        `circuit_load_pf` is the lossless Cin Cout/(Cin + Cout) + Cx. Where it could but does not start, the steady
        numbers are those at the critical transconductance, under either limiter.

    References
    ----------
    E. Vittoz, M. Degrauwe, S. Bitz, "High-performance crystal oscillator circuits", IEEE J. Solid-State Circuits 23
    (1988) 774, for the method (locus of Z over gm, steady state at the critical one); cited from memory, derived
    afresh. Neglects harmonics in the steady state: ngspice puts the frequency within 1 ppm and the power within 0.5 %
    of it, but for parts with ω C0 R1 above 0.1 (some ppm, some percent).
    """
    inputs = [*circuit, *crystal, array(swing_peak_v), array(probe_pf)]
    shape = np.broadcast_shapes(*(x.shape for x in inputs))
    outputs: dict[str, Array] = {}
    n = len(fields(Circuit))
    for rows, block in blocks(inputs, shape):
        with np.errstate(all="ignore"):
            swing = Swing(block[-2], swing_at, block[-1])
            found = analyse_block(Circuit(*block[:n]), Crystal(*block[n:-2]), swing, limiter, wanted)
        for key, values in found.items():
            outputs.setdefault(key, np.empty(shape))[rows] = values
    return outputs


def blocks(inputs: list[Array], shape: tuple[int, ...]) -> Iterator[tuple[tuple[slice, ...], list[Array]]]:
    """Pieces of the broadcast inputs, along the first axis, that stay in the processor's cache."""
    if not shape:
        yield (), inputs
        return
    aligned = [x.reshape((1,) * (len(shape) - x.ndim) + x.shape) for x in inputs]
    step = max(1, CHUNK // max(1, int(np.prod(shape[1:]))))
    for start in range(0, shape[0], step):
        rows = slice(start, start + step)
        yield (rows,), [x if x.shape[0] == 1 else x[rows] for x in aligned]


def analyse_block(
    circuit: Circuit, crystal: Crystal, swing: Swing, limiter: Limiter, wanted: Collection[str] | None = None
) -> dict[str, Array]:
    """The keys of `analyse`, or those that are wanted, each along the axes that it changes along."""
    loop = Loop(Network.of(circuit), Arm.of(crystal))
    frequency, rated_load, c0, c1, r1 = crystal
    fs = np.where(np.isnan(rated_load + c1), np.nan, frequency / (1 + loop.arm.rated_pull))

    @cache
    def critical() -> Steady:
        return critical_state(loop)

    @cache
    def steady() -> Steady:
        return critical() if limiter == "transconductance" else output_limited_state(loop, critical())

    @cache
    def load() -> Array:
        cannot_oscillate = np.isnan(critical().net.gm) & ~np.isnan(c0 + r1)
        return np.where(cannot_oscillate, series_load_pf(circuit), steady_load_pf(loop.arm, steady()))

    @cache
    def rl() -> Array:
        return motional.load_resonance_resistance_ohm(r1, c0, load())

    @cache
    def negative() -> NDArray[np.floating[Any]]:
        return terminal_impedance_ohm(circuit, frequency).real

    def driven() -> Steady:
        return steady() if not np.any(swing.probe_pf > 0) else state_with_probe(circuit, loop.arm, swing, limiter)

    keys: dict[str, Callable[[], NDArray[np.floating[Any]]]] = {
        "motional_inductance_mh": lambda: motional.motional_inductance_mh(fs, c1),
        "quality_factor": lambda: motional.quality_factor(fs, c1, r1),
        "series_resonance_mhz": lambda: fs,
        "parallel_resonance_mhz": lambda: motional.parallel_resonance_mhz(fs, c0, c1),
        "circuit_load_pf": load,
        "load_resonance_resistance_ohm": rl,
        "negative_resistance_ohm": negative,
        "margin": lambda: -negative() / rl(),
        "gain_ratio": lambda: loop.net.gm / critical().net.gm,
        "resistance_headroom": lambda: -loop.seen.real / r1,
        "greatest_esr_ohm": lambda: greatest_esr_ohm(loop),
        "critical_transconductance_ms": lambda: critical().net.gm / MILLI,
        "greatest_transconductance_ms": lambda: greatest_transconductance(loop, critical()) / MILLI,
        "load_error_ppm": lambda: load_error_ppm(loop.arm, crystal, steady().pull),
        "trim_ppm_per_pf": lambda: motional.trim_ppm_per_pf(fs, c0, c1, load(), r1),
        "drive_level_uw": lambda: drive_level_uw(loop.arm, driven(), swing),
        "startup_ms": lambda: startup_ms(loop),
    }
    return {key: array(of()) for key, of in keys.items() if wanted is None or key in wanted}


def secant(first: Array, second: Array, third: Array) -> Array:
    """Where x = f(x), from x1, x2 = f(x1) and x3 = f(x2); the limit of the sequence (Aitken)."""
    step, last = second - first, third - second
    # Next to the point where two roots meet the steps do not shrink; there the plain step is the better one.
    rate = np.where(np.abs(last) < np.abs(step) / 2, last / step, 0.0)
    limit: Array = third + last * rate / (1 - rate)
    return limit


def on_axis(
    loop: Loop, nominal: Mobius, at: Callable[[Array], Mobius], root: Callable[[Mobius], Array]
) -> tuple[Array, Array, Mobius]:
    """The conductance `root` that balances the arm in steady oscillation, the pull that goes with it, the map there.

    `nominal` is the map at the rated frequency, `at` gives it at another ω.
    """
    pull1 = loop.arm.pull_of(-nominal(root(nominal)).imag)
    second = at(loop.at_pull(pull1))
    pull2 = loop.arm.pull_of(-second(root(second)).imag)
    pull = secant(loop.arm.rated_pull, pull1, pull2)
    last = at(loop.at_pull(pull))
    return root(last), pull, last


def critical_state(loop: Loop) -> Steady:
    """Steady oscillation at the critical gm; NaN where no gm sustains one.

    Re Z(gm) + R1 is positive at gm = 0 (a passive circuit) and for gm beyond all bounds, so its two roots are both
    positive, or there are none. In the polynomial Im(A conj B) = 0 they are two neighbouring roots near resonance.
    """

    def least_root(at_frequency: Mobius) -> Array:
        p, q, r = at_frequency.balance(loop.arm.r)
        # Roots about to meet may part again as the frequency settles: the discriminant decides only at the end.
        return np.where(q < 0, 2 * r / (-q + np.sqrt(np.maximum(q * q - 4 * p * r, 0))), np.nan)

    gm, pull, seen = on_axis(loop, loop.nominal, loop.over_gm, least_root)
    p, q, r = seen.balance(loop.arm.r)
    gm = np.where(q * q >= 4 * p * r, gm, np.nan)
    return Steady(replace(loop.net, gm=gm), pull + 0 * gm, seen(gm))


def greatest_transconductance(loop: Loop, critical: Steady) -> Array:
    """The greater root (S); inf where nothing lies across the crystal, NaN where there is no critical one."""

    def greatest_root(at_frequency: Mobius) -> Array:
        p, q, r = at_frequency.balance(loop.arm.r)
        return (-q + np.sqrt(np.maximum(q * q - 4 * p * r, 0))) / (2 * p)

    pull = loop.arm.pull_of(-loop.nominal(greatest_root(loop.nominal)).imag)
    # Where p is zero so is the part of Z that would move the frequency at an infinite gm.
    pull = np.where(np.isnan(pull), loop.arm.rated_pull, pull)
    greatest = greatest_root(loop.over_gm(loop.at_pull(pull)))
    return np.where(np.isnan(critical.net.gm), np.nan, greatest)


def output_limited_state(loop: Loop, critical: Steady) -> Steady:
    """Steady oscillation where the output conductance rises until it balances the full gm.

    Where it does not start, the state at the critical gm stands in, which this one tends to as gm tends to critical.
    """

    def positive_root(at_frequency: Mobius) -> Array:
        # r < 0 < p where it starts: exactly one.
        p, q, r = at_frequency.balance(loop.arm.r)
        root = np.sqrt(q * q - 4 * p * r)
        return np.where(q > 0, -2 * r / (q + root), (-q + root) / (2 * p))

    def over_output(omega: Array) -> Mobius:
        return over_output_conductance(loop.net, 1j * omega, loop.arm.c_shunt)

    nominal = over_output(loop.at_pull(loop.arm.rated_pull))
    added, pull, seen = on_axis(loop, nominal, over_output, positive_root)
    starts = (loop.seen.real < -loop.arm.r) & ~np.isnan(added)
    limited = replace(
        loop.net,
        gm=np.where(starts, loop.net.gm, critical.net.gm),
        g_output=loop.net.g_output + np.where(starts, added, 0.0),
    )
    return Steady(limited, np.where(starts, pull, critical.pull), np.where(starts, seen(added), critical.seen))


def state_with_probe(circuit: Circuit, arm: Arm, swing: Swing, limiter: Limiter) -> Steady:
    node = {"input": "input_pf", "output": "output_pf", "amplifier": "amplifier_output_pf"}[swing.at]
    probed = Circuit(**{**vars(circuit), node: array(getattr(circuit, node)) + swing.probe_pf})
    loop = Loop(Network.of(probed), arm)
    critical = critical_state(loop)
    return critical if limiter == "transconductance" else output_limited_state(loop, critical)


def steady_load_pf(arm: Arm, steady: Steady) -> Array:
    """CL = -1/(ω Im Z) in the steady state, Z = 1/(1/Zs - jω C0) with C0 taken out of what the arm sees."""
    omega = arm.omega_s * (1 + steady.pull)
    admittance = 1 / steady.seen - 1j * omega * arm.c_shunt
    load: Array = (admittance.imag + admittance.real**2 / admittance.imag) / omega / PICO
    return load


def load_error_ppm(arm: Arm, crystal: Crystal, pull: Array) -> Array:
    """(f - fr)/fr, fr the crystal's phase-zero resonance with its rated load, R1 counted; fs for a series part."""
    frequency, rated_load, c0, c1, r1 = crystal
    reactance, _ = motional.load_reactance_ohm(frequency, c0, rated_load, r1)
    exact = np.where(np.isinf(rated_load), 0.0, arm.pull_of(reactance))
    rated = np.where(np.isnan(exact), arm.rated_pull, exact)
    known = ~np.isnan(rated_load + c1)
    return np.where(known, (pull - rated) / (1 + rated) / PPM, np.nan)


def drive_level_uw(arm: Arm, steady: Steady, swing: Swing) -> Array:
    """P = |I|² R1 / 2, I the peak motional current: V(b) - V(a) over the arm, which balances Z in the steady state.

    The current into C0 and the across stray is counted: without losses I = ω Cin V (1 + (C0 + Cx)/Cs), Cs = Cin Cout /
    (Cin + Cout).
    """
    output, amplifier = node_ratios(steady.net, 1j * arm.omega_s * (1 + steady.pull))
    current = np.abs((output - 1) / steady.seen) * swing.peak_v
    if swing.at != "input":
        current = current / np.abs(output if swing.at == "output" else amplifier)
    power: Array = current**2 * arm.r / 2 / MICRO
    return power


def amplifier_swing_v(
    circuit: Circuit, crystal: Crystal, swing_peak_v: ArrayLike, swing_at: End, limiter: Limiter = "transconductance"
) -> Array:
    """Peak V at the amplifier's output in the steady state, from the swing known at an end of the crystal.

    What an amplifier that clips keeps when a series resistor is put in. Not cut into blocks: a few thousand at once.
    """
    with np.errstate(all="ignore"):
        loop = Loop(Network.of(circuit), Arm.of(crystal))
        critical = critical_state(loop)
        steady = critical if limiter == "transconductance" else output_limited_state(loop, critical)
        output, amplifier = node_ratios(steady.net, 1j * loop.arm.omega_s * (1 + steady.pull))
        known_at = {"input": np.ones(()), "output": np.abs(output), "amplifier": np.abs(amplifier)}[swing_at]
        swing: Array = array(swing_peak_v) * np.abs(amplifier) / known_at
        return swing


def greatest_esr_ohm(loop: Loop) -> Array:
    """R1 at which the amplitude would neither grow nor fall: -Re Z where the arm balances Im Z."""
    arm = loop.arm
    slope = loop.slope
    balanced = arm.pull_of(-loop.seen.imag)
    # Z at the balancing frequency, from Z and its slope at the nominal one: the bend between them is some 1e-7 of Z.
    resistance = -(loop.seen + slope * 1j * (balanced - arm.rated_pull)).real
    return np.where(resistance > 0, resistance, np.nan)


def startup_ms(loop: Loop) -> Array:
    """Time ln(10⁵)/σ, σ the real part of the closed loop's crystal pole; NaN where nothing grows.

    σ is (-Re Z - R1)/(2 L1) to 0.02 % in most circuits; here it is the pole itself. From noise to full swing takes more
    or fewer decades than five, and the gain falls on the way: an order of magnitude, not a promise.
    """
    growth = loop.pole.real * loop.arm.omega_s
    return np.where(growth > 0, DECADES_OF_GROWTH / growth, np.nan) / MILLI
