"""The Circuit view: the bench's fields, and the circuit drawn and summed up from them."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import replace
from html import escape

import streamlit as st

from compare import bearing_text, circuit_text, drawing, pieces, review_html, typed
from compare import page_converters as converters
from compare import page_session as session
from compare.bench import Bench, uses
from compare.columns import MID
from compare.desk import Desk, carried_sentence, field_of, orchard_example
from compare.page_bearing import advice, bears, candidates, chosen_at, gain_settings
from compare.ranking import Ranked

# What an IC's sheet may give of its gain, and the fields for it; the first is the one that it hangs on.
ROADS = {
    "Transconductance, least and most": ("circuit.transconductance_ms.low", "circuit.transconductance_ms.high"),
    "Greatest critical gm": ("rating.critical_transconductance_max_ms", "rating.factor_inside"),
    "Negative resistance": ("rating.negative_resistance_ohm", "rating.load_pf", "rating.factor_inside"),
    "ESR limit": (
        "rating.esr_max_ohm",
        "rating.load_pf",
        "rating.factor_inside",
        "rating.shunt_capacitance_pf",
        "rating.esr_means",
    ),
}
NOTHING = "None of these"
ASK_OR_TEST = (
    "Ask the IC’s maker: “What is the least transconductance of the oscillator’s amplifier over temperature and "
    "supply?” Until then margins read “cannot tell”; Review gives the series resistor with which it must still start."
)

# The drawing fits its column, and a pressed figure puts the cursor into its field.
PRESS = """export default function({data, parentElement}) {
  const place = parentElement.querySelector("div"); place.innerHTML = data;
  const svg = place.firstElementChild;
  svg.removeAttribute("height"); svg.style.cssText = "width:100%;max-width:800px;display:block";
  const field = figure =>
    document.querySelector(".st-key-field_" + figure.dataset.field.replaceAll(".", "_") + " input");
  place.querySelectorAll("[data-field]").forEach(figure => {
    figure.onclick = () => field(figure)?.focus();
    figure.onkeydown = press => { if (press.key === "Enter" || press.key === " ") {
      press.preventDefault(); field(figure)?.focus(); } } }); }"""


def circuit_view() -> None:
    bench = session.desk().bench
    contest = None if bench is None else candidates(bench)
    left, right = st.columns([1.25, 1], gap="large")
    with right:
        bench_files()
        circuit_fields(contest)
    with left:
        known = summed_up(session.desk(), contest)
        if bench is not None:
            bears(bench, contest)
            if contest is not None:
                advice(bench, contest)
            gain_settings(bench, contest)
        if known and st.button("Choose a crystal", key="to_choose", type="primary", shortcut="N"):
            session.go("choose")


def summed_up(desk: Desk, contest: Ranked | None) -> bool:
    """The drawing, the sum in words and what was taken by default; False where there is no bench yet."""
    bench, steady = desk.bench, steady_pf(contest)
    session.title(f"{circuit_text.circuit_heading(bench, steady)}")
    if bench is None:
        st.markdown(pieces.plain(desk.faults.get("", "")) or circuit_text.SET_IT)
        # With some fields filled and no frequency, a drawing that knows nothing would contradict them.
        if not desk.typed:
            drawn(circuit_text.blank_figures())
        return False
    drawn(circuit_text.circuit_figures(bench))
    st.markdown(circuit_text.sum_sentence(bench, steady))
    if taken := circuit_text.taken_sentences(bench):
        st.markdown("\n".join(f"- {pieces.plain(said)}" for said in taken))
    if carried := carried_sentence(desk):
        st.markdown(f":gray[{pieces.plain(carried)}]")
    return True


def drawn(figures: drawing.CircuitFigures) -> None:
    st.markdown(f":gray[{circuit_text.READ_IT}]")
    show = st.components.v2.component("quartzfolio_circuit", html="<div></div>", js=PRESS)
    show(data=drawing.circuit_svg(figures, session.palette()), key="drawing", width="stretch")


def steady_pf(contest: Ranked | None) -> float | None:
    """The load in the steady state with the chosen part in the circuit; None where there is none."""
    if contest is None or contest.reckoning is None:
        return None
    at = contest.ordered[chosen_at(contest)]
    value = float(contest.reckoning.numbers["circuit_load_pf"].ends[MID, at])
    return value if math.isfinite(value) else None


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


def circuit_fields(contest: Ranked | None) -> None:
    bench = session.desk().bench
    session.section("What is asked")
    form("asked")
    what_the_use_asks(bench)
    session.section("Capacitance")
    form("capacitance")
    if bench is not None:
        with st.container(horizontal=True, gap="small"):
            with st.popover("The maker gives one figure for stray"):
                converters.single_figure(bench)
            with st.popover("I measured two frequencies"):
                converters.two_frequencies(bench, contest)
    amplifier()
    corners()
    with st.expander("How the sheets are to be read; measured on the bench"):
        form("crystal")
        form("measured")


def what_the_use_asks(bench: Bench | None) -> None:
    """The limit of the use that is set, and all uses with limit and source."""
    if said := bearing_text.use_sentence(bench, session.desk().typed.get("requirement.use", "")):
        st.html(f'<p class="qf-small">{escape(said)}</p>')
    with st.popover("Uses, their limits and sources", type="tertiary"):
        st.html(review_html.table_html(*bearing_text.uses_table()))


def amplifier() -> None:
    """What the IC's sheet gives of its gain, by one of four roads; the others' fields stay at hand."""
    session.section("Amplifier, in the words of its sheet")
    typed_in = session.desk().typed
    given = next((road for road, keys in ROADS.items() if any(typed_in.get(key, "").strip() for key in keys[:1])), None)
    roads = [*ROADS, NOTHING]
    # Another bench may give another figure: then the choice begins afresh.
    at = roads.index(given) if given else 0
    road = st.selectbox("The IC’s sheet gives", roads, index=at, key=f"road_{at}")
    rows_of(ROADS.get(road, ()))
    if road == NOTHING:
        st.markdown(ASK_OR_TEST)
    form("amplifier_rest")
    others = [key for name, keys in ROADS.items() if name != road for key in keys]
    beside = [key for key in dict.fromkeys(others) if key not in ROADS.get(road, ())]
    filled = any(typed_in.get(key, "").strip() for key in beside)
    with st.expander("What else the IC’s sheet gives" + (": in use, see inside" if filled else "")):
        rows_of([*beside, "rating.esr_min_ohm"])


def rows_of(keys: Sequence[str], wide: int = 4) -> None:
    """Fields side by side, some to a row."""
    for first in range(0, len(keys), wide):
        for column, key in zip(st.columns(wide, gap="small"), keys[first : first + wide], strict=False):
            with column:
                field(key)


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
