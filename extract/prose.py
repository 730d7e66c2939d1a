"""Running text, mail, KEY=VALUE lines and shop one-liners -> entries."""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import replace

from extract import trace, wording
from extract.candidates import Candidate, has_unit, read
from extract.conditions import TEMPERATURES, condition_of
from extract.entries import Entry, Piece, Placed, Source, Value
from extract.fold import fold, key
from extract.interleaved import interleaved
from extract.meaning import meaning
from extract.model import When
from extract.units import unit_at
from extract.vocabulary import vocabulary

_CHUNK = re.compile(r"\n|;|；|•|\s\|\s|。|‖")
_SEPARATOR = re.compile(r"[:=](?!//)")
_WORD_START = re.compile(r"(?<![^\s,，、。([])\S")
_ABBREVIATED = "".join(
    f"(?<!{word})" for word in ("max", "min", "typ", "nom", "std", "ref", "req", "emp", "cap", "res", "mfr", "mfg")
)
_SENTENCE = re.compile(
    rf"(?i:{_ABBREVIATED})(?<=[^\W\d])[.;!?]\s+(?=[^\W\d_])(?![a-zà-ÿ])|(?<=[\d%)°])(?<![\s(]\d)[.;]\s+(?=[^\W\d_])|(?<=(?:max|min|typ|Max|Min|Typ)\.)\s+(?=[A-Z][a-z]{{3,}}\s+[a-z])|[。；]\s*|\n"
)
_NEW_SENTENCE = re.compile(
    r"(?:°C|ppm|pF|Ω|W|Hz|year)\.\s+(?=[A-Z])|(?<=[a-zà-ÿ]{5})(?<!equiv)(?<!capac)(?<!resis)(?<!toler)\.\s+(?=[A-Z])|\d[^.]{0,6}\.\s|\)\.?\s(?=\S+\s)"
)
_SUBSCRIPT = re.compile(r"(?<=(?<![A-Za-z0-9])[A-Za-z])_(?=[A-Za-z0-9])")
_LONG_BRACKET = re.compile(r"\([^()]{24,}\)")
_UNITLESS = ("quality_factor", "capacitance_ratio")
NEAR = 60
# A line below this length is read as sentences, whatever its labels.
LONG = 200


def pair_entries(cell: Placed) -> list[Entry]:
    """Every `label: value` and `KEY=VALUE` of a text, and what its sentences say where it holds no pairs."""
    found: list[Entry] = []
    for chunk in _label_with_values(_CHUNK.split(fold(cell.text))):
        if not chunk.strip():
            continue
        if len(chunk) > LONG and (told_apart := interleaved(chunk)) is not None:
            found += [entry for label, value in told_apart for entry in _banded(label, value, cell)]
            continue
        pairs, rest = split_pairs(chunk)
        for label, value in pairs:
            stated, *more = _SENTENCE.split(value, maxsplit=1)
            stated, others = _own_part(label, stated)
            found += _pair(label, stated, cell)
            found += prose_entries(Piece(others, cell.where, cell.confidence)) if others else []
            found += prose_entries(Piece(more[0], cell.where, cell.confidence)) if more and more[0] else []
        if rest.strip():
            found += prose_entries(Piece(rest, cell.where, cell.confidence))
    return found


def _label_with_values(chunks: list[str]) -> Iterator[str]:
    """Chunks as they are, save that amounts behind "label; value" or "label: value; value" belong to that label."""
    held = ""
    field: str | None = None
    for chunk in chunks:
        if field is not None and _AMOUNT_FIRST.match(chunk) and has_unit(chunk, field) and not split_pairs(chunk)[0]:
            held += f"{'; ' if _SEPARATOR.search(held) else ': '}{chunk.strip()}"
            continue
        if held:
            yield held
        held, field = chunk, _last_field(chunk) if len(chunks) > 1 else None
    if held:
        yield held


_AMOUNT_FIRST = re.compile(r"\s*[-+±≤≥<>~]?\s?\d")


def _last_field(chunk: str) -> str | None:
    """The field whose label, or whose pair of label and value, ends a chunk."""
    pairs, _ = split_pairs(chunk)
    label = meaning(pairs[-1][0] if pairs else chunk.strip()).label
    bare = label is not None and (bool(pairs) or (not label.symbol and not has_unit(chunk, label.field)))
    return label.field if label is not None and label.exact and bare else None


def _pair(label: str, value: str, cell: Placed) -> list[Entry]:
    known = meaning(label).label
    if known is None or not _zipped_bands(value, known.field):
        return [_entry(label, value, cell, "pair")]
    return [replace(entry, source="pair") for entry in _banded(label, value, cell)]


_VALUE_NEXT = re.compile(r"\s?[≤≥<>=~:]?\s?(?:[^\W\d_]{3,7}\.?\s)?[-+±≤≥<>~]?\s?\d")


def _own_part(label: str, value: str) -> tuple[str, str]:
    """A value, and from the next property on what follows it ("8 pF, ESR ≤ 60 Ω, C0 2 pF max" behind "CL =")."""
    own = meaning(label).label
    if own is None:
        return value, ""
    for each in wording.find_labels(value):
        before, after, field = value[: each.start].rstrip(" ,，、"), value[each.end :], each.label.field
        if field == own.field or not _VALUE_NEXT.match(after) or not has_unit(after[:NEAR], field):
            continue
        if _adjacent(before, own.field) is not None:
            return before, value[each.start :]
    return value, ""


def _banded(label: str, value: str, cell: Placed) -> Iterator[Entry]:
    """A label's entry, or one for each band where bands and values stand one after the other."""
    known = meaning(label).label
    for band, number in _zipped_bands(value, known.field if known else "") or [("", value)]:
        piece = Piece(number, cell.where, cell.confidence)
        yield Entry(Piece(label, cell.where), (Value(piece),), conditions=(band,) if band else (), source="prose")


def split_pairs(text: str) -> tuple[list[tuple[str, str]], str]:
    """Known labels with a colon or equals sign and what follows each; and the text before the first of them."""
    marks: list[tuple[int, int, int]] = []
    begin = 0
    for match in _SEPARATOR.finditer(text):
        bound_first = bool(marks) and _bound_at(text, marks[-1][0]) is not None
        start = _label_start(text, begin, match.start(), bound_first=bound_first)
        if start is not None:
            marks.append((start, match.start(), match.end()))
            begin = match.end()
    pairs = []
    for index, (start, end, after) in enumerate(marks):
        until = marks[index + 1][0] if index + 1 < len(marks) else len(text)
        pairs.append((text[start:end].strip(" -–*·、,"), text[after:until].strip(" ,，、")))
    return pairs, text[: marks[0][0]] if marks else text


def _label_start(text: str, begin: int, end: int, *, bound_first: bool = False) -> int | None:
    """Where the longest known label that ends at `end` begins; None where none does."""
    starts = [begin + match.start() for match in _WORD_START.finditer(text[begin:end])]
    for start in starts[-10:]:
        if _NEW_SENTENCE.search(text[start:end]) or _ends_value(text, begin, start, bound_first=bound_first):
            continue
        if _names_something(text[start:end], text[begin:start]) and _may_follow(text[start:end], text[end + 1 :]):
            return start
    return None


def _names_something(label: str, before: str) -> bool:
    """Whether a text is a label; "series" and its like are none where a sentence runs into them ("For all series:")."""
    known = meaning(label.strip(" -–*·、,.:："))
    if known.label is None and (known.identity or known.role == "model") and before.rstrip()[-1:].isalpha():
        return False
    return is_label(label)


_FIRST_WORD = re.compile(r"([^\W\d_]+)\.?\s?([,，、]?)")


def _bound_at(text: str, start: int) -> re.Match[str] | None:
    """The bound word that begins at `start`, with the comma behind it."""
    word = _FIRST_WORD.match(text, start)
    return word if word is not None and vocabulary().bounds.get(key(word[1])) in ("min", "typ", "max") else None


def _ends_value(text: str, begin: int, start: int, *, bound_first: bool) -> bool:
    """Whether the word at `start` is the bound of the value before it, and no part of the next label.

    So it is before a comma ("30 Ω typ, C0 = 2 pF") and, in small letters right behind a number and its unit, where the
    label before has no bound in front ("30 Ω typ C0 = 2 pF").
    """
    bound = _bound_at(text, start)
    if bound is None:
        return False
    behind_amount = bool(re.search(r"\d\s?[^\W\d]{0,4}\s$", text[begin:start]))
    return bool(bound[2]) or (behind_amount and bound[1].islower() and not bound_first)


def _may_follow(label: str, rest: str) -> bool:
    """Whether what stands behind the colon can be a value: behind a field's label a number, and soon."""
    known = meaning(label.strip(" -–*·、,.:")).label
    if known is None:
        return True
    if known.field == "load_capacitance_pf" and _is_series(rest):
        return True
    number = re.search(r"\d", rest)
    if number is None or "=" in rest[: number.start()]:
        return False
    return number.start() <= (4 if known.symbol else 30)


def _is_series(rest: str) -> bool:
    """Whether what stands behind a load's label begins with the word for series resonance and no number."""
    first = re.split(r"[\n,;.|]", rest, maxsplit=1)[0].strip()
    return (
        0 < len(first) <= NEAR
        and not re.search(r"\d", first)
        and any(v.series for v in read(first, "load_capacitance_pf"))
    )


def is_label(text: str) -> bool:
    """Whether a text is a label of anything: a field, an identity, an attribute, a mode, or of a row to leave alone."""
    known = meaning(text.strip(" -–*·、,.:："))
    return known.head is not None or known.trap is not None


def _entry(label: str, value: str, cell: Placed, source: Source) -> Entry:
    values = (Value(Piece(value, cell.where, cell.confidence)),) if value else ()
    return Entry(Piece(label, cell.where, cell.confidence), values, source=source)


def prose_entries(piece: Placed) -> list[Entry]:
    """What sentences state: each label with the nearest amount that has the label's unit."""
    found: list[Entry] = []
    for sentence in _SENTENCE.split(fold(piece.text)):
        if sentence and sentence.strip():
            found += _sentence_entries(_SUBSCRIPT.sub("", fold(_LONG_BRACKET.sub(" ", sentence))), piece)
    return found


def _sentence_entries(sentence: str, piece: Placed) -> Iterator[Entry]:
    """Each label with its amount: the one directly before it that no other label took, else the next behind it."""
    bands = [match.span() for match in _BANDS.finditer(sentence)]
    labels = [
        label
        for label in wording.find_labels(sentence)
        if not any(start < label.start and label.end < end for start, end in bands)
    ]
    if labels and _chip_asks(sentence):
        trace.passed(sentence, piece.where, "says what a chip asks of its crystal")
        return
    taken = 0
    for index, label in enumerate(labels):
        until = labels[index + 1].start if index + 1 < len(labels) else len(sentence)
        after, before = sentence[label.end : until], sentence[taken : label.start]
        field, name = label.label.field, sentence[label.start : label.end]
        amount = None if field in _UNITLESS else _adjacent(before, field)
        if amount is not None:
            yield _entry(name, amount, piece, "prose")
            taken = label.end
        elif zipped := _zipped_bands(after, field):
            for band, value in zipped:
                values = (Value(Piece(value, piece.where, piece.confidence)),)
                yield Entry(Piece(name, piece.where), values, conditions=(band,), source="prose")
            taken = until
        elif _states(after[:NEAR], field, exact=label.label.exact):
            yield _entry(name, after, piece, "prose")
            taken = label.end + _amount_end(after, field)
        elif field not in _UNITLESS and (last := _last_amount(before[-NEAR:], field)) is not None:
            yield _entry(name, last, piece, "prose")
            taken = label.end


def _chip_asks(sentence: str) -> bool:
    """Whether a sentence says what a chip asks for ("our MCU needs ESR < 80 Ω"): that is no value of the crystal."""
    lowered = sentence.casefold()
    return all(
        any(_stands_alone(word, lowered) for word in vocabulary().phrases.get(kind, ())) for kind in ("asker", "asks")
    )


def _stands_alone(word: str, text: str) -> bool:
    at = text.find(word)
    if at < 0 or not word.isascii():
        return at >= 0
    return bool(re.search(rf"(?<![^\W_]){re.escape(word)}(?![^\W_])", text))


def _adjacent(before: str, field: str) -> str | None:
    """The amount that ends right before a label ("±10 ppm tolerance", "a 9 pF load capacitance")."""
    tail = before[-NEAR:].rstrip(" -")
    for match in re.finditer(r"(?<![\w.,±+-])[-+±≤≥<>~]?\s?\d", tail):
        end = _amount_end(tail[match.start() :], field)
        if end and match.start() + end >= len(tail):
            return tail[match.start() :]
    return None


def _amount_end(text: str, field: str) -> int:
    """Where the first amount with a unit of `field` ends, its bound word included; 0 where there is none."""
    for match in re.finditer(r"(?<=\d)(?![\d])", text):
        found = unit_at(text, field, match.start())
        if found is not None:
            bound = re.match(r"\s?(?:max|min|typ|maximum|minimum|typical)\b\.?", text[found[2] :], re.IGNORECASE)
            return found[2] + (bound.end() if bound else 0)
    return 0


def _zipped_bands(text: str, field: str) -> list[tuple[str, str]]:
    """Several frequency bands and behind them as many resistances, from a dump that reads columns one by one."""
    if field != "esr_ohm":
        return []
    bands = list(_BANDS.finditer(text))
    if len(bands) < 2:
        return []
    if told := _beside_bands(text, bands):
        return told
    rest = text[bands[-1].end() :]
    values = _OHMS.findall(rest)
    between = text[bands[0].start() : bands[-1].end()]
    if len(values) != len(bands) or _OHMS.search(between):
        return []
    return [(band[0], value) for band, value in zip(bands, values, strict=True)]


def _beside_bands(text: str, bands: list[re.Match[str]]) -> list[tuple[str, str]]:
    """Bands with one resistance behind each, or one before each; what stands between them is the band's."""
    starts, ends = [band.start() for band in bands], [band.end() for band in bands]
    first = bool(_OHMS.search(text[: starts[0]]))
    if first:
        pieces = [text[begin:end] for begin, end in zip([0, *ends[:-1]], ends, strict=True)]
    else:
        pieces = [text[begin:end] for begin, end in zip(starts, [*starts[1:], len(text)], strict=True)]
    found = [list(_OHMS.finditer(piece)) for piece in pieces]
    if any(len(each) != 1 for each in found[:-1]) or not found[-1] or (first and _OHMS.search(text[ends[-1] :])):
        return []
    cut = [
        piece[each[0].end() :] if first else piece[: each[0].start()] for piece, each in zip(pieces, found, strict=True)
    ]
    return [(band, each[0][0]) for band, each in zip(cut, found, strict=True)]


def _states(text: str, field: str, *, exact: bool) -> bool:
    if field in _UNITLESS:
        return exact and bool(re.match(r"\W*(?:of|is|:|=|von|di|de)?\s*[\d<>≥≤~]", text))
    return has_unit(text, field) and bool(re.search(r"\d", text)) and bool(read(text, field))


def _last_amount(text: str, field: str) -> str | None:
    """The end of a text from the last number on that still reads as the field: the amount next to the label."""
    if not _states(text, field, exact=True):
        return None
    for match in reversed(list(re.finditer(r"(?<![\d.,])[-+±≤<]?\s?\d", text))):
        tail = text[match.start() :]
        found = read(tail, field)
        if found and (field not in TEMPERATURES or any(None not in (each.min, each.max) for each in found)):
            return tail
    return None if field in TEMPERATURES else text


_FREQUENCY = re.compile(r"(?i)(?<![\w.,±-])\d+(?:[.,]\d+)*\s?[mk]hz\b")
_FREQUENCIES = re.compile(
    r"(?i)(?<![\w.,±-])\d+(?:[.,]\d+)*\s?(?:[mk]hz)?\s?(?:to|-|~|…|bis|à|a|至)\s?\d+(?:[.,]\d+)*\s?[mk]hz\b"
)
_BANDS = re.compile(
    rf"{_FREQUENCIES.pattern}|(?i:\d+(?:[.,]\d+)*\s?(?:[mk]hz)?\s?[≤<]\s?\w{{1,5}}\s?[≤<]\s?\d+(?:[.,]\d+)*\s?[mk]hz\b)".replace(
        "(?i)", "", 1
    ),
    re.IGNORECASE,
)
_OHMS = re.compile(r"(?i)\d+(?:[.,]\d+)?\s?[km]?(?:Ω|ohms?)(?:\s?(?:max|typ)\b\.?)?")
_PPM = re.compile(r"(?i)±\s?\d+(?:[.,]\d+)?(?:\s?-?[\d.,]+)?\s?ppm")


# The first of "±30/±50 ppm".
_TWO_PPM = re.compile(r"(?i)±\s?\d+(?:[.,]\d+)?(?=\s?/\s?±\s?\d+(?:[.,]\d+)?\s?ppm)")


def loose_candidates(cell: Placed) -> list[Candidate]:
    """A shop's one-line description: what each amount must be by its unit alone. All are guesses, and say so."""
    text = fold(cell.text)
    found: list[Candidate] = []
    plain = [("frequency_mhz", r"(?i)[\d.,]+\s?[mk]hz\b"), ("load_capacitance_pf", r"(?i)[\d.,]+\s?pf\b")]
    plain += [("esr_ohm", r"(?i)(?:\bmax\.?\s?|[≤<]\s?)?[\d.,]+\s?k?(?:Ω|ohms?\b)(?:\s?(?:max|typ)\b\.?)?")]
    for field, pattern in plain:
        amounts = re.findall(pattern, text)
        if len(amounts) == 1:
            found += _guesses(cell, field, amounts[0])
    ppm = re.findall(r"(?i)±?\s?[\d.,]+\s?ppm", _TWO_PPM.sub(r"\g<0> ppm", text))
    for field, amount in zip(("frequency_tolerance_ppm", "frequency_stability_ppm"), ppm[:2], strict=False):
        found += _guesses(cell, field, f"±{amount.strip(' ±')}")
    span = condition_of(text).temperature_c
    if span is not None and span[1] - span[0] > 40:
        found.append(_guess(cell, "operating_temperature_c", span[0], None, span[1]))
    return found


def _guesses(cell: Placed, field: str, amount: str) -> list[Candidate]:
    return [_guess(cell, field, value.min, value.typ, value.max, bare=value.bare) for value in read(amount, field)]


def _guess(
    cell: Placed, field: str, low: float | None, typ: float | None, high: float | None, *, bare: bool = False
) -> Candidate:
    doubt = () if field in ("frequency_mhz", "operating_temperature_c") else ("no label stands beside this amount",)
    raw = " ".join(cell.text.split())
    return Candidate(field, low, typ, high, (), When(), bare, raw, cell.where, doubt, bool(doubt), "loose")  # type: ignore[arg-type]


def loose_in_prose(piece: Placed) -> list[Candidate]:
    """Unlabelled amounts that a clause makes plain: "±30 ppm at 25 °C", "±50 ppm from -20 °C to +70 °C", "12 MHz"."""
    found: list[Candidate] = []
    for sentence in _SENTENCE.split(fold(piece.text)):
        for clause in re.split(r"\s?[;；]\s", sentence or ""):
            if clause and not _on_request(clause):
                found += _loose_in_clause(Piece(clause, piece.where, piece.confidence))
    frequencies = {each.bounds for each in found if each.field == "frequency_mhz"}
    return [each for each in found if each.field != "frequency_mhz" or len(frequencies) == 1]


# A range behind a name that no wording file knows ("XYZ = -40/+125 °C") may be any range.
_BEHIND_NAME = re.compile(r"[^\W\d_][\w.]*\s?[:=]\s?[-+]\d+(?:[.,]\d+)?\s?(?:°\s?C|C)?\s?(?:to|~|…|/|-)")


def _on_request(clause: str) -> bool:
    folded = clause.casefold()
    return any(word in folded for word in vocabulary().phrases.get("request", ()) if len(word) > 6)


def _loose_in_clause(piece: Piece) -> list[Candidate]:
    text = piece.text
    found: list[Candidate] = []
    ranges = _FREQUENCIES.findall(text)
    amounts = _FREQUENCY.findall(_FREQUENCIES.sub(" ", text))
    if len(ranges) == 1 and not amounts:
        found += _guesses(piece, "frequency_mhz", ranges[0])
    elif not ranges and len({amount.casefold() for amount in amounts}) == 1:
        found += _guesses(piece, "frequency_mhz", amounts[0])
    amounts_ppm = list(_PPM.finditer(text))
    until = [*(match.start() for match in amounts_ppm[1:]), len(text)][: len(amounts_ppm)]
    labels = wording.find_labels(text)
    for match, following in zip(amounts_ppm, until, strict=True):
        # Behind the next label stands what belongs to that.
        end = min([following, *(label.start for label in labels if label.start >= match.end())])
        tail = text[match.end() : end][:45]
        # In "16 MHz/±10 ppm/-40~85 °C" each stands by itself.
        tail = "" if re.match(r"\s?[/|]", tail) else tail
        span = condition_of(tail).temperature_c
        if span is not None and span[1] - span[0] > 40:
            plain = _guesses(piece, "frequency_stability_ppm", match[0])
            found += [replace(each, doubts=(), inferred=False) for each in plain]
        elif re.match(r"\W{0,3}\w{0,3}\s?\+?2[0-9]\s?(?:°|C\b)", tail):
            plain = _guesses(piece, "frequency_tolerance_ppm", match[0])
            found += [replace(each, doubts=(), inferred=False) for each in plain]
        elif len(amounts) == len(amounts_ppm) == 1 and _FREQUENCY.match(
            text[: match.start()].rstrip(" ,")[-len(amounts[0]) :]
        ):
            found += _guesses(piece, "frequency_tolerance_ppm", match[0])
    span = condition_of(text).temperature_c
    stored = any(label.label.field == "storage_temperature_c" for label in wording.find_labels(text))
    if span is not None and span[0] < 5 and span[1] - span[0] > 40 and not stored and not _BEHIND_NAME.search(text):
        found.append(_guess(piece, "operating_temperature_c", span[0], None, span[1]))
    return found
