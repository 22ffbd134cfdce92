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
    found = estimate(modes(100.0, 200.0), modes(100.0 * 2 ** (1 / 12), 200.0), 400.0)
    np.testing.assert_allclose(found.cents, [100.0, ROUNDING])
    assert abs(found.excess - 0.5) < 1e-12


def test_a_rigid_mode_has_no_error():
    found = estimate(modes(0.0, 100.0), modes(0.0, 100.0), 0.01)
    assert found.cents.tolist() == [0.0, ROUNDING]


def test_more_modes_of_the_coarse_solve_are_left_alone():
    coarse = modes(100.0, 200.0)
    fine = replace(coarse, eigenvalues=coarse.eigenvalues[:1])
    assert len(estimate(fine, coarse, 0.01).cents) == 1


@pytest.mark.parametrize("off", [0.01, 10.0])
def test_excess_is_the_whole_interval_over_the_wanted_one(off):
    found = estimate(modes(100.0), modes(100.0 * 2 ** (off / 1200)), 0.04)
    assert abs(found.excess / (2 * off / 0.04) - 1) < 1e-6


def test_two_meshes_widen_every_interval_by_twice_their_largest_distance():
    known = estimate(modes(0.0, 100.0, 200.0), modes(0.0, 100.0, 200.0), 1.0)
    other = modes(0.0, 100.0 * 2 ** (3 / 1200), 200.0)
    found = widened(known, modes(0.0, 100.0, 200.0), other, 1.0)
    np.testing.assert_allclose(found.cents, [0.0, 6.0, 6.0], atol=1e-6)
    assert abs(found.excess - 12.0) < 1e-5
