"""The pencil: stiffness and mass as sums of named parts on one space."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field, replace
from functools import cached_property, reduce
from operator import add
from typing import Any

import numpy as np

from membrane.errors import SolveError
from membrane.records.arrays import Floats, Ints
from membrane.records.mesh import Mesh
from membrane.records.pattern import Pattern

FEW = 4
"""Parts that are summed up one by one, each time going through all that is there."""

AT_REST = 1e-10
"""Forces on a constant shape, over the largest entry, below which they are rounding."""


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
    """K = sum of stiffness parts, M = sum of mass parts; K u = lambda M u.

    pattern : of all parts, the stiffness first; a pencil at other numbers comes with it
    """

    space: Space
    stiffness: tuple[Part, ...]
    mass: tuple[Part, ...]
    moves_rigidly: bool
    pattern: Pattern | None = field(default=None, compare=False, repr=False)

    @cached_property
    def K(self) -> Any:
        """(n_free, n_free) CSC, N/m: symmetric, positive (semi)definite."""
        if self.pattern is None:
            return _combine(self.stiffness)
        return self.pattern.total((q, part.scale) for q, part in enumerate(self.stiffness))

    @cached_property
    def M(self) -> Any:
        """(n_free, n_free) CSC, kg: symmetric, positive definite."""
        if self.pattern is None:
            return _combine(self.mass)
        first = len(self.stiffness)
        return self.pattern.total((q, part.scale) for q, part in enumerate(self.mass, first))

    def shifted(self, shift: float) -> Any:
        """K - shift M, CSC; with the entries of K where M has the same ones."""
        from scipy.sparse import csc_array

        K, M = self.K, self.M
        same = np.array_equal(K.indptr, M.indptr) and np.array_equal(K.indices, M.indices)
        if not same:
            return K - shift * M
        return csc_array((K.data - shift * M.data, K.indices, K.indptr), shape=K.shape)

    @property
    def keys(self) -> frozenset[str]:
        """The study keys that scale a part."""
        return frozenset(part.key for part in (*self.stiffness, *self.mass))

    def at(self, numbers: Mapping[str, float]) -> Pencil:
        """The pencil with other numbers, SI, for some of its keys; nothing is assembled.

        The first call finds the parts' common pattern; after it, one costs a few sums.
        Raises SolveError for a key that scales no part.
        """
        unknown = sorted(set(numbers) - self.keys)
        if unknown:
            raise SolveError(f"no matrix of this head is scaled by {unknown[0]}; mesh it anew.")
        stiffness = _rescaled(self.stiffness, numbers)
        return replace(
            self,
            stiffness=stiffness,
            mass=_rescaled(self.mass, numbers),
            moves_rigidly=_rigid(self.space, stiffness),
            pattern=self._shared_pattern,
        )

    @cached_property
    def _shared_pattern(self) -> Pattern:
        return self.pattern or Pattern.of([p.matrix for p in (*self.stiffness, *self.mass)])


def _rescaled(parts: tuple[Part, ...], numbers: Mapping[str, float]) -> tuple[Part, ...]:
    return tuple(replace(part, scale=float(numbers.get(part.key, part.scale))) for part in parts)


def _rigid(space: Space, stiffness: tuple[Part, ...]) -> bool:
    """Whether a constant shape costs no energy."""
    if len(space.free) < space.dofs:
        return False
    return all(_balanced(part.matrix) for part in stiffness if part.scale > 0.0)


def _balanced(A: Any) -> bool:
    forces = np.abs(A @ np.ones(A.shape[0])).max(initial=0.0)
    return bool(forces <= AT_REST * np.abs(A.data).max(initial=0.0))


def _combine(parts: tuple[Part, ...]) -> Any:
    """The sum of all parts, at once where they are many: one by one they would take long."""
    from scipy.sparse import coo_array, csc_array

    first = parts[0].matrix
    if all(_alike(part.matrix, first) for part in parts):
        data = sum(part.scale * part.matrix.data for part in parts)
        return csc_array((data, first.indices, first.indptr), shape=first.shape)
    if len(parts) <= FEW:
        total = reduce(add, (part.scale * part.matrix.tocsc() for part in parts))
        return csc_array(total)
    entries = [coo_array(part.matrix) for part in parts]
    data = np.concatenate([p.scale * e.data for p, e in zip(parts, entries, strict=True)])
    rows, columns = (np.concatenate([e.coords[axis] for e in entries]) for axis in (0, 1))
    return csc_array((data, (rows, columns)), shape=parts[0].matrix.shape)


def _alike(A: Any, B: Any) -> bool:
    """Whether two symmetric matrices share one pattern, by rows or by columns."""
    return A.format in ("csr", "csc") and getattr(B, "indices", None) is A.indices
