"""Open Document spreadsheets (ODS): the text that each cell shows, with its merged ranges.

Element and attribute names are those of the Open Document Format 1.3 (OASIS), part 3, section 9.
"""

from __future__ import annotations

import io
import zipfile
import zlib
from collections.abc import Iterator
from dataclasses import dataclass, field
from typing import IO

from lxml import etree

from extract.documents.model import DocumentError
from extract.documents.numberformat import general

_TABLE = "{urn:oasis:names:tc:opendocument:xmlns:table:1.0}"
_TEXT = "{urn:oasis:names:tc:opendocument:xmlns:text:1.0}"
_OFFICE = "{urn:oasis:names:tc:opendocument:xmlns:office:1.0}"
_STYLE = "{urn:oasis:names:tc:opendocument:xmlns:style:1.0}"
_SHEET, _ROW, _ONE_STYLE = f"{_TABLE}table", f"{_TABLE}table-row", f"{_STYLE}style"
_CELL, _COVERED, _PARAGRAPH = f"{_TABLE}table-cell", f"{_TABLE}covered-table-cell", f"{_TEXT}p"
_ROWS_REPEATED, _COLUMNS_REPEATED = f"{_TABLE}number-rows-repeated", f"{_TABLE}number-columns-repeated"
_ROWS_SPANNED, _COLUMNS_SPANNED = f"{_TABLE}number-rows-spanned", f"{_TABLE}number-columns-spanned"
DAMAGED = "The workbook is damaged or cut short. Fetch it again, or open it and save it as XLSX."

LOCKED = "The workbook is locked with a password. Open it, save it without a password and try again."
# What the standard library and lxml raise for an archive whose bytes are wrong somewhere.
ZIP_FAULTS = (
    zipfile.BadZipFile, zlib.error, etree.XMLSyntaxError, KeyError, OSError, EOFError, ValueError, RuntimeError,
)  # fmt: skip
# Empty rows and columns are repeated to the sheet's end; what is not empty repeats a few times only.
_MOST_REPEATS = 1000


@dataclass(slots=True)
class OpenSheet:
    """One sheet: its texts by row and column, merged ranges (first row, first column, last row, last column)."""

    name: str
    hidden: bool
    grid: list[list[str]] = field(default_factory=list)
    spans: list[tuple[int, int, int, int]] = field(default_factory=list)


def read_sheets(data: bytes) -> list[OpenSheet]:
    """All sheets of a file; DocumentError where it is locked or damaged."""
    try:
        with zipfile.ZipFile(io.BytesIO(data)) as archive:
            if b"encryption-data" in archive.read("META-INF/manifest.xml"):
                raise DocumentError(LOCKED)
            with archive.open("content.xml") as content:
                return list(_sheets(content))
    except ZIP_FAULTS as fault:
        raise DocumentError(DAMAGED) from fault


def _sheets(content: IO[bytes]) -> Iterator[OpenSheet]:
    """Every sheet; a row goes as soon as it is read, for a long list's tree would fill a small machine."""
    hidden: set[str] = set()
    sheet: OpenSheet | None = None
    events = etree.iterparse(
        content, ("start", "end"), tag=(_SHEET, _ROW, _ONE_STYLE), huge_tree=True, resolve_entities=False
    )
    for event, element in events:
        if element.tag == _SHEET and event == "start":
            sheet = OpenSheet(element.get(f"{_TABLE}name", ""), element.get(f"{_TABLE}style-name") in hidden)
        elif element.tag == _SHEET and sheet is not None:
            while sheet.grid and not sheet.grid[-1]:
                sheet.grid.pop()
            yield sheet
            sheet = None
        elif event == "end" and element.tag == _ONE_STYLE and _hides(element):
            hidden.add(element.get(f"{_STYLE}name", ""))
        elif event == "end" and element.tag == _ROW and sheet is not None:
            _take_row(sheet, element)
            element.clear()


def _hides(style: etree._Element) -> bool:
    properties = style.iter(f"{_STYLE}table-properties")
    return any(each.get(f"{_TABLE}display") == "false" for each in properties)


def _take_row(sheet: OpenSheet, element: etree._Element) -> None:
    texts = list(_row(sheet, element, len(sheet.grid)))
    while texts and not texts[-1]:
        texts.pop()
    repeats = _count(element, _ROWS_REPEATED)
    sheet.grid.extend([texts] * (min(repeats, _MOST_REPEATS) if texts else repeats if repeats < 10_000 else 1))


def _row(sheet: OpenSheet, element: etree._Element, row: int) -> Iterator[str]:
    column = 0
    for cell in element.iterchildren(_CELL, _COVERED):
        text = "" if cell.tag == _COVERED else _cell_text(cell)
        height, width = _count(cell, _ROWS_SPANNED), _count(cell, _COLUMNS_SPANNED)
        if height > 1 or width > 1:
            sheet.spans.append((row, column, row + height - 1, column + width - 1))
        repeats = min(_count(cell, _COLUMNS_REPEATED), _MOST_REPEATS)
        yield from [text] * repeats
        column += repeats


def _count(element: etree._Element, name: str) -> int:
    value = element.get(name)
    return int(value) if value is not None and value.isdigit() else 1


def _cell_text(cell: etree._Element) -> str:
    if len(cell) == 1 and cell[0].tag == _PARAGRAPH and len(cell[0]) == 0:
        return (cell[0].text or "").strip()
    paragraphs = cell.findall(_PARAGRAPH)
    if paragraphs:
        return "\n".join(_flow(paragraph) for paragraph in paragraphs).strip()
    value = cell.get(f"{_OFFICE}value")
    return general(float(value)) if value else cell.get(f"{_OFFICE}date-value", "")


def _flow(element: etree._Element) -> str:
    """Text of a paragraph; spaces, tabs and breaks are elements of their own."""
    text = element.text or ""
    for child in element:
        if child.tag == f"{_TEXT}s":
            count = child.get(f"{_TEXT}c", "1")
            text += " " * (int(count) if count.isdigit() else 1)
        elif child.tag in (f"{_TEXT}tab", f"{_TEXT}line-break"):
            text += "\t" if child.tag == f"{_TEXT}tab" else "\n"
        elif child.tag != f"{_OFFICE}annotation" and isinstance(child.tag, str):
            text += _flow(child)
        text += child.tail or ""
    return text
