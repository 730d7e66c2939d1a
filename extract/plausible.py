"""What cannot be: values beyond physics or practice, and readings of one part that contradict one another."""

from __future__ import annotations

import math
import tomllib
from collections.abc import Callable, Sequence
from functools import cache
from importlib import resources
from typing import Any

from extract.fields import field_of
from extract.model import Reading

FORK = "tuning fork"


@cache
def limits() -> dict[str, Any]:
    """`plausible.toml`."""
    return tomllib.loads(resources.files("extract").joinpath("plausible.toml").read_text(encoding="utf-8"))


def doubts(readings: Sequence[Reading], cut: str | None, mode: str | None) -> dict[int, str]:
    """Why a person must look: from the index of a reading to one sentence."""
    found: dict[int, str] = {}
    fork = is_fork(readings, cut)
    for index, reading in enumerate(readings):
        if sentence := own_doubt(reading, fork):
            found[index] = sentence
    for _, contradiction in TOGETHER:
        for index, sentence in contradiction(readings, cut, mode, fork):
            found.setdefault(index, sentence)
    return found


def own_doubt(reading: Reading, fork: bool | None) -> str | None:
    """Why a reading cannot be, whatever else its part states."""
    return _order(reading) or _range(reading, fork)


def is_fork(readings: Sequence[Reading], cut: str | None) -> bool | None:
    """Whether the part is a tuning fork: by its cut, else by its frequency; None where neither tells."""
    if cut is not None:
        return cut == FORK
    if any(reading.field in ("turnover_temperature_c", "parabolic_coefficient_ppm_per_c2") for reading in readings):
        return True
    numbers = [number for reading in readings if reading.field == "frequency_mhz" for number in numbers_of(reading)]
    if not numbers:
        return None
    return max(numbers) < float(limits()["fork"]["greatest_mhz"])


def numbers_of(reading: Reading) -> list[float]:
    """Every number that a reading states."""
    stated = [number for number in (reading.min, reading.typ, reading.max) if number is not None]
    return [*stated, *reading.options]


def _order(reading: Reading) -> str | None:
    stated = [number for number in (reading.min, reading.typ, reading.max) if number is not None]
    if stated == sorted(stated):
        return None
    low, high = (
        (reading.min, reading.max) if reading.min is not None and reading.max is not None else (stated[0], stated[-1])
    )
    unit = field_of(reading.field).unit
    return f"the bounds are out of order: {low:g} {unit} below, {high:g} {unit} above"


SIZED = ("frequency_tolerance_ppm", "frequency_stability_ppm", "ageing_ppm")


def _range(reading: Reading, fork: bool | None) -> str | None:
    known = field_of(reading.field)
    stated = numbers_of(reading)
    if reading.field in SIZED and len(stated) == 1 and stated[0] < 0 and reading.min is None:
        return f"one number with a minus sign, {stated[0]:g} ppm, is printed where ± is usual: look at the sign"
    ranged = reading.field in ("operating_temperature_c", "storage_temperature_c")
    if ranged and stated == [reading.typ]:
        return f"one temperature, {stated[0]:g} °C, is read where a range is usual: the other end may stand elsewhere"
    if ranged and reading.min is not None and reading.min > limits()["warmest_low_end_c"]:
        return f"a {known.title} that begins at {reading.min:g} °C: a minus sign may be lost"
    for number in numbers_of(reading):
        if number == 0 and reading.field in ("shunt_capacitance_pf", "drive_level_uw", "operating_temperature_c"):
            continue
        if not known.plausible(number, tuning_fork=fork):
            kind = {True: "a tuning fork", False: "a crystal in the MHz range", None: "a crystal"}[fork]
            meant = _probably(reading, number, fork)
            return f"{number:g} {known.unit} is implausible for the {known.title} of {kind}{meant}"
    return None


def _probably(reading: Reading, number: float, fork: bool | None) -> str:
    """The unit that was probably meant, where a thousand times more or less would be plausible."""
    known = field_of(reading.field)
    for factor, word in ((1e-3, "a thousandth of it"), (1e3, "a thousand times as much")):
        if known.plausible(number * factor, tuning_fork=fork):
            return f"; {word} ({number * factor:g} {known.unit}) is likely meant"
    return ""


def _first(readings: Sequence[Reading], field: str) -> tuple[int, Reading] | None:
    return next(((index, each) for index, each in enumerate(readings) if each.field == field), None)


def central(reading: Reading) -> float | None:
    """One number for a reading: its typical value, the middle of a range, or its only bound."""
    if reading.typ is not None:
        return reading.typ
    if reading.min is not None and reading.max is not None:
        return (reading.min + reading.max) / 2
    return reading.max if reading.max is not None else reading.min


def _storage(
    readings: Sequence[Reading], cut: str | None, mode: str | None, fork: bool | None
) -> list[tuple[int, str]]:
    """A part may be stored wherever it may work; the other way round a sign or a digit was lost."""
    working, stored = _first(readings, "operating_temperature_c"), _first(readings, "storage_temperature_c")
    if working is None or stored is None:
        return []
    index, storage = stored
    low, high = working[1].min, working[1].max
    if storage.min is not None and low is not None and storage.min > low:
        return [
            (index, f"storage from {storage.min:g} °C, but operation from {low:g} °C: a sign or a digit may be lost")
        ]
    if storage.max is not None and high is not None and storage.max < high:
        return [(index, f"storage up to {storage.max:g} °C, but operation up to {high:g} °C")]
    return []


def _overtone(mode: str | None) -> int:
    return int(limits()["overtones"].get(mode or "fundamental", 1))


def _ratio_floor(
    readings: Sequence[Reading], cut: str | None, mode: str | None, fork: bool | None
) -> list[tuple[int, str]]:
    """C1 above what quartz of that cut can give beside C0 (C0/C1 has a floor that grows with the overtone squared)."""
    shunt, motional = _first(readings, "shunt_capacitance_pf"), _first(readings, "motional_capacitance_ff")
    if shunt is None or motional is None or fork or (cut is None and fork is None):
        return []
    floor = limits()["ratio_floor"].get(cut or "AT")
    c0 = shunt[1].max if shunt[1].max is not None else central(shunt[1])
    c1 = motional[1].min if motional[1].min is not None and motional[1].typ is None else central(motional[1])
    if floor is None or not c0 or not c1:
        return []
    ratio = c0 * 1000 / c1
    least = floor * _overtone(mode) ** 2
    if ratio >= least * limits()["ratio_slack"]:
        return []
    return [(motional[0], f"C0/C1 of {ratio:.0f} is below {least:.0f}, the least that quartz of this cut can give")]


def _resonance(
    readings: Sequence[Reading], cut: str | None, mode: str | None, fork: bool | None
) -> list[tuple[int, str]]:
    """L1 against 1 / (ω² C1)."""
    picked = [_first(readings, name) for name in ("frequency_mhz", "motional_capacitance_ff", "motional_inductance_mh")]
    if any(each is None for each in picked):
        return []
    values = [central(each[1]) for each in picked if each is not None]
    if any(value is None or value <= 0 for value in values) or (picked[0] and picked[0][1].typ is None):
        return []
    frequency, c1, l1 = (float(value) for value in values if value is not None)
    expected = 1e3 / ((2 * math.pi * frequency * 1e6) ** 2 * c1 * 1e-15)
    if 1 / limits()["resonance_ratio"] < l1 / expected < limits()["resonance_ratio"]:
        return []
    assert picked[2] is not None  # noqa: S101 - asked above
    return [(picked[2][0], f"L1 of {l1:g} mH does not fit f and C1, which give {expected:.3g} mH")]


def _quality(
    readings: Sequence[Reading], cut: str | None, mode: str | None, fork: bool | None
) -> list[tuple[int, str]]:
    """Q against 1 / (ω R1 C1), from typical values only."""
    names = ("frequency_mhz", "motional_capacitance_ff", "esr_ohm", "quality_factor")
    picked = [_first(readings, name) for name in names]
    if any(each is None or each[1].typ is None for each in picked):
        return []
    frequency, c1, esr, quality = (each[1].typ for each in picked if each is not None)
    if not frequency or not c1 or not esr or not quality:
        return []
    expected = 1 / (2 * math.pi * frequency * 1e6 * esr * c1 * 1e-15)
    if 1 / limits()["quality_ratio"] < quality / expected < limits()["quality_ratio"]:
        return []
    assert picked[3] is not None  # noqa: S101 - asked above
    return [(picked[3][0], f"Q of {quality:g} does not fit f, C1 and ESR, which give {expected:.3g}")]


Contradiction = Callable[[Sequence[Reading], str | None, str | None, bool | None], list[tuple[int, str]]]
# Each contradiction with the fields whose first readings it compares; it asks nothing of a part that lacks one of them.
TOGETHER: tuple[tuple[tuple[str, ...], Contradiction], ...] = (
    (("operating_temperature_c", "storage_temperature_c"), _storage),
    (("shunt_capacitance_pf", "motional_capacitance_ff"), _ratio_floor),
    (("frequency_mhz", "motional_capacitance_ff", "motional_inductance_mh"), _resonance),
    (("frequency_mhz", "motional_capacitance_ff", "esr_ohm", "quality_factor"), _quality),
)
