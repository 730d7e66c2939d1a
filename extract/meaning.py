"""What a short printed text is: a field's label, a heading's role, an identity label, a unit, a symbol, a value ..."""

from __future__ import annotations

import re
import tomllib
from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace
from functools import lru_cache
from importlib import resources
from typing import Any

from extract import wording
from extract.fold import fold, key
from extract.number import PLAIN_NUMBER
from extract.vocabulary import vocabulary
from extract.wording import Label

_DIGIT = re.compile(r"\d")
# A number that stands by itself or before a unit; "5hwQ2IN" and "C0" hold none.
_NUMBER = re.compile(
    r"(?<![A-Za-z0-9_])[-+±≤≥<>~]?\s?\d+(?:[.,]\d+)*(?=$|[\s%°)\]~,;/…*×≤≥<>±-]|[kKM](?:[\s≤≥<>~-]|$)|[kKMmGμun]?(?:Hz|HZ|hz|F|f|Ω|[oO]hms?|W|H|V|A|R)\b|ppm|PPM|C\b)"
)
_EAST = re.compile(r"[\u3040-\u30ff\u3400-\u9fff\uac00-\ud7af]{2,}")
_NUMBERING = re.compile(r"^\s*(?:\(?\d{1,2}[.)、]\s?|[•●■◆▪·*-]\s*)(?=\D)")
_WORDLIKE = r"[^\W\u3040-\u30ff\u3400-\u9fff\uac00-\ud7af]"
_PART_TOKEN = re.compile(
    rf"(?<!{_WORDLIKE})(?<![.,/±+×-])[A-Z0-9](?:[A-Za-z0-9]|[-./,](?=[A-Za-z0-9]))+(?!{_WORDLIKE}|[°%])"
)
# A model without a digit ("TBX-A"): only where it stands alone.
_LETTERS = re.compile(r"[A-Z]{2,6}-[A-Z]{1,2}")
_AMOUNT = re.compile(
    r"[-+]?[\d.,]+(?:[-~/][\d.,]+)*(?:[A-Za-z]{0,2}?(?:Hz|HZ|hz|F|f|ppm|PPM|pF|C|V|A|W|H|mm|MM|s|S|g|h|R|k|K|M|pcs|th|rd|st|nd|OT|ot|Vdc|VDC|dc|ohm|Ohm|ohms|Ohms))*"
)
_SIZE = re.compile(r"[\d.,]+(?:[xX][\d.,]+)+(?:mm)?|\d{4}(?:-\d[A-Z])?")
_LEAD = re.compile(r"[A-Za-z]+[-/.]?")


@dataclass(frozen=True, slots=True)
class Meaning:
    """Every vocabulary's answer about one text; `value` where it holds a digit and none of them knows it."""

    label: Label | None
    role: str | None
    identity: str | None
    attribute: str | None
    trap: str | None
    value: bool

    @property
    def head(self) -> str | None:
        """A name for what the text stands for as a heading; None where it is no heading."""
        if self.label is not None and self.label.exact:
            return self.label.field
        if self.role in ("mode", "cut", "band", "model", "code"):
            return self.role
        return self.identity or (f"attribute {self.attribute}" if self.attribute else None)

    @property
    def known(self) -> bool:
        """Whether any vocabulary knows the text."""
        return bool(self.label or self.role or self.identity or self.attribute or self.trap)


_A_NUMBER = Meaning(None, None, None, None, None, value=True)


@lru_cache(maxsize=16384)
def meaning(text: str) -> Meaning:
    """Look `text` up in all vocabularies; a name in two languages, or numbered, is looked up by its parts as well."""
    folded = fold(text)
    if PLAIN_NUMBER.fullmatch(folded):
        return _A_NUMBER
    number = bool(_NUMBER.search(folded))
    if not folded or len(folded) > 120:
        return Meaning(None, None, None, None, None, number)
    names = [folded] if _is_label(folded) else _names(folded)
    role = None if number else _first(wording.role_of, names)
    identity = _first(wording.identity_label, names)
    attribute = _first(wording.attribute_label, names)
    label = None if (role and role != "band") or identity else wording.read_label(folded)
    label = settled(label) if label is not None and not label.exact else label
    trap = _first(wording.trap_of, names)
    known = role or identity or attribute or (label is not None and label.exact)
    return Meaning(label, role, identity, attribute, trap, number and not known)


def _is_label(folded: str) -> bool:
    """Whether the whole text is a field's label: then the Latin word in it ("並列容量 TYP") is a bound, no heading."""
    label = wording.read_label(folded)
    return label is not None and label.exact


_MEASURED_AT = re.compile(
    r"(?i)[\d.,±+\-\s]+|°?(?<![A-Za-z])C\b|\b(?:[DA]C)?\s?\d*\s?V(?:\s?[DA]C)?\b|\b[km]?Hz\b|\b(?:DC|AC)\b"
)


def settled(label: Label) -> Label:
    """A partial match whose rest is only a bound word, a mode or where it was measured is as good as the wording."""
    rest = _MEASURED_AT.sub(" ", label.rest).strip()
    bound = vocabulary().bounds.get(key(rest))
    if bound is not None and label.bound in (None, bound):
        return replace(label, bound=bound, exact=True)
    modes = vocabulary().modes
    if not key(rest) or all(key(word) in modes or key(word) in ("overtone", "mode", "at") for word in rest.split()):
        return replace(label, exact=bool(label.rest))
    return label


def _names(folded: str) -> list[str]:
    """The text, the text without numbering, and where it is in two scripts each of them."""
    plain = _NUMBERING.sub("", folded).strip(" :")
    names = [folded, plain]
    if _EAST.search(plain) and re.search(r"[A-Za-z]{2}", plain):
        names += [re.sub(r"[^\x00-\u02ff]+", " ", plain).strip(" ()[]:/"), *_EAST.findall(plain)]
    return [name for name in dict.fromkeys(names) if name]


def _first(look_up: Callable[[str], str | None], names: Sequence[str]) -> str | None:
    return next((found for name in names if (found := look_up(name)) is not None), None)


@lru_cache(maxsize=16384)
def is_part_token(text: str) -> bool:
    """Whether the whole text is one or several part or series numbers ("SQ-320, SQ-321")."""
    words = [word for word in re.split(r"[\s,;/]+", fold(text)) if word]
    if len(words) == 1 and _LETTERS.fullmatch(words[0]):
        return words[0].split("-")[0].casefold() not in _refused() and not meaning(words[0]).known
    return 0 < len(words) <= 4 and bool(part_tokens(words[0])) and all(part_tokens(word) for word in words)


@lru_cache(maxsize=1)
def identity_words() -> dict[str, dict[str, Any]]:
    """`identity.toml`: what tells part numbers, makers and packages from other words."""
    return tomllib.loads(resources.files("extract").joinpath("identity.toml").read_text(encoding="utf-8"))


@lru_cache(maxsize=1)
def _refused() -> frozenset[str]:
    return frozenset(prefix.casefold() for prefix in identity_words()["not_parts"]["prefixes"])


@lru_cache(maxsize=16384)
def part_tokens(text: str) -> tuple[str, ...]:
    """Words of `text` that could be part or series numbers, in order."""
    found: list[str] = []
    for match in _PART_TOKEN.finditer(fold(text)):
        token = match[0].rstrip(".-/,")
        if _could_name_a_part(token) and token not in found:
            found.append(token)
    return tuple(found)


def _could_name_a_part(token: str) -> bool:
    if len(token) < 3 or not _DIGIT.search(token) or not any(c.isalpha() for c in token):
        return False
    if all(_AMOUNT.fullmatch(piece) for piece in token.split("/")) or _SIZE.fullmatch(token):
        return False
    if sum(c.islower() for c in token) > sum(c.isupper() for c in token):
        return False
    lead = _LEAD.match(token)
    prefix = lead[0].rstrip("-/.").casefold() if lead else ""
    return prefix not in _refused()
