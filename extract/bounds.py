"""Amounts put together as values: bounds, ± pairs, choices, and what the sign of a field makes of them."""

from __future__ import annotations

from dataclasses import dataclass, replace

from extract.attach import Amount
from extract.fields import Field
from extract.model import When


@dataclass(frozen=True, slots=True)
class Value:
    """One value of a field as printed, in the field's unit.

    `series` stands for "Series" in the place of a load; it has no bounds. `bare`: no bound is printed or given, and the
    contract marks such a number of this field. `doubts`: why a person must look at it. A value that has neither bounds
    nor `series` was refused: its doubts say what was there and why it is left out (`empty`).
    """

    min: float | None = None
    typ: float | None = None
    max: float | None = None
    options: tuple[float, ...] = ()
    when: When = When()
    bare: bool = False
    doubts: tuple[str, ...] = ()
    raw: str = ""
    series: bool = False

    @property
    def empty(self) -> bool:
        return not self.series and not self.options and self.min is None and self.typ is None and self.max is None


@dataclass(frozen=True, slots=True)
class Heading:
    """What the label or column says of all numbers below it. `alien`: its unit is none of the field's."""

    unit: tuple[str, float] | None = None
    bound: str | None = None
    plus_minus: bool = False
    when: When = When()
    decimal: str | None = None
    alien: str = ""


def give_bounds(amounts: list[Amount], heading: Heading) -> Heading:
    """A heading of several bounds ("typ/max") gives them to as many numbers in turn, and is nothing to other cells."""
    if heading.bound is None or "/" not in heading.bound:
        return heading
    bounds = heading.bound.split("/")
    if len(amounts) == len(bounds) and not any(amount.bound for amount in amounts):
        for amount, bound in zip(amounts, bounds, strict=True):
            amount.bound = bound
    return replace(heading, bound=None)


def values_of(amounts: list[Amount], row: Field, heading: Heading) -> list[Value]:
    """One value for each condition and each choice of ranges, in the order printed."""
    clusters: dict[When, list[Amount]] = {}
    for amount in _on_stock(_without_recommended(amounts)):
        if not amount.request:
            clusters.setdefault(amount.when, []).append(amount)
    return [
        replace(value, when=when) for when, members in clusters.items() for value in _together(members, row, heading)
    ]


def _on_stock(amounts: list[Amount]) -> list[Amount]:
    """What stands between the standard and "on request" is on request: "10 pF standard, 8 pF, 12 pF on request"."""
    standard = [at for at, amount in enumerate(amounts) if amount.standard]
    if not standard or not any(amount.request for amount in amounts):
        return amounts
    return [amount for at, amount in enumerate(amounts) if amount.standard or at < standard[0]]


def _without_recommended(amounts: list[Amount]) -> list[Amount]:
    """What is recommended beside a limit bounds nothing ("200 µW max., 10 µW recommended"); alone it is the usual."""
    if any(amount.bound in ("min", "max") and not amount.recommended for amount in amounts):
        return [amount for amount in amounts if not amount.recommended]
    for amount in amounts:
        if amount.recommended:
            amount.bound = amount.bound or "typ"
    return amounts


def _together(amounts: list[Amount], row: Field, heading: Heading) -> list[Value]:
    """The amounts under one condition: numbers to choose from are options, unlike bounds fill one value."""
    amounts = _once(_without_zero(amounts, row))
    loose = [a for a in amounts if _is_loose(a)]
    if row.choice and loose:
        # A bound word behind a list speaks of all of it: "8, 10, 12 pF max".
        loose = [a for a in amounts if a in loose or (a.group.shape == "single" and a.bound == _common_bound(amounts))]
    made = [_options(loose, row, heading)] if len(loose) > 1 else []
    made += [_single(a, row, heading) for a in amounts if not made or a not in loose]
    out: list[Value] = []
    for value in made:
        fitting = next((i for i, other in enumerate(out) if _fits(other, value)), None)
        if fitting is None:
            out.append(value)
        else:
            out[fitting] = _merge(out[fitting], value)
    out = _typ_beside_limit(out, row)
    refused = [doubt for value in out if value.empty for doubt in value.doubts]
    kept = [value for value in out if not value.empty] or out
    kept[0] = replace(kept[0], doubts=tuple(dict.fromkeys((*kept[0].doubts, *refused))))
    return [_in_order(value) for value in _two_limits_marked(kept, row)]


def _two_limits_marked(values: list[Value], row: Field) -> list[Value]:
    """Two limits of one quantity in one text ("100 µW max., 500 µW absolute maximum"): either may be meant."""
    limits = [each for each in values if row.limit and not each.options and getattr(each, row.limit) is not None]
    if len(limits) < 2 or row.sign == "symmetric":
        return values
    doubt = "two limits stand side by side; only one of them is the part's"
    return [replace(each, doubts=(*each.doubts, doubt)) if each in limits else each for each in values]


def _once(amounts: list[Amount]) -> list[Amount]:
    """One limit in two units ("max. 100 µW / 0.1 mW") is one limit."""
    limits = {amount.low for amount in amounts if amount.group.shape == "single" and amount.bound in ("min", "max")}
    return [a for a in amounts if a.bound or a.group.shape != "single" or a.low not in limits]


def _without_zero(amounts: list[Amount], row: Field) -> list[Amount]:
    """Of a quantity that is never zero, "0 | 5" is a lower end that says nothing, and a limit."""
    if row.sign != "positive" or len(amounts) != 2 or amounts[0].low != 0 or not all(_is_loose(a) for a in amounts):
        return amounts
    amounts[1].bound = "max"
    return amounts[1:]


def _common_bound(amounts: list[Amount]) -> str | None:
    bounds = {amount.bound for amount in amounts} - {None}
    return bounds.pop() if len(bounds) == 1 else ""


def _is_loose(amount: Amount) -> bool:
    """A number that may be one of several to choose from."""
    shape = amount.group.shape
    if shape == "pm":
        return amount.bound != "typ"
    return shape == "single" and amount.bound is None


def _options(amounts: list[Amount], row: Field, heading: Heading) -> Value:
    sizes = [abs(a.low) if row.sign == "symmetric" else a.low for a in amounts]
    options = tuple(dict.fromkeys(sizes))
    doubts = _doubts(amounts)
    if len(options) == 1:
        return _single(amounts[0], row, heading)
    if not row.choice:
        doubts += ("several values stand side by side and nothing says which holds",)
    if any(a.best for a in amounts):
        doubts += (_BEST,)
    return Value(options=options, doubts=doubts)


_BEST = "printed as the best that may be ordered, not as a bound"


def _doubts(amounts: list[Amount]) -> tuple[str, ...]:
    return tuple(dict.fromkeys(doubt for amount in amounts for doubt in amount.doubts))


def _single(amount: Amount, row: Field, heading: Heading) -> Value:
    shape, doubts = amount.group.shape, tuple(amount.doubts)
    if amount.best and row.sign == "symmetric":
        return Value(options=(abs(amount.low),), doubts=(*doubts, _BEST))
    if shape == "pm":
        return _plus_minus(amount, row, doubts)
    if shape == "grades":
        return Value(
            options=(amount.low, amount.high or amount.low), doubts=(*doubts, "a span of grades to order from")
        )
    if shape == "centre" and amount.high is not None:
        return _centre(amount, row, doubts)
    if shape == "range" and amount.high is not None:
        return _range(amount, row, heading, doubts)
    return _number(amount, row, heading, doubts)


def _plus_minus(amount: Amount, row: Field, doubts: tuple[str, ...]) -> Value:
    size = abs(amount.low)
    if amount.bound == "typ" and row.sign == "symmetric":
        return Value(typ=size, doubts=doubts)
    if row.sign in ("positive", "negative"):
        return Value(doubts=(*doubts, f"±{size:g} {row.unit} says no {row.title}"))
    return Value(min=-size, max=size, doubts=doubts)


def _centre(amount: Amount, row: Field, doubts: tuple[str, ...]) -> Value:
    middle, half = amount.low, abs(amount.high or 0.0)
    below = half if amount.below is None else abs(amount.below)
    if amount.group.percent:
        unit = amount.group.high_unit
        half = below = abs(middle) * half * (unit.value if unit else 0.01)
    if row.sign == "negative" and middle > 0:
        middle, doubts = -middle, (*doubts, _LOST_MINUS)
    if row.sign == "symmetric" and middle:
        doubts = (*doubts, "a centre with a tolerance is unusual here")
    return Value(
        min=round(middle - below, row.decimals), typ=middle, max=round(middle + half, row.decimals), doubts=doubts
    )


_LOST_MINUS = "printed without a minus sign, taken as negative"


def _range(amount: Amount, row: Field, heading: Heading, doubts: tuple[str, ...]) -> Value:
    low, high = amount.low, amount.high if amount.high is not None else amount.low
    signed = amount.group.low.meaning or (amount.group.high is not None and low == 0 and amount.group.high.meaning)
    if row.sign == "symmetric" and low >= 0 and high > 0 and not signed:
        return Value(options=(low, high), doubts=(*doubts, "a span of grades to order from"))
    if row.sign == "negative" and low > 0 and high > 0:
        low, high, doubts = -low, -high, (*doubts, _LOST_MINUS)
    if row.sign in ("positive", "magnitude") and low < 0:
        low, high, doubts = abs(low), abs(high), (*doubts, *_unless_magnitude(row))
    if low > high and row.name == "esr_ohm":
        return Value(
            max=low,
            doubts=(
                *doubts,
                f"runs from {low:g} Ω at the low end of the frequency range to {high:g} Ω at the high end",
            ),
        )
    low, high = min(low, high), max(low, high)
    if amount.bound == "typ" or (heading.bound == "typ" and row.limit == "max"):
        return Value(doubts=(*doubts, f"typical is printed as a range, {low:g} to {high:g} {row.unit}"))
    return Value(min=low or (0.0 if row.sign in ("either", "symmetric") else None), max=high, doubts=doubts)


def _unless_magnitude(row: Field) -> tuple[str, ...]:
    return () if row.sign == "magnitude" else ("a minus sign before a quantity that is never negative",)


def _number(amount: Amount, row: Field, heading: Heading, doubts: tuple[str, ...]) -> Value:
    value, bound, signed = amount.low, amount.bound or heading.bound, bool(amount.group.low.meaning)
    if value == 0 and row.sign != "either":
        return Value()
    if row.sign in ("positive", "magnitude") and value < 0:
        value, doubts = abs(value), (*doubts, *_unless_magnitude(row))
    if row.sign == "negative":
        if value > 0:
            value, doubts = -value, (*doubts, _LOST_MINUS)
        return Value(min=value, doubts=doubts) if bound in ("min", "max") else Value(typ=value, doubts=doubts)
    if row.sign == "symmetric" and not signed:
        return _magnitude(value, amount, heading, doubts)
    return _bounded(value, bound, doubts, bare=row.bare)


SIGN_NOT_PRINTED = "printed without ±, taken as ±"


def _magnitude(size: float, amount: Amount, heading: Heading, doubts: tuple[str, ...]) -> Value:
    """A ppm figure without a sign: ± where a heading prints it, the heading's bound, else a guess that is said."""
    if "typ" in (amount.bound, heading.bound) and amount.bound in (None, "typ"):
        return Value(typ=size, doubts=doubts)
    if heading.plus_minus:
        return Value(min=-size, max=size, doubts=doubts)
    if heading.bound and not amount.bound:
        return _bounded(size, heading.bound, doubts, bare=False)
    return Value(min=-size, max=size, doubts=(*doubts, SIGN_NOT_PRINTED))


def _bounded(value: float, bound: str | None, doubts: tuple[str, ...], *, bare: bool) -> Value:
    if bound == "min":
        return Value(min=value, doubts=doubts)
    if bound == "max":
        return Value(max=value, doubts=doubts)
    return Value(typ=value, doubts=doubts, bare=bare and bound is None)


def _fits(one: Value, other: Value) -> bool:
    """Whether two values say different things and so are one: "10 typ" and "100 max", but not two ranges."""
    if one.options or other.options or one.empty != other.empty:
        return False
    pairs = ((one.min, other.min), (one.typ, other.typ), (one.max, other.max))
    return all(a is None or b is None for a, b in pairs)


def _merge(one: Value, other: Value) -> Value:
    def first(a: float | None, b: float | None) -> float | None:
        return b if a is None else a

    return Value(
        min=first(one.min, other.min),
        typ=first(one.typ, other.typ),
        max=first(one.max, other.max),
        bare=False,
        doubts=tuple(dict.fromkeys(one.doubts + other.doubts)),
    )


def _typ_beside_limit(values: list[Value], row: Field) -> list[Value]:
    """Of two numbers where one is called typical, the other is the limit: "1.0 µW, 0.1 µW typ"."""
    if len(values) != 2 or row.limit is None:
        return values
    bare = [value for value in values if value.bare]
    named = [value for value in values if not value.bare and value.typ is not None and value.max is None]
    if len(bare) == 1 and len(named) == 1 and bare[0].typ is not None:
        doubt = "the greater of two numbers, the other called typical; taken as the limit"
        limit = Value(max=bare[0].typ, doubts=(*bare[0].doubts, doubt))
        return [_merge(limit, named[0])]
    return values


def _in_order(value: Value) -> Value:
    stated = [number for number in (value.min, value.typ, value.max) if number is not None]
    if stated != sorted(stated):
        return replace(value, doubts=(*value.doubts, "the bounds are out of order"))
    return value
