"""Encodings of text files. Texts are ordinary labels of the trade in their language."""

from __future__ import annotations

import pytest

from extract.documents.decoding import decode

# Short texts on purpose: a list of parts may hold a handful of characters beyond ASCII.
CERTAIN = [
    ("±10 ppm", "cp1252"),
    ("25 °C", "cp1252"),
    ("100 µW", "cp1252"),
    ("Lastkapazität 12 pF", "cp1252"),
    ("Güte", "cp1252"),
    ("fréquence générale à 25 °C", "cp1252"),
    ("晶振", "gb18030"),
    ("负载电容", "gb18030"),
    ("标称频率：24MHz ±10ppm", "gb18030"),
    ("周波数", "cp932"),
    ("負荷容量", "cp932"),
    ("等価直列抵抗：80 Ω以下", "cp932"),
    ("水晶振動子", "cp932"),
    ("Частота кварца", "cp1251"),
]


@pytest.mark.parametrize(("text", "encoding"), CERTAIN)
def test_a_short_text_in_an_old_encoding_is_told_without_a_doubt(text: str, encoding: str) -> None:
    assert decode(text.encode(encoding)) == (text, ())


@pytest.mark.parametrize("encoding", ["utf-8", "utf-8-sig", "utf-16", "utf-16-le", "utf-16-be", "utf-32"])
def test_every_form_of_unicode_is_read(encoding: str) -> None:
    text = "Frequency 16.000 MHz, tolerance ±10 ppm at 25 °C\n" * 3
    assert decode(text.encode(encoding)) == (text, ())


def test_the_encoding_that_a_file_names_is_taken_where_it_fits() -> None:
    assert decode("温度".encode("cp932"), declared="Shift_JIS") == ("温度", ())


def test_a_named_encoding_that_does_not_fit_is_passed_over() -> None:
    assert decode("±10 ppm".encode("cp1252"), declared="utf-8")[0] == "±10 ppm"


def test_a_doubtful_encoding_is_said_to_be_a_guess() -> None:
    # B5 E7 is a Chinese character in GB18030 and two letters in the Western encoding; both are possible names.
    _, notes = decode(b"\xce\xc2\xb6\xc8 \xd8")
    assert [note.level for note in notes] == ["warning"]


def test_a_few_broken_bytes_in_utf8_are_shown_and_told() -> None:
    data = "负载电容 标称频率 温度频差 工作温度".encode() + b"\xff"
    text, notes = decode(data)
    assert text == "负载电容 标称频率 温度频差 工作温度\ufffd"
    assert "Look at the original." in notes[0].message


@pytest.mark.parametrize("encoding", ["euc_jp", "cp932"])
def test_japanese_is_told_from_chinese_by_its_kana_and_everyday_signs(encoding: str) -> None:
    words = "公称周波数 32.768 kHz 負荷容量 9 pF 励振レベル 等価直列抵抗 最大 動作温度範囲"
    assert decode(words.encode(encoding)) == (words, ())
