"""The versions of the folio file and the steps from each to the next; a file is brought up one step at a time."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from typing import Any

FORMAT = "quartzfolio/folio"
VERSION = 2

OF_THE_ONE_CIRCUIT = ("filters", "weights", "measured", "decisions", "selection")


def _from_1(told: Mapping[str, Any]) -> dict[str, Any]:
    """Version 1 knew one circuit, `desk`, and kept slots under their bare names."""
    desk = {"typed": {}, "kept": [], "carried": {}, "conditions": 0} | told.get("desk", {})
    slots = {
        f"c1:{name}" if name in OF_THE_ONE_CIRCUIT else name: value for name, value in told.get("slots", {}).items()
    }
    others = {key: value for key, value in told.items() if key not in ("desk", "slots")}
    return others | {"at": "c1", "circuits": [{"ident": "c1", "name": "", **desk}], "slots": slots}


STEPS: Mapping[int, Callable[[Mapping[str, Any]], dict[str, Any]]] = {1: _from_1}
"""What brings `work.json` of a version to the next one."""


def upgraded(told: Any, version: int) -> Mapping[str, Any]:
    """`work.json` of `version` in the form of VERSION; TypeError where it is no table."""
    if not isinstance(told, Mapping):
        raise TypeError("work.json is no table")
    current: Mapping[str, Any] = told
    for number in range(version, VERSION):
        current = STEPS[number](current)
    return current
