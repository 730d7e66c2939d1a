"""Corpus sheets of cards, close tables, stock numbers and other goods on a page. Run from this folder to write them anew."""

# ruff: noqa: E501 - pages as they were laid out

from __future__ import annotations

import io
from typing import Any

from corpus_pages import printed
from corpus_shorthand import keep, part
from openpyxl import Workbook


def _saved(book: Any) -> bytes:
    buffer = io.BytesIO()
    book.save(buffer)
    return buffer.getvalue()


def cards_of_facts() -> None:
    body = """<div class=top><div><b>NORDKVARTS AB</b><br><small>Frequency control, Skellefors</small></div><div style="text-align:right"><span style="font-size:18pt">NKX-21</span><br>2.0 × 1.6 mm SMD crystal</div></div>
<p>A low-profile AT-cut unit for wearables and radio modules. Over 40 million pieces shipped since 2019; solder reflow 260 °C for 10 s.</p>
<div class=g>
<div><small>Frequency range</small><b>16 – 54 MHz</b></div><div><small>Mode</small><b>Fundamental</b></div><div><small>Tolerance @ 25 °C</small><b>±10 ppm</b></div>
<div><small>Stability over temperature</small><b>±15 ppm</b></div><div><small>Operating temperature</small><b>−40 … +85 °C</b></div><div><small>Storage temperature</small><b>−55 … +125 °C</b></div>
<div><small>Load capacitance</small><b>6, 7, 8 or 10 pF</b></div><div><small>Shunt capacitance C<sub>0</sub></small><b>2 pF max</b></div><div><small>ESR</small><b>see note 1</b></div>
<div><small>Drive level</small><b>100 µW max <span style="font-weight:normal">(10 µW typ)</span></b></div><div><small>Ageing, first year</small><b>±3 ppm max</b></div><div><small>Insulation resistance</small><b>500 MΩ min <small>at 100 V DC</small></b></div>
</div>
<p><small><sup>1</sup> ESR max: 150 Ω for 16 – 20 MHz, 100 Ω for 20 – 30 MHz, 60 Ω for 30 – 54 MHz.</small></p>
<p><small>NKX-21 data sheet rev 4, 12.03.2025 — page 1 (1)</small></p>"""
    css = """.top{display:flex;justify-content:space-between;border-bottom:2pt solid #036;padding-bottom:4pt}.g{display:grid;grid-template-columns:1fr 1fr 1fr;gap:8pt}.g div{border:.5pt solid #aaa;border-radius:4pt;padding:6pt}.g small{display:block;color:#666}.g b small{display:inline}.g b{font-size:11pt}"""
    keep(
        "nkx21_cards_en.pdf",
        printed(body, css),
        [
            part(
                "NKX-21",
                """f 16..54
tol ±10
stab ±15 t=-40:85
op -40..85
sto -55..125
cl {6,7,8,10}
c0 <2
esr <150 f=16:20
esr <100 f=20:30
esr <60 f=30:54
dl -/10/100
age ±3 y=1
ir >500""",
                mode="fund",
                cut="AT",
                maker="Nordkvarts AB",
                package="2.0 x 1.6 mm",
                res="load",
            )
        ],
        "en",
        "cards with a small name over the value, bands in a note",
    )


def models_without_digits() -> None:
    body = """<h1>Miniature crystals TBX series</h1><p>Thornbury Oscillating Devices Ltd.</p>
<table style="width:100%"><tr><th class=l>Model</th><th>TBX-A</th><th>TBX-B</th><th>TBX-C</th></tr>
<tr><td class=l>Package (mm)</td><td>3.2 × 2.5</td><td>2.5 × 2.0</td><td>2.0 × 1.6</td></tr>
<tr><td class=l>Nominal frequency range</td><td>8 to 54 MHz</td><td>12 to 60 MHz</td><td>16 to 80 MHz</td></tr>
<tr><td class=l>Frequency tolerance at 25 °C</td><td colspan=2>±15 ppm</td><td>±10 ppm</td></tr>
<tr><td class=l>Frequency stability, −40 to +85 °C</td><td colspan=3>±20 ppm</td></tr>
<tr><td class=l>Load capacitance</td><td>10 pF</td><td colspan=2>8 pF</td></tr>
<tr><td class=l>Series resistance, max</td><td>60 Ω</td><td>80 Ω</td><td>100 Ω</td></tr>
<tr><td class=l>Shunt capacitance, max</td><td colspan=2>3 pF</td><td>2 pF</td></tr>
<tr><td class=l>Drive level, max</td><td>200 µW</td><td colspan=2>100 µW</td></tr>
<tr><td class=l>Ageing at 25 °C</td><td colspan=3>±2 ppm first year, ±10 ppm over 10 years</td></tr></table>
<h2>How to order</h2>
<div style="display:flex;gap:4pt;font-size:14pt"><span class=b>TBX-A</span><span class=b>24.000</span><span class=b>10</span><span class=b>F</span><span class=b>I</span></div>
<div style="display:grid;grid-template-columns:1fr 1fr 1fr;gap:6pt;margin-top:6pt"><div><b>Load</b><br>08 = 8 pF<br>10 = 10 pF<br>12 = 12 pF<br>00 = series</div><div><b>Tolerance</b><br>E = ±10 ppm<br>F = ±15 ppm<br>G = ±30 ppm</div><div><b>Temperature range</b><br>C = −20 to +70 °C<br>I = −40 to +85 °C<br>X = −40 to +105 °C</div></div>"""
    css = ".b{border:1pt solid #000;padding:2pt 6pt}"
    common = "stab ±20 t=-40:85\nop -20..70\nop -40..85\nop -40..105\nage ±2 y=1\nage ±10 y=10\n"
    m = {"maker": "Thornbury Oscillating Devices Ltd."}
    keep(
        "tbx_models_en.pdf",
        printed(body, css),
        [
            part("TBX-A", common + "f 8..54\ntol ±15\ncl 10\nesr <60\nc0 <3\ndl <200", package="3.2 x 2.5", **m),
            part("TBX-B", common + "f 12..60\ntol ±15\ncl 8\nesr <80\nc0 <3\ndl <100", package="2.5 x 2.0", **m),
            part("TBX-C", common + "f 16..80\ntol ±10\ncl 8\nesr <100\nc0 <2\ndl <100", package="2.0 x 1.6", **m),
        ],
        "en",
        "models as columns with shared cells, and an ordering key as columns of choices below",
    )


def two_tables_touching() -> None:
    body = """<h1>VHX-7050 Crystal Series</h1><p>Varnholt Crystals LLC</p>
<table><tr><th rowspan=2><div class=v>Frequency (MHz)</div></th><th rowspan=2><div class=v>Mode</div></th><th rowspan=2><div class=v>ESR (Ω) max.</div></th><th colspan=2>C<sub>0</sub> (pF)</th><th rowspan=2><div class=v>Drive (µW) max.</div></th></tr><tr><th>typ.</th><th>max.</th></tr>
<tr><td>6.000 – 9.999</td><td rowspan=3>AT Fund.</td><td>70</td><td>2.1</td><td>4</td><td rowspan=2>500</td></tr><tr><td>10.000 – 19.999</td><td>40</td><td>3.0</td><td>5</td></tr><tr><td>20.000 – 45.000</td><td>25</td><td>3.6</td><td>6</td><td rowspan=2>200</td></tr><tr><td>45.000 – 125.000</td><td>AT 3rd OT</td><td>70</td><td>3.6</td><td>6</td></tr></table>
<table><tr><td class=l>Tolerance @ 25 °C / stability over −20 to +70 °C</td><td>±30 / ±50 ppm</td></tr><tr><td class=l>Load capacitance</td><td>18 pF std. (10 pF to series available)</td></tr><tr><td class=l>Aging</td><td>&lt; ±3 ppm/yr</td></tr><tr><td class=l>Operable temperature</td><td>−55 to +125 °C</td></tr><tr><td class=l>Storage</td><td>−55 to +125 °C</td></tr></table>"""
    css = ".v{writing-mode:vertical-rl;transform:rotate(180deg);height:26mm}"
    keep(
        "vhx7050_rotated_en.pdf",
        printed(body, css),
        [
            part(
                "VHX-7050",
                """f 6..45 mode=fund
f 45..125 mode=3rd
esr <70 f=6:9.999 mode=fund
esr <40 f=10:19.999 mode=fund
esr <25 f=20:45 mode=fund
esr <70 f=45:125 mode=3rd
c0 -/2.1/4 f=6:9.999 mode=fund
c0 -/3.0/5 f=10:19.999 mode=fund
c0 -/3.6/6 f=20:45 mode=fund
c0 -/3.6/6 f=45:125 mode=3rd
dl <500 f=6:9.999 mode=fund
dl <500 f=10:19.999 mode=fund
dl <200 f=20:45 mode=fund
dl <200 f=45:125 mode=3rd
tol ±30
stab ±50 t=-20:70 flag
op -20..70 flag
cl 18
age ±3 y=1
sto -55..125""",
                cut="AT",
                maker="Varnholt Crystals LLC",
            )
        ],
        "en",
        "heads turned upright, cells shared over two bands, two quantities in one row",
    )


def other_goods_below() -> None:
    html = """<!doctype html><html lang=en><head><meta charset=utf-8><title>FQ-3225-25.0-8 | Crystals | Pellworth Components</title><style>.hidden{display:none}</style></head><body><nav><a>Home</a> &gt; <a>Crystals</a> &gt; <a>25 MHz</a></nav>
<h1>FQ-3225-25.0-8</h1><p class=maker>Manufacturer: Fernhollow Quartz Corp.</p><p>Crystal 25 MHz ±20ppm (Tol) ±30ppm (Stability) 8pF FUND 50Ohm 4-Pin CSMD T/R</p>
<table class=attrs><tr><th colspan=2>Specifications</th></tr><tr><td>Frequency Nom</td><td>25MHz</td></tr><tr><td>Frequency Tolerance +/-</td><td>20ppm</td></tr><tr><td>Frequency Stability +/-</td><td>30ppm</td></tr><tr><td>Load Capacitance</td><td>8pF</td></tr><tr><td>ESR</td><td>50ohm</td></tr><tr><td>Overtone Order</td><td>Fundamental</td></tr><tr><td>Operating Temperature Max</td><td>85°C</td></tr><tr><td>Operating Temperature Min</td><td>-40°C</td></tr><tr><td>Product Height</td><td>0.8mm</td></tr><tr><td>Crystal Case Type</td><td>SMD, 3.2mm x 2.5mm</td></tr><tr><td>Qualification</td><td>AEC-Q200</td></tr></table>
<details><summary>Price breaks</summary><table><tr><th>Qty</th><th>Unit price</th></tr><tr><td>1</td><td>$0.62</td></tr><tr><td>100</td><td>$0.31</td></tr><tr><td>3000</td><td>$0.142</td></tr></table></details>
<h2>Customers also viewed</h2><table><tr><th>Part</th><th>Description</th><th>Price</th></tr><tr><td>FQ-3225-24.0-12</td><td>Crystal 24MHz ±10ppm 12pF 60Ohm</td><td>$0.58</td></tr><tr><td>FXO-3225-25.0</td><td>Oscillator XO 25MHz ±50ppm 3.3V LVCMOS</td><td>$1.40</td></tr></table>
<footer>© 2026 Pellworth Components. All prices exclude VAT.</footer></body></html>"""
    keep(
        "shop_also_viewed_en.html",
        html,
        [
            part(
                "FQ-3225-25.0-8",
                """f 25
tol ±20
stab ±30 t=-40:85
op -40..85
cl 8
esr 50 bare""",
                mode="fund",
                maker="Fernhollow Quartz Corp.",
                package="3.2 x 2.5 mm",
                res="load",
                attributes={"aec_q200": True},
            ),
            part(
                "FQ-3225-24.0-12",
                """f 24
tol ±10 flag
cl 12 flag
esr 60 bare flag""",
            ),
        ],
        "en",
        "a shop page with other goods below it",
        not_parts=["FXO-3225-25.0"],
    )


def stock_numbers() -> None:
    wb = Workbook()
    ws = wb.active
    ws.title = "Quarze"
    ws.append(["Lagerliste Quarze – Stand 14.02.2026"])
    ws.append([])
    ws.append(
        [
            "Artikel-Nr.",
            "Hersteller",
            "Bauform",
            "Frequenz",
            "Abgleichtoleranz",
            "Temperaturgang",
            "Temperaturbereich",
            "",
            "CL",
            "ESR",
            "C0",
            "Ladungsträger",
            "Bestand",
            "Preis",
        ]
    )
    ws.append(["", "", "", "MHz", "± ppm", "± ppm", "von °C", "bis °C", "pF", "Ω max.", "pF max.", "", "Stk.", "EUR"])
    ws.append(["4711-016", "Quarzwerk Moorbach", "3225", "16,000", 10, 20, -40, 85, "8", 60, 3, "Rolle", 12000, "0,19"])
    ws.append(
        ["4711-025", "Quarzwerk Moorbach", "2520", "25,000", 10, 15, -40, 105, "10", 50, 2.5, "Rolle", 3000, "0,24"]
    )
    ws.append(
        ["4711-032", "Uhlental", "2012", "0,032768", 20, None, -40, 85, "12,5", 80000, None, "Gurt", 9000, "0,31"]
    )
    ws.append(["4711-049", "Uhlental", "HC49/US", "11,0592", 30, 50, -20, 70, "Serie", 60, 7, "lose", 450, "0,12"])
    ws["A10"] = "Temperaturbereich ist der Arbeitstemperaturbereich."
    w2 = wb.create_sheet("Oszillatoren")
    w2.append(["Artikel-Nr.", "Frequenz (MHz)", "Versorgung (V)", "Stabilität (± ppm)", "Ausgang"])
    w2.append(["4722-025", "25,000", "3,3", "50", "HCMOS"])
    w2.append(["4722-050", "50,000", "1,8", "25", "HCMOS"])
    keep(
        "lagerliste_moorbach_de.xlsx",
        _saved(wb),
        [
            part(
                "4711-016",
                "f 16\ntol ±10\nstab ±20\nop -40..85\ncl 8\nesr <60\nc0 <3",
                maker="Quarzwerk Moorbach",
                package="3225",
                package_also=["3.2 x 2.5"],
                res="load",
            ),
            part(
                "4711-025",
                "f 25\ntol ±10\nstab ±15\nop -40..105\ncl 10\nesr <50\nc0 <2.5",
                maker="Quarzwerk Moorbach",
                package="2520",
                package_also=["2.5 x 2.0"],
                res="load",
            ),
            part(
                "4711-032",
                "f 0.032768\ntol ±20\nop -40..85\ncl 12.5\nesr <80000",
                maker="Uhlental",
                package="2012",
                package_also=["2.0 x 1.2"],
                res="load",
            ),
            part(
                "4711-049",
                "f 11.0592\ntol ±30\nstab ±50\nop -20..70\nesr <60\nc0 <7",
                maker="Uhlental",
                package="HC49/US",
                res="series",
            ),
        ],
        "de",
        "units in a second head row, a range in two columns under one head, oscillators on a second sheet",
        not_parts=["4722-025", "4722-050"],
    )


if __name__ == "__main__":
    cards_of_facts()
    models_without_digits()
    two_tables_touching()
    other_goods_below()
    stock_numbers()
