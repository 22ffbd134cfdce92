"""A straight mesh for the count: the curved mesh's triangles, halved until they are small."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from membrane.bounds.facets import facets_of
from membrane.bounds.head import Head
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


def leaves(head: Head, step: float, along: Floats, most: int) -> Leaves | None:
    """Parts that are small enough; None if they are more than ``most``.

    step : longest travel time along any of their sides, seconds
    along : (n_facets,), longest parts of the mesh's own sides, metres
    """
    mesh = head.mesh
    corners = np.repeat(nodes(1)[:, :, None], mesh.size, axis=2)
    found = Leaves(mesh.vertices, mesh.triangles, np.arange(mesh.size), corners)
    while found.parent.size <= most:
        times = _lengths(found, np.linalg.inv(head.tension) * head.density[:, None, None])
        owners = owner_of(head, found)
        metres = _lengths(found, np.broadcast_to(np.eye(2), head.tension.shape))
        long = (times > step) | ((owners >= 0) & (metres > along[owners]))
        if not long.any():
            return found
        found = _halved(mesh, found, times, long)
    return None


def owner_of(head: Head, leaf: Leaves) -> Ints:
    """(3, n): the mesh's side that each side of the leaves is a part of, or -1."""
    x, y = leaf.corners
    outside = np.stack([1 - x - y, x, y])  # (3 coordinates, 3 corners, n)
    found = np.full((3, leaf.parent.size), -1)
    for side, (a, b) in enumerate(EDGES):
        for edge, pair in enumerate(EDGES):
            third = 3 - sum(pair)
            on = (outside[third, a] == 0.0) & (outside[third, b] == 0.0)
            found[side, on] = head.facets.of_triangle[edge, leaf.parent[on]]
    return found


def _lengths(leaf: Leaves, metric: Floats) -> Floats:
    """(3, n): lengths of the sides by a metric (n_parents, 2, 2)."""
    places = leaf.vertices[:, leaf.triangles]
    sides = np.stack([places[:, b] - places[:, a] for a, b in EDGES], axis=1)
    return np.asarray(np.sqrt(np.einsum("dst,tde,est->st", sides, metric[leaf.parent], sides)))


def _halved(mesh: Mesh, leaf: Leaves, lengths: Floats, long: Bools) -> Leaves:
    """Every ``long`` side is halved, and with any side of a triangle its longest."""
    facets = facets_of(leaf.triangles)
    longest = lengths.argmax(axis=0)
    marked = np.zeros(facets.size, dtype=bool)
    marked[facets.of_triangle[long]] = True
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
