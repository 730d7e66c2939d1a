"""Names as a person gives them: work files among them stand for their corrected sheets."""

from pathlib import Path

import hand_made

from compare.folio import folio_bytes
from compare.intake import read_sheets, read_single
from compare.work import OpenSheet, Work

VERSION_1 = Path(__file__).parent / "data" / "work_version_1.folio"


def test_a_work_file_stands_for_its_corrected_sheets():
    (sheet,) = read_sheets([str(VERSION_1)]).sheets
    assert sheet.file == "offers/pippin_offer.txt"
    (esr,) = (reading for reading in sheet.parts[0].readings if reading.field == "esr_ohm")
    assert (esr.max, esr.status) == (42.0, "entered")


def test_one_part_of_a_work_is_that_part_alone(tmp_path):
    other = hand_made.SHEET.model_copy(update={"parts": (hand_made.PART.model_copy(update={"part_number": "QX-1"}),)})
    work = Work(sheets=(OpenSheet(hand_made.SHEET), OpenSheet(other)))
    (tmp_path / "two.folio").write_bytes(folio_bytes(work, "2031-04-02T14:32+02:00"))
    sheets = read_sheets([f"{tmp_path / 'two.folio'}#QX-1"]).sheets
    assert [[part.part_number for part in sheet.parts] for sheet in sheets] == [["QX-1"]]
    (none,) = read_sheets([f"{tmp_path / 'two.folio'}#ZZ"]).sheets
    assert none.notes[-1].message.startswith("no part ZZ in this sheet")


def test_a_damaged_or_empty_work_file_is_a_note_and_the_others_are_read(tmp_path):
    (tmp_path / "bad.folio").write_bytes(b"PK")
    (tmp_path / "empty.folio").write_bytes(folio_bytes(Work(), "2031-04-02T14:32+02:00"))
    names = [str(tmp_path / name) for name in ("bad.folio", "empty.folio", "gone.folio")]
    bad, empty, gone, good = read_sheets([*names, str(VERSION_1)]).sheets
    assert bad.notes[0].message.startswith("no work file, or a damaged one")
    assert empty.notes[0].message == "this work holds no sheets"
    assert gone.notes[0].message == "no such file; check the name"
    assert len(good.parts) == 1


def test_a_single_name_is_read_by_what_it_is_given(tmp_path):
    (tmp_path / "offer.txt").write_bytes(hand_made.MAIL.encode())
    asked = []
    assert read_single(str(tmp_path / "offer.txt"), lambda data, name: asked.append((data, name))) is None
    assert asked == [(hand_made.MAIL.encode(), str(tmp_path / "offer.txt"))]
