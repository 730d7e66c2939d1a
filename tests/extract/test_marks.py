"""Raised letters as plain text. Forms of exponents: ISO 80000-1 writes powers of ten as raised figures."""

from __future__ import annotations

import pytest

from extract.documents.marks import lowered, raised


@pytest.mark.parametrize(
    ("before", "text", "after"),
    [
        ("×10", "-6", "⁻⁶"),
        ("± 20 × 10", "−6", "⁻⁶"),
        ("× 10", "6", "⁶"),
        ("ppm/°C", "2", "²"),
        ("mm", "3", "³"),
        ("3", "rd", "rd"),
        ("60", "2", " ⁽²⁾"),
        ("60 Ω", "1", " ⁽¹⁾"),
        ("60 Ω", "1)", " ⁽¹⁾"),
        ("10", "2", " ⁽²⁾"),
        ("50", "*", " *"),
        ("50", "†", " †"),
    ],
)
def test_a_raised_text_is_a_power_an_ending_or_a_footnote_mark(before: str, text: str, after: str) -> None:
    assert raised(text, before) == after


def test_a_footnote_mark_is_never_glued_to_a_number() -> None:
    assert not ("60" + raised("2", "60")).startswith(("602", "60²"))


def test_a_lowered_text_goes_on_in_its_word() -> None:
    assert "C" + lowered("0") == "C0"
