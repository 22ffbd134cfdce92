"""The best fluxes in a Raviart-Thomas space, from which the sharp lower bounds follow.

For each function u the flux s minimises

    integral of T^-1 s . s + (rho u + div s)^2 / k + along springs (s . n)^2 / beta,

k = gamma rho + kappa, with no flux across free edges. Near c T grad u, c = 1/(lambda + gamma), it
is found from there: with (rho u + div s)/k = c u + p, by parts,

    (T^-1 s, t) + (p, div t) + <m, t . n> = c (grad u, t),
    (div s, q) - (k p, q) = -((rho - c k) u, q)

in each triangle by itself; on sprung sides <s . n/beta + c u, t . n> stands for <m, t . n>. The
multipliers m make the fluxes of neighbours agree, and they are all that is left to one sparse
system (D. N. Arnold & F. Brezzi, RAIRO M2AN 19 (1985) 7, from memory). Nothing is divided by k, and
p and m are small, so that the smallest layers at a corner lose no digits. A flux that is not
quite the best costs width, never validity.
"""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np
from scipy.sparse import csc_array

from membrane.bounds.head import Head
from membrane.bounds.local_fluxes import LocalFluxes, Sources, local_fluxes
from membrane.cholesky import factorised
from membrane.records.arrays import Floats, Ints


def best_fluxes(head: Head, sources: Sources, degree: int) -> Floats:
    """(i, n_triangles, n): local fluxes of a degree for the functions of ``sources``."""
    parts = list(local_fluxes(head, sources, degree))
    numbers, signs = _sides(head, degree)
    multipliers = _multipliers(head, degree, parts, numbers, signs)
    local = np.empty((degree * (degree + 2), head.mesh.size, sources.values.size))
    for part in parts:
        some = part.triangles
        across = signs[:, some].T[..., None] * multipliers[numbers[:, some].T]
        local[:, some] = np.swapaxes(part.driven - part.answers @ across, 0, 1)
    return _agreed(head, degree, local, numbers)


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
    head: Head, degree: int, parts: list[LocalFluxes], numbers: Ints, signs: Floats
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
    degree: int, parts: list[LocalFluxes], numbers: Ints, signs: Floats
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
