"""The report from the page: its head, and the buttons that make it as PDF or as one HTML file."""

from __future__ import annotations

import datetime
from collections.abc import Callable

import streamlit as st

from compare import page_session as session
from compare.answers import row_name
from compare.dossier import Dossier
from compare.margin_report import margin_report
from compare.report_head import ReportHead, alternates_of
from compare.report_html import report_html
from compare.work import part_key

FIELDS = {
    "number": "Report number",
    "revision": "Revision",
    "project": "Project",
    "board": "Board and revision",
    "designator": "Reference designator",
    "ic": "IC",
    "ic_sheet": "IC’s sheet",
    "dielectric": "Capacitors: dielectric",
    "strays": "Strays: how got",
    "prepared": "Prepared by",
    "checked": "Checked by",
    "approved": "Approved by",
}


def save_report(dossier: Dossier) -> None:
    """Buttons that make the margin report of the part under review, when they are pressed."""
    session.section("Margin report")
    name = "".join(c if c.isalnum() or c in "-._" else "_" for c in row_name(dossier.review))
    with st.container(horizontal=True, gap="small"):
        st.download_button(
            "Save report, PDF",
            _pdf(dossier),
            f"margin_report_{name}.pdf",
            "application/pdf",
            key="report_pdf",
            type="primary",
            on_click="ignore",
            shortcut="P",
        )
        html = _html(dossier)
        st.download_button(
            "HTML, one file", html, f"margin_report_{name}.html", "text/html", key="report_html", on_click="ignore"
        )
        with st.popover("Head"):
            head_fields()


def head_fields() -> None:
    """What the head holds; what is left out stands blank in the report, to be written in."""
    kept = session.slot("report")
    columns = st.columns(2, gap="small")
    for at, (field, label) in enumerate(FIELDS.items()):
        key = f"field_report_{field}"
        st.session_state.setdefault(key, str(kept.get(field, "")))
        with columns[at % 2]:
            st.text_input(label, key=key, on_change=_put, args=(field, key), placeholder="left blank")


def _put(field: str, key: str) -> None:
    session.put_slot("report", {**session.slot("report"), field: st.session_state[key]}, "")


def head(dossier: Dossier) -> ReportHead:
    """The head as it is set, with what was decided on this part."""
    given = {field: text for field, text in session.slot("report").items() if field in FIELDS and text}
    decided = alternates_of(session.slot("decisions"), part_key(dossier.review))
    today = datetime.date.today().isoformat()
    prepared = {} if "prepared" in given else {"prepared": session.person()}
    return ReportHead(**{"date": today, **prepared, **given}, alternates=decided)


def _pdf(dossier: Dossier) -> Callable[[], bytes]:
    of = head(dossier)

    def made() -> bytes:
        from compare.report_pdf import report_pdf

        return report_pdf(margin_report(dossier, of))

    return made


def _html(dossier: Dossier) -> Callable[[], str]:
    of = head(dossier)
    return lambda: report_html(margin_report(dossier, of))
