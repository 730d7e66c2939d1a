"""The Sheets view without a browser: what waits is settled, values are corrected, work is kept, recalled, forgotten."""

import tempfile
from pathlib import Path

import hand_made
import pytest
from streamlit.testing.v1 import AppTest

from compare import keeping
from compare.folio import read_folio

SCRIPT = Path(__file__).parents[2] / "compare" / "page.py"
# An ESR of 50 kΩ is a thousand times what it must be: the reader asks for a look.
DOUBTFUL = hand_made.MAIL.replace("ESR 50 Ω max", "ESR 50 kΩ max")


def start():
    app = AppTest.from_file(str(SCRIPT), default_timeout=60).run()
    assert not app.exception
    return app


@pytest.fixture
def page():
    return start()


def said(page):
    return "\n".join(element.value for kind in (page.markdown, page.html) for element in kind).replace("\\", "")


def drop(page, *files):
    page.file_uploader[0].set_value([(name, data.encode(), "text/plain") for name, data in files]).run()
    assert not page.exception
    return page


def press(page, key):
    page.button(key=key).click().run()
    assert not page.exception
    return page


def readings(page):
    return page.dataframe[1].value.set_index("Reading")


def shown_buttons(page):
    return {one.key: one.label.replace("\\", "") for one in page.button}


def set_text(page, bound, text):
    field = next(one for one in page.text_input if one.key.startswith("entry_") and one.key.endswith(f"_{bound}"))
    field.set_value(text).run()
    assert not page.exception


def correct(page, **texts):
    press(page, "look_correct")
    for bound, text in texts.items():
        set_text(page, bound, text)
    return press(page, "entry_enter")


def titles(page):
    return {one.label for one in page.get("page_link")} | {page.session_state.pages["sheets"].title}


def test_what_waits_stands_open_with_reason_and_keys(page):
    drop(page, ("offer.txt", DOUBTFUL))
    told = said(page)
    assert "1 of 1 to look at: ESR of ABX-26" in told
    assert "50000 Ω is implausible" in told
    labels = shown_buttons(page)
    assert labels["look_other"] == "Take at most 50 Ω"
    assert (labels["look_correct"], labels["look_gone"]) == ("Correct…", "Not on the sheet")
    assert page.session_state.pages["sheets"].title == "Sheets ☞ 1"


def test_one_key_settles_it_and_undo_brings_it_back(page):
    drop(page, ("offer.txt", DOUBTFUL))
    press(page, "look_other")
    assert readings(page).loc["ESR", ["Max", "How we have it"]].tolist() == ["50", "✎ entered"]
    assert "Nothing left to look at." in said(page)
    assert page.session_state.pages["sheets"].title == "Sheets"
    press(page, "undo")
    assert readings(page).loc["ESR", "How we have it"].startswith("☞ look")
    assert page.session_state.pages["sheets"].title == "Sheets ☞ 1"


def test_kept_as_read_it_stays_stated(page):
    press(drop(page, ("offer.txt", DOUBTFUL)), "look_keep")
    assert readings(page).loc["ESR", "How we have it"] == "stated line 7, seen"


def test_later_goes_to_the_next_one_and_round(page):
    drop(page, ("a.txt", DOUBTFUL), ("b.txt", DOUBTFUL.replace("ABX-26", "ABX-27")))
    assert "1 of 2 to look at: ESR of ABX-26" in said(page)
    press(page, "look_later")
    assert "2 of 2 to look at: ESR of ABX-27" in said(page)
    assert "## ABX-27" in said(page)
    press(page, "look_later")
    assert "1 of 2 to look at" in said(page)


def test_once_settled_the_next_one_is_looked_at(page):
    drop(page, ("a.txt", DOUBTFUL), ("b.txt", DOUBTFUL.replace("ABX-26", "ABX-27")))
    press(page, "look_other")
    assert "1 of 1 to look at: ESR of ABX-27" in said(page)


def test_a_corrected_value_is_shown_with_the_sheets_who_and_why(page):
    drop(page, ("offer.txt", DOUBTFUL))
    press(page, "look_correct")
    set_text(page, "max", "0,055 kΩ")
    assert next(one.value for one in page.text_input if one.key.endswith("_max")) == "55 Ω"
    set_text(page, "why", "mail from the maker")
    page.text_input(key="entry_by").set_value("M. Quill").run()
    press(page, "entry_enter")
    row = readings(page).loc["ESR"]
    assert row[["Max", "How we have it", "Sheet says"]].tolist() == ["55", "✎ entered", "at most 50 kΩ"]
    told = said(page)
    assert "Corrected by M. Quill, " in told
    assert "The sheet says at most 50 kΩ." in told
    assert "Why: mail from the maker" in told
    assert "ESR 50 kΩ max" in told
    press(page, "look_put_back")
    assert readings(page).loc["ESR", "How we have it"].startswith("☞ look")


def test_an_absurd_value_is_not_entered_until_answered(page):
    drop(page, ("offer.txt", DOUBTFUL))
    press(page, "look_correct")
    set_text(page, "max", "60 kΩ")
    assert "60 kΩ: plausible is 2 to 3000 Ω. Meant 60 Ω? Not used until you say." in said(page)
    assert page.button(key="entry_enter").disabled
    press(page, "entry_use_max")
    press(page, "entry_enter")
    assert readings(page).loc["ESR", "Max"] == "60"


def test_an_absurd_value_can_be_kept(page):
    drop(page, ("offer.txt", DOUBTFUL))
    press(page, "look_correct")
    set_text(page, "max", "4 kΩ")
    press(page, "entry_keep_max")
    press(page, "entry_enter")
    assert readings(page).loc["ESR", "Max"] == "4000"


def test_a_reading_is_added_and_removed(page):
    drop(page, ("offer.txt", hand_made.MAIL))
    press(page, "add_reading")
    page.selectbox(key="entry_field").set_value("insulation_resistance_megohm").run()
    set_text(page, "min", "0,5 GΩ")
    press(page, "entry_enter")
    assert readings(page).loc["Insulation", ["Min", "How we have it"]].tolist() == ["500", "✎ entered"]
    press(page, "look_put_back")
    assert "Insulation" not in readings(page).index


def test_the_mode_is_a_word_that_can_be_entered(page):
    drop(page, ("offer.txt", hand_made.MAIL))
    press(page, "add_reading")
    page.selectbox(key="entry_field").set_value("mode").run()
    page.selectbox(key="entry_fact_mode_value").set_value("third overtone").run()
    press(page, "entry_enter")
    assert readings(page).loc["Mode", ["Typ", "How we have it", "Sheet says"]].tolist() == [
        "third overtone",
        "✎ entered",
        "fundamental",
    ]


def test_a_reading_not_on_the_sheet_is_out_and_comes_back_with_the_sheets_values(page):
    drop(page, ("offer.txt", DOUBTFUL))
    press(page, "look_gone")
    assert readings(page).loc["ESR", "How we have it"] == "✎ not on sheet"
    assert "Not stated: ESR." in said(page)
    press(page, "put_back_part")
    assert readings(page).loc["ESR", "How we have it"].startswith("☞ look")


def test_undo_goes_back_through_a_closed_sheet_and_a_bench_value(page):
    drop(page, ("offer.txt", DOUBTFUL))
    press(page, "look_other")
    press(page, "go_circuit")
    page.text_input(key="field_circuit_input_capacitor_pf").set_value("13").run()
    press(page, "go_sheets")
    press(page, "close_sheet")
    assert not page.session_state.work.sheets
    press(page, "undo")
    assert [one.sheet.file for one in page.session_state.work.sheets] == ["offer.txt"]
    press(page, "undo")
    assert page.session_state.work.desk.typed.get("circuit.input_capacitor_pf", "") == ""
    press(page, "undo")
    assert page.session_state.work.corrections == ()
    assert page.button(key="undo").disabled


def test_a_reload_finds_everything_and_can_still_undo(page):
    press(drop(page, ("offer.txt", DOUBTFUL)), "look_other")
    again = AppTest.from_file(str(SCRIPT), default_timeout=60)
    again.query_params["work"] = page.session_state.ident
    again.run()
    assert not again.exception
    assert readings(again).loc["ESR", ["Max", "How we have it"]].tolist() == ["50", "✎ entered"]
    assert again.session_state.work == page.session_state.work
    press(again, "undo")
    assert readings(again).loc["ESR", "How we have it"].startswith("☞ look")


def reloaded(page, **address):
    again = AppTest.from_file(str(SCRIPT), default_timeout=60)
    for key, value in {"work": page.session_state.ident, **address}.items():
        again.query_params[key] = value
    again.run()
    assert not again.exception
    return again


def test_a_reload_lands_on_the_same_part(page):
    drop(page, ("a.txt", hand_made.MAIL), ("b.txt", hand_made.MAIL.replace("ABX-26", "ABX-27")))
    again = reloaded(page, sheet=page.session_state.work.sheets[1].key, part="0")
    assert "## ABX-27" in said(again)
    assert "## ABX-26" in said(reloaded(page, sheet="gone", part="x"))


def test_two_tabs_of_one_work_do_not_write_over_each_other(page):
    drop(page, ("offer.txt", DOUBTFUL))
    other = reloaded(page)
    press(page, "look_other")
    press(other, "look_keep")
    assert "This work was changed in another tab too; from here on the two are kept apart." in said(other)
    assert other.session_state.ident != page.session_state.ident
    assert [one.what for one in keeping.recall(page.session_state.ident).work.corrections] == ["value"]
    assert [one.what for one in keeping.recall(other.session_state.ident).work.corrections] == ["as read"]


def test_an_empty_page_keeps_nothing_and_a_dropped_sheet_is_kept(page, state_folder):
    assert not state_folder.exists()
    drop(page, ("offer.txt", hand_made.MAIL))
    (kept,) = keeping.kept_works()
    assert (kept.ident, kept.sheets) == (page.session_state.ident, 1)


def test_other_work_on_this_machine_is_offered_on_an_empty_page(page):
    drop(page, ("offer.txt", DOUBTFUL))
    other = start()
    assert "Other work kept on this machine:" in said(other)
    other.session_state.work_menu = True
    assert not other.run().exception
    press(other, f"recall_page_{page.session_state.ident}")
    assert other.session_state.work == page.session_state.work
    third = start()
    press(third, f"forget_page_{page.session_state.ident}")
    assert "Other work kept on this machine:" not in said(third)
    assert keeping.kept_works() == []


def test_what_the_command_line_named_is_no_step_to_undo(monkeypatch, tmp_path):
    (tmp_path / "bench.toml").write_text(hand_made.BENCH_TEXT, encoding="utf-8")
    monkeypatch.setattr("sys.argv", ["page.py", "--bench", str(tmp_path / "bench.toml"), "--"])
    page = start()
    assert page.session_state.work.desk.bench is not None
    assert page.button(key="undo").disabled


def test_a_work_file_that_is_dropped_is_taken_up(page, tmp_path):
    press(drop(page, ("offer.txt", DOUBTFUL)), "look_other")
    from compare.folio import folio_bytes

    data = folio_bytes(page.session_state.work, keeping.now())
    other = start()
    other.file_uploader[0].set_value([("frost.folio", data, "application/zip")]).run()
    assert not other.exception
    assert readings(other).loc["ESR", "How we have it"] == "✎ entered"
    assert "The sheet itself is not on this machine; readings and words are kept." in said(other)
    assert read_folio(data, "x").work == other.session_state.work


def test_a_sheet_that_is_not_here_is_found_only_by_its_own_file(page):
    from compare.folio import folio_bytes

    data = folio_bytes(drop(page, ("offer.txt", DOUBTFUL)).session_state.work, keeping.now())
    other = start()
    other.file_uploader[0].set_value([("frost.folio", data, "application/zip")]).run()
    find = next(one for one in other.file_uploader if one.key.startswith("found_"))
    find.set_value(("else.txt", b"another", "text/plain")).run()
    assert "else.txt is not the file that was read: its fingerprint differs" in said(other)
    find = next(one for one in other.file_uploader if one.key.startswith("found_"))
    find.set_value(("offer.txt", DOUBTFUL.encode(), "text/plain")).run()
    assert "The sheet itself is not on this machine" not in said(other)


def test_a_work_file_that_is_damaged_is_told_and_the_work_stays(page):
    drop(page, ("offer.txt", hand_made.MAIL))
    page.file_uploader[0].set_value([("frost.folio", b"PK nothing", "application/zip")]).run()
    assert not page.exception
    assert "frost.folio: no work file, or a damaged one" in said(page)
    assert len(page.session_state.work.sheets) == 1


def test_a_work_file_of_the_command_line_is_open_at_once(monkeypatch):
    name = Path(__file__).parent / "data" / "work_version_1.folio"
    monkeypatch.setattr("sys.argv", ["page.py", "--", str(name)])
    page = start()
    assert page.session_state.work.name == "Frost node, rev B"
    assert readings(page).loc["ESR", ["Max", "How we have it"]].tolist() == ["42", "✎ entered"]


def test_forgotten_work_leaves_nothing_on_the_machine(page, state_folder, monkeypatch, tmp_path):
    monkeypatch.setattr(tempfile, "tempdir", str(tmp_path))
    press(drop(page, ("offer.txt", DOUBTFUL)), "look_other")
    assert state_folder.exists()
    page.session_state.work_menu = True
    page.run()
    press(page, "forget")
    press(page, "forget_now")
    assert not state_folder.exists()
    assert list(tmp_path.iterdir()) == []
    assert not page.session_state.work.sheets


def test_failures_are_listed_by_file_while_the_rest_goes_on(page):
    drop(page, ("broken.pdf", "%PDF-1.7 broken"), ("offer.txt", hand_made.MAIL), ("notes.txt", "Minutes on apples."))
    assert page.dataframe[0].value["Outcome"].tolist() == ["▼ not read", "1 part", "▼ no crystal"]
    told = said(page)
    assert "▼ notes.txt: " in told
    assert "▼ broken.pdf: " in told


def test_all_parts_stand_in_one_table_with_their_marks(page):
    drop(page, ("a.txt", DOUBTFUL), ("b.txt", hand_made.MAIL.replace("ABX-26", "ABX-27")))
    page.segmented_control(key="parts_shown").set_value("All parts").run()
    assert not page.exception
    table = page.dataframe[1].value.set_index("Part")
    assert table["ESR"].tolist() == ["☞ at most 50 kΩ", "at most 50 Ω"]
    assert table["Look"].tolist() == ["☞ 1", ""]


def test_the_paste_box_is_a_new_one_once_its_text_is_read(page):
    box = page.text_area[0].key
    page.text_area[0].set_value(hand_made.MAIL)
    press(page, "read_pasted")
    assert page.text_area[0].key != box
    assert page.text_area[0].value == ""


def test_a_circuit_is_added_with_its_own_fields_and_removed(page):
    press(page, "go_circuit")
    page.text_input(key="field_circuit_input_capacitor_pf").set_value("13").run()
    page.session_state.work_menu = True
    page.run()
    press(page, "add_circuit")
    assert page.text_input(key="field_circuit_input_capacitor_pf").value == ""
    press(page, "drop_circuit")
    assert page.text_input(key="field_circuit_input_capacitor_pf").value == "13 pF"


def test_a_part_of_a_long_list_is_found_by_its_number(page):
    rows = ["part number,frequency MHz,CL pF,ESR ohm max", *(f"ABX-{at:03},26.0,8,50" for at in range(400))]
    drop(page, ("list.csv", "\n".join(rows)))
    assert "## ABX-000" in said(page)
    find = next(one for one in page.text_input if one.key.startswith("find_part_"))
    find.set_value("x-12").run()
    assert "## ABX-120" in said(page)
    press(page, "next_part")
    assert "## ABX-121" in said(page)
    next(one for one in page.text_input if one.key.startswith("find_part_")).set_value("zzz").run()
    assert "No part number of this sheet holds “zzz”." in said(page)
