"""A crystal as a SPICE subcircuit: C0 across R1 - L1 - C1, with a head that says where each value comes from."""

from __future__ import annotations

import re
from typing import Literal

import numpy as np

from compare import motional
from compare.circuit import array
from compare.columns import HIGH, LOW, MID
from compare.corners import added_resistance_ohm, motional_resistance_ohm
from compare.explain import ends_text, figure, reading_text
from compare.prefix import FEMTO, MILLI, PICO
from compare.reckoning import Reckoning
from compare.sources import c0_words, c1_words

Which = Literal["nominal", "limit"]
TAKEN: dict[Which, str] = {
    "nominal": "what the sheet states as typical, else its limit",
    "limit": "greatest R1 and C0 and least C1: slowest to start, hardest to drive",
}
CAUTION = "An estimate is no measurement, and a simulated margin is no proof: prove it on the real board."
ASCII = str.maketrans(
    {"Ω": "ohm", "µ": "u", "°": "deg ", "²": "^2", "ω": "w", "√": "sqrt", "±": "+/-", "·": " ", "–": "-"}
)


def subcircuit(reckoning: Reckoning, at: int, which: Which = "nominal") -> str:
    """One part's crystal as text that a SPICE simulator reads; nodes `a` and `b` are its two ends.

    Parameters
    ----------
    reckoning, at
        The parts in their circuit, and which of them.
    which
        "nominal", or "limit": the ends that start slowest. L1 follows from the others, so that the crystal has its
        nominal frequency at its rated load.

    Raises
    ------
    ValueError
        The sheet states no ESR, or neither a rated load nor series resonance.
    """
    columns, bench = reckoning.columns.take([at]), reckoning.bench
    offer = columns.offers[0]
    for name, known in (("ESR", columns.esr_ohm[0, MID]), ("rated load", columns.load_pf)):
        if np.isnan(known).any():
            raise ValueError(f"no subcircuit of {offer.part.part_number or offer.sheet.file}: no {name} stated")
    r_end, c1_end = (MID, MID) if which == "nominal" else (HIGH, LOW)
    c0, c1 = columns.shunt_pf[0, r_end], columns.motional_ff[0, c1_end]
    r1 = motional_resistance_ohm(columns, bench, columns.esr_ohm[0, r_end], c0)
    fs = motional.series_resonance_mhz(columns.frequency_mhz, c0, c1, columns.load_pf)
    l1 = motional.motional_inductance_mh(fs, c1)
    fp = motional.parallel_resonance_mhz(fs, c0, c1)
    r1_ohm, l1_h, c1_f, c0_f = (float(array(x)[0]) for x in (r1, l1 * MILLI, c1 * FEMTO, c0 * PICO))
    called = re.sub(r"\W+", "_", offer.part.part_number or "", flags=re.ASCII).strip("_")
    name = f"{called or 'crystal'}_{which}"
    load = "series resonance" if offer.series else f"at {figure(float(columns.load_pf[0]))} pF"
    head = [
        f"{offer.part.part_number or 'Crystal'}, {offer.part.maker or 'maker not stated'}, from {offer.sheet.file}",
        f"{offer.frequency_mhz:.10g} MHz {load}, {offer.mode or 'mode not stated'}; {which}: {TAKEN[which]}",
        f"R1 {ends_text([r1_ohm])} ohm: {_esr_words(reckoning, at)}",
        f"C0 {ends_text([float(c0[0])])} pF: {c0_words(columns, 0)}",
        f"C1 {ends_text([float(c1[0])])} fF: {c1_words(columns, 0)}",
        f"L1 = (1 + C1/(C0 + CL))/(w^2 C1), {reading_text('load_capacitance_pf', offer.load)}",
        f"Series resonance {float(fs[0]):.9f} MHz, parallel resonance {float(fp[0]):.9f} MHz",
        CAUTION,
    ]
    if (columns.motional_estimated | columns.shunt_missing | columns.shunt_loose).any():
        head.insert(-1, "An estimate stands among these values; ask the maker before the result decides anything")
    return "\n".join(
        [
            *(f"* {_ascii(line)}" for line in head),
            f".subckt {name} a b",
            f"R1 a n1 {r1_ohm:.9g}",
            f"L1 n1 n2 {l1_h:.14g}",
            f"C1 n2 b {c1_f:.14g}",
            f"C0 a b {c0_f:.9g}",
            f".ends {name}",
            "",
        ]
    )


def _esr_words(reckoning: Reckoning, at: int) -> str:
    bench, offer = reckoning.bench, reckoning.columns.offers[at]
    said = reading_text("esr_ohm", offer.at[0].esr)
    if bench.crystal.esr_means == "at load":
        said += ', read as RL: R1 = ESR/(1 + C0/CL rated)^2 (crystal.esr_means "at load")'
    if added_resistance_ohm(bench, 0):
        said += "; the series resistor is not in it: put it into the circuit"
    return said


def _ascii(text: str) -> str:
    """Letters that every simulator reads; what has no counterpart becomes a question mark. Always one line."""
    return " ".join(text.translate(ASCII).encode("ascii", "replace").decode().split())
