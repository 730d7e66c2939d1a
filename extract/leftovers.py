"""What stands on a sheet like a property and was not read: said in notes, so that nothing is left out in silence."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from itertools import islice

from extract.candidates import has_unit, label_of
from extract.entries import Entry, Item, Listing, Placed, Text
from extract.fields import field_of
from extract.fold import fold
from extract.heads import interpret
from extract.interleaved import left_out
from extract.meaning import is_part_token, meaning
from extract.model import Note, Where
from extract.prose import split_pairs
from extract.vocabulary import vocabulary

# Fields by which an amount's unit is known; the fields that have each unit.
UNITS = {
    "frequency_tolerance_ppm": ("frequency_tolerance_ppm", "frequency_stability_ppm", "ageing_ppm"),
    "load_capacitance_pf": ("load_capacitance_pf", "shunt_capacitance_pf", "motional_capacitance_ff"),
    "esr_ohm": ("esr_ohm", "insulation_resistance_megohm"),
    "drive_level_uw": ("drive_level_uw",),
    "motional_inductance_mh": ("motional_inductance_mh",),
    "frequency_mhz": ("frequency_mhz",),
}
SHOWN = 3
LONGEST_LABEL = 60
# In a longer document the rows that nobody knows are mostly those of other products.
MOST_ITEMS = 3000
LEAST_LABELS = 3


def leftovers(items: Sequence[Item], stated: Iterable[str]) -> list[Note]:
    """One note on rows whose label no wording file knows, and a warning for each kind of label left without its value.

    `stated` are the fields that some part has a reading of.
    """
    if len(items) > MOST_ITEMS:
        return []
    known = frozenset(stated)
    rows = list(islice(_unknown_rows(items), 50))
    notes = []
    if rows:
        lost = any(not known & {*UNITS[unit]} for _, _, unit in rows)
        texts = list(dict.fromkeys(text for text, _, _ in rows))
        more = f" and {len(texts) - SHOWN} more" if len(texts) > SHOWN else ""
        message = f"not understood, look whether it is a property of the crystal: {'; '.join(texts[:SHOWN])}{more}"
        notes.append(Note(level="warning" if lost else "info", message=message, where=rows[0][1]))
    return [*notes, *_labels_without_values(items, known)]


def _unknown_rows(items: Sequence[Item]) -> Iterator[tuple[str, Where, str]]:
    """Text, place and unit of each row or column with amounts in a crystal's unit under a label that is none."""
    heading = ""
    for item in items:
        if isinstance(item, Text) and item.heading:
            heading = item.piece.text
        elif isinstance(item, Entry) and item.source in ("table", "pair"):
            if not _of_tests((heading, item.section)) and (unit := _unknown_unit(item)):
                yield _shown(item), item.where, unit
        elif isinstance(item, Listing) and not _of_tests((heading, item.title)):
            yield from _unknown_columns(item)


def _of_tests(headings: Iterable[str]) -> bool:
    """Whether rows stand under a heading of tests, soldering or ordering."""
    words = [word for kind in ("reliability", "ordering") for word in vocabulary().phrases.get(kind, ())]
    folded = [fold(text).casefold() for text in headings if text]
    return any(meaning(text).trap is not None or any(word in text for word in words) for text in folded)


def _unknown_unit(entry: Entry) -> str | None:
    """The field whose unit stands in the values of an entry with an unknown label; None for all others."""
    text = entry.label.text.strip(" :：")
    known = meaning(text)
    named = known.head is not None or known.trap is not None or known.role is not None or known.value
    if named or len(text) > LONGEST_LABEL or not any(c.isalpha() for c in text) or is_part_token(text):
        return None
    if label_of(entry) is not None or any(is_part_token(word) for word in text.split()):
        return None
    return _unit_of(f"{value.piece.text} {entry.unit}" for value in entry.values)


def _unit_of(texts: Iterable[str]) -> str | None:
    for text in texts:
        if any(c.isdigit() for c in text) and (unit := next((each for each in UNITS if has_unit(text, each)), None)):
            return unit
    return None


def _unknown_columns(listing: Listing) -> Iterator[tuple[str, Where, str]]:
    for index, column in enumerate(listing.columns):
        head = interpret(column.levels)
        if head.name is not None or head.label is not None or head.role is not None or not column.text.strip():
            continue
        if any(is_part_token(level) for level in column.levels) or meaning(column.text).value:
            continue
        cells = [cell for row in listing.rows[:8] if (cell := row[index]) is not None and cell.text.strip()]
        if any(split_pairs(fold(cell.text))[0] for cell in cells):
            continue
        if cells and (unit := _unit_of(f"{cell.text} {head.unit}" for cell in cells)):
            yield f"{_clipped(column.text)} {_clipped(cells[0].text)}", cells[0].where, unit


def _shown(entry: Entry) -> str:
    values = " ".join(value.piece.text for value in entry.values)
    return f"{_clipped(entry.label.text)} {_clipped(values)} {entry.unit}".strip()


def _clipped(text: str) -> str:
    return " ".join(text.split())[:40]


def _labels_without_values(items: Sequence[Item], stated: frozenset[str]) -> Iterator[Note]:
    """A warning where labels stand in a dump whose values could not be told apart, and no part has the fields."""
    lost: dict[str, Placed] = {}
    for item in items:
        if isinstance(item, Text):
            for field in left_out(fold(item.piece.text)):
                if field not in stated:
                    lost.setdefault(field, item.piece)
    bare = {
        label.field: item.piece
        for item in items
        if isinstance(item, Text) and not item.heading and (label := meaning(item.piece.text.strip(" :：")).label)
        if label.exact and label.field not in stated
    }
    if len(bare) >= LEAST_LABELS:
        lost = {**bare, **lost}
    if lost:
        named = ", ".join(field_of(name).title for name in lost)
        message = f"named, but which value is whose cannot be told: {named}"
        yield Note(level="warning", message=message, where=next(iter(lost.values())).where)
