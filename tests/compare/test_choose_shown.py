"""What Choose says, from results by hand in the data contract's shape."""

import hand_made
import pytest

from compare import choose_shown
from compare.bench import read_bench
from compare.palette import LIGHT

BENCH = read_bench(hand_made.BENCH_TEXT, "bench.toml")
MEETS = hand_made.row(1, "MRB25-260-08H")
SHORT = hand_made.row(2, "TW.2016.26", "falls short", {"margin": 1.09, "total_ppm": 0.98, "drive_level_uw": 4.86})
UNTOLD = hand_made.row(3, "QX26-8", "cannot tell", {"margin": None, "total_ppm": 1.12}, missing=["esr_ohm"])


@pytest.mark.parametrize(
    ("rows", "heading"),
    [
        ([MEETS, SHORT, UNTOLD], "One of three meets what is asked"),
        ([MEETS, MEETS, SHORT], "Two of three meet what is asked"),
        ([MEETS, MEETS], "All two meet what is asked"),
        ([SHORT, UNTOLD], "None of two meets what is asked. Nearest: TW.2016.26, ppm in all 0.98 times"),
        ([MEETS], "The one part that offers it: ▲ meets"),
        ([], "None of the parts read offers 26 MHz"),
    ],
)
def test_the_heading_is_the_answer(rows, heading):
    assert choose_shown.choose_heading(hand_made.ranking(*rows), BENCH) == heading


def test_the_ranked_rows_say_what_the_strips_show():
    frame = choose_shown.rank_frame([MEETS, SHORT, UNTOLD], LIGHT)
    assert frame["Tightest"].tolist() == ["ppm in all 1.10 times", "ppm in all 0.98 times", "ESR not stated"]
    assert frame["Look"].tolist() == ["☞ 1", "☞ 1", "☞ 1"]
    assert all(address.startswith("data:image/svg+xml;base64,") for address in frame["Times over: 1 is the line"])


def test_the_legend_names_only_the_strips_that_are_there():
    assert choose_shown.strips_legend([SHORT]).startswith("Strips from the top: Margin, ppm in all, Drive. Heavy")


def test_rows_that_are_not_shown_are_said():
    assert choose_shown.shown_of(20_000, 500) == "The first 500 of 20000 are shown; the saved tables hold all of them."
    assert choose_shown.shown_of(9, 9) == ""
