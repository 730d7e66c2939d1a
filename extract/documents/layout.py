"""Words and drawn lines of one page -> tables and lines of text in reading order."""

from __future__ import annotations

from bisect import bisect_left
from collections.abc import Callable, Sequence
from dataclasses import replace

from extract.documents.cells import table_of
from extract.documents.flow import Item, blocks_of, in_reading_order, items_of
from extract.documents.model import Line, Table
from extract.documents.piece import Piece
from extract.documents.ruled import Grid, grids_of, stacks_of
from extract.documents.stacks import stack_grids, with_group_heads
from extract.documents.words import (
    Box,
    Ruling,
    Word,
    in_lines,
    inside,
    turned,
    turned_back,
    turned_word,
    union,
)
from extract.model import Where

Placer = Callable[[Box], Where]

# A cell that takes this share of the page in both directions is a frame round other things.
FRAME_WIDTH, FRAME_HEIGHT = 0.5, 0.22
# Text in a drawn box is kept together where the box takes at most this share of the page.
BOXED = 0.25
# A greater closed box with so few level lines is a frame round the page or a part of it.
FRAME_ROWS = 4
# A table lying sideways has at least so many words, or most of the page's.
SIDEWAYS_WORDS, MOSTLY = 16, 0.7


def arrange(
    words: Sequence[Word], rulings: Sequence[Ruling], place: Placer, *, width: float, height: float
) -> list[Table | Line]:
    """Give the blocks of one page in reading order.

    Parameters
    ----------
    words, rulings
        In one unit (points, or pixels of a picture) from the top left of the page as shown.
    place
        From a box in that unit to its place in the file.
    width, height
        The page's size in that unit.
    """
    blocks: list[Table | Line] = []
    upright = list(words)
    for angle in (90, 270, 180):
        region = _sideways_region(upright, rulings, angle)
        if region is None:
            continue
        inner = [word for word in upright if word.angle == angle and inside(word.box, region)]
        lines = [ruling for ruling in rulings if inside(ruling, region, 30.0)]
        blocks += _arranged_sideways(inner, lines, angle, place, width=width, height=height)
        taken = {id(word) for word in inner}
        upright = [word for word in upright if id(word) not in taken]
        used = set(lines)
        rulings = [ruling for ruling in rulings if ruling not in used]
    return _titled(_arranged(upright, rulings, place, width, height)) + blocks


def _sideways_region(words: Sequence[Word], rulings: Sequence[Ruling], angle: int) -> Box | None:
    """Box of a whole table or page that lies on its side; None where there are only some sideways words."""
    chosen = [word for word in words if word.angle == angle]
    if not chosen or (len(chosen) < SIDEWAYS_WORDS and len(chosen) < MOSTLY * len(words)):
        return None
    region = union(word.box for word in chosen)
    # Turned texts in the head of an upright table have the table's upright words in the same lines.
    around = [grid.box for grid in grids_of(rulings) if any(inside(word.box, grid.box) for word in chosen)]
    region = union([region, *around])
    others = [word for word in words if word.angle != angle and inside(word.box, region)]
    return region if len(chosen) > 1.5 * len(others) else None


def _arranged_sideways(
    words: Sequence[Word], rulings: Sequence[Ruling], angle: int, place: Placer, *, width: float, height: float
) -> list[Table | Line]:
    def placed_back(box: Box) -> Where:
        return place(turned_back(box, angle, width, height))

    turned_words = [turned_word(word, angle, width, height) for word in words]
    turned_rulings = [Ruling(*turned(ruling, angle, width, height)) for ruling in rulings]
    across = (width, height) if angle == 180 else (height, width)
    return _titled(_arranged(turned_words, turned_rulings, placed_back, *across))


def _arranged(
    words: Sequence[Word], rulings: Sequence[Ruling], place: Placer, width: float, height: float
) -> list[Table | Line]:
    grids = sorted(grids_of(rulings), key=lambda grid: _area(grid.box))
    rest = list(words)
    tables: list[Item] = []
    # The smallest first, so that a table inside a cell of another takes its words before the outer one does.
    for grid in grids:
        if len(grid.xs) > 2:
            rest = _taken(_pieces(grid, rest, width, height), rest, place, tables)
    boxes = [grid for grid in grids if grid.closed and len(grid.xs) == 2]
    frames = [grid.box for grid in boxes if _area(grid.box) > BOXED * width * height and len(grid.ys) <= FRAME_ROWS]
    stacks = stacks_of(rulings, [item.box for item in tables], frames, [grid.box for grid in boxes])
    rest = with_group_heads(rest, stacks, rulings)
    for stack in stacks:
        for grid in stack_grids(stack, rest):
            rest = _taken([Piece(cell, _words_in(cell.box, rest)) for cell in grid.cells], rest, place, tables)
    boxed: list[Item] = []
    for grid in boxes:
        if _area(grid.box) <= BOXED * width * height:
            rest = _boxed(grid.box, rest, place, boxed)
    items = items_of([word for word in rest if not word.angle]) + boxed + _nested(tables)
    blocks = [block for flow in in_reading_order(items) for block in blocks_of(flow, place)]
    for angle in sorted({word.angle for word in rest} - {0}):
        sideways = [word for word in rest if word.angle == angle]
        blocks += _arranged_sideways(sideways, [], angle, place, width=width, height=height)
    return blocks


def _area(box: Box) -> float:
    return (box[2] - box[0]) * (box[3] - box[1])


def _taken(pieces: Sequence[Piece] | None, rest: list[Word], place: Placer, tables: list[Item]) -> list[Word]:
    """Words that are left when the pieces, if they make a table, have been added to the tables."""
    if not pieces or not any(piece.words for piece in pieces):
        return rest
    table = table_of(pieces, place, ruled=True)
    if table.columns < 2:
        return rest
    tables.append(Item(union(piece.cell.box for piece in pieces), (), (table,)))
    used = {id(word) for piece in pieces for word in piece.words}
    return [word for word in rest if id(word) not in used]


def _boxed(box: Box, rest: list[Word], place: Placer, groups: list[Item]) -> list[Word]:
    """Words that are left when those in a drawn box have been kept together as lines of their own."""
    own = _words_in(box, rest)
    if len(in_lines(own)) < 2:
        return rest
    groups.append(Item(box, (), tuple(blocks_of(items_of(own), place))))
    used = {id(word) for word in own}
    return [word for word in rest if id(word) not in used]


def _words_in(box: Box, words: Sequence[Word]) -> tuple[Word, ...]:
    return tuple(word for word in words if _in_cell(word, box))


def _nested(tables: list[Item]) -> list[Item]:
    """Tables in tables follow the outer one."""
    result: list[Item] = []
    for item in sorted(tables, key=lambda item: -_area(item.box)):
        for index, outer in enumerate(result):
            if inside(item.box, outer.box, 0.0) and item.box[2] - item.box[0] < outer.box[2] - outer.box[0]:
                title = _row_label(outer.blocks[0], item.blocks[0])
                titled = tuple(
                    replace(block, title=title) if isinstance(block, Table) else block for block in item.blocks
                )
                result[index] = Item(outer.box, (), (*outer.blocks, *titled))
                break
        else:
            result.append(item)
    return result


def _row_label(outer: Table | Line, inner: Table | Line) -> str:
    """Text of the outer table's first cell on the level of the inner one."""
    if not isinstance(outer, Table) or not inner.where.box:
        return ""
    middle = (inner.where.box[1] + inner.where.box[3]) / 2
    for cell in outer.cells:
        box = cell.where.box
        if box and box[1] <= middle <= box[3] and cell.column == 0:
            return " ".join(cell.text.split())
    return ""


def _pieces(grid: Grid, words: Sequence[Word], width: float, height: float) -> list[Piece] | None:
    """Cells with their words; None where the lines are a frame, a drawing or a graph and no table."""
    x0, top, x1, bottom = grid.box
    within = [word for word in words for x, y in (word.centre,) if x0 <= x <= x1 and top <= y <= bottom]
    finder = _Finder(within)
    pieces = []
    for cell in grid.cells:
        frame = cell.box[2] - cell.box[0] > FRAME_WIDTH * width and cell.box[3] - cell.box[1] > FRAME_HEIGHT * height
        own = () if frame else finder.in_cell(cell.box)
        if not frame:
            pieces.append(Piece(cell, own))
    filled = [piece for piece in pieces if piece.words]
    if len(filled) < 2 or len(filled) < 0.15 * len(pieces):
        return None
    rows = {piece.cell.row for piece in filled}
    if len(rows) < 2 and len(filled) < 3:
        return None
    if len(pieces) < len(grid.cells):
        pieces = _without_frames(pieces)
    return pieces


def _without_frames(pieces: Sequence[Piece]) -> list[Piece]:
    first = min(piece.cell.row for piece in pieces)
    return [replace(piece, cell=replace(piece.cell, row=piece.cell.row - first)) for piece in pieces]


def _in_cell(word: Word, box: Box) -> bool:
    x, y = word.centre
    return box[0] <= x < box[2] and box[1] <= y < box[3]


class _Finder:
    """Words by the height of their centres, so that a cell looks only at those of its own rows."""

    def __init__(self, words: Sequence[Word]) -> None:
        placed = sorted((y, index, x, word) for index, word in enumerate(words) for x, y in (word.centre,))
        self._placed, self._heights = placed, [each[0] for each in placed]

    def in_cell(self, box: Box) -> tuple[Word, ...]:
        """The words whose centre is in the box, in their own order."""
        rows = self._placed[bisect_left(self._heights, box[1]) : bisect_left(self._heights, box[3])]
        return tuple(word for _, word in sorted((index, word) for _, index, x, word in rows if box[0] <= x < box[2]))


def _titled(blocks: Sequence[Table | Line]) -> list[Table | Line]:
    """Tables with the heading that stands right above as their title."""
    result: list[Table | Line] = []
    for block in blocks:
        if isinstance(block, Table) and not block.title and result and isinstance(result[-1], Line):
            above = result[-1]
            if _is_title(above, block):
                block = replace(block, title=above.text)  # noqa: PLW2901
        result.append(block)
    return result


def _is_title(line: Line, table: Table) -> bool:
    over, under = line.where.box, table.where.box
    if over is None or under is None or (len(line.segments) > 1 and not line.heading):
        return False
    near = 0 <= under[1] - over[3] + 4 < 3.0 * max(over[3] - over[1], 8.0)
    level = min(over[2], under[2]) - max(over[0], under[0]) > 0
    plain = len(line.text) < 60 and not line.text.endswith((".", ";", ":")) and line.text[0].isalnum()
    return near and level and (line.heading or plain)
