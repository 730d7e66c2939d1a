"""Cells whose text was wrapped by the width of its column: a line break inside one expression is a space.

"10.0 - 15.999" above "MHz" is one band, "-40 to" above "+85 °C" one range; "7" above "9" stays a list of two.
"""

from __future__ import annotations

import re
from dataclasses import replace
from functools import cache

from extract.documents.model import Cell, GridCells, Table
from extract.fold import fold
from extract.units import kinds
from extract.vocabulary import vocabulary

# What a line that is not at its end ends in: a sign between two numbers, a relation, an opened list.
_OPEN_END = re.compile(r"[~…≤≥<>=±@,]$|[^\W\d_]/$|(?<![\w.-])[-+]?\d[\d.]*\s*[a-zΩμµ°]{0,3}\s*-$", re.IGNORECASE)
# A relation in the middle of a band ("20 MHz" above "≤ f < 30 MHz").
_MIDDLE = re.compile(r"(?:[≤≥<>]\s*f\b|[~…]\s*[-+]?\d)", re.IGNORECASE)
_UNIT_ALONE = re.compile(r"[^\s\d,;:()]+")
_NUMBER_END = re.compile(r"\d$")
_QUANTITY_END = re.compile(r"\d\s*\D{0,4}$")
_NUMBER = re.compile(r"[-+]?\d")


def without_wraps(table: Table) -> Table:
    """The table with its wrapped cells on one line each; lists, whose line breaks are somebody's own, as they are."""
    if isinstance(table.cells, GridCells) or not any("\n" in cell.text for cell in table.cells):
        return table
    return replace(table, cells=tuple(map(_one_line, table.cells)))


def _one_line(cell: Cell) -> Cell:
    return replace(cell, text=unwrapped(cell.text)) if "\n" in cell.text else cell


def unwrapped(text: str) -> str:
    """`text` with a space for each line break that stands inside one expression."""
    lines = text.split("\n")
    out = lines[0]
    for line in lines[1:]:
        joint = "" if out.endswith("/") else " "
        out += (joint if _runs_on(fold(out.rpartition("\n")[2]).strip(), fold(line).strip()) else "\n") + line
    return out


def _runs_on(above: str, below: str) -> bool:
    if not above or not below:
        return False
    if _OPEN_END.search(above) or above.count("(") > above.count(")"):
        return True
    if _NUMBER_END.search(above) and _is_unit(below):
        return True
    word_end, word_begin = _range_words()
    if word_end.search(above) and _NUMBER.match(below):
        return True
    return bool(_QUANTITY_END.search(above) and (_MIDDLE.match(below) or word_begin.match(below)))


def _is_unit(below: str) -> bool:
    """Whether a line begins with a unit of a reading, which needs a number before it."""
    word = _UNIT_ALONE.match(below)
    # One letter alone may be a code.
    if word is None or (word[0].isascii() and word[0].isalpha() and len(word[0]) == 1):
        return False
    return any(kind.fields and kind.unit(word[0]) is not None for kind in kinds().values())


@cache
def _range_words() -> tuple[re.Pattern[str], re.Pattern[str]]:
    """Words between the ends of a range, at the end of a line behind a number and at the beginning of one before it."""
    words = "|".join(sorted(map(re.escape, vocabulary().phrases.get("to", ())), key=len, reverse=True))
    return (
        re.compile(rf"(?i)\d\D{{0,6}}?(?<![a-zà-ÿ])(?:{words})$"),
        re.compile(rf"(?i)(?:{words})(?![a-zà-ÿ])\s*[-+]?\d"),
    )
