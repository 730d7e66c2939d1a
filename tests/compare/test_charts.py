"""The charts as Vega-Lite, drawn from figures by hand."""

import pytest

from compare import charts
from compare.charts import AXIS, LoadPull, Slack, dressed, load_chart, load_table, slack_chart
from compare.palette import DARK, LIGHT

ROWS = [
    Slack("Margin", 1.34, 4.65, "6.7, needs 5"),
    Slack("ppm in all", 0.90, 1.44, "+55.3, limit ±50"),
    Slack("Drive", None, None, "not known"),
]
# A 26 MHz part: C1 4.4 fF, C0 1.1 pF, rated 8 pF, in a circuit of 7.70 pF (7.38 to 8.01).
PULL = LoadPull(4.4, 1.1, 8.0, 7.38, 7.70, 8.01, -23.6, 23.6)


def specification(chart, palette=LIGHT):
    return dressed(chart, palette).to_dict()


def values(spec):
    return [row for rows in spec["datasets"].values() for row in rows]


def marks(spec):
    return [layer for layer in spec["layer"] for layer in layer.get("layer", [layer])]


def test_every_requirement_stands_in_the_slack_chart_with_its_figures():
    said = {row.get("requirement"): row.get("said") for row in values(specification(slack_chart(ROWS, LIGHT)))}
    for row in ROWS:
        assert said[row.requirement] == row.said


def test_what_is_not_known_is_dotted_and_has_no_mark():
    by_name = {row.get("requirement"): row for row in values(specification(slack_chart(ROWS, LIGHT)))}
    assert not by_name["Drive"]["known"]
    assert by_name["Margin"]["known"]
    assert any(layer["mark"].get("strokeDash") == [1, 4] for layer in marks(specification(slack_chart(ROWS, LIGHT))))


def test_short_and_tightest_are_told_apart():
    by_name = {row.get("requirement"): row for row in values(specification(slack_chart(ROWS, LIGHT)))}
    assert by_name["ppm in all"]["short"]
    assert by_name["ppm in all"]["tightest"]
    assert not by_name["Margin"]["short"]
    assert not by_name["Margin"]["tightest"]


def test_slack_beyond_the_axis_is_drawn_at_its_edge():
    frame = values(specification(slack_chart([Slack("Drive", 999.0, 999.0, ""), Slack("Gain", 0.0, 0.0, "")], LIGHT)))
    drawn = [row["worst"] for row in frame if "requirement" in row]
    assert max(drawn) <= 40
    assert min(drawn) >= 0.4


def test_all_known_or_none_known_can_be_drawn():
    for rows in (ROWS[:1], ROWS[2:], []):
        assert specification(slack_chart(rows, LIGHT))["layer"]


def test_the_chart_grows_with_its_rows():
    one, three = (slack_chart(rows, LIGHT).to_dict()["height"] for rows in (ROWS[:1], ROWS))
    assert (one, three) == (25 + AXIS, 75 + AXIS)


def test_the_shift_is_nothing_at_the_rated_load_and_falls_with_it():
    assert PULL.shift_ppm(8.0) == 0
    # By hand: 4.4 fF / 2 × (1/(1.1 + 7.7) - 1/(1.1 + 8)) per pF = 2.2e-3 × (0.113636 - 0.109890) = 8.24e-6.
    assert PULL.shift_ppm(7.7) == pytest.approx(8.24, abs=0.01)
    assert PULL.shift_ppm(9.0) < 0


def test_a_series_part_counts_from_series_resonance():
    # By hand: 4.4e-3 / (2 × (1.1 + 10)) = 198.2e-6 above series resonance.
    assert LoadPull(4.4, 1.1, None, 9.0, 10.0, 11.0).shift_ppm(10.0) == pytest.approx(198.2, abs=0.1)


def test_the_load_chart_shows_load_rated_load_and_what_is_left():
    said = {row["t"] for row in values(specification(load_chart(PULL, LIGHT))) if "t" in row}
    assert said == {"circuit 7.70 pF, +8.2 ppm", "rated 8 pF", "room left for load +23.6 ppm", "−23.6 ppm"}


def test_the_words_of_the_load_chart_stay_inside_it():
    for circuit_pf in (6.0, 7.0, 7.7, 8.0, 8.4, 10.0):
        pull = LoadPull(4.4, 1.1, 8.0, circuit_pf - 0.3, circuit_pf, circuit_pf + 0.3, -23.6, 23.6)
        spec = specification(load_chart(pull, LIGHT))
        words = [row for row in values(spec) if "t" in row]
        domain = marks(spec)[-1]["encoding"]["x"]["scale"]["domain"]
        for row in words:
            # 6 px a letter is wider than the typeface at 12 px, of a frame of some 390 px.
            wide = 6 * len(row["t"]) / 390 * (domain[1] - domain[0])
            start, end = (row["x"], row["x"] + wide) if row["starts"] else (row["x"] - wide, row["x"])
            assert domain[0] - 0.02 * wide <= start
            assert end <= domain[1] + 0.02 * wide


def test_a_limit_far_away_does_not_flatten_the_curve():
    near = LoadPull(4.4, 1.1, 8.0, 7.9, 8.0, 8.1, -4000.0, 4000.0)
    low, high = marks(specification(load_chart(near, LIGHT)))[0]["encoding"]["y"]["scale"]["domain"]
    assert high - low < 100


def test_the_table_is_the_curve_at_nine_loads():
    table = load_table(PULL)
    assert list(table.columns) == ["Load, pF", "Shift, ppm"]
    assert len(table) == 9
    for load, shift in table.itertuples(index=False):
        assert shift == pytest.approx(PULL.shift_ppm(load), abs=0.3)


def test_both_themes_put_their_own_colours_in():
    for palette in (LIGHT, DARK):
        assert specification(slack_chart(ROWS, palette), palette)["config"]["background"] == palette.page


def test_a_kept_chart_is_the_chart_and_cannot_be_spoilt():
    made = charts.specification(slack_chart, tuple(ROWS), LIGHT)
    assert made["height"] == slack_chart(ROWS, LIGHT).to_dict()["height"]
    assert made["config"]["background"] == LIGHT.page
    made["config"].clear()
    assert charts.specification(slack_chart, tuple(ROWS), LIGHT)["config"]["background"] == LIGHT.page
    assert charts.specification(slack_chart, tuple(ROWS), DARK)["config"]["background"] == DARK.page
