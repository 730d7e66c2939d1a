"""A page's glyphs and drawn lines from pdfium alone, in a tenth of pdfplumber's time; None for a page in any doubt.

pdfium puts characters in the order of running text, leaves out what it takes for printed twice, and adds spaces. So
only plain pages are read here: upright type whose characters are known and whose objects are all there.
"""

from __future__ import annotations

import ctypes
from dataclasses import dataclass, field
from functools import cache
from typing import Any, NamedTuple

from extract.documents.glyphs import Glyph
from extract.documents.pdf_page import ABOVE, BELOW, WHITE, Frame
from extract.documents.shapes import Shape, rulings_of, shape_of
from extract.documents.symbols import is_broken, is_symbol_font
from extract.documents.words import Ruling

# Forms inside forms: a page with deeper ones is in doubt.
DEEPEST = 8
# pdfium's mark in place of a hyphen at a line's end.
HYPHEN = "\ufffe"
# Characters that pdfium sets from right to left, and so in another order.
_LEFTWARD = ("\u0590", "\u08ff"), ("\ufb1d", "\ufdff"), ("\ufe70", "\ufefc")


class DoubtError(Exception):
    """What the page holds that only pdfplumber reads well."""


class _Matrix(NamedTuple):
    """From (x, y) to (ax + cy + e, bx + dy + f)."""

    a: float
    b: float
    c: float
    d: float
    e: float
    f: float

    def then(self, outer: _Matrix) -> _Matrix:
        a, b, c, d, e, f = self
        oa, ob, oc, od, oe, of = outer
        moved = (e * oa + f * oc + oe, e * ob + f * od + of)
        return _Matrix(a * oa + b * oc, a * ob + b * od, c * oa + d * oc, c * ob + d * od, *moved)


_IDENTITY = _Matrix(1.0, 0.0, 0.0, 1.0, 0.0, 0.0)


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
    seen: bool = False


def quick_content(page: Any, frame: Frame, text_page: Any) -> tuple[list[Glyph], list[Ruling]] | None:
    """Glyphs in the order in which the page draws them, and drawn lines, as pdfplumber gives them; None if in doubt."""
    if frame.rotation:
        return None
    calls = _calls()
    if calls is None:
        return None
    reader = _Reader(calls, frame)
    try:
        reader.look_through(_handle(page), _IDENTITY, 0)
        glyphs = reader.glyphs(_handle(text_page))
    except DoubtError:
        return None
    return glyphs, rulings_of(reader.shapes, *frame.size)


def _handle(helper: Any) -> int:
    return ctypes.cast(helper.raw, ctypes.c_void_p).value or 0


class _Calls:
    """pdfium's functions that take and give whole numbers for handles, in half the time of those for objects."""

    def __init__(self, raw: Any) -> None:
        def plain(name: str, result: Any, *takes: Any) -> Any:
            address = ctypes.cast(getattr(raw, name), ctypes.c_void_p).value or 0
            return ctypes.CFUNCTYPE(result, *takes)(address)

        handle, number, size = ctypes.c_void_p, ctypes.c_int, ctypes.c_ulong
        whole, out = ctypes.c_size_t, ctypes.c_void_p
        self.count_objects = plain("FPDFPage_CountObjects", number, handle)
        self.object_at = plain("FPDFPage_GetObject", handle, handle, number)
        self.count_form_objects = plain("FPDFFormObj_CountObjects", number, handle)
        self.form_object_at = plain("FPDFFormObj_GetObject", handle, handle, size)
        self.kind = plain("FPDFPageObj_GetType", number, handle)
        self.matrix = plain("FPDFPageObj_GetMatrix", number, handle, out)
        self.bounds = plain("FPDFPageObj_GetBounds", number, handle, out, out, out, out)
        self.count_marks = plain("FPDFPageObj_CountMarks", number, handle)
        self.mark = plain("FPDFPageObj_GetMark", handle, handle, size)
        self.mark_value_kind = plain("FPDFPageObjMark_GetParamValueType", number, handle, ctypes.c_char_p)
        self.fill_colour = plain("FPDFPageObj_GetFillColor", number, handle, out, out, out, out)
        self.font = plain("FPDFTextObj_GetFont", handle, handle)
        self.font_size = plain("FPDFTextObj_GetFontSize", number, handle, out)
        self.font_name = plain("FPDFFont_GetBaseFontName", whole, handle, out, whole)
        self.draw_mode = plain("FPDFPath_GetDrawMode", number, handle, out, out)
        self.count_segments = plain("FPDFPath_CountSegments", number, handle)
        self.segment = plain("FPDFPath_GetPathSegment", handle, handle, number)
        self.point = plain("FPDFPathSegment_GetPoint", number, handle, out, out)
        self.segment_kind = plain("FPDFPathSegment_GetType", number, handle)
        self.closes = plain("FPDFPathSegment_GetClose", number, handle)
        self.count_chars = plain("FPDFText_CountChars", number, handle)
        self.code = plain("FPDFText_GetUnicode", ctypes.c_uint, handle, number)
        self.text = plain("FPDFText_GetText", number, handle, number, number, out)
        self.text_object = plain("FPDFText_GetTextObject", handle, handle, number)
        self.loose_box = plain("FPDFText_GetLooseCharBox", number, handle, number, out)
        self.origin = plain("FPDFText_GetCharOrigin", number, handle, number, out, out)
        self.has_no_map = plain("FPDFText_HasUnicodeMapError", number, handle, number)


@cache
def _calls() -> _Calls | None:
    """The functions; None for a pdfium too old to have all of them."""
    from pypdfium2 import raw

    try:
        return _Calls(raw)
    except AttributeError:
        return None


class _Reader:
    """Reads one page."""

    def __init__(self, calls: _Calls, frame: Frame) -> None:
        self._calls, self._frame = calls, frame
        self._fonts: dict[int, _Font] = {}
        self._objects: dict[int, _TextObject] = {}
        self.shapes: list[Shape] = []
        self._reals = [ctypes.c_float() for _ in range(4)]
        self._whole = [ctypes.c_uint() for _ in range(4)]
        self._real_places = [ctypes.addressof(real) for real in self._reals]
        self._whole_places = [ctypes.addressof(whole) for whole in self._whole]

    # --- objects

    def look_through(self, holder: int, outer: _Matrix, depth: int) -> None:
        """Take in the objects of a page, or of a form with the matrix round it."""
        calls = self._calls
        count, at = (
            (calls.count_form_objects, calls.form_object_at) if depth else (calls.count_objects, calls.object_at)
        )
        for index in range(count(holder)):
            item = at(holder, index)
            kind = calls.kind(item)
            if kind == _TEXT:
                self._take_text(item, outer)
            elif kind == _PATH:
                self._take_path(item, outer)
            elif kind == _FORM:
                if depth == DEEPEST:
                    raise DoubtError("forms inside forms")
                self.look_through(item, self._matrix(item).then(outer), depth + 1)

    def _matrix(self, item: int) -> _Matrix:
        values = (ctypes.c_float * 6)()
        self._calls.matrix(item, ctypes.addressof(values))
        return _Matrix(*values)

    def _take_text(self, item: int, outer: _Matrix) -> None:
        calls = self._calls
        a, b, c, d, _, _ = self._matrix(item).then(outer)
        if a <= 0 or d <= 0 or abs(b) + abs(c) > 1e-4 * d:
            raise DoubtError("turned type")
        for index in range(calls.count_marks(item)):
            if calls.mark_value_kind(calls.mark(item, index), b"ActualText"):
                raise DoubtError("text in place of what is drawn")
        calls.font_size(item, self._real_places[0])
        size = self._reals[0].value * d
        if size <= 0:
            raise DoubtError("turned type")
        self._objects[item] = _TextObject(len(self._objects), self._font(calls.font(item)), size, item)

    def _font(self, handle: int) -> _Font:
        if handle not in self._fonts:
            self._fonts[handle] = self._new_font(handle)
        return self._fonts[handle]

    def _new_font(self, handle: int) -> _Font:
        calls = self._calls
        buffer = ctypes.create_string_buffer(256)
        calls.font_name(handle, ctypes.addressof(buffer), 256)
        name = buffer.value.decode("utf-8", "replace")
        if not name:
            raise DoubtError("font drawn by procedures")
        if is_symbol_font(name) or any(sign in name.lower() for sign in ("dingbat", "wingding", "webding")):
            raise DoubtError("font of signs")
        return _Font(name)

    def _take_path(self, item: int, outer: _Matrix) -> None:
        calls = self._calls
        fill_place, stroke_place = self._whole_places[:2]
        calls.draw_mode(item, fill_place, stroke_place)
        fill, stroke = bool(self._whole[0].value), bool(self._whole[1].value)
        if not (fill or stroke):
            return
        colour = self._colour(item) if fill else None
        a, b, c, d, e, f = self._matrix(item).then(outer)
        left, _, _, up = self._frame.crop
        e, f = e - left, up - f
        x_real, y_real = self._reals[:2]
        x_place, y_place = self._real_places[:2]
        points: list[tuple[float, float]] = []
        bends = 0
        closed = False
        for index in range(calls.count_segments(item)):
            segment = calls.segment(item, index)
            kind = calls.segment_kind(segment)
            if kind == _MOVE and points:
                self._add(points, closed, stroke, colour)
                points, closed, bends = [], False, 0
            if kind == _BEND:
                bends += 1
                if bends % 3:
                    continue
            calls.point(segment, x_place, y_place)
            x, y = x_real.value, y_real.value
            points.append((a * x + c * y + e, f - b * x - d * y))
            closed = bool(calls.closes(segment))
        self._add(points, closed, stroke, colour)

    def _add(self, points: list[tuple[float, float]], closed: bool, stroke: bool, colour: str | None) -> None:
        if len(points) > 1:
            self.shapes.append(shape_of(points, closed=closed, stroke=stroke, colour=colour))

    def _colour(self, item: int) -> str | None:
        if not self._calls.fill_colour(item, *self._whole_places):
            return "a pattern"
        red, green, blue = (whole.value for whole in self._whole[:3])
        if min(red, green, blue) >= 255 * (1 - WHITE):
            return None
        return f"{red} {green} {blue}"

    # --- characters

    def glyphs(self, text_page: int) -> list[Glyph]:
        """Glyphs of all text objects in their order."""
        found = self._chars(text_page)
        for item in self._objects.values():
            if not item.seen:
                if self._shows(item):
                    raise DoubtError("text that pdfium leaves out")
                # Nothing but spaces, which part words.
                box = self._box_of(item)
                found.append((item.place, Glyph(" ", box, item.size, item.font.name, 0, box[3])))
        found.sort(key=lambda each: each[0])
        width, height = self._frame.size
        return [
            glyph
            for _, glyph in found
            if not (glyph.box[2] < 0 or glyph.box[3] < 0 or glyph.box[0] > width or glyph.box[1] > height)
        ]

    def _box_of(self, item: _TextObject) -> tuple[float, float, float, float]:
        self._calls.bounds(item.handle, *self._real_places)
        x0, y0, x1, y1 = (real.value for real in self._reals)
        left, _, _, up = self._frame.crop
        return (x0 - left, up - y1, x1 - left, up - y0)

    def _shows(self, item: _TextObject) -> bool:
        x0, top, x1, bottom = self._box_of(item)
        return x1 - x0 > 0.01 and bottom - top > 0.01

    def _chars(self, text_page: int) -> list[tuple[int, Glyph]]:
        calls = self._calls
        left, _, _, up = self._frame.crop
        rect, origin = (ctypes.c_float * 4)(), (ctypes.c_double * 2)()
        rect_place, x_place = ctypes.addressof(rect), ctypes.addressof(origin)
        y_place = x_place + ctypes.sizeof(ctypes.c_double)
        object_of, box_of, origin_of, objects = calls.text_object, calls.loose_box, calls.origin, self._objects
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
            origin_of(text_page, index, x_place, y_place)
            x, y = origin[0], origin[1]
            if x == last_x and y == last_y and handle == last:
                # Characters of one glyph: a ligature.
                before = found[-1][1]
                found[-1] = (item.place, before._replace(text=before.text + text))
                continue
            last, last_x, last_y = handle, x, y
            item.seen = True
            box_of(text_page, index, rect_place)
            base = up - y
            size = item.size
            box = (x - left, base - ABOVE * size, rect[2] - left, base + BELOW * size)
            found.append((item.place, Glyph(text, box, size, font.name, 0, base)))
        return found

    def _text(self, text_page: int) -> str:
        """One character for each that pdfium counts."""
        calls = self._calls
        count = calls.count_chars(text_page)
        buffer = ctypes.create_string_buffer(2 * count + 2)
        written = calls.text(text_page, 0, count, ctypes.addressof(buffer)) - 1
        text = buffer.raw[: 2 * max(written, 0)].decode("utf-16-le", "surrogatepass")
        if len(text) == count and not any("\ud800" <= character <= "\udfff" for character in text):
            return text
        return "".join(chr(calls.code(text_page, index)) for index in range(count))

    def _known(self, text_page: int, index: int, text: str, font: _Font) -> str:
        """The character, when it is sound in that font."""
        if text == HYPHEN:
            return "-"
        leftward = any(first <= text <= last for first, last in _LEFTWARD)
        if leftward or is_broken(text) or text < " " or self._calls.has_no_map(text_page, index):
            raise DoubtError("a character without a sure meaning")
        font.sound.add(text)
        return text


_TEXT, _PATH, _FORM = 1, 2, 5
_MOVE, _BEND = 2, 1
