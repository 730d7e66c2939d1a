"""The report from the page: made when it is asked for, as PDF or as one HTML file."""

from __future__ import annotations

import streamlit as st

from compare import page_session as session
from compare.dossier import Dossier


def save_report(dossier: Dossier) -> None:
    """Buttons that make the margin report of the part under review."""
    session.section("Margin report")
    st.markdown(f"{dossier.review['file']}")
