"""May this part stand in for that one, on the board as built? The data contract's section 6."""

from __future__ import annotations

import math
from collections.abc import Sequence
from typing import Any

from compare.bench import Bench
from compare.judgement import Judgement, called, judge_all, rank_key
from compare.letters import english, in_english, in_language, known, language_of
from compare.offer import fields_to_check
from compare.reckoning import part_result
from compare.swap import Candidate, SubstituteError, Swap, make_swap
from compare.swap_lines import frequency_words, part_word, ppm_words, valued
from compare.swap_verdict import VERDICTS
from extract.model import SpecSheet

__all__ = ["SCHEMA", "SubstituteError", "substitute"]

SCHEMA = "quartzfolio/substitute/1"
A_FRACTION_PPM = -1e5
"""Further down the part runs on another mode, and ppm say nothing to a person."""
PRESENTED = "no bench given: the circuit is taken to present the incumbent's rated load"


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
    judged = judge_all(swap)
    places = {id(one): place for place, one in enumerate(sorted(judged, key=rank_key), start=1)}
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


def _in_order(judged: Sequence[Judgement]) -> list[Judgement]:
    """As given; the parts of a list ranked among themselves."""
    listed: list[Judgement] = []
    for sheet in dict.fromkeys(id(one.candidate.sheet) for one in judged):
        listed += sorted((one for one in judged if id(one.candidate.sheet) == sheet), key=rank_key)
    return listed


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
        result |= {**one.result, "circuit_verdict": one.result["verdict"]}
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


OTHER_FREQUENCY = "cannot be had: the candidate does not offer the incumbent's frequency, or states none"
GRADE = ("aec_q200", "moisture_level", "reflow_peak_c", "status")


def _findings(one: Judgement) -> list[dict[str, str]]:
    """What a person should see first: lines that matter and are not the same, then grade and life cycle."""
    first = [line for line in one.lines if line.matters and line.relation != "same"]
    rest = [line for line in one.lines if line.field in GRADE and line.relation not in ("same", "tighter")]
    open_fit = [line for line in one.lines if line.field in ("package", "pads") and line.relation == "unknown"]
    told = {id(line): line for line in (*first, *rest, *open_fit)}
    found = [{"about": line.field, "message": valued(line)} for line in told.values()]
    return [*found, {"about": "changes", "message": one.said}] if one.said else found


def _shift_json(swap: Swap, at: int | None) -> dict[str, Any]:
    if at is None:
        return {"low": None, "mid": None, "high": None, "how": OTHER_FREQUENCY, "basis": "derived"}
    low, mid, high = (None if math.isnan(end) else end for end in swap.shift(at))
    columns = swap.columns
    rests = [columns.motional_estimated[k] or columns.shunt_missing[k] or columns.shunt_loose[k] for k in (0, at)]
    estimated = any(rests) and not low == high == 0
    basis = "estimated" if estimated else "derived"
    return {"low": low, "mid": mid, "high": high, "how": _shift_how(swap, at), "basis": basis}


def _shift_how(swap: Swap, at: int) -> str:
    order = swap.columns.offers[at].overtone or 1
    low, mid, high = swap.shift(at)
    if order > 1 and low < A_FRACTION_PPM:
        runs = frequency_words(swap.columns.offers[at].frequency_mhz / order)
        where = f"run on its fundamental, at about {runs}, a {part_word(order)} of the nominal frequency"
        if high < A_FRACTION_PPM:
            return f"it would {where}"
        return f"it may {where}; on its overtone it would move by {ppm_words(mid)} ppm"
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
    if swap.incumbent.part.attributes.aec_q200 and part.attributes.aec_q200 is None:
        ask.append("aec_q200")  # no verdict of a circuit, yet a graded board needs the answer
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
