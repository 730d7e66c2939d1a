"""Each reading's box, held against the words that stand under it on the page, as pdfplumber cuts them out."""

from __future__ import annotations

import io
import json
import re
import unicodedata
from pathlib import Path
from typing import Any

import pdfplumber
import pytest

from extract import read_sheet
from extract.model import Reading

ROOT = Path(__file__).resolve().parents[1]
FOLDERS = (ROOT.parent / "sample_specs", ROOT / "corpus" / "sheets")
# What a printed number may be multiplied by to give the field's unit (k, M, m, µ, n; kHz to MHz).
PREFIXES = (1.0, 1e3, 1e-3, 1e6, 1e-6, 1e-9)
NUMBER = re.compile(r"\d+(?:[.,' ]\d+)*")
POWER = re.compile(r"(\d+(?:[.,]\d+)?)\s*[x×]\s*10\s*\^?(\d)")
# "± .002%" of a frequency is 20 ppm.
PERCENT = re.compile(r"(\d*[.,]?\d+)\s?%")
PPM_PER_PERCENT = 1e4
# A stroke's width, and rounding to a tenth of a point.
MARGIN = 1.0


def _is_scan(path: Path) -> bool:
    expected = path.with_name(path.name + ".expected.json")
    return bool(json.loads(expected.read_text(encoding="utf-8")).get("scan"))


SHEETS = [path for folder in FOLDERS for path in sorted(folder.glob("*.pdf")) if not _is_scan(path)]


def words_under(page: Any, box: tuple[float, float, float, float]) -> str:
    left, top = page.bbox[0], page.bbox[1]
    x0, y0, x1, y1 = box
    cut = (x0 + left - MARGIN, y0 + top - MARGIN, x1 + left + MARGIN, y1 + top + MARGIN)
    text = page.crop(cut, strict=False).extract_text(x_tolerance=1.5) or ""
    return unicodedata.normalize("NFKC", text)


def numbers_in(text: str) -> set[float]:
    """Every number printed, a comma taken as a point and as a mark of thousands."""
    found: set[float] = set()
    for match in NUMBER.finditer(text):
        printed = match[0]
        for plain in (printed, printed.replace(",", "."), re.sub("[,.' ]", "", printed), *re.split("[, ]", printed)):
            try:
                found.add(float(plain))
            except ValueError:
                continue
    found |= {float(percent[1].replace(",", ".")) * PPM_PER_PERCENT for percent in PERCENT.finditer(text)}
    return found | {float(power[1].replace(",", ".")) * 10 ** int(power[2]) for power in POWER.finditer(text)}


def states(reading: Reading, text: str) -> bool:
    """Whether one of the reading's own numbers, in some unit, is printed in the text."""
    printed = numbers_in(text)
    stated = [each for each in (reading.min, reading.typ, reading.max, *reading.options) if each is not None]
    return any(
        abs(number * factor - abs(value)) <= 1e-6 * max(1e-6, abs(value))
        for value in stated
        for number in printed
        for factor in PREFIXES
    )


def from_elsewhere(reading: Reading, page: Any) -> bool:
    """An operating range that heads a column of part numbers or of stabilities stands on the page, not in its cell."""
    return reading.field == "operating_temperature_c" and states(reading, page.extract_text())


@pytest.mark.parametrize("path", SHEETS, ids=lambda path: path.name)
def test_the_words_under_a_readings_box_hold_its_value(path):
    data = path.read_bytes()
    sheet = read_sheet(data, path.name)
    readings = [reading for part in sheet.parts for reading in part.readings]
    wrong = []
    with pdfplumber.open(io.BytesIO(data)) as document:
        for reading in readings:
            assert reading.where.page is not None, reading
            assert reading.where.box is not None, reading
            page = document.pages[reading.where.page - 1]
            text = words_under(page, reading.where.box)
            if not states(reading, text) and not from_elsewhere(reading, page):
                wrong.append(f"{reading.field} ({reading.raw!r}) at {reading.where.box}: under it stands {text!r}")
    assert readings or "oscillator" in path.name
    assert wrong == []


@pytest.mark.parametrize("path", SHEETS, ids=lambda path: path.name)
def test_no_box_covers_much_more_than_a_cell(path):
    """A box of the whole table would hold every value and show nothing."""
    data = path.read_bytes()
    sheet = read_sheet(data, path.name)
    with pdfplumber.open(io.BytesIO(data)) as document:
        for part in sheet.parts:
            for reading in part.readings:
                page = document.pages[reading.where.page - 1]
                x0, top, x1, bottom = reading.where.box
                assert (x1 - x0) * (bottom - top) <= 0.05 * float(page.width) * float(page.height), reading
