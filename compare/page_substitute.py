"""The Substitute view: may this part stand in for that one, what to change, what to ask, and what was decided."""

from __future__ import annotations

import hashlib
from collections.abc import Sequence
from typing import Any

import streamlit as st

from compare import answers, approval, charts, export, pieces, supply, swap_pieces, swap_shown
from compare import page_session as session
from compare.approval import ApprovalError, Decision
from compare.bench import Bench
from compare.blocks import Report
from compare.figures import counted
from compare.levers import Lever, levers
from compare.page_charts import picture
from compare.page_copy import copy_button, figures
from compare.page_shared import cautions, fingerprint, review_of, save_buttons, something_open
from compare.refit import with_changes
from compare.report_html import report_html
from compare.sheets_json import notes_of
from compare.substitution import SubstituteError, substitute
from compare.swap_parts import Choice, as_row, choices, default_candidate
from compare.swap_report import file_name, swap_report
from extract.model import SpecSheet

SIZE = 1.08
"""Of the charts: their type as large as the page's."""


def substitute_view() -> None:
    if not something_open("compare"):
        return
    bench = session.desk().bench
    contest = session.contest(bench) if bench is not None else None
    kept = session.slot("selection")
    wanted = {tuple(kept[role]) for role in ("incumbent", "candidate") if kept.get(role)} | {st.session_state.chosen}
    places = choices(session.sheets(), contest, wanted)
    if len(places) < 2:
        session.title("Nothing to compare yet")
        st.markdown(
            "A present part and a candidate are wanted: at least two parts"
            + (" at the bench’s frequency." if bench else ".")
        )
        if st.button("Add sheets", key="to_sheets", type="primary"):
            session.go("sheets")
        return
    left, right = st.columns([1.66, 1], gap="medium")
    with left:
        incumbent, candidate = pair(places)
        found = judged(incumbent, candidate, bench)
    if found is None:
        return
    result, one = found
    bars = levers_of(incumbent, candidate, one, bench)
    found_lines = swap_shown.swap_lines(one, bars)
    both = supplied_both(incumbent, candidate)
    with left:
        answer(result, one, bench)
        lines(result, one, found_lines, bench)
        report(result, one, found_lines, bench, both, (incumbent, candidate))
        steps(incumbent, candidate, places)
        every_candidate(incumbent, places, bench)
        cautions()
    with right:
        as_it_is(result, one, candidate, bench)
        supplied(both)
        ask(one)
        decision(result, one)


def pair(places: Sequence[Choice]) -> tuple[Choice, Choice]:
    """The present part and the candidate, chosen here or elsewhere and kept in the work."""
    kept = session.slot("selection")
    by_identity = {one.identity: one for one in places}
    wanted = tuple(kept.get("incumbent") or st.session_state.chosen or ())
    incumbent = by_identity.get(wanted, places[0])
    wanted = tuple(kept.get("candidate") or ())
    candidate = by_identity.get(wanted)
    if candidate is None or candidate is incumbent:
        candidate = default_candidate(incumbent, places)
    # A pair once looked at stays, also where a change of the circuit puts the parts in another order.
    keep({"incumbent": incumbent.identity, "candidate": candidate.identity})
    with st.container(horizontal=True, vertical_alignment="center", gap="small"):
        st.markdown("In place of", width="content")
        choose("incumbent", incumbent, places)
        st.markdown("try", width="content")
        choose("candidate", candidate, [one for one in places if one is not incumbent])
    return incumbent, candidate


def choose(role: str, now: Choice, places: Sequence[Choice]) -> None:
    key = f"field_swap_{role}"
    options = [one.identity for one in places]
    if st.session_state.get(key) != now.identity:
        st.session_state[key] = now.identity
    names = {one.identity: one.label for one in places}
    label = {"incumbent": "Present part", "candidate": "Candidate"}[role]
    st.selectbox(
        label,
        options,
        format_func=names.__getitem__,
        key=key,
        label_visibility="collapsed",
        width=286,
        on_change=put,
        args=(role, key),
    )


def put(role: str, key: str) -> None:
    keep({role: st.session_state[key]})


def keep(roles: dict[str, answers.Identity]) -> None:
    before = session.slot("selection")
    told = {**before, **{role: list(identity) for role, identity in roles.items()}}
    if told != before:
        session.put_slot("selection", told)


@st.cache_resource(max_entries=64, show_spinner="Comparing …")
def substituted(
    key: str, _incumbent: Sequence[SpecSheet], _candidates: Sequence[SpecSheet], _bench: Bench | None
) -> Any:  # noqa: ARG001
    return substitute(_incumbent, _candidates, _bench)


def key_of(bench: Bench | None, *parts: Sequence[SpecSheet]) -> str:
    """A key that changes with the bench, with any part and with any correction."""
    told = [one.file + fingerprint(one) for of in parts for one in of]
    return hashlib.sha256(repr((bench.to_toml() if bench is not None else "", told)).encode()).hexdigest()


def judged(incumbent: Choice, candidate: Choice, bench: Bench | None) -> tuple[dict[str, Any], dict[str, Any]] | None:
    """The result and the candidate in it; None where the question cannot be put, which is said then."""
    pair_of = [incumbent.alone()], [candidate.alone()]
    result = compared(key_of(bench, *pair_of), *pair_of, bench)
    return None if result is None else (result, result["candidates"][0])


def compared(
    key: str, incumbent: Sequence[SpecSheet], candidates: Sequence[SpecSheet], bench: Bench | None
) -> dict[str, Any] | None:
    """The comparison; None where the question cannot be put, or something went wrong, which is said then."""

    def work() -> dict[str, Any] | str:
        try:
            result: dict[str, Any] = substituted(key, incumbent, candidates, bench)
        except SubstituteError as fault:
            return str(fault)
        return result

    result = session.guarded("comparing", work)
    if isinstance(result, str):
        session.title("This cannot be asked yet")
        st.markdown(pieces.plain(swap_shown.sentence(result)))
        return None
    return result


@st.cache_resource(max_entries=64, show_spinner=False)
def levered(
    key: str, _incumbent: SpecSheet, _candidate: SpecSheet, _fields: Sequence[str], _bench: Bench
) -> dict[str, Lever]:  # noqa: ARG001
    return levers((_incumbent, _incumbent.parts[0]), (_candidate, _candidate.parts[0]), _fields, _bench)


def levers_of(incumbent: Choice, candidate: Choice, one: dict[str, Any], bench: Bench | None) -> dict[str, Lever]:
    """What each reading does alone; nothing without a circuit or at another frequency."""
    if bench is None or "slack" not in one:
        return {}
    old, new = incumbent.alone(), candidate.alone()
    key = key_of(bench, [old], [new])
    return (
        session.guarded("weighing the lines", lambda: levered(key, old, new, swap_shown.differing_fields(one), bench))
        or {}
    )


def answer(result: dict[str, Any], one: dict[str, Any], bench: Bench | None) -> None:
    session.title(pieces.plain(swap_shown.heading(one)))
    built = [] if bench is None else ["The circuit stays as built."]
    st.markdown(" ".join(map(pieces.bold, [*swap_shown.below_heading(one), *built])))
    if bench is None:
        with st.container(horizontal=True, vertical_alignment="center", gap="small"):
            st.markdown(pieces.plain(swap_shown.taken_text(result)), width="stretch")
            if st.button("Set the circuit", key="to_circuit"):
                session.go("circuit")


def lines(result: dict[str, Any], one: dict[str, Any], found: swap_shown.Compared, bench: Bench | None) -> None:
    # What is known of their supply stands beside both, with its date.
    differ = [line for line in found.differ if line.field not in ("price", "lead_time")]
    colours = session.palette()
    if differ:
        session.section(swap_shown.differ_heading(differ))
        figures(swap_pieces.lines_html(differ, colours, levers=bench is not None), key="differ")
        if bench is not None:
            st.markdown(f":gray[:small[{swap_shown.LEVER_LEGEND}]]")
    if found.same:
        session.section(swap_shown.same_heading(found.same))
        figures(swap_pieces.same_html(found.same), key="same")
    if found.silent:
        st.markdown(f":gray[{pieces.plain(swap_shown.silent_text(found.silent))}]")

    # What is saved is made once it is asked for, by then outside the session.
    sheets, decided = session.sheets(), session.slot("decisions")

    def tables() -> dict[str, export.Table]:
        both = [result["incumbent"], one]
        numbered = [row for row in both if "margin" in row]
        return {
            "lines": swap_shown.lines_table(one, result["incumbent"], found.every),
            "verdict": swap_shown.summary_table(result, one),
            "numbers": export.numbers_table(numbered),
            "sources": export.sources_table(sheets, both),
            "decisions": approval.table(decided),
        }

    def told() -> dict[str, Any]:
        return {**result, "notes": [*notes_of(sheets), *result["notes"]]}

    copied = swap_shown.lines_table(one, result["incumbent"], found.every)
    save_buttons("substitute", copied, tables, told, key="substitute")


def steps(incumbent: Choice, candidate: Choice, places: Sequence[Choice]) -> None:
    others = [one for one in places if one is not incumbent]
    at = others.index(candidate)
    following = others[(at + 1) % len(others)]
    with st.container(horizontal=True, vertical_alignment="center", gap="small"):
        swapped = {"incumbent": candidate.identity, "candidate": incumbent.identity}
        st.button("Swap the two", key="swap_two", shortcut="X", on_click=keep, args=(swapped,))
        st.button(
            "Next candidate",
            key="next_candidate",
            shortcut="N",
            on_click=keep,
            args=({"candidate": following.identity},),
        )
        st.markdown(f":gray[:small[{swap_shown.next_text(at + 1, len(others))}]]", width="content")


def every_candidate(incumbent: Choice, places: Sequence[Choice], bench: Bench | None) -> None:
    """All that is open in the incumbent's place, best first; of a long list when it is asked for."""
    others = [one for one in places if one is not incumbent]
    with st.expander(
        f"Try all {counted(len(others), 'candidate')} at once", key="every_candidate", on_change="rerun"
    ) as opened:
        if not opened.open:
            return
        own = [incumbent.alone()]
        rest = [one.alone() for one in others]
        result = compared(key_of(bench, own, rest), own, rest, bench)
        if result is None:
            return
        table = swap_shown.candidates_table(result)
        heads = ["Place", "Verdict", "Part", "Shift", "What decides"]
        frame = {head: [row[at] for row in table] for at, head in enumerate(heads)}
        column = st.column_config
        widths = {
            "Place": column.NumberColumn(width=48),
            "Verdict": column.TextColumn(width=130),
            "Part": column.TextColumn(width=150),
        }
        st.dataframe(
            frame, hide_index=True, key="all_candidates", alt="Every candidate, best first", column_config=widths
        )
        copy_button(export.as_tabs((heads, [list(row) for row in table])), key="copy_candidates")


def as_it_is(result: dict[str, Any], one: dict[str, Any], candidate: Choice, bench: Bench | None) -> None:
    """The candidate on the board as it is and with the changes; both parts in the same circuit."""
    if bench is None or "slack" not in one:
        return
    session.section(pieces.plain(f"As the board is: {answers.verdict(one['circuit_verdict'])}"))
    picture(charts.slack_chart(answers.slack_rows(one, bench)).draw(session.palette()), key="as_it_is", widest=SIZE)
    if one["changes"]:
        changed = with_changes(bench, one["changes"])
        review = review_of(candidate.alone(), changed)
        if review is not None:
            session.section(pieces.plain(swap_shown.after_heading(one["changes"], review["verdict"])))
            chart = charts.slack_chart(answers.slack_rows(review, changed))
            picture(chart.draw(session.palette()), key="as_changed", widest=SIZE)
    st.markdown(":gray[:small[▮ worst case · ○ nominal · hatched: not met · dotted: not known]]")
    if both := swap_shown.both_in_circuit(result["incumbent"], one):
        figures(swap_pieces.both_html(both), key="both")


def supplied_both(incumbent: Choice, candidate: Choice) -> list[swap_shown.BothHave]:
    """Price, stock and lead time of both, where anything is known of them."""
    slot = session.slot("supply")
    old, new = (supply.supply_of(as_row(choice.alone()), slot) for choice in (incumbent, candidate))
    return swap_shown.both_supplied(old, new)


def supplied(both: list[swap_shown.BothHave]) -> None:
    if both:
        figures(swap_pieces.both_html(both, "Supply"), key="supplied")


def report(  # noqa: PLR0917
    result: dict[str, Any],
    one: dict[str, Any],
    found: swap_shown.Compared,
    bench: Bench | None,
    both: list[swap_shown.BothHave],
    pair_of: tuple[Choice, Choice],
) -> None:
    """The same on paper, with the decisions, to be filed and signed."""
    decisions = approval.decided(session.slot("decisions"), approval.pair_key(result["incumbent"], one))
    day = session.today()[:10]

    def made() -> Report:
        of = [choice.alone() for choice in pair_of]
        sheets = list(dict.fromkeys((sheet.file, sheet.sha256 or "") for sheet in of))
        return swap_report(result, one, found, bench=bench, supply=both, decisions=decisions, sheets=sheets, day=day)

    def pdf() -> bytes:
        from compare.report_pdf import report_pdf

        return report_pdf(made())

    name = file_name(result, one)
    with st.container(horizontal=True, gap="small"):
        st.download_button(
            "Save report, PDF", pdf, f"{name}.pdf", "application/pdf", key="swap_pdf", on_click="ignore", shortcut="P"
        )
        st.download_button(
            "HTML, one file",
            lambda: report_html(made()),
            f"{name}.html",
            "text/html",
            key="swap_html",
            on_click="ignore",
        )


def ask(one: dict[str, Any]) -> None:
    letters = swap_shown.letters(one)
    if letters:
        session.section(pieces.plain(swap_shown.ask_heading(one)))
    for number, (label, text) in enumerate(letters):
        st.html(swap_pieces.said_html(text))
        copy_button(text, key=f"question_{number}", label=label, shortcut="" if number else "q")
    if open_ends := one.get("bench_questions"):
        session.section("Find out")
        for question in open_ends:
            st.markdown(f"- {pieces.plain(answers.told(question))}")


def decision(result: dict[str, Any], one: dict[str, Any]) -> None:
    """What was decided of this pair, and the form for the next decision."""
    session.section("Decision")
    key = approval.pair_key(result["incumbent"], one)
    before = approval.decided(session.slot("decisions"), key)
    for past in before:
        st.markdown(f"- {pieces.plain(approval.text(past))}")
    if before and (said := approval.since_then(before[-1], one["verdict"])):
        st.html(pieces.look_html(said.removeprefix("☞ ")))
    with st.form(key=f"decision_{key}_{len(before)}", border=False, enter_to_submit=False):
        state, by = st.columns([1, 1.4], gap="small")
        told = {
            "state": state.selectbox(
                "State", approval.STATES, index=min(len(before), 2), key=f"state_{key}_{len(before)}"
            )
        }
        told["by"] = by.text_input("By", session.person(), key=f"by_{key}_{len(before)}")
        told["board"] = st.text_input(
            "For board", before[-1].board if before else session.work().name, key=f"board_{key}_{len(before)}"
        )
        told["reason"] = st.text_input("Reason", key=f"reason_{key}_{len(before)}")
        told["evidence"] = st.text_input(
            "Evidence", placeholder="test report, sample lot, letter", key=f"evidence_{key}_{len(before)}"
        )
        pressed = st.form_submit_button("Keep decision", key=f"keep_{key}_{len(before)}", type="primary", shortcut="K")
    if pressed:
        keep_decision(key, result, one, told)


def keep_decision(key: str, result: dict[str, Any], one: dict[str, Any], told: dict[str, Any]) -> None:
    new = Decision(
        **told,
        when=session.today(),
        verdict=one["verdict"],
        changes=swap_shown.changes_text(one["changes"]).replace("**", ""),
        incumbent=approval.name_of(result["incumbent"]),
        candidate=approval.name_of(one),
    )
    try:
        slot = approval.with_decision(session.slot("decisions"), key, new)
    except ApprovalError as fault:
        st.html(pieces.fault_html(str(fault)))
        return
    session.put_slot("decisions", slot, f"{answers.row_name(one)} {new.state}")
    st.rerun()
