"""Where the worst values fall, against the review's own numbers."""

import pytest
from reviewed_parts import bench, dossier_of, part, radio, watch

from compare.bench import read_bench
from compare.falls import conditions, worst_corners

ENDS = {
    "margin": "low",
    "gain_ratio": "low",
    "resistance_headroom": "low",
    "drive_level_uw": "high",
    "startup_ms": "high",
}


@pytest.mark.parametrize("dossier", [radio, watch])
def test_the_corner_named_has_the_reviews_worst_value(dossier):
    one = dossier()
    for key, end in ENDS.items():
        assert one.corners[key].value == pytest.approx(one.review[key][end], rel=1e-3)
    for end in ("low", "high"):
        assert one.corners[f"load_error_ppm, {end}"].value == pytest.approx(one.review["load_error_ppm"][end], rel=1e-3)


def test_the_condition_with_the_least_gain_is_named():
    assert radio().corners["margin"].condition == "frost, weak battery"
    assert radio().corners["margin"].words.startswith("frost, weak battery: ")


def test_the_corner_put_into_the_bench_gives_the_same_value():
    # Every tolerance taken away and moved by hand to the ends that the corner names: loads most, R1 and C0 most.
    text = """
    [requirement]
    frequency_mhz = 26.0
    [circuit]
    transconductance_ms = 3.6
    input_capacitor_pf = 12.12
    output_capacitor_pf = 12.12
    capacitor_tolerance_percent = 0.0
    input_stray_pf = 2.76
    output_stray_pf = 2.99
    across_stray_pf = 0.46
    stray_tolerance_percent = 0.0
    feedback_resistor_kohm = 1000.0
    """
    alone = dossier_of(part(), read_bench(text, "corner.toml"))
    assert set(radio().corners["margin"].at) == {"R1, C0 and load most"}
    assert alone.review["margin"]["low"] == pytest.approx(radio().review["margin"]["low"], rel=1e-6)


def test_a_part_without_any_spread_has_one_corner():
    text = bench().to_toml()
    for line in ("capacitor_tolerance_percent = 1.0", "stray_tolerance_percent = 15.0"):
        text = text.replace(line, f"{line.split(' = ')[0]} = 0.0")
    text = text.split("[[circuit.condition]]")[0].replace("[4.6, 9.0]", "4.6")
    sharp = dossier_of(part(), read_bench(text, "sharp.toml"))
    assert "load" not in sharp.corners["margin"].words
    assert "gm" not in sharp.corners["margin"].words


def test_each_condition_has_its_own_worst_margin():
    one = radio()
    rows = conditions(one.reckoning, one.at)
    assert [name for name, _, _ in rows] == ["", "frost, weak battery"]
    assert [temperature for _, temperature, _ in rows] == [None, -30.0]
    least = min(worst["margin"] for _, _, worst in rows)
    assert least == pytest.approx(one.review["margin"]["low"], rel=1e-3)
    assert rows[0][2]["margin"] > rows[1][2]["margin"]


def test_of_an_unknown_circuit_nothing_is_said():
    silent = dossier_of(part(), read_bench("[requirement]\nfrequency_mhz = 26.0\n", "bare.toml"))
    assert worst_corners(silent.reckoning, 0).keys().isdisjoint({"margin"})
    assert silent.corners == {}
