"""Matrices of temperature ranges and stabilities."""

from building import table

from extract.candidates import entry_candidates
from extract.matrices import read_matrix


def choices(*rows):
    found = [each for entry in read_matrix(table(*rows).grid()) for each in entry_candidates(entry)]
    return [(each.field, each.options or each.max, each.when.temperature_c) for each in found]


def test_marks_say_which_stabilities_go_with_a_range():
    found = choices(
        ("Temp. (°C) \\ ppm", "±10", "±20", "±30"), ("-20 ~ +70", "O", "O", "O"), ("-40 ~ +125", "X", "Δ", "O")
    )
    stability = "frequency_stability_ppm"
    assert found == [(stability, (10, 20, 30), (-20, 70)), (stability, (20, 30), (-40, 125))]


def test_a_lying_matrix_is_read_like_an_upright_one():
    found = choices(("", "-20 °C ~ +70 °C", "-40 °C ~ +85 °C"), ("±10 ppm", "●", ""), ("±15 ppm", "●", "●"))
    assert [(options, span) for _, options, span in found] == [((10, 15), (-20, 70)), (15, (-40, 85))]


def test_numbers_under_the_heads_make_no_matrix():
    assert (
        read_matrix(
            table(("Range", "±10 ppm", "±20 ppm"), ("-20 to +70 °C", "60", "80"), ("-40 to +85 °C", "70", "90")).grid()
        )
        == []
    )


def test_a_choice_stands_where_its_sizes_are_printed():
    rows = table(("Temp.", "±10 ppm", "±20 ppm"), ("-20 ~ +70", "X", "O"), ("-40 ~ +85", "O", "X")).grid()
    assert [entry.where for entry in read_matrix(rows)] == [rows[0][2].where, rows[0][1].where]
