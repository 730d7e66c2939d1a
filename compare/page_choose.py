"""The Choose view: the candidates in order, and why the chosen one stands where it does."""

from __future__ import annotations

import hashlib
from typing import Any

import streamlit as st

from compare import answers, charts, choose_shown, export, pieces, review_shown
from compare import page_session as session
from compare.bench import Bench
from compare.offer import find_offers
from compare.page_shared import cautions, others, ready, review_of

COPY = """export default function({data, parentElement}) {
  const button = parentElement.querySelector("button");
  button.onclick = async () => { await navigator.clipboard.writeText(data); button.textContent = "Copied"; } }"""
COPY_LOOK = """button{font:inherit;font-size:.875rem;color:var(--st-text-color);background:var(--st-background-color);
  cursor:pointer;border:1px solid var(--st-border-color);border-radius:3px;padding:.42rem .75rem}"""

# More rows would slow every press down; the saved tables hold all.
MOST_ROWS = 500


def choose_view() -> None:
    if (bench := ready()) is None:
        return
    result = session.ranking(bench)
    if result is None:
        return
    left, right = st.columns([1.54, 1], gap="medium")
    with left:
        session.title(f"{pieces.plain(choose_shown.choose_heading(result, bench))}")
        row = ranked_rows(result) if result["rows"] else None
        others(result)
        cautions()
    if row is not None:
        with right:
            why(row, bench)


def ranked_rows(result: dict[str, Any]) -> dict[str, Any]:
    rows = result["rows"][:MOST_ROWS]
    places = answers.identities(rows)
    start_at = places.index(st.session_state.chosen) if st.session_state.chosen in places else 0
    order = hashlib.sha256(repr(places).encode()).hexdigest()[:12]
    column = st.column_config
    picked = st.dataframe(
        choose_shown.rank_frame(rows, session.palette()),
        hide_index=True,
        row_height=44,
        height=min(38 + 44 * len(rows), 610),
        on_select="rerun",
        selection_mode="single-row",
        selection_default=session.first_row(start_at),
        key=f"ranked_{order}",
        alt="Candidates in order, with their verdicts",
        column_config={
            "Place": column.NumberColumn(width=48),
            "Part": column.TextColumn(width=134),
            "Verdict": column.TextColumn(width=92),
            "Look": column.TextColumn(width=46),
            "Times over: 1 is the line": column.ImageColumn(width=204),
            "Tightest": column.TextColumn(width=168),
        },
    )
    at = session.selected_row(picked, len(rows))
    st.session_state.chosen = places[at]
    legend = f"{choose_shown.strips_legend(rows)} {choose_shown.shown_of(len(result['rows']), len(rows))}"
    st.markdown(f":gray[:small[{legend}]]")
    save_ranking(result["rows"], rows)
    row: dict[str, Any] = rows[at]
    return row


def save_ranking(rows: list[dict[str, Any]], shown: list[dict[str, Any]]) -> None:
    """The rows shown, with what was asked, for the clipboard; all there is as files, made when they are asked for."""

    def workbook() -> bytes:
        return export.as_xlsx({"ranking": export.rank_table(rows), "sources": export.sources_table(rows)})

    with st.container(horizontal=True, vertical_alignment="center", gap="small"):
        html = "<button>Copy table</button>"
        copy = st.components.v2.component("quartzfolio_copy", html=html, js=COPY, css=COPY_LOOK)
        copy(data=export.as_tabs(export.rank_table(shown, answers.STRIPS)), key="copy_ranking", width="content")
        st.download_button("Save .xlsx", workbook, "ranking.xlsx", key="save_xlsx", on_click="ignore")
        st.download_button(
            "Save .csv",
            lambda: export.as_csv(export.rank_table(rows)),
            "ranking.csv",
            key="save_csv",
            on_click="ignore",
        )


def why(row: dict[str, Any], bench: Bench) -> None:
    """The chosen row's reasons: the large slack chart, the reasons in words, ppm against load."""
    session.section(f"{pieces.plain(choose_shown.place_heading(row))}")
    review = review_of(row, bench)
    if review is None:
        return
    if said := answers.chosen_text(row):
        st.markdown(f":gray[{pieces.plain(said)}]")
    slack_chart(review, bench)
    reasons_of(review, bench)
    for question in answers.question_lines(review):
        st.markdown(f"Ask: “{pieces.plain(question)}”")
    load_chart(review, bench)
    for line in answers.advice_lines(review)[:1]:
        st.markdown(line)
    if st.button("Review this part", key="to_review", type="primary", shortcut="V"):
        session.go("review")


def reasons_of(review: answers.Row, bench: Bench) -> None:
    """The reasons that decide in full; those that meet a step away."""
    rows = review_shown.judged(review, bench)
    deciding = [one for one in rows if not one.meets]
    for one in deciding:
        st.markdown(f"{one.verdict[0]} **{pieces.plain(one.requirement)}**: {pieces.plain(one.why)}")
    met = [one for one in rows if one.meets]
    if not met:
        return
    with st.expander(f"Why the other {len(met)} meet" if deciding else f"Why all {len(met)} meet"):
        for one in met:
            st.markdown(f":small[▲ **{pieces.plain(one.requirement)}**: {pieces.plain(one.why)}]")


def slack_chart(review: answers.Row, bench: Bench) -> None:
    rows = tuple(answers.slack_rows(review, bench))
    chart = charts.specification(charts.slack_chart, rows, session.palette())
    alt = "How many times over each requirement is met"
    st.vega_lite_chart(spec=chart, theme=None, width="content", key="slack", alt=alt)
    st.markdown(":gray[:small[▮ worst case · ○ nominal · hatched: not met · dotted: not known]]")


def load_chart(review: answers.Row, bench: Bench) -> None:
    offers = find_offers(answers.sheets_of(review, session.sheets()), bench).offers
    offer = next((one for one in offers if one.part.package == review["package"]), None)
    if offer is None:
        return
    rated = review["chosen"].get("load_capacitance_pf", offer.load.span.mid if offer.load.stated else None)
    pull = review_shown.load_pull(review, bench, rated, series=offer.series)
    if pull is None:
        return
    session.section("ppm against load")
    chart = charts.specification(charts.load_chart, pull, session.palette())
    alt = "Frequency shift in ppm against load in pF"
    st.vega_lite_chart(spec=chart, theme=None, width="content", key="load", alt=alt)
    with st.expander("The same as a table"):
        st.dataframe(charts.load_table(pull), hide_index=True, key="load_table", alt="Shift at nine loads")
