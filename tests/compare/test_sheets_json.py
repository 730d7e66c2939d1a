import io
import json
from pathlib import Path

import pytest

from compare import sheets_json
from compare.sheets_json import write_sheets
from extract import read_sheet
from extract.model import Note

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
