"""Slips of a recogniser. Each pair was met: what the recogniser gave for a picture, and what the picture shows."""

from __future__ import annotations

import pytest

from extract.documents.slips import mended


@pytest.mark.parametrize(
    ("read", "shown"),
    [
        ("25°℃", "25℃"),
        ("25 °°C", "25 °C"),
        ("TUNING F0RK", "TUNING FORK"),
        ("50 k0hm max.", "50 kOhm max."),
        ("±20 × 10^-⁶", "±20 × 10⁻⁶"),
        ("±20×10^{-6}", "±20×10⁻⁶"),
        ("60*²Ω", "60 *2 Ω"),
        ("60² Ω", "60 ⁽²⁾ Ω"),
    ],
)
def test_a_slip_is_put_right(read: str, shown: str) -> None:
    assert mended(read) == shown


@pytest.mark.parametrize(
    "text", ["AMC-26-32K768", "C0", "f0", "VK49S-12.000-20", "-0.034 ppm/°C²", "× 10⁶", "14.0pF", "A0B1", "100 µW max."]
)
def test_what_may_be_right_stays(text: str) -> None:
    assert mended(text) == text
