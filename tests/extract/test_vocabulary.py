"""The wording files load as one vocabulary, and a contradiction in them stops the program."""

from __future__ import annotations

import pytest

from extract.fields import fields
from extract.vocabulary import WordingError, gather, vocabulary


def test_the_languages_of_the_trade_are_there():
    assert {"en", "de", "fr", "it", "es", "zh", "ja", "any"} <= set(vocabulary().languages)


@pytest.mark.parametrize("language", ["en", "de", "fr", "it", "es", "zh", "ja"])
def test_each_language_names_every_field(language):
    import tomllib
    from importlib import resources

    text = resources.files("extract").joinpath("wording", f"{language}.toml").read_text(encoding="utf-8")
    assert set(tomllib.loads(text)["labels"]) == set(fields())


def test_a_label_claimed_by_two_fields_fails_and_names_both():
    table = {"labels": {"esr_ohm": ["Series thing"], "motional_capacitance_ff": ["series-thing"]}}
    with pytest.raises(
        WordingError, match=r"^xx\.toml: 'series-thing' is claimed by esr_ohm and motional_capacitance_ff$"
    ):
        gather([("xx.toml", table)])


def test_a_field_that_does_not_exist_fails():
    with pytest.raises(WordingError, match=r"^xx\.toml: no field called 'colour'$"):
        gather([("xx.toml", {"labels": {"colour": ["Colour"]}})])


def test_an_unknown_section_fails():
    with pytest.raises(WordingError, match=r"^xx\.toml: no section called 'lables'$"):
        gather([("xx.toml", {"lables": {}})])


def test_a_label_of_one_field_is_not_also_shared():
    table = {"labels": {"esr_ohm": ["Thing"]}, "shared": {"thing": ["esr_ohm", "quality_factor"]}}
    with pytest.raises(WordingError, match="'thing' is the label of one field and of several"):
        gather([("xx.toml", table)])


def test_a_new_language_is_a_table_and_no_code():
    words = gather(
        [("xx.toml", {"language": "xx", "labels": {"esr_ohm": ["Sarjavastus"]}, "bounds": {"max": ["enintään"]}})]
    )
    assert words.labels["sarjavastus"] == "esr_ohm"
    assert words.bounds["enintaan"] == "max"
