"""From a draft to a part: what is inherited, which mode and resonance it has, what makes no crystal."""

from building import candidate

from extract.drafts import Draft
from extract.finish import inherit, lacks_crystal, part_of
from extract.model import When


def test_what_holds_for_all_goes_to_the_part_that_lacks_it():
    part = Draft(candidates=[candidate("esr_ohm", high=40.0)], package="3225")
    general = Draft(
        candidates=[candidate("esr_ohm", high=60.0), candidate("drive_level_uw", high=100.0)], maker="Able Crystals"
    )
    inherit(part, general)
    assert [(each.field, each.max) for each in part.candidates] == [("esr_ohm", 40.0), ("drive_level_uw", 100.0)]
    assert (part.maker, part.package) == ("Able Crystals", "3225")


def test_a_band_that_the_parts_frequency_lies_outside_of_is_not_inherited():
    part = Draft(candidates=[candidate("frequency_mhz", typ=26.0)])
    banded = [
        candidate("esr_ohm", high=high, when=When(frequency_mhz=band))
        for band, high in [((12, 20), 90.0), ((20, 30), 60.0)]
    ]
    inherit(part, Draft(candidates=banded))
    assert [each.max for each in part.candidates if each.field == "esr_ohm"] == [60.0]


def test_a_load_makes_a_part_load_resonant_and_the_word_series_a_series_one():
    load = Draft(candidates=[candidate("frequency_mhz", typ=26.0), candidate("load_capacitance_pf", typ=8.0)])
    series = Draft(candidates=[candidate("frequency_mhz", typ=26.0)], resonance={"series"})
    assert part_of(load, None).resonance == "load"
    assert part_of(series, None).resonance == "series"


def test_the_only_mode_of_a_part_is_no_condition_of_its_values():
    draft = Draft(candidates=[candidate("esr_ohm", high=60.0, when=When(mode="fundamental"))], modes={"fundamental"})
    part = part_of(draft, "Able Crystals")
    assert (part.mode, part.readings[0].when, part.maker) == ("fundamental", When(), "Able Crystals")


def test_a_tolerance_alone_is_no_crystal_and_a_frequency_alone_is_one():
    assert lacks_crystal({"frequency_tolerance_ppm", "operating_temperature_c"})
    assert lacks_crystal({"esr_ohm"})
    assert not lacks_crystal({"frequency_mhz"})
