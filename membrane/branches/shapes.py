"""Modes at one point of a path, and how much those of two points are alike."""

from __future__ import annotations

from dataclasses import dataclass, replace
from itertools import pairwise
from typing import Any

import numpy as np

from membrane.records.arrays import Floats


@dataclass(frozen=True)
class Shapes:
    """The lowest modes of a pencil, in a space that is the same all along the path.

    eigenvalues : (m,), rising
    vectors : (n, m)
    mass : (n, n), M there, sparse or not
    """

    eigenvalues: Floats
    vectors: Floats
    mass: Any

    def turned(self, columns: slice, turn: Floats) -> Shapes:
        """The same modes, those of some columns combined by an orthogonal ``turn``."""
        vectors = self.vectors.copy()
        vectors[:, columns] = vectors[:, columns] @ turn
        return replace(self, vectors=vectors)

    def clusters(self, same: float) -> list[slice]:
        """Columns of eigenvalues that lie within ``same`` of the next, relative."""
        values = self.eigenvalues
        apart = np.nonzero(np.diff(values) > same * np.abs(values[1:]))[0] + 1
        ends = [0, *apart.tolist(), len(values)]
        return [slice(a, b) for a, b in pairwise(ends)]


def overlaps(one: Shapes, other: Shapes) -> Floats:
    """(m_one, m_other) cosines between modes, in the mean of both masses."""
    mass = (one.mass + other.mass) / 2
    moved = mass @ other.vectors
    lengths_other = np.sqrt(np.sum(other.vectors * moved, axis=0))
    lengths_one = np.sqrt(np.sum(one.vectors * (mass @ one.vectors), axis=0))
    return np.asarray(one.vectors.T @ moved / np.outer(lengths_one, lengths_other))


def turned_onto(one: Shapes, other: Shapes, same: float) -> Shapes:
    """``other`` with the modes of each of its clusters turned to be most like ``one``'s.

    Within a cluster a solver's modes are any of their combinations; the turn is that of the
    orthogonal Procrustes problem (Schonemann, Psychometrika 31 (1966) 1, from memory).
    """
    alike = overlaps(one, other)
    for columns in other.clusters(same):
        size = columns.stop - columns.start
        if size > 1:
            caught = np.sum(alike[:, columns] ** 2, axis=1)
            rows = np.sort(np.argsort(-caught, kind="stable")[:size])
            left, _, right = np.linalg.svd(alike[rows, columns])
            other = other.turned(columns, right.T @ left.T)
    return other
