"""What Choose says, from results by hand in the data contract's shape."""

import hand_made
import pytest

from compare import answers, choose_shown
from compare.bench import read_bench
from compare.choosing import Candidate
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
        ([MEETS, MEETS, MEETS], "All three meet what is asked"),
        ([MEETS, MEETS], "Both meet what is asked"),
        ([SHORT, UNTOLD], "Neither of two meets what is asked. Nearest: TW.2016.26, ppm in all 0.98 times"),
        ([MEETS], "The one part that offers it: ▲ meets"),
        ([], "None of the parts read offers 26 MHz"),
    ],
)
def test_the_heading_is_the_answer(rows, heading):
    nearest = answers.tightest_text(rows[0]) if rows else ""
    assert choose_shown.choose_heading(rows, BENCH, nearest) == heading


def kept(value, day="2031-05-04"):
    return {"value": value, "date": day, "from": "typed", "by": "M. Alder"}


PRICED = {"price": kept({"amount": 0.21, "currency": "€"}), "lead_time": kept(14.0), "status": kept("active")}


def test_the_ranked_rows_say_what_the_strips_show():
    frame = choose_shown.rank_frame([Candidate(row, {}) for row in (MEETS, SHORT, UNTOLD)], LIGHT)
    assert frame["Tightest"].tolist() == ["ppm in all 1.10 times", "ppm in all 0.98 times", "ESR not stated"]
    assert frame["Look"].tolist() == ["☞ 1", "☞ 1", "☞ 1"]
    assert all(address.startswith("data:image/svg+xml;base64,") for address in frame["Times over: 1 is the line"])
    assert "Stock, pieces" not in frame


def test_packages_are_written_alike_whatever_the_sheets_write():
    rows = [{**MEETS, "package": said} for said in ("2,5 x 2,0 mm", "2.5 × 2.0", "2520", None)]
    frame = choose_shown.rank_frame([Candidate(row, {}) for row in rows], LIGHT)
    assert frame["Package"].tolist() == ["2.5 × 2.0"] * 3 + [""]


def test_supply_stands_behind_the_rows_with_its_unit_in_the_heading():
    frame = choose_shown.rank_frame([Candidate(MEETS, PRICED), Candidate(SHORT, {})], LIGHT)
    assert frame["Price"].tolist() == ["0.21 €", ""]
    assert frame["Lead time, weeks"].tolist() == ["14", ""]


def test_supply_beside_the_chosen_row_says_whence_and_when():
    assert choose_shown.supply_rows(Candidate(MEETS, PRICED))[:2] == [
        ("Price", "0.21 €", "0.21", "✎ entered 2031-05-04"),
        ("Lead time", "14 weeks", "14", "✎ entered 2031-05-04"),
    ]


def test_alike_rows_share_one_strip():
    rows = [MEETS, hand_made.row(2, "OTHER")]
    strips = [choose_shown.strip_of(row, list(row["slack"]), LIGHT) for row in rows]
    assert strips[0] is strips[1]


def test_the_legend_names_only_the_strips_that_are_there():
    assert choose_shown.strips_legend([SHORT]).startswith("Strips from the top: Margin, ppm in all, Drive. Heavy")


def test_long_lists_are_shown_page_by_page_with_the_chosen_row_in_view():
    assert choose_shown.page_text(2, 20_000) == "Rows 201…300 of 20000"
    assert choose_shown.page_text(0, 9) == ""
    assert choose_shown.page_of(list(range(1000)), 512) == 5
    assert choose_shown.page_of([1, 2], 7) == 0


def test_what_does_not_offer_the_frequency_is_one_press_away():
    assert choose_shown.offered_text(9, 11, BENCH) == "9 of 11 parts read offer 26 MHz."
    assert choose_shown.offered_text(1, 11, BENCH) == "1 of 11 parts read offers 26 MHz."
    assert choose_shown.offered_text(1, 1, BENCH) == "The one part read offers 26 MHz."
    assert choose_shown.offered_text(3, 3, BENCH) == "All 3 parts read offer 26 MHz."
    assert [choose_shown.others_label(*counts) for counts in ((9, 11), (10, 11), (3, 3))] == [
        "The 2 others",
        "The other one",
        "",
    ]
    lines = choose_shown.other_lines([{"message": f"AB-{number}: offers 24 MHz"} for number in range(70)])
    assert (lines[0], lines[-1]) == ("AB-0: offers 24 MHz", "and 10 more; the saved JSON has all of them")


def test_the_questions_about_what_cannot_be_told_are_ready():
    untold = UNTOLD | {"maker": "Quenby", "questions": ["What is the greatest ESR of QX26-8 at 26 MHz?"]}
    assert choose_shown.to_ask([MEETS, untold]) == [("Quenby, QX26-8", "What is the greatest ESR of QX26-8 at 26 MHz?")]
    assert choose_shown.ask_heading(2) == "Two cannot be told. Ask:"


def test_a_page_of_rows_is_small_enough_to_send_at_each_change():
    names = list(MEETS["slack"])
    rows = [
        hand_made.row(
            place, f"PART-{place:05}", slack={name: 0.4 + 0.037 * place * (at + 1) for at, name in enumerate(names)}
        )
        for place in range(1, choose_shown.PAGE_ROWS + 1)
    ]
    frame = choose_shown.rank_frame([Candidate(row, PRICED) for row in rows], LIGHT)
    assert len(set(frame[choose_shown.STRIP_COLUMN])) == len(rows)
    # Half a megabyte is what a change may cost; a change sends the rows once, and charts and words beside them.
    assert len(frame.to_csv().encode()) < 300_000
