"""From a maker's single figure for stray, or from two measured frequencies, to the strays that the bench holds."""

from __future__ import annotations

import math
from dataclasses import dataclass

from compare import measured


class ConverterError(ValueError):
    """The figures given fit no circuit; the message says why."""


@dataclass(frozen=True)
class Strays:
    """What the bench takes: stray at each pin and across, pF; `c1_ff` where two frequencies gave it too."""

    at_each_pin_pf: float
    across_pf: float
    c1_ff: float | None = None


def from_single_pf(single_pf: float, input_pf: float, output_pf: float, across_pf: float) -> Strays:
    """A maker's one figure Cs, CL = Cin Cout/(Cin + Cout) + Cs, as equal strays s at both pins and `across_pf` between.

    s from (Cin + s)(Cout + s)/(Cin + Cout + 2 s) = Cin Cout/(Cin + Cout) + Cs - Cx, a quadratic with one root that is
    not below zero; with equal capacitors s = 2 (Cs - Cx).

    Parameters
    ----------
    single_pf, input_pf, output_pf, across_pf : pF
        Cs; what is fitted and inside the IC at each end; Cx, of which Cs is taken to hold that much.

    Raises
    ------
    ConverterError
        Cs below the stray across, or no capacitors.
    """
    rest = single_pf - across_pf
    if rest < 0:
        raise ConverterError(f"{single_pf:g} pF is less than the stray across, {across_pf:g} pF: give that one smaller")
    if input_pf + output_pf <= 0:
        raise ConverterError("the fitted capacitors are not given: the figure cannot be shared between the pins")
    load = input_pf * output_pf / (input_pf + output_pf) + rest
    # s² + (Cin + Cout - 2 load) s + Cin Cout - load (Cin + Cout) = 0
    half = (input_pf + output_pf) / 2 - load
    constant = input_pf * output_pf - load * (input_pf + output_pf)
    return Strays(-half + math.sqrt(half * half - constant), across_pf)


def from_two_frequencies(
    pairs: tuple[tuple[float, float], tuple[float, float]],
    crystal: tuple[float, float],
    across_pf: float,
) -> Strays:
    """Strays and C1 from two pairs of equal capacitors and the two frequency errors.

    Parameters
    ----------
    pairs : (fitted pF at both ends, relative frequency error), twice
    crystal : C0 in pF, rated load in pF
        Of the part that was on the board.
    across_pf : pF
        What of the stray lies between the crystal's ends.

    Raises
    ------
    ConverterError
        The two fit no crystal, or the capacitors are the same.
    """
    shunt_pf, rated_pf = crystal
    if pairs[0][0] == pairs[1][0]:
        raise ConverterError(f"both frequencies were read with {pairs[0][0]:g} pF: it takes two different capacitors")
    stray, c1_ff = measured.from_pairs(pairs, shunt_pf, rated_pf)
    if math.isnan(stray):
        raise ConverterError(
            "no stray and no C1 explain both frequencies: more capacitance must give the lower one, and both must be "
            "of the same board and part"
        )
    across = min(across_pf, stray)
    return Strays(2 * (stray - across), across, c1_ff)
