"""The HTML of reports: escaped, in one file, nothing fetched, always light."""

import re

import made_sheets
from lxml import html
from reviewed_parts import dossier_of, part, radio

from compare.blocks import Drawn, Heading, Items, Report, Text, grid
from compare.margin_report import margin_report
from compare.picture import Pen, Picture
from compare.report_head import ReportHead
from compare.report_html import report_html

HOSTILE = "</td><script>alert('x')</script><img src=x onerror=y>&\""


def whole():
    return report_html(margin_report(radio(), ReportHead()))


def test_no_text_of_a_sheet_or_a_person_becomes_markup():
    one = dossier_of(
        part(
            made_sheets.reading("drive_level_uw", max=200.0, check=HOSTILE),
            number=HOSTILE,
            maker=HOSTILE,
            package=HOSTILE,
        ),
        file=f"{HOSTILE}.pdf",
    )
    head = dict.fromkeys(("number", "project", "board", "ic", "prepared", "strays", "confidentiality"), HOSTILE)
    text = report_html(margin_report(one, ReportHead(**head, alternates=({"candidate": HOSTILE},))))
    tree = html.fromstring(text)
    assert not tree.xpath("//script")
    assert not tree.xpath("//img")
    assert not tree.xpath("//@onerror")
    assert "alert('x')" in tree.text_content()


def test_every_kind_of_block_is_escaped():
    pen = Pen("#000000")
    pen.write(0, 0, HOSTILE)
    blocks = (
        Heading(HOSTILE),
        Heading(HOSTILE, 2),
        Text(HOSTILE),
        Text(HOSTILE, "code"),
        Items((HOSTILE,)),
        grid((HOSTILE,), [(HOSTILE,)]),
        Drawn(Picture(10, 10, tuple(pen.marks), HOSTILE), HOSTILE),
    )
    tree = html.fromstring(report_html(Report(HOSTILE, HOSTILE, blocks)))
    assert not tree.xpath("//script | //img")


def test_it_fetches_nothing():
    text = whole()
    assert not re.findall(r"(?:src|href)=[\"'](?!#|data:)", text)
    assert "url(" not in text
    assert "@import" not in text
    assert "default-src 'none'" in text


def test_each_section_can_be_reached_from_the_contents():
    tree = html.fromstring(whole())
    targets = [link.removeprefix("#") for link in tree.xpath("//nav//a/@href")]
    assert len(targets) == 15
    assert all(tree.xpath(f"//h2[@id='{target}']") for target in targets)


def test_pictures_are_inline_and_told_to_those_who_do_not_see_them():
    tree = html.fromstring(whole())
    pictures = tree.xpath("//figure/*[local-name()='svg']")
    assert len(pictures) == 6
    assert all(one.get("aria-label") for one in pictures)


def test_it_is_always_light():
    assert "color-scheme: light" in whole()
    assert "prefers-color-scheme" not in whole()
