import pytest

from extract.candidates import entry_candidates
from extract.entries import Piece
from extract.model import Where
from extract.prose import loose_in_prose, pair_entries, prose_entries, split_pairs

HERE = Where(line=1)


def held(text):
    """Field and bounds of everything that a text states beside a label."""
    return [(each.field, each.bounds) for entry in pair_entries(Piece(text, HERE)) for each in entry_candidates(entry)]


def test_keys_and_values_on_one_line_come_apart():
    pairs, _ = split_pairs("P/N=ABQ3-16M FREQ=16.000MHZ CL=8PF")
    assert pairs == [("P/N", "ABQ3-16M"), ("FREQ", "16.000MHZ"), ("CL", "8PF")]


@pytest.mark.parametrize(
    ("text", "read"),
    [
        ("Load capacitance: 7 pF", ("load_capacitance_pf", (None, 7.0, None, ()))),
        ("It has a load capacitance of 9 pF and a low price.", ("load_capacitance_pf", (None, 9.0, None, ()))),
        (
            "±10 ppm tolerance at 25 °C and ±15 ppm over temperature",
            ("frequency_tolerance_ppm", (-10.0, None, 10.0, ())),
        ),
        ("The ESR is 60 ohms at most, and the case is small.", ("esr_ohm", (None, None, 60.0, ()))),
        (
            "Die Lastkapazität beträgt wahlweise 12, 16 oder 20 pF.",
            ("load_capacitance_pf", (None, None, None, (12.0, 16.0, 20.0))),
        ),
        ("la resistenza in serie di 70 kohm massima (42 kohm tipica)", ("esr_ohm", (None, 42000.0, 70000.0, ()))),
        ("谐振电阻：≤50Ω", ("esr_ohm", (None, None, 50.0, ()))),
    ],
)
def test_a_label_finds_its_amount(text, read):
    assert read in held(text)


def test_each_label_takes_its_own_amount():
    found = held("tolerance ±10 ppm stability ±20 ppm")
    assert found == [
        ("frequency_tolerance_ppm", (-10.0, None, 10.0, ())),
        ("frequency_stability_ppm", (-20.0, None, 20.0, ())),
    ]


def test_bands_and_their_values_in_a_dump_are_paired():
    text = "Motional resistance R1 8.0 MHz to 11.9 MHz 12.0 MHz to 20.0 MHz 100 Ω max. 60 Ω max. Shunt capacitance 5 pF"
    found = [
        each for entry in pair_entries(Piece(text, HERE)) for each in entry_candidates(entry) if each.field == "esr_ohm"
    ]
    assert [(each.when.frequency_mhz, each.max) for each in found] == [((8.0, 11.9), 100.0), ((12.0, 20.0), 60.0)]


def test_a_formula_is_no_value():
    assert held("Frequency at temperature T: Δf/f = B (T - T0)². At -20 °C the shift is -71 ppm.") == []


def loose(text):
    return [(each.field, each.min, each.typ, each.max) for each in loose_in_prose(Piece(text, HERE))]


def test_ppm_over_a_range_is_the_stability_and_gives_the_range():
    assert loose("kept within ±50 ppm from -20 °C to +70 °C.") == [
        ("frequency_stability_ppm", -50.0, None, 50.0),
        ("operating_temperature_c", -20.0, None, 70.0),
    ]


def test_what_is_only_on_request_is_not_offered():
    assert loose("Other frequencies from 4 MHz to 24 MHz are available on request.") == []


def test_two_frequencies_without_a_label_are_none():
    assert loose("We stock 12 MHz. We also stock 16 MHz.") == []


def test_bands_with_one_resistance_each_behind_or_before_them_are_paired():
    for text in ("8 - 9.999 MHz: 100 Ω max 10 - 20 MHz: 70 Ω max", "100 Ω max 8 - 9.999 MHz 70 Ω max 10 - 20 MHz"):
        found = [each for entry in prose_entries(Piece(f"ESR {text}", HERE)) for each in entry_candidates(entry)]
        assert [(each.when.frequency_mhz, each.max) for each in found] == [((8, 9.999), 100), ((10, 20), 70)]


def test_a_range_before_its_label_is_taken_whole():
    assert held("l'écart reste de ± 50 ppm entre -20 °C et +70 °C, plage de fonctionnement") == [
        ("operating_temperature_c", (-20, None, 70, ()))
    ]


def test_a_label_parted_from_its_values_by_semicolons_is_a_pair():
    assert held("谐振电阻;12.000~15.999MHz:100Ω max;16.000~54.000MHz:60Ω max") == [
        ("esr_ohm", (None, None, 100, ())),
        ("esr_ohm", (None, None, 60, ())),
    ]
    assert held("负载电容;8pF/10pF/12pF") == [("load_capacitance_pf", (None, None, None, (8, 10, 12)))]


def test_the_end_of_a_measuring_condition_before_a_label_of_a_range_is_no_range():
    assert held("±30 ppm Ref. to 25 °C Operating Temperature Range") == []


def test_bands_parted_by_semicolons_keep_their_own_values_and_modes():
    text = "Resonanzwiderstand: 8-9,999 MHz 80 Ω; 10-19,999 MHz 50 Ω; 40-125 MHz (3. OT) 100 Ω"
    found = [each for entry in pair_entries(Piece(text, HERE)) for each in entry_candidates(entry)]
    assert [(each.when.frequency_mhz, each.when.mode, each.typ) for each in found] == [
        ((8, 9.999), None, 80),
        ((10, 19.999), None, 50),
        ((40, 125), "third overtone", 100),
    ]


def test_each_ppm_is_judged_by_what_stands_behind_it_up_to_the_next():
    found = loose_in_prose(Piece("12 MHz, ±10 ppm at 25 °C, ±20 ppm over -40 to +85 °C", HERE))
    assert [(each.field, each.max) for each in found if each.field.endswith("_ppm")] == [
        ("frequency_tolerance_ppm", 10),
        ("frequency_stability_ppm", 20),
    ]


@pytest.mark.parametrize("mark", [", ", "; ", " "])
def test_a_bound_word_belongs_to_the_value_it_follows_and_not_to_the_next_property(mark):
    pieces = ("CL = 8 pF", "ESR = 30 Ω typ", "C0 = 2 pF max", "C1 = 4 fF typ", "DL = 100 µW max")
    assert held(mark.join(pieces)) == [
        ("load_capacitance_pf", (None, 8.0, None, ())),
        ("esr_ohm", (None, 30.0, None, ())),
        ("shunt_capacitance_pf", (None, None, 2.0, ())),
        ("motional_capacitance_ff", (None, 4.0, None, ())),
        ("drive_level_uw", (None, None, 100.0, ())),
    ]


def test_a_decimal_comma_parts_no_properties():
    assert held("CL = 8,5 pF, ESR = 30,5 Ω typ, C0 = 2,1 pF max") == [
        ("load_capacitance_pf", (None, 8.5, None, ())),
        ("esr_ohm", (None, 30.5, None, ())),
        ("shunt_capacitance_pf", (None, None, 2.1, ())),
    ]


def test_a_bound_word_before_each_label_stays_with_its_label():
    assert held("max ESR = 60 Ω max DL = 100 µW") == [
        ("esr_ohm", (None, None, 60.0, ())),
        ("drive_level_uw", (None, None, 100.0, ())),
    ]


@pytest.mark.parametrize(
    "text",
    [
        "CL=8pF ESR≤60Ω C0<2pF DL≤100uW",
        "CL = 8 pF, ESR ≤ 60 Ω, C0 = 2 pF max, DL 100 µW max",
        "CL = 8 pF, ESR 60 Ω max, C0 2 pF max, DL 100 µW max, -40~85 °C",
        "CL = 8 pF, ESR < 60 Ω, C0 < 2 pF, DL < 100 µW, -40~85 °C",
    ],
)
def test_properties_behind_a_pair_are_read_with_any_sign_between_label_and_value(text):
    assert held(text) == [
        ("load_capacitance_pf", (None, 8.0, None, ())),
        ("esr_ohm", (None, None, 60.0, ())),
        ("shunt_capacitance_pf", (None, None, 2.0, ())),
        ("drive_level_uw", (None, None, 100.0, ())),
    ]


def test_a_tolerance_behind_the_frequency_is_a_guess_that_asks_to_be_checked():
    found = loose_in_prose(Piece("Crystal ZZ-8 26 MHz ±10ppm CL=8pF -40~85°C", HERE))
    (tolerance,) = [each for each in found if each.field == "frequency_tolerance_ppm"]
    assert (tolerance.min, tolerance.max, bool(tolerance.doubts)) == (-10.0, 10.0, True)
    assert not [each for each in found if each.field == "frequency_stability_ppm"]


def test_a_request_in_the_next_sentence_withdraws_nothing():
    text = "Storage temperature: -40 to +125 °C. Frequency aging: ±1 ppm/year max. Frequencies outside on request."
    assert [(field, bounds[2]) for field, bounds in held(text)] == [("storage_temperature_c", 125), ("ageing_ppm", 1)]


def test_series_in_a_sentence_is_no_label():
    found = held("For all series: load capacitance 18 pF")
    assert [(field, bounds[1]) for field, bounds in found] == [("load_capacitance_pf", 18)]
