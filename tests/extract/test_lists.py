from building import table
from hypothesis import given
from hypothesis import strategies as st

from extract.entries import Listing, Piece
from extract.lists import LOOSE, listing_drafts
from extract.model import Where
from extract.prose import loose_candidates, loose_in_prose
from extract.tables import read_table


def drafts(*rows, title="", spans=None):
    found = read_table(table(*rows, title=title, spans=spans))
    return [draft for item in found if isinstance(item, Listing) for draft in listing_drafts(item)]


HEADS = (
    "Part number",
    "Manufacturer",
    "Frequency (MHz)",
    "Load capacitance (pF)",
    "Tolerance (±ppm)",
    "T min (°C)",
    "T max (°C)",
    "ESR max (Ω)",
    "Size",
)
ROW = ("ABQ32-16M-09", "Able Crystals", "16", "9", "10", "-40", "85", "60", "3225")


def test_a_row_is_a_part_with_the_units_of_the_heads():
    (draft,) = drafts(
        HEADS,
        ROW,
    )
    assert (draft.part_number, draft.maker, draft.package) == ("ABQ32-16M-09", "Able Crystals", "3225")
    held = {(each.field, each.bounds[:3]) for each in draft.candidates}
    assert ("frequency_mhz", (None, 16.0, None)) in held
    assert ("frequency_tolerance_ppm", (-10.0, None, 10.0)) in held
    assert ("esr_ohm", (None, None, 60.0)) in held
    assert ("operating_temperature_c", (-40.0, None, None)) in held


def test_a_dash_is_not_stated():
    (draft,) = drafts(("Part number", "Frequency", "ESR"), ("ABQ32-16M-09", "16 MHz", "-"))
    assert [each.field for each in draft.candidates] == ["frequency_mhz"]


def test_series_in_the_load_column_is_series_resonance():
    (draft,) = drafts(("Part number", "Frequency (MHz)", "CL (pF)"), ("ABQ32-16M-S", "16", "Series"))
    assert draft.resonance == {"series"}
    assert [each.field for each in draft.candidates] == ["frequency_mhz"]


def test_a_part_number_column_for_each_temperature_range_gives_a_part_each():
    found = drafts(
        ("Frequency (MHz)", "CL (pF)", "Part number -20 to +70 °C", "Part number -40 to +85 °C"),
        ("8.0", "18", "ABP-1001", "ABP-2001"),
    )
    ranges = {
        draft.part_number: (each.min, each.max)
        for draft in found
        for each in draft.candidates
        if each.field == "operating_temperature_c"
    }
    assert ranges == {"ABP-1001": (-20.0, 70.0), "ABP-2001": (-40.0, 85.0)}


def test_cells_merged_over_rows_belong_to_each_row():
    rows = (
        ("Package", "Part number", "f (MHz)", "ESR max."),
        ("2.0 x 1.6 mm", "ABQ21-26M-6", "26", "70 Ω"),
        (None, "ABQ21-26M-8", None, None),
    )
    found = drafts(*rows, spans={(1, 0): (2, 1), (1, 2): (2, 1), (1, 3): (2, 1)})
    assert [(draft.part_number, draft.package, [each.bounds[:3] for each in draft.candidates]) for draft in found] == [
        ("ABQ21-26M-6", "2.0 x 1.6 mm", [(None, 26.0, None), (None, None, 70.0)]),
        ("ABQ21-26M-8", "2.0 x 1.6 mm", [(None, 26.0, None), (None, None, 70.0)]),
    ]


def test_a_spanning_row_is_the_section_of_the_rows_below():
    rows = (
        ("Part number", "Frequency", "ESR"),
        ("Fundamental", None, None),
        ("ABQ32-16M-09", "16 MHz", "60 Ω"),
        ("3rd overtone", None, None),
        ("ABQ32-48M-09", "48 MHz", "90 Ω"),
    )
    found = drafts(*rows, spans={(1, 0): (1, 3), (3, 0): (1, 3)})
    assert [draft.modes for draft in found] == [{"fundamental"}, {"third overtone"}]


def test_rows_without_part_numbers_hold_in_their_frequency_band():
    (draft,) = drafts(("Frequency range (MHz)", "ESR max. (Ω)"), ("8 - 11.999", "100"), ("12 - 20", "60"))
    banded = [each for each in draft.candidates if each.field == "esr_ohm"]
    assert [(each.when.frequency_mhz, each.max) for each in banded] == [
        ((8.0, 11.999), 100.0),
        ((12.0, 20.0), 60.0),
    ]


def test_a_column_with_only_a_unit_takes_its_label_from_the_title():
    (draft,) = drafts(
        ("Load capacitance CL", "ppm/pF"), ("7 pF", "34.2"), ("9 pF", "22.1"), title="Trim sensitivity (typical)"
    )
    assert [(each.field, each.when.load_capacitance_pf) for each in draft.candidates] == [
        ("pulling_sensitivity_ppm_per_pf", (7.0, 7.0)),
        ("pulling_sensitivity_ppm_per_pf", (9.0, 9.0)),
    ]


def test_all_attributes_in_one_cell_are_read():
    cell = "Frequency: 12 MHz; Load capacitance: 8pF; Operating temperature: min -40°C, max 85°C; ESR (max): 100 Ohms"
    (draft,) = drafts(
        ("SKU", "Name", "Brand", "Attributes", "Stock"), ("S-1", 'Crystal 12 MHz, "ABQ32-12M-08"', "Able", cell, "90")
    )
    held = {each.field: each.bounds[:3] for each in draft.candidates}
    assert draft.part_number == "ABQ32-12M-08"
    assert held["operating_temperature_c"] == (-40.0, None, 85.0)
    assert held["esr_ohm"] == (None, None, 100.0)


def test_of_a_mixed_list_only_the_rows_that_say_so_are_crystals():
    rows = (
        ("Part Number", "Manufacturer", "Description"),
        ("CC0603-100N", "Kappe", "CAP CER 100nF 16V"),
        ("ABQ32-16M-09", "Able", "XTAL 16.000MHZ 9PF 10PPM"),
        ("MCX5510-Q", "Velch", "MCU 48 MHz 64 KB"),
    )
    found = drafts(*rows)
    assert [draft.part_number for draft in found if not draft.other] == ["ABQ32-16M-09"]


def test_a_shops_one_line_description_is_a_guess_and_says_so():
    (draft,) = drafts(("Part Number", "Maker", "Description"), ("ABQ32-16M-09", "Able", "XTAL 16.000MHZ 9PF 10PPM"))
    load = next(each for each in draft.candidates if each.field == "load_capacitance_pf")
    assert (load.typ, load.inferred, load.doubts) == (9.0, True, ("no label stands beside this amount",))


def test_a_range_beside_its_stability_says_where_that_holds():
    rows = table(("Temperature range", "Stability"), ("-20 to +70 °C", "±15 ppm"), ("-40 to +85 °C", "±30 ppm"))
    drafts = [draft for item in read_table(rows) if isinstance(item, Listing) for draft in listing_drafts(item)]
    held = [(each.field, each.max, each.when.temperature_c) for draft in drafts for each in draft.candidates]
    assert held == [
        ("frequency_stability_ppm", 15, (-20, 70)),
        ("frequency_stability_ppm", 30, (-40, 85)),
    ]


def test_a_head_over_bands_speaks_of_the_values_beside_them():
    (draft,) = drafts(
        ("ESR", None, "Connections"),
        ("8.000 - 9.999 MHz", "120 ohms", "1, 3 crystal"),
        ("10.000 - 60.000 MHz", "50 ohms", "2, 4 ground"),
    )
    banded = [each for each in draft.candidates if each.field == "esr_ohm"]
    assert [(each.typ, each.when.frequency_mhz) for each in banded] == [
        (120, (8, 9.999)),
        (50, (10, 60)),
    ]


def test_resistances_at_two_temperatures_keep_theirs():
    (draft,) = drafts(("Part no.", "ESR max (Ω) @ 25 °C", "ESR max (Ω) @ 150 °C"), ("BHT-08", "120", "180"))
    assert [(each.max, each.measured_c) for each in draft.candidates] == [(120, (25, 25)), (180, (150, 150))]


def test_a_number_broken_behind_its_hyphen_is_whole():
    (draft,) = drafts(("Type", "Frequency (MHz)", "ESR max. (Ω)"), ("CRX-\n18A/U", "16", "60"))
    assert draft.part_number == "CRX-18A/U"


def test_a_series_beside_the_part_numbers_is_no_part_of_its_own():
    rows = [(f"ABQ32-{frequency}M-8", "ABQ32", frequency) for frequency in ("12", "16", "24", "26")]
    found = drafts(("Part number", "Series", "Frequency (MHz)"), *rows)
    assert [draft.part_number for draft in found] == [row[0] for row in rows]


def test_two_columns_of_part_numbers_are_parts_both():
    rows = [("12", "ABP-1001", "ABP-2001"), ("16", "ABP-1002", "ABP-2002"), ("24", "ABP-1003", "ABP-2003")]
    found = drafts(("Frequency (MHz)", "Part number -20 to +70 °C", "Part number -40 to +85 °C"), *rows)
    assert len(found) == 6


@given(st.text(alphabet="0123456789.,±-~ kMHzpFΩppm°C@to;max", max_size=40))
def test_no_other_field_is_told_without_a_label(text):
    cell = Piece(text, Where(line=1))
    assert {each.field for each in (*loose_in_prose(cell), *loose_candidates(cell))} <= LOOSE


def test_a_web_address_says_nothing_of_the_part():
    (draft,) = drafts(
        ("Datasheet", "Part number", "Frequency (MHz)"),
        ("https://shop.example/crystals-oscillators/abq32-25mhz-8pf.pdf", "ABQ32-16M-09", "16"),
    )
    assert [each.field for each in draft.candidates] == ["frequency_mhz"]
    assert draft.texts == ["ABQ32-16M-09"]


def test_stock_numbers_without_a_letter_name_the_rows_where_nothing_else_does():
    heads = ("Stock number", "Frequency (MHz)", "CL (pF)", "ESR max (Ω)")
    found = drafts(heads, ("4711-016", "16", "8", "60"), ("4711-025", "25", "10", "50"))
    assert [draft.part_number for draft in found] == ["4711-016", "4711-025"]


def test_a_column_that_counts_its_rows_names_no_parts():
    heads = ("Stock number", "Frequency (MHz)", "CL (pF)", "ESR max (Ω)")
    assert all(draft.part_number is None for draft in drafts(heads, ("1", "16", "8", "60"), ("2", "25", "10", "50")))


def test_from_and_to_under_one_head_are_the_ends_of_its_range():
    heads = ("Part number", "Frequenz (MHz)", "Temperaturbereich", None, "ESR max (Ω)")
    below = (None, None, "von °C", "bis °C", None)
    (draft,) = drafts(heads, below, ("ABQ32-16M", "16", "-40", "85", "60"))
    ends = {each.bounds[:3] for each in draft.candidates if each.field == "operating_temperature_c"}
    assert ends == {(-40.0, None, None), (None, None, 85.0)}


def test_bands_down_a_column_are_the_range_of_each_mode_and_tell_the_cut():
    heads = ("Frequency (MHz)", "Mode", "ESR max (Ω)")
    rows = [("6.000 - 9.999", "AT Fund.", "70"), ("10.000 - 45.000", "AT Fund.", "40"), ("45 - 125", "AT 3rd OT", "70")]
    (draft,) = drafts(heads, *rows)
    offered = {(each.when.mode, each.min, each.max) for each in draft.candidates if each.field == "frequency_mhz"}
    assert offered == {("fundamental", 6.0, 45.0), ("third overtone", 45.0, 125.0)}
    assert draft.cuts == {"AT"}


def test_bands_with_a_hole_between_them_are_no_one_range():
    (draft,) = drafts(("Frequency (MHz)", "ESR max (Ω)"), ("6 - 9", "70"), ("16 - 45", "40"))
    assert not [each for each in draft.candidates if each.field == "frequency_mhz"]


def test_a_row_over_several_parts_tells_their_package():
    heads = ("Part number", "Frequency (MHz)", "ESR max (Ω)")
    over = "Package HC-49/S"
    found = drafts(
        heads, (over, None, None), ("ABQ-4000", "4", "150"), ("ABQ-6144", "6.144", "100"), spans={(1, 0): (1, 3)}
    )
    assert {draft.package for draft in found} == {"HC-49/S"}
