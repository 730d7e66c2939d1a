"""Below the drawing: how much ESR the circuit bears, load capacitors to try, and the IC's gm settings."""

from __future__ import annotations

from collections.abc import Sequence

import streamlit as st

from compare import answers, bearing, bearing_text, page_charts, pieces, review_html
from compare import page_session as session
from compare.bench import Bench
from compare.desk import field_of
from compare.figures import CLOCK_BELOW_MHZ
from compare.page_results import remembered
from compare.page_trial import try_it
from compare.ranking import Ranked

MOST_ADVICE = 4
# Of a list of thousands the best as the circuit is now; all of them would take minutes.
MOST_PARTS = 100


def candidates(bench: Bench) -> Ranked | None:
    """The parts read, ranked in this circuit; None where there is none."""
    if not any(sheet.parts for sheet in session.sheets()):
        return None
    contest = session.contest(bench)
    return contest if contest is not None and len(contest) else None


def chosen_at(contest: Ranked) -> int:
    """The place of the chosen part in the order, from 0."""
    chosen = st.session_state.get("chosen")
    if chosen is None:
        return 0
    known = remembered("known", (contest,), None, lambda: answers.identities(contest.names))
    return known.index(chosen) if chosen in known else 0


def bears(bench: Bench, contest: Ranked | None) -> None:
    session.section("How much ESR this circuit can bear")
    rows, c0 = _bearings(session.key_of(bench, session.sheets()), bench, contest)
    heads, cells = bearing_text.bearing_table(rows, bench)
    st.html(review_html.table_html(heads, cells, (0, 1, 2, 3)))
    st.html(f'<p class="qf-small">{bearing_text.bearing_note(c0, parts=contest is not None)}</p>')
    for said in bearing_text.cannot_be_met(rows, bench):
        st.markdown(f"- {pieces.plain(said)}")


def advice(bench: Bench, contest: Ranked) -> None:
    """Load capacitors for the chosen part, each to be tried at a press."""
    at = chosen_at(contest)
    dossier = page_charts.dossier(contest, contest.ordered[at], bench)
    if dossier is None:
        return
    session.section(f"Load capacitors for {pieces.plain(answers.row_name(dossier.review))}")
    for number, (said, sets, name) in enumerate(bearing_text.advice_rows(dossier.review)[:MOST_ADVICE]):
        button, words = st.columns([1, 7.5], gap="small", vertical_alignment="center")
        button.button("Try it", key=f"try_{number}", on_click=try_it, args=(sets, name))
        words.markdown(pieces.plain(said) + ".")
    for said in dossier.review.get("advice_messages", ()):
        st.markdown(pieces.plain(answers.told(said)))


@st.cache_resource(max_entries=16, show_spinner=False)
def _bearings(key: str, _bench: Bench, _contest: Ranked | None) -> tuple[list[bearing.Bearing], float]:  # noqa: ARG001
    return bearing.bearings(_bench, None if _contest is None else _contest.reckoning)


@st.cache_resource(max_entries=16, show_spinner=False)
def _settings(key: str, gains: tuple[float, ...], _bench: Bench, _contest: Ranked) -> list[list[bearing.Setting]]:  # noqa: ARG001
    if _contest.reckoning is None:
        return []
    return bearing.gm_settings(_bench, _contest.reckoning.columns.take(_contest.ordered[:MOST_PARTS]), gains)


def gain_settings(bench: Bench, contest: Ranked | None) -> None:
    """Below 1 MHz: rated load by gm setting of the IC, each with margin and ppm."""
    if bench.requirement.frequency_mhz >= CLOCK_BELOW_MHZ:
        return
    session.section("Settings of the IC’s gm")
    kept, key = str(session.slot("settings").get("gm", "")), "field_gm_settings"
    st.session_state.setdefault(key, kept)
    st.text_input("gm settings of the IC", key=key, placeholder="3.5 5.5 8 11.5 µS", on_change=_put, args=(key,))
    gains, fault = bearing_text.settings_of(kept, field_of("circuit.transconductance_ms.low"))
    if fault:
        st.html(pieces.fault_html(fault))
    if not gains:
        st.html('<p class="qf-small">With them: margin and ppm for each rated load at each setting.</p>')
    elif contest is None:
        st.markdown("Open sheets of crystals for this frequency: the table is of what they offer.")
    else:
        rows = _settings(session.key_of(bench, session.sheets()), tuple(gains), bench, contest)
        show(rows, bench)


def show(rows: Sequence[Sequence[bearing.Setting]], bench: Bench) -> None:
    heads, cells = bearing_text.settings_table(rows)
    st.html(review_html.table_html(heads, cells, (0, 1)))
    st.html(
        '<p class="qf-small">In each place: least margin; ppm in all. ▲ meets what is asked, ▮ the least that does.</p>'
    )
    st.markdown(pieces.plain(bearing_text.settings_sentence(rows, bench)))


def _put(key: str) -> None:
    session.put_slot("settings", {"gm": st.session_state[key]}, "gm settings of the IC")
