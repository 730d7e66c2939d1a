"""The Sheets view: files in, one line each with its outcome, readings, and where each stands."""

from __future__ import annotations

from dataclasses import replace
from typing import Any

import streamlit as st

from compare import page_session as session
from compare import pieces, shown
from compare.desk import NO_SHEETS, PRIVACY
from compare.page_results import picture
from compare.work import OpenSheet
from extract.model import Reading


def sheets_view() -> None:
    left, middle, right = st.columns([1, 1.85, 1.3], gap="small")
    with left:
        take_sheets()
        chosen = sheet_list()
    if chosen is None:
        with middle:
            session.title("No sheets yet")
            st.markdown(NO_SHEETS)
        return
    with middle:
        reading = part_readings(chosen)
    with right:
        if reading is not None:
            stands(chosen, reading)


def take_sheets() -> None:
    inbox = st.session_state.inbox
    files = st.file_uploader("Drop sheets here", accept_multiple_files=True, key=f"sheets_{inbox}")
    with st.container(horizontal=True, gap="small"):
        with st.popover("Paste text"):
            text = st.text_area("Text of a sheet, a mail or a web page", key=f"pasted_{inbox}", height=220)
            pasted = st.button("Read this text", key="read_pasted", type="primary")
        example = st.button("Open the orchard example", key="orchard")
    new = [(file.name, file.getvalue()) for file in files or ()]
    if pasted and text.strip():
        new.append((f"pasted text {inbox + 1}.txt", text.encode()))
    if example:
        session.open_example()
        st.rerun()
    if new:
        session.open_sheets(new)
        st.session_state.inbox += 1
        st.rerun()
    st.markdown(f":gray[:small[{PRIVACY} PDF, workbook, list, web page, Word document, text or picture; 50 MB each.]]")
    for said in st.session_state.said:
        st.markdown(f":small[{pieces.plain(said)}]")


def sheet_list() -> OpenSheet | None:
    """One line a sheet; returns the selected one."""
    every = session.work().sheets
    if not every:
        return None
    session.section(f"{shown.heading(session.sheets())}")
    identities = [one.key for one in every]
    before = st.session_state.get("sheet")
    start = identities.index(before) if before in identities else 0
    picked = st.dataframe(
        shown.sheets_frame(session.sheets()),
        hide_index=True,
        height=fitting(len(every), 12),
        on_select="rerun",
        selection_mode="single-row",
        selection_default=session.first_row(start),
        key=f"open_{len(every)}",
        alt="Sheets that are open, with their outcome",
        column_config={
            "Sheet": st.column_config.TextColumn(width=160),
            "Outcome": st.column_config.TextColumn(width=90),
        },
    )
    chosen: OpenSheet = every[session.selected_row(picked, len(every))]
    st.session_state.sheet = chosen.key
    for said in shown.unread([one.sheet for one in every if one is not chosen]):
        st.markdown(f":small[{pieces.plain(said)}]")
    if st.button("Close this sheet", key="close_sheet"):
        left = tuple(one for one in every if one is not chosen)
        session.change(replace(session.work(), sheets=left), f"{shown.short_name(chosen.sheet.file)} closed")
        st.rerun()
    return chosen


def fitting(rows: int, most: int) -> Any:
    """As high as its rows; a grid of more than `most` scrolls."""
    return "content" if rows <= most else 36 * most


def part_readings(one: OpenSheet) -> Reading | None:
    """The readings of a sheet's part, those to look at first; returns the selected one."""
    sheet = one.sheet
    if not sheet.parts:
        session.title(f"{pieces.plain(sheet.file)}")
        for said in shown.unread([sheet]):
            st.markdown(pieces.plain(said))
        return None
    number = 0
    if len(sheet.parts) > 1:
        names = [shown.part_name(part, at) for at, part in enumerate(sheet.parts, start=1)]
        number = st.selectbox(
            f"Part, of {len(names)} on this sheet",
            range(len(names)),
            format_func=lambda at: names[at],
            key=f"part_{sheet.sha256}_{sheet.file}",
        )
    part = sheet.parts[number]
    session.title(f"{pieces.plain(shown.part_name(part, number + 1))}")
    st.markdown(f":gray[{pieces.plain(shown.part_facts(part))}]")
    if not part.readings:
        st.markdown("The sheet gives no values for this part.")
        return None
    text = st.column_config.TextColumn
    picked = st.dataframe(
        shown.readings_frame(part),
        hide_index=True,
        height=fitting(len(part.readings), 20),
        row_height=32,
        on_select="rerun",
        selection_mode="single-row",
        selection_default=session.first_row(0),
        key=f"readings_{sheet.sha256}_{sheet.file}_{number}",
        alt="Readings of the part, with how we have each",
        column_config={
            "Reading": text(width=158),
            "Min": text(width=58, alignment="right"),
            "Typ": text(width=76, alignment="right"),
            "Max": text(width=58, alignment="right"),
            "Unit": text(width=52),
            "How we have it": text(width=108),
        },
    )
    st.markdown(f":gray[:small[{shown.HOW_LEGEND}]]")
    further = (*shown.attributes_lines(part), *shown.notes_of(sheet))
    st.markdown("  \n".join(f":small[{pieces.plain(said)}]" for said in further))
    return shown.in_order(part)[session.selected_row(picked, len(part.readings))]


def stands(one: OpenSheet, reading: Reading) -> None:
    """Where the selected reading stands: the words printed there, and the page with a box round them."""
    told = shown.evidence(reading)
    session.section(f"{pieces.plain(told.heading)}")
    st.markdown(pieces.plain(told.read))
    if told.look is not None:
        st.html(pieces.look_html(told.look))
    st.markdown(f":gray[:small[Printed, {pieces.plain(told.stands)}:]]")
    st.html(pieces.printed_html(told.printed))
    pictured = picture(one.sheet.sha256 or one.sheet.file, reading.where.model_dump_json(), one, reading)
    if pictured is None:
        return
    if pictured.close_up is not None:
        st.image(pictured.close_up, width="stretch", alt="The reading as it is printed, a box round it")
    st.image(pictured.page, width="stretch", alt=f"{told.stands} of {one.sheet.file}, a box round the reading")
