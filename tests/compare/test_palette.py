"""Contrast of the page's colours by the formula of WCAG 2.1 (W3C Recommendation, 2018, "relative luminance")."""

import tomllib

import pytest

from compare.palette import DARK, LIGHT, palette_of
from compare.serve import SETTINGS


def luminance(colour):
    channels = [int(colour[at : at + 2], 16) / 255 for at in (1, 3, 5)]
    linear = [c / 12.92 if c <= 0.04045 else ((c + 0.055) / 1.055) ** 2.4 for c in channels]
    return 0.2126 * linear[0] + 0.7152 * linear[1] + 0.0722 * linear[2]


def contrast(one, other):
    bright, dark = sorted((luminance(one), luminance(other)), reverse=True)
    return (bright + 0.05) / (dark + 0.05)


@pytest.mark.parametrize("palette", [LIGHT, DARK], ids=["light", "dark"])
def test_text_has_a_contrast_of_four_and_a_half_and_marks_of_three(palette):
    for ground in (palette.page, palette.leaf):
        for text in (palette.ink, palette.soft, palette.accent, palette.short):
            assert contrast(text, ground) >= 4.5
        assert contrast(palette.edge, ground) >= 3
    assert contrast(palette.look, palette.look_wash) >= 4.5
    assert contrast(palette.ink, palette.wash) >= 4.5


def test_the_pages_own_colours_are_those_of_its_settings():
    settings = tomllib.loads(SETTINGS.read_text(encoding="utf-8"))["theme"]
    for palette, theme in ((LIGHT, settings["light"]), (DARK, settings["dark"])):
        assert theme["backgroundColor"] == palette.page
        assert theme["secondaryBackgroundColor"] == palette.leaf
        assert theme["textColor"] == palette.ink
        assert theme["grayTextColor"] == palette.soft
        assert theme["borderColor"] == palette.rule
        # Streamlit writes white on its primary colour.
        assert contrast("#FFFFFF", theme["primaryColor"]) >= 4.5


def test_a_theme_not_yet_known_is_light_as_on_paper():
    assert palette_of(None) is LIGHT
    assert palette_of("dark") is DARK
