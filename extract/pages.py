"""Which pages of a catalogue speak of crystals, told from their bare text before anything is measured on them."""

from __future__ import annotations

import re
from functools import cache

from extract.fold import fold, key
from extract.meaning import identity_words
from extract.vocabulary import vocabulary

# Shorter wordings ("load", "drive") stand inside too many other words.
LEAST_LATIN, LEAST_EAST = 8, 3
BEGINNING = 4
_FIELDS = frozenset(
    {
        "load_capacitance_pf",
        "esr_ohm",
        "shunt_capacitance_pf",
        "motional_capacitance_ff",
        "motional_inductance_mh",
        "drive_level_uw",
        "turnover_temperature_c",
        "parabolic_coefficient_ppm_per_c2",
        "frequency_tolerance_ppm",
        "frequency_stability_ppm",
    }
)
_SYMBOLS = re.compile(r"(?<!\w)(?:ESR|C[0OL]|C[_ ][0OL]|R1|Rs|Rr|C1|L1)(?!\w)")
_FREQUENCY = re.compile(r"\d\s?[kM]Hz|[kM]Hz\)", re.IGNORECASE)
# A font without a map to characters gives such text; whether the page speaks of crystals cannot be told from it.
_UNREADABLE = re.compile(r"\(cid:\d+\)|[\ufffd\ue000-\uf8ff]|[\x00-\x08]")
MOST_UNREADABLE = 0.05


class CrystalPages:
    """A test of a page's bare text, for pages in order: a table may run over to the page after one that has it."""

    def __init__(self) -> None:
        self._before = False

    def __call__(self, text: str) -> bool:
        """Whether the page itself, or the one before it, speaks of crystals, or its text cannot be made out."""
        now = speaks_of_crystals(text) or _unreadable(text)
        wanted, self._before = now or (self._before and _has_table(text)), now
        return wanted


def speaks_of_crystals(text: str) -> bool:
    """Whether a word for a crystal or the name of one of its properties stands in the text, in any language."""
    folded = fold(text)
    lower = folded.casefold()
    if any(word in lower for word in identity_words()["crystal"]["words"]):
        return True
    squeezed = key(folded)
    for beginning, wordings in _wordings():
        if beginning in squeezed and any(wording in squeezed for wording in wordings):
            return True
    return (
        "hz" in lower and bool(_FREQUENCY.search(folded)) and len({found[0] for found in _SYMBOLS.finditer(folded)}) > 1
    )


@cache
def _wordings() -> tuple[tuple[str, tuple[str, ...]], ...]:
    """Names of properties, grouped by how they begin: most pages hold few of the beginnings."""
    known = vocabulary()
    names = [
        wording
        for wording, field in known.labels.items()
        if field in _FIELDS
        and wording not in known.weak
        and len(wording) >= (LEAST_LATIN if wording.isascii() else LEAST_EAST)
    ]
    groups: dict[str, list[str]] = {}
    for name in names:
        groups.setdefault(name[:BEGINNING], []).append(name)
    return tuple((beginning, tuple(group)) for beginning, group in groups.items())


def _has_table(text: str) -> bool:
    return sum(character.isdigit() for character in text) > 40


def _unreadable(text: str) -> bool:
    return sum(len(found[0]) for found in _UNREADABLE.finditer(text)) > MOST_UNREADABLE * len(text)
