"""Decisions on a substitute: what must stand with them, what is kept, and what an export holds."""

import pytest

from compare.approval import (
    ApprovalError,
    Decision,
    by_candidate,
    decided,
    name_of,
    pair_key,
    since_then,
    table,
    text,
    with_decision,
)

OLD = {"part_number": "LK20", "maker": "Lindelake", "file": "a.pdf"}
NEW = {"part_number": "TW.2016", "maker": "Tansy & Wray", "file": "b.pdf"}
KEY = pair_key(OLD, NEW)


def decision(**changed):
    told = {
        "state": "proposed",
        "by": "M. Alder",
        "when": "2027-05-04T10:00+02:00",
        "board": "Frost node, rev C",
        "reason": "second source",
        "verdict": "drop-in",
        "incumbent": name_of(OLD),
        "candidate": name_of(NEW),
    }
    return Decision(**told | changed)


def test_a_decision_is_kept_with_all_that_went_before_it():
    slot = with_decision({}, KEY, decision())
    slot = with_decision(slot, KEY, decision(state="approved", evidence="report 17"))
    assert [one.state for one in decided(slot, KEY)] == ["proposed", "approved"]
    assert text(decided(slot, KEY)[-1]) == (
        "approved by M. Alder, 2027-05-04, for Frost node, rev C: second source; evidence: report 17"
    )
    assert decided(slot, pair_key(NEW, OLD)) == []


@pytest.mark.parametrize(
    ("changed", "said"),
    [
        ({"by": " ", "reason": ""}, "not kept yet: a name and a reason must stand with it"),
        ({"board": ""}, "not kept yet: the board must stand with it"),
        ({"state": "approved"}, "not kept yet: “approved” wants its evidence, such as the number of a test report"),
        ({"state": "liked"}, "liked: a decision is one of proposed, tested, approved, refused"),
    ],
)
def test_a_decision_that_is_not_whole_is_not_kept(changed, said):
    with pytest.raises(ApprovalError) as told:
        with_decision({}, KEY, decision(**changed))
    assert str(told.value) == said


def test_a_refusal_needs_no_evidence():
    assert decided(with_decision({}, KEY, decision(state="refused")), KEY)[0].state == "refused"


def test_a_verdict_that_changed_since_is_told():
    assert since_then(decision(), "does not fit") == (
        "☞ When that was decided the verdict was ▲ drop-in; now it is ▼ does not fit."
    )
    assert since_then(decision(), "drop-in") == ""


def test_decisions_travel_with_rankings_and_as_a_table():
    slot = with_decision({}, KEY, decision(state="tested", evidence="lot 5"))
    assert by_candidate(slot) == {"tansy&wray|tw.2016": "tested in place of LK20, Lindelake"}
    heads, rows = table(slot)
    assert dict(zip(heads, rows[0], strict=True))["Evidence"] == "lot 5"
    assert table({})[1] == []


def test_keys_of_a_later_issue_are_passed_over():
    kept = {KEY: {"decisions": [{**vars(decision()), "colour": "red"}]}}
    assert decided(kept, KEY) == [decision()]
