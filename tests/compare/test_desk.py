"""What a person has set, and the bench that it comes to."""

import hand_made
import pytest

from compare.bench import BenchError, read_bench
from compare.desk import Desk, carried_sentence, desk_from_bench, field_key, orchard_example

TYPED = {
    "requirement.frequency_mhz": "26 MHz",
    "requirement.total_ppm": "50",
    "circuit.input_capacitor_pf": "12,5",
    "circuit.output_capacitor_pf": "12 pF",
    "circuit.transconductance_ms.low": "4.6 mS",
    "circuit.transconductance_ms.high": "9",
}
FULL = """
[requirement]
frequency_mhz = 0.032768
use = "ble-sleep"
temperature_c = [-30.0, 60.0]
ageing_rule = "linear"

[circuit]
input_capacitor_pf = 22.0
output_capacitor_pf = 22.0
output_resistance_kohm = inf
overtone_trap = true

[circuit.rating]
esr_max_ohm = [[0.03, 0.04, 12.5, 70000.0]]
esr_min_ohm = 10.0

[[circuit.condition]]
name = "frost"
transconductance_ms = [0.01, 0.02]
input_stray_pf = 2.5

[[circuit.condition]]
temperature_c = 60.0

[crystal]
esr_means = "at load"

[measured]
frequency_mhz = 0.0327681
pairs = [[13.0, 1.3e-5]]
"""


def test_what_is_typed_becomes_the_bench():
    bench = Desk(TYPED).bench
    assert bench.requirement.frequency_mhz == 26.0
    assert bench.circuit.input_capacitor_pf == 12.5
    assert bench.circuit.transconductance_ms == (4.6, 9.0)


def test_one_gm_alone_is_the_least():
    typed = TYPED | {"circuit.transconductance_ms.high": ""}
    assert Desk(typed).bench.circuit.transconductance_ms == 4.6


def test_a_field_with_a_fault_is_left_out_and_told_and_the_rest_is_used():
    desk = Desk(TYPED | {"circuit.swing_v": "a lot"})
    assert desk.faults == {"circuit.swing_v": "“a lot” is no number; write it like 12.5 V"}
    assert desk.bench.circuit.swing_v is None
    assert desk.bench.requirement.total_ppm == 50.0


def test_half_a_temperature_range_is_told_and_not_used():
    desk = Desk(TYPED | {"requirement.temperature_c.high": "60"})
    assert desk.faults == {"requirement.temperature_c.low": "wanted too: the other end alone is not used"}
    assert desk.bench.requirement.temperature_c is None


def test_ends_the_wrong_way_round_are_told_and_not_used():
    desk = Desk(TYPED | {"circuit.transconductance_ms.high": "3"})
    assert desk.faults == {"circuit.transconductance_ms.high": "3 mS is below the least; neither is used"}
    assert desk.bench.circuit.transconductance_ms is None


def test_an_unlikely_value_counts_only_once_it_is_kept():
    key, text = "circuit.input_capacitor_pf", "1250 pF"
    held = Desk(TYPED | {key: text})
    assert held.bench.circuit.input_capacitor_pf is None
    assert Desk(held.typed, frozenset({(key, text)})).bench.circuit.input_capacitor_pf == 1250.0


def test_what_the_bench_refuses_is_told_at_its_field():
    desk = Desk(
        TYPED | {"circuit.capacitor_tolerance_percent": "150"},
        frozenset({("circuit.capacitor_tolerance_percent", "150")}),
    )
    assert desk.bench is None
    assert set(desk.faults) == {"circuit.capacitor_tolerance_percent"}


def test_a_blank_desk_is_no_bench_and_no_fault():
    assert Desk().bench is None
    assert Desk({"circuit.swing_v": ""}).faults == {}


def test_a_circuit_without_a_frequency_asks_for_it_at_its_field():
    faults = Desk({"circuit.swing_v": "0.5"}).faults
    assert faults == {"requirement.frequency_mhz": "wanted first: nothing can be judged without it"}


@pytest.mark.parametrize("text", [hand_made.BENCH_TEXT, FULL], ids=["radio", "everything"])
def test_a_bench_file_opened_and_saved_is_the_same_bench(text):
    desk = desk_from_bench(text, "bench.toml")
    assert desk.faults == {}
    assert desk.bench == read_bench(text, "bench.toml")
    assert read_bench(desk.bench_text, "saved.toml") == desk.bench


def test_what_a_file_holds_beside_the_fields_is_named():
    said = carried_sentence(desk_from_bench(FULL, "bench.toml"))
    assert said == (
        "From the bench file and in use, without a field here: circuit.condition[1].input_stray_pf, "
        "circuit.rating.esr_max_ohm, measured.pairs."
    )


def test_an_unreadable_bench_file_says_key_and_line():
    with pytest.raises(BenchError, match="bench.toml, line 3: circuit.swing: unknown key"):
        desk_from_bench("requirement.frequency_mhz = 26.0\n[circuit]\nswing = 1.0\n", "bench.toml")


def test_the_last_corner_goes_with_all_that_it_holds():
    desk = desk_from_bench(FULL, "bench.toml").without_last_condition().without_last_condition()
    assert desk.bench.circuit.condition == ()


def test_an_added_corner_starts_blank_and_takes_what_is_typed():
    desk = Desk(TYPED | {"condition.0.transconductance_ms.low": "3 mS", "condition.0.name": "frost"}, conditions=1)
    (condition,) = desk.bench.circuit.condition
    assert (condition.name, condition.transconductance_ms) == ("frost", 3.0)


@pytest.mark.parametrize(
    ("place", "key"),
    [
        ("circuit.swing_v", "circuit.swing_v"),
        ("circuit.condition[2].swing_v", "condition.1.swing_v"),
        ("circuit.rating.load_pf", "rating.load_pf"),
        ("requirement.temperature_c", "requirement.temperature_c.low"),
        ("requirement", "requirement.frequency_mhz"),
        ("measured.pairs", ""),
    ],
)
def test_a_fault_of_the_file_finds_its_field(place, key):
    assert field_key(place) == key


def test_the_orchard_example_has_sheets_and_benches_that_can_be_opened():
    example = orchard_example()
    assert example is not None
    assert example.sheets
    for path in example.benches.values():
        assert desk_from_bench(path.read_text(encoding="utf-8"), path.name).faults == {}
