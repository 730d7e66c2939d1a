"""Tables and sentences of the Circuit view."""

import pytest
from reviewed_parts import bench, dossier_of, part, radio, watch

from compare.bearing import Bearing, Pair, Setting, bearings, gm_settings
from compare.bearing_text import (
    advice_rows,
    bearing_table,
    cannot_be_met,
    helpful,
    settings_of,
    settings_sentence,
    settings_table,
    use_sentence,
    uses_table,
)
from compare.bench import read_bench, uses
from compare.desk import field_of

GM = field_of("circuit.transconductance_ms.low")


def test_the_table_has_loads_capacitors_and_resistances_with_their_unit():
    rows, _ = bearings(radio().bench, radio().reckoning)
    heads, cells = bearing_table(rows, radio().bench)
    assert heads[3] == "With margin 5, Ω"
    eight = next(row for row in cells if row[0].endswith("8"))
    assert eight[1] == "12 + 13"
    assert eight[4] == "1 of 1"
    assert cells[0][4] == "none offers it"


def test_kilohms_where_the_values_are_so_large():
    rows, _ = bearings(watch().bench, watch().reckoning)
    assert "kΩ" in bearing_table(rows, watch().bench)[0][3]


def test_a_load_that_cannot_be_met_says_so():
    row = Bearing(3.0, None, None, None, 2, 0, fitted=False)
    assert bearing_table([row], bench())[1][0][1:4] == ["cannot be met", "not known", "not known"]
    assert cannot_be_met([row], bench())[0].startswith("No pair from E24 brings 3 pF")
    assert cannot_be_met([Bearing(3.0, None, None, None, 0, 0, fitted=False)], bench()) == []


def test_without_a_known_limit_no_part_is_counted_below_it():
    row = Bearing(8.0, Pair(12.0, 12.0, 8.0), None, None, 13, 0, fitted=False)
    assert bearing_table([row], bench())[1][0][4] == "not known"


@pytest.mark.parametrize(
    ("typed", "ms"),
    [
        ("3.5 5.5 8 µS", [0.0035, 0.0055, 0.008]),
        ("8, 3,5 µS", [0.0035, 0.008]),
        ("3.5µS; 0.008 mS", [0.0035, 0.008]),
        ("4 / 8 mS", [4.0, 8.0]),
        ("", []),
    ],
)
def test_settings_are_read_as_typed(typed, ms):
    found, fault = settings_of(typed, GM)
    assert fault == ""
    assert found == pytest.approx(ms)


def test_a_setting_that_is_no_figure_is_told():
    found, fault = settings_of("high low µS", GM)
    assert found == []
    assert fault.startswith("high: ")


def test_each_cell_has_margin_and_ppm_and_the_advised_one_its_mark():
    rows = gm_settings(watch().bench, watch().reckoning.columns, [0.002, 0.02])
    heads, cells = settings_table(rows)
    assert heads[2:4] == ["2 µS", "20 µS"]
    assert cells[0][2].startswith("▼ ")
    assert cells[0][3].startswith("▮ ▲ ")
    assert cells[0][3].endswith(" ppm")
    said = settings_sentence(rows, watch().bench)
    assert said.startswith("Least current: 20 µS with a rated load of 7 pF (ABX-32), margin ")
    assert said.endswith(" s a day.")


def test_no_setting_that_meets_is_said():
    one = Setting(7.0, 0.002, Pair(10.0, 10.0, 7.0), "A", 0.9, -100.0, 10.0, meets=False)
    assert settings_sentence([[one]], watch().bench).startswith("No setting meets what is asked")


def test_advice_names_the_fields_that_a_trial_would_set():
    rows = advice_rows(radio().review)
    said, sets, name = rows[0]
    assert set(sets) == {"circuit.input_capacitor_pf", "circuit.output_capacitor_pf"}
    for value in sets.values():
        assert value in said
        assert value in name


def pair(first, second, error, over):
    return {"values_pf": [first, second], "load_error_ppm": error, "margin": 8.5, "times_over": over}


def test_a_pair_that_leaves_less_room_than_the_fitted_one_is_not_offered_first():
    overdriven, better = pair(15.0, 10.0, -8.1, 1.115), pair(10.0, 15.0, -8.2, 1.7)
    review = {"verdict": "meets", "slack": {"total_ppm": 1.56, "mode": None}, "advice": [overdriven, better]}
    (row,) = advice_rows(helpful(review))
    assert row[0].startswith("10 pF from A and 15 pF from B to ground: load error at most 8.2 ppm")
    assert row[0].endswith("tightest 1.70 times over")
    none = helpful({**review, "advice": [overdriven]})
    assert none["advice"] == []
    assert none["advice_messages"] == ["No pair of E24 load capacitors gives this part more room than those fitted."]
    short = helpful({**review, "verdict": "falls short", "slack": {"total_ppm": 0.9}, "advice": [overdriven]})
    assert short["advice"] == [overdriven]


def test_a_series_resistor_can_be_tried_too():
    hot = dossier_of(part(), bench(swing_v="swing_v = 3.0"))
    found = [sets for _, sets, _ in advice_rows(hot.review) if "circuit.series_resistor_ohm" in sets]
    assert found or hot.review["advice_messages"]


def test_a_use_is_said_with_limit_and_source():
    said = use_sentence(bench(), "ble-active")
    assert "±50 ppm" in said
    assert "Source: TI BLE5-Stack user guide, clock accuracies." in said
    assert use_sentence(bench(), "") == ""
    clock = read_bench("[requirement]\nfrequency_mhz = 0.032768\n", "w.toml")
    assert "s a day" in use_sentence(clock, "ble-sleep")


def test_every_use_is_listed_with_its_source_or_that_there_is_none():
    _, rows = uses_table()
    assert len(rows) == len(uses())
    assert all(row[3] for row in rows)
