"""Jacobi polynomials and Gauss's rules against scipy."""

import numpy as np
import pytest
from scipy.special import eval_jacobi, roots_jacobi

from membrane.triangle.jacobi import gauss, jacobi


@pytest.mark.parametrize(("alpha", "beta"), [(0, 0), (1, 0), (1, 1), (9, 0), (25, 0)])
@pytest.mark.parametrize("degree", [0, 1, 2, 14])
def test_values_and_slopes(alpha, beta, degree):
    x = np.linspace(-1, 1, 23)
    values, slopes = jacobi(degree, alpha, beta, x)
    assert values.shape == slopes.shape == (degree + 1, 23)
    for n in range(degree + 1):
        # DLMF 18.9.15
        slope = (n + alpha + beta + 1) / 2 * eval_jacobi(n - 1, alpha + 1, beta + 1, x)
        slope = slope if n else np.zeros_like(x)
        for found, known in ((values[n], eval_jacobi(n, alpha, beta, x)), (slopes[n], slope)):
            np.testing.assert_allclose(found, known, rtol=1e-12, atol=1e-13 * abs(known).max())


@pytest.mark.parametrize(("alpha", "beta"), [(0, 0), (1, 0), (1, 1)])
@pytest.mark.parametrize("count", [1, 2, 3, 10, 40])
def test_gauss(count, alpha, beta):
    points, weights = gauss(count, alpha, beta)
    known, known_weights = roots_jacobi(count, alpha, beta)
    np.testing.assert_allclose(points, known, rtol=0, atol=2e-15)
    np.testing.assert_allclose(weights, known_weights, rtol=2e-12)
