"""Corpus sheets in the manner of makers' own, drawn by reportlab. Run from this folder to write them anew."""

from __future__ import annotations

from corpus_pages import Sheet, cells, drawing
from corpus_shorthand import PADS, keep, part


def options_below_table() -> None:
    page = Sheet("QLR8 series")
    page.text(40, 40, "QUELLRIDGE", 18, "Bold")
    page.text(360, 36, "ULTRA MINIATURE CERAMIC SMD CRYSTAL", 8, "Bold")
    page.text(470, 50, "QLR8", 16, "Bold")
    page.text(400, 64, "3.2 x 2.5 x 0.8mm", 8)
    page.text(460, 76, "RoHS/RoHS II Compliant", 6)
    page.text(470, 86, "MSL Level = N/A", 6)
    page.text(40, 80, "FEATURES:", 9, "Bold")
    for i, t in enumerate(
        [
            "• Suitable for RoHS reflow profile",
            "• 3.2 x 2.5 x 0.8mm ultra-miniature package",
            "• Seam sealing, resistance weld",
            "• Tight tolerance ±10ppm max. option available",
            "• ESR as low as 40 ohms",
        ]
    ):
        page.text(46, 94 + 11 * i, t, 7)
    page.text(300, 80 + 20, "APPLICATIONS:", 9, "Bold")
    for i, t in enumerate(
        ["• Wireless LAN, 2.4 GHz radios", "• PDA, hand-held devices", "• 10/100 Ethernet 25.000MHz"]
    ):
        page.text(306, 114 + 11 * i, t, 7)
    page.text(40, 165, "STANDARD SPECIFICATIONS:", 9, "Bold")
    d = cells("""Parameters|Minimum|Typical|Maximum|Units|Notes
Frequency Range|10.000||54.000|MHz|Note 1
Operation Mode|Fundamental||||
Operating Temperature|-20||+70|ºC|See options
Storage Temperature|-55||+125|ºC|
Frequency Tolerance @+25ºC|-50||+50|ppm|See options
Frequency Stability over the\\nOperating Temperature (ref. to +25ºC)|-50||+50|ppm|See options
Equivalent Series Resistance (R1)|See table 1 below||||
Shunt Capacitance (C0)|||3.0|pF|
Load Capacitance (CL)||18||pF|See options
Drive Level||10|100|µW|
Aging @25ºC per year|-5||+5|ppm|First year
Insulation Resistance|500|||MΩ|@100Vdc ± 15V
Drive Level Dependency|||±5|ppm|1 µW to 100 µW""")
    b = page.table(
        40,
        172,
        d,
        [150, 60, 60, 60, 50, 110],
        style=[
            ("SPAN", (1, 2), (5, 2)),
            ("SPAN", (1, 7), (5, 7)),
            ("ALIGN", (1, 0), (-1, -1), "CENTER"),
            ("BACKGROUND", (0, 0), (-1, 0), "#dddddd"),
        ],
    )
    page.text(40, b + 16, "Table 1", 8, "Bold")
    d = cells("""Frequency (MHz)|ESR (Ω) max.
10.000 - 11.999|200
12.000 - 15.999|100
16.000 - 19.999|80
20.000 - 29.999|50
30.000 - 54.000|40""")
    b2 = page.table(40, b + 22, d, [110, 80])
    page.text(260, b + 30, "Note 1: contact the factory for 54.001 to 64.000 MHz.", 6.5)
    page.text(40, b2 + 18, "OPTIONS AND PART IDENTIFICATION (left blank if standard):", 9, "Bold")
    page.text(60, b2 + 34, "QLR8 - [ ][ ].[ ][ ][ ]MHZ - [ ] - [ ] - [ ] - [ ] - T", 9)
    x = 40
    for title, w, lines in (
        (
            "Operating Temp.",
            90,
            """Blank | -20 to +70ºC
B | -30 to +85ºC
D | -40 to +85ºC
N | -40 to +105ºC""",
        ),
        (
            "Freq. Tolerance",
            80,
            """Blank | ±50ppm
1 | ±10ppm
7 | ±15ppm
2 | ±20ppm""",
        ),
        (
            "Freq. Stability",
            80,
            """Blank | ±50ppm
U | ±10ppm
W | ±25ppm
Y | ±30ppm""",
        ),
        (
            "Load Cap. (pF)",
            80,
            """Blank | 18
8 | 8
10 | 10
S | Series""",
        ),
    ):
        rr = [[title, ""]] + [[a.strip() for a in row.split("|")] for row in lines.splitlines()]
        page.table(x, b2 + 42, rr, [32, w - 22], style=[("SPAN", (0, 0), (1, 0))], size=6.5)
        x += w + 30
    page.text(
        40,
        800,
        """QUELLRIDGE Corporation    Rev. 07.14.2021    Visit us for terms & conditions    Page (1) of (3)""",
        6,
    )
    page.new_page()
    page.text(40, 40, "OUTLINE DIMENSIONS:", 9, "Bold")
    drawing(page, 60, 70, "3.20", "2.50", "0.80")
    page.table(
        260,
        70,
        cells("""Pin|Function
1|Crystal
2|GND
3|Crystal
4|GND"""),
        [40, 70],
    )
    page.text(40, 220, "REFLOW PROFILE:", 9, "Bold")
    page.text(
        60,
        236,
        """Ts max 200ºC, Ts min 150ºC, preheat 60 - 180 s; peak temperature Tp 260ºC, 20 - 40 s; ramp 3ºC/sec max""",
        7,
    )
    page.text(40, 270, "TAPE & REEL: T = 1000 pcs/reel; pitch 4.0±0.1, width 8.0±0.2", 7)
    keep(
        "qlr8_en.pdf",
        page.bytes(),
        [
            part(
                "QLR8",
                """
            f 10..54
            op -20..70
            sto -55..125
            tol -50..50
            stab -50..50
            c0 <3
            cl 18
            dl -/10/100
            age -5..5 y=1
            ir >500
            esr <200 f=10:11.999
            esr <100 f=12:15.999
            esr <80 f=16:19.999
            esr <50 f=20:29.999
            esr <40 f=30:54""",
                maker="Quellridge",
                maker_also=["QUELLRIDGE Corporation"],
                package="3.2 x 2.5 x 0.8mm",
                mode="fund",
                res="load",
                attributes=PADS,
            )
        ],
        "en",
        "spec table with units and notes, options below, pad table on page 2",
    )


def bilingual_lines() -> None:
    page = Sheet("KGR-7")
    page.text(45, 45, "GREIFENTHAL QUARZTECHNIK GMBH", 11, "Bold")
    page.text(400, 45, "Typ / type", 7)
    page.text(450, 45, "KGR-7", 18, "Bold")
    page.text(45, 62, "SMD Schwingquarz / SMD crystal 6.0 x 3.5 mm, 4 Pads", 9)
    page.text(45, 85, "Technische Daten / technical data", 9, "Bold")
    lines = """Frequenzbereich / frequency range|8,0 – 54,0 MHz (Grundton / fundamental AT)
|40,0 – 125,0 MHz (3. Oberton / 3rd overtone AT)
Frequenztoleranz / frequency tolerance|± 30 ppm bei 25 °C (± 10 ppm bis ± 50 ppm auf Anfrage)
Temperaturdrift / frequency stability|± 50 ppm (Standard) bei -20 … +70 °C
Arbeitstemperatur / operating temp.|-20 °C … +70 °C (-40 °C … +85 °C optional)
Lagertemperatur / storage temp.|-40 °C … +90 °C
Lastkapazität / load capacitance CL|16 pF (8 – 32 pF oder Serienresonanz)
statische Kapazität / shunt capacitance C0|7 pF max.
Belastung / drive level|100 µW max.
Alterung / aging|± 3 ppm erstes Jahr / first year
Isolationswiderstand / insulation resistance|> 500 MΩ"""
    y = 102
    for text in lines.splitlines():
        a, b = text.split("|")
        page.text(45, y, a, 8)
        page.text(260, y, b, 8)
        y += 15
    y += 8
    page.text(45, y, "Serienwiderstand / series resistance ESR max.", 8, "Bold")
    y += 13
    for text in """8,000 – 9,999 MHz|80 Ω
10,000 – 15,999 MHz|60 Ω
16,000 – 54,000 MHz|40 Ω
40,000 – 125,000 MHz (3. OT)|100 Ω""".splitlines():
        a, b = text.split("|")
        page.text(60, y, a, 8)
        page.text(260, y, b, 8)
        y += 12
    drawing(page, 60, y + 40, "6.0", "3.5", "1.1")
    page.text(260, y + 60, "Pad 1, 3: Quarz / crystal   Pad 2, 4: GND (Deckel / lid)", 7)
    page.text(45, y + 170, """Bestellbeispiel / ordering code: KGR-7 - 25,000 MHz - 16 pF - 30/50/-20+70""", 8)
    page.text(45, 810, """Greifenthal Quarztechnik GmbH  Am Quellgrund 12  Stand 03/2020  Änderungen vorbehalten""", 6)
    keep(
        "kgr7_de.pdf",
        page.bytes(),
        [
            part(
                "KGR-7",
                """
            f 8..54 mode=fund
            f 40..125 mode=3rd
            tol ±30
            stab ±50 t=-20:70
            op -20..70
            sto -40..90
            cl 16 also=8/16/32
            c0 <7
            dl <100
            age ±3 y=1
            ir >500
            esr <80 f=8:9.999
            esr <60 f=10:15.999
            esr <40 f=16:54
            esr <100 f=40:125 mode=3rd""",
                maker="Greifenthal Quarztechnik GmbH",
                package="6.0 x 3.5 mm",
                mode=None,
                cut="AT",
                attributes=PADS,
            )
        ],
        "de",
        "borderless bilingual lines",
    )


def leaders_and_modes() -> None:
    page = Sheet("CQ-HC52")
    page.text(60, 60, "CALDERA QUARZI S.p.A.", 14, "Bold")
    page.text(60, 78, "Risuonatori al quarzo per telecomunicazioni – serie CQ-52", 10)
    y = 110
    for text in [
        "Frequenza nominale ........................ 20 ÷ 150 MHz",
        "   fondamentale ........................... 20 ÷ 45 MHz",
        "   3ª armonica ............................ 45 ÷ 100 MHz",
        "   5ª armonica ............................ 100 ÷ 150 MHz",
        "Tolleranza di taratura a 25 °C ............ ± 10 ppm",
        "Deriva termica -20 / +70 °C ............... ± 15 ppm",
        "Temperatura di funzionamento .............. -20 / +70 °C",
        "Temperatura di immagazzinamento ........... -40 / +90 °C",
        """Capacità di carico ........................ 30 pF oppure risonanza serie""",
        "Capacità statica C0 ....................... 6 pF max",
        "Livello di eccitazione .................... 0,5 mW max",
        "Invecchiamento ............................ ± 2 ppm primo anno",
        "Resistenza di isolamento .................. > 500 Mohm (100 Vcc)",
    ]:
        page.canvas.setFont("Body", 8)
        page.text(60, y, text, 8)
        y += 14
    page.text(60, y + 10, "Resistenza equivalente serie (max)", 9, "Bold")
    for i, text in enumerate(["fondamentale: 25 ohm", "3ª armonica: 40 ohm", "5ª armonica: 60 ohm"]):
        page.text(75, y + 26 + 13 * i, text, 8)
    page.text(60, y + 85, "Contenitore HC-52/U, terminali Ø 0,35 mm, passo 3,75 mm", 8)
    keep(
        "cq52_it.pdf",
        page.bytes(),
        [
            part(
                "CQ-52",
                """
            f 20..150 also=20..45
            f 20..45 mode=fund also=20..45
            f 45..100 mode=3rd also=45..100
            f 100..150 mode=5th also=100..150
            tol ±10
            stab ±15 t=-20:70
            op -20..70
            sto -40..90
            cl 30
            c0 <6
            dl <500
            age ±2 y=1
            ir >500
            esr <25 mode=fund
            esr <40 mode=3rd
            esr <60 mode=5th""",
                maker="Caldera Quarzi S.p.A.",
                package="HC-52/U",
                mode=None,
                part_number_also=["CQ-HC52"],
            )
        ],
        "it",
        "leader dots inside the text, indented rows by mode, ESR by mode",
    )


def stability_matrix() -> None:
    page = Sheet("8N")
    page.text(40, 40, "SMD CERAMIC PACKAGE QUARTZ CRYSTALS", 11, "Bold")
    page.text(430, 40, "8N Type", 14, "Bold")
    page.text(40, 56, "Tungfong Crystal Co., Ltd.", 8)
    page.text(40, 80, "FEATURES", 8, "Bold")
    page.text(40, 92, "- Typical 2.0 x 1.6 x 0.5 mm ceramic package with seam sealing", 7)
    page.text(40, 102, "- Tight symmetry, suited for SATA, Wi-Fi, handset", 7)
    page.text(40, 125, "ELECTRICAL SPECIFICATIONS", 9, "Bold")
    d = cells("""Item\\Type|8N
Frequency Range|16 MHz ~ 80 MHz (Fundamental)
Frequency Tolerance (at 25°C)|±7 ppm ~ ±30 ppm, or specify
Frequency Stability|See Table 1
Operating Temperature Range|See Table 1
Storage Temperature Range|-55°C ~ +125°C
Equivalent Series Resistance (ESR)|See Table 2
Shunt Capacitance (C0)|3 pF Max.
Load Capacitance (CL)|7 pF ~ 20 pF, or specify
Drive Level|10 μW typ. (100 μW max.)
Aging (at 25°C)|±3 ppm / year Max.
Insulation Resistance|500 MΩ Min.""")
    b = page.table(40, 132, d, [190, 250])
    page.text(40, b + 16, "Table 1  Frequency Stability vs. Temperature Range", 8, "Bold")
    d = cells("""Temp. (°C) \\ ppm|±10|±15|±20|±30|±50
-20 ~ +70|O|O|O|O|O
-30 ~ +85|Δ|O|O|O|O
-40 ~ +85|X|O|O|O|O
-40 ~ +125|X|X|X|Δ|O""")
    b2 = page.table(40, b + 22, d, [90, 35, 35, 35, 35, 35])
    page.text(40, b2 + 10, "O: available  Δ: please contact us  X: not available", 6.5)
    page.text(330, b + 16, "Table 2  ESR", 8, "Bold")
    d = cells("""Frequency (MHz)|ESR (Ω) Max.
16 ≤ F < 20|180
20 ≤ F < 26|120
26 ≤ F < 40|80
40 ≤ F ≤ 80|50""")
    page.table(330, b + 22, d, [100, 80])
    drawing(page, 60, b2 + 50, "2.0", "1.6", "0.5")
    page.table(
        300,
        b2 + 50,
        cells("""PIN|CONNECTION
#1|Crystal in/out
#2|GND
#3|Crystal in/out
#4|GND"""),
        [50, 110],
    )
    keep(
        "tungfong8n_en.pdf",
        page.bytes(),
        [
            part(
                "8N",
                """
            f 16..80
            tol 7..30 flag also={7,30} also=±30 also=±7
            sto -55..125
            c0 <3
            cl 7..20
            dl -/10/100
            age ±3 y=1
            ir >500
            esr <180 f=16:20
            esr <120 f=20:26
            esr <80 f=26:40
            esr <50 f=40:80
            op -20..70
            op -30..85
            op -40..85
            op -40..125
            stab {10,15,20,30,50} t=-20:70
            stab {10,15,20,30,50} t=-30:85
            stab {15,20,30,50} t=-40:85
            stab {30,50} t=-40:125""",
                maker="Tungfong Crystal Co., Ltd.",
                package="2.0 x 1.6 x 0.5 mm",
                mode="fund",
                attributes=PADS,
                part_number_also=[None, "8N Type"],
            )
        ],
        "en",
        """stability matrix with O, delta and X; ESR table beside; short type name""",
    )


def side_by_side() -> None:
    page = Sheet("LR32")

    def t(x, y, s, b="", z=8):
        page.text(x, y, s, z, "Bold" if b else "Body")

    t(40, 45, "LINDHURST RESONATOR COMPANY", "B", 13)
    t(40, 62, "LR32 Ceramic SMD Crystal 3.2 x 2.5 mm", z=10)
    t(40, 95, "Electrical", "B", 9)
    t(320, 95, "Environmental", "B", 9)
    electrical = [
        "Frequency range|8.000 to 60.000 MHz",
        "Mode|Fundamental, AT cut",
        "Tolerance @ 25°C|±20 ppm",
        "Stability|±30 ppm",
        "Load capacitance|12 pF",
        "Shunt capacitance|5 pF max",
        "Drive level|10~100 µW (Max. 300 µW)",
        "Insulation resistance|Over 500 MΩ",
        "Aging|First year ±3 ppm, after ±1 ppm/year",
    ]
    environmental = [
        "Operating temperature|-40 to +85°C",
        "Storage temperature|-55 to +125°C",
        "Shock|1000 g, 0.5 ms",
        "Vibration|10 to 2000 Hz, 10 g",
        "Reflow|260°C, 10 s",
        "Gross leak|MIL-STD-883, 1014",
        "Moisture level|MSL 1",
        "RoHS|compliant",
    ]
    for column, texts in ((40, electrical), (320, environmental)):
        for i, text in enumerate(texts):
            for x, piece in zip((column, column + 110), text.split("|"), strict=True):
                t(x, 112 + 14 * i, piece)
    t(40, 260, "ESR", "B", 9)
    for i, text in enumerate(
        ["8.000 - 9.999 MHz|120 ohms", "10.000 - 15.999 MHz|80 ohms", "16.000 - 60.000 MHz|50 ohms"]
    ):
        for x, piece in zip((40, 150), text.split("|"), strict=True):
            t(x, 275 + 13 * i, piece)
    t(320, 260, "Connections", "B", 9)
    t(320, 275, "1, 3 Crystal")
    t(320, 288, "2, 4 Ground / lid")
    keep(
        "lr32_side_en.pdf",
        page.bytes(),
        [
            part(
                "LR32",
                """
            f 8..60
            tol ±20
            stab ±30
            cl 12
            c0 <5
            dl -/-/300 also=10/-/300 also=-/10/300
            ir >500
            age ±3 y=1
            op -40..85
            sto -55..125
            esr 120 f=8:9.999 bare
            esr 80 f=10:15.999 bare
            esr 50 f=16:60 bare""",
                maker="Lindhurst Resonator Company",
                package="3.2 x 2.5 mm",
                mode="fund",
                cut="AT",
                res="load",
            )
        ],
        "en",
        """two borderless tables side by side; two ageing figures; drive with a bracketed limit""",
    )


def symbol_font() -> None:
    page = Sheet("SYM")
    c = page.canvas
    page.text(40, 45, "TARNSIDE QUARTZ INC", 13, "Bold")
    page.text(40, 62, "Model TQ-53  SMD crystal 5.0 x 3.2 mm", 9)
    y = 90

    def line(a, parts):
        nonlocal y
        page.text(40, y, a, 8)
        x = 230
        for kind, s in parts:
            if kind == "S":
                c.setFont("Symbol", 8)
                c.drawString(x, page.height - y, s)
                x += c.stringWidth(s, "Symbol", 8)
            elif kind == "U":
                c.setFont("Body", 5)
                c.drawString(x, page.height - y + 3, s)
                x += c.stringWidth(s, "Body", 5)
            else:
                page.text(x, y, s, 8)
                x += c.stringWidth(s, "Body", 8)
        y += 15

    line("Frequency range", [("T", "10.0 – 50.0 MHz (fundamental)")])
    line("Frequency tolerance at 25°C", [("S", "±"), ("T", " 20 "), ("S", "×"), ("T", " 10"), ("U", "-6")])
    line("Frequency stability, –40°C to +85°C", [("S", "±"), ("T", " 30 "), ("S", "×"), ("T", " 10"), ("U", "-6")])
    line("Operating temperature range", [("T", "–40°C to +85°C")])
    line("Storage temperature range", [("T", "–55°C to +125°C")])
    line("Load capacitance CL", [("T", "18 pF")])
    line("Shunt capacitance C0", [("T", "5 pF max.")])
    line("Equivalent series resistance", [("T", "60 "), ("S", "Ω"), ("T", " max.")])
    line("Drive level", [("T", "10 "), ("S", "μ"), ("T", "W typ., 500 "), ("S", "μ"), ("T", "W max.")])
    line("Aging, first year", [("S", "±"), ("T", " 3 "), ("S", "×"), ("T", " 10"), ("U", "-6"), ("T", " max.")])
    line("Insulation resistance", [("T", "500 M"), ("S", "Ω"), ("T", " min. at 100 V")])
    keep(
        "tq53_symbol_en.pdf",
        page.bytes(),
        [
            part(
                "TQ-53",
                """
            f 10..50
            tol ±20
            stab ±30 t=-40:85
            op -40..85
            sto -55..125
            cl 18
            c0 <5
            esr <60
            dl -/10/500
            age ±3 y=1
            ir >500""",
                maker="Tarnside Quartz Inc",
                package="5.0 x 3.2 mm",
                mode="fund",
                res="load",
            )
        ],
        "en",
        "Symbol font for plus-minus, times, ohm and micro; raised exponents",
    )


if __name__ == "__main__":
    for make in (options_below_table, bilingual_lines, leaders_and_modes, stability_matrix, side_by_side, symbol_font):
        make()
