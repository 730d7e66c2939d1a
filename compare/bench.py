"""The bench: a circuit and what is asked of it, as one validated file (the data contract's section 3).

`read_bench` is the door. Inside, a key that the file leaves out holds its default; "not known" is None, never zero.
"""

from __future__ import annotations

import json
import math
import tomllib
from collections.abc import Sequence
from dataclasses import dataclass
from functools import cache, lru_cache
from pathlib import Path
from typing import Annotated, Any, Literal, Self

from pydantic import BaseModel, ConfigDict, Field, PlainValidator, ValidationError, model_validator
from pydantic_core import PydanticCustomError

from compare.benchfile import Fault, faults_in_words, syntax_fault, toml_text

Range = tuple[float, float]
SWING_TO_PEAK = {"peak to peak": 0.5, "peak": 1.0, "rms": math.sqrt(2)}
LEAST_TAKEN_STRAY_TOLERANCE = 50.0


class BenchError(ValueError):
    """A bench file that cannot be used; `faults` holds every fault, each with key, line and what was found."""

    def __init__(self, faults: Sequence[Fault], name: str) -> None:
        self.faults = tuple(faults)
        super().__init__("\n".join(fault.sentence(name) for fault in faults))


def _is_number(value: object) -> bool:
    return isinstance(value, int | float) and not isinstance(value, bool) and not math.isnan(value)


def _pair(value: Any) -> Range:
    """Two numbers, the low one first."""
    if not isinstance(value, list | tuple) or len(value) != 2 or not all(map(_is_number, value)):
        raise PydanticCustomError("pair", "must be two numbers, [low, high]")
    low, high = float(value[0]), float(value[1])
    if not (math.isfinite(low) and math.isfinite(high)):
        raise PydanticCustomError("pair", "both ends must be finite")
    if low > high:
        raise PydanticCustomError("pair", "low must not be above high")
    return low, high


def _number_or_range(value: Any) -> float | Range:
    """A positive number, or a range of positive numbers."""
    if _is_number(value):
        if not 0 < value < math.inf:
            raise PydanticCustomError("positive", "must be above 0 and finite")
        return float(value)
    if not isinstance(value, list | tuple):
        raise PydanticCustomError("number", "must be a number or [min, max]")
    low, high = _pair(value)
    if low <= 0:
        raise PydanticCustomError("positive", "must be above 0")
    return low, high


Row = tuple[float, float, float, float]


def _esr_limits(value: Any) -> float | tuple[Row, ...]:
    """A number, or rows of [from_mhz, to_mhz, load_pf, esr_max_ohm]."""
    if _is_number(value):
        return float(_positive(value))
    if not isinstance(value, list | tuple) or not value:
        raise PydanticCustomError("rows", "must be a number or a list of [from_mhz, to_mhz, load_pf, esr_max_ohm]")
    return tuple(_esr_row(row) for row in value)


def _positive(value: float) -> float:
    if not 0 < value < math.inf:
        raise PydanticCustomError("positive", "must be above 0 and finite")
    return value


def _esr_row(row: Any) -> Row:
    if not isinstance(row, list | tuple) or len(row) != 4 or not all(map(_is_number, row)):
        raise PydanticCustomError("rows", "each row must be four numbers, [from_mhz, to_mhz, load_pf, esr_max_ohm]")
    low, high, load, esr = map(float, row)
    if low > high:
        raise PydanticCustomError("rows", "from_mhz must not be above to_mhz in a row")
    if min(low, load, esr) <= 0 or not all(map(math.isfinite, (low, high, load, esr))):
        raise PydanticCustomError("rows", "all numbers of a row must be above 0 and finite")
    return low, high, load, esr


def _measured_pairs(value: Any) -> tuple[Range, ...]:
    """Rows of [fitted capacitor in pF at both ends, relative frequency error]."""
    if not isinstance(value, list | tuple):
        raise PydanticCustomError("pairs", "must be a list of [capacitor_pf, relative frequency error]")
    pairs = []
    for row in value:
        if not isinstance(row, list | tuple) or len(row) != 2 or not all(map(_is_number, row)):
            raise PydanticCustomError("pairs", "each pair must be two numbers, [capacitor_pf, relative error]")
        capacitor, error = float(row[0]), float(row[1])
        if capacitor < 0 or not math.isfinite(capacitor):
            raise PydanticCustomError("pairs", "a capacitor must not be below 0")
        if not abs(error) < 0.1:
            raise PydanticCustomError("pairs", "the error is relative: 13 ppm is 13e-6")
        pairs.append((capacitor, error))
    return tuple(pairs)


Number = Annotated[float, Field(strict=True, allow_inf_nan=False)]
Above0 = Annotated[float, Field(strict=True, allow_inf_nan=False, gt=0)]
From0 = Annotated[float, Field(strict=True, allow_inf_nan=False, ge=0)]
Above0OrInf = Annotated[float, Field(strict=True, gt=0)]
Percent = Annotated[float, Field(strict=True, allow_inf_nan=False, ge=0, le=100)]
Flag = Annotated[bool, Field(strict=True)]
Word = Annotated[str, Field(strict=True)]
Pair = Annotated[Range, PlainValidator(_pair)]
End = Literal["input", "output"]
EsrMeaning = Literal["motional", "at load"]


class _Table(BaseModel):
    model_config = ConfigDict(frozen=True, extra="forbid")

    @property
    def given(self) -> frozenset[str]:
        """The keys that the file itself gives."""
        return frozenset(self.model_fields_set)


def _default_margin(data: dict[str, Any]) -> float:
    """The marks most published: 5 for microcontrollers' MHz oscillators, 3 for watch crystals."""
    return 5.0 if data.get("frequency_mhz", 1.0) >= 1.0 else 3.0


class Requirement(_Table):
    """What is asked of the crystal in the circuit. None: not asked."""

    frequency_mhz: Above0
    total_ppm: Above0 | None = None
    use: Word | None = None
    trim_step_ppm: From0 | None = None
    temperature_c: Pair | None = None
    years: From0 = 10.0
    ageing_rule: Literal["logarithm", "linear"] = "logarithm"
    margin: Above0 = Field(default_factory=_default_margin)
    margin_source: Word = "default"
    drive_headroom: Above0 = 1.0
    startup_ms: Above0 | None = None

    @property
    def limits_ppm(self) -> Range | None:
        """Lower and upper limit on the frequency error: of `total_ppm` and the use the tighter end on each side.

        None where neither sets a limit.
        """
        ends = [] if self.total_ppm is None else [(-self.total_ppm, self.total_ppm)]
        use = None if self.use is None else uses()[self.use]
        if use is not None and use.low_ppm is not None and use.high_ppm is not None:
            ends.append((use.low_ppm, use.high_ppm))
        return (max(low for low, _ in ends), min(high for _, high in ends)) if ends else None

    @model_validator(mode="after")
    def _use_is_listed(self) -> Self:
        if self.use is not None and self.use not in uses():
            raise PydanticCustomError("use", "not in the list of uses", {"key": "use", "known": sorted(uses())})
        return self


RATING_KINDS = ("critical_transconductance_max_ms", "negative_resistance_ohm", "esr_max_ohm")


class Rating(_Table):
    """What the IC's sheet states in place of a transconductance."""

    critical_transconductance_max_ms: Above0 | None = None
    negative_resistance_ohm: Number | None = None
    esr_max_ohm: Annotated[float | tuple[Row, ...], PlainValidator(_esr_limits)] | None = None
    load_pf: Above0 | None = None
    factor_inside: Above0 = 1.0
    esr_means: EsrMeaning = "motional"
    shunt_capacitance_pf: From0 | None = None
    esr_min_ohm: From0 | None = None

    @property
    def kind(self) -> str | None:
        """The key of the three that is given, or None."""
        return next((kind for kind in RATING_KINDS if getattr(self, kind) is not None), None)

    @model_validator(mode="after")
    def _one_of_three(self) -> Self:
        stated = [kind for kind in RATING_KINDS if getattr(self, kind) is not None]
        if len(stated) > 1:
            raise PydanticCustomError(
                "one_of", f"only one of {', '.join(RATING_KINDS)} may be given", {"key": stated[1]}
            )
        if self.negative_resistance_ohm == 0:
            raise PydanticCustomError("zero", "must not be 0", {"key": "negative_resistance_ohm"})
        if isinstance(self.esr_max_ohm, tuple) and self.load_pf is not None:
            raise PydanticCustomError("beside_list", "not beside a list, whose rows hold the load", {"key": "load_pf"})
        return self


class CircuitKeys(_Table):
    """The keys that [circuit] and its conditions share."""

    transconductance_ms: Annotated[float | Range, PlainValidator(_number_or_range)] | None = None
    input_capacitor_pf: From0 | None = None
    output_capacitor_pf: From0 | None = None
    capacitor_tolerance_percent: Percent = 5.0
    input_stray_pf: From0 = 3.0
    output_stray_pf: From0 = 3.0
    across_stray_pf: From0 = 0.5
    stray_tolerance_percent: Percent = 30.0
    internal_pf: From0 = 0.0
    internal_as: Literal["per pin", "as seen by the crystal"] = "per pin"
    internal_tolerance_percent: Percent = 10.0
    series_resistor_ohm: From0 = 0.0
    amplifier_output_pf: From0 = 0.0
    feedback_resistor_kohm: Above0OrInf | None = None
    output_resistance_kohm: Above0OrInf = math.inf
    swing_v: Above0 | None = None
    swing_at: End = "input"
    swing_as: Literal["peak to peak", "peak", "rms"] = "peak to peak"
    probe_pf: From0 = 0.0
    overtone_trap: Flag = False
    limiter: Literal["transconductance", "output", "unknown"] = "transconductance"
    rating: Rating | None = None

    @property
    def transconductance_range_ms(self) -> tuple[float, float, float] | None:
        """Least, nominal (geometric mean) and greatest of the stated transconductance; None: not known."""
        if self.transconductance_ms is None:
            return None
        if isinstance(self.transconductance_ms, float):
            return (self.transconductance_ms,) * 3
        low, high = self.transconductance_ms
        return low, math.sqrt(low * high), high

    @property
    def swing_peak_v(self) -> float | None:
        return None if self.swing_v is None else self.swing_v * SWING_TO_PEAK[self.swing_as]

    @property
    def internal_at_each_pin_pf(self) -> float:
        """Two equal capacitors in series show half of each, so "as seen" is twice the figure at each pin."""
        return self.internal_pf * (1.0 if self.internal_as == "per pin" else 2.0)

    def stray_tolerance(self, key: str) -> float:
        """Percent; a stray that was taken and not given has at least 50."""
        if key in self.given:
            return self.stray_tolerance_percent
        return max(self.stray_tolerance_percent, LEAST_TAKEN_STRAY_TOLERANCE)

    def feedback_kohm(self, frequency_mhz: float) -> float:
        """The feedback resistor, or the one taken where none is given."""
        if self.feedback_resistor_kohm is not None:
            return self.feedback_resistor_kohm
        return 1000.0 if frequency_mhz >= 1.0 else 10000.0

    def node_has_no_capacitance(self, end: str) -> bool:
        """True where the low end of what is fitted and stray at `end` comes to nothing, which no formula bears."""
        fitted = getattr(self, f"{end}_capacitor_pf")
        if fitted is None:
            return False
        stray_key = f"{end}_stray_pf"
        low = fitted * (1 - self.capacitor_tolerance_percent / 100)
        low += getattr(self, stray_key) * (1 - self.stray_tolerance(stray_key) / 100)
        if end == "input" or self.series_resistor_ohm == 0:
            low += self.internal_at_each_pin_pf * (1 - self.internal_tolerance_percent / 100)
        return bool(low <= 0)


class Condition(CircuitKeys):
    """One more corner: a named state of supply and temperature, with any key of [circuit] in its place."""

    name: Word | None = None
    temperature_c: Number | None = None


class Circuit(CircuitKeys):
    condition: tuple[Condition, ...] = ()


class CrystalRules(_Table):
    """How the sheets' figures are to be read."""

    esr_means: EsrMeaning = "motional"
    series_resistor_rule: Literal["circuit", "add to ESR"] = "circuit"


class Measured(_Table):
    """What was read on the bench; every key may be left out."""

    frequency_mhz: Above0 | None = None
    probe_pf: From0 = 0.0
    probe_at: End = "output"
    stopping_resistor_ohm: From0 | None = None
    startup_ms: Above0 | None = None
    pairs: Annotated[tuple[Range, ...], PlainValidator(_measured_pairs)] = ()


@dataclass(frozen=True)
class Setting:
    """One state of the circuit: [circuit] itself (`name` empty), or a condition with the other keys as in [circuit]."""

    name: str
    temperature_c: float | None
    circuit: CircuitKeys


@lru_cache(maxsize=64)
def _settings(circuit: Circuit, _given: tuple[frozenset[str], ...]) -> tuple[Setting, ...]:
    """Every setting of a circuit. Equal circuits may differ in what was given, so that is part of the key."""
    shared = {key: getattr(circuit, key) for key in circuit.given - {"condition"}}
    settings = [Setting("", None, CircuitKeys.model_validate(shared))]
    for number, condition in enumerate(circuit.condition, start=1):
        own = {key: getattr(condition, key) for key in condition.given - {"name", "temperature_c"}}
        keys = CircuitKeys.model_validate(shared | own)
        settings.append(Setting(condition.name or f"condition {number}", condition.temperature_c, keys))
    return tuple(settings)


class Bench(_Table):
    """A circuit and what is asked of it. Equal benches write equal files."""

    requirement: Requirement
    circuit: Circuit = Circuit()
    crystal: CrystalRules = CrystalRules()
    measured: Measured | None = None

    @property
    def settings(self) -> tuple[Setting, ...]:
        """[circuit] itself first, then every condition, each with all keys resolved."""
        return _settings(self.circuit, (self.circuit.given, *(one.given for one in self.circuit.condition)))

    @property
    def taken(self) -> tuple[str, ...]:
        """A sentence for each default that is taken with a note."""
        circuit, frequency = self.circuit, self.requirement.frequency_mhz
        sentences = [
            f"circuit.{key}: not given, {getattr(circuit, key):g} pF taken, ±{circuit.stray_tolerance(key):g} %"
            for key in ("input_stray_pf", "output_stray_pf", "across_stray_pf")
            if key not in circuit.given
        ]
        if circuit.feedback_resistor_kohm is None:
            where = "from 1 MHz up" if frequency >= 1.0 else "below 1 MHz"
            taken = circuit.feedback_kohm(frequency)
            sentences.append(f"circuit.feedback_resistor_kohm: not given, {taken:g} kΩ taken, as {where}")
        if circuit.rating and circuit.rating.kind and "factor_inside" not in circuit.rating.given:
            sentences.append("circuit.rating.factor_inside: not given, 1 taken: the figure includes no safety factor")
        return tuple(sentences)

    def to_toml(self) -> str:
        """The file's text: every key that was given, and none that was not."""
        return toml_text(_given_tables(self))

    @model_validator(mode="after")
    def _capacitance_at_both_ends(self) -> Self:
        for number, setting in enumerate(self.settings):
            table = "circuit" if number == 0 else f"circuit.condition.{number - 1}"
            for end in ("input", "output"):
                if setting.circuit.node_has_no_capacitance(end):
                    key = f"{table}.{end}_capacitor_pf"
                    message = "no capacitance is left at this end once the tolerances are taken off"
                    raise PydanticCustomError("no_capacitance", message, {"key": key})
        return self


def _given_tables(table: BaseModel) -> dict[str, Any]:
    """Nested dictionaries of the keys given, in the model's order."""

    def plain(value: Any) -> Any:
        if isinstance(value, BaseModel):
            return _given_tables(value)
        if isinstance(value, tuple):
            return [plain(item) for item in value]
        return value

    names = [name for name in type(table).model_fields if name in table.model_fields_set]
    return {name: plain(getattr(table, name)) for name in names if getattr(table, name) is not None}


def read_bench(text: str, name: str) -> Bench:
    """Read a bench file; BenchError lists every fault in it, each with its key, its line and what was found."""
    text = text.removeprefix("\ufeff")
    try:
        tables = tomllib.loads(text)
    except tomllib.TOMLDecodeError as fault:
        raise BenchError([syntax_fault(str(fault))], name) from fault
    try:
        return Bench.model_validate(tables)
    except ValidationError as faults:
        raise BenchError(faults_in_words(faults.errors(), text, Bench), name) from faults


@dataclass(frozen=True)
class Use:
    """What one use of a clock allows: ends of the frequency error in ppm (None: no single number), and its evidence."""

    id: str
    use: str
    low_ppm: float | None
    high_ppm: float | None
    what_it_must_hold: str
    evidence: bool
    note: str
    sources: tuple[str, ...] = ()


@cache
def uses() -> dict[str, Use]:
    """The table of uses by id. Entries without a source are kept, marked as no evidence yet."""
    table = json.loads((Path(__file__).parent / "uses.json").read_text(encoding="utf-8"))
    return {
        row["id"]: Use(
            id=row["id"],
            use=row["use"],
            low_ppm=row["limit_ppm"]["min"],
            high_ppm=row["limit_ppm"]["max"],
            what_it_must_hold=row["what_it_must_hold"],
            evidence=bool(row["sources"]),
            note=row.get("note", ""),
            sources=tuple(source["title"] for source in row["sources"]),
        )
        for row in table["uses"]
    }
