"""Two parts by hand whose readings differ in what a test names, for the tests of substitutes on the page."""

from __future__ import annotations

import hand_made

from compare.bench import read_bench
from extract.model import Part, SpecSheet, When

BENCH = read_bench(hand_made.BENCH_TEXT, "bench.toml")


def part(number, *, maker="Merrowby", package="2.5 × 2.0", **values):
    """A part whose readings are those given, `name=(min, typ, max)`, over those of a sound one."""
    bounds = {
        "frequency_mhz": (None, 26.0, None),
        "frequency_tolerance_ppm": (-10.0, None, 10.0),
        "frequency_stability_ppm": (-12.0, None, 12.0),
        "ageing_ppm": (-2.0, None, 2.0),
        "operating_temperature_c": (-40.0, None, 85.0),
        "load_capacitance_pf": (None, 8.0, None),
        "esr_ohm": (None, None, 40.0),
        "shunt_capacitance_pf": (None, 1.0, None),
        "motional_capacitance_ff": (None, 3.0, None),
        "drive_level_uw": (None, None, 200.0),
    } | values
    readings = tuple(
        hand_made.reading(
            name, name, min=low, typ=typ, max=high, **({"when": When(years=1.0)} if name == "ageing_ppm" else {})
        )
        for name, (low, typ, high) in bounds.items()
        if (low, typ, high) != (None, None, None)
    )
    return Part(
        part_number=number,
        maker=maker,
        package=package,
        mode="fundamental",
        cut="AT",
        resonance="load",
        readings=readings,
    )


def sheet(one):
    return SpecSheet(file=f"{one.part_number}.txt", sha256="a" * 64, kind="text", parts=(one,))
