import pytest
from building import table

from extract.wraps import unwrapped, without_wraps


@pytest.mark.parametrize(
    ("wrapped", "line"),
    [
        ("10.0 - 15.999\nMHz", "10.0 - 15.999 MHz"),
        ("10.0 –\n15.999 MHz", "10.0 – 15.999 MHz"),
        ("-40 °C to\n+85 °C", "-40 °C to +85 °C"),
        ("−20 °C\nbis +70 °C", "−20 °C bis +70 °C"),
        ("20 MHz\n≤ f < 30 MHz", "20 MHz ≤ f < 30 MHz"),
        ("20 MHz ≤ f <\n30 MHz", "20 MHz ≤ f < 30 MHz"),
        ("12,5 pF (andere\nauf Anfrage)", "12,5 pF (andere auf Anfrage)"),
        ("6, 8,\n9 pF", "6, 8, 9 pF"),
        ("±10\nppm", "±10 ppm"),
    ],
)
def test_a_break_inside_one_expression_is_a_space(wrapped: str, line: str) -> None:
    assert unwrapped(wrapped) == line


@pytest.mark.parametrize(
    "stacked",
    [
        "7\n9\n12.5 pF",
        "-40\n+85",
        "A: 10 ppm\nB: 20 ppm",
        "QRB-2016-\n4567",
        "QRB16-16.000M-\n08A",
        "-\n60 Ω",
        "60\nF",
        "typ 10\nmax 60",
    ],
)
def test_lines_that_stand_for_themselves_stay_apart(stacked: str) -> None:
    assert unwrapped(stacked) == stacked


def test_a_table_without_breaks_is_the_same_table() -> None:
    plain = table(("ESR", "60 Ω"))
    assert without_wraps(plain) is plain


def test_a_band_wrapped_by_its_column_keeps_both_ends() -> None:
    wrapped = table(("Parameter", "Max", "Note"), ("ESR", "80 Ω", "16.0 - 23.999\nMHz"))
    assert [cell.text for cell in without_wraps(wrapped).cells][-1] == "16.0 - 23.999 MHz"
