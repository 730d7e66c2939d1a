"""Sections 1 to 6 of the margin report: head, verdict, and what was put in: requirement, circuit, crystal, IC."""

from __future__ import annotations

import math

from compare.answers import missing_name, question_lines, told
from compare.bench import CircuitKeys, uses
from compare.blocks import Block, Drawn, Grid, Heading, Items, Text, grid
from compare.circuit_text import (
    circuit_figures,
    circuit_heading,
    ppm_limit_text,
    seconds_a_day_text,
    sum_text,
    taken_sentences,
    temperatures,
)
from compare.columns import ESTIMATED, MID
from compare.dossier import Dossier
from compare.drawing import circuit_picture
from compare.figures import frequency_text, number, scale, spread, with_unit
from compare.offer import C1_ROUTES
from compare.palette import LIGHT
from compare.report_head import BLANK, ReportHead
from compare.shown import NAMES, place, value_text, when_text
from compare.verdict_lines import heading, sentences, verdict_lines
from compare.versions import versions_text
from extract.model import Reading

PART_OF_HEAD = (
    ("Report number", "number"),
    ("Revision", "revision"),
    ("Date", "date"),
    ("Project", "project"),
    ("Board and revision", "board"),
    ("Reference designator", "designator"),
    ("IC", "ic"),
    ("IC’s sheet", "ic_sheet"),
)
STATUS = {"stated": "stated", "inferred": "∴ inferred", "entered": "✎ entered"}


def head(dossier: Dossier, of: ReportHead) -> list[Block]:
    rows = [(name, of.shown(field)) for name, field in PART_OF_HEAD]
    part = dossier.offer.part
    named = " ".join(filter(None, [part.maker, part.part_number or "no part number", part.package]))
    sheet = dossier.sheet
    rows += [
        ("Crystal", named),
        ("Crystal’s sheet", f"{sheet.file.rsplit('/', 1)[-1]}, sha256 {(sheet.sha256 or 'not known')[:16]}…"),
        ("Made by", versions_text()),
    ]
    return [Heading("1 Head"), grid((), rows, (1, 3)), Text(of.confidentiality, "strong")]


def verdict(dossier: Dossier) -> list[Block]:
    lines = verdict_lines(dossier)
    rows = [(one.requirement, one.worst, one.asked, one.falls, one.times_over, one.verdict) for one in lines]
    heads = ("Requirement", "Worst case", "Asked", "Where it falls", "Times over", "Verdict")
    return [
        Heading("2 Verdict"),
        Text(heading(dossier.review, lines), "strong"),
        Text(" ".join(sentences(dossier, lines))),
        grid(heads, rows, (2.6, 1.9, 1.6, 2.8, 0.9, 1.4), (1, 4)),
    ]


def requirement(dossier: Dossier) -> list[Block]:
    asked, bench = dossier.bench.requirement, dossier.bench
    use = uses()[asked.use] if asked.use else None
    rows = [
        ("Frequency", frequency_text(asked.frequency_mhz), "bench"),
        ("Limit on the frequency", _limit(dossier), "bench: total_ppm" if asked.total_ppm is not None else "the use"),
    ]
    if use is not None:
        evidence = "; ".join(use.sources) or "no source yet: check the standard"
        rows.append(("Use", f"{use.use}: {use.what_it_must_hold}", evidence))
    product = "not asked" if asked.temperature_c is None else temperatures(asked.temperature_c)
    rows += [
        ("Temperature of the product", product, "bench"),
        ("Time", f"{number(asked.years)} years", f"ageing by the {asked.ageing_rule} rule"),
        ("Pass mark: margin, gain, R1 headroom", number(asked.margin), asked.margin_source),
        ("Drive: rated over reckoned", f"at least {number(asked.drive_headroom)}", "bench"),
        ("Start-up", "not asked" if asked.startup_ms is None else f"within {number(asked.startup_ms)} ms", "bench"),
    ]
    if asked.trim_step_ppm is not None:
        rows.append(("Trim of each unit", f"to within {number(asked.trim_step_ppm)} ppm", "bench"))
    said = (
        "The pass mark is asked of the least transconductance and the greatest ESR, worst case, not of typical values."
    )
    return [
        Heading("3 Requirement"),
        grid(("What", "Asked", "Who set it"), rows, (2, 2.4, 2.6)),
        Text(said if bench.circuit.rating is None else f"{said} {_factor(dossier)}", "small"),
    ]


def _limit(dossier: Dossier) -> str:
    limit = ppm_limit_text(dossier.bench)
    daily = seconds_a_day_text(dossier.bench)
    return (f"{limit}, all causes" + (f" ({daily})" if daily else "")) if limit else "not asked"


def _factor(dossier: Dossier) -> str:
    rating = dossier.bench.circuit.rating
    if rating is None:
        return ""
    factor = number(rating.factor_inside)
    return f"The IC’s rating is taken to hold a factor of {factor} already; it is not asked for twice."


def circuit(dossier: Dossier, of: ReportHead) -> list[Block]:
    bench = dossier.bench
    keys = bench.settings[0].circuit
    steady = dossier.review["circuit_load_pf"]["mid"]
    return [
        Heading("4 Circuit"),
        Text(circuit_heading(bench, steady), "strong"),
        Drawn(circuit_picture(circuit_figures(bench), LIGHT)),
        Text(sum_text(bench, steady)),
        _capacitances(keys, of),
        Heading("Amplifier and resistors", 2),
        _resistors(dossier, keys),
        *([Items(tuple(taken_sentences(bench)))] if taken_sentences(bench) else []),
    ]


def _capacitances(keys: CircuitKeys, of: ReportHead) -> Grid:
    dielectric = of.dielectric or f"dielectric (C0G or not): {BLANK}"
    got = of.strays or f"how got (estimate, extraction, measured): {BLANK}"
    rows = []
    for node, end in (("A–0", "input"), ("B–0", "output")):
        fitted = getattr(keys, f"{end}_capacitor_pf")
        tolerance = f"±{number(keys.capacitor_tolerance_percent)} %"
        rows.append(
            (f"{node} fitted", "not known" if fitted is None else f"{number(fitted, 4)} pF", tolerance, dielectric)
        )
    for node, key in (("A–0", "input_stray_pf"), ("B–0", "output_stray_pf"), ("A–B", "across_stray_pf")):
        source = got if key in keys.given else "taken, not given"
        stray = f"{number(getattr(keys, key), 4)} pF"
        rows.append((f"{node} stray", stray, f"±{number(keys.stray_tolerance(key))} %", source))
    inside = keys.internal_at_each_pin_pf
    node = "A–0, O–0" if keys.series_resistor_ohm else "A–0, B–0"
    setting = f"{keys.internal_as}; setting of the IC assumed: {BLANK}" if inside else "none"
    value = f"{number(inside, 4)} pF at each pin" if inside else "none"
    rows.append(
        (f"{node} inside IC", value, f"±{number(keys.internal_tolerance_percent)} %" if inside else "", setting)
    )
    if keys.series_resistor_ohm or keys.amplifier_output_pf:
        rows.append(("O–0 pin", f"{number(keys.amplifier_output_pf, 4)} pF", "", "ahead of the series resistor"))
    return grid(("Between", "Value", "Tolerance", "Kind, and how got"), rows, (1.5, 1.5, 1.1, 3.4), (1, 2))


def _resistors(dossier: Dossier, keys: CircuitKeys) -> Grid:
    feedback = keys.feedback_kohm(dossier.bench.requirement.frequency_mhz)
    own = (
        "inf: none given" if math.isinf(keys.output_resistance_kohm) else f"{number(keys.output_resistance_kohm, 4)} kΩ"
    )
    rows = [
        ("Feedback, A–" + ("O" if keys.series_resistor_ohm else "B"), f"{number(feedback, 4)} kΩ"),
        (
            "Series resistor, O–B",
            f"{number(keys.series_resistor_ohm, 4)} Ω" if keys.series_resistor_ohm else "none fitted",
        ),
        ("Amplifier’s own output resistance", own),
        ("Amplitude limited by", keys.limiter),
        ("Series resistor counted by the rule", dossier.bench.crystal.series_resistor_rule),
    ]
    for setting in dossier.bench.settings:
        swing = setting.circuit.swing_v
        if swing is not None:
            where = f"{number(swing)} V {setting.circuit.swing_as} at the {setting.circuit.swing_at} end"
            probe = f", probe {number(setting.circuit.probe_pf)} pF" if setting.circuit.probe_pf else ""
            rows.append((f"Swing{f', {setting.name}' if setting.name else ''}", where + probe))
    return grid((), rows, (2, 3))


def crystal(dossier: Dossier) -> list[Block]:
    part = dossier.offer.part
    rows = [_reading_row(one) for one in sorted(part.readings, key=lambda one: one.check is None)]
    heads = ("Reading", "Value", "Holds for", "Place", "How we have it", "As printed")
    blocks: list[Block] = [
        Heading("5 Crystal"),
        grid(heads, rows, (1.7, 1.7, 1.4, 1.3, 1.1, 2.6)),
    ]
    missing = _instead(dossier)
    if missing:
        blocks += [Heading("Not stated, and what was used instead", 2), Items(tuple(missing))]
    remarks = [told(one["message"]) for one in dossier.review.get("remarks", ())]
    if remarks:
        blocks += [Heading("How the readings were taken", 2), Items(tuple(remarks))]
    blocks += [Heading("Do the stated values agree?", 2), _consistency(dossier)]
    return blocks


def _reading_row(reading: Reading) -> tuple[str, ...]:
    how = STATUS[reading.status] + (", ☞ look" if reading.check else "")
    where = place(reading.where) or str(reading.where)
    box = reading.where.box
    at = f"{where}, box {', '.join(f'{edge:.0f}' for edge in box)}" if box is not None else where
    return (NAMES[reading.field], value_text(reading), when_text(reading.when), at, how, reading.raw)


def _instead(dossier: Dossier) -> list[str]:
    columns, at = dossier.reckoning.columns, dossier.at
    said = []
    if int(columns.route[at]) == ESTIMATED:
        said.append(f"C1: estimated ({columns.motional_basis[at]})")
    if columns.shunt_missing[at]:
        said.append(f"C0: estimated ({columns.shunt_basis[at]})")
    said += [f"{missing_name(key)}: not known; what needs it is “cannot tell”" for key in dossier.review["missing"]]
    if not dossier.offer.ageing.stated:
        said.append("Ageing: estimated, ±5 ppm in the first year (common practice, no source)")
    return said


def _consistency(dossier: Dossier) -> Grid:
    """C1 by every stated value that leads to it, and Q; where two disagree the sheet is to be looked at."""
    columns, at, review = dossier.reckoning.columns, dossier.at, dossier.review
    used = float(columns.motional_ff[0, MID, at])
    rows = []
    for route, field in enumerate(C1_ROUTES):
        value = float(columns.other_routes_ff[route, at])
        if math.isfinite(value):
            off = (
                "the one used"
                if route == int(columns.route[at])
                else f"{(value / used - 1) * 100:+.0f} %".replace("-", "−")
            )
            rows.append((f"C1 by {NAMES[field]}", f"{number(value, 4)} fF", off))
    quality = review["quality_factor"]
    rows.append(("Q from R1, C1 and fs", number(quality["mid"], 4), f"{quality['basis']}"))
    c0, c1 = float(columns.shunt_pf[0, MID, at]), used
    rows.append(("C0/C1", number(c0 / c1 * 1e3, 4), "150 to 600 is usual of AT cuts; common practice, no source"))
    return grid(("Value", "Comes to", "Against the one used"), rows, (2, 1.4, 3), (1,))


def ic(dossier: Dossier) -> list[Block]:
    rows = []
    for setting in dossier.bench.settings:
        ends = setting.circuit.transconductance_range_ms
        if ends is not None:
            factor, unit = scale("mS", *ends)
            value = spread(ends[0] * factor, ends[2] * factor, unit, 4)
            bound = "least and greatest" if ends[0] != ends[2] else "one figure, taken as the least"
            rows.append((setting.name or "circuit, room", _degrees(setting.temperature_c), value, bound))
    blocks: list[Block] = [Heading("6 IC")]
    if rows:
        blocks.append(
            grid(("Condition", "Temperature", "Transconductance", "Taken as"), rows, (2.2, 1.2, 1.6, 2.4), (2,))
        )
    rating = dossier.bench.circuit.rating
    if rating is not None and rating.kind is not None:
        blocks.append(Text(f"Stated on the IC’s sheet: {rating_text(dossier)}."))
    if not rows and (rating is None or rating.kind is None):
        asks = [one for one in question_lines(dossier.review) if "IC" in one]
        blocks.append(Text("The IC’s gain is not known: neither a transconductance nor a rating is given."))
        blocks += [Items(tuple(asks))] if asks else []
    blocks.append(
        Text("The IC’s sheet, in its own words (minimum or typical, supply, temperature): " + BLANK * 2, "small")
    )
    return blocks


def _degrees(value: float | None) -> str:
    return "25 °C" if value is None else f"{number(value)} °C"


def rating_text(dossier: Dossier) -> str:
    """The IC's rating in words: `greatest ESR 100 Ω, motional, at 9 pF, factor 5 inside`."""
    rating = dossier.bench.circuit.rating
    if rating is None or rating.kind is None:
        return "nothing"
    value = getattr(rating, rating.kind)
    names = {
        "critical_transconductance_max_ms": ("greatest critical transconductance", "mS"),
        "negative_resistance_ohm": ("negative resistance", "Ω"),
        "esr_max_ohm": ("greatest ESR", "Ω"),
    }
    name, unit = names[rating.kind]
    if isinstance(value, tuple):
        return f"a list of {len(value)} ESR limits by frequency and load, {rating.esr_means}"
    factor, shown = scale(unit, value)
    said = [f"{name} {with_unit(number(value * factor), shown)}"]
    if rating.kind == "esr_max_ohm":
        said.append(rating.esr_means)
    if rating.load_pf is not None:
        said.append(f"at {number(rating.load_pf)} pF")
    said.append(f"factor {number(rating.factor_inside)} inside")
    return ", ".join(said)
