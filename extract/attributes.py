"""Grade, handling and supply of a part: pads, AEC-Q200, moisture level, reflow peak, status, price, lead time."""

from __future__ import annotations

import re
from collections.abc import Mapping, Sequence
from functools import cache, lru_cache

from extract.fold import fold, key
from extract.meaning import identity_words
from extract.model import Attributes, Pads
from extract.vocabulary import vocabulary

# Between the numbers and what they are for: "are connected to the", "reliés au".
_VERB = r"(?:\s?[:=-]|[^\d;,.:()]{0,24}?(?<![^\W\d_]))\s?"


@cache
def _pads_for(use: str) -> re.Pattern[str]:
    """Numbers of pads with what they are for, "crystal" or "ground", behind them or, joined by "on", before them."""
    words = identity_words()["pads"]
    joins, uses, names, on, verbs = (
        "|".join(map(re.escape, words[key])) for key in ("joins", use, "names", "on", "verbs")
    )
    # Without a name before it a list begins only where no number of the same list stands before it.
    start = rf"(?:(?:{names})\s?:?\s?|(?<!\d,)(?<!\d, )(?<![\w./#+、・&-]))"
    numbers = rf"{start}(#?\d(?:\s?(?:{joins})\s?#?\d)*)(?![\d.,]*\d)"
    behind = rf"{numbers}(?:\s?(?:{verbs})\s?|{_VERB})(?:{uses})"
    before = rf"(?:{uses})\s?(?:{on})\s?{numbers}"
    return re.compile(rf"(?i){behind}|{before}")


def attributes_of(stated: Mapping[str, str], texts: Sequence[str] = ()) -> Attributes:
    """Attributes from labelled texts, and pads from the lines that name them."""
    price, lead_time = _without_lead_time(stated.get("price", ""))
    reflow = re.search(r"\d{3}", stated.get("reflow_peak_c", ""))
    return Attributes(
        pads=_pads([stated.get("pads", ""), *texts]),
        aec_q200=_yes_or_no(stated.get("aec_q200")) if "aec_q200" in stated else _qualified(texts),
        moisture_level=stated.get("moisture_level"),
        reflow_peak_c=float(reflow[0]) if reflow else None,
        status=stated.get("status"),
        price=price or None,
        lead_time=stated.get("lead_time") or lead_time or None,
    )


def _without_lead_time(price: str) -> tuple[str, str]:
    """The price and the lead time of a text that states both ("0.31 EUR, delivery 10 weeks")."""
    for run in vocabulary().attributes.runs(price):
        if run.meaning == "lead_time" and run.start > 0:
            return price[: run.start].rstrip(" ,;:("), price[run.end :].strip(" ,;:=)")
    return price, ""


def _yes_or_no(text: str | None) -> bool | None:
    if text is None:
        return None
    yes, no = ({key(word) for word in vocabulary().phrases.get(name, ())} for name in ("yes", "no"))
    said = {key(text), *map(key, text.split())}
    if said & no:
        return False
    return True if said & yes or "q200" in key(text) else None


_QUALIFIED = re.compile(r"(?i)\bAEC[\s-]?Q[\s-]?200\b")


@lru_cache(maxsize=8192)
def _names_q200(text: str) -> bool:
    return _QUALIFIED.search(fold(text)) is not None


def _qualified(texts: Sequence[str]) -> bool | None:
    """True where a line names AEC-Q200 and withdraws nothing; None where none does."""
    lines = [fold(text) for text in texts if _names_q200(text)]
    if not lines or any(re.search(r"(?i)\b(?:not|no|non|nicht|on request|optional)\b", line) for line in lines):
        return None
    return True


def _pads(texts: Sequence[str]) -> Pads | None:
    crystal: tuple[int, ...] | None = None
    ground: tuple[int, ...] | None = None
    for text in texts:
        crystal = crystal or _pads_named(text, "crystal")
        ground = ground or _pads_named(text, "ground")
    if crystal is None and ground is None:
        return None
    # The highest number is the count only where all pads are told of.
    count = max(*crystal, *ground) if crystal and ground else None
    return Pads(count=count, crystal=crystal, ground=ground)


@lru_cache(maxsize=8192)
def _pads_named(text: str, what: str) -> tuple[int, ...] | None:
    """The pads that a line gives to the crystal or to ground; every part of a list asks the same lines."""
    lists = [_numbers(found[1] or found[2]) for found in _pads_for(what).finditer(fold(text))]
    pads = lists[0] if lists else ()
    if len(lists) > 1 and all(len(each) == 1 for each in lists):
        # "#1 crystal, #2 GND, #3 crystal, #4 GND": a use named for each pad by itself.
        pads = tuple(dict.fromkeys(each[0] for each in lists))
    # A crystal has two ends: one pad alone is a list that was not read whole.
    return pads if pads and (what == "ground" or len(pads) > 1) else None


def _numbers(text: str) -> tuple[int, ...]:
    return tuple(int(digit) for digit in re.findall(r"\d", text))
