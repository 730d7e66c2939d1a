"""What the fast workbook reader leaves out: XLSX's number formats, and its formulas that have no stored result."""

from __future__ import annotations

import io
import posixpath
import re
import zipfile
from dataclasses import dataclass, field

from lxml import etree

from extract.documents.grid import address
from extract.documents.model import DocumentError
from extract.documents.numberformat import adds_something

_MAIN = "{http://schemas.openxmlformats.org/spreadsheetml/2006/main}"
_REL_ID = "{http://schemas.openxmlformats.org/officeDocument/2006/relationships}id"
# Formats that a file names by number only (ISO/IEC 29500-1, 18.8.30), those that show more than the bare number.
_BUILT_IN = {
    "2": "0.00",
    "4": "#,##0.00",
    "9": "0%",
    "10": "0.00%",
    "11": "0.00E+00",
    "39": "#,##0.00",
    "40": "#,##0.00",
}
_DATE_SIGNS = re.compile(r"[ymdhs]", re.IGNORECASE)
_LITERALS = re.compile(r'"[^"]*"|\\.|\[[^\]]*\]|General', re.IGNORECASE)
_CELL_NAME = re.compile(rb'\br="([A-Z]+)(\d+)"')
_STYLE = re.compile(rb'\bs="(\d+)"')
_FAR_CELL = re.compile(rb'\br="(?:[A-Z]{3}\d+|[A-Z]+\d{6,})"')
_FILLED_CELL = re.compile(rb'<c\s[^>]*?\br="([A-Z]{1,3})(\d+)"[^>/]*>')
_MOST_CELLS = 20_000_000
_NO_RESULT = re.compile(rb"<c\s([^>]*)>\s*<f(?:\s[^>]*)?(?:/>|>[^<]*</f>)\s*(?:<v\s*/>|<v></v>)?\s*</c>")


@dataclass(slots=True)
class SheetStyles:
    """For one sheet: formats by row and column (from 0), and addresses of formulas without a stored result."""

    formats: dict[tuple[int, int], str] = field(default_factory=dict)
    uncalculated: list[str] = field(default_factory=list)


def sheet_styles(data: bytes) -> dict[str, SheetStyles]:
    """Styles by sheet name; empty for files that are no XLSX."""
    if not zipfile.is_zipfile(io.BytesIO(data)):
        return {}
    with zipfile.ZipFile(io.BytesIO(data)) as archive:
        names = set(archive.namelist())
        if "xl/workbook.xml" not in names:
            return {}
        codes = _style_codes(archive.read("xl/styles.xml")) if "xl/styles.xml" in names else {}
        styles = {}
        for name, part in _sheet_parts(archive).items():
            if part in names:
                content = archive.read(part)
                _refuse_stray_cells(name, content)
                styles[name] = _styles_of(content, codes)
        return styles


def _refuse_stray_cells(name: str, sheet: bytes) -> None:
    """DocumentError where a stray cell far off would make the grid, which the reader holds whole, too large to hold."""
    if not _FAR_CELL.search(sheet):
        return
    filled = [(_column(match.group(1)), int(match.group(2))) for match in _FILLED_CELL.finditer(sheet)]
    width = max((column for column, _ in filled), default=0) + 1
    height = max((row for _, row in filled), default=0)
    if width * height > _MOST_CELLS:
        furthest = max(filled, key=lambda cell: (cell[0] > 1000, cell[1], cell[0]))
        raise DocumentError(
            f"Sheet {name!r} has a cell far off the rest ({address(furthest[1] - 1, furthest[0])}), which makes it too "
            "large to read. Delete the empty rows and columns up to that cell and save the workbook again."
        )


def _sheet_parts(archive: zipfile.ZipFile) -> dict[str, str]:
    relations = etree.fromstring(archive.read("xl/_rels/workbook.xml.rels"))
    targets = {relation.get("Id"): relation.get("Target", "") for relation in relations}
    book = etree.fromstring(archive.read("xl/workbook.xml"))
    return {
        sheet.get("name", ""): posixpath.normpath(posixpath.join("/xl", targets.get(sheet.get(_REL_ID), ""))).lstrip(
            "/"
        )
        for sheet in book.iter(f"{_MAIN}sheet")
    }


def _style_codes(styles: bytes) -> dict[bytes, str]:
    """Format codes that show more than the number, by the style's index as cells name it."""
    root = etree.fromstring(styles)
    codes = dict(_BUILT_IN)
    codes.update((one.get("numFmtId", ""), one.get("formatCode", "")) for one in root.iter(f"{_MAIN}numFmt"))
    cell_formats = root.find(f"{_MAIN}cellXfs")
    found = {}
    for index, one in enumerate(cell_formats if cell_formats is not None else ()):
        code = codes.get(one.get("numFmtId", ""), "")
        if adds_something(code) and not _DATE_SIGNS.search(_LITERALS.sub("", code)):
            found[str(index).encode()] = code
    return found


def _styles_of(sheet: bytes, codes: dict[bytes, str]) -> SheetStyles:
    styles = SheetStyles()
    if codes:
        wanted = b"|".join(codes)
        for match in re.finditer(rb'<c\s([^>]*\bs="(?:' + wanted + rb')"[^>]*)>', sheet):
            name, style = _CELL_NAME.search(match.group(1)), _STYLE.search(match.group(1))
            if name and style:
                styles.formats[int(name.group(2)) - 1, _column(name.group(1))] = codes[style.group(1)]
    for match in _NO_RESULT.finditer(sheet) if b"<f" in sheet else ():
        name = _CELL_NAME.search(match.group(1))
        if name:
            styles.uncalculated.append((name.group(1) + name.group(2)).decode())
    return styles


def _column(letters: bytes) -> int:
    column = 0
    for letter in letters:
        column = 26 * column + letter - 64
    return column - 1
