"""What Choose, Substitute and Review have in common: whether there is anything to judge, one part's review, notes."""

from __future__ import annotations

import hashlib
from collections.abc import Callable, Mapping
from typing import Any

import streamlit as st

from compare import answers, export, pieces
from compare import page_session as session
from compare.bench import Bench
from compare.cautions import CAUTIONS
from compare.desk import NO_CIRCUIT, NO_PARTS, NOTHING_OPEN, PRIVACY, STILL_READING, field_of
from compare.export import DECIMAL_MARKS, SEPARATORS, Table
from compare.page_copy import copy_button, figures
from extract.model import SpecSheet

__all__ = ["copy_button", "figures"]


def something_open(to_do: str = "rank") -> bool:
    """True where there is any part; else what to do is said. `to_do` is what the view would do with them."""
    if any(sheet.parts for sheet in session.sheets()):
        return True
    session.title(f"Nothing to {to_do} yet")
    st.markdown(NO_PARTS if session.sheets() else STILL_READING if session.reader().now else NOTHING_OPEN)
    with st.container(horizontal=True, gap="small"):
        if st.button("Add sheets", key="to_sheets", type="primary"):
            session.go("sheets")
        if st.button("Open the orchard example", key="orchard_here"):
            session.open_example()
            st.rerun()
    return False


def ready(to_do: str = "rank") -> Bench | None:
    """The bench, where there is something to judge; else what to do is said and None is returned."""
    if not something_open(to_do):
        return None
    desk = session.desk()
    for key, fault in desk.faults.items():
        st.html(pieces.fault_html(f"{field_of(key).label if key else 'Circuit'}: not used. {fault}"))
    if desk.bench is None:
        session.title("No circuit yet")
        st.markdown(NO_CIRCUIT)
        if st.button("Set the circuit", key="to_circuit", type="primary"):
            session.go("circuit")
    return desk.bench


def cautions() -> None:
    st.markdown(f":gray[:small[{' '.join(CAUTIONS)} {PRIVACY}]]")


def review_of(sheet: SpecSheet, bench: Bench) -> answers.Row | None:
    """The review of the one part of a sheet, worked out for it alone."""
    key = f"{session.key_of(bench, [sheet])} {fingerprint(sheet)}"
    result = session.guarded("working the part out", lambda: session.reviewed(key, [sheet], bench))
    return None if result is None or not result["reviews"] else dict(result["reviews"][0])


def fingerprint(sheet: SpecSheet) -> str:
    """What tells apart parts of one number on one sheet."""
    return hashlib.sha256("".join(part.model_dump_json() for part in sheet.parts).encode()).hexdigest()[:16]


def save_buttons(
    name: str,
    copied: Table,
    tables: Callable[[], Mapping[str, Table]],
    result: Callable[[], Mapping[str, Any]],
    *,
    key: str,
) -> None:
    """Copy the table in view; save all there is as workbook, CSV or JSON, made when it is asked for.

    The first of `tables` is the one that the CSV holds; `result` is the data contract's JSON.
    """
    separator, decimal = csv_signs()
    with st.container(horizontal=True, vertical_alignment="center", gap="small"):
        copy_button(export.as_tabs(copied, decimal), key=f"copy_{key}")
        st.download_button(
            "Save .xlsx", lambda: export.as_xlsx(tables()), f"{name}.xlsx", key=f"xlsx_{key}", on_click="ignore"
        )
        st.download_button(
            "Save .csv",
            lambda: export.as_csv(next(iter(tables().values())), separator, decimal),
            f"{name}.csv",
            key=f"csv_{key}",
            on_click="ignore",
        )
        st.download_button(
            "Save .json", lambda: export.as_json(result()), f"{name}.json", key=f"json_{key}", on_click="ignore"
        )
        with st.popover("CSV signs"):
            st.selectbox("Decimal mark", list(DECIMAL_MARKS), key="decimal_mark", persist_state="session")
            st.selectbox("Between columns", list(SEPARATORS), key="separator", persist_state="session")
            st.markdown(":gray[:small[A decimal comma always takes the semicolon. The mark holds for copies too.]]")


def csv_signs() -> tuple[str, str]:
    """Separator and decimal mark as chosen; a decimal comma cannot have a comma beside it."""
    decimal = DECIMAL_MARKS[st.session_state.get("decimal_mark", "point")]
    chosen = SEPARATORS[st.session_state.get("separator", "comma")]
    return (SEPARATORS["semicolon"] if decimal == "," else chosen), decimal
