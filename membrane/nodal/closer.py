"""A closer look: where nodal lines meet or nearly touch, small triangles are cut again."""

from __future__ import annotations

import numpy as np

from membrane.nodal.crossings import TIE, Signs
from membrane.nodal.edges import MeshEdges, lattice_edges
from membrane.nodal.march import crossed, mixed
from membrane.nodal.pieces import Pieces
from membrane.nodal.roots import find_roots, on_each
from membrane.records.arrays import Bools, Floats, Ints
from membrane.records.pencil import Space
from membrane.subdivision import Subdivision
from membrane.triangle import lattice, nodes, shapes

PARTS = 8

NEAR = 0.1
"""A mode that sinks to this share of its values at both ends of an edge nearly crosses it."""


def need_closer_look(divided: Subdivision, edges: MeshEdges, signs: Signs, values: Floats) -> Bools:
    """(parts**2, n_triangles * n): small triangles near an edge that a line crosses twice.

    Or comes near to crossing twice: two lines meet there, or nearly do.
    """
    low = edges.lowest <= NEAR * np.abs(values[edges.ends]).min(axis=0)
    a, b = signs.positive[edges.ends[0]], signs.positive[edges.ends[1]]
    heard = signs.audible[edges.ends[0]] & signs.audible[edges.ends[1]]
    held = signs.held_points[edges.ends[0]] | signs.held_points[edges.ends[1]]
    twice: Bools = (a == b) & heard & low & ~held[:, None]
    near = _neighbours(divided, edges, twice)
    # one ring more, since close to such an edge a line may cross another three times
    ring = np.zeros_like(twice)
    cell, triangle, mode = np.nonzero(near)
    ring[_sides(divided, edges, cell, triangle), mode] = True
    return _neighbours(divided, edges, ring).reshape(near.shape[0], -1)


def _neighbours(divided: Subdivision, edges: MeshEdges, marked: Bools) -> Bools:
    """(parts**2, n_triangles, n): small triangles with an edge in ``marked`` (n_edges, n)."""
    of_triangle = lattice_edges(divided.lattice.parts).of_triangle
    return np.asarray(marked[edges.numbers[of_triangle]].any(axis=0))


def look_closer(
    space: Space,
    vectors: Floats,
    divided: Subdivision,
    edges: MeshEdges,
    signs: Signs,
    wanted: Bools,
) -> Pieces:
    """Pieces of nodal lines inside the small triangles marked in ``wanted``.

    On a side that leads to a small triangle not looked into, the point is the mesh's own
    crossing of that side.
    """
    cell, item = np.nonzero(wanted)
    triangle, mode = np.divmod(item, vectors.shape[1])
    dofs = _local_dofs(space.degree, divided, cell, vectors[space.element_dofs[:, triangle], mode])
    corners = divided.numbers[divided.lattice.triangles[:, cell], triangle]
    positive = _signs(space.degree, dofs, np.abs(vectors).max(axis=0)[mode])
    positive[[0, PARTS, -1]] = signs.positive[corners, mode]
    small, owner = np.nonzero(mixed(positive, PARTS))
    edge = crossed(positive, small, owner, PARTS).ravel()
    owner = np.tile(owner, 2)
    start = positive[lattice_edges(PARTS).ends[0, edge], owner]
    local = find_roots(dofs[:, owner], edge, PARTS, space.degree, start)
    places = _sides(divided, edges, cell, triangle)
    leads_out = _leading_out(divided, edges, signs, wanted)[places, mode]
    rising = corners < np.roll(corners, -1, axis=0)
    return Pieces(
        keys=_keys(edge, owner, mode, places, leads_out, rising),
        triangle=triangle[owner],
        reference=_into_triangle(divided, cell[owner], local),
        segments=np.arange(edge.size).reshape(2, -1),
    )


def _leading_out(divided: Subdivision, edges: MeshEdges, signs: Signs, wanted: Bools) -> Bools:
    """(n_edges, n): edges of small triangles that lines cross but nobody looks into."""
    count = signs.positive.shape[1]
    positive = signs.positive[divided.numbers].reshape(-1, wanted.shape[1])
    cell, item = np.nonzero(mixed(positive, divided.lattice.parts) & ~wanted)
    triangle, mode = np.divmod(item, count)
    leading = np.zeros((edges.ends.shape[1], count), dtype=bool)
    leading[_sides(divided, edges, cell, triangle), mode] = True
    return leading


def _into_triangle(divided: Subdivision, cell: Ints, local: Floats) -> Floats:
    """Reference coordinates of points given by their coordinates in small triangles."""
    a, b, c = np.moveaxis(divided.lattice.points[:, divided.lattice.triangles[:, cell]], 1, 0)
    return np.asarray(a + local[0] * (b - a) + local[1] * (c - a))


def _local_dofs(degree: int, divided: Subdivision, cell: Ints, dofs: Floats) -> Floats:
    """Values at ``nodes(degree)`` of the small triangles from those of their triangles."""
    here, kinds = nodes(degree), np.arange(divided.lattice.triangles.shape[1])
    points = _into_triangle(divided, np.repeat(kinds, here.shape[1]), np.tile(here, kinds.size))
    tables = shapes(points, degree)[0].reshape(-1, kinds.size, here.shape[1])
    local = np.empty_like(dofs)
    for kind, members in on_each(cell):
        local[:, members] = tables[:, kind].T @ dofs[:, members]
    return local


def _signs(degree: int, dofs: Floats, largest: Floats) -> Bools:
    return np.asarray(shapes(lattice(PARTS).points, degree)[0].T @ dofs >= -TIE * largest)


def _sides(divided: Subdivision, edges: MeshEdges, cell: Ints, triangle: Ints) -> Ints:
    """(3, n) mesh-wide numbers of the sides 0-1, 1-2, 2-0 of small triangles."""
    of_triangle = lattice_edges(divided.lattice.parts).of_triangle
    return edges.numbers[of_triangle[:, cell], triangle]


def _keys(
    edge: Ints, owner: Ints, mode: Ints, places: Ints, leads_out: Bools, rising: Bools
) -> Ints:
    """(4, n): mode, mesh-wide edge, place on it, kind of key.

    Kind 0 is the only crossing of an edge, 1 one of several, 2 a point inside a small triangle.
    """
    side, step = _places_on_sides()
    side, step = side[edge], step[edge]
    at = np.maximum(side, 0)
    step = np.where(rising[at, owner], step, PARTS - 1 - step)
    inside = side < 0
    alone = leads_out[at, owner] & ~inside
    first = np.where(inside, -1 - owner, places[at, owner])
    second = np.where(inside, edge, np.where(alone, -1, step))
    kind = np.where(inside, 2, np.where(alone, 0, 1))
    return np.stack([mode[owner], first, second, kind])


def _places_on_sides() -> tuple[Ints, Ints]:
    """For each lattice edge the side 0-1, 1-2, 2-0 that it lies on (-1: none), and its step."""
    x, y = lattice(PARTS).points[:, lattice_edges(PARTS).ends]
    off_side = np.stack([y.max(axis=0), 1.0 - (x + y).min(axis=0), x.max(axis=0)])
    side = np.where((off_side < 1e-12).any(axis=0), off_side.argmin(axis=0), -1)
    middle = np.stack([x.mean(axis=0), y.mean(axis=0), 1.0 - y.mean(axis=0)])
    step = np.floor(PARTS * middle[side, np.arange(side.size)])
    return side, step.astype(np.int64)
