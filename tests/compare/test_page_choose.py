"""The Choose view without a browser: filters, orders, supply, the chosen row, the command line's numbers saved."""

import json

import hand_made
import pytest
from page_driver import drop, headings, open_bench, press, said, started, to

from compare import export
from compare.command import main

SECOND = hand_made.MAIL.replace("ABX-26", "ABX-27").replace("±15 ppm", "±20 ppm") + "Package 2.0 x 1.6 mm\n"
THIRD = hand_made.MAIL.replace("ABX-26", "ABX-28").replace("ESR 50 Ω max\n", "") + "Package 2.5 x 2.0 mm\n"
OTHER = hand_made.MAIL.replace("ABX-26", "ABX-29").replace("26.000 MHz", "24.000 MHz")
OFFERS = "Part number;Preis (EUR);Bestand;Lieferzeit (Wochen)\nABX-26;0,31;500;16\nABX-27;0,21;12.000;\nZZ-1;1;1;1\n"


@pytest.fixture
def page():
    app = started()
    for name, text in (("a.txt", hand_made.MAIL), ("b.txt", SECOND), ("c.txt", THIRD), ("d.txt", OTHER)):
        drop(app, name, text)
    return to(open_bench(app), "choose")


def parts(page):
    return page.dataframe[0].value["Part"].tolist()


def choose(page, key, value):
    page.selectbox(key=f"field_choose_{key}").set_value(value).run()
    assert not page.exception
    return page


def take_list(page, text=OFFERS, name="offers.csv"):
    uploader = next(one for one in page.file_uploader if one.key.startswith("supply_list"))
    uploader.set_value((name, text.encode(), "text/csv")).run()
    assert not page.exception
    return page


def test_the_heading_is_the_answer_and_what_is_not_offered_is_a_press_away(page):
    assert headings(page) == ["## Two of three meet what is asked"]
    told = said(page)
    assert "3 of 4 parts read offer 26 MHz." in told
    assert "ABX-29" in told
    assert parts(page) == ["ABX-26", "ABX-27", "ABX-28"]


def test_filters_come_before_the_order_and_are_kept_in_the_work(page):
    choose(page, "package", "2.0 × 1.6")
    assert parts(page) == ["ABX-27"]
    assert "1 of 3 shown" in said(page)
    assert page.session_state.work.slot("filters") == {"package": "2.0 × 1.6"}
    choose(page, "package", "")
    assert parts(page) == ["ABX-26", "ABX-27", "ABX-28"]


def test_filters_that_leave_nothing_say_so(page):
    choose(page, "verdict", "cannot tell")
    page.text_input(key="field_choose_most_price").set_value("0,1 €").run()
    assert "No part passes these filters." in said(page)


def test_a_list_gives_supply_with_its_date_and_orders_by_it(page):
    take_list(page)
    told = said(page)
    assert "offers.csv: 2 lines taken over" in told
    assert "not among the parts that are open: ZZ-1" in told
    choose(page, "by", "price")
    assert parts(page) == ["ABX-27", "ABX-26", "ABX-28"]
    frame = page.dataframe[0].value
    assert frame["Price"].tolist() == ["0.21 €", "0.31 €", ""]
    assert frame["Lead time, weeks"].tolist() == ["", "16", ""]


def test_a_limit_leaves_out_what_is_not_known_and_counts_it(page):
    take_list(page)
    page.text_input(key="field_choose_most_weeks").set_value("20").run()
    assert parts(page) == ["ABX-26"]
    assert "1 of 3 shown; left out: 2 because the lead time is not known (lead time at most 20 weeks)" in said(page)


def test_a_limit_that_is_not_understood_is_said_and_not_used(page):
    page.text_input(key="field_choose_most_price").set_value("cheap").run()
    assert "a price is one number with its currency" in said(page)
    assert len(parts(page)) == 3


def test_a_list_without_part_numbers_is_refused_in_a_sentence(page):
    take_list(page, "colour,price\nred,1\n", "colours.csv")
    assert "colours.csv: no line of headings with a part number" in said(page)
    assert page.session_state.work.slot("supply") == {}


def test_why_one_stands_above_another_is_a_sentence(page):
    assert "Both meet. The tightest of both is ppm in all: " in said(page)
    page.selectbox(key="beside_1").set_value(3).run()
    assert "ABX-28 cannot be told (ESR not known). That counts before everything else." in said(page)


def test_weights_are_in_sight_where_the_order_is_theirs(page):
    take_list(page)
    choose(page, "by", "weights")
    assert "all weights are 0" in said(page)
    page.selectbox(key="field_weight_price").set_value(5).run()
    page.selectbox(key="field_weight_least_slack").set_value(1).run()
    assert "Weighed: least slack 1, price 5." in said(page)
    assert parts(page) == ["ABX-27", "ABX-26", "ABX-28"]


def test_the_chosen_part_stays_chosen_when_the_order_changes(page):
    take_list(page)
    assert "### 1st: ABX-26" in said(page)
    choose(page, "by", "price")
    assert "### 1st: ABX-26" in said(page)
    to(page, "circuit")
    assert "### 1st: ABX-26" in said(to(page, "choose"))


def test_questions_about_what_cannot_be_told_are_ready(page):
    told = said(page)
    assert "### One cannot be told. Ask:" in told
    assert "ABX-28" in told.rpartition("Ask:")[2]


def test_an_undone_price_is_gone(page):
    take_list(page)
    press(page, "undo")
    assert page.session_state.work.slot("supply") == {}
    assert "Price" not in page.dataframe[0].value


def test_find_substitutes_opens_substitute_with_the_chosen_part(page):
    press(page, "to_substitute")
    assert page.selectbox(key="field_swap_incumbent").value[1] == "ABX-26"


def test_exports_have_the_numbers_of_the_command_line(page, tmp_path, capsys, monkeypatch):
    monkeypatch.chdir(tmp_path)
    for name, text in (("a.txt", hand_made.MAIL), ("b.txt", SECOND), ("c.txt", THIRD), ("d.txt", OTHER)):
        (tmp_path / name).write_text(text, encoding="utf-8")
    (tmp_path / "bench.toml").write_text(hand_made.BENCH_TEXT, encoding="utf-8")
    main(["rank", "a.txt", "b.txt", "c.txt", "d.txt", "--bench", "bench.toml", "--json"])
    told = json.loads(capsys.readouterr().out)
    from compare.ranking import rank_sheets

    contest = rank_sheets(page.session_state.work.corrected, page.session_state.work.desk.bench)
    assert json.loads(export.as_json(contest.result()))["rows"] == told["rows"]
    headings_, rows = export.rank_table(contest.result()["rows"])
    by_heading = dict(zip(headings_, rows[0], strict=True))
    assert by_heading["Drive level, high (µW)"] == told["rows"][0]["drive_level_uw"]["high"]
    assert by_heading["ppm in all, times over"] == told["rows"][0]["slack"]["total_ppm"]


def test_the_capacitor_that_helps_is_tried_at_once_and_can_be_put_back(page):
    before = page.session_state.work.desk
    press(page, "try_advice")
    assert "**Trial:**" in said(page)
    assert page.session_state.work.desk != before
    press(page, "drop_trial")
    assert page.session_state.work.desk == before


def test_charts_have_their_tables(page):
    told = said(page)
    assert "Times over, nominal" in told
    assert "Load, pF" in told
