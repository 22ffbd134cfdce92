"""Sharp lower bounds by the method of Lehmann and Goerisch.

N. J. Lehmann, ZAMM 29 (1949) 341; F. Goerisch & H. Haunhorst, ZAMM 65 (1985) 129; with fluxes
T. Vejchodsky, Numer. Methods PDE 34 (2018) 1188 (volumes and pages from memory).

Let A = a + gamma b. A(u, v) is the inner product of (grad u, u, u on lines) and that of v with the
weights T, k = gamma rho + kappa and l = gamma mu + beta. For a flux s with s . n = 0 on free edges,
and [s . n] the sum of what leaves the triangles beside a line or an edge, the triple
w = (T^-1 s, (rho u + div s)/k, (mu u - [s . n])/l) has with that of any v, which vanishes on fixed
edges, the product

    integral of s . grad v + (rho u + div s) v + along lines (mu u - [s . n]) v = b(u, v)

by parts. So with C the inner products of the w, and where lambda_(N+1) > nu, n = nu + gamma,

    (A - n B) x = t (A - 2 n B + n^2 C) x,  t_1 <= ... <= t_N < 0
    gives  lambda_(N+1-i) >= n - n/(1 - t_i) - gamma.

Larger a or C or smaller b, as forms, give lower bounds: since gamma < n both sides' forms then
grow, and where t < 0 the form A - n B - t (A - 2 n B + n^2 C) grows with them, so that fewer t lie
below any limit.
"""

from __future__ import annotations

from collections.abc import Iterable

import numpy as np
from scipy.linalg import eigh

from membrane.bounds.flux_matrices import metric
from membrane.bounds.fluxes import outward
from membrane.bounds.head import Head
from membrane.bounds.pieces import Piece
from membrane.bounds.rims import Rim
from membrane.bounds.ritz import Forms, on_piece, on_rim, quadratic, weighted
from membrane.records.arrays import Floats
from membrane.records.pencil import Space
from membrane.triangle import flux_shapes


def lower_bounds(forms: Forms, c: Floats, nu: float, gamma: float) -> Floats:
    """(n,) lower bounds on the n lowest eigenvalues, rising; 0 where there is none better.

    c : (n, n), the fluxes' own form
    nu : no more than n eigenvalues lie at or below it
    """
    n = nu + gamma
    shifted = forms.a + gamma * forms.b
    near = shifted - n * forms.b
    far = shifted - 2 * n * forms.b + n**2 * c
    t = eigh(near, (far + far.T) / 2, eigvals_only=True)
    found = n - n / (1 - np.minimum(t, 0.0)) - gamma
    return np.maximum(found[::-1], 0.0)


def flux_form(
    head: Head,
    space: Space,
    vectors: Floats,
    fluxes: Floats,
    gamma: float,
    pieces: Iterable[Piece],
    rims: Iterable[Rim],
) -> Floats:
    """(n, n): C of the functions ``vectors`` and their local ``fluxes`` (i, t, n), or above it."""
    stiff = gamma * head.density + head.bedding
    c = np.zeros((vectors.shape[1],) * 2)
    degree = round(np.sqrt(1 + fluxes.shape[0])) - 1
    net = outward(head, fluxes, degree)
    for whole in pieces:
        values, divergences = flux_shapes(whole.points, degree)
        for piece in whole.parts(vectors.shape[1]):
            u, _ = on_piece(piece, space.degree, vectors[space.element_dofs[:, piece.triangles]])
            local = fluxes[:, piece.triangles]
            s = np.stack([_at(value, local) for value in values])
            spread = _at(divergences, local) / piece.jacobian[..., None]
            over_k = piece.areas / stiff[piece.triangles, None]
            doubt = piece.doubt[:, None]
            c += quadratic((1 + doubt) * metric(head, piece) * piece.weights, s)
            c += weighted(doubt * over_k, spread, spread) if doubt.any() else 0.0
            rest = head.density[piece.triangles, None, None] * u + spread
            c += weighted(over_k, rest, rest)
    for rim in rims:
        u = on_rim(rim, space.degree, vectors[space.element_dofs[:, rim.triangles]])
        across = _at(rim.legendre(degree), net[rim.facets * degree + np.arange(degree)[:, None]])
        c += _along(rim, u, across, gamma)
    return c


def _along(rim: Rim, u: Floats, across: Floats, gamma: float) -> Floats:
    """The integral of (mu u - s . n)^2 / (gamma mu + beta) along the sides of a rim.

    u, across : (n_sides, m, n), the functions, and what crosses per unit of the parameter
    """
    per_metre = rim.weights / (rim.stiff(gamma) * rim.speed)
    borne = rim.mass[:, None, None] * u * rim.speed[..., None]
    found = weighted(per_metre, borne - across, borne - across)
    doubted = rim.doubt[:, None] * per_metre
    each = weighted(doubted, borne, borne) + weighted(doubted, across, across)
    return np.asarray(found + each)


def _at(shape: Floats, local: Floats) -> Floats:
    return np.asarray(np.swapaxes(np.tensordot(shape.T, local, axes=1), 0, 1))
