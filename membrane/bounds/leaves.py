"""A straight mesh for the count: the curved mesh's triangles, halved until they are small."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from membrane.bounds.facets import facets_of
from membrane.records.arrays import Bools, Floats, Ints
from membrane.records.mesh import Mesh
from membrane.triangle import EDGES, nodes, shapes


@dataclass(frozen=True)
class Leaves:
    """Straight triangles whose vertices lie on the curved mesh.

    vertices : (2, n_vertices), metres
    triangles : (3, n), in no order
    parent : (n,), the curved triangle that each is a part of
    corners : (2, 3, n), where its vertices are on the parent's reference triangle
    """

    vertices: Floats
    triangles: Ints
    parent: Ints
    corners: Floats


def leaves(mesh: Mesh, speed: Floats, step: float, most: int) -> Leaves | None:
    """Parts with every side at most ``step`` long in travel time; None if more than ``most``.

    speed : (n_triangles, 2, 2), a side d of a triangle takes the time (d . speed d)^(1/2)
    step : seconds
    """
    corners = np.repeat(nodes(1)[:, :, None], mesh.size, axis=2)
    found = Leaves(mesh.vertices, mesh.triangles, np.arange(mesh.size), corners)
    while found.parent.size <= most:
        lengths = _lengths(found, speed)
        if lengths.max() <= step:
            return found
        found = _halved(mesh, found, lengths, step)
    return None


def _lengths(leaf: Leaves, speed: Floats) -> Floats:
    """(3, n): travel times of the sides."""
    places = leaf.vertices[:, leaf.triangles]
    sides = np.stack([places[:, b] - places[:, a] for a, b in EDGES], axis=1)
    T = speed[leaf.parent]
    return np.asarray(np.sqrt(np.einsum("dst,tde,est->st", sides, T, sides)))


def _halved(mesh: Mesh, leaf: Leaves, lengths: Floats, step: float) -> Leaves:
    """Every side too long is halved, and with any side of a triangle its longest."""
    facets = facets_of(leaf.triangles)
    longest = lengths.argmax(axis=0)
    marked = np.zeros(facets.size, dtype=bool)
    marked[facets.of_triangle[lengths > step]] = True
    marked = _closed(facets.of_triangle, longest, marked)
    new = np.full(facets.size, -1)
    new[marked] = leaf.vertices.shape[1] + np.arange(np.count_nonzero(marked))
    vertices = np.hstack([leaf.vertices, _middles(mesh, leaf, facets.of_triangle, marked)])
    middle = new[facets.of_triangle]
    return _split(leaf, vertices, middle, longest)


def _closed(of_triangle: Ints, longest: Ints, marked: Bools) -> Bools:
    main = of_triangle[longest, np.arange(longest.size)]
    while True:
        more = main[marked[of_triangle].any(axis=0) & ~marked[main]]
        if not more.size:
            return marked
        marked[more] = True


def _middles(mesh: Mesh, leaf: Leaves, of_triangle: Ints, marked: Bools) -> Floats:
    """(2, m): the middles of the marked sides, on the curved mesh."""
    low, high = np.array(EDGES).T
    halves = (leaf.corners[:, low] + leaf.corners[:, high]) / 2  # (2, 3, n)
    edge, triangle = np.nonzero(marked[of_triangle])
    _, first = np.unique(of_triangle[edge, triangle], return_index=True)
    edge, triangle = edge[first], triangle[first]
    return placed(mesh, leaf.parent[triangle], halves[:, edge, triangle])


def placed(mesh: Mesh, parent: Ints, points: Floats) -> Floats:
    """(2, m) metres: points (2, m) of the parents' (m,) reference triangles."""
    values, _ = shapes(points, mesh.order)
    return np.asarray(np.einsum("dim,im->dm", mesh.nodes[:, :, parent], values))


def _split(leaf: Leaves, vertices: Floats, middle: Ints, longest: Ints) -> Leaves:
    """Each triangle into one to four, first from the middle of its longest side."""
    whole = middle.max(axis=0) < 0
    done = [_Parts(leaf.triangles, leaf.corners, leaf.parent).where(whole)]
    # turned so that the longest side runs from a to b; c lies opposite
    a, b = np.array(EDGES)[longest].T
    c = 3 - a - b
    turn = np.stack([a, b, c])
    parts = _Parts(
        np.take_along_axis(leaf.triangles, turn, axis=0),
        np.take_along_axis(leaf.corners, turn[None], axis=1),
        leaf.parent,
    )
    side = {pair: number for number, pair in enumerate(EDGES)}
    table = np.array([[side.get((min(i, j), max(i, j)), -1) for j in range(3)] for i in range(3)])
    column = np.arange(a.size)
    main = middle[longest, column]
    for near in (0, 1):
        other = middle[table[turn[near], c], column]
        half = parts.replaced(1 - near, parts.middle(0, 1), main)
        done.append(half.where(~whole & (other < 0)))
        cut = half.middle(near, 2)
        done.extend(
            half.replaced(end, cut, other).where(~whole & (other >= 0)) for end in (near, 2)
        )
    triangles, corners, parent = (
        np.concatenate(x, axis=-1)
        for x in zip(*((p.triangles, p.corners, p.parent) for p in done), strict=True)
    )
    return Leaves(vertices, triangles, parent, corners)


@dataclass(frozen=True)
class _Parts:
    """Triangles (3, n), their corners (2, 3, n) and parents (n,)."""

    triangles: Ints
    corners: Floats
    parent: Ints

    def where(self, chosen: Bools) -> _Parts:
        return _Parts(self.triangles[:, chosen], self.corners[:, :, chosen], self.parent[chosen])

    def middle(self, i: int, j: int) -> Floats:
        return np.asarray((self.corners[:, i] + self.corners[:, j]) / 2)

    def replaced(self, vertex: int, corner: Floats, number: Ints) -> _Parts:
        triangles, corners = self.triangles.copy(), self.corners.copy()
        triangles[vertex], corners[:, vertex] = number, corner
        return _Parts(triangles, corners, self.parent)
