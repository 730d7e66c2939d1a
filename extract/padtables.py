"""Tables that say what each pad is for ("Pin 1 | Crystal", "Pin 2 | GND") -> lines that name the pads of each use."""

from __future__ import annotations

import re
from collections.abc import Sequence
from functools import cache

from extract.documents.model import Cell
from extract.entries import Piece, Text
from extract.fold import fold
from extract.meaning import identity_words

Row = Sequence[Cell | None]
_PADS = re.compile(r"#?\d(?:\s?[,/&、]\s?#?\d)*")
# A crystal has two ends.
LEAST = 2
# Letters of a use; what is longer is a sentence and no pad's name.
LONGEST_USE = 40


def read_pad_table(rows: Sequence[Row]) -> list[Text]:
    """A line for each use of a table of pads, upright or lying; empty for any other table."""
    lying = [list(column) for column in zip(*rows, strict=True)]
    return _upright(rows) or _upright(lying)


def _upright(rows: Sequence[Row]) -> list[Text]:
    uses: dict[str, list[str]] = {}
    first: Cell | None = None
    headed = not _pads(rows[0])
    named = headed and any(_names_pads(cell.text) for cell in _cells(rows[0]))
    for row in rows[headed:]:
        pads, cells = _pads(row), _cells(row)
        if not pads or len(cells) < 2 or len(cells[1].text) > LONGEST_USE or (len(cells) > 2 and not named):
            return []
        use = next((use for use in ("crystal", "ground") if _is_for(use, cells[1].text)), "")
        if use:
            uses.setdefault(use, []).extend(pads)
            first = first or cells[0]
    if first is None or len(uses.get("crystal", ())) < LEAST:
        return []
    words = identity_words()["pads"]
    return [
        Text(Piece(f"{words['names'][0]} {', '.join(pads)}: {words[use][0]}", first.where))
        for use, pads in uses.items()
    ]


def _cells(row: Row) -> list[Cell]:
    return list({id(cell): cell for cell in row if cell is not None and cell.text.strip()}.values())


def _pads(row: Row) -> list[str]:
    """The numbers of pads that a row begins with."""
    cells = _cells(row)
    text = fold(cells[0].text) if cells else ""
    return re.findall(r"\d", text) if _PADS.fullmatch(text) else []


@cache
def _names_pads(text: str) -> bool:
    words = {word.strip("#.").casefold() for word in re.split(r"[\s/]+", fold(text))}
    return any(
        name.casefold() in words or (not name.isascii() and name in text) for name in identity_words()["pads"]["names"]
    )


@cache
def _is_for(use: str, text: str) -> bool:
    folded = fold(text).casefold()
    return any(re.search(rf"(?<![a-z]){re.escape(word.casefold())}", folded) for word in identity_words()["pads"][use])
