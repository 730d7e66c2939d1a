"""One part with all that is shown of it, against what the command line prints."""

import made_sheets
from reviewed_parts import bench, dossier_of, part, radio

from compare.bench import read_bench
from compare.dossier import TITLES, dossiers
from compare.review import review


def test_its_review_is_that_of_the_command_line():
    sheets = [made_sheets.sheet(part(), part(number="ABX-27"))]
    found, notes = dossiers(sheets, bench())
    told = review(sheets, bench())
    assert [one.review for one in found] == told["reviews"]
    assert notes == told["notes"]


def test_no_part_at_the_frequency_gives_none_and_the_notes():
    other = bench(frequency_mhz="frequency_mhz = 25.0")
    found, notes = dossiers([made_sheets.sheet(part())], other)
    assert found == []
    assert "does not offer 25 MHz" in notes[0]["message"]


def test_what_is_drawn_and_what_is_not_are_all_the_charts():
    for one in (radio(), dossier_of(part(without=("esr_ohm",)))):
        assert len(one.charts) + len(one.not_drawn) == len(TITLES)
    assert radio().not_drawn == []


def test_a_circuit_that_is_not_known_draws_nothing_and_says_why():
    bare = dossier_of(part(), read_bench("[requirement]\nfrequency_mhz = 26.0\n", "bare.toml"))
    assert "ppm_against_load" not in bare.charts
    assert any("circuit.input_capacitor_pf" in said for said in bare.not_drawn)


def test_a_circuit_that_cannot_oscillate_says_so():
    dead = dossier_of(part(made_sheets.reading("esr_ohm", max=1e5)))
    assert any("cannot oscillate" in said for said in dead.not_drawn) or "ppm_budget" in dead.charts


def test_a_subcircuit_is_there_where_the_sheet_states_enough():
    assert ".subckt ABX_26_nominal a b" in radio().subcircuit("nominal")
    assert dossier_of(part(without=("esr_ohm",))).subcircuit("nominal") is None
