"""The crystal alone: its motional arm, its resonances, what load does to them, and estimates where its sheet is silent.

The four-element circuit of IEC 60122-1 and IEC 60444 (C0 across R1 - L1 - C1), cited from memory. Where C1 is not
stated it is had, in this order, from L1, C0/C1, pulling sensitivity, Q with ESR, or an estimate (`estimates.toml`).
"""

from __future__ import annotations

import re
import tomllib
from functools import cache
from importlib.resources import files
from typing import Any, NamedTuple

import numpy as np

from compare.circuit import Array
from compare.prefix import FEMTO, MEGA, MILLI, PICO, PPM

TUNING_FORK = "tuning fork"
# Between the highest fork and the lowest plate in common use there is nothing.
HIGHEST_FORK_MHZ = 0.2


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
    with np.errstate(invalid="ignore"):
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


def motional_capacitance_from_inductance_ff(
    motional_inductance_mh: Array, frequency_mhz: Array, shunt_capacitance_pf: Array, load_capacitance_pf: Array
) -> Array:
    """C1 = 1 / (ω² L1 - 1/(C0 + CL)), ω at the rated load: L1 and fs of the four-element circuit with R1 = 0.

    A load of inf (series resonance) gives 1/(ω² L1). L1 printed to three digits gives C1 to no more.
    """
    omega = 2 * np.pi * frequency_mhz * MEGA
    total = (shunt_capacitance_pf + load_capacitance_pf) * PICO
    return 1 / (omega**2 * motional_inductance_mh * MILLI - 1 / total) / FEMTO


def motional_capacitance_from_ratio_ff(capacitance_ratio: Array, shunt_capacitance_pf: Array) -> Array:
    """C1 = C0 / (C0/C1)."""
    return shunt_capacitance_pf * PICO / capacitance_ratio / FEMTO


def motional_capacitance_from_pulling_ff(
    pulling_sensitivity_ppm_per_pf: Array, shunt_capacitance_pf: Array, load_capacitance_pf: Array
) -> Array:
    """C1 = 2 S Ct² / (1 - 2 S Ct), Ct = C0 + CL: the slope of fL at the rated load turned round, R1 neglected."""
    total = (shunt_capacitance_pf + load_capacitance_pf) * PICO
    slope = np.abs(pulling_sensitivity_ppm_per_pf) * PPM / PICO
    c1: Array = 2 * slope * total**2 / (1 - 2 * slope * total) / FEMTO
    return c1


def motional_capacitance_from_quality_ff(
    quality_factor: Array, esr_ohm: Array, frequency_mhz: Array, shunt_capacitance_pf: Array, load_capacitance_pf: Array
) -> Array:
    """C1 = 1 / (ωs Q R1), with fs = f / √(1 + C1/(C0 + CL)) solved for C1.

    A limit on R1 beside a typical Q gives a C1 that is too low by as much as the limit lies above the typical R1.
    """
    first = 1 / (2 * np.pi * frequency_mhz * MEGA * quality_factor * esr_ohm)
    half = first**2 / (2 * (shunt_capacitance_pf + load_capacitance_pf) * PICO)
    c1: Array = (half + np.sqrt(half**2 + first**2)) / FEMTO
    return c1


def motional_resistance_ohm(esr_at_load_ohm: Array, shunt_capacitance_pf: Array, load_capacitance_pf: Array) -> Array:
    """R1 = ESR / (1 + C0/CL)², where a sheet calls ESR what the crystal shows at its rated load; inf: ESR itself."""
    resistance: Array = esr_at_load_ohm / (1 + shunt_capacitance_pf / load_capacitance_pf) ** 2
    return resistance


class Estimate(NamedTuple):
    """What a value is likely to be: an interval meant to hold nine crystals in ten, and what it rests on."""

    low: Array
    mid: Array
    high: Array
    basis: str


@cache
def knowledge() -> dict[str, Any]:
    return tomllib.loads((files("compare") / "estimates.toml").read_text(encoding="utf-8"))


def cut_at(cut: str | None, frequency_mhz: float) -> str:
    """The cut, or what goes without saying at that frequency: forks in the kilohertz, AT above."""
    if cut is not None and cut in knowledge()["capacitance_ratio"]:
        return cut
    return TUNING_FORK if frequency_mhz < HIGHEST_FORK_MHZ else "AT"


def package_length_mm(package: str | None) -> float | None:
    """The longer side of a package as its text gives it (3225, 3.2 x 2.5 mm, HC-49/S); None where it does not."""
    if not package:
        return None
    for name, length in knowledge()["package_length_mm"].items():
        if name.casefold() in package.casefold():
            return float(length)
    if sides := re.search(r"(\d+(?:[.,]\d+)?)\s*(?:mm)?\s*[x×*]\s*(\d+(?:[.,]\d+)?)", package, re.IGNORECASE):
        return max(float(side.replace(",", ".")) for side in sides.groups())
    if code := re.search(r"(?<!\d)(\d\d)(\d\d)(?!\d)", package):
        return max(int(side) for side in code.groups()) / 10
    return None


def package_row(package: str | None) -> dict[str, Any]:
    length = package_length_mm(package)
    if length is None:
        unknown: dict[str, Any] = knowledge()["package_unknown"]
        return unknown
    row: dict[str, Any] = next(row for row in knowledge()["package"] if length <= row["up_to_mm"])
    return row


def estimate_shunt_capacitance_pf(
    cut: str | None, frequency_mhz: float, package: str | None = None, limit_pf: float = np.inf
) -> Estimate:
    """C0 by cut and package; nothing above `limit_pf`, the greatest that the sheet allows, where it gives one."""
    if cut_at(cut, frequency_mhz) == TUNING_FORK:
        row = knowledge()["tuning_fork"]
        values, basis = row["shunt_capacitance_pf"], f"usual for a tuning fork: {row['shunt_source']}"
    else:
        row = package_row(package)
        values = row["shunt_capacitance_pf"]
        basis = f"usual for {row['called']}: {knowledge()['package_source']['shunt']}"
    low, mid, high = (np.asarray(min(value, limit_pf)) for value in values)
    return Estimate(low, mid, high, basis)


def estimate_motional_capacitance_ff(
    cut: str | None,
    overtone: int,
    frequency_mhz: float,
    package: str | None = None,
    *,
    shunt_capacitance_pf: tuple[Array, Array, Array] | None = None,
    limit_pf: Array | float = np.inf,
) -> Estimate:
    """C1 from C0 and the usual C0/C1 where C0 is known, else from cut and package.

    Parameters
    ----------
    cut, overtone, frequency_mhz, package
        Of one part, or of many that are alike in these; overtone 1 is the fundamental.
    shunt_capacitance_pf : pF, or None
        Low, mid and high of a C0 that is known (a typical value, a range). None where only a loose limit is known.
    limit_pf : pF
        That limit. It cannot raise C1, only cap it at `limit_pf` over the least C0/C1 of the cut.
    """
    named = cut_at(cut, frequency_mhz)
    ratio = knowledge()["capacitance_ratio"][named]
    order = float(overtone**2)
    taken = (
        f"C0/C1 of {ratio['low'] * order:g} to {ratio['high'] * order:g} for {kind(named, overtone)}: {ratio['source']}"
    )
    if shunt_capacitance_pf is not None:
        low, mid, high = (np.asarray(c0, dtype=np.float64) * PICO / FEMTO / order for c0 in shunt_capacitance_pf)
        return Estimate(low / ratio["high"], mid / ratio["mid"], high / ratio["low"], f"from C0 and a {taken}")
    cap = np.asarray(limit_pf, dtype=np.float64) * PICO / FEMTO / order
    if named == "AT":
        row = package_row(package)
        low, mid, high = (value / order for value in row["motional_capacitance_ff"])
        basis = f"usual for {kind(named, overtone)} in {row['called']}: {knowledge()['package_source']['motional']}"
    elif named == TUNING_FORK:
        row = knowledge()["tuning_fork"]
        low, mid, high = row["motional_capacitance_ff"]
        basis = f"usual for a tuning fork: {row['motional_source']}"
    else:
        c0 = package_row(package)["shunt_capacitance_pf"]
        low, mid, high = (c0[i] * PICO / FEMTO / order / ratio[name] for i, name in enumerate(("high", "mid", "low")))
        basis = f"from a C0 of {c0[0]:g} to {c0[2]:g} pF and a {taken}"
    at_most = np.minimum(high, cap / ratio["floor"])
    return Estimate(np.minimum(low, cap / ratio["high"]), np.minimum(mid, cap / ratio["mid"]), at_most, basis)


def kind(cut: str, overtone: int) -> str:
    if cut == TUNING_FORK:
        return "a tuning fork"
    return f"{'an' if cut == 'AT' else 'a'} {cut} {'fundamental' if overtone == 1 else f'overtone {overtone}'}"


def estimate_quality_factor() -> Estimate:
    """Q where neither Q nor C1 with ESR is stated."""
    return listed("quality_factor")


def estimate_parabolic_coefficient_ppm_per_c2() -> Estimate:
    """The k of a tuning fork's df/f = k (T - T0)²."""
    return listed("parabolic_coefficient_ppm_per_c2")


def estimate_turnover_temperature_c() -> Estimate:
    """The T0 of a tuning fork's df/f = k (T - T0)²."""
    return listed("turnover_temperature_c")


def estimate_first_year_ageing_ppm() -> Estimate:
    """Change of frequency in the first year."""
    return listed("first_year_ageing_ppm")


def listed(name: str) -> Estimate:
    row = knowledge()[name]
    low, mid, high = (np.asarray(row[end], dtype=np.float64) for end in ("low", "mid", "high"))
    return Estimate(low, mid, high, row["source"])
