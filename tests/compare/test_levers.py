"""How much room each reading uses: shares by hand, and the exact chain's answer for parts by hand."""

import math

import hand_made
import pytest
from swap_made import BENCH, part, sheet

from compare.bench import read_bench
from compare.levers import levers, swapped
from compare.review import review


def lever(field, bench=BENCH, **values):
    old, new = part("OLD"), part("NEW", **values)
    return levers((sheet(old), old), (sheet(new), new), [field], bench).get(field)


def total_high(one, bench=BENCH):
    (found,) = review([sheet(one)], bench)["reviews"]
    return found["total_ppm"]["high"]


def test_a_wider_drift_uses_the_room_that_the_sum_had():
    # By hand: of the room 50 - sum, three ppm more of drift use three.
    before = total_high(part("OLD"))
    found = lever("frequency_stability_ppm", frequency_stability_ppm=(-15.0, None, 15.0))
    assert found.about == "total_ppm"
    assert found.used == pytest.approx(3 / (50 - before), rel=1e-6)
    assert found.says.startswith("sum +")
    assert found.says.endswith("limit ±50")
    assert not found.past


def test_past_the_room_the_requirement_is_no_longer_met():
    found = lever("frequency_stability_ppm", frequency_stability_ppm=(-45.0, None, 45.0))
    assert found.past
    assert found.used > 1


def test_a_tighter_reading_wins_room():
    assert lever("frequency_tolerance_ppm", frequency_tolerance_ppm=(-5.0, None, 5.0)).used < 0


def test_of_the_range_the_worse_end_counts_by_hand():
    # -40…+85 over the product's -30…+60: 10 °C stand over at the cold end, of which 5 go.
    found = lever("operating_temperature_c", operating_temperature_c=(-35.0, None, 85.0))
    assert (found.about, found.says) == ("operating_temperature_c", "covers −30…+60 °C")
    assert found.used == pytest.approx(0.5)
    short = lever("operating_temperature_c", operating_temperature_c=(-20.0, None, 85.0))
    assert short.past
    assert short.says == "does not cover −30…+60 °C"


def test_a_rated_drive_of_half_uses_the_room_in_the_drive():
    found = lever("drive_level_uw", drive_level_uw=(None, None, 100.0))
    assert found.about == "drive_level_uw"
    assert "of 200 µW becomes" in found.says
    assert found.says.endswith("of 100 µW")


def test_a_missing_esr_cannot_be_told():
    found = lever("esr_ohm", esr_ohm=(None, None, None))
    assert math.isnan(found.used)
    assert not found.past


def test_a_reading_that_nothing_rests_on_uses_no_room():
    assert lever("storage_temperature_c", storage_temperature_c=(-55.0, None, 125.0)).used == 0


def test_a_requirement_already_short_has_no_room_left():
    tight = read_bench(hand_made.BENCH_TEXT.replace("total_ppm = 50.0", "total_ppm = 20.0"), "bench.toml")
    worse = lever("frequency_stability_ppm", tight, frequency_stability_ppm=(-15.0, None, 15.0))
    assert worse.used == math.inf


def test_what_says_the_same_in_other_words_changes_hands_together():
    old, new = (
        part("OLD"),
        part("NEW", motional_capacitance_ff=(None, None, None), motional_inductance_mh=(None, 12.0, None)),
    )
    names = {reading.field for reading in swapped(old, new, "motional_capacitance_ff").readings}
    assert "motional_inductance_mh" in names
    assert "motional_capacitance_ff" not in names


def test_kind_of_resonance_goes_with_the_rated_load():
    old, new = (
        part("OLD"),
        part("NEW", load_capacitance_pf=(None, None, None)).model_copy(update={"resonance": "series"}),
    )
    made = swapped(old, new, "resonance")
    assert made.resonance == "series"
    assert "load_capacitance_pf" not in {reading.field for reading in made.readings}
    assert made.part_number == "OLD"


def test_grade_and_package_have_no_lever():
    old, new = part("OLD"), part("NEW")
    assert levers((sheet(old), old), (sheet(new), new), ["package", "pads", "aec_q200", "status"], BENCH) == {}
