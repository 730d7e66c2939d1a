"""Pictures put straight. Expected angles and places are those the pictures are drawn with."""

from __future__ import annotations

import numpy as np
import pytest

pytest.importorskip("cv2")

from PIL import Image, ImageDraw

from extract.documents import straighten
from extract.documents.words import Ruling

pytestmark = pytest.mark.ocr


def lined_page(width: int = 900, height: int = 700) -> Image.Image:
    image = Image.new("RGB", (width, height), "white")
    draw = ImageDraw.Draw(image)
    for y in range(100, 600, 40):
        for x in range(100, 700, 14):
            draw.rectangle((x, y, x + 9, y + 14), fill="black")
    return image


def picture(image: Image.Image) -> straighten.Picture:
    return straighten.picture_of(np.ascontiguousarray(np.asarray(image)[:, :, ::-1]))


@pytest.mark.parametrize("angle", [-4.0, -1.3, 0.0, 0.6, 2.5])
def test_a_small_turn_is_found(angle: float) -> None:
    turned = lined_page().rotate(angle, fillcolor="white", resample=Image.Resampling.BICUBIC)
    assert straighten.skew(straighten.ink_of(picture(turned).pixels)) == pytest.approx(-angle, abs=0.15)


def test_a_box_on_the_straightened_page_leads_back_to_the_given_one() -> None:
    page = Image.new("RGB", (900, 700), "white")
    draw = ImageDraw.Draw(page)
    for y in range(60, 660, 40):
        draw.line((60, y, 840, y), fill="black", width=3)
    turned = page.rotate(2.0, fillcolor="white", resample=Image.Resampling.BICUBIC)
    straight = straighten.straightened(picture(turned))
    # The middle of a page stays where it is when the page turns about it.
    x0, top, x1, bottom = straight.given_box(
        (straight.width / 2 - 1, straight.height / 2 - 1, straight.width / 2 + 1, straight.height / 2 + 1)
    )
    assert ((x0 + x1) / 2, (top + bottom) / 2) == pytest.approx((450, 350), abs=2)


@pytest.mark.parametrize(
    ("quarters", "seen"),
    [(0, (10, 20, 110, 50)), (1, (20, 790, 50, 890)), (2, (790, 650, 890, 680)), (3, (650, 10, 680, 110))],
)
def test_a_quarter_turn_leads_back(quarters: int, seen: tuple[float, float, float, float]) -> None:
    turned = straighten.quarter_turned(picture(Image.new("RGB", (900, 700), "white")), quarters)
    assert turned.given_box(seen) == pytest.approx((10, 20, 110, 50))


def test_drawn_lines_are_found_and_letters_are_not() -> None:
    image = lined_page()
    draw = ImageDraw.Draw(image)
    draw.rectangle((80, 80, 820, 620), outline="black", width=2)
    draw.line((750, 80, 750, 620), fill="black", width=2)
    found = straighten.rulings_of(straighten.ink_of(picture(image).pixels))
    level = sorted(round(ruling.top) for ruling in found if ruling.horizontal)
    upright = sorted(round(ruling.x0) for ruling in found if not ruling.horizontal)
    assert level == pytest.approx([81, 620], abs=2)
    assert upright == pytest.approx([81, 751, 820], abs=2)


def test_the_stem_of_a_large_letter_is_no_ruling() -> None:
    stem, side = Ruling(20, 12, 20, 38), Ruling(5, 0, 5, 300)
    assert straighten.without_strokes([stem, side], [(10, 10, 200, 40)]) == [side]


def test_a_bar_of_small_type_is_no_ruling_but_an_underline_is() -> None:
    bar, underline = Ruling(10, 25, 190, 25), Ruling(10, 41, 200, 41)
    assert straighten.without_strokes([bar, underline], [(10, 10, 200, 40)]) == [underline]
