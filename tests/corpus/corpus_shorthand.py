"""The expected readings of a corpus sheet, written in short lines, and the folder they go to.

A line is `FIELD VALUE [CONDITION ...]`, for example `esr <60 f=12:16` or `age ±3 y=1`.

VALUE: `±10` (min -10, max 10), `-40..85` (min, max), `<60` (max), `>500` (min), `18` (typ), `20/25/30` (min, typ, max,
`-` for none), `{8,10,12.5}` (options). CONDITION: `f=`, `cl=`, `t=` (low:high or one number), `y=`, `mode=`, `pkg=`
(`_` for a blank).
Marks: `bare` (printed with no bound), `flag` (printed wrongly on purpose: a reader must set a check), `also=VALUE`
(with `flag`: another value that is accepted, for what was probably meant or for the other of two that contradict).
"""

from __future__ import annotations

import json
from pathlib import Path
from typing import Any

SHEETS = Path(__file__).resolve().parent / "sheets"
SUFFIX = ".expected.json"
FIELDS = {
    "f": "frequency_mhz",
    "tol": "frequency_tolerance_ppm",
    "stab": "frequency_stability_ppm",
    "age": "ageing_ppm",
    "op": "operating_temperature_c",
    "sto": "storage_temperature_c",
    "cl": "load_capacitance_pf",
    "esr": "esr_ohm",
    "c0": "shunt_capacitance_pf",
    "c1": "motional_capacitance_ff",
    "l1": "motional_inductance_mh",
    "q": "quality_factor",
    "ratio": "capacitance_ratio",
    "pull": "pulling_sensitivity_ppm_per_pf",
    "dl": "drive_level_uw",
    "to": "turnover_temperature_c",
    "k": "parabolic_coefficient_ppm_per_c2",
    "ir": "insulation_resistance_megohm",
}
PAIRS = {"f": "frequency_mhz", "cl": "load_capacitance_pf", "t": "temperature_c"}
MODES = {"fund": "fundamental", "3rd": "third overtone", "5th": "fifth overtone"}
KINDS = {".txt": "text", ".md": "text", ".eml": "text", ".tsv": "csv", ".ods": "xlsx"}

# The usual four pads: crystal across one diagonal, the lid on the other.
PADS = {"pads": {"crystal": [1, 3], "ground": [2, 4]}}

Json = dict[str, Any]


def bounds(value: str) -> Json:
    """`min`, `typ`, `max` and `options` of a VALUE."""
    low = typical = high = None
    options: list[float] = []
    if value[0] == "±":
        low, high = -float(value[1:]), float(value[1:])
    elif value[0] == "{":
        options = [float(option) for option in value[1:-1].split(",")]
    elif value[0] == "<":
        high = float(value[1:])
    elif value[0] == ">":
        low = float(value[1:])
    elif ".." in value:
        low, high = (float(end) for end in value.split(".."))
    elif "/" in value:
        low, typical, high = (None if end == "-" else float(end) for end in value.split("/"))
    else:
        typical = float(value)
    return {"min": low, "typ": typical, "max": high, "options": options}


def reading(line: str) -> Json:
    field, value, *words = line.split()
    read: Json = {"field": FIELDS[field], **bounds(value)}
    when: Json = {}
    for word in words:
        key, _, text = word.partition("=")
        if key in PAIRS:
            ends = [float(end) for end in text.split(":")]
            when[PAIRS[key]] = [ends[0], ends[-1]]
        elif key == "y":
            when["years"] = float(text)
        elif key == "mode":
            when["mode"] = MODES[text]
        elif key == "pkg":
            when["package"] = text.replace("_", " ")
        elif key == "also":
            read.setdefault("also", []).append(bounds(text))
        else:
            read[{"bare": "bare", "flag": "flag"}[key]] = True
    if when:
        read["when"] = when
    return read


def part(number: str | None, lines: str, **identity: Any) -> Json:
    """A part with its readings; `mode`, `cut`, `maker`, `package`, `res` only where the sheet settles them."""
    named = {{"res": "resonance"}.get(key, key): MODES.get(str(value), value) for key, value in identity.items()}
    return {
        "part_number": number,
        **named,
        "readings": [reading(line) for line in lines.splitlines() if line.strip()],
    }


def keep(name: str, data: bytes | str | None, parts: list[Json], language: str, layout: str, **more: Any) -> None:
    """Write the sheet (unless `data` is None: written already) and, beside it, what a person reads from it."""
    if data is not None:
        (SHEETS / name).write_bytes(data.encode() if isinstance(data, str) else data)
    suffix = Path(name).suffix
    head = {
        "file": name,
        "kind": KINDS.get(suffix, suffix[1:]),
        "language": language,
        "layout": layout,
        **more,
    }
    text = ",\n  ".join(f'"{key}": {json.dumps(value, ensure_ascii=False)}' for key, value in head.items())
    shown = ",".join(_shown(one) for one in parts)
    (SHEETS / (name + SUFFIX)).write_text(f'{{\n  {text},\n  "parts": [{shown}]\n}}\n', encoding="utf-8")


def _shown(one: Json) -> str:
    keys = [
        f'      "{key}": {json.dumps(value, ensure_ascii=False)}' for key, value in one.items() if key != "readings"
    ]
    lines = ",\n".join("        " + json.dumps(read, ensure_ascii=False) for read in one["readings"])
    return "\n    {\n" + ",\n".join([*keys, f'      "readings": [\n{lines}\n      ]']) + "\n    }"
