import pytest
from building import bounds, document, line, table

from extract.blocks import read_blocks
from extract.parts import parts_of


def found(*blocks, headers=()):
    return parts_of(read_blocks(document(*blocks, headers=headers)))


VALUES = table(
    ("Nominal frequency", "16 MHz"),
    ("Vibration mode", "AT-cut, fundamental"),
    ("Load capacitance", "9 pF"),
    ("ESR", "60 Ω max."),
    ("Drive level", "100 µW max."),
)


def test_a_part_has_its_identity_from_the_lines_around_the_table():
    (part,) = found(line("ABQ32-16.000-9"), line("Quartz crystal 3.2 x 2.5 mm", "Able Timing Ltd"), VALUES).parts
    assert (part.part_number, part.maker, part.package) == ("ABQ32-16.000-9", "Able Timing Ltd", "3.2 x 2.5 mm")
    assert (part.mode, part.cut, part.resonance) == ("fundamental", "AT", "load")


def test_a_part_offered_in_two_modes_has_none():
    rows = table(
        ("Frequency range", "8 to 75 MHz"),
        ("Mode", "Fundamental or 3rd overtone"),
        ("ESR", "60 Ω"),
        ("Load capacitance", "9 pF"),
    )
    (part,) = found(line("ABQ49"), rows).parts
    assert part.mode is None


def test_a_series_resonant_part_has_no_load():
    rows = table(("Frequency", "16 MHz"), ("Load capacitance", "series resonance"), ("ESR", "60 Ω max."))
    (part,) = found(line("ABQ49-16"), rows).parts
    assert part.resonance == "series"
    assert bounds(part, "load_capacitance_pf") == []


def test_load_and_series_both_offered_leave_the_resonance_open():
    rows = table(("Frequency", "16 MHz"), ("Load capacitance", "10 to 32 pF or series resonance"), ("ESR", "60 Ω max."))
    (part,) = found(line("ABQ49-16"), rows).parts
    assert part.resonance is None


def test_series_resonance_on_request_is_not_offered():
    rows = table(
        ("Frequency", "16 MHz"), ("Load capacitance", "16 pF (series resonance on request)"), ("ESR", "60 Ω max.")
    )
    (part,) = found(line("ABQ49-16"), rows).parts
    assert part.resonance == "load"


def test_what_is_stated_for_all_goes_to_every_part_of_a_list():
    common = table(("Shunt capacitance", "3 pF max."), ("Storage temperature", "-40 to +125 °C"))
    rows = table(
        ("Part number", "Frequency", "ESR max."), ("ABQ32-12M", "12 MHz", "80 Ω"), ("ABQ32-16M", "16 MHz", "60 Ω")
    )
    parts = found(line("All parts"), common, rows).parts
    assert [(part.part_number, bounds(part, "shunt_capacitance_pf")) for part in parts] == [
        ("ABQ32-12M", [(None, None, 3.0)]),
        ("ABQ32-16M", [(None, None, 3.0)]),
    ]


def test_a_listed_part_takes_only_the_band_of_its_own_frequency():
    bands = table(("Frequency range (MHz)", "ESR max. (Ω)"), ("8 - 13.999", "100"), ("14 - 40", "60"))
    rows = table(("Part number", "Frequency", "CL (pF)"), ("ABQ32-12M", "12 MHz", "9"), ("ABQ32-16M", "16 MHz", "9"))
    parts = found(rows, line("ESR"), bands).parts
    assert [bounds(part, "esr_ohm") for part in parts] == [[(None, None, 100.0)], [(None, None, 60.0)]]


def test_models_in_columns_are_parts_with_shared_values():
    rows = (
        ("Item", "ABQ-210", "ABQ-320"),
        ("Frequency", "16 MHz", "12 MHz"),
        ("Package", "2.0 x 1.6 mm", "3.2 x 2.5 mm"),
        ("ESR", "80 Ω max.", "60 Ω max."),
        ("Ageing", "±1 ppm / year", None),
    )
    parts = found(table(*rows, spans={(4, 1): (1, 2)})).parts
    assert [(part.part_number, part.package, bounds(part, "esr_ohm")) for part in parts] == [
        ("ABQ-210", "2.0 x 1.6 mm", [(None, None, 80.0)]),
        ("ABQ-320", "3.2 x 2.5 mm", [(None, None, 60.0)]),
    ]
    assert all(bounds(part, "ageing_ppm") == [(-1.0, None, 1.0)] for part in parts)


def test_a_clock_oscillator_gives_no_part_and_a_note_says_so():
    rows = table(
        ("Output frequency", "25 MHz"),
        ("Supply voltage", "3.3 V"),
        ("Duty cycle", "45 to 55 %"),
        ("Storage temperature", "-40 to +85 °C"),
    )
    result = found(line("ABO32 crystal oscillator"), rows)
    assert result.parts == []
    assert "an oscillator, no crystal" in result.notes[0].message


def test_an_oscillator_among_listed_crystals_is_passed_over():
    rows = table(
        ("Part number", "Kind", "Frequency", "Load capacitance", "Supply voltage"),
        ("ABQ32-12M", "crystal", "12 MHz", "9 pF", "-"),
        ("ABO32-25M", "clock oscillator", "25 MHz", "15 pF", "3.3 V"),
    )
    result = found(rows)
    assert [part.part_number for part in result.parts] == ["ABQ32-12M"]
    assert "ABO32-25M" in result.notes[0].message


def test_values_under_an_ordering_heading_are_options_only():
    key = table(("Ordering code", None), ("Tolerance", "1 = ±10 ppm, 2 = ±20 ppm"), ("Load", "A = 8 pF, B = 12 pF"))
    stated = table(("Frequency", "16 MHz"), ("ESR", "60 Ω max."), ("Frequency tolerance", "±30 ppm"))
    (part,) = found(line("ABQ32 series"), stated, line("How to order", heading=True), key).parts
    held = {each.field: (each.min, each.max, each.options) for each in part.readings}
    assert held["frequency_tolerance_ppm"] == (-30.0, 30.0, ())
    assert held["load_capacitance_pf"] == (None, None, (8.0, 12.0))


def test_reliability_tests_state_nothing():
    tests = table(("Low temperature", "-40 ±3 °C, 96 h"), ("Operating temperature", "-55 to 125 °C, 1000 cycles"))
    (part,) = found(line("ABQ32-16M"), VALUES, line("Reliability", heading=True), tests).parts
    assert bounds(part, "operating_temperature_c") == []


def test_each_of_two_part_number_columns_gives_its_temperature_range_and_stability():
    rows = table(
        ("Frequency (MHz)", "Part number [-20°C/+70°C]", "Part number -40 to +85 °C, ±25 ppm"),
        ("16.000", "ABQ16-A", "ABQ16-B"),
        ("24.000", "ABQ24-A", "ABQ24-B"),
    )
    parts = found(line("Load capacitance: 8 pF"), rows).parts
    assert [bounds(part, "operating_temperature_c") for part in parts[:2]] == [[(-20, None, 70)], [(-40, None, 85)]]
    assert [bounds(part, "frequency_stability_ppm") for part in parts[:2]] == [[], [(-25, None, 25)]]


def test_a_listed_part_takes_only_the_resistance_of_its_mode_and_of_the_band_that_includes_it():
    bands = table(
        ("Parameter", "Conditions", "Max", "Unit"),
        ("Series resistance", "Fundamental, 5.0MHz - <8.0MHz", "95", "Ω"),
        (None, "Fundamental, 8.0MHz - 40.0MHz", "65", None),
        (None, "3rd Overtone, 8.0MHz - 72.0MHz", "78", None),
    )
    rows = table(
        ("Part number", "Frequency", "Mode"), ("ABQ8-F", "8 MHz", "Fundamental"), ("ABQ30-T", "30 MHz", "3rd Overtone")
    )
    parts = found(rows, bands).parts
    assert [bounds(part, "esr_ohm") for part in parts] == [[(None, None, 65)], [(None, None, 78)]]
    assert all(each.check is None for part in parts for each in part.readings)


def test_two_temperature_ranges_under_one_label_are_a_choice():
    rows = table(
        ("Parameter", "Min", "Typ", "Max", "Unit"),
        ("Frequency", None, "16", None, "MHz"),
        ("Operating temperature", "-20", "25", "70", "°C"),
        (None, "-40", "25", "85", None),
        ("Ageing", "-5", "±2", "5", "ppm/year"),
    )
    (part,) = found(line("ABQ49-16"), rows).parts
    assert bounds(part, "operating_temperature_c") == [(-20, 25, 70), (-40, 25, 85)]
    assert bounds(part, "ageing_ppm") == [(-5, 2, 5)]
    assert all(each.check is None for each in part.readings)


SIDE_BY_SIDE = table(
    ("Attribute", "Product 1", "Product 2"),
    ("Mfr. part no.", "ABQ38-32K768", "ABQ53-27M"),
    ("Frequency", "32.768 kHz", "27 MHz"),
    ("Frequency Stability + / -", "0.04ppm", "30ppm"),
    ("Operating Temperature Max", "125 °C", "85 °C"),
    ("Operating Temperature Min", "-40 °C", "-40 °C"),
)
MAKERS = table(
    ("Parabolic coefficient", "-0.04 ppm/°C²"),
    ("Temperature range\nTurnover\nOperating\nStorage", "\n+20 to +30 °C\n-40 to +85 °C\n-50 to +105 °C"),
    ("Drive level", "1.0 µW max."),
)


def test_a_table_under_the_heading_of_one_part_belongs_to_that_part_alone():
    fork, other = found(SIDE_BY_SIDE, line("ABQ38-32K768: the maker's sheet", heading=True), MAKERS).parts
    assert bounds(fork, "drive_level_uw") == [(None, None, 1.0)]
    assert bounds(fork, "turnover_temperature_c") == [(20, None, 30)]
    assert bounds(fork, "storage_temperature_c") == [(-50, None, 105)]
    assert {each.field for each in other.readings} == {
        "frequency_mhz",
        "frequency_stability_ppm",
        "operating_temperature_c",
    }


def test_a_shop_that_contradicts_the_makers_table_is_flagged_and_its_short_parabola_is_no_stability():
    fork, _ = found(SIDE_BY_SIDE, line("ABQ38-32K768: the maker's sheet", heading=True), MAKERS).parts
    (working,) = [each for each in fork.readings if each.field == "operating_temperature_c"]
    assert (working.min, working.max) == (-40, 125)
    assert "says otherwise" in (working.check or "")
    assert bounds(fork, "frequency_stability_ppm") == []


def test_numbered_lines_that_begin_with_a_part_number_are_a_part_each():
    lines = [
        "Offer 2231, Brackwell Frequency Ltd",
        "1. ABQ32-12M-10: 12.000 MHz, 3.2 x 2.5 mm, CL 10 pF, ±10 ppm at 25 °C, ESR 80 Ω max",
        "2. ABQ15-25M-7: 25.000 MHz, 1.6 x 1.2 mm, CL 7 pF, ±20 ppm at 25 °C, ESR 90 Ω max",
    ]
    parts = found(*[line(text, number=number) for number, text in enumerate(lines, 1)]).parts
    assert [(part.part_number, bounds(part, "frequency_mhz"), bounds(part, "esr_ohm")) for part in parts] == [
        ("ABQ32-12M-10", [(None, 12, None)], [(None, None, 80)]),
        ("ABQ15-25M-7", [(None, 25, None)], [(None, None, 90)]),
    ]


def test_models_under_an_empty_corner_are_parts():
    rows = (("", "ABQ-7A", "ABQ-7B", "Unit"), ("Frequency", "32.768", "32.768", "kHz"), ("R1 max", "50", "65", "kΩ"))
    parts = found(table(*rows)).parts
    assert [(part.part_number, bounds(part, "esr_ohm")) for part in parts] == [
        ("ABQ-7A", [(None, None, 50000)]),
        ("ABQ-7B", [(None, None, 65000)]),
    ]


SERIES = [
    ("Load capacitance: series",),
    ("CL: series",),
    ("Resonance: series",),
    ("Lastkapazität: Serienresonanz",),
    ("Capacité de charge : résonance série",),
    ("Capacità di carico: risonanza serie",),
    ("Capacidad de carga: resonancia serie",),
    ("負荷容量：直列共振",),
    ("负载电容：串联谐振",),
    ("Series resonant crystal",),
    ("Serienresonanzquarz",),
]


@pytest.mark.parametrize("segments", SERIES)
def test_series_resonance_in_text_is_the_resonance_of_the_part(segments):
    (part,) = found(line("ABQ49-16"), line(*segments), line("Frequency: 16 MHz"), line("ESR: 60 Ω max")).parts
    assert part.resonance == "series"
    assert bounds(part, "load_capacitance_pf") == []


def test_series_on_request_in_text_is_not_offered():
    rows = (line("CL: series on request"), line("Frequency: 16 MHz"), line("ESR: 60 Ω max"))
    assert found(line("ABQ49-16"), *rows).parts[0].resonance is None


def test_a_load_goes_before_a_heading_that_calls_the_crystal_series_resonant():
    rows = (line("Series resonant crystal"), line("CL: 9 pF"), line("Frequency: 16 MHz"))
    assert found(line("ABQ49-16"), *rows).parts[0].resonance == "load"


def test_two_modes_under_one_label_give_a_frequency_for_each():
    rows = (line("Frequency: 48 MHz"), line("Mode: fundamental or 3rd overtone"), line("ESR: 50 Ω max"))
    (part,) = found(line("ABQ49-48"), *rows).parts
    told = [(each.typ, each.when.mode) for each in part.readings if each.field == "frequency_mhz"]
    assert (part.mode, told) == (None, [(48.0, "fundamental"), (48.0, "third overtone")])


@pytest.mark.parametrize(
    "rows",
    [
        (line("ESR: 50 Ω max at +25 °C", number=3), line("ESR: 80 Ω max at -40 °C", number=4)),
        (line("ESR: 50 Ω max at +25 °C, 80 Ω max at -40 °C", number=3),),
        (line("ESR: 50 Ω max at 25 ±3 °C", number=3), line("ESR: 80 Ω max at -40 °C ±2 °C", number=4)),
    ],
)
def test_an_esr_at_two_temperatures_is_two_readings(rows):
    (part,) = found(line("ABQ49-16"), line("Frequency: 16 MHz", number=2), *rows).parts
    told = [(each.max, each.when.temperature_c, each.check) for each in part.readings if each.field == "esr_ohm"]
    assert told == [(50.0, (25.0, 25.0), None), (80.0, (-40.0, -40.0), None)]


def test_a_lone_temperature_beside_an_esr_limits_nothing():
    (part,) = found(line("ABQ49-16"), line("Frequency: 16 MHz"), line("ESR: 50 Ω max at +25 °C")).parts
    assert [each.when.temperature_c for each in part.readings if each.field == "esr_ohm"] == [None]


def test_goods_listed_below_a_part_take_nothing_of_it():
    of_the_page = table(
        ("Frequency", "25 MHz"), ("Frequency tolerance", "±20 ppm"), ("Load capacitance", "8 pF"), ("ESR", "50 Ω max")
    )
    others = table(
        ("Part", "Description", "Price"),
        ("ABQ32-24.0-12", "Crystal 24MHz 12pF", "$0.58"),
        ("ABQ32-26.0-12", "Crystal 26MHz 12pF", "$0.61"),
    )
    parts = found(
        line("ABQ32-25.0-8", heading=True), of_the_page, line("Customers also viewed", number=9), others
    ).parts
    by_number = {part.part_number: part for part in parts}
    assert bounds(by_number["ABQ32-25.0-8"], "frequency_mhz") == [(None, 25.0, None)]
    assert bounds(by_number["ABQ32-24.0-12"], "frequency_mhz") == [(None, 24.0, None)]
    assert bounds(by_number["ABQ32-24.0-12"], "frequency_tolerance_ppm") == []
