"""Drawing for the corpus generators: ruled tables by reportlab, HTML printed by Chromium."""

from __future__ import annotations

import io
import shutil
import subprocess
import tempfile
from collections.abc import Sequence
from pathlib import Path
from typing import Any

FONTS = Path("/usr/share/fonts/truetype")
CSS = """@page{size:A4;margin:14mm} body{font-family:'Liberation Sans','Noto Sans CJK SC';font-size:9pt}
table{border-collapse:collapse;margin:4pt 0} td,th{border:.6pt solid #555;padding:2pt 5pt;text-align:center}
td.l,th.l{text-align:left} h1{font-size:15pt;margin:2pt 0} h2{font-size:11pt;margin:8pt 0 2pt} small{font-size:7pt}
.n td,.n th{border:none} sup{font-size:6pt}"""


def printed(body: str, css: str = "", lang: str = "en") -> bytes:
    """The PDF that Chromium prints of an HTML body."""
    browser = shutil.which("chromium") or shutil.which("chromium-browser") or "google-chrome"
    with tempfile.TemporaryDirectory() as folder:
        page, pdf = Path(folder) / "sheet.html", Path(folder) / "sheet.pdf"
        page.write_text(
            f'<!doctype html><html lang="{lang}"><meta charset="utf-8"><title>Data sheet</title>'
            f"<style>{CSS}{css}</style><body>{body}</body></html>",
            encoding="utf-8",
        )
        subprocess.run(
            [
                browser,
                "--headless",
                "--no-sandbox",
                "--disable-gpu",
                "--no-pdf-header-footer",
                f"--print-to-pdf={pdf}",
                str(page),
            ],
            check=True,
            capture_output=True,
            timeout=120,
        )
        return pdf.read_bytes()


def rows(lines: str, tag: str = "td") -> str:
    """HTML rows of a text: one row a line, cells separated by `|`; `{c2}` and `{r3}` open a wide or a tall cell."""
    out = []
    for line in lines.strip("\n").splitlines():
        cells = []
        for cell in line.split("|"):
            span, text = "", cell.strip()
            while text[:2] in ("{c", "{r"):
                mark, _, text = text[1:].partition("}")
                span += f' {"colspan" if mark[0] == "c" else "rowspan"}="{mark[1:]}"'
            cells.append(f"<{tag}{span}>{text.strip()}</{tag}>")
        out.append("<tr>" + "".join(cells) + "</tr>")
    return "\n".join(out)


def cells(lines: str) -> list[list[str]]:
    """Cells of a text: one row a line, separated by `|`; a backslash-n breaks the line inside a cell."""
    return [[cell.strip().replace("\\n", "\n") for cell in line.split("|")] for line in lines.strip("\n").splitlines()]


class Sheet:
    """A reportlab page with absolute positions in points from the top left."""

    def __init__(self, title: str, *, width: float = 595, height: float = 842) -> None:
        from reportlab.pdfbase import pdfmetrics
        from reportlab.pdfbase.ttfonts import TTFont
        from reportlab.pdfgen.canvas import Canvas

        for name, file in (("Body", "DejaVuSans.ttf"), ("Bold", "DejaVuSans-Bold.ttf")):
            pdfmetrics.registerFont(TTFont(name, str(FONTS / "dejavu" / file)))
        self.buffer = io.BytesIO()
        self.height = height
        self.canvas: Any = Canvas(self.buffer, pagesize=(width, height), invariant=1)
        self.canvas.setTitle(title)

    def text(self, x: float, y: float, text: str, size: float = 8, font: str = "Body") -> None:
        self.canvas.setFont(font, size)
        self.canvas.drawString(x, self.height - y, text)

    def table(
        self,
        x: float,
        y: float,
        data: Sequence[Sequence[str]],
        widths: Sequence[float],
        *,
        style: Sequence[tuple[Any, ...]] = (),
        size: float = 7.5,
    ) -> float:
        """Draw a ruled table and return the height below it."""
        from reportlab.lib import colors
        from reportlab.platypus import Table

        base = [
            ("FONT", (0, 0), (-1, -1), "Body", size, size + 2),
            ("GRID", (0, 0), (-1, -1), 0.5, colors.grey),
            ("VALIGN", (0, 0), (-1, -1), "MIDDLE"),
            ("TOPPADDING", (0, 0), (-1, -1), 2),
            ("BOTTOMPADDING", (0, 0), (-1, -1), 2),
        ]
        table = Table(data, colWidths=widths, style=[*base, *style])
        _, high = table.wrapOn(self.canvas, 1000, 1000)
        table.drawOn(self.canvas, x, self.height - y - high)
        return float(y + high)

    def new_page(self) -> None:
        self.canvas.showPage()

    def bytes(self) -> bytes:
        self.canvas.save()
        return self.buffer.getvalue()


def drawing(page: Sheet, x: float, y: float, *sizes: str) -> None:
    """An outline drawing with its length, width and height and its pads, as it stands beside a table."""
    length, width, height = sizes
    canvas, top = page.canvas, page.height
    canvas.rect(x, top - y - 60, 90, 60)
    for across, down in ((8, 22), (60, 22), (8, 52), (60, 52)):
        canvas.rect(x + across, top - y - down, 22, 14)
    page.text(x + 30, y - 6, f"{length} ±0.10", 6)
    page.text(x + 96, y + 32, f"{width} ±0.10", 6)
    page.text(x + 96, y + 80, f"{height} max", 6)
    for pad, (across, down) in {"#4": (14, 18), "#3": (66, 18), "#1": (14, 48), "#2": (66, 48)}.items():
        page.text(x + across, y + down, pad, 6)
    page.text(x + 20, y + 75, "0.90 ±0.1", 6)
    page.text(x, y + 95, "Unit: mm", 6)
