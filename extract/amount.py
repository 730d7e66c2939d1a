"""Printed amounts in, bounds in the field's unit out: `read_values`.

The text is folded (`fold`) and cut into tokens (`tokens`); numbers that belong together become groups (`groups`), each
word beside them is given to the group it speaks of (`attach`), and `bounds` makes values of them.
"""

from __future__ import annotations

import re
from dataclasses import dataclass, replace
from functools import cache, lru_cache

from extract.attach import Amount, attach, own_amounts, share_years
from extract.band import joined, when_of
from extract.bounds import Heading, Value, give_bounds, values_of
from extract.fields import Field, field_of
from extract.fold import fold, key
from extract.groups import Item, read_items
from extract.model import When
from extract.number import Number, decide
from extract.tokens import Token, tokens
from extract.units import guessed, unit_at
from extract.vocabulary import vocabulary

__all__ = ["Value", "as_plus_minus", "decimal_mark", "field_for", "read_values"]

LONGEST_AMOUNT = 600
UNIT_NOT_PRINTED = "unit not printed"


def read_values(
    text: str,
    field: str,
    *,
    unit: str | None = None,
    bound: str | None = None,
    plus_minus: bool = False,
    decimal: str | None = None,
) -> list[Value]:
    """Everything that the printed `text` states for `field`, in the field's unit; [] where it states nothing.

    Parameters
    ----------
    text
        As printed; one cell, or the part of a line behind its label.
    field
        A field of the data contract; KeyError for another.
    unit
        As printed in the label, head or unit column ("kΩ", "±ppm", "×10⁻⁶/year"); a unit in the text goes before.
    bound
        "min", "typ" or "max" where a heading or label says so, or several for as many numbers ("typ/max" over
        "10/100"); a word in the text goes before. For a ± field it gives that bound alone ("10" under Max is max 10,
        not ±10): `as_plus_minus` makes both ends where the Min cell is empty.
    plus_minus
        The label or head prints ±.
    decimal
        The sheet's decimal mark, "." or ",", where the caller knows it (`decimal_mark`).

    Returns
    -------
    list of Value
        In the order printed, one for each condition (band, temperature range, years, mode) or choice of ranges. What
        had to be refused is a value without bounds (`empty`) whose doubts say why; it is there only if nothing else is.
    """
    if (date := _DATE.fullmatch(text.strip())) is not None:
        return [_from_date(date, field, bound)]
    return list(_read(text, field, _Given(unit, bound, plus_minus, decimal)))


_DATE = re.compile(r"(?:19|20)\d\d-(?P<month>\d\d)-(?P<day>\d\d)(?:[ T]00:00(?::00)?)?")


def _from_date(date: re.Match[str], field: str, bound: str | None) -> Value:
    """A date in the place of an amount: spreadsheets make one of "12.5"; what was meant only a person can say."""
    day, month = int(date["day"]), int(date["month"])
    meant = float(f"{day}.{month}")
    doubt = f"a date stands here; a spreadsheet makes one of {meant:g}, which is taken"
    if bound == "min":
        return Value(min=meant, doubts=(doubt,))
    if bound == "max":
        return Value(max=meant, doubts=(doubt,))
    return Value(typ=meant, bare=field_of(field).bare, doubts=(doubt,))


@dataclass(frozen=True, slots=True)
class _Given:
    """What the caller knows from label, head and sheet, as printed."""

    unit: str | None
    bound: str | None
    plus_minus: bool
    decimal: str | None


@lru_cache(maxsize=65536)
def _read(text: str, field_name: str, given: _Given) -> tuple[Value, ...]:
    row = field_of(field_name)
    heading = _heading(given, field_name)
    folded = fold(text)[:LONGEST_AMOUNT]
    hours: re.Match[str] | None = None
    if row.limit == "min":
        folded = _above().sub("≥", folded)
    if field_name == "ageing_ppm":
        hours = _HOURS.search(folded)
        folded = _HOURS.sub(" ", folded)
    if field_name == "parabolic_coefficient_ppm_per_c2":
        folded = _out_of_formula(folded)
    if heading.bound is None and (told := _bounds_behind(folded)):
        folded, bounds = told
        heading = replace(heading, bound=bounds)
    pieces = tokens(folded, field_name)
    if len(pieces) > 1 and pieces[0].kind == "pm" and pieces[1].kind == "unit":
        heading = replace(heading, plus_minus=True, unit=(pieces[1].text, pieces[1].value))
        pieces = pieces[2:]
    items = read_items(pieces, field_name, plain_pair=row.sign == "either")
    amounts = own_amounts(items, pieces, row)
    _give_units(amounts, pieces, heading, row)
    attach(items, amounts, row)
    heading = give_bounds(amounts, heading)
    if row.name == "ageing_ppm":
        share_years(amounts)
    values = [value for value in values_of(amounts, row, heading) if not value.empty or value.doubts]
    if row.name == "load_capacitance_pf" and _offers_series(items, text):
        values.append(Value(series=True))
    if not values:
        values = _refused(items, pieces, row)
    if hours is not None:
        years = When(years=round(float(hours[1]) / HOURS_OF_A_YEAR, 4))
        values = [replace(value, when=joined(value.when, years)) for value in values]
    raw = text.strip()
    return tuple(replace(value, raw=raw, when=joined(heading.when, value.when)) for value in values)


_SEVERAL_BOUNDS = re.compile(r"[\s(\[]+(?P<bounds>[^\W\d_]+\.?(?:\s?/\s?[^\W\d_]+\.?){1,2})[\s)\]]*$")


def _bounds_behind(folded: str) -> tuple[str, str] | None:
    """The text without the bounds that stand together behind its numbers ("45 / 70 Ω (typ/max)"), and "typ/max"."""
    found = _SEVERAL_BOUNDS.search(folded)
    bounds = [vocabulary().bounds.get(key(word)) for word in found["bounds"].split("/")] if found else []
    if found is None or None in bounds or len(set(bounds)) < len(bounds):
        return None
    return folded[: found.start()], "/".join(bound for bound in bounds if bound)


@lru_cache(maxsize=4096)
def _heading(given: _Given, field_name: str) -> Heading:
    if not given.unit:
        return Heading(None, given.bound, given.plus_minus, When(), given.decimal)
    printed = fold(given.unit)
    stripped = printed.strip("±()[] ")
    found = unit_at(stripped, field_name)
    when = when_of(stripped[found[2] :] if found else stripped)
    named = (found[0], found[1]) if found else None
    alien = stripped if named is None and key(stripped) and when == When() else ""
    return Heading(named, given.bound, given.plus_minus or "±" in printed, when, given.decimal, alien)


def _give_units(amounts: list[Amount], pieces: list[Token], heading: Heading, row: Field) -> None:
    """Each number its unit: its own, that of the next number that has one, a free one, the last, the heading's."""
    free = [(at, piece) for at, piece in enumerate(pieces) if piece.kind == "unit" and piece.meaning == "free"]
    printed = sorted(
        [*free, *((a.group.start, a.printed_unit) for a in amounts if a.printed_unit)], key=lambda one: one[0]
    )
    for amount in amounts:
        later = next((unit for at, unit in printed if at >= amount.group.start), None)
        earlier = next((unit for at, unit in reversed(printed) if at < amount.group.start), None)
        unit = amount.printed_unit or later or earlier
        name, scale = (unit.text, unit.value) if unit else heading.unit or ("", 1.0)
        if not name and row.name == "frequency_mhz" and _is_khz(amount, row):
            name, scale = "kHz", 1e-3
            amount.doubts.append(f"{UNIT_NOT_PRINTED}, taken as kHz")
        elif not name and row.unit and row.sign != "either":
            amount.doubts.append(_no_unit(heading, row))
        elif name and guessed(name, row.name):
            amount.doubts.append(f"unit printed as {name!r}, taken as {row.unit}")
        group = amount.group
        high = group.high_unit.value if group.high_unit and not group.percent else scale
        low = group.low_unit.value if group.low_unit else high
        amount.low = _scaled(amount, group.low, (name, low), row, heading.decimal)
        if group.high is not None:
            if group.below is not None:
                amount.below = _scaled(amount, group.below, (name, high), row, heading.decimal)
            amount.high = _scaled(amount, group.high, (name, 1.0 if group.percent else high), row, heading.decimal)


def _is_khz(amount: Amount, row: Field) -> bool:
    """A frequency without a unit that no crystal has in MHz, and one may have in kHz ("16000")."""
    size = amount.group.low.number.plain if amount.group.low.number else 0.0
    return not row.plausible(size) and row.plausible(size / 1000)


def _no_unit(heading: Heading, row: Field) -> str:
    if heading.alien:
        return f"{heading.alien!r} is no unit of {row.title}; taken as {row.unit}"
    return f"{UNIT_NOT_PRINTED}, taken as {row.unit}"


def _scaled(amount: Amount, token: Token, unit: tuple[str, float], row: Field, decimal: str | None) -> float:
    """The number meant, in the field's unit; `unit` is what it is printed in, and its factor."""
    name, scale = unit
    value, doubt = decide(token.number or Number("", 0.0), scale, row, decimal=decimal, unit=name)
    if doubt and doubt not in amount.doubts:
        amount.doubts.append(doubt)
    return float(f"{(-value if token.meaning == '-' else value) * scale:.12g}")


_S_CODE = re.compile(r"(?:^|[,;/、(]|\bor\b|\bo\b|\bou\b|\boder\b)\s*S\s*(?:$|[,;/、)]|or\b|o\b|ou\b|oder\b)")


def _offers_series(items: list[Item], text: str) -> bool:
    """Whether series resonance is offered: the word or ∞, not "on request"; "S" alone between marks is its code."""
    if key(text) == "s" or _S_CODE.search(text):
        return True
    words = [item for item in items if item.word is not None]
    asked = {item.segment for item in words if item.word and item.word.kind == "request"}
    return any(item.word is not None and item.word.kind == "series" and item.segment not in asked for item in words)


def _refused(items: list[Item], pieces: list[Token], row: Field) -> list[Value]:
    for piece in pieces:
        if piece.kind == "number" and piece.glued:
            return [Value(doubts=(f"letters touch the number {piece.text!r}; left out",))]
        if piece.kind == "broken":
            return [Value(doubts=(f"{piece.text!r} is no number; left out",))]
    groups = [item.group for item in items if item.group is not None]
    if not groups and any(piece.kind == "pm" for piece in pieces) and any(piece.kind == "word" for piece in pieces):
        return [Value(doubts=("no number stands behind ±; left out",))]
    if len(groups) == 1 and groups[0].shape == "single" and groups[0].foreign in _FIELD_KINDS:
        unit = groups[0].low_unit.text.strip() if groups[0].low_unit else ""
        return [Value(doubts=(f"no unit called {unit} for {row.title} ({row.unit or 'a plain number'}); left out",))]
    return []


# A lone number in one of these is a slip or another field's; volts, degrees and MHz alone are conditions.
_FIELD_KINDS = frozenset(
    {"resistance", "capacitance", "relative", "power", "inductance", "pulling", "parabola", "current"}
)


def as_plus_minus(value: Value) -> Value:
    """±size for a value that holds one magnitude: "20" under a Max heading whose Min cell is empty."""
    size = value.max if value.max is not None else value.typ
    if size is None or value.min is not None or value.options:
        return value
    return replace(value, min=-abs(size), typ=None, max=abs(size), bare=False)


_PER_SQUARE = re.compile(
    r"/\s?\(?\s?(?:Δ\s?)?(?:°\s?C?|C|K|T|deg\s?C?)\s?\)?\s?\^?2|/\s?\(?Δ?°?[CK]\)?\s?\^2|°C\^?-2", re.IGNORECASE
)


# "-0.035 x (T - T0)² ppm": the coefficient as the formula in which it stands.
_FORMULA = re.compile(
    r"\s?(?:ppm(?:\s?/\s?°C\^?2)?\s?)?[x×*·]?\s?\(\s?Δ?[Ttθ][a-z]?\s?-\s?(?:[Ttθ]\s?\w{0,3}|25(?:\s?°C)?)\s?\)\s?\^?2(?:\s?ppm\b)?"
)


@cache
def _above() -> re.Pattern[str]:
    """A word for "more than" that a text begins with ("Over 500 MΩ")."""
    words = "|".join(map(re.escape, vocabulary().phrases.get("above", ())))
    return re.compile(rf"^\s*(?:{words})\s+(?=\d)", re.IGNORECASE)


HOURS_OF_A_YEAR = 8766.0
_HOURS = re.compile(r"/\s?(\d{3,5})\s?(?:h(?:ours|rs|\.)?|Std\.?|heures|ore|horas|小时|小時|時間)(?![a-zA-Z])")


def _out_of_formula(folded: str) -> str:
    return _FORMULA.sub(" ppm/°C^2", folded) if ")" in folded else folded


def field_for(text: str, field: str) -> str:
    """The field that the unit of a value makes of its label: stability or a coefficient in ppm/°C² is the parabola."""
    squared = field in ("frequency_stability_ppm", "frequency_tolerance_ppm")
    if squared and _PER_SQUARE.search(_out_of_formula(fold(text))):
        return "parabolic_coefficient_ppm_per_c2"
    return field


_POINT = re.compile(r"(?<![\d.,])\d+\.(?:\d{1,2}|\d{4,})(?![\d.,])")
_COMMA = re.compile(r"(?<![\d.,])(?:\d+,(?:\d{1,2}|\d{4,})|0,\d+)(?![\d.,])")


def decimal_mark(text: str) -> str | None:
    """The decimal mark of a whole sheet, from the numbers in which it can be nothing else; None where they differ."""
    folded = fold(text)
    points, commas = len(_POINT.findall(folded)), len(_COMMA.findall(folded))
    if points > 3 * commas:
        return "."
    return "," if commas > 3 * points else None
