"""A report as PDF: paged, numbered, headings as bookmarks, text that can be selected, pictures as lines, not dots."""

from __future__ import annotations

import io
from collections.abc import Callable
from typing import Any

from compare.blocks import Block, Drawn, Grid, Heading, Items, NewPage, Report, Side, Text, Together
from compare.palette import LIGHT
from compare.picture_pdf import BOLD, REGULAR, draw, marked_up, runs

MM = 72 / 25.4
PAGE = (210 * MM, 297 * MM)
SIDE, TOP, FOOT = 16 * MM, 17 * MM, 18 * MM
WIDE = PAGE[0] - 2 * SIDE
SIZES = {"plain": 9.5, "strong": 9.5, "small": 8.3, "note": 9.5, "formula": 9.5, "code": 7.6}
TABLE_SIZE = 8.3
CODE_FONT = "Courier"


def report_pdf(report: Report) -> bytes:
    """The whole file."""
    from reportlab.platypus import BaseDocTemplate, Frame, PageTemplate

    runs("")  # makes the typefaces known
    data = io.BytesIO()
    document = BaseDocTemplate(
        data,
        pagesize=PAGE,
        title=report.title,
        author="quartzfolio",
        subject=report.foot,
        leftMargin=SIDE,
        rightMargin=SIDE,
        topMargin=TOP,
        bottomMargin=FOOT,
    )
    frame = Frame(SIDE, FOOT, WIDE, PAGE[1] - TOP - FOOT, leftPadding=0, rightPadding=0, topPadding=0, bottomPadding=0)
    document.addPageTemplates([PageTemplate(frames=[frame])])
    story = [_paragraph(report.title, 17, bold=True, after=6), *(made for one in report.blocks for made in _block(one))]
    document.build(story, canvasmaker=_numbered(report))
    return data.getvalue()


def _numbered(report: Report) -> Any:
    """A canvas that writes `page 3 of 14` on each page once it knows how many there are."""
    from reportlab.pdfgen.canvas import Canvas

    class Numbered(Canvas):  # type: ignore[misc]
        def __init__(self, *of: Any, **named: Any) -> None:
            super().__init__(*of, **named)
            self._pages: list[dict[str, Any]] = []

        def showPage(self) -> None:  # noqa: N802
            self._pages.append(dict(self.__dict__))
            self._startPage()

        def save(self) -> None:
            for number, page in enumerate(self._pages, start=1):
                self.__dict__.update(page)
                _furniture(self, report, number, len(self._pages))
                super().showPage()
            super().save()

    return Numbered


def _furniture(canvas: Any, report: Report, number: int, pages: int) -> None:
    canvas.setFont(REGULAR, 7.8)
    canvas.setFillColor(LIGHT.soft)
    y = FOOT - 9 * MM
    _line(canvas, FOOT - 5 * MM)
    _write(canvas, SIDE, y, report.foot)
    canvas.setFont(REGULAR, 7.8)
    canvas.drawRightString(PAGE[0] - SIDE, y, f"page {number} of {pages}")
    if number > 1:
        _write(canvas, SIDE, PAGE[1] - TOP + 5 * MM, report.title)
        _line(canvas, PAGE[1] - TOP + 3 * MM)


def _line(canvas: Any, y: float) -> None:
    canvas.setStrokeColor(LIGHT.rule)
    canvas.setLineWidth(0.5)
    canvas.line(SIDE, y, PAGE[0] - SIDE, y)


def _write(canvas: Any, x: float, y: float, text: str) -> None:
    from reportlab.pdfbase.pdfmetrics import stringWidth

    for font, part in runs(text):
        canvas.setFont(font, 7.8)
        canvas.drawString(x, y, part)
        x += stringWidth(part, font, 7.8)


def _style(
    size: float, *, bold: bool = False, colour: str = LIGHT.ink, after: float = 3, right: bool = False, **more: Any
) -> Any:
    from reportlab.lib.enums import TA_LEFT, TA_RIGHT
    from reportlab.lib.styles import ParagraphStyle

    return ParagraphStyle(
        "p",
        fontName=BOLD if bold else REGULAR,
        fontSize=size,
        leading=size * 1.28,
        textColor=colour,
        spaceAfter=after,
        alignment=TA_RIGHT if right else TA_LEFT,
        splitLongWords=1,
        **more,
    )


def _paragraph(text: str, size: float, **style: Any) -> Any:
    from reportlab.platypus import Paragraph

    return Paragraph(marked_up(text), _style(size, **style))


def _block(block: Block) -> list[Any]:
    return WRITERS[type(block)](block)


def _heading(block: Heading) -> list[Any]:
    from reportlab.platypus import CondPageBreak, HRFlowable

    if block.level > 1:
        return [_Bookmarked(block.text, 1, _style(10.5, bold=True, after=2, spaceBefore=7, keepWithNext=1))]
    head = _Bookmarked(block.text, 0, _style(13, bold=True, after=1, spaceBefore=12, keepWithNext=1))
    return [CondPageBreak(35 * MM), head, HRFlowable(width="100%", thickness=1, color=LIGHT.ink, spaceAfter=5)]


def _Bookmarked(text: str, level: int, style: Any) -> Any:  # noqa: N802
    """A heading that stands in the reader's outline as well."""
    from reportlab.platypus import Paragraph

    class Marked(Paragraph):  # type: ignore[misc]
        def draw(self) -> None:
            key = f"{level}-{id(self)}"
            self.canv.bookmarkPage(key)
            self.canv.addOutlineEntry(text, key, level, closed=True)
            super().draw()

    return Marked(marked_up(text), style)


def _text(block: Text) -> list[Any]:
    size = SIZES[block.kind]
    if block.kind == "code":
        from reportlab.lib.styles import ParagraphStyle
        from reportlab.platypus import Preformatted

        look = ParagraphStyle("code", fontName=CODE_FONT, fontSize=size, leading=size * 1.25, backColor=LIGHT.leaf)
        wrapped = "\n".join(piece for line in block.text.splitlines() for piece in _pieces(line))
        return [Preformatted(wrapped, look)]
    soft = block.kind == "small"
    indent = 10 if block.kind in ("formula", "note") else 0
    colour = LIGHT.soft if soft else LIGHT.ink
    return [_paragraph(block.text, size, bold=block.kind == "strong", colour=colour, leftIndent=indent)]


def _pieces(line: str, wide: int = 108) -> list[str]:
    """A line of a simulator's file in pieces that fit; those after the first begin as comments or with a +."""
    mark = "* " if line.startswith("*") else "+ "
    first, rest = line[:wide], line[wide:]
    step = wide - len(mark)
    return [first, *(mark + rest[at : at + step] for at in range(0, len(rest), step))]


def _items(block: Items) -> list[Any]:
    return [
        _paragraph(f"–  {line}", SIZES["plain"], leftIndent=10, firstLineIndent=-10, after=2.5) for line in block.lines
    ]


def _grid(block: Grid) -> list[Any]:
    from reportlab.platypus import Spacer, Table, TableStyle

    count = len(block.rows[0]) if block.rows else len(block.heads)
    if not count:
        return []
    shares = block.widths or (1.0,) * count
    widths = [WIDE * share / sum(shares) for share in shares]

    def cells(row: tuple[str, ...], colour: str) -> list[Any]:
        return [
            _paragraph(
                text, TABLE_SIZE, colour=colour if block.heads or at else LIGHT.soft, after=0, right=at in block.figures
            )
            for at, text in enumerate(row)
        ]

    rows = [cells(block.heads, LIGHT.soft)] if block.heads else []
    rows += [cells(row, LIGHT.ink) for row in block.rows]
    look = [
        ("VALIGN", (0, 0), (-1, -1), "TOP"),
        ("LEFTPADDING", (0, 0), (-1, -1), 0),
        ("RIGHTPADDING", (0, 0), (-1, -1), 7),
        ("TOPPADDING", (0, 0), (-1, -1), 2),
        ("BOTTOMPADDING", (0, 0), (-1, -1), 2.5),
        ("LINEBELOW", (0, 0), (-1, -1), 0.4, LIGHT.rule),
    ]
    if block.heads:
        look.append(("LINEBELOW", (0, 0), (-1, 0), 0.8, LIGHT.edge))
    table = Table(rows, colWidths=widths, repeatRows=1 if block.heads else 0)
    table.setStyle(TableStyle(look))
    return [table, Spacer(1, 6)]


def _side(block: Side) -> list[Any]:
    from reportlab.platypus import Table, TableStyle

    half = WIDE / 2 - 8
    cells: list[Any] = [_shown(one, half) for one in block.drawings]
    rows = [[cells[at], cells[at + 1] if at + 1 < len(cells) else ""] for at in range(0, len(cells), 2)]
    table = Table(rows, colWidths=[WIDE / 2, WIDE / 2])
    look = [
        ("VALIGN", (0, 0), (-1, -1), "TOP"),
        ("LEFTPADDING", (0, 0), (-1, -1), 0),
        ("RIGHTPADDING", (0, 0), (-1, -1), 8),
    ]
    table.setStyle(TableStyle(look))
    return [table]


def _drawn(block: Drawn) -> list[Any]:
    from reportlab.platypus import KeepTogether

    return [KeepTogether(_shown(block, WIDE))]


def _shown(block: Drawn, widest: float) -> list[Any]:
    from reportlab.platypus import Flowable

    scale = min(widest / block.picture.width, 0.86)

    class Shown(Flowable):  # type: ignore[misc]
        def __init__(self) -> None:
            super().__init__()
            self.width, self.height = block.picture.width * scale, block.picture.height * scale

        def draw(self) -> None:
            draw(block.picture, self.canv, 0, 0, scale)

    caption = [_paragraph(block.caption, SIZES["small"], colour=LIGHT.soft, after=8)] if block.caption else []
    return [Shown(), *caption]


def _together(block: Together) -> list[Any]:
    from reportlab.platypus import KeepTogether

    return [KeepTogether([made for one in block.blocks for made in _block(one)])]


def _new_page(_: NewPage) -> list[Any]:
    from reportlab.platypus import PageBreak

    return [PageBreak()]


WRITERS: dict[type, Callable[[Any], list[Any]]] = {
    Heading: _heading,
    Text: _text,
    Items: _items,
    Grid: _grid,
    Drawn: _drawn,
    Side: _side,
    Together: _together,
    NewPage: _new_page,
}
