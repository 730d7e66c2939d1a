"""Web pages. Spans and their end follow the HTML standard's rules for forming a table (WHATWG, 4.9.12)."""

from __future__ import annotations

import pytest

from extract.documents.model import DocumentError, Line, Table
from extract.documents.webpage import read
from extract.model import Where


def blocks(body: str) -> tuple[Table | Line, ...]:
    return read(f"<!doctype html><html><body>{body}</body></html>".encode()).blocks


def grid(body: str) -> list[list[str]]:
    (table,) = (block for block in blocks(body) if isinstance(block, Table))
    return [[cell.text if cell else "" for cell in row] for row in table.grid()]


def lines(body: str) -> list[list[str]]:
    return [[segment.text for segment in block.segments] for block in blocks(body) if isinstance(block, Line)]


def test_spans_push_later_cells_to_their_columns() -> None:
    rows = "<tr><th rowspan=2>Item<th colspan=2>Value</tr><tr><th>Min<th>Max</tr><tr><td>CL<td><td>8</tr>"
    assert grid(f"<table>{rows}</table>") == [["Item", "Value", "Value"], ["Item", "Min", "Max"], ["CL", "", "8"]]


def test_a_rowspan_of_zero_reaches_to_the_end() -> None:
    rows = "<tr><td rowspan=0>Ω<td>1</tr><tr><td>2</tr><tr><td>3</tr>"
    assert [row[0] for row in grid(f"<table>{rows}</table>")] == ["Ω", "Ω", "Ω"]


def test_heads_are_flagged_and_cells_have_their_place() -> None:
    page = "<table><tr><td>x</table><table><thead><tr><td>Item<td>Max</thead><tr><th>ESR<td>60<tr><td>C0<td>2</table>"
    (table,) = (block for block in blocks(page) if isinstance(block, Table))
    assert [(cell.text, cell.header) for cell in table.cells][:4] == [
        ("Item", True), ("Max", True), ("ESR", True), ("60", False),
    ]  # fmt: skip
    assert table.cells[3].where == Where(table=1, cell="B2")


def test_breaks_paragraphs_and_items_in_a_cell_are_its_lines() -> None:
    cell = "<td>ESR<br>C<sub>0</sub><p>Drive</p><ul><li>a<li>b</ul>"
    assert grid(f"<table><tr>{cell}<td>60<tr><td>y<td>z</table>")[0][0] == "ESR\nC0\nDrive\na\nb"


def test_raised_letters_stay_tellable() -> None:
    cells = "<td>±20 ×10<sup>-6</sup><td>3<sup>rd</sup><td>60 Ω<sup>1</sup><td>ppm/°C<sup>2</sup>"
    assert grid(f"<table><tr>{cells}<tr><td>x</table>")[0] == ["±20 ×10⁻⁶", "3rd", "60 Ω ⁽¹⁾", "ppm/°C²"]


def test_terms_and_descriptions_are_one_line() -> None:
    assert lines("<dl><dt>ESR</dt><dd>60 Ω</dd><dt>CL</dt><dd>8 pF</dd><dd>9 pF</dd></dl>") == [
        ["ESR", "60 Ω"],
        ["CL", "8 pF", "9 pF"],
    ]


def test_headings_paragraphs_and_items_are_lines_in_order() -> None:
    page = blocks("<h1>VX-32</h1><p>by <b>Vexley</b>,<br>seam sealed</p><ul><li>ESR: 60 Ω</ul>")
    assert [(block.text, block.heading) for block in page if isinstance(block, Line)] == [
        ("VX-32", True),
        ("by Vexley,", False),
        ("seam sealed", False),
        ("ESR: 60 Ω", False),
    ]


def test_a_line_has_its_line_in_the_file() -> None:
    document = read(b"<!doctype html>\n<body>\n<p>first</p>\n\n<p>second</p>")
    assert [block.where.line for block in document.blocks] == [3, 5]


def test_scripts_navigation_and_hidden_parts_are_dropped() -> None:
    page = """<style>.m{display:none} @media(max-width:9px){.n{display:none}}</style><nav>Home</nav>
    <script>var esr = 60</script><p class=m>gone</p><p class=n>kept</p>
    <p style="display: none">gone</p><p hidden>gone</p>"""
    assert lines(page) == [["kept"]]


def test_struck_out_values_go_with_a_note() -> None:
    document = read(b"<p>ESR <del>70</del> 60 Ohm</p>")
    assert [block.text for block in document.blocks if isinstance(block, Line)] == ["ESR 60 Ohm"]
    assert [note.message for note in document.notes] == ["Struck-out words left out: '70'."]


def test_a_label_repeated_before_each_value_goes() -> None:
    rows = "".join(f"<tr><td>{label}<td>{label} {value}" for label, value in (("ESR", "60"), ("CL", "8"), ("C0", "2")))
    assert grid(f"<table><tr><th>Item<th>Value{rows}</table>")[1:] == [["ESR", "60"], ["CL", "8"], ["C0", "2"]]


def test_rows_of_plain_elements_are_label_and_value() -> None:
    rows = "".join(
        f"<div><span>{label}</span><span>{value}</span></div>" for label, value in (("ESR", 60), ("CL", 8), ("C0", 2))
    )
    assert lines(f"<section>{rows}</section>") == [["ESR", "60"], ["CL", "8"], ["C0", "2"]]


def test_a_table_that_only_places_others_is_no_table() -> None:
    inner = "<table><tr><td>ESR<td>60<tr><td>CL<td>8</table>"
    page = blocks(f"<table><tr><td><h2>Head</h2></td></tr><tr><td>{inner}</td></tr></table>")
    assert [type(block).__name__ for block in page] == ["Line", "Table"]


def test_preformatted_columns_are_a_table() -> None:
    assert grid("<pre>\nESR       60\nCL        8\nC0        2\n</pre>") == [["ESR", "60"], ["CL", "8"], ["C0", "2"]]


def test_the_page_title_is_kept_apart() -> None:
    document = read(b"<html><head><title>VX-32 | Vexley</title></head><body><p>x</p></body></html>")
    assert [line.text for line in document.page_headers] == ["VX-32 | Vexley"]


@pytest.mark.parametrize(
    "meta", ['<meta charset="Shift_JIS">', '<meta http-equiv=x content="text/html; charset=Shift_JIS">']
)
def test_the_encoding_that_the_page_names_is_taken(meta: str) -> None:
    document = read(f"<html><head>{meta}</head><body><p>負荷容量</p></body></html>".encode("cp932"))
    assert [block.text for block in document.blocks if isinstance(block, Line)] == ["負荷容量"]


def test_a_page_filled_in_by_a_script_is_refused() -> None:
    with pytest.raises(DocumentError, match="^The web page holds no text"):
        read(b"<html><body><div id=app></div><script>start()</script></body></html>")
