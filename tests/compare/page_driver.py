"""The page driven without a browser, for the tests of its views."""

from __future__ import annotations

from pathlib import Path

import hand_made
from streamlit.testing.v1 import AppTest

SCRIPT = Path(__file__).parents[2] / "compare" / "page.py"


def started():
    app = AppTest.from_file(str(SCRIPT), default_timeout=60).run()
    assert not app.exception
    return app


def said(page):
    """All that the page says, without the backslashes that keep markdown from reading signs as its own."""
    return "\n".join(element.value for kind in (page.markdown, page.html) for element in kind).replace("\\", "")


def headings(page):
    return [line for line in said(page).splitlines() if line.startswith("## ")]


def drop(page, name="offer.txt", text=hand_made.MAIL):
    page.file_uploader[0].set_value([(name, text.encode(), "text/plain")]).run()
    assert not page.exception
    return page


def open_bench(page, text=hand_made.BENCH_TEXT):
    to(page, "circuit")
    bench = next(one for one in page.file_uploader if one.key.startswith("bench_"))
    bench.set_value(("bench.toml", text.encode(), "application/toml")).run()
    assert not page.exception
    return page


def to(page, view):
    page.button(key=f"go_{view}").click().run()
    assert not page.exception
    return page


def press(page, key):
    page.button(key=key).click().run()
    assert not page.exception
    return page
