"""Questions to the maker: which language a sheet is in, and that every language has its words."""

import pytest
from made_sheets import reading, usual

from compare.letters import ENGLISH, in_language, language_of, letters, wordings
from compare.questions import sentences
from compare.relations import rules

LABELS = {
    "de": ("Lastkapazität 8 pF", "Frequenztoleranz ±10 ppm"),
    "fr": ("capacité de charge 8 pF", "tolérance de fréquence ±10 ppm"),
    "it": ("capacità di carico 8 pF", "tolleranza di frequenza ±10 ppm"),
    "es": ("capacidad de carga 8 pF", "tolerancia de frecuencia ±10 ppm"),
    "ja": ("負荷容量 8 pF", "周波数許容偏差 ±10 ppm"),
    "zh": ("负载电容 8 pF", "频率公差 ±10 ppm"),
    "en": ("Load capacitance 8 pF", "Frequency tolerance ±10 ppm"),
}


@pytest.mark.parametrize("language", LABELS)
def test_the_language_is_that_of_the_labels_before_the_values(language):
    load, tolerance = LABELS[language]
    part = usual(
        reading("load_capacitance_pf", 8.0).model_copy(update={"raw": load}),
        reading("frequency_tolerance_ppm", min=-10.0, max=10.0).model_copy(update={"raw": tolerance}),
    )
    others = tuple(
        r if r.field in ("load_capacitance_pf", "frequency_tolerance_ppm") else r.model_copy(update={"raw": "1"})
        for r in part.readings
    )
    assert language_of(part.model_copy(update={"readings": others})) == language


def test_symbols_and_figures_alone_are_taken_as_english():
    bare = usual().model_copy(
        update={"readings": tuple(r.model_copy(update={"raw": "CL 8"}) for r in usual().readings)}
    )
    assert language_of(bare) == ENGLISH


def test_every_language_with_a_sentence_has_a_wording_file():
    assert set(letters()) <= set(wordings())


@pytest.mark.parametrize("language", sorted(set(letters()) - {ENGLISH}))
def test_every_reading_that_may_be_missing_has_words_in_every_language(language):
    asked = [field for field in rules() if field in sentences()] + ["mode", "package", "pads", "least_esr_ohm"]
    found = in_language(language, asked, usual(), 16.0)
    assert found is not None
    assert found["language"] == language
    assert len(found["sentences"]) == len(asked)
    assert all("P1" in sentence and "16 MHz" in sentence and "{" not in sentence for sentence in found["sentences"])
