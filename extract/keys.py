"""Ordering keys: codes with what they stand for ("06 = 6 pF"), in tables and in runs of lines."""

from __future__ import annotations

import re
from collections.abc import Iterator, Sequence

from extract.amount import read_values
from extract.documents.model import Cell
from extract.entries import Key, Piece, Placed
from extract.fold import fold
from extract.meaning import meaning

Row = Sequence[Cell | None]
_CODE = r"(?P<code>blank|none|-?[A-Z]{1,2}\d{0,2}|-?\d{1,3}[A-Z]?|[①-⑳]|\(?blank\)?|\"[^\"]{1,4}\"|'[^']{1,4}')"
_CHOICE = re.compile(rf"(?i)\s*{_CODE}\s*(?:=|:|：|→|->|\bfor\b)\s*(?P<meaning>.*\S)\s*$")
_LOOSE = re.compile(r"\s*(?P<code>[Bb]lank|[A-Z]{1,2}\d{0,2})\s+(?P<meaning>[±+\-\d].*\S)\s*$")
_REVERSED = re.compile(rf"\s*(?P<meaning>[±+\-]?\d.*\S)\s*=\s*{_CODE}\s*$")
_BETWEEN = re.compile(r"\n|;|；|,\s+(?=[\w\"'-]{1,5}\s*[=:])|、")
_NUMBERING = re.compile(r"^\s*[\[(]?(?:\d{1,2}|[①-⑳])[\])]?[.:]?\s+(?=\D)")


def choices_in(text: str) -> list[tuple[str, str]]:
    """Codes and meanings of a text that holds nothing else; empty where any piece of it is no choice."""
    found = []
    for piece in _BETWEEN.split(fold(text)):
        if not piece.strip():
            continue
        match = _CHOICE.match(piece) or _REVERSED.match(piece) or _LOOSE.match(piece)
        if match is None or _reads_as_label(match["code"], match["meaning"]):
            return []
        found.append((match["code"], match["meaning"]))
    return found


def _reads_as_label(code: str, value: str) -> bool:
    """Tell values from codes: "CL: 8 pF" and "C0 = 1 pF" are values, "Q = 8 pF" is a code."""
    label = meaning(code).label
    return label is not None and label.exact and any(not each.empty for each in read_values(value, label.field))


def key_label(text: str) -> str:
    """The label of an ordering key without its numbering ("[1] Load capacitance")."""
    return _NUMBERING.sub("", text).strip(" :：*")


def read_key_table(rows: Sequence[Row], title: str) -> list[Key]:
    """A table that holds ordering keys and nothing else; empty for any other table."""
    return _columns_of_keys(rows) or _rows_of_keys(rows) or _code_columns(rows, title) or _titled_codes(rows)


def take_code_rows(rows: Sequence[Row]) -> tuple[list[Key], list[Row]]:
    """Rows of codes under rows of values ("CL 6 7 8 ..." over "Code N P Q ..."), and the rows that are left."""
    keys: list[Key] = []
    left: list[Row] = []
    for row in rows:
        cells = _distinct(row)
        if len(cells) > 2 and meaning(cells[0].text).role == "code" and left:
            values = _distinct(left.pop())
            choices = tuple((code.text, value) for code, value in zip(cells[1:], values[1:], strict=False))
            keys.append(Key(Piece(key_label(values[0].text), values[0].where), choices))
        else:
            left.append(row)
    return keys, left


def _distinct(cells: Sequence[Cell | None]) -> list[Cell]:
    return list({id(cell): cell for cell in cells if cell is not None and cell.text.strip()}.values())


def _key(label: Placed, cells: Sequence[Cell]) -> Key:
    choices = tuple(
        (code, Piece(text, cell.where, cell.confidence)) for cell in cells for code, text in choices_in(cell.text)
    )
    return Key(Piece(key_label(label.text), label.where), choices)


def _columns_of_keys(rows: Sequence[Row]) -> list[Key]:
    """Labels in the first row, choices below."""
    keys, others = [], 0
    for column in range(len(rows[0])):
        cells = _distinct([row[column] for row in rows])
        if len(cells) < 2:
            continue
        good = [cell for cell in cells[1:] if choices_in(cell.text)]
        if len(good) >= 1 and len(good) >= 0.6 * len(cells[1:]) and meaning(key_label(cells[0].text)).head:
            keys.append(_key(cells[0], good))
        elif not good and cells[0].column == column:
            others += 1
    return keys if len(keys) >= max(1, others) and sum(len(key.choices) for key in keys) >= 2 else []


def _rows_of_keys(rows: Sequence[Row]) -> list[Key]:
    """A label at the head of each row, its choices beside it."""
    keys = []
    for row in rows:
        cells = _distinct(row)
        good = [cell for cell in cells[1:] if choices_in(cell.text)]
        if len(cells) >= 2 and len(good) == len(cells) - 1:
            keys.append(_key(cells[0], good))
    several = [key for key in keys if len(key.choices) >= 2]
    return keys if len(keys) >= 0.6 * len(rows) and several else []


def _code_columns(rows: Sequence[Row], title: str) -> list[Key]:
    """A column headed Code beside the column of what the codes stand for."""
    heads = [cell.text if cell is not None else "" for cell in rows[0]]
    if not any(meaning(head).role == "code" for head in heads):
        return []
    return list(_beside_codes(rows, heads, title))


_BARE_CODE = re.compile(r"(?i)blank|none|-|[A-Z]{1,2}\d?|\d{1,2}")
_LETTERS = re.compile(r"(?i)blank|none|[A-Z]{1,2}\d?")


def _titled_codes(rows: Sequence[Row]) -> list[Key]:
    """A label over two columns, the first of codes ("Blank", "B", "7"), most of them letters or one the standard."""
    title, *choices = [_distinct(row) for row in rows]
    if len(title) != 1 or len(choices) < 2 or any(len(cells) != 2 for cells in choices):
        return []
    codes = [fold(cells[0].text) for cells in choices]
    label = meaning(key_label(title[0].text)).label
    coded = all(_BARE_CODE.fullmatch(code) for code in codes) and any(_LETTERS.fullmatch(code) for code in codes)
    if label is None or not label.exact or not coded or len(set(codes)) < len(codes):
        return []
    return [Key(Piece(key_label(title[0].text), title[0].where), tuple((cells[0].text, cells[1]) for cells in choices))]


RANGE, STABILITY = "operating_temperature_c", "frequency_stability_ppm"


def _graded(rows: Sequence[Row], heads: Sequence[str]) -> list[Key]:
    """One column of codes beside two or more of properties: what each code stands for in each of them.

    A range and the stability over it belong together, a pair for each code.
    """
    known = [meaning(head) for head in heads]
    codes = [index for index, each in enumerate(known) if each.role == "code"]
    labelled = {index: each.label for index, each in enumerate(known) if each.label is not None and each.label.exact}
    if len(codes) != 1 or len(labelled) < 2 or len(labelled) < len(heads) - 1:
        return []
    column_of = {label.field: index for index, label in labelled.items()}
    pairs = [column_of[STABILITY], column_of[RANGE]] if {RANGE, STABILITY} <= column_of.keys() else []
    anchor = rows[0][codes[0]]
    groups = [[index] for index in labelled if index not in pairs] + ([pairs] if pairs else [])
    keys = []
    for columns in groups:
        head = rows[0][columns[0]] if len(columns) == 1 else anchor
        choices = tuple(
            (code.text, Piece(" ".join(map(_with_unit, cells, [labelled[k].unit for k in columns])), cells[0].where))
            for row in rows[1:]
            if (code := row[codes[0]]) is not None
            and len(cells := [cell for k in columns if (cell := row[k]) is not None]) == len(columns)
        )
        if head is not None and choices:
            keys.append(Key(Piece(key_label(head.text), head.where), choices))
    return keys


def _with_unit(cell: Cell, unit: str | None) -> str:
    """A cell's text, behind it the unit of its head where it has none of its own."""
    return cell.text if unit is None or any(char.isalpha() for char in cell.text) else f"{cell.text} {unit}"


def _beside_codes(rows: Sequence[Row], heads: Sequence[str], title: str) -> Iterator[Key]:
    if graded := _graded(rows, heads):
        yield from graded
        return
    for column, head in enumerate(heads):
        partner = next((k for k in (column + 1, column - 1) if 0 <= k < len(heads) and k != column), None)
        if meaning(head).role != "code" or partner is None:
            continue
        named = heads[partner] if meaning(heads[partner]).head else title
        choices = tuple(
            (code.text, cell)
            for row in rows[1:]
            if (code := row[column]) is not None and (cell := row[partner]) is not None
        )
        anchor = rows[0][column]
        if named and choices and anchor is not None:
            yield Key(Piece(key_label(named), anchor.where), choices)
