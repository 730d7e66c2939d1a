"""Capacitances inside their tolerances at which a circuit drives hardest: the corners alone would miss them.

With losses, or a transconductance beyond the optimum, -Re Z is greatest neither at the least capacitances nor at the
greatest. What hangs on it are favourable ends (headroom, greatest ESR, start-up, critical transconductance); the ends
that decide a verdict lie at corners.
"""

from __future__ import annotations

import itertools
from collections.abc import Callable, Sequence

import numpy as np

from compare.circuit import Array, Complex, Mobius

Span = tuple[float, float, float]
Impedance = Callable[[Array], Complex]
ROUNDS, SETTLED = 40, 1e-4
WORTH_IT = 1e-7
"""What a point must gain on its corner, as a share of Re Z, to be kept."""


def hardest_capacitances(spans: Sequence[Span], impedance: Impedance) -> Array:
    """Node capacitances, not at a corner, at which -Re Z is greatest: (m, nodes), each row once; m may be 0.

    Parameters
    ----------
    spans
        Low, nominal and high of each node's capacitance.
    impedance
        From capacitances (targets or 1, k, nodes) to Z, (targets, k): a row for each gain and C0 that it is wanted for,
        each with a greatest point of its own.
    """
    low, high = np.array([(span[0], span[-1]) for span in spans], dtype=float).T
    moving, width = np.flatnonzero(high > low), high - low
    corners = np.array(list(itertools.product(*({a, b} for a, b in zip(low, high, strict=True)))))
    at = at_corner = corners[np.nan_to_num(impedance(corners[None]).real, nan=np.inf).argmin(axis=1)]
    for _ in range(ROUNDS):
        before = at
        for node in moving.tolist():
            at = _along(at, node, (low[node], high[node]), impedance)
        if (np.abs(at - before)[:, moving] <= SETTLED * width[moving]).all():
            break
    hardest, at_best = impedance(np.stack([at_corner, at], axis=1)).real.T
    worth = at_best < hardest - WORTH_IT * np.abs(hardest)
    return np.unique(at[worth].round(6), axis=0)


def _along(at: Array, node: int, ends: tuple[float, float], impedance: Impedance) -> Array:
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
