"""What a person types into a field. Expected values are by hand; unit factors are those of the SI prefixes."""

import pytest

from compare.bench import Bench
from compare.typed import fields, layout, shown, understand, units

CAPACITOR = fields()["circuit.input_capacitor_pf"]
FREQUENCY = fields()["requirement.frequency_mhz"]
GM = fields()["circuit.transconductance_ms.low"]
FEEDBACK = fields()["circuit.feedback_resistor_kohm"]
PPM = fields()["requirement.total_ppm"]


@pytest.mark.parametrize(
    ("text", "asked", "value"),
    [
        ("12,5", CAPACITOR, 12.5),
        ("12.5 pF", CAPACITOR, 12.5),
        (" 12.5pf ", CAPACITOR, 12.5),
        ("0,0125 nF", CAPACITOR, 12.5),
        ("0.0047 nF", CAPACITOR, 4.7),
        ("1 2,5", CAPACITOR, 12.5),
        ("32768 Hz", FREQUENCY, 0.032768),
        ("32.768 kHz", FREQUENCY, 0.032768),
        ("26,000", FREQUENCY, 26.0),
        ("26.000.000 Hz", FREQUENCY, 26.0),
        ("4.6 mA/V", GM, 4.6),
        ("11,5 µS", GM, 0.0115),
        ("11.5 μS", GM, 0.0115),  # Greek mu instead of the micro sign
        ("1M", FEEDBACK, 1000.0),
        ("1,000", FEEDBACK, 1000.0),
        ("±50 ppm", PPM, 50.0),
        ("−40 °C", fields()["requirement.temperature_c.low"], -40.0),
        ("-40", fields()["requirement.temperature_c.low"], -40.0),
        ("inf", fields()["circuit.output_resistance_kohm"], float("inf")),
        ("0", CAPACITOR, 0.0),
    ],
)
def test_typed_amounts_are_understood(text, asked, value):
    assert understand(text, asked).value == value


def test_a_blank_field_is_no_fault():
    assert understand("  ", CAPACITOR).value is None
    assert understand("  ", CAPACITOR).fault == ""


@pytest.mark.parametrize(
    ("text", "asked", "fault"),
    [
        ("12.5 u", CAPACITOR, "“u”: unit not known; pF, fF, nF are"),
        ("about 12", CAPACITOR, "“about 12” is no number; write it like 12.5 pF"),
        ("5 x", fields()["requirement.margin"], "“x”: unit not known; this is a plain number"),
        ("4,7,8", CAPACITOR, "several decimal marks in one number; write it with one"),
        (
            "12500",
            CAPACITOR,
            "12500 pF: plausible is 0.5 to 470 pF. Meant 12.5 pF? Not used until you say.",
        ),
        ("32,768 kHz", FREQUENCY, "can be 32.768 kHz or 32.768 MHz; write it without the comma"),
    ],
)
def test_what_cannot_be_used_says_why_in_one_sentence(text, asked, fault):
    said = understand(text, asked)
    assert said.value is None
    assert said.fault == fault


def test_an_unlikely_value_is_used_once_a_person_says_that_it_is_so():
    assert understand("12500", CAPACITOR).doubtful
    assert understand("12500", CAPACITOR).instead == 12.5
    assert understand("12500", CAPACITOR, kept=True).value == 12500.0


@pytest.mark.parametrize("asked", [one for one in fields().values() if one.kind == "number"], ids=lambda one: one.key)
def test_every_value_shown_back_reads_back_the_same(asked):
    low, high = asked.plausible
    for value in (low, (low + high) / 2, high):
        rounded = float(f"{value:.6g}")
        assert understand(shown(rounded, asked), asked, kept=True).value == pytest.approx(rounded, rel=1e-9)


def test_every_unit_of_a_field_has_its_spellings():
    assert all(units(one.unit).get(one.unit) == 1 for one in fields().values() if one.unit)


def test_every_field_has_its_place_in_the_form_and_a_key_of_the_bench():
    groups = {one.group for one in fields().values()}
    placed = [one.key for group in groups for row in layout(group) for one, _ in row if one is not None]
    assert sorted(placed) == sorted(fields())
    schema = Bench.model_json_schema()["$defs"]
    tables = {"requirement": "Requirement", "circuit": "Circuit", "crystal": "CrystalRules", "measured": "Measured"}
    tables |= {"rating": "Rating", "condition": "Condition"}
    for key in fields():
        table, name = key.removesuffix(".low").removesuffix(".high").split(".")
        assert name in schema[tables[table]]["properties"], key


def test_the_options_of_a_choice_are_those_of_the_bench():
    from typing import get_args

    from compare import bench

    models = {"requirement": bench.Requirement, "circuit": bench.Circuit, "crystal": bench.CrystalRules}
    models |= {"measured": bench.Measured, "rating": bench.Rating}
    for one in fields().values():
        if one.kind == "choice":
            table, name = one.key.split(".")
            field = models[table].model_fields[name]
            assert set(one.options) == set(get_args(field.annotation)), one.key
            assert next(iter(one.options)) == field.default, one.key


def test_a_watch_crystals_values_are_shown_in_the_units_they_are_spoken_in():
    assert shown(0.032768, FREQUENCY) == "32.768 kHz"
    assert shown(0.0115, GM) == "11.5 µS"
    assert shown(20000.0, fields()["circuit.series_resistor_ohm"]) == "20 kΩ"


@pytest.mark.parametrize("kept", [False, True])
def test_a_negative_capacitor_is_a_fault_that_cannot_be_kept(kept):
    said = understand("-12 pF", CAPACITOR, kept=kept)
    assert said.value is None
    assert not said.doubtful
    assert said.fault == "must not be below 0, got −12 pF"
