"""The lowest modes of a pencil, with a count that proves that none is missing."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace
from typing import Any

import numpy as np

from membrane.cholesky import negative_count
from membrane.errors import SolveError
from membrane.modes.clusters import cluster_numbers, whole_clusters
from membrane.modes.orient import oriented
from membrane.modes.rigid import rigid_mode, rigid_shift
from membrane.pitch import CENTS_PER_EIGENVALUE
from membrane.records.arrays import Floats
from membrane.records.modes import Modes
from membrane.records.pencil import Pencil

Eigensolver = Callable[[Any, Any, int, float], tuple[Floats, Floats]]

LOOSEST = 1e-5
"""Relative distance from which two eigenvalues are never taken for one."""

EXTRAS = 2
"""Modes asked for beyond the wanted ones, to see the end of the last cluster."""

REPAIR = 30
"""Modes asked for beyond the last ones where the count finds that one was missed: for so many
more, the solver looks deeper and for one copy more of each."""

SOLVES = 4
"""How often a count that does not close is solved again, each time for more modes."""


def extract(pencil: Pencil, count: int, solver: Eigensolver, accuracy: float) -> Modes:
    """At least ``count`` modes: the last cluster is never cut.

    accuracy : wanted, in cents; frequencies that it cannot tell apart are one cluster
    Raises SolveError where the count does not close.
    """
    same = min(accuracy / CENTS_PER_EIGENVALUE, LOOSEST)
    size = pencil.M.shape[0]
    if size <= count:
        raise SolveError(f"the mesh carries only {size} modes; ask for fewer than {size}.")
    ask = count + EXTRAS
    for _ in range(SOLVES):
        values, vectors = _lowest(pencil, min(ask, size), solver)
        kept = whole_clusters(values, count, same)
        if kept == len(values) < size:
            ask += 3 * EXTRAS  # a cluster so long is rare, and may go on
            continue
        missing = _count_below(pencil, values, kept) - kept
        if missing == 0:
            return _modes(pencil, values[:kept], vectors[:, :kept], same)
        ask += max(missing, REPAIR)
    raise SolveError(
        f"the count of modes did not close after {SOLVES} solves; "
        "ask for another number of modes or another accuracy."
    )


def lowest(modes: Modes, count: int) -> Modes:
    """The ``count`` lowest of some modes, or a few more where they would cut a cluster."""
    kept = int(np.searchsorted(modes.clusters, modes.clusters[count - 1], side="right"))
    return replace(
        modes,
        eigenvalues=modes.eigenvalues[:kept],
        vectors=modes.vectors[:, :kept],
        clusters=modes.clusters[:kept],
    )


def count_up_to(pencil: Pencil, frequency: float) -> int:
    """How many modes lie below a frequency, Hz, by the inertia of K - s M."""
    return negative_count(pencil.shifted((2 * np.pi * frequency) ** 2))


def _lowest(pencil: Pencil, count: int, solver: Eigensolver) -> tuple[Floats, Floats]:
    """Eigenpairs in rising order, M-orthonormal; a rigid mode is exact."""
    from membrane.eigensolvers import dense

    shift = rigid_shift(pencil) if pencil.moves_rigidly else 0.0
    crowded = 2 * count + 2 > pencil.M.shape[0]
    values, vectors = (dense.solve if crowded else solver)(pencil.K, pencil.M, count, shift)
    if pencil.moves_rigidly:
        vectors[:, 0] = rigid_mode(pencil)
    values, vectors = _rayleigh_ritz(pencil, vectors)
    if pencil.moves_rigidly:
        values[0], vectors[:, 0] = 0.0, rigid_mode(pencil)
    return values, vectors


def _rayleigh_ritz(pencil: Pencil, vectors: Floats) -> tuple[Floats, Floats]:
    """Best values in the span of the vectors: upper bounds, whatever the solver left."""
    from scipy.linalg import eigh

    K, M = vectors.T @ (pencil.K @ vectors), vectors.T @ (pencil.M @ vectors)
    values, mix = eigh((K + K.T) / 2, (M + M.T) / 2)
    return values, vectors @ mix


def _count_below(pencil: Pencil, values: Floats, kept: int) -> int:
    """Eigenvalues of the pencil below the middle of the gap after the kept ones."""
    if kept == len(values):
        return kept  # every mode that the mesh carries was asked for
    limit = (values[kept - 1] + values[kept]) / 2
    return negative_count(pencil.shifted(limit))


def _modes(pencil: Pencil, values: Floats, vectors: Floats, same: float) -> Modes:
    space = pencil.space
    clusters = cluster_numbers(values, same)
    whole = np.zeros((space.dofs, len(values)))
    whole[space.free] = oriented(pencil, vectors, clusters)
    return Modes(space, values, whole, clusters, complete=True)
