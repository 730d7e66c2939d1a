"""Pieces of HTML and markdown: nothing of a sheet gets through unescaped."""

from lxml import html

from compare.palette import DARK, LIGHT
from compare.pieces import look_html, plain, printed_html, shares_html, style, terms_html, together
from compare.review_shown import Share

EVIL = '<img src=x onerror="alert(1)">&'


def test_markdown_signs_of_a_sheet_are_shown_as_they_stand():
    assert plain("A_B*C [x](y) $1 :red[z] <b>") == r"A\_B\*C \[x\]\(y\) \$1 \:red\[z\] \<b\>"
    assert plain("MRB25-260 ±10 ppm") == r"MRB25\-260 ±10 ppm"


def test_figures_of_the_terms_are_bold():
    assert "<b>26 MHz</b>" in terms_html(["Asked at **26 MHz**"])


def test_the_style_is_in_the_colours_of_the_theme():
    assert LIGHT.accent in style(LIGHT)
    assert DARK.look_wash in style(DARK)
    assert "http" not in style(LIGHT)


def test_text_of_a_sheet_is_escaped_everywhere():
    for made in (shares_html([Share(EVIL, EVIL, 0.5)]), printed_html(EVIL), look_html(EVIL), terms_html([EVIL])):
        assert "<img" not in made
        assert EVIL in html.fromstring(f"<div>{made}</div>").text_content()


def test_a_figure_and_its_unit_stay_on_one_line():
    assert together("−30.5…+32.1 ppm") == "−30.5…+32.1\u00a0ppm"
    assert together("−0.3 (−20 %)") == "−0.3 (−20\u00a0%)"
    assert together("covers −30…+60 °C, 4 pads <b>") == "covers −30…+60\u00a0°C, 4 pads &lt;b&gt;"
