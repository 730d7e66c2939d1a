"""Short ways to make documents and readings for the tests of the reader."""

from __future__ import annotations

from extract.candidates import Candidate
from extract.documents.model import Cell, Document, Line, Segment, Table
from extract.model import Part, Reading, SpecSheet, When, Where


def table(
    *rows: tuple[str | None, ...], title: str = "", spans: dict[tuple[int, int], tuple[int, int]] | None = None
) -> Table:
    """A table of texts; `spans` gives rows and columns that a cell at (row, column) covers."""
    cells = []
    for row, texts in enumerate(rows):
        for column, text in enumerate(texts):
            if text is not None:
                down, across = (spans or {}).get((row, column), (1, 1))
                cells.append(Cell(text, row, column, Where(table=1, cell=f"{row},{column}"), down, across))
    return Table(tuple(cells), len(rows), max(map(len, rows)), Where(table=1), title)


def line(*segments: str, number: int = 1, heading: bool = False) -> Line:
    """One line outside tables."""
    where = Where(line=number)
    return Line(tuple(Segment(text, where) for text in segments), where, heading)


def document(*blocks: Table | Line, headers: tuple[Line, ...] = ()) -> Document:
    """A text document of these blocks."""
    return Document("text", blocks, page_headers=headers)


def candidate(
    field: str, low: float | None = None, typ: float | None = None, high: float | None = None, **more: object
) -> Candidate:
    """A candidate from a table, at line 1 unless said otherwise."""
    known: dict[str, object] = {
        "options": (), "when": When(), "bare": False, "raw": f"{field} {low} {typ} {high}", "where": Where(line=1),
    }  # fmt: skip
    return Candidate(field, low, typ, high, **(known | more))  # type: ignore[arg-type]


def reading(field: str, low: float | None = None, typ: float | None = None, high: float | None = None) -> Reading:
    """A stated reading; bounds out of order carry a check already, as the model asks."""
    stated = [number for number in (low, typ, high) if number is not None]
    check = None if stated == sorted(stated) else "out of order"
    return Reading(field=field, min=low, typ=typ, max=high, raw=field, where=Where(line=1), check=check)  # type: ignore[arg-type]


def bounds(part: Part, field: str) -> list[tuple[float | None, float | None, float | None]]:
    """Min, typ and max of every reading of a field."""
    return [(each.min, each.typ, each.max) for each in part.readings if each.field == field]


def only_part(sheet: SpecSheet) -> Part:
    """The one part of a sheet."""
    (part,) = sheet.parts
    return part
