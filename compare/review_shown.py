"""What Review shows: the heading, verdict by requirement, every number with how it was reached, and what is open."""

from __future__ import annotations

from dataclasses import dataclass

from compare.answers import (
    ENDS,
    FIGURES,
    FULL_NAMES,
    Figure,
    Row,
    missing_name,
    times,
    told,
    verdict,
    worst_said,
)
from compare.bench import Bench
from compare.figures import CLOCK_BELOW_MHZ, SECONDS_A_DAY_PER_PPM, number, scale, signed, with_unit
from compare.shown import NAMES
from extract.model import FIELD_NAMES


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
        said = worst_said(review, about, bench) if has_slack else ""
        over = times(review["slack"][about]) if has_slack else ""
        rows.append(
            Judged(FULL_NAMES.get(about, about), said, over, verdict(reason["verdict"]), told(reason["message"]))
        )
    return rows


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


def keyed_numbers(review: Row, bench: Bench) -> list[tuple[str, Number]]:
    """Every number that the review has with its key, in the order of FIGURES; of a clock also `seconds_per_day`."""
    shown = [(key, _number(review[key], figure)) for key, figure in FIGURES.items() if key in review]
    if bench.requirement.frequency_mhz < CLOCK_BELOW_MHZ and "total_ppm" in review:
        total = review["total_ppm"]
        daily = {end: None if total[end] is None else total[end] * SECONDS_A_DAY_PER_PPM for end in ENDS}
        how = f"frequency error in ppm times {SECONDS_A_DAY_PER_PPM} s a day"
        day = {**daily, "how": how, "basis": total["basis"]}
        named = Figure("The same for a clock", "s a day", sign=True)
        shown.insert(1 + [key for key, _ in shown].index("total_ppm"), ("seconds_per_day", _number(day, named)))
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


def open_lines(review: Row) -> list[str]:
    """What is not settled: readings that wait for a look, and what is missing."""
    remarks = [_sentence(remark["message"]) for remark in review.get("remarks", ())]
    if "measured_message" in review:
        remarks.append(_sentence(review["measured_message"]))
    looks = [f"☞ {NAMES.get(name, name)}: the reading waits for a look on Sheets." for name in review["to_check"]]
    return remarks + looks + [f"◇ {missing_name(key)}: not known." for key in review["missing"]]
