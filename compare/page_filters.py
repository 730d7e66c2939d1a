"""The filter sentence of Choose, the limits of supply behind it, and the weights; what is set is kept in the work."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from typing import Any

import streamlit as st

from compare import choosing, pieces, supply
from compare import page_session as session
from compare.choosing import ASPECTS, LIMITS, MOST_WEIGHT, ORDERS, WEIGHTS, Filters

NO_WEIGHT = "all weights are 0: the order is that of the ranking"
ANY_WORDS = {"package": "any package", "maker": "any maker", "verdict": "any verdict", "status": "any status"}
WIDTHS = {"package": 124, "maker": 138, "verdict": 124, "status": 200}
MOST_CHOICES = 200
LEFT_OUT = "A part of which the thing limited is not known is left out, and counted."


def asked() -> Filters:
    return Filters.of(session.slot("filters"))


def weights() -> dict[str, float]:
    return {key: float(value) for key, value in session.slot("weights").items() if key in ASPECTS}


def filter_line(filters: Filters, choices: Mapping[str, list[str]], offered: str, others: Callable[[], None]) -> None:
    """`9 of 11 parts read offer 26 MHz. Show any package, any verdict, by least slack`."""
    with st.container(horizontal=True, vertical_alignment="center", gap="small"):
        st.markdown(pieces.plain(offered), width="content")
        others()
    with st.container(horizontal=True, vertical_alignment="center", gap="small"):
        # One maker for all leaves nothing to choose.
        open_ones = [
            name for name in ("package", "maker", "verdict") if len(choices[name]) > 1 or getattr(filters, name)
        ]
        if open_ones:
            st.markdown("Show", width="content")
        for name in open_ones:
            choice(name, getattr(filters, name), choices[name])
        st.markdown("by" if open_ones else "In order of", width="content")
        order(filters.by)
        limits(filters, choices["status"])


def choice(name: str, value: str, options: list[str]) -> None:
    key = f"field_choose_{name}"
    listed = ["", *options[:MOST_CHOICES]]
    if value not in listed:
        listed.append(value)
    if st.session_state.setdefault(key, value) not in listed:
        st.session_state[key] = value
    st.selectbox(
        name.capitalize(),
        listed,
        format_func=lambda option: option or ANY_WORDS[name],
        key=key,
        label_visibility="collapsed",
        width=WIDTHS[name],
        on_change=put,
        args=(name, key),
    )


def order(by: str) -> None:
    key = "field_choose_by"
    st.session_state.setdefault(key, by)
    st.selectbox(
        "In order of",
        list(ORDERS),
        format_func=ORDERS.__getitem__,
        key=key,
        label_visibility="collapsed",
        width=122,
        on_change=put,
        args=("by", key),
    )


def put(name: str, key: str) -> None:
    value = st.session_state[key]
    keep(name, value or (Filters().by if name == "by" else ""))


def keep(name: str, value: Any) -> None:
    """Put one filter into the work."""
    before = asked().as_slot()
    session.put_slot("filters", Filters.of({**before, name: value}).as_slot())


def limits(filters: Filters, statuses: list[str]) -> None:
    """Limits of price, lead time, stock and minimum order, and a search, one press away."""
    with st.popover("Limits", key="limits"):
        search = "field_choose_part"
        st.session_state.setdefault(search, filters.part)
        st.text_input("Part number or file has", key=search, on_change=put, args=("part", search))
        for name, (column, words) in LIMITS.items():
            limit(name, column, words, getattr(filters, name))
        choice("status", filters.status, statuses)
        st.markdown(f":gray[:small[{LEFT_OUT}]]")


def limit(name: str, column: str, words: str, value: float | None) -> None:
    key = f"field_choose_{name}"
    st.session_state.setdefault(key, "" if value is None else supply.value_text(column, shown(column, value)))
    unit = supply.columns()[column].unit
    st.text_input(words.capitalize(), key=key, placeholder=unit or None, on_change=put_limit, args=(name, column, key))
    if fault := st.session_state.get(f"fault_{name}"):
        st.html(pieces.fault_html(fault))


def shown(column: str, value: float) -> Any:
    return {"amount": value, "currency": ""} if column == "price" else value


def put_limit(name: str, column: str, key: str) -> None:
    text, state = st.session_state[key].strip(), st.session_state
    state[f"fault_{name}"] = ""
    try:
        value = supply.understand(supply.columns()[column], text) if text else None
    except supply.SupplyError as fault:
        state[f"fault_{name}"] = str(fault)
        return
    keep(name, value["amount"] if isinstance(value, dict) else value)


def weights_line(filters: Filters) -> None:
    """The weights, in sight wherever the order is by them."""
    if filters.by != WEIGHTS:
        return
    held = weights()
    columns = st.columns(len(ASPECTS), gap="small")
    for column, (name, aspect) in zip(columns, ASPECTS.items(), strict=True):
        key = f"field_weight_{name}"
        st.session_state.setdefault(key, int(held.get(name, 0)))
        with column:
            st.selectbox(
                aspect.name.capitalize(), range(MOST_WEIGHT + 1), key=key, on_change=put_weight, args=(name, key)
            )
    said = choosing.weights_text(held) or NO_WEIGHT
    st.markdown(f":gray[:small[Weighed: {said}. Verdicts count before weights; what is not known stands last.]]")


def put_weight(name: str, key: str) -> None:
    value = {**weights(), name: float(st.session_state[key])}
    session.put_slot("weights", {one: weight for one, weight in value.items() if weight > 0})
