"""Many offers at once: each thing that is taken of them as a few distinct values and, for every part, which one it is.

A sequence of offers like any other; an offer of a long list is made when it is asked for. What is worked out over all
parts asks for columns instead, and does so once for each distinct value.
"""

from __future__ import annotations

from abc import ABC, abstractmethod
from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass
from typing import Any, Generic, Self, TypeVar, overload

import numpy as np
from numpy.typing import ArrayLike, NDArray

from compare.bench import Bench
from compare.circuit import Array
from compare.offer import C1_ROUTES, AtSetting, Offer, with_load
from compare.stated import NOTHING, Span, Taken

Whole = NDArray[np.int_]
Value = TypeVar("Value")
C1_FROM = {name: f"C1 from {name}" for name in C1_ROUTES}
"""Columns of what a setting takes for C1, one for each way to it."""


@dataclass(frozen=True)
class Coded(Generic[Value]):
    """A column: `values` and, (n,), which of them each part has."""

    values: Sequence[Value]
    codes: Whole

    def __len__(self) -> int:
        return len(self.codes)

    def __getitem__(self, at: int) -> Value:
        value: Value = self.values[self.codes[at]]
        return value

    def __iter__(self) -> Iterator[Value]:
        return (self.values[code] for code in self.codes.tolist())

    def take(self, which: Whole) -> Coded[Value]:
        return Coded(self.values, self.codes[which])

    def array(self, of: Callable[[Value], ArrayLike], dtype: type = float) -> NDArray[Any]:
        """(..., n) of what a function makes of each value; called once for each."""
        made: NDArray[Any] = np.array([of(value) for value in self.values], dtype=dtype)
        picked: NDArray[Any] = np.moveaxis(made[self.codes], 0, -1) if len(made) else np.empty((0,), dtype=dtype)
        return picked


def spans(takens: Coded[Taken]) -> Array:
    """(3, n) low, mid, high."""
    return ends([taken.span for taken in takens.values])[:, takens.codes]


def ends(listed: Sequence[Span]) -> Array:
    """(3, n) low, mid, high of spans."""
    return np.array([(s.low, s.mid, s.high) for s in listed], dtype=float).reshape(-1, 3).T


def distinct(*codes: Whole) -> tuple[Whole, Whole]:
    """Of columns of codes, all of one length: where each distinct row stands first, and which of these each row is."""
    key = np.zeros(len(codes[0]) if codes else 0, dtype=np.int64)
    for one in codes:
        if len(one) and (one != one[0]).any():
            key = np.unique(key * (int(one.max()) + 2) + one + 1, return_inverse=True)[1]
    _, first, which = np.unique(key, return_index=True, return_inverse=True)
    return first, which


def together(of: Callable[..., Value], *columns: Coded[Any]) -> Coded[Value]:
    """A function of several columns, called once for each distinct combination of their values."""
    first, codes = distinct(*(column.codes for column in columns))
    return Coded([of(*(column[at] for column in columns)) for at in first.tolist()], codes)


OF_OFFER: dict[str, Callable[[Offer], Any]] = {
    "file": lambda o: o.sheet.file,
    "part_number": lambda o: o.part.part_number,
    "maker": lambda o: o.part.maker,
    "mode": lambda o: o.mode,
    "attributes": lambda o: o.part.attributes,
    "load": lambda o: o.load,
    "load_choice": lambda o: (o.load_options, o.load_range),
    "overtone": lambda o: o.overtone,
    "fork": lambda o: o.fork,
    "cut": lambda o: "tuning fork" if o.fork else o.part.cut,
    "package": lambda o: o.part.package,
    "tolerance": lambda o: o.tolerance,
    "stability": lambda o: o.stability,
    "loosest_tolerance": lambda o: o.loosest.get("frequency_tolerance_ppm"),
    "loosest_stability": lambda o: o.loosest.get("frequency_stability_ppm"),
    "ageing": lambda o: o.ageing,
    "ageing_years": lambda o: o.ageing_years,
    "operating_range": lambda o: o.operating_range,
    "stability_band": lambda o: o.stability_band,
    "turnover": lambda o: o.turnover,
    "parabolic": lambda o: o.parabolic,
    "drive": lambda o: o.drive,
}
AT_SETTING: dict[str, Callable[[AtSetting], Taken]] = {
    "esr": lambda at: at.esr,
    "shunt": lambda at: at.shunt_capacitance,
    "fundamental_esr": lambda at: at.fundamental_esr,
} | {key: (lambda at, name=name: at.motional.get(name, NOTHING)) for name, key in C1_FROM.items()}


class Lot(Sequence[Offer], ABC):
    """Offers as a sequence, and as columns."""

    @abstractmethod
    def column(self, name: str) -> Coded[Any]:
        """One of `OF_OFFER`."""

    @abstractmethod
    def at(self, setting: int, name: str) -> Coded[Taken]:
        """One of `AT_SETTING`, as a setting of the bench takes it."""

    @abstractmethod
    def take(self, which: Whole) -> Lot:
        """The offers at these indices, in this order."""

    @abstractmethod
    def ordered(self, loads: Sequence[tuple[float, str] | None], bench: Bench) -> Lot:
        """The same offers, each ordered with its (load, why), or left as it is."""

    @abstractmethod
    def offer(self, at: int) -> Offer: ...

    @overload
    def __getitem__(self, at: int) -> Offer: ...
    @overload
    def __getitem__(self, at: slice) -> list[Offer]: ...
    def __getitem__(self, at: int | slice) -> Offer | list[Offer]:
        if isinstance(at, slice):
            return [self.offer(one) for one in range(len(self))[at]]
        return self.offer(range(len(self))[at])


class Separate(Lot):
    """Offers made one by one, as those of ordinary sheets are."""

    def __init__(self, offers: Sequence[Offer]) -> None:
        self._offers = tuple(offers)

    @classmethod
    def of(cls, offers: Sequence[Offer]) -> Lot:
        return offers if isinstance(offers, Lot) else cls(offers)

    def __len__(self) -> int:
        return len(self._offers)

    def offer(self, at: int) -> Offer:
        return self._offers[at]

    def column(self, name: str) -> Coded[Any]:
        of = OF_OFFER[name]
        return Coded([of(offer) for offer in self._offers], np.arange(len(self)))

    def at(self, setting: int, name: str) -> Coded[Taken]:
        of = AT_SETTING[name]
        return Coded([of(offer.at[setting]) for offer in self._offers], np.arange(len(self)))

    def take(self, which: Whole) -> Self:
        return type(self)([self._offers[at] for at in np.asarray(which).tolist()])

    def ordered(self, loads: Sequence[tuple[float, str] | None], bench: Bench) -> Self:
        pairs = zip(self._offers, loads, strict=True)
        return type(self)([o if load is None else with_load(o, load[0], bench, load[1]) for o, load in pairs])


class Joined(Lot):
    """Several lots as one: `where` gives, for each offer, its place in the lots one after another."""

    def __init__(self, lots: Sequence[Lot], where: Whole | None = None) -> None:
        self._lots = tuple(lots)
        self._starts = np.cumsum([0, *(len(lot) for lot in lots)])
        self._where = np.arange(self._starts[-1]) if where is None else where

    @classmethod
    def of(cls, lots: Sequence[Lot]) -> Lot:
        there = [lot for lot in lots if len(lot)]
        return there[0] if len(there) == 1 else cls(there)

    def __len__(self) -> int:
        return len(self._where)

    def _lot_of(self, at: Whole) -> Whole:
        found: Whole = np.searchsorted(self._starts, at, side="right") - 1
        return found

    def offer(self, at: int) -> Offer:
        place = int(self._where[at])
        lot = int(self._lot_of(np.asarray(place)))
        return self._lots[lot].offer(place - int(self._starts[lot]))

    def column(self, name: str) -> Coded[Any]:
        return self._joined([lot.column(name) for lot in self._lots])

    def at(self, setting: int, name: str) -> Coded[Taken]:
        return self._joined([lot.at(setting, name) for lot in self._lots])

    def _joined(self, columns: Sequence[Coded[Any]]) -> Coded[Any]:
        starts = np.cumsum([0, *(len(column.values) for column in columns)])
        codes = [column.codes + start for column, start in zip(columns, starts[:-1], strict=True)]
        values = [value for column in columns for value in column.values]
        return Coded(values, np.concatenate(codes)[self._where] if codes else self._where)

    def take(self, which: Whole) -> Lot:
        return self._regrouped(self._where[which], lambda lot, _: lot)

    def ordered(self, loads: Sequence[tuple[float, str] | None], bench: Bench) -> Lot:
        return self._regrouped(self._where, lambda lot, own: lot.ordered([loads[at] for at in own.tolist()], bench))

    def _regrouped(self, where: Whole, then: Callable[[Lot, Whole], Lot]) -> Lot:
        """Each lot cut down to what is asked of it; `then` gets it with the places of its offers among all."""
        of, lots, index, start = self._lot_of(where), [], np.empty(len(where), dtype=int), 0
        for number, lot in enumerate(self._lots):
            own = np.flatnonzero(of == number)
            if own.size:
                lots.append(then(lot.take(where[own] - self._starts[number]), own))
                index[own] = start + np.arange(own.size)
                start += own.size
        return Joined(lots, index)
