"""The same content reads the same: rows shuffled, columns swapped, one more column, another size or kind of file."""

from __future__ import annotations

import csv
import io

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from extract import read_sheet
from extract.model import SpecSheet

Rows = list[list[str]]

FEW = settings(max_examples=25, deadline=None, suppress_health_check=[HealthCheck.function_scoped_fixture])
PARAMETERS: Rows = [
    ["Nominal frequency", "", "26.000", "", "MHz"],
    ["Frequency tolerance", "-10", "", "10", "ppm"],
    ["Frequency stability", "-15", "", "15", "ppm"],
    ["Operating temperature", "-40", "", "85", "°C"],
    ["Storage temperature", "-55", "", "125", "°C"],
    ["Load capacitance", "", "8", "", "pF"],
    ["Equivalent series resistance", "", "30", "60", "Ω"],
    ["Shunt capacitance", "", "1.0", "3.0", "pF"],
    ["Motional capacitance", "", "3.5", "", "fF"],
    ["Drive level", "", "10", "100", "µW"],
    ["Ageing per year", "-2", "", "2", "ppm"],
    ["Insulation resistance", "500", "", "", "MΩ"],
]
HEAD = ["Parameter", "Min", "Typ", "Max", "Unit"]
# Read off the rows above by hand: field -> (min, typ, max).
STATED = {
    "frequency_mhz": (None, 26.0, None),
    "frequency_tolerance_ppm": (-10.0, None, 10.0),
    "frequency_stability_ppm": (-15.0, None, 15.0),
    "operating_temperature_c": (-40.0, None, 85.0),
    "storage_temperature_c": (-55.0, None, 125.0),
    "load_capacitance_pf": (None, 8.0, None),
    "esr_ohm": (None, 30.0, 60.0),
    "shunt_capacitance_pf": (None, 1.0, 3.0),
    "motional_capacitance_ff": (None, 3.5, None),
    "drive_level_uw": (None, 10.0, 100.0),
    "ageing_ppm": (-2.0, None, 2.0),
    "insulation_resistance_megohm": (500.0, None, None),
}
LIST_HEAD = [
    "Part number",
    "Frequency (MHz)",
    "Load capacitance (pF)",
    "ESR max (Ω)",
    "C0 max (pF)",
    "Tolerance (±ppm)",
]
LIST: Rows = [
    [f"PQ{20 + n}-{frequency.replace('.', '')}", frequency, load, esr, "2.0", tolerance]
    for n, (frequency, load, esr, tolerance) in enumerate(
        [
            ("12.000", "8", "120", "10"),
            ("16.000", "9", "80", "15"),
            ("24.000", "12", "60", "20"),
            ("26.000", "6", "50", "10"),
        ]
    )
]


# --- sheets in each kind of file


def delimited(rows: Rows, delimiter: str) -> bytes:
    buffer = io.StringIO()
    csv.writer(buffer, delimiter=delimiter).writerows(rows)
    return buffer.getvalue().encode()


def as_html(rows: Rows) -> bytes:
    lines = ["<tr>" + "".join(f"<td>{cell}</td>" for cell in row) + "</tr>" for row in rows]
    return f"<!doctype html><meta charset=utf-8><table>{''.join(lines)}</table>".encode()


def as_markdown(rows: Rows) -> bytes:
    lines = ["| " + " | ".join(row) + " |" for row in rows]
    return "\n".join([lines[0], "|" + "---|" * len(rows[0]), *lines[1:]]).encode()


def as_xlsx(rows: Rows) -> bytes:
    from openpyxl import Workbook

    book = Workbook()
    for row in rows:
        book.active.append(row)
    buffer = io.BytesIO()
    book.save(buffer)
    return buffer.getvalue()


def as_docx(rows: Rows) -> bytes:
    from docx import Document

    document = Document()
    table = document.add_table(rows=len(rows), cols=len(rows[0]))
    for line, row in zip(table.rows, rows, strict=True):
        for cell, text in zip(line.cells, row, strict=True):
            cell.text = text
    buffer = io.BytesIO()
    document.save(buffer)
    return buffer.getvalue()


def as_pdf(rows: Rows, size: float = 9.0, *, ruled: bool = True) -> bytes:
    from reportlab.pdfbase import pdfmetrics
    from reportlab.pdfbase.cidfonts import UnicodeCIDFont
    from reportlab.pdfgen.canvas import Canvas

    # Helvetica's own encoding has no ohm; this font needs no file either.
    pdfmetrics.registerFont(UnicodeCIDFont("HeiseiKakuGo-W5"))
    buffer = io.BytesIO()
    height = 2.2 * size
    wide = [max(8.0 * size, *(0.62 * size * len(row[column]) for row in rows)) for column in range(len(rows[0]))]
    xs = [40 + sum(wide[:column]) for column in range(len(wide) + 1)]
    paper = Canvas(buffer, pagesize=(xs[-1] + 40, 120 + height * len(rows)))
    top = 60 + height * len(rows)
    paper.setFont("HeiseiKakuGo-W5", size)
    for index, row in enumerate(rows):
        for x, text in zip(xs, row, strict=False):
            paper.drawString(x + 4, top - height * index - 1.5 * size, text)
    if ruled:
        paper.grid(xs, [top - height * index for index in range(len(rows) + 1)])
    paper.save()
    return buffer.getvalue()


KINDS = {
    "comma.csv": lambda rows: delimited(rows, ","),
    "semicolon.csv": lambda rows: delimited(rows, ";"),
    "tab.tsv": lambda rows: delimited(rows, "\t"),
    "page.html": as_html,
    "note.md": as_markdown,
    "book.xlsx": as_xlsx,
    "letter.docx": as_docx,
    "ruled.pdf": as_pdf,
    "borderless.pdf": lambda rows: as_pdf(rows, ruled=False),
}


# --- what is compared


def read_back(data: bytes, name: str) -> list[dict[str, tuple[float | None, ...]]]:
    """The parts of a sheet, each as its readings by field; a field that comes twice would show as a difference."""
    return [_plain(part) for part in _sheet(data, name).parts]


def _sheet(data: bytes, name: str) -> SpecSheet:
    sheet = read_sheet(data, name)
    assert [note.message for note in sheet.notes if note.level != "info"] == []
    return sheet


def _plain(part: object) -> dict[str, tuple[float | None, ...]]:
    readings = part.readings  # type: ignore[attr-defined]
    assert len({reading.field for reading in readings}) == len(readings)
    assert [reading.check for reading in readings if reading.check] == []
    return {reading.field: (reading.min, reading.typ, reading.max) for reading in readings}


def listed(data: bytes, name: str) -> dict[str | None, dict[str, tuple[float | None, ...]]]:
    return {part.part_number: _plain(part) for part in _sheet(data, name).parts}


EXPECTED_LIST = {
    row[0]: {
        "frequency_mhz": (None, float(row[1]), None),
        "frequency_tolerance_ppm": (-float(row[5]), None, float(row[5])),
        "load_capacitance_pf": (None, float(row[2]), None),
        "esr_ohm": (None, None, float(row[3])),
        "shunt_capacitance_pf": (None, None, float(row[4])),
    }
    for row in LIST
}


# --- the properties


@pytest.mark.parametrize("name", KINDS)
def test_a_parameter_table_reads_the_same_in_every_kind_of_file(name):
    assert read_back(KINDS[name]([HEAD, *PARAMETERS]), name) == [STATED]


@pytest.mark.parametrize("name", KINDS)
def test_a_list_of_parts_reads_the_same_in_every_kind_of_file(name):
    assert listed(KINDS[name]([LIST_HEAD, *LIST]), name) == EXPECTED_LIST


@FEW
@given(rows=st.permutations(PARAMETERS), name=st.sampled_from(sorted(KINDS)))
def test_shuffled_rows_read_the_same(rows, name):
    assert read_back(KINDS[name]([HEAD, *rows]), name) == [STATED]


@FEW
@given(order=st.permutations(range(1, 5)), name=st.sampled_from(sorted(KINDS)))
def test_swapped_value_columns_read_the_same(order, name):
    places = [0, *order]
    assert read_back(KINDS[name]([[row[at] for at in places] for row in (HEAD, *PARAMETERS)]), name) == [STATED]


@FEW
@given(order=st.permutations(range(6)), rows=st.permutations(LIST), name=st.sampled_from(sorted(KINDS)))
def test_a_list_with_columns_and_rows_in_any_order_reads_the_same(order, rows, name):
    assert listed(KINDS[name]([[row[at] for at in order] for row in (LIST_HEAD, *rows)]), name) == EXPECTED_LIST


@FEW
@given(
    at=st.integers(0, 5),
    extra=st.sampled_from([("Remarks", "see drawing"), ("Test method", "IEC 60444-5"), ("Grade", "A")]),
    name=st.sampled_from(sorted(KINDS)),
)
def test_one_more_column_of_something_else_changes_nothing(at, extra, name):
    rows = [[*row[:at], extra[0] if row is HEAD else extra[1], *row[at:]] for row in (HEAD, *PARAMETERS)]
    assert read_back(KINDS[name](rows), name) == [STATED]


@pytest.mark.parametrize("name", KINDS)
@pytest.mark.parametrize("head", ["No.", "Item", "#"])
def test_rows_that_are_numbered_read_the_same(head, name):
    numbered = [[str(number), *row] for number, row in enumerate(PARAMETERS, start=1)]
    assert read_back(KINDS[name]([[head, *HEAD], *numbered]), name) == [STATED]


@FEW
@given(
    at=st.integers(1, 6),
    extra=st.sampled_from(
        [("Stock", "12000"), ("Remarks", "reel of 3000"), ("Price (EUR)", "0.19"), ("Height (mm)", "0.7")]
    ),
    name=st.sampled_from(sorted(KINDS)),
)
def test_one_more_column_in_a_list_changes_nothing(at, extra, name):
    rows = [[*row[:at], extra[0] if row is LIST_HEAD else extra[1], *row[at:]] for row in (LIST_HEAD, *LIST)]
    assert listed(KINDS[name](rows), name) == EXPECTED_LIST


@FEW
@given(size=st.floats(5.0, 18.0), ruled=st.booleans())
def test_another_font_size_reads_the_same(size, ruled):
    assert read_back(as_pdf([HEAD, *PARAMETERS], size, ruled=ruled), "a.pdf") == [STATED]


@FEW
@given(
    frequency=st.sampled_from([8.0, 12.0, 16.384, 25.0, 26.0, 38.4, 48.0]),
    esr=st.integers(15, 300),
    load=st.integers(5, 30),
    delimiter=st.sampled_from([",", ";", "\t", "|"]),
)
def test_any_values_come_back_exactly_through_any_delimiter(frequency, esr, load, delimiter):
    rows = [HEAD, ["Nominal frequency", "", f"{frequency:.6f}", "", "MHz"]]
    rows += [["ESR", "", "", str(esr), "Ω"], ["Load capacitance", "", str(load), "", "pF"]]
    (part,) = read_sheet(delimited(rows, delimiter), "a.csv").parts
    read = {reading.field: (reading.min, reading.typ, reading.max) for reading in part.readings}
    assert read == {
        "frequency_mhz": (None, frequency, None),
        "esr_ohm": (None, None, float(esr)),
        "load_capacitance_pf": (None, float(load), None),
    }
