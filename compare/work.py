"""A piece of work: what a person has opened, corrected, set and decided, as one frozen value, and the way back.

Nothing here knows files or widgets: folio.py writes it, page_session.py holds it for a session.
"""

from __future__ import annotations

import hashlib
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field, replace
from functools import cached_property
from types import MappingProxyType
from typing import Any

from compare.corrections import Correction, corrected
from compare.desk import Desk
from extract.model import Part, SpecSheet
from extract.partlist import part_numbers

# Each circuit has its own; the other slots belong to the work as a whole.
OF_A_CIRCUIT = ("filters", "weights", "measured", "decisions", "selection", "report", "trial", "settings")
OF_THE_WORK = ("supply", "notes")
SLOTS = (*OF_THE_WORK, *OF_A_CIRCUIT)
MOST_STEPS = 100
EMPTY: Mapping[str, Any] = MappingProxyType({})


@dataclass(frozen=True)
class OpenSheet:
    """A sheet as it was read, never changed, with its bytes where they are at hand (one opened by name has none)."""

    sheet: SpecSheet
    data: bytes | None = field(default=None, compare=False, repr=False)

    @cached_property
    def key(self) -> str:
        """What tells sheets apart, the same on every machine: name, content, and the parts that were asked for."""
        told = [self.sheet.file, self.sheet.sha256 or "", *(number or "" for number in part_numbers(self.sheet.parts))]
        return hashlib.sha256("\n".join(told).encode()).hexdigest()[:20]


@dataclass(frozen=True)
class Circuit:
    """One circuit of the project: what is set for it. `ident` never changes and names its slots."""

    ident: str = "c1"
    name: str = ""
    desk: Desk = field(default_factory=Desk)


@dataclass(frozen=True)
class Work:
    """All that is kept.

    `at` is the `ident` of the circuit in view. `slots` holds JSON values under `supply` (the work's) or
    `c1:filters` (a circuit's): ask for them with `slot` and put them with `with_slot`.
    """

    name: str = ""
    sheets: tuple[OpenSheet, ...] = ()
    corrections: tuple[Correction, ...] = ()
    circuits: tuple[Circuit, ...] = (Circuit(),)
    at: str = "c1"
    slots: Mapping[str, Any] = field(default_factory=lambda: EMPTY)

    @property
    def circuit(self) -> Circuit:
        """The circuit in view."""
        return next((one for one in self.circuits if one.ident == self.at), self.circuits[0])

    @property
    def desk(self) -> Desk:
        return self.circuit.desk

    def with_desk(self, desk: Desk) -> Work:
        """The same with the circuit in view set to `desk`."""
        here = self.circuit.ident
        return replace(self, circuits=tuple(replace(c, desk=desk) if c.ident == here else c for c in self.circuits))

    def slot(self, name: str, default: Any = EMPTY) -> Any:
        """What is kept under `name`, of the circuit in view where each has its own; an empty mapping where nothing."""
        return self.slots.get(self._place(name), default)

    def with_slot(self, name: str, value: Any) -> Work:
        """The same with `value` under `name`; None or an empty mapping takes it away."""
        place = self._place(name)
        others = {key: kept for key, kept in self.slots.items() if key != place}
        empty = value is None or value in ({}, [])
        return replace(self, slots=others if empty else {**others, place: value})

    def _place(self, name: str) -> str:
        if name not in SLOTS:
            raise KeyError(f"{name}: not a slot of the work; those are {', '.join(SLOTS)}")
        return name if name in OF_THE_WORK else f"{self.circuit.ident}:{name}"

    @cached_property
    def corrected(self) -> tuple[SpecSheet, ...]:
        """The sheets as they count: with every correction put in."""
        by_sheet: dict[str, list[Correction]] = {}
        for one in self.corrections:
            by_sheet.setdefault(one.sheet, []).append(one)
        return tuple(corrected(one.sheet, by_sheet.get(one.key, ())) for one in self.sheets)

    def of(self, key: str) -> OpenSheet | None:
        """The open sheet of a key."""
        return next((one for one in self.sheets if one.key == key), None)


def part_key(part: Part | Mapping[str, Any], file: str = "") -> str:
    """A part's key for `supply` and `decisions`, the same for every issue of its sheet: maker and part number folded.

    `part` is a part, or a row of `rank`, `review` or `substitute`; one without a part number goes by its file's name.
    """
    told = part if isinstance(part, Mapping) else {"maker": part.maker, "part_number": part.part_number, "file": file}
    number = told.get("part_number") or str(told.get("file") or file).rsplit("/", 1)[-1]
    return f"{_folded(told.get('maker') or '')}|{_folded(number)}"


def _folded(text: str) -> str:
    return "".join(text.casefold().split())


@dataclass(frozen=True)
class Step:
    """One change that can be undone: what was done, in words, and the pieces of the work as they were before."""

    said: str
    before: Mapping[str, Any]


@dataclass(frozen=True)
class History:
    """The way back, newest last."""

    steps: tuple[Step, ...] = ()

    @property
    def said(self) -> str:
        """What `Undo` would take back; "" where there is nothing."""
        return self.steps[-1].said if self.steps else ""

    def after(self, said: str, old: Work, new: Work) -> History:
        """The history once `old` has become `new`; the same where nothing changed."""
        before, now = pieces(old), pieces(new)
        changed = {key: before.get(key) for key in (before | now) if before.get(key) != now.get(key)}
        return History((*self.steps, Step(said, changed))[-MOST_STEPS:]) if changed else self

    def undone(self, work: Work) -> tuple[Work, History]:
        """The work without its last step, and the history without it. What came since without a step stays."""
        if not self.steps:
            return work, self
        return put_back(work, self.steps[-1].before), History(self.steps[:-1])


def pieces(work: Work) -> dict[str, Any]:
    """The work as named pieces that change one by one."""
    whole = {"name": work.name, "sheets": work.sheets, "corrections": work.corrections, "circuits": work.circuits}
    return whole | {"at": work.at} | {f"slot {key}": value for key, value in work.slots.items()}


def put_back(work: Work, before: Mapping[str, Any]) -> Work:
    """The work with these pieces as they were; a sheet opened meanwhile stays open."""
    whole = {key: value for key, value in before.items() if not key.startswith("slot ")}
    if "sheets" in whole:
        whole["sheets"] = with_sheets(whole["sheets"], work.sheets)
    slots = dict(work.slots) | {key.removeprefix("slot "): v for key, v in before.items() if key.startswith("slot ")}
    return replace(work, **whole, slots={key: value for key, value in slots.items() if value is not None})


def with_sheets(first: Sequence[OpenSheet], more: Sequence[OpenSheet]) -> tuple[OpenSheet, ...]:
    """Both, each once, in the order given."""
    every: dict[str, OpenSheet] = {}
    for one in (*first, *more):
        every.setdefault(one.key, one)
    return tuple(every.values())
