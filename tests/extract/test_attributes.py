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


@pytest.mark.parametrize(
    "text",
    [
        "plots 1 et 3 quartz, plots 2 et 4 reliés au capot (masse)",
        "Anschlüsse 1 und 3 Quarz, Anschlüsse 2 und 4 mit Deckel verbunden",
        "端子1、3 水晶、端子2、4 接地",
        "焊盘：1、3 为晶体端，2、4 接地。",
    ],
)
def test_pads_are_read_in_other_languages(text):
    pads = attributes_of({}, [text]).pads
    assert pads is not None
    assert (pads.count, pads.crystal, pads.ground) == (4, (1, 3), (2, 4))


def test_the_end_of_a_part_number_before_a_crystal_is_no_pad():
    assert attributes_of({}, ["ABQ38-32K768-6 - crystal 32.768 kHz"]).pads is None


def test_a_yes_in_two_languages_is_a_yes():
    assert attributes_of({"aec_q200": "符合 Yes"}).aec_q200 is True


def test_pads_named_behind_the_word_crystal_are_read_and_nothing_is_said_of_the_others():
    pads = attributes_of({}, ["2.0 x 1.6 mm, 4 pads (crystal on 1 and 3)"]).pads
    assert (pads.count, pads.crystal, pads.ground) == (None, (1, 3), None)


def test_a_lone_pad_is_no_crystal():
    assert attributes_of({}, ["Pad 1: crystal"]).pads is None


def test_pads_named_one_by_one_are_gathered():
    pads = attributes_of({}, ["Pin map: #1 X'tal, #2 GND, #3 X'tal, #4 GND"]).pads
    assert pads is not None
    assert (pads.count, pads.crystal, pads.ground) == (4, (1, 3), (2, 4))


def test_a_lead_time_behind_the_price_stands_by_itself():
    found = attributes_of({"price": "0.31 EUR for 5000, delivery 10 weeks"})
    assert (found.price, found.lead_time) == ("0.31 EUR for 5000", "10 weeks")
