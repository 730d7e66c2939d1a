"""What Substitute shows: the verdict in a sentence, the lines that differ with their levers, what to change and to ask.

Everything here takes the dictionaries of `substitution.substitute` (the data contract's section 6).
"""

from __future__ import annotations

import math
import re
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Any

from compare import supply
from compare.answers import ENDS, FIGURES, SHORT_NAMES, Row, missing_name, row_name, told, verdict
from compare.approval import MARKS
from compare.export import Table
from compare.figures import (
    CLOCK_BELOW_MHZ,
    SECONDS_A_DAY_PER_PPM,
    UP_TO,
    count_word,
    counted,
    exact,
    number,
    scale,
    signed,
    spread,
    with_minus,
    with_unit,
)
from compare.levers import Lever
from compare.relations import rules
from compare.report import NAMES as CALLED
from compare.shown import NAMES
from compare.substitute_text import A_FRACTION, LINES
from compare.swap_lines import MECHANICAL

SIGNS = {"same": "=", "tighter": "+", "looser": "−", "different": "≠", "unknown": "?"}
HEADS = {
    "drop-in": "Drop-in",
    "fits with changes": "Fits with changes",
    "does not fit": "Does not fit",
    "cannot tell": "Cannot tell",
}
ALONE = "What a line does here: with this reading alone put in place of the present part's."
LEVER_LEGEND = (
    "Each line put in place alone. Bar to the end of its line: all the room that the present part had. "
    "Past it: an arrow, and the requirement falls short. Dotted: not known."
)
CHECK_PADS = "Check the drawings against the board."
NOT_A_NO = "not a no: ask where the product needs it"
WITHOUT_BENCH = "the board presents the present part’s rated load"
ENDS_THAT_COUNT = {"low": ("high",), "high": ("low",), "inside": ("low", "high"), "outside": ("low", "high")}
IN_CIRCUIT = ("margin", "gain_ratio", "resistance_headroom", "total_ppm", "drive_level_uw", "startup_ms")
FIGURE = re.compile(r"\d+(?:\.\d+)?")
SPOKEN = {"mode": "mode", "pads": "pads", "package": "package", "resonance": "resonance", "frequency_mhz": "frequency"}
SHORTFALLS = {
    "package": "another package",
    "pads": "other crystal pads",
    "frequency_mhz": "another frequency",
    "operating_temperature_c": "narrower range",
    "resonance": "another kind of resonance",
    "shift_ppm": "the frequency moves too far",
}


def heading(one: Row) -> str:
    """`△ Fits with changes: one capacitor`, `▼ Does not fit: third overtone`, `◇ Cannot tell: ESR not stated`."""
    said = f"{MARKS[one['verdict']]} {HEADS[one['verdict']]}"
    if one["verdict"] == "fits with changes":
        return f"{said}: {changes_counted(one['changes'])}"
    if one["verdict"] == "does not fit":
        return f"{said}: {_shortfall(one)}"
    if one["verdict"] == "cannot tell":
        return f"{said}: {_open_thing(one)}"
    return said


def decided_by(one: Row) -> str:
    """What the deciding line is about, a field or a requirement; "" where nothing lacks."""
    for about in one["lacks"]:
        names = {about, CALLED.get(about, about), rules()[about].name if about in rules() else about, SPOKEN.get(about)}
        if any(name and one["decides"].startswith(f"{name}:") for name in names):
            return str(about)
    return str(one["lacks"][0]) if one["lacks"] else ""


def _shortfall(one: Row) -> str:
    about = decided_by(one)
    # An overtone is why, whatever requirement falls furthest.
    if about == "mode" or any(r["about"] == "mode" and r["verdict"] == "falls short" for r in one.get("reasons", ())):
        return str(one["mode"] or "another mode")
    return SHORTFALLS.get(about) or SHORT_NAMES.get(about) or _name(about)


def _open_thing(one: Row) -> str:
    about = decided_by(one)
    line = next((line for line in one["lines"] if line["field"] == about), None)
    if line is not None and line["candidate"] is None:
        return f"{SPOKEN.get(about) or _name(about)} not stated"
    if line is not None and about not in SHORT_NAMES:
        return f"{_name(about)} {line['relation']}"
    lacking = [key for key in one["missing"] if key not in MECHANICAL]
    if lacking:
        return f"{SPOKEN.get(lacking[0]) or missing_name(lacking[0])} not {'known' if '.' in lacking[0] else 'stated'}"
    return SHORT_NAMES.get(about) or _name(about)


def changes_counted(changes: Sequence[Row]) -> str:
    """`one capacitor`, `two capacitors`, `one capacitor and a series resistor`."""
    said = []
    for change in changes:
        if change["what"] == "load capacitors":
            count = sum(old != new for old, new in zip(change["from"], change["to"], strict=True))
            said.append(f"{count_word(count)} capacitor{'' if count == 1 else 's'}")
        else:
            said.append("a series resistor")
    return " and ".join(said)


def changes_text(changes: Sequence[Row]) -> str:
    """`from B to ground fit 13 pF instead of 12 pF`; the figures to fit stand between **."""
    said = []
    for change in changes:
        if change["what"] == "load capacitors":
            for node, old, new in zip("AB", change["from"], change["to"], strict=True):
                if old != new:
                    instead = "" if old is None else f" instead of {number(old)} pF"
                    said.append(f"from {node} to ground fit **{number(new)} pF**{instead}")
        else:
            said.append(f"in series with the amplifier’s output fit **{number(change['to'])} Ω**")
    return ", and ".join(said)


def below_heading(one: Row) -> list[str]:
    """What to change, what decides, and how far the frequency moves; figures between **."""
    said = []
    if one["changes"]:
        text = changes_text(one["changes"])
        built = one["decides"].partition("; as built: ")[2]
        said.append(f"{text[:1].upper()}{text[1:]}." + (f" As built: {spoken(built)}." if built else ""))
    else:
        said.append(sentence(one["decides"]))
    return [*said, shift_text(one["shift_ppm"])]


def spoken(message: str) -> str:
    """A message in the page's words: the incumbent is the present part there."""
    return told(message).replace("the incumbent", "the present part").replace("The incumbent", "The present part")


def sentence(message: str) -> str:
    text = spoken(message).rstrip(".")
    # A unit keeps its small letter.
    return f"{text if text.startswith('ppm') else text[:1].upper() + text[1:]}."


def shift_text(shift: Row) -> str:
    """By how much the board's frequency moves when nothing else is touched, low to high and nominally."""
    if shift["low"] is None:
        return f"By how much the frequency moves on the unchanged board {told(shift['how'])}."
    if shift["low"] == shift["high"] == 0:
        return "On the unchanged board the frequency does not move."
    if shift["low"] < A_FRACTION:
        return f"On the unchanged board: {told(shift['how'])}."
    ends = f"{signed(shift['low'])}{UP_TO}{signed(shift['high'])}"
    estimated = ", ∴ from estimates" if shift["basis"] == "estimated" else ""
    return f"On the unchanged board the frequency moves **{signed(shift['mid'])} ppm** ({ends}{estimated})."


def taken_text(result: Row) -> str:
    """What is taken where no circuit is given: the board presents the present part's rated load."""
    lines = result["candidates"][0]["lines"] if result["candidates"] else ()
    load = next(
        (_taken(line["incumbent"]).get("mid") for line in lines if line["field"] == "load_capacitance_pf"), None
    )
    said = "" if load is None else f", {number(load)} pF"
    return f"Taken: {WITHOUT_BENCH}{said}, and what is asked is no worse than the present part."


@dataclass(frozen=True)
class SwapLine:
    """One line of the comparison, ready to be shown.

    `bare_*`: the number that counts, without unit, for the clipboard; `place_*`: where each stands on its sheet.
    """

    field: str
    name: str
    unit: str
    incumbent: str
    candidate: str
    difference: str
    relation: str
    matters: bool
    does: str
    lever: Lever | None
    bare_incumbent: str = ""
    bare_candidate: str = ""
    place_incumbent: str = ""
    place_candidate: str = ""

    @property
    def sign(self) -> str:
        return SIGNS[self.relation]

    @property
    def harm(self) -> tuple[int, float]:
        """For the order: what breaks the swap first, then the share of room used, then what is open, then gains."""
        used = self.lever.used if self.lever is not None else 0.0
        if self.relation == "different" and self.matters and self.lever is None:
            return 0, 0.0
        if used > 0:
            return 1, -used
        if math.isnan(used) or (self.relation == "unknown" and self.matters):
            return 2, 0.0
        if self.matters and self.relation != "tighter":
            return 3, 0.0
        order = {"looser": 4, "different": 5, "unknown": 6, "tighter": 7}
        return order[self.relation], used


def swap_lines(one: Row, levers: Mapping[str, Lever]) -> Compared:
    """Every line of a candidate, in the three groups that it is shown in."""
    lines = [_swap_line(line, levers.get(line["field"])) for line in one["lines"]]
    silent = {line["field"] for line in one["lines"] if line["incumbent"] is line["candidate"] is None}
    silent -= {line.field for line in lines if line.matters or line.relation == "same"}
    differ = [line for line in lines if line.relation != "same" and line.field not in silent]
    return Compared(
        differ=sorted(differ, key=lambda line: line.harm),
        same=[line for line in lines if line.relation == "same"],
        silent=[line for line in lines if line.field in silent],
    )


def differing_fields(one: Row) -> list[str]:
    return [line["field"] for line in one["lines"] if line["relation"] != "same"]


def _swap_line(line: Row, lever: Lever | None) -> SwapLine:
    field, stated = line["field"], _unit(line["field"])
    values = line["incumbent"], line["candidate"]
    # Ohms of a tuning fork are kilohms, and its frequency kilohertz, in all cells of the line.
    factor, unit = scale(stated, *(end for value in values for end in _taken(value).values()))
    bare = [_bare(field, value, factor) for value in values]
    return SwapLine(
        field=field,
        name=_name(field),
        unit=unit,
        incumbent=_value(values[0], stated, factor),
        candidate=_value(values[1], stated, factor),
        difference=difference(field, *values, factor),
        relation=line["relation"],
        matters=line["matters"],
        does=_does(line, lever),
        lever=lever,
        bare_incumbent=bare[0],
        bare_candidate=bare[1],
        place_incumbent=_place(values[0]),
        place_candidate=_place(values[1]),
    )


def _does(line: Row, lever: Lever | None) -> str:
    if lever is not None and lever.says:
        return with_minus(lever.says)
    if line["relation"] == "same":
        return ""
    message = spoken(line["message"]).partition(": ")[2] or spoken(line["message"])
    if line["field"] in supply.columns():
        return ""
    if line["relation"] == "unknown" and not line["matters"]:
        return NOT_A_NO if line["candidate"] is None else ""
    if line["relation"] in ("tighter", "looser") or message == "not the same":
        # The relation's own column says so already.
        return "changes nothing that is asked" if lever is not None else ""
    # That a sheet does not state it stands in its cell; what to do about it is said behind the colon.
    return message.removeprefix("not the same; ").partition(": ")[2] or message.removeprefix("not the same; ")


def _name(field: str) -> str:
    if field in NAMES:
        return NAMES[field]
    name = "crystal pads, from the top" if field == "pads" else LINES.get(field, field).partition(",")[0]
    return name[:1].upper() + name[1:]


def _unit(field: str) -> str:
    return "°C" if field == "reflow_peak_c" else rules()[field].unit if field in rules() else ""


def _value(value: Any, unit: str, factor: float = 1.0) -> str:
    """A value without the unit that stands beside the line's name, and without its place."""
    if value is None:
        return "not stated"
    if isinstance(value, bool):
        return "yes" if value else "no"
    if isinstance(value, int | float):
        return number(float(value) * factor, 6)
    text = str(value)
    if isinstance(value, Mapping):
        text = str(value.get("text", ""))
        text = text.rpartition(" (")[0] if _place(value) else text
        if unit:
            text = text.replace(f" {unit}", "")
        if factor != 1:
            text = FIGURE.sub(lambda found: exact(float(found[0]) * factor), text)
        if value.get("min") is not None and value.get("max") is not None:
            text = text.replace(" to ", UP_TO)
    return with_minus(text) or "—"


def _place(value: Any) -> str:
    """Where a value stands: what its text has in brackets at the end."""
    if not isinstance(value, Mapping):
        return ""
    text = str(value.get("text", ""))
    last = text.rpartition(" (")[2].removesuffix(")") if text.endswith(")") else ""
    return last if last.startswith(("page", "sheet", "table", "line", "cell")) else ""


def _taken(value: Any) -> Mapping[str, float | None]:
    if isinstance(value, Mapping) and isinstance(value.get("taken"), Mapping):
        return dict(value["taken"])
    return {}


def _ends_that_count(field: str) -> tuple[str, ...]:
    better = rules()[field].better if field in rules() else ""
    return ENDS_THAT_COUNT.get(better, ("mid",))


def _bare(field: str, value: Any, factor: float = 1.0) -> str:
    """The number that counts, in full, with a point; both ends apart by … where two do."""
    ends = [_taken(value).get(end) for end in _ends_that_count(field)]
    known = [end * factor for end in ends if end is not None]
    if len(known) == 2 and known[0] == -known[1]:
        known = known[1:]
    return UP_TO.join(f"{end:.10g}" for end in known)


def difference(field: str, incumbent: Any, candidate: Any, factor: float = 1.0) -> str:
    """Candidate less present part, with its sign; of a ± band its half, of others both ends.

    `factor` is that from the field's unit to the one shown.
    """
    pairs = [(_taken(incumbent).get(end), _taken(candidate).get(end)) for end in _ends_that_count(field)]
    steps = [new - old for old, new in pairs if old is not None and new is not None]
    if len(steps) != len(pairs) or not steps:
        return ""
    steps = [0.0 if abs(step) < 1e-9 else step for step in steps]
    if not any(steps):
        return "0"
    steps = [step * factor for step in steps]
    if len(steps) == 2 and not math.isclose(steps[0], -steps[1], rel_tol=1e-9) and steps[0] != steps[1]:
        return f"{signed(steps[0])} / {signed(steps[1])}"
    old = pairs[-1][0]
    counts = len(steps) == 1 and old and _ends_that_count(field) != ("mid",)
    return signed(steps[-1]) + (f" ({signed(100 * steps[-1] / (old * factor), 2)} %)" if counts and old else "")


def differ_heading(differ: Sequence[SwapLine]) -> str:
    """`Five lines differ, two of them matter here`."""
    matter = sum(line.matters for line in differ)
    if not differ:
        return "No line differs"
    head = f"{count_word(len(differ), begins=True)} line{'s differ' if len(differ) > 1 else ' differs'}"
    if not matter:
        return f"{head}, none matters here"
    if matter == len(differ):
        return f"{head} and matter{'s' if matter == 1 else ''}"
    return f"{head}, {count_word(matter)} of them matter{'s' if matter == 1 else ''} here"


def same_heading(same: Sequence[SwapLine]) -> str:
    return f"{count_word(len(same), begins=True)} {'is' if len(same) == 1 else 'are'} the same"


def after_heading(changes: Sequence[Row], words: str) -> str:
    """`With 13 pF from B to ground: ▲ meets`."""
    said = []
    for change in changes:
        if change["what"] == "load capacitors":
            pairs = zip("AB", change["from"], change["to"], strict=True)
            said += [f"{number(new)} pF from {node} to ground" for node, old, new in pairs if old != new]
        else:
            said.append(f"{number(change['to'])} Ω in series")
    return f"With {' and '.join(said)}: {verdict(words)}"


@dataclass(frozen=True)
class BothHave:
    """One figure of both parts in the same circuit; `bare_*` in full for the clipboard."""

    name: str
    unit: str
    incumbent: str
    candidate: str
    bare_incumbent: str
    bare_candidate: str


def both_in_circuit(incumbent: Row, candidate: Row) -> list[BothHave]:
    """Margin, ppm, drive and start-up of both, low to high."""
    rows = []
    for key in IN_CIRCUIT:
        if key in incumbent and key in candidate:
            figure, pair = FIGURES[key], (incumbent[key], candidate[key])
            texts = [_span(one, figure.digits, sign=figure.sign) for one in pair]
            bare = [f"{one['mid']:.10g}" if one["mid"] is not None else "" for one in pair]
            rows.append(BothHave(figure.name, figure.unit, texts[0], texts[1], bare[0], bare[1]))
            if key == "total_ppm" and _is_clock(candidate):
                daily = [_span(_a_day(one), figure.digits, sign=True) for one in pair]
                rows.append(BothHave("The same for a clock", "s a day", daily[0], daily[1], "", ""))
    return rows


def _is_clock(row: Row) -> bool:
    at = row.get("series_resonance_mhz", {}).get("mid")
    return at is not None and at < CLOCK_BELOW_MHZ


def _a_day(ppm: Row) -> dict[str, float | None]:
    """Seconds a day that a clock is off by, from its error in ppm."""
    return {end: None if ppm[end] is None else ppm[end] * SECONDS_A_DAY_PER_PPM for end in ENDS}


def _span(figure: Row, digits: int, *, sign: bool) -> str:
    if not sign or figure["low"] is None or figure["high"] is None:
        return spread(figure["low"], figure["high"], digits=digits)
    ends = [signed(figure[end], digits) for end in ("low", "high")]
    return ends[0] if ends[0] == ends[1] else UP_TO.join(ends)


def ask_heading(one: Row) -> str:
    """`Ask Tansy & Wray`."""
    return f"Ask {one['maker'] or 'the maker'}"


def letters(one: Row) -> list[tuple[str, str]]:
    """Ready texts, each with what the button under it says: English, and the sheet's language where there is one."""
    found = []
    if one["questions"]:
        label = "Copy the question" if len(one["questions"]) == 1 else "Copy the questions"
        found.append((label, "\n".join(one["questions"])))
    if one.get("letter"):
        found.append(("Copy it in the sheet’s language", "\n".join(one["letter"]["sentences"])))
    return found


def candidates_table(result: Row) -> list[tuple[int, str, str, str, str]]:
    """Place, verdict, part, shift and what decides, of every candidate, best first."""
    ranked = sorted(result["candidates"], key=lambda one: one["place"])
    return [
        (one["place"], _marked(one["verdict"]), row_name(one), shift_short(one["shift_ppm"]), sentence(one["decides"]))
        for one in ranked
    ]


def _marked(words: str) -> str:
    return f"{MARKS[words]} {words}"


def shift_short(shift: Row) -> str:
    """`−0.8 ppm`, `0`, or a dash where it cannot be had."""
    if shift["mid"] is None:
        return "—"
    return "a fraction" if shift["high"] < A_FRACTION else with_unit(signed(shift["mid"]), "ppm")


def lines_table(one: Row, incumbent: Row, lines: Sequence[SwapLine]) -> Table:
    """Every line for copies and exports, none left out."""
    heads = ["Reading", "Unit", f"Present: {row_name(incumbent)}", f"Candidate: {row_name(one)}", "Difference"]
    heads += ["Relation", "Matters here", "Room used, %", "What it does here"]
    heads += ["Present stands at", "Candidate stands at"]
    return heads, [
        [
            *(line.name, line.unit, line.incumbent, line.candidate, line.difference),
            *(line.relation, "yes" if line.matters else "no", _room_used(line), line.does),
            *(line.place_incumbent, line.place_candidate),
        ]
        for line in lines
    ]


def _room_used(line: SwapLine) -> float | None:
    if line.lever is None or not math.isfinite(line.lever.used):
        return None
    return round(100 * line.lever.used, 1)


def summary_table(result: Row, one: Row) -> Table:
    """Verdict, what decides, shift and changes, for an export."""
    shift = one["shift_ppm"]
    rows = [
        ["Present part", row_name(result["incumbent"])],
        ["Candidate", row_name(one)],
        ["Verdict", one["verdict"]],
        ["What decides", told(one["decides"])],
        ["Shift on the unchanged board, low (ppm)", shift["low"]],
        ["Shift on the unchanged board, nominal (ppm)", shift["mid"]],
        ["Shift on the unchanged board, high (ppm)", shift["high"]],
        ["How", told(shift["how"])],
        ["Changes to the board", changes_text(one["changes"]).replace("**", "")],
        *(["Question", question] for question in one["questions"]),
        *(["Note", told(note["message"])] for note in result["notes"]),
    ]
    return ["", "Value"], rows


def next_text(at: int, count: int) -> str:
    return f"{at} of {counted(count, 'candidate')}"


def both_supplied(old: supply.Record, new: supply.Record) -> list[BothHave]:
    """What is known of the supply of both parts, each value with whence it is."""
    rows = []
    for key, column in supply.columns().items():
        if key in old or key in new:
            texts = [_supplied(one, key) for one in (old, new)]
            bare = [_bare_figure(supply.figure(one, key)) for one in (old, new)]
            rows.append(BothHave(column.name, "", texts[0], texts[1], bare[0], bare[1]))
    return rows


def _supplied(one: supply.Record, key: str) -> str:
    return (
        f"{supply.value_text(key, one[key]['value'])} ({supply.whence_text(one[key])})" if key in one else "not known"
    )


def _bare_figure(value: float | None) -> str:
    return "" if value is None else f"{value:.10g}"


@dataclass(frozen=True)
class Compared:
    """The lines of a comparison: those that differ, most harmful first; those alike; what neither sheet states."""

    differ: list[SwapLine]
    same: list[SwapLine]
    silent: list[SwapLine]

    @property
    def every(self) -> list[SwapLine]:
        return [*self.differ, *self.same, *self.silent]


def silent_text(silent: Sequence[SwapLine]) -> str:
    """What neither sheet states, in one sentence."""
    names = ", ".join(
        line.name[:1].lower() + line.name[1:] if line.name[1:2].islower() else line.name for line in silent
    )
    return (
        f"Neither sheet states: {names}. {CHECK_PADS if any(line.field == 'pads' for line in silent) else ''}".strip()
    )
