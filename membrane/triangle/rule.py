"""Quadrature of any order on the reference triangle."""

from __future__ import annotations

from functools import cache

import numpy as np

from membrane.records.arrays import Floats
from membrane.triangle.jacobi import gauss


@cache
def collapsed_rule(order: int) -> tuple[Floats, Floats]:
    """Points (2, n) and positive weights (n,), exact for polynomials of that order.

    The Gauss-Jacobi rule of the square, collapsed onto the triangle.
    """
    n = order // 2 + 1
    x, x_weights = gauss(n, 0, 0)
    y, y_weights = gauss(n, 1, 0)
    x, y = (1 + x) / 2, (1 + y) / 2
    points = np.stack([np.outer(x, 1 - y), np.outer(np.ones(n), y)]).reshape(2, -1)
    return points, np.outer(x_weights, y_weights).ravel() / 8
