"""The head of every view: what is asked, the way back, and the piece of work with its file."""

from __future__ import annotations

from dataclasses import replace

import streamlit as st

from compare import circuit_text, evidence, keeping, pieces
from compare import page_session as session
from compare.figures import counted, frequency_text
from compare.folio import SUFFIX, folio_bytes
from compare.work import Circuit, Work


def head(view: str) -> None:
    """Undo, when it was saved, and the work, beside the names of the views; below them the line of terms.

    `view` is the one that is shown: in that of the circuit nothing leads to it.
    """
    with st.container(
        horizontal=True, horizontal_alignment="right", vertical_alignment="center", gap="small", key="work_bar"
    ):
        # Not on the button of the menu: a button of another name is another menu, and that one would be closed.
        st.markdown(f":gray[:small[{saved()}]]", width="content")
        said = session.history().said
        st.button(
            "Undo",
            key="undo",
            shortcut="U",
            type="tertiary",
            on_click=session.undo,
            disabled=not said,
            help=said or None,
        )
        menu = st.popover(pieces.plain(title()), key="work_menu", on_change="rerun")
        if menu.open:
            with menu:
                work_menu()
    bench = session.desk().bench
    with st.container(horizontal=True, vertical_alignment="center", gap="small", key="terms"):
        terms = circuit_text.terms(bench) if bench is not None else ["No circuit yet"]
        st.html(pieces.terms_html(terms), width="stretch")
        if view != "circuit" and st.button("Set it" if bench is None else "Change", key="to_terms", type="tertiary"):
            session.go("circuit")
    if fault := st.session_state.get("save_fault"):
        st.html(pieces.fault_html(fault))


def saved() -> str:
    """`Kept on this machine · saved 14:32`."""
    stamp = st.session_state.saved
    return f"Kept on this machine · saved {stamp.saved[11:16]}" if stamp else "Nothing to keep yet"


def title() -> str:
    """`Frost node · 26 MHz radio`."""
    work = session.work()
    return " · ".join(filter(None, (work.name or "Work", work.circuit.name)))


def work_menu() -> None:
    work = session.work()
    name = st.text_input("Name of the work", value=work.name, key=f"field_work_name_{st.session_state.turn}")
    if name.strip() != work.name:
        session.change(replace(work, name=name.strip()), f"Work named {name.strip() or 'nothing'}")
        st.rerun()
    circuits(work)
    st.divider()
    save_work()
    file = st.file_uploader("Open work", type=[SUFFIX.removeprefix(".")], key=f"folio_{st.session_state.inbox}")
    if file is not None:
        st.session_state.inbox += 1
        st.session_state.said = []
        session.open_folio(file.getvalue(), file.name)
        st.rerun()
    for said in st.session_state.said:
        st.markdown(f":small[{pieces.plain(said)}]")
    st.divider()
    kept_here()


def circuits(work: Work) -> None:
    """Which circuit is in view, its name, and one more."""
    if len(work.circuits) > 1:
        idents: list[str] = [one.ident for one in work.circuits]
        names = {one.ident: circuit_name(one, at) for at, one in enumerate(work.circuits, start=1)}
        at = st.selectbox(
            "Circuit in view",
            idents,
            idents.index(work.circuit.ident),
            format_func=lambda ident: names[ident],
            key=f"circuit_{work.at}",
        )
        if at != work.circuit.ident:
            session.forget_fields()
            session.remember(replace(work, at=at))
            st.rerun()
    name = st.text_input(
        "Name of the circuit", value=work.circuit.name, key=f"field_circuit_name_{work.at}_{st.session_state.turn}"
    ).strip()
    if name != work.circuit.name:
        named = tuple(replace(one, name=name) if one is work.circuit else one for one in work.circuits)
        session.change(replace(work, circuits=named), f"Circuit named {name or 'nothing'}")
        st.rerun()
    with st.container(horizontal=True, gap="small"):
        st.button("Add a circuit", key="add_circuit", on_click=add_circuit)
        if len(work.circuits) > 1:
            st.button("Remove this circuit", key="drop_circuit", on_click=drop_circuit)


def circuit_name(one: Circuit, number: int) -> str:
    bench = one.desk.bench
    return one.name or (frequency_text(bench.requirement.frequency_mhz) if bench is not None else f"Circuit {number}")


def add_circuit() -> None:
    work = session.work()
    numbers = [int(one.ident[1:]) for one in work.circuits if one.ident[1:].isdigit()]
    ident = f"c{max(numbers, default=0) + 1}"
    session.forget_fields()
    session.change(replace(work, circuits=(*work.circuits, Circuit(ident)), at=ident), "Circuit added")


def drop_circuit() -> None:
    work = session.work()
    left = tuple(one for one in work.circuits if one is not work.circuit)
    session.forget_fields()
    session.change(
        replace(work, circuits=left, at=left[0].ident), f"Circuit {work.circuit.name} removed".replace("  ", " ")
    )


def save_work() -> None:
    """The work as one file, with the sheets themselves where they are wanted."""
    work = session.work()
    with_sheets = st.checkbox("With the sheets themselves", value=True, key="with_sheets")
    name = "".join(char if char.isalnum() or char in " -_" else "_" for char in work.name).strip() or "work"
    st.download_button(
        "Save work",
        lambda: folio_bytes(work, keeping.now(), files=files_of(work) if with_sheets else None),
        f"{name}{SUFFIX}",
        "application/zip",
        key="save_work",
        type="primary",
        on_click="ignore",
    )


def files_of(work: Work) -> dict[str, bytes]:
    """The sheets that are at hand, by sha256."""
    found = {}
    for one in work.sheets:
        data = one.data if one.data is not None else evidence.sheet_bytes(one.sheet)
        if data is not None and one.sheet.sha256 is not None:
            found[one.sheet.sha256] = data
    return found


def kept_here() -> None:
    """Where the work lies, what else lies there, and how it is forgotten."""
    ident = st.session_state.ident
    st.markdown(
        f":small[Kept on this machine after each change, in {pieces.plain(str(keeping.state_folder() / ident))}]"
    )
    kept_works("menu")
    if st.session_state.get("forgetting"):
        st.markdown("Sheets, corrections and circuits of this work are removed from this machine.")
        with st.container(horizontal=True, gap="small"):
            st.button("Forget it", key="forget_now", type="primary", on_click=forget_now)
            st.button("Keep it", key="forget_not", on_click=ask_forget, args=(False,))
    else:
        st.button("Forget this work", key="forget", on_click=ask_forget, args=(True,))


def kept_works(place: str) -> None:
    """The other works that lie on this machine, to be opened or forgotten; `place` tells the two lists apart."""
    others = [one for one in keeping.kept_works() if one.ident != st.session_state.ident]
    if others:
        st.markdown(":gray[:small[Other work kept on this machine:]]")
    for one in others[: keeping.MOST_LISTED]:
        told = f"{one.name or 'Work'}, {one.saved.replace('T', ' ')[:16]}, {counted(one.sheets, 'sheet')}"
        with st.container(horizontal=True, gap="small", vertical_alignment="center"):
            st.markdown(f":small[{pieces.plain(told)}]", width=280)
            st.button("Open", key=f"recall_{place}_{one.ident}", on_click=take_up, args=(one.ident,))
            st.button("Forget", key=f"forget_{place}_{one.ident}", on_click=session.forget_other, args=(one.ident,))
    if len(others) > keeping.MOST_LISTED:
        st.markdown(f":small[and {len(others) - keeping.MOST_LISTED} more]")


def take_up(ident: str) -> None:
    session.recall(ident)


def ask_forget(asked: bool) -> None:  # noqa: FBT001 - a callback's argument
    st.session_state.forgetting = asked


def forget_now() -> None:
    st.session_state.forgetting = False
    session.forget()
