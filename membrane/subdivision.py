"""The subdivision: every curved triangle cut by one lattice, points welded by identity."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from membrane.records.arrays import Bools, Floats, Ints
from membrane.records.mesh import Mesh
from membrane.records.pencil import Space
from membrane.sides import sides
from membrane.triangle import EDGES, Lattice, lattice, shapes


@dataclass(frozen=True)
class Subdivision:
    """A conforming lattice on a whole mesh.

    lattice : on the reference triangle
    numbers : (n_lattice, n_triangles), global number of each triangle's lattice points;
        neighbours share the points of their common side, and nobody else's
    count : how many points there are
    """

    lattice: Lattice
    numbers: Ints
    count: int

    @property
    def triangles(self) -> Ints:
        """(3, n) small triangles in global numbers, those of each triangle together."""
        return np.moveaxis(self.numbers[self.lattice.triangles], 1, 2).reshape(3, -1)

    def along(self, on: Bools) -> Ints:
        """(parts + 1, m) numbers of the points along the sides marked in ``on`` (3, n)."""
        corners, on_sides, _ = _places(self.lattice)
        chains = [[corners[a], *on_sides[side], corners[b]] for side, (a, b) in enumerate(EDGES)]
        numbers = [self.numbers[chain][:, on[side]] for side, chain in enumerate(chains)]
        return np.hstack(numbers)

    def positions(self, mesh: Mesh) -> Floats:
        """(2, count) metres, on the curved mesh."""
        phi, _ = shapes(self.lattice.points, mesh.order)
        positions = np.empty((2, self.count))
        positions[:, self.numbers] = np.einsum("dit,il->dlt", mesh.nodes, phi, optimize=True)
        return positions

    def values(self, space: Space, vectors: Floats) -> Floats:
        """(count, n) values at the points of functions ``vectors`` (n_dofs, n)."""
        phi, _ = shapes(self.lattice.points, space.degree)
        values = np.empty((self.count, vectors.shape[1]))
        values[self.numbers] = np.tensordot(phi.T, vectors[space.element_dofs], axes=1)
        return values


def subdivide(mesh: Mesh, parts: int) -> Subdivision:
    """Cut each triangle into ``parts`` squared ones."""
    grid, side = lattice(parts), sides(mesh)
    vertices, inner = mesh.vertices.shape[1], parts - 1
    corners, on_sides, interior = _places(grid)
    numbers = np.empty((grid.points.shape[1], mesh.size), dtype=np.int64)
    numbers[corners] = mesh.triangles
    along = vertices + inner * side.of_triangle[:, None, :] + np.arange(inner)[None, :, None]
    numbers[on_sides] = along
    first = vertices + inner * side.vertices.shape[1]
    within = np.arange(len(interior) * mesh.size).reshape(mesh.size, -1).T
    numbers[interior] = first + within
    return Subdivision(grid, numbers, first + within.size)


def _places(grid: Lattice) -> tuple[Ints, Ints, Ints]:
    """Lattice indices of the corners (3,), of the sides (3, parts - 1) and of the interior.

    Along each side from its first to its second corner, so that neighbours agree.
    """
    i, j = np.rint(grid.points * grid.parts).astype(np.int64)
    index = np.full((grid.parts + 1, grid.parts + 1), -1)
    index[i, j] = np.arange(i.size)
    steps, none = np.arange(1, grid.parts), np.zeros(grid.parts - 1, dtype=np.int64)
    on_sides = np.stack([index[steps, none], index[steps[::-1], steps], index[none, steps]])
    interior = np.nonzero((i > 0) & (j > 0) & (i + j < grid.parts))[0]
    return index[[0, grid.parts, 0], [0, 0, grid.parts]], on_sides, interior
