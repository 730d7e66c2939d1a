"""The page's goals in seconds of the server's processor, wide enough for a machine that is shared."""

import sys

import pytest
from bench_page import (
    MANY,
    MOST_CHANGE_S,
    MOST_RERUN_KB,
    MOST_RERUN_S,
    MOST_SHOWN_S,
    MOST_START_S,
    change_cost,
    list_cost,
    start_cost,
)

pytestmark = pytest.mark.skipif(not sys.platform.startswith("linux"), reason="processor seconds are those of /proc")
SHARED = 3.0
"""By how much other work on the machine may lengthen the processor's time: caches and clock are shared."""


@pytest.fixture(scope="module")
def listed(tmp_path_factory):
    return list_cost(tmp_path_factory.mktemp("listed"))


def test_the_first_view_is_drawn_within_two_thirds_of_the_time_that_it_may_take(tmp_path):
    """The rest is the browser's. The first start may compile the modules, as on a machine where the page is new."""
    best = min((start_cost(tmp_path) for _ in range(2)), key=lambda cost: cost.processor_s)
    assert best.processor_s <= MOST_START_S * 2 / 3 * SHARED


def test_a_changed_value_of_the_circuit_is_worked_out_for_fifty_parts_in_three_tenths_of_a_second(tmp_path):
    assert change_cost(tmp_path).processor_s <= MOST_CHANGE_S * SHARED


def test_twenty_thousand_rows_are_ranked_and_shown_in_five_seconds_from_the_command(listed):
    assert MANY == 20_000
    assert listed[0].processor_s <= MOST_SHOWN_S * SHARED


def test_the_view_of_twenty_thousand_rows_is_drawn_again_in_four_tenths_of_a_second_and_half_a_megabyte(listed):
    assert listed[1].processor_s <= MOST_RERUN_S * SHARED
    assert listed[1].sent_kb <= MOST_RERUN_KB
