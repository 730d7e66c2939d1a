"""Printed numbers: decimal mark or thousands, in points, commas, spaces or apostrophes, and which is meant."""

from __future__ import annotations

import re
from dataclasses import dataclass

from extract.fields import Field

# Spaces part thousands only where every group after the first has three digits. A comma that follows no digit is a
# separator ("10 µW typ,200 µW max").
NUMBER = re.compile(r"\d{1,3}(?:[ '’]\d{3})+(?![\d.,])|\d+(?:[.,]\d+)*|\.\d+|\A,\d+")
# A number and nothing else: no label, unit or condition.
PLAIN_NUMBER = re.compile(r"\d+(?:\.\d+)?")
_SEPARATORS = re.compile("[.,]")


@dataclass(frozen=True, slots=True)
class Number:
    """A number as printed. `grouped` is the other reading where "1.000" or "1,000" may be a thousand, else None."""

    text: str
    plain: float
    grouped: float | None = None
    mark: str = ""


def number(text: str) -> Number | None:
    """Read one printed number without sign; None where the marks in it make no number ("19.12.2011", "8,10,12.5")."""
    if " " in text or "'" in text or "’" in text:
        return Number(text, float(re.sub("[ '’]", "", text)))
    marks = _SEPARATORS.findall(text)
    if not marks:
        return Number(text, float(text))
    whole, *groups = _SEPARATORS.split(text)
    if len(marks) == 1:
        plain = float(f"{whole or 0}.{groups[0]}")
        may_be_grouped = len(groups[0]) == 3 and 1 <= len(whole) <= 3 and whole[0] != "0"
        return Number(text, plain, float(whole + groups[0]) if may_be_grouped else None, marks[0])
    thousands = groups if len(set(marks)) == 1 else groups[:-1]
    if len(set(marks[: len(thousands)])) > 1 or any(len(group) != 3 for group in thousands) or not 1 <= len(whole) <= 3:
        return None
    if thousands is groups:
        return Number(text, float(whole + "".join(groups)))
    return Number(text, float(f"{whole}{''.join(thousands)}.{groups[-1]}"))


def numbers(text: str) -> list[Number]:
    """As `number`, but a list printed without spaces ("8,10,12.5") comes apart; [] for what is neither."""
    if one := number(text):
        return [one]
    apart = [number(piece) for piece in text.split(",")]
    return [piece for piece in apart if piece] if all(apart) else []


def decide(
    printed: Number, scale: float, field: Field, *, decimal: str | None = None, unit: str = ""
) -> tuple[float, str | None]:
    """The number meant, in printed units, and a doubt where both readings of "1.000" are possible.

    `scale` is what one printed unit is in the field's unit; `decimal` is the sheet's decimal mark where it is known.
    """
    if printed.grouped is None or printed.mark == decimal:
        return printed.plain, None
    if decimal is not None and field.plausible(printed.grouped * scale):
        return printed.grouped, None
    plain_fits, grouped_fits = field.plausible(printed.plain * scale), field.plausible(printed.grouped * scale)
    if plain_fits != grouped_fits:
        return (printed.plain, None) if plain_fits else (printed.grouped, None)
    if printed.mark == "." or not plain_fits:
        # A point with three decimals ("16.000") is far commoner than one that parts thousands.
        doubtful = plain_fits and field.thousands == "thousands"
        return printed.plain, _doubt(printed, printed.plain, unit) if doubtful else None
    if field.thousands == "decimal" and (field.name != "frequency_mhz" or _is_watch_frequency(printed)):
        return printed.plain, None if _is_watch_frequency(printed) else _doubt(printed, printed.plain, unit)
    return printed.grouped, _doubt(printed, printed.grouped, unit)


def _is_watch_frequency(printed: Number) -> bool:
    """32.768 is 2¹⁵ Hz in kHz, the one frequency of nearly every tuning fork."""
    return printed.plain == 32.768


def _doubt(printed: Number, taken: float, unit: str) -> str:
    return f"{printed.text!r} may be {printed.plain:g} or {printed.grouped:g} {unit}".rstrip() + f"; taken as {taken:g}"
