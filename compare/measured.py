"""What the bench shows: load from a frequency, stray and C1 from pairs of capacitors, negative resistance."""

from __future__ import annotations

from collections.abc import Sequence
from typing import NamedTuple

import numpy as np
from numpy.typing import ArrayLike

from compare import motional
from compare.circuit import Array, array
from compare.oscillation import Arm, Crystal
from compare.prefix import FEMTO, PICO, PPM


def load_from_frequency_pf(measured_mhz: ArrayLike, crystal: Crystal, part_ppm: ArrayLike = 0.0) -> Array:
    """CL at which the crystal oscillates at the frequency measured; NaN where no load brings it there.

    Without R1, CL = C1/((f/fs)² - 1) - C0; R1 is counted here just as in the load error, of which this is the inverse.

    Parameters
    ----------
    measured_mhz : MHz
    crystal : Crystal
        The part; its nominal frequency is the one at its rated load.
    part_ppm : ppm
        By how much the part on the bench lies above nominal at its rated load: run over its make tolerance.

    Returns
    -------
    array, pF
        Strays and a probe on the circuit included, C0 not. NaN: the frequency lies outside fs to fp of the part.

    References
    ----------
    ST AN2867 (2025), section 1: 4.02 pF brings its 8 MHz example to 8 MHz.
    """
    frequency, rated_load, c0, _, r1 = crystal
    with np.errstate(all="ignore"):
        arm = Arm.of(crystal)
        reactance, _ = motional.load_reactance_ohm(frequency, c0, rated_load, r1)
        rated = np.where(np.isinf(rated_load), 0.0, arm.pull_of(reactance))
        error = (array(measured_mhz) - frequency) / frequency - array(part_ppm) * PPM
        pull = error + rated + error * rated
        arm_reactance = (pull + pull / (1 + pull)) / (arm.omega_s * arm.c_motional)
        omega = arm.omega_s * (1 + pull)
        crystal_impedance = 1 / (1 / (r1 + 1j * arm_reactance) + 1j * omega * arm.c_shunt)
        load = 1 / (omega * crystal_impedance.imag) / PICO
        return np.where(load > 0, load, np.nan)


def why_no_load(measured_mhz: float, series_resonance_mhz: float, parallel_resonance_mhz: float) -> str | None:
    """A sentence where no load can explain the frequency: it lies outside fs to fp."""
    if series_resonance_mhz < measured_mhz < parallel_resonance_mhz:
        return None
    side, name, limit = (
        ("below", "series resonance fs", series_resonance_mhz)
        if measured_mhz <= series_resonance_mhz
        else ("above", "parallel resonance fp", parallel_resonance_mhz)
    )
    return (
        f"No load can explain the measured {measured_mhz:.9g} MHz: it lies {side} the part's {name}, {limit:.9g} MHz, "
        "where the crystal has no inductive reactance; check the frequency, the part and the C1 taken."
    )


def stray_from_load_pf(load_pf: ArrayLike, input_pf: ArrayLike, output_pf: ArrayLike) -> Array:
    """Stray as one equivalent across the crystal: CL - Cin Cout/(Cin + Cout), Cin and Cout without stray.

    What is meant to be there (fitted, inside the IC, the probe) counts in Cin and Cout; the two ends' strays and the
    one across come out as one. Negative where even no stray would be too much.
    """
    c_in, c_out = array(input_pf), array(output_pf)
    stray: Array = array(load_pf) - c_in * c_out / (c_in + c_out)
    return stray


class StrayAndC1(NamedTuple):
    """What pairs of fitted capacitors and frequency errors come to; NaN where they fit no crystal."""

    stray_pf: float
    motional_capacitance_ff: float


def from_pairs(
    pairs: Sequence[tuple[float, float]], shunt_capacitance_pf: float, rated_load_pf: float, part_ppm: float = 0.0
) -> StrayAndC1:
    """Stray and C1 from (fitted pF at both ends, relative frequency error): f = fs √(1 + C1/(C0 + C/2 + stray)).

    Parameters
    ----------
    pairs : at least two, of different capacitors
        Equal capacitors C at both ends load the crystal with C/2 and the stray as one equivalent across it, exactly so
        where the two ends' strays are alike. Of more than two the least and the greatest capacitor are solved for.
    shunt_capacitance_pf, rated_load_pf : pF
        C0 and the load at which the nominal frequency holds; inf for a series part.
    part_ppm : ppm
        By how much the part lies above nominal at its rated load.

    Returns
    -------
    StrayAndC1
        The equation for the stray is a quadratic; of two that leave C1 above zero, the lesser stray of zero or more.

    Raises
    ------
    ValueError
        Fewer than two different capacitors.
    """
    first, last = min(pairs), max(pairs)
    if first[0] == last[0]:
        raise ValueError(f"pairs must hold two different capacitors, got only {first[0]:g} pF")
    a, b = (shunt_capacitance_pf + pair[0] / 2 for pair in (first, last))
    e1, e2 = (((1 + pair[1]) / (1 + part_ppm * PPM)) ** 2 for pair in (first, last))
    u = 0.0 if np.isinf(rated_load_pf) else 1 / (shunt_capacitance_pf + rated_load_pf)
    # With S the stray: (e1 - 1)(1 - e2 u (b + S))(a + S) = (e2 - 1)(1 - e1 u (a + S))(b + S), C1 eliminated.
    m1, m2 = e1 - 1, e2 - 1
    p = u * (m2 * e1 - m1 * e2)
    q = m1 * (1 - e2 * u * (a + b)) - m2 * (1 - e1 * u * (a + b))
    r = m1 * (1 - e2 * u * b) * a - m2 * (1 - e1 * u * a) * b
    solutions = []
    for stray in np.roots([p, q, r]) if p else np.roots([q, r]):
        total = a + float(stray.real)
        c1 = m1 / (1 / total - e1 * u) if abs(m1) > abs(m2) else m2 / (1 / (total + b - a) - e2 * u)
        if stray.imag == 0 and stray.real >= 0 and c1 > 0:
            solutions.append(StrayAndC1(float(stray.real), float(c1) * PICO / FEMTO))
    return min(solutions, default=StrayAndC1(np.nan, np.nan))


def negative_resistance_ohm(stopping_resistor_ohm: ArrayLike, load_resonance_resistance_ohm: ArrayLike) -> Array:
    """Rn = -(R + RL): a resistor R in series with the crystal that just stops it takes up what RL leaves."""
    resistance: Array = -(array(stopping_resistor_ohm) + array(load_resonance_resistance_ohm))
    return resistance


def margin(stopping_resistor_ohm: ArrayLike, load_resonance_resistance_ohm: ArrayLike) -> Array:
    """(R + RL)/RL; some notes print R/RL or (R + ESR)/ESR instead, so a published mark must say which it means."""
    rl = array(load_resonance_resistance_ohm)
    ratio: Array = (array(stopping_resistor_ohm) + rl) / rl
    return ratio
