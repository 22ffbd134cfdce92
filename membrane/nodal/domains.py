"""Nodal domains: how many parts of the head move as one."""

from __future__ import annotations

import numpy as np

from membrane.nodal.crossings import lattice_edges
from membrane.records.arrays import Floats, Ints
from membrane.records.modes import Modes
from membrane.records.pencil import Space
from membrane.subdivision import Subdivision
from membrane.triangle import shapes

LEVELS = (1e-4, 1e-6, 1e-9)
"""Shares of a mode's maximum. A mode is known to about the root of the error of its
eigenvalue, so that where it stays below the first level, two domains that only touch
cannot be told from one, and a part that never rises above is not counted. The next
level is taken where a narrow neck, cut by this one, would break Courant's bound."""


def count_domains(modes: Modes, divided: Subdivision, values: Floats) -> Ints:
    """(n,) nodal domains of each mode.

    values : (n_points, n) of the modes at the points of ``divided``
    The n-th mode has at most n (Courant's theorem), counting from the lowest of its cluster.
    """
    edges, lowest = _edges(modes.space, modes.vectors, divided, values)
    _, first = np.unique(modes.clusters, return_index=True)
    bound = first[np.searchsorted(np.unique(modes.clusters), modes.clusters)] + 1
    largest = np.abs(values).max(axis=0)
    counts = np.zeros(values.shape[1], dtype=np.int64)
    open_ = np.arange(counts.size)
    for level in LEVELS:
        floor = level * largest[open_]
        counts[open_] = _components(edges, lowest[:, open_], values[:, open_], floor)
        open_ = open_[counts[open_] > bound[open_]]
        if open_.size == 0:
            break
    return counts


def _edges(
    space: Space, vectors: Floats, divided: Subdivision, values: Floats
) -> tuple[Ints, Floats]:
    """Global lattice edges (2, n_edges), and how low each mode sinks on them (n_edges, n).

    0 where its sign changes at the ends or, by the parabola through the middle, between.
    """
    local = lattice_edges(divided.lattice.parts).ends
    ends = divided.numbers[local]
    low, high = np.sort(ends, axis=0).reshape(2, -1)
    _, first = np.unique(low * divided.count + high, return_index=True)
    phi, _ = shapes(divided.lattice.points[:, local].mean(axis=1), space.degree)
    middle = np.tensordot(phi.T, vectors[space.element_dofs], axes=1)
    middle = middle.reshape(-1, vectors.shape[1])[first]
    edges = np.stack([low[first], high[first]])
    return edges, _lowest(values[edges[0]], middle, values[edges[1]])


def _lowest(a: Floats, middle: Floats, b: Floats) -> Floats:
    """Least magnitude of the parabola with values a, middle, b at 0, 1/2, 1; 0 if it crosses."""
    sign = np.sign(a)
    start = sign * (4 * middle - 3 * a - b)
    bend = 2 * sign * (a + b - 2 * middle)
    dips = (start < 0.0) & (start + 2 * bend > 0.0)
    safe = np.where(dips, bend, 1.0)
    ends = np.minimum(sign * a, sign * b)
    least = np.where(dips, sign * a - start**2 / (4 * safe), ends)
    return np.asarray(np.maximum(np.minimum(least, ends), 0.0))


def _components(edges: Ints, lowest: Floats, values: Floats, floor: Floats) -> Ints:
    """(n,) connected parts of each mode's lattice points above ``floor`` (n,)."""
    from scipy.sparse import coo_array
    from scipy.sparse.csgraph import connected_components

    count, modes = values.shape
    edge, mode = np.nonzero(lowest >= floor)
    a, b = edges[:, edge] * modes + mode
    graph = coo_array((np.ones(a.size, dtype=np.int8), (a, b)), shape=(values.size,) * 2)
    _, labels = connected_components(graph, directed=False)
    above = (np.abs(values) >= floor).ravel()
    owner = np.tile(np.arange(modes), count)[above]
    _, first = np.unique(labels[above], return_index=True)
    return np.bincount(owner[first], minlength=modes)
