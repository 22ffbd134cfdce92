"""The triangles' matrices of the Raviart-Thomas space, many at once.

A flux s = slope s' / J, s' on the reference triangle, so that

    integral of T^-1 s . t = integral of s' . M t',  M = slope^T T^-1 slope / |J|,

over the reference triangle, and div s = div s' / J. What is tested by q on the reference triangle
stands for q / J on the head.
"""

from __future__ import annotations

from functools import cache

import numpy as np

from membrane.bounds.head import Head
from membrane.bounds.pieces import Piece
from membrane.records.arrays import Floats
from membrane.triangle import collapsed_rule, flux_shapes, shapes
from membrane.triangle.polynomials import orthonormal


def metric(head: Head, piece: Piece) -> Floats:
    """(2, 2, n, m or 1): M, without the weights."""
    compliance = np.linalg.inv(head.tension[piece.triangles])
    slope = piece.slope
    product = np.einsum("dktm,tde,eltm->kltm", slope, compliance, slope)
    return np.asarray(product / np.abs(piece.jacobian))


def compliances(head: Head, piece: Piece, degree: int) -> Floats:
    """(n, i, i): integrals of T^-1 s . t over a piece's triangles."""
    M = metric(head, piece)
    factors = np.stack([M[0, 0], M[0, 1], M[1, 1]], axis=1)  # (n, 3, m or 1)
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
    """(3, m, n_pairs): weighted products of shapes that M's entries multiply."""
    x, w = np.frombuffer(points).reshape(2, -1), np.frombuffer(weights)
    (first, second), _ = flux_shapes(x, degree)
    i, j = np.triu_indices(first.shape[0])
    mixed = first[i] * second[j] + second[i] * first[j]
    return np.stack(
        [(w * product).T for product in (first[i] * first[j], mixed, second[i] * second[j])]
    )


def spreads(piece: Piece, degree: int) -> Floats:
    """(n, j, j): inverses of the integrals of q q' / |J|, the q of ``divergence_matrix``."""
    q, _ = orthonormal(piece.points, degree - 1)
    if piece.jacobian.shape[1] == 1:
        return np.asarray(np.abs(piece.jacobian)[..., None] * np.eye(q.shape[0]))
    weights = piece.weights / np.abs(piece.jacobian)
    return np.asarray(np.linalg.inv(np.einsum("im,tm,jm->tij", q, weights, q, optimize=True)))


@cache
def divergence_matrix(degree: int) -> Floats:
    """(j, i): the divergences of the shapes on the reference triangle in orthonormal q."""
    points, weights = collapsed_rule(2 * degree)
    q, _ = orthonormal(points, degree - 1)
    _, divergences = flux_shapes(points, degree)
    return np.asarray((q * weights) @ divergences.T)


@cache
def load_products(degree: int, of_functions: int) -> Floats:
    """(j, i): integrals of q times the functions' shapes on the reference triangle."""
    points, weights = collapsed_rule(degree - 1 + of_functions)
    q, _ = orthonormal(points, degree - 1)
    return np.asarray((q * weights) @ shapes(points, of_functions)[0].T)


@cache
def driving_products(degree: int, of_functions: int) -> Floats:
    """(i, j): integrals of the fluxes times the slopes of the functions' shapes, likewise."""
    points, weights = collapsed_rule(degree + of_functions - 1)
    values, _ = flux_shapes(points, degree)
    _, slopes = shapes(points, of_functions)
    return np.asarray(sum((values[k] * weights) @ slopes[k].T for k in range(2)))
