"""The buyer's job in a real browser: from an empty page to a verdict, the maker's question and a kept decision."""

import json
import re
import subprocess
from pathlib import Path

import hand_made
import pytest
import python_calamine
from test_browser import COMMAND, HOME, SAMPLES, address, served, state_of, view  # noqa: F401

pytestmark = pytest.mark.browser
SHEETS = ("brindlewick_bwk21_26mhz.pdf", "orchard_node_purchasing_list.xlsx", "kirschgrund_lagerliste_de.csv")
OLD, NEW = SHEETS[0], f"{SHEETS[1]}#MLQ20-26M000-08C"
OFFERS = "Part number;Preis (EUR);Lieferzeit (Wochen)\nMLQ20-26M000-08C;0,18;6\nBWK21-26.000-08;0,24;14\n"


@pytest.fixture
def page(view):  # noqa: F811
    view.context.grant_permissions(["clipboard-read", "clipboard-write"])
    view.locator("input[type=file]").first.set_input_files([str(SAMPLES / name) for name in SHEETS])
    view.get_by_text("3 sheets, ").first.wait_for(timeout=120_000)
    return view


def clipboard(page):
    return page.evaluate("navigator.clipboard.readText()")


def pick(page, label, part):
    box = page.get_by_label(label, exact=True)
    box.click()
    box.fill(part)
    page.get_by_role("option", name=re.compile(re.escape(part))).first.click()


def heading(page, text):
    found = page.get_by_role("heading", name=text)
    found.wait_for(timeout=60_000)
    return found


def saved(page, button, path):
    with page.expect_download() as download:
        page.get_by_role("button", name=button).click()
    download.value.save_as(path)
    return path


def quiet(page):
    """Wait until what was pressed is drawn: the keyboard goes to the page and not to a list that closes."""
    page.locator("[data-stale=true]").first.wait_for(state="detached", timeout=60_000)
    page.evaluate("document.activeElement.blur()")


def test_two_parts_give_a_verdict_a_question_a_decision_and_the_command_lines_numbers(page, tmp_path):
    page.keyboard.press("4")
    pick(page, "Present part", "BWK21-26.000-08")
    pick(page, "Candidate", "MLQ20-26M000-08C")
    heading(page, "◇ Cannot tell: pads not stated")
    heading(page, re.compile("lines differ"))
    assert page.locator(".qf-swap td.lever svg").count() > 2

    quiet(page)
    page.keyboard.press("q")
    page.get_by_text("Copied").first.wait_for()
    assert "Which pads of MLQ20-26M000-08C carry the crystal" in clipboard(page)
    page.get_by_role("button", name="Copy table").click()
    page.get_by_text("Copied").first.wait_for()
    copied = clipboard(page).splitlines()
    assert copied[0].startswith("Reading\tUnit\tPresent: BWK21-26.000-08\tCandidate: MLQ20-26M000-08C\tDifference")
    assert len({line.count("\t") for line in copied}) == 1
    page.locator('.qf-swap button[data-copy="1.5"]').first.click()
    page.locator(".qf-figure.copied").wait_for()
    assert clipboard(page) == "1.5"

    page.get_by_label("By", exact=True).fill("M. Alder")
    page.get_by_label("For board").fill("Frost node, rev C")
    page.get_by_label("Reason").fill("second source asked for")
    page.get_by_role("button", name="Keep decision").click()
    page.get_by_text("proposed by M. Alder").wait_for(timeout=60_000)

    on_page = json.loads(saved(page, "Save .json", tmp_path / "page.json").read_text(encoding="utf-8"))
    bench = tmp_path / "bench.toml"
    bench.write_text(hand_made.BENCH_TEXT, encoding="utf-8")
    told = subprocess.run(
        [*COMMAND, "substitute", OLD, NEW, "--bench", str(bench), "--json"],
        capture_output=True,
        text=True,
        check=False,
        cwd=SAMPLES,
    )
    assert on_page["candidates"] == json.loads(told.stdout)["candidates"]
    book = python_calamine.CalamineWorkbook.from_path(str(saved(page, "Save .xlsx", tmp_path / "swap.xlsx")))
    assert book.sheet_names == ["lines", "verdict", "numbers", "sources", "decisions"]
    assert "second source asked for" in book.get_sheet_by_name("decisions").to_python()[1]
    verdict = dict(book.get_sheet_by_name("verdict").to_python())
    shift = on_page["candidates"][0]["shift_ppm"]
    assert verdict["Shift on the unchanged board, high (ppm)"] == pytest.approx(shift["high"], rel=1e-14)

    page.reload()
    heading(page, "◇ Cannot tell: pads not stated")
    assert page.get_by_text("proposed by M. Alder").is_visible()
    quiet(page)
    page.get_by_role("button", name="Swap the two").wait_for()
    page.wait_for_timeout(500)
    page.keyboard.press("x")
    page.get_by_text("proposed by M. Alder").wait_for(state="detached")
    assert page.faults == []
    assert {host for host in page.hosts if host is not None} <= set(HOME)


def test_prices_from_a_list_put_the_candidates_in_order_and_travel_with_the_workbook(page, tmp_path):
    offers = tmp_path / "offers.csv"
    offers.write_text(OFFERS, encoding="utf-8")
    page.keyboard.press("3")
    heading(page, re.compile("what is asked"))
    page.get_by_text("Price, stock, lead time").click()
    page.locator(".st-key-supply_open input[type=file]").set_input_files(str(offers))
    page.get_by_text("offers.csv: 2 lines taken over").wait_for(timeout=60_000)
    pick(page, "In order of", "price")
    quiet(page)
    book = python_calamine.CalamineWorkbook.from_path(str(saved(page, "Save .xlsx", tmp_path / "ranking.xlsx")))
    heads, *rows = book.get_sheet_by_name("ranking").to_python()
    priced = {row[heads.index("Part number")]: row[heads.index("Price")] for row in rows}
    assert (priced["MLQ20-26M000-08C"], priced["BWK21-26.000-08"]) == (0.18, 0.24)
    assert rows[0][heads.index("Part number")] == "BWK21-26.000-08"
    sources = book.get_sheet_by_name("sources").to_python()
    at = {name: number for number, name in enumerate(sources[0])}
    assert {len(row[at["SHA-256"]]) for row in sources[1:]} == {64}
    assert any(row[at["File"]] == OLD and row[at["Page"]] == 1 for row in sources[1:])
    assert "0.24 €" in page.get_by_role("button", name="0.24 €").inner_text()
    assert page.evaluate("document.documentElement.scrollWidth") <= 1440
    assert page.faults == []
    assert Path(offers).exists()
