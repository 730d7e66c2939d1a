"""Corpus sheets printed by Chromium, and one image-only scan. Run from this folder to write them anew."""

from __future__ import annotations

import io

from corpus_pages import FONTS, printed, rows
from corpus_shorthand import PADS, keep, part


def transposed_esr() -> None:
    main = rows(
        """Frequenzbereich|10,0 – 60,0 MHz
Schnitt|AT
Abgleichtoleranz bei 25 °C ± 3 °C|± 20 ppm
Temperaturgang (bezogen auf 25 °C)|± 25 ppm
Arbeitstemperaturbereich|-20 °C bis +75 °C
Lagertemperaturbereich|-40 °C bis +85 °C
Lastkapazität|16 pF
Parallelkapazität C<sub>0</sub> max.|5,0 pF
Belastung in µW max.|300
Alterung pro Jahr|± 3 ppm
Isolationswiderstand|&gt; 500 MΩ bei 100 V DC"""
    )
    esr = rows(
        """f (MHz)|10,0 – 15,9|16,0 – 23,9|{c2}24,0 – 39,9|40,0 – 60,0
Schwingungsart|Grundton|Grundton|Grundton|3. Oberton|3. Oberton
R<sub>1</sub> max. (Ω)|60|50|40|100|80"""
    )
    body = f"""<h1>Hohlbrunner Piezo</h1><h2>Quarz der Baureihe HBR-64 (6,0 × 3,5 mm)</h2><table>{main}</table>
<h2>Resonanzwiderstand nach Frequenz und Schwingungsart</h2><table>{esr}</table>
<p><small>Lötspitze 260 °C, 10 s. Technische Änderungen vorbehalten.</small></p>"""
    parts = [
        part(
            "HBR-64",
            """
            f 10..60
            tol ±20
            stab ±25
            op -20..75
            sto -40..85
            cl 16
            c0 <5
            dl <300
            age ±3 y=1
            ir >500
            esr <60 f=10:15.9 mode=fund
            esr <50 f=16:23.9 mode=fund
            esr <40 f=24:39.9 mode=fund
            esr <100 f=24:39.9 mode=3rd
            esr <80 f=40:60 mode=3rd""",
            maker="Hohlbrunner Piezo",
            package="6,0 × 3,5 mm",
            mode=None,
            cut="AT",
            res="load",
        )
    ]
    layout = "ESR table lying: bands across the top, one split by mode; unit and bound in a label"
    keep("transposed_esr_de.pdf", printed(body, lang="de"), parts, "de", layout)


PLAIN_LOADS = ("12", "18", "S")
STOCK = ("8.000", "10.000", "12.000", "14.7456", "16.000", "18.432", "20.000", "22.1184", "24.000", "25.000")


def two_part_number_columns() -> None:
    lines, parts = [], []
    for index, frequency in enumerate(STOCK):
        for load in PLAIN_LOADS:
            code = f"{index + 1:02d}{load}"
            lines.append(f"{frequency}|{'Series' if load == 'S' else load}|JRQ4-{code}C|JRQ4-{code}H")
            for letter, span in (("C", "-10..60"), ("H", "-40..85")):
                stated = f"f {frequency}\nop {span}\ntol ±30\nstab ±50\nesr <60\nc0 <7\ndl <500\nage ±5 y=1\n"
                parts.append(
                    part(
                        f"JRQ4-{code}{letter}",
                        stated + ("" if load == "S" else f"cl {load}"),
                        maker="Jarrowmere",
                        package="HC-49/US",
                        mode="fund",
                        cut="AT",
                        res="series" if load == "S" else "load",
                    )
                )
    head = rows(
        "Frequency (MHz)|CL (pF)|Part number\n-10 to +60 °C|Part number\n-40 to +85 °C".replace("\n-", "<br>-"), "th"
    )
    body = f"""<h1>Jarrowmere JRQ4 stock crystals</h1><p>HC-49/US thru-hole, AT-cut fundamental. All parts: frequency
tolerance ±30 ppm at 25 °C, stability ±50 ppm over the temperature range of the part, ESR 60 Ω max., C0 7 pF max.,
drive level 500 µW max., ageing ±5 ppm per year.</p>
<table><thead>{head}</thead><tbody>{rows(chr(10).join(lines))}</tbody></table>"""
    css = "td,th{padding:7pt 12pt}"
    layout = "a row per frequency and load, two part-number columns (a temperature range each), head repeated on page 2"
    keep("two_part_number_columns_en.pdf", printed(body, css), parts, "en", layout)


def three_models() -> None:
    table = rows(
        """Paramètre|VRS16|VRS20|VRS25
Boîtier|1,6 × 1,2 mm|2,0 × 1,6 mm|2,5 × 2,0 mm
Gamme de fréquence|24 à 54 MHz|16 à 54 MHz|12 à 54 MHz
Mode|{c3}fondamental, coupe AT
Tolérance à 25 °C|{c3}± 10 ppm
Stabilité en température|± 20 ppm|{c2}± 15 ppm
Température d'utilisation|{c2}-30 à +85 °C|-40 à +105 °C
Température de stockage|{c3}-55 à +125 °C
Capacité de charge|{c2}8 pF|10 pF
Résistance série max.|100 Ω|{c2}80 Ω
Capacité parallèle max.|1,2 pF|1,8 pF|2,0 pF
Niveau d'excitation max.|{c2}100 µW|200 µW
Vieillissement 1<sup>re</sup> année|{c3}± 2 ppm"""
    )
    body = f"<h1>Verroterie Quartz — séries VRS16, VRS20, VRS25</h1><table>{table}</table>"
    shared = "tol ±10\nsto -55..125\nage ±2 y=1\n"
    one = {"maker": "Verroterie Quartz", "mode": "fund", "cut": "AT", "res": "load"}
    parts = [
        part(
            "VRS16",
            shared + "f 24..54\nstab ±20\nop -30..85\ncl 8\nesr <100\nc0 <1.2\ndl <100",
            **one,
            package="1,6 × 1,2 mm",
        ),
        part(
            "VRS20",
            shared + "f 16..54\nstab ±15\nop -30..85\ncl 8\nesr <80\nc0 <1.8\ndl <100",
            **one,
            package="2,0 × 1,6 mm",
        ),
        part(
            "VRS25",
            shared + "f 12..54\nstab ±15\nop -40..105\ncl 10\nesr <80\nc0 <2\ndl <200",
            **one,
            package="2,5 × 2,0 mm",
        ),
    ]
    keep(
        "models_share_cells_fr.pdf",
        printed(body, lang="fr"),
        parts,
        "fr",
        "model columns, cells shared by two or three",
    )


def raised_exponents() -> None:
    ppm = "10<sup>-6</sup>"
    table = rows(
        f"""項目<br><small>Item</small>|記号|規格値<br><small>Specification</small>|条件<br><small>Conditions</small>
公称周波数<br><small>Nominal frequency</small>|f<sub>0</sub>|48.000 MHz|
振動モード|—|基本波 (AT)|
周波数許容偏差|Δf/f|±12 × {ppm} 以内|+25 ℃ ±3 ℃
周波数温度特性|Δf/f<sub>T</sub>|±18 × {ppm} 以内|-40 ℃ ～ +85 ℃
負荷容量|C<sub>L</sub>|6 pF|
等価直列抵抗|R<sub>1</sub>|40 Ω 以下|励振レベル 10 μW
並列容量|C<sub>0</sub>|0.5 ～ 1.3 pF|1 MHz
等価直列容量|C<sub>1</sub>|2.4 fF 標準|
励振レベル|DL|10 μW (最大 200 μW)|
動作温度範囲|T<sub>opr</sub>|-40 ℃ ～ +85 ℃|
保存温度範囲|T<sub>stg</sub>|-40 ℃ ～ +125 ℃|
経年変化|Δf/f<sub>a</sub>|±1 × {ppm}/年|+25 ℃、初年度
絶縁抵抗|IR|500 MΩ 以上|DC 100 V"""
    )
    body = f"<h1>水晶振動子 MNS-1210A</h1><p>美濃瀬電波株式会社　外形 1.2 × 1.0 × 0.3 mm</p><table>{table}</table>"
    parts = [
        part(
            "MNS-1210A",
            """
            f 48
            tol ±12
            stab ±18 t=-40:85
            cl 6
            esr <40
            c0 0.5..1.3
            c1 2.4
            dl -/10/200
            op -40..85
            sto -40..125
            age ±1 y=1
            ir >500""",
            maker="美濃瀬電波株式会社",
            package="1.2 × 1.0 × 0.3 mm",
            mode="fund",
            cut="AT",
            res="load",
        )
    ]
    layout = "×10 with a raised -6, raised and lowered letters, English under some labels, conditions column"
    keep("raised_exponents_ja.pdf", printed(body, "body{font-family:'Noto Sans CJK JP'}", "ja"), parts, "ja", layout)


def bilingual_approval() -> None:
    table = rows(
        """{r2}序号 No.|{r2}项目 Item|{r2}符号 Sym.|{c3}规格 Specification|{r2}单位 Unit|{r2}备注 Remark
最小 Min|典型 Typ|最大 Max
1|标称频率 Nominal Frequency|F<sub>0</sub>|{c3}27.120000|MHz|
2|振动模式 Mode|—|{c3}基频 Fundamental / AT|—|
3|调整频差 Frequency Tolerance|ΔF/F<sub>0</sub>|-20|—|20|ppm|25±3℃
4|温度频差 Temp. Stability|TC|-30|—|30|ppm|ref. 25℃
5|工作温度 Operating Temp.|T<sub>OPR</sub>|-40|—|105|℃|
6|储存温度 Storage Temp.|T<sub>STG</sub>|-55|—|125|℃|
7|负载电容 Load Capacitance|C<sub>L</sub>|—|10|—|pF|
8|谐振电阻 ESR|R<sub>r</sub>|—|—|50|Ω|DL=10μW
9|静电容 Shunt Capacitance|C<sub>0</sub>|—|1.4|3.0|pF|
10|动态电容 Motional Capacitance|C<sub>1</sub>|—|4.5|—|fF|
11|激励功率 Drive Level|DL|—|50|200|μW|
12|绝缘电阻 Insulation Resistance|IR|500|—|—|MΩ|DC100V±15V
13|老化率 Aging|Fa|-3|—|3|ppm|第一年 1st year
14|其他 Other|—|{c3}0|—|"""
    )
    tests = rows(
        """试验 Test|条件 Condition|判定 Criteria
高温储存 High temp.|85±3℃, 500 h|ΔF ±5 ppm, ΔR 20 %
低温储存 Low temp.|-40±3℃, 500 h|ΔF ±5 ppm
回流焊 Reflow|260℃ peak, 10 s, 2 times|ΔF ±5 ppm"""
    )
    pads = rows("引脚 Pad|功能 Function\n#1|晶体 IN/OUT\n#2|接地 GND\n#3|晶体 OUT/IN\n#4|接地 GND")
    body = f"""<h1>承认书 APPROVAL SHEET</h1><p>厂家 Manufacturer：汐浦频率科技　　型号 P/N：XPX3225-27M12-10Q<br>
封装 Package：SMD 3.2 × 2.5 × 0.7 mm　　AEC-Q200：符合 Yes　　潮敏等级 MSL：1</p>
<h2>1. 电气特性 Electrical characteristics</h2><table>{table}</table>
<h2>2. 引脚 Pad assignment</h2><table>{pads}</table>
<h2>3. 可靠性 Reliability</h2><table>{tests}</table>"""
    parts = [
        part(
            "XPX3225-27M12-10Q",
            """
            f 27.12
            tol -20..20
            stab -30..30
            op -40..105
            sto -55..125
            cl 10
            esr <50
            c0 -/1.4/3
            c1 4.5
            dl -/50/200
            ir >500
            age -3..3 y=1""",
            maker="汐浦频率科技",
            package="3.2 × 2.5 × 0.7 mm",
            mode="fund",
            cut="AT",
            res="load",
            attributes={**PADS, "aec_q200": True},
        )
    ]
    layout = "Chinese and English in one label, two-row head, pads, AEC-Q200, reliability and reflow tables"
    keep("approval_bilingual_zh.pdf", printed(body, lang="zh"), parts, "zh", layout)


def page_break() -> None:
    head = "<tr><th>Parametro</th><th>Min</th><th>Tip</th><th>Max</th><th>Unità</th><th>Note</th></tr>"
    first = rows(
        """Frequenza nominale||13,560||MHz|
Modo||fondamentale|||taglio AT
Tolleranza di frequenza|-25||25|ppm|a 25 °C
Stabilità in frequenza|-35||35|ppm|rif. 25 °C
Capacità di carico||14||pF|
Resistenza serie equivalente (ESR)|||70|Ω|"""
    )
    second = rows(
        """Capacità in parallelo (C0)|||4,0|pF|
Capacità dinamica (C1)||5,4||fF|
Livello di pilotaggio||10|300|µW|
Temperatura di lavoro|-25||80|°C|
Temperatura di stoccaggio|-45||110|°C|
Invecchiamento|-3||3|ppm|per anno
Resistenza di isolamento|500|||MΩ|100 V"""
    )
    body = f"""<h1>Pietraluce Componenti</h1><h2>Quarzo PLC5032-13M56</h2>
<p>Contenitore ceramico 5,0 × 3,2 mm per lettori senza contatto.</p><table>{head}{first}</table>
<p style="margin-top:300pt"><small>segue</small></p><div style="break-before:page"></div>
<p><small>PLC5032-13M56 — pagina 2 di 2 — 12.03.2024</small></p><table>{head}{second}</table>"""
    parts = [
        part(
            "PLC5032-13M56",
            """
            f 13.56
            tol -25..25
            stab -35..35
            cl 14
            esr <70
            c0 <4
            c1 5.4
            dl -/10/300
            op -25..80
            sto -45..110
            age -3..3 y=1
            ir >500""",
            maker="Pietraluce Componenti",
            package="5,0 × 3,2 mm",
            mode="fund",
            cut="AT",
            res="load",
        )
    ]
    keep("page_break_it.pdf", printed(body, lang="it"), parts, "it", "values run over a page break, head repeated")


def grade_columns() -> None:
    table = rows(
        """{c2}|For RF reference|For clock
{c2}Frequency|{c2}37.400 MHz
{c2}Package|{c2}2.0 × 1.6 × 0.45 mm
{c2}Part number|BSW20-37M4-R|BSW20-37M4-K
{r2}Frequency|tolerance at 25 °C|± 8 ppm|± 20 ppm
versus temperature|± 12 ppm|± 30 ppm
{r2}Temperature range|storage|{c2}-55 °C to +125 °C
operating|-30 °C to +85 °C|-40 °C to +85 °C
{c2}Load capacitance|7 pF|12 pF
{c2}Equivalent series resistance|{c2}60 Ω max.
{c2}Shunt capacitance|{c2}0.9 pF typ., 1.5 pF max.
{c2}Motional capacitance|2.6 fF ±15 %|—
{r2}Drive level|specified|{c2}100 µW max.
dependency|max. ±1 ppm from 1 µW to 100 µW|—
{r2}Ageing|1st year|± 1 ppm|± 3 ppm
10 years|± 4 ppm|—"""
    )
    body = f"<h1>Brackenshaw Wells</h1><h2>BSW20 — fundamental AT crystals in two grades</h2><table>{table}</table>"
    one = {
        "maker": "Brackenshaw Wells",
        "package": "2.0 × 1.6 × 0.45 mm",
        "mode": "fund",
        "cut": "AT",
        "res": "load",
    }
    shared = "f 37.4\nsto -55..125\nesr <60\nc0 -/0.9/1.5\ndl <100\n"
    parts = [
        part(
            "BSW20-37M4-R",
            shared + "tol ±8\nstab ±12\nop -30..85\ncl 7\nc1 2.21/2.6/2.99\nage ±1 y=1\nage ±4 y=10",
            **one,
        ),
        part("BSW20-37M4-K", shared + "tol ±20\nstab ±30\nop -40..85\ncl 12\nage ±3 y=1", **one),
    ]
    layout = "two grades as columns, stacked group labels with storage above operating, a drive-dependency row"
    keep("grade_columns_en.pdf", printed(body), parts, "en", layout)


def best_available() -> None:
    table = rows(
        """Frequency range|9.840 to 40.000 MHz (AT, fundamental)
Load capacitance|series, 12 pF, 16 pF, 30 pF
Tolerance at 25 °C|from ±5 ppm
{r3}Stability|-10 °C to +60 °C: from ±5 ppm
-20 °C to +70 °C: ±15 ppm max.
-40 °C to +85 °C: ±25 ppm max.
{r3}Series resistance R<sub>S</sub>|80 Ohm max. for 9.840 MHz ≤ f &lt; 12.000 MHz
50 Ohm max. for 12.000 MHz ≤ f &lt; 20.000 MHz
35 Ohm max. for 20.000 MHz ≤ f ≤ 40.000 MHz
Shunt capacitance C<sub>O</sub>|2 pF to 4 pF typical, 5 pF maximum
Drive level|1 mW max., 100 µW typical
Aging|&lt; ±3 ppm per year @ 25 °C
Insulation|500M Ohm minimum @100VDC
Storage|-45 °C to +90 °C"""
    )
    body = f"""<h1 style="letter-spacing:.35em">MARLBECK</h1><h2>MKB-11 &mdash; resistance-weld crystal, HC-52/U</h2>
<table>{table}</table><p><small>A typical oscillator uses two 22 pF capacitors and 1 MΩ. Chip makers ask for a crystal
with ESR ≤ 100 Ω; ask us for a circuit evaluation.</small></p>"""
    parts = [
        part(
            "MKB-11",
            """
            f 9.84..40
            cl {12,16,30}
            tol ±5 flag also=5 also=>5 also={5} also=<5
            stab ±5 t=-10:60 flag also=5 also=>5 also={5} also=<5
            stab ±15 t=-20:70
            stab ±25 t=-40:85
            op -10..60
            op -20..70
            op -40..85
            esr <80 f=9.84:12
            esr <50 f=12:20
            esr <35 f=20:40
            c0 <5 also=2/-/5 also=2/4/5 also=-/4/5
            dl -/100/1000
            age ±3 y=1
            ir >500
            sto -45..90""",
            maker="Marlbeck",
            package="HC-52/U",
            mode="fund",
            cut="AT",
            res=None,
        )
    ]
    layout = "'from ±5 ppm' beside limits, a range of stability per line of a cell, series among the loads"
    keep("best_available_en.pdf", printed(body), parts, "en", layout)


def french_scan() -> None:
    from PIL import Image, ImageDraw, ImageFont

    sheet = Image.new("L", (1240, 1000), 250)
    draw = ImageDraw.Draw(sheet)
    plain = ImageFont.truetype(str(FONTS / "dejavu" / "DejaVuSans.ttf"), 25)
    large = ImageFont.truetype(str(FONTS / "dejavu" / "DejaVuSans-Bold.ttf"), 38)
    draw.text((90, 60), "Ateliers Quarsillac", font=large, fill=20)
    draw.text((90, 115), "Quartz AQS50-20M-18, boîtier 5,0 x 3,2 mm", font=plain, fill=20)
    lines = (
        ("Fréquence nominale", "20,000 MHz"),
        ("Mode", "Fondamental, coupe AT"),
        ("Tolérance à 25 °C", "± 30 ppm"),
        ("Stabilité en température", "± 50 ppm"),
        ("Température de fonctionnement", "-20 à +70 °C"),
        ("Température de stockage", "-40 à +85 °C"),
        ("Capacité de charge", "18 pF"),
        ("Résistance série équivalente", "50 Ω max."),
        ("Capacité parallèle", "5 pF max."),
        ("Niveau d'excitation", "100 µW max."),
        ("Vieillissement", "± 5 ppm/an"),
    )
    for index, (label, value) in enumerate(lines):
        top = 190 + 58 * index
        draw.rectangle((90, top, 640, top + 58), outline=60, width=2)
        draw.rectangle((640, top, 1130, top + 58), outline=60, width=2)
        draw.text((105, top + 13), label, font=plain, fill=25)
        draw.text((660, top + 13), value, font=plain, fill=25)
    turned = sheet.rotate(0.6, fillcolor=250, resample=Image.Resampling.BICUBIC)
    buffer = io.BytesIO()
    turned.save(buffer, "PDF", resolution=150, quality=60)
    parts = [
        part(
            "AQS50-20M-18",
            """
            f 20
            tol ±30
            stab ±50
            op -20..70
            sto -40..85
            cl 18
            esr <50
            c0 <5
            dl <100
            age ±5 y=1""",
            maker="Ateliers Quarsillac",
            package="5,0 x 3,2 mm",
            mode="fund",
            cut="AT",
            res="load",
        )
    ]
    keep("scan_fr.pdf", buffer.getvalue(), parts, "fr", "image only, turned by half a degree, French", scan=True)


if __name__ == "__main__":
    for make in (
        transposed_esr,
        two_part_number_columns,
        three_models,
        raised_exponents,
        bilingual_approval,
        page_break,
        grade_columns,
        best_available,
        french_scan,
    ):
        make()
