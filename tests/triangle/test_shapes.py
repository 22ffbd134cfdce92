"""Shape functions are nodal and reproduce polynomials."""

import numpy as np
import pytest

from membrane.triangle import nodes, shapes


@pytest.mark.parametrize("degree", [1, 2, 3, 6, 10, 12])
def test_one_at_its_node_and_zero_at_the_others(degree):
    values, _ = shapes(nodes(degree), degree)
    np.testing.assert_allclose(values, np.eye(len(values)), atol=2e-14)


@pytest.mark.parametrize("degree", [1, 3, 7])
def test_reproduces_a_polynomial_and_its_slope(degree):
    def p(x, y):
        return (x - 0.3 * y) ** degree

    def slope(x, y):
        return degree * (x - 0.3 * y) ** (degree - 1) * np.array([np.ones_like(x), -0.3 + 0 * x])

    x, y = points = np.random.default_rng(3).dirichlet([1, 1, 1], 30).T[:2]
    values, slopes = shapes(points, degree)
    at_nodes = p(*nodes(degree))
    np.testing.assert_allclose(at_nodes @ values, p(x, y), atol=1e-13)
    np.testing.assert_allclose(at_nodes @ slopes, slope(x, y), atol=1e-12)
