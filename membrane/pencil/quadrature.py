"""Quadrature with positive weights of any order on the triangle and the line."""

from __future__ import annotations

from functools import cache

import numpy as np
from skfem.quadrature import get_quadrature
from skfem.refdom import RefTri

from membrane.records.arrays import Floats
from membrane.triangle import collapsed_rule, gauss

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
    return collapsed_rule(order)


@cache
def line_rule(order: int) -> tuple[Floats, Floats]:
    """Points (1, n) and weights (n,) on [0, 1], exact for polynomials of that order."""
    x, weights = gauss(order // 2 + 1, 0, 0)
    return (1 + x[None]) / 2, weights / 2
