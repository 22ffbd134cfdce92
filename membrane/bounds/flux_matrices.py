"""The triangles' matrices of the Raviart-Thomas space, many at once.

A flux s = slope s' / J, s' on the reference triangle, so that

    integral of T^-1 s . t + div s div t / k = integral of s' . M t' + div s' div t' / (k |J|)

over the reference triangle, with M = slope^T T^-1 slope / |J|.
"""

from __future__ import annotations

from functools import cache

import numpy as np
from numpy.polynomial.legendre import legval

from membrane.bounds.head import Head
from membrane.bounds.pieces import Piece
from membrane.bounds.rims import Rim
from membrane.records.arrays import Floats
from membrane.triangle import collapsed_rule, flux_shapes, gauss, shapes


def metric(head: Head, piece: Piece) -> Floats:
    """(2, 2, n, m or 1): M, without the weights."""
    compliance = np.linalg.inv(head.tension[piece.triangles])
    slope = piece.slope
    product = np.einsum("dktm,tde,eltm->kltm", slope, compliance, slope)
    return np.asarray(product / np.abs(piece.jacobian))


def flux_matrices(head: Head, piece: Piece, degree: int, stiff: Floats) -> Floats:
    """(n, i, i) matrices of a piece's triangles. ``stiff`` : k of each triangle of the mesh."""
    M = metric(head, piece)
    spread = 1 / (stiff[piece.triangles, None] * np.abs(piece.jacobian))
    factors = np.stack([M[0, 0], M[0, 1], M[1, 1], spread], axis=1)  # (n, 4, m or 1)
    products = _products(degree, piece.points.tobytes(), piece.weights.tobytes())
    if factors.shape[2] == 1:
        upper = factors[:, :, 0] @ products.sum(axis=1)
    else:
        upper = np.tensordot(factors, products, axes=((1, 2), (0, 1)))
    size = degree * (degree + 2)
    matrices = np.empty((piece.triangles.size, size, size))
    i, j = np.triu_indices(size)
    matrices[:, i, j] = matrices[:, j, i] = upper
    return matrices


@cache
def _products(degree: int, points: bytes, weights: bytes) -> Floats:
    """(4, m, n_pairs): weighted products of shapes that M's entries and the spread multiply."""
    x, w = np.frombuffer(points).reshape(2, -1), np.frombuffer(weights)
    (first, second), divergence = flux_shapes(x, degree)
    i, j = np.triu_indices(divergence.shape[0])
    mixed = first[i] * second[j] + second[i] * first[j]
    each = (first[i] * first[j], mixed, second[i] * second[j], divergence[i] * divergence[j])
    return np.stack([(w * product).T for product in each])


@cache
def load_products(degree: int, of_functions: int) -> Floats:
    """(i, j): integrals of the divergence of flux i times function j, reference triangle."""
    points, weights = collapsed_rule(degree - 1 + of_functions)
    _, divergences = flux_shapes(points, degree)
    return np.asarray((divergences * weights) @ shapes(points, of_functions)[0].T)


def spring_matrices(rim: Rim, degree: int) -> Floats:
    """(n, k, k) matrices of (s . n)(t . n) / beta along the sides of a rim."""
    x, weights = gauss(rim.weights.size, 0, 0)
    crossing = np.stack([(2 * j + 1) * legval(x, np.eye(degree)[j]) for j in range(degree)])
    each = weights / 2 / (rim.spring[:, None] * rim.speed)
    return np.asarray(np.einsum("im,tm,jm->tij", crossing, each, crossing, optimize=True))
