"""What a report is made of: headings, texts, tables and pictures in order, without a word on how they are set."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Literal

from compare.picture import Picture

Kind = Literal["plain", "strong", "small", "formula", "code", "note"]


@dataclass(frozen=True)
class Heading:
    """`level` 1 is a section and begins with its number; 2 stands inside one."""

    text: str
    level: int = 1


@dataclass(frozen=True)
class Text:
    text: str
    kind: Kind = "plain"


@dataclass(frozen=True)
class Items:
    lines: tuple[str, ...]


@dataclass(frozen=True)
class Grid:
    """A table. `widths` are shares of the line; columns in `figures` stand right; without `heads` it has no head."""

    heads: tuple[str, ...]
    rows: tuple[tuple[str, ...], ...]
    widths: tuple[float, ...] = ()
    figures: tuple[int, ...] = ()

    def __post_init__(self) -> None:
        lengths = {len(row) for row in self.rows} | ({len(self.heads)} if self.heads else set())
        if len(lengths) > 1:
            raise ValueError(f"rows and head of a table differ in length: {sorted(lengths)}")


@dataclass(frozen=True)
class Drawn:
    """A picture with what stands under it."""

    picture: Picture
    caption: str = ""


@dataclass(frozen=True)
class Side:
    """Pictures side by side, two to a line."""

    drawings: tuple[Drawn, ...]


@dataclass(frozen=True)
class Together:
    """Blocks that no page may part."""

    blocks: tuple[Block, ...]


@dataclass(frozen=True)
class NewPage:
    """What follows begins on a page of its own."""


Block = Heading | Text | Items | Grid | Drawn | Side | Together | NewPage


@dataclass(frozen=True)
class Report:
    """A whole report: its title, the line at the foot of each page, and its blocks."""

    title: str
    foot: str
    blocks: tuple[Block, ...]


def grid(
    heads: Sequence[str],
    rows: Sequence[Sequence[str]],
    widths: Sequence[float] = (),
    figures: Sequence[int] = (),
) -> Grid:
    """A table from any sequences."""
    return Grid(tuple(heads), tuple(map(tuple, rows)), tuple(widths), tuple(figures))
