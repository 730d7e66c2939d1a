"""Pictures of pages put straight: ink told from paper, small turns undone, drawn lines found. Needs the ocr extra."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

import cv2
import numpy as np
from numpy.typing import NDArray

from extract.documents.words import Box, Ruling

Pixels = NDArray[np.uint8]

_STEEPEST = 8.0  # degrees; a page lies more askew than that only in a photograph
_SMALL_SIDE = 900
_LEAST_TURN = 0.1
_MOST_RULINGS = 2000
_MISS = 10.0  # pixels


@dataclass(frozen=True, slots=True)
class Picture:
    """A page's pixels (height x width x 3, blue first) and the way back to the picture as given.

    `back` is the 2 x 3 matrix from a point of these pixels to a point of the given ones.
    """

    pixels: Pixels
    back: NDArray[np.float64]
    given_width: int
    given_height: int

    @property
    def width(self) -> int:
        return int(self.pixels.shape[1])

    @property
    def height(self) -> int:
        return int(self.pixels.shape[0])

    def given_box(self, box: Box) -> Box:
        """The box round this box in the picture as given."""
        x0, top, x1, bottom = box
        corners = np.array([[x0, top, 1], [x1, top, 1], [x1, bottom, 1], [x0, bottom, 1]]) @ self.back.T
        left, upper = np.maximum(corners.min(axis=0), 0.0)
        right, lower = np.minimum(corners.max(axis=0), [self.given_width, self.given_height])
        return (float(left), float(upper), float(right), float(lower))


def picture_of(pixels: Pixels) -> Picture:
    """Take a picture as it is given."""
    height, width = pixels.shape[:2]
    return Picture(pixels, np.array([[1.0, 0.0, 0.0], [0.0, 1.0, 0.0]]), width, height)


def straightened(picture: Picture) -> Picture:
    """Undo a small turn of the page, as a scanner's feed makes it."""
    angle = skew(ink_of(picture.pixels))
    if abs(angle) < _LEAST_TURN:
        return picture
    height, width = picture.height, picture.width
    matrix = np.asarray(cv2.getRotationMatrix2D((width / 2, height / 2), angle, 1.0), dtype=np.float64)
    cosine, sine = abs(matrix[0, 0]), abs(matrix[0, 1])
    new_width, new_height = int(height * sine + width * cosine), int(height * cosine + width * sine)
    matrix[:, 2] += np.array([(new_width - width) / 2, (new_height - height) / 2])
    paper = tuple(float(value) for value in np.median(picture.pixels.reshape(-1, 3)[::97], axis=0))
    turned = cv2.warpAffine(picture.pixels, matrix, (new_width, new_height), flags=cv2.INTER_LINEAR, borderValue=paper)
    return _moved(picture, turned, cv2.invertAffineTransform(matrix))


def quarter_turned(picture: Picture, quarters: int) -> Picture:
    """Turn by quarters anticlockwise."""
    pixels = np.ascontiguousarray(np.rot90(picture.pixels, quarters))
    width, height = picture.width, picture.height
    back = {
        0: [[1, 0, 0], [0, 1, 0]],
        1: [[0, -1, width], [1, 0, 0]],
        2: [[-1, 0, width], [0, -1, height]],
        3: [[0, 1, 0], [-1, 0, height]],
    }[quarters % 4]
    return _moved(picture, pixels, np.array(back, dtype=float))


def enlarged(picture: Picture, factor: float) -> Picture:
    """Scale the picture."""
    size = (round(picture.width * factor), round(picture.height * factor))
    way = cv2.INTER_CUBIC if factor > 1 else cv2.INTER_AREA
    back = np.array([[picture.width / size[0], 0, 0], [0, picture.height / size[1], 0]])
    return _moved(picture, cv2.resize(picture.pixels, size, interpolation=way), back)


def _moved(picture: Picture, pixels: Any, step_back: Any) -> Picture:
    whole = np.vstack([step_back, [0.0, 0.0, 1.0]])
    return Picture(pixels, picture.back @ whole, picture.given_width, picture.given_height)


def ink_of(pixels: Pixels) -> Pixels:
    """Ink as 255 on paper as 0, whatever the paper's shade and its grain."""
    grey = cv2.GaussianBlur(cv2.cvtColor(pixels, cv2.COLOR_BGR2GRAY), (3, 3), 0)
    block = max(15, min(grey.shape) // 40) | 1
    ink = cv2.adaptiveThreshold(grey, 255, cv2.ADAPTIVE_THRESH_MEAN_C, cv2.THRESH_BINARY_INV, block, 18)
    return np.asarray(ink, dtype=np.uint8)


def skew(ink: Pixels) -> float:
    """Degrees to turn the page anticlockwise so that its lines of type lie level; 0 where nothing tells.

    Level lines of type leave the rows between them empty: sums of ink along the rows then change most from row to row.
    """
    scale = _SMALL_SIDE / max(ink.shape)
    shrunk = cv2.resize(ink, None, fx=min(1.0, scale), fy=min(1.0, scale), interpolation=cv2.INTER_AREA)
    small = np.asarray(shrunk, dtype=np.uint8)
    if not small.any():
        return 0.0
    coarse = np.arange(-_STEEPEST, _STEEPEST + 0.1, 0.5)
    best = max(coarse, key=lambda angle: _levelness(small, angle))
    if _levelness(small, best) < 1.05 * _levelness(small, 0.0):
        best = 0.0
    fine = np.arange(best - 0.5, best + 0.51, 0.1)
    return float(max(fine, key=lambda angle: (_levelness(small, angle), -abs(angle))))


def _levelness(small: Pixels, angle: float) -> float:
    height, width = small.shape
    matrix = cv2.getRotationMatrix2D((width / 2, height / 2), float(angle), 1.0)
    turned = np.asarray(cv2.warpAffine(small, matrix, (width, height)), dtype=np.float64)
    rows, columns = turned.sum(axis=1), turned.sum(axis=0)
    return float(np.square(np.diff(rows)).sum() + np.square(np.diff(columns)).sum())


def rulings_of(ink: Pixels) -> list[Ruling]:
    """Straight level and upright lines of a straightened page."""
    least = max(30, min(ink.shape) // 40)
    found = []
    for shape in ((least, 1), (1, least)):
        # A turn that is left over breaks a thin line into steps: thicken across, never along, which joins letters.
        across = cv2.getStructuringElement(cv2.MORPH_RECT, (1, 3) if shape[0] > 1 else (3, 1))
        line = cv2.getStructuringElement(cv2.MORPH_RECT, shape)
        drawn = cv2.morphologyEx(cv2.dilate(ink, across), cv2.MORPH_OPEN, line)
        _, _, stats, _ = cv2.connectedComponentsWithStats(drawn, connectivity=8)
        for x, y, width, height, _ in stats[1 : _MOST_RULINGS + 1].tolist():
            along, thick = (width, height) if shape[0] > 1 else (height, width)
            if along >= 6 * thick and thick < least:
                middle = (y + height / 2, x + width / 2)
                level = shape[0] > 1
                found.append(
                    Ruling(x, middle[0], x + width, middle[0]) if level else Ruling(middle[1], y, middle[1], y + height)
                )
    return _ends_met(found)


def without_strokes(rulings: list[Ruling], type_boxes: list[Box]) -> list[Ruling]:
    """Rulings without the bars and stems of letters: short ones inside a line of type, level ones amid it."""
    return [
        ruling
        for ruling in rulings
        if not any(_is_stroke(ruling, box) for box in type_boxes) and not _runs_through(ruling, type_boxes)
    ]


def _runs_through(ruling: Ruling, boxes: list[Box]) -> bool:
    """Whether half of a level ruling lies in the middle of lines of type: small type runs together into bars."""
    if not ruling.horizontal:
        return False
    inside = sum(
        max(0.0, min(ruling.x1, x1) - max(ruling.x0, x0))
        for x0, top, x1, bottom in boxes
        if top + 0.2 * (bottom - top) < ruling.top < bottom - 0.2 * (bottom - top)
    )
    return 2 * inside > ruling.x1 - ruling.x0


def _is_stroke(ruling: Ruling, box: Box) -> bool:
    x0, top, x1, bottom = box
    height = min(bottom - top, x1 - x0)
    if max(ruling.x1 - ruling.x0, ruling.bottom - ruling.top) > 2.0 * height:
        return False
    slack = 0.1 * height
    within = x0 - slack <= ruling.x0 and ruling.x1 <= x1 + slack
    return within and top - slack <= ruling.top and ruling.bottom <= bottom + slack


def _ends_met(rulings: list[Ruling]) -> list[Ruling]:
    """Rulings whose ends are moved to the line that they run into: thick pens and left-over turns make them miss."""
    level = [ruling for ruling in rulings if ruling.horizontal]
    upright = [ruling for ruling in rulings if not ruling.horizontal]
    met = []
    for x0, y, x1, _ in level:
        stops = [one.x0 for one in upright if one.top - _MISS <= y <= one.bottom + _MISS]
        met.append(Ruling(_nearest(x0, stops), y, _nearest(x1, stops), y))
    for x, top, _, bottom in upright:
        stops = [one.top for one in level if one.x0 - _MISS <= x <= one.x1 + _MISS]
        met.append(Ruling(x, _nearest(top, stops), x, _nearest(bottom, stops)))
    return met


def _nearest(end: float, stops: list[float]) -> float:
    best = min(stops, key=lambda stop: abs(stop - end), default=end)
    return best if abs(best - end) <= _MISS else end
