"""Document -> what its blocks say: entries, listings, ordering keys, texts and footnotes, in reading order."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from extract.documents.model import Document, Line, Table
from extract.entries import Item, Piece, Placed, Text
from extract.footnotes import footnotes_in
from extract.lines import line_items
from extract.tables import read_table


@dataclass(frozen=True, slots=True)
class Blocks:
    """All items of a document. `headers` are lines of page headers and footers; `notes` go from a mark to its line."""

    items: Sequence[Item]
    headers: Sequence[Text]
    notes: dict[str, tuple[str, Placed]]


def read_blocks(document: Document) -> Blocks:
    """Take a document apart; a run of lines between two tables is read as a whole."""
    items: list[Item] = []
    run: list[Line] = []
    for block in document.blocks:
        if isinstance(block, Table):
            items += line_items(run)
            run = []
            items += read_table(block)
        else:
            run.append(block)
    items += line_items(run)
    headers = [Text(Piece(line.text, line.where), segments=line.segments) for line in document.page_headers]
    return Blocks(items, headers, _footnotes(items))


def _footnotes(items: Sequence[Item]) -> dict[str, tuple[str, Placed]]:
    notes: dict[str, tuple[str, Placed]] = {}
    for item in items:
        for mark, text in footnotes_in(item.piece.text) if isinstance(item, Text) else ():
            notes.setdefault(mark, (text, item.piece))
    return notes
