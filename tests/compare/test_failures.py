"""What happens when something fails, against reviews of benches in which it has failed."""

import made_sheets
import pytest
from reviewed_parts import bench, dossier_of, part, radio, watch

from compare.bench import read_bench
from compare.failures import HEADS, failures


def row(dossier, begins):
    return next(one for one in dossier.failures if one.what.startswith(begins))


def test_an_open_capacitor_is_reckoned_as_a_bench_without_it():
    there = dossier_of(part(), bench(input_capacitor_pf="input_capacitor_pf = 0.0"))
    said = row(radio(), "Capacitor A–0 open")
    assert said.headroom == pytest.approx(there.review["resistance_headroom"]["low"])
    shift = there.review["load_error_ppm"]["mid"] - radio().review["load_error_ppm"]["mid"]
    assert said.shift_ppm == pytest.approx(shift)
    assert shift > 0
    assert said.effect in ("fast", "stops in some corner")


def test_three_times_the_resistance_leaves_a_third_of_the_headroom():
    said = row(radio(), "R1 three times")
    assert said.headroom == pytest.approx(radio().review["resistance_headroom"]["low"] / 3, rel=1e-3)


def test_half_the_gain_is_that_of_every_condition():
    text = bench().to_toml().replace("[4.6, 9.0]", "[2.3, 4.5]").replace("= 3.6", "= 1.8")
    there = dossier_of(part(), read_bench(text, "half.toml"))
    said = row(radio(), "IC's gm at half")
    assert said.headroom == pytest.approx(there.review["resistance_headroom"]["low"])


def test_leakage_lies_beside_the_feedback_resistor():
    # By hand: 15 MΩ beside 1 MΩ is 937.5 kΩ.
    text = watch().bench.to_toml().replace("= 15000.0", "= 937.5")
    there = dossier_of(made_sheets.fork(), read_bench(text, "leak.toml"))
    said = row(watch(), "Leakage of 1 MΩ")
    assert said.headroom == pytest.approx(there.review["resistance_headroom"]["low"])


def test_more_capacitance_is_slow_and_what_stops_is_said_to():
    assert row(radio(), "2 pF more at A–0").effect == "slow"
    weak = dossier_of(part(made_sheets.reading("esr_ohm", 140.0, max=250.0)))
    assert row(weak, "R1 three times").effect == "stops in some corner"


def test_what_cannot_be_reckoned_stands_as_common_practice():
    said = row(radio(), "Starts on an overtone")
    assert (said.effect, said.headroom, said.shift_ppm) == ("overtone", None, None)
    assert len(said.cells) == len(HEADS)


def test_every_kind_of_effect_is_there():
    effects = " ".join(one.effect for one in failures(radio().reckoning, 0))
    for word in ("stops", "slow", "fast", "overtone", "intermittent"):
        assert word in effects


def test_an_unknown_circuit_has_no_table():
    assert dossier_of(part(), read_bench("[requirement]\nfrequency_mhz = 26.0\n", "bare.toml")).failures == []
