"""Labels and heads as printed, in several languages; the wordings of a survey of 47 real documents among them."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from extract.fold import fold
from extract.model import When
from extract.vocabulary import vocabulary
from extract.wording import (
    ambiguous_label,
    attribute_label,
    cut_of,
    find_labels,
    identity_label,
    mode_of,
    not_stated,
    oscillator_words,
    read_label,
    role_of,
    symbol_of,
    trap_of,
)

TOL, STAB, AGE = "frequency_tolerance_ppm", "frequency_stability_ppm", "ageing_ppm"
OPER, STORE, LOAD, ESR = "operating_temperature_c", "storage_temperature_c", "load_capacitance_pf", "esr_ohm"
C0, C1, L1, PULL = (
    "shunt_capacitance_pf",
    "motional_capacitance_ff",
    "motional_inductance_mh",
    "pulling_sensitivity_ppm_per_pf",
)
DRIVE, TURN, PARA = "drive_level_uw", "turnover_temperature_c", "parabolic_coefficient_ppm_per_c2"
FREQ, INS, Q, RATIO = "frequency_mhz", "insulation_resistance_megohm", "quality_factor", "capacitance_ratio"

# The survey's wordings, each read by hand.
SURVEYED = {
    FREQ: [
        "Nominal frequency",
        "Frequency range",
        "Centre frequency",
        "Frequency Nom",
        "Crystal frequency",
        "标称频率",
        "公称周波数",
        "Nennfrequenz",
    ],
    TOL: [
        "Frequency Tolerance at 25 °C",
        "Frequency tolerance @ 25°C ±3°C",
        "Calibration tolerance",
        "Set tolerance",
        "Initial tolerance",
        "调整频差",
        "周波数許容偏差",
        "Abgleichtoleranz",
        "校準公差",
        "Frequency Tolerance + / -",
    ],
    STAB: [
        "Frequency stability over the operating temperature",
        "Stability over operation temperance",
        "Frequency versus temperature characteristics",
        "Frequency Temp. Characteristics",
        "Frequency tolerance over operating temperature range",
        "Temperature tolerance",
        "Temperature shift",
        "温度频差",
        "周波数温度特性",
    ],
    AGE: ["Aging", "Ageing per year", "Aging (first year)", "Frequency aging", "老化率", "Alterung", "経年変化"],
    OPER: [
        "Operating temperature range",
        "Operating temp.",
        "Temperature range\n(operating)",
        "工作温度范围",
        "動作温度範囲",
        "Arbeitstemperaturbereich",
    ],
    STORE: ["Storage temperature range", "储存温度范围", "保存温度範囲", "Lagertemperatur"],
    LOAD: [
        "Load capacitance (CL)",
        "Nominal load",
        "负载电容",
        "Capacità di carico",
        "Lastkapazität",
        "負荷容量",
        "Plating load",
        "Capacité de charge",
    ],
    ESR: [
        "Equivalent Series Resistance",
        "ESR",
        "Motional (series) resistance",
        "Effective series resistance",
        "Equivalent resistance",
        "series resonance R1 max.",
        "谐振电阻",
        "Resistenza in serie",
        "等価直列抵抗",
        "Resonanzwiderstand",
        "负载谐振电阻",
        "dynamischer Verlustwiderstand",
        "クリスタルインピーダンス",
    ],
    C0: ["Shunt capacitance C0", "Static capacitance", "静态电容", "並列容量", "statische Kapazität"],
    C1: ["Motional capacitance C1", "等価直列容量", "动态电容", "dynamische Kapazität"],
    L1: ["Motional inductance", "等価直列インダクタンス"],
    Q: ["Quality factor", "Q", "品质因数", "Güte"],
    RATIO: ["Capacitance ratio", "C0/C1", "容量比", "Kapazitätsverhältnis"],
    PULL: ["Pulling sensitivity", "Ziehempfindlichkeit", "Trim sensitivity"],
    DRIVE: [
        "Drive level",
        "Level of drive",
        "激励功率",
        "ドライブレベル",
        "Nennbelastung",
        "Potenza di pilotaggio",
        "Niveau d'excitation",
    ],
    TURN: ["Turnover temperature", "Turn-over temperature", "Turning point", "頂点温度"],
    PARA: [
        "Parabolic coefficient",
        "Temperature coefficient",
        "Temperature constant",
        "Frequency temperature coefficient",
        "二次温度係数",
    ],
    INS: [
        "Insulation resistance",
        "Terminal to terminal insulation resistance",
        "绝缘电阻",
        "絶縁抵抗",
        "Isolationswiderstand",
    ],
}


@pytest.mark.parametrize(
    ("printed", "field"), [(wording, field) for field, wordings in SURVEYED.items() for wording in wordings]
)
def test_a_wording_of_real_sheets_names_its_field(printed, field):
    label = read_label(printed)
    assert label is not None
    assert label.field == field


PARTS = [
    # printed, bound, unit, ±
    ("ESR(Ω) max", ESR, "max", "Ω", False),
    ("ESR max (kΩ)", ESR, "max", "kΩ", False),
    ("Max ESR|Ω|", ESR, "max", "Ω", False),
    ("ESR( ) max", ESR, "max", None, False),
    ("MAXIMUM EQUIVALENT SERIES RESISTANCE OHMS", ESR, "max", "OHMS", False),
    ("drive level in µW max.", DRIVE, "max", "μW", False),
    ("series resistance max. (ESR)", ESR, "max", None, False),
    ("R1 max.", ESR, "max", None, False),
    ("Operating Temperature Max", OPER, "max", None, False),
    ("Tmin [°C]", OPER, "min", "°C", False),
    ("Frequency tolerance (±ppm)", TOL, None, "ppm", True),
    ("Toleranz [±ppm]", TOL, None, "ppm", True),
    ("tolerance_plus_minus_ppm", TOL, None, "ppm", True),
    ("r1_max_ohm", ESR, "max", "ohm", False),
    ("temp_min_c", OPER, "min", "c", False),
    ("freq_khz", FREQ, None, "khz", False),
    ("C1 (fF, typ.)", C1, "typ", "fF", False),
    ("f (MHz)", FREQ, None, "MHz", False),
    ("Drive Level (µW) Typ/Max", DRIVE, "typ/max", "μW", False),
    ("等価直列抵抗（最大）", ESR, "max", None, False),
    ("Equivalent Series Resistance (ESR max)", ESR, "max", None, False),
    ("Drive Level DL typ.", DRIVE, "typ", None, False),
    ("Nominal load capacitance", LOAD, None, None, False),
    ("Frequency tolerance (standard)", TOL, None, None, False),
    ("Aging (ppm/year)", AGE, None, "ppm", False),
    ("Tolerance (ppm @25C)", TOL, None, "ppm", False),
    ("Toleranz bei 25°C in ppm", TOL, None, "ppm", False),
    ("Frequency/MHz", FREQ, None, "MHz", False),
    ("ESR / Ω", ESR, None, "Ω", False),
    ("Parabolic coefficient (K)", PARA, None, None, False),
    ("Capacitance, load (pF)", LOAD, None, "pF", False),
    ("Capacitance (C0)", C0, None, None, False),
    ("最大励振レベル", DRIVE, "max", None, False),
]


@pytest.mark.parametrize(("printed", "field", "bound", "unit", "plus_minus"), PARTS)
def test_bound_unit_and_sign_come_out_of_the_label(printed, field, bound, unit, plus_minus):
    label = read_label(printed)
    assert label is not None
    assert (label.field, label.bound, label.unit, label.plus_minus) == (field, bound, unit, plus_minus)


CONDITIONS = [
    ("Aging per year @25°C", When(years=1)),
    ("Ageing, 10 years", When(years=10)),
    ("年老化", When(years=1)),
    ("Frequency Stability (-20~+70°C)", When(temperature_c=(-20, 70))),
    ("Frequency stability -40 to +85 °C", When(temperature_c=(-40, 85))),
    ("ESR (12 - 16 MHz)", When(frequency_mhz=(12, 16))),
    ("Frequency tolerance at 25 °C ±3 °C", When()),
    ("Insulation resistance @ 100 VDC ±15 V", When()),
]


@pytest.mark.parametrize(("printed", "when"), CONDITIONS)
def test_a_condition_in_the_label_is_kept_and_a_reference_is_not(printed, when):
    label = read_label(printed)
    assert label is not None
    assert label.when == when


TORN = [
    ("FREQUENC Y RANGE", FREQ),
    ("C 0", C0),
    ("C_L", LOAD),
    ("Equiv-\nalent Series Resistance", ESR),
    ("AgingperYear@25°C", AGE),
    ("FrequencyTolerance@25°C", TOL),
    ("MotionalCapacitance(Cm", C1),
    ("14. Drive level", DRIVE),
    ("Shunt capacitance *1", C0),
    ("ΔF/F0 Frequency tolerance", TOL),
    ("（负载电容）\n6.Load capacitance CL", LOAD),
    ("ＥＳＲ", ESR),
]


@pytest.mark.parametrize(("printed", "field"), TORN)
def test_torn_glued_numbered_and_bilingual_labels_are_exact(printed, field):
    label = read_label(printed)
    assert label is not None
    assert (label.field, label.exact) == (field, True)


@pytest.mark.parametrize(
    ("printed", "field"),
    [
        ("Operating Temperatue Range", OPER),
        ("Insulaton resistance", INS),
        ("Load capacitence", LOAD),
        ("Frequency stability over operation temperance", STAB),
    ],
)
def test_a_slip_of_the_pen_is_read_and_is_not_exact(printed, field):
    label = read_label(printed)
    assert label is not None
    assert (label.field, label.exact) == (field, False)


@pytest.mark.parametrize(
    "printed",
    [
        "Material",
        "Sableford Quartz",
        "3.579",
        "SFQ-16",
        "K",
        "Top",
        "at",
        "res",
        "Notes",
        "",
        "-",
        "Ω",
        "Frequency counter used for the test of all parts",
        "Total stability",
    ],
)
def test_what_names_no_field_is_no_label(printed):
    assert read_label(printed) is None


AMBIGUOUS = [
    ("Frequency Tolerance / Stability", (TOL, STAB)),
    ("Δf/f0", (TOL, STAB, AGE)),
    ("Operating / storage temperature", (OPER, STORE)),
    ("Load capacitance and shunt capacitance", (LOAD, C0)),
]


@pytest.mark.parametrize(("printed", "fields"), AMBIGUOUS)
def test_a_label_of_several_fields_is_none_of_them_and_says_which(printed, fields):
    assert read_label(printed) is None
    assert ambiguous_label(printed) == fields


def test_careful_pairs_are_kept_apart():
    pairs = [
        ("Series resistance", ESR),
        ("Insulation resistance", INS),
        ("Load capacitance", LOAD),
        ("Shunt capacitance", C0),
        ("Parallel capacitance", C0),
        ("Series capacitance", C1),
        ("Storage temperature", STORE),
        ("Operating temperature", OPER),
        ("Frequency", FREQ),
        ("Frequency stability", STAB),
        ("Long term stability", AGE),
        ("Temperature stability", STAB),
        ("Turnover temperature", TURN),
        ("Temperature coefficient", PARA),
    ]
    assert [getattr(read_label(printed), "field", None) for printed, _ in pairs] == [field for _, field in pairs]


@pytest.mark.parametrize(
    ("printed", "why"),
    [
        ("Drive level dependency", "drive level dependency"),
        ("Spurious responses", "spurious response"),
        ("Reflow soldering temperature", "soldering"),
        ("Overall frequency tolerance", "a total of all causes"),
        ("High temperature storage test", "a reliability test"),
        ("Measurement drive level", "a test condition"),
        ("Supply voltage", "an oscillator's row"),
        ("总频差", "a total of all causes"),
        ("Lötwärmebeständigkeit", "soldering"),
    ],
)
def test_a_trap_is_named_and_is_no_label(printed, why):
    assert trap_of(printed) == why
    assert read_label(printed) is None


@pytest.mark.parametrize(
    "printed", ["Drive level", "Storage temperature", "Vibration mode", "Load capacitance", "Aging"]
)
def test_an_honest_label_is_no_trap(printed):
    assert trap_of(printed) is None


def test_symbols_alone_are_marked_and_ambiguous_ones_decide_nothing():
    label = read_label("C0")
    assert label is not None
    assert label.symbol
    assert symbol_of("B") == PARA
    assert symbol_of("Δf/f") is None
    assert read_label("B") is None


ROLES = [
    ("Min.", "min"),
    ("TYP", "typ"),
    ("Maximum", "max"),
    ("MAX (Unless otherwise noted)", "max"),
    ("Unit", "unit"),
    ("参数 Parameter", "parameter"),
    ("Item", "parameter"),
    ("項目", "parameter"),
    ("Merkmal", "parameter"),
    ("Specification", "value"),
    ("Test Conditions", "condition"),
    ("Remarks", "remarks"),
    ("Symbol", "symbol"),
    ("Oscillation mode", "mode"),
    ("ESR max", None),
    ("Load capacitance", None),
    ("最大", "max"),
    ("单位", "unit"),
    ("Einheit", "unit"),
]


@pytest.mark.parametrize(("printed", "role"), ROLES)
def test_a_head_has_its_role_unless_it_names_a_field(printed, role):
    assert role_of(printed) == role


MODES = [
    ("Fundamental, AT-cut", "fundamental", "AT"),
    ("AT Fund", "fundamental", "AT"),
    ("(Fund.)", "fundamental", None),
    ("3rd O/T", "third overtone", None),
    ("3 rd Overtone", "third overtone", None),
    ("Third Overtone (AT)", "third overtone", "AT"),
    ("F", "fundamental", None),
    ("基频", "fundamental", None),
    ("3次オーバートーン、ATカット", "third overtone", "AT"),
    ("AT, Grundton", "fundamental", "AT"),
    ("3. Oberton", "third overtone", None),
    ("Flexural Mode [Tuning Fork]", "fundamental", "tuning fork"),
    ("Fundamental / 3rd OT", None, None),
    ("at 25 °C", None, None),
    ("X-Cut", None, "tuning fork"),
    ("BT", None, "BT"),
    ("5th overtone", "fifth overtone", None),
]


@pytest.mark.parametrize(("printed", "mode", "cut"), MODES)
def test_mode_and_cut_are_read_where_one_is_printed(printed, mode, cut):
    assert (mode_of(printed), cut_of(printed)) == (mode, cut)


@pytest.mark.parametrize(
    ("printed", "asked"),
    [
        ("Manufacturer Part No.", "part_number"),
        ("Mfr.", "maker"),
        ("Package / Case", "package"),
        ("型号", "part_number"),
        ("品牌", "maker"),
        ("封装", "package"),
        ("Hersteller", "maker"),
        ("Herstellerbezeichnung", "part_number"),
        ("Bestell-Nr.", "stock_number"),
        ("Our part no.", "stock_number"),
        ("型番", "part_number"),
        ("Holder", "package"),
        ("Load capacitance", None),
    ],
)
def test_an_identity_label_says_what_it_asks_for(printed, asked):
    assert identity_label(printed) == asked


def test_attribute_labels_are_the_contracts():
    printed = [
        "MSL",
        "AEC-Q200",
        "Lead time",
        "Unit price",
        "Life cycle status",
        "Reflow peak temperature",
        "Pad connections",
    ]
    assert [attribute_label(one) for one in printed] == [
        "moisture_level",
        "aec_q200",
        "lead_time",
        "price",
        "status",
        "reflow_peak_c",
        "pads",
    ]


def test_labels_are_found_in_running_text_in_order():
    text = fold(
        "Its tolerance is +/-10 ppm at 25 C and the frequency stability +/-15 ppm from -40 to +85 C, which is also the "
        "operating temperature range. ESR is 45 ohm max, C0 1.1 pF typ. The drive level must not exceed 100 uW."
    )
    found = find_labels(text)
    assert [(text[one.start : one.end], one.label.field) for one in found] == [
        ("tolerance", TOL),
        ("frequency stability", STAB),
        ("operating temperature range", OPER),
        ("ESR", ESR),
        ("C0", C0),
        ("drive level", DRIVE),
    ]
    assert [one.label.exact for one in found] == [False, True, True, True, True, True]


def test_a_single_letter_in_running_text_is_a_symbol_only_where_a_value_is_set_to_it():
    assert find_labels("8.0pF = M 12.0pF = Q 18.0pF = D") == ()
    assert [one.label.field for one in find_labels("Q = 80000")] == [Q]


def test_an_oscillators_words_are_found_and_a_crystals_sheet_has_none():
    assert oscillator_words("Supply voltage 3.3 V, duty cycle 45 to 55 %, rise time 5 ns") == (
        "Supply voltage",
        "duty cycle",
        "rise time",
    )
    assert oscillator_words("SMD quartz crystal, 16 MHz, ESR 60 Ω, load 8 pF") == ()


@pytest.mark.parametrize("printed", ["", "-", "—", "——", "N/A", "n/a", "k.A.", "无", "…", "TBD"])
def test_an_empty_or_dashed_cell_states_nothing(printed):
    assert not_stated(printed)


def test_a_zero_is_left_to_the_field():
    assert not not_stated("0")


@given(st.sampled_from(sorted(set(vocabulary().labels))), st.sampled_from(["{}", " {} :", "{}*", "• {}", "3. {}"]))
def test_every_wording_is_read_as_its_own_field_in_every_dress(wording, dress):
    label = read_label(dress.format(wording))
    assert label is not None
    assert label.field == vocabulary().labels[wording]


@given(st.text(max_size=80))
def test_no_text_breaks_the_label_reader(text):
    label = read_label(text)
    assert label is None or label.field
    find_labels(text)
    role_of(text)
    trap_of(text)
    ambiguous_label(text)


def test_a_latin_bound_glued_to_an_eastern_label_is_its_bound():
    label = read_label("等效电阻Max(Ω)")
    assert label is not None
    assert (label.field, label.bound, label.unit) == ("esr_ohm", "max", "Ω")


def test_a_label_in_two_languages_by_weak_wordings_is_exact():
    label = read_label("Frequenzbereich / frequency range")
    assert label is not None
    assert (label.field, label.exact) == ("frequency_mhz", True)


def test_a_tolerance_that_is_a_total_is_no_tolerance():
    assert read_label("FREQ. TOLERANCE (TOTAL OVER TEMP.)") is None


def test_a_wording_beside_one_in_a_language_not_known_is_taken_with_a_doubt():
    label = read_label("Zátěž / Load capacitance")
    assert label is not None
    assert (label.field, label.exact) == ("load_capacitance_pf", False)


def test_a_unit_behind_a_condition_is_the_labels():
    label = read_label("Calibration tolerance @ 25 °C ppm")
    assert label is not None
    assert (label.field, label.unit) == ("frequency_tolerance_ppm", "ppm")
