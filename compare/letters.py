"""What to ask a crystal's maker, in English and in the language of its sheet."""

from __future__ import annotations

import tomllib
from collections import Counter
from collections.abc import Sequence
from functools import cache, lru_cache
from importlib import resources
from pathlib import Path
from typing import Any

from compare.bench import Bench
from compare.offer import Offer
from compare.questions import frequency_text, question, sentences
from extract.fold import fold, key
from extract.model import Part, SpecSheet

ENGLISH = "en"


@cache
def letters() -> dict[str, dict[str, str]]:
    return tomllib.loads((Path(__file__).parent / "letters.toml").read_text(encoding="utf-8"))


@cache
def wordings() -> dict[str, dict[str, list[str]]]:
    """For each language the wordings of each field, as its wording file has them."""
    folder = resources.files("extract").joinpath("wording")
    found = {}
    for file in folder.iterdir():
        if file.name.endswith(".toml"):
            table = tomllib.loads(file.read_text(encoding="utf-8"))
            if isinstance(table.get("language"), str):
                found[table["language"]] = dict(table.get("labels", {}))
    return found


@cache
def _languages_of_wording() -> dict[str, dict[str, tuple[str, ...]]]:
    """For each field, which languages have a wording of that key."""
    found: dict[str, dict[str, set[str]]] = {}
    for language, labels in wordings().items():
        for field, listed in labels.items():
            for wording in listed:
                found.setdefault(field, {}).setdefault(key(fold(wording)), set()).add(language)
    return {field: {k: tuple(sorted(v)) for k, v in listed.items()} for field, listed in found.items()}


def language_of(part: Part) -> str:
    """The language whose wordings stand before the most of a part's values; English where none stands out."""
    votes: Counter[str] = Counter()
    for reading in part.readings:
        votes.update(_languages_in(reading.field, reading.raw))
    best, count = max(votes.items(), key=lambda vote: (vote[1], vote[0] == ENGLISH), default=(ENGLISH, 0))
    return best if count > votes[ENGLISH] else ENGLISH


@lru_cache(maxsize=4096)
def _languages_in(field: str, raw: str) -> tuple[str, ...]:
    printed = key(fold(raw))
    known = _languages_of_wording().get(field, {})
    inside = [wording for wording in known if wording and wording in printed]
    return known[max(inside, key=len)] if inside else ()


def in_english(missing: str, offer: Offer, bench: Bench, load_pf: float) -> str:
    """The sentence for one missing reading."""
    if missing in sentences():
        return question(missing, offer, bench, load_pf)
    return english(missing, offer.sheet, offer.part)


def english(missing: str, sheet: SpecSheet, part: Part) -> str:
    """The same for what no bench asks about: package, pads, grade."""
    return letters()[ENGLISH][missing].format(part=part.part_number or f"the part of {sheet.file}")


def known(missing: str) -> bool:
    return missing in sentences() or missing in letters()[ENGLISH]


def in_language(language: str, missing: Sequence[str], part: Part, frequency_mhz: float) -> dict[str, Any] | None:
    """Ready sentences in the sheet's language; None for English, or where no wording file has the language."""
    words = letters().get(language)
    if language == ENGLISH or words is None or not missing:
        return None
    labels = wordings().get(language, {})
    said = []
    for name in missing:
        field = "esr_ohm" if name == "least_esr_ohm" else name
        reading = words.get(field) or next(iter(labels.get(field, ())), None)
        if reading is not None:
            called = part.part_number or part.maker or ""
            said.append(words["ask"].format(part=called, frequency=frequency_text(frequency_mhz), reading=reading))
    return {"language": language, "sentences": said} if said else None
