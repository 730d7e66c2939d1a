"""Low and high of every number against brute force: points drawn inside the tolerances, every corner, and a search.

The points are put into the analysis one by one; nothing of the corners' own logic is used. Low to high must hold every
point, and must not reach further beyond the extremes found than a fiftieth of what lies between them.
"""

from __future__ import annotations

import itertools
from dataclasses import dataclass
from functools import cache

import numpy as np
import pytest
from made_sheets import bench, exactly, fork, reading, sheet, usual

from compare.circuit import Circuit
from compare.oscillation import Crystal, analyse
from compare.reckoning import reckon_sheets

POINTS = 100_000
TRIED = 24
FREQUENCY_KEYS = (
    "motional_inductance_mh",
    "quality_factor",
    "series_resonance_mhz",
    "parallel_resonance_mhz",
    "load_error_ppm",
    "trim_ppm_per_pf",
)
"""The keys for which a loose limit on C0 is open downwards (contract, section 8)."""
KEYS = (
    *FREQUENCY_KEYS,
    "circuit_load_pf",
    "load_resonance_resistance_ohm",
    "negative_resistance_ohm",
    "margin",
    "gain_ratio",
    "resistance_headroom",
    "greatest_esr_ohm",
    "critical_transconductance_ms",
    "greatest_transconductance_ms",
    "drive_level_uw",
    "startup_ms",
)
FORK = {
    "requirement": {
        "frequency_mhz": 0.032768,
        "total_ppm": 300.0,
        "startup_ms": 2000.0,
        "temperature_c": [-40.0, 85.0],
    },
    "circuit": {
        "transconductance_ms": [0.008, 0.02],
        "input_capacitor_pf": 10.0,
        "output_capacitor_pf": 12.0,
        "across_stray_pf": 0.8,
        "feedback_resistor_kohm": 1e4,
        "swing_v": 0.2,
    },
}
PLAIN = (reading("esr_ohm", 40.0, min=30.0, max=60.0),)


@dataclass(frozen=True)
class Case:
    """Circuit keys, the part's readings, and the budget's other causes by hand (low and high, ppm)."""

    circuit: dict
    part: tuple
    other_ppm: tuple[float, float]
    fork: bool = False
    shunt_floor_pf: float | None = None
    """The estimated low end of C0, by hand, where the sheet gives only a limit."""
    limiters: tuple[str, ...] = ("transconductance",)


MHZ_OTHER = (-10 - 15 - 2.3641, 10 + 15 + 2.3641)
"""Make, stability, and ±1 in the first year times ln(36.5 + 1)/ln(3.65 + 1) = 2.358."""
CASES = {
    "16 MHz, spans of everything": Case({"transconductance_ms": [6.0, 11.0]}, PLAIN, MHZ_OTHER),
    "32.768 kHz, 7 pF": Case({}, (), (-10 - 0.040 * 70**2 - 2.3641, 10 + 2.3641), fork=True),
    "32.768 kHz, 12.5 pF, series resistor, weak output": Case(
        {
            "input_capacitor_pf": 20.0,
            "output_capacitor_pf": 22.0,
            "transconductance_ms": [0.015, 0.03],
            "series_resistor_ohm": 150e3,
            "output_resistance_kohm": 2e3,
            "amplifier_output_pf": 4.0,
        },
        (exactly("load_capacitance_pf", 12.5),),
        (-10 - 0.040 * 70**2 - 2.3641, 10 + 2.3641),
        fork=True,
    ),
    "gain range over the optimum": Case(
        {"transconductance_ms": [2.0, 60.0]},
        (*PLAIN, reading("shunt_capacitance_pf", 6.0, min=5.0, max=7.0)),
        MHZ_OTHER,
    ),
    "gain of one value beyond the optimum": Case(
        {"transconductance_ms": 25.0},
        (*PLAIN, reading("shunt_capacitance_pf", 6.0, min=5.0, max=7.0)),
        MHZ_OTHER,
    ),
    "series resistor, weak output, capacitors inside": Case(
        {
            "transconductance_ms": [6.0, 12.0],
            "series_resistor_ohm": 470.0,
            "output_resistance_kohm": 5.0,
            "amplifier_output_pf": 4.0,
            "internal_pf": 3.0,
        },
        PLAIN,
        MHZ_OTHER,
    ),
    "loose limit on C0": Case(
        {"transconductance_ms": [6.0, 11.0]},
        (*PLAIN, reading("shunt_capacitance_pf", max=5.0)),
        MHZ_OTHER,
        shunt_floor_pf=0.5,
    ),
    "series resonance, swing at the output": Case(
        {"transconductance_ms": [6.0, 11.0], "swing_at": "output", "output_capacitor_pf": 27.0},
        (*PLAIN, "series"),
        MHZ_OTHER,
    ),
    "either limiter": Case(
        {"transconductance_ms": [4.0, 9.0], "limiter": "unknown", "output_resistance_kohm": 10.0},
        PLAIN,
        MHZ_OTHER,
        limiters=("transconductance", "output"),
    ),
    "third overtone with a heavy C0": Case(
        {"transconductance_ms": [8.0, 16.0], "feedback_resistor_kohm": 100.0},
        (
            reading("esr_ohm", 60.0, min=40.0, max=80.0),
            reading("shunt_capacitance_pf", 3.0, min=2.5, max=3.5),
            reading("motional_capacitance_ff", 1.0, min=0.8, max=1.2),
        ),
        MHZ_OTHER,
    ),
}
every = pytest.mark.parametrize("name", CASES)


def asked_of(case):
    shared = FORK if case.fork else {"requirement": {"startup_ms": 10.0}, "circuit": {}}
    return bench({"requirement": shared["requirement"], "circuit": shared["circuit"] | case.circuit})


@cache
def worst_case(name):
    """The program's own low and high of each key, by name: what is judged here."""
    case = CASES[name]
    identity = {"resonance": "series"} if "series" in case.part else {}
    readings = [r for r in case.part if r != "series"]
    without = ("load_capacitance_pf",) if identity else ()
    part = fork(*readings) if case.fork else usual(*readings, without=without, **identity)
    found = reckon_sheets([sheet(part)], asked_of(case))
    return {key: number.ends[:, 0] for key, number in found.numbers.items()}


def box_of(case):
    """Low and high of every input that moves by itself, by name."""
    keys = asked_of(case).circuit
    stated = {r.field: r for r in case.part if r != "series"}
    fallback = {r.field: r for r in (fork() if case.fork else usual()).readings}

    def around(value, percent):
        return value * (1 - percent / 100), value * (1 + percent / 100)

    def span(field):
        one = stated.get(field, fallback[field])
        return (one.max if one.min is None else one.min), one.max

    box = {
        "fitted in": around(keys.input_capacitor_pf, keys.capacitor_tolerance_percent),
        "fitted out": around(keys.output_capacitor_pf, keys.capacitor_tolerance_percent),
        "stray in": around(keys.input_stray_pf, keys.stray_tolerance_percent),
        "stray out": around(keys.output_stray_pf, keys.stray_tolerance_percent),
        "across": around(keys.across_stray_pf, keys.stray_tolerance_percent),
        "inside in": around(keys.internal_pf, keys.internal_tolerance_percent),
        "inside out": around(keys.internal_pf, keys.internal_tolerance_percent),
        "amplifier": around(keys.amplifier_output_pf, keys.stray_tolerance_percent),
        "gain": keys.transconductance_ms
        if isinstance(keys.transconductance_ms, tuple)
        else (keys.transconductance_ms,) * 2,
        "esr": span("esr_ohm"),
        "c0": span("shunt_capacitance_pf"),
        "c1": span("motional_capacitance_ff"),
    }
    return np.array([box[name] for name in box]).T


def rated_load(case):
    stated = [r.typ for r in case.part if r != "series" and r.field == "load_capacitance_pf"]
    return np.inf if "series" in case.part else next(iter(stated), 7.0 if case.fork else 8.0)


def outcomes(case, points, *, of_frequency):
    """Every key at points (m, 12) of the box; for keys of frequency C0 reaches down to its estimated low end."""
    keys = asked_of(case).circuit
    fit_in, fit_out, stray_in, stray_out, across, in_in, in_out, amp, gain, esr, c0, c1 = points.T
    ahead = keys.series_resistor_ohm > 0
    circuit = Circuit(
        fit_in + stray_in + in_in,
        fit_out + stray_out + (0 if ahead else in_out),
        across,
        amp + (in_out if ahead else 0),
        gain,
        keys.series_resistor_ohm,
        keys.feedback_resistor_kohm,
        keys.output_resistance_kohm,
    )
    load = rated_load(case)
    crystal = Crystal(asked_of(case).requirement.frequency_mhz, load, c0, c1, esr)
    wanted = FREQUENCY_KEYS if of_frequency else [key for key in KEYS if key not in FREQUENCY_KEYS]
    swing = keys.swing_v / 2
    found = [analyse(circuit, crystal, swing, keys.swing_at, limiter) for limiter in case.limiters]
    return {key: np.concatenate([one[key] for one in found]) for key in wanted}


def boxes(case):
    """(of frequency, low, high): the same box, but for a loose C0."""
    low, high = box_of(case)
    opened = low.copy()
    if case.shunt_floor_pf is not None:
        opened[-2] = case.shunt_floor_pf
    return [(False, low, high), (True, opened, high)]


@dataclass
class Extremes:
    """Of one key over the points drawn and the corners, and over what a search from the best of them found besides."""

    least: float
    greatest: float
    some_without: bool

    def __post_init__(self):
        self.searched_least, self.searched_greatest = self.least, self.greatest

    @property
    def width(self):
        return self.searched_greatest - self.searched_least


@cache
def brute_force(name):
    """Extremes by key."""
    case, rng = CASES[name], np.random.default_rng(11)
    extremes = {}
    for of_frequency, low, high in boxes(case):
        corners = np.array(list(itertools.product(*({a, b} for a, b in zip(low, high, strict=True)))))
        points = np.concatenate([low + (high - low) * rng.random((POINTS, len(low))), corners])
        found = outcomes(case, points, of_frequency=of_frequency)
        repeated = np.concatenate([points] * len(case.limiters))
        for key, values in found.items():
            extremes[key] = Extremes(np.nanmin(values), np.nanmax(values), bool(np.isnan(values).any()))
        search(case, (low, high), (repeated, found), extremes, of_frequency=of_frequency)
    return extremes


def search(case, box, seen, extremes, *, of_frequency):
    """From the best points seen of each key, in smaller and smaller steps of about half of the inputs."""
    (low, high), (points, found) = box, seen
    rng = np.random.default_rng(12)
    wanted = [(key, sign) for key in found for sign in (1, -1)]
    at = np.array([points[np.nanargmin(sign * found[key])] for key, sign in wanted])
    for step in np.geomspace(0.5, 1e-3, 30):
        here = np.repeat(at[:, None, :], TRIED, axis=1)
        tried = np.clip(here + rng.normal(0, step, here.shape) * (high - low), low, high)
        tried = np.where(rng.random(here.shape) < 0.5, here, tried)
        values = outcomes(case, tried.reshape(-1, len(low)), of_frequency=of_frequency)
        for row, (key, sign) in enumerate(wanted):
            found_here = values[key].reshape(len(case.limiters), len(at), TRIED)[:, row]
            one = np.nan_to_num(sign * found_here, nan=np.inf).min(axis=0)
            best = int(one.argmin())
            end = "searched_least" if sign > 0 else "searched_greatest"
            if one[best] < sign * getattr(extremes[key], end):
                setattr(extremes[key], end, sign * one[best])
                at[row] = tried[row, best]


@every
@pytest.mark.parametrize("key", KEYS)
def test_low_to_high_holds_every_point(name, key):
    low, _, high = worst_case(name)[key]
    found = brute_force(name)[key]
    slip = 1e-9 * max(abs(found.least), abs(found.greatest))
    if np.isnan(low) or np.isnan(high):
        assert found.some_without or not np.isfinite(found.greatest), "no bound, and every point has such a number"
    assert np.isnan(low) or low <= found.least + slip
    assert np.isnan(high) or high >= found.greatest - slip


@every
@pytest.mark.parametrize("key", KEYS)
def test_a_search_gets_no_further_out_than_a_ten_thousandth(name, key):
    low, _, high = worst_case(name)[key]
    found = brute_force(name)[key]
    room = 1e-4 * found.width + 1e-9 * abs(found.greatest)
    assert np.isnan(low) or low <= found.searched_least + room
    assert np.isnan(high) or high >= found.searched_greatest - room


@every
@pytest.mark.parametrize("key", KEYS)
def test_low_to_high_is_no_wider_than_a_fiftieth_beyond_the_extremes(name, key):
    low, _, high = worst_case(name)[key]
    found = brute_force(name)[key]
    room = 0.02 * found.width + 1e-9 * abs(found.greatest)
    assert np.isnan(low) or low >= found.searched_least - room
    assert np.isnan(high) or high <= found.searched_greatest + room


@every
def test_the_total_is_the_sum_of_the_ends_found(name):
    low, _, high = worst_case(name)["total_ppm"]
    load = brute_force(name)["load_error_ppm"]
    under, over = CASES[name].other_ppm
    room = 0.02 * load.width + 0.01
    assert low == pytest.approx(load.searched_least + under, abs=room)
    assert high == pytest.approx(load.searched_greatest + over, abs=room)


@every
def test_the_allowed_esr_is_the_greatest_over_the_margin_asked(name):
    allowed, greatest = worst_case(name)["allowed_esr_ohm"], worst_case(name)["greatest_esr_ohm"]
    assert allowed == pytest.approx(greatest / asked_of(CASES[name]).requirement.margin, nan_ok=True)
