"""What the page worked out, kept by content for everybody: rankings, reviews and pictures of pages."""

from __future__ import annotations

import gc
import hashlib
import traceback
from collections.abc import Callable, Mapping, Sequence
from typing import Any, TypeVar

import streamlit as st

from compare import evidence
from compare.bench import Bench
from compare.choosing import Field, candidates
from compare.ranking import Ranked
from compare.work import OpenSheet, Work
from extract.model import SpecSheet, Where
from extract.partlist import part_numbers

Result = TypeVar("Result")
LONG = 2000
"""Rows that are worth keeping out of the search for garbage."""


def sheets() -> list[SpecSheet]:
    """The sheets that are open, with every correction put in."""
    work: Work = st.session_state.work
    return list(work.corrected)


@st.cache_resource(max_entries=16, show_spinner="Ranking …")
def ranked(key: str, _sheets: Sequence[SpecSheet], _bench: Bench) -> dict[str, Any]:  # noqa: ARG001
    from compare.ranking import rank

    result: dict[str, Any] = rank(_sheets, _bench)
    return result


@st.cache_resource(max_entries=8, show_spinner="Ranking …")
def contested(key: str, _sheets: Sequence[SpecSheet], _bench: Bench) -> Ranked:  # noqa: ARG001
    from compare.ranking import rank_sheets

    return rank_sheets(_sheets, _bench)


def field_of(contest: Ranked, slot: Mapping[str, Any]) -> Field:
    """The rows of a ranking with what `slot` knows of their supply.

    Those of a long list are passed over by the search for garbage that Streamlit makes after each run of the script: it
    would take a quarter of a second. They are in no ring, so that they go when nobody holds them any more.
    """
    field = Field(candidates(contest.briefs, slot))
    if len(field.every) > LONG:
        gc.freeze()
    return field


def remembered(name: str, of: Sequence[object], asked: object, make: Callable[[], Result]) -> Result:
    """What `make` gives, kept for the session while `of` are the same objects and `asked` is equal."""
    key = f"remembered_{name}"
    held = st.session_state.get(key)
    if held is None or held[1] != asked or any(one is not other for one, other in zip(held[0], of, strict=True)):
        held = tuple(of), asked, make()
        st.session_state[key] = held
    made: Result = held[2]
    return made


def contest(bench: Bench) -> Ranked | None:
    """All that is open in order, a row's sentences made when asked; None where that went wrong, which has been told."""
    every = sheets()
    return guarded("ranking", lambda: contested(key_of(bench, every), every, bench))


@st.cache_resource(max_entries=64, show_spinner="Working the part out …")
def reviewed(key: str, _sheets: Sequence[SpecSheet], _bench: Bench) -> dict[str, Any]:  # noqa: ARG001
    from compare.review import review

    result: dict[str, Any] = review(_sheets, _bench)
    return result


@st.cache_resource(max_entries=64, show_spinner=False)
def picture(sha256: str, where: str, _one: OpenSheet, _where: Where) -> Any:  # noqa: ARG001
    data = _one.data if _one.data is not None else evidence.sheet_bytes(_one.sheet)
    return None if data is None else evidence.page_picture(data, _one.sheet, _where)


@st.cache_resource(max_entries=256, show_spinner=False)
def page_count(sha256: str, kind: str, _data: bytes) -> int:  # noqa: ARG001
    """How many pages of a sheet can be shown; 0 where its kind has none."""
    return evidence.page_count(_data, kind)


def ranking(bench: Bench) -> dict[str, Any] | None:
    """All that is open, ranked; None where that went wrong, which has been told then."""
    every = sheets()
    return guarded("ranking", lambda: ranked(key_of(bench, every), every, bench))


def key_of(bench: Bench, of: Sequence[SpecSheet]) -> str:
    """A key that changes with the bench, with any sheet and with any correction."""
    work: Work = st.session_state.work
    told = [bench.to_toml(), *(one.model_dump_json(exclude_defaults=True) for one in work.corrections)]
    # An open sheet has its own key; corrections are told above.
    known = {id(sheet): one.key for sheet, one in zip(work.corrected, work.sheets, strict=True)}
    for sheet in of:
        if id(sheet) in known:
            told.append(known[id(sheet)])
        else:
            told += [sheet.file, str(sheet.sha256), *(number or "" for number in part_numbers(sheet.parts))]
    return hashlib.sha256("\n".join(told).encode()).hexdigest()


def guarded(what: str, work: Callable[[], Result]) -> Result | None:
    """Do `work`; a fault of ours is told with what happened to save, and the person's work is kept."""
    try:
        return work()
    except Exception:
        traceback.print_exc()
        st.error(f"Something went wrong while {what}. Your work is kept.")
        st.button("Try again", key="again")
        st.download_button("Save what happened", traceback.format_exc(), "what_happened.txt", key="happened")
        return None
