"""A long list read by column says exactly what it says read row by row."""

from __future__ import annotations

import csv
import io
from pathlib import Path

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from extract import read_sheet, rowlist, tables
from extract.model import SpecSheet
from extract.partlist import PartList
from extract.trace import tracing

NEVER = 10**9
SAMPLES = Path(__file__).parents[2] / "sample_specs"
CORPUS = Path(__file__).parents[1] / "corpus" / "sheets"
GRIDS = {".csv", ".tsv", ".xlsx", ".xls", ".ods"}
SHEETS = [path for folder in (SAMPLES, CORPUS) for path in sorted(folder.iterdir()) if path.suffix in GRIDS]


def read_by_column(data: bytes, name: str) -> SpecSheet:
    """However short the list is."""
    with pytest.MonkeyPatch.context() as patch:
        patch.setattr(rowlist, "LEAST_ROWS", 1)
        patch.setattr(tables, "whole", list)
        return read_sheet(data, name)


def read_by_row(data: bytes, name: str) -> SpecSheet:
    with pytest.MonkeyPatch.context() as patch:
        patch.setattr(rowlist, "LEAST_ROWS", NEVER)
        return read_sheet(data, name)


@pytest.mark.parametrize("path", SHEETS, ids=lambda path: path.name)
def test_every_list_of_the_samples_and_the_corpus_reads_the_same_both_ways(path):
    by_row = read_by_row(path.read_bytes(), path.name)
    assert read_by_column(path.read_bytes(), path.name) == by_row
    assert isinstance(by_row.parts, tuple)


def test_some_of_those_lists_are_read_by_column():
    made = [read_by_column(path.read_bytes(), path.name).parts for path in SHEETS]
    assert sum(isinstance(parts, PartList) and None not in parts.rows for parts in made) >= 5


# --- random lists

NUMBERS = ["26", "26.000", "12,5", "0", "-", "", "n/a", "8 / 12", "100k", "3.2x2.5", "TBD", "60 max", "≤ 80", "about 5"]
HEADS: dict[str, list[str]] = {
    "Part number": [],
    "Frequency (MHz)": ["26", "16.000", "32.768 kHz", "12 - 54", "24 MHz Fund.", "25.000 3rd OT", "", "-"],
    "周波数 (MHz)": ["26", "16.000", "48", ""],
    "Load capacitance (pF)": ["8", "12,5", "Series", "8, 10, 12", "S", "8-32", "", "-"],
    "Lastkapazität [pF]": ["9", "9,0", "Serie", "18"],
    "ESR max (ohm)": ["60", "40k", "60 (12-16 MHz)", "80 Ω (3rd OT)", "50000", "0.001", "≤ 100", "60*", ""],
    "等效电阻 (Ω)": ["60", "50", "最大 80", "-"],
    "C0 max (pF)": ["2.0", "7", "0.8", "70", "<3", ""],
    "C1 typ (fF)": ["3.5", "12", "90", "350", ""],
    "L1 (mH)": ["10", "4.6", "900", ""],
    "Q": ["90000", "120", "1.2e5", ""],
    "Frequency tolerance (±ppm)": ["10", "15", "-5/+15", "10, 20 or 30", "100000", ""],
    "Frequency stability (±ppm)": ["20", "30 (-20~+70°C)", "50 @ -40 to 85 °C", "-0.034", "0.04", ""],
    "Stabilité (±ppm)": ["20", "30", "50"],
    "Parabolic coefficient (ppm/°C²)": ["-0.034", "-0.04 max", "", "-"],
    "Operating temperature (°C)": ["-40 to 85", "-20~70", "85", "40 to 85", "-40 to 85, -40 to 105", ""],
    "Storage temperature (°C)": ["-55 to 125", "-10 to 60", "-40~85", ""],
    "T min (°C)": ["-40", "-20", "40", ""],
    "T max (°C)": ["85", "70", "-45", ""],
    "Drive level max (µW)": ["100", "0.1 mW", "10", "900000", ""],
    "Ageing first year (±ppm)": ["1", "3", "5 max", ""],
    "Mode": ["Fundamental", "3rd overtone", "F", "3", "Fund./3rd", ""],
    "Cut": ["AT", "BT", "tuning fork", ""],
    "Package": ["3225", "2.0 x 1.6 mm", "HC-49/S", "4-SMD, no lead", ""],
    "Size": ["3.2 x 2.5", "5032", ""],
    "Manufacturer": ["Able Crystals", "Brindle · Wick", "n/a", ""],
    "Price": ["0.21", "0.35", "on request", ""],
    "Status": ["active", "NRND", ""],
    "AEC-Q200": ["yes", "no", "-", ""],
    "Stock": ["1200", "0", "45", ""],
    "Description": [
        "CRYSTAL 26.0000MHZ 8PF SMD",
        "XTAL OSC 25MHZ",
        "Quartz crystal, load capacitance: 9 pF, ESR 50 ohm max",
        "Resistor 10k 1%",
        "Tuning fork 32.768 kHz 12.5 pF ±20 ppm -40 to 85 °C",
        "Mode: Fundamental / 3rd overtone; CL: Series",
        "Package 3225; maker: Able Crystals",
        "",
    ],
    "Remarks": ["no solder leads in stock", "oscillator", "MEMS", "crystal", "C0=1.2 pF C1=3 fF", ""],
    "": ["1", "2", "", "see note"],
}
ANYTHING = st.text(alphabet="0123456789.,-±/~ kMHzpFΩµ°C()@xXabenorstu\n周载", max_size=14)
NAMES = [
    *(f"ABQ{number}-26M" for number in range(30)),
    "XTAL-7",
    "TCXO-77-A",
    "OSC12 (oscillator)",
    "-",
    "",
    "晶体 AB-12",
]
BELOW = [
    "",
    "* ESR at 25 °C",
    "Operating temperature: -40 to +85 °C",
    "Load capacitance 10 pF unless noted",
    "Tuning fork",
]
ABOVE = ["", "Quartz crystals, AT cut", "Able Crystals Ltd", "Drive level: 100 µW max", "ESR 70 ohm (12 - 30 MHz)"]


@st.composite
def lists(draw: st.DrawFn) -> list[list[str]]:
    heads = draw(st.lists(st.sampled_from(sorted(HEADS)[1:]), min_size=2, max_size=9, unique=True))
    heads = ["Part number", *(head for head in heads if head != "Part number")]
    rows = draw(st.integers(min_value=42, max_value=60))
    names = st.sampled_from(NAMES) if draw(st.booleans()) else st.just(None)
    odd = draw(st.sampled_from([0, 0, 5]))
    body = []
    for number in range(rows):
        name = draw(names)
        cells = [name if name is not None else f"ABX{number:03d}-{number}"]
        for head in heads[1:]:
            known = st.sampled_from(HEADS[head])
            cells.append(draw(ANYTHING) if odd and draw(st.integers(0, odd)) == 0 else draw(known))
        body.append(cells)
    for at in draw(st.lists(st.integers(0, rows - 1), max_size=6)):
        # The same part again, on another reel.
        body.insert(draw(st.integers(0, rows)), list(body[at]))
    if draw(st.integers(0, 3)) == 0:
        body.insert(draw(st.integers(2, rows)), ["Tuning forks", *[""] * (len(heads) - 1)])
    order = draw(st.permutations(range(len(heads))))
    return [[row[at] for at in order] for row in [heads, *body]]


FEW = settings(max_examples=60, deadline=None, suppress_health_check=[HealthCheck.too_slow, HealthCheck.data_too_large])


def as_csv(rows: list[list[str]]) -> bytes:
    stream = io.StringIO()
    csv.writer(stream).writerows(rows)
    return stream.getvalue().encode()


@FEW
@given(rows=lists())
def test_random_lists_read_the_same_both_ways(rows):
    data = as_csv(rows)
    assert read_by_column(data, "list.csv") == read_by_row(data, "list.csv")


# --- what surrounds a list

HEAD = ["Part number", "Frequency (MHz)", "Load capacitance (pF)", "ESR max (ohm)", "C0 max (pF)"]


def row(number: int, prefix: str = "ABX") -> list[str | float]:
    return [f"{prefix}{number:04d}-26", 26.0, 8 + number % 3, 40 + 10 * (number % 4), round(1 + number % 7 / 10, 1)]


def as_xlsx(*sheets: tuple[str, list[list[str | float]]], merged: tuple[str, ...] = ()) -> bytes:
    from openpyxl import Workbook

    book = Workbook()
    book.remove(book.active)
    for name, rows in sheets:
        sheet = book.create_sheet(name)
        for each in rows:
            sheet.append(each)
        for span in merged:
            sheet.merge_cells(span)
    buffer = io.BytesIO()
    book.save(buffer)
    return buffer.getvalue()


def test_several_sheets_are_one_list_each_part_at_its_own_place():
    first = [["Quartz crystals, AT cut"], [], HEAD, *(row(number) for number in range(300))]
    second = [HEAD, *(row(number, "ABY") for number in range(250))]
    data = as_xlsx(("Stock", first), ("More", second))
    sheet = read_sheet(data, "list.xlsx")
    assert isinstance(sheet.parts, PartList)
    assert sheet.parts.part_numbers == [row(n)[0] for n in range(300)] + [row(n, "ABY")[0] for n in range(250)]
    assert [str(part.readings[0].where) for part in (sheet.parts[0], sheet.parts[-1])] == [
        "sheet Stock, cell B4",
        "sheet More, cell B251",
    ]
    assert {part.cut for part in sheet.parts} == {"AT"}
    assert sheet == read_by_row(data, "list.xlsx")


def test_rows_with_merged_cells_are_read_by_themselves():
    data = as_xlsx(("Stock", [HEAD, *(row(number) for number in range(260))]), merged=("D10:E10", "B20:B22"))
    sheet = read_sheet(data, "list.xlsx")
    assert isinstance(sheet.parts, PartList)
    assert sorted(at for at, place in enumerate(sheet.parts.rows) if place is None) == [8, 18, 19, 20]
    assert sheet == read_by_row(data, "list.xlsx")


def test_what_stands_below_a_list_holds_for_all_of_it():
    rows = [HEAD, *(list(map(str, row(number))) for number in range(260))]
    below = "\n\nOperating temperature: -40 to +85 °C\nESR 70 ohm max (12 - 30 MHz)\n"
    data = as_csv(rows) + below.encode()
    sheet = read_sheet(data, "list.csv")
    assert sheet == read_by_row(data, "list.csv")
    assert len(sheet.parts) == 260


def test_a_part_that_says_two_things_carries_the_place_of_the_other():
    rows = [["Part number", "Frequency (MHz)", "ESR (ohm)", "ESR max (ohm)"]]
    rows += [[f"ABX{number:04d}-26", "26", "50", "60" if number == 7 else "50"] for number in range(220)]
    data = as_csv(rows)
    sheet = read_sheet(data, "list.csv")
    assert sheet == read_by_row(data, "list.csv")
    odd = [part.part_number for part in sheet.parts if any("line 9" in (r.check or "") for r in part.readings)]
    assert odd in ([], ["ABX0007-26"])


def test_a_contradiction_between_two_fields_is_told_of_that_row_alone():
    rows = [["Part number", "Frequency (MHz)", "C0 max (pF)", "C1 (fF)"]]
    rows += [[f"ABX{number:04d}-26", "26", "1.0", "30" if number == 7 else "3"] for number in range(220)]
    sheet = read_sheet(as_csv(rows), "list.csv")
    doubted = {part.part_number for part in sheet.parts if any(reading.check for reading in part.readings)}
    assert isinstance(sheet.parts, PartList)
    assert doubted == {"ABX0007-26"}


def test_the_same_part_on_another_reel_is_one_part():
    rows = [["Part number", "Frequency (MHz)", "ESR max (ohm)", "Packing"]]
    rows += [[f"ABX{number // 2:04d}-26", "26", "60", ("reel", "tape")[number % 2]] for number in range(440)]
    sheet = read_sheet(as_csv(rows), "list.csv")
    assert isinstance(sheet.parts, PartList)
    assert not sheet.parts.kept
    assert len(sheet.parts) == 220


def test_while_somebody_asks_why_every_row_is_explained():
    data = as_csv([HEAD, *(list(map(str, row(number))) for number in range(210))])
    with tracing() as trace:
        sheet = read_sheet(data, "list.csv")
    assert len(trace.taken) == sum(len(part.readings) for part in sheet.parts) == 840


def test_other_things_in_a_list_of_crystals_are_left_out_and_oscillators_named():
    kinds = ["Quartz crystal", "Resistor", "TCXO"]
    rows = [["Part number", "Type", "Frequency (MHz)", "ESR max (ohm)"]]
    rows += [[f"ABX{number:04d}-26", kinds[number % 3], "26", "60"] for number in range(240)]
    data = as_csv(rows)
    sheet = read_sheet(data, "list.csv")
    assert sheet == read_by_row(data, "list.csv")
    assert len(sheet.parts) == 80
    assert sum("oscillator" in note.message for note in sheet.notes) == 80
