"""The ranking as a table with numbers as numbers and units in the headings: CSV, XLSX, and text to be copied."""

from __future__ import annotations

import csv
import io
from collections.abc import Iterable, Mapping, Sequence
from typing import Any

from compare.answers import ENDS, FIGURES, SHORT_NAMES, asked_strips, row_name
from compare.figures import with_unit

Row = Mapping[str, Any]
Table = tuple[list[str], list[list[Any]]]


def rank_table(rows: Sequence[Row], numbers: Iterable[str] = FIGURES) -> Table:
    """Headings and one row a part: identity, verdict, times over each requirement, three values of each number."""
    strips = asked_strips(rows)
    keys = [key for key in numbers if any(key in row for row in rows)]
    headings = ["Place", "Part number", "Maker", "Package", "Mode", "Verdict", "Tightest"]
    headings += [f"{SHORT_NAMES[name]}, times over" for name in strips]
    headings += [_heading(key, end) for key in keys for end in ENDS]
    headings += ["Not stated", "To look at", "Ordered with", "File"]
    return headings, [_rank_row(row, strips, keys) for row in rows]


def _heading(key: str, end: str) -> str:
    return with_unit(f"{FIGURES[key].name}, {end}", f"({FIGURES[key].unit})" if FIGURES[key].unit else "")


def _rank_row(row: Row, strips: Sequence[str], keys: Sequence[str]) -> list[Any]:
    tightest = "" if row["tightest"] is None else SHORT_NAMES.get(row["tightest"], row["tightest"])
    identity = [row["place"], row_name(row), row["maker"], row["package"], row["mode"], row["verdict"], tightest]
    figures = [row[key][end] if key in row else None for key in keys for end in ENDS]
    ordered = "; ".join(f"{key} {value}" for key, value in row["chosen"].items())
    said = ["; ".join(row["missing"]), "; ".join(row["to_check"]), ordered, row["file"]]
    return [*identity, *(row["slack"].get(name) for name in strips), *figures, *said]


def sources_table(rows: Sequence[Row]) -> Table:
    """How each number of each part was reached."""
    headings = ["Part number", "Number", "Unit", "How we have it", "How it was reached"]
    said = [
        [row_name(row), shown.name, shown.unit, row[key]["basis"], row[key]["how"]]
        for row in rows
        for key, shown in FIGURES.items()
        if key in row
    ]
    return headings, said


def as_csv(table: Table) -> bytes:
    """UTF-8 with a byte-order mark, so that spreadsheets keep Ω and µ."""
    headings, rows = table
    text = io.StringIO(newline="")
    writer = csv.writer(text)
    writer.writerow(headings)
    writer.writerows([["" if value is None else _safe(value) for value in row] for row in rows])
    return text.getvalue().encode("utf-8-sig")


def as_tabs(table: Table) -> str:
    """Tab-separated text with headings, for the clipboard."""
    headings, rows = table
    lines = [headings, *([_cell_text(value) for value in row] for row in rows)]
    return "\n".join("\t".join(line) for line in lines) + "\n"


def _cell_text(value: Any) -> str:
    return "" if value is None else " ".join(str(_safe(value)).split())


def _safe(value: Any) -> Any:
    """Text that a spreadsheet would take for a formula is made plain text; a sheet's words come from anybody."""
    return f"'{value}" if isinstance(value, str) and value[:1] in ("=", "+", "-", "@", "\t", "\r") else value


def as_xlsx(tables: Mapping[str, Table]) -> bytes:
    """One workbook, a sheet for each table, headings bold and fixed; numbers are numbers."""
    from openpyxl import Workbook
    from openpyxl.styles import Alignment, Font

    book = Workbook()
    book.remove(book.active)
    for name, (headings, rows) in tables.items():
        sheet = book.create_sheet(name)
        sheet.append(headings)
        for row in rows:
            sheet.append([_plain(value) for value in row])
        for column in range(1, len(headings) + 1):
            head = sheet.cell(row=1, column=column)
            head.font, head.alignment = Font(bold=True), Alignment(wrap_text=True, vertical="top")
            sheet.column_dimensions[head.column_letter].width = 18
        sheet.freeze_panes = "A2"
        for cells in sheet.iter_rows(min_row=2):
            for cell in cells:
                if cell.data_type == "f":
                    cell.data_type = "s"
    data = io.BytesIO()
    book.save(data)
    return data.getvalue()


def _plain(value: Any) -> Any:
    # Characters that a workbook cannot hold would refuse the whole file.
    return "".join(c for c in value if c >= " " or c in "\t\n") if isinstance(value, str) else value
