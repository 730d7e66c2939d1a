"""The verdict in seven lines: what is asked, the worst case against it, where that falls, and how many times over.

All seven always stand there; what the bench does not ask says so. What else was judged (mode, least ESR, the IC's
rating) follows after them.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Any

from compare.answers import FIGURES, FULL_NAMES, MARGINS, MARKS, missing_name, row_name, times, told, verdict
from compare.bench import Bench
from compare.circuit_text import ppm_limit_text, temperatures
from compare.dossier import Dossier
from compare.figures import CLOCK_BELOW_MHZ, SECONDS_A_DAY_PER_PPM, count_word, number, scale, signed, with_unit
from compare.working import Working, working

SEVEN = (
    "resistance_headroom",
    "margin",
    "gain_ratio",
    "total_ppm",
    "drive_level_uw",
    "startup_ms",
    "operating_temperature_c",
)
NOT_ASKED = "· not asked"


@dataclass(frozen=True)
class VerdictLine:
    """One requirement as text, with how its number was reached (None for what is no number) and the reason in full."""

    key: str
    requirement: str
    worst: str
    asked: str
    falls: str
    times_over: str
    verdict: str
    why: str
    working: Working | None

    @property
    def is_asked(self) -> bool:
        return self.verdict != NOT_ASKED


def verdict_lines(dossier: Dossier) -> list[VerdictLine]:
    """The seven, and what else was judged."""
    reasons: dict[str, Mapping[str, Any]] = {}
    for reason in dossier.review["reasons"]:
        reasons.setdefault(reason["about"], reason)
    others = [about for about in reasons if about not in SEVEN]
    return [_line(dossier, key, reasons.get(key)) for key in (*SEVEN, *others)]


def _line(dossier: Dossier, key: str, reason: Mapping[str, Any] | None) -> VerdictLine:
    review, bench = dossier.review, dossier.bench
    slack = review["slack"].get(key)
    if key == "operating_temperature_c":
        over = "" if reason is None else "yes" if reason["verdict"] == "meets" else "no"
    else:
        over = times(slack) if key in review["slack"] and key in FIGURES else ""
    said = NOT_ASKED if reason is None else _verdict(reason["verdict"])
    return VerdictLine(
        key=key,
        requirement=_named(key, bench),
        worst=worst_text(dossier, key),
        asked="" if reason is None else asked_text(dossier, key),
        falls=_falls(dossier, key),
        times_over=over.removesuffix(" times"),
        verdict=said,
        why="" if reason is None else told(reason["message"]),
        working=working(dossier, key) if key in FIGURES and key in review else None,
    )


def _verdict(words: str | None) -> str:
    return verdict(words) if words else "· to know"


def _named(key: str, bench: Bench) -> str:
    name = FULL_NAMES.get(key, key)
    return f"{name}, {number(bench.requirement.years)} years" if key == "total_ppm" else name


def worst_text(dossier: Dossier, key: str) -> str:
    """The worst value as it stands in the line: `9.06`, `−33.8…+34.6 ppm`, `58.7 µW`."""
    if key == "operating_temperature_c":
        span = dossier.offer.operating_range.span
        return temperatures((span.low, span.high)) if span.known else "not stated"
    if key not in FIGURES or key not in dossier.review:
        return ""
    low, high = (dossier.review[key][end] for end in ("low", "high"))
    if key in MARGINS:
        return "not known" if dossier.review[key]["mid"] is None else number(low) if low is not None else "0"
    if key == "total_ppm":
        return _both_ends(low, high, dossier.bench)
    if high is None:
        return "does not start" if dossier.review["slack"].get(key) == 0 else "not known"
    factor, unit = scale(FIGURES[key].unit, high)
    return with_unit(number(high * factor), unit)


def _both_ends(low: float | None, high: float | None, bench: Bench) -> str:
    if low is None or high is None:
        return "not known"
    said = f"{signed(low)}…{signed(high)} ppm"
    if bench.requirement.frequency_mhz >= CLOCK_BELOW_MHZ:
        return said
    daily = [signed(end * SECONDS_A_DAY_PER_PPM) for end in (low, high)]
    return f"{said}, {daily[0]}…{daily[1]} s a day"


def asked_text(dossier: Dossier, key: str) -> str:
    """What is asked in the same line: `at least 5`, `within ±50 ppm`, `at most 100 µW`, `covers −30…+60 °C`."""
    asked = dossier.bench.requirement
    if key in MARGINS:
        return f"at least {number(asked.margin)}"
    if key == "total_ppm":
        return f"within {ppm_limit_text(dossier.bench)}"
    if key == "drive_level_uw":
        drive = dossier.offer.drive
        if not drive.stated:
            return "rated drive not stated"
        return f"at most {_amount(drive.span.mid / asked.drive_headroom, 'µW')}"
    if key == "startup_ms":
        return f"within {_amount(asked.startup_ms or 0.0, 'ms')}"
    return f"covers {temperatures(asked.temperature_c)}" if asked.temperature_c is not None and key in SEVEN else ""


def _amount(value: float, unit: str) -> str:
    factor, named = scale(unit, value)
    return with_unit(number(value * factor), named)


def _falls(dossier: Dossier, key: str) -> str:
    """Where the worst value falls."""
    if key == "total_ppm":
        review, limits = dossier.review[key], dossier.bench.requirement.limits_ppm
        if review["low"] is None or "load_error_ppm, low" not in dossier.corners:
            return ""
        low_side = (
            -review["low"] > review["high"]
            if limits is None
            else review["low"] / limits[0] > review["high"] / limits[1]
        )
        corner = dossier.corners[f"load_error_ppm, {'low' if low_side else 'high'}"]
        end = "low" if low_side else "high"
        return f"make, drift and ageing {end}; {corner.words}"
    corner_of = dossier.corners.get(key)
    return corner_of.words if corner_of is not None else ""


def heading(review: Mapping[str, Any], lines: Sequence[VerdictLine]) -> str:
    """`▲ MRB25-260-08H meets all seven`, `, as read so far` while a reading of it waits for a look."""
    name, asked = row_name(review), [line for line in lines if line.is_asked and line.key in SEVEN]
    short, every = sum(line.verdict == verdict("falls short") for line in lines), sum(line.is_asked for line in lines)
    words = {
        "meets": f"{name} meets {'all ' if len(asked) > 1 else 'the '}{count_word(len(asked))}"
        + ("" if len(asked) == len(SEVEN) else " that are asked"),
        "falls short": f"{name} falls short in {count_word(short)} of {count_word(every)}",
        "cannot tell": f"{name}: cannot tell",
    }[review["verdict"]]
    return f"{MARKS[review['verdict']]} {words}" + (", as read so far" if review["to_check"] else "")


def sentences(dossier: Dossier, lines: Sequence[VerdictLine]) -> list[str]:
    """Under the heading: what is tightest or short, what would overturn it, how many values rest on a person."""
    review = dossier.review
    said = [_tightest(review, lines)]
    said.append(dossier.overturning)
    said += _missing(review)
    readings = [reading for taken in dossier.offer.taken().values() for reading in taken.readings]
    entered = sum(reading.status == "entered" for reading in readings)
    looks = len(review["to_check"])
    if entered:
        said.append(
            f"{count_word(entered, begins=True)} {'value was' if entered == 1 else 'values were'} entered by hand."
        )
    if looks:
        said.append(f"{count_word(looks, begins=True)} {'waits' if looks == 1 else 'wait'} to be looked at.")
    return [one for one in said if one]


def _tightest(review: Mapping[str, Any], lines: Sequence[VerdictLine]) -> str:
    short = [line.requirement for line in lines if line.verdict == verdict("falls short")]
    if short:
        return f"Short: {'; '.join(short)}."
    name = review["tightest"]
    if name is None:
        return ""
    return f"Tightest: {FULL_NAMES.get(name, name)}, {times(review['slack'][name])} over."


def _missing(review: Mapping[str, Any]) -> list[str]:
    if review["verdict"] != "cannot tell" or not review["missing"]:
        return []
    return [f"Not known: {', '.join(missing_name(key) for key in review['missing'])}."]
