"""What of a PDF page is a picture: scans, pictures with a hidden text layer, tables pasted as pictures."""

from __future__ import annotations

import ctypes
from dataclasses import dataclass
from typing import Any

from extract.documents.pdf_page import Frame
from extract.documents.pdfium import IMAGE, INVISIBLE, PATH, TEXT, bounds_of, calls, handle_of, objects_of
from extract.documents.words import Box

# Share of the page from which a picture counts as holding the page's content.
LARGE = 0.2
# Share of the page from which a picture is the page.
WHOLE = 0.7
# Drawn shapes from which a page without text is taken as text drawn in outlines.
OUTLINES = 60
# Forms inside forms.
DEEPEST = 3
# Pixels: type in a smaller picture cannot be read, so it is a photo or a mark.
LEAST_PIXELS = 400


@dataclass(frozen=True, slots=True)
class Pictures:
    """What a page's objects are: the boxes of large pictures as shown, and whether all text is invisible."""

    boxes: tuple[Box, ...]
    share: float
    paths: int
    hidden_text: bool

    @property
    def instead_of_text(self) -> bool:
        """Whether a page without text must be a picture of text."""
        return self.share > LARGE or self.paths > OUTLINES

    @property
    def with_hidden_text(self) -> bool:
        """Whether the page is a scan to which a program has added the text that it recognised."""
        return self.share > WHOLE and self.hidden_text


def pictures_of(page: Any, frame: Frame) -> Pictures:
    """Look through the objects of a pypdfium2 page."""
    call = calls()
    width, height = frame.size
    boxes, area, paths, modes = [], 0.0, 0, set()
    for item, kind, outer in objects_of(handle_of(page), DEEPEST):
        if kind == IMAGE:
            x0, y0, x1, y1 = bounds_of(item)
            box = _shown((*outer.point(x0, y0), *outer.point(x1, y1)), frame)
            share = (box[2] - box[0]) * (box[3] - box[1]) / (width * height)
            area += share
            if share > LARGE and _pixels(item) >= LEAST_PIXELS:
                boxes.append(box)
        elif kind == PATH:
            paths += 1
        elif kind == TEXT:
            modes.add(call.text_mode(item))
    return Pictures(tuple(boxes), area, paths, modes == {INVISIBLE})


def _pixels(item: int) -> int:
    """Pixels of a picture's shorter side."""
    sides = (ctypes.c_uint * 2)()
    place = ctypes.addressof(sides)
    calls().pixels(item, place, place + ctypes.sizeof(ctypes.c_uint))
    return int(min(sides))


def _shown(bounds: Box, frame: Frame) -> Box:
    (x0, y0), (x1, y1) = frame.shown(*bounds[:2]), frame.shown(*bounds[2:])
    return (min(x0, x1), min(y0, y1), max(x0, x1), max(y0, y1))
