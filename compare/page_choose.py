"""The Choose view: the candidates in order, filters and supply before weights, and why the chosen one stands there."""

from __future__ import annotations

import hashlib
from collections.abc import Iterable, Sequence
from typing import Any

import streamlit as st

from compare import (
    answers,
    approval,
    bearing_text,
    charts,
    choose_shown,
    choosing,
    curves,
    export,
    page_charts,
    pieces,
    review_shown,
)
from compare import page_session as session
from compare.bench import Bench
from compare.choosing import Candidate, Field, Sifted
from compare.page_charts import picture
from compare.page_copy import copy_button, figures
from compare.page_filters import asked, filter_line, weights, weights_line
from compare.page_results import field_of, remembered
from compare.page_shared import cautions, ready, review_of, save_buttons
from compare.page_supply import supply_editor
from compare.page_trial import try_it
from compare.ranking import Ranked
from compare.sheet_lines import corrections_table
from compare.sheets_json import notes_of
from compare.work import part_key

SIZE = 1.08
"""Of the charts beside the rows: their type as large as the page's."""


def choose_view() -> None:
    if (bench := ready()) is None:
        return
    contest = session.contest(bench)
    if contest is None:
        return
    chosen_before()
    left, right = st.columns([1.54, 1], gap="medium")
    with left:
        found = ranked(contest, bench)
    if found is not None:
        with right:
            why(found[0], found[1], contest, bench)


def chosen_before() -> None:
    """What was chosen when the page was last open."""
    if st.session_state.chosen is None and (kept := session.slot("selection").get("part")):
        st.session_state.chosen = tuple(kept)


def choose(identity: answers.Identity) -> None:
    """Make a part the chosen one, also after a reload."""
    if st.session_state.chosen == identity:
        return
    st.session_state.chosen = identity
    session.put_slot("selection", {**session.slot("selection"), "part": list(identity)})


def ranked(contest: Ranked, bench: Bench) -> tuple[Candidate, Sifted] | None:
    """The heading, the filters and the rows; returns the chosen row and all that the filters leave."""
    session.title(pieces.plain(remembered("heading", (contest, bench), None, lambda: heading(contest, bench))))
    slot = session.slot("supply")
    field = remembered("field", (contest, slot), None, lambda: field_of(contest, slot))
    parts = sum(len(sheet.parts) for sheet in session.sheets())
    if not field.every:
        other_parts(contest, parts, open_at_once=True)
        return None
    filters, weighed = asked(), weights()
    offered = choose_shown.offered_text(len(field.every), parts, bench)
    filter_line(filters, field.choices, offered, lambda: other_parts(contest, parts))
    weights_line(filters)
    sifted = remembered("sifted", (field,), (filters, weighed), lambda: choosing.sift(field.every, filters, weighed))
    if said := choosing.left_out_text(sifted, len(field.every)):
        limits = choosing.limits_text(filters, sifted.currency)
        st.markdown(f":gray[:small[{pieces.plain(said + (f' ({limits})' if limits else ''))}.]]")
    if not sifted.shown:
        st.markdown("No part passes these filters. Take one back to see the others.")
        return None
    picked = rows(sifted, contest)
    actions(sifted, contest)
    to_ask(contest, field)
    cautions()
    return picked, sifted


def heading(contest: Ranked, bench: Bench) -> str:
    nearest = answers.tightest_text(contest.row(1)) if len(contest) else ""
    return choose_shown.choose_heading(contest.briefs, bench, nearest)


def rows(sifted: Sifted, contest: Ranked) -> Candidate:
    """The page of rows in view; returns the chosen one, which may stand on another page."""
    places = sifted.identities
    if st.session_state.chosen not in places:
        choose(places[0])
    page = page_in_view(places)
    here = slice(page * choose_shown.PAGE_ROWS, (page + 1) * choose_shown.PAGE_ROWS)
    shown = [whole(one, contest) for one in sifted.shown[here]]
    at = places[here].index(st.session_state.chosen) if st.session_state.chosen in places[here] else None
    frame = choose_shown.rank_frame(shown, session.palette())
    order = hashlib.sha256(repr((places[here], list(frame.columns))).encode()).hexdigest()[:12]
    column = st.column_config
    picked = st.dataframe(
        frame,
        hide_index=True,
        row_height=44,
        height=min(38 + 44 * len(shown), 610),
        on_select="rerun",
        selection_mode="single-row",
        selection_default=None if at is None else session.first_row(at),
        key=f"ranked_{order}",
        alt="Candidates in order, with their verdicts",
        column_config={
            "Place": column.NumberColumn(width=48),
            "Part": column.TextColumn(width=134),
            "Verdict": column.TextColumn(width=92),
            "Look": column.TextColumn(width=46),
            choose_shown.STRIP_COLUMN: column.ImageColumn(width=204),
            "Tightest": column.TextColumn(width=168),
        },
    )
    if chosen := list(picked.selection.rows):
        choose(places[here][chosen[0]])
    turn_pages(page, len(places))
    st.markdown(f":gray[:small[{choose_shown.strips_legend([one.row for one in shown])}]]")
    return whole(sifted.shown[places.index(st.session_state.chosen)], contest)


def whole(one: Candidate, contest: Ranked) -> Candidate:
    """The candidate with its row's sentences."""
    return Candidate(contest.row(one.row["place"]), one.supply)


def page_in_view(places: list[answers.Identity]) -> int:
    """The page that was turned to; where the rows changed since, the one with the chosen row."""
    state = st.session_state
    order = hash(tuple(places))
    if state.get("rows_order") != order:
        state.rows_order, state.rows_page = order, choose_shown.page_of(places, state.chosen)
    return int(state.rows_page)


def turn_pages(page: int, count: int) -> None:
    if not (said := choose_shown.page_text(page, count)):
        return
    last = (count - 1) // choose_shown.PAGE_ROWS
    with st.container(horizontal=True, vertical_alignment="center", gap="small"):
        st.button("First", key="rows_first", disabled=page == 0, on_click=turn_to, args=(0,))
        st.button("Earlier", key="rows_before", disabled=page == 0, on_click=turn_to, args=(page - 1,))
        st.markdown(f":gray[{said}]", width="content")
        st.button("Later", key="rows_after", disabled=page == last, on_click=turn_to, args=(page + 1,))


def turn_to(page: int) -> None:
    st.session_state.rows_page = page


def actions(sifted: Sifted, contest: Ranked) -> None:
    """Copy what is in view; save all that is shown, the filters applied."""
    view = [whole(one, contest) for one in in_view(sifted)]
    # What is saved is made once it is asked for, by then outside the session.
    work, sheets, decided = session.work(), session.sheets(), session.slot("decisions")
    approvals = approval.by_candidate(decided)

    def table(of: Sequence[Candidate], numbers: Iterable[str]) -> export.Table:
        said = [approvals.get(part_key(one.row), "") for one in of]
        return export.rank_table([o.row for o in of], numbers, supplies=[o.supply for o in of], approvals=said)

    def tables() -> dict[str, export.Table]:
        long = len(sifted.shown) > export.MOST_SOURCED
        every = [Candidate(contest.row(one.row["place"], whole=not long), one.supply) for one in sifted.shown]
        first = [whole(one, contest).row for one in sifted.shown[: export.MOST_SOURCED]]
        return {
            "ranking": table(every, answers.FIGURES),
            "numbers": export.numbers_table(first),
            "sources": export.sources_table(sheets, first),
            "decisions": approval.table(decided),
            "corrections": corrections_table(work),
        }

    def result() -> dict[str, Any]:
        told = contest.result()
        return {**told, "notes": [*notes_of(sheets), *told["notes"]]}

    save_buttons("ranking", table(view, answers.STRIPS), tables, result, key="ranking")
    with st.expander("All numbers", key="all_numbers", on_change="rerun") as opened:
        if opened.open:
            heads, wide = export.rank_table([one.row for one in view], supplies=[one.supply for one in view])
            columns = dict(zip(heads, zip(*wide, strict=True), strict=True))
            st.dataframe(
                columns, hide_index=True, placeholder="", key="wide_table", alt="All numbers of the rows in view"
            )
    supply_editor(view, sifted.shown)


def in_view(sifted: Sifted) -> list[Candidate]:
    page = int(st.session_state.rows_page)
    return sifted.shown[page * choose_shown.PAGE_ROWS : (page + 1) * choose_shown.PAGE_ROWS]


def other_parts(contest: Ranked, parts: int, *, open_at_once: bool = False) -> None:
    """What is not among the rows, and what the bench leaves open, one press away."""
    lines = choose_shown.other_lines(contest.notes)
    if not lines:
        return
    label = choose_shown.others_label(len(contest), parts) or "Notes"
    place = st.container() if open_at_once else st.popover(label, type="tertiary", key="others")
    with place:
        for line in lines:
            st.markdown(f"- {pieces.plain(line)}")


def to_ask(contest: Ranked, field: Field) -> None:
    """Ready questions about the parts that cannot be told, best first."""
    untold = field.untold
    asks = choose_shown.to_ask([contest.row(place) for place in untold[:8]])
    if not asks:
        return
    session.section(choose_shown.ask_heading(len(untold)))
    for number, (part, question) in enumerate(asks):
        words, button = st.columns([7, 1], gap="small", vertical_alignment="center")
        words.markdown(f":small[**{pieces.plain(part)}**: “{pieces.plain(question)}”]")
        with button:
            copy_button(question, key=f"ask_{number}", label="Copy")


def why(picked: Candidate, sifted: Sifted, contest: Ranked, bench: Bench) -> None:
    """The chosen row's reasons: the slack chart, the reasons in words, ppm against load, what would help."""
    session.section(pieces.plain(choose_shown.place_heading(picked.row)))
    above(picked, sifted, contest)
    review = review_of(contest.sheet_of(picked.row["place"]), bench)
    if review is None:
        return
    if said := answers.chosen_text(picked.row):
        st.markdown(f":gray[{pieces.plain(said)}]")
    slack = charts.slack_chart(answers.slack_rows(review, bench))
    picture(slack.draw(session.palette()), key="slack", widest=SIZE)
    st.markdown(":gray[:small[▮ worst case · ○ nominal · hatched: not met · dotted: not known]]")
    reasons_of(review, bench)
    drawn = [slack, *load_chart(picked, contest)]
    with st.expander("The same as tables"):
        for chart in drawn:
            page_charts.table(chart.table, f"{chart.name}_table")
    advice(review)
    onward(picked)
    if known := choose_shown.supply_rows(picked):
        figures(pieces.supply_html(known), key="supply")


def advice(review: answers.Row) -> None:
    """What would help most, to be tried at once; all views follow a trial."""
    review = bearing_text.helpful(review)
    for said, values, name in bearing_text.advice_rows(review)[:1]:
        with st.container(horizontal=True, vertical_alignment="center", gap="small"):
            st.markdown(f"{pieces.plain(said)}.", width="content")
            st.button("Try it", key="try_advice", on_click=try_it, args=(values, name))
    for said in review.get("advice_messages", ())[:1]:
        st.markdown(pieces.plain(answers.told(said)))


def above(picked: Candidate, sifted: Sifted, contest: Ranked) -> None:
    """In a sentence why it stands above another row; the next one at first."""
    state = st.session_state
    places, by_place = sifted.places, sifted.by_place
    if picked.row["place"] not in places or len(places) < 2:
        return
    at = places.index(picked.row["place"])
    near = [place for place in places[max(at - 40, 0) : at + 60] if place != picked.row["place"]]
    following = places[at + 1] if at + 1 < len(places) else places[at - 1]
    key = f"beside_{picked.row['place']}"
    if state.setdefault(key, following) not in near:
        state[key] = following
    with st.container(horizontal=True, vertical_alignment="center", gap="small"):
        st.markdown("Beside", width="content")
        other = st.selectbox(
            "Beside which row",
            near,
            format_func=lambda place: choose_shown.place_heading(by_place[place].row),
            key=key,
            label_visibility="collapsed",
        )
    first, second = sorted((picked.row["place"], other), key=places.index)
    upper, lower = (whole(by_place[place], contest) for place in (first, second))
    st.markdown(pieces.plain(choosing.why_above(upper, lower, sifted, asked().by, weights())))


def reasons_of(review: answers.Row, bench: Bench) -> None:
    """The reasons that decide in full; those that meet a step away."""
    judged = review_shown.judged(review, bench)
    deciding = [one for one in judged if not one.meets]
    for one in deciding:
        st.markdown(f"{one.verdict[0]} **{pieces.plain(one.requirement)}**: {pieces.plain(one.why)}")
    met = [one for one in judged if one.meets]
    if not met:
        return
    with st.expander(f"Why the other {len(met)} meet" if deciding else f"Why all {len(met)} meet"):
        for one in met:
            st.markdown(f":small[▲ **{pieces.plain(one.requirement)}**: {pieces.plain(one.why)}]")


def load_chart(picked: Candidate, contest: Ranked) -> list[charts.Chart]:
    """The shift in ppm over the load; none where there is no curve."""
    if contest.reckoning is None:
        return []
    curve = curves.ppm_against_load(contest.reckoning, contest.ordered[picked.row["place"] - 1])
    chart = charts.load_chart(curve)
    session.section(chart.title)
    picture(chart.draw(session.palette()), key="load", widest=SIZE)
    return [chart]


def onward(picked: Candidate) -> None:
    """The three ways on from the chosen part."""
    with st.container(horizontal=True, gap="small"):
        if st.button("Review this part", key="to_review", type="primary", shortcut="V"):
            session.go("review")
        if st.button("Find substitutes for it", key="to_substitute", shortcut="J"):
            kept: dict[str, Any] = dict(session.slot("selection"))
            kept.pop("candidate", None)
            session.put_slot("selection", {**kept, "incumbent": list(st.session_state.chosen)})
            session.go("substitute")
        if st.button("Its sheet", key="to_its_sheet", shortcut="S"):
            session.show_part(picked.row["file"], picked.row["part_number"])
            session.go("sheets")
