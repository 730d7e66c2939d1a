"""How a number is written for a person: unit beside it, minus as −, a range as 7.38…8.01 pF."""

from __future__ import annotations

import math
import re

MINUS, UP_TO = "−", "…"


def number(value: float | None, digits: int = 3) -> str:
    """`digits` significant ones, none of those before the point lost, no exponent: 0.5397 → 0.54, 1234 → 1234."""
    if value is None or math.isnan(value):
        return "not known"
    if math.isinf(value):
        return "∞" if value > 0 else f"{MINUS}∞"
    if value == 0:
        return "0"
    places = min(max(digits - 1 - math.floor(math.log10(abs(value))), 0), 12)
    text = f"{abs(value):.{places}f}"
    text = text.rstrip("0").rstrip(".") if "." in text else text
    return (MINUS if value < 0 and float(text) != 0 else "") + text


def exact(value: float) -> str:
    """All the digits that a file or sheet gave: 26.000015 stays so, 12.50 is 12.5."""
    if math.isinf(value):
        return number(value)
    text = f"{abs(value):.9f}".rstrip("0").rstrip(".") if 1e-6 <= abs(value) < 1e9 else f"{abs(value):g}"
    return (MINUS if value < 0 else "") + text


def with_unit(text: str, unit: str) -> str:
    """`12 pF`, `5 %`; a ratio has no unit."""
    return f"{text} {unit}" if unit else text


def spread(low: float | None, high: float | None, unit: str = "", digits: int = 3) -> str:
    """`7.38…8.01 pF`, `±12 ppm` where the ends mirror, one figure where they are the same, "not known" without."""
    if low is None and high is None:
        return "not known"
    if low is None or high is None:
        known = f"at most {number(high, digits)}" if low is None else f"at least {number(low, digits)}"
        return with_unit(known, unit)
    if low == -high and high > 0:
        return with_unit(f"±{number(high, digits)}", unit)
    first, last = number(low, digits), number(high, digits)
    return with_unit(first if first == last else f"{first}{UP_TO}{last}", unit)


def signed(value: float | None, digits: int = 3) -> str:
    """`+18.9`, `−0.4`, `0`: for shifts and ppm."""
    text = number(value, digits)
    return f"+{text}" if value is not None and value > 0 and text != "0" else text


HYPHEN_AS_MINUS = re.compile(r"(?<![\w.)-])-(?=[\d.∞])")


def with_minus(text: str) -> str:
    """A sentence with − where a hyphen stands for it, as before `-40`; part numbers and words keep theirs."""
    return HYPHEN_AS_MINUS.sub(MINUS, text)


COUNTS = ("None", "One", "Two", "Three", "Four", "Five", "Six", "Seven", "Eight", "Nine", "Ten", "Eleven", "Twelve")


def count_word(count: int, *, begins: bool = False) -> str:
    """Numbers to twelve in words ("two of nine"), further ones in figures; capital where a sentence begins."""
    if not 0 <= count < len(COUNTS):
        return str(count)
    return COUNTS[count] if begins else COUNTS[count].lower()


def ordinal(place: int) -> str:
    """`1st`, `2nd`, `11th`."""
    ending = "th" if place % 100 in (11, 12, 13) else {1: "st", 2: "nd", 3: "rd"}.get(place % 10, "th")
    return f"{place}{ending}"


def counted(count: int, one: str, many: str = "") -> str:
    """`1 part`, `3 parts`."""
    return f"{count} {one if count == 1 else many or one + 's'}"


# Unit: below which (or from which) all values go over to another unit, by what factor.
SMALL = {"mS": (0.1, 1e3, "µS"), "MHz": (1.0, 1e3, "kHz")}
LARGE = {"Ω": (10_000.0, 1e-3, "kΩ"), "mH": (10_000.0, 1e-3, "H"), "ms": (10_000.0, 1e-3, "s")}


def scale(unit: str, *values: float | None) -> tuple[float, str]:
    """Factor and unit in which the trade says values of this size: 0.0105 mS are 10.5 µS, 0.032768 MHz 32.768 kHz."""
    sizes = [abs(value) for value in values if value is not None and value != 0 and math.isfinite(value)]
    if not sizes:
        return 1.0, unit
    if unit in SMALL and max(sizes) < SMALL[unit][0]:
        return SMALL[unit][1:]
    if unit in LARGE and min(sizes) >= LARGE[unit][0]:
        return LARGE[unit][1:]
    return 1.0, unit


# A million seconds are 11.57 days: 1 ppm is 0.0864 s a day.
SECONDS_A_DAY_PER_PPM = 0.0864
CLOCK_BELOW_MHZ = 1.0


def frequency_text(frequency_mhz: float) -> str:
    """`26 MHz`, `32.768 kHz`: the unit that the trade says it in."""
    factor, unit = scale("MHz", frequency_mhz)
    return f"{exact(frequency_mhz * factor)} {unit}"
