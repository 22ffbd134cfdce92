"""The polynomials are orthonormal and their slopes are their derivatives."""

import numpy as np
import pytest
from scipy.special import roots_jacobi

from membrane.triangle.polynomials import orthonormal


def gauss(n):
    """Collapsed Gauss-Jacobi rule, exact to order 2n - 1."""
    (x, u), (y, v) = roots_jacobi(n, 0, 0), roots_jacobi(n, 1, 0)
    x, y = (1 + x) / 2, (1 + y) / 2
    points = np.array([np.outer(x, 1 - y), np.outer(np.ones(n), y)]).reshape(2, -1)
    return points, np.outer(u, v).ravel() / 8


@pytest.mark.parametrize("degree", [0, 1, 2, 5, 12])
def test_orthonormal(degree):
    points, weights = gauss(degree + 1)
    values, _ = orthonormal(points, degree)
    assert len(values) == (degree + 1) * (degree + 2) // 2
    np.testing.assert_allclose((values * weights) @ values.T, np.eye(len(values)), atol=2e-13)


@pytest.mark.parametrize("degree", [1, 4, 9])
def test_slopes_are_derivatives(degree):
    points = np.random.default_rng(1).dirichlet([1, 1, 1], 40).T[:2]
    _, slopes = orthonormal(points, degree)
    step = 1e-6
    for axis in range(2):
        shift = step * np.eye(2)[:, [axis]]
        ahead, _ = orthonormal(points + shift, degree)
        behind, _ = orthonormal(points - shift, degree)
        scale = np.abs(slopes).max()
        np.testing.assert_allclose((ahead - behind) / (2 * step), slopes[axis], atol=1e-8 * scale)
