"""The Sheets view: files in, one line each with its outcome, and the readings of a part with what waits for a look."""

from __future__ import annotations

import io
import json
from collections.abc import Sequence
from dataclasses import replace
from typing import Any

import streamlit as st

from compare import export, looks, pieces, sheet_lines, shown
from compare import page_session as session
from compare.desk import NO_SHEETS, PRIVACY, STILL_READING
from compare.folio import SUFFIX
from compare.page_copy import copy_button
from compare.page_looks import add_reading, at_look, go_to, put_back_part, reading_area
from compare.page_shared import save_buttons
from compare.page_work import kept_works
from compare.sheet_lines import PartLines
from compare.sheets_json import write_sheets
from compare.work import OpenSheet
from extract.partlist import part_numbers

MOST_NAMES = 300
ALL_PARTS, ONE_PART = "All parts", "One part"


def sheets_view() -> None:
    left, right = st.columns([1, 3.2], gap="small")
    with left:
        take_sheets()
        chosen = sheet_list()
    with right:
        if chosen is None:
            session.title("No sheets yet")
            st.markdown(STILL_READING if session.reader().now else NO_SHEETS)
            kept_works("page")
            return
        st.fragment(part_area)()


def take_sheets() -> None:
    inbox = st.session_state.inbox
    files = st.file_uploader("Drop sheets here", accept_multiple_files=True, key=f"sheets_{inbox}")
    with st.container(horizontal=True, gap="small"):
        # With a key of its own for each paste: the box is closed once its text is read.
        with st.popover("Paste text", key=f"paste_{inbox}"):
            text = st.text_area("Text of a sheet, a mail or a web page", key=f"pasted_{inbox}", height=220)
            pasted = st.button("Read this text", key="read_pasted", type="primary")
        example = st.button("Open the orchard example", key="orchard")
    st.markdown(f":gray[:small[{PRIVACY} PDF, workbook, list, web page, Word document, text or picture; 50 MB each.]]")
    new = [(file.name, file.getvalue()) for file in files or ()]
    if pasted and text.strip():
        new.append((f"pasted text {inbox + 1}.txt", text.encode()))
    if new or example:
        st.session_state.inbox += 1
        st.session_state.said = []
        open_dropped(new)
        if example:
            session.open_example()
        st.rerun()
    for said in st.session_state.said:
        st.markdown(f":small[{pieces.plain(said)}]")


def open_dropped(files: Sequence[tuple[str, bytes]]) -> None:
    """Sheets are read, a bench file sets the circuit, a work file is taken up."""
    for name, data in files:
        if name.endswith(SUFFIX):
            session.open_folio(data, name)
        elif name.endswith(".toml"):
            session.open_bench(data.decode("utf-8-sig", "replace"), name)
            if fault := st.session_state.bench_fault:
                session.say(f"The bench file is not used. {fault}")
    session.open_sheets([(name, data) for name, data in files if not name.endswith((SUFFIX, ".toml"))])


def sheet_list() -> OpenSheet | None:
    """One line a sheet; returns the selected one."""
    every = session.work().sheets
    if not every:
        return None
    session.section(f"{shown.heading(session.sheets())}")
    keys = [one.key for one in every]
    sheet, _, _ = at_look()
    start = keys.index(sheet) if sheet in keys else 0
    picked = st.dataframe(
        shown.sheets_frame(session.sheets()),
        hide_index=True,
        height=fitting(len(every), 12),
        on_select="rerun",
        selection_mode="single-row-required",
        selection_default=session.first_row(start),
        key=f"open_{len(every)}_{st.session_state.turn}_{st.session_state.moved}",
        alt="Sheets that are open, with their outcome",
        column_config={
            "Sheet": st.column_config.TextColumn(width=158),
            "Outcome": st.column_config.TextColumn(width=90),
        },
    )
    chosen = every[session.selected_row(picked, len(every))]
    if chosen.key != sheet:
        go_to(chosen.key, 0, None, moved=False)
    for said in shown.unread([one.sheet for one in every if one is not chosen]):
        st.markdown(f":small[{pieces.plain(said)}]")
    st.button("Close this sheet", key="close_sheet", on_click=close, args=(chosen,))
    return chosen


def close(chosen: OpenSheet) -> None:
    left = tuple(one for one in session.work().sheets if one is not chosen)
    session.change(replace(session.work(), sheets=left), f"{shown.short_name(chosen.sheet.file)} closed")


def fitting(rows: int, most: int) -> Any:
    """As high as its rows; a grid of more than `most` scrolls."""
    return "content" if rows <= most else 36 * most


def part_area() -> None:
    """What hangs on the chosen reading; drawn afresh alone, so that paging and looking never rank anew."""
    if st.session_state.pop("whole_page", False):
        st.rerun()
    sheet, at, _ = at_look()
    one = session.work().of(sheet)
    if one is None:
        st.rerun()
    if sum(len(each.sheet.parts) for each in session.work().sheets) > 1:
        how = st.segmented_control(
            "Show", [ONE_PART, ALL_PARTS], key="parts_shown", default=ONE_PART, label_visibility="collapsed"
        )
        if how == ALL_PARTS:
            all_parts()
            return
    if not one.sheet.parts:
        session.title(f"{pieces.plain(shown.short_name(one.sheet.file, 60))}")
        for said in shown.unread([one.sheet]):
            st.markdown(pieces.plain(said))
        return
    middle, right = st.columns([1.45, 1], gap="medium")
    with middle:
        part = chosen_part(one, at)
        readings_of(one, part)
    with right:
        reading_area(one, part, looks.queue(session.work()))


def chosen_part(one: OpenSheet, at: int) -> PartLines:
    """The part of the sheet that is looked at; a list of them where the sheet has several."""
    parts = one.sheet.parts
    at = min(at, len(parts) - 1)
    if len(parts) > MOST_NAMES:
        at = one_of_many(one, at)
    elif len(parts) > 1:
        names = [shown.part_name(part, number) for number, part in enumerate(parts, start=1)]
        at = st.selectbox(
            f"Part, of {len(names)} on this sheet",
            range(len(names)),
            index=at,
            format_func=lambda number: names[number],
            key=f"part_{one.key}_{st.session_state.turn}_{st.session_state.moved}",
        )
    if at != at_look()[1]:
        go_to(one.key, at, None)
    return sheet_lines.part_lines(session.work(), one.key, at)


def one_of_many(one: OpenSheet, at: int) -> int:
    """The part of a long list whose number holds what is typed; a list of them would be sent at every press."""
    numbers = part_numbers(one.sheet.parts)
    typed = st.text_input(f"Part number, of {len(numbers)} on this sheet", key=f"find_part_{one.key}").strip()
    if not typed:
        return at
    found = [number for number, name in enumerate(numbers) if name and typed.casefold() in name.casefold()]
    if not found:
        st.markdown(f":small[No part number of this sheet holds “{pieces.plain(typed)}”.]")
        return at
    at = at if at in found else found[0]
    with st.container(horizontal=True, gap="small", vertical_alignment="center"):
        st.markdown(f":small[{found.index(at) + 1} of {len(found)} that hold it]", width="content")
        on = found[(found.index(at) + 1) % len(found)]
        st.button("Next one", key="next_part", on_click=go_to, args=(one.key, on, None), disabled=len(found) == 1)
    return at


def readings_of(one: OpenSheet, part: PartLines) -> None:
    session.title(f"{pieces.plain(shown.part_name(part.part, part.at + 1))}")
    facts = shown.part_facts(part.part)
    st.markdown(f":gray[{pieces.plain(facts)} · {pieces.plain(shown.short_name(one.sheet.file, 40))}]")
    frame = sheet_lines.lines_frame(part)
    _, _, number = at_look()
    picked = st.dataframe(
        frame,
        hide_index=True,
        height=fitting(len(frame), 22),
        row_height=30,
        on_select="rerun",
        selection_mode="single-row-required",
        selection_default=session.first_row(part.row_of(number)),
        key=f"readings_{part.sheet}_{part.at}_{st.session_state.turn}_{st.session_state.moved}",
        alt="Readings of the part, with how we have each",
        column_config=columns(),
    )
    row = session.selected_row(picked, len(frame))
    if row != part.row_of(number):
        go_to(part.sheet, part.at, part.rows[row], moved=False)
    below_readings(one, part, frame)


def columns() -> dict[str, Any]:
    text = st.column_config.TextColumn
    return {
        "Reading": text(width=146),
        "Min": text(width=52, alignment="right"),
        "Typ": text(width=92, alignment="right"),
        "Max": text(width=56, alignment="right"),
        "Unit": text(width=48),
        "How we have it": text(width=116),
        "Sheet says": text(width=92),
    }


def below_readings(one: OpenSheet, part: PartLines, frame: Any) -> None:
    with st.container(horizontal=True, gap="small"):
        copy_button(sheet_lines.as_tabbed(frame), key="copy_readings")
        st.button("Add a reading", key="add_reading", on_click=add_reading)
        changed = bool(part.corrections)
        st.button(
            "Put back the sheet’s values",
            key="put_back_part",
            disabled=not changed,
            on_click=put_back_part,
            args=(part,),
        )
    st.markdown(f":gray[:small[{shown.HOW_LEGEND}]]")
    if lacking := sheet_lines.not_stated(part):
        st.markdown(f":small[{pieces.plain(lacking)}]")
    if attributes := shown.attributes_lines(part.part):
        st.markdown(f":small[{pieces.plain(' · '.join(attributes))}]")
    if notes := shown.notes_of(one.sheet):
        with st.expander(f"What the reader says of this sheet ({len(notes)})", expanded=len(notes) < 3):
            for note in notes:
                st.markdown(f":small[{pieces.plain(note)}]")


def all_parts() -> None:
    """Every part in one table, each value with its mark; a row leads to its part."""
    frame, places = sheet_lines.parts_frame(session.work())
    every = sum(len(one.sheet.parts) for one in session.work().sheets)
    session.title(f"{every} parts")
    picked = st.dataframe(
        frame,
        hide_index=True,
        height=fitting(len(frame), 20),
        on_select="rerun",
        selection_mode="single-row",
        key=f"all_parts_{st.session_state.turn}",
        alt="All parts with their values and how we have each",
        column_config={"Part": st.column_config.TextColumn(width=150, pinned=True)},
    )
    st.markdown(f":gray[:small[{shown.HOW_LEGEND}]]")
    if every > len(frame):
        st.markdown(f":small[The first {len(frame)} of {every} are shown.]")
    if picked is not None and picked.selection.rows:
        place = places[picked.selection.rows[0]]
        st.button("Its readings", key="to_part", on_click=to_part, args=(place,), type="primary")
    save_readings(frame)


def save_readings(frame: Any) -> None:
    """Copy the table; save every reading with its source, and every correction."""
    work = session.work()

    def tables() -> dict[str, export.Table]:
        rows = [
            {"file": sheet.file, "part_number": number}
            for sheet in work.corrected
            for number in part_numbers(sheet.parts)[: export.MOST_SOURCED]
        ]
        corrections = sheet_lines.corrections_table(work)
        return {"readings": export.sources_table(work.corrected, rows), "corrections": corrections}

    def result() -> Any:
        document = io.StringIO()
        write_sheets(work.corrected, [], document)
        return json.loads(document.getvalue())

    copied = list(frame.columns), frame.to_numpy().tolist()
    save_buttons("readings", copied, tables, result, key="readings")


def to_part(place: sheet_lines.PartPlace) -> None:
    st.session_state.parts_shown = ONE_PART
    st.session_state.whole_page = True
    st.session_state.turn += 1
    go_to(place.sheet, place.at, None)
