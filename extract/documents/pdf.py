"""PDF bytes -> Document."""

from __future__ import annotations

import io
import logging
import re
from collections import Counter
from collections.abc import Callable, Sequence
from dataclasses import dataclass, field
from typing import Any

from extract.documents.glyphs import Glyph, with_underlined_signs, words_of
from extract.documents.layout import arrange
from extract.documents.model import Document, DocumentError, Line, Segment, Table
from extract.documents.pdf_page import Frame, pdfium_frame, pdfium_glyphs, pdfium_rulings, plumbed
from extract.documents.pdf_pictures import Pictures, pictures_of
from extract.documents.pdf_quick import quick_content
from extract.documents.symbols import is_broken, translated
from extract.documents.words import Box, Ruling, inside, union
from extract.model import Note, Where
from extract.progress import Progress

# In a file of more pages those without a digit are not measured.
LONG_PAGES = 4
# A file of more pages is a catalogue: its pages are looked through before they are read.
CATALOGUE_PAGES = 12
# Where less of a page's text than this share comes out of pdfplumber, it cannot read one of the fonts.
MOST = 0.97
# A page with fewer characters may be a picture.
ALMOST_NO_TEXT = 25
# A page with fewer characters and a large picture may have its table in the picture.
LITTLE_TEXT = 300
SCAN_DPI = 200
NO_OCR = (
    'Page {page} is a picture and was not read: install the reading of pictures with pip install "quartzfolio[ocr]".'
)
HIDDEN_TEXT = (
    "Page {page} is a picture; its text was recognised by the program that made the file: compare every number with "
    "the page."
)
NO_OCR_BESIDE = (
    "Page {page} holds a large picture that was not read: look at it, or install the reading of pictures with "
    'pip install "quartzfolio[ocr]".'
)

Content = tuple[list[Glyph], list[Ruling]]


@dataclass(slots=True)
class _Page:
    """What one page gave."""

    blocks: list[Table | Line] = field(default_factory=list)
    notes: list[Note] = field(default_factory=list)
    scanned: bool = False
    height: float = 0.0
    left_out: bool = False

    def warn(self, message: str, number: int) -> None:
        self.notes.append(Note(level="warning", message=message, where=Where(page=number)))


def read(data: bytes, wanted: Callable[[str], bool] | None = None, progress: Progress | None = None) -> Document:
    """Tables and lines of a PDF, page by page.

    Parameters
    ----------
    data
        The file's bytes.
    wanted
        Tells from a page's bare text whether the page is worth a close look. In a catalogue the pages that are not are
        left out, at a fiftieth of the time, and one note names them. Without this every page is read, but for pages
        without any digit, which come as plain lines without boxes. A page of almost no text may be a picture
        and stays.
    progress
        Told each page before it is read. With it, Ctrl-C ends the read after the pages finished, and a note says so.

    Raises
    ------
    DocumentError
        The file is damaged, locked or without pages.
    """
    # The parser reports each oddity of a font; a reader of the sheet can do nothing about them.
    logging.getLogger("pdfminer").setLevel(logging.ERROR)
    quick, slow = _opened(data), _Plumber(data)
    pages: list[_Page] = []
    try:
        for number in range(1, len(quick) + 1):
            if progress is not None:
                progress.page(number, len(quick))
            pages.append(_page_or_note(quick, slow, number, wanted))
    except KeyboardInterrupt:
        if progress is None:
            raise
        progress.stopped = True
        stopped = _Page()
        stopped.warn(f"Stopped: only pages 1 to {len(pages)} of {len(quick)} were read.", max(1, len(pages)))
        pages.append(stopped)
    finally:
        slow.close()
        quick.close()
    return _document(pages)


def _opened(data: bytes) -> Any:
    import pypdfium2

    try:
        document = pypdfium2.PdfDocument(data)
    except pypdfium2.PdfiumError as fault:
        if "password" in str(fault).lower():
            raise DocumentError("The PDF is locked with a password. Save a copy without one and read that.") from fault
        raise DocumentError("The PDF is damaged or cut short and cannot be opened. Fetch it again.") from fault
    if len(document) == 0:
        raise DocumentError("The PDF has no pages. Fetch it again.")
    return document


class _Plumber:
    """pdfplumber's view of the file, opened only when a page asks for it."""

    def __init__(self, data: bytes) -> None:
        self._data = data
        self._file: Any = None
        self.fault = ""

    def page(self, number: int, frame: Frame) -> Content | None:
        """Glyphs and lines of a page; None where pdfplumber cannot read it."""
        import pdfplumber

        if self.fault:
            return None
        try:
            if self._file is None:
                self._file = pdfplumber.open(io.BytesIO(self._data))
            page = self._file.pages[number - 1]
            content = plumbed(page, frame)
            page.close()
        except Exception as fault:  # noqa: BLE001 - a parser of damaged files may raise anything; the page is read by pdfium
            self.fault = type(fault).__name__
            return None
        return content

    def close(self) -> None:
        if self._file is not None:
            self._file.close()


def _page_or_note(quick: Any, slow: _Plumber, number: int, wanted: Callable[[str], bool] | None) -> _Page:
    import pypdfium2

    try:
        return _read_page(quick, slow, number, wanted)
    except pypdfium2.PdfiumError:
        page = _Page()
        page.warn(f"Page {number} is damaged and was not read: fetch the file again.", number)
        return page


def _read_page(quick: Any, slow: _Plumber, number: int, wanted: Callable[[str], bool] | None) -> _Page:
    page = quick[number - 1]
    frame = pdfium_frame(page)
    text_page = page.get_textpage()
    text = text_page.get_text_range()
    printed = sum(map(len, text.split()))
    result = _Page(height=frame.size[1])
    looked_through = number > 1 and len(quick) > CATALOGUE_PAGES and wanted is not None
    if looked_through and printed > ALMOST_NO_TEXT and wanted is not None and not wanted(text):
        result.left_out = True
    elif len(quick) > LONG_PAGES and printed > ALMOST_NO_TEXT and not _has_digit(text):
        result.blocks += [_plain_line(line, number) for line in text.splitlines() if line.strip()]
    else:
        pictures = pictures_of(page, frame)
        if printed < ALMOST_NO_TEXT and pictures.instead_of_text:
            result.scanned = _read_picture(page, number, result)
        elif pictures.with_hidden_text and (blocks := _picture_blocks(page, number)):
            result.blocks += blocks
            result.scanned = True
        elif printed:
            content = quick_content(page, frame, text_page) or _slow_content(page, slow, number, frame, printed)
            _place_text(content, number, frame, result)
            if pictures.with_hidden_text:
                result.warn(HIDDEN_TEXT.format(page=number), number)
            elif printed < LITTLE_TEXT and pictures.boxes:
                _read_pictures_beside_text(page, number, pictures, result)
    text_page.close()
    page.close()
    return result


def _has_digit(text: str) -> bool:
    return bool(re.search(r"\d", text))


def _plain_line(text: str, number: int) -> Line:
    where = Where(page=number)
    return Line((Segment(text.strip(), where),), where)


def _placer(number: int, scale: float = 1.0) -> Callable[[Box], Where]:
    def place(box: Box) -> Where:
        x0, top, x1, bottom = box
        return Where(
            page=number,
            box=(round(x0 * scale, 1), round(top * scale, 1), round(x1 * scale, 1), round(bottom * scale, 1)),
        )

    return place


def _slow_content(page: Any, slow: _Plumber, number: int, frame: Frame, printed: int) -> Content:
    """Glyphs and lines by pdfplumber; glyphs by pdfium where pdfplumber finds fewer than the page has."""
    glyphs, rulings = slow.page(number, frame) or ([], pdfium_rulings(page, frame))
    readable = sum(len(glyph.text.strip()) for glyph in glyphs if not glyph.text.startswith("(cid:"))
    return (glyphs if readable >= MOST * printed else pdfium_glyphs(page, frame)), rulings


def _place_text(content: Content, number: int, frame: Frame, result: _Page) -> None:
    glyphs, rulings = content
    straight = with_underlined_signs([glyph for glyph in glyphs if glyph.angle in (0, 90, 180, 270)], rulings)
    place = _placer(number)
    result.blocks += arrange(
        words_of(straight, *frame.size, rulings), rulings, place, width=frame.size[0], height=frame.size[1]
    )
    result.blocks += _slanted_lines([glyph for glyph in glyphs if glyph.angle % 90], place)
    result.notes += _broken_notes(glyphs, number)


def _slanted_lines(glyphs: Sequence[Glyph], place: Callable[[Box], Where]) -> list[Table | Line]:
    """Text at an angle (a watermark, a stamp), a line for each run in the order in which it is drawn."""
    runs: list[list[Glyph]] = []
    for glyph in glyphs:
        if runs and runs[-1][-1].angle == glyph.angle and abs(runs[-1][-1].base - glyph.base) < 3 * glyph.size:
            runs[-1].append(glyph)
        else:
            runs.append([glyph])
    lines: list[Table | Line] = []
    for run in runs:
        text = " ".join("".join(glyph.text for glyph in run).split())
        if text:
            where = place(union(glyph.box for glyph in run))
            lines.append(Line((Segment(text, where),), where))
    return lines


def _broken_notes(glyphs: Sequence[Glyph], number: int) -> list[Note]:
    kinds = {(glyph.text, glyph.font) for glyph in glyphs}
    kinds = {(text, font) for text, font in kinds if is_broken(translated(text, font))}
    if not kinds:
        return []
    broken = [glyph for glyph in glyphs if (glyph.text, glyph.font) in kinds]
    shown = ", ".join(repr(text) for text, _ in Counter(glyph.text for glyph in broken).most_common(3))
    message = (
        f"Page {number}: {len(broken)} characters come out of the file's text as {shown}, since its fonts do "
        "not say what they are; numbers near them may be wrong: compare with the page."
    )
    x0, top, x1, bottom = (round(value, 1) for value in union(glyph.box for glyph in broken))
    return [Note(level="warning", message=message, where=Where(page=number, box=(x0, top, x1, bottom)))]


# --- pictures


def _read_picture(page: Any, number: int, result: _Page) -> bool:
    """Read the page as a picture; False, and a note, where the extra that reads pictures is not there."""
    blocks = _picture_blocks(page, number)
    if blocks is None:
        result.warn(NO_OCR.format(page=number), number)
        return False
    result.blocks += blocks
    if not blocks:
        result.warn(
            f"Page {number} is a picture in which no text can be made out: look at it, or give a sharper scan.", number
        )
    return True


def _read_pictures_beside_text(page: Any, number: int, pictures: Pictures, result: _Page) -> None:
    """Add what stands in a page's large pictures; its own text is read apart."""
    blocks = _picture_blocks(page, number)
    if blocks is None:
        result.warn(NO_OCR_BESIDE.format(page=number), number)
        return
    for block in blocks:
        box = block.where.box
        if box is not None and any(inside(box, picture, 0.0) for picture in pictures.boxes):
            result.blocks.append(block)


def _picture_blocks(page: Any, number: int) -> list[Table | Line] | None:
    """Tables and lines recognised in the page as drawn; None where the extra that reads pictures is not there."""
    from extract.documents import scan

    try:
        return scan.read_blocks(page.render(scale=SCAN_DPI / 72).to_pil(), _placer(number, 72 / SCAN_DPI))
    except DocumentError:
        # The only fault that reading a picture in memory can have.
        return None


# --- the whole file


def _document(pages: Sequence[_Page]) -> Document:
    headers = _page_headers(pages)
    scanned = [page for page in pages if page.scanned]
    read_as_text = [page for page in pages if page.blocks and not page.scanned]
    blocks = tuple(block for page in pages for block in page.blocks)
    notes = (*_left_out_note(pages), *(note for page in pages for note in page.notes))
    if not blocks and not notes:
        notes = (Note(level="warning", message="The PDF holds no text and no picture of text."),)
    return Document("pdf", blocks, bool(scanned) and not read_as_text, headers, notes)


def _left_out_note(pages: Sequence[_Page]) -> list[Note]:
    """One note for all pages that were not looked at closely, as runs of page numbers."""
    numbers = [number for number, page in enumerate(pages, start=1) if page.left_out]
    runs: list[list[int]] = []
    for number in numbers:
        if runs and runs[-1][-1] == number - 1:
            runs[-1].append(number)
        else:
            runs.append([number])
    if not runs:
        return []
    named = ", ".join(str(run[0]) if len(run) == 1 else f"{run[0]} to {run[-1]}" for run in runs)
    message = f"{len(numbers)} of {len(pages)} pages speak of no crystal and were not looked at closely: {named}."
    return [Note(level="info", message=message)]


# Share of the page's height; what is taller is a text on its side.
TALLEST_RUNNING = 0.1


def _page_headers(pages: Sequence[_Page]) -> tuple[Line, ...]:
    """Take the running heads and feet off the pages: lines alike on several pages, and a last line set apart.

    A running head stays in place on the first page that has it, where it may be the sheet's title.
    """
    counts: Counter[str] = Counter()
    for page in pages:
        counts.update(
            {_running(block, page) for block in page.blocks if isinstance(block, Line) and _at_edge(block, page)}
        )
    headers: dict[str, Line] = {}
    for page in pages:
        kept: list[Table | Line] = []
        for block in page.blocks:
            if not isinstance(block, Line) or not _at_edge(block, page):
                kept.append(block)
                continue
            key = _running(block, page)
            foot = _is_foot(block, page)
            if counts[key] > 1 or foot:
                if key not in headers and not foot:
                    kept.append(block)
                headers.setdefault(key, block)
            else:
                kept.append(block)
        page.blocks = kept
    return tuple(headers.values())


def _running(line: Line, page: _Page) -> str:
    """Text by which running lines are known again: at the foot of the page whatever its number is."""
    low = line.where.box is not None and line.where.box[1] > 0.5 * page.height
    return re.sub(r"\d+", "#", line.text) if low else line.text


def _at_edge(line: Line, page: _Page) -> bool:
    box = line.where.box
    if box is None or page.height <= 0 or box[3] - box[1] > TALLEST_RUNNING * page.height:
        return False
    return box[1] < 0.12 * page.height or box[3] > 0.9 * page.height


def _is_foot(line: Line, page: _Page) -> bool:
    """Tell whether a line is the last thing on its page, near its end and well below the rest."""
    box = line.where.box
    if box is None or box[3] < 0.93 * page.height:
        return False
    others = [block.where.box[3] for block in page.blocks if block is not line and block.where.box]
    return all(bottom < box[1] - 20 or bottom >= box[3] - 2 for bottom in others)
