"""HTML of the Review view: the verdict lines and numbers, each opening to how it was reached; every text escaped."""

from __future__ import annotations

from collections.abc import Sequence
from html import escape

from compare.pieces import together
from compare.review_shown import Number
from compare.verdict_lines import VerdictLine
from compare.working import Working

HEADS = (
    ("Requirement", ""),
    ("Worst case", "n"),
    ("Asked", ""),
    ("Where it falls", ""),
    ("Times over", "n"),
    ("Verdict", ""),
)


def verdict_html(lines: Sequence[VerdictLine]) -> str:
    """One row a requirement; pressed, it opens to the reason and to how the number was reached."""
    head = "".join(f"<span{_class(kind)}>{name}</span>" for name, kind in HEADS)
    return f'<div class="qf-seven"><div class="qf-head">{head}</div>{"".join(map(_verdict_row, lines))}</div>'


def _class(kind: str) -> str:
    return f' class="{kind}"' if kind else ""


def _verdict_row(line: VerdictLine) -> str:
    look = "short" if line.verdict.startswith("▼") else "v" if line.is_asked else "soft"
    cells = (
        ("", line.requirement),
        ("n open", line.worst),
        ("", line.asked),
        ("soft", line.falls),
        ("n", line.times_over),
        (look, line.verdict),
    )
    shown = "".join(f"<span{_class(kind)}><i>{together(text)}</i></span>" for kind, text in cells)
    why = f"<p>{escape(line.why)}.</p>" if line.why else ""
    opened = working_html(line.working) if line.working else ""
    return f"<details><summary>{shown}</summary><div class=qf-how>{why}{opened}</div></details>"


def working_html(working: Working) -> str:
    """How one number was reached: formula, values put in with their place, result, assumption, what would turn it."""
    rows = "".join(
        f"<tr><td>{escape(one.name)}</td><td class=n>{together(one.value)}</td>"
        f"<td class=soft>{escape(one.source)}</td></tr>"
        for one in working.inputs
    )
    put_in = f"<div class=qf-formula>{escape(working.put_in)}</div>" if working.put_in else ""
    said = [f"Result: {working.result}."]
    said += [f"Takes for granted: {working.assumes}"] if working.assumes else []
    said += [working.turns] if working.turns else []
    told = "".join(f"<p>{escape(one)}</p>" for one in said)
    formula = f"<div class=qf-formula>{escape(working.formula)}</div>" if working.formula else ""
    table = f'<table class="qf-table">{rows}</table>' if rows else ""
    return f"<b>How this number was reached: {escape(working.name)}</b>{formula}{put_in}{table}{told}"


def numbers_html(numbers: Sequence[tuple[Number, Working | None]]) -> str:
    """Every number with its three values; pressed, a row opens to how it was reached."""
    head = ("Number", "Low", "Nominal", "High", "Unit", "How we have it")
    cells = "".join(f"<span{' class=n' if name in head[1:4] else ''}>{name}</span>" for name in head)
    body = "".join(_number_row(number, how) for number, how in numbers)
    return f'<div class="qf-head">{cells}</div><div class="qf-numbers">{body}</div>'


def _number_row(number: Number, how: Working | None) -> str:
    values = "".join(f'<span class="n">{escape(value)}</span>' for value in (number.low, number.mid, number.high))
    said = f'<span class="soft">{escape(number.unit)}</span><span class="soft">{escape(number.basis)}</span>'
    line = f"<p class=soft>{escape(number.how or 'Nothing is said about how.')}</p>"
    opened = (working_html(how) if how else "") + line
    return (
        f"<details><summary><span>{escape(number.name)}</span>{values}{said}</summary>"
        f"<div class=qf-how>{opened}</div></details>"
    )


def table_html(heads: Sequence[str], rows: Sequence[Sequence[str]], numbers: Sequence[int] = ()) -> str:
    """A plain table; columns in `numbers` stand right."""
    head = "".join(f"<th{_class('n' if at in numbers else '')}>{escape(name)}</th>" for at, name in enumerate(heads))
    body = "".join(
        "<tr>"
        + "".join(f"<td{_class('n' if at in numbers else '')}>{together(text)}</td>" for at, text in enumerate(row))
        + "</tr>"
        for row in rows
    )
    return f'<table class="qf-table qf-figures"><thead><tr>{head}</tr></thead><tbody>{body}</tbody></table>'
