"""Price, stock and lead time as typed and as lists give them."""

import io

import openpyxl
import pytest

from compare.supply import (
    SupplyError,
    columns,
    import_list,
    supply_of,
    understand,
    value_text,
    whence_text,
    with_values,
)

ROWS = [
    {"part_number": "AB-1", "maker": "Merrowby", "file": "a.pdf"},
    {"part_number": "AB-2", "maker": "Quenby", "file": "b.pdf"},
    {"part_number": "AB-2", "maker": "Lindelake", "file": "c.pdf"},
]


@pytest.mark.parametrize(
    ("column", "text", "shown"),
    [
        ("price", "0,21 €", "0.21 €"),
        ("price", "USD 0.345", "0.345 $"),
        ("price", "1.234,50 EUR", "1234.5 €"),
        ("price", "0.22", "0.22"),
        ("price", "EUR 0.19 each", "0.19 €"),
        ("price", "0.19 €/pc", "0.19 €"),
        ("stock", "3.000", "3000 pieces"),
        ("stock", "3,000 pcs", "3000 pieces"),
        ("stock", "12k", "12000 pieces"),
        ("minimum_order", "1", "1 piece"),
        ("lead_time", "14", "14 weeks"),
        ("lead_time", "8-10 weeks", "10 weeks"),
        ("lead_time", "7 Tage", "1 week"),
        ("lead_time", "ab Lager", "0 weeks"),
        ("status", "NRND", "not for new designs"),
        ("status", "abgekündigt", "last order"),
        ("status", "on allocation", "on allocation"),
        ("packing", " reel  3000 ", "reel 3000"),
    ],
)
def test_a_cell_is_understood_as_buyers_write_it(column, text, shown):
    assert value_text(column, understand(columns()[column], text)) == shown


@pytest.mark.parametrize(
    ("column", "text", "fault"),
    [
        ("price", "cheap", "“cheap”: a price is one number with its currency, like 0.21 €"),
        ("price", "3 doubloons", "“3 doubloons”: currency not known; €, $, £, ¥, CN¥, CHF are"),
        ("stock", "2.5", "“2.5”: a number of pieces is wanted, like 3000 or 3k"),
        ("stock", "-3", "“-3”: cannot be below zero; a number of pieces is wanted, like 3000 or 3k"),
        ("lead_time", "soon", "“soon”: a lead time is a number of days, weeks or months, like 14 weeks"),
    ],
)
def test_a_cell_that_is_not_understood_says_what_would_be(column, text, fault):
    with pytest.raises(SupplyError) as told:
        understand(columns()[column], text)
    assert str(told.value) == fault


def imported(text, slot=None, name="offers.csv"):
    return import_list(text.encode(), name, ROWS, slot or {}, day="2027-01-01", by="M. Alder")


def test_a_list_is_taken_over_by_part_number_with_the_units_of_its_headings():
    got = imported(
        "Hersteller;Teilenummer;Preis (EUR);Bestand;Lieferzeit (Tage);Stand\nMerrowby;ab 1;0,21;3.000;14;31.05.2027\n"
    )
    record = got.slot["merrowby|ab-1"]
    assert {key: value_text(key, one["value"]) for key, one in record.items()} == {
        "price": "0.21 €",
        "stock": "3000 pieces",
        "lead_time": "2 weeks",
    }
    assert {one["date"] for one in record.values()} == {"2027-05-31"}
    assert (got.matched, got.said) == (1, ())


def test_what_a_list_has_beside_the_open_parts_is_named_and_a_bad_cell_costs_only_itself():
    got = imported("part number,price,stock\nAB-1,x,200\nZZ-9,1,1\n")
    assert set(got.slot["merrowby|ab-1"]) == {"stock"}
    assert got.said == (
        "AB-1, price: “x”: a price is one number with its currency, like 0.21 €",
        "not among the parts that are open: ZZ-9",
    )


def test_one_number_of_two_makers_goes_to_the_maker_named_and_else_to_both():
    assert set(imported("MPN,Maker,Stock\nAB-2,QUENBY Ltd,7\n").slot) == {"quenby|ab-2"}
    assert set(imported("MPN,Stock\nAB-2,7\n").slot) == {"quenby|ab-2", "lindelake|ab-2"}


def test_a_workbook_is_taken_over_like_a_list():
    book = openpyxl.Workbook()
    book.active.append(["Offer of spring"])
    book.active.append(["Part number", "Unit price", "MOQ", "Packaging"])
    book.active.append(["AB-1", 0.19, 3000, "tape"])
    data = io.BytesIO()
    book.save(data)
    got = import_list(data.getvalue(), "offer.xlsx", ROWS, {}, day="2027-01-01", by="")
    record = got.slot["merrowby|ab-1"]
    assert record["price"]["value"] == {"amount": 0.19, "currency": ""}
    assert record["minimum_order"]["value"] == 3000
    assert whence_text(record["packing"]) == "✎ from offer.xlsx, 2027-01-01"


def test_a_file_without_part_numbers_is_refused_and_nothing_is_lost():
    with pytest.raises(SupplyError) as told:
        imported("colour,price\nred,1\n")
    assert str(told.value).startswith("offers.csv: no line of headings with a part number and one of Price, ")


def test_an_import_replaces_only_the_values_that_it_has():
    before = {"merrowby|ab-1": {"packing": {"value": "reel", "date": "2026-01-01", "from": "typed", "by": ""}}}
    assert set(imported("mpn,stock\nAB-1,5\n", before).slot["merrowby|ab-1"]) == {"packing", "stock"}
    assert set(before["merrowby|ab-1"]) == {"packing"}


def test_what_a_person_entered_goes_before_what_the_sheet_states():
    row = {**ROWS[0], "attributes": {"price": "0.30 €", "status": "active", "lead_time": "on request"}}
    slot = with_values(
        {},
        "merrowby|ab-1",
        {"price": {"value": {"amount": 0.2, "currency": "€"}, "date": "2027-01-01", "from": "typed", "by": ""}},
    )
    got = supply_of(row, slot)
    assert value_text("price", got["price"]["value"]) == "0.2 €"
    assert whence_text(got["price"]) == "✎ entered 2027-01-01"
    assert whence_text(got["status"]) == "stated, no date"
    assert got["lead_time"]["value"] == "on request"


def test_a_part_whose_last_value_is_taken_away_is_gone():
    one = {"value": 5.0, "date": "", "from": "typed", "by": ""}
    slot = with_values({}, "a|b", {"stock": one})
    assert with_values(slot, "a|b", {"stock": None}) == {}
