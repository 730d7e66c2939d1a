"""Corpus sheets that are workbooks and word-processor files. Run from this folder to write them anew."""

from __future__ import annotations

import io
import zipfile
from collections.abc import Sequence
from typing import Any
from xml.sax.saxutils import escape

from corpus_pages import cells
from corpus_shorthand import PADS, Json, keep, part


def _saved(document: Any) -> bytes:
    buffer = io.BytesIO()
    document.save(buffer)
    return buffer.getvalue()


def number_formats() -> None:
    from openpyxl import Workbook

    book = Workbook()
    sheet = book.active
    sheet.title = "Approved crystals"
    sheet.append(["Approved crystals, board OX-14"])
    sheet.append([])
    sheet.append(
        ["Part", "Brand", "Frequency", "Load", "Tolerance", "Stability", "T min", "T max", "ESR", "C0", "C1", "Drive"]
    )
    formats = [
        *("@", "@", '0.000" MHz"', '0.0" pF"', '"±"0" ppm"', '"±"0" ppm"', '0" °C"', '0" °C"', '0" Ω max"'),
        *('0.0" pF max"', '0.0" fF"', '"≤ "0" µW"'),
    ]
    for row in (
        ["LNS21-16M-8", "Lanternsea", 16, 8, 10, 20, -40, 85, 80, 1.5, 2.4, 100],
        ["LNS21-26M-10", "Lanternsea", 26, 10, 10, 15, -40, 105, 50, 1.5, 3.1, 100],
        ["LNS16-48M-8", "Lanternsea", 48, 8, 15, 15, -30, 85, 30, 1.2, 3.0, 200],
    ):
        sheet.append(row)
        for cell, shown in zip(sheet[sheet.max_row], formats, strict=True):
            cell.number_format = shown
    one = {"maker": "Lanternsea", "res": "load"}
    parts = [
        part("LNS21-16M-8", "f 16\ncl 8\ntol ±10\nstab ±20\nop -40..85\nesr <80\nc0 <1.5\nc1 2.4\ndl <100", **one),
        part("LNS21-26M-10", "f 26\ncl 10\ntol ±10\nstab ±15\nop -40..105\nesr <50\nc0 <1.5\nc1 3.1\ndl <100", **one),
        part("LNS16-48M-8", "f 48\ncl 8\ntol ±15\nstab ±15\nop -30..85\nesr <30\nc0 <1.2\nc1 3\ndl <200", **one),
    ]
    keep("number_formats_en.xlsx", _saved(book), parts, "en", "units, ± and max stand only in the number formats")


def merged_makers() -> None:
    from openpyxl import Workbook

    book = Workbook()
    sheet = book.active
    sheet.title = "2nd source"
    head = "Maker|Size (mm)|Freq. (MHz)|MPN|CL (pF)|ESR max. (Ω)|C0 max. (pF)|Tol. (±ppm)|Stab. (±ppm)|Temp. (°C)"
    for row in cells(head + "|AEC-Q200|Lead time (wk)|Price (USD)|Remark"):
        sheet.append(row)
    for row in (
        ["Wychbridge Quartz", "3.2 x 2.5", 25, "WQA32-25M-06", 6, 50, 3, 10, 20, "-40 ~ +85", "no", 8, 0.21, ""],
        [None, None, None, "WQA32-25M-08", 8, None, None, 10, 20, "-40 ~ +85", "no", 8, 0.21, "preferred"],
        [None, None, None, "WQA32-25M-12", 12, None, None, 20, 30, "-40 ~ +105", "yes", 12, 0.27, ""],
        [None, "2.0 x 1.6", 25, "WQA20-25M-08", 8, 80, 1.8, 10, 20, "-40 ~ +85", "no", 10, 0.26, ""],
        ["Pembrisle", "3.2 x 2.5", 25, "PB8-25.000-08", 8, 60, 2.5, 15, 30, "-20 ~ +70", "no", 4, 0.15, "cheap"],
        [None, None, 27, "PB8-27.000-12", 12, None, None, 15, 30, "-20 ~ +70", "no", 4, 0.15, ""],
    ):
        sheet.append(row)
    for area in ("A2:A5", "A6:A7", "B2:B4", "B6:B7", "C2:C4", "F2:F4", "G2:G4", "F6:F7", "G6:G7"):
        sheet.merge_cells(area)
    first = {"maker": "Wychbridge Quartz", "package": "3.2 x 2.5", "res": "load"}
    second = {"maker": "Pembrisle", "package": "3.2 x 2.5", "res": "load"}
    parts = [
        part(
            "WQA32-25M-06",
            "f 25\ncl 6\nesr <50\nc0 <3\ntol ±10\nstab ±20\nop -40..85",
            **first,
            attributes={"aec_q200": False},
        ),
        part("WQA32-25M-08", "f 25\ncl 8\nesr <50\nc0 <3\ntol ±10\nstab ±20\nop -40..85", **first),
        part(
            "WQA32-25M-12",
            "f 25\ncl 12\nesr <50\nc0 <3\ntol ±20\nstab ±30\nop -40..105",
            **first,
            attributes={"aec_q200": True},
        ),
        part(
            "WQA20-25M-08",
            "f 25\ncl 8\nesr <80\nc0 <1.8\ntol ±10\nstab ±20\nop -40..85",
            **first | {"package": "2.0 x 1.6"},
        ),
        part("PB8-25.000-08", "f 25\ncl 8\nesr <60\nc0 <2.5\ntol ±15\nstab ±30\nop -20..70", **second),
        part("PB8-27.000-12", "f 27\ncl 12\nesr <60\nc0 <2.5\ntol ±15\nstab ±30\nop -20..70", **second),
    ]
    keep("merged_makers_en.xlsx", _saved(book), parts, "en", "two makers, merged cells, price, lead time, AEC-Q200")


def spanish_form() -> None:
    from openpyxl import Workbook

    book = Workbook()
    sheet = book.active
    sheet.title = "Especificación"
    text = """Hoja de especificación|||||||
Fabricante|Osciltec Brañuelas||||||
Código de artículo|OBR-1612-40M||||||
Encapsulado|1,6 x 1,2 x 0,35 mm||||||
|||||||
N.º|Parámetro|Símbolo|Mín.|Típ.|Máx.|Unidad|Condición de ensayo
1|Frecuencia nominal|F0|40,000|||MHz|
2|Modo de vibración|-|Fundamental (AT)|||-|
3|Tolerancia de frecuencia|ΔF/F0|-10|-|10|ppm|25 ±3 °C, nivel 10 µW
4|Estabilidad térmica|TC|-20|-|20|ppm|respecto a 25 °C
5|Capacidad de carga|CL|8|||pF|
6|Resistencia serie equivalente|ESR|-|-|40|Ω|nivel 10 µW ±10 %
7|Capacidad en paralelo|C0|-|0,7|1,5|pF|1 MHz
8|Capacidad dinámica|C1|-|2,2|-|fF|
9|Nivel de excitación|DL|-|10|200|µW|
10|Temperatura de trabajo|Topr|-40|-|105|°C|
11|Temperatura de almacenamiento|Tstg|-55|-|125|°C|
12|Envejecimiento|Fa|-1|-|1|ppm|primer año, 25 °C
13|Resistencia de aislamiento|IR|500|-|-|MΩ|100 V CC ±15 V
|||||||
Ensayo|Caída libre|-|1 m, 3 veces, ΔF ±5 ppm, ΔR 10 %||||
Ensayo|Choque térmico|-|-40 ±3 °C / +85 ±3 °C, 100 ciclos||||"""
    for row in cells(text):
        sheet.append(row)
    for row in (7, 8, 11):
        sheet.merge_cells(start_row=row, end_row=row, start_column=4, end_column=6)
    parts = [
        part(
            "OBR-1612-40M",
            """
            f 40
            tol -10..10
            stab -20..20
            cl 8
            esr <40
            c0 -/0.7/1.5
            c1 2.2
            dl -/10/200
            op -40..105
            sto -55..125
            age -1..1 y=1
            ir >500""",
            maker="Osciltec Brañuelas",
            package="1,6 x 1,2 x 0,35 mm",
            mode="fund",
            cut="AT",
            res="load",
        )
    ]
    layout = "form with Min/Typ/Max, nominal values merged across them, a test-condition column, tests below"
    keep("formulario_es.xlsx", _saved(book), parts, "es", layout)


def _ods(table: Sequence[Sequence[str]], name: str) -> bytes:
    """The least OpenDocument sheet that office programs open; every cell is a text."""
    space = "urn:oasis:names:tc:opendocument:xmlns"
    lines = "".join(
        "<table:table-row>"
        + "".join(
            f'<table:table-cell office:value-type="string"><text:p>{escape(cell)}</text:p></table:table-cell>'
            if cell
            else "<table:table-cell/>"
            for cell in row
        )
        + "</table:table-row>"
        for row in table
    )
    content = (
        f'<?xml version="1.0" encoding="UTF-8"?><office:document-content xmlns:office="{space}:office:1.0" '
        f'xmlns:table="{space}:table:1.0" xmlns:text="{space}:text:1.0" office:version="1.2"><office:body>'
        f'<office:spreadsheet><table:table table:name="{name}">{lines}</table:table></office:spreadsheet>'
        "</office:body></office:document-content>"
    )
    kind = "application/vnd.oasis.opendocument.spreadsheet"
    manifest = (
        f'<?xml version="1.0" encoding="UTF-8"?><manifest:manifest xmlns:manifest="{space}:manifest:1.0" '
        f'manifest:version="1.2"><manifest:file-entry manifest:full-path="/" manifest:media-type="{kind}"/>'
        '<manifest:file-entry manifest:full-path="content.xml" manifest:media-type="text/xml"/></manifest:manifest>'
    )
    buffer = io.BytesIO()
    with zipfile.ZipFile(buffer, "w") as archive:
        archive.writestr("mimetype", kind)
        archive.writestr("content.xml", content, zipfile.ZIP_DEFLATED)
        archive.writestr("META-INF/manifest.xml", manifest, zipfile.ZIP_DEFLATED)
    return buffer.getvalue()


def german_ods() -> None:
    text = """Lagerbestand Schwingquarze||||||||||
Typ|Hersteller|Bauform|Frequenz|Bürde|Toleranz|Temperaturbereich|R1 max.|C0 max.|Bestand|VK netto
NXF3-8M000|Nixfurt Elektronik|HC-49/U-S|8,000 MHz|30 pF|±30 ppm|-10…+60 °C|80 Ω|7 pF|2.300|0,19 €
NXF3-11M0592|Nixfurt Elektronik|HC-49/U-S|11,0592 MHz|20 pF|±30 ppm|-20…+70 °C|60 Ω|7 pF|14.800|0,17 €
NXF3-14M318-S|Nixfurt Elektronik|HC-49/U-S|14,31818 MHz|Serie|±50 ppm|-20…+70 °C|50 Ω|7 pF|760|0,17 €
NXU1-32K768|Nixfurt Elektronik|Zylinder 2 x 6 mm|32,768 kHz|12,5 pF|±20 ppm|-10…+60 °C|35 kΩ|1,8 pF|51.000|0,11 €"""
    one = {"maker": "Nixfurt Elektronik"}
    parts = [
        part("NXF3-8M000", "f 8\ncl 30\ntol ±30\nop -10..60\nesr <80\nc0 <7", **one, package="HC-49/U-S", res="load"),
        part(
            "NXF3-11M0592",
            "f 11.0592\ncl 20\ntol ±30\nop -20..70\nesr <60\nc0 <7",
            **one,
            package="HC-49/U-S",
            res="load",
        ),
        part(
            "NXF3-14M318-S",
            "f 14.31818\ntol ±50\nop -20..70\nesr <50\nc0 <7",
            **one,
            package="HC-49/U-S",
            res="series",
        ),
        part("NXU1-32K768", "f 0.032768\ncl 12.5\ntol ±20\nop -10..60\nesr <35000\nc0 <1.8", **one, res="load"),
    ]
    layout = "OpenDocument list, all cells text, kHz and MHz, Ω and kΩ mixed in a column"
    keep("lagerbestand_de.ods", _ods(cells(text), "Bestand"), parts, "de", layout)


def _docx_table(document: Any, text: str) -> None:
    data = cells(text)
    table = document.add_table(rows=0, cols=len(data[0]), style="Table Grid")
    for row in data:
        for cell, words in zip(table.add_row().cells, row, strict=True):
            cell.text = words


def french_approval() -> None:
    from docx import Document

    document = Document()
    document.sections[0].header.paragraphs[0].text = "Cristaux de l'Ozerolle SA — Dossier d'homologation n° 2024-117"
    document.add_heading("Quartz CMS CO25-24M-10Q", 1)
    document.add_paragraph("Boîtier 2,5 x 2,0 x 0,6 mm, quatre plots. Qualifié AEC-Q200. MSL 1.")
    _docx_table(
        document,
        """Paramètre|Symbole|Conditions d'essai|Valeur
Fréquence nominale|f0||24,000 MHz
Coupe et mode||| AT, fondamental
Tolérance de calage|Δf/f0|25 °C ± 2 °C|± 10 × 10⁻⁶
Dérive en température|Δf/f25|de -40 à +125 °C, réf. 25 °C|± 50 × 10⁻⁶
Capacité de charge|CL||10 pF
Résistance série équivalente|R1|P = 10 µW|≤ 60 Ω
Capacité statique|C0|1 MHz, 0,5 V|≤ 2 pF
Capacité dynamique|C1||2,6 fF ± 20 %
Puissance d'excitation|P||10 µW typ., 100 µW max.
Vieillissement|Δf/f0|par an, à 25 °C|± 2 × 10⁻⁶
Température d'utilisation|||-40 °C à +125 °C
Température de stockage|||-55 °C à +125 °C
Résistance d'isolement|Ri|100 V c.c.|≥ 500 MΩ""",
    )
    document.add_paragraph("Brochage : plots 1 et 3 quartz, plots 2 et 4 reliés au capot (masse).")
    document.add_heading("Essais de fiabilité", 2)
    _docx_table(
        document,
        """Essai|Méthode|Critère
Chaleur sèche|125 °C, 1000 h|Δf ≤ ± 5 ppm, ΔR1 ≤ 15 %
Chocs thermiques|-55 °C / +125 °C, 1000 cycles|Δf ≤ ± 5 ppm
Refusion|260 °C crête, 10 s, 3 passages|Δf ≤ ± 3 ppm""",
    )
    parts = [
        part(
            "CO25-24M-10Q",
            """
            f 24
            tol ±10
            stab ±50 t=-40:125
            cl 10
            esr <60
            c0 <2
            c1 2.08/2.6/3.12
            dl -/10/100
            age ±2 y=1
            op -40..125
            sto -55..125
            ir >500""",
            maker="Cristaux de l'Ozerolle SA",
            package="2,5 x 2,0 x 0,6 mm",
            mode="fund",
            cut="AT",
            res="load",
            attributes={**PADS, "aec_q200": True},
        )
    ]
    layout = "approval file, maker in the page header, test-condition column, ×10⁻⁶, pads, AEC-Q200, reliability tests"
    keep("homologation_fr.docx", _saved(document), parts, "fr", layout)


def _three_parts() -> list[Json]:
    return [
        part(
            "TDL-77K5",
            """
            f 0.0775
            tol ±30
            cl 12.5
            esr <30000
            c0 0.9
            c1 1.1
            to 20/25/30
            k -0.04/-0.034/-0.028
            dl <1
            op -10..60""",
            maker="Thornwick Dell",
            package="2.0 x 6.0 mm",
            cut="tuning fork",
            res="load",
        ),
        part(
            "TDH-4M0",
            """
            f 4
            cl 30
            tol ±20
            stab ±30 t=-20:70
            op -20..70
            esr <120
            c0 <7
            dl -/100/1000
            age ±5 y=1""",
            maker="Thornwick Dell",
            package="HC-49/U",
            mode="fund",
            cut="AT",
            res="load",
        ),
        part(
            "TDV-100M",
            """
            f 100
            tol ±10
            stab ±15 t=-20:70
            op -20..70
            esr <60
            c0 4
            c1 0.35
            dl <500
            age ±2 y=1""",
            maker="Thornwick Dell",
            package="HC-43/U",
            mode="5th",
            cut="AT",
            res="series",
        ),
    ]


def three_headings() -> None:
    from docx import Document

    document = Document()
    document.add_heading("Thornwick Dell: special crystals", 0)
    document.add_heading("1 Low frequency", 1)
    document.add_heading("1.1 TDL-77K5 for time-signal receivers", 2)
    _docx_table(
        document,
        """Frequency|77.5 kHz
Type|Tuning fork, cylinder 2.0 x 6.0 mm
Frequency tolerance at 25 °C|±30 ppm
Load capacitance|12.5 pF
Series resistance|30 kΩ max.
Shunt capacitance|0.9 pF typ.
Motional capacitance|1.1 fF typ.
Turnover temperature|25 ±5 °C
Temperature coefficient|-0.034 ±0.006 ppm/°C²
Drive level|1 µW max.
Operating temperature|-10 to +60 °C""",
    )
    document.add_heading("2 Fundamental", 1)
    document.add_heading("2.1 TDH-4M0 in HC-49/U", 2)
    document.add_paragraph(
        "A 4.000 MHz AT-cut fundamental crystal for a load of 30 pF. Its tolerance is ±20 ppm at 25 °C, with a "
        "stability of ±30 ppm over -20 to +70 °C. ESR is 120 Ω max., C0 7 pF max. and drive level 1 mW max., 100 µW "
        "typical. Ageing ±5 ppm per year."
    )
    document.add_heading("3 Overtone", 1)
    document.add_heading("3.1 TDV-100M fifth overtone", 2)
    _docx_table(
        document,
        """Frequency|100.000 MHz
Mode|5th overtone, AT cut
Package|HC-43/U
Resonance|series
Frequency tolerance at 25 °C|±10 ppm
Frequency stability, -20 to +70 °C|±15 ppm
ESR|60 Ω max.
C0|4.0 pF typ.
C1|0.35 fF typ.
Drive level|0.5 mW max.
Ageing|±2 ppm first year""",
    )
    keep(
        "three_headings_en.docx",
        _saved(document),
        _three_parts(),
        "en",
        "numbered headings, a part under each, one in prose",
    )


if __name__ == "__main__":
    for make in (number_formats, merged_makers, spanish_form, german_ods, french_approval, three_headings):
        make()
