import csv
import io
import json
from pathlib import Path

import pytest
from openpyxl import Workbook

from compare import sheets_json
from compare.sheets_json import write_sheets
from extract import read_sheet
from extract.model import Note
from extract.partlist import PartList

SAMPLES = Path(__file__).parents[2] / "sample_specs"


def written(sheets, notes=()):
    stream = io.StringIO()
    write_sheets(sheets, notes, stream)
    return stream.getvalue()


@pytest.mark.parametrize("name", ["kirschgrund_lagerliste_de.csv", "russetfield_shop_page.html"])
@pytest.mark.parametrize("most", [100, 0])
def test_the_document_is_what_the_validated_models_dump_however_it_is_laid_out(monkeypatch, name, most):
    monkeypatch.setattr(sheets_json, "MOST_INDENTED", most)
    sheet = read_sheet((SAMPLES / name).read_bytes(), name)
    note = Note(level="info", message="said")
    assert json.loads(written([sheet, sheet], [note])) == {
        "schema": "quartzfolio/extract/1",
        "sheets": [sheet.model_dump(mode="json")] * 2,
        "notes": [note.model_dump(mode="json")],
    }


def test_keys_stand_in_the_order_of_the_contract():
    sheet = read_sheet(b"Crystal QV-20\nFrequency: 26 MHz\nESR: 60 ohm\nLoad capacitance: 8 pF\n", "a.txt")
    reading = json.loads(written([sheet]))["sheets"][0]["parts"][0]["readings"][0]
    assert list(reading) == ["field", "min", "typ", "max", "options", "when", "raw", "where", "status", "check"]


def test_a_sheet_of_many_parts_takes_a_line_for_each():
    rows = "".join(f"QV{n:04d},26,{n % 20 + 20}\n" for n in range(150))
    sheet = read_sheet(f"Part number,Frequency (MHz),ESR max (ohm)\n{rows}".encode(), "list.csv")
    assert len(sheet.parts) == 150
    text = written([sheet])
    assert sum(line.startswith('{"part_number"') for line in text.splitlines()) == 150


def test_no_sheet_at_all_is_still_one_document():
    assert json.loads(written([])) == {"schema": "quartzfolio/extract/1", "sheets": [], "notes": []}


HEAD = "Part number,Frequency (MHz),Load capacitance (pF),ESR max (ohm),C0 max (pF),C1 (fF),Description\n"


def made_list(rows):
    lines = (f"QV{n:04d},26,{6 + n % 5},{n % 20 + 20},{n % 7}.5,{n % 9 + 1}.{n % 10},reel {n}\n" for n in range(rows))
    return HEAD + "".join(lines)


def as_xlsx(text):
    book = Workbook()
    for line in csv.reader(io.StringIO(text)):
        book.active.append(line)
    stream = io.BytesIO()
    book.save(stream)
    return stream.getvalue()


@pytest.mark.parametrize("kind", ["csv", "xlsx", "csv with cells of two lines"])
def test_a_long_list_is_written_from_templates_as_part_by_part(kind):
    text = made_list(300)
    if kind.endswith("lines"):
        text = text.replace("reel 7\n", '"reel\n7"\n').replace("reel 8\n", '"a ""reel"" ß\n"\n')
    data = as_xlsx(text) if kind == "xlsx" else text.encode()
    sheet = read_sheet(data, f"list.{kind[:4].strip()}")
    assert isinstance(sheet.parts, PartList)
    whole = sheet.model_copy(update={"parts": tuple(sheet.parts)})
    assert written([sheet]) == written([whole])


def test_the_few_parts_of_a_long_list_are_laid_out_for_eyes():
    rows = "".join(f"QV{n:04d},{'26' if n < 3 else ''},{'20' if n < 3 else ''}\n" for n in range(300))
    sheet = read_sheet(f"Part number,Frequency (MHz),ESR max (ohm)\n{rows}".encode(), "list.csv")
    assert len(sheet.parts) == 3
    assert '\n   "part_number": "QV0000"' in written([sheet])
