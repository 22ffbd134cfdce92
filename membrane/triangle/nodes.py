"""Interpolation nodes on the reference triangle, good at any degree."""

from __future__ import annotations

from functools import cache

import numpy as np

from membrane.records.arrays import Floats
from membrane.triangle.jacobi import gauss

EDGES = ((0, 1), (1, 2), (0, 2))
"""Local vertices of each edge, the lower first."""


@cache
def lobatto(degree: int) -> Floats:
    """(degree + 1,) Gauss-Lobatto points on [0, 1]."""
    inner = gauss(degree - 1, 1, 1)[0] if degree > 1 else np.empty(0)
    return np.concatenate([[0.0], (1 + inner) / 2, [1.0]])


@cache
def nodes(degree: int) -> Floats:
    """(2, n) nodes of a degree: vertices, edges 0-1, 1-2, 0-2, interior.

    T. Isaac, SIAM J. Sci. Comput. 42 (2020) A4046, "Recursive, parameter-free, explicitly
    defined interpolation nodes for simplices" (volume and page from memory).
    """
    corners = np.array([[0.0, 1.0, 0.0], [0.0, 0.0, 1.0]])
    inner = lobatto(degree)[1:-1]
    edges = [corners[:, [a]] * (1 - inner) + corners[:, [b]] * inner for a, b in EDGES]
    interior = [
        _recursive((degree - i - j, i, j)) for j in range(1, degree) for i in range(1, degree - j)
    ]
    return np.hstack([corners, *edges, np.reshape(interior, (-1, 2)).T])


def _recursive(index: tuple[int, int, int]) -> Floats:
    """(x, y) of the node with that barycentric index: a mean over the three edges."""
    degree = sum(index)
    total, weights = np.zeros(3), 0.0
    for left_out in range(3):
        weight = lobatto(degree)[degree - index[left_out]]
        line = lobatto(degree - index[left_out])
        for kept in range(3):
            if kept != left_out:
                total[kept] += weight * line[index[kept]]
        weights += weight
    return np.asarray(total[1:] / weights, dtype=float)
