"""The curved geometry of a mesh as a scikit-fem mapping."""

from __future__ import annotations

from typing import Any

import numpy as np
from skfem.mapping.mapping import Mapping

from membrane.evaluate import invert
from membrane.records.arrays import Floats, Ints
from membrane.records.mesh import Mesh
from membrane.triangle import EDGES, nodes, tabulated


class CurvedMapping(Mapping):  # type: ignore[misc]  # scikit-fem is untyped
    """x = sum of the geometry nodes times the nodal shapes of the geometry's order.

    Points X are (2, n), the same in all triangles, or (2, n_triangles, n).
    """

    def __init__(self, mesh: Mesh, topology: Any) -> None:
        self.mesh = mesh
        self.topology = topology
        self._last: tuple[Any, Any, Floats] | None = None
        self._shaped: tuple[Any, Floats, Floats] | None = None

    def F(self, X: Floats, tind: Ints | None = None) -> Floats:
        """Points (2, n_triangles, n) of the head, metres."""
        values, _ = self._shapes(X)
        return _summed(self._nodes(tind), values)

    def DF(self, X: Floats, tind: Ints | None = None) -> Floats:
        """Jacobian dx_d/dX_k, (2, 2, n_triangles, n)."""
        # scikit-fem asks for it once a shape function, always with the same arrays
        if self._last is None or self._last[0] is not X or self._last[1] is not tind:
            _, slopes = self._shapes(X)
            both = [_summed(self._nodes(tind), along) for along in slopes]
            self._last = (X, tind, np.stack(both, axis=1))
        return np.asarray(self._last[2])

    def detDF(self, X: Floats, tind: Ints | None = None) -> Floats:
        """Determinant of the jacobian, (n_triangles, n)."""
        (a, b), (c, d) = self.DF(X, tind)
        return np.asarray(a * d - b * c)

    def invDF(self, X: Floats, tind: Ints | None = None) -> Floats:
        """Inverse jacobian, (2, 2, n_triangles, n)."""
        (a, b), (c, d) = self.DF(X, tind)
        return np.asarray(np.array([[d, -b], [-c, a]]) / (a * d - b * c))

    def invF(self, x: Floats, tind: Ints | None = None) -> Floats:
        """Reference coordinates of the points x (2, n_triangles, n)."""
        triangle = np.arange(self.mesh.size) if tind is None else np.asarray(tind)
        each = np.repeat(triangle, x.shape[2])
        return invert(self.mesh, each, x.reshape(2, -1)).reshape(x.shape)

    def G(self, X: Floats, find: Ints | None = None) -> Floats:
        """Points (2, n_facets, n) of the facets, from the lower to the higher vertex."""
        triangle, points, _ = self._along_facets(X, find)
        return self.F(points, triangle)

    def detDG(self, X: Floats, find: Ints | None = None) -> Floats:
        """Length of the facet per unit of its coordinate, (n_facets, n)."""
        triangle, points, direction = self._along_facets(X, find)
        tangent = np.einsum("dktn,kt->dtn", self.DF(points, triangle), direction)
        return np.asarray(np.linalg.norm(tangent, axis=0))

    def normals(self, X: Floats, tind: Ints, find: Ints, t2f: Ints) -> Floats:
        """Unit normals out of the triangles ``tind`` at X, (2, n_facets, n)."""
        local = np.argmax(t2f[:, tind] == find, axis=0)
        outward = np.array([[0.0, 1.0, -1.0], [-1.0, 1.0, 0.0]])[:, local]
        normal = np.einsum("kdtn,kt->dtn", self.invDF(X, tind), outward)
        return np.asarray(normal / np.linalg.norm(normal, axis=0))

    def _along_facets(self, X: Floats, find: Ints | None) -> tuple[Ints, Floats, Floats]:
        """A triangle of each facet, the points X (1, n) in it, the facet's direction."""
        facets = np.arange(self.topology.facets.shape[1]) if find is None else np.asarray(find)
        triangle = self.topology.f2t[0, facets]
        local = np.argmax(self.topology.t2f[:, triangle] == facets, axis=0)
        low, high = np.array(EDGES)[local].T
        corners = nodes(1)
        direction = corners[:, high] - corners[:, low]
        return triangle, corners[:, low, None] + direction[:, :, None] * X[0], direction

    def _nodes(self, tind: Ints | None) -> Floats:
        return self.mesh.nodes if tind is None else self.mesh.nodes[:, :, tind]

    def _shapes(self, X: Floats) -> tuple[Floats, Floats]:
        if self._shaped is None or self._shaped[0] is not X:
            values, slopes = tabulated(np.reshape(X, (2, -1)), self.mesh.order)
            points = X.shape[1:]
            self._shaped = (X, values.reshape(-1, *points), slopes.reshape(2, -1, *points))
        return self._shaped[1:]


def _summed(nodes: Floats, shapes: Floats) -> Floats:
    """(2, n_triangles, n): the sum of nodes (2, n_nodes, n_triangles) times shapes.

    shapes : (n_nodes, n), or (n_nodes, n_triangles, n) where each triangle has its own
    """
    if shapes.ndim == 3:
        return np.asarray(np.einsum("dit,itn->dtn", nodes, shapes))
    return np.asarray(np.matmul(nodes.transpose(0, 2, 1), shapes))
