"""Numbers that belong together: a range, ±, centre and tolerance, a pair of signs; each with its unit."""

from __future__ import annotations

from dataclasses import dataclass, field, replace

from extract.fold import key
from extract.tokens import Token
from extract.vocabulary import vocabulary

_ENDS_SEGMENT = frozenset({"sep", "line", "slash", "open", "close", "or", "colon"})
_UNITS = frozenset({"unit", "other"})
# Quantities that a value may be restricted to; a voltage or a time is only how it was measured.
_RESTRICTING = frozenset({"frequency", "temperature", "capacitance"})


@dataclass(slots=True)
class Group:
    """One amount as printed.

    `shape`: "single", "pm" (± low), "range" (low to high), "centre" (low ± high), "grades" (±low to ±high).
    `below` is the lower tolerance of a centre that has two ("25 +5/-10"), else None.
    `foreign` names the kind of quantity where its unit is none of the field's. `low_unit`, `high_unit`: (text, factor).
    """

    shape: str
    low: Token
    high: Token | None = None
    below: Token | None = None
    low_unit: Token | None = None
    high_unit: Token | None = None
    bound: str | None = None
    foreign: str | None = None
    before: str = ""
    segment: int = 0
    start: int = 0
    end: int = 0
    doubts: list[str] = field(default_factory=list)

    @property
    def percent(self) -> bool:
        unit = self.high_unit
        return unit is not None and unit.kind == "other" and unit.meaning == "relative"

    def has_unit(self) -> bool:
        return self.low_unit is not None or self.high_unit is not None


@dataclass(slots=True)
class Item:
    """A group, or a word that says something of one, in the order printed. `segment` counts commas, brackets, lines."""

    segment: int
    line: int
    group: Group | None = None
    word: Token | None = None


class _Reader:
    def __init__(self, tokens: list[Token], field_name: str, *, plain_pair: bool) -> None:
        self.tokens = tokens
        self.field_name = field_name
        self.plain_pair = plain_pair
        self.at = 0
        self.segment = 0
        self.line = 0
        self.items: list[Item] = []
        self.between = False

    def kind(self, ahead: int = 0) -> str:
        index = self.at + ahead
        return self.tokens[index].kind if 0 <= index < len(self.tokens) else ""

    def take(self) -> Token:
        self.at += 1
        return self.tokens[self.at - 1]

    def take_unit(self) -> Token | None:
        return self.take() if self.kind() in _UNITS else None

    def read(self) -> list[Item]:
        while self.at < len(self.tokens):
            kind = self.kind()
            if kind == "see":
                self._skip_reference()
            elif kind == "number" or (kind == "pm" and self.kind(1) == "number"):
                self._group()
            elif kind == "compare" and self.kind(1) in ("number", "pm"):
                self._compared()
            elif kind == "to" and self.kind(1) == "number" and self._opens_range():
                self._limited("bound")
            elif kind in ("bound", "above", "from") and self._limits_foreign():
                self._limited(kind)
            else:
                self._word(kind)
        return self.items

    def _word(self, kind: str) -> None:
        token = self.take()
        self.between = kind == "between" or (self.between and kind not in _ENDS_SEGMENT)
        if kind in _ENDS_SEGMENT:
            self.segment += 1
            self.line += kind == "line"
        self.items.append(Item(self.segment, self.line, word=token))

    def _skip_reference(self) -> None:
        """The number of "see table 1" is no value."""
        while self.at < len(self.tokens) and self.kind() not in ("sep", "line", "close"):
            self.take()

    def _compared(self) -> None:
        sign = self.take()
        made = self._group()
        if made is not None and made.bound is None:
            made.bound = "max" if sign.meaning == "<" else "min"

    def _limits_foreign(self) -> bool:
        """In "60 Ω below 16 MHz" the word bounds the condition, not the value."""
        units = ("other",) if self.field_name else _UNITS
        if self.kind(1) != "number" or self.kind(2) not in units or self.kind(3) in ("to", "pm"):
            return False
        unit = self.tokens[self.at + 2]
        return unit.kind == "unit" or unit.meaning in _RESTRICTING

    def _opens_range(self) -> bool:
        """Whether "to" has no lower end before it ("fundamental to 40 MHz"); "a" and "à" are "at" as well."""
        word = self.tokens[self.at].text
        return (
            word.isalpha()
            and len(word) > 1
            and self.kind(-1) not in ("number", "unit", "other")
            and self.kind(2) in _UNITS
        )

    def _limited(self, kind: str) -> None:
        word = self.take()
        made = self._group()
        if made is not None and made.bound is None and made.shape == "single":
            made.bound = "min" if kind != "bound" or word.meaning == "min" else "max"

    def _group(self) -> Group | None:
        start = self.at
        before = self._before()
        made = self._plus_minus() if self.kind() == "pm" else self._number()
        if self.kind() == "times" and self.kind(1) == "number":
            while self.kind() in ("times", "number", *_UNITS):
                self.take()
            return None
        made.start, made.end, made.before, made.segment = start, self.at, before, self.segment
        unit = made.high_unit if made.high_unit and not made.percent else made.low_unit
        if unit is not None and unit.kind == "other":
            made.foreign = unit.meaning
        if made.shape == "centre" and made.percent and made.low_unit is None:
            made.foreign = None
        self.items.append(Item(self.segment, self.line, group=made))
        return made

    def _before(self) -> str:
        """What stands right before: "at", "for", "from", or the symbol of another field ("CL = 8 pF")."""
        index = self.at - 1
        while index >= 0 and self.tokens[index].kind in ("equals", "compare", "pm"):
            index -= 1
        if index > 0 and self.tokens[index].kind == "colon" and len(self.tokens[index - 1].text) > 1:
            # A single letter before a colon is a code ("K: ±10 ppm").
            index -= 1
        if index < 0:
            return ""
        token = self.tokens[index]
        if token.kind == "word":
            owner = vocabulary().symbols.get(key(token.text))
            if owner is not None and owner != self.field_name:
                return "symbol " + owner
            return "at" if index and self.tokens[index - 1].kind == "at" else ""
        return token.kind if token.kind in ("at", "for", "from", "except") else ""

    def _plus_minus(self) -> Group:
        self.take()
        made = Group("pm", self.take())
        made.low_unit = self.take_unit()
        if self.kind() == "to" and (self.kind(1) == "pm" and self.kind(2) == "number" or self.kind(1) == "number"):
            if self.kind(1) == "number" and (
                self.tokens[self.at + 1].meaning or self._other_kind_follows(made.low_unit)
            ):
                return made
            self.take()
            if self.kind() == "pm":
                self.take()
            made.shape, made.high, made.high_unit = "grades", self.take(), self.take_unit()
        return made

    def _number(self) -> Group:
        made = Group("single", self.take())
        made.low_unit = self.take_unit()
        if self._bracket_then_pm():
            self.take()
        if self.kind() == "pm" and self.kind(1) == "number" and not self._other_quantity(made.low_unit):
            self.take()
            made.shape, made.high, made.high_unit = "centre", self.take(), self.take_unit()
        elif tolerances := self._two_tolerances(made.low):
            made.shape, (made.high, made.below) = "centre", tolerances
            made.high_unit = self.take_unit()
        elif self.kind() == "to" and self.kind(1) == "series":
            self.take()
            made.bound = "min"
        elif self.kind() == "to" and self.kind(1) == "pm" and self.kind(2) == "number":
            self.take()
            self.take()
            made.shape, made.high, made.high_unit = "centre", self.take(), self.take_unit()
            made.doubts.append("a range sign stands before ±; read as centre and tolerance")
        elif self._range_follows() and not self._other_kind_follows(made.low_unit):
            self.take()
            while self.kind() in ("compare", "to"):
                self.take()
            made.shape, made.high, made.high_unit = "range", self.take(), self.take_unit()
        elif self._letter_between():
            while self.kind() != "number":
                self.take()
            made.shape, made.high, made.high_unit = "range", self.take(), self.take_unit()
        elif self.kind() == "compare" and self.kind(1) == "word" and self.kind(2) != "number":
            made.bound = "min" if self.take().meaning == "<" else "max"
            self.take()
        elif self._signs_follow(made.low):
            if self.kind() in ("slash", "sep"):
                self.take()
            made.shape, made.high, made.high_unit = "range", self.take(), self.take_unit()
        return made

    def _two_tolerances(self, middle: Token) -> tuple[Token, Token] | None:
        """Upper and lower tolerance behind a number: "25 +5/-5", "25 (-10/+5)"; without the slash only two alike."""
        at = self.at + (self.kind() == "open")
        signed: list[Token] = []
        slash = False
        for _ in range(2):
            slash = slash or self._kind_at(at) == "slash"
            at += self._kind_at(at) == "slash"
            minus = self._kind_at(at) == "to" and self.tokens[at].meaning == "-"
            at += minus
            if self._kind_at(at) != "number":
                return None
            signed.append(replace(self.tokens[at], meaning="-") if minus else self.tokens[at])
            at += 1
        if not _are_tolerances(signed, middle, slash=slash):
            return None
        self.at = at
        return (signed[0], signed[1]) if signed[0].meaning == "+" else (signed[1], signed[0])

    def _kind_at(self, at: int) -> str:
        return self.tokens[at].kind if at < len(self.tokens) else ""

    def _other_quantity(self, unit: Token | None) -> bool:
        """Whether ± begins another quantity ("32.768 kHz ±20 ppm"); in percent or the same unit it is a half width."""
        if unit is None or self.kind(2) not in _UNITS:
            return False
        half = self.tokens[self.at + 2]
        percent = half.meaning == "relative" and half.value > 1e-3
        return not percent and (half.kind, half.meaning) != (unit.kind, unit.meaning)

    def _bracket_then_pm(self) -> bool:
        return (
            self.kind() == "open" and self.kind(1) == "pm" and self.kind(2) == "number" and self.field_name not in _PPM
        )

    def _range_follows(self) -> bool:
        if self.between and self.kind() == "or" and self.kind(1) == "number":
            self.between = False
            return True
        return self.kind() == "to" and (
            self.kind(1) == "number" or (self.kind(1) in ("compare", "to") and self.kind(2) == "number")
        )

    def _other_kind_follows(self, unit: Token | None) -> bool:
        """Whether the number after "to" is another quantity: "500 MΩ à 100 V", where "à" says "at"."""
        if unit is None or self.kind(1) != "number" or self.kind(2) not in _UNITS:
            return False
        end = self.tokens[self.at + 2]
        return (end.kind, end.meaning) != (unit.kind, unit.meaning)

    def _letter_between(self) -> bool:
        """Whether a letter stands between two ends ("3.5 MHz ≤ f < 4.0 MHz")."""
        return (
            self.kind() == "compare"
            and self.kind(1) == "word"
            and self.kind(2) == "compare"
            and self.kind(3) == "number"
        )

    def _signs_follow(self, low: Token) -> bool:
        """Whether two signs make a pair: "-5/+15", "-40 +85" (the range sign lost); of temperatures also "-40/85"."""
        ahead = 1 if self.kind() == "slash" else 0
        if self.kind(ahead) != "number":
            return False
        high = self.tokens[self.at + ahead]
        if {low.meaning, high.meaning} == {"-", "+"}:
            return True
        from_zero = not low.meaning and low.number is not None and low.number.plain == 0
        if from_zero and ((self.plain_pair and high.meaning == "+") or (ahead and self.field_name in _PPM)):
            return bool(high.meaning)
        if ahead and low.meaning == "-" and high.number is not None and high.number.plain == 0:
            return True
        return self.plain_pair and low.meaning == "-" and not high.meaning


def _are_tolerances(signed: list[Token], middle: Token, *, slash: bool) -> bool:
    """Whether two signed numbers are tolerances of the middle: opposite signs, a slash between or alike, small."""
    sizes = [token.number.plain for token in signed if token.number]
    centre = middle.number.plain if middle.number else 0.0
    if len(sizes) < 2 or {token.meaning for token in signed} != {"+", "-"}:
        return False
    return (slash or sizes[0] == sizes[1]) and (middle.meaning != "-" or max(sizes) < centre)


_PPM = frozenset({"frequency_tolerance_ppm", "frequency_stability_ppm", "ageing_ppm", "frequency_mhz"})


def read_items(tokens: list[Token], field_name: str, *, plain_pair: bool = False) -> list[Item]:
    """Group the tokens; `plain_pair`: a slash between a negative and a plain number is a range ("-40/85 °C")."""
    return _Reader(tokens, field_name, plain_pair=plain_pair).read()
