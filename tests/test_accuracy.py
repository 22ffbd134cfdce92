"""The estimate is the distance of two solves, never below rounding."""

from dataclasses import replace

import numpy as np
import pytest

from membrane.accuracy import ROUNDING, estimate, widened
from membrane.records.modes import Modes


def modes(*frequencies):
    values = (2 * np.pi * np.array(frequencies)) ** 2
    return Modes(None, values, np.empty((0, len(values))), np.arange(1, len(values) + 1), True)


def test_cents_between_the_solves():
    """A semitone is 100 cents."""
    found = estimate(modes(100.0, 200.0), modes(100.0 * 2 ** (1 / 12), 200.0), "")
    np.testing.assert_allclose(found.cents, [200.0, 2 * ROUNDING], rtol=1e-4)
    assert (found.label, found.reason) == ("estimated", "")


def test_a_rigid_mode_has_no_error():
    found = estimate(modes(0.0, 100.0), modes(0.0, 100.0), "")
    assert found.low[0] == found.high[0] == found.cents[0] == 0.0


def test_more_modes_of_the_coarse_solve_are_left_alone():
    coarse = modes(100.0, 200.0)
    fine = replace(coarse, eigenvalues=coarse.eigenvalues[:1])
    assert len(estimate(fine, coarse, "").cents) == 1


@pytest.mark.parametrize("off", [0.01, 10.0])
def test_the_interval_reaches_as_far_down_as_up(off):
    fine = modes(100.0)
    found = estimate(fine, modes(100.0 * 2 ** (off / 1200)), "")
    np.testing.assert_allclose(found.low * found.high, fine.eigenvalues**2)
    assert abs(found.widest / (2 * off) - 1) < 1e-6


def test_two_meshes_widen_every_interval_by_twice_their_largest_distance():
    known = estimate(modes(0.0, 100.0, 200.0), modes(0.0, 100.0, 200.0), "")
    other = modes(0.0, 100.0 * 2 ** (3 / 1200), 200.0)
    found = widened(known, modes(0.0, 100.0, 200.0), other)
    np.testing.assert_allclose(found.cents, [0.0, 12.0, 12.0], atol=1e-6)
