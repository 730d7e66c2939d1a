from dataclasses import replace

from building import candidate

from extract import readings
from extract.model import When, Where
from extract.readings import readings_of


def band(low, high, **more):
    return When(frequency_mhz=(low, high), **more)


def test_the_same_value_in_two_places_is_one_reading():
    found = readings_of([candidate("esr_ohm", high=60.0), candidate("esr_ohm", high=60.0, where=Where(line=9))])
    assert [(each.max, each.where.line, each.check) for each in found] == [(60.0, 1, None)]


def test_of_two_values_the_first_counts_and_its_check_names_the_other_place():
    other = candidate("esr_ohm", high=70.0, where=Where(page=3, line=9), raw="ESR 70 Ω max.")
    (found,) = readings_of([candidate("esr_ohm", high=50.0), other])
    assert found.max == 50.0
    assert found.check == "page 3, line 9 says otherwise: ESR 70 Ω max."


def test_rows_for_the_least_and_the_greatest_are_one_range():
    (found,) = readings_of(
        [candidate("operating_temperature_c", high=85.0), candidate("operating_temperature_c", low=-40.0)]
    )
    assert (found.min, found.max) == (-40.0, 85.0)


def test_a_bare_number_gives_way_to_the_same_number_with_a_bound():
    (found,) = readings_of([candidate("esr_ohm", typ=60.0, bare=True), candidate("esr_ohm", high=60.0)])
    assert (found.typ, found.max, found.bare) == (None, 60.0, None)


def test_prose_is_not_asked_where_a_table_answers():
    found = readings_of([candidate("esr_ohm", high=60.0), candidate("esr_ohm", high=90.0, source="prose")])
    assert [(each.max, each.check) for each in found] == [(60.0, None)]


def test_ordering_keys_count_only_where_nothing_else_is_stated():
    key = candidate("load_capacitance_pf", options=(8.0, 10.0), source="key")
    stated = candidate("load_capacitance_pf", typ=18.0)
    assert [each.options for each in readings_of([key])] == [(8.0, 10.0)]
    assert [(each.typ, each.options) for each in readings_of([key, stated])] == [(18.0, ())]


def test_a_footnote_for_a_band_takes_the_band_out_of_the_general_value():
    found = readings_of(
        [
            candidate("frequency_mhz", low=8.0, high=40.0),
            candidate("esr_ohm", high=50.0),
            candidate("esr_ohm", high=80.0, when=band(10.0, 12.0), source="note"),
        ]
    )
    held = {each.when.frequency_mhz: each.max for each in found if each.field == "esr_ohm"}
    assert held[(10.0, 12.0)] == 80.0
    for frequency, esr in ((9.0, 50.0), (11.0, 80.0), (14.0, 50.0)):
        assert [value for (low, high), value in held.items() if low <= frequency <= high] == [esr]


def test_a_band_with_an_open_end_ends_where_the_offer_does():
    found = readings_of(
        [
            candidate("frequency_mhz", low=8.0, high=60.0),
            candidate("ageing_ppm", -2.0, None, 2.0, when=band(40.0, 1000.0)),
        ]
    )
    assert [each.when.frequency_mhz for each in found if each.field == "ageing_ppm"] == [(40.0, 60.0)]


def test_bands_of_two_modes_at_one_frequency_do_not_contradict():
    found = readings_of(
        [
            candidate("esr_ohm", high=40.0, when=band(24.0, 50.0, mode="fundamental")),
            candidate("esr_ohm", high=90.0, when=band(24.0, 50.0, mode="third overtone")),
        ]
    )
    assert [(each.max, each.check) for each in found] == [(40.0, None), (90.0, None)]


def test_two_values_for_one_band_are_flagged():
    found = readings_of(
        [
            candidate("esr_ohm", high=80.0, when=band(12.0, 20.0)),
            candidate("esr_ohm", high=60.0, when=band(12.0, 20.0), where=Where(line=2)),
        ]
    )
    assert [each.max for each in found] == [80.0]
    assert "60" in (found[0].check or "")


def test_a_range_beside_the_stability_is_the_operating_range_too():
    found = readings_of(
        [candidate("frequency_stability_ppm", -20.0, None, 20.0, when=When(temperature_c=(-40.0, 85.0)))]
    )
    assert [(each.min, each.max) for each in found if each.field == "operating_temperature_c"] == [(-40.0, 85.0)]


def test_an_inferred_candidate_is_written_as_inferred_with_its_doubt():
    (found,) = readings_of([candidate("esr_ohm", high=60.0, inferred=True, doubts=("only nearly a label",))])
    assert (found.status, found.check) == ("inferred", "only nearly a label")


def test_bounds_out_of_order_are_kept_and_flagged():
    (found,) = readings_of([candidate("motional_capacitance_ff", 2.9, 2.4, 1.9)])
    assert (found.min, found.typ, found.max) == (2.9, 2.4, 1.9)
    assert found.check is not None


def test_a_missing_ppm_is_no_doubt_about_the_range_beside_the_stability():
    over = When(temperature_c=(-40.0, 85.0))
    doubted = candidate(
        "frequency_stability_ppm", -15.0, None, 15.0, when=over, doubts=("unit not printed, taken as ppm",)
    )
    checks = {each.field: each.check for each in readings_of([doubted])}
    assert checks["operating_temperature_c"] is None
    assert checks["frequency_stability_ppm"] == "unit not printed, taken as ppm"


def test_a_thousand_bands_are_not_compared_each_with_each(monkeypatch):
    asked = 0
    says_less = readings._says_less

    def counted(one, other):
        nonlocal asked
        asked += 1
        return says_less(one, other)

    monkeypatch.setattr(readings, "_says_less", counted)
    bands = [candidate("esr_ohm", high=60.0, when=When(frequency_mhz=(at, at + 0.5))) for at in range(1, 1001)]
    again = [replace(each, where=Where(line=9)) for each in bands]
    assert len(readings.chosen_of([*bands, candidate("esr_ohm", high=70.0), *again])) == 1001
    assert asked < 10_000
