"""A regular subdivision of the reference triangle, for pictures and searches."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cache

import numpy as np

from membrane.records.arrays import Floats, Ints


@dataclass(frozen=True)
class Lattice:
    """The reference triangle cut into ``parts`` squared equal triangles.

    points : (2, n), row by row from the lower edge
    triangles : (3, parts**2), counter-clockwise
    """

    parts: int
    points: Floats
    triangles: Ints


@cache
def lattice(parts: int) -> Lattice:
    """The lattice with ``parts`` pieces along each edge."""
    index: dict[tuple[int, int], int] = {}
    for j in range(parts + 1):
        for i in range(parts + 1 - j):
            index[i, j] = len(index)
    upright = [
        (index[i, j], index[i + 1, j], index[i, j + 1])
        for j in range(parts)
        for i in range(parts - j)
    ]
    hanging = [
        (index[i + 1, j], index[i + 1, j + 1], index[i, j + 1])
        for j in range(parts)
        for i in range(parts - 1 - j)
    ]
    points = np.array(list(index), dtype=float).T / parts
    return Lattice(parts, points, np.array(upright + hanging, dtype=np.int64).T)
