"""Pieces of HTML and markdown: nothing of a sheet gets through unescaped."""

from lxml import html

from compare.palette import DARK, LIGHT
from compare.pieces import judged_html, look_html, numbers_html, plain, printed_html, shares_html, style, terms_html
from compare.review_shown import Judged, Number, Share

EVIL = '<img src=x onerror="alert(1)">&'


def test_markdown_signs_of_a_sheet_are_shown_as_they_stand():
    assert plain("A_B*C [x](y) $1 :red[z] <b>") == r"A\_B\*C \[x\]\(y\) \$1 \:red\[z\] \<b\>"
    assert plain("MRB25-260 ±10 ppm") == r"MRB25\-260 ±10 ppm"


def test_text_of_a_sheet_is_escaped_everywhere():
    number = Number(EVIL, EVIL, EVIL, EVIL, EVIL, EVIL, EVIL)
    judged = Judged(EVIL, EVIL, EVIL, EVIL, EVIL)
    for made in (
        numbers_html([number]),
        judged_html([judged]),
        shares_html([Share(EVIL, EVIL, 0.5)]),
        printed_html(EVIL),
        look_html(EVIL),
        terms_html([EVIL]),
    ):
        assert "<img" not in made
        assert EVIL in html.fromstring(f"<div>{made}</div>").text_content()


def test_a_number_opens_to_how_it_was_reached():
    page = html.fromstring(
        f"<div>{numbers_html([Number('Margin', '6.7', '23.2', '38', '', 'derived', 'R over RL')])}</div>"
    )
    (row,) = page.iter("details")
    assert row.find("summary").text_content() == "Margin6.723.238derived"
    assert row.find("p").text == "R over RL"


def test_a_verdict_that_falls_short_is_told_apart_without_its_words():
    page = html.fromstring(judged_html([Judged("Margin", "4", "0.8 times", "▼ falls short", "why")]))
    assert [cell.get("class") for cell in page.iter("td")][3] == "short"


def test_figures_of_the_terms_are_bold():
    assert "<b>26 MHz</b>" in terms_html(["Asked at **26 MHz**"])


def test_the_style_is_in_the_colours_of_the_theme():
    assert LIGHT.accent in style(LIGHT)
    assert DARK.look_wash in style(DARK)
    assert "http" not in style(LIGHT)
