"""Lines that belong together: wrapped paragraphs, and pages whose labels, values and units were broken over lines."""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import replace

from extract.documents.model import Line
from extract.entries import Entry, Piece, Source
from extract.fold import fold
from extract.heads import is_unit
from extract.meaning import meaning
from extract.prose import is_label, pair_entries, split_pairs

WIDE = 45
LEAST_FRAGMENTS = 6
_BULLET = re.compile(r"^\s*(?:[•▪■◆●*·-]\s|\d{1,2}[.)]\s|\[|※)")
_TORN = re.compile(r"(?<=[a-zà-ÿ])-\s(?=[a-zà-ÿ])")
_OPEN_END = re.compile(r"(?:[\d±]|\b(?:to|over|of|at|and|bis|von|bei|und)|[~…(,/])\s*$")


def paragraph(lines: Sequence[Line], start: int) -> int:
    """How many lines from `start` on are one wrapped paragraph of prose; 1 where the next is a line of its own."""
    end = start
    while end < len(lines) and _is_prose(lines[end]) and (end == start or _follows(lines[end - 1], lines[end])):
        end += 1
        if len(lines[end - 1].text) < WIDE:
            break
    return end - start


def _is_prose(line: Line) -> bool:
    if len(line.segments) != 1 or line.heading or _BULLET.match(line.text) or line.text.lstrip().startswith(">"):
        return False
    pairs, rest = split_pairs(fold(line.text))
    return not pairs or bool(rest.strip())


def _follows(above: Line, line: Line) -> bool:
    """Whether two lines stand one right below the other, as far as their places tell."""
    if above.where.line is not None and line.where.line is not None:
        return line.where.line - above.where.line == 1
    return above.where.page == line.where.page


class Fragments:
    """Runs of lines that are pieces of labels, values and units; each run is looked at once."""

    def __init__(self, lines: Sequence[Line]) -> None:
        self._lines = lines
        self._end = 0
        self._broken: list[int] | None = None
        self._whole: list[int] | None = None

    def count(self, start: int) -> int:
        """How many lines from `start` on are such pieces; 0 where most lines stand by themselves."""
        if start >= self._end:
            self._end, self._broken, self._whole = self._run_end(start), None, None
        size = self._end - start
        if size < LEAST_FRAGMENTS:
            return 0
        broken = self._broken_from(start)
        if broken < 3 or broken < 0.15 * size or self._whole_from(start) > broken:
            return 0
        return size if is_label(_first_words(self._lines[start : start + 2])) else 0

    def _run_end(self, start: int) -> int:
        end = start
        while end < len(self._lines) and _may_be_fragment(self._lines[end]):
            end += 1
        return end

    def _broken_from(self, start: int) -> int:
        """How many lines from `start` to the end of its run say nothing by themselves."""
        if self._broken is None:
            self._broken = [0]
            for index in range(self._end - 1, start - 1, -1):
                below = self._lines[index + 1] if index + 1 < self._end else None
                self._broken.append(self._broken[-1] + _is_broken(self._lines[index], below))
        return self._broken[self._end - start]

    def _whole_from(self, start: int) -> int:
        """How many lines from `start` to the end of its run are a label with its value and nothing else."""
        if self._whole is None:
            self._whole = [0]
            for index in range(self._end - 1, start - 1, -1):
                self._whole.append(self._whole[-1] + _is_whole(self._lines[index]))
        return self._whole[self._end - start]


def _is_whole(line: Line) -> bool:
    pairs, rest = split_pairs(fold(line.text))
    return len(pairs) == 1 and not rest.strip() and any(character.isdigit() for character in pairs[0][1])


def _may_be_fragment(line: Line) -> bool:
    text = line.text
    return not line.heading and len(text) <= 70 and not _BULLET.match(text) and not text.lstrip().startswith(">")


def _first_words(run: Sequence[Line]) -> str:
    """A run of fragments begins with a label, on one line or two."""
    first = fold(run[0].text)
    if is_label(first):
        return first
    two = f"{first} {fold(run[1].text)}"
    words = two.split()
    return next(
        (" ".join(words[:count]) for count in range(len(words), 0, -1) if is_label(" ".join(words[:count]))), first
    )


def _is_broken(line: Line, below: Line | None) -> bool:
    """A line that says nothing without its neighbour: a unit, a bound word, a value with its unit on the next line."""
    text = fold(line.text)
    if split_pairs(text)[0]:
        return False
    known = meaning(text)
    if is_unit(text) or known.role in ("min", "typ", "max"):
        return True
    if below is None:
        return False
    next_text = fold(below.text)
    if _OPEN_END.search(text) and not is_label(next_text):
        return True
    half = not known.known and not known.value and not is_label(next_text)
    return half and is_label(f"{text} {next_text}")


def stream_entries(lines: Sequence[Line], source: Source) -> list[Entry]:
    """What the lines say when they are read as one text; each value in the place of its own line."""
    text = fold(_TORN.sub("", " ".join(line.text for line in lines)))
    found = pair_entries(Piece(text, lines[0].where))
    placed: list[Entry] = []
    at = 0
    for entry in found:
        values = []
        for value in entry.values:
            line, at = _line_of(value.piece.text, lines, at)
            values.append(replace(value, piece=Piece(value.piece.text, line.where, _sure(line))))
        placed.append(replace(entry, values=tuple(values), source=entry.source if source == "prose" else source))
    return placed


def _sure(line: Line) -> float:
    return min((segment.confidence for segment in line.segments), default=1.0)


_NUMBER = re.compile(r"[-+±]?\d+(?:[.,]\d+)*")
_UNIT_BEHIND = re.compile(r"\s?[^\s\d,;]*")


def _line_of(text: str, lines: Sequence[Line], start: int) -> tuple[Line, int]:
    """The first line from `start` on that holds the first number of a text, if possible with the unit behind it."""
    number = _NUMBER.search(text)
    if number is not None:
        unit = _UNIT_BEHIND.match(text, number.end())
        for printed in (number[0] + (unit[0] if unit else ""), number[0]):
            whole = re.compile(rf"(?<![\d.,]){re.escape(printed)}(?![\d])")
            for index in range(start, len(lines)):
                if whole.search(fold(lines[index].text)):
                    return lines[index], index
    return lines[start if start < len(lines) else 0], start
