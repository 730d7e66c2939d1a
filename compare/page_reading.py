"""The line that says what is being read, and the button that stops it; it is drawn afresh without the rest."""

from __future__ import annotations

import streamlit as st

from compare import page_session as session
from compare import pieces

EVERY_S = 1.0


def told_of_reading() -> None:
    """How far the reading has come; where it was stopped, that, and the rest to read when wanted."""
    reader = session.reader()
    if reader.now is not None or reader.news:
        st.fragment(_line, run_every=EVERY_S)()
    elif reader.left:
        with st.container(horizontal=True, vertical_alignment="center", gap="small"):
            st.markdown(pieces.plain(reader.stopped_sentence), width="content")
            st.button("Read the rest", key="read_rest", on_click=_read_rest)


def _line() -> None:
    reader = session.reader()
    now = reader.now
    if now is None or reader.news:
        # What is finished belongs into the list, and the page that shows it is drawn whole.
        st.rerun()
    with st.container(horizontal=True, vertical_alignment="center", gap="small"):
        st.markdown(pieces.plain(now.said()), width="content")
        st.button("Stop", key="stop_reading", on_click=reader.stop)


def _read_rest() -> None:
    session.open_sheets(session.reader().left)
