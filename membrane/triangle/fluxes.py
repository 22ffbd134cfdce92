"""Raviart-Thomas shapes of any degree on the reference triangle."""

from __future__ import annotations

from functools import cache

import numpy as np
from numpy.polynomial.legendre import legvander

from membrane.records.arrays import Floats
from membrane.triangle.jacobi import gauss
from membrane.triangle.nodes import EDGES, nodes
from membrane.triangle.polynomials import orthonormal


def flux_shapes(points: Floats, degree: int) -> tuple[Floats, Floats]:
    """Fluxes of a degree k from 1: k on each edge 0-1, 1-2 and 0-2, then k (k - 1) within.

    They span [P_(k-1)]^2 + x P_(k-1): P. A. Raviart & J. M. Thomas, Lecture Notes in
    Mathematics 606 (1977) 292 (from memory). Shape j of an edge alone has the moment 1
    against the Legendre polynomial P_j of its flux across the edge, from left to right of the
    way from the lower to the higher vertex; those within cross no edge.

    points : (2, n) on the reference triangle
    returns : values (2, n_shapes, n) and divergences (n_shapes, n)
    """
    values, divergences = _plain(points, degree)
    combine = _to_moments(degree)
    return combine @ values, combine @ divergences


def across(edge: int) -> Floats:
    """(2,): what a flux is multiplied by to give what crosses an edge per unit of its parameter."""
    low, high = EDGES[edge]
    along = nodes(1)[:, high] - nodes(1)[:, low]
    return np.array([along[1], -along[0]])


def _plain(points: Floats, degree: int) -> tuple[Floats, Floats]:
    """(p, 0), (0, p) for all p of P_(k-1), and x q for those q of degree k - 1."""
    p, slopes = orthonormal(points, degree - 1)
    q, q_slopes = p[_top(degree - 1)], slopes[:, _top(degree - 1)]
    none = np.zeros_like(p)
    values = np.stack([np.vstack([p, none, points[0] * q]), np.vstack([none, p, points[1] * q])])
    radial = 2 * q + points[0] * q_slopes[0] + points[1] * q_slopes[1]
    return values, np.vstack([slopes[0], slopes[1], radial])


def _top(degree: int) -> list[int]:
    """Places, in ``orthonormal``, of the polynomials of that very degree."""
    total = [i + j for i in range(degree + 1) for j in range(degree + 1 - i)]
    return [place for place, sum_ in enumerate(total) if sum_ == degree]


@cache
def _to_moments(degree: int) -> Floats:
    rows = [_edge_moments(edge, degree) for edge in range(3)]
    if degree > 1:
        rows.append(_inner_moments(degree))
    return np.asarray(np.linalg.inv(np.vstack(rows)).T, dtype=float)


def _edge_moments(edge: int, degree: int) -> Floats:
    """(k, n_shapes): integrals of the flux across an edge times each Legendre polynomial."""
    x, weights = gauss(degree + 1, 0, 0)
    low, high = (nodes(1)[:, [vertex]] for vertex in EDGES[edge])
    values, _ = _plain(low + (high - low) * (1 + x) / 2, degree)
    crossing = np.tensordot(across(edge), values, axes=1)
    return np.asarray((legvander(x, degree - 1).T * weights / 2) @ crossing.T)


def _inner_moments(degree: int) -> Floats:
    """(k (k - 1), n_shapes): integrals times (p, 0) and (0, p) for all p of P_(k-2)."""
    x, weights = gauss(degree + 1, 0, 0)
    s, t = (grid.ravel() for grid in np.meshgrid((1 + x) / 2, (1 + x) / 2))
    points = np.stack([s * (1 - t), t])
    area = np.outer(weights, weights).ravel() / 4 * (1 - t)
    values, _ = _plain(points, degree)
    tests, _ = orthonormal(points, degree - 2)
    return np.vstack([(tests * area) @ component.T for component in values])
