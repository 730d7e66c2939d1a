"""Ordering keys -> candidates: what may be ordered, where the sheet states it nowhere else."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace

from extract import amount
from extract.candidates import Candidate, candidate_of, read, read_label_of
from extract.conditions import condition_of
from extract.entries import Entry, Key
from extract.model import When


def key_candidates(ordering: Key) -> Iterator[Candidate]:
    """What can be ordered, where the sheet states it nowhere else: one list of options, or a range for each code."""
    label = read_label_of(ordering.label.text)
    if label is None or not label.exact:
        yield from _grade_candidates(ordering)
        return
    numbers: list[float] = []
    raws = [f"{code} {piece.text}" for code, piece in ordering.choices]
    entry = Entry(ordering.label, (), label.unit or "")
    for _, piece in ordering.choices:
        for value in read(piece.text, label.field, label.unit, None, plus_minus=label.plus_minus):
            symmetric = value.min is not None and value.max is not None and value.min == -value.max
            if symmetric and value.max is not None:
                numbers.append(value.max)
            elif value.typ is not None:
                numbers.append(value.typ)
            elif value.min is not None and value.max is not None:
                found = candidate_of(entry, label, When(), piece, value)
                yield replace(found, source="key")
    if numbers:
        first = ordering.choices[0][1]
        chosen = amount.Value(None, None, None, tuple(dict.fromkeys(numbers)), When(), False, (), first.text)
        found = candidate_of(entry, label, When(), first, chosen)
        yield replace(found, source="key", raw=f"{ordering.label.text} {'; '.join(raws)}")


def _grade_candidates(ordering: Key) -> Iterator[Candidate]:
    """Codes that stand for a temperature range with its stability: a range, and a stability over it, for each."""
    for code, piece in ordering.choices:
        span = condition_of(piece.text).temperature_c
        stability = [value for value in read(piece.text, "frequency_stability_ppm") if value.max is not None]
        if span is None or len(stability) != 1:
            continue
        raw, where = f"{ordering.label.text} {code} {piece.text}", piece.where
        low, high = stability[0].min, stability[0].max
        over = When(temperature_c=span)
        yield Candidate("operating_temperature_c", *span_bounds(span), (), When(), False, raw, where, source="key")
        yield Candidate("frequency_stability_ppm", low, None, high, (), over, False, raw, where, source="key")


def span_bounds(span: tuple[float, float]) -> tuple[float, None, float]:
    """A pair as min, typ and max."""
    return span[0], None, span[1]
