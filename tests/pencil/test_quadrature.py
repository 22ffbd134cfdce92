"""Quadrature is exact to its order, with positive weights."""

from math import factorial

import numpy as np
import pytest

from membrane.pencil.quadrature import line_rule, triangle_rule


@pytest.mark.parametrize("order", [1, 2, 3, 7, 10, 19, 20, 27, 46])
def test_exact_on_monomials(order):
    """integral of x^a y^b over the triangle = a! b! / (a + b + 2)!, elementary."""
    (x, y), weights = triangle_rule(order)
    assert weights.min() > 0
    for a in range(order + 1):
        for b in {0, order - a}:
            exact = factorial(a) * factorial(b) / factorial(a + b + 2)
            assert abs(weights @ (x**a * y**b) - exact) < 1e-13


@pytest.mark.parametrize("order", [1, 5, 24, 46])
def test_line(order):
    (x,), weights = line_rule(order)
    assert weights.min() > 0
    assert abs(weights @ x**order - 1 / (order + 1)) < 1e-14
    assert abs(np.sum(weights) - 1) < 1e-14
