"""What stands on the PDF sheets of `sample_specs/`, apart from how it is laid out. Every name and value is invented."""

from __future__ import annotations

RULED_INTRODUCTION = [
    "Part number: BWK21-26.000-08. Ceramic package 2.0 x 1.6 x 0.5 mm, seam sealed. AT cut, fundamental mode.",
    "Developed for battery-powered sensor nodes. All values at 25 °C unless stated otherwise.",
]
RULED_ROWS = [
    ["Parameter", "Symbol", "Min.", "Typ.", "Max.", "Unit", "Conditions"],
    ["Nominal frequency", "f0", "", "26.000", "", "MHz", "fundamental"],
    ["Frequency tolerance", "Δf/f0", "-10", "", "+10", "ppm", "25 ±3 °C"],
    ["Frequency stability", "f_tem", "-15", "", "+15", "ppm", "-40 °C to +85 °C"],
    ["Ageing", "f_age", "-2", "", "+2", "ppm", "first year"],
    ["Operating temperature", "T_use", "-40", "", "+85", "°C", ""],
    ["Storage temperature", "T_stg", "-55", "", "+125", "°C", ""],
    ["Load capacitance", "CL", "", "8", "", "pF", ""],
    ["Equivalent series resistance", "ESR", "", "35", "60", "Ω", "IEC 60444-5"],
    ["Shunt capacitance", "C0", "0.6", "0.9", "1.2", "pF", "at 1 MHz"],
    ["Motional capacitance", "C1", "1.7", "2.1", "2.5", "fF", ""],
    ["Drive level", "DL", "", "10", "100", "µW", ""],
    ["Insulation resistance", "IR", "500", "", "", "MΩ", "100 V DC ±15 V"],
]
RULED_PADS = [
    "Pads 1 and 3: crystal",
    "Pads 2 and 4: ground, connected to the lid",
    "Moisture sensitivity level: MSL 1",
    "Reflow: 260 °C peak, 10 s, twice at most",
]

# A line without a value is a heading.
LEADERS = [
    ("Frequency", ""),
    ("Nominal frequency", "32.768 kHz"),
    ("Frequency tolerance at +25 °C", "±20 ppm"),
    ("Turnover temperature", "+25 °C ±5 °C"),
    ("Parabolic coefficient", "-0.034 ±0.006 ppm/°C²"),
    ("Ageing, first year", "±3 ppm max."),
    ("Equivalent circuit", ""),
    ("Load capacitance", "12.5 pF"),
    ("Equivalent series resistance", "70 kΩ max."),
    ("Shunt capacitance", "1.3 pF typ."),
    ("Motional capacitance", "3.4 fF typ."),
    ("Operation", ""),
    ("Drive level", "0.1 µW typ., 0.5 µW max."),
    ("Operating temperature range", "-40 °C to +85 °C"),
    ("Storage temperature range", "-55 °C to +125 °C"),
    ("Insulation resistance", "500 MΩ min. at 100 V DC"),
]
LEADERS_NOTES = [
    "Drive level dependency: ESR changes by less than 10 % from 0.01 µW to 0.5 µW.",
    "Reflow soldering: 250 °C peak, 10 s.      TQ-D-0044, issue 5",
]

SERIES_ROWS = [
    ["Caractéristique", "Valeur"],
    ["Gamme de fréquences", "12 à 52 MHz"],
    ["Mode de vibration", "Fondamental (coupe AT)"],
    ["Tolérance de fréquence à 25 °C", "±10, ±15 ou ±20 ppm"],
    ["Stabilité en fréquence", "±15 ppm (-20 à +70 °C)"],
    ["", "±20 ppm (-40 à +85 °C)"],
    ["Température de fonctionnement", "-40 à +85 °C"],
    ["Température de stockage", "-55 à +125 °C"],
    ["Capacité de charge", "8, 10, 12 pF"],
    ["Capacité parallèle C0", "2,0 pF max."],
    ["Niveau d'excitation", "10 µW typ., 200 µW max. (1)"],
    ["Vieillissement", "±3 ppm la première année"],
    ["Résistance d'isolement", "500 MΩ min."],
]
SERIES_BANDS = [
    ["Fréquence (MHz)", "ESR max. (Ω)", "Remarque"],
    ["12,000 – 15,999", "120", ""],
    ["16,000 – 23,999", "80", ""],
    ["24,000 – 31,999", "60", "(2)"],
    ["32,000 – 52,000", "50", ""],
]
SERIES_NOTES = [
    "(1) Au-dessus de 40 MHz : 100 µW max.",
    "(2) Autres valeurs sur demande.",
    "Soudure par refusion : 260 °C, 10 s. Document ORV-FT-25, indice D.",
]

CHINESE_TITLES = ["汀榆电子有限公司", "石英晶体谐振器 规格书"]
CHINESE_HEAD = ["型号：TYJ2520-26M000-08", "封装：SMD 2520（2.5×2.0 mm），四焊盘", "文件编号：TY-SP-0187    版本：B"]
CHINESE_ROWS = [
    ["序号", "项目", "符号", "规格", "条件"],
    ["1", "标称频率", "F0", "26.000000 MHz", ""],
    ["2", "振动模式", "", "基频 (AT)", ""],
    ["3", "调整频差", "ΔF/F0", "±10 ppm", "25℃±3℃"],
    ["4", "温度频差", "TC", "±20 ppm", "-40℃～+85℃"],
    ["5", "工作温度范围", "TOPR", "-40℃～+85℃", ""],
    ["6", "储存温度范围", "TSTG", "-55℃～+125℃", ""],
    ["7", "负载电容", "CL", "8.0 pF", ""],
    ["8", "等效串联电阻", "ESR", "50 Ω 最大", ""],
    ["9", "静态电容", "C0", "2.0 pF 最大", ""],
    ["10", "动态电容", "C1", "2.9 fF 典型", ""],
    ["11", "激励功率", "DL", "10 μW 典型，200 μW 最大", ""],
    ["12", "老化率", "", "±3 ppm/年", ""],
    ["13", "绝缘电阻", "IR", "500 MΩ 最小", "DC 100 V"],
]
CHINESE_NOTES = ["焊盘：1、3 为晶体端，2、4 接地。", "回流焊：峰值 260℃，10 秒。"]

JAPANESE_HEAD = ["項目", "記号", "KRS15-070", "KRS15-090", "KRS15-125", "条件"]
JAPANESE_ROWS = [
    ["公称周波数", "f0", "32.768 kHz", "32.768 kHz", "32.768 kHz", ""],
    ["周波数許容偏差", "Δf/f", "±20 ppm", "±20 ppm", "±20 ppm", "25℃"],
    ["負荷容量", "CL", "7.0 pF", "9.0 pF", "12.5 pF", ""],
    ["等価直列抵抗", "R1", "70 kΩ max.", "70 kΩ max.", "65 kΩ max.", ""],
    ["並列容量", "C0", "1.2 pF typ.", "1.2 pF typ.", "1.3 pF typ.", ""],
    ["等価直列容量", "C1", "3.2 fF typ.", "3.2 fF typ.", "3.6 fF typ.", ""],
    ["頂点温度", "Ti", "+25 ±5 ℃", "+25 ±5 ℃", "+25 ±5 ℃", ""],
    ["二次温度係数", "B", "-0.04 ppm/℃² max.", "-0.04 ppm/℃² max.", "-0.04 ppm/℃² max.", ""],
    ["動作温度範囲", "T_use", "-40 ～ +85 ℃", "-40 ～ +85 ℃", "-40 ～ +85 ℃", ""],
    ["保存温度範囲", "T_stg", "-55 ～ +125 ℃", "-55 ～ +125 ℃", "-55 ～ +125 ℃", ""],
    ["励振レベル", "DL", "0.5 µW max.", "0.5 µW max.", "0.5 µW max.", ""],
    ["経年変化", "f_age", "±3 ppm", "±3 ppm", "±3 ppm", "初年度"],
]


def japanese_html() -> str:
    head = "".join(f"<th>{cell}</th>" for cell in JAPANESE_HEAD)
    body = "".join("<tr>" + "".join(f"<td>{cell}</td>" for cell in row) + "</tr>" for row in JAPANESE_ROWS)
    return f"""<!doctype html><html lang="ja"><meta charset="utf-8"><title>KRS15</title>
<style>@page{{size:A4;margin:16mm}}body{{font:10pt 'Noto Sans CJK JP';color:#111}}h1{{font-size:17pt;margin:0}}
table{{border-collapse:collapse;width:100%;font-size:9pt}}td,th{{border:1px solid #555;padding:4px 6px}}
td:nth-child(n+3):nth-child(-n+5){{text-align:center;white-space:nowrap}}th{{background:#e7ecf3}}</style>
<h1>霧坂水晶株式会社</h1><p>音叉型水晶振動子 KRS15シリーズ(3.2×1.5 mm)</p>
<table><tr>{head}</tr>{body}</table><p>はんだ付け:リフロー 260 ℃、10 秒以内。資料番号 KR-J-315</p></html>"""


OSCILLATOR_ROWS = [
    ["Parameter", "Min.", "Typ.", "Max.", "Unit", "Remarks"],
    ["Output frequency", "", "26.000", "", "MHz", "fixed"],
    ["Supply voltage VDD", "1.71", "1.8", "1.89", "V", ""],
    ["Supply current", "", "1.1", "2.0", "mA", "no load"],
    ["Frequency stability, all causes", "-25", "", "+25", "ppm", "-40 to +85 °C"],
    ["Duty cycle", "45", "50", "55", "%", ""],
    ["Rise and fall time", "", "2.5", "4", "ns", "10 to 90 %"],
    ["Output load", "", "", "15", "pF", "CMOS"],
    ["Start-up time", "", "", "3", "ms", ""],
    ["Operating temperature", "-40", "", "+85", "°C", ""],
    ["Ageing", "-3", "", "+3", "ppm", "first year"],
]

SCAN_HEAD = [
    "HOLLINBRAE QUARTZ LTD",
    "Specification for approval",
    "Part number: HLB32-26M000-08    Package: 3.2 x 2.5 mm",
]
SCAN_FOOTER = "Checked: M. Tarrow        Approved: I. Lindqvist-Boyle"
SCAN_ROWS = [
    ["Item", "Value", "Condition"],
    ["Nominal frequency", "26.000 MHz", "fundamental, AT cut"],
    ["Frequency tolerance", "±10 ppm", "at 25 °C"],
    ["Frequency stability", "±15 ppm", "-20 to +70 °C"],
    ["Operating temperature", "-20 to +70 °C", ""],
    ["Storage temperature", "-40 to +85 °C", ""],
    ["Load capacitance", "8 pF", ""],
    ["ESR", "40 ohm max", ""],
    ["Shunt capacitance", "3.0 pF max", ""],
    ["Drive level", "100 µW max", ""],
    ["Ageing", "±2 ppm", "first year"],
    ["Insulation resistance", "500 MΩ min", "100 V DC"],
]

PICTURE_HEAD = [
    "TAMSQUITH FREQUENCY",
    "Tuning fork crystal TQF20-32.768-12.5",
    "Package: 2.0 x 1.2 mm",
]
PICTURE_FOOTER = "TQ-D-0051, issue 2"
PICTURE_ROWS = [
    ["Parameter", "Value", "Remarks"],
    ["Nominal frequency", "32.768 kHz", ""],
    ["Frequency tolerance", "±15 ppm", "at 25 °C"],
    ["Turnover temperature", "25 ±5 °C", ""],
    ["Parabolic coefficient", "-0.034 ppm/°C²", "typical"],
    ["Operating temperature", "-40 to +85 °C", ""],
    ["Storage temperature", "-55 to +125 °C", ""],
    ["Load capacitance", "12.5 pF", ""],
    ["ESR", "75 kohm max", ""],
    ["Shunt capacitance", "1.3 pF typ", ""],
    ["Drive level", "0.5 µW max", ""],
    ["Ageing", "±3 ppm max", "first year"],
]
