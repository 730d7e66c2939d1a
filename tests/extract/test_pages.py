import pytest

from extract.pages import CrystalPages, speaks_of_crystals

FILLER = "Relay RX-12, coil 12 V DC, 360 ohm, contacts 10 A 250 V AC, life 100000 operations, 15.2 x 20.1 mm. "


@pytest.mark.parametrize(
    "text",
    [
        "Quartz crystals 3.2 x 2.5 mm",
        "Load capacitance 8 pF",
        "L o a d  c a p a c i t a n c e",
        "Lastkapazität 12 pF",
        "Capacité de charge 8 pF",
        "负载电容 8 pF",
        "負荷容量 8 pF",
        "26 MHz: CL 8 pF, ESR 60, C0 2 pF",
    ],
)
def test_a_page_that_names_crystals_or_their_properties_is_wanted(text):
    assert speaks_of_crystals(FILLER + text)


@pytest.mark.parametrize("text", [FILLER, "Capacitor 10 uF, ESR 20 mohm at 100 kHz", "General terms of sale, 1 to 14"])
def test_a_page_of_other_things_is_not(text):
    assert not speaks_of_crystals(text)


def test_the_page_after_one_of_crystals_is_wanted_where_a_table_may_run_over():
    wanted = CrystalPages()
    numbers = "12.000 60 2.0 100 " * 10
    assert [wanted(text) for text in ("crystals", numbers, numbers, "crystals", "few words")] == [
        True, True, False, True, False,
    ]  # fmt: skip


def test_a_page_whose_font_gives_no_characters_cannot_be_told_and_is_wanted():
    assert CrystalPages()("(cid:12)(cid:45)(cid:7) 12 (cid:9)")
