"""Text of pictures: where the lines of type stand and what they say, word by word. Needs the ocr extra.

The recogniser (RapidOCR on onnxruntime, CPU) holds its models in its own package and is given their paths, so that
nothing is ever fetched. It returns whole lines; they are cut at drawn lines before and into words after reading.
"""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import dataclass, replace
from functools import lru_cache
from pathlib import Path
from typing import Any

import cv2
import numpy as np

from extract.documents.slips import mended
from extract.documents.straighten import Picture, Pixels, ink_of
from extract.documents.words import Box, Ruling, Word

# Longest side, in pixels, that lines of type are looked for at; reading itself takes the full picture.
_SEARCH_SIDE = 1600
_LEAST_CONFIDENCE = 0.3
# Two characters with one space between them stand up to two pitches apart, in proportional type a little more.
_WIDE_PITCHES = 2.6
_ALIKE = "°℃~～"  # the recogniser wavers between these, and nothing hangs on which it takes
_LEADER = re.compile(r"[.,…·‧_]+")
_WIDE_SPACE = 0.9  # of the line's height: so wide a gap parts words even where the recogniser saw no space
ASKEW = 4.0  # degrees; less is cut out upright
# The line's box reaches this far beyond the type, as a share of its height.
_MARGIN = 0.12


@dataclass(frozen=True, slots=True, eq=False)
class TypeLine:
    """A line of type: its four corners from the top left clockwise, in pixels."""

    corners: np.ndarray[Any, np.dtype[np.float64]]

    @property
    def box(self) -> Box:
        """The upright box round the line."""
        (left, top), (right, bottom) = self.corners.min(axis=0), self.corners.max(axis=0)
        return (float(left), float(top), float(right), float(bottom))

    @property
    def tall(self) -> bool:
        """Whether it runs upwards or downwards."""
        left, top, right, bottom = self.box
        return bottom - top > 1.6 * (right - left)

    @property
    def tilt(self) -> float:
        """Degrees that its upper edge lies off level."""
        across, down = self.corners[1] - self.corners[0]
        return abs(float(np.degrees(np.arctan2(down, across))))


@dataclass(frozen=True, slots=True)
class Reading:
    """What a line says: each character with the middle of its place (0 to 1 along the line) and its confidence."""

    characters: tuple[tuple[str, float, float], ...]

    @property
    def text(self) -> str:
        return "".join(character for character, _, _ in self.characters)

    @property
    def confidence(self) -> float:
        """Mean over the characters; 0 where nothing was read."""
        seen = [sure for character, _, sure in self.characters if character != " "]
        return sum(seen) / len(seen) if seen else 0.0


@lru_cache(maxsize=1)
def _engine() -> Any:
    """The recogniser, loaded once; ImportError without the extra."""
    import rapidocr

    models = Path(rapidocr.__file__).parent / "models"
    paths = {part: next(iter(sorted(models.glob(f"*_{part}_*.onnx"))), None) for part in ("det", "rec")}
    if None in paths.values():
        raise ImportError("the recogniser's package lacks its models")
    return rapidocr.RapidOCR(
        params={
            "Global.log_level": "error",
            "Global.use_cls": False,
            "Global.max_side_len": 4000,
            "Global.text_score": _LEAST_CONFIDENCE,
            "Global.return_word_box": True,
            "Det.model_path": str(paths["det"]),
            "Rec.model_path": str(paths["rec"]),
        }
    )


def lines_of(picture: Picture) -> list[TypeLine]:
    """Places of the lines of type on a page."""
    ink = cv2.morphologyEx(ink_of(picture.pixels), cv2.MORPH_OPEN, np.ones((2, 2), np.uint8))
    rows, columns = np.flatnonzero(ink.sum(axis=1) > 255), np.flatnonzero(ink.sum(axis=0) > 255)
    if not len(rows) or not len(columns):
        return []
    top, bottom = max(0, int(rows[0]) - 30), int(rows[-1]) + 30
    left, right = max(0, int(columns[0]) - 30), int(columns[-1]) + 30
    part = picture.pixels[top:bottom, left:right]
    scale = min(1.0, _SEARCH_SIDE / max(part.shape[:2]))
    small = cv2.resize(part, None, fx=scale, fy=scale, interpolation=cv2.INTER_AREA) if scale < 1 else part
    found = _engine()(np.ascontiguousarray(small), use_det=True, use_cls=False, use_rec=False)
    boxes = getattr(found, "boxes", None)
    if boxes is None:
        return []
    return [TypeLine(np.asarray(corners, dtype=float) / scale + (left, top)) for corners in boxes]


def cut_at(lines: Sequence[TypeLine], rulings: Sequence[Ruling]) -> list[TypeLine]:
    """Lines parted where an upright ruling crosses them: a row of a tight table is often found as one line."""
    upright = [ruling for ruling in rulings if not ruling.horizontal]
    parted: list[TypeLine] = []
    for line in lines:
        left, top, right, bottom = line.box
        if line.tall or line.tilt > ASKEW:
            parted.append(line)
            continue
        middle, height = (top + bottom) / 2, bottom - top
        edges = sorted(
            ruling.x0
            for ruling in upright
            if left + 0.3 * height < ruling.x0 < right - 0.3 * height
            and ruling.top < middle < ruling.bottom
            and ruling.bottom - ruling.top > 1.1 * height
        )
        bounds = [left, *edges, right]
        for start, end in zip(bounds[:-1], bounds[1:], strict=True):
            if end - start > 0.3 * height:
                margin = 2.0 if edges else 0.0
                inner = (start + margin * (start != left), end - margin * (end != right))
                parted.append(_upright_line((inner[0], top, inner[1], bottom)) if edges else line)
    return parted


def _upright_line(box: Box) -> TypeLine:
    x0, top, x1, bottom = box
    return TypeLine(np.array([[x0, top], [x1, top], [x1, bottom], [x0, bottom]], dtype=float))


def cut_out(pixels: Pixels, line: TypeLine, quarters: int = 0) -> Pixels:
    """The pixels of a line, turned level; tall ones by quarters anticlockwise."""
    if line.tilt > ASKEW and not line.tall:
        across = int(np.linalg.norm(line.corners[1] - line.corners[0]))
        down = int(np.linalg.norm(line.corners[3] - line.corners[0]))
        target = np.array([[0, 0], [across, 0], [across, down], [0, down]], dtype=np.float32)
        matrix = cv2.getPerspectiveTransform(line.corners.astype(np.float32), target)
        return np.asarray(cv2.warpPerspective(pixels, matrix, (max(1, across), max(1, down))), dtype=np.uint8)
    left, top, right, bottom = (int(round(value)) for value in line.box)
    part = pixels[max(0, top) : max(1, bottom), max(0, left) : max(1, right)]
    return np.ascontiguousarray(np.rot90(part, quarters))


def read_crops(crops: Sequence[Pixels]) -> list[Reading]:
    """What each of the level pieces says."""
    sound = [index for index, crop in enumerate(crops) if min(crop.shape[:2]) >= 4]
    readings = [Reading(())] * len(crops)
    if not sound:
        return readings
    result = _engine().recognize_txt([crops[index] for index in sound])
    for index, text, info in zip(sound, result.txts, result.word_results, strict=True):
        readings[index] = _reading(text, info)
    return readings


def _reading(text: str, info: Any) -> Reading:
    columns = [column for word in info.word_cols for column in word]
    length = info.line_txt_len or 1.0
    places = iter(columns)
    characters = []
    last = 0.0
    for character, sure in zip(text, info.confs, strict=False):
        if not character.isspace():
            last = min(1.0, (next(places, last * length) + 0.5) / length)
        characters.append((" " if character.isspace() else character, last, float(sure)))
    return Reading(tuple(characters))


def words_of(picture: Picture, lines: Sequence[TypeLine]) -> list[Word]:
    """All words on a page; those that run upwards have angle 90, downwards 270."""
    level = [line for line in lines if not line.tall]
    crops = [cut_out(picture.pixels, line) for line in level]
    words = [
        word
        for line, crop, reading in zip(level, crops, read_crops(crops), strict=True)
        for word in _words(line.box, crop, reading)
    ]
    return words + _tall_words(picture, [line for line in lines if line.tall])


def askew_lines(picture: Picture, lines: Sequence[TypeLine]) -> list[Word]:
    """Stamps and the like: each line whole, with its spaces."""
    crops = [cut_out(picture.pixels, line) for line in lines]
    return [
        Word(mended(reading.text), *line.box, size=line.box[3] - line.box[1], confidence=round(reading.confidence, 3))
        for line, reading in zip(lines, read_crops(crops), strict=True)
        if reading.confidence >= _LEAST_CONFIDENCE
    ]


def _tall_words(picture: Picture, lines: Sequence[TypeLine]) -> list[Word]:
    """Words of lines that run upwards or downwards, whichever reads better."""
    downwards = [cut_out(picture.pixels, line, 1) for line in lines]
    upwards = [cut_out(picture.pixels, line, 3) for line in lines]
    words = []
    both = zip(lines, downwards, read_crops(downwards), upwards, read_crops(upwards), strict=True)
    for line, down_crop, down, up_crop, up in both:
        angle, crop, reading = (270, down_crop, down) if down.confidence > up.confidence else (90, up_crop, up)
        x0, top, x1, bottom = line.box
        length, across = bottom - top, x1 - x0
        for word in _words((0.0, 0.0, length, across), crop, reading):
            start, end = (top + word.x0, top + word.x1) if angle == 270 else (bottom - word.x1, bottom - word.x0)
            words.append(replace(word, x0=x0, x1=x1, top=start, bottom=end, angle=angle))
    return words


def _words(box: Box, crop: Pixels, reading: Reading) -> list[Word]:
    """A line's pieces with their boxes. Words with plain spaces between them stay one: the line holds them together.

    The space of typewriter faces is as wide as the gap between columns in others, so that boxes alone would mislead.
    """
    x0, top, x1, bottom = box
    height = bottom - top
    scale = (x1 - x0) / max(1, crop.shape[1])
    return [
        Word(
            mended(" ".join(group.text for group in piece)),
            x0 + piece[0].start * scale,
            top + _MARGIN * height,
            x0 + piece[-1].end * scale,
            bottom - _MARGIN * height,
            size=height * (1 - 2 * _MARGIN),
            confidence=round(min(group.confidence for group in piece), 3),
        )
        for piece in _pieces(_groups(reading, crop))
    ]


def _pieces(groups: Sequence[_Group]) -> list[list[_Group]]:
    """Groups that stand together, without leader dots, which part them."""
    pieces: list[list[_Group]] = []
    parted = True
    for index, group in enumerate(groups):
        if _LEADER.fullmatch(group.text) and not _is_range(groups[index - 1 : index + 2]):
            parted = True
            continue
        if parted or group.far_from_last:
            pieces.append([])
        pieces[-1].append(group)
        parted = False
    return pieces


def _is_range(three: Sequence[_Group]) -> bool:
    """Whether dots stand between two numbers, as in -40 ... +85."""
    if len(three) < 3 or len(three[1].text) > 3:
        return False
    return bool(re.search(r"[\d℃]$|°C$", three[0].text) and re.match(r"[-+−±]?\d", three[2].text))


@dataclass(frozen=True, slots=True)
class _Group:
    """A word in a level piece: its pixel columns, its least certain sign, and whether a wide gap lies before it."""

    text: str
    start: float
    end: float
    confidence: float
    far_from_last: bool


def _groups(reading: Reading, crop: Pixels) -> list[_Group]:
    """The words of a level piece."""
    if not reading.characters:
        return []
    inked = _inked_columns(crop)
    height, width = crop.shape[:2]
    groups: list[list[tuple[str, float, float]]] = [[]]
    for character, place, sure in reading.characters:
        middle = place * width
        if character == " ":
            if groups[-1]:
                groups.append([])
            continue
        if groups[-1] and _gap(inked, groups[-1][-1][1], middle)[1] > _WIDE_SPACE * height:
            groups.append([])
        groups[-1].append((character, middle, sure))
    groups = [group for group in groups if group]
    bounds = [0.0]
    for left, right in zip(groups[:-1], groups[1:], strict=True):
        start, length = _gap(inked, left[-1][1], right[0][1])
        bounds.append(start + length / 2)
    bounds.append(float(width))
    pitch = _pitch(groups, height)
    return [
        _Group(
            "".join(character for character, _, _ in group),
            *_ink_edges(inked, bounds[index], bounds[index + 1]),
            min((sure for sign, _, sure in group if sign not in _ALIKE), default=1.0),
            index > 0 and group[0][1] - groups[index - 1][-1][1] > _WIDE_PITCHES * pitch,
        )
        for index, group in enumerate(groups)
    ]


def _pitch(groups: Sequence[Sequence[tuple[str, float, float]]], height: int) -> float:
    """Median distance from one character's middle to the next within words."""
    steps = [right[1] - left[1] for group in groups for left, right in zip(group[:-1], group[1:], strict=True)]
    return float(np.median(steps)) if steps else 0.5 * height


def _inked_columns(crop: Pixels) -> np.ndarray[Any, np.dtype[np.bool_]]:
    """Which pixel columns of a level piece hold ink of its line."""
    grey = cv2.cvtColor(crop, cv2.COLOR_BGR2GRAY)
    level, ink = cv2.threshold(grey, 0, 255, cv2.THRESH_BINARY + cv2.THRESH_OTSU)
    dark_is_ink = float((grey > level).mean()) > 0.5
    mask = ink == (0 if dark_is_ink else 255)
    margin = max(1, int(0.1 * crop.shape[0]))
    return np.asarray(mask[margin:-margin].sum(axis=0) >= 2)


def _gap(inked: np.ndarray[Any, np.dtype[np.bool_]], start: float, end: float) -> tuple[float, float]:
    """First column and length of the longest run without ink between two places."""
    first, last = int(start), max(int(start) + 1, int(end))
    best, run, best_start = 0, 0, (start + end) / 2
    for column, filled in enumerate(inked[first:last].tolist(), start=first):
        run = 0 if filled else run + 1
        if run > best:
            best, best_start = run, column - run + 1
    return float(best_start), float(best)


def _ink_edges(inked: np.ndarray[Any, np.dtype[np.bool_]], start: float, end: float) -> tuple[float, float]:
    columns = np.flatnonzero(inked[int(start) : int(end) + 1])
    if not len(columns):
        return start, end
    return int(start) + float(columns[0]), int(start) + float(columns[-1]) + 1.0
