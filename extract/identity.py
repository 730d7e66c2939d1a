"""Who made the part, what it is called and how big it is: from labelled values, headings, page headers and footers."""

from __future__ import annotations

import re
from collections import Counter
from collections.abc import Iterable, Sequence
from functools import lru_cache

from extract import wording
from extract.candidates import label_of
from extract.entries import Entry, Item, Text
from extract.fold import fold
from extract.meaning import identity_words, meaning, part_tokens
from extract.vocabulary import vocabulary

_HOLDER = re.compile(
    r"(?i)\bHC[\s-]?/?\s?\d{2,3}(?:\s?[/-]\s?(?:US?|SMD|SM|S)|US?|SMD|S)?(?:[\s/-]?SMD)?\b|\bUM-?[1-5]\b|\bTO-?\d{1,2}\b"
)
_MILLIMETRES = re.compile(
    r"(?<![\d.,±])(\d{1,2}(?:[.,]\d{1,2})?)\s?(?:mm)?\s?(?:±\s?0?[.,]\d+\s?)?[xX×*]\s?[φ⌀∅]?\s?(\d{1,2}(?:[.,]\d{1,2})?)(?:\s?±\s?0?[.,]\d+)?(?:\s?(?:mm)?\s?[x×*]\s?\d{1,2}(?:[.,]\d{1,3})?)?(?![\d.,]*\d)(?:\s?mm\b)?"
)
_CODE = re.compile(
    r"(?i)\b(?:SMD|贴片|封装|package|size|case)\s?-?(\d{4})(?:-\dP)?\b|(?<![\w-])(\d{4})(?=\s?(?:SMD|package|size))"
)
_NAME_WORD = r"[A-ZÀ-Þ][^\W\d_]*(?:['&-][^\W\d_]+)*"
_LATIN_NAME = re.compile(
    rf"(?<![\w/-]){_NAME_WORD}(?![\w/-])"
    rf"(?:,?[ ]+[A-Z]\.\s?[A-Za-z]\.(?:\s?[A-Za-z]\.?)?(?!\w)"
    rf"|(?:,?[ ]+(?:&[ ])?|[ ]?&[ ]?){_NAME_WORD}(?![\w-])(?:\.(?=[ ,]|$))?|[ ]+e\.\s?K\.?)*"
)
_EAST_NAME = re.compile(r"[\u3400-\u9fff\u30a0-\u30ff\uac00-\ud7af]{2,}")
_BY = re.compile(r"\b(?:by|from|von)\s+$", re.IGNORECASE)
FIRST_LINES = 14


@lru_cache(maxsize=8192)
def package_in(text: str) -> str | None:
    """The first holder, size in millimetres or size code that a text prints."""
    folded = fold(text)
    if found := _HOLDER.search(folded):
        return found[0]
    limits = identity_words()["package"]
    for match in _MILLIMETRES.finditer(folded):
        sizes = [float(match[k].replace(",", ".")) for k in (1, 2)]
        if all(limits["least_mm"] <= size <= limits["greatest_mm"] for size in sizes) and match[2] != "10":
            return re.sub(r"\s?±\s?[\d.,]*\d", "", match[0]).strip()
    if found := _CODE.search(folded):
        return found[1] or found[2]
    return None


def is_package(text: str) -> bool:
    """Whether a short text names a package and little else."""
    found = package_in(text)
    if found is not None and part_tokens(fold(text).replace(found, " ")):
        return False
    if found is not None and len(found) >= 0.5 * len(fold(text)):
        return True
    return bool(re.fullmatch(r"\d{4}", fold(text)) or _CODE.fullmatch(fold(text)))


@lru_cache(maxsize=8192)
def makers_in(text: str) -> tuple[tuple[str, int], ...]:
    """Runs of words that could be a company's name, each with how sure the form makes it."""
    words = identity_words()["maker"]
    found: list[tuple[str, int]] = []
    plain = unfolded(text)
    for match in _LATIN_NAME.finditer(plain):
        name = _up_to_legal_form(match[0].strip(" ,-"))
        if score := _name_score(name, words):
            found.append((name, score + (1 if _BY.search(plain[: match.start()]) else 0)))
    for match in _EAST_NAME.finditer(plain):
        name = _up_to_eastern_form(match[0], words["east"][1:5])
        if (
            any(name.endswith(ending) or name.startswith(ending) for ending in words["east"])
            and len(name) > 3
            and name not in words["east_generic"]
        ):
            sure = any(mark in name for mark in words["east"][:5])
            found.append((name, 4 if sure else 2))
    return tuple(found)


def unfolded(text: str) -> str:
    """Text with plain dashes and spaces, ready for names."""
    return " ".join(re.sub(r"[\u2010-\u2015|·•]", " - ", text).split())


def _name_score(name: str, words: dict[str, list[str]]) -> int:
    parts = [part.strip(".,") for part in name.split() if part.strip(".,&")]
    if not 2 <= len(parts) <= 6 or any(any(c.isdigit() for c in part) for part in parts):
        return 0
    generic = {*words["generic"]}
    if len(parts[0]) < 2 or all(part.casefold() in generic for part in parts):
        return 0
    if any(_is_legal(part) for part in parts[1:]) or name.endswith(("e.K.", "e.K", "e. K.")):
        own = [part for part in parts if part.casefold() not in generic and not _is_legal(part)]
        return 4 if own else 0
    if parts[0].casefold() in generic:
        return 0
    trade = {word.casefold() for word in words["trade"]}
    return 3 if parts[-1].casefold() in trade and parts[0].casefold() not in trade else 0


def _is_legal(part: str) -> bool:
    """Whether a word is a company's legal form ("GmbH", "Ltd", "CORP.")."""
    bare = part.strip(".,").replace(".", "")
    legal = identity_words()["maker"]["legal"]
    return bare in legal or (bare.isupper() and bare in {word.upper() for word in legal})


def _up_to_eastern_form(name: str, forms: Sequence[str]) -> str:
    """A name without what is set right behind its legal form ("... 有限公司电话")."""
    ends = [name.find(form) + len(form) for form in forms if name.find(form) > 0]
    return name[: max(ends)] if ends else name


def _up_to_legal_form(name: str) -> str:
    """The name without what follows its legal form ("Able Crystals Ltd. SMD")."""
    words = name.split()
    last = max((index for index, word in enumerate(words) if index and _is_legal(word)), default=len(words) - 1)
    return " ".join(words[: last + 1]).rstrip(",")


def maker_of(items: Sequence[Item], headers: Sequence[Text], *, sure: bool = False) -> str | None:
    """The company that the sheet names as its maker; None where it names none. `sure` leaves out mere proper words."""
    labelled = [value for item in items if isinstance(item, Entry) and (value := _labelled(item, "maker"))]
    if labelled:
        return latin_or_whole(labelled[0])
    scores: Counter[str] = Counter()
    texts = [item for item in items if isinstance(item, Text)]
    places = [(text, 2) for text in headers]
    places += [(text, 2 if index < FIRST_LINES or index >= len(texts) - 4 else 0) for index, text in enumerate(texts)]
    for text, weight in places:
        for segment in _segments(text):
            for name, form in makers_in(segment):
                scores[name] += (form + weight) if scores[name] == 0 else 1
    if scores:
        return max(scores, key=lambda name: (scores[name], len(name)))
    return None if sure else _repeated_name(texts, headers)


def latin_or_whole(text: str) -> str:
    """A name given in two scripts, as printed."""
    return " ".join(text.split())


def _segments(text: Text) -> list[str]:
    return [segment.text for segment in text.segments] or [text.piece.text]


def _repeated_name(texts: Sequence[Text], headers: Sequence[Text]) -> str | None:
    """A proper word or two that stand alone at the top, in a page header or footer, or again and again."""
    scores: Counter[str] = Counter()
    for index, text in enumerate([*headers, *texts]):
        top = 2 if index < len(headers) + 3 else 0
        for segment in _segments(text):
            for piece in re.split(r" - |[|:;,]", unfolded(segment)):
                name = piece.strip(" .")
                name = _before_part(name) if top else name
                if _is_proper(name):
                    scores[name.casefold()] += 1 + (top if scores[name.casefold()] == 0 else 0)
    best = max(scores, key=lambda name: scores[name], default=None)
    if best is None or scores[best] < 2:
        return None
    everything = " ".join(unfolded(text.piece.text) for text in [*headers, *texts])
    found = re.search(re.escape(best), everything, re.IGNORECASE)
    return found[0] if found else None


def _before_part(name: str) -> str:
    """The words that stand before a part number at the beginning of a headline ("Oakmere QRB2016 Crystal")."""
    tokens = part_tokens(name)
    before = name[: name.find(tokens[0])].strip() if tokens else ""
    return before or name


def _is_proper(name: str) -> bool:
    words = name.split()
    generic = {*identity_words()["maker"]["generic"]}
    if not re.fullmatch(r"[A-ZÀ-Þ][^\W\d_]{2,}(?: (?:& )?[A-ZÀ-Þ][^\W\d_]+){0,2}", name) or meaning(name).known:
        return False
    return not any(word.casefold() in generic for word in words) and not any(meaning(word).known for word in words)


def _labelled(entry: Entry, what: str) -> str | None:
    if meaning(entry.label.text).identity != what or not entry.values or label_of(entry) is not None:
        return None
    text = " ".join(entry.values[0].piece.text.split())
    return None if wording.not_stated(text) or len(text) > 80 else text


def part_number_of(items: Sequence[Item], headers: Sequence[Text]) -> str | None:
    """The part or series number that the sheet is about; None where none can be told."""
    for item in items:
        if isinstance(item, Entry) and (text := _labelled(item, "part_number")) and (name := _as_part_number(text)):
            return name
    scores: Counter[str] = Counter()
    texts = [item for item in items if isinstance(item, Text)]
    for index, line in enumerate(texts[: FIRST_LINES * 2]):
        _score_tokens(line, max(0, 6 - index), scores)
    for line in headers:
        _score_tokens(line, 2, scores)
    best = max(scores, key=lambda name: scores[name], default=None)
    if best is not None and scores[best] > 0:
        return _whole_number(best, texts[:FIRST_LINES])
    stock = [text for item in items if isinstance(item, Entry) and (text := _labelled(item, "stock_number"))]
    return next((text for text in stock if part_tokens(text) == (text,)), None)


def _whole_number(name: str, texts: Sequence[Text]) -> str:
    """The longer number that begins with `name`, where the sheet's first lines print it and call `name` no series."""
    words = identity_words()["not_parts"]["series"]
    elsewhere = identity_words()["not_parts"]["elsewhere"]
    longer = name
    for text in texts:
        line = unfolded(text.piece.text)
        if any(word in line.casefold() for word in elsewhere):
            continue
        at = line.find(name)
        behind = line[at + len(name) :].casefold().lstrip(" )-")
        if at >= 0 and any(behind.startswith(word) for word in words):
            return name
        for token in part_tokens(line):
            if token.startswith(f"{longer}-") and not says_ordering(line):
                longer = token
    return longer


def says_ordering(line: str) -> bool:
    """Whether a line explains how part numbers are made up."""
    return any(word in fold(line).casefold() for word in vocabulary().phrases.get("ordering", ()))


def _as_part_number(text: str) -> str | None:
    tokens = part_tokens(text)
    if tokens:
        return tokens[0] if len(text.split()) > 1 else text
    return (
        text
        if len(text.split()) == 1 and 3 <= len(text) <= 40 and text.isascii() and any(c.isdigit() for c in text)
        else None
    )


def _score_tokens(text: Text, weight: int, scores: Counter[str]) -> None:
    words = identity_words()["not_parts"]
    folded = unfolded(text.piece.text)
    lowered = folded.casefold()
    if any(word in lowered for word in words["elsewhere"]):
        return
    for token in part_tokens(folded):
        at = folded.find(token)
        before, behind = lowered[:at].rstrip(" :#.(-"), lowered[at + len(token) :].lstrip(" )-")
        score = 1 + weight
        if any(before.endswith(word) for word in words["before"]):
            score -= 8
        if any(before.endswith(word) or behind.startswith(word) for word in words["series"]):
            score += 3
        if any(fold(segment) == token for segment in _segments(text)):
            score += 4
        score += 2 if text.heading else 0
        score += 1 if "-" in token or len(token) > 8 else 0
        scores[token] += score if scores[token] <= 0 else min(score, 2)


def speaks_of_a_crystal(texts: Iterable[str]) -> bool:
    """Whether any of the texts has a word for a quartz crystal."""
    words = identity_words()["crystal"]["words"]
    return any(word in fold(text).casefold() for text in texts for word in words)


def texts_of(items: Iterable[Item]) -> list[str]:
    """All lines of prose and all labels with their remarks, for words that tell what the sheet is about."""
    found: list[str] = []
    for item in items:
        if isinstance(item, Text):
            found.append(item.piece.text)
        elif isinstance(item, Entry):
            found += [item.label.text, *item.conditions, *(value.piece.text for value in item.values)]
    return found
