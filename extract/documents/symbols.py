"""Symbol-font characters that a PDF's text layer gives as private-use code points or as Latin letters.

Source of the codes: the built-in encoding of the Symbol font (Adobe, PDF Reference 1.7, annex D.5, from memory);
Windows programs give the same codes in the private-use area at 0xF000.
"""

from __future__ import annotations

import re
import unicodedata
from functools import lru_cache

# fmt: off
_GREEK = dict(zip(
    "ABCDEFGHIKLMNOPQRSTUWXYZabcdefghijklmnopqrstuvwxyz",
    "ΑΒΧΔΕΦΓΗΙΚΛΜΝΟΠΘΡΣΤΥΩΞΨΖαβχδεφγηιϕκλµνοπθρστυϖωξψζ", strict=True,
))
_OTHERS = {
    0x22: "∀", 0x24: "∃", 0x27: "∋", 0x2A: "∗", 0x2D: "−", 0x40: "≅", 0x4A: "ϑ", 0x56: "ς", 0x5C: "∴", 0x5E: "⊥",
    0x7E: "∼", 0xA3: "≤", 0xA4: "/", 0xA5: "∞", 0xAB: "↔", 0xAC: "←", 0xAD: "↑", 0xAE: "→", 0xAF: "↓",
    0xB0: "°", 0xB1: "±", 0xB2: "″", 0xB3: "≥", 0xB4: "×", 0xB5: "∝", 0xB6: "∂", 0xB7: "•", 0xB8: "÷", 0xB9: "≠",
    0xBA: "≡", 0xBB: "≈", 0xBC: "…", 0xC5: "⊕", 0xC6: "∅", 0xC7: "∩", 0xC8: "∪", 0xCE: "∈", 0xD0: "∠", 0xD1: "∇",
    0xD2: "®", 0xD3: "©", 0xD4: "™", 0xD5: "∏", 0xD6: "√", 0xD7: "⋅", 0xE5: "∑", 0xF2: "∫",
}
# fmt: on
SYMBOL_CODES = {ord(letter): greek for letter, greek in _GREEK.items()} | _OTHERS

# Unicode fonts for signs: their letters are letters.
_UNICODE_FONT = re.compile(r"segoe|noto|dejavu|apple|symbols|symbola", re.I)
LIGATURES = frozenset({"ff", "fi", "fl", "ffi", "ffl", "ft", "st", "...", "..", "IJ", "ij", "°C", "°F"})


# A Symbol font without a table of its own is read by parsers as if it had Adobe's standard encoding: code 0xB1, the
# plus-minus sign in Symbol, comes out as the en dash (Adobe, PDF Reference 1.7, annex D.1, from memory).
_STANDARD_CODES = {
    "–": 0xB1, "†": 0xB2, "‡": 0xB3, "·": 0xB4, "¶": 0xB6, "‚": 0xB8, "„": 0xB9, "”": 0xBA, "»": 0xBB, "£": 0xA3,
    "⁄": 0xA4, "ƒ": 0xA6, "“": 0xAA, "«": 0xAB, "‹": 0xAC, "›": 0xAD, "ﬁ": 0xAE, "ﬂ": 0xAF, "—": 0xD0, "Æ": 0xE1,
}  # fmt: skip
# Letters of fonts of ornaments; what is not told apart is a bullet.
_DINGBATS = {"ü": "✓", "4": "✔", "û": "✗", "à": "→", "è": "→"}


def is_dingbat_font(name: str) -> bool:
    """Tell whether a font of that name prints ornaments in the place of letters."""
    return any(sign in name.lower() for sign in ("dingbat", "wingding", "webding"))


def is_symbol_font(name: str) -> bool:
    """Tell whether a font of that name has the Symbol encoding, so that its letter m is a micro sign."""
    return "symbol" in name.lower() and not _UNICODE_FONT.search(name)


@lru_cache(maxsize=4096)
def translated(text: str, font: str) -> str:
    """Give the character that the page shows for a private-use or Symbol-font one; others unchanged."""
    if len(text) != 1:
        return text
    if "\u2e80" <= text <= "\u2fdf" or "\ufb00" <= text <= "\ufb06":
        # Radicals and ligatures that a shortened font gives in place of the usual characters.
        return unicodedata.normalize("NFKC", text)
    code = ord(text)
    if 0xF020 <= code <= 0xF0FF:
        # What Symbol prints as itself (digits, brackets) is given as such.
        return SYMBOL_CODES.get(code - 0xF000, chr(code - 0xF000) if code < 0xF07F else text)
    if is_symbol_font(font):
        return SYMBOL_CODES.get(_STANDARD_CODES.get(text, code), text)
    if is_dingbat_font(font) and text.isprintable() and not text.isspace():
        return _DINGBATS.get(text, "•")
    return text


def is_broken(text: str) -> bool:
    """Tell whether a single glyph's text shows that the font's map to characters is broken."""
    if text.startswith("(cid:") or "\ufffd" in text:
        return True
    if len(text) == 1:
        return "\ue000" <= text <= "\uf8ff" or (ord(text) < 0x20 and text not in "\t\n\r")
    return text not in LIGATURES and any(mark.isdigit() for mark in text) and any(mark.isalpha() for mark in text)
