"""Charts on the page: the picture inline in the page's own type, its table in its place, and both as files."""

from __future__ import annotations

from collections.abc import Callable
from html import escape
from typing import Any

import streamlit as st

from compare import export, picture_pdf, review_html
from compare import page_session as session
from compare.bench import Bench
from compare.charts import Chart, Table
from compare.dossier import Dossier
from compare.figures import number
from compare.page_copy import copy_button
from compare.palette import LIGHT
from compare.picture import Picture, svg, svg_file
from compare.ranking import Ranked
from compare.review import reviewed

# The picture fits its column; what is in it was escaped where its SVG was written.
SHOW = """export default function({data, parentElement}) {
  const place = parentElement.querySelector("div"); place.innerHTML = data.svg;
  const svg = place.firstElementChild;
  svg.removeAttribute("height"); svg.style.cssText = "width:100%;display:block;max-width:" + data.widest + "px"; }"""
WIDEST = 1.5


def picture(of: Picture, *, key: str, widest: float = WIDEST) -> None:
    """A picture in the width of its column, at most `widest` times its own."""
    show = st.components.v2.component("quartzfolio_picture", html="<div></div>", js=SHOW)
    show(data={"svg": svg(of), "widest": round(widest * of.width)}, key=key, width="stretch")


def draw(chart: Chart, *, key: str, tables: bool = False, save: bool = False) -> None:
    """A chart, or its table in the same place; with `save` a heading and the ways to take it along."""
    if save:
        heading(chart, key)
    if tables:
        table(chart.table, f"{key}_table")
    else:
        picture(chart.draw(session.palette()), key=key)
    if save and chart.said:
        st.html(f'<p class="qf-small">{" ".join(map(escape, chart.said))}</p>')


def heading(chart: Chart, key: str) -> None:
    with st.container(horizontal=True, vertical_alignment="center", gap="small", key=f"chart_head_{key}"):
        session.section(chart.title)
        with st.popover("Save", type="tertiary", key=f"{key}_save", help=f"{chart.title}: picture or figures"):
            for label, name, made in files(chart):
                st.download_button(label, made, name, key=f"{key}_{label}", on_click="ignore", width="stretch")


def files(chart: Chart) -> list[tuple[str, str, Callable[[], bytes]]]:
    """What a chart can be saved as: label, file name and how it is made; pictures are always light, as on paper."""

    def png() -> bytes:
        return picture_pdf.png(chart.draw(LIGHT), LIGHT.page, sharpness=3)

    def vector() -> bytes:
        return svg_file(chart.draw(LIGHT), LIGHT.page)

    def figures() -> bytes:
        return export.as_csv(chart.data)

    return [
        ("PNG", f"{chart.name}.png", png),
        ("SVG", f"{chart.name}.svg", vector),
        ("Figures, CSV", f"{chart.name}.csv", figures),
    ]


def table(of: Table, key: str) -> None:
    """A chart's figures as a plain table, with a button that copies them."""
    heads, rows = of
    figures = [at for at in range(len(heads)) if all(isinstance(row[at], float | None) for row in rows)]
    shown = [
        ["" if one is None else number(one, 4) if isinstance(one, float) else str(one) for one in row] for row in rows
    ]
    with st.container(key=key):
        st.html(review_html.table_html(heads, shown, figures))
        copy_button(export.as_tabs((heads, rows)), key=f"{key}_copy")


def _cell(value: object) -> str:
    if value is None:
        return ""
    return number(value, 4) if isinstance(value, float) else str(value)


@st.cache_resource(max_entries=64, show_spinner=False)
def _dossier(key: str, at: int, _contest: Ranked) -> Dossier:  # noqa: ARG001
    if _contest.reckoning is None:
        raise ValueError("a ranking without parts has no dossier")
    return Dossier(reviewed(_contest.reckoning, at), _contest.reckoning, at)


@st.cache_resource(max_entries=32, show_spinner="Trying single changes …")
def _single_changes(key: str, _dossier: Dossier) -> list[str]:  # noqa: ARG001
    from compare.cures import cures

    return [one.message[:1].upper() + one.message[1:] + "." for one in cures(_dossier.reckoning, _dossier.at)]


def single_changes(of: Dossier) -> list[str]:
    """Every single change that would turn what falls short, as sentences."""
    return _single_changes(f"{session.key_of(of.bench, session.sheets())} {of.at}", of)


def dossier(contest: Ranked, at: int, bench: Bench) -> Dossier | None:
    """One part's dossier, kept while neither sheets nor bench change; None where that went wrong, which was told."""
    key = session.key_of(bench, session.sheets())
    found: Any = session.guarded("working the part out", lambda: _dossier(key, at, contest))
    return found if isinstance(found, Dossier) else None
