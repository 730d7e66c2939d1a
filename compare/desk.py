"""What a person has set, as one frozen `Desk`, and the bench that it comes to.

No Streamlit here: page.py makes a `Desk` anew from its widgets at each run and draws what these functions return.
"""

from __future__ import annotations

import copy
import tomllib
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from functools import cached_property
from pathlib import Path
from typing import Any

from compare.bench import Bench, BenchError, read_bench
from compare.benchfile import Fault, toml_text
from compare.figures import frequency_text
from compare.typed import Field, Typed, fields, shown, understand

Path_ = tuple[str | int, ...]
PRIVACY = "Sheets stay on this machine."
NO_SHEETS = "Drop some, paste text, or open the orchard example."
STILL_READING = "The first sheet is being read; what is finished shows at once."
NOTHING_OPEN = "No sheets are open. Add some, or look at the orchard example: invented sheets, and a circuit with them."
NO_PARTS = "None of the sheets that are open gave a part: Sheets says why."
NO_CIRCUIT = "The parts are read, but cannot be judged: what is asked and the circuit are not set."
NO_EXAMPLE = "The orchard example is not part of this installation: it lies in the project’s folder sample_specs."


@dataclass(frozen=True)
class Desk:
    """What a person has set.

    `typed`: text by field key, conditions as `condition.0.swing_v`. `kept`: keys whose unlikely value a person
    confirmed, with the text confirmed. `carried`: what a loaded bench file holds that no field shows, as nested tables.
    """

    typed: Mapping[str, str] = field(default_factory=dict)
    kept: frozenset[tuple[str, str]] = frozenset()
    carried: Mapping[str, Any] = field(default_factory=dict)
    conditions: int = 0

    @cached_property
    def understood(self) -> dict[str, Typed]:
        """Each field that is not blank, as it was understood."""
        said = {}
        for key, text in self.typed.items():
            asked = field_of(key)
            if text.strip() and asked.kind == "number":
                said[key] = understand(text, asked, kept=(key, text) in self.kept)
        return said

    @cached_property
    def faults(self) -> dict[str, str]:
        """A sentence for each field that is not used as it stands, by field key; "" holds what concerns no field."""
        return {key: said.fault for key, said in self.understood.items() if said.fault} | self._assembled[2]

    @property
    def bench(self) -> Bench | None:
        """The bench, where what was set makes one; a field with a fault is left out of it."""
        return self._assembled[0]

    @property
    def bench_text(self) -> str:
        """The bench as a file's text."""
        return self._assembled[1]

    def without_last_condition(self) -> Desk:
        """The same with the last condition taken away."""
        last = self.conditions - 1
        typed = {key: text for key, text in self.typed.items() if not key.startswith(f"condition.{last}.")}
        carried = copy.deepcopy(dict(self.carried))
        if carried.get("circuit", {}).get("condition"):
            carried["circuit"]["condition"] = carried["circuit"]["condition"][:last]
        return Desk(typed, self.kept, carried, last)

    @cached_property
    def _assembled(self) -> tuple[Bench | None, str, dict[str, str]]:
        if not any(self.typed.values()):
            return None, "", {}
        tables, faults = _tables(self)
        text = toml_text(tables)
        try:
            return read_bench(text, "the circuit"), text, faults
        except BenchError as wrong:
            return None, text, faults | {field_key(fault.key): _in_short(fault) for fault in wrong.faults}


def field_of(key: str) -> Field:
    """The field behind a key; a condition's number is no part of its field's key."""
    parts = key.split(".")
    return fields()[".".join(["condition", *parts[2:]]) if parts[0] == "condition" else key]


def _in_short(fault: Fault) -> str:
    if fault.key in ("requirement", "requirement.frequency_mhz") and fault.message.startswith("must be given"):
        return "wanted first: nothing can be judged without it"
    return fault.message


def _place(key: str) -> Path_:
    """Where a field's value stands in the file; `.low` and `.high` of a pair share a place."""
    parts = key.split(".")
    if parts[-1] in ("low", "high"):
        parts = parts[:-1]
    if parts[0] == "rating":
        return ("circuit", *parts)
    if parts[0] == "condition":
        return ("circuit", "condition", int(parts[1]), *parts[2:])
    return tuple(parts)


def field_key(place: str) -> str:
    """The field that a fault of the bench file speaks of (`circuit.condition[1].swing_v`); "" where there is none."""
    if place == "requirement":
        return "requirement.frequency_mhz"
    inner = place.removeprefix("circuit.")
    parts = (inner if inner.startswith(("rating.", "condition[")) else place).split(".")
    if parts[0].startswith("condition["):
        number = int(parts[0].removeprefix("condition[").removesuffix("]"))
        parts = ["condition", str(number - 1), *parts[1:]]
    for candidate in (".".join(parts), ".".join([*parts, "low"])):
        try:
            field_of(candidate)
        except KeyError:
            continue
        return candidate
    return ""


def _tables(desk: Desk) -> tuple[dict[str, Any], dict[str, str]]:
    """The bench file's tables from what was carried and typed, and the faults found in putting pairs together."""
    tables: dict[str, Any] = copy.deepcopy(dict(desk.carried))
    faults: dict[str, str] = {}
    if desk.conditions:
        conditions = tables.setdefault("circuit", {}).setdefault("condition", [])
        conditions += [{} for _ in range(desk.conditions - len(conditions))]
    for key in desk.typed:
        asked = field_of(key)
        if key.endswith(".high"):
            continue
        if key.endswith(".low"):
            _put_pair(tables, key.removesuffix(".low"), desk, faults)
        elif (value := _value(desk, key, asked)) is not None:
            _put(tables, _place(key), value)
    for key in desk.typed:
        if key.endswith(".high") and f"{key.removesuffix('.high')}.low" not in desk.typed:
            _put_pair(tables, key.removesuffix(".high"), desk, faults)
    return tables, faults


def _value(desk: Desk, key: str, asked: Field) -> Any:
    text = desk.typed.get(key, "").strip()
    if asked.kind == "number":
        return desk.understood[key].value if key in desk.understood else None
    if asked.kind == "flag":
        return True if text == "true" else None
    return text or None


def _put_pair(tables: dict[str, Any], key: str, desk: Desk, faults: dict[str, str]) -> None:
    low_key, high_key = f"{key}.low", f"{key}.high"
    low, high = (_value(desk, end, field_of(end)) for end in (low_key, high_key))
    held_back = any(end in desk.understood and desk.understood[end].fault for end in (low_key, high_key))
    if low is not None and high is not None:
        if low > high:
            faults[high_key] = f"{shown(high, field_of(high_key))} is below the least; neither is used"
        else:
            _put(tables, _place(low_key), [low, high] if low != high or "temperature" in key else low)
    elif low is not None and key.endswith("transconductance_ms") and not held_back:
        _put(tables, _place(low_key), low)
    elif (low is None) != (high is None) and not held_back:
        lacking = low_key if low is None else high_key
        faults[lacking] = "wanted too: the other end alone is not used"


def _put(tables: dict[str, Any], place: Path_, value: Any) -> None:
    table: Any = tables
    for step in place[:-1]:
        table = table[step] if isinstance(step, int) else table.setdefault(step, {})
    table[place[-1]] = value


def desk_from_bench(text: str, name: str) -> Desk:
    """The desk that a bench file sets; BenchError lists every fault in it."""
    read_bench(text, name)
    tables = tomllib.loads(text.removeprefix("\ufeff"))
    typed: dict[str, str] = {}
    conditions = tables.get("circuit", {}).get("condition", [])
    for asked in fields().values():
        numbered = range(len(conditions)) if asked.group == "condition" else [None]
        for at in numbered:
            key = asked.key if at is None else asked.key.replace("condition.", f"condition.{at}.")
            _take(tables, key, asked, typed)
    return Desk(typed=typed, carried=_without_empty(tables), conditions=len(conditions))


def _take(tables: dict[str, Any], key: str, asked: Field, typed: dict[str, str]) -> None:
    """Move one value out of the tables into the text of its field, unless the field cannot show it."""
    place = _place(key)
    table: Any = tables
    for step in place[:-1]:
        table = table[step] if isinstance(step, int) else table.get(step, {})
    value = table.get(place[-1])
    if value is None:
        return
    if key.endswith(".low"):
        low, *more = value if isinstance(value, list) else [value]
        typed[key] = shown(float(low), asked)
        typed[f"{key.removesuffix('.low')}.high"] = shown(float(more[0]), asked) if more else ""
        del table[place[-1]]
    elif not isinstance(value, list):
        typed[key] = shown(float(value), asked) if asked.kind == "number" else _as_text(value)
        del table[place[-1]]


def _as_text(value: Any) -> str:
    return {True: "true", False: ""}[value] if isinstance(value, bool) else str(value)


def _without_empty(tables: dict[str, Any]) -> dict[str, Any]:
    """Drop tables that are empty now; a list of conditions keeps its places."""
    kept: dict[str, Any] = {}
    for key, value in tables.items():
        inner = _without_empty(value) if isinstance(value, dict) else value
        if inner != {} and not (isinstance(inner, list) and inner and all(item == {} for item in inner)):
            kept[key] = inner
    return kept


def carried_sentence(desk: Desk) -> str:
    """What the loaded bench file holds beside the fields, so that nothing counts unseen; "" where there is nothing."""
    names = sorted(_leaves(desk.carried))
    return f"From the bench file and in use, without a field here: {', '.join(names)}." if names else ""


def _leaves(table: Mapping[str, Any], above: str = "") -> list[str]:
    names: list[str] = []
    for key, value in table.items():
        if isinstance(value, Mapping):
            names += _leaves(value, f"{above}{key}.")
        elif isinstance(value, list) and value and isinstance(value[0], Mapping):
            for number_, item in enumerate(value, start=1):
                names += _leaves(item, f"{above}{key}[{number_}].")
        else:
            names.append(f"{above}{key}")
    return names


@dataclass(frozen=True)
class Example:
    """The orchard example: its sheets, and one bench by its name."""

    sheets: Sequence[Path]
    benches: Mapping[str, Path]


def orchard_example() -> Example | None:
    """The sample sheets of the project, where they lie beside the package; None in an install without them."""
    from extract.documents.kinds import SHEET_SUFFIXES

    folder = Path(__file__).resolve().parent.parent / "sample_specs"
    if not folder.is_dir():
        return None
    files = sorted(path for path in folder.rglob("*") if path.is_file() and not path.name.startswith("."))
    sheets = [path for path in files if path.suffix.lower() in SHEET_SUFFIXES]
    benches = {_bench_title(path): path for path in files if path.suffix == ".toml"}
    return Example(sheets, benches) if sheets else None


def _bench_title(path: Path) -> str:
    try:
        requirement = tomllib.loads(path.read_text(encoding="utf-8"))["requirement"]
        return frequency_text(float(requirement["frequency_mhz"]))
    except (OSError, KeyError, TypeError, ValueError):
        return path.stem.replace("_", " ")
