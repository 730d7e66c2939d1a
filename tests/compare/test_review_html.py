"""HTML of the Review view: everything opens, everything is escaped."""

from lxml import html
from reviewed_parts import dossier_of, part, radio

from compare.review_html import numbers_html, table_html, verdict_html, working_html
from compare.review_shown import keyed_numbers
from compare.verdict_lines import verdict_lines
from compare.working import words, working

HOSTILE = "<script>alert('x')</script>&\""


def test_each_line_opens_to_reason_formula_values_and_what_would_turn_it():
    tree = html.fromstring(verdict_html(verdict_lines(radio())))
    lines = tree.xpath("//details")
    assert len(lines) == 7
    opened = lines[1].xpath(".//*[@class='qf-how']")[0].text_content()
    for said in ("margin = −Rn / RL", "Result: ", "Takes for granted: ", "The verdict would turn if "):
        assert said in opened


def test_each_number_opens_to_how_it_was_reached():
    shown = keyed_numbers(radio().review, radio().bench)
    rows = [(one, working(radio(), key) if key in words() else None) for key, one in shown]
    tree = html.fromstring(numbers_html(rows))
    assert len(tree.xpath("//details")) == len(rows)
    assert "RL = R1 (1 + C0 / CL)²" in tree.text_content()


def test_text_of_a_sheet_stays_text():
    one = dossier_of(part(number=HOSTILE, package=HOSTILE), file=HOSTILE)
    made = verdict_html(verdict_lines(one)) + working_html(working(one, "margin"))
    made += table_html((HOSTILE,), [(HOSTILE,)], (0,))
    tree = html.fromstring(f"<div>{made}</div>")
    assert not tree.xpath("//script")
    assert HOSTILE in tree.text_content()


def test_what_is_not_met_looks_other_than_what_is():
    short = dossier_of(part(), radio().bench.model_copy(update={"requirement": _harder()}))
    classes = html.fromstring(verdict_html(verdict_lines(short))).xpath("//summary/span[last()]/@class")
    assert classes[:3] == ["short", "short", "short"]
    assert set(classes[3:]) == {"v"}


def _harder():
    return radio().bench.requirement.model_copy(update={"margin": 20.0})
