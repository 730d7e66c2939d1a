"""What stands in a candidate's way on the board as built, and which of it the incumbent's own shortfall excuses."""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace
from functools import lru_cache

from compare.bench import Bench
from compare.offer import Offer
from compare.relations import Relation, rules
from compare.swap import Swap, within
from compare.swap_lines import MECHANICAL, Line, moved_words, ppm_words, same_number, valued
from compare.verdict import CANNOT_TELL, FALLS_SHORT, MEETS, Judged

DROP_IN, FITS_WITH_CHANGES, NOT_TOLD, DOES_NOT_FIT = 3, 2, 1, 0
VERDICTS = {
    DROP_IN: "drop-in",
    FITS_WITH_CHANGES: "fits with changes",
    NOT_TOLD: "cannot tell",
    DOES_NOT_FIT: "does not fit",
}
FROM_REQUIREMENT = {FALLS_SHORT: DOES_NOT_FIT, CANNOT_TELL: NOT_TOLD}
A_BENCH = "a bench of the board would tell"
KEPT = ("same", "tighter")
WORSE_WITH_LESS_ESR = ("esr_ohm", "resistance_headroom")
LESS_IS_WORSE = "in this circuit less is worse"
FORK_ONLY = ("turnover_temperature_c", "parabolic_coefficient_ppm_per_c2")


@dataclass(frozen=True)
class Block:
    """One thing in the way: DOES_NOT_FIT or NOT_TOLD, and of what kind.

    `about` is a line's field or a requirement; `slack` (NaN: none) orders what is in the way.
    """

    about: str
    code: int
    message: str
    requirement: bool = False
    slack: float = math.nan
    shared: bool = False
    """True where the incumbent's sheet is as silent; what only the candidate lacks, or has worse, goes first."""


def verdict_of(blocks: Sequence[Block]) -> int:
    return min((block.code for block in blocks), default=DROP_IN)


def decisive(blocks: Sequence[Block]) -> Block:
    """The one that settles it: the worst; of several what no circuit mends first, then the one furthest off."""
    return min(blocks, key=lambda b: (b.code, b.requirement, b.shared, math.inf if math.isnan(b.slack) else b.slack))


def mechanical_blocks(lines: Mapping[str, Line]) -> list[Block]:
    """Another package or other pads fit no board; what the incumbent states and the candidate does not is not told."""
    found = []
    for line in (lines[name] for name in MECHANICAL):
        if line.relation == "different":
            found.append(Block(line.field, DOES_NOT_FIT, line.message))
        elif line.relation == "unknown" and _stated_by_incumbent_alone(line):
            found.append(Block(line.field, NOT_TOLD, line.message))
    return found


def _stated_by_incumbent_alone(line: Line) -> bool:
    if line.field == "pads":
        return "crystal on" in (line.incumbent or "") and "crystal on" not in (line.candidate or "")
    return line.incumbent is not None and line.candidate is None


@lru_cache(maxsize=64)
def rests_on(about: str, esr_at_load: bool) -> tuple[str, ...]:
    """The fields that a requirement rests on."""
    fields = [field for field, rule in rules().items() if about in rule.rests]
    extra = {"total_ppm": ["resonance"], "mode": ["mode"]}.get(about, [])
    if esr_at_load and "esr_ohm" in fields:
        extra = [*extra, "load_capacitance_pf"]
    return tuple(dict.fromkeys([*fields, *extra]))


def excused(one: Judged, at: int, lines: Mapping[str, Line], offers: tuple[Offer, Offer], bench: Bench) -> bool:
    """True where the incumbent does not meet the requirement either, and the candidate is no worse in all it rests on.

    Less ESR is the tighter reading, yet worse where the gain has a ceiling or the IC asks for a least ESR: so the
    candidate must not come out lower either.
    """
    if not one.asked[0] or one.verdict[0] == MEETS or one.verdict[at] < one.verdict[0]:
        return False
    if not all(_kept(field, lines, offers) for field in rests_on(one.about, bench.crystal.esr_means == "at load")):
        return False
    if one.about == "esr_ohm" and lines["esr_ohm"].relation != "same":
        return False
    own, other = float(one.worst[0]), float(one.worst[at])
    return math.isnan(own) or math.isnan(other) or other >= own * (1 - 1e-9)


def _kept(field: str, lines: Mapping[str, Line], offers: tuple[Offer, Offer]) -> bool:
    line = lines.get(field)
    if line is not None:
        return line.relation in KEPT
    old, new = offers
    return (field in FORK_ONLY and not old.fork and not new.fork) or same_number(old.part, new.part)


def requirement_blocks(
    judged: Mapping[str, Judged], at: int, messages: Mapping[str, str], excuses: Sequence[str]
) -> list[Block]:
    """A block for each requirement that is asked, not met and not excused."""
    found = []
    for one in judged.values():
        if one.asked[at] and one.verdict[at] != MEETS and one.about not in excuses:
            code = FROM_REQUIREMENT[int(one.verdict[at])]
            message = messages.get(one.about, one.about)
            found.append(Block(one.about, code, message, requirement=True, slack=float(one.worst[at])))
    return found


def marked_on_bench(
    lines: Sequence[Line], judged: Mapping[str, Judged], at: int, excuses: Sequence[str], bench: Bench
) -> list[Line]:
    """Lines with `matters`: where the difference is why a requirement is not met, or changes how it stands."""
    marked = []
    at_load = bench.crystal.esr_means == "at load"
    for line in lines:
        asked = [one for one in judged.values() if line.field in rests_on(one.about, at_load)]
        matters = any(_matters(line, one, at, excuses) for one in asked)
        worse = (
            matters and line.relation == "tighter" and any(_worse_with_less(line, one, at, excuses) for one in asked)
        )
        message = f"{line.message}; {LESS_IS_WORSE}" if worse else line.message
        marked.append(replace(line, matters=matters, message=message))
    return marked


def _matters(line: Line, one: Judged, at: int, excuses: Sequence[str]) -> bool:
    if line.relation == "same" or one.about in excuses:
        return False
    before = int(one.verdict[0]) if one.asked[0] else MEETS
    after = int(one.verdict[at]) if one.asked[at] else MEETS
    return settles(line.field, line.relation, one.about, before, after)


def _worse_with_less(line: Line, one: Judged, at: int, excuses: Sequence[str]) -> bool:
    short = bool(one.asked[at]) and one.verdict[at] != MEETS and one.verdict[at] < one.verdict[0]
    return line.field == "esr_ohm" and one.about in WORSE_WITH_LESS_ESR and one.about not in excuses and short


def settles(field: str, found: Relation, about: str, before: int, after: int) -> bool:
    """True where a reading that stands so to the one before it can be why a requirement stands as it does.

    Less ESR is the tighter reading, and yet worse where the gain has a ceiling or the IC asks for a least ESR.
    """
    if found == "tighter":
        return after > before or (after < before and field == "esr_ohm" and about in WORSE_WITH_LESS_ESR)
    return after != MEETS or (found != "looser" and before != after)


def plain_blocks(swap: Swap, at: int, lines: Sequence[Line]) -> tuple[list[Line], list[Block]]:
    """Without a bench: lines with `matters`, and what is worse than the incumbent or cannot be told."""
    shift, window = swap.shift(at), swap.incumbent.tolerance.span
    same_curve = shift[0] == shift[2] == 0
    stays = same_curve or within(shift, (window.low, window.high))
    marked, blocks = [], []
    for line in lines:
        one = replace(line, matters=_matters_without_bench(line, stays))
        marked.append(one)
        if one.matters and one.relation not in KEPT:
            code = DOES_NOT_FIT if _settled_without_bench(one, swap, at) else NOT_TOLD
            said = valued(one) + ("" if code == DOES_NOT_FIT else _would_tell(one))
            silent = one.relation == "unknown" and one.incumbent is None
            blocks.append(Block(one.field, code, said, shared=silent))
    if not stays and not any(b.about in ("load_capacitance_pf", "resonance", "mode") for b in blocks):
        blocks.append(Block("shift_ppm", NOT_TOLD, f"{shift_message(swap, at)}; {A_BENCH}"))
    return marked, blocks


def _would_tell(line: Line) -> str:
    """No bench makes up for what a sheet does not state; it tells whether the board needs it."""
    if line.relation != "unknown":
        return f"; {A_BENCH}"
    return "; ask the maker" if line.field == "mode" else f"; ask the maker; {A_BENCH} whether it matters"


def _matters_without_bench(line: Line, stays: bool) -> bool:
    if line.relation == "same" or line.field in MECHANICAL:
        return False
    if line.field == "mode":
        return True
    if line.field in ("load_capacitance_pf", "motional_capacitance_ff", "resonance"):
        return not stays and (line.relation != "unknown" or line.field == "load_capacitance_pf")
    rule = rules().get(line.field)
    if rule is None or rule.asked is None:
        return False
    return rule.asked == "always" or line.incumbent is not None


def _settled_without_bench(line: Line, swap: Swap, at: int) -> bool:
    """An overtone, a series part whose shift lies past the make tolerance, a narrower range."""
    if line.relation == "unknown":
        return False
    if line.field == "operating_temperature_c":
        return True
    if line.field == "mode":
        return (swap.columns.offers[at].overtone or 1) > 1
    if line.field != "resonance" or line.candidate != "series":
        return False
    low, _, high = swap.shift(at)
    window = swap.incumbent.tolerance.span
    return bool(window.known and (low > window.high or high < window.low))


def shift_message(swap: Swap, at: int) -> str:
    """How far the frequency moves, and against what."""
    low, _, high = swap.shift(at)
    if math.isnan(low):
        return "shift: by how much the frequency moves cannot be told"
    moved = "does not move" if low == high == 0 else moved_words(low, high)
    window = swap.incumbent.tolerance.span
    if not window.known:
        return f"shift: the frequency {moved}; the incumbent's make tolerance is not stated"
    if low == high == 0:
        return "the frequency does not move"
    ends = f"{ppm_words(window.low)} to {ppm_words(window.high)} ppm"
    return f"shift: the frequency {moved}, the incumbent's make tolerance is {ends}"
