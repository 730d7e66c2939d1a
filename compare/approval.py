"""Approval of a substitute: proposed, tested, approved or refused, by whom, for which board, why.

A record lies in the work under `INCUMBENT > CANDIDATE` (keys of `work.part_key`) with all that was decided before it,
the newest last, each with the verdict that stood when it was decided.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import asdict, dataclass, fields
from typing import Any

from compare.answers import row_name
from compare.work import part_key

STATES = ("proposed", "tested", "approved", "refused")
MARKS = {"drop-in": "▲", "fits with changes": "△", "does not fit": "▼", "cannot tell": "◇"}
BETWEEN = " > "
TABLE = {
    "incumbent": "In place of",
    "candidate": "Part",
    "state": "Decision",
    "by": "By",
    "when": "When",
    "board": "Board",
    "reason": "Reason",
    "evidence": "Evidence",
    "verdict": "Verdict then",
    "changes": "Changes",
}
WANTED = {"by": "a name", "board": "the board", "reason": "a reason"}


class ApprovalError(ValueError):
    """A decision that is not whole; the message says what it lacks."""


@dataclass(frozen=True)
class Decision:
    """One decision. `verdict` is that of the program when it was taken; `changes` what the board would need then."""

    state: str
    by: str
    when: str
    board: str
    reason: str
    evidence: str = ""
    verdict: str = ""
    changes: str = ""
    incumbent: str = ""
    candidate: str = ""

    @classmethod
    def of(cls, kept: Mapping[str, Any]) -> Decision:
        known = {one.name for one in fields(cls)}
        return cls(**{key: str(value) for key, value in kept.items() if key in known})


def pair_key(incumbent: Mapping[str, Any], candidate: Mapping[str, Any]) -> str:
    """Where the decisions on a candidate in an incumbent's place are kept."""
    return f"{part_key(incumbent)}{BETWEEN}{part_key(candidate)}"


def decided(slot: Mapping[str, Any], key: str) -> list[Decision]:
    """All decisions on a pair, the newest last."""
    return [Decision.of(one) for one in (slot.get(key) or {}).get("decisions", ())]


def with_decision(slot: Mapping[str, Any], key: str, new: Decision) -> dict[str, Any]:
    """The slot with one more decision. ApprovalError where it says not who, for which board or why."""
    if new.state not in STATES:
        raise ApprovalError(f"{new.state}: a decision is one of {', '.join(STATES)}")
    lacking = [words for name, words in WANTED.items() if not getattr(new, name).strip()]
    if lacking:
        raise ApprovalError(f"not kept yet: {' and '.join(lacking)} must stand with it")
    if new.state in ("tested", "approved") and not new.evidence.strip():
        raise ApprovalError(f"not kept yet: “{new.state}” wants its evidence, such as the number of a test report")
    before = (slot.get(key) or {}).get("decisions", ())
    return {**slot, key: {"decisions": [*before, asdict(new)]}}


def text(one: Decision) -> str:
    """`approved by M. Alder, 2027-05-04, for Frost node, rev C: same margin; evidence: report 17`."""
    said = f"{one.state} by {one.by}, {one.when[:10]}, for {one.board}: {one.reason}"
    return f"{said}; evidence: {one.evidence}" if one.evidence else said


def since_then(one: Decision, verdict: str) -> str:
    """A sentence where the program's verdict is no longer the one that stood when it was decided; else ""."""
    if not one.verdict or one.verdict == verdict:
        return ""
    then, now = (f"{MARKS.get(words, '◇')} {words}" for words in (one.verdict, verdict))
    return f"☞ When that was decided the verdict was {then}; now it is {now}."


def name_of(part: Mapping[str, Any]) -> str:
    """A part as a record names it: number and maker."""
    return f"{row_name(part)}, {part['maker']}" if part.get("maker") else row_name(part)


def by_candidate(slot: Mapping[str, Any]) -> dict[str, str]:
    """By the candidate's key what was decided last of it, and in whose place."""
    said: dict[str, str] = {}
    for key in slot:
        if decisions := decided(slot, key):
            told = f"{decisions[-1].state} in place of {decisions[-1].incumbent}"
            candidate = key.rpartition(BETWEEN)[2]
            said[candidate] = f"{said[candidate]}; {told}" if candidate in said else told
    return said


def table(slot: Mapping[str, Any]) -> tuple[list[str], list[list[Any]]]:
    """Every decision, for an export."""
    rows = [[getattr(one, name) for name in TABLE] for key in slot for one in decided(slot, key)]
    return list(TABLE.values()), rows
