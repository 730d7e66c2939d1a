"""Entries -> candidates: every reading that might be meant, each with its place and its doubts."""

from __future__ import annotations

import re
from collections.abc import Iterable, Sequence
from dataclasses import dataclass, replace
from functools import lru_cache
from typing import Literal

from extract import amount, trace, wording
from extract.bounds import SIGN_NOT_PRINTED
from extract.conditions import condition_of, kept, merged
from extract.entries import Entry, Piece, Placed, Source, Value
from extract.fields import field_of
from extract.fold import fold, key
from extract.meaning import meaning
from extract.model import FieldName, Pair, When, Where
from extract.twolabels import told_apart
from extract.units import unit_at
from extract.vocabulary import vocabulary
from extract.wording import Label
from extract.wraps import unwrapped

_PLUS_MINUS = re.compile(r"±")
_BRACKET = re.compile(r"[(（][^()（）]*[)）]")
# "，200" is a comma and 200, not 0.200.
_EAST_COMMA = re.compile("[，、]")
_FOOTNOTE_MARK = re.compile(r"(?<=[^\s(])\s*(?:\(\d\)|⁽[¹²³⁴-⁹]⁾|[※*]\d)(?=\s*$)")
_OPEN_ABOVE = re.compile(r"<\s?\d[\d.,]*\s?(?:[MkK]Hz)?\s*$")
# "AQ5-20M-18" in a heading holds no band.
_PART_NUMBER = re.compile(r"(?<!\S)(?=\S*\d)(?=\S*[A-Z])[A-Z0-9]+(?:[-/.][A-Za-z0-9.]+)+(?!\S)")
LEAST_CONFIDENCE = 0.8


@dataclass(frozen=True, slots=True)
class Candidate:
    """A reading that might be meant. `doubts` are reasons to look; `source` and `exact` rank it against others.

    `subject` is the model in the column's head, `about` the one part that the heading above names. `open_above`: the
    upper end of its band is printed as "<". `measured_c`: the one temperature at which an ESR was measured; it limits
    the value only where another is stated at another temperature.
    """

    field: FieldName
    min: float | None
    typ: float | None
    max: float | None
    options: tuple[float, ...]
    when: When
    bare: bool
    raw: str
    where: Where
    doubts: tuple[str, ...] = ()
    inferred: bool = False
    source: Source | Literal["key", "note"] = "table"
    subject: str = ""
    section: str = ""
    label_where: Where | None = None
    open_above: bool = False
    about: str = ""
    measured_c: Pair | None = None

    @property
    def bounds(self) -> tuple[float | None, float | None, float | None, tuple[float, ...]]:
        """What is compared when two places state the same field."""
        return self.min, self.typ, self.max, self.options


@lru_cache(maxsize=16384)
def read(
    text: str, field: str, unit: str | None = None, bound: str | None = None, *, plus_minus: bool = False
) -> tuple[amount.Value, ...]:
    """`amount.read_values`, each distinct text read once."""
    text = unwrapped(text) if "\n" in text else text
    text = _EAST_COMMA.sub(r"\g<0> ", _FOOTNOTE_MARK.sub("", text))
    if field == "load_capacitance_pf":
        text = _without_offer(text, unit)
    elif field == "ageing_ppm":
        text = _without_later_years(text)
    found = amount.read_values(text, field, unit=unit, bound=bound, plus_minus=plus_minus)
    if not found and _BRACKET.search(text):
        # What a bracket withdraws ("series resonance on request") is not the value before it.
        found = amount.read_values(_BRACKET.sub(" ", text), field, unit=unit, bound=bound, plus_minus=plus_minus)
    kept_values = tuple(value for value in found if not value.empty or value.series)
    return _recommended_within(kept_values) if field == "drive_level_uw" else kept_values


_CLAUSE = re.compile(r"[,;，；、]\s*|\n|\s+(?:and|und|et|e|y)\s+(?=[±<≤\d])")


def _without_later_years(text: str) -> str:
    """Ageing without what it is from the second year on ("±2 ppm first year, ±1 ppm/year thereafter")."""
    later = vocabulary().phrases.get("later_years", ())
    clauses = [clause for clause in _CLAUSE.split(text) if clause.strip()]
    first = [clause for clause in clauses if not any(word in fold(clause).casefold() for word in later)]
    stated = any(char.isdigit() for clause in first for char in clause)
    return "; ".join(first) if stated and len(first) < len(clauses) else text


def _recommended_within(values: tuple[amount.Value, ...]) -> tuple[amount.Value, ...]:
    """A drive level "10~100 µW (max. 300 µW)": the range is what is recommended, the greater maximum the limit."""
    if len(values) != 2:
        return values
    span, limit = values
    inside = None not in (span.min, span.max) and limit.min is None and limit.typ is None and limit.max is not None
    if not inside or limit.max is None or span.max is None or limit.max < span.max:
        return values
    return (replace(limit, doubts=()),)


def _without_offer(text: str, unit: str | None) -> str:
    """A load without the bracket that says what else may be had ("12 pF (8 pF to 32 pF)")."""
    inside, outside = "".join(_BRACKET.findall(text)), _BRACKET.sub(" ", text)
    if not inside or not re.search(r"\d", outside) or not re.search(r"\d", inside):
        return text
    stated = amount.read_values(outside, "load_capacitance_pf", unit=unit)
    offered = amount.read_values(inside.strip("()（）"), "load_capacitance_pf", unit=unit or "pF")
    one = len(stated) == 1 and stated[0].typ is not None and stated[0].min is None and stated[0].max is None
    ranged = any(None not in (each.min, each.max) for each in offered)
    said = any(word in fold(inside).casefold() for word in vocabulary().phrases.get("offered", ()))
    return outside if one and (ranged or said) else text


def entry_candidates(entry: Entry) -> list[Candidate]:
    """What one label with its values may mean; empty where the label is none of a field, or a trap."""
    if two := told_apart(entry):
        return [candidate for each in two for candidate in entry_candidates(each)]
    label = label_of(entry)
    if label is None:
        if trace.asked():
            _pass_over(entry)
        return []
    label = _by_unit(label, [entry.unit, label.unit or "", *(value.piece.text for value in entry.values)])
    label = _bounded_by_remark(label, entry)
    when = _entry_when(entry, label)
    found: list[Candidate] = []
    for subject in dict.fromkeys(value.subject for value in entry.values):
        values = [value for value in entry.values if value.subject == subject]
        found += _of_subject(entry, label, when, subject, values)
    if trace.asked():
        for each in found:
            trace.saw(each, label, entry.label.text, _around(entry))
    if not found and trace.asked():
        trace.passed(
            _raw(entry, [value.piece for value in entry.values]),
            entry.where,
            f"no value of {field_of(label.field).title} can be read here",
            label.field,
        )
    return [each for each in found if not _lone_temperature(each)]


def _bounded_by_remark(label: Label, entry: Entry) -> Label:
    """The label with the bound that stands alone in a remarks cell ("typ.")."""
    if label.bound is not None or any(value.bound for value in entry.values):
        return label
    said = [bound for text in entry.conditions if (bound := vocabulary().bounds.get(key(text))) is not None]
    return replace(label, bound=said[0]) if len(said) == 1 else label


def _around(entry: Entry) -> list[tuple[str, Iterable[str]]]:
    """The texts that may have given a value its unit or its band, for the report of why it was read so."""
    return [
        ("the value's cell", [value.piece.text for value in entry.values]),
        ("the unit column", [entry.unit]),
        ("a condition", entry.conditions),
        ("the label", [entry.label.text]),
        ("the heading above", [entry.section]),
    ]


def _pass_over(entry: Entry) -> None:
    """Report a row whose label is none of a field's, where a number stands beside it."""
    raw = _raw(entry, [value.piece for value in entry.values])
    if not any(character.isdigit() for value in entry.values for character in value.piece.text):
        return
    known = meaning(entry.label.text)
    why = known.trap or wording.trap_of(fold(entry.label.text))
    other = known.identity or known.role or known.attribute
    if why:
        rule = f"the label is no property of the crystal: {why}"
    else:
        rule = f"the label names {other.replace('_', ' ')}, no property" if other else "the label is in no wording file"
    trace.passed(raw, entry.where, rule)


def _by_unit(label: Label, texts: Iterable[str]) -> Label:
    """The field that the printed unit makes of the label: a "stability" in ppm/°C² is the parabola."""
    field = next(
        (other for text in texts if (other := amount.field_for(text, label.field)) != label.field), label.field
    )
    return label if field == label.field else replace(label, field=field, plus_minus=False)


# No quartz turns there: the peak of a soldering profile, called "peak temperature" as well. In a table, where a slip
# may have lost a decimal mark, only what is hotter than that.
SOLDERING_C, SOLDERING_IN_TABLE_C = 150.0, 200.0


def _lone_temperature(candidate: Candidate) -> bool:
    """One temperature with no bound is no range: it is where something was measured."""
    numbers = [each for each in (candidate.min, candidate.typ, candidate.max) if each is not None]
    least = SOLDERING_IN_TABLE_C if candidate.source == "table" else SOLDERING_C
    if candidate.field == "turnover_temperature_c" and min(numbers, default=0) >= least:
        trace.dropped(candidate, "a peak as hot as this is that of soldering")
        return True
    ranged = candidate.field in ("operating_temperature_c", "storage_temperature_c")
    lone = ranged and candidate.min is None and candidate.max is None
    if lone:
        trace.dropped(candidate, "one temperature is no range: it is where something was measured")
    return lone


@lru_cache(maxsize=8192)
def read_label_of(text: str) -> Label | None:
    folded = fold(text)
    if wording.trap_of(folded):
        return None
    return meaning(text).label


def label_of(entry: Entry) -> Label | None:
    """The field that an entry's label names, with its symbol and the section above it to help."""
    own = read_label_of(entry.label.text)
    if meaning(entry.label.text).trap:
        return None
    if own is not None and own.exact:
        return own
    if entry.section and (both := read_label_of(f"{entry.section} {entry.label.text}")) is not None and both.exact:
        return both
    if entry.symbol and (symbol := read_label_of(entry.symbol)) is not None and symbol.exact and not _other(entry):
        return own if own is not None and own.field == symbol.field else symbol
    return own


def _other(entry: Entry) -> bool:
    known = meaning(entry.label.text)
    return bool(known.identity or known.role or known.attribute)


def _entry_when(entry: Entry, label: Label) -> When:
    when = When()
    for text in entry.conditions:
        when = merged(when, kept(condition_of(text), label.field))
    if entry.section and entry.section != entry.label.text:
        section = condition_of(_PART_NUMBER.sub(" ", entry.section))
        band = section.frequency_mhz
        if band is not None and band[0] == band[1]:
            section = section.model_copy(update={"frequency_mhz": None})
        when = merged(kept(section, label.field), when)
    return merged(kept(label.when, label.field), when)


def _of_subject(entry: Entry, label: Label, when: When, subject: str, values: Sequence[Value]) -> list[Candidate]:
    bounded = {value.bound: value for value in values if value.bound and not value.nominal}
    if len(bounded) > 1 or (len(bounded) == 1 and len(values) == 1 and not values[0].governed):
        return _joined(entry, label, when, subject, values)
    found: list[Candidate] = []
    for value in values:
        if found and _another_case(value, label):
            found += _single(entry, label, when, subject, value)
            continue
        extra = kept(condition_of(value.piece.text), label.field) if found or _foreign(value, label) else When()
        if found or (_foreign(value, label) and len(values) > 1):
            when = merged(when, extra)
            if not found:
                continue
            beside = _stated_beside(found, value, label)
            found = [replace(each, when=merged(when, each.when), doubts=(*each.doubts, *beside)) for each in found]
            continue
        found = _single(entry, label, when, subject, value)
    return found or _last_resort(entry, label, when, subject, values)


def _stated_beside(found: Sequence[Candidate], value: Value, label: Label) -> tuple[str, ...]:
    """A doubt where a further cell of the row states another value of the field and no head says for what."""
    text = value.piece.text
    others = read(text, label.field, None, label.bound) if has_unit(text, label.field) else ()
    stated = {each.bounds for each in found}
    if not others or any((each.min, each.typ, each.max, tuple(each.options)) in stated for each in others):
        return ()
    return (f"another column states {' '.join(text.split())[:40]}; its head says nothing that is known",)


def _another_case(value: Value, label: Label) -> bool:
    """Whether a further cell holds a value of its own for a band or mode: "60 Ω for 16 to 54 MHz"."""
    text = value.piece.text
    said = condition_of(text)
    banded = said.mode is not None or (said.frequency_mhz is not None and label.field != "frequency_mhz")
    return banded and has_unit(text, label.field) and bool(read(text, label.field))


def _foreign(value: Value, label: Label) -> bool:
    """Whether a cell states a condition rather than the value: a band beside ESR, a mode, a temperature range."""
    text = value.piece.text
    said = {key for key, each in condition_of(text) if each is not None}
    if not said:
        return False
    return not read(text, label.field, None, None) or bool(
        label.field == "esr_ohm" and "frequency_mhz" in said and not has_unit(text, label.field)
    )


_BEHIND_NUMBER = re.compile(r"(?<=\d)(?!\d)(?:\s?(?:max|min|typ)(?:imum|ical)?\b[.,)]*\s?)?", re.IGNORECASE)


@lru_cache(maxsize=16384)
def has_unit(text: str, field: str) -> bool:
    """Whether a number with a unit of `field` stands in the text."""
    folded = fold(text)
    places = {place for match in _BEHIND_NUMBER.finditer(folded) for place in match.span()}
    return any(unit_at(folded, field, place) for place in places)


def _single(entry: Entry, label: Label, when: When, subject: str, value: Value) -> list[Candidate]:
    bound = value.bound or label.bound
    if value.governed and value.bound and label.field in ("frequency_mhz", "load_capacitance_pf"):
        bound = None
    if label.field == "esr_ohm" and "°" in value.piece.text and (apart := _temperatures_apart(value.piece.text)):
        own = [replace(value, piece=Piece(text, value.piece.where, value.piece.confidence)) for text in apart]
        return [each for one in own for each in _single(entry, label, when, subject, one)]
    unit = entry.unit or label.unit or None
    plus_minus = label.plus_minus or bool(_PLUS_MINUS.search(fold(entry.unit)))
    found = read(value.piece.text, label.field, _bare_unit(unit), bound, plus_minus=plus_minus)
    return [
        candidate_of(entry, label, _joint(when, each, label), value.piece, each, subject=subject, nominal=value.nominal)
        for each in found
        if not each.empty and not each.series
    ]


def _joint(when: When, value: amount.Value, label: Label) -> When:
    return merged(when, kept(value.when, label.field))


def _bare_unit(unit: str | None) -> str | None:
    """The unit without ± and brackets; None where it is no unit ("-", "see note")."""
    if unit is None:
        return None
    bare = fold(unit).strip(" ±()[]|/")
    return bare or None


def _last_resort(entry: Entry, label: Label, when: When, subject: str, values: Sequence[Value]) -> list[Candidate]:
    """Every cell looked like a condition: then the only one that reads as the field is the value."""
    found: list[Candidate] = []
    for value in values:
        found = found or _single(entry, label, when, subject, value)
    return found


def candidate_of(
    entry: Entry,
    label: Label,
    when: When,
    piece: Placed,
    value: amount.Value,
    *,
    subject: str = "",
    nominal: bool = False,
) -> Candidate:
    bare = value.bare and field_of(label.field).bare and not nominal
    return Candidate(
        field=label.field,  # type: ignore[arg-type]
        min=value.min,
        typ=value.typ,
        max=value.max,
        options=tuple(value.options),
        when=when,
        bare=bare,
        raw=_raw(entry, [piece]),
        where=piece.where,
        doubts=label_doubts(label, [piece], value.doubts),
        inferred=not label.exact,
        source=entry.source,
        subject=subject,
        section=entry.section,
        label_where=entry.label.where,
        open_above=any(_OPEN_ABOVE.search(fold(text)) for text in entry.conditions),
        measured_c=_measured_at(entry, label, [piece]),
    )


# A temperature, with its tolerance ("25 ±3 °C") or without.
_DEGREES = re.compile(r"(?<![\d.,±])([+-]?\d+(?:[.,]\d+)?)\s?(?:°\s?C?\s?)?(?:±\s?\d+(?:[.,]\d+)?\s?)?°", re.IGNORECASE)


def _measured_at(entry: Entry, label: Label, pieces: Iterable[Placed]) -> Pair | None:
    """The one temperature that stands beside an ESR: at the value, in a condition or in the label."""
    if label.field != "esr_ohm":
        return None
    return measured_in((*(piece.text for piece in pieces), *entry.conditions, entry.label.text))


def measured_in(printed: Iterable[str]) -> Pair | None:
    """The one temperature that texts beside a value name; None for none, for several or for a range."""
    texts = [fold(text) for text in printed]
    found = [number for text in texts for number in _DEGREES.findall(text)]
    if len(found) != 1 or any(condition_of(text).temperature_c is not None for text in texts):
        return None
    degrees = float(found[0].replace(",", "."))
    return degrees, degrees


def _temperatures_apart(text: str) -> list[str]:
    """The pieces of "50 Ω at 25 °C, 80 Ω at -40 °C", where each has a resistance and a temperature of its own."""
    pieces = re.split(r"[,;/]\s|\n", fold(text))
    each_own = all(len(_DEGREES.findall(piece)) == 1 and has_unit(piece, "esr_ohm") for piece in pieces)
    return pieces if len(pieces) > 1 and each_own else []


def _raw(entry: Entry, pieces: Iterable[Placed]) -> str:
    texts = [entry.label.text, *(piece.text.lstrip(" :：") for piece in pieces), entry.unit]
    return " ".join(" ".join(text.split()) for text in texts if text.strip())


_ALWAYS_SYMMETRIC = ("frequency_tolerance_ppm", "frequency_stability_ppm")


def label_doubts(label: Label, pieces: Iterable[Placed], doubts: Iterable[str]) -> tuple[str, ...]:
    """Reasons to look at a reading: those of the amount, a label that is only nearly one, an unsure recogniser."""
    pieces, found = list(pieces), list(doubts)
    if label.exact and label.field in _ALWAYS_SYMMETRIC and found == [SIGN_NOT_PRINTED]:
        # Shops leave the sign out of every tolerance and stability; the label leaves no other meaning.
        found = []
    if label.exact and not found and all(piece.confidence >= LEAST_CONFIDENCE for piece in pieces):
        return ()
    if not label.exact:
        found.append(f"the label is only like that of {field_of(label.field).title}")
    found += confidence_doubts(min((piece.confidence for piece in pieces), default=1.0))
    return tuple(dict.fromkeys(found))


def confidence_doubts(confidence: float) -> list[str]:
    """A reason to look where a recogniser was not sure of the text."""
    return [] if confidence >= LEAST_CONFIDENCE else [f"read from a picture with a confidence of {confidence:.0%}"]


def _joined(entry: Entry, label: Label, when: When, subject: str, values: Sequence[Value]) -> list[Candidate]:
    """Min, Typ and Max cells of one row as one reading; a cell with more than a number in it stands by itself."""
    parts: list[tuple[Value, amount.Value]] = []
    others: list[Candidate] = []
    for value in values:
        unit = _bare_unit(entry.unit or label.unit or None)
        pm = (label.plus_minus or bool(_PLUS_MINUS.search(fold(entry.unit)))) and len(values) == 1
        bound = value.bound or label.bound
        found = read(value.piece.text, label.field, unit, None if pm and bound == "typ" else bound, plus_minus=pm)
        found = tuple(_typical_size(each, value) if len(values) > 1 else each for each in found if not each.series)
        if len(found) == 1 and not found[0].options and _plain(found[0]):
            parts.append((value, found[0]))
        else:
            others += [
                candidate_of(entry, label, _joint(when, each, label), value.piece, each, subject=subject, nominal=True)
                for each in found
            ]
    if not parts:
        return others
    return [_one_row(entry, label, when, subject, parts), *others]


def _typical_size(found: amount.Value, printed: Value) -> amount.Value:
    """A "±2" under Typ beside cells for Min and Max is the typical size."""
    if printed.bound == "typ" and found.max is not None and found.min == -found.max and not found.options:
        return replace(found, min=None, typ=found.max, max=None)
    return found


def _plain(value: amount.Value) -> bool:
    return sum(each is not None for each in (value.min, value.typ, value.max)) == 1


def _one_row(
    entry: Entry, label: Label, when: When, subject: str, parts: list[tuple[Value, amount.Value]]
) -> Candidate:
    bounds: dict[str, float | None] = {"min": None, "typ": None, "max": None}
    doubts: list[str] = []
    bare = True
    for value, read_value in parts:
        number = next(each for each in (read_value.min, read_value.typ, read_value.max) if each is not None)
        stated = next(name for name in ("min", "typ", "max") if getattr(read_value, name) is not None)
        bounds[stated] = number
        bare = bare and read_value.bare and value.bound is None
        doubts += read_value.doubts
        when = merged(when, kept(read_value.when, label.field))
    pieces = [value.piece for value, _ in parts]
    doubts += [value.guessed for value, _ in parts if value.guessed]
    if (
        field_of(label.field).sign == "negative"
        and bounds["max"] is not None
        and bounds["min"] is None
        and bounds["typ"] is None
    ):
        bounds["min"], bounds["max"] = -abs(bounds["max"]), None
    return Candidate(
        field=label.field,  # type: ignore[arg-type]
        **bounds,  # type: ignore[arg-type]
        options=(),
        when=when,
        bare=bare and field_of(label.field).bare,
        raw=_raw(entry, pieces),
        where=pieces[0].where,
        doubts=label_doubts(label, pieces, doubts),
        inferred=not label.exact,
        source=entry.source,
        subject=subject,
        section=entry.section,
        label_where=entry.label.where,
        open_above=any(_OPEN_ABOVE.search(fold(text)) for text in entry.conditions),
        measured_c=_measured_at(entry, label, pieces),
    )


def offers_series(entry: Entry) -> bool:
    """Whether a load's row offers series resonance outright, not on request."""
    label = label_of(entry)
    if label is None or label.field != "load_capacitance_pf":
        return False
    text = " ".join([*(value.piece.text for value in entry.values), *entry.conditions])
    asked = any(word in fold(text).casefold() for word in vocabulary().phrases.get("request", ()))
    return not asked and any(each.series for value in entry.values for each in read(value.piece.text, label.field))


_NO_NUMBER = re.compile(r"^[^\d]*[^\W\d_][^\d]*$")


def unreadable(entry: Entry) -> tuple[str, str, Where] | None:
    """Field, text and place of a value that has ± and its unit and letters where the number should stand ("±Sppm")."""
    label = label_of(entry)
    text = " ".join(value.piece.text for value in entry.values)
    folded = fold(text)
    if label is None or not label.exact or "±" not in folded or not _NO_NUMBER.match(folded):
        return None
    rest = folded.replace("±", " ").strip()
    units = [unit for at in range(len(rest)) if (unit := unit_at(rest, label.field, at)) is not None]
    return (label.field, text, entry.where) if units and not is_unit_alone(rest, label.field) else None


def is_unit_alone(text: str, field: str) -> bool:
    """Whether a text is a unit of the field and nothing else."""
    found = unit_at(text, field, 0)
    return found is not None and found[2] >= len(text.rstrip())
