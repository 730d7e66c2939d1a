"""A page's glyphs and drawn lines from pdfium alone, in a tenth of pdfplumber's time; None for a page in any doubt.

pdfium puts characters in the order of running text, leaves out what it takes for printed twice, and adds spaces. So
only plain pages are read here: upright type whose characters are known and whose objects are all there.
"""

from __future__ import annotations

import ctypes
from dataclasses import dataclass, field
from operator import itemgetter
from typing import Any

from extract.documents.glyphs import Glyph
from extract.documents.pdf_page import ABOVE, BELOW, WHITE, Frame
from extract.documents.pdfium import (
    BEND,
    IDENTITY,
    MOVE,
    PATH,
    TEXT,
    Matrix,
    bounds_of,
    calls,
    handle_of,
    matrix_of,
    objects_of,
)
from extract.documents.shapes import Shape, rulings_of, shape_of
from extract.documents.symbols import is_broken, is_symbol_font
from extract.documents.words import Box, Ruling

# Forms inside forms.
DEEPEST = 8
# pdfium's mark in place of a hyphen at a line's end.
HYPHEN = "\ufffe"
# What parts words; where it stands is of no matter.
_SPACE = Glyph(" ", (0.0, 0.0, 0.0, 0.0), 0.0, "")
# Characters that pdfium sets from right to left, and so in another order.
_LEFTWARD = ("\u0590", "\u08ff"), ("\ufb1d", "\ufdff"), ("\ufe70", "\ufefc")


class DoubtError(Exception):
    """What the page holds that only pdfplumber reads well."""


@dataclass(slots=True)
class _Font:
    """A font and the characters in it that are known to be sound."""

    name: str
    sound: set[str] = field(default_factory=set)


@dataclass(slots=True)
class _TextObject:
    """A piece of text with one font and size, `place` counting in the order in which the page draws."""

    place: int
    font: _Font
    size: float
    handle: int
    outer: Matrix
    seen: bool = False


def quick_content(page: Any, frame: Frame, text_page: Any) -> tuple[list[Glyph], list[Ruling]] | None:
    """Glyphs in the order in which the page draws them, and drawn lines, as pdfplumber gives them; None if in doubt."""
    if frame.rotation or not calls().complete:
        return None
    reader = _Reader(frame)
    try:
        reader.look_through(handle_of(page))
        glyphs = reader.glyphs(handle_of(text_page))
    except DoubtError:
        return None
    return glyphs, rulings_of(reader.shapes, *frame.size)


class _Reader:
    """Reads one page."""

    def __init__(self, frame: Frame) -> None:
        self._calls, self._frame = calls(), frame
        self._fonts: dict[int, _Font] = {}
        self._objects: dict[int, _TextObject] = {}
        self.shapes: list[Shape] = []
        self._reals, self._wholes = (ctypes.c_float * 2)(), (ctypes.c_uint * 4)()
        self._six = (ctypes.c_float * 6)()
        self._six_place = ctypes.addressof(self._six)
        self._real, self._whole = ctypes.addressof(self._reals), ctypes.addressof(self._wholes)

    # --- objects

    def look_through(self, page: int) -> None:
        """Take in the objects of a page."""
        for item, kind, outer in objects_of(page, DEEPEST):
            if kind == TEXT:
                self._take_text(item, outer)
            elif kind == PATH:
                self._take_path(item, outer)

    def _take_text(self, item: int, outer: Matrix) -> None:
        call = self._calls
        values = self._six
        call.matrix(item, self._six_place)
        a, b, c, d = values[0], values[1], values[2], values[3]
        if outer is not IDENTITY:
            a, b, c, d, _, _ = Matrix(*values).then(outer)
        if a <= 0 or d <= 0 or abs(b) + abs(c) > 1e-4 * d:
            raise DoubtError("turned type")
        for index in range(call.count_marks(item)):
            if call.mark_value_kind(call.mark(item, index), b"ActualText"):
                raise DoubtError("text in place of what is drawn")
        call.font_size(item, self._real)
        size = self._reals[0] * d
        if size <= 0:
            raise DoubtError("turned type")
        self._objects[item] = _TextObject(len(self._objects), self._font(call.font(item)), size, item, outer)

    def _font(self, handle: int) -> _Font:
        if handle not in self._fonts:
            self._fonts[handle] = self._new_font(handle)
        return self._fonts[handle]

    def _new_font(self, handle: int) -> _Font:
        buffer = ctypes.create_string_buffer(256)
        self._calls.font_name(handle, ctypes.addressof(buffer), 256)
        name = buffer.value.decode("utf-8", "replace")
        if not name:
            raise DoubtError("font drawn by procedures")
        if is_symbol_font(name) or any(sign in name.lower() for sign in ("dingbat", "wingding", "webding")):
            raise DoubtError("font of signs")
        return _Font(name)

    def _take_path(self, item: int, outer: Matrix) -> None:
        call, wholes, reals = self._calls, self._wholes, self._reals
        call.draw_mode(item, self._whole, self._whole + 4)
        fill, stroke = bool(wholes[0]), bool(wholes[1])
        if not (fill or stroke):
            return
        colour = self._colour(item) if fill else None
        a, b, c, d, e, f = matrix_of(item).then(outer)
        left, _, _, up = self._frame.crop
        e, f = e - left, up - f
        points: list[tuple[float, float]] = []
        bends, closed = 0, False
        for index in range(call.count_segments(item)):
            segment = call.segment(item, index)
            kind = call.segment_kind(segment)
            if kind == MOVE and points:
                self._add(points, closed, stroke, colour)
                points, closed, bends = [], False, 0
            if kind == BEND:
                # Two points that draw the curve, then the one where it ends.
                bends += 1
                if bends % 3:
                    continue
            call.point(segment, self._real, self._real + 4)
            x, y = reals[0], reals[1]
            points.append((a * x + c * y + e, f - b * x - d * y))
            closed = bool(call.closes(segment))
        self._add(points, closed, stroke, colour)

    def _add(self, points: list[tuple[float, float]], closed: bool, stroke: bool, colour: str | None) -> None:
        if len(points) > 1:
            self.shapes.append(shape_of(points, closed=closed, stroke=stroke, colour=colour))

    def _colour(self, item: int) -> str | None:
        place = self._whole
        if not self._calls.fill_colour(item, place, place + 4, place + 8, place + 12):
            return "a pattern"
        red, green, blue, _ = self._wholes
        return None if min(red, green, blue) >= 255 * (1 - WHITE) else f"{red} {green} {blue}"

    # --- characters

    def glyphs(self, text_page: int) -> list[Glyph]:
        """Glyphs of all text objects in their order."""
        found = self._chars(text_page)
        for item in self._objects.values():
            if not item.seen:
                if self._shows(item):
                    raise DoubtError("text that pdfium leaves out")
                # Nothing but spaces, which part words.
                found.append((item.place, Glyph(" ", self._box_of(item), item.size, item.font.name)))
        found.sort(key=itemgetter(0))
        return [glyph for _, glyph in found]

    def _box_of(self, item: _TextObject) -> Box:
        x0, y0, x1, y1 = bounds_of(item.handle)
        left, _, _, up = self._frame.crop
        (x0, y0), (x1, y1) = item.outer.point(x0, y0), item.outer.point(x1, y1)
        return (min(x0, x1) - left, up - max(y0, y1), max(x0, x1) - left, up - min(y0, y1))

    def _shows(self, item: _TextObject) -> bool:
        x0, top, x1, bottom = self._box_of(item)
        return x1 - x0 > 0.01 and bottom - top > 0.01

    def _chars(self, text_page: int) -> list[tuple[int, Glyph]]:
        call = self._calls
        left, _, _, up = self._frame.crop
        width, height = self._frame.size
        rect, origin = (ctypes.c_float * 4)(), (ctypes.c_double * 2)()
        rect_place, x_place = ctypes.addressof(rect), ctypes.addressof(origin)
        y_place = x_place + ctypes.sizeof(ctypes.c_double)
        object_of, box_of, origin_of, objects = call.text_object, call.loose_box, call.origin, self._objects
        found: list[tuple[int, Glyph]] = []
        last, last_x, last_y = 0, 0.0, 0.0
        for index, text in enumerate(self._text(text_page)):
            handle = object_of(text_page, index)
            if not handle:
                # A space or a line's end that pdfium adds.
                continue
            item = objects.get(handle)
            if item is None:
                raise DoubtError("text of an unknown object")
            font = item.font
            if text not in font.sound:
                text = self._known(text_page, index, text, font)  # noqa: PLW2901
            item.seen = True
            if text == " ":
                found.append((item.place, _SPACE))
                continue
            origin_of(text_page, index, x_place, y_place)
            x, y = origin[0], origin[1]
            if x == last_x and y == last_y and handle == last:
                # Characters of one glyph: a ligature.
                before = found[-1][1]
                found[-1] = (item.place, before._replace(text=before.text + text))
                continue
            box_of(text_page, index, rect_place)
            base, size = up - y, item.size
            x0, top, x1, bottom = x - left, base - ABOVE * size, rect[2] - left, base + BELOW * size
            if x1 < 0 or bottom < 0 or x0 > width or top > height:
                last = 0
                continue
            last, last_x, last_y = handle, x, y
            found.append((item.place, Glyph(text, (x0, top, x1, bottom), size, font.name, 0, base)))
        return found

    def _text(self, text_page: int) -> str:
        """One character for each that pdfium counts."""
        call = self._calls
        count = call.count_chars(text_page)
        buffer = ctypes.create_string_buffer(2 * count + 2)
        written = call.text(text_page, 0, count, ctypes.addressof(buffer)) - 1
        text = buffer.raw[: 2 * max(written, 0)].decode("utf-16-le", "surrogatepass")
        if len(text) == count and not any("\ud800" <= character <= "\udfff" for character in text):
            return text
        return "".join(chr(call.code(text_page, index)) for index in range(count))

    def _known(self, text_page: int, index: int, text: str, font: _Font) -> str:
        """The character, when it is sound in that font."""
        if text == HYPHEN:
            return "-"
        leftward = any(first <= text <= last for first, last in _LEFTWARD)
        if leftward or is_broken(text) or text < " " or self._calls.has_no_map(text_page, index):
            raise DoubtError("a character without a sure meaning")
        font.sound.add(text)
        return text
