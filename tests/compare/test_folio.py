"""The work file: written, read back, brought up from an earlier version, refused where it is damaged."""

import hashlib
import io
import json
import zipfile
from dataclasses import replace
from pathlib import Path

import hand_made
import pytest

from compare import folio
from compare.corrections import Correction
from compare.desk import desk_from_bench
from compare.folio import FolioError, folio_bytes, read_folio
from compare.folio_versions import STEPS, VERSION
from compare.work import Circuit, OpenSheet, Work
from extract import read_sheet
from extract.partlist import PartList

MAIL = hand_made.MAIL.encode()
OPEN = OpenSheet(read_sheet(MAIL, "offer.txt"), MAIL)
VERSION_1 = Path(__file__).parent / "data" / "work_version_1.folio"
WORK = Work(
    name="Frost node, rev C",
    sheets=(OPEN, OpenSheet(hand_made.SHEET)),
    corrections=(
        Correction(
            sheet=OPEN.key,
            part=0,
            reading=0,
            what="value",
            new=OPEN.sheet.parts[0].readings[0].model_copy(update={"typ": 26.5, "status": "entered"}),
            was=OPEN.sheet.parts[0].readings[0],
            typed="26,5",
            by="M. Quill",
            at="2031-04-02T14:32+02:00",
            why="Ω µ − 水晶",
        ),
    ),
    circuits=(
        Circuit("c1", "26 MHz radio", desk_from_bench(hand_made.BENCH_TEXT, "bench.toml")),
        Circuit("c2", "watch"),
    ),
    at="c2",
    slots={"supply": {"merrowby|mrb25-260-08h": {"price": 0.31}}, "c1:decisions": {"x": {"status": "tested"}}},
)
SAVED = "2031-04-02T14:33+02:00"


def members(data):
    with zipfile.ZipFile(io.BytesIO(data)) as archive:
        return {name: archive.read(name) for name in archive.namelist()}


def packed(parts):
    held = io.BytesIO()
    with zipfile.ZipFile(held, "w") as archive:
        for name, data in parts.items():
            archive.writestr(name, data)
    return held.getvalue()


def changed(**parts):
    """A work file with members exchanged (None: taken out); __ stands for the point."""
    every = members(folio_bytes(WORK, SAVED))
    for key, data in parts.items():
        name = key.replace("__", ".")
        if data is None:
            del every[name]
        else:
            every[name] = data if isinstance(data, bytes) else json.dumps(data).encode()
    return packed(every)


def test_a_work_comes_back_as_it_was_saved():
    back = read_folio(folio_bytes(WORK, SAVED), "work.folio")
    assert back.work == WORK
    assert back.work.corrected == WORK.corrected
    assert back.work.circuits[0].desk.bench == WORK.circuits[0].desk.bench
    assert back.said == ()


def test_without_the_sheets_their_readings_are_there_and_their_bytes_are_not():
    data = folio_bytes(WORK, SAVED)
    assert not [name for name in members(data) if name.startswith("files/")]
    assert [one.data for one in read_folio(data, "work.folio").work.sheets] == [None, None]


def test_with_the_sheets_their_bytes_come_back():
    data = folio_bytes(WORK, SAVED, files={OPEN.sheet.sha256: MAIL})
    assert read_folio(data, "work.folio").work.sheets[0].data == MAIL


def test_the_file_says_what_it_is_and_carries_the_bench_for_the_command_line():
    inside = members(folio_bytes(WORK, SAVED))
    told = json.loads(inside["folio.json"])
    assert told["format"] == "quartzfolio/folio"
    assert (told["version"], told["saved"], told["schema"]) == (VERSION, SAVED, "quartzfolio/extract/1")
    assert {"program", "formulas"} <= set(told)
    assert b"frequency_mhz = 26.0" in inside["bench/c1.toml"]
    document = json.loads(inside[f"sheets/{OPEN.key}.json"])
    assert (document["schema"], document["sheets"][0]["file"]) == ("quartzfolio/extract/1", "offer.txt")


def test_the_same_work_gives_the_same_bytes():
    assert folio_bytes(WORK, SAVED) == folio_bytes(WORK, SAVED)


def test_a_file_of_version_1_is_read_with_its_circuit_correction_and_decision():
    back = read_folio(VERSION_1.read_bytes(), VERSION_1.name)
    work = back.work
    assert (work.name, [one.ident for one in work.circuits], work.at) == ("Frost node, rev B", ["c1"], "c1")
    assert work.desk.bench.requirement.frequency_mhz == 26.0
    assert work.slot("decisions") == {"|abx-26": {"status": "proposed"}}
    assert work.slot("supply") == {"|abx-26": {"price": "0.31 EUR"}}
    (esr,) = (reading for reading in work.corrected[0].parts[0].readings if reading.field == "esr_ohm")
    assert (esr.max, esr.status, work.corrections[0].was.max) == (42.0, "entered", 50.0)


def test_there_is_a_step_from_every_version_to_the_next():
    assert sorted(STEPS) == list(range(1, VERSION))


def test_numbers_of_other_formulas_are_announced(monkeypatch):
    data = folio_bytes(WORK, SAVED)
    monkeypatch.setattr(folio, "FORMULAS", "quartzfolio/formulas/2")
    assert read_folio(data, "work.folio").said == (
        "work.folio was saved with quartzfolio/formulas/1; numbers here are worked out with quartzfolio/formulas/2.",
    )


def test_corrections_without_their_sheet_are_kept_and_announced():
    lone = replace(WORK, sheets=WORK.sheets[1:])
    back = read_folio(folio_bytes(lone, SAVED), "work.folio")
    assert back.work.corrections == WORK.corrections
    assert back.said == ("work.folio holds corrections of 1 sheet(s) that it does not hold; they are kept, unused.",)


HEAD = {"format": "quartzfolio/folio", "version": VERSION}


@pytest.mark.parametrize(
    ("data", "sentence"),
    [
        (b"", "no work file, or a damaged one"),
        (b"PK\x03\x04 cut short", "no work file, or a damaged one"),
        (folio_bytes(WORK, SAVED)[:-300], "no work file, or a damaged one"),
        (packed({"a.txt": b"x"}), "no work file of quartzfolio, or a damaged one: it lacks folio.json"),
        (changed(folio__json=b"{"), "damaged, folio.json cannot be read"),
        (changed(folio__json={"format": "other"}), "folio.json does not say “quartzfolio/folio”"),
        (changed(folio__json=[]), "folio.json does not say “quartzfolio/folio”"),
        (
            changed(folio__json={**HEAD, "version": 99}),
            f"a work file of version 99, and this program reads 1 to {VERSION}",
        ),
        (changed(folio__json={**HEAD, "version": "2"}), "a work file of version '2'"),
        (changed(work__json=None), "it lacks work.json"),
        (changed(work__json=b"[" * 100_000), "damaged, work.json cannot be read"),
        (changed(work__json=[]), "work.json does not hold what it should (work.json is no table)"),
        (changed(work__json={}), "work.json does not hold what it should"),
        (changed(**{f"sheets/{OPEN.key}__json": None}), "the readings of offer.txt"),
        (changed(**{f"sheets/{OPEN.key}__json": {"file": 1}}), "does not hold readings"),
        (
            changed(**{f"files/{OPEN.sheet.sha256}": b"another"}),
            "the sheet offer.txt in it is not the one that was read",
        ),
    ],
)
def test_a_damaged_file_is_refused_with_a_sentence(data, sentence):
    with pytest.raises(FolioError) as refused:
        read_folio(data, "work.folio")
    assert str(refused.value).startswith("work.folio: ")
    assert sentence in str(refused.value)


@pytest.mark.parametrize("keys", ["name", "at", "circuits", "corrections", "slots", "sheets"])
@pytest.mark.parametrize("value", [None, 7, "x", [1], {"a": 1}])
def test_a_value_of_the_wrong_kind_is_refused_or_harmless(keys, value):
    told = json.loads(members(folio_bytes(WORK, SAVED))["work.json"])
    try:
        back = read_folio(changed(work__json={**told, keys: value}), "work.folio")
    except FolioError:
        return
    assert back.work.circuit.desk is not None
    assert back.work.slot("supply") is not None


def test_a_file_that_unpacks_without_end_is_refused(monkeypatch):
    monkeypatch.setattr(folio, "MOST_BYTES", 1000)
    with pytest.raises(FolioError, match="unpacks to more than"):
        read_folio(packed({"folio.json": b" " * 2000}), "work.folio")


def test_names_that_lead_out_of_a_folder_are_never_written(tmp_path, monkeypatch):
    monkeypatch.chdir(tmp_path)
    every = members(folio_bytes(WORK, SAVED)) | {"../out.txt": b"x", "/abs.txt": b"x"}
    assert read_folio(packed(every), "work.folio").work == WORK
    assert list(tmp_path.iterdir()) == []


def test_the_fingerprint_in_the_file_is_that_of_the_sheet():
    assert OPEN.sheet.sha256 == hashlib.sha256(MAIL).hexdigest()


def long_list(rows):
    head = "part number,frequency MHz,CL pF,ESR ohm max,drive uW"
    data = "\n".join([head, *(f"ABX-{at},26.0,{8 + at % 3},50,100" for at in range(rows))]).encode()
    return OpenSheet(read_sheet(data, "list.csv"), data)


def test_a_long_list_that_is_at_hand_comes_back_as_a_list(monkeypatch):
    one = long_list(300)
    monkeypatch.setattr(folio, "LONG_BYTES", 10_000)
    with_it, without = (
        read_folio(folio_bytes(Work(sheets=(one,)), SAVED, files=files), "work.folio").work
        for files in ({one.sheet.sha256: one.data}, None)
    )
    assert isinstance(with_it.sheets[0].sheet.parts, PartList)
    assert isinstance(without.sheets[0].sheet.parts, tuple)
    assert with_it.sheets[0].sheet == without.sheets[0].sheet == one.sheet


def test_a_long_list_that_would_be_read_otherwise_now_keeps_its_readings(monkeypatch):
    one = long_list(300)
    other = one.sheet.model_copy(update={"parts": tuple(one.sheet.parts)[:299]})
    monkeypatch.setattr(folio, "LONG_BYTES", 10_000)
    data = folio_bytes(Work(sheets=(OpenSheet(other, one.data),)), SAVED, files={one.sheet.sha256: one.data})
    assert len(read_folio(data, "work.folio").work.sheets[0].sheet.parts) == 299


def test_a_work_file_is_a_bench_file_too(tmp_path):
    path = tmp_path / "work.folio"
    path.write_bytes(folio_bytes(replace(WORK, at="c1"), SAVED))
    assert folio.bench_text(str(path)) == WORK.circuits[0].desk.bench_text
    path.write_bytes(folio_bytes(WORK, SAVED))
    with pytest.raises(FolioError, match="no circuit is set in this work"):
        folio.bench_text(str(path))


def test_the_command_line_takes_sheets_and_bench_from_one_work_file(tmp_path, capsys):
    from compare.command import main

    path = tmp_path / "work.folio"
    path.write_bytes(folio_bytes(replace(WORK, at="c1"), SAVED))
    main(["rank", str(path), "--bench", str(path), "--json"])
    assert {row["part_number"] for row in json.loads(capsys.readouterr().out)["rows"]} >= {"MRB25-260-08H"}
    path.write_bytes(folio_bytes(WORK, SAVED))
    assert main(["rank", str(path), "--bench", str(path)]) == 2
    assert "no circuit is set in this work" in capsys.readouterr().err
