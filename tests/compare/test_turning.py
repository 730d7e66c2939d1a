import numpy as np
import pytest

from compare.circuit import Circuit, terminal_impedance_ohm
from compare.turning import hardest_capacitances


def impedance_of(gm_ms, frequency_mhz=16.0, feedback_kohm=np.inf, shunt_pf=0.0):
    """Z of a circuit, its three capacitances free, for each gain."""
    gains = np.atleast_1d(np.asarray(gm_ms, dtype=float))[:, None]

    def impedance(at, of):
        circuit = Circuit(at[..., 0], at[..., 1], at[..., 2], 0.0, gains[of], 0.0, feedback_kohm)
        return terminal_impedance_ohm(circuit, frequency_mhz, shunt_pf)

    return impedance


ONE = np.zeros(1, dtype=int)


def found_for(spans, impedance, targets=1):
    return hardest_capacitances(spans, impedance, targets)


def test_without_losses_and_far_below_the_optimum_the_least_capacitances_drive_hardest():
    spans = [(10.0, 12.0, 14.0), (10.0, 12.0, 14.0), (0.4, 0.5, 0.6)]
    assert np.isnan(found_for(spans, impedance_of(1.0))).all()


def test_beyond_the_optimum_the_point_is_the_one_of_the_published_formula():
    """Vittoz, Degrauwe, Bitz (1988): optimum gm = ω (Cin + Cout + Cin Cout/C3), turned round for Cin; from memory.

    Then -Re Z over Cin is greatest where its own slope is zero; scipy finds the same point.
    """
    from scipy.optimize import minimize_scalar

    spans = [(5.0, 20.0, 40.0), (15.0, 15.0, 15.0), (3.0, 3.0, 3.0)]
    found = found_for(spans, impedance_of(20.0))
    alone = minimize_scalar(
        lambda pf: float(np.real(impedance_of(20.0)(np.array([[[pf, 15.0, 3.0]]]), ONE)[0, 0])),
        bounds=(5.0, 40.0),
        method="bounded",
    )
    assert found == pytest.approx(np.array([[alone.x, 15.0, 3.0]]), abs=1e-3)


def test_with_losses_no_point_of_a_grid_drives_harder():
    spans = [(2.0, 8.0, 16.0), (2.0, 8.0, 16.0), (0.5, 1.0, 1.5)]
    impedance = impedance_of(0.01, frequency_mhz=0.032768, feedback_kohm=1e4, shunt_pf=0.9)
    found = found_for(spans, impedance)
    assert not np.isnan(found).any()
    grid = np.stack(np.meshgrid(*(np.linspace(low, high, 41) for low, _, high in spans)), axis=-1).reshape(1, -1, 3)
    assert impedance(found[None], ONE).real.min() <= impedance(grid, ONE).real.min() * (1 - 1e-9)


def test_each_target_has_its_own_point_whatever_the_others_are():
    spans = [(5.0, 20.0, 40.0), (15.0, 15.0, 15.0), (3.0, 3.0, 3.0)]
    three = found_for(spans, impedance_of([14.0, 20.0, 14.0]), 3)
    assert (three[0] == three[2]).all()
    assert three[0, 0] != three[1, 0]
    assert (three[1] == found_for(spans, impedance_of(20.0))[0]).all()


def test_capacitances_that_do_not_move_leave_nothing_to_find():
    spans = [(12.0, 12.0, 12.0), (12.0, 12.0, 12.0), (0.5, 0.5, 0.5)]
    assert np.isnan(found_for(spans, impedance_of(50.0))).all()
