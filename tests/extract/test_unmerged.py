from __future__ import annotations

from dataclasses import replace

from building import table

from extract.documents.model import Table
from extract.unmerged import unmerged

STACK = {(0, 0): (2, 1)}


def texts(found: Table) -> list[list[str | None]]:
    return [[cell.text if cell else None for cell in row] for row in found.grid()]


def faint(found: Table) -> Table:
    """The same table as read from a picture."""
    return replace(found, cells=tuple(replace(cell, confidence=0.9) for cell in found.cells))


def test_a_label_a_line_over_as_many_rows_is_a_label_a_row() -> None:
    made = table(("ESR\nShunt capacitance", "60 Ω"), (None, "3 pF"), spans=STACK)
    assert texts(unmerged(made)) == [["ESR", "60 Ω"], ["Shunt capacitance", "3 pF"]]


def test_a_label_of_two_lines_over_two_bands_stays_one() -> None:
    made = table(("Equivalent series\nresistance", "60 Ω"), (None, "50 Ω"), spans=STACK)
    assert unmerged(made) == made


def test_values_of_a_picture_stacked_beside_their_labels_are_cut() -> None:
    made = table(("Drive level", "100 µW max\n±2 ppm"), ("Ageing", None), spans={(0, 1): (2, 1)})
    assert texts(unmerged(faint(made))) == [["Drive level", "100 µW max"], ["Ageing", "±2 ppm"]]
    assert unmerged(made) == made
