"""Small sheets and benches, made by hand for the tests of the reckoning."""

from __future__ import annotations

import json
from pathlib import Path
from typing import Any

from compare.bench import Bench, read_bench
from extract.model import Part, Reading, SpecSheet, When, Where

DATA = Path(__file__).parent / "data" / "reference.json"
REFERENCE = json.loads(DATA.read_text(encoding="utf-8"))
CASES = {case["id"]: case for case in REFERENCE["cases"]}


def reading(field: str, value: float | None = None, **keys: Any) -> Reading:
    """A reading: `value` is typ; min, max, options, bare, check, status; the rest is its `when`."""
    own = {name: keys.pop(name) for name in ("min", "max", "options", "bare", "check", "status") if name in keys}
    return Reading(field=field, typ=value, when=When(**keys), raw=f"{field} as printed", where=Where(page=1), **own)


def exactly(field: str, value: float, **when: Any) -> Reading:
    """A reading with all three bounds alike, so that only the circuit moves."""
    return reading(field, value, min=value, max=value, **when)


def part(*readings: Reading, number: str = "P1", **identity: Any) -> Part:
    return Part(part_number=number, readings=readings, **({"mode": "fundamental", "cut": "AT"} | identity))


def sheet(*parts: Part, file: str = "made.csv") -> SpecSheet:
    return SpecSheet(file=file, sha256="0" * 64, kind="csv", parts=parts)


def usual(*changed: Reading, without: tuple[str, ...] = (), number: str = "P1", **identity: Any) -> Part:
    """A 16 MHz part with everything stated; `changed` readings take the place of their fields'."""
    fields = {r.field for r in changed} | set(without)
    stated = [
        reading("frequency_mhz", 16.0),
        reading("frequency_tolerance_ppm", min=-10.0, max=10.0),
        reading("frequency_stability_ppm", min=-15.0, max=15.0),
        reading("ageing_ppm", min=-1.0, max=1.0, years=1.0),
        reading("operating_temperature_c", min=-40.0, max=85.0),
        reading("load_capacitance_pf", 8.0),
        reading("esr_ohm", max=60.0),
        reading("shunt_capacitance_pf", 1.5, min=1.2, max=1.8),
        reading("motional_capacitance_ff", 4.5, min=3.6, max=5.4),
        reading("drive_level_uw", max=100.0),
    ]
    kept = [r for r in stated if r.field not in fields]
    return part(*kept, *changed, number=number, **identity)


def fork(*changed: Reading, without: tuple[str, ...] = (), **identity: Any) -> Part:
    """A 32.768 kHz tuning fork with a span of everything; `changed` readings take the place of their fields'."""
    stated = (
        reading("frequency_mhz", 0.032768),
        reading("esr_ohm", 45e3, min=30e3, max=60e3),
        exactly("load_capacitance_pf", 7.0),
        reading("shunt_capacitance_pf", 1.1, min=0.9, max=1.4),
        reading("motional_capacitance_ff", 3.0, min=2.4, max=3.6),
        reading("parabolic_coefficient_ppm_per_c2", -0.034, min=-0.040, max=-0.028),
        reading("turnover_temperature_c", 25.0, min=20.0, max=30.0),
    )
    fields = {r.field for r in changed}
    kept = [r for r in stated if r.field not in fields]
    return usual(*kept, *changed, without=("frequency_stability_ppm", *without), **({"cut": "tuning fork"} | identity))


USUAL_BENCH: dict[str, dict[str, Any]] = {
    "requirement": {"frequency_mhz": 16.0, "total_ppm": 100.0, "temperature_c": [-40.0, 85.0], "startup_ms": 10.0},
    "circuit": {
        "transconductance_ms": 8.0,
        "input_capacitor_pf": 12.0,
        "output_capacitor_pf": 12.0,
        "input_stray_pf": 3.0,
        "output_stray_pf": 3.0,
        "across_stray_pf": 0.5,
        "feedback_resistor_kohm": 1000.0,
        "swing_v": 0.8,
    },
}


def bench(changes: dict[str, dict[str, Any]] | None = None) -> Bench:
    """The usual bench with keys changed; None takes a key out."""
    tables = {name: dict(table) for name, table in USUAL_BENCH.items()}
    for name, table in (changes or {}).items():
        tables.setdefault(name, {}).update(table)
    kept = {name: {k: v for k, v in table.items() if v is not None} for name, table in tables.items()}
    return Bench.model_validate(kept)


def case_bench(case: dict[str, Any], **circuit: Any) -> Bench:
    """The bench of a reference case. "inf" in it stands for TOML's inf."""
    lines = []
    for name, table in case["bench"].items():
        lines.append(f"[{name}]")
        for key, value in (table | (circuit if name == "circuit" else {})).items():
            lines.append(f"{key} = {value if value == 'inf' else json.dumps(value)}")
    return read_bench("\n".join(lines), "case.toml")


def case_sheet(case: dict[str, Any]) -> SpecSheet:
    """The crystal of a reference case with min = typ = max throughout."""
    crystal = case["crystal"]
    fork = crystal["mode"] == "tuning fork"
    fields = ("load_capacitance_pf", "shunt_capacitance_pf", "motional_capacitance_ff", "esr_ohm")
    readings = [reading("frequency_mhz", crystal["frequency_mhz"])]
    readings += [exactly(name, crystal[name]) for name in fields if crystal.get(name) is not None]
    identity = {
        "mode": "fundamental" if fork else crystal["mode"],
        "cut": "tuning fork" if fork else "AT",
        "resonance": crystal["resonance"],
    }
    return sheet(part(*readings, number=case["id"], **identity))
