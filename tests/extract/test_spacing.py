"""Columns held by spaces, tabs and leader dots."""

from __future__ import annotations

import pytest

from extract.documents.model import Table
from extract.documents.spacing import by_position, by_tabs, is_rule, pieces, printed_width


def texts(table: Table | None) -> list[list[str]]:
    assert table is not None
    return [[cell.text if cell else "" for cell in row] for row in table.grid()]


@pytest.mark.parametrize(
    ("line", "parts"),
    [
        ("ESR    60 Ω max", ["ESR", "60 Ω max"]),
        ("ESR\t60\tΩ", ["ESR", "60", "Ω"]),
        ("Shunt capacitance ......... 1.4 pF typ.", ["Shunt capacitance", "1.4 pF typ."]),
        ("Shunt capacitance . . . . . 1.4 pF", ["Shunt capacitance", "1.4 pF"]),
        ("Shunt capacitance……1.4 pF", ["Shunt capacitance", "1.4 pF"]),
        ("品牌：启岳　型号：Q1", ["品牌：启岳", "型号：Q1"]),
        ("-40...+85 °C", ["-40...+85 °C"]),
        ("one space parts nothing", ["one space parts nothing"]),
        ("", []),
    ],
)
def test_a_line_is_parted_at_gaps_and_leaders(line: str, parts: list[str]) -> None:
    assert [piece.text for piece in pieces(line)] == parts


def test_east_asian_signs_are_two_positions_wide() -> None:
    assert printed_width("负载 CL") == 7


def test_values_stand_in_the_column_that_they_are_printed_under() -> None:
    lines = [
        "PARAMETER            MIN     TYP     MAX    UNIT",
        "-------------------------------------------------",
        "Load capacitance             8              pF",
        "Resistance                   28      50     ohm",
        "Tolerance            -10             +10    ppm",
    ]
    assert texts(by_position(list(enumerate(lines, start=1)))) == [
        ["PARAMETER", "MIN", "TYP", "MAX", "UNIT"],
        ["Load capacitance", "", "8", "", "pF"],
        ["Resistance", "", "28", "50", "ohm"],
        ["Tolerance", "-10", "", "+10", "ppm"],
    ]


def test_columns_of_east_asian_labels_line_up() -> None:
    lines = ["负载电容    8 pF", "频率        16 MHz", "ESR         60 Ω"]
    assert texts(by_position(list(enumerate(lines)))) == [["负载电容", "8 pF"], ["频率", "16 MHz"], ["ESR", "60 Ω"]]


def test_a_cell_keeps_its_line() -> None:
    table = by_position([(7, "a    b"), (8, "c    d"), (9, "e    f")])
    assert table is not None
    assert [cell.where.line for cell in table.cells] == [7, 7, 8, 8, 9, 9]


def test_lines_with_gaps_at_random_are_no_table() -> None:
    lines = ["Best regards   I. Halvard", "Sales", "Please   call   before   noon"]
    assert by_position(list(enumerate(lines))) is None


def test_tabs_keep_the_place_of_empty_cells() -> None:
    assert texts(by_tabs([(1, "R1\t\t28\t50"), (2, "CL\t8\t\t")])) == [["R1", "", "28", "50"], ["CL", "8", "", ""]]


def test_a_different_number_of_tabs_is_no_table() -> None:
    assert by_tabs([(1, "a\tb"), (2, "a\t\tb")]) is None


@pytest.mark.parametrize(("line", "drawn"), [("-----", True), ("=== ====", True), ("+----+---+", True), ("- 5", False)])
def test_a_drawn_line_is_told_from_text(line: str, *, drawn: bool) -> None:
    assert is_rule(line) is drawn


def test_a_long_rule_that_ends_in_text_is_told_at_once() -> None:
    assert not is_rule("-" * 5000 + "x")
