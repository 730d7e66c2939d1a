"""Sheets as the JSON document of `extract`, written part by part, so that a long list fits into a small machine."""

from __future__ import annotations

import json
from collections.abc import Sequence
from typing import Any, TextIO

from extract.documents.grid import garbage_left
from extract.model import SCHEMA, Note, SpecSheet, written

# A sheet of more parts is for programs rather than for eyes: a line for each part.
MOST_INDENTED = 100


def write_sheets(sheets: Sequence[SpecSheet], notes: Sequence[Note], stream: TextIO) -> None:
    """Write the whole document; a sheet of many parts takes one line for each of them."""
    with garbage_left():
        stream.write(f'{{"schema": {json.dumps(SCHEMA)},\n"sheets": [')
        for index, sheet in enumerate(sheets):
            stream.write("\n" if index == 0 else ",\n")
            _write_sheet(sheet, stream)
        stream.write(f'],\n"notes": {_text(list(notes))}}}\n')


def _write_sheet(sheet: SpecSheet, stream: TextIO) -> None:
    if len(sheet.parts) <= MOST_INDENTED:
        stream.write(_text(sheet, indent=1))
        return
    head = {key: value for key, value in written(sheet).items() if key != "parts"}
    stream.write(_text(head)[:-1] + ', "parts": [')
    for index, part in enumerate(sheet.parts):
        stream.write("\n" if index == 0 else ",\n")
        stream.write(_text(part))
    stream.write("]}")


def _text(value: Any, indent: int | None = None) -> str:
    return json.dumps(value, ensure_ascii=False, allow_nan=False, indent=indent, default=written)
