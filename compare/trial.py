"""Other capacitors and other series resistors in one part's circuit: what would help, worst case beside each."""

from __future__ import annotations

import itertools
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import replace
from typing import Any

import numpy as np

from compare.advice import Outcome, Resistor, ResistorOutcome, e24_pairs, series_resistor
from compare.bench import Bench, CircuitKeys
from compare.circuit import Array
from compare.columns import HIGH, LOW, MID, Columns
from compare.corners import (
    BY_SHUNT_FLOOR,
    SHUNT_FLOOR,
    Nodes,
    as_reckoned,
    corner_circuit,
    crystal_at,
    limiters_of,
    make_circuit,
    motional_resistance_ohm,
    nominal_transconductance_ms,
    shunt_ends,
    shunt_ends_and_floor,
    swing_of,
)
from compare.oscillation import Crystal, amplifier_swing_v, analyse
from compare.terms import Total
from compare.verdict import FALLS_SHORT, Judged, ppm_slack, times_over

Worst = dict[str, tuple[Array, Array]]
GAINS = ("margin", "gain_ratio", "resistance_headroom")


def advice_for(
    columns: Columns, bench: Bench, total: Total, judged: Mapping[str, Judged], at: int
) -> tuple[list[dict[str, Any]], list[str]]:
    """Load capacitors that would meet the bench, best first, a series resistor where the drive is above its rating.

    Returns
    -------
    advice, sentences
        The list of the review, and what there is to say where nothing can be met.
    """
    one = columns.take([at])
    if np.isnan(one.esr_ohm[:, MID]).any():
        return [], ["No advice on capacitors: the sheet states no ESR."]
    trial = Trial(one, bench, total, at)
    pairs, sentence = e24_pairs(trial.nominal_pairs, trial.worst_pairs)
    advice: list[dict[str, Any]] = [
        {
            "what": "load capacitors",
            "values_pf": [pair.input_pf, pair.output_pf],
            "load_error_ppm": _or_none(pair.load_error_ppm),
            "margin": _or_none(pair.margin),
            "times_over": _or_none(pair.slack),
        }
        for pair in pairs
    ]
    sentences = [sentence] if sentence else []
    drive = judged.get("drive_level_uw")
    if drive is not None and drive.verdict[at] == FALLS_SHORT and bench.crystal.series_resistor_rule == "circuit":
        resistor, said = trial.series_resistor()
        sentences.append(said)
        if resistor is not None:
            advice.append({"what": "series resistor", **{k: _or_none(v) for k, v in resistor._asdict().items()}})
    return advice, sentences


def _or_none(value: float) -> float | None:
    return float(value) if np.isfinite(value) else None


class Trial:
    """One part, with the bench's circuit to change."""

    def __init__(self, one: Columns, bench: Bench, total: Total, at: int) -> None:
        self.one, self.bench = one, bench
        drive = one.offers[0].drive
        self.rated_uw = drive.span.mid if drive.stated else np.nan
        trimmed = bench.requirement.trim_step_ppm is not None
        self.trimmed = trimmed
        self.terms_low = float(sum(term.low[at] for term in total.terms.values()))
        self.terms_high = float(sum(term.high[at] for term in total.terms.values()))

    def nominal_pairs(self, c_in: Array, c_out: Array) -> Outcome:
        """Outcome with each pair fitted, at nominal values: (m,) each."""
        keys = as_reckoned(self.bench.settings[0].circuit, self.bench)
        bare = Nodes.of(keys.model_copy(update={"input_capacitor_pf": 0.0, "output_capacitor_pf": 0.0}))
        capacitances = (
            c_in + bare.input_pf[MID],
            c_out + bare.output_pf[MID],
            bare.across_pf[MID],
            bare.amplifier_output_pf[MID],
        )
        one, shunt = self.one, self.one.shunt_pf[0, MID]
        esr = motional_resistance_ohm(one, self.bench, one.esr_ohm[0, MID], shunt)
        if self.bench.crystal.series_resistor_rule == "add to ESR":
            esr = esr + self.bench.settings[0].circuit.series_resistor_ohm
        at_mid = Crystal(one.frequency_mhz, one.load_pf, shunt, one.motional_ff[0, MID], esr)
        gm = nominal_transconductance_ms(keys, self.bench, shunt)
        circuit = make_circuit(keys, self.bench, list(capacitances), gm)
        found = analyse(circuit, at_mid, *swing_of(keys), limiters_of(keys)[0], keys.probe_pf)
        return self._outcome({key: (values, values) for key, values in found.items()}, found["load_error_ppm"])

    def worst_pairs(self, c_in: Array, c_out: Array) -> Outcome:
        """Outcome with each pair fitted, over every corner: (m,) each."""
        nominal = self.nominal_pairs(c_in, c_out).load_error_ppm
        worst: Worst = {}
        for number, keys in self._settings():
            capacitances = pair_corners(keys, c_in, c_out)
            shunt, index = shunt_ends_and_floor(self.one, number)
            circuit, _ = corner_circuit(self.bench, keys, shunt, capacitances)
            crystal = crystal_at(self.one, self.bench, number, shunt)
            for limiter in limiters_of(keys):
                found = analyse(circuit, crystal, *swing_of(keys), limiter, keys.probe_pf)
                # As in the review itself: the estimated low end of C0 counts for numbers of frequency alone.
                stated = index[:SHUNT_FLOOR]
                _widen(worst, {key: v if key in BY_SHUNT_FLOOR else v[:, stated] for key, v in found.items()})
        return self._outcome(worst, nominal)

    def series_resistor(self) -> tuple[Resistor | None, str]:
        """The least series resistor that brings the drive down to its rating."""
        present = self.bench.settings[0].circuit.series_resistor_ohm
        allowed = self.rated_uw / self.bench.requirement.drive_headroom
        return series_resistor(self._with_resistors, allowed, present)

    def _with_resistors(self, ohm: Array) -> ResistorOutcome:
        worst: Worst = {}
        for number, keys in self._settings():
            shunt = shunt_ends(self.one, number)
            crystal = crystal_at(self.one, self.bench, number, shunt)
            before, _ = corner_circuit(self.bench, keys, shunt)
            # Where there was none, what the IC holds at its output now lies ahead of the resistor.
            after, _ = corner_circuit(self.bench, keys.model_copy(update={"series_resistor_ohm": 1.0}), shunt)
            tried = replace(after, series_resistor_ohm=ohm.reshape(-1, 1, 1, 1, 1, 1))
            for limiter in limiters_of(keys):
                swing = amplifier_swing_v(before, crystal, *swing_of(keys), limiter)
                if np.shape(after.input_pf) != np.shape(before.input_pf):  # corners of their own: take the worst
                    swing = np.fmax.reduce(swing, axis=4, keepdims=True)
                _widen(worst, analyse(tried, crystal, swing, "amplifier", limiter))
        return ResistorOutcome(worst["drive_level_uw"][1], worst["margin"][0])

    def _settings(self) -> Iterator[tuple[int, CircuitKeys]]:
        for number, setting in enumerate(self.bench.settings):
            yield number, setting.circuit

    def _outcome(self, worst: Worst, nominal_error: Array) -> Outcome:
        asked = self.bench.requirement
        low, high = worst["load_error_ppm"]
        slacks = [times_over(worst[key][0], asked.margin) for key in GAINS]
        slacks.append(times_over(self.rated_uw, worst["drive_level_uw"][1] * asked.drive_headroom))
        if asked.startup_ms is not None:
            slacks.append(np.nan_to_num(times_over(asked.startup_ms, worst["startup_ms"][1]), nan=0.0))
        if asked.limits_ppm is not None:
            offset = nominal_error if self.trimmed else np.zeros_like(nominal_error)
            total = (self.terms_low + low - offset, self.terms_high + high - offset)
            slacks.append(ppm_slack(*total, asked.limits_ppm))
        slack = np.nan_to_num(np.fmin.reduce(slacks), nan=999.0)
        error = np.where(np.abs(low) > np.abs(high), low, high)
        return Outcome(error, worst["margin"][0], np.where(np.isnan(error), np.nan, slack))


def pair_corners(keys: CircuitKeys, c_in: Array, c_out: Array) -> Sequence[Array]:
    """Node capacitances with each pair fitted, (m, 1, 1, 1, k, 1)."""
    bare = Nodes.of(keys.model_copy(update={"input_capacitor_pf": 0.0, "output_capacitor_pf": 0.0}))
    part = keys.capacitor_tolerance_percent / 100
    ends = np.array(list(itertools.product((LOW, HIGH), repeat=4)))

    def node(span: tuple[float, float, float], fitted: Array | None, column: int) -> Array:
        picked = np.array(span)[ends[:, column]]
        sign = np.where(ends[:, column] == LOW, 1 - part, 1 + part)
        values: Array = picked[None, :] + (0.0 if fitted is None else fitted[:, None] * sign[None, :])
        return values[:, None, None, None, :, None]

    return [
        node(bare.input_pf, c_in, 0),
        node(bare.output_pf, c_out, 1),
        node(bare.across_pf, None, 2),
        node(bare.amplifier_output_pf, None, 3),
    ]


def _widen(worst: Worst, found: dict[str, Array]) -> None:
    for key, values in found.items():
        corners = tuple(range(1, values.ndim))
        low, high = np.fmin.reduce(values, axis=corners), np.fmax.reduce(values, axis=corners)
        if key in ("gain_ratio", "startup_ms"):  # a corner that does not oscillate, or does not start
            without = np.logical_or.reduce(np.isnan(values), axis=corners)
            low = np.where(without, np.nan if key == "startup_ms" else 0.0, low)
            high = np.where(without, np.nan, high)
        if key in worst:
            plain = key != "startup_ms"
            low = np.fmin(worst[key][0], low) if plain else np.minimum(worst[key][0], low)
            high = np.fmax(worst[key][1], high) if plain else np.maximum(worst[key][1], high)
        worst[key] = (low, high)
