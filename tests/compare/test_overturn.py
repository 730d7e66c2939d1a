"""Breaking points, each put back into sheet or bench: there the verdict must turn."""

import math

import made_sheets
import pytest
from reviewed_parts import WATCH_TEXT, bench, dossier_of, part, radio, watch

from compare.cures import with_gain
from compare.overturn import Break, overturning
from compare.verdict import GAINS


def named(dossier, about, what):
    return next(one for one in dossier.breaks if (one.about, one.what) == (about, what))


def worst_slack(review, keys):
    return min(review["slack"][key] for key in keys)


@pytest.mark.parametrize("dossier", [radio, watch])
def test_at_the_gm_named_the_margins_are_just_met(dossier):
    one = dossier()
    turn = named(one, "gains", "the IC’s gm")
    there = dossier_of(one.offer.part, with_gain(one.bench, turn.value / turn.now))
    assert worst_slack(there.review, GAINS) == pytest.approx(1.0, abs=2e-3)


def test_at_the_gm_named_the_start_up_is_just_met():
    turn = named(radio(), "startup_ms", "the IC’s gm")
    there = dossier_of(radio().offer.part, with_gain(radio().bench, turn.value / turn.now))
    assert there.review["slack"]["startup_ms"] == pytest.approx(1.0, abs=5e-3)


def test_at_the_esr_named_the_margins_are_just_met():
    turn = named(radio(), "gains", "the ESR")
    there = dossier_of(part(made_sheets.reading("esr_ohm", 28.0 * turn.value / 50.0, max=turn.value)))
    assert turn.now == 50.0
    assert worst_slack(there.review, GAINS) == pytest.approx(1.0, abs=2e-3)


def test_at_the_load_named_the_error_of_frequency_takes_all_the_room():
    turn = next(one for one in radio().breaks if one.about == "total_ppm" and one.side == "below")
    # By hand with the crystal's worst ends (C1 3.2 fF, C0 1.0 pF): C1/2 (1/(C0 + CL) - 1/(C0 + 8)).
    error = 3.2e3 / 2 * (1 / (1.0 + turn.value) - 1 / 9.0)
    room = 50 - 10 - 12 - 2 * math.log(3.65 * 10 + 1) / math.log(3.65 + 1)
    assert error == pytest.approx(room, rel=0.02)


def test_at_the_swing_named_the_drive_is_just_the_rated_one():
    turn = named(radio(), "drive_level_uw", "the swing")
    there = dossier_of(radio().offer.part, bench(swing_v=f"swing_v = {turn.value}"))
    assert there.review["slack"]["drive_level_uw"] == pytest.approx(1.0, rel=1e-3)


def test_a_met_requirement_would_fall_short_and_a_short_one_would_be_met():
    assert radio().overturning.startswith("It would fall short if the ")
    short = dossier_of(radio().offer.part, bench(margin="margin = 20.0"))
    assert short.overturning.startswith("The margins would be met if the ")
    turn = named(short, "gains", "the IC’s gm")
    assert not turn.met
    assert turn.value > turn.now


def test_every_short_requirement_gets_its_own_sentence():
    found = [
        Break("gains", "the IC’s gm", 9.1, "mS", "below", 3.6, met=False),
        Break("total_ppm", "the load", 8.2, "pF", "above", 9.0, met=False),
        Break("drive_level_uw", "the swing", 1.2, "V", "above", 0.5, met=True),
    ]
    assert overturning(found) == (
        "The margins would be met if the IC’s gm were at least 9.1 mS. "
        "The ppm would be met if the load were at most 8.2 pF."
    )


def test_small_figures_are_said_in_their_own_unit():
    assert Break("gains", "the IC’s gm", 0.0066, "mS", "below", 0.01, met=True).words == "the IC’s gm fell below 6.6 µS"


def test_nothing_is_said_where_nothing_can_be_told():
    assert overturning([]) == ""
    silent = dossier_of(part(without=("esr_ohm",)))
    assert all(one.about not in ("gains", "total_ppm") for one in silent.breaks)


def test_the_nearest_comes_first():
    far = [abs(math.log(one.value / one.now)) for one in watch().breaks]
    assert far == sorted(far)
    assert "transconductance_ms = 0.02" in WATCH_TEXT
