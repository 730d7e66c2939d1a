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
