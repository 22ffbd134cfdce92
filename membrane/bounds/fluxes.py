"""The best fluxes in a Raviart-Thomas space, from which the sharp lower bounds follow.

For each function u the flux s minimises

    integral of T^-1 s . s + (rho u + div s)^2 / k + along springs (s . n)^2 / beta,

k = gamma rho + kappa, with no flux across free edges. With p = (rho u + div s)/k that is

    (T^-1 s, t) + (p, div t) + springs + m across sides = 0,   (div s, q) - (k p, q) = -(rho u, q)

in each triangle by itself, where the multipliers m make the fluxes of neighbours agree: they are
all that is left to one sparse system (D. N. Arnold & F. Brezzi, RAIRO M2AN 19 (1985) 7, from
memory). Nothing is divided by k, so that the smallest layers at a corner lose no digits. A flux
that is not quite the best costs width, never validity.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np
from scipy.sparse import csc_array

from membrane.bounds.flux_matrices import (
    compliances,
    divergence_matrix,
    load_products,
    spreads,
    spring_matrices,
)
from membrane.bounds.head import Head
from membrane.bounds.pieces import Piece, pieces
from membrane.bounds.rims import rims
from membrane.cholesky import factorised
from membrane.records.arrays import Floats, Ints
from membrane.records.pencil import Space


@dataclass(frozen=True)
class _Solved:
    """Some triangles, each solved by itself.

    triangles : (n,)
    driven : (n, i, m), the fluxes with no multipliers
    answers : (n, i, 3k), the fluxes for a unit of each multiplier
    """

    triangles: Ints
    driven: Floats
    answers: Floats


def best_fluxes(head: Head, space: Space, vectors: Floats, degree: int, gamma: float) -> Floats:
    """(i, n_triangles, n): local fluxes of a degree for the functions ``vectors``."""
    springs = _springs(head, degree)
    parts = [
        _solved(head, space, vectors, piece, degree, gamma, springs[piece.triangles])
        for whole in pieces(head, 2 * degree, extra=0)
        for piece in whole.parts(10 * degree**2)
    ]
    numbers, signs = _sides(head, degree)
    multipliers = _multipliers(head, degree, parts, numbers, signs)
    local = np.empty((degree * (degree + 2), head.mesh.size, vectors.shape[1]))
    for part in parts:
        some = part.triangles
        across = signs[:, some].T[..., None] * multipliers[numbers[:, some].T]
        local[:, some] = np.swapaxes(part.driven - part.answers @ across, 0, 1)
    return _agreed(head, degree, local, numbers)


def _solved(
    head: Head,
    space: Space,
    vectors: Floats,
    piece: Piece,
    degree: int,
    gamma: float,
    springs: Floats,
) -> _Solved:
    some, edges = piece.triangles, 3 * degree
    divergence = divergence_matrix(degree)
    pressures, fluxes = divergence.shape
    spread = spreads(piece, degree)
    k = (gamma * head.density + head.bedding)[some, None, None]
    system = np.zeros((some.size, fluxes + pressures, fluxes + pressures))
    system[:, :fluxes, :fluxes] = compliances(head, piece, degree)
    system[:, :edges, :edges] += springs
    system[:, fluxes:, :fluxes] = divergence
    system[:, :fluxes, fluxes:] = divergence.T
    system[:, fluxes:, fluxes:] = -k * spread
    functions = vectors[space.element_dofs[:, some]]
    loads = np.tensordot(load_products(degree, space.degree), functions, axes=1)
    share = (head.turning * head.density)[some, None, None]
    right = np.zeros((some.size, fluxes + pressures, edges + vectors.shape[1]))
    right[:, :edges, :edges] = np.eye(edges)
    right[:, fluxes:, edges:] = -share * (spread @ np.swapaxes(loads, 0, 1))
    found = np.linalg.solve(system, right)[:, :fluxes]
    return _Solved(some, found[:, :, edges:], found[:, :, :edges])


def _springs(head: Head, degree: int) -> Floats:
    """(n_triangles, 3k, 3k): what sprung sides add to the triangles' matrices."""
    found = np.zeros((head.mesh.size, 3 * degree, 3 * degree))
    for rim in rims(head, 2 * degree):
        own = slice(rim.edge * degree, (rim.edge + 1) * degree)
        found[rim.triangles, own, own] += spring_matrices(rim, degree)
    return found


def _sides(head: Head, degree: int) -> tuple[Ints, Floats]:
    """Numbers of the fluxes across each triangle's sides, (3k, n_triangles), and their signs:
    1 in one of the triangles beside a side, -1 in the other."""
    facets = head.facets.of_triangle
    _, first = np.unique(facets, return_index=True)
    signs = np.full(facets.size, -1.0)
    signs[first] = 1.0
    numbers = facets[:, None] * degree + np.arange(degree)[:, None]
    return numbers.reshape(3 * degree, -1), np.repeat(signs.reshape(facets.shape), degree, axis=0)


def _multipliers(
    head: Head, degree: int, parts: list[_Solved], numbers: Ints, signs: Floats
) -> Floats:
    """(n_facets k, m): what makes neighbours agree, and free edges bear no flux."""
    total, width = head.facets.size * degree, parts[0].driven.shape[2]
    gaps = np.zeros((total, width))
    for part in parts:
        turned = signs[:, part.triangles].T[..., None] * part.driven[:, : 3 * degree]
        np.add.at(gaps, numbers[:, part.triangles].T, turned)
    entries = zip(*_entries(degree, parts, numbers, signs), strict=True)
    rows, columns, data = (np.concatenate(each) for each in entries)
    held = np.repeat(~head.border | head.free, degree)
    system = csc_array((data, (rows, columns)), shape=(total, total))[held][:, held]
    found = np.zeros((total, width))
    found[held] = factorised(system)(gaps[held])
    return found


def _entries(
    degree: int, parts: list[_Solved], numbers: Ints, signs: Floats
) -> Iterator[tuple[Ints, Ints, Floats]]:
    for part in parts:
        dofs, sign = numbers[:, part.triangles].T, signs[:, part.triangles].T
        rows, columns = np.broadcast_arrays(dofs[:, :, None], dofs[:, None, :])
        block = sign[:, :, None] * part.answers[:, : 3 * degree] * sign[:, None, :]
        yield rows.ravel(), columns.ravel(), block.ravel()


def _agreed(head: Head, degree: int, local: Floats, numbers: Ints) -> Floats:
    """The same, neighbours made to agree and free edges to bear nothing to the last digit."""
    edges = 3 * degree
    total = np.zeros((head.facets.size * degree, local.shape[2]))
    np.add.at(total, numbers, local[:edges])
    beside = np.bincount(numbers.ravel(), minlength=total.shape[0])
    mean = total / beside[:, None]
    mean[np.repeat(head.free, degree)] = 0.0
    local[:edges] = mean[numbers]
    return local
