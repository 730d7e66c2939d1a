"""Parts in a million over life: ageing, a tuning fork's parabola, sums of worst ends, seconds a day."""

from __future__ import annotations

from typing import Literal

import numpy as np
from numpy.typing import ArrayLike

from compare.circuit import Array, array
from compare.prefix import PPM

AgeingRule = Literal["logarithm", "linear"]
AGEING_RATE_PER_DAY = 0.01
DAYS_PER_YEAR = 365.0
SECONDS_PER_DAY = 86400.0


def ageing_factor(
    rule: AgeingRule, from_years: ArrayLike, to_years: ArrayLike, rate_per_day: ArrayLike = AGEING_RATE_PER_DAY
) -> Array:
    """Ageing after Y years over that after y years: ln(B d Y + 1) / ln(B d y + 1), or Y/y; 1 for Y <= y.

    Parameters
    ----------
    rule : "logarithm" or "linear"
        "logarithm" with d = 365 days a year; "linear" is far too much for quartz, and safe.
    from_years, to_years : years, above zero
        y, for which the sheet states it, and Y, for which it is wanted.
    rate_per_day : 1/day
        B.

    Returns
    -------
    array, 1
        Never below 1: what a sheet allows for a long time it allows for a short one.

    Raises
    ------
    ValueError
        `from_years` of zero or below.

    References
    ----------
    MIL-PRF-55310, f(t) = A ln(B t + 1) + f0, t in days. B differs from part to part; of the published 0.01, 0.1 and 1
    a day the first is the steepest (2.36 from 1 to 10 years, against 1.63 and 1.39).
    """
    stated, wanted = array(from_years), array(to_years)
    if np.any(stated <= 0):
        raise ValueError(f"from_years must be above 0, got {np.min(stated):g}")
    longer = np.maximum(wanted, stated)
    if rule == "linear":
        return longer / stated
    per_year = array(rate_per_day) * DAYS_PER_YEAR
    factor: Array = np.log1p(per_year * longer) / np.log1p(per_year * stated)
    return factor


def parabola_ppm(temperature_c: ArrayLike, coefficient_ppm_per_c2: ArrayLike, turnover_c: ArrayLike) -> Array:
    """df/f = k (T - T0)², k negative for a tuning fork.

    Maxim, MAX6902 data sheet (2004) p. 14. A fit, good to a few ppm from -40 to 85 °C; the spread of k and T0 counts
    for more.
    """
    shift: Array = array(coefficient_ppm_per_c2) * (array(temperature_c) - array(turnover_c)) ** 2
    return shift


def parabola_ppm_range(
    temperature_c: tuple[ArrayLike, ArrayLike],
    coefficient_ppm_per_c2: tuple[ArrayLike, ArrayLike],
    turnover_c: tuple[ArrayLike, ArrayLike],
) -> tuple[Array, Array]:
    """Least and greatest k (T - T0)² for T, k and T0 anywhere in their ranges.

    Parameters
    ----------
    temperature_c, coefficient_ppm_per_c2, turnover_c : pairs low, high
        °C, ppm/°C², °C; each end a number or an array.

    Returns
    -------
    low, high : ppm
        Exact: |T - T0| is greatest at opposite ends, least where the ranges come nearest (zero where they meet), and
        k (T - T0)² is linear in k.
    """
    coldest, hottest = (array(end) for end in temperature_c)
    turnover_low, turnover_high = (array(end) for end in turnover_c)
    nearest = np.maximum(0.0, np.maximum(coldest - turnover_high, turnover_low - hottest))
    farthest = np.maximum(hottest - turnover_low, turnover_high - coldest)
    corners = np.broadcast_arrays(
        *(array(k) * distance**2 for k in coefficient_ppm_per_c2 for distance in (nearest, farthest))
    )
    return np.minimum.reduce(corners), np.maximum.reduce(corners)


def seconds_per_day(error_ppm: ArrayLike) -> Array:
    """Seconds a day = ppm × 0.0864."""
    seconds: Array = array(error_ppm) * PPM * SECONDS_PER_DAY
    return seconds
