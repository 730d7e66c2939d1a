"""The margin report of one part: fourteen sections and an appendix, as blocks that HTML and PDF are both made of.

It stands without the program: every number with its formula and values, every reading with its place, and the
fingerprints of the sheets.
"""

from __future__ import annotations

from compare import report_found, report_given
from compare.answers import row_name
from compare.blocks import Report
from compare.dossier import Dossier
from compare.report_head import ReportHead
from compare.versions import versions_text


def margin_report(dossier: Dossier, head: ReportHead) -> Report:
    """The whole report of one part in its circuit."""
    title = head.title or f"Margin report: {row_name(dossier.review)}" + (f", {head.project}" if head.project else "")
    blocks = [
        *report_given.head(dossier, head),
        *report_given.verdict(dossier),
        *report_given.requirement(dossier),
        *report_given.circuit(dossier, head),
        *report_given.crystal(dossier),
        *report_given.ic(dossier),
        *report_found.results(dossier),
        *report_found.worst_case(dossier),
        *report_found.budget(dossier),
        *report_found.plots(dossier),
        *report_found.bench(dossier),
        *report_found.open_points(dossier),
        *report_found.alternates(head),
        *report_found.signatures(dossier, head),
        *report_found.appendix(dossier),
    ]
    named = " · ".join(
        filter(None, [head.number, f"revision {head.revision}" if head.revision else "", versions_text()])
    )
    return Report(title, named, tuple(blocks))
