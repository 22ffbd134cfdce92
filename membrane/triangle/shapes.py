"""Nodal shape functions on the reference triangle."""

from __future__ import annotations

from functools import cache

import numpy as np

from membrane.records.arrays import Floats
from membrane.triangle.nodes import nodes
from membrane.triangle.polynomials import orthonormal


def shapes(points: Floats, degree: int) -> tuple[Floats, Floats]:
    """Shape functions that are 1 at one node of ``nodes(degree)`` and 0 at the others.

    points : (2, n) on the reference triangle
    returns : values (n_nodes, n) and slopes (2, n_nodes, n)
    """
    values, slopes = orthonormal(points, degree)
    combine = _to_nodal(degree)
    return combine @ values, combine @ slopes


@cache
def _to_nodal(degree: int) -> Floats:
    values, _ = orthonormal(nodes(degree), degree)
    return np.asarray(np.linalg.inv(values), dtype=float)
