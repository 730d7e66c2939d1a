"""The PDF sheets of `sample_specs/`: by two PDF libraries, one printed by Chromium, and two pictures of pages."""

from __future__ import annotations

import re
import shutil
import subprocess
import tempfile
from datetime import UTC, datetime
from pathlib import Path
from typing import Any

import sample_pages
from fontTools import subset, ttLib
from fontTools.pens.cu2quPen import Cu2QuPen
from fontTools.pens.ttGlyphPen import TTGlyphPen
from fpdf import FPDF
from PIL import Image, ImageDraw, ImageFilter, ImageFont
from reportlab.lib import colors
from reportlab.lib.pagesizes import A4
from reportlab.lib.utils import ImageReader
from reportlab.pdfbase import pdfmetrics
from reportlab.pdfbase.ttfonts import TTFont
from reportlab.pdfgen.canvas import Canvas
from reportlab.platypus import Table, TableStyle

NOTO_CJK = "/usr/share/fonts/opentype/noto/NotoSansCJK-Regular.ttc"
SIMPLIFIED_CHINESE = 2  # place of that face in the collection
DEJAVU = "/usr/share/fonts/truetype/dejavu/"
LIBERATION = "/usr/share/fonts/truetype/liberation/"
MADE = datetime(2026, 9, 1, tzinfo=UTC)
MARGIN = 50
Style = tuple[Any, ...]


def _canvas(path: Path, title: str) -> Canvas:
    for name, file in (("Sans", "LiberationSans-Regular"), ("Sans-Bold", "LiberationSans-Bold")):
        pdfmetrics.registerFont(TTFont(name, f"{LIBERATION}{file}.ttf"))
    canvas = Canvas(str(path), pagesize=A4, invariant=1)
    canvas.setTitle(title)
    return canvas


def _text(canvas: Canvas, x: float, y: float, text: str, size: float = 9, *, bold: bool = False) -> None:
    canvas.setFont("Sans-Bold" if bold else "Sans", size)
    canvas.drawString(x, y, text)


def _table(canvas: Canvas, top: float, rows: list[list[str]], widths: list[float], style: list[Style]) -> float:
    """Draw a table whose upper edge is at `top`; return its lower edge."""
    table = Table(rows, colWidths=widths)
    common: list[Style] = [
        ("FONT", (0, 0), (-1, -1), "Sans", 8.5),
        ("VALIGN", (0, 0), (-1, -1), "MIDDLE"),
        ("TOPPADDING", (0, 0), (-1, -1), 2.5),
        ("BOTTOMPADDING", (0, 0), (-1, -1), 3.5),
    ]
    table.setStyle(TableStyle(common + style))
    _, height = table.wrapOn(canvas, A4[0], A4[1])
    table.drawOn(canvas, MARGIN, top - height)
    return top - float(height)


def _pads_drawing(canvas: Canvas, x: float, y: float, length: str, width: str) -> None:
    """The usual bottom view: four pads, the crystal on 1 and 3."""
    canvas.setLineWidth(0.8)
    canvas.rect(x, y, 100, 80)
    for dx, dy, name in ((6, 6, "1"), (68, 6, "2"), (68, 52, "3"), (6, 52, "4")):
        canvas.rect(x + dx, y + dy, 26, 22)
        _text(canvas, x + dx + 10, y + dy + 7, name, 8)
    _text(canvas, x + 30, y - 12, f"{length} ±0.1", 8)
    _text(canvas, x + 106, y + 36, f"{width} ±0.1", 8)


def ruled_min_typ_max(path: Path) -> None:
    canvas = _canvas(path, "BWK21-26.000-08")
    _text(canvas, MARGIN, 790, "Brindlewick Crystals", 17, bold=True)
    _text(canvas, MARGIN, 770, "BWK21 quartz crystal unit for short-range radio", 11)
    _text(canvas, 420, 790, "Data sheet BWD-2611 rev. C")
    canvas.line(MARGIN, 762, A4[0] - MARGIN, 762)
    for number, line in enumerate(sample_pages.RULED_INTRODUCTION):
        _text(canvas, MARGIN, 744 - 13 * number, line)
    widths = [150, 42, 46, 46, 46, 46, 119]
    bottom = _table(
        canvas,
        700,
        sample_pages.RULED_ROWS,
        widths,
        [
            ("GRID", (0, 0), (-1, -1), 0.5, colors.black),
            ("BACKGROUND", (0, 0), (-1, 0), colors.HexColor("#e4e4da")),
            ("FONT", (0, 0), (-1, 0), "Sans-Bold", 8.5),
            ("ALIGN", (1, 0), (5, -1), "CENTER"),
        ],
    )
    _text(canvas, MARGIN, bottom - 30, "Bottom view (mm)", 9, bold=True)
    _pads_drawing(canvas, MARGIN + 10, bottom - 130, "2.0", "1.6")
    for number, line in enumerate(sample_pages.RULED_PADS):
        _text(canvas, 260, bottom - 60 - 13 * number, line)
    canvas.save()


def borderless_leaders(path: Path) -> None:
    canvas = _canvas(path, "TQF32-32.768-12.5")
    canvas.setFillColor(colors.HexColor("#24443a"))
    canvas.rect(0, 780, A4[0], 62, stroke=0, fill=1)
    canvas.setFillColor(colors.white)
    _text(canvas, MARGIN, 802, "TAMSQUITH FREQUENCY", 18, bold=True)
    canvas.setFillColor(colors.black)
    _text(canvas, MARGIN, 745, "TQF32-32.768-12.5    Tuning fork crystal, 3.2 x 1.5 mm", 13, bold=True)
    y = 712.0
    for label, value in sample_pages.LEADERS:
        if not value:
            y -= 8
            _text(canvas, MARGIN, y, label, 10, bold=True)
            y -= 18
            continue
        _text(canvas, MARGIN, y, label, 9.5)
        _text(canvas, 330, y, value, 9.5)
        start = MARGIN + pdfmetrics.stringWidth(label, "Sans", 9.5) + 4
        _text(canvas, start, y, "." * int((326 - start) / pdfmetrics.stringWidth(".", "Sans", 9.5)), 9.5)
        y -= 17
    for number, line in enumerate(sample_pages.LEADERS_NOTES):
        _text(canvas, MARGIN, y - 16 - 12 * number, line, 8)
    canvas.save()


def _fpdf(regular: str, bold: str) -> FPDF:
    pdf = FPDF()
    pdf.set_creation_date(MADE)
    pdf.add_font("body", fname=regular)
    pdf.add_font("body", "B", fname=bold)
    pdf.set_margins(17, 15)
    pdf.add_page()
    return pdf


def _fpdf_table(pdf: FPDF, rows: list[list[str]], widths: tuple[int, ...], size: float, borders: str = "ALL") -> None:
    pdf.set_font("body", size=size)
    with pdf.table(rows, col_widths=widths, line_height=size * 0.62, borders_layout=borders, text_align="LEFT"):
        pass


def series_with_bands(path: Path) -> None:
    pdf = _fpdf(DEJAVU + "DejaVuSans.ttf", DEJAVU + "DejaVuSans-Bold.ttf")
    pdf.set_font("body", "B", 17)
    pdf.cell(0, 10, "ORMEVAL QUARTZ", new_x="LMARGIN", new_y="NEXT")
    pdf.set_font("body", size=11)
    pdf.cell(0, 8, "Série ORV25 – quartz CMS 2,5 × 2,0 mm", new_x="LMARGIN", new_y="NEXT")
    pdf.ln(3)
    _fpdf_table(pdf, sample_pages.SERIES_ROWS, (66, 110), 9)
    pdf.ln(5)
    pdf.set_font("body", "B", 10)
    pdf.cell(0, 7, "Résistance série équivalente (ESR) selon la fréquence", new_x="LMARGIN", new_y="NEXT")
    _fpdf_table(pdf, sample_pages.SERIES_BANDS, (60, 58, 58), 9, "HORIZONTAL_LINES")
    pdf.ln(4)
    pdf.set_font("body", size=8)
    for line in sample_pages.SERIES_NOTES:
        pdf.multi_cell(0, 4.6, line, new_x="LMARGIN", new_y="NEXT")
    pdf.output(str(path))


def _truetype(collection: str, face: int, text: str, made: Path) -> str:
    """Cut the glyphs of `text` out of a collection with cubic outlines and save them as TrueType.

    fpdf2 writes cubic outlines with a glyph map that several PDF readers cannot follow.
    """
    font = ttLib.TTFont(collection, fontNumber=face, recalcTimestamp=False)
    subsetter = subset.Subsetter(subset.Options(layout_features=[], notdef_outline=True))
    subsetter.populate(text=text)
    subsetter.subset(font)
    glyphs, outlines = {}, font.getGlyphSet()
    for name in font.getGlyphOrder():
        pen = TTGlyphPen(None)
        outlines[name].draw(Cu2QuPen(pen, 1.0, reverse_direction=True))
        glyphs[name] = pen.glyph()
    font["loca"], font["glyf"], font["maxp"].tableVersion = ttLib.newTable("loca"), ttLib.newTable("glyf"), 0x00010000
    font["glyf"].glyphOrder, font["glyf"].glyphs = font.getGlyphOrder(), glyphs
    for field in ("Zones", "TwilightPoints", "Storage", "FunctionDefs", "InstructionDefs", "StackElements"):
        setattr(font["maxp"], f"max{field}", 0)
    font["maxp"].maxZones, font["maxp"].maxSizeOfInstructions, font["maxp"].maxComponentElements = 1, 0, 0
    font["post"].formatType = 3.0
    for table in ("CFF ", "VORG"):
        if table in font:
            del font[table]
    font.sfntVersion = "\000\001\000\000"
    font.save(made)
    return str(made)


def chinese_sheet(path: Path) -> None:
    text = "".join(sample_pages.CHINESE_TITLES + sample_pages.CHINESE_HEAD + sample_pages.CHINESE_NOTES)
    text += "".join("".join(row) for row in sample_pages.CHINESE_ROWS)
    with tempfile.TemporaryDirectory() as folder:
        regular = _truetype(NOTO_CJK, SIMPLIFIED_CHINESE, text, Path(folder, "regular.ttf"))
        bold = _truetype(NOTO_CJK.replace("Regular", "Bold"), SIMPLIFIED_CHINESE, text, Path(folder, "bold.ttf"))
        _write_chinese(path, _fpdf(regular, bold))


def _write_chinese(path: Path, pdf: FPDF) -> None:
    pdf.set_font("body", "B", 16)
    pdf.cell(0, 11, sample_pages.CHINESE_TITLES[0], align="C", new_x="LMARGIN", new_y="NEXT")
    pdf.set_font("body", size=12)
    pdf.cell(0, 9, sample_pages.CHINESE_TITLES[1], align="C", new_x="LMARGIN", new_y="NEXT")
    pdf.set_font("body", size=9.5)
    for line in sample_pages.CHINESE_HEAD:
        pdf.cell(0, 6, line, new_x="LMARGIN", new_y="NEXT")
    pdf.ln(3)
    _fpdf_table(pdf, sample_pages.CHINESE_ROWS, (12, 52, 22, 46, 44), 9.5)
    pdf.ln(4)
    pdf.set_font("body", size=9)
    for line in sample_pages.CHINESE_NOTES:
        pdf.cell(0, 6, line, new_x="LMARGIN", new_y="NEXT")
    pdf.output(str(path))


def japanese_columns(path: Path) -> None:
    """Printed by Chromium; its dates are replaced by fixed ones of the same length."""
    browser = shutil.which("chromium") or shutil.which("chromium-browser")
    if browser is None:
        raise SystemExit("Chromium is needed for the Japanese sheet: install it and run again.")
    with tempfile.TemporaryDirectory() as folder:
        page, printed = Path(folder, "page.html"), Path(folder, "page.pdf")
        page.write_text(sample_pages.japanese_html(), encoding="utf-8")
        options = [
            "--headless",
            "--no-sandbox",
            "--disable-gpu",
            "--no-pdf-header-footer",
            f"--user-data-dir={folder}/p",
        ]
        subprocess.run([browser, *options, f"--print-to-pdf={printed}", page.as_uri()], check=True, capture_output=True)
        data = printed.read_bytes()
    stamp = b"D:" + MADE.strftime("%Y%m%d%H%M%S").encode() + b"+00'00'"
    path.write_bytes(re.sub(rb"D:\d{14}\+00'00'", stamp, data))


def oscillator(path: Path) -> None:
    canvas = _canvas(path, "DMX20-26.000")
    _text(canvas, MARGIN, 790, "DAMSONLEIGH", 17, bold=True)
    _text(canvas, MARGIN, 770, "DMX20 clock oscillator, 2.0 x 1.6 mm", 12)
    _text(canvas, MARGIN, 752, "CMOS output crystal oscillator with enable function")
    _table(
        canvas,
        736,
        sample_pages.OSCILLATOR_ROWS,
        [170, 60, 60, 60, 50, 95],
        [
            ("LINEABOVE", (0, 0), (-1, 1), 1, colors.black),
            ("LINEBELOW", (0, -1), (-1, -1), 1, colors.black),
            ("FONT", (0, 0), (-1, 0), "Sans-Bold", 8.5),
            ("ALIGN", (1, 0), (4, -1), "CENTER"),
        ],
    )
    canvas.save()


def _scanned(heading: list[str], rows: list[list[str]], footer: str) -> Image.Image:
    """An A4 page as a flat-bed scanner sees it at 150 dots per inch: grey and a little soft."""
    page = Image.new("L", (1240, 1753), 248)
    draw = ImageDraw.Draw(page)

    def write(x: int, y: int, text: str, size: int, *, bold: bool = False) -> None:
        face = "LiberationSans-Bold.ttf" if bold else "LiberationSans-Regular.ttf"
        draw.text((x, y), text, font=ImageFont.truetype(LIBERATION + face, size), fill=25)

    edges, row_height, top = (110, 530, 840, 1130), 54, 270
    for number, line in enumerate(heading):
        write(110, 100 + 55 * number, line, 25 if number else 38, bold=number == 0)
    for number, row in enumerate(rows):
        y = top + number * row_height
        draw.line((edges[0], y, edges[-1], y), fill=60, width=2)
        for x, cell in zip(edges, row, strict=False):
            write(x + 14, y + 13, cell, 24, bold=number == 0)
    bottom = top + len(rows) * row_height
    draw.line((edges[0], bottom, edges[-1], bottom), fill=60, width=2)
    for x in edges:
        draw.line((x, top, x, bottom), fill=60, width=2)
    write(110, bottom + 50, footer, 24)
    return page.filter(ImageFilter.GaussianBlur(0.6))


def scan(path: Path) -> None:
    page = _scanned(sample_pages.SCAN_HEAD, sample_pages.SCAN_ROWS, sample_pages.SCAN_FOOTER)
    page = page.rotate(-0.6, resample=Image.Resampling.BICUBIC, fillcolor=248)
    with tempfile.TemporaryDirectory() as folder:
        picture = Path(folder, "page.jpg")
        page.save(picture, quality=60)
        canvas = Canvas(str(path), pagesize=A4, invariant=1)
        canvas.drawImage(ImageReader(str(picture)), 0, 0, *A4)
        canvas.save()


def screenshot(path: Path) -> None:
    """The upper part of a page, straight, as a person cuts it out of a viewer."""
    page = _scanned(sample_pages.PICTURE_HEAD, sample_pages.PICTURE_ROWS, sample_pages.PICTURE_FOOTER)
    page.crop((60, 60, 1180, 1150)).quantize(16).save(path, optimize=True)


MAKERS = {
    "brindlewick_bwk21_26mhz.pdf": ruled_min_typ_max,
    "tamsquith_tqf32_32khz.pdf": borderless_leaders,
    "ormeval_serie_orv25_fr.pdf": series_with_bands,
    "tingyu_tyj2520_26mhz_zh.pdf": chinese_sheet,
    "kirisaka_krs15_32khz_ja.pdf": japanese_columns,
    "hollinbrae_hlb32_26mhz_scan.pdf": scan,
    "tamsquith_tqf20_32khz.png": screenshot,
    "damsonleigh_dmx20_clock_oscillator.pdf": oscillator,
}
