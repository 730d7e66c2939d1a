"""What Substitute says: headings, lines in order of harm, differences and sentences, on parts by hand."""

import pytest
from swap_made import BENCH, part, sheet

from compare import swap_shown
from compare.levers import levers
from compare.substitution import substitute

OLD = part("OLD-1")


def swapped(candidate, bench=BENCH, incumbent=OLD):
    result = substitute([sheet(incumbent)], [sheet(candidate)], bench)
    return result, result["candidates"][0]


def lines(candidate, bench=BENCH):
    _, one = swapped(candidate, bench)
    bars = (
        levers((sheet(OLD), OLD), (sheet(candidate), candidate), swap_shown.differing_fields(one), BENCH)
        if bench
        else {}
    )
    return swap_shown.swap_lines(one, bars)


def test_a_part_that_is_no_worse_is_a_drop_in():
    _, one = swapped(part("NEW-1"))
    assert swap_shown.heading(one) == "▲ Drop-in"
    assert swap_shown.below_heading(one)[-1] == "On the unchanged board the frequency does not move."


def test_what_does_not_fit_is_named_in_the_heading():
    _, smaller = swapped(part("NEW-1", package="2.0 × 1.6"))
    assert swap_shown.heading(smaller) == "▼ Does not fit: another package"
    _, wide = swapped(part("NEW-1", frequency_stability_ppm=(-60.0, None, 60.0)))
    assert swap_shown.heading(wide) == "▼ Does not fit: ppm in all"
    third = part("NEW-1", motional_capacitance_ff=(None, 0.4, None)).model_copy(update={"mode": "third overtone"})
    assert swap_shown.heading(swapped(third)[1]) == "▼ Does not fit: third overtone"


def test_what_cannot_be_told_names_the_reading_that_is_missing():
    _, silent = swapped(part("NEW-1", esr_ohm=(None, None, None)))
    assert swap_shown.heading(silent) == "◇ Cannot tell: ESR not stated"
    _, unsaid = swapped(part("NEW-1").model_copy(update={"mode": None}))
    assert swap_shown.heading(unsaid) == "◇ Cannot tell: mode not stated"


def test_what_must_be_fitted_is_counted_and_said_by_node():
    changes = [{"what": "load capacitors", "from": [12.0, 12.0], "to": [12.0, 13.0]}]
    assert swap_shown.changes_counted(changes) == "one capacitor"
    assert swap_shown.changes_text(changes) == "from B to ground fit **13 pF** instead of 12 pF"
    assert swap_shown.after_heading(changes, "meets") == "With 13 pF from B to ground: ▲ meets"
    both = [*changes, {"what": "series resistor", "from": 0.0, "to": 470.0}]
    assert swap_shown.changes_counted(both) == "one capacitor and a series resistor"
    assert swap_shown.changes_text(both).endswith("and in series with the amplifier’s output fit **470 Ω**")


def test_a_part_for_another_load_shows_what_to_fit_and_the_shift_with_its_sign():
    _, one = swapped(part("NEW-1", load_capacitance_pf=(None, 9.5, None)))
    assert one["verdict"] == "fits with changes"
    assert swap_shown.heading(one).startswith("△ Fits with changes: ")
    first, shift = swap_shown.below_heading(one)
    assert first.startswith("From A to ground fit **")
    assert "As built: ppm, all causes: " in first
    # A crystal made for more load runs high on less.
    assert shift.startswith("On the unchanged board the frequency moves **+")


def test_the_most_harmful_line_stands_on_top_and_gains_stand_last():
    found = lines(
        part(
            "NEW-1",
            frequency_stability_ppm=(-60.0, None, 60.0),
            frequency_tolerance_ppm=(-12.0, None, 12.0),
            drive_level_uw=(None, None, 300.0),
        )
    )
    assert [line.field for line in found.differ][:2] == ["frequency_stability_ppm", "frequency_tolerance_ppm"]
    assert found.differ[-1].field == "drive_level_uw"
    assert found.differ[0].lever.past
    assert "esr_ohm" in [line.field for line in found.same]
    assert {line.relation for line in found.same} == {"same"}


@pytest.mark.parametrize(
    ("changed", "difference", "sign"),
    [
        ({"esr_ohm": (None, None, 50.0)}, "+10 (+25 %)", "−"),
        ({"frequency_tolerance_ppm": (-7.0, None, 7.0)}, "−3", "+"),
        ({"operating_temperature_c": (-30.0, None, 85.0)}, "+10 / 0", "−"),
        ({"load_capacitance_pf": (None, 9.0, None)}, "+1", "≠"),
        ({"drive_level_uw": (None, None, 100.0)}, "−100 (−50 %)", "−"),
        ({"drive_level_uw": (None, None, None)}, "", "?"),
    ],
)
def test_each_difference_has_its_sign_and_its_relation(changed, difference, sign):
    found = lines(part("NEW-1", **changed))
    (line,) = [one for one in found.differ if one.field in changed]
    assert (line.difference, line.sign) == (difference, sign)


def test_large_resistances_stand_in_kilohms_in_every_cell_of_their_line():
    old, new = (sheet(part(name, esr_ohm=esr)) for name, esr in (("A", (None, 35e3, 50e3)), ("B", (None, None, 70e3))))
    found = swap_shown.swap_lines(substitute([old], [new], None)["candidates"][0], {})
    (esr,) = [line for line in found.differ if line.field == "esr_ohm"]
    assert (esr.unit, esr.incumbent, esr.candidate) == ("kΩ", "35 typ, 50 max", "70 max")
    assert (esr.bare_incumbent, esr.bare_candidate, esr.difference) == ("50", "70", "+20 (+40 %)")


def test_values_stand_without_unit_and_copy_as_bare_numbers():
    found = lines(part("NEW-1", esr_ohm=(None, None, 50.0), frequency_tolerance_ppm=(-7.0, None, 7.0)))
    by_field = {line.field: line for line in found.differ}
    esr, tolerance = by_field["esr_ohm"], by_field["frequency_tolerance_ppm"]
    assert (esr.name, esr.unit, esr.incumbent, esr.candidate) == ("ESR", "Ω", "40 max", "50 max")
    assert (esr.bare_incumbent, esr.bare_candidate, esr.place_candidate) == ("40", "50", "line 1")
    assert (tolerance.incumbent, tolerance.candidate, tolerance.bare_candidate) == ("±10", "±7", "7")


def test_the_headings_count_what_differs_and_what_matters():
    found = lines(part("NEW-1", frequency_stability_ppm=(-60.0, None, 60.0), esr_ohm=(None, None, 41.0)))
    assert swap_shown.differ_heading(found.differ) == "Two lines differ, one of them matters here"
    assert swap_shown.differ_heading([]) == "No line differs"
    assert swap_shown.same_heading(found.same[:1]) == "One is the same"
    assert swap_shown.silent_text(found.silent) == (
        "Neither sheet states: crystal pads, from the top. Check the drawings against the board."
    )


def test_without_a_bench_it_says_what_is_taken():
    result, one = swapped(part("NEW-1"), bench=None)
    assert swap_shown.heading(one) == "▲ Drop-in"
    assert swap_shown.taken_text(result) == (
        "Taken: the board presents the present part’s rated load, 8 pF, "
        "and what is asked is no worse than the present part."
    )


def test_the_page_speaks_of_the_present_part():
    assert swap_shown.sentence("no worse than the incumbent") == "No worse than the present part."
    assert swap_shown.sentence("ppm, all causes: too much") == "ppm, all causes: too much."


def test_both_parts_stand_in_the_same_circuit():
    result, one = swapped(part("NEW-1", esr_ohm=(None, None, 50.0)))
    rows = {row.name: row for row in swap_shown.both_in_circuit(result["incumbent"], one)}
    assert rows["Margin"].incumbent != rows["Margin"].candidate
    assert float(rows["Margin"].bare_candidate) == pytest.approx(one["margin"]["mid"], rel=1e-9)
    assert "…+" in rows["Frequency error, all causes"].incumbent


def test_a_clock_has_seconds_a_day_beside_its_ppm():
    def sums(low, high):
        return {"total_ppm": {"low": low, "mid": 0.0, "high": high}, "series_resonance_mhz": {"mid": 0.0327}}

    ppm, daily = swap_shown.both_in_circuit(sums(-100.0, 50.0), sums(-200.0, 10.0))
    assert (ppm.unit, ppm.incumbent) == ("ppm", "−100…+50")
    # 1 ppm of 86 400 s.
    assert (daily.unit, daily.incumbent, daily.candidate) == ("s a day", "−8.64…+4.32", "−17.3…+0.864")


def test_no_line_is_left_out_of_the_export():
    result, one = swapped(part("NEW-1", esr_ohm=(None, None, 50.0)))
    found = swap_shown.swap_lines(one, {})
    heads, rows = swap_shown.lines_table(one, result["incumbent"], found.every)
    assert len(rows) == len(one["lines"])
    assert {len(row) for row in rows} == {len(heads)}
    told = dict(swap_shown.summary_table(result, one)[1])
    assert told["Verdict"] == one["verdict"]
    assert told["Shift on the unchanged board, high (ppm)"] == one["shift_ppm"]["high"]


def test_candidates_are_listed_best_first_with_what_decides():
    candidates = [sheet(part("SMALL", package="2.0 × 1.6")), sheet(part("GOOD"))]
    table = swap_shown.candidates_table(substitute([sheet(OLD)], candidates, BENCH))
    assert [(row[1], row[2], row[3]) for row in table] == [
        ("▲ drop-in", "GOOD", "0 ppm"),
        ("▼ does not fit", "SMALL", "0 ppm"),
    ]


def test_questions_are_ready_to_copy_and_name_whom_to_ask():
    _, one = swapped(part("NEW-1", esr_ohm=(None, None, None)))
    assert swap_shown.ask_heading(one) == "Ask Merrowby"
    (label, text), *_ = swap_shown.letters(one)
    assert label == "Copy the question"
    assert "NEW-1" in text


def test_supply_of_both_stands_side_by_side_with_its_date():
    old = {"price": {"value": {"amount": 0.3, "currency": "€"}, "date": "2027-05-04", "from": "typed", "by": ""}}
    (row,) = swap_shown.both_supplied(old, {})
    assert (row.name, row.incumbent, row.candidate) == ("Price", "0.3 € (✎ entered 2027-05-04)", "not known")
    assert (row.bare_incumbent, row.bare_candidate) == ("0.3", "")
