"""One row a field of the data contract: its unit, its sign, what is plausible (`fields.toml`)."""

from __future__ import annotations

import tomllib
from dataclasses import dataclass
from functools import cache
from importlib import resources
from typing import Any, Literal

Sign = Literal["positive", "magnitude", "symmetric", "either", "negative"]


@dataclass(frozen=True, slots=True)
class Field:
    """What is known of a field before any sheet is read. `mhz`, `fork`: (low, high) in `unit`, magnitudes for ppm.

    `limit` is the bound that its one number usually is; `choice` says that a list of numbers is the buyer's choice.
    """

    name: str
    unit: str
    title: str
    sign: Sign
    mhz: tuple[float, float]
    fork: tuple[float, float]
    thousands: Literal["decimal", "thousands"]
    decimals: int
    limit: Literal["min", "max"] | None = None
    bare: bool = False
    choice: bool = False

    def plausible(self, value: float, *, tuning_fork: bool | None = None) -> bool:
        """Whether `value`, in the field's unit, may be believed; of either kind of part when `tuning_fork` is None."""
        size = abs(value) if self.sign in ("symmetric", "negative", "magnitude") else value
        kinds = {True: (self.fork,), False: (self.mhz,), None: (self.mhz, self.fork)}[tuning_fork]
        return any(low <= size <= high for low, high in kinds)


def _field(name: str, row: dict[str, Any]) -> Field:
    ranges = {kind: (float(row[kind][0]), float(row[kind][1])) for kind in ("mhz", "fork")}
    return Field(name=name, **(row | ranges))


@cache
def fields() -> dict[str, Field]:
    """Every field by its name, in the contract's order."""
    text = resources.files("extract").joinpath("fields.toml").read_text(encoding="utf-8")
    return {name: _field(name, row) for name, row in tomllib.loads(text).items()}


def field_of(name: str) -> Field:
    """The row of a field; KeyError names a field that the contract does not have."""
    return fields()[name]
