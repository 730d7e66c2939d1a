"""Two revisions of a sheet: what differs, to which side, and whether a bench turns on it."""

import pytest
from made_sheets import bench, reading, sheet, usual

from compare.changes import changes
from compare.substitute_text import changes_text
from extract.model import Attributes, Pads, Where


def between(old, new, board=None):
    return changes([sheet(old)], [sheet(new)], board)["lines"]


def only(old, new, board=None):
    (line,) = between(old, new, board)
    return line


def test_a_sheet_against_itself_has_no_lines():
    result = changes([sheet(usual())], [sheet(usual())], bench())
    assert result["lines"] == []
    assert "no reading differs" in [note["message"] for note in result["notes"]]


def test_places_and_raw_text_alone_are_no_change():
    moved = usual().model_copy(
        update={"readings": tuple(r.model_copy(update={"where": Where(page=9), "raw": "x"}) for r in usual().readings)}
    )
    assert between(usual(), moved) == []


@pytest.mark.parametrize(
    ("old", "new", "relation"),
    [
        (reading("esr_ohm", max=60.0), reading("esr_ohm", max=70.0), "looser"),
        (reading("esr_ohm", max=60.0), reading("esr_ohm", max=50.0), "tighter"),
        (reading("esr_ohm", max=60.0), reading("esr_ohm", 40.0), "unknown"),
        (reading("drive_level_uw", max=100.0), reading("drive_level_uw", 10.0, max=200.0), "tighter"),
        (reading("ageing_ppm", min=-1, max=1, years=1.0), reading("ageing_ppm", min=-1, max=1, years=5.0), "different"),
        (reading("load_capacitance_pf", 8.0), reading("load_capacitance_pf", 9.0), "different"),
        (reading("load_capacitance_pf", 8.0), reading("load_capacitance_pf", options=(8.0, 10.0)), "different"),
        (
            reading("frequency_tolerance_ppm", min=-10, max=10),
            reading("frequency_tolerance_ppm", min=-5, max=15),
            "different",
        ),
        (
            reading("operating_temperature_c", min=-40, max=85),
            reading("operating_temperature_c", min=-40, max=105),
            "tighter",
        ),
        (
            reading("storage_temperature_c", min=-55, max=125),
            reading("storage_temperature_c", min=-40, max=85),
            "looser",
        ),
    ],
)
def test_the_relation_is_seen_from_the_old_one(old, new, relation):
    line = only(usual(old), usual(new))
    assert (line["field"], line["relation"]) == (old.field, relation)


def test_a_line_has_both_values_and_both_places():
    line = only(usual(reading("esr_ohm", max=60.0)), usual(reading("esr_ohm", max=70.0)))
    assert line == {
        "part_number": "P1",
        "field": "esr_ohm",
        "when": {},
        "old": {"min": None, "typ": None, "max": 60.0, "options": [], "text": "60 Ω max"},
        "new": {"min": None, "typ": None, "max": 70.0, "options": [], "text": "70 Ω max"},
        "relation": "looser",
        "matters": True,
        "message": "ESR: 70 Ω max (page 1) for 60 Ω max (page 1), looser",
        "where_old": {"page": 1},
        "where_new": {"page": 1},
    }


def test_a_reading_that_comes_or_goes_is_a_line_of_unknown_relation():
    gone = only(usual(), usual(without=("drive_level_uw",)))
    come = only(usual(without=("drive_level_uw",)), usual())
    assert (gone["relation"], gone["new"], come["relation"], come["old"]) == ("unknown", None, "unknown", None)
    assert gone["message"] == "rated drive level: 100 µW max (page 1) before, no longer stated"


def test_bands_are_compared_with_the_band_that_holds_in_the_same_case():
    bands = [
        reading("esr_ohm", max=80.0, frequency_mhz=(12.0, 16.0)),
        reading("esr_ohm", max=50.0, frequency_mhz=(16.1, 30.0)),
    ]
    later = [bands[0], reading("esr_ohm", max=55.0, frequency_mhz=(16.1, 30.0))]
    line = only(usual(*bands), usual(*later))
    assert (line["when"], line["relation"]) == ({"frequency_mhz": [16.1, 30.0]}, "looser")


def test_package_pads_and_grade_are_lines_too():
    old = usual(package="2.5 x 2.0 mm", attributes=Attributes(pads=Pads(crystal=(1, 3)), aec_q200=True))
    new = usual(package="2.0 x 1.6 mm", attributes=Attributes(pads=Pads(crystal=(2, 4)), aec_q200=False))
    found = {line["field"]: line["relation"] for line in between(old, new)}
    assert found == {"package": "different", "pads": "different", "aec_q200": "looser"}
    assert between(usual(package="2.5 x 2.0 mm"), usual(package="2,5 × 2,0 mm")) == []


def test_parts_are_paired_by_number_and_what_comes_or_goes_is_said():
    old = [sheet(usual(number="A"), usual(number="B"))]
    new = [sheet(usual(number="C"), usual(reading("esr_ohm", max=70.0), number="A"))]
    said = {line["part_number"]: line["message"] for line in changes(old, new, None)["lines"]}
    assert said["B"] == "part B: no longer on the sheet"
    assert said["C"] == "part C: not on the old sheet"
    assert said["A"].startswith("ESR: 70 Ω max")


def test_two_single_parts_belong_together_whatever_they_are_called():
    found = between(usual(number="P1-A"), usual(reading("esr_ohm", max=70.0), number="P1-B"))
    assert [line["field"] for line in found] == ["part_number", "esr_ohm"]


def test_without_a_bench_every_line_matters_and_that_is_said():
    result = changes([sheet(usual())], [sheet(usual(reading("insulation_resistance_megohm", min=500.0)))], None)
    assert [line["matters"] for line in result["lines"]] == [True]
    assert result["notes"][0]["message"] == "no bench given: every line counts as one that matters"


def test_on_a_bench_a_looser_reading_that_still_does_is_no_matter():
    line = only(usual(), usual(reading("esr_ohm", max=62.0)), bench())
    assert (line["relation"], line["matters"]) == ("looser", False)
    assert line["message"].endswith("; no verdict of this bench turns on it")


def test_on_a_bench_a_reading_that_turns_a_verdict_matters():
    line = only(usual(), usual(reading("esr_ohm", max=600.0)), bench())
    assert line["matters"] is True
    assert "margin falls short, meets before" in line["message"]


def test_on_a_bench_a_reading_that_no_requirement_rests_on_is_no_matter():
    line = only(usual(), usual(reading("insulation_resistance_megohm", min=500.0)), bench())
    assert line["matters"] is False


def test_on_a_bench_a_band_of_another_frequency_is_no_matter():
    bands = [
        reading("esr_ohm", max=60.0, frequency_mhz=(12.0, 17.0)),
        reading("esr_ohm", max=50.0, frequency_mhz=(20.0, 30.0)),
    ]
    later = [bands[0], reading("esr_ohm", max=500.0, frequency_mhz=(20.0, 30.0))]
    line = only(usual(*bands), usual(*later), bench())
    assert line["matters"] is False
    assert line["message"].endswith("; not used on this bench")


def test_a_revision_that_no_longer_offers_the_frequency_matters():
    result = changes([sheet(usual())], [sheet(usual(reading("frequency_mhz", 25.0)))], bench())
    assert [line["matters"] for line in result["lines"]] == [True]
    assert "made.csv, P1: only one of the revisions offers 16 MHz" in [note["message"] for note in result["notes"]]


def test_the_text_counts_and_marks_what_matters():
    text = changes_text(changes([sheet(usual())], [sheet(usual(reading("esr_ohm", max=600.0)))], bench()))
    assert text.startswith(
        "1 reading differs, 1 that matters\n\nP1\n  ! ESR: 600 Ω max (page 1) for 60 Ω max (page 1), looser;"
    )


def test_a_bench_of_another_frequency_lets_no_change_pass_as_one_that_does_not_matter():
    result = changes(
        [sheet(usual())], [sheet(usual(reading("esr_ohm", max=70.0)))], bench({"requirement": {"frequency_mhz": 25.0}})
    )
    assert [line["matters"] for line in result["lines"]] == [True]
    assert [note["message"] for note in result["notes"]] == [
        "no part of either revision offers the bench's 25 MHz: every line counts as one that matters"
    ]
