"""The benchmark of the reader in small, with room for a shared machine: a slip of twice or more shows."""

from statistics import median

import pytest
from bench_compare import write_list
from bench_extract import (
    ONE_PAGE,
    ROWS,
    SAMPLES,
    catalogue_ratio,
    cells_ratio,
    extract_cost,
    made_catalogue,
    plain_text,
    whole_ratio,
    write_book,
)

from extract import read_sheet


@pytest.fixture(scope="module")
def sheets():
    return [(SAMPLES / name).read_bytes() for name in ONE_PAGE]


def test_words_and_cells_cost_little_more_than_words_alone(sheets):
    assert median(cells_ratio(data, runs=3) for data in sheets) <= 1.2


def test_the_whole_read_of_a_sheet_costs_little_more_than_its_words(sheets):
    assert median(whole_ratio(data, runs=3) for data in sheets) <= 2.2


@pytest.fixture(scope="module")
def catalogue():
    return made_catalogue(pages=100, crystals=10)


def test_a_catalogue_costs_few_times_its_plain_text(catalogue):
    assert catalogue_ratio(catalogue, runs=3) <= 10


def test_every_crystal_of_a_catalogue_is_read_and_nothing_else(catalogue):
    sheet = read_sheet(catalogue, "catalogue.pdf")
    numbers = [part.part_number for part in sheet.parts]
    assert numbers == [f"PQ{page:03d}-{row:02d}" for page in range(50, 60) for row in range(30)]
    assert all(len(part.readings) == 4 for part in sheet.parts)
    told = [note.message for note in sheet.notes if "speak of no crystal" in note.message]
    assert told == ["88 of 100 pages speak of no crystal and were not looked at closely: 2 to 50, 62 to 100."]


def test_the_catalogue_has_text_on_every_page(catalogue):
    """The ratio would mean nothing against pages that are empty."""
    assert plain_text(catalogue) > 100 * 500


@pytest.mark.parametrize("name", ["list.csv", "list.xlsx"])
def test_twenty_thousand_rows_of_a_list_are_read_and_written_within_bounds(tmp_path, name):
    (write_list if name == "list.csv" else write_book)(tmp_path / name, ROWS)
    cost = extract_cost(tmp_path / name)
    assert cost.printed.count('"part_number": "OR') == ROWS
    assert cost.processor_s <= 6.0
    assert cost.memory_mb <= 150
