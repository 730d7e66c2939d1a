"""The page's colours, for its pictures and charts. Contrast on page and leaf is at least 4.5 for text, 3 for marks."""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Palette:
    """One accent for what the program computed, ink for limits, `short` only for "falls short", `look` only for ☞."""

    page: str
    leaf: str
    rule: str
    edge: str
    ink: str
    soft: str
    accent: str
    wash: str
    short: str
    look: str
    look_wash: str
    hatch: str


LIGHT = Palette(
    page="#FBFAF7",
    leaf="#F2F0EA",
    rule="#D6D2C8",
    edge="#8A8578",
    ink="#211E26",
    soft="#5E5966",
    accent="#5B3F8F",
    wash="#E9E2F5",
    short="#96321A",
    look="#7A5200",
    look_wash="#F8ECCB",
    hatch="#CBC7BE",
)
DARK = Palette(
    page="#17161B",
    leaf="#211F27",
    rule="#3A3742",
    edge="#7C7788",
    ink="#ECE9F1",
    soft="#ABA5B6",
    accent="#B9A2EC",
    wash="#352C4C",
    short="#F0977C",
    look="#E3B85A",
    look_wash="#3B3118",
    hatch="#4E4A56",
)


def palette_of(theme: str | None) -> Palette:
    """`theme` is "light", "dark" or None (not known yet: light, as on paper)."""
    return DARK if theme == "dark" else LIGHT
