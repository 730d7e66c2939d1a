"""A trial of other values in the circuit: all views follow it, until it is kept or put back."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import replace

import streamlit as st

from compare import page_session as session
from compare import pieces
from compare.work import Work


def try_it(values: Mapping[str, str], said: str) -> None:
    """Put these texts into the bench's fields as a trial; what they were before is kept with it, also over a reload.

    For `on_click`. A trial on top of a trial keeps the first one's way back.
    """
    desk, kept = session.desk(), session.slot("trial")
    before = kept.get("before") or {key: desk.typed.get(key, "") for key in values}
    before = {**{key: desk.typed.get(key, "") for key in values}, **before}
    tried = replace(desk, typed={**desk.typed, **values})
    session.forget_fields()
    session.remember(session.work().with_desk(tried).with_slot("trial", {"said": said, "before": before}))


def banner() -> None:
    """What is being tried, with the two ways out of it; nothing where nothing is."""
    kept, place = session.slot("trial"), st.container()
    if not kept:
        return
    with place.container(horizontal=True, vertical_alignment="center", gap="small", key="trial"):
        st.markdown(f"**Trial:** {pieces.plain(str(kept['said']))}.", width="content")
        st.button("Keep", key="keep_trial", on_click=keep, type="primary")
        st.button("Put back", key="drop_trial", on_click=put_back)


def put_back() -> None:
    session.forget_fields()
    session.remember(_as_before())


def keep() -> None:
    """Make the trial a step that can be undone."""
    said, tried = session.slot("trial")["said"], session.desk()
    session.remember(_as_before())
    session.set_desk(tried, f"Tried and kept: {said}")


def _as_before() -> Work:
    desk, kept = session.desk(), session.slot("trial")
    typed = {key: text for key, text in {**desk.typed, **kept["before"]}.items() if text or key not in kept["before"]}
    return session.work().with_desk(replace(desk, typed=typed)).with_slot("trial", None)
