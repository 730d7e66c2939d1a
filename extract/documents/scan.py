"""Pictures of sheets: image files, and page pictures of PDFs without text."""

from __future__ import annotations

import io
import warnings
from collections.abc import Callable, Iterator, Sequence
from typing import TYPE_CHECKING, Any

from extract.documents.model import Document, DocumentError, Line, Segment, Table
from extract.documents.words import Box, Ruling, Word
from extract.model import Note, Where

if TYPE_CHECKING:
    from extract.documents.recognise import TypeLine
    from extract.documents.straighten import Picture

WITHOUT_EXTRA = (
    "This is a picture, and the reading of pictures is not installed: install it with pip install "
    '"quartzfolio[ocr]", or give the sheet as PDF, XLSX, CSV, HTML, DOCX or text.'
)
_MOST_PAGES = 20
_LARGEST_SIDE = 5000
_LEAST_SIDE = 1000
_SURE = 0.85
_SAMPLE = 8
# Layout reckons in points; a page's longer side is taken as this many.
_PAGE_POINTS = 842.0


def read(data: bytes) -> Document:
    """Tables and lines of an image file; `where` is the page and the box in pixels."""
    blocks: list[Table | Line] = []
    for number, image in enumerate(_images(data), start=1):
        blocks.extend(read_blocks(image, _placer(number)))
    if not blocks:
        raise DocumentError("No text can be made out in the picture. Scan the sheet sharp, at 200 dpi or more.")
    note = Note(level="info", message="Read from a picture: compare every number with the picture.")
    return Document("image", tuple(blocks), scan=True, notes=(note,))


def read_blocks(image: Any, place: Callable[[Box], Where]) -> list[Table | Line]:
    """Tables and lines of a page's picture.

    Parameters
    ----------
    image
        A PIL image.
    place
        From a box in the image's pixels to its place in the file.

    Raises
    ------
    DocumentError
        The `ocr` extra is not installed.
    """
    from extract.documents.layout import arrange

    picture, words, rulings, stamps = _look(image)
    scale = _PAGE_POINTS / max(picture.width, picture.height)

    def placed(box: Box) -> Where:
        x0, top, x1, bottom = (value / scale for value in box)
        return place(picture.given_box((x0, top, x1, bottom)))

    blocks = arrange(
        [_scaled(word, scale) for word in words],
        [Ruling(*(value * scale for value in ruling)) for ruling in rulings],
        placed,
        width=picture.width * scale,
        height=picture.height * scale,
    )
    for stamp in stamps:
        where = place(picture.given_box(stamp.box))
        blocks.append(Line((Segment(stamp.text, where, stamp.confidence),), where))
    return blocks


def read_page(image: Any) -> list[Word]:
    """Words of a page's picture (a PIL image), with their boxes in its pixels and the recogniser's confidence."""
    from dataclasses import replace

    picture, words, _, stamps = _look(image)
    placed = []
    for word in [*words, *stamps]:
        x0, top, x1, bottom = picture.given_box(word.box)
        placed.append(replace(word, x0=x0, top=top, x1=x1, bottom=bottom))
    return placed


def _scaled(word: Word, scale: float) -> Word:
    return Word(
        word.text,
        word.x0 * scale,
        word.top * scale,
        word.x1 * scale,
        word.bottom * scale,
        word.size * scale,
        angle=word.angle,
        confidence=word.confidence,
    )


def _placer(number: int) -> Callable[[Box], Where]:
    def place(box: Box) -> Where:
        x0, top, x1, bottom = (round(value, 1) for value in box)
        return Where(page=number, box=(x0, top, x1, bottom))

    return place


def _images(data: bytes) -> Iterator[Any]:
    """The pages of an image file, turned as the camera says."""
    from PIL import Image, ImageOps, ImageSequence, UnidentifiedImageError

    try:
        with warnings.catch_warnings():
            warnings.simplefilter("error", Image.DecompressionBombWarning)
            with Image.open(io.BytesIO(data)) as file:
                for number, page in enumerate(ImageSequence.Iterator(file), start=1):
                    if number > _MOST_PAGES:
                        break
                    yield _on_white(ImageOps.exif_transpose(page))
    except (Image.DecompressionBombWarning, Image.DecompressionBombError) as fault:
        raise DocumentError("The picture is too large to read. Save it with 200 to 300 dots an inch.") from fault
    except (UnidentifiedImageError, OSError, SyntaxError, ValueError) as fault:
        raise DocumentError("The picture is damaged or of an unknown kind. Save it as PNG or JPEG.") from fault


def _on_white(image: Any) -> Any:
    """Opaque colours; what is transparent shows white paper."""
    from PIL import Image

    if image.mode in ("RGBA", "LA", "PA") or "transparency" in image.info:
        layer = image.convert("RGBA")
        paper = Image.new("RGBA", layer.size, "white")
        return Image.alpha_composite(paper, layer).convert("RGB")
    return image.convert("RGB")


def _look(image: Any) -> tuple[Picture, list[Word], list[Ruling], list[Word]]:
    """The picture put straight and upright, its words, its drawn lines, and what is stamped across the page."""
    try:
        import numpy as np

        from extract.documents import recognise, straighten
    except ImportError as fault:
        raise DocumentError(WITHOUT_EXTRA) from fault
    picture = straighten.picture_of(np.ascontiguousarray(np.asarray(image.convert("RGB"))[:, :, ::-1]))
    side = max(picture.width, picture.height)
    if side > _LARGEST_SIDE or side < _LEAST_SIDE:
        picture = straighten.enlarged(picture, 2.0 if side < _LEAST_SIDE else _LARGEST_SIDE / side)
    picture = straighten.straightened(picture)
    try:
        lines = recognise.lines_of(picture)
    except ImportError as fault:
        raise DocumentError(WITHOUT_EXTRA) from fault
    quarters = _quarters(picture, lines)
    if quarters:
        picture = straighten.quarter_turned(picture, quarters)
        lines = recognise.lines_of(picture)
    rulings = straighten.without_strokes(
        straighten.rulings_of(straighten.ink_of(picture.pixels)), [line.box for line in lines]
    )
    askew = [line for line in lines if not line.tall and line.tilt > recognise.ASKEW]
    level = [line for line in lines if line not in askew]
    words = recognise.words_of(picture, recognise.cut_at(level, rulings))
    return picture, words, rulings, recognise.askew_lines(picture, askew)


def _quarters(picture: Picture, lines: Sequence[TypeLine]) -> int:
    """Quarters to turn the page anticlockwise until its longest lines read best."""
    from extract.documents import recognise

    if not lines:
        return 0
    tall = [line for line in lines if line.tall]
    lies = 2 * len(tall) > len(lines)
    chosen = sorted((line for line in lines if line.tall == lies), key=_length, reverse=True)[:_SAMPLE]

    def confidence(quarters: int) -> float:
        crops = [recognise.cut_out(picture.pixels, line, quarters) for line in chosen]
        return sum(reading.confidence for reading in recognise.read_crops(crops)) / len(crops)

    first, second = (1, 3) if lies else (0, 2)
    sure = confidence(first)
    return first if sure > _SURE or sure >= confidence(second) else second


def _length(line: TypeLine) -> float:
    x0, top, x1, bottom = line.box
    return max(x1 - x0, bottom - top)
