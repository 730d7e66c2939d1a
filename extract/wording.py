"""What a printed label means, in any language of `wording/`: its field, its bound, the unit and conditions in it."""

from __future__ import annotations

import re
from dataclasses import dataclass
from functools import cache, lru_cache

from extract.band import read_when
from extract.fold import fold, key
from extract.model import When
from extract.units import kinds
from extract.vocabulary import vocabulary

LONGEST_LABEL = 160


@dataclass(frozen=True, slots=True)
class Label:
    """A label read.

    `unit` is as printed; `plus_minus` says that the label itself prints ±; `exact` is False for a partial or misspelt
    match; `rest` is what was left over; `symbol` says that only a symbol (CL, R1) stood there, no wording.
    """

    field: str
    bound: str | None = None
    unit: str | None = None
    plus_minus: bool = False
    when: When = When()
    exact: bool = True
    rest: str = ""
    symbol: bool = False


@dataclass(frozen=True, slots=True)
class FoundLabel:
    """A label inside a longer text: `text[start:end]` of the folded text."""

    start: int
    end: int
    label: Label


@dataclass(slots=True)
class _Parts:
    """A label taken apart: what is left in `core`, and what was found beside it."""

    core: str
    brackets: list[str]
    bound: str | None = None
    unit: str | None = None
    plus_minus: bool = False
    when: When = When()


_NUMBERING = re.compile(r"^\s*(?:\(\d{1,2}\)|\d{1,2}(?:\.\d{1,2})?[.)、](?!\d)|[•■◆●▪○□・*·#>]+|-\s)\s*")
_FOOTNOTE = re.compile(r"(?:\s*(?:\*+\d{0,2}\)?|[†‡§]|\^\d{1,2}\)?|\s\d{1,2}\)|\(\s?\*?\d\s?\)|※\d?|注\d?))+\s*$")
_INNER_FOOTNOTE = re.compile(r"(?<=[a-z)])\^\d\)?|※\d|\*\d\)?|\*+(?=\s|$)")
_BRACKET = re.compile(r"[(\[{|]\s*([^()\[\]{}|]*?)\s*[)\]}|]")
_CONDITION = re.compile(
    r"\s*[,;/-]?\s*(?:@|\b(?:at|bei|à|a|bij|for|ref\.?(?: to)?|referred to|reference|when|measured at)(?=\s?[+-]?\d)|(?=[+-]?\d+\s?°C))"
    r"\s?[+-]?\d.*$",
    re.IGNORECASE,
)
_AT_REST = re.compile(r"\s*@.*$")
_SNAKE = re.compile(r"^[A-Za-z0-9]+(?:_[A-Za-z0-9]+)+$")
_WORD = re.compile(r"[^\W\d_]+\d*(?:/[^\W\d_]+\d*)?|\d+|±|Δ", re.UNICODE)
_TOKEN = re.compile(r"\S+")
_EDGE = " \t\n:：.,;-=_/|~、。…"


@lru_cache(maxsize=32768)
def read_label(text: str) -> Label | None:
    """What field the label `text` names, with the bound, unit, ± and conditions that stand in it; None for none or several.

    An exact wording decides first, then a wording with a symbol, unit, bound or condition beside it, then the longest
    known wording inside (`exact` False when more than filling words is left over), at last one slip of the pen.
    """
    folded = fold(text)
    if not folded or len(folded) > LONGEST_LABEL:
        return None
    parts = _take_apart(folded)
    return _exact(parts) or _beside_symbol(parts) or _inside(parts)


def _take_apart(folded: str) -> _Parts:
    text = _FOOTNOTE.sub("", _NUMBERING.sub("", folded)).rstrip(":：")
    text = _FOOTNOTE.sub("", text)
    if _SNAKE.match(text):
        text = text.replace("_", " ")
    parts = _Parts(core=text, brackets=[])
    if "±" in text:
        parts.plus_minus = True
        text = re.sub(r"±(?!\s?\d)", " ", text)
    text = _BRACKET.sub(lambda found: _keep_bracket(parts, found[1]), text)
    text = _take_years(parts, text)
    condition = _CONDITION.search(text) or _AT_REST.search(text)
    if condition and condition.start() > 1:
        parts.when = _joined(parts.when, read_when(condition[0]))
        text = text[: condition.start()]
    parts.core = _INNER_FOOTNOTE.sub("", text)
    _take_bound(parts)
    return parts


def _keep_bracket(parts: _Parts, inside: str) -> str:
    """Sort a bracket's content into bound, unit, condition or another name of the label."""
    words = [word for word in re.split(r"[\s,;/]+", inside) if word]
    bounds = {vocabulary().bounds.get(key(word)) for word in words}
    if words and None not in bounds and len(bounds) == 1:
        parts.bound = parts.bound or bounds.pop()
        return " "
    plain = " ".join(word for word in words if key(word) not in vocabulary().bounds)
    if _is_unit(inside) or _is_unit(plain):
        parts.unit = parts.unit or (inside if _is_unit(inside) else plain)
        parts.bound = parts.bound or next((b for b in bounds if b), None)
        return " "
    when = read_when(inside)
    if when != When():
        parts.when = _joined(parts.when, when)
    parts.brackets.append(inside)
    return " "


def _joined(one: When, other: When) -> When:
    return When(**{**one.model_dump(), **other.model_dump()})


@cache
def _years_pattern() -> re.Pattern[str]:
    phrases = vocabulary().phrases
    names = [*phrases.get("first_year", ()), *phrases.get("per_year", ())]
    words = sorted(names, key=len, reverse=True)
    one = "|".join(rf"(?<![^\W\d_]){re.escape(word)}(?![^\W_])" if word[0].isalpha() else re.escape(word) + r"(?![a-z])" for word in words)
    years = "|".join(map(re.escape, phrases.get("years", ("years",))))
    return re.compile(rf"(?P<many>\d{{1,2}})\s?-?(?:{years})(?![a-z])|(?P<one>{one})", re.IGNORECASE)


def _take_years(parts: _Parts, text: str) -> str:
    found = _years_pattern().search(text)
    if not found:
        return text
    parts.when = _joined(parts.when, When(years=float(found["many"] or 1)))
    return text[: found.start()] + " " + text[found.end() :]


def _take_bound(parts: _Parts) -> None:
    """Min and max words at either end belong to no wording; "typical", "nominal" and "standard" may."""
    for _ in range(2):
        words = parts.core.split()
        if len(words) < 2:
            return
        for at, rest in ((-1, words[:-1]), (0, words[1:])):
            bound = vocabulary().bounds.get(key(words[at]))
            if bound in ("min", "max") and not key(" ".join(words)) in vocabulary().labels:
                parts.bound = parts.bound or bound
                parts.core = " ".join(rest).strip(_EDGE)
                break
        else:
            return


def _is_unit(text: str) -> bool:
    return bool(text) and any(kind.unit(text) for kind in kinds().values())


def _label(parts: _Parts, field: str, *, exact: bool = True, rest: str = "", symbol: bool = False) -> Label:
    return Label(field, parts.bound, parts.unit, parts.plus_minus, parts.when, exact, rest, symbol)


def _named(core: str) -> str | None:
    return vocabulary().labels.get(key(core))


def _exact(parts: _Parts) -> Label | None:
    words = vocabulary()
    if field := _named(parts.core):
        return _label(parts, field)
    if field := _named(" ".join([parts.core, *parts.brackets])):
        return _label(parts, field)
    stripped = _without_unit(parts)
    if stripped and (field := _named(stripped)):
        return _label(parts, field)
    tokens = parts.core.split()
    for at, rest in ((-1, tokens[:-1]), (0, tokens[1:])):
        if rest and words.bounds.get(key(tokens[at])) == "typ" and (field := _named(" ".join(rest))):
            parts.bound = parts.bound or "typ"
            return _label(parts, field)
    return None


def _without_unit(parts: _Parts) -> str | None:
    """The core without a unit at its end ("ESR Ω", "drive in µW", "cl pf")."""
    tokens = parts.core.split()
    for count in (1, 2):
        tail = " ".join(tokens[-count:]).strip(",;/")
        if len(tokens) > count and _is_unit(tail):
            rest = tokens[:-count]
            if key(rest[-1]) in ("in", "en"):
                rest = rest[:-1]
            if not rest:
                return None
            parts.unit = parts.unit or tail
            parts.core = " ".join(rest)
            _take_bound(parts)
            return parts.core
    return None


def symbol_of(text: str) -> str | None:
    """The field of a symbol standing alone ("C0", "R 1", "C_L", "B"), for a symbol column; None where it has several."""
    return vocabulary().symbols.get(key(text))


def _symbol(text: str) -> str | None:
    """As `symbol_of`, for cells that may hold anything: of single letters only Q."""
    wanted = key(text)
    if len(wanted) == 1 and text.strip() != "Q":
        return None
    return vocabulary().symbols.get(wanted)


def _beside_symbol(parts: _Parts) -> Label | None:
    names = [parts.core, *parts.brackets]
    symbols = [(name, _symbol(name)) for name in names if len(key(name)) <= 12]
    for name in parts.brackets:
        if field := _named(name):
            return _label(parts, field)
    tokens = parts.core.split()
    for at in range(1, len(tokens)):
        head, tail = " ".join(tokens[:at]), " ".join(tokens[at:])
        for wording, symbol in ((head, tail), (tail, head)):
            field = _named(wording.strip(_EDGE))
            if field and len(key(symbol)) <= 12 and (symbol_of(symbol) == field or field in vocabulary().shared.get(key(symbol), ())):
                return _label(parts, field)
    for name, field in symbols:
        if field and (name is parts.core or not parts.core.strip(_EDGE)):
            return _label(parts, field, symbol=True)
    return None


def _inside(parts: _Parts) -> Label | None:
    return None


def ambiguous_label(text: str) -> tuple[str, ...]:
    """The fields that the label may mean where it means several ("Frequency tolerance / stability", "Δf/f"); else ()."""
    parts = _take_apart(fold(text))
    return vocabulary().shared.get(key(parts.core), ())


def role_of(text: str) -> str | None:
    """What a table's head cell says of its column: min, typ, max, unit, parameter, symbol, condition, value, remarks ..."""
    return vocabulary().roles.get(key(text))


def mode_of(text: str) -> str | None:
    """ "fundamental", "third overtone" ... where `text` states one mode of vibration."""
    return vocabulary().modes.get(key(text))


def cut_of(text: str) -> str | None:
    """ "AT", "BT", "SC", "tuning fork" ... where `text` states the cut."""
    return vocabulary().cuts.get(key(text))


def identity_label(text: str) -> str | None:
    """ "part_number", "maker", "package", "stock_number", "customer", "date", "description" where the label asks for it."""
    return vocabulary().identity.get(key(text))


def attribute_label(text: str) -> str | None:
    """The contract's attribute ("pads", "aec_q200", "moisture_level" ...) that the label names."""
    return vocabulary().attributes.get(key(text))


def trap_of(text: str) -> str | None:
    """Why a row that looks like a field is none ("drive level dependency", "a reliability test"); None where it may be one."""
    return vocabulary().traps.get(key(text))


def oscillator_words(text: str) -> tuple[str, ...]:
    """The words in `text` that only an oscillator's, resonator's or filter's sheet prints."""
    return ()


def not_stated(text: str) -> bool:
    """Whether the cell says nothing: empty, "-", "—", "n/a", "0"."""
    wanted = fold(text).casefold()
    return not key(wanted) or wanted in vocabulary().phrases.get("not_stated", ())


def find_labels(text: str) -> tuple[FoundLabel, ...]:
    """Every label inside a longer folded text, from left to right, not overlapping; for prose and one-line dumps."""
    return ()
