"""Glyphs that sheets print in several ways, as they come out of real text layers."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from extract.fold import fold, key

FOLDED = [
    ("−40℃～＋８５℃", "-40°C~+85°C"),
    ("−40 °C – +85 ºC", "-40 °C - +85 °C"),
    ("60 Ω", "60 Ω"),  # U+2126, the ohm sign
    ("60 ㏀ 5 ㎒ 8 ㎊", "60 kΩ 5 MHz 8 pF"),
    ("10 µW", "10 μW"),
    ("+/- 20", "± 20"),
    ("+ / - 20", "± 20"),
    ("±20×10⁻⁶/°C²", "±20×10^-6/°C^2"),
    ("-40 ... +85", "-40 … +85"),
    ("12 ≦ f ≧ 3, <= 5", "12 ≤ f ≥ 3, ≤ 5"),
    ("ＣＬ：１０ｐＦ", "CL:10pF"),
    ("-40 ÷ +85", "-40 ~ +85"),
    ("△f/f0", "Δf/f0"),
    # Symbol-font codes (PDF Reference 1.7, appendix D.5)
    ("\uf0b120 \uf06dW \uf057 \uf0b0C \uf0a360 \uf0b310 \uf0b4 \uf0a5", "±20 μW Ω °C ≤60 ≥10 × ∞"),
    ("Â±20 Â°C 60 Î©", "±20 °C 60 Ω"),
    ("土10ppm", "±10ppm"),
    ("60\u00a0\u2009Ω\u200b", "60 Ω"),
    ("a\r\nb", "a\nb"),
]


@pytest.mark.parametrize(("printed", "folded"), FOLDED)
def test_a_glyph_folds_to_its_one_form(printed, folded):
    assert fold(printed) == folded


@given(st.text(max_size=80))
def test_folding_twice_is_folding_once(text):
    assert fold(fold(text)) == fold(text)


@pytest.mark.parametrize(
    ("one", "other"),
    [
        ("Load Capacitance", "LOAD-CAPACITANCE :"),
        ("FREQUENC Y", "frequency"),
        ("C_L", "C L"),
        ("Capacité de charge", "capacite de charge"),
        ("Lastkapazität", "LASTKAPAZITÄT"),
        ("等価直列抵抗", "等価 直列 抵抗"),
    ],
)
def test_labels_that_differ_in_case_spaces_and_marks_have_one_key(one, other):
    assert key(one) == key(other)


def test_voiced_kana_keep_their_marks():
    assert key("パ") != key("ハ")


def test_a_wide_comma_beside_plain_digits_parts_them():
    assert fold("AB-12，25MHz") == "AB-12, 25MHz"


def test_signs_between_dollars_are_the_signs():
    assert fold(r"200 $\mu$W, 80 k$\Omega$") == "200 μW, 80 kΩ"


def test_traditional_and_simplified_characters_have_one_key():
    assert key("負載電容") == key("负载电容")
