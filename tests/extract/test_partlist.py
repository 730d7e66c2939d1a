"""Parts made when asked for, and the columns they are made from."""

from __future__ import annotations

import pickle

import pytest
from building import reading

from extract import read_sheet
from extract.model import Note, Part, SpecSheet, Where
from extract.partlist import NOWHERE, Chunk, PartList, numbers_without, together

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
