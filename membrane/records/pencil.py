"""The pencil: stiffness and mass as sums of named parts on one space."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from typing import Any

import numpy as np

from membrane.records.arrays import Floats, Ints
from membrane.records.mesh import Mesh


@dataclass(frozen=True)
class Space:
    """Continuous piecewise polynomials on a mesh.

    degree : of the polynomials
    element_dofs : (n_local, n_triangles), ordered as ``membrane.triangle.nodes(degree)``
    locations : (2, n_dofs), metres
    free : (n_free,), the dofs that no fixed edge holds
    """

    mesh: Mesh
    degree: int
    element_dofs: Ints
    locations: Floats
    free: Ints

    @property
    def dofs(self) -> int:
        """How many dofs there are, held ones included."""
        return int(self.locations.shape[1])


@dataclass(frozen=True)
class Part:
    """A matrix on the free dofs and the study key that scales it.

    matrix : (n_free, n_free) sparse, symmetric, for the key at 1 SI unit
    """

    key: str
    scale: float
    matrix: Any


@dataclass(frozen=True)
class Pencil:
    """K = sum of stiffness parts, M = sum of mass parts; K u = lambda M u."""

    space: Space
    stiffness: tuple[Part, ...]
    mass: tuple[Part, ...]
    moves_rigidly: bool

    @cached_property
    def K(self) -> Any:
        """(n_free, n_free) CSC, N/m: symmetric, positive (semi)definite."""
        return _combine(self.stiffness)

    @cached_property
    def M(self) -> Any:
        """(n_free, n_free) CSC, kg: symmetric, positive definite."""
        return _combine(self.mass)


def _combine(parts: tuple[Part, ...]) -> Any:
    """The sum of all parts at once: one by one, many small ones would take long."""
    from scipy.sparse import coo_array, csc_array

    first = parts[0].matrix
    if all(_alike(part.matrix, first) for part in parts):
        data = sum(part.scale * part.matrix.data for part in parts)
        return csc_array((data, first.indices, first.indptr), shape=first.shape)
    entries = [coo_array(part.matrix) for part in parts]
    data = np.concatenate([p.scale * e.data for p, e in zip(parts, entries, strict=True)])
    rows, columns = (np.concatenate([e.coords[axis] for e in entries]) for axis in (0, 1))
    return csc_array((data, (rows, columns)), shape=parts[0].matrix.shape)


def _alike(A: Any, B: Any) -> bool:
    """Whether two symmetric matrices share one pattern, by rows or by columns."""
    return A.format in ("csr", "csc") and getattr(B, "indices", None) is A.indices
