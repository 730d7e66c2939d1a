"""Sentences: how each number was reached, why a requirement is met or not, and what to ask whom."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable, Mapping, Sequence
from dataclasses import dataclass
from decimal import Decimal
from functools import cached_property

from compare.bench import Bench, CircuitKeys, Setting
from compare.corners import as_reckoned, lossless_load_pf
from compare.motional import estimate_quality_factor
from compare.offer import Offer
from compare.rating import list_row
from compare.stated import Taken
from extract.model import Reading

Ends = tuple[float, float, float]
SYMBOLS = {
    "esr_ohm": ("R1", "Ω"),
    "shunt_capacitance_pf": ("C0", "pF"),
    "motional_capacitance_ff": ("C1", "fF"),
    "motional_inductance_mh": ("L1", "mH"),
    "quality_factor": ("Q", ""),
    "capacitance_ratio": ("C0/C1", ""),
    "pulling_sensitivity_ppm_per_pf": ("pulling", "ppm/pF"),
    "load_capacitance_pf": ("rated CL", "pF"),
    "drive_level_uw": ("rated drive", "µW"),
    "frequency_tolerance_ppm": ("make tolerance", "ppm"),
    "frequency_stability_ppm": ("stability", "ppm"),
    "ageing_ppm": ("ageing", "ppm"),
    "operating_temperature_c": ("range", "°C"),
    "turnover_temperature_c": ("T0", "°C"),
    "parabolic_coefficient_ppm_per_c2": ("k", "ppm/°C²"),
}
FIELD_WORDS = {
    "esr_ohm": "ESR",
    "shunt_capacitance_pf": "shunt capacitance C0",
    "motional_capacitance_ff": "motional capacitance C1",
    "load_capacitance_pf": "rated load capacitance",
    "drive_level_uw": "rated drive level",
    "frequency_tolerance_ppm": "make tolerance",
    "frequency_stability_ppm": "stability over temperature",
    "ageing_ppm": "ageing",
    "operating_temperature_c": "operating temperature range",
    "turnover_temperature_c": "turnover temperature",
    "parabolic_coefficient_ppm_per_c2": "parabolic coefficient",
    "mode": "mode of vibration",
}


LEAST_SPELT_OUT, GREATEST_SPELT_OUT = 1e-9, 1e9


def figure(value: float | None, digits: int = 4) -> str:
    """A number as a person writes it, without an exponent; `none` where there is none."""
    if value is None or math.isnan(value):
        return "none"
    if math.isinf(value):
        return "inf"
    text = f"{value:.{digits}g}"
    if "e" not in text:
        return text
    if abs(value) < 1:
        return f"{Decimal(text):f}" if abs(value) > LEAST_SPELT_OUT else text
    return f"{value:.0f}" if abs(value) < GREATEST_SPELT_OUT else text


def ends_text(ends: Sequence[float], unit: str = "") -> str:
    """`60 Ω`, or `40/50/60 Ω` for low, mid and high that differ."""
    shown = list(dict.fromkeys(figure(value) for value in ends))
    text = "/".join(figure(value) for value in ends) if len(shown) > 1 else shown[0]
    return f"{text} {unit}".rstrip()


def place(reading: Reading) -> str:
    """Where it stands, with the word for a value that is not plainly stated."""
    how = "" if reading.status == "stated" else f", {reading.status}"
    return f"{reading.where}{how}{', to be looked at' if reading.check else ''}"


def bound_word(taken: Taken) -> str:
    if taken.limit_alone:
        return " at most, limit used for all ends" if any(r.field == "esr_ohm" for r in taken.readings) else " at most"
    return " typical, no limit" if taken.typical_only and any(r.field == "esr_ohm" for r in taken.readings) else ""


def reading_text(name: str, taken: Taken) -> str:
    """`R1 60 Ω at most (page 1)`: symbol, value, bound and place."""
    symbol, unit = SYMBOLS[name]
    if not taken.readings and not taken.stated:
        return f"{symbol} not stated"
    span = taken.span
    value = "none (series resonance)" if math.isinf(span.mid) else ends_text((span.low, span.mid, span.high), unit)
    places = "; ".join(dict.fromkeys(place(r) for r in taken.readings[:2]))
    return f"{symbol} {value}{bound_word(taken)}" + (f" ({places})" if places else "")


@dataclass(frozen=True)
class BenchWords:
    """What the sentences say of the circuit, the same for every part."""

    circuit: CircuitKeys
    settings: tuple[Setting, ...]
    capacitors: str
    transconductance: str


def bench_words(bench: Bench) -> BenchWords:
    """The circuit's capacitances and resistors, and its transconductance with where it comes from."""
    keys = bench.settings[0].circuit
    words = _capacitors(as_reckoned(keys, bench), bench.requirement.frequency_mhz)
    return BenchWords(keys, bench.settings, words, _transconductance(keys, bench.requirement.frequency_mhz))


def _capacitors(keys: CircuitKeys, frequency_mhz: float) -> str:
    parts = [f"f {frequency_mhz:.10g} MHz"]
    for end, symbol in (("input", "Cin"), ("output", "Cout")):
        inside = keys.internal_at_each_pin_pf if end == "input" or keys.series_resistor_ohm == 0 else 0.0
        terms = (getattr(keys, f"{end}_capacitor_pf"), getattr(keys, f"{end}_stray_pf"), inside or None)
        parts.append(f"{symbol} {' + '.join(figure(term) for term in terms if term is not None)} pF")
    parts += [f"across {figure(keys.across_stray_pf)} pF", f"Rf {figure(keys.feedback_kohm(frequency_mhz))} kΩ"]
    ahead = [keys.amplifier_output_pf, keys.internal_at_each_pin_pf if keys.series_resistor_ohm else 0.0]
    if any(ahead):
        parts.append(f"Cp {' + '.join(figure(value) for value in ahead if value)} pF")
    if not math.isinf(keys.output_resistance_kohm):
        parts.append(f"Ro {figure(keys.output_resistance_kohm)} kΩ")
    if keys.series_resistor_ohm:
        parts.append(f"Rd {figure(keys.series_resistor_ohm)} Ω")
    if keys.limiter != "transconductance":
        spans = "the output" if keys.limiter == "output" else "either transconductance or output"
        parts.append(f"amplitude limited by {spans} (circuit.limiter)")
    return ", ".join(parts)


def _transconductance(keys: CircuitKeys, frequency_mhz: float) -> str:
    stated = keys.transconductance_range_ms
    if stated is not None:
        return f"gm {ends_text(stated, 'mS')}" + (", nominal the geometric mean" if stated[0] != stated[2] else "")
    if keys.rating is None or keys.rating.kind is None:
        return "gm not known"
    forms = {
        "critical_transconductance_max_ms": "F gm_crit",
        "negative_resistance_ohm": "F |R| ω² (2 CL)²",
        "esr_max_ohm": "F 4 R ω² (CL + C0)²" if keys.rating.esr_means == "motional" else "F 4 R ω² CL²",
    }
    stated_value, load_pf = getattr(keys.rating, keys.rating.kind), keys.rating.load_pf
    row = list_row(stated_value, frequency_mhz, lossless_load_pf(keys)) if isinstance(stated_value, tuple) else None
    if row is not None:
        load_pf, stated_value = row[2:]
    value = "" if isinstance(stated_value, tuple) else f" {figure(stated_value)}"
    load = "" if load_pf is None else f" at CL {figure(load_pf)} pF"
    of_list = "" if row is None else f", the row for {figure(row[0])} to {figure(row[1])} MHz"
    factor = figure(keys.rating.factor_inside)
    rated = f"circuit.rating.{keys.rating.kind}{value}{load}{of_list}"
    return f"from the IC's rating, {forms[keys.rating.kind]} with F {factor} ({rated})"


@dataclass(frozen=True)
class Subject:
    """One part in its circuit, with the numbers that the sentences quote."""

    offer: Offer
    bench: Bench
    words: BenchWords
    ends: Mapping[str, Ends]
    lacking: Mapping[str, tuple[str, ...]]
    c1: str
    c0: str
    r1_and_gm: Callable[[], tuple[float, float]] = lambda: (math.nan, math.nan)
    """R1 (ohm) that the ESR comes to by the bench's rules, and the transconductance (mS) that the IC's rating stands
    for at this part's C0; worked out only where a sentence needs them."""
    budget: str = ""

    @property
    def circuit(self) -> CircuitKeys:
        return self.words.circuit

    @property
    def capacitors(self) -> str:
        return self.words.capacitors

    @property
    def frequency(self) -> str:
        return f"f {self.offer.frequency_mhz:.10g} MHz"

    @property
    def gm(self) -> str:
        words = self.words.transconductance
        return f"gm {figure(self.r1_and_gm()[1])} mS {words}" if words.startswith("from") else words

    @cached_property
    def esr(self) -> str:
        text = reading_text("esr_ohm", self.offer.at[0].esr)
        if self.bench.crystal.esr_means == "at load":
            no_load = "R1 is the ESR itself, the safe side, for no rated load is stated"
            rule = "R1 = ESR/(1 + C0/CL rated)²" if self.offer.load.stated else no_load
            text += f', read as RL: {rule} (crystal.esr_means "at load")'
        if self.bench.crystal.series_resistor_rule == "add to ESR":
            added = figure(self.circuit.series_resistor_ohm)
            text += f", plus the series resistor {added} Ω as ESR (crystal.series_resistor_rule)"
        altered = self.bench.crystal.esr_means == "at load" or self.bench.crystal.series_resistor_rule == "add to ESR"
        return f"{text}: R1 {figure(self.r1_and_gm()[0])} Ω" if altered else text

    @cached_property
    def load(self) -> str:
        return reading_text("load_capacitance_pf", self.offer.load)

    def mid(self, key: str) -> str:
        return figure(self.ends[key][1])


def how(key: str, subject: Subject) -> str:
    """One line: formula, readings with their places, values put in; or why there is no such number."""
    lacking = subject.lacking[key]
    if lacking:
        return f"cannot be had: {', '.join(f'{name} not known' for name in lacking)}"
    line = HOW[key](subject)
    if all(math.isnan(end) for end in subject.ends[key]):
        return f"there is none: {NONE.get(key, 'the circuit cannot oscillate with this crystal')}; {line}"
    if any(math.isnan(end) for end in subject.ends[key]):
        return f"{line}; one end without bound: {OPEN.get(key, 'some corner cannot oscillate')}"
    return line


OPEN = {
    "startup_ms": "some corner does not start",
    "greatest_esr_ohm": "some corner drives no R1 at all",
    "allowed_esr_ohm": "some corner drives no R1 at all",
    "greatest_transconductance_ms": "nothing bounds it, or some corner cannot oscillate",
    "parallel_resonance_mhz": "C0 may be as good as none",
}
NONE = {
    "startup_ms": "it does not start",
    "greatest_esr_ohm": "no R1 would be low enough",
    "allowed_esr_ohm": "no R1 would be low enough",
    "greatest_transconductance_ms": "nothing bounds it, or the circuit cannot oscillate with this crystal",
}


def _inductance(s: Subject) -> str:
    stated = s.offer.at[0].motional.get("motional_inductance_mh")
    if stated is not None:
        return f"as stated: {reading_text('motional_inductance_mh', stated)}"
    if not s.offer.load.stated:
        return f"L1 = 1/(ω² C1), fs taken as the nominal frequency, for no rated load is stated; {s.c1}"
    return f"L1 = (1 + C1/(C0 + CL))/(ω² C1); {s.frequency}, {s.c1}, {s.c0}, {s.load}"


def _quality(s: Subject) -> str:
    stated = s.offer.at[0].motional.get("quality_factor")
    if stated is not None:
        return f"as stated: {reading_text('quality_factor', stated)}"
    if not s.offer.at[0].esr.stated:
        return f"Q estimated, for no ESR is stated: {estimate_quality_factor().basis}"
    return f"Q = 1/(ωs C1 R1); fs {s.ends['series_resonance_mhz'][1]:.9g} MHz, {s.c1}, {s.esr}"


def _series(s: Subject) -> str:
    if s.offer.series:
        return f"fs = f: a series-resonant part, {s.frequency}"
    return f"fs = f/√(1 + C1/(C0 + CL)); {s.frequency}, {s.c1}, {s.c0}, {s.load}"


def _circuit_load(s: Subject) -> str:
    return (
        f"CL = -1/(ω Im Z) of the circuit at its critical transconductance, C0 not in; {s.esr}, {s.c0}; {s.capacitors}"
    )


def _load_error(s: Subject) -> str:
    against = "fs (series-resonant part)" if s.offer.series else s.load
    return (
        "(f - f rated)/f rated, f = fs √(1 + C1/(C0 + CL)); "
        f"circuit's CL {s.mid('circuit_load_pf')} pF against {against}; {s.c1}, {s.c0}"
    )


def _drive(s: Subject) -> str:
    keys = s.circuit
    probe = f", {figure(keys.probe_pf)} pF of probe counted there" if keys.probe_pf else ""
    return (
        f"P = I² R1, I = ω Cin V (1 + (C0 + Cx)/Cs) with the circuit's losses counted; V {figure(keys.swing_v)} V "
        f"{keys.swing_as} at the {keys.swing_at} end{probe}; {s.esr}, {s.c0}; {s.capacitors}"
    )


def _margin(s: Subject) -> str:
    rn, rl = s.mid("negative_resistance_ohm"), s.mid("load_resonance_resistance_ohm")
    against = rn.removeprefix("-") if rn.startswith("-") else f"-{rn}"
    return f"-Rn/RL = {against}/{rl}; {s.gm}, {s.esr}, {s.c0}; {s.capacitors}"


def _gain_ratio(s: Subject) -> str:
    critical = s.ends["critical_transconductance_ms"][1]
    least = "which there is none of" if math.isnan(critical) else f"critical {figure(critical)} mS"
    return f"gm/critical gm, {least}; {s.gm}, {s.esr}"


HOW: dict[str, Callable[[Subject], str]] = {
    "motional_capacitance_ff": lambda s: f"{s.c1}; {s.frequency}, {s.c0}, {s.load}, {s.esr}" if " = " in s.c1 else s.c1,
    "motional_inductance_mh": _inductance,
    "quality_factor": _quality,
    "series_resonance_mhz": _series,
    "parallel_resonance_mhz": lambda s: (
        f"fp = fs √(1 + C1/C0); fs {s.ends['series_resonance_mhz'][1]:.9g} MHz, {s.c1}, {s.c0}"
    ),
    "circuit_load_pf": _circuit_load,
    "load_resonance_resistance_ohm": lambda s: (
        f"RL = R1 (1 + C0/CL)²; {s.esr}, {s.c0}, CL {s.mid('circuit_load_pf')} pF"
    ),
    "negative_resistance_ohm": lambda s: f"Re Z of the active circuit, C0 not in; {s.gm}; {s.capacitors}",
    "margin": _margin,
    "gain_ratio": _gain_ratio,
    "resistance_headroom": lambda s: f"-Re Z/R1, C0 taken into the circuit; {s.gm}, {s.esr}, {s.c0}; {s.capacitors}",
    "greatest_esr_ohm": lambda s: (
        f"R1 at which R1 + Re Z = 0, C0 taken into the circuit; {s.gm}, {s.c0}; {s.capacitors}"
    ),
    "allowed_esr_ohm": lambda s: (
        f"greatest ESR/margin = {s.mid('greatest_esr_ohm')}/{figure(s.bench.requirement.margin)} "
        f"({s.bench.requirement.margin_source})"
    ),
    "critical_transconductance_ms": lambda s: (
        f"least gm with Re Z + R1 = 0 and Im Z + X1 = 0, C0 in; {s.esr}, {s.c0}; {s.capacitors}"
    ),
    "greatest_transconductance_ms": lambda s: (
        f"greatest gm with Re Z + R1 = 0 and Im Z + X1 = 0, C0 in; {s.esr}, {s.c0}; {s.capacitors}"
    ),
    "load_error_ppm": _load_error,
    "trim_ppm_per_pf": lambda s: (
        f"df/(f dCL) = -C1/(2 (C0 + CL)²), R1 counted besides; {s.c1}, {s.c0}, "
        f"circuit's CL {s.mid('circuit_load_pf')} pF"
    ),
    "drive_level_uw": _drive,
    "startup_ms": lambda s: (
        f"ln(10⁵)/σ, σ ≈ (-Re Z - R1)/(2 L1), C0 in; {s.gm}, {s.esr}, {s.c0}, {s.c1}; {s.capacitors}"
    ),
    "total_ppm": lambda s: s.budget,
}


def joined(words: Iterable[str]) -> str:
    """`a`, `a and b`, `a, b and c`."""
    listed = list(words)
    return " and ".join(filter(None, [", ".join(listed[:-1]), *listed[-1:]]))
