"""Document -> what its blocks say: entries, listings, ordering keys, texts and footnotes, in reading order."""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import dataclass

from extract import wording
from extract.documents.model import Document, Line, Table
from extract.entries import Item, Piece, Placed, Text
from extract.fold import fold
from extract.footnotes import footnotes_in
from extract.lines import line_items
from extract.model import Note
from extract.prose import is_label, split_pairs
from extract.quoted import quoted_lines
from extract.tables import read_table
from extract.unmerged import unmerged
from extract.wraps import without_wraps

# Characters by which a footnote is known again among the lines of its paragraph.
LEAST_TO_KNOW = 20
# Lines between two tables from which on only those with labels are read: such a text at most holds a spec sheet.
LONG_TEXT = 20_000
# Of a long text the first lines (they name the part) and those behind a label (its values) are read in any case.
FIRST_OF_LONG_TEXT = 200
BEHIND_LABEL = 2
# Characters up to which a line of it may be a label by itself.
LABEL_ALONE = 24
_PAIR_MARK = re.compile("[:=：＝]")


@dataclass(frozen=True, slots=True)
class Blocks:
    """All items of a document. `headers` are lines of page headers and footers; `notes` go from a mark to its line.

    `warnings` say what of the document was not read; `quoted` are the lines that a mail quotes.
    """

    items: Sequence[Item]
    headers: Sequence[Text]
    notes: dict[str, tuple[str, Placed]]
    warnings: Sequence[Note] = ()
    quoted: frozenset[int] = frozenset()


def read_blocks(document: Document) -> Blocks:
    """Take a document apart; a run of lines between two tables is read as a whole."""
    items: list[Item] = []
    run: list[Line] = []
    warnings: list[Note] = []
    for block in document.blocks:
        if isinstance(block, Table):
            items += line_items(_worth_reading(run, warnings))
            run = []
            items += read_table(without_wraps(unmerged(block)))
        else:
            run.append(block)
    items += line_items(_worth_reading(run, warnings))
    headers = [Text(Piece(line.text, line.where), segments=line.segments) for line in document.page_headers]
    return Blocks(items, headers, _footnotes(items), warnings, quoted_lines(document))


def _worth_reading(lines: Sequence[Line], warnings: list[Note]) -> Sequence[Line]:
    """All lines of a run; of a very long one those with labels, and a warning that says how many were left out."""
    if len(lines) <= LONG_TEXT:
        return lines
    kept: list[Line] = []
    until = FIRST_OF_LONG_TEXT
    for index, line in enumerate(lines):
        if _holds_label(line.text):
            until = max(until, index + 1 + BEHIND_LABEL)
        if index < until:
            kept.append(line)
    if left_out := len(lines) - len(kept):
        message = (
            f"{left_out} of {len(lines)} lines of text were left out, because a text of more than {LONG_TEXT} lines is"
            " read only where a label stands; to have all of it read, cut the crystal's pages out into their own file"
        )
        warnings.append(Note(level="warning", message=message, where=lines[0].where))
    return kept


def _holds_label(text: str) -> bool:
    if wording.find_labels(text):
        return True
    return bool(split_pairs(fold(text))[0]) if _PAIR_MARK.search(text) else len(text) <= LABEL_ALONE and is_label(text)


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
