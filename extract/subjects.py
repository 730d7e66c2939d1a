"""Values that stand under the name of a model, package or load -> one draft for each model."""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import replace
from functools import lru_cache

from extract.candidates import Candidate
from extract.conditions import condition_of, merged
from extract.drafts import Draft
from extract.entries import Entry
from extract.fold import fold
from extract.identity import is_package, package_in
from extract.meaning import is_part_token, part_tokens
from extract.model import When

_BETWEEN = re.compile(r"[,;/\n]|\band\b|\bund\b|、|，")


def split_by_subject(draft: Draft) -> list[Draft]:
    """A draft for each model that column heads name; packages and loads in column heads become conditions."""
    subjects = list(dict.fromkeys(each.subject for each in draft.candidates if each.subject))
    if not subjects:
        return [draft]
    names = list(dict.fromkeys(name for subject in subjects for name in names_in(subject)))
    if len(names) < 2:
        _take_common_identity(draft)
        return [replace_candidates(draft, [_conditioned(each) for each in draft.candidates])]
    return [_for_name(draft, name, names) for name in names]


def _take_common_identity(draft: Draft) -> None:
    """What all columns say alike of mode, cut or grade is said of the part."""
    by_label: dict[str, list[Entry]] = {}
    for entries in draft.by_subject.values():
        for entry in entries:
            by_label.setdefault(entry.label.text, []).append(entry)
    for entries in by_label.values():
        if len({" ".join(entry.values[0].piece.text.split()) for entry in entries}) == 1:
            draft.take_identity(entries[:1])


def names_in(subject: str) -> list[str]:
    """The model names of a column head ("SQ-320, SQ-321"); empty for a package or a load."""
    found: list[str] = []
    for piece in _BETWEEN.split(subject):
        if not is_package(piece):
            found += part_tokens(piece)[:1] or ([piece.strip()] if is_part_token(piece) else [])
    return found


def replace_candidates(draft: Draft, candidates: list[Candidate]) -> Draft:
    """The same draft with other candidates."""
    draft.candidates = candidates
    return draft


def _for_name(draft: Draft, name: str, names: list[str]) -> Draft:
    mine: list[Candidate] = []
    package = draft.package
    own_fields = {each.field for each in draft.candidates if name in names_in(each.subject)}
    for each in draft.candidates:
        named = names_in(each.subject)
        if each.about in names and not named:
            mine += [_conditioned(each)] if each.about == name else []
        elif name in named or (not named and each.field not in own_fields):
            mine.append(_conditioned(each) if not named else replace(each, subject=""))
            package = package_in(each.subject.replace(name, "")) or package if named else package
    package = package_beside(name, names, draft.lines) or package
    own = Draft(resonance=set(draft.resonance), candidates=mine, texts=list(draft.texts), where=draft.where)
    entries = [entry for subject, each in draft.by_subject.items() if name in names_in(subject) for entry in each]
    own.take_identity(entries)
    for entry in entries:
        own.take_mode_and_cut(entry.values[0].piece.text)
    own.part_number, own.lines = name, draft.lines
    own.maker, own.package = own.maker or draft.maker, own.package or package
    own.modes, own.cuts = own.modes or set(draft.modes), own.cuts or set(draft.cuts)
    own.attributes = draft.attributes | own.attributes
    return own


_TO_SIZE = re.compile(r"[^\w]{0,6}(?:\w{2,12}[^\w]{0,4}){0,2}")


@lru_cache(maxsize=512)
def _sized_names(names: tuple[str, ...], lines: tuple[str, ...]) -> dict[str, str]:
    """The size that a line prints behind a name or several ("AB-2016: 2.0 x 1.6 mm", "AB-1 / AB-2  3.2 x 2.5 mm")."""
    found: dict[str, str] = {}
    pattern = re.compile(
        "|".join(rf"(?<![\w-]){re.escape(name)}(?![\w-])" for name in sorted(names, key=len, reverse=True))
    )
    for line in lines:
        text = fold(line)
        places = list(pattern.finditer(text))
        run: list[str] = []
        for index, place in enumerate(places):
            run.append(place[0])
            until = places[index + 1].start() if index + 1 < len(places) else len(text)
            between = text[place.end() : until]
            if until < len(text) and _BETWEEN_NAMES.fullmatch(between):
                continue
            package = package_in(between)
            at = between.find(package) if package is not None else -1
            if package is not None and at >= 0 and _TO_SIZE.fullmatch(between[:at]):
                for name in run:
                    found.setdefault(name, package)
            run = []
    return found


_BETWEEN_NAMES = re.compile(r"\s*(?:[/,;&、・]|and|und|et|e|y|und|和)\s*")


def package_beside(name: str, names: Sequence[str], lines: Sequence[str]) -> str | None:
    """The size that some line prints beside the name of one model among several; None where none does."""
    return _sized_names(tuple(names), tuple(lines)).get(name)


def _conditioned(candidate: Candidate) -> Candidate:
    """A package in the column's head is where the value holds."""
    if not candidate.subject:
        return candidate
    if is_package(candidate.subject):
        when = merged(candidate.when, When(package=" ".join(candidate.subject.split())))
        return replace(candidate, when=when, subject="")
    return replace(candidate, when=merged(condition_of(candidate.subject), candidate.when), subject="")
