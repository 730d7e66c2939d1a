"""What the page keeps for one person's session: the work, its way back, where it is saved, and what is being read."""

from __future__ import annotations

import getpass
import hashlib
import sys
from collections.abc import Sequence
from dataclasses import replace
from pathlib import Path
from typing import Any

import streamlit as st

from compare import background, keeping, typed
from compare.background import File, Reader
from compare.bench import BenchError
from compare.desk import NO_EXAMPLE, Desk, desk_from_bench, field_of, orchard_example
from compare.folio import SUFFIX, FolioError, Reopened, bench_text, read_folio
from compare.intake import single_names
from compare.page_results import contest, guarded, key_of, ranked, ranking, reviewed, sheets
from compare.palette import Palette, palette_of
from compare.serve import read_script_arguments
from compare.work import History, OpenSheet, Work, with_sheets
from extract.partlist import part_numbers

__all__ = ["contest", "guarded", "key_of", "ranked", "ranking", "reviewed", "sheets"]

KEPT_WHERE = "Your work is not saved: {fault}. Save it as a work file before you close the page."


def start() -> None:
    """Fill the state once: from the work that the address names, else from what the command line gave."""
    state = st.session_state
    if "work" not in state:
        state.update(work=Work(), history=History(), saved=None, inbox=0, chosen=None, said=[], reader=Reader())
        # `turn` counts what was changed, `moved` what was looked at other than by a press: tables mark their row anew.
        state.update(turn=0, moved=0, editing=None)
        state.ident = str(st.query_params.get("work", ""))
        if recall(state.ident):
            look_where(st.query_params.get("sheet", ""), st.query_params.get("part", ""))
        else:
            state.ident = keeping.new_ident()
            open_named(sys.argv[1:])
            # What the command line named is where the work begins, and no step to take back.
            state.history = History()
    # Going to another view empties the address.
    if st.query_params.get("work") != state.ident:
        st.query_params["work"] = state.ident
    take_read()


def look_where(sheet: str, part: str) -> None:
    """Have the Sheets view open where the address says, after a reload or on the way back."""
    one = work().of(sheet)
    if one is not None:
        at = int(part) if part.isdecimal() and int(part) < len(one.sheet.parts) else 0
        st.session_state.at = (sheet, at, None)


def open_named(arguments: Sequence[str]) -> None:
    """Open what the command line named: a bench, sheets, and at most one work file."""
    bench, names = read_script_arguments(arguments)
    files, notes = single_names([name for name in names if not name.endswith(SUFFIX)])
    # What a folder holds beside sheets is no news to the person who named it.
    st.session_state.said = [note.message for note in notes if note.level != "info"]
    for name in (name for name in names if name.endswith(SUFFIX)):
        try:
            open_folio(Path(name).read_bytes(), name)
        except OSError as fault:
            say(f"{name}: cannot be opened: {(fault.strerror or str(fault)).lower()}")
    if bench is not None:
        try:
            open_bench(bench_text(bench), bench)
        except (OSError, UnicodeDecodeError, FolioError) as fault:
            st.session_state.bench_fault = f"{bench}: cannot be read: {fault}"
    open_sheets([(name, None) for name in files])


def say(sentence: str) -> None:
    """Something to be told once, at the head of Sheets."""
    st.session_state.said = [*st.session_state.said, sentence]


def work() -> Work:
    held: Work = st.session_state.work
    return held


def history() -> History:
    held: History = st.session_state.history
    return held


def change(new: Work, said: str) -> None:
    """Make `new` the work. `said` is what was done, as `Undo` will name it: `Shunt C0 of ABX-26 corrected`."""
    old = work()
    st.session_state.history = history().after(said, old, new)
    remember(new)


def remember(new: Work) -> None:
    """Make `new` the work, with no step to undo: what is open or selected."""
    if new == work() and st.session_state.saved:
        return
    st.session_state.work = new
    st.session_state.turn += 1
    save()


def undo() -> None:
    """Take the last step back."""
    back, earlier = history().undone(work())
    st.session_state.history = earlier
    forget_fields()
    remember(back)


def save() -> None:
    """Write the work to this machine; where that cannot be, it is said and the page goes on."""
    state = st.session_state
    try:
        state.saved, state.save_fault = keeping.keep(state.ident, work(), history(), state.saved), ""
    except keeping.ChangedElsewhere:
        state.ident = keeping.new_ident()
        state.saved, state.save_fault = keeping.keep(state.ident, work(), history()), ""
        say("This work was changed in another tab too; from here on the two are kept apart.")
    except OSError as fault:
        state.save_fault = KEPT_WHERE.format(fault=f"{keeping.state_folder()}: {fault.strerror or fault}")


def recall(ident: str) -> bool:
    """Take up the work that this machine keeps under `ident`; False where there is none that can be read."""
    try:
        found = keeping.recall(ident)
    except FolioError as fault:
        say(str(fault))
        return False
    if found is None:
        return False
    take_up(found, ident)
    st.session_state.saved = keeping.stamp_of(ident)
    return True


def take_up(found: Reopened, ident: str) -> None:
    """Make a work that was read the one that is open."""
    state = st.session_state
    state.update(work=found.work, history=found.history, ident=ident, chosen=None, said=[*found.said], editing=None)
    state.turn += 1
    forget_fields()


def open_folio(data: bytes, name: str) -> bool:
    """Take up the work of a file, kept apart from the one that was open; False where the file cannot be used."""
    try:
        found = read_folio(data, name)
    except FolioError as fault:
        say(str(fault))
        return False
    take_up(found, keeping.new_ident())
    st.session_state.saved = None
    save()
    return True


def found(one: OpenSheet, data: bytes, name: str) -> str:
    """Put a sheet's own file beside its readings; a sentence where it is not the file that was read."""
    if hashlib.sha256(data).hexdigest() != one.sheet.sha256:
        return f"{name} is not the file that was read: its fingerprint differs"
    sheets = tuple(OpenSheet(each.sheet, data) if each.key == one.key else each for each in work().sheets)
    st.session_state.work = replace(work(), sheets=sheets)
    st.session_state.turn += 1
    save()
    return ""


def forget_other(ident: str) -> None:
    """Remove another work from this machine."""
    try:
        keeping.forget(ident)
    except OSError as fault:
        say(f"Not everything could be removed: {fault}")


def forget() -> None:
    """Remove the work from this machine, and begin with an empty one."""
    state = st.session_state
    state.reader.stop()
    state.reader.wait(5)
    try:
        keeping.forget(state.ident)
    except OSError as fault:
        say(f"Not everything could be removed: {fault}")
    state.update(work=Work(), history=History(), ident=keeping.new_ident(), saved=None, chosen=None, reader=Reader())
    state.inbox += 1
    state.turn += 1
    forget_fields()


def slot(name: str) -> Any:
    return work().slot(name)


def put_slot(name: str, value: Any, said: str = "") -> None:
    """Keep `value` under `name`; a step to undo where `said` names it."""
    new = work().with_slot(name, value)
    change(new, said) if said else remember(new)


def person() -> str:
    """The name that goes with corrections and decisions: as set on the page, else the one this machine knows."""
    try:
        login = getpass.getuser()
    except (OSError, KeyError):
        login = ""
    return str(st.session_state.get("person") or login or "not named")


def today() -> str:
    """The time now, as it goes with corrections and decisions."""
    return keeping.now()


def desk() -> Desk:
    return work().desk


def set_desk(new: Desk, said: str = "Circuit set") -> None:
    """Put a desk into the work; the fields are drawn afresh from it."""
    forget_fields()
    change(work().with_desk(new), said)


def forget_fields() -> None:
    """Let the fields be drawn afresh from the work."""
    for key in [key for key in st.session_state if str(key).startswith("field_")]:
        del st.session_state[key]


def put_field(key: str, text: str, *, kept: bool = False) -> str:
    """Take over what a person typed into a field of the bench; returns it as the field shows it back.

    `kept`: the value is unlikely, and a person has said that it is so.
    """
    before = desk()
    new = _with_field(before, key, text, kept=kept)
    said = new.understood.get(key)
    if said is not None and said.value is not None:
        text = typed.shown(said.value, field_of(key))
        new = _with_field(new, key, text, kept=kept)
    if new != before:
        change(work().with_desk(new), f"{field_of(key).label}: {text.strip() or 'blank'}")
    return text


def _with_field(before: Desk, key: str, text: str, *, kept: bool) -> Desk:
    return replace(before, typed={**before.typed, key: text}, kept=before.kept | ({(key, text)} if kept else set()))


def open_bench(text: str, name: str) -> None:
    try:
        set_desk(desk_from_bench(text, name), f"{name} opened")
    except BenchError as wrong:
        st.session_state.bench_fault = str(wrong)
    else:
        st.session_state.bench_fault = ""


def open_sheets(files: Sequence[File]) -> None:
    """Have files read (by name where there are no bytes); each can be used as soon as it is."""
    reader().add(files)
    if files:
        reader().wait(background.PATIENCE_S)
        take_read()


def open_example() -> None:
    """Have the orchard example's sheets read, and take its first bench where no circuit is set."""
    example = orchard_example()
    if example is None:
        st.session_state.said = [NO_EXAMPLE]
        return
    if desk().bench is None and example.benches:
        path = next(iter(example.benches.values()))
        open_bench(path.read_text(encoding="utf-8"), path.name)
    open_sheets([(path.name, path.read_bytes()) for path in example.sheets])


def reader() -> Reader:
    held: Reader = st.session_state.reader
    return held


def take_read() -> None:
    """Put the sheets that were read meanwhile into the work."""
    if new := reader().take():
        remember(replace(work(), sheets=with_sheets(work().sheets, new)))


def show_part(file: str, part_number: str | None = None) -> None:
    """Have the Sheets view open at a part of a file, or at the first one."""
    for one in work().sheets:
        if one.sheet.file == file:
            numbers = part_numbers(one.sheet.parts)
            at = numbers.index(part_number) if part_number in numbers else 0
            st.session_state.update(at=(one.key, at, None), editing=None, moved=st.session_state.moved + 1)
            return


def palette() -> Palette:
    return palette_of(st.context.theme.type)


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
