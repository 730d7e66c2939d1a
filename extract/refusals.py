"""What a sheet, a section or a row is about where it is no crystal: an oscillator, a filter, a chip's requirements."""

from __future__ import annotations

from collections.abc import Iterable
from functools import lru_cache

from extract import wording
from extract.fold import key
from extract.vocabulary import vocabulary


@lru_cache(maxsize=16384)
def _words(text: str) -> tuple[str, ...]:
    return tuple(wording.oscillator_words(text))


# Sentences about a crystal speak of its oscillator; in a short text the word names the part.
ALONE = 40
_GENERIC = ("oscillat", "oszillat", "oscilador")
REQUIREMENT = "a list of what a chip asks of a crystal"
# A heading is short; longer is a sentence.
HEADING = 80


def asks_of_a_crystal(headings: Iterable[str]) -> bool:
    """Whether a heading announces what a chip asks of a crystal."""
    short = (text for text in headings if text and len(text) < HEADING)
    return any(vocabulary().oscillator.get(key(word)) == "requirement" for text in short for word in _words(text))


def refusal(texts: Iterable[str], *, least: int = 2) -> str | None:
    """Why the texts are not about a crystal; None where they may be.

    `least` is how many different words of an oscillator's sheet it takes: one beside a list's row, two in a sheet.
    """
    found = {
        key(word)
        for text in texts
        for word in _words(text)
        if len(text) <= ALONE or " " in word.strip() or not key(word).startswith(_GENERIC)
    }
    kinds = [vocabulary().oscillator.get(word, "words") for word in found]
    if "requirement" in kinds:
        return REQUIREMENT
    if kinds.count("words") >= least:
        return "an oscillator"
    return "another kind of resonator or a filter" if "resonator" in kinds else None
