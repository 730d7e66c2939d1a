"""What Choose shows: the heading, the ranked rows and what stands beside them."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Any

import pandas as pd

from compare.answers import SHORT_NAMES, Row, asked_strips, row_name, tightest_text, verdict
from compare.bench import Bench
from compare.drawing import as_address, slack_strip_svg
from compare.figures import count_word, frequency_text, ordinal
from compare.palette import Palette


def choose_heading(result: Mapping[str, Any], bench: Bench) -> str:
    """The answer in a sentence."""
    rows = result["rows"]
    if not rows:
        return f"None of the parts read offers {frequency_text(bench.requirement.frequency_mhz)}"
    good, count = sum(row["verdict"] == "meets" for row in rows), len(rows)
    if count == 1:
        return f"The one part that offers it: {verdict(rows[0]['verdict'])}"
    if good == count:
        return f"All {count_word(count)} meet what is asked"
    said = f"{count_word(good, begins=True)} of {count_word(count)} meet{'s' if good <= 1 else ''} what is asked"
    return said if good else f"{said}. {_nearest(rows)}"


def _nearest(rows: Sequence[Row]) -> str:
    nearest = rows[0]
    least = tightest_text(nearest)
    return f"Nearest: {row_name(nearest)}" + (f", {least}" if least else "")


def shown_of(count: int, shown: int) -> str:
    """A sentence where not every row is shown; "" where all are."""
    return f"The first {shown} of {count} are shown; the saved tables hold all of them." if count > shown else ""


def strips_legend(rows: Sequence[Row]) -> str:
    """What the thin strips are, from the top."""
    names = ", ".join(SHORT_NAMES[name] for name in asked_strips(rows))
    return f"Strips from the top: {names}. Heavy: the tightest. Hatched side: not met. Dotted: not known."


def rank_frame(rows: Sequence[Row], palette: Palette) -> pd.DataFrame:
    """The ranked rows as shown; the strips are pictures, and the words beside them say the same."""
    strips = asked_strips(rows)
    table = [
        (
            row["place"],
            row_name(row),
            verdict(row["verdict"]),
            f"☞ {len(row['to_check'])}" if row["to_check"] else "",
            as_address(slack_strip_svg({SHORT_NAMES[name]: row["slack"].get(name) for name in strips}, palette)),
            tightest_text(row),
            row["maker"] or "",
            row["package"] or "",
        )
        for row in rows
    ]
    columns = ["Place", "Part", "Verdict", "Look", "Times over: 1 is the line", "Tightest", "Maker", "Package"]
    return pd.DataFrame(table, columns=columns)


def place_heading(row: Row) -> str:
    """`1st: MRB25-260-08H, Merrowby`."""
    maker = f", {row['maker']}" if row["maker"] else ""
    return f"{ordinal(row['place'])}: {row_name(row)}{maker}"
