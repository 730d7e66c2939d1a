"""What Choose and Review show: headings, the ranked rows, a part's reasons and numbers, from the results' JSON shape.

Everything here takes the dictionaries of `ranking.rank` and `review.review` (the data contract's sections 4 and 5).
"""

from __future__ import annotations

import math
import re
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Any

import pandas as pd

from compare.bench import Bench
from compare.charts import LoadPull, Slack
from compare.circuit_text import ppm_limit_text, ppm_limits
from compare.desk import field_key, field_of
from compare.drawing import as_address, slack_strip_svg
from compare.figures import (
    CLOCK_BELOW_MHZ,
    SECONDS_A_DAY_PER_PPM,
    count_word,
    frequency_text,
    number,
    ordinal,
    scale,
    signed,
    spread,
    with_minus,
    with_unit,
)
from compare.palette import Palette
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
STRIPS = tuple(name for name in SHORT_NAMES if name in FIGURES)
MARGINS = ("margin", "gain_ratio", "resistance_headroom")


BENCH_KEY = re.compile(r"\b(?:requirement|circuit|crystal|measured)\.[a-z_]+(?:\[\d+\])?(?:\.[a-z_]+)*")


def told(message: str) -> str:
    """A message as the page shows it: bench keys by the names of their fields, and a true minus."""
    return with_minus(BENCH_KEY.sub(lambda found: _quoted(found[0]), message))


def _quoted(key: str) -> str:
    named = field_key(key)
    return f"“{field_of(named).label}”" if named else key


def verdict(words: str | None) -> str:
    """`▲ meets`: the mark and the word, never one alone."""
    return f"{MARKS.get(words or '', '◇')} {words or 'cannot tell'}"


def choose_heading(result: Mapping[str, Any], bench: Bench) -> str:
    """The answer in a sentence."""
    rows = result["rows"]
    if not rows:
        return f"None of the parts read offers {frequency_text(bench.requirement.frequency_mhz)}"
    good, count = sum(row["verdict"] == "meets" for row in rows), len(rows)
    if count == 1:
        return f"The one part that offers it: {verdict(rows[0]['verdict'])}"
    if good == count:
        return f"All {count_word(count)} meet what is asked"
    said = f"{count_word(good, begins=True)} of {count_word(count)} meet{'s' if good <= 1 else ''} what is asked"
    return said if good else f"{said}. {_nearest(rows)}"


def _nearest(rows: Sequence[Row]) -> str:
    nearest = rows[0]
    least = tightest_text(nearest)
    return f"Nearest: {row_name(nearest)}" + (f", {least}" if least else "")


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


def review_for(row: Row, reviews: Sequence[Row]) -> Row | None:
    """The review of a ranked row: of parts without a number, or twice in a file, the one with the row's own figures."""
    return next((one for one in reviews if _is_same(one, row)), None)


def _is_same(one: Row, other: Row) -> bool:
    if any(one[key] != other[key] for key in ("file", "part_number", "package", "mode", "verdict")):
        return False
    # Worked out alone or among others, a figure may differ in its last bit.
    slacks = [(one["slack"].get(key), other["slack"].get(key)) for key in {*one["slack"], *other["slack"]}]
    return all(a == b or (a is not None and b is not None and math.isclose(a, b, rel_tol=1e-9)) for a, b in slacks)


def sheets_of(row: Row, sheets: Sequence[SpecSheet]) -> list[SpecSheet]:
    """The row's sheet with the row's part alone, so that one part is worked out and not a whole catalogue."""
    return [
        sheet.model_copy(
            update={"parts": tuple(part for part in sheet.parts if part.part_number == row["part_number"])}
        )
        for sheet in sheets
        if sheet.file == row["file"]
    ]


def shown_of(count: int, shown: int) -> str:
    """A sentence where not every row is shown; "" where all are."""
    return f"The first {shown} of {count} are shown; the saved tables hold all of them." if count > shown else ""


def tightest_text(row: Row) -> str:
    """What decides the place: `ppm in all 1.10 times`, `Range` where a yes or no decides, `ESR not stated`; else ""."""
    name = row["tightest"]
    if row["verdict"] == "cannot tell" and row["missing"]:
        key = row["missing"][0]
        return f"{missing_name(key)} not {'stated' if key in FIELD_NAMES else 'known'}"
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


def strips_legend(rows: Sequence[Row]) -> str:
    """What the thin strips are, from the top."""
    names = ", ".join(SHORT_NAMES[name] for name in asked_strips(rows))
    return f"Strips from the top: {names}. Heavy: the tightest. Hatched side: not met. Dotted: not known."


def rank_frame(rows: Sequence[Row], palette: Palette) -> pd.DataFrame:
    """The ranked rows as shown; the strips are pictures, and the words beside them say the same."""
    strips = asked_strips(rows)
    table = [
        (
            row["place"],
            row_name(row),
            verdict(row["verdict"]),
            f"☞ {len(row['to_check'])}" if row["to_check"] else "",
            as_address(slack_strip_svg({SHORT_NAMES[name]: row["slack"].get(name) for name in strips}, palette)),
            tightest_text(row),
            row["maker"] or "",
            row["package"] or "",
        )
        for row in rows
    ]
    columns = ["Place", "Part", "Verdict", "Look", "Times over: 1 is the line", "Tightest", "Maker", "Package"]
    return pd.DataFrame(table, columns=columns)


def place_heading(row: Row) -> str:
    """`1st: MRB25-260-08H, Merrowby`."""
    maker = f", {row['maker']}" if row["maker"] else ""
    return f"{ordinal(row['place'])}: {row_name(row)}{maker}"


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
        Slack(SHORT_NAMES[name], review["slack"][name], _nominal(review, name, bench), _said(review, name, bench))
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


def _said(review: Row, name: str, bench: Bench) -> str:
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


@dataclass(frozen=True)
class Judged:
    """One requirement of a review, as shown: worst case against what was asked, times over, verdict, and why."""

    requirement: str
    worst: str
    times_over: str
    verdict: str
    why: str

    @property
    def meets(self) -> bool:
        return self.verdict == verdict("meets")


def judged(review: Row, bench: Bench) -> list[Judged]:
    """Verdict by requirement, one row for each reason."""
    rows = []
    for reason in review["reasons"]:
        about, has_slack = reason["about"], reason["about"] in review["slack"] and reason["about"] in FIGURES
        said = _said(review, about, bench) if has_slack else ""
        over = times(review["slack"][about]) if has_slack else ""
        rows.append(
            Judged(FULL_NAMES.get(about, about), said, over, verdict(reason["verdict"]), told(reason["message"]))
        )
    return rows


def review_heading(review: Row) -> str:
    """`▲ MRB25-260-08H meets what is asked`, `, as read so far` while a reading of it waits for a look."""
    name = row_name(review)
    words = {
        "meets": f"{name} meets what is asked",
        "falls short": f"{name} falls short",
        "cannot tell": f"{name}: cannot tell",
    }[review["verdict"]]
    return f"{MARKS[review['verdict']]} {words}" + (", as read so far" if review["to_check"] else "")


def short_of(review: Row) -> str:
    """What it falls short in or cannot be told of, in one sentence; "" where it meets."""
    about = [
        FULL_NAMES.get(reason["about"], reason["about"])
        for reason in review["reasons"]
        if reason["verdict"] == review["verdict"]
    ]
    if review["verdict"] == "meets":
        least = tightest_text(review)
        return f"Tightest: {least}." if least else ""
    return f"{'Short' if review['verdict'] == 'falls short' else 'Open'}: {'; '.join(dict.fromkeys(about))}."


@dataclass(frozen=True)
class Number:
    """One number of a review, ready to be shown: its three values, how we have it and how it was reached."""

    name: str
    low: str
    mid: str
    high: str
    unit: str
    basis: str
    how: str


def numbers(review: Row, bench: Bench) -> list[Number]:
    """Every number that the review has, in the order of FIGURES; of a clock the error in seconds a day as well."""
    shown = [_number(review[key], figure) for key, figure in FIGURES.items() if key in review]
    if bench.requirement.frequency_mhz < CLOCK_BELOW_MHZ and "total_ppm" in review:
        total = review["total_ppm"]
        daily = {end: None if total[end] is None else total[end] * SECONDS_A_DAY_PER_PPM for end in ENDS}
        how = f"frequency error in ppm times {SECONDS_A_DAY_PER_PPM} s a day"
        day = {**daily, "how": how, "basis": total["basis"]}
        named = Figure("The same for a clock", "s a day", sign=True)
        shown.insert(1 + [one.name for one in shown].index(FIGURES["total_ppm"].name), _number(day, named))
    return shown


def _number(figure: Row, shown: Figure) -> Number:
    factor, unit = scale(shown.unit, *(figure[end] for end in ENDS))

    def end(name: str) -> str:
        if figure[name] is None:
            return "—"
        value = figure[name] * factor
        return signed(value, shown.digits) if shown.sign else number(value, shown.digits)

    basis = figure["basis"] or ""
    said = "∴ estimated" if basis == "estimated" else basis
    return Number(shown.name, end("low"), end("mid"), end("high"), unit, said, told(figure["how"] or ""))


def load_pull(review: Row, bench: Bench, rated_pf: float | None, *, series: bool) -> LoadPull | None:
    """What the chart of ppm against load needs, where C1, C0 and the loads are known; None otherwise.

    C0 comes back from fs and fp, whose distance it sets in the equivalent circuit without losses: C1/C0 = (fp/fs)² - 1.
    """
    c1, load, shift, total = (
        review[key] for key in ("motional_capacitance_ff", "circuit_load_pf", "load_error_ppm", "total_ppm")
    )
    fs, fp = review["series_resonance_mhz"]["mid"], review["parallel_resonance_mhz"]["mid"]
    needed = (c1["mid"], load["low"], load["mid"], load["high"], fs, fp)
    if any(value is None for value in needed) or not fp > fs or (rated_pf is None and not series):
        return None
    c0_pf = c1["mid"] * 1e-3 / ((fp / fs) ** 2 - 1)
    room_low, room_high = _room(total, shift, bench)
    return LoadPull(
        motional_capacitance_ff=c1["mid"],
        shunt_capacitance_pf=c0_pf,
        rated_pf=None if series else rated_pf,
        low_pf=load["low"],
        mid_pf=load["mid"],
        high_pf=load["high"],
        room_low_ppm=room_low,
        room_high_ppm=room_high,
    )


def _room(total: Row, shift: Row, bench: Bench) -> tuple[float | None, float | None]:
    """What the other causes leave of the limits for the load, low and high."""
    limits = ppm_limits(bench)
    if limits is None or bench.requirement.trim_step_ppm is not None:
        return None, None
    rooms = [
        limit - (total[end] - shift[end]) if total[end] is not None and shift[end] is not None else None
        for limit, end in zip(limits, ("low", "high"), strict=True)
    ]
    return rooms[0], rooms[1]


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


def note_lines(result: Mapping[str, Any]) -> list[str]:
    """What else there is to say: parts that do not offer the frequency, and the like."""
    return [told(note["message"] if isinstance(note, Mapping) else str(note)) for note in result["notes"]]


CONTRIBUTORS = {
    "total_ppm": "What uses the ppm up",
    "margin": "What the margin hangs on",
    "drive_level_uw": "What the drive hangs on",
}


@dataclass(frozen=True)
class Share:
    """What one input adds to a worst case, and how large that is beside the greatest (0 to 1)."""

    name: str
    adds: str
    share: float


def shares(review: Row, key: str, most: int = 6) -> list[Share]:
    """What adds to the worst case of one number, greatest first, without those below a fiftieth of the greatest."""
    rows = review.get("contributors", {}).get(key) or ()
    greatest = max((abs(row["adds"]) for row in rows), default=0.0)
    unit = FIGURES[key].unit
    return [
        Share(_input_name(row["input"]), with_unit(number(abs(row["adds"])), unit), abs(row["adds"]) / greatest)
        for row in rows[:most]
        if greatest and abs(row["adds"]) >= greatest / 50
    ]


def _input_name(key: str) -> str:
    if key in FIELD_NAMES or "." in key:
        return missing_name(key)
    named = key.replace("condition ", "corner: ")
    return named[:1].upper() + named[1:]


def _sentence(message: str) -> str:
    text = told(message).rstrip(".")
    return f"{text[:1].upper()}{text[1:]}."


def question_lines(review: Row) -> list[str]:
    """What to ask, as ready sentences."""
    return [told(question) for question in review["questions"]]


def open_lines(review: Row) -> list[str]:
    """What is not settled: readings that wait for a look, and what is missing."""
    remarks = [_sentence(remark["message"]) for remark in review.get("remarks", ())]
    if "measured_message" in review:
        remarks.append(_sentence(review["measured_message"]))
    looks = [f"☞ {NAMES.get(name, name)}: the reading waits for a look on Sheets." for name in review["to_check"]]
    return remarks + looks + [f"◇ {missing_name(key)}: not known." for key in review["missing"]]
