"""What the Circuit view says of rated loads, gm settings and load capacitors, as tables and sentences."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Any

from compare.answers import times
from compare.bearing import Bearing, Setting, advised, why_no_pair
from compare.bench import Bench, uses
from compare.figures import CLOCK_BELOW_MHZ, SECONDS_A_DAY_PER_PPM, number, scale, signed, spread, with_unit
from compare.typed import Field, understand

MORE_ROOM = 1.02
ENOUGH = "No pair of E24 load capacitors gives this part more room than those fitted."

Table = tuple[list[str], list[list[str]]]


def stay_below(row: Bearing) -> str:
    """`10 of 13`: of the parts that offer this rated load, those whose ESR the circuit bears."""
    if not row.offering:
        return "none offers it"
    return "not known" if row.allowed_ohm is None else f"{row.below} of {row.offering}"


def bearing_table(rows: Sequence[Bearing], bench: Bench) -> Table:
    """Rated load, capacitors for it, ESR just borne and with the margin, parts read that stay below."""
    factor, unit = scale("Ω", *(row.allowed_ohm for row in rows if row.allowed_ohm is not None))

    def ohm(value: float | None) -> str:
        return "not known" if value is None else number(value * factor)

    heads = [
        "Rated load, pF",
        "Fitted A–0 + B–0, pF",
        f"Just oscillates, {unit}",
        f"With margin {number(bench.requirement.margin)}, {unit}",
        "Parts that stay below",
    ]
    cells = [
        [
            ("▮ " if row.fitted else "") + number(row.load_pf, 4),
            "cannot be met" if row.pair is None else f"{number(row.pair.input_pf)} + {number(row.pair.output_pf)}",
            ohm(row.greatest_ohm),
            ohm(row.allowed_ohm),
            stay_below(row),
        ]
        for row in rows
    ]
    return heads, cells


def bearing_note(c0_pf: float, *, parts: bool) -> str:
    """What the table was reckoned with."""
    whose = "the median of the parts read, each of which is judged with its own" if parts else "more than most have"
    return f"Least gm, worst corner of all tolerances and conditions; C0 {number(c0_pf)} pF, {whose}. ▮ fitted now."


def cannot_be_met(rows: Sequence[Bearing], bench: Bench) -> list[str]:
    """A sentence for each load that parts offer and no pair brings."""
    return [why_no_pair(bench, row.load_pf) for row in rows if row.pair is None and row.offering]


def settings_of(text: str, gm: Field) -> tuple[list[float], str]:
    """The gm settings of an IC as typed, `3.5, 5.5, 8 µS`, in mS; and what is wrong with them, else "".

    A unit at the end holds for all that have none.
    """
    parts = [part.strip() for part in text.replace(";", " ").replace(", ", " ").replace("/", " ").split("  ")]
    words = " ".join(parts).split()
    unit = words[-1] if words and not any(c.isdigit() for c in words[-1]) else ""
    figures = words[:-1] if unit else words
    found = []
    for figure in figures:
        said = understand(figure if any(c.isalpha() for c in figure) else f"{figure} {unit}".strip(), gm, kept=True)
        if said.value is None or said.value <= 0:
            return [], f"{figure}: {said.fault or 'must be above 0'}; write them like 3.5 5.5 8 11.5 µS"
        found.append(said.value)
    return sorted(set(found)), ""


def settings_table(rows: Sequence[Sequence[Setting]]) -> Table:
    """A row for each rated load, a column for each gm: least margin and ppm of the part that does best there."""
    gains = [one.gm_ms for one in rows[0]] if rows else []
    factor, unit = scale("mS", *gains)
    heads = ["Rated load, pF", "Fitted, pF", *(f"{number(gain * factor)} {unit}" for gain in gains), "Best part"]
    cells = []
    for row in rows:
        best = advised(row)
        pair = row[0].pair
        fitted = f"{number(pair.input_pf)} + {number(pair.output_pf)}"
        said = [("▮ " if one is best else "") + _cell(one) for one in row]
        cells.append([number(row[0].load_pf, 4), fitted, *said, (best or row[-1]).part])
    return heads, cells


def _cell(one: Setting) -> str:
    mark = "▲" if one.meets else "▼"
    margin = "margin not known" if one.margin is None else number(one.margin)
    if one.low_ppm is None or one.high_ppm is None:
        return f"{mark} {margin}"
    return f"{mark} {margin}; {signed(round(one.low_ppm))}…{signed(round(one.high_ppm))} ppm"


def settings_sentence(rows: Sequence[Sequence[Setting]], bench: Bench) -> str:
    """Which setting to take, in a sentence; below 1 MHz with the error in seconds a day."""
    found = [one for row in rows if (one := advised(row)) is not None]
    if not found:
        return "No setting meets what is asked with any rated load that the parts offer."
    best = min(found, key=lambda one: (one.gm_ms, one.load_pf))
    factor, unit = scale("mS", best.gm_ms)
    daily = ""
    if bench.requirement.frequency_mhz < CLOCK_BELOW_MHZ and best.low_ppm is not None and best.high_ppm is not None:
        ends = [signed(end * SECONDS_A_DAY_PER_PPM) for end in (best.low_ppm, best.high_ppm)]
        daily = f", {ends[0]} to {ends[1]} s a day"
    return (
        f"Least current: {number(best.gm_ms * factor)} {unit} with a rated load of {number(best.load_pf, 4)} pF "
        f"({best.part}), margin {number(best.margin)}{daily}."
    )


def advice_rows(review: Mapping[str, Any]) -> list[tuple[str, dict[str, str], str]]:
    """For each thing that would help: the sentence, the bench's fields it would set, and the name of its trial."""
    rows = []
    for one in review.get("advice", ()):
        margin = number(one["margin"])
        if "values_pf" in one:
            first, second = (number(value) for value in one["values_pf"])
            error = one["load_error_ppm"]
            off = "not known" if error is None else with_unit(number(abs(error)), "ppm")
            said = f"{first} pF from A and {second} pF from B to ground: load error at most {off}, margin {margin}"
            if one.get("times_over") is not None:
                said += f", tightest {times(one['times_over'])} over"
            sets = {"circuit.input_capacitor_pf": f"{first} pF", "circuit.output_capacitor_pf": f"{second} pF"}
            rows.append((said, sets, f"{first} pF from A and {second} pF from B to ground"))
        else:
            ohm, drive = number(one["series_resistor_ohm"]), number(one["drive_level_uw"])
            said = f"A series resistor of {ohm} Ω: drive at most {drive} µW, margin {margin}"
            rows.append((said, {"circuit.series_resistor_ohm": f"{ohm} Ω"}, f"a series resistor of {ohm} Ω"))
    return rows


def helpful(review: Mapping[str, Any]) -> Mapping[str, Any]:
    """The review with only that advice which gives more room than what is fitted, the most room first.

    Pairs are in the order of their load error; one with less of it may overdrive the crystal all the same.
    """
    fitted = min((slack for slack in review["slack"].values() if slack is not None), default=0.0)
    wanted = MORE_ROOM * fitted if review["verdict"] == "meets" else 0.0
    every = review.get("advice", ())
    more = [one for one in every if one.get("times_over") is None or one["times_over"] > wanted]
    more.sort(key=lambda one: -(one.get("times_over") or 0.0))
    messages = review.get("advice_messages", ())
    return {"advice": more, "advice_messages": messages if more or not every else [*messages, ENOUGH]}


def use_sentence(bench: Bench | None, ident: str) -> str:
    """What a use allows, what its limit must hold, and where it is from; "" for none."""
    use = uses().get(ident)
    if use is None:
        return ""
    limit = "no single limit: give a limit of your own"
    if use.low_ppm is not None and use.high_ppm is not None:
        limit = spread(use.low_ppm, use.high_ppm, "ppm")
        if bench is not None and bench.requirement.frequency_mhz < CLOCK_BELOW_MHZ:
            daily = [end * SECONDS_A_DAY_PER_PPM for end in (use.low_ppm, use.high_ppm)]
            limit += f" ({spread(daily[0], daily[1], 's a day')})"
    source = "; ".join(use.sources) or "no source yet: check the standard"
    said = f"{use.use}: {limit}. It must hold {use.what_it_must_hold}. Source: {source}."
    return f"{said} {use.note}" if use.note else said


def uses_table() -> Table:
    """All uses with limit and source."""
    rows = []
    for use in uses().values():
        one = use.low_ppm is not None and use.high_ppm is not None
        limit = spread(use.low_ppm, use.high_ppm, "ppm") if one else "no single limit"
        rows.append([use.use, limit, use.what_it_must_hold, "; ".join(use.sources) or "no source yet"])
    return ["Use", "Limit", "Must hold", "Source"], rows
