"""From bytes to text: byte-order marks, UTF-8, UTF-16, and the older encodings of East Asia and Europe.

Old encodings carry no mark, and most bytes can be decoded in several of them. What decides is how likely the decoded
characters are beside one another: everyday signs of that script, and no scripts mixed within a word.
"""

from __future__ import annotations

import codecs
import unicodedata
from collections.abc import Iterator

from extract.model import Note

_MARKS = (
    (codecs.BOM_UTF8, "utf-8-sig"),
    (codecs.BOM_UTF32_LE, "utf-32"),
    (codecs.BOM_UTF32_BE, "utf-32"),
    (codecs.BOM_UTF16_LE, "utf-16"),
    (codecs.BOM_UTF16_BE, "utf-16"),
)
# In order of preference where two are equally likely.
_OLD_ENCODINGS = ("gb18030", "cp932", "cp1252", "euc_jp", "big5", "cp949", "cp1250", "cp1251")
_NAMES = {
    "gb18030": "GB18030 (Chinese)",
    "cp932": "Shift_JIS (Japanese)",
    "cp1252": "Windows-1252 (Western European)",
    "euc_jp": "EUC-JP (Japanese)",
    "big5": "Big5 (Chinese)",
    "cp949": "EUC-KR (Korean)",
    "cp1250": "Windows-1250 (Central European)",
    "cp1251": "Windows-1251 (Cyrillic)",
}
# How often each is met at all; a file in a rare one must read clearly better in it.
_COMMONNESS = {"euc_jp": 0.8, "big5": 0.8, "cp1250": 0.78}
# Everyday syllables: Chinese read as Korean gives any of 2,350 syllables, Korean mostly these.
_KOREAN_SYLLABLES = frozenset(
    "의이다는을를에로하고가한지기도수사용부온정전주파허차동작범위저항량대최소준격제품류력압형"
)
# Ideographs that lists and sheets print over and over; a text read in the wrong encoding has few of them.
_EVERYDAY = {
    "euc_jp": frozenset(
        "公称周波数許容偏差温度範囲動作保存負荷容量等価直列抵抗励振絶縁並経年変化外形寸法水晶子型番品名仕様書条件単位備考"
        "最大小標準値以上下月日特性電圧定格項目記号製造社会式株部表図注意用途基本頂点係次率在庫金額納期価格一二三株式有限"
    ),
    "gb18030": frozenset(
        "的标称频率负载电容谐振阻等效串联静态激励功工作温度范围储存老化绝缘最大小典型值单位条件备注编号厂家封装尺寸年月日"
        "产品规格书公司有限晶体荡器误差稳定性参数项目符号说明价库期一二三个是在不为用于客户名数量检验标准品牌交货"
    ),
    "big5": frozenset(
        "的標稱頻率負載電容諧振阻等效串聯靜態激勵功工作溫度範圍儲存老化絕緣最大小典型值單位條件備註編號廠家封裝尺寸年月日"
        "產品規格書公司有限晶體盪器誤差穩定性參數項目符號說明價庫期一二三個是在不為用於客戶名數量檢驗標準品牌交貨"
    ),
}
_SAMPLE = 4000  # characters beyond ASCII that are weighed
_ENOUGH = 8  # ideographs from which on too few everyday ones tell something
_CLEAR_LEAD = 0.15
_TRADE_SIGNS = frozenset("°±µ²³×·–—“”„‘’…€§«»")
_WIDE_SIGNS = frozenset("ΩΔμ±×℃°≤≥～〜・．，。：；、（）【】「」／％－＋—…→※■●○△▲①②③④⑤≦≧∞σπφαβγθ¢£‘’“”•·★☆◆◇□")


def decode(data: bytes, *, declared: str | None = None) -> tuple[str, tuple[Note, ...]]:
    """Text of a file and a warning where its encoding is in doubt.

    Parameters
    ----------
    data
        The file's bytes.
    declared
        The encoding that the file names itself, taken where it fits the bytes.
    """
    for mark, encoding in _MARKS:
        if data.startswith(mark):
            return data.decode(encoding, errors="replace").lstrip("\ufeff"), ()
    if utf16 := _unmarked_utf16(data):
        return data.decode(utf16, errors="replace"), ()
    for likely in ("utf-8", _superset(declared)):
        text = _strictly(data, likely) if likely else None
        if text is not None:
            return text, ()
    if (mended := _damaged_utf8(data)) is not None:
        return mended, (
            _note("Some characters are damaged (broken UTF-8); they show as \ufffd. Look at the original."),
        )
    return _most_likely(data)


def _superset(declared: str | None) -> str | None:
    """The encoding that files really use when they name a narrower one."""
    wider = {
        "shift_jis": "cp932",
        "gb2312": "gb18030",
        "gbk": "gb18030",
        "iso8859-1": "cp1252",
        "ascii": "cp1252",
        "euc_kr": "cp949",
    }
    if not declared:
        return None
    try:
        name = codecs.lookup(declared.strip()).name
    except LookupError:
        return None
    return wider.get(name, name)


def _strictly(data: bytes, encoding: str) -> str | None:
    try:
        return data.decode(encoding)
    except (UnicodeDecodeError, LookupError):
        return None


def _unmarked_utf16(data: bytes) -> str | None:
    """UTF-16 without its mark: every second byte of the plain letters is zero."""
    sample = data[:4096]
    if len(sample) < 4 or len(data) % 2:
        return None
    even, odd = sample[0::2].count(0), sample[1::2].count(0)
    half = len(sample) // 2
    if odd > 0.4 * half and even < 0.05 * half:
        return "utf-16-le"
    if even > 0.4 * half and odd < 0.05 * half:
        return "utf-16-be"
    return None


def _damaged_utf8(data: bytes) -> str | None:
    """Text of UTF-8 with a few broken places, or None where it is another encoding."""
    text = data.decode("utf-8", errors="replace")
    broken = text.count("\ufffd")
    sound = sum(1 for character in text if character > "\x7f") - broken
    return text if sound >= 4 and broken * 10 <= sound else None


def _most_likely(data: bytes) -> tuple[str, tuple[Note, ...]]:
    scored = []
    for preference, encoding in enumerate(_OLD_ENCODINGS):
        text = _strictly(data, encoding)
        if text is not None:
            scored.append((_likelihood(text, encoding), -preference, encoding, text))
    if not scored:
        text = data.decode("cp1252", errors="replace")
        return text, (
            _note("The text's encoding cannot be told; damaged characters show as \ufffd. Save it as UTF-8."),
        )
    scored.sort(reverse=True)
    best, _, encoding, text = scored[0]
    rivals = [other for other in scored[1:] if other[3] != text]
    if best < 0.5 or (rivals and best - rivals[0][0] < _CLEAR_LEAD):
        return text, (
            _note(f"The text's encoding is a guess: {_NAMES[encoding]}. Compare names and signs, or save it as UTF-8."),
        )
    return text, ()


def _note(message: str) -> Note:
    return Note(level="warning", message=message)


def _likelihood(text: str, encoding: str) -> float:
    """How likely (0 to 1) this text is, judged by its characters beyond ASCII."""
    weigh = {"gb18030": _chinese, "big5": _chinese, "cp932": _japanese, "euc_jp": _japanese, "cp949": _korean}.get(
        encoding, _european
    )
    weights = [weigh(before, character, after) for before, character, after in _beyond_ascii(text)]
    likelihood = sum(weights) / len(weights) if weights else 1.0
    if encoding == "cp949":
        hangul = [character for character in text if "\uac00" <= character <= "\ud7a3"][:_SAMPLE]
        everyday = sum(character in _KOREAN_SYLLABLES for character in hangul)
        likelihood *= 1.2 if everyday * 3 > len(hangul) else 0.6
    if encoding in _EVERYDAY:
        ideographs = [character for character in text if "\u4e00" <= character <= "\u9fff"][:_SAMPLE]
        share = sum(character in _EVERYDAY[encoding] for character in ideographs) / max(1, len(ideographs))
        likelihood *= 1.2 if share > 0.4 else 0.6 if share < 0.15 and len(ideographs) >= _ENOUGH else 1.0
    return likelihood * _COMMONNESS.get(encoding, 1.0)


def _beyond_ascii(text: str) -> Iterator[tuple[str, str, str]]:
    found = 0
    for index, character in enumerate(text):
        if character > "\x7f":
            yield text[index - 1 : index] or " ", character, text[index + 1 : index + 2] or " "
            found += 1
            if found == _SAMPLE:
                return


def _east_asian_sign(character: str) -> float | None:
    if character in _WIDE_SIGNS or "\uff01" <= character <= "\uff5e" or "\u3000" <= character <= "\u3015":
        return 1.0
    return None


def _level(character: str, encoding: str, first_rare_lead: int) -> float:
    """Weight of an ideograph: the everyday half of the standard, its rarer half, or outside it."""
    try:
        lead = character.encode(encoding)[0]
    except UnicodeEncodeError:
        return 0.0
    return 1.0 if lead < first_rare_lead else 0.3


def _chinese(before: str, character: str, after: str) -> float:
    sign = _east_asian_sign(character)
    if sign is not None:
        return sign
    if "\u4e00" <= character <= "\u9fff":
        simplified = _level(character, "gb2312", 0xD8)
        # Traditional characters lie outside GB2312: weighed by Big5's everyday half.
        return simplified or 0.7 * _level(character, "big5", 0xC9)
    if "\u3040" <= character <= "\u30ff":
        # EUC-JP has its kana where GB2312 has them; no Chinese sheet prints more than a stray one.
        return -1.0
    return 0.0


def _japanese(before: str, character: str, after: str) -> float:
    sign = _east_asian_sign(character)
    if sign is not None:
        return sign
    if "\u3040" <= character <= "\u30ff":
        return 1.0
    if "\uff61" <= character <= "\uff9f":
        return 0.6 if "\uff61" <= before <= "\uff9f" or "\uff61" <= after <= "\uff9f" else 0.05
    if "\u4e00" <= character <= "\u9fff":
        return _level(character, "shift_jis", 0x99)
    return 0.0


def _korean(before: str, character: str, after: str) -> float:
    sign = _east_asian_sign(character)
    if sign is not None:
        return sign
    if "\uac00" <= character <= "\ud7a3":
        try:
            character.encode("iso2022_kr")
        except UnicodeEncodeError:
            return 0.0
        return 1.0
    return 0.2 if "\u4e00" <= character <= "\u9fff" else 0.0


def _european(before: str, character: str, after: str) -> float:
    if character in _TRADE_SIGNS:
        inside_a_word = before.isalpha() and after.isalpha() and character not in "’–—·×"
        return 0.2 if inside_a_word else 1.0
    if character == "\xa0":
        return 0.8
    return _letter(before, character, after) if character.isalpha() else 0.2


def _letter(before: str, character: str, after: str) -> float:
    """Weight of a letter of an alphabet between its neighbours."""
    if not before.isalpha() and not after.isalpha():
        return 0.5
    scripts = {_script(neighbour) for neighbour in (before, character, after) if neighbour.isalpha()}
    if scripts == {"CYRILLIC"}:
        return 0.9 if character.islower() else 0.5
    if len(scripts) > 1:
        return 0.0
    if (before.islower() and character.isupper()) or (before > "\x7f" and before.isalpha()):
        return 0.2
    return 1.0 if character in "äöüÄÖÜßéèêàçùâîôëïûñóíáúòìøåæØÅÆ" else 0.8


def _script(character: str) -> str:
    return unicodedata.name(character, "?").split(" ")[0]
