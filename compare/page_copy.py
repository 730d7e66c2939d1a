"""Two small components: a button that copies a text, and a table in which each number copies itself without unit."""

from __future__ import annotations

import streamlit as st

COPY = """export default function({data, parentElement}) {
  const button = parentElement.querySelector("button");
  const name = () => { button.textContent = data.label;
    if (!data.shortcut) return;
    const key = document.createElement("kbd"); key.textContent = data.shortcut.toUpperCase(); button.append(key) };
  name();
  button.onclick = async () => { await navigator.clipboard.writeText(data.text); button.textContent = "Copied";
    setTimeout(name, 1600); };
  const typing = () => /^(INPUT|TEXTAREA|SELECT)$/.test(document.activeElement?.tagName);
  const press = event => {
    if (event.key.toLowerCase() === data.shortcut && !event.ctrlKey && !event.metaKey && !typing()) button.click() };
  document.addEventListener("keydown", press);
  return () => document.removeEventListener("keydown", press); }"""
# As Streamlit's own buttons look; the page's custom properties reach into a component.
COPY_LOOK = """button{font:inherit;font-size:.875rem;line-height:1.35;color:var(--st-text-color);cursor:pointer;
  background:var(--st-background-color);border:1px solid var(--st-border-color);border-radius:3px;padding:.25rem .75rem;
  min-height:2.5rem;
  white-space:nowrap} kbd{font:inherit;font-size:.78rem;opacity:.65;margin-left:.5rem}
  button:hover,button:focus-visible{border-color:var(--qf-accent);color:var(--qf-accent)}"""
# Text of a sheet is escaped before it comes here. A press says so in the button's own name, for who hears the page.
FIGURES = """export default function({data, parentElement}) {
  const place = parentElement.querySelector("div"); place.innerHTML = data;
  place.querySelectorAll("[data-copy]").forEach(button => { button.onclick = async () => {
    await navigator.clipboard.writeText(button.dataset.copy); button.classList.add("copied");
    button.setAttribute("aria-label", "copied " + button.dataset.copy);
    setTimeout(() => button.classList.remove("copied"), 1200); } }) }"""


def copy_button(text: str, *, key: str, label: str = "Copy table", shortcut: str = "") -> None:
    """A button that puts `text` on the clipboard; `shortcut`, a small letter, presses it where nothing is typed in."""
    show = st.components.v2.component("quartzfolio_copy", html="<button></button>", js=COPY, css=COPY_LOOK)
    show(data={"label": label, "text": text, "shortcut": shortcut}, key=key, width="content")


def figures(html: str, *, key: str) -> None:
    """HTML with every text escaped, in which a press on a `data-copy` button copies what it holds."""
    show = st.components.v2.component("quartzfolio_figures", html="<div></div>", js=FIGURES, isolate_styles=False)
    show(data=html, key=key, width="stretch")
