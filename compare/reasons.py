"""A sentence for each requirement of one part: how it stands, by how much, what it rests on."""

from __future__ import annotations

import math
from collections.abc import Callable, Mapping
from dataclasses import dataclass
from typing import Any

import numpy as np

from compare.bench import Bench, uses
from compare.budget import seconds_per_day
from compare.explain import FIELD_WORDS, Subject, figure, joined, reading_text
from compare.result import Number
from compare.terms import Total
from compare.verdict import CANNOT_TELL, GAINS, WORDS, Judged

CLOCKS_BELOW_MHZ = 1.0
GAIN_WORDS = {
    "margin": "margin",
    "gain_ratio": "gain ratio",
    "resistance_headroom": "resistance headroom",
}


@dataclass(frozen=True)
class Standing:
    """One part's place in the columns, and what its sentences draw on."""

    at: int
    subject: Subject
    numbers: Mapping[str, Number]
    total: Total
    loosest_slack: float
    """Slack of total_ppm with every option at its loosest; NaN where there is no choice."""
    greatest_gm: float
    """Least transconductance of all corners above which oscillation stops again; NaN where nothing bounds it."""

    @property
    def bench(self) -> Bench:
        return self.subject.bench


def reasons(judged: Mapping[str, Judged], standing: Standing) -> list[dict[str, Any]]:
    """One for every requirement asked, and findings without a verdict after them."""
    at = standing.at
    told = [
        {
            "about": one.about,
            "verdict": WORDS[int(one.verdict[at])],
            "message": message(one, standing),
            "estimated": sorted(name for name, flags in one.estimated.items() if flags[at]),
        }
        for one in judged.values()
        if one.asked[at]
    ]
    return told + findings(standing)


def message(one: Judged, standing: Standing) -> str:
    """The whole sentence of one requirement."""
    at = standing.at
    lacking = [name for name, flags in one.missing.items() if flags[at]]
    if one.verdict[at] == CANNOT_TELL and lacking and one.about not in ("mode", "operating_temperature_c", "esr_ohm"):
        return f"cannot be told: {joined(lacking_words(lacking))}{_bench_test(one, standing)}"
    parts = [MESSAGES[one.about](one, standing)]
    if one.verdict[at] == CANNOT_TELL and len(one.typical_only) and one.typical_only[at]:
        parts.append("the ESR is printed as typical with no limit, which promises nothing")
    estimated = [name for name, flags in one.estimated.items() if flags[at]]
    if estimated:
        fields = joined(FIELD_WORDS.get(name, name) for name in estimated)
        settles = "so it cannot be told" if one.verdict[at] == CANNOT_TELL else "over the whole of its interval"
        parts.append(f"rests on an estimate of {fields}, {settles}")
    if one.about in GAINS:
        parts += gain_remarks(one, standing)
    return "; ".join(parts)


def _bench_test(one: Judged, standing: Standing) -> str:
    """What to try on the board where the margin cannot be reckoned: a resistor in series with the crystal."""
    rl = standing.subject.ends["load_resonance_resistance_ohm"][2]
    if one.about != "margin" or math.isnan(rl):
        return ""
    least = (standing.bench.requirement.margin - 1) * rl
    return (
        f"; on the board, over temperature and supply, it must still start with {figure(least, 3)} Ω put in series "
        f"with the crystal ((margin - 1) RL, RL {figure(rl, 3)} Ω at the worst)"
    )


def lacking_words(lacking: list[str]) -> list[str]:
    return [
        f"{name} not known" if "." in name else f"{FIELD_WORDS.get(name, name)} not stated by the sheet"
        for name in lacking
    ]


def times(slack: float) -> str:
    """`4.5 times over`, `0.85 of what is asked`."""
    if math.isnan(slack):
        return "not known"
    if slack >= 999:
        return "999 times over or more"
    return f"{figure(slack, 3)} times over" if slack >= 1 else f"{figure(slack, 3)} of what is asked"


def _gain(one: Judged, standing: Standing) -> str:
    low, mid, _ = standing.subject.ends[one.about]
    asked = standing.bench.requirement
    least = "none in some corner, which cannot oscillate" if math.isnan(low) else f"{figure(low, 3)} at the worst"
    source = "default" if asked.margin_source == "default" and "margin" not in asked.given else asked.margin_source
    return (
        f"{GAIN_WORDS[one.about]} {least}, {figure(mid, 3)} nominal; {figure(asked.margin)} asked ({source}): "
        f"{times(float(one.worst[standing.at]))}"
    )


def gain_remarks(one: Judged, standing: Standing) -> list[str]:
    """What a gain figure holds for: temperature of the readings, the upper end of the transconductance."""
    offer, said = standing.subject.offer, []
    every = zip(standing.subject.words.settings, offer.at, strict=True)
    rooms = [setting.name for setting, at in every if at.room_only]
    if rooms:
        said.append(f"room values only: the sheet states no ESR for {joined(rooms)}")
    if one.about == "resistance_headroom":
        said += _upper_end(standing)
    return said


def _upper_end(standing: Standing) -> list[str]:
    keys, stop = standing.subject.circuit, standing.greatest_gm
    if math.isnan(stop):
        return []
    stops = f"oscillation stops again above {figure(stop)} mS"
    if isinstance(keys.transconductance_ms, tuple):
        return [f"{stops}, {figure(stop / keys.transconductance_ms[1], 3)} times the IC's greatest"]
    if keys.transconductance_ms is None:
        return [f"upper end not judged, the IC's greatest transconductance is not known: {stops}"]
    ratio = figure(stop / keys.transconductance_ms, 3)
    return [f"upper end not judged, one transconductance given: {stops}, {ratio} times it"]


def _total(one: Judged, standing: Standing) -> str:
    low, _, high = standing.subject.ends["total_ppm"]
    daily = ""
    if standing.subject.offer.frequency_mhz < CLOCKS_BELOW_MHZ:
        daily = f" ({signed(float(seconds_per_day(low)))} to {signed(float(seconds_per_day(high)))} s a day)"
    if math.isnan(low) and math.isnan(high):
        return f"no frequency to judge against {limit_words(standing.bench)}, as it cannot oscillate"
    parts = [
        f"{signed(low)} to {signed(high)} ppm{daily} against {limit_words(standing.bench)}: "
        f"{times(float(one.worst[standing.at]))}",
    ]
    if not math.isnan(standing.loosest_slack):
        options = joined(
            f"{FIELD_WORDS[name]} ±{figure(taken.span.high)}" for name, taken in standing.subject.offer.loosest.items()
        )
        parts.append(
            f"the loosest option ({options} ppm) would {'do too' if standing.loosest_slack >= 1 else 'not do'}"
        )
    return "; ".join(parts)


def signed(value: float) -> str:
    if math.isnan(value):
        return "?"
    return f"{'-' if value < 0 else '+'}{figure(abs(value), 3)}"


def limit_words(bench: Bench) -> str:
    """Both limits, where there are two, and which ends count."""
    asked = bench.requirement
    said = []
    if asked.total_ppm is not None:
        said.append(f"total_ppm ±{figure(asked.total_ppm)}")
    if asked.use is not None:
        use = uses()[asked.use]
        ends = (
            "sets no single limit" if use.low_ppm is None else f"{signed(use.low_ppm)} to {signed(use.high_ppm or 0.0)}"
        )
        evidence = "" if use.evidence else ", no source yet: check the standard"
        said.append(f"use {asked.use} {ends}{evidence}")
    if asked.limits_ppm is None:
        return joined(said)
    low, high = asked.limits_ppm
    return f"{signed(low)}/{signed(high)} ppm ({joined(said)})"


def budget_words(standing: Standing) -> str:
    """Each term of the sum, in order, with its rule."""
    at, total, offer = standing.at, standing.total, standing.subject.offer
    asked = standing.bench.requirement
    parts = []
    for name, term in total.terms.items():
        label = f"trim {figure(asked.trim_step_ppm)}" if name == "make" and asked.trim_step_ppm is not None else name
        parts.append(f"{label} {signed(float(term.low[at]))}/{signed(float(term.high[at]))}")
    least, most = np.fmin.reduce(total.load_low[at], axis=None), np.fmax.reduce(total.load_high[at], axis=None)
    load = f"{signed(float(least))}/{signed(float(most))}"
    less = " less its nominal, which the trim takes up" if asked.trim_step_ppm is not None else ""
    parts.append(f"load error {load}{less}")
    fork = ", the fork's parabola with the spread of both coefficients" if offer.fork else ""
    return f"make, temperature{fork}, ageing and load error summed at their ends: {', '.join(parts)} ppm"


def _drive(one: Judged, standing: Standing) -> str:
    high = standing.subject.ends["drive_level_uw"][2]
    offer, asked = standing.subject.offer, standing.bench.requirement
    worst = "no amplitude, as it cannot oscillate" if math.isnan(high) else f"{figure(high, 3)} µW at the worst"
    said = f"{worst}; {reading_text('drive_level_uw', offer.drive)}"
    if asked.drive_headroom != 1:
        said += f", headroom {figure(asked.drive_headroom)} asked"
    at_output = "; a peak-to-peak reading at the output end misstates the power by -10 to +5 %"
    swing = at_output if standing.subject.circuit.swing_at == "output" else ""
    return f"{said}: {times(float(one.worst[standing.at]))}{swing}"


def _startup(one: Judged, standing: Standing) -> str:
    high = standing.subject.ends["startup_ms"][2]
    asked = figure(standing.bench.requirement.startup_ms or math.nan)
    if math.isnan(high):
        return f"does not start in some corner; {asked} ms asked"
    slack = times(float(one.worst[standing.at]))
    return f"{figure(high, 3)} ms at the worst (small-signal, an order of magnitude), {asked} ms asked: {slack}"


def _range(one: Judged, standing: Standing) -> str:
    offer, product = standing.subject.offer, standing.bench.requirement.temperature_c or (math.nan, math.nan)
    wanted = f"the product's {product[0]:g} to {product[1]:g} °C"
    if one.verdict[standing.at] == CANNOT_TELL:
        return f"the sheet states no operating range to hold {wanted}"
    band, span = offer.stability_band, offer.operating_range.span
    own = f"the part's range {figure(span.low)} to {figure(span.high)} °C" if offer.operating_range.stated else ""
    stability = f"its stability's {band[0]:g} to {band[1]:g} °C" if band else ""
    held = WORDS[int(one.verdict[standing.at])] == "meets"
    ranges = [words for words in (own, stability) if words]
    several = len(ranges) > 1
    verb = ("hold" if several else "holds") if held else ("do not both hold" if several else "does not hold")
    return f"{joined(ranges)} {verb} {wanted}"


def _mode(one: Judged, standing: Standing) -> str:
    offer, trap = standing.subject.offer, standing.subject.circuit.overtone_trap
    if not offer.mode_known:
        return (
            f"mode not stated, and {figure(offer.frequency_mhz)} MHz parts are sold as fundamental and as third "
            "overtone: cannot be told (common practice, no source)"
        )
    if trap:
        return (
            f"{offer.mode}, judged by its own numbers: the bench has an overtone trap, but the trap is not in the "
            "model, so prove it on the board"
        )
    return {
        "meets": f"{offer.mode}: its fundamental cannot start in this circuit",
        "falls short": f"{offer.mode}: in this circuit its fundamental grows faster, and takes over",
        "cannot tell": f"{offer.mode}: its fundamental can start too, if slower, or cannot be reckoned: cannot be told",
    }[
        WORDS[int(one.verdict[standing.at])]
    ] + " (fundamental put in at f/n: L1 the same, C1 n² times, R1 1/n² to once the stated)"


def _least_esr(one: Judged, standing: Standing) -> str:
    floors = [s.circuit.rating.esr_min_ohm for s in standing.subject.words.settings if s.circuit.rating is not None]
    floor = max(value for value in floors if value is not None)
    said = reading_text("esr_ohm", standing.subject.offer.at[0].esr)
    if one.verdict[standing.at] == CANNOT_TELL:
        return f"the IC asks for {figure(floor)} Ω at least; {said}, no least value is stated"
    return f"the IC asks for {figure(floor)} Ω at least; {said}"


def _rating(one: Judged, standing: Standing) -> str:
    return (
        "by the IC's rating instead of its transconductance, the least of margin, gain ratio and resistance headroom: "
        f"{times(float(one.worst[standing.at]))}"
    )


MESSAGES: dict[str, Callable[[Judged, Standing], str]] = {
    "margin": _gain,
    "gain_ratio": _gain,
    "resistance_headroom": _gain,
    "total_ppm": _total,
    "drive_level_uw": _drive,
    "startup_ms": _startup,
    "operating_temperature_c": _range,
    "mode": _mode,
    "esr_ohm": _least_esr,
    "rating": _rating,
}


def findings(standing: Standing) -> list[dict[str, Any]]:
    """What is to be said without a verdict."""
    said = []
    rule = standing.bench.crystal.series_resistor_rule
    for setting in standing.subject.words.settings:
        keys = setting.circuit
        if keys.series_resistor_ohm > 0 and "output_resistance_kohm" not in keys.given and rule == "circuit":
            said.append(
                f"a series resistor of {figure(keys.series_resistor_ohm)} Ω with no output resistance given: behind an "
                "ideal current source it costs no margin, so its effect on margin cannot be told; give "
                "circuit.output_resistance_kohm"
            )
    unique = dict.fromkeys(said)
    return [
        {"about": "circuit.output_resistance_kohm", "verdict": None, "message": text, "estimated": []}
        for text in unique
    ]
