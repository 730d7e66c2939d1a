from extract.conditions import condition_of


def test_the_first_year_is_no_mode_of_vibration() -> None:
    found = condition_of("1st year, 25 °C")
    assert (found.years, found.mode) == (1.0, None)


def test_first_alone_is_the_fundamental() -> None:
    assert condition_of("1st").mode == "fundamental"
