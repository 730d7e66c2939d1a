"""Low, mid and high of a quantity, and the envelope of a chain of formulas run at every corner of its inputs."""

from __future__ import annotations

import itertools
from collections.abc import Callable, Mapping
from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike

from compare.circuit import Array, array


@dataclass(frozen=True)
class Span:
    """Least, nominal and greatest value, each a number or an (n,) column; low <= mid <= high as numbers."""

    low: Array
    mid: Array
    high: Array

    @classmethod
    def exactly(cls, value: ArrayLike) -> Span:
        return cls(array(value), array(value), array(value))

    @classmethod
    def toleranced(cls, value: ArrayLike, percent: float) -> Span:
        """Value ± percent of it."""
        half = np.abs(array(value)) * percent / 100
        return cls(array(value) - half, array(value), array(value) + half)

    @property
    def is_exact(self) -> bool:
        return bool(np.array_equal(self.low, self.high, equal_nan=True))


def corners(roots: Mapping[str, Span]) -> dict[str, Array]:
    """Every combination of ends, on a last axis of length 2^k for the k roots whose ends do not meet."""
    moving = [name for name, span in roots.items() if not span.is_exact]
    ends = list(itertools.product((0, 1), repeat=len(moving)))
    at: dict[str, Array] = {name: span.mid[..., None] for name, span in roots.items()}
    for column, name in enumerate(moving):
        both = np.stack([roots[name].low, roots[name].high], axis=-1)
        at[name] = both[..., [row[column] for row in ends]]
    return at


def envelope(
    derive: Callable[[Mapping[str, Array]], Mapping[str, Array]], roots: Mapping[str, Span]
) -> dict[str, Span]:
    """Spans of all that `derive` gives, from its values at every corner of the roots.

    An input that counts twice moves in both places at once, which adding two worst cases does not do. A quantity that
    turns inside a range is not caught: add its turning point as a root of its own. A corner without the quantity (NaN)
    leaves both ends unknown (NaN).
    """
    nominal = derive({name: span.mid for name, span in roots.items()})
    at_corners = derive(corners(roots))
    spans = {}
    for key, mid in nominal.items():
        values = at_corners[key]
        # The nominal counts too: a quantity may turn there.
        spans[key] = Span(np.minimum(values.min(axis=-1), mid), mid, np.maximum(values.max(axis=-1), mid))
    return spans
