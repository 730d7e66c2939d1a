"""`quartzfolio report`: the margin report of one part, as HTML or PDF."""

from __future__ import annotations

import argparse
import datetime
import sys
import tomllib
from pathlib import Path
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Sequence

    from compare.bench import Bench
    from compare.dossier import Dossier
    from compare.report_head import ReportHead
    from extract.model import SpecSheet

KINDS = (".html", ".htm", ".pdf")


class ReportCallError(Exception):
    """The call is wrong; the message says what, where and what to do."""


def add_arguments(parser: argparse.ArgumentParser) -> None:
    parser.add_argument(
        "--out", metavar="FILE", help="FILE.html or FILE.pdf to write; without it the HTML goes to standard output"
    )
    parser.add_argument(
        "--head",
        metavar="HEAD.toml",
        help="what the head of the report holds, as text: number, revision, date, project, board, designator, ic, "
        "ic_sheet, dielectric, strays, prepared, checked, approved, confidentiality, title",
    )


def write_report(sheets: Sequence[SpecSheet], bench: Bench, options: argparse.Namespace) -> Dossier:
    """Make the report of the one part that offers the frequency, and write it; ReportCallError where that cannot be."""
    from compare.margin_report import margin_report
    from compare.report_html import report_html

    target = None if options.out is None else Path(options.out)
    if target is not None and target.suffix.lower() not in KINDS:
        raise ReportCallError(f"--out {options.out}: a report is written as .html or .pdf; end the name so")
    head = read_head(options.head)
    dossier = the_one(sheets, bench)
    report = margin_report(dossier, head)
    if target is None:
        sys.stdout.write(report_html(report))
        return dossier
    try:
        if target.suffix.lower() == ".pdf":
            from compare.report_pdf import report_pdf

            target.write_bytes(report_pdf(report))
        else:
            target.write_text(report_html(report), encoding="utf-8")
    except OSError as fault:
        raise ReportCallError(
            f"--out {options.out}: cannot be written: {(fault.strerror or str(fault)).lower()}"
        ) from None
    return dossier


def the_one(sheets: Sequence[SpecSheet], bench: Bench) -> Dossier:
    """The dossier of the part; a report is about one."""
    from compare.dossier import dossiers
    from compare.figures import frequency_text

    found, notes = dossiers(sheets, bench)
    asked = frequency_text(bench.requirement.frequency_mhz)
    if not found:
        said = str(notes[0]["message"]) if notes else "nothing was read"
        raise ReportCallError(f"no part to report on: none offers {asked} ({said})")
    if len(found) > 1:
        names = [f"{one.sheet.file}#{one.offer.part.part_number or '?'}" for one in found[:6]]
        more = f" and {len(found) - 6} more" if len(found) > 6 else ""
        raise ReportCallError(
            f"a report is about one part, and {len(found)} offer {asked}: name one as FILE#PART_NUMBER, of "
            f"{', '.join(names)}{more}"
        )
    return found[0]


def read_head(name: str | None) -> ReportHead:
    """The head's fields from a TOML file; today's date where it gives none."""
    from compare.report_head import HeadError, ReportHead

    given: dict[str, object] = {"date": datetime.date.today().isoformat()}
    if name is not None:
        try:
            given |= tomllib.loads(Path(name).read_text(encoding="utf-8-sig"))
        except OSError as fault:
            raise ReportCallError(f"{name}: cannot be opened: {(fault.strerror or str(fault)).lower()}") from None
        except (tomllib.TOMLDecodeError, UnicodeDecodeError) as fault:
            raise ReportCallError(f"{name}: no TOML file: {fault}") from None
    try:
        return ReportHead.of(given)
    except HeadError as fault:
        raise ReportCallError(f"{name}: {fault}") from None
