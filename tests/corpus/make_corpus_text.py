"""Corpus sheets that are text, mail, Markdown or delimited lists. Run from this folder to write them anew."""

from __future__ import annotations

from corpus_shorthand import PADS, keep, part


def key_value_semicolons() -> None:
    text = """PN=HXW32-24M-12; MFR=Hexworthy Crystal; PACKAGE=3.2x2.5x0.7mm; F0=24.000MHz; MODE=Fund; CL=12pF; \
FTOL=+/-15; FSTAB=+/-30ppm@-20..+70degC; ESR=50ohm max; C0=2.2pF max; C1=4.1fF typ; DL=100uW max; AGE=+/-3ppm/yr; \
STG=-40..+125degC; PADS=1,3 xtal 2,4 gnd; MOQ=3000; PRICE=0.18USD
PN=HXW32-40M-8; MFR=Hexworthy Crystal; PACKAGE=3.2x2.5x0.7mm; F0=40.000MHz; MODE=Fund; CL=8pF; \
FTOL=+/-10ppm; FSTAB=+/-15ppm@-30..+85degC; ESR=30ohm max; C0=2.6pF max; C1=6.2fF typ; DL=200uW max; AGE=+/-2ppm/yr; \
STG=-40..+125degC; PADS=1,3 xtal 2,4 gnd; MOQ=3000; PRICE=0.21USD
"""
    one = {"maker": "Hexworthy Crystal", "package": "3.2x2.5x0.7mm", "mode": "fund", "res": "load", "attributes": PADS}
    parts = [
        part(
            "HXW32-24M-12",
            """
            f 24
            cl 12
            tol ±15 flag
            stab ±30 t=-20:70
            op -20..70
            esr <50
            c0 <2.2
            c1 4.1
            dl <100
            age ±3 y=1
            sto -40..125""",
            **one,
        ),
        part(
            "HXW32-40M-8",
            """
            f 40
            cl 8
            tol ±10
            stab ±15 t=-30:85
            op -30..85
            esr <30
            c0 <2.6
            c1 6.2
            dl <200
            age ±2 y=1
            sto -40..125""",
            **one,
        ),
    ]
    keep("key_value_semicolons_en.txt", text, parts, "en", "key=value with ; between, one unit forgotten")


def one_line_interleaved() -> None:
    text = (
        "PLOVERMERE QUARTZ PMQ5032 SERIES SMD CRYSTAL 5.0 x 3.2 mm Parameter Symbol Value Nominal frequency Mode of "
        "oscillation f_nom 8.000 to 54.000 MHz AT-Cut Fundamental Frequency tolerance Frequency stability f_tol f_tem "
        "±20 ppm max at 25 °C ±3 °C ±30 ppm max ref. to 25 °C Operating temperature Storage temperature T_use T_stg "
        "-40 °C to +85 °C -55 °C to +125 °C Load capacitance Shunt capacitance CL C0 18 pF standard, others on request "
        "5.0 pF max Equivalent series resistance ESR 8.000 - 9.999 MHz: 100 Ω max 10.000 - 15.999 MHz: 70 Ω max "
        "16.000 - 54.000 MHz: 50 Ω max Drive level Frequency aging DL f_age 500 µW max ±5 ppm/year max Insulation "
        "resistance IR 500 MΩ min at DC 100 V ±15 V Reflow 260 °C max 10 s Tape and reel 1000 pcs\n"
    )
    parts = [
        part(
            "PMQ5032",
            """
            f 8..54
            tol ±20
            stab ±30
            op -40..85
            sto -55..125
            cl 18
            c0 <5
            esr <100 f=8:9.999
            esr <70 f=10:15.999
            esr <50 f=16:54
            dl <500
            age ±5 y=1
            ir >500""",
            maker="Plovermere Quartz",
            package="5.0 x 3.2 mm",
            mode="fund",
            cut="AT",
            res="load",
            part_number_also=["PMQ5032 Series"],
        )
    ]
    keep("one_line_interleaved_en.txt", text, parts, "en", "whole sheet on one line, label pairs then value pairs")


COLUMNS_DUMPED = """Staufenried Quarztechnik
SQT-2016
Datenblatt Ausgabe 4
Kennwert
Nennfrequenz
Schwingungsart
Lastkapazität
Abgleichtoleranz
Temperaturgang
Arbeitstemperaturbereich
Lagertemperaturbereich
Resonanzwiderstand
Parallelkapazität
Belastung
Alterung
Bedingung
-
-
-
bei 25 °C
bezogen auf 25 °C
-
-
-
bei 1 MHz
-
im ersten Jahr
Wert
37,400
AT, Grundton
9
±10
±20
-30 bis +85
-40 bis +105
max. 60
max. 1,5
max. 100
±2
Einheit
MHz
-
pF
ppm
ppm
°C
°C
Ω
pF
µW
ppm
Gehäuse 2,0 x 1,6 x 0,5 mm
"""


def column_dump() -> None:
    parts = [
        part(
            "SQT-2016",
            """
            f 37.4
            cl 9
            tol ±10
            stab ±20
            op -30..85
            sto -40..105
            esr <60
            c0 <1.5
            dl <100
            age ±2 y=1""",
            maker="Staufenried Quarztechnik",
            package="2,0 x 1,6 x 0,5 mm",
            mode="fund",
            cut="AT",
            res="load",
        )
    ]
    keep("column_dump_de.txt", COLUMNS_DUMPED, parts, "de", "column by column: labels, conditions, values, units")


FULLWIDTH_MAIL = """件名：水晶振動子のお見積り
差出人：黒羽水晶株式会社　営業二課

いつもお世話になっております。ご照会の二品種につきまして下記の通りご回答申し上げます。

１．型番：ＫＢ１６１０－３２Ｋ
　　種類：音叉型水晶振動子　１．６×１．０ｍｍ
　　公称周波数：３２．７６８ｋＨｚ
　　周波数許容偏差：±２０ｐｐｍ（２５℃）
　　負荷容量：７ｐＦ
　　等価直列抵抗：９０ｋΩ以下
　　頂点温度：＋２５℃±５℃
　　二次温度係数：－０．０３ｐｐｍ／℃²
　　励振レベル：０．１μＷ標準、０．５μＷ以下
　　動作温度範囲：－４０℃～＋８５℃
　　経年変化：±３ｐｐｍ／年以下

２．型番：ＫＢ２０１６－２４Ｍ
　　種類：ＡＴカット、基本波　２．０×１．６ｍｍ
　　公称周波数：２４．０００ＭＨｚ
　　周波数許容偏差：±１０ｐｐｍ（２５℃）
　　周波数温度特性：±１５ｐｐｍ
　　負荷容量：８ｐＦ
　　等価直列抵抗：８０Ω以下
　　並列容量：０．７ｐＦ標準
　　等価直列容量：２．１ｆＦ標準
　　励振レベル：１００μＷ以下
　　動作温度範囲：－３０℃～＋８５℃
　　経年変化：±１ｐｐｍ／年以下

納期：８週間　単価：４２円（３０００個）
"""


def fullwidth_mail() -> None:
    parts = [
        part(
            "KB1610-32K",
            """
            f 0.032768
            tol ±20
            cl 7
            esr <90000
            to 20/25/30
            k -0.03
            dl -/0.1/0.5
            op -40..85
            age ±3 y=1""",
            maker="黒羽水晶株式会社",
            package="1.6×1.0mm",
            cut="tuning fork",
            res="load",
        ),
        part(
            "KB2016-24M",
            """
            f 24
            tol ±10
            stab ±15
            cl 8
            esr <80
            c0 0.7
            c1 2.1
            dl <100
            op -30..85
            age ±1 y=1""",
            maker="黒羽水晶株式会社",
            package="2.0×1.6mm",
            mode="fund",
            cut="AT",
            res="load",
        ),
    ]
    keep("fullwidth_two_parts_ja.txt", FULLWIDTH_MAIL, parts, "ja", "mail in full-width type, two numbered parts")


def markdown_two_bounds() -> None:
    text = """# Ravelstoke RVS-21 ![photo](rvs21.jpg)

**2.5 x 2.0 mm SMD crystal, 26 MHz, for radio reference**

| Characteristics | RVS-21-26M-9 |
|---|---|
| Frequency | 26.000000 MHz |
| Cut / mode | AT / Fundamental |
| Frequency Tolerance (25 °C) | -8 to +8 ppm |
| Stability vs. temperature (-40 to +85 °C) | ±12 ppm |
| Load | 9 pF |
| ESR | 45 kΩ max., 25 typ. |
| C0 | 0.7 pF to 1.1 pF typical, 1.3 pF maximum |
| C1 | 3.0 fF ±20 % |
| Drive level | 10 (100 max.) µW |
| Drive level dependency 1 µW to 100 µW | Δf ±2 ppm max., ΔR 15 % max. |
| Aging | < ±1 ppm first year, < ±5 ppm 10 years |
| Insulation resistance | 500 M Ohm minimum @ 100 VDC |
| Storage | -55 to +125 °C |
| Soldering | 260 °C, 10 s |
"""
    parts = [
        part(
            "RVS-21-26M-9",
            """
            f 26
            tol -8..8
            stab ±12 t=-40:85
            op -40..85
            cl 9
            esr -/25/45000 flag also=-/25/45 also=-/25000/45000
            c0 <1.3 also=0.7/-/1.3 also=0.7/1.1/1.3 also=-/1.1/1.3
            c1 2.4/3/3.6
            dl -/10/100
            age ±1 y=1
            age ±5 y=10
            ir >500
            sto -55..125""",
            maker="Ravelstoke",
            package="2.5 x 2.0 mm",
            mode="fund",
            cut="AT",
            res="load",
            maker_also=[None],
        )
    ]
    keep(
        "markdown_two_bounds_en.md", text, parts, "en", "Markdown table, two or three bounds in a cell, ESR kΩ by slip"
    )


def spanish_mail() -> None:
    text = """De: ventas@cuarzoval.example
Asunto: Oferta cristal de cuarzo 16 MHz

Buenos días:

Según lo solicitado, les ofrecemos el cristal CVL-49S de Cuarzos Valdeorna, encapsulado HC-49/S, corte AT, modo
fundamental:

 - Frecuencia nominal: 16,000 MHz
 - Tolerancia de frecuencia a 25 °C: ±30 ppm
 - Estabilidad en temperatura: ±50 ppm
 - Temperatura de trabajo: de -20 a +70 °C
 - Temperatura de almacenamiento: de -40 a +85 °C
 - Capacidad de carga: S, 10, 12, 20 pF (S = resonancia serie)
 - Resistencia serie equivalente: 40 Ω máx.
 - Capacidad en paralelo: 7 pF máx.
 - Nivel de excitación: 100 µW típico, 1 mW máx.
 - Envejecimiento: ±5 ppm por año

Precio: 0,15 EUR a partir de 1.000 unidades. Plazo de entrega: 6 semanas.
"""
    parts = [
        part(
            "CVL-49S",
            """
            f 16
            tol ±30
            stab ±50
            op -20..70
            sto -40..85
            cl {10,12,20}
            esr <40
            c0 <7
            dl -/100/1000
            age ±5 y=1""",
            maker="Cuarzos Valdeorna",
            package="HC-49/S",
            mode="fund",
            cut="AT",
            res=None,
        )
    ]
    keep("oferta_correo_es.txt", text, parts, "es", "Spanish mail, loads with S for series, mW and µW in a line")


def french_price_list() -> None:
    text = """Référence;Fabricant;Boîtier;Fréquence (MHz);Mode;CL (pF);Tolérance à 25°C (± ppm);Stabilité (± ppm);\
Température d'emploi;Résistance série max. (ohms);Capacité parallèle max. (pF);Niveau d'excitation max. (µW);\
Vieillissement (± ppm/an);État;Délai;Prix unitaire (€)
QDL32-16M-12;Quartz du Lormelin;3,2 x 2,5 mm;16,000;fondamental;12;15;30;-40 à +85 °C;60;3,0;200;3;actif;6 sem.;0,17
QDL32-27M12-18;Quartz du Lormelin;3,2 x 2,5 mm;27,120;fondamental;18;20;30;-20 à +70 °C;50;3,0;200;3;actif;stock;0,16
QDL49-48M-3P-S;Quartz du Lormelin;HC-49/U;48,000;partiel 3;série;20;50;-10 à +60 °C;40;7,0;1000;5;obsolète;stock;0,42
QDL15-32K-12;Quartz du Lormelin;3,2 x 1,5 mm;0,032768;diapason;12,5;20;;-40 à +85 °C;70000;1,6;0,5;3;actif;stock;0,23
"""
    one = {"maker": "Quartz du Lormelin"}
    parts = [
        part(
            "QDL32-16M-12",
            "f 16\ncl 12\ntol ±15\nstab ±30\nop -40..85\nesr <60\nc0 <3\ndl <200\nage ±3 y=1",
            **one,
            package="3,2 x 2,5 mm",
            mode="fund",
            res="load",
        ),
        part(
            "QDL32-27M12-18",
            "f 27.12\ncl 18\ntol ±20\nstab ±30\nop -20..70\nesr <50\nc0 <3\ndl <200\nage ±3 y=1",
            **one,
            package="3,2 x 2,5 mm",
            mode="fund",
            res="load",
        ),
        part(
            "QDL49-48M-3P-S",
            "f 48\ntol ±20\nstab ±50\nop -10..60\nesr <40\nc0 <7\ndl <1000\nage ±5 y=1",
            **one,
            package="HC-49/U",
            mode="3rd",
            res="series",
        ),
        part(
            "QDL15-32K-12",
            "f 0.032768\ncl 12.5\ntol ±20\nop -40..85\nesr <70000\nc0 <1.6\ndl <0.5\nage ±3 y=1",
            **one,
            package="3,2 x 1,5 mm",
            cut="tuning fork",
            res="load",
        ),
    ]
    data = text.encode("cp1252")
    keep("liste_prix_fr_cp1252.csv", data, parts, "fr", "semicolons, decimal comma, Windows-1252, price and status")


def chinese_parts_as_columns() -> None:
    text = """项目,YRJ-3225-12M,YRJ-2520-30M,YRJ-1610-32K
厂家,云榕晶体,云榕晶体,云榕晶体
封装,3.2*2.5mm,2.5*2.0mm,1.6*1.0mm
标称频率,12.000MHz,30.000MHz,32.768kHz
振动模式,基频,基频,音叉
负载电容,20pF,12pF,9pF
调整频差,±20ppm,±10ppm,±20ppm
温度频差,±30ppm,±20ppm,--
工作温度,-20~+70℃,-40~+85℃,-40~+85℃
储存温度,-40~+85℃,-55~+125℃,-55~+125℃
谐振电阻(最大),80Ω,50Ω,90kΩ
静电容(最大),3.0pF,1.5pF,1.8pF
激励功率(最大),100μW,100μW,0.5μW
年老化率,±3ppm,±2ppm,±3ppm
含税单价,0.32元,0.45元,0.60元
交期,现货,4周,6周
"""
    one = {"maker": "云榕晶体", "res": "load"}
    parts = [
        part(
            "YRJ-3225-12M",
            "f 12\ncl 20\ntol ±20\nstab ±30\nop -20..70\nsto -40..85\nesr <80\nc0 <3\ndl <100\nage ±3 y=1",
            **one,
            package="3.2*2.5mm",
            mode="fund",
        ),
        part(
            "YRJ-2520-30M",
            "f 30\ncl 12\ntol ±10\nstab ±20\nop -40..85\nsto -55..125\nesr <50\nc0 <1.5\ndl <100\nage ±2 y=1",
            **one,
            package="2.5*2.0mm",
            mode="fund",
        ),
        part(
            "YRJ-1610-32K",
            "f 0.032768\ncl 9\ntol ±20\nop -40..85\nsto -55..125\nesr <90000\nc0 <1.8\ndl <0.5\nage ±3 y=1",
            **one,
            package="1.6*1.0mm",
            cut="tuning fork",
        ),
    ]
    data = text.encode("gb18030")
    keep("parts_as_columns_zh_gb18030.csv", data, parts, "zh", "GB18030, a part a column, units in the cells")


def mixed_stock_list() -> None:
    head = (
        "Stock no.|Category|Maker P/N|Brand|Freq|Size|CL|Tol @25C|Stab|T min (°C)|T max (°C)|ESR (Ω) max"
        "|Supply|Output|Status|Lead time|Unit price"
    )
    lines = """
77.20114|Crystal|TWX50-10M-18E|Thistlewax|10 MHz|5.0x3.2|18 pF|±30 ppm|±30 ppm|-20|70|60||||stock|$0.31
77.20115|Crystal|TWX32-13M56-10|Thistlewax|13.56 MHz|3.2x2.5|10 pF|±10 ppm|±15 ppm|85|-40|60|||active|8 wk|$0.24
77.20116|Oscillator|TWO32-25M-33|Thistlewax|25 MHz|3.2x2.5|||±50 ppm|-40|85||3.3 V|CMOS|active|10 wk|$0.88
77.20117|Ceramic resonator|TWC-8M00|Thistlewax|8 MHz|3.2x1.3|15 pF|±0.5 %|±0.3 %|-20|80|40|||active|stock|$0.19
77.20118|Crystal|TWX114-20M-SR|Thistlewax|20 MHz|11.4x4.7|Series|±50 ppm|±50 ppm|-10|60|40|||NRND|stock|$0.27
77.20119|Crystal|TWF20-32K-6|Thistlewax|32.768 kHz|2.0x1.2|6 pF|±20 ppm|-|-40|85|80000|||active|4 wk|$0.36"""
    text = "\n".join(line.replace("|", "\t") for line in [head, *lines.strip().splitlines()]) + "\n"
    one = {"maker": "Thistlewax"}
    parts = [
        part(
            "TWX50-10M-18E",
            "f 10\ncl 18\ntol ±30\nstab ±30\nop -20..70\nesr <60",
            **one,
            package="5.0x3.2",
            res="load",
        ),
        part(
            "TWX32-13M56-10",
            "f 13.56\ncl 10\ntol ±10\nstab ±15\nop 85..-40 flag also=-40..85\nesr <60",
            **one,
            package="3.2x2.5",
            res="load",
        ),
        part(
            "TWX114-20M-SR",
            "f 20\ntol ±50\nstab ±50\nop -10..60\nesr <40",
            **one,
            package="11.4x4.7",
            res="series",
        ),
        part(
            "TWF20-32K-6",
            "f 0.032768\ncl 6\ntol ±20\nop -40..85\nesr <80000",
            **one,
            package="2.0x1.2",
            res="load",
        ),
    ]
    layout = "tab list with an oscillator and a ceramic resonator in it; one row with min above max"
    keep("mixed_stock_list_en.tsv", text, parts, "en", layout, not_parts=["TWO32-25M-33", "TWC-8M00"])


def japanese_list() -> None:
    text = """品番,メーカー,寸法(mm),公称周波数,負荷容量(pF),周波数許容偏差(±10^-6),周波数温度特性(±10^-6),動作温度,\
等価直列抵抗 MAX(Ω),並列容量 TYP(pF),等価直列容量 TYP,励振レベル MAX,備考
SGN21-19.2M,瀬川音響デバイス,2.5×2.0,19.2MHz,8,10,12,-30～+85℃,70,0.95,2.3fF,100μW,量産中
SGN21-38.4M,瀬川音響デバイス,2.5×2.0,38.4MHz,8,10,12,-30～+85℃,40,1.1,3.4pF,100μW,量産中
SGN16-52M,瀬川音響デバイス,1.6×1.2,52MHz,7,8,10,-40～+105℃,30,0.8,2.6fF,200μW,サンプル
"""
    one = {"maker": "瀬川音響デバイス", "res": "load"}
    parts = [
        part(
            "SGN21-19.2M",
            "f 19.2\ncl 8\ntol ±10\nstab ±12\nop -30..85\nesr <70\nc0 0.95\nc1 2.3\ndl <100",
            **one,
            package="2.5×2.0",
        ),
        part(
            "SGN21-38.4M",
            "f 38.4\ncl 8\ntol ±10\nstab ±12\nop -30..85\nesr <40\nc0 1.1\nc1 3400 flag also=3.4\ndl <100",
            **one,
            package="2.5×2.0",
        ),
        part(
            "SGN16-52M",
            "f 52\ncl 7\ntol ±8\nstab ±10\nop -40..105\nesr <30\nc0 0.8\nc1 2.6\ndl <200",
            **one,
            package="1.6×1.2",
        ),
    ]
    keep(
        "list_ja_shiftjis.csv",
        text.encode("cp932"),
        parts,
        "ja",
        "Shift_JIS, ±10^-6 in the heads, one C1 in pF by slip",
    )


if __name__ == "__main__":
    for make in (
        key_value_semicolons,
        one_line_interleaved,
        column_dump,
        fullwidth_mail,
        markdown_two_bounds,
        spanish_mail,
        french_price_list,
        chinese_parts_as_columns,
        mixed_stock_list,
        japanese_list,
    ):
        make()
