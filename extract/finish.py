"""Drafts -> parts: what is stated for all goes to each, and one draft becomes one validated part."""

from __future__ import annotations

from collections.abc import Sequence
from collections.abc import Set as AbstractSet
from dataclasses import replace
from typing import Literal

from extract.attributes import attributes_of
from extract.candidates import Candidate
from extract.conditions import holds
from extract.drafts import Draft
from extract.model import Part, Reading, lean
from extract.partlist import Identity
from extract.readings import readings_of

CRYSTAL_FIELDS = frozenset(
    {
        "frequency_mhz",
        "load_capacitance_pf",
        "esr_ohm",
        "shunt_capacitance_pf",
        "motional_capacitance_ff",
        "motional_inductance_mh",
        "quality_factor",
        "drive_level_uw",
        "turnover_temperature_c",
        "parabolic_coefficient_ppm_per_c2",
    }
)


def inherit(draft: Draft, general: Draft) -> None:
    """Take over what is stated for all parts, where the part has nothing of its own."""
    own = {candidate.field for candidate in draft.candidates if candidate.source not in ("loose", "prose")}
    draft.candidates += [each for each in general.candidates if each.field not in own and _holds_for(draft, each)]
    draft.modes = draft.modes or set(general.modes)
    draft.offered_modes = draft.offered_modes or general.offered_modes
    draft.cuts = draft.cuts or set(general.cuts)
    if "load_capacitance_pf" not in own:
        draft.resonance |= general.resonance
    draft.lines = draft.lines or general.lines
    draft.maker = draft.maker or general.maker
    draft.package = draft.package or general.package
    for name, text in general.attributes.items():
        draft.attributes.setdefault(name, text)


def _holds_for(draft: Draft, candidate: Candidate) -> bool:
    """Whether a banded value speaks of a part whose own frequency, load or temperature range is known."""
    frequency = [each.typ for each in draft.candidates if each.field == "frequency_mhz"]
    if len(frequency) == 1 and frequency[0] is not None and not _holds_at(candidate, frequency[0]):
        return False
    if len(draft.modes) == 1 and candidate.when.mode is not None and candidate.when.mode not in draft.modes:
        return False
    spans = [(each.min, each.max) for each in draft.candidates if each.field == "operating_temperature_c"]
    span = candidate.when.temperature_c
    return candidate.field != "frequency_stability_ppm" or span is None or len(spans) != 1 or spans[0] == span


def _holds_at(candidate: Candidate, frequency_mhz: float) -> bool:
    """Whether a banded value holds at a frequency; an upper end printed as "<" is the next band's."""
    band = candidate.when.frequency_mhz
    ends_before = candidate.open_above and band is not None and band[0] < band[1] == frequency_mhz
    return holds(candidate.when, frequency_mhz) and not ends_before


def lacks_crystal(stated: AbstractSet[str]) -> bool:
    """Whether the fields that are stated make no crystal."""
    return len(stated & CRYSTAL_FIELDS) == 0 or (len(stated) < 2 and "frequency_mhz" not in stated)


def part_of(draft: Draft, maker: str | None) -> Part:
    """The part of a finished draft; `maker` is the one that the sheet names."""
    mode, cut = mode_of(draft), cut_of(draft)
    readings = readings_of(in_one_mode(draft.candidates, mode), cut=cut, mode=mode)
    readings = _in_each_mode(readings, draft)
    loads = any(reading.field == "load_capacitance_pf" for reading in readings)
    return Part(
        part_number=draft.part_number,
        **identity_of(draft, maker, loads=loads)._asdict(),
        attributes=attributes_of(draft.attributes, draft.lines),
        readings=readings,
    )


def identity_of(draft: Draft, maker: str | None, *, loads: bool) -> Identity:
    """What the part is; `loads` says whether it states a load."""
    mode, cut = mode_of(draft), cut_of(draft)
    if mode is None and cut == "tuning fork" and not draft.modes:
        mode = "fundamental"
    series = "series" in draft.resonance or ("called series" in draft.resonance and not loads)
    resonance: Literal["load", "series"] | None = None if loads == series else ("load" if loads else "series")
    return Identity(draft.maker or maker, draft.package, mode, cut, resonance)


def mode_of(draft: Draft) -> str | None:
    """The one mode that is stated."""
    return next(iter(draft.modes)) if len(draft.modes) == 1 else None


def cut_of(draft: Draft) -> str | None:
    """The one cut that is stated."""
    return next(iter(draft.cuts)) if len(draft.cuts) == 1 else None


def in_one_mode(candidates: Sequence[Candidate], mode: str | None) -> list[Candidate]:
    """The candidates; a part's only mode is no condition."""
    return [
        replace(each, when=each.when.model_copy(update={"mode": None}))
        if mode is not None and each.when.mode == mode
        else each
        for each in candidates
    ]


def _in_each_mode(readings: tuple[Reading, ...], draft: Draft) -> tuple[Reading, ...]:
    """A frequency offered in several modes under one label is one reading for each, unless values tell them already."""
    if len(draft.offered_modes) < 2 or draft.modes != draft.offered_modes or any(each.when.mode for each in readings):
        return readings
    told: list[Reading] = []
    for each in readings:
        if each.field == "frequency_mhz":
            for mode in sorted(draft.offered_modes):
                when = each.when.model_copy(update={"mode": mode})
                told.append(lean(each.model_copy(update={"when": when})))
        else:
            told.append(each)
    return tuple(told)
