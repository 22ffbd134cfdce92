"""Roots: where on its lattice edge each crossing lies, to rounding."""

from __future__ import annotations

import numpy as np
from numpy.polynomial import chebyshev

from membrane.nodal.crossings import Crossings, LatticeEdges, lattice_edges
from membrane.nodal.slopes import held_points, inward_slopes
from membrane.records.arrays import Bools, Floats, Ints
from membrane.records.pencil import Space
from membrane.subdivision import Subdivision
from membrane.triangle import shapes

HALVINGS = 52


def refine(
    space: Space,
    vectors: Floats,
    divided: Subdivision,
    values: Floats,
    held: Bools,
    crossings: Crossings,
) -> Floats:
    """Reference coordinates (2, n) of the crossings, by bisection on the mode's polynomial.

    values : (n_points, n), whose signs at the two ends differ
    held : (3, n_triangles), the sides on fixed edges. There a mode is zero all along, so on
        such a side the root of the inward slope is sought, and on an edge that ends there
        the zero at that end is divided out.
    """
    edges = lattice_edges(divided.lattice.parts)
    ends = edges.ends[:, crossings.edge]
    numbers = divided.numbers[ends, crossings.triangle]
    along = _along_held(divided, edges, held, crossings)
    at_edge = np.zeros(divided.count, dtype=bool)
    at_edge[held_points(divided, held)] = True
    samples = _samples(space, vectors, divided, edges, crossings, along)
    samples = _without_zeros(samples, at_edge[numbers] & ~along)
    start = values[numbers[0], crossings.mode] >= 0.0
    t = 0.5 * (1.0 + _bisect(samples, start))
    first, last = divided.lattice.points[:, ends[0]], divided.lattice.points[:, ends[1]]
    return first + t * (last - first)


def _nodes(degree: int) -> Floats:
    """(degree + 1,) Chebyshev points strictly inside [-1, 1]."""
    return np.asarray(chebyshev.chebpts1(degree + 1))


def _along_held(
    divided: Subdivision, edges: LatticeEdges, held: Bools, crossings: Crossings
) -> Bools:
    """(n,): whether the crossing's lattice edge lies on a fixed side of its triangle."""
    x, y = divided.lattice.points[:, edges.ends]
    middle = np.stack([y.max(axis=0), 1.0 - (x + y).min(axis=0), x.max(axis=0)]) < 1e-12
    on_side = middle[:, crossings.edge]
    return np.asarray((on_side & held[:, crossings.triangle]).any(axis=0))


def _samples(
    space: Space,
    vectors: Floats,
    divided: Subdivision,
    edges: LatticeEdges,
    crossings: Crossings,
    along: Bools,
) -> Floats:
    """(degree + 1, n): the mode, or where ``along`` its inward slope, on each lattice edge."""
    first, last = divided.lattice.points[:, edges.ends[0]], divided.lattice.points[:, edges.ends[1]]
    t = 0.5 * (1.0 + _nodes(space.degree))
    points = first[:, :, None] + t * (last - first)[:, :, None]
    shape = (-1, edges.ends.shape[1], t.size)
    phi = shapes(points.reshape(2, -1), space.degree)[0].reshape(shape)
    slope = inward_slopes(points.reshape(2, -1), space.degree).reshape(shape)
    samples = np.empty((t.size, crossings.edge.size))
    kinds = crossings.edge + along * edges.ends.shape[1]
    for kind, members in _groups(kinds):
        table = (phi if kind < edges.ends.shape[1] else slope)[:, kind % edges.ends.shape[1]]
        dofs = space.element_dofs[:, crossings.triangle[members]]
        samples[:, members] = table.T @ vectors[dofs, crossings.mode[members]]
    return samples


def _groups(kinds: Ints) -> list[tuple[int, Ints]]:
    """Each kind with the places where it occurs."""
    order = np.argsort(kinds, kind="stable")
    found, starts = np.unique(kinds[order], return_index=True)
    return list(zip(found.tolist(), np.split(order, starts[1:]), strict=True))


def _without_zeros(samples: Floats, zero_at: Bools) -> Floats:
    """The samples divided by the distance from each end at which the mode is held."""
    x = _nodes(samples.shape[0] - 1)[:, None]
    near_start, near_end = zero_at
    distance = np.where(near_start, 1.0 + x, 1.0) * np.where(near_end, 1.0 - x, 1.0)
    return np.asarray(samples / distance)


def _bisect(samples: Floats, start: Bools) -> Floats:
    """(n,) roots in [-1, 1]; a polynomial that keeps its sign gives the end that disagrees."""
    degree = samples.shape[0] - 1
    fit = np.linalg.inv(chebyshev.chebvander(_nodes(degree), degree))
    coefficients = fit @ samples
    low, width = np.full(samples.shape[1], -1.0), 2.0
    for _ in range(HALVINGS):
        width *= 0.5
        middle = chebyshev.chebval(low + width, coefficients, tensor=False)
        low = np.where((middle >= 0.0) == start, low + width, low)
    return low
