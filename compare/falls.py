"""Where each worst value falls: the condition, and which inputs stand at which of their ends there."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np

from compare.bench import Bench
from compare.circuit import Array
from compare.columns import HIGH, LOW, Columns
from compare.corners import (
    SHUNT_FLOOR,
    Nodes,
    as_reckoned,
    corner_circuit,
    crystal_at,
    limiters_of,
    shunt_ends_and_floor,
    swing_of,
)
from compare.oscillation import Crystal, analyse
from compare.reckoning import Reckoning

WORST_END = {
    "margin": LOW,
    "gain_ratio": LOW,
    "resistance_headroom": LOW,
    "drive_level_uw": HIGH,
    "startup_ms": HIGH,
}
NODES = {"input_pf": "A–0", "output_pf": "B–0", "across_pf": "A–B", "amplifier_output_pf": "O–0"}


@dataclass(frozen=True)
class Corner:
    """One corner: the value there, the condition ("" for the circuit itself) and what stands where, in words."""

    value: float
    condition: str
    at: tuple[str, ...]

    @property
    def words(self) -> str:
        """`frost: gm least; R1 and load most`."""
        said = "; ".join(self.at)
        return f"{self.condition}: {said}" if self.condition and said else self.condition or said or "one corner only"


def worst_corners(reckoning: Reckoning, at: int) -> dict[str, Corner]:
    """The corner at which each of the five gains, drive and start-up is worst, and both ends of the load error.

    `load_error_ppm, low` and `load_error_ppm, high` are the ends that the total takes up. A corner that does not start
    is worse than any that does.
    """
    one, bench = reckoning.columns.take([at]), reckoning.bench
    found: dict[str, Corner] = {}
    wanted = {key: (key, end) for key, end in WORST_END.items()}
    wanted |= {f"load_error_ppm, {name}": ("load_error_ppm", end) for name, end in (("low", LOW), ("high", HIGH))}
    for number in range(len(bench.settings)):
        for values, corners in _every_corner(one, bench, number):
            for name, (key, end) in wanted.items():
                corner = _worst(values[key], end, corners, key)
                if corner is not None and (name not in found or _worse(corner, found[name], end)):
                    found[name] = corner
    return found


def conditions(reckoning: Reckoning, at: int) -> list[tuple[str, float | None, dict[str, float]]]:
    """For the circuit and each condition: name, temperature, and the worst margins, drive, start-up and load errors."""
    one, bench = reckoning.columns.take([at]), reckoning.bench
    rows = []
    for number, setting in enumerate(bench.settings):
        worst: dict[str, float] = {}
        for values, corners in _every_corner(one, bench, number):
            for key, end in WORST_END.items():
                corner = _worst(values[key], end, corners, key)
                if corner is not None and (key not in worst or _worse(corner, Corner(worst[key], "", ()), end)):
                    worst[key] = corner.value
        rows.append((setting.name, setting.temperature_c, worst))
    return rows


@dataclass(frozen=True)
class _Axes:
    """What the axes (part, C0, C1, R1, capacitances, gm) of the corners stand for."""

    condition: str
    crystal: Crystal
    capacitances: tuple[Array, ...]
    gain: Array
    nodes: Nodes
    floor: int | None


def _every_corner(one: Columns, bench: Bench, number: int) -> list[tuple[Mapping[str, Array], _Axes]]:
    setting = bench.settings[number]
    keys = setting.circuit
    shunt, index = shunt_ends_and_floor(one, number)
    crystal = crystal_at(one, bench, number, shunt)
    circuit, _ = corner_circuit(bench, keys, shunt)
    floor = index[SHUNT_FLOOR] if index[SHUNT_FLOOR] not in index[:SHUNT_FLOOR] else None
    stands = _Axes(
        setting.name,
        crystal,
        tuple(np.asarray(getattr(circuit, name)) for name in NODES),
        np.asarray(circuit.transconductance_ms),
        Nodes.of(as_reckoned(keys, bench)),
        floor,
    )
    return [
        (analyse(circuit, crystal, *swing_of(keys), limiter, keys.probe_pf), stands) for limiter in limiters_of(keys)
    ]


def _worst(values: Array, end: int, stands: _Axes, key: str) -> Corner | None:
    if key != "load_error_ppm" and stands.floor is not None:
        # The estimated low end of C0 counts for numbers of frequency alone.
        values = np.delete(values, stands.floor, axis=1)
    if key == "startup_ms":
        values = np.where(np.isnan(values), np.inf, values)
    if np.isnan(values).all():
        return None
    place = int(np.nanargmin(values) if end == LOW else np.nanargmax(values))
    index = np.unravel_index(place, values.shape)
    return Corner(float(values[index]), stands.condition, _words(stands, tuple(int(i) for i in index), key))


def _worse(one: Corner, other: Corner, end: int) -> bool:
    return one.value < other.value if end == LOW else one.value > other.value


def _words(stands: _Axes, index: tuple[int, ...], key: str) -> tuple[str, ...]:
    said: dict[str, list[str]] = {"least": [], "most": []}
    crystal = stands.crystal
    roots = {"gm": stands.gain, "R1": crystal.esr_ohm, "C0": crystal.shunt_capacitance_pf}
    if key in ("load_error_ppm", "startup_ms"):
        roots["C1"] = crystal.motional_capacitance_ff
    for name, values in roots.items():
        _place(said, name, np.asarray(values), index)
    middle = _capacitances(said, stands, index)
    return tuple(f"{_and(names)} {end}" for end, names in said.items() if names) + middle


def _place(said: dict[str, list[str]], name: str, values: Array, index: tuple[int, ...]) -> None:
    if np.isnan(values).all() or np.nanmin(values) == np.nanmax(values):
        return
    whole = values.reshape((1,) * (len(index) - values.ndim) + values.shape)
    at = float(whole[tuple(i if length > 1 else 0 for i, length in zip(index, whole.shape, strict=True))])
    if at == np.nanmin(values):
        said["least"].append(name)
    elif at == np.nanmax(values):
        said["most"].append(name)


def _capacitances(said: dict[str, list[str]], stands: _Axes, index: tuple[int, ...]) -> tuple[str, ...]:
    ends = {}
    for (name, node), values in zip(NODES.items(), stands.capacitances, strict=True):
        low, _, high = getattr(stands.nodes, name)
        flat = np.ravel(values)
        at = float(flat[index[4]] if len(flat) > 1 else flat[0])
        if low != high:
            ends[node] = "least" if np.isclose(at, low) else "most" if np.isclose(at, high) else ""
    if ends and len(set(ends.values())) == 1 and (end := next(iter(ends.values()))):
        said[end].append("load")
        return ()
    for node, end in ends.items():
        if end:
            said[end].append(node)
    return ()


def _and(names: list[str]) -> str:
    return names[0] if len(names) == 1 else f"{', '.join(names[:-1])} and {names[-1]}"
