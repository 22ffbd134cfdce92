"""Loaded sides with the points and lengths that integrals along them need."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np
from numpy.polynomial.legendre import legvander

from membrane.bounds.head import Head
from membrane.bounds.pieces import doubt
from membrane.records.arrays import Floats, Ints
from membrane.triangle import EDGES, gauss, nodes, shapes

EXTRA = 24
"""Degree that bent sides are given beyond that of the integrand."""


@dataclass(frozen=True)
class Rim:
    """Sides with springs or mass that are the same side of a triangle beside each.

    edge : 0, 1 or 2, which side of the triangles
    triangles : (n,), one of the triangles beside each
    facets : (n,)
    spring : (n,), N/m^2
    mass : (n,), kg/m
    places : (m,), the side's parameter, from 0 to 1
    points : (2, m), on the reference triangle
    weights : (m,), of the side's parameter from 0 to 1
    speed : (n, m), metres per unit of the parameter
    doubt : (n,), how far integrals may be off, relative
    """

    edge: int
    triangles: Ints
    facets: Ints
    spring: Floats
    mass: Floats
    places: Floats
    points: Floats
    weights: Floats
    speed: Floats
    doubt: Floats

    def legendre(self, degree: int) -> Floats:
        """(degree, m): the Legendre polynomials below a degree, along the sides."""
        return np.asarray(legvander(2 * self.places - 1, degree - 1).T)

    def stiff(self, gamma: float) -> Floats:
        """(n, 1): gamma mu + beta, N/m^2."""
        return np.asarray((gamma * self.mass + self.spring)[:, None])


def rims(head: Head, degree: int) -> Iterator[Rim]:
    """The loaded sides. ``degree`` : of the integrands along them."""
    bend = EXTRA if head.bent.any() else 0
    x, weights = gauss((degree + bend) // 2 + 1, 0, 0)
    for edge in range(3):
        facets, triangles = head.facets.beside(edge)
        some = head.loaded[facets]
        facets, triangles = facets[some], triangles[some]
        if not triangles.size:
            continue
        places = (1 + x) / 2
        points = _along(edge, places)
        speed = _speed(head, triangles, edge, points)
        off = doubt(_departure(head, triangles, edge))
        loads = head.spring[facets], head.mass[facets]
        yield Rim(edge, triangles, facets, *loads, places, points, weights / 2, speed, off)


def _along(edge: int, s: Floats) -> Floats:
    """(2, n) points of a side of the reference triangle at its parameters."""
    low, high = (nodes(1)[:, [vertex]] for vertex in EDGES[edge])
    return np.asarray(low + (high - low) * s)


def _speed(head: Head, triangles: Ints, edge: int, points: Floats) -> Floats:
    _, slopes = shapes(points, head.mesh.order)
    low, high = (nodes(1)[:, vertex] for vertex in EDGES[edge])
    along = np.tensordot(high - low, slopes, axes=1)
    return np.asarray(np.hypot(*np.einsum("dit,in->dtn", head.mesh.nodes[:, :, triangles], along)))


def _departure(head: Head, triangles: Ints, edge: int) -> Floats:
    """(n,): how far polynomials of degree ``EXTRA`` miss sides' speeds and inverses, relative.

    If r follows the speed v to within d, so does a rule that is exact to the degree of an
    integrand f >= 0 plus that of r with f v, as over triangles; and f / v likewise. The two are
    looked at between the nodes of r, where they are analytic and their ends are known.
    """
    count = EXTRA + 1
    x = np.cos(np.pi * (np.arange(count) + 0.5) / count)
    dense = np.cos(np.pi * (np.arange(4 * count) + 0.5) / (4 * count))
    basis, there = (np.polynomial.chebyshev.chebvander(at, EXTRA) for at in (x, dense))
    speed = _speed(head, triangles, edge, _along(edge, (1 + x) / 2))
    exact = _speed(head, triangles, edge, _along(edge, (1 + dense) / 2))
    off = np.zeros(triangles.size)
    for power in (1, -1):
        fitted = np.linalg.solve(basis, (speed**power).T)
        off = np.maximum(off, np.abs(1 - there @ fitted / exact.T**power).max(axis=0))
    return 2 * off
