"""A text looked up in all vocabularies at once; what each head says is by hand."""

from __future__ import annotations

import pytest

from extract.meaning import meaning, part_tokens


@pytest.mark.parametrize(
    ("head", "field", "bound"),
    [
        ("等価直列抵抗 MAX(Ω)", "esr_ohm", "max"),
        ("並列容量 TYP(pF)", "shunt_capacitance_pf", "typ"),
        ("励振レベル MAX", "drive_level_uw", "max"),
    ],
)
def test_a_latin_bound_in_a_japanese_head_makes_no_bound_column_of_it(head: str, field: str, bound: str) -> None:
    found = meaning(head)
    assert found.role is None
    assert found.identity is None
    assert found.label is not None
    assert (found.label.field, found.label.bound) == (field, bound)


@pytest.mark.parametrize(("head", "role"), [("最大 MAX", "max"), ("記号 Symbol", "symbol"), ("Max. 最大", "max")])
def test_a_head_in_two_languages_keeps_its_role(head: str, role: str) -> None:
    assert meaning(head).role == role


def test_amounts_with_slashes_name_no_part():
    assert part_tokens("8pF/10pF/12pF") == ()
