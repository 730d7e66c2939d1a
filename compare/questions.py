"""One ready sentence for each thing that a verdict wanted and nobody said: to the crystal's maker, or to the IC's."""

from __future__ import annotations

import tomllib
from functools import cache
from pathlib import Path

from compare.bench import Bench
from compare.offer import Offer


@cache
def sentences() -> dict[str, str]:
    """The sentence for each field and bench key, from `questions.toml`."""
    tables = tomllib.loads((Path(__file__).parent / "questions.toml").read_text(encoding="utf-8"))
    return {key: sentence for table in tables.values() for key, sentence in table.items()}


def question(missing: str, offer: Offer, bench: Bench, load_pf: float) -> str:
    """The sentence for one missing field or bench key; `load_pf` is the circuit's load, NaN where it is not known."""
    part = offer.part.part_number or f"the part of {offer.sheet.file}"
    product = bench.requirement.temperature_c
    return sentences()[missing].format(
        part=part,
        frequency=frequency_text(offer.frequency_mhz),
        temperature=f"{product[0]:g} to {product[1]:g} °C" if product else "its operating temperature range",
        years=f"{bench.requirement.years:g}",
        load=f"{load_pf:.3g} pF" if load_pf > 0 else "the circuit's",
    )


def frequency_text(frequency_mhz: float) -> str:
    """`16 MHz`, `32.768 kHz`."""
    return f"{frequency_mhz:.10g} MHz" if frequency_mhz >= 1 else f"{frequency_mhz * 1e3:.10g} kHz"
