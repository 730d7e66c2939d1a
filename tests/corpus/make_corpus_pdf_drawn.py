"""Corpus sheets drawn by reportlab and fpdf2. Run from this folder to write them anew."""

from __future__ import annotations

from datetime import UTC, datetime

from corpus_pages import FONTS, Sheet, cells
from corpus_shorthand import Json, keep, part


def stacked_labels() -> None:
    page = Sheet("WV8 series")
    page.text(50, 50, "Wennavale Frequency", 16, "Bold")
    page.text(50, 70, "WV8 series - SMD crystals 8.0 x 4.5 mm for industrial clocks", 10)
    data = cells(
        """Parameter||Value|Remarks
Frequency|range|3.500 MHz to 60.000 MHz|AT cut
|tolerance at 25 °C|±20 ppm, ±30 ppm or ±50 ppm|see order key
|stability|±50 ppm|ref. to 25 °C
Temperature range|operating|-20 °C to +70 °C|
|storage|-40 °C to +85 °C|
Capacitance|load|12 pF to 30 pF|
|shunt|7.0 pF max.|
Resistance|series, 3.500 - 5.999 MHz|150 Ω max.|fundamental
|series, 6.000 - 60.000 MHz|60 Ω max.|fundamental
|insulation|500 MΩ min.|DC 100 V ±15 V
Drive level|recommended|1 to 100 µW|
|absolute|500 µW max.|
Ageing|first year|±5 ppm max.|25 °C ±3 °C"""
    )
    spans = [("SPAN", (0, a), (0, b)) for a, b in ((1, 3), (4, 5), (6, 7), (8, 10), (11, 12))]
    page.table(50, 90, data, [90, 130, 160, 110], style=[*spans, ("SPAN", (0, 0), (1, 0))])
    page.text(50, 420, "Order key: WV8 - frequency - tolerance code (A ±20, B ±30, C ±50 ppm) - load in pF", 8)
    page.text(50, 434, "Example: WV8-12.000-B-18. Reflow: 260 °C peak, 10 s.", 8)
    parts = [
        part(
            "WV8",
            """
            f 3.5..60
            tol {20,30,50}
            stab ±50
            op -20..70
            sto -40..85
            cl 12..30
            c0 <7
            esr <150 f=3.5:5.999
            esr <60 f=6:60
            ir >500
            dl <500
            age ±5 y=1""",
            maker="Wennavale Frequency",
            package="8.0 x 4.5 mm",
            mode="fund",
            cut="AT",
            res="load",
            part_number_also=["WV8 series"],
        )
    ]
    layout = "stacked labels: a group cell over operating/storage, load/shunt, series/insulation"
    keep("stacked_labels_en.pdf", page.bytes(), parts, "en", layout)


def centred_label() -> None:
    page = Sheet("GLY-32")
    page.text(50, 50, "GLYMERE CRYSTAL", 16, "Bold")
    page.text(50, 70, "GLY-32   3.2 x 2.5 x 0.7 mm   AT-cut", 10)
    data = cells(
        """Item|Symbol|Conditions|Min.|Typ.|Max.|Unit
Nominal frequency|f0||12.000|——|54.000|MHz
Mode of vibration|||Fundamental|||—
Frequency tolerance|Δf/f|at 25 °C ±3 °C|-15|——|+15|ppm
|||—|—|100|
Equivalent series resistance|ESR||—|—|60|Ω
|||—|—|40|
Frequency stability|Δf/fT|-30 °C to +85 °C|-20|——|+20|ppm
||-40 °C to +105 °C|-40|——|+40|
Load capacitance|CL|||12||pF
Shunt capacitance|C0||——|——|3.0|pF
Motional capacitance|C1|27.000 MHz|——|4.2|——|fF
Level of drive|DL||——|10|200|µW
Aging|||-3|——|+3|ppm/year
Storage temperature|Tstg||-55|——|+125|°C"""
    )
    for row, band in zip((4, 5, 6), ("12.000 - 15.999 MHz", "16.000 - 29.999 MHz", "30.000 - 54.000 MHz"), strict=True):
        data[row][2] = band
    data[4][0], data[5][0] = data[5][0], ""
    data[4][1], data[5][1] = data[5][1], ""
    data[4][6], data[5][6] = data[5][6], ""
    spans = [("SPAN", (column, 4), (column, 6)) for column in (0, 1, 6)]
    spans += [("SPAN", (column, 7), (column, 8)) for column in (0, 1, 6)]
    spans += [("SPAN", (3, 2), (5, 2))]
    page.table(50, 90, data, [125, 50, 110, 50, 50, 50, 60], style=[*spans, ("ALIGN", (3, 1), (6, -1), "CENTER")])
    parts = [
        part(
            "GLY-32",
            """
            f 12..54
            tol -15..15
            stab -20..20 t=-30:85
            stab -40..40 t=-40:105
            op -30..85
            op -40..105
            esr <100 f=12:15.999
            esr <60 f=16:29.999
            esr <40 f=30:54
            cl 12
            c0 <3
            c1 4.2 f=27
            dl -/10/200
            age -3..3 y=1
            sto -55..125""",
            maker="Glymere Crystal",
            package="3.2 x 2.5 x 0.7 mm",
            mode="fund",
            cut="AT",
            res="load",
        )
    ]
    layout = "label centred over three value rows, bands and ranges in the condition column, —— for empty"
    keep("centred_label_bands_en.pdf", page.bytes(), parts, "en", layout)


def folded_columns() -> None:
    page = Sheet("DRH49")
    page.text(50, 50, "Drayhampton", 16, "Bold")
    page.text(50, 68, "DRH49 thru-hole quartz crystals, HC-49/U", 10)
    data = cells(
        """SPECIFICATIONS|MAX (unless otherwise noted)
Frequency range|3579 to 30000 kHz
Frequency tolerance @ 25 °C|±30 ppm
Frequency stability|±50 ppm
Operating temperature|-10 to +60 °C
Storage temperature|-40 to +85 °C
Shunt capacitance (C0)|7 pF
Load capacitance (CL)|16 pF (typ)
Drive level|1 mW
Aging per year|±5 ppm
Insulation resistance|500 MΩ (Min)
Mode|AT, Fundamental"""
    )
    below = page.table(50, 90, data, [170, 170])
    page.text(50, below + 18, "EQUIVALENT SERIES RESISTANCE", 9, "Bold")
    bands = cells(
        """Frequency (kHz)|ESR (Ohms)|Frequency (kHz)|ESR (Ohms)
3579 - 4999|180|10000 - 12999|50
5000 - 5999|120|13000 - 19999|40
6000 - 9999|80|20000 - 30000|30"""
    )
    page.table(50, below + 26, bands, [100, 70, 100, 70], style=[("ALIGN", (0, 0), (-1, -1), "CENTER")])
    parts = [
        part(
            "DRH49",
            """
            f 3.579..30
            tol ±30
            stab ±50
            op -10..60
            sto -40..85
            c0 <7
            cl 16
            dl <1000
            age ±5 y=1
            ir >500
            esr <180 f=3.579:4.999 bare
            esr <120 f=5:5.999 bare
            esr <80 f=6:9.999 bare
            esr <50 f=10:12.999 bare
            esr <40 f=13:19.999 bare
            esr <30 f=20:30 bare""",
            maker="Drayhampton",
            package="HC-49/U",
            mode="fund",
            cut="AT",
            res="load",
        )
    ]
    for one in parts[0]["readings"]:
        if one.get("bare"):
            one["typ"], one["max"] = one["max"], None
    layout = "head 'MAX unless otherwise noted'; band table in kHz folded into two column pairs"
    keep("folded_bands_khz_en.pdf", page.bytes(), parts, "en", layout)


def graph_beside() -> None:
    page = Sheet("TFS-31")
    page.text(50, 50, "Sallowfen Timing - TFS-31", 16, "Bold")
    page.text(50, 70, "32.768 kHz tuning fork crystal, 3.2 x 1.5 x 0.8 mm", 10)
    rows = cells(
        """Parameter|Value|Unit
Nominal frequency f|32.768|kHz
Frequency tolerance at +25 °C|20|± ppm
Load capacitance CL|9.0|pF
Series resistance Rs|70 max|kΩ
Drive level|0.5 max|µW
Turnover temperature|25 ±5|°C
Temperature coefficient|-0.035 ±0.008|ppm/°C²
Ageing, first year|3|± ppm
Static capacitance C0|1.2 typ|pF
Motional capacitance C1|3.8 typ|fF
Operating temperature|-40 to +85|°C
Storage temperature|-55 to +125|°C
Insulation resistance|500 min|MΩ"""
    )
    y = 100.0
    for label, value, unit in rows:
        page.text(50, y, label, 8)
        page.text(190, y, value, 8)
        page.text(262, y, unit, 8)
        y += 16
    page.text(340, 96, "Typical frequency stability", 8, "Bold")
    canvas = page.canvas
    for step, words in enumerate(("0", "-20", "-40", "-60", "-80", "-100", "-120", "-140")):
        page.text(330, 112 + 24 * step, words, 6)
    for step, words in enumerate(("-40", "-20", "0", "20", "40", "60", "80")):
        page.text(352 + 27 * step, 298, words, 6)
    page.text(318, 104, "Δf/f [ppm]", 6)
    page.text(405, 310, "Temperature [°C]", 6)
    points = [(t, -0.035 * (t - 25) ** 2) for t in range(-40, 86, 5)]
    path = canvas.beginPath()
    for index, (t, ppm) in enumerate(points):
        x, height = 355 + (t + 40) * 1.35, page.height - 110 + 1.2 * ppm
        (path.lineTo if index else path.moveTo)(x, height)
    canvas.drawPath(path)
    canvas.rect(350, page.height - 290, 180, 182)
    parts = [
        part(
            "TFS-31",
            """
            f 0.032768
            tol ±20
            cl 9
            esr <70000
            dl <0.5
            to 20/25/30
            k -0.043/-0.035/-0.027
            age ±3 y=1
            c0 1.2
            c1 3.8
            op -40..85
            sto -55..125
            ir >500""",
            maker="Sallowfen Timing",
            package="3.2 x 1.5 x 0.8 mm",
            cut="tuning fork",
            res="load",
        )
    ]
    layout = "borderless rows with '± ppm' in the unit column, a graph with its numbers to the right of them"
    keep("graph_beside_rows_en.pdf", page.bytes(), parts, "en", layout)


def ordering_boxes() -> None:
    page = Sheet("OXB25")
    page.text(50, 50, "Oxbarrow Crystals", 16, "Bold")
    page.text(50, 70, "OXB25 - 2.5 x 2.0 mm SMD crystal, fundamental AT", 10)
    data = cells(
        """Specification|Value
Frequency range|12.000 - 52.000 MHz
Frequency tolerance at 25 °C|±10, ±15, ±30 ppm (1)
Frequency stability|±15, ±30, ±50 ppm (2)
Operating temperature|-20 to +70 °C, -40 to +85 °C or -40 to +125 °C
Load capacitance|8, 10, 12, 18 pF
ESR|60 Ω max. (3)
Shunt capacitance|2.0 pF max.
Drive level|100 µW max.
Ageing|±3 ppm/year"""
    )
    y = page.table(50, 90, data, [150, 260])
    page.text(
        50, y + 14, "(1) ±10 ppm not with 18 pF.  (2) ±15 ppm for -20 to +70 °C only; -40 to +125 °C: ±50 ppm only.", 7
    )
    page.text(50, y + 25, "(3) 12.000 to 15.999 MHz: 100 Ω max.", 7)
    page.text(50, y + 50, "Part number guide", 10, "Bold")
    x = 50.0
    for words in ("OXB25", "26.000", "C", "C", "G", "C", "T"):
        page.canvas.rect(x, page.height - y - 78, 52, 18)
        page.text(x + 8, y + 73, words, 8)
        x += 58
    codes = cells(
        """Tolerance|Stability|Temperature|Load|Packing
A = ±10 ppm|A = ±15 ppm|C = -20 to +70 °C|C = 8 pF|T = tape
C = ±15 ppm|C = ±30 ppm|G = -40 to +85 °C|E = 10 pF|blank = bulk
G = ±30 ppm|G = ±50 ppm|K = -40 to +125 °C|G = 12 pF|
|||K = 18 pF|"""
    )
    page.table(50, y + 95, codes, [80, 80, 110, 70, 80])
    parts = [
        part(
            "OXB25",
            """
            f 12..52
            tol {10,15,30}
            stab {15,30,50}
            op -20..70
            op -40..85
            op -40..125
            cl {8,10,12,18}
            esr <60
            esr <100 f=12:15.999
            c0 <2
            dl <100
            age ±3 y=1""",
            maker="Oxbarrow Crystals",
            package="2.5 x 2.0 mm",
            mode="fund",
            cut="AT",
            res="load",
        )
    ]
    layout = "order-key boxes, one letter with four meanings, footnotes that restrict the options and the ESR"
    keep("order_key_boxes_en.pdf", page.bytes(), parts, "en", layout)


def _special_parts() -> list[Json]:
    return [
        part(
            "HPS-10M",
            """
            f 10
            tol ±1
            to 80/85/90
            esr 70..110
            c1 0.22
            l1 1151
            q >650000
            c0 2.4/3/3.6
            dl -/50/200
            age ±0.05 y=1
            op -40..90
            sto -55..100""",
            maker="Hexapole Precision Quartz",
            package="HC-43/U",
            mode="3rd",
            cut="SC",
            res="series",
        ),
        part(
            "HPB-24M",
            """
            f 24
            cl 20
            tol ±20
            stab ±50 t=0:50
            op 0..50
            esr <40
            c1 4
            c0 -/2.8/7
            pull 3.8
            dl <500
            age ±5 y=1""",
            maker="Hexapole Precision Quartz",
            package="HC-49/U-S",
            mode="fund",
            cut="BT",
            res="load",
        ),
    ]


def special_cuts() -> None:
    from fpdf import FPDF

    pdf = FPDF(format="A4")
    pdf.set_creation_date(datetime(2024, 5, 6, tzinfo=UTC))
    pdf.add_font("Sans", "", str(FONTS / "dejavu" / "DejaVuSans.ttf"))
    pdf.add_font("Sans", "B", str(FONTS / "dejavu" / "DejaVuSans-Bold.ttf"))
    pdf.add_page()

    def heading(text: str, size: int) -> None:
        pdf.set_font("Sans", "B", size)
        pdf.cell(0, 9, text, new_x="LMARGIN", new_y="NEXT")

    def table(lines: str) -> None:
        pdf.set_font("Sans", "", 8)
        with pdf.table(col_widths=(60, 70), width=130, align="LEFT", line_height=5, first_row_as_headings=False) as t:
            for label, value in cells(lines):
                t.row((label, value))

    heading("Hexapole Precision Quartz", 15)
    heading("HPS-10M: SC-cut third overtone for oven oscillators, HC-43/U", 11)
    table(
        """Nominal frequency|10.000 MHz
Cut and mode|SC, 3rd overtone
Resonance|series
Frequency tolerance at turnover|±1 ppm
Turnover (upper)|85 °C ±5 °C
Motional resistance R1|70 to 110 Ω
Motional capacitance C1|0.22 fF typ.
Motional inductance L1|1151 mH typ.
Quality factor Q|min. 6.5 × 10⁵
Static capacitance C0|3.0 pF ±20 %
Level of drive|50 µW nominal, 200 µW max.
Drive level dependency, 1 µW to 500 µW|Δf ±1 ppm, ΔR1 10 %
Ageing, after 30 days of operation|±0.05 ppm/year
Operating temperature|-40 to +90 °C
Storage temperature|-55 to +100 °C"""
    )
    pdf.ln(6)
    heading("HPB-24M: BT-cut fundamental, HC-49/U-S", 11)
    table(
        """Nominal frequency|24.000 MHz
Cut and mode|BT, fundamental
Load capacitance|20 pF
Frequency tolerance at 25 °C|±20 ppm
Frequency stability, 0 to +50 °C|±50 ppm
Operating temperature|0 to +50 °C
ESR|40 Ω max.
C1|4.0 fF typ.
C0|2.8 pF typ., 7 pF max.
Pulling sensitivity at 20 pF|3.8 ppm/pF typ.
Drive level|500 µW max.
Ageing|±5 ppm/year"""
    )
    layout = "two parts, a heading and a table each; SC and BT cuts, L1, Q as a power of ten, a range of R1, pulling"
    keep("sc_and_bt_cuts_en.pdf", bytes(pdf.output()), _special_parts(), "en", layout)


def contradiction() -> None:
    page = Sheet("NVQ20")
    page.text(50, 50, "Nethercombe Vale Quartz", 16, "Bold")
    page.text(50, 72, "NVQ20-32M0-8  32 MHz crystal 2.0 x 1.6 mm", 12)
    for step, words in enumerate(
        (
            "Features",
            "• Very low ESR: 40 Ω max.",
            "• Load capacitance 8 pF, tolerance ±10 ppm at 25 °C",
            "• For wireless modules, -40 to +85 °C",
        )
    ):
        page.text(50, 95 + 14 * step, words, 9)
    data = cells(
        """Electrical parameter|Minimum|Typical|Maximum|Unit
Frequency||32.000||MHz
Mode of operation||Fundamental, AT||
Frequency tolerance (25 °C)|-10||10|ppm
Frequency stability|-15||15|ppm
Operating temperature|-40||85|°C
Load capacitance||8||pF
ESR|||60|Ω
Shunt capacitance|0|0.9|5|pF
Motional capacitance||2.5||fF
Drive level||10|100|µW
Ageing (first year)|-1||1|ppm
Insulation resistance|500|||MΩ"""
    )
    page.table(50, 165, data, [170, 65, 80, 65, 50], style=[("ALIGN", (1, 0), (-1, -1), "CENTER")])
    parts = [
        part(
            "NVQ20-32M0-8",
            """
            f 32
            tol -10..10
            stab -15..15
            op -40..85
            cl 8
            esr <60 flag also=<40
            c0 -/0.9/5
            c1 2.5
            dl -/10/100
            age -1..1 y=1
            ir >500""",
            maker="Nethercombe Vale Quartz",
            package="2.0 x 1.6 mm",
            mode="fund",
            cut="AT",
            res="load",
        )
    ]
    layout = "features list above the table contradicts its ESR; shunt capacitance '0 | 5'"
    keep("features_contradict_en.pdf", page.bytes(), parts, "en", layout)


if __name__ == "__main__":
    for make in (
        stacked_labels,
        centred_label,
        folded_columns,
        graph_beside,
        ordering_boxes,
        special_cuts,
        contradiction,
    ):
        make()
