"""Cases that the tests of the formulas share: the reference circuits, and the same circuits solved another way.

`reference.json` was made outside this project by an exact analysis of its own (50 digits) and confirmed with ngspice.
"""

from __future__ import annotations

import itertools
import json
from dataclasses import dataclass
from pathlib import Path

import numpy as np
from hypothesis import settings
from numpy.polynomial import Polynomial

from compare.circuit import Circuit
from compare.oscillation import Crystal

settings.register_profile("any machine", deadline=None)
settings.load_profile("any machine")

DATA = Path(__file__).parent / "data"
REFERENCE = json.loads((DATA / "reference.json").read_text(encoding="utf-8"))
CASES = {case["id"]: case for case in REFERENCE["cases"]}
PEAK_OF = {"peak to peak": 0.5, "peak": 1.0, "rms": 2**0.5}
FITTED_AND_STRAY = ("input_capacitor_pf", "output_capacitor_pf", "input_stray_pf", "output_stray_pf", "across_stray_pf")


def circuit_of(keys: dict) -> Circuit:
    """The bench's [circuit] keys, each a number or an array, as totals at each node."""
    internal = keys.get("internal_pf", 0.0) * (2 if keys.get("internal_as") == "as seen by the crystal" else 1)
    after_resistor = keys.get("series_resistor_ohm", 0.0) == 0
    return Circuit(
        input_pf=keys["input_capacitor_pf"] + keys["input_stray_pf"] + internal,
        output_pf=keys["output_capacitor_pf"] + keys["output_stray_pf"] + (internal if after_resistor else 0.0),
        across_pf=keys["across_stray_pf"],
        amplifier_output_pf=keys.get("amplifier_output_pf", 0.0) + (0.0 if after_resistor else internal),
        transconductance_ms=keys["transconductance_ms"],
        series_resistor_ohm=keys.get("series_resistor_ohm", 0.0),
        feedback_resistor_kohm=float(keys["feedback_resistor_kohm"]),
        output_resistance_kohm=float(keys.get("output_resistance_kohm", "inf")),
    )


def crystal_of(keys: dict) -> Crystal:
    load = np.inf if keys["load_capacitance_pf"] is None else keys["load_capacitance_pf"]
    return Crystal(
        keys["frequency_mhz"],
        load,
        keys["shunt_capacitance_pf"],
        keys["motional_capacitance_ff"],
        keys["esr_ohm"],
    )


def swing_of(keys: dict) -> tuple[float, str]:
    return keys["swing_v"] * PEAK_OF[keys["swing_as"]], keys["swing_at"]


def corners_of(case: dict) -> tuple[Circuit, np.ndarray]:
    """All corners of a case's tolerances, one array for each of the circuit's fields; and the transconductances."""
    asked, keys = case["corners"], dict(case["bench"]["circuit"])
    percent = {
        name: asked["capacitor_tolerance_percent" if "capacitor" in name else "stray_tolerance_percent"]
        for name in FITTED_AND_STRAY
    }
    signs = np.array(list(itertools.product((-1, 1), repeat=len(FITTED_AND_STRAY) + 1)))
    for column, name in enumerate(FITTED_AND_STRAY):
        keys[name] = keys[name] * (1 + signs[:, column] * percent[name] / 100)
    low, high = asked["transconductance_ms"]
    keys["transconductance_ms"] = np.where(signs[:, -1] < 0, low, high)
    return circuit_of(keys), keys["transconductance_ms"]


@dataclass(frozen=True)
class Loop:
    """The whole closed loop as a characteristic polynomial A(s) + gm B(s), s in units of the nominal ω.

    Made from the determinant of the node matrix by the rules of polynomials alone: no formula of the program is in it.
    """

    a: Polynomial
    b: Polynomial
    omega: float

    @classmethod
    def of(cls, circuit: Circuit, crystal: Crystal) -> Loop:
        c_in, c_out, c_across, c_amp, _, rd, rf, ro = (float(x) for x in circuit)
        frequency, load, c0, c1, r1 = (float(x) for x in crystal)
        omega = 2e6 * np.pi * frequency
        unit = omega * 1e-11  # siemens, so that every coefficient is near one
        s = Polynomial([0.0, 1.0])

        def capacitor(pf: float) -> Polynomial:
            return s * (pf * 1e-12 * omega / unit)

        gf, go = 1 / (rf * 1e3) / unit, 1 / (ro * 1e3) / unit
        x = c1 * 1e-3 / (c0 + load)
        lc = (1 + x) / omega**2  # L1 C1
        arm = Polynomial([1.0, r1 * c1 * 1e-15 * omega, lc * omega**2])
        across = capacitor(c_across + c0)
        crystal_row = (s * (c1 * 1e-15 * omega / unit), arm)

        def determinant(gm: float) -> Polynomial:
            y = [[Polynomial([0.0]) for _ in range(3)] for _ in range(3)]

            def branch(i: int, j: int | None, value: Polynomial) -> None:
                y[i][i] = y[i][i] + value
                if j is not None:
                    y[j][j] = y[j][j] + value
                    y[i][j], y[j][i] = y[i][j] - value, y[j][i] - value

            one = Polynomial([1.0])
            branch(0, None, capacitor(c_in))
            branch(1, None, capacitor(c_out))
            branch(2, None, capacitor(c_amp) + one * go)
            branch(0, 1, across)
            branch(0, 2, one * gf)
            y[2][0] = y[2][0] + gm
            if rd > 0:
                branch(1, 2, one * (1 / rd / unit))
                size = 3
            else:
                y = [[y[0][0], y[0][1] + y[0][2]], [y[1][0] + y[2][0], y[1][1] + y[1][2] + y[2][1] + y[2][2]]]
                size = 2
            plain = det([row[:size] for row in y[:size]])
            y[0][0], y[1][1], y[0][1], y[1][0] = y[0][0] + 1, y[1][1] + 1, y[0][1] - 1, y[1][0] - 1
            with_one = det([row[:size] for row in y[:size]])
            return plain * crystal_row[1] + (with_one - plain) * crystal_row[0]

        none, one_siemens = determinant(0.0), determinant(1.0)
        return cls(none, (one_siemens - none) * (1 / unit), omega)

    def pole(self, gm_siemens: float) -> complex:
        """The pole nearest to j, in rad/s."""
        roots = (self.a + self.b * gm_siemens).trim().roots()
        return complex(min(roots, key=lambda root: abs(root - 1j))) * self.omega

    def transconductance_limits(self) -> list[tuple[float, float]]:
        """(gm in S, ω/ω nominal) of every steady state within 1 % of resonance, least gm first: Im(A conj B) = 0."""
        on_axis = [on_imaginary_axis(p) for p in (self.a, self.b)]
        (a_re, a_im), (b_re, b_im) = on_axis
        zero = (a_im * b_re - a_re * b_im).trim()
        found = []
        for root in zero.roots():
            w = root.real
            if abs(root.imag) < 1e-9 and abs(w - 1) < 0.01:
                b_value = complex(b_re(w), b_im(w))
                gm = -(complex(a_re(w), a_im(w)) / b_value).real
                if gm > 0:
                    found.append((gm, w))
        return sorted(found)


def det(rows: list[list[Polynomial]]) -> Polynomial:
    if len(rows) == 1:
        return rows[0][0]
    total = Polynomial([0.0])
    for column, entry in enumerate(rows[0]):
        minor = [row[:column] + row[column + 1 :] for row in rows[1:]]
        total = total + entry * det(minor) * (-1) ** column
    return total


def on_imaginary_axis(p: Polynomial) -> tuple[Polynomial, Polynomial]:
    """Real and imaginary part of p(jw) as polynomials in w."""
    powers = [c * 1j**n for n, c in enumerate(p.coef)]
    return Polynomial([c.real for c in powers]), Polynomial([c.imag for c in powers])
