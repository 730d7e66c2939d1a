"""Sheets and results by hand, in the data contract's shape, for the page's tests. Makers and parts are invented."""

from __future__ import annotations

from extract.model import Attributes, Note, Pads, Part, Reading, SpecSheet, When, Where


def reading(field, raw, line=1, **bounds):
    where = bounds.pop("where", Where(line=line))
    return Reading(field=field, raw=raw, where=where, **bounds)


READINGS = (
    reading("frequency_mhz", "Nominal frequency 26.000 MHz", 2, typ=26.0),
    reading("frequency_tolerance_ppm", "Tolerance at 25 °C ±10 ppm", 3, min=-10.0, max=10.0),
    reading("frequency_stability_ppm", "Over −40 to +85 °C ±12 ppm", 4, min=-12.0, max=12.0),
    reading("ageing_ppm", "Ageing, first year ±2 ppm", 5, min=-2.0, max=2.0, when=When(years=1.0)),
    reading("operating_temperature_c", "Operating −40 to +85 °C", 6, min=-40.0, max=85.0),
    reading("load_capacitance_pf", "Load capacitance 8, 10, 12 pF", 7, options=(8.0, 10.0, 12.0)),
    reading("esr_ohm", "Resonance resistance * 28 50 Ω", 8, typ=28.0, max=50.0, check="R1 or RL? the footnote says RL"),
    reading("shunt_capacitance_pf", "C0 1.1 2.0 pF", 9, typ=1.1, max=2.0),
    reading("motional_capacitance_ff", "C1 4.4 fF", 10, typ=4.4, status="inferred"),
    reading("drive_level_uw", "Drive level 200 µW max", 11, max=200.0),
)
PART = Part(
    part_number="MRB25-260-08H",
    maker="Merrowby",
    package="2.5 × 2.0",
    mode="fundamental",
    cut="AT",
    resonance="load",
    attributes=Attributes(pads=Pads(count=4, crystal=(1, 3), ground=(2, 4)), aec_q200=True),
    readings=READINGS,
)
SHEET = SpecSheet(file="merrowby_mrb25.txt", sha256="a" * 64, kind="text", parts=(PART,))
LOCKED = SpecSheet(
    file="brackenhythe_old.pdf",
    sha256="b" * 64,
    kind="pdf",
    notes=(Note(level="error", message="locked with a password; save it without one"),),
)
MAIL = """Part number ABX-26
Nominal frequency 26.000 MHz, fundamental, AT cut
Frequency tolerance ±10 ppm at 25 °C
Frequency stability ±15 ppm
Operating temperature -40 to 85 °C
Load capacitance 8 pF
ESR 50 Ω max
Shunt capacitance C0 1.2 pF max
Motional capacitance C1 2.4 fF typ
Drive level 100 µW max
Ageing ±2 ppm first year
"""
BENCH_TEXT = """
[requirement]
frequency_mhz = 26.0
total_ppm = 50.0
temperature_c = [-30.0, 60.0]
margin = 5.0
margin_source = "house rule 14"
startup_ms = 2.0

[circuit]
transconductance_ms = [4.6, 9.0]
input_capacitor_pf = 12.0
output_capacitor_pf = 12.0
capacitor_tolerance_percent = 1.0
input_stray_pf = 2.6
output_stray_pf = 2.6
across_stray_pf = 0.4
stray_tolerance_percent = 15.0
feedback_resistor_kohm = 1000.0
swing_v = 0.5

[[circuit.condition]]
name = "frost, weak battery"
temperature_c = -30.0
transconductance_ms = 3.6
input_stray_pf = 2.4
"""


def figure(low, mid, high, how="by hand", basis="derived"):
    return {"low": low, "mid": mid, "high": high, "how": how, "basis": basis}


FIGURES = {
    "motional_capacitance_ff": figure(4.4, 4.4, 4.4, "stated", "stated"),
    "motional_inductance_mh": figure(8.51, 8.52, 8.53),
    "quality_factor": figure(27000.0, 49000.0, 49000.0),
    "series_resonance_mhz": figure(25.993713, 25.993715, 25.993716),
    "parallel_resonance_mhz": figure(26.02, 26.045646, 26.05),
    "circuit_load_pf": figure(7.38, 7.698, 8.01, "A–0 14.6 pF in series with B–0 14.6 pF, and 0.4 pF"),
    "load_resonance_resistance_ohm": figure(36.0, 36.6, 81.0),
    "negative_resistance_ohm": figure(-1900.0, -1100.0, -445.0),
    "margin": figure(6.7, 23.2, 38.0, "R = 445 Ω over RL = 66 Ω is 6.7"),
    "gain_ratio": figure(6.7, 23.0, 37.0),
    "resistance_headroom": figure(6.5, 22.5, 35.0),
    "greatest_esr_ohm": figure(325.0, 600.0, 700.0),
    "allowed_esr_ohm": figure(65.0, 120.0, 140.0),
    "critical_transconductance_ms": figure(0.3, 0.31, 0.54),
    "greatest_transconductance_ms": figure(637.5, 900.0, 1200.0),
    "load_error_ppm": figure(-0.4, 8.3, 18.9),
    "trim_ppm_per_pf": figure(-29.0, -28.4, -25.0),
    "drive_level_uw": figure(3.0, 7.2, 16.7),
    "startup_ms": figure(0.17, 0.33, 0.71),
    "total_ppm": figure(-26.8, 8.3, 45.3, "make −10…+10, temperature −12…+12, ageing ±4.4, load −0.4…+18.9"),
}


def reason(about, verdict, message, estimated=()):
    return {"about": about, "verdict": verdict, "message": message, "estimated": list(estimated)}


def review(**changed):
    """A part that meets, with one reading to look at."""
    told = {
        "file": SHEET.file,
        "part_number": PART.part_number,
        "maker": PART.maker,
        "package": PART.package,
        "mode": PART.mode,
        **FIGURES,
        "contributors": {
            "margin": [{"input": "ESR", "adds": 11.6}],
            "total_ppm": [{"input": "drift over temperature", "adds": 12.0}],
            "drive_level_uw": [],
        },
        "advice": [
            {"what": "load capacitors", "values_pf": [12.0, 13.0], "load_error_ppm": 11.3, "margin": 6.4},
        ],
        "verdict": "meets",
        "reasons": [
            reason("margin", "meets", "6.7 at worst, 5 asked"),
            reason("gain_ratio", "meets", "6.7 at worst, 5 asked"),
            reason("resistance_headroom", "meets", "6.5 at worst, 5 asked"),
            reason("total_ppm", "meets", "−26.8…+45.3 ppm within ±50 ppm"),
            reason("startup_ms", "meets", "0.71 ms at worst, 2 ms asked"),
            reason("drive_level_uw", "meets", "16.7 µW at worst, 200 µW rated"),
            reason("operating_temperature_c", "meets", "−40…+85 °C holds −30…+60 °C"),
        ],
        "missing": [],
        "chosen": {"load_capacitance_pf": 8.0},
        "to_check": ["esr_ohm"],
        "questions": [],
        "slack": {
            "margin": 1.34,
            "gain_ratio": 1.34,
            "resistance_headroom": 1.30,
            "total_ppm": 1.10,
            "drive_level_uw": 11.95,
            "startup_ms": 2.81,
        },
    }
    return told | changed


def row(place, part_number, verdict="meets", slack=None, **changed):
    told = review(part_number=part_number, verdict=verdict)
    told["slack"] = told["slack"] if slack is None else slack
    known = {name: value for name, value in told["slack"].items() if value is not None}
    told["tightest"] = min(known, key=known.get) if known else None
    kept = (
        "file",
        "part_number",
        "maker",
        "package",
        "mode",
        "verdict",
        "missing",
        "chosen",
        "to_check",
        "slack",
        "reasons",
    )
    return {"place": place, **{key: told[key] for key in (*kept, "tightest", *FIGURES)}, **changed}


def ranking(*rows, notes=()):
    return {"schema": "quartzfolio/rank/1", "rows": list(rows), "notes": list(notes)}
