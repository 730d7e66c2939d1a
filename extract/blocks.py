"""Document -> what its blocks say: entries, listings, ordering keys, texts and footnotes, in reading order."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from extract.documents.model import Document, Line, Table
from extract.entries import Item, Piece, Placed, Text
from extract.fold import fold
from extract.footnotes import footnotes_in
from extract.lines import line_items
from extract.tables import read_table

# Characters by which a footnote is known again among the lines of its paragraph.
LEAST_TO_KNOW = 20


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
        if isinstance(item, Text):
            for mark, text in footnotes_in(item.piece.text):
                notes.setdefault(mark, (text, _place(text, item)))
    return notes


def _place(note: str, paragraph: Text) -> Placed:
    """The line of a paragraph on which a footnote begins."""
    begin = note[:LEAST_TO_KNOW]
    return next((line for line in paragraph.segments if begin in fold(line.text)), paragraph.piece)
