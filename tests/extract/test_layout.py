"""Words and drawn lines -> tables and lines. The arrangements are drawn by hand here, in points from the top left."""

import pytest

from extract.documents.layout import arrange
from extract.documents.model import Line, Table
from extract.documents.words import Ruling, Word, turned, turned_back
from extract.model import Where

SIZE = 9.0
# Helvetica's mean advance is about half its size; the tests need no more.
ADVANCE = 0.5 * SIZE


def word(text, x, y, *, size=SIZE, bold=False, angle=0):
    """A word whose top left corner is at x, y."""
    return Word(text, x, y, x + len(text) * size * 0.5, y + size, size, angle=angle, bold=bold)


def text(line, x, y, **looks):
    """Words of a text at single spaces."""
    words = []
    for part in line.split(" "):
        words.append(word(part, x, y, **looks))
        x += (len(part) + 0.6) * looks.get("size", SIZE) * 0.5
    return words


def rows(table, xs, y=100.0, pitch=16.0):
    """Words of a table, a list of texts for each row; empty texts are left out."""
    return [
        part
        for index, row in enumerate(table)
        for x, cell in zip(xs, row, strict=True)
        if cell
        for part in text(cell, x, y + index * pitch)
    ]


def grid(xs, ys):
    """All lines of a fully ruled table."""
    level = [Ruling(xs[0], y, xs[-1], y) for y in ys]
    return level + [Ruling(x, ys[0], x, ys[-1]) for x in xs]


def blocks(words, rulings=()):
    def place(box):
        return Where(page=1, box=box)

    return arrange(words, list(rulings), place, width=600, height=800)


def texts(table):
    """The table as rows of texts; a merged cell stands in each place that it covers, None where nothing is."""
    return [[cell and cell.text for cell in row] for row in table.grid()]


def only_table(found):
    tables = [block for block in found if isinstance(block, Table)]
    assert len(tables) == 1
    return tables[0]


# --- ruled tables


def test_a_ruled_table_gives_its_cells():
    words = rows([["Parameter", "Value"], ["ESR", "60 Ω max."]], [54, 204], y=103, pitch=20)
    table = only_table(blocks(words, grid([50, 200, 350], [100, 120, 140])))
    assert texts(table) == [["Parameter", "Value"], ["ESR", "60 Ω max."]]
    assert table.ruled
    assert table.cells[3].where == Where(page=1, box=(200, 120, 350, 140))


def test_a_merged_cell_stands_once_with_its_spans():
    lines = [
        *(Ruling(50, y, 350, y) for y in (100, 120, 160)),
        Ruling(200, 140, 350, 140),
        *(Ruling(x, 100, x, 160) for x in (50, 350)),
        Ruling(200, 120, 200, 160),
    ]
    words = [*text("Specifications", 160, 105), *text("ESR", 54, 135), *text("60", 210, 125), *text("40", 210, 145)]
    table = only_table(blocks(words, lines))
    spans = {cell.text: (cell.row, cell.column, cell.row_span, cell.column_span) for cell in table.cells}
    assert spans == {"Specifications": (0, 0, 1, 2), "ESR": (1, 0, 2, 1), "60": (1, 1, 1, 1), "40": (2, 1, 1, 1)}


def test_two_tables_side_by_side_stay_two():
    words = rows(
        [["8 - 12 MHz", "90", "8 - 12 MHz", "70"], ["12 - 20 MHz", "60", "12 - 20 MHz", "50"]], [54, 154, 304, 404]
    )
    found = blocks(words, grid([50, 150, 200], [96, 112, 130]) + grid([300, 400, 450], [96, 112, 130]))
    assert [texts(table) for table in found] == [
        [["8 - 12 MHz", "90"], ["12 - 20 MHz", "60"]],
        [["8 - 12 MHz", "70"], ["12 - 20 MHz", "50"]],
    ]


def test_a_table_inside_a_cell_is_a_table_titled_by_its_row():
    outer = grid([50, 200, 400], [100, 120, 180])
    inner = grid([210, 300, 390], [125, 145, 165])
    words = [
        *rows([["Load", "8 pF"]], [54, 204], y=105),
        *text("ESR", 54, 145),
        *rows([["8 - 12 MHz", "90 Ω"], ["12 - 20 MHz", "60 Ω"]], [212, 304], y=130, pitch=20),
    ]
    first, second = blocks(words, outer + inner)
    assert texts(first) == [["Load", "8 pF"], ["ESR", None]]
    assert texts(second) == [["8 - 12 MHz", "90 Ω"], ["12 - 20 MHz", "60 Ω"]]
    assert second.title == "ESR"


def test_lines_of_values_in_several_cells_are_rows_of_their_own():
    words = [
        *text("ESR", 54, 120),
        *rows([["8 - 12 MHz", "90"], ["12 - 20 MHz", "60"], ["20 - 40 MHz", "40"]], [154, 304], y=105, pitch=15),
        *text("Load", 54, 155),
        *text("any", 154, 155),
        *text("8", 304, 155),
    ]
    table = only_table(blocks(words, grid([50, 150, 300, 350], [100, 150, 170])))
    assert texts(table) == [
        ["ESR", "8 - 12 MHz", "90"],
        ["ESR", "12 - 20 MHz", "60"],
        ["ESR", "20 - 40 MHz", "40"],
        ["Load", "any", "8"],
    ]


def test_a_text_that_runs_over_two_lines_stays_one_cell():
    words = [
        *text("Frequency stability over", 54, 103),
        *text("operating temperature", 54, 114),
        *text("±20 ppm referred", 204, 103),
        *text("to 25 °C", 204, 114),
        *rows([["Load", "8 pF"]], [54, 204], y=133),
    ]
    table = only_table(blocks(words, grid([50, 200, 350], [100, 130, 150])))
    assert texts(table)[0] == ["Frequency stability over\noperating temperature", "±20 ppm referred\nto 25 °C"]


def test_columns_inside_one_ruled_column_are_parted():
    body = [["ESR", "", "", "60"], ["Tolerance", "-10", "", "+10"], ["Load", "", "8", ""], ["C0", "0.6", "0.8", "1.0"]]
    words = rows([["Item", "MIN", "TYP", "MAX"], *body], [54, 210, 260, 310], y=103, pitch=20)
    table = only_table(blocks(words, grid([50, 200, 350], [100, 120, 140, 160, 180, 200])))
    assert texts(table) == [["Item", "MIN", "TYP", "MAX"], *[[cell or None for cell in row] for row in body]]


def test_turned_header_cells_belong_to_the_upright_table():
    upright = rows([["A1", "8", "90"], ["A2", "12", "60"]], [54, 154, 204], y=205, pitch=20)
    sideways = [
        Word("Load", 160, 160, 169, 178, SIZE, angle=90),
        Word("/ pF", 160, 130, 169, 158, SIZE, angle=90),
        Word("ESR", 210, 160, 219, 178, SIZE, angle=90),
    ]
    lines = grid([50, 150, 200, 250], [100, 200, 220, 240])
    table = only_table(blocks([*text("Type", 54, 180), *upright, *sideways], lines))
    assert texts(table) == [["Type", "Load / pF", "ESR"], ["A1", "8", "90"], ["A2", "12", "60"]]


# --- tables ruled in part or not at all


def test_level_lines_alone_make_rows_and_words_make_columns():
    body = [["Load capacitance", "8 pF"], ["ESR", "60 Ω max."], ["Drive level", "100 µW"], ["Ageing", "±3 ppm"]]
    lines = [Ruling(50, y, 350, y) for y in (97, 113, 129, 145, 161)]
    table = only_table(blocks(rows(body, [54, 204]), lines))
    assert texts(table) == body


def test_a_table_with_lines_only_round_head_and_foot_keeps_its_rows():
    head = ["Parameter", "Min", "Typ", "Max", "Unit"]
    body = [
        ["Load capacitance", "", "8", "", "pF"],
        ["ESR", "", "", "60", "Ω"],
        ["Drive level", "", "10", "100", "µW"],
        ["Tolerance", "-10", "", "10", "ppm"],
    ]
    words = rows([head, *body], [54, 204, 254, 304, 354])
    lines = [Ruling(50, y, 400, y) for y in (97, 113, 177)]
    table = only_table(blocks(words, lines))
    assert texts(table) == [head, *[[cell or None for cell in row] for row in body]]


def test_a_head_over_a_short_line_spans_the_columns_under_the_line():
    body = [["C0", "0.6", "0.8", "1.0", "pF"], ["ESR", "", "30", "60", "Ω"], ["Drive", "1", "10", "100", "µW"]]
    words = [
        *text("Specification", 240, 100),
        *rows([["Item", "", "", "", "Unit"]], [54, 204, 254, 304, 354], y=107),
        *rows([["", "Min", "Typ", "Max", ""], *body], [54, 204, 254, 304, 354], y=114),
    ]
    lines = [*(Ruling(50, y, 400, y) for y in (97, 126, 176)), Ruling(200, 111, 345, 111)]
    table = only_table(blocks(words, lines))
    head = next(cell for cell in table.cells if cell.text == "Specification")
    assert (head.row, head.column, head.column_span) == (0, 1, 3)
    assert texts(table)[1:] == [
        ["Item", "Min", "Typ", "Max", "Unit"],
        *[[cell or None for cell in row] for row in body],
    ]


def test_words_in_columns_are_a_table_without_any_line():
    head = ["Parameter", "Min", "Typ", "Max", "Unit"]
    body = [["Load capacitance", "", "8", "", "pF"], ["ESR", "", "", "60", "Ω"], ["C0", "0.6", "0.8", "1.0", "pF"]]
    table = only_table(blocks(rows([head, *body], [54, 204, 254, 304, 354])))
    assert texts(table) == [head, *[[cell or None for cell in row] for row in body]]
    assert not table.ruled


def test_a_text_over_several_columns_spans_them():
    head = ["Parameter", "Min", "Typ", "Max", "Unit"]
    body = [["C0", "0.6", "0.8", "1.0", "pF"], ["ESR", "", "30", "60", "Ω"], ["Drive", "1", "10", "100", "µW"]]
    words = [
        *rows([head, *body], [54, 204, 254, 304, 354]),
        *text("Mode", 54, 164),
        *text("fundamental or third overtone", 204, 164),
    ]
    table = only_table(blocks(words))
    merged = next(cell for cell in table.cells if cell.text.startswith("fundamental"))
    assert (merged.column, merged.column_span) == (1, 3)


def test_the_column_that_goes_on_below_the_others_belongs_to_the_table():
    body = [
        ["Tolerance", "Stability"],
        ["1 = ±10 ppm", "A = ±15 ppm"],
        ["2 = ±20 ppm", "B = ±20 ppm"],
        ["", "C = ±30 ppm"],
    ]
    table = only_table(blocks(rows(body, [54, 204])))
    assert texts(table) == [[cell or None for cell in row] for row in body]


def test_a_list_set_in_two_columns_under_one_head_is_one_list():
    head = ["MHz", "Part", "MHz", "Part"]
    body = [["8.000", "QX-1", "16.000", "QX-3"], ["12.000", "QX-2", "20.000", "QX-4"]]
    xs, ys = [50, 110, 180, 240, 310], [97, 113, 129, 145]
    table = only_table(blocks(rows([head, *body], [54, 114, 184, 244]), grid(xs, ys)))
    assert texts(table) == [
        ["MHz", "Part"],
        ["8.000", "QX-1"],
        ["12.000", "QX-2"],
        ["16.000", "QX-3"],
        ["20.000", "QX-4"],
    ]
    assert table.cells[-1].where.box == (240, 129, 310, 145)


def test_minimum_and_maximum_twice_beside_one_label_column_stay_columns():
    body = [["Item", "Min", "Max", "Min", "Max"], ["Load", "8", "12", "6", "9"], ["C0", "1", "2", "1", "3"]]
    xs, ys = [50, 110, 180, 240, 310, 370], [97, 113, 129, 145]
    assert texts(only_table(blocks(rows(body, [54, 114, 184, 244, 314]), grid(xs, ys)))) == body


# --- lines and reading order


@pytest.mark.parametrize("dots", ["........", "…………", "________"])
def test_leader_dots_part_label_and_value(dots):
    (line,) = blocks([*text("ESR", 50, 100), word(dots, 70, 100), *text("60 Ω max", 110, 100)])
    assert [segment.text for segment in line.segments] == ["ESR", "60 Ω max"]


def test_dots_of_a_range_are_no_leader():
    (line,) = blocks(text("-30 ... +85 °C", 50, 100))
    assert line.text == "-30 ... +85 °C"


def test_leader_dots_set_singly_part_label_and_value():
    (line,) = blocks([*text("ESR . . . . . .", 50, 100), *text("60 Ω max", 110, 100)])
    assert [segment.text for segment in line.segments] == ["ESR", "60 Ω max"]


def test_a_wide_gap_parts_segments_and_a_space_does_not():
    (line,) = blocks([*text("Drive level", 50, 100), *text("100 µW", 150, 100)])
    assert [segment.text for segment in line.segments] == ["Drive level", "100 µW"]


def test_columns_of_text_are_read_one_after_the_other():
    left = [part for index in range(5) for part in text(f"left line {index} of the text", 50, 100 + 12 * index)]
    right = [part for index in range(4) for part in text(f"right line {index} of it", 320, 105 + 13.5 * index)]
    order = [line.text.split()[0] for line in blocks(left + right)]
    assert order == ["left"] * 5 + ["right"] * 4


def test_the_scale_of_a_graph_beside_a_table_stays_out_of_its_rows():
    body = [["Load", "8 pF"], ["ESR", "60 Ω max."], ["Drive level", "100 µW"], ["Ageing", "±3 ppm"]]
    scale = [word(label, 320, 95 + 11 * index) for index, label in enumerate(("+20", "+10", "0", "-10", "-20"))]
    found = blocks(rows(body, [54, 204]) + scale, grid([50, 200, 290], [97, 113, 129, 145, 161]))
    assert texts(only_table(found)) == body
    assert [block.text for block in found if isinstance(block, Line)] == ["+20", "+10", "0", "-10", "-20"]


def test_a_frame_with_a_title_is_no_table():
    frame = grid([40, 560], [90, 600])
    found = blocks([*text("Quartz crystal unit", 60, 100, bold=True), *text("Made to order", 60, 130)], frame)
    assert [type(block) for block in found] == [Line, Line]


def test_the_heading_right_above_a_table_is_its_title():
    words = [
        *text("Series resistance", 54, 80, bold=True),
        *rows([["Band", "ESR"], ["8 - 12", "90"]], [54, 204], y=103, pitch=20),
    ]
    heading, table = blocks(words, grid([50, 200, 350], [100, 120, 140]))
    assert heading.heading
    assert table.title == "Series resistance"


def test_a_bullet_belongs_to_its_text():
    (line,) = blocks([word("•", 50, 100), *text("Load 8 pF", 64, 100)])
    assert line.text == "• Load 8 pF"


def test_the_least_certain_word_gives_a_cells_confidence():
    sure, unsure = (
        Word("60", 204, 123, 213, 132, SIZE, confidence=0.98),
        Word("Ω", 216, 123, 221, 132, SIZE, confidence=0.6),
    )
    words = [*rows([["Item", "Max"]], [54, 204], y=103), *text("ESR", 54, 123), sure, unsure]
    table = only_table(blocks(words, grid([50, 200, 350], [100, 120, 140])))
    assert {cell.text: cell.confidence for cell in table.cells}["60 Ω"] == 0.6


# --- sideways


@pytest.mark.parametrize("angle", [90, 270, 180])
def test_turning_back_undoes_turning(angle):
    box = (30.0, 40.0, 90.0, 52.0)
    assert turned_back(turned(box, angle, 600, 800), angle, 600, 800) == box


@pytest.mark.parametrize("angle", [90, 270])
def test_a_table_on_its_side_reads_as_if_upright(angle):
    body = [["Type", "Load", "ESR"], ["A1", "8 pF", "90 Ω"], ["A2", "12 pF", "60 Ω"]]
    upright = rows(body, [54, 154, 254], y=105, pitch=20)
    lines = grid([50, 150, 250, 350], [100, 120, 140, 160])
    # The upright page is 800 wide; laid on its side it fills the page of 600 x 800.
    words = [Word(part.text, *turned_back(part.box, angle, 600, 800), SIZE, angle=angle) for part in upright]
    rulings = [Ruling(*turned_back(line, angle, 600, 800)) for line in lines]
    table = only_table(blocks(words, rulings))
    assert texts(table) == body
    assert table.cells[0].where.box == turned_back((50, 100, 150, 120), angle, 600, 800)


def test_a_drawing_further_down_makes_no_columns_of_labels_and_values():
    pairs = [
        ("Tolerance", "20 ppm"),
        ("Stability", "50 ppm"),
        ("Load", "16 pF"),
        ("Ageing", "3 ppm"),
        ("Drive", "9 uW"),
    ]
    drawing = [*text("6.0 mm", 55, 305), *text("3.5 mm", 55, 325)]
    found = blocks([*rows(pairs, (50, 260)), *drawing, *text("Pads 1 and 3", 260, 310)], grid((50, 120), (300, 340)))
    assert [tuple(row) for row in texts(next(block for block in found if isinstance(block, Table)))] == pairs


def test_an_eastern_heading_wrapped_in_most_cells_is_one_row():
    xs, ys = (40, 78, 116), (90, 112, 130)
    heads = [*text("周波数許容", 46, 91, size=6), *text("偏差", 46, 99, size=6), *text("負荷静電容", 84, 91, size=6)]
    words = [*heads, *text("量値", 84, 99, size=6), *text("20", 46, 116), *text("7", 84, 116)]
    wide = [
        Word(w.text, w.x0, w.top, w.x0 + 6 * len(w.text), w.bottom, w.size) if not w.text.isascii() else w
        for w in words
    ]
    table = only_table(blocks(wide, grid(xs, ys)))
    assert table.rows == 2


def test_a_wrapped_number_is_a_column_beside_values_set_between_its_lines():
    words, rulings = [], [Ruling(40, 90, 400, 90)]
    for index, (number, end, value) in enumerate([("QRB16-", "A", "16"), ("QRB20-", "B", "20"), ("QRB24-", "C", "24")]):
        top = 95.0 + 40 * index
        words += (
            text(number, 45, top) + text(end, 45, top + 20) + text(value, 200, top + 10) + text("60", 300, top + 10)
        )
        rulings.append(Ruling(40, top + 35, 400, top + 35))
    assert texts(only_table(blocks(words, rulings)))[0] == ["QRB16-\nA", "16", "60"]


def test_a_unit_that_had_no_room_behind_its_number_begins_no_row():
    words = text("Frequency", 55, 110)
    for x, low in ((155, "24.0-60.0"), (355, "8.0-60.0")):
        words += text(low, x, 104) + text("MHz", x, 116)
    words += text("16.0-60.0 MHz", 255, 110)
    rulings = grid([50, 150, 250, 350, 450], [100, 130])
    assert texts(only_table(blocks(words, rulings))) == [
        ["Frequency", "24.0-60.0\nMHz", "16.0-60.0 MHz", "8.0-60.0\nMHz"]
    ]
