"""Rayleigh-Ritz: eigenvalues in the span of some functions, each at least the exact one.

With a(u, v) = integral of T grad u . grad v + kappa u v + the springs' beta u v, and
b(u, v) = integral of rho u v + the lines' mu u v, N independent functions that vanish on the
fixed edges give L_1 <= ... <= L_N with L_k >= lambda_k: the min-max principle. Nothing need be
known of how the functions were come by. A form above a, or below b, gives larger values still.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass

import numpy as np
from scipy.linalg import eigh

from membrane.bounds.head import Head
from membrane.bounds.pieces import Piece
from membrane.bounds.rims import Rim
from membrane.records.arrays import Floats
from membrane.records.pencil import Space
from membrane.triangle import shapes


@dataclass(frozen=True)
class Forms:
    """Matrices (n, n) of some functions.

    a : of the energy, or of a form above it
    b : of the mass, or of a form below it
    """

    a: Floats
    b: Floats

    @property
    def values(self) -> Floats:
        """(n,), upper bounds on the lowest eigenvalues, rising."""
        return np.asarray(eigh(self.a, self.b, eigvals_only=True))


def forms(
    head: Head, space: Space, vectors: Floats, pieces: Iterable[Piece], rims: Iterable[Rim]
) -> Forms:
    """The matrices of the functions ``vectors`` (n_dofs, n)."""
    a = np.zeros((vectors.shape[1],) * 2)
    b = np.zeros_like(a)
    for whole in pieces:
        for piece in whole.parts(vectors.shape[1]):
            local = vectors[space.element_dofs[:, piece.triangles]]
            u, slopes = on_piece(piece, space.degree, local)
            a += _stiffness(head, piece, slopes)
            a += weighted(head.bedding[piece.triangles, None] * piece.areas, u, u)
            b += weighted(head.density[piece.triangles, None] * piece.areas, u, u)
    for rim in rims:
        u = on_rim(rim, space.degree, vectors[space.element_dofs[:, rim.triangles]])
        length = rim.speed * rim.weights
        doubt = rim.doubt[:, None]
        a += weighted((1 + doubt) * rim.spring[:, None] * length, u, u)
        b += weighted(rim.mass[:, None] * length / (1 + doubt), u, u)
    return Forms((a + a.T) / 2, (b + b.T) / 2)


def on_piece(piece: Piece, degree: int, local: Floats) -> tuple[Floats, Floats]:
    """Values (n_triangles, m, n) and reference slopes (2, ...) from ``local`` (i, t, n)."""
    values, slopes = shapes(piece.points, degree)
    return _combined(values, local), np.stack([_combined(slope, local) for slope in slopes])


def on_rim(rim: Rim, degree: int, local: Floats) -> Floats:
    """Values (n_triangles, m, n) along sides from ``local`` (i, t, n)."""
    return _combined(shapes(rim.points, degree)[0], local)


def _combined(shape: Floats, local: Floats) -> Floats:
    return np.asarray(np.swapaxes(np.tensordot(shape.T, local, axes=1), 0, 1))


def weighted(weights: Floats, f: Floats, g: Floats) -> Floats:
    """(n, n): the sum over triangles and points of weights x f x g."""
    n = f.shape[-1]
    scaled = (np.broadcast_to(weights, f.shape[:2])[..., None] * f).reshape(-1, n)
    return np.asarray(scaled.T @ g.reshape(-1, n))


def _stiffness(head: Head, piece: Piece, slopes: Floats) -> Floats:
    """Integral of T grad u . grad v, or above; grad u = slope^-T x reference slopes."""
    inverse = piece.inverse
    T = head.tension[piece.triangles]
    metric = np.einsum("kdtm,tde,letm->kltm", inverse, T, inverse) * piece.areas
    return quadratic((1 + piece.doubt[:, None]) * metric, slopes)


def quadratic(metric: Floats, fields: Floats) -> Floats:
    """(n, n): the sum over triangles and points of fields . metric (2, 2, ...) fields."""
    cross = weighted(metric[0, 1], fields[0], fields[1])
    own = [weighted(metric[k, k], fields[k], fields[k]) for k in (0, 1)]
    return np.asarray(own[0] + own[1] + cross + cross.T)
