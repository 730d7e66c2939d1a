"""The three ways an IC's sheet rates its oscillator without giving a transconductance, each turned into the least one.

All three are lossless forms for two equal capacitors; with the bench's losses counted besides they err to the safe side
(from a negative resistance: 0.69 to 0.97 of the true transconductance in nine circuits). The greatest transconductance
is then not known.
"""

from __future__ import annotations

from collections.abc import Sequence
from typing import Literal

import numpy as np
from numpy.typing import ArrayLike

from compare.circuit import Array, angular, array
from compare.prefix import MILLI, PICO

EsrMeans = Literal["motional", "at load"]


def from_critical_ms(critical_transconductance_max_ms: ArrayLike, factor_inside: ArrayLike = 1.0) -> Array:
    """Least gm = F gm_crit: the greatest critical gm that the IC allows, times the safety factor in the figure.

    ST AN2867 (2025), Gm_crit_max = gm / 5, turned round.
    """
    transconductance: Array = array(factor_inside) * array(critical_transconductance_max_ms)
    return transconductance


def from_esr_ms(
    esr_max_ohm: ArrayLike,
    frequency_mhz: ArrayLike,
    load_pf: ArrayLike,
    shunt_capacitance_pf: ArrayLike,
    factor_inside: ArrayLike = 1.0,
    *,
    esr_means: EsrMeans = "motional",
) -> Array:
    """Least gm = F 4 R ω² (CL + C0)² where the limit means R1, F 4 R ω² CL² where it means RL = R1 (1 + C0/CL)².

    The critical gm of a lossless circuit with equal capacitors (ST AN2867 (2025), section 3.4), at the greatest ESR.

    Parameters
    ----------
    esr_max_ohm, frequency_mhz, load_pf, shunt_capacitance_pf : ohm, MHz, pF, pF
        The limit, and the load and C0 at which the sheet means it. C0 is not used for "at load".
    factor_inside : 1
        Safety factor that the printed limit already includes; 1 where it includes none. It counts once.
    """
    total = array(load_pf) + (array(shunt_capacitance_pf) if esr_means == "motional" else 0.0)
    siemens = 4 * array(esr_max_ohm) * angular(frequency_mhz) ** 2 * (total * PICO) ** 2
    return array(factor_inside) * siemens / MILLI


def from_negative_resistance_ms(
    negative_resistance_ohm: ArrayLike, frequency_mhz: ArrayLike, load_pf: ArrayLike, factor_inside: ArrayLike = 1.0
) -> Array:
    """Least gm = F |R| ω² (2 CL)²: Rn = -gm/(ω² Cin Cout) with Cin = Cout = 2 CL, nothing across the crystal."""
    siemens = np.abs(array(negative_resistance_ohm)) * angular(frequency_mhz) ** 2 * (2 * array(load_pf) * PICO) ** 2
    return array(factor_inside) * siemens / MILLI


def list_row(
    rows: Sequence[tuple[float, float, float, float]], frequency_mhz: float, circuit_load_pf: float
) -> tuple[float, float, float, float] | None:
    """The row [from MHz, to MHz, load pF, greatest ESR] that holds here; None where none does.

    Of those that hold the frequency, the one with the least load not below the circuit's: a greater load is the harder
    case, so its limit is safe. Among equal loads the lesser ESR.
    """
    held = [row for row in rows if row[0] <= frequency_mhz <= row[1] and row[2] >= circuit_load_pf]
    return min(held, key=lambda row: (row[2], row[3]), default=None)
