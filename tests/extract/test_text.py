"""Plain text, mail text and Markdown."""

from __future__ import annotations

from extract.documents.model import Line, Table
from extract.documents.text import read


def lines_of(content: str) -> list[list[str]]:
    return [
        [segment.text for segment in block.segments]
        for block in read(content.encode()).blocks
        if isinstance(block, Line)
    ]


def tables_of(content: str) -> list[list[list[str]]]:
    return [
        [[cell.text if cell else "" for cell in row] for row in block.grid()]
        for block in read(content.encode()).blocks
        if isinstance(block, Table)
    ]


def test_each_key_and_value_is_a_segment() -> None:
    assert lines_of("P/N=ELQ3-16M0 FREQ=16.000MHZ ESR=60R MAX C0=1.2PF") == [
        ["P/N=ELQ3-16M0", "FREQ=16.000MHZ", "ESR=60R MAX", "C0=1.2PF"]
    ]


def test_pairs_between_semicolons_are_segments() -> None:
    assert lines_of("Load: 8 pF; ESR: 60 Ω max; Drive: 100 µW") == [["Load: 8 pF", "ESR: 60 Ω max", "Drive: 100 µW"]]


def test_a_semicolon_in_prose_parts_nothing() -> None:
    prose = "Available from 4 MHz to 24 MHz; delivery within two days; ask us."
    assert lines_of(prose) == [[prose]]


def test_quoted_lines_keep_their_mark() -> None:
    assert lines_of("Hello\n> we look for   26 MHz, 8 pF") == [["Hello"], ["> we look for", "26 MHz, 8 pF"]]


def test_mail_headers_stay_lines() -> None:
    mail = "From: Ines <i@x.example>\nSubject: Re: RFQ 26 MHz\n\nHello"
    assert lines_of(mail)[:2] == [["From: Ines <i@x.example>"], ["Subject: Re: RFQ 26 MHz"]]


def test_full_width_signs_are_kept_as_printed() -> None:
    assert lines_of("频率：２４．０００ＭＨｚ") == [["频率：２４．０００ＭＨｚ"]]


def test_lines_count_from_one_whatever_their_ends() -> None:
    for end in ("\n", "\r\n", "\r"):
        blocks = read(f"first{end}{end}third".encode()).blocks
        assert [block.where.line for block in blocks] == [1, 3]


def test_label_and_value_in_columns_are_a_table() -> None:
    assert tables_of("Frequenz      13,560 MHz\nESR           max. 80 Ohm\nC0            max. 2,5 pF") == [
        [["Frequenz", "13,560 MHz"], ["ESR", "max. 80 Ohm"], ["C0", "max. 2,5 pF"]]
    ]


def test_a_pipe_table_has_header_breaks_and_its_own_lines() -> None:
    (table,) = read(b"# Head\n\n|Item|Value|\n|---|---|\n|ESR<br>C0|60 Ohm<br>2 pF|\n").blocks[1:]
    assert isinstance(table, Table)
    assert [(cell.text, cell.header, cell.where.line) for cell in table.cells] == [
        ("Item", True, 3),
        ("Value", True, 3),
        ("ESR\nC0", False, 5),
        ("60 Ohm\n2 pF", False, 5),
    ]


def test_a_table_without_outer_pipes_is_read() -> None:
    assert tables_of("Item | Value\n---|---\nESR | 60 Ω\n") == [[["Item", "Value"], ["ESR", "60 Ω"]]]


def test_a_drawn_box_joins_the_lines_of_a_row() -> None:
    box = "+------+-------+\n| ESR  | 60 Ω  |\n| max  |       |\n+------+-------+\n| C0   | 2 pF  |\n+------+-------+\n"
    assert tables_of(box) == [[["ESR\nmax", "60 Ω"], ["C0", "2 pF"]]]


def test_markdown_headings_are_flagged_and_marks_go() -> None:
    blocks = read(b"# A\n\n## **QO327** series\n\nLoad C<sub>0</sub>, 10<sup>-6</sup>, `CL` &amp; **ESR**").blocks
    assert [(block.text, block.heading) for block in blocks if isinstance(block, Line)] == [
        ("A", True),
        ("QO327 series", True),
        ("Load C0, 10⁻⁶, CL & ESR", False),
    ]


def test_struck_out_words_of_markdown_go_with_a_note() -> None:
    document = read("# A\n\n# B\n\nESR ~~70 Ω~~ 60 Ω".encode())
    last = document.blocks[-1]
    assert isinstance(last, Line)
    assert last.text == "ESR 60 Ω"
    assert [(note.message, note.where.line if note.where else 0) for note in document.notes] == [
        ("Struck-out words left out: '70 Ω'.", 5)
    ]


def test_a_pair_of_tildes_in_plain_text_is_a_range() -> None:
    assert lines_of("-20~~+70, -40~~+85") == [["-20~~+70, -40~~+85"]]


def test_an_underlined_line_is_a_heading() -> None:
    blocks = read(b"Ratings\n=======\nESR: 60 Ohm").blocks
    assert [(block.text, block.heading) for block in blocks if isinstance(block, Line)] == [
        ("Ratings", True),
        ("ESR: 60 Ohm", False),
    ]
