"""Rows that only the words' places show: values line by line in several cells of one ruled row."""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import replace
from enum import Enum

from extract.documents.piece import Piece
from extract.documents.words import Word, in_lines, joined

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
    labels = _Labels.of(own, levels)
    result: list[Piece] = []
    for piece in pieces:
        cell = piece.cell
        if any(piece is one for one in own):
            result += _down(piece, levels, labels)
        elif cell.row > row:
            result.append(replace(piece, cell=replace(cell, row=cell.row + added)))
        elif cell.row + cell.row_span > row:
            result.append(replace(piece, cell=replace(cell, row_span=cell.row_span + added)))
        else:
            result.append(piece)
    return result


class _Labels(Enum):
    """What the first filled column says of the rows, which decides whether a text may be meant for several."""

    ONE_FOR_ALL = 1
    ONE_FOR_SOME = 2
    ONE_EACH = 3

    @classmethod
    def of(cls, own: Sequence[Piece], levels: Sequence[float]) -> _Labels:
        first = min((piece for piece in own if piece.lines), key=lambda piece: piece.cell.column)
        count = len(_blocks(first.lines, levels))
        if count == 1:
            return cls.ONE_FOR_ALL
        return cls.ONE_FOR_SOME if count < len(levels) else cls.ONE_EACH


def _down(piece: Piece, levels: Sequence[float], labels: _Labels) -> list[Piece]:
    """One cell's lines over the new rows: line for line, or spanning the rows that a text is centred on."""
    cell, lines = piece.cell, piece.lines
    if not lines:
        return [replace(piece, cell=replace(cell, row_span=len(levels)))]
    # From the middle between two baselines up by what a line reaches higher above its baseline than below it.
    size = max(word.size for word in piece.words)
    between = [(above + below) / 2 - 0.28 * size for above, below in zip(levels, levels[1:], strict=False)]
    borders = [cell.box[1], *between, cell.box[3]]
    made = []
    for first, last, words in _rows_of(lines, levels, labels):
        box = (cell.box[0], borders[first], cell.box[2], borders[last + 1])
        made.append(Piece(replace(cell, row=cell.row + first, row_span=last - first + 1, box=box), tuple(words)))
    return made


def _rows_of(
    lines: Sequence[list[Word]], levels: Sequence[float], labels: _Labels
) -> list[tuple[int, int, list[Word]]]:
    """Rows (first, last) that each text of a cell belongs to."""
    blocks = _blocks(lines, levels)
    off = all(not _on_level(line, levels) for block in blocks for line in block)
    values = all(_VALUE.search(joined(line)) for line in lines)
    # A value on a row's level is that row's, unless the rows share one label and it stands in their middle.
    if labels is _Labels.ONE_FOR_ALL and len(blocks) == 1 and (not values or _is_middle(blocks[0], levels)):
        return [(0, len(levels) - 1, [word for line in lines for word in line])]
    if off or (labels is not _Labels.ONE_EACH and not values):
        shared = _shared_out(blocks, levels)
        if shared:
            return shared
    nearest: dict[int, list[Word]] = {}
    for line in lines:
        index = min(range(len(levels)), key=lambda row: abs(levels[row] - _level(line)))
        nearest.setdefault(index, []).extend(line)
    return [(index, index, words) for index, words in sorted(nearest.items())]


def _is_middle(block: Sequence[Sequence[Word]], levels: Sequence[float]) -> bool:
    centre = (_level(block[0]) + _level(block[-1])) / 2
    return abs(centre - (levels[0] + levels[-1]) / 2) < 0.4 * _pitch(levels)


def _pitch(levels: Sequence[float]) -> float:
    return (levels[-1] - levels[0]) / (len(levels) - 1)


def _on_level(line: Sequence[Word], levels: Sequence[float]) -> bool:
    return min(abs(level - _level(line)) for level in levels) < 0.2 * _pitch(levels)


def _blocks(lines: Sequence[list[Word]], levels: Sequence[float]) -> list[list[list[Word]]]:
    """Texts of one or more lines: lines nearer to one another than the rows, or between the levels, go together."""
    pitch = _pitch(levels)
    blocks: list[list[list[Word]]] = []
    for line in lines:
        gap = _level(line) - _level(blocks[-1][-1]) if blocks else 0.0
        beside = bool(blocks) and not _on_level(line, levels) and not _on_level(blocks[-1][-1], levels)
        if blocks and (gap < 0.8 * pitch or (beside and gap < 1.3 * pitch)):
            blocks[-1].append(list(line))
        else:
            blocks.append([list(line)])
    return blocks


def _shared_out(
    blocks: Sequence[Sequence[Sequence[Word]]], levels: Sequence[float]
) -> list[tuple[int, int, list[Word]]]:
    """Rows shared out so that each block stands in the middle of its own; none where that does not come out even."""
    result: list[tuple[int, int, list[Word]]] = []
    first = 0
    for block in blocks:
        centre = (_level(block[0]) + _level(block[-1])) / 2
        last = round(2 * (centre - levels[0]) / _pitch(levels) - first)
        if last < first or last >= len(levels):
            return []
        result.append((first, last, [word for line in block for word in line]))
        first = last + 1
    return result if first == len(levels) else []
