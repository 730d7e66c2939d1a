"""What Choose, Substitute and Review have in common: whether there is anything to judge, one part's review, notes."""

from __future__ import annotations

from typing import Any

import streamlit as st

from compare import answers, pieces
from compare import page_session as session
from compare.bench import Bench
from compare.cautions import CAUTIONS
from compare.desk import NO_CIRCUIT, NO_PARTS, NOTHING_OPEN, PRIVACY, field_of


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
