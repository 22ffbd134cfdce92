"""Slopes: what stands for a mode's sign on the edges that hold it at zero."""

from __future__ import annotations

import numpy as np

from membrane.records.arrays import Bools, Floats, Ints
from membrane.records.pencil import Space
from membrane.subdivision import Subdivision
from membrane.triangle import shapes


def with_slopes(
    space: Space, vectors: Floats, divided: Subdivision, values: Floats, held: Bools
) -> Floats:
    """The values (n_points, n), with the inward slope in place of the zero on fixed edges.

    held : (3, n_triangles), the sides that lie on fixed edges
    """
    if not held.any():
        return values
    at_edge = np.zeros(divided.count, dtype=bool)
    at_edge[held_points(divided, held)] = True
    touching = np.nonzero(at_edge[divided.numbers].any(axis=0))[0]
    table = inward_slopes(divided.lattice.points, space.degree)
    slopes = np.tensordot(table.T, vectors[space.element_dofs[:, touching]], axes=1)
    total = np.zeros_like(values)
    np.add.at(total, divided.numbers[:, touching], slopes)
    return np.where(at_edge[:, None], total, values)


def held_points(divided: Subdivision, held: Bools) -> Ints:
    """Global numbers of the lattice points on the sides marked in ``held``."""
    return np.unique(divided.along(held))


def inward_slopes(points: Floats, degree: int) -> Floats:
    """(n_nodes, n) slopes of the shape functions from ``points`` (2, n) to the centroid."""
    _, slopes = shapes(points, degree)
    return np.asarray(np.einsum("dn,din->in", 1.0 / 3.0 - points, slopes))
