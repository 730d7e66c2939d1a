"""What the page keeps for one person's session, and what it keeps for everybody by content."""

from __future__ import annotations

import hashlib
import sys
import traceback
from collections.abc import Callable, Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import Any

import streamlit as st

from compare import evidence, pieces
from compare.bench import Bench, BenchError
from compare.desk import NO_EXAMPLE, Desk, desk_from_bench, orchard_example
from compare.intake import read_bytes, read_sheets, single_names
from compare.palette import Palette, palette_of
from compare.serve import read_script_arguments
from extract.model import Reading, SpecSheet


@dataclass(frozen=True)
class Opened:
    """A sheet that is open, with its bytes where it did not come by name."""

    sheet: SpecSheet
    data: bytes | None = None


def start() -> None:
    """Fill the state once, from what the command line gave."""
    if "opened" in st.session_state:
        return
    st.session_state.update(opened=[], pending=[], asked_for=0, inbox=0, chosen=None, said=[])
    set_desk(Desk())
    bench, names = read_script_arguments(sys.argv[1:])
    if bench is not None:
        try:
            open_bench(Path(bench).read_text(encoding="utf-8-sig"), bench)
        except (OSError, UnicodeDecodeError) as fault:
            st.session_state.bench_fault = f"{bench}: cannot be read: {fault}"
    files, notes = single_names(names)
    open_sheets([(name, None) for name in files])
    # What a folder holds beside sheets is no news to the person who named it.
    st.session_state.said = [note.message for note in notes if note.level != "info"]


def desk() -> Desk:
    state = st.session_state
    return Desk(dict(state.typed), state.kept, state.carried, state.conditions)


def set_desk(new: Desk) -> None:
    """Put a desk into the state; the fields are drawn afresh from it."""
    for key in [key for key in st.session_state if str(key).startswith("field_")]:
        del st.session_state[key]
    st.session_state.update(typed=dict(new.typed), kept=new.kept, carried=new.carried, conditions=new.conditions)


def open_bench(text: str, name: str) -> None:
    try:
        set_desk(desk_from_bench(text, name))
    except BenchError as wrong:
        st.session_state.bench_fault = str(wrong)
    else:
        st.session_state.bench_fault = ""


def open_sheets(files: Sequence[tuple[str, bytes | None]]) -> None:
    """Queue files (by name where there are no bytes); `read_next` reads them one by one, each usable at once."""
    state = st.session_state
    state.pending = [*state.pending, *files]
    state.asked_for = state.asked_for + len(files) if len(state.pending) > len(files) else len(files)


def open_example() -> None:
    """Queue the orchard example's sheets, and take its first bench where no circuit is set."""
    example = orchard_example()
    if example is None:
        st.session_state.said = [NO_EXAMPLE]
        return
    if desk().bench is None and example.benches:
        path = next(iter(example.benches.values()))
        open_bench(path.read_text(encoding="utf-8"), path.name)
    open_sheets([(path.name, path.read_bytes()) for path in example.sheets])


def told_of_reading() -> None:
    """Which sheet is being read, and the button that stops it."""
    state = st.session_state
    # A place of its own even when empty: else all that follows would shift while sheets are read.
    place = st.empty()
    if not state.pending:
        return
    at = state.asked_for - len(state.pending) + 1
    with place.container(horizontal=True, vertical_alignment="center", gap="small"):
        st.markdown(f"Reading {at} of {state.asked_for}: {pieces.plain(state.pending[0][0])} …", width="content")
        st.button("Stop", key="stop_reading", on_click=stop_reading)


def stop_reading() -> None:
    state = st.session_state
    read = state.asked_for - len(state.pending)
    state.said = [f"Stopped. {read} of {state.asked_for} were read; open the rest again when you want them."]
    state.pending = []


def read_next() -> None:
    """Read one sheet of the queue and draw again. It comes last in a run, so that the page stands meanwhile."""
    state = st.session_state
    if not state.pending:
        return
    name, data = state.pending[0]
    sheet = named_sheet(name, stamp(name)) if data is None else sheet_of(hashlib.sha256(data).hexdigest(), name, data)
    if identity(sheet) not in [identity(one.sheet) for one in state.opened]:
        state.opened = [*state.opened, Opened(sheet, data)]
    state.pending = state.pending[1:]
    st.rerun()


def identity(sheet: SpecSheet) -> tuple[str, ...]:
    """What tells sheets apart: name, content, and the parts that were asked for."""
    return sheet.file, sheet.sha256 or "", *(part.part_number or "" for part in sheet.parts)


def sheets() -> list[SpecSheet]:
    return [one.sheet for one in st.session_state.opened]


def palette() -> Palette:
    return palette_of(st.context.theme.type)


@st.cache_resource(max_entries=256, show_spinner=False)
def sheet_of(sha256: str, name: str, _data: bytes) -> SpecSheet:  # noqa: ARG001
    return read_bytes(_data, name)


@st.cache_resource(max_entries=256, show_spinner=False)
def named_sheet(name: str, stamped: tuple[int, int] | None) -> SpecSheet:  # noqa: ARG001
    """A sheet by its name; `stamped` makes a changed file be read again."""
    return read_sheets([name]).sheets[0]


def stamp(name: str) -> tuple[int, int] | None:
    """When the file of a name was changed and how large it is; None where there is none."""
    for candidate in (name, name.rpartition("#")[0]):
        try:
            found = Path(candidate).stat()
        except OSError:
            continue
        return found.st_mtime_ns, found.st_size
    return None


@st.cache_resource(max_entries=16, show_spinner="Ranking …")
def ranked(key: str, _sheets: Sequence[SpecSheet], _bench: Bench) -> dict[str, Any]:  # noqa: ARG001
    from compare.ranking import rank

    result: dict[str, Any] = rank(_sheets, _bench)
    return result


@st.cache_resource(max_entries=64, show_spinner="Working the part out …")
def reviewed(key: str, _sheets: Sequence[SpecSheet], _bench: Bench) -> dict[str, Any]:  # noqa: ARG001
    from compare.review import review

    result: dict[str, Any] = review(_sheets, _bench)
    return result


@st.cache_resource(max_entries=64, show_spinner=False)
def picture(sha256: str, where: str, _one: Opened, _reading: Reading) -> Any:  # noqa: ARG001
    data = _one.data if _one.data is not None else evidence.sheet_bytes(_one.sheet)
    return None if data is None else evidence.page_picture(data, _one.sheet, _reading.where)


def ranking(bench: Bench) -> dict[str, Any] | None:
    """All that is open, ranked; None where that went wrong, which has been told then."""
    every = sheets()
    return guarded("ranking", lambda: ranked(key_of(bench, every), every, bench))


def key_of(bench: Bench, of: Sequence[SpecSheet]) -> str:
    """A key that changes with the bench or with any sheet."""
    told = [bench.to_toml()]
    for sheet in of:
        told += [sheet.file, str(sheet.sha256), *(part.part_number or "" for part in sheet.parts)]
    return hashlib.sha256("\n".join(told).encode()).hexdigest()


def guarded(what: str, work: Callable[[], dict[str, Any]]) -> dict[str, Any] | None:
    """Do `work`; a fault of ours is told with what happened to save, and the person's work is kept."""
    try:
        return work()
    except Exception:
        traceback.print_exc()
        st.error(f"Something went wrong while {what}. Your work is kept.")
        st.button("Try again", key="again")
        st.download_button("Save what happened", traceback.format_exc(), "what_happened.txt", key="happened")
        return None


def first_row(row: int) -> Any:
    return {"selection": {"rows": [row], "columns": [], "cells": []}}


def selected_row(picked: Any, count: int) -> int:
    rows = picked.selection.rows if picked is not None else []
    return rows[0] if rows and rows[0] < count else 0


def title(text: str) -> None:
    """The heading of a view, without the sign of a link that nobody needs here."""
    st.markdown(f"## {text}", anchors=False)


def section(text: str) -> None:
    st.markdown(f"### {text}", anchors=False)


def go(view: str) -> None:
    """Show another view."""
    st.switch_page(st.session_state.pages[view])
