"""Lattice edges: the edges of the small triangles, within one lattice and on a whole mesh."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cache

import numpy as np

from membrane.records.arrays import Floats, Ints
from membrane.records.pencil import Space
from membrane.subdivision import Subdivision
from membrane.triangle import lattice, shapes


@dataclass(frozen=True)
class LatticeEdges:
    """The edges of one lattice.

    ends : (2, n_edges), lattice indices, lower first
    of_triangle : (3, parts**2), edge numbers of each small triangle's sides 0-1, 1-2, 2-0
    """

    ends: Ints
    of_triangle: Ints


@dataclass(frozen=True)
class MeshEdges:
    """The lattice edges of a whole mesh, each once, and how low each mode sinks there.

    ends : (2, n_edges), global numbers of lattice points, lower first
    numbers : (n_lattice_edges, n_triangles)
    lowest : (n_edges, n), the least magnitude of each mode along each edge
    """

    ends: Ints
    numbers: Ints
    lowest: Floats


@cache
def lattice_edges(parts: int) -> LatticeEdges:
    """All edges of ``lattice(parts)``."""
    grid = lattice(parts)
    count = grid.points.shape[1]
    pairs = np.sort(np.stack([grid.triangles, np.roll(grid.triangles, -1, axis=0)]), axis=0)
    keys, numbers = np.unique(pairs[0] * count + pairs[1], return_inverse=True)
    return LatticeEdges(np.stack(np.divmod(keys, count)), numbers.reshape(3, -1))


def mesh_edges(space: Space, vectors: Floats, divided: Subdivision, values: Floats) -> MeshEdges:
    """All lattice edges of a mesh.

    values : (n_points, n) of ``vectors`` (n_dofs, n) at the points of ``divided``
    """
    local = lattice_edges(divided.lattice.parts).ends
    pairs = np.sort(divided.numbers[local], axis=0)
    keys = (pairs[0] * divided.count + pairs[1]).ravel()
    found, first, numbers = np.unique(keys, return_index=True, return_inverse=True)
    ends = np.stack(np.divmod(found, divided.count))
    phi, _ = shapes(divided.lattice.points[:, local].mean(axis=1), space.degree)
    middle = np.tensordot(phi.T, vectors[space.element_dofs], axes=1)
    middle = middle.reshape(-1, vectors.shape[1])[first]
    lowest = _lowest(values[ends[0]], middle, values[ends[1]])
    return MeshEdges(ends, numbers.reshape(local.shape[1], -1), lowest)


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
