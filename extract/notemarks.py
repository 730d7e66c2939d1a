"""Footnote marks behind (or before) an amount: "(1)", "1)", "*1", "①", a raised digit. Their numbers are no values."""

from __future__ import annotations

from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from extract.tokens import Token

_GREATEST = 9
# 7, 8 and 9 pF are loads that a bracket may well offer.
_GREATEST_BESIDE_LOADS = 6
_COMPLETES = frozenset({"unit", "other", "bound", "years", "close", "request", "standard", "mode"})
_BEGINS = frozenset({"number", "pm", "compare", "bound"})


def without_marks(found: list[Token], field: str) -> list[Token]:
    """The tokens of a value without its footnote marks.

    A bracketed whole number without a unit is a mark where an amount stands complete before it ("60 Ω max (2)"), or
    before the amount begins; "10 (100 max.) µW", "2 (3)" and "(5) µW" stay values.
    """
    if not any(token.kind in ("star", "close", "raised") for token in found):
        return found
    kept: list[Token] = []
    at = depth = 0
    while at < len(found):
        if length := _mark_at(found, at, kept, depth, field):
            at += length
            continue
        token = found[at]
        depth += (token.kind == "open") - (token.kind == "close" and depth > 0)
        kept.append(token)
        at += 1
    return kept


def _mark_at(found: list[Token], at: int, kept: list[Token], depth: int, field: str) -> int:
    """How many tokens the mark at `at` takes; 0 where there is none."""
    kind = found[at].kind
    if kind in ("star", "raised") and _is_small(found, at + 1, field) and _kind(found, at + 2) not in ("unit", "other"):
        return 3 if depth == 0 and _kind(found, at + 2) == "close" else 2
    if kind == "open":
        inner = at + 2 if _kind(found, at + 1) in ("star", "raised") else at + 1
        if _is_small(found, inner, field) and _kind(found, inner + 1) == "close":
            starred = inner > at + 1
            return inner + 2 - at if starred or _is_mark(found, inner, inner + 2, kept) else 0
    if kind == "number" and depth == 0 and _is_small(found, at, field) and _kind(found, at + 1) == "close":
        return 2 if _is_mark(found, at, at + 2, kept) else 0
    return 0


def _kind(found: list[Token], at: int) -> str:
    return found[at].kind if 0 <= at < len(found) else ""


def _is_small(found: list[Token], at: int, field: str) -> bool:
    if _kind(found, at) != "number":
        return False
    number = found[at].number
    greatest = _GREATEST_BESIDE_LOADS if field == "load_capacitance_pf" else _GREATEST
    return number is not None and number.text.isdigit() and not found[at].meaning and 1 <= number.plain <= greatest


def _is_mark(found: list[Token], at: int, after: int, kept: list[Token]) -> bool:
    following = _kind(found, after)
    if following in ("unit", "other", "to", "times"):
        return False
    if not kept or kept[-1].kind in ("line", "sep"):
        return following in _BEGINS
    if kept[-1].kind != "number":
        return kept[-1].kind in _COMPLETES and any(token.kind == "number" for token in kept)
    before, number = kept[-1].number, found[at].number
    return before is not None and number is not None and before.plain > number.plain and number.plain <= 6
