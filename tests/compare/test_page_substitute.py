"""The Substitute view without a browser: verdict, lines, swap, next, decisions, and what is taken without a circuit."""

import hand_made
import pytest
from page_driver import drop, headings, open_bench, press, said, started, to

WORSE = hand_made.MAIL.replace("ABX-26", "ABX-27").replace("±15 ppm", "±60 ppm")
SILENT = hand_made.MAIL.replace("ABX-26", "ABX-28").replace("ESR 50 Ω max\n", "")


@pytest.fixture
def sheets():
    app = started()
    for name, text in (("a.txt", hand_made.MAIL), ("b.txt", WORSE), ("c.txt", SILENT)):
        drop(app, name, text)
    return app


@pytest.fixture
def page(sheets):
    return to(open_bench(sheets), "substitute")


def pick(page, role, number):
    box = page.selectbox(key=f"field_swap_{role}")
    box.set_value(next(one for one in page_choices(page) if one[1] == number)).run()
    assert not page.exception
    return page


def page_choices(page):
    return [(f"{letter}.txt", f"ABX-{number}", 1) for letter, number in (("a", 26), ("b", 27), ("c", 28))]


def test_nothing_open_says_what_to_do():
    assert headings(to(started(), "substitute")) == ["## Nothing to compare yet"]


def test_one_part_alone_has_nothing_to_be_set_against():
    page = to(open_bench(drop(started())), "substitute")
    assert headings(page) == ["## Nothing to compare yet"]


def test_the_heading_is_the_verdict_and_what_decides_stands_below(page):
    pick(page, "incumbent", "ABX-26")
    pick(page, "candidate", "ABX-27")
    assert headings(page) == ["## ▼ Does not fit: ppm in all"]
    told = said(page)
    assert "On the unchanged board the frequency does not move." in told
    assert "### One line differs and matters" in told
    assert "### As the board is: ▼ falls short" in told


def test_a_missing_reading_comes_with_its_question(page):
    pick(page, "incumbent", "ABX-26")
    pick(page, "candidate", "ABX-28")
    assert headings(page) == ["## ◇ Cannot tell: ESR not stated"]
    assert "### Ask the maker" in said(page)
    assert "ABX-28" in said(page)


def test_the_two_change_places(page):
    pick(page, "incumbent", "ABX-27")
    pick(page, "candidate", "ABX-26")
    assert headings(page) == ["## ▲ Drop-in"]
    press(page, "swap_two")
    assert page.selectbox(key="field_swap_incumbent").value[1] == "ABX-26"
    assert headings(page) == ["## ▼ Does not fit: ppm in all"]


def test_the_next_candidate_follows_and_comes_round(page):
    pick(page, "incumbent", "ABX-26")
    seen = []
    for _ in range(3):
        seen.append(page.selectbox(key="field_swap_candidate").value[1])
        press(page, "next_candidate")
    assert sorted(seen[:2]) == ["ABX-27", "ABX-28"]
    assert seen[0] == seen[2]


def test_the_pair_is_the_same_after_another_view(page):
    pick(page, "incumbent", "ABX-27")
    pick(page, "candidate", "ABX-28")
    to(page, "choose")
    to(page, "substitute")
    assert page.selectbox(key="field_swap_incumbent").value[1] == "ABX-27"
    assert page.selectbox(key="field_swap_candidate").value[1] == "ABX-28"


def test_without_a_circuit_it_says_what_is_taken(sheets):
    page = to(sheets, "substitute")
    pick(page, "incumbent", "ABX-26")
    pick(page, "candidate", "ABX-27")
    told = said(page)
    assert "Taken: the board presents the present part’s rated load, 8 pF" in told
    assert headings(page)[0].startswith("## ◇ Cannot tell: ")
    assert page.button(key="to_circuit").label == "Set the circuit"


def fill(page, **told):
    for name, text in told.items():
        field = next(one for one in page.text_input if one.key.startswith(f"{name}_"))
        field.set_value(text)
    next(one for one in page.button if one.label == "Keep decision").click().run()
    assert not page.exception
    return page


def test_a_decision_is_kept_with_name_board_and_reason_and_can_be_undone(page):
    pick(page, "incumbent", "ABX-27")
    pick(page, "candidate", "ABX-26")
    fill(page, board="", reason="")
    assert "not kept yet: the board and a reason must stand with it" in said(page)
    fill(page, by="M. Alder", board="Frost node, rev C", reason="second source")
    assert "proposed by M. Alder, " in said(page)
    assert "for Frost node, rev C: second source" in said(page)
    (kept,) = page.session_state.work.slot("decisions").values()
    assert kept["decisions"][0]["verdict"] == "drop-in"
    press(page, "undo")
    assert page.session_state.work.slot("decisions") == {}


def limit(page, ppm):
    to(page, "circuit")
    page.text_input(key="field_requirement_total_ppm").set_value(ppm).run()
    return to(page, "substitute")


def test_a_decision_whose_verdict_has_changed_since_says_so(page):
    limit(page, "200")
    pick(page, "incumbent", "ABX-26")
    pick(page, "candidate", "ABX-27")
    assert headings(page) == ["## ▲ Drop-in"]
    fill(page, by="M. Alder", board="rev C", reason="second source")
    assert "now it is" not in said(page)
    limit(page, "50")
    assert headings(page) == ["## ▼ Does not fit: ppm in all"]
    assert "When that was decided the verdict was ▲ drop-in; now it is ▼ does not fit." in said(page)


def test_every_widget_has_a_key(page):
    for kind in (page.button, page.text_input, page.selectbox, page.expander):
        assert all(getattr(one, "key", "x") for one in kind)
