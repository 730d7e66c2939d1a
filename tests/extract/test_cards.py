from __future__ import annotations

from building import table

from extract.entries import Entry
from extract.tables import read_table


def pairs(*rows: tuple[str | None, ...]) -> list[tuple[str, str]]:
    entries = [item for item in read_table(table(*rows)) if isinstance(item, Entry)]
    return [(entry.label.text, value.piece.text) for entry in entries for value in entry.values]


def test_a_value_over_its_name_is_a_pair() -> None:
    assert pairs(
        ("26 MHz", "±10 ppm", "8 pF"),
        ("Nominal frequency", "Frequency tolerance (25 °C)", "Load capacitance"),
        ("60 Ω max", "100 µW max", None),
        ("ESR", "Drive level", None),
    ) == [
        ("Nominal frequency", "26 MHz"),
        ("Frequency tolerance (25 °C)", "±10 ppm"),
        ("Load capacitance", "8 pF"),
        ("ESR", "60 Ω max"),
        ("Drive level", "100 µW max"),
    ]


def test_names_over_their_values_stay_headings() -> None:
    rows = (("Nominal frequency", "Load capacitance"), ("26 MHz", "8 pF"))
    assert ("26 MHz", "Nominal frequency") not in pairs(*rows)
