"""How much ESR a circuit bears at each rated load, and the gm settings, against reviews of the same circuits."""

import made_sheets
import pytest
from reviewed_parts import WATCH_TEXT, bench, dossier_of, part, radio, watch

from compare.bearing import advised, bearings, gm_settings, pair_for, rated_loads, why_no_pair, with_setting
from compare.bench import read_bench
from compare.reckoning import Reckoning, reckon_sheets


def reckoned(*parts, of_bench=None) -> Reckoning:
    found = reckon_sheets([made_sheets.sheet(*parts)], of_bench or bench())
    assert isinstance(found, Reckoning)
    return found


def at(rows, load):
    return next(one for one in rows if one.load_pf == load)


def test_the_pair_presents_the_rated_load():
    pair = pair_for(bench(), 8.0)
    # By hand: (12 + 2.6)(13 + 2.6)/(27 + 3.2) + 0.4 = 7.94 pF; 12 and 12 would be 7.70, 13 and 13 8.20.
    assert sorted((pair.input_pf, pair.output_pf)) == [12.0, 13.0]
    assert pair.load_pf == pytest.approx(7.942, abs=1e-3)


def test_a_load_below_the_strays_cannot_be_met_and_that_is_said():
    text = bench().to_toml().replace("input_stray_pf = 2.6", "input_stray_pf = 14.4")
    text = text.replace("output_stray_pf = 2.6", "output_stray_pf = 14.4")
    wide = read_bench(text, "wide.toml")
    assert pair_for(wide, 7.0) is None
    # By hand: 14.4 in series with 14.4 is 7.2, and 0.4 across.
    assert why_no_pair(wide, 7.0) == (
        "No pair from E24 brings 7 pF: the strays alone come to 7.6 pF. "
        "Choose a higher rated load, or shorten the tracks."
    )
    assert at(bearings(wide, None)[0], 6.0).pair is None


def test_what_the_circuit_bears_is_the_reviews_greatest_esr():
    rows, c0 = bearings(radio().bench, radio().reckoning)
    assert c0 == pytest.approx(1.2)
    row = at(rows, 8.0)
    there = dossier_of(part(), with_setting_of(row.pair))
    assert row.greatest_ohm == pytest.approx(there.review["greatest_esr_ohm"]["low"], rel=1e-3)
    assert row.allowed_ohm == pytest.approx(row.greatest_ohm / 5)


def with_setting_of(pair):
    return bench(
        input_capacitor_pf=f"input_capacitor_pf = {pair.input_pf}",
        output_capacitor_pf=f"output_capacitor_pf = {pair.output_pf}",
    )


def test_parts_that_stay_below_are_counted_among_those_that_offer_the_load():
    low, high = (made_sheets.reading("esr_ohm", max=value) for value in (20.0, 400.0))
    other = made_sheets.reading("load_capacitance_pf", 12.0)
    rows, _ = bearings(bench(), reckoned(part(low), part(high), part(low, other)))
    assert (at(rows, 8.0).below, at(rows, 8.0).offering) == (1, 2)
    assert (at(rows, 12.0).below, at(rows, 12.0).offering) == (1, 1)
    assert at(rows, 6.0).offering == 0


def test_a_part_is_judged_with_its_own_c0():
    esr, much = made_sheets.reading("esr_ohm", max=70.0), made_sheets.exactly("shunt_capacitance_pf", 7.0)
    rows, _ = bearings(bench(), reckoned(part(esr), part(esr, much), part(esr)))
    assert (at(rows, 8.0).below, at(rows, 8.0).offering) == (2, 3)


def test_the_capacitors_fitted_now_are_marked():
    rows, _ = bearings(bench(output_capacitor_pf="output_capacitor_pf = 13.0"), None)
    assert [row.load_pf for row in rows if row.fitted] == [8.0]


def test_without_a_gain_nothing_is_known():
    text = bench().to_toml().split("[[circuit.condition]]")[0].replace("transconductance_ms = [4.6, 9.0]\n", "")
    rows, _ = bearings(read_bench(text, "none.toml"), None)
    assert all(row.greatest_ohm is None and row.allowed_ohm is None for row in rows)


def test_offered_loads_come_besides_the_usual_ones_in_order():
    other = made_sheets.reading("load_capacitance_pf", 9.3)
    loads = rated_loads(bench(), reckoned(part(other)))
    assert loads == sorted(loads)
    assert {6.0, 9.3, 12.0} <= set(loads)
    assert rated_loads(watch().bench, None) == [6.0, 7.0, 9.0, 12.5]


def test_a_setting_is_the_review_of_that_bench():
    rows = gm_settings(watch().bench, watch().reckoning.columns, [0.008, 0.02])
    (row,) = rows
    assert [one.gm_ms for one in row] == [0.008, 0.02]
    for one in row:
        text = WATCH_TEXT.replace("transconductance_ms = 0.02", f"transconductance_ms = {one.gm_ms}")
        text = text.replace("input_capacitor_pf = 12.0", f"input_capacitor_pf = {one.pair.input_pf}")
        text = text.replace("output_capacitor_pf = 12.0", f"output_capacitor_pf = {one.pair.output_pf}")
        there = dossier_of(made_sheets.fork(), read_bench(text, "there.toml"))
        assert one.margin == pytest.approx(there.review["margin"]["low"])
        assert one.low_ppm == pytest.approx(there.review["total_ppm"]["low"])
        assert one.meets == (there.review["verdict"] == "meets")


def test_conditions_keep_their_ratio_to_the_setting():
    there = with_setting(bench(), pair_for(bench(), 8.0), 3.2)
    low, mid, high = there.settings[0].circuit.transconductance_range_ms
    assert mid == pytest.approx(3.2)
    assert high / low == pytest.approx(9.0 / 4.6)
    assert there.settings[1].circuit.transconductance_ms == pytest.approx(3.6 * 3.2 / (4.6 * 9.0) ** 0.5)


def test_the_least_gm_that_meets_is_advised():
    (row,) = gm_settings(watch().bench, watch().reckoning.columns, [0.002, 0.01, 0.02])
    best = advised(row)
    assert best is next(one for one in row if one.meets)
    assert advised([one for one in row if not one.meets]) is None
