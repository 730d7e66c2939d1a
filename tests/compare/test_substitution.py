"""A part in another's place: the verdict, what always holds of it, and cases that an engineer knows the answer of."""

import json
import math

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from made_sheets import bench, exactly, part, reading, sheet, usual

from compare.substitution import SubstituteError, substitute
from extract.model import Attributes, Pads

ORDER = {"drop-in": 3, "fits with changes": 2, "cannot tell": 1, "does not fit": 0}
MIRROR = {"tighter": "looser", "looser": "tighter"}
# A board that presents 8 pF to a crystal: two of (12 + 3) pF in series, and 0.5 pF across.
BOARD = {"circuit": {"capacitor_tolerance_percent": 1.0, "stray_tolerance_percent": 10.0}}


def judged(incumbent, *candidates, board=None, **files):
    return substitute([sheet(incumbent)], [sheet(one, **files) for one in candidates], board)


def one(incumbent, candidate, board=None):
    return judged(incumbent, candidate, board=board)["candidates"][0]


def lines(result):
    return {line["field"]: line for line in result["lines"]}


def numbers_in(value):
    if isinstance(value, dict):
        for inner in value.values():
            yield from numbers_in(inner)
    elif isinstance(value, list):
        for inner in value:
            yield from numbers_in(inner)
    elif isinstance(value, float):
        yield value


# A part by itself.

BOARDS = [None, bench(BOARD), bench({"circuit": {"transconductance_ms": 0.3}}), bench({"circuit": {"swing_v": None}})]
BARE = usual(without=("esr_ohm", "shunt_capacitance_pf", "motional_capacitance_ff", "ageing_ppm"))
SERIES = usual(without=("load_capacitance_pf",), resonance="series")
OPEN_LOAD = usual(reading("load_capacitance_pf", options=(6.0, 8.0, 12.0)))
OVERTONE = usual(mode="third overtone")
SILENT_MODE = part(*usual(reading("frequency_mhz", 16.0)).readings, mode=None, cut=None)


@pytest.mark.parametrize("board", BOARDS)
@pytest.mark.parametrize("itself", [usual(), BARE, SERIES, OPEN_LOAD, OVERTONE, SILENT_MODE])
def test_a_part_in_its_own_place_is_drop_in_and_moves_nothing(itself, board):
    result = one(itself, itself, board)
    assert result["verdict"] == "drop-in", result["decides"]
    assert [result["shift_ppm"][end] for end in ("low", "mid", "high")] == [0.0, 0.0, 0.0]
    assert {line["relation"] for line in result["lines"]} == {"same"}
    assert not any(line["matters"] for line in result["lines"])


def test_that_the_incumbent_falls_short_itself_is_said():
    weak = bench({"circuit": {"transconductance_ms": 0.3}})
    result = judged(usual(), usual(), board=weak)
    assert result["incumbent"]["verdict"] == "falls short"
    assert result["candidates"][0]["not_held_against_it"] == [
        "margin",
        "gain_ratio",
        "resistance_headroom",
        "startup_ms",
    ]
    assert result["candidates"][0]["decides"].startswith(
        "no worse than the incumbent, which itself falls short in margin, gain ratio"
    )
    said = [note["message"] for note in result["notes"] if "falls short itself in margin" in note["message"]]
    assert len(said) == 1
    assert said[0].endswith("not held against P1, no worse in what it rests on")


def test_a_shortfall_of_the_incumbent_is_held_against_a_part_that_is_worse():
    weak = bench({"circuit": {"transconductance_ms": 0.3}})
    worse = usual(reading("esr_ohm", max=61.0), number="P2")
    better = usual(reading("esr_ohm", max=59.0), number="P2")
    assert one(usual(), worse, weak)["verdict"] == "does not fit"
    assert one(usual(), better, weak)["verdict"] == "drop-in"


# What always holds.

WORSE = [
    lambda k: reading("esr_ohm", max=60.0 * k),
    lambda k: reading("frequency_tolerance_ppm", min=-10.0 * k, max=10.0 * k),
    lambda k: reading("frequency_stability_ppm", min=-15.0 * k, max=15.0 * k),
    lambda k: reading("ageing_ppm", min=-k, max=k, years=1.0),
    lambda k: reading("drive_level_uw", max=100.0 / k),
    lambda k: reading("shunt_capacitance_pf", 1.5, min=1.2 / k, max=1.8 * k),
    lambda k: reading("motional_capacitance_ff", 4.5, min=3.6 / k, max=5.4 * k),
    lambda k: reading("operating_temperature_c", min=-40.0 / k, max=85.0 / k),
]
FACTORS = st.floats(0.85, 12.0)
TESTED_BOARDS = st.sampled_from([None, bench(BOARD), bench({"circuit": {"transconductance_ms": 2.0}})])


@settings(max_examples=60, deadline=None)
@given(st.sampled_from(WORSE), FACTORS, st.floats(1.0, 4.0), st.sampled_from([7.0, 8.0, 9.0]), TESTED_BOARDS)
def test_making_one_limit_worse_never_betters_the_verdict(make, factor, further, load_pf, board):
    rated = reading("load_capacitance_pf", load_pf)
    before = one(usual(), usual(make(factor), rated, number="P2"), board)
    after = one(usual(), usual(make(factor * further), rated, number="P2"), board)
    assert ORDER[after["verdict"]] <= ORDER[before["verdict"]], (before["decides"], after["decides"])


@settings(max_examples=15, deadline=None)
@given(st.permutations(range(5)), TESTED_BOARDS)
def test_the_order_of_the_candidates_does_not_matter(order, board):
    parts = [
        usual(number="A"),
        usual(reading("esr_ohm", max=400.0), number="B"),
        usual(reading("load_capacitance_pf", 12.0), number="C"),
        usual(without=("esr_ohm",), number="D"),
        usual(without=("load_capacitance_pf",), resonance="series", number="E"),
    ]
    plain = {c["part_number"]: c for c in judged(usual(), *parts, board=board)["candidates"]}
    turned = judged(usual(), *(parts[at] for at in order), board=board)["candidates"]
    assert [c["part_number"] for c in turned] == ["ABCDE"[at] for at in order]
    for candidate in turned:
        other = plain[candidate["part_number"]]
        assert candidate | {"place": 0} == other | {"place": 0}


SILENT = ["esr_ohm", "load_capacitance_pf", "shunt_capacitance_pf", "frequency_tolerance_ppm", "drive_level_uw"]
SILENT += ["operating_temperature_c", "frequency_stability_ppm", "motional_capacitance_ff", "ageing_ppm"]


@settings(max_examples=40, deadline=None)
@given(st.sets(st.sampled_from(SILENT), min_size=1), TESTED_BOARDS)
def test_what_is_not_stated_never_beats_what_is_known_to_be_enough(without, board):
    known, silent = usual(number="known"), usual(without=tuple(without), number="silent")
    result = substitute([sheet(usual())], [sheet(silent, known)], board)
    verdicts = {c["part_number"]: c["verdict"] for c in result["candidates"]}
    assert verdicts["known"] == "drop-in"
    assert ORDER[verdicts["silent"]] <= ORDER["drop-in"]
    if without - {"motional_capacitance_ff", "ageing_ppm", "shunt_capacitance_pf"}:
        assert result["candidates"][0]["part_number"] == "known"


@settings(max_examples=40, deadline=None)
@given(st.sampled_from(WORSE), st.sampled_from(WORSE), FACTORS, FACTORS, TESTED_BOARDS)
def test_swapping_the_two_turns_tighter_into_looser(make, other, factor, further, board):
    first, second = usual(make(factor)), usual(other(further), number="P2")
    there, back = lines(one(first, second, board)), lines(one(second, first, board))
    for field, line in there.items():
        assert back[field]["relation"] == MIRROR.get(line["relation"], line["relation"]), field
        assert (back[field]["incumbent"], back[field]["candidate"]) == (line["candidate"], line["incumbent"])


@settings(max_examples=30, deadline=None)
@given(st.sampled_from(WORSE), FACTORS, st.sampled_from([6.0, 8.0, 12.0]), TESTED_BOARDS)
def test_json_holds_no_inf_and_no_nan_and_the_shift_is_in_order(make, factor, load_pf, board):
    result = judged(usual(), usual(make(factor), reading("load_capacitance_pf", load_pf), number="P2"), board=board)
    json.dumps(result, allow_nan=False)
    assert all(math.isfinite(value) for value in numbers_in(result))
    shift = result["candidates"][0]["shift_ppm"]
    known = [shift[end] for end in ("low", "mid", "high")]
    assert known == sorted(known)


# The shift.


def pull_ppm(load_pf, rated_pf, shunt_pf=1.5, motional_ff=4.5):
    """(f - fr)/fr of f = fs √(1 + C1/(C0 + CL)): the four-element circuit with R1 = 0, by hand."""
    at, rated = (math.sqrt(1 + motional_ff * 1e-3 / (shunt_pf + load)) for load in (load_pf, rated_pf))
    return (at / rated - 1) * 1e6


EXACT = (exactly("shunt_capacitance_pf", 1.5), exactly("motional_capacitance_ff", 4.5))


def test_a_part_rated_at_another_load_moves_by_the_exact_curve_without_a_bench():
    """By hand: 8 pF presented to a part rated at 12 pF, C0 1.5 pF, C1 4.5 fF: 70.2 ppm."""
    other = usual(*EXACT, reading("load_capacitance_pf", 12.0), number="P2")
    result = one(usual(*EXACT), other)
    assert pull_ppm(8.0, 12.0) == pytest.approx(70.2, abs=0.1)
    assert result["shift_ppm"]["mid"] == pytest.approx(pull_ppm(8.0, 12.0), abs=0.05)
    assert result["verdict"] == "cannot tell"
    assert result["decides"].startswith("rated load: 12 pF for 8 pF; the frequency moves by +70.2 ppm")


def test_a_part_rated_at_another_load_moves_by_the_difference_of_both_curves_on_the_board():
    """The circuit's own load error is the same for both, so what is left is what the rated loads are apart."""
    other = usual(*EXACT, reading("load_capacitance_pf", 12.0), number="P2")
    shift = one(usual(*EXACT), other, bench(BOARD))["shift_ppm"]
    assert shift["low"] == pytest.approx(pull_ppm(8.0, 12.0), abs=0.2)
    assert shift["high"] == pytest.approx(pull_ppm(8.0, 12.0), abs=0.2)


def test_a_greater_rated_load_runs_high_and_a_smaller_one_low():
    """Common practice, no source: a crystal under less than its rated load runs fast."""
    high = one(usual(), usual(reading("load_capacitance_pf", 9.0), number="P2"), bench(BOARD))["shift_ppm"]
    low = one(usual(), usual(reading("load_capacitance_pf", 7.0), number="P2"), bench(BOARD))["shift_ppm"]
    assert high["low"] > 0 > low["high"]


def test_readings_alike_in_both_move_together():
    """C1 with ±20 % in both: in step the shift spreads by that much, each by itself it would by the pull as well."""
    alike = one(usual(), usual(reading("load_capacitance_pf", 8.5), number="P2"), bench())["shift_ppm"]
    apart = one(
        usual(),
        usual(
            reading("load_capacitance_pf", 8.5), reading("motional_capacitance_ff", 4.5, min=3.6, max=5.41), number="P2"
        ),
        bench(),
    )["shift_ppm"]
    assert alike["high"] - alike["low"] < 0.5 * (apart["high"] - apart["low"])


def test_the_shift_holds_every_pair_of_crystals_and_boards_drawn_inside_the_tolerances():
    """No point inside falls outside: both parts analysed at boards drawn at random, C1 of each by itself."""
    from compare.circuit import Circuit
    from compare.oscillation import Crystal, analyse

    other = usual(
        reading("load_capacitance_pf", 10.0), reading("motional_capacitance_ff", 3.0, min=2.5, max=3.4), number="P2"
    )
    board = bench()
    shift = one(usual(), other, board)["shift_ppm"]
    draw = np.random.default_rng(5)
    n = 400
    around = draw.uniform(-1, 1, (5, n))
    node = [12 * (1 + 0.05 * around[k]) + 3 * (1 + 0.3 * around[k + 2]) for k in (0, 1)]
    circuit = Circuit(node[0], node[1], 0.5 * (1 + 0.3 * around[4]), 0.0, 8.0, 0.0, 1000.0)
    c0, esr = draw.uniform(1.2, 1.8, n), 60.0
    errors = [
        analyse(circuit, Crystal(16.0, load, c0, draw.uniform(low, high, n), esr))["load_error_ppm"]
        for load, low, high in ((8.0, 3.6, 5.4), (10.0, 2.5, 3.4))
    ]
    drawn = ((1 + errors[1] * 1e-6) / (1 + errors[0] * 1e-6) - 1) * 1e6
    assert shift["low"] <= drawn.min() < drawn.max() <= shift["high"]


def test_a_series_part_in_a_loaded_circuit_runs_high_and_does_not_fit():
    """By hand: C1/(2 (C0 + CL)) = 4.5 fF / (2 · 9.5 pF) = 237 ppm, less (C1/(C0 + CL))²/8 of 0.03; R1 adds 0.2."""
    series = usual(*EXACT, without=("load_capacitance_pf",), resonance="series", number="P2")
    result = one(usual(*EXACT), series)
    assert result["shift_ppm"]["mid"] == pytest.approx(236.8, abs=0.3)
    assert (result["verdict"], lines(result)["resonance"]["relation"]) == ("does not fit", "different")
    assert result["decides"].startswith(
        "resonance: series for load: a series-resonant part runs high in a loaded circuit"
    )


def test_a_load_part_in_a_series_circuit_runs_low():
    series = usual(*EXACT, without=("load_capacitance_pf",), resonance="series")
    result = one(series, usual(*EXACT, number="P2"))
    assert result["shift_ppm"]["mid"] == pytest.approx(-236.8, abs=0.3)
    assert result["verdict"] == "cannot tell"


# Overtones, typical values, ranges, floors and ceilings.


@pytest.mark.parametrize("board", [None, bench(BOARD)])
def test_a_third_overtone_for_a_fundamental_runs_at_about_a_third_and_does_not_fit(board):
    """Common practice, no source: without a trap the fundamental takes over, near f/3 = 5.333 MHz."""
    result = one(usual(), usual(mode="third overtone", number="P2"), board)
    assert result["verdict"] == "does not fit"
    assert "runs at about 5.333 MHz, a third of the nominal" in lines(result)["mode"]["message"]
    assert result["shift_ppm"]["low"] == pytest.approx(-2e6 / 3, rel=1e-3)
    assert "on its fundamental, at about 5.333 MHz, a third of the nominal frequency" in result["shift_ppm"]["how"]


def test_a_mode_that_is_not_stated_above_20_mhz_cannot_be_told_and_is_asked_for():
    fast = [reading("frequency_mhz", 26.0)]
    incumbent, silent = usual(*fast), usual(*fast, mode=None, cut=None, number="P2")
    result = one(incumbent, silent)
    assert result["verdict"] == "cannot tell"
    assert result["questions"] == ["Is P2 at 26 MHz a fundamental or an overtone crystal, and of which order?"]
    assert result["decides"].endswith("; ask the maker")


def test_a_known_difference_decides_before_what_neither_sheet_states():
    fast = [reading("frequency_mhz", 26.0)]
    silent = {"mode": None, "cut": None}
    result = one(usual(*fast, **silent), usual(*fast, reading("esr_ohm", max=80.0), number="P2", **silent))
    assert result["decides"] == "ESR: 80 Ω max for 60 Ω max, higher, looser; a bench of the board would tell"


@pytest.mark.parametrize("board", [None, bench(BOARD)])
def test_a_typical_esr_promises_nothing_and_the_limit_is_asked_for(board):
    result = one(usual(), usual(reading("esr_ohm", 20.0), number="P2"), board)
    assert (result["verdict"], lines(result)["esr_ohm"]["relation"]) == ("cannot tell", "unknown")
    assert result["missing"] == ["esr_ohm"]
    assert result["questions"][0].startswith("What is the greatest equivalent series resistance of P2 at 16 MHz")


def test_a_typical_esr_above_the_limit_of_the_other_is_looser():
    result = one(usual(), usual(reading("esr_ohm", 80.0), number="P2"))
    assert lines(result)["esr_ohm"]["relation"] == "looser"


@pytest.mark.parametrize("board", [None, bench(BOARD)])
def test_a_narrower_range_does_not_fit(board):
    result = one(usual(), usual(reading("operating_temperature_c", min=-20.0, max=70.0), number="P2"), board)
    assert result["verdict"] == "does not fit"
    assert "range" in result["decides"]
    assert "-20 to 70 °C" in result["decides"]


def test_a_narrower_range_that_still_holds_the_products_is_no_matter_on_the_board():
    board = bench(BOARD | {"requirement": {"temperature_c": [-10.0, 60.0]}})
    result = one(usual(), usual(reading("operating_temperature_c", min=-20.0, max=70.0), number="P2"), board)
    assert result["verdict"] == "drop-in"
    assert lines(result)["operating_temperature_c"]["matters"] is False


def test_less_esr_than_the_ic_allows_is_a_finding_with_its_reason():
    floor = bench(BOARD | {"circuit": BOARD["circuit"] | {"rating": {"esr_min_ohm": 20.0}}})
    incumbent = usual(reading("esr_ohm", min=25.0, max=60.0))
    result = one(incumbent, usual(reading("esr_ohm", min=5.0, max=15.0), number="P2"), floor)
    assert (result["verdict"], lines(result)["esr_ohm"]["relation"]) == ("does not fit", "tighter")
    assert lines(result)["esr_ohm"]["message"].endswith("in this circuit less is worse")
    assert lines(result)["esr_ohm"]["matters"] is True
    assert result["decides"].startswith("least ESR: the IC asks for 20 Ω at least")


def test_too_much_gain_for_a_greater_c0_is_a_finding_with_its_reason():
    """Lossless the greatest transconductance is Cin Cout/(R1 C3²), C3 = C0 + Cx: more C0 brings the ceiling down."""
    strong = bench(
        {"circuit": {"transconductance_ms": [4.0, 60.0]}, "requirement": {"margin": 4.0, "total_ppm": 300.0}}
    )
    incumbent = usual(reading("esr_ohm", min=10.0, max=20.0))
    fat = usual(
        reading("esr_ohm", min=10.0, max=20.0), reading("shunt_capacitance_pf", 6.0, min=5.0, max=7.0), number="P2"
    )
    result = one(incumbent, fat, strong)
    assert result["verdict"] != "drop-in"
    assert "resistance_headroom" in result["lacks"]
    assert lines(result)["shunt_capacitance_pf"]["matters"] is True
    assert any("oscillation stops again above" in reason["message"] for reason in result["reasons"])


# Packages and pads.


def placed(crystal=None, package="2.5 x 2.0 mm", number="P1", **attributes):
    pads = None if crystal is None else Pads(count=4, crystal=crystal)
    return usual(number=number, package=package, attributes=Attributes(pads=pads, **attributes))


@pytest.mark.parametrize("board", [None, bench(BOARD)])
def test_another_package_does_not_fit_whatever_the_circuit_says(board):
    result = one(placed((1, 3)), placed((1, 3), "2.0 x 1.6 mm", number="P2"), board)
    assert result["verdict"] == "does not fit"
    assert result["decides"] == "package: 2.0 x 1.6 mm in place of 2.5 x 2.0 mm: it does not sit on the board's pads"
    assert result["changes"] == []


@pytest.mark.parametrize("board", [None, bench(BOARD)])
def test_other_crystal_pads_do_not_fit(board):
    result = one(placed((1, 3)), placed((2, 4), number="P2"), board)
    assert result["verdict"] == "does not fit"
    assert result["decides"].startswith("pads: 4 pads, crystal on 2 and 4 in place of 4 pads, crystal on 1 and 3")


def test_pads_that_the_candidates_sheet_does_not_give_are_asked_for():
    result = one(placed((1, 3)), placed(None, number="P2"), bench(BOARD))
    assert (result["verdict"], result["lacks"]) == ("cannot tell", ["pads"])
    assert result["questions"] == ["Which pads of P2 carry the crystal and which are ground, seen from the top?"]


def test_pads_that_neither_sheet_gives_are_said_and_not_held_against():
    result = one(placed(None), placed(None, number="P2"), bench(BOARD))
    assert result["verdict"] == "drop-in"
    assert [finding["about"] for finding in result["findings"]] == ["pads"]


def test_pads_that_cannot_be_a_crystals_are_not_believed():
    result = one(placed((1, 3)), placed((5,), number="P2"), bench(BOARD))
    assert (result["verdict"], result["lacks"]) == ("cannot tell", ["pads"])


def test_grade_that_is_not_stated_is_not_a_no_and_is_said():
    result = one(placed((1, 3), aec_q200=True), placed((1, 3), number="P2"), bench(BOARD))
    line = lines(result)["aec_q200"]
    assert (result["verdict"], line["relation"], line["matters"]) == ("drop-in", "unknown", False)
    assert line["message"] == "AEC-Q200: the candidate's sheet does not state it, which is not a no"


def test_a_worse_moisture_level_and_reflow_peak_are_looser():
    result = one(
        placed((1, 3), moisture_level="1", reflow_peak_c=260.0),
        placed((1, 3), moisture_level="3", reflow_peak_c=245.0, number="P2"),
    )
    assert {lines(result)[name]["relation"] for name in ("moisture_level", "reflow_peak_c")} == {"looser"}


def test_a_smaller_package_with_greater_esr_is_told_by_its_package_and_its_esr():
    """Common practice, no source: the smaller plate has the greater resistance."""
    small = usual(reading("esr_ohm", max=150.0), number="P2", package="1.6 x 1.2 mm")
    result = one(usual(package="2.5 x 2.0 mm"), small, bench({"circuit": {"transconductance_ms": 3.0}}))
    assert result["verdict"] == "does not fit"
    assert result["lacks"][0] == "package"
    assert lines(result)["esr_ohm"]["matters"] is True


# Changes to the board.


def test_another_rated_load_fits_with_capacitors_that_present_it():
    """By hand: 12 pF of two alike ones: 2 (12 - 0.5) - 3 = 20 pF each, which is in the series."""
    board = bench(BOARD | {"requirement": {"total_ppm": 60.0}})
    result = one(usual(*EXACT), usual(*EXACT, reading("load_capacitance_pf", 12.0), number="P2"), board)
    assert result["verdict"] == "fits with changes"
    (change,) = result["changes"]
    assert (change["what"], change["from"]) == ("load capacitors", [12.0, 12.0])
    a, b = (value + 3.0 for value in change["to"])
    assert a * b / (a + b) + 0.5 == pytest.approx(12.0, abs=0.25)
    assert result["decides"].startswith("load capacitors 12 and 12 pF (input, output) become")


def test_what_no_capacitor_mends_does_not_fit():
    board = bench(BOARD | {"requirement": {"total_ppm": 60.0}})
    loose = usual(*EXACT, reading("frequency_stability_ppm", min=-80.0, max=80.0), number="P2")
    result = one(usual(*EXACT), loose, board)
    assert (result["verdict"], result["changes"]) == ("does not fit", [])


def test_too_little_rated_drive_fits_with_a_series_resistor_where_the_output_limits():
    clipping = {"transconductance_ms": 20.0, "limiter": "output", "output_resistance_kohm": 1.0, "swing_v": 1.2}
    board = bench({"circuit": clipping, "requirement": {"total_ppm": 300.0, "margin": 2.0}})
    weak = usual(reading("drive_level_uw", max=60.0), number="P2")
    result = one(usual(reading("drive_level_uw", max=500.0)), weak, board)
    assert (result["verdict"], result["lacks"]) == ("fits with changes", ["drive_level_uw"])
    assert [(change["what"], change["from"]) for change in result["changes"]] == [("series resistor", 0.0)]
    assert result["findings"][-1]["message"].startswith("the swing at the amplifier's output, ahead of the resistor")


# Without a bench.


def test_without_a_bench_the_circuit_is_taken_to_present_the_rated_load_and_that_is_said():
    result = judged(usual(), usual(number="P2"))
    assert result["notes"][0]["message"] == (
        "no bench given: the circuit is taken to present the incumbent's rated load (8 pF), and what is asked is no "
        "worse than the incumbent"
    )
    assert "margin" not in result["candidates"][0]


@pytest.mark.parametrize("make", WORSE[:6])
def test_without_a_bench_a_looser_line_cannot_be_told_and_asks_for_a_bench(make):
    result = one(usual(), usual(make(1.5), number="P2"))
    assert result["verdict"] == "cannot tell"
    assert result["decides"].endswith("looser; a bench of the board would tell")


def test_with_a_bench_both_parts_have_numbers_and_reasons():
    result = judged(usual(), usual(number="P2"), board=bench(BOARD))
    for side in (result["incumbent"], result["candidates"][0]):
        assert side["margin"]["low"] > 5
        assert [reason["about"] for reason in side["reasons"]][:2] == ["margin", "gain_ratio"]


# The call.


def test_candidates_keep_the_order_given_and_a_list_is_ranked():
    worst, middle, best = (
        usual(reading("esr_ohm", max=600.0), number="worst"),
        usual(without=("esr_ohm",), number="middle"),
        usual(number="best"),
    )
    apart = judged(usual(), worst, middle, best, board=bench(BOARD))["candidates"]
    assert [c["part_number"] for c in apart] == ["worst", "middle", "best"]
    assert [c["place"] for c in apart] == [3, 2, 1]
    listed = substitute([sheet(usual())], [sheet(worst, middle, best)], bench(BOARD))["candidates"]
    assert [c["part_number"] for c in listed] == ["best", "middle", "worst"]


def test_a_candidate_of_another_frequency_does_not_fit():
    result = one(usual(), usual(reading("frequency_mhz", 25.0), number="P2"))
    assert (result["verdict"], result["decides"]) == (
        "does not fit",
        "frequency: the candidate's sheet does not offer 16 MHz (states 25 MHz)",
    )
    assert lines(result)["frequency_mhz"]["candidate"] == {"text": "25 MHz"}


@pytest.mark.parametrize(
    ("parts", "told"),
    [
        ((), "made.csv: the incumbent must be one part, and no crystal was found there"),
        (
            (usual(number="A"), usual(number="B")),
            "made.csv: the incumbent must be one part, and there are 2; name it as",
        ),
    ],
)
def test_an_incumbent_that_is_not_one_part_is_a_wrong_call(parts, told):
    with pytest.raises(SubstituteError, match=told):
        substitute([sheet(*parts)], [sheet(usual())], None)


def test_an_incumbent_that_does_not_offer_the_benchs_frequency_is_a_wrong_call():
    with pytest.raises(SubstituteError, match=r"the incumbent does not offer 16 MHz \(states 20 MHz\)"):
        one(usual(reading("frequency_mhz", 20.0)), usual(), bench())


def test_questions_come_in_the_sheets_language_too():
    own = usual(without=("esr_ohm",), number="P2")
    printed = {"load_capacitance_pf": "Lastkapazität 8 pF", "frequency_tolerance_ppm": "Frequenztoleranz ±10 ppm"}
    german = [r.model_copy(update={"raw": printed.get(r.field, "16")}) for r in own.readings]
    result = one(usual(), own.model_copy(update={"readings": tuple(german)}))
    assert result["letter"] == {
        "language": "de",
        "sentences": [
            "Bitte nennen Sie uns für P2 bei 16 MHz den garantierten Wert (min./typ./max.): Resonanzwiderstand."
        ],
    }


def test_of_too_much_of_all_causes_the_other_rated_load_is_named_as_the_cause():
    other = usual(*EXACT, reading("load_capacitance_pf", 12.0), number="P2")
    result = one(usual(*EXACT), other, bench(BOARD))
    assert "; rated load: 12 pF for 8 pF; the frequency moves by +70.2 ppm" in result["decides"]


def test_what_the_candidates_sheet_does_not_state_is_to_be_asked():
    result = one(usual(), usual(without=("esr_ohm",), number="P2"))
    asked = "ask the maker; a bench of the board would tell whether it matters"
    assert result["decides"] == f"ESR: the candidate's sheet does not state it; {asked}"


def test_a_grade_that_the_incumbent_has_and_the_candidates_sheet_does_not_state_is_asked_for():
    result = one(placed((1, 3), aec_q200=True), placed((1, 3), number="P2"), bench(BOARD))
    assert result["questions"] == ["Is P2 qualified to AEC-Q200?"]
    assert one(placed((1, 3)), placed((1, 3), number="P2"), bench(BOARD))["questions"] == []
