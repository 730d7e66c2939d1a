"""The circuit as the crystal sees it: a three-point (Pierce) oscillator around one inverting transconductor.

Nodes: `a` amplifier input and the crystal's input end, `b` the crystal's output end, `o` amplifier output.

    Cin  a-0    Cout b-0    Cp o-0    Cx a-b
    G    o-0    the current gm V(a) out of o
    Ro   o-0    Rd   o-b    Rf o-a
    crystal a-b: C0 across R1 - L1 - C1

Everything follows from Kirchhoff's current law. With gf = 1/Rf, yo = 1/Ro + s Cp and D = 1 + Rd (yo + gf) the
admittance between a and b is s Cx + N/S, where

    S = s (Cin + Cout) D + (gm + yo)(1 + Rd gf)
    N = s² Cin Cout D + s Cin (yo + gf) + s Cout gf (1 + Rd (yo + gm)) + gf (yo + gm)

Both are linear in gm, and in 1/Ro as well: with frequency held, the impedance is a Möbius map of either (`Mobius`).
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, fields
from typing import Any

import numpy as np
from numpy.typing import ArrayLike, NDArray

from compare.prefix import KILO, MEGA, MILLI, PICO

Array = NDArray[np.float64]
Complex = NDArray[np.complexfloating[Any, Any]]


@dataclass(frozen=True)
class Circuit:
    """An oscillator circuit, or many: each field a number or an array, all broadcastable against one another.

    Totals at each node: what is fitted, stray and inside the IC, added up.

    Attributes
    ----------
    input_pf, output_pf : pF
        From the crystal's input and output end to ground.
    across_pf : pF
        Between the crystal's two ends, its own C0 not counted.
    amplifier_output_pf : pF
        At the amplifier's output, ahead of the series resistor.
    transconductance_ms : mS
        NaN where it is not known.
    series_resistor_ohm : ohm
        Between amplifier output and the crystal's output end; 0 where there is none.
    feedback_resistor_kohm, output_resistance_kohm : kilohm
        inf where there is none.
    """

    input_pf: ArrayLike
    output_pf: ArrayLike
    across_pf: ArrayLike = 0.0
    amplifier_output_pf: ArrayLike = 0.0
    transconductance_ms: ArrayLike = np.nan
    series_resistor_ohm: ArrayLike = 0.0
    feedback_resistor_kohm: ArrayLike = np.inf
    output_resistance_kohm: ArrayLike = np.inf

    def __iter__(self) -> Iterator[Array]:
        for field in fields(self):
            yield array(getattr(self, field.name))


@dataclass(frozen=True)
class Network:
    """The same in ohm, siemens and farad; what the formulas work with."""

    c_in: Array
    c_out: Array
    c_across: Array
    c_amp: Array
    gm: Array
    r_series: Array
    g_feedback: Array
    g_output: Array

    @classmethod
    def of(cls, circuit: Circuit) -> Network:
        c_in, c_out, c_across, c_amp, gm, r_series, r_feedback, r_output = circuit
        g_feedback, g_output = 1 / (r_feedback * KILO), 1 / (r_output * KILO)
        return cls(c_in * PICO, c_out * PICO, c_across * PICO, c_amp * PICO, gm * MILLI, r_series, g_feedback, g_output)


@dataclass(frozen=True)
class Mobius:
    """Z(g) = (a + g b) / (c + g d): an impedance with one conductance g of the circuit free, frequency held."""

    a: Complex
    b: Complex
    c: Complex
    d: Complex

    def __call__(self, conductance: Array) -> Complex:
        impedance: Complex = (self.a + conductance * self.b) / (self.c + conductance * self.d)
        return impedance

    def balance(self, resistance_ohm: Array) -> tuple[Array, Array, Array]:
        """Coefficients p, q, r of p g² + q g + r, which has the sign of Re Z(g) + R."""
        c, d = self.c, self.d
        # Re Z + R = Re((a + g b + R (c + g d)) conj(c + g d)) / |c + g d|²
        a, b = self.a + resistance_ohm * c, self.b + resistance_ohm * d
        return real_product(b, d), real_product(a, d) + real_product(b, c), real_product(a, c)

    def least_real(self) -> Array:
        """The conductance at which Re Z(g) is least; NaN where it has no turning point."""
        p1, q1, r1 = self.balance(np.zeros(()))
        p2, q2, r2 = real_product(self.d, self.d), 2 * real_product(self.c, self.d), real_product(self.c, self.c)
        # The ratio of the two quadratics turns where u g² + 2 v g + w is zero.
        u, v, w = p1 * q2 - p2 * q1, p1 * r2 - p2 * r1, q1 * r2 - q2 * r1
        least: Array = (-v + np.sqrt(v**2 - u * w)) / u
        return least


def array(values: ArrayLike) -> Array:
    return np.asarray(values, dtype=np.float64)


def real_product(x: Complex, y: Complex) -> Array:
    """Re(x conj y)."""
    product: Array = x.real * y.real + x.imag * y.imag
    return product


def angular(frequency_mhz: ArrayLike) -> Array:
    """ω = 2 π f, in rad/s."""
    omega: Array = 2 * np.pi * MEGA * array(frequency_mhz)
    return omega


def polynomial(s: Complex, *coefficients: Array) -> Complex:
    """Sum of coefficients[n] s^n; leading ones that are zero throughout cost nothing."""
    at = len(coefficients) - 1
    while at > 0 and not np.any(coefficients[at]):
        at -= 1
    value: Complex = coefficients[at] + 0j
    for coefficient in coefficients[:at][::-1]:
        value = value * s + coefficient
    return value


def over_transconductance(net: Network, s: Complex, c_shunt: Array) -> Mobius:
    """Impedance between the crystal's ends as a function of gm (S), at the complex frequency s (rad/s).

    `c_shunt` (F) is added across the ends: the crystal's C0 where the motional arm's view is wanted, else zero. S and N
    of the module docstring, ordered by powers of s, so that what depends on the circuit alone is worked out once.
    """
    c_in, c_out, c_amp = net.c_in, net.c_out, net.c_amp
    rd, gf, go = net.r_series, net.g_feedback, net.g_output
    d_zero, d_one, s_one = 1 + rd * (go + gf), rd * c_amp, 1 + rd * gf
    s_zero = polynomial(s, go * s_one, (c_in + c_out) * d_zero + c_amp * s_one, (c_in + c_out) * d_one)
    n_zero = polynomial(
        s,
        gf * go,
        c_in * (go + gf) + c_out * gf * (1 + rd * go) + c_amp * gf,
        c_in * (c_out * d_zero + c_amp) + c_out * gf * d_one,
        c_in * c_out * d_one,
    )
    n_one = polynomial(s, gf, gf * rd * c_out)
    s_across = s * (net.c_across + c_shunt)
    return Mobius(s_zero, s_one + 0j, s_across * s_zero + n_zero, s_across * s_one + n_one)


def over_output_conductance(net: Network, s: Complex, c_shunt: Array) -> Mobius:
    """Impedance between the crystal's ends as a function of conductance added at the amplifier's output (S)."""
    before = over_transconductance(net, s, c_shunt)
    rd, gf = net.r_series, net.g_feedback
    s_in, s_out, s_across = s * net.c_in, s * net.c_out, s * (net.c_across + c_shunt)
    s_one = 1 + rd * (gf + s_in + s_out)
    n_one = (s_in + gf) * (1 + rd * s_out)
    return Mobius(before.a + net.gm * before.b, s_one, before.c + net.gm * before.d, s_across * s_one + n_one)


def node_ratios(net: Network, s: Complex) -> tuple[Complex, Complex]:
    """V(b)/V(a) and V(o)/V(a), with the crystal's current the only thing that is put in."""
    rd, gf = net.r_series, net.g_feedback
    yo: Complex = net.g_output + s * net.c_amp
    d = 1 + rd * (yo + gf)
    output: Complex = -(s * net.c_in * d + net.gm * (1 + rd * gf) + yo * rd * gf) / (s * net.c_out * d + yo)
    return output, (output + rd * (gf - net.gm)) / d


def terminal_impedance_ohm(
    circuit: Circuit, frequency_mhz: ArrayLike, shunt_capacitance_pf: ArrayLike = 0.0
) -> Complex:
    """Z = 1/(jω Cx + N/S): impedance of the active circuit between the crystal's ends, crystal taken out.

    Parameters
    ----------
    circuit : Circuit
        Any broadcastable shape.
    frequency_mhz : MHz
        Broadcastable against it.
    shunt_capacitance_pf : pF
        C0, where the impedance is wanted that the R1-L1-C1 arm sees; 0 (the rule) leaves it with the crystal.

    Returns
    -------
    complex array, ohm
        Real part: the negative resistance. Imaginary part: -1/(ω CL) at small signal.

    References
    ----------
    Kirchhoff's current law at three nodes (module docstring), solved by hand; the tests solve the nodal matrix. Nothing
    of that circuit is neglected, but a real amplifier has delay and a capacitance from output to input besides.
    """
    with np.errstate(all="ignore"):
        net = Network.of(circuit)
        s = 1j * angular(frequency_mhz)
        return over_transconductance(net, s, array(shunt_capacitance_pf) * PICO)(net.gm)


def series_load_pf(circuit: Circuit) -> Array:
    """CL = Cin Cout / (Cin + Cout) + Cx: the load without the losses.

    Capacitance at the amplifier's output counts with Cout where no series resistor parts them, and is left out
    otherwise. The steady load of the whole circuit is 0.9 % away without losses, up to half of it with heavy losses
    at 32 kHz: `oscillation.analyse` gives the true one.
    """
    c_in, c_out, c_across, c_amp, _, r_series, _, _ = circuit
    at_output = c_out + np.where(r_series == 0, c_amp, 0.0)
    load: Array = c_in * at_output / (c_in + at_output) + c_across
    return load


def turning_transconductance_ms(
    circuit: Circuit, frequency_mhz: ArrayLike, shunt_capacitance_pf: ArrayLike = 0.0
) -> Array:
    """The gm at which -Re Z is greatest: beyond it more gain drives the crystal less.

    Without losses gm = ω (Cin + Cout + Cin Cout / C3), C3 = Cx + C0 (Vittoz, Degrauwe, Bitz, IEEE J. Solid-State
    Circuits 23 (1988) 774, from memory); here with all losses, from the turning point of the Möbius map. inf where
    nothing lies across the crystal. A range of gm that spans it has its greatest resistance headroom inside.
    """
    with np.errstate(all="ignore"):
        s = 1j * angular(frequency_mhz)
        least = over_transconductance(Network.of(circuit), s, array(shunt_capacitance_pf) * PICO).least_real()
        return np.where(np.isnan(least), np.inf, least / MILLI)
