"""Corpus sheets in the manner of makers' own, printed by Chromium. Run from this folder to write them anew."""

from __future__ import annotations

from corpus_pages import printed, rows
from corpus_shorthand import PADS, keep, part


def models_with_bands_below() -> None:
    t = (
        rows("""{r2}Item|{r2}Symbol|{c3}Specifications|{r2}Conditions / Remarks
TQ-128|TQ-238|TQ-238V
Nominal frequency range|f_nom|16.000 MHz to 54.000 MHz|16.000 MHz to 62.400 MHz|12.000 MHz to \
15.999 MHz|Fundamental. Please contact us for available frequencies.
Storage temperature|T_stg|{c3}-40 °C to +125 °C|Storage as single product
Operating temperature|T_use|{c3}-40 °C to +85 °C|
Level of drive|DL|{c3}200 µW Max.|Recommended: 1 µW to 100 µW
Frequency tolerance (standard)|f_tol|{c3}±50 × 10<sup>-6</sup>|+25 °C. Please ask about tighter \
tolerance.
Frequency versus temperature characteristics (standard)|f_tem|{c3}±30 × 10<sup>-6</sup>|-20 °C to \
+75 °C
Load capacitance|C<sub>L</sub>|{c3}6 pF to ∞|Please specify
Motional resistance (ESR)|R<sub>1</sub>|{c3}As per table below|-20 °C to +75 °C, DL = 100 µW
Frequency aging|f_age|{c3}±5 × 10<sup>-6</sup> / year Max.|+25 °C, First year""")
        .replace("f_nom", "f<sub>nom</sub>")
        .replace("T_", "T")
    )
    e = rows("""Model|Frequency|Motional resistance (ESR)
{r4}TQ-128|16 MHz ≤ f<sub>nom</sub> &lt; 20 MHz|100 Ω Max.
20 MHz ≤ f<sub>nom</sub> &lt; 24 MHz|80 Ω Max.
24 MHz ≤ f<sub>nom</sub> &lt; 30 MHz|60 Ω Max.
30 MHz ≤ f<sub>nom</sub> ≤ 54 MHz|50 Ω Max.
{r2}TQ-238|16 MHz ≤ f<sub>nom</sub> &lt; 26 MHz|80 Ω Max.
26 MHz ≤ f<sub>nom</sub> ≤ 62.4 MHz|50 Ω Max.
TQ-238V|12 MHz ≤ f<sub>nom</sub> &lt; 16 MHz|100 Ω Max.""")
    body = f"""<div style="float:right;font-size:16pt"><b>TENQUAY TIMING</b></div><h2>Crystal unit</h2><p><b>SMD \
low profile high-frequency crystal unit</b></p>
<h1>TQ-128 / TQ-238 / TQ-238V</h1>
<p>•Frequency range : 12 MHz to 62.4 MHz<br>•External dimensions : TQ-128 &nbsp; 2.0 × 1.6 × 0.5 \
mm<br>&nbsp;&nbsp; TQ-238 / TQ-238V &nbsp; 3.2 × 2.5 × 0.7 mm<br>•Overtone order : \
Fundamental<br>•Applications : Bluetooth, W-LAN, ISM band radio, MPU clock</p>
<h2>Specifications (characteristics)</h2><table>{t}</table><h2>Motional resistance (ESR)</h2>\
<table>{e}</table>
<h2>External dimensions <small>(Unit:mm)</small></h2><p>#4 #3 2.0±0.1 1.6±0.1 0.5 Max. #1 #2 0.65 \
0.55</p><p><small>Pin map: #1 X'tal, #2 GND, #3 X'tal, #4 GND. The metal cover is connected with \
the GND terminals.</small></p>"""
    sh = """
            sto -40..125
            op -40..85
            dl <200
            tol ±50
            stab ±30 t=-20:75
            cl >6
            age ±5 y=1"""
    one = {"maker": "Tenquay Timing", "mode": "fund", "attributes": PADS}
    keep(
        "tq_models_en.pdf",
        printed(body, "td,th{text-align:left}"),
        [
            part(
                "TQ-128",
                sh
                + """
            f 16..54
            esr <100 f=16:20
            esr <80 f=20:24
            esr <60 f=24:30
            esr <50 f=30:54""",
                package="2.0 × 1.6 × 0.5 mm",
                **one,
            ),
            part(
                "TQ-238",
                sh
                + """
            f 16..62.4
            esr <80 f=16:26
            esr <50 f=26:62.4""",
                package="3.2 × 2.5 × 0.7 mm",
                **one,
            ),
            part(
                "TQ-238V",
                sh
                + """
            f 12..15.999
            esr <100 f=12:16""",
                package="3.2 × 2.5 × 0.7 mm",
                **one,
            ),
        ],
        "en",
        "three model columns; ESR by model below",
    )


def two_models_min_typ_max() -> None:
    t = rows("""{r2}PARAMETERS|{c3}EDX-2236|{c3}EDX-2033|{r2}UNITS
MIN|TYP|MAX|MIN|TYP|MAX
Frequency Range|12.0||52.0|16.0||60.0|MHz
Mode of Oscillation|{c6}Fundamental|
Frequency Tolerance @ +25°C|{c3}± 20|{c3}± 15|PPM
Frequency Stability over Temp|{c3}± 30|{c3}± 30|PPM
Shunt Capacitance Co|||3.0|||2.0|pF
Load Capacitance CL|{c3}Customer Specified|{c3}8|pF
Drive Level||10|100||10|100|µW
Operating Temperature|-20||+70|-40||+85|°C
Storage Temperature|-40||+85|-55||+125|°C
Aging (First Year)|{c3}± 3|{c3}± 2|PPM""")
    e = rows("""EDX-2236 FREQUENCY RANGE|ESR (MAX Ω)|EDX-2033 FREQUENCY RANGE|ESR (MAX Ω)
12.000 ~ 15.999 MHz|120|16.000 ~ 19.999 MHz|200
16.000 ~ 29.999 MHz|80|20.000 ~ 29.999 MHz|100
30.000 ~ 52.000 MHz|60|30.000 ~ 60.000 MHz|80""")
    guide = rows("""ECS|FREQUENCY ABBREVIATION|LOAD CAPACITANCE|PACKAGE|TOLERANCE|STABILITY|TEMP RANGE|PACKAGING
|240 = 24.000 MHz|8 = 8 pF<br>18 = 18 pF<br>S = Series|36 = EDX-2236<br>33 = EDX-2033|J = ±20 \
ppm<br>R = ±15 ppm<br>C = ±10 ppm|W = ±30 ppm<br>G = ±15 ppm|M = -20 ~ +70°C<br>N = -40 ~ +85°C|\
TR = Tape & Reel""")
    body = f"""<h1>EDX-2236 / EDX-2033 SMD QUARTZ CRYSTALS</h1><p>The EDX-2236 (2.5 x 2.0 x 0.55 mm) and \
EDX-2033 (2.0 x 1.6 x 0.5 mm) are compact SMD crystals ideal for wireless applications.</p>
<h2>OPERATING CONDITIONS / ELECTRICAL CHARACTERISTICS</h2><table>{t}</table><h2>RESONANCE \
RESISTANCE</h2><table>{e}</table>
<h2>PART NUMBERING GUIDE: Example EDX-240-8-36-RWN-TR</h2><table>{guide}</table>
<p><small>1105 South Ridgeway, Olathe Falls | EDRIDGE COMPONENTS INC. | Rev. 2019</small></p>"""
    one = {"maker": "Edridge Components Inc.", "mode": "fund"}
    keep(
        "edx_two_en.pdf",
        printed(body, "body{font-size:8pt}"),
        [
            part(
                "EDX-2236",
                """
            f 12..52
            tol ±20
            stab ±30
            c0 <3
            dl -/10/100
            op -20..70
            sto -40..85
            age ±3 y=1
            esr <120 f=12:15.999
            esr <80 f=16:29.999
            esr <60 f=30:52""",
                package="2.5 x 2.0 x 0.55 mm",
                **one,
            ),
            part(
                "EDX-2033",
                """
            f 16..60
            tol ±15
            stab ±30
            c0 <2
            cl 8
            dl -/10/100
            op -40..85
            sto -55..125
            age ±2 y=1
            esr <200 f=16:19.999
            esr <100 f=20:29.999
            esr <80 f=30:60""",
                package="2.0 x 1.6 x 0.5 mm",
                **one,
            ),
        ],
        "en",
        "two models each with Min Typ Max; ESR pairs headed by model",
    )


def fork_columns() -> None:
    t = rows("""{r2}Parameter|{r2}Symbol|{c3}Type|{r2}Unit|{r2}Remarks
SWX-15|SWX-20|SWX-32
Package dimensions||1.6 x 1.0 x 0.5|2.0 x 1.2 x 0.6|3.2 x 1.5 x 0.9|mm|L x W x H
Nominal frequency|f|{c3}32.768|kHz|
Frequency tolerance|Δf/f|±20|±20|±20 (±10)|ppm|at 25 °C
Load capacitance|C<sub>L</sub>|4 / 7 / 9 / 12.5|{c2}7 / 9 / 12.5|pF|
Series resistance max.|R<sub>S</sub>|90|70|65|kΩ|
Motional capacitance|C<sub>1</sub>|4.5|6.0|3.6|fF|typ.
Static capacitance|C<sub>0</sub>|1.2|1.5|1.0|pF|typ.
Drive level max.|P|{c2}0.5|1.0|µW|
Turnover temperature|T<sub>0</sub>|{c3}25 ±5|°C|
Parabolic coefficient|B|{c3}-0.034 ±0.006|ppm/°C²|
Ageing|Δf/f|{c3}±3|ppm|1st year
Operating temperature|T<sub>opr</sub>|{c2}-40 to +85|-40 to +105|°C|
Storage temperature|T<sub>stg</sub>|{c3}-55 to +125|°C|
Q-factor|Q|12'000|16'000|18'000||typ.""")
    body = f"""<h1>SWX series — 32.768 kHz SMD tuning fork crystals</h1><p>Schwarzwasser Quartz AG</p>\
<table>{t}</table><p><small>Frequency deviation over temperature: Δf/f = B · (T - \
T<sub>0</sub>)². Reflow: max. 260 °C for 20 s, 2 times.</small></p>"""
    sh = """
            f 0.032768
            to 20/25/30
            k -0.04/-0.034/-0.028
            age ±3 y=1
            sto -55..125"""
    one = {"maker": "Schwarzwasser Quartz AG", "mode": "fund", "cut": "tuning fork", "res": "load"}
    keep(
        "swx_forks_en.pdf",
        printed(body),
        [
            part(
                "SWX-15",
                sh
                + """
            tol ±20
            cl {4,7,9,12.5}
            esr <90000
            c1 4.5
            c0 1.2
            dl <0.5
            op -40..85
            q 12000""",
                package="1.6 x 1.0 x 0.5",
                **one,
            ),
            part(
                "SWX-20",
                sh
                + """
            tol ±20
            cl {7,9,12.5}
            esr <70000
            c1 6
            c0 1.5
            dl <0.5
            op -40..85
            q 16000""",
                package="2.0 x 1.2 x 0.6",
                **one,
            ),
            part(
                "SWX-32",
                sh
                + """
            tol ±20 also={10,20}
            cl {7,9,12.5}
            esr <65000
            c1 3.6
            c0 1.0
            dl <1
            op -40..105
            q 18000""",
                package="3.2 x 1.5 x 0.9",
                **one,
            ),
        ],
        "en",
        "one column per size, unit and remarks columns, apostrophe thousands",
    )


def merged_series_rows() -> None:
    t = rows("""{r2}形名|{r2}外形寸法<br>L×W×H (mm)|{r2}周波数範囲<br>(MHz)|\
{r2}周波数許容偏差<br>(×10<sup>-6</sup>, 25℃)|{r2}周波数温度特性<br>(×10<sup>-6</sup>)|\
{r2}動作温度範囲<br>(℃)|{r2}負荷容量<br>(pF)|{c2}等価直列抵抗
周波数 (MHz)|(Ω) max.
{r3}TKS-32S|{r3}3.2×2.5×0.7|{r3}10～54|{r3}±10|{r3}±15|{r3}-30～+85|{r3}8|10～15.99|100
16～29.99|60
30～54|40
{r2}TKS-25S|{r2}2.5×2.0×0.5|{r2}12～60|{r2}±10|{r2}±15|{r2}-30～+85|{r2}8|12～23.99|100
24～60|50
{r2}TKS-20A|{r2}2.0×1.6×0.45|{r2}16～60|{r2}±15|{r2}±30|{r2}-40～+125|{r2}6|16～29.99|120
30～60|60""")
    body = f"""<h1>水晶振動子 TKSシリーズ</h1><p>津久波精密株式会社</p><table>{t}</table><p>共通仕様：\
オーバトーン次数 基本波、励振レベル 10 μW（最大 100 μW）、保存温度範囲 -40～+125℃、経年変化 \
±1×10<sup>-6</sup>/年。</p>"""
    sh = """
            dl -/10/100
            sto -40..125
            age ±1 y=1"""
    one = {"maker": "津久波精密株式会社", "mode": "fund", "res": "load"}
    keep(
        "tks_ja.pdf",
        printed(body, "body{font-family:'Noto Sans CJK JP';font-size:8pt}", "ja"),
        [
            part(
                "TKS-32S",
                sh
                + """
            f 10..54
            tol ±10
            stab ±15
            op -30..85
            cl 8
            esr <100 f=10:15.99
            esr <60 f=16:29.99
            esr <40 f=30:54""",
                package="3.2×2.5×0.7",
                **one,
            ),
            part(
                "TKS-25S",
                sh
                + """
            f 12..60
            tol ±10
            stab ±15
            op -30..85
            cl 8
            esr <100 f=12:23.99
            esr <50 f=24:60""",
                package="2.5×2.0×0.5",
                **one,
            ),
            part(
                "TKS-20A",
                sh
                + """
            f 16..60
            tol ±15
            stab ±30
            op -40..125
            cl 6
            esr <120 f=16:29.99
            esr <60 f=30:60""",
                package="2.0×1.6×0.45",
                **one,
            ),
        ],
        "ja",
        "parts as merged rows with several ESR rows each, common line below",
    )


def resistance_by_load() -> None:
    t = (
        rows("""项目|符号|规格|单位|条件/备注
标称频率|f<sub>0</sub>|32.768|kHz|
频率公差|Δf/f<sub>0</sub>|±20 (±10 可选)|ppm|25℃, DL=0.1μW
顶点温度 (拐点)|T<sub>0</sub>|25±5|℃|
温度系数|K|-0.034±0.006|ppm/℃²|
工作温度|T<sub>OPR</sub>|-40～+85|℃|
储存温度|T<sub>STG</sub>|-55～+125|℃|
最大激励功率|DL|1.0|μW|
推荐激励功率||0.1|μW|
动态电容|C<sub>1</sub>|3.4 典型|fF|
静态电容|C<sub>0</sub>|1.0 典型|pF|
绝缘电阻|IR|500 最小|MΩ|DC100V
老化率|Δf/f<sub>0</sub>|±3|ppm|第一年，25±3℃"""),
        rows("""负载电容 C<sub>L</sub> (pF)|6.0|7.0|9.0|12.5
等效串联电阻 ESR 最大 (kΩ)|70|70|65|65"""),
    )
    body = f"""<p>东莞市钟达石英科技有限公司 <b>ZHONGDA QUARTZ</b></p><h1>ZD315 音叉晶体 32.768kHz</h1>\
<p>3.2×1.5×0.75mm 贴片，两脚</p><h2>主要参数</h2><table>{t[0]}</table>\
<h2>负载电容与等效串联电阻</h2><table>{t[1]}</table><p>频率-温度特性：f<sub>T</sub> = \
f<sub>0</sub> [1 + K (T - T<sub>0</sub>)²]</p>"""
    keep(
        "zd315_zh.pdf",
        printed(body, lang="zh"),
        [
            part(
                "ZD315",
                """
            f 0.032768
            tol ±20 also={10,20}
            to 20/25/30
            k -0.04/-0.034/-0.028
            op -40..85
            sto -55..125
            dl -/0.1/1
            c1 3.4
            c0 1
            ir >500
            age ±3 y=1
            cl {6,7,9,12.5}
            esr <70000 cl=6
            esr <70000 cl=7
            esr <65000 cl=9
            esr <65000 cl=12.5""",
                maker="东莞市钟达石英科技有限公司",
                package="3.2×1.5×0.75mm",
                mode="fund",
                cut="tuning fork",
                res="load",
            )
        ],
        "zh",
        "tuning fork, ESR by load lying, recommended and greatest drive in rows",
    )


if __name__ == "__main__":
    for make in (models_with_bands_below, two_models_min_typ_max, fork_columns, merged_series_rows, resistance_by_load):
        make()
