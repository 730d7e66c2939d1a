"""Rank, review and extract as text for a terminal: 100 columns at most, marks beside words, sources beside numbers."""

from __future__ import annotations

import unicodedata
from collections.abc import Iterable, Iterator, Mapping, Sequence
from typing import Any

from compare.cautions import CAUTIONS
from compare.explain import FIELD_WORDS, SYMBOLS, figure
from extract.fields import field_of
from extract.model import FIELD_NAMES, Part, Reading, SpecSheet, When

WIDTH = 100
MOST_ROWS = 60
MOST_NOTES = 100
VERDICT_ORDER = ("meets", "cannot tell", "falls short")
MARKS: dict[str | None, str] = {"meets": "▲", "falls short": "▼", "cannot tell": "◇", None: "·"}
NAMES = {
    "margin": "margin",
    "gain_ratio": "gain ratio",
    "resistance_headroom": "R1 headroom",
    "total_ppm": "ppm, all causes",
    "drive_level_uw": "drive level",
    "startup_ms": "start-up",
    "operating_temperature_c": "temperature range",
    "mode": "mode",
    "esr_ohm": "least ESR",
    "rating": "IC's rating",
    "circuit.output_resistance_kohm": "series resistor",
}
NUMBERS = {
    "motional_capacitance_ff": "C1, fF",
    "motional_inductance_mh": "L1, mH",
    "quality_factor": "Q",
    "series_resonance_mhz": "fs, MHz",
    "parallel_resonance_mhz": "fp, MHz",
    "circuit_load_pf": "circuit's load, pF",
    "load_resonance_resistance_ohm": "RL, Ω",
    "negative_resistance_ohm": "negative resistance, Ω",
    "margin": "margin",
    "gain_ratio": "gain ratio",
    "resistance_headroom": "R1 headroom",
    "greatest_esr_ohm": "greatest ESR, Ω",
    "allowed_esr_ohm": "allowed ESR, Ω",
    "critical_transconductance_ms": "critical gm, mS",
    "greatest_transconductance_ms": "greatest gm, mS",
    "load_error_ppm": "load error, ppm",
    "trim_ppm_per_pf": "trim, ppm/pF",
    "drive_level_uw": "drive level, µW",
    "startup_ms": "start-up, ms",
    "total_ppm": "all causes, ppm",
    "measured_load_pf": "measured load, pF",
    "measured_stray_pf": "measured stray, pF",
    "measured_motional_capacitance_ff": "measured C1, fF",
    "measured_negative_resistance_ohm": "measured Rn, Ω",
    "measured_margin": "measured margin",
    "measured_startup_ms": "measured start-up, ms",
}


def display_width(text: str) -> int:
    """Columns that the text takes in a terminal: two for a wide character, none for a combining one."""
    if text.isascii():
        return len(text)
    wide = sum(unicodedata.east_asian_width(c) in "WF" for c in text)
    return len(text) + wide - sum(unicodedata.combining(c) != 0 for c in text)


def fitted(text: str, width: int) -> str:
    """The text in exactly `width` columns, cut with … where it is longer."""
    if display_width(text) > width:
        while display_width(text) > width - 1:
            text = text[:-1]
        text += "…"
    return text + " " * (width - display_width(text))


def wrapped(text: str, first: str = "", rest: str | None = None) -> list[str]:
    """Lines of at most WIDTH columns; the first begins with `first`, the others with `rest`."""
    rest = " " * display_width(first) if rest is None else rest
    lines, line = [], first
    for word in text.split():
        for piece in _pieces(word, WIDTH - display_width(rest)):
            gap = "" if line in (first, rest) else " "
            if display_width(line) + len(gap) + display_width(piece) > WIDTH and line not in (first, rest):
                lines.append(line.rstrip())
                line, gap = rest, ""
            line += gap + piece
    return [*lines, line.rstrip()]


def _pieces(word: str, width: int) -> Iterator[str]:
    """A word that no line would hold, in pieces that one does."""
    while display_width(word) > width:
        end = len(word)
        while display_width(word[:end]) > width:
            end -= 1
        yield word[:end]
        word = word[end:]
    yield word


def times(slack: float | None) -> str:
    return "not known" if slack is None else f"{figure(slack, 3)} times"


def rank_text(result: Mapping[str, Any]) -> str:
    """The ranking as text: a table, then the reason for each place, notes and cautions."""
    rows: Sequence[Mapping[str, Any]] = result["rows"]
    counts = result.get("counts") or {words: sum(row["verdict"] == words for row in rows) for words in MARKS if words}
    lines = [_rank_heading(counts), ""]
    if rows:
        widths = (5, 13, 26, 20, 32)
        lines.append(_row(("place", "verdict", "part", "maker", "tightest requirement"), widths))
        lines += [_rank_line(row, widths) for row in rows]
        if sum(counts.values()) > len(rows):
            lines.append(f"... and {sum(counts.values()) - len(rows)} more; --all shows and --json gives all of them")
        lines += ["", "Why", *(line for row in rows for line in _why(row))]
    return _with_end(lines, result["notes"], bool(rows))


def _rank_heading(counts: Mapping[str, int]) -> str:
    total = sum(counts.values())
    if not total:
        return "No part offers the frequency asked."
    said = ", ".join(f"{MARKS[words]} {counts[words]} {words}" for words in VERDICT_ORDER if counts.get(words))
    return f"{total} part{'s offer' if total != 1 else ' offers'} the frequency: {said}"


def _row(cells: Iterable[str], widths: Sequence[int]) -> str:
    return " ".join(fitted(cell, width) for cell, width in zip(cells, widths, strict=True)).rstrip()


def _rank_line(row: Mapping[str, Any], widths: Sequence[int]) -> str:
    tightest = row["tightest"]
    told = f"{NAMES.get(tightest, tightest)} {times(row['slack'][tightest])}" if tightest else "none known"
    verdict = f"{MARKS[row['verdict']]} {row['verdict']}"
    return _row((f"{row['place']:>4}", verdict, _part_name(row), row["maker"] or "-", told), widths)


def _part_name(row: Mapping[str, Any]) -> str:
    return str(row["part_number"] or row["file"])


def _why(row: Mapping[str, Any]) -> list[str]:
    """The part with its file, then what decides its place: what is not met, what cannot be told, else the tightest."""
    about = ", ".join(filter(None, (row["maker"], row["package"], row["mode"], row["file"])))
    lines = wrapped(f"{MARKS[row['verdict']]} {_part_name(row)} ({about})", f"{row['place']:>4} ", "       ")
    decisive = [r for r in row["reasons"] if r["verdict"] == row["verdict"] and row["verdict"] != "meets"]
    if not decisive:
        decisive = [r for r in row["reasons"] if r["about"] == row["tightest"]]
    for reason in _grouped(decisive):
        lines += _reason(reason, "       ")
    lines += _tightest_how(row, decisive)
    lines += _chosen(row, "       ")
    for remark in row["remarks"]:
        lines += wrapped(f"taken so: {remark['message']}", "       ", "         ")
    if row["to_check"]:
        lines += wrapped(f"look at first: {', '.join(map(_field, row['to_check']))}", "       ")
    return lines


def _tightest_how(row: Mapping[str, Any], told: Sequence[Mapping[str, Any]]) -> list[str]:
    """How the tightest number was reached, where it is told of; what its sentence holds already is not said twice."""
    about = row["tightest"]
    message = next((reason["message"] for reason in told if reason["about"] == about), None)
    if message is None or about not in NUMBERS or about not in row:
        return []
    how = [part for part in row[about]["how"].split("; ") if part not in message]
    return wrapped("; ".join(how), "         from: ", "           ") if how else []


def _grouped(reasons: Sequence[Mapping[str, Any]]) -> list[dict[str, Any]]:
    """Reasons with the same words told once, for all that they are about."""
    told: dict[str, dict[str, Any]] = {}
    for reason in reasons:
        name = NAMES.get(reason["about"], reason["about"])
        if reason["message"] in told:
            told[reason["message"]]["about"] += f", {name}"
        else:
            told[reason["message"]] = {**reason, "about": name}
    return list(told.values())


def _reason(reason: Mapping[str, Any], indent: str) -> list[str]:
    name = NAMES.get(reason["about"], reason["about"])
    return wrapped(f"{name}: {reason['message']}", f"{indent}{MARKS[reason['verdict']]} ", f"{indent}  ")


def _chosen(row: Mapping[str, Any], indent: str) -> list[str]:
    if not row["chosen"]:
        return []
    said = ", ".join(f"{_field(key)} {_value(value)}" for key, value in row["chosen"].items())
    return wrapped(f"holds for a part ordered with: {said}", indent, f"{indent}  ")


def _value(value: Any) -> str:
    if isinstance(value, list | tuple):
        return " to ".join(figure(end) for end in value)
    return figure(value) if isinstance(value, int | float) else str(value)


def _field(name: str) -> str:
    """The trade's words for a field, a requirement, or a bench key (which stays as it is written in the file)."""
    if name in FIELD_WORDS:
        return FIELD_WORDS[name]
    return field_of(name).title if name in FIELD_NAMES else name.removeprefix("circuit.")


def review_text(result: Mapping[str, Any]) -> str:
    """Each review as text: verdict, requirements, every number with its source, what is open, notes and cautions."""
    reviews: Sequence[Mapping[str, Any]] = result["reviews"]
    lines = [] if reviews else ["No part offers the frequency asked."]
    for review in reviews:
        lines += [*_review_lines(review), ""]
    return _with_end(lines, result["notes"], bool(reviews))


def _review_lines(review: Mapping[str, Any]) -> Iterator[str]:
    about = ", ".join(filter(None, (review["maker"], review["package"], review["mode"], review["file"])))
    yield from wrapped(f"{_part_name(review)} ({about})")
    yield f"{MARKS[review['verdict']]} {review['verdict']}"
    yield from _chosen(review, "  ")
    for reason in review["reasons"]:
        yield from _reason(reason, "  ")
    yield ""
    yield _row(("", "number", "low", "mid", "high", "basis"), (1, 24, 13, 13, 13, 10))
    for key, name in NUMBERS.items():
        if key in review:
            yield from _number_lines(name, review[key])
    for title, sentences in _open_points(review):
        yield ""
        yield title
        for sentence in sentences:
            yield from wrapped(sentence, "  - ")


def _number_lines(name: str, number: Mapping[str, Any]) -> Iterator[str]:
    digits = 9 if name.endswith("MHz") else 4
    ends = [figure(number[end], digits) for end in ("low", "mid", "high")]
    yield _row(("", name, *ends, number["basis"]), (1, 24, 13, 13, 13, 10))
    yield from wrapped(number["how"], "      ", "        ")


def _open_points(review: Mapping[str, Any]) -> Iterator[tuple[str, list[str]]]:
    points = {
        "How the sheet was taken": [one["message"] for one in review["remarks"]],
        "Look at these readings first": [_field(name) for name in review["to_check"]],
        "Ask": list(review["questions"]),
        "Measured": [review["measured_message"]] if "measured_message" in review else [],
        "What the worst case hangs on": [
            f"{NAMES.get(key, key)}: "
            + "; ".join(one["message"].replace(one["input"], _field(one["input"]), 1) for one in listed[:4])
            for key, listed in review.get("contributors", {}).items()
            if listed
        ],
        "What would help": [
            *map(_advice, review.get("advice", ())),
            *review.get("advice_messages", ()),
            *(one["message"] for one in review.get("cures", ())),
            *([review["gain_window"]] if "gain_window" in review else []),
        ],
        "Likely spread beside the worst case": list(_spread(review["spread"])) if "spread" in review else [],
    }
    yield from ((title, sentences) for title, sentences in points.items() if sentences)


def _spread(spread: Mapping[str, Any]) -> Iterator[str]:
    """The spread's ends, the share of boards that fall short where boards were drawn, and what it takes for granted."""
    for key, number in spread["numbers"].items():
        if key in NUMBERS and number["mid"] is not None:
            digits = 9 if NUMBERS[key].endswith("MHz") else 4
            low, mid, high = (figure(number[end], digits) for end in ("low", "mid", "high"))
            yield f"{NUMBERS[key]}: {low} to {high}, about {mid}"
    for key, share in spread.get("falls_short", {}).items():
        ends = f"{figure(100 * share['low'], 2)} to {figure(100 * share['high'], 2)} % of all boards"
        yield f"{NAMES.get(key, key)}: {share['boards']} of {spread['boards']} boards fall short; 95 % sure: {ends}"
    yield from spread["assumptions"]


def _advice(one: Mapping[str, Any]) -> str:
    if one["what"] == "load capacitors":
        first, second = one["values_pf"]
        return (
            f"load capacitors {figure(first)} pF at the input and {figure(second)} pF at the output: load error "
            f"{figure(one['load_error_ppm'], 3)} ppm and margin {figure(one['margin'], 3)} in the worst case"
        )
    return (
        f"series resistor {figure(one['series_resistor_ohm'])} Ω: drive level {figure(one['drive_level_uw'], 3)} µW "
        f"and margin {figure(one['margin'], 3)} in the worst case"
    )


def _with_end(lines: list[str], notes: Sequence[Any], cautions: bool) -> str:
    said = [note["message"] if isinstance(note, Mapping) else str(note) for note in notes]
    if said:
        lines += ["", "Notes"]
        lines += [line for note in said[:MOST_NOTES] for line in wrapped(note, "  - ")]
        if len(said) > MOST_NOTES:
            lines.append(f"  ... and {len(said) - MOST_NOTES} more; --json gives all of them")
    if cautions:
        lines += ["", "Cautions"]
        lines += [line for caution in CAUTIONS for line in wrapped(caution, "  - ")]
    return "\n".join(lines).strip("\n")


def extract_text(sheets: Sequence[SpecSheet]) -> str:
    """What the sheets say: each reading with its bounds, where it holds, where it stands and how it was had."""
    lines: list[str] = []
    for sheet in sheets:
        scan = ", a scan" if sheet.scan else ""
        count = f"{len(sheet.parts)} part{'' if len(sheet.parts) == 1 else 's'}"
        lines += wrapped(f"{sheet.file} ({sheet.kind}{scan}): {count}")
        for note in sheet.notes:
            where = f" ({note.where})" if note.where is not None else ""
            lines += wrapped(f"{note.level}: {note.message}{where}", "  ")
        for part in sheet.parts:
            lines += _part_lines(part)
        lines.append("")
    return "\n".join(lines).strip("\n")


def _part_lines(part: Part) -> Iterator[str]:
    resonance = "series resonance" if part.resonance == "series" else None
    about = ", ".join(filter(None, (part.maker, part.package, part.mode, part.cut, resonance)))
    yield ""
    yield from wrapped(f"{part.part_number or 'series without a part number'}" + (f" ({about})" if about else ""), "  ")
    widths = (29, 9, 9, 9, 11, 29)
    yield "  " + _row(("reading", "min", "typ", "max", "unit", "where"), widths)
    for reading in part.readings:
        yield from _reading_lines(reading, widths)


def _reading_lines(reading: Reading, widths: Sequence[int]) -> Iterator[str]:
    unit = SYMBOLS.get(reading.field, ("", ""))[1] or field_of(reading.field).unit
    bounds = [figure(value, 8) if value is not None else "" for value in (reading.min, reading.typ, reading.max)]
    how = "" if reading.status == "stated" else f"{reading.status}, "
    yield "  " + _row((_field(reading.field), *bounds, unit, f"{how}{reading.where}"), widths)
    extra = []
    if reading.options:
        extra.append(f"options {', '.join(figure(value) for value in reading.options)}")
    if holds := when_text(reading.when):
        extra.append(holds)
    if reading.bare:
        extra.append("no bound stated")
    if extra:
        yield from wrapped("; ".join(extra), "      ")
    if reading.check:
        yield from wrapped(f"look: {reading.check}", "      ")


def when_text(when: When) -> str:
    """Where a reading holds, in words; empty where it holds everywhere."""
    bands = {"MHz": when.frequency_mhz, "pF": when.load_capacitance_pf, "°C": when.temperature_c}
    said = [
        f"at {figure(band[0], 8)} {unit}"
        if band[0] == band[1]
        else f"{figure(band[0], 8)} to {figure(band[1], 8)} {unit}"
        for unit, band in bands.items()
        if band is not None
    ]
    said += [word for word in (when.mode, when.package) if word]
    if when.years is not None:
        said.append(f"after {figure(when.years)} year{'' if when.years == 1 else 's'}")
    return ", ".join(said)
