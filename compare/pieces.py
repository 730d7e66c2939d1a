"""Small pieces of HTML and markdown that the page shows, with every text of a sheet or person escaped."""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import fields
from html import escape
from pathlib import Path

from compare.palette import Palette
from compare.review_shown import Share

# A space between a figure and its unit, where no line may end.
BEFORE_UNIT = re.compile(r"(?<=\d) (?=(?:[^\W\d_]{1,3}|°C|%)(?![^\W\d_]))")
MARKDOWN = re.compile(r"([\\`*_{}\[\]()#+!|<>$~:^-])")


def plain(text: str) -> str:
    """Text that markdown shows as it stands."""
    return MARKDOWN.sub(r"\\\1", text)


def bold(text: str) -> str:
    """Text that markdown shows as it stands, but for the figures between ** and **."""
    return "**".join(plain(piece) for piece in text.split("**"))


def together(text: str) -> str:
    """Text as HTML in which a figure and its unit stay on one line."""
    return BEFORE_UNIT.sub("\u00a0", escape(text))


def style(palette: Palette) -> str:
    """The page's own rules, in the colours of its theme."""
    colours = "".join(f"--qf-{one.name.replace('_', '-')}:{getattr(palette, one.name)};" for one in fields(palette))
    rules = Path(__file__).with_name("page.css").read_text(encoding="utf-8")
    return f"<style>:root{{{colours}}}{rules}</style>"


def terms_html(terms: Sequence[str]) -> str:
    """The line of terms; figures stand between ** in `terms`."""
    said = (re.sub(r"\*\*(.+?)\*\*", r"<b>\1</b>", escape(term)) for term in terms)
    return f'<div class="qf-terms">{"".join(f"<span>{term}</span>" for term in said)}</div>'


def shares_html(shares: Sequence[Share]) -> str:
    """What adds to a worst case: name, bar and figure."""
    rows = (
        f'<tr><td>{escape(one.name)}</td><td><div class="qf-bar" style="width:{100 * one.share:.0f}%"></div></td>'
        f'<td class="n">{escape(one.adds)}</td></tr>'
        for one in shares
    )
    return f'<table class="qf-table qf-shares"><tbody>{"".join(rows)}</tbody></table>'


def printed_html(text: str) -> str:
    """Words as they are printed on the sheet."""
    return f'<p class="qf-printed">{escape(text)}</p>'


def look_html(text: str) -> str:
    """Why a person must look."""
    return f'<p class="qf-look">☞ {escape(text)}</p>'


def fault_html(text: str) -> str:
    """What is wrong with a field, under it."""
    return f'<p class="qf-fault" role="alert">▼ {escape(text)}</p>'


def figure_html(shown: str, bare: str) -> str:
    """A figure that copies itself without its unit; plain text where there is no number to copy."""
    if not bare:
        return escape(shown)
    said = f"copy {bare}"
    return f'<button class="qf-figure" data-copy="{escape(bare)}" title="{escape(said)}">{escape(shown)}</button>'


def supply_html(rows: Sequence[tuple[str, str, str, str]]) -> str:
    """What is known of a part's supply: name, value, and whence."""
    body = "".join(
        f'<tr><td>{escape(name)}</td><td class="n">{figure_html(value, bare)}</td>'
        f'<td class="soft">{escape(whence)}</td></tr>'
        for name, value, bare, whence in rows
    )
    return f'<table class="qf-table qf-supply"><tbody>{body}</tbody></table>'
