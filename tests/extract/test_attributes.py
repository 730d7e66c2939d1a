import pytest

from extract.attributes import attributes_of


def test_stated_attributes_are_taken_over():
    found = attributes_of(
        {"moisture_level": "1", "reflow_peak_c": "260 °C, 10 s", "aec_q200": "yes", "price": "0.23 EUR"}
    )
    assert (found.moisture_level, found.reflow_peak_c, found.aec_q200, found.price) == ("1", 260.0, True, "0.23 EUR")


def test_what_is_not_stated_is_absent():
    assert attributes_of({}).model_dump() == {}


@pytest.mark.parametrize("text", ["Pads 1 and 3 are the crystal, pads 2 and 4 ground.", "#1,#3 crystal #2,#4 GND"])
def test_pads_are_read_from_the_line_that_names_them(text):
    pads = attributes_of({}, [text]).pads
    assert pads is not None
    assert (pads.count, pads.crystal, pads.ground) == (4, (1, 3), (2, 4))
