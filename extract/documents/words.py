"""Words with their places on one page, and how they are put together into text.

The forms that the layers above can rely on:

- A lowered mark is part of its word: C with a lowered 0 is `C0`, T with a lowered stg is `Tstg`.
- A raised exponent stays an exponent: `×10⁻⁶`, `ppm/°C²`, `m²` (superscript characters).
- A raised mark that points to a footnote stands apart behind its word: `60 ⁽²⁾` for a raised 2, `60 *2` for a raised
  *2, `60 †`. It is never glued to a number, so that 60 with a raised 2 cannot be read as 602. A footnote that begins
  with a raised mark begins with the same form: `⁽²⁾ 80 Ω for 10 to 12 MHz`.
- Ordinals are plain: `3rd`.
- Lines inside a cell are parted by a line feed, words by one space; text without spaces (Chinese, Japanese) stays
  whole.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable, Sequence
from dataclasses import dataclass, replace
from operator import attrgetter
from typing import NamedTuple

Box = tuple[float, float, float, float]

# A gap of this many text sizes parts segments. A space is 0.25 to 0.35; two or three spaces stay below.
WIDE_GAP = 0.8
# This much parts them where all lines of a table leave the same stripe free.
FINE_GAP = 0.42


@dataclass(frozen=True, slots=True)
class Word:
    """A run of characters without a space.

    The box is in points (pixels for a picture) from the top left; `size` is the type's height in the same unit.
    `angle` is 0 for upright text, 90 for text that reads upwards, 270 downwards, 180 upside down. `baseline` is
    measured down from the top of the page, for upright text; where it is not known, leave it out and the box decides.
    """

    text: str
    x0: float
    top: float
    x1: float
    bottom: float
    size: float
    angle: int = 0
    confidence: float = 1.0
    baseline: float | None = None
    bold: bool = False

    @property
    def box(self) -> Box:
        return (self.x0, self.top, self.x1, self.bottom)

    @property
    def line_y(self) -> float:
        """The baseline, or a good guess at it."""
        return self.baseline if self.baseline is not None else self.bottom - 0.22 * (self.bottom - self.top)

    @property
    def centre(self) -> tuple[float, float]:
        return (self.x0 + self.x1) / 2, (self.top + self.bottom) / 2


class Ruling(NamedTuple):
    """A straight horizontal or vertical line, or the edge of a filled area."""

    x0: float
    top: float
    x1: float
    bottom: float

    @property
    def horizontal(self) -> bool:
        return self.x1 - self.x0 >= self.bottom - self.top


def turned(box: Box, angle: int, width: float, height: float) -> Box:
    """Give the box as seen when the page (width x height before) is turned so that text of that angle is upright."""
    x0, top, x1, bottom = box
    if angle == 90:
        return (height - bottom, x0, height - top, x1)
    if angle == 270:
        return (top, width - x1, bottom, width - x0)
    if angle == 180:
        return (width - x1, height - bottom, width - x0, height - top)
    return box


def turned_back(box: Box, angle: int, width: float, height: float) -> Box:
    """Undo `turned`; width and height are the page's before turning."""
    x0, top, x1, bottom = box
    if angle == 90:
        return (top, height - x1, bottom, height - x0)
    if angle == 270:
        return (width - bottom, x0, width - top, x1)
    return turned(box, angle, width, height)


def turned_word(word: Word, angle: int, width: float, height: float) -> Word:
    """Give a word of that angle as an upright word of the turned page."""
    x0, top, x1, bottom = turned(word.box, angle, width, height)
    return replace(word, x0=x0, top=top, x1=x1, bottom=bottom, angle=0, baseline=None)


def union(boxes: Iterable[Box]) -> Box:
    """Give the least box round all; ValueError for none."""
    x0s, tops, x1s, bottoms = zip(*boxes, strict=True)
    return (min(x0s), min(tops), max(x1s), max(bottoms))


def inside(box: Box, outer: Box, slack: float = 1.0) -> bool:
    """Tell whether the box's centre lies in the outer box."""
    x, y = (box[0] + box[2]) / 2, (box[1] + box[3]) / 2
    return outer[0] - slack <= x <= outer[2] + slack and outer[1] - slack <= y <= outer[3] + slack


def in_lines(words: Sequence[Word]) -> list[list[Word]]:
    """Words put into lines by their baselines, top to bottom, each from left to right.

    A line is as tall as its words: two words share it when their baselines differ by less than 0.4 of the smaller size.
    """
    if len(words) < 2:
        return [list(words)] if words else []
    lines: list[list[Word]] = []
    anchor, size = 0.0, 0.0
    for word in sorted(words, key=_line_y):
        level = word.line_y
        if lines and abs(level - anchor) < 0.4 * min(word.size, size):
            lines[-1].append(word)
        else:
            lines.append([word])
            anchor, size = level, word.size
    for line in lines:
        if len(line) > 1:
            line.sort(key=_left)
    return lines


_line_y, _left = attrgetter("line_y"), attrgetter("x0")


def on_one_line(words: Sequence[Word]) -> bool:
    """Tell whether the words stand so level that any choice of them makes one line at most."""
    if len(words) < 2:
        return True
    levels = [word.line_y for word in words]
    return max(levels) - min(levels) < 0.4 * min(word.size for word in words)


def is_cjk(character: str) -> bool:
    """Tell whether the character belongs to a script that is set without spaces."""
    return "\u2e80" <= character <= "\u9fff" or "\uf900" <= character <= "\ufaff" or "\uff00" <= character <= "\uffef"


def _glue(left: Word, right: Word) -> str:
    gap = right.x0 - left.x1
    if is_cjk(left.text[-1]) and is_cjk(right.text[0]) and gap < 0.6 * left.size:
        return ""
    return " "


def joined(line: Sequence[Word]) -> str:
    """Text of words that stand on one line."""
    text = ""
    for index, word in enumerate(line):
        text += (_glue(line[index - 1], word) if index else "") + word.text
    return text


def text_of(words: Sequence[Word]) -> str:
    """Text of words that stand together (a cell), a line feed between lines; sideways ones along their lines."""
    if len(words) == 1:
        return words[0].text
    parts = []
    for angle in sorted({word.angle for word in words}):
        chosen = [word for word in words if word.angle == angle]
        if angle:
            chosen = [turned_word(word, angle, 0.0, 0.0) for word in chosen]
        parts += [joined(line) for line in in_lines(chosen)]
    return "\n".join(parts)


def confidence_of(words: Iterable[Word]) -> float:
    """Confidence of the least certain word; 1.0 for none."""
    return min([word.confidence for word in words], default=1.0)


def split_at_gaps(line: Sequence[Word], wide: Callable[[Word, Word], bool] | None = None) -> list[list[Word]]:
    """Words of one line, from left to right, parted where the gap is wide."""
    if len(line) == 1:
        return [list(line)]
    groups: list[list[Word]] = []
    for word in line:
        if groups and not (wide or is_wide_gap)(groups[-1][-1], word):
            groups[-1].append(word)
        else:
            groups.append([word])
    return groups


BULLETS = frozenset("•●▪■◆◇○·‣⁃∙")


def is_wide_gap(left: Word, right: Word) -> bool:
    """Tell whether two neighbours on a line stand apart; a bullet belongs to its text."""
    return _apart(left, right, WIDE_GAP)


def is_fine_gap(left: Word, right: Word) -> bool:
    """Tell whether two neighbours may stand in narrow columns."""
    return _apart(left, right, FINE_GAP)


def _apart(left: Word, right: Word, gap: float) -> bool:
    if left.text in BULLETS and right.x0 - left.x1 < 2.5 * left.size:
        return False
    return right.x0 - left.x1 > gap * max(left.size, right.size)
