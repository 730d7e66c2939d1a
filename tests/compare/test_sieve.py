"""Long lists as candidates: what is passed over by columns alone, that it is counted, and that the best are kept."""

import pytest
from made_sheets import bench, part, reading, sheet, usual

from compare import sieve as sieving
from compare.sieve import MOST_ELSEWHERE, Wanted, best_first, sieve
from compare.substitution import substitute
from compare.swap import SubstituteError
from extract.partlist import Chunk, PartList

INCUMBENT = usual(number="QX-BOARD", package="2.5 x 2.0 mm")


@pytest.fixture(autouse=True)
def _short(monkeypatch):
    monkeypatch.setattr(sieving, "MOST_JUDGED", 5)


def sieved(*parts, asked=None):
    return sieve(sheet(), PartList([Chunk.of_part(one) for one in parts]), Wanted.of([sheet(INCUMBENT)], asked))


def names(found, parts):
    return [parts[at].part_number for at in found.rows]


def at_mhz(value, number, package="2520"):
    return usual(reading("frequency_mhz", value), number=number, package=package)


def test_rows_of_another_frequency_are_passed_over_and_counted():
    parts = [at_mhz(16.0, "A"), at_mhz(12.0, "B"), at_mhz(16.004, "C"), usual(number="D", without=("frequency_mhz",))]
    found = sieved(*parts)
    assert names(found, parts) == ["A", "C", "D"]
    assert found.note == (
        "a long list: 1 of another frequency passed over; name one as FILE#PART_NUMBER to see it whole"
    )


def test_a_range_that_holds_the_frequency_is_kept():
    parts = [usual(reading("frequency_mhz", min=8.0, max=40.0), number="A", package="2520"), at_mhz(12.0, "B")]
    assert names(sieved(*parts), parts) == ["A"]


def test_rows_in_another_package_are_passed_over_beyond_the_first_ones():
    parts = [at_mhz(16.0, f"X{number}", "2.0 x 1.6 mm") for number in range(60)] + [at_mhz(16.0, "A")]
    found = sieved(*parts)
    assert names(found, parts) == [*(f"X{number}" for number in range(MOST_ELSEWHERE)), "A"]
    assert f"{60 - MOST_ELSEWHERE} of another package" in found.note


def test_a_package_that_gives_no_size_is_kept():
    parts = [at_mhz(16.0, "A", "HC-49/US"), at_mhz(16.0, "B", None)]
    assert names(sieved(*parts), parts) == ["A", "B"]


def with_esr(limit, number):
    return usual(reading("esr_ohm", max=limit), number=number, package="2520")


@pytest.mark.parametrize("asked", [None, bench()])
def test_of_many_the_best_are_kept_in_the_order_of_the_list(asked):
    """With a bench by how they do in its circuit, without one by how their readings stand to the incumbent's."""
    parts = [with_esr(600.0 if number % 2 else 40.0, f"P{number}") for number in range(12)]
    found = sieved(*parts, asked=asked)
    kept = names(found, parts)
    assert kept == ["P0", "P2", "P4", "P6", "P8"]
    assert "7 that stand behind the best" in found.note


@pytest.mark.parametrize("asked", [None, bench()])
def test_no_drop_in_is_passed_over_for_another_part(asked):
    parts = [with_esr(limit, f"P{limit:g}") for limit in (500.0, 60.0, 450.0, 55.0, 300.0, 400.0, 50.0)]
    fits = {
        one["part_number"]
        for one in substitute([sheet(INCUMBENT)], [sheet(*parts)], asked)["candidates"]
        if one["verdict"] == "drop-in"
    }
    assert fits
    assert fits <= set(names(sieved(*parts, asked=asked), parts))


def test_what_the_incumbent_does_not_meet_is_not_held_against_a_candidate():
    asked = bench({"requirement": {"startup_ms": 1e-6}})
    parts = [with_esr(limit, f"P{limit:g}") for limit in (200.0, 40.0, 150.0)]
    lot = sieving.rows_lot(
        sheet(), listed := PartList([Chunk.of_part(one) for one in parts]), asked, sieving.np.arange(3)
    )
    assert len(listed) == 3
    assert best_first(lot, Wanted.of([sheet(INCUMBENT)], asked)).tolist()[0] == 1


def test_the_incumbents_own_number_is_kept_wherever_it_stands():
    parts = [with_esr(20.0, f"P{number}") for number in range(9)] + [with_esr(500.0, "QX-BOARD")]
    assert "QX-BOARD" in names(sieved(*parts), parts)


def test_an_incumbent_that_names_no_one_frequency_is_no_ground_to_pass_over_anything():
    many = part(reading("frequency_mhz", options=(12.0, 16.0)))
    assert Wanted.of([sheet(many)], None) is None
    with pytest.raises(SubstituteError):
        Wanted.of([sheet(INCUMBENT, many)], None)
