"""Corpus sheets of several series in one table, printed by Chromium. Run from this folder to write them anew."""

from __future__ import annotations

from corpus_pages import printed, rows
from corpus_shorthand import keep, part


def lying_symbols() -> None:
    t = rows("""公称周波数|周波数許容偏差|周波数温度特性|動作温度範囲|負荷容量|等価直列抵抗|並列容量|励振レベル|\
経年変化
f<sub>0</sub>|Δf/f (25±3℃)|Δf/f<sub>T</sub>|T<sub>OPR</sub>|C<sub>L</sub>|R<sub>1</sub>|\
C<sub>0</sub>|DL|
26.000 MHz|±10ppm|±12ppm *1|-30～+85℃|7.0 pF|50 Ω max.|1.5 pF max.|10 μW typ.<br>(200 μW max.)|\
±1ppm/年""")
    body = f"""<h1>SMD水晶振動子 KZM2016 仕様</h1><p>株式会社木津電波　2.0×1.6×0.5 mm　基本波 AT</p>\
<table>{t}</table><p><small>*1 +25℃基準、動作温度範囲内。 *2 保存温度範囲 -40～+125℃。</small></p>\
<p>リフロー：260℃ 10秒以内、2回まで。</p>"""
    keep(
        "kzm2016_ja.pdf",
        printed(body, "body{font-family:'Noto Sans CJK JP';font-size:8pt}", "ja"),
        [
            part(
                "KZM2016",
                """
            f 26
            tol ±10
            stab ±12
            op -30..85
            sto -40..125
            cl 7
            esr <50
            c0 <1.5
            dl -/10/200
            age ±1 y=1""",
                maker="株式会社木津電波",
                package="2.0×1.6×0.5 mm",
                mode="fund",
                cut="AT",
                res="load",
            )
        ],
        "ja",
        """lying table: labels in the heads, symbols below, one row of values, footnotes""",
    )


def percent_totals() -> None:
    t = rows("""TYPE|FREQUENCY RANGE<br>(MHz)|MODE|FREQ. TOLERANCE<br>(TOTAL OVER TEMP.)|TEMP. RANGE<br>(°C)|LOAD \
CAP.<br>(pF)|MAX. DRIVE<br>(mW)|MAX. RESISTANCE<br>(OHMS)|HOLDER
CRX-18A/U|0.8 – 20|Fund.|± .005%|-55 to +105|32|10|625|HC-6/U
CRX-19A/U|0.8 – 20|Fund.|± .005%|-55 to +105|Series|10|520|HC-6/U
CRX-60A/U|5 – 20|Fund.|± .0025%|-55 to +105|Series|5|60|HC-18/U
CRX-67A/U|17 – 61|3rd O.T.|± .0025%|-55 to +105|Series|2|40|HC-18/U""")
    body = f"""<h1>STANDARD CRYSTAL TYPES</h1><p>WHARRAM ELECTRONICS INC. — AT cut crystals to customer \
frequency. Calibration at 25 °C ± .002% for all types. C0: 7 pF max.</p><table>{t}</table>"""

    def s(n, f, m, st, cl, dl, esr, h):  # noqa: PLR0917
        return part(
            n,
            f"f {f}\nop -55..105\ndl <{dl}\nesr <{esr}\ntol ±20\nc0 <7\n" + (f"cl {cl}" if cl else ""),
            mode=m,
            package=h,
            maker="Wharram Electronics Inc.",
            cut="AT",
            res="load" if cl else "series",
        )

    keep(
        "crx_types_en.pdf",
        printed(body),
        [
            s("CRX-18A/U", "0.8..20", "fund", 50, 32, 10000, 625, "HC-6/U"),
            s("CRX-19A/U", "0.8..20", "fund", 50, None, 10000, 520, "HC-6/U"),
            s("CRX-60A/U", "5..20", "fund", 25, None, 5000, 60, "HC-18/U"),
            s("CRX-67A/U", "17..61", "3rd", 25, None, 2000, 40, "HC-18/U"),
        ],
        "en",
        """types in rows; tolerance in percent, a total over temperature that is neither tolerance nor stability""",
    )


def unit_in_label() -> None:
    t = rows("""Parameter|MSX-11|MSX-13|MSX-21|MSX-33|Notes
Package size (L×W×H) mm|1.2×1.0×0.3|1.6×1.2×0.35|2.0×1.6×0.5|3.2×2.5×0.75|max.
Frequency range MHz|32–80|24–66|16–66|8–66|<sup>a</sup>
Calibration tolerance @ 25 °C ppm|±10|±10|±10, ±20|±10, ±20, ±30|
Stability vs temperature ppm|±20|±15|±15|±15|-20 to +70 °C
Stability vs temperature ppm|±30|±25|±25|±25|-40 to +85 °C
ESR Ω max.|60|{c2}80|100|<sup>b</sup>
Shunt capacitance pF max.|1.0|1.0|2.0|3.0|
Load capacitance pF|6|{c2}8|12|standard
Drive level µW max.|50|{c3}100|
Aging ppm/yr max.|±2|±2|±2|±3|@25 °C
Storage temperature °C|{c4}-55 to +125|
Insulation resistance MΩ min.|{c4}500|100 V DC""")
    body = f"""<h1>MSX family of miniature crystals</h1><p>Mossdene Crystals Limited, fundamental mode AT-cut</p>\
<table>{t}</table><p><small>a) higher frequencies as third overtone on request &nbsp; b) at the \
lowest frequency of the range; lower at higher frequencies</small></p>"""
    sh = """
            sto -55..125
            ir >500
            op -20..70
            op -40..85"""
    one = {"mode": "fund", "cut": "AT", "maker": "Mossdene Crystals Limited", "res": "load"}
    keep(
        "msx_family_en.pdf",
        printed(body),
        [
            part(
                "MSX-11",
                sh
                + """
            f 32..80
            tol ±10
            stab ±20 t=-20:70
            stab ±30 t=-40:85
            esr <60
            c0 <1
            cl 6
            dl <50
            age ±2 y=1""",
                package="1.2×1.0×0.3",
                **one,
            ),
            part(
                "MSX-13",
                sh
                + """
            f 24..66
            tol ±10
            stab ±15 t=-20:70
            stab ±25 t=-40:85
            esr <80
            c0 <1
            cl 8
            dl <100
            age ±2 y=1""",
                package="1.6×1.2×0.35",
                **one,
            ),
            part(
                "MSX-21",
                sh
                + """
            f 16..66
            tol {10,20}
            stab ±15 t=-20:70
            stab ±25 t=-40:85
            esr <80
            c0 <2
            cl 8
            dl <100
            age ±2 y=1""",
                package="2.0×1.6×0.5",
                **one,
            ),
            part(
                "MSX-33",
                sh
                + """
            f 8..66
            tol {10,20,30}
            stab ±15 t=-20:70
            stab ±25 t=-40:85
            esr <100
            c0 <3
            cl 12
            dl <100
            age ±3 y=1""",
                package="3.2×2.5×0.75",
                **one,
            ),
        ],
        "en",
        """columns per size, unit inside the label, two stability rows with ranges in the notes""",
    )


def folded_order_numbers() -> None:
    fr = [
        "1.8432", "2.4576", "3.2768", "3.579545", "3.6864", "4.000", "4.194304", "4.9152",
        "5.000", "6.000", "6.144", "7.3728", "8.000", "9.8304", "10.000", "11.0592", "12.000",
    ]  # fmt: skip
    n = [f"QST{i + 1:03d}" for i in range(len(fr))]
    lines = []
    half = (len(fr) + 2) // 3
    for i in range(half):
        r = []
        for k in range(3):
            j = i + k * half
            r += [fr[j], n[j]] if j < len(fr) else ["", ""]
        lines.append("|".join(r))
    body = f"""<h1>QST series, HC-49/U</h1><p>Querth Stock Timing BV</p><p>Load capacitance 30 pF, tolerance ±30 \
ppm, stability ±50 ppm, temperature range -10 to +60 °C, ESR 120 Ω max., C0 7 pF max., drive \
level 1 mW max., fundamental.</p><table>\
<thead>{rows("MHz|Order no.|MHz|Order no.|MHz|Order no.", "th")}</thead>{rows(chr(10).join(lines))}</table>"""
    parts = [
        part(
            b,
            f"f {a}\ncl 30\ntol ±30\nstab ±50\nop -10..60\nesr <120\nc0 <7\ndl <1000",
            package="HC-49/U",
            mode="fund",
            maker="Querth Stock Timing BV",
            res="load",
        )
        for a, b in zip(fr, n, strict=True)
    ]
    keep(
        "qst_folded_en.pdf", printed(body), parts, "en", "pairs of frequency and order number three times side by side"
    )


def indented_modes() -> None:
    body = f"""<h1>Schwingquarz-Serie HWQ-75</h1><p>Halbwerk Quarze e.K.</p>\
<table class=n>{
        rows('''Frequenzbereich:|10,0 … 160 MHz
– Grundton:|10,0 … 45 MHz
– 3. Oberton:|45 … 110 MHz
– 5. Oberton:|110 … 160 MHz
Abgleichtoleranz <sup>1)</sup>:|±10 ppm
Frequenzstabilität <sup>2)</sup>:|±15 ppm
Arbeitstemperaturbereich:|-10 °C … +60 °C
Lastkapazität:|20 pF oder Serie
Resonanzwiderstand R<sub>r</sub>:|typ. 20 Ω, max. 40 Ω
Statische Kapazität:|max. 6 pF
Alterung:|max. ±2 ppm/Jahr
Quarzbelastung:|0,1 mW
Gehäuse:|7,5 × 5,0 mm''')
    }</table><p><small>1) bei 25 °C ± 2 °C; engere Toleranzen auf Anfrage\
<br>2) bezogen auf 25 °C; ±30 ppm für -40 °C … +85 °C</small></p>"""
    keep(
        "hwq_de.pdf",
        printed(body, "td{text-align:left}", lang="de"),
        [
            part(
                "HWQ-75",
                """
            f 10..160 also=10..45
            f 10..45 mode=fund also=10..45
            f 45..110 mode=3rd also=45..110
            f 110..160 mode=5th also=110..160
            tol ±10
            stab ±15
            stab ±30 t=-40:85
            op -10..60
            cl 20
            esr -/20/40
            c0 <6
            age ±2 y=1
            dl 100 bare""",
                maker="Halbwerk Quarze e.K.",
                package="7,5 × 5,0 mm",
            )
        ],
        "de",
        "modes in indented rows, footnotes that widen the range",
    )


if __name__ == "__main__":
    for make in (indented_modes, lying_symbols, percent_totals, unit_in_label, folded_order_numbers):
        make()
