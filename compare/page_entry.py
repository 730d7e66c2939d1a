"""The form in which a reading is corrected or added: each bound with its unit, shown back as it was understood."""

from __future__ import annotations

from collections.abc import Callable
from functools import partial
from typing import Any

import streamlit as st

from compare import entered, pieces, sheet_lines, shown
from compare import page_session as session
from compare.corrections import Line
from compare.entered import BOTH_SIDES, Bound, Draft
from compare.sheet_lines import PartLines
from extract.fields import field_of, fields
from extract.model import When, Where
from extract.plausible import FORK, limits

LABELS: dict[Bound, str] = {"min": "Least", "typ": "Typical or nominal", "max": "Greatest", "options": "A choice"}


def entry_form(
    part: PartLines,
    line: Line | None,
    *,
    cancel: Callable[[], None],
    enter: Callable[..., None],
    enter_fact: Callable[..., None],
) -> None:
    """The form of one reading; of a new one it asks first what it is, a value or a word."""
    start = None if line is None else entered.draft_of(line.shown, part.part)
    if start is None:
        session.section("Add a reading")
        name = st.selectbox(
            "What is stated", [*fields(), *sheet_lines.FACTS], format_func=stated_name, key="entry_field"
        )
        if name in sheet_lines.FACTS:
            now = getattr(part.part, name)
            fact_form(name, now, cancel=cancel, enter=partial(enter_fact, part, name))
            return
        start = Draft(name, fork=entered.fork_of(part.part))
    prefix = f"entry_{part.sheet}_{part.at}_{'new' if line is None else line.number}_{start.field}"
    draft = bounds(start, prefix)
    why, by = why_and_who(prefix)
    for bound, fault in draft.faults.items():
        if draft.texts:
            st.html(pieces.fault_html(f"{LABELS[bound]}: {fault}"))
            ways_out(draft, bound, prefix)
    with st.container(horizontal=True, gap="small"):
        if st.button("Enter it", key="entry_enter", type="primary", disabled=bool(draft.faults) or not by):
            reading = draft.reading(
                raw=raw(draft, line), where=Where() if line is None else line.shown.where, when=when(draft, line)
            )
            enter(part, line, reading, draft.said(), why)
            clear(prefix)
            st.rerun()
        st.button("Leave it", key="entry_leave", on_click=left, args=(cancel, prefix))


def stated_name(name: str) -> str:
    return sheet_lines.FACTS[name] if name in sheet_lines.FACTS else shown.title(name)


def bounds(start: Draft, prefix: str) -> Draft:
    """The fields of the bounds, and what they hold."""
    known, texts, kept = field_of(start.field), {}, st.session_state.setdefault(f"{prefix}_kept", frozenset())
    shown_bounds: list[Bound] = ["min", "typ", "max"]
    if known.choice or "options" in start.texts:
        shown_bounds.append("options")
    for bound, column in zip(shown_bounds[:3], st.columns(3, gap="small"), strict=True):
        with column:
            texts[bound] = one_bound(start, bound, prefix)
    if "options" in shown_bounds:
        texts["options"] = one_bound(start, "options", prefix)
    typed = {bound: text for bound, text in texts.items() if text.strip()}
    return Draft(start.field, typed, frozenset(bound for bound, text in kept if typed.get(bound) == text), start.fork)


def one_bound(start: Draft, bound: Bound, prefix: str) -> str:
    unit = field_of(start.field).unit
    key = f"{prefix}_{bound}"
    st.session_state.setdefault(key, start.texts.get(bound, ""))
    hint = f"several, as 8; 10; 12 {unit}".rstrip() if bound == "options" else unit or "number"
    return st.text_input(LABELS[bound], key=key, placeholder=hint, on_change=show_back, args=(start, bound, key))


def show_back(start: Draft, bound: Bound, key: str) -> None:
    """Show what was typed as it was understood: `12,5` as `12.5 pF`."""
    text = st.session_state[key]
    said = Draft(start.field, {bound: text}, fork=start.fork).understood.get(bound)
    if bound != "options" and said is not None and said.value is not None and not BOTH_SIDES.match(text):
        st.session_state[key] = entered.shown(said.value, start.field)


def why_and_who(prefix: str) -> tuple[str, str]:
    reason, name = st.columns([1.6, 1], gap="small")
    with reason:
        why = st.text_input("Why", key=f"{prefix}_why", placeholder="e.g. mail from the maker, 2 April")
    with name:
        st.session_state.setdefault("entry_by", session.person())
        by = st.text_input("Entered by", key="entry_by", on_change=call_me)
    return why.strip(), by.strip()


def call_me() -> None:
    st.session_state.person = st.session_state.entry_by.strip()


def ways_out(draft: Draft, bound: Bound, prefix: str) -> None:
    """The answers to an unlikely value: what was probably meant, or that it is so."""
    said = draft.understood.get(bound)
    if said is None:
        return
    with st.container(horizontal=True, gap="small"):
        if said.instead is not None:
            meant = entered.shown(said.instead, draft.field)
            st.button(f"Use {meant}", key=f"entry_use_{bound}", on_click=put, args=(f"{prefix}_{bound}", meant))
        if said.doubtful:
            st.button("Keep", key=f"entry_keep_{bound}", on_click=keep, args=(prefix, bound, draft.texts[bound]))


def put(key: str, text: str) -> None:
    st.session_state[key] = text


def keep(prefix: str, bound: Bound, text: str) -> None:
    st.session_state[f"{prefix}_kept"] |= {(bound, text)}


def left(cancel: Callable[[], None], prefix: str) -> None:
    clear(prefix)
    cancel()


def clear(prefix: str) -> None:
    """The next time the form is opened it begins with what counts then."""
    for key in [key for key in st.session_state if str(key).startswith(prefix)]:
        del st.session_state[key]


def raw(draft: Draft, line: Line | None) -> str:
    """The words printed, where there are some; else what was typed."""
    return line.read.raw if line is not None and line.read is not None else f"{shown.title(draft.field)} {draft.said()}"


def when(draft: Draft, line: Line | None) -> When:
    """Where the reading held; an added ageing is that of the first year."""
    if line is not None:
        return line.shown.when
    return When(years=1.0) if draft.field == "ageing_ppm" else When()


def fact_form(
    fact: str, now: str | None, *, cancel: Callable[[], None], enter: Callable[[str | None, str], None]
) -> None:
    """The form of one of the part's words: a list where there are only so many, else a field."""
    prefix = f"entry_fact_{fact}"
    choices: dict[str, list[str]] = {
        "mode": list(limits()["overtones"]),
        "cut": [*limits()["ratio_floor"], FORK],
        "resonance": ["load", "series"],
    }
    name = sheet_lines.FACTS[fact]
    if fact in choices:
        options: list[Any] = [None, *choices[fact], *([now] if now and now not in choices[fact] else [])]
        value = st.selectbox(
            name, options, options.index(now), format_func=lambda one: one or "not stated", key=f"{prefix}_value"
        )
    else:
        st.session_state.setdefault(f"{prefix}_value", now or "")
        value = st.text_input(name, key=f"{prefix}_value").strip() or None
    why, by = why_and_who(prefix)
    with st.container(horizontal=True, gap="small"):
        if st.button("Enter it", key="entry_enter", type="primary", disabled=value == now or not by):
            enter(value, why)
            clear(prefix)
            st.rerun()
        st.button("Leave it", key="entry_leave", on_click=left, args=(cancel, prefix))
