"""Substitutes and changes as text for a terminal: the verdict and what decides it first, then line by line."""

from __future__ import annotations

import itertools
from collections.abc import Iterable, Iterator, Mapping, Sequence
from typing import Any

from compare.cautions import CAUTIONS
from compare.explain import FIELD_WORDS, figure
from compare.relations import rules
from compare.report import display_width, fitted, when_text, wrapped
from compare.swap_lines import moved_words, ppm_words
from extract.model import When

MARKS = {"drop-in": "▲", "fits with changes": "△", "cannot tell": "◇", "does not fit": "▼"}
CIRCUIT_MARKS = {"meets": "▲", "cannot tell": "◇", "falls short": "▼", None: "·"}
MOST_DETAILED, MOST_LISTED, MOST_NEAR, MOST_NOTES = 8, 40, 12, 40
NUMBERS = {
    "circuit_load_pf": "circuit's load, pF",
    "margin": "margin",
    "gain_ratio": "gain ratio",
    "resistance_headroom": "R1 headroom",
    "drive_level_uw": "drive level, µW",
    "startup_ms": "start-up, ms",
    "load_error_ppm": "load error, ppm",
    "total_ppm": "all causes, ppm",
}
LINES = {"package": "package", "pads": "pads", "resonance": "resonance", "aec_q200": "AEC-Q200"} | {
    "moisture_level": "moisture level",
    "reflow_peak_c": "reflow peak, °C",
    "lead_time": "lead time",
    "part_number": "part number",
}
A_FRACTION = -1e5
"""ppm; further down the part runs on another mode, and ppm say nothing to a person."""
WIDTHS = (24, 25, 25, 9, 8)


def substitute_text(result: Mapping[str, Any]) -> str:
    """Each candidate against the incumbent; of many the ranking, the near misses, and the first ones whole."""
    candidates: Sequence[Mapping[str, Any]] = result["candidates"]
    lines = [*wrapped(_about(result["incumbent"]), "Incumbent: ", "  "), *_incumbent_state(result["incumbent"]), ""]
    if not candidates:
        lines.append("No candidate: no crystal was found in the sheets named.")
    ranked = sorted(candidates, key=lambda one: one["place"])
    many = len(candidates) > MOST_DETAILED
    if many:
        lines += [*_ranking(ranked), "", *_near_misses(ranked)]
    for one in ranked[:3] if many else candidates:
        lines += [*_candidate_lines(one, result["incumbent"]), ""]
    return _with_end(lines, result["notes"])


def _about(part: Mapping[str, Any]) -> str:
    told = ", ".join(filter(None, (part["maker"], part["package"], part["mode"], part["file"])))
    return f"{part['part_number'] or part['file']} ({told})"


def _incumbent_state(incumbent: Mapping[str, Any]) -> list[str]:
    if "verdict" not in incumbent:
        return []
    return [f"  {CIRCUIT_MARKS[incumbent['verdict']]} {incumbent['verdict']} on this board"]


def _row(cells: Iterable[str], widths: Sequence[int], indent: str = "") -> str:
    """One row; a cell longer than its column goes on below, so that nothing is cut off."""
    pieces = [_broken(cell, width) for cell, width in zip(cells, widths, strict=True)]
    lines = itertools.zip_longest(*pieces, fillvalue="")
    return "\n".join(indent + " ".join(map(fitted, line, widths)).rstrip() for line in lines)


def _broken(text: str, width: int) -> list[str]:
    lines, line = [], ""
    for word in text.split():
        longer = f"{line} {word}".strip()
        if line and display_width(longer) > width:
            lines.append(line)
            longer = word
        while display_width(longer) > width:
            cut = next(n for n in range(len(longer), 0, -1) if display_width(longer[:n]) <= width)
            lines.append(longer[:cut])
            longer = longer[cut:]
        line = longer
    return [*lines, line]


def _ranking(ranked: Sequence[Mapping[str, Any]]) -> Iterator[str]:
    counts = {verdict: sum(one["verdict"] == verdict for one in ranked) for verdict in MARKS}
    said = ", ".join(f"{MARKS[verdict]} {count} {verdict}" for verdict, count in counts.items() if count)
    yield f"{len(ranked)} candidates: {said}"
    yield ""
    yield _row(("place", "verdict", "part", "what decides"), (5, 19, 24, 48))
    shown = [one for one in ranked if one["lacks"] != ["frequency_mhz"]][:MOST_LISTED]
    for one in shown:
        verdict = f"{MARKS[one['verdict']]} {one['verdict']}"
        yield _row((f"{one['place']:>4}", verdict, one["part_number"] or one["file"], one["decides"]), (5, 19, 24, 48))
    others = sum(one["lacks"] == ["frequency_mhz"] for one in ranked)
    more = len(ranked) - others - len(shown)
    if more:
        yield f"... and {more} more; --json gives all of them"
    if others:
        yield f"{others} of another frequency, or of none stated"


def _near_misses(ranked: Sequence[Mapping[str, Any]]) -> Iterator[str]:
    near = [
        one
        for one in ranked
        if one["verdict"] not in ("drop-in", "fits with changes")
        and len(one["lacks"]) == 1
        and one["lacks"] != ["frequency_mhz"]
    ]
    if not near:
        return
    # Another package is no near miss where others lack only a figure.
    near.sort(key=lambda one: one["lacks"] == ["package"])
    yield f"Near misses: {len(near)} {'lacks' if len(near) == 1 else 'lack'} one thing"
    for one in near[:MOST_NEAR]:
        yield from wrapped(f"{one['part_number'] or one['file']}: {one['decides']}", "  - ")
    yield ""


def _candidate_lines(one: Mapping[str, Any], incumbent: Mapping[str, Any]) -> Iterator[str]:
    yield from wrapped(_about(one))
    yield from wrapped(f"{one['verdict']}: {one['decides']}", f"{MARKS[one['verdict']]} ", "  ")
    yield from wrapped(_shift(one["shift_ppm"]), "  ", "    ")
    if one.get("to_check"):
        fields = ", ".join(_name(field) for field in one["to_check"])
        yield from wrapped(f"look at first, the reading is doubtful: {fields}", "  ", "    ")
    for finding in one["findings"]:
        if finding["message"] not in one["decides"]:
            yield from wrapped(finding["message"], "  - ")
    yield from _table(one)
    yield from _numbers(one, incumbent)
    yield from _asked(one)


def _shift(shift: Mapping[str, Any]) -> str:
    if shift["low"] is None:
        return f"frequency on the unchanged board: {shift['how']}"
    if shift["low"] == shift["high"] == 0:
        return "frequency on the unchanged board: does not move"
    if shift["low"] < A_FRACTION:
        return f"frequency on the unchanged board: {shift['how']}"
    estimated = ", from estimates" if shift["basis"] == "estimated" else ""
    moved = moved_words(shift["low"], shift["high"])
    return f"frequency on the unchanged board: {moved}, nominally {ppm_words(shift['mid'])}{estimated}"


def _table(one: Mapping[str, Any]) -> Iterator[str]:
    yield ""
    yield _row(("", "incumbent", "candidate", "is", "matters"), WIDTHS, "  ")
    for line in one["lines"]:
        cells = (_name(line["field"]), _value(line["incumbent"]), _value(line["candidate"]), line["relation"])
        yield _row((*cells, "yes" if line["matters"] else "-"), WIDTHS, "  ")


def _name(field: str) -> str:
    return LINES.get(field) or (rules()[field].name if field in rules() else FIELD_WORDS.get(field, field))


def _value(value: Any) -> str:
    if value is None:
        return "not stated"
    if isinstance(value, Mapping):
        text = str(value.get("text", ""))
        return text.rpartition(" (")[0] or text or "-"
    return {True: "yes", False: "no"}.get(value, str(value)) if isinstance(value, bool) else str(value)


def _numbers(one: Mapping[str, Any], incumbent: Mapping[str, Any]) -> Iterator[str]:
    """Both parts in the same circuit."""
    if "margin" not in one or "margin" not in incumbent:
        return
    yield ""
    yield _row(("in this circuit", "incumbent", "candidate"), WIDTHS[:3], "  ")
    for key, name in NUMBERS.items():
        yield _row((name, _ends(incumbent[key]), _ends(one[key])), WIDTHS[:3], "  ")


def _ends(number: Mapping[str, Any]) -> str:
    if number["mid"] is None:
        return "not known"
    low, high = (figure(number[end], 3) if number[end] is not None else "no bound" for end in ("low", "high"))
    return f"{low} to {high}"


def _asked(one: Mapping[str, Any]) -> Iterator[str]:
    letter = one["letter"]["sentences"] if one["letter"] else []
    titles = {"Ask the maker": one["questions"], "In the sheet's language": letter, "Find out": one["bench_questions"]}
    for title, sentences in titles.items():
        if sentences:
            yield ""
            yield f"  {title}"
            for sentence in sentences:
                yield from wrapped(sentence, "  - ")


def _with_end(lines: list[str], notes: Sequence[Mapping[str, Any]], *, cautions: bool = True) -> str:
    said = list(dict.fromkeys(note["message"] for note in notes))
    if said:
        lines += ["", "Notes", *(line for note in said[:MOST_NOTES] for line in wrapped(note, "  - "))]
        if len(said) > MOST_NOTES:
            lines.append(f"  ... and {len(said) - MOST_NOTES} more; --json gives all of them")
    if cautions:
        lines += ["", "Cautions", *(line for caution in CAUTIONS for line in wrapped(caution, "  - "))]
        lines += wrapped(SAMPLE, "  - ")
    return "\n".join(lines).strip("\n")


SAMPLE = "A substitute is proven on the board: resistor test, frequency and drive with parts of the maker in question."


def changes_text(result: Mapping[str, Any]) -> str:
    """Each difference with both places; those that matter are marked."""
    changed: Sequence[Mapping[str, Any]] = result["lines"]
    count = sum(line["matters"] for line in changed)
    lines = [f"{len(changed)} reading{'' if len(changed) == 1 else 's'} differ{'s' if len(changed) == 1 else ''}"]
    lines[0] += f", {count} that matter{'s' if count == 1 else ''}" if changed else ""
    for number in dict.fromkeys(line["part_number"] for line in changed):
        lines += ["", str(number or "part without a number")]
        for line in (one for one in changed if one["part_number"] == number):
            mark = "!" if line["matters"] else "·"
            lines += wrapped(line["message"], f"  {mark} ", "    ")
            if holds := when_text(When.model_validate(line["when"])):
                lines += wrapped(holds, "      ")
    if changed:
        lines += ["", "! matters   · does not matter on this bench"]
    return _with_end(lines, result["notes"], cautions=False)
