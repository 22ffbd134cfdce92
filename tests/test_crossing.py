"""Crossing sides are found, whatever the polygon's size, and none where there are none."""

import numpy as np
import pytest

from membrane.crossing import crossing


def circle(count):
    theta = 2 * np.pi * np.arange(count) / count
    return np.array([np.cos(theta), np.sin(theta)])


@pytest.mark.parametrize("count", [3, 4, 1000])
def test_a_convex_polygon_has_none(count):
    assert crossing(circle(count)) is None
    assert crossing(circle(count)[:, ::-1]) is None


def test_a_bow_tie():
    assert crossing(np.array([[0.0, 1.0, 0.0, 1.0], [0.0, 1.0, 1.0, 0.0]])) == (0, 2)


def test_a_figure_of_eight_crosses_in_its_middle():
    """A lemniscate of Gerono crosses at t = pi/2 and 3 pi/2."""
    count = 1002
    t = 2 * np.pi * (np.arange(count) + 0.3) / count
    one, other = crossing(np.array([np.cos(t), np.sin(t) * np.cos(t)]))
    assert abs(t[one] - np.pi / 2) < 0.01
    assert abs(t[other] - 3 * np.pi / 2) < 0.01


def test_sides_that_touch_count():
    touching = np.array([[0.0, 2.0, 2.0, 1.0, 0.0], [0.0, 0.0, 1.0, 0.0, 1.0]])
    assert crossing(touching) == (0, 2)


def test_a_comb_has_none():
    x = np.repeat(np.arange(400.0), 2)
    y = np.tile([0.0, 1.0, 1.0, 0.0], 200)
    assert crossing(np.vstack([np.append(x, [399.0, 0.0]), np.append(y, [-1.0, -1.0])])) is None
