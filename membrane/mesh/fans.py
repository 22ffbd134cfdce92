"""Triangles at a corner, drawn in by a power so that r^a becomes smooth in their coordinates.

At a crack's tip this is the quarter-point triangle: R. D. Henshell & K. G. Shaw,
Int. J. Numer. Meth. Eng. 9 (1975) 495; R. S. Barsoum, ibid. 10 (1976) 25; for other powers
the auxiliary mapping of I. Babuska & H.-S. Oh, Numer. Meth. PDE 6 (1990) 371 (all from memory).
"""

from __future__ import annotations

from collections.abc import Callable, Sequence

import numpy as np

from membrane.kernel import Kernel
from membrane.mesh.blend import blending
from membrane.mesh.corner import Fan
from membrane.records.arrays import Complexes, Floats, Ints
from membrane.records.raw_mesh import RawMesh
from membrane.triangle import EDGES, nodes


class FanNodes:
    """Places the geometry nodes of fans, and of the triangles around them.

    triangles : (3, n_triangles), vertex numbers rising down each column
    """

    def __init__(self, kernel: Kernel, raw: RawMesh, triangles: Ints, order: int) -> None:
        self.kernel, self.raw, self.triangles = kernel, raw, triangles
        x, y = nodes(order)
        self.barycentric = np.array([1 - x - y, x, y])
        sides = map(tuple, raw.segments.T.tolist())
        self.segment = {side: number for number, side in enumerate(sides)}
        count = raw.vertices.shape[1]
        self.keys = np.array([triangles[low] * count + triangles[high] for low, high in EDGES])

    def draw_in(self, placed: Floats, fans: Sequence[Fan]) -> None:
        """Move the nodes (2, n_nodes, n_triangles) of every fan, and of what surrounds it."""
        for fan in fans:
            for vertex in np.flatnonzero((self.raw.vertices == fan.place[:, None]).all(axis=0)):
                for triangle in np.flatnonzero((self.triangles == vertex).any(axis=0)):
                    self._draw_in(placed, fan, int(vertex), int(triangle))

    def _draw_in(self, placed: Floats, fan: Fan, vertex: int, triangle: int) -> None:
        corners = self.triangles[:, triangle]
        apex = int(np.argmax(corners == vertex))
        left, right = (k for k in range(3) if k != apex)
        ends = [self._complex(fan, corners[k]) for k in (left, right)]
        turn = (ends[1] / ends[0]) ** (1 / fan.power)
        at = self.barycentric
        root = at[left] + at[right] * turn
        for k, factor in ((left, 1.0), (right, turn)):
            s, weight = blending(at[apex], at[k])
            root = root + factor * weight * self._departure(fan, vertex, int(corners[k]), s)
        placed[:, :, triangle] = self._back(fan, ends[0] * root**fan.power)

        def opposite(s: Floats) -> Floats:
            return self._back(fan, ends[0] * (1 - s + s * turn) ** fan.power)

        self._bend_neighbour(placed, triangle, EDGES.index((left, right)), opposite)

    def _bend_neighbour(
        self, placed: Floats, triangle: int, side: int, curve: Callable[[Floats], Floats]
    ) -> None:
        """Let the triangle across a side follow the side's new ``curve``."""
        low, high = self.triangles[list(EDGES[side]), triangle]
        chord = self.raw.vertices[:, [low, high]]
        for across, other in np.argwhere(self.keys == self.keys[side, triangle]):
            if other != triangle:
                s, weight = blending(*self.barycentric[list(EDGES[across])])
                straight = chord @ np.array([1 - s, s])
                placed[:, :, other] += weight * (curve(s) - straight)

    def _departure(self, fan: Fan, vertex: int, end: int, s: Floats) -> Complexes:
        """How far the root of the curve under a side is off its chord, of length 1."""
        segment = self.segment.get((min(vertex, end), max(vertex, end)))
        if segment is None:
            return np.zeros(s.size, dtype=complex)
        curve = int(self.raw.segment_curve[segment])
        start, stop = self.raw.segment_parameters[:, segment][:: 1 if vertex < end else -1]
        fractions = np.concatenate([[0.0], s**fan.power, [1.0]])
        x, y = self.kernel.evaluate(curve, start + fractions * (stop - start))
        along = (x - x[0] + 1j * (y - y[0])) / (x[-1] - x[0] + 1j * (y[-1] - y[0]))
        return np.asarray(along[1:-1] ** (1 / fan.power) - s)

    def _complex(self, fan: Fan, vertex: int) -> complex:
        """A vertex in the plane around the corner."""
        return complex(*(self.raw.vertices[:, vertex] - fan.place))

    def _back(self, fan: Fan, z: Complexes) -> Floats:
        return np.asarray(fan.place[:, None] + np.array([z.real, z.imag]))
