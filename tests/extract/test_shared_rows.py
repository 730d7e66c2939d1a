from __future__ import annotations

from building import table

from extract.entries import Entry
from extract.tables import read_table

HEAD = ("Parameter", "QRB1210", "QRB1610", "QRB3215")


def loads(*rows: tuple[str | None, ...]) -> list[str]:
    """The loads that a table of three models gives, each with its model."""
    entries = [item for item in read_table(table(HEAD, *rows)) if isinstance(item, Entry)]
    found = [value for entry in entries if entry.label.text == "Load capacitance" for value in entry.values]
    return sorted(f"{value.subject} {value.piece.text}" for value in found)


def test_one_value_in_the_middle_is_that_of_every_model() -> None:
    assert loads(("ESR max", "90 kΩ", "80 kΩ", "70 kΩ"), ("Load capacitance", None, "9 pF", None)) == [
        "QRB1210 9 pF",
        "QRB1610 9 pF",
        "QRB3215 9 pF",
    ]


def test_one_value_at_the_side_is_of_its_model_alone() -> None:
    assert loads(("ESR max", "90 kΩ", "80 kΩ", "70 kΩ"), ("Load capacitance", "9 pF", None, None)) == ["QRB1210 9 pF"]


def test_where_no_row_fills_all_models_the_middle_says_nothing_of_its_neighbours() -> None:
    assert loads(("ESR max", "90 kΩ", None, None), ("Load capacitance", None, "9 pF", None)) == ["QRB1610 9 pF"]
