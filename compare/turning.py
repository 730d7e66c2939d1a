"""Capacitances inside their tolerances at which a circuit drives hardest: the corners alone would miss them.

With losses, or a transconductance beyond the optimum, -Re Z is greatest neither at the least capacitances nor at the
greatest. What hangs on it are favourable ends (headroom, greatest ESR, start-up, critical transconductance); the ends
that decide a verdict lie at corners.
"""

from __future__ import annotations

import itertools
from collections.abc import Callable, Sequence
from functools import partial
from typing import Protocol

import numpy as np
from numpy.typing import NDArray

from compare.circuit import Array, Complex, Mobius

Span = tuple[float, float, float]
Whole = NDArray[np.int_]


class Impedance(Protocol):
    def __call__(self, at: Array, of: Whole) -> Complex: ...


ROUNDS, SETTLED = 40, 1e-4
WORTH_IT = 1e-7
"""What a point must gain on its corner, as a share of Re Z, to be kept."""


def hardest_capacitances(spans: Sequence[Span], impedance: Impedance, targets: int) -> Array:
    """Node capacitances at which -Re Z is greatest, (targets, nodes); NaN where that is at a corner.

    Parameters
    ----------
    spans
        Low, nominal and high of each node's capacitance.
    impedance
        From capacitances (t or 1, k, nodes) and the indices of t targets to Z, (t, k): a target is a gain and C0 that
        it is wanted for, each with a greatest point of its own, whatever the others are.
    """
    every = np.arange(targets)
    low, high = np.array([(span[0], span[-1]) for span in spans], dtype=float).T
    moving, width = np.flatnonzero(high > low), high - low
    corners = np.array(list(itertools.product(*({a, b} for a, b in zip(low, high, strict=True)))))
    at_corner = corners[np.nan_to_num(impedance(corners[None], every).real, nan=np.inf).argmin(axis=1)]
    at, open_ones = at_corner.copy(), every
    for _ in range(ROUNDS):
        before = moved = at[open_ones]
        for node in moving.tolist():
            moved = _along(moved, node, (low[node], high[node]), partial(impedance, of=open_ones))
        at[open_ones] = moved
        open_ones = open_ones[(np.abs(moved - before)[:, moving] > SETTLED * width[moving]).any(axis=1)]
        if not open_ones.size:
            break
    hardest, at_best = impedance(np.stack([at_corner, at], axis=1), every).real.T
    worth = at_best < hardest - WORTH_IT * np.abs(hardest)
    return np.where(worth[:, None], at.round(6), np.nan)


def _along(at: Array, node: int, ends: tuple[float, float], impedance: Callable[[Array], Complex]) -> Array:
    """Each row moved along one node to where its own Re Z is least.

    Z is a ratio of two lines in any one capacitance, so its values at both ends and halfway give all of it:
    (a + b x)/(1 + d x), x from 0 to 1.
    """
    low, high = ends
    points = np.repeat(at[:, None, :], 3, axis=1)
    points[:, :, node] = [low, (low + high) / 2, high]
    first, half, last = impedance(points).T
    with np.errstate(all="ignore"):
        d = (first + last - 2 * half) / (half - last)
        z = Mobius(first, last * (1 + d) - first, np.ones_like(d), d)
        turning = np.nan_to_num(np.clip(z.least_real(), 0.0, 1.0), nan=0.0)
        tried = np.stack([np.zeros_like(turning), np.ones_like(turning), turning])
        best = np.nan_to_num(z(tried).real, nan=np.inf).argmin(axis=0)
    moved = at.copy()
    moved[:, node] = low + (high - low) * tried[best, np.arange(len(at))]
    return moved
