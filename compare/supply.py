"""Supply of the parts: price, stock, lead time, minimum order, packing, status; each value with its date and whence.

A record is a mapping of column to `{"value", "date", "from", "by"}`, kept in the work by the part's key. Prices of one
currency alone are compared: none is converted.
"""

from __future__ import annotations

import re
import tomllib
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from datetime import date
from functools import cache
from pathlib import Path
from typing import Any

from compare.figures import exact, number, with_unit
from compare.work import part_key

Record = Mapping[str, Mapping[str, Any]]
TYPED = "typed"
STATED = "stated"
WEEKS = {"day": 1 / 7, "week": 1.0, "month": 52.1775 / 12}
AMOUNT = re.compile(r"[+-]?\d+(?:[.,'’ \u00a0\u202f]\d+)*")
NUMBER_LIKE = ("price", "count", "weeks")


class SupplyError(ValueError):
    """A cell or list that cannot be understood; the message says what was found and what would be."""


@dataclass(frozen=True)
class Column:
    """One column of supply; `unit` is what a bare number in it means."""

    key: str
    name: str
    kind: str
    unit: str = ""
    headings: tuple[str, ...] = ()

    @property
    def heading(self) -> str:
        """Name and unit, as they stand above the column."""
        return f"{self.name}, {self.unit}" if self.unit else self.name


@cache
def _tables() -> dict[str, Any]:
    return tomllib.loads(Path(__file__).with_name("supply.toml").read_text(encoding="utf-8"))


@cache
def every_column() -> Mapping[str, Column]:
    """All columns that a list may have, those that name the part and the date too."""
    return {
        key: Column(key, row["name"], row["kind"], row.get("unit", ""), tuple(row["headings"]))
        for key, row in _tables().items()
        if "headings" in row
    }


@cache
def columns() -> Mapping[str, Column]:
    """The columns that are kept of a part."""
    return {key: one for key, one in every_column().items() if key not in ("part_number", "maker", "date")}


@cache
def statuses() -> tuple[str, ...]:
    return tuple(_tables()["statuses"])


@cache
def _words(table: str) -> Mapping[str, str]:
    return {folded(word): said for said, words in _tables()[table].items() for word in words}


def folded(text: str) -> str:
    """Without case, signs and spaces, as headings and words are compared."""
    return "".join(character for character in text.casefold() if character.isalnum() or character in "€$£¥円元")


def understand(column: Column, text: str) -> Any:
    """A cell as a value: number, or text; a price as `{"amount", "currency"}`. SupplyError where it is neither."""
    said = " ".join(text.split())
    if column.kind == "text":
        return said
    if column.kind == "status":
        return _words("statuses").get(folded(said), said)
    if column.kind == "date":
        return _day(said)
    return {"price": _price, "count": _count, "weeks": _weeks}[column.kind](said)


def plain_number(text: str) -> float:
    """A number with either decimal mark and any of the usual signs between thousands."""
    bare = re.sub(r"['’ \u00a0\u202f]", "", text)
    if "," in bare and "." in bare:
        mark = max(bare.rfind(","), bare.rfind("."))
        bare = re.sub(r"[.,]", "", bare[:mark]) + "." + bare[mark + 1 :]
    elif bare.count(",") > 1 or bare.count(".") > 1:
        bare = re.sub(r"[.,]", "", bare)
    return float(bare.replace(",", "."))


def _amount(text: str, wanted: str) -> tuple[float, str]:
    """The one number in a text, and the words around it."""
    found = AMOUNT.findall(text)
    if len(found) != 1:
        raise SupplyError(f"“{text}”: {wanted}")
    value = plain_number(found[0])
    if value < 0:
        raise SupplyError(f"“{text}”: cannot be below zero; {wanted}")
    return value, text.replace(found[0], " ", 1)


def _price(text: str) -> dict[str, Any]:
    wanted = "a price is one number with its currency, like 0.21 €"
    value, around = _amount(text, wanted)
    # `each`, `per piece`: one price is always that of one piece, whatever the quantity it holds for.
    words = [
        word for word in re.split(r"[\s/]+", around) if folded(word) not in (*_words("pieces_words"), "per", "pro")
    ]
    word = folded("".join(words))
    if word and word not in _words("currencies"):
        raise SupplyError(f"“{text}”: currency not known; {', '.join(_tables()['currencies'])} are")
    return {"amount": value, "currency": _words("currencies").get(word, "")}


def _count(text: str) -> float:
    """A whole number: three digits behind a sign are thousands, whichever sign it is."""
    wanted = "a number of pieces is wanted, like 3000 or 3k"
    value, around = _amount(re.sub(r"(?<=\d)[.,](?=\d{3}(?!\d))", "", text), wanted)
    word = folded(around)
    if word in ("k", "kpcs"):
        value *= 1000
    elif word and word not in _words("pieces_words"):
        raise SupplyError(f"“{text}”: {wanted}")
    if value != round(value):
        raise SupplyError(f"“{text}”: {wanted}")
    return value


def _weeks(text: str) -> float:
    """Lead time in weeks; of a span like `8-10 weeks` the longer, for that is what can happen."""
    wanted = "a lead time is a number of days, weeks or months, like 14 weeks"
    if folded(text) in ("stock", "exstock", "ablager", "surstock", "现货"):
        return 0.0
    ends = re.split(r"\s*(?:-|–|…|to|bis|à|~)\s*(?=\d)", text)
    value, around = _amount(ends[-1], wanted)
    word = folded(around)
    span = "week" if not word else _words("spans").get(word)
    if span is None:
        raise SupplyError(f"“{text}”: {wanted}")
    return round(value * WEEKS[span], 2)


def _day(text: str) -> str:
    """A date as YYYY-MM-DD."""
    if found := re.match(r"(\d{4})[-/.年](\d{1,2})[-/.月](\d{1,2})", text):
        year, month, day = map(int, found.groups())
    elif found := re.match(r"(\d{1,2})\.(\d{1,2})\.(\d{4})", text):
        day, month, year = map(int, found.groups())
    else:
        raise SupplyError(f"“{text}”: a date is written 2027-05-31 or 31.05.2027")
    try:
        return date(year, month, day).isoformat()
    except ValueError:
        raise SupplyError(f"“{text}”: there is no such day") from None


def value_text(key: str, value: Any) -> str:
    """A value for a person, with its unit: `0.21 €`, `14 weeks`, `3000 pieces`."""
    if value is None:
        return ""
    if isinstance(value, Mapping):
        return with_unit(exact(value["amount"]), value["currency"])
    if isinstance(value, int | float):
        unit = columns()[key].unit
        return with_unit(number(float(value), 6), unit[:-1] if value == 1 and unit.endswith("s") else unit)
    return str(value)


def kept(value: Any, day: str, whence: str, by: str = "") -> dict[str, Any]:
    """One value as it is kept."""
    return {"value": value, "date": day, "from": whence, "by": by}


def supply_of(row: Mapping[str, Any], slot: Mapping[str, Any]) -> dict[str, dict[str, Any]]:
    """What is known of a part's supply: what a person entered or imported, else what its sheet states.

    `row["attributes"]`, where there are any, are the sheet's own price, lead time and status.
    """
    found: dict[str, dict[str, Any]] = {}
    for key, text in (row.get("attributes") or {}).items():
        if key in columns() and text:
            found[key] = kept(_or_text(columns()[key], text), "", STATED)
    for key, one in (slot.get(part_key(row)) or {}).items():
        if key in columns():
            found[key] = dict(one)
    return found


def _or_text(column: Column, text: str) -> Any:
    try:
        return understand(column, text)
    except SupplyError:
        return text


def figure(supply: Mapping[str, Mapping[str, Any]], key: str) -> float | None:
    """A value that can be compared: the number, a price's amount; None where there is none."""
    value = supply.get(key, {}).get("value")
    if isinstance(value, Mapping):
        value = value["amount"]
    return float(value) if isinstance(value, int | float) else None


def currency(supply: Mapping[str, Mapping[str, Any]]) -> str:
    value = supply.get("price", {}).get("value")
    return str(value["currency"]) if isinstance(value, Mapping) else ""


def whence_text(one: Mapping[str, Any]) -> str:
    """`✎ entered 2027-05-04`, `✎ from offers.csv, 2027-05-04`, `stated`."""
    if one["from"] == STATED:
        return "stated, no date"
    said = "✎ entered" if one["from"] == TYPED else f"✎ from {one['from']},"
    return f"{said} {one['date']}".rstrip(" ,")


def with_values(slot: Mapping[str, Any], key: str, values: Mapping[str, Mapping[str, Any] | None]) -> dict[str, Any]:
    """The slot with values of one part put in; None takes one away."""
    record = {name: one for name, one in {**(slot.get(key) or {}), **values}.items() if one is not None}
    others = {name: one for name, one in slot.items() if name != key}
    return {**others, key: record} if record else others


@dataclass(frozen=True)
class Imported:
    """A list that was taken over: the slot as it becomes, and what there is to say."""

    slot: Mapping[str, Any]
    matched: int
    said: tuple[str, ...]


def import_list(
    data: bytes, name: str, rows: Sequence[Mapping[str, Any]], slot: Mapping[str, Any], *, day: str, by: str
) -> Imported:
    """Take over a purchasing list (CSV, workbook), line by line by part number.

    Raises SupplyError where the file has no column of part numbers, or none of supply.
    """
    grid, heads, units = _list_of(data, name)
    known: dict[str, list[Mapping[str, Any]]] = {}
    for row in rows:
        if row.get("part_number"):
            known.setdefault(folded(row["part_number"]), []).append(row)
    said: list[str] = []
    unknown: list[str] = []
    new, matched = dict(slot), 0
    for cells in grid:
        part_number = _cell(cells, heads, "part_number")
        if not part_number:
            continue
        found = _by_maker(known.get(folded(part_number), []), _cell(cells, heads, "maker"))
        if not found:
            unknown.append(part_number)
            continue
        matched += 1
        values, faults = _values(cells, heads, units, kept(None, day, name, by))
        said += [f"{part_number}, {fault}" for fault in faults]
        for key in dict.fromkeys(map(part_key, found)):
            new = with_values(new, key, values)
    if unknown:
        more = f" and {len(unknown) - 5} more" if len(unknown) > 5 else ""
        said.append(f"not among the parts that are open: {', '.join(unknown[:5])}{more}")
    return Imported(new, matched, tuple(said))


def _by_maker(found: list[Mapping[str, Any]], maker: str) -> list[Mapping[str, Any]]:
    """Of parts with one number those of the maker named; a maker written otherwise settles nothing."""
    named = [row for row in found if maker and folded(maker)[:4] == folded(row.get("maker") or "")[:4]]
    return named or found


def _list_of(data: bytes, name: str) -> tuple[list[list[str]], dict[str, int], dict[str, str]]:
    from extract.documents.kinds import read_document
    from extract.documents.model import DocumentError, Table

    try:
        document = read_document(data, name)
    except DocumentError as fault:
        raise SupplyError(f"{name}: {fault}") from None
    for table in document.blocks:
        if not isinstance(table, Table):
            continue
        grid = [[cell.text if cell is not None else "" for cell in line] for line in table.grid()]
        for at, line in enumerate(grid):
            heads = _headings(line)
            if "part_number" in heads and set(heads) & set(columns()):
                return grid[at + 1 :], heads, {key: _in_brackets(line[place]) for key, place in heads.items()}
    wanted = ", ".join(one.name for one in columns().values())
    raise SupplyError(f"{name}: no line of headings with a part number and one of {wanted}")


def _headings(line: Sequence[str]) -> dict[str, int]:
    words = {folded(word): key for key, column in every_column().items() for word in column.headings}
    heads: dict[str, int] = {}
    for at, text in enumerate(line):
        bare = folded(re.sub(r"[(\[].*?[)\]]|,.*", "", text))
        key = words.get(folded(text)) or words.get(bare)
        if key is not None:
            heads.setdefault(key, at)
    return heads


def _cell(cells: Sequence[str], heads: Mapping[str, int], key: str) -> str:
    return cells[heads[key]].strip() if key in heads and heads[key] < len(cells) else ""


def _in_brackets(heading: str) -> str:
    """The unit or currency that a heading gives: `EUR` of `Preis (EUR)`."""
    found = re.search(r"[(\[](.*?)[)\]]|,\s*(.*)$", heading)
    return (found[1] or found[2] or "").strip() if found else ""


def _values(
    cells: Sequence[str], heads: Mapping[str, int], units: Mapping[str, str], stamp: Mapping[str, Any]
) -> tuple[dict[str, Mapping[str, Any] | None], list[str]]:
    """What a line says of a part, each value stamped, and a sentence for each cell that is not understood."""
    faults: list[str] = []
    try:
        day = _day(text) if (text := _cell(cells, heads, "date")) else stamp["date"]
    except SupplyError as fault:
        faults.append(f"as of: {fault}; today is taken")
        day = stamp["date"]
    values: dict[str, Mapping[str, Any] | None] = {}
    for key, column in columns().items():
        if text := _cell(cells, heads, key):
            try:
                values[key] = {**stamp, "value": _with_unit_above(column, text, units.get(key, "")), "date": day}
            except SupplyError as fault:
                faults.append(f"{column.name.lower()}: {fault}")
    return values, faults


def _with_unit_above(column: Column, text: str, unit: str) -> Any:
    """A cell understood with the unit of its heading, where it has none of its own."""
    if unit and column.kind in NUMBER_LIKE and not any(character.isalpha() for character in text):
        try:
            return understand(column, f"{text} {unit}")
        except SupplyError:
            pass  # What stands in the brackets is no unit.
    return understand(column, text)
