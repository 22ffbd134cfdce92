"""Crossings: the points at which nodal lines cross the lattice edges of the mesh."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from membrane.nodal.edges import MeshEdges, lattice_edges
from membrane.nodal.march import crossed, mixed
from membrane.nodal.pieces import Pieces
from membrane.nodal.roots import find_roots
from membrane.records.arrays import Bools, Floats, Ints
from membrane.records.pencil import Space
from membrane.subdivision import Subdivision

NOISE = 1e-9
"""Where a mode stays below this share of its maximum, its sign means nothing."""

TIE = 1e-13
"""Values nearer to zero than this share of the maximum count as positive wherever computed."""


@dataclass(frozen=True)
class Signs:
    """Signs of all modes at the lattice points of a mesh.

    positive, audible : (n_points, n)
    held_points : (n_points,), on fixed edges, where the sign is that of the inward slope
    held_sides : (3, n_triangles), on fixed edges
    """

    positive: Bools
    audible: Bools
    held_points: Bools
    held_sides: Bools

    @classmethod
    def of(cls, values: Floats, signed: Floats, divided: Subdivision, held_sides: Bools) -> Signs:
        """From the values (n_points, n), and those with slopes on the fixed edges."""
        largest = np.abs(values).max(axis=0)
        held = np.zeros(divided.count, dtype=bool)
        held[divided.along(held_sides)] = True
        return cls(signed >= -TIE * largest, np.abs(signed) > NOISE * largest, held, held_sides)


def find_crossings(
    space: Space,
    vectors: Floats,
    divided: Subdivision,
    edges: MeshEdges,
    signs: Signs,
    left_out: Bools,
) -> Pieces:
    """Crossings of all modes, joined within each small triangle.

    left_out : (parts**2, n_triangles * n), small triangles in which they are not joined
    """
    parts, count = divided.lattice.parts, vectors.shape[1]
    positive = signs.positive[divided.numbers].reshape(-1, divided.numbers.shape[1] * count)
    audible = signs.audible[divided.numbers].reshape(positive.shape)
    heard = audible[divided.lattice.triangles].any(axis=0)
    cell, item = np.nonzero(mixed(positive, parts) & heard)
    edge = crossed(positive, cell, item, parts)
    triangle, mode = np.divmod(item, count)
    keys = edges.numbers[edge, triangle] * count + mode
    found, first, numbers = np.unique(keys, return_index=True, return_inverse=True)
    edge = edge.ravel()[first]
    triangle, mode = np.tile(triangle, 2)[first], np.tile(mode, 2)[first]
    minus, zero = np.full(found.size, -1), np.zeros(found.size, dtype=np.int64)
    return Pieces(
        keys=np.stack([mode, found // count, minus, zero]),
        triangle=triangle,
        reference=_roots(space, vectors, divided, signs, edge, triangle, mode),
        segments=numbers.reshape(2, -1)[:, ~left_out[cell, item]],
    )


def _roots(
    space: Space,
    vectors: Floats,
    divided: Subdivision,
    signs: Signs,
    edge: Ints,
    triangle: Ints,
    mode: Ints,
) -> Floats:
    ends = divided.numbers[lattice_edges(divided.lattice.parts).ends[:, edge], triangle]
    along = _along_held(divided, signs.held_sides)[edge, triangle]
    return find_roots(
        vectors[space.element_dofs[:, triangle], mode],
        edge,
        divided.lattice.parts,
        space.degree,
        start=signs.positive[ends[0], mode],
        along=along,
        zero_at=signs.held_points[ends] & ~along,
    )


def _along_held(divided: Subdivision, held_sides: Bools) -> Bools:
    """(n_lattice_edges, n_triangles): whether an edge lies on a fixed side of its triangle."""
    ends = lattice_edges(divided.lattice.parts).ends
    x, y = divided.lattice.points[:, ends]
    off_side = np.stack([y.max(axis=0), 1.0 - (x + y).min(axis=0), x.max(axis=0)])
    return np.asarray(((off_side < 1e-12)[:, :, None] & held_sides[:, None, :]).any(axis=0))
