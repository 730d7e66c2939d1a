"""The right side of Sheets: the reading that waits or was chosen, its keys, its place on the page, and its form."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from functools import partial
from typing import Any

import streamlit as st

from compare import looks, pieces, sheet_lines, shown
from compare import page_session as session
from compare.corrections import Correction, Line, next_number, with_correction, without
from compare.looks import Look
from compare.page_entry import entry_form, fact_form
from compare.page_evidence import evidence_of
from compare.page_results import key_of, reviewed
from compare.sheet_lines import PartLines
from compare.work import OpenSheet, Work
from extract.model import Reading

At = tuple[str, int, int | str | None]
ADDING = "adding"


def at_look() -> At:
    """The sheet, part and reading that are looked at; what waits first where none was chosen or it is closed."""
    work, state = session.work(), st.session_state
    at: At | None = state.get("at")
    if at is not None and work.of(at[0]) is not None:
        return at
    if not work.sheets:
        return "", 0, None
    if state.get("first_for") != state.turn:
        waiting = looks.queue(work)
        state.update(first=waiting[0].place if waiting else (work.sheets[0].key, 0, None), first_for=state.turn)
    first: At = state.first
    return first


def go_to(sheet: str, part: int, reading: int | str | None, *, moved: bool = True) -> None:
    """Look at another reading; `moved`: not by a press on its row, so that the table must mark the row afresh."""
    state = st.session_state
    if moved:
        state.moved += 1
        state.whole_page = sheet != at_look()[0] or state.get("whole_page", False)
    state.update(at=(sheet, part, reading), editing=None)
    st.query_params.update(sheet=sheet, part=str(part))


def reading_area(one: OpenSheet, part: PartLines, queue: Sequence[Look]) -> None:
    """What is chosen, or waits; the keys that settle it; where it stands."""
    _, _, number = at_look()
    number = part.rows[part.row_of(number)] if part.rows else None
    if st.session_state.get("editing") == ADDING:
        entry_form(part, None, cancel=leave, enter=enter, enter_fact=enter_fact)
        return
    if isinstance(number, str):
        fact_area(part, number)
        return
    line = part.line(number)
    look = next((each for each in queue if number is not None and each.place == (part.sheet, part.at, number)), None)
    if line is None:
        session.section("No readings")
        st.markdown("The sheet gives no values for this part. **Add a reading** enters one.")
        return
    if look is not None:
        doubtful(part, look, queue)
    else:
        settled(part, line, queue)
    if st.session_state.get("editing") is not None:
        entry_form(part, line, cancel=leave, enter=enter, enter_fact=enter_fact)
    evidence_of(one, line)


def doubtful(part: PartLines, look: Look, queue: Sequence[Look]) -> None:
    """The question, what hangs on it, and a key for each answer."""
    session.section(f"{queue.index(look) + 1} of {len(queue)} to look at: {pieces.plain(look.asks)}")
    told = f"{look.reason} {consequence(part, look)}".strip()
    st.markdown(f"Read **{pieces.plain(shown.value_text(look.now))}**. {pieces.plain(told)}")
    with st.container(horizontal=True, gap="small"):
        likely = look.other is not None and look.other.likely
        if look.can_keep:
            answer(look.keep, "keep", "K", as_read, part, look.reading, primary=not likely)
        if look.other is not None:
            answer(look.other.button, "other", "L", take_other, part, look, primary=likely)
        answer("Correct…", "correct", "E", edit)
        answer("Not on the sheet", "gone", "O", take_away, part, look.reading)
        if len(queue) > 1:
            answer("Later", "later", "N", later, look)


def settled(part: PartLines, line: Line, queue: Sequence[Look]) -> None:
    """A reading that waits for nobody: what became of it, and how to change it."""
    session.section(f"{pieces.plain(shown.title(line.shown.field))}")
    told = [shown.evidence(line.now).read] if line.now is not None else []
    for said in (*told, *sheet_lines.history_lines(line.correction)):
        st.markdown(pieces.plain(said))
    with st.container(horizontal=True, gap="small"):
        answer("Correct…", "correct", "E", edit)
        if line.now is not None:
            answer("Not on the sheet", "gone", "O", take_away, part, line.number)
        if line.correction is not None:
            name = "Put back the sheet’s value" if line.read is not None else "Remove it"
            answer(name, "put_back", None, put_back, part, line.number)
        if queue:
            answer(f"Next of {len(queue)} to look at", "later", "N", later, None)
    if not queue:
        st.markdown(":gray[:small[Nothing left to look at.]]")


def fact_area(part: PartLines, fact: str) -> None:
    """One of the part's words: what the sheet says, and how to change it."""
    session.section(f"{sheet_lines.FACTS[fact]}")
    now = getattr(part.part, fact)
    st.markdown(f"**{pieces.plain(now or 'not stated')}**")
    changed = part.changed_facts.get(fact)
    for said in sheet_lines.history_lines(changed):
        st.markdown(pieces.plain(said))
    with st.container(horizontal=True, gap="small"):
        answer("Correct…", "correct", "E", edit)
        if changed is not None:
            answer("Put back the sheet’s value", "put_back", None, put_back, part, fact)
    if st.session_state.get("editing") is not None:
        fact_form(fact, now, cancel=leave, enter=partial(enter_fact, part, fact))


def answer(name: str, key: str, shortcut: str | None, press: Any, *args: Any, primary: bool = False) -> None:
    st.button(
        pieces.plain(name),
        key=f"look_{key}",
        shortcut=shortcut,
        type="primary" if primary else "secondary",
        on_click=press,
        args=args,
    )


def consequence(part: PartLines, look: Look) -> str:
    """What the other meaning, or taking the reading away, would change in the circuit; "" where nothing is judged."""
    bench = session.desk().bench
    if bench is None:
        return ""
    number = look.reading
    other = None if look.other is None else look.other.reading
    change = _correction(part, number, "not on the sheet" if other is None else "value", new=other)
    work = session.work()
    then = replace(work, corrections=with_correction(work.corrections, change))
    before, after = (_judged(part, one, at) for at, one in enumerate((work, then)))
    if before is None or after is None:
        return "" if before is None else "Without it the part does not offer the frequency asked."
    return looks.consequence(before, after, "Without it" if look.other is None else look.other.words)


def _judged(part: PartLines, work: Work, variant: int) -> Any:
    """The part's review in this work; None where it does not offer the frequency, or cannot be reckoned."""
    bench = session.desk().bench
    place = next(at for at, one in enumerate(work.sheets) if one.key == part.sheet)
    sheet = work.corrected[place]
    if bench is None:
        return None
    own = [sheet.model_copy(update={"parts": (sheet.parts[part.at],)})]
    key = f"{key_of(bench, own)} {variant} {hash(own[0].parts[0].readings)}"
    reviews = reviewed(key, own, bench)["reviews"]
    return reviews[0] if reviews else None


def _correction(part: PartLines, number: int, what: Any, *, new: Reading | None = None, **more: str) -> Correction:
    line = part.line(number)
    return Correction(
        sheet=part.sheet,
        part=part.at,
        reading=number,
        what=what,
        new=new,
        was=None if line is None else line.read,
        by=session.person(),
        at=session.today(),
        **more,
    )


def make(one: Correction, said: str) -> None:
    """Put a correction in, as a step to undo."""
    work = session.work()
    session.change(replace(work, corrections=with_correction(work.corrections, one)), said)
    st.session_state.update(whole_page=True, editing=None)


def named(part: PartLines, number: int) -> str:
    line = part.line(number)
    what = "reading" if line is None else shown.NAMES[line.shown.field]
    return f"{what} of {shown.part_name(part.part, part.at + 1)}"


def as_read(part: PartLines, number: int) -> None:
    on = after(part, number)
    make(_correction(part, number, "as read"), f"{named(part, number)} kept as read")
    go_to(*on)


def take_other(part: PartLines, look: Look) -> None:
    if look.other is None:
        return
    on, other = after(part, look.reading), look.other
    make(
        _correction(part, look.reading, "value", new=other.reading, why=other.why),
        f"{named(part, look.reading)}: {other.button[:1].lower()}{other.button[1:]}",
    )
    go_to(*on)


def take_away(part: PartLines, number: int) -> None:
    on = after(part, number)
    make(_correction(part, number, "not on the sheet"), f"{named(part, number)} not on the sheet")
    go_to(*on)


def after(part: PartLines, number: int) -> At:
    """Where to look once this reading is settled: the next one that waits, else it itself."""
    queue = looks.queue(session.work())
    places = [each.place for each in queue]
    here = (part.sheet, part.at, number)
    others = [place for place in places if place != here]
    if here not in places or not others:
        return here
    return next((place for place in places[places.index(here) + 1 :]), others[0])


def later(look: Look | None) -> None:
    """Look at the next one that waits, round and round."""
    queue = looks.queue(session.work())
    if not queue:
        return
    at = queue.index(look) + 1 if look in queue else 0
    go_to(*queue[at % len(queue)].place)


def put_back(part: PartLines, place: int | str) -> None:
    work = session.work()
    name = sheet_lines.FACTS[place] if isinstance(place, str) else named(part, place)
    session.change(
        replace(work, corrections=without(work.corrections, part.sheet, part.at, place)), f"{name} as the sheet has it"
    )
    st.session_state.whole_page = True
    go_to(part.sheet, part.at, place)


def put_back_part(part: PartLines) -> None:
    work = session.work()
    name = shown.part_name(part.part, part.at + 1)
    session.change(
        replace(work, corrections=without(work.corrections, part.sheet, part.at)), f"{name} as the sheet has it"
    )
    st.session_state.whole_page = True
    go_to(part.sheet, part.at, None)


def edit() -> None:
    st.session_state.editing = "correct"


def add_reading() -> None:
    st.session_state.editing = ADDING


def leave() -> None:
    st.session_state.editing = None


def enter(part: PartLines, line: Line | None, reading: Reading, typed: str, why: str) -> None:
    """Take over what the form holds."""
    number = next_number(part.read, part.corrections) if line is None else line.number
    was_on_sheet = line is not None and line.read is not None
    name = shown.NAMES[reading.field]
    on: At = (part.sheet, part.at, number) if line is None else after(part, number)
    said = f"{name} of {shown.part_name(part.part, part.at + 1)} {'corrected' if line is not None else 'added'}"
    make(_correction(part, number, "value" if was_on_sheet else "added", new=reading, typed=typed, why=why), said)
    go_to(*on)


def enter_fact(part: PartLines, fact: Any, value: str | None, why: str) -> None:
    one = Correction(
        sheet=part.sheet,
        part=part.at,
        what="fact",
        fact=fact,
        value=value,
        typed=value or "",
        why=why,
        by=session.person(),
        at=session.today(),
    )
    make(one, f"{sheet_lines.FACTS[fact]} of {shown.part_name(part.part, part.at + 1)} corrected")
    go_to(part.sheet, part.at, fact)
