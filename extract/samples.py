"""What was measured on samples: rows and columns of an inspection report that state no limit and promise nothing."""

from __future__ import annotations

import re
from collections.abc import Sequence
from functools import lru_cache

from extract.documents.model import Cell
from extract.fold import fold, key
from extract.heads import Head
from extract.meaning import is_part_token
from extract.vocabulary import vocabulary

_COUNTED = re.compile(r"(?i)(?:#|no\.?|n°|nr\.?|s/n|[a-z])?\s?(\d{1,3})")
_BRACKET = re.compile(r"[(\[][^()\[\]]*[)\]]")
_NUMBER_BEHIND = re.compile(r"[\s#.:°-]*(?:no|nr|n)?[\s#.:°-]*\d{1,3}$", re.IGNORECASE)


@lru_cache(maxsize=8)
def _words(kind: str) -> frozenset[str]:
    return frozenset(key(word) for word in vocabulary().phrases.get(kind, ()))


@lru_cache(maxsize=8192)
def _says(text: str, kind: str) -> bool:
    """Whether a head is one of the words for samples ("sample") or for what was measured ("measured")."""
    words = _words(kind)
    plain = _BRACKET.sub(" ", fold(text))
    return key(plain) in words or key(_NUMBER_BEHIND.sub("", plain)) in words


def _is_in(word: str, text: str) -> bool:
    """Whether a word stands in a text; a Latin one as a whole word ("ist" is not in "characteristics")."""
    return bool(re.search(rf"(?<!\w){re.escape(word)}(?!\w)", text)) if word.isascii() else word in text


def heads_samples(text: str) -> bool:
    """Whether a cell is the head of a column of measured values ("Sample 1", "Measured")."""
    return _says(text, "sample") or _says(text, "measured")


def of_samples(heads: Sequence[Head], body: Sequence[Sequence[Cell | None]], title: str) -> bool:
    """Whether a table lists samples, one a row: its first head says so, or its title does and its rows are counted."""
    if not heads or any(head.identity == "part_number" for head in heads):
        return False
    if any(_says(level, "sample") for level in heads[0].levels):
        return True
    words = [word for kind in ("sample", "measured") for word in vocabulary().phrases.get(kind, ())]
    told = any(_is_in(word.casefold(), fold(title).casefold()) for word in words)
    first = [row[0].text for row in body if row and row[0] is not None]
    counted = [int(found[1]) for text in first if (found := _COUNTED.fullmatch(fold(text)))]
    return told and len(counted) >= 2 and counted == list(range(counted[0], counted[0] + len(counted)))


def with_measured(heads: list[Head]) -> list[Head]:
    """The heads, those over measured values with the role "measured": they say so, or count samples behind the limits.

    Behind counted samples stand their average, least and greatest, which are measured, too. What a buyer requires, in a
    column beside the parts compared, is no value of theirs either.
    """
    models = sum(head.name is None and any(map(is_part_token, head.extra)) for head in heads)
    limits = any(head.role in ("value", "min", "typ", "max") for head in heads)
    limits = limits or sum(heads_samples(head.levels[-1]) for head in heads if head.levels) > 1
    marked: list[Head] = []
    counted = any(_counts_from(heads, index) for index in range(len(heads)))
    # Where the spread stands beside it, the mean is of a lot, and no typical value of the part.
    spread = any(_says(level, "spread") for head in heads for level in head.levels)
    for index, head in enumerate(heads):
        counts = spread and any(_says(level, kind) for level in head.levels for kind in ("spread", "average"))
        own = counts or any(_says(level, "measured") or _says(level, "sample") for level in head.levels)
        behind = limits and _counts_from(heads, index)
        after = counted and bool(marked) and marked[-1].role == "measured" and head.role not in _BESIDE
        asked = models > 1 and any(_says(level, "required") for level in head.levels)
        measured = (own and limits) or behind or (after and limits) or asked
        marked.append(Head(head.levels, role="measured") if measured else head)
    return marked


_BESIDE = ("unit", "condition", "remarks", "parameter", "symbol")


def _counts_from(heads: Sequence[Head], index: int) -> bool:
    """Whether a head is one of at least two that count 1, 2, 3 ... side by side."""
    numbers = [
        int(found[1]) if len(head.levels) and (found := _COUNTED.fullmatch(fold(head.levels[-1]))) else 0
        for head in heads
    ]
    own = numbers[index]
    beside = numbers[index + 1 : index + 2] + numbers[max(0, index - 1) : index]
    return own > 0 and (own + 1 in beside or own - 1 in beside) and 1 in numbers
