"""Each number's `how` taken apart: the values it prints, put through the formula it names, give the number.

The evaluator below is its own: node matrices, polynomials and the four-element circuit, nothing of the program's. It is
given the printed line alone. Four digits are printed, so a line is right to about a thousandth.
"""

from __future__ import annotations

import math
import re

import numpy as np
import pytest
from made_sheets import bench, fork, reading, sheet, usual
from reference_loops import Loop

from compare.circuit import Circuit
from compare.oscillation import Crystal
from compare.review import review

NUMBER = r"[-+]?\d+(?:\.\d+)?(?:e[-+]?\d+)?"
UNITS = {
    "pF": 1e-12,
    "fF": 1e-15,
    "mH": 1e-3,
    "Ω": 1.0,
    "kΩ": 1e3,
    "mS": 1e-3,
    "MHz": 1e6,
    "V": 1.0,
    "": 1.0,
    "ppm": 1.0,
}
UNITS |= {"ppm/pF": 1e-6 / 1e-12}


def quantities(line: str, symbol: str) -> list[float]:
    """Every value printed behind a symbol, mid of low/mid/high, sums added up, in SI units."""
    found = []
    for values, unit in re.findall(
        rf"(?<![\w/]){re.escape(symbol)} ({NUMBER}(?:(?:/| \+ ){NUMBER})*) ?({UNIT})(?!\w)", line
    ):
        numbers = [float(text) for text in re.findall(NUMBER, values)]
        value = sum(numbers) if "+ " in values else numbers[len(numbers) // 2]
        found.append(value * UNITS[unit])
    return found


UNIT = "|".join(sorted((re.escape(unit) for unit in UNITS), key=len, reverse=True))


class Printed:
    """The values of one line, by symbol; a symbol that the formula wants and the line lacks is an error."""

    def __init__(self, line: str) -> None:
        self.line = line

    def __call__(self, symbol: str, default: float | None = None) -> float:
        found = quantities(self.line, symbol)
        if not found and default is not None:
            return default
        assert found, f"{symbol} is not printed in: {self.line}"
        return found[-1] if symbol == "CL" else found[0]

    @property
    def r1(self) -> float:
        """Motional resistance: the last printed, behind what it was turned from by the bench's rules."""
        self("R1")
        return quantities(self.line, "R1")[-1]

    @property
    def rated_load(self) -> float:
        return math.inf if "none (series resonance)" in self.line else self("rated CL")

    def circuit(self) -> Circuit:
        return Circuit(
            self("Cin") * 1e12,
            self("Cout") * 1e12,
            self("across") * 1e12,
            self("Cp", 0.0) * 1e12,
            self("gm", math.nan) * 1e3,
            self("Rd", 0.0),
            self("Rf") / 1e3,
            self("Ro", math.inf) / 1e3,
        )

    def crystal(self) -> Crystal:
        """C1 hardly moves what gain and margin come to: where the line prints none a hundredth of C0 in a thousand."""
        return Crystal(
            self("f") / 1e6,
            quantities(self.line, "rated CL")[0] * 1e12 if quantities(self.line, "rated CL") else math.inf,
            self("C0") * 1e12,
            self("C1", self("C0") / 1e5) * 1e15,
            self.r1,
        )

    def impedance(self, gm: float, omega: float, c0: float = 0.0) -> complex:
        """Z between the crystal's ends by the node matrix."""
        rd = self("Rd", 0.0)
        y = np.zeros((3, 3), dtype=complex)

        def branch(i: int, j: int | None, admittance: complex) -> None:
            y[i, i] += admittance
            if j is not None:
                y[j, j] += admittance
                y[i, j] -= admittance
                y[j, i] -= admittance

        branch(0, None, 1j * omega * self("Cin"))
        branch(1, None, 1j * omega * self("Cout"))
        branch(0, 1, 1j * omega * (self("across") + c0))
        branch(2, None, 1j * omega * self("Cp", 0.0) + 1 / self("Ro", math.inf))
        branch(0, 2, 1 / self("Rf"))
        branch(1, 2, 1 / max(rd, 1e-6))
        y[2, 0] += gm
        volts = np.linalg.solve(y, np.array([1.0, -1.0, 0.0]))
        return complex(volts[0] - volts[1])

    def steady(self, which: int = 0) -> tuple[float, float]:
        """Transconductance in S and ω of steady oscillation: 0 the critical one, -1 the greatest."""
        loop = Loop.of(self.circuit(), self.crystal())
        gm, place = loop.transconductance_limits()[which]
        return gm, place * loop.omega


def series(p: Printed) -> float:
    return p("f") / math.sqrt(1 + p("C1") / (p("C0") + p.rated_load))


def circuit_load(p: Printed) -> float:
    gm, omega = p.steady()
    return -1 / (omega * p.impedance(gm, omega).imag) * 1e12


def drive(p: Printed) -> float:
    """I through the arm with V at the input: V(b)/V(a) by the node equations at the critical gm."""
    gm, omega = p.steady()
    rd = p("Rd", 0.0)
    seen = p.impedance(gm, omega, p("C0"))
    cin, cout, cp = p("Cin"), p("Cout"), p("Cp", 0.0)
    gf, yo, gd = 1 / p("Rf"), 1 / p("Ro", math.inf) + 1j * omega * cp, 1 / max(rd, 1e-6)
    # All current of the crystal leaves through a: from b and o together back through the rest. KCL at o, then at a + b.
    # o: (yo + gf + gd) Vo + (gm - gf) Va - gd Vb = 0; a + b: (jωCin + gf) Va + (jωCout + gd) Vb - (gf + gd) Vo = 0.
    matrix = np.array([[yo + gf + gd, -gd], [-(gf + gd), 1j * omega * cout + gd]])
    _, vb = np.linalg.solve(matrix, np.array([-(gm - gf), -(1j * omega * cin + gf)]))
    volts = (
        p("V")
        * {"peak to peak": 0.5, "peak": 1.0, "rms": math.sqrt(2)}[re.search(r"V (peak to peak|peak|rms)", p.line)[1]]
    )
    if "at the output end" in p.line:
        volts /= abs(vb)
    return abs((vb - 1) * volts / seen) ** 2 * p.r1 / 2 * 1e6


def startup(p: Printed) -> float:
    pole = Loop.of(p.circuit(), p.crystal()).pole(p("gm"))
    return math.log(1e5) / pole.real * 1e3


def load_error(p: Printed) -> float:
    c0, c1 = p("C0"), p("C1")
    rated = 0.0 if "fs (series-resonant part)" in p.line else c1 / (c0 + p("rated CL"))
    here = c1 / (c0 + p("circuit's CL"))
    return (math.sqrt((1 + here) / (1 + rated)) - 1) * 1e6


def greatest_esr(p: Printed) -> float:
    return -p.impedance(p("gm"), 2 * math.pi * p("f"), p("C0")).real


def c1(p: Printed) -> float:
    c0, omega = p("C0", 0.0), 2 * math.pi * p("f", 0.0)
    if "1/(ω² L1 - 1/(C0 + CL))" in p.line:
        return 1 / (omega**2 * p("L1") - 1 / (c0 + p("rated CL"))) * 1e15
    if "C0/(C0/C1)" in p.line:
        return c0 / p("C0/C1") * 1e15
    if "2 S Ct²/(1 - 2 S Ct)" in p.line:
        ct, s = c0 + p("rated CL"), p("pulling")
        return 2 * s * ct**2 / (1 - 2 * s * ct) * 1e15
    if "1/(ωs Q R1)" in p.line:
        return 1 / (omega * p("Q") * p.r1) * 1e15
    return p("C1") * 1e15


FORMULAS = {
    "motional_capacitance_ff": ("", c1),
    "motional_inductance_mh": (
        "L1 = (1 + C1/(C0 + CL))/(ω² C1)",
        lambda p: (1 + p("C1") / (p("C0") + p.rated_load)) / ((2 * math.pi * p("f")) ** 2 * p("C1")) * 1e3,
    ),
    "quality_factor": ("Q = 1/(ωs C1 R1)", lambda p: 1 / (2 * math.pi * p("fs") * p("C1") * p.r1)),
    "series_resonance_mhz": ("fs = f/√(1 + C1/(C0 + CL))", lambda p: series(p) / 1e6),
    "parallel_resonance_mhz": ("fp = fs √(1 + C1/C0)", lambda p: p("fs") * math.sqrt(1 + p("C1") / p("C0")) / 1e6),
    "circuit_load_pf": ("CL = -1/(ω Im Z) of the circuit at its critical transconductance", circuit_load),
    "load_resonance_resistance_ohm": ("RL = R1 (1 + C0/CL)²", lambda p: p.r1 * (1 + p("C0") / p("CL")) ** 2),
    "negative_resistance_ohm": (
        "Re Z of the active circuit",
        lambda p: p.impedance(p("gm"), 2 * math.pi * p("f")).real,
    ),
    "margin": ("-Rn/RL", lambda p: quotient(p, "-Rn/RL")),
    "gain_ratio": ("gm/critical gm", lambda p: p("gm") / p("critical")),
    "resistance_headroom": (
        "-Re Z/R1, C0 taken into the circuit",
        lambda p: -p.impedance(p("gm"), 2 * math.pi * p("f"), p("C0")).real / p.r1,
    ),
    "greatest_esr_ohm": ("R1 at which R1 + Re Z = 0", greatest_esr),
    "allowed_esr_ohm": ("greatest ESR/margin", lambda p: quotient(p, "greatest ESR/margin")),
    "critical_transconductance_ms": ("least gm with Re Z + R1 = 0 and Im Z + X1 = 0", lambda p: p.steady()[0] * 1e3),
    "greatest_transconductance_ms": (
        "greatest gm with Re Z + R1 = 0 and Im Z + X1 = 0",
        lambda p: p.steady(-1)[0] * 1e3,
    ),
    "load_error_ppm": ("(f - f rated)/f rated, f = fs √(1 + C1/(C0 + CL))", load_error),
    "trim_ppm_per_pf": (
        "df/(f dCL) = -C1/(2 (C0 + CL)²)",
        lambda p: -p("C1") / (2 * (p("C0") + p("circuit's CL")) ** 2) * 1e-12 * 1e6,
    ),
    "drive_level_uw": ("P = I² R1", drive),
    "startup_ms": ("ln(10⁵)/σ", startup),
}
CLOSE = {
    "trim_ppm_per_pf": 1e-2,
    "series_resonance_mhz": 2e-7,
    "parallel_resonance_mhz": 2e-7,
    "greatest_transconductance_ms": 1e-2,
    "greatest_esr_ohm": 1e-2,
}
"""Relative. The resonances are good to the printed C1, some 1e-4 of the pull; the others to four digits."""
LOAD_STEP = {"load_error_ppm": 0.6}
"""ppm: what half a unit of the last digit of each CL and C1 comes to."""


def quotient(p: Printed, name: str) -> float:
    over, under = re.search(rf"{re.escape(name)} = ({NUMBER})/({NUMBER})", p.line).groups()
    return float(over) / float(under)


FORK_CIRCUIT = {
    "transconductance_ms": [0.008, 0.02],
    "input_capacitor_pf": 10.0,
    "output_capacitor_pf": 12.0,
    "feedback_resistor_kohm": 1e4,
    "swing_v": 0.2,
}
HEAVY = {
    "transconductance_ms": [4.0, 9.0],
    "series_resistor_ohm": 470.0,
    "output_resistance_kohm": 5.0,
    "internal_pf": 2.0,
    "amplifier_output_pf": 3.0,
    "swing_at": "output",
    "swing_as": "rms",
}
NO_C1 = ("motional_capacitance_ff",)
CASES = {
    "all stated": (usual(reading("esr_ohm", 40.0, min=30.0, max=60.0)), {}),
    "every part of the circuit": (usual(), {"circuit": HEAVY}),
    "without the series resistor": (usual(), {"circuit": HEAVY | {"series_resistor_ohm": 0.0}}),
    "a fork": (
        fork(),
        {"requirement": {"frequency_mhz": 0.032768}, "circuit": FORK_CIRCUIT},
    ),
    "series resonance": (usual(resonance="series", without=("load_capacitance_pf",)), {}),
    "ESR at the load": (usual(), {"crystal": {"esr_means": "at load"}}),
    "series resistor added to the ESR": (
        usual(),
        {"crystal": {"series_resistor_rule": "add to ESR"}, "circuit": {"series_resistor_ohm": 30.0}},
    ),
    "an IC that is rated": (
        usual(),
        {
            "circuit": {
                "transconductance_ms": None,
                "rating": {"esr_max_ohm": 100.0, "load_pf": 9.0, "factor_inside": 5.0},
            }
        },
    ),
    "C1 estimated, C0 a limit": (usual(reading("shunt_capacitance_pf", max=5.0), without=NO_C1), {}),
    "C1 from L1": (usual(reading("motional_inductance_mh", 22.0), without=NO_C1), {}),
    "C1 from C0/C1": (usual(reading("capacitance_ratio", 330.0), without=NO_C1), {}),
    "C1 from pulling": (usual(reading("pulling_sensitivity_ppm_per_pf", 25.0), without=NO_C1), {}),
    "C1 from Q": (usual(reading("quality_factor", 60_000.0), without=NO_C1), {}),
}


def reviewed(name):
    part, changes = CASES[name]
    return review([sheet(part)], bench(changes))["reviews"][0]


@pytest.mark.parametrize("name", CASES)
@pytest.mark.parametrize("key", FORMULAS)
def test_the_values_printed_give_the_number(name, key):
    found = reviewed(name)[key]
    formula, evaluate = FORMULAS[key]
    if found["how"].startswith("as stated"):
        pytest.skip("nothing was worked out")
    if "series-resonant" not in found["how"]:
        assert formula in found["how"]
    if key == "series_resonance_mhz" and "series-resonant" in found["how"]:
        assert found["mid"] == Printed(found["how"])("f") / 1e6
        return
    value = evaluate(Printed(found["how"]))
    if key in LOAD_STEP:
        assert value == pytest.approx(found["mid"], abs=LOAD_STEP[key])
    else:
        assert value == pytest.approx(found["mid"], rel=CLOSE.get(key, 2e-3))


@pytest.mark.parametrize("name", CASES)
def test_the_terms_of_the_total_add_up_to_it(name):
    total = reviewed(name)["total_ppm"]
    terms = re.findall(rf"(?:make|temperature|ageing|load error) ({NUMBER})/({NUMBER})(?![/.\\d])", total["how"])
    assert len(terms) == 4
    for side, end in enumerate(("low", "high")):
        parts = [float(term[side]) for term in terms]
        # Three digits are printed of each.
        assert sum(parts) == pytest.approx(total[end], abs=0.005 * sum(map(abs, parts)) + 0.01)


def test_the_row_of_an_esr_list_that_was_used_is_named():
    rows = [[10.0, 20.0, 12.0, 60.0], [10.0, 20.0, 8.5, 90.0], [4.0, 10.0, 8.5, 200.0]]
    rated = {"transconductance_ms": None, "rating": {"esr_max_ohm": rows, "factor_inside": 5.0}}
    found = review([sheet(usual())], bench({"circuit": rated}))["reviews"][0]
    assert "(circuit.rating.esr_max_ohm 90 at CL 8.5 pF, the row for 10 to 20 MHz)" in found["margin"]["how"]


def test_esr_at_the_load_of_a_part_without_a_rated_load_says_that_it_is_taken_as_it_stands():
    silent = usual(without=("load_capacitance_pf",))
    found = review([sheet(silent)], bench({"crystal": {"esr_means": "at load"}}))["reviews"][0]
    assert "R1 is the ESR itself, the safe side, for no rated load is stated" in found["margin"]["how"]
    assert "R1 60 Ω" in found["margin"]["how"]
