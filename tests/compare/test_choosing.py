"""Filters, orders and weights over ranked rows by hand, and the sentence that says why one stands above another."""

import hand_made
import pytest

from compare.choosing import (
    Candidate,
    Filters,
    candidates,
    choices,
    left_out_text,
    limits_text,
    package_text,
    sift,
    weighed,
    weights_text,
    why_above,
)


def one(place, number, verdict="meets", least=1.5, package="2.5 × 2.0", **supply):
    row = hand_made.row(place, number, verdict, {"margin": least, "total_ppm": None if least is None else least + 1})
    row |= {"package": package, "attributes": {}}
    return Candidate(
        row, {key: {"value": value, "date": "", "from": "typed", "by": ""} for key, value in supply.items()}
    )


def euro(amount, currency="€"):
    return {"amount": amount, "currency": currency}


EVERY = [
    one(1, "A", least=1.6, price=euro(0.30), lead_time=4.0, stock=500.0),
    one(2, "B", least=1.4, price=euro(0.20), lead_time=16.0, package="2,5 x 2,0 mm"),
    one(3, "C", least=1.2, package="SMD 2016"),
    one(4, "D", "cannot tell", 1.9, price=euro(0.10)),
    one(5, "E", "falls short", 0.8, price=euro(0.05), stock=90000.0),
]


def shown(by="least_slack", weights=None, **asked):
    return "".join(each.row["part_number"] for each in sift(EVERY, Filters(by=by, **asked), weights or {}).shown)


def test_without_filters_the_ranking_stands_as_it_is():
    assert shown() == "ABCDE"


def test_no_order_lifts_a_part_over_a_better_verdict_or_an_unknown_over_a_known():
    assert shown("price") == "BACDE"
    assert shown("lead_time") == "ABCDE"
    assert shown("stock") == "ABCDE"
    assert shown("weights", weights={"price": 5}) == "BACDE"


def test_packages_are_told_by_size_whatever_is_written_round_it():
    assert [package_text(text) for text in ("2,5 x 2,0 mm", "SMD 2520 (2.5×2.0)", "HC-49/US", None)] == [
        "2.5 × 2.0",
        "2.5 × 2.0",
        "HC-49/US",
        "",
    ]
    assert shown(package="2.5 × 2.0") == "ABDE"
    assert choices(EVERY)["package"] == ["2.5 × 2.0", "2.0 × 1.6"]


def test_a_limit_leaves_out_what_is_not_known_and_says_so():
    sifted = sift(EVERY, Filters(most_price=0.25), {})
    assert [each.row["part_number"] for each in sifted.shown] == ["B", "D", "E"]
    assert left_out_text(sifted, len(EVERY)) == "3 of 5 shown; left out: 1 because the price is not known"
    assert left_out_text(sift(EVERY, Filters(), {}), len(EVERY)) == ""


@pytest.mark.parametrize(
    ("asked", "left"),
    [
        ({"most_weeks": 4.0}, "A"),
        ({"least_stock": 500.0}, "AE"),
        ({"verdict": "cannot tell"}, "D"),
        ({"part": "e"}, "ABCDE"),
        ({"maker": "Nobody"}, ""),
    ],
)
def test_filters_keep_what_holds_at_the_limit_itself(asked, left):
    rows = "".join(each.row["part_number"] for each in sift(EVERY, Filters(**asked), {}).shown)
    assert rows == left


def test_prices_of_another_currency_are_not_compared():
    every = [*EVERY[:2], one(3, "F", price=euro(0.01, "$"))]
    sifted = sift(every, Filters(by="price", most_price=1.0), {})
    assert [each.row["part_number"] for each in sifted.shown] == ["B", "A"]
    assert sifted.currency == "€"
    bare = [one(1, "A", price=euro(0.3, "")), one(2, "B", price=euro(0.4, "")), one(3, "C", price=euro(0.2))]
    assert sift(bare, Filters(by="price"), {}).shown[0].row["part_number"] == "C"


def test_weights_count_as_powers_of_the_ratio_to_the_best():
    # By hand: A has the best slack and costs 1.5 times the least: 1^(3/4) * (2/3)^(1/4); B 1.4/1.6 of the slack.
    rated = weighed(EVERY[:2], {"least_slack": 3, "price": 1}, "€")
    assert rated[1] == pytest.approx((0.2 / 0.3) ** 0.25)
    assert rated[2] == pytest.approx((1.4 / 1.6) ** 0.75)
    assert weighed(EVERY[:2], {"price": 0}, "€") == {}
    assert weights_text({"least_slack": 3, "price": 1, "stock": 0}) == "least slack 3, price 1"


def reason(at, beside, by="least_slack", weights=None):
    sifted = sift(EVERY, Filters(by=by), weights or {})
    return why_above(EVERY[at], EVERY[beside], sifted, by, weights or {})


def test_why_one_stands_above_another_is_a_sentence():
    assert reason(0, 1) == "Both meet. The tightest of both is Margin: 1.60 times over for A, 1.40 times for B."
    assert reason(1, 0, "price") == "Both meet. Price: 0.2 € for B, 0.3 € for A."
    assert reason(0, 2, "price") == (
        "Both meet. Of C the price is not known, and what is not known never stands above what is."
    )
    assert reason(3, 4) == ("D cannot be told; E falls short. That counts before everything else.")
    assert reason(0, 1, "weights", {"least_slack": 5, "price": 1}) == (
        "Both meet. Weighed (least slack 5, price 1), A comes to 0.643 of the best of each, B to 0.615."
    )


def test_why_a_part_falls_short_or_cannot_be_told_is_named():
    untold = one(1, "QX26-8", "cannot tell", None)
    untold.row["missing"] = ["esr_ohm"]
    short = one(2, "TW", "falls short", 0.9)
    short.row["reasons"] = [hand_made.reason("total_ppm", "falls short", "")]
    said = why_above(untold, short, sift([], Filters(), {}), "least_slack", {})
    assert said.startswith("QX26-8 cannot be told (ESR not known); TW falls short in ppm in all. ")


def test_filters_come_back_from_what_was_kept_and_pass_over_what_a_later_issue_added():
    asked = Filters(package="2.0 × 1.6", most_price=0.25, by="price")
    assert asked.as_slot() == {"package": "2.0 × 1.6", "most_price": 0.25, "by": "price"}
    assert Filters.of(asked.as_slot()) == asked
    assert Filters.of({"colour": "red", "by": "beauty"}) == Filters()
    assert (asked.asks, Filters(by="price").asks) == (True, False)
    assert limits_text(asked, "€") == "price at most 0.25 €"


def test_supply_stands_beside_the_rows_it_belongs_to():
    row = hand_made.row(1, "AB-1") | {"attributes": {"price": "0.2 €"}}
    slot = {"merrowby|ab-1": {"stock": {"value": 7.0, "date": "", "from": "typed", "by": ""}}}
    (found,) = candidates([row], slot)
    assert (found.figure("price"), found.figure("stock"), found.figure("lead_time")) == (0.2, 7.0, None)
    (bare,) = candidates([row], {})
    assert bare.figure("price") == 0.2
