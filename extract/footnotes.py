"""Footnotes: the marks in a table, the lines that they point to, and the values that such a line changes."""

from __future__ import annotations

import re
from collections.abc import Iterable
from dataclasses import replace

from extract.candidates import Candidate, entry_candidates, has_unit, label_of, read
from extract.conditions import condition_of, kept, merged
from extract.entries import Entry, Piece, Placed, Value
from extract.fold import fold
from extract.model import When

_MARK = r"\*{1,3}\d{0,2}|※\s?\d{0,2}|[†‡§]|注\s?\d+|(?:note|fn)\.?\s?\d{1,2}"
_LINE = re.compile(
    rf"(?i)^\s*(?:(?P<mark>{_MARK})|[(\[]\^?(?P<number>\d{{1,2}})[)\]]|(?P<loose>\d{{1,2}})[).](?=\s)|\^\(?(?P<raised>\d)\)?)[\s:.)]*(?P<text>.+)$",
    re.DOTALL,
)
_IN_TEXT = re.compile(
    rf"(?i)(?<![\w*])(?:{_MARK})(?![\w*])|(?<=[\w)%])\*{{1,3}}\d{{0,2}}|[(\[]\d{{1,2}}[)\]]|\b\d{{1,2}}\)|\^\(?\d\)?"
)


def _name(mark: str) -> str:
    """One form for "*2", "(2)", "2)", "Note 2"; stars and daggers stay as they are."""
    digits = re.sub(r"\D", "", mark)
    return digits or re.sub(r"\s", "", mark)


def footnote_of(text: str) -> tuple[str, str] | None:
    """A line's footnote mark and text; None where it begins with none."""
    match = _LINE.match(fold(text))
    if match is None:
        return None
    mark = match["mark"] or match["number"] or match["loose"] or match["raised"]
    return _name(mark), match["text"]


_NEXT = re.compile(
    r"(?i)(?<=[.;:)\w。；])\s+(?=(?:\*\d{1,2}|※\s?\d|[(\[]\d{1,2}[)\]]|(?:note|注)\s?\d{1,2}\b)[\s:.)]*\S)"
)


def footnotes_in(text: str) -> list[tuple[str, str]]:
    """Every footnote of a line that begins with one: "(1) ... (2) ..." are two where their marks count up."""
    first = footnote_of(text)
    if first is None:
        return []
    head, *others = _NEXT.split(fold(text))
    found = [footnote_of(head) or first]
    for piece in others:
        mark, before = found[-1]
        following = footnote_of(piece)
        if following is not None and mark.isdigit() and following[0] == str(int(mark) + 1):
            found.append(following)
        else:
            found[-1] = mark, f"{before} {piece}"
    return found


def marks_in(texts: Iterable[str]) -> set[str]:
    """Footnote marks that texts of one row carry."""
    return {_name(match[0]) for text in texts for match in _IN_TEXT.finditer(fold(text))}


def noted_candidates(entry: Entry, notes: dict[str, tuple[str, Placed]]) -> list[Candidate]:
    """Values for a narrower case that the footnotes of an entry state, each in the place of the footnote."""
    label = label_of(entry)
    if label is None or not notes:
        return []
    texts = [entry.label.text, *(value.piece.text for value in entry.values), *entry.conditions, entry.symbol]
    found: list[Candidate] = []
    for mark in sorted(marks_in(texts) & notes.keys()):
        text, place = notes[mark]
        if not has_unit(text, label.field):
            continue
        for part in re.split(r"[;；]", text):
            found += _narrower(entry, part, place, label.field)
    choice = _choice(entry, label.field)
    return [each for each in found if not _restricts(each, choice)]


def _choice(entry: Entry, field: str) -> set[float]:
    """What the entry's values offer to choose from."""
    return {number for value in entry.values for each in read(value.piece.text, field) for number in each.options}


def _restricts(noted: Candidate, choice: set[float]) -> bool:
    """Whether a footnote only says where one of several options is to be had."""
    numbers = {abs(number) for number in (noted.min, noted.typ, noted.max, *noted.options) if number is not None}
    return bool(choice) and numbers <= choice


def _narrower(entry: Entry, text: str, place: Placed, field: str) -> list[Candidate]:
    when = kept(condition_of(text), field)
    values = read(text, field)
    if not values:
        return []
    piece = Piece(text, place.where, place.confidence)
    noted = replace(entry, values=(Value(piece),), unit="", conditions=(), source="table")
    found = [replace(each, when=merged(when, each.when), source="note") for each in entry_candidates(noted)]
    return [each for each in found if each.when not in (When(), When(years=each.when.years))]
