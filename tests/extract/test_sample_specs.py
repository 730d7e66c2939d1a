"""The sample sheets, read, against what a careful person reads off the page (`X.expected.json` beside each sheet `X`).

The expected files were written by hand from the rendered pages. A key that a part there lacks is not compared; one that
is null must be null. `flag` marks a value printed wrongly on purpose: its reading must carry a `check`.
"""

from __future__ import annotations

import io
import json
import os
import re
import unicodedata
import zipfile
from importlib.util import find_spec
from pathlib import Path
from typing import Any

import pypdf
import pytest

import extract
from extract.model import Part, Reading

FOLDER = Path(__file__).resolve().parents[2] / "sample_specs"
SUFFIX = ".expected.json"
BOUNDS = ("min", "typ", "max")
IDENTITY = ("part_number", "maker", "package", "mode", "cut", "resonance")
LEGAL_FORMS = re.compile(r"\b(gmbh|ltd|s\.?r\.?l)\b\.?|株式会社|有限公司")
# What a printed number may be multiplied by to give the field's unit (k, M, m, µ, n; kHz to MHz).
PREFIXES = (1.0, 1e3, 1e-3, 1e6, 1e-6)

Json = dict[str, Any]
EXPECTED: dict[str, Json] = {
    path.name.removesuffix(SUFFIX): json.loads(path.read_text(encoding="utf-8"))
    for path in sorted(FOLDER.glob(f"*{SUFFIX}"))
}
TYPED = [name for name, expected in EXPECTED.items() if not expected.get("scan")]


def _needs_ocr(name: str) -> bool:
    return bool(EXPECTED[name].get("scan"))


# ---- comparing -------------------------------------------------------------------------------------------------------


def _plain(text: str) -> str:
    folded = LEGAL_FORMS.sub(" ", unicodedata.normalize("NFKC", text).casefold())
    return "".join(character for character in folded if character.isalnum())


def _package_key(text: str) -> object:
    """Two sides in millimetres where the package says them, else its name."""
    folded = unicodedata.normalize("NFKC", text).casefold().replace(",", ".")
    if sides := re.search(r"(\d+(?:\.\d+)?)\s*(?:mm)?\s*[x×]\s*(\d+(?:\.\d+)?)", folded):
        return tuple(sorted(float(side) for side in sides.groups()))
    return _plain(text)


def _same_identity(key: str, read: str | None, expected: str | None) -> bool:
    if read is None or expected is None:
        return read is expected
    if key == "package":
        return _package_key(read) == _package_key(expected)
    return _plain(read) == _plain(expected)


def _same_numbers(read: Any, expected: Any) -> bool:
    if read is None or expected is None:
        return read is expected
    return bool(read == pytest.approx(expected, rel=1e-6))


def _same_when(reading: Reading, expected: Json, mode: str | None) -> bool:
    read, wanted = reading.when.model_dump(), expected.get("when", {})
    if read.get("mode") == mode and "mode" not in wanted:  # the part's only mode is no condition
        read.pop("mode", None)
    if read.keys() != wanted.keys():
        return False
    return all(
        read[key] == value if isinstance(value, str) else _same_numbers(_listed(read[key]), _listed(value))
        for key, value in wanted.items()
    )


def _listed(value: Any) -> list[float]:
    return list(value) if isinstance(value, (list, tuple)) else [value]


def _same_bounds(reading: Reading, expected: Json) -> bool:
    if (
        expected.get("bare") and reading.bare and reading.typ is None
    ):  # the contract lets a reader take it for the limit
        expected = expected | {"typ": None, "max": expected["typ"]}
    bounds = all(_same_numbers(getattr(reading, bound), expected[bound]) for bound in BOUNDS)
    return bounds and _same_numbers(sorted(reading.options), sorted(expected["options"]))


def _matches(reading: Reading, expected: Json, *, mode: str | None, scan: bool) -> bool:
    if reading.field != expected["field"] or not _same_when(reading, expected, mode):
        return False
    if bool(reading.bare) != bool(expected.get("bare")):
        return False
    if expected.get("flag"):
        return reading.check is not None and any(
            _same_bounds(reading, e) for e in (expected, *expected.get("also", []))
        )
    return _same_bounds(reading, expected) and (scan or reading.check is None)


def _shown(reading: Reading) -> str:
    stated = {key: value for key, value in reading.model_dump().items() if value not in (None, [], {}, ())}
    return json.dumps({key: value for key, value in stated.items() if key != "where"}, ensure_ascii=False)


def _part_differences(part: Part, expected: Json, *, scan: bool) -> list[str]:
    name = expected["part_number"]
    differences = [
        f"{name}: {key} read as {getattr(part, key)!r}, printed {expected[key]!r}"
        for key in IDENTITY
        if key in expected and not _same_identity(key, getattr(part, key), expected[key])
    ]
    left = list(part.readings)
    for wanted in expected["readings"]:
        found = next((r for r in left if _matches(r, wanted, mode=part.mode, scan=scan)), None)
        if found is None:
            differences.append(f"{name}: not read as expected: {json.dumps(wanted, ensure_ascii=False)}")
        else:
            left.remove(found)
    return differences + [
        f"{name}: wrong, needlessly checked or not on the sheet: {_shown(reading)}" for reading in left
    ]


# ---- reading ---------------------------------------------------------------------------------------------------------


def _ocr_marked(name: str) -> Any:
    return pytest.param(name, marks=pytest.mark.ocr if _needs_ocr(name) else (), id=name)


@pytest.mark.parametrize("name", [_ocr_marked(name) for name in EXPECTED])
def test_every_reading_is_what_a_person_reads_off_the_page(name: str) -> None:
    if _needs_ocr(name) and find_spec("rapidocr") is None:
        reason = "an image-only sheet: install the ocr extra (rapidocr and onnxruntime) to read it"
        pytest.fail(reason) if os.environ.get("CI") == "true" else pytest.skip(reason)
    expected = EXPECTED[name]
    sheet = extract.read_sheet((FOLDER / name).read_bytes(), name)
    differences = []
    if (sheet.kind, sheet.scan) != (expected["kind"], bool(expected.get("scan"))):
        differences.append(f"kind {sheet.kind}, scan {sheet.scan}")
    if "note" in expected and expected["note"] not in {note.level for note in sheet.notes}:
        differences.append(f"no note of level {expected['note']}")
    parts = {_plain(part.part_number or ""): part for part in sheet.parts}
    for wanted in expected["parts"]:
        part = parts.pop(_plain(wanted["part_number"]), None)
        if part is None:
            differences.append(f"{wanted['part_number']}: no such part read")
        else:
            differences += _part_differences(part, wanted, scan=sheet.scan)
    differences += [f"{part.part_number}: read, but no part of this sheet" for part in parts.values()]
    assert not differences, "\n" + "\n".join(differences)


# ---- the expected files themselves, without the reader ---------------------------------------------------------------


def _xml_text(data: bytes, pattern: str) -> str:
    """Everything between the tags of an office file's own members, shared strings included."""
    with zipfile.ZipFile(io.BytesIO(data)) as archive:
        members = [archive.read(member).decode() for member in archive.namelist() if re.search(pattern, member)]
    return re.sub(r"<[^>]+>", " ", "\n".join(members))


def _printed_text(name: str) -> str:
    data = (FOLDER / name).read_bytes()
    match Path(name).suffix:
        case ".pdf":
            text = "\n".join(page.extract_text() for page in pypdf.PdfReader(io.BytesIO(data)).pages)
        case ".xlsx":
            text = _xml_text(data, r"xl/(sharedStrings|worksheets/sheet\d+)\.xml")
        case ".docx":
            text = _xml_text(data, r"word/document\.xml")
        case _:
            text = data.decode("utf-8-sig")
    return unicodedata.normalize("NFKC", text)


def _printed_numbers(text: str) -> list[float]:
    return [float(number.replace(",", ".")) for number in re.findall(r"\d+(?:[.,]\d+)?", text)]


def _is_printed(value: float, printed: list[float]) -> bool:
    return any(abs(value) == pytest.approx(number * prefix, rel=1e-9) for number in printed for prefix in PREFIXES)


def _numbers_of(reading: Json) -> list[float]:
    """The numbers that must stand on the sheet; of `25 ±5` the 25 and the 5."""
    bounds = [reading[bound] for bound in BOUNDS if reading[bound] is not None]
    if reading["typ"] is not None and reading["min"] is not None and reading["max"] is not None:
        spread = (reading["typ"] - reading["min"], reading["max"] - reading["typ"])
        if spread[0] == pytest.approx(spread[1]) and reading["field"].startswith(("turnover", "parabolic")):
            bounds = [reading["typ"], round(spread[0], 9)]
    conditions = [n for key, pair in reading.get("when", {}).items() if key != "years" for n in pair]
    return [*bounds, *reading["options"], *conditions]


@pytest.mark.parametrize("name", TYPED)
def test_every_expected_number_is_printed_on_the_sheet(name: str) -> None:
    printed = _printed_numbers(_printed_text(name))
    missing = [
        f"{part['part_number']}: {reading['field']} {number}"
        for part in EXPECTED[name]["parts"]
        for reading in part["readings"]
        for number in _numbers_of(reading)
        if not _is_printed(number, printed)
    ]
    assert not missing, "\n".join(missing)


@pytest.mark.parametrize("name", TYPED)
def test_every_expected_part_number_and_maker_is_printed_on_the_sheet(name: str) -> None:
    text = _plain(_printed_text(name))
    named = [part[key] for part in EXPECTED[name]["parts"] for key in ("part_number", "maker")]
    assert [word for word in named if _plain(word) not in text] == []


def test_every_sample_sheet_has_an_expected_file() -> None:
    sheets = {path.name for path in FOLDER.iterdir() if path.suffix not in {".json", ".toml"}}
    assert sheets == set(EXPECTED)


def test_stated_motional_values_are_physically_possible() -> None:
    """C0/C1 cannot lie below pi^2/(8 k^2): 159 with k = 8.8 % for the AT cut; Q of such parts is 5e3 to 1e6.

    Bottom, Introduction to Quartz Crystal Unit Design, 1982, from memory; the span of Q is common practice, no source.
    """
    wrong = []
    for expected in EXPECTED.values():
        for part in expected["parts"]:
            read = {reading["field"]: reading for reading in part["readings"]}
            c0, c1 = read.get("shunt_capacitance_pf"), read.get("motional_capacitance_ff")
            if c1 is None or c0 is None or c0.get("flag"):
                continue
            ratio = 1e3 * (c0["typ"] or c0["max"]) / (c1["max"] or c1["typ"])
            esr = read["esr_ohm"]["max"] or read["esr_ohm"]["typ"]
            quality = 1e9 / (6.2832 * read["frequency_mhz"]["typ"] * c1["typ"] * esr)
            if not (ratio > 159 and 5e3 < quality < 1e6):
                wrong.append((part["part_number"], ratio, quality))
    assert wrong == []
