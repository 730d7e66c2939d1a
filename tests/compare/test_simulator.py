"""ngspice as a judge: terminal impedance, growth of the oscillation and the steady state of circuits of our own choice.

The four decks under `data/netlists` came with the reference circuits; the others are made here. Fixed steps and the
trapezoidal rule map a pole s to (2/h) atanh(s h/2), so what ngspice shows is worked out from our pole before comparing.
"""

from __future__ import annotations

import os
import re
import shutil
import subprocess
from dataclasses import replace
from pathlib import Path

import numpy as np
import pytest
from reference_loops import CASES, DATA, Loop, circuit_of, crystal_of, swing_of

from compare.circuit import Circuit, terminal_impedance_ohm
from compare.oscillation import Crystal, analyse

pytestmark = pytest.mark.simulator
STEPS_A_CYCLE = 64
LEAST_RESISTOR_OHM = 1e-3
"""What stands for no series resistor: the simulator needs one, and loses digits to a smaller."""


@pytest.fixture(scope="module")
def ngspice() -> str:
    found = shutil.which("ngspice")
    if found is None:
        if os.environ.get("CI") == "true":
            pytest.fail("ngspice is not on the PATH, and here it must be")
        pytest.skip("ngspice is not on the PATH; it is the judge of these tests")
    return found


def run(ngspice: str, deck: Path) -> dict[str, float]:
    """What a deck prints as `name = value` or `RESULT name value`."""
    done = subprocess.run(
        [ngspice, "-b", deck.name], cwd=deck.parent, capture_output=True, text=True, timeout=300, check=False
    )
    text = done.stdout + done.stderr
    assert "RESULT" in text or "=" in text, text[-2000:]
    pairs = re.findall(
        r"^(?:RESULT\s+)?(\w+)\s*(?:=\s*|\s)([-+]?\d[\d.]*(?:e[-+]?\d+)?)", text, re.MULTILINE | re.IGNORECASE
    )
    return {name: float(value) for name, value in pairs}


CHOSEN = {
    "fork, 7 pF, bare": (
        Crystal(0.032768, 7.0, 1.1, 3.0, 50e3),
        Circuit(12.0, 13.0, 0.6, 0.0, 0.006, 0.0, 15e3, np.inf),
    ),
    "fork, 12.5 pF, series resistor into a weak output": (
        Crystal(0.032768, 12.5, 1.3, 3.3, 70e3),
        Circuit(22.0, 20.0, 1.0, 4.0, 0.02, 220e3, 10e3, 2e3),
    ),
    "4 MHz, large capacitors": (
        Crystal(4.0, 16.0, 3.0, 10.0, 100.0),
        Circuit(30.0, 30.0, 1.0, 0.0, 3.0, 0.0, 1e3, 50.0),
    ),
    "8 MHz, series resistor": (
        Crystal(8.0, 12.0, 2.5, 9.0, 80.0),
        Circuit(22.0, 24.0, 0.7, 3.0, 4.0, 1000.0, 1e3, 10.0),
    ),
    "16 MHz, unequal capacitors": (
        Crystal(16.0, 9.0, 1.0, 3.0, 60.0),
        Circuit(12.0, 27.0, 0.5, 0.0, 8.0, 0.0, 470.0, np.inf),
    ),
    "26 MHz, small part": (Crystal(26.0, 8.0, 0.7, 2.0, 40.0), Circuit(14.0, 14.0, 0.4, 0.0, 9.0, 0.0, 200.0, 20.0)),
    "32 MHz, low output resistance": (
        Crystal(32.0, 10.0, 1.2, 3.5, 40.0),
        Circuit(17.0, 18.0, 0.6, 2.0, 20.0, 47.0, 100.0, 1.5),
    ),
    "48 MHz, third overtone": (
        Crystal(48.0, 10.0, 2.5, 0.9, 60.0),
        Circuit(14.0, 15.0, 0.5, 0.0, 12.0, 0.0, 1e3, 10.0),
    ),
    "52 MHz, feedback of 47 kohm": (
        Crystal(52.0, 7.0, 0.9, 2.8, 35.0),
        Circuit(12.0, 12.0, 0.4, 0.0, 15.0, 0.0, 47.0, np.inf),
    ),
}
"""Circuits of our own; none is in the reference."""


def parameters(circuit: Circuit, crystal: Crystal) -> str:
    c_in, c_out, across, amplifier, gm, rd, rf, ro = (float(x) for x in circuit)
    frequency, load, c0, c1, r1 = (float(x) for x in crystal)
    l1 = (1 + c1 * 1e-3 / (c0 + load)) / ((2e6 * np.pi * frequency) ** 2 * c1 * 1e-15)
    resistors = {"rd": rd or LEAST_RESISTOR_OHM, "rf": min(rf * 1e3, 1e15), "ro": min(ro * 1e3, 1e15), "r1": r1}
    others = {"f": frequency * 1e6, "gm": gm * 1e-3, "l1": l1, "c1": c1 * 1e-15}
    capacitors = {"cin": c_in, "cout": c_out, "cx": across, "cp": amplifier, "c0": c0}
    values = resistors | others | {name: value * 1e-12 for name, value in capacitors.items()}
    return ".param " + " ".join(f"{name}={value:.12g}" for name, value in values.items())


NETWORK = """\
Cin a 0 {cin}
Cout b 0 {cout}
Cx a b {cx}
Rd o b {rd}
Rf o a {rf}
Ro o 0 {ro}
Cp o 0 {cp}
"""

IMPEDANCE = """\
Impedance at the crystal's terminals
{parameters}
{network}G1 o 0 a 0 {{gm}}
I1 b a dc 0 ac 1
.ac lin 1 {{f}} {{f}}
.control
set numdgt=12
run
let z = v(a) - v(b)
let re_ohm = real(z)
let im_ohm = imag(z)
print re_ohm
print im_ohm
quit
.endc
.end
"""

GROWTH = """\
Growth of the motional current from a small start
{parameters}
.param h={{1/({steps}*f)}} t1={{1500/f}} t2={{3000/f}} w={{20/f}}
{network}G1 o 0 a 0 {{gm}}
Lm b n1 {{l1}} ic=1n
Cm n1 n2 {{c1}} ic=0
Rm n2 n3 {{r1}}
Vm n3 a 0
C0 a b {{c0}}
.options method=trap reltol=1e-7 abstol=1e-20 vntol=1e-15 chgtol=1e-26 trtol=1e9
.tran {{h}} {{t2+2*w}} 0 {{h}} uic
.save i(Vm)
.meas tran i1 RMS i(Vm) from={{t1}} to={{t1+w}}
.meas tran i2 RMS i(Vm) from={{t2}} to={{t2+w}}
.end
"""


def written(folder: Path, template: str, circuit: Circuit, crystal: Crystal) -> Path:
    deck = folder / "deck.cir"
    text = template.format(parameters=parameters(circuit, crystal), network=NETWORK, steps=STEPS_A_CYCLE)
    deck.write_text(text, encoding="ascii")
    return deck


def as_stepped(pole: complex, frequency_hz: float) -> complex:
    """The pole that the trapezoidal rule shows in place of the true one."""
    step = 1 / (STEPS_A_CYCLE * frequency_hz)
    return complex(2 / step * np.arctanh(pole * step / 2))


def pole_of(circuit: Circuit, crystal: Crystal) -> complex:
    """Our growth rate, with the frequency from the polynomial of the tests (the program gives none at small signal)."""
    startup = float(analyse(circuit, crystal)["startup_ms"])
    small_signal = Loop.of(circuit, crystal).pole(float(np.asarray(circuit.transconductance_ms)) * 1e-3)
    return complex(1e3 * np.log(1e5) / startup, small_signal.imag)


@pytest.mark.parametrize("name", CHOSEN)
def test_terminal_impedance(name: str, ngspice: str, tmp_path: Path) -> None:
    crystal, circuit = CHOSEN[name]
    found = run(ngspice, written(tmp_path, IMPEDANCE, circuit, crystal))
    simulated = replace(circuit, series_resistor_ohm=circuit.series_resistor_ohm or LEAST_RESISTOR_OHM)
    ours = complex(terminal_impedance_ohm(simulated, crystal.frequency_mhz))
    assert complex(found["re_ohm"], found["im_ohm"]) == pytest.approx(ours, rel=1e-8)


@pytest.mark.parametrize("name", CHOSEN)
def test_growth(name: str, ngspice: str, tmp_path: Path) -> None:
    crystal, circuit = CHOSEN[name]
    found = run(ngspice, written(tmp_path, GROWTH, circuit, crystal))
    hertz = float(np.asarray(crystal.frequency_mhz)) * 1e6
    rate = np.log(found["i2"] / found["i1"]) / (1500 / hertz)
    assert rate == pytest.approx(as_stepped(pole_of(circuit, crystal), hertz).real, rel=1e-3)


def test_sample_deck_of_the_impedance(ngspice: str) -> None:
    case = CASES["M07"]
    found = run(ngspice, DATA / "netlists" / "impedance.cir")
    ours = complex(terminal_impedance_ohm(circuit_of(case["bench"]["circuit"]), case["crystal"]["frequency_mhz"]))
    # The deck prints six digits.
    assert complex(found["re_ohm"], found["im_ohm"]) == pytest.approx(ours, rel=1e-5)


@pytest.mark.parametrize(("deck", "name"), [("growth.cir", "M09"), ("growth_tuning_fork.cir", "T04")])
def test_sample_deck_of_the_growth(deck: str, name: str, ngspice: str) -> None:
    case = CASES[name]
    circuit, crystal = circuit_of(case["bench"]["circuit"]), crystal_of(case["crystal"])
    found = run(ngspice, DATA / "netlists" / deck)
    stepped = as_stepped(pole_of(circuit, crystal), case["crystal"]["frequency_mhz"] * 1e6)
    assert found["startup_ms"] == pytest.approx(1e3 * np.log(1e5) / stepped.real, rel=1e-3)


def test_sample_deck_of_the_steady_oscillation(ngspice: str) -> None:
    """A saturating transconductor: power in R1 at the swing asked, harmonics neglected on our side."""
    case = CASES["M11"]
    keys = case["bench"]["circuit"]
    ours = analyse(circuit_of(keys), crystal_of(case["crystal"]), *swing_of(keys))
    found = run(ngspice, DATA / "netlists" / "limit_cycle.cir")
    assert found["power_uw_at_swing"] == pytest.approx(float(ours["drive_level_uw"]), rel=0.01)


def test_two_of_the_chosen_are_tuning_forks() -> None:
    forks = [name for name, (crystal, _) in CHOSEN.items() if float(np.asarray(crystal.frequency_mhz)) == 0.032768]
    assert len(forks) == 2
    assert len(CHOSEN) >= 8
