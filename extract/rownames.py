"""Part numbers of a long list, all at once: which cells name a part, and which of them say what the part is.

Of ten thousand part numbers hardly one holds a word, so a look at all of them together spares a look at each.
"""

from __future__ import annotations

import re
from collections.abc import Iterable, Sequence

from extract import wording
from extract.fold import key
from extract.identity import speaks_of_a_crystal
from extract.lists import part_name
from extract.meaning import identity_words
from extract.vocabulary import vocabulary

_NO_LETTER = re.compile(r"[\W_]+")


def part_names(texts: Sequence[str]) -> list[str | None]:
    """The part number in each cell; None for a cell that states none."""
    nothing = {_bare(phrase) for phrase in vocabulary().phrases.get("not_stated", ())}
    return [None if _says_nothing(text, nothing) else part_name(text) for text in texts]


def _says_nothing(text: str, nothing: set[str]) -> bool:
    if text.isascii() and (bare := _bare(text)) and bare not in nothing:
        return False
    return wording.not_stated(text)


def _bare(text: str) -> str:
    """Letters and digits alone: of an ASCII text folding changes no more than the rest."""
    return text.lower() if text.isalnum() else _NO_LETTER.sub("", text).lower()


def telling(texts: Iterable[str]) -> dict[str, tuple[bool, bool]]:
    """For each text with a word in it: whether it has one of an oscillator's, whether it has one for a crystal."""
    words = {*vocabulary().oscillator, *map(_bare, identity_words()["crystal"]["words"])}
    known = re.compile("|".join(sorted(map(re.escape, words - {""}))))
    plain: list[str] = []
    suspects: list[str] = []
    for text in texts:
        (plain if text.isascii() else suspects).append(text)
    if known.search("\n".join(map(_bare, plain))):
        suspects += [text for text in plain if known.search(_bare(text))]
    found = {text: (bool(wording.oscillator_words(text)), speaks_of_a_crystal([text])) for text in suspects}
    return {text: told for text, told in found.items() if any(told)}


def words_in(texts: Sequence[str]) -> frozenset[str]:
    """Words that only an oscillator's, resonator's or filter's sheet prints."""
    return frozenset(key(word) for text in texts for word in wording.oscillator_words(text))
