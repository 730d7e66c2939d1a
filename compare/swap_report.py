"""The substitution report: one candidate in a present part's place, for the file and for signing."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Any

from compare import approval, swap_shown
from compare.answers import row_name, slack_rows, verdict
from compare.approval import Decision
from compare.bench import Bench
from compare.blocks import Block, Drawn, Heading, Items, Report, Text, grid
from compare.cautions import CAUTIONS
from compare.charts import slack_chart
from compare.circuit_text import terms
from compare.palette import LIGHT
from compare.substitute_text import SAMPLE
from compare.swap_shown import BothHave, Compared, SwapLine

Row = Mapping[str, Any]
BLANK = "____________________"


def swap_report(
    result: Row,
    one: Row,
    found: Compared,
    *,
    bench: Bench | None,
    supply: Sequence[BothHave],
    decisions: Sequence[Decision],
    sheets: Sequence[tuple[str, str]],
    day: str,
) -> Report:
    """The report as blocks. `sheets`: file and fingerprint of both parts' sheets; `day`: when it was made."""
    old, new = approval.name_of(result["incumbent"]), approval.name_of(one)
    blocks: list[Block] = [
        Heading("Answer"),
        Text(swap_shown.heading(one), "strong"),
        *(Text(_plain(said)) for said in swap_shown.below_heading(one)),
        Text(_asked(result, bench), "small"),
        *_lines(found),
        *_in_circuit(result, one, bench),
    ]
    if supply:
        blocks += [Heading("Supply"), _both(supply, "Supply")]
    if one["questions"]:
        blocks += [Heading("Open, to be asked"), Items(tuple(one["questions"]))]
    blocks += [*_decided(decisions, one), *_sheets(sheets), Heading("Cautions"), Items((*CAUTIONS, SAMPLE))]
    return Report(f"{new} in place of {old}", f"Substitution report, {day}", tuple(blocks))


def _plain(text: str) -> str:
    return text.replace("**", "")


def _asked(result: Row, bench: Bench | None) -> str:
    if bench is None:
        return swap_shown.taken_text(result)
    return f"{_plain('; '.join(terms(bench)))}. The circuit stays as built."


def _lines(found: Compared) -> list[Block]:
    blocks: list[Block] = [Heading(swap_shown.differ_heading(found.differ))]
    if found.differ:
        heads = ("Reading", "Present part", "Candidate", "Difference", "Relation", "Matters", "What it does here")
        rows = [[*_line(line), "yes" if line.matters else "no", line.does] for line in found.differ]
        blocks.append(grid(heads, rows, (1.5, 1.2, 1.2, 1, 1, 0.7, 2.2)))
        blocks.append(Text(swap_shown.ALONE, "small"))
    if found.same:
        rows = [_line(line)[:3] for line in found.same]
        blocks += [Heading(swap_shown.same_heading(found.same), 2)]
        blocks.append(grid(("Reading", "Present part", "Candidate"), rows, (1.5, 1, 1)))
    if found.silent:
        blocks.append(Text(swap_shown.silent_text(found.silent)))
    return blocks


def _line(line: SwapLine) -> list[str]:
    name = f"{line.name}, {line.unit}" if line.unit else line.name
    return [name, line.incumbent, line.candidate, line.difference, f"{line.sign} {line.relation}"]


def _in_circuit(result: Row, one: Row, bench: Bench | None) -> list[Block]:
    if bench is None or "slack" not in one:
        return []
    chart = slack_chart(slack_rows(one, bench)).draw(LIGHT)
    both = swap_shown.both_in_circuit(result["incumbent"], one)
    caption = "▮ worst case, ○ nominal, hatched: not met, dotted: not known"
    return [
        Heading(f"As the board is: {verdict(one['circuit_verdict'])}"),
        Drawn(chart, caption),
        _both(both, "In this circuit, low to high"),
    ]


def _both(rows: Sequence[BothHave], name: str) -> Block:
    told = [[f"{row.name}, {row.unit}" if row.unit else row.name, row.incumbent, row.candidate] for row in rows]
    return grid((name, "Present part", "Candidate"), told, (1.5, 1, 1))


def _decided(decisions: Sequence[Decision], one: Row) -> list[Block]:
    blocks: list[Block] = [Heading("Decision")]
    if decisions:
        heads = ("Decision", "By", "When", "Board", "Reason", "Evidence", "Verdict then")
        rows = [(d.state, d.by, d.when[:10], d.board, d.reason, d.evidence, d.verdict) for d in decisions]
        blocks.append(grid(heads, rows, (1, 1, 1, 1.2, 1.6, 1.4, 1)))
        if changed := approval.since_then(decisions[-1], one["verdict"]):
            blocks.append(Text(changed, "note"))
        return blocks
    blanks = [
        (name, BLANK) for name in ("Proposed, tested, approved or refused", "By", "Date", "Board", "Reason", "Evidence")
    ]
    return [*blocks, grid((), blanks, (1, 2))]


def _sheets(sheets: Sequence[tuple[str, str]]) -> list[Block]:
    return [Heading("Sheets"), grid(("File", "SHA-256"), sheets, (1, 2))]


def file_name(result: Row, one: Row) -> str:
    """`substitute_TW.2016.26_for_LK20`: good for a file's name."""
    told = f"substitute_{row_name(one)}_for_{row_name(result['incumbent'])}"
    return "".join(character if character.isalnum() or character in "-._" else "_" for character in told)
