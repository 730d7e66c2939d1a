"""Corpus sheets as they are sent on: mail with quotations, chats, pasted text. Run from this folder to write them anew."""

# ruff: noqa: E501 - lines as they were sent

from __future__ import annotations

import email.message
import email.policy

from corpus_shorthand import keep, part


def quoted_request() -> None:
    m = """De : Claire Vautrin <c.vautrin@quartz-ambrelle.example>
À : achats@lorentis.example
Date : mardi 14 avril 2026 09:12
Objet : RE: Demande de prix quartz 13,560 MHz

Bonjour Monsieur,

Merci pour votre demande. Nous pouvons vous proposer :

Référence : QAM5032-13M56
Fabricant : Quartz Ambrelle
Fréquence nominale : 13,560 MHz
Mode : fondamental
Capacité de charge : 20 pF
Tolérance à 25 °C : ± 20 ppm
Stabilité en température : ± 50 ppm de -20 à +70 °C
Résistance série : 70 ohms maxi
Capacité parallèle : 5 pF maxi
Niveau d'excitation : 100 µW maxi, 500 µW maximum absolu
Vieillissement : ± 5 ppm la première année
Température de stockage : -40 à +105 °C
Boîtier : 5,0 x 3,2 mm, 4 plots

Prix : 0,31 € pour 5 000 pièces, délai 10 semaines.

Cordialement,
Claire Vautrin

> Le 13/04/2026 à 16:40, J. Perrot a écrit :
> Bonjour,
> Pouvez-vous coter un quartz 13,560 MHz, capacité de charge 18 pF,
> tolérance ± 10 ppm, stabilité ± 30 ppm de -40 à +85 °C,
> résistance série 50 ohms maxi ?
> Quantité 5000, livraison sous 8 semaines.
"""
    keep(
        "devis_fr.txt",
        m,
        [
            part(
                "QAM5032-13M56",
                "f 13.56\ncl 20\ntol ±20\nstab ±50 t=-20:70\nop -20..70\nesr <70\nc0 <5\ndl <100 flag also=<500\nage ±5 y=1\nsto -40..105",
                maker="Quartz Ambrelle",
                mode="fund",
                package="5,0 x 3,2 mm",
                res="load",
            )
        ],
        "fr",
        "quotation mail with the quoted request below",
    )


def torn_into_lines() -> None:
    x = """WINNOCK FREQUENCY PRODUCTS
WFP2016 SMD Quartz Crystal
Features
* Ultra-small 2.0 x 1.6 x 0.45 mm
* RoHS compliant, Pb-free
Electrical Specifications
Parameter
Conditions
Min.
Typ.
Max.
Units
Frequency Range
24.000
54.000
MHz
Frequency Tolerance
at +25 C
-10
+10
ppm
Frequency Stability
over operating temp
-20
+20
ppm
Operating Temperature
-30
+85
C
Load Capacitance
8
pF
Shunt Capacitance (C0)
1
3
pF
Equivalent Series Resistance
24.000 - 29.999 MHz
80
Ohms
30.000 - 54.000 MHz
60
Ohms
Drive Level
10
100
uW
Aging
First year, at +25 C
-3
+3
ppm
Insulation Resistance
at 100 Vdc
500
MOhms
Storage Temperature
-40
+125
C
"""
    keep(
        "torn_columns_en.txt",
        x,
        [
            part(
                "WFP2016",
                "f 24..54\ntol ±10\nstab ±20\nop -30..85\ncl 8\nc0 -/1/3 also=1..3\nesr <80 f=24:29.999 flag\nesr <60 f=30:54 flag\ndl -/10/100 also=10..100\nage ±3 y=1\nir >500 flag\nsto -40..125",
                maker="Winnock Frequency Products",
                package="2.0 x 1.6 x 0.45 mm",
            )
        ],
        "en",
        "copied out of a PDF, one cell a line, empty cells lost",
    )


def japanese_lines() -> None:
    x = """霧ヶ峰クリスタル株式会社
音叉型水晶振動子 KGF-206 仕様書（抜粋）

公称周波数 : 32.768 kHz
周波数許容偏差 : ±20×10-6 (25℃)
頂点温度 : +25℃ ±5℃
二次温度係数 : -0.04×10-6/℃2 Max.
負荷容量 : 12.5 pF
直列抵抗 : 50 kΩ Max.
励振レベル : 1.0 μW Max. (0.1 μW Typ.)
並列容量 : 0.9 pF Typ.
直列容量 : 2.1 fF Typ.
絶縁抵抗 : 500 MΩ Min.
経年変化 : ±3×10-6/年 Max.
動作温度範囲 : -40℃ ～ +85℃
保存温度範囲 : -55℃ ～ +125℃
外形寸法 : φ2.0×6.0 mm
"""
    keep(
        "shiyosho_eucjp.txt",
        x.replace("～", "〜").replace("μ", "μ").encode("euc_jp"),
        [
            part(
                "KGF-206",
                "f 0.032768\ntol ±20\nto 20/25/30\nk -0.04/-/-\ncl 12.5\nesr <50000\ndl -/0.1/1\nc0 0.9\nc1 2.1\nir >500\nage ±3 y=1\nop -40..85\nsto -55..125",
                maker="霧ヶ峰クリスタル株式会社",
                cut="tuning fork",
                res="load",
            )
        ],
        "ja",
        "label : value lines, EUC-JP",
    )


def keys_with_unknown_one() -> None:
    x = """PN=QZT-2520-26M000; MARCA=Quarzi Tessaro; F0=26,000 MHz; CL=9 pF; TOLL=+/-10 ppm; STAB=+/-15 ppm (-30/+85 C); ESR=50 ohm max; C0=1,9 pF max; C1=5,2 fF tip; DL=100 uW max; INV=+/-2 ppm/anno; STOCC=-40/+125 C
PN=QZT-3225-12M288; MARCA=Quarzi Tessaro; F0=12,288 MHz; CL=18 pF; TOLL=+/-20 ppm; STAB=+/-30 ppm (-40/+85 C); ESR=100 ohm max; C0=3 pF max; DL=200 uW max; INV=+/-3 ppm/anno; STOCC=-40/+125 C
PN=QZO-3225-12M288; MARCA=Quarzi Tessaro; TIPO=oscillatore; F0=12,288 MHz; VDD=3,3 V; STAB=+/-25 ppm (-40/+85 C)
"""
    keep(
        "chiave_valore_it.txt",
        x,
        [
            part(
                "QZT-2520-26M000",
                "f 26\ncl 9\ntol ±10\nstab ±15 t=-30:85\nop -30..85\nesr <50\nc0 <1.9\nc1 5.2\ndl <100\nage ±2 y=1\nsto -40..125",
                maker="Quarzi Tessaro",
                res="load",
            ),
            part(
                "QZT-3225-12M288",
                "f 12.288\ncl 18\ntol ±20\nstab ±30 t=-40:85\nop -40..85\nesr <100\nc0 <3\ndl <200\nage ±3 y=1\nsto -40..125",
                maker="Quarzi Tessaro",
                res="load",
            ),
        ],
        "it",
        "key=value lines, an oscillator among them",
        not_parts=["QZO-3225-12M288"],
    )


def forwarded_offer() -> None:
    m = """From: kontakt@einkauf-ludwig.example
To: entwicklung@einkauf-ludwig.example
Subject: =?utf-8?Q?WG:_Angebot_Quarz_f=C3=BCr_Steuerung?=
Date: Mon, 02 Mar 2026 08:41:00 +0100
MIME-Version: 1.0
Content-Type: text/plain; charset="iso-8859-1"
Content-Transfer-Encoding: quoted-printable

Hallo Timo,

siehe unten, das Angebot von Ahornbach. Passt das?

Gru=DF, Petra

-----Urspr=FCngliche Nachricht-----
Von: Vertrieb Ahornbach Quarze
Gesendet: Freitag, 27. Februar 2026 16:20
An: Petra Ludwig
Betreff: Angebot 26-0388

Sehr geehrte Frau Ludwig,

wir bieten Ihnen freibleibend an:

Typ: ABQ-49S-7,3728
Nennfrequenz: 7,3728 MHz, Grundton
Lastkapazit=E4t: 30 pF
Abgleichtoleranz: =B130 ppm bei 25 =B0C
Temperaturgang: =B150 ppm im Bereich -20 bis +70 =B0C
Serienwiderstand: max. 80 Ohm
C0: max. 7 pF
Belastung: max. 1 mW
Lagertemperatur: -40 bis +85 =B0C

Preis: 0,29 EUR/St. ab 1000 St., Lieferzeit 6 Wochen
"""
    keep(
        "weitergeleitet_de.eml",
        m.encode(),
        [
            part(
                "ABQ-49S-7,3728",
                "f 7.3728\ncl 30\ntol ±30\nstab ±50 t=-20:70\nop -20..70\nesr <80\nc0 <7\ndl <1000\nsto -40..85",
                maker="Ahornbach Quarze",
                mode="fund",
                res="load",
            )
        ],
        "de",
        "forwarded mail, the offer stands below the quotation mark, quoted-printable",
    )


def chat_with_stamps() -> None:
    x = """[10:02, 5/3/2026] Marta: Hola, ¿me pasas datos del cristal de 26M?
[10:05, 5/3/2026] Iker (Cuarzos Altube): Claro, CQA-2016-26M-8
[10:05, 5/3/2026] Iker (Cuarzos Altube): 26 MHz, CL 8 pF, tolerancia ±10 ppm a 25 °C
[10:06, 5/3/2026] Iker (Cuarzos Altube): estabilidad ±15 ppm de -40 a +85 °C
[10:06, 5/3/2026] Iker (Cuarzos Altube): ESR máx. 60 ohmios, C0 máx. 1,5 pF
[10:07, 5/3/2026] Iker (Cuarzos Altube): nivel de excitación 10 µW típico, máx. 100 µW
[10:09, 5/3/2026] Marta: ¿envejecimiento?
[10:10, 5/3/2026] Iker (Cuarzos Altube): ±2 ppm el primer año
[10:12, 5/3/2026] Marta: perfecto, nuestro micro pide ESR < 80 ohm
"""
    keep(
        "chat_es.txt",
        x,
        [
            part(
                "CQA-2016-26M-8",
                "f 26\ncl 8\ntol ±10\nstab ±15 t=-40:85\nop -40..85\nesr <60\nc0 <1.5\ndl -/10/100\nage ±2 y=1",
                maker="Cuarzos Altube",
                res="load",
            )
        ],
        "es",
        "chat with time stamps",
    )


def two_proposals() -> None:
    m = """发件人: 林婉 <lin@haoyuan-crystal.example>
收件人: 采购部
主题: 回复: 25MHz晶振询价
日期: 2026年4月9日 14:20

您好，

两个方案供参考：
方案A：HYX3225-25M-12，25MHz，负载电容12pF，频差±10ppm，温漂±20ppm（-40~+85℃），ESR 40Ω max，单价0.58元，交期3周
方案B：HYX2520-25M-12，25MHz，负载电容12pF，频差±15ppm，温漂±30ppm（-40~+105℃），ESR 60Ω max，单价0.49元，交期5周

两款激励功率均为最大200μW，静态电容最大3pF。

浩源晶体科技有限公司 林婉

> 2026年4月8日 10:03，采购部写道：
> 请报25MHz晶振，负载电容18pF，频差±20ppm，工作温度-40~+85℃，ESR 50Ω以下，用量10k/月
"""
    keep(
        "huifu_zh.txt",
        m,
        [
            part(
                "HYX3225-25M-12",
                "f 25\ncl 12\ntol ±10\nstab ±20 t=-40:85\nop -40..85\nesr <40\ndl <200\nc0 <3",
                maker="浩源晶体科技有限公司",
            ),
            part(
                "HYX2520-25M-12",
                "f 25\ncl 12\ntol ±15\nstab ±30 t=-40:105\nop -40..105\nesr <60\ndl <200\nc0 <3",
                maker="浩源晶体科技有限公司",
            ),
        ],
        "zh",
        "mail with two proposals, a line for both, the quoted request",
    )


def html_mail() -> None:
    msg = email.message.EmailMessage(policy=email.policy.SMTP)
    msg["From"] = "Lise Aubert <l.aubert@quartz-belval.example>"
    msg["To"] = "achats@signac.example"
    msg["Subject"] = "Offre 2603-14 quartz 40 MHz"
    msg["Date"] = "Tue, 10 Mar 2026 11:02:00 +0100"
    msg.set_content("Voir la version HTML.")
    msg.add_alternative(
        """<html><body><p>Bonjour,</p><p>Voici notre offre :</p><table border=1><tr><th>Réf.</th><th>Fréquence</th><th>Mode</th><th>CL</th><th>Tol. 25&nbsp;°C</th><th>Stab. -40/+85&nbsp;°C</th><th>R1 max</th><th>C0 max</th><th>Prix</th><th>Délai</th></tr><tr><td>QBV20-40M-8</td><td>40,000&nbsp;MHz</td><td>Fond.</td><td>8&nbsp;pF</td><td>±10&nbsp;ppm</td><td>±15&nbsp;ppm</td><td>35&nbsp;Ω</td><td>2&nbsp;pF</td><td>0,24&nbsp;€</td><td>8&nbsp;sem.</td></tr><tr><td>QBV32-40M-OT</td><td>40,000&nbsp;MHz</td><td>3e part.</td><td>série</td><td>±20&nbsp;ppm</td><td>±30&nbsp;ppm</td><td>80&nbsp;Ω</td><td>5&nbsp;pF</td><td>0,19&nbsp;€</td><td>6&nbsp;sem.</td></tr></table><p>Cordialement,<br>Lise Aubert<br>Quartz Belval SAS</p><blockquote type="cite"><p>Merci de coter un quartz 40 MHz, ESR : 50 ohms max, stockage : -55 à +125 °C.</p></blockquote></body></html>""",
        subtype="html",
    )
    keep(
        "offre_html_fr.eml",
        bytes(msg),
        [
            part(
                "QBV20-40M-8",
                "f 40\ncl 8\ntol ±10\nstab ±15 t=-40:85\nop -40..85\nesr <35\nc0 <2",
                maker="Quartz Belval SAS",
                mode="fund",
                res="load",
            ),
            part(
                "QBV32-40M-OT",
                "f 40\ntol ±20\nstab ±30 t=-40:85\nop -40..85\nesr <80\nc0 <5",
                maker="Quartz Belval SAS",
                mode="3rd",
                res="series",
            ),
        ],
        "fr",
        "mail with an HTML table, the request in a block of quotation",
    )


def numbers_in_words() -> None:
    x = """Kilbrannan Crystals Ltd
KBX-SC10 SC-cut precision resonator

Frequency:             10.000 MHz (3rd overtone, SC cut)
Tolerance:             +/-2 ppm at the turnover temperature
Top:                   -20 to +75 C
Tstg:                  -55 to +105 C
Ageing:                better than +/-0.05 ppm in the first year, +/-0.3 ppm over ten years
R1:                    80 ohms typical, 110 ohms maximum
C1:                    0.21 fF
C0:                    3.8 pF
Q:                     1.1 million typical
Drive:                 50 uW recommended, 200 uW maximum
Turnover:              +84 C +/-4 C
Holder:                HC-40/U
"""
    keep(
        "words_for_numbers_en.txt",
        x,
        [
            part(
                "KBX-SC10",
                "f 10\ntol ±2\nop -20..75\nsto -55..105\nage ±0.05 y=1\nage ±0.3 y=10\nesr -/80/110\nc1 0.21\nc0 3.8 bare\nq 1100000\ndl <200\nto 80/84/88",
                maker="Kilbrannan Crystals Ltd",
                mode="3rd",
                cut="SC",
                package="HC-40/U",
            )
        ],
        "en",
        "numbers in words, Top for the operating range",
    )


def parts_below_types() -> None:
    x = """## Quarzauswahl Funkmodul

| | **Typ A** | **Typ B** | **Typ C** |
|---|---|---|---|
| Bestellnummer | EBQ-2016-26M-7 | NRQ21-2600-8 | HWX-26-2016 |
| Hersteller | Ebersroth | Nordrand | Hohwald |
| Frequenz / MHz | 26 | 26 | 26 |
| CL / pF | 7 | 8 | 7 |
| Toleranz / ppm | ±10 | ±8 | ±10 |
| Stabilität¹ / ppm | ±12 | ±10 | ±15 |
| Temperaturbereich / °C | -30…85 | -40…85 | -40…105 |
| ESR max / Ω | 40 | 50 | 40 |
| C0 typ / pF | 0,9 | 1,1 | k. A. |
| C1 typ / fF | 2,8 | 3,1 | k. A. |
| Drive Level max / µW | 100 | 200 | 100² |
| Alterung 1. Jahr / ppm | ±1 | ±2 | ±1 |

¹ über den Temperaturbereich, bezogen auf 25 °C
² absolutes Maximum 300 µW
"""
    keep(
        "quarzauswahl_de.md",
        x,
        [
            part(
                "EBQ-2016-26M-7",
                "f 26\ncl 7\ntol ±10\nstab ±12\nop -30..85\nesr <40\nc0 0.9\nc1 2.8\ndl <100\nage ±1 y=1",
                maker="Ebersroth",
            ),
            part(
                "NRQ21-2600-8",
                "f 26\ncl 8\ntol ±8\nstab ±10\nop -40..85\nesr <50\nc0 1.1\nc1 3.1\ndl <200\nage ±2 y=1",
                maker="Nordrand",
            ),
            part(
                "HWX-26-2016",
                "f 26\ncl 7\ntol ±10\nstab ±15\nop -40..105\nesr <40\ndl <100\nage ±1 y=1",
                maker="Hohwald",
            ),
        ],
        "de",
        "parts as columns, units behind a slash, footnotes",
    )


def rows_by_single_spaces() -> None:
    x = """Brentonico Quarzi S.r.l.
BQ-3225 Quarzo SMD 3,2 x 2,5 mm
Caratteristiche elettriche
Parametro Min Tip Max Unità
Frequenza nominale 8 - 54 MHz
Tolleranza a 25 °C -15 - +15 ppm
Stabilità in temperatura -25 - +25 ppm
Temperatura di esercizio -40 - +85 °C
Capacità di carico - 10 - pF
ESR (8-12 MHz) - - 150 Ω
ESR (12-20 MHz) - - 80 Ω
ESR (20-54 MHz) - - 50 Ω
Capacità parallela - 1,2 3 pF
Livello di pilotaggio - 10 200 µW
Invecchiamento -3 - +3 ppm/anno
Temperatura di stoccaggio -55 - +125 °C
Resistenza di isolamento 500 - - MΩ
"""
    keep(
        "righe_spazi_it.txt",
        x,
        [
            part(
                "BQ-3225",
                "f 8..54\ntol ±15\nstab ±25\nop -40..85\ncl 10\nesr <150 f=8:12\nesr <80 f=12:20\nesr <50 f=20:54\nc0 -/1.2/3\ndl -/10/200\nage ±3 y=1\nsto -55..125\nir >500",
                maker="Brentonico Quarzi S.r.l.",
            )
        ],
        "it",
        "rows with single spaces, dashes for empty cells",
    )


def letter_in_sentences() -> None:
    x = """Buongiorno Ing. Ferri,

in merito alla Sua richiesta Le confermiamo il quarzo CRX-5032-20M di nostra produzione, frequenza 20 MHz in fondamentale,
capacità di carico 18 pF, tolleranza ±20 ppm a 25 °C e stabilità ±30 ppm da -40 °C a +85 °C. La resistenza serie
equivalente è al massimo 50 Ω (tipico 25 Ω), la capacità parallela al massimo 5 pF, il livello di pilotaggio 100 µW
tipico, 500 µW massimo. L'invecchiamento è di ±3 ppm il primo anno. Temperatura di magazzino da -55 a +125 °C.
Il prezzo per 1000 pezzi è di 0,27 € cad., consegna 6 settimane.

Cordiali saluti
Carla Nerini
Cristalvox S.r.l.
"""
    keep(
        "lettera_it.txt",
        x,
        [
            part(
                "CRX-5032-20M",
                "f 20\ncl 18\ntol ±20\nstab ±30 t=-40:85\nop -40..85\nesr -/25/50\nc0 <5\ndl -/100/500\nage ±3 y=1\nsto -55..125",
                maker="Cristalvox S.r.l.",
                mode="fund",
            )
        ],
        "it",
        "letter in sentences",
    )


def values_between_slashes() -> None:
    x = """物料编码,名称,参数,品牌,型号,单价
30010021,贴片电容,12pF ±5% 50V 0402,风岭,FL0402-12P,0.01
30020001,晶振,16MHz/9pF/±10ppm/-40~85℃/3225,沐风晶体,MFX3225-16M-9,0.35
30020002,晶振,26MHz/8pF/±10ppm/-30~85℃/2016,沐风晶体,MFX2016-26M-8,0.52
30020003,晶振,32.768kHz/12.5pF/±20ppm/-40~85℃/3215,沐风晶体,MFT3215-32K-12.5,0.41
30020004,有源晶振,50MHz/3.3V/±50ppm/-40~85℃/3225,沐风晶体,MFO3225-50M,1.10
30030001,电感,10uH ±20% 1A,绕能,RN4040-100,0.2
"""
    keep(
        "wuliao_gb.csv",
        x.encode("gb18030"),
        [
            part("MFX3225-16M-9", "f 16\ncl 9 flag\ntol ±10 flag\nop -40..85", maker="沐风晶体"),
            part("MFX2016-26M-8", "f 26\ncl 8 flag\ntol ±10 flag\nop -30..85", maker="沐风晶体"),
            part("MFT3215-32K-12.5", "f 0.032768\ncl 12.5 flag\ntol ±20 flag\nop -40..85", maker="沐风晶体"),
        ],
        "zh",
        "list of materials, values between slashes and without labels",
        not_parts=["MFO3225-50M", "FL0402-12P", "RN4040-100"],
    )


def bands_in_their_own_table() -> None:
    x = """# QRB-5032 — quartz CMS 5,0 × 3,2 mm

| Paramètre | Valeur |
|---|---|
| Fréquence | 8 à 50 MHz |
| Capacité de charge | 10 à 30 pF, standard 18 pF |
| Tolérance (25 °C) | ±30 ppm (±10 ppm sur demande) |
| Stabilité | ±50 ppm (-20/+70 °C), ±100 ppm (-40/+85 °C) |
| Capacité statique | 5 pF max |
| Niveau de pilotage | 100 µW typ., 500 µW max |
| Isolement | 500 MΩ min sous 100 V |

| Bande | R1 max |
|---|---|
| 8 – 10 MHz | 80 Ω |
| 10 – 16 MHz | 60 Ω |
| 16 – 50 MHz | 40 Ω |
"""
    keep(
        "deux_tables_fr.md",
        x,
        [
            part(
                "QRB-5032",
                "f 8..50\ncl 18 also=10/18/30\ntol ±30\nstab ±50 t=-20:70\nstab ±100 t=-40:85\nop -20..70\nop -40..85\nc0 <5\ndl -/100/500\nir >500\nesr <80 f=8:10\nesr <60 f=10:16\nesr <40 f=16:50",
                package="5,0 × 3,2 mm",
            )
        ],
        "fr",
        "two ranges in one cell, bands in a table of their own",
    )


if __name__ == "__main__":
    quoted_request()
    torn_into_lines()
    japanese_lines()
    keys_with_unknown_one()
    forwarded_offer()
    chat_with_stamps()
    two_proposals()
    html_mail()
    numbers_in_words()
    parts_below_types()
    rows_by_single_spaces()
    letter_in_sentences()
    values_between_slashes()
    bands_in_their_own_table()
