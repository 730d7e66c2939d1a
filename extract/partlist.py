"""The parts of a long list: a sequence that makes each part when asked for it, and its columns for who needs numbers.

What a row says of a field hangs on the texts of few cells, and these repeat. So a list keeps each distinct statement
once, as a template without a place, and for each part which one is its own.
"""

from __future__ import annotations

from array import array
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, field
from functools import cached_property
from itertools import groupby
from operator import attrgetter
from typing import TYPE_CHECKING, Generic, Literal, NamedTuple, TypeVar, overload

from extract.fields import fields
from extract.model import Attributes, MadeParts, Part, Reading, Where, lean, made, moved

if TYPE_CHECKING:
    from extract.documents.grid import TextRow

NOWHERE = lean(Where())
Kind = TypeVar("Kind")


class Identity(NamedTuple):
    """What a part is, besides its number."""

    maker: str | None
    package: str | None
    mode: str | None
    cut: str | None
    resonance: Literal["load", "series"] | None


class Template(NamedTuple):
    """What one field says of a part, and for each reading the column of its cell; None: it has its place already."""

    readings: tuple[Reading, ...]
    columns: tuple[int | None, ...]


SILENCE = Template((), ())


@dataclass(slots=True)
class Shared(Generic[Kind]):
    """What repeats from part to part: the distinct ones, and which of them is each part's."""

    index: array[int] = field(default_factory=lambda: array("i"))
    distinct: list[Kind] = field(default_factory=list)

    def extend(self, other: Shared[Kind]) -> None:
        """The parts of the other behind these."""
        before = len(self.distinct)
        self.index.extend(array("i", [before + at for at in other.index]) if before else other.index)
        self.distinct += other.distinct

    def copy(self) -> Shared[Kind]:
        """The same, to be changed by itself."""
        return Shared(self.index[:], list(self.distinct))

    def put(self, at: int, one: Kind) -> None:
        """Give part `at` another one."""
        if one not in self.distinct:
            self.distinct.append(one)
        self.index[at] = self.distinct.index(one)


@dataclass(frozen=True, slots=True)
class Stated:
    """One field over all parts: `index` (parts,) says which template is each part's; the first one says nothing.

    The readings of a template have the place `NOWHERE`, save those that the sheet states for all parts elsewhere.
    """

    index: array[int]
    templates: Sequence[tuple[Reading, ...]]


@dataclass(slots=True)
class Chunk:
    """Some parts in the order read; `rows` says where the cells of each stand.

    `whole`: one part that was put together by itself, in the place of a row.
    """

    numbers: list[str | None]
    rows: list[TextRow | None]
    identity: Shared[Identity]
    grade: Shared[Attributes]
    fields: dict[str, Shared[Template]]
    whole: Part | None = None

    @classmethod
    def of_part(cls, part: Part) -> Chunk:
        """A part that is kept as it is."""
        stated = {
            name: Shared(array("i", [1]), [SILENCE, _template(tuple(readings))])
            for name, readings in groupby(part.readings, attrgetter("field"))
        }
        identity = Identity(part.maker, part.package, part.mode, part.cut, part.resonance)
        first = array("i", [0])
        grade = Shared(first, [part.attributes])
        return cls([part.part_number], [None], Shared(first, [identity]), grade, stated, part)


def _template(readings: tuple[Reading, ...]) -> Template:
    bare = tuple(moved(reading, NOWHERE) for reading in readings)
    return Template(bare, (None,) * len(bare))


class PartList(MadeParts):
    """Parts in the order read.

    Attributes
    ----------
    part_numbers : (parts,)
    identity, grade
        Which of the distinct identities and attributes is each part's.
    placed
        For each field that some part states, in the contract's order, which template is each part's; the first of the
        templates says nothing.
    rows : (parts,)
        The row of each part; None where `kept` has the part.
    """

    def __init__(self, chunks: Sequence[Chunk]) -> None:
        self.part_numbers: list[str | None] = []
        self.rows: list[TextRow | None] = []
        self.kept: dict[int, Part] = {}
        self.identity: Shared[Identity] = Shared()
        self.grade: Shared[Attributes] = Shared()
        for chunk in chunks:
            if chunk.whole is not None:
                self.kept[len(self)] = chunk.whole
            self.part_numbers += chunk.numbers
            self.rows += chunk.rows
            self.identity.extend(chunk.identity)
            self.grade.extend(chunk.grade)
        stated = {name for chunk in chunks for name in chunk.fields}
        self.placed = {name: _joined(name, chunks) for name in fields() if name in stated}

    @cached_property
    def stated(self) -> Mapping[str, Stated]:
        """What the parts state of each field that some part states."""
        return {name: _without_columns(placed) for name, placed in self.placed.items()}

    def readings(self, at: int, name: str) -> tuple[Reading, ...]:
        """What part `at` states of a field, with its places."""
        if (part := self.kept.get(at)) is not None:
            return tuple(reading for reading in part.readings if reading.field == name)
        placed = self.placed.get(name)
        return () if placed is None else tuple(self._in_place(at, placed.distinct[placed.index[at]]))

    def _in_place(self, at: int, template: Template) -> Iterator[Reading]:
        row = self.rows[at]
        for reading, column in zip(*template, strict=True):
            if column is None or row is None:
                yield reading
            else:
                yield moved(reading, row.placer(row.number, column))

    def _part(self, at: int) -> Part:
        if (part := self.kept.get(at)) is not None:
            return part
        said = (placed.distinct[placed.index[at]] for placed in self.placed.values())
        identity = self.identity.distinct[self.identity.index[at]]
        return made(
            Part,
            {
                "part_number": self.part_numbers[at],
                **identity._asdict(),
                "attributes": self.grade.distinct[self.grade.index[at]],
                "readings": tuple(reading for template in said for reading in self._in_place(at, template)),
            },
        )

    def __len__(self) -> int:
        return len(self.part_numbers)

    @overload
    def __getitem__(self, index: int) -> Part: ...
    @overload
    def __getitem__(self, index: slice) -> tuple[Part, ...]: ...
    def __getitem__(self, index: int | slice) -> Part | tuple[Part, ...]:
        if isinstance(index, slice):
            return tuple(map(self._part, range(*index.indices(len(self)))))
        return self._part(range(len(self))[index])

    def __iter__(self) -> Iterator[Part]:
        return map(self._part, range(len(self)))

    def __eq__(self, other: object) -> bool:
        if not isinstance(other, PartList | tuple | list):
            return NotImplemented
        return len(self) == len(other) and all(mine == theirs for mine, theirs in zip(self, other, strict=True))

    def __hash__(self) -> int:
        return hash(tuple(self.part_numbers))

    def __repr__(self) -> str:
        return f"<{len(self)} parts>"


def together(parts: Sequence[Part | Chunk]) -> Sequence[Part]:
    """Parts one behind the other, as they are where none of them comes from a long list."""
    if not any(isinstance(each, Chunk) for each in parts):
        return [each for each in parts if isinstance(each, Part)]
    return PartList([each if isinstance(each, Chunk) else Chunk.of_part(each) for each in parts])


def numbers_without(parts: Sequence[Part], name: str) -> list[str | None]:
    """The numbers of the parts that state nothing of a field."""
    if not isinstance(parts, PartList):
        return [part.part_number for part in parts if not any(each.field == name for each in part.readings)]
    if name not in parts.placed:
        return parts.part_numbers
    index = parts.placed[name].index
    return [number for number, at in zip(parts.part_numbers, index, strict=True) if at == 0]


def _joined(name: str, chunks: Sequence[Chunk]) -> Shared[Template]:
    """One field over all chunks; the first template says nothing, as in each of them."""
    joined: Shared[Template] = Shared(array("i"), [SILENCE])
    known: dict[Template, int] = {SILENCE: 0}
    for chunk in chunks:
        own = chunk.fields.get(name)
        if own is None:
            joined.index.frombytes(bytes(joined.index.itemsize * len(chunk.numbers)))
            continue
        new = [known.setdefault(template, len(known)) for template in own.distinct]
        joined.distinct += list(known)[len(joined.distinct) :]
        same = new == list(range(len(new)))
        joined.index.extend(own.index if same else array("i", map(new.__getitem__, own.index)))
    return joined


def _without_columns(placed: Shared[Template]) -> Stated:
    """The templates as readings alone, each distinct one once."""
    known: dict[tuple[Reading, ...], int] = {}
    new = [known.setdefault(template.readings, len(known)) for template in placed.distinct]
    same = len(known) == len(new)
    return Stated(placed.index if same else array("i", map(new.__getitem__, placed.index)), list(known))


def part_numbers(parts: Sequence[Part]) -> list[str | None]:
    """The number of each part; of a long list no part is made for it."""
    return parts.part_numbers if isinstance(parts, PartList) else [part.part_number for part in parts]


def doubted(parts: Sequence[Part]) -> dict[int, int]:
    """Which parts have readings that a person must look at, in their order, and how many each."""
    counts: dict[int, int] = {}
    if not isinstance(parts, PartList):
        for at, part in enumerate(parts):
            if count := _doubts(part.readings):
                counts[at] = count
        return counts
    for placed in parts.placed.values():
        doubtful = {number: _doubts(template.readings) for number, template in enumerate(placed.distinct)}
        if any(doubtful.values()):
            for at, number in enumerate(placed.index):
                if doubtful[number]:
                    counts[at] = counts.get(at, 0) + doubtful[number]
    return dict(sorted(counts.items()))


def _doubts(readings: Sequence[Reading]) -> int:
    return sum(reading.check is not None for reading in readings)


def exchanged(parts: Sequence[Part], changed: Mapping[int, Part]) -> Sequence[Part]:
    """The parts with some exchanged for others, by their places; a long list stays one."""
    if not isinstance(parts, PartList):
        return tuple(changed.get(at, part) for at, part in enumerate(parts))
    made = PartList([])
    made.part_numbers, made.rows, made.kept = list(parts.part_numbers), list(parts.rows), {**parts.kept, **changed}
    made.identity, made.grade = parts.identity.copy(), parts.grade.copy()
    placed = {name: shared.copy() for name, shared in parts.placed.items()}
    for at, part in changed.items():
        own = Chunk.of_part(part)
        made.part_numbers[at], made.rows[at] = part.part_number, None
        made.identity.put(at, own.identity.distinct[0])
        made.grade.put(at, part.attributes)
        for name in own.fields.keys() - placed.keys():
            placed[name] = Shared(array("i", bytes(array("i").itemsize * len(parts))), [SILENCE])
        for name, shared in placed.items():
            shared.put(at, own.fields[name].distinct[1] if name in own.fields else SILENCE)
    made.placed = {name: placed[name] for name in fields() if name in placed}
    return made
