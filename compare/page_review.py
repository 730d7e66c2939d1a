"""The Review view: one part in full, each number open to how it was reached, and the report that goes out."""

from __future__ import annotations

import streamlit as st

from compare import (
    answers,
    bench_lines,
    choose_shown,
    failures,
    page_charts,
    pieces,
    review_html,
    review_shown,
    verdict_lines,
)
from compare import page_session as session
from compare.cautions import CAUTIONS
from compare.charts import slack_chart
from compare.corrections import Line
from compare.desk import PRIVACY
from compare.dossier import Dossier
from compare.figures import frequency_text
from compare.page_circuit import field
from compare.page_evidence import evidence_of
from compare.page_report import save_report
from compare.page_shared import ready
from compare.ranking import Ranked
from compare.shown import NAMES, how, value_text
from compare.working import words, working

NONE_OFFERS = "Choose says what each of them offers instead."
MOST_OFFERED = 200
MEASURED = ("stopping_resistor_ohm", "frequency_mhz", "startup_ms", "probe_pf", "probe_at")


def review_view() -> None:
    if (bench := ready("review")) is None:
        return
    contest = session.contest(bench)
    if contest is None:
        return
    if not len(contest):
        session.title(f"None of the parts read offers {frequency_text(bench.requirement.frequency_mhz)}")
        st.markdown(NONE_OFFERS)
        return
    left, right = st.columns([1.75, 1], gap="large")
    with right:
        place = choose_part(contest)
    dossier = page_charts.dossier(contest, contest.ordered[place], bench)
    if dossier is None:
        return
    with left:
        verdict(dossier)
        charts(dossier)
        measured(dossier)
        every_number(dossier)
        what_fails(dossier)
    with right:
        save_report(dossier)
        the_sheet(dossier)
        to_do(dossier)


def choose_part(contest: Ranked) -> int:
    """The part under review, by its place in the order from 0."""
    known = answers.identities(contest.briefs)
    if st.session_state.chosen is None and (kept := session.slot("selection").get("part")):
        st.session_state.chosen = tuple(kept)
    at = known.index(st.session_state.chosen) if st.session_state.chosen in known else 0
    st.session_state.chosen = known[at]

    def name(place: int) -> str:
        return choose_shown.place_heading(contest.briefs[place])

    def chosen() -> None:
        st.session_state.chosen = known[st.session_state.review_part]
        session.put_slot("selection", {**session.slot("selection"), "part": list(st.session_state.chosen)})

    # Of a list of thousands the first, which are the best, and the one chosen.
    offered = sorted({*range(min(len(known), MOST_OFFERED)), at})
    st.session_state.review_part = at
    st.selectbox("Part under review", offered, format_func=name, key="review_part", on_change=chosen)
    return at


def verdict(dossier: Dossier) -> None:
    lines = verdict_lines.verdict_lines(dossier)
    session.title(pieces.plain(verdict_lines.heading(dossier.review, lines)))
    st.markdown(pieces.plain(" ".join(verdict_lines.sentences(dossier, lines))))
    st.html(review_html.verdict_html(lines))


def charts(dossier: Dossier) -> None:
    """The charts two by two, or their tables in the same places."""
    with st.container(horizontal=True, vertical_alignment="center", gap="small", key="charts_line"):
        tables = st.toggle("Show tables", key="show_tables", help="Each chart's figures in its place")
        st.html(
            '<span class="qf-small">▮ worst case · ○ nominal · hatched: outside the limit · tinted: what IC or '
            "tolerances may do</span>"
        )
    drawn = [*dossier.charts.values(), slack_chart(answers.slack_rows(dossier.review, dossier.bench))]
    for first in range(0, len(drawn), 2):
        columns = st.columns(2, gap="medium")
        for column, chart in zip(columns, drawn[first : first + 2], strict=False):
            with column:
                page_charts.draw(chart, key=chart.name, tables=tables, save=True)
    for said in dossier.not_drawn:
        st.markdown(f":gray[{pieces.plain(answers.told(said))}]")


def the_sheet(dossier: Dossier) -> None:
    """A reading that was used, with the page that it stands on."""
    if not st.toggle("Show a reading on its sheet", key="show_sheet"):
        return
    readings = [one for taken in dossier.offer.taken().values() for one in taken.readings]
    opened = next(
        (one for one in session.work().sheets if (one.sheet.file, one.sheet.sha256) == _named(dossier)),
        None,
    )
    if not readings or opened is None:
        st.markdown("No reading of a sheet was used.")
        return

    def name(at: int) -> str:
        return f"{NAMES[readings[at].field]}: {value_text(readings[at])}, {how(readings[at])}"

    at = st.selectbox("Reading", range(len(readings)), format_func=name, key="sheet_reading")
    evidence_of(opened, Line(at, readings[at], None if readings[at].status == "entered" else readings[at]))


def _named(dossier: Dossier) -> tuple[str, str | None]:
    return dossier.sheet.file, dossier.sheet.sha256


def every_number(dossier: Dossier) -> None:
    session.section("Every number")
    st.html(
        '<p class="qf-small">Press a number for formula, values and places. Low and high are ends, not worse and '
        "better.</p>"
    )
    shown = review_shown.keyed_numbers(dossier.review, dossier.bench)
    explained = [(one, working(dossier, key) if key in words() else None) for key, one in shown]
    st.html(review_html.numbers_html(explained))


def what_fails(dossier: Dossier) -> None:
    if not dossier.failures:
        return
    with st.expander("What happens when something fails: a table to start from"):
        rows = [one.cells for one in dossier.failures]
        st.html(review_html.table_html(failures.HEADS, rows, (2, 3)))


def to_do(dossier: Dossier) -> None:
    """What is open, what uses it up, what would help, whom to ask, and what to heed."""
    review = dossier.review
    session.section("Before it is signed")
    for line in review_shown.open_lines(review) or ["Nothing is left open in the readings."]:
        st.markdown(f"- {pieces.plain(line)}")
    for question in answers.question_lines(review):
        st.markdown(f"- Ask: “{pieces.plain(question)}”")
    for key, name in review_shown.CONTRIBUTORS.items():
        if shares := review_shown.shares(review, key):
            session.section(f"{name}, worst case")
            st.html(pieces.shares_html(shares))
    if lines := answers.advice_lines(review):
        with st.expander("Load capacitors, and what else would help"):
            for line in lines:
                st.markdown(f"- {line}")
    if review["verdict"] == "falls short":
        single_changes(dossier)
    with st.expander("Crystal as a SPICE subcircuit"):
        subcircuits(dossier)
    with st.expander("Cautions"):
        for caution in CAUTIONS:
            st.markdown(f"- {caution}")
    st.markdown(f":gray[:small[{PRIVACY}]]")


def single_changes(dossier: Dossier) -> None:
    """What one change alone would make it meet; tried only when asked for: each goes through the whole chain."""
    if not st.toggle("Try single changes", key="single_changes", help="Each through the whole chain: about a second"):
        return
    found = session.guarded("trying single changes", lambda: page_charts.single_changes(dossier))
    for said in found or ():
        st.markdown(f"- {pieces.plain(answers.told(said))}")
    if found == []:
        st.markdown("No single change would do.")


def subcircuits(dossier: Dossier) -> None:
    nominal, limit = dossier.subcircuit("nominal"), dossier.subcircuit("limit")
    if nominal is None or limit is None:
        st.markdown("The sheet states too little for one: it takes an ESR, and a rated load or series resonance.")
        return
    st.markdown("Four elements between two nodes, with the place of each value in its head.")
    with st.container(horizontal=True, gap="small"):
        st.download_button("Nominal", nominal, "crystal_nominal.cir", key="spice_nominal", on_click="ignore")
        st.download_button("Slowest to start", limit, "crystal_limit.cir", key="spice_limit", on_click="ignore")


def measured(dossier: Dossier) -> None:
    """What the bench shows, typed in beside what is computed."""
    session.section("Measured on the bench")
    rows = [one.cells for one in bench_lines.bench_lines(dossier)]
    st.html(review_html.table_html(bench_lines.HEADS, rows))
    with st.expander("Enter readings", expanded=False):
        columns = st.columns(3, gap="small")
        for at, name in enumerate(MEASURED):
            with columns[at % 3]:
                field(f"measured.{name}")
