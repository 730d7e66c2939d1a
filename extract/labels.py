"""A label taken apart: unit, bound words, ±, conditions and footnote marks off, the wording itself left over."""

from __future__ import annotations

import re
from dataclasses import dataclass, field
from functools import cache

from extract.band import joined, read_when
from extract.fold import key
from extract.model import When
from extract.runs import IDEOGRAPHS, Table
from extract.tokens import years_pattern
from extract.units import is_unit
from extract.vocabulary import vocabulary

EDGE = " \t\n:：.,;-=_/|~、。…"
_NUMBERING = re.compile(r"^\s*(?:\(\d{1,2}\)|\d{1,2}(?:\.\d{1,2})?[.)、](?!\d)|[•■◆●▪○□・·*#>]+|-\s)\s*")
_FOOTNOTE = re.compile(
    r"(?:\s*(?:\*+\d{0,2}\)?|[†‡§]|(?<![CKT])\^\d{1,2}\)?|(?<=\s)\d{1,2}\)|\((?:note|\*|注|nb\.?)?\s?\*?\d\s?\)|※\d?|注\d?))+\s*$",
    re.IGNORECASE,
)
_INNER_FOOTNOTE = re.compile(r"(?<=[a-z)])\^\d\)?|※\d?|\*\d\)?|\*+(?=\s|$)")
_BRACKET = re.compile(r"[(\[{|]\s*([^()\[\]{}|]*?)\s*(?:[)\]}|]|$)")
_SNAKE = re.compile(r"^[A-Za-z0-9]+(?:_[A-Za-z0-9]+)+$")
_TORN = re.compile(r"(?<=[a-z])-\n(?=[a-z])")
_PLUS_MINUS = re.compile(r"±(?!\s?\d)|\bplus[ /]?minus\b", re.IGNORECASE)
_AT_REST = re.compile(r"\s*@.*$")


@dataclass(slots=True)
class Parts:
    """A label taken apart: the wording in `core`, names in `brackets`, and what else stood there."""

    core: str
    brackets: list[str] = field(default_factory=list)
    bound: str | None = None
    unit: str | None = None
    plus_minus: bool = False
    snake: bool = False
    conditions: list[str | When] = field(default_factory=list)
    """Printed and known conditions that `when` has not put together yet: few texts are labels and need it."""
    _when: When = When()

    @property
    def when(self) -> When:
        """All conditions together; where two speak of the same, the later counts."""
        for condition in self.conditions:
            self._when = joined(self._when, read_when(condition) if isinstance(condition, str) else condition)
        self.conditions.clear()
        return self._when

    @when.setter
    def when(self, when: When) -> None:
        self.conditions.clear()
        self._when = when


def take_apart(folded: str) -> Parts:
    """The parts of a folded label; "nominal" and "standard" stay in the core, since a wording may hold them."""
    text = _TORN.sub("", folded).replace("\n", " ")
    text = _FOOTNOTE.sub("", _NUMBERING.sub("", text)).rstrip(EDGE)
    text = _FOOTNOTE.sub("", text)
    parts = Parts(core=text, snake=bool(_SNAKE.match(text)))
    if parts.snake:
        text = text.replace("_", " ")
    if _PLUS_MINUS.search(text):
        parts.plus_minus = True
        text = _PLUS_MINUS.sub(" ", text)
    text = _BRACKET.sub(lambda found: _keep_bracket(parts, found[1]), text)
    text = _take_years(parts, _NUMBERING.sub("", text))
    text = _take_condition(parts, text)
    parts.core = " ".join(_INNER_FOOTNOTE.sub("", text).split()).strip(EDGE)
    take_bound(parts)
    return parts


def _keep_bracket(parts: Parts, inside: str) -> str:
    """Sort a bracket's content into bound, unit, condition or another name of the label."""
    words = [word for word in re.split(r"[\s,;/]+", inside) if word]
    bounds = [None if is_nominal(word) else vocabulary().bounds.get(key(word)) for word in words]
    if words and None not in bounds:
        parts.bound = parts.bound or "/".join(dict.fromkeys(bound for bound in bounds if bound))
        return " "
    parts.bound = parts.bound or next((bound for bound in bounds if bound), None)
    unit, rest = _unit_in(parts, inside, words, bounds)
    if unit:
        parts.unit = parts.unit or unit
        parts.plus_minus = parts.plus_minus or "±" in inside
        parts.conditions += [rest] if rest else []
        return " "
    if inside:
        parts.conditions.append(inside)
        parts.brackets.append(inside)
    return " "


def _unit_in(parts: Parts, inside: str, words: list[str], bounds: list[str | None]) -> tuple[str, str]:
    """The unit that a bracket holds ("µW", "Ω max", "±ppm", "ppm @25 °C", "ppm/year"), and the condition behind it."""
    plain = " ".join(word for word, bound in zip(words, bounds, strict=True) if bound is None)
    before, _, condition = inside.partition("@")
    first, _, behind = inside.partition(",")
    several = ((before, condition), (first, behind) if condition_like(behind) else ("", ""))
    for unit, rest in ((inside, ""), (plain, ""), *several, (_take_years(parts, inside), "")):
        if is_unit(unit.strip("± /")):
            return unit.strip("± /"), rest
    return "", ""


def condition_like(text: str) -> bool:
    """Whether a text behind a unit says where it was measured: "25 °C", "ref. 25 °C"."""
    return bool(re.search(r"\d\s?°|\bMHz\b", text))


@cache
def one_year_words() -> Table[float]:
    """The wordings of "per year" and "first year", by key."""
    lists = vocabulary().phrases
    return Table({key(word): 1.0 for word in (*lists.get("first_year", ()), *lists.get("per_year", ()))})


_DIGIT = re.compile(r"\d")


def _take_years(parts: Parts, text: str) -> str:
    runs = one_year_words().runs(text)
    one = (runs[0].start, runs[0].end) if runs else None
    many = years_pattern().search(text) if _DIGIT.search(text) else None
    if many and (one is None or not one[0] <= many.start() < one[1]):
        parts.conditions.append(When(years=float(many[1])))
        return text[: many.start()] + " " + text[many.end() :]
    if one is None:
        return text
    parts.conditions.append(When(years=1.0))
    return text[: one[0]] + " " + text[one[1] :]


def _standing_alone(word: str) -> str:
    before = r"(?<![^\W\d_])" if word[0].isalpha() and word[0].isascii() else ""
    after = r"(?![^\W_])" if word[-1].isalnum() and word[-1].isascii() else ""
    return before + re.escape(word) + after


# "-40 to +85", with or without its unit.
_RANGE = r"(?=[+-]?\d+(?:[.,]\d+)?\s?(?:°\s?C|C|[MkK]Hz)?\s?(?:~|…|to|bis|-|/)\s?[+-]?\d)"


@cache
def _condition_pattern() -> re.Pattern[str]:
    """A condition at the end: "@ 25 °C", "at 100 V DC", "bei 25 °C", ", 25 °C"."""
    words = [_standing_alone(word) for word in vocabulary().phrases.get("at", ()) if word not in ("over", "in")]
    return re.compile(
        rf"\s*(?:[,;/]|-(?=\s))?\s*(?:@|{'|'.join(words)}|(?=[+-]?\d+\s?°\s?C)|{_RANGE})\s?(?:dc|ac|ta|tj|f|cl)?\s?=?\s?[+-]?\d.*$",
        re.IGNORECASE,
    )


@cache
def _condition_words() -> tuple[str, ...]:
    return tuple({word.casefold() for word in vocabulary().phrases.get("at", ()) if word not in ("over", "in")})


_IS_RANGE = re.compile(_RANGE, re.IGNORECASE)


def _may_hold_condition(text: str) -> bool:
    """Whether there is anything that a condition begins with; the pattern takes long to find that there is not."""
    if "@" in text or "°" in text or _IS_RANGE.search(text):
        return True
    lower = text.casefold()
    return any(word in lower for word in _condition_words())


def _take_condition(parts: Parts, text: str) -> str:
    if "@" not in text and not _DIGIT.search(text):
        return text
    found = (_may_hold_condition(text) and _condition_pattern().search(text)) or _AT_REST.search(text)
    if not found or found.start() < 1:
        return text
    printed = found[0].strip(EDGE.replace("-", ""))
    parts.conditions.append(printed)
    last = printed.split()[-1] if printed.split() else ""
    parts.bound = parts.bound or vocabulary().bounds.get(key(last))
    before = printed.split()[-2:-1]
    behind_unit = bool(before) and (is_unit(before[0]) or bool(re.search(r"°\s?C?$", before[0])))
    if (re.search(r"\s(?:in|en)\s\S+$", printed) or behind_unit) and is_unit(last):
        parts.unit = parts.unit or last
    return text[: found.start()]


_SEVERAL_BOUNDS = re.compile(r"[\s(\[]*(?P<first>[a-z.]+)\s?[/,]\s?(?P<second>[a-z.]+)[\s)\]]*$", re.IGNORECASE)


def take_bound(parts: Parts) -> None:
    """Bound words at either end belong to no wording; "nominal" and "standard" may, and stay."""
    if found := _SEVERAL_BOUNDS.search(parts.core):
        bounds = [vocabulary().bounds.get(key(found[name])) for name in ("first", "second")]
        if bounds[0] and bounds[1] and bounds[0] != bounds[1] and found.start() > 0:
            parts.bound = parts.bound or f"{bounds[0]}/{bounds[1]}"
            parts.core = parts.core[: found.start()].strip(EDGE)
    for _ in range(2):
        words = parts.core.split()
        joined_cjk = _cjk_bound(parts)
        if joined_cjk or len(words) < 2 or key(parts.core) in vocabulary().labels:
            return
        for at, rest in ((-1, words[:-1]), (0, words[1:])):
            bound = vocabulary().bounds.get(key(words[at]))
            if bound in ("min", "max") or (bound == "typ" and not is_nominal(words[at])):
                parts.bound = parts.bound or bound
                parts.core = " ".join(rest).strip(EDGE)
                break
        else:
            return


def is_nominal(word: str) -> bool:
    """Whether the word names the usual value without calling it typical ("nominal", "standard", "type")."""
    return word.casefold().strip(".") in vocabulary().phrases.get("nominal", ()) or key(word) == "type"


# "等效电阻Max": no space before a Latin word.
_GLUED_BOUND = re.compile(r"(?<=[\u3040-\u30ff\u3400-\u9fff])\s?(max|min|typ)\.?$", re.IGNORECASE)


def _cjk_bound(parts: Parts) -> bool:
    """Take off a bound word in ideographs ("最大"), written without a space; whether there was one."""
    if not IDEOGRAPHS.search(parts.core):
        return False
    if glued := _GLUED_BOUND.search(parts.core):
        parts.bound = parts.bound or glued[1].lower()
        parts.core = parts.core[: glued.start()].strip(EDGE)
        return True
    for word in vocabulary().phrases.get("max", ()) + vocabulary().phrases.get("min", ()):
        if not IDEOGRAPHS.match(word):
            continue
        for rest in (parts.core.removesuffix(word), parts.core.removeprefix(word)):
            if rest != parts.core and rest.strip(EDGE):
                parts.bound = parts.bound or vocabulary().bounds[key(word)]
                parts.core = rest.strip(EDGE)
                return True
    return False


def without_unit(parts: Parts) -> bool:
    """Take a unit off the end of the core ("ESR Ω", "drive in µW", "cl pf"); whether there was one."""
    tokens = re.sub(r"/(?=[^/\s]+$)", " / ", parts.core).split()
    for count in (2, 1):
        tail = " ".join(tokens[-count:]).strip(",;/± ")
        if len(tokens) > count and is_unit(tail):
            rest = tokens[:-count]
            if len(rest) > 1 and key(rest[-1]) in ("in", "en", "em"):
                rest = rest[:-1]
            parts.unit = parts.unit or tail
            parts.core = " ".join(rest).strip(EDGE)
            take_bound(parts)
            return True
    return False
