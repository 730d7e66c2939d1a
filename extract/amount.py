"""Printed amounts in, bounds in the field's unit out."""

from __future__ import annotations

from dataclasses import dataclass

from extract.model import When


@dataclass(frozen=True, slots=True)
class Value:
    """One value of a field as printed, in the field's unit.

    `series` stands for "Series" in the place of a load; it has no bounds. `bare`: no bound is printed or given, and the
    contract marks such a number of this field. `doubts`: why a person must look at it.
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


def read_values(
    text: str, field: str, *, unit: str | None = None, bound: str | None = None, plus_minus: bool = False
) -> list[Value]:
    """Everything that the printed `text` states for `field`, in the field's unit; [] where it states nothing."""
    raise NotImplementedError
