"""Columns that are held together by spaces or tabs alone: lines of typewriter text to tables."""

from __future__ import annotations

import re
import unicodedata
from collections.abc import Sequence
from dataclasses import dataclass

from extract.documents.model import Cell, Table
from extract.model import Where

LEAST_LINES = 3
_GAP = re.compile(r"[ \u00a0]{2,}|\u3000+|\t+")
_LEADER = re.compile(
    r"(?<=[^\s.·…_])\s?(?:\.{3,}|…{2,}|·{3,}|(?:\s\.){3,}|_{4,})\s*(?=\S)|(?<=[^\W\d])\s\.\s(?=[-+±−]?\d)"
)
_NUMBER_ENDS = re.compile(r"(?:\d|℃|°\s?C?)\s*$")
_NUMBER_STARTS = re.compile(r"\s*[+\-−–±]?\s*\d")
_RULE_SIGNS = frozenset("-=_─━*+|│")


@dataclass(frozen=True, slots=True)
class Piece:
    """A run of words and the printed positions that it covers, `end` not included."""

    text: str
    start: int
    end: int


def is_rule(text: str) -> bool:
    """Whether a line is only drawn: dashes, equals signs, the border of a box."""
    drawn = "".join(text.split())
    return len(drawn) >= 3 and _RULE_SIGNS.issuperset(drawn)


def printed_width(text: str) -> int:
    """Positions that a text covers; East Asian signs are two wide."""
    return sum(
        0 if unicodedata.combining(character) else 2 if unicodedata.east_asian_width(character) in "WF" else 1
        for character in text
    )


def pieces(text: str) -> list[Piece]:
    """Runs of words of a line, parted by tabs, by two or more spaces, a wide space or leader dots."""
    text = _LEADER.sub(_without_dots, text.expandtabs(8))
    found, position = [], 0
    for match in re.finditer(_GAP.pattern + r"|$", text):
        run = text[position : match.start()]
        if run.strip():
            start = printed_width(text[:position]) + len(run) - len(run.lstrip())
            found.append(Piece(run.strip(), start, printed_width(text[: match.start()])))
        position = match.end()
    return found


def _without_dots(leader: re.Match[str]) -> str:
    """A leader as a gap; three dots from one number to the next are a range and stay."""
    before, after = leader.string[: leader.start()], leader.string[leader.end() :]
    few = leader.group().strip() in ("...", "…", "……", ". . .")
    if few and _NUMBER_ENDS.search(before) and _NUMBER_STARTS.match(after):
        return leader.group()
    return " " * max(2, len(leader.group()))


def by_position(lines: Sequence[tuple[int, str]]) -> Table | None:
    """A table of lines (number, text) whose pieces stand in common columns, or None where they do not."""
    printed = [(number, pieces(text)) for number, text in lines if not is_rule(text)]
    if len(printed) < LEAST_LINES:
        return None
    columns = _columns([row for _, row in printed])
    if len(columns) < 2 or not _holds(printed, columns):
        return None
    cells: list[Cell] = []
    for row, (number, found) in enumerate(printed):
        cells.extend(_row_cells(row, Where(line=number), found, columns))
    return Table(tuple(cells), len(printed), len(columns), Where(line=printed[0][0]), ruled=False)


def by_tabs(lines: Sequence[tuple[int, str]]) -> Table | None:
    """A table of lines with the same number of tabs in each, or None."""
    rows = [(number, text.split("\t")) for number, text in lines]
    width = len(rows[0][1])
    if width < 2 or len(rows) < 2 or any(len(texts) != width for _, texts in rows):
        return None
    cells = [
        Cell(text.strip(), row, column, Where(line=number))
        for row, (number, texts) in enumerate(rows)
        for column, text in enumerate(texts)
        if text.strip()
    ]
    return Table(tuple(cells), len(rows), width, Where(line=rows[0][0]), ruled=False)


def _columns(rows: Sequence[Sequence[Piece]]) -> list[tuple[int, int]]:
    """Stretches of positions that are printed on, parted where (almost) no line prints; a stray title may cross."""
    width = max((piece.end for row in rows for piece in row), default=0)
    cover = [0] * (width + 1)
    for row in rows:
        for piece in row:
            for position in range(piece.start, piece.end):
                cover[position] += 1
    may_cross = len(rows) // 6
    columns: list[tuple[int, int]] = []
    start = None
    for position, count in enumerate(cover):
        if count > may_cross and start is None:
            start = position
        elif count <= may_cross and start is not None:
            columns.append((start, position))
            start = None
    strays = [
        (piece.start, piece.end)
        for row in rows
        for piece in row
        if not any(piece.start < end and start < piece.end for start, end in columns)
    ]
    return _merged(sorted(columns + strays))


def _merged(stretches: Sequence[tuple[int, int]]) -> list[tuple[int, int]]:
    merged: list[tuple[int, int]] = []
    for start, end in stretches:
        if merged and start < merged[-1][1]:
            merged[-1] = (merged[-1][0], max(end, merged[-1][1]))
        else:
            merged.append((start, end))
    return merged


def _holds(printed: Sequence[tuple[int, Sequence[Piece]]], columns: Sequence[tuple[int, int]]) -> bool:
    """Whether the lines really share the columns: most lines fill two or more, most columns are filled repeatedly."""
    filled = [0] * len(columns)
    full_lines = crowded = 0
    for _, row in printed:
        touched = {index for piece in row for index in _touched(piece, columns)}
        full_lines += len(touched) > 1
        crowded += len(row) > len(touched)
        for index in touched:
            filled[index] += 1
    if crowded * 4 > len(printed):
        return False
    shared = full_lines * 3 >= len(printed) * 2 and sum(count > 1 for count in filled) >= 2
    return shared and any(_is_aligned([row for _, row in printed], column) for column in columns[1:])


def _is_aligned(rows: Sequence[Sequence[Piece]], column: tuple[int, int]) -> bool:
    """Whether most pieces in a column start, end or are centred at the same position."""
    own = [piece for row in rows for piece in row if column[0] <= piece.start and piece.end <= column[1]]
    if len(own) < 2:
        return False
    edges = ([piece.start for piece in own], [piece.end for piece in own], [(p.start + p.end) // 2 for p in own])
    return any(max(sum(abs(one - other) <= 1 for other in edge) for one in edge) * 5 >= 3 * len(own) for edge in edges)


def _touched(piece: Piece, columns: Sequence[tuple[int, int]]) -> list[int]:
    return [index for index, (start, end) in enumerate(columns) if piece.start < end and start < piece.end]


def _row_cells(row: int, where: Where, found: Sequence[Piece], columns: Sequence[tuple[int, int]]) -> list[Cell]:
    cells: list[Cell] = []
    for piece in found:
        touched = _touched(piece, columns)
        if cells and cells[-1].column + cells[-1].column_span > touched[0]:
            before = cells.pop()
            span = max(touched[-1] + 1 - before.column, before.column_span)
            cells.append(Cell(f"{before.text}  {piece.text}", row, before.column, where, column_span=span))
        else:
            cells.append(Cell(piece.text, row, touched[0], where, column_span=len(touched)))
    return cells
