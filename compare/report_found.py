"""Sections 7 to 14 of the margin report and its appendix: results, worst case, budget, plots, bench, names."""

from __future__ import annotations

import math
import tomllib
from functools import cache
from pathlib import Path
from typing import Any

from compare import bench_lines, failures
from compare.answers import ENDS, FIGURES, FULL_NAMES, question_lines, told
from compare.blocks import Block, Drawn, Grid, Heading, Items, NewPage, Side, Text, Together, grid
from compare.charts import Chart
from compare.dossier import Dossier
from compare.figures import CLOCK_BELOW_MHZ, SECONDS_A_DAY_PER_PPM, number, scale, signed, with_unit
from compare.palette import LIGHT
from compare.report_head import BLANK, ReportHead
from compare.review_shown import CONTRIBUTORS, open_lines, shares
from compare.verdict_lines import worst_text
from compare.working import Working, words, working

# Significant digits of section 7, so that it can be compared with the program's JSON.
RESULT_DIGITS = 6
BASIS = {"stated": "stated", "derived": "computed", "estimated": "∴ estimated"}
CORNERS = ("resistance_headroom", "margin", "gain_ratio", "drive_level_uw", "startup_ms")
TO_MEASURE = (
    ("Series resistor at which it stops, coldest and lowest supply", "stopping"),
    ("Series resistor at which it stops, hottest", "stopping"),
    ("Current through the crystal, or drive", "drive"),
    ("Frequency at the coldest and at the hottest", "frequency"),
    ("Start-up, coldest and lowest supply", "startup"),
)


def results(dossier: Dossier) -> list[Block]:
    rows = [_result_row(key, dossier.review[key]) for key in FIGURES if key in dossier.review]
    if dossier.bench.requirement.frequency_mhz < CLOCK_BELOW_MHZ:
        rows.insert(1 + [row[0] for row in rows].index(FIGURES["total_ppm"].name), _daily(dossier.review["total_ppm"]))
    heads = ("Number", "Low", "Nominal", "High", "Unit", "How we have it")
    note = "Low and high are ends, not worse and better. Each number’s formula and values stand in the appendix."
    return [Heading("7 Results"), grid(heads, rows, (3, 1.5, 1.5, 1.5, 0.9, 1.4), (1, 2, 3)), Text(note, "small")]


def _result_row(key: str, figure: Any) -> tuple[str, ...]:
    shown = FIGURES[key]
    digits = max(shown.digits, RESULT_DIGITS)
    write = signed if shown.sign else number
    ends = ["—" if figure[end] is None else write(figure[end], digits) for end in ENDS]
    return (shown.name, *ends, shown.unit, BASIS.get(figure["basis"], figure["basis"]))


def _daily(figure: Any) -> tuple[str, ...]:
    ends = ["—" if figure[end] is None else signed(figure[end] * SECONDS_A_DAY_PER_PPM, RESULT_DIGITS) for end in ENDS]
    return ("The same for a clock", *ends, "s a day", BASIS.get(figure["basis"], ""))


def worst_case(dossier: Dossier) -> list[Block]:
    blocks: list[Block] = [
        Heading("8 Worst case"),
        Text(
            "Method: extreme value. The whole chain is run at every corner of all tolerances, conditions and limits of "
            "the sheet together; no root-sum-square is used."
        ),
    ]
    corners = [
        (FULL_NAMES[key], worst_text(dossier, key), dossier.corners[key].words)
        for key in CORNERS
        if key in dossier.corners
    ]
    corners += [
        (f"Load error, {end} end", f"{signed(corner.value)} ppm", corner.words)
        for end in ("low", "high")
        if (corner := dossier.corners.get(f"load_error_ppm, {end}")) is not None
    ]
    if corners:
        blocks.append(grid(("Number", "Worst", "Corner at which it falls"), corners, (2.4, 1.3, 4), (1,)))
    if dossier.conditions:
        blocks += [Heading("Cold, hot, low and high supply", 2), _conditions(dossier)]
    blocks += _gain_ends(dossier)
    for key, name in CONTRIBUTORS.items():
        listed = shares(dossier.review, key, most=12)
        if listed:
            rows = [(one.name, one.adds) for one in listed]
            blocks.append(Together((Heading(name, 2), grid(("Input", "Adds to the worst case"), rows, (3, 1.4), (1,)))))
    if len(dossier.bench.settings) == 1:
        blocks.append(
            Text("Only room values of the IC were to be had: no condition of supply or temperature is given.", "note")
        )
    return blocks


def _conditions(dossier: Dossier) -> Grid:
    rows = []
    for name, temperature, worst in dossier.conditions:
        at = "room" if temperature is None else f"{number(temperature)} °C"
        rows.append((name or "circuit", at, *(_worst(worst.get(key), key) for key in CORNERS)))
    heads = ("Condition", "At", "R1 headroom", "Margin", "Gain", "Drive, µW", "Start-up, ms")
    return grid(heads, rows, (2.4, 0.9, 1.2, 1, 1, 1.1, 1.2), (2, 3, 4, 5, 6))


def _worst(value: float | None, key: str) -> str:
    if value is None:
        return "not known"
    return ("does not start" if key == "startup_ms" else "—") if math.isinf(value) else number(value)


def _gain_ends(dossier: Dossier) -> list[Block]:
    """What is said of both ends of the transconductance."""
    stop = float(dossier.reckoning.greatest_gm[dossier.at])
    critical = dossier.review["critical_transconductance_ms"]["high"]
    said = []
    if critical is not None:
        said.append(f"At the least, it takes {_gm(critical)} to sustain oscillation in the worst corner.")
    if math.isfinite(stop):
        said.append(f"At the greatest, oscillation stops again above {_gm(stop)}.")
    return [Text(" ".join(said))] if said else []


def _gm(value: float) -> str:
    factor, unit = scale("mS", value)
    return with_unit(number(value * factor), unit)


def budget(dossier: Dossier) -> list[Block]:
    blocks: list[Block] = [Heading("9 Frequency budget")]
    stack = dossier.budget
    rows = []
    sources = {one.name.lower(): one.source for one in working(dossier, "total_ppm").inputs}
    for at, cause in enumerate(stack.causes):
        rows.append((cause, *_ends(stack.low_ppm[at], stack.high_ppm[at]), sources.get(cause, "")))
    rows.append(("in all", *_ends(stack.sum_low_ppm[-1], stack.sum_high_ppm[-1]), "sum of the ends"))
    if stack.left_low_ppm is not None and stack.left_high_ppm is not None:
        rows.append(("room left", *_ends(-stack.left_low_ppm, stack.left_high_ppm), "to the limits"))
    blocks.append(grid(("Cause", "Low, ppm", "High, ppm", "From"), rows, (1.4, 1, 1, 4.6), (1, 2)))
    if "ppm_budget" in dossier.charts:
        blocks.append(Drawn(dossier.charts["ppm_budget"].draw(LIGHT), "Where the ppm go"))
    return blocks


def _ends(low: float, high: float) -> tuple[str, str]:
    return tuple("not known" if math.isnan(end) else signed(float(end), 4) for end in (low, high))  # type: ignore[return-value]


def plots(dossier: Dossier) -> list[Block]:
    blocks: list[Block] = [Heading("10 Plots")]
    blocks.append(
        Text(
            "▮ worst case, ○ nominal, solid line a limit, hatched its wrong side, tinted what IC or tolerances may do.",
            "small",
        )
    )
    drawn = tuple(_plot(chart) for name, chart in dossier.charts.items() if name != "ppm_budget")
    blocks += [Side(drawn)] if drawn else []
    if dossier.not_drawn:
        blocks.append(Items(tuple(told(one) for one in dossier.not_drawn)))
    return blocks


def _plot(chart: Chart) -> Drawn:
    return Drawn(chart.draw(LIGHT), f"{chart.title}. {' '.join(chart.said)}")


def bench(dossier: Dossier) -> list[Block]:
    lines = bench_lines.bench_lines(dossier)
    rows = [tuple(one.cells) for one in lines]
    reach = {one.key.rsplit(".", 1)[-1]: one.to_reach for one in lines}
    of = {
        "stopping": reach.get("stopping_resistor_ohm", ""),
        "drive": reach.get("swing_v", ""),
        "frequency": reach.get("frequency_mhz", ""),
        "startup": reach.get("startup_ms", ""),
    }
    rows += [(what, "", of[kind], "not yet", BLANK[:10]) for what, kind in TO_MEASURE]
    read = dossier.bench.measured
    probe = BLANK if read is None else f"{number(read.probe_pf)} pF at the {read.probe_at} end"
    return [
        Heading("11 Measured"),
        grid(bench_lines.HEADS, rows, (2.3, 1.9, 1.6, 1.2, 1.9)),
        Text(f"Probe used: {probe}. Boards measured: {BLANK}. Date and by whom: {BLANK}.", "small"),
    ]


@cache
def cautions() -> tuple[str, ...]:
    """The lines of cautions.toml."""
    text = Path(__file__).with_name("cautions.toml").read_text(encoding="utf-8")
    return tuple(tomllib.loads(text)["lines"])


def open_points(dossier: Dossier) -> list[Block]:
    blocks: list[Block] = [
        Heading("12 Cautions, open questions, failure effects"),
        Items((*cautions(), _resistor_rule(dossier))),
    ]
    asks = question_lines(dossier.review)
    opened = [one for one in open_lines(dossier.review) if one.startswith(("☞", "◇"))]
    blocks.append(Heading("Open questions", 2))
    blocks.append(Items((*opened, *asks)) if opened or asks else Text("None: every reading that was used is settled."))
    if dossier.failures:
        rows = [tuple(one.cells) for one in dossier.failures]
        note = "A table to start a failure-mode analysis from: reckoned where it can be, else common practice."
        blocks += [Heading("Failure effects", 2), Text(note, "small")]
        blocks.append(grid(failures.HEADS, rows, (2.6, 1.2, 1.1, 1.2, 2.6), (2, 3)))
    return blocks


def _resistor_rule(dossier: Dossier) -> str:
    rule = dossier.bench.crystal.series_resistor_rule
    return {
        "circuit": "A series resistor is counted as part of the circuit, by its true effect.",
        "add to ESR": "A series resistor is counted by the IC maker’s rule: added to the ESR.",
    }[rule]


def alternates(of: ReportHead) -> list[Block]:
    from compare.approval import TABLE

    blocks: list[Block] = [Heading("13 Alternates")]
    if not of.alternates:
        return [
            *blocks,
            Text("None recorded. Approved, refused and proposed alternates, with date, name, evidence and boards:"),
            _blank_rows(),
        ]
    keys = ("candidate", "incumbent", "state", "by", "when", "board", "evidence", "reason")
    rows = [tuple(str(one.get(key, "")) for key in keys) for one in of.alternates]
    return [*blocks, grid([TABLE[key] for key in keys], rows, (1.5, 1.5, 1, 1, 1.2, 1, 1.2, 1.6))]


def _blank_rows() -> Grid:
    return grid(("Part", "Decision", "By", "Date", "Boards", "Evidence"), [(" ",) * 6] * 3, (2, 1, 1, 1, 1, 2))


def signatures(dossier: Dossier, of: ReportHead) -> list[Block]:
    rows = [(role, getattr(of, role.lower()), " ", " ", " ") for role in ("Prepared", "Checked", "Approved")]
    signed_by = grid(("", "Name", "Role", "Date", "Signature"), rows, (1, 2, 1.6, 1.2, 2.4))
    history = of.revisions or ((of.revision or " ", of.date or " ", of.prepared or " ", " "),)
    sheet = dossier.sheet
    return [
        Heading("14 Signatures"),
        Together(
            (
                signed_by,
                Heading("Revision history", 2),
                grid(("Revision", "Date", "By", "What changed"), history, (1, 1.2, 1.6, 4)),
            )
        ),
        Heading("Sheets used", 2),
        grid(("Sheet", "sha256"), [(sheet.file.rsplit("/", 1)[-1], sheet.sha256 or "not known")], (2, 5)),
    ]


def appendix(dossier: Dossier) -> list[Block]:
    blocks: list[Block] = [NewPage(), Heading("Appendix: how each number was reached")]
    blocks += [Together(tuple(_working(working(dossier, key)))) for key in words() if key in dossier.review]
    nominal = dossier.subcircuit("nominal")
    if nominal is not None:
        blocks += [Heading("The crystal as a SPICE subcircuit", 2), Text(nominal.rstrip(), "code")]
    return blocks


def _working(of: Working) -> list[Block]:
    blocks: list[Block] = [Heading(of.name, 2), Text(of.formula, "formula")]
    if of.put_in:
        blocks.append(Text(of.put_in, "formula"))
    if of.inputs:
        rows = [(one.name, one.value, one.source) for one in of.inputs]
        blocks.append(grid(("Put in", "Value", "From"), rows, (2.2, 2.2, 3.6)))
    blocks.append(Text(f"Result: {of.result}.", "strong"))
    blocks += [Text(f"Takes for granted: {of.assumes}", "small")] if of.assumes else []
    blocks += [Text(of.turns, "small")] if of.turns else []
    return blocks
