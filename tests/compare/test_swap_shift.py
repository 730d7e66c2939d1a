"""By how much the frequency moves: against published steps of load, and against the whole analysis at every corner."""

import numpy as np
import pytest
from made_sheets import bench, exactly, part, reading, sheet

from compare.columns import MID, make_columns
from compare.corners import analyse_nominal
from compare.find import find_offers
from compare.substitution import substitute
from compare.swap import make_swap


def crystal(frequency_mhz, load_pf, shunt_pf, motional_ff, number, **more):
    """A part of which only the frequency at its load counts; R1 of next to nothing, as the sources have it."""
    readings = [
        reading("frequency_mhz", frequency_mhz),
        exactly("shunt_capacitance_pf", shunt_pf),
        exactly("motional_capacitance_ff", motional_ff),
        exactly("esr_ohm", 0.01),
    ]
    if load_pf is not None:
        readings.append(reading("load_capacitance_pf", load_pf))
    return part(*readings, number=number, resonance="series" if load_pf is None else "load", **more)


def shift_ppm(incumbent, candidate):
    found = substitute([sheet(incumbent)], [sheet(candidate)], None)["candidates"][0]["shift_ppm"]
    assert found["low"] == pytest.approx(found["high"], abs=0.05)
    return found["mid"]


@pytest.mark.parametrize(("presented", "rated", "published"), [(6.0, 7.0, 18.0), (11.5, 12.5, 6.0)])
def test_a_watch_crystal_under_a_picofarad_less_than_its_load_gains_what_its_ics_manual_says(
    presented, rated, published
):
    """NXP UM10301 rev. 01 (2008), p. 12: 1 pF less is 18 ppm at 7 pF, 6 ppm at 12.5 pF; C1 2.1 fF, C0 1.2 pF, p. 14."""
    fork = {"cut": "tuning fork"}
    board = crystal(0.032768, presented, 1.2, 2.1, "P1", **fork)
    assert shift_ppm(board, crystal(0.032768, rated, 1.2, 2.1, "P2", **fork)) == pytest.approx(published, abs=0.55)


def test_a_series_part_under_twenty_picofarad_runs_high_by_the_tutorials_280_ppm():
    """J. R. Vig, Quartz Crystal Resonators and Oscillators, ch. 3 (from memory): C1 14 fF, C0 5 pF, CL 20 pF."""
    shift = shift_ppm(crystal(10.0, 20.0, 5.0, 14.0, "P1"), crystal(10.0, None, 5.0, 14.0, "P2"))
    assert shift == pytest.approx(280.0, abs=0.5)


def test_a_series_part_under_ten_picofarad_runs_high_by_what_the_application_note_prints():
    """STMicroelectronics AN2867 rev. 23, p. 7: fs 7 988 768 Hz and fL at 10 pF 7 995 695 Hz; C1 27 fF, C0 5.57 pF."""
    published = (7_995_695 / 7_988_768 - 1) * 1e6
    shift = shift_ppm(crystal(8.0, 10.0, 5.57, 27.0, "P1"), crystal(8.0, None, 5.57, 27.0, "P2"))
    assert shift == pytest.approx(published, abs=1.0)


def test_the_nominal_shift_is_that_of_the_whole_analysis_of_both_parts():
    board = bench()
    first, second = crystal(16.0, 8.0, 1.5, 4.5, "P1"), crystal(16.0, 10.0, 1.2, 3.0, "P2")
    swap = make_swap([sheet(first)], [sheet(second)], board)
    columns = make_columns(find_offers([sheet(first, second)], board).offers, board)
    error = analyse_nominal(columns, board, "transconductance")["load_error_ppm"]
    assert swap.shift_ppm[MID, 1] == pytest.approx(error[1] - error[0], abs=0.01)


@pytest.mark.parametrize("limiter", ["transconductance", "output", "unknown"])
def test_on_a_bench_swapping_the_two_turns_the_shift_round(limiter):
    keys = {"limiter": limiter, "transconductance_ms": [6.0, 12.0], "output_resistance_kohm": 5.0}
    board = bench({"circuit": {**keys, "condition": [{"transconductance_ms": 5.0}]}})
    pair = crystal(16.0, 8.0, 1.5, 4.5, "P1"), crystal(16.0, 10.0, 1.2, 3.0, "P2")
    there = make_swap([sheet(pair[0])], [sheet(pair[1])], board).shift_ppm[:, 1]
    back = make_swap([sheet(pair[1])], [sheet(pair[0])], board).shift_ppm[:, 1]
    assert there[::-1] == pytest.approx(-back, abs=0.05)


def test_a_part_without_esr_has_no_shift_on_a_bench_unless_it_is_the_same_part():
    whole, bare = crystal(16.0, 8.0, 1.5, 4.5, "P1"), part(reading("frequency_mhz", 16.0), number="P2")
    swap = make_swap([sheet(whole)], [sheet(bare)], bench())
    assert np.isnan(swap.shift_ppm[:, 1]).all()
    same = make_swap([sheet(bare)], [sheet(bare)], bench())
    assert (same.shift_ppm[:, 1] == 0).all()
