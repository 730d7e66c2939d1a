"""Long lists: what is passed over by frequency and package cells alone, and that the rest is read as it stands."""

import random

import pytest

from compare.intake import read_bytes
from compare.sieve import MOST_ELSEWHERE, Wanted, sieve

HEAD = "Part number;Maker;Frequency (MHz);Package;CL (pF);ESR max (Ohm)"
ROWS = [
    "A;Orchardline;26,000;2.5 x 2.0;8;50",
    "B;Orchardline;25,000;2.5 x 2.0;8;50",
    "C;Orchardline;26;2.0 x 1.6;8;50",
    "D;Orchardline;8 - 40;2520;8;50",
    "E;Orchardline;;2.5 x 2.0;8;50",
    "F;Orchardline;on request;HC-49/US;8;50",
]


def kept(rows, wanted, head=HEAD):
    found = sieve("\n".join([head, *rows]), wanted)
    return None if found is None else [line.split(";")[0] for line in found.text.split("\n")[1:]]


def test_rows_of_another_frequency_become_blank_lines_and_are_counted():
    found = sieve("\n".join([HEAD, *ROWS]), Wanted(26.0, None))
    assert [bool(line) for line in found.text.split("\n")[1:]] == [True, False, True, True, True, True]
    assert (found.other_frequency, found.other_package) == (1, 0)
    assert found.note.startswith("a long list: 1 of another frequency passed over by that cell alone")


def test_a_range_an_empty_cell_and_one_that_is_not_understood_are_kept():
    assert {"D", "E", "F"} <= set(kept(ROWS, Wanted(26.0, None)))


def test_rows_in_another_package_are_passed_over_beyond_the_first_ones():
    many = [f"X{number};Orchardline;26;2.0 x 1.6;8;50" for number in range(200)]
    found = sieve("\n".join([HEAD, *many, *ROWS]), Wanted(26.0, "2.5 x 2.0 mm"))
    names = [line.split(";")[0] for line in found.text.splitlines() if line]
    assert {"A", "D", "E", "F"} <= set(names)
    assert found.other_package == 200 + 1 - MOST_ELSEWHERE


@pytest.mark.parametrize("head", ["Part number;Maker;What;Package;CL (pF);ESR max (Ohm)", "a;b;c;d;e;f"])
def test_without_one_frequency_column_nothing_is_passed_over(head):
    assert kept(ROWS, Wanted(26.0, None), head) is None


def test_a_frequency_in_kilohertz_is_seen_as_such():
    head = HEAD.replace("MHz", "kHz")
    rows = ["A;O;32.768;2.0 x 1.2;7;70000", "B;O;26000;2.0 x 1.2;7;70000"]
    assert kept(rows, Wanted(0.032768, None), head) == ["A", ""]


def test_what_is_kept_is_read_as_it_is_in_the_whole_list():
    """The same readings at the same places, with the same doubts."""
    draw = random.Random(3)  # noqa: S311
    rows = [
        f"QX{number:03d};Orchardline;{draw.choice(['24', '26', '26.000', '40'])};{draw.choice(['2.5 x 2.0', '3225'])};"
        f"{draw.choice([8, 10])};{draw.randint(30, 80)}"
        for number in range(120)
    ]
    text = "\n".join([HEAD, *rows])
    whole = {part.part_number: part for part in read_bytes(text.encode(), "list.csv").parts}
    found = sieve(text, Wanted(26.0, None))
    some = read_bytes(found.text.encode(), "list.csv").parts
    assert 0 < len(some) < len(whole)
    assert [part for part in some if part != whole[part.part_number]] == []
    left_out = [part for number, part in whole.items() if number not in {part.part_number for part in some}]
    assert all(r.typ != 26.0 for part in left_out for r in part.readings if r.field == "frequency_mhz")
