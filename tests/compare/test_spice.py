import math
import re

import pytest
from made_sheets import bench, fork, reading, sheet, usual
from test_simulator import ngspice, run  # noqa: F401 - the fixture

from compare.reckoning import reckon_sheets
from compare.spice import subcircuit

FORK = fork()
FORK_BENCH = {"requirement": {"frequency_mhz": 0.032768}, "circuit": {"transconductance_ms": 0.02}}
CHOSEN = {
    "16 MHz": (usual(reading("esr_ohm", 40.0, min=30.0, max=60.0)), {}),
    "16 MHz, series resonance": (usual(resonance="series", without=("load_capacitance_pf",)), {}),
    "fork": (FORK, FORK_BENCH),
}
SWEEP = """\
Impedance of the crystal at its two resonances
{subcircuit}
X1 a 0 {name}
I1 0 a dc 0 ac 1
.control
set numdgt=12
ac lin 40001 {low:.12g} {high:.12g}
meas ac zs min vm(a)
meas ac fs min_at vm(a)
ac lin 40001 {low_p:.12g} {high_p:.12g}
meas ac fp max_at vm(a)
quit
.endc
.end
"""


def reckoned(part, changes=None):
    return reckon_sheets([sheet(part)], bench(changes or {}))


def values_of(text):
    return {name: float(value) for name, value in re.findall(r"^([RLC][01]) \w+ \w+ (\S+)$", text, re.MULTILINE)}


def resonances(values, load_f=math.inf):
    """fs, and the load resonance by hand: f = fs √(1 + C1/(C0 + CL)); Hz."""
    fs = 1 / (2 * math.pi * math.sqrt(values["L1"] * values["C1"]))
    return fs, fs * math.sqrt(1 + values["C1"] / (values["C0"] + load_f))


@pytest.mark.simulator
@pytest.mark.parametrize("which", ["nominal", "limit"])
@pytest.mark.parametrize("name", CHOSEN)
def test_ngspice_finds_both_resonances_and_the_resistance_of_the_review(name, which, ngspice, tmp_path):  # noqa: F811
    found = reckoned(*CHOSEN[name])
    text = subcircuit(found, 0, which)
    values = values_of(text)
    fs, fp = resonances(values, 0.0)
    deck = tmp_path / "crystal.cir"
    ends = {"low": fs * (1 - 2e-5), "high": fs * (1 + 2e-5), "low_p": fp * (1 - 2e-5), "high_p": fp * (1 + 2e-5)}
    called = re.search(r"\.subckt (\w+)", text)[1]
    deck.write_text(SWEEP.format(subcircuit=text, name=called, **ends), encoding="ascii")
    seen = run(ngspice, deck)
    if which == "nominal":
        assert fs == pytest.approx(found.numbers["series_resonance_mhz"].ends[1, 0] * 1e6, rel=1e-9)
        assert fp == pytest.approx(found.numbers["parallel_resonance_mhz"].ends[1, 0] * 1e6, rel=1e-9)
    omega = 2 * math.pi * fs
    # C0 beside R1 draws the least |Z| off fs by about (ω C0 R1)² C1/(2 C0), and its value down by (ω C0 R1)²/2.
    beside = (omega * values["C0"] * values["R1"]) ** 2
    assert seen["fs"] == pytest.approx(fs, rel=2e-7 + beside * values["C1"] / values["C0"])
    assert seen["zs"] == pytest.approx(values["R1"], rel=1e-4 + beside)
    assert seen["fp"] == pytest.approx(fp, rel=2e-7 + beside * values["C1"] / values["C0"])


@pytest.mark.parametrize("which", ["nominal", "limit"])
def test_the_frequency_at_the_rated_load_is_the_nominal_one(which):
    values = values_of(subcircuit(reckoned(CHOSEN["16 MHz"][0]), 0, which))
    assert resonances(values, 8e-12)[1] == pytest.approx(16e6, rel=1e-9)


def test_a_series_part_resonates_at_its_nominal_frequency():
    values = values_of(subcircuit(reckoned(CHOSEN["16 MHz, series resonance"][0]), 0))
    assert resonances(values)[0] == pytest.approx(16e6, rel=1e-9)


def test_the_limit_has_the_greatest_resistance_and_c0_and_the_least_c1():
    nominal, limit = (values_of(subcircuit(reckoned(CHOSEN["16 MHz"][0]), 0, which)) for which in ("nominal", "limit"))
    assert (nominal["R1"], nominal["C0"], nominal["C1"]) == pytest.approx((40.0, 1.5e-12, 4.5e-15))
    assert (limit["R1"], limit["C0"], limit["C1"]) == pytest.approx((60.0, 1.8e-12, 3.6e-15))


def test_the_head_says_where_each_value_comes_from():
    head = subcircuit(reckoned(usual(reading("shunt_capacitance_pf", 1.5), without=("motional_capacitance_ff",))), 0)
    assert "* R1 60 ohm: R1 60 ohm at most, limit used for all ends (page 1)" in head
    assert "* C0 1.5 pF: C0 1.5 pF (page 1), typical alone, used as it stands" in head
    assert re.search(r"^\* C1 \S+ fF: C1 .* estimated", head, re.MULTILINE)
    assert "An estimate stands among these values" in head
    assert "An estimate is no measurement" in head


def test_names_and_comments_hold_nothing_that_a_simulator_stumbles_over():
    part = usual(number="Q-16.0/8 Ω", maker="Grünewald\n.end")
    text = subcircuit(reckoned(part), 0)
    assert text.isascii()
    assert ".subckt Q_16_0_8_nominal a b" in text
    assert [line for line in text.splitlines() if line.startswith(".")] == [
        ".subckt Q_16_0_8_nominal a b",
        ".ends Q_16_0_8_nominal",
    ]


@pytest.mark.parametrize(("without", "lacking"), [("esr_ohm", "ESR"), ("load_capacitance_pf", "rated load")])
def test_without_esr_or_rated_load_there_is_no_subcircuit(without, lacking):
    with pytest.raises(ValueError, match=f"no subcircuit of P1: no {lacking} stated"):
        subcircuit(reckoned(usual(without=(without,))), 0)
