"""Two ways to the strays: a maker's one figure, and two measured frequencies."""

from __future__ import annotations

import math
from dataclasses import replace
from typing import Any

import streamlit as st

from compare import converters, pieces, typed
from compare import page_session as session
from compare.bench import Bench
from compare.columns import MID
from compare.converters import ConverterError, Strays
from compare.desk import field_of
from compare.figures import frequency_text, number
from compare.page_bearing import chosen_at
from compare.ranking import Ranked

PF, MHZ = "circuit.input_stray_pf", "measured.frequency_mhz"


def single_figure(bench: Bench) -> None:
    """CL = the two capacitors in series + Cs: Cs shared between the pins so that the load is the same."""
    st.markdown(
        "Makers write CL = Cin Cout / (Cin + Cout) + **Cs**. It is shared between the pins so that CL stays the same."
    )
    value = amount("Cs, the maker’s one figure", "convert_single", PF, "5 pF")
    if value is None:
        return
    keys = bench.settings[0].circuit
    inside = keys.internal_at_each_pin_pf
    ends = [(fitted or 0.0) + inside for fitted in (keys.input_capacitor_pf, keys.output_capacitor_pf)]
    try:
        found = converters.from_single_pf(value, ends[0], ends[1], keys.across_stray_pf)
    except ConverterError as fault:
        st.html(pieces.fault_html(str(fault)))
        return
    offer(found, "single", "strays from the maker’s one figure")


def two_frequencies(bench: Bench, contest: Ranked | None) -> None:
    """Two capacitor values, the same at both ends, and the frequency with each."""
    st.markdown("The same board and part with two different pairs of equal capacitors, no probe on the pins.")
    columns, pairs = st.columns(2, gap="small"), []
    for at, column in enumerate(columns):
        with column:
            pf = amount(f"Capacitors {at + 1}, both ends", f"convert_pf_{at}", PF, "12 pF")
            mhz = amount(f"Frequency {at + 1}", f"convert_mhz_{at}", MHZ, "26.000190 MHz")
            if pf is not None and mhz is not None:
                pairs.append((pf, mhz / bench.requirement.frequency_mhz - 1))
    if contest is None or contest.reckoning is None:
        st.markdown("It takes the part’s C0 and rated load: open its sheet first.")
        return
    if len(pairs) < 2:
        return
    at = contest.ordered[chosen_at(contest)]
    crystal = contest.reckoning.columns.take([at])
    known = float(crystal.shunt_pf[0, MID, 0]), float(crystal.load_pf[0])
    if math.isnan(known[1]):
        st.html(pieces.fault_html("the sheet states no rated load, so that the frequencies cannot be placed"))
        return
    try:
        found = converters.from_two_frequencies((pairs[0], pairs[1]), known, bench.settings[0].circuit.across_stray_pf)
    except ConverterError as fault:
        st.html(pieces.fault_html(str(fault)))
        return
    st.markdown(
        f"C1 {number(found.c1_ff)} fF, inferred from measurement at {frequency_text(bench.requirement.frequency_mhz)}."
    )
    offer(found, "pairs", "strays inferred from two measured frequencies", pairs)


def amount(label: str, key: str, like: str, example: str) -> float | None:
    """A figure with its unit, read as the bench's own fields are; None while there is none."""
    text = st.text_input(label, key=key, placeholder=example)
    if not text.strip():
        return None
    said = typed.understand(text, field_of(like), kept=True)
    if said.value is None:
        st.html(pieces.fault_html(said.fault))
    return said.value


def offer(found: Strays, key: str, said: str, pairs: list[tuple[float, float]] | None = None) -> None:
    st.markdown(
        f"Stray A–0 and B–0: **{number(found.at_each_pin_pf, 4)} pF** each, A–B **{number(found.across_pf, 4)} pF**."
    )
    st.button("Use these", key=f"use_{key}", type="primary", on_click=use, args=(found, said, pairs))


def use(found: Strays, said: str, pairs: list[tuple[float, float]] | None) -> None:
    """Put the strays into the bench, and the pairs that they come from."""
    desk = session.desk()
    each, across = (f"{number(value, 4)} pF" for value in (found.at_each_pin_pf, found.across_pf))
    strays = {"circuit.input_stray_pf": each, "circuit.output_stray_pf": each, "circuit.across_stray_pf": across}
    carried: dict[str, Any] = dict(desk.carried)
    if pairs is not None:
        carried["measured"] = {**carried.get("measured", {}), "pairs": [list(pair) for pair in pairs]}
    session.set_desk(replace(desk, typed={**desk.typed, **strays}, carried=carried), said)
