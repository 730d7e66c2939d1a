"""`quartzfolio report`: the margin report of one part, as HTML or PDF."""

from __future__ import annotations

import argparse
import datetime
import sys
import tomllib
from dataclasses import replace
from pathlib import Path
from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

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
    dossier = the_one(sheets, bench)
    head = read_head(options.head, *of_works(options.sheets, dossier))
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


def of_works(names: Sequence[str], dossier: Dossier) -> tuple[dict[str, object], list[Mapping[str, Any]]]:
    """What work files among the sheets hold: the head as it was set on the page, and decisions on this part."""
    from compare.folio import SUFFIX, read_folio
    from compare.report_head import alternates_of
    from compare.work import part_key

    head: dict[str, object] = {}
    decided: list[Mapping[str, Any]] = []
    for name in (name.partition("#")[0] for name in names):
        if name.lower().endswith(SUFFIX) and Path(name).is_file():
            work = read_folio(Path(name).read_bytes(), name).work
            head |= {field: text for field, text in work.slot("report").items() if text}
            decided += alternates_of(work.slot("decisions"), part_key(dossier.review))
    return head, decided


def read_head(
    name: str | None, of_work: Mapping[str, object], alternates: Sequence[Mapping[str, Any]] = ()
) -> ReportHead:
    """The head's fields from a TOML file, else from the work; today's date where none gives one."""
    from compare.report_head import HeadError, ReportHead

    given: dict[str, object] = {"date": datetime.date.today().isoformat(), **of_work}
    if name is not None:
        try:
            given |= tomllib.loads(Path(name).read_text(encoding="utf-8-sig"))
        except OSError as fault:
            raise ReportCallError(f"{name}: cannot be opened: {(fault.strerror or str(fault)).lower()}") from None
        except (tomllib.TOMLDecodeError, UnicodeDecodeError) as fault:
            raise ReportCallError(f"{name}: no TOML file: {fault}") from None
    try:
        return replace(ReportHead.of(given), alternates=tuple(alternates))
    except HeadError as fault:
        raise ReportCallError(f"{name}: {fault}") from None
