"""Everything that `wording/*.toml` says, loaded once: a word or label is found by its key (`fold.key`).

A language is a file there, a maker's wording a line; nothing here names either. Two files may give the same word the
same meaning; a label claimed by two fields stops the program at once, because every sheet read after it would be wrong.
"""

from __future__ import annotations

import tomllib
from collections.abc import Iterable
from dataclasses import dataclass, field
from functools import cache
from importlib import resources
from importlib.resources.abc import Traversable
from pathlib import Path
from typing import Any

from extract.fields import fields
from extract.fold import fold, key
from extract.runs import Table

_SECTIONS = {
    "labels", "symbols", "shared", "shared_symbols", "weak", "traps", "bounds", "roles", "identity", "attributes",
    "modes", "mode_codes", "cuts", "phrases", "oscillator", "language", "yearly",
}  # fmt: skip


_SETS = (
    ("weak", "weak", "labels"),
    ("weak_symbols", "weak", "symbols"),
    ("filling", "weak", "filling"),
    ("yearly", "yearly", "labels"),
)


@dataclass(frozen=True)
class Vocabulary:
    """Words of all languages together. Every table but `phrases` goes from a key to a meaning.

    `weak` are labels that decide only alone in their cell, `weak_symbols` symbols that decide only in a symbol column,
    `filling` words that may be left over beside a wording, `yearly` ageing labels that say "in one year" themselves.
    `phrases` holds, for each meaning, the wordings as folded and in lower case, longest first.
    """

    languages: tuple[str, ...] = ()
    labels: Table[str] = field(default_factory=Table)
    symbols: Table[str] = field(default_factory=Table)
    shared: dict[str, tuple[str, ...]] = field(default_factory=dict)
    weak: frozenset[str] = frozenset()
    weak_symbols: frozenset[str] = frozenset()
    filling: frozenset[str] = frozenset()
    yearly: frozenset[str] = frozenset()
    at_words: frozenset[str] = frozenset()
    traps: Table[str] = field(default_factory=Table)
    bounds: Table[str] = field(default_factory=Table)
    roles: Table[str] = field(default_factory=Table)
    identity: Table[str] = field(default_factory=Table)
    attributes: Table[str] = field(default_factory=Table)
    modes: Table[str] = field(default_factory=Table)
    mode_codes: Table[str] = field(default_factory=Table)
    cuts: Table[str] = field(default_factory=Table)
    oscillator: Table[str] = field(default_factory=Table)
    phrases: dict[str, tuple[str, ...]] = field(default_factory=dict)


class WordingError(ValueError):
    """A wording file that contradicts itself or another one; says which wording and which two meanings."""


_added: list[Path] = []


def add_wordings(folder: Path) -> None:
    """Read the wording files of one more folder, too: a language or a maker's wordings that are not in `wording/`.

    Call it before the first sheet is read; what is known of a label is kept from then on.

    Raises
    ------
    WordingError
        The folder holds no wording file, one of its files is no TOML, contradicts itself or another one; or sheets
        were read already.
    """
    if vocabulary.cache_info().currsize:
        raise WordingError(f"{folder}: wordings must be added before the first sheet is read")
    if not folder.is_dir() or not any(folder.glob("*.toml")):
        raise WordingError(f"{folder}: no folder with wording files (*.toml)")
    _added.append(folder)
    try:
        vocabulary()
    except WordingError:
        _added.remove(folder)
        raise


@cache
def vocabulary() -> Vocabulary:
    """The whole of `wording/` and of the folders added, each in order of file name."""
    folders: list[Traversable] = [resources.files("extract").joinpath("wording"), *_added]
    files = [f for folder in folders for f in sorted(folder.iterdir(), key=_name) if f.name.endswith(".toml")]
    return gather((f.name, _parsed(f)) for f in files)


def _name(file: Traversable) -> str:
    return file.name


def _parsed(file: Traversable) -> dict[str, Any]:
    try:
        return tomllib.loads(file.read_text(encoding="utf-8"))
    except (tomllib.TOMLDecodeError, UnicodeDecodeError) as fault:
        raise WordingError(f"{file.name}: no TOML in UTF-8: {fault}") from None


def gather(tables: Iterable[tuple[str, dict[str, Any]]]) -> Vocabulary:
    """One vocabulary from (file name, parsed table) pairs.

    Raises
    ------
    WordingError
        A section or field that does not exist, or a label that two fields claim.
    """
    found: dict[str, Any] = {name: Table() for name in _SECTIONS - {"language", "weak", "yearly"}}
    sets: dict[str, set[str]] = {"weak": set(), "weak_symbols": set(), "filling": set(), "yearly": set()}
    languages = []
    for name, table in tables:
        if unknown := set(table) - _SECTIONS:
            raise WordingError(f"{name}: no section called {sorted(unknown)[0]!r}")
        languages.append(table.get("language", name))
        for target, section, name_in_it in _SETS:
            sets[target] |= {key(word) for word in table.get(section, {}).get(name_in_it, [])}
        for section in ("labels", "symbols"):
            _claim_fields(found[section], table.get(section, {}), name)
        for section in ("shared", "shared_symbols"):
            found[section] |= {key(word): tuple(names) for word, names in table.get(section, {}).items()}
        for section in (
            "traps",
            "bounds",
            "roles",
            "identity",
            "attributes",
            "modes",
            "mode_codes",
            "cuts",
            "oscillator",
        ):
            for meaning, words in table.get(section, {}).items():
                for word in words:
                    found[section].setdefault(key(word) or fold(word), meaning)
        for section, prefix in (("phrases", ""), ("bounds", ""), ("modes", "mode ")):
            for meaning, words in table.get(section, {}).items():
                found["phrases"].setdefault(prefix + meaning, []).extend(fold(word).casefold() for word in words)
    shared = dict(found.pop("shared") | found.pop("shared_symbols"))
    if both := shared.keys() & (found["labels"].keys() | found["symbols"].keys()):
        raise WordingError(f"{sorted(both)[0]!r} is the label of one field and of several")
    found["phrases"] = {
        meaning: tuple(sorted(set(words), key=lambda word: (-len(word), word)))
        for meaning, words in found["phrases"].items()
    }
    found |= {name: frozenset(words) for name, words in sets.items()}
    return Vocabulary(
        languages=tuple(languages),
        at_words=frozenset(found["phrases"].get("at", ())),
        shared=shared,
        **found,
    )


def _claim_fields(claimed: dict[str, str], table: dict[str, list[str]], name: str) -> None:
    for field_name, words in table.items():
        if field_name not in fields():
            raise WordingError(f"{name}: no field called {field_name!r}")
        for word in words:
            other = claimed.setdefault(key(word), field_name)
            if other != field_name:
                raise WordingError(f"{name}: {word!r} is claimed by {other} and {field_name}")
