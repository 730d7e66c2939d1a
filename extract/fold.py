"""One form for every glyph that sheets print in several: signs, dashes, tildes, widths, units drawn as one character.

`fold` changes no meaning and no reading order. It may change the length of a text, so search for positions in folded
text only; folding twice gives the same as folding once.
"""

from __future__ import annotations

import re
import unicodedata
from functools import lru_cache

# Symbol-font codes that a PDF leaves as private-use characters (code point minus 0xF000).
# Adobe, "Symbol Set and Encoding" (PDF Reference 1.7, appendix D.5).
_SYMBOL_FONT = {
    0x22: "∀", 0x2A: "*", 0x2D: "-", 0x44: "Δ", 0x46: "Φ", 0x47: "Γ", 0x51: "Θ", 0x57: "Ω", 0x61: "α", 0x62: "β",
    0x64: "δ", 0x65: "ε", 0x66: "φ", 0x67: "γ", 0x6C: "λ", 0x6D: "μ", 0x70: "π", 0x71: "θ", 0x72: "ρ", 0x73: "σ",
    0x74: "τ", 0x77: "ω", 0x7E: "~", 0xA2: "'", 0xA3: "≤", 0xA5: "∞", 0xAE: "→", 0xB0: "°", 0xB1: "±", 0xB2: '"',
    0xB3: "≥", 0xB4: "×", 0xB7: "•", 0xB8: "÷", 0xB9: "≠", 0xBB: "≈", 0xBC: "…", 0xD6: "√", 0xD7: "·",
}  # fmt: skip

_ONE_FOR_ONE = {
    # Dashes; which of them is a minus and which a range only the numbers around it can tell.
    **dict.fromkeys("‐‑‒–—―−﹣－﹘⁃➖", "-"),
    # Tildes, all of them range signs. "÷" is one in Italian and Eastern European sheets.
    **dict.fromkeys("～〜∼˜⁓∽﹏", "~"),
    **dict.fromkeys("÷", "~"),
    **dict.fromkeys("⋯‥┅…", "…"),
    **dict.fromkeys("º˚∘⁰ᵒ", "°"),
    **dict.fromkeys("∆△▵", "Δ"),
    **dict.fromkeys("≦⩽≲≼", "≤"),
    **dict.fromkeys("≧⩾≳≽", "≥"),
    **dict.fromkeys("✕✖⨯╳", "×"),
    **dict.fromkeys("∙⋅", "·"),
    **dict.fromkeys("⁄∕", "/"),
    **dict.fromkeys("【〔〖", "["),
    **dict.fromkeys("】〕〗", "]"),
    **dict.fromkeys("〈《", "<"),
    **dict.fromkeys("〉》", ">"),
    **dict.fromkeys(
        "\u00a0\u2000\u2001\u2002\u2003\u2004\u2005\u2006\u2007\u2008\u2009\u200a\u202f\u205f\u3000\t", " "
    ),
    **dict.fromkeys("\u00ad\u200b\u200c\u200d\u2060\ufeff", ""),
    **{circled: f"({count})" for count, circled in enumerate("①②③④⑤⑥⑦⑧⑨⑩⑪⑫⑬⑭⑮⑯⑰⑱⑲⑳", 1)},
    "µ": "μ",
    "Ω": "Ω",
    "ϕ": "φ",
    **dict.fromkeys("\u2018\u2019\u02bc\u2032", "'"),
    **dict.fromkeys("\u201c\u201d\u2033", '"'),
    "\r": "\n",
    "\v": "\n",
    "\f": "\n",
    "\u2028": "\n",
    "\x85": "\n",
}
_TRANSLATE = str.maketrans(
    {**_ONE_FOR_ONE, **{chr(0xF000 + code): chr(code) for code in range(0x20, 0x7F)}}
    | {chr(0xF000 + code): glyph for code, glyph in _SYMBOL_FONT.items()}
)

_SUPERSCRIPTS = str.maketrans("⁰¹²³⁴⁵⁶⁷⁸⁹⁺⁻", "0123456789+-")
_SUPERSCRIPT_RUN = re.compile("[⁻⁺]?[¹²³⁴⁵⁶⁷⁸⁹][⁰¹²³⁴⁵⁶⁷⁸⁹]*|[⁻⁺][⁰¹²³⁴⁵⁶⁷⁸⁹]+")

# UTF-8 read as Windows-1252, the commonest mojibake of pasted mail and shop lists.
_MOJIBAKE = {
    "Â±": "±",
    "Â°": "°",
    "Âµ": "μ",
    "Î¼": "μ",
    "Î©": "Ω",
    "â„¦": "Ω",
    "Ã—": "×",
    "â€“": "-",
    "â‰¤": "≤",
    "Â²": "²",
}
_MOJIBAKE_RUN = re.compile("|".join(map(re.escape, _MOJIBAKE)))

_WIDE_COMMA = re.compile("(?<=[\x20-\x7e])，(?=[\x21-\x7e])")
_LATEX = {
    "mu": "μ", "omega": "Ω", "pm": "±", "times": "×", "circ": "°", "leq": "≤", "le": "≤", "geq": "≥", "ge": "≥",
    "sim": "~", "delta": "Δ", "infty": "∞", "cdot": "·",
}  # fmt: skip
_LATEX_SIGN = re.compile(r"\$\s?\^?\{?\\(?P<name>[A-Za-z]+)\}?\s?\$|\$(?P<whole>[^$\\]{1,40})\$")

# What each of the patterns needs to be there, for most texts have none of it; the pattern; what it becomes.
_SPELT = [
    ("+", re.compile(r"\+\s?/\s?-|-\s?/\s?\+|\+-(?=\s?[\d.])"), "±"),
    ("=", re.compile(r"<\s?=|=\s?<"), "≤"),
    ("=", re.compile(r">\s?=|=\s?>"), "≥"),
    ("..", re.compile(r"\.{2,}"), "…"),
    # A recogniser's reading of ±; the character is the Chinese word for earth, never printed before a number.
    ("土", re.compile(r"土(?=\s?\d)"), "±"),
    ("  ", re.compile(r" {2,}"), " "),
    ("\n", re.compile(r" ?\n[ \n]*"), "\n"),
]

# Words with single marks between them, in which nothing can fold.
_SIMPLE = re.compile(r"(?:[A-Za-z0-9]++[ /(),:;%-]?+)*+")


def _unbroken(text: str) -> str:
    """`text` without UTF-8 read as Windows-1252, also where that was done twice."""
    while "Â" in text or "Î" in text or "â" in text or "Ã" in text:
        mended = _MOJIBAKE_RUN.sub(lambda found: _MOJIBAKE[found[0]], text)
        if mended == text:
            break
        text = mended
    return text


def _plain_sign(found: re.Match[str]) -> str:
    if found["whole"] is not None:
        return found[0]
    return _LATEX.get(found["name"].casefold(), found[0])


@lru_cache(maxsize=65536)
def fold(text: str) -> str:
    """`text` with one glyph for each sign: "－４０℃～＋８５℃" and "−40 °C – +85 °C" come out in the same characters.

    Dashes and minus signs become "-", tildes "~", dots of a range "…", micro "μ", ohm "Ω", "+/-" "±", full-width
    characters their plain ones, "㏀" "kΩ", "℃" "°C", a raised exponent "^-6", Symbol-font codes what the page shows.
    Runs of spaces become one, line breaks stay.
    """
    text = _unbroken(text)
    if "$" in text and "\\" in text:
        text = _LATEX_SIGN.sub(_plain_sign, text)
    if _SIMPLE.fullmatch(text):
        return text.strip()
    if not text.isascii():
        # Beside plain digits it is never a decimal mark ("AB-12，25 MHz").
        text = _WIDE_COMMA.sub(", ", text)
        text = _SUPERSCRIPT_RUN.sub(lambda found: "^" + found[0].translate(_SUPERSCRIPTS), text)
        text = _unbroken(unicodedata.normalize("NFKC", text.translate(_TRANSLATE)).translate(_TRANSLATE))
    else:
        text = text.translate(_TRANSLATE)
    for needed, pattern, instead in _SPELT:
        if needed in text:
            text = pattern.sub(instead, text)
    return text.strip()


def key(text: str) -> str:
    """What is left of a folded text when case, spaces and punctuation are gone: two labels with one key are one label.

    Accents go too ("Capacité" and "Capacite" are both printed), kana stay, traditional characters become simplified.
    """
    return _key(text)


@lru_cache(maxsize=65536)
def _key(text: str) -> str:
    if text.isascii() and (bare := text.replace(" ", "")).isalnum():
        return bare.lower()
    folded = fold(text).casefold()
    if folded.isascii():
        return folded.translate(_ASCII_NOT_IN_KEY)
    folded = "".join(c for c in unicodedata.normalize("NFD", folded) if c not in _ACCENTS)
    return _NOT_IN_KEY.sub("", unicodedata.normalize("NFC", folded).translate(_TRADITIONAL))


# Traditional Chinese characters of this trade and the simplified ones: one wording serves both.
_TRADITIONAL = str.maketrans(
    "頻負載電儲穩溫範圍動靜級標稱準諧勵驅絕緣聯並線號類產廠製頂點係數額總調變週規測試條項單備註訂價庫貨優維體圓質應與為環過內對濕選購達無實驗擊衝機壓輸佔緩隨誤許師貯補償軟籤觸區間請參見詳帶轉換迴極細彎狀況專業審認檢記錄術證書處編碼閱長寬鍍錫層連導綫屬",
    "频负载电储稳温范围动静级标称准谐励驱绝缘联并线号类产厂制顶点系数额总调变周规测试条项单备注订价库货优维体圆质应与为环过内对湿选购达无实验击冲机压输占缓随误许师贮补偿软签触区间请参见详带转换回极细弯状况专业审认检记录术证书处编码阅长宽镀锡层连导线属",
)
_NOT_IN_KEY = re.compile(r"[^\w/]|_")
_ASCII_NOT_IN_KEY = {code: None for code in range(128) if _NOT_IN_KEY.match(chr(code))}
_ACCENTS = frozenset("\u0300\u0301\u0302\u0303\u0304\u0306\u0308\u030a\u030c\u0327\u0328")
