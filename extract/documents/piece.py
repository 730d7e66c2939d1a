"""A cell in the making."""

from __future__ import annotations

from dataclasses import dataclass

from extract.documents.ruled import GridCell
from extract.documents.words import Word, in_lines


@dataclass(frozen=True, slots=True)
class Piece:
    """A cell in the making with its words."""

    cell: GridCell
    words: tuple[Word, ...]

    @property
    def lines(self) -> list[list[Word]]:
        words = self.words
        if len(words) < 2:
            return [[words[0]]] if words and not words[0].angle else []
        return in_lines([word for word in words if not word.angle])
