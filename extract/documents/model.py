"""What every file format is turned into: tables of cells and lines of segments, in reading order, with their places.

The readers end here and the layers above start here, so a new format needs no change above, a new wording none below.
"""

from __future__ import annotations

from abc import abstractmethod
from collections.abc import Sequence
from dataclasses import dataclass, field

from extract.model import Kind, Note, Where


class DocumentError(Exception):
    """A file that cannot be read at all; the message says what is wrong and what to do, without the file's name."""


@dataclass(frozen=True, slots=True)
class Cell:
    """One cell as printed. `row` and `column` count from 0; a merged cell stands once, with its spans.

    `confidence` is 1.0 for text that the file holds as text, and the recogniser's own (0 to 1) for a picture.
    """

    text: str
    row: int
    column: int
    where: Where
    row_span: int = 1
    column_span: int = 1
    header: bool = False
    confidence: float = 1.0


class GridCells(Sequence[Cell]):
    """Cells that are kept as rows and know their own grid."""

    @abstractmethod
    def grid(self) -> list[Sequence[Cell | None]]:
        """Rows of cells, a merged cell standing in each place that it covers."""


@dataclass(frozen=True, slots=True)
class Table:
    """A grid, ruled or by position. Cells in reading order; empty cells may be left out."""

    cells: Sequence[Cell]
    rows: int
    columns: int
    where: Where
    title: str = ""
    ruled: bool = True

    def grid(self) -> list[Sequence[Cell | None]]:
        """Rows of cells, a merged cell standing in each place that it covers."""
        if isinstance(self.cells, GridCells):
            return self.cells.grid()
        grid: list[list[Cell | None]] = [[None] * self.columns for _ in range(self.rows)]
        for cell in self.cells:
            if cell.row_span == cell.column_span == 1:
                grid[cell.row][cell.column] = cell
                continue
            for row in range(cell.row, min(cell.row + cell.row_span, self.rows)):
                for column in range(cell.column, min(cell.column + cell.column_span, self.columns)):
                    grid[row][column] = cell
        return list(grid)


@dataclass(frozen=True, slots=True)
class Segment:
    """A run of words that stands together; wide gaps, tabs and leader dots part one from the next."""

    text: str
    where: Where
    confidence: float = 1.0


@dataclass(frozen=True, slots=True)
class Line:
    """One line outside tables (a heading, prose, a footnote, a label and its value), as segments from left to right."""

    segments: tuple[Segment, ...]
    where: Where
    heading: bool = False

    @property
    def text(self) -> str:
        return "  ".join(segment.text for segment in self.segments)


@dataclass(frozen=True, slots=True)
class Document:
    """A file's content in reading order.

    `page_headers` are lines of page headers and footers, kept apart: a maker often stands only there.
    """

    kind: Kind
    blocks: tuple[Table | Line, ...]
    scan: bool = False
    page_headers: tuple[Line, ...] = ()
    notes: tuple[Note, ...] = field(default=())
