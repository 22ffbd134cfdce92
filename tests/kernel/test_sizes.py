"""Sizes follow bends, gaps and targets, and grow no faster than allowed."""

import numpy as np
import pytest

from membrane.kernel.sizes import Bend, size_map


class Circles:
    """Stands for the kernel: curve k is a circle, given by (x, y, radius)."""

    def __init__(self, *circles):
        self.circles = circles

    def bounds(self, curve):
        return 0.0, 2 * np.pi

    def evaluate(self, curve, parameters):
        x, y, radius = self.circles[curve]
        return np.array([x + radius * np.cos(parameters), y + radius * np.sin(parameters)])

    def curvature(self, curve, parameters):
        return np.full(parameters.shape, 1 / self.circles[curve][2])


def sizes(*circles, target=9.0, bend=None):
    curves = range(len(circles))
    joined = {curve: [curve] for curve in curves}
    return size_map(Circles(*circles), dict.fromkeys(curves, target), joined, bend or Bend())


def test_a_circle_gets_its_share_of_segments():
    found = sizes((0, 0, 0.5), bend=Bend(per_circle=10))
    assert found.at(0.5, 0.0) == pytest.approx(2 * np.pi * 0.5 / 10)


def test_the_target_is_never_exceeded():
    assert sizes((0, 0, 0.5), target=0.01).at(0.0, 0.5) == pytest.approx(0.01)


def test_sizes_grow_with_the_distance():
    found = sizes((0, 0, 0.5), target=0.1, bend=Bend(growth=0.4))
    assert found.at(2.5, 0.0) == pytest.approx(0.1 + 0.4 * 2.0)


@pytest.mark.parametrize("gap", [0.1, 1e-2, 1e-4])
def test_a_gap_sets_the_size_beside_it(gap):
    found = sizes((0, 0, 1.0), (0.5 - gap, 0, 0.5), bend=Bend(per_circle=8, per_gap=2.0))
    assert found.at(1.0, 0.0) == pytest.approx(2.0 * gap, rel=0.15)
