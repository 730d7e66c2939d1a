"""Parts of a long list, beside the same parts one by one."""

import pytest

from extract import read_sheet
from extract.model import Reading, Where
from extract.partlist import PartList, doubted, exchanged, part_numbers

HEAD = "part number,frequency MHz,CL pF,ESR ohm max,drive uW"
ROWS = [f"ABX-{at},26.0,{8 + at % 3},{'50000' if at % 7 == 0 else 50},100" for at in range(400)]
LISTED = read_sheet("\n".join([HEAD, *ROWS]).encode(), "list.csv").parts
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
