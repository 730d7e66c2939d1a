"""Pictures and text in PDF: the typeface with what stands in for it, marks on a canvas, and PNG from the same marks.

The PNG is the PDF of the picture, drawn by the reader that shows sheets: no browser and no further library.
"""

from __future__ import annotations

import io
from functools import cache
from html import escape
from pathlib import Path
from typing import Any

from compare.picture import Box, Dot, Line, Picture, Words

REGULAR, BOLD = "QuartzfolioSans", "QuartzfolioSans-SemiBold"
FONTS = {REGULAR: "sans-regular.ttf", BOLD: "sans-semibold.ttf"}
# Not embedded: every PDF reader has or fetches its own face for these, and the text stays searchable.
EASTERN = {"HeiseiKakuGo-W5": ("\u3040", "\u30ff"), "HYGothic-Medium": ("\uac00", "\ud7af")}
CHINESE = "STSong-Light"
# Signs that the typeface lacks; the word that always stands beside them says the same.
INSTEAD = str.maketrans({"☞": "→", "✎": "·", "Ω": "Ω", "μ": "µ", "▮": "▮", "\u2007": " ", "\u202f": " "})


@cache
def _registered() -> frozenset[int]:
    """Make the typefaces known, and give the characters that our own has."""
    from reportlab.pdfbase import pdfmetrics
    from reportlab.pdfbase.cidfonts import UnicodeCIDFont
    from reportlab.pdfbase.ttfonts import TTFont

    for name, file in FONTS.items():
        pdfmetrics.registerFont(TTFont(name, str(Path(__file__).parent / "fonts" / file)))
    for name in (*EASTERN, CHINESE):
        pdfmetrics.registerFont(UnicodeCIDFont(name))
    pdfmetrics.registerFontFamily(REGULAR, normal=REGULAR, bold=BOLD, italic=REGULAR, boldItalic=BOLD)
    return frozenset(pdfmetrics.getFont(REGULAR).face.charToGlyph)


def runs(text: str, *, bold: bool = False) -> list[tuple[str, str]]:
    """(font, text) for each stretch of a text that one typeface can write; what none can becomes a question mark."""
    known, own = _registered(), BOLD if bold else REGULAR
    found: list[tuple[str, str]] = []
    for character in text.translate(INSTEAD):
        font = own if ord(character) in known else _eastern(character)
        shown = character if font else "?"
        font = font or own
        if found and found[-1][0] == font:
            found[-1] = (font, found[-1][1] + shown)
        else:
            found.append((font, shown))
    return found


def _eastern(character: str) -> str | None:
    for font, (first, last) in EASTERN.items():
        if first <= character <= last:
            return font
    is_eastern = "\u2e80" <= character <= "\u9fff" or "\uff00" <= character <= "\uffef"
    return CHINESE if is_eastern else None


def marked_up(text: str) -> str:
    """A plain text for a paragraph of reportlab: escaped, with the typeface named where ours lacks a character."""
    return "".join(
        escape(part, quote=False) if font in FONTS else f'<font name="{font}">{escape(part, quote=False)}</font>'
        for font, part in runs(text)
    )


def draw(picture: Picture, canvas: Any, x: float, y: float, scale: float = 1.0) -> None:
    """Draw with the lower left corner at (x, y) points; a pixel is `scale` points."""
    canvas.saveState()
    canvas.translate(x, y)
    canvas.scale(scale, scale)
    for mark in picture.marks:
        if isinstance(mark, Line):
            _line(mark, canvas, picture.height)
        elif isinstance(mark, Box):
            _filled(canvas, mark)
            canvas.rect(
                mark.x, picture.height - mark.y - mark.height, mark.width, mark.height, stroke=bool(mark.edge), fill=1
            )
        elif isinstance(mark, Dot):
            _filled(canvas, mark)
            canvas.circle(mark.x, picture.height - mark.y, mark.radius, stroke=bool(mark.edge), fill=1)
        else:
            _words(mark, canvas, picture.height)
    canvas.restoreState()


def _filled(canvas: Any, mark: Box | Dot) -> None:
    canvas.setFillColor(mark.fill)
    canvas.setDash()
    if mark.edge:
        canvas.setStrokeColor(mark.edge)
        canvas.setLineWidth(mark.stroke)


def _line(mark: Line, canvas: Any, height: float) -> None:
    path = canvas.beginPath()
    for points in mark.paths:
        for at, (x, y) in enumerate(points):
            (path.lineTo if at else path.moveTo)(x, height - y)
        if mark.fill:
            path.close()
    canvas.setDash(*([list(mark.dash)] if mark.dash else []))
    if mark.colour:
        canvas.setStrokeColor(mark.colour)
        canvas.setLineWidth(mark.width)
    if mark.fill:
        canvas.setFillColor(mark.fill)
    canvas.drawPath(path, stroke=bool(mark.colour), fill=bool(mark.fill))


def _words(mark: Words, canvas: Any, height: float) -> None:
    from reportlab.pdfbase.pdfmetrics import stringWidth

    parts = runs(mark.text, bold=mark.bold)
    whole = sum(stringWidth(part, font, mark.size) for font, part in parts)
    x = mark.x - {"start": 0.0, "middle": whole / 2, "end": whole}[mark.anchor]
    if mark.halo:
        canvas.setStrokeColor(mark.halo)
        canvas.setDash()
        canvas.setLineWidth(3)
        canvas.setLineJoin(1)
        _stretch(canvas, parts, (x, height - mark.y, mark.size), outlined=True)
    canvas.setFillColor(mark.colour)
    _stretch(canvas, parts, (x, height - mark.y, mark.size), outlined=False)


def _stretch(canvas: Any, parts: list[tuple[str, str]], at: tuple[float, float, float], *, outlined: bool) -> None:
    """Text in its typefaces; `outlined` leaves the mark of its halo and nothing that can be selected twice."""
    from reportlab.pdfbase.pdfmetrics import stringWidth

    x, y, size = at
    for font, part in parts:
        canvas.setFont(font, size)
        canvas.drawString(x, y, part, mode=1 if outlined else None)
        x += stringWidth(part, font, size)


def pdf(picture: Picture, background: str) -> bytes:
    """The picture as a PDF of one page; a pixel is three quarters of a point, as in print from the web."""
    from reportlab.pdfgen.canvas import Canvas

    scale, data = 0.75, io.BytesIO()
    canvas = Canvas(data, pagesize=(picture.width * scale, picture.height * scale), invariant=1)
    canvas.setTitle(picture.told)
    canvas.setFillColor(background)
    canvas.rect(0, 0, picture.width * scale, picture.height * scale, stroke=0, fill=1)
    draw(picture, canvas, 0, 0, scale)
    canvas.save()
    return data.getvalue()


def png(picture: Picture, background: str, *, sharpness: float = 2.0) -> bytes:
    """The picture as PNG, `sharpness` dots to a pixel."""
    import pypdfium2

    document = pypdfium2.PdfDocument(pdf(picture, background))
    try:
        bitmap = document[0].render(scale=sharpness / 0.75)
        data = io.BytesIO()
        bitmap.to_pil().save(data, "PNG", optimize=True)
    finally:
        document.close()
    return data.getvalue()
