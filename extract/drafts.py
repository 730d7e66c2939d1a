"""A part while it is being put together: what was found of it so far."""

from __future__ import annotations

import re
from collections.abc import Iterable, Iterator
from dataclasses import dataclass, field, replace
from functools import lru_cache

from extract import wording
from extract.candidates import Candidate, label_of
from extract.entries import Entry
from extract.fold import fold, key
from extract.identity import is_package, package_in
from extract.meaning import meaning, part_tokens
from extract.model import Where
from extract.vocabulary import vocabulary

_ORDINALS = frozenset({"third", "fifth", "seventh", "ninth", "1st", "3rd", "5th", "7th", "9th"})
_WORD = re.compile(r"[^\s,;:()\[\]|]+")


@dataclass(slots=True)
class Draft:
    """What a sheet says of one part.

    `texts` are the words beside its values, for what it is not; `lines` all that its section prints, for its pads.
    `offered_modes`: those that one label offers to choose from. `crystal`: its own row calls it one; `other`: rows
    beside it do and its own does not. `by_subject`: identity entries under the name of a model in a column head.
    `unread`: field, text and place of values beside a label that hold its unit and no number.
    """

    part_number: str | None = None
    maker: str | None = None
    package: str | None = None
    modes: set[str] = field(default_factory=set)
    offered_modes: frozenset[str] = frozenset()
    cuts: set[str] = field(default_factory=set)
    resonance: set[str] = field(default_factory=set)
    attributes: dict[str, str] = field(default_factory=dict)
    candidates: list[Candidate] = field(default_factory=list)
    texts: list[str] = field(default_factory=list)
    lines: list[str] = field(default_factory=list)
    where: Where | None = None
    crystal: bool = False
    other: bool = False
    by_subject: dict[str, list[Entry]] = field(default_factory=dict)
    unread: list[tuple[str, str, Where]] = field(default_factory=list)

    def take_mode_and_cut(self, text: str, *, codes: bool = False) -> None:
        """Note the modes and cuts that a text prints; single letters count only in a mode's own cell (`codes`)."""
        self.modes.update(modes_in(text, codes=codes))
        self.cuts.update(cuts_in(text, whole=codes))

    def name(self, what: str, text: str) -> None:
        """Set part number, maker or package where it is open; a size goes before words such as "2-SMD, No Lead"."""
        if what == "part_number" and ":" in fold(text) and part_tokens(text):
            text = part_tokens(text)[0]
        words = text.split()
        if what == "part_number" and len(words) > 1 and part_tokens(text) == (words[0],):
            text = words[0]
        if what == "maker":
            text = re.split(r"\s+[·|•]\s+", text)[0]
            text = next(
                (before for before, _, behind in [text.rpartition(", ")] if before and part_tokens(behind)), text
            )
        known = getattr(self, what)
        longer = what == "part_number" and known is not None and text.startswith(f"{known}-")
        sized = what == "part_number" and known is not None and is_package(known) and not is_package(text)
        if sized:
            self.package = self.package or known
        # "Product: Quartz crystal unit" names no part.
        sized = sized or (what == "part_number" and not part_tokens(known or "") and bool(part_tokens(text)))
        if (
            known is None
            or longer
            or sized
            or (what == "package" and package_in(known) is None and package_in(text) is not None)
        ):
            setattr(self, what, text)

    def take_identity(self, entries: Iterable[Entry]) -> None:
        """Take part number, maker, package, mode and grade from labelled values."""
        for entry in entries:
            known = meaning(entry.label.text)
            if not entry.values or (known.identity and label_of(entry) is not None):
                continue
            if any(value.subject for value in entry.values):
                for value in entry.values:
                    own = replace(entry, values=(replace(value, subject=""),))
                    self.by_subject.setdefault(value.subject, []).append(own)
                continue
            text = " ".join(entry.values[0].piece.text.split()).strip(" :：")
            if known.trap is not None and "dimension" in known.trap:
                self.package = package_in(text) if package_in(self.package or "") is None else self.package
            elif known.identity == "part_number" and not part_tokens(text) and package_in(text):
                self.package = self.package or text
            elif known.identity in ("part_number", "maker", "package") and not wording.not_stated(text):
                self.name(known.identity, text)
                if known.identity != "maker":
                    self.take_mode_and_cut(text)
            elif known.role in ("mode", "cut"):
                self.take_mode_and_cut(text, codes=True)
                for beside in entry.conditions:
                    self.cuts.update(cuts_in(beside))
                if len(named := modes_in(text, codes=True)) > 1:
                    self.offered_modes = self.offered_modes or named
            elif known.attribute:
                self.attributes.setdefault(known.attribute, text)


# "(Grundton AT)": two capital letters beside a mode in a text no longer than this are a cut.
SHORT = 60
_CUT_LETTERS = re.compile(r"(?<![A-Za-z0-9-])(?:AT|BT|SC)(?![A-Za-z0-9])")


def _runs(text: str, longest: int = 4) -> Iterator[str]:
    words = [match[0] for match in _WORD.finditer(fold(text))]
    for start in range(len(words)):
        for end in range(start + 1, min(len(words), start + longest) + 1):
            yield " ".join(words[start:end])


@lru_cache(maxsize=8192)
def modes_in(text: str, *, codes: bool = False) -> frozenset[str]:
    """Every mode of vibration that a text names."""
    coded = sum(character.isalpha() for character in text) < 2
    whole = wording.mode_of(text) if codes or not coded else None
    if whole is not None and not codes and key(text) not in vocabulary().modes and _only_ordinal(text):
        # "Third lead" is no overtone.
        whole = None
    whole = whole or (vocabulary().mode_codes.get(key(text)) if codes else None)
    if whole is not None:
        return frozenset({whole})
    known = vocabulary().modes
    found = set()
    for run in _runs(text):
        wanted = key(run)
        if wanted in known and wanted not in _ORDINALS and len(wanted) >= 3:
            found.add(known[wanted])
    if not text.isascii():
        found |= {mode for wanted, mode in known.items() if not wanted.isascii() and wanted in key(text)}
    return frozenset(found)


def _only_ordinal(text: str) -> bool:
    """Whether a bare ordinal is all that a text has of a mode."""
    runs = vocabulary().modes.runs(fold(text)[:400])
    return all(run.key in _ORDINALS for run in runs)


@lru_cache(maxsize=8192)
def cuts_in(text: str, *, whole: bool = False) -> frozenset[str]:
    """Every cut that a text names; two bare letters count only in capitals and in a cut's own cell (`whole`)."""
    known = vocabulary().cuts
    found = set()
    for run in _runs(text.replace("/", " / ")):
        wanted = key(run.replace("/", " "))
        if wanted not in known:
            continue
        if (
            len(wanted) > 3
            or (whole and run.isupper())
            or (run.isupper() and text.strip().startswith((f"{run},", f"{run} /", f"{run}/")))
        ):
            found.add(known[wanted])
    if not found and (beside := _CUT_LETTERS.search(text)) and len(text) < SHORT and modes_in(text):
        found.add(known[key(beside[0])])
    if not text.isascii():
        found |= {cut for wanted, cut in known.items() if not wanted.isascii() and wanted in key(text)}
    return frozenset(found)
