"""Where a reading stands: the words printed there and the page with a box round them, all pages to leaf through."""

from __future__ import annotations

import streamlit as st

from compare import evidence, page_session, pieces, shown
from compare.corrections import Line
from compare.page_results import page_count, picture
from compare.work import OpenSheet
from extract.model import Where

NOT_HERE = "The sheet itself is not on this machine; readings and words are kept."


def evidence_of(one: OpenSheet, line: Line) -> None:
    """The words of the sheet, and its page; where the sheet is not here, how to find it."""
    reading = line.read or line.shown
    if line.read is None:
        st.markdown(":gray[:small[Typed by a person; it stands on no page.]]")
        return
    told = shown.evidence(reading)
    st.markdown(f":gray[:small[Printed, {pieces.plain(told.stands)}:]]")
    st.html(pieces.printed_html(told.printed))
    data = one.data if one.data is not None else evidence.sheet_bytes(one.sheet)
    if data is None and one.sheet.sha256 is not None:
        not_here(one)
    elif data is not None:
        pages(one, reading.where, data)


def pages(one: OpenSheet, where: Where, data: bytes) -> None:
    count = page_count(one.sheet.sha256 or one.sheet.file, one.sheet.kind, data)
    if not count:
        return
    key = f"page_of_{one.key}_{where.model_dump_json()}"
    number = st.session_state.setdefault(key, where.page or 1)
    place = where if number == (where.page or 1) else Where(page=number)
    pictured = picture(f"{one.sheet.sha256 or one.sheet.file} {data is not None}", place.model_dump_json(), one, place)
    if pictured is None:
        return
    if pictured.close_up is not None:
        st.image(pictured.close_up, width="stretch", alt="The reading as it is printed, a box round it")
    said = "a box round the reading" if place == where else "another page of the sheet"
    st.image(pictured.page, width="stretch", alt=f"Page {number} of {shown.short_name(one.sheet.file)}, {said}")
    if count > 1:
        leaf(key, number, count)


def leaf(key: str, number: int, count: int) -> None:
    with st.container(horizontal=True, vertical_alignment="center", gap="small"):
        st.button(
            "‹", key="page_back", help="The page before", disabled=number == 1, on_click=turn, args=(key, number - 1)
        )
        st.markdown(f":small[page {number} of {count}]", width="content")
        st.button(
            "›", key="page_on", help="The next page", disabled=number == count, on_click=turn, args=(key, number + 1)
        )


def turn(key: str, number: int) -> None:
    st.session_state[key] = number


def not_here(one: OpenSheet) -> None:
    """The sheet lies elsewhere: it can be given again, if it is the very same file."""
    st.markdown(f":small[{NOT_HERE}]")
    with st.popover("Find it", key=f"find_{one.key}"):
        file = st.file_uploader(f"{shown.short_name(one.sheet.file, 40)}", key=f"found_{one.key}")
        if file is None:
            return
        fault = page_session.found(one, file.getvalue(), file.name)
        if fault:
            st.html(pieces.fault_html(fault))
        else:
            st.rerun()
