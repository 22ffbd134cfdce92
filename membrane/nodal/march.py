"""Marching: the edges of small triangles on which a sign changes, two for each triangle."""

from __future__ import annotations

import numpy as np

from membrane.nodal.edges import lattice_edges
from membrane.records.arrays import Bools, Ints
from membrane.triangle import lattice


def mixed(positive: Bools, parts: int) -> Bools:
    """(parts**2, n): whether the corners of each small triangle of each item differ in sign.

    positive : (n_lattice, n), the sign at the lattice points of n items
    """
    corners = positive[lattice(parts).triangles]
    return np.asarray(corners.any(axis=0) != corners.all(axis=0))


def crossed(positive: Bools, cell: Ints, item: Ints, parts: int) -> Ints:
    """(2, m): the two crossed lattice edges of each mixed small triangle."""
    corners = positive[lattice(parts).triangles[:, cell], item]
    ahead = corners != np.roll(corners, -1, axis=0)
    alone = np.argmax(ahead & np.roll(ahead, 1, axis=0), axis=0)
    of_triangle = lattice_edges(parts).of_triangle
    return np.stack([of_triangle[alone, cell], of_triangle[(alone + 2) % 3, cell]])
