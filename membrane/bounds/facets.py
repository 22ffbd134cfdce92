"""The sides of a mesh's triangles, each counted once."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass

import numpy as np

from membrane.records.arrays import Bools, Floats, Ints
from membrane.triangle import EDGES


@dataclass(frozen=True)
class Facets:
    """Sides of triangles.

    ends : (2, n), vertex numbers, the lower first
    of_triangle : (3, n_triangles), numbers of the sides in the order of ``EDGES``
    """

    ends: Ints
    of_triangle: Ints

    @property
    def size(self) -> int:
        """How many there are."""
        return int(self.ends.shape[1])

    def among(self, pairs: Iterable[Ints]) -> Bools:
        """(n,): which have their ends among the vertex pairs (2, m), the lower first."""
        wanted = np.hstack([np.empty((2, 0), dtype=np.int64), *pairs])
        return np.isin(_keys(self.ends), _keys(wanted))

    def beside(self, edge: int) -> tuple[Ints, Ints]:
        """Sides, and one triangle of each, whose side number ``edge`` it is: each side once."""
        count = self.of_triangle.shape[1]
        sides, first = np.unique(self.of_triangle, return_index=True)
        here = first // count == edge
        return sides[here], first[here] % count

    def lengths(self, vertices: Floats) -> Floats:
        """(n,), metres, of the straight sides."""
        return np.asarray(np.hypot(*(vertices[:, self.ends[1]] - vertices[:, self.ends[0]])))


def facets_of(triangles: Ints) -> Facets:
    """The sides of ``triangles`` (3, n), whose vertices may come in any order."""
    pairs = np.sort(np.hstack([triangles[list(edge)] for edge in EDGES]), axis=0)
    _, first, number = np.unique(_keys(pairs), return_index=True, return_inverse=True)
    return Facets(pairs[:, first], number.reshape(3, -1))


def _keys(pairs: Ints) -> Ints:
    return np.asarray(pairs[0].astype(np.int64) << 32 | pairs[1].astype(np.int64))
