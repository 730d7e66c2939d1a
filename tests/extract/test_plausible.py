"""Limits stand beside their source: the physical ones are worked out here from published constants."""

import math

import pytest
from building import reading

from extract.plausible import doubts, limits


def flagged(*readings, cut=None, mode=None):
    """Fields of the readings that a person must look at."""
    return [readings[index].field for index in doubts(readings, cut, mode)]


SOUND_MHZ = [
    reading("frequency_mhz", None, 16.0),
    reading("load_capacitance_pf", None, 9.0),
    reading("esr_ohm", None, None, 60.0),
    reading("shunt_capacitance_pf", None, 1.0),
    reading("motional_capacitance_ff", None, 2.6),
    reading("drive_level_uw", None, None, 100.0),
    reading("operating_temperature_c", -40.0, None, 85.0),
    reading("storage_temperature_c", -55.0, None, 125.0),
]


def test_a_sound_part_raises_no_doubt():
    assert flagged(*SOUND_MHZ, cut="AT") == []


@pytest.mark.parametrize(
    ("wrong", "cut"),
    [
        (reading("shunt_capacitance_pf", None, 0.0011), "AT"),  # printed in fF
        (reading("motional_capacitance_ff", None, 3300.0), "AT"),  # printed in pF
        (reading("esr_ohm", None, None, 70000.0), "AT"),  # kΩ in a MHz part
        (reading("esr_ohm", None, None, 70.0), "tuning fork"),  # Ω in a fork
        (reading("drive_level_uw", None, None, 100000.0), "tuning fork"),  # 100 mW
        (reading("frequency_mhz", None, 32.768), "tuning fork"),
        (reading("operating_temperature_c", 40.0, None, 85.0), "AT"),  # a lost minus
        (reading("motional_capacitance_ff", 2.9, 2.4, 1.9), "AT"),  # min above max
    ],
)
def test_a_slip_is_flagged(wrong, cut):
    assert flagged(wrong, cut=cut) == [wrong.field]


def test_a_check_says_what_was_probably_meant():
    (sentence,) = doubts([reading("motional_capacitance_ff", None, 3300.0)], "AT", None).values()
    assert "3.3 fF) is likely meant" in sentence


@pytest.mark.parametrize(
    ("cut", "coupling"),
    # Coupling k of a plate in thickness shear: 8.8 % (AT), 5.0 % (SC), 5.6 % (BT), from memory.
    # C0/C1 = pi^2 / (8 k^2) for the fundamental.
    [("AT", 0.0884), ("SC", 0.0500), ("BT", 0.0563)],
)
def test_the_floor_of_c0_over_c1_is_that_of_the_coupling(cut, coupling):
    assert limits()["ratio_floor"][cut] == pytest.approx(math.pi**2 / (8 * coupling**2), rel=0.01)


def test_a_ratio_below_the_floor_is_flagged():
    assert flagged(
        reading("shunt_capacitance_pf", None, 1.0), reading("motional_capacitance_ff", None, 8.0), cut="AT"
    ) == ["motional_capacitance_ff"]


def test_an_overtone_has_a_floor_nine_times_as_high():
    parts = (reading("shunt_capacitance_pf", None, 1.0), reading("motional_capacitance_ff", None, 2.0))
    assert flagged(*parts, cut="AT") == []
    assert flagged(*parts, cut="AT", mode="third overtone") == ["motional_capacitance_ff"]


def test_a_tuning_fork_has_no_floor():
    fork = (reading("shunt_capacitance_pf", None, 1.0), reading("motional_capacitance_ff", None, 8.0))
    assert flagged(*fork, cut="tuning fork") == []


def test_an_inductance_that_does_not_fit_is_flagged():
    # By hand: 16 MHz and 2.6 fF resonate with 1 / ((2 pi 16e6)^2 2.6e-15) = 38.06 mH.
    base = (reading("frequency_mhz", None, 16.0), reading("motional_capacitance_ff", None, 2.6))
    assert flagged(*base, reading("motional_inductance_mh", None, 38.06)) == []
    assert flagged(*base, reading("motional_inductance_mh", None, 19.0)) == ["motional_inductance_mh"]


def test_a_quality_factor_that_does_not_fit_is_flagged():
    # By hand: 1 / (2 pi 16e6 * 20 * 2.6e-15) = 191 000.
    base = (
        reading("frequency_mhz", None, 16.0),
        reading("motional_capacitance_ff", None, 2.6),
        reading("esr_ohm", None, 20.0),
    )
    assert flagged(*base, reading("quality_factor", None, 191000.0)) == []
    assert flagged(*base, reading("quality_factor", None, 19100.0)) == ["quality_factor"]


def test_storage_narrower_than_operation_is_flagged():
    narrow = (
        reading("operating_temperature_c", -40.0, None, 125.0),
        reading("storage_temperature_c", -40.0, None, 105.0),
    )
    assert flagged(*narrow) == ["storage_temperature_c"]


def test_a_tolerance_that_is_one_negative_number_is_doubted():
    (sentence,) = doubts([reading("frequency_tolerance_ppm", typ=-20.0)], None, None).values()
    assert "look at the sign" in sentence
    assert doubts([reading("frequency_tolerance_ppm", -20.0, None, 20.0)], None, None) == {}


def test_one_temperature_where_a_range_is_usual_needs_a_look():
    (sentence,) = doubts([reading("operating_temperature_c", typ=-40.0)], None, None).values()
    assert sentence == "one temperature, -40 °C, is read where a range is usual: the other end may stand elsewhere"
