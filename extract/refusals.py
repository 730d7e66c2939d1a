"""What a sheet, a section or a row is about where it is no crystal: an oscillator, a resonator, a chip's requirements."""

from __future__ import annotations

from collections.abc import Iterable
from functools import lru_cache

from extract import wording
from extract.fold import key
from extract.vocabulary import vocabulary


@lru_cache(maxsize=16384)
def _words(text: str) -> tuple[str, ...]:
    return tuple(wording.oscillator_words(text))


def refusal(texts: Iterable[str]) -> str | None:
    """Why the texts are not about a crystal; None where they may be."""
    words = {key(word) for text in texts for word in _words(text)}
    kinds: dict[str, int] = {}
    for word in words:
        kind = vocabulary().oscillator.get(word, "words")
        kinds[kind] = kinds.get(kind, 0) + 1
    return _REASONS(kinds)


def _REASONS(kinds: dict[str, int]) -> str | None:  # noqa: N802
    if kinds.get("words", 0) >= 2:
        return "an oscillator"
    if kinds.get("resonator", 0):
        return "another kind of resonator or a filter"
    if kinds.get("requirement", 0):
        return "a list of what a chip asks of a crystal"
    return None
