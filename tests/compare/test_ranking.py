"""The order of the parts, and what always holds of it."""

import json
import math
from io import StringIO

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from made_sheets import bench, reading, sheet, usual

from compare.ranking import rank, rank_sheets, write_ranking
from compare.review import review
from extract.model import Attributes

ORDER = {"meets": 2, "cannot tell": 1, "falls short": 0}


def ranked(*parts, changes=None):
    return rank([sheet(*parts)], bench(changes))["rows"]


def places(rows):
    return [row["part_number"] for row in rows]


GOOD = usual(number="good")
BETTER = usual(reading("frequency_tolerance_ppm", min=-5.0, max=5.0), number="better")
OPEN = usual(without=("drive_level_uw",), number="open")
BARE = usual(without=("esr_ohm", "operating_temperature_c", "drive_level_uw"), number="bare")
SHORT = usual(reading("drive_level_uw", max=10.0), number="short")
SHORTER = usual(reading("drive_level_uw", max=5.0), number="shorter")


def test_the_order_is_meets_cannot_tell_falls_short_and_the_greater_least_slack_within():
    rows = ranked(SHORTER, BARE, OPEN, GOOD, SHORT, BETTER)
    assert places(rows) == ["better", "good", "open", "bare", "short", "shorter"]
    assert [row["place"] for row in rows] == [1, 2, 3, 4, 5, 6]


def test_equal_rows_keep_the_order_given():
    rows = ranked(usual(number="b"), usual(number="a"), usual(number="c"))
    assert places(rows) == ["b", "a", "c"]


def test_a_row_has_the_numbers_and_verdict_of_its_review():
    (row,) = ranked(GOOD)
    one = review([sheet(GOOD)], bench())["reviews"][0]
    shared = set(row) & set(one)
    assert {"margin", "total_ppm", "verdict", "slack", "tightest", "missing", "chosen", "to_check"} <= shared
    assert all(row[key] == one[key] for key in shared)


def test_a_row_reckoned_beside_others_is_what_it_is_alone():
    rows = {row["part_number"]: row for row in ranked(SHORTER, BARE, OPEN, GOOD, SHORT, BETTER)}
    for part in (BARE, OPEN, GOOD, SHORT):
        (alone,) = ranked(part)
        assert rows[part.part_number] | {"place": 1} == alone


def test_no_row_is_known_by_no_slack():
    (row,) = ranked(usual(without=("esr_ohm",)), changes={"requirement": {"total_ppm": None}})
    assert row["tightest"] is None


def test_parts_that_do_not_offer_the_frequency_are_in_the_notes():
    other = usual(reading("frequency_mhz", 25.0), number="other")
    result = rank([sheet(other, GOOD)], bench())
    assert places(result["rows"]) == ["good"]
    assert [note["message"] for note in result["notes"]] == ["made.csv, other: does not offer 16 MHz (states 25 MHz)"]


def test_no_part_at_all_is_an_empty_ranking():
    assert rank([], bench()) == {"schema": "quartzfolio/rank/1", "rows": [], "notes": []}


def numbers_in(value):
    if isinstance(value, dict):
        for inner in value.values():
            yield from numbers_in(inner)
    elif isinstance(value, list):
        for inner in value:
            yield from numbers_in(inner)
    elif isinstance(value, float):
        yield value


@pytest.mark.parametrize(
    "changes",
    [
        {},
        {"circuit": {"transconductance_ms": None, "swing_v": None, "input_capacitor_pf": None}},
        {"circuit": {"transconductance_ms": [0.01, 9.0], "across_stray_pf": 0.0}},
        {"circuit": {"condition": [{"temperature_c": -40.0}]}, "requirement": {"trim_step_ppm": 0.0}},
    ],
)
def test_json_holds_no_inf_and_no_nan_and_every_span_is_in_order(changes):
    parts = [GOOD, BARE, usual(without=("shunt_capacitance_pf", "load_capacitance_pf"), number="x")]
    result = review([sheet(*parts)], bench(changes))
    assert all(math.isfinite(value) for value in numbers_in(result))
    json.dumps(result, allow_nan=False)
    for one in result["reviews"]:
        for value in one.values():
            if isinstance(value, dict) and "mid" in value:
                known = [value[end] for end in ("low", "mid", "high") if value[end] is not None]
                assert known == sorted(known)


WORSE = [
    ("esr_ohm", lambda k: reading("esr_ohm", max=60.0 * k)),
    ("frequency_tolerance_ppm", lambda k: reading("frequency_tolerance_ppm", min=-10.0 * k, max=10.0 * k)),
    ("frequency_stability_ppm", lambda k: reading("frequency_stability_ppm", min=-15.0 * k, max=15.0 * k)),
    ("ageing_ppm", lambda k: reading("ageing_ppm", min=-k, max=k, years=1.0)),
    ("drive_level_uw", lambda k: reading("drive_level_uw", max=100.0 / k)),
    ("shunt_capacitance_pf", lambda k: reading("shunt_capacitance_pf", 1.5, min=1.2 / k, max=1.8 * k)),
    ("motional_capacitance_ff", lambda k: reading("motional_capacitance_ff", 4.5, min=3.6 / k, max=5.4 * k)),
    ("operating_temperature_c", lambda k: reading("operating_temperature_c", min=-40.0 / k, max=85.0 / k)),
]


@settings(max_examples=60, deadline=None)
@given(st.sampled_from(WORSE), st.floats(1.0, 30.0))
def test_making_one_limit_worse_never_betters_a_verdict_a_slack_or_a_place(field_and_make, factor):
    field, make = field_and_make
    rows = ranked(usual(make(factor), number="worse"), usual(make(1.0), number="plain"))
    by_number = {row["part_number"]: row for row in rows}
    worse, plain = by_number["worse"], by_number["plain"]
    assert ORDER[worse["verdict"]] <= ORDER[plain["verdict"]]
    for key, slack in worse["slack"].items():
        if slack is not None and plain["slack"][key] is not None:
            assert slack <= plain["slack"][key] * (1 + 1e-9), (field, key)
    if worse["slack"] != plain["slack"]:
        assert worse["place"] >= plain["place"] or worse["tightest"] == plain["tightest"]


@settings(max_examples=40, deadline=None)
@given(st.sets(st.sampled_from([name for name, _ in WORSE] + ["load_capacitance_pf"]), min_size=1))
def test_what_is_not_known_never_ranks_above_what_is_known_to_do(without):
    rows = ranked(usual(without=tuple(without), number="unknown"), GOOD)
    estimated_only = without <= {"ageing_ppm", "shunt_capacitance_pf", "motional_capacitance_ff"}
    if not estimated_only:
        assert places(rows) == ["good", "unknown"]
        assert rows[1]["verdict"] == "cannot tell"


@pytest.mark.parametrize("indented", [True, False])
def test_the_document_written_row_by_row_is_the_ranking(indented):
    sheets, asked, out = (
        [sheet(SHORTER, BARE, OPEN, usual(number="far", without=("frequency_mhz",)))],
        bench(),
        StringIO(),
    )
    write_ranking(
        rank_sheets(sheets, asked), [{"level": "info", "message": "read", "where": None}], out, indented=indented
    )
    written, whole = json.loads(out.getvalue()), rank(sheets, asked)
    assert written["notes"] == [{"level": "info", "message": "read", "where": None}, *whole["notes"]]
    assert written | {"notes": whole["notes"]} == whole
    assert out.getvalue().count("\n") == len(whole["rows"]) + 3 or indented


def test_a_brief_row_says_what_the_whole_row_says_and_the_sheet_has_its_part_alone():
    found = rank_sheets([sheet(GOOD, SHORT, BARE)], bench())
    for brief in found.briefs:
        row = found.row(brief["place"])
        assert {key: brief[key] for key in brief if key != "attributes"} == {
            key: row[key] for key in brief if key != "attributes"
        }
        (alone,) = found.sheet_of(brief["place"]).parts
        assert alone.part_number == brief["part_number"]
    assert found.row(1) is found.row(1)


def test_a_brief_row_has_the_supply_that_its_sheet_states():
    priced = usual(number="priced").model_copy(update={"attributes": Attributes(price="0.21 €", status="active")})
    (brief,) = rank_sheets([sheet(priced)], bench()).briefs
    assert brief["attributes"] == {"price": "0.21 €", "status": "active"}


def test_a_part_has_the_same_numbers_in_a_list_as_alone():
    """With losses and a gain past the optimum what drives hardest lies between the corners, elsewhere for each."""
    circuit = {"transconductance_ms": [5.0, 90.0], "output_resistance_kohm": 5.0, "series_resistor_ohm": 100.0}
    asked = bench({"circuit": circuit})
    parts = [
        usual(reading("esr_ohm", max=esr), reading("shunt_capacitance_pf", max=c0), number=f"P{esr:g}-{c0:g}")
        for esr, c0 in ((30.0, 7.0), (60.0, 2.0), (150.0, 1.0), (60.0, 3.0))
    ]
    together = {row["part_number"]: row for row in rank([sheet(*parts)], asked)["rows"]}
    for one in parts:
        (alone,) = rank([sheet(one)], asked)["rows"]
        assert {**together[one.part_number], "place": 1} == alone
