"""Substitute's tables as HTML, every text escaped: the lines with their levers, and both parts in one circuit."""

from __future__ import annotations

import math
from collections.abc import Sequence
from html import escape

from compare.levers import Lever
from compare.palette import Palette
from compare.pieces import figure_html, together
from compare.swap_shown import BothHave, SwapLine

WIDE, HIGH = 112, 24
MIDDLE, REACH = 56.0, 42.0
"""Pixels: where the bar begins, and how long all of the room is."""


def lever_svg(line: SwapLine, palette: Palette) -> str:
    """A bar from the middle: room used to the left, won to the right; past the end an arrow; dotted: cannot be told."""
    y, lever = HIGH / 2, line.lever
    left, right = MIDDLE - REACH, MIDDLE + REACH
    axis = f'<path d="M{MIDDLE},3V{HIGH - 3}" stroke="{palette.ink}" stroke-width="1.5"/>'
    if lever is None and line.relation in ("different", "looser") and line.matters:
        return _svg(_arrow(left, y, palette) + axis, "does not fit the board")
    if lever is None or math.isnan(lever.used):
        if line.relation != "unknown" and lever is None:
            return _svg(axis, "no requirement rests on it")
        dots = f'<path d="M{left},{y}H{right}" stroke="{palette.edge}" stroke-dasharray="1 4"/>'
        return _svg(dots + axis, "not known")
    scale = f'<path d="M{left},{y}H{right}M{left},{y - 4}V{y + 4}M{right},{y - 4}V{y + 4}" stroke="{palette.edge}"/>'
    return _svg(scale + _bar(lever, y, palette) + axis, lever_words(lever))


def _bar(lever: Lever, y: float, palette: Palette) -> str:
    if lever.past:
        return _arrow(MIDDLE - REACH, y, palette)
    if abs(lever.used) < 1e-9:
        return ""
    end = MIDDLE - REACH * min(max(lever.used, -1.0), 1.0)
    colour = palette.ink if lever.used > 0 else palette.accent
    return (
        f'<path d="M{MIDDLE},{y}H{end:.1f}" stroke="{colour}" stroke-width="4"/>'
        f'<rect x="{end - 3:.1f}" y="{y - 4}" width="6" height="8" fill="{colour}"/>'
    )


def _arrow(left: float, y: float, palette: Palette) -> str:
    return (
        f'<path d="M{MIDDLE},{y}H{left}" stroke="{palette.short}" stroke-width="4"/>'
        f'<path d="M{left - 9},{y}L{left + 1},{y - 6}V{y + 6}Z" fill="{palette.short}"/>'
    )


def _svg(body: str, told: str) -> str:
    head = f'<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 {WIDE} {HIGH}" fill="none" role="img"'
    return f'{head} aria-label="{escape(told, quote=True)}">{body}</svg>'


def lever_words(lever: Lever) -> str:
    """`uses 44 % of the room`, `past the room there was`, `wins 32 % of the room`."""
    if lever.past:
        return "past the room that there was"
    if abs(lever.used) < 1e-9:
        return "uses no room"
    return f"{'uses' if lever.used > 0 else 'wins'} {min(abs(lever.used), 1):.0%} of the room".replace("%", " %")


def lines_html(lines: Sequence[SwapLine], palette: Palette, *, levers: bool) -> str:
    """The lines as a table; with `levers` a column of bars between present part and candidate."""
    heads = [("", "Reading", 18), ("n", "Present part", 13)]
    heads += [("lever", "room used │ won", 15)] if levers else []
    heads += [("", "Candidate", 13), ("n", "Difference", 10), ("rel", "Relation", 12)]
    heads.append(("", "What it does here" if levers else "To note", 100 - sum(width for _, _, width in heads)))
    columns = "".join(f'<col style="width:{width}%">' for _, _, width in heads)
    head = "".join(f'<th class="{kind}">{escape(name)}</th>' for kind, name, _ in heads)
    body = "".join(_line(line, palette, levers=levers) for line in lines)
    table = f"<colgroup>{columns}</colgroup><thead><tr>{head}</tr></thead><tbody>{body}</tbody>"
    return f'<table class="qf-table qf-swap">{table}</table>'


def _line(line: SwapLine, palette: Palette, *, levers: bool) -> str:
    unit = f'<span class="unit">{escape(line.unit)}</span>' if line.unit else ""
    bar = f'<td class="lever">{lever_svg(line, palette)}</td>' if levers else ""
    past = line.lever is not None and line.lever.past
    look = "worse" if past or (line.matters and line.relation == "different") else ""
    matters = " <small>matters</small>" if line.matters else ""
    relation = f'<span class="{look}">{line.sign} {escape(line.relation)}</span>{matters}'
    candidate = figure_html(line.candidate, line.bare_candidate)
    candidate = f"<b>{candidate}</b>" if line.relation != "same" else candidate
    cells = [
        f"<td>{escape(line.name)}{unit}</td>",
        f'<td class="n" title="{escape(line.place_incumbent)}">{figure_html(line.incumbent, line.bare_incumbent)}</td>',
        bar,
        f'<td title="{escape(line.place_candidate)}">{candidate}</td>',
        f'<td class="n">{together(line.difference)}</td>',
        f'<td class="rel">{relation}</td>',
        f'<td class="{look}">{escape(line.does)}</td>',
    ]
    return f"<tr>{''.join(cells)}</tr>"


def same_html(lines: Sequence[SwapLine]) -> str:
    """The lines that are the same, for who wants to see that none is left out."""
    head = '<th>Reading</th><th class="n">Present part</th><th class="cand">Candidate</th><th>Relation</th>'
    body = "".join(
        f'<tr><td>{escape(line.name)}<span class="unit">{escape(line.unit)}</span></td>'
        f'<td class="n">{figure_html(line.incumbent, line.bare_incumbent)}</td>'
        f'<td class="cand">{figure_html(line.candidate, line.bare_candidate)}</td>'
        f"<td>{line.sign} {escape(line.relation)}</td></tr>"
        for line in lines
    )
    return f'<table class="qf-table qf-swap qf-same"><thead><tr>{head}</tr></thead><tbody>{body}</tbody></table>'


def both_html(rows: Sequence[BothHave], heading: str = "In this circuit, low to high") -> str:
    """Both parts side by side; a press copies a number, the nominal one of a span."""
    body = "".join(
        f'<tr><td>{escape(one.name)}<span class="unit">{escape(one.unit)}</span></td>'
        f'<td class="n">{figure_html(one.incumbent, one.bare_incumbent)}</td>'
        f'<td class="n">{figure_html(one.candidate, one.bare_candidate)}</td></tr>'
        for one in rows
    )
    head = f'<th>{escape(heading)}</th><th class="n">Present part</th><th class="n">Candidate</th>'
    return f'<table class="qf-table qf-swap"><thead><tr>{head}</tr></thead><tbody>{body}</tbody></table>'


def said_html(text: str) -> str:
    """A ready text, line by line, as it will be copied."""
    return f'<p class="qf-said">{"<br>".join(map(escape, text.splitlines()))}</p>'
