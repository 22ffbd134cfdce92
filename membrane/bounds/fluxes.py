"""The best fluxes in a Raviart-Thomas space, from which the sharp lower bounds follow.

For each function u the flux s minimises

    integral of T^-1 s . s + (rho u + div s)^2 / k + along lines (mu u - [s . n])^2 / l,

k = gamma rho + kappa, l = gamma mu + beta, [s . n] what leaves the triangles beside a line or an
edge, with no flux across free edges. Near c T grad u, c = 1/(lambda + gamma), it is found from
there: with (rho u + div s)/k = c u + p and (mu u - [s . n])/l = c u + m, by parts,

    (T^-1 s, t) + (p, div t) - <m, t . n> = c (grad u, t),
    (div s, q) - (k p, q) = -((rho - c k) u, q)

in each triangle by itself. What is left to one sparse system are the m, where there is no line the
multipliers that make the fluxes of neighbours agree: [s . n] + l m = (mu - c l) u on all sides but
the fixed ones (after D. N. Arnold & F. Brezzi, RAIRO M2AN 19 (1985) 7, from memory). Nothing is
divided by k or l, and p and m are small, so that the smallest layers at a corner lose no digits. A
flux that is not quite the best costs width, never validity.
"""

from __future__ import annotations

from collections.abc import Iterator
from typing import Any

import numpy as np
from scipy.sparse import csc_array

from membrane.bounds.head import Head
from membrane.bounds.local_fluxes import LocalFluxes, Sources, local_fluxes
from membrane.bounds.rims import rims
from membrane.bounds.ritz import on_rim
from membrane.cholesky import factorised
from membrane.records.arrays import Floats, Ints


def best_fluxes(head: Head, sources: Sources, degree: int) -> Floats:
    """(i, n_triangles, n): local fluxes of a degree for the functions of ``sources``."""
    parts = list(local_fluxes(head, sources, degree))
    numbers, signs = _sides(head, degree)
    traces = _traces(head, sources, degree, parts)
    local = np.empty((degree * (degree + 2), head.mesh.size, sources.values.size))
    for part in parts:
        some = part.triangles
        outer = signs[:, some].T[..., None] * traces[numbers[:, some].T]
        local[:, some] = np.swapaxes(part.driven + part.answers @ outer, 0, 1)
    return _agreed(head, degree, local)


def outward(head: Head, fluxes: Floats, degree: int) -> Floats:
    """(n_facets k, n): [s . n] on each side, per unit of its parameter, in Legendre polynomials."""
    numbers, signs = _sides(head, degree)
    net = np.zeros((head.facets.size * degree, fluxes.shape[2]))
    np.add.at(net, numbers, signs[..., None] * fluxes[: 3 * degree])
    order = np.tile(np.arange(degree), head.facets.size)
    return np.asarray((2 * order + 1)[:, None] * net)


def _sides(head: Head, degree: int) -> tuple[Ints, Floats]:
    """Numbers of the fluxes across each triangle's sides, (3k, n_triangles), and their signs:
    1 where a flux that counts as positive leaves the triangle, else -1."""
    numbers = head.facets.of_triangle[:, None] * degree + np.arange(degree)[:, None]
    signs = np.array([[1.0], [1.0], [-1.0]]) * head.turning  # from left to right of the way
    return numbers.reshape(3 * degree, -1), np.repeat(signs, degree, axis=0)


def _traces(head: Head, sources: Sources, degree: int, parts: list[LocalFluxes]) -> Floats:
    """(n_facets k, n): m on each side, in Legendre polynomials; 0 on fixed ones."""
    numbers, signs = _sides(head, degree)
    total = head.facets.size * degree
    right = np.zeros((total, sources.values.size))
    blocks = []
    for part in parts:
        dofs, sign = numbers[:, part.triangles].T, signs[:, part.triangles].T
        np.add.at(right, dofs, -sign[..., None] * part.driven[:, : 3 * degree])
        answers = part.answers[:, : 3 * degree]
        blocks.append((dofs, sign[:, :, None] * answers * sign[:, None, :]))
    for dofs, block, load in _loaded(head, sources, degree):
        np.add.at(right, dofs, load)
        blocks.append((dofs, block))
    held = np.repeat(~head.fixed, degree)
    found = np.zeros_like(right)
    found[held] = factorised(_sparse(blocks, total)[held][:, held])(right[held])
    return found


def _loaded(head: Head, sources: Sources, degree: int) -> Iterator[tuple[Ints, Floats, Floats]]:
    """Of loaded sides the numbers (n, k), the matrices (n, k, k) and the loads (n, k, m).

    With m = (mu/l - c) u - [s . n]/l tested by each polynomial P along the side, and D^-1 the
    integrals of their squares: [s . n] = D W^-1 (integrals of (mu/l - c) u P - D^-1 m), where W
    are the integrals of P P'/l.
    """
    space, c = sources.space, 1 / (sources.values + sources.gamma)
    squares = 1 / (2 * np.arange(degree) + 1)
    for rim in rims(head, 2 * degree):
        P, stiff = rim.legendre(degree), rim.stiff(sources.gamma)
        per_metre = rim.weights / (stiff * rim.speed)
        inverse = np.linalg.inv(np.einsum("im,tm,jm->tij", P, per_metre, P, optimize=True))
        local = sources.vectors[space.element_dofs[:, rim.triangles]]
        u = on_rim(rim, space.degree, local) * (rim.mass[:, None] / stiff - c)[:, None]
        load = inverse @ np.einsum("im,m,tmn->tin", P, rim.weights, u, optimize=True)
        block = squares[:, None] * inverse * squares
        numbers = rim.facets[:, None] * degree + np.arange(degree)
        yield numbers, block, squares[:, None] * load


def _sparse(blocks: list[tuple[Ints, Floats]], total: int) -> Any:
    """The sum of blocks (n, i, i) at their dofs (n, i)."""
    rows = [np.broadcast_to(dofs[:, :, None], block.shape).ravel() for dofs, block in blocks]
    columns = [np.broadcast_to(dofs[:, None, :], block.shape).ravel() for dofs, block in blocks]
    data = np.concatenate([block.ravel() for _, block in blocks])
    places = np.concatenate(rows), np.concatenate(columns)
    return csc_array((data, places), shape=(total, total))


def _agreed(head: Head, degree: int, local: Floats) -> Floats:
    """The same, made to agree across sides without load, and to bear nothing on free edges, to
    the last digit."""
    numbers, _ = _sides(head, degree)
    edges = 3 * degree
    total = np.zeros((head.facets.size * degree, local.shape[2]))
    np.add.at(total, numbers, local[:edges])
    beside = np.bincount(numbers.ravel(), minlength=total.shape[0])
    mean = total / beside[:, None]
    mean[np.repeat(head.free, degree)] = 0.0
    loaded = np.repeat(head.loaded, degree)[numbers]
    local[:edges] = np.where(loaded[..., None], local[:edges], mean[numbers])
    return local
