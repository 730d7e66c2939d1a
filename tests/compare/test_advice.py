"""E24 values, pairs of load capacitors and the series resistor."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from reference_loops import CASES, circuit_of, crystal_of

from compare import advice
from compare.circuit import Array, Circuit
from compare.oscillation import Crystal, amplifier_swing_v, analyse

PART = Crystal(16.0, 9.0, 1.2, 3.6, 50.0)
BOARD = Circuit(0.0, 0.0, 0.5, 0.0, 6.0, 0.0, 1000.0, 20.0)
STRAY = 3.0


def test_e24_is_the_series_of_the_standard() -> None:
    """IEC 60063: 24 values a decade, each within 5 % or so of the geometric series 10^(n/24)."""
    values = np.array(advice.E24)
    assert len(values) == 24
    assert np.abs(values / 10 ** (np.arange(24) / 24) - 1).max() < 0.055
    assert advice.e24_values(9.1, 12.0).tolist() == [9.1, 10.0, 11.0, 12.0]


def board_with(c_in: Array, c_out: Array, spread: Array) -> dict[str, Array]:
    factor = 1 + spread
    circuit = replace(BOARD, input_pf=(c_in[:, None] + STRAY) * factor, output_pf=(c_out[:, None] + STRAY) * factor)
    return analyse(circuit, PART)


def outcome(limit_ppm: float, least_margin: float, spread: Array) -> advice.Outcome:
    def evaluate(c_in: Array, c_out: Array) -> advice.Outcome:
        found = board_with(c_in, c_out, spread)
        error = np.abs(found["load_error_ppm"]).max(axis=-1)
        margin = found["margin"].min(axis=-1)
        return advice.Outcome(error, margin, np.minimum(limit_ppm / error, margin / least_margin))

    return evaluate


NOMINAL, SPREAD = np.zeros(1), np.array([-0.05, 0.05])


def test_the_best_pair_is_the_best_of_all_pairs() -> None:
    """Judge: every pair of the series evaluated in the worst case, one by one."""
    pairs, sentence = advice.e24_pairs(outcome(30.0, 5.0, NOMINAL), outcome(30.0, 5.0, SPREAD))
    assert sentence == ""
    c_in, c_out = advice.candidate_pairs()
    worst = outcome(30.0, 5.0, SPREAD)(c_in, c_out)
    best = np.flatnonzero(worst.slack >= 1)[np.argmin(worst.load_error_ppm[worst.slack >= 1])]
    assert pairs[0].load_error_ppm == pytest.approx(worst.load_error_ppm[best])
    assert [p.load_error_ppm for p in pairs] == sorted(p.load_error_ppm for p in pairs)
    assert all(p.slack >= 1 and p.margin >= 5 for p in pairs)


def test_unequal_pairs_are_among_them() -> None:
    pairs, _ = advice.e24_pairs(outcome(30.0, 5.0, NOMINAL), outcome(30.0, 5.0, SPREAD), most=20)
    assert any(pair.input_pf != pair.output_pf for pair in pairs)


def test_a_pair_stands_for_input_and_output() -> None:
    pairs, _ = advice.e24_pairs(outcome(30.0, 5.0, NOMINAL), outcome(30.0, 5.0, SPREAD))
    again = outcome(30.0, 5.0, SPREAD)(np.array([pairs[0].input_pf]), np.array([pairs[0].output_pf]))
    assert float(again.margin[0]) == pytest.approx(pairs[0].margin)


def test_a_tight_margin_is_met_by_less_load_than_the_rated() -> None:
    """The pair with the least load error falls short of the margin; a lighter one does not."""
    close = outcome(1e3, 1.0, NOMINAL)
    best_load, _ = advice.e24_pairs(close, close)
    wanted = 1.5 * best_load[0].margin
    pairs, _ = advice.e24_pairs(outcome(1e3, wanted, NOMINAL), outcome(1e3, wanted, NOMINAL))
    assert pairs
    assert all(pair.margin >= wanted for pair in pairs)


def test_where_no_pair_does_the_sentence_names_the_nearest() -> None:
    pairs, sentence = advice.e24_pairs(outcome(30.0, 500.0, NOMINAL), outcome(30.0, 500.0, SPREAD))
    assert pairs == []
    assert sentence.startswith("No pair of E24 load capacitors meets the bench: the nearest, ")
    assert "a margin of " in sentence


def test_a_margin_that_is_not_known_is_said_in_words() -> None:
    def half_known(c_in: Array, c_out: Array) -> advice.Outcome:
        return advice.Outcome(np.full(c_in.shape, 90.0), np.full(c_in.shape, np.nan), np.full(c_in.shape, 0.5))

    _, sentence = advice.e24_pairs(half_known, half_known)
    assert sentence.endswith("a load error of 90 ppm and a margin that is not known.")


def test_where_nothing_can_be_told_the_sentence_says_so() -> None:
    def unknown(c_in: Array, c_out: Array) -> advice.Outcome:
        return advice.Outcome(*(np.full(c_in.shape, np.nan) for _ in range(3)))

    pairs, sentence = advice.e24_pairs(unknown, unknown)
    assert pairs == []
    assert sentence == (
        "No pair of load capacitors can be told: a requirement that they move rests on something not known."
    )


def drive_and_margin(circuit: Circuit, crystal: Crystal, peak_v: float) -> tuple[float, object]:
    swing = amplifier_swing_v(circuit, crystal, peak_v, "input")
    present = float(analyse(circuit, crystal, peak_v)["drive_level_uw"])

    def evaluate(resistor: Array) -> advice.ResistorOutcome:
        found = analyse(replace(circuit, series_resistor_ohm=resistor), crystal, swing, "amplifier")
        return advice.ResistorOutcome(found["drive_level_uw"], found["margin"])

    return present, evaluate


def test_the_series_resistor_is_the_least_that_halves_the_drive() -> None:
    case = CASES["M09"]
    present, evaluate = drive_and_margin(circuit_of(case["bench"]["circuit"]), crystal_of(case["crystal"]), 0.3)
    found, sentence = advice.series_resistor(evaluate, present / 2)
    assert found is not None
    values = advice.e24_values(10, 1e6)
    below = values[values < found.series_resistor_ohm][-1]
    assert found.drive_level_uw <= present / 2 < float(evaluate(np.array([below])).drive_level_uw[0])
    assert found.margin < case["expected"]["margin"]
    assert "the swing at the amplifier's output taken as unchanged; measure both again." in sentence


def test_the_resistor_divides_with_what_the_crystal_takes() -> None:
    """Judge: at resonance the crystal's end loads the resistor with V²/2P; P falls by that divider squared."""
    circuit = Circuit(17.0, 17.0, 0.5, 0.0, 5.0)
    present, evaluate = drive_and_margin(circuit, PART, 0.3)
    load = float(amplifier_swing_v(circuit, PART, 0.3, "input")) ** 2 / (2 * present * 1e-6)
    for resistor in (100.0, 1000.0, 5000.0):
        expected = present * (load / (load + resistor)) ** 2
        assert float(evaluate(np.array([resistor])).drive_level_uw[0]) == pytest.approx(expected, rel=1e-2)


def test_only_a_greater_resistor_than_the_present_one_is_tried() -> None:
    _, evaluate = drive_and_margin(Circuit(17.0, 17.0, 0.5, 0.0, 5.0), PART, 0.3)
    found, _ = advice.series_resistor(evaluate, 1e6, present_ohm=470.0)
    assert found is not None
    assert found.series_resistor_ohm == 510.0


def test_where_no_resistor_does_the_sentence_says_what_else() -> None:
    def never(resistor: Array) -> advice.ResistorOutcome:
        return advice.ResistorOutcome(np.full(resistor.shape, 50.0), np.full(resistor.shape, 5.0))

    found, sentence = advice.series_resistor(never, 10.0)
    assert found is None
    assert sentence == (
        "No series resistor brings the drive level down to 10 µW in the worst case; use smaller load capacitors, "
        "a lower swing or a part with a higher rated drive."
    )
