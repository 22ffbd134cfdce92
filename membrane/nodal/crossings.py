"""Crossings: the lattice edges on which a mode changes its sign."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cache

import numpy as np

from membrane.records.arrays import Bools, Floats, Ints
from membrane.subdivision import Subdivision
from membrane.triangle import lattice

NOISE = 1e-9
"""Where a mode stays below this share of its maximum, its sign means nothing."""


@dataclass(frozen=True)
class LatticeEdges:
    """The edges of a lattice.

    ends : (2, n_edges), lattice indices, lower first
    of_triangle : (3, parts**2), edge numbers of each small triangle's sides 0-1, 1-2, 2-0
    """

    ends: Ints
    of_triangle: Ints


@dataclass(frozen=True)
class Crossings:
    """Every place where a nodal line crosses a lattice edge, each once.

    mode, triangle, edge : (n,), the mode, a mesh triangle and the lattice edge in it
    segments : (2, m), pairs of crossings that a line joins within one small triangle
    """

    mode: Ints
    triangle: Ints
    edge: Ints
    segments: Ints


@cache
def lattice_edges(parts: int) -> LatticeEdges:
    """All edges of ``lattice(parts)``."""
    grid = lattice(parts)
    count = grid.points.shape[1]
    pairs = np.sort(np.stack([grid.triangles, np.roll(grid.triangles, -1, axis=0)]), axis=0)
    keys, numbers = np.unique(pairs[0] * count + pairs[1], return_inverse=True)
    return LatticeEdges(np.stack(np.divmod(keys, count)), numbers.reshape(3, -1))


def find_crossings(divided: Subdivision, values: Floats, largest: Floats) -> Crossings:
    """All crossings of all modes.

    values : (n_points, n), of which only the signs count
    largest : (n,), the greatest magnitude of each mode
    """
    small = divided.lattice.triangles
    positive = (values >= 0.0)[divided.numbers]
    heard = (np.abs(values) > NOISE * largest)[divided.numbers]
    corners, audible = positive[small], heard[small].any(axis=0)
    mixed = audible & (corners.any(axis=0) != corners.all(axis=0))
    cell, triangle, mode = np.nonzero(mixed)
    edges = _crossed(corners[:, cell, triangle, mode], cell, divided.lattice.parts)
    ends = lattice_edges(divided.lattice.parts).ends[:, edges]
    low, high = np.sort(divided.numbers[ends, triangle], axis=0)
    keys = (mode * divided.count + low) * divided.count + high
    _, first, numbers = np.unique(keys, return_index=True, return_inverse=True)
    both = np.stack([np.stack([mode, mode]), np.stack([triangle, triangle]), edges])
    mode, triangle, edges = both.reshape(3, -1)[:, first]
    return Crossings(mode, triangle, edges, numbers.reshape(2, -1))


def _crossed(corners: Bools, cell: Ints, parts: int) -> Ints:
    """(2, n): the two crossed edges of small triangles whose corners differ in sign."""
    ahead = corners != np.roll(corners, -1, axis=0)
    alone = np.argmax(ahead & np.roll(ahead, 1, axis=0), axis=0)
    of_triangle = lattice_edges(parts).of_triangle
    return np.stack([of_triangle[alone, cell], of_triangle[(alone + 2) % 3, cell]])
