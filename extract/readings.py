"""Candidates of one part -> readings: choose, join, narrow, and say where two places contradict."""

from __future__ import annotations

import math
from collections.abc import Iterable, Sequence
from dataclasses import replace

from extract import amount, plausible, trace
from extract.band import HIGHEST_MHZ, LOWEST_MHZ
from extract.candidates import Candidate
from extract.fields import field_of, fields
from extract.model import Pair, Reading, When, lean

_RANK = {"table": 0, "note": 0, "pair": 0, "prose": 1, "key": 2, "loose": 3}
_SOURCES = {
    "table": "a table's value",
    "note": "a footnote's value",
    "pair": "a labelled value",
    "prose": "a value in running text",
    "key": "an ordering key",
    "loose": "a value without a label",
}
ONE_HERTZ = 1e-6
EVERYWHERE = When()
# Several ranges under one label are a choice.
RANGES = ("operating_temperature_c", "storage_temperature_c")
# Fields that choose together: a stability brings its range along, a parabola takes the place of a stability. Beside
# these only a candidate that holds in a band is touched by another field, the frequency.
CHOSEN_TOGETHER = frozenset({"operating_temperature_c", "frequency_stability_ppm", "parabolic_coefficient_ppm_per_c2"})


def readings_of(
    candidates: Sequence[Candidate], *, cut: str | None = None, mode: str | None = None
) -> tuple[Reading, ...]:
    """The readings of one part, in the contract's order of fields, each with its `check` where one is due."""
    return _written(chosen_of(candidates), cut, mode)


def chosen_of(candidates: Sequence[Candidate]) -> list[Candidate]:
    """The candidates that become readings: which ones hangs on those of the same field, save for `CHOSEN_TOGETHER`."""
    chosen: list[Candidate] = []
    offered = _offered(candidates)
    by_field: dict[str, list[Candidate]] = {}
    for each in candidates:
        by_field.setdefault(each.field, []).append(each)
    for name in fields():
        if mine := by_field.get(name):
            chosen += _of_field([_closed(each, offered) for each in _by_temperature(mine)], offered)
    return _with_operating_range(_without_short_parabola(chosen), candidates)


def _by_temperature(candidates: list[Candidate]) -> list[Candidate]:
    """Values measured at different temperatures hold at those; one temperature alone is a test condition."""
    if len({each.measured_c or each.when.temperature_c for each in candidates} - {None}) < 2:
        return candidates
    return [
        replace(each, when=each.when.model_copy(update={"temperature_c": each.measured_c}))
        if each.measured_c is not None and each.when.temperature_c is None
        else each
        for each in candidates
    ]


def _offered(candidates: Sequence[Candidate]) -> Pair | None:
    """The range of frequencies that the part is offered in."""
    numbers = [
        number
        for each in candidates
        if each.field == "frequency_mhz" and each.source in ("table", "pair")
        for number in (each.min, each.typ, each.max, *each.options)
        if number is not None
    ]
    return (min(numbers), max(numbers)) if numbers else None


def _closed(candidate: Candidate, offered: Pair | None) -> Candidate:
    """A band with an open end ends where the offer does."""
    band = candidate.when.frequency_mhz
    if band is None or (band[0] != LOWEST_MHZ and band[1] != HIGHEST_MHZ) or offered is None:
        return candidate
    low = offered[0] if band[0] == LOWEST_MHZ else band[0]
    high = offered[1] if band[1] == HIGHEST_MHZ else band[1]
    return replace(
        candidate, when=candidate.when.model_copy(update={"frequency_mhz": (min(low, high), max(low, high))})
    )


def _of_field(candidates: list[Candidate], offered: Pair | None) -> list[Candidate]:
    if len(candidates) == 1:
        return candidates
    best = min(_rank(each) for each in candidates)
    kept = [each for each in candidates if _rank(each) == best]
    for each in candidates:
        if _rank(each) > best:
            trace.dropped(each, f"{_SOURCES[each.source]} gives way to {_SOURCES[kept[0].source]} that states it")
    if kept[0].field in RANGES:
        # Before a range elsewhere makes one of two rows for its ends look like a repeat.
        kept = _joined_halves(kept)
    kept = _without_repeats(kept)
    kept = _joined_halves(kept)
    kept = _contradictions_marked(kept)
    return _narrowed(kept, offered)


def _rank(candidate: Candidate) -> float:
    return _RANK[candidate.source] + (0.5 if candidate.inferred and candidate.source != "loose" else 0)


def _same(one: Candidate, other: Candidate) -> bool:
    return (
        one.when == other.when
        and all(_close(a, b) for a, b in zip(one.bounds[:3], other.bounds[:3], strict=True))
        and set(one.options) == set(other.options)
    )


def _close(one: float | None, other: float | None) -> bool:
    if one is None or other is None:
        return one is other
    return math.isclose(one, other, rel_tol=1e-9, abs_tol=1e-12)


def _without_repeats(candidates: Iterable[Candidate]) -> list[Candidate]:
    """The same statement in two places is one reading, at the first place; a bare number gives way to a bounded one."""
    kept: dict[int, Candidate] = {}
    placed: dict[When, list[int]] = {}
    for at, each in enumerate(candidates):
        # Only what holds everywhere can say less than what holds somewhere: a list of bands compares none with all.
        near = list(kept) if each.when == EVERYWHERE else placed.get(each.when, [])
        fuller = next((kept[k] for k in near if _same(each, kept[k]) or _says_less(each, kept[k])), None)
        if fuller is not None:
            trace.dropped(each, f"says no more than {fuller.where} does: {fuller.raw}")
            continue
        for k in sorted({*placed.get(each.when, []), *placed.get(EVERYWHERE, [])}):
            if _says_less(kept[k], each):
                trace.dropped(kept[k], f"says less than {each.where} does: {each.raw}")
                placed[kept[k].when].remove(k)
                del kept[k]
        kept[at] = each
        placed.setdefault(each.when, []).append(at)
    return list(kept.values())


def _says_less(one: Candidate, other: Candidate) -> bool:
    """Whether all that `one` states is in `other`, which states more."""
    if one.when != other.when and one.when != When():
        return False
    if one.options or other.options:
        return bool(one.typ is not None and one.typ in other.options) or (
            bool(one.options) and set(one.options) < set(other.options)
        )
    stated = [(a, b) for a, b in zip(one.bounds[:3], other.bounds[:3], strict=True) if a is not None]
    if stated and all(_close(a, b) for a, b in stated):
        return not _same(one, other)
    only = one.typ if one.min is None and one.max is None else None
    if only is None:
        return False
    if one.bare or one.field in ("frequency_tolerance_ppm", "frequency_stability_ppm", "ageing_ppm"):
        return _close(only, other.max) or (other.typ is not None and _close(only, other.typ))
    return False


def _joined_halves(candidates: list[Candidate]) -> list[Candidate]:
    """Separate rows or columns for the least and the greatest (T min, T max; typ, max) are one reading."""
    kept: list[Candidate] = []
    placed: dict[When, list[int]] = {}
    for each in candidates:
        same = placed.setdefault(each.when, [])
        joined = next(((k, both) for k in same if (both := _both(kept[k], each)) is not None), None)
        if joined is not None:
            kept[joined[0]] = joined[1]
        else:
            same.append(len(kept))
            kept.append(each)
    return kept


def _both(one: Candidate, other: Candidate) -> Candidate | None:
    if one.when != other.when or one.options or other.options:
        return None
    pairs = list(zip(one.bounds[:3], other.bounds[:3], strict=True))
    if any(a is not None and b is not None for a, b in pairs):
        return None
    if one.field in RANGES and any(each.min is None and each.max is None for each in (one, other)):
        return None
    low, typ, high = (a if a is not None else b for a, b in pairs)
    temperature = one.field in ("operating_temperature_c", "storage_temperature_c")
    stated = [number for number in (low, typ, high) if number is not None]
    if not temperature and stated != sorted(stated):
        return None
    raw = one.raw if other.raw == one.raw else f"{one.raw}; {other.raw}"
    return replace(
        one, min=low, typ=typ, max=high, raw=raw, bare=False, doubts=tuple(dict.fromkeys((*one.doubts, *other.doubts)))
    )


def _contradictions_marked(candidates: list[Candidate]) -> list[Candidate]:
    """The first of two places counts; its doubt names what the other one says, and where."""
    kept: list[Candidate] = []
    placed: dict[When, list[int]] = {}
    for each in candidates:
        same = placed.setdefault(each.when, [])
        rival = next((k for k in same if _contradicts(kept[k], each)), None)
        if rival is None:
            same.append(len(kept))
            kept.append(each)
            continue
        first = kept[rival]
        trace.dropped(each, f"contradicts {first.where}, which comes first and carries a check: {first.raw}")
        doubt = f"{each.where} says otherwise: {' '.join(each.raw.split())[:120]}"
        kept[rival] = replace(first, doubts=(*first.doubts, doubt))
    return kept


def _contradicts(first: Candidate, second: Candidate) -> bool:
    """Whether two statements for one and the same case exclude each other."""
    if first.source == "key" and second.source == "key":
        return False
    if first.field in RANGES and (first.label_where or first.where) == (second.label_where or second.where):
        return False
    return not _same_cell(first, second)


def _same_cell(one: Candidate, other: Candidate) -> bool:
    """Several values in one cell are a choice, not a contradiction."""
    return one.where == other.where and one.raw == other.raw


def _narrowed(candidates: list[Candidate], offered: Pair | None) -> list[Candidate]:
    """A general value beside banded ones holds in the rest of the offered frequencies only."""
    general = [each for each in candidates if each.when.frequency_mhz is None]
    bands = [each for each in candidates if each.when.frequency_mhz is not None]
    if not general or not bands or offered is None:
        return candidates
    kept: list[Candidate] = []
    for each in candidates:
        if each.when.frequency_mhz is not None:
            kept.append(each)
            continue
        rivals = [
            b.when.frequency_mhz for b in bands if b.when.mode in (None, each.when.mode) or each.when.mode is None
        ]
        rest = _rest(offered, [band for band in rivals if band is not None])
        if rest is None:
            kept.append(each)
        elif not rest:
            trace.dropped(each, "the banded values cover every frequency that is offered")
        kept += [replace(each, when=each.when.model_copy(update={"frequency_mhz": part})) for part in rest or ()]
    return kept


def _rest(offered: Pair, bands: Sequence[Pair]) -> list[Pair] | None:
    """What of the offered range no band covers; None for a part of one frequency."""
    if offered[0] == offered[1]:
        return [] if any(low <= offered[0] <= high for low, high in bands) else None
    rest: list[Pair] = []
    at, touched = offered[0], False
    for low, high in sorted(bands):
        if low > at:
            rest.append(
                (at, round(low - (0 if low > offered[1] else ONE_HERTZ), 9)) if low <= offered[1] else (at, offered[1])
            )
        if high >= at:
            at, touched = round(high + ONE_HERTZ, 9), True
    if at <= offered[1] or not touched:
        rest.append((at, offered[1]))
    narrow = 1e-3
    return [part for part in rest if part[1] - part[0] > narrow]


def _without_short_parabola(chosen: list[Candidate]) -> list[Candidate]:
    """Without a "stability" of 0.04 ppm beside a parabola of -0.04 ppm/°C²: shops drop the sign and the unit's end."""
    curvatures = {
        abs(number)
        for each in chosen
        if each.field == "parabolic_coefficient_ppm_per_c2"
        for number in each.bounds[:3]
        if number is not None
    }

    def short(each: Candidate) -> bool:
        stated = {abs(number) for number in each.bounds[:3] if number is not None}
        return each.field == "frequency_stability_ppm" and bool(stated) and stated <= curvatures

    return [each for each in chosen if not short(each)]


def _with_operating_range(chosen: list[Candidate], candidates: Sequence[Candidate]) -> list[Candidate]:
    """A temperature range printed only beside the stability is the operating range too."""
    stated = [each for each in chosen if each.field == "operating_temperature_c"]
    if any(each.source not in ("prose", "key", "loose") for each in stated):
        return chosen
    ranges: dict[Pair, Candidate] = {}
    for each in candidates:
        span = each.when.temperature_c
        if each.field == "frequency_stability_ppm" and span is not None and (not stated or each.source == "table"):
            ranges.setdefault(span, each)
    if stated and len(ranges) < 2:
        return chosen
    added = [
        replace(
            each,
            field="operating_temperature_c",
            min=span[0],
            typ=None,
            max=span[1],
            options=(),
            when=When(),
            bare=False,
            # That no ppm is printed is a doubt about the stability's number and none about the range beside it.
            doubts=tuple(doubt for doubt in each.doubts if not doubt.startswith(amount.UNIT_NOT_PRINTED)),
        )
        for span, each in ranges.items()
    ]
    for each in stated:
        trace.dropped(each, "a range in running text gives way to those that a table gives each stability")
    return [*(each for each in chosen if each not in stated), *added]


def _written(chosen: Sequence[Candidate], cut: str | None, mode: str | None) -> tuple[Reading, ...]:
    order = {name: index for index, name in enumerate(fields())}
    ordered = sorted(chosen, key=lambda each: order[each.field])
    plain = [_reading(each, None) for each in ordered]
    found = plausible.doubts(plain, cut, mode)
    written = [
        reading_of(each, found.get(index)) if each.doubts or index in found else plain[index]
        for index, each in enumerate(ordered)
    ]
    trace.took(written, ordered)
    return tuple(written)


def reading_of(candidate: Candidate, doubt: str | None) -> Reading:
    """The reading of a chosen candidate, its check made of the candidate's own doubts and one more."""
    reasons = dict.fromkeys([*candidate.doubts, *([doubt] if doubt else [])])
    return _reading(candidate, "; ".join(reasons) or None)


def _reading(candidate: Candidate, check: str | None) -> Reading:
    out_of_order = _out_of_order(candidate)
    reading = Reading(
        field=candidate.field,
        min=candidate.min,
        typ=candidate.typ,
        max=candidate.max,
        options=candidate.options,
        when=candidate.when,
        raw=candidate.raw or field_of(candidate.field).title,
        bare=True if candidate.bare else None,
        where=candidate.where,
        status="inferred" if candidate.inferred else "stated",
        check=check or ("bounds out of order" if out_of_order else None),
    )
    return lean(reading)


def _out_of_order(candidate: Candidate) -> bool:
    stated = [number for number in candidate.bounds[:3] if number is not None]
    return stated != sorted(stated)
