"""A sheet that describes several parts one after the other: which items speak of which part."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field

from extract.entries import Entry, Item, Listing, Text
from extract.identity import package_in, unfolded
from extract.lines import begins_with_part, speaks_of_all, without_number
from extract.meaning import identity_words, meaning, part_tokens
from extract.prose import loose_in_prose

LEAST_ENTRIES = 3


@dataclass(slots=True)
class Section:
    """Items under one part's heading; `name` None for what stands before the first and speaks of all."""

    name: str | None
    items: list[Item] = field(default_factory=list)

    @property
    def weight(self) -> int:
        """How many labelled values it holds."""
        return sum(_weight(item) for item in self.items)


def _weight(item: Item) -> int:
    if isinstance(item, Text):
        return len(loose_in_prose(item.piece)) if begins_with_part(item.piece.text) else 0
    return int(isinstance(item, Entry) and meaning(item.label.text).head is not None)


def sections(items: Sequence[Item]) -> list[Section]:
    """One section for each part where headings name several, the common one first; else everything in one."""
    found = [Section(None)]
    for item in items:
        if isinstance(item, Text) and found[-1].name is not None and speaks_of_all(item.piece.text):
            found.append(Section(None))
        name = _names(item)
        if name is not None and name != found[-1].name:
            found.append(Section(name))
        found[-1].items.append(item)
    return _merged(found)


def _names(item: Item) -> str | None:
    """The part number that a heading, a title or a labelled value begins a new part with."""
    if isinstance(item, Entry):
        if meaning(item.label.text).identity != "part_number" or not item.values or len(item.values) > 1:
            return None
        tokens = part_tokens(item.values[0].piece.text)
        return tokens[0] if len(tokens) == 1 else None
    if not isinstance(item, Text):
        return None
    return _named_in_heading(item)


def _named_in_heading(item: Text) -> str | None:
    segments = [segment.text for segment in item.segments] or [item.piece.text]
    text = without_number(unfolded(segments[0]))
    tokens = part_tokens(text)
    lowered = text.casefold()
    if (
        len(tokens) != 1
        or (len(text) > 80 and not begins_with_part(text))
        or any(word in lowered for word in identity_words()["not_parts"]["elsewhere"])
    ):
        return None
    at = text.find(tokens[0])
    if (
        at == 0
        or item.heading
        or package_in(text)
        or any(word in lowered for word in identity_words()["crystal"]["words"])
    ):
        before = lowered[:at].rstrip(" :#.(-")
        return None if any(before.endswith(word) for word in identity_words()["not_parts"]["before"]) else tokens[0]
    return None


def _merged(found: list[Section]) -> list[Section]:
    """Sections of one name together; a heading without values of its own belongs to the section above it."""
    by_name: dict[str | None, Section] = {}
    last: Section | None = None
    for section in found:
        holds = section.weight >= LEAST_ENTRIES or any(isinstance(item, Listing) for item in section.items)
        if section.name in by_name:
            target = by_name[section.name]
        elif section.name is None or holds or last is None:
            target = by_name.setdefault(section.name, Section(section.name))
        else:
            target = last
        target.items += section.items
        last = target
    named = [section for section in by_name.values() if section.name is not None and section.weight >= LEAST_ENTRIES]
    if len(named) < 2:
        return [Section(None, [item for section in found for item in section.items])]
    return list(by_name.values())
