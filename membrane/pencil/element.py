"""The nodal triangle of any degree as a scikit-fem element."""

from __future__ import annotations

from functools import cache
from typing import Any

import numpy as np
from skfem.element.element_h1 import ElementH1
from skfem.refdom import RefTri

from membrane.records.arrays import Floats
from membrane.triangle import nodes, shapes


class ElementTriNodal(ElementH1):  # type: ignore[misc]  # scikit-fem is untyped
    """Lagrange element on ``membrane.triangle.nodes(degree)``.

    Facet dofs run from the lower to the higher vertex, so the mesh's triangles must have
    their vertex numbers rising.
    """

    refdom = RefTri

    def __init__(self, degree: int) -> None:
        self.maxdeg = degree
        self.nodal_dofs = 1
        self.facet_dofs = degree - 1
        self.interior_dofs = (degree - 1) * (degree - 2) // 2
        self.dofnames = ["u"] * (1 + self.facet_dofs + self.interior_dofs)
        self.doflocs = nodes(degree).T
        self._last: tuple[Any, Floats, Floats] | None = None

    def lbasis(self, X: Floats, i: int) -> tuple[Floats, Floats]:
        """Values and slopes of shape i at X, (2, n) or (2, n_triangles, n)."""
        values, slopes = self._all_shapes(X)
        return values[i], slopes[:, i]

    def _all_shapes(self, X: Floats) -> tuple[Floats, Floats]:
        # scikit-fem asks for one shape at a time, always at the same array of points
        if self._last is None or self._last[0] is not X:
            values, slopes = shapes(np.reshape(X, (2, -1)), self.maxdeg)
            points = X.shape[1:]
            self._last = (X, values.reshape(-1, *points), slopes.reshape(2, -1, *points))
        return self._last[1], self._last[2]


class ReferenceElement(ElementTriNodal):
    """The same element, its shapes never mapped: on many triangles they fill the memory."""

    def gbasis(self, mapping: Any, X: Floats, i: int, tind: Any = None) -> tuple[()]:
        return ()


@cache
def reference_element(degree: int) -> ReferenceElement:
    """The element of a degree from 1, for integrals over triangles."""
    return ReferenceElement(degree)


@cache
def element(degree: int) -> ElementTriNodal:
    """The element of a degree from 1."""
    return ElementTriNodal(degree)
