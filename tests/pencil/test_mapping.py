"""The curved mapping inverts, measures and points outward."""

import numpy as np
import pytest

from membrane.pencil import build_space
from tests import zoo


@pytest.fixture(scope="module")
def disc():
    return build_space(zoo.prepared(zoo.DISC, degree=7).mesh, 7, ("rim",))


def test_area_and_perimeter_of_the_disc(disc):
    """pi and 2 pi, elementary."""
    assert abs(disc.on_regions(("head",)).dx.sum() / np.pi - 1) < 1e-10
    assert abs(disc.on_edges(("rim",)).dx.sum() / (2 * np.pi) - 1) < 1e-10


def test_normals_are_those_of_the_circle(disc):
    basis = disc.on_edges(("rim",))
    points = np.asarray(basis.global_coordinates())
    np.testing.assert_allclose(np.asarray(basis.normals), points, atol=1e-7)


def test_inverse(disc):
    X = np.random.default_rng(0).dirichlet([1, 1, 1], 7).T[:2]
    back = disc.mapping.invF(disc.mapping.F(X))
    np.testing.assert_allclose(back, np.broadcast_to(X[:, None], back.shape), atol=1e-12)


def test_jacobian_is_the_derivative(disc):
    X, step = np.array([[0.2, 0.5], [0.3, 0.1]]), 1e-6
    for axis in range(2):
        shift = step * np.eye(2)[:, [axis]]
        slope = (disc.mapping.F(X + shift) - disc.mapping.F(X - shift)) / (2 * step)
        np.testing.assert_allclose(disc.mapping.DF(X)[:, axis], slope, atol=1e-8)
