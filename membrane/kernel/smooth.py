"""Vertices moved to the middle of their neighbours, where that makes better triangles."""

from __future__ import annotations

import numpy as np

from membrane.records.arrays import Bools, Floats, Ints
from membrane.records.raw_mesh import signed_areas

SWEEPS = 3


def smoothed(vertices: Floats, triangles: Ints, movable: Bools) -> Floats:
    """The vertices (2, n), those that are ``movable`` (n,) at better places.

    triangles : (3, n_triangles), counter-clockwise; every vertex is of one, and a movable
        one is surrounded by them

    gmsh does the same, but asks its geometry kernel about the surface at every step, which
    takes ten times as long as the mesh itself; ours is flat.
    """
    around = _Around(vertices.shape[1], triangles)
    for _ in range(SWEEPS if movable.any() else 0):
        vertices = around.where_better(
            vertices, np.where(movable, around.middles(vertices), vertices)
        )
    return vertices


class _Around:
    """The triangles around each vertex."""

    def __init__(self, count: int, triangles: Ints) -> None:
        self.triangles = triangles
        self.order = np.argsort(triangles, axis=None)
        self.first = np.searchsorted(triangles.ravel()[self.order], np.arange(count))

    def middles(self, vertices: Floats) -> Floats:
        """The mean of each vertex's neighbours, which each lie on two triangles around it."""
        corners = vertices[:, self.triangles]
        others = (corners.sum(axis=1)[:, None] - corners).reshape(2, -1)
        counts = np.diff(self.first, append=self.order.size)
        return np.asarray(
            np.add.reduceat(others[:, self.order], self.first, axis=1) / (2.0 * counts)
        )

    def where_better(self, old: Floats, new: Floats) -> Floats:
        """The new places, but the old ones where the worst triangle around would be worse."""
        before = self._worst(old)
        while True:
            worse = (self._worst(new) < before) & (new != old).any(axis=0)
            if not worse.any():
                return new
            new = np.where(worse, old, new)

    def _worst(self, vertices: Floats) -> Floats:
        """(n,): area over squared sides of the worst triangle around each vertex."""
        corners = vertices[:, self.triangles]
        squares = ((corners - corners[:, [1, 2, 0]]) ** 2).sum(axis=(0, 1))
        quality = signed_areas(corners) / np.maximum(squares, 1e-300)
        return np.asarray(np.minimum.reduceat(np.tile(quality, 3)[self.order], self.first))
