"""Roots: where on its lattice edge a polynomial is zero, to rounding."""

from __future__ import annotations

import numpy as np
from numpy.polynomial import chebyshev

from membrane.nodal.edges import lattice_edges
from membrane.nodal.slopes import inward_slopes
from membrane.records.arrays import Bools, Floats, Ints
from membrane.triangle import lattice, shapes

HALVINGS = 52


def find_roots(
    dofs: Floats,
    edge: Ints,
    parts: int,
    degree: int,
    start: Bools,
    along: Bools | None = None,
    zero_at: Bools | None = None,
) -> Floats:
    """Reference coordinates (2, n) of a root on each of n lattice edges, by bisection.

    dofs : (n_local, n), values at ``nodes(degree)`` of each polynomial
    edge : (n,), lattice edge that each is sought on
    start : (n,), whether the polynomial counts as positive at the edge's first end
    along : (n,), edges that lie on a fixed side, where a mode is zero all along and the root
        of its inward slope is sought
    zero_at : (2, n), ends at which the polynomial is held at zero; that root is divided out
    """
    samples = _samples(dofs, edge, parts, degree, along)
    if zero_at is not None:
        x = chebyshev.chebpts1(degree + 1)[:, None]
        samples /= np.where(zero_at[0], 1.0 + x, 1.0) * np.where(zero_at[1], 1.0 - x, 1.0)
    first, last = lattice(parts).points[:, lattice_edges(parts).ends[:, edge]].swapaxes(0, 1)
    return np.asarray(first + 0.5 * (1.0 + _bisect(samples, start)) * (last - first))


def on_each(kinds: Ints) -> list[tuple[int, Ints]]:
    """Each kind with the places where it occurs."""
    if kinds.size == 0:
        return []
    order = np.argsort(kinds, kind="stable")
    found, starts = np.unique(kinds[order], return_index=True)
    return list(zip(found.tolist(), np.split(order, starts[1:]), strict=True))


def _samples(dofs: Floats, edge: Ints, parts: int, degree: int, along: Bools | None) -> Floats:
    """(degree + 1, n): each polynomial, or its inward slope, along its lattice edge."""
    first, last = lattice(parts).points[:, lattice_edges(parts).ends].swapaxes(0, 1)
    t = 0.5 * (1.0 + chebyshev.chebpts1(degree + 1))
    points = (first[:, :, None] + t * (last - first)[:, :, None]).reshape(2, -1)
    shape = (dofs.shape[0], first.shape[1], t.size)
    tables = shapes(points, degree)[0].reshape(shape)
    samples = np.empty((t.size, edge.size))
    for kind, members in on_each(edge):
        samples[:, members] = tables[:, kind].T @ dofs[:, members]
    if along is not None and along.any():
        tables = inward_slopes(points, degree).reshape(shape)
        for kind, members in on_each(np.where(along, edge, -1)):
            if kind >= 0:
                samples[:, members] = tables[:, kind].T @ dofs[:, members]
    return samples


def _bisect(samples: Floats, start: Bools) -> Floats:
    """(n,) roots in [-1, 1]; a polynomial that keeps its sign gives the end that disagrees."""
    degree = samples.shape[0] - 1
    fit = np.linalg.inv(chebyshev.chebvander(chebyshev.chebpts1(degree + 1), degree))
    coefficients = fit @ samples
    low, width = np.full(samples.shape[1], -1.0), 2.0
    for _ in range(HALVINGS):
        width *= 0.5
        middle = chebyshev.chebval(low + width, coefficients, tensor=False)
        low = np.where((middle >= 0.0) == start, low + width, low)
    return low
