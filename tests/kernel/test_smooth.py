"""Smoothing makes triangles better, none worse than the worst around it, and moves no border."""

import numpy as np
import pytest
from scipy.spatial import Delaunay

from membrane.kernel.smooth import smoothed
from membrane.records.raw_mesh import signed_areas


def scattered(count):
    """A square with vertices anywhere: (vertices, triangles, movable)."""
    rng = np.random.default_rng(4)
    rim = np.linspace(0.0, 1.0, 7)[:-1]
    sides = [(rim, 0 * rim), (0 * rim + 1, rim), (1 - rim, 0 * rim + 1), (0 * rim, 1 - rim)]
    border = np.hstack([np.array(side) for side in sides])
    vertices = np.hstack([border, rng.uniform(0.05, 0.95, (2, count))])
    triangles = Delaunay(vertices.T).simplices.T
    turned = signed_areas(vertices[:, triangles]) < 0
    triangles[1:, turned] = triangles[:0:-1, turned]
    return vertices, triangles, np.arange(vertices.shape[1]) >= border.shape[1]


def quality(vertices, triangles):
    corners = vertices[:, triangles]
    squares = ((corners - corners[:, [1, 2, 0]]) ** 2).sum(axis=(0, 1))
    return 4.0 * np.sqrt(3.0) * signed_areas(corners) / squares


def test_triangles_get_better_and_the_border_stays():
    vertices, triangles, movable = scattered(40)
    better = smoothed(vertices, triangles, movable)
    before, after = quality(vertices, triangles), quality(better, triangles)
    assert np.array_equal(better[:, ~movable], vertices[:, ~movable])
    assert after.min() >= before.min()
    assert after.mean() > before.mean() + 0.1
    assert signed_areas(better[:, triangles]).sum() == pytest.approx(1.0, rel=1e-12)


def test_a_vertex_goes_to_the_middle_of_its_neighbours():
    angles = np.pi / 3 * np.arange(6)
    vertices = np.hstack([[[0.3], [-0.2]], np.array([np.cos(angles), np.sin(angles)])])
    around = np.arange(1, 7)
    triangles = np.array([0 * around, around, np.roll(around, -1)])
    hub = smoothed(vertices, triangles, np.arange(7) == 0)[:, 0]
    assert np.abs(hub).max() < 1e-15


def test_a_vertex_stays_where_its_middle_makes_a_triangle_worse():
    """The middle of the neighbours lies outside this dented star."""
    rim = np.array([[0.0, 3.0, 0.2, 3.0], [0.0, 2.0, 0.0, -2.0]])
    vertices = np.hstack([[[0.1], [0.0]], rim])
    triangles = np.array([[0, 0, 0, 0], [1, 4, 3, 2], [4, 3, 2, 1]])
    assert np.all(signed_areas(vertices[:, triangles]) > 0)
    assert np.array_equal(smoothed(vertices, triangles, np.arange(5) == 0), vertices)
