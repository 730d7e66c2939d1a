"""Runs of words that a table of wordings knows: the longest from each start, whatever stands between the words."""

from __future__ import annotations

import re
from bisect import bisect_left
from dataclasses import dataclass
from functools import lru_cache
from typing import Generic, TypeVar

from extract.fold import key

Meaning = TypeVar("Meaning")

_IDEOGRAPH = r"\u3040-\u30ff\u3400-\u9fff\uac00-\ud7af々〇"
IDEOGRAPHS = re.compile(f"[{_IDEOGRAPH}]+")
_WORDS = re.compile(rf"[{_IDEOGRAPH}]|[^\W_{_IDEOGRAPH}]+(?:'(?:s|tal)(?![a-zA-Z]))?|/")


@dataclass(frozen=True, slots=True)
class Word:
    """A word, a single ideograph or a slash, at `start:end` of its text."""

    start: int
    end: int
    key: str


@dataclass(frozen=True, slots=True)
class Run(Generic[Meaning]):
    """Known words at `start:end`, the `first` to `last` of the text."""

    start: int
    end: int
    first: int
    last: int
    key: str
    meaning: Meaning


@lru_cache(maxsize=4096)
def words_of(text: str) -> tuple[Word, ...]:
    """The words of a folded text; each ideograph is one, since nothing parts them."""
    return tuple(Word(found.start(), found.end(), key(found[0])) for found in _WORDS.finditer(text))


class Table(dict[str, Meaning]):
    """Meanings by key, able to find the longest run of words that is one of its keys."""

    def __init__(self, *args: object) -> None:
        super().__init__(*args)
        self._sorted: list[str] | None = None

    def run_at(self, words: tuple[Word, ...], first: int) -> Run[Meaning] | None:
        """The longest known run that begins with the word `first`."""
        if self._sorted is None:
            self._sorted = sorted(self)
        joined, best = "", None
        for last in range(first, len(words)):
            joined += words[last].key
            place = bisect_left(self._sorted, joined)
            if place == len(self._sorted) or not self._sorted[place].startswith(joined):
                break
            if self._sorted[place] == joined:
                best = Run(words[first].start, words[last].end, first, last, joined, self[joined])
        return best

    def runs(self, text: str) -> list[Run[Meaning]]:
        """Every known run from left to right, none inside another."""
        words, found, first = words_of(text), [], 0
        while first < len(words):
            run = self.run_at(words, first)
            if run is None:
                first += 1
            else:
                found.append(run)
                first = run.last + 1
        return found
