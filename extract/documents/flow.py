"""Words outside drawn tables: text columns in reading order, lines of segments, tables without lines."""

from __future__ import annotations

import re
from bisect import bisect_left, bisect_right
from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace

from extract.documents.bands import bands_of, goes_on, stacked
from extract.documents.cells import table_of
from extract.documents.columns import Span, columns_of, fine_columns_of, overlap, placed, span_of
from extract.documents.model import Line, Segment, Table
from extract.documents.piece import Piece
from extract.documents.ruled import GridCell
from extract.documents.words import Box, Word, confidence_of, in_lines, is_fine_gap, joined, split_at_gaps, union
from extract.model import Where

Placer = Callable[[Box], Where]

# Text sizes: the narrowest gutter between two columns of text.
TEXT_GUTTER = 1.2
# Text sizes: the parts of a heading stand no further apart ("QX-20   Crystal unit").
TITLE_GAP = 1.6
# Share of the items that may run across the gutter between two columns (headings, wide tables).
MOST_ACROSS = 0.35
# Text sizes: baselines that differ by less are level, where the difference varies by less than the second.
LEVEL, ALIKE = 0.3, 0.15
# Two sides are rows where so many of the shorter one's lines are level with the other's, and where tables stand
# elsewhere on the page, so many lines at least.
LEVEL_SHARE, LEAST_ROWS = 0.6, 4
# Three dots or one ellipsis stand for "to" in a range; leaders are longer.
LEAST_DOTS = 4
SINGLE_DOTS = frozenset({".", "·", "․", "…", ". .", "_"})
_LEADER = re.compile(r"[.·․‥_]{4,}|…{2,}")


@dataclass(frozen=True, slots=True)
class Item:
    """What is put in order: a part of a text line, or a finished table with its box."""

    box: Box
    words: tuple[Word, ...] = ()
    blocks: tuple[Table | Line, ...] = ()

    @property
    def level(self) -> float:
        return sum(word.line_y for word in self.words) / len(self.words) if self.words else self.box[1]

    @property
    def size(self) -> float:
        return max((word.size for word in self.words), default=0.0)


def items_of(words: Sequence[Word]) -> list[Item]:
    """Segments of text lines; leader dots part segments and are left out."""
    items = []
    for line in in_lines(words):
        for segment in split_at_gaps(line):
            items += [Item(union(word.box for word in part), tuple(part)) for part in _without_leaders(segment)]
    return items


def _without_leaders(segment: Sequence[Word]) -> list[list[Word]]:
    parts: list[list[Word]] = [[]]
    for index, word in enumerate(segment):
        if word.text in SINGLE_DOTS and _dots_in_a_row(segment, index) >= LEAST_DOTS:
            if parts[-1]:
                parts.append([])
            continue
        pieces = _LEADER.split(word.text)
        if len(pieces) == 1:
            parts[-1].append(word)
            continue
        for number, text in enumerate(pieces):
            if number:
                parts.append([])
            if text:
                parts[-1].append(_part_of(word, text))
    return [part for part in parts if part]


def _dots_in_a_row(segment: Sequence[Word], index: int) -> int:
    first, last = index, index
    while first > 0 and segment[first - 1].text in SINGLE_DOTS:
        first -= 1
    while last + 1 < len(segment) and segment[last + 1].text in SINGLE_DOTS:
        last += 1
    return last - first + 1


def _part_of(word: Word, text: str) -> Word:
    """Word that is a part of another, its place by its share of the characters."""
    start = word.text.index(text)
    width = (word.x1 - word.x0) / len(word.text)
    return replace(word, text=text, x0=word.x0 + start * width, x1=word.x0 + (start + len(text)) * width)


# --- reading order


def in_reading_order(items: Sequence[Item]) -> list[list[Item]]:
    """Items in flows: each flow is read from the top down before the next; text columns are flows of their own."""
    if not items:
        return []
    gutter = _gutter(items)
    if gutter is None:
        return [sorted(items, key=lambda item: (item.box[1], item.box[0]))]
    across = [item for item in items if item.box[0] < gutter[0] - 1 and item.box[2] > gutter[1] + 1]
    flows: list[list[Item]] = []
    edges = [float("-inf"), *sorted(item.level if item.words else item.box[1] for item in across), float("inf")]
    rest = [item for item in items if item not in across]
    for upper, lower in zip(edges, edges[1:], strict=False):
        lead = [item for item in across if (item.level if item.words else item.box[1]) == upper]
        band = [item for item in rest if upper <= (item.level if item.words else item.box[1]) < lower]
        flows += _band_in_order(lead, band, gutter)
    return flows


def _band_in_order(lead: list[Item], band: list[Item], gutter: tuple[float, float]) -> list[list[Item]]:
    middle = (gutter[0] + gutter[1]) / 2
    left = [item for item in band if (item.box[0] + item.box[2]) / 2 < middle]
    right = [item for item in band if item not in left]
    if left and right and _are_columns(left, right):
        zones = _zones(left, right)
        if len(zones) > 1:
            return [
                flow for index, zone in enumerate(zones) for flow in _band_in_order([] if index else lead, zone, gutter)
            ]
        tail = _rows_across(left, right, middle)
        left, right = ([item for item in side if item not in tail] for side in (left, right))
        flows = [lead] if lead else []
        flows += in_reading_order(left) + in_reading_order(right)
        return flows + ([tail] if tail else [])
    whole = sorted(lead + band, key=lambda item: (item.box[1], item.box[0]))
    return [whole] if whole else []


def _zones(left: Sequence[Item], right: Sequence[Item]) -> list[list[Item]]:
    """The two sides cut above and below tables and drawings, where rows of level texts run across.

    There they are read row by row, though further down a table stands beside text.
    """
    items = sorted([*left, *right], key=lambda item: item.box[1])
    blocks = [item.box for item in items if item.blocks]
    if not blocks:
        return [items]
    upper, lower = min(box[1] for box in blocks), max(box[3] for box in blocks)
    above = [item for item in items if item.words and item.box[3] <= upper]
    below = [item for item in items if item.words and item.box[1] >= lower]
    sides = {id(item) for item in left}
    above, below = (zone if _are_rows(zone, sides) else [] for zone in (above, below))
    apart = {id(item) for item in [*above, *below]}
    middle = [item for item in items if id(item) not in apart]
    return [zone for zone in (above, middle, below) if zone]


def _are_rows(zone: Sequence[Item], left: set[int]) -> bool:
    """Whether the texts of two sides are rows: three or more levels, nearly all of the shorter side's on both."""
    sides = [item for item in zone if id(item) in left], [item for item in zone if id(item) not in left]
    if not zone or not all(sides):
        return False
    size = _usual_size(zone)
    fewer, more = sorted((_levels_of(side, size) for side in sides), key=len)
    return len(fewer) >= LEAST_ROWS and _level_lines(fewer, more, size) >= LEVEL_SHARE * len(fewer)


def _rows_across(left: Sequence[Item], right: Sequence[Item], middle: float) -> list[Item]:
    """Rows at the foot of two columns that run across both: many short texts, or texts on a level below tables."""
    lowest = max((item.box[3] for item in [*left, *right] if item.blocks), default=0.0)
    text = [item for item in [*left, *right] if item.words and item.box[1] > lowest]
    tail: list[Item] = []
    kept: list[Item] = []
    for row in reversed(_rows(text)):
        sides = {(item.box[0] + item.box[2]) / 2 < middle for item in row}
        level = max(item.level for item in row) - min(item.level for item in row) < 0.12 * row[0].size
        if len(sides) == 2 and level and (len(row) >= 4 or lowest > 0):
            tail = row + kept + tail
            kept = []
        elif lowest > 0 and len(sides) == 1:
            kept = row + kept
        else:
            break
    return tail


def _gutter(items: Sequence[Item]) -> tuple[float, float] | None:
    """Best upright white stripe between columns of text; None where the items are one column."""
    if len(items) < 4:
        return None
    size = _usual_size(items)
    left, right = min(item.box[0] for item in items), max(item.box[2] for item in items)
    best: tuple[float, tuple[float, float]] | None = None
    starts, ends = sorted(item.box[0] for item in items), sorted(item.box[2] for item in items)
    for start in sorted(set(starts)):
        if not left + 0.12 * (right - left) < start < right - 0.08 * (right - left):
            continue
        stripe = (start - TEXT_GUTTER * size, start)
        across = bisect_left(starts, start - 0.5) - bisect_right(ends, stripe[0])
        if across > MOST_ACROSS * len(items):
            continue
        score = _columns_score(items, stripe)
        if score > 0 and (best is None or score > best[0]):
            best = (score, stripe)
    return best[1] if best else None


def _columns_score(items: Sequence[Item], stripe: tuple[float, float]) -> float:
    """How well the stripe parts columns: items on the poorer side, less those that run across it; 0 for not at all."""
    left = [item for item in items if item.box[2] <= stripe[0]]
    right = [item for item in items if item.box[0] >= stripe[1] - 0.5]
    across = len(items) - len(left) - len(right)
    if across > MOST_ACROSS * len(items) or not left or not right:
        return 0.0
    tables = any(item.blocks for item in left + right)
    poorer = min(len(left), len(right))
    if (poorer < 3 and not tables) or not _are_columns(left, right):
        return 0.0
    return poorer + 2 * tables - across + 0.5 * _reach(left, right)


def _reach(left: Sequence[Item], right: Sequence[Item]) -> float:
    heights = [union(item.box for item in side) for side in (left, right)]
    shared = overlap((heights[0][1], heights[0][3]), (heights[1][1], heights[1][3]))
    return max(0.0, shared) / 100


def _are_columns(left: Sequence[Item], right: Sequence[Item]) -> bool:
    """Tell whether two sides are read one after the other: a table beside text, or lines that do not stand level."""
    boxes = [union(item.box for item in side) for side in (left, right)]
    if overlap((boxes[0][1], boxes[0][3]), (boxes[1][1], boxes[1][3])) <= 0:
        return False
    for side, other in ((left, right), (right, left)):
        for item in side:
            if item.blocks and any(overlap((item.box[1], item.box[3]), (one.box[1], one.box[3])) > 0 for one in other):
                return True
    size = _usual_size([*left, *right])
    fewer, more = sorted((_levels_of(left, size), _levels_of(right, size)), key=len)
    if len(fewer) < 2:
        return False
    level = _level_lines(fewer, more, size)
    return level < LEVEL_SHARE * len(fewer)


def _levels_of(items: Sequence[Item], size: float) -> list[float]:
    """Baselines of one side from the top down; those of one row as one."""
    levels: list[float] = []
    for level in sorted(item.level for item in items if item.words):
        if not levels or level - levels[-1] >= LEVEL * size:
            levels.append(level)
    return levels


def _level_lines(fewer: Sequence[float], more: Sequence[float], size: float) -> int:
    """Greatest number of lines that are level with a line of the other side, all shifted alike.

    The cells of a row may be set a little higher or lower; lines of two texts drift against one another.
    """
    shifts = []
    for level in fewer:
        index = bisect_left(more, level)
        shift = min((other - level for other in more[max(index - 1, 0) : index + 1]), key=abs)
        if abs(shift) < LEVEL * size:
            shifts.append(shift)
    shifts.sort()
    return max((bisect_right(shifts, shift + ALIKE * size) - index for index, shift in enumerate(shifts)), default=0)


def _usual_size(items: Sequence[Item]) -> float:
    sizes = sorted(word.size for item in items for word in item.words)
    return sizes[len(sizes) // 2] if sizes else 9.0


# --- lines and tables of one flow


def blocks_of(flow: Sequence[Item], place: Placer) -> list[Table | Line]:
    """Blocks of one flow: its tables, and its lines of text, those that line up in columns as tables."""
    blocks: list[Table | Line] = []
    text: list[Item] = []
    for item in flow:
        if item.blocks:
            blocks += _text_blocks(text, place)
            blocks += item.blocks
            text = []
        else:
            text.append(item)
    return blocks + _text_blocks(text, place)


def _text_blocks(items: Sequence[Item], place: Placer) -> list[Table | Line]:
    if not items:
        return []
    size = _usual_size(items)
    bands = _bands(items)
    blocks: list[Table | Line] = []
    start = 0
    while start < len(bands):
        end = _table_end(bands, start, size)
        if end == start:
            end = _fine_table_end(bands, start, size)
        if end > start:
            blocks.append(_loose_table(bands[start:end], place))
            start = end
        else:
            blocks += [_line(row, size, place) for row in bands[start].rows]
            start += 1
    return blocks


@dataclass(frozen=True, slots=True)
class _Band:
    """Rows of items that overlap in height: one row of a table, or one line of text."""

    rows: tuple[tuple[Item, ...], ...]

    @property
    def items(self) -> list[Item]:
        return [item for row in self.rows for item in row]

    @property
    def segments(self) -> list[list[Word]]:
        return stacked([item.words for item in self.items])

    @property
    def fine_segments(self) -> list[list[Word]]:
        return stacked([part for item in self.items for part in split_at_gaps(item.words, is_fine_gap)])

    @property
    def top(self) -> float:
        return min(item.box[1] for item in self.items)

    @property
    def bottom(self) -> float:
        return max(item.box[3] for item in self.items)

    @property
    def size(self) -> float:
        return max(item.size for item in self.items)

    @property
    def level(self) -> float:
        return sum(item.level for item in self.items) / len(self.items)


def _bands(items: Sequence[Item]) -> list[_Band]:
    rows = _rows(items)
    row_of = {id(word): row for row in rows for item in row for word in item.words}
    bands = bands_of([[word for item in row for word in item.words] for row in rows])
    return [_Band(tuple(tuple(row_of[id(line[0])]) for line in band)) for band in bands]


def _bands_joined(bands: Sequence[_Band]) -> list[list[_Band]]:
    """Rows of a table, each of one or more bands: what goes on below a row stands nearer to it than the next row."""
    full = [band for band in bands if len(band.segments) > 1]
    pitch = min((below.level - above.level for above, below in zip(full, full[1:], strict=False)), default=0.0)
    gaps = sorted(below.top - above.bottom for above, below in zip(bands, bands[1:], strict=False))
    usual = gaps[len(gaps) // 2] if gaps else 0.0
    groups: list[list[_Band]] = []
    for band in bands:
        before = groups[-1][-1] if groups else None
        if before is not None and _continues(before, band, pitch, usual):
            groups[-1].append(band)
        else:
            groups.append([band])
    return groups


def _continues(before: _Band, band: _Band, pitch: float, usual: float) -> bool:
    if len(band.segments) == 1 and band.level - before.level < 0.75 * pitch:
        return True
    gap, segments = band.top - before.bottom, band.segments
    begins = segments[0][0].text
    if len(segments) == 1 and goes_on(begins) and len(begins) > 3 and gap < 1.1 * usual:
        return True
    return gap < 0.6 * usual and (len(segments) < len(before.segments) or goes_on(begins))


def _rows(items: Sequence[Item]) -> list[list[Item]]:
    """Items on a level, from left to right."""
    of_word = {id(word): item for item in items for word in item.words}
    rows = []
    for line in in_lines([word for item in items for word in item.words]):
        seen: dict[int, Item] = {}
        for word in line:
            item = of_word[id(word)]
            seen.setdefault(id(item), item)
        rows.append(list(seen.values()))
    return _each_once(rows)


def _each_once(rows: Sequence[Sequence[Item]]) -> list[list[Item]]:
    seen: set[int] = set()
    result = []
    for row in rows:
        fresh = [item for item in row if id(item) not in seen]
        seen |= {id(item) for item in fresh}
        if fresh:
            result.append(fresh)
    return result


def _line(row: Sequence[Item], size: float, place: Placer) -> Line:
    segments = tuple(Segment(joined(item.words), place(item.box), confidence_of(item.words)) for item in row)
    words = [word for item in row for word in item.words]
    together = all(after.box[0] - before.box[2] < TITLE_GAP * size for before, after in zip(row, row[1:], strict=False))
    heading = together and (all(word.bold for word in words) or min(word.size for word in words) > 1.15 * size)
    return Line(segments, place(union(item.box for item in row)), heading)


def _table_end(bands: Sequence[_Band], start: int, size: float) -> int:
    """Index behind the last band of a table that begins at this one; its own index where none begins."""
    if len(bands[start].segments) < 2:
        return start
    end, several = start, 0
    last_full = start
    while end < len(bands):
        if end > start and bands[end].top - bands[end - 1].bottom > 2.2 * size:
            break
        if len(bands[end].segments) >= 2:
            if not 0.7 < bands[end].size / bands[start].size < 1.4 and several > 1:
                break
            several += 1
            last_full = end + 1
        elif end - last_full >= 2 or _is_heading(bands[end], size):
            break
        end += 1
    end = _longest_in_columns(bands, start, last_full)
    if end == start:
        return start
    columns = columns_of([band.segments for band in bands[start:end]])
    pitch = (bands[end - 1].level - bands[start].level) / (end - start - 1)
    while end < len(bands) and _is_rest_of_column(bands[end - 1], bands[end], columns, pitch):
        end += 1
    if end < len(bands) and len(bands[end].segments) == 1:
        end += len(_bands_joined(bands[start : end + 1])[-1]) > 1
    return end


def _is_rest_of_column(before: _Band, band: _Band, columns: Sequence[Span], pitch: float) -> bool:
    """Tell whether a lone text at a table's foot stands in a column other than the first, at the pitch of the rows."""
    if len(band.segments) != 1 or band.level - before.level > 1.2 * pitch:
        return False
    span = span_of(band.segments[0])
    touched = [index for index, column in enumerate(columns) if overlap(span, column) > 0]
    return len(touched) == 1 and touched[0] > 0 and span[0] > columns[touched[0]][0] - 0.3 * band.size


def _fine_table_end(bands: Sequence[_Band], start: int, size: float) -> int:
    """Index behind the last band of a table of narrow columns that begins at this one; else its own index."""
    end = start
    while end < len(bands) and len(bands[end].fine_segments) > 1 and bands[end].size < 1.15 * size:
        if end > start and bands[end].top - bands[end - 1].bottom > 1.5 * size:
            break
        end += 1
    while end - start >= 4:
        words = [[word for item in band.items for word in item.words] for band in bands[start:end]]
        if fine_columns_of([sorted(line, key=lambda word: word.x0) for line in words]):
            return end
        end -= 1
    return start


def _is_heading(band: _Band, size: float) -> bool:
    return all(word.bold for item in band.items for word in item.words) or band.size > 1.15 * size


def _longest_in_columns(bands: Sequence[_Band], start: int, end: int) -> int:
    """Index behind the most bands from the start that stand in columns; the start where that is fewer than three."""
    while end - start >= 3:
        lines = [band.segments for band in bands[start:end]]
        full = [line for line in lines if len(line) > 1]
        columns = columns_of(lines)
        if len(full) >= 3 and len(columns) > 1 and _fits(full, columns):
            return end
        end -= 1
        while end > start and len(bands[end - 1].segments) < 2:
            end -= 1
    return start


def _fits(lines: Sequence[Sequence[list[Word]]], columns: Sequence[tuple[float, float]]) -> bool:
    """Tell whether nearly all segments stand in a column of their own."""
    good = sum(len(placed(line, columns)) >= len(line) for line in lines)
    begins = [overlap(span_of(line[0]), columns[0]) > 0 for line in lines]
    return good >= 0.8 * len(lines) and sum(begins) >= 0.5 * len(lines)


def _loose_table(bands: Sequence[_Band], place: Placer) -> Table:
    left = min(item.box[0] for band in bands for item in band.items)
    right = max(item.box[2] for band in bands for item in band.items)
    groups = _bands_joined(bands)
    tops = [group[0].top for group in groups]
    bottoms = [group[-1].bottom for group in groups]
    borders = [tops[0], *[(bottom + top) / 2 for bottom, top in zip(bottoms, tops[1:], strict=False)], bottoms[-1]]
    pieces = []
    for index, group in enumerate(groups):
        box = (left, borders[index], right, borders[index + 1])
        words = tuple(word for band in group for item in band.items for word in item.words)
        pieces.append(Piece(GridCell(index, 0, 1, 1, box), words))
    return table_of(pieces, place, ruled=False)
