"""Readings, parts and sheets, validated: the data contract's sections 1 and 2 (schema `quartzfolio/extract/1`)."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any, Literal, Self, TypeVar, get_args

from pydantic import (
    BaseModel,
    ConfigDict,
    SerializerFunctionWrapHandler,
    ValidatorFunctionWrapHandler,
    field_serializer,
    field_validator,
    model_serializer,
    model_validator,
)

SCHEMA = "quartzfolio/extract/1"

FieldName = Literal[
    "frequency_mhz",
    "frequency_tolerance_ppm",
    "frequency_stability_ppm",
    "ageing_ppm",
    "operating_temperature_c",
    "storage_temperature_c",
    "load_capacitance_pf",
    "esr_ohm",
    "shunt_capacitance_pf",
    "motional_capacitance_ff",
    "motional_inductance_mh",
    "quality_factor",
    "capacitance_ratio",
    "pulling_sensitivity_ppm_per_pf",
    "drive_level_uw",
    "turnover_temperature_c",
    "parabolic_coefficient_ppm_per_c2",
    "insulation_resistance_megohm",
]
FIELD_NAMES: tuple[str, ...] = get_args(FieldName)

Kind = Literal["pdf", "xlsx", "csv", "html", "docx", "text", "image"]
Status = Literal["stated", "inferred", "entered"]
Pair = tuple[float, float]


class _Frozen(BaseModel):
    model_config = ConfigDict(frozen=True, extra="forbid", allow_inf_nan=False)


class _Sparse(_Frozen):
    """A model whose absent keys stay absent when written out."""

    @model_serializer(mode="wrap")
    def _without_none(self, handler: Any) -> dict[str, Any]:
        return {key: value for key, value in handler(self).items() if value is not None}


class Where(_Sparse):
    """Where something stands: page and box (points or pixels from the top left), cell, or line; all count from 1."""

    page: int | None = None
    box: tuple[float, float, float, float] | None = None
    sheet: str | None = None
    table: int | None = None
    cell: str | None = None
    line: int | None = None

    def __str__(self) -> str:
        parts = []
        if self.page is not None:
            parts.append(f"page {self.page}")
        if self.sheet is not None:
            parts.append(f"sheet {self.sheet}")
        if self.table is not None:
            parts.append(f"table {self.table}")
        if self.line is not None:
            parts.append(f"line {self.line}")
        if self.cell is not None:
            parts.append(f"cell {self.cell}")
        return ", ".join(parts) or "the sheet"


class When(_Sparse):
    """Where a reading holds. An absent key means everywhere; both ends of a pair belong to the band."""

    frequency_mhz: Pair | None = None
    load_capacitance_pf: Pair | None = None
    temperature_c: Pair | None = None
    mode: str | None = None
    package: str | None = None
    years: float | None = None


class Reading(_Frozen):
    """One stated property: up to three bounds, or options, in the unit that the field's name ends in."""

    field: FieldName
    min: float | None = None
    typ: float | None = None
    max: float | None = None
    options: tuple[float, ...] = ()
    when: When = When()
    raw: str
    bare: bool | None = None
    where: Where
    status: Status = "stated"
    check: str | None = None

    @model_validator(mode="after")
    def _holds_a_value(self) -> Self:
        stated = [value for value in (self.min, self.typ, self.max) if value is not None]
        if not stated and not self.options:
            raise ValueError(f"a reading of {self.field} without a value: {self.raw!r}")
        if stated != sorted(stated) and self.check is None:
            raise ValueError(f"bounds of {self.field} out of order need a check: {self.raw!r}")
        return self

    @model_serializer(mode="wrap")
    def _without_absent_bare(self, handler: Any) -> dict[str, Any]:
        written: dict[str, Any] = handler(self)
        if written.get("bare") is None:
            written.pop("bare", None)
        return written


class Pads(_Sparse):
    """Which solder pads carry the crystal and which are ground, counted as the sheet counts them."""

    count: int | None = None
    crystal: tuple[int, ...] | None = None
    ground: tuple[int, ...] | None = None


class Attributes(_Sparse):
    """What a sheet or list says of grade, handling and supply; absent where it says nothing."""

    pads: Pads | None = None
    aec_q200: bool | None = None
    moisture_level: str | None = None
    reflow_peak_c: float | None = None
    status: str | None = None
    price: str | None = None
    lead_time: str | None = None


class Part(_Frozen):
    """A part number that the sheet gives values for, or a series as one part whose readings carry `when`."""

    part_number: str | None = None
    maker: str | None = None
    package: str | None = None
    mode: str | None = None
    cut: str | None = None
    resonance: Literal["load", "series"] | None = None
    attributes: Attributes = Attributes()
    readings: tuple[Reading, ...] = ()


class Note(_Frozen):
    """What the reader has to say about a sheet, with the place it speaks of."""

    level: Literal["error", "warning", "info"]
    message: str
    where: Where | None = None


Lean = TypeVar("Lean", bound=_Frozen)
_GIVEN: dict[type, set[str]] = {}


def lean(model: Lean) -> Lean:
    """The same model at half its size: all of a class share one record of which keys were given, which nothing asks."""
    shared = _GIVEN.get(type(model))
    if shared is None:
        shared = _GIVEN[type(model)] = set(type(model).model_fields)
    object.__setattr__(model, "__pydantic_fields_set__", shared)
    return model


def made(model: type[Lean], values: dict[str, Any]) -> Lean:
    """A model of values that are valid already, all its keys in their order, in a fifth of the time of a check."""
    one = object.__new__(model)
    object.__setattr__(one, "__dict__", values)
    object.__setattr__(one, "__pydantic_extra__", None)
    object.__setattr__(one, "__pydantic_private__", None)
    return lean(one)


def moved(reading: Reading, where: Where) -> Reading:
    """The same reading at another place."""
    return made(Reading, {**reading.__dict__, "where": where})


def place(*, sheet: str | None = None, cell: str | None = None, line: int | None = None) -> Where:
    """A place in a list or on a sheet."""
    return made(Where, {"page": None, "box": None, "sheet": sheet, "table": None, "cell": cell, "line": line})


def written(model: BaseModel) -> dict[str, Any]:
    """The keys of one reading, part, note or sheet as the JSON has them, its parts not yet taken apart.

    For `json.dumps(..., default=written)`: a twentieth of the time of `model_dump` on a long list, the same text.
    """
    if isinstance(model, _Sparse):
        return {key: value for key, value in vars(model).items() if value is not None}
    if isinstance(model, Reading) and model.bare is None:
        return {key: value for key, value in vars(model).items() if key != "bare"}
    return vars(model)


class MadeParts(Sequence[Part]):
    """Parts, each valid, that are made when somebody asks for them."""


class SpecSheet(_Frozen):
    """Everything read from one file."""

    file: str
    sha256: str | None
    kind: Kind
    scan: bool = False
    parts: Sequence[Part] = ()
    notes: tuple[Note, ...] = ()

    @field_validator("parts", mode="wrap")
    @classmethod
    def _kept_as_made(cls, parts: object, handler: ValidatorFunctionWrapHandler) -> Sequence[Part]:
        return parts if isinstance(parts, MadeParts) else tuple(handler(parts))

    @field_serializer("parts", mode="wrap")
    def _one_by_one(self, parts: Sequence[Part], handler: SerializerFunctionWrapHandler) -> Any:
        return handler(tuple(parts))
