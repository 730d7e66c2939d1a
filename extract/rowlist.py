"""Long listings of parts, read by column: each distinct text of a column once, by the same steps as a single row.

What a part states of one field hangs on few cells: those that speak of the field, and where a value holds in a band or
a mode, those for the frequency or the mode as well. Each distinct set of such texts goes once through the steps that a
row goes through by itself (`row_draft`, `inherit`, `chosen_of`, `own_doubt`, `TOGETHER`), in cells whose place is a
mark for their column. A row that these steps would have to see whole is left to them.
"""

from __future__ import annotations

from array import array
from collections.abc import Collection, Hashable, Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass, field, replace
from itertools import repeat, zip_longest
from typing import TypeVar

from extract import plausible, trace
from extract.attributes import attributes_of
from extract.bandrows import merged_row_drafts
from extract.candidates import Candidate
from extract.documents.grid import TextRow
from extract.drafts import Draft
from extract.entries import Listing, Piece
from extract.fields import fields
from extract.finish import cut_of, identity_of, in_one_mode, inherit, lacks_crystal, mode_of
from extract.identity import speaks_of_a_crystal
from extract.lists import SENTENCES, ListColumn, columns_of, lists_parts, named_draft, row_draft
from extract.model import Attributes, Reading, Where
from extract.partlist import NOWHERE, SILENCE, Chunk, Identity, Shared, Template
from extract.readings import CHOSEN_TOGETHER, chosen_of, reading_of
from extract.refusals import refusal
from extract.rownames import part_names, telling, words_in

LEAST_ROWS = 200
"""Of a shorter list nobody would notice the time."""
FREQUENCY, LOAD = "frequency_mhz", "load_capacitance_pf"
FORK_FIELDS = ("turnover_temperature_c", "parabolic_coefficient_ppm_per_c2")
# The cell of a place that stands for a column; no file has a cell of that name.
_MARK = "\0"

Kind = TypeVar("Kind")
Key = TypeVar("Key", bound=Hashable)


def numbered(keys: Iterable[Key]) -> tuple[list[int], list[Key]]:
    """Which of the distinct keys each one is, and these in the order met."""
    listed = list(keys)
    known = {key: number for number, key in enumerate(dict.fromkeys(listed))}
    return list(map(known.__getitem__, listed)), list(known)


def cases_of(*columns: Iterable[int]) -> tuple[list[int], list[tuple[int, ...]]]:
    """Which case each row is, and the distinct cases, one number of each column in them."""
    if len(columns) != 1:
        return numbered(zip(*columns, strict=True))
    ids, cases = numbered(columns[0])
    return ids, [(case,) for case in cases]


def long_list(listing: Listing) -> LongList | None:
    """A listing to be read by column; None where it is short, or its rows are no parts with one number each."""
    if len(listing.rows) < LEAST_ROWS or trace.asked():
        return None
    columns = columns_of(listing)
    numbers = [column for column in columns if column.use == "part_number"]
    if len(numbers) != 1 or numbers[0].when.temperature_c is not None or not lists_parts(listing, columns):
        return None
    if merged_row_drafts(listing, columns):
        return None
    return LongList(listing, columns, numbers[0])


@dataclass(slots=True)
class _Said:
    """The distinct texts of a column and what each says; the first is the empty one and says nothing.

    `contexts`: what it says besides values, as a number, 0 where that is nothing; `speaker` a text of each.
    """

    column: ListColumn
    ids: list[int]
    candidates: list[tuple[Candidate, ...]]
    contexts: list[int]
    attributes: list[tuple[tuple[str, str], ...]]
    speaker: list[Piece | None]

    @property
    def sentences(self) -> bool:
        return self.column.label is None and self.column.use in SENTENCES

    def where(self, told: Sequence[object]) -> list[int]:
        """The texts' numbers, 0 for those of which nothing is told."""
        if all(told[1:]):
            return self.ids
        kept = [number if each else 0 for number, each in enumerate(told)]
        return [kept[number] for number in self.ids]


def _read_column(column: ListColumn, texts: Sequence[str], known: frozenset[str]) -> _Said:
    mark = Where(cell=_MARK, line=column.index)
    ids, distinct = numbered(["", *texts])
    said = _Said(column, ids[1:], [()], [0], [()], [None])
    contexts: dict[tuple[object, ...], int] = {_context(Draft(), ""): 0}
    for text in distinct[1:]:
        cell = Piece(text, mark)
        draft = row_draft([*repeat(None, column.index), cell], [column], "", known)
        told = _context(draft, text if said.sentences else "")
        if told not in contexts:
            said.speaker.append(cell)
        said.candidates.append(tuple(draft.candidates))
        said.contexts.append(contexts.setdefault(told, len(contexts)))
        said.attributes.append(tuple(draft.attributes.items()))
    return said


def _context(draft: Draft, text: str) -> tuple[object, ...]:
    """What a draft says besides values and attributes. A sentence that names something counts as itself."""
    named = (draft.maker, draft.package, draft.part_number)
    return (
        *(frozenset(each) for each in (draft.modes, draft.offered_modes, draft.cuts, draft.resonance)),
        *named,
        text if any(named) else "",
        words_in(draft.texts),
        speaks_of_a_crystal(draft.texts),
        tuple(draft.by_subject),
    )


@dataclass(slots=True)
class _Cluster:
    """Fields whose candidates are chosen together: which distinct case each row is, and what is chosen in each case.

    `weights`: 2 for a field that a case states, 1 for one that it states without a label only.
    """

    names: tuple[str, ...]
    ids: list[int] = field(default_factory=list)
    own: list[list[Candidate]] = field(default_factory=list)
    chosen: list[dict[str, tuple[Candidate, ...]]] = field(default_factory=list)
    weights: list[dict[str, int]] = field(default_factory=list)


class LongList:
    """The rows of a long listing, each a part with a number of its own.

    `names`: the part number of each, None where a row names no part. `alone`: rows that are read by themselves.
    `general`: what the sheet states for all of them.
    """

    def __init__(self, listing: Listing, columns: list[ListColumn], number: ListColumn) -> None:
        self.general = Draft()
        self._listing = listing
        self._columns = columns
        self._number = number
        plain = [row.texts if isinstance(row, TextRow) else () for row in listing.rows]
        texts = list(zip_longest(*plain, fillvalue=""))
        blank = ("",) * len(plain)
        by_column = [texts[at] if at < len(texts) else blank for at in range(len(columns))]
        self._said = self._read_columns(by_column)
        self._numbers = list(by_column[number.index])
        # Rows with merged cells are no row of texts.
        self.alone: set[int] = set()
        for at, row in enumerate(listing.rows):
            if not isinstance(row, TextRow):
                cell = row[number.index]
                self._numbers[at] = cell.text if cell is not None else ""
                self.alone.add(at)
        self.names = part_names(self._numbers)
        self._read_contexts()

    def _read_columns(self, texts: Sequence[Sequence[str]]) -> list[_Said]:
        """Every column; the sentences last, which are not asked for what another column states in each row."""
        nothing: frozenset[str] = frozenset()
        labelled = [each for each in self._columns if each.label is not None]
        said = [_read_column(each, texts[each.index], nothing) for each in labelled]
        known = self._in_every_row(said)
        others = [each for each in self._columns if each.label is None and each is not self._number]
        said += [_read_column(each, texts[each.index], known) for each in others]
        return sorted(said, key=lambda each: each.column.index)

    def _in_every_row(self, said: Sequence[_Said]) -> frozenset[str]:
        """Fields that one column states in every row of texts."""
        plain = [at for at, row in enumerate(self._listing.rows) if isinstance(row, TextRow)]
        known: set[str] = set()
        for each in said:
            used = {each.ids[at] for at in plain}
            fields_of: list[set[str]] = [{one.field for one in each.candidates[text]} for text in used]
            known |= set.intersection(*fields_of) if fields_of else set()
        return frozenset(known)

    # --- what a row says besides values

    def _read_contexts(self) -> None:
        said = [each for each in self._said if any(each.contexts)]
        sections, titles = numbered(self._listing.sections)
        rows = zip(sections, *(map(each.contexts.__getitem__, each.ids) for each in said), strict=True)
        self._context, cases = numbered(rows)
        self._drafts = [self._context_draft(titles[title], said, case) for title, *case in cases]
        self._telling = telling(self._numbers)
        self._beside_number = self._head_words()
        spoken = [speaks_of_a_crystal([*draft.texts, *self._beside_number]) for draft in self._drafts]
        crystal = [spoken[case] for case in self._context]
        for at, name in enumerate(self.names):
            if at in self.alone:
                crystal[at] = name is not None and speaks_of_a_crystal(self._alone(at).texts)
            elif self._telling and self._numbers[at] in self._telling:
                crystal[at] = crystal[at] or self._telling[self._numbers[at]][1]
        self._mixed = any(each for each, name in zip(crystal, self.names, strict=True) if name is not None)
        self._crystal = crystal if self._mixed else [False] * len(crystal)

    def _context_draft(self, title: str, said: Sequence[_Said], case: Sequence[int]) -> Draft:
        row: list[Piece | None] = [None] * len(self._columns)
        for each, context in zip(said, case, strict=True):
            row[each.column.index] = each.speaker[context]
        return row_draft(row, self._columns, title)

    def _head_words(self) -> list[str]:
        """What a stated part number's column says of the part by its head."""
        stated = (text for text, name in zip(self._numbers, self.names, strict=True) if name is not None)
        if (first := next(stated, None)) is None:
            return []
        row = [*repeat(None, self._number.index), Piece(first, NOWHERE)]
        return row_draft(row, [self._number], "").texts[1:]

    def _alone(self, at: int) -> Draft:
        return named_draft(self._listing, self._columns, at, self._number)

    def drafts(self) -> Iterator[Draft]:
        """What each row says by itself."""
        return (self._alone(at) for at, name in enumerate(self.names) if name is not None)

    # --- what it says of each field, once it is known what the sheet says of all

    def read(self, maker: str | None) -> None:
        """Read every row; `maker` is the one that the sheet names."""
        self._clusters = self._clustered()
        self._choose_all()
        self._settle_identity(maker)
        self._write_all()
        self._decide()

    def _clustered(self) -> list[_Cluster]:
        present = {each.field for said in self._said for several in said.candidates for each in several}
        present |= {each.field for each in self.general.candidates}
        joint = tuple(name for name in fields() if name in present and name in CHOSEN_TOGETHER)
        alone = [(name,) for name in fields() if name in present - CHOSEN_TOGETHER]
        # The frequency first: what holds in a band asks for it.
        alone.sort(key=lambda names: names != (FREQUENCY,))
        return [_Cluster(names) for names in [*alone, *([joint] if joint else [])]]

    def _choose_all(self) -> None:
        frequency = next((each for each in self._clusters if FREQUENCY in each.names), None)
        self._of_field: dict[str, list[int]] = {}
        self._chosen: dict[str, list[tuple[Candidate, ...]]] = {}
        for cluster in self._clusters:
            self._choose(cluster, frequency)
            names = {name for chosen in cluster.chosen for name in chosen}
            for name in (name for name in fields() if name in names):
                of_case, distinct = numbered([(), *(chosen.get(name, ()) for chosen in cluster.chosen)])
                self._of_field[name] = list(map(of_case[1:].__getitem__, cluster.ids))
                self._chosen[name] = distinct

    def _choose(self, cluster: _Cluster, frequency: _Cluster | None) -> None:
        told = [
            *self.general.candidates,
            *(each for one in self._said for several in one.candidates for each in several),
        ]
        banded = any(each.when.frequency_mhz is not None for each in _of(cluster.names, told))
        beside = frequency if banded and cluster is not frequency else None
        names = (*cluster.names, FREQUENCY) if beside else cluster.names
        moded = any(each.when.mode is not None for each in _of(names, told))
        said = [each for each in self._said if any(_of(cluster.names, several) for several in each.candidates)]
        said = [each for each in said if not each.sentences] + self._sentences(said)
        asked = [one.where([_of(cluster.names, several) for several in one.candidates]) for one in said]
        coupled = [*([self._context] if moded else []), *([beside.ids] if beside else [])]
        cluster.ids, cases = cases_of(*asked, *coupled) if asked or coupled else ([0] * len(self.names), [()])
        for case in cases:
            own = _own(cluster.names, said, case[: len(said)])
            draft = Draft(candidates=[*own, *(beside.own[case[-1]] if beside else ())])
            draft.modes = set(self._drafts[case[len(said)]].modes) if moded else set()
            self._choose_case(cluster, own, draft, names)

    def _sentences(self, said: Sequence[_Said]) -> list[_Said]:
        """The columns of sentences in the order in which a row asks them."""
        return [each for use in SENTENCES for each in said if each.sentences and each.column.use == use]

    def _choose_case(self, cluster: _Cluster, own: list[Candidate], draft: Draft, names: Collection[str]) -> None:
        inherit(draft, replace(self.general, candidates=_of(names, self.general.candidates)))
        chosen: dict[str, tuple[Candidate, ...]] = {}
        for each in chosen_of(in_one_mode(draft.candidates, mode_of(draft))):
            if each.field in cluster.names or each.field in CHOSEN_TOGETHER:
                chosen[each.field] = (*chosen.get(each.field, ()), each)
        weights: dict[str, int] = {}
        for each in _of(cluster.names, draft.candidates):
            weights[each.field] = max(weights.get(each.field, 0), 1 if each.source == "loose" else 2)
        cluster.own.append(own)
        cluster.chosen.append(chosen)
        cluster.weights.append(weights)

    def _settle_identity(self, maker: str | None) -> None:
        load = next((each for each in self._clusters if LOAD in each.names), None)
        example: dict[bool, list[Candidate]] = {False: [], True: []}
        states: list[tuple[bool, bool]] = [(False, False)]
        for own, chosen in zip(load.own, load.chosen, strict=True) if load else ():
            found = [each for each in own if each.source not in ("loose", "prose")]
            example[bool(found)] = found
            states.append((bool(found), LOAD in chosen))
        of_row = [states[case + 1] for case in load.ids] if load else repeat(states[0], len(self.names))
        ids, cases = numbered(zip(self._context, of_row, strict=True))
        plain = replace(self.general, candidates=[])
        identities: list[Identity] = []
        for context, (labelled, loads) in cases:
            draft = self._settled(context, example[labelled], plain)
            identities.append(identity_of(draft, maker, loads=loads))
        self.identity = Shared(array("i", ids), identities)
        settled = [self._settled(context, [], plain) for context in range(len(self._drafts))]
        kinds = [(cut_of(draft), mode_of(draft)) for draft in settled]
        of_context, self._kinds = numbered(kinds)
        self._kind = list(map(of_context.__getitem__, self._context))
        offered = {context for context, draft in enumerate(settled) if len(draft.offered_modes) > 1}
        self.alone |= {at for at, context in enumerate(self._context) if context in offered} if offered else set()

    def _settled(self, context: int, candidates: list[Candidate], general: Draft) -> Draft:
        """What the rows of a context are, with what is said of all parts."""
        known = self._drafts[context]
        draft = replace(known, candidates=list(candidates), modes=set(known.modes), cuts=set(known.cuts))
        draft.resonance, draft.attributes = set(known.resonance), {}
        inherit(draft, general)
        return draft

    # --- readings

    def _write_all(self) -> None:
        self._first = {
            name: [reading_of(chosen[0], None) if chosen else None for chosen in self._chosen[name]]
            for name in self._of_field
        }
        self._fork, self._forks = numbered(self._each_fork())
        self.fields = {name: self._written(name) for name in fields() if name in self._of_field}
        for (at, name), sentence in self._contradictions().items():
            chosen, fork = self._chosen[name][self._of_field[name][at]], self._forks[self._fork[at]]
            shared = self.fields[name]
            template = _template(chosen, fork, sentence)
            if template not in shared.distinct[-1:]:
                shared.distinct.append(template)
            shared.index[at] = len(shared.distinct) - 1
        for shared in self.fields.values():
            placed = {number for number, each in enumerate(shared.distinct) if _names_a_mark(each)}
            if placed:
                self.alone |= {at for at, number in enumerate(shared.index) if number in placed}

    def _each_fork(self) -> Iterator[bool | None]:
        """Whether each row is a tuning fork."""
        asked = [name for name in (FREQUENCY, *FORK_FIELDS) if name in self._of_field]
        ids, cases = numbered(zip(self._kind, *(self._of_field[name] for name in asked), strict=True))
        found: list[bool | None] = []
        for kind, *chosen in cases:
            readings = [
                reading_of(each, None)
                for name, number in zip(asked, chosen, strict=True)
                for each in self._chosen[name][number]
            ]
            found.append(plausible.is_fork(readings, self._kinds[kind][0]))
        return map(found.__getitem__, ids)

    def _written(self, name: str) -> Shared[Template]:
        several = [self._fork] if len(self._forks) > 1 else []
        ids, cases = cases_of(self._of_field[name], *several)
        templates = [SILENCE]
        place: list[int] = []
        for number, *forks in cases:
            chosen = self._chosen[name][number]
            place.append(len(templates) if chosen else 0)
            if chosen:
                templates.append(_template(chosen, self._forks[forks[0] if forks else 0], None))
        return Shared(array("i", map(place.__getitem__, ids)), templates)

    def _contradictions(self) -> dict[tuple[int, str], str]:
        """For a row and a field the sentence that its first reading contradicts another field."""
        found: dict[tuple[int, str], str] = {}
        for names, contradiction in plausible.TOGETHER:
            if not all(name in self._of_field for name in names):
                continue
            columns = (self._of_field[name] for name in names)
            ids, cases = numbered(zip(self._kind, self._fork, *columns, strict=True))
            doubts: list[list[tuple[int, str]]] = []
            for kind, fork, *chosen in cases:
                first = [self._first[name][number] for name, number in zip(names, chosen, strict=True)]
                readings = [each for each in first if each is not None]
                complete = len(readings) == len(names)
                cut, mode = self._kinds[kind]
                doubts.append(contradiction(readings, cut, mode, self._forks[fork]) if complete else [])
            if any(doubts):
                for at, case in enumerate(ids):
                    for index, sentence in doubts[case]:
                        found.setdefault((at, names[index]), sentence)
        return found

    # --- which rows are parts

    def _decide(self) -> None:
        self.grade = self._graded()
        texts = [[*draft.texts, *self._beside_number] for draft in self._drafts]
        refused = [refusal(each, least=1) for each in texts]
        self._refused = list(map(refused.__getitem__, self._context))
        for at, number in enumerate(self._numbers) if self._telling else ():
            if number in self._telling:
                self._refused[at] = refusal([*texts[self._context[at]], number], least=1)
        weights = [
            map([weight.get(name, 0) for weight in each.weights].__getitem__, each.ids)
            for each in self._clusters
            for name in each.names
        ]
        names = [name for each in self._clusters for name in each.names]
        ids, cases = numbered(zip(self._crystal, *weights, strict=True))
        self._stated = [
            {name for name, weight in zip(names, case, strict=True) if weight > (0 if crystal else 1)}
            for crystal, *case in cases
        ]
        self._shape = ids

    def _graded(self) -> Shared[Attributes]:
        said = [each for each in self._said if any(each.attributes)]
        said = [each for each in said if not each.sentences] + self._sentences(said)
        columns = []
        for each in said:
            of_text, _ = numbered(each.attributes)
            columns.append(map(of_text.__getitem__, each.ids))
        distinct = [numbered(each.attributes)[1] for each in said]
        ids, cases = numbered(zip(repeat(0, len(self.names)), *columns, strict=True))
        grades: list[Attributes] = []
        for _, *case in cases:
            stated: dict[str, str] = {}
            for several, number in zip(distinct, case, strict=True):
                stated = dict(several[number]) | stated
            grades.append(attributes_of(self.general.attributes | stated, self.general.lines))
        return Shared(array("i", ids), grades)

    def draft(self, at: int) -> Draft:
        """One row by itself, as a row of a short list is read."""
        draft = self._alone(at)
        if self._mixed:
            draft.crystal = speaks_of_a_crystal(draft.texts)
            draft.other = not draft.crystal
        inherit(draft, self.general)
        return draft

    def pieces(self, repeated: Mapping[str, int]) -> Iterator[Draft | RowRun]:
        """The rows in order: by themselves those that ask for it or whose number comes again, the others in runs.

        `repeated`: how often each number comes in the whole sheet that comes more than once. Of rows here that say the
        same of one number the first is as good as all.
        """
        first, apart = self._first_of_same(repeated)
        run: list[int] = []
        for at, name in enumerate(self.names):
            if name is None or first.get(name, at) != at:
                continue
            if at in self.alone or name in apart:
                if run:
                    yield RowRun(self, run)
                    run = []
                yield self.draft(at)
            else:
                run.append(at)
        if run:
            yield RowRun(self, run)

    def _first_of_same(self, repeated: Mapping[str, int]) -> tuple[dict[str, int], set[str]]:
        """For each number whose rows all say the same the first of them, and the other repeated numbers."""
        groups: dict[str, list[int]] = {}
        for at, name in enumerate(self.names) if repeated else ():
            if name is not None and name in repeated:
                groups.setdefault(name, []).append(at)
        first: dict[str, int] = {}
        for name, rows in groups.items():
            cases = {(self._context[at], *(cluster.ids[at] for cluster in self._clusters)) for at in rows}
            if len(rows) == repeated[name] and len(cases) == 1 and self.alone.isdisjoint(rows):
                first[name] = rows[0]
        return first, groups.keys() - first.keys()

    def why_none(self, at: int) -> str | None:
        """Why a row is no part: what is to be said of it, "" where nothing is; None where it is one."""
        if (reason := self._refused[at]) is not None:
            return reason
        if self._mixed and not self._crystal[at]:
            return ""
        stated = self._stated[self._shape[at]]
        return (NO_CRYSTAL if stated else "") if lacks_crystal(stated) else None

    def chunk(self, rows: Sequence[int]) -> Chunk:
        """Some rows as parts."""
        every = len(rows) == len(self.names)
        return Chunk(
            [self.names[at] for at in rows],
            [row if isinstance(row := self._listing.rows[at], TextRow) else None for at in rows],
            _picked(self.identity, rows, every=every),
            _picked(self.grade, rows, every=every),
            {name: _picked(shared, rows, every=every) for name, shared in self.fields.items()},
        )


NO_CRYSTAL = "something without a crystal's properties"


@dataclass(frozen=True, slots=True)
class RowRun:
    """Rows of a long list, one behind the other."""

    rows_of: LongList
    rows: Sequence[int]

    def parted(self) -> tuple[Chunk, list[tuple[str, str]]]:
        """The rows that are parts; of the others the number and why it is none, where that is to be said."""
        reasons = [(at, self.rows_of.why_none(at)) for at in self.rows]
        passed = [(self.rows_of.names[at] or "", reason) for at, reason in reasons if reason]
        return self.rows_of.chunk([at for at, reason in reasons if reason is None]), passed


def _picked(shared: Shared[Kind], rows: Sequence[int], *, every: bool) -> Shared[Kind]:
    return shared if every else Shared(array("i", map(shared.index.__getitem__, rows)), shared.distinct)


def _template(chosen: Sequence[Candidate], fork: bool | None, sentence: str | None) -> Template:
    """The readings of one field, the first of them with one more doubt if it has none of its own."""
    readings: list[Reading] = []
    columns: list[int | None] = []
    for each in chosen:
        marked = each.where.cell == _MARK
        bare = replace(each, where=NOWHERE) if marked else each
        doubt = plausible.own_doubt(reading_of(bare, None), fork) or (None if readings else sentence)
        readings.append(reading_of(bare, doubt))
        columns.append(each.where.line if marked else None)
    return Template(tuple(readings), tuple(columns))


def _names_a_mark(template: Template) -> bool:
    """Whether a doubt names the place of another cell: that is known row by row only."""
    return any(reading.check is not None and _MARK in reading.check for reading in template.readings)


def _of(names: Collection[str], candidates: Iterable[Candidate]) -> list[Candidate]:
    return [each for each in candidates if each.field in names]


def _own(names: Collection[str], said: Sequence[_Said], texts: Sequence[int]) -> list[Candidate]:
    """What a row's own cells say of some fields; a sentence only where nothing before it does."""
    found: list[Candidate] = []
    for one, text in zip(said, texts, strict=True):
        known = {each.field for each in found} if one.sentences else ()
        found += [each for each in _of(names, one.candidates[text]) if each.field not in known]
    return found
