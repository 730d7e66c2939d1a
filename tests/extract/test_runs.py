"""Known runs of words in a text."""

from __future__ import annotations

from extract.runs import Table, words_of

TABLE: Table[str] = Table({"load": "weak", "loadcapacitance": "strong", "负载电容": "zh", "c0/c1": "ratio"})


def found(text: str) -> list[tuple[str, str]]:
    return [(text[run.start : run.end], run.meaning) for run in TABLE.runs(text)]


def test_the_longest_run_from_a_start_counts():
    assert found("the load capacitance and the load") == [("load capacitance", "strong"), ("load", "weak")]


def test_what_stands_between_the_words_does_not_matter():
    assert found("LOAD-Capacitance") == [("LOAD-Capacitance", "strong")]


def test_ideographs_need_no_spaces_around_them():
    assert found("的负载电容为") == [("负载电容", "zh")]


def test_a_slash_is_a_word_of_its_own():
    assert found("C0/C1 = 250") == [("C0/C1", "ratio")]
    assert [word.key for word in words_of("a/b")] == ["a", "/", "b"]


def test_a_part_of_a_word_is_no_run():
    assert found("payload loads") == []
