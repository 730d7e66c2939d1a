"""The page, run without a browser: sheets go in, the circuit is set, the ranking and the review come out."""

from pathlib import Path

import hand_made
import pytest
from page_driver import headings, open_bench, said, to
from streamlit.testing.v1 import AppTest

from compare.typed import fields, layout

SCRIPT = Path(__file__).parents[2] / "compare" / "page.py"


@pytest.fixture
def page():
    app = AppTest.from_file(str(SCRIPT), default_timeout=60).run()
    assert not app.exception
    return app


def drop(page, *files):
    page.file_uploader[0].set_value([(name, data.encode(), "text/plain") for name, data in files]).run()
    assert not page.exception
    return page


def test_nothing_loaded_says_what_to_do(page):
    assert headings(page) == ["## No sheets yet"]
    assert "Drop some, paste text, or open the orchard example." in said(page)
    assert headings(to(page, "choose")) == ["## Nothing to rank yet"]
    page.button(key="to_sheets").click().run()
    assert headings(page) == ["## No sheets yet"]


def test_sheets_without_a_part_are_not_ranked(page):
    drop(page, ("notes.txt", "Minutes of the meeting on apples."))
    assert "None of the sheets that are open gave a part: Sheets says why." in said(to(page, "choose"))


def test_a_dropped_sheet_is_read_and_its_readings_are_shown(page):
    drop(page, ("offer.txt", hand_made.MAIL))
    lists, readings = (frame.value for frame in page.dataframe)
    assert lists["Sheet"].tolist() == ["offer.txt"]
    assert "## ABX-26" in headings(page)
    assert {"Frequency", "ESR", "Rated load CL"} <= set(readings["Reading"])


def test_a_file_that_cannot_be_read_says_so_and_the_others_stay(page):
    drop(page, ("broken.pdf", "%PDF-1.7 broken"), ("offer.txt", hand_made.MAIL))
    assert page.dataframe[0].value["Outcome"].tolist()[0] == "▼ not read"
    assert page.dataframe[0].value["Outcome"].tolist()[1].startswith("1 part")
    assert "▼ broken.pdf: " in said(page)


def test_the_same_sheet_dropped_twice_is_open_once(page):
    drop(drop(page, ("offer.txt", hand_made.MAIL)), ("offer.txt", hand_made.MAIL))
    assert page.dataframe[0].value["Sheet"].tolist() == ["offer.txt"]


def test_pasted_text_is_read_like_a_file(page):
    page.text_area[0].set_value(hand_made.MAIL)
    page.button(key="read_pasted").click().run()
    assert page.dataframe[0].value["Sheet"].tolist() == ["pasted text 1.txt"]


def test_a_closed_sheet_is_gone(page):
    drop(page, ("offer.txt", hand_made.MAIL))
    page.button(key="close_sheet").click().run()
    assert not page.dataframe


def test_sheets_without_a_circuit_are_not_judged(page):
    to(drop(page, ("offer.txt", hand_made.MAIL)), "choose")
    assert headings(page) == ["## No circuit yet"]
    page.button(key="to_circuit").click().run()
    assert headings(page) == ["## The circuit is not set yet"]


def test_a_bench_file_fills_the_fields_and_the_sum(page):
    open_bench(page)
    assert page.text_input(key="field_circuit_input_stray_pf").value == "2.6 pF"
    assert headings(page) == ["## The circuit presents 7.70 pF"]
    assert page.text_input(key="field_condition_0_name").value == "frost, weak battery"


def test_a_bench_file_with_a_fault_is_not_used_and_says_key_and_line(page):
    open_bench(page, "[requirement]\nfrequency_mhz = 26.0\nmargni = 5.0\n")
    assert "bench.toml, line 3: requirement.margni: unknown key" in said(page)
    assert headings(page) == ["## The circuit is not set yet"]


def test_a_typed_amount_is_shown_back_with_its_unit_and_counts(page):
    open_bench(page)
    page.text_input(key="field_circuit_input_capacitor_pf").set_value("12,5").run()
    assert page.text_input(key="field_circuit_input_capacitor_pf").value == "12.5 pF"
    # 12.5 + 2.6 pF in series with 14.6 pF is 7.423 pF, and 0.4 pF across.
    assert headings(page) == ["## The circuit presents 7.82 pF"]


def test_an_absurd_amount_waits_for_an_answer(page):
    open_bench(page)
    key = "circuit.input_capacitor_pf"
    page.text_input(key="field_circuit_input_capacitor_pf").set_value("12000 pF").run()
    assert "12000 pF: plausible is 0.5 to 470 pF. Meant 12 pF? Not used until you say." in said(page)
    assert headings(page) == ["## The load is not known yet"]
    page.button(key=f"use_{key}").click().run()
    assert page.text_input(key="field_circuit_input_capacitor_pf").value == "12 pF"
    page.text_input(key="field_circuit_input_capacitor_pf").set_value("1200 pF").run()
    page.button(key=f"keep_{key}").click().run()
    assert not page.exception
    assert headings(page) != ["## The load is not known yet"]


def test_what_is_typed_survives_going_to_another_view(page):
    open_bench(page)
    page.text_input(key="field_circuit_input_capacitor_pf").set_value("13").run()
    to(to(page, "sheets"), "circuit")
    assert page.text_input(key="field_circuit_input_capacitor_pf").value == "13 pF"


def test_corners_come_and_go(page):
    open_bench(page)
    page.button(key="add_corner").click().run()
    page.text_input(key="field_condition_1_name").set_value("hot").run()
    page.button(key="drop_corner").click().run()
    assert [one.key for one in page.text_input if one.key.startswith("field_condition_")] == [
        f"field_condition_0_{name}"
        for name in ("name", "temperature_c", "transconductance_ms_low", "transconductance_ms_high", "swing_v")
    ]


def test_cleared_fields_are_blank(page):
    open_bench(page)
    page.button(key="clear_bench").click().run()
    assert page.text_input(key="field_circuit_input_stray_pf").value == ""
    assert headings(page) == ["## The circuit is not set yet"]


def test_every_field_of_the_form_is_drawn_under_its_key(page):
    open_bench(page)
    drawn = {one.key for kind in (page.text_input, page.selectbox, page.checkbox) for one in kind}
    for group in {one.group for one in fields().values()} - {"condition"}:
        for row in layout(group):
            assert {f"field_{one.key.replace('.', '_')}" for one, _ in row if one is not None} <= drawn


def test_the_ranking_has_its_heading_rows_and_reasons(page):
    to(open_bench(drop(page, ("offer.txt", hand_made.MAIL))), "choose")
    assert headings(page)[0].startswith("## The one part that offers it")
    ranked = page.dataframe[0].value
    assert ranked["Part"].tolist() == ["ABX-26"]
    assert "### 1st: ABX-26" in said(page)
    assert "An estimate is no measurement" in said(page)
    assert "Sheets stay on this machine." in said(page)


def test_a_greater_margin_makes_the_part_fall_short(page):
    to(open_bench(drop(page, ("offer.txt", hand_made.MAIL))), "circuit")
    page.text_input(key="field_requirement_margin").set_value("25").run()
    to(page, "choose")
    assert page.dataframe[0].value["Verdict"].tolist() == ["▼ falls short"]


def test_no_part_at_the_frequency_is_an_answer(page):
    bench = hand_made.BENCH_TEXT.replace("frequency_mhz = 26.0", "frequency_mhz = 25.0")
    to(open_bench(drop(page, ("offer.txt", hand_made.MAIL)), bench), "choose")
    assert headings(page) == ["## None of the parts read offers 25 MHz"]
    assert "does not offer 25 MHz" in said(page)
    assert headings(to(page, "review")) == ["## None of the parts read offers 25 MHz"]


def test_the_review_has_verdicts_numbers_and_cautions(page):
    to(open_bench(drop(page, ("offer.txt", hand_made.MAIL))), "choose")
    page.button(key="to_review").click().run()
    assert not page.exception
    assert "ABX-26" in headings(page)[0]
    told = said(page)
    assert "Starts and keeps going: R1 headroom" in told
    assert "<details>" in told
    assert "qualified people" in told


def test_a_field_that_is_not_used_is_told_where_its_result_is_read(page):
    open_bench(drop(page, ("offer.txt", hand_made.MAIL)))
    page.text_input(key="field_circuit_swing_v").set_value("a lot").run()
    assert "Swing, as measured: not used." in said(to(page, "choose"))


def test_every_widget_has_a_key(page):
    open_bench(drop(page, ("offer.txt", hand_made.MAIL)))
    for view in ("sheets", "circuit", "choose", "review"):
        to(page, view)
        for kind in (page.button, page.text_input, page.selectbox, page.checkbox, page.file_uploader, page.text_area):
            assert all(one.key for one in kind)


def test_what_goes_wrong_in_ranking_is_told_and_the_work_kept(page, monkeypatch):
    def broken(*_):
        raise ZeroDivisionError("by hand")

    monkeypatch.setattr("compare.ranking.rank_sheets", broken)
    bench = hand_made.BENCH_TEXT.replace("margin = 5.0", "margin = 5.125")
    to(open_bench(drop(page, ("offer.txt", hand_made.MAIL)), bench), "choose")
    assert [one.value for one in page.error] == ["Something went wrong while ranking. Your work is kept."]
    assert len(page.session_state.work.sheets) == 1


def test_bench_and_sheets_of_the_command_line_are_open_at_once(monkeypatch, tmp_path):
    (tmp_path / "sheets").mkdir()
    for name in ("a.txt", "b.txt"):
        (tmp_path / "sheets" / name).write_text(hand_made.MAIL, encoding="utf-8")
    (tmp_path / "bench.toml").write_text(hand_made.BENCH_TEXT, encoding="utf-8")
    names = [str(tmp_path / "sheets"), str(tmp_path / "gone.txt"), f"{tmp_path / 'sheets' / 'a.txt'}#ABX-26"]
    monkeypatch.setattr("sys.argv", ["page.py", "--bench", str(tmp_path / "bench.toml"), "--", *names])
    page = AppTest.from_file(str(SCRIPT), default_timeout=60).run()
    assert not page.exception
    frame = page.dataframe[0].value
    assert frame["Sheet"].tolist() == ["a.txt", "b.txt", "gone.txt"]
    assert frame["Outcome"].tolist()[2] == "▼ not read"
    assert "gone.txt: no such file; check the name" in said(page)
    assert headings(to(page, "circuit")) == ["## The circuit presents 7.70 pF"]


def test_a_bench_file_that_is_gone_is_told_and_the_page_stands(monkeypatch, tmp_path):
    monkeypatch.setattr("sys.argv", ["page.py", "--bench", str(tmp_path / "gone.toml"), "--"])
    page = AppTest.from_file(str(SCRIPT), default_timeout=60).run()
    assert not page.exception
    assert "gone.toml: cannot be read" in said(to(page, "circuit"))


def test_two_parts_of_one_file_are_two_sheets(monkeypatch, tmp_path):
    rows = ["part number,frequency MHz,CL pF,ESR ohm max"] + [f"ABX-{load},26.0,{load},50" for load in (8, 10, 12)]
    (tmp_path / "list.csv").write_text("\n".join(rows) + "\n", encoding="utf-8")
    names = [f"{tmp_path / 'list.csv'}#ABX-{load}" for load in (8, 12)]
    monkeypatch.setattr("sys.argv", ["page.py", "--", *names])
    page = AppTest.from_file(str(SCRIPT), default_timeout=60).run()
    assert page.dataframe[0].value["Outcome"].tolist() == ["1 part", "1 part"]


def test_a_part_that_cannot_be_told_comes_with_its_question(page):
    silent = hand_made.MAIL.replace("ESR 50 Ω max\n", "")
    to(open_bench(drop(page, ("offer.txt", silent))), "choose")
    assert page.dataframe[0].value["Tightest"].tolist() == ["ESR not stated"]
    assert "One cannot be told. Ask:" in said(page)
