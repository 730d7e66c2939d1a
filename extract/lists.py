"""Listings -> drafts of parts: headings are read once, each distinct cell text once a column.

A listing with part numbers gives a draft a row. One without gives a single draft whose candidates hold in the row's
frequency band, mode, load or package.
"""

from __future__ import annotations

import re
from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass, field, replace
from itertools import pairwise

from extract import trace, wording
from extract.amount import field_for
from extract.candidates import Candidate, has_unit, label_doubts, measured_in, read
from extract.conditions import TEMPERATURES, band_of, condition_of, kept, merged
from extract.drafts import Draft, cuts_in
from extract.entries import Listing, Placed
from extract.fields import field_of
from extract.fold import fold
from extract.heads import BOUNDS, Head, end_of_range, interpret, is_unit
from extract.identity import is_package, package_in, speaks_of_a_crystal
from extract.meaning import meaning, part_tokens
from extract.model import Pair, When
from extract.units import factor
from extract.wording import Label

# Columns in which the part numbers stand where no column is headed so; an own stock number often is the maker's.
_MAY_NUMBER = ("stock_number", "description", "")
# Properties that a sheet states by frequency.
OF_A_BAND = frozenset({"esr_ohm", "shunt_capacitance_pf", "drive_level_uw", "motional_capacitance_ff"})
LONGEST_BANDS = 200
# Uses of columns whose cells may hold whole sentences, in the order in which they are asked.
SENTENCES = ("", "description")
# Fields whose amounts are known without a label, by unit and place.
LOOSE = frozenset(
    {
        "frequency_mhz",
        "load_capacitance_pf",
        "esr_ohm",
        "frequency_tolerance_ppm",
        "frequency_stability_ppm",
        "operating_temperature_c",
    }
)
# A web address says nothing of the part: its words are those of a shop's shelves and of file names.
_ADDRESS = re.compile(r"\s*(?:https?|ftp)://\S+\s*", re.IGNORECASE)
KEYS = ("frequency_mhz", "load_capacitance_pf")
RANGE, STABILITY = "operating_temperature_c", "frequency_stability_ppm"


@dataclass(slots=True)
class ListColumn:
    """One column, ready to read cells: a field's label, or the use that the cells are put to."""

    index: int
    head: Head
    label: Label | None = None
    use: str = ""
    when: When = field(default_factory=When)
    subject: str = ""


def listing_drafts(listing: Listing) -> list[Draft]:
    """What a listing says of each part, or of the series, that it lists."""
    from extract.bandrows import merged_row_drafts

    columns = columns_of(listing)
    if lists_parts(listing, columns):
        if merged := merged_row_drafts(listing, columns):
            return merged
        return _crystals_among(list(_part_drafts(listing, columns)))
    return _series_drafts(listing, columns)


def columns_of(listing: Listing) -> list[ListColumn]:
    """What each column of a listing holds."""
    columns = [_column(index, column.levels, listing.title) for index, column in enumerate(listing.columns)]
    _settle(columns, listing)
    return columns


def lists_parts(listing: Listing, columns: Sequence[ListColumn]) -> bool:
    """Whether each row is a part with a number of its own."""
    return any(column.use == "part_number" for column in columns) and not _bands_of_models(listing, columns)


def _bands_of_models(listing: Listing, columns: Sequence[ListColumn]) -> bool:
    """Whether the rows are bands of models named again and again, or over merged rows, rather than parts.

    Then each row has a range of frequencies, and nothing beside it but what a band limits.
    """
    if len(listing.rows) > LONGEST_BANDS:
        return False
    numbers = [column for column in columns if column.use == "part_number"]
    bands = [column for column in columns if column.label is not None and column.label.field == "frequency_mhz"]
    others = {column.label.field for column in columns if column.label is not None} - {"frequency_mhz"}
    if len(numbers) != 1 or len(bands) != 1 or not others or not others <= OF_A_BAND:
        return False
    named: list[str] = []
    for row in listing.rows:
        number, band = row[numbers[0].index], row[bands[0].index]
        span = band_of(band.text, bands[0].label.unit if bands[0].label else None) if band is not None else None
        if number is None or span is None or span[0] == span[1]:
            return False
        named.append(number.text)
    return len(set(named)) < len(named)


def _crystals_among(drafts: list[Draft]) -> list[Draft]:
    """In a list of mixed parts some rows say that they are crystals; the others are left out."""
    crystals = [speaks_of_a_crystal(draft.texts) for draft in drafts]
    if not any(crystals):
        return drafts
    for draft, crystal in zip(drafts, crystals, strict=True):
        draft.other = not crystal
        draft.crystal = crystal
    return drafts


def _column(index: int, levels: tuple[str, ...], title: str) -> ListColumn:
    head = interpret(levels)
    column = ListColumn(index, head)
    for extra in head.extra:
        column.when = merged(column.when, condition_of(extra))
    column.subject = " ".join(extra for extra in head.extra if condition_of(extra) == When())
    if (symbol := _by_unit(head)) is not None:
        column.label = symbol
    elif head.trap and not head.label and not head.identity and not head.attribute:
        column.use = "trap"
    elif head.label is not None:
        column.label = replace(
            head.label, bound=head.bound or head.label.bound, unit=head.label.unit or head.unit or None
        )
    elif head.role in ("mode", "cut", "band", "model", "code"):
        column.use = head.role
    elif head.identity or head.attribute:
        column.use = head.identity or f"attribute {head.attribute}"
    elif (head.unit or head.role in ("value", "min", "typ", "max") or _is_subject(head)) and (
        titled := meaning(title).label
    ) is not None:
        column.label = replace(titled, bound=head.bound or titled.bound, unit=head.unit or titled.unit)
    return column


_SYMBOL_AND_UNIT = re.compile(
    r"\s*(?P<symbol>[^\W\d_]\w{0,3}(?:\s(?:min|max|typ)\.?)?)\s*[(\[|/,]?\s*(?P<unit>[^()\[\]]+?)[)\]]?\s*"
)


def _by_unit(head: Head) -> Label | None:
    """A symbol that several fields share, with a unit that only one of them has: "f (MHz)", "T min (°C)"."""
    match = _SYMBOL_AND_UNIT.fullmatch(fold(" ".join(head.levels)))
    if head.name is not None or match is None:
        return None
    word = re.sub(r"(?i)[\s_]*(min|max|typ)\.?$", "", match["symbol"])
    names = [name for name in (wording.symbol_of(word), *wording.ambiguous_label(word)) if name]
    for name in names:
        if factor(match["unit"].strip(" ±"), name) is not None:
            found = re.search(r"(?i)min|max|typ", match["symbol"])
            bound = head.bound or (BOUNDS[found[0].casefold()] if found else None)
            return Label(name, bound=bound, unit=match["unit"], plus_minus="±" in match["unit"])
    return None


def _is_subject(head: Head) -> bool:
    """A head that names only a model, a package or a load, under a title that names the property."""
    text = " ".join(head.extra)
    return bool(text) and (bool(part_tokens(text)) or is_package(text) or condition_of(text) != When())


def _settle(columns: list[ListColumn], listing: Listing) -> None:
    """Choose among several part-number columns, and look for one among the columns without a known heading."""
    texts = {column.index: _sample(listing, column.index) for column in columns}
    for column in columns:
        if column.use == "model":
            column.use = "part_number" if _share(texts[column.index], _is_token) > 0.5 else "package"
        elif column.use == "band":
            column.label = wording.read_label("frequency range")
            column.use = ""
    _unhead_bands(columns, texts)
    _ends_of_ranges(columns)
    numbered = [column for column in columns if column.use == "part_number"]
    good = [column for column in numbered if _share(texts[column.index], _is_token) > 0.4]
    for column in numbered:
        if good and column not in good:
            column.use = "description"
    if len(good) > 1:
        _set_series_apart(good, listing)
    unnumbered = not numbered and any(column.use in _MAY_NUMBER for column in columns)
    if unnumbered and not _part_column_by_content(columns, texts):
        _part_column_of_digits(columns, texts)


def _set_series_apart(numbered: Sequence[ListColumn], listing: Listing) -> None:
    """Of a column of part numbers and one of their series or models the second names no part of its own."""
    distinct: dict[int, float] = {}
    for column in numbered:
        texts = [cell.text for row in listing.rows if (cell := row[column.index]) is not None and cell.text.strip()]
        distinct[column.index] = len(set(texts)) / len(texts) if texts else 0.0
    most = max(distinct.values())
    for column in numbered:
        if most > MOSTLY and distinct[column.index] <= most / 2:
            column.use = "series"


# The share of distinct texts above which a column numbers its rows.
MOSTLY = 0.75


def _unhead_bands(columns: Sequence[ListColumn], texts: dict[int, list[str]]) -> None:
    """A head over a column of bands speaks of the values in the headless column beside it."""
    for column, beside in pairwise(columns):
        field = column.label.field if column.label is not None else "frequency_mhz"
        if field == "frequency_mhz" or any(beside.head.levels) or beside.label is not None or not texts[column.index]:
            continue
        banded = all(band_of(text) is not None and not has_unit(text, field) for text in texts[column.index])
        if banded and all(has_unit(text, field) for text in texts[beside.index]):
            beside.label, beside.head = column.label, column.head
            column.label = wording.read_label("frequency range")


_ARTICLE = re.compile(r"(?=(?:\D*\d){5})[\d./-]{5,20}")


def _part_column_of_digits(columns: Sequence[ListColumn], texts: dict[int, list[str]]) -> None:
    """A column of stock numbers without a letter names the rows where nothing else does."""
    for column in columns:
        numbers = texts[column.index] if column.use == "stock_number" else []
        if len(numbers) > 1 and len(set(numbers)) == len(numbers) and all(map(_ARTICLE.fullmatch, map(fold, numbers))):
            column.use = "part_number"
            return


def _ends_of_ranges(columns: Sequence[ListColumn]) -> None:
    """Under one label "from" and, in the column beside it, "to": the two ends of its range."""
    for low, high in pairwise(columns):
        if low.label is None or low.label.field not in TEMPERATURES or low.label.bound is not None:
            continue
        own = high.label is None and high.use in ("", "description") or high.label == low.label
        if own and [end_of_range(each.head.levels[-1]) for each in (low, high) if each.head.levels] == ["min", "max"]:
            unit = low.label.unit or high.head.unit or None
            low.label = replace(low.label, bound="min", unit=unit)
            high.label, high.use = replace(low.label, bound="max"), ""


def _part_column_by_content(columns: list[ListColumn], texts: dict[int, list[str]]) -> bool:
    """Look for the part numbers under heads that do not name them; whether they were found."""
    for column in columns:
        if column.label is None and column.use in _MAY_NUMBER and texts[column.index]:
            names = [part_tokens(text) for text in texts[column.index]]
            if sum(bool(each) for each in names) > 0.6 * len(names) and len(
                {each[0] for each in names if each}
            ) > 0.6 * len(names):
                column.use = "part_number"
                return True
    return False


def _sample(listing: Listing, index: int) -> list[str]:
    step = max(1, len(listing.rows) // 40)
    return [cell.text for row in listing.rows[::step] if (cell := row[index]) is not None and cell.text.strip()]


def _share(texts: Sequence[str], test: Callable[[str], bool]) -> float:
    return sum(map(test, texts)) / len(texts) if texts else 0.0


def _is_token(text: str) -> bool:
    return bool(part_tokens(text))


def cell_candidates(cell: Placed, column: ListColumn, when: When, subject: str = "") -> Iterator[Candidate]:
    """What one cell of a field's column may mean."""
    label = column.label
    if label is None or wording.not_stated(cell.text):
        return
    known = field_of(label.field)
    if (other := field_for(cell.text, label.field)) != label.field:
        label = replace(label, field=other, unit=None, plus_minus=False)
        known = field_of(other)
    for value in read(cell.text, label.field, label.unit, label.bound, plus_minus=label.plus_minus):
        if value.series:
            continue
        found = Candidate(
            field=label.field,  # type: ignore[arg-type]
            min=value.min,
            typ=value.typ,
            max=value.max,
            options=tuple(value.options),
            when=merged(merged(when, kept(label.when, label.field)), kept(value.when, label.field)),
            bare=value.bare and known.bare,
            raw=f"{' '.join(column.head.levels)} {cell.text}".strip(),
            where=cell.where,
            doubts=label_doubts(label, [cell], value.doubts),
            inferred=not label.exact,
            source="table",
            subject=subject,
            measured_c=measured_in(column.head.levels) if label.field == "esr_ohm" else None,
        )
        if trace.asked():
            heads = column.head.levels
            trace.saw(found, label, " ".join(heads), [("the value's cell", [cell.text]), ("the column's head", heads)])
        yield found


def _part_drafts(listing: Listing, columns: list[ListColumn]) -> Iterator[Draft]:
    numbers = [column for column in columns if column.use == "part_number"]
    for row, section in zip(listing.rows, listing.sections, strict=True):
        base = row_draft(row, columns, section)
        for column in numbers:
            cell = row[column.index]
            if cell is None or wording.not_stated(cell.text):
                continue
            yield _named(base, cell, column)


_BROKEN_NUMBER = re.compile(r"(?<=\w[-/])\s*\n\s*(?=\w)")


def part_name(text: str) -> str:
    """The part number in a cell of its column, other words left out."""
    # A number broken behind its own hyphen.
    text = _BROKEN_NUMBER.sub("", text)
    words = text.split()
    tokens = part_tokens(" ".join(words)) if len(words) != 1 else ()
    return tokens[0] if tokens else " ".join(words)


def _named(base: Draft, cell: Placed, column: ListColumn) -> Draft:
    """The row's draft under the part number of one cell; its column's head may add a temperature range or a load."""
    draft = replace(base, part_number=part_name(cell.text), where=cell.where, candidates=list(base.candidates))
    span = column.when.temperature_c
    if span is not None:
        draft.candidates.append(
            Candidate(
                "operating_temperature_c",
                span[0],
                None,
                span[1],
                (),
                When(),
                False,
                " ".join(column.head.levels),
                cell.where,
            )
        )
        draft.candidates.extend(_headed_stability(cell, column, span))
    return draft


def _headed_stability(cell: Placed, column: ListColumn, span: tuple[float, float]) -> Iterator[Candidate]:
    """The one ± of a head such as "Part number -20 to +70 °C, ±15 ppm": the stability over that range."""
    found = [each for text in column.head.extra for each in read(text, "frequency_stability_ppm")]
    if len(found) != 1 or found[0].min is None or found[0].max is None:
        return
    when, raw = When(temperature_c=span), " ".join(column.head.levels)
    yield Candidate("frequency_stability_ppm", found[0].min, None, found[0].max, (), when, False, raw, cell.where)


def named_draft(listing: Listing, columns: list[ListColumn], at: int, column: ListColumn) -> Draft:
    """What one row says of the part whose number stands in a column of it."""
    row = listing.rows[at]
    cell = row[column.index]
    assert cell is not None  # noqa: S101 - the caller knows the name
    return _named(row_draft(row, columns, listing.sections[at]), cell, column)


def row_draft(
    row: Sequence[Placed | None],
    columns: Sequence[ListColumn],
    section: str,
    known: frozenset[str] = frozenset(),
) -> Draft:
    """What the cells of some columns of a row say together, and the section that it stands in.

    `known`: fields that other columns state, so that no sentence is asked for them.
    """
    draft = Draft()
    if section:
        _take_section(draft, section)
    pairs: dict[str, list[Placed]] = {}
    for column in columns:
        cell = row[column.index]
        if cell is None or not cell.text.strip():
            continue
        if column.label is None and column.use in SENTENCES and _ADDRESS.fullmatch(cell.text):
            continue
        if column.label is not None:
            _take_field(draft, cell, column)
        else:
            _take_use(draft, cell, column)
            pairs.setdefault(column.use, []).append(cell)
    _take_sentences(draft, [cell for use in SENTENCES for cell in pairs.get(use, [])], known)
    draft.package = draft.package or (package_in(section) if section else None)
    return draft


def _take_field(draft: Draft, cell: Placed, column: ListColumn) -> None:
    label = column.label
    assert label is not None  # noqa: S101 - the caller asked
    if label.field == "load_capacitance_pf" and any(
        v.series for v in read(cell.text, label.field, label.unit, label.bound)
    ):
        draft.resonance.add("series")
    draft.candidates.extend(cell_candidates(cell, column, kept(column.when, label.field)))
    if label.field == "frequency_mhz":
        draft.take_mode_and_cut(cell.text)


def _take_use(draft: Draft, cell: Placed, column: ListColumn) -> None:
    text = " ".join(cell.text.split())
    if column.use != "maker":
        draft.texts.append(text)
    if wording.not_stated(text) and not (column.use == "attribute aec_q200" and text):
        return
    if wording.oscillator_words(column.head.levels[-1] if column.head.levels else ""):
        draft.texts.append(" ".join(column.head.levels))
    if column.use in ("maker", "package"):
        draft.name(column.use, text)
        draft.take_mode_and_cut(text)
    elif column.use in ("mode", "cut") or not column.use or column.use == "description":
        draft.take_mode_and_cut(text, codes=column.use == "mode")
    elif column.use == "trap" and package_in(text):
        draft.package = draft.package or text
    elif column.use.startswith("attribute "):
        draft.attributes.setdefault(column.use.removeprefix("attribute "), text)


def _take_section(draft: Draft, section: str) -> None:
    draft.texts.append(section)
    draft.take_mode_and_cut(section)


def _take_sentences(draft: Draft, cells: list[Placed], elsewhere: frozenset[str]) -> None:
    """Properties inside one cell, as pairs or as a shop's one-line description, where no column states them."""
    from extract.candidates import entry_candidates, offers_series
    from extract.prose import loose_candidates, loose_in_prose, pair_entries

    known = elsewhere | {candidate.field for candidate in draft.candidates}
    for cell in cells:
        if len(cell.text) < 8:
            continue
        entries = pair_entries(cell)
        found = [candidate for entry in entries for candidate in entry_candidates(entry)]
        draft.take_identity(entries)
        if any(offers_series(entry) for entry in entries):
            draft.resonance.add("series")
        for loosely in (loose_in_prose, loose_candidates):
            told = {each.field for each in found}
            if LOOSE - known - told:
                found += [each for each in loosely(cell) if each.field not in told]
        draft.package = draft.package or package_in(cell.text)
        draft.candidates.extend(each for each in found if each.field not in known)
        known |= {each.field for each in found}


def _series_drafts(listing: Listing, columns: list[ListColumn]) -> list[Draft]:
    """Rows without part numbers: each row's key cells say where its other cells hold."""
    draft = Draft()
    fields = [column for column in columns if column.label is not None]
    names = {column.label.field for column in fields if column.label is not None}
    # A range beside its stability says where that holds; what the part may be used in stands elsewhere.
    keys = (*KEYS, RANGE) if STABILITY in names else KEYS
    others = [column for column in fields if column.label is not None and column.label.field not in keys]
    if len(listing.rows) == 1 and _is_whole_part(listing.rows[0], fields):
        # One row under the labels of all that one part has.
        others, columns = fields, []
    if others and "esr_ohm" in names:
        draft.candidates.extend(_loads_offered(listing, fields))
        draft.candidates.extend(_bands_offered(listing, columns))
    for row, section in zip(listing.rows, listing.sections, strict=True):
        when, subject = _row_key(row, columns, section, alone=not others)
        for column in columns:
            if column.use == "mode" and (cell := row[column.index]) is not None:
                draft.cuts.update(cuts_in(cell.text))
        for column in others if others else fields:
            cell = row[column.index]
            if cell is None or column.label is None:
                continue
            own = merged(when, column.when)
            own = own if column.label.field != "frequency_mhz" else own.model_copy(update={"frequency_mhz": None})
            own = own if column.label.field == STABILITY or RANGE not in names else _without_range(own)
            draft.candidates.extend(cell_candidates(cell, column, own, column.subject or subject))
    return [draft] if draft.candidates else []


LEAST_OF_A_PART = 5


def _is_whole_part(row: Sequence[Placed | None], fields: Sequence[ListColumn]) -> bool:
    """Whether a row states one frequency and as many other properties as only a whole specification has."""
    named = {column.label.field for column in fields if column.label is not None}
    cells = [row[column.index] for column in fields if column.label and column.label.field == "frequency_mhz"]
    bands = [band_of(cell.text, None) for cell in cells if cell is not None]
    return len(named) >= LEAST_OF_A_PART and len(bands) == 1 and bands[0] is not None and bands[0][0] == bands[0][1]


def _loads_offered(listing: Listing, fields: Sequence[ListColumn]) -> Iterator[Candidate]:
    """The loads down a column that says where the other values hold: what may be ordered, if nothing else says so."""
    column = next((each for each in fields if each.label and each.label.field == "load_capacitance_pf"), None)
    if column is None or len(listing.rows) > LONGEST_BANDS:
        return
    found = [
        each
        for row in listing.rows
        if (cell := row[column.index]) is not None
        for each in cell_candidates(cell, column, When())
    ]
    loads = list(dict.fromkeys(each.typ for each in found if each.typ is not None))
    if len(loads) > 1 and all(each.typ is not None for each in found):
        yield replace(found[0], typ=None, options=tuple(loads), source="key")


# Bands are one range where the next begins so soon above the end of the one before ("9.999", "10.000").
_NEXT_BAND = 1.01


def _bands_offered(listing: Listing, columns: list[ListColumn]) -> Iterator[Candidate]:
    """The bands down a column, as one range for each mode: what may be ordered, if nothing else says so."""
    column = next((each for each in columns if each.label and each.label.field == "frequency_mhz"), None)
    if column is None or len(listing.rows) > LONGEST_BANDS or any(each.subject for each in columns):
        return
    by_mode: dict[str | None, list[tuple[Pair, Placed]]] = {}
    for row, section in zip(listing.rows, listing.sections, strict=True):
        cell, (when, subject) = row[column.index], _row_key(row, columns, section, alone=False)
        band = when.frequency_mhz
        if cell is None or band is None or band[0] == band[1] or subject or when.package:
            return
        by_mode.setdefault(when.mode, []).append((band, cell))
    for mode, found in by_mode.items():
        found.sort(key=lambda each: each[0])
        if all(after[0] <= before[1] * _NEXT_BAND for (before, _), (after, _) in pairwise(found)):
            cell, high = found[0][1], max(band[1] for band, _ in found)
            raw = f"{' '.join(column.head.levels)} {'; '.join(dict.fromkeys(each.text for _, each in found))}"
            yield Candidate(
                "frequency_mhz", found[0][0][0], None, high, (), When(mode=mode), False, raw, cell.where, source="key"
            )


def _without_range(when: When) -> When:
    """The condition without the temperature range, which is the stability's."""
    return when.model_copy(update={"temperature_c": None})


def _row_key(row: Sequence[Placed | None], columns: list[ListColumn], section: str, *, alone: bool) -> tuple[When, str]:
    when, subject = condition_of(section), section if part_tokens(section) else ""
    for column in columns:
        cell = row[column.index]
        if cell is None or not cell.text.strip():
            continue
        if column.label is not None and not alone:
            when = merged(when, key_when(cell, column.label))
        elif column.use == "mode":
            mode = wording.mode_of(cell.text) or condition_of(cell.text).mode
            when = merged(when, When(mode=mode))
        elif column.use in ("package", "model", "part_number"):
            subject = subject or " ".join(cell.text.split())
        elif not column.use and not is_unit(cell.text):
            said = condition_of(cell.text)
            # A lone "3" in a column that nobody headed counts rows; it is no overtone.
            when = merged(when, said.model_copy(update={"mode": None}) if len(cell.text.strip()) < 2 else said)
    return when, subject


def key_when(cell: Placed, label: Label) -> When:
    if label.field == RANGE:
        return When(temperature_c=condition_of(cell.text).temperature_c)
    if label.field == "frequency_mhz":
        band = band_of(cell.text, label.unit) or band_of(re.sub(r"\([^()]*\)", " ", cell.text), label.unit)
        return merged(condition_of(cell.text), When(frequency_mhz=band)) if band else condition_of(cell.text)
    if label.field == "load_capacitance_pf":
        for value in read(cell.text, label.field, label.unit, None):
            low, high = (value.typ, value.typ) if value.typ is not None else (value.min, value.max)
            if low is not None and high is not None:
                return When(load_capacitance_pf=(low, high))
    return When()
