"""Blocks -> parts: whose readings they are, what else is said of each part, and what was passed over."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field, replace

from extract import trace
from extract.attributes import attributes_of
from extract.blocks import Blocks
from extract.candidates import Candidate, entry_candidates, key_candidates, offers_series
from extract.conditions import holds
from extract.drafts import Draft, cuts_in, modes_in
from extract.entries import Entry, Key, Listing, Text
from extract.fold import fold
from extract.footnotes import noted_candidates
from extract.identity import FIRST_LINES, maker_of, package_in, part_number_of, texts_of
from extract.lists import listing_drafts
from extract.meaning import meaning, part_tokens
from extract.model import Note, Part, Reading, lean
from extract.prose import loose_in_prose
from extract.quoted import without_quoted
from extract.readings import readings_of
from extract.refusals import REQUIREMENT, asks_of_a_crystal, refusal
from extract.sections import Section, sections
from extract.subjects import split_by_subject
from extract.vocabulary import vocabulary

CRYSTAL_FIELDS = frozenset(
    {
        "frequency_mhz",
        "load_capacitance_pf",
        "esr_ohm",
        "shunt_capacitance_pf",
        "motional_capacitance_ff",
        "motional_inductance_mh",
        "quality_factor",
        "drive_level_uw",
        "turnover_temperature_c",
        "parabolic_coefficient_ppm_per_c2",
    }
)


@dataclass(slots=True)
class Found:
    """Parts and what the reader has to say about them."""

    parts: list[Part] = field(default_factory=list)
    notes: list[Note] = field(default_factory=list)


def parts_of(blocks: Blocks) -> Found:
    """Every part of a sheet."""
    found = Found(notes=list(blocks.warnings))
    split = sections(blocks.items)
    common = next((section for section in split if section.name is None), Section(None))
    shared = _draft(common, blocks)
    named = [section for section in split if section.name is not None]
    maker = maker_of(common.items if named else blocks.items, blocks.headers)
    drafts: list[Draft] = []
    reason = None
    for section in named or [common]:
        reason = refusal(texts_of(section.items))
        if reason == REQUIREMENT and any(draft.part_number for draft in _listed(section)):
            reason = None
        if reason is not None:
            _pass_over(found, section.name or part_number_of(blocks.items, blocks.headers), reason)
            continue
        drafts += _of_section(section, shared if named else None, blocks)
    merged = _merged(drafts)[::-1]
    drafts.clear()
    for draft in merged if blocks.quoted else ():
        draft.candidates = without_quoted(draft.candidates, blocks.quoted)
    while merged:
        # Each draft goes when its part is made: of a long list both would not fit into a small machine.
        _finish(merged.pop(), maker, found)
    _note_missing_frequencies(found)
    return found


def _note_missing_frequencies(found: Found) -> None:
    """One warning for all parts that state no frequency: nothing can be reckoned for them."""
    lacking = [part for part in found.parts if not any(each.field == "frequency_mhz" for each in part.readings)]
    if not lacking:
        return
    names = [part.part_number or "the part" for part in lacking[:3]]
    more = f" and {len(lacking) - 3} more" if len(lacking) > 3 else ""
    found.notes.append(Note(level="warning", message=f"no frequency is stated for {', '.join(names)}{more}"))


def _pass_over(found: Found, name: str | None, reason: str) -> None:
    who = f"{name}: " if name else ""
    found.notes.append(Note(level="info", message=f"{who}passed over, because it is {reason}, no crystal"))


def _of_section(section: Section, shared: Draft | None, blocks: Blocks) -> list[Draft]:
    own = _draft(section, blocks)
    own.part_number = own.part_number or section.name
    listed = _listed(section)
    rows = [each for each in listed if each.part_number is not None]
    for each in listed:
        if each.part_number is None:
            own.candidates += each.candidates
    if shared is not None:
        own.maker = own.maker or maker_of(section.items, (), sure=True)
        _inherit(own, shared)
    if rows:
        for loose in own.candidates:
            if loose.source == "loose":
                trace.dropped(loose, "a value without a label beside a list of parts")
        own.candidates = [each for each in own.candidates if each.source != "loose"]
        own.part_number = own.part_number or part_number_of(section.items, blocks.headers)
        if _stands_by_itself(own, rows):
            return [own, *rows]
        for row in rows:
            _inherit(row, own)
        return rows
    if own.part_number is None:
        own.part_number = part_number_of(section.items, blocks.headers)
    return split_by_subject(own)


def _listed(section: Section) -> list[Draft]:
    return [each for item in section.items if isinstance(item, Listing) for each in listing_drafts(item)]


LEAST_OF_ITS_OWN = 4


def _stands_by_itself(own: Draft, rows: Sequence[Draft]) -> bool:
    """Whether a page describes one part and lists others ("related products"), rather than what all of a list share.

    It has its own number and one frequency, and says more of it; the others have frequencies of their own.
    """
    stated = [each for each in own.candidates if each.field == "frequency_mhz" and each.source in ("table", "pair")]
    values = {each.typ for each in stated}
    if own.part_number is None or len(values) != 1 or None in values:
        return False
    labelled = {each.field for each in own.candidates if each.source in ("table", "pair")} & CRYSTAL_FIELDS
    others = [row for row in rows if row.part_number != own.part_number]
    told = [row for row in others if any(each.field == "frequency_mhz" for each in row.candidates)]
    return len(labelled) >= LEAST_OF_ITS_OWN and bool(others) and 2 * len(told) > len(others)


def _inherit(draft: Draft, general: Draft) -> None:
    """Take over what is stated for all parts, where the part has nothing of its own."""
    own = {candidate.field for candidate in draft.candidates if candidate.source not in ("loose", "prose")}
    draft.candidates += [each for each in general.candidates if each.field not in own and _holds_for(draft, each)]
    draft.modes = draft.modes or set(general.modes)
    draft.offered_modes = draft.offered_modes or general.offered_modes
    draft.cuts = draft.cuts or set(general.cuts)
    if "load_capacitance_pf" not in own:
        draft.resonance |= general.resonance
    draft.lines = draft.lines or general.lines
    draft.maker = draft.maker or general.maker
    draft.package = draft.package or general.package
    for name, text in general.attributes.items():
        draft.attributes.setdefault(name, text)


def _holds_for(draft: Draft, candidate: Candidate) -> bool:
    """Whether a banded value speaks of a part whose own frequency, load or temperature range is known."""
    frequency = [each.typ for each in draft.candidates if each.field == "frequency_mhz"]
    if len(frequency) == 1 and frequency[0] is not None and not _holds_at(candidate, frequency[0]):
        return False
    if len(draft.modes) == 1 and candidate.when.mode is not None and candidate.when.mode not in draft.modes:
        return False
    spans = [(each.min, each.max) for each in draft.candidates if each.field == "operating_temperature_c"]
    span = candidate.when.temperature_c
    return candidate.field != "frequency_stability_ppm" or span is None or len(spans) != 1 or spans[0] == span


def _holds_at(candidate: Candidate, frequency_mhz: float) -> bool:
    """Whether a banded value holds at a frequency; an upper end printed as "<" is the next band's."""
    band = candidate.when.frequency_mhz
    ends_before = candidate.open_above and band is not None and band[0] < band[1] == frequency_mhz
    return holds(candidate.when, frequency_mhz) and not ends_before


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
    if says(about, "reliability"):
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
    draft.candidates += noted_candidates(entry, blocks.notes)
    if offers_series(entry):
        draft.resonance.add("series")
    if found:
        for text in entry.conditions:
            draft.take_mode_and_cut(text)
        if found[0].field == "frequency_mhz":
            for value in entry.values:
                draft.take_mode_and_cut(value.piece.text)


def says(texts: Sequence[str], kind: str) -> bool:
    """Whether a heading is one of ordering keys ("ordering") or of tests ("reliability")."""
    words = vocabulary().phrases.get(kind, ())
    return any(word in fold(text).casefold() for text in texts if text and len(text) < 80 for word in words)


def _take_texts(draft: Draft, texts: Sequence[Text]) -> None:
    """Mode, cut, package and an unlabelled frequency from headings, feature lines and prose."""
    had_mode, had_cut = bool(draft.modes), bool(draft.cuts)
    for index, text in enumerate(texts):
        for segment in [each.text for each in text.segments] or [text.piece.text]:
            if not had_mode:
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


def _merged(drafts: Sequence[Draft]) -> list[Draft]:
    """Drafts of one part number are one part."""
    merged: dict[tuple[str | None, int], Draft] = {}
    for index, draft in enumerate(drafts):
        key = (draft.part_number, 0 if draft.part_number else index)
        if key in merged:
            first = merged[key]
            first.candidates += draft.candidates
            first.maker, first.package = first.maker or draft.maker, first.package or draft.package
            first.modes |= draft.modes
            first.cuts |= draft.cuts
            first.resonance |= draft.resonance
        else:
            merged[key] = draft
    return list(merged.values())


def _finish(draft: Draft, maker: str | None, found: Found) -> None:
    """One draft as a part, or a note why it is none."""
    if (reason := refusal(draft.texts, least=1)) is not None:
        _pass_over(found, draft.part_number, reason)
        return
    if draft.other:
        return
    stated = {candidate.field for candidate in draft.candidates if candidate.source != "loose" or draft.crystal}
    if len(stated & CRYSTAL_FIELDS) == 0 or (len(stated) < 2 and "frequency_mhz" not in stated):
        if draft.part_number and stated:
            _pass_over(found, draft.part_number, "something without a crystal's properties")
        return
    found.parts.append(_part(draft, maker))


def _part(draft: Draft, maker: str | None) -> Part:
    mode = next(iter(draft.modes)) if len(draft.modes) == 1 else None
    cut = _one_cut(draft.cuts)
    candidates = [_without_mode(each, mode) for each in draft.candidates]
    readings = _in_each_mode(readings_of(candidates, cut=cut, mode=mode), draft)
    if mode is None and cut == "tuning fork" and not draft.modes:
        mode = "fundamental"
    loads = any(reading.field == "load_capacitance_pf" for reading in readings)
    series = "series" in draft.resonance or ("called series" in draft.resonance and not loads)
    return Part(
        part_number=draft.part_number,
        maker=draft.maker or maker,
        package=draft.package,
        mode=mode,
        cut=cut,
        resonance=None if loads == series else ("load" if loads else "series"),
        attributes=attributes_of(draft.attributes, draft.lines),
        readings=readings,
    )


def _in_each_mode(readings: tuple[Reading, ...], draft: Draft) -> tuple[Reading, ...]:
    """A frequency offered in several modes under one label is one reading for each, unless values tell them already."""
    if len(draft.offered_modes) < 2 or draft.modes != draft.offered_modes or any(each.when.mode for each in readings):
        return readings
    told: list[Reading] = []
    for each in readings:
        if each.field == "frequency_mhz":
            for mode in sorted(draft.offered_modes):
                when = each.when.model_copy(update={"mode": mode})
                told.append(lean(each.model_copy(update={"when": when})))
        else:
            told.append(each)
    return tuple(told)


def _without_mode(candidate: Candidate, mode: str | None) -> Candidate:
    """A part's only mode is no condition."""
    if mode is None or candidate.when.mode != mode:
        return candidate
    return replace(candidate, when=candidate.when.model_copy(update={"mode": None}))


def _one_cut(cuts: set[str]) -> str | None:
    return next(iter(cuts)) if len(cuts) == 1 else None
