"""What changed between two revisions of a sheet, and whether it matters: the data contract's section 7."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, replace
from typing import Any

from compare.bench import Bench
from compare.footprint import plain, same_package
from compare.offer import Offer, make_offer, match_frequency, named
from compare.reckoning import Reckoning, bench_notes, choose_loads, reckon_offers
from compare.relations import Relation, reading_value, reading_words, relation, rules
from compare.stated import Span, Taken, printed, span_of
from compare.swap_lines import grade_relation
from compare.swap_verdict import rests_on, settles
from compare.verdict import MEETS, WORDS
from extract.model import Pads, Part, Reading, SpecSheet, When

SCHEMA = "quartzfolio/changes/1"
IDENTITY = {"package": "package", "mode": "mode", "cut": "cut", "resonance": "resonance", "maker": "maker"}
ATTRIBUTES = {
    "pads": "pads",
    "aec_q200": "AEC-Q200",
    "moisture_level": "moisture level",
    "reflow_peak_c": "reflow peak temperature",
    "status": "life-cycle status",
    "price": "price",
    "lead_time": "lead time",
}
KEYS = (
    "part_number",
    "field",
    "when",
    "old",
    "new",
    "relation",
    "matters",
    "message",
    "where_old",
    "where_new",
)
ON_EVERY_BOARD = ("part_number", "package", "pads")
"""Properties whose change touches any board."""


@dataclass(frozen=True)
class Change:
    """One difference; `matters` is settled by the bench, where there is one."""

    part_number: str | None
    field: str
    when: dict[str, Any]
    old: Any
    new: Any
    relation: Relation
    message: str
    where_old: dict[str, Any] | None = None
    where_new: dict[str, Any] | None = None
    readings: tuple[Reading, ...] = ()
    matters: bool = True

    def as_json(self) -> dict[str, Any]:
        return {name: getattr(self, name) for name in KEYS}


def changes(old_sheets: Sequence[SpecSheet], new_sheets: Sequence[SpecSheet], bench: Bench | None) -> dict[str, Any]:
    """Every reading that differs between two revisions, part by part, seen from the old one; JSON-ready."""
    lines: list[Change] = []
    notes: list[str] = []
    pairs = paired_parts(old_sheets, new_sheets)
    if bench is not None and not _on_this_bench(pairs, bench):
        asked = f"{bench.requirement.frequency_mhz:.10g} MHz"
        notes.append(f"no part of either revision offers the bench's {asked}: every line counts as one that matters")
        bench = None
    elif bench is None:
        notes.append("no bench given: every line counts as one that matters")
    else:
        notes += [str(note["message"]) for note in bench_notes(bench)]
    for old, new in pairs:
        found = [*_between(old, new)]
        if bench is not None:
            found, said = _marked(found, old, new, bench)
            notes += said
        lines += found
    if not lines:
        notes = ["no reading differs"]
    return {
        "schema": SCHEMA,
        "lines": [line.as_json() for line in lines],
        "notes": [{"level": "info", "message": text, "where": None} for text in notes],
    }


Placed = tuple[SpecSheet, Part]


def _on_this_bench(pairs: Sequence[tuple[Placed | None, Placed | None]], bench: Bench) -> bool:
    """False where the bench is of another frequency than all that is compared: it can tell nothing of them."""
    asked = bench.requirement.frequency_mhz
    parts = [placed[1] for pair in pairs for placed in pair if placed is not None]
    return any(match_frequency(part, asked).printed_mhz is not None for part in parts)


def paired_parts(old: Sequence[SpecSheet], new: Sequence[SpecSheet]) -> list[tuple[Placed | None, Placed | None]]:
    """Parts of the same number; where each side has one part alone they belong together whatever they are called."""
    before = [(sheet, part) for sheet in old for part in sheet.parts]
    after = [(sheet, part) for sheet in new for part in sheet.parts]
    if len(before) == len(after) == 1:
        return [(before[0], after[0])]
    pairs: list[tuple[Placed | None, Placed | None]] = []
    left = list(after)
    for one in before:
        found = next((other for other in left if _number(other) == _number(one)), None)
        if found is not None:
            left.remove(found)
        pairs.append((one, found))
    return pairs + [(None, other) for other in left]


def _number(placed: Placed) -> str:
    return plain(placed[1].part_number or "")


def _between(old: Placed | None, new: Placed | None) -> Iterator[Change]:
    if old is None or new is None:
        yield _come_or_gone(old, new)
        return
    before, after = old[1], new[1]
    number = after.part_number or before.part_number
    if plain(before.part_number or "") != plain(after.part_number or ""):
        message = f"part number: {after.part_number} for {before.part_number}"
        yield Change(number, "part_number", {}, before.part_number, after.part_number, "different", message)
    yield from _identity_changes(before, after, number)
    for field in rules():
        yield from _field_changes(field, before, after, number)


def _come_or_gone(old: Placed | None, new: Placed | None) -> Change:
    placed = old or new
    assert placed is not None  # noqa: S101
    number = placed[1].part_number
    said = "no longer on the sheet" if new is None else "not on the old sheet"
    message = f"part {number or 'without a number'}: {said}"
    return Change(number, "part_number", {}, number if old else None, number if new else None, "different", message)


def _identity_changes(old: Part, new: Part, number: str | None) -> Iterator[Change]:
    for name, called in IDENTITY.items():
        before, after = getattr(old, name), getattr(new, name)
        same = name == "package" and before is not None and after is not None and same_package(before, after)
        if not same and plain(before or "") != plain(after or ""):
            found: Relation = "unknown" if before is None or after is None else "different"
            yield Change(number, name, {}, before, after, found, _words(called, before, after))
    for name, called in ATTRIBUTES.items():
        before, after = getattr(old.attributes, name), getattr(new.attributes, name)
        if before == after:
            continue
        found = grade_relation(name, before, after)
        said = _pads_json(before), _pads_json(after)
        yield Change(number, name, {}, said[0], said[1], found, _words(called, *said))


def _pads_json(value: Any) -> Any:
    return value.model_dump(mode="json") if isinstance(value, Pads) else value


def _words(called: str, old: Any, new: Any) -> str:
    if old is None:
        return f"{called}: {new}, not stated before"
    return f"{called}: {old} before, no longer stated" if new is None else f"{called}: {new} for {old}"


def _field_changes(field: str, old: Part, new: Part, number: str | None) -> Iterator[Change]:
    """Readings that say the same cancel out; of the rest those that hold in the same case belong together."""
    before = [r for r in old.readings if r.field == field]
    after = [r for r in new.readings if r.field == field]
    for one in list(before):
        same = next((other for other in after if _says_the_same(one, other)), None)
        if same is not None:
            before.remove(one)
            after.remove(same)
    for one in list(before):
        other = next((r for r in after if r.when == one.when), None)
        if other is not None:
            before.remove(one)
            after.remove(other)
            yield _reading_change(number, one, other)
    if len(before) == len(after) == 1:
        yield _reading_change(number, before[0], after[0])
        return
    yield from (_reading_change(number, one, None) for one in before)
    yield from (_reading_change(number, None, other) for other in after)


def _says_the_same(one: Reading, other: Reading) -> bool:
    return one.when == other.when and _bounds(one) == _bounds(other)


def _bounds(reading: Reading) -> tuple[Any, ...]:
    """A bare value is the same whether it is read as typical or as the limit."""
    bare = reading.bare is True
    only = next((v for v in (reading.max, reading.typ) if v is not None), None) if bare else None
    return (only,) if bare else (reading.min, reading.typ, reading.max, reading.options)


def _reading_change(number: str | None, old: Reading | None, new: Reading | None) -> Change:
    one = new or old
    assert one is not None  # noqa: S101
    found = reading_relation(old, new)
    return Change(
        part_number=number,
        field=one.field,
        when=_when_json(one.when),
        old=None if old is None else reading_value(old),
        new=None if new is None else reading_value(new),
        relation=found,
        message=_message(old, new, found),
        where_old=None if old is None else old.where.model_dump(mode="json"),
        where_new=None if new is None else new.where.model_dump(mode="json"),
        readings=tuple(r for r in (old, new) if r is not None),
    )


def _when_json(when: When) -> dict[str, Any]:
    written: dict[str, Any] = when.model_dump(mode="json")
    return written


def reading_relation(old: Reading | None, new: Reading | None) -> Relation:
    """How a reading stands to the one it replaces; where they hold in different cases, or offer a choice: different."""
    if old is None or new is None:
        return "unknown"
    if old.when != new.when or old.options != new.options:
        return "different"
    found = relation(old.field, as_taken(old), as_taken(new))
    return "different" if found == "same" else found


def as_taken(reading: Reading) -> Taken:
    """A reading as it is taken by itself; the rated drive is its limit."""
    values = printed(reading)
    if not values:
        return Taken(readings=(reading,))
    typical_only = reading.max is None and not reading.options and reading.bare is not True
    if reading.field == "drive_level_uw":
        rated = next((v for v in (reading.max, reading.typ) if v is not None), max(values))
        return Taken(Span.at(rated), (reading,))
    return Taken(span_of(reading), (reading,), typical_only=typical_only)


def _message(old: Reading | None, new: Reading | None, found: Relation) -> str:
    one = new or old
    assert one is not None  # noqa: S101
    name = rules()[one.field].name
    if old is None:
        return f"{name}: {reading_words(one)} ({one.where}), not stated before"
    if new is None:
        return f"{name}: {reading_words(one)} ({one.where}) before, no longer stated"
    stands = "" if found in ("unknown", "different") else f", {found}"
    elsewhere = "; it holds in another case than before" if old.when != new.when else ""
    if found == "unknown":
        elsewhere = "; typical with no limit against a limit: how they stand cannot be told"
    return f"{name}: {reading_words(new)} ({new.where}) for {reading_words(old)} ({old.where}){stands}{elsewhere}"


def _marked(
    lines: Sequence[Change], old: Placed | None, new: Placed | None, bench: Bench
) -> tuple[list[Change], list[str]]:
    """Lines with `matters` on this bench: where they change how a requirement stands, or are why it is not met."""
    if old is None or new is None:
        placed = old or new
        assert placed is not None  # noqa: S101
        offered = match_frequency(placed[1], bench.requirement.frequency_mhz).printed_mhz is not None
        return [replace(line, matters=offered) for line in lines], []
    offers = [_offer(placed, bench) for placed in (old, new)]
    if offers[0] is None or offers[1] is None:
        one_only = offers[0] is not offers[1]
        marked = [replace(line, matters=one_only and line.field == "frequency_mhz") for line in lines]
        gone = "neither revision offers" if not one_only else "only one of the revisions offers"
        return marked, [f"{named(*new)}: {gone} {bench.requirement.frequency_mhz:.10g} MHz"]
    both = (offers[0], offers[1])
    reckoning = reckon_offers(choose_loads(both, bench), bench)
    return [_marked_line(line, both, reckoning) for line in lines], []


def _offer(placed: Placed, bench: Bench) -> Offer | None:
    match = match_frequency(placed[1], bench.requirement.frequency_mhz)
    return None if match.printed_mhz is None else make_offer(*placed, match, bench)


def _marked_line(line: Change, offers: tuple[Offer, Offer], reckoning: Reckoning) -> Change:
    if line.field in ON_EVERY_BOARD:
        return replace(line, matters=True)
    if line.readings and not _is_used(line, offers):
        return replace(line, matters=False, message=f"{line.message}; not used on this bench")
    at_load = reckoning.bench.crystal.esr_means == "at load"
    stands: dict[str, tuple[int, int]] = {}
    for one in reckoning.judged.values():
        if line.field in rests_on(one.about, at_load) or line.field == one.about:
            before, after = (int(one.verdict[at]) if one.asked[at] else MEETS for at in (0, 1))
            stands[one.about] = (before, after)
    moved = {about: pair for about, pair in stands.items() if settles(line.field, line.relation, about, *pair)}
    return replace(line, matters=bool(moved), message=f"{line.message}; {_outcome(stands, moved)}")


def _outcome(stands: Mapping[str, tuple[int, int]], moved: Mapping[str, tuple[int, int]]) -> str:
    if not stands:
        return "no requirement of this bench rests on it"
    if not moved:
        return "no verdict of this bench turns on it"
    told = (f"{about} {WORDS[after]}, {WORDS[before]} before" for about, (before, after) in moved.items())
    return "; ".join(told)


def _is_used(line: Change, offers: tuple[Offer, Offer]) -> bool:
    """True where a reading of the line is one that the bench's case takes, in either revision."""
    if line.field == "frequency_mhz":
        return True
    takens = [taken for offer in offers for taken in offer.taken().values()]
    takens += [taken for offer in offers for at in offer.at for taken in (at.esr, at.shunt_capacitance)]
    used = [reading for taken in takens for reading in taken.readings]
    return any(any(reading is other for other in used) for reading in line.readings)
