"""One part under review with all that page and report show of it: its review, curves, charts, corners, breaking points.

What takes time is worked out when it is first asked for, and once.
"""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from functools import cached_property
from typing import Any

import numpy as np

from compare import charts, curves, failures, falls, overturn
from compare.bench import Bench
from compare.charts import Chart
from compare.circuit_text import gm_over_all
from compare.columns import LOW, MID
from compare.find import Offers
from compare.offer import Offer
from compare.reckoning import Reckoning, reckon_sheets
from compare.review import reviewed
from compare.spice import Which, subcircuit
from extract.model import SpecSheet

# Straight lines on a double logarithmic grid and smooth humps: more points would not show.
GAIN_POINTS, ESR_POINTS = 81, 33
NEEDED = {
    "ppm_against_load": ("circuit_load_pf", "load_error_ppm"),
    "headroom_against_gain": ("circuit_load_pf",),
    "margin_against_esr": ("circuit_load_pf", "margin"),
    "ppm_over_temperature": (),
    "ppm_budget": ("total_ppm",),
}
TITLES = {
    "headroom_against_gain": "R1 headroom against transconductance",
    "ppm_against_load": "ppm against load",
    "ppm_budget": "Where the ppm go",
    "ppm_over_temperature": "ppm over temperature",
    "margin_against_esr": "Margin against ESR",
}


@dataclass(frozen=True)
class Dossier:
    """One part, `at` in the reckoning, with its review as `quartzfolio review --json` prints it."""

    review: Mapping[str, Any]
    reckoning: Reckoning
    at: int

    @property
    def bench(self) -> Bench:
        return self.reckoning.bench

    @property
    def offer(self) -> Offer:
        return self.reckoning.columns.offers[self.at]

    @property
    def sheet(self) -> SpecSheet:
        return self.offer.sheet

    @cached_property
    def corners(self) -> dict[str, falls.Corner]:
        """Where each worst value falls; empty where the circuit is not known."""
        return falls.worst_corners(self.reckoning, self.at) if self._known("circuit_load_pf") else {}

    @cached_property
    def conditions(self) -> list[tuple[str, float | None, dict[str, float]]]:
        return falls.conditions(self.reckoning, self.at) if self._known("circuit_load_pf") else []

    @cached_property
    def failures(self) -> list[failures.Failure]:
        """What happens when something fails; empty where the circuit is not known."""
        return failures.failures(self.reckoning, self.at) if self._known("circuit_load_pf") else []

    @cached_property
    def load_curve(self) -> curves.Curve | None:
        return curves.ppm_against_load(self.reckoning, self.at) if self._known(*NEEDED["ppm_against_load"]) else None

    @cached_property
    def breaks(self) -> list[overturn.Break]:
        return overturn.breaks(self.reckoning, self.at, self.load_curve)

    @property
    def overturning(self) -> str:
        return overturn.overturning(self.breaks)

    @cached_property
    def charts(self) -> dict[str, Chart]:
        """The charts that can be drawn, by name, in the order of TITLES."""
        drawn = {
            "ppm_against_load": self._load_chart,
            "headroom_against_gain": self._gain_chart,
            "margin_against_esr": self._esr_chart,
            "ppm_over_temperature": self._temperature_chart,
            "ppm_budget": self._budget_chart,
        }
        made = {name: drawn[name]() for name in TITLES if self._known(*NEEDED[name])}
        return {name: chart for name, chart in made.items() if chart is not None}

    @property
    def not_drawn(self) -> list[str]:
        """A sentence for each chart that cannot be drawn, with what it lacks."""
        return [f"{TITLES[name]}: not drawn, {self._lacking(name)}." for name in TITLES if name not in self.charts]

    def subcircuit(self, which: Which) -> str | None:
        """The crystal for a SPICE simulator; None where the sheet states too little."""
        try:
            return subcircuit(self.reckoning, self.at, which)
        except ValueError:
            return None

    def _known(self, *keys: str) -> bool:
        return all(math.isfinite(self.reckoning.numbers[key].ends[MID, self.at]) for key in keys)

    def _lacking(self, name: str) -> str:
        keys = [key for key in NEEDED[name] if not self._known(key)]
        for key in keys:
            lacking = [one for one, flags in self.reckoning.numbers[key].lacking.items() if flags[self.at]]
            if lacking:
                return f"for {' and '.join(lacking)} is not known"
        return "for the circuit cannot oscillate" if keys else "for too little is stated"

    def _load_chart(self) -> Chart | None:
        return None if self.load_curve is None else charts.load_chart(self.load_curve)

    def _gain_chart(self) -> Chart:
        curve = curves.headroom_against_gain(self.reckoning, self.at, GAIN_POINTS)
        least = float(self.reckoning.numbers["resistance_headroom"].ends[LOW, self.at])
        return charts.gain_chart(curve, gm_over_all(self.bench), least if math.isfinite(least) else None)

    def _esr_chart(self) -> Chart:
        return charts.esr_chart(curves.margin_against_esr(self.reckoning, self.at, ESR_POINTS))

    @cached_property
    def budget(self) -> curves.Stack:
        return curves.budget_stack(self.reckoning, self.at)

    def _temperature_chart(self) -> Chart | None:
        curve = curves.ppm_over_temperature(self.reckoning, self.at)
        stack = self.budget
        others = [at for at, cause in enumerate(stack.causes) if cause != "temperature"]
        rest = float(stack.low_ppm[others].sum()), float(stack.high_ppm[others].sum())
        if not np.isfinite([*curve.columns["temperature_c"][[0, -1]], *curve.columns["low_ppm"], *rest]).all():
            return None
        asked = self.bench.requirement
        return charts.temperature_chart(curve, rest, charts.TemperatureLimits(asked.temperature_c, asked.limits_ppm))

    def _budget_chart(self) -> Chart:
        return charts.budget_chart(self.budget, self.bench.requirement.limits_ppm)


def dossiers(sheets: Sequence[SpecSheet], bench: Bench) -> tuple[list[Dossier], list[dict[str, Any]]]:
    """One for each part that offers the frequency, in the order read, and the notes of the review."""
    reckoning = reckon_sheets(sheets, bench)
    if isinstance(reckoning, Offers):
        return [], list(reckoning.notes)
    found = [Dossier(reviewed(reckoning, at), reckoning, at) for at in range(len(reckoning))]
    return found, list(reckoning.notes)
