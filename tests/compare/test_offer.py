"""Which parts offer the frequency, and what is taken where a sheet leaves a choice."""

import math

import pytest
from made_sheets import bench, part, reading, sheet, usual

from compare.find import find_offers
from compare.offer import decimals_printed, match_frequency, overtone_of
from compare.reckoning import choose_loads
from extract import read_sheet
from extract.model import Part, Reading, Where


def frequency(value=None, raw="", **bounds):
    options = bounds.pop("options", ())
    return Reading(field="frequency_mhz", typ=value, options=options, raw=raw, where=Where(page=1), **bounds)


def offered(*readings, asked=16.0):
    return match_frequency(part(*readings), asked)


def the_offer(one: Part, changes=None):
    at = bench(changes)
    return choose_loads(find_offers([sheet(one)], at).offers, at)[0]


def test_the_frequency_itself_is_offered():
    assert offered(frequency(16.0)).printed_mhz == 16.0


def test_within_one_ppm_is_offered():
    assert offered(frequency(16.0000159)).printed_mhz == 16.0000159
    assert offered(frequency(16.0000170), asked=16.0).printed_mhz is None


def test_an_option_is_offered():
    assert offered(frequency(options=(12.0, 16.0, 25.0))).printed_mhz == 16.0


def test_a_range_offers_what_it_holds_ends_included():
    assert offered(frequency(min=8.0, max=16.0)).printed_mhz == 16.0
    assert offered(frequency(min=16.1, max=40.0)).printed_mhz is None


def test_a_value_rounded_on_the_sheet_is_taken_with_a_message():
    """14.31818 MHz is printed 14.318 (12.6 ppm off): the decimals printed decide."""
    match = offered(frequency(14.318, raw="Frequency 14.318 MHz"), asked=14.31818)
    assert match.printed_mhz == 14.318
    assert "rounded to what is printed (12.6 ppm apart)" in match.said


def test_a_value_printed_to_more_decimals_is_not_taken_for_a_rounded_one():
    assert offered(frequency(14.318, raw="Frequency 14.31800 MHz"), asked=14.31818).printed_mhz is None


def test_a_rounded_value_more_than_50_ppm_off_is_another_frequency():
    """3.579545 MHz printed 3.58 is 127 ppm off."""
    assert offered(frequency(3.58, raw="3.58 MHz"), asked=3.579545).printed_mhz is None


def test_a_part_near_the_frequency_is_named_as_near():
    said = offered(frequency(16.001, raw="16.001 MHz")).said
    assert said == "near, but not 16 MHz: 16.001 MHz is 62.5 ppm off"


def test_a_part_that_offers_another_frequency_or_none_is_named_in_notes():
    found = find_offers([sheet(part(frequency(25.0), number="A"), part(number="B"))], bench())
    messages = [note["message"] for note in found.notes]
    assert messages == [
        "made.csv, A: does not offer 16 MHz (states 25 MHz)",
        "made.csv, B: states no frequency",
    ]


@pytest.mark.parametrize(
    ("raw", "value", "decimals"),
    [("14.318 MHz", 14.318, 3), ("14.3180", 14.318, 4), ("32.768 kHz", 0.032768, 6), ("32,768 kHz", 0.032768, 6)],
)
def test_decimals_are_counted_as_printed(raw, value, decimals):
    assert decimals_printed(raw, value) == decimals


@pytest.mark.parametrize(
    ("words", "order"),
    [("fundamental", 1), ("third overtone", 3), ("9th overtone", 9), ("flexural", None), (None, None)],
)
def test_the_words_of_a_mode_give_its_order(words, order):
    assert overtone_of(words) == order


def test_of_two_modes_the_fundamental_is_taken():
    both = [reading("esr_ohm", max=60.0, mode="fundamental"), reading("esr_ohm", max=90.0, mode="third overtone")]
    offer = the_offer(usual(*both, mode=None))
    assert (offer.mode, offer.chosen["mode"]) == ("fundamental", "fundamental")
    assert offer.at[0].esr.span.high == 60.0


def test_of_two_modes_the_overtone_is_taken_with_a_trap():
    both = [reading("esr_ohm", max=60.0, mode="fundamental"), reading("esr_ohm", max=90.0, mode="third overtone")]
    offer = the_offer(usual(*both, mode=None), {"circuit": {"overtone_trap": True}})
    assert (offer.mode, offer.at[0].esr.span.high) == ("third overtone", 90.0)


def test_a_mode_that_a_part_number_fixes_is_no_choice():
    both = [reading("esr_ohm", max=60.0, mode="fundamental"), reading("esr_ohm", max=90.0, mode="third overtone")]
    offer = the_offer(usual(*both, mode="third overtone"))
    assert offer.mode == "third overtone"
    assert "mode" not in offer.chosen


def test_up_to_20_mhz_a_mode_not_stated_is_taken_as_fundamental_with_a_message():
    offer = the_offer(usual(mode=None))
    assert offer.mode == "fundamental"
    assert dict(offer.said)["mode"].startswith("mode not stated: taken as fundamental")


def test_above_20_mhz_a_mode_not_stated_is_not_known():
    offer = the_offer(usual(reading("frequency_mhz", 26.0), mode=None), {"requirement": {"frequency_mhz": 26.0}})
    assert offer.mode is None
    assert not offer.mode_known


def test_the_load_option_with_the_least_worst_load_error_is_taken():
    """The circuit presents 8.0 pF: 12/2 + 3/2 + 0.5."""
    offer = the_offer(usual(reading("load_capacitance_pf", options=(6.0, 8.0, 9.0, 12.5))))
    assert offer.load.span.mid == 8.0
    assert offer.chosen["load_capacitance_pf"] == 8.0
    assert dict(offer.said)["load_capacitance_pf"].startswith("a load of 8 pF taken of 6, 8, 9, 12.5")


def test_of_a_range_of_loads_the_circuits_own_is_taken_if_inside():
    offer = the_offer(usual(reading("load_capacitance_pf", min=6.0, max=20.0)))
    assert offer.load.span.mid == pytest.approx(8.0, abs=0.02)


def test_of_a_range_of_loads_that_ends_short_the_nearest_end_is_taken():
    offer = the_offer(usual(reading("load_capacitance_pf", min=10.0, max=20.0)))
    assert offer.load.span.mid == 10.0


def test_a_load_that_is_fixed_is_no_choice():
    assert "load_capacitance_pf" not in the_offer(usual()).chosen


def test_readings_for_the_load_taken_are_used():
    loads = reading("load_capacitance_pf", options=(8.0, 12.5))
    at8 = reading("esr_ohm", max=60.0, load_capacitance_pf=(8.0, 8.0))
    at12 = reading("esr_ohm", max=90.0, load_capacitance_pf=(12.5, 12.5))
    assert the_offer(usual(loads, at8, at12)).at[0].esr.span.high == 60.0


def test_a_series_resonant_part_has_no_load():
    offer = the_offer(usual(without=("load_capacitance_pf",), resonance="series"))
    assert math.isinf(offer.load.span.mid)


def test_the_tightest_tolerance_and_stability_are_taken():
    offer = the_offer(
        usual(
            reading("frequency_tolerance_ppm", options=(10.0, 20.0, 30.0)),
            reading("frequency_stability_ppm", options=(15.0, 50.0)),
        )
    )
    assert (offer.tolerance.span.high, offer.stability.span.high) == (10.0, 15.0)
    assert offer.chosen["frequency_tolerance_ppm"] == 10.0
    assert offer.loosest["frequency_stability_ppm"].span.high == 50.0


def test_a_tolerance_that_cannot_be_ordered_with_the_load_taken_is_no_option():
    offer = the_offer(
        usual(
            reading("frequency_tolerance_ppm", options=(5.0, 10.0), load_capacitance_pf=(12.0, 20.0)),
            reading("frequency_tolerance_ppm", options=(15.0, 20.0), load_capacitance_pf=(6.0, 10.0)),
        )
    )
    assert offer.tolerance.span.high == 15.0


RANGES = [
    reading("operating_temperature_c", min=-20.0, max=70.0),
    reading("operating_temperature_c", min=-40.0, max=85.0),
    reading("operating_temperature_c", min=-40.0, max=125.0),
]


@pytest.mark.parametrize(
    ("product", "taken"), [([-10, 60], (-20, 70)), ([-40, 85], (-40, 85)), ([-55, 125], (-40, 125)), (None, (-40, 125))]
)
def test_the_narrowest_range_that_covers_the_products_is_taken_else_the_widest(product, taken):
    offer = the_offer(usual(*RANGES), {"requirement": {"temperature_c": product}})
    assert (offer.operating_range.span.low, offer.operating_range.span.high) == taken
    assert offer.chosen["operating_temperature_c"] == list(taken)


def test_the_stability_for_the_range_asked_is_taken():
    small = reading("frequency_stability_ppm", min=-10.0, max=10.0, temperature_c=(-20.0, 70.0))
    large = reading("frequency_stability_ppm", min=-30.0, max=30.0, temperature_c=(-40.0, 85.0))
    assert the_offer(usual(small, large)).stability.span.high == 30.0
    narrow = {"requirement": {"temperature_c": [-20.0, 70.0]}}
    assert the_offer(usual(small, large), narrow).stability.span.high == 10.0


def test_ageing_stated_for_longer_goes_before_the_first_year():
    first = reading("ageing_ppm", min=-3.0, max=3.0, years=1.0)
    ten = reading("ageing_ppm", min=-5.0, max=5.0, years=10.0)
    offer = the_offer(usual(first, ten))
    assert (offer.ageing.span.high, offer.ageing_years) == (5.0, 10.0)


def test_a_condition_takes_the_readings_stated_for_its_temperature():
    cold = {"circuit": {"condition": [{"name": "cold", "temperature_c": -40.0}]}}
    room = reading("esr_ohm", max=60.0)
    frost = reading("esr_ohm", max=90.0, temperature_c=(-40.0, -20.0))
    offer = the_offer(usual(room, frost), cold)
    assert [at.esr.span.high for at in offer.at] == [60.0, 90.0]
    assert not offer.at[1].room_only


def test_a_condition_without_readings_of_its_own_takes_those_for_room():
    cold = {"circuit": {"condition": [{"name": "cold", "temperature_c": -40.0}]}}
    offer = the_offer(usual(), cold)
    assert offer.at[1].esr.span.high == 60.0
    assert offer.at[1].room_only


def test_a_single_option_is_no_choice():
    offer = the_offer(usual(reading("load_capacitance_pf", options=(9.0,))))
    assert offer.load.span.mid == 9.0
    assert "load_capacitance_pf" not in offer.chosen


@pytest.mark.parametrize(("trap", "mode"), [(False, "fundamental"), (True, "third overtone")])
def test_of_two_modes_that_one_line_of_a_sheet_names_the_trap_decides(trap, mode):
    text = "Crystal ABQ49-48\nFrequency: 48 MHz\nMode: fundamental or 3rd overtone\nCL: 8 pF\nESR: 50 Ω max"
    (one,) = read_sheet(text.encode(), "offer.txt").parts
    offer = the_offer(one, {"requirement": {"frequency_mhz": 48.0}, "circuit": {"overtone_trap": trap}})
    assert (one.mode, offer.mode) == (None, mode)
