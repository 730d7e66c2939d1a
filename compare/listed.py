"""The parts of a long list as a lot: nothing is taken row by row.

What is taken of a field hangs on what its cell says and on the case (frequency, mode, load, package) that what it says
must hold in. Both repeat from row to row, so each distinct pair is worked out once, by the functions that make a single
offer; a whole offer, with its places on the sheet, is made only for a row that is asked for.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence
from copy import copy
from dataclasses import replace
from typing import Any, Self

import numpy as np
from numpy.typing import NDArray

from compare.bench import Bench
from compare.lot import C1_FROM, Coded, Joined, Lot, Separate, Whole, distinct, together
from compare.offer import (
    FORK_FIELDS,
    AtSetting,
    Band,
    Match,
    Offer,
    Settled,
    ageing_for,
    fundamental_esr,
    make_offer,
    match_readings,
    overtone_of,
    room_only,
    settle,
    settle_range,
    stability_over_range,
    take_at,
    tightest,
)
from compare.stated import Case, Facts, Span, Taken, rated_drive, take
from extract.model import Reading, SpecSheet, When
from extract.partlist import Identity, PartList

KEPT = 128
"""Whole offers that are kept for who asks again."""
Said = list[tuple[str | None, str]]


def list_lot(sheet: SpecSheet, parts: PartList, bench: Bench) -> tuple[Lot, Said]:
    """The parts of a list that offer the bench's frequency, and (part number, why) of each that does not."""
    matches, codes = _matched(parts, bench)
    offered = offering(parts, bench)
    others = np.flatnonzero(~offered)
    said = [(parts.part_numbers[at], matches[code].said) for at, code in zip(others, codes[others], strict=True)]
    return rows_lot(sheet, parts, bench, np.flatnonzero(offered)), said


def offering(parts: PartList, bench: Bench) -> NDArray[np.bool_]:
    """(parts,) which of them offer the bench's frequency."""
    matches, codes = _matched(parts, bench)
    offered: NDArray[np.bool_] = np.array([match.printed_mhz is not None for match in matches], dtype=np.bool_)[codes]
    return offered


def _matched(parts: PartList, bench: Bench) -> tuple[list[Match], Whole]:
    """How each distinct frequency stands to the bench's, and which of them each part has."""
    stated, asked = parts.stated.get("frequency_mhz"), bench.requirement.frequency_mhz
    if stated is None:
        return [match_readings((), asked)], np.zeros(len(parts), dtype=int)
    return [match_readings(readings, asked) for readings in stated.templates], np.asarray(stated.index)


def rows_lot(sheet: SpecSheet, parts: PartList, bench: Bench, rows: Whole) -> Lot:
    """Some rows, all of which offer the bench's frequency, as a lot."""
    if not rows.size:
        return Separate([])
    by_row, asked = _mode_hangs_on_readings(parts, rows), bench.requirement.frequency_mhz
    if not by_row.any():
        return Listed(sheet, parts, bench, rows)
    alone = [
        make_offer(sheet, part := parts[at], match_readings(_readings(part, "frequency_mhz"), asked), bench)
        for at in rows[by_row].tolist()
    ]
    order = np.argsort(np.concatenate([rows[~by_row], rows[by_row]]), kind="stable")
    return Joined([Listed(sheet, parts, bench, rows[~by_row]), Separate(alone)]).take(order)


def _readings(part: Any, field: str) -> list[Reading]:
    return [reading for reading in part.readings if reading.field == field]


def _mode_hangs_on_readings(parts: PartList, rows: Whole) -> NDArray[np.bool_]:
    """Rows that state no mode, of which some reading holds for one: any cell may then settle what the others mean."""
    unknown = np.array([one.mode is None for one in parts.identity.distinct], dtype=np.bool_)
    unknown = unknown[np.asarray(parts.identity.index)[rows]]
    hangs = np.zeros(len(rows), dtype=bool)
    for stated in parts.stated.values():
        moded = np.array([any(r.when.mode for r in readings) for readings in stated.templates], dtype=bool)
        if moded.any():
            hangs |= unknown & moded[np.asarray(stated.index)[rows]]
    return hangs


class Listed(Lot):
    """Rows of one list that offer the frequency; `loads` where they are ordered with a load of one's choice."""

    def __init__(
        self,
        sheet: SpecSheet,
        parts: PartList,
        bench: Bench,
        rows: Whole,
        loads: Mapping[int, tuple[float, str]] | None = None,
    ) -> None:
        self._sheet, self._parts, self._bench, self._rows = sheet, parts, bench, rows
        self._settings = bench.settings
        self._loads = dict(loads or {})
        """By row of the list."""
        self._made: dict[int, Offer] = {}
        self._columns: dict[str, Coded[Any]] = {}
        self._conditions: dict[str, bool] = {}
        asked, frequency = bench.requirement.frequency_mhz, parts.stated["frequency_mhz"]
        self._matches = [match_readings(readings, asked) for readings in frequency.templates]
        self._index = {name: np.asarray(stated.index)[rows] for name, stated in parts.stated.items()}
        known: dict[Identity, int] = {}
        codes = np.array([known.setdefault(one, len(known)) for one in parts.identity.distinct], dtype=int)
        self._identities, self._identity = list(known), codes[np.asarray(parts.identity.index)[rows]]

    def __len__(self) -> int:
        return len(self._rows)

    def take(self, which: Whole) -> Self:
        taken = copy(self)
        taken._rows, taken._identity = self._rows[which], self._identity[which]
        taken._index = {name: codes[which] for name, codes in self._index.items()}
        taken._columns = {name: column.take(which) for name, column in self._columns.items()}
        taken._made = {}
        return taken

    def ordered(self, loads: Sequence[tuple[float, str] | None], bench: Bench) -> Self:
        rows = zip(self._rows.tolist(), loads, strict=True)
        chosen = {row: load for row, load in rows if load is not None}
        return type(self)(self._sheet, self._parts, bench, self._rows, self._loads | chosen)

    def offer(self, at: int) -> Offer:
        row = int(self._rows[at])
        if row not in self._made:
            if len(self._made) >= KEPT:
                self._made.clear()
            self._made[row] = self._make(at)
        return self._made[row]

    def _make(self, at: int) -> Offer:
        """The whole offer of one row: what its columns hold, with the row's own places."""
        row, asked = int(self._rows[at]), self._bench.requirement
        part, settled = self._parts[row], self.settled[at]
        placed = Facts.of(part).by_field

        made: dict[int, Taken] = {}

        def own(taken: Taken) -> Taken:
            if not taken.readings:
                return taken
            if id(taken) not in made:
                made[id(taken)] = replace(taken, readings=self._placed(at, taken.readings, placed))
            return made[id(taken)]

        operating, chosen_range, said = self.column("operating range with words")[at]
        chosen = {**settled.chosen, **chosen_range}
        loosest = {}
        for name, field in OPTIONS.items():
            loose = self.column(f"loosest_{name}")[at]
            if loose is not None:
                chosen[field] = self.column(name)[at].span.high
                loosest[field] = own(loose)
        matched = self._matches[self._index["frequency_mhz"][at]].reading
        why = (("load_capacitance_pf", self._loads[row][1]),) if row in self._loads and self._loads[row][1] else ()
        return Offer(
            sheet=self._sheet,
            part=part,
            frequency=own(Taken(Span.at(asked.frequency_mhz), (matched,) if matched else ())),
            case=settled.case,
            mode=settled.mode,
            overtone=overtone_of(settled.mode),
            fork=settled.fork,
            series=settled.series,
            load=own(settled.load),
            load_options=settled.load_options,
            load_range=settled.load_range,
            at=tuple(self._setting(at, number, own) for number in range(len(self._settings))),
            loosest=loosest,
            ageing_years=self.column("ageing_years")[at],
            operating_range=own(operating),
            stability_band=self.column("stability_band")[at],
            chosen=chosen,
            said=(*settled.said, *said, *why),
            **{name: own(self.column(name)[at]) for name in PLAIN},
        )

    def _placed(
        self, at: int, readings: Sequence[Reading], placed: Mapping[str, Sequence[Reading]]
    ) -> tuple[Reading, ...]:
        """The row's own readings in the place of a template's."""
        field = readings[0].field
        template, own = self._parts.stated[field].templates[self._index[field][at]], placed[field]
        if len(template) == 1:
            return (own[0],)
        numbers = {id(reading): number for number, reading in enumerate(template)}
        return tuple(own[numbers[id(reading)]] for reading in readings)

    def _setting(self, at: int, number: int, own: Callable[[Taken], Taken]) -> AtSetting:
        esr = own(self.at(number, "esr")[at])
        routes = {name: self.at(number, key)[at] for name, key in C1_FROM.items() if name in self._index}
        return AtSetting(
            esr=esr,
            shunt_capacitance=own(self.at(number, "shunt")[at]),
            motional={name: own(taken) for name, taken in routes.items() if taken.readings},
            room_only=room_only(esr, self.settled[at].case, self._settings[number].temperature_c),
            fundamental_esr=own(self.at(number, "fundamental_esr")[at]),
        )

    def column(self, name: str) -> Coded[Any]:
        if name not in self._columns:
            self._columns[name] = MAKERS[name](self)
        return self._columns[name]

    def at(self, setting: int, name: str) -> Coded[Taken]:
        # What is stated without a condition is taken alike at any temperature.
        temperature = self._settings[setting].temperature_c if self._has_conditions(FIELDS_AT[name]) else None
        key = f"{name} at {temperature}"
        if key not in self._columns:
            self._columns[key] = self._at(name, temperature)
        return self._columns[key]

    def _at(self, name: str, temperature_c: float | None) -> Coded[Taken]:
        if name == "fundamental_esr":
            return self._field("esr_ohm", lambda facts, case: _fundamental_at(facts, case, temperature_c), always=True)
        field = FIELDS_AT[name]
        return self._field(field, lambda facts, case: take_at(facts, field, case, temperature_c))

    @property
    def settled(self) -> Coded[Settled]:
        """The case of each row: a column like the others, the first that all of them need."""
        return self.column("settled")

    def _settled(self) -> Coded[Settled]:
        there = [name for name in (*FORK_FIELDS, "frequency_stability_ppm") if name in self._index]
        stands_for = [self._index[name] > 0 for name in there]
        loads = np.zeros(len(self), dtype=int)
        if self._loads:
            values = sorted({load for load, _ in self._loads.values()})
            own = [self._loads.get(row) for row in self._rows.tolist()]
            loads = np.array([0 if one is None else 1 + values.index(one[0]) for one in own], dtype=int)
        hangs_on = [self._index[name] for name in ("frequency_mhz", "load_capacitance_pf") if name in self._index]
        first, codes = distinct(self._identity, loads, *hangs_on, *(flags.astype(int) for flags in stands_for))
        return Coded([self._settle(at) for at in first.tolist()], codes)

    def _settle(self, at: int) -> Settled:
        facts = self._facts(at, *self._index)
        match = self._matches[self._index["frequency_mhz"][at]]
        load = self._loads.get(int(self._rows[at]))
        return settle(facts, match, self._bench, None if load is None else load[0])

    def _facts(self, at: int, *fields: str) -> Facts:
        """What the row says of some fields, its places left out."""
        who = self._identities[self._identity[at]]
        stated = self._parts.stated
        said = {name: stated[name].templates[self._index[name][at]] for name in fields if name in self._index}
        return Facts(who.package, who.mode, who.cut, who.resonance, said)

    def _field(self, field: str, of: Callable[[Facts, Any], Any], *, always: bool = False) -> Coded[Any]:
        """What a function takes of one field, for each distinct cell, and each case where the cell's conditions ask.

        `always`: the function asks for the case itself.
        """
        settled = self.settled
        codes = self._index.get(field, np.zeros(len(self), dtype=int))
        case = settled.codes if always or self._has_conditions(field) else np.zeros(len(self), dtype=int)
        first, which = distinct(codes, case)
        values = [of(self._facts(at, field), settled[at].case) for at in first.tolist()]
        return Coded(values, which)

    def _has_conditions(self, field: str) -> bool:
        if field not in self._conditions:
            templates = self._parts.stated[field].templates if field in self._index else ()
            self._conditions[field] = any(_asks(r.when) for readings in templates for r in readings)
        return self._conditions[field]

    def _stability(self) -> Coded[Any]:
        """(stability, its band of temperature, the same at its loosest option)."""
        field, settled, operating = "frequency_stability_ppm", self.settled, self.column("operating_range")
        codes = self._index.get(field, np.zeros(len(self), dtype=int))
        product = self._bench.requirement.temperature_c

        def of(at: int) -> tuple[Taken, Any, Taken | None]:
            one = settled[at]
            taken, band = stability_over_range(self._facts(at, field), one.case, product, operating[at], one.fork)
            tight, loose = tightest(taken, {})
            return tight, band, loose

        hangs_on = [self.column("fork").array(int, int)]
        if self._has_conditions(field):
            hangs_on = [settled.codes, operating.codes]
        first, which = distinct(codes, *hangs_on)
        return Coded([of(at) for at in first.tolist()], which)


def _fundamental_at(facts: Facts, case: Case, temperature_c: float | None) -> Taken:
    return fundamental_esr(facts, case if temperature_c is None else replace(case, temperature_c=temperature_c))


def _range_with_words(
    facts: Facts, case: Case, product: Band | None
) -> tuple[Taken, dict[str, object], list[tuple[str, str]]]:
    chosen: dict[str, object] = {}
    said: list[tuple[str, str]] = []
    return settle_range(facts, case, product, chosen, said), chosen, said


def _asks(when: When) -> bool:
    """Whether the case decides if a reading holds; the years of ageing are no part of it."""
    bands = when.frequency_mhz, when.load_capacitance_pf, when.temperature_c
    return any(band is not None for band in bands) or when.mode is not None or when.package is not None


def _of_settled(of: Callable[[Settled], Any]) -> Callable[[Listed], Coded[Any]]:
    def made(lot: Listed) -> Coded[Any]:
        return Coded([of(one) for one in lot.settled.values], lot.settled.codes)

    return made


def _part_of(name: str, index: int) -> Callable[[Listed], Coded[Any]]:
    def made(lot: Listed) -> Coded[Any]:
        whole = lot.column(name)
        return Coded([value[index] for value in whole.values], whole.codes)

    return made


def _of_field(field: str, of: Callable[[Listed, Facts, Any], Any]) -> Callable[[Listed], Coded[Any]]:
    return lambda lot: lot._field(field, lambda facts, case: of(lot, facts, case))  # noqa: SLF001


def _cut(lot: Listed) -> Coded[Any]:
    identity = Coded(lot._identities, lot._identity)  # noqa: SLF001
    return together(lambda fork, who: "tuning fork" if fork else who.cut, lot.column("fork"), identity)


def _of_identity(of: Callable[[Identity], Any]) -> Callable[[Listed], Coded[Any]]:
    return lambda lot: Coded([of(who) for who in lot._identities], lot._identity)  # noqa: SLF001


def _grade(lot: Listed) -> Coded[Any]:
    grade = lot._parts.grade  # noqa: SLF001
    return Coded(grade.distinct, np.asarray(grade.index)[lot._rows])  # noqa: SLF001


PLAIN = ("tolerance", "stability", "ageing", "turnover", "parabolic", "drive")
"""Columns of what is taken that an offer has under the same name."""
OPTIONS = {"tolerance": "frequency_tolerance_ppm", "stability": "frequency_stability_ppm"}
FIELDS_AT = {
    "esr": "esr_ohm",
    "fundamental_esr": "esr_ohm",
    "shunt": "shunt_capacitance_pf",
    **{key: name for name, key in C1_FROM.items()},
}
MAKERS: dict[str, Callable[[Listed], Coded[Any]]] = {
    "file": lambda lot: Coded([lot._sheet.file], np.zeros(len(lot), dtype=int)),  # noqa: SLF001
    "part_number": lambda lot: Coded(lot._parts.part_numbers, lot._rows),  # noqa: SLF001
    "maker": _of_identity(lambda who: who.maker),
    "mode": _of_settled(lambda one: one.mode),
    "attributes": _grade,
    "settled": Listed._settled,  # noqa: SLF001
    "load": _of_settled(lambda one: one.load),
    "load_choice": _of_settled(lambda one: (one.load_options, one.load_range)),
    "overtone": _of_settled(lambda one: overtone_of(one.mode)),
    "fork": _of_settled(lambda one: one.fork),
    "package": _of_settled(lambda one: one.case.package),
    "cut": _cut,
    "tightest tolerance": _of_field(
        "frequency_tolerance_ppm", lambda _, facts, case: tightest(take(facts, "frequency_tolerance_ppm", case), {})
    ),
    "tolerance": _part_of("tightest tolerance", 0),
    "loosest_tolerance": _part_of("tightest tolerance", 1),
    "stability with band": Listed._stability,  # noqa: SLF001
    "stability": _part_of("stability with band", 0),
    "stability_band": _part_of("stability with band", 1),
    "loosest_stability": _part_of("stability with band", 2),
    "ageing with years": _of_field(
        "ageing_ppm",
        lambda lot, facts, case: ageing_for(facts, case, lot._bench.requirement.years),  # noqa: SLF001
    ),
    "ageing": _part_of("ageing with years", 0),
    "ageing_years": _part_of("ageing with years", 1),
    "operating range with words": _of_field(
        "operating_temperature_c",
        lambda lot, facts, case: _range_with_words(facts, case, lot._bench.requirement.temperature_c),  # noqa: SLF001
    ),
    "operating_range": _part_of("operating range with words", 0),
    "turnover": _of_field(FORK_FIELDS[0], lambda _, facts, case: take(facts, FORK_FIELDS[0], case)),
    "parabolic": _of_field(FORK_FIELDS[1], lambda _, facts, case: take(facts, FORK_FIELDS[1], case)),
    "drive": _of_field("drive_level_uw", lambda _, facts, case: rated_drive(facts, case)),
}
