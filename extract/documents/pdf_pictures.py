"""What of a PDF page is a picture: scans, pictures with a hidden text layer, tables pasted as pictures."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

from extract.documents.pdf_page import Frame
from extract.documents.words import Box

# Share of the page from which a picture counts as holding the page's content.
LARGE = 0.2
# Share of the page from which a picture is the page.
WHOLE = 0.7
# Drawn shapes from which a page without text is taken as text drawn in outlines.
OUTLINES = 60
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
    from pypdfium2 import raw

    width, height = frame.size
    boxes, area, paths, modes = [], 0.0, 0, set()
    for item in page.get_objects(max_depth=4):
        if item.type == raw.FPDF_PAGEOBJ_IMAGE:
            box = _shown(item.get_bounds(), frame)
            share = (box[2] - box[0]) * (box[3] - box[1]) / (width * height)
            area += share
            if share > LARGE and min(item.get_px_size()) >= LEAST_PIXELS:
                boxes.append(box)
        elif item.type == raw.FPDF_PAGEOBJ_PATH:
            paths += 1
        elif item.type == raw.FPDF_PAGEOBJ_TEXT:
            modes.add(raw.FPDFTextObj_GetTextRenderMode(item))
    return Pictures(tuple(boxes), area, paths, modes == {raw.FPDF_TEXTRENDERMODE_INVISIBLE})


def _shown(bounds: tuple[float, float, float, float], frame: Frame) -> Box:
    (x0, y0), (x1, y1) = frame.shown(*bounds[:2]), frame.shown(*bounds[2:])
    return (min(x0, x1), min(y0, y1), max(x0, x1), max(y0, y1))
