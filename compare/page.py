"""The Streamlit script: it lays out the views. What they show comes from desk, shown, answers and their like."""

from __future__ import annotations

import streamlit as st

from compare import drawing, keeping, pieces, shown
from compare import page_session as session
from compare.page_choose import choose_view
from compare.page_circuit import circuit_view
from compare.page_reading import told_of_reading
from compare.page_review import review_view
from compare.page_sheets import sheets_view
from compare.page_substitute import substitute_view
from compare.page_trial import banner
from compare.page_work import head


def keys(views: list[str]) -> None:
    """A button for each view, for its key: the navigation at the top has none."""
    with st.container(horizontal=True, gap="medium"):
        for number, view in enumerate(views, start=1):
            if st.button(view.capitalize(), key=f"go_{view}", type="tertiary", shortcut=str(number)):
                session.go(view)


def main() -> None:
    """Lay out the views and draw the one that is asked for."""
    colours = session.palette()
    st.set_page_config(page_title="quartzfolio", page_icon=drawing.icon_svg(colours), layout="wide")
    st.logo(drawing.name_svg(colours), size="medium")
    st.html(pieces.style(colours))
    session.start()
    waiting = sum(map(shown.waiting, session.sheets()))
    pages = {}
    views = {
        "sheets": sheets_view,
        "circuit": circuit_view,
        "choose": choose_view,
        "substitute": substitute_view,
        "review": review_view,
    }
    for name, view in views.items():
        looks = f" ☞ {waiting}" if name == "sheets" and waiting else ""
        pages[name] = st.Page(view, title=name.capitalize() + looks, url_path=name, default=name == "sheets")
    st.session_state.pages = pages
    current = st.navigation(list(pages.values()), position="top")
    head(current.url_path)
    banner()
    # Places of their own, filled in this order: else all that follows would shift while sheets are read.
    reading, body, foot = st.container(), st.container(), st.container()
    with reading:
        told_of_reading()
    with foot:
        keys(list(views))
    with body:
        current.run()
    keeping.write_soon()


main()
