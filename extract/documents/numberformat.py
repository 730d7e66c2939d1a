"""Spreadsheet number formats: how a stored number is shown, as far as that adds to the number or names its unit.

Format codes are those of ISO/IEC 29500-1 (Office Open XML), section 18.8.31. Two departures, both so that no figure is
lost or read wrongly: digits that a format would round away are kept, and thousands are not grouped.
"""

from __future__ import annotations

import math
import re
from dataclasses import dataclass, replace
from functools import lru_cache

_SECTION_SPLIT = re.compile(r';(?=(?:[^"]*"[^"]*")*[^"]*$)')
_TOKEN = re.compile(
    r'"([^"]*)"|\\(.)|_(.)|\*(.)|\[([^\]]*)\]|(General)|([0#?.,]+)|(E[+-][0#?]+)|(%)|(@)|(.)', re.IGNORECASE
)
_CURRENCY = re.compile(r"\$([^-\]]*)")


@dataclass(frozen=True, slots=True)
class _Section:
    """One of up to four parts of a format: text before and after the digits, and how many there are."""

    before: str
    after: str
    decimals: int | None
    least_digits: int
    scale: float
    exponent: bool = False
    word: bool = False


def general(value: float) -> str:
    """A number as a spreadsheet shows it without a format: up to 15 digits, none of them noise."""
    if isinstance(value, int) or (value == int(value) and abs(value) < 1e15):
        return str(int(value))
    text = f"{value:.12g}"
    return text if "e" not in text else f"{value:.11e}".replace("e", "E").rstrip("0")


def adds_something(code: str) -> bool:
    """Whether a format shows more than the bare number: fixed decimals, a unit, a sign, a percentage."""
    return code.strip().lower() not in ("general", "", "@", "0", "#", "#,##0", "# ##0")


def shown(value: float, code: str) -> str:
    """A number as its format shows it.

    >>> shown(8, '0.0" pF"')
    '8.0 pF'
    >>> shown(10, '"±"0 "ppm"')
    '±10 ppm'
    >>> shown(14.31818, '0.00')
    '14.31818'
    """
    sections = _sections(code)
    if not sections or not math.isfinite(value):
        return general(value)
    section, magnitude = _choose(sections, value)
    scaled = magnitude * section.scale
    if section.word:
        digits = ""
    elif section.decimals is None:
        digits = general(scaled)
    elif section.exponent:
        digits = f"{scaled:.{section.decimals}E}"
        digits = digits if math.isclose(float(digits), scaled, rel_tol=1e-9) else general(scaled)
    else:
        digits = _fixed(scaled, section.decimals, section.least_digits)
    return f"{section.before}{digits}{section.after}".strip()


def _choose(sections: tuple[_Section, ...], value: float) -> tuple[_Section, float]:
    """The section for this sign; where the one for negatives leaves the minus out, it is put back."""
    if value < 0 and len(sections) > 1:
        section = sections[1]
        if "-" in section.before or "−" in section.before or "(" in section.before:
            return section, -value
        return section, value
    if value == 0 and len(sections) > 2:
        zero = sections[2]
        return (replace(zero, word=True) if zero.decimals is None and zero.before else zero), value
    return sections[0], value


def _fixed(value: float, decimals: int, least_digits: int) -> str:
    digits = f"{value:.{decimals}f}"
    if not math.isclose(float(digits), value, rel_tol=1e-9, abs_tol=1e-15):
        return general(value)
    whole, dot, fraction = digits.partition(".")
    sign = "-" if whole.startswith("-") else ""
    return f"{sign}{whole.lstrip('-').zfill(least_digits)}{dot}{fraction}"


@lru_cache(maxsize=512)
def _sections(code: str) -> tuple[_Section, ...]:
    return tuple(_section(part) for part in _SECTION_SPLIT.split(code)[:3] if part)


def _section(part: str) -> _Section:
    before, after, pattern, exponent = "", "", "", False
    is_general, scale = False, 1.0
    for match in _TOKEN.finditer(part):
        quoted, escaped, skipped, filler, bracket, word, digits, power, percent, _, other = match.groups()
        if digits is not None and any(sign in digits for sign in "0#?"):
            pattern += digits
            continue
        if word:
            is_general = True
            continue
        if power:
            exponent = True
            continue
        literal = quoted or escaped or (" " if skipped else "") or percent or digits or other or ""
        if bracket is not None:
            money = _CURRENCY.match(bracket)
            literal = money.group(1) if money else ""
        if percent:
            scale *= 100.0
        if filler is not None:
            literal = ""
        if pattern or is_general:
            after += literal
        else:
            before += literal
    if not pattern:
        return _Section(before, after, None, 1, scale)
    thousands = len(pattern) - len(pattern.rstrip(","))
    whole, _, fraction = pattern.rstrip(",").partition(".")
    decimals = sum(fraction.count(sign) for sign in "0?")
    return _Section(before, after, decimals, max(1, whole.count("0")), scale / 1000.0**thousands, exponent)
