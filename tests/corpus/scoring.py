"""How well the reader reads sheets whose readings a person has written down (`X.expected.json` beside each sheet `X`).

    python tests/corpus/scoring.py [NAME ...]        score every sheet, or those whose name holds one of the words
    python tests/corpus/scoring.py --details NAME    and list what is wrong
    python tests/corpus/scoring.py --write-floor     raise the floors to today's scores; `--lower` lets them sink too

What is counted
    item     one bound of one reading of one part with its value; `options` is one item, compared as a set. The
             reading's frequency band, load, mode and package belong to it: a value under another band is another item.
    right    an item read that is expected, within 0.1 %. Precision is right / read, recall right / expected.
    bare     a number printed with no bound (`bare`): of ESR, C0 and drive level a `max` is right as well as a `typ`.
    flag     printed wrongly on purpose: right only with a `check`, as printed or as one of `also`. Left out it is not
             counted where the notes carry a warning or an error. Without `flag`, `also` are further right readings.
    silent   readings with a wrong item and no `check`, and one for each part of `not_parts` that was read.
    other    what is no item: identity, attributes named in the expected file, years, `bare`, needless checks, the
             file's kind, a missing note; temperature ranges where the part has several readings of the field.
    A condition that only repeats the part's own single frequency or load says nothing and is passed over.
A file that expects nothing and gets nothing has F1 = 1.
"""

from __future__ import annotations

import argparse
import json
import math
import re
import sys
import unicodedata
from collections.abc import Iterable
from dataclasses import dataclass, field
from pathlib import Path
from typing import Any

import extract
from extract.model import Part, Reading, SpecSheet

HERE = Path(__file__).resolve().parent
FOLDERS = (HERE / "sheets", HERE.parents[1] / "sample_specs")
FLOORS = HERE / "floor.json"
SUFFIX = ".expected.json"
BOUNDS = ("min", "typ", "max", "options")
IDENTITY = ("part_number", "maker", "package", "mode", "cut", "resonance")
BARE_AS_MAX = {"esr_ohm", "shunt_capacitance_pf", "drive_level_uw"}
LEGAL_FORMS = re.compile(r"\b(gmbh|ltd|s\.?r\.?l|sa|inc)\b\.?|株式会社|有限公司")

Json = dict[str, Any]


@dataclass
class Score:
    right: int = 0
    read: int = 0
    expected: int = 0
    silent: int = 0
    other: int = 0
    faults: list[str] = field(default_factory=list)

    @property
    def precision(self) -> float:
        return self.right / self.read if self.read else float(not self.expected)

    @property
    def recall(self) -> float:
        return self.right / self.expected if self.expected else float(not self.read)

    @property
    def f1(self) -> float:
        both = self.read + self.expected
        return 2 * self.right / both if both else 1.0

    @property
    def perfect(self) -> bool:
        return self.f1 == 1.0 and not self.silent and not self.other

    def add(self, more: Score) -> None:
        for key in ("right", "read", "expected", "silent", "other"):
            setattr(self, key, getattr(self, key) + getattr(more, key))
        self.faults += more.faults

    def note(self, fault: str) -> None:
        self.other += 1
        self.faults.append(fault)


# ---- comparing -------------------------------------------------------------------------------------------------------


def plain(text: str | None) -> str:
    folded = LEGAL_FORMS.sub(" ", unicodedata.normalize("NFKC", text or "").casefold())
    return "".join(character for character in folded if character.isalnum())


def _package_key(text: str) -> object:
    folded = unicodedata.normalize("NFKC", text).casefold().replace(",", ".")
    if sides := re.search(r"(\d+(?:\.\d+)?)\s*(?:mm)?\s*[x×*]\s*(\d+(?:\.\d+)?)", folded):
        return tuple(sorted(float(side) for side in sides.groups()))
    return plain(text)


def _same_identity(key: str, read: str | None, expected: str | None) -> bool:
    if read is None or expected is None:
        return read is expected
    if key == "package":
        return _package_key(read) == _package_key(expected)
    return plain(read) == plain(expected)


def _close(one: float, other: float) -> bool:
    return math.isclose(one, other, rel_tol=1e-3, abs_tol=1e-9)


def _same(one: Any, other: Any) -> bool:
    if isinstance(one, str) or isinstance(other, str):
        return bool(one == other)
    if isinstance(one, Iterable) and isinstance(other, Iterable):
        left, right = sorted(one), sorted(other)
        return len(left) == len(right) and all(_close(a, b) for a, b in zip(left, right, strict=True))
    return _close(one, other)


@dataclass
class Value:
    """One reading, read or expected, as items: `items` maps a bound to its value."""

    field: str
    items: dict[str, Any]
    when: Json
    bare: bool
    check: bool
    shown: str
    matched: set[str] = field(default_factory=set)

    def same_case(self, other: Value) -> bool:
        keys = ("frequency_mhz", "load_capacitance_pf", "mode", "package")
        return self.field == other.field and all(
            (key in self.when) == (key in other.when)
            and (key not in self.when or _same(self.when[key], other.when[key]))
            for key in keys
        )


def _items(bounds: Json) -> dict[str, Any]:
    return {bound: bounds[bound] for bound in BOUNDS if bounds.get(bound) not in (None, [], ())}


def _only(expected: Json, name: str) -> float | None:
    """The part's one frequency or load, or None."""
    stated = [_items(one) for one in expected["readings"] if one["field"] == name]
    return stated[0].get("typ") if len(stated) == 1 and len(stated[0]) == 1 else None


def _without_own(when: Json, expected: Json, name: str) -> Json:
    """Without the conditions that are no more than the part's own frequency and load (of other fields)."""
    return {
        key: value
        for key, value in when.items()
        if key not in ("frequency_mhz", "load_capacitance_pf")
        or key == name
        or (own := _only(expected, key)) is None
        or not _same(value, [own, own])
    }


def _read_value(reading: Reading, part: Part, expected: Json) -> Value:
    dump = reading.model_dump()
    stated = {key: value for key, value in (dump.get("when") or {}).items() if value is not None}
    when = _without_own(stated, expected, reading.field)
    named = any("mode" in one.get("when", {}) for one in expected["readings"] if one["field"] == reading.field)
    if when.get("mode") == part.mode and not named:
        when.pop("mode", None)
    shown = {key: value for key, value in dump.items() if value not in (None, [], {}, ()) and key != "where"}
    text = json.dumps(shown, ensure_ascii=False)
    return Value(reading.field, _items(dump), when, bool(reading.bare), reading.check is not None, text)


def _expected_value(reading: Json, expected: Json) -> Value:
    text = json.dumps(reading, ensure_ascii=False)
    when = _without_own(reading.get("when", {}), expected, reading["field"])
    return Value(reading["field"], _items(reading), when, bool(reading.get("bare")), False, text)


# ---- one part --------------------------------------------------------------------------------------------------------


def _bounds_equal(one: dict[str, Any], other: dict[str, Any]) -> bool:
    return one.keys() == other.keys() and all(_same(one[bound], other[bound]) for bound in one)


def _with_choices(read: list[Value], expected: Json, score: Score, *, warned: bool) -> tuple[list[Value], list[Value]]:
    """Settle the expected readings with `flag` or `also`; return the readings and the expected values that are left."""
    left: list[Value] = []
    read = list(read)
    for reading in expected["readings"]:
        wanted = _expected_value(reading, expected)
        if not reading.get("flag") and not reading.get("also"):
            left.append(wanted)
            continue
        accepted = [wanted.items, *(_items(also) for also in reading.get("also", []))]
        found = next(
            (one for one in read if one.same_case(wanted) and any(_bounds_equal(one.items, a) for a in accepted)), None
        )
        if found is not None and (found.check or not reading.get("flag")):
            read.remove(found)
            score.right += len(wanted.items)
            score.read += len(wanted.items)
            score.expected += len(wanted.items)
        elif found is not None:
            read.remove(found)
            score.read += len(wanted.items)
            score.expected += len(wanted.items)
            score.silent += 1
            score.faults.append(f"must be flagged: {found.shown}")
        elif not reading.get("flag") or not warned:
            left.append(wanted)
    return read, left


def _match_item(one: Value, bound: str, wanted: list[Value]) -> Value | None:
    for other in wanted:
        if not one.same_case(other):
            continue
        for name, value in other.items.items():
            as_max = other.bare and name == "typ" and bound == "max" and other.field in BARE_AS_MAX
            if name not in other.matched and (name == bound or as_max) and _same(one.items[bound], value):
                other.matched.add(name)
                return other
    return None


def _by_kinship(one: Value, wanted: list[Value]) -> list[Value]:
    """Those with the same years, temperature range and most equal bounds first, so that equal bounds find their own."""

    def kinship(other: Value) -> int:
        keys = ("years", "temperature_c")
        conditions = sum(
            key in one.when and key in other.when and _same(one.when[key], other.when[key]) for key in keys
        )
        return -conditions - sum(
            bound in other.items and _same(one.items[bound], other.items[bound]) for bound in one.items
        )

    return sorted(wanted, key=kinship)


def _check_conditions(one: Value, other: Value, wanted: list[Value], score: Score, name: str) -> None:
    keys = ["years"] + ["temperature_c"] * (sum(w.field == one.field for w in wanted) > 1)
    for key in keys:
        here, there = one.when.get(key), other.when.get(key)
        if (here is None) != (there is None) or (here is not None and not _same(here, there)):
            score.note(f"{name}: {key} should be {there}: {one.shown}")
    if one.bare != other.bare:
        score.note(f"{name}: bare should be {other.bare}: {one.shown}")


def _score_part(part: Part, expected: Json, *, warned: bool, scan: bool) -> Score:
    score = Score()
    name = expected["part_number"]
    for key in IDENTITY:
        accepted = [expected.get(key), *expected.get(f"{key}_also", [])]
        if key in expected and not any(_same_identity(key, getattr(part, key), one) for one in accepted):
            score.note(f"{name}: {key} read as {getattr(part, key)!r}, printed {expected[key]!r}")
    attributes = json.loads(part.attributes.model_dump_json())
    for key, value in expected.get("attributes", {}).items():
        found = attributes.get(key)
        if isinstance(value, dict) and isinstance(found, dict):
            found = {name: one for name, one in found.items() if name in value}
        if found != value:
            score.note(f"{name}: {key} read as {attributes.get(key)!r}, printed {value!r}")
    read: list[Value] = []
    for reading in part.readings:
        value = _read_value(reading, part, expected)
        twin = any(
            one.field == value.field and _bounds_equal(one.items, value.items) and one.when == value.when
            for one in read
        )
        if not twin:
            read.append(value)
    left, wanted = _with_choices(read, expected, score, warned=warned)
    for one in left:
        hits = [_match_item(one, bound, _by_kinship(one, wanted)) for bound in one.items]
        score.read += len(hits)
        score.right += sum(hit is not None for hit in hits)
        if None in hits or not hits:
            score.silent += not one.check
            score.faults.append(f"{name}: wrong or not on the sheet: {one.shown}")
            continue
        _check_conditions(one, next(hit for hit in hits if hit), wanted, score, name)
        if one.check and not scan:
            score.note(f"{name}: needless check: {one.shown}")
    score.expected += sum(len(one.items) for one in wanted)
    score.faults += [
        f"{name}: missing {sorted(one.items.keys() - one.matched)} of {one.shown}"
        for one in wanted
        if one.items.keys() - one.matched
    ]
    return score


# ---- one sheet -------------------------------------------------------------------------------------------------------


def _paired(sheet: SpecSheet, expected: Json) -> tuple[list[tuple[Part, Json]], list[Part], list[Json]]:
    """Parts by their number; of a single part on both sides the number may differ (and is then an identity fault)."""
    left = list(sheet.parts)
    pairs, missing = [], []
    for wanted in expected["parts"]:
        names = {plain(name) for name in (wanted["part_number"], *wanted.get("part_number_also", []))}
        found = next((part for part in left if plain(part.part_number) in names), None)
        if found is None:
            missing.append(wanted)
        else:
            left.remove(found)
            pairs.append((found, wanted))
    others = {plain(name) for name in expected.get("not_parts", [])}
    if len(left) == len(missing) == 1 and plain(left[0].part_number) not in others:
        pairs.append((left.pop(), missing.pop()))
    return pairs, left, missing


def score_sheet(sheet: SpecSheet, expected: Json) -> Score:
    """Hold what was read from a sheet against its expected file."""
    score = Score()
    levels = {note.level for note in sheet.notes}
    pairs, spurious, missing = _paired(sheet, expected)
    for part, wanted in pairs:
        score.add(
            _score_part(part, wanted, warned=bool(levels & {"warning", "error"}), scan=bool(expected.get("scan")))
        )
    for part in spurious:
        score.read += sum(len(_items(reading.model_dump())) for reading in part.readings)
        score.silent += sum(reading.check is None for reading in part.readings)
        score.silent += plain(part.part_number) in {plain(name) for name in expected.get("not_parts", [])}
        score.faults.append(f"{part.part_number}: read, but no part of this sheet")
    for wanted in missing:
        score.expected += sum(len(_items(reading)) for reading in wanted["readings"])
        score.faults.append(f"{wanted['part_number']}: no such part read")
    if (sheet.kind, sheet.scan) != (expected["kind"], bool(expected.get("scan"))):
        score.note(f"kind {sheet.kind}, scan {sheet.scan}")
    if "note" in expected and expected["note"] not in levels:
        score.note(f"no note of level {expected['note']}")
    return score


def expected_files() -> dict[str, tuple[Path, Json]]:
    """Each sheet of the corpus and of the samples by name, with its expected file."""
    return {
        path.name.removesuffix(SUFFIX): (path.with_name(path.name.removesuffix(SUFFIX)), json.loads(path.read_bytes()))
        for folder in FOLDERS
        for path in sorted(folder.glob(f"*{SUFFIX}"))
    }


def score_file(path: Path, expected: Json) -> Score:
    return score_sheet(extract.read_sheet(path.read_bytes(), path.name), expected)


# ---- floors ----------------------------------------------------------------------------------------------------------


def read_floors() -> dict[str, Json]:
    """The scores that must not be undercut; a sheet that is not named must be read perfectly."""
    return dict(json.loads(FLOORS.read_text(encoding="utf-8"))) if FLOORS.exists() else {}


def below_floor(score: Score, floor: Json | None) -> str | None:
    """What is worse than the floor, or None."""
    floor = floor or {"f1": 1.0, "silent": 0, "other": 0}
    worse = []
    if score.f1 < floor["f1"] - 1e-4:
        worse.append(f"F1 {score.f1:.4f} below {floor['f1']}")
    worse += [
        f"{key} {getattr(score, key)} above {floor[key]}"
        for key in ("silent", "other")
        if getattr(score, key) > floor[key]
    ]
    return ", ".join(worse) or None


def new_floors(scores: dict[str, Score], floors: dict[str, Json], *, first: bool, lower: bool) -> dict[str, Json]:
    """Floors after these scores: each figure raised, sunk only with `lower`; perfect sheets need none.

    With `first` there were no floors yet, and every score is taken as it is.
    """
    fresh = dict(floors)
    for name, score in scores.items():
        floor = {"f1": math.floor(score.f1 * 1e4) / 1e4, "silent": score.silent, "other": score.other}
        old = floors.get(name) or {"f1": 1.0, "silent": 0, "other": 0}
        if not (first or lower):
            floor = {
                "f1": max(floor["f1"], old["f1"]),
                "silent": min(floor["silent"], old["silent"]),
                "other": min(floor["other"], old["other"]),
            }
        fresh[name] = floor
    return {name: floor for name, floor in sorted(fresh.items()) if floor != {"f1": 1.0, "silent": 0, "other": 0}}


# ---- command ---------------------------------------------------------------------------------------------------------


def _row(name: str, score: Score) -> str:
    return (
        f"{name[:46]:46} P {score.precision:.3f} R {score.recall:.3f} F1 {score.f1:.3f} "
        f"silent {score.silent:3} other {score.other:3}\n"
    )


def main() -> int:
    parser = argparse.ArgumentParser(description=(__doc__ or "").splitlines()[0])
    parser.add_argument("names", nargs="*", help="score only sheets whose name holds one of these")
    parser.add_argument("--details", action="store_true", help="list what is wrong")
    parser.add_argument("--write-floor", action="store_true", help="raise the floors to these scores")
    parser.add_argument("--lower", action="store_true", help="with --write-floor: let floors sink too")
    options = parser.parse_args()
    scores: dict[str, Score] = {}
    pooled = Score()
    for name, (path, expected) in expected_files().items():
        if options.names and not any(word in name for word in options.names):
            continue
        scores[name] = score_file(path, expected)
        pooled.add(scores[name])
        sys.stdout.write(_row(name, scores[name]))
        if options.details:
            sys.stdout.write("".join(f"    {fault}\n" for fault in scores[name].faults))
    if not scores:
        sys.stderr.write("no sheet has such a name\n")
        return 2
    mean = sum(score.f1 for score in scores.values()) / len(scores)
    sys.stdout.write(_row(f"pooled over {len(scores)} files", pooled) + f"mean F1 over files {mean:.3f}\n")
    if options.write_floor:
        floors = new_floors(scores, read_floors(), first=not FLOORS.exists(), lower=options.lower)
        FLOORS.write_text(json.dumps(floors, indent=1, ensure_ascii=False) + "\n", encoding="utf-8")
    return 0


if __name__ == "__main__":
    raise SystemExit(main())
