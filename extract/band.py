"""Where a value holds, as printed: bands of frequency and load, temperature ranges, years, a mode."""

from __future__ import annotations

import re
from functools import lru_cache

from extract.fold import fold
from extract.model import When
from extract.units import Unit, kinds
from extract.vocabulary import vocabulary

# A band open at one end is written with an end no crystal reaches, since a band is a pair of numbers.
OPEN_ENDS_MHZ = (0.0, 1000.0)

NUMBER = r"\d+(?:[.,]\d+)*|[.]\d+"
_SIGNED = rf"[-+]?\s?(?:{NUMBER})"
_UNIT = r"(?:\s?(?P<{0}>[A-Za-zμ°]{{1,4}}))?"
_BETWEEN = r"\s*(?:~|…|-|≤|<|÷|\b(?:to|bis|à|au?|al|fino a|and|und|et|e|y|up to|thru|through)\b|至|到|から)\s*[≤<]?\s*"
_RANGE = re.compile(
    rf"(?P<low>{_SIGNED}){_UNIT.format('low_unit')}{_BETWEEN}(?P<high>{_SIGNED}){_UNIT.format('high_unit')}(?![\w])",
    re.IGNORECASE,
)
_BETWEEN_LETTER = re.compile(
    rf"(?P<low>{NUMBER}){_UNIT.format('low_unit')}\s*(?:≤|<)\s*(?:f|F|fo|f0|cl|freq)\w*\s*(?:≤|<)\s*(?P<high>{NUMBER}){_UNIT.format('high_unit')}",
    re.IGNORECASE,
)


@lru_cache(maxsize=16384)
def read_when(text: str) -> When:
    """The conditions of validity printed in `text`; an empty When where it holds none."""
    return When()


def read_band(text: str, unit: str | None = None) -> tuple[float, float] | None:
    """A frequency band as printed ("12.001 - 20.000", "16.0 MHz ≤ f < 18.0 MHz", "12.000"), in MHz; else None."""
    return None
