"""Readings as a person types them."""

import hand_made
import pytest

from compare.entered import Draft, asked_for, draft_of
from extract.model import Part, When, Where


def reading(field, *, fork=False, **texts):
    return Draft(field, texts, fork=fork).reading(raw="by hand", where=Where())


def bounds(field, **texts):
    now = reading(field, **texts)
    return now.min, now.typ, now.max


def fault(field, kept=(), fork=False, **texts):
    return Draft(field, texts, frozenset(kept), fork).faults


@pytest.mark.parametrize(
    ("field", "texts", "expected"),
    [
        ("load_capacitance_pf", {"typ": "12,5"}, (None, 12.5, None)),
        ("load_capacitance_pf", {"typ": "0,0125 nF"}, (None, 12.5, None)),
        ("motional_capacitance_ff", {"typ": "0.0044 pF"}, (None, 4.4, None)),
        ("esr_ohm", {"max": "0.05 kΩ"}, (None, None, 50.0)),
        ("esr_ohm", {"typ": "28", "max": "50 ohm"}, (None, 28.0, 50.0)),
        ("drive_level_uw", {"max": "0,1 mW"}, (None, None, 100.0)),
        ("motional_inductance_mh", {"typ": "8,52 mH"}, (None, 8.52, None)),
        ("quality_factor", {"typ": "50 k"}, (None, 50000.0, None)),
        ("frequency_tolerance_ppm", {"max": "±10 ppm"}, (-10.0, None, 10.0)),
        ("frequency_tolerance_ppm", {"typ": "10"}, (-10.0, None, 10.0)),
        ("frequency_tolerance_ppm", {"min": "-5", "max": "15"}, (-5.0, None, 15.0)),
        ("frequency_tolerance_ppm", {"min": "−0,002 %", "max": "0,002 %"}, (-20.0, None, 20.0)),
        ("ageing_ppm", {"max": "3"}, (-3.0, None, 3.0)),
        ("operating_temperature_c", {"min": "−40", "max": "85 °C"}, (-40.0, None, 85.0)),
        ("pulling_sensitivity_ppm_per_pf", {"typ": "-28 ppm/pF"}, (None, 28.0, None)),
        ("frequency_mhz", {"typ": "32.768 kHz"}, (None, 0.032768, None)),
    ],
)
def test_a_value_is_understood_as_typed(field, texts, expected):
    assert bounds(field, **texts) == pytest.approx(expected)


@pytest.mark.parametrize("text", ["-0,034 ppm/°C²", "0.034", "−3.4e-2"])
def test_the_coefficient_of_a_fork_is_negative_whether_its_sign_is_typed_or_not(text):
    assert reading("parabolic_coefficient_ppm_per_c2", fork=True, typ=text).typ == pytest.approx(-0.034)


@pytest.mark.parametrize("text", ["8; 10; 12,5 pF", "8 pF; 10 pF; 12.5 pF", "8/10/12.5", "8, 10, 12.5 pF"])
def test_a_choice_is_typed_with_a_sign_between(text):
    assert reading("load_capacitance_pf", options=text).options == (8.0, 10.0, 12.5)


def test_an_entered_reading_says_that_it_is_and_keeps_its_place():
    now = Draft("esr_ohm", {"max": "40"}).reading(raw="ESR 50", where=Where(page=2), when=When(mode="fundamental"))
    assert (now.status, now.check, now.where.page, now.when.mode, now.raw) == (
        "entered",
        None,
        2,
        "fundamental",
        "ESR 50",
    )


@pytest.mark.parametrize(
    ("field", "fork", "text", "sentence"),
    [
        ("esr_ohm", False, "50 kΩ", "50 kΩ: plausible is 2 to 3000 Ω. Meant 50 Ω? Not used until you say."),
        ("esr_ohm", True, "50", "50 Ω: plausible is 5000 to 250000 Ω. Meant 50 kΩ? Not used until you say."),
        (
            "motional_capacitance_ff",
            False,
            "3,4 pF",
            "3400 fF: plausible is 0.05 to 60 fF. Meant 3.4 fF? Not used until you say.",
        ),
        ("load_capacitance_pf", False, "12.5 u", "“u”: unit not known; pF, fF, nF are"),
        ("esr_ohm", False, "low", "“low” is no number; write it like 12.5 Ω"),
        ("esr_ohm", False, "-50", "must not be below 0, got −50 Ω"),
        ("frequency_mhz", False, "32,768 kHz", "can be 32.768 kHz or 32.768 MHz; write it without the comma"),
    ],
)
def test_an_absurd_value_is_stopped_with_its_reason(field, fork, text, sentence):
    assert fault(field, fork=fork, max=text) == {"max": sentence}


def test_an_absurd_value_that_a_person_keeps_is_entered():
    assert fault("esr_ohm", kept=("max",), max="50 kΩ") == {}
    assert Draft("esr_ohm", {"max": "50 kΩ"}, frozenset({"max"}), False).reading(raw="", where=Where()).max == 50_000.0


def test_what_cannot_be_one_reading_is_said():
    assert fault("esr_ohm") == {"typ": "nothing is typed: give one value, or say that it is not on the sheet"}
    assert fault("esr_ohm", min="60", max="50") == {"max": "out of order: 60, 50; least, typical and greatest rise"}
    assert fault("load_capacitance_pf", typ="8", options="8; 10") == {
        "options": "a choice stands alone; leave least, typical and greatest blank"
    }


def test_a_draft_with_a_fault_gives_no_reading():
    with pytest.raises(ValueError, match="nothing is typed"):
        reading("esr_ohm")


@pytest.mark.parametrize("number", range(len(hand_made.READINGS)))
def test_the_form_of_a_reading_gives_the_same_reading_back(number):
    before = hand_made.READINGS[number]
    after = draft_of(before, hand_made.PART).reading(raw=before.raw, where=before.where, when=before.when)
    assert after == before.model_copy(update={"status": "entered", "check": None})


def test_what_is_plausible_hangs_on_the_kind_of_part():
    assert asked_for("esr_ohm", fork=False).plausible == (2.0, 3000.0)
    assert asked_for("esr_ohm", fork=True).plausible == (5000.0, 250_000.0)
    assert draft_of(hand_made.READINGS[6], Part(cut="tuning fork")).fork is True
