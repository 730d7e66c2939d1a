"""CSV and its kin. The csv module writes what is read here; RFC 4180 describes the form."""

from __future__ import annotations

import csv
import io

import pytest
from hypothesis import given
from hypothesis import strategies as st

from extract.documents.delimited import looks_delimited, read, sniff
from extract.documents.model import DocumentError, Table
from extract.model import Where


def table_of(data: bytes) -> Table:
    (table,) = read(data).blocks
    assert isinstance(table, Table)
    return table


def grid(data: bytes) -> list[list[str]]:
    return [[cell.text if cell else "" for cell in row] for row in table_of(data).grid()]


CELL = st.text(alphabet=st.characters(codec="utf-8", exclude_categories=("C", "Z")), min_size=1, max_size=8)


@given(
    rows=st.integers(2, 6).flatmap(lambda width: st.lists(st.lists(CELL, min_size=width, max_size=width), min_size=4)),
    delimiter=st.sampled_from(",;\t|"),
)
def test_a_grid_written_with_any_delimiter_reads_back_when_told(rows: list[list[str]], delimiter: str) -> None:
    written = io.StringIO()
    csv.writer(written, delimiter=delimiter, quoting=csv.QUOTE_ALL).writerows(rows)
    assert grid(f"sep={delimiter}\n".encode() + written.getvalue().encode()) == rows


@pytest.mark.parametrize("delimiter", list(",;\t|"))
def test_the_delimiter_is_found(delimiter: str) -> None:
    rows = [["Part", "Frequency", "Load, ESR"], ["A1", "16 MHz", "8 pF; 60 Ω"], ["B2", "24 MHz", "9 pF; 50 Ω"]]
    written = io.StringIO()
    csv.writer(written, delimiter=delimiter).writerows(rows)
    assert grid(written.getvalue().encode()) == rows


def test_decimal_commas_do_not_part_cells() -> None:
    data = b"Teil;MHz;pF\nA1;18,432;12,0\nB2;33,3333;16,0\n"
    assert grid(data)[1] == ["A1", "18,432", "12,0"]


def test_a_cell_in_a_record_of_several_lines_has_its_own_line() -> None:
    data = b'Part,Price,ESR\nA1,"10: 0.62\n100: 0.41",60\nB2,x,50\n'
    cells = {cell.where.cell: cell for cell in table_of(data).cells}
    assert cells["B2"].text == "10: 0.62\n100: 0.41"
    assert cells["C2"].where == Where(line=3, cell="C2")
    assert cells["A3"].where == Where(line=4, cell="A3")


def test_lines_above_the_header_stay_in_the_table() -> None:
    data = b"Stock list\n\nPart,MHz,pF\nA1,16,8\nB2,24,9\n"
    assert grid(data) == [
        ["Stock list", "", ""],
        ["", "", ""],
        ["Part", "MHz", "pF"],
        ["A1", "16", "8"],
        ["B2", "24", "9"],
    ]


def test_a_byte_order_mark_is_no_part_of_the_first_cell() -> None:
    assert grid("\ufeffPart;ESR\nA1;60\n".encode())[0] == ["Part", "ESR"]


def test_a_list_in_gb18030_is_read() -> None:
    assert grid("型号,频率\nA1,16MHz\nB2,24MHz\n".encode("gb18030"))[0] == ["型号", "频率"]


def test_an_open_quote_does_not_swallow_the_list() -> None:
    rows = "".join(f"A{number},16,8\n" for number in range(400))
    document = read(('Part,MHz,pF\n"B2,24,9\n' + rows).encode())
    (table,) = document.blocks
    assert isinstance(table, Table)
    assert table.rows == 402
    assert [note.level for note in document.notes] == ["warning"]


def test_a_list_without_text_is_refused() -> None:
    with pytest.raises(DocumentError, match="^The list is empty"):
        read(b",,\n,,\n")


@pytest.mark.parametrize(
    ("text", "is_list"),
    [
        ("a,b,c\n1,2,3\n4,5,6\n", True),
        ("Hello Petra,\n\nthank you, we can offer, at once,\n26 MHz crystals.\n", False),
        ("ESR: 60 Ω\nC0: 2 pF\n", False),
    ],
)
def test_a_list_is_told_from_prose(text: str, *, is_list: bool) -> None:
    assert looks_delimited(text) is is_list


def test_prose_has_no_delimiter() -> None:
    assert sniff("one line, with commas\nanother line\n") is None
