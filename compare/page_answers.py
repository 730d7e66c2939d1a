"""The views Choose and Review: what the candidates come to in the circuit, and one of them in full."""

from __future__ import annotations

import hashlib
from typing import Any

import streamlit as st

from compare import answers, charts, export, pieces
from compare import page_session as session
from compare.bench import Bench
from compare.cautions import CAUTIONS
from compare.desk import NO_CIRCUIT, NO_PARTS, NOTHING_OPEN, PRIVACY, field_of
from compare.offer import find_offers

COPY = """export default function({data, parentElement}) {
  const button = parentElement.querySelector("button");
  button.onclick = async () => { await navigator.clipboard.writeText(data); button.textContent = "Copied"; } }"""
COPY_LOOK = """button{font:inherit;font-size:.875rem;color:var(--st-text-color);background:var(--st-background-color);
  cursor:pointer;border:1px solid var(--st-border-color);border-radius:3px;padding:.42rem .75rem}"""

# More rows would slow every press down; the saved tables hold all.
MOST_ROWS = 500


def ready() -> Bench | None:
    """The bench, where there is something to judge; else what to do is said and None is returned."""
    desk = session.desk()
    if not any(sheet.parts for sheet in session.sheets()):
        session.title("Nothing to rank yet")
        st.markdown(NO_PARTS if session.sheets() else NOTHING_OPEN)
        with st.container(horizontal=True, gap="small"):
            if st.button("Add sheets", key="to_sheets", type="primary"):
                session.go("sheets")
            if st.button("Open the orchard example", key="orchard_here"):
                session.open_example()
                st.rerun()
        return None
    for key, fault in desk.faults.items():
        st.html(pieces.fault_html(f"{field_of(key).label if key else 'Circuit'}: not used. {fault}"))
    if desk.bench is None:
        session.title("No circuit yet")
        st.markdown(NO_CIRCUIT)
        if st.button("Set the circuit", key="to_circuit", type="primary"):
            session.go("circuit")
    return desk.bench


def choose_view() -> None:
    if (bench := ready()) is None:
        return
    result = session.ranking(bench)
    if result is None:
        return
    left, right = st.columns([1.54, 1], gap="medium")
    with left:
        session.title(f"{pieces.plain(answers.choose_heading(result, bench))}")
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
        answers.rank_frame(rows, session.palette()),
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
    legend = f"{answers.strips_legend(rows)} {answers.shown_of(len(result['rows']), len(rows))}"
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


def others(result: dict[str, Any]) -> None:
    if lines := answers.note_lines(result):
        with st.expander(f"What else there is to say ({len(lines)})", expanded=not result["rows"]):
            for line in lines:
                st.markdown(f"- {pieces.plain(line)}")


def cautions() -> None:
    st.markdown(f":gray[:small[{' '.join(CAUTIONS)} {PRIVACY}]]")


def review_of(row: dict[str, Any], bench: Bench) -> answers.Row | None:
    """The review of the ranked part, worked out for it alone."""
    own = answers.sheets_of(row, session.sheets())
    result = session.guarded("working the part out", lambda: session.reviewed(session.key_of(bench, own), own, bench))
    return None if result is None else answers.review_for(row, result["reviews"])


def why(row: dict[str, Any], bench: Bench) -> None:
    """The chosen row's reasons: the large slack chart, the reasons in words, ppm against load."""
    session.section(f"{pieces.plain(answers.place_heading(row))}")
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
    rows = answers.judged(review, bench)
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
    pull = answers.load_pull(review, bench, rated, series=offer.series)
    if pull is None:
        return
    session.section("ppm against load")
    chart = charts.specification(charts.load_chart, pull, session.palette())
    alt = "Frequency shift in ppm against load in pF"
    st.vega_lite_chart(spec=chart, theme=None, width="content", key="load", alt=alt)
    with st.expander("The same as a table"):
        st.dataframe(charts.load_table(pull), hide_index=True, key="load_table", alt="Shift at nine loads")


def review_view() -> None:
    if (bench := ready()) is None:
        return
    result = session.ranking(bench)
    if result is None:
        return
    if not result["rows"]:
        session.title(f"{pieces.plain(answers.choose_heading(result, bench))}")
        others(result)
        return
    rows = dict(zip(answers.identities(result["rows"]), result["rows"], strict=True))
    if st.session_state.chosen not in rows:
        st.session_state.chosen = next(iter(rows))
    review = review_of(rows[st.session_state.chosen], bench)
    left, right = st.columns([1.7, 1], gap="large")
    with right:
        choose_part(rows)
    if review is None:
        return
    with left:
        judged(review, bench)
    with right:
        to_do(review)


def choose_part(rows: dict[answers.Identity, dict[str, Any]]) -> None:
    def name(place: answers.Identity) -> str:
        return answers.place_heading(rows[place])

    st.session_state.review_part = st.session_state.chosen
    st.selectbox("Part under review", list(rows), format_func=name, key="review_part", on_change=choose)


def choose() -> None:
    st.session_state.chosen = st.session_state.review_part


def judged(review: answers.Row, bench: Bench) -> None:
    session.title(f"{pieces.plain(answers.review_heading(review))}")
    st.markdown(pieces.plain(answers.short_of(review)))
    st.html(pieces.judged_html(answers.judged(review, bench)))
    session.section("Every number")
    st.markdown(
        ":gray[:small[Press a number to see how it was reached. Low and high are its ends, not worse and better.]]"
    )
    st.html(pieces.numbers_html(answers.numbers(review, bench)))


def to_do(review: answers.Row) -> None:
    """What uses it up, what would help, whom to ask, and what to heed."""
    if questions := answers.question_lines(review):
        session.section("Ask the maker")
        for question in questions:
            st.markdown(f"- {pieces.plain(question)}")
    if lines := answers.advice_lines(review):
        session.section("Load capacitors and what else would help")
        for line in lines:
            st.markdown(f"- {line}")
    for key, name in answers.CONTRIBUTORS.items():
        if shares := answers.shares(review, key):
            session.section(f"{name}")
            st.html(pieces.shares_html(shares))
    session.section("Before it is signed")
    for line in answers.open_lines(review):
        st.markdown(f"- {pieces.plain(line)}")
    for caution in CAUTIONS:
        st.markdown(f"- {caution}")
    st.markdown(f":gray[:small[{PRIVACY}]]")
