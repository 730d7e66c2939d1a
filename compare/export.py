"""Tables as files and for the clipboard: numbers as numbers, units in the headings, and where each reading stands.

A table is its headings and its rows. The numbers are those of the data contract's JSON, with all their digits.
"""

from __future__ import annotations

import csv
import io
import json
from collections.abc import Iterable, Mapping, Sequence
from typing import Any

from compare import shown, supply
from compare.answers import ENDS, FIGURES, SHORT_NAMES, asked_strips, part_numbers, row_name
from compare.figures import with_unit
from extract.fields import field_of
from extract.model import Part, Reading, SpecSheet, Where

Row = Mapping[str, Any]
Table = tuple[list[str], list[list[Any]]]
Supply = Mapping[str, Mapping[str, Any]]
SEPARATORS = {"comma": ",", "semicolon": ";"}
DECIMAL_MARKS = {"point": ".", "comma": ","}
MOST_SOURCED = 1000
"""Of a longer ranking the workbook says how numbers were reached, and where readings stand, of so many rows."""


def rank_table(
    rows: Sequence[Row],
    numbers: Iterable[str] = FIGURES,
    *,
    supplies: Sequence[Supply] = (),
    approvals: Sequence[str] = (),
) -> Table:
    """Headings and one row a part: identity, verdict, times over each requirement, three values of each number.

    `supplies` and `approvals`, one a row where there are any, stand behind them.
    """
    strips = asked_strips(rows)
    keys = [key for key in numbers if any(key in row for row in rows)]
    headings = ["Place", "Part number", "Maker", "Package", "Mode", "Verdict", "Tightest"]
    headings += [f"{SHORT_NAMES[name]}, times over" for name in strips]
    headings += [_heading(key, end) for key in keys for end in ENDS]
    headings += ["Not stated", "To look at", "Ordered with", "File"]
    table = [_rank_row(row, strips, keys) for row in rows]
    if any(supplies):
        more, cells = supply_table(supplies)
        headings += more
        table = [[*row, *beside] for row, beside in zip(table, cells, strict=True)]
    if any(approvals):
        headings.append("Approval")
        table = [[*row, said] for row, said in zip(table, approvals, strict=True)]
    return headings, table


def _heading(key: str, end: str) -> str:
    return with_unit(f"{FIGURES[key].name}, {end}", f"({FIGURES[key].unit})" if FIGURES[key].unit else "")


def _rank_row(row: Row, strips: Sequence[str], keys: Sequence[str]) -> list[Any]:
    tightest = "" if row["tightest"] is None else SHORT_NAMES.get(row["tightest"], row["tightest"])
    identity = [row["place"], row_name(row), row["maker"], row["package"], row["mode"], row["verdict"], tightest]
    figures = [row[key][end] if key in row else None for key in keys for end in ENDS]
    ordered = "; ".join(f"{key} {value}" for key, value in row["chosen"].items())
    said = ["; ".join(row["missing"]), "; ".join(row["to_check"]), ordered, row["file"]]
    return [*identity, *(row["slack"].get(name) for name in strips), *figures, *said]


def supply_table(supplies: Sequence[Supply]) -> Table:
    """The columns of supply that any part has, a currency beside the price, and whence each value is."""
    keys = [key for key in supply.columns() if any(key in one for one in supplies)]
    headings = []
    for key in keys:
        unit = supply.columns()[key].unit
        headings += [with_unit(supply.columns()[key].name, f"({unit})" if unit else "")]
        headings += ["Currency"] if key == "price" else []
    return [*headings, "Supply from"], [_supply_row(one, keys) for one in supplies]


def _supply_row(one: Supply, keys: Sequence[str]) -> list[Any]:
    cells: list[Any] = []
    for key in keys:
        figure = supply.figure(one, key)
        cells.append(one[key]["value"] if key in one and figure is None else figure)
        cells += [supply.currency(one) or None] if key == "price" else []
    whence = [f"{supply.columns()[key].name.lower()} {supply.whence_text(one[key])}" for key in keys if key in one]
    return [*cells, "; ".join(whence)]


def numbers_table(rows: Sequence[Row]) -> Table:
    """How each number of each part was reached."""
    headings = ["Part number", "Number", "Unit", "How we have it", "How it was reached"]
    said = [
        [row_name(row), shown_as.name, shown_as.unit, row[key]["basis"], row[key]["how"]]
        for row in rows
        for key, shown_as in FIGURES.items()
        if key in row
    ]
    return headings, said


def sources_table(sheets: Sequence[SpecSheet], rows: Sequence[Row]) -> Table:
    """Where each reading of the parts in `rows` stands: file, its fingerprint, page and cell, status, and the words."""
    headings = ["Part number", "Maker", "Reading", "Min", "Typ", "Max", "Options", "Unit", "Holds for"]
    headings += [
        "How we have it",
        "To look at",
        "File",
        "SHA-256",
        "Page",
        "Sheet",
        "Table",
        "Cell",
        "Line",
        "As printed",
    ]
    wanted = {(row["file"], row["part_number"]) for row in rows}
    table = [
        _source_row(sheet, part, reading)
        for sheet in sheets
        for at, number in enumerate(part_numbers(sheet))
        if (sheet.file, number) in wanted
        for part in (sheet.parts[at],)
        for reading in part.readings
    ]
    return headings, table


def _source_row(sheet: SpecSheet, part: Part, reading: Reading) -> list[Any]:
    unit = field_of(reading.field).unit
    options = ", ".join(f"{value:.10g}" for value in reading.options)
    values = [reading.min, reading.typ, reading.max, options, "" if unit == "1" else unit]
    holds = shown.when_text(reading.when)
    said = [part.part_number, part.maker, shown.NAMES[reading.field], *values, holds, reading.status, reading.check]
    return [*said, sheet.file, sheet.sha256, *_place(reading.where), reading.raw]


def _place(where: Where) -> list[Any]:
    return [where.page, where.sheet, where.table, where.cell, where.line]


def as_csv(table: Table, separator: str = ",", decimal: str = ".") -> bytes:
    """UTF-8 with a byte-order mark, so that spreadsheets keep Ω and µ. ValueError where both signs are the same."""
    if separator == decimal:
        raise ValueError("a decimal comma wants another separator than the comma; take the semicolon")
    headings, rows = table
    text = io.StringIO(newline="")
    writer = csv.writer(text, delimiter=separator)
    writer.writerow(headings)
    writer.writerows([[_written(value, decimal) for value in row] for row in rows])
    return text.getvalue().encode("utf-8-sig")


def as_tabs(table: Table, decimal: str = ".") -> str:
    """Tab-separated text with headings, for the clipboard."""
    headings, rows = table
    lines = [headings, *([" ".join(_written(value, decimal).split()) for value in row] for row in rows)]
    return "\n".join("\t".join(line) for line in lines) + "\n"


def _written(value: Any, decimal: str) -> str:
    if value is None:
        return ""
    if isinstance(value, float):
        text = repr(value).removesuffix(".0")
        return text.replace(".", decimal)
    return str(_safe(value))


def _safe(value: Any) -> Any:
    """Text that a spreadsheet would take for a formula is made plain text; a sheet's words come from anybody."""
    return f"'{value}" if isinstance(value, str) and value[:1] in ("=", "+", "-", "@", "\t", "\r") else value


def as_json(result: Mapping[str, Any]) -> bytes:
    """A result as the command line prints it with --json."""
    return (json.dumps(result, ensure_ascii=False, indent=1, allow_nan=False) + "\n").encode()


def as_xlsx(tables: Mapping[str, Table]) -> bytes:
    """One workbook, a sheet for each table, headings bold and fixed; numbers are numbers."""
    from openpyxl import Workbook
    from openpyxl.cell import WriteOnlyCell
    from openpyxl.styles import Alignment, Font
    from openpyxl.utils import get_column_letter

    book = Workbook(write_only=True)
    for name, (headings, rows) in tables.items():
        sheet = book.create_sheet(name)
        sheet.freeze_panes = "A2"
        heads = []
        for at, heading in enumerate(headings, start=1):
            head = WriteOnlyCell(sheet, value=heading)
            head.font, head.alignment = Font(bold=True), Alignment(wrap_text=True, vertical="top")
            heads.append(head)
            sheet.column_dimensions[get_column_letter(at)].width = 18
        sheet.append(heads)
        for row in rows:
            sheet.append([_as_cell(sheet, value) for value in row])
    data = io.BytesIO()
    book.save(data)
    return data.getvalue()


def _as_cell(sheet: Any, value: Any) -> Any:
    if not isinstance(value, str):
        return value
    # Characters that a workbook cannot hold would refuse the whole file.
    text = "".join(c for c in value if c >= " " or c in "\t\n")
    if not text.startswith("="):
        return text
    from openpyxl.cell import WriteOnlyCell

    cell = WriteOnlyCell(sheet, value=text)
    cell.data_type = "s"
    return cell
