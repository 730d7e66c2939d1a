"""Rows that only the words' places show: values line by line in several cells of one ruled row."""

from __future__ import annotations

import re
from bisect import bisect_left
from collections.abc import Sequence
from dataclasses import dataclass, replace

from extract.documents.bands import bands_of, bottom_of, goes_on, top_of
from extract.documents.piece import Piece
from extract.documents.words import Word, in_lines, joined, on_one_line

# A table with more rows between its lines has a line for each.
FEW_ROWS = 3
_VALUE = re.compile(r"^[\s<>≤≥≦≧~±+\-−–(\[]*\d|^[-–—−]+$")


def rows_parted(pieces: Sequence[Piece]) -> list[Piece]:
    """Pieces with each grid row parted where several cells hold values line by line."""
    result = list(pieces)
    count = max(piece.cell.row + piece.cell.row_span for piece in pieces)
    rows = _by_row(result)
    for row in range(count - 1, -1, -1):
        own = rows.get(row, [])
        if on_one_line([word for piece in own for word in piece.words if not word.angle]):
            continue
        if _mostly_wrapped(own):
            continue
        levels = _levels(own)
        borders = [] if levels or _has_one_label(own) else _row_borders(own, strict=count > FEW_ROWS)
        levels = levels if levels or borders else _fresh_levels(own)
        if len(levels) > 1:
            result = _row_parted(result, own, row, levels)
            rows = _by_row(result)
        elif borders:
            result = _cut(result, own, row, borders)
            rows = _by_row(result)
    return result


def _by_row(pieces: Sequence[Piece]) -> dict[int, list[Piece]]:
    """Pieces that cover one row, by that row."""
    rows: dict[int, list[Piece]] = {}
    for piece in pieces:
        if piece.cell.row_span == 1:
            rows.setdefault(piece.cell.row, []).append(piece)
    return rows


_OPEN_END = re.compile(r"(?:[\w)][-/]|(?<=\d)\s?[~～…]|\b(?:to|bis|à|a|and|or|und))$")
# A unit, or a word such as "max", that had no room behind its number.
_WORD_ALONE = re.compile(r"[^\W\d]{1,6}\.?|[^\w\s]{0,2}[^\W\d_]{1,4}(?:/[^\W\d_]{1,4})?[²2]?")
_EAST_END, _EAST_START = re.compile(r"[\u3040-\u30ff\u3400-\u9fff]$"), re.compile(r"^[\u3040-\u30ff\u3400-\u9fff]")


def _mostly_wrapped(own: Sequence[Piece]) -> bool:
    """Tell whether most cells of more than one line hold one text that was too long for the cell's width."""
    several = [piece for piece in own if len(piece.lines) > 1]
    wrapped = sum(_is_wrapped(piece) for piece in several)
    return 0 < len(several) <= 2 * wrapped


def _is_wrapped(piece: Piece) -> bool:
    """Tell whether each line of a cell but the last leaves its text open: a joint, or full to the edge in the East."""
    left, _, right, _ = piece.cell.box
    for line, below in zip(piece.lines, piece.lines[1:], strict=False):
        end, begin = line[-1], below[0]
        if _OPEN_END.search(joined(line)) or (end.text[-1:].isdigit() and _WORD_ALONE.fullmatch(joined(below))):
            continue
        free = right - end.x1 - (min(word.x0 for word in line) - left)
        full = free < 1.2 * end.size and len(end.text) > 1
        if not (full and _EAST_END.search(end.text) and _EAST_START.search(begin.text)):
            return False
    return True


def _has_one_label(own: Sequence[Piece]) -> bool:
    """Tell whether the first filled cell holds one line while others hold more."""
    filled = sorted((piece for piece in own if piece.lines), key=lambda piece: piece.cell.column)
    return bool(filled) and len(filled[0].lines) == 1 and any(len(piece.lines) > 1 for piece in filled)


def _levels(own: Sequence[Piece]) -> list[float]:
    """Heights of the text lines that are rows of their own; none where the row is only one."""
    valued = [piece for piece in own if len(piece.lines) > 1 and _is_stack_of_values(piece)]
    if len(valued) >= 2:
        tallest = max(valued, key=lambda piece: len(piece.lines))
        levels = [_level(line) for line in tallest.lines]
        if sum(_stands_on(piece, levels) for piece in valued) >= 2:
            return _with_label_lines(levels, own)
    return []


def _with_label_lines(levels: list[float], own: Sequence[Piece]) -> list[float]:
    """Levels with those of lines that stand on their own above, below or between them (the heading of some bands)."""
    pitch = _pitch(levels)
    lines = sorted(_level(line) for piece in own for line in piece.lines)
    loose = [level for level in lines if min(abs(level - other) for other in levels) > 0.75 * pitch]
    above = [level for level in loose if level < levels[0]]
    below = [level for level in loose if level > levels[-1]]
    # More than one is text that runs on, as in a wrapped label beside two values.
    outside = [level for side in (above, below) if len(side) == 1 for level in side]
    between = [level for level in loose if levels[0] < level < levels[-1]]
    added: list[float] = []
    for level in sorted(outside + between):
        if not added or level - added[-1] > 0.75 * pitch:
            added.append(level)
    return sorted(levels + added)


def _stands_on(piece: Piece, levels: Sequence[float]) -> bool:
    near = 0.4 * max(word.size for word in piece.words)
    return all(any(abs(_level(line) - level) < near for level in levels) for line in piece.lines)


def _row_borders(own: Sequence[Piece], strict: bool) -> list[float]:
    """Heights between rows of a band in which no line is drawn; none where the band is one row.

    Where each row of the table has its line, text on several levels is text that runs on (strict): rows are parted only
    where three or more lines fill several cells and each begins a text of its own.
    """
    column_of = {id(word): piece.cell.column for piece in own for word in piece.words}
    lines = in_lines([word for piece in own for word in piece.words if not word.angle])
    bands = _joined_bands(bands_of(lines), column_of)
    full = [band for band in bands if len({column_of[id(word)] for line in band for word in line}) > 1]
    fresh = [band for band in full if not goes_on(band[0][0].text)]
    least = 3 if strict else 2
    if len(full) < least or len(full) < 0.6 * len(bands) or len(fresh) < (1.0 if strict else 0.7) * len(full):
        return []
    if any(_holds_rows(band, column_of) for band in bands):
        return []
    return [(bottom_of(above) + top_of(below)) / 2 for above, below in zip(bands, bands[1:], strict=False)]


def _holds_rows(band: Sequence[Sequence[Word]], column_of: dict[int, int]) -> bool:
    """Tell whether lines of one column in a band are items of a list rather than one text (values, bullets)."""
    firsts: dict[int, list[str]] = {}
    for line in band:
        begins: dict[int, str] = {}
        for word in line:
            begins.setdefault(column_of[id(word)], word.text)
        for column, text in begins.items():
            firsts.setdefault(column, []).append(text)
    return any(len(texts) > 1 and _is_list(texts) for texts in firsts.values())


def _is_list(texts: Sequence[str]) -> bool:
    marked = len({text[0] for text in texts}) == 1 and texts[0][0] in "•:▪■-"
    return marked or all(_VALUE.search(text) for text in texts)


def _fresh_levels(own: Sequence[Piece]) -> list[float]:
    """Levels of three or more lines that stand in several cells and each begin a text of their own; else none."""
    column_of = {id(word): piece.cell.column for piece in own for word in piece.words}
    lines = in_lines([word for piece in own for word in piece.words if not word.angle])
    shared = [line for line in lines if len({column_of[id(word)] for word in line}) > 1]
    if len(shared) < 3 or len(shared) < 0.6 * len(lines) or any(goes_on(line[0].text) for line in shared):
        return []
    if _some_column_goes_on(shared, column_of):
        return []
    return [_level(line) for line in shared]


def _some_column_goes_on(lines: Sequence[Sequence[Word]], column_of: dict[int, int]) -> bool:
    """Whether the text of some cell begins anew in the first line and goes on in a later one ("12 MHz", "to 54")."""
    begins: dict[int, list[str]] = {}
    for line in lines:
        firsts: dict[int, str] = {}
        for word in line:
            firsts.setdefault(column_of[id(word)], word.text)
        for column, text in firsts.items():
            begins.setdefault(column, []).append(text)
    return any(not goes_on(texts[0]) and any(goes_on(text) for text in texts[1:]) for texts in begins.values())


def _joined_bands(bands: Sequence[list[list[Word]]], column_of: dict[int, int]) -> list[list[list[Word]]]:
    """Bands with those joined to the one above that stand nearer to it than usual and go on with its texts."""
    gaps = sorted(top_of(below) - bottom_of(above) for above, below in zip(bands, bands[1:], strict=False))
    usual = gaps[len(gaps) // 2] if gaps else 0.0
    result: list[list[list[Word]]] = []
    for band in bands:
        columns = {column_of[id(word)] for line in band for word in line}
        before = result[-1] if result else None
        if before is not None and top_of(band) - bottom_of(before) < 0.6 * usual:
            filled = {column_of[id(word)] for line in before for word in line}
            if columns < filled or goes_on(band[0][0].text):
                before.extend(band)
                continue
        result.append(list(band))
    return result


def _cut(pieces: Sequence[Piece], own: Sequence[Piece], row: int, borders: Sequence[float]) -> list[Piece]:
    """Pieces with those of one grid row cut at the borders."""
    result = _moved_down([piece for piece in pieces if not any(piece is one for one in own)], row, len(borders))
    for piece in own:
        left, top, right, bottom = piece.cell.box
        edges = [top, *borders, bottom]
        for index, (upper, lower) in enumerate(zip(edges, edges[1:], strict=False)):
            words = tuple(word for word in piece.words if upper <= word.centre[1] < lower)
            result.append(Piece(replace(piece.cell, row=row + index, box=(left, upper, right, lower)), words))
    return result


def _moved_down(pieces: Sequence[Piece], row: int, added: int) -> list[Piece]:
    """Pieces of the other rows as they stand when the row has been parted into more."""
    result: list[Piece] = []
    for piece in pieces:
        cell = piece.cell
        if cell.row > row:
            cell = replace(cell, row=cell.row + added)
        elif cell.row + cell.row_span > row:
            cell = replace(cell, row_span=cell.row_span + added)
        result.append(replace(piece, cell=cell))
    return result


def _level(line: Sequence[Word]) -> float:
    return sum(word.line_y for word in line) / len(line)


def _is_stack_of_values(piece: Piece) -> bool:
    lines = [" ".join(word.text for word in line) for line in piece.lines]
    return all(_VALUE.search(line) for line in lines)


def _row_parted(pieces: Sequence[Piece], own: Sequence[Piece], row: int, levels: Sequence[float]) -> list[Piece]:
    labels = _labels_of(own, levels)
    others = [piece for piece in pieces if not any(piece is one for one in own)]
    result = _moved_down(others, row, len(levels) - 1)
    for piece in own:
        result += _down(piece, levels, labels)
    return result


@dataclass(frozen=True, slots=True)
class _Labels:
    """What the first filled column says of the rows, which decides whether a text may be meant for several.

    `groups` are the rows (first, last) of each label where the labels share the rows out evenly.
    """

    count: int
    rows: int
    groups: tuple[tuple[int, int], ...]

    def group_round(self, index: float) -> tuple[int, int] | None:
        """Rows of one label in whose middle the index stands; None where there is no such label."""
        for first, last in self.groups:
            if last > first and abs(index - (first + last) / 2) < 0.3:
                return first, last
        return None


def _labels_of(own: Sequence[Piece], levels: Sequence[float]) -> _Labels:
    first = min((piece for piece in own if piece.lines), key=lambda piece: piece.cell.column)
    blocks = _blocks(first.lines, levels)
    groups = tuple((top, bottom) for top, bottom, _ in _shared_out(blocks, levels))
    return _Labels(len(blocks), len(levels), groups)


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
    off = any(not _on_level(line, levels) for line in lines)
    values = all(_VALUE.search(joined(line)) for line in lines)
    # A value on a row's level is that row's, unless the rows share one label and it stands in their middle.
    if labels.count == len(blocks) == 1 and (not values or _is_middle(blocks[0], levels)):
        return [(0, len(levels) - 1, [word for line in lines for word in line])]
    if len(blocks) != len(levels) and (off or (labels.count < labels.rows and not values)):
        shared = _shared_out(blocks, levels)
        if shared:
            return shared
    groups: dict[tuple[int, int], list[Word]] = {}
    for line in lines:
        place = _index_at(_level(line), levels)
        row = min(max(round(place), 0), len(levels) - 1)
        rows = None if values else labels.group_round(place)
        if rows is None and not _on_level(line, levels):
            first = min(int(place), len(levels) - 2)
            rows = (first, first + 1)
        groups.setdefault(rows or (row, row), []).extend(line)
    return [(first, last, words) for (first, last), words in sorted(_apart(groups).items())]


def _apart(groups: dict[tuple[int, int], list[Word]]) -> dict[tuple[int, int], list[Word]]:
    """Groups of rows that do not share any; where they would, each text keeps to the row in the middle of its own."""
    taken = [row for first, last in groups for row in range(first, last + 1)]
    if len(taken) == len(set(taken)):
        return groups
    apart: dict[tuple[int, int], list[Word]] = {}
    for (first, last), words in groups.items():
        row = (first + last) // 2
        apart.setdefault((row, row), []).extend(words)
    return apart


def _is_middle(block: Sequence[Sequence[Word]], levels: Sequence[float]) -> bool:
    centre = (_level(block[0]) + _level(block[-1])) / 2
    return abs(centre - (levels[0] + levels[-1]) / 2) < 0.4 * _pitch(levels)


def _pitch(levels: Sequence[float]) -> float:
    """Usual distance between two levels."""
    gaps = sorted(below - above for above, below in zip(levels, levels[1:], strict=False))
    return gaps[len(gaps) // 2]


def _on_level(line: Sequence[Word], levels: Sequence[float]) -> bool:
    return min(abs(level - _level(line)) for level in levels) < 0.3 * _pitch(levels)


def _index_at(y: float, levels: Sequence[float]) -> float:
    """Row number at that height, between two rows a fraction."""
    after = min(max(bisect_left(levels, y), 1), len(levels) - 1)
    index = after - 1 + (y - levels[after - 1]) / (levels[after] - levels[after - 1])
    return min(max(index, 0.0), len(levels) - 1.0)


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
        last = round(2 * _index_at(centre, levels) - first)
        if last < first or last >= len(levels):
            return []
        result.append((first, last, [word for line in block for word in line]))
        first = last + 1
    return result if first == len(levels) else []
