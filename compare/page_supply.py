"""Price, stock and lead time of the rows in view, typed or taken over from a list."""

from __future__ import annotations

import hashlib
from collections.abc import Sequence
from typing import Any

import streamlit as st

from compare import choose_shown, pieces, supply
from compare import page_session as session
from compare.answers import row_name
from compare.choosing import Candidate
from compare.figures import counted
from compare.work import part_key

IMPORT_WORDS = "A list with a column of part numbers: CSV or workbook. What it does not have stays as it is."


def supply_editor(shown: Sequence[Candidate], every: Sequence[Candidate]) -> None:
    """An editor for the rows in view, and a field for lists."""
    with st.expander("Price, stock, lead time", key="supply_open"):
        frame = choose_shown.supply_frame(shown)
        key = f"supply_{hashlib.sha256(frame.to_csv().encode()).hexdigest()[:12]}"
        column = st.column_config
        st.data_editor(
            frame,
            hide_index=True,
            num_rows="fixed",
            disabled=["Part"],
            key=key,
            on_change=take_edits,
            args=(key, [dict(one.row) for one in shown]),
            alt="Supply of the parts, to be typed in",
            column_config={
                "Part": column.TextColumn(width=134),
                **{
                    name: column.SelectboxColumn(one.heading, options=["", *supply.statuses()])
                    if one.kind == "status" and not unusual(frame[name])
                    else column.TextColumn(one.heading)
                    for name, one in supply.columns().items()
                },
            },
        )
        st.markdown(f":gray[:small[Each value is kept with today’s date and your name. {IMPORT_WORDS}]]")
        take_list(every)
        for said in st.session_state.get("supply_said", ()):
            st.markdown(f":small[{pieces.plain(said)}]")


def unusual(values: Any) -> bool:
    """True where a list gave a status in words of its own, which a fixed choice could not show."""
    return bool(set(values) - {"", *supply.statuses()})


def take_edits(key: str, rows: list[dict[str, Any]]) -> None:
    """Keep what was typed; what is not understood is said and costs nothing else."""
    slot, said, names = session.slot("supply"), [], []
    day = session.today()[:10]
    for at, cells in st.session_state[key]["edited_rows"].items():
        row = rows[int(at)]
        values: dict[str, Any] = {}
        for name, text in cells.items():
            column = supply.columns()[name]
            try:
                value = supply.understand(column, text) if text and text.strip() else None
            except supply.SupplyError as fault:
                said.append(f"▼ {row_name(row)}, {column.name.lower()}: {fault}; not used")
                continue
            values[name] = value if value is None else supply.kept(value, day, supply.TYPED, session.person())
            names.append(f"{column.name.lower()} of {row_name(row)}")
        slot = supply.with_values(slot, part_key(row), values)
    st.session_state.supply_said = said
    if names:
        session.put_slot("supply", slot, ", ".join(names[:3]))


def take_list(every: Sequence[Candidate]) -> None:
    inbox = st.session_state.inbox
    file = st.file_uploader("Take over a list", key=f"supply_list_{inbox}", type=["csv", "tsv", "xlsx", "xls", "ods"])
    if file is None:
        return
    try:
        got = supply.import_list(
            file.getvalue(),
            file.name,
            [one.row for one in every],
            session.slot("supply"),
            day=session.today()[:10],
            by=session.person(),
        )
    except supply.SupplyError as fault:
        st.session_state.supply_said = [f"▼ {fault}"]
    else:
        st.session_state.supply_said = [f"{file.name}: {counted(got.matched, 'line')} taken over", *got.said]
        session.put_slot("supply", got.slot, f"supply from {file.name}")
    st.session_state.inbox += 1
    st.rerun()
