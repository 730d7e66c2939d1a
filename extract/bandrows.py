"""Listings in which a part's number is merged over several rows, each for a band of its frequencies."""

from __future__ import annotations

from collections.abc import Sequence
from itertools import groupby

from extract.conditions import kept, merged
from extract.drafts import Draft
from extract.entries import Listing, Placed
from extract.lists import ListColumn, cell_candidates, key_when, part_name, row_draft

# A longer list has a row for each part.
LONGEST = 200


def merged_row_drafts(listing: Listing, columns: Sequence[ListColumn]) -> list[Draft]:
    """A draft for each group of rows that share a number's cell; empty where no cell is shared.

    What all rows of a group share is the part's; the frequencies that differ say where the row's other values hold.
    """
    numbers = [column for column in columns if column.use == "part_number"]
    if len(numbers) != 1 or len(listing.rows) > LONGEST:
        return []
    number = numbers[0]
    rows = [list(row) for row in listing.rows]
    groups = [list(group) for _, group in groupby(range(len(rows)), key=lambda at: id(rows[at][number.index]))]
    if not any(len(group) > 1 for group in groups):
        return []
    own = [column for column in columns if any(_differs(rows, group, column.index) for group in groups)]
    bands = [column for column in own if column.label is not None and column.label.field == "frequency_mhz"]
    if len(bands) != 1:
        return []
    drafts = []
    for group in groups:
        cell = rows[group[0]][number.index]
        if cell is None or not cell.text.strip():
            continue
        draft = row_draft(rows[group[0]], [each for each in columns if each not in own], listing.sections[group[0]])
        draft.part_number, draft.where = part_name(cell.text), cell.where
        for at in group:
            _take_band(draft, rows[at], own, bands[0])
        drafts.append(draft)
    return drafts


def _differs(rows: Sequence[Sequence[Placed | None]], group: Sequence[int], index: int) -> bool:
    return len({id(rows[at][index]) for at in group}) > 1


def _take_band(draft: Draft, row: Sequence[Placed | None], own: Sequence[ListColumn], band: ListColumn) -> None:
    cell = row[band.index]
    if cell is None or band.label is None:
        return
    when = key_when(cell, band.label)
    for column in own:
        value = row[column.index]
        if column is band or value is None or column.label is None:
            continue
        field = column.label.field
        draft.candidates.extend(cell_candidates(value, column, kept(merged(column.when, when), field)))
