"""Every sheet of the corpus and of the samples, read and held against the score that it must not undercut.

To add a sheet that is misread: put it under `tests/corpus/sheets`, with names and numbers of your own if it is not
free, beside it `NAME.EXT.expected.json` with what a careful person reads off the page (the form of the others; write
it before the reader is asked). `python tests/corpus/scoring.py --details NAME` lists what is wrong, and `python
tests/corpus/scoring.py --write-floor --lower NAME` makes today's score the floor of a sheet that cannot yet be read.
A sheet without a floor must be read perfectly. When the reader gets better, `--write-floor` raises the floors.
"""

from __future__ import annotations

import math
import os
from importlib.util import find_spec
from typing import Any

import pytest

from extract.model import Note, Part, Reading, SpecSheet, When, Where
from tests.corpus import scoring

FILES = scoring.expected_files()
FLOORS = scoring.read_floors()
# Least C0/C1 of the cut's fundamental, pi^2/(8 k^2) with k = 8.8 % (AT) and 5.6 % (BT); n^2 times it at overtone n.
# Bottom, Introduction to Quartz Crystal Unit Design, 1982, from memory.
LEAST_RATIO = {"AT": 158.0, "BT": 390.0}
OVERTONES = {"third overtone": 3, "fifth overtone": 5}


def _marked(name: str) -> Any:
    return pytest.param(name, marks=pytest.mark.ocr if FILES[name][1].get("scan") else (), id=name)


@pytest.mark.parametrize("name", [_marked(name) for name in FILES])
def test_a_sheet_is_read_no_worse_than_its_floor(name: str) -> None:
    path, expected = FILES[name]
    if expected.get("scan") and find_spec("rapidocr") is None:
        reason = "an image-only sheet: install the ocr extra (rapidocr and onnxruntime) to read it"
        pytest.fail(reason) if os.environ.get("CI") == "true" else pytest.skip(reason)
    score = scoring.score_file(path, expected)
    worse = scoring.below_floor(score, FLOORS.get(name))
    assert worse is None, f"{worse}\n" + "\n".join(score.faults)


def test_every_floor_belongs_to_a_sheet() -> None:
    assert FLOORS.keys() <= FILES.keys()


def test_every_corpus_sheet_has_an_expected_file() -> None:
    sheets = {path.name for path in (scoring.HERE / "sheets").iterdir() if path.suffix != ".json"}
    assert sheets == {name for name, (path, _) in FILES.items() if path.parent.name == "sheets"}


# ---- the expected values ---------------------------------------------------------------------------------------------


def _sound(part: dict[str, Any]) -> bool:
    read = {one["field"]: one for one in reversed(part["readings"])}
    if any(read.get(field, {}).get("flag") for field in ("esr_ohm", "motional_capacitance_ff")):
        return True
    c0, c1, l1 = (read.get(f) for f in ("shunt_capacitance_pf", "motional_capacitance_ff", "motional_inductance_mh"))
    if c0 is None or c1 is None:
        return True
    order = OVERTONES.get(part.get("mode") or "", 1)
    least = LEAST_RATIO.get(part.get("cut") or "AT", 158.0) * order**2
    sound = 1e3 * (c0["typ"] or c0["max"]) / c1["typ"] > least
    frequency, esr = read["frequency_mhz"]["typ"], read["esr_ohm"]["max"] or read["esr_ohm"]["typ"]
    if frequency is not None:
        sound &= 5e3 < 1e9 / (2 * math.pi * frequency * c1["typ"] * esr) < 2e6
    if l1 is not None:
        resonance_mhz = 1e3 / (2 * math.pi * math.sqrt(l1["typ"] * c1["typ"]))
        sound &= resonance_mhz == pytest.approx(frequency, rel=1e-3)
    return bool(sound)


def test_expected_motional_values_are_physically_possible() -> None:
    parts = [part for _, expected in FILES.values() for part in expected["parts"]]
    assert [part["part_number"] for part in parts if not _sound(part)] == []


# ---- the scorer, on cases worked out by hand -------------------------------------------------------------------------


def _reading(field: str, **given: Any) -> Reading:
    return Reading.model_validate({"field": field, "raw": "printed", "where": Where(line=1), **given})


def _sheet(*readings: Reading, number: str = "Q1", levels: tuple[Any, ...] = ()) -> SpecSheet:
    notes = tuple(Note(level=level, message="look") for level in levels)
    part = Part(part_number=number, readings=readings)
    return SpecSheet(file="q.txt", sha256=None, kind="text", parts=(part,), notes=notes)


def _wanted(**given: Any) -> dict[str, Any]:
    return {"min": None, "typ": None, "max": None, "options": [], **given}


def _expected(*readings: dict[str, Any], **more: Any) -> dict[str, Any]:
    return {"kind": "text", "parts": [{"part_number": "Q1", "readings": list(readings)}], **more}


TOLERANCE = _wanted(field="frequency_tolerance_ppm", min=-10.0, max=10.0)
ESR = _wanted(field="esr_ohm", max=60.0)


def test_all_that_is_expected_and_nothing_else_is_a_perfect_score() -> None:
    read = _sheet(_reading("frequency_tolerance_ppm", min=-10, max=10), _reading("esr_ohm", max=60))
    assert scoring.score_sheet(read, _expected(TOLERANCE, ESR)).perfect


def test_one_wrong_bound_of_three_is_two_thirds_and_one_silent_reading() -> None:
    read = _sheet(_reading("frequency_tolerance_ppm", min=-10, max=10), _reading("esr_ohm", max=50))
    score = scoring.score_sheet(read, _expected(TOLERANCE, ESR))
    assert (score.right, score.read, score.expected, score.silent) == (2, 3, 3, 1)
    assert score.f1 == pytest.approx(2 / 3)


def test_a_wrong_reading_with_a_check_is_wrong_but_not_silent() -> None:
    score = scoring.score_sheet(_sheet(_reading("esr_ohm", max=50, check="look")), _expected(ESR))
    assert (score.right, score.silent) == (0, 0)


def test_a_missing_reading_lowers_recall_alone() -> None:
    score = scoring.score_sheet(_sheet(_reading("esr_ohm", max=60)), _expected(TOLERANCE, ESR))
    assert (score.precision, score.recall) == (1.0, pytest.approx(1 / 3))


def test_a_value_under_another_band_is_another_item() -> None:
    read = _sheet(_reading("esr_ohm", max=60, when=When(frequency_mhz=(8, 10))))
    score = scoring.score_sheet(read, _expected(ESR | {"when": {"frequency_mhz": [10.0, 12.0]}}))
    assert (score.right, score.silent) == (0, 1)


def test_a_value_printed_wrongly_is_right_only_with_a_check() -> None:
    wanted = _expected(ESR | {"flag": True, "also": [_wanted(max=60000.0)]})
    assert scoring.score_sheet(_sheet(_reading("esr_ohm", max=60000, check="look")), wanted).perfect
    unflagged = scoring.score_sheet(_sheet(_reading("esr_ohm", max=60)), wanted)
    assert (unflagged.right, unflagged.silent) == (0, 1)


def test_a_value_printed_wrongly_may_be_left_out_with_a_warning() -> None:
    wanted = _expected(TOLERANCE, ESR | {"flag": True})
    read = _reading("frequency_tolerance_ppm", min=-10, max=10)
    assert scoring.score_sheet(_sheet(read, levels=("warning",)), wanted).perfect
    assert scoring.score_sheet(_sheet(read), wanted).recall == pytest.approx(2 / 3)


def test_a_bare_resistance_is_right_as_a_limit() -> None:
    wanted = _expected(_wanted(field="esr_ohm", typ=60.0, bare=True))
    assert scoring.score_sheet(_sheet(_reading("esr_ohm", max=60, bare=True)), wanted).perfect


def test_a_part_of_not_parts_costs_one_more_silent_reading() -> None:
    wanted = {"kind": "text", "parts": [], "not_parts": ["XO1"]}
    score = scoring.score_sheet(_sheet(_reading("frequency_mhz", typ=25), number="XO1"), wanted)
    assert (score.f1, score.silent) == (0.0, 2)


def test_floors_rise_and_do_not_sink_unless_told() -> None:
    floors = {"a": {"f1": 0.5, "silent": 2, "other": 0}}
    worse, better = scoring.Score(1, 4, 4, 3), scoring.Score(3, 4, 4, 1)
    assert scoring.new_floors({"a": worse}, floors, first=False, lower=False) == floors
    assert scoring.new_floors({"a": better}, floors, first=False, lower=False)["a"]["f1"] == 0.75
    assert scoring.new_floors({"a": worse}, floors, first=False, lower=True)["a"] == {
        "f1": 0.25,
        "silent": 3,
        "other": 0,
    }


def test_a_score_below_its_floor_and_an_imperfect_sheet_without_one_are_told() -> None:
    score = scoring.Score(3, 4, 4, 1)
    assert scoring.below_floor(score, {"f1": 0.75, "silent": 1, "other": 0}) is None
    assert scoring.below_floor(score, {"f1": 0.8, "silent": 1, "other": 0}) == "F1 0.7500 below 0.8"
    assert scoring.below_floor(score, None) is not None
