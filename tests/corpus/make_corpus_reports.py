"""Corpus sheets that say what was measured, asked or compared beside what is guaranteed. Run from this folder to write them anew."""

# ruff: noqa: E501 - lines as they were sent

from __future__ import annotations

import datetime
import io
from typing import Any

import docx
from corpus_shorthand import keep, part
from openpyxl import Workbook


def _saved(document: Any) -> bytes:
    buffer = io.BytesIO()
    document.save(buffer)
    return buffer.getvalue()


def _book(sheets: list[tuple[str, list[list[Any]]]]) -> Any:
    book = Workbook()
    book.remove(book.active)
    for title, rows in sheets:
        sheet = book.create_sheet(title)
        for row in rows:
            sheet.append(row)
    return book


def samples_below() -> None:
    d = docx.Document()
    d.add_heading("Hoja de aprobación", 0)
    d.add_paragraph("Proveedor: Cuarzos Almenara S.L.    Cliente: Talleres Bidea")
    d.add_paragraph("Modelo: CAL-49S-8.000   Rev. B   Fecha: 03.02.2026")
    t = d.add_table(rows=0, cols=5)
    for r in [
        ("N.º", "Característica", "Símbolo", "Especificación", "Condición"),
        ("1", "Frecuencia nominal", "F0", "8,000 MHz", ""),
        ("2", "Modo de vibración", "", "Fundamental, corte AT", ""),
        ("3", "Tolerancia de frecuencia", "ΔF/F", "± 30 ppm", "a 25 °C ± 3 °C"),
        ("4", "Estabilidad térmica", "", "± 50 ppm", "de -20 °C a +70 °C, ref. 25 °C"),
        ("5", "Capacidad de carga", "CL", "16 pF", ""),
        ("6", "Resistencia serie equivalente", "Rs", "80 Ω máx.", "100 µW"),
        ("7", "Capacidad paralela", "C0", "7 pF máx.", ""),
        ("8", "Nivel de excitación", "DL", "500 µW máx.", ""),
        ("9", "Envejecimiento", "", "± 5 ppm/año", "25 °C"),
        ("10", "Temperatura de almacenamiento", "", "-40 °C a +85 °C", ""),
        ("11", "Resistencia de aislamiento", "", "500 MΩ mín.", "100 V CC"),
    ]:
        c = t.add_row().cells
        for a, x in zip(c, r, strict=True):
            a.text = x
    d.add_heading("Datos de inspección (muestras)", 1)
    d.add_paragraph("Equipo: analizador de cristales, CL = 16 pF, 25 °C")
    t = d.add_table(rows=0, cols=6)
    for r in [
        ("Muestra", "FL (ppm)", "RR (Ω)", "C0 (pF)", "C1 (fF)", "TS (ppm/pF)"),
        ("1", "3,2", "31,5", "4,1", "17,2", "21,3"),
        ("2", "-4,8", "28,9", "4,2", "17,5", "21,6"),
        ("3", "7,1", "33,0", "4,1", "17,1", "21,2"),
        ("4", "0,6", "30,2", "4,0", "17,3", "21,5"),
        ("Máx.", "7,1", "33,0", "4,2", "17,5", "21,6"),
        ("Mín.", "-4,8", "28,9", "4,0", "17,1", "21,2"),
        ("Media", "1,5", "30,9", "4,1", "17,3", "21,4"),
    ]:
        c = t.add_row().cells
        for a, x in zip(c, r, strict=True):
            a.text = x
    d.add_heading("Ensayos de fiabilidad", 1)
    t = d.add_table(rows=0, cols=3)
    for r in [
        ("Ensayo", "Condiciones", "Criterio"),
        ("Choque térmico", "-40 °C a +85 °C, 100 ciclos", "ΔF/F ≤ ±5 ppm; ΔRs ≤ 15 %"),
        ("Calor seco", "+85 °C, 500 h", "ΔF/F ≤ ±5 ppm"),
        ("Soldadura", "260 °C, 10 s", "sin daños"),
    ]:
        c = t.add_row().cells
        for a, x in zip(c, r, strict=True):
            a.text = x
    keep(
        "aprobacion_es.docx",
        _saved(d),
        [
            part(
                "CAL-49S-8.000",
                "f 8\ntol ±30\nstab ±50 t=-20:70\nop -20..70\ncl 16\nesr <80\nc0 <7\ndl <500\nage ±5 y=1\nsto -40..85\nir >500",
                maker="Cuarzos Almenara S.L.",
                mode="fund",
                cut="AT",
                res="load",
            )
        ],
        "es",
        "approval sheet with measured samples and reliability tests",
    )


def samples_beside() -> None:
    wb = _book(
        [
            (
                "出货检验报告",
                [
                    ["晶启频控有限公司 出货检验报告"],
                    ["型号", "JQX3225-16M-9", "", "批号", "240517-03", "", "日期", "2026-02-03"],
                    ["客户", "澄江智能", "", "数量", "3000", "", "检验员", "周敏"],
                    [],
                    ["序号", "检验项目", "规格", "单位", "条件", "1", "2", "3", "4", "5", "平均", "判定"],
                    [
                        1,
                        "标称频率",
                        "16.000",
                        "MHz",
                        "",
                        16.000021,
                        15.999987,
                        16.000043,
                        16.000012,
                        15.999968,
                        16.000006,
                        "OK",
                    ],
                    [2, "频率偏差", "±10", "ppm", "25±3℃", 1.3, -0.8, 2.7, 0.8, -2.0, 0.4, "OK"],
                    [3, "温度频差", "±20", "ppm", "-40~85℃", -12.1, -11.7, -13.5, -12.8, -11.9, -12.4, "OK"],
                    [4, "负载电容", "9", "pF", "", 9, 9, 9, 9, 9, 9, "OK"],
                    [5, "谐振电阻", "80 Max", "Ω", "", 24.6, 26.1, 25.3, 27.9, 24.9, 25.8, "OK"],
                    [6, "静态电容", "3 Max", "pF", "", 1.41, 1.43, 1.40, 1.42, 1.41, 1.41, "OK"],
                    [7, "动态电容", "", "fF", "", 4.82, 4.91, 4.77, 4.85, 4.80, 4.83, ""],
                    [8, "激励功率", "100 Max", "μW", "", 10, 10, 10, 10, 10, 10, "OK"],
                    [9, "绝缘电阻", "500 Min", "MΩ", "DC100V", ">500", ">500", ">500", ">500", ">500", ">500", "OK"],
                ],
            )
        ]
    )
    keep(
        "chuhuo_baogao_zh.xlsx",
        _saved(wb),
        [
            part(
                "JQX3225-16M-9",
                "f 16\ntol ±10\nstab ±20 t=-40:85\nop -40..85\ncl 9\nesr <80\nc0 <3\ndl <100\nir >500",
                maker="晶启频控有限公司",
            )
        ],
        "zh",
        "inspection report, limits beside measured samples",
    )


def load_become_a_date() -> None:
    wb = Workbook()
    ws = wb.active
    ws.title = "Xtals"
    ws.append(["Crystal cross list", "", "", "", "", "", "", "", "", "", "", ""])
    ws.append(["Part", "", "Freq", "CL", "Tolerance @25C", "", "Stability", "", "Temp. range", "", "ESR", "C0"])
    ws.append(
        [
            "Number",
            "Maker",
            "MHz",
            "pF",
            "min ppm",
            "max ppm",
            "min ppm",
            "max ppm",
            "min °C",
            "max °C",
            "max Ω",
            "max pF",
        ]
    )
    ws.append(["GX-5032-12-18", "Gellatly", "12.000 ", "18", "-30", "30", "-50", "50", "-20", "70", "70", "7"])
    ws.append(["GX-5032-20-12", "Gellatly", 20, datetime.datetime(2026, 5, 12), -20, 20, -30, 30, -40, 85, 50, 5])
    ws.append(["GX-3225-27-10", "Gellatly", 27, 10, -10, 10, -15, 15, -40, 85, 40, 3])
    ws.append(["TOTAL", "", "", "", "", "", "", "", "", "", "", ""])
    ws.merge_cells("A2:B2")
    ws.merge_cells("E2:F2")
    ws.merge_cells("G2:H2")
    ws.merge_cells("I2:J2")
    ws.row_dimensions[6].hidden = True
    keep(
        "cross_list_dates_en.xlsx",
        _saved(wb),
        [
            part(
                "GX-5032-12-18",
                "f 12\ncl 18\ntol ±30\nstab ±50\nop -20..70\nesr <70\nc0 <7",
                maker="Gellatly",
                res="load",
            ),
            part(
                "GX-5032-20-12", "f 20\ncl 12.5 flag\ntol ±20\nstab ±30\nop -40..85\nesr <50\nc0 <5", maker="Gellatly"
            ),
            part(
                "GX-3225-27-10",
                "f 27\ncl 10\ntol ±10\nstab ±15\nop -40..85\nesr <40\nc0 <3",
                maker="Gellatly",
                res="load",
            ),
        ],
        "en",
        "two heading rows, numbers as text, a load that became a date",
    )


def first_samples() -> None:
    d = docx.Document()
    d.add_heading("Freigabeblatt Bauteil 2204-0117", 0)
    t = d.add_table(rows=0, cols=3)
    for r in [
        ("Rev.", "Datum", "Änderung"),
        ("A", "12.03.2024", "Erstausgabe"),
        ("B", "04.11.2025", "ESR von 60 auf 50 Ω gesenkt"),
    ]:
        for a, x in zip(t.add_row().cells, r, strict=True):
            a.text = x
    d.add_paragraph("")
    t = d.add_table(rows=8, cols=6)
    rows = [
        ("Parameter", "Bedingung", "min.", "typ.", "max.", "Einheit"),
        ("Nennfrequenz", "", "", "27,000", "", "MHz"),
        ("Frequenztoleranz", "+25 °C", "-15", "", "+15", "ppm"),
        ("Frequenzstabilität", "-40 … +85 °C", "-25", "", "+25", "ppm"),
        ("ESR", "", "", "30", "50", "Ω"),
        ("Lastkapazität CL", "", "", "10", "", "pF"),
        ("Drive Level", "", "", "10", "200", "µW"),
        ("Statische Kapazität C0", "", "", "1,1", "3,0", "pF"),
    ]
    for i, r in enumerate(rows):
        for j, x in enumerate(r):
            t.cell(i, j).text = x
    d.add_paragraph("")
    d.add_paragraph("Hersteller: Lindenau Frequenztechnik GmbH, Typ LFT-3225-27M0-10")
    t = d.add_table(rows=0, cols=5)
    for r in [
        ("Erstmusterprüfung", "Soll", "Muster 1", "Muster 2", "Muster 3"),
        ("Frequenzabweichung (ppm)", "±15", "2,1", "-3,4", "0,9"),
        ("ESR (Ω)", "max. 50", "22", "24", "21"),
        ("C0 (pF)", "max. 3,0", "1,12", "1,09", "1,15"),
        ("C1 (fF)", "-", "4,6", "4,5", "4,6"),
    ]:
        for a, x in zip(t.add_row().cells, r, strict=True):
            a.text = x
    keep(
        "freigabeblatt_de.docx",
        _saved(d),
        [
            part(
                "LFT-3225-27M0-10",
                "f 27\ntol ±15\nstab ±25 t=-40:85\nop -40..85\nesr -/30/50\ncl 10\ndl -/10/200\nc0 -/1.1/3",
                maker="Lindenau Frequenztechnik GmbH",
                res="load",
            )
        ],
        "de",
        "history of changes, limits, first samples measured",
    )


def form_a_sheet() -> None:
    wb = Workbook()
    wb.remove(wb.active)

    def form(title, pn, rows):
        ws = wb.create_sheet(title)
        ws["B2"] = "Component qualification form"
        ws["B4"] = "Part number"
        ws["D4"] = pn
        ws["B5"] = "Manufacturer"
        ws["D5"] = "Skelwith Crystals"
        ws["B7"] = "Characteristic"
        ws["D7"] = "Guaranteed"
        ws["E7"] = "Measured (avg of 10)"
        ws["F7"] = "Unit"
        for i, (a, g, m, u) in enumerate(rows, 8):
            ws.cell(i, 2, a)
            ws.cell(i, 4, g)
            ws.cell(i, 5, m)
            ws.cell(i, 6, u)
        return ws

    form(
        "SKX-16",
        "SKX-2016-16M",
        [
            ("Nominal frequency", 16, 16.00001, "MHz"),
            ("Load capacitance", 9, "", "pF"),
            ("Frequency tolerance at 25 C", "+/-15", 1.8, "ppm"),
            ("Stability -40 to 85 C", "+/-25", -14.2, "ppm"),
            ("ESR max.", 120, 48.1, "Ohm"),
            ("Shunt capacitance max.", 2, 0.71, "pF"),
            ("Drive level max.", 100, "", "uW"),
        ],
    )
    form(
        "SKX-24",
        "SKX-2016-24M",
        [
            ("Nominal frequency", 24, 24.00002, "MHz"),
            ("Load capacitance", 8, "", "pF"),
            ("Frequency tolerance at 25 C", "+/-10", 0.9, "ppm"),
            ("Stability -40 to 85 C", "+/-20", -11.0, "ppm"),
            ("ESR max.", 80, 31.7, "Ohm"),
            ("Shunt capacitance max.", 2, 0.82, "pF"),
            ("Drive level max.", 100, "", "uW"),
        ],
    )
    keep(
        "forms_one_part_a_sheet_en.xlsx",
        _saved(wb),
        [
            part(
                "SKX-2016-16M",
                "f 16\ncl 9\ntol ±15\nstab ±25 t=-40:85\nop -40..85\nesr <120\nc0 <2\ndl <100",
                maker="Skelwith Crystals",
            ),
            part(
                "SKX-2016-24M",
                "f 24\ncl 8\ntol ±10\nstab ±20 t=-40:85\nop -40..85\nesr <80\nc0 <2\ndl <100",
                maker="Skelwith Crystals",
            ),
        ],
        "en",
        "a form on each sheet of a workbook, guaranteed beside measured",
    )


def page_with_related_parts() -> None:
    html = """<html><head><meta http-equiv="Content-Type" content="text/html; charset=big5"><title>晶曜電子 JY3225 石英晶體</title></head><body>
<div class="crumb">首頁 &gt; 產品 &gt; 被動元件 &gt; 石英晶體 &gt; JY3225-24M-12</div>
<h1>JY3225-24M-12 石英晶體諧振器</h1>
<p>製造商：晶曜電子　庫存：12,800 個　交期：6 週　最小訂購量 3000</p>
<table class="spec"><tr><th>屬性</th><th>數值</th></tr>
<tr><td>標稱頻率</td><td>24 MHz</td></tr><tr><td>振動模式</td><td>基頻</td></tr>
<tr><td>負載電容</td><td>12 pF</td></tr><tr><td>頻率容差 (25℃)</td><td>±15 ppm</td></tr>
<tr><td>頻率穩定度</td><td>±20 ppm</td></tr><tr><td>等效串聯電阻</td><td>最大 50 Ω</td></tr>
<tr><td>靜態電容</td><td>最大 3 pF</td></tr><tr><td>激勵功率</td><td>最大 200 μW (典型 10 μW)</td></tr>
<tr><td>工作溫度</td><td>-40℃ ~ +85℃</td></tr><tr><td>儲存溫度</td><td>-55℃ ~ +125℃</td></tr>
<tr><td>老化率</td><td>±3 ppm/年</td></tr><tr><td>絕緣電阻</td><td>最小 500 MΩ (DC 100V)</td></tr>
<tr><td>封裝</td><td>3.2 x 2.5 mm</td></tr><tr><td>回流焊峰值溫度</td><td>260℃</td></tr></table>
<h2>相關產品</h2><table><tr><th>型號</th><th>頻率</th><th>說明</th></tr>
<tr><td>JY3225-26M-10</td><td>26 MHz</td><td>10 pF, ±10 ppm</td></tr>
<tr><td>JYO3225-24M</td><td>24 MHz</td><td>石英振盪器, 3.3V CMOS</td></tr></table></body></html>"""
    keep(
        "product_page_big5.html",
        html.encode("big5hkscs"),
        [
            part(
                "JY3225-24M-12",
                "f 24\ncl 12\ntol ±15\nstab ±20\nesr <50\nc0 <3\ndl -/10/200\nop -40..85\nsto -55..125\nage ±3 y=1\nir >500",
                maker="晶曜電子",
                mode="fund",
                package="3.2 x 2.5 mm",
                res="load",
            ),
            part("JY3225-26M-10", "f 26\ncl 10\ntol ±10"),
        ],
        "zh",
        "product page with attribute table and related parts, Big5",
        not_parts=["JYO3225-24M"],
    )


def compared_in_a_shop() -> None:
    h = """<html lang=it><meta charset=utf-8><body><h2>Confronta prodotti (3)</h2><table class=cmp>
<tr><th></th><td><img src=a.png><br><a href=#>LRQ3225-16M0</a><br><button>Aggiungi al carrello</button></td><td><img src=b.png><br><a href=#>LRQ2520-16M0</a><br><button>Aggiungi al carrello</button></td><td><img src=c.png><br><a href=#>SBQ-32-16.0-8</a><br><button>Aggiungi al carrello</button></td></tr>
<tr><th>Produttore</th><td>Larianese Quarzi</td><td>Larianese Quarzi</td><td>Serbino</td></tr>
<tr><th>Frequenza</th><td>16 MHz</td><td>16 MHz</td><td>16 MHz</td></tr>
<tr><th>Capacità di carico</th><td>9 pF</td><td>10 pF</td><td>8 pF</td></tr>
<tr><th>Tolleranza in frequenza</th><td>±10 ppm</td><td>±15 ppm</td><td>±20 ppm</td></tr>
<tr><th>Stabilità in frequenza</th><td>±20 ppm</td><td>±20 ppm</td><td>-</td></tr>
<tr><th>ESR max.</th><td>80 Ω</td><td>100 Ω</td><td>60 Ω</td></tr>
<tr><th>Temperatura min. di esercizio</th><td>-40 °C</td><td>-40 °C</td><td>-20 °C</td></tr>
<tr><th>Temperatura max. di esercizio</th><td>85 °C</td><td>105 °C</td><td>70 °C</td></tr>
<tr><th>Dimensioni</th><td>3,2 x 2,5 mm</td><td>2,5 x 2,0 mm</td><td>3,2 x 2,5 mm</td></tr>
<tr><th>Qualifica AEC-Q200</th><td>No</td><td>Sì</td><td>No</td></tr>
<tr><th>Prezzo unitario</th><td>0,2450 €</td><td>0,3100 €</td><td>0,1980 €</td></tr></table></body></html>"""
    keep(
        "confronta_it.html",
        h,
        [
            part(
                "LRQ3225-16M0",
                "f 16\ncl 9\ntol ±10\nstab ±20\nesr <80\nop -40..85",
                maker="Larianese Quarzi",
                package="3,2 x 2,5 mm",
                attributes={"aec_q200": False},
            ),
            part(
                "LRQ2520-16M0",
                "f 16\ncl 10\ntol ±15\nstab ±20\nesr <100\nop -40..105",
                maker="Larianese Quarzi",
                package="2,5 x 2,0 mm",
                attributes={"aec_q200": True},
            ),
            part(
                "SBQ-32-16.0-8",
                "f 16\ncl 8\ntol ±20\nesr <60\nop -20..70",
                maker="Serbino",
                package="3,2 x 2,5 mm",
                attributes={"aec_q200": False},
            ),
        ],
        "it",
        "comparison page of a shop, parts as columns with buttons",
    )


def pairs_side_by_side() -> None:
    d = docx.Document()
    d.add_heading("产品承认书", 0)
    t = d.add_table(rows=0, cols=4)
    for r in [
        ("客户名称", "湖滨电器", "供方", "凌湾晶体有限公司"),
        ("产品名称", "石英晶体谐振器", "型号", "LWX-49S-6.000M"),
        ("标称频率", "6.000MHz", "负载电容", "20pF"),
        ("调整频差", "±20ppm（25℃）", "温度频差", "±30ppm"),
        ("谐振电阻", "≤100Ω", "静态电容", "≤7pF"),
        ("激励功率", "100μW", "绝缘电阻", "≥500MΩ"),
        ("工作温度", "-20℃~+70℃", "储存温度", "-40℃~+85℃"),
        ("振动模式", "基频 AT", "老化率", "±5ppm/年"),
        ("日期", "2026.01.15", "版本", "A/1"),
    ]:
        for a, x in zip(t.add_row().cells, r, strict=True):
            a.text = x
    d.add_heading("可靠性试验", 1)
    t = d.add_table(rows=0, cols=3)
    for r in [
        ("试验项目", "条件", "判定"),
        ("高温储存", "85℃ 96h", "频率变化≤±5ppm，电阻变化≤±20%"),
        ("低温储存", "-40℃ 96h", "频率变化≤±5ppm"),
        ("跌落", "75cm 3次", "频率变化≤±5ppm"),
    ]:
        for a, x in zip(t.add_row().cells, r, strict=True):
            a.text = x
    keep(
        "chengrenshu_zh.docx",
        _saved(d),
        [
            part(
                "LWX-49S-6.000M",
                "f 6\ncl 20\ntol ±20\nstab ±30\nesr <100\nc0 <7\ndl 100 bare\nir >500\nop -20..70\nsto -40..85\nage ±5 y=1",
                maker="凌湾晶体有限公司",
                mode="fund",
                cut="AT",
            )
        ],
        "zh",
        "approval sheet, two pairs of label and value in a row",
    )


def tables_abreast() -> None:
    wb = Workbook()
    ws = wb.active
    ws.title = "Timing parts"
    crystals = ["MPN", "MHz", "CL pF", "ESR max Ω", "Tol ±ppm", "Temp °C"]
    oscillators = ["MPN", "MHz", "Vdd V", "Idd mA", "Stab ±ppm", "Temp °C"]
    ws.append(["Crystals", "", "", "", "", "", "", "Oscillators"])
    ws.append(crystals + [""] + oscillators)
    for a, b in [
        (["PDX20-19M2-8", 19.2, 8, 60, 10, "-40..85"], ["PDO25-25M", 25, 1.8, 4.5, 25, "-40..85"]),
        (["PDX20-26M-7", 26, 7, 50, 10, "-30..85"], ["PDO25-48M", 48, 3.3, 9, 50, "-20..70"]),
        (["PDX16-52M-6", 52, 6, 40, 8, "-40..105"], ["", "", "", "", "", ""]),
    ]:
        ws.append(a + [""] + b)
    ws.append([])
    ws.append(["Note: all crystals fundamental, made by Pendoggett Frequency."])
    keep(
        "two_tables_abreast_en.xlsx",
        _saved(wb),
        [
            part("PDX20-19M2-8", "f 19.2\ncl 8\nesr <60\ntol ±10\nop -40..85", res="load"),
            part("PDX20-26M-7", "f 26\ncl 7\nesr <50\ntol ±10\nop -30..85", res="load"),
            part("PDX16-52M-6", "f 52\ncl 6\nesr <40\ntol ±8\nop -40..105", res="load"),
        ],
        "en",
        "crystals and oscillators side by side on one sheet",
        not_parts=["PDO25-25M", "PDO25-48M"],
    )


def lot_report() -> None:
    d = docx.Document()
    d.add_heading("Outgoing quality report lot 2611-04", 0)
    d.add_paragraph("Part: RWX-2016-37M4 by Rosewarne Frequency Ltd. Frequency 37.400 MHz, fundamental.")
    t = d.add_table(rows=0, cols=7)
    for r in [
        ("Characteristic", "Unit", "LSL", "USL", "Mean", "Std dev", "Cpk"),
        ("Frequency deviation @25C", "ppm", "-10", "10", "0.8", "1.9", "1.61"),
        ("ESR", "ohm", "", "60", "24.1", "2.2", "5.44"),
        ("C0", "pF", "", "2.0", "0.83", "0.03", "13.0"),
        ("C1", "fF", "", "", "2.61", "0.05", ""),
        ("Insulation resistance", "Mohm", "500", "", "", "", ""),
    ]:
        for a, y in zip(t.add_row().cells, r, strict=True):
            a.text = y
    keep(
        "quality_report_en.docx",
        _saved(d),
        [
            part(
                "RWX-2016-37M4",
                "f 37.4\ntol ±10\nesr <60\nc0 <2\nir >500",
                maker="Rosewarne Frequency Ltd",
                mode="fund",
            )
        ],
        "en",
        "lot report with limits, mean and Cpk",
    )


def before_and_after() -> None:
    h = """<html lang=en><meta charset=utf-8><body><h1>Product change notice PCN-2026-07: TLX32-25.000-10</h1><p>Issued by Tolcarne Crystals Ltd</p><table><tr><th>Parameter</th><th>Before</th><th>After</th><th>Unit</th></tr><tr><td>Nominal frequency</td><td>25.000</td><td>25.000</td><td>MHz</td></tr><tr><td>Load capacitance</td><td>10</td><td>10</td><td>pF</td></tr><tr><td>ESR max.</td><td>50</td><td>40</td><td>Ω</td></tr><tr><td>Shunt capacitance max.</td><td>3</td><td>2.5</td><td>pF</td></tr><tr><td>Frequency tolerance</td><td>±20</td><td>±15</td><td>ppm</td></tr></table></body></html>"""
    keep(
        "pcn_en.html",
        h,
        [
            part(
                "TLX32-25.000-10",
                "f 25\ncl 10\nesr <50 flag also=<40\nc0 <3 flag also=<2.5\ntol ±20 flag also=±15",
                maker="Tolcarne Crystals Ltd",
            )
        ],
        "en",
        "change notice, before and after",
    )


if __name__ == "__main__":
    samples_below()
    samples_beside()
    load_become_a_date()
    first_samples()
    form_a_sheet()
    page_with_related_parts()
    compared_in_a_shop()
    pairs_side_by_side()
    tables_abreast()
    lot_report()
    before_and_after()
