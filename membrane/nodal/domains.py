"""Nodal domains: how many parts of the head move as one."""

from __future__ import annotations

import numpy as np

from membrane.nodal.edges import MeshEdges
from membrane.records.arrays import Floats, Ints
from membrane.records.modes import Modes

LEVELS = (1e-4, 1e-6, 1e-9)
"""Shares of a mode's maximum. A mode is known to about the root of the error of its
eigenvalue, so that where it stays below the first level, two domains that only touch
cannot be told from one, and a part that never rises above is not counted. The next
level is taken where a narrow neck, cut by this one, would break Courant's bound."""


def count_domains(modes: Modes, values: Floats, edges: MeshEdges) -> Ints:
    """(n,) nodal domains of each mode.

    values : (n_points, n) of the modes at the points that ``edges`` connect
    The n-th mode has at most n (Courant's theorem), counting from the lowest of its cluster.
    """
    _, first = np.unique(modes.clusters, return_index=True)
    bound = first[np.searchsorted(np.unique(modes.clusters), modes.clusters)] + 1
    largest = np.abs(values).max(axis=0)
    counts = np.zeros(values.shape[1], dtype=np.int64)
    open_ = np.arange(counts.size)
    for level in LEVELS:
        floor = level * largest[open_]
        counts[open_] = _components(edges.ends, edges.lowest[:, open_], values[:, open_], floor)
        open_ = open_[counts[open_] > bound[open_]]
        if open_.size == 0:
            break
    return counts


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
