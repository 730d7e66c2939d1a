"""The picture of a page with a box round what was read, for PDFs and pictures; other kinds have words only."""

from __future__ import annotations

import hashlib
import io
import threading
from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING

from extract.model import SpecSheet, Where

if TYPE_CHECKING:
    from PIL.Image import Image

POINTS_PER_INCH, DOTS_PER_INCH = 72, 150
# A page is drawn no wider than this: a scan can be of any size.
WIDEST = 1700
# The library serves one thread at a time, and each person at the page has a thread.
_one_at_a_time = threading.Lock()
BOX_COLOUR, PAD = (91, 63, 143), 3.0


@dataclass(frozen=True)
class Pictured:
    """A page with its box drawn, and the part round the box, to be read without a glass (None: no box)."""

    page: Image
    close_up: Image | None


def page_picture(data: bytes, sheet: SpecSheet, where: Where) -> Pictured | None:
    """The page that `where` names with its box drawn; None where the kind of file has no picture.

    A box counts in points of a PDF page and pixels of a picture, from the top left as a viewer shows the page.
    """
    if sheet.kind == "pdf" and where.page is not None:
        page, scale = _pdf_page(data, where.page), DOTS_PER_INCH / POINTS_PER_INCH
    elif sheet.kind == "image":
        page, scale = _picture(data), 1.0
    else:
        return None
    if page.width > WIDEST:
        ratio = WIDEST / page.width
        page, scale = page.resize((WIDEST, round(page.height * ratio))), scale * ratio
    if where.box is None:
        return Pictured(page, None)
    box = [end * scale for end in where.box]
    _draw_box(page, box, scale)
    return Pictured(page, _close_up(page, box))


def _close_up(page: Image, box: list[float]) -> Image:
    """Most of a page wide and more to the left than to the right, so that the row's label stands in it."""
    x0, top, x1, bottom = box
    width = min(max(0.75 * page.width, 1.2 * (x1 - x0)), page.width)
    height = min(max(0.26 * width, 1.6 * (bottom - top)), page.height)
    left = min(max((x0 + x1) / 2 - 0.7 * width, 0), page.width - width)
    upper = min(max((top + bottom - height) / 2, 0), page.height - height)
    return page.crop((round(left), round(upper), round(left + width), round(upper + height)))


def sheet_bytes(sheet: SpecSheet) -> bytes | None:
    """The file of a sheet that was opened by its name; None where it is gone or no longer the one that was read."""
    try:
        data = Path(sheet.file).read_bytes()
    except OSError:
        return None
    return data if hashlib.sha256(data).hexdigest() == sheet.sha256 else None


def page_count(data: bytes, kind: str) -> int:
    """How many pages there are to show; 0 where the kind of file has no picture or it cannot be opened."""
    if kind == "image":
        return 1
    if kind != "pdf":
        return 0
    import pypdfium2

    with _one_at_a_time:
        try:
            with pypdfium2.PdfDocument(data) as document:
                return len(document)
        except pypdfium2.PdfiumError:
            return 0


def _pdf_page(data: bytes, number: int) -> Image:
    import pypdfium2

    with _one_at_a_time, pypdfium2.PdfDocument(data) as document:
        page = document[number - 1]
        picture: Image = page.render(scale=DOTS_PER_INCH / POINTS_PER_INCH).to_pil().convert("RGB")
        page.close()
    return picture


def _picture(data: bytes) -> Image:
    from PIL import Image as Pillow
    from PIL import ImageOps

    with Pillow.open(io.BytesIO(data)) as opened:
        upright = ImageOps.exif_transpose(opened)
        return upright.convert("RGB")


def _draw_box(page: Image, box: list[float], scale: float) -> None:
    from PIL import ImageDraw

    pad = PAD * scale
    x0, top, x1, bottom = box[0] - pad, box[1] - pad, box[2] + pad, box[3] + pad
    width = max(2, round(1.6 * scale))
    ImageDraw.Draw(page).rectangle((x0, top, max(x1, x0 + 1), max(bottom, top + 1)), outline=BOX_COLOUR, width=width)
