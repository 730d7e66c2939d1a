"""The bench file as text: where a key stands in it, its faults in words, and writing it."""

from __future__ import annotations

import difflib
import json
import math
import re
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass
from typing import Any

from pydantic import BaseModel
from pydantic_core import ErrorDetails

HEADER = re.compile(r"^\s*(?P<open>\[\[?)\s*(?P<name>[^\]]+?)\s*\]\]?\s*(?:#.*)?$")
KEY = re.compile(r"""^\s*(?P<key>(?:[\w-]+|"[^"]*"|'[^']*')(?:\s*\.\s*(?:[\w-]+|"[^"]*"|'[^']*'))*)\s*=""")
Location = tuple[str | int, ...]


@dataclass(frozen=True)
class Fault:
    """One thing wrong with a bench file. `line` counts from 1; None where the key is not in the file."""

    key: str
    line: int | None
    message: str

    def sentence(self, name: str) -> str:
        place = f"{name}, line {self.line}" if self.line is not None else name
        return f"{place}: {self.key}: {self.message}" if self.key else f"{place}: {self.message}"


def syntax_fault(message: str) -> Fault:
    """A fault of TOML itself, with the line that the parser names."""
    found = re.search(r"\s*\(at line (\d+), column (\d+)\)", message)
    if not found:
        return Fault("", None, f"not readable as TOML: {message.removesuffix(' (at end of document)')} at the end")
    said = message.replace(found[0], "")
    return Fault("", int(found[1]), f"not readable as TOML: {said} at column {found[2]}")


def faults_in_words(errors: Sequence[ErrorDetails], text: str, model: type[BaseModel]) -> list[Fault]:
    """Every fault that validation found, in the order of the file, each once."""
    lines = key_lines(text)
    faults: dict[str, Fault] = {}
    for error in errors:
        if error["type"] == "default_factory_not_called":
            continue  # follows from another fault of the same table, which is told
        location = _location(error)
        key = _dotted(location)
        faults.setdefault(key, Fault(key, _nearest_line(location, lines), _message(error, location, model)))
    return sorted(faults.values(), key=lambda fault: fault.line or 0)


def key_lines(text: str) -> dict[Location, int]:
    """Each key and table of the file with its line. Tables of an array carry their number, counted from 0."""
    lines: dict[Location, int] = {}
    counts: dict[Location, int] = {}
    table: Location = ()
    for number, line in enumerate(text.splitlines(), start=1):
        if header := HEADER.match(line):
            table = _parts(header["name"])
            if header["open"] == "[[":
                counts[table] = counts.get(table, -1) + 1
                table = (*table, counts[table])
            else:
                table = _numbered(table, counts)
            lines.setdefault(table, number)
        elif found := KEY.match(line):
            path = (*table, *_parts(found["key"]))
            for end in range(len(table) + 1, len(path) + 1):
                lines.setdefault(path[:end], number)
            for inside in re.findall(r"[{,]\s*([\w-]+)\s*=", line[found.end() :]):
                lines.setdefault((*path, inside), number)
    return lines


def _parts(dotted: str) -> Location:
    return tuple(part.strip().strip("\"'") for part in dotted.split("."))


def _numbered(table: Location, counts: Mapping[Location, int]) -> Location:
    """A sub-table of an array belongs to the array's last entry."""
    for end in range(len(table) - 1, 0, -1):
        if table[:end] in counts:
            return (*table[:end], counts[table[:end]], *table[end:])
    return table


def _location(error: ErrorDetails) -> Location:
    """Where the fault lies, down to the key that a check across keys names."""
    key = (error.get("ctx") or {}).get("key")
    if key is None:
        return error["loc"]
    return (*error["loc"], *(int(part) if part.isdigit() else part for part in str(key).split(".")))


def _nearest_line(location: Location, lines: Mapping[Location, int]) -> int | None:
    """The key's line; for a key that is missing, that of the table which lacks it."""
    for end in range(len(location), 0, -1):
        if location[:end] in lines:
            return lines[location[:end]]
    return None


def _dotted(location: Location) -> str:
    """`circuit.condition[1].swing_v`: entries of an array count from 1, as a person does."""
    text = ""
    for part in location:
        text += f"[{part + 1}]" if isinstance(part, int) else f".{part}" if text else part
    return text


def _message(error: ErrorDetails, location: Location, model: type[BaseModel]) -> str:
    kind, context, found = error["type"], error.get("ctx") or {}, error["input"]
    if kind == "missing":
        return "must be given" + (", with its frequency_mhz" if location == ("requirement",) else "")
    if kind == "extra_forbidden":
        return f"unknown key{_suggestion(location, model)}"
    if kind == "use":
        wrong = found["use"] if isinstance(found, Mapping) else getattr(found, "use", "")
        close = difflib.get_close_matches(str(wrong), context["known"], n=1, cutoff=0.5)
        meant = f' (did you mean "{close[0]}"?)' if close else ""
        return f'"{wrong}" is not in the list of uses{meant}: {", ".join(context["known"])}'
    said = {
        "greater_than": "must be above {gt:g}",
        "greater_than_equal": "must not be below {ge:g}",
        "less_than_equal": "must not be above {le:g}",
        "float_type": "must be a number",
        "finite_number": "must be a finite number",
        "bool_type": "must be true or false",
        "string_type": 'must be text in quotation marks ("...")',
        "literal_error": "must be {expected}",
        "model_type": "must be a table",
        "tuple_type": "must be a list of tables",
    }.get(kind)
    message = said.format(**context) if said else error["msg"]
    shown = _found(found)
    return f"{message}, got {shown}" if shown else message


def _found(value: object) -> str:
    """What stands in the file, as the file would write it; empty for a whole table."""
    if isinstance(value, Mapping | BaseModel):
        return ""
    return toml_value(value) if isinstance(value, bool | int | float | str | list | tuple) else str(value)


def _suggestion(location: Location, model: type[BaseModel]) -> str:
    """`; did you mean circuit.swing_v?`: the nearest key of the same table, else the table that has it."""
    tables = dict(_tables(model))
    home = tuple(part for part in location[:-1] if isinstance(part, str))
    wrong = str(location[-1])
    elsewhere = [path for path, keys in tables.items() if wrong in keys and path != home]
    if elsewhere:
        return f"; {wrong} belongs in [{'.'.join(elsewhere[0])}]" if elsewhere[0] else f"; write [{wrong}]"
    close = difflib.get_close_matches(wrong, tables.get(home, ()), n=1, cutoff=0.6)
    if close:
        return f"; did you mean {'.'.join((*home, close[0]))}?"
    for path, keys in tables.items():
        if close := difflib.get_close_matches(wrong, keys, n=1, cutoff=0.8):
            return f"; did you mean {close[0]} of [{'.'.join(path)}]?"
    return ""


def _tables(model: type[BaseModel], path: tuple[str, ...] = ()) -> Iterable[tuple[tuple[str, ...], tuple[str, ...]]]:
    """Every table of the file with its keys, found by walking the model's own fields."""
    yield path, tuple(model.model_fields)
    for name, field in model.model_fields.items():
        for inner in _models_in(field.annotation):
            yield from _tables(inner, (*path, name))


def _models_in(annotation: Any) -> Iterable[type[BaseModel]]:
    if isinstance(annotation, type) and issubclass(annotation, BaseModel):
        yield annotation
    for argument in getattr(annotation, "__args__", ()):
        yield from _models_in(argument)


def toml_text(tables: Mapping[str, Any]) -> str:
    """TOML of nested dictionaries: plain keys first, then tables, then lists of tables."""
    return "\n".join(_table_lines(tables, ())).strip() + "\n"


def _table_lines(table: Mapping[str, Any], path: tuple[str, ...]) -> Iterable[str]:
    inner = {key: value for key, value in table.items() if isinstance(value, Mapping)}
    lists = {key: value for key, value in table.items() if _is_list_of_tables(value)}
    plain = {key: value for key, value in table.items() if key not in inner and key not in lists}
    for key, value in plain.items():
        yield f"{key} = {toml_value(value)}"
    for key, value in inner.items():
        yield ""
        yield f"[{'.'.join((*path, key))}]"
        yield from _table_lines(value, (*path, key))
    for key, values in lists.items():
        for value in values:
            yield ""
            yield f"[[{'.'.join((*path, key))}]]"
            yield from _table_lines(value, (*path, key))


def _is_list_of_tables(value: object) -> bool:
    return isinstance(value, list) and bool(value) and all(isinstance(item, Mapping) for item in value)


def toml_value(value: object) -> str:
    """One value as TOML writes it."""
    if isinstance(value, bool):
        return "true" if value else "false"
    if isinstance(value, float):
        return str(value).replace("Infinity", "inf") if math.isfinite(value) else str(value)
    if isinstance(value, int):
        return str(value)
    if isinstance(value, list | tuple):
        return "[" + ", ".join(toml_value(item) for item in value) + "]"
    # A JSON string is a TOML basic string but for DEL, which TOML wants escaped.
    return json.dumps(str(value), ensure_ascii=False).replace("\x7f", "\\u007f")
