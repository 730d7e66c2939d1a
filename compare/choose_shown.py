"""What Choose shows: the heading, the ranked rows and what stands beside them."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from functools import lru_cache
from typing import TYPE_CHECKING, Any

from compare import supply
from compare.answers import SHORT_NAMES, Row, asked_strips, question_lines, row_name, tightest_text, told, verdict
from compare.bench import Bench
from compare.choosing import Candidate, package_text
from compare.drawing import as_address, slack_strip_svg
from compare.figures import count_word, exact, frequency_text, ordinal
from compare.palette import Palette

if TYPE_CHECKING:
    import pandas as pd

PAGE_ROWS = 100
"""How many rows are sent at once; the saved tables hold all."""
STRIP_COLUMN = "Times over: 1 is the line"
MOST_OTHERS = 60


def choose_heading(rows: Sequence[Row], bench: Bench, nearest: str = "") -> str:
    """The answer in a sentence; `nearest` is what decides of the first row, said where none meets."""
    if not rows:
        return f"None of the parts read offers {frequency_text(bench.requirement.frequency_mhz)}"
    good, count = sum(row["verdict"] == "meets" for row in rows), len(rows)
    if count == 1:
        return f"The one part that offers it: {verdict(rows[0]['verdict'])}"
    if good == count:
        return f"{'Both' if count == 2 else f'All {count_word(count)}'} meet what is asked"
    some = "Neither" if count == 2 and not good else count_word(good, begins=True)
    said = f"{some} of {count_word(count)} meet{'s' if good <= 1 else ''} what is asked"
    if good:
        return said
    return f"{said}. Nearest: {row_name(rows[0])}" + (f", {nearest}" if nearest else "")


def offered_text(offering: int, parts: int, bench: Bench) -> str:
    """How many of all parts: `9 of 11 parts read offer 26 MHz.` and the like."""
    frequency = frequency_text(bench.requirement.frequency_mhz)
    if offering == parts == 1:
        return f"The one part read offers {frequency}."
    if offering == parts:
        return f"All {parts} parts read offer {frequency}."
    return f"{offering} of {parts} parts read offer{'s' if offering == 1 else ''} {frequency}."


def others_label(offering: int, parts: int) -> str:
    """`The 2 others`: the button to what is not among the rows; "" where there is nothing."""
    count = parts - offering
    return "" if count <= 0 else "The other one" if count == 1 else f"The {count} others"


def other_lines(notes: Sequence[Mapping[str, Any]]) -> list[str]:
    """What else there is to say: parts that do not offer the frequency, what the bench leaves open."""
    said = [told(note["message"]) for note in notes]
    more = len(said) - MOST_OTHERS
    return said[:MOST_OTHERS] + ([f"and {more} more; the saved JSON has all of them"] if more > 0 else [])


def page_of(places: Sequence[Any], chosen: Any) -> int:
    """The page of rows, from 0, on which the chosen one stands; the first where it is not among them."""
    return places.index(chosen) // PAGE_ROWS if chosen in places else 0


def page_text(page: int, count: int) -> str:
    """`Rows 101…200 of 20000`; "" where all are on one page."""
    if count <= PAGE_ROWS:
        return ""
    return f"Rows {page * PAGE_ROWS + 1}…{min((page + 1) * PAGE_ROWS, count)} of {count}"


@lru_cache(maxsize=4096)
def strip(slacks: tuple[tuple[str, float | None], ...], palette: Palette) -> str:
    """The thin strips of a row as an address, kept by what they show."""
    return as_address(slack_strip_svg(dict(slacks), palette))


def strip_of(row: Row, names: Sequence[str], palette: Palette) -> str:
    # A strip is 200 pixels wide: three digits are more than it can show, and alike rows then share one.
    slacks = ((SHORT_NAMES[name], row["slack"].get(name)) for name in names)
    return strip(tuple((name, value if value is None else float(f"{value:.3g}")) for name, value in slacks), palette)


def strips_legend(rows: Sequence[Row]) -> str:
    """What the thin strips are, from the top."""
    names = ", ".join(SHORT_NAMES[name] for name in asked_strips(rows))
    return f"Strips from the top: {names}. Heavy: the tightest. Hatched side: not met. Dotted: not known."


def supply_columns(shown: Sequence[Candidate]) -> list[str]:
    """The columns of supply of which any row has a value."""
    return [key for key in supply.columns() if any(key in one.supply for one in shown)]


def rank_frame(shown: Sequence[Candidate], palette: Palette) -> pd.DataFrame:
    """The rows as shown; the strips are pictures, and the words beside them say the same.

    Each candidate's row carries its sentences (`Ranked.row`).
    """
    import pandas as pd

    rows = [one.row for one in shown]
    strips, columns = asked_strips(rows), supply_columns(shown)
    table = [
        (
            row["place"],
            row_name(row),
            verdict(row["verdict"]),
            f"☞ {len(row['to_check'])}" if row["to_check"] else "",
            strip_of(row, strips, palette),
            tightest_text(row),
            row["maker"] or "",
            package_text(row["package"]),
            *(supply_cell(one.supply, key) for key in columns),
        )
        for row, one in zip(rows, shown, strict=True)
    ]
    heads = ["Place", "Part", "Verdict", "Look", STRIP_COLUMN, "Tightest", "Maker", "Package"]
    return pd.DataFrame(table, columns=[*heads, *(supply.columns()[key].heading for key in columns)])


def supply_cell(values: Mapping[str, Mapping[str, Any]], key: str) -> str:
    """A value without the unit that stands above its column."""
    value = values.get(key, {}).get("value")
    return exact(value) if isinstance(value, int | float) else supply.value_text(key, value)


def supply_rows(one: Candidate) -> list[tuple[str, str, str, str]]:
    """Name, value with unit, bare number, and whence: what is known of a part's supply."""
    rows = []
    for key, column in supply.columns().items():
        if key in one.supply:
            kept = one.supply[key]
            value = supply.figure(one.supply, key)
            bare = "" if value is None else exact(value)
            rows.append((column.name, supply.value_text(key, kept["value"]), bare, supply.whence_text(kept)))
    return rows


def supply_frame(shown: Sequence[Candidate]) -> pd.DataFrame:
    """The rows as they are typed in: text, so that `0,21 €` and `14 weeks` are taken as written."""
    import pandas as pd

    table = [
        [row_name(one.row), *(supply.value_text(key, one.supply.get(key, {}).get("value")) for key in supply.columns())]
        for one in shown
    ]
    return pd.DataFrame(table, columns=["Part", *supply.columns()])


def place_heading(row: Row) -> str:
    """`1st: MRB25-260-08H, Merrowby`."""
    maker = f", {row['maker']}" if row["maker"] else ""
    return f"{ordinal(row['place'])}: {row_name(row)}{maker}"


def to_ask(rows: Sequence[Row], most: int = 8) -> list[tuple[str, str]]:
    """Part and the ready questions in one text, of the rows that cannot be told."""
    asked = []
    for row in rows:
        if row["verdict"] == "cannot tell" and (lines := question_lines(row)):
            maker = f"{row['maker']}, " if row["maker"] else ""
            asked.append((f"{maker}{row_name(row)}", " ".join(lines)))
    return asked[:most]


def ask_heading(count: int) -> str:
    """The heading above the questions: `Two cannot be told. Ask:` and the like."""
    return f"{count_word(count, begins=True)} cannot be told. Ask:"
