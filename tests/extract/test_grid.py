"""Cell addresses and the light cells of lists."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st
from openpyxl.utils import get_column_letter

from extract.documents.grid import address, column_letters, placed_cells, titled
from extract.documents.model import Cell, Line, Segment, Table
from extract.model import Where


def place(row: int, column: int) -> Where:
    return Where(line=row + 1, cell=address(row, column))


@given(st.integers(min_value=0, max_value=18_000))
def test_columns_are_named_as_a_spreadsheet_names_them(column: int) -> None:
    assert column_letters(column) == get_column_letter(column + 1)


def test_the_seventh_row_of_the_second_column_is_b7() -> None:
    assert address(6, 1) == "B7"


def test_a_light_cell_is_a_cell_with_its_place() -> None:
    (cell,) = placed_cells([["", ""], ["", "60"]], 2, place)
    assert isinstance(cell, Cell)
    assert (cell.text, cell.row, cell.column, cell.row_span, cell.column_span) == ("60", 1, 1, 1, 1)
    assert cell.where == Where(line=2, cell="B2")
    assert (cell.header, cell.confidence) == (False, 1.0)


def test_a_light_cell_cannot_be_changed() -> None:
    (cell,) = placed_cells([["60"]], 1, place)
    with pytest.raises(AttributeError):
        cell.text = "61"  # type: ignore[misc]


def test_a_table_has_the_heading_right_above_as_its_title() -> None:
    table = Table((), 1, 1, Where(table=1))
    heading, prose = (
        Line((Segment(text, Where(line=1)),), Where(line=1), heading=is_heading)
        for text, is_heading in (("VX-32", True), ("see below", False))
    )
    blocks = titled([heading, table, table, prose, table])
    assert [block.title for block in blocks if isinstance(block, Table)] == ["VX-32", "", ""]
