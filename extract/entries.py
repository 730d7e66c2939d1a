"""What the blocks of a sheet say before anything is chosen: labels with values, listings, texts, ordering keys.

Nothing here knows a field; these are the shapes in which labels and values stand together on a sheet.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field
from typing import Literal, Protocol

from extract.model import Where

Bound = Literal["min", "typ", "max"]
Source = Literal["table", "pair", "prose", "loose"]


class Placed(Protocol):
    """A printed text with its place: a table's cell, a line's segment, a piece of either."""

    @property
    def text(self) -> str: ...
    @property
    def where(self) -> Where: ...
    @property
    def confidence(self) -> float: ...


@dataclass(frozen=True, slots=True)
class Piece:
    """A part of a printed text, with the place of the whole."""

    text: str
    where: Where
    confidence: float = 1.0


HEADING_UNREAD = "the heading over this column could not be read; its place among the others says min, typ or max"
EMPTY_CELLS_LOST = "empty cells of the table are lost; the number may have stood under another of its headings"


@dataclass(frozen=True, slots=True)
class Value:
    """A printed value and what its column says of it.

    `nominal`: one value merged over Min, Typ and Max. `governed`: the sheet's only value column, with one bound word
    over all rows. `guessed` says why the bound is one that its place among others makes likely. `subject`: the
    model, package or load in the column's head.
    """

    piece: Placed
    bound: Bound | None = None
    nominal: bool = False
    governed: bool = False
    guessed: str = ""
    subject: str = ""


@dataclass(frozen=True, slots=True)
class Entry:
    """One label and what stands beside it.

    `conditions` are texts of condition, remark and band cells. `source` ranks the place: a table or a labelled pair
    before a phrase of prose before a number without a label.
    """

    label: Placed
    values: tuple[Value, ...]
    unit: str = ""
    symbol: str = ""
    conditions: tuple[str, ...] = ()
    section: str = ""
    source: Source = "table"

    @property
    def where(self) -> Where:
        """The place of the first value, else of the label."""
        return self.values[0].piece.where if self.values else self.label.where


@dataclass(frozen=True, slots=True)
class Column:
    """One column of a listing: the texts of its heading from top to bottom."""

    levels: tuple[str, ...]

    @property
    def text(self) -> str:
        """The whole heading on one line."""
        return " ".join(self.levels)


@dataclass(frozen=True, slots=True)
class Listing:
    """A table whose columns are properties: one part, package, load or frequency band a row.

    `sections` holds for each row the text of the spanning row above it.
    """

    columns: tuple[Column, ...]
    rows: Sequence[Sequence[Placed | None]]
    sections: Sequence[str]
    where: Where
    title: str = ""


@dataclass(frozen=True, slots=True)
class Text:
    """A line of prose, a heading, a title or a footnote."""

    piece: Placed
    heading: bool = False
    segments: tuple[Placed, ...] = field(default=())


@dataclass(frozen=True, slots=True)
class Key:
    """An ordering key: what it is a choice of, and the codes with their meanings."""

    label: Placed
    choices: tuple[tuple[str, Placed], ...]


Item = Entry | Listing | Text | Key
