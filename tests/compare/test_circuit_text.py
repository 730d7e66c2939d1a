"""The bench in words. Sums are by hand: capacitors in series are their product over their sum."""

import hand_made
import pytest

from compare.bench import read_bench
from compare.circuit_text import (
    circuit_figures,
    circuit_heading,
    circuit_sum,
    gm_text,
    ppm_limits,
    sum_sentence,
    taken_sentences,
    terms,
)

BENCH = read_bench(hand_made.BENCH_TEXT, "bench.toml")
BARE = read_bench("[requirement]\nfrequency_mhz = 16.0\n", "bare.toml")
WITH_RESISTOR = read_bench(
    "requirement.frequency_mhz = 8.0\n[circuit]\ninput_capacitor_pf = 15.0\noutput_capacitor_pf = 10.0\n"
    "series_resistor_ohm = 470.0\namplifier_output_pf = 2.0\ninternal_pf = 4.0\n",
    "resistor.toml",
)


def test_the_load_is_two_capacitors_in_series_with_the_stray_across():
    # 14.6 pF and 14.6 pF in series are 7.3 pF, with 0.4 pF beside them 7.7 pF.
    total = circuit_sum(BENCH)
    assert total.mid == pytest.approx(7.7)
    # Fitted 12 pF ±1 %, stray 2.6 pF ±15 %, across 0.4 pF ±15 %, all low and all high.
    assert total.low == pytest.approx((12 * 0.99 + 2.6 * 0.85) / 2 + 0.4 * 0.85)
    assert total.high == pytest.approx((12 * 1.01 + 2.6 * 1.15) / 2 + 0.4 * 1.15)


def test_the_sum_in_words_names_each_pair_of_nodes():
    assert sum_sentence(BENCH).startswith(
        "**A–0** 14.60 pF in series with **B–0** 14.60 pF is 7.30 pF; beside it **A–B** 0.40 pF. "
        "Together **7.70 pF**, with all tolerances **7.38…8.02 pF**."
    )


def test_what_lies_ahead_of_the_series_resistor_is_not_in_the_sum_and_is_told():
    # A–0: 15 + 3 + 4 inside; B–0: 10 + 3; in series 8.171 pF, and 0.5 pF across.
    assert circuit_sum(WITH_RESISTOR).mid == pytest.approx(22 * 13 / 35 + 0.5)
    assert "6 pF at O lie ahead of the series resistor and are not in this sum." in sum_sentence(WITH_RESISTOR)


def test_a_fitted_capacitor_not_known_leaves_the_load_untold():
    assert circuit_sum(BARE) is None
    assert circuit_heading(BARE) == "The load is not known yet"
    assert sum_sentence(BARE) == "Fitted A–0 and B–0: not known, so the load cannot be told."


def test_the_heading_is_the_answer():
    assert circuit_heading(BENCH) == "The circuit presents 7.70 pF"
    assert circuit_heading(None) == "The circuit is not set yet"


def test_what_was_taken_by_default_is_said_by_the_names_on_the_page():
    said = taken_sentences(BARE)
    assert "Stray, A–0: not given, 3 pF taken, ±50 %." in said
    assert "Feedback resistor: not given, 1000 kΩ taken, as from 1 MHz up." in said
    assert said[-1].startswith("Not known: gm, least; Fitted, A–0; Fitted, B–0; Swing, as measured.")
    assert taken_sentences(BENCH) == []


def test_the_line_of_terms_says_what_is_asked():
    assert terms(BENCH) == [
        "Asked at **26 MHz**",
        "**±50 ppm** in all, 10 years",
        "**−30…+60 °C**",
        "margin **5** (house rule 14)",
        "start-up within **2 ms**",
        "load **7.70 pF** (7.38…8.02)",
        "gm **3.6…9 mS**",
    ]
    assert terms(BARE) == ["Asked at **16 MHz**", "margin **5** (by default)"]


def test_beside_a_use_the_tighter_limit_counts_on_each_side():
    # The uses table gives ±50 ppm for the active clock of Bluetooth LE.
    use = '[requirement]\nfrequency_mhz = 26.0\nuse = "ble-active"\n'
    assert ppm_limits(read_bench(use, "b")) == (-50.0, 50.0)
    assert ppm_limits(read_bench(use + "total_ppm = 30.0\n", "b")) == (-30.0, 30.0)
    assert ppm_limits(read_bench(use + "total_ppm = 80.0\n", "b")) == (-50.0, 50.0)
    assert ppm_limits(BARE) is None


def test_a_watch_oscillators_gm_is_said_in_microsiemens():
    assert gm_text(0.0105, 0.0115) == "10.5…11.5 µS"
    assert gm_text(3.6, 9.0) == "3.6…9 mS"


def test_the_drawing_tells_given_taken_none_and_not_known_apart():
    figures = circuit_figures(BARE)
    assert (figures.input_fitted.text, figures.input_fitted.state) == ("not known", "unknown")
    assert (figures.input_stray.text, figures.input_stray.state) == ("3 pF, taken", "taken")
    assert (figures.input_inside.text, figures.input_inside.state) == ("none", "none")
    assert circuit_figures(BENCH).input_stray.text == "2.6 pF"
    assert figures.series_resistor is None
    assert circuit_figures(WITH_RESISTOR).series_resistor.text == "470 Ω"


def test_a_clocks_limit_is_said_in_seconds_a_day_too():
    watch = read_bench("[requirement]\nfrequency_mhz = 0.032768\ntotal_ppm = 50.0\n", "watch.toml")
    assert "**±50 ppm** (±4.32 s a day) in all, 10 years" in terms(watch)
