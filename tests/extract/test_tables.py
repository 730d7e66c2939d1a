from building import table

from extract.candidates import entry_candidates
from extract.entries import Entry, Key, Listing
from extract.lists import listing_drafts
from extract.orderable import key_candidates
from extract.tables import read_table


def readings(found):
    """(field, min, typ, max, options) of every entry of a table."""
    return [(each.field, *each.bounds) for item in found if isinstance(item, Entry) for each in entry_candidates(item)]


def test_min_typ_max_columns_make_one_reading():
    found = read_table(
        table(
            ("Parameter", "Symbol", "Min", "Typ", "Max", "Unit"), ("Shunt capacitance", "C0", "0.6", "0.8", "1.2", "pF")
        )
    )
    assert readings(found) == [("shunt_capacitance_pf", 0.6, 0.8, 1.2, ())]


def test_columns_may_stand_in_any_order():
    found = read_table(table(("Unit", "Max", "Item"), ("Ω", "60", "ESR"), ("pF", "3", "Shunt capacitance")))
    assert readings(found) == [("esr_ohm", None, None, 60.0, ()), ("shunt_capacitance_pf", None, None, 3.0, ())]


def test_a_value_merged_over_min_typ_max_is_typical():
    rows = (("Parameter", "Min", "Typ", "Max", "Unit"), ("Load capacitance", "10", None, None, "pF"))
    found = read_table(table(*rows, spans={(1, 1): (1, 3)}))
    assert readings(found) == [("load_capacitance_pf", None, 10.0, None, ())]


def test_a_heading_of_two_rows_is_read_together():
    rows = (
        ("Parameter", "Value", None, None, "Unit"),
        (None, "Min.", "Typ.", "Max.", None),
        ("Motional resistance", None, "20", "50", "Ω"),
    )
    found = read_table(table(*rows, spans={(0, 0): (2, 1), (0, 1): (1, 3), (0, 4): (2, 1)}))
    assert readings(found) == [("esr_ohm", None, 20.0, 50.0, ())]


def test_a_head_that_says_max_governs_all_rows_but_nominal_ones():
    found = read_table(
        table(
            ("PARAMETERS", "MAX (unless otherwise noted)"), ("Shunt capacitance", "6 pF"), ("Load capacitance", "16 pF")
        )
    )
    assert readings(found) == [
        ("shunt_capacitance_pf", None, None, 6.0, ()),
        ("load_capacitance_pf", None, 16.0, None, ()),
    ]


def test_pairs_without_a_heading_are_read():
    found = read_table(
        table(("Nominal frequency", "12.000 MHz"), ("ESR", "50 Ω max."), ("Storage temperature", "-40 to +85 °C"))
    )
    assert readings(found) == [
        ("frequency_mhz", None, 12.0, None, ()),
        ("esr_ohm", None, None, 50.0, ()),
        ("storage_temperature_c", -40.0, None, 85.0, ()),
    ]


def test_a_band_beside_the_value_says_where_it_holds():
    rows = (
        ("Load capacitance", "8 pF", None),
        ("ESR", "8 to 12 MHz", "100 Ω max."),
        (None, "12 to 20 MHz", "60 Ω max."),
    )
    found = read_table(table(*rows, spans={(1, 0): (2, 1)}))
    held = [
        (each.when.frequency_mhz, each.max)
        for item in found
        if isinstance(item, Entry)
        for each in entry_candidates(item)
    ]
    assert held[1:] == [((8.0, 12.0), 100.0), ((12.0, 20.0), 60.0)]


def test_bands_and_values_stacked_in_two_cells_are_paired_line_by_line():
    found = read_table(
        table(
            ("Item", "Condition", "Value"),
            ("ESR", "8~12MHz\n12~20MHz", "100 Ω max.\n60 Ω max."),
            ("C0", None, "3 pF max."),
        )
    )
    held = [
        (each.when.frequency_mhz, each.max)
        for item in found
        if isinstance(item, Entry)
        for each in entry_candidates(item)
    ]
    assert held == [((8.0, 12.0), 100.0), ((12.0, 20.0), 60.0), (None, 3.0)]


def test_models_side_by_side_keep_their_own_values():
    rows = (
        ("Item", "ABQ-210", "ABQ-320", "ABQ-321"),
        ("Load capacitance", "6 pF to 10 pF", "8 pF to 20 pF", None),
        ("Level of drive", "100 µW max.", "200 µW max.", "300 µW max."),
    )
    found = read_table(table(*rows, spans={(1, 2): (1, 2)}))
    subjects = {
        (each.field, each.subject): each.bounds[:3]
        for item in found
        if isinstance(item, Entry)
        for each in entry_candidates(item)
    }
    assert subjects[("load_capacitance_pf", "ABQ-321")] == (8.0, None, 20.0)
    assert subjects[("drive_level_uw", "ABQ-210")] == (None, None, 100.0)


def test_bands_across_the_top_are_turned_round():
    rows = (
        ("Frequency range", "4.2 to 6.5 MHz", "6.6 to 33 MHz", "33.1 to 80 MHz"),
        ("Mode", "Fundamental", None, "3rd overtone"),
        ("R1", "150 Ω max.", "60 Ω max.", "90 Ω max."),
    )
    (listing,) = [item for item in read_table(table(*rows, spans={(1, 1): (1, 2)})) if isinstance(item, Listing)]
    (draft,) = listing_drafts(listing)
    banded = [each for each in draft.candidates if each.field == "esr_ohm"]
    assert [(each.when.frequency_mhz, each.when.mode, each.max) for each in banded] == [
        ((4.2, 6.5), "fundamental", 150.0),
        ((6.6, 33.0), "fundamental", 60.0),
        ((33.1, 80.0), "third overtone", 90.0),
    ]


def test_two_pairs_of_columns_side_by_side_are_one_band_table():
    rows = (
        ("Frequency (MHz)", "ESR max. (Ω)", "Frequency (MHz)", "ESR max. (Ω)"),
        ("6.000 - 7.999", "115", "14.000 - 19.999", "45"),
        ("8.000 - 13.999", "85", "20.000 - 48.000", "35"),
    )
    drafts = [draft for item in read_table(table(*rows)) if isinstance(item, Listing) for draft in listing_drafts(item)]
    candidates = [each for draft in drafts for each in draft.candidates if each.field == "esr_ohm"]
    held = {each.when.frequency_mhz: each.max for each in candidates}
    assert held == {(6.0, 7.999): 115.0, (8.0, 13.999): 85.0, (14.0, 19.999): 45.0, (20.0, 48.0): 35.0}


def test_a_table_of_codes_is_an_ordering_key():
    found = read_table(table(("Tolerance", "Load"), ("A = ±10 ppm", "1 = 8 pF"), ("B = ±20 ppm", "2 = 12 pF")))
    assert [(item.label.text, [code for code, _ in item.choices]) for item in found if isinstance(item, Key)] == [
        ("Tolerance", ["A", "B"]),
        ("Load", ["1", "2"]),
    ]


def test_drive_level_dependency_rows_state_no_drive_level():
    rows = (
        ("Drive level", "10 µW (100 µW max.)", None),
        ("Drive level dependency (DLD):", None, "9 steps, 0.1 µW to 400 µW"),
        ("frequency, max - min", "±8 ppm", None),
        ("greatest ESR over DLD", "120 Ω", None),
        ("Ageing", "±3 ppm first year", None),
    )
    assert [each[0] for each in readings(read_table(table(*rows)))] == ["drive_level_uw", "ageing_ppm"]


def test_a_second_label_cell_completes_the_first_and_a_band_in_it_is_a_condition():
    rows = table(
        ("Frequency", "tolerance at 25 °C", "±20 ppm"),
        (None, "versus temperature", "±50 ppm"),
        ("Resistance", "series, 3.5 - 5.999 MHz", "150 Ω max."),
        (None, "series, 6.0 - 60.0 MHz", "60 Ω max."),
        ("Drive level", "absolute", "500 µW max."),
        (None, "dependency", "±1 ppm from 1 µW to 100 µW"),
        ("Ageing", "1st year", "±1 ppm"),
        (None, "10 years", "±4 ppm"),
        spans={(0, 0): (2, 1), (2, 0): (2, 1), (4, 0): (2, 1), (6, 0): (2, 1)},
    )
    found = [
        (each.field, each.max, each.when.frequency_mhz or each.when.years)
        for item in read_table(rows)
        if isinstance(item, Entry)
        for each in entry_candidates(item)
    ]
    assert found == [
        ("frequency_tolerance_ppm", 20, None),
        ("frequency_stability_ppm", 50, None),
        ("esr_ohm", 150, (3.5, 5.999)),
        ("esr_ohm", 60, (6.0, 60.0)),
        ("drive_level_uw", 500, None),
        ("ageing_ppm", 1, 1),
        ("ageing_ppm", 4, 10),
    ]


def test_a_band_in_the_second_column_of_a_spanning_head_is_a_condition():
    rows = table(
        ("Item", None, "Value"),
        ("Frequency", None, "12 to 54 MHz"),
        ("Equivalent series resistance", "12 MHz ≤ f < 16\nMHz", "100 Ω max."),
        (None, "16 MHz ≤ f ≤ 54\nMHz", "60 Ω max."),
        ("Drive level", None, "100 µW max."),
        spans={(0, 0): (1, 2), (1, 0): (1, 2), (2, 0): (2, 1), (4, 0): (1, 2)},
    )
    found = [each for item in read_table(rows) if isinstance(item, Entry) for each in entry_candidates(item)]
    held = [(each.when.frequency_mhz, each.max) for each in found if each.field == "esr_ohm"]
    assert held == [((12.0, 16.0), 100.0), ((16.0, 54.0), 60.0)]


def test_codes_under_one_spanning_label_are_an_ordering_key():
    made = table(("Load Cap. (pF)", None), ("Blank", "18"), ("8", "8"), ("S", "Series"), spans={(0, 0): (1, 2)})
    (found,) = read_table(made)
    assert isinstance(found, Key)
    assert [code for code, _ in found.choices] == ["Blank", "8", "S"]


def test_rows_of_a_model_named_again_are_its_bands():
    made = table(
        ("Model", "Frequency", "ESR"),
        ("AB-1", "16 MHz to 20 MHz", "100 Ω max."),
        ("AB-1", "20 MHz to 54 MHz", "60 Ω max."),
        ("AB-2", "12 MHz to 16 MHz", "120 Ω max."),
    )
    (draft,) = listing_drafts(read_table(made)[0])
    found = [(each.subject, each.max, each.when.frequency_mhz) for each in draft.candidates]
    assert found == [("AB-1", 100, (16, 20)), ("AB-1", 60, (20, 54)), ("AB-2", 120, (12, 16))]


def test_pairs_of_columns_headed_by_a_model_are_that_models():
    made = table(
        ("AB-1 FREQUENCY RANGE", "ESR (MAX Ω)", "AB-2 FREQUENCY RANGE", "ESR (MAX Ω)"),
        ("12.000 ~ 15.999 MHz", "120", "16.000 ~ 19.999 MHz", "200"),
        ("16.000 ~ 29.999 MHz", "80", "20.000 ~ 29.999 MHz", "100"),
    )
    drafts = [draft for listing in read_table(made) for draft in listing_drafts(listing)]
    candidates = [each for draft in drafts for each in draft.candidates if each.field == "esr_ohm"]
    found = [(each.subject, each.max) for each in candidates]
    assert found == [("AB-1", 120), ("AB-1", 80), ("AB-2", 200), ("AB-2", 100)]


def test_a_title_is_the_label_of_bands_without_a_heading():
    made = table(("8 - 10 MHz", "80 Ω"), ("10 - 16 MHz", "60 Ω"), title="Series resistance ESR max.")
    entries = [item for item in read_table(made) if isinstance(item, Entry)]
    found = [(each.max, each.when.frequency_mhz) for entry in entries for each in entry_candidates(entry)]
    assert found == [(80, (8, 10)), (60, (10, 16))]


def test_symbols_below_the_labels_belong_to_the_heading():
    made = table(
        ("Nominal frequency", "Load capacitance", "Shunt capacitance", "Drive level", "Ageing"),
        ("f0", "CL", "C0", "DL", None),
        ("26.000 MHz", "7.0 pF", "1.5 pF max.", "10 μW typ.", "±1 ppm/year"),
    )
    (draft,) = listing_drafts(read_table(made)[0])
    assert {each.field for each in draft.candidates} == {
        "frequency_mhz",
        "load_capacitance_pf",
        "shunt_capacitance_pf",
        "drive_level_uw",
        "ageing_ppm",
    }


def test_a_resistance_across_loads_is_no_load_of_series_resonance():
    made = table(("负载电容 CL (pF)", "6.0", "9.0"), ("等效串联电阻 ESR 最大 (kΩ)", "70", "65"))
    (draft,) = listing_drafts(read_table(made)[0])
    found = [(each.max, each.when.load_capacitance_pf) for each in draft.candidates if each.field == "esr_ohm"]
    assert found == [(70000, (6, 6)), (65000, (9, 9))]
    assert [each.options for each in draft.candidates if each.field == "load_capacitance_pf"] == [(6, 9)]


def test_labels_beside_rows_of_no_property_are_a_table_of_their_own():
    made = table(
        ("Tolerance", "±20 ppm", "Operating temperature", "-40 to +85 °C"),
        ("Load capacitance", "12 pF", "Storage temperature", "-55 to +125 °C"),
        ("Drive level", "100 µW max.", "Vibration", "10 to 2000 Hz, 10 g"),
        ("Shunt capacitance", "5 pF max.", "Shock", "1000 g"),
    )
    labels = [item.label.text for item in read_table(made) if isinstance(item, Entry)]
    assert "Operating temperature" in labels
    assert "Storage temperature" in labels


def test_a_label_wrapped_beside_its_bands_is_one_label() -> None:
    rows = [
        ("Kenngröße", "Bedingung", "Wert"),
        ("Serienwiderstand R1", "8,0 … 9,9 MHz", "250 Ω"),
        ("max.", "10,0 … 15,9 MHz", "120 Ω"),
        ("Alterung", "1. Jahr", "±2 ppm"),
    ]
    entries = [item for item in read_table(table(*rows)) if isinstance(item, Entry)]
    assert [entry.label.text for entry in entries] == ["Serienwiderstand R1 max."] * 2 + ["Alterung"]


def test_a_value_that_begins_with_typ_is_no_heading() -> None:
    rows = [("Parameter", "Value"), ("Shunt capacitance", "typ 1.1 pF, max 3 pF"), ("Ageing", "max ±2 ppm")]
    entries = [item for item in read_table(table(*rows)) if isinstance(item, Entry)]
    assert [value.piece.text for entry in entries for value in entry.values] == ["typ 1.1 pF, max 3 pF", "max ±2 ppm"]


def test_a_column_of_limits_takes_its_property_from_the_title() -> None:
    rows = [("Frequency (MHz)", "Mode", "Max. ohms"), ("4.000 - 7.999", "Fund.", "100"), ("8 - 30", "Fund.", "40")]
    (listing,) = (
        item for item in read_table(table(*rows, title="EQUIVALENT SERIES RESISTANCE")) if isinstance(item, Listing)
    )
    found = [each for draft in listing_drafts(listing) for each in draft.candidates if each.field == "esr_ohm"]
    assert [(each.when.frequency_mhz, each.max) for each in found] == [((4.0, 7.999), 100.0), ((8.0, 30.0), 40.0)]


def test_codes_beside_several_properties_stand_for_each_of_them() -> None:
    rows = [
        ("Code", "Précision à 25 °C", "Stabilité", "Plage de température"),
        ("A", "±10 ppm", "±15 ppm", "-20 / +70 °C"),
        ("B", "±15 ppm", "±25 ppm", "-40 / +85 °C"),
    ]
    keys = [item for item in read_table(table(*rows)) if isinstance(item, Key)]
    found = [each for ordering in keys for each in key_candidates(ordering)]
    assert [each.options for each in found if each.field == "frequency_tolerance_ppm"] == [(10.0, 15.0)]
    assert [(each.max, each.when.temperature_c) for each in found if each.field == "frequency_stability_ppm"] == [
        (15.0, (-20.0, 70.0)),
        (25.0, (-40.0, 85.0)),
    ]


def test_rows_of_modes_below_a_label_are_its_rows():
    made = table(
        ("Frequenzbereich:", "10,0 … 160 MHz"), ("– Grundton:", "10,0 … 45 MHz"), ("– 3. Oberton:", "45 … 110 MHz")
    )
    found = [each for item in read_table(made) if isinstance(item, Entry) for each in entry_candidates(item)]
    assert [(each.max, each.when.mode) for each in found] == [
        (160, None),
        (45, "fundamental"),
        (110, "third overtone"),
    ]
