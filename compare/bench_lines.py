"""What was measured on the bench beside what is computed, with the value to reach where nothing was measured yet."""

from __future__ import annotations

from dataclasses import dataclass

from compare.answers import FIGURES
from compare.dossier import Dossier
from compare.figures import frequency_text, number, scale, spread, with_unit
from compare.working import result_text

HEADS = ("Measured on the bench", "Computed", "To reach", "Measured", "Which says")


@dataclass(frozen=True)
class BenchLine:
    """One measurement: `key` is the bench's field, "" where none holds it."""

    key: str
    what: str
    computed: str
    to_reach: str
    measured: str
    says: str

    @property
    def cells(self) -> list[str]:
        return [self.what, self.computed, self.to_reach, self.measured or "not yet", self.says]


def bench_lines(dossier: Dossier) -> list[BenchLine]:
    """Stopping resistor, frequency, start-up, drive; and what pairs of frequencies say where there are some."""
    lines = [_resistor(dossier), _frequency(dossier), _startup(dossier), _drive(dossier)]
    read = dossier.bench.measured
    if read is not None and read.pairs:
        said = "; ".join(
            f"{FIGURES[key].name.removeprefix('Measured: ')} {result_text(key, dossier.review[key])}"
            for key in ("measured_stray_pf", "measured_motional_capacitance_ff")
        )
        pairs = "; ".join(f"{number(c)} pF: {number(error * 1e6)} ppm" for c, error in read.pairs)
        lines.append(BenchLine("measured.pairs", "Frequency with other capacitors", "", "", pairs, said))
    return lines


def _ohm(value: float | None) -> str:
    if value is None:
        return "not known"
    factor, unit = scale("Ω", value)
    return with_unit(number(value * factor), unit)


def _resistor(dossier: Dossier) -> BenchLine:
    review, read = dossier.review, dossier.bench.measured
    rn, rl = review["negative_resistance_ohm"]["mid"], review["load_resonance_resistance_ohm"]
    computed = "not known" if rn is None or rl["mid"] is None else f"{_ohm(-rn - rl['mid'])} nominal"
    reach = "not known"
    if rl["high"] is not None:
        reach = f"{_ohm((dossier.bench.requirement.margin - 1) * rl['high'])} or more"
    stops = None if read is None else read.stopping_resistor_ohm
    says = "" if stops is None else f"margin {result_text('measured_margin', review['measured_margin'])}"
    told = "" if stops is None else _ohm(stops)
    return BenchLine("measured.stopping_resistor_ohm", "Series resistor at which it stops", computed, reach, told, says)


def _frequency(dossier: Dossier) -> BenchLine:
    review, bench, read = dossier.review, dossier.bench, dossier.bench.measured
    frequency = dossier.offer.frequency_mhz
    factor, unit = scale("MHz", frequency)
    error = review["load_error_ppm"]["mid"]
    computed = "not known" if error is None else f"{frequency * (1 + error * 1e-6) * factor:.6f} {unit} nominal"
    reach, limits = "", bench.requirement.limits_ppm
    if limits is not None:
        reach = spread(*limits, "ppm") + f" of {frequency_text(frequency)}"
    measured = None if read is None else read.frequency_mhz
    told = "" if measured is None else f"{measured * factor:.6f} {unit}"
    says = ""
    if measured is not None:
        off = (measured / frequency - 1) * 1e6
        says = f"{off:+.1f} ppm; load {result_text('measured_load_pf', review['measured_load_pf'])}".replace("-", "−")
        says = review.get("measured_message", says)
    return BenchLine("measured.frequency_mhz", "Frequency at room temperature", computed, reach, told, says)


def _startup(dossier: Dossier) -> BenchLine:
    read, asked = dossier.bench.measured, dossier.bench.requirement.startup_ms
    measured = None if read is None else read.startup_ms
    told = "" if measured is None else _ms(measured)
    says = ""
    if measured is not None and asked is not None:
        says = f"{number(asked / measured)} times over"
    reach = "" if asked is None else f"within {_ms(asked)}"
    computed = result_text("startup_ms", dossier.review["startup_ms"])
    return BenchLine("measured.startup_ms", "Start-up, supply on to full swing", computed, reach, told, says)


def _ms(value: float) -> str:
    factor, unit = scale("ms", value)
    return with_unit(number(value * factor), unit)


def _drive(dossier: Dossier) -> BenchLine:
    keys = dossier.bench.settings[0].circuit
    swing = "" if keys.swing_v is None else f"{number(keys.swing_v)} V {keys.swing_as} at the {keys.swing_at} end"
    rated = dossier.offer.drive
    reach = f"at most {number(rated.span.mid)} µW" if rated.stated else "rated drive not stated"
    says = "" if keys.swing_v is None else "as given in the circuit; measured or taken, the bench file does not tell"
    computed = result_text("drive_level_uw", dossier.review["drive_level_uw"])
    return BenchLine("circuit.swing_v", "Swing, and the drive it makes", computed, reach, swing, says)
