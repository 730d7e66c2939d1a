"""Parts that would help: load capacitors and a series resistor from the E24 series, each with what it comes to."""

from __future__ import annotations

from collections.abc import Callable
from typing import NamedTuple

import numpy as np

from compare.circuit import Array
from compare.explain import figure

# IEC 60063, preferred numbers for resistors and capacitors, tolerance 5 %.
E24 = (
    1.0,
    1.1,
    1.2,
    1.3,
    1.5,
    1.6,
    1.8,
    2.0,
    2.2,
    2.4,
    2.7,
    3.0,
    3.3,
    3.6,
    3.9,
    4.3,
    4.7,
    5.1,
    5.6,
    6.2,
    6.8,
    7.5,
    8.2,
    9.1,
)
CAPACITOR_RANGE_PF = (1.0, 100.0)
RESISTOR_RANGE_OHM = (10.0, 1e6)
# Beyond this the smaller capacitor and its stray decide alone, and common practice keeps the ends alike.
GREATEST_RATIO = 4.0
SHORT_LIST = 48


class Outcome(NamedTuple):
    """What each candidate comes to, each (m,).

    `slack`: how many times over the requirements that the candidate moves are met, the least of them; NaN not known.
    """

    load_error_ppm: Array
    margin: Array
    slack: Array


class Pair(NamedTuple):
    """Input end, output end, and the worst case with them."""

    input_pf: float
    output_pf: float
    load_error_ppm: float
    margin: float
    slack: float


class Resistor(NamedTuple):
    """Series resistor, and the worst case with it."""

    series_resistor_ohm: float
    drive_level_uw: float
    margin: float


class ResistorOutcome(NamedTuple):
    """Worst case of each candidate, each (m,): greatest drive, least margin."""

    drive_level_uw: Array
    margin: Array


def e24_values(low: float, high: float) -> Array:
    """All E24 values from low to high, both included."""
    decades = range(int(np.floor(np.log10(low))), int(np.floor(np.log10(high))) + 1)
    values = np.array([round(step * 10.0**decade, 10) for decade in decades for step in E24])
    return values[(values >= low) & (values <= high)]


def e24_pairs(
    nominal: Callable[[Array, Array], Outcome],
    worst: Callable[[Array, Array], Outcome],
    *,
    most: int = 5,
) -> tuple[list[Pair], str]:
    """Load capacitors that meet the bench, best first, and a sentence where there are none.

    Parameters
    ----------
    nominal, worst : functions of fitted input and output capacitors, pF, both (m,)
        What the circuit comes to with them. `nominal` sees every pair of the series within a factor of four of one
        another (some 1 000), `worst` the 48 best of those: it may run over all corners.
    most : 1
        How many to give.

    Returns
    -------
    pairs, sentence
        In order of the worst load error, the least first; of equal ones the greater margin. Only pairs whose slack is 1
        or more. Without any the list is empty and the sentence names the nearest pair and what it lacks.
    """
    c_in, c_out = candidate_pairs()
    found = nominal(c_in, c_out)
    near = np.abs(np.nan_to_num(found.load_error_ppm, nan=np.inf))
    meets = np.nan_to_num(found.slack, nan=-1.0) >= 1
    # Half of the list by load error, half by slack: with a tight margin the best load may not be the pair that meets.
    by_error = np.lexsort((near, ~meets))[: SHORT_LIST // 2]
    by_slack = np.argsort(-np.nan_to_num(found.slack, nan=-1.0), kind="stable")[: SHORT_LIST // 2]
    short = np.unique(np.concatenate([by_error, by_slack]))
    pairs = outcomes(c_in[short], c_out[short], worst)
    good = [pair for pair in pairs if pair.slack >= 1]
    good.sort(key=lambda pair: (abs(pair.load_error_ppm), -pair.margin))
    return good[:most], "" if good else no_pair(pairs)


def candidate_pairs() -> tuple[Array, Array]:
    values = e24_values(*CAPACITOR_RANGE_PF)
    c_in, c_out = (grid.ravel() for grid in np.meshgrid(values, values, indexing="ij"))
    alike = (c_in <= GREATEST_RATIO * c_out) & (c_out <= GREATEST_RATIO * c_in)
    return c_in[alike], c_out[alike]


def outcomes(c_in: Array, c_out: Array, evaluate: Callable[[Array, Array], Outcome]) -> list[Pair]:
    columns = (c_in, c_out, *evaluate(c_in, c_out))
    return [Pair(*(float(x) for x in row)) for row in zip(*columns, strict=True)]


def no_pair(pairs: list[Pair]) -> str:
    known = [pair for pair in pairs if not np.isnan(pair.slack)]
    if not known:
        return "No pair of load capacitors can be told: a requirement that they move rests on something not known."
    best = max(known, key=lambda pair: pair.slack)
    margin = "a margin that is not known" if np.isnan(best.margin) else f"a margin of {figure(best.margin, 3)}"
    return (
        f"No pair of E24 load capacitors meets the bench: the nearest, {best.input_pf:g} pF at the input and "
        f"{best.output_pf:g} pF at the output, leaves in the worst case a load error of "
        f"{figure(best.load_error_ppm, 3)} ppm and {margin}."
    )


def series_resistor(
    evaluate: Callable[[Array], ResistorOutcome], allowed_drive_uw: float, present_ohm: float = 0.0
) -> tuple[Resistor | None, str]:
    """The least E24 series resistor that brings the drive down to what is allowed, with the margin that it leaves.

    Parameters
    ----------
    evaluate : function of series resistors, ohm, (m,)
        Worst case with each. The swing given for the bench is that without the resistor, so it is to be turned into the
        swing at the amplifier's output (`oscillation.amplifier_swing_v`), and that held: the first-order behaviour of
        an amplifier whose output clips. Into one that limits the current a series resistor does nothing.
    allowed_drive_uw : µW
        Rated drive over the headroom asked.
    present_ohm : ohm
        The one there is; only greater ones are tried.

    Returns
    -------
    resistor, sentence
        None where no value of the series does it, and the sentence says so; else the sentence names the assumption.
    """
    values = e24_values(*RESISTOR_RANGE_OHM)
    values = values[values > present_ohm]
    found = evaluate(values)
    enough = np.nonzero(found.drive_level_uw <= allowed_drive_uw)[0]
    if not enough.size:
        return None, (
            f"No series resistor brings the drive level down to {figure(allowed_drive_uw, 3)} µW in the worst case; "
            "use smaller load capacitors, a lower swing or a part with a higher rated drive."
        )
    first = int(enough[0])
    resistor = Resistor(float(values[first]), float(found.drive_level_uw[first]), float(found.margin[first]))
    return resistor, (
        f"{resistor.series_resistor_ohm:g} ohm brings the drive level to {figure(resistor.drive_level_uw, 3)} µW and "
        f"leaves a margin of {figure(resistor.margin, 3)}, the swing at the amplifier's output taken as unchanged; "
        "measure both again."
    )
