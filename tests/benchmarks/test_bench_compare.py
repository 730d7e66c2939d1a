"""The benchmark at a tenth of its size, so that a slip of tenfold shows; processor seconds, for the clock is shared."""

import pytest
from bench_compare import draw_cost, made, rank_cost, write_list


@pytest.fixture(scope="module")
def small(tmp_path_factory):
    return made(tmp_path_factory.mktemp("list"), rows=2_000)


def test_a_thousand_boards_of_two_thousand_parts_take_two_seconds_of_the_processor(small):
    """A tenth of 20 000 parts in 5 s on two cores is one; a machine that is shared gets two."""
    parts, _, processor = draw_cost(*small)
    assert parts == 2_000
    assert processor <= 2.0


def test_every_row_of_the_list_is_ranked(small):
    _, rows = rank_cost(*small)
    assert rows == 2_000


def test_the_list_is_the_same_each_time(tmp_path):
    for name in ("one.csv", "two.csv"):
        write_list(tmp_path / name, rows=50)
    assert (tmp_path / "one.csv").read_bytes() == (tmp_path / "two.csv").read_bytes()
