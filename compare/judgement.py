"""Each candidate judged in the incumbent's place: what is in its way, what would mend it, what decides."""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field, replace
from typing import Any

from compare.footprint import sits_elsewhere
from compare.ranking import order
from compare.reasons import times
from compare.reckoning import Reckoning, bare_result, missing_of, part_result
from compare.refit import NO_REFIT, Refit, changes_for
from compare.relations import reading_words
from compare.report import NAMES
from compare.swap import Candidate, Swap
from compare.swap_lines import Line, lines_of, mechanical_lines, moved_words, valued
from compare.swap_verdict import (
    DOES_NOT_FIT,
    DROP_IN,
    FITS_WITH_CHANGES,
    NOT_TOLD,
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
from compare.verdict import FALLS_SHORT, MEETS, Judged

MOST_TOLD, MOST_TRIED = 60, 6
"""In a long list: how many carry their lines and sentences, and for how many other parts on the board are tried."""
UNTRIED = "in a list this long other parts on the board were tried for the nearest alone; name this one by itself"
NOTHING_MORE: Mapping[str, Any] = {}


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
    result: Mapping[str, Any] = field(default_factory=dict)
    """Section 4's numbers and reasons; empty without a bench."""


def rank_key(one: Judgement) -> tuple[int, bool, float]:
    known_slack = not math.isnan(one.least_slack)
    return -one.code, not known_slack, -one.least_slack if known_slack else 0.0


def judge_all(swap: Swap) -> list[Judgement]:
    """Every candidate, in the order given."""
    told, tried = _told_and_tried(swap)
    return [_judge(swap, one, told=one.column in told, tried=one.column in tried) for one in swap.candidates]


def _told_and_tried(swap: Swap) -> tuple[set[int | None], set[int | None]]:
    """Columns that are told whole, and those for which changes to the board are tried: in a long list the best ones."""
    reckoning = swap.reckoning
    if reckoning is None:
        return set(range(len(swap.columns))), set()
    sits = {one.column for one in swap.candidates if not sits_elsewhere(swap.incumbent.part, one.part)}
    ranked = order(reckoning.judged, reckoning.verdict).tolist()
    best = sorted(ranked, key=lambda at: at not in sits)
    short = [at for at in best if at in sits and reckoning.verdict[at] != MEETS]
    return set(best[: MOST_TOLD + 1]), set(short[:MOST_TRIED])


def _judge(swap: Swap, candidate: Candidate, *, told: bool, tried: bool) -> Judgement:
    at = candidate.column
    if at is None:
        return _not_offered(swap, candidate)
    whole = told or swap.reckoning is None or int(swap.reckoning.verdict[0]) != MEETS
    plain = lines_of(swap.columns, at) if whole else mechanical_lines(swap.columns, at)
    lines = [_with_shift(line, swap, at) for line in plain]
    if swap.reckoning is None:
        blocks = mechanical_blocks({line.field: line for line in lines})
        lines, more = plain_blocks(swap, at, lines)
        return _settled(swap, candidate, _mechanical_marked(lines, blocks), blocks + more)
    result = part_result(swap.reckoning, at) if told else bare_result(swap.reckoning, at)
    return _on_bench(swap, swap.reckoning, candidate, lines, result, tried=tried)


def _on_bench(
    swap: Swap,
    reckoning: Reckoning,
    candidate: Candidate,
    lines: list[Line],
    result: Mapping[str, Any],
    *,
    tried: bool,
) -> Judgement:
    at = candidate.column or 0
    judged, offers = reckoning.judged, (swap.incumbent, swap.columns.offers[at])
    by_field = {line.field: line for line in lines}
    blocks = mechanical_blocks(by_field)
    excuses = [one.about for one in judged.values() if excused(one, at, by_field, offers, swap.bench)]
    required = requirement_blocks(judged, at, _messages(judged, at, result), excuses)
    required = [_with_cause(block, lines) for block in required]
    refit = NO_REFIT
    if required and verdict_of(blocks) != DOES_NOT_FIT:
        open_ones = [block.about for block in required]
        refit = changes_for(reckoning, at, open_ones, excuses) if tried else Refit(said=UNTRIED)
    marked = _mechanical_marked(marked_on_bench(lines, judged, at, excuses, swap.bench), blocks)
    return _settled(swap, candidate, marked, blocks + required, refit=refit, excuses=excuses, result=result)


def _with_cause(block: Block, lines: Sequence[Line]) -> Block:
    """Where all causes together are too much, the other rated load or the series part that makes them so."""
    apart = [one for one in lines if one.field in ("resonance", "load_capacitance_pf") and one.relation == "different"]
    if block.about != "total_ppm" or not apart:
        return block
    return replace(block, message=f"{block.message}; {valued(apart[0])}")


def _messages(judged: Mapping[str, Judged], at: int, result: Mapping[str, Any]) -> dict[str, str]:
    """The sentence of each requirement; for one of the many that are not told whole, how far off it is."""
    if result["reasons"]:
        return {one["about"]: f"{called(one['about'])}: {one['message']}" for one in result["reasons"]}
    return {one.about: f"{called(one.about)}: {times(float(one.worst[at]))}" for one in judged.values()}


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
    return replace(line, message=f"{line.message}; the frequency {moved_words(low, high)}")


def _not_offered(swap: Swap, candidate: Candidate) -> Judgement:
    theirs = [r for r in candidate.part.readings if r.field == "frequency_mhz"]
    states_none = not theirs
    code, relation = (NOT_TOLD, "unknown") if states_none else (DOES_NOT_FIT, "different")
    message = f"frequency: the candidate's sheet {candidate.said}"
    asked = f"{swap.incumbent.frequency_mhz:.10g} MHz"
    offered = {"text": "; ".join(dict.fromkeys(map(reading_words, theirs[:3])))} if theirs else None
    line = Line("frequency_mhz", {"text": asked}, offered, relation, message, matters=True)  # type: ignore[arg-type]
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
    result: Mapping[str, Any] = NOTHING_MORE,
) -> Judgement:
    changes = refit.changes
    at = candidate.column or 0
    code = verdict_of([block for block in blocks if not (changes and block.requirement)])
    if changes:
        code = min(code, FITS_WITH_CHANGES)
    decides = _decides(swap, at, (code, blocks, changes), result, excuses)
    missing = _missing(swap, at, lines, blocks, excuses)
    return Judgement(
        candidate=candidate,
        code=code,
        decides=decides,
        lines=lines,
        blocks=blocks,
        changes=changes,
        excuses=list(excuses),
        missing=missing,
        said=refit.said,
        least_slack=_least_slack(swap, at, excuses),
        result=result,
    )


def _decides(
    swap: Swap,
    at: int,
    settled: tuple[int, Sequence[Block], Sequence[Mapping[str, Any]]],
    result: Mapping[str, Any],
    excuses: Sequence[str],
) -> str:
    code, blocks, changes = settled
    if code == FITS_WITH_CHANGES:
        mended = decisive([block for block in blocks if block.requirement])
        return f"{changed_words(changes)}; as built: {mended.message}"
    if code != DROP_IN:
        return decisive([block for block in blocks if block.code == code]).message
    if swap.reckoning is None:
        return f"no worse than the incumbent in every line that matters; {shift_message(swap, at)}"
    return _drop_in_words(result["slack"], excuses, swap.reckoning)


def _drop_in_words(slack: Mapping[str, float | None], excuses: Sequence[str], reckoning: Reckoning) -> str:
    """What is met and by how much; what is not, because the incumbent does not meet it either, is said first."""
    known_ones = {about: value for about, value in slack.items() if value is not None and about not in excuses}
    parts = []
    if excuses:
        parts.append(f"no worse than the incumbent, which {_own_state(excuses, reckoning)}")
    parts.append("all else is met on the unchanged board" if excuses else "meets on the unchanged board")
    if known_ones:
        tightest = min(known_ones, key=lambda about: known_ones[about])
        parts.append(f"the tightest is {called(tightest)}, {known_ones[tightest]:.3g} times over")
    return "; ".join(parts)


def _own_state(excuses: Sequence[str], reckoning: Reckoning) -> str:
    """`itself falls short in margin and cannot be told in mode`."""
    short = [name for name in excuses if reckoning.judged[name].verdict[0] == FALLS_SHORT]
    unknown = [name for name in excuses if name not in short]
    said = [f"falls short in {', '.join(map(called, short))}"] if short else []
    said += [f"cannot be told in {', '.join(map(called, unknown))}"] if unknown else []
    return f"itself {' and '.join(said)}"


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
