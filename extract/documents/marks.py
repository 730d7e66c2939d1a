"""Raised, lowered and struck-out letters as plain text, alike for every format that knows them."""

from __future__ import annotations

_RAISED = str.maketrans("0123456789+-−–()n", "⁰¹²³⁴⁵⁶⁷⁸⁹⁺⁻⁻⁻⁽⁾ⁿ")
_EXPONENT = frozenset("0123456789+-−–")


def raised(text: str, before: str) -> str:
    """A raised text as it goes on after `before`: an exponent, an ordinal's ending or a footnote's mark.

    >>> raised("-6", "10")
    '⁻⁶'
    >>> raised("rd", "3")
    'rd'
    >>> raised("1", "60 Ω")
    ' ⁽¹⁾'
    >>> raised("1)", "max.")
    ' ⁽¹⁾'
    >>> raised("2", "ppm/°C")
    '²'
    """
    stripped = text.strip()
    if not stripped:
        return text
    if _is_exponent(stripped, before):
        return stripped.translate(_RAISED)
    mark = stripped.strip("()[]")
    if mark.isdigit() and len(mark) <= 2:
        return f" ⁽{mark.translate(_RAISED)}⁾"
    if not mark.isalnum() or stripped != mark:
        return f" {stripped}"
    return text


def _is_exponent(text: str, before: str) -> bool:
    """Whether a raised number is a power, of ten or of a unit; else it marks a footnote."""
    if not set(text) <= _EXPONENT:
        return False
    base = before.rstrip()
    if text[0] in "+-−–":
        return True
    if base.endswith("10"):
        return len(text) <= 2 and (len(base) == 2 or not base[-3].isdigit()) and any(sign in base for sign in "×·x*")
    last_word = base.rsplit(" ", 1)[-1]
    is_unit = last_word.endswith(("°C", "℃", "K", ")", "mm", "cm", "m")) and ("/" in base or last_word.endswith("m"))
    return text in ("2", "3") and is_unit


def lowered(text: str) -> str:
    """A lowered text goes on in the same word: C and 0 are C0."""
    return text.strip() if text.strip() else text
