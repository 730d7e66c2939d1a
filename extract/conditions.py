"""Conditions as printed -> `When`, and what of them limits a reading of a field."""

from __future__ import annotations

from functools import lru_cache

from extract import wording
from extract.band import read_band, read_when
from extract.fold import fold
from extract.model import Pair, When
from extract.number import PLAIN_NUMBER

OF_ONE_FREQUENCY = (
    "esr_ohm",
    "motional_capacitance_ff",
    "motional_inductance_mh",
    "quality_factor",
    "capacitance_ratio",
)
TEMPERATURES = ("operating_temperature_c", "storage_temperature_c", "turnover_temperature_c")


@lru_cache(maxsize=16384)
def condition_of(text: str) -> When:
    """Everything that a condition, remark or band text says about where a value holds; empty where it says nothing."""
    folded = fold(text)
    if not folded or wording.not_stated(folded):
        return When()
    # A number without a unit says nothing of where a value holds; it may be the code of a mode.
    found = When() if PLAIN_NUMBER.fullmatch(folded) else read_when(folded)
    # A lone digit or letter stands for a mode only where one is asked for; "1st year" speaks of ageing.
    asked = found.mode is None and found.years is None and len(folded) > 1
    if asked and (mode := wording.mode_of(folded)) is not None:
        found = found.model_copy(update={"mode": mode})
    return found


@lru_cache(maxsize=16384)
def band_of(text: str, unit: str | None = None) -> Pair | None:
    """The frequency band, in MHz, that a cell of a frequency column holds; a single frequency has equal ends."""
    return read_band(fold(text), unit=unit)


def merged(general: When, narrower: When) -> When:
    """Both conditions together; where both say something of one kind, `narrower` counts."""
    if narrower is general or not any(vars(narrower).values()):
        return general
    said = {key: value for key, value in narrower if value is not None}
    return general.model_copy(update=said)


def kept(when: When, field: str) -> When:
    """What of a printed condition limits a reading of `field`.

    A single frequency, load or drive beside a value is where it was measured; years belong to ageing only. The motional
    values are of the crystal that the frequency names.
    """
    changes: dict[str, object] = {}
    band, load = when.frequency_mhz, when.load_capacitance_pf
    if band is not None and (field == "frequency_mhz" or (band[0] == band[1] and field not in OF_ONE_FREQUENCY)):
        changes["frequency_mhz"] = None
    if load is not None and field != "pulling_sensitivity_ppm_per_pf":
        changes["load_capacitance_pf"] = None
    temperature = when.temperature_c
    if temperature is not None and (
        field in (*TEMPERATURES, "load_capacitance_pf", "drive_level_uw") or temperature[1] - temperature[0] <= 15
    ):
        changes["temperature_c"] = None
    if when.years is not None and field != "ageing_ppm":
        changes["years"] = None
    return when.model_copy(update=changes) if changes else when


def kinds_of(text: str) -> frozenset[str]:
    """Which kinds of condition a text states: what tells one row's band from another row's test temperature."""
    found = condition_of(text)
    return frozenset(key for key, value in found if value is not None and not _single(value))


def _single(value: object) -> bool:
    return isinstance(value, tuple) and len(value) == 2 and value[0] == value[1]


def holds(when: When, frequency_mhz: float) -> bool:
    """Whether a reading with `when` says something at that frequency."""
    band = when.frequency_mhz
    return band is None or band[0] <= frequency_mhz <= band[1]
