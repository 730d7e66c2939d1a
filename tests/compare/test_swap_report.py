"""The substitution report: what the page says, on paper, with decisions or blanks for them."""

from swap_made import BENCH, part, sheet

from compare import swap_shown
from compare.approval import Decision
from compare.blocks import Drawn, Grid, Heading, Text
from compare.levers import levers
from compare.report_html import report_html
from compare.substitution import substitute
from compare.swap_report import file_name, swap_report

OLD, NEW = part("OLD-1"), part("NEW<1>", esr_ohm=(None, None, 50.0))
DECISION = Decision(
    state="approved",
    by="M. Alder",
    when="2027-05-04T10:00",
    board="rev C",
    reason="same margin",
    evidence="report 17",
    verdict="does not fit",
)


def made(bench=BENCH, decisions=(), new=NEW):
    result = substitute([sheet(OLD)], [sheet(new)], bench)
    one = result["candidates"][0]
    bars = levers((sheet(OLD), OLD), (sheet(new), new), swap_shown.differing_fields(one), BENCH)
    found = swap_shown.swap_lines(one, bars)
    return swap_report(
        result,
        one,
        found,
        bench=bench,
        supply=[],
        decisions=decisions,
        sheets=[("OLD-1.txt", "a" * 64)],
        day="2027-05-04",
    )


def headings(report):
    return [block.text for block in report.blocks if isinstance(block, Heading)]


def cells(report):
    return [cell for block in report.blocks if isinstance(block, Grid) for row in block.rows for cell in row]


def test_the_answer_stands_first_and_every_line_is_there():
    report = made()
    assert report.title == "NEW<1>, Merrowby in place of OLD-1, Merrowby"
    assert headings(report)[:2] == ["Answer", "One line differs, none matters here"]
    assert Text("▲ Drop-in", "strong") in report.blocks
    told = cells(report)
    assert {"ESR, Ω", "40 max", "50 max", "+10 (+25 %)", "− looser"} <= set(told)
    assert "Make tolerance, ppm" in told
    assert "a" * 64 in told
    assert any(isinstance(block, Drawn) for block in report.blocks)


def test_without_a_decision_there_are_blanks_to_be_signed():
    told = cells(made())
    assert "Proposed, tested, approved or refused" in told
    assert "____________________" in told


def test_decisions_are_printed_and_a_verdict_changed_since_is_told():
    report = made(decisions=[DECISION])
    assert {"approved", "M. Alder", "2027-05-04", "rev C", "same margin", "report 17"} <= set(cells(report))
    notes = [block.text for block in report.blocks if isinstance(block, Text) and block.kind == "note"]
    assert notes == ["☞ When that was decided the verdict was ▼ does not fit; now it is ▲ drop-in."]


def test_without_a_bench_it_says_what_is_taken_and_draws_nothing():
    report = made(bench=None)
    said = [block.text for block in report.blocks if isinstance(block, Text)]
    assert any(text.startswith("Taken: the board presents the present part’s rated load") for text in said)
    assert not any(isinstance(block, Drawn) for block in report.blocks)


def test_text_of_a_sheet_is_escaped_in_the_file():
    page = report_html(made())
    text = page if isinstance(page, str) else page.decode()
    assert "NEW<1>" not in text
    assert "NEW&lt;1&gt;" in text


def test_the_file_has_a_name_that_any_system_takes():
    result = substitute([sheet(OLD)], [sheet(NEW)], BENCH)
    assert file_name(result, result["candidates"][0]) == "substitute_NEW_1__for_OLD-1"
