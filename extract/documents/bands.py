"""Text lines -> bands: lines that overlap in height are one row of a table, however its cells are aligned."""

from __future__ import annotations

from collections.abc import Sequence

from extract.documents.words import Word

# Text sizes: lines of one row that are centred or set lower overlap by more than this.
OVERLAP = 0.2
# Text sizes: a row of a table is not higher; what is higher is two columns of text with lines between one another.
HIGHEST = 6.5


def bands_of(lines: Sequence[list[Word]]) -> list[list[list[Word]]]:
    """Group lines, given from the top down, that overlap in height."""
    chains: list[list[list[Word]]] = []
    bottom = float("-inf")
    for line in lines:
        top, size = min(word.top for word in line), min(word.size for word in line)
        if chains and bottom - top > OVERLAP * size:
            chains[-1].append(line)
            bottom = max(bottom, *(word.bottom for word in line))
        else:
            chains.append([line])
            bottom = max(word.bottom for word in line)
    bands: list[list[list[Word]]] = []
    for chain in chains:
        size = max(word.size for line in chain for word in line)
        if bottom_of(chain) - top_of(chain) <= HIGHEST * size:
            bands.append(chain)
        else:
            bands += [[line] for line in chain]
    return bands


def top_of(band: Sequence[Sequence[Word]]) -> float:
    """Upper end of a band."""
    return min(word.top for line in band for word in line)


def bottom_of(band: Sequence[Sequence[Word]]) -> float:
    """Lower end of a band."""
    return max(word.bottom for line in band for word in line)


def stacked(segments: Sequence[Sequence[Word]]) -> list[list[Word]]:
    """Segments of a band joined where they stand over one another, from left to right."""
    stacks: list[list[Word]] = []
    end = float("-inf")
    for segment in sorted(segments, key=lambda segment: segment[0].x0):
        right = max(word.x1 for word in segment)
        if stacks and segment[0].x0 < end:
            stacks[-1] += segment
        else:
            stacks.append(list(segment))
        end = max(end, right)
    return [sorted(stack, key=lambda word: word.x0) for stack in stacks]


def goes_on(text: str) -> bool:
    """Tell whether a line's beginning shows that it goes on with the line above rather than begin a text."""
    return text[0].islower() or text[0] in "(（[,;)"
