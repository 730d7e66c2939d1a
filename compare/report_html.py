"""A report as one HTML file: opens with the network cut, always light, prints well; every text is escaped."""

from __future__ import annotations

import re
from collections.abc import Callable
from html import escape
from pathlib import Path
from typing import Any

from compare.blocks import Block, Drawn, Grid, Heading, Items, NewPage, Report, Side, Text, Together
from compare.picture import FILE_FONT, svg

# A browser that knows this fetches nothing, whatever the file says.
NOTHING_FROM_OUTSIDE = "default-src 'none'; style-src 'unsafe-inline'; img-src data:"
KINDS = {"plain": "p", "strong": "p", "small": "p", "note": "p", "formula": "p", "code": "pre"}


def report_html(report: Report) -> str:
    """The whole file as text."""
    rules = Path(__file__).with_name("report.css").read_text(encoding="utf-8")
    title = escape(report.title)
    body = "".join(map(_block, report.blocks))
    return (
        f'<!DOCTYPE html>\n<html lang="en"><head><meta charset="utf-8"><title>{title}</title>'
        '<meta name="viewport" content="width=device-width, initial-scale=1">'
        f'<meta http-equiv="Content-Security-Policy" content="{NOTHING_FROM_OUTSIDE}">'
        f"<style>{rules}</style></head><body><main><h1>{title}</h1>{_contents(report)}{body}"
        f"<footer>{escape(report.foot)}</footer></main></body></html>\n"
    )


def _contents(report: Report) -> str:
    heads = [one for one in report.blocks if isinstance(one, Heading) and one.level == 1]
    links = "".join(f'<li><a href="#{_anchor(one.text)}">{escape(one.text)}</a></li>' for one in heads)
    return f"<nav aria-label=Contents><ul>{links}</ul></nav>"


def _anchor(text: str) -> str:
    return "s-" + re.sub(r"\W+", "-", text.casefold(), flags=re.ASCII).strip("-")


def _block(block: Block) -> str:
    return WRITERS[type(block)](block)


def _heading(block: Heading) -> str:
    if block.level == 1:
        return f'<h2 id="{_anchor(block.text)}">{escape(block.text)}</h2>'
    return f"<h3>{escape(block.text)}</h3>"


def _text(block: Text) -> str:
    tag = KINDS[block.kind]
    return f'<{tag} class="{block.kind}">{escape(block.text)}</{tag}>'


def _items(block: Items) -> str:
    return f"<ul>{''.join(f'<li>{escape(line)}</li>' for line in block.lines)}</ul>"


def _grid(block: Grid) -> str:
    whole = sum(block.widths) or 1.0
    columns = "".join(f'<col style="width:{100 * width / whole:.1f}%">' for width in block.widths)

    def cells(row: tuple[str, ...], tag: str) -> str:
        kinds = [' class="n"' if at in block.figures else "" for at in range(len(row))]
        return "".join(f"<{tag}{kind}>{escape(text)}</{tag}>" for kind, text in zip(kinds, row, strict=True))

    head = f"<thead><tr>{cells(block.heads, 'th')}</tr></thead>" if block.heads else ""
    body = "".join(f"<tr>{cells(row, 'td')}</tr>" for row in block.rows)
    plain = "" if block.heads else ' class="pairs"'
    return f"<table{plain}><colgroup>{columns}</colgroup>{head}<tbody>{body}</tbody></table>"


def _drawn(block: Drawn) -> str:
    caption = f"<figcaption>{escape(block.caption)}</figcaption>" if block.caption else ""
    return f"<figure>{svg(block.picture, font=FILE_FONT)}{caption}</figure>"


def _side(block: Side) -> str:
    return f'<div class="side">{"".join(map(_drawn, block.drawings))}</div>'


def _together(block: Together) -> str:
    return f'<div class="together">{"".join(map(_block, block.blocks))}</div>'


WRITERS: dict[type, Callable[[Any], str]] = {
    Heading: _heading,
    Text: _text,
    Items: _items,
    Grid: _grid,
    Drawn: _drawn,
    Side: _side,
    Together: _together,
    NewPage: lambda _: '<div class="page"></div>',
}
