"""A printed value cut into what it is made of: numbers, signs, units, bound words, conditions, lists."""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass
from functools import cache
from itertools import pairwise

from extract.notemarks import without_marks
from extract.number import NUMBER, Number, numbers
from extract.units import kind_of, other_unit_at, unit_at
from extract.vocabulary import vocabulary


@dataclass(slots=True)
class Token:
    """One piece of folded text; what `meaning` holds depends on `kind`.

    number: its sign ("", "+", "-"); bound: "min", "typ", "max"; compare: "<" or ">"; mode: its name; other: the kind of
    quantity. `value` is the `Number`, and for own units and others the factor, for years the number of years.
    """

    kind: str
    text: str
    start: int
    end: int
    meaning: str = ""
    number: Number | None = None
    value: float = 0.0
    glued: bool = False


# Which meaning a word has that stands in several lists of the wording files: the first of these.
_WORD_KINDS = (
    "first_year", "ten_years", "five_years", "per_year", "others", "request", "standard", "recommended", "min", "typ",
    "max", "series", "plus_minus", "see", "except", "between", "to", "or", "from", "for", "at", "minus", "plus",
    "above", "below",
)  # fmt: skip
_MARKS = {
    "±": "pm", "~": "to", "…": "to", "<": "compare", "≤": "compare", ">": "compare", "≥": "compare",
    ",": "sep", ";": "sep", "、": "sep", "。": "sep", "|": "sep", "\n": "line", "/": "slash",
    "(": "open", "[": "open", "{": "open", ")": "close", "]": "close", "}": "close",
    "@": "at", ":": "colon", "=": "equals", "×": "times", "*": "star", "※": "star", "^": "raised", "&": "or",
    "∞": "series",
}  # fmt: skip
_COMPARE = {"<": "<", "≤": "<", ">": ">", "≥": ">"}
_WORD = re.compile(r"[^\W\d_](?:[\w.^]*\w)?", re.UNICODE)
_IDEOGRAPH = re.compile(r"[\u3040-\u30ff\u3400-\u9fff\uac00-\ud7af]")
_TIMES_TEN = re.compile(r"\s?(?:[x×*·]\s?10\s?\^?\s?|[eE])([+-]?\s?\d{1,2})(?![\d.])")
_ORDINAL = re.compile(r"(?:st|nd|rd|th)\b", re.IGNORECASE)
# "-(0.035 ± 0.005)" and "(-40) to 125".
_SIGN_BEFORE_BRACKET = re.compile(r"-\(\s?(?=[\d.])")
_SIGN_IN_BRACKET = re.compile(r"\(\s?([-+]\d+(?:[.,]\d+)?)\s?\)")
_NEAR_NUMBER = frozenset({"number", "unit", "other"})


@cache
def _phrases() -> dict[str, tuple[tuple[str, str], ...]]:
    """(wording, kind) by the wording's first character, the longest first; also without the spaces in them."""
    kind_of: dict[str, str] = {}
    lists = vocabulary().phrases
    for kind in [*(name for name in lists if name.startswith("mode ")), *_WORD_KINDS]:
        for word in lists.get(kind, ()):
            if word not in _MARKS:
                kind_of.setdefault(word, kind)
                if len(word) > 5:
                    kind_of.setdefault(word.replace(" ", ""), kind)
    by_first: dict[str, list[tuple[str, str]]] = {}
    for word in sorted(kind_of, key=len, reverse=True):
        by_first.setdefault(word[0], []).append((word, kind_of[word]))
    return {first: tuple(words) for first, words in by_first.items()}


def _phrase_at(lower: str, at: int) -> tuple[str, int] | None:
    """(kind, end) of the longest wording at `at`; a Latin one ends where no letter follows, an ideograph anywhere."""
    for word, kind in _phrases().get(lower[at], ()):
        if lower.startswith(word, at):
            end = at + len(word)
            if not word[-1].isalpha() or not word[-1].isascii() and _IDEOGRAPH.match(word[-1]):
                return kind, end
            if end == len(lower) or not lower[end].isalpha() or _IDEOGRAPH.match(lower[end]):
                return kind, end + (end < len(lower) and lower[end] == ".")
    return None


@cache
def years_pattern() -> re.Pattern[str]:
    """A number of years in any language: "10 years", "10-year", "10年"."""
    names = sorted(vocabulary().phrases.get("years", ("years",)), key=len, reverse=True)
    words = "|".join(re.escape(name) + ("(?![a-z])" if name[-1].isascii() else "") for name in names)
    return re.compile(rf"(\d{{1,2}})\s?-?(?:\.\s?)?(?:{words})", re.IGNORECASE)


def tokens(text: str, field: str) -> list[Token]:
    """The pieces of folded `text`, seen by a reader who looks for a value of `field`."""
    found: list[Token] = []
    text = _SIGN_BEFORE_BRACKET.sub("(-", _SIGN_IN_BRACKET.sub(r" \1 ", text))
    lower = text.casefold()
    if len(lower) != len(text):
        lower = text.lower() if len(text.lower()) == len(text) else text
    at = 0
    while at < len(text):
        if text[at] == " ":
            at += 1
            continue
        for token in _next(text, lower, at, field, found):
            found.append(token)
            at = token.end
    found = without_marks([token for token in found if token.kind != "blank"], field)
    return _spoken_signs(_without_torn_exponent(found))


def _without_torn_exponent(found: list[Token]) -> list[Token]:
    """Drop the exponent that stands once more by itself: "20 10-6 / year  -6"."""
    if not any(token.kind == "unit" and "10" in token.text for token in found):
        return found
    for at in range(len(found) - 1, 0, -1):
        token, before = found[at], found[at - 1]
        lone = (
            token.kind == "number"
            and token.text == "6"
            and (at + 1 == len(found) or found[at + 1].kind not in _NEAR_NUMBER)
        )
        if lone and token.meaning == "-":
            return found[:at] + found[at + 1 :]
        if lone and before.kind == "to" and before.meaning == "-":
            return found[: at - 1] + found[at + 1 :]
    return found


def _spoken_signs(found: list[Token]) -> list[Token]:
    """Give numbers the signs that are written as words: "minus 40 to plus 85"."""
    for word, number in pairwise(found):
        if word.kind in ("minus", "plus") and number.kind == "number" and not number.meaning:
            number.meaning = "-" if word.kind == "minus" else "+"
    return [token for token in found if token.kind not in ("minus", "plus")]


def _next(text: str, lower: str, at: int, field: str, before: list[Token]) -> Iterator[Token]:
    char = text[at]
    yield from (
        _phrase(text, lower, at, before)
        or _years(text, at)
        or _signed_number(text, at, field, before)
        or _free_unit(text, at, field, before)
        or [_mark_or_word(text, at, char)]
    )


def _phrase(text: str, lower: str, at: int, before: list[Token]) -> list[Token]:
    found = _phrase_at(lower, at)
    if not found or (lower[at].isalpha() and _inside_word(lower, at) and not _ends_known(before, at)):
        return []
    kind, end = found
    printed = text[at:end]
    if kind in ("first_year", "per_year"):
        return [Token("years", printed, at, end, meaning=kind, value=1.0)]
    if kind in _YEARS_IN_WORDS:
        return [Token("years", printed, at, end, value=_YEARS_IN_WORDS[kind])]
    if kind in ("min", "typ", "max"):
        return [Token("bound", printed, at, end, meaning=kind)]
    if kind.startswith("mode "):
        return [Token("mode", printed, at, end, meaning=kind[5:])]
    return [Token("pm" if kind == "plus_minus" else kind, printed, at, end)]


_YEARS_IN_WORDS = {"ten_years": 10.0, "five_years": 5.0}
_TEMPERATURE = re.compile(r"-\d+(?:[.,]\d+)?\s?(?:(?:~|…|to|bis|/|-)\s?\+?\d+(?:[.,]\d+)?\s?)?°")


def _begins_temperature(text: str, at: int, before: list[Token]) -> bool:
    """Whether the minus begins a temperature behind an amount in another unit: "100 µW -40~85 °C"."""
    last = before[-1]
    return last.kind in ("unit", "other") and "°" not in last.text and bool(_TEMPERATURE.match(text, at))


def _inside_word(text: str, at: int) -> bool:
    return at > 0 and text[at - 1].isascii() and text[at - 1].isalpha()


def _years(text: str, at: int) -> list[Token]:
    found = years_pattern().match(text, at) if text[at].isdigit() else None
    return [Token("years", found[0], at, found.end(), value=float(found[1]))] if found else []


def _signed_number(text: str, at: int, field: str, before: list[Token]) -> list[Token]:
    """A number with its sign and its unit; a dash between two numbers is a range."""
    last = before[-1] if before else None
    sign, start = "", at
    if text.startswith("--", at) and not before:
        return [Token("blank", "--", at, at + len(text[at:]) - len(text[at:].lstrip("- ")))]
    if text[at] in "+-":
        start = at + 1
        while start < len(text) and text[start] == " ":
            start += 1
        after_number = last is not None and last.kind in _NEAR_NUMBER
        if (
            text[at] == "-"
            and after_number
            and not (
                start == at + 1
                and text[at - 1] == " "
                and (_after_plus_minus(before) or _after_pair(before) or _begins_temperature(text, at, before))
            )
        ):
            return [Token("to", "-", at, at + 1, meaning="-")]
        found = NUMBER.match(text, start)
        if not found or start - at > 2:
            return [Token("blank", text[at], at, at + 1)]
        sign = text[at]
    else:
        found = NUMBER.match(text, at)
    if not found:
        return []
    if not sign and (power := _bare_power(text, at, field)):
        return [power]
    glued_before = _inside_word(text, at) and not _ends_known(before, at)
    return _numbers(text, start, found, sign, field, glued=glued_before)


def _bare_power(text: str, at: int, field: str) -> Token | None:
    """The unit "10-6" where a number should be: it stands in a unit column, its number elsewhere."""
    unit = unit_at(text, field, at) if text.startswith("10", at) else None
    return Token("unit", unit[0], at, unit[2], meaning="free", value=unit[1]) if unit else None


def _ends_known(before: list[Token], at: int) -> bool:
    return bool(before) and before[-1].end == at and before[-1].kind not in ("word", "blank")


def _after_plus_minus(before: list[Token]) -> bool:
    """Whether the number before is a ±, which begins no range: "±15 ppm -20 ~ +70 °C"."""
    numbers_before = [at for at, token in enumerate(before) if token.kind == "number"]
    return bool(numbers_before) and numbers_before[-1] > 0 and before[numbers_before[-1] - 1].kind == "pm"


def _after_pair(before: list[Token]) -> bool:
    """Whether two signs make a range complete already: "-20 +70 -40 +85"."""
    signs = [token.meaning for token in before if token.kind == "number"]
    return len(signs) % 2 == 0 and signs[-2:] == ["-", "+"]


# A power of ten beyond every quantity ("1e400") is a slip, and its digits are no second value.
_ABSURD_POWER = re.compile(r"[eE][+-]?\d{3,}(?!\w)")


def _numbers(text: str, start: int, found: re.Match[str], sign: str, field: str, *, glued: bool) -> list[Token]:
    printed, end = found[0], found.end()
    if " " in printed and unit_at(text, field, end) is None and kind_of(field).name != "number":
        printed = printed.split(" ")[0]
        end = start + len(printed)
    if power := _ABSURD_POWER.match(text, end):
        return [Token("broken", printed + power[0], start, power.end())]
    made: list[Token] = []
    unit = unit_at(text, field, end)
    if unit is None and (torn := _torn_exponent(printed, text, end, field)):
        printed, unit = torn
    read = numbers(printed)
    for index, one in enumerate(read):
        if index:
            made.append(Token("sep", ",", start, end))
        made.append(Token("number", one.text, start, end, meaning=sign, number=one, glued=glued))
    if not made:
        return [Token("broken", printed, start, end)]
    return made + _unit_after(text, end, field, unit, made[-1])


def _torn_exponent(printed: str, text: str, end: int, field: str) -> tuple[str, tuple[str, float, int]] | None:
    """Number and unit of "2010-6": the times sign of ×10⁻⁶ is lost, and with it the gap before the ten."""
    if not printed.endswith("10") or len(printed) < 3:
        return None
    unit = unit_at(text, field, end - 2)
    return (printed[:-2], unit) if unit and unit[0].startswith("10") else None


def _unit_after(text: str, end: int, field: str, unit: tuple[str, float, int] | None, number: Token) -> list[Token]:
    if unit is not None:
        return [Token("unit", unit[0], end, unit[2], value=unit[1])]
    if power := _TIMES_TEN.match(text, end):
        assert number.number is not None  # noqa: S101 - a number token holds one
        scale = 10.0 ** int(power[1].replace(" ", ""))
        plain = float(f"{number.number.plain * scale:.12g}")
        number.number = Number(number.text + power[0], plain)
        number.end = power.end()
        return _unit_after(text, power.end(), field, unit_at(text, field, power.end()), number)
    if other := other_unit_at(text, field, end):
        return [Token("other", text[end : other[2]], end, other[2], meaning=other[0], value=other[1])]
    if end < len(text) and text[end].isalpha() and text[end].isascii() and not _starts_word(text, end):
        number.glued = True
    return []


def _starts_word(text: str, at: int) -> bool:
    """Whether a known word follows a number without a space ("60Max", "25typ", "2x")."""
    return text[at] in "xX" or _phrase_at(text.lower(), at) is not None


def _free_unit(text: str, at: int, field: str, before: list[Token]) -> list[Token]:
    """A unit that follows no number directly: "(100 max.) µW", "±ppm 20"."""
    if not before or (at and text[at - 1].isalnum()):
        return []
    unit = unit_at(text, field, at)
    if unit is None or len(unit[0]) == 1 and unit[0] not in "ΩW%":
        return []
    return [Token("unit", unit[0], at, unit[2], meaning="free", value=unit[1])]


def _mark_or_word(text: str, at: int, char: str) -> Token:
    if kind := _MARKS.get(char):
        return Token(kind, char, at, at + 1, meaning=_COMPARE.get(char, ""))
    if _IDEOGRAPH.match(char):
        return Token("word", char, at, at + 1)
    if char in "xX" and at and text[at - 1] in " 0123456789":
        return Token("times", char, at, at + 1)
    if found := _WORD.match(text, at):
        return Token("word", found[0], at, found.end())
    return Token("blank", char, at, at + 1)
