"""What Choose, Substitute and Review share: names of figures and requirements, a row's words, the slack chart's rows.

Everything here takes the dictionaries of `ranking.rank` and `review.review` (the data contract's sections 4 and 5).
"""

from __future__ import annotations

import re
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Any

from compare.bench import Bench, uses
from compare.charts import Slack
from compare.circuit_text import ppm_limit_text, ppm_limits
from compare.desk import field_key, field_of
from compare.figures import (
    number,
    signed,
    spread,
    with_minus,
    with_unit,
)
from compare.shown import NAMES, short_name
from extract.model import FIELD_NAMES, SpecSheet

Row = Mapping[str, Any]
ENDS = ("low", "mid", "high")
MARKS = {"meets": "▲", "falls short": "▼", "cannot tell": "◇"}


@dataclass(frozen=True)
class Figure:
    """How one number of a result is shown: its name, unit and significant digits; `sign` for shifts."""

    name: str
    unit: str = ""
    digits: int = 3
    sign: bool = False


FIGURES = {
    "margin": Figure("Margin"),
    "gain_ratio": Figure("Gain ratio"),
    "resistance_headroom": Figure("R1 headroom"),
    "total_ppm": Figure("Frequency error, all causes", "ppm", sign=True),
    "drive_level_uw": Figure("Drive level", "µW"),
    "startup_ms": Figure("Start-up time", "ms"),
    "circuit_load_pf": Figure("Load that the circuit presents", "pF", 4),
    "load_error_ppm": Figure("Load error", "ppm", sign=True),
    "trim_ppm_per_pf": Figure("Trim sensitivity", "ppm/pF"),
    "negative_resistance_ohm": Figure("Negative resistance", "Ω", 4),
    "load_resonance_resistance_ohm": Figure("Load-resonance resistance RL", "Ω"),
    "greatest_esr_ohm": Figure("Greatest ESR: just oscillates", "Ω"),
    "allowed_esr_ohm": Figure("Greatest ESR: with the margin asked", "Ω"),
    "critical_transconductance_ms": Figure("Critical transconductance", "mS"),
    "greatest_transconductance_ms": Figure("Greatest transconductance", "mS"),
    "series_resonance_mhz": Figure("Series resonance fs", "MHz", 9),
    "parallel_resonance_mhz": Figure("Parallel resonance fp", "MHz", 9),
    "motional_capacitance_ff": Figure("Motional capacitance C1", "fF"),
    "motional_inductance_mh": Figure("Motional inductance L1", "mH", 4),
    "quality_factor": Figure("Quality factor Q"),
    "measured_load_pf": Figure("Measured: load", "pF", 4),
    "measured_stray_pf": Figure("Measured: stray across the crystal", "pF"),
    "measured_motional_capacitance_ff": Figure("Measured: C1", "fF"),
    "measured_negative_resistance_ohm": Figure("Measured: negative resistance", "Ω", 4),
    "measured_margin": Figure("Measured: margin"),
    "measured_startup_ms": Figure("Measured: start-up time", "ms"),
}
# In the order of the strips; the last ones are yes or no, in words and never as strips.
SHORT_NAMES = {
    "margin": "Margin",
    "gain_ratio": "Gain",
    "resistance_headroom": "R1 headroom",
    "total_ppm": "ppm in all",
    "drive_level_uw": "Drive",
    "startup_ms": "Start-up",
    "operating_temperature_c": "Range",
    "mode": "Mode",
    "esr_ohm": "Least ESR",
    "rating": "IC’s rating",
    "circuit.output_resistance_kohm": "Series resistor",
}
FULL_NAMES = SHORT_NAMES | {
    "margin": "Margin as a bench test sees it",
    "gain_ratio": "How far the gain may fall",
    "resistance_headroom": "Starts and keeps going: R1 headroom",
    "total_ppm": "Frequency, all causes",
    "operating_temperature_c": "Temperature range",
}
# Where the whole name is wider than the column.
TIGHT_NAMES = {"frequency_stability_ppm": "Drift", "parabolic_coefficient_ppm_per_c2": "Parabola"}
STRIPS = tuple(name for name in SHORT_NAMES if name in FIGURES)
MARGINS = ("margin", "gain_ratio", "resistance_headroom")
BENCH_KEY = re.compile(r"\b(?:requirement|circuit|crystal|measured)\.[a-z_]+(?:\[\d+\])?(?:\.[a-z_]+)*")

USE_KEY = re.compile(r"\buse ([a-z][a-z0-9-]*)\b")


def told(message: str) -> str:
    """A message as the page shows it: keys of bench and uses by their names, and a true minus."""
    said = USE_KEY.sub(_use_named, message).replace("total_ppm ±", f"{SHORT_NAMES['total_ppm']} ±")
    return with_minus(BENCH_KEY.sub(lambda found: _quoted(found[0]), said))


def _use_named(found: re.Match[str]) -> str:
    use = uses().get(found[1])
    return found[0] if use is None else use.use.partition(" (")[0]


def _quoted(key: str) -> str:
    named = field_key(key)
    return f"“{field_of(named).label}”" if named else key


def verdict(words: str | None) -> str:
    """`▲ meets`: the mark and the word, never one alone."""
    return f"{MARKS.get(words or '', '◇')} {words or 'cannot tell'}"


def row_name(row: Row) -> str:
    """The part number, else the file's name."""
    return str(row["part_number"] or short_name(row["file"]))


Identity = tuple[str, str | None, int]


def identities(rows: Sequence[Row]) -> list[Identity]:
    """What each row is known by while the ranking changes: file, part number, and a count where both are the same."""
    counts: dict[tuple[str, str | None], int] = {}
    known: list[Identity] = []
    for row in rows:
        named = (row["file"], row["part_number"])
        counts[named] = counts.get(named, 0) + 1
        known.append((*named, counts[named]))
    return known


def part_numbers(sheet: SpecSheet) -> Sequence[str | None]:
    """Those of a list without making each of its parts."""
    numbers: Sequence[str | None] = getattr(sheet.parts, "part_numbers", None) or [
        part.part_number for part in sheet.parts
    ]
    return numbers


def tightest_text(row: Row) -> str:
    """What decides the place: `ppm in all 1.10 times`, `Range` where a yes or no decides, `ESR not stated`; else ""."""
    name = row["tightest"]
    if row["verdict"] == "cannot tell" and row["missing"]:
        key = row["missing"][0]
        name = TIGHT_NAMES.get(key) or missing_name(key)
        return f"{name} not {'stated' if key in FIELD_NAMES else 'known'}"
    slack = None if name is None else row["slack"][name]
    if row["verdict"] != "meets" and (slack is None or slack >= 1):
        decides = [reason["about"] for reason in row.get("reasons", ()) if reason["verdict"] == row["verdict"]]
        if decides:
            return SHORT_NAMES.get(decides[0], str(decides[0]))
    return "" if name is None else f"{SHORT_NAMES.get(name, name)} {times(slack)}"


def times(value: float | None) -> str:
    """`1.10 times`."""
    if value is None:
        return "not known"
    return "far over" if value >= 100 else f"{value:.2f} times" if value < 10 else f"{value:.0f} times"


def missing_name(key: str) -> str:
    """A field of the sheet, or a key of the bench, by the name a person knows."""
    if key in FIELD_NAMES:
        return NAMES[key]
    found = field_key(key)
    return field_of(found).label if found else key


def asked_strips(rows: Sequence[Row]) -> list[str]:
    """The requirements with a strip that any row has, in the order of the strips."""
    return [name for name in STRIPS if any(name in row["slack"] for row in rows)]


def chosen_text(row: Row) -> str:
    """How the part must be ordered for the verdict to hold; "" where there is no choice."""
    said = [f"{_small(NAMES.get(key, key))} {_option(key, value)}" for key, value in row["chosen"].items()]
    return f"Ordered with {', '.join(said)}." if said else ""


def _small(name: str) -> str:
    """A name inside a sentence: `rated load CL`, but `ESR` and `C0/C1` as they are."""
    return name if name[1:2].isupper() or name[1:2].isdigit() else name[:1].lower() + name[1:]


def _option(key: str, value: Any) -> str:
    if isinstance(value, list | tuple):
        return spread(value[0], value[1], "°C" if key.endswith("_c") else "")
    if isinstance(value, int | float):
        unit = {"_pf": "pF", "_ppm": "ppm"}.get(key[key.rfind("_") :], "")
        sign = "±" if key.endswith("_ppm") else ""
        return with_unit(sign + number(float(value), 4), unit)
    return str(value)


def slack_rows(review: Row, bench: Bench) -> list[Slack]:
    """The large slack chart's rows, in the order of the strips."""
    return [
        Slack(SHORT_NAMES[name], review["slack"][name], _nominal(review, name, bench), worst_said(review, name, bench))
        for name in STRIPS
        if name in review["slack"]
    ]


def _nominal(review: Row, name: str, bench: Bench) -> float | None:
    worst: float | None = review["slack"][name]
    figure = review[name]
    mid: float | None = figure["mid"]
    if worst is None or mid is None:
        return None
    if name == "total_ppm":
        low, high = ppm_limits(bench) or (float("-inf"), float("inf"))
        limit = high if mid > 0 else low
        return worst if mid == 0 else limit / mid
    if name in MARGINS:
        return mid / bench.requirement.margin
    bad: float | None = figure["high"]
    return worst if not bad or not mid else worst * bad / mid


def worst_said(review: Row, name: str, bench: Bench) -> str:
    figure, shown = review[name], FIGURES[name]
    if name in MARGINS:
        return (
            f"{number(figure['low'])}, needs {number(bench.requirement.margin)}"
            if figure["low"] is not None
            else "not known"
        )
    if name == "total_ppm":
        worse = _worse_end(figure, bench)
        return "not known" if worse is None else f"{signed(worse)}, limit {ppm_limit_text(bench).removesuffix(' ppm')}"
    if figure["high"] is None:
        return "does not start" if review["slack"][name] == 0 else "not known"
    if name == "startup_ms":
        asked = bench.requirement.startup_ms
        return (
            f"{number(figure['high'])} of {number(asked)} ms"
            if asked is not None
            else with_unit(number(figure["high"]), "ms")
        )
    slack = review["slack"][name]
    if slack is None or not 0 < slack < 999:
        return with_unit(number(figure["high"]), shown.unit)
    rated = slack * figure["high"] * bench.requirement.drive_headroom
    return f"{number(figure['high'])} of {number(rated)} {shown.unit}"


def _worse_end(figure: Row, bench: Bench) -> float | None:
    limits = ppm_limits(bench)
    ends: list[float] = [end for end in (figure["low"], figure["high"]) if end is not None]
    if not ends or limits is None:
        return None
    low, high = limits
    return max(ends, key=lambda end: end / high if end > 0 else end / low if end < 0 else 0.0)


def advice_lines(review: Row) -> list[str]:
    """What would help, best first: E24 pairs with what they do in the worst case, or a series resistor."""
    return [*map(_advice, review.get("advice", ())), *map(told, review.get("advice_messages", ()))]


def _advice(advice: Row) -> str:
    margin = number(advice["margin"])
    if "values_pf" in advice:
        first, second = (number(value) for value in advice["values_pf"])
        error = advice["load_error_ppm"]
        off = "not known" if error is None else with_unit(number(abs(error)), "ppm")
        return f"**{first} pF** from A and **{second} pF** from B to ground: load error at most {off}, margin {margin}."
    ohm, drive = number(advice["series_resistor_ohm"]), number(advice["drive_level_uw"])
    return f"A series resistor of **{ohm} Ω**: drive at most {drive} µW, margin {margin}."


def question_lines(review: Row) -> list[str]:
    """What to ask, as ready sentences."""
    return [told(question) for question in review["questions"]]
