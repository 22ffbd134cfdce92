"""Quadrature with positive weights of any order on the triangle and the line."""

from __future__ import annotations

from functools import cache

import numpy as np
from skfem.quadrature import get_quadrature
from skfem.refdom import RefTri

from membrane.records.arrays import Floats
from membrane.triangle import gauss

HIGHEST_TABLE = 19
"""Highest order of scikit-fem's own rules on the triangle."""

NEGATIVE = (3, 7)
"""Orders of scikit-fem whose rules have negative weights; the next one up is used."""


@cache
def triangle_rule(order: int) -> tuple[Floats, Floats]:
    """Points (2, n) and weights (n,), exact for polynomials of that order."""
    if order <= HIGHEST_TABLE:
        points, weights = get_quadrature(RefTri, order + 1 if order in NEGATIVE else order)
        return np.ascontiguousarray(points), weights
    return _collapsed(order // 2 + 1)


def _collapsed(n: int) -> tuple[Floats, Floats]:
    """Gauss-Jacobi rule on the square, collapsed onto the triangle; exact to order 2n - 1."""
    x, x_weights = gauss(n, 0, 0)
    y, y_weights = gauss(n, 1, 0)
    x, y = (1 + x) / 2, (1 + y) / 2
    points = np.stack([np.outer(x, 1 - y), np.outer(np.ones(n), y)]).reshape(2, -1)
    return points, np.outer(x_weights, y_weights).ravel() / 8


@cache
def line_rule(order: int) -> tuple[Floats, Floats]:
    """Points (1, n) and weights (n,) on [0, 1], exact for polynomials of that order."""
    x, weights = gauss(order // 2 + 1, 0, 0)
    return (1 + x[None]) / 2, weights / 2
