"""Why each reading is what it is, and what became none and by which rule, as text."""

from __future__ import annotations

from collections.abc import Iterator

from compare.explain import figure
from compare.report import when_text, wrapped
from extract.candidates import Candidate, has_unit
from extract.conditions import condition_of
from extract.fields import field_of
from extract.model import Reading, SpecSheet, When
from extract.trace import Seen, Trace
from extract.units import factor

_BANDS = {
    "frequency_mhz": "band",
    "load_capacitance_pf": "load",
    "temperature_c": "temperature",
    "mode": "mode",
    "package": "package",
    "years": "years",
}


def explain_text(sheet: SpecSheet, trace: Trace) -> str:
    """Every reading of a sheet with its reasons, then what was left out and by which rule."""
    lines = wrapped(f"{sheet.file} ({sheet.kind})")
    for note in sheet.notes:
        lines += wrapped(f"{note.level}: {note.message}", "  ")
    for part in sheet.parts:
        lines += ["", *wrapped(part.part_number or "series without a part number", "  ")]
        for reading in part.readings:
            lines += _reading_lines(reading, _taken(reading, trace), trace, sheet.file)
    left_out = trace.left_out(sheet.file)
    if left_out:
        lines += ["", f"  left out: {len(left_out)}"]
    for one in left_out:
        what = f" ({field_of(one.field).title})" if one.field else ""
        lines += wrapped(f"{one.where}: {one.raw}{what}", "    ", "      ")
        lines += wrapped(one.rule, "      why      ", " " * 15)
    return "\n".join(lines)


def _taken(reading: Reading, trace: Trace) -> Candidate | None:
    """The candidate of a reading; a part holds the very objects that were reported."""
    return next((one.candidate for one in trace.taken if one.reading is reading), None)


def _value_text(reading: Reading) -> str:
    bounds = (("min", reading.min), ("typ", reading.typ), ("max", reading.max))
    said = [f"{name} {figure(value, 8)}" for name, value in bounds if value is not None]
    if reading.options:
        said.append(f"options {', '.join(figure(value, 8) for value in reading.options)}")
    return f"{', '.join(said)} {field_of(reading.field).unit}".strip()


def _reading_lines(reading: Reading, candidate: Candidate | None, trace: Trace, file: str) -> Iterator[str]:
    yield from wrapped(f"{field_of(reading.field).title}: {_value_text(reading)}, {reading.where}", "    ")
    yield from _row("printed", reading.raw)
    seen = trace.origin(candidate, file) if candidate is not None else None
    if seen is not None:
        yield from _row("label", label_reason(seen))
        yield from _row("unit", unit_reason(seen))
    elif candidate is not None:
        yield from _row("label", _without_label(candidate))
    for name, why in band_reasons(reading.when, seen):
        yield from _row(name, why)
    if reading.bare:
        yield from _row("bound", "none printed")
    if reading.check:
        yield from _row("look", reading.check)


def _row(name: str, text: str) -> list[str]:
    return wrapped(text, f"      {name:<13}", " " * 19)


def _without_label(candidate: Candidate) -> str:
    if candidate.source == "key":
        return "none: a code of the ordering key stands for it"
    if candidate.source == "loose":
        return "none: the unit and the size of the number tell what it is"
    return "none: taken from what is printed beside another value"


def label_reason(seen: Seen) -> str:
    """How the label was known."""
    label, title = seen.label, field_of(seen.label.field).title
    printed = " ".join(seen.printed_label.split())
    if label.symbol:
        return f"{printed!r} is a symbol of {title}"
    if label.exact:
        return f"{printed!r} is a known wording of {title}"
    rest = f"; {label.rest!r} is left over" if label.rest else ""
    return f"{printed!r} only holds or resembles a wording of {title}{rest}"


def unit_reason(seen: Seen) -> str:
    """Where the unit was printed."""
    field = seen.label.field
    cells = [text for what, text in seen.texts if what == "the value's cell"]
    if any(has_unit(text, field) for text in cells):
        return "printed behind the number"
    if seen.label.unit:
        return f"{seen.label.unit!r} in the label or the column's head"
    for what, text in seen.texts:
        if what == "the unit column" and factor(text.strip("± "), field) is not None:
            return f"{text!r} in the unit column"
    return f"none printed with it; read as {field_of(field).unit}"


def band_reasons(when: When, seen: Seen | None) -> Iterator[tuple[str, str]]:
    """For each condition of a reading, the text that states it."""
    for key, name in _BANDS.items():
        value = getattr(when, key)
        if value is None:
            continue
        shown = when_text(When(**{key: value}))
        yield name, f"{shown}, {_source(key, value, seen)}"


def _source(key: str, value: object, seen: Seen | None) -> str:
    if seen is None:
        return "from the row, the section or the values beside it"
    texts = seen.texts
    exact = [(what, text) for what, text in texts if getattr(condition_of(text), key) == value]
    near = [(what, text) for what, text in texts if getattr(condition_of(text), key) is not None]
    for what, text in [*exact, *near]:
        return f"from {what} {' '.join(text.split())!r}"
    if getattr(seen.label.when, key) is not None:
        return "from the label"
    return "from the row, the section or the values beside it"
