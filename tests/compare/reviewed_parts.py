"""One radio part and one tuning fork under review, for the tests of what Review and the report show."""

from __future__ import annotations

from functools import cache

import hand_made
import made_sheets
from made_sheets import reading

from compare.bench import Bench, read_bench
from compare.dossier import Dossier, dossiers

WATCH_TEXT = """
[requirement]
frequency_mhz = 0.032768
total_ppm = 300.0
temperature_c = [-20.0, 60.0]
startup_ms = 3000.0

[circuit]
transconductance_ms = 0.02
input_capacitor_pf = 12.0
output_capacitor_pf = 12.0
input_stray_pf = 1.5
output_stray_pf = 1.5
across_stray_pf = 0.3
feedback_resistor_kohm = 15000.0
swing_v = 0.2
"""


def bench(text: str = hand_made.BENCH_TEXT, **changed: str) -> Bench:
    """The bench of hand_made, with some of its lines changed: `margin="margin = 9.0"`."""
    for key, line in changed.items():
        old = next(one for one in text.splitlines() if one.startswith(f"{key} ="))
        text = text.replace(old, line)
    return read_bench(text, "bench.toml")


def part(*changed, without=(), **identity):
    """A 26 MHz part with everything stated."""
    fields = {one.field for one in changed} | set(without)
    stated = (
        reading("frequency_mhz", 26.0),
        reading("frequency_tolerance_ppm", min=-10.0, max=10.0),
        reading("frequency_stability_ppm", min=-12.0, max=12.0),
        reading("ageing_ppm", min=-2.0, max=2.0, years=1.0),
        reading("operating_temperature_c", min=-40.0, max=85.0),
        reading("load_capacitance_pf", 8.0),
        reading("esr_ohm", 28.0, max=50.0),
        reading("shunt_capacitance_pf", 1.1, min=1.0, max=1.2),
        reading("motional_capacitance_ff", 3.0, min=2.8, max=3.2),
        reading("drive_level_uw", max=200.0),
    )
    kept = [one for one in stated if one.field not in fields]
    return made_sheets.part(*kept, *changed, **({"number": "ABX-26"} | identity))


def dossier_of(one, of_bench: Bench | None = None, file: str = "offer.txt") -> Dossier:
    found, _ = dossiers([made_sheets.sheet(one, file=file)], of_bench or bench())
    return found[0]


@cache
def radio() -> Dossier:
    return dossier_of(part())


@cache
def watch() -> Dossier:
    return dossier_of(made_sheets.fork(number="ABX-32"), bench(WATCH_TEXT))
