"""The verdict in seven lines."""

import made_sheets
import pytest
from reviewed_parts import bench, dossier_of, part, radio, watch

from compare.bench import read_bench
from compare.verdict_lines import SEVEN, heading, sentences, verdict_lines


def lines(dossier):
    return {one.key: one for one in verdict_lines(dossier)}


def test_all_seven_stand_there_with_what_is_asked():
    found = verdict_lines(radio())
    assert tuple(one.key for one in found) == SEVEN
    by_key = lines(radio())
    assert by_key["margin"].asked == "at least 5"
    assert by_key["total_ppm"].asked == "within ±50 ppm"
    assert by_key["drive_level_uw"].asked == "at most 200 µW"
    assert by_key["startup_ms"].asked == "within 2 ms"
    assert (by_key["operating_temperature_c"].worst, by_key["operating_temperature_c"].asked) == (
        "−40…+85 °C",
        "covers −30…+60 °C",
    )
    assert all(one.verdict == "▲ meets" for one in found)


def test_what_is_not_asked_says_so_and_shows_its_number_still():
    text = "[requirement]\nfrequency_mhz = 26.0\n[circuit]\ninput_capacitor_pf = 12.0\noutput_capacitor_pf = 12.0\n"
    found = lines(dossier_of(part(), read_bench(f"{text}transconductance_ms = 6.0\n", "bare.toml")))
    for key in ("total_ppm", "startup_ms", "operating_temperature_c"):
        assert found[key].verdict == "· not asked"
        assert not found[key].is_asked
    assert found["total_ppm"].worst.endswith(" ppm")


def test_the_worst_case_is_the_end_that_counts():
    found, review = lines(radio()), radio().review
    assert float(found["margin"].worst) == pytest.approx(review["margin"]["low"], rel=5e-3)
    assert found["drive_level_uw"].worst.removesuffix(" µW") == f"{review['drive_level_uw']['high']:.3g}"
    assert found["margin"].times_over == f"{review['slack']['margin']:.2f}"


def test_a_clock_has_seconds_a_day_in_its_line():
    assert lines(watch())["total_ppm"].worst.endswith(" s a day")


def test_where_the_error_of_frequency_falls_names_the_side_nearer_to_its_limit():
    assert lines(radio())["total_ppm"].falls.startswith("make, drift and ageing high; ")
    assert lines(watch())["total_ppm"].falls.startswith("make, drift and ageing low; ")


def test_the_heading_counts_what_is_met():
    assert heading(radio().review, verdict_lines(radio())) == "▲ ABX-26 meets all seven"
    short = dossier_of(part(), bench(margin="margin = 20.0"))
    assert heading(short.review, verdict_lines(short)) == "▼ ABX-26 falls short in three of seven"
    silent = dossier_of(part(without=("esr_ohm",)))
    assert heading(silent.review, verdict_lines(silent)) == "◇ ABX-26: cannot tell"


def test_a_reading_that_waits_is_in_the_heading():
    waits = dossier_of(part(made_sheets.reading("esr_ohm", 28.0, max=50.0, check="R1 or RL?")))
    assert heading(waits.review, verdict_lines(waits)).endswith(", as read so far")
    assert "One waits to be looked at." in sentences(waits, verdict_lines(waits))


def test_what_would_overturn_it_stands_in_the_second_sentence():
    said = sentences(radio(), verdict_lines(radio()))
    assert said[0].startswith("Tightest: ")
    assert said[1].startswith("It would fall short if the ")


def test_what_a_person_entered_is_counted():
    typed = dossier_of(part(made_sheets.reading("drive_level_uw", max=200.0, status="entered")))
    assert "One value was entered by hand." in sentences(typed, verdict_lines(typed))


def test_an_unknown_reading_is_named():
    silent = dossier_of(part(without=("esr_ohm",)))
    assert "Not known: ESR." in sentences(silent, verdict_lines(silent))
    assert lines(silent)["margin"].worst == "not known"


def test_what_else_was_judged_follows_after_the_seven():
    third = dossier_of(part(mode="third overtone"))
    assert verdict_lines(third)[-1].key == "mode"


def test_every_number_opens_to_how_it_was_reached():
    for one in verdict_lines(radio()):
        assert (one.working is None) == (one.key == "operating_temperature_c")
