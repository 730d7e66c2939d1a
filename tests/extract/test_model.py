"""The shape of what is written out is the data contract's, sections 1 and 2."""

import json

import pytest
from pydantic import ValidationError

from extract.model import Attributes, Note, Pads, Part, Reading, SpecSheet, When, Where

ESR = {"field": "esr_ohm", "max": 60.0, "raw": "ESR 60 Ω max", "where": Where(line=4)}


def written(reading: Reading) -> dict:
    return json.loads(reading.model_dump_json())


def test_a_reading_writes_every_bound_and_only_the_conditions_that_are_there():
    reading = Reading(**ESR, when=When(frequency_mhz=(12.0, 16.0)))
    assert written(reading) == {
        "field": "esr_ohm",
        "min": None,
        "typ": None,
        "max": 60.0,
        "options": [],
        "when": {"frequency_mhz": [12.0, 16.0]},
        "raw": "ESR 60 Ω max",
        "where": {"line": 4},
        "status": "stated",
        "check": None,
    }


def test_bare_is_written_only_where_it_is_true():
    assert "bare" not in written(Reading(**ESR))
    assert written(Reading(**ESR, bare=True))["bare"] is True


def test_a_reading_without_a_value_is_refused():
    with pytest.raises(ValidationError, match="without a value"):
        Reading(field="esr_ohm", raw="ESR -", where=Where(line=4))


def test_bounds_out_of_order_are_kept_only_with_a_check():
    twisted = {
        "field": "motional_capacitance_ff",
        "min": 5.0,
        "max": 4.0,
        "raw": "C1 5 to 4 fF",
        "where": Where(line=1),
    }
    with pytest.raises(ValidationError, match="out of order"):
        Reading(**twisted)
    assert Reading(**twisted, check="minimum above maximum").min == 5.0


@pytest.mark.parametrize("value", [float("nan"), float("inf")])
def test_a_number_that_json_cannot_hold_is_refused(value):
    with pytest.raises(ValidationError):
        Reading(field="esr_ohm", max=value, raw="ESR", where=Where(line=1))


def test_an_unknown_field_is_refused():
    with pytest.raises(ValidationError):
        Reading(field="esr_kohm", max=60.0, raw="ESR", where=Where(line=1))


def test_absent_attributes_stay_absent_and_no_is_not_absent():
    attributes = Attributes(pads=Pads(count=4, crystal=(1, 3)), aec_q200=False)
    part = json.loads(Part(part_number="QF-26", attributes=attributes).model_dump_json())
    assert part["attributes"] == {"pads": {"count": 4, "crystal": [1, 3]}, "aec_q200": False}
    assert part["maker"] is None


def test_a_sheet_reads_back_as_it_was_written():
    note = Note(level="warning", message="two values", where=Where(page=1, box=(1, 2, 3, 4)))
    part = Part(part_number="QF-26", readings=(Reading(**ESR, bare=True),))
    sheet = SpecSheet(file="a.pdf", sha256="0" * 64, kind="pdf", parts=(part,), notes=(note,))
    assert SpecSheet.model_validate_json(sheet.model_dump_json()) == sheet


def test_a_place_in_words_names_page_sheet_line_and_cell():
    assert str(Where(page=2, box=(1, 2, 3, 4))) == "page 2"
    assert str(Where(sheet="Parts", cell="B7")) == "sheet Parts, cell B7"
    assert str(Where(line=12, cell="C12")) == "line 12, cell C12"
