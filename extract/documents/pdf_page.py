"""One PDF page's glyphs and drawn lines, in points from the top left of the page as a viewer shows it.

Two libraries read the page: pdfplumber gives glyphs and lines; pdfium gives glyphs where pdfplumber finds none, since
it knows fonts that pdfplumber's parser does not. Neither's coordinates are a viewer's: both leave the crop box to the
caller.
"""

from __future__ import annotations

import ctypes
import math
from collections import Counter, defaultdict
from collections.abc import Iterable, Iterator
from dataclasses import dataclass
from typing import Any, NamedTuple

from extract.documents.glyphs import Glyph
from extract.documents.shapes import Kind, Shape, rulings_of
from extract.documents.words import Box, Ruling, union

# Shares of its size by which type reaches above and below its baseline.
ABOVE, BELOW = 0.78, 0.22
# Shares of a colour that nobody tells from white.
WHITE = 0.02
RawBox = tuple[float, float, float, float]


@dataclass(frozen=True, slots=True)
class Frame:
    """The part of a page that is shown, in PDF units (origin bottom left), and its rotation, clockwise in degrees."""

    crop: RawBox
    rotation: int

    @property
    def size(self) -> tuple[float, float]:
        """Width and height as shown."""
        width, height = self.crop[2] - self.crop[0], self.crop[3] - self.crop[1]
        return (height, width) if self.rotation in (90, 270) else (width, height)

    def offset(self, media: RawBox) -> tuple[float, float]:
        """How far right and down the shown page begins inside the whole, turned media box."""
        left, down, right, up = (abs(c - m) for c, m in zip(self.crop, media, strict=True))
        return {0: (left, up), 90: (down, left), 180: (right, down), 270: (up, right)}[self.rotation]

    def shown(self, x: float, y: float) -> tuple[float, float]:
        """Point of the page as shown for a point in PDF units."""
        left, down, right, up = self.crop
        return {
            0: (x - left, up - y),
            90: (y - down, x - left),
            180: (right - x, y - down),
            270: (up - y, right - x),
        }[self.rotation]


def _ordered(box: Iterable[float]) -> RawBox:
    x0, y0, x1, y1 = (float(value) for value in box)
    return (min(x0, x1), min(y0, y1), max(x0, x1), max(y0, y1))


def type_box(box: Box, origin: tuple[float, float], angle: int, size: float) -> Box:
    """Box from the advance in the reading direction and from the type size across it, where fonts tell odd heights."""
    x, y = origin
    return {
        90: (x - ABOVE * size, box[1], x + BELOW * size, box[3]),
        270: (x - BELOW * size, box[1], x + ABOVE * size, box[3]),
        180: (box[0], y - BELOW * size, box[2], y + ABOVE * size),
    }.get(angle, (box[0], y - ABOVE * size, box[2], y + BELOW * size))


# --- pdfplumber


def plumbed(page: Any, frame: Frame) -> tuple[list[Glyph], list[Ruling]]:
    """Glyphs and drawn lines of a pdfplumber page."""
    dx, dy = frame.offset(_ordered(page.page_obj.mediabox))
    left, top = page.bbox[0] + dx, page.bbox[1] + dy
    width, height = frame.size
    glyphs = []
    chars, shapes = _contents(page, left, top)
    descents = _descents(chars, page)
    for char in chars:
        box = (char.x0 - left, char.top - top, char.x1 - left, char.bottom - top)
        if box[2] < 0 or box[3] < 0 or box[0] > width or box[1] > height:
            continue
        a, b, _, _, e, f = char.matrix
        angle = round(math.degrees(math.atan2(b, a))) % 360
        base_x, base_y = page.bbox[0] + e - left, page.bbox[1] + page.height - f - top
        size = char.size if angle in (0, 180) else box[2] - box[0]
        if angle == 0:
            base_y = box[3] - descents[char.font] * size
            box = type_box(box, (base_x, base_y), 0, size)
        glyphs.append(Glyph(char.text, box, size, char.font, angle, _base(angle, base_x, base_y, width, height)))
    return glyphs, rulings_of(shapes, width, height)


class _Char(NamedTuple):
    """A character as pdfminer places it, the vertical from the top of the media box."""

    text: str
    x0: float
    top: float
    x1: float
    bottom: float
    size: float
    font: str
    upright: bool
    matrix: tuple[float, float, float, float, float, float]


def _contents(page: Any, left: float, above: float) -> tuple[list[_Char], list[Shape]]:
    """Characters and drawn shapes; pdfplumber's dictionary of each would cost more than reading it.

    Shapes are counted from `left` and `above`, which is where the shown page begins.
    """
    from pdfminer.layout import LTChar, LTCurve, LTLine, LTRect

    x, top = page.mediabox[0], page.height + page.mediabox[1]
    chars: list[_Char] = []
    shapes: list[Shape] = []
    for item in _leaves(page.layout):
        if isinstance(item, LTChar):
            name = item.fontname if isinstance(item.fontname, str) else item.fontname.decode("latin-1")
            place = (item.x0 + x, top - item.y1, item.x1 + x, top - item.y0)
            chars.append(_Char(item.get_text(), *place, item.size, name, item.upright, item.matrix))
        elif isinstance(item, LTCurve):
            kind: Kind = "line" if isinstance(item, LTLine) else "rect" if isinstance(item, LTRect) else "curve"
            points = [(px + x - left, top - py - above) for px, py in item.pts]
            shapes.append(Shape(kind, points, bool(item.stroke), _colour(item)))
    return chars, shapes


def _leaves(container: Any) -> Iterator[Any]:
    from pdfminer.layout import LTContainer

    for item in container:
        if isinstance(item, LTContainer):
            yield from _leaves(item)
        else:
            yield item


def _descents(chars: Iterable[_Char], page: Any) -> dict[str, float]:
    """For each font how far its boxes reach below the baseline, as a share of the size.

    The character's matrix leaves out the text rise by which many programs set sub- and superscripts; its box has it. So
    the usual distance between box and matrix is the font's, and the baseline is counted from the box.
    """
    seen: dict[str, Counter[float]] = {}
    for char in chars:
        if char.upright and char.size:
            base = page.bbox[1] + page.height - char.matrix[5]
            seen.setdefault(char.font, Counter())[round((char.bottom - base) / char.size, 2)] += 1
    return defaultdict(lambda: 0.22, {font: counts.most_common(1)[0][0] for font, counts in seen.items()})


def _base(angle: int, x: float, y: float, width: float, height: float) -> float:
    return {90: x, 270: width - x, 180: height - y}.get(angle, y)


def _colour(item: Any) -> str | None:
    """What a shape is filled with, as pdfminer tells it; None where it does not stand out from white paper."""
    colour = item.non_stroking_color
    if not item.fill:
        return None
    values = colour if isinstance(colour, list | tuple) else (colour,)
    numbers = [value for value in values if isinstance(value, int | float)]
    if len(numbers) == 4:
        white = all(value <= WHITE for value in numbers)
    else:
        white = bool(numbers) and all(value >= 1 - WHITE for value in numbers)
    return None if white else str(colour)


# --- pdfium


def pdfium_frame(page: Any) -> Frame:
    """Frame of a pypdfium2 page."""
    return Frame(_ordered(page.get_bbox()), page.get_rotation() % 360)


def pdfium_glyphs(page: Any, frame: Frame) -> list[Glyph]:
    """Glyphs of a pypdfium2 page."""
    from pypdfium2 import raw

    text_page = page.get_textpage()
    glyphs = []
    width, height = frame.size
    for index in range(text_page.count_chars()):
        code = raw.FPDFText_GetUnicode(text_page, index)
        if code in (0, 10, 13, 0xFFFE) or raw.FPDFText_IsGenerated(text_page, index) == 1:
            continue
        rect, x, y = raw.FS_RECTF(), ctypes.c_double(), ctypes.c_double()
        if not raw.FPDFText_GetLooseCharBox(text_page, index, rect):
            continue
        raw.FPDFText_GetCharOrigin(text_page, index, x, y)
        turn = math.degrees(raw.FPDFText_GetCharAngle(text_page, index))
        # pdfium counts the angle clockwise, the page's rotation likewise.
        angle = round(-turn - frame.rotation) % 360
        size = _size(raw, text_page, index)
        corner, other = frame.shown(rect.left, rect.top), frame.shown(rect.right, rect.bottom)
        box = type_box(union([(*corner, *corner), (*other, *other)]), frame.shown(x.value, y.value), angle, size)
        if box[2] < 0 or box[3] < 0 or box[0] > width or box[1] > height:
            continue
        base = _base(angle, *frame.shown(x.value, y.value), width, height)
        glyphs.append(Glyph(chr(code), box, size, _font_name(raw, text_page, index), angle, base))
    text_page.close()
    return glyphs


def _size(raw: Any, text_page: Any, index: int) -> float:
    matrix = raw.FS_MATRIX()
    raw.FPDFText_GetMatrix(text_page, index, matrix)
    return float(raw.FPDFText_GetFontSize(text_page, index)) * math.hypot(matrix.c, matrix.d)


def _font_name(raw: Any, text_page: Any, index: int) -> str:
    buffer = ctypes.create_string_buffer(128)
    raw.FPDFText_GetFontInfo(text_page, index, buffer, 128, ctypes.c_int())
    return buffer.value.decode("utf-8", "replace")


def pdfium_rulings(page: Any, frame: Frame) -> list[Ruling]:
    """Level and upright lines of a pypdfium2 page, for files that pdfplumber cannot open; not those inside forms."""
    from pypdfium2 import raw

    rulings = []
    for item in page.get_objects(filter=[raw.FPDF_PAGEOBJ_PATH], max_depth=1):
        fill, stroke = ctypes.c_int(), ctypes.c_int()
        raw.FPDFPath_GetDrawMode(item, fill, stroke)
        if fill.value or stroke.value:
            rulings += [_ruling(start, end, frame) for start, end in _segments(raw, item) if start != end]
    return [ruling for ruling in rulings if ruling is not None]


def _segments(raw: Any, item: Any) -> list[tuple[tuple[float, float], tuple[float, float]]]:
    """Straight pieces of a path, in PDF units."""
    matrix = item.get_matrix()
    pieces, start, last = [], (0.0, 0.0), (0.0, 0.0)
    for index in range(raw.FPDFPath_CountSegments(item)):
        segment = raw.FPDFPath_GetPathSegment(item, index)
        x, y = ctypes.c_float(), ctypes.c_float()
        raw.FPDFPathSegment_GetPoint(segment, x, y)
        point = matrix.on_point(x.value, y.value)
        kind = raw.FPDFPathSegment_GetType(segment)
        if kind == raw.FPDF_SEGMENT_MOVETO:
            start = point
        elif kind == raw.FPDF_SEGMENT_LINETO:
            pieces.append((last, point))
        last = point
        if raw.FPDFPathSegment_GetClose(segment):
            pieces.append((last, start))
    return pieces


def _ruling(start: tuple[float, float], end: tuple[float, float], frame: Frame) -> Ruling | None:
    (x0, y0), (x1, y1) = frame.shown(*start), frame.shown(*end)
    if min(abs(x1 - x0), abs(y1 - y0)) > 0.5:
        return None
    return Ruling(min(x0, x1), min(y0, y1), max(x0, x1), max(y0, y1))
