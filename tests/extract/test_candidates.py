import pytest

from extract.candidates import entry_candidates, read
from extract.entries import Entry, Piece, Value
from extract.model import When, Where

HERE = Where(line=1)


def entry(label, *values, unit="", symbol="", conditions=(), section=""):
    """An entry; a value is a text, or a text with its bound."""
    pairs = [value if isinstance(value, tuple) else (value, None) for value in values]
    made = tuple(Value(Piece(text, HERE), bound) for text, bound in pairs)
    return Entry(Piece(label, HERE), made, unit, symbol, conditions, section)


def test_min_typ_and_max_cells_are_one_candidate_in_the_fields_unit():
    (found,) = entry_candidates(entry("Motional resistance", ("40", "typ"), ("70", "max"), unit="kΩ"))
    assert (found.field, found.bounds) == ("esr_ohm", (None, 40000.0, 70000.0, ()))


def test_a_number_without_bound_is_bare_for_esr_only_where_no_column_bounds_it():
    assert entry_candidates(entry("ESR", "60 Ω"))[0].bare
    assert not entry_candidates(entry("ESR", ("60", "max"), unit="Ω"))[0].bare
    assert not entry_candidates(entry("Load capacitance", "9 pF"))[0].bare


def test_a_magnitude_under_a_plus_minus_unit_is_plus_minus():
    (found,) = entry_candidates(entry("Frequency tolerance", "20", unit="± ppm"))
    assert found.bounds == (-20.0, None, 20.0, ())


def test_a_greatest_negative_coefficient_is_its_min():
    (found,) = entry_candidates(entry("Parabolic coefficient", ("-0.04", "max"), unit="ppm/°C²"))
    assert found.bounds[0] == -0.04
    assert found.bounds[2] is None


def test_a_stability_in_ppm_per_square_degree_is_the_parabola():
    (found,) = entry_candidates(entry("Frequency stability", "-0.034 ppm/°C²"))
    assert found.field == "parabolic_coefficient_ppm_per_c2"


@pytest.mark.parametrize("condition", ["25 °C ±3 °C", "DC 100 V", "DL = 100 µW", "@1 MHz", "at 24 MHz"])
def test_where_it_was_measured_limits_nothing(condition):
    (found,) = entry_candidates(entry("Shunt capacitance", "3 pF max.", conditions=(condition,)))
    assert found.when == When()


def test_a_temperature_range_beside_stability_says_where_it_holds():
    (found,) = entry_candidates(entry("Frequency stability", "±20 ppm", conditions=("-20 °C to +70 °C",)))
    assert found.when == When(temperature_c=(-20.0, 70.0))


def test_first_year_beside_ageing_is_one_year():
    (found,) = entry_candidates(entry("Ageing", "±3 ppm", conditions=("first year, 25 °C",)))
    assert found.when == When(years=1.0)


def test_a_recommended_value_in_the_remarks_is_no_second_value():
    (found,) = entry_candidates(entry("Drive level", "200 µW max.", conditions=("Recommended: 1 µW to 100 µW",)))
    assert found.bounds == (None, None, 200.0, ())


@pytest.mark.parametrize(
    "label", ["Drive level dependency", "Spurious responses", "Reflow temperature", "Total frequency stability"]
)
def test_rows_that_only_look_like_a_field_are_left_alone(label):
    assert entry_candidates(entry(label, "±10 ppm")) == []


def test_a_label_that_is_only_nearly_one_makes_the_candidate_inferred():
    (found,) = entry_candidates(entry("Shunt capacitanse", "3 pF max."))
    assert found.inferred
    assert found.doubts


def test_a_text_that_the_recogniser_was_not_sure_of_is_doubted():
    piece = Piece("60 Ω max.", HERE, confidence=0.5)
    (found,) = entry_candidates(Entry(Piece("ESR", HERE), (Value(piece),)))
    assert any("50%" in doubt for doubt in found.doubts)


def test_one_temperature_is_no_operating_range():
    assert entry_candidates(entry("Operating temperature", "25 °C")) == []


def test_a_further_cell_with_a_band_and_a_value_is_a_value_of_its_own():
    cells = ("100 Ω max for 12 to 15.999 MHz", "60 Ω max for 16 to 54 MHz")
    values = tuple(Value(Piece(text, Where(line=1))) for text in cells)
    found = entry_candidates(Entry(Piece("ESR", Where(line=1)), values))
    assert [(each.when.frequency_mhz, each.max) for each in found] == [((12, 15.999), 100), ((16, 54), 60)]


def test_the_peak_of_a_soldering_profile_is_no_turnover():
    assert entry_candidates(entry("Peak temperature", "260 °C, 10 s max.")) == []


def test_a_bound_alone_in_the_remarks_is_the_values():
    (found,) = entry_candidates(entry("Static capacitance", "1.2 pF", conditions=("typ.",)))
    assert (found.typ, found.bare) == (1.2, False)


def test_what_else_may_be_had_in_a_bracket_is_no_bound_of_the_load():
    (found,) = entry_candidates(entry("Load capacitance", "12 pF standard (8 pF to 32 pF possible)"))
    assert (found.min, found.typ, found.max) == (None, 12, None)


def test_a_range_of_drive_with_a_greater_maximum_behind_it_is_limited_by_that():
    (found,) = entry_candidates(entry("Drive level", "10~100 µW (Max. 300 µW)"))
    assert (found.min, found.typ, found.max, found.doubts) == (None, None, 300, ())


def test_a_value_in_a_further_column_that_no_head_explains_is_a_doubt():
    (found,) = entry_candidates(entry("Frequency tolerance", "±20 ppm", "±10 ppm"))
    assert (found.max, [doubt[:22] for doubt in found.doubts]) == (20, ["another column states "])
    (same,) = entry_candidates(entry("Frequency tolerance", "±20 ppm", "±20 ppm"))
    assert same.doubts == ()


@pytest.mark.parametrize(
    "text",
    [
        "±2 ppm max. first year, ±1 ppm/year thereafter",
        "±2 ppm im ersten Jahr, danach ±1 ppm/Jahr",
        "第一年±2ppm，以后±1ppm/年",
    ],
)
def test_ageing_of_later_years_is_not_that_of_the_first(text):
    (value,) = read(text, "ageing_ppm")
    assert (value.min, value.max, value.when.years, value.doubts) == (-2.0, 2.0, 1.0, ())


@pytest.mark.parametrize("text", ["18 pF std. (10 pF to series available)", "12 pF (8 pF disponible)"])
def test_a_load_that_a_bracket_offers_besides_is_not_the_part_s(text):
    (value,) = read(text, "load_capacitance_pf")
    assert (value.typ, value.options) == (float(text[:2]), ())
