"""`quartzfolio substitute` and `changes` as a script calls them: JSON, exit statuses, and what a person reads."""

import json
from pathlib import Path

import pytest

from compare.command import main

SAMPLES = Path(__file__).parents[2] / "sample_specs"
LIST = SAMPLES / "kirschgrund_lagerliste_de.csv"
RADIO = SAMPLES / "radio_26mhz.toml"
SHEET = """Crystal QF-26, maker Orchardline
Nominal frequency: 26.000 MHz
Mode: fundamental
Load capacitance: 8 pF
ESR: 50 Ohm max.
Shunt capacitance: 1.2 pF
Motional capacitance: 4.0 fF
Frequency tolerance at 25 C: +/-10 ppm
Frequency stability: +/-15 ppm
Ageing: +/-1 ppm per year
Operating temperature: -40 to +85 C
Drive level: 100 uW max.
"""


@pytest.fixture
def folder(tmp_path: Path) -> Path:
    (tmp_path / "old.txt").write_text(SHEET, encoding="utf-8")
    (tmp_path / "new.txt").write_text(SHEET.replace("50 Ohm", "60 Ohm"), encoding="utf-8")
    return tmp_path


def run(capsys, *arguments) -> tuple[int, str, str]:
    status = main([str(argument) for argument in arguments])
    printed = capsys.readouterr()
    return status, printed.out, printed.err


def document(capsys, *arguments) -> tuple[int, dict]:
    status, out, _ = run(capsys, *arguments, "--json")
    return status, json.loads(out)


def test_a_drop_in_exits_with_zero_and_prints_one_document(capsys, folder):
    status, printed = document(capsys, "substitute", folder / "old.txt", folder / "old.txt")
    assert (status, printed["schema"]) == (0, "quartzfolio/substitute/1")
    assert [one["verdict"] for one in printed["candidates"]] == ["drop-in"]


def test_anything_else_exits_with_one(capsys, folder):
    status, printed = document(capsys, "substitute", folder / "old.txt", folder / "old.txt", folder / "new.txt")
    assert status == 1
    assert [one["verdict"] for one in printed["candidates"]] == ["drop-in", "cannot tell"]


def test_a_bench_tells_what_the_sheets_alone_do_not(capsys, folder):
    status, printed = document(capsys, "substitute", folder / "old.txt", folder / "new.txt", "--bench", RADIO)
    assert status == 0
    assert printed["candidates"][0]["verdict"] == "drop-in"


@pytest.mark.parametrize("incumbent", [LIST, "missing.pdf", f"{LIST}#NO-SUCH-PART"])
def test_an_incumbent_that_is_not_exactly_one_part_is_a_wrong_call(capsys, folder, incumbent):
    status, out, err = run(capsys, "substitute", incumbent, folder / "old.txt")
    assert (status, out) == (2, "")
    assert "the incumbent must be one part" in err


def test_a_candidate_file_that_cannot_be_read_is_named_and_exits_with_one(capsys, folder):
    status, printed = document(capsys, "substitute", folder / "old.txt", folder / "old.txt", folder / "missing.pdf")
    assert status == 1
    assert any("missing.pdf: no such file" in note["message"] for note in printed["notes"])


def test_a_faulty_bench_is_a_wrong_call(capsys, folder):
    (folder / "faulty.toml").write_text("[requirement]\nfrequency_mhz = -1.0\n", encoding="utf-8")
    status, _, err = run(
        capsys, "substitute", folder / "old.txt", folder / "old.txt", "--bench", folder / "faulty.toml"
    )
    assert status == 2
    assert "requirement.frequency_mhz" in err


def test_a_person_reads_the_verdict_first(capsys):
    status, out, _ = run(capsys, "substitute", f"{LIST}#KGF25-26M000-08A", f"{LIST}#KGF25-26M000-08A")
    assert status == 0
    assert out.startswith("Incumbent: KGF25-26M000-08A")
    assert "▲ drop-in: no worse than the incumbent in every line that matters" in out
    assert max(map(len, out.splitlines())) <= 102


# Three pairs of the sample sheets whose answer an engineer gives at once.


def pair(capsys, incumbent, candidate, bench=RADIO):
    _, printed = document(capsys, "substitute", incumbent, candidate, "--bench", bench)
    (one,) = printed["candidates"]
    return one


def test_the_pin_compatible_part_of_equal_or_better_figures_is_drop_in(capsys):
    """26 MHz, 8 pF, 2520, 50 Ω and 200 µW on both: the second maker's part does, if ±20 ppm over temperature will."""
    one = pair(capsys, f"{LIST}#KGF25-26M000-08A", SAMPLES / "tingyu_tyj2520_26mhz_zh.pdf")
    assert one["verdict"] == "drop-in"
    assert abs(one["shift_ppm"]["mid"]) < 1


def test_the_eighteen_picofarad_part_of_the_same_size_runs_high_and_no_capacitors_mend_it(capsys):
    """An 18 pF part on a board for 8 pF runs high by some hundred ppm; the 30 pF each that it wants eat the margin."""
    one = pair(capsys, f"{LIST}#KGF25-26M000-08A", SAMPLES / "kirschgrund_kgf25_freigabe_de.docx")
    assert one["verdict"] == "does not fit"
    assert one["findings"][-1]["message"].startswith("No pair of E24 load capacitors meets the bench")
    assert "total_ppm" in one["lacks"]
    assert one["shift_ppm"]["low"] > 50


def test_the_overtone_in_the_big_package_does_not_fit_and_would_run_at_a_third(capsys):
    """7.0 x 5.0 mm for 2.5 x 2.0 mm settles it; its mode would too: near 8.67 MHz without a trap."""
    one = pair(capsys, f"{LIST}#KGF25-26M000-08A", f"{LIST}#KGF75-26M000-3O-08")
    assert one["verdict"] == "does not fit"
    assert one["decides"].startswith("package: 7,0 x 5,0 mm in place of 2,5 x 2,0 mm")
    assert {"package", "mode"} <= set(one["lacks"])
    assert any("runs at about 8.667 MHz" in finding["message"] for finding in one["findings"])


# Two revisions.


def test_two_copies_of_a_sheet_differ_in_nothing_and_exit_with_zero(capsys, folder):
    status, printed = document(capsys, "changes", folder / "old.txt", folder / "old.txt")
    assert (status, printed["schema"], printed["lines"]) == (0, "quartzfolio/changes/1", [])


def test_a_change_exits_with_one_and_with_a_bench_only_where_it_matters(capsys, folder):
    status, printed = document(capsys, "changes", folder / "old.txt", folder / "new.txt")
    assert status == 1
    assert [(line["field"], line["relation"]) for line in printed["lines"]] == [("esr_ohm", "looser")]
    status, printed = document(capsys, "changes", folder / "old.txt", folder / "new.txt", "--bench", RADIO)
    assert (status, [line["matters"] for line in printed["lines"]]) == (0, [False])


def test_changes_of_a_file_without_a_crystal_is_a_wrong_call(capsys, folder):
    status, out, err = run(capsys, "changes", folder / "old.txt", folder / "nowhere.txt")
    assert (status, out) == (2, "")
    assert "nowhere.txt: no crystal to compare (no such file; check the name)" in err
