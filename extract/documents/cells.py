"""A grid and the words in it -> a table: merged cells, columns and rows that only the words' places show."""

from __future__ import annotations

import re
from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace

from extract.documents.columns import Span, borders_of, columns_of, placed
from extract.documents.model import Cell, Table
from extract.documents.ruled import GridCell
from extract.documents.words import Box, Word, confidence_of, in_lines, split_at_gaps, text_of, union
from extract.model import Where

Placer = Callable[[Box], Where]


@dataclass(frozen=True, slots=True)
class Piece:
    """A cell in the making with its words."""

    cell: GridCell
    words: tuple[Word, ...]

    @property
    def lines(self) -> list[list[Word]]:
        return in_lines([word for word in self.words if not word.angle])


def table_of(pieces: Sequence[Piece], place: Placer, *, ruled: bool, title: str = "") -> Table:
    """Table of cells that hold words, after columns and rows have been parted where the words show more than lines."""
    pieces = without_empty(rows_parted(spans_parted(columns_parted(lines_parted(pieces)))))
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
    columns = max(piece.cell.column + piece.cell.column_span for piece in pieces)
    return Table(cells, rows, columns, place(box), title, ruled)


def without_empty(pieces: Sequence[Piece]) -> list[Piece]:
    """Pieces with words, the rows and columns in which no text begins left out."""
    filled = [piece for piece in pieces if piece.words]
    rows = sorted({piece.cell.row for piece in filled})
    columns = sorted({piece.cell.column for piece in filled})
    result = []
    for piece in filled:
        cell = piece.cell
        covered_rows = [row for row in rows if cell.row <= row < cell.row + cell.row_span]
        covered = [column for column in columns if cell.column <= column < cell.column + cell.column_span]
        kept = GridCell(rows.index(cell.row), columns.index(cell.column), len(covered_rows), len(covered), cell.box)
        result.append(replace(piece, cell=kept))
    return result


# --- columns


def lines_parted(pieces: Sequence[Piece]) -> list[Piece]:
    """Pieces of a grid of one column with each band of many lines cut where texts across columns begin and end.

    A text that is merged over columns in one line must not merge them in the others.
    """
    if any(piece.cell.column or piece.cell.column_span > 1 for piece in pieces):
        return list(pieces)
    columns = columns_of([split_at_gaps(line) for piece in pieces for line in piece.lines])
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
        columns = _columns_in(own)
        if len(columns) > 1:
            result = _column_parted(result, own, column, columns)
    return result


def _columns_in(own: Sequence[Piece]) -> list[Span]:
    """Columns inside one grid column; texts merged over them, which stand in the middle, do not hide them."""
    apart = [piece for piece in own if not _in_middle(piece)]
    columns = columns_of([split_at_gaps(line) for piece in apart for line in piece.lines])
    if len(columns) > 1 and not any(_is_middle_column(piece, columns) for piece in apart):
        return columns
    return columns_of([split_at_gaps(line) for piece in own for line in piece.lines])


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
        covered = range(cell.column, cell.column + cell.column_span)
        columns = [sides[column] for column in covered if column in sides]
        lines = [split_at_gaps(line) for line in piece.lines]
        if len(columns) == cell.column_span > 1 and any(len(line) > 1 for line in lines):
            parted = _across(piece, columns, borders_of(columns, cell.box[0], cell.box[2]))
            filled = [one for one in parted if one.words]
            if len(filled) >= 2 and all(one.cell.column_span == 1 for one in filled):
                result += parted
                continue
        result.append(piece)
    return result


# --- rows

_VALUE = re.compile(r"^[\s<>≤≥≦≧~±+\-−–(\[]*\d|^[-–—−]+$")


def rows_parted(pieces: Sequence[Piece]) -> list[Piece]:
    """Pieces with each grid row parted where several cells hold values line by line."""
    result = list(pieces)
    count = max(piece.cell.row + piece.cell.row_span for piece in pieces)
    for row in range(count - 1, -1, -1):
        own = [piece for piece in result if piece.cell.row == row and piece.cell.row_span == 1]
        levels = _levels(own)
        if len(levels) > 1:
            result = _row_parted(result, own, row, levels)
    return result


def _levels(own: Sequence[Piece]) -> list[float]:
    """Heights of the text lines that are rows of their own; none where the row is only one."""
    valued = [piece for piece in own if len(piece.lines) > 1 and _is_stack_of_values(piece)]
    if len(valued) >= 2:
        tallest = max(valued, key=lambda piece: len(piece.lines))
        levels = [_level(line) for line in tallest.lines]
        if sum(_stands_on(piece, levels) for piece in valued) >= 2:
            return _with_labels_outside(levels, own)
    return _fresh_levels(own)


def _with_labels_outside(levels: list[float], own: Sequence[Piece]) -> list[float]:
    """Levels with those of lines that stand a row's height above the first or below the last."""
    pitch = (levels[-1] - levels[0]) / (len(levels) - 1)
    others = [_level(line) for piece in own for line in piece.lines]
    above = [level for level in others if level < levels[0] - 0.75 * pitch]
    below = [level for level in others if level > levels[-1] + 0.75 * pitch]
    # More than one is text that runs on, as in a wrapped label beside two values.
    above, below = (side if len(side) == 1 else [] for side in (above, below))
    return above + levels + below


def _stands_on(piece: Piece, levels: Sequence[float]) -> bool:
    near = 0.4 * max(word.size for word in piece.words)
    return all(any(abs(_level(line) - level) < near for level in levels) for line in piece.lines)


def _fresh_levels(own: Sequence[Piece]) -> list[float]:
    """Levels of three or more lines that stand in several cells and each begin a text of their own; else none."""
    stacked = [piece for piece in sorted(own, key=lambda piece: piece.cell.column) if len(piece.lines) > 2]
    if len(stacked) < 2:
        return []
    words = [word for piece in own for word in piece.words if not word.angle]
    lines = in_lines(words)
    column_of = {id(word): piece.cell.column for piece in own for word in piece.words}
    shared = [line for line in lines if len({column_of[id(word)] for word in line}) > 1]
    fresh = all(_begins_text(line[0].text) for line in shared)
    if len(shared) < 3 or len(shared) < 0.6 * len(lines) or not fresh:
        return []
    return [_level(line) for line in shared]


def _begins_text(text: str) -> bool:
    return not text[0].islower() and text[0] not in "(（[,;"


def _level(line: Sequence[Word]) -> float:
    return sum(word.line_y for word in line) / len(line)


def _is_stack_of_values(piece: Piece) -> bool:
    lines = [" ".join(word.text for word in line) for line in piece.lines]
    return all(_VALUE.search(line) for line in lines)


def _row_parted(pieces: Sequence[Piece], own: Sequence[Piece], row: int, levels: Sequence[float]) -> list[Piece]:
    added = len(levels) - 1
    result: list[Piece] = []
    for piece in pieces:
        cell = piece.cell
        if any(piece is one for one in own):
            result += _down(piece, levels)
        elif cell.row > row:
            result.append(replace(piece, cell=replace(cell, row=cell.row + added)))
        elif cell.row + cell.row_span > row:
            result.append(replace(piece, cell=replace(cell, row_span=cell.row_span + added)))
        else:
            result.append(piece)
    return result


def _down(piece: Piece, levels: Sequence[float]) -> list[Piece]:
    """One cell's lines over the new rows: line for line, or spanning the rows that a text is centred on."""
    cell, lines = piece.cell, piece.lines
    if not lines:
        return [replace(piece, cell=replace(cell, row_span=len(levels)))]
    pitch = (levels[-1] - levels[0]) / (len(levels) - 1)
    borders = [cell.box[1]]
    # A baseline lies low in its line; the border is a third of the pitch below it.
    borders += [
        (above + below) / 2 + 0.15 * (below - above) - 0.3 * min(below - above, 8.0)
        for above, below in zip(levels, levels[1:], strict=False)
    ]
    borders.append(cell.box[3])
    groups = _centred(lines, levels, pitch)
    made = []
    for first, last, words in groups:
        box = (cell.box[0], borders[first], cell.box[2], borders[last + 1])
        made.append(Piece(replace(cell, row=cell.row + first, row_span=last - first + 1, box=box), tuple(words)))
    return made


def _centred(
    lines: Sequence[Sequence[Word]], levels: Sequence[float], pitch: float
) -> list[tuple[int, int, list[Word]]]:
    """Rows (first, last) that each block of lines belongs to."""
    if len(lines) == len(levels):
        return [(index, index, list(line)) for index, line in enumerate(lines)]
    blocks: list[list[list[Word]]] = []
    for line in lines:
        if blocks and _level(line) - _level(blocks[-1][-1]) < 0.8 * pitch and len(lines) < len(levels):
            blocks[-1].append(list(line))
        else:
            blocks.append([list(line)])
    if len(blocks) == 1:
        return [(0, len(levels) - 1, [word for line in lines for word in line])]
    return _shared_out(blocks, levels, pitch)


def _shared_out(
    blocks: Sequence[Sequence[Sequence[Word]]], levels: Sequence[float], pitch: float
) -> list[tuple[int, int, list[Word]]]:
    """Rows shared out so that each block stands in the middle of its own; else each at the row nearest to it."""
    result: list[tuple[int, int, list[Word]]] = []
    first = 0
    for block in blocks:
        centre = (_level(block[0]) + _level(block[-1])) / 2
        last = round(2 * (centre - levels[0]) / pitch - first)
        if last < first or last >= len(levels):
            result = []
            break
        result.append((first, last, [word for line in block for word in line]))
        first = last + 1
    if result and first == len(levels):
        return result
    nearest: dict[int, list[Word]] = {}
    for block in blocks:
        for line in block:
            index = min(range(len(levels)), key=lambda row: abs(levels[row] - _level(line)))
            nearest.setdefault(index, []).extend(line)
    return [(index, index, words) for index, words in sorted(nearest.items())]
