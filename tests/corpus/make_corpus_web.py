"""Corpus sheets that are web pages. Run from this folder to write them anew."""

from __future__ import annotations

from corpus_pages import rows
from corpus_shorthand import keep, part


def definition_list() -> None:
    text = """<!doctype html><html lang="en"><meta charset="utf-8"><title>FLX-6 low-frequency crystals</title>
<nav><a href="/">Home</a> <a href="/xo">Oscillators</a> <a href="/mems">Clock modules</a></nav>
<h1>Kestoway FLX-6 &mdash; tuning-fork crystals 32 kHz to 100 kHz</h1>
<p>The FLX-6 is a thru-hole cylinder of 2.0&nbsp;&times;&nbsp;6.0&nbsp;mm for clocks and remote controls.</p>
<dl>
<dt>Frequency range</dt><dd>32 kHz to 100 kHz</dd>
<dt>Calibration tolerance @ 25 &deg;C</dt><dd>&plusmn;30 ppm max.; others on request</dd>
<dt>Load capacitance</dt><dd>8 pF</dd><dd>12.5 pF</dd>
<dt>Motional resistance R<sub>1</sub></dt><dd>65 k&#8486; to 25 k&#8486;</dd>
<dt>Motional capacitance C<sub>1</sub></dt><dd>0.0028 pF typ.</dd>
<dt>Static capacitance C<sub>0</sub></dt><dd>1.4 pF typ.</dd>
<dt>Capacitance ratio C<sub>0</sub>/C<sub>1</sub></dt><dd>500 typ.</dd>
<dt>Quality factor</dt><dd>70 000 typ.</dd>
<dt>Turnover temperature</dt><dd>+20 &deg;C ~ +30 &deg;C</dd>
<dt>Parabolic coefficient</dt><dd>&minus;0.042 ppm/&deg;C&sup2; max.</dd>
<dt>Drive level</dt><dd>1.0 &micro;W max. (0.1 typ.)</dd>
<dt>Ageing</dt><dd>&lt; &plusmn;3 ppm per year @ 25 &deg;C</dd>
<dt>Operating temperature range</dt><dd>&minus;10 to +60 &deg;C</dd>
<dt>Operable temperature range</dt><dd>&minus;40 to +85 &deg;C</dd>
<dt>Storage temperature range</dt><dd>&minus;50 to +125 &deg;C</dd>
<dt>Insulation resistance</dt><dd>500 M&#8486; with 100 Vdc</dd>
</dl>
<h2>Related</h2><p><a>FLX-8</a> 3.0 &times; 8.0 mm, 12.5 pF, 35 k&#8486; max.</p></html>
"""
    parts = [
        part(
            "FLX-6",
            """
            f 0.032..0.1
            tol ±30
            cl {8,12.5}
            esr 25000..65000 flag also=<65000 also=65000
            c1 2.8
            c0 1.4
            ratio 500
            q 70000
            to 20..30
            k -0.042/-/-
            dl -/0.1/1
            age ±3 y=1
            op -10..60
            sto -50..125
            ir 500""",
            maker="Kestoway",
            package="2.0 x 6.0 mm",
            cut="tuning fork",
            res="load",
        )
    ]
    layout = "definition list; R1 running backwards over the frequency range; a second, operable temperature range"
    keep("definition_list_en.html", text, parts, "en", layout, not_parts=["FLX-8"])


def nested_tables() -> None:
    bands = rows("da 8 a 11,999 MHz|80 Ω\nda 12 a 19,999 MHz|60 Ω\nda 20 a 50 MHz|40 Ω")
    inner = rows("di esercizio|da -40 a +85 °C\ndi magazzino|da -55 a +125 °C")
    text = f"""<!doctype html><html lang="it"><meta charset="utf-8"><title>CMF-53</title>
<table width="100%"><tr><td><img src="logo.png" alt=""></td><td><h1>Cristalli Montefosco CMF-53</h1>
Quarzo SMD 5,0 x 3,2 mm, taglio AT, fondamentale</td></tr>
<tr><td colspan="2"><table border="1"><tr><th colspan="2">Caratteristiche elettriche</th></tr>
<tr><td>Campo di frequenza</td><td>8,000 ... 50,000 MHz</td></tr>
<tr><td>Tolleranza di taratura a 25 °C</td><td>±10, ±20, ±30 ppm</td></tr>
<tr><td>Stabilità in temperatura</td><td>±30 ppm</td></tr>
<tr><td>Temperatura</td><td><table>{inner}</table></td></tr>
<tr><td>Capacità di carico</td><td>da 8 a 32 pF</td></tr>
<tr><td>Capacità statica C0</td><td>max. 5 pF</td></tr>
<tr><td>Resistenza serie max.</td><td><table>{bands}</table></td></tr>
<tr><td>Livello di pilotaggio</td><td>100 µW max., 10 µW consigliati</td></tr>
<tr><td>Invecchiamento</td><td>±3 ppm/anno</td></tr>
<tr><td>Resistenza di isolamento</td><td>min. 500 MΩ (100 Vcc)</td></tr></table></td></tr>
<tr><td colspan="2"><small>Saldatura: 260 °C per 10 s al massimo. Prezzi su richiesta.</small></td></tr></table></html>
"""
    parts = [
        part(
            "CMF-53",
            """
            f 8..50
            tol {10,20,30}
            stab ±30
            op -40..85
            sto -55..125
            cl 8..32
            c0 <5
            esr <80 f=8:11.999
            esr <60 f=12:19.999
            esr <40 f=20:50
            dl <100
            age ±3 y=1
            ir >500""",
            maker="Cristalli Montefosco",
            package="5,0 x 3,2 mm",
            mode="fund",
            cut="AT",
            res="load",
        )
    ]
    keep("nested_tables_it.html", text, parts, "it", "tables within table cells, a recommended drive beside the limit")


def shop_pairs() -> None:
    pairs = rows(
        """Product Range|SKW3 Series
Frequency Nom|12MHz
Crystal Frequency|12MHz
Crystal Case Style|SMD, 3.2mm x 2.5mm
Frequency Tolerance + / -|30ppm
Frequency Stability + / -|50ppm
Load Capacitance|18pF
Operating Temperature Max|85°C
Operating Temperature Min|-40°C
ESR|80ohm
Crystal Mounting|Surface Mount
Automotive Qualification|-
MSL|MSL 1 - Unlimited
SVHC|No SVHC (19.12.2011)"""
    )
    prices = rows("Quantity|Price\n5+|£0.412\n50+|£0.335\n500+|£0.268")
    text = f"""<!doctype html><html lang="en"><meta charset="utf-8"><title>SKW3-12M000-18</title>
<h1>SKW3-12M000-18 - Crystal, 12 MHz, SMD</h1>
<table><tr><td>Manufacturer</td><td>Skerrowmoor</td></tr><tr><td>Manufacturer Part No</td><td>SKW3-12M000-18</td></tr>
<tr><td>Order Code</td><td>28.71164</td></tr></table>
<p>In stock: 4,120. Lead time 14 weeks.</p><table>{prices}</table>
<h2>Product Information</h2><table><tr><th>Attribute</th><th>Value</th></tr>
{pairs}</table><p>Similar: SKW3-16M000-18, 16 MHz, 18 pF, 60 ohm</p></html>
"""
    parts = [
        part(
            "SKW3-12M000-18",
            """
            f 12
            tol ±30
            stab ±50
            cl 18
            op -40..85
            esr 80 bare""",
            maker="Skerrowmoor",
            package="3.2mm x 2.5mm",
            res="load",
        )
    ]
    layout = "shop attribute pairs without ±, temperature split into Max and Min rows, Max first"
    keep("shop_pairs_max_first_en.html", text, parts, "en", layout, not_parts=["SKW3-16M000-18"])


def german_columns() -> None:
    table = rows(
        """Typ|EBQ-7050|EBQ-5032|EBQ-3225
Bestellnummer|EBQ70-25M-20|EBQ50-25M-20|EBQ32-25M-12
Gehäuse|7,0 × 5,0 mm|5,0 × 3,2 mm|3,2 × 2,5 mm
Nennfrequenz|{c3}25,000 MHz
Schwingungsart|{c3}AT-Schnitt, Grundwelle
Lastkapazität|{c2}20 pF|12 pF
Abgleichtoleranz bei 25 °C|{c2}± 30 ppm|± 10 ppm
Frequenzgang über Temperatur|{c3}± 30 ppm
Betriebstemperatur|-20 … +70 °C|{c2}-40 … +85 °C
Serienwiderstand|40 Ω max.|{c2}50 Ω max.
Statische Kapazität C0|7,0 pF max.|5,0 pF max.|3,0 pF max.
Dynamische Kapazität C1|0,0065 pF|0,0052 pF|0,0038 pF
Belastung|{c3}10 µW typ., 100 µW max.
Alterung|{c3}± 3 ppm im 1. Jahr
Status|abgekündigt|lieferbar|lieferbar
Preis ab 1000|0,29 €|0,24 €|0,19 €"""
    )
    text = f"""<!doctype html><html lang="de"><meta charset="utf-8"><title>Vergleich</title>
<h1>Ebersquelle Quarze: 25 MHz im Vergleich</h1><table border="1">{table}</table>
<p>Lötprofil nach Norm, Spitze 260 °C. Irrtum vorbehalten.</p></html>
"""
    shared = "f 25\nstab ±30\ndl -/10/100\nage ±3 y=1\n"
    one = {"maker": "Ebersquelle Quarze", "mode": "fund", "cut": "AT", "res": "load"}
    parts = [
        part(
            "EBQ70-25M-20",
            shared + "cl 20\ntol ±30\nop -20..70\nesr <40\nc0 <7\nc1 6.5",
            **one,
            part_number_also=["EBQ-7050"],
            package="7,0 × 5,0 mm",
        ),
        part(
            "EBQ50-25M-20",
            shared + "cl 20\ntol ±30\nop -40..85\nesr <50\nc0 <5\nc1 5.2",
            **one,
            part_number_also=["EBQ-5032"],
            package="5,0 × 3,2 mm",
        ),
        part(
            "EBQ32-25M-12",
            shared + "cl 12\ntol ±10\nop -40..85\nesr <50\nc0 <3\nc1 3.8",
            **one,
            part_number_also=["EBQ-3225"],
            package="3,2 × 2,5 mm",
        ),
    ]
    layout = "parts as columns, a type row above the order numbers, cells shared by two or three, C1 in pF"
    keep("parts_as_columns_de.html", text, parts, "de", layout)


if __name__ == "__main__":
    for make in (definition_list, nested_tables, shop_pairs, german_columns):
        make()
