"""Which ranked parts are shown and in what order: filters, then one order or weights; why one stands above another.

Whatever is asked for, a part that meets stands above one that cannot be told, and that above one that falls short; and
a part of which the thing asked is not known stands below those of which it is.
"""

from __future__ import annotations

import math
from collections import Counter
from collections.abc import Mapping, Sequence
from dataclasses import asdict, dataclass, fields
from functools import cached_property, lru_cache
from typing import Any

from compare import supply
from compare.answers import SHORT_NAMES, Identity, identities, missing_name, row_name, times
from compare.figures import number
from compare.footprint import size_mm

Row = Mapping[str, Any]
CLASSES = ("meets", "cannot tell", "falls short")
ANY = ""
LEAST = "least_slack"
LIMITS = {
    "most_price": ("price", "price at most"),
    "most_weeks": ("lead_time", "lead time at most"),
    "least_stock": ("stock", "in stock at least"),
    "most_order": ("minimum_order", "minimum order at most"),
}
"""Field of `Filters`: the column of supply that it limits, and its words."""


@dataclass(frozen=True)
class Aspect:
    """Something that parts can be put in order by: `low` where less is better, `offset` where 0 must be divided by."""

    name: str
    low: bool = False
    offset: float = 0.0


ASPECTS = {
    LEAST: Aspect("least slack"),
    "price": Aspect("price", low=True),
    "lead_time": Aspect("lead time", low=True, offset=1.0),
    "stock": Aspect("stock"),
    "minimum_order": Aspect("minimum order", low=True),
    "area": Aspect("size", low=True),
}
WEIGHTS = "weights"
ORDERS = {key: one.name for key, one in ASPECTS.items()} | {WEIGHTS: "weights"}
MOST_WEIGHT = 5


@dataclass(frozen=True)
class Filters:
    """What is asked of the rows shown; "" and None ask nothing. `by` is one of ORDERS."""

    package: str = ANY
    maker: str = ANY
    verdict: str = ANY
    status: str = ANY
    part: str = ANY
    most_price: float | None = None
    most_weeks: float | None = None
    least_stock: float | None = None
    most_order: float | None = None
    by: str = LEAST

    @classmethod
    def of(cls, slot: Mapping[str, Any]) -> Filters:
        """From what was kept; keys of a later issue are passed over."""
        known = {one.name for one in fields(cls)}
        kept = cls(**{key: value for key, value in slot.items() if key in known})
        return kept if kept.by in ORDERS else cls(**{**asdict(kept), "by": LEAST})

    def as_slot(self) -> dict[str, Any]:
        """What differs from asking nothing."""
        return {key: value for key, value in asdict(self).items() if value != getattr(Filters(), key)}

    @property
    def asks(self) -> bool:
        """True where some rows may be left out."""
        return bool(set(self.as_slot()) - {"by"})


@dataclass(frozen=True)
class Candidate:
    """A ranked row, with its supply beside it."""

    row: Row
    supply: Mapping[str, Mapping[str, Any]]

    def figure(self, aspect: str) -> float | None:
        """What the part has of an aspect; None where it is not known."""
        if aspect == LEAST:
            known = [value for value in self.row["slack"].values() if value is not None]
            return min(known, default=None)
        if aspect == "area":
            size = size_mm(self.row["package"]) if self.row["package"] else None
            return None if size is None else size[0] * size[1]
        return supply.figure(self.supply, aspect)


def candidates(rows: Sequence[Row], slot: Mapping[str, Any]) -> list[Candidate]:
    """The ranked rows with what is known of their supply."""
    if not slot:
        return [Candidate(row, supply.supply_of(row, slot) if row["attributes"] else {}) for row in rows]
    return [Candidate(row, supply.supply_of(row, slot)) for row in rows]


@lru_cache(maxsize=4096)
def package_text(package: str | None) -> str:
    """A package as filters call it: `2.0 × 1.6` whatever the sheet writes around it, else its own name."""
    if not package:
        return ""
    size = size_mm(package)
    return package if size is None else f"{size[0]:.1f} × {size[1]:.1f}"


def choices(every: Sequence[Candidate]) -> dict[str, list[str]]:
    """What there is to filter by, the commonest first."""
    packages = Counter(one.row["package"] for one in every)
    by_size: Counter[str] = Counter()
    for package, count in packages.items():
        by_size[package_text(package)] += count
    makers = Counter(one.row["maker"] or "" for one in every)
    statuses = Counter(_status(one) for one in every if one.supply)
    counted = {"package": by_size, "maker": makers, "status": statuses}
    found = {name: [value for value, _ in counts.most_common() if value] for name, counts in counted.items()}
    present = {one.row["verdict"] for one in every}
    return {**found, "verdict": [name for name in CLASSES if name in present]}


@dataclass(frozen=True)
class Field:
    """All that offer the frequency, with what is worked out once for all that is asked of them."""

    every: list[Candidate]

    @cached_property
    def choices(self) -> dict[str, list[str]]:
        """What there is to filter by, the commonest first."""
        return choices(self.every)

    @cached_property
    def untold(self) -> list[int]:
        """The places of those that cannot be told."""
        return [one.row["place"] for one in self.every if one.row["verdict"] == "cannot tell"]


@dataclass(frozen=True)
class Sifted:
    """What is left after the filters, in order; and how many were left out because a thing asked is not known."""

    shown: list[Candidate]
    unknown: Mapping[str, int]
    currency: str = ""

    @cached_property
    def identities(self) -> list[Identity]:
        """What each is known by while the ranking changes."""
        return identities([one.row for one in self.shown])

    @cached_property
    def places(self) -> list[int]:
        """The place of each in the ranking."""
        return [one.row["place"] for one in self.shown]

    @cached_property
    def by_place(self) -> dict[int, Candidate]:
        return dict(zip(self.places, self.shown, strict=True))


def sift(every: Sequence[Candidate], filters: Filters, weights: Mapping[str, float]) -> Sifted:
    """Filter, then put in order."""
    money = common_currency(every)
    unknown: Counter[str] = Counter()
    shown = [one for one in every if _passes(one, filters, money, unknown)] if filters.asks else list(every)
    return Sifted(_in_order(shown, filters.by, weights, money), dict(unknown), money)


def common_currency(every: Sequence[Candidate]) -> str:
    """The currency that most prices are in: prices in another one, or in none, are not compared with them."""
    priced = [one.supply for one in every if "price" in one.supply]
    counts = Counter(supply.currency(one) for one in priced if supply.figure(one, "price") is not None)
    named = [currency for currency, _ in counts.most_common() if currency]
    return named[0] if named else ""


def _passes(one: Candidate, asked: Filters, money: str, unknown: Counter[str]) -> bool:
    row = one.row
    plain = (
        (asked.package, package_text(row["package"])),
        (asked.maker, row["maker"] or ""),
        (asked.verdict, row["verdict"]),
        (asked.status, _status(one)),
    )
    if any(wanted and wanted != has for wanted, has in plain):
        return False
    if asked.part and supply.folded(asked.part) not in supply.folded(f"{row['part_number'] or ''} {row['file']}"):
        return False
    for name, (column, _) in LIMITS.items():
        limit = getattr(asked, name)
        if limit is None:
            continue
        has = _comparable(one, column, money)
        if has is None:
            unknown[column] += 1
            return False
        if has < limit if name.startswith("least") else has > limit:
            return False
    return True


def _comparable(one: Candidate, aspect: str, money: str) -> float | None:
    if aspect == "price" and supply.currency(one.supply) != money:
        return None
    return one.figure(aspect)


def _in_order(rows: list[Candidate], by: str, weights: Mapping[str, float], money: str) -> list[Candidate]:
    if by == LEAST:
        return rows  # They come ranked so.
    if by == WEIGHTS:
        rating = weighed(rows, weights, money)
        return sorted(rows, key=lambda one: _key(one, rating.get(one.row["place"]), low=False))
    aspect = ASPECTS[by]
    return sorted(rows, key=lambda one: _key(one, _comparable(one, by, money), low=aspect.low))


def _key(one: Candidate, value: float | None, *, low: bool) -> tuple[int, bool, float, int]:
    signed = 0.0 if value is None else value if low else -value
    return CLASSES.index(one.row["verdict"]), value is None, signed, one.row["place"]


def weighed(rows: Sequence[Candidate], weights: Mapping[str, float], money: str) -> dict[int, float]:
    """By place: how near a part comes to the best of the rows in all that is weighed, 1 where it is the best in each.

    The weighted geometric mean of the ratios to the best: twice the weight counts as the ratio squared. Parts of which
    something weighed is not known are left out.
    """
    counted = {key: float(weight) for key, weight in weights.items() if key in ASPECTS and weight > 0}
    if not counted:
        return {}
    best: dict[str, float] = {}
    for key in counted:
        known = [value for one in rows if (value := _offset(one, key, money)) is not None]
        if known:
            best[key] = min(known) if ASPECTS[key].low else max(known)
    rated = {}
    for one in rows:
        total = 0.0
        for key, weight in counted.items():
            value = _offset(one, key, money)
            if value is None:
                break
            ratio = best[key] / value if ASPECTS[key].low else value / best[key]
            total += weight * math.log(ratio)
        else:
            rated[one.row["place"]] = math.exp(total / sum(counted.values()))
    return rated


def _offset(one: Candidate, key: str, money: str) -> float | None:
    value = _comparable(one, key, money)
    return None if value is None else max(value + ASPECTS[key].offset, 1e-6)


def weights_text(weights: Mapping[str, float]) -> str:
    """`least slack 3, price 2`."""
    said = [f"{one.name} {number(weights[key])}" for key, one in ASPECTS.items() if weights.get(key, 0) > 0]
    return ", ".join(said)


def left_out_text(sifted: Sifted, every: int) -> str:
    """What the filters leave out, and of how many of those a thing asked is not known; "" where all are shown."""
    out = every - len(sifted.shown)
    if not out:
        return ""
    known = [f"{count} because the {ASPECTS[key].name} is not known" for key, count in sifted.unknown.items()]
    return f"{len(sifted.shown)} of {every} shown" + (f"; left out: {', '.join(known)}" if known else "")


def limits_text(filters: Filters, money: str) -> str:
    """The limits of supply in words: `price at most 0.25 €, lead time at most 12 weeks`."""
    said = []
    for name, (column, words) in LIMITS.items():
        limit = getattr(filters, name)
        if limit is not None:
            value: Any = {"amount": limit, "currency": money} if column == "price" else limit
            said.append(f"{words} {supply.value_text(column, value)}")
    return ", ".join(said)


def why_above(one: Candidate, other: Candidate, sifted: Sifted, by: str, weights: Mapping[str, float]) -> str:
    """Why `one` stands above `other` in the order shown, in a sentence.

    Both rows carry `missing` and `reasons` where their verdicts differ.
    """
    name, beside = row_name(one.row), row_name(other.row)
    verdicts = one.row["verdict"], other.row["verdict"]
    if verdicts[0] != verdicts[1]:
        return f"{name} {_as_it_is(one.row)}; {beside} {_as_it_is(other.row)}. That counts before everything else."
    both = {"meets": "Both meet", "cannot tell": "Neither can be told", "falls short": "Both fall short"}[verdicts[0]]
    if by == WEIGHTS:
        return f"{both}. {_why_weighed(one, other, sifted, weights)}"
    values = [_comparable(each, by, sifted.currency) for each in (one, other)]
    if values[0] == values[1]:
        return f"{both}, and in {ORDERS[by]} they are alike. {_by_place(one, other)}"
    if values[1] is None:
        return f"{both}. Of {beside} the {ORDERS[by]} is not known, and what is not known never stands above what is."
    if by == LEAST:
        return f"{both}. {_why_slack(one.row, other.row)}"
    said = [_value_said(each, by) for each in (one, other)]
    return f"{both}. {ORDERS[by].capitalize()}: {said[0]} for {name}, {said[1]} for {beside}."


def _value_said(one: Candidate, by: str) -> str:
    if by == "area":
        return package_text(one.row["package"])
    return supply.value_text(by, one.supply[by]["value"])


def _as_it_is(row: Row) -> str:
    if row["verdict"] == "meets":
        return "meets what is asked"
    if row["verdict"] == "falls short":
        short = [reason["about"] for reason in row.get("reasons", ()) if reason["verdict"] == "falls short"]
        names = ", ".join(dict.fromkeys(SHORT_NAMES.get(about, about) for about in short[:3]))
        return f"falls short in {names}" if names else "falls short"
    missing = [missing_name(key) for key in row.get("missing", ())[:3]]
    return f"cannot be told ({', '.join(missing)} not known)" if missing else "cannot be told"


def _why_slack(one: Row, other: Row) -> str:
    first, second = (SHORT_NAMES.get(row["tightest"], row["tightest"]) for row in (one, other))
    most, less = (times(row["slack"][row["tightest"]]) for row in (one, other))
    name, beside = row_name(one), row_name(other)
    if first == second:
        return f"The tightest of both is {first}: {most} over for {name}, {less} for {beside}."
    return f"The tightest of {name}, {first}, is met {most} over; that of {beside}, {second}, {less}."


def _by_place(one: Candidate, other: Candidate) -> str:
    if one.row["tightest"] is None or other.row["tightest"] is None:
        return "They keep the order in which they were read."
    slacks = [each.figure(LEAST) for each in (one, other)]
    return "They keep the order in which they were read." if slacks[0] == slacks[1] else _why_slack(one.row, other.row)


def _why_weighed(one: Candidate, other: Candidate, sifted: Sifted, weights: Mapping[str, float]) -> str:
    rated = weighed(sifted.shown, weights, sifted.currency)
    mine, theirs = rated.get(one.row["place"]), rated.get(other.row["place"])
    said = weights_text(weights)
    if mine is None:
        return f"Not all that is weighed ({said}) is known of either. {_by_place(one, other)}"
    if theirs is None:
        return f"Of {row_name(other.row)} not all that is weighed ({said}) is known."
    return (
        f"Weighed ({said}), {row_name(one.row)} comes to {number(mine)} of the best of each, {row_name(other.row)} to "
        f"{number(theirs)}."
    )


def _status(one: Candidate) -> str:
    return str(one.supply.get("status", {}).get("value", ""))
