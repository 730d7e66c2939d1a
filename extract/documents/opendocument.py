"""Open Document spreadsheets (ODS): the text that each cell shows, with its merged ranges.

Element and attribute names are those of the Open Document Format 1.3 (OASIS), part 3, section 9.
"""

from __future__ import annotations

import io
import zipfile
import zlib
from collections.abc import Iterator
from dataclasses import dataclass, field

from lxml import etree

from extract.documents.model import DocumentError
from extract.documents.numberformat import general

_TABLE = "{urn:oasis:names:tc:opendocument:xmlns:table:1.0}"
_TEXT = "{urn:oasis:names:tc:opendocument:xmlns:text:1.0}"
_OFFICE = "{urn:oasis:names:tc:opendocument:xmlns:office:1.0}"
_STYLE = "{urn:oasis:names:tc:opendocument:xmlns:style:1.0}"
DAMAGED = "The workbook is damaged or cut short. Fetch it again, or open it and save it as XLSX."

LOCKED = "The workbook is locked with a password. Open it, save it without a password and try again."
# What the standard library and lxml raise for an archive whose bytes are wrong somewhere.
ZIP_FAULTS = (
    zipfile.BadZipFile, zlib.error, etree.XMLSyntaxError, KeyError, OSError, EOFError, ValueError, RuntimeError,
    NotImplementedError,
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
            root = etree.fromstring(
                archive.read("content.xml"), etree.XMLParser(huge_tree=True, resolve_entities=False)
            )
    except ZIP_FAULTS as fault:
        raise DocumentError(DAMAGED) from fault
    hidden = _hidden_styles(root)
    return [_sheet(table, hidden) for table in root.iter(f"{_TABLE}table")]


def _hidden_styles(root: etree._Element) -> frozenset[str]:
    return frozenset(
        style.get(f"{_STYLE}name", "")
        for style in root.iter(f"{_STYLE}style")
        for properties in style.iter(f"{_STYLE}table-properties")
        if properties.get(f"{_TABLE}display") == "false"
    )


def _sheet(table: etree._Element, hidden: frozenset[str]) -> OpenSheet:
    sheet = OpenSheet(table.get(f"{_TABLE}name", ""), table.get(f"{_TABLE}style-name") in hidden)
    for element in table.iter(f"{_TABLE}table-row"):
        texts = list(_row(sheet, element, len(sheet.grid)))
        while texts and not texts[-1]:
            texts.pop()
        repeats = _count(element, "number-rows-repeated")
        sheet.grid.extend([texts] * (min(repeats, _MOST_REPEATS) if texts else repeats if repeats < 10_000 else 1))
    while sheet.grid and not sheet.grid[-1]:
        sheet.grid.pop()
    return sheet


def _row(sheet: OpenSheet, element: etree._Element, row: int) -> Iterator[str]:
    column = 0
    for cell in element.iterchildren(f"{_TABLE}table-cell", f"{_TABLE}covered-table-cell"):
        covered = cell.tag == f"{_TABLE}covered-table-cell"
        text = "" if covered else _cell_text(cell)
        height, width = _count(cell, "number-rows-spanned"), _count(cell, "number-columns-spanned")
        if height > 1 or width > 1:
            sheet.spans.append((row, column, row + height - 1, column + width - 1))
        repeats = _count(cell, "number-columns-repeated")
        repeats = min(repeats, _MOST_REPEATS)
        yield from [text] * repeats
        column += repeats


def _count(element: etree._Element, name: str) -> int:
    value = element.get(f"{_TABLE}{name}", "1")
    return int(value) if value.isdigit() else 1


def _cell_text(cell: etree._Element) -> str:
    paragraphs = cell.findall(f"{_TEXT}p")
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
