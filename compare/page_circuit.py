"""The Circuit view: the bench's fields, and the circuit drawn and summed up from them."""

from __future__ import annotations

from dataclasses import replace

import streamlit as st

from compare import circuit_text, drawing, pieces, typed
from compare import page_session as session
from compare.bench import uses
from compare.desk import Desk, carried_sentence, field_of, orchard_example

# The drawing fits its column, and a pressed figure puts the cursor into its field.
PRESS = """export default function({data, parentElement}) {
  const place = parentElement.querySelector("div"); place.innerHTML = data;
  const svg = place.firstElementChild;
  svg.removeAttribute("height"); svg.style.cssText = "width:100%;max-width:800px;display:block";
  place.querySelectorAll("[data-field]").forEach(figure => { figure.onclick = () =>
    document.querySelector(".st-key-field_" + figure.dataset.field.replaceAll(".", "_") + " input")?.focus(); }); }"""


def circuit_view() -> None:
    left, right = st.columns([1.25, 1], gap="large")
    with right:
        bench_files()
        circuit_fields()
    with left:
        drawn = summed_up(session.desk())
        corners()
        if drawn and st.button("Choose a crystal", key="to_choose", type="primary", shortcut="N"):
            session.go("choose")


def summed_up(desk: Desk) -> bool:
    """The drawing, the sum in words and what was taken by default; False where there is no bench yet."""
    bench = desk.bench
    session.title(f"{circuit_text.circuit_heading(bench)}")
    if bench is None:
        st.markdown(pieces.plain(desk.faults.get("", "")) or circuit_text.SET_IT)
        return False
    st.markdown(f":gray[{circuit_text.READ_IT}]")
    show = st.components.v2.component("quartzfolio_circuit", html="<div></div>", js=PRESS)
    svg = drawing.circuit_svg(circuit_text.circuit_figures(bench), session.palette())
    show(data=svg, key="drawing", width="stretch")
    st.markdown(circuit_text.sum_sentence(bench))
    for said in circuit_text.taken_sentences(bench):
        st.markdown(f"- {pieces.plain(said)}")
    if carried := carried_sentence(desk):
        st.markdown(f":gray[{pieces.plain(carried)}]")
    return True


def bench_files() -> None:
    with st.container(horizontal=True, gap="small"):
        with st.popover("Open a bench file"):
            file = st.file_uploader("Bench file (TOML)", type=["toml"], key=f"bench_{st.session_state.inbox}")
            example = orchard_example()
            for name, path in example.benches.items() if example else ():
                if st.button(f"Orchard example: {name}", key=f"bench_{path.stem}"):
                    session.open_bench(path.read_text(encoding="utf-8"), path.name)
        if file is not None:
            session.open_bench(file.getvalue().decode("utf-8-sig", "replace"), file.name)
            st.session_state.inbox += 1
            st.rerun()
        text = session.desk().bench_text
        st.download_button("Save bench file", text, "bench.toml", key="save_bench", disabled=not text)
        st.button(
            "Clear", key="clear_bench", on_click=session.set_desk, args=(Desk(), "Circuit cleared"), disabled=not text
        )
    if fault := st.session_state.get("bench_fault"):
        st.html(pieces.fault_html(f"The bench file is not used. {fault}"))


def circuit_fields() -> None:
    session.section("What is asked")
    form("asked")
    session.section("Capacitance")
    form("capacitance")
    session.section("Amplifier")
    form("amplifier")
    with st.expander("The IC’s sheet gives no gm, but a limit"):
        form("rating")
    with st.expander("How the sheets are to be read; measured on the bench"):
        form("crystal")
        form("measured")


def form(group: str, number: int | None = None) -> None:
    """The rows of a group of fields; `number` is that of a condition."""
    for row in typed.layout(group):
        columns = st.columns([width for _, width in row], gap="small")
        for column, (asked, _) in zip(columns, row, strict=True):
            if asked is not None:
                with column:
                    field(asked.key if number is None else asked.key.replace("condition.", f"condition.{number}."))


def corners() -> None:
    session.section("Corners: supply and temperature")
    st.markdown(":gray[:small[Each is one more corner; what it does not give is as in the circuit.]]")
    for number in range(session.desk().conditions):
        form("condition", number)
    with st.container(horizontal=True, gap="small"):
        if st.button("Add a corner", key="add_corner"):
            before = session.desk()
            session.set_desk(replace(before, conditions=before.conditions + 1), "Corner added")
            st.rerun()
        if session.desk().conditions and st.button("Remove the last", key="drop_corner"):
            session.set_desk(session.desk().without_last_condition(), "Corner removed")
            st.rerun()


def field(key: str) -> None:
    """One field of the bench, with what is wrong with it under it."""
    asked, widget = field_of(key), f"field_{key.replace('.', '_')}"
    text = session.desk().typed.get(key, "")
    if asked.kind in ("choice", "use"):
        options = (
            dict(asked.options)
            if asked.kind == "choice"
            else {"": "none", **{name: use.use for name, use in uses().items()}}
        )
        st.session_state.setdefault(widget, text or next(iter(options)))
        st.selectbox(
            asked.label,
            list(options),
            format_func=lambda option: options[option],
            key=widget,
            help=asked.help,
            on_change=put,
            args=(key, widget),
        )
    elif asked.kind == "flag":
        st.session_state.setdefault(widget, text == "true")
        st.checkbox(asked.label, key=widget, on_change=put, args=(key, widget))
    else:
        st.session_state.setdefault(widget, text)
        st.text_input(
            asked.label, key=widget, placeholder=asked.blank, help=asked.help, on_change=put, args=(key, widget)
        )
    if fault := session.desk().faults.get(key):
        st.html(pieces.fault_html(fault))
        answer(key)


def put(key: str, widget: str) -> None:
    """Take over what a person typed, and show it back as it was understood."""
    value = st.session_state[widget]
    if isinstance(value, bool):
        session.put_field(key, "true" if value else "")
    else:
        settle(key, value)


def settle(key: str, text: str, *, keep: bool = False) -> None:
    st.session_state[f"field_{key.replace('.', '_')}"] = session.put_field(key, text, kept=keep)


def answer(key: str) -> None:
    """The ways out of an unlikely value: what was probably meant, or that it is so."""
    said = session.desk().understood.get(key)
    if said is None:
        return
    with st.container(horizontal=True, gap="small"):
        if said.instead is not None:
            meant = typed.shown(said.instead, field_of(key))
            st.button(f"Use {meant}", key=f"use_{key}", on_click=settle, args=(key, meant))
        if said.doubtful:
            text = session.desk().typed[key]
            st.button("Keep", key=f"keep_{key}", on_click=settle, args=(key, text), kwargs={"keep": True})
