"""What a recogniser of pictures takes for another sign because both look alike, put right where the neighbours tell."""

from __future__ import annotations

import re

_RAISED = "⁰¹²³⁴⁵⁶⁷⁸⁹"
_TO_RAISED = str.maketrans("0123456789-−–", f"{_RAISED}⁻⁻⁻")
_FROM_RAISED = str.maketrans(_RAISED, "0123456789")
_DOUBLE_DEGREE = re.compile(r"°\s*(?=[°℃])")
_WORD = re.compile(r"\S+")
_ZERO_IN_LETTERS = re.compile(r"(?<=[A-Za-z])0(?=[A-Za-z])")
_CARET = re.compile(rf"(?<=10)\s*\^\s*\{{?\s*([-−–⁻]?)\s*([0-9{_RAISED}]+)\}}?")
_RAISED_AT_NUMBER = re.compile(rf"(\d+)\s?(\*?)([{_RAISED}]+)\s*")
_TEN_AS_FACTOR = re.compile(r"[×x·*]\s*10$")


def mended(text: str) -> str:
    """Text of a line without the slips that its own signs give away.

    >>> mended("TUNING F0RK, 50 k0hm")
    'TUNING FORK, 50 kOhm'
    >>> mended("±20 × 10^-⁶")
    '±20 × 10⁻⁶'
    >>> mended("60*²Ω")
    '60 *2 Ω'
    """
    text = _DOUBLE_DEGREE.sub("", text)
    text = _CARET.sub(lambda power: (power.group(1) + power.group(2)).translate(_TO_RAISED), text)
    text = _RAISED_AT_NUMBER.sub(_footnote_mark, text)
    return _WORD.sub(_letter_o, text).strip()


def _letter_o(word: re.Match[str]) -> str:
    """A zero between letters, and the word's only digit, is an O."""
    text = word.group()
    return _ZERO_IN_LETTERS.sub("O", text) if sum(sign.isdigit() for sign in text) == 1 else text


def _footnote_mark(found: re.Match[str]) -> str:
    """A raised figure after a number points to a footnote, save after × 10: no sheet squares a plain number."""
    number, star, mark = found.groups()
    if not star and _TEN_AS_FACTOR.search(found.string[: found.end(1)]):
        return found.group()
    return f"{number} *{mark.translate(_FROM_RAISED)} " if star else f"{number} ⁽{mark}⁾ "
