"""One row for two properties: "Tolerance @ 25 °C / stability over temperature   ±30 / ±50 ppm"."""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import replace

from extract.conditions import TEMPERATURES
from extract.entries import Entry, Piece, Value
from extract.fold import fold
from extract.meaning import meaning

_BETWEEN = re.compile(r"\s*[/／]\s*")
_UNIT = re.compile(r"[^\d\s.,]+$")


def told_apart(entry: Entry) -> Sequence[Entry]:
    """An entry for each of two labels that a stroke parts, where a stroke parts each value too; else empty."""
    if "/" not in fold(entry.label.text) or not entry.values:
        return ()
    names = _BETWEEN.split(fold(entry.label.text))
    known = [meaning(name).label for name in names]
    fields = {label.field for label in known if label is not None and not label.symbol}
    if len(names) != 2 or len(fields) != 2 or fields & set(TEMPERATURES):
        return ()
    pieces = [_BETWEEN.split(fold(value.piece.text)) for value in entry.values]
    if any(len(each) != 2 or not all(re.search(r"\d", text) for text in each) for each in pieces):
        return ()
    return [
        replace(
            entry,
            label=Piece(name, entry.label.where, entry.label.confidence),
            symbol="",
            values=tuple(_value(value, each, at) for value, each in zip(entry.values, pieces, strict=True)),
        )
        for at, name in enumerate(names)
    ]


def _value(value: Value, pieces: Sequence[str], at: int) -> Value:
    """One half of a value; a unit behind both is that of the first as well."""
    unit = _UNIT.search(pieces[1])
    text = pieces[at] if at or not unit or _UNIT.search(pieces[0]) else f"{pieces[0]} {unit[0]}"
    return replace(value, piece=Piece(text, value.piece.where, value.piece.confidence))
