"""Sheets as the JSON document of `extract`, written part by part, so that a long list fits into a small machine."""

from __future__ import annotations

import json
from collections.abc import Iterable, Iterator, Sequence
from itertools import islice
from typing import Any, TextIO

from extract.documents.grid import Placer, garbage_left
from extract.model import SCHEMA, Note, SpecSheet, written
from extract.partlist import PartList, Template

# A sheet of more parts is for programs rather than for eyes: a line for each part.
MOST_INDENTED = 100
# Stands in a template's text for what the places of a row have in common; no JSON holds it.
_ROW = "\0"
_LINES_AT_ONCE = 500


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
        stream.write(_text(sheet.model_copy(update={"parts": tuple(sheet.parts)}), indent=1))
        return
    head = {key: value for key, value in written(sheet).items() if key != "parts"}
    stream.write(_text(head)[:-1] + ', "parts": [')
    lines = _List(sheet.parts).lines() if isinstance(sheet.parts, PartList) else map(_text, sheet.parts)
    before = "\n"
    while some := list(islice(lines, _LINES_AT_ONCE)):
        stream.write(before + ",\n".join(some))
        before = ",\n"
    stream.write("]}")


def _text(value: Any, indent: int | None = None) -> str:
    return json.dumps(value, ensure_ascii=False, allow_nan=False, indent=indent, default=written)


def notes_of(sheets: Iterable[SpecSheet]) -> list[dict[str, Any]]:
    """What the reader had to say about sheets, but for plain news, as the notes of a result."""
    return [
        {**note.model_dump(mode="json"), "message": f"{sheet.file}: {note.message}"}
        for sheet in sheets
        for note in sheet.notes
        if note.level != "info"
    ]


class _List:
    """The parts of a long list as lines: each template is written once, and into each row its place."""

    def __init__(self, parts: PartList) -> None:
        self._parts = parts
        self._identities = [_text(each._asdict())[1:-1] for each in parts.identity.distinct]
        self._grades = [_text(each) for each in parts.grade.distinct]
        self._fields = [_Field(shared.distinct) for shared in parts.placed.values()]

    def lines(self) -> Iterator[str]:
        parts = self._parts
        columns = zip(*(shared.index for shared in parts.placed.values()), strict=True)
        rows = zip(parts.rows, parts.part_numbers, parts.identity.index, parts.grade.index, columns, strict=True)
        for at, (row, number, identity, grade, templates) in enumerate(rows):
            place = row.placer.json_of_row(row.number) if row is not None else None
            if row is None or place is None:
                yield _text(parts[at])
                continue
            used = ((each, template) for each, template in zip(self._fields, templates, strict=True) if template)
            readings = ", ".join([each.text(template, row.placer) for each, template in used]).replace(_ROW, place)
            what = f'{self._identities[identity]}, "attributes": {self._grades[grade]}'
            yield f'{{"part_number": {_quoted(number)}, {what}, "readings": [{readings}]}}'


_quoted = json.JSONEncoder(ensure_ascii=False).encode


class _Field:
    """The templates of one field as text, each made when it is first asked for."""

    def __init__(self, templates: Sequence[Template]) -> None:
        self._templates = templates
        self._texts: dict[tuple[int, Placer], str] = {}

    def text(self, number: int, placer: Placer) -> str:
        """The readings of a template with the places of their columns, but for the row."""
        known = self._texts.get((number, placer))
        if known is None:
            known = self._texts[number, placer] = _template_text(self._templates[number], placer)
        return known


def _template_text(template: Template, placer: Placer) -> str:
    texts: list[str] = []
    for reading, column in zip(*template, strict=True):
        if column is None:
            texts.append(_text(reading))
            continue
        keys = {key: _text(value) for key, value in written(reading).items()}
        keys["where"] = f"{placer.json_before(column)}{_ROW}}}"
        texts.append("{" + ", ".join(f'"{key}": {text}' for key, text in keys.items()) + "}")
    return ", ".join(texts)
