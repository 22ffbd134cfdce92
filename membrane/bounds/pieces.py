"""Triangles with the points, weights and slopes of their maps that integrals over them need.

On a curved triangle the stiffness is a polynomial f >= 0 over the jacobian J, and no rule
integrates it exactly. Let r be a polynomial of degree m with |1 - r J| <= d < 1 all over the
triangle, and Q a rule with positive weights that is exact to the degree of f plus m. Then

    integral f/J <= integral f r / (1 - d) = Q(f r) / (1 - d) <= Q(f/J) (1 + d) / (1 - d),

and from below in the same way. So a rule's quadratic form is right to within the factor
(1 + d) / (1 - d) for every function at once, whatever its shape.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from functools import cache

import numpy as np

from membrane.bounds.head import Head
from membrane.records.arrays import Floats, Ints
from membrane.records.mesh import Mesh
from membrane.triangle import collapsed_rule, shapes
from membrane.triangle.polynomials import orthonormal

EXTRA = 16
"""Degree m that curved triangles are given beyond that of the integrand's numerator."""

CHUNK = 400_000
"""Numbers worked on at once: points of triangles times functions."""


@dataclass(frozen=True)
class Piece:
    """Some triangles, all with the same points of the reference triangle.

    triangles : (n,), their numbers
    points : (2, m)
    weights : (m,), of the reference triangle
    slope : (2, 2, n, m or 1), dx_d / dX_k
    jacobian : (n, m or 1), the determinant, negative where the vertices run clockwise
    doubt : (n,), how far a form that is rational there may be off, relative; 0 on straight ones
    """

    triangles: Ints
    points: Floats
    weights: Floats
    slope: Floats
    jacobian: Floats
    doubt: Floats

    @property
    def areas(self) -> Floats:
        """(n, m), weights in square metres."""
        return np.asarray(self.weights * np.abs(self.jacobian))

    @property
    def inverse(self) -> Floats:
        """(2, 2, n, m or 1), dX_k / dx_d."""
        (a, b), (c, d) = self.slope
        return np.asarray(np.array([[d, -b], [-c, a]]) / self.jacobian)

    def parts(self, functions: int) -> Iterator[Piece]:
        """The same in parts of some triangles each, for that many functions."""
        step = max(1, CHUNK // (self.weights.size * functions))
        for start in range(0, self.triangles.size, step):
            some = slice(start, start + step)
            yield Piece(
                self.triangles[some],
                self.points,
                self.weights,
                self.slope[:, :, some],
                self.jacobian[some],
                self.doubt[some],
            )


def pieces(head: Head, degree: int, extra: int = EXTRA) -> list[Piece]:
    """The head in straight and in curved triangles.

    degree : of the integrands' numerators on the reference triangle; curved triangles add
        that of the geometry
    extra : degree m that curved triangles add for the denominator; 0 where no proof hangs on it
    """
    straight, curved = np.nonzero(~head.curved)[0], np.nonzero(head.curved)[0]
    found = []
    if straight.size:
        found.append(_straight(head.mesh, straight, degree))
    if curved.size:
        bend = 2 * (head.mesh.order - 1)
        found.append(_curved(head.mesh, curved, degree + bend + extra, extra))
    return found


def _straight(mesh: Mesh, triangles: Ints, order: int) -> Piece:
    points, weights = collapsed_rule(order)
    a, b, c = (mesh.nodes[:, vertex, triangles] for vertex in range(3))
    slope = np.stack([b - a, c - a], axis=1)[..., None]
    return Piece(triangles, points, weights, slope, _determinant(slope), np.zeros(triangles.size))


def _curved(mesh: Mesh, triangles: Ints, order: int, extra: int) -> Piece:
    points, weights = collapsed_rule(order)
    slope = _slope(mesh, triangles, points)
    jacobian = _determinant(slope)
    off = departure(mesh, triangles, extra) if extra else np.full(triangles.size, np.inf)
    return Piece(triangles, points, weights, slope, jacobian, doubt(off))


def doubt(off: Floats) -> Floats:
    """(1 + d) / (1 - d) - 1; infinite where d is 1 or more."""
    return np.asarray(np.where(off < 1.0, 2 * off / np.maximum(1 - off, 1e-300), np.inf))


def departure(mesh: Mesh, triangles: Ints, degree: int) -> Floats:
    """(n,): the largest |1 - r J| on each of some triangles, r the best polynomial of a degree.

    1 - r J is a polynomial of degree D in each coordinate of the square that the triangle is
    collapsed from, and between 2 D Chebyshev points no polynomial rises above sqrt(2) times
    its largest value there, in each direction: H. Ehlich & K. Zeller, Math. Z. 86 (1964) 41
    (from memory).
    """
    points, weights = collapsed_rule(2 * degree + 4)
    basis, _ = orthonormal(points, degree)
    inverse = 1 / _determinant(_slope(mesh, triangles, points))
    fitted = (inverse * weights) @ basis.T
    dense, polynomials = _dense(degree, 2 * (mesh.order - 1))
    off = np.zeros(triangles.size)
    for some in np.array_split(np.arange(triangles.size), 1 + triangles.size // 20):
        jacobian = _determinant(_slope(mesh, triangles[some], dense))
        off[some] = np.abs(1 - (fitted[some] @ polynomials) * jacobian).max(axis=1)
    return 2 * off


@cache
def _dense(degree: int, bend: int) -> tuple[Floats, Floats]:
    """Chebyshev points of the square, collapsed, and the polynomials of a degree there."""
    count = 2 * (degree + bend)
    x = (1 + np.cos(np.pi * (np.arange(count) + 0.5) / count)) / 2
    s, t = (grid.ravel() for grid in np.meshgrid(x, x))
    points = np.stack([s * (1 - t), t])
    return points, orthonormal(points, degree)[0]


def _slope(mesh: Mesh, triangles: Ints, points: Floats) -> Floats:
    _, slopes = shapes(points, mesh.order)
    return np.asarray(
        np.einsum("dit,kin->dktn", mesh.nodes[:, :, triangles], slopes, optimize=True)
    )


def _determinant(slope: Floats) -> Floats:
    (a, b), (c, d) = slope
    return np.asarray(a * d - b * c)
