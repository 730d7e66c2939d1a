"""A value in the middle of several columns of a table without lines, drawn by hand in points from the top left."""

from __future__ import annotations

from extract.documents.layout import arrange
from extract.documents.model import Table
from extract.documents.words import Word
from extract.model import Where

SIZE = 9.0
LEFTS, RIGHT = (40.0, 180.0, 300.0, 420.0), 540.0


def words(line: str, x: float, y: float) -> list[Word]:
    made = []
    for text in line.split():
        made.append(Word(text, x, y, x + len(text) * SIZE / 2, y + SIZE, SIZE))
        x += (len(text) + 0.6) * SIZE / 2
    return made


def middled(line: str, left: float, right: float, y: float) -> list[Word]:
    made = words(line, 0.0, y)
    return words(line, (left + right - made[-1].x1) / 2, y)


def page(*merged: tuple[str, str, float, float]) -> list[list[str | None]]:
    """The grid of four rows of three models, and below them rows whose one value stands between two edges."""
    rows = [
        ("Model", "QRB12", "QRB15", "QRB32"),
        ("Size", "1.2 x 1.0 mm", "1.6 x 1.0 mm", "3.2 x 1.5 mm"),
        ("ESR max", "90 kΩ", "80 kΩ", "70 kΩ"),
        ("Motional capacitance", "6.0 fF", "5.1 fF", "3.4 fF"),
    ]
    made = [
        word
        for y, row in enumerate(rows)
        for x, text in zip(LEFTS, row, strict=True)
        for word in words(text, x, 100 + 16 * y)
    ]
    for y, (label, value, left, right) in enumerate(merged, start=len(rows)):
        made += words(label, LEFTS[0], 100 + 16 * y) + middled(value, left, right, 100 + 16 * y)
    blocks = arrange(made, [], lambda box: Where(page=1, box=box), width=600.0, height=800.0)
    (table,) = (block for block in blocks if isinstance(block, Table))
    return [[cell.text if cell is not None else None for cell in row] for row in table.grid()]


def test_a_value_in_the_middle_of_all_models_is_that_of_each() -> None:
    assert page(("Frequency", "32.768 kHz", LEFTS[1], RIGHT))[-1] == ["Frequency", *["32.768 kHz"] * 3]


def test_a_value_in_the_middle_of_two_models_is_no_third_one_s() -> None:
    grid = page(("Ageing", "±3 ppm", LEFTS[1], LEFTS[3]), ("Drive level", "1 µW", LEFTS[1], RIGHT))
    assert grid[-2] == ["Ageing", "±3 ppm", "±3 ppm", None]


def test_a_value_at_the_edge_of_its_column_is_of_that_model_alone() -> None:
    text = "AEC-Q200"
    grid = page(("Grade", text, LEFTS[2], LEFTS[2] + len(text) * SIZE / 2))
    assert grid[-1] == ["Grade", None, text, None]
