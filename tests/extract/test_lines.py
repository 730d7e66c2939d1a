from building import line

from extract.candidates import entry_candidates
from extract.documents.model import Line, Segment
from extract.entries import Entry, Key
from extract.lines import line_items, without_number
from extract.model import Where


def held(*lines):
    return [
        (each.field, each.bounds)
        for item in line_items(lines)
        if isinstance(item, Entry)
        for each in entry_candidates(item)
    ]


def test_a_label_and_its_value_in_two_segments_are_a_pair():
    assert held(line("Calibration tolerance at 25°C", "±30 ppm")) == [
        ("frequency_tolerance_ppm", (-30.0, None, 30.0, ()))
    ]


def test_symbol_and_unit_in_segments_of_their_own_are_understood():
    assert held(line("Motional resistance", "R1", "50 max.", "kΩ")) == [("esr_ohm", (None, None, 50000.0, ()))]


def test_a_label_over_its_value_is_a_pair():
    assert held(line("Load capacitance:", number=1), line("9 pF", number=2)) == [
        ("load_capacitance_pf", (None, 9.0, None, ()))
    ]


def test_bands_below_a_label_are_all_its_own():
    found = held(
        line("ESR", number=1), line("8 to 12 MHz 100 ohms max", number=2), line("12 to 20 MHz 60 ohms max", number=3)
    )
    assert [bounds[2] for _, bounds in found] == [100.0, 60.0]


def test_codes_below_a_heading_are_an_ordering_key():
    items = line_items([line("[1] Load capacitance", heading=True), line("06 = 6 pF"), line("08 = 8 pF")])
    (key,) = [item for item in items if isinstance(item, Key)]
    assert (key.label.text, [code for code, _ in key.choices]) == ("Load capacitance", ["06", "08"])


def test_a_sentence_wrapped_over_two_lines_is_read_as_one():
    found = held(
        line("The crystal comes in a ceramic case and has a load", number=4),
        line("capacitance of 9 pF at both temperatures.", number=5),
    )
    assert found == [("load_capacitance_pf", (None, 9.0, None, ()))]


def test_a_value_in_a_wrapped_paragraph_keeps_the_place_of_its_line():
    items = line_items(
        [
            line("The crystal comes in a ceramic case and has a load", number=4),
            line("capacitance of 9 pF at both temperatures.", number=5),
        ]
    )
    assert [item.where.line for item in items if isinstance(item, Entry)] == [5]


def test_a_quoted_line_of_mail_states_nothing():
    assert held(line("> we need a crystal with CL = 12 pF, ESR max 40 ohm")) == []


def test_labels_values_and_units_broken_over_lines_are_put_together():
    texts = ["Nominal", "frequency", "24.000", "MHz", "Load", "capacitance", "18 pF", "Aging ±3 ppm/", "year"]
    found = dict(held(*(line(text, number=number) for number, text in enumerate(texts, 1))))
    assert found["frequency_mhz"] == (None, 24.0, None, ())
    assert found["load_capacitance_pf"] == (None, 18.0, None, ())
    assert found["ageing_ppm"] == (-3.0, None, 3.0, ())


def test_the_numbers_of_a_graph_state_nothing():
    texts = ["FREQUENCY AGAINST TEMPERATURE", "10", "0", "-40", "-20", "0", "20", "40", "Temperature [°C]"]
    assert held(*(line(text, number=number) for number, text in enumerate(texts, 1))) == []


def test_values_side_by_side_with_a_unit_each_are_a_choice():
    (entry,) = [item for item in line_items([line("Load capacitance", "8 pF", "12.5 pF")]) if isinstance(item, Entry)]
    assert [each.options for each in entry_candidates(entry)] == [(8.0, 12.5)]


def test_bullets_without_full_stops_are_one_row_each():
    lines = [
        line(text, number=number)
        for number, text in enumerate(
            [
                "- Abgleichtoleranz ±30 ppm bei 25 °C",
                "- Temperaturgang ±50 ppm",
                "- Lastkapazität 20 pF (16 pF auf Anfrage)",
            ]
        )
    ]
    found = [each for item in line_items(lines) if isinstance(item, Entry) for each in entry_candidates(item)]
    assert [(each.field, each.typ or each.max) for each in found] == [
        ("frequency_tolerance_ppm", 30),
        ("frequency_stability_ppm", 50),
        ("load_capacitance_pf", 20),
    ]


def test_torn_words_and_units_behind_their_bound_are_read_from_broken_lines():
    texts = ["Shunt Capac-", "itance", "C0 3.0 max. pF", "Drive Level DL 10 typ., 300", "max.", "µW", "Ageing ±3 ppm"]
    items = line_items(
        [line(text, number=number) for number, text in enumerate(["Nominal Frequency", "F0 20 MHz", *texts])]
    )
    found = [each for item in items if isinstance(item, Entry) for each in entry_candidates(item)]
    held = {each.field: each.bounds[:3] for each in found}
    assert held["shunt_capacitance_pf"] == (None, None, 3.0)
    assert held["drive_level_uw"] == (None, 10.0, 300.0)


def test_a_code_that_is_also_a_symbol_of_another_unit_is_a_code():
    items = line_items([line(text) for text in ("LOAD CAPACITANCE", "B = 10 pF", "Q = 8 pF", "U = 12 pF")])
    (ordering,) = [item for item in items if isinstance(item, Key)]
    assert [code for code, _ in ordering.choices] == ["B", "Q", "U"]


def test_values_side_by_side_with_a_band_each_are_a_row_each():
    items = line_items([line("Series resistance", "150 Ω max (3.2 to 4.9 MHz)", "80 Ω max (5 to 9.9 MHz)")])
    found = [each for item in items if isinstance(item, Entry) for each in entry_candidates(item)]
    assert [(each.when.frequency_mhz, each.max) for each in found] == [((3.2, 4.9), 150), ((5, 9.9), 80)]


def test_a_footnote_states_nothing_of_its_own():
    items = line_items([line("*1 For CL = 6 pF the motional resistance is 90 kΩ max.")])
    assert not any(isinstance(item, Entry) for item in items)


def test_lines_of_a_mode_and_its_value_belong_to_the_label_above():
    lines = [
        line("Series resistance (max)"),
        line("fundamental: 25 ohm", number=2),
        line("3rd overtone: 40 ohm", number=3),
    ]
    found = [each for item in line_items(lines) if isinstance(item, Entry) for each in entry_candidates(item)]
    assert [(each.max, each.when.mode) for each in found] == [(25, "fundamental"), (40, "third overtone")]


def test_the_numbers_beside_a_graph_are_no_values():
    lines = [line("Frequency stability"), *(line(str(-20 * at), number=at + 2) for at in range(4))]
    assert not [item for item in line_items(lines) if isinstance(item, Entry)]


def test_a_footnote_that_is_a_temperature_range_states_it():
    items = line_items([line("*1 ref. to 25 °C. *2 Storage temperature -40 to +125 °C")])
    found = [each for item in items if isinstance(item, Entry) for each in entry_candidates(item)]
    assert [(each.field, each.min, each.max) for each in found] == [("storage_temperature_c", -40, 125)]


def test_a_numbered_paragraph_with_its_own_value_is_no_value_of_the_line_above():
    lines = ["製造者:羽根水晶工業株式会社", "1. 適用範囲", "本仕様書は水晶振動子に適用する。", "2.1 公称周波数:26 MHz"]
    entries = [item for item in line_items([line(text) for text in lines]) if isinstance(item, Entry)]
    found = {entry.label.text: [value.piece.text for value in entry.values] for entry in entries}
    assert found["製造者"] == ["羽根水晶工業株式会社"]
    assert [values for label, values in found.items() if "公称周波数" in label] == [["26 MHz"]]


def on_page(top, *words):
    """A line of segments, each 100 points wide and 120 from the next."""
    where = [Where(page=1, box=(120 * at, top, 120 * at + 100, top + 10)) for at in range(len(words))]
    return Line(tuple(map(Segment, words, where)), where[0])


def test_names_over_their_values_are_cards():
    assert held(on_page(0, "Load capacitance", "ESR"), on_page(12, "8 pF", "60 Ω max")) == [
        ("load_capacitance_pf", (None, 8.0, None, ())),
        ("esr_ohm", (None, None, 60.0, ())),
    ]


def test_names_over_several_rows_of_values_are_no_cards():
    found = held(on_page(0, "Load capacitance", "ESR"), on_page(12, "8 pF", "60 Ω"), on_page(24, "9 pF", "50 Ω"))
    assert ("load_capacitance_pf", (None, 8.0, None, ())) not in found


def test_a_chinese_number_of_a_row_is_no_part_of_it():
    assert without_number("二、ABQ32-16M") == "ABQ32-16M"
