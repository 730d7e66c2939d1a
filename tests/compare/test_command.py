"""The command line as a person meets it: what is printed, where, and with which exit status."""

import json
import subprocess
import sys
import zipfile
from pathlib import Path

import pytest

from compare.command import main

SHEET = """Quartz crystal QF-26, maker Orchardline
Nominal frequency: 26.000 MHz
Load capacitance: 8 pF
ESR: 50 Ohm max.
Shunt capacitance: 1.2 pF
Motional capacitance: 4.0 fF
Frequency tolerance at 25 C: +/-10 ppm
Frequency stability: +/-15 ppm
Ageing: +/-1 ppm per year
Operating temperature: -40 to +85 C
Drive level: 100 uW max.
Mode of vibration: fundamental, AT cut
"""
BENCH = """[requirement]
frequency_mhz = 26.0

[circuit]
transconductance_ms = 8.0
input_capacitor_pf = 10.0
output_capacitor_pf = 10.0
"""


@pytest.fixture
def folder(tmp_path: Path) -> Path:
    (tmp_path / "good.txt").write_text(SHEET, encoding="utf-8")
    (tmp_path / "bench.toml").write_text(BENCH, encoding="utf-8")
    return tmp_path


def run(capsys, *arguments) -> tuple[int, str, str]:
    status = main([str(argument) for argument in arguments])
    printed = capsys.readouterr()
    return status, printed.out, printed.err


def extracted(capsys, *names) -> tuple[int, list[dict]]:
    status, out, _ = run(capsys, "extract", *names, "--json")
    return status, json.loads(out)["sheets"]


def test_extract_prints_one_json_document_and_nothing_else(capsys, folder):
    status, out, err = run(capsys, "extract", folder / "good.txt", "--json")
    document = json.loads(out)
    assert (status, err) == (0, "")
    assert document["schema"] == "quartzfolio/extract/1"
    assert document["sheets"][0]["kind"] == "text"
    readings = {reading["field"]: reading for reading in document["sheets"][0]["parts"][0]["readings"]}
    assert readings["esr_ohm"]["max"] == 50.0
    assert readings["esr_ohm"]["where"] == {"line": 4}
    assert readings["motional_capacitance_ff"]["typ"] == 4.0


def test_without_json_a_person_reads_a_table(capsys, folder):
    status, out, _ = run(capsys, "extract", folder / "good.txt")
    assert status == 0
    assert "good.txt" in out
    assert "50" in out
    assert "line 4" in out


BAD_FILES = {
    "missing.pdf": None,
    "empty.pdf": b"",
    "truncated.pdf": b"%PDF-1.7\n1 0 obj\n<< /Type /Catalog /Pages 2 0 R",
    "nothing.bin.txt": b"\x00\x01\x02\x03" * 64,
    "prose.txt": b"Dear all, lunch is at noon.\n",
}


@pytest.mark.parametrize("name", BAD_FILES)
def test_a_bad_file_gets_one_note_and_the_others_are_still_read(capsys, folder, name):
    if BAD_FILES[name] is not None:
        (folder / name).write_bytes(BAD_FILES[name])
    status, (bad, good) = extracted(capsys, folder / name, folder / "good.txt")
    assert status == 1
    assert bad["parts"] == []
    assert len([note for note in bad["notes"] if note["level"] != "info"]) == 1
    assert len(good["parts"]) == 1


def test_a_fault_of_the_reader_shows_one_sentence_and_no_traceback(folder):
    probe = (
        "import extract.blocks as blocks\n"
        "def fail(document): raise KeyError('a bug')\n"
        "blocks.read_blocks = fail\n"
        "from compare.command import main\nraise SystemExit(main())"
    )
    command = [sys.executable, "-c", probe, "extract", str(folder / "good.txt")]
    done = subprocess.run(command, capture_output=True, text=True, check=False)
    assert done.returncode == 1
    assert "the reader failed on this file (KeyError: 'a bug')" in " ".join(done.stdout.split())
    assert done.stderr == ""


def test_a_zip_named_xlsx_is_told_apart_from_a_workbook(capsys, folder):
    with zipfile.ZipFile(folder / "list.xlsx", "w") as archive:
        archive.writestr("readme.txt", "no workbook")
    status, (bad,) = extracted(capsys, folder / "list.xlsx")
    assert status == 1
    assert "workbook" in bad["notes"][0]["message"]


def test_a_locked_pdf_says_that_it_wants_its_password(capsys, folder):
    pypdf = pytest.importorskip("pypdf")
    writer = pypdf.PdfWriter()
    writer.add_blank_page(200, 200)
    writer.encrypt("orchard", algorithm="RC4-128")
    writer.write(folder / "locked.pdf")
    status, (bad,) = extracted(capsys, folder / "locked.pdf")
    assert status == 1
    assert "password" in bad["notes"][0]["message"]


def test_a_folder_stands_for_its_sheets_in_order_of_name(capsys, folder):
    inner = folder / "a_first"
    inner.mkdir()
    (inner / "more.txt").write_text(SHEET, encoding="utf-8")
    (folder / ".hidden.txt").write_text(SHEET, encoding="utf-8")
    status, out, _ = run(capsys, "extract", folder, "--json")
    document = json.loads(out)
    assert status == 0
    assert [Path(sheet["file"]).name for sheet in document["sheets"]] == ["more.txt", "good.txt"]
    assert len(document["notes"]) == 1
    assert "bench.toml" in document["notes"][0]["message"]


def test_an_empty_folder_is_an_error_note(capsys, tmp_path):
    status, out, _ = run(capsys, "extract", tmp_path, "--json")
    assert status == 1
    assert "no sheets" in json.loads(out)["notes"][0]["message"]


def test_one_part_of_a_list_can_be_named(capsys, folder):
    lines = ["Part number;Frequency (MHz);ESR max (Ohm);CL (pF)", "QF-1;26;50;8", "QF-2;26;60;8"]
    (folder / "list.csv").write_text("\n".join(lines), encoding="utf-8")
    status, (sheet,) = extracted(capsys, f"{folder / 'list.csv'}#QF-2")
    assert status == 0
    assert [part["part_number"] for part in sheet["parts"]] == ["QF-2"]
    status, (sheet,) = extracted(capsys, f"{folder / 'list.csv'}#QF-3")
    assert status == 1
    assert sheet["notes"][-1]["message"] == "no part QF-3 in this sheet; it has QF-1, QF-2"


def test_a_call_without_a_file_is_wrong():
    with pytest.raises(SystemExit) as stop:
        main(["extract"])
    assert stop.value.code == 2


@pytest.mark.parametrize("name", ["", " ", "#QF-26"])
def test_a_name_without_a_file_is_a_wrong_call(capsys, name):
    with pytest.raises(SystemExit) as stop:
        main(["extract", name])
    assert stop.value.code == 2
    assert "names no file" in capsys.readouterr().err


@pytest.mark.parametrize(
    ("text", "told"),
    [
        (BENCH.replace("transconductance_ms", "transconductance_mS"), "transconductance_mS"),
        (BENCH.replace("input_capacitor_pf = 10.0", "input_capacitor_pf = -10.0"), "input_capacitor_pf"),
        (BENCH.replace("[circuit]", "[circuit"), "line 4"),
    ],
)
def test_a_faulty_bench_is_a_wrong_call_that_names_key_or_line(capsys, folder, text, told):
    (folder / "faulty.toml").write_text(text, encoding="utf-8")
    status, out, err = run(capsys, "rank", folder / "good.txt", "--bench", folder / "faulty.toml")
    assert status == 2
    assert out == ""
    assert told in err
    assert "faulty.toml" in err
    assert "Traceback" not in err


def test_a_missing_bench_is_a_wrong_call(capsys, folder):
    status, _, err = run(capsys, "review", folder / "good.txt", "--bench", folder / "nowhere.toml")
    assert status == 2
    assert err == f"quartzfolio: {folder / 'nowhere.toml'}: no such bench file; check the name\n"


def test_rank_gives_a_row_with_its_verdict(capsys, folder):
    status, out, _ = run(capsys, "rank", folder / "good.txt", "--bench", folder / "bench.toml", "--json")
    document = json.loads(out)
    assert status == 0
    assert document["schema"] == "quartzfolio/rank/1"
    assert [row["place"] for row in document["rows"]] == [1]
    assert document["rows"][0]["verdict"] == "meets"


def test_rank_names_an_unreadable_file_and_exits_with_one(capsys, folder):
    status, out, _ = run(
        capsys, "rank", folder / "good.txt", folder / "missing.pdf", "--bench", folder / "bench.toml", "--json"
    )
    document = json.loads(out)
    assert status == 1
    assert len(document["rows"]) == 1
    assert any("missing.pdf: no such file" in note["message"] for note in document["notes"])


def test_review_exits_with_zero_only_when_every_part_meets(capsys, folder):
    weak = folder / "weak.txt"
    weak.write_text(SHEET.replace("50 Ohm", "450 Ohm"), encoding="utf-8")
    assert run(capsys, "review", folder / "good.txt", "--bench", folder / "bench.toml", "--json")[0] == 0
    assert run(capsys, "review", weak, "--bench", folder / "bench.toml", "--json")[0] == 1


def test_spread_and_what_if_stand_beside_the_worst_case(capsys, folder):
    weak = folder / "weak.txt"
    weak.write_text(SHEET.replace("50 Ohm", "450 Ohm"), encoding="utf-8")
    options = ("--bench", folder / "bench.toml", "--what-if", "--spread", "draws", "--boards", "200", "--json")
    (one,) = json.loads(run(capsys, "review", weak, *options)[1])["reviews"]
    assert one["spread"]["boards"] == 200
    assert one["spread"]["falls_short"]["gain_ratio"]["boards"] == 200
    assert {"ESR"} <= {cure["what"] for cure in one["cures"]}
    text = run(capsys, "review", weak, *options[:-1])[1]
    assert "gain ratio: 200 of 200 boards fall short" in " ".join(text.split())


def test_help_imports_nothing_heavy():
    probe = (
        "import sys; from compare.command import main\n"
        "try: main(['--help'])\nexcept SystemExit: pass\nprint(sorted(sys.modules))"
    )
    done = subprocess.run([sys.executable, "-c", probe], capture_output=True, text=True, check=True)
    for heavy in ("numpy", "pandas", "pydantic", "streamlit", "pdfplumber"):
        assert f"'{heavy}'" not in done.stdout
