"""The XLSX and DOCX sheets of `sample_specs/`. Every name and value is invented."""

from __future__ import annotations

import re
import zipfile
from datetime import datetime
from pathlib import Path

from docx import Document
from docx.shared import Mm, Pt
from openpyxl import Workbook
from openpyxl.styles import Alignment, Border, Font, PatternFill, Side

MADE = datetime(2026, 9, 1)  # noqa: DTZ001 (both formats take a date without a zone)
THIN = Side(style="thin", color="999999")
BOX = Border(left=THIN, right=THIN, top=THIN, bottom=THIN)
GREEN = PatternFill("solid", fgColor="E2EBD9")

LIST_GROUPS = [("Part", 3), ("Frequency", 5), ("Electrical", 4), ("Temperature (°C)", 2), ("Purchasing", 2)]
LIST_HEAD = """Part number|Maker|Package|Frequency (MHz)|Mode|Load (pF)|Tol. (±ppm)|Stability (±ppm)
ESR max (Ω)|C0 max (pF)|Drive max (µW)|Ageing 1st year (±ppm)|Min|Max|Unit price (EUR)|Stock""".replace("\n", "|")
LIST_ROWS = """
MLQ16-26M000-08A|Medlarwood Piezo|1.6 x 1.2|26|Fundamental|8|10|15|150|1|100|2|-40|85|0.31|4200
MLQ20-26M000-08C|Medlarwood Piezo|2.0 x 1.6|26||8|10|15|60|1.5|100|2|-40|85|0.22|15000
MLQ20-26M000-08E|Medlarwood Piezo|2.0 x 1.6|26|Fundamental|8|7|12|60|1.5|100|2|-40|85|0.29|6000
RTQ32-26M000-16B|Russetfield Timing|3.2 x 2.5|26|Fundamental|16|10|15|40|3|200|2|-40|85|0.18|11000
RTQ25-26M000-08D|Russetfield Timing|2.5 x 2.0|26|Fundamental|8|30|30|50|2|200|3|-40|85|0.15|40000
RTQ25-24M000-08A|Russetfield Timing|2.5 x 2.0|24|Fundamental|8|10|15|50|2|200|3|-40|85|0.19|900
RTQ20-32M000-08A|Russetfield Timing|2.0 x 1.6|32|Fundamental|8|10|15|50|1.5|100|2|-40|85|0.24|27000
RTQ49-26M000-3OT|Russetfield Timing|HC-49/US|26|3rd overtone|8|10|20|80|5|500|3|-40|85|0.35|300
PPD25-26M000-08|Pippinstow Devices|2.5 x 2.0|26|Fundamental|8|10|15||2|200|2|-40|85|0.17|22000
PPD25-26M000-09|Pippinstow Devices|2.5 x 2.0|26|Fundamental|9|10|15|50|2|200|2|-40|85|0.17|7000
PPD16-38M400-08|Pippinstow Devices|1.6 x 1.2|38.4|Fundamental|8|10|15|60|1|100|2|-30|85|0.33|5000
PPD32-12M000-18|Pippinstow Devices|3.2 x 2.5|12|Fundamental|18|20|30|100|3|200|3|-40|85|0.12|61000
"""
LIST_WIDTHS = (21, 19, 10, 15, 13, 10, 11, 16, 12, 12, 14, 22, 7, 7, 16, 9)

FORM_ROWS = [
    ("Codice articolo", "ODF26-32K768-125"),
    ("Produttore", "Ondalba Quarzi"),
    ("Contenitore", "cilindrico 2 × 6 mm"),
    ("Tipo di taglio", "diapason"),
    ("Frequenza nominale", "32,768 kHz"),
    ("Tolleranza di frequenza (a 25 °C)", "±20 ppm"),
    ("Capacità di carico", "12,5 pF"),
    ("Resistenza serie equivalente", "35 kΩ max"),
    ("Capacità statica C0", "1,6 pF tip."),
    ("Livello di pilotaggio", "1,0 µW max"),
    ("Temperatura di inversione", "25 °C ±5 °C"),
    ("Coefficiente parabolico", "-0,034 ppm/°C² ±0,004 ppm/°C²"),
    ("Temperatura di esercizio", "-10 °C … +60 °C"),
    ("Temperatura di stoccaggio", "-30 °C … +70 °C"),
    ("Invecchiamento (primo anno)", "±3 ppm"),
]

APPROVAL_ROWS = [
    ["Kennwert", "Symbol", "Min.", "Typ.", "Max.", "Einheit", "Bedingung"],
    ["Nennfrequenz", "f0", "", "26,000", "", "MHz", "Grundton, AT-Schnitt"],
    ["Abgleichtoleranz", "Δf/f", "-10", "", "+10", "ppm", "25 °C ±2 °C"],
    ["Frequenzstabilität", "Δf/f(T)", "-15", "", "+15", "ppm", "-40 °C bis +85 °C"],
    ["Arbeitstemperatur", "", "-40", "", "+85", "°C", ""],
    ["Lagertemperatur", "", "-55", "", "+125", "°C", ""],
    ["Lastkapazität", "CL", "", "18", "", "pF", ""],
    ["Resonanzwiderstand", "R1", "", "", "50", "Ω", ""],
    ["Statische Kapazität", "C0", "", "1,8", "2,5", "pF", ""],
    ["Dynamische Kapazität", "C1", "", "4,6", "", "fF", ""],
    ["Belastung", "P", "", "10", "200", "µW", ""],
    ["Alterung", "", "-2", "", "+2", "ppm", "erstes Jahr"],
    ["Isolationswiderstand", "Ri", "500", "", "", "MΩ", "100 V DC"],
]


def _fix_dates(path: Path) -> None:
    """Store every member of the archive with one date, so that a rebuild gives the same bytes."""
    with zipfile.ZipFile(path) as archive:
        members = [(name, archive.read(name)) for name in archive.namelist()]
    with zipfile.ZipFile(path, "w", zipfile.ZIP_DEFLATED) as archive:
        for name, data in members:
            entry = zipfile.ZipInfo(name, date_time=MADE.timetuple()[:6])
            entry.compress_type = zipfile.ZIP_DEFLATED
            archive.writestr(entry, data)


def _save_book(book: Workbook, path: Path) -> None:
    book.properties.created = book.properties.modified = MADE
    book.save(path)
    with zipfile.ZipFile(path) as archive:
        members = {name: archive.read(name) for name in archive.namelist()}
    # openpyxl stamps the moment of saving over the date that was set
    core = members["docProps/core.xml"].decode()
    members["docProps/core.xml"] = re.sub(
        r"(<dcterms:modified[^>]*>)[^<]*", rf"\g<1>{MADE.isoformat()}Z", core
    ).encode()
    with zipfile.ZipFile(path, "w") as archive:
        for name, data in members.items():
            archive.writestr(name, data)
    _fix_dates(path)


def _number_or_text(text: str) -> float | str | None:
    try:
        return float(text)
    except ValueError:
        return text or None


def purchasing_list(path: Path) -> None:
    book = Workbook()
    sheet = book.active
    assert sheet is not None
    sheet.title = "Crystals"
    sheet["A1"] = "Orchard node: crystals offered, week 37/2026"
    sheet["A1"].font = Font(bold=True, size=14)
    sheet["A2"] = "Buyer: J. Halvers. Prices at 5,000 pieces, without tax."
    column = 1
    for name, span in LIST_GROUPS:
        sheet.cell(4, column, name)
        sheet.merge_cells(start_row=4, start_column=column, end_row=4, end_column=column + span - 1)
        column += span
    rows = [LIST_HEAD, *LIST_ROWS.split("\n")[1:-1]]
    for row, line in enumerate(rows, start=5):
        for number, text in enumerate(line.split("|"), start=1):
            sheet.cell(row, number, _number_or_text(text))
    for row in sheet.iter_rows(min_row=4, max_row=4 + len(rows)):
        for cell in row:
            cell.border = BOX
            if cell.row <= 5:
                cell.font, cell.fill = Font(bold=True), GREEN
                cell.alignment = Alignment(horizontal="center", wrap_text=True)
    for number, width in enumerate(LIST_WIDTHS):
        sheet.column_dimensions[chr(ord("A") + number)].width = width
    sheet.freeze_panes = "B6"
    _save_book(book, path)


def italian_form(path: Path) -> None:
    book = Workbook()
    sheet = book.active
    assert sheet is not None
    sheet.title = "Scheda"
    sheet["B2"] = "Scheda specifica quarzo per orologio"
    sheet["B2"].font = Font(bold=True, size=14)
    sheet.merge_cells("B2:C2")
    for row, (label, value) in enumerate(FORM_ROWS, start=4):
        for column, text in ((2, label), (3, value)):
            cell = sheet.cell(row, column, text)
            cell.border = BOX
        sheet.cell(row, 2).fill = GREEN
    sheet["B21"] = "Saldatura manuale: 350 °C per 3 s al massimo. Firma: C. Bellarosa"
    sheet.column_dimensions["A"].width = 3
    sheet.column_dimensions["B"].width = 36
    sheet.column_dimensions["C"].width = 34
    _save_book(book, path)


def german_approval(path: Path) -> None:
    document = Document()
    document.core_properties.created = document.core_properties.modified = MADE
    document.core_properties.author = "Kirschgrund Frequenztechnik"
    document.styles["Normal"].font.name = "Liberation Sans"
    document.styles["Normal"].font.size = Pt(10)
    document.sections[0].left_margin = document.sections[0].right_margin = Mm(18)
    document.add_heading("Freigabeblatt Schwingquarz", level=1)
    document.add_paragraph("Hersteller: Kirschgrund Frequenztechnik GmbH")
    document.add_paragraph("Artikelnummer: KGF25-26M000-18B")
    document.add_paragraph("Bauform: SMD-Keramikgehäuse 2,5 x 2,0 mm, Anschlüsse 1 und 3 Quarz, 2 und 4 Masse")
    table = document.add_table(rows=0, cols=len(APPROVAL_ROWS[0]))
    table.style = "Table Grid"
    for values in APPROVAL_ROWS:
        for cell, value in zip(table.add_row().cells, values, strict=True):
            cell.text = value
    document.add_paragraph()
    document.add_paragraph("Lötprofil: Spitze 260 °C, 10 s. Feuchteempfindlichkeit: MSL 1.")
    document.add_paragraph("Freigegeben am 1. September 2026, R. Ostermoor (Entwicklung)")
    document.save(str(path))
    _fix_dates(path)


MAKERS = {
    "orchard_node_purchasing_list.xlsx": purchasing_list,
    "ondalba_odf26_32khz_it.xlsx": italian_form,
    "kirschgrund_kgf25_freigabe_de.docx": german_approval,
}
