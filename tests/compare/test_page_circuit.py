"""The Circuit view without a browser: roads, uses, what the circuit bears, trials, converters, gm settings."""

import hand_made
import pytest
from page_driver import drop, headings, open_bench, press, said, started, to
from reviewed_parts import WATCH_TEXT

FORK = """Part number ABX-32
Nominal frequency 32.768 kHz, tuning fork
Frequency tolerance ±20 ppm at 25 °C
Operating temperature -40 to 85 °C
Load capacitance 7 pF
ESR 60 kΩ max
Shunt capacitance C0 1.2 pF typ
Motional capacitance C1 3.4 fF typ
Drive level 0.5 µW max
Turnover temperature 25 ±5 °C
Parabolic coefficient -0.034 ppm/°C² typ
"""


@pytest.fixture
def page():
    return started()


def field(page, key):
    return page.text_input(key=f"field_{key.replace('.', '_')}")


def test_before_anything_is_given_the_drawing_shows_the_names_and_what_to_do(page):
    told = said(to(page, "circuit"))
    assert "Give the frequency" in told
    assert "Press a figure to change it" in told


def test_the_line_of_terms_leads_to_the_circuit(page):
    page.button(key="to_terms").click().run()
    assert headings(page) == ["## The circuit is not set yet"]


def test_what_the_circuit_bears_is_shown_without_any_sheet(page):
    told = said(open_bench(page))
    assert "### How much ESR this circuit can bear" in told
    assert "With margin 5, Ω" in told
    assert "more than most have" in told
    assert "Load capacitors for" not in told


def test_advice_is_tried_followed_and_kept_as_one_step(page):
    open_bench(drop(page))
    assert "### Load capacitors for ABX-26" in said(page)
    before = field(page, "circuit.output_capacitor_pf").value
    press(page, "try_0")
    tried = field(page, "circuit.output_capacitor_pf").value, field(page, "circuit.input_capacitor_pf").value
    assert tried != (before, before)
    assert "**Trial:**" in said(page)
    assert "**Trial:**" in said(to(page, "choose"))
    to(page, "circuit")
    press(page, "keep_trial")
    assert "**Trial:**" not in said(page)
    assert (field(page, "circuit.output_capacitor_pf").value, field(page, "circuit.input_capacitor_pf").value) == tried
    assert page.session_state.history.said.startswith("Tried and kept: ")


def test_a_trial_put_back_leaves_all_as_it_was(page):
    open_bench(drop(page))
    before, steps = page.session_state.work, len(page.session_state.history.steps)
    press(page, "try_0")
    press(page, "try_1")
    press(page, "drop_trial")
    assert page.session_state.work.desk.typed == before.desk.typed
    assert len(page.session_state.history.steps) == steps
    assert field(page, "circuit.input_capacitor_pf").value == "12 pF"


def test_the_ics_sheet_is_asked_for_by_its_own_words(page):
    open_bench(page)
    assert page.selectbox(key="road_0").value == "Transconductance, least and most"
    page.selectbox(key="road_0").set_value("None of these").run()
    assert "Ask the IC’s maker" in said(page)
    text = hand_made.BENCH_TEXT.split("[[circuit.condition]]")[0].replace("transconductance_ms = [4.6, 9.0]\n", "")
    open_bench(page, f"{text}\n[circuit.rating]\nesr_max_ohm = 90.0\nload_pf = 9.0\nfactor_inside = 5.0\n")
    assert page.selectbox(key="road_3").value == "ESR limit"
    assert field(page, "rating.esr_max_ohm").value == "90 Ω"


def test_a_use_shows_its_limit_and_source_and_all_uses_can_be_looked_at(page):
    open_bench(page, hand_made.BENCH_TEXT.replace("total_ppm = 50.0", 'use = "ble-active"'))
    told = said(page)
    assert "It must hold everything, at all times the link is up. Source: TI BLE5-Stack user guide" in told
    assert "no source yet" in told


def test_a_makers_one_figure_becomes_strays_that_present_the_same_load(page):
    open_bench(page)
    page.text_input(key="convert_single").set_value("3,4 pF").run()
    # By hand: 12 pF at both ends and 0.4 pF across: 2 (3.4 - 0.4) = 6 pF at each pin.
    assert "Stray A–0 and B–0: **6 pF** each, A–B **0.4 pF**." in said(page)
    press(page, "use_single")
    assert field(page, "circuit.input_stray_pf").value == "6 pF"
    # (12 + 6)/2 + 0.4.
    assert headings(page) == ["## The circuit presents 9.40 pF"]


def test_two_frequencies_become_strays_and_stay_with_the_bench(page):
    open_bench(drop(page))
    for key, text in (("pf_0", "12"), ("mhz_0", "26.000364"), ("pf_1", "15"), ("mhz_1", "25.999740")):
        page.text_input(key=f"convert_{key}").set_value(text).run()
    assert "inferred from measurement" in said(page)
    press(page, "use_pairs")
    measured = page.session_state.work.desk.bench.measured
    assert [pair[0] for pair in measured.pairs] == [12.0, 15.0]
    assert "measured.pairs" in said(page)


def test_two_frequencies_that_fit_nothing_are_told(page):
    open_bench(drop(page))
    for key, text in (("pf_0", "12"), ("mhz_0", "25.9990"), ("pf_1", "15"), ("mhz_1", "26.001")):
        page.text_input(key=f"convert_{key}").set_value(text).run()
    assert "no stray and no C1 explain both frequencies" in said(page)


def test_below_1_mhz_gm_settings_give_margin_ppm_and_the_one_to_take(page):
    open_bench(drop(page, "fork.txt", FORK), WATCH_TEXT)
    page.text_input(key="field_gm_settings").set_value("2 10 20 µS").run()
    told = said(page)
    assert "<td>▼ " in told
    assert "<td>▮ ▲ " in told
    assert "Least current: " in told
    assert " s a day" in told
    to(to(page, "choose"), "circuit")
    assert page.text_input(key="field_gm_settings").value == "2 10 20 µS"


def test_from_1_mhz_up_no_settings_are_asked_for(page):
    open_bench(drop(page))
    assert "Settings of the IC’s gm" not in said(page)


def test_the_heading_carries_the_steady_load_where_the_losses_shift_it(page):
    text = WATCH_TEXT.replace("feedback_resistor_kohm = 15000.0", "feedback_resistor_kohm = 2000.0")
    open_bench(drop(page, "fork.txt", FORK), text.replace("transconductance_ms = 0.02", "transconductance_ms = 0.1"))
    told = said(page)
    (heading,) = headings(page)
    # By hand: 13.5/2 + 0.3 = 7.05 pF without losses.
    assert "Together **7.05 pF**" in told
    assert heading != "## The circuit presents 7.05 pF"
    assert "In the steady state it is " in told
