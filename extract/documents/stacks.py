"""Level lines without upright ones between them -> grids of one column, whose columns the words will show."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace

from extract.documents.bands import bands_of, bottom_of, stacked, top_of
from extract.documents.ruled import Grid, GridCell
from extract.documents.words import Ruling, Word, in_lines, split_at_gaps

# Points: an empty stripe between two lines that is taller parts two tables.
EMPTY_STRIPE = 5.0
# A heading between two tables is so much bigger than the text in them.
BIGGER = 1.15


def stack_grids(stack: Sequence[Ruling], words: Sequence[Word]) -> list[Grid]:
    """Grids between the lines of one stack, parted at headings and empty stripes.

    Rows without a line above or below them belong to the table where they stand close and hold several texts.
    """
    x0, x1 = min(ruling.x0 for ruling in stack), max(ruling.x1 for ruling in stack)
    near = [word for word in words if x0 - 3 <= word.centre[0] <= x1 + 3 and not word.angle]
    lines = in_lines(near)
    grids = []
    for ys in _parted(sorted({round(ruling.top, 2) for ruling in stack}), lines):
        borders = _with_rows_beside(ys, lines, x1 - x0)
        if len(borders) < 3:
            continue
        left = min([x0, *(word.x0 - 1 for word in near if borders[0] <= word.centre[1] <= borders[-1])])
        right = max([x1, *(word.x1 + 1 for word in near if borders[0] <= word.centre[1] <= borders[-1])])
        cells = tuple(
            GridCell(row, 0, 1, 1, (left, top, right, bottom))
            for row, (top, bottom) in enumerate(zip(borders, borders[1:], strict=False))
        )
        grids.append(Grid((left, right), tuple(borders), cells))
    return grids


def _parted(ys: Sequence[float], lines: Sequence[list[Word]]) -> list[list[float]]:
    size = _usual_size([line for line in lines if ys[0] < _middle(line) < ys[-1]])
    parts = [[ys[0]]]
    for above, below in zip(ys, ys[1:], strict=False):
        inside = [line for line in lines if above < _middle(line) < below]
        if not inside:
            if below - above > EMPTY_STRIPE:
                parts.append([below])
            else:
                parts[-1][-1] = below if len(parts[-1]) == 1 else parts[-1][-1]
        elif _is_heading(inside, size):
            parts.append([below])
        else:
            parts[-1].append(below)
    return parts


def _middle(line: Sequence[Word]) -> float:
    return sum(word.centre[1] for word in line) / len(line)


def _usual_size(lines: Sequence[Sequence[Word]]) -> float:
    sizes = sorted(word.size for line in lines for word in line)
    return sizes[len(sizes) // 2] if sizes else 9.0


def _is_heading(lines: Sequence[Sequence[Word]], size: float) -> bool:
    return all(len(split_at_gaps(line)) == 1 and max(word.size for word in line) > BIGGER * size for line in lines)


def _with_rows_beside(ys: Sequence[float], lines: Sequence[list[Word]], width: float) -> list[float]:
    """Borders with those of rows above the first line (one row, of several lines) and below the last (a row each)."""
    borders = list(ys)
    pitch = min((below - above for above, below in zip(ys, ys[1:], strict=False)), default=0.0)
    size = _usual_size([line for line in lines if ys[0] < _middle(line) < ys[-1]])
    top = ys[0]
    for band in reversed(bands_of([line for line in lines if _middle(line) < ys[0]])):
        if top - bottom_of(band) > _reach(band[0], pitch if top == ys[0] else 0.0):
            break
        if not _is_row(band, size, width):
            break
        top = min(top, top_of(band) - 1)
    if top < ys[0]:
        borders.insert(0, top)
    for band in bands_of([line for line in lines if _middle(line) > ys[-1]]):
        if top_of(band) - borders[-1] > _reach(band[0], pitch) or not _is_row(band, size, width):
            break
        borders.append(bottom_of(band) + 1)
    return borders


def _is_row(band: Sequence[Sequence[Word]], size: float, width: float) -> bool:
    """Tell whether a band looks like a table's row: several short texts in the type of the rest."""
    segments = stacked([segment for line in band for segment in split_at_gaps(line)])
    short = all(segment[-1].x1 - segment[0].x0 < 0.45 * width for segment in segments)
    return len(segments) > 1 and short and max(word.size for line in band for word in line) > 0.75 * size


def _reach(line: Sequence[Word], pitch: float) -> float:
    return max(0.9 * max(word.size for word in line), 0.6 * pitch)


def with_group_heads(
    words: Sequence[Word], stacks: Sequence[Sequence[Ruling]], rulings: Sequence[Ruling]
) -> list[Word]:
    """Words with the heads of column groups as wide as the short line drawn under each, which shows what they span."""
    widened = list(words)
    for stack in stacks:
        x0, x1 = stack[0].x0, stack[0].x1
        top, bottom = stack[0].top, stack[-1].top
        for ruling in rulings:
            within = x0 - 2 <= ruling.x0 and ruling.x1 <= x1 + 2 and top < ruling.top < bottom
            if ruling.horizontal and within and 30 < ruling.x1 - ruling.x0 < 0.7 * (x1 - x0):
                widened = _widened(widened, ruling)
    return widened


def _widened(words: list[Word], ruling: Ruling) -> list[Word]:
    over = [word for word in words if not word.angle and ruling.x0 - 1 <= word.x0 and word.x1 <= ruling.x1 + 1]
    above = [word for word in over if -0.3 * word.size < ruling.top - word.bottom < word.size]
    below = [word for word in over if -0.3 * word.size < word.top - ruling.top < 1.5 * word.size]
    lines = in_lines(above)
    if len(lines) != 1 or len(split_at_gaps(lines[0])) != 1 or len(split_at_gaps((in_lines(below) or [[]])[0])) < 2:
        return words
    first, last = lines[0][0], lines[0][-1]
    replaced = {id(first): replace(first, x0=ruling.x0)}
    replaced[id(last)] = replace(replaced.get(id(last), last), x1=ruling.x1)
    return [replaced.get(id(word), word) for word in words]
