"""Columns told from where words stand, in tables whose lines are drawn only in part or not at all."""

from __future__ import annotations

from collections.abc import Sequence

from extract.documents.words import Word, is_fine_gap, split_at_gaps

Span = tuple[float, float]
Segment = list[Word]

# Text sizes; less is the space inside a text, except where many lines leave it free.
NARROWEST_GUTTER = 0.4


def span_of(segment: Sequence[Word]) -> Span:
    """Left and right end of words on a line."""
    first = segment[0]
    return (first.x0, first.x1 if len(segment) == 1 else max(word.x1 for word in segment))


def columns_of(lines: Sequence[Sequence[Segment]], rows: Sequence[Sequence[Segment]] | None = None) -> list[Span]:
    """Columns that the segments of these lines stand in, from left to right; one column where they do not line up.

    A few lines may run across a gutter (a merged cell, a heading): one in five. A column has others beside it in a
    line, or where `rows` of several lines are given in a row: a wrapped number stands above and below its neighbours.
    """
    spans = [[span_of(segment) for segment in line] for line in lines]
    several = [line for line in spans if len(line) > 1]
    if len(several) < 2:
        return [_whole(spans)] if any(spans) else []
    columns = _covered([span for line in spans for span in line], int(0.2 * len(spans)))
    columns = _with_lonely(columns, [span for line in spans for span in line])
    beside = several if rows is None else [[span_of(segment) for segment in row] for row in rows]
    columns = [column for column in columns if _has_company(column, columns, beside)]
    return columns if len(columns) > 1 else [_whole(spans)]


def fine_columns_of(lines: Sequence[Sequence[Word]]) -> list[Span]:
    """Narrow columns: stripes that nearly all of four or more lines leave free; none where there are none."""
    split = [split_at_gaps(line, is_fine_gap) for line in lines]
    several = [line for line in split if len(line) > 1]
    if len(several) < 4 or len(several) < 0.5 * len(split):
        return []
    spans = [[span_of(segment) for segment in line] for line in split]
    columns = _covered([span for line in spans for span in line], int(0.34 * len(split)))
    # The second line of a wrapped cell stands in one column alone and says nothing against the others.
    alone = [line[0] for line in spans if len(line) == 1]
    if sum(1 for span in alone if not _inside_one(span, columns)) > 0.2 * len(split):
        return []
    merged = columns[:1]
    for column in columns[1:]:
        if sum(_part(line, merged[-1], column) for line in spans) >= 0.5 * len(spans):
            merged.append(column)
        else:
            merged[-1] = (merged[-1][0], column[1])
    return merged if len(merged) > 1 else []


def _inside_one(span: Span, columns: Sequence[Span]) -> bool:
    return len(columns) > 1 and sum(overlap(span, column) > 0 for column in columns) == 1


def _part(line: Sequence[Span], left: Span, right: Span) -> bool:
    """Tell whether the line has a text in each of two neighbouring columns."""
    return any(
        overlap(before, left) > 0
        and overlap(after, right) > 0
        and overlap(before, right) <= 0
        and overlap(after, left) <= 0
        for before, after in zip(line, line[1:], strict=False)
    )


def _whole(spans: Sequence[Sequence[Span]]) -> Span:
    flat = [span for line in spans for span in line]
    return (min(span[0] for span in flat), max(span[1] for span in flat))


def _covered(spans: Sequence[Span], allowed: int) -> list[Span]:
    """Stretches that more than the allowed number of spans cover."""
    events = sorted([(span[0], 1) for span in spans] + [(span[1], -1) for span in spans])
    stretches: list[Span] = []
    depth, start = 0, 0.0
    for position, step in events:
        before, depth = depth, depth + step
        if before <= allowed < depth:
            start = position
        elif depth <= allowed < before and position > start:
            stretches.append((start, position))
    return stretches


def _with_lonely(columns: Sequence[Span], spans: Sequence[Span]) -> list[Span]:
    """Columns with those added that hold too few texts to count as covered."""
    lonely = [span for span in spans if not any(overlap(span, column) > 0 for column in columns)]
    return sorted([*columns, *_covered(lonely, 0)])


def _has_company(column: Span, columns: Sequence[Span], lines: Sequence[Sequence[Span]]) -> bool:
    """Tell whether some line has a text in this column and another in a different one."""
    for line in lines:
        here = [span for span in line if overlap(span, column) > 0]
        if here and any(overlap(span, other) > 0 for span in line if span not in here for other in columns):
            return True
    return False


def overlap(one: Span, other: Span) -> float:
    """Length that two spans share; below zero the gap between them."""
    return min(one[1], other[1]) - max(one[0], other[0])


def borders_of(columns: Sequence[Span], left: float, right: float) -> list[float]:
    """Borders round columns: the outer ones as given, the inner ones in the middle of the gutters."""
    inner = [(before[1] + after[0]) / 2 for before, after in zip(columns, columns[1:], strict=False)]
    return [min(left, columns[0][0]), *inner, max(right, columns[-1][1])]


def placed(line: Sequence[Segment], columns: Sequence[Span]) -> list[tuple[int, int, Segment]]:
    """Segments of one line with the first and last column that each stands in.

    A segment is parted at a gutter where its words leave it free.
    """
    result: list[tuple[int, int, Segment]] = []
    for segment in line:
        for part in _parted(segment, columns):
            touched = _touched(span_of(part), columns)
            if result and result[-1][1] >= touched[0]:
                first, last, words = result[-1]
                result[-1] = (min(first, touched[0]), max(last, touched[1]), words + part)
            else:
                result.append((*touched, part))
    return result


def _touched(span: Span, columns: Sequence[Span]) -> tuple[int, int]:
    least = 0.12 * (span[1] - span[0])
    touched = [
        index
        for index, column in enumerate(columns)
        if overlap(span, column) > min(least, 0.5 * (column[1] - column[0]))
    ]
    if touched:
        return touched[0], touched[-1]
    nearest = max(range(len(columns)), key=lambda index: overlap(span, columns[index]))
    return nearest, nearest


def _parted(segment: Segment, columns: Sequence[Span]) -> list[Segment]:
    gutters = [(before[1], after[0]) for before, after in zip(columns, columns[1:], strict=False)]

    def parts(left: Word, right: Word) -> bool:
        gap = (left.x1, right.x0)
        wide_enough = gap[1] - gap[0] > NARROWEST_GUTTER * max(left.size, right.size)
        return wide_enough and any(overlap(gap, gutter) > 0 for gutter in gutters)

    return split_at_gaps(segment, parts)
