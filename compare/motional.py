"""The crystal alone: its motional arm, its resonances, and what load does to them.

The four-element circuit of IEC 60122-1 and IEC 60444 (C0 across R1 - L1 - C1), cited from memory.
"""

from __future__ import annotations

import numpy as np

from compare.circuit import Array
from compare.prefix import FEMTO, MEGA, MILLI, PICO, PPM


def motional_inductance_mh(series_resonance_mhz: Array, motional_capacitance_ff: Array) -> Array:
    """L1 = 1 / (ωs² C1), by the definition of series resonance."""
    omega = 2 * np.pi * series_resonance_mhz * MEGA
    return 1 / (omega**2 * motional_capacitance_ff * FEMTO) / MILLI


def quality_factor(series_resonance_mhz: Array, motional_capacitance_ff: Array, esr_ohm: Array) -> Array:
    """Q = 1 / (ωs C1 R1), by definition."""
    omega = 2 * np.pi * series_resonance_mhz * MEGA
    return 1 / (omega * motional_capacitance_ff * FEMTO * esr_ohm)


def load_resonance_mhz(
    series_resonance_mhz: Array,
    shunt_capacitance_pf: Array,
    motional_capacitance_ff: Array,
    load_capacitance_pf: Array,
) -> Array:
    """Load resonance fL = fs √(1 + C1/(C0 + CL)), exact for R1 = 0; a load of inf gives fs.

    R1 moves it by 0.02 to 2.7 ppm in ordinary parts. The linear form fs (1 + x/2), x = C1/(C0 + CL), is high by x²/8.
    """
    ratio = motional_capacitance_ff * FEMTO / ((shunt_capacitance_pf + load_capacitance_pf) * PICO)
    resonance: Array = series_resonance_mhz * np.sqrt(1 + ratio)
    return resonance


def series_resonance_mhz(
    frequency_mhz: Array,
    shunt_capacitance_pf: Array,
    motional_capacitance_ff: Array,
    load_capacitance_pf: Array,
) -> Array:
    """Series resonance fs = f / √(1 + C1/(C0 + CL)), f the nominal frequency at the rated load; inf: f itself."""
    ratio = motional_capacitance_ff * FEMTO / ((shunt_capacitance_pf + load_capacitance_pf) * PICO)
    resonance: Array = frequency_mhz / np.sqrt(1 + ratio)
    return resonance


def parallel_resonance_mhz(
    series_resonance_mhz: Array, shunt_capacitance_pf: Array, motional_capacitance_ff: Array
) -> Array:
    """Parallel resonance fp = fs √(1 + C1/C0), exact for R1 = 0."""
    return load_resonance_mhz(series_resonance_mhz, shunt_capacitance_pf, motional_capacitance_ff, np.zeros(()))


def load_resonance_resistance_ohm(esr_ohm: Array, shunt_capacitance_pf: Array, circuit_load_pf: Array) -> Array:
    """RL = R1 (1 + C0/CL)², the crystal's resistance at resonance with its load.

    Neglects R1 beside the reactance of C0: low by (ω C0 R1 (1 + C0/CL))², 0.001 to 0.42 % in ordinary parts. The
    four-element circuit, which the test solves whole; the term is IEC 60122-1's.
    """
    resistance: Array = esr_ohm * (1 + shunt_capacitance_pf / circuit_load_pf) ** 2
    return resistance


def load_reactance_ohm(
    frequency_mhz: Array, shunt_capacitance_pf: Array, load_capacitance_pf: Array, esr_ohm: Array
) -> tuple[Array, Array]:
    """The motional arm's reactance X where crystal and load are in phase, Im Z = 1/(ω CL), and dX/dCL in ohm/pF.

    With b = ω C0, y = ω CL, k = b (b + y) the condition is k (R1² + X²) - (y + 2 b) X + 1 = 0. The root near 1/(b + y),
    which it is for R1 = 0, is 2 (1 + k R1²) / ((y + 2 b) + √(y² - (2 k R1)²)); there is none, and NaN, where R1 is so
    great that the phase never passes zero. Derived from the four-element circuit; the test solves that circuit whole.
    """
    omega = 2 * np.pi * frequency_mhz * MEGA
    b, y = omega * shunt_capacitance_pf * PICO, omega * load_capacitance_pf * PICO
    k = b * (b + y)
    root = np.sqrt(y**2 - (2 * k * esr_ohm) ** 2)
    reactance = 2 * (1 + k * esr_ohm**2) / ((y + 2 * b) + root)
    slope = (b * (esr_ohm**2 + reactance**2) - reactance) / root * omega * PICO
    return reactance, slope


def trim_ppm_per_pf(
    series_resonance_mhz: Array,
    shunt_capacitance_pf: Array,
    motional_capacitance_ff: Array,
    load_capacitance_pf: Array,
    esr_ohm: Array,
) -> Array:
    """(1/f) df/dCL = -C1 / (2 (C0 + CL)²) / (1 + C1/(C0 + CL)) times the part that R1 plays in the slope.

    The slope of the phase-zero resonance with the load in series. R1 counts for 1 % in a third overtone with 60 ohm
    and 4 pF at 48 MHz, for 0.1 % in ordinary parts. NaN where R1 is so great that the phase never passes zero.
    """
    total = (shunt_capacitance_pf + load_capacitance_pf) * PICO
    c1 = motional_capacitance_ff * FEMTO
    plain = -c1 / (2 * total**2) / (1 + c1 / total)
    _, slope = load_reactance_ohm(series_resonance_mhz, shunt_capacitance_pf, load_capacitance_pf, esr_ohm)
    _, slope_without_r1 = load_reactance_ohm(
        series_resonance_mhz, shunt_capacitance_pf, load_capacitance_pf, np.zeros(())
    )
    trim: Array = plain * slope / slope_without_r1 * PICO / PPM
    return trim
