"""Parts made when asked for, and the columns they are made from."""

from __future__ import annotations

import pickle

import pytest
from building import reading

from extract import read_sheet
from extract.model import Note, Part, Reading, SpecSheet, Where
from extract.partlist import NOWHERE, Chunk, PartList, doubted, exchanged, numbers_without, part_numbers, together

HEAD = "Part number,Frequency (MHz),ESR max (ohm),Price,Package"
LOADS = ["40", "50", ""]


def line(number: int) -> str:
    return f"ABX{number:04d}-26,26,{LOADS[number % 3]},{number / 100},{('3225', '2520')[number % 2]}"


@pytest.fixture(scope="module")
def sheet() -> SpecSheet:
    return read_sheet("\n".join([HEAD, *map(line, range(240))]).encode(), "list.csv")


def test_a_part_has_its_own_places(sheet):
    part = sheet.parts[100]
    assert part.part_number == "ABX0100-26"
    assert {each.field: each.where for each in part.readings} == {
        "frequency_mhz": Where(line=102, cell="B102"),
        "esr_ohm": Where(line=102, cell="C102"),
    }
    assert (part.package, part.attributes.price) == ("3225", "1.0")


def test_the_templates_with_a_parts_places_are_its_readings(sheet):
    parts = sheet.parts
    for at in (0, 1, 2, 239):
        told = [each for stated in parts.stated.values() for each in stated.templates[stated.index[at]]]
        assert [each.model_copy(update={"where": NOWHERE}) for each in parts[at].readings] == told
        assert [each for name in parts.stated for each in parts.readings(at, name)] == list(parts[at].readings)


def test_the_first_template_says_nothing_and_all_differ(sheet):
    assert list(sheet.parts.stated) == ["frequency_mhz", "esr_ohm"]
    for stated in sheet.parts.stated.values():
        assert stated.templates[0] == ()
        assert len(set(stated.templates)) == len(stated.templates)
        assert len(stated.index) == 240
    assert sheet.parts.stated["esr_ohm"].index.tolist()[:4] == [1, 2, 0, 1]


def test_identities_repeat_and_attributes_are_each_parts_own(sheet):
    parts = sheet.parts
    assert {each.package for each in parts.identity.distinct} == {"3225", "2520"}
    assert parts.grade.distinct[parts.grade.index[7]].price == "0.07"


def test_it_is_a_sequence_like_any_other(sheet):
    parts = sheet.parts
    assert isinstance(parts, PartList)
    assert parts[-1] == parts[239] == parts[238:][1]
    assert parts == tuple(parts)
    assert tuple(parts) == parts
    assert parts != tuple(parts)[1:]
    with pytest.raises(IndexError):
        parts[240]


def test_a_sheet_with_it_is_dumped_copied_and_sent_as_any_other(sheet):
    plain = sheet.model_copy(update={"parts": tuple(sheet.parts)})
    assert sheet == plain
    assert sheet.model_dump(mode="json") == plain.model_dump(mode="json")
    assert pickle.loads(pickle.dumps(sheet)) == sheet  # noqa: S301 - our own bytes
    assert SpecSheet.model_validate(plain.model_dump()) == sheet


def test_every_part_made_passes_the_models_own_checks(sheet):
    for part in sheet.parts[:20]:
        assert Part.model_validate(part.model_dump()) == part


def test_a_part_among_rows_is_kept_as_it_is():
    lone = Part(part_number="ABQ-1", readings=(reading("esr_ohm", high=70.0), reading("drive_level_uw", high=10.0)))
    assert together([lone, lone]) == [lone, lone]
    parts = PartList([Chunk.of_part(lone), Chunk.of_part(lone)])
    assert parts[0] is lone
    assert list(parts.stated) == ["esr_ohm", "drive_level_uw"]
    assert parts.stated["esr_ohm"].index.tolist() == [1, 1]


def test_parts_without_a_frequency_are_told_by_number(sheet):
    assert numbers_without(sheet.parts, "frequency_mhz") == []
    assert numbers_without(sheet.parts, "esr_ohm")[:2] == ["ABX0002-26", "ABX0005-26"]
    assert numbers_without(list(sheet.parts[:3]), "esr_ohm") == ["ABX0002-26"]
    assert len(numbers_without(sheet.parts, "drive_level_uw")) == 240


def test_a_list_without_frequencies_says_so_once():
    rows = [f"ABX{number:04d},{40 + number},2" for number in range(240)]
    sheet = read_sheet("\n".join(["Part number,ESR max (ohm),C0 (pF)", *rows]).encode(), "list.csv")
    message = "no frequency is stated for ABX0000, ABX0001, ABX0002 and 237 more"
    assert sheet.notes == (Note(level="warning", message=message),)


# --- beside the same parts one by one

OTHER_HEAD = "part number,frequency MHz,CL pF,ESR ohm max,drive uW"
ROWS = [f"ABX-{at},26.0,{8 + at % 3},{'50000' if at % 7 == 0 else 50},100" for at in range(400)]
LISTED = read_sheet("\n".join([OTHER_HEAD, *ROWS]).encode(), "list.csv").parts
ONE_BY_ONE = tuple(LISTED)


@pytest.fixture(params=[LISTED, ONE_BY_ONE], ids=["list", "one by one"])
def parts(request):
    return request.param


def test_a_long_file_is_a_list():
    assert isinstance(LISTED, PartList)


def test_the_numbers_are_those_of_the_parts(parts):
    assert part_numbers(parts) == [f"ABX-{at}" for at in range(400)]


def test_the_doubted_parts_are_those_with_a_check_and_counted(parts):
    assert doubted(parts) == dict.fromkeys(range(0, 400, 7), 1)


def entered(part, **bounds):
    reading = Reading(field="insulation_resistance_megohm", raw="by hand", where=Where(), status="entered", **bounds)
    return part.model_copy(update={"mode": "third overtone", "readings": (*part.readings[:-1], reading)})


def test_exchanged_parts_stand_in_their_places_and_the_others_stay(parts):
    changed = {3: entered(ONE_BY_ONE[3], min=500.0), 350: entered(ONE_BY_ONE[350], min=100.0)}
    now = exchanged(parts, changed)
    assert list(now) == [changed.get(at, part) for at, part in enumerate(ONE_BY_ONE)]
    assert list(parts) == list(ONE_BY_ONE)


def test_a_list_stays_one_and_its_columns_hold_what_was_exchanged():
    now = exchanged(LISTED, {3: entered(ONE_BY_ONE[3], min=500.0)})
    assert isinstance(now, PartList)
    stated = now.stated["insulation_resistance_megohm"]
    assert [at for at, number in enumerate(stated.index) if number] == [3]
    assert stated.templates[stated.index[3]][0].min == 500.0
    gone = ONE_BY_ONE[3].readings[-1].field
    assert now.readings(3, gone) == ()
    assert now.readings(4, gone) == LISTED.readings(4, gone)
    assert "insulation_resistance_megohm" not in LISTED.placed
