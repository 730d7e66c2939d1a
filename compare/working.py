"""How one number was reached, ready to be checked: formula, values put in with their place, result, what it assumes.

The words stand in working.toml. What is shown comes from the same reckoning as the number itself.
"""

from __future__ import annotations

import math
import tomllib
from collections.abc import Callable
from dataclasses import dataclass
from functools import cache
from pathlib import Path
from typing import Any

from compare.answers import ENDS, FIGURES, told
from compare.columns import ESTIMATED, HIGH, LOW, MID
from compare.corners import nominal_r1_and_gm
from compare.dossier import Dossier
from compare.explain import SYMBOLS
from compare.figures import exact, frequency_text, number, scale, signed, spread, with_minus, with_unit
from compare.offer import C1_ROUTES
from compare.shown import NAMES, how, value_text
from compare.sources import ageing_words
from compare.stated import Taken
from extract.model import FIELD_NAMES

CAUSE_FIELDS = {
    "make": "frequency_tolerance_ppm",
    "temperature": "frequency_stability_ppm",
    "ageing": "ageing_ppm",
}


@dataclass(frozen=True)
class Input:
    """One value that was put in: its name, the value with unit, and where it comes from."""

    name: str
    value: str
    source: str


@dataclass(frozen=True)
class Working:
    """One number from formula to result; `how` is the line that the JSON carries."""

    key: str
    name: str
    formula: str
    put_in: str
    inputs: tuple[Input, ...]
    result: str
    assumes: str
    turns: str
    how: str


@cache
def words() -> dict[str, dict[str, Any]]:
    """The table of working.toml."""
    return tomllib.loads(Path(__file__).with_name("working.toml").read_text(encoding="utf-8"))


def working(dossier: Dossier, key: str) -> Working:
    """How the number `key` of the review was reached."""
    told_of = words().get(key, {"formula": "", "takes": [], "assumes": "", "turns": ""})
    inputs = [one for name in told_of["takes"] for one in _inputs(dossier, name)]
    figure = dossier.review[key]
    return Working(
        key=key,
        name=FIGURES[key].name,
        formula=told_of["formula"],
        put_in=_put_in(dossier, told_of.get("put_in", "")),
        inputs=tuple(inputs),
        result=result_text(key, figure),
        assumes=told_of["assumes"],
        turns=_turns(dossier, told_of["turns"]),
        how=told(figure["how"] or ""),
    )


def result_text(key: str, figure: Any) -> str:
    """`9.42, nominal 23.2, at most 26.5`: the three values of a number in words."""
    low, mid, high = (ends_of(key, figure)[end] for end in ENDS)
    _, unit = scale(FIGURES[key].unit, *(figure[end] for end in ENDS))
    if mid == low == high == "—":
        return "there is none"
    same = low == mid == high
    return with_unit(mid, unit) if same else f"{with_unit(f'{low}…{high}', unit)}, nominal {with_unit(mid, unit)}"


def ends_of(key: str, figure: Any) -> dict[str, str]:
    """Low, mid and high of a number as text in the unit of its size; a dash where there is none."""
    shown = FIGURES[key]
    factor, _ = scale(shown.unit, *(figure[end] for end in ENDS))
    write = signed if shown.sign else number
    return {end: "—" if figure[end] is None else write(figure[end] * factor, shown.digits) for end in ENDS}


def _inputs(dossier: Dossier, name: str) -> list[Input]:
    if name in SPECIAL:
        return SPECIAL[name](dossier)
    if name in dossier.review and name in FIGURES and name not in FIELD_NAMES:
        return [Input(FIGURES[name].name, result_text(name, dossier.review[name]), "computed")]
    taken = dossier.offer.taken().get(name)
    if taken is None and name == "esr_ohm":
        return [Input("ESR", "not stated", "")]
    return [] if taken is None else [_of_reading(name, taken)]


def _of_reading(field: str, taken: Taken) -> Input:
    """A field of the sheet as it was taken, with the words for how we have it and its place."""
    symbol, unit = SYMBOLS[field]
    span = taken.span
    if math.isinf(span.mid):
        value = "none: series resonance"
    else:
        factor, unit = scale(unit, span.low, span.high)
        low, mid, high = (end * factor for end in (span.low, span.mid, span.high))
        value = spread(low, high, unit, 4) if low != high else with_unit(exact(mid), unit)
    bound = " at most" if taken.limit_alone else ", typical and no limit" if taken.typical_only else ""
    places = "; ".join(dict.fromkeys(how(reading) for reading in taken.readings[:2]))
    named = NAMES[field] if NAMES[field].endswith(symbol.split()[-1]) else f"{NAMES[field]} {symbol}"
    return Input(named, value + bound, places)


def _c1(dossier: Dossier) -> list[Input]:
    columns, at = dossier.reckoning.columns, dossier.at
    span = columns.motional_ff[:, :, at]
    value = spread(float(span[:, LOW].min()), float(span[:, HIGH].max()), "fF", 4)
    route = int(columns.route[at])
    if route == ESTIMATED:
        return [Input("Motional C1", value, f"∴ estimated: {columns.motional_basis[at]}")]
    field = C1_ROUTES[route]
    stated = _of_reading(field, dossier.offer.at[0].motional[field])
    source = stated.source if route == 0 else f"∴ from {stated.name} {stated.value}, {stated.source}"
    return [Input("Motional C1", value, source)]


def _c0(dossier: Dossier) -> list[Input]:
    columns, at = dossier.reckoning.columns, dossier.at
    low, high = (float(columns.shunt_pf[0, end, at]) for end in (LOW, HIGH))
    taken = dossier.offer.at[0].shunt_capacitance
    if columns.shunt_missing[at]:
        return [Input("Shunt C0", spread(low, high, "pF", 4), f"∴ estimated: {columns.shunt_basis[at]}")]
    if columns.shunt_derived[at] or not taken.readings:
        return [Input("Shunt C0", spread(low, high, "pF", 4), "∴ from C1 and C0/C1")]
    stated = _of_reading("shunt_capacitance_pf", taken)
    floor = (
        f"; for the frequency its low end is estimated, {number(float(columns.shunt_floor_pf[at]))} pF"
        if columns.shunt_loose[at]
        else ""
    )
    return [Input("Shunt C0", stated.value, stated.source + floor)]


def _f(dossier: Dossier) -> list[Input]:
    return [Input("Frequency", frequency_text(dossier.offer.frequency_mhz), "asked, and offered by the part")]


def _gm(dossier: Dossier) -> list[Input]:
    rows = []
    for setting in dossier.bench.settings:
        ends = setting.circuit.transconductance_range_ms
        if ends is not None:
            factor, unit = scale("mS", *ends)
            value = spread(ends[LOW] * factor, ends[HIGH] * factor, unit, 4)
            rows.append(Input("Transconductance", value, f"circuit{f', {setting.name}' if setting.name else ''}"))
    if not rows:
        _, gm = nominal_r1_and_gm(dossier.reckoning.columns, dossier.bench, dossier.at)
        factor, unit = scale("mS", gm)
        value = "not known" if math.isnan(gm) else with_unit(number(gm * factor, 4), unit)
        rows = [Input("Transconductance", value, "∴ from the rating on the IC’s sheet" if math.isfinite(gm) else "")]
    return rows


def _capacitors(dossier: Dossier) -> list[Input]:
    keys = dossier.bench.settings[0].circuit
    fitted, stray, inside = (
        f"±{number(percent)} %"
        for percent in (
            keys.capacitor_tolerance_percent,
            keys.stray_tolerance("input_stray_pf"),
            keys.internal_tolerance_percent,
        )
    )
    rows = []
    for node, end in (("A–0", "input"), ("B–0", "output")):
        terms = [(getattr(keys, f"{end}_capacitor_pf"), f"fitted {fitted}")]
        terms.append((getattr(keys, f"{end}_stray_pf"), f"stray {stray}"))
        if end == "input" or not keys.series_resistor_ohm:
            terms.append((keys.internal_at_each_pin_pf or None, f"inside {inside}"))
        known = [(value, said) for value, said in terms if value is not None]
        value = " + ".join(number(value, 4) for value, _ in known)
        rows.append(
            Input(f"Capacitance {node}", with_unit(value, "pF"), f"circuit: {', '.join(said for _, said in known)}")
        )
    across = f"circuit: stray ±{number(keys.stray_tolerance('across_stray_pf'))} %"
    rows.append(Input("Capacitance A–B", with_unit(number(keys.across_stray_pf, 4), "pF"), across))
    return rows


def _losses(dossier: Dossier) -> list[Input]:
    keys = dossier.bench.settings[0].circuit
    feedback = keys.feedback_kohm(dossier.bench.requirement.frequency_mhz)
    rows = [
        Input("Feedback resistor", f"{number(feedback, 4)} kΩ", "circuit" if keys.feedback_resistor_kohm else "taken")
    ]
    if math.isfinite(keys.output_resistance_kohm):
        rows.append(Input("Output resistance", f"{number(keys.output_resistance_kohm, 4)} kΩ", "circuit"))
    if keys.series_resistor_ohm:
        rows.append(Input("Series resistor", f"{number(keys.series_resistor_ohm, 4)} Ω", "circuit"))
    return rows


def _swing(dossier: Dossier) -> list[Input]:
    rows = []
    for setting in dossier.bench.settings:
        keys = setting.circuit
        if keys.swing_v is not None:
            probe = f", with {number(keys.probe_pf)} pF of probe" if keys.probe_pf else ""
            where = f"{keys.swing_as} at the {keys.swing_at} end{probe}"
            condition = f", {setting.name}" if setting.name else ""
            rows.append(Input("Swing", f"{number(keys.swing_v)} V", f"circuit{condition}: {where}"))
    return rows


def _requirement(dossier: Dossier) -> list[Input]:
    asked = dossier.bench.requirement
    return [Input("Margin asked", number(asked.margin), asked.margin_source)]


def _budget(dossier: Dossier) -> list[Input]:
    stack, rows = dossier.budget, []
    for at, cause in enumerate(stack.causes):
        low, high = float(stack.low_ppm[at]), float(stack.high_ppm[at])
        source = "computed from load, C0 and C1" if cause == "load error" else _cause_source(dossier, cause)
        value = spread(low, high, "ppm") if low == -high else with_unit(f"{signed(low)}/{signed(high)}", "ppm")
        rows.append(Input(cause.capitalize(), value if math.isfinite(low + high) else "not known", source))
    return rows


def _cause_source(dossier: Dossier, cause: str) -> str:
    offer, bench = dossier.offer, dossier.bench
    if cause == "trim":
        return f"each unit trimmed to within {number(bench.requirement.trim_step_ppm)} ppm"
    if cause == "ageing":
        return with_minus(ageing_words(offer, bench))
    taken = offer.taken().get(CAUSE_FIELDS[cause])
    if cause == "temperature" and offer.fork:
        values = [
            _of_reading(name, one)
            for name in ("turnover_temperature_c", "parabolic_coefficient_ppm_per_c2")
            if (one := offer.taken().get(name)) is not None
        ]
        said = "; ".join(f"{one.name} {one.value}, {one.source}" for one in values)
        return f"parabola over the range; {said or 'both coefficients estimated'}"
    if taken is None:
        return "not stated"
    reading = taken.readings[0]
    return f"{value_text(reading)}, {how(reading)}"


SPECIAL: dict[str, Callable[[Dossier], list[Input]]] = {
    "C1": _c1,
    "C0": _c0,
    "f": _f,
    "gm": _gm,
    "capacitors": _capacitors,
    "losses": _losses,
    "swing": _swing,
    "requirement": _requirement,
    "budget": _budget,
}


def _put_in(dossier: Dossier, form: str) -> str:
    """The formula with the nominal values; "" where one of them is not known."""
    if not form:
        return ""
    columns, at = dossier.reckoning.columns, dossier.at
    r1, gm = nominal_r1_and_gm(columns, dossier.bench, at)
    factor, unit = scale("mS", gm)
    values = {key: dossier.review[key]["mid"] for key in FIGURES if key in dossier.review}
    shown = {key: _with_unit(key, value) for key, value in values.items() if value is not None}
    if math.isfinite(gm):
        shown["gm"] = with_unit(number(gm * factor, 4), unit)
    if math.isfinite(r1):
        shown["R1"] = _with_unit("greatest_esr_ohm", r1)
    shown["C0"] = f"{number(float(columns.shunt_pf[0, MID, at]), 4)} pF"
    shown["asked"] = number(dossier.bench.requirement.margin)
    try:
        return form.format(**shown)
    except KeyError:
        return ""


def _with_unit(key: str, value: float) -> str:
    factor, unit = scale(FIGURES[key].unit, value)
    return with_unit(number(value * factor, max(FIGURES[key].digits, 4)), unit)


def _turns(dossier: Dossier, about: str) -> str:
    """Which input would change the verdict, and at what value; "" where none does."""
    found = [one for one in dossier.breaks if one.about == about]
    if not found:
        return ""
    words_of = list(dict.fromkeys(one.words for one in found))
    start = "The verdict would turn if " if all(one.met for one in found) else "It would be met if "
    picked = words_of if all(one.met for one in found) else [one.words for one in found if not one.met]
    return f"{start}{' or '.join(picked)}."
