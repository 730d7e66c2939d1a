"""Sheets pasted as one line, where two labels stand side by side and their symbols and values behind both."""

from __future__ import annotations

import re
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, field

from extract import wording
from extract.attach import own_amounts
from extract.fields import field_of
from extract.groups import read_items
from extract.tokens import tokens

LEAST_NAMES = 5
# A dump of a whole sheet in one line is no shorter.
LEAST_LENGTH = 200
_CELSIUS = re.compile(r"(?<=°)C|(?<=°\s)C")
_BETWEEN = 25
_SIGN = re.compile(r"[-+±≤≥<>~]?\s?$")
_SUBSCRIPTED = re.compile(r"[^\W\d_]{1,2}_\w+")


@dataclass(frozen=True, slots=True)
class _Word:
    """A label in the text: a name, or a symbol."""

    start: int
    end: int
    text: str
    field: str
    symbol: bool


@dataclass(slots=True)
class _Block:
    """Names that stand side by side, and the symbols and values up to the next name."""

    names: list[_Word]
    symbols: list[_Word] = field(default_factory=list)
    end: int = 0

    @property
    def body(self) -> int:
        """Where the text behind the names and symbols that stand together begins."""
        return self.names[-1].end


def interleaved(text: str) -> list[tuple[str, str]] | None:
    """Labels with their values, each label's own; None for a text that is no such dump.

    A pair of labels whose values cannot be told apart by symbol, unit or number is left out.
    """
    blocks = _blocks(text, _words(text))
    if sum(len(block.names) for block in blocks) < LEAST_NAMES:
        return None
    pairs = [block for block in blocks if len(block.names) > 1 and _side_by_side(block)]
    if len(pairs) < 2:
        return None
    return [pair for block in blocks for pair in _read(text, block) if _states(*pair)]


def left_out(text: str) -> list[str]:
    """The fields that such a dump names and whose values cannot be told apart; empty for any other text."""
    told = interleaved(text) if len(text) > LEAST_LENGTH else None
    if told is None:
        return []
    named = [name.field for block in _blocks(text, _words(text)) for name in block.names]
    read = {known.field for label, _ in told if (known := wording.read_label(label)) is not None}
    return [field for field in dict.fromkeys(named) if field not in read]


def _words(text: str) -> list[_Word]:
    # The C of "°C" begins no label.
    masked = _CELSIUS.sub("°", text)
    words = []
    for found in wording.find_labels(masked):
        printed = text[found.start : found.end]
        symbol = found.label.symbol or bool(_SUBSCRIPTED.fullmatch(printed))
        # "Motional resistance (ESR)": a bracket behind a name is the name's.
        if found.label.exact and not (symbol and text[: found.start].endswith("(")):
            words.append(_Word(found.start, found.end, printed, found.label.field, symbol))
    return words


def _blocks(text: str, words: Sequence[_Word]) -> list[_Block]:
    blocks: list[_Block] = []
    for word in words:
        last = blocks[-1] if blocks else None
        if word.symbol and last is not None:
            last.symbols.append(word)
        elif last is not None and not last.symbols and _together(text[last.names[-1].end : word.start]):
            last.names.append(word)
        else:
            blocks.append(_Block([word]))
    ends = [*(block.names[0].start for block in blocks), len(text)][1:]
    for block, end in zip(blocks, ends, strict=True):
        block.end = end
    return blocks


def _together(between: str) -> bool:
    return len(between) <= _BETWEEN and not re.search(r"[\d=:;.]", between)


def _side_by_side(block: _Block) -> bool:
    return all(b.start - a.end <= 1 for a, b in zip(block.names, block.names[1:], strict=False)) and (
        len({name.field for name in block.names}) == len(block.names)
    )


def _read(text: str, block: _Block) -> Iterator[tuple[str, str]]:
    """The label and value of each name, told apart by the symbols between the values, else by the amounts."""
    ends = [*(symbol.start for symbol in block.symbols[1:]), block.end][: len(block.symbols)]
    parts = [(symbol, text[symbol.end : end]) for symbol, end in zip(block.symbols, ends, strict=True)]
    if len(block.names) == 1 and len(parts) <= 1:
        yield block.names[0].text, parts[0][1] if parts else text[block.body : block.end]
    elif parts and all(re.search(r"\d", part) for _, part in parts):
        names = {name.field: name.text for name in block.names}
        for symbol, part in parts:
            yield names.get(symbol.field, symbol.text), part
    else:
        values = parts[-1][1] if parts else text[block.body : block.end]
        named = {name.field for name in block.names}
        if all(symbol.field in named for symbol in block.symbols):
            yield from _by_amounts(values, block.names)


def _by_amounts(values: str, names: Sequence[_Word]) -> Iterator[tuple[str, str]]:
    """As many amounts as names, in their order; or each name the amounts in its unit."""
    starts = [_starts(values, name.field) for name in names]
    every = sorted({start for each in starts for start in each})
    if len(every) == len(names) and all(at in own for at, own in zip(every, starts, strict=True)):
        ends = [*every[1:], len(values)]
        for name, begin, end in zip(names, every, ends, strict=True):
            yield name.text, values[begin:end]
    elif all(starts) and len(every) == sum(map(len, starts)):
        firsts = sorted(min(own) for own in starts)
        for name, own in zip(names, starts, strict=True):
            begin = min(own)
            end = next((first for first in firsts if first > begin), len(values))
            yield name.text, values[begin:end]


def _starts(text: str, name: str) -> list[int]:
    """Where the amounts with a unit of the field begin."""
    pieces = tokens(text, name)
    found = own_amounts(read_items(pieces, name), pieces, field_of(name))
    starts = [pieces[each.group.start].start for each in found if each.printed_unit]
    return [len(_SIGN.sub("", text[:start])) for start in starts]


def _states(label: str, value: str) -> bool:
    known = wording.read_label(label)
    return known is not None and bool(_starts(value, known.field))
