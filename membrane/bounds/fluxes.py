"""The best fluxes in a Raviart-Thomas space, from which the sharp lower bounds follow.

For each function u the flux s minimises

    integral of T^-1 s . s + (rho u + div s)^2 / k + along springs (s . n)^2 / beta,

k = gamma rho + kappa, with no flux across free edges. What lies within a triangle is solved
for there, so that only the fluxes across sides are left to one sparse system. A flux that is
not quite the best costs width, never validity.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np
from scipy.sparse import csc_array

from membrane.bounds.flux_matrices import flux_matrices, load_products, spring_matrices
from membrane.bounds.head import Head
from membrane.bounds.pieces import Piece, pieces
from membrane.bounds.rims import rims
from membrane.cholesky import factorised
from membrane.records.arrays import Floats, Ints
from membrane.records.pencil import Space


@dataclass(frozen=True)
class _Condensed:
    """Some triangles with what lies within them solved for.

    sides, loads : (n, 3k, 3k) and (n, 3k, m), left to the sides
    within : (n, k(k-1), 3k + m); a triangle's inner part is its last m columns less the first
        3k times the fluxes across its sides
    """

    triangles: Ints
    sides: Floats
    loads: Floats
    within: Floats


def best_fluxes(head: Head, space: Space, vectors: Floats, degree: int, gamma: float) -> Floats:
    """(n_shapes, n_triangles, n): local fluxes of a degree for the functions ``vectors``."""
    stiff = gamma * head.density + head.bedding
    parts = [
        _condensed(head, space, vectors, piece, degree, stiff)
        for whole in pieces(head, 2 * degree, extra=0)
        for piece in whole.parts(10 * degree**2)
    ]
    numbers = _numbers(head, degree)
    across = _solved(head, degree, parts, numbers)
    edges = 3 * degree
    local = np.empty((degree * (degree + 2), head.mesh.size, vectors.shape[1]))
    for part in parts:
        sides = across[numbers[:, part.triangles].T]
        inner = part.within[:, :, edges:] - part.within[:, :, :edges] @ sides
        local[:, part.triangles] = np.swapaxes(np.concatenate([sides, inner], axis=1), 0, 1)
    return local


def _condensed(
    head: Head, space: Space, vectors: Floats, piece: Piece, degree: int, stiff: Floats
) -> _Condensed:
    some, edges = piece.triangles, 3 * degree
    matrices = flux_matrices(head, piece, degree, stiff)
    share = -(head.turning * head.density / stiff)[some]
    functions = vectors[space.element_dofs[:, some]]
    loads = np.tensordot(load_products(degree, space.degree), functions, axes=1)
    loads = share[:, None, None] * np.swapaxes(loads, 0, 1)
    coupling = matrices[:, edges:, :edges]
    right = np.concatenate([coupling, loads[:, edges:]], axis=2)
    within = np.linalg.solve(matrices[:, edges:, edges:], right)
    taken = np.swapaxes(coupling, 1, 2) @ within
    return _Condensed(
        some,
        matrices[:, :edges, :edges] - taken[:, :, :edges],
        loads[:, :edges] - taken[:, :, edges:],
        within,
    )


def _numbers(head: Head, degree: int) -> Ints:
    """(3k, n_triangles): numbers of the fluxes across each triangle's sides."""
    facets = head.facets.of_triangle
    return np.vstack([facets[edge] * degree + j for edge in range(3) for j in range(degree)])


def _solved(head: Head, degree: int, parts: list[_Condensed], numbers: Ints) -> Floats:
    """(n_facets k, m): the fluxes across all sides; none across free ones."""
    total = head.facets.size * degree
    width = parts[0].loads.shape[2]
    loads = np.zeros((total, width))
    for part in parts:
        np.add.at(loads, numbers[:, part.triangles].T, part.loads)
    entries = zip(*_entries(head, degree, parts, numbers), strict=True)
    rows, columns, data = (np.concatenate(each) for each in entries)
    free = head.border & ~head.fixed & (head.spring == 0.0)
    kept = np.repeat(~free, degree)
    H = csc_array((data, (rows, columns)), shape=(total, total))[kept][:, kept]
    across = np.zeros((total, width))
    across[kept] = factorised(H)(loads[kept])
    return across


def _entries(
    head: Head, degree: int, parts: list[_Condensed], numbers: Ints
) -> Iterator[tuple[Ints, Ints, Floats]]:
    """Rows, columns and entries of the system that is left to the sides."""
    blocks = [(numbers[:, part.triangles].T, part.sides) for part in parts]
    for rim in rims(head, 2 * degree):
        facets = head.facets.of_triangle[rim.edge, rim.triangles]
        dofs = facets[:, None] * degree + np.arange(degree)
        blocks.append((dofs, spring_matrices(rim, degree)))
    for dofs, block in blocks:
        rows, columns = np.broadcast_arrays(dofs[:, :, None], dofs[:, None, :])
        yield rows.ravel(), columns.ravel(), block.ravel()
