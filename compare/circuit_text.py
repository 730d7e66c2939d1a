"""The bench in words: the line of terms, what the circuit presents and of what, and the figures of its drawing."""

from __future__ import annotations

from dataclasses import dataclass

from compare.bench import Bench, CircuitKeys, uses
from compare.desk import field_key, field_of
from compare.drawing import CircuitFigures, Mark
from compare.figures import (
    CLOCK_BELOW_MHZ,
    SECONDS_A_DAY_PER_PPM,
    exact,
    frequency_text,
    number,
    scale,
    spread,
    with_unit,
)

SET_IT = "Give the frequency, and what you know of the circuit, at the right; or open a bench file."
READ_IT = "Each capacitance carries the two nodes it lies between. 0 is ground. Press a figure to change it."


def terms(bench: Bench) -> list[str]:
    """The line of terms: what is asked, the circuit's load and its gm, each a short text with the figures in bold."""
    asked = bench.requirement
    said = [f"Asked at **{frequency_text(asked.frequency_mhz)}**"]
    if limit := ppm_limit_text(bench):
        day = f" ({day})" if (day := seconds_a_day_text(bench)) else ""
        said.append(f"**{limit}**{day} in all, {number(asked.years)} years")
    if asked.temperature_c is not None:
        said.append(f"**{temperatures(asked.temperature_c)}**")
    source = "by default" if asked.margin_source == "default" else asked.margin_source
    said.append(f"margin **{number(asked.margin)}** ({source})")
    if asked.startup_ms is not None:
        said.append(f"start-up within **{number(asked.startup_ms)} ms**")
    total = circuit_sum(bench)
    if total is not None:
        said.append(f"load **{total.mid:.2f} pF** ({total.low:.2f}…{total.high:.2f})")
    if (gm := gm_over_all(bench)) is not None:
        said.append(f"gm **{gm_text(*gm)}**")
    return said


def temperatures(ends: tuple[float, float]) -> str:
    """`−30…+60 °C`."""
    low, high = (f"+{exact(end)}" if end > 0 else exact(end) for end in ends)
    return f"{low}…{high} °C"


def ppm_limits(bench: Bench) -> tuple[float, float] | None:
    """Lower and upper limit on the frequency error in ppm, the tighter of total_ppm and the use on each side."""
    low, high = float("-inf"), float("inf")
    if bench.requirement.total_ppm is not None:
        low, high = -bench.requirement.total_ppm, bench.requirement.total_ppm
    if bench.requirement.use is not None:
        use = uses()[bench.requirement.use]
        low = low if use.low_ppm is None else max(low, use.low_ppm)
        high = high if use.high_ppm is None else min(high, use.high_ppm)
    return None if high == float("inf") and low == float("-inf") else (low, high)


def ppm_limit_text(bench: Bench) -> str:
    """`±50 ppm`; "" where no limit is set."""
    limits = ppm_limits(bench)
    return "" if limits is None else spread(*limits, "ppm")


def seconds_a_day_text(bench: Bench) -> str:
    """`±4.32 s a day`: the limit as a clock's error, for parts under 1 MHz; else ""."""
    limits = ppm_limits(bench)
    if limits is None or bench.requirement.frequency_mhz >= CLOCK_BELOW_MHZ:
        return ""
    low, high = limits
    return spread(low * SECONDS_A_DAY_PER_PPM, high * SECONDS_A_DAY_PER_PPM, "s a day")


def gm_over_all(bench: Bench) -> tuple[float, float] | None:
    """Least and greatest transconductance over the circuit and its conditions, in mS."""
    ranges = [setting.circuit.transconductance_range_ms for setting in bench.settings]
    known = [ends for ends in ranges if ends is not None]
    return (min(ends[0] for ends in known), max(ends[2] for ends in known)) if known else None


def gm_text(least_ms: float, most_ms: float) -> str:
    """`3.6…9 mS`, `10.5…11.5 µS`."""
    factor, unit = scale("mS", least_ms, most_ms)
    return spread(least_ms * factor, most_ms * factor, unit)


@dataclass(frozen=True)
class LoadSum:
    """What the capacitances come to at the crystal, in pF: A to ground, B to ground, across, and together."""

    input_pf: float
    output_pf: float
    across_pf: float
    low: float
    mid: float
    high: float


def circuit_sum(bench: Bench) -> LoadSum | None:
    """The capacitances of [circuit] together, losses left out; None where a fitted one is not known."""
    circuit = bench.settings[0].circuit
    if circuit.input_capacitor_pf is None or circuit.output_capacitor_pf is None:
        return None
    sums = [_at_the_crystal(circuit, side) for side in (-1, 0, 1)]
    together = [a * b / (a + b) + across for a, b, across in sums]
    return LoadSum(*sums[1], *together)


def _at_the_crystal(circuit: CircuitKeys, side: int) -> tuple[float, float, float]:
    """A–0, B–0 and A–B with every tolerance at its low (-1), nominal (0) or high (1) end."""

    def moved(value: float, percent: float) -> float:
        return value * (1 + side * percent / 100)

    def stray(key: str) -> float:
        return moved(getattr(circuit, key), circuit.stray_tolerance(key))

    inside = moved(circuit.internal_at_each_pin_pf, circuit.internal_tolerance_percent)
    fitted = [
        moved(value or 0.0, circuit.capacitor_tolerance_percent)
        for value in (circuit.input_capacitor_pf, circuit.output_capacitor_pf)
    ]
    # With a series resistor what lies at the amplifier's output is parted from the crystal's end by it.
    at_output = 0.0 if circuit.series_resistor_ohm else inside + circuit.amplifier_output_pf
    return (
        fitted[0] + stray("input_stray_pf") + inside,
        fitted[1] + stray("output_stray_pf") + at_output,
        stray("across_stray_pf"),
    )


APART_PF = 0.05
"""More than this between the sum and the steady load, and the heading carries the steady one."""


def circuit_heading(bench: Bench | None, steady_pf: float | None = None) -> str:
    """The Circuit view's answer in a sentence.

    `steady_pf` is the load that the circuit presents with its resistors in the steady state, with some part in it.
    """
    if bench is None:
        return "The circuit is not set yet"
    total = circuit_sum(bench)
    if total is None:
        return "The load is not known yet"
    return f"The circuit presents {_presented(total, steady_pf):.2f} pF"


def _presented(total: LoadSum, steady_pf: float | None) -> float:
    return total.mid if steady_pf is None or abs(steady_pf - total.mid) <= APART_PF else steady_pf


def sum_sentence(bench: Bench, steady_pf: float | None = None) -> str:
    """The sum in words, with what is not in it, and by how much the losses shift it."""
    total = circuit_sum(bench)
    circuit = bench.settings[0].circuit
    if total is None:
        ends = (("A", circuit.input_capacitor_pf), ("B", circuit.output_capacitor_pf))
        lacking = " and ".join(f"{node}–0" for node, value in ends if value is None)
        return f"Fitted {lacking}: not known, so the load cannot be told."
    series = total.mid - total.across_pf
    said = (
        f"**A–0** {total.input_pf:.2f} pF in series with **B–0** {total.output_pf:.2f} pF is {series:.2f} pF; "
        f"beside it **A–B** {total.across_pf:.2f} pF. Together **{total.mid:.2f} pF**, with all tolerances "
        f"**{total.low:.2f}…{total.high:.2f} pF**."
    )
    ahead = circuit.amplifier_output_pf + circuit.internal_at_each_pin_pf
    if circuit.series_resistor_ohm and ahead:
        said += f" {number(ahead)} pF at O lie ahead of the series resistor and are not in this sum."
    return f"{said} {_shifted(total, steady_pf)}"


def _shifted(total: LoadSum, steady_pf: float | None) -> str:
    if steady_pf is None:
        return "Losses shift it a little: Review gives each part the load with them."
    by = steady_pf - total.mid
    if abs(by) <= APART_PF:
        return f"With its losses the circuit presents {steady_pf:.2f} pF in the steady state."
    return (
        f"In the steady state it is {steady_pf:.2f} pF, {abs(by):.2f} pF {'less' if by < 0 else 'more'}: the resistors "
        "and the crystal’s own R1 turn the phase, and oscillation settles where the whole loop is in phase."
    )


def sum_text(bench: Bench, steady_pf: float | None = None) -> str:
    """The same as plain text."""
    return sum_sentence(bench, steady_pf).replace("**", "")


def taken_sentences(bench: Bench) -> list[str]:
    """What was taken by default or is not known, one sentence each, by the fields' names on the page."""
    said = [_by_label(sentence) for sentence in bench.taken]
    circuit = bench.circuit
    wanted = {
        "circuit.transconductance_ms.low": circuit.transconductance_ms is None
        and (circuit.rating is None or circuit.rating.kind is None),
        "circuit.input_capacitor_pf": circuit.input_capacitor_pf is None,
        "circuit.output_capacitor_pf": circuit.output_capacitor_pf is None,
        "circuit.swing_v": all(setting.circuit.swing_v is None for setting in bench.settings),
    }
    lacking = [field_of(key).label for key, is_lacking in wanted.items() if is_lacking]
    if lacking:
        said.append(f"Not known: {'; '.join(lacking)}. What needs it reads “cannot tell”.")
    return said


def _by_label(sentence: str) -> str:
    place, _, rest = sentence.partition(": ")
    key = field_key(place)
    return f"{field_of(key).label}: {rest}." if key else f"{sentence}."


def blank_figures() -> CircuitFigures:
    """The drawing before anything is given: each name in its place, each figure still to be known."""

    def unknown(key: str) -> Mark:
        return Mark("not known", "unknown", f"circuit.{key}")

    return CircuitFigures(
        crystal="crystal",
        transconductance=unknown("transconductance_ms.low"),
        feedback=unknown("feedback_resistor_kohm"),
        across_stray=unknown("across_stray_pf"),
        input_fitted=unknown("input_capacitor_pf"),
        input_stray=unknown("input_stray_pf"),
        input_inside=unknown("internal_pf"),
        output_fitted=unknown("output_capacitor_pf"),
        output_stray=unknown("output_stray_pf"),
        output_inside=unknown("internal_pf"),
    )


def circuit_figures(bench: Bench) -> CircuitFigures:
    """What the drawing shows for [circuit], each figure with the key of the field that sets it."""
    circuit = bench.settings[0].circuit
    frequency = bench.requirement.frequency_mhz
    gm = circuit.transconductance_range_ms
    inside = circuit.internal_at_each_pin_pf
    inside_mark = _mark(inside, "pF", "circuit.internal_pf", given=True)

    def given(key: str, unit: str = "pF") -> Mark:
        return _mark(getattr(circuit, key), unit, f"circuit.{key}", given=key in circuit.given)

    feedback = circuit.feedback_kohm(frequency)
    series = given("series_resistor_ohm", "Ω") if circuit.series_resistor_ohm else None
    return CircuitFigures(
        crystal=f"crystal, {frequency_text(frequency)}",
        transconductance=Mark("not known", "unknown", "circuit.transconductance_ms.low")
        if gm is None
        else Mark(gm_text(gm[0], gm[2]), "given", "circuit.transconductance_ms.low"),
        feedback=_mark(
            feedback, "kΩ", "circuit.feedback_resistor_kohm", given=circuit.feedback_resistor_kohm is not None
        ),
        across_stray=given("across_stray_pf"),
        input_fitted=given("input_capacitor_pf"),
        input_stray=given("input_stray_pf"),
        input_inside=inside_mark,
        output_fitted=given("output_capacitor_pf"),
        output_stray=given("output_stray_pf"),
        output_inside=inside_mark,
        series_resistor=series,
        output_pin=given("amplifier_output_pf") if circuit.series_resistor_ohm or circuit.amplifier_output_pf else None,
    )


def _mark(value: float | None, unit: str, key: str, *, given: bool) -> Mark:
    if value is None:
        return Mark("not known", "unknown", key)
    if value == 0:
        return Mark("none", "none", key)
    text = with_unit(number(value, 4), unit)
    return Mark(text if given else f"{text}, taken", "given" if given else "taken", key)
