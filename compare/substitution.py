"""May this part stand in for that one, on the board as built? The data contract's section 6."""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace
from typing import Any

from compare.bench import Bench
from compare.letters import english, in_english, in_language, known, language_of
from compare.offer import fields_to_check
from compare.reckoning import bare_result, missing_of, part_result
from compare.refit import NO_REFIT, Refit, changes_for
from compare.report import NAMES
from compare.swap import Candidate, SubstituteError, Swap, make_swap
from compare.swap_lines import Line, lines_of
from compare.swap_verdict import (
    DOES_NOT_FIT,
    DROP_IN,
    FITS_WITH_CHANGES,
    NOT_TOLD,
    VERDICTS,
    Block,
    decisive,
    excused,
    marked_on_bench,
    mechanical_blocks,
    plain_blocks,
    requirement_blocks,
    shift_message,
    verdict_of,
)
from extract.model import SpecSheet

__all__ = ["SCHEMA", "SubstituteError", "substitute"]

SCHEMA = "quartzfolio/substitute/1"
PRESENTED = "no bench given: the circuit is taken to present the incumbent's rated load"


@dataclass
class Judgement:
    """Everything that is said of one candidate."""

    candidate: Candidate
    code: int
    decides: str
    lines: list[Line]
    blocks: list[Block]
    changes: list[dict[str, Any]]
    excuses: list[str]
    missing: list[str]
    said: str = ""
    """What is to be said of changes to the board, or of why none do."""
    least_slack: float = math.nan


def substitute(
    incumbent_sheets: Sequence[SpecSheet], candidate_sheets: Sequence[SpecSheet], bench: Bench | None
) -> dict[str, Any]:
    """Judge every part of the candidates' sheets in the incumbent's place; JSON-ready.

    Raises
    ------
    SubstituteError
        The incumbent is not exactly one part, does not offer the bench's frequency, or names none and no bench does.
    """
    swap = make_swap(incumbent_sheets, candidate_sheets, bench)
    judged = [_judge(swap, one) for one in swap.candidates]
    places = {id(one): place for place, one in enumerate(sorted(judged, key=_order), start=1)}
    listed = [_as_json(swap, one, places[id(one)]) for one in _in_order(judged)]
    notes = [*swap.notes, *_incumbent_notes(swap, judged)]
    if bench is None:
        notes.insert(0, _presented(swap))
    return {
        "schema": SCHEMA,
        "incumbent": _incumbent_json(swap),
        "candidates": listed,
        "notes": [{"level": "info", "message": text, "where": None} for text in notes],
    }


def _presented(swap: Swap) -> str:
    load = swap.incumbent.load.span.mid
    if math.isnan(load):
        return f"{PRESENTED}, which its sheet does not settle; what is asked is no worse than the incumbent"
    words = "none, it is a series-resonant part" if math.isinf(load) else f"{load:g} pF"
    return f"{PRESENTED} ({words}), and what is asked is no worse than the incumbent"


def _order(one: Judgement) -> tuple[int, bool, float]:
    known_slack = not math.isnan(one.least_slack)
    return -one.code, not known_slack, -one.least_slack if known_slack else 0.0


def _in_order(judged: Sequence[Judgement]) -> list[Judgement]:
    """As given; the parts of a list ranked among themselves."""
    listed: list[Judgement] = []
    for sheet in dict.fromkeys(id(one.candidate.sheet) for one in judged):
        listed += sorted((one for one in judged if id(one.candidate.sheet) == sheet), key=_order)
    return listed


def _judge(swap: Swap, candidate: Candidate) -> Judgement:
    at = candidate.column
    if at is None:
        return _not_offered(swap, candidate)
    lines = [_with_shift(line, swap, at) for line in lines_of(swap.columns, at)]
    by_field = {line.field: line for line in lines}
    blocks = mechanical_blocks(by_field)
    if swap.reckoning is None:
        lines, more = plain_blocks(swap, at, lines)
        return _settled(swap, candidate, _mechanical_marked(lines, blocks), blocks + more)
    reckoning, offers = swap.reckoning, (swap.incumbent, swap.columns.offers[at])
    judged = reckoning.judged
    excuses = [one.about for one in judged.values() if excused(one, at, by_field, offers, swap.bench)]
    messages = {
        one["about"]: f"{called(one['about'])}: {one['message']}" for one in part_result(reckoning, at)["reasons"]
    }
    required = requirement_blocks(judged, at, messages, excuses)
    refit = Refit()
    if required and verdict_of(blocks) != DOES_NOT_FIT:
        refit = changes_for(reckoning, at, [block.about for block in required], excuses)
    lines = _mechanical_marked(marked_on_bench(lines, judged, at, excuses, swap.bench), blocks)
    return _settled(swap, candidate, lines, blocks + required, refit=refit, excuses=excuses)


def called(about: str) -> str:
    """What a person calls a requirement."""
    return NAMES.get(about, about)


def _mechanical_marked(lines: Sequence[Line], blocks: Sequence[Block]) -> list[Line]:
    stopped = {block.about for block in blocks if not block.requirement}
    return [replace(line, matters=line.matters or line.field in stopped) for line in lines]


def _with_shift(line: Line, swap: Swap, at: int) -> Line:
    """Where load or kind of resonance differ, by how much and to which side that moves the frequency."""
    if line.field not in ("load_capacitance_pf", "resonance") or line.relation != "different":
        return line
    low, _, high = swap.shift(at)
    if math.isnan(low):
        return replace(line, message=f"{line.message}; by how many ppm cannot be told")
    return replace(line, message=f"{line.message}; the frequency moves by {low:+.3g} to {high:+.3g} ppm")


def _not_offered(swap: Swap, candidate: Candidate) -> Judgement:
    states_none = not any(r.field == "frequency_mhz" for r in candidate.part.readings)
    code, relation = (NOT_TOLD, "unknown") if states_none else (DOES_NOT_FIT, "different")
    message = f"frequency: {candidate.said}"
    asked = f"{swap.incumbent.frequency_mhz:.10g} MHz"
    line = Line("frequency_mhz", {"text": asked}, None, relation, message, matters=True)  # type: ignore[arg-type]
    missing = ["frequency_mhz"] if states_none else []
    return Judgement(candidate, code, message, [line], [Block("frequency_mhz", code, message)], [], [], missing)


def _settled(
    swap: Swap,
    candidate: Candidate,
    lines: list[Line],
    blocks: list[Block],
    *,
    refit: Refit = NO_REFIT,
    excuses: Sequence[str] = (),
) -> Judgement:
    changes = refit.changes
    at = candidate.column or 0
    code = verdict_of([block for block in blocks if not (changes and block.requirement)])
    if changes:
        code = min(code, FITS_WITH_CHANGES)
    decides = _decides(swap, at, code, blocks, changes)
    missing = _missing(swap, at, lines, blocks, excuses)
    return Judgement(
        candidate,
        code,
        decides,
        lines,
        blocks,
        changes,
        list(excuses),
        missing,
        refit.said,
        _least_slack(swap, at, excuses),
    )


def _decides(swap: Swap, at: int, code: int, blocks: Sequence[Block], changes: Sequence[Mapping[str, Any]]) -> str:
    if code == FITS_WITH_CHANGES:
        mended = decisive([block for block in blocks if block.requirement])
        return f"{changed_words(changes)}; as built: {mended.message}"
    if code != DROP_IN:
        return decisive([block for block in blocks if block.code == code]).message
    if swap.reckoning is None:
        return f"no worse than the incumbent in every line that matters; {shift_message(swap, at)}"
    result = bare_result(swap.reckoning, at)
    tightest = result["tightest"]
    if tightest is None:
        return "every requirement that can be told is met on the unchanged board"
    return (
        f"meets on the unchanged board; the tightest is {called(tightest)}, {result['slack'][tightest]:.3g} times over"
    )


def changed_words(changes: Sequence[Mapping[str, Any]]) -> str:
    """`load capacitors 12 and 12 pF become 15 and 15 pF`."""
    said = []
    for change in changes:
        if change["what"] == "load capacitors":
            (a, b), (c, d) = change["from"], change["to"]
            said.append(f"load capacitors {a:g} and {b:g} pF (input, output) become {c:g} and {d:g} pF")
        else:
            said.append(f"series resistor {change['from']:g} Ω becomes {change['to']:g} Ω")
    return "; ".join(said)


def _least_slack(swap: Swap, at: int, excuses: Sequence[str]) -> float:
    if swap.reckoning is None:
        return math.nan
    known_ones = [
        float(one.slack[at])
        for one in swap.reckoning.judged.values()
        if one.asked[at] and one.about not in excuses and not math.isnan(one.slack[at])
    ]
    return min(known_ones, default=math.nan)


def _missing(swap: Swap, at: int, lines: Sequence[Line], blocks: Sequence[Block], excuses: Sequence[str]) -> list[str]:
    """Readings and bench keys that a verdict wanted: of requirements not excused, and of lines that matter."""
    wanted: list[str] = []
    if swap.reckoning is not None:
        judged = {key: one for key, one in swap.reckoning.judged.items() if one.asked[at] and key not in excuses}
        wanted += missing_of(judged, at)
    else:
        wanted += [line.field for line in lines if line.matters and _candidate_is_silent(line)]
        wanted += _estimates_behind_shift(swap, at, blocks)
    wanted += [block.about for block in blocks if block.code == NOT_TOLD and block.about in ("package", "pads")]
    return list(dict.fromkeys(wanted))


def _candidate_is_silent(line: Line) -> bool:
    typical = line.field == "esr_ohm" and isinstance(line.candidate, Mapping) and line.candidate.get("max") is None
    return line.relation == "unknown" and (line.candidate is None or typical)


def _estimates_behind_shift(swap: Swap, at: int, blocks: Sequence[Block]) -> list[str]:
    if not any(block.about in ("shift_ppm", "load_capacitance_pf", "resonance") for block in blocks):
        return []
    columns = swap.columns
    found = ["motional_capacitance_ff"] if columns.motional_estimated[at] else []
    return found + (["shunt_capacitance_pf"] if columns.shunt_missing[at] or columns.shunt_loose[at] else [])


def _incumbent_notes(swap: Swap, judged: Sequence[Judgement]) -> list[str]:
    """What the incumbent itself does not meet, and for whom that is not held against."""
    if swap.reckoning is None:
        return []
    said = []
    for reason in part_result(swap.reckoning, 0)["reasons"]:
        if reason["verdict"] not in ("falls short", "cannot tell"):
            continue
        names = [_name(one.candidate) for one in judged if reason["about"] in one.excuses]
        whom = f"; not held against {_listed(names)}, no worse in what it rests on" if names else ""
        state = "falls short itself" if reason["verdict"] == "falls short" else "cannot be told of it either"
        said.append(f"the incumbent {state} in {called(reason['about'])} ({reason['message']}){whom}")
    return said


def _listed(names: Sequence[str]) -> str:
    more = f" and {len(names) - 5} more" if len(names) > 5 else ""
    return ", ".join(names[:5]) + more


def _name(candidate: Candidate) -> str:
    return candidate.part.part_number or candidate.sheet.file


def _identity(candidate: Candidate) -> dict[str, Any]:
    part = candidate.part
    return {
        "file": candidate.sheet.file,
        "part_number": part.part_number,
        "maker": part.maker,
        "package": part.package,
        "mode": part.mode,
    }


def _incumbent_json(swap: Swap) -> dict[str, Any]:
    offer = swap.incumbent
    identity = _identity(Candidate(offer.sheet, offer.part, 0))
    if swap.reckoning is not None:
        return {**identity, **part_result(swap.reckoning, 0)}
    return {**identity, "mode": offer.mode, **_taken_so(swap, 0)}


def _taken_so(swap: Swap, at: int) -> dict[str, Any]:
    offer = swap.columns.offers[at]
    return {
        "chosen": dict(offer.chosen),
        "to_check": fields_to_check(offer, ("operating_temperature_c", "drive_level_uw")),
        "remarks": [{"about": about, "message": text} for about, text in offer.said],
    }


def _as_json(swap: Swap, one: Judgement, place: int) -> dict[str, Any]:
    at = one.candidate.column
    result = _identity(one.candidate)
    if at is not None and swap.reckoning is not None:
        circuit = part_result(swap.reckoning, at)
        result |= {**circuit, "circuit_verdict": circuit["verdict"]}
    elif at is not None:
        result |= {"mode": swap.columns.offers[at].mode, **_taken_so(swap, at)}
    return {
        **result,
        "place": place,
        "verdict": VERDICTS[one.code],
        "decides": one.decides,
        "lacks": list(dict.fromkeys(block.about for block in one.blocks)),
        "not_held_against_it": one.excuses,
        "lines": [line.as_json() for line in one.lines],
        "findings": _findings(one),
        "changes": one.changes,
        "shift_ppm": _shift_json(swap, at),
        "missing": one.missing,
        **_questions(swap, one),
    }


GRADE = ("aec_q200", "moisture_level", "reflow_peak_c", "status")


def _findings(one: Judgement) -> list[dict[str, str]]:
    """What a person should see first: lines that matter and are not the same, then grade and life cycle."""
    first = [line for line in one.lines if line.matters and line.relation != "same"]
    rest = [line for line in one.lines if line.field in GRADE and line.relation not in ("same", "tighter")]
    open_fit = [line for line in one.lines if line.field in ("package", "pads") and line.relation == "unknown"]
    told = {id(line): line for line in (*first, *rest, *open_fit)}
    found = [{"about": line.field, "message": line.message} for line in told.values()]
    return [*found, {"about": "changes", "message": one.said}] if one.said else found


def _shift_json(swap: Swap, at: int | None) -> dict[str, Any]:
    if at is None:
        return {"low": None, "mid": None, "high": None, "how": "another frequency", "basis": "derived"}
    low, mid, high = (None if math.isnan(end) else end for end in swap.shift(at))
    columns = swap.columns
    rests = [columns.motional_estimated[k] or columns.shunt_missing[k] or columns.shunt_loose[k] for k in (0, at)]
    estimated = any(rests) and not low == high == 0
    basis = "estimated" if estimated else "derived"
    return {"low": low, "mid": mid, "high": high, "how": _shift_how(swap, at), "basis": basis}


def _shift_how(swap: Swap, at: int) -> str:
    order = swap.columns.offers[at].overtone or 1
    if order > 1 and swap.shift(at)[0] < -1e5:
        return f"its fundamental at about 1/{order} of the nominal frequency where that one runs, else its overtone"
    if math.isnan(swap.shift(at)[0]):
        if swap.reckoning is None:
            return "cannot be had: a rated load is not stated"
        return "cannot be had: the load error of one of the two parts is not known"
    where = "at the incumbent's rated load" if swap.reckoning is None else "in the same circuit, corner by corner"
    return (
        f"(f' - f)/f {where}, from the exact curve f = fs √(1 + C1/(C0 + CL)) of both with R1 counted; the circuit and "
        "readings alike in both parts move together"
    )


def _questions(swap: Swap, one: Judgement) -> dict[str, Any]:
    """Ready sentences to the maker, in English and in the sheet's language; and what the bench leaves open."""
    part, sheet = one.candidate.part, one.candidate.sheet
    ask = [name for name in one.missing if "." not in name and known(name)]
    about_bench = [name for name in one.missing if "." in name and known(name)]
    at = one.candidate.column
    if at is None:
        return {"questions": [english(name, sheet, part) for name in ask], "letter": None, "bench_questions": []}
    offer = swap.columns.offers[at]
    load = offer.load.span.mid
    if swap.reckoning is not None:
        load = float(swap.reckoning.numbers["circuit_load_pf"].ends[1, at])
    return {
        "questions": [in_english(name, offer, swap.bench, load) for name in ask],
        "letter": in_language(language_of(part), ask, part, offer.frequency_mhz),
        "bench_questions": [in_english(name, offer, swap.bench, load) for name in about_bench],
    }
