import numpy as np
import pytest
from made_sheets import bench, exactly, reading, sheet, usual

from compare.columns import make_columns
from compare.find import find_offers
from compare.reckoning import reckon_sheets
from compare.roots import (
    AMPLIFIER,
    ESR,
    GAIN,
    INPUT,
    INPUT_INSIDE,
    INPUT_STRAY,
    SHUNT,
    SHUNT_FLOOR,
    circuit_at,
    circuit_roots,
    crystal_roots,
    moved_alone,
    moves,
)


def columns_of(part, asked):
    return make_columns(find_offers([sheet(part)], asked).offers, asked)


def roots_of(**circuit):
    asked = bench({"circuit": circuit})
    return circuit_roots(asked.settings[0].circuit, asked)


def test_each_capacitance_has_its_own_tolerance():
    roots = roots_of(capacitor_tolerance_percent=5.0, stray_tolerance_percent=30.0, internal_pf=4.0)
    assert roots[INPUT] == pytest.approx((11.4, 12.0, 12.6))
    assert roots[INPUT_STRAY] == pytest.approx((2.1, 3.0, 3.9))
    assert roots[INPUT_INSIDE] == pytest.approx((3.6, 4.0, 4.4))


def test_capacitors_as_seen_by_the_crystal_stand_twice_at_each_pin():
    assert roots_of(internal_pf=4.0, internal_as="as seen by the crystal")[INPUT_INSIDE][1] == 8.0


def test_the_gain_is_left_out_where_the_bench_gives_none():
    assert GAIN not in roots_of(transconductance_ms=None)
    assert roots_of(transconductance_ms=[2.0, 8.0])[GAIN] == (2.0, 4.0, 8.0)


def test_an_unknown_capacitor_is_no_zero():
    assert np.isnan(roots_of(input_capacitor_pf=None)[INPUT]).all()


@pytest.mark.parametrize(("resistor", "output_pf", "amplifier_pf"), [(0.0, 19.0, 3.0), (100.0, 15.0, 7.0)])
def test_what_is_inside_the_ic_lies_ahead_of_a_series_resistor(resistor, output_pf, amplifier_pf):
    asked = bench({"circuit": {"internal_pf": 4.0, "amplifier_output_pf": 3.0, "series_resistor_ohm": resistor}})
    keys = asked.settings[0].circuit
    values = {name: np.array(ends[1]) for name, ends in circuit_roots(keys, asked).items()}
    circuit = circuit_at(values, keys, asked, np.zeros(()))
    assert (circuit.output_pf, circuit.amplifier_output_pf) == pytest.approx((output_pf, amplifier_pf))
    assert circuit.input_pf == pytest.approx(19.0)


def test_what_has_no_span_does_not_move():
    one = columns_of(usual(exactly("esr_ohm", 60.0)), bench())
    roots = crystal_roots(one, 0)
    assert not moves(roots[ESR])
    assert moves(roots[SHUNT])
    assert not moves(roots_of(amplifier_output_pf=0.0)[AMPLIFIER])


def test_the_first_column_is_the_reviews_nominal_and_the_others_one_root_each():
    part, asked = (
        usual(reading("esr_ohm", 40.0, min=30.0, max=60.0)),
        bench({"circuit": {"transconductance_ms": [4.0, 9.0]}}),
    )
    moved = moved_alone(columns_of(part, asked), asked, 0, "transconductance")
    numbers = reckon_sheets([sheet(part)], asked).numbers
    for key, values in moved.found.items():
        assert values[0, 0] == pytest.approx(numbers[key].ends[1, 0], rel=1e-12), key
    low, high = dict(moved.ends_of)[ESR]
    gain = moved.found["resistance_headroom"][0]
    # -Re Z does not know R1: the headroom goes exactly as 1/R1.
    assert gain[low] / gain[0] == pytest.approx(40 / 30)
    assert gain[high] / gain[0] == pytest.approx(40 / 60)


def test_a_loose_c0_has_its_low_end_apart():
    one = columns_of(usual(reading("shunt_capacitance_pf", max=5.0)), bench())
    names = [name for name, _ in moved_alone(one, bench(), 0, "transconductance").ends_of]
    assert SHUNT_FLOOR in names
    assert SHUNT not in names
