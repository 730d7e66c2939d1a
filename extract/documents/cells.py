"""A grid and the words in it -> a table: merged cells, columns and rows that only the words' places show."""

from __future__ import annotations

from bisect import bisect_left
from collections.abc import Callable, Sequence
from dataclasses import replace

from extract.documents.columns import Span, borders_of, columns_of, fine_columns_of, placed
from extract.documents.model import Cell, Table
from extract.documents.piece import Piece
from extract.documents.rows import rows_parted
from extract.documents.ruled import GridCell
from extract.documents.sharing import shared_out
from extract.documents.unfolded import unfolded
from extract.documents.words import Box, Word, confidence_of, split_at_gaps, text_of, union
from extract.model import Where

# Points: a narrower empty column is the space between two lines.
NARROWEST_COLUMN = 10.0
Placer = Callable[[Box], Where]


def table_of(pieces: Sequence[Piece], place: Placer, *, ruled: bool, title: str = "") -> Table:
    """Table of cells that hold words, after columns and rows have been parted where the words show more than lines."""
    pieces, columns = unfolded(*without_empty(rows_parted(spans_parted(columns_parted(lines_parted(pieces))))))
    if not ruled:
        pieces, columns = without_empty(shared_out(pieces))
    box = union(piece.cell.box for piece in pieces)
    cells = tuple(
        Cell(
            text=text_of(piece.words),
            row=piece.cell.row,
            column=piece.cell.column,
            where=place(piece.cell.box),
            row_span=piece.cell.row_span,
            column_span=piece.cell.column_span,
            header=all(word.bold for word in piece.words),
            confidence=confidence_of(piece.words),
        )
        for piece in sorted(pieces, key=lambda piece: (piece.cell.row, piece.cell.column))
        if piece.words
    )
    rows = max(piece.cell.row + piece.cell.row_span for piece in pieces)
    return Table(cells, rows, columns, place(box), title, ruled)


def without_empty(pieces: Sequence[Piece]) -> tuple[list[Piece], int]:
    """Pieces with words, and the number of columns: rows and columns in which no text begins are left out.

    A column of empty cells stays, so that the parts of a table over several pages keep their columns.
    """
    filled = [piece for piece in pieces if piece.words]
    rows = sorted({piece.cell.row for piece in filled})
    wide = [piece.cell for piece in pieces if piece.cell.box[2] - piece.cell.box[0] > NARROWEST_COLUMN]
    columns = sorted({piece.cell.column for piece in filled} | {cell.column for cell in wide if cell.column_span == 1})
    result = []
    for piece in filled:
        cell = piece.cell
        row, column = bisect_left(rows, cell.row), bisect_left(columns, cell.column)
        row_end = bisect_left(rows, cell.row + cell.row_span)
        column_end = bisect_left(columns, cell.column + cell.column_span)
        result.append(Piece(GridCell(row, column, row_end - row, column_end - column, cell.box), piece.words))
    return result, len(columns)


# --- columns


def lines_parted(pieces: Sequence[Piece]) -> list[Piece]:
    """Pieces of a grid of one column with each band of many lines cut where texts across columns begin and end.

    A text that is merged over columns in one line must not merge them in the others.
    """
    if any(piece.cell.column or piece.cell.column_span > 1 for piece in pieces):
        return list(pieces)
    columns = _all_columns([line for piece in pieces for line in piece.lines])
    result: list[Piece] = []
    for piece in sorted(pieces, key=lambda piece: piece.cell.row):
        for box, words in _chunks(piece, columns):
            result.append(Piece(GridCell(len(result), 0, 1, 1, box), words))
    return result


def _chunks(piece: Piece, columns: Sequence[Span]) -> list[tuple[Box, tuple[Word, ...]]]:
    """Parts of a cell, from the top down, in which all lines or none run across columns."""
    lines = piece.lines
    if len(columns) < 2 or len(lines) < 3:
        return [(piece.cell.box, piece.words)]
    chunks: list[list[list[Word]]] = []
    across_before = None
    for line in lines:
        across = any(first != last for first, last, _ in placed(split_at_gaps(line), columns))
        if across != across_before:
            chunks.append([])
        chunks[-1].append(line)
        across_before = across
    left, top, right, bottom = piece.cell.box
    result: list[tuple[Box, tuple[Word, ...]]] = []
    for index, chunk in enumerate(chunks):
        words = tuple(word for line in chunk for word in line)
        lower = bottom
        if index + 1 < len(chunks):
            lower = (max(word.bottom for word in words) + min(word.top for word in chunks[index + 1][0])) / 2
        result.append(((left, top, right, lower), words))
        top = lower
    return result


def columns_parted(pieces: Sequence[Piece]) -> list[Piece]:
    """Pieces with each grid column parted where its texts line up in several."""
    result = list(pieces)
    count = max(piece.cell.column + piece.cell.column_span for piece in pieces)
    for column in range(count - 1, -1, -1):
        own = [piece for piece in result if piece.cell.column == column and piece.cell.column_span == 1]
        columns = _columns_in(own, whole_rows=count == 1)
        if len(columns) > 1:
            result = _column_parted(result, own, column, columns)
    return result


def _columns_in(own: Sequence[Piece], *, whole_rows: bool) -> list[Span]:
    """Columns inside one grid column; texts merged over them, which stand in the middle, do not hide them.

    `whole_rows`: each piece is a row of the table, so that what stands in its lines stands side by side.
    """
    if sum(len(line) > 1 for piece in own for line in piece.lines) < 2:
        return []
    apart = [piece for piece in own if not _in_middle(piece)]
    columns = _columns_of_pieces(apart, whole_rows)
    if len(columns) > 1 and not any(_is_middle_column(piece, columns) for piece in apart):
        return columns
    return _columns_of_pieces(own, whole_rows)


def _columns_of_pieces(pieces: Sequence[Piece], whole_rows: bool) -> list[Span]:
    rows = [[segment for line in piece.lines for segment in split_at_gaps(line)] for piece in pieces]
    return _all_columns([line for piece in pieces for line in piece.lines], rows if whole_rows else None)


def _all_columns(lines: Sequence[list[Word]], rows: Sequence[Sequence[list[Word]]] | None = None) -> list[Span]:
    """Columns by wide gaps, or by narrow ones where these show more."""
    columns, fine = columns_of([split_at_gaps(line) for line in lines], rows), fine_columns_of(lines)
    columns = fine if len(fine) > len(columns) else columns
    if len(columns) < 2:
        return columns
    # Rows of many lines hide two narrow columns that hold one line each: what stands in each column, by itself.
    return [part for column in columns for part in fine_columns_of(_lines_in(column, lines)) or [column]]


def _lines_in(column: Span, lines: Sequence[list[Word]]) -> list[list[Word]]:
    inside = ([word for word in line if column[0] <= (word.x0 + word.x1) / 2 <= column[1]] for line in lines)
    return [line for line in inside if line]


def _column_parted(pieces: Sequence[Piece], own: Sequence[Piece], column: int, columns: Sequence[Span]) -> list[Piece]:
    added = len(columns) - 1
    result: list[Piece] = []
    for piece in pieces:
        cell = piece.cell
        if any(piece is one for one in own):
            borders = borders_of(columns, cell.box[0], cell.box[2])
            result += _across(piece, columns, borders)
        elif cell.column > column:
            result.append(replace(piece, cell=replace(cell, column=cell.column + added)))
        elif cell.column + cell.column_span > column:
            result.append(replace(piece, cell=replace(cell, column_span=cell.column_span + added)))
        else:
            result.append(piece)
    return result


def _across(piece: Piece, columns: Sequence[Span], borders: Sequence[float]) -> list[Piece]:
    """One cell's words over the new columns."""
    groups: list[tuple[int, int, list[Word]]] = []
    if _is_centred(piece, columns):
        return [replace(piece, cell=replace(piece.cell, column_span=len(columns)))]
    for line in piece.lines:
        for first, last, words in placed(split_at_gaps(line), columns):
            groups = _merged_group(groups, (first, last, list(words)))
    sideways = [word for word in piece.words if word.angle]
    if sideways:
        groups = _merged_group(groups, (0, len(columns) - 1, sideways))
    cell, made = piece.cell, []
    free = set(range(len(columns)))
    for first, last, words in groups:
        box = (borders[first], cell.box[1], borders[last + 1], cell.box[3])
        made.append(
            Piece(replace(cell, column=cell.column + first, column_span=last - first + 1, box=box), tuple(words))
        )
        free -= set(range(first, last + 1))
    for index in free:
        box = (borders[index], cell.box[1], borders[index + 1], cell.box[3])
        made.append(Piece(replace(cell, column=cell.column + index, column_span=1, box=box), ()))
    return made


def _is_centred(piece: Piece, columns: Sequence[Span]) -> bool:
    """Tell whether the cell's one text stands in its middle, where none of the columns has its own."""
    return _in_middle(piece) and not _is_middle_column(piece, columns)


def _in_middle(piece: Piece) -> bool:
    lines = piece.lines
    left, _, right, _ = piece.cell.box
    return bool(lines) and all(
        len(split_at_gaps(line)) == 1 and abs(line[0].x0 + line[-1].x1 - left - right) < 0.06 * (right - left)
        for line in lines
    )


def _is_middle_column(piece: Piece, columns: Sequence[Span]) -> bool:
    left, _, right, _ = piece.cell.box
    return any(abs(column[0] + column[1] - left - right) < 0.2 * (right - left) for column in columns)


def _merged_group(
    groups: list[tuple[int, int, list[Word]]], new: tuple[int, int, list[Word]]
) -> list[tuple[int, int, list[Word]]]:
    """Groups with the new one joined to all that share a column with it."""
    first, last, words = new
    apart = []
    for group in groups:
        if group[0] <= last and first <= group[1]:
            first, last, words = min(first, group[0]), max(last, group[1]), group[2] + words
        else:
            apart.append(group)
    return [*apart, (first, last, words)]


def spans_parted(pieces: Sequence[Piece]) -> list[Piece]:
    """Pieces with each merged cell taken apart whose texts stand over the columns below it."""
    sides = {
        piece.cell.column: (piece.cell.box[0], piece.cell.box[2]) for piece in pieces if piece.cell.column_span == 1
    }
    result: list[Piece] = []
    for piece in pieces:
        cell = piece.cell
        if cell.column_span == 1:
            result.append(piece)
            continue
        covered = range(cell.column, cell.column + cell.column_span)
        columns = [sides[column] for column in covered if column in sides]
        if len(columns) == cell.column_span and any(len(split_at_gaps(line)) > 1 for line in piece.lines):
            parted = _across(piece, columns, borders_of(columns, cell.box[0], cell.box[2]))
            filled = [one for one in parted if one.words]
            if len(filled) >= 2 and all(one.cell.column_span == 1 for one in filled):
                result += parted
                continue
        result.append(piece)
    return result
