"""Whether two parts sit on the same pads: package by its size or name, and which pads carry the crystal."""

from __future__ import annotations

import re
from dataclasses import dataclass
from functools import lru_cache
from typing import Any

from compare.relations import Relation
from extract.model import Pads, Part

# Sizes are printed to a tenth; two makers round the same ceramic base differently by half of that.
SAME_SIZE_MM = 0.06
SIZE = re.compile(r"(\d+(?:[.,]\d+)?)\s*(?:mm)?\s*[x×*X]\s*(\d+(?:[.,]\d+)?)")
CODE = re.compile(r"(?<!\d)(\d)(\d)(\d)(\d)(?!\d)")


@dataclass(frozen=True)
class Fit:
    """How the candidate sits where the incumbent sits."""

    relation: Relation
    incumbent: Any
    candidate: Any
    message: str


def size_mm(package: str) -> tuple[float, float] | None:
    """Length and width, the greater first: of `2.5 x 2.0 x 0.5 mm`, or of the trade's four digits (`2520`)."""
    if found := SIZE.search(package):
        sides = [float(side.replace(",", ".")) for side in found.groups()]
    elif found := CODE.search(package):
        a, b, c, d = found.groups()
        sides = [float(f"{a}.{b}"), float(f"{c}.{d}")]
    else:
        return None
    return max(sides), min(sides)


@lru_cache(maxsize=4096)
def same_package(one: str, other: str) -> bool:
    """By size where both give one, else by name without its punctuation (`HC-49/US` is `HC49US`)."""
    size, other_size = size_mm(one), size_mm(other)
    if size is not None and other_size is not None:
        return all(abs(a - b) <= SAME_SIZE_MM for a, b in zip(size, other_size, strict=True))
    return plain(one) == plain(other)


def plain(text: str) -> str:
    return "".join(character for character in text.casefold() if character.isalnum())


def package_fit(incumbent: Part, candidate: Part) -> Fit:
    old, new = incumbent.package, candidate.package
    if old is None or new is None:
        silent = "the incumbent's" if old is None else "the candidate's"
        message = "neither sheet states the package" if old == new else f"{silent} sheet states no package"
        return Fit("unknown", old, new, f"{message}: check the drawing against the board")
    if same_package(old, new):
        return Fit("same", old, new, f"{new} as before")
    return Fit("different", old, new, f"{new} in place of {old}: it does not sit on the board's pads")


def sits_elsewhere(incumbent: Part, candidate: Part) -> bool:
    """True where both packages are known and are not the same."""
    old, new = incumbent.package, candidate.package
    return old is not None and new is not None and not same_package(old, new)


def sound_pads(part: Part) -> Pads | None:
    """The pads that the sheet gives; a crystal has two ends, so that any other number of crystal pads was misread."""
    pads = part.attributes.pads
    return None if pads is None or (pads.crystal is not None and len(set(pads.crystal)) != 2) else pads


def pads_fit(incumbent: Part, candidate: Part) -> Fit:
    old, new = sound_pads(incumbent), sound_pads(candidate)
    words = _words(old), _words(new)
    if old is not None and new is not None:
        for name in ("crystal", "count"):
            own, other = getattr(old, name), getattr(new, name)
            if own is not None and other is not None and _as_set(own) != _as_set(other):
                message = f"{words[1]} in place of {words[0]}: it does not sit on the board's pads"
                return Fit("different", *words, message)
    if old is None or new is None or old.crystal is None or new.crystal is None:
        return Fit("unknown", *words, _not_stated(old, new))
    return Fit("same", *words, f"{words[1]} as before")


def _as_set(value: int | tuple[int, ...]) -> frozenset[int]:
    return frozenset({value} if isinstance(value, int) else value)


def _not_stated(old: Pads | None, new: Pads | None) -> str:
    there, here = old is not None and old.crystal is not None, new is not None and new.crystal is not None
    who = "the candidate's sheet does not say" if there else "the incumbent's sheet does not say"
    if not there and not here:
        who = "neither sheet says"
    return f"{who} which pads carry the crystal: check the drawing against the board"


def _words(pads: Pads | None) -> str | None:
    if pads is None:
        return None
    said = [f"{pads.count} pads"] if pads.count is not None else []
    if pads.crystal is not None:
        said.append(f"crystal on {' and '.join(map(str, sorted(pads.crystal)))}")
    return ", ".join(said) or None
