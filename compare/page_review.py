"""The Review view: one part in full."""

from __future__ import annotations

from typing import Any

import streamlit as st

from compare import answers, choose_shown, pieces, review_shown
from compare import page_session as session
from compare.bench import Bench
from compare.cautions import CAUTIONS
from compare.desk import PRIVACY
from compare.page_shared import others, ready, review_of


def review_view() -> None:
    if (bench := ready()) is None:
        return
    result = session.ranking(bench)
    if result is None:
        return
    if not result["rows"]:
        session.title(f"{pieces.plain(choose_shown.choose_heading(result, bench))}")
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
        return choose_shown.place_heading(rows[place])

    st.session_state.review_part = st.session_state.chosen
    st.selectbox("Part under review", list(rows), format_func=name, key="review_part", on_change=choose)


def choose() -> None:
    st.session_state.chosen = st.session_state.review_part


def judged(review: answers.Row, bench: Bench) -> None:
    session.title(f"{pieces.plain(review_shown.review_heading(review))}")
    st.markdown(pieces.plain(review_shown.short_of(review)))
    st.html(pieces.judged_html(review_shown.judged(review, bench)))
    session.section("Every number")
    st.markdown(
        ":gray[:small[Press a number to see how it was reached. Low and high are its ends, not worse and better.]]"
    )
    st.html(pieces.numbers_html(review_shown.numbers(review, bench)))


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
    for key, name in review_shown.CONTRIBUTORS.items():
        if shares := review_shown.shares(review, key):
            session.section(f"{name}")
            st.html(pieces.shares_html(shares))
    session.section("Before it is signed")
    for line in review_shown.open_lines(review):
        st.markdown(f"- {pieces.plain(line)}")
    for caution in CAUTIONS:
        st.markdown(f"- {caution}")
    st.markdown(f":gray[:small[{PRIVACY}]]")
