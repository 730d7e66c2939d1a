"""Single glyphs of a page -> words: struck twice, torn, letter-spaced, lowered and raised ones put right."""

from __future__ import annotations

import re
from bisect import bisect_left, bisect_right
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from functools import lru_cache
from typing import NamedTuple

from extract.documents import marks
from extract.documents.symbols import translated
from extract.documents.words import Box, Ruling, Word, is_cjk, turned, turned_back

# Characters of a lowered or raised mark: "nom", "*1)", "stg", "OPR"; longer ones are words in small type.
LONGEST_MARK = 6
LEADING_MARK = re.compile(r"\(?\d{1,2}\)?|\*\d?\)?|[†‡]")
# Points: a longer line underlines words, not one sign.
LONGEST_UNDERLINE = 14.0
UNDERLINED = {"<": "≤", ">": "≥"}


class Glyph(NamedTuple):
    """One character as drawn, in points from the top left of the page as shown.

    `base` is the baseline's distance from the top or, for sideways text, from the edge that is the top when it is read.
    """

    text: str
    box: Box
    size: float
    font: str
    angle: int = 0
    base: float = 0.0


@dataclass(slots=True)
class _Run:
    """A word in the making, in the frame in which it reads from left to right."""

    text: str
    x0: float
    top: float
    x1: float
    bottom: float
    size: float
    base: float
    bold: bool
    # Distance between the last two letters.
    spacing: float = 0.0

    def extend(self, text: str, box: Box) -> None:
        """Go on with a letter."""
        x0, top, x1, bottom = box
        self.spacing = x0 - self.x1
        self.text += text
        self.x0 = min(self.x0, x0)
        self.x1 = max(self.x1, x1)
        self.top = min(self.top, top)
        self.bottom = max(self.bottom, bottom)

    def take(self, other: _Run, text: str) -> None:
        self.text = text
        self.x0, self.x1 = min(self.x0, other.x0), max(self.x1, other.x1)
        self.top, self.bottom = min(self.top, other.top), max(self.bottom, other.bottom)


def with_underlined_signs(glyphs: Sequence[Glyph], rulings: Sequence[Ruling]) -> list[Glyph]:
    """Glyphs with < and > that have a short line drawn under them as ≤ and ≥."""
    short = [ruling for ruling in rulings if ruling.horizontal and ruling.x1 - ruling.x0 < LONGEST_UNDERLINE]
    if not short:
        return list(glyphs)
    return [
        glyph._replace(text=UNDERLINED[glyph.text])
        if glyph.text in UNDERLINED and any(_is_under(ruling, glyph) for ruling in short)
        else glyph
        for glyph in glyphs
    ]


def _is_under(ruling: Ruling, glyph: Glyph) -> bool:
    x0, _, x1, _ = glyph.box
    shared = min(x1, ruling.x1) - max(x0, ruling.x0)
    return shared > 0.6 * (x1 - x0) and -0.1 * glyph.size < ruling.top - glyph.base < 0.3 * glyph.size


def words_of(glyphs: Sequence[Glyph], width: float, height: float, rulings: Sequence[Ruling] = ()) -> list[Word]:
    """Words of a page of that size (as shown), each in the page's own frame with the angle at which it reads.

    An upright line drawn between two letters parts words, however near they stand: narrow cells of a table.
    """
    words: list[Word] = []
    fences = _Fences(rulings)
    for angle in sorted({glyph.angle for glyph in glyphs}):
        chosen = [glyph for glyph in glyphs if glyph.angle == angle]
        if angle:
            chosen = [glyph._replace(box=turned(glyph.box, angle, width, height)) for glyph in chosen]
        runs = _runs_put_right(chosen, _Fences(()) if angle else fences)
        words += [_word(run, angle, width, height) for run in runs]
    return words


class _Fences:
    """Upright lines, to be asked whether one stands between two letters."""

    def __init__(self, rulings: Sequence[Ruling]) -> None:
        upright = [ruling for ruling in rulings if not ruling.horizontal and ruling.bottom - ruling.top > 5]
        self._lines = sorted(upright, key=lambda ruling: ruling.x0)
        self._xs = [ruling.x0 for ruling in self._lines]

    def between(self, left: _Run, right: _Run) -> bool:
        return self.between_ends(left, right.x0)

    def between_ends(self, left: _Run, start: float) -> bool:
        """Whether a line stands between a run and what starts there."""
        xs = self._xs
        first = bisect_left(xs, left.x1 - 0.3)
        if first == len(xs) or xs[first] > start + 0.3:
            return False
        middle = (left.top + left.bottom) / 2
        last = bisect_right(xs, start + 0.3)
        return any(line.top <= middle <= line.bottom for line in self._lines[first:last])


def _word(run: _Run, angle: int, width: float, height: float) -> Word:
    box = turned_back((run.x0, run.top, run.x1, run.bottom), angle, width, height)
    return Word(run.text, *box, size=run.size, angle=angle, baseline=None if angle else run.base, bold=run.bold)


def _runs_put_right(glyphs: Sequence[Glyph], fences: _Fences) -> list[_Run]:
    runs = _runs(_struck_once(glyphs), fences)
    runs = _same_line_neighbours(runs, fences)
    runs = _letter_spaced(runs, fences)
    return _marks_attached(runs, fences)


def _struck_once(glyphs: Iterable[Glyph]) -> list[Glyph]:
    """Leave out glyphs that are printed again over themselves, to make type bold or to shade it."""
    # By row of two points, by character, by column of two points: the place.
    rows: dict[int, dict[str, dict[int, tuple[float, float]]]] = {}
    kept: list[Glyph] = []
    for glyph in glyphs:
        text, (x, y, x1, _), size, _, _, _ = glyph
        if text.isspace():
            kept.append(glyph)
            continue
        row, column = int(y // 2), int(x // 2)
        # Thin letters stand close together: "ll" must not become "l".
        near = min(max(0.12 * size, 0.3), 0.45 * max(x1 - x, 0.1))
        for step in (row, row - 1, row + 1):
            letters = rows.get(step)
            alike = letters.get(text) if letters is not None else None
            if alike is not None and _is_near(alike, column, x, y, near):
                break
        else:
            rows.setdefault(row, {}).setdefault(text, {})[column] = (x, y)
            kept.append(glyph)
    return kept


def _is_near(places: dict[int, tuple[float, float]], column: int, x: float, y: float, near: float) -> bool:
    for step in (column, column - 1, column + 1):
        place = places.get(step)
        if place is not None and abs(x - place[0]) < near and abs(y - place[1]) < near:
            return True
    return False


@lru_cache(maxsize=1024)
def _is_bold(font: str) -> bool:
    return bool(re.search(r"bold|black|heavy|demi", font, re.I))


def _runs(glyphs: Sequence[Glyph], fences: _Fences) -> list[_Run]:
    """Words in the order in which the page draws them, so that lines printed over one another stay apart."""
    spaces = sum(glyph.text.isspace() for glyph in glyphs)
    spaced = spaces > 0.03 * len(glyphs)
    runs: list[_Run] = []
    last: _Run | None = None
    broken = True
    for glyph in glyphs:
        printed, box, size, font, _, base = glyph
        text = translated(printed, font)
        if not text.strip():
            broken = True
            continue
        if (
            last is not None
            and not broken
            and _continues(last, glyph, text, spaced)
            and not fences.between_ends(last, box[0])
        ):
            last.extend(text, box)
        else:
            run = _Run(text, *box, size, base, _is_bold(font))
            if last is not None and abs(last.base - run.base) < 0.1 * run.size:
                run.spacing = last.spacing
            runs.append(run)
            last = run
        broken = False
    return runs


def _continues(run: _Run, glyph: Glyph, text: str, spaced: bool) -> bool:
    size = run.size
    _, box, own_size, _, _, base = glyph
    if abs(base - run.base) > 0.1 * size or abs(own_size - size) > 0.12 * size:
        return False
    gap = box[0] - run.x1
    if gap < -0.6 * size:
        return False
    # Less than a space in any case, or as loose as the letters before.
    if gap < 0.2 * size or (run.spacing > 0.06 * size and gap < 1.25 * run.spacing):
        return True
    last, first = run.text[-1], text[0]
    if spaced and last.isalpha() and first.isalpha() and not (is_cjk(last) or is_cjk(first)):
        # Where the page sets its spaces as characters, a gap without one inside letters is loose type, no space.
        return gap < (0.5 if first.islower() == last.islower() or first.islower() else 0.2) * size
    return False


def _same_line_neighbours(runs: Sequence[_Run], fences: _Fences) -> list[_Run]:
    """Join runs that touch on one baseline although they were drawn at different times."""
    joined: list[_Run] = []
    for run in sorted(runs, key=lambda run: (round(run.base, 1), run.x0)):
        last = joined[-1] if joined else None
        touching = (
            last is not None
            and abs(run.base - last.base) < 0.1 * run.size
            and abs(run.size - last.size) < 0.12 * run.size
            and -0.1 * run.size < run.x0 - last.x1 < 0.06 * run.size
        )
        if last is not None and touching and not fences.between(last, run):
            last.take(run, last.text + run.text)
        else:
            joined.append(run)
    return joined


def _letter_spaced(runs: Sequence[_Run], fences: _Fences) -> list[_Run]:
    """Join letters set apart with a space each: four or more single letters at even gaps."""
    joined: list[_Run] = []
    start = 0
    while start < len(runs):
        end = start + 1
        while end < len(runs) and _next_letter(runs[start : end + 1]) and not fences.between(runs[end - 1], runs[end]):
            end += 1
        if end - start >= 4:
            first = runs[start]
            for run in runs[start + 1 : end]:
                first.take(run, first.text + run.text)
            joined.append(first)
        else:
            joined += runs[start:end]
        start = end
    return joined


def _next_letter(letters: Sequence[_Run]) -> bool:
    last, new = letters[-2], letters[-1]
    if any(len(run.text) != 1 or not run.text.isalpha() or is_cjk(run.text) for run in (last, new)):
        return False
    if abs(new.base - last.base) > 0.1 * last.size or abs(new.size - last.size) > 0.1 * last.size:
        return False
    gap = new.x0 - last.x1
    if not 0 < gap < 1.0 * last.size:
        return False
    gaps = [b.x0 - a.x1 for a, b in zip(letters[:-2], letters[1:-1], strict=True)]
    return not gaps or gap < 1.5 * max(gaps) + 0.1 * last.size


# A raised "-6" behind "10" is known by its place, where small print leaves it little smaller than its neighbours.
SMALL_EXPONENT = 0.93
_EXPONENT = re.compile(r"[-−–]\d{1,2}")


def _marks_attached(runs: Sequence[_Run], fences: _Fences) -> list[_Run]:
    """Join lowered and raised small type to the word that it stands behind."""
    largest = max((run.size for run in runs), default=0.0)
    by_end = sorted(runs, key=lambda run: run.x1)
    ends = [run.x1 for run in by_end]
    taken: set[int] = set()
    for mark in sorted(runs, key=lambda run: run.x0):
        if mark.size > (SMALL_EXPONENT if _EXPONENT.fullmatch(mark.text) else 0.85) * largest:
            continue
        if len(mark.text) > LONGEST_MARK:
            continue
        first = bisect_left(ends, mark.x0 - 3 * largest)
        last = bisect_right(ends, mark.x0 + 0.35 * largest)
        host = _host(mark, by_end[first:last], taken)
        if host is None or _goes_on(mark, runs) or fences.between(host, mark):
            continue
        if mark.base > host.base:
            text = host.text + marks.lowered(mark.text)
        else:
            text = _with_raised(host.text, mark.text, _before(host, runs))
        host.take(mark, text)
        taken.add(id(mark))
    kept = [run for run in runs if id(run) not in taken]
    leading = set()
    for run in kept:
        small = run.size < 0.85 * largest and LEADING_MARK.fullmatch(run.text)
        led = _led_by(run, kept) if small else None
        if led is not None:
            led.take(run, f"{marks.raised(run.text, '').strip()} {led.text}")
            leading.add(id(run))
    kept = [run for run in kept if id(run) not in leading]
    # What goes on behind a mark without a space ("ppm/°C²/year") is the same word.
    return _same_line_neighbours(kept, fences)


def _goes_on(mark: _Run, runs: Sequence[_Run]) -> bool:
    """Tell whether the small word belongs to a line of small type rather than to a bigger word."""
    return any(
        other is not mark
        and abs(other.base - mark.base) < 0.1 * mark.size
        and abs(other.size - mark.size) < 0.1 * mark.size
        and 0 <= mark.x0 - other.x1 < 0.5 * mark.size
        for other in runs
    )


def _host(mark: _Run, runs: Sequence[_Run], taken: set[int]) -> _Run | None:
    """Give the bigger word right before a small one whose baseline is shifted; None where there is none."""
    best: _Run | None = None
    for run in runs:
        small = SMALL_EXPONENT if run.text.endswith("10") and _EXPONENT.fullmatch(mark.text) else 0.85
        if run is mark or id(run) in taken or mark.size > small * run.size or run.x0 > mark.x0:
            continue
        gap, shift = mark.x0 - run.x1, mark.base - run.base
        near = -0.35 * run.size < gap < 0.3 * run.size
        shifted = 0.08 * run.size < shift < 0.62 * run.size or -0.75 * run.size < shift < -0.15 * run.size
        if near and shifted and (best is None or abs(shift) < abs(mark.base - best.base)):
            best = run
    return best


def _before(host: _Run, runs: Sequence[_Run]) -> str:
    """Text up to the end of the host word: what stands right before it decides whether a mark is an exponent."""
    left = [
        run
        for run in runs
        if run is not host and abs(run.base - host.base) < 0.1 * host.size and 0 <= host.x0 - run.x1 < host.size
    ]
    nearest = max(left, key=lambda run: run.x1, default=None)
    return f"{nearest.text} {host.text}" if nearest else host.text


def _with_raised(text: str, mark: str, before: str) -> str:
    """Text with a raised mark; a small raised letter o is how some sheets print the degree sign."""
    return text + ("°" if mark in {"o", "º", "°"} else marks.raised(mark, before))


def _led_by(mark: _Run, runs: Sequence[_Run]) -> _Run | None:
    """Give the bigger word that a loose raised mark stands before, at a footnote's beginning; else None."""
    for other in runs:
        near = -0.1 * other.size < other.x0 - mark.x1 < 0.6 * other.size
        raised = 0.15 * other.size < other.base - mark.base < 0.75 * other.size
        if other is not mark and mark.size < 0.85 * other.size and near and raised:
            return other
    return None
