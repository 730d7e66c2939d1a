"""Long lists go by columns; whatever they hold, each part must come out as it does when it is read by itself."""

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from made_sheets import bench, part, reading, sheet

from compare.find import find_offers
from compare.listed import Listed
from compare.lot import AT_SETTING, OF_OFFER
from compare.ranking import rank
from compare.reckoning import choose_loads
from compare.review import review
from extract import read_sheet
from extract.model import FIELD_NAMES, SpecSheet
from extract.partlist import Chunk, PartList

BANDS = {"temperature_c": (-40.0, 0.0)}, {"load_capacitance_pf": (5.0, 9.0)}, {"frequency_mhz": (10.0, 20.0)}
SAID = {
    "frequency_mhz": [
        (reading("frequency_mhz", 16.0),),
        (reading("frequency_mhz", 16.0, check="printed beside two units"),),
        (reading("frequency_mhz", min=8.0, max=40.0),),
        (reading("frequency_mhz", options=(12.0, 16.0)),),
        (reading("frequency_mhz", 16.0, mode="fundamental"), reading("frequency_mhz", 16.0, mode="third overtone")),
        (reading("frequency_mhz", 16.002),),
        (reading("frequency_mhz", 12.0),),
    ],
    "frequency_tolerance_ppm": [
        (reading("frequency_tolerance_ppm", min=-10.0, max=10.0),),
        (reading("frequency_tolerance_ppm", options=(10.0, 20.0, 30.0)),),
    ],
    "frequency_stability_ppm": [
        (reading("frequency_stability_ppm", min=-15.0, max=15.0),),
        (reading("frequency_stability_ppm", options=(20.0, 50.0)),),
        (
            reading("frequency_stability_ppm", min=-10.0, max=10.0, temperature_c=(-20.0, 70.0)),
            reading("frequency_stability_ppm", min=-30.0, max=30.0, temperature_c=(-40.0, 85.0)),
        ),
    ],
    "ageing_ppm": [
        (reading("ageing_ppm", min=-1.0, max=1.0, years=1.0),),
        (reading("ageing_ppm", min=-2.0, max=2.0), reading("ageing_ppm", min=-5.0, max=5.0, years=10.0)),
    ],
    "operating_temperature_c": [
        (reading("operating_temperature_c", min=-40.0, max=85.0),),
        (
            reading("operating_temperature_c", min=-20.0, max=70.0),
            reading("operating_temperature_c", min=-40.0, max=105.0, check="two ranges in one cell"),
        ),
    ],
    "load_capacitance_pf": [
        (reading("load_capacitance_pf", 8.0),),
        (reading("load_capacitance_pf", options=(6.0, 9.0, 12.5)),),
        (reading("load_capacitance_pf", min=6.0, max=32.0),),
    ],
    "esr_ohm": [
        (reading("esr_ohm", max=60.0),),
        (reading("esr_ohm", 40.0, min=20.0, max=80.0),),
        (reading("esr_ohm", 35.0),),
        (reading("esr_ohm", 35.0, bare=True, check="far from its label"),),
        (reading("esr_ohm", max=30.0), *(reading("esr_ohm", max=90.0, **band) for band in BANDS)),
        (reading("esr_ohm", max=50.0, mode="fundamental"), reading("esr_ohm", max=70.0, mode="third overtone")),
    ],
    "shunt_capacitance_pf": [
        (reading("shunt_capacitance_pf", 1.5, min=1.2, max=1.8),),
        (reading("shunt_capacitance_pf", max=3.0),),
        (reading("shunt_capacitance_pf", 1.1, package="3225"), reading("shunt_capacitance_pf", 0.8, package="2016")),
    ],
    "motional_capacitance_ff": [
        (reading("motional_capacitance_ff", 4.5),),
        (reading("motional_capacitance_ff", 4.5, min=3.6, max=5.4),),
    ],
    "motional_inductance_mh": [(reading("motional_inductance_mh", 22.0),)],
    "capacitance_ratio": [(reading("capacitance_ratio", 300.0),)],
    "quality_factor": [(reading("quality_factor", min=50_000.0),)],
    "pulling_sensitivity_ppm_per_pf": [(reading("pulling_sensitivity_ppm_per_pf", 15.0),)],
    "drive_level_uw": [(reading("drive_level_uw", max=100.0),), (reading("drive_level_uw", 10.0, max=200.0),)],
    "turnover_temperature_c": [(reading("turnover_temperature_c", 25.0),)],
}
RARE = ("motional_inductance_mh", "capacitance_ratio", "quality_factor", "pulling_sensitivity_ppm_per_pf")
SELDOM = ("turnover_temperature_c",)
IDENTITIES = st.fixed_dictionaries(
    {
        "mode": st.sampled_from(["fundamental", "fundamental", "third overtone", None]),
        "cut": st.sampled_from(["AT", None, "tuning fork"]),
        "package": st.sampled_from([None, "3225", "2016"]),
        "resonance": st.sampled_from([None, "load", "series"]),
        "maker": st.sampled_from([None, "Orchardline"]),
    }
)
BENCHES = [
    bench(),
    bench({"requirement": {"trim_step_ppm": 1.0, "temperature_c": [-20.0, 60.0], "use": "ble-active"}}),
    bench(
        {
            "circuit": {
                "transconductance_ms": [6.0, 30.0],
                "overtone_trap": True,
                "condition": [{"temperature_c": -30.0, "transconductance_ms": 5.0}, {"swing_v": 1.1}],
            },
            "crystal": {"esr_means": "at load"},
        }
    ),
    bench(
        {
            "circuit": {
                "transconductance_ms": None,
                "swing_v": None,
                "limiter": "unknown",
                "rating": {"esr_max_ohm": 100.0, "load_pf": 9.0, "esr_min_ohm": 15.0},
                "condition": [{"temperature_c": 85.0, "input_stray_pf": 4.0}],
            }
        }
    ),
]


@st.composite
def rows(draw):
    """One part of a list: its identity, and of each field nothing (None) or the number of one of a few statements."""
    said = {}
    for field in (name for name in FIELD_NAMES if name in SAID):
        silent = {**dict.fromkeys(RARE, 3), **dict.fromkeys(SELDOM, 6)}.get(field, 1)
        said[field] = draw(st.sampled_from([*[None] * silent, *range(len(SAID[field])), *range(len(SAID[field]))]))
    return draw(IDENTITIES), {field: number for field, number in said.items() if number is not None}


def listed(parts) -> SpecSheet:
    return sheet().model_copy(update={"parts": PartList([Chunk.of_part(one) for one in parts])})


def made(drawn):
    said = [[one for field, number in row.items() for one in SAID[field][number]] for _, row in drawn]
    return [part(*said[at], number=f"P{at}", **identity) for at, (identity, _) in enumerate(drawn)]


LISTS = st.lists(rows(), min_size=1, max_size=8)


@settings(max_examples=25, deadline=None)
@given(LISTS, st.sampled_from(BENCHES))
def test_a_part_of_a_list_is_reckoned_as_it_is_by_itself(drawn, asked):
    parts = made(drawn)
    assert rank([listed(parts)], asked) == rank([sheet(*parts)], asked)


@settings(max_examples=10, deadline=None)
@given(LISTS, LISTS, st.sampled_from(BENCHES))
def test_lists_and_ordinary_sheets_stand_side_by_side(drawn, more, asked):
    one, other = made(drawn), made(more)
    mixed = [listed(one), sheet(*other, file="b.csv"), listed(other)]
    assert review(mixed, asked) == review([sheet(*one), sheet(*other, file="b.csv"), sheet(*other)], asked)


@settings(max_examples=15, deadline=None)
@given(LISTS, st.sampled_from(BENCHES), st.integers(1, 8))
def test_the_first_rows_alone_are_those_of_the_whole_ranking(drawn, asked, shown):
    parts = made(drawn)
    whole, first = rank([listed(parts)], asked), rank([listed(parts)], asked, shown=shown)
    assert first["rows"] == whole["rows"][:shown]
    assert first["notes"] == whole["notes"]
    verdicts = [row["verdict"] for row in whole["rows"]]
    counts = first.get("counts", {words: verdicts.count(words) for words in verdicts})
    assert {words: count for words, count in counts.items() if count} == {
        words: verdicts.count(words) for words in set(verdicts)
    }


@settings(max_examples=15, deadline=None)
@given(LISTS, st.sampled_from(BENCHES))
def test_every_column_holds_what_its_offers_take(drawn, asked):
    parts = made(drawn)
    lot = choose_loads(find_offers([listed(parts)], asked).offers, asked)
    offers = choose_loads(find_offers([sheet(*parts)], asked).offers, asked)
    for name, of in OF_OFFER.items():
        assert [bare(value) for value in lot.column(name)] == [bare(of(offer)) for offer in offers]
    for number in range(len(asked.settings)):
        for name, of in AT_SETTING.items():
            assert [bare(value) for value in lot.at(number, name)] == [bare(of(offer.at[number])) for offer in offers]


def bare(value):
    """What is taken, places left out: those a template does not have. A NaN is as good as another."""
    readings = getattr(value, "readings", None)
    if readings is None:
        return value
    values = [(r.field, r.min, r.typ, r.max, r.options, r.when, r.raw, r.bare, r.check) for r in readings]
    return repr((value.span, values, value.limit_alone, value.typical_only, value.at_temperature, value.said))


def test_a_list_is_not_taken_apart_row_by_row(monkeypatch):
    parts = [part(*SAID["frequency_mhz"][0], *SAID["esr_ohm"][0], number=f"P{at}") for at in range(50)]
    lot = find_offers([listed(parts)], bench()).offers
    monkeypatch.setattr(Listed, "offer", lambda *_: pytest.fail("a whole offer was made for a column"))
    assert len(lot.column("settled").values) == 1
    assert len(lot.at(0, "esr").values) == 1
    rank_of = choose_loads(lot, bench())
    assert len(rank_of) == 50


def test_a_list_as_read_is_ranked_as_its_parts_are_with_the_same_places():
    head = "Part number,Frequency (MHz),Load capacitance (pF),ESR max (ohm),C0 max (pF),Package,Mode"
    cells = [
        f"OR{at:03d},{(12, 16, 16.0)[at % 3]},{6 + at % 4},{40 + at % 7},{1 + at % 5},3225,Fundamental"
        for at in range(300)
    ]
    read = read_sheet("\n".join([head, *cells]).encode(), "list.csv")
    assert isinstance(read.parts, PartList)
    apart = read.model_copy(update={"parts": tuple(read.parts)})
    assert rank([read], bench()) == rank([apart], bench())
