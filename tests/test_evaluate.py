"""Points are found on curved triangles, and functions evaluated there."""

from dataclasses import replace

import numpy as np
from scipy.spatial import Delaunay

from membrane.evaluate import gradients_at, locate, values_at
from membrane.pencil import build_space
from tests import zoo


def interpolated(mesh, degree, f):
    space = build_space(mesh, degree, ()).space
    return space, f(*space.locations)[:, None]


def inside_disc(count, seed=0):
    rng = np.random.default_rng(seed)
    radius, angle = np.sqrt(rng.random(count)), 2 * np.pi * rng.random(count)
    return radius * np.array([np.cos(angle), np.sin(angle)])


def test_same_triangle_as_scipy_finds_on_a_straight_mesh():
    rng = np.random.default_rng(4)
    delaunay = Delaunay(rng.random((40, 2)))
    triangles = np.sort(delaunay.simplices, axis=1).T
    vertices = delaunay.points.T
    mesh = replace(
        zoo.straight_square(),
        vertices=vertices,
        triangles=triangles,
        nodes=vertices[:, triangles],
    )
    points = rng.random((2, 500))
    np.testing.assert_array_equal(locate(mesh, points).triangle, delaunay.find_simplex(points.T))


def test_values_and_slopes_on_a_curved_mesh():
    mesh = zoo.prepared(zoo.DISC, degree=8, phase=2.0).mesh
    space, vector = interpolated(mesh, 8, lambda x, y: np.sin(2 * x + y))
    x, y = points = inside_disc(300)
    np.testing.assert_allclose(values_at(space, vector, points)[0], np.sin(2 * x + y), atol=1e-8)
    slope = np.cos(2 * x + y) * np.array([[2.0], [1.0]])
    np.testing.assert_allclose(gradients_at(space, vector, points)[:, 0], slope, atol=1e-6)


def test_every_point_of_the_disc_is_found_and_none_outside():
    mesh = zoo.prepared(zoo.DISC).mesh
    assert (locate(mesh, inside_disc(2000, seed=5) * (1 - 1e-9)).triangle >= 0).all()
    angle = np.linspace(0, 6, 50)
    outside = 1.001 * np.array([np.cos(angle), np.sin(angle)])
    assert (locate(mesh, outside).triangle == -1).all()


def test_nan_off_the_head():
    mesh = zoo.straight_square()
    space, vector = interpolated(mesh, 2, lambda x, y: x + y)
    values = values_at(space, vector, np.array([[0.25, 2.0], [0.5, 2.0]]))
    assert abs(values[0, 0] - 0.75) < 1e-14
    assert np.isnan(values[0, 1])
