"""The Review view without a browser: the verdict, charts or tables, bench readings, report."""

import hand_made
import pytest
from page_driver import drop, headings, open_bench, said, started, to

from compare.dossier import TITLES

TWO = "\n".join(
    ["part number,frequency MHz,CL pF,ESR ohm max,C0 pF max", "ABX-8,26.0,8,50,1.2", "ABX-10,26.0,10,500,1.2"]
)


@pytest.fixture
def page():
    return started()


@pytest.fixture
def review(page):
    return to(open_bench(drop(page)), "review")


def test_the_verdict_stands_in_seven_lines_with_what_would_overturn_it(review):
    assert headings(review) == ["## ▲ ABX-26 meets all seven"]
    told = said(review)
    assert "It would fall short if " in told
    assert told.count("<details>") > 20
    assert "How this number was reached: Margin" in told
    assert "frost, weak battery: " in told


def test_charts_can_be_swapped_for_their_tables(review):
    assert '<th class="n">Load, pF</th>' not in said(review)
    review.toggle(key="show_tables").set_value(True).run()
    assert not review.exception
    told = said(review)
    for head in ("Load, pF", "Transconductance, mS", "R1, Ω", "Temperature, °C", "Low, ppm"):
        assert f'<th class="n">{head}</th>' in told
    for title in ("R1 headroom against transconductance", "ppm against load", "Where the ppm go", "Times over"):
        assert f"### {title}" in told


def test_every_chart_and_the_report_can_be_saved(review):
    keys = {one.key for one in review.get("download_button")}
    for name in TITLES:
        assert {f"{name}_PNG", f"{name}_SVG", f"{name}_Figures, CSV"} <= keys
    assert {"report_pdf", "report_html", "spice_nominal", "spice_limit"} <= keys


def test_what_was_read_on_the_bench_stands_beside_what_is_computed(review):
    assert "not yet" in said(review)
    review.text_input(key="field_measured_stopping_resistor_ohm").set_value("560").run()
    assert not review.exception
    told = said(review)
    assert "560 Ω" in told
    assert "margin " in told
    assert review.session_state.work.desk.bench.measured.stopping_resistor_ohm == 560


def test_another_part_is_reviewed_when_it_is_chosen(page):
    to(open_bench(drop(page, "list.csv", TWO)), "review")
    first = headings(page)
    page.selectbox(key="review_part").set_value(1).run()
    assert not page.exception
    assert headings(page) != first
    assert "▼ ABX-10 falls short" in headings(page)[0]
    assert "would be met if" in said(page)


def test_what_cannot_be_told_names_what_is_missing_and_the_question(page):
    to(open_bench(drop(page, text=hand_made.MAIL.replace("ESR 50 Ω max\n", ""))), "review")
    told = said(page)
    assert headings(page)[0].startswith("## ◇ ABX-26: cannot tell")
    assert "Not known: ESR" in told
    assert "Ask: “What is the greatest equivalent series resistance" in told
    assert "Margin against ESR: not drawn" in told


def test_the_heads_fields_are_kept_for_the_next_report(review):
    review.text_input(key="field_report_project").set_value("Frost node").run()
    to(to(review, "choose"), "review")
    assert review.text_input(key="field_report_project").value == "Frost node"


def test_what_fails_is_shown_to_start_an_analysis_from(review):
    assert "Capacitor A–0 open (cracked, not soldered)" in said(review)


def test_text_of_a_sheet_never_becomes_markup(page):
    bad = hand_made.MAIL.replace("ABX-26", "ABX<script>alert(1)</script>")
    to(open_bench(drop(page, text=bad)), "review")
    for element in page.html:
        assert "<script>" not in element.value


def test_single_changes_are_tried_when_asked_for(page):
    bench = hand_made.BENCH_TEXT.replace("margin = 5.0", "margin = 20.0")
    to(open_bench(drop(page), bench), "review")
    assert "would meet" not in said(page)
    page.toggle(key="single_changes").set_value(True).run()
    assert not page.exception
    assert "A nominal transconductance of at least" in said(page)
