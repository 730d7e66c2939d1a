"""Blocks -> parts: whose readings they are, what else is said of each part, and what was passed over."""

from __future__ import annotations

import re
from collections import Counter
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, field, replace

from extract import trace
from extract.blocks import Blocks
from extract.candidates import entry_candidates, label_of, offers_series, read, unreadable
from extract.drafts import Draft, cuts_in, modes_in
from extract.entries import Entry, Key, Listing, Text
from extract.fields import field_of, fields
from extract.finish import CRYSTAL_FIELDS, inherit, lacks_crystal, part_of
from extract.fold import fold
from extract.footnotes import noted_candidates
from extract.identity import FIRST_LINES, maker_of, package_in, part_number_of, texts_of
from extract.leftovers import leftovers
from extract.lists import listing_drafts
from extract.meaning import meaning, part_tokens
from extract.model import Note, Part
from extract.orderable import key_candidates
from extract.partlist import Chunk, numbers_without, together
from extract.prose import loose_in_prose
from extract.quoted import without_quoted
from extract.refusals import REQUIREMENT, asks_of_a_crystal, refusal
from extract.rowlist import NO_CRYSTAL, LongList, RowRun, long_list
from extract.sections import Section, sections
from extract.subjects import split_by_subject
from extract.vocabulary import vocabulary


@dataclass(slots=True)
class Found:
    """Parts and what the reader has to say about them."""

    parts: Sequence[Part] = field(default_factory=list)
    notes: list[Note] = field(default_factory=list)


def parts_of(blocks: Blocks) -> Found:
    """Every part of a sheet."""
    found = Found(notes=list(blocks.warnings))
    split = sections(blocks.items)
    common = next((section for section in split if section.name is None), Section(None))
    shared = _draft(common, blocks)
    named = [section for section in split if section.name is not None]
    maker = maker_of(common.items if named else blocks.items, blocks.headers)
    drafts: list[Draft | LongList] = []
    for section in named or [common]:
        reason = refusal(texts_of(section.items))
        if reason == REQUIREMENT and _names_parts(_listed(section, blocks)):
            reason = None
        if reason is not None:
            _pass_over(found, section.name or part_number_of(blocks.items, blocks.headers), reason)
            continue
        drafts += _of_section(section, shared if named else None, blocks, found)
    for each in drafts:
        if isinstance(each, LongList):
            each.read(maker)
    merged = _merged(drafts)[::-1]
    drafts.clear()
    finished: list[Part | Chunk] = []
    while merged:
        # Each draft goes when its part is made: of a long list both would not fit into a small machine.
        piece = merged.pop()
        if isinstance(piece, RowRun):
            finished.append(_parted(piece, found))
            continue
        if blocks.quoted:
            piece.candidates = without_quoted(piece.candidates, blocks.quoted)
        finished += _finished(piece, maker, found)
    found.parts = together(finished)
    _note_missing_frequencies(found)
    if found.parts:
        count = len(found.parts)
        found.notes += leftovers(
            blocks.items, [name for name in fields() if len(numbers_without(found.parts, name)) < count]
        )
    return found


def _note_missing_frequencies(found: Found) -> None:
    """One warning for all parts that state no frequency: nothing can be reckoned for them."""
    lacking = numbers_without(found.parts, "frequency_mhz")
    if not lacking:
        return
    names = [number or "the part" for number in lacking[:3]]
    more = f" and {len(lacking) - 3} more" if len(lacking) > 3 else ""
    found.notes.append(Note(level="warning", message=f"no frequency is stated for {', '.join(names)}{more}"))


def _pass_over(found: Found, name: str | None, reason: str) -> None:
    who = f"{name}: " if name else ""
    found.notes.append(Note(level="info", message=f"{who}passed over, because it is {reason}, no crystal"))


def _note_unread(own: Draft, found: Found) -> None:
    """A warning for each value that no number could be read of, where the field is stated nowhere else."""
    stated = {each.field for each in own.candidates}
    for name, text, where in own.unread:
        if name not in stated:
            message = f"{field_of(name).title} is named, but no number can be read in {' '.join(text.split())[:60]!r}"
            found.notes.append(Note(level="warning", message=message, where=where))


def _of_section(section: Section, shared: Draft | None, blocks: Blocks, found: Found) -> Sequence[Draft | LongList]:
    own = _draft(section, blocks)
    _note_unread(own, found)
    own.part_number = own.part_number or section.name
    listed = _listed(section, blocks)
    rows = [each for each in listed if isinstance(each, LongList) or each.part_number is not None]
    for each in listed:
        if isinstance(each, Draft) and each.part_number is None:
            own.candidates += each.candidates
            own.cuts |= each.cuts
    if shared is not None:
        own.maker = own.maker or maker_of(section.items, (), sure=True)
        inherit(own, shared)
    if rows:
        for loose in own.candidates:
            if loose.source == "loose":
                trace.dropped(loose, "a value without a label beside a list of parts")
        own.candidates = [each for each in own.candidates if each.source != "loose"]
        own.part_number = own.part_number or part_number_of(section.items, blocks.headers)
        if _stands_by_itself(own, rows):
            return [own, *rows]
        for row in rows:
            if isinstance(row, LongList):
                row.general = own
            else:
                inherit(row, own)
        return rows
    if own.part_number is None:
        own.part_number = part_number_of(section.items, blocks.headers)
    return split_by_subject(own)


def _listed(section: Section, blocks: Blocks) -> list[Draft | LongList]:
    found: list[Draft | LongList] = []
    for item in section.items:
        if isinstance(item, Listing):
            rows = None if blocks.quoted else long_list(item)
            found += listing_drafts(item) if rows is None else [rows]
    return found


def _names_parts(listed: Sequence[Draft | LongList]) -> bool:
    return any(any(each.names) if isinstance(each, LongList) else each.part_number for each in listed)


LEAST_OF_ITS_OWN = 4


def _stands_by_itself(own: Draft, rows: Sequence[Draft | LongList]) -> bool:
    """Whether a page describes one part and lists others ("related products"), rather than what all of a list share.

    It has its own number and one frequency, and says more of it; the others have frequencies of their own.
    """
    stated = [each for each in own.candidates if each.field == "frequency_mhz" and each.source in ("table", "pair")]
    values = {each.typ for each in stated}
    if own.part_number is None or len(values) != 1 or None in values:
        return False
    labelled = {each.field for each in own.candidates if each.source in ("table", "pair")}
    each_row = [row for each in rows for row in (each.drafts() if isinstance(each, LongList) else (each,))]
    others = [row for row in each_row if row.part_number != own.part_number]
    told = [row for row in others if any(each.field == "frequency_mhz" for each in row.candidates)]
    told_enough = len(labelled) >= LEAST_OF_ITS_OWN and bool(labelled & CRYSTAL_FIELDS)
    return told_enough and bool(others) and 2 * len(told) > len(others)


def _draft(section: Section, blocks: Blocks) -> Draft:
    """All that the entries and texts of a section say of its part."""
    draft = Draft()
    texts = [item for item in section.items if isinstance(item, Text)]
    entries = [item for item in section.items if isinstance(item, Entry)]
    heading = ""
    for item in section.items:
        if isinstance(item, Text) and item.heading:
            heading = item.piece.text
        elif isinstance(item, Entry):
            _take_entry(draft, item, blocks, heading)
    draft.take_identity(entries)
    if draft.part_number is not None and not part_tokens(draft.part_number):
        draft.part_number = None
    for item in section.items:
        if isinstance(item, Key):
            draft.candidates += key_candidates(item)
    _take_texts(draft, texts)
    draft.lines = texts_of(section.items)
    return draft


def _take_entry(draft: Draft, entry: Entry, blocks: Blocks, heading: str) -> None:
    about = [heading, entry.section]
    if asks_of_a_crystal(about):
        trace.passed(f"{entry.label.text}", entry.where, "stands under a heading of what a chip asks of a crystal")
        return
    if says(about, "reliability") and not _is_range(entry):
        trace.passed(f"{entry.label.text}", entry.where, "stands under a heading of reliability tests")
        return
    found = entry_candidates(entry)
    if says(about, "ordering"):
        draft.candidates += [replace(each, source="key") for each in found]
        return
    named = part_tokens(heading)
    if len(named) == 1:
        found = [each if each.subject else replace(each, about=named[0]) for each in found]
    draft.candidates += found
    if not found and (unread := unreadable(entry)) is not None:
        draft.unread.append(unread)
    draft.candidates += noted_candidates(entry, blocks.notes)
    if offers_series(entry):
        draft.resonance.add("series")
    if found:
        for text in entry.conditions:
            draft.take_mode_and_cut(text)
        if found[0].field == "frequency_mhz":
            for value in entry.values:
                draft.take_mode_and_cut(value.piece.text)


def _is_range(entry: Entry) -> bool:
    """Whether a row under a heading such as "Environmental" states the range of use or storage all the same."""
    label = label_of(entry)
    if label is None or not label.exact or label.field not in ("operating_temperature_c", "storage_temperature_c"):
        return False
    values = [each for value in entry.values for each in read(value.piece.text, label.field)]
    numbers = re.findall(r"\d+(?:[.,]\d+)?", " ".join(value.piece.text for value in entry.values))
    return len(values) == 1 and None not in (values[0].min, values[0].max) and len(numbers) == 2


def says(texts: Sequence[str], kind: str) -> bool:
    """Whether a heading is one of ordering keys ("ordering") or of tests ("reliability")."""
    words = vocabulary().phrases.get(kind, ())
    lines = [fold(text).casefold() for text in texts if text and len(text) < 80]
    return any(word in line for line in lines for word in words)


def _take_texts(draft: Draft, texts: Sequence[Text]) -> None:
    """Mode, cut, package and an unlabelled frequency from headings, feature lines and prose."""
    had_mode, had_cut = bool(draft.modes), bool(draft.cuts)
    for index, text in enumerate(texts):
        for segment in [each.text for each in text.segments] or [text.piece.text]:
            if not had_mode and not says((segment,), "request"):
                draft.modes.update(modes_in(segment))
            if not had_cut:
                draft.cuts.update(cuts_in(segment))
            if says((segment,), "series_part"):
                draft.resonance.add("called series")
            if draft.package is None and (index < FIRST_LINES or text.heading or _begins_with_package(segment)):
                draft.package = package_in(segment)
        if index < FIRST_LINES or len(text.piece.text) > 100:
            draft.candidates += loose_in_prose(text.piece)


def _begins_with_package(text: str) -> bool:
    """Whether a line begins with a word for the package ("Case 2.0 x 1.6 mm")."""
    first = text.split(maxsplit=1)[:1]
    return bool(first) and len(text) < 80 and meaning(first[0].strip(" :：")).identity == "package"


def _merged(drafts: Sequence[Draft | LongList]) -> list[Draft | RowRun]:
    """Drafts of one part number are one part."""
    merged: dict[tuple[str | None, int], Draft | RowRun] = {}
    for index, draft in enumerate(_pieces(drafts)):
        key = (draft.part_number, 0 if draft.part_number else index) if isinstance(draft, Draft) else (None, index)
        first = merged.setdefault(key, draft)
        if isinstance(first, Draft) and isinstance(draft, Draft) and first is not draft:
            first.candidates += draft.candidates
            first.maker, first.package = first.maker or draft.maker, first.package or draft.package
            first.modes |= draft.modes
            first.cuts |= draft.cuts
            first.resonance |= draft.resonance
    return list(merged.values())


def _pieces(drafts: Sequence[Draft | LongList]) -> Iterator[Draft | RowRun]:
    """Drafts and runs of rows; a row whose part number comes again is a draft."""
    counts = Counter(
        name for each in drafts for name in (each.names if isinstance(each, LongList) else (each.part_number,)) if name
    )
    repeated = {name: count for name, count in counts.items() if count > 1}
    for each in drafts:
        if isinstance(each, LongList):
            yield from each.pieces(repeated)
        else:
            yield each


def _parted(run: RowRun, found: Found) -> Chunk:
    """Rows of a long list as parts, and a note for each that is none."""
    chunk, passed = run.parted()
    for number, reason in passed:
        _pass_over(found, number, reason)
    return chunk


def _finished(draft: Draft, maker: str | None, found: Found) -> list[Part]:
    """One draft as a part, or a note why it is none."""
    if (reason := refusal(draft.texts, least=1)) is not None:
        _pass_over(found, draft.part_number, reason)
        return []
    if draft.other:
        return []
    stated = {candidate.field for candidate in draft.candidates if candidate.source != "loose" or draft.crystal}
    if lacks_crystal(stated):
        if draft.part_number and stated:
            _pass_over(found, draft.part_number, NO_CRYSTAL)
        return []
    return [part_of(draft, maker)]
