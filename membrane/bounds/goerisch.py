"""Sharp lower bounds by the method of Lehmann and Goerisch.

N. J. Lehmann, ZAMM 29 (1949) 341; F. Goerisch & H. Haunhorst, ZAMM 65 (1985) 129; with fluxes
T. Vejchodsky, Numer. Methods PDE 34 (2018) 1188 (volumes and pages from memory).

Let A = a + gamma b. A(u, v) is the inner product of (grad u, u, u on springs) and that of v with
the weights T, k = gamma rho + kappa and beta. For a flux s with s . n = 0 on free edges the
triple w = (T^-1 s, (rho u + div s)/k, -s . n/beta) has with that of any v, which vanishes on
fixed edges, the product

    integral of s . grad v + (rho u + div s) v - along springs s . n v = b(u, v)

by parts. So with C the inner products of the w, and where lambda_(N+1) > nu, n = nu + gamma,

    (A - n B) x = t (A - 2 n B + n^2 C) x,  t_1 <= ... <= t_N < 0
    gives  lambda_(N+1-i) >= n - n/(1 - t_i) - gamma.

Larger A or C, as forms, give lower bounds: then both sides' forms grow, and where t < 0 the
form A - n B - t (A - 2 n B + n^2 C) grows with them, so that fewer t lie below any limit.
"""

from __future__ import annotations

from collections.abc import Iterable

import numpy as np
from scipy.linalg import eigh

from membrane.bounds.flux_matrices import metric
from membrane.bounds.head import Head
from membrane.bounds.pieces import Piece
from membrane.bounds.rims import Rim
from membrane.bounds.ritz import Forms, on_piece, quadratic, weighted
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
    for whole in pieces:
        values, divergences = flux_shapes(whole.points, degree)
        for piece in whole.parts(vectors.shape[1]):
            u, _ = on_piece(piece, space.degree, vectors[space.element_dofs[:, piece.triangles]])
            local = fluxes[:, piece.triangles]
            s = np.stack([_at(value, local) for value in values])
            spread = _at(divergences, local) / piece.jacobian[..., None]
            over_k = piece.areas / stiff[piece.triangles, None]
            c += (1 + piece.doubt) * quadratic(metric(head, piece) * piece.weights, s)
            c += piece.doubt * weighted(over_k, spread, spread) if piece.doubt else 0.0
            rest = head.density[piece.triangles, None, None] * u + spread
            c += weighted(over_k, rest, rest)
    for rim in rims:
        crossing = _crossing(rim, degree, fluxes)
        each = rim.weights / (rim.spring[:, None] * rim.speed)
        c += (1 + rim.doubt) * weighted(each, crossing, crossing)
    return c


def _at(shape: Floats, local: Floats) -> Floats:
    return np.asarray(np.swapaxes(np.tensordot(shape.T, local, axes=1), 0, 1))


def _crossing(rim: Rim, degree: int, fluxes: Floats) -> Floats:
    """(n_triangles, m, n): what crosses sprung sides, per unit of their parameter."""
    from membrane.triangle import across

    values, _ = flux_shapes(rim.points, degree)
    return _at(np.tensordot(across(rim.edge), values, axes=1), fluxes[:, rim.triangles])
