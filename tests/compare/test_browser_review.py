"""The reviewer's job in a real browser: from an empty page to a report that stands without the program."""

import io
import json
import re
import subprocess
from pathlib import Path

import hand_made
import pytest
from lxml import etree
from PIL import Image
from pypdf import PdfReader
from test_browser import COMMAND, HOME, SAMPLES, address, chromium, served, view  # noqa: F401

from compare.answers import FIGURES

pytestmark = pytest.mark.browser
SHEET = SAMPLES / "brindlewick_bwk21_26mhz.pdf"


@pytest.fixture
def review(view):  # noqa: F811
    """The page with one sheet of the samples open, at Review."""
    view.locator("input[type=file]").first.set_input_files(str(SHEET))
    view.get_by_text("1 sheet, 1 part").wait_for(timeout=60_000)
    view.keyboard.press("5")
    view.get_by_role("heading", name=re.compile("BWK21-26.000-08")).wait_for(timeout=60_000)
    view.locator(".st-key-margin_against_esr svg").first.wait_for(timeout=60_000)
    return view


@pytest.fixture(scope="module")
def told(tmp_path_factory):
    """What the command line says of the same sheet and bench."""
    bench = tmp_path_factory.mktemp("told") / "bench.toml"
    bench.write_text(hand_made.BENCH_TEXT, encoding="utf-8")
    done = subprocess.run(
        [*COMMAND, "review", str(SHEET), "--bench", str(bench), "--json"], capture_output=True, check=False
    )
    return json.loads(done.stdout)["reviews"][0]


def saved(view, button):  # noqa: F811
    with view.expect_download(timeout=60_000) as download:
        button.click()
    return Path(download.value.path()).read_bytes()


def printed(cells):
    return [float(cell.replace("−", "-")) for cell in cells]


def test_verdict_number_charts_and_report_from_an_empty_page(review, told, tmp_path):
    page = review
    assert page.get_by_text(re.compile("It would fall short if|would be met if")).first.is_visible()

    line = page.locator(".qf-seven details", has_text="Margin as a bench test sees it")
    assert f"{told['margin']['low']:.3g}" in line.locator("summary").inner_text()
    line.locator("summary").focus()
    page.keyboard.press("Enter")
    opened = line.locator(".qf-how").inner_text()
    assert "margin = −Rn / RL" in opened
    assert "stated p.1" in opened
    assert "Takes for granted" in opened
    assert "The verdict would turn if" in opened

    page.locator(".st-key-ppm_against_load_save button").first.click()
    picture = Image.open(io.BytesIO(saved(page, page.get_by_role("button", name="PNG"))))
    assert picture.format == "PNG"
    assert picture.width > 1000
    vector = etree.fromstring(saved(page, page.get_by_role("button", name="SVG")))
    assert "load at the crystal, pF" in "".join(vector.itertext())
    rows = saved(page, page.get_by_role("button", name="Figures, CSV")).decode("utf-8-sig").splitlines()
    assert rows[0].startswith('"Load, pF"') or rows[0].startswith("Load, pF") or "Load, pF" in rows[0]
    assert len(rows) > 100
    page.keyboard.press("Escape")

    html = saved(page, page.get_by_role("button", name="HTML, one file"))
    text = html.decode("utf-8")
    for key in ("margin", "total_ppm", "drive_level_uw", "circuit_load_pf"):
        name = re.escape(FIGURES[key].name)
        cells = re.search(rf"<td>{name}</td>" + r'<td class="n">([^<]+)</td>' * 3, text).groups()
        assert printed(cells) == pytest.approx([told[key][end] for end in ("low", "mid", "high")], rel=5.1e-6)
    pdf = PdfReader(io.BytesIO(saved(page, page.get_by_role("button", name="Save report, PDF"))))
    assert "BWK21-26.000-08" in pdf.pages[0].extract_text()
    assert len(pdf.pages) > 8

    assert page.faults == []
    assert {host for host in page.hosts if host is not None} <= set(HOME)
    assert_opens_without_a_network(page, html, tmp_path)


def assert_opens_without_a_network(page, html, tmp_path):
    (tmp_path / "report.html").write_bytes(html)
    context = page.context.browser.new_context(offline=True, color_scheme="dark")
    alone = context.new_page()
    asked, faults = [], []
    alone.on("request", lambda request: asked.append(request.url))
    alone.on("pageerror", lambda fault: faults.append(str(fault)))
    alone.goto((tmp_path / "report.html").as_uri())
    assert alone.get_by_role("heading", name="14 Signatures").is_visible()
    assert alone.locator("figure svg").count() == 6
    assert [url for url in asked if not url.startswith("file:")] == []
    assert faults == []
    assert alone.evaluate("getComputedStyle(document.body).backgroundColor") == "rgb(255, 255, 255)"
    assert alone.evaluate("document.documentElement.scrollWidth <= innerWidth")
    context.close()


def test_the_view_stays_inside_a_laptop_and_swaps_charts_for_tables(review):
    review.set_viewport_size({"width": 1280, "height": 800})
    assert review.evaluate("document.documentElement.scrollWidth") <= 1280
    review.get_by_text("Show tables").click()
    review.locator(".st-key-ppm_against_load_table").first.wait_for()
    review.locator(".st-key-ppm_against_load svg").wait_for(state="detached")
    review.context.grant_permissions(["clipboard-read", "clipboard-write"])
    review.locator(".st-key-ppm_against_load_table_copy button").click()
    review.get_by_role("button", name="Copied").wait_for()
    copied = review.evaluate("navigator.clipboard.readText()").splitlines()
    assert copied[0].split("\t")[:2] == ["Load, pF", "Shift, ppm"]
    assert float(copied[1].split("\t")[0]) > 0


def test_a_reading_is_shown_on_its_sheet(review):
    review.get_by_text("Show a reading on its sheet").click()
    shown = review.get_by_role("img", name="The reading as it is printed, a box round it")
    shown.wait_for(timeout=60_000)
    assert shown.is_visible()


def test_load_capacitors_are_tried_followed_and_put_back(review):
    review.keyboard.press("2")
    review.get_by_role("heading", name="Load capacitors for").wait_for(timeout=60_000)
    heading = review.get_by_role("heading", name=re.compile("The circuit presents"))
    before = heading.inner_text()
    review.get_by_role("button", name="Try it").first.click()
    review.get_by_text("Trial:").wait_for()
    review.wait_for_function(f"!document.body.innerText.includes({before!r})")
    review.reload()
    review.get_by_text("Trial:").wait_for(timeout=60_000)
    review.get_by_role("button", name="Put back").click()
    review.get_by_role("heading", name=before).wait_for()
    assert review.get_by_text("Trial:").count() == 0
