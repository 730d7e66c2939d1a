"""One line for each property of two parts: how the candidate's stands to the incumbent's, and whether it matters."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass, replace
from typing import Any

import numpy as np

from compare.columns import HIGH, LOW, MID, Columns
from compare.footprint import Fit, package_fit, pads_fit, plain
from compare.offer import Offer
from compare.relations import Relation, relation, relation_words, rules, taken_value
from compare.stated import NOTHING, Facts, Span, Taken, take
from extract.model import Attributes, Part

MECHANICAL = ("package", "pads")
LEAST_TOLD_PPM, PLAIN_TO_PPM = 0.005, 1000.0
NO_OFFER_FIELDS = ("storage_temperature_c", "insulation_resistance_megohm")


@dataclass(frozen=True)
class Line:
    """One property; `matters` is settled by what the board asks."""

    field: str
    incumbent: Any
    candidate: Any
    relation: Relation
    message: str
    matters: bool = False

    def as_json(self) -> dict[str, Any]:
        return {
            "field": self.field,
            "incumbent": self.incumbent,
            "candidate": self.candidate,
            "relation": self.relation,
            "matters": self.matters,
            "message": self.message,
        }


def valued(line: Line) -> str:
    """The line's message with both values in it: `ESR: 80 Ω max for 60 Ω max, higher, looser`."""
    old, new = line.incumbent, line.candidate
    if (
        line.field == "frequency_mhz"
        or line.field not in rules()
        or not isinstance(old, Mapping)
        or not isinstance(new, Mapping)
    ):
        return line.message
    name, _, said = line.message.partition(": ")
    apart = f"{name}: {bare_text(new)} for {bare_text(old)}"
    if said.startswith(relation_words(line.field, "different")):
        return apart + said.removeprefix(relation_words(line.field, "different"))
    return f"{apart}, {said}"


def bare_text(value: Mapping[str, Any]) -> str:
    """A value as text without the places at its end."""
    text = str(value.get("text", ""))
    return text.rpartition(" (")[0] or text


def ppm_words(value: float) -> str:
    """`+23.3`, `0`, `-666667`: with its sign, in plain digits."""
    if abs(value) < LEAST_TOLD_PPM:
        return "0"
    return f"{value:+.3g}" if abs(value) < PLAIN_TO_PPM else f"{value:+.0f}"


def moved_words(low: float, high: float) -> str:
    """`moves by +23.3 to +26.9 ppm`."""
    ends = list(dict.fromkeys((ppm_words(low), ppm_words(high))))
    return f"moves by {' to '.join(ends)} ppm"


def same_number(one: Part, other: Part) -> bool:
    """True where both sheets speak of one part: what neither states is then the same for both."""
    if one.part_number is None or other.part_number is None:
        return one == other
    makers = plain(one.maker or ""), plain(other.maker or "")
    return plain(one.part_number) == plain(other.part_number) and makers[0] == makers[1]


def lines_of(columns: Columns, at: int) -> list[Line]:
    """Every line of the part at `at` against the first one, in the order of `relations.toml`; mechanical ones after."""
    old, new = columns.offers[0], columns.offers[at]
    itself = same_number(old.part, new.part)
    lines = [_mode_line(old, new, itself), _resonance_line(old, new)]
    for field in rules():
        taken = _taken(columns, 0, field), _taken(columns, at, field)
        if any(one.stated for one in taken) or (rules()[field].asked == "always" and not _fork_stability(field, new)):
            lines.append(_field_line(field, *taken, itself))
    lines += mechanical_lines(columns, at)
    return lines + _grade_lines(old.part.attributes, new.part.attributes)


def mechanical_lines(columns: Columns, at: int) -> list[Line]:
    """Package and pads of the part at `at` against the first one's."""
    old, new = columns.offers[0].part, columns.offers[at].part
    fits = {"package": package_fit(old, new), "pads": pads_fit(old, new)}
    itself = same_number(old, new)
    return [_fit_line(name, fit, itself) for name, fit in fits.items()]


def _fork_stability(field: str, offer: Offer) -> bool:
    """A fork drifts by its parabola; no sheet states a stability for it, and none is missed."""
    return offer.fork and field == "frequency_stability_ppm"


def _taken(columns: Columns, at: int, field: str) -> Taken:
    """A field as the reckoning takes it; C1 also where it follows from L1, C0/C1, pulling or Q."""
    offer = columns.offers[at]
    if field == "frequency_mhz":
        readings = tuple(r for r in offer.part.readings if r.field == field)
        return Taken(Span.at(offer.frequency_mhz), readings[:1])
    if field == "load_capacitance_pf":
        return offer.load
    if field in NO_OFFER_FIELDS:
        return take(Facts.of(offer.part), field, replace(offer.case, temperature_c=None))
    taken = offer.taken().get(field, NOTHING)
    if field == "motional_capacitance_ff" and not taken.stated and not columns.motional_estimated[at]:
        span = columns.motional_ff[:, :, at]
        return Taken(Span(float(span[:, LOW].min()), float(span[0, MID]), float(span[:, HIGH].max())))
    return taken


def _field_line(field: str, old: Taken, new: Taken, itself: bool) -> Line:
    found = relation(field, old, new)
    silent = not old.stated and not new.stated
    if silent and itself:
        found = "same"
    values = taken_value(field, old), taken_value(field, new)
    return Line(field, *values, found, _message(field, old, new, found))


def _message(field: str, old: Taken, new: Taken, found: Relation) -> str:
    if found != "unknown" and (old.stated or new.stated):
        return f"{rules()[field].name}: {relation_words(field, found)}"
    name = rules()[field].name
    if not old.stated and not new.stated:
        return f"{name}: neither sheet states it"
    if not new.stated:
        return f"{name}: the candidate's sheet does not state it"
    if not old.stated:
        return f"{name}: the incumbent's sheet does not state it"
    typical = "the candidate's" if new.typical_only else "the incumbent's"
    return f"{name}: {typical} is printed as typical with no limit, which promises nothing"


def _mode_line(old: Offer, new: Offer, itself: bool) -> Line:
    if old.mode is None or new.mode is None:
        who = "neither sheet states" if old.mode == new.mode else "one sheet does not state"
        found: Relation = "same" if itself and old.mode == new.mode else "unknown"
        return Line("mode", old.mode, new.mode, found, f"mode: {who} it; above 20 MHz overtones are sold too")
    if old.overtone == new.overtone:
        return Line("mode", old.mode, new.mode, "same", "mode: the same")
    order = new.overtone or 1
    if order > 1:
        runs = frequency_words(new.frequency_mhz / order)
        message = f"mode: {new.mode} for {old.mode}: where nothing suppresses its fundamental it runs at about {runs}"
        return Line("mode", old.mode, new.mode, "different", f"{message}, a {part_word(order)} of the nominal")
    message = f"mode: {new.mode} for {old.mode}: an overtone trap may stop it"
    return Line("mode", old.mode, new.mode, "different", message)


def part_word(order: int) -> str:
    return {3: "third", 5: "fifth", 7: "seventh", 9: "ninth"}.get(order, f"1/{order}")


def frequency_words(frequency_mhz: float) -> str:
    return f"{frequency_mhz:.4g} MHz" if frequency_mhz >= 1 else f"{frequency_mhz * 1e3:.4g} kHz"


def _resonance_line(old: Offer, new: Offer) -> Line:
    before, after = ("series" if offer.series else "load" for offer in (old, new))
    if before == after:
        return Line("resonance", before, after, "same", "resonance: the same")
    runs = (
        "a series-resonant part runs high in a loaded circuit"
        if new.series
        else ("a load-resonant part runs low where the circuit presents no load")
    )
    return Line("resonance", before, after, "different", f"resonance: {after} for {before}: {runs}")


def _fit_line(name: str, fit: Fit, itself: bool) -> Line:
    silent = fit.relation == "unknown" and fit.incumbent == fit.candidate
    found: Relation = "same" if silent and itself else fit.relation
    return Line(name, fit.incumbent, fit.candidate, found, f"{name}: {fit.message}")


GRADES: Mapping[str, tuple[str, Callable[[Any], Any]]] = {
    "aec_q200": ("AEC-Q200", int),
    "moisture_level": ("moisture level", lambda stated: -_leading_number(stated)),
    "reflow_peak_c": ("reflow peak temperature", lambda stated: stated),
}
"""Name of each line of grade, and a number that is greater for the better one."""
SUPPLY = {"status": "life-cycle status", "lead_time": "lead time", "price": "price"}


def _leading_number(text: Any) -> float:
    digits = "".join(character for character in str(text) if character.isdigit())
    return float(digits[:1]) if digits else float("nan")


def _grade_lines(old: Attributes, new: Attributes) -> list[Line]:
    """Grade and supply: no part of the circuit's verdict, each said where either sheet states it."""
    lines = []
    for name in (*GRADES, *SUPPLY):
        own, other = getattr(old, name), getattr(new, name)
        if own is None and other is None:
            continue
        lines.append(Line(name, own, other, grade_relation(name, own, other), _grade_message(name, own, other)))
    return lines


def grade_relation(name: str, old: Any, new: Any) -> Relation:
    if old is None or new is None:
        return "unknown"
    if old == new:
        return "same"
    if name not in GRADES:
        return "different"
    before, after = (GRADES[name][1](value) for value in (old, new))
    if np.isnan(before) or np.isnan(after):
        return "different"
    return "same" if before == after else "tighter" if after > before else "looser"


def _grade_message(name: str, old: Any, new: Any) -> str:
    called = GRADES[name][0] if name in GRADES else SUPPLY[name]
    found = grade_relation(name, old, new)
    if found == "unknown":
        who = "the candidate's" if new is None else "the incumbent's"
        return f"{called}: {who} sheet does not state it, which is not a no"
    if found in ("looser", "different"):
        return (
            f"{called}: {new} for {old}: no part of the circuit's verdict; look whether product or assembly ask for it"
        )
    return f"{called}: {'the same' if found == 'same' else 'better than the incumbent'}"
