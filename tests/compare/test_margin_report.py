"""The margin report: its sections, that its numbers are the review's, and that it stands without the program."""

import json
import re
import sys
from pathlib import Path

import hand_made
import made_sheets
import pytest
from reviewed_parts import bench, dossier_of, part, radio, watch

from compare.answers import FIGURES
from compare.bench import read_bench
from compare.blocks import Drawn, Grid, Heading, Items, Side, Text, Together
from compare.command import main
from compare.desk import desk_from_bench
from compare.folio import folio_bytes
from compare.intake import read_sheets
from compare.margin_report import margin_report
from compare.report_head import HeadError, ReportHead, alternates_of
from compare.work import Circuit, OpenSheet, Work, part_key

BARE = "[requirement]\nfrequency_mhz = 26.0\n"
SECTIONS = [
    "1 Head",
    "2 Verdict",
    "3 Requirement",
    "4 Circuit",
    "5 Crystal",
    "6 IC",
    "7 Results",
    "8 Worst case",
    "9 Frequency budget",
    "10 Plots",
    "11 Measured",
    "12 Cautions, open questions, failure effects",
    "13 Alternates",
    "14 Signatures",
]


def flat(blocks):
    for block in blocks:
        yield from flat(block.blocks) if isinstance(block, Together) else [block]


def report_of(dossier, **head):
    return list(flat(margin_report(dossier, ReportHead(**head)).blocks))


def section(blocks, name):
    """The blocks of one section."""
    heads = [at for at, one in enumerate(blocks) if isinstance(one, Heading) and one.level == 1]
    start = next(at for at in heads if blocks[at].text.startswith(name))
    end = next((at for at in heads if at > start), len(blocks))
    return blocks[start + 1 : end]


def texts(blocks):
    for one in blocks:
        if isinstance(one, Heading | Text):
            yield one.text
        elif isinstance(one, Items):
            yield from one.lines
        elif isinstance(one, Grid):
            yield from one.heads
            yield from (cell for row in one.rows for cell in row)


def words(blocks):
    return "\n".join(texts(blocks))


@pytest.mark.parametrize("dossier", [radio, watch])
def test_the_fourteen_sections_stand_in_order(dossier):
    heads = [one.text for one in report_of(dossier()) if isinstance(one, Heading) and one.level == 1]
    assert heads[:14] == SECTIONS


@pytest.mark.parametrize("dossier", [radio, watch])
def test_every_number_of_the_results_is_that_of_the_review(dossier):
    review = dossier().review
    rows = {row[0]: row for row in section(report_of(dossier()), "7")[0].rows}
    for key, shown in FIGURES.items():
        if key not in review:
            continue
        for printed, end in zip(rows[shown.name][1:4], ("low", "mid", "high"), strict=True):
            if review[key][end] is None:
                assert printed == "—"
            else:
                assert float(printed.replace("−", "-")) == pytest.approx(review[key][end], rel=5.1e-6)


def test_the_head_has_its_fields_and_blanks_where_nothing_is_known():
    rows = dict(section(report_of(radio(), number="MR-14", project="Frost node"), "1")[0].rows)
    assert rows["Report number"] == "MR-14"
    assert set(rows["Revision"]) == {"_"}
    assert rows["Made by"].startswith("quartzfolio ")
    assert "quartzfolio/formulas/" in rows["Made by"]
    assert "quartzfolio/review/1" in rows["Made by"]


def test_the_verdict_stands_in_seven_lines_with_what_would_change_it():
    found = section(report_of(radio()), "2")
    assert len(found[2].rows) == 7
    assert "It would fall short if" in found[1].text


def test_the_pass_mark_is_printed_with_its_source():
    rows = {row[0]: row for row in section(report_of(radio()), "3")[0].rows}
    assert rows["Pass mark: margin, gain, R1 headroom"][1:] == ("5", "house rule 14")


def test_a_use_is_printed_with_where_its_limit_comes_from():
    text = hand_made.BENCH_TEXT.replace("total_ppm = 50.0", 'use = "ble-active"')
    rows = {row[0]: row for row in section(report_of(dossier_of(part(), read_bench(text, "b.toml"))), "3")[0].rows}
    assert rows["Limit on the frequency"][1:] == ("±50 ppm, all causes", "the use")
    assert "TI BLE5-Stack user guide" in rows["Use"][2]


def test_the_circuit_is_drawn_and_every_capacitance_named_by_its_nodes():
    found = section(report_of(radio()), "4")
    assert any(isinstance(one, Drawn) for one in found)
    named = {row[0] for one in found if isinstance(one, Grid) for row in one.rows}
    assert {"A–0 fitted", "B–0 fitted", "A–0 stray", "B–0 stray", "A–B stray", "A–0, B–0 inside IC"} <= named


def test_each_reading_has_its_place_its_condition_and_how_it_was_had():
    look = made_sheets.reading("esr_ohm", max=50.0, check="R1 or RL?", temperature_c=(-40.0, 85.0))
    rows = {row[0]: row for row in section(report_of(dossier_of(part(look))), "5")[0].rows}
    assert rows["ESR"] == ("ESR", "at most 50 Ω", "−40…+85 °C", "p.1", "stated, ☞ look", "esr_ohm as printed")


def test_what_is_not_stated_is_listed_with_what_was_used_instead():
    said = words(section(report_of(dossier_of(part(without=("motional_capacitance_ff", "ageing_ppm")))), "5"))
    assert "C1: estimated (" in said
    assert "Ageing: estimated" in said


def test_stated_values_that_lead_to_c1_are_held_against_one_another():
    other = dossier_of(part(made_sheets.reading("capacitance_ratio", 500.0)))
    rows = {row[0]: row for one in section(report_of(other), "5") if isinstance(one, Grid) for row in one.rows}
    # By hand: 1.1 pF / 500 is 2.2 fF, 27 % below 3 fF.
    assert rows["C1 by C0/C1"][1:] == ("2.2 fF", "−27 %")


def test_the_ics_rating_is_printed_in_words_with_the_factor_inside():
    text = hand_made.BENCH_TEXT.split("[[circuit.condition]]")[0].replace("transconductance_ms = [4.6, 9.0]\n", "")
    text += "\n[circuit.rating]\nesr_max_ohm = 90.0\nload_pf = 9.0\nfactor_inside = 5.0\n"
    rated = dossier_of(part(), read_bench(text, "rated.toml"))
    said = words(section(report_of(rated), "6"))
    assert "greatest ESR 90 Ω, motional, at 9 pF, factor 5 inside" in said
    assert "it is not asked for twice" in words(section(report_of(rated), "3"))


def test_without_any_gain_the_question_to_the_ics_maker_stands_there():
    text = hand_made.BENCH_TEXT.split("[[circuit.condition]]")[0].replace("transconductance_ms = [4.6, 9.0]\n", "")
    said = words(section(report_of(dossier_of(part(), read_bench(text, "none.toml"))), "6"))
    assert "neither a transconductance nor a rating is given" in said
    assert "what is the least transconductance of the oscillator's amplifier" in said


def test_the_worst_case_names_its_method_corners_conditions_and_contributors():
    said = words(section(report_of(radio()), "8"))
    assert "extreme value" in said
    assert "frost, weak battery: R1, C0 and load most" in said
    assert "−30 °C" in said
    assert "What the margin hangs on" in said
    assert "oscillation stops again above" in said


def test_a_bench_without_conditions_says_that_only_room_values_were_had():
    text = hand_made.BENCH_TEXT.split("[[circuit.condition]]")[0]
    said = words(section(report_of(dossier_of(part(), read_bench(text, "room.toml"))), "8"))
    assert "Only room values of the IC were to be had" in said


def test_the_budget_adds_up_to_the_reviews_total():
    rows = {row[0]: row for row in section(report_of(radio()), "9")[0].rows}
    causes = [float(rows[name][2].replace("−", "-")) for name in ("make", "temperature", "ageing", "load error")]
    assert sum(causes) == pytest.approx(float(rows["in all"][2]), abs=0.02)
    assert float(rows["in all"][2]) == pytest.approx(radio().review["total_ppm"]["high"], abs=0.01)
    assert float(rows["in all"][2]) + float(rows["room left"][2]) == pytest.approx(50.0, abs=0.02)


def test_all_plots_are_in_it():
    drawn = [one for block in report_of(radio()) for one in (block.drawings if isinstance(block, Side) else [block])]
    captions = " ".join(one.caption for one in drawn if isinstance(one, Drawn))
    for title in ("R1 headroom against", "ppm against load", "ppm over temp", "Margin against ESR", "Where the ppm go"):
        assert title in captions


def test_what_is_not_measured_yet_has_a_row_with_the_value_to_reach():
    rows = section(report_of(radio()), "11")[0].rows
    blank = [row for row in rows if row[3] == "not yet"]
    assert len(blank) >= 7
    assert all(row[2] for row in blank)


def test_cautions_open_questions_and_failure_effects_are_in_it():
    said = words(section(report_of(dossier_of(part(without=("drive_level_uw",)))), "12"))
    assert "Ultrasonic cleaning and tuning forks do not mix." in said
    assert "What is the greatest drive level, in µW, that ABX-26 is rated for?" in said
    assert "intermittent" in said
    assert "A series resistor is counted as part of the circuit" in said


def test_decisions_on_alternates_are_printed():
    slot = {
        "merrowby|abx-26 > pippinstow|ppd": {
            "decisions": [{"candidate": "PPD", "incumbent": "ABX-26", "state": "refused", "by": "M. Alder"}]
        },
        "other|a > other|b": {"decisions": [{"candidate": "B"}]},
    }
    found = alternates_of(slot, "merrowby|abx-26")
    assert [one["candidate"] for one in found] == ["PPD"]
    assert "refused" in words(section(report_of(radio(), alternates=found), "13"))


def test_the_end_has_names_to_sign_and_the_fingerprint_of_the_sheet():
    said = words(section(report_of(radio(), prepared="M. Alder"), "14"))
    assert "M. Alder" in said
    assert radio().sheet.sha256 in said


def test_every_number_is_explained_in_the_appendix():
    appendix = section(report_of(radio()), "Appendix")
    heads = {one.text for one in appendix if isinstance(one, Heading)}
    assert {"Margin", "R1 headroom", "Frequency error, all causes", "Quality factor Q"} <= heads
    assert any(isinstance(one, Text) and one.kind == "code" and ".subckt" in one.text for one in appendix)


@pytest.mark.parametrize(
    "one",
    [
        pytest.param(lambda: dossier_of(part(without=("esr_ohm",))), id="no ESR"),
        pytest.param(lambda: dossier_of(part(without=("load_capacitance_pf",))), id="no load"),
        pytest.param(
            lambda: dossier_of(part(), read_bench("[requirement]\nfrequency_mhz = 26.0\n", "b")), id="no circuit"
        ),
        pytest.param(lambda: dossier_of(part(made_sheets.reading("esr_ohm", max=9000.0))), id="cannot oscillate"),
        pytest.param(lambda: dossier_of(part(mode="third overtone")), id="overtone"),
        pytest.param(lambda: dossier_of(part(resonance="series", without=("load_capacitance_pf",))), id="series"),
    ],
)
def test_a_report_is_made_whatever_is_lacking(one):
    blocks = report_of(one())
    assert [b.text for b in blocks if isinstance(b, Heading) and b.level == 1][:14] == SECTIONS
    assert "nan" not in re.sub(r"\w*nan\w+|\w+nan\w*", "", words(blocks))


def test_a_head_with_an_unknown_field_is_refused():
    with pytest.raises(HeadError, match=r"^colour: not a field of the report's head; those are approved, board, "):
        ReportHead.of({"colour": "red"})
    with pytest.raises(HeadError, match=r"^number: must be text in quotes, got 14$"):
        ReportHead.of({"number": 14})


@pytest.fixture
def files(tmp_path):
    (tmp_path / "offer.txt").write_text(hand_made.MAIL, encoding="utf-8")
    (tmp_path / "bench.toml").write_text(hand_made.BENCH_TEXT, encoding="utf-8")
    (tmp_path / "head.toml").write_text('number = "MR-7"\nproject = "Frost & node"\n', encoding="utf-8")
    return tmp_path


def call(files, *more, sheet="offer.txt"):
    return ["report", str(files / sheet), "--bench", str(files / "bench.toml"), *more]


def test_the_command_writes_html_with_the_numbers_of_the_json(files, capsys):
    assert main(call(files, "--head", str(files / "head.toml"), "--out", str(files / "r.html"))) == 0
    text = (files / "r.html").read_text(encoding="utf-8")
    assert "Margin report: ABX-26, Frost &amp; node" in text
    main(["review", str(files / "offer.txt"), "--bench", str(files / "bench.toml"), "--json"])
    (review,) = json.loads(capsys.readouterr().out)["reviews"]
    for key in ("margin", "total_ppm", "circuit_load_pf", "startup_ms", "series_resonance_mhz"):
        cells = re.search(rf"<td>{re.escape(FIGURES[key].name)}</td>" + r'<td class="n">([^<]+)</td>' * 3, text)
        for printed, end in zip(cells.groups(), ("low", "mid", "high"), strict=True):
            assert float(printed.replace("−", "-")) == pytest.approx(review[key][end], rel=5.1e-6)


def test_the_command_writes_pdf_by_the_ending_and_html_to_standard_output(files, capsys):
    assert main(call(files, "--out", str(files / "r.pdf"))) == 0
    assert (files / "r.pdf").read_bytes().startswith(b"%PDF-")
    assert main(call(files)) == 0
    assert capsys.readouterr().out.startswith("<!DOCTYPE html>")


def test_a_part_that_does_not_meet_ends_with_one(files):
    text = hand_made.BENCH_TEXT.replace("margin = 5.0", "margin = 50.0")
    (files / "bench.toml").write_text(text, encoding="utf-8")
    assert main(call(files, "--out", str(files / "r.html"))) == 1
    assert "falls short" in (files / "r.html").read_text(encoding="utf-8")


def test_wrong_calls_say_what_to_do(files, capsys):
    rows = ["part number,frequency MHz,CL pF,ESR ohm max"] + [f"ABX-{load},26.0,{load},50" for load in (8, 10)]
    (files / "list.csv").write_text("\n".join(rows) + "\n", encoding="utf-8")
    assert main(call(files, "--out", "r.docx")) == 2
    assert capsys.readouterr().err == (
        "quartzfolio: --out r.docx: a report is written as .html or .pdf; end the name so\n"
    )
    assert main(call(files, sheet="list.csv")) == 2
    said = capsys.readouterr().err
    assert said.startswith(
        "quartzfolio: a report is about one part, and 2 offer 26 MHz: name one as FILE#PART_NUMBER, of "
    )
    assert "list.csv#ABX-8" in said
    assert main(call(files, "--head", "gone.toml")) == 2
    assert capsys.readouterr().err == "quartzfolio: gone.toml: cannot be opened: no such file or directory\n"
    assert main(call(files, "--out", str(files / "no" / "r.html"))) == 2
    assert "cannot be written: no such file or directory" in capsys.readouterr().err
    assert main(call(files, "--json")) == 2
    assert "review --json" in capsys.readouterr().err


def test_nothing_that_offers_the_frequency_is_a_wrong_call(files, capsys):
    text = hand_made.BENCH_TEXT.replace("frequency_mhz = 26.0", "frequency_mhz = 25.0")
    (files / "bench.toml").write_text(text, encoding="utf-8")
    assert main(call(files)) == 2
    assert "no part to report on: none offers 25 MHz" in capsys.readouterr().err


def test_a_work_file_gives_head_decisions_and_circuit(files):
    sheet = read_sheets([str(files / "offer.txt")]).sheets[0]
    decision = {
        "candidate": "PPD-26",
        "incumbent": "ABX-26",
        "state": "approved",
        "by": "M. Alder",
        "when": "2026-03-01",
    }
    work = Work(
        sheets=(OpenSheet(sheet),), circuits=(Circuit(desk=desk_from_bench(hand_made.BENCH_TEXT, "bench.toml")),)
    )
    work = work.with_slot("report", {"project": "Frost node", "board": ""})
    key = f"{part_key(sheet.parts[0])} > pippinstow|ppd-26"
    work = work.with_slot("decisions", {key: {"decisions": [decision]}})
    (files / "frost.folio").write_bytes(folio_bytes(work, "2026-03-02T10:00+00:00"))
    name = str(files / "frost.folio")
    assert main(["report", name, "--bench", name, "--out", str(files / "r.html")]) == 0
    text = (files / "r.html").read_text(encoding="utf-8")
    assert "Margin report: ABX-26, Frost node" in text
    assert "PPD-26" in text
    assert "approved" in text


def test_the_report_of_a_part_named_of_a_list(files):
    rows = ["part number,frequency MHz,CL pF,ESR ohm max"] + [f"ABX-{load},26.0,{load},50" for load in (8, 10)]
    (files / "list.csv").write_text("\n".join(rows) + "\n", encoding="utf-8")
    main(call(files, "--out", str(files / "r.html"), sheet="list.csv#ABX-10"))
    assert "Margin report: ABX-10" in (files / "r.html").read_text(encoding="utf-8")


def test_the_program_makes_it_without_streamlit(files):
    import subprocess

    script = (
        "import sys; from compare.command import main; "
        f"main({call(files, '--out', str(files / 'r.pdf'))!r}); "
        "assert not {'streamlit', 'pandas'} & set(sys.modules)"
    )
    done = subprocess.run(
        [sys.executable, "-c", script], cwd=Path(__file__).parents[2], capture_output=True, check=False
    )
    assert done.returncode == 0, done.stderr.decode()


def test_the_bench_of_the_fixture_is_the_one_of_the_other_tests():
    assert bench().requirement.margin_source == "house rule 14"
